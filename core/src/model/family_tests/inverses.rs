//! solve(value(x)) gives x back, to some last bits times the condition.

use super::*;

#[test]
fn there_and_back() {
    for family in &FAMILIES {
        let mut stream = Stream::new(31, 2);
        for _ in 0..2000 {
            let (b, x) = draw(family.name, &mut stream);
            let (value, slopes) = slopes(family.function, &b, x);
            let allowed = 8.0 * f64::EPSILON * (x.abs() + reach(&b, x, value, &slopes) / slopes[0].abs());
            // Where the last bits of y alone decide about x, there is nothing to solve.
            if allowed > 1e-3 * x.abs() {
                continue;
            }
            let found = (family.solve)(&b, value);
            let off = found.map_or(f64::INFINITY, |f| (f - x).abs());
            assert!(off <= allowed, "{} {b:?} at {x}: {found:?}, allowed {allowed}", family.name);
            assert!((family.domain)(found.unwrap()));
        }
    }
}

#[test]
fn thermistor_inverse_carries_its_slopes() {
    let mut stream = Stream::new(8, 8);
    for _ in 0..500 {
        let (b, r) = draw("steinhart_hart", &mut stream);
        let (kelvin, forward) = slopes(steinhart_hart::temperature, &b, r);
        let (back, inverse) = slopes(steinhart_hart::resistance, &b, kelvin);
        assert!((back - r).abs() <= 1e-13 * r * (1.0 + kelvin / (r * forward[0]).abs()));
        // dR/dT = 1/(dT/dR), ∂R/∂b = −(∂T/∂b)/(dT/dR).
        assert!((inverse[0] * forward[0] - 1.0).abs() < 1e-11, "{b:?} {r}");
        for k in 1..4 {
            let right = -forward[k] / forward[0];
            assert!((inverse[k] - right).abs() < 1e-11 * right.abs(), "{b:?} {r} {k}");
        }
    }
}

#[test]
fn platinum_near_zero_does_not_cancel() {
    let b = [100.0, 3.9083e-3, -5.775e-7];
    for k in 0..300 {
        let t = libm::pow(10.0, -14.0 + f64::from(k) / 20.0).min(850.0);
        for t in [t, (-t).max(-200.0)] {
            let r = callendar_van_dusen::value(&b, t);
            let found = callendar_van_dusen::solve(&b, r).unwrap();
            // Half a last bit of R is all that is lost.
            assert!((found - t).abs() <= 4.0 * f64::EPSILON * (r / 0.39 + t.abs()), "{t} {found}");
        }
    }
    // A resistance given as R₀ plus a small excess that is exact: relative accuracy of t itself.
    let r = 100.0 + f64::from(1_u32 << 10) * 2.0_f64.powi(-46);
    let t = callendar_van_dusen::solve(&b, r).unwrap();
    let excess = 2.0_f64.powi(-36) / 100.0;
    assert!((t - excess / 3.9083e-3).abs() < 1e-15 * t + 2e-4 * t * t, "{t}");
}

#[test]
fn readings_beyond_reach_have_no_place() {
    assert_eq!(line_zero::solve(&[0.0], 1.0), None);
    assert_eq!(power::solve(&[2.0, 1.5], -1.0), None);
    assert_eq!(power::solve(&[2.0, 1.5], 0.0), None);
    assert_eq!(power::solve(&[2.0, 0.0], 2.0), None);
    assert_eq!(exponential::solve(&[1.0, 2.0, 0.5], 1.0), None);
    assert_eq!(exponential::solve(&[1.0, 2.0, 0.5], 0.9), None);
    assert_eq!(exponential::solve(&[1.0, 0.0, 0.5], 1.5), None);
    assert_eq!(hyperbola::solve(&[1.0, 2.0, 3.0], 1.0), None);
    assert_eq!(hyperbola::solve(&[1.0, 0.0, 3.0], 1.0), None);
    assert_eq!(rational::solve(&[1.0, 6.0, 2.0], 3.0), None);
    assert_eq!(rational::solve(&[1.0, 2.0, 2.0], 1.0), None);
    for solve in [logistic4::solve, logistic5::solve] {
        let b = [0.05, 1.2, 30.0, 2.0, 1.4];
        assert_eq!(solve(&b, 0.05), Some(0.0));
        for y in [0.049, 2.0, 2.1, f64::NAN] {
            assert_eq!(solve(&b, y), None, "{y}");
        }
    }
    assert_eq!(steinhart_hart::solve(&[1.1e-3, 2.3e-4, 9e-8], -1.0), None);
    assert_eq!(steinhart_hart::solve(&[1.1e-3, 2.3e-4, 9e-8], f64::NAN), None);
    // With C < 0 the branch ends at ln R = 10: 1/T = 1e-3 + 2e-3 there, nothing colder is reached.
    let turning = [1e-3, 3e-4, -1e-6];
    assert_eq!(steinhart_hart::solve(&turning, 1.0 / 3.01e-3), None);
    assert!(steinhart_hart::solve(&turning, 1.0 / 2.99e-3).is_some_and(|r| r < libm::exp(10.0)));
    assert_eq!(beta::solve(&[3950.0, 1e4], 0.0), None);
    let pt = [100.0, 3.9083e-3, -5.775e-7, -4.183e-12];
    for r in [18.52007, 390.4812, 1e4, -1.0, f64::NAN] {
        assert_eq!(callendar_van_dusen::solve(&pt, r), None, "{r}");
    }
}
