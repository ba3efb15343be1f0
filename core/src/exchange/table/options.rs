//! What the person settled beforehand, and the texts of the options that say it.

use super::{encoding::Encoding, role::Role};
use crate::quantity::number::{DecimalMark, shorten};
use serde::{Deserialize, Serialize};
use std::{collections::BTreeMap, fmt};

/// The mark between two cells.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Delimiter {
    /// `,`
    Comma,
    /// `;`
    Semicolon,
    /// The tab character.
    Tab,
}

impl Delimiter {
    /// Every delimiter, in the order in which they are tried.
    pub const ALL: [Self; 3] = [Self::Semicolon, Self::Tab, Self::Comma];

    /// The character itself.
    #[must_use]
    pub fn as_char(self) -> char {
        match self {
            Self::Comma => ',',
            Self::Semicolon => ';',
            Self::Tab => '\t',
        }
    }
}

impl fmt::Display for Delimiter {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Self::Comma => "comma",
            Self::Semicolon => "semicolon",
            Self::Tab => "tab",
        })
    }
}

/// What the table is wanted for, which settles the columns it must have.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Purpose {
    /// Standards with their readings: `standard` and `reading` are needed.
    #[default]
    Standards,
    /// Zero readings: only `reading` is needed, and a row is a zero reading unless its `kind` says otherwise.
    Zeros,
    /// Readings to be converted: only `reading` is needed.
    Readings,
}

/// What is settled beforehand; all that is `None` is recognised.
#[derive(Debug, Clone, PartialEq, Eq, Default, Serialize, Deserialize)]
pub struct TableOptions {
    /// What the table is wanted for.
    pub purpose: Purpose,
    /// How bytes stand for characters.
    pub encoding: Option<Encoding>,
    /// The mark between cells.
    pub delimiter: Option<Delimiter>,
    /// The mark between whole part and fraction.
    pub decimal: Option<DecimalMark>,
    /// How many rows of the table, from the first that is as wide as the table, are headers; 0 for none.
    pub header_rows: Option<usize>,
    /// The header text, or the number from 1, of the column that has a role.
    pub columns: BTreeMap<Role, String>,
}

/// Why the text of an option cannot be taken.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum OptionError {
    /// Not a delimiter.
    #[error("the delimiter {found:?} is not known; accepted: , or ; or tab")]
    Delimiter {
        /// What was given.
        found: String,
    },
    /// Not a decimal mark.
    #[error("the decimal mark {found:?} is not known; accepted: . or ,")]
    Decimal {
        /// What was given.
        found: String,
    },
    /// A column meaning that does not exist.
    #[error("there is no column {found:?}; accepted: {}", Role::all_names())]
    UnknownColumn {
        /// What was given before the `=`.
        found: String,
    },
    /// Part of a mapping without `=` or without a header.
    #[error("{found:?} does not map a column; accepted: standard=Last,reading=Signal")]
    NotAPair {
        /// What was given.
        found: String,
    },
    /// A column given twice.
    #[error("the column {role} is mapped twice, to {first:?} and to {second:?}; give it once")]
    MappedTwice {
        /// The column.
        role: Role,
        /// The header given first.
        first: String,
        /// The header given then.
        second: String,
    },
}

/// Reads the text of `--delimiter`: `,`, `;`, a tab, or a name.
///
/// # Errors
/// [`OptionError::Delimiter`] with what was given.
pub fn parse_delimiter(text: &str) -> Result<Delimiter, OptionError> {
    match text.to_lowercase().as_str() {
        "," | "comma" => Ok(Delimiter::Comma),
        ";" | "semicolon" => Ok(Delimiter::Semicolon),
        "\t" | "\\t" | "tab" => Ok(Delimiter::Tab),
        _ => Err(OptionError::Delimiter { found: shorten(text) }),
    }
}

/// Reads the text of `--decimal`: `.`, `,`, or a name.
///
/// # Errors
/// [`OptionError::Decimal`] with what was given.
pub fn parse_decimal(text: &str) -> Result<DecimalMark, OptionError> {
    match text.to_lowercase().as_str() {
        "." | "point" => Ok(DecimalMark::Point),
        "," | "comma" => Ok(DecimalMark::Comma),
        _ => Err(OptionError::Decimal { found: shorten(text) }),
    }
}

/// Reads the text of `--columns`: `standard=Last,reading=Signal`.
///
/// A header may itself hold commas: a part without `=` belongs to the header before it.
///
/// # Errors
/// [`OptionError`] for an unknown column, one mapped twice, or a part that is no pair.
pub fn parse_columns(text: &str) -> Result<BTreeMap<Role, String>, OptionError> {
    let mut pairs: Vec<(&str, String)> = Vec::new();
    for part in text.split(',') {
        match (part.split_once('='), pairs.last_mut()) {
            (Some((name, header)), _) => pairs.push((name, header.to_owned())),
            (None, Some((_, header))) => {
                header.push(',');
                header.push_str(part);
            }
            (None, None) => {
                return Err(OptionError::NotAPair { found: shorten(part) });
            }
        }
    }
    let mut columns = BTreeMap::new();
    for (name, header) in pairs {
        let role = Role::from_name(name).ok_or_else(|| OptionError::UnknownColumn { found: shorten(name.trim()) })?;
        let header = header.trim().to_owned();
        if header.is_empty() {
            return Err(OptionError::NotAPair { found: shorten(&format!("{}=", name.trim())) });
        }
        if let Some(first) = columns.insert(role, header.clone()) {
            return Err(OptionError::MappedTwice { role, first, second: header });
        }
    }
    Ok(columns)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn marks_are_read_as_characters_or_names() {
        assert_eq!(parse_delimiter(","), Ok(Delimiter::Comma));
        assert_eq!(parse_delimiter(";"), Ok(Delimiter::Semicolon));
        assert_eq!(parse_delimiter("tab"), Ok(Delimiter::Tab));
        assert_eq!(parse_delimiter("\t"), Ok(Delimiter::Tab));
        assert_eq!(parse_decimal("."), Ok(DecimalMark::Point));
        assert_eq!(parse_decimal(","), Ok(DecimalMark::Comma));
        assert_eq!(parse_delimiter("|"), Err(OptionError::Delimiter { found: "|".into() }));
        assert_eq!(parse_decimal(";"), Err(OptionError::Decimal { found: ";".into() }));
    }

    #[test]
    fn columns_are_mapped_by_header() {
        let columns = parse_columns("standard=Last, reading=load, kN,u_reading=3").unwrap();
        let wanted = [(Role::Standard, "Last"), (Role::Reading, "load, kN"), (Role::UReading, "3")];
        assert_eq!(columns, wanted.map(|(role, header)| (role, header.to_owned())).into());
    }

    #[test]
    fn a_mapping_that_cannot_be_meant_is_refused() {
        let unknown = parse_columns("load=Last").unwrap_err();
        assert_eq!(unknown, OptionError::UnknownColumn { found: "load".into() });
        assert!(unknown.to_string().contains("u_standard"));
        for text in ["", "standard", "standard=", "standard= ,reading=B"] {
            assert!(matches!(parse_columns(text), Err(OptionError::NotAPair { .. })), "{text}");
        }
        let twice = parse_columns("reading=A,reading=B").unwrap_err();
        assert!(matches!(twice, OptionError::MappedTwice { role: Role::Reading, .. }));
    }
}
