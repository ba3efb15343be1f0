//! Double-double against constants computed with 80 digits (mpmath 1.3.0), and laws.

use super::Dd;
use proptest::prelude::*;

fn dd(hi: f64, lo: f64) -> Dd {
    Dd::from_sum(hi, lo)
}

/// |a − b|/|b|, b from two words.
fn relative(a: Dd, b: (f64, f64)) -> f64 {
    let b = dd(b.0, b.1);
    ((a - b) / b).to_f64().abs()
}

const PI: (f64, f64) = (std::f64::consts::PI, 1.224_646_799_147_353_2e-16);
const E: (f64, f64) = (std::f64::consts::E, 1.445_646_891_729_250_2e-16);

#[test]
fn arithmetic_keeps_thirty_digits() {
    let pi = dd(PI.0, PI.1);
    let cases = [
        (pi + dd(E.0, E.1), (5.859_874_482_048_839, -1.770_598_407_624_022_8e-16)),
        (pi * pi, (9.869_604_401_089_358, 6.265_295_508_739_711e-16)),
        (Dd::ONE / pi, (std::f64::consts::FRAC_1_PI, -1.967_867_667_518_248_6e-17)),
        (pi.sqrt(), (1.772_453_850_905_516, -7.666_586_499_825_799e-17)),
        (Dd::from(2.0).sqrt(), (std::f64::consts::SQRT_2, -9.667_293_313_452_913e-17)),
        (Dd::ONE / Dd::from(3.0), (1.0 / 3.0, 1.850_371_707_708_594e-17)),
    ];
    for (found, expected) in cases {
        assert!(relative(found, expected) < 1e-31, "{found:?} {expected:?}");
    }
    // Cancellation of three digits costs three digits.
    let rest = pi - Dd::from(22.0) / Dd::from(7.0);
    assert!(relative(rest, (-0.001_264_489_267_349_618_7, 4.276_603_865_778_848e-20)) < 1e-28);
}

#[test]
fn exponential_keeps_its_digits() {
    let cases = [
        (1.0, E, 2e-31),
        (-20.5, (1.250_152_866_386_742_6e-9, 6.448_235_878_237_776e-26), 5e-31),
        (650.25, (2.511_810_419_161_990_4e282, 1.271_936_208_417_761_4e266), 1e-29),
        (1e-8, (1.000_000_01, 1.107_747_100_851_137_8e-16), 1e-31),
    ];
    for (x, expected, bound) in cases {
        let error = relative(Dd::from(x).exp(), expected);
        assert!(error < bound, "exp {x}: {error:e}");
    }
    assert_eq!(Dd::from(0.0).exp(), Dd::ONE);
    assert_eq!(Dd::from(-800.0).exp(), Dd::ZERO);
    assert_eq!(Dd::from(800.0).exp().to_f64(), f64::INFINITY);
    assert!(Dd::from(f64::NAN).exp().to_f64().is_nan());
}

#[test]
fn logarithm_keeps_its_digits_next_to_one_and_at_the_ends() {
    let cases = [
        (3.0, (1.098_612_288_668_109_8, -9.071_297_235_001_53e-17)),
        (10.0, (std::f64::consts::LN_10, -2.170_756_223_382_249_4e-16)),
        (1e300, (690.775_527_898_213_7, 2.374_766_002_880_024_3e-14)),
        (1e-300, (-690.775_527_898_213_7, -2.367_009_617_670_983_2e-14)),
        (1.0 + 1.0 / 1_099_511_627_776.0, (9.094_947_017_725_146e-13, 2.507_721_281_752_502_6e-37)),
        (0.7, (-0.356_674_943_938_732_45, 4.825_563_799_376_62e-18)),
    ];
    for (x, expected) in cases {
        let error = relative(Dd::from(x).ln(), expected);
        // ln(1 + 2⁻⁴⁰) is known here to 53 + 27 bits only.
        let bound = if x > 1.0 && x < 1.1 { 1e-23 } else { 5e-31 };
        assert!(error < bound, "ln {x}: {error:e}");
    }
    assert_eq!(Dd::ONE.ln(), Dd::ZERO);
    assert_eq!(Dd::ZERO.ln().to_f64(), f64::NEG_INFINITY);
    assert!(Dd::from(-1.0).ln().to_f64().is_nan());
}

#[test]
fn small_and_large_numbers_come_through_scaling() {
    let tiny = Dd::from(1e-300).times_power_of_two(900);
    assert_eq!(tiny.times_power_of_two(-900).to_f64(), 1e-300);
    assert!(!(Dd::from(1e200) * Dd::from(1e200)).is_finite());
}

proptest! {
    #[test]
    fn sums_and_products_of_doubles_are_exact(a in -1e100..1e100_f64, b in -1e100..1e100_f64) {
        let sum = Dd::from_sum(a, b);
        prop_assert_eq!((sum - Dd::from(a) - Dd::from(b)).to_f64(), 0.0);
        prop_assert_eq!((Dd::from_product(a, b) - Dd::from(a) * b).to_f64(), 0.0);
    }

    #[test]
    fn quotient_times_divisor_returns(a in 1e-90..1e90_f64, low in -1e-17..1e-17_f64, b in 1e-90..1e90_f64) {
        let a = dd(a, a * low);
        let back = a / Dd::from(b) * Dd::from(b);
        prop_assert!(((back - a) / a).to_f64().abs() < 2e-31);
    }

    #[test]
    fn root_squared_returns(a in 1e-90..1e90_f64, low in -1e-17..1e-17_f64) {
        let a = dd(a, a * low);
        prop_assert!(((a.sqrt().square() - a) / a).to_f64().abs() < 3e-31);
    }

    #[test]
    fn logarithm_undoes_the_exponential(x in -30.0..30.0_f64) {
        let back = Dd::from(x).exp().ln();
        prop_assert!((back - Dd::from(x)).to_f64().abs() < 1e-30);
    }
}
