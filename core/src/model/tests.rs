//! Curves: values against each other, branches and roots.

use super::*;
use proptest::prelude::*;

fn formula(text: &str) -> Curve {
    Curve::Formula(text.parse().unwrap())
}

fn branch(lo: f64, hi: f64, rising: bool) -> Branch {
    Branch { lo, hi, rising }
}

#[test]
fn polynomial_value_slope_and_gradients() {
    let curve = Curve::Polynomial(vec![1.0, -2.0, 0.0, 4.0]);
    assert_eq!((curve.value(3.0), curve.derivative(3.0)), (103.0, 106.0));
    assert_eq!(curve.gradient(3.0), [1.0, 3.0, 9.0, 27.0]);
    assert_eq!(curve.slope_gradient(3.0), [0.0, 1.0, 6.0, 27.0]);
    assert_eq!(curve.gradient(0.0), [1.0, 0.0, 0.0, 0.0]);
    assert!(curve.value(f64::NAN).is_nan() && curve.value(f64::INFINITY).is_nan());
    assert_eq!(Curve::Polynomial(vec![]).value(2.0), 0.0);
}

#[test]
fn the_logarithm_ends_at_zero() {
    let curve = Curve::Log([1.0, 2.0]);
    assert_eq!((curve.value(1.0), curve.derivative(4.0)), (1.0, 0.5));
    assert_eq!(curve.gradient(1.0), [1.0, 0.0]);
    assert_eq!(curve.slope_gradient(4.0), [0.0, 0.25]);
    for x in [0.0, -1.0, f64::NAN] {
        assert!(curve.value(x).is_nan() && curve.derivative(x).is_nan() && !curve.has_value_at(x));
        assert!(!Family::Log.has_value_at(x));
    }
    assert_eq!(curve.solve(1.0, 0.0, f64::INFINITY), [1.0]);
    assert!(curve.solve(1.0, 2.0, 3.0).is_empty());
    assert!(Curve::Log([1.0, 0.0]).solve(1.0, 0.0, 9.0).is_empty());
    assert_eq!(curve.branches(-1.0, 9.0), [branch(f64::MIN_POSITIVE, 9.0, true)]);
    assert_eq!(Curve::Log([0.0, -1.0]).branches(1.0, 9.0), [branch(1.0, 9.0, false)]);
}

#[test]
fn branches_of_a_polynomial_end_where_it_turns() {
    // 3x − x³ turns at ±1.
    let curve = Curve::Polynomial(vec![0.0, 3.0, 0.0, -1.0]);
    assert_eq!(curve.turning_points(-5.0, 5.0), [-1.0, 1.0]);
    let expected = [branch(-2.0, -1.0, false), branch(-1.0, 1.0, true), branch(1.0, 2.0, false)];
    assert_eq!(curve.branches(-2.0, 2.0), expected);
    assert!(expected[1].contains(1.0) && !expected[1].contains(1.1));
    // An inflection with a horizontal tangent does not turn.
    let cube = Curve::Polynomial(vec![0.0, 0.0, 0.0, 1.0]);
    assert!(cube.turning_points(-2.0, 2.0).is_empty());
    assert_eq!(cube.branches(-2.0, 2.0), [branch(-2.0, 2.0, true)]);
    assert!(Curve::Polynomial(vec![4.0]).branches(0.0, 1.0).is_empty());
    let line = Curve::Polynomial(vec![4.0, -2.0]);
    let all = line.branches(f64::NEG_INFINITY, f64::INFINITY);
    assert_eq!(all, [branch(f64::NEG_INFINITY, f64::INFINITY, false)]);
    assert!(line.branches(1.0, 1.0).is_empty() && line.branches(f64::NAN, 1.0).is_empty());
}

#[test]
fn every_root_is_found() {
    let line = Curve::Polynomial(vec![4.0, -2.0]);
    assert_eq!(line.solve(1.0, f64::NEG_INFINITY, f64::INFINITY), [1.5]);
    let parabola = Curve::Polynomial(vec![0.0, 4.0, -1.0]);
    let both = parabola.solve(3.0, -10.0, 10.0);
    assert!(both.len() == 2 && (both[0] - 1.0).abs() < 1e-15 && (both[1] - 3.0).abs() < 2e-15);
    assert_eq!(parabola.solve(3.0, 2.0, 10.0), [3.0]);
    assert_eq!(parabola.solve(4.0, 0.0, 10.0), [2.0]);
    assert!(parabola.solve(4.1, 0.0, 10.0).is_empty());
    assert!(parabola.solve(f64::NAN, 0.0, 10.0).is_empty());
    assert!(Curve::Polynomial(vec![4.0]).solve(4.0, 0.0, 1.0).is_empty());
    // A leading coefficient of zero is a polynomial of lower degree.
    assert_eq!(Curve::Polynomial(vec![0.0, 2.0, 0.0]).solve(6.0, 0.0, 10.0), [3.0]);
    let far = Curve::Polynomial(vec![0.0, 1.0, 1e-200]).solve(1.0, f64::NEG_INFINITY, f64::INFINITY);
    assert_eq!(far.len(), 2);
    assert!((far[0] / -1e200 - 1.0).abs() < 1e-15 && (far[1] - 1.0).abs() < 1e-15);
}

