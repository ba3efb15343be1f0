//! Sine, cosine, arc tangent and powers in double-double against values computed with 90 digits
//! (mpmath 1.3.0), and laws.

use super::{Dd, Dual, Real};
use proptest::prelude::*;
use std::f64::consts::{FRAC_PI_2, FRAC_PI_4, PI, SQRT_2};

/// |a − b|/|b|, b from two words.
fn relative(a: Dd, b: (f64, f64)) -> f64 {
    let b = Dd::from_sum(b.0, b.1);
    ((a - b) / b).to_f64().abs()
}

const SINES: [(f64, (f64, f64)); 12] = [
    (0.5, (0.479_425_538_604_203, -5.103_969_860_556_013e-18)),
    (1.0, (0.841_470_984_807_896_5, 1.776_845_092_935_536e-18)),
    (-2.5, (-0.598_472_144_103_956_5, 5.521_403_334_082_375e-17)),
    (3.0, (0.141_120_008_059_867_2, 8.577_269_787_017_502e-18)),
    (22.0, (-0.008_851_309_290_403_876, 2.848_530_308_922_005_7e-19)),
    (355.0, (-3.014_435_335_948_845e-5, 1.301_264_399_104_634_7e-21)),
    (100_000.0, (0.035_748_797_972_016_51, 1.542_974_370_610_986_1e-18)),
    (1_000_000_000_000.0, (-0.611_238_702_376_889_5, -1.149_161_396_448_817_7e-17)),
    (1.0e-9, (1.0e-9, -1.666_666_666_666_666_9e-28)),
    (FRAC_PI_4, (0.707_106_781_186_547_5, 4.103_693_448_936_375_5e-17)),
    (PI, (1.224_646_799_147_353_2e-16, -2.994_769_809_718_34e-33)),
    (1.0e-30, (1.0e-30, -1.666_666_666_666_667e-91)),
];
const COSINES: [(f64, (f64, f64)); 8] = [
    (0.5, (0.877_582_561_890_372_8, -4.262_314_986_427_999_7e-17)),
    (1.0, (0.540_302_305_868_139_8, -4.760_954_612_604_417e-17)),
    (-2.5, (-0.801_143_615_546_933_7, -1.867_474_270_508_555_3e-17)),
    (FRAC_PI_2, (6.123_233_995_736_766e-17, -1.497_384_904_859_169_8e-33)),
    (22.0, (-0.999_960_826_394_637_1, -8.516_033_800_174_13e-19)),
    (11.0, (0.004_425_697_988_050_785, 3.244_914_268_678_437_3e-19)),
    (1_000_000_000_000.0, (0.791_446_301_852_890_2, 4.843_622_374_857_678e-17)),
    (1.0e-9, (1.0, -5.0e-19)),
];
const ARC_TANGENTS: [(f64, (f64, f64)); 10] = [
    (0.5, (0.463_647_609_000_806_1, 2.269_877_745_296_168_7e-17)),
    (1.0, (FRAC_PI_4, 3.061_616_997_868_383e-17)),
    (-2.5, (-1.190_289_949_682_531_7, -7.683_333_629_842_069e-17)),
    (1.0e-9, (1.0e-9, -3.333_333_333_333_333_8e-28)),
    (1_000_000.0, (1.570_795_326_794_896_6, -2.070_096_465_560_360_6e-17)),
    (1.0e200, (FRAC_PI_2, 6.123_233_995_736_766e-17)),
    (0.1, (0.099_668_652_491_162_04, -5.190_520_336_352_787e-18)),
    (-0.031_25, (-0.031_239_833_430_268_277, 1.188_442_711_587_748e-18)),
    (7.0, (1.428_899_272_190_732_8, -6.457_134_743_238_754e-17)),
    (1.000_000_1, (0.785_398_213_397_445_9, -2.689_309_543_197_418_7e-17)),
];
const POWERS: [(f64, f64, (f64, f64)); 9] = [
    (2.0, 0.5, (SQRT_2, -9.667_293_313_452_913e-17)),
    (10.0, -3.7, (0.000_199_526_231_496_887_88, 2.770_970_150_866_419_3e-21)),
    (1.0001, 12_345.678, (3.436_680_641_432_771, -1.319_005_839_223_551e-16)),
    (0.3, 200.25, (1.965_763_457_996_386e-105, -1.584_990_014_969_909_3e-121)),
    (-1.7, 3.0, (-4.912_999_999_999_999, -2.473_576_898_864_849e-16)),
    (-1.7, -8.0, (0.014_335_360_832_968_507, 2.244_104_695_633_611e-19)),
    (1.5, 500.0, (1.110_783_775_946_594e88, 6.646_776_358_567_471e71)),
    (0.1, 150.5, (3.162_277_660_168_405_5e-151, 2.017_603_026_360_001e-167)),
    (-1.001, 20_001.0, (-480_821_261.838_569_16, -6.819_566_497_206_443e-9)),
];

