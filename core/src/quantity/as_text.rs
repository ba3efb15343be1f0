//! Serde through `Display` and `FromStr`, so that files hold the names people type.

use serde::{Deserialize, Deserializer, Serializer};
use std::{fmt::Display, str::FromStr};

/// Writes the value as its text.
///
/// # Errors
/// Those of the serializer.
pub fn serialize<T: Display, S: Serializer>(value: &T, s: S) -> Result<S::Ok, S::Error> {
    s.collect_str(value)
}

/// Reads the value from its text.
///
/// # Errors
/// Those of the deserializer, and of the text.
pub fn deserialize<'de, T: FromStr<Err: Display>, D: Deserializer<'de>>(d: D) -> Result<T, D::Error> {
    String::deserialize(d)?.parse().map_err(serde::de::Error::custom)
}
