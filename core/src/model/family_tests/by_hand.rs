//! Exact derivatives against expressions differentiated by hand, 1000 random points a family.

use super::*;

/// [slope by x, slopes by each coefficient], by the rules of differentiation and in ordinary doubles.
fn by_hand(name: &str, b: &[f64], x: f64) -> Vec<f64> {
    match name {
        "line_zero" => vec![b[0], x],
        "power" => {
            let p = x.powf(b[1]);
            vec![b[0] * b[1] * p / x, p, b[0] * p * x.ln()]
        }
        "exponential" => {
            let e = (b[2] * x).exp();
            vec![b[1] * b[2] * e, 1.0, e, b[1] * x * e]
        }
        "hyperbola" => {
            let u = x + b[2];
            vec![-b[1] / (u * u), 1.0, 1.0 / u, -b[1] / (u * u)]
        }
        "rational" => {
            let u = 1.0 + b[2] * x;
            vec![(b[1] - b[0] * b[2]) / (u * u), 1.0 / u, x / u, -x * (b[0] + b[1] * x) / (u * u)]
        }
        "logistic4" => {
            let t = b[1] * (x / b[2]).ln();
            let (q, p) = (1.0 / (1.0 + (-t).exp()), 1.0 / (1.0 + t.exp()));
            let by_t = (b[3] - b[0]) * p * q;
            vec![by_t * b[1] / x, p, by_t * t / b[1], -by_t * b[1] / b[2], q]
        }
        "logistic5" => {
            let t = b[1] * (x / b[2]).ln();
            let log = t.exp().ln_1p();
            let p = (-b[4] * log).exp();
            let by_t = (b[3] - b[0]) * b[4] * p / (1.0 + (-t).exp());
            let by_d = -(-b[4] * log).exp_m1();
            vec![by_t * b[1] / x, p, by_t * t / b[1], -by_t * b[1] / b[2], by_d, (b[3] - b[0]) * p * log]
        }
        "steinhart_hart" => {
            let n = x.ln();
            let t = 1.0 / (b[0] + b[1] * n + b[2] * n.powi(3));
            vec![-t * t * (b[1] + 3.0 * b[2] * n * n) / x, -t * t, -t * t * n, -t * t * n.powi(3)]
        }
        "beta" => {
            let n = (x / b[1]).ln();
            let t = 1.0 / (1.0 / 298.15 + n / b[0]);
            vec![-t * t / (b[0] * x), t * t * n / (b[0] * b[0]), t * t / (b[0] * b[1])]
        }
        _ => {
            let (cold, cold_slope) =
                if x < 0.0 { (x.powi(4) - 100.0 * x.powi(3), 4.0 * x.powi(3) - 300.0 * x * x) } else { (0.0, 0.0) };
            let factor = 1.0 + b[1] * x + b[2] * x * x + b[3] * cold;
            let slope = b[0] * (b[1] + 2.0 * b[2] * x + b[3] * cold_slope);
            vec![slope, factor, b[0] * x, b[0] * x * x, b[0] * cold]
        }
    }
}

#[test]
fn slopes_by_x_and_by_every_coefficient() {
    for family in &FAMILIES {
        let mut stream = Stream::new(77, 1);
        for _ in 0..1000 {
            let (b, x) = draw(family.name, &mut stream);
            let (value, found) = slopes(family.function, &b, x);
            let right = by_hand(family.name, &b, x);
            assert!(value.is_finite() && found.len() == right.len() && found.len() == family.names.len() + 1);
            for (k, (found, right)) in found.iter().zip(&right).enumerate() {
                let text = format!("{} slope {k} at {b:?}, {x}: {found} for {right}", family.name);
                assert!((found - right).abs() <= 1e-12 * right.abs(), "{text}");
            }
        }
    }
}

/// The slope of the slope by a coefficient, ∂f′/∂β, by dual numbers of dual numbers: against differences of f′.
#[test]
fn mixed_second_derivatives() {
    type Second = Dual<Dual<f64>>;
    type SecondFunction = fn(&[Second], Second) -> Second;
    let cases: [(&str, SecondFunction); 3] = [
        ("logistic5", logistic5::value),
        ("steinhart_hart", steinhart_hart::temperature),
        ("callendar_van_dusen", callendar_van_dusen::value),
    ];
    let mut stream = Stream::new(5, 5);
    for (name, function) in cases {
        for _ in 0..100 {
            let (b, x) = draw(name, &mut stream);
            for k in 0..b.len() {
                let part = |i: usize| if i == k { Dual::variable(b[i]) } else { Dual::constant(b[i]) };
                let inner: Vec<Second> = (0..b.len()).map(|i| Dual::constant(part(i))).collect();
                let found = function(&inner, Dual::variable(Dual::constant(x))).slope.slope;
                let slope_at = |v: f64| {
                    let mut b = b.clone();
                    b[k] = v;
                    by_hand(name, &b, x)[0]
                };
                let h = 1e-5 * b[k];
                let right = (slope_at(b[k] + h) - slope_at(b[k] - h)) / (2.0 * h);
                let scale = right.abs() + (slope_at(b[k]) / b[k]).abs();
                assert!((found - right).abs() <= 1e-7 * scale, "{name} {k} {b:?} {x}: {found} for {right}");
            }
        }
    }
}
