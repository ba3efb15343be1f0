//! Units that the thermometer families understand: temperatures, and multiples of the ohm.

use crate::numerics::Real;

/// A temperature scale.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum TemperatureUnit {
    /// Kelvin.
    Kelvin,
    /// Degree Celsius.
    Celsius,
    /// Degree Fahrenheit.
    Fahrenheit,
}

impl TemperatureUnit {
    /// The scale that a unit's text names; `None` for any other text: a guess would be a wrong temperature.
    ///
    /// "°K" is nothing: the kelvin has had no degree sign since 1967.
    #[must_use]
    pub fn parse(unit: &str) -> Option<Self> {
        match unit.trim() {
            "K" | "\u{212a}" | "kelvin" | "Kelvin" => Some(Self::Kelvin),
            // The degree sign is often typed as º, and stands with C in one sign too.
            "°C" | "ºC" | "\u{2103}" | "degC" | "deg C" | "C" | "celsius" | "Celsius" | "degrees Celsius" => {
                Some(Self::Celsius)
            }
            "°F" | "ºF" | "\u{2109}" | "degF" | "deg F" | "F" | "fahrenheit" | "Fahrenheit" | "degrees Fahrenheit" => {
                Some(Self::Fahrenheit)
            }
            _ => None,
        }
    }

    /// The unit's symbol.
    #[must_use]
    pub fn symbol(self) -> &'static str {
        match self {
            Self::Kelvin => "K",
            Self::Celsius => "°C",
            Self::Fahrenheit => "°F",
        }
    }

    /// Kelvins in one step of this scale: 1 or 5/9; for differences, slopes and uncertainties.
    #[must_use]
    pub fn kelvins_per_step(self) -> f64 {
        match self {
            Self::Kelvin | Self::Celsius => 1.0,
            Self::Fahrenheit => 5.0 / 9.0,
        }
    }

    /// The thermodynamic temperature in kelvin of a number on this scale.
    ///
    /// # Formula
    ///
    /// t/°C + 273.15; (t/°F + 459.67)·5/9. The constants are exact in any arithmetic.
    pub fn to_kelvin<T: Real>(self, t: T) -> T {
        match self {
            Self::Kelvin => t,
            Self::Celsius => t + hundredths(27_315.0),
            Self::Fahrenheit => (t + hundredths(45_967.0)) * T::of(5.0) / T::of(9.0),
        }
    }

    /// The number on this scale of a temperature in kelvin.
    pub fn from_kelvin<T: Real>(self, kelvin: T) -> T {
        match self {
            Self::Kelvin => kelvin,
            Self::Celsius => kelvin - hundredths(27_315.0),
            Self::Fahrenheit => kelvin * T::of(9.0) / T::of(5.0) - hundredths(45_967.0),
        }
    }

    /// The temperature in °C of a number on this scale; °F without a detour by absolute zero.
    pub fn to_celsius<T: Real>(self, t: T) -> T {
        match self {
            Self::Kelvin => t - hundredths(27_315.0),
            Self::Celsius => t,
            Self::Fahrenheit => (t - T::of(32.0)) * T::of(5.0) / T::of(9.0),
        }
    }

    /// The number on this scale of a temperature in °C.
    pub fn from_celsius<T: Real>(self, celsius: T) -> T {
        match self {
            Self::Kelvin => celsius + hundredths(27_315.0),
            Self::Celsius => celsius,
            Self::Fahrenheit => celsius * T::of(9.0) / T::of(5.0) + T::of(32.0),
        }
    }
}

/// A decimal with two places, from its hundredfold: 273.15 itself is no double.
fn hundredths<T: Real>(hundredfold: f64) -> T {
    T::of(hundredfold) / T::of(100.0)
}

/// Ohms in one of the unit: 1 for Ω, 1000 for kΩ; `None` for a text that is no multiple of the ohm.
#[must_use]
pub fn resistance_factor(unit: &str) -> Option<f64> {
    let unit = unit.trim();
    // The letter omega and the ohm sign look alike.
    let prefix =
        ["\u{3a9}", "\u{2126}", "ohms", "Ohms", "ohm", "Ohm"].iter().find_map(|stem| unit.strip_suffix(stem))?;
    match prefix {
        "" => Some(1.0),
        "n" => Some(1e-9),
        // Micro sign and letter mu.
        "\u{b5}" | "\u{3bc}" => Some(1e-6),
        "m" | "milli" => Some(1e-3),
        "k" | "kilo" => Some(1e3),
        "M" | "mega" => Some(1e6),
        "G" | "giga" => Some(1e9),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::numerics::Dual;
    use TemperatureUnit::{Celsius, Fahrenheit, Kelvin};

    #[test]
    fn only_known_texts_are_temperatures() {
        for (text, unit) in [("K", Kelvin), (" °C ", Celsius), ("ºC", Celsius), ("℃", Celsius), ("°F", Fahrenheit)]
        {
            assert_eq!(TemperatureUnit::parse(text), Some(unit));
            assert_eq!(TemperatureUnit::parse(unit.symbol()), Some(unit));
        }
        for text in ["", "°K", "mK", "k", "c", "°", "deg", "kΩ", "°C/V", "Rankine", "°R"] {
            assert_eq!(TemperatureUnit::parse(text), None, "{text}");
        }
    }

    #[test]
    fn conversions_are_exact_at_the_fixed_points() {
        assert_eq!((Celsius.to_kelvin(0.0), Celsius.from_kelvin(273.15)), (273.15, 0.0));
        assert_eq!((Fahrenheit.to_celsius(32.0), Fahrenheit.to_celsius(212.0)), (0.0, 100.0));
        assert_eq!((Fahrenheit.from_celsius(-40.0), Fahrenheit.to_celsius(-40.0)), (-40.0, -40.0));
        assert_eq!(Fahrenheit.to_kelvin(-459.67), 0.0);
        assert!((Fahrenheit.to_kelvin(32.0) - 273.15).abs() < 1e-13);
        assert_eq!(Kelvin.to_kelvin(300.0), 300.0);
        for unit in [Kelvin, Celsius, Fahrenheit] {
            for t in [1.0, 77.3, 293.15, 1100.0] {
                assert!((unit.from_kelvin(unit.to_kelvin(t)) - t).abs() < 4e-13);
                assert!((unit.from_celsius(unit.to_celsius(t)) - t).abs() < 4e-13);
                let slope = unit.to_kelvin(Dual::variable(t)).slope;
                assert!((slope - unit.kelvins_per_step()).abs() < 2e-16);
                assert!((unit.to_celsius(Dual::variable(t)).slope - slope).abs() < 2e-16);
            }
        }
    }

    #[test]
    fn multiples_of_the_ohm() {
        let known =
            [("Ω", 1.0), ("\u{2126}", 1.0), ("kΩ", 1e3), ("MΩ", 1e6), ("mΩ", 1e-3), ("kohm", 1e3), (" Ohm", 1.0)];
        for (text, factor) in known {
            assert_eq!(resistance_factor(text), Some(factor), "{text}");
        }
        for text in ["", "V", "KΩ", "kΩ/V", "k", "R", "mhos", "Ωm", "xohm"] {
            assert_eq!(resistance_factor(text), None, "{text}");
        }
    }
}