#[test]
fn formulas_are_scanned() {
    let wave = formula("sin(x)");
    let turns = wave.turning_points(0.0, 6.0);
    assert_eq!(turns.len(), 2);
    assert!((turns[0] - std::f64::consts::FRAC_PI_2).abs() < 1e-14);
    assert_eq!(wave.branches(0.0, 6.0).len(), 3);
    assert_eq!(wave.solve(0.5, 0.0, 6.0).len(), 2);
    let v = formula("abs(x - 1)");
    assert_eq!(v.branches(0.0, 3.0).len(), 2);
    // A pole is not a branch, and the other side of it not a root.
    assert!(formula("1/x").branches(-1.0, 1.7).is_empty());
    assert!(formula("1/x").solve(0.0, -1.0, 1.7).is_empty());
    assert_eq!(formula("1/x").branches(1.0, 2.0), [branch(1.0, 2.0, false)]);
    assert!(formula("sqrt(x)").branches(-1.0, -0.5).is_empty());
    assert!(formula("2*x").solve(1.0, 0.0, f64::INFINITY).is_empty());
    assert!(formula("2*x").gradient(1.0).is_empty() && formula("2*x").coefficients().is_empty());
}

proptest! {
    #[test]
    fn roots_made_are_roots_found(mut roots in prop::collection::vec(-50..50_i32, 1..6), lead in 0.1..9.0_f64) {
        roots.sort_unstable();
        roots.dedup();
        let mut b = vec![lead];
        for root in &roots {
            let mut next = vec![0.0; b.len() + 1];
            for (i, c) in b.iter().enumerate() {
                next[i + 1] += c;
                next[i] -= c * f64::from(*root);
            }
            b = next;
        }
        let found = Curve::Polynomial(b).solve(0.0, -60.0, 60.0);
        prop_assert_eq!(found.len(), roots.len());
        for (x, root) in found.iter().zip(&roots) {
            prop_assert!((x - f64::from(*root)).abs() < 1e-6, "{x} {root}");
        }
    }

    #[test]
    fn branches_cover_the_interval_and_are_monotone(b in prop::collection::vec(-9.0..9.0_f64, 2..8)) {
        let curve = Curve::Polynomial(b);
        let branches = curve.branches(-3.0, 3.0);
        prop_assert_eq!((branches[0].lo, branches[branches.len() - 1].hi), (-3.0, 3.0));
        for branch in &branches {
            let at = |k: f64| curve.value(branch.lo + (branch.hi - branch.lo) * k / 8.0);
            for k in 0..8_u32 {
                let rise = at(f64::from(k + 1)) - at(f64::from(k));
                let along = if branch.rising { rise } else { -rise };
                prop_assert!(along > -1e-9);
            }
        }
        for pair in branches.windows(2) {
            prop_assert_eq!(pair[0].hi, pair[1].lo);
        }
    }

    #[test]
    fn slopes_are_the_limits_of_differences(b in prop::collection::vec(-9.0..9.0_f64, 1..8), x in 0.5..3.0_f64) {
        for curve in [Curve::Polynomial(b.clone()), Curve::Log([b[0], 2.0])] {
            let h = 1e-5;
            let rough = (curve.value(x + h) - curve.value(x - h)) / (2.0 * h);
            let scale: f64 = curve.gradient(x).iter().map(|g| g.abs() * 10.0).sum();
            prop_assert!((rough - curve.derivative(x)).abs() < 1e-7 * scale.max(1.0));
            let near = curve.gradient(x + h).into_iter().zip(curve.gradient(x - h));
            for (d, (up, down)) in curve.slope_gradient(x).iter().zip(near) {
                prop_assert!((d - (up - down) / (2.0 * h)).abs() < 1e-7 * scale.max(1.0));
            }
        }
    }
}
