//! Tests of keys, signatures and their verification.

mod crafted;
mod fields;
mod flips;
mod keys;
mod later;
mod odd_files;
mod report;
mod signing;

use super::{SignatureRequest, SigningKey};
use jiff::Timestamp;

/// A time in the afternoon of the invented workshop.
fn noon() -> Timestamp {
    "2026-12-01T12:45:00.75Z".parse().expect("a time")
}

/// A key that is the same in every run; `number` tells keys apart.
fn key(name: &str, number: u8) -> SigningKey {
    let random = std::array::from_fn(|i| (usize::from(number) * 31 + i * 7 + 3) as u8);
    SigningKey::create(name, noon(), &random).expect("a key")
}

fn request() -> SignatureRequest {
    SignatureRequest {
        name: "Ines Halloran".to_owned(),
        meaning: "calibrated by".to_owned(),
        signed_at: noon(),
        page_index: 0,
        rect: [40.0, 60.5, 240.0, 110.0],
        field_name: "calibrated".to_owned(),
    }
}

fn second_request() -> SignatureRequest {
    SignatureRequest {
        name: "Ádám O\u{2019}Brien (deputy\\2)".to_owned(),
        meaning: "approved by".to_owned(),
        signed_at: "2026-12-02T08:00:00Z".parse().expect("a time"),
        page_index: 1,
        rect: [300.0, 60.0, 500.25, 110.0],
        field_name: "approved".to_owned(),
    }
}
