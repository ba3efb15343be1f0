//! The scenarios: one entry each.
//!
//! Expected rates other than 0.95 were measured beforehand with another program (20 000 to 200 000 runs a
//! figure), or are the well-known harm of a method that this studio does not use.

use super::question::Question::{Coefficients, Convert, ConvertPooled, Mean};
use super::scenario::{
    Common, Design, Scatter, Scenario, Truth, line, line_through_zero, logarithm, logistic, quadratic,
};
use assize_core::fit::Weights;

/// Places among standards from 1 to 10.
const PLACES: [f64; 3] = [2.0, 5.5, 9.5];

/// Places among standards from 1 to 100.
const WIDE: [f64; 3] = [2.0, 50.0, 95.0];

/// All scenarios in the order of the table.
#[must_use]
pub fn scenarios() -> Vec<Scenario> {
    [plain(), kinds(), proportional(), shared(), pooled(), both_axes(), curved()].concat()
}

/// Families linear in their coefficients: every interval is exact.
fn plain() -> Vec<Scenario> {
    let of = |name, truth: fn() -> Truth, levels, repeats| {
        Scenario::new(name, truth(), Design::new(levels, repeats), PLACES)
    };
    vec![
        of("line, 6×1", line, 6, 1),
        of("line, 11×1", line, 11, 1),
        of("line, 11×3", line, 11, 3),
        of("line through zero, 6×1", line_through_zero, 6, 1),
        of("line through zero, 11×3", line_through_zero, 11, 3),
        of("quadratic, 6×1", quadratic, 6, 1),
        of("quadratic, 11×1", quadratic, 11, 1),
        of("quadratic, 11×3", quadratic, 11, 3),
        of("logarithm, 6×1", logarithm, 6, 1),
        of("logarithm, 11×1", logarithm, 11, 1),
        of("logarithm, 11×3", logarithm, 11, 3),
        of("line, 6×3, SD pooled from repeats", line, 6, 3).weights(Weights::ReplicatesConstant),
    ]
}

/// The kind of weights decides what the scatter is. Weights from the SD of each level by itself are wild with
/// three repeats: their interval is the one that the studio warns of.
fn kinds() -> Vec<Scenario> {
    let of = |name, levels, repeats| Scenario::new(name, line(), Design::new(levels, repeats), PLACES);
    let wide = Design::new(6, 3).over(1.0, 100.0);
    let grows = |name, scatter| Scenario::new(name, line(), wide, WIDE).scatter(scatter);
    vec![
        of("line, 6×1, SD told", 6, 1).told(),
        of("line, 11×3, SD told", 11, 3).told(),
        grows("line, 6×3, SD ∝ y, one relative SD from repeats", Scatter::OfSignal(0.02))
            .weights(Weights::ReplicatesProportional)
            .asking(&[Convert(1), Convert(3)]),
        of("line, 6×3, raw 1/s² of each level", 6, 3)
            .weights(Weights::Raw)
            .asking(&[])
            .expecting(Mean, &[0.836, 0.843, 0.836]),
    ]
}

/// SD proportional to the value over two decades: the weights must be there, and the variance of the new
/// reading must be the one at the candidate value.
fn proportional() -> Vec<Scenario> {
    let of = |name, levels, repeats| {
        let design = Design::new(levels, repeats).over(1.0, 100.0);
        Scenario::new(name, line(), design, WIDE).scatter(Scatter::OfValue(0.02)).weights(Weights::InverseX2)
    };
    let even = |name, levels, repeats| of(name, levels, repeats).weights(Weights::Equal).asking(&[]);
    vec![
        of("line, SD ∝ x, weights 1/x², 6×1", 6, 1),
        of("line, SD ∝ x, weights 1/x², 11×1", 11, 1),
        of("line, SD ∝ x, weights 1/x², 11×3", 11, 3),
        even("line, SD ∝ x, weights forgotten, 6×1", 6, 1).expecting(Convert(1), &[1.000, 0.948, 0.819]),
        even("line, SD ∝ x, weights forgotten, 11×1", 11, 1).expecting(Convert(1), &[1.000, 0.959, 0.798]),
        even("line, SD ∝ x, weights forgotten, 11×3", 11, 3).expecting(Convert(1), &[1.000, 0.970, 0.780]),
    ]
}

/// An error that all standards share moves the whole curve and leaves no trace in the residuals: known to
/// the fit it is carried along, unknown it is lost.
fn shared() -> Vec<Scenario> {
    let of = |name, common| {
        let scenario = Scenario::new(name, line(), Design::new(6, 3), PLACES).at(&[8.0]);
        scenario.common(common).asking(&[Convert(1), Convert(10)])
    };
    let untold = of("line, 6×3, standards share 1 %, not told", Common::RelativeUntold(0.01)).asking(&[]);
    vec![
        of("line, 6×3, standards share 1 %", Common::Relative(0.01)),
        untold.expecting(Convert(1), &[0.887]).expecting(Convert(10), &[0.677]),
        of("line, 6×3, standards share 5 %", Common::Relative(0.05)),
        of("line, 6×3, own errors of the standards", Common::Own(0.1)),
    ]
}

/// The scatter of the k readings themselves helps to know the SD.
fn pooled() -> Vec<Scenario> {
    let of = |name, levels, repeats, k| {
        Scenario::new(name, line(), Design::new(levels, repeats), PLACES).asking(&[ConvertPooled(k)])
    };
    vec![
        of("line, 6×1, k = 2", 6, 1, 2),
        of("line, 6×1, k = 3", 6, 1, 3),
        of("line, 11×1, k = 3", 11, 1, 3),
        of("line, 11×3, k = 6", 11, 3, 6),
    ]
}

/// Own errors of the standards as large as one reading's SD, both taken into the fit.
fn both_axes() -> Vec<Scenario> {
    let of = |name, truth: fn() -> Truth, levels, repeats, u| {
        let design = Design::new(levels, repeats);
        Scenario::new(name, truth(), design, PLACES).common(Common::Own(u)).in_both_axes()
    };
    let usual = [Coefficients, Mean, Convert(1), Convert(10)];
    vec![
        of("line, 6×1, both axes, SDs told", line, 6, 1, 0.1).told().asking(&usual),
        of("line, 11×1, both axes, SDs told", line, 11, 1, 0.1).told().asking(&usual),
        of("quadratic, 11×1, both axes, SDs told", quadratic, 11, 1, 0.1).told().asking(&usual),
        of("logarithm, 11×1, both axes, SDs told", logarithm, 11, 1, 0.03).told().asking(&usual),
        of("line, 6×3, both axes, SD of readings from repeats", line, 6, 3, 0.1).asking(&[Convert(1), Convert(10)]),
    ]
}

/// A logistic near and far from its asymptotes: the set holds where a symmetric interval would not.
fn curved() -> Vec<Scenario> {
    let design = Design::new(8, 2).over(1.0, 1000.0).in_ratios();
    let of = |name, sd| {
        let scenario = Scenario::new(name, logistic(), design, PLACES).scatter(Scatter::Even(sd));
        scenario.at(&[5.0, 50.0, 200.0, 300.0]).asking(&[Convert(1)])
    };
    vec![of("logistic, 8×2, SD 0.02", 0.02), of("logistic, 8×2, SD 0.05", 0.05)]
}
