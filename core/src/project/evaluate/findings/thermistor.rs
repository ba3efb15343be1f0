//! Thermistor coefficients that no bead has: a wrong unit, crossed wires or a bad point.

use super::{context::Context, finding};
use crate::{
    model::{Family, Units},
    project::evaluate::finding::{Finding, Severity},
    quantity::format::{significant, with_unit},
};

/// A of every ordinary bead lies between 0 and this, K⁻¹.
const LARGEST_A: f64 = 3e-3;

/// The widest span, in kelvin, that three terms follow.
const WIDEST: f64 = 150.0;

/// Negative C, A out of its range, resistance that rises, or a span too wide for three terms.
pub(super) fn findings(c: &Context<'_>) -> Option<Finding> {
    let (severity, message) = match c.fit().family {
        Family::SteinhartHart => odd_terms(c).or_else(|| wide(c))?,
        Family::Beta => rising(c)?,
        _ => return None,
    };
    let hint = "check the wiring, the units of R and T, and each point before trusting it";
    Some(finding("thermistor-odd", severity, c.place(), message, hint))
}

fn odd_terms(c: &Context<'_>) -> Option<(Severity, String)> {
    let &[a, b, cubic] = c.fit().coefficients.as_slice() else {
        return None;
    };
    let per_kelvin = |v: f64| with_unit(&significant(v, 3), "K⁻¹");
    if !(0.0..=LARGEST_A).contains(&a) {
        let message = format!("A = {} is that of no ordinary bead (0 to 0.003 K⁻¹)", per_kelvin(a));
        return Some((Severity::Look, message));
    }
    if b + 3.0 * cubic * lowest_square(c)? <= 0.0 {
        let message =
            format!("with B = {} and C = {} the resistance does not fall throughout", per_kelvin(b), per_kelvin(cubic));
        return Some((Severity::Look, message));
    }
    if cubic >= 0.0 {
        return None;
    }
    // A sign that chance could have given is worth a word, no more.
    let u = c.fit().standard_uncertainties().and_then(|u| u.get(2)).copied();
    let sure = u.is_none_or(|u| cubic.abs() > c.fit().coverage_factor(c.project.plan.level) * u);
    let doubt = u.map_or(String::new(), |u| format!(" (u = {})", significant(u, 2)));
    let message = format!("C = {}{doubt} is negative; beads have about 10⁻⁷ K⁻¹", per_kelvin(cubic));
    Some((if sure { Severity::Look } else { Severity::Note }, message))
}

/// The square of ln(R/Ω) at the end of the range where B + 3C(ln R)² is smallest.
fn lowest_square(c: &Context<'_>) -> Option<f64> {
    let ohm = Units::of(&c.project.plan.input.unit, &c.project.plan.output.unit).ohm?;
    let cubic = c.fit().coefficients.get(2)?;
    let squares = c.fit().points.iter().map(|p| {
        let log = libm::log(p.y * ohm);
        log * log
    });
    if *cubic < 0.0 { squares.reduce(f64::max) } else { squares.reduce(f64::min) }
}

fn wide(c: &Context<'_>) -> Option<(Severity, String)> {
    let kelvins = Units::of(&c.project.plan.input.unit, &c.project.plan.output.unit).temperature?.kelvins_per_step();
    let (low, high) = c.ends()?;
    let span = kelvins * (high - low);
    (span > WIDEST).then(|| {
        // Where enough points find no fault of shape, the three terms did follow.
        let severity =
            if c.e.shape.too_few.is_some() || c.e.shape.rejected() { Severity::Look } else { Severity::Note };
        let kelvin = with_unit(&significant(span, 3), "K");
        (severity, format!("{kelvin} are a wide span for three terms, which follow a bead over some 150 K"))
    })
}

fn rising(c: &Context<'_>) -> Option<(Severity, String)> {
    let beta = *c.fit().coefficients.first()?;
    (beta <= 0.0).then(|| {
        let kelvin = with_unit(&significant(beta, 3), "K");
        (Severity::Look, format!("β = {kelvin}: the resistance rises with temperature, so this is no such bead"))
    })
}
