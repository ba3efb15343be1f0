//! Column heads that carry a unit: `load, kN`, `load (kN)`, `load [kN]`, `load / kN`, or a row of units below.
//!
//! Edge cases: brackets that hold no unit (`reading (last)`) stay part of the name; square brackets always hold a
//! unit; a row of units may leave cells empty or hold a dash.

/// A column head taken apart.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Heading {
    /// The text without its unit.
    pub(super) name: String,
    /// The unit, without brackets.
    pub(super) unit: Option<String>,
}

/// Takes the unit off a column head.
pub(super) fn heading(text: &str) -> Heading {
    let text = text.trim();
    let (name, unit) = bracketed(text, '[', ']', |_| true)
        .or_else(|| bracketed(text, '(', ')', is_unit))
        .or_else(|| text.rsplit_once(" / ").filter(|(_, unit)| is_unit(unit)))
        .or_else(|| text.rsplit_once(',').filter(|(_, unit)| is_unit(unit)))
        .unwrap_or((text, ""));
    if name.trim().is_empty() {
        return Heading { name: text.to_owned(), unit: None };
    }
    let unit = unit.trim();
    Heading { name: name.trim().to_owned(), unit: (!unit.is_empty()).then(|| unit.to_owned()) }
}

fn bracketed(text: &str, open: char, close: char, holds_unit: fn(&str) -> bool) -> Option<(&str, &str)> {
    let (name, unit) = text.strip_suffix(close)?.rsplit_once(open)?;
    holds_unit(unit).then_some((name, unit))
}

/// A cell of a row of units, without brackets.
pub(super) fn unit_cell(text: &str) -> &str {
    let text = text.trim();
    let inner = |open, close| text.strip_prefix(open).and_then(|t| t.strip_suffix(close));
    inner('[', ']').or_else(|| inner('(', ')')).unwrap_or(text).trim()
}

/// Whether every cell that holds anything holds a unit or a dash, and at least one a unit.
pub(super) fn is_units_row(cells: &[String]) -> bool {
    let mut units = cells.iter().map(|cell| unit_cell(cell)).filter(|u| !is_blank_unit(u)).peekable();
    units.peek().is_some() && units.all(is_unit)
}

/// Whether a cell of a row of units says that there is none.
pub(super) fn is_blank_unit(unit: &str) -> bool {
    matches!(unit, "" | "-" | "–" | "—")
}

/// Whether the text is a product or quotient of known units, such as `mV/V`, `kN·m`, `m/s²`, `µg L⁻¹`.
fn is_unit(text: &str) -> bool {
    let text = text.trim();
    if text.len() > 24 {
        return false;
    }
    let mut factors = text
        .split(['/', '·', '*', ' ', '(', ')', '^'])
        .map(|factor| factor.trim_end_matches(is_of_exponent))
        .filter(|factor| !factor.is_empty())
        .peekable();
    factors.peek().is_some() && factors.all(|f| is_symbol(f) || has_prefix(f))
}

fn is_of_exponent(c: char) -> bool {
    c.is_ascii_digit() || "-−⁻⁰¹²³⁴⁵⁶⁷⁸⁹".contains(c)
}

fn has_prefix(factor: &str) -> bool {
    let mut chars = factor.chars();
    chars.next().is_some_and(|c| "pnuµμmcdhkMGT".contains(c)) && PREFIXED.contains(&chars.as_str())
}

fn is_symbol(factor: &str) -> bool {
    PREFIXED.contains(&factor) || PLAIN.contains(&factor)
}

/// Symbols that take SI prefixes: units of the SI (SI Brochure, 9th edition, 2.3), the litre, and of common practice
/// the bar, the electronvolt, `M` for mol/L, and `Ohm`, `ohm` for `Ω`.
const PREFIXED: [&str; 32] = [
    "m", "g", "s", "A", "K", "mol", "cd", "Hz", "N", "Pa", "J", "W", "C", "V", "F", "Ω", "Ω", "ohm", "Ohm", "S", "T",
    "H", "lm", "lx", "Bq", "Gy", "L", "l", "bar", "eV", "M", "rad",
];

/// Symbols without prefixes: units of common practice in workshops and laboratories.
const PLAIN: [&str; 35] = [
    "°C", "degC", "°F", "degF", "%", "‰", "ppm", "ppb", "°", "deg", "min", "h", "d", "dB", "pH", "psi", "lbf", "lb",
    "in", "ft", "kgf", "rpm", "counts", "count", "cts", "digits", "digit", "LSB", "AU", "FS", "RH", "NTU", "mmHg",
    "inHg", "atm",
];

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn units_come_off_the_head_in_each_way_of_writing() {
        for (text, name, unit) in [
            ("load, kN", "load", "kN"),
            ("load (kN)", "load", "kN"),
            ("load [kN]", "load", "kN"),
            ("load / kN", "load", "kN"),
            ("Reading (mV/V)", "Reading", "mV/V"),
            ("flow [m³/h at 15 °C]", "flow", "m³/h at 15 °C"),
            ("c (µg L⁻¹)", "c", "µg L⁻¹"),
            ("u(standard) [°C]", "u(standard)", "°C"),
        ] {
            assert_eq!(heading(text), Heading { name: name.into(), unit: Some(unit.into()) }, "{text}");
        }
    }

    #[test]
    fn other_heads_stay_whole() {
        for text in ["reading (last)", "Smith, Jo", "u(reading)", "in/out", "[kN]", "rate and/or time", ""] {
            assert_eq!(heading(text), Heading { name: text.into(), unit: None }, "{text}");
        }
    }

    #[test]
    fn rows_of_units_are_told_from_names() {
        let row = |text: &str| text.split('|').map(str::to_owned).collect::<Vec<_>>();
        for text in ["kN|mV/V", "[kN]|(mV/V)|-", "|µm|", "°C|1/K", "m/s^2|%"] {
            assert!(is_units_row(&row(text)), "{text}");
        }
        for text in ["load|signal", "kN|signal", "|", "-|-", "1|2"] {
            assert!(!is_units_row(&row(text)), "{text}");
        }
    }
}
