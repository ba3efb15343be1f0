//! The item, the people, and what else stands on a report beside the numbers.

use crate::quantity::{Moment, Text};
use serde::{Deserialize, Serialize};
use std::sync::Arc;

/// Practice projects are watermarked for ever and never signed as a record.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
pub enum Kind {
    /// Real work.
    #[default]
    Record,
    /// A demonstration, an exercise, or a copy of one.
    Practice,
}

/// The item under calibration.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Item {
    /// What it is, e.g. `tension link, mooring`.
    pub description: Option<Text>,
    /// Identity mark, e.g. `TL-07`.
    pub identity: Option<Text>,
    /// Maker.
    pub maker: Option<Text>,
    /// Model.
    pub model: Option<Text>,
    /// Serial number.
    pub serial: Option<Text>,
    /// Channel.
    pub channel: Option<Text>,
    /// Condition on receipt.
    pub condition: Option<Text>,
    /// Date received.
    pub received: Option<Text>,
}

impl Item {
    /// What a masthead calls it: description and identity, or what there is.
    #[must_use]
    pub fn title(&self) -> String {
        let parts: Vec<&str> = [&self.description, &self.identity].into_iter().flatten().map(|t| &**t).collect();
        if parts.is_empty() { "Instrument without a name".to_owned() } else { parts.join(" ") }
    }
}

/// Somebody who works on the record.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Person {
    /// Printed name.
    pub name: Text,
    /// Role, e.g. `performed`.
    pub role: Option<Text>,
}

/// One condition, e.g. temperature, `20.3 °C`.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Condition {
    /// What.
    pub name: Text,
    /// How much, as typed with its unit.
    pub value: Text,
}

/// Conditions at the start and at the end.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Conditions {
    /// At the start.
    pub start: Vec<Condition>,
    /// At the end.
    pub end: Vec<Condition>,
}

/// An adjustment between as found and as left.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Adjustment {
    /// What was adjusted.
    pub what: Text,
    /// Who did it.
    pub who: Text,
    /// Why.
    pub why: Text,
}

/// The record before this one, of the same instrument.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct EarlierRecord {
    /// Its number.
    pub number: Text,
    /// Digest of its file.
    pub digest: Text,
}

/// A unit conversion of imported values.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct UnitConversion {
    /// Its name, e.g. `lbf to N`.
    pub id: Text,
    /// Multiply by this.
    pub factor: f64,
}

/// An imported file: original bytes, digest, and how they were understood.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Import {
    /// File name without its folder.
    pub name: Text,
    /// SHA-256 of the bytes, hexadecimal.
    pub digest: Text,
    /// The bytes, base64.
    pub base64: Arc<str>,
    /// The mapping chosen, one decision a line.
    pub mapping: Vec<Text>,
}

/// A signature that was given.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Signed {
    /// Printed name.
    pub name: Text,
    /// What the signature means, e.g. `performed`.
    pub meaning: Text,
    /// When.
    pub at: Moment,
    /// Fingerprint of the key.
    pub fingerprint: Text,
    /// Digest of the trail it covers.
    pub trail: Text,
}
