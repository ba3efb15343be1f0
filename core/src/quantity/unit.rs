//! Units as the person declared them, products of units, and steps of SI prefixes for axes and read-outs.

use super::Text;
use serde::{Deserialize, Serialize};
use std::fmt;

/// A unit exactly as declared; may be empty (a plain number or counts).
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(transparent)]
pub struct Unit(pub Text);

impl Unit {
    /// A unit from its text; surrounding space is dropped.
    #[must_use]
    pub fn new(text: &str) -> Self {
        Self(Text::from(text.trim()))
    }

    /// The text.
    #[must_use]
    pub fn as_str(&self) -> &str {
        &self.0
    }

    /// The unit of `self` divided by `other` to the given power: `mV/V kN⁻²`; power 0 is `self`.
    #[must_use]
    pub fn per(&self, other: &Unit, power: u32) -> String {
        if power == 0 || other.0.is_empty() {
            return self.0.to_string();
        }
        let base = if other.0.contains([' ', '/']) { format!("({})", other.0) } else { other.0.to_string() };
        format!("{} {base}⁻{}", self.0, superscript(power)).trim_start().to_owned()
    }
}

impl fmt::Display for Unit {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.0)
    }
}

/// A natural number in superscript figures.
#[must_use]
pub fn superscript(n: u32) -> String {
    n.to_string()
        .chars()
        .map(|c| ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'][c as usize - '0' as usize])
        .collect()
}

/// A whole number with its sign in superscript figures.
#[must_use]
pub fn superscript_signed(n: i32) -> String {
    let sign = if n < 0 { "⁻" } else { "" };
    format!("{sign}{}", superscript(n.unsigned_abs()))
}

/// How an axis or read-out shows a quantity: `shown = value · factor`, in `unit`.
#[derive(Debug, Clone, PartialEq)]
pub struct Scale {
    /// Multiply a value in the declared unit by this.
    pub factor: f64,
    /// The unit to write, e.g. `µV/V`, or `×10⁻³ AU`.
    pub unit: String,
}

const PREFIXES: [(i32, &str); 9] =
    [(-12, "p"), (-9, "n"), (-6, "µ"), (-3, "m"), (0, ""), (3, "k"), (6, "M"), (9, "G"), (12, "T")];

/// SI unit symbols that take prefixes here; `g`, `Pa`, … (SI Brochure, 9th edition, tables 2 to 7).
const STEMS: [&str; 22] = [
    "V", "A", "N", "Pa", "m", "g", "s", "W", "J", "Hz", "Ω", "F", "H", "C", "T", "lx", "lm", "cd", "mol", "L", "Bq",
    "S",
];

/// The scale on which a quantity of the given magnitude reads with one to three figures before the mark.
///
/// Ratios step their numerator; other units (counts, %, pH, °C) keep their unit and show a power of ten.
#[must_use]
pub fn scale_for(unit: &Unit, magnitude: f64) -> Scale {
    scale_from(unit, magnitude, 0.001)
}

/// [`scale_for`] an axis, whose labels have less room than a figure in a sentence: a unit that takes no prefix
/// shows its power of ten below a hundredth already.
#[must_use]
pub fn scale_for_axis(unit: &Unit, magnitude: f64) -> Scale {
    scale_from(unit, magnitude, 0.01)
}

fn scale_from(unit: &Unit, magnitude: f64, plain_from: f64) -> Scale {
    let same = Scale { factor: 1.0, unit: unit.to_string() };
    if !magnitude.is_finite() || magnitude <= 0.0 || (0.1..1000.0).contains(&magnitude) {
        return same;
    }
    let exponent = libm::floor(libm::log10(magnitude)) as i32;
    let step = exponent.div_euclid(3) * 3;
    stepped(unit.as_str(), step).unwrap_or_else(|| {
        if (plain_from..100_000.0).contains(&magnitude) {
            return same;
        }
        let sign = format!("×10{}", superscript_signed(step));
        Scale { factor: libm::pow(10.0, f64::from(-step)), unit: format!("{sign} {unit}").trim_end().to_owned() }
    })
}

fn stepped(unit: &str, step: i32) -> Option<Scale> {
    let end = unit.find(['/', ' ', '⁻', '²', '³', '·']).unwrap_or(unit.len());
    if unit[end..].starts_with(['²', '³', '⁻']) {
        return None;
    }
    let (head, tail) = unit.split_at(end);
    let (now, stem) = PREFIXES
        .iter()
        .filter_map(|(e, p)| head.strip_prefix(p).map(|s| (*e, s)))
        .filter(|(e, s)| STEMS.contains(s) || (*e == 0 && STEMS.contains(&head)))
        .max_by_key(|(e, _)| i32::from(*e == 0))?;
    let target = (now + step).clamp(-12, 12);
    let (_, prefix) = PREFIXES.iter().find(|(e, _)| *e == target)?;
    Some(Scale { factor: libm::pow(10.0, f64::from(now - target)), unit: format!("{prefix}{stem}{tail}") })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn coefficient_units() {
        let (y, x) = (Unit::new("mV/V"), Unit::new("kN"));
        assert_eq!(y.per(&x, 0), "mV/V");
        assert_eq!(y.per(&x, 2), "mV/V kN⁻²");
        assert_eq!(Unit::new("V").per(&Unit::new("mg/L"), 1), "V (mg/L)⁻¹");
        assert_eq!(Unit::new("").per(&x, 1), "kN⁻¹");
    }

    #[test]
    fn axes_step_prefixes() {
        let s = scale_for(&Unit::new("mV/V"), 0.006);
        assert_eq!((s.unit.as_str(), s.factor), ("µV/V", 1000.0));
        let s = scale_for(&Unit::new("kN"), 0.012);
        assert_eq!((s.unit.as_str(), s.factor), ("N", 1000.0));
        let s = scale_for(&Unit::new("N"), 2_500_000.0);
        assert_eq!(s.unit, "MN");
        assert_eq!(scale_for(&Unit::new("kN"), 4.0).unit, "kN");
        assert_eq!(scale_for(&Unit::new("kN"), 0.4).unit, "kN");
        assert_eq!(scale_for(&Unit::new("m"), 0.02).unit, "mm");
        assert_eq!(scale_for(&Unit::new("mA"), 0.02).unit, "µA");
        assert_eq!(scale_for(&Unit::new("°C"), 0.02), Scale { factor: 1.0, unit: "°C".into() });
        assert_eq!(scale_for(&Unit::new("°C"), 0.005).unit, "°C");
        assert_eq!(scale_for_axis(&Unit::new("°C"), 0.005).unit, "×10⁻³ °C");
        assert_eq!(scale_for(&Unit::new("°C"), 2e-4).unit, "×10⁻⁶ °C");
        assert_eq!(scale_for(&Unit::new("m²"), 0.02).unit, "m²");
        assert_eq!(scale_for(&Unit::new("mg/L"), 0.02).unit, "µg/L");
        assert_eq!(scale_for(&Unit::new("kΩ"), 0.02).unit, "Ω");
    }
}
