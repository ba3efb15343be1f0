//! Thermistors whose numbers no bead has.

use super::bench::{Bench, caught, plant};
use crate::{model::Family, numerics::streams::Stream, project::plan::Quantity};

/// Eleven temperatures from `low` in °C over `span`, three times each, resistance in ohm by Steinhart and
/// Hart with `cubic`, 2 mK of scatter.
fn bead(low: f64, span: f64, cubic: f64) -> impl Fn(&mut Stream) -> Bench {
    move |stream| {
        let mut bench = Bench::new();
        bench.project.plan.input = Quantity::new("temperature", "°C");
        bench.project.plan.output = Quantity::new("resistance", "Ω");
        for i in 0..33 {
            let t = low + span * f64::from(i % 11) / 10.0;
            let kelvin = t + 273.15 + 0.002 * stream.normal();
            let r = resistance([1.1e-3, 2.4e-4, cubic], kelvin);
            bench.apply(t, &[r]);
        }
        bench.family(Family::SteinhartHart)
    }
}

/// The resistance at which 1/T = A + B ln R + C (ln R)³, by halving ln R between 1 and 15.
fn resistance([a, b, c]: [f64; 3], kelvin: f64) -> f64 {
    let (mut low, mut high) = (1.0_f64, 15.0_f64);
    for _ in 0..80 {
        let middle = f64::midpoint(low, high);
        if a + b * middle + c * middle.powi(3) < 1.0 / kelvin { low = middle } else { high = middle }
    }
    low.exp()
}

#[test]
fn a_negative_cubic_term_is_caught() {
    caught("thermistor-odd", bead(0.0, 60.0, -3e-7));
    assert_eq!(plant("thermistor-odd", bead(0.0, 60.0, 1e-7)).any(), 0);
}

#[test]
fn a_wide_span_is_noted_where_three_terms_follow() {
    let wide = plant("thermistor-odd", bead(-40.0, 170.0, 1e-7));
    assert!(wide.any() == wide.runs && wide.loud() * 10 <= wide.runs, "{wide:?}");
    assert!(wide.messages[0].starts_with("170 K"), "{}", wide.messages[0]);
}

/// Resistances that are a thousand times too large: a unit mixed up.
#[test]
fn a_wrong_unit_of_resistance_is_caught() {
    let met = plant("thermistor-odd", |stream| {
        let mut bench = bead(0.0, 60.0, 1e-7)(stream);
        for i in 0..bench.project.readings.len() {
            bench.project.readings.get_mut(i).unwrap().value *= 1000.0;
        }
        bench
    });
    assert!(met.loud() * 10 >= met.runs * 8, "{met:?}");
}
