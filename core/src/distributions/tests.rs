//! Tails and quantiles against independent figures.

use super::*;
use proptest::prelude::*;
use serde_json::Value;

const NONCENTRAL: &str = include_str!("../../../tests/published/noncentral-t/values.json");

/// Both tails against the exact series (tests/published/noncentral-t/SOURCE.md), 10 digits where a tail
/// exceeds 1e-12.
#[test]
fn noncentral_t_agrees_with_the_series() {
    let table: Value = serde_json::from_str(NONCENTRAL).unwrap();
    let (mut worst, mut compared) = (0.0_f64, 0);
    for row in table["rows"].as_array().unwrap() {
        let number = |i: usize| row[i].as_f64().unwrap();
        let (t, nu, delta) = (number(0), number(1), number(2));
        let tails = [noncentral_t_lower(t, nu, delta), noncentral_t_upper(t, nu, delta)];
        for (i, found) in tails.into_iter().enumerate() {
            let exact: f64 = row[3 + i].as_str().unwrap().parse().unwrap();
            if exact < 1e-12 {
                assert!(found < 1.1e-12, "{row}: {found:e}");
                continue;
            }
            let error = (found / exact - 1.0).abs();
            assert!(error < 1e-10, "{row}: {found:e}, relative error {error:e}");
            worst = worst.max(error);
            compared += 1;
        }
    }
    println!("{compared} tails, worst relative error {worst:e}");
    assert!(compared > 700);
}

/// δ for α = β = 0.05, the factors of the detection limit: known noncentral t tables as used with
/// ISO 11843-2 (ν = 2, 3, 5, 9, 19), from memory, to the digits given.
#[test]
fn noncentrality_of_the_detection_limit() {
    for (nu, expected) in [(2.0, 5.516), (3.0, 4.456), (5.0, 3.870), (9.0, 3.575), (19.0, 3.415)] {
        let delta = noncentrality(t_quantile(0.95, nu), nu, 0.05);
        assert!((delta - expected).abs() < 6e-4, "{nu}: {delta}");
    }
    let normal = noncentrality(normal_quantile(0.95), f64::INFINITY, 0.05);
    assert!((normal - 2.0 * 1.644_853_626_951_472_7).abs() < 1e-12);
}

#[test]
fn central_t_is_the_noncentral_one_without_noncentrality() {
    for nu in [1.0, 2.5, 9.0, 40.0, 400.0] {
        for t in [-6.0, -1.0, 0.3, 2.0, 8.0] {
            let (central, general) = (t_lower(t, nu), noncentral_t_lower(t, nu, 0.0));
            assert!((central / general - 1.0).abs() < 1e-11, "{nu} {t}");
        }
    }
}

/// JCGM 100:2008 Table G.2 (two-sided), from print, last two digits of the table.
#[test]
fn quantiles_of_t_agree_with_the_guide() {
    let table = [
        (1.0, 0.95, 12.71),
        (2.0, 0.95, 4.30),
        (5.0, 0.95, 2.57),
        (10.0, 0.95, 2.23),
        (3.0, 0.9545, 3.31),
        (10.0, 0.9545, 2.28),
        (16.0, 0.99, 2.92),
        (50.0, 0.9973, 3.16),
        (f64::INFINITY, 0.95, 1.96),
        (f64::INFINITY, 0.9973, 3.00),
    ];
    for (nu, level, expected) in table {
        let t = t_quantile(0.5 + 0.5 * level, nu);
        assert!((t - expected).abs() <= 0.005, "{nu} {level}: {t}");
    }
}

/// Closed forms: ν = 1 is the Cauchy, ν = 2 has an algebraic quantile; χ² with ν = 2 is exponential.
#[test]
fn closed_forms() {
    let close = |a: f64, b: f64| assert!((a / b - 1.0).abs() < 2e-12, "{a:e} {b:e}");
    for p in [1e-12_f64, 1e-6, 0.005, 0.3, 0.975, 0.999_999] {
        let tail = libm::tan(std::f64::consts::PI * p.min(1.0 - p));
        close(t_quantile(p, 1.0), (p - 0.5).signum() / tail);
        let a = 4.0 * p * (1.0 - p);
        close(t_quantile(p, 2.0), 2.0 * (p - 0.5) * libm::sqrt(2.0 / a));
        close(chi2_quantile(p, 2.0), -2.0 * libm::log1p(-p));
        close(chi2_upper(3.0, 2.0), libm::exp(-1.5));
    }
    close(f_upper(3.0, 2.0, 8.0), libm::pow(1.0 + 6.0 / 8.0, -4.0));
    close(f_upper(4.0, 1.0, 7.0), 2.0 * t_upper(2.0, 7.0));
    close(f_upper(2.5, 3.0, f64::INFINITY), chi2_upper(7.5, 3.0));
}

