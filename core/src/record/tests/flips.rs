//! Changing a signed file byte by byte.

use super::{
    key,
    report::{Standard, report},
    request, second_request,
};
use crate::record::{inspect_pdf, sign_pdf};
use proptest::prelude::*;
use std::sync::LazyLock;

static ONCE: LazyLock<Vec<u8>> =
    LazyLock::new(|| sign_pdf(&report(Standard::A3b), &key("Ines Halloran", 1), &request()).expect("signed"));
static TWICE: LazyLock<Vec<u8>> =
    LazyLock::new(|| sign_pdf(&ONCE, &key("Adam O'Brien", 2), &second_request()).expect("signed"));

/// Turns one bit in every `stride`-th byte. The strides are primes, so that no period of the file is met, and large
/// enough for a test of a few seconds; with a stride of 1, by hand, it is every byte.
fn every_flip_is_reported(whole: &[u8], stride: usize) {
    assert!(inspect_pdf(whole).is_sound());
    let mut bytes = whole.to_vec();
    for at in (whole.len() % stride..whole.len()).step_by(stride) {
        bytes[at] ^= 1 << (at % 8);
        assert!(!inspect_pdf(&bytes).is_sound(), "byte {at} of {}", whole.len());
        bytes[at] = whole[at];
    }
}

#[test]
fn every_flipped_byte_of_a_signed_file_is_reported() {
    every_flip_is_reported(&ONCE, 53);
}

#[test]
fn every_flipped_byte_of_a_file_signed_twice_is_reported() {
    every_flip_is_reported(&TWICE, 131);
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(64))]

    #[test]
    fn any_damage_is_reported_without_a_panic(
        changes in prop::collection::vec((0..TWICE.len(), any::<u8>()), 1..12),
        cut in prop::option::of(0..TWICE.len()),
        moved in prop::option::of((0..TWICE.len(), 0..TWICE.len(), 1..400usize)),
    ) {
        let mut bytes = TWICE.clone();
        for (at, value) in changes {
            bytes[at] = value;
        }
        if let Some((from, to, length)) = moved {
            let length = length.min(bytes.len() - from.max(to));
            bytes.copy_within(from..from + length, to);
        }
        bytes.truncate(cut.unwrap_or(bytes.len()));
        let unchanged = bytes == *TWICE || bytes == *ONCE;
        prop_assert_eq!(inspect_pdf(&bytes).is_sound(), unchanged);
    }

    #[test]
    fn bytes_of_any_kind_are_answered(tail in prop::collection::vec(any::<u8>(), 0..400), begins in any::<bool>()) {
        let head: &[u8] = if begins { b"%PDF-1.7\n" } else { b"" };
        prop_assert!(!inspect_pdf(&[head, &tail[..]].concat()).is_sound());
    }
}
