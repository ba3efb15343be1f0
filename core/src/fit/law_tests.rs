//! Laws on random inputs.

use super::*;
use proptest::prelude::*;

const FAMILIES: [Family; 8] = [
    Family::Polynomial(0),
    Family::Polynomial(1),
    Family::Polynomial(2),
    Family::Polynomial(5),
    Family::Polynomial(10),
    Family::LineThroughZero,
    Family::OnePoint,
    Family::Log,
];

fn any_family() -> impl Strategy<Value = Family> {
    prop::sample::select(FAMILIES.to_vec())
}

fn any_weights() -> impl Strategy<Value = Weights> {
    prop::sample::select(vec![
        Weights::Equal,
        Weights::InverseX,
        Weights::InverseX2,
        Weights::InverseY,
        Weights::InverseY2,
    ])
}

/// Every finite double, and the ends of the range more often.
fn any_number() -> impl Strategy<Value = f64> {
    prop_oneof![
        any::<f64>().prop_filter("finite", |v| v.is_finite()),
        -1e3..1e3_f64,
        prop::sample::select(vec![0.0, -0.0, 1e300, -1e300, 1e-300, f64::MAX, 5e-324, 1.0]),
    ]
}

/// Ordinary positive points with eleven levels and repeats, for every family and weight.
fn ordinary() -> impl Strategy<Value = Vec<Point>> {
    prop::collection::vec((1..30_u32, 0.5..20.0_f64), 14..30).prop_map(|pairs| {
        let levels = (1..12_u32).map(|k| (k, 3.0 + f64::from(k * k % 7)));
        let all = levels.chain(pairs);
        all.map(|(x, y)| Point { x: f64::from(x) * 0.37, y }).collect()
    })
}

fn scaled(points: &[Point], x: f64, y: f64) -> Vec<Point> {
    points.iter().map(|p| Point { x: p.x * x, y: p.y * y }).collect()
}