/// Backwards: the tail at the quantile is the probability asked for.
#[test]
fn quantiles_lead_back_to_their_probability() {
    for nu in [0.5, 1.0, 3.0, 4.0, 10.5, 100.0, 999.0, 5e3, 1e6] {
        for p in [1e-10, 1e-4, 0.025, 0.3, 0.7, 0.95, 0.9995] {
            let t = t_quantile(p, nu);
            assert!((t_lower(t, nu) / p - 1.0).abs() < 5e-12, "t {nu} {p}");
            let x = chi2_quantile(p, nu);
            // At ν = 1e6 one unit in the last place of x moves the tail by 1e-12, the tail itself is worse.
            let bound = if nu > 1e5 { 1e-9 } else { 5e-12 };
            let error = (chi2_lower(x, nu) / p - 1.0).abs();
            assert!(error < bound, "χ² {nu} {p}: {error:e}");
        }
        assert_eq!(t_quantile(0.5, nu), 0.0);
        assert_eq!(t_quantile(0.75, nu), -t_quantile(0.25, nu));
    }
    for p in [1e-300, 1e-9, 0.2, 0.5, 0.8] {
        assert!((normal_lower(normal_quantile(p)) / p - 1.0).abs() < 1e-12);
    }
}

#[test]
fn outside_the_domain_there_is_no_number() {
    for bad in [
        t_quantile(0.0, 5.0),
        t_quantile(1.0, 5.0),
        t_quantile(0.5, 0.0),
        t_quantile(0.5, f64::NAN),
        t_lower(1.0, -1.0),
        chi2_quantile(0.5, f64::INFINITY),
        chi2_upper(f64::NAN, 3.0),
        f_upper(1.0, 0.0, 3.0),
        f_upper(f64::NAN, 2.0, 3.0),
        normal_quantile(1.5),
        noncentral_t_lower(1.0, 0.0, 1.0),
        noncentral_t_lower(1.0, 5.0, f64::INFINITY),
        noncentrality(1.0, 5.0, 0.0),
        noncentrality(f64::INFINITY, 5.0, 0.05),
    ] {
        assert!(bad.is_nan());
    }
    assert_eq!(noncentral_t_lower(f64::INFINITY, 5.0, 1.0), 1.0);
    assert_eq!(noncentral_t_upper(f64::INFINITY, 5.0, 1.0), 0.0);
    assert_eq!(chi2_upper(-1.0, 3.0), 1.0);
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(60))]

    #[test]
    fn noncentrality_leads_back(nu in 1.0..200.0_f64, alpha in 0.001..0.2_f64, beta in 0.001..0.999_f64) {
        let t = t_quantile(1.0 - alpha, nu);
        let delta = noncentrality(t, nu, beta);
        let back = noncentral_t_lower(t, nu, delta);
        prop_assert!((back / beta - 1.0).abs() < 1e-9, "δ {delta}: {back} for {beta}");
    }

    #[test]
    fn both_tails_add_to_one(t in -20.0..40.0_f64, nu in 0.3..3000.0_f64, delta in -10.0..40.0_f64) {
        let sum = noncentral_t_lower(t, nu, delta) + noncentral_t_upper(t, nu, delta);
        prop_assert!((sum - 1.0).abs() < 1e-10, "{sum}");
    }

    #[test]
    fn mirrored_arguments_mirror_the_tails(t in -20.0..20.0_f64, nu in 0.5..100.0_f64, delta in -9.0..9.0_f64) {
        prop_assert_eq!(noncentral_t_lower(-t, nu, -delta), noncentral_t_upper(t, nu, delta));
    }

    #[test]
    fn a_larger_noncentrality_moves_the_mass_up(t in -5.0..20.0_f64, nu in 0.5..100.0_f64, delta in -5.0..20.0_f64) {
        let (near, far) = (noncentral_t_lower(t, nu, delta), noncentral_t_lower(t, nu, delta + 0.1));
        prop_assert!(far <= near * (1.0 + 1e-10));
    }

    #[test]
    fn no_argument_panics(t in any::<f64>(), nu in any::<f64>(), delta in any::<f64>(), p in any::<f64>()) {
        let _ = (noncentral_t_lower(t, nu, delta), noncentrality(t, nu, p));
        let _ = (t_lower(t, nu), t_quantile(p, nu), chi2_quantile(p, nu), chi2_upper(t, nu));
        let _ = (f_upper(t, nu, delta), normal_quantile(p));
    }
}

/// Above 1000 degrees of freedom the quantile comes from an expansion: its tail must still be the one asked for.
#[test]
fn far_quantiles_of_t_lead_back_to_their_tail() {
    for nu in [1000.5, 2000.0, 40_000.0, 3e6] {
        for p in [1e-8, 1e-3, 0.025, 0.05, 0.3, 0.975] {
            let back = t_lower(t_quantile(p, nu), nu);
            assert!((back / p - 1.0).abs() < 1e-9, "{nu} {p}: {back}");
        }
    }
}
