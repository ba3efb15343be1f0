//! The texts and the time of a signature dictionary.

use jiff::{Timestamp, civil::DateTime, tz::Offset};
use lopdf::Object;

/// A PDF date in universal time to the second, `D:20261201124500Z`; `None` outside the years 0 to 9999.
///
/// # Source
/// ISO 32000-1:2008, 7.9.4.
pub(super) fn pdf_date(at: Timestamp) -> Option<String> {
    let time = Offset::UTC.to_datetime(at);
    let (date, clock) = (time.date(), time.time());
    (date.year() >= 0).then(|| {
        format!(
            "D:{:04}{:02}{:02}{:02}{:02}{:02}Z",
            date.year(),
            date.month(),
            date.day(),
            clock.hour(),
            clock.minute(),
            clock.second()
        )
    })
}

/// Reads a date of exactly the form that [`pdf_date`] writes.
pub(super) fn read_pdf_date(text: &str) -> Option<Timestamp> {
    let digits = text.strip_prefix("D:")?.strip_suffix('Z')?;
    if digits.len() != 14 || !digits.bytes().all(|b| b.is_ascii_digit()) {
        return None;
    }
    let part = |from: usize, to: usize| digits[from..to].parse::<i8>().ok();
    let time = DateTime::new(
        digits[..4].parse().ok()?,
        part(4, 6)?,
        part(6, 8)?,
        part(8, 10)?,
        part(10, 12)?,
        part(12, 14)?,
        0,
    );
    Offset::UTC.to_timestamp(time.ok()?).ok()
}

/// Whether a text may go into a signature dictionary: not blank and without control characters, which the encodings
/// of a PDF do not all carry.
pub(super) fn is_plain(text: &str) -> bool {
    !text.trim().is_empty() && !text.chars().any(char::is_control)
}

/// A PDF text string: ASCII as it is, anything else as UTF-16 in hexadecimal digits.
pub(super) fn text_object(text: &str) -> Object {
    lopdf::text_string(text)
}