proptest! {
    #[test]
    fn no_finite_input_panics_and_every_result_is_finite(
        pairs in prop::collection::vec((any_number(), any_number()), 0..14),
        family in any_family(),
        weights in any_weights(),
        x in any_number(),
    ) {
        let points: Vec<Point> = pairs.into_iter().map(|(x, y)| Point { x, y }).collect();
        if let Ok(fit) = fit(&family, &points, weights) {
            let finite = |list: &[f64]| list.iter().all(|v| v.is_finite());
            prop_assert!(finite(&fit.coefficients) && finite(&fit.residuals) && finite(&fit.leverage));
            prop_assert!(fit.covariance.iter().all(|row| finite(row)) && fit.residual_ss.is_finite());
            let _ = (fit.variance_at(x), fit.mean_variance(x), fit.slope_variance(x), fit.influence(x));
            let _ = (fit.r_squared(), fit.aicc(), fit.bic(), fit.press_rmse(), fit.level_out_rmse());
            let _ = (fit.studentised(), fit.cooks_distance(), fit.level_leverage());
            let _ = (fit.curve.branches(-x.abs(), x.abs()), fit.curve.solve(x, -1e3, 1e3));
        }
    }

    #[test]
    fn powers_of_two_rescale_exactly(
        points in ordinary(), family in any_family(), weights in any_weights(), a in -20..20_i32, b in -40..40_i32,
    ) {
        let (by_x, by_y) = (f64::powi(2.0, a), f64::powi(2.0, b));
        let before = fit(&family, &points, weights).unwrap();
        let after = fit(&family, &scaled(&points, by_x, by_y), weights).unwrap();
        let log = family == Family::Log;
        let lowest = usize::from(matches!(family, Family::LineThroughZero | Family::OnePoint));
        for (j, (old, new)) in before.coefficients.iter().zip(&after.coefficients).enumerate() {
            // ln(2^a x) is not a rescaled ln x: only the slope keeps its bits, and only nearly.
            if log {
                let slope_or_not = j == 1;
                prop_assert!(!slope_or_not || (new / (old * by_y) - 1.0).abs() < 1e-12);
            } else {
                prop_assert_eq!(*new, old * by_y / f64::powi(by_x, i32::try_from(j + lowest).unwrap()));
            }
        }
        if !log {
            for (old, new) in before.residuals.iter().zip(&after.residuals) {
                prop_assert_eq!(*new, old * by_y);
            }
            // √w scales by √2 where 1/x scales by 2: those bits may differ.
            for (old, new) in before.leverage.iter().zip(&after.leverage) {
                prop_assert!((old - new).abs() < 1e-14);
            }
            prop_assert!((before.condition() / after.condition() - 1.0).abs() < 1e-12);
        }
    }

    #[test]
    fn the_order_of_the_points_does_not_matter(
        points in ordinary(), family in any_family(), weights in any_weights(), shift in 0..14_usize,
    ) {
        let mut turned = points.clone();
        turned.rotate_left(shift);
        turned.swap(0, 5);
        let (one, two) = (fit(&family, &points, weights).unwrap(), fit(&family, &turned, weights).unwrap());
        prop_assert_eq!(&one.coefficients, &two.coefficients);
        prop_assert_eq!(&one.covariance, &two.covariance);
        prop_assert_eq!(one.residual_sd, two.residual_sd);
        for (p, e) in two.points.iter().zip(&two.residuals) {
            let same = one.points.iter().zip(&one.residuals).any(|(q, f)| p == q && e == f);
            prop_assert!(same);
        }
    }

    /// Factors that are no power of two round every number once: the fitted values move by units of the
    /// last place, times what the fit itself makes of such a change.
    #[test]
    fn any_factor_rescales_to_the_last_places(
        points in ordinary(), family in any_family(), weights in any_weights(), by_x in 0.01..90.0_f64,
        by_y in 0.01..90.0_f64, at in 0.4..10.0_f64,
    ) {
        let before = fit(&family, &points, weights).unwrap();
        let after = fit(&family, &scaled(&points, by_x, by_y), weights).unwrap();
        // Degree 10 on 11 levels is too close to singular for a bound this simple.
        prop_assume!(family != Family::Polynomial(10));
        let sensitivity = |x: f64| -> f64 {
            let moved = |(l, p): (&f64, &Point)| {
                (l * p.y).abs() + (l * before.curve.derivative(p.x) * p.x).abs()
            };
            before.influence(x).iter().zip(&points).map(moved).sum()
        };
        let powers: f64 = before.curve.gradient(at).iter().zip(&before.coefficients).map(|(g, b)| (g * b).abs()).sum();
        let allowed = 16.0 * f64::EPSILON * (sensitivity(at) + powers + before.residual_sd.unwrap_or(0.0));
        let moved = (after.curve.value(at * by_x) / by_y - before.curve.value(at)).abs();
        prop_assert!(moved <= allowed, "{moved:e} {allowed:e}");
        // The weights 1/x … scale with their unit; Σwe² in units of its own is compared through s·√v.
        let sd = |f: &Fit, x: f64| f.residual_sd.unwrap() * libm::sqrt(f.variance_at(x));
        prop_assert!((sd(&after, at * by_x) / (by_y * sd(&before, at)) - 1.0).abs() < 1e-9);
    }

    /// One known uncertainty for all readings, or one standard for all of them, is no weighting.
    #[test]
    fn equal_weights_are_no_weights(points in ordinary(), family in any_family(), power in -20..20_i32, u in 0.01..9.0_f64) {
        let plain = fit(&family, &points, Weights::Equal).unwrap();
        for (u, ulps) in [(f64::powi(2.0, power), 0.0), (u, 2.0)] {
            let own = vec![u; points.len()];
            let request =
                Request { reading_uncertainty: Some(&own), ..Request::new(&family, &points, Weights::Typed) };
            let typed = estimate(&request).unwrap();
            for (a, b) in plain.coefficients.iter().zip(&typed.coefficients) {
                prop_assert!((a - b).abs() <= ulps * f64::EPSILON * a.abs(), "{a:e} {b:e}");
            }
            prop_assert!((typed.residual_ss * u * u / plain.residual_ss - 1.0).abs() < 1e-13);
        }
    }

    #[test]
    fn adding_a_member_of_the_family_moves_the_coefficients_only(
        points in ordinary(),
        weights in prop::sample::select(vec![Weights::Equal, Weights::InverseX, Weights::InverseX2]),
    ) {
        let family = Family::Polynomial(2);
        // Whole numbers over a power of two, so that the sums are exact.
        let coarse = |v: f64| libm::round(v * 64.0) / 64.0;
        let base: Vec<Point> = points.iter().map(|p| Point { x: coarse(p.x), y: coarse(p.y) }).collect();
        let more = base.iter().map(|p| Point { x: p.x, y: p.y + 5.0 - 2.0 * p.x }).collect::<Vec<_>>();
        let (one, two) = (fit(&family, &base, weights).unwrap(), fit(&family, &more, weights).unwrap());
        prop_assert_eq!(&one.residuals, &two.residuals);
        prop_assert!((two.coefficients[0] - one.coefficients[0] - 5.0).abs() < 1e-12);
        prop_assert!((two.coefficients[1] - one.coefficients[1] + 2.0).abs() < 1e-12);
    }

    #[test]
    fn leverages_add_up_to_the_number_of_coefficients(points in ordinary(), family in any_family(), weights in any_weights()) {
        let fit = fit(&family, &points, weights).unwrap();
        let sum: f64 = fit.leverage.iter().sum();
        let p = f64::from(u32::try_from(family.coefficient_count()).unwrap());
        prop_assert!((sum - p).abs() < 1e-12);
        // Residuals are orthogonal to the model.
        for column in fit.orthonormal_columns() {
            let whitened = fit.residuals.iter().zip(&fit.variance_ratio).map(|(e, v)| e / v.sqrt());
            let dot: f64 = column.iter().zip(whitened).map(|(q, e)| q * e).sum();
            prop_assert!(dot.abs() < 1e-12 * fit.residual_ss.sqrt().max(1.0));
        }
    }
}
