//! What is fixed before the first reading.

use crate::{
    model::Family,
    quantity::{Moment, Text, Unit},
};
use serde::{Deserialize, Serialize};

/// A quantity: its name and the unit in which it is declared.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Quantity {
    /// Name, e.g. `tension`.
    pub name: Text,
    /// Unit, e.g. `kN`; may be empty.
    pub unit: Unit,
}

impl Quantity {
    /// A quantity from its texts.
    #[must_use]
    pub fn new(name: &str, unit: &str) -> Self {
        Self { name: Text::from(name.trim()), unit: Unit::new(unit) }
    }

    /// `tension, kN`; without a unit only the name.
    #[must_use]
    pub fn heading(&self) -> String {
        match self.unit.as_str() {
            "" => self.name.to_string(),
            unit => format!("{}, {unit}", self.name),
        }
    }
}

/// Whether a state of *nothing applied* exists, and how it shows.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
pub enum ZeroState {
    /// Nothing applied is the value 0.
    #[default]
    Zero,
    /// Nothing applied gives a live signal (4 mA): the question is folded unless asked.
    LiveZero,
    /// No such state (°C, pH): the smallest change near the lower end is shown instead.
    None,
    /// Not asked.
    NotAsked,
}

/// Part the zero readings take in the fits.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Default, Serialize, Deserialize)]
pub enum ZerosPart {
    /// Each zero application is also fitted as a standard of value 0.
    #[default]
    Fitted,
    /// They only check the curve.
    CheckOnly,
}

/// What a plan works with that can hurt somebody.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
pub enum Hazard {
    /// Suspended or heavy loads, tension.
    Loads,
    /// Pressure.
    Pressure,
    /// Hot or cold baths.
    Baths,
    /// Mains voltage.
    Mains,
    /// Gases.
    Gases,
    /// Chemicals.
    Chemicals,
}

/// Limits an error must keep, as agreed before the work.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Limits {
    /// No verdict is wanted.
    NoVerdictWanted,
    /// ± the same amount everywhere, input unit.
    Absolute(f64),
    /// ± per cent of the value.
    PercentOfReading(f64),
    /// ± per cent of the span.
    PercentOfSpan(f64),
}

/// Error rates and repeats of the question "how small is more than zero".
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct DetectionQuestion {
    /// False-alarm rate α.
    pub alpha: f64,
    /// Rate β of missing the detection limit.
    pub beta: f64,
    /// A later result is the mean of k applications.
    pub k: u32,
    /// Whether limits rest on the zero readings or on the calibration.
    pub basis: DetectionBasis,
    /// Relative standard uncertainty at the quantification limit.
    #[serde(default = "tenth")]
    pub target: f64,
}

/// 10 %, the customary target.
const fn tenth() -> f64 {
    0.1
}

/// What the detection limit rests on.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
pub enum DetectionBasis {
    /// The zero readings.
    #[default]
    Zeros,
    /// The scatter about the curve (ISO 11843-2).
    Calibration,
}

impl Default for DetectionQuestion {
    fn default() -> Self {
        Self { alpha: 0.05, beta: 0.05, k: 1, basis: DetectionBasis::Zeros, target: tenth() }
    }
}

/// The plan.
#[derive(Debug, Clone, PartialEq)]
pub struct Plan {
    /// Raised by each change.
    pub version: u32,
    /// When it became fixed, by the first reading; later changes need a reason and are printed.
    pub fixed: Option<Moment>,
    /// What is applied.
    pub input: Quantity,
    /// What the instrument shows.
    pub output: Quantity,
    /// Measuring interval, input unit.
    pub interval: Option<(f64, f64)>,
    /// Whether nothing applied exists.
    pub zero_state: ZeroState,
    /// Part of the zeros in the fits.
    pub zeros_part: ZerosPart,
    /// Functions this instrument can take; empty = all.
    pub families: Vec<Family>,
    /// The detection question.
    pub detection: DetectionQuestion,
    /// Two-sided level of bands and intervals, e.g. 0.95.
    pub level: f64,
    /// Limits, if a verdict is wanted.
    pub limits: Option<Limits>,
    /// Decision rule in words.
    pub decision_rule: Option<Text>,
    /// Levels planned, input unit.
    pub levels: Vec<f64>,
    /// Repeats of each level.
    pub repeats: Option<u32>,
    /// The largest indication that the instrument can show, output unit.
    pub full_scale: Option<f64>,
    /// Order of application in words.
    pub order: Option<Text>,
    /// Method with its revision.
    pub method: Option<Text>,
    /// Where the work is done.
    pub place: Option<Text>,
    /// Who it is done for.
    pub customer: Option<Text>,
    /// The laboratory, name and address.
    pub laboratory: Option<Text>,
    /// What the plan works with.
    pub hazards: Vec<Hazard>,
}

impl Default for Plan {
    fn default() -> Self {
        Self {
            version: 1,
            fixed: None,
            input: Quantity::new("value", ""),
            output: Quantity::new("reading", ""),
            interval: None,
            zero_state: ZeroState::default(),
            zeros_part: ZerosPart::default(),
            families: Vec::new(),
            detection: DetectionQuestion::default(),
            level: 0.95,
            limits: None,
            decision_rule: None,
            levels: Vec::new(),
            repeats: None,
            full_scale: None,
            order: None,
            method: None,
            place: None,
            customer: None,
            laboratory: None,
            hazards: Vec::new(),
        }
    }
}

impl Plan {
    /// Whether the plan lets a family be chosen; *declared* is always allowed.
    #[must_use]
    pub fn allows(&self, family: &Family) -> bool {
        self.families.is_empty() || *family == Family::Declared || self.families.contains(family)
    }
}
