//! Ticks of an axis: 1-2-5 steps in the unit that reads well. Knows no window.

use assize_core::quantity::{
    Unit,
    format::decimals,
    unit::{Scale, scale_for_axis},
};

/// Two ends of an axis, lower first, in the declared unit.
pub(super) type Range = (f64, f64);

/// One tick.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Tick {
    /// Where it stands, declared unit.
    pub(super) value: f64,
    /// Its label in the shown unit, without the unit.
    pub(super) text: String,
}

/// How an axis is shown.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Axis {
    /// Factor and unit of the labels.
    pub(super) scale: Scale,
    /// Ticks inside the range, ascending.
    pub(super) ticks: Vec<Tick>,
}

/// Ticks for a range that is `length` points long, at least `apart` points from each other.
///
/// A range that is empty, reversed or not finite has no ticks. `signed` writes `+4` for `4`.
pub(super) fn axis(unit: &Unit, range: Range, (length, apart): (f32, f32), signed: bool) -> Axis {
    let (low, high) = range;
    let scale = scale_for_axis(unit, low.abs().max(high.abs()));
    let span = (high - low) * scale.factor;
    if !span.is_finite() || span <= 0.0 || length <= 0.0 {
        return Axis { scale, ticks: Vec::new() };
    }
    let step = step_up(span * f64::from(apart / length));
    let places = places(step);
    let first = (low * scale.factor / step - 1e-9).ceil();
    let last = (high * scale.factor / step + 1e-9).floor();
    // The least distance bounds the count, however long the range.
    let count = (last - first).clamp(-1.0, 1000.0) as i32;
    let ticks = (0..=count)
        .map(|i| {
            let shown = (first + f64::from(i)) * step;
            let text = decimals(shown, places);
            let plus = if signed && shown > 0.0 { "+" } else { "" };
            Tick { value: shown / scale.factor, text: format!("{plus}{text}") }
        })
        .collect();
    Axis { scale, ticks }
}

/// The smallest 1, 2 or 5 times a power of ten that is not below `least`.
fn step_up(least: f64) -> f64 {
    let power = 10f64.powf(least.log10().floor());
    let lead = least / power;
    let step = [1.0, 2.0, 5.0].into_iter().find(|s| lead <= s * (1.0 + 1e-9)).unwrap_or(10.0);
    step * power
}

/// Decimals that tell neighbouring multiples of a step apart.
fn places(step: f64) -> usize {
    let exponent = (step.log10() + 1e-9).floor();
    if exponent < 0.0 { (-exponent).min(15.0) as usize } else { 0 }
}

/// A number raised to one significant figure, for "40 times coarser".
pub(super) fn raised(times: f64) -> f64 {
    if !times.is_finite() || times <= 1.0 {
        return 1.0;
    }
    let power = 10f64.powf(times.log10().floor());
    (times / power - 1e-9).ceil() * power
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(axis: &Axis) -> Vec<&str> {
        axis.ticks.iter().map(|t| t.text.as_str()).collect()
    }

    #[test]
    fn steps_are_one_two_or_five() {
        let axis = axis(&Unit::new("kN"), (-0.2, 5.3), (400.0, 60.0), false);
        assert_eq!(axis.scale.unit, "kN");
        assert_eq!(texts(&axis), ["0", "1", "2", "3", "4", "5"]);
        assert_eq!(step_up(0.11), 0.2);
        assert_eq!(step_up(3.0), 5.0);
        assert_eq!(step_up(7.0), 10.0);
    }

    #[test]
    fn small_ranges_step_the_prefix_and_carry_signs() {
        let axis = axis(&Unit::new("mV/V"), (-0.009, 0.009), (200.0, 30.0), true);
        assert_eq!(axis.scale.unit, "µV/V");
        assert_eq!(texts(&axis), ["−5", "0", "+5"]);
        assert!((axis.ticks[2].value - 0.005).abs() < 1e-12);
    }

    #[test]
    fn a_range_without_length_has_no_ticks() {
        for range in [(1.0, 1.0), (2.0, 1.0), (f64::NAN, 1.0), (0.0, f64::INFINITY)] {
            assert!(axis(&Unit::new("V"), range, (100.0, 30.0), false).ticks.is_empty(), "{range:?}");
        }
    }

    #[test]
    fn extreme_ranges_stay_bounded() {
        let unit = Unit::new("count");
        for range in [(1e300, 2e300), (-1e-300, 1e-300), (1e9, 1e9 + 1.0)] {
            let axis = axis(&unit, range, (300.0, 40.0), false);
            assert!(!axis.ticks.is_empty() && axis.ticks.len() < 12, "{range:?}: {:?}", axis.ticks);
        }
    }

    #[test]
    fn coarser_scales_are_said_in_one_figure() {
        assert_eq!(raised(37.5), 40.0);
        assert_eq!(raised(5.2), 6.0);
        assert_eq!(raised(0.4), 1.0);
        assert_eq!(raised(400.0), 400.0);
    }
}
