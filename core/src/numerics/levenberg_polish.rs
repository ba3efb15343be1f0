//! From the place that doubles can reach to a proved minimum, in double-double.

use super::dd::Dd;
use super::householder::WHAT_MUST_REMAIN;
use super::least_squares::EXACT;
use super::levenberg::{Budget, Minimum, NotConverged, Problem, Tried};
use super::levenberg_curvature::Curvature;
use super::levenberg_place::{Place, scaled_residuals};
use super::levenberg_trust::{Progress, Trust};

/// Relative offset at which a fit has converged.
const OFFSET: f64 = 1e-18;
/// Part of the data below which a change of residuals is rounding.
const ROUNDING: f64 = 1e-29;
/// The same where a formula cancels inside and no step makes it smaller.
const ROUNDING_OF_FORMULA: f64 = 1e-25;
/// Largest last step, as a part of the parameter or of its uncertainty.
const LAST_STEP: f64 = 1e-13;
/// Part of a parameter's influence that must be left between the end of the search and the minimum.
const FADED: f64 = 1e-3;
/// Relative offset from which Newton steps are tried.
const NEAR: f64 = 0.1;
/// Most steps in double-double.
const STEPS: usize = 40;

/// What figures are held against.
struct Scale {
    /// Length of the whitened data, scaled like the residuals.
    size: f64,
    /// Lengths of the columns of the Jacobian where double-double begins, per unit of the parameter.
    lengths: Vec<f64>,
}

/// ‖Xⱼ‖ in the units of the parameters.
fn influences(place: &Place<Dd>) -> Vec<f64> {
    place.lengths.iter().zip(&place.exponents).map(|(length, e)| libm::scalbn(*length, *e)).collect()
}

/// Goes on in double-double, from where the search in doubles ended and how, until the minimum is proved.
pub(super) fn polish<P: Problem>(
    problem: &P,
    mut place: Place<Dd>,
    search: Progress,
    size: f64,
    budget: &mut Budget,
) -> Result<Minimum, NotConverged> {
    let scale = Scale { size: libm::scalbn(size, -place.data_exponent), lengths: influences(&place) };
    if search == Progress::Exhausted && place.relative_offset() >= NEAR {
        // Still on its way in doubles: more digits would only make it slower.
        return Err(NotConverged::Exhausted { tried: tried(&place, budget) });
    }
    let mut trust = Trust::new(&place, 1.0, 1e-31);
    for _ in 0..STEPS {
        let regular = place.factor.is_regular(WHAT_MUST_REMAIN);
        if regular && is_flat(&place, scale.size, ROUNDING) {
            return prove(problem, &place, &scale, budget);
        }
        if regular && place.relative_offset() < NEAR {
            if let Some(next) = newton(problem, &place, budget) {
                place = next;
                continue;
            }
            if is_flat(&place, scale.size, ROUNDING_OF_FORMULA) {
                return prove(problem, &place, &scale, budget);
            }
        }
        match trust.advance(problem, &mut place, budget) {
            Progress::Moved => {}
            Progress::Settled => return Err(stuck(problem, &place, &scale, budget)),
            Progress::Exhausted => break,
        }
    }
    Err(NotConverged::Exhausted { tried: tried(&place, budget) })
}

/// Whether nothing that counts is left along the tangent space.
fn is_flat(place: &Place<Dd>, size: f64, rounding: f64) -> bool {
    let along = place.projected_length();
    place.relative_offset() <= OFFSET || along <= rounding * (size + place.extent())
}

/// The place after a Newton step if that at least halves what is left along the tangent space.
fn newton<P: Problem>(problem: &P, place: &Place<Dd>, budget: &mut Budget) -> Option<Place<Dd>> {
    let cost = place.b.len() + 2;
    if budget.evaluations + cost > budget.limit {
        return None;
    }
    budget.iterations += 1;
    budget.evaluations += cost;
    let step = match Curvature::at(problem, place) {
        Some(curvature) => curvature.step(place)?,
        None => place.factor.back_substitute(&place.projected),
    };
    let b = place.moved(&step);
    let residuals = scaled_residuals(problem, &b, place.data_exponent)?;
    let next = Place::new(problem, b, residuals, place.data_exponent)?;
    let better = next.projected_length() < 0.5 * place.projected_length();
    (better && next.factor.is_regular(WHAT_MUST_REMAIN)).then_some(next)
}

