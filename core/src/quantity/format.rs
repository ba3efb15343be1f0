//! The one formatter: window, command line and report print numbers through here.
//!
//! Minus is U+2212. A standard uncertainty stands in parentheses, `0.4005(12)`; ± is only for an expanded
//! uncertainty. Uncertainties carry two significant digits and the value is rounded to the same place
//! (JCGM 100:2008, 7.2.2 and 7.2.6).

use super::unit::superscript_signed;

/// Shown where a quantity does not exist.
pub const ABSENT: &str = "–";

/// A number with a fixed count of decimals.
#[must_use]
pub fn decimals(value: f64, places: usize) -> String {
    if !value.is_finite() {
        return ABSENT.to_owned();
    }
    let text = format!("{value:.places$}");
    // A rounded −0.00 carries no sign.
    let text = if text.bytes().any(|b| (b'1'..=b'9').contains(&b)) { text } else { text.replace('-', "") };
    text.replace('-', "−")
}

/// The decimal exponent of a non-zero number once rounded to `digits` significant digits.
#[must_use]
pub fn exponent(value: f64, digits: usize) -> i32 {
    if value == 0.0 || !value.is_finite() {
        return 0;
    }
    let places = digits.saturating_sub(1);
    let text = format!("{value:.places$e}");
    text.split_once('e').and_then(|(_, e)| e.parse().ok()).unwrap_or(0)
}

/// A number with `digits` significant digits; powers of ten where plain figures would be long.
#[must_use]
pub fn significant(value: f64, digits: usize) -> String {
    if value == 0.0 {
        return "0".to_owned();
    }
    to_place(value, exponent(value, digits) - i32::try_from(digits).unwrap_or(1) + 1)
}

/// A number rounded to the decimal place 10^`place`; powers of ten where plain figures would be long.
#[must_use]
pub fn to_place(value: f64, place: i32) -> String {
    if !value.is_finite() {
        return ABSENT.to_owned();
    }
    let top = exponent(value, 17).max(place);
    if (place > 0 && top >= 6) || (place < -9 && top < -4) || place < -14 || top >= 9 {
        let shift = libm::pow(10.0, f64::from(-top.abs()));
        let mantissa = if top < 0 { value / shift } else { value * shift };
        let places = usize::try_from(top - place).unwrap_or(0);
        return format!("{}×10{}", decimals(mantissa, places), superscript_signed(top));
    }
    if place > 0 {
        let unit = libm::pow(10.0, f64::from(place));
        return decimals(libm::round(value / unit) * unit, 0);
    }
    decimals(value, place.unsigned_abs() as usize)
}

/// The place of the second significant digit of an uncertainty.
#[must_use]
pub fn place_of(uncertainty: f64) -> i32 {
    exponent(uncertainty, 2) - 1
}

/// A value with its standard uncertainty: `0.4005(12)`, `−3.1608(49)×10⁻¹⁵`.
///
/// A zero or unknown uncertainty prints the value with six significant digits and no parentheses.
#[must_use]
pub fn with_standard_uncertainty(value: f64, u: f64) -> String {
    if u.is_nan() || u <= 0.0 || u.is_infinite() || !value.is_finite() {
        return significant(value, 6);
    }
    let place = place_of(u);
    let top = exponent(value, 17).max(place);
    let digits = libm::round(u * libm::pow(10.0, f64::from(-place)));
    if place < -7 || top >= 9 || (place > 0 && top >= 6) {
        let places = usize::try_from(top - place).unwrap_or(0);
        let mantissa = value / libm::pow(10.0, f64::from(top));
        return format!("{}({digits:.0})×10{}", decimals(mantissa, places), superscript_signed(top));
    }
    if place >= 0 {
        return format!("{}({})", to_place(value, place), decimals(digits * libm::pow(10.0, f64::from(place)), 0));
    }
    let unit_digits = if place == -1 { format!("{u:.1}") } else { format!("{digits:.0}") };
    format!("{}({unit_digits})", decimals(value, place.unsigned_abs() as usize))
}

/// A number followed by its unit, one space between; no unit, no space.
#[must_use]
pub fn with_unit(text: &str, unit: &str) -> String {
    match unit {
        "" => text.to_owned(),
        "%" | "°" => format!("{text} {unit}"),
        _ => format!("{text} {unit}"),
    }
}

/// A probability from a test: `p = 0.62`, `p < 0.0001`.
#[must_use]
pub fn p_value(p: f64) -> String {
    match p {
        p if !p.is_finite() => format!("p {ABSENT}"),
        p if p < 0.0001 => "p < 0.0001".to_owned(),
        p if p < 0.01 => format!("p = {p:.4}"),
        p => format!("p = {p:.2}"),
    }
}

/// A signed number: `+0.5`, `−0.3`, `0`.
#[must_use]
pub fn signed(value: f64, digits: usize) -> String {
    let text = significant(value, digits);
    if value > 0.0 { format!("+{text}") } else { text }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn standard_uncertainty_in_parentheses() {
        // JCGM 100:2008, 7.2.2 for the notation; H.3.4 for the first two values.
        assert_eq!(with_standard_uncertainty(-0.171_217, 0.002_876), "−0.1712(29)");
        assert_eq!(with_standard_uncertainty(0.002_183, 0.000_667), "0.00218(67)");
        assert_eq!(with_standard_uncertainty(100.021_47, 0.000_35), "100.02147(35)");
        assert_eq!(with_standard_uncertainty(1_705_105.57, 292.0), "1.70511(29)×10⁶");
        assert_eq!(with_standard_uncertainty(48_400.0, 120.0), "48400(120)");
        assert_eq!(with_standard_uncertainty(12.34, 2.5), "12.3(2.5)");
        assert_eq!(with_standard_uncertainty(-3.160_818e-15, 4.866e-17), "−3.161(49)×10⁻¹⁵");
        assert_eq!(with_standard_uncertainty(0.4, 0.0996), "0.40(10)");
        assert_eq!(with_standard_uncertainty(0.0, 0.0012), "0.0000(12)");
        assert_eq!(with_standard_uncertainty(1.5, 0.0), "1.50000");
    }

    #[test]
    fn significant_digits() {
        assert_eq!(significant(0.023_456, 2), "0.023");
        assert_eq!(significant(-0.023_456, 2), "−0.023");
        assert_eq!(significant(9.99, 2), "10");
        assert_eq!(significant(123_456.0, 2), "120000");
        assert_eq!(significant(1_234_567.0, 2), "1.2×10⁶");
        assert_eq!(significant(1.234e-12, 3), "1.23×10⁻¹²");
        assert_eq!(significant(1e300, 2), "1.0×10³⁰⁰");
        assert_eq!(significant(1e-300, 2), "1.0×10⁻³⁰⁰");
        assert_eq!(significant(0.0, 3), "0");
        assert_eq!(significant(f64::NAN, 3), ABSENT);
        assert_eq!(decimals(-0.001, 2), "0.00");
        assert_eq!(signed(0.5, 1), "+0.5");
    }

    #[test]
    fn probabilities() {
        assert_eq!(p_value(0.617), "p = 0.62");
        assert_eq!(p_value(0.000_03), "p < 0.0001");
        assert_eq!(p_value(0.0041), "p = 0.0041");
    }
}