#[test]
fn angles_keep_thirty_digits() {
    for (x, expected) in SINES {
        let error = relative(Real::sin(Dd::from(x)), expected);
        assert!(error < 1e-30, "sin {x}: {error:e}");
    }
    for (x, expected) in COSINES {
        let error = relative(Real::cos(Dd::from(x)), expected);
        assert!(error < 1e-30, "cos {x}: {error:e}");
    }
    for (x, expected) in ARC_TANGENTS {
        let error = relative(Dd::from(x).atan(), expected);
        assert!(error < 1e-30, "atan {x}: {error:e}");
    }
    assert_eq!(Dd::ZERO.sin_cos(), (Dd::ZERO, Dd::ONE));
    assert_eq!(Dd::ZERO.atan(), Dd::ZERO);
    assert!(!Dd::from(f64::INFINITY).sin_cos().0.is_finite());
    let quarter = Dd::from(f64::INFINITY).atan();
    assert_eq!(quarter.times_power_of_two(1), Dd::PI);
}

#[test]
fn powers_keep_thirty_digits_for_every_one_of_their_ways() {
    for (u, v, expected) in POWERS {
        let error = relative(Dd::from(u).pow(Dd::from(v)), expected);
        // Squaring doubles an error at each step; the exponential carries |v ln u| of them.
        let bound = 3e-31 * (1.0 + v.abs().min(500.0));
        assert!(error < bound, "{u}^{v}: {error:e}");
    }
}

#[test]
fn powers_at_the_edges_are_those_of_doubles() {
    let infinity = f64::INFINITY;
    for (u, v) in [(0.0, 0.0), (0.0, 2.5), (0.0, -1.0), (-3.0, 0.0), (infinity, -2.0), (2.0, infinity), (0.5, infinity)]
    {
        assert_eq!(Dd::from(u).pow(Dd::from(v)).to_f64(), libm::pow(u, v), "{u}^{v}");
    }
    assert!(!Dd::from(-2.0).pow(Dd::from(0.5)).is_finite());
    // A third in double-double is no whole number, nor is a whole number with something in its low word.
    assert!(!Dd::from(-2.0).pow(Dd::from_sum(2.0, 1e-20)).is_finite());
    assert_eq!(Dd::from(-1.0).pow(Dd::from(4e15 + 1.0)).to_f64(), -1.0);
}

#[test]
fn squares_are_exact_also_of_negative_numbers() {
    let x = -1.000_000_123_456_789;
    assert_eq!(Dd::from(x).pow(Dd::from(2.0)), Dd::from_product(x, x));
}

#[test]
fn infinity_passes_through_a_logistic_curve() {
    let grown = Dd::from(800.0).exp();
    assert_eq!(Dd::from(3.0) / (Dd::ONE + grown), Dd::ZERO);
    assert_eq!((grown * Dd::from(-2.0)).to_f64(), f64::NEG_INFINITY);
    assert!((grown - grown).to_f64().is_nan());
}

#[test]
fn decimal_logarithm_and_pi() {
    assert!(((Dd::from(1000.0).log10() - Dd::from(3.0)).to_f64()).abs() < 1e-30);
    assert!(Dd::PI.sin_cos().0.to_f64().abs() < 1e-32);
    let slope = Dual::variable(Dd::from(4.0)).log10().slope;
    let expected = Dd::ONE / (Dd::from(4.0) * Dd::LN_10);
    assert!(((slope - expected) / expected).to_f64().abs() < 1e-30);
}

proptest! {
    #[test]
    fn sine_and_cosine_lie_on_the_circle(x in -1e6..1e6_f64, low in -1e-17..1e-17_f64) {
        let (s, c) = Dd::from_sum(x, x * low).sin_cos();
        prop_assert!((s.square() + c.square() - Dd::ONE).to_f64().abs() < 1e-30);
    }

    #[test]
    fn the_tangent_undoes_the_arc_tangent(x in -1e3..1e3_f64, low in -1e-17..1e-17_f64) {
        let x = Dd::from_sum(x, x * low);
        let (s, c) = x.atan().sin_cos();
        prop_assert!((s - x * c).to_f64().abs() < 1e-30 * (1.0 + x.to_f64().abs()));
    }

    #[test]
    fn powers_add_their_exponents(u in 1e-3..1e3_f64, v in -20.0..20.0_f64, w in -20.0..20.0_f64) {
        let u = Dd::from(u);
        let (v, w) = (Dd::from(v), Dd::from(w));
        let ratio = u.pow(v) * u.pow(w) / u.pow(v + w);
        prop_assert!((ratio - Dd::ONE).to_f64().abs() < 1e-28);
    }

    #[test]
    fn rounded_results_are_those_of_doubles(x in -700.0..700.0_f64, v in -3.0..3.0_f64) {
        let close = |exact: Dd, rounded: f64| (exact.to_f64() - rounded).abs() <= 4e-16 * rounded.abs();
        prop_assert!(close(Real::sin(Dd::from(x)), libm::sin(x)));
        prop_assert!(close(Real::cos(Dd::from(x)), libm::cos(x)));
        prop_assert!(close(Dd::from(x).atan(), libm::atan(x)));
        prop_assert!(close(Dd::from(x.abs()).pow(Dd::from(v)), libm::pow(x.abs(), v)));
    }
}
