//! A moment in time with the offset of the place where it was noted.
//!
//! Moments come in as values: this crate has no clock.

use jiff::{Timestamp, tz::Offset};
use serde::{Deserialize, Deserializer, Serialize, Serializer};
use std::{fmt, str::FromStr};

/// An instant and the local offset in force where it was noted; written as `2026-11-03T09:12:05.250+01:00`.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct Moment {
    at: Timestamp,
    offset: Offset,
}

/// A text that is not a moment.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
#[error("{text:?} is not a time; expected the form 2026-11-03T09:12:05+01:00")]
pub struct NotAMoment {
    /// What was found.
    pub text: String,
}

impl Moment {
    /// A moment from an instant and an offset in seconds east of UTC; an offset beyond ±25 h counts as 0.
    #[must_use]
    pub fn new(at: Timestamp, offset_seconds: i32) -> Self {
        Self { at, offset: Offset::from_seconds(offset_seconds).unwrap_or(Offset::UTC) }
    }

    /// The instant.
    #[must_use]
    pub fn timestamp(self) -> Timestamp {
        self.at
    }

    /// The calendar day at the place, `2026-11-03`.
    #[must_use]
    pub fn date(self) -> String {
        self.civil().date().to_string()
    }

    /// The clock time at the place to the minute, `09:12`.
    #[must_use]
    pub fn clock(self) -> String {
        let t = self.civil().time();
        format!("{:02}:{:02}", t.hour(), t.minute())
    }

    /// The clock time at the place to the second, `09:12:05`.
    #[must_use]
    pub fn clock_seconds(self) -> String {
        format!("{}:{:02}", self.clock(), self.civil().time().second())
    }

    /// Day, minute and offset for a person: `2026-11-03 09:12 (+01:00)`.
    #[must_use]
    pub fn readable(self) -> String {
        format!("{} {} ({})", self.date(), self.clock(), self.offset_text())
    }

    fn civil(self) -> jiff::civil::DateTime {
        self.offset.to_datetime(self.at)
    }

    fn offset_text(self) -> String {
        let s = self.offset.seconds();
        let sign = if s < 0 { '-' } else { '+' };
        format!("{sign}{:02}:{:02}", s.abs() / 3600, s.abs() % 3600 / 60)
    }
}

impl fmt::Display for Moment {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let c = self.civil();
        write!(f, "{}T{}.{:03}{}", self.date(), self.clock_seconds(), c.time().millisecond(), self.offset_text())
    }
}

impl FromStr for Moment {
    type Err = NotAMoment;
    fn from_str(text: &str) -> Result<Self, NotAMoment> {
        let wrong = || NotAMoment { text: text.to_owned() };
        let at: Timestamp = text.parse().map_err(|_| wrong())?;
        let tail = text.get(text.len().saturating_sub(6)..).ok_or_else(wrong)?;
        let seconds = if text.ends_with('Z') { 0 } else { offset_seconds(tail).ok_or_else(wrong)? };
        Ok(Self::new(at, seconds))
    }
}

fn offset_seconds(tail: &str) -> Option<i32> {
    let (sign, rest) = tail.split_at_checked(1)?;
    let (h, m) = rest.split_once(':')?;
    let size = h.parse::<i32>().ok()? * 3600 + m.parse::<i32>().ok()? * 60;
    match sign {
        "+" => Some(size),
        "-" => Some(-size),
        _ => None,
    }
}

impl Serialize for Moment {
    fn serialize<S: Serializer>(&self, s: S) -> Result<S::Ok, S::Error> {
        s.collect_str(self)
    }
}

impl<'de> Deserialize<'de> for Moment {
    fn deserialize<D: Deserializer<'de>>(d: D) -> Result<Self, D::Error> {
        String::deserialize(d)?.parse().map_err(serde::de::Error::custom)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn text_and_back_keeps_the_offset() {
        for text in ["2026-11-03T09:12:05.250+01:00", "2026-01-01T00:00:00.000-03:30", "2026-06-30T23:59:59.999+00:00"]
        {
            let m: Moment = text.parse().unwrap();
            assert_eq!(m.to_string(), text);
        }
        let m: Moment = "2026-11-03T09:12:05.250+01:00".parse().unwrap();
        assert_eq!(m.readable(), "2026-11-03 09:12 (+01:00)");
        assert_eq!(m.clock_seconds(), "09:12:05");
    }

    #[test]
    fn nonsense_is_refused_with_the_text() {
        for text in ["", "yesterday", "2026-11-03", "2026-11-03T09:12:05", "2026-13-03T09:12:05+01:00"] {
            assert_eq!(text.parse::<Moment>(), Err(NotAMoment { text: text.to_owned() }), "{text}");
        }
    }
}
