//! A declared function whose numbers are those of the fit, cut short.

use super::{
    Facts,
    context::{expanded_by, furthest},
    finding,
};
use crate::{
    fit::{Fit, declared},
    model::{Family, Formula},
    project::evaluate::{
        finding::{Finding, Place, Severity},
        words::plain,
    },
    quantity::format::{significant, with_unit},
};

/// A value may move by this share of its uncertainty.
const SHARE: f64 = 0.1;

/// Declared numbers that agree with a fit to the digits typed, but move values all the same.
pub(super) fn findings(facts: &Facts<'_>) -> Option<Finding> {
    let text = &facts.project.declared.as_ref()?.formula;
    let fit = fitted(facts)?;
    if !cut_short(text, &fit.coefficients) {
        return None;
    }
    let formula: Formula = text.parse().ok()?;
    let typed = declared(&formula, &fit.points).ok()?;
    let (at, moved) = furthest(fit, &typed)?;
    let plan = &facts.project.plan;
    let u = expanded_by(fit, plan.level, at, 1)?;
    (moved.abs() > SHARE * u).then(|| {
        let unit = plan.input.unit.as_str();
        let message = format!(
            "the declared function is the fit with digits cut off: they move the answer by {} at {}, U is {}",
            with_unit(&significant(moved.abs(), 2), unit),
            with_unit(&plain(at), unit),
            with_unit(&significant(u, 2), unit)
        );
        let hint = "copy the coefficients with all digits shown in Result";
        finding("digits-cut", Severity::Look, Place::Record, message, hint)
    })
}

/// The fit that the declared numbers may come from: the one that speaks, else the advised one.
fn fitted<'a>(facts: &Facts<'a>) -> Option<&'a Fit> {
    let advised = || facts.columns.iter().find(|c| facts.advice.column.as_ref() == Some(&c.spec));
    let column = facts.speaking.filter(|c| c.spec.family != Family::Declared).or_else(advised)?;
    Some(&column.outcome.as_ref().ok()?.fit)
}

/// So many digits, trailing zeros not counted, are no coincidence: a nominal 4 + 1.6·x agrees with every good
/// instrument.
const TELLING: usize = 3;

/// Whether every coefficient stands in the text, rounded to the digits typed there.
fn cut_short(text: &str, coefficients: &[f64]) -> bool {
    let mut numbers = numbers(text);
    let telling = |typed: f64| {
        let shortest = format!("{typed:e}");
        shortest.split('e').next().unwrap_or("").chars().filter(char::is_ascii_digit).count() >= TELLING
    };
    numbers.iter().any(|(typed, _)| telling(*typed))
        && coefficients.iter().all(|b| {
            let place = numbers.iter().position(|(typed, digits)| agrees(*b, *typed, *digits));
            place.map(|at| numbers.remove(at)).is_some()
        })
}

/// Whether |b| rounds to the number at its own digits.
fn agrees(b: f64, typed: f64, digits: usize) -> bool {
    let rounded: f64 = format!("{:.*e}", digits.saturating_sub(1), b.abs()).parse().unwrap_or(f64::NAN);
    (rounded - typed).abs() <= 1e-12 * typed.abs()
}

/// The numbers of a formula with their significant digits; exponents of powers are not among them.
fn numbers(text: &str) -> Vec<(f64, usize)> {
    let characters: Vec<char> = text.chars().collect();
    let mut found = Vec::new();
    let (mut at, mut before) = (0, ' ');
    while at < characters.len() {
        let c = characters[at];
        if c.is_alphabetic() {
            // Digits of a name such as log10 are no number.
            at += characters[at..].iter().take_while(|c| c.is_alphanumeric() || **c == '_').count();
            before = 'x';
            continue;
        }
        if !(c.is_ascii_digit() || c == '.') {
            before = if c.is_whitespace() { before } else { c };
            at += 1;
            continue;
        }
        let end = number_end(&characters, at);
        let word: String = characters[at..end].iter().map(|c| if *c == '−' { '-' } else { *c }).collect();
        let mantissa = word.split(['e', 'E']).next().unwrap_or("");
        let figures: String = mantissa.chars().filter(char::is_ascii_digit).collect();
        let digits = figures.trim_start_matches('0').len();
        if let (Ok(value), false) = (word.parse::<f64>(), before == '^') {
            found.push((value, digits));
        }
        (at, before) = (end, '0');
    }
    found
}

/// Where the number that starts at `at` ends.
fn number_end(text: &[char], at: usize) -> usize {
    let digits = |from: usize| from + text[from..].iter().take_while(|c| c.is_ascii_digit() || **c == '.').count();
    let end = digits(at);
    if !matches!(text.get(end), Some('e' | 'E')) {
        return end;
    }
    let signed = matches!(text.get(end + 1), Some('+' | '-' | '−'));
    let first = end + 1 + usize::from(signed);
    if text.get(first).is_some_and(char::is_ascii_digit) { digits(first) } else { end }
}

#[cfg(test)]
mod tests {
    use super::{cut_short, numbers};

    #[test]
    fn numbers_of_a_formula_with_their_digits() {
        let found = numbers("0.0026 + 0.401*x − 2.80e-3*x^2");
        assert_eq!(found, [(0.0026, 2), (0.401, 3), (0.0028, 3)]);
        assert_eq!(numbers("log10(x) * 4"), [(4.0, 1)]);
    }

    #[test]
    fn only_the_fit_itself_is_recognised() {
        let fit = [0.002_613, 0.400_52, -0.002_796];
        assert!(cut_short("0.0026 + 0.401*x − 2.80e-3*x^2", &fit));
        assert!(!cut_short("0.0026 + 0.4*x − 2.7e-3*x^2", &fit));
        assert!(!cut_short("4 + 1.6*x", &[4.012, 1.5987, 0.1]));
        assert!(!cut_short("0.4*x", &fit));
        assert!(!cut_short("4.00 + 1.60*x", &[4.001, 1.6002]), "nominal");
    }
}