/// The minimum, if the last step is small and the second derivatives agree.
fn prove<P: Problem>(
    problem: &P,
    place: &Place<Dd>,
    scale: &Scale,
    budget: &mut Budget,
) -> Result<Minimum, NotConverged> {
    last_step_is_small(place, scale, budget)?;
    let exact = place.length() <= EXACT * scale.size;
    if !exact {
        budget.evaluations += place.b.len();
        let curvature = Curvature::at(problem, place).map_or(1.0, |c| c.least());
        if curvature <= 0.0 {
            return Err(NotConverged::Saddle { curvature, tried: tried(place, budget) });
        }
    }
    let scaled = |r: &Dd| if exact { Dd::ZERO } else { r.times_power_of_two(place.data_exponent) };
    let column = |(c, e): (&Vec<Dd>, &i32)| -> Vec<Dd> {
        c.iter().map(|v| -v.times_power_of_two(e + place.data_exponent)).collect()
    };
    Ok(Minimum {
        parameters: place.b.clone(),
        residuals: place.residuals.iter().map(scaled).collect(),
        jacobian: place.columns.iter().zip(&place.exponents).map(column).collect(),
        iterations: budget.iterations,
        evaluations: budget.evaluations,
        relative_offset: if exact { 0.0 } else { place.relative_offset() },
    })
}

/// No parameter would move by a part of itself that counts; one that is zero, not by a part of its
/// uncertainty. A parameter that still runs while its influence fades has no minimum.
fn last_step_is_small(place: &Place<Dd>, scale: &Scale, budget: &Budget) -> Result<(), NotConverged> {
    let step = place.factor.back_substitute(&place.projected);
    let inverse = place.factor.inverse_triangle();
    let influences = influences(place);
    for (j, s) in step.iter().enumerate() {
        let own = libm::scalbn(place.b[j].to_f64().abs(), place.exponents[j]);
        let s = s.to_f64().abs();
        if s <= LAST_STEP * own {
            continue;
        }
        let remains = influences[j] / scale.lengths[j];
        if remains < FADED {
            return Err(NotConverged::Singular { parameter: j, remains, tried: tried(place, budget) });
        }
        let row: f64 = inverse.iter().map(|c| c[j].to_f64() * c[j].to_f64()).sum();
        let nothing = (s + own) * place.lengths[j] <= EXACT * scale.size;
        if s > LAST_STEP * place.length() * libm::sqrt(row) && !nothing {
            return Err(NotConverged::Stalled { tried: tried(place, budget) });
        }
    }
    Ok(())
}

/// Why there was no way down from a place that is no minimum.
fn stuck<P: Problem>(problem: &P, place: &Place<Dd>, scale: &Scale, budget: &Budget) -> NotConverged {
    let tried = tried(place, budget);
    let least = place.factor.remains.iter().enumerate().find(|(_, part)| **part <= WHAT_MUST_REMAIN);
    if let Some((parameter, remains)) = least {
        return NotConverged::Singular { parameter, remains: *remains, tried };
    }
    let curvature = Curvature::at(problem, place).map_or(1.0, |c| c.least());
    if curvature <= 0.0 && is_flat(place, scale.size, ROUNDING_OF_FORMULA) {
        return NotConverged::Saddle { curvature, tried };
    }
    NotConverged::Stalled { tried }
}

fn tried(place: &Place<Dd>, budget: &Budget) -> Tried {
    Tried {
        iterations: budget.iterations,
        evaluations: budget.evaluations,
        relative_offset: place.relative_offset(),
        residual_length: libm::scalbn(place.length(), place.data_exponent),
        parameters: place.b.iter().map(|b| b.to_f64()).collect(),
    }
}
