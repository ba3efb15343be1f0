//! The figures of a column, in the order of the numbers row and of the report.

use super::{
    column::ends,
    near_zero::{self, ZeroFacts},
    types::FitEvaluation,
    words,
};
use crate::{
    distributions::chi2_upper,
    fit::Weights,
    model::Family,
    project::{Project, figures::Figure},
    quantity::format::{ABSENT, p_value, significant, with_standard_uncertainty, with_unit},
};

/// All figures of a fitted column.
#[must_use]
pub fn figures(project: &Project, e: &FitEvaluation, zeros: &ZeroFacts) -> Vec<Figure> {
    let mut all = coefficients(e);
    all.extend(read_back(project, e));
    all.extend(scatter(project, e));
    all.extend(near_zero::figures(project, e, zeros));
    all.extend(adequacy(e));
    all
}

fn coefficients(e: &FitEvaluation) -> Vec<Figure> {
    let shown = |value: f64, u: Option<f64>| match u {
        Some(u) => with_standard_uncertainty(value, u),
        None => significant(value, 6),
    };
    e.coefficients
        .iter()
        .map(|c| {
            let text = shown(c.value, c.standard_uncertainty);
            Figure::new(&format!("coefficient.{}", c.name), &c.printed, Some(c.value), text, &c.unit)
        })
        .collect()
}

fn read_back(project: &Project, e: &FitEvaluation) -> Vec<Figure> {
    let unit = project.plan.input.unit.as_str();
    let worst = words::worst(&e.departure);
    let text = worst.map_or_else(
        || ABSENT.to_owned(),
        |w| {
            let error = w.read_back_error.unwrap_or(0.0);
            let at = with_unit(&words::plain(w.x), unit);
            format!("{} at {at}", with_unit(&significant(error.abs(), 2), unit))
        },
    );
    let error = worst.and_then(|w| w.read_back_error);
    let mut all = vec![Figure::new("worst_read_back", "worst read-back", error, text, "")];
    if e.fit.family == Family::Declared {
        return all;
    }
    let bend = e.departure.leftover_bend.and_then(|b| b.input);
    let bend_text = match bend {
        Some(b) if e.shape.rejected() => significant(b, 2),
        Some(_) if e.shape.too_few.is_none() => "none seen".to_owned(),
        _ => "too few points".to_owned(),
    };
    let bend_unit = if e.shape.rejected() && bend.is_some() { unit } else { "" };
    all.push(Figure::new("leftover_bend", "leftover bend", bend, bend_text, bend_unit));
    let left_out = e.departure.left_out.and_then(|l| l.input);
    let left_text = left_out.map_or_else(|| ABSENT.to_owned(), |l| significant(l, 2));
    all.push(Figure::new(
        "left_out",
        "left-out error",
        left_out,
        left_text,
        if left_out.is_some() { unit } else { "" },
    ));
    all
}

fn scatter(project: &Project, e: &FitEvaluation) -> Vec<Figure> {
    let plain = e.fit.weights == Weights::Equal && !e.fit.family.fitted_in_measurand() && e.fit.both_axes.is_none();
    let label = match (&e.fit.family, plain) {
        (Family::Declared, _) => "RMS error",
        (_, true) => "residual SD",
        // Weighted sums have no unit of their own: the SD of one reading has.
        (_, false) => "reading SD",
    };
    let text = |v: Option<f64>| v.map_or_else(|| ABSENT.to_owned(), |v| significant(v, 2));
    let (output, input) = if plain { (e.fit.residual_sd, e.residual_sd_input) } else { at_mid_range(e) };
    let chi_square = e.fit.chi_square().filter(|(_, nu)| *nu > 0).map(|(value, nu)| {
        let text = format!("{} ({nu}), {}", significant(value, 3), p_value(chi2_upper(value, nu as f64)));
        Figure::new("chi_square", "χ²", Some(value), text, "")
    });
    let mut all = vec![
        Figure::new("residual_sd", label, output, text(output), project.plan.output.unit.as_str()),
        Figure::new(
            "residual_sd_input",
            &format!("{label} as input"),
            input,
            text(input),
            project.plan.input.unit.as_str(),
        ),
    ];
    all.extend(chi_square);
    all
}

/// The SD of one reading in the middle of the range: output unit, and as input.
fn at_mid_range(e: &FitEvaluation) -> (Option<f64>, Option<f64>) {
    let middle = ends(&e.fit).map(|(low, high)| f64::midpoint(low, high));
    let output = middle.zip(e.fit.scatter_sd()).map(|(x, s)| (x, s * libm::sqrt(e.fit.variance_at(x))));
    let usable = output.filter(|(_, sd)| sd.is_finite());
    (usable.map(|(_, sd)| sd), usable.map(|(x, sd)| sd / e.fit.curve.derivative(x).abs()).filter(|v| v.is_finite()))
}

fn adequacy(e: &FitEvaluation) -> Vec<Figure> {
    let nu = e.fit.degrees_of_freedom;
    let mut all = vec![Figure::new("degrees_of_freedom", "degrees of freedom", Some(nu as f64), nu.to_string(), "")];
    if let Some(test) = &e.lack_of_fit {
        let text = format!("F = {} ({}, {}), {}", significant(test.f, 3), test.df1, test.df2, p_value(test.p));
        all.push(Figure::new("lack_of_fit", "lack of fit", Some(test.f), text, ""));
    }
    if let Some(p) = e.shape.p {
        all.push(Figure::new("shape", "shape", Some(p), p_value(p), ""));
    }
    if let Some(r2) = e.fit.r_squared() {
        all.push(Figure::new("r_squared", "R²", Some(r2), significant(r2, 6), ""));
    }
    all
}
