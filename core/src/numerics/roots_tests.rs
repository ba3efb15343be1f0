//! Roots where bracketing methods are known to go wrong.

use super::roots::{RootError, bracketed_root, sign_changes};
use proptest::prelude::*;

#[test]
fn roots_to_the_last_bits() {
    let root = bracketed_root(|x| x * x * x - 2.0, 0.0, 2.0).unwrap();
    assert!((root - libm::cbrt(2.0)).abs() <= 2.0 * f64::EPSILON * root);
    let steep = |x: f64| libm::exp(50.0 * (x - 0.9)) - 1.0;
    assert!((bracketed_root(steep, 0.0, 2.0).unwrap() - 0.9).abs() < 1e-15);
    // Flat at the root: only bisection gets there.
    let flat = |x: f64| libm::pow(x - 1.0, 9.0);
    assert!((bracketed_root(flat, 0.0, 4.0).unwrap() - 1.0).abs() < 1e-12);
    // A step has no root but a place.
    let step = |x: f64| if x < 0.3 { -1.0 } else { 1.0 };
    assert!((bracketed_root(step, 0.0, 1.0).unwrap() - 0.3).abs() < 1e-15);
}

#[test]
fn ends_in_either_order_and_exactly_at_the_root() {
    assert_eq!(bracketed_root(|x| x, 0.0, 1.0), Ok(0.0));
    assert_eq!(bracketed_root(|x| x - 1.0, 0.0, 1.0), Ok(1.0));
    assert_eq!(bracketed_root(|x| x - 0.5, 1.0, 0.0), Ok(0.5));
    let wide = bracketed_root(|x| x - 3.0, -f64::MAX, f64::MAX).unwrap();
    assert!((wide - 3.0).abs() < 1e-14);
}

#[test]
fn without_a_bracket_or_a_value_it_says_so() {
    let same = bracketed_root(|x| x * x + 1.0, -1.0, 2.0);
    assert_eq!(same, Err(RootError::NoSignChange { lo: -1.0, hi: 2.0 }));
    let gap = bracketed_root(|x| if x == 0.0 { f64::NAN } else { x }, 0.0, 1.0);
    assert_eq!(gap, Err(RootError::NoValue { at: 0.0 }));
}

#[test]
fn a_scan_finds_simple_roots_and_no_poles() {
    let found = sign_changes(libm::sin, 1.0, 10.0, 100);
    assert_eq!(found.len(), 3);
    for (k, x) in (1..).zip(&found) {
        assert!((x - f64::from(k) * std::f64::consts::PI).abs() < 1e-14);
    }
    assert!(sign_changes(|x| 1.0 / (x - 0.123), 0.0, 1.0, 10).is_empty());
    assert!(sign_changes(|x| x, 1.0, 0.0, 10).is_empty());
    assert_eq!(sign_changes(|x| x, -1.0, 1.0, 2), vec![0.0]);
}

proptest! {
    #[test]
    fn cubics_are_solved(a in -1e3..1e3_f64, scale in -12..12_i32) {
        let f = |x: f64| (x - a) * ((x - a) * (x - a) + 1.0);
        let reach = libm::pow(10.0, f64::from(scale)).max(1e-3);
        let root = bracketed_root(f, a - reach, a + 2.0 * reach).unwrap();
        prop_assert!((root - a).abs() <= 4.0 * f64::EPSILON * a.abs().max(1e-9));
    }
}
