//! The minimiser by itself: classical problems, errors in both axes, and what has no minimum.

use super::levenberg::{EVALUATION_LIMIT, NotConverged, Problem, minimise};
use super::{Dd, Dual, Real};

/// A problem from a closure over dual numbers would need one for every kind of number, hence a trait.
trait Residuals {
    const N: usize;
    const P: usize;
    fn at<T: Real>(&self, b: &[T]) -> Vec<T>;
    fn magnitude(&self) -> f64 {
        1.0
    }
}

impl<R: Residuals> Problem for R {
    fn parameters(&self) -> usize {
        Self::P
    }
    fn observations(&self) -> usize {
        Self::N
    }
    fn size(&self) -> f64 {
        self.magnitude()
    }
    fn residuals<T: Real>(&self, b: &[T]) -> Vec<T> {
        self.at(b)
    }
    fn jacobian<T: Real>(&self, b: &[T]) -> Vec<Vec<T>> {
        let column = |j: usize| {
            let along = |(k, b): (usize, &T)| Dual { value: *b, slope: if k == j { T::one() } else { T::zero() } };
            let b: Vec<Dual<T>> = b.iter().enumerate().map(along).collect();
            self.at(&b).iter().map(|r| r.slope).collect()
        };
        (0..b.len()).map(column).collect()
    }
}

struct Rosenbrock;
impl Residuals for Rosenbrock {
    const N: usize = 2;
    const P: usize = 2;
    fn at<T: Real>(&self, b: &[T]) -> Vec<T> {
        vec![T::of(10.0) * (b[1] - b[0].square()), T::one() - b[0]]
    }
}

struct FreudensteinRoth;
impl Residuals for FreudensteinRoth {
    const N: usize = 2;
    const P: usize = 2;
    fn at<T: Real>(&self, b: &[T]) -> Vec<T> {
        let c = T::of;
        let inner = |first: f64, second: f64, sign: f64| ((c(first) + c(sign) * b[1]) * b[1] + c(second)) * b[1];
        vec![c(-13.0) + b[0] + inner(5.0, -2.0, -1.0), c(-29.0) + b[0] + inner(1.0, -14.0, 1.0)]
    }
}

struct Bard;
impl Residuals for Bard {
    const N: usize = 15;
    const P: usize = 3;
    fn at<T: Real>(&self, b: &[T]) -> Vec<T> {
        let y = [0.14, 0.18, 0.22, 0.25, 0.29, 0.32, 0.35, 0.39, 0.37, 0.58, 0.73, 0.96, 1.34, 2.10, 4.39];
        (1..=15)
            .zip(y)
            .map(|(u, y)| {
                let (u, v) = (f64::from(u), f64::from(16 - u));
                T::of(y) - b[0] - T::of(u) / (b[1] * T::of(v) + b[2] * T::of(u.min(v)))
            })
            .collect()
    }
}

/// Moré, Garbow and Hillstrom, ACM Trans. Math. Softw. 7 (1981) 17, problems 1 and 8, from memory.
#[test]
fn classical_problems_reach_their_published_minima() {
    let found = minimise(&Rosenbrock, &[-1.2, 1.0]).unwrap();
    assert!(found.residuals.iter().all(|r| *r == Dd::ZERO));
    assert_eq!(found.parameters.iter().map(|b| b.to_f64()).collect::<Vec<_>>(), [1.0, 1.0]);
    let bard = minimise(&Bard, &[1.0, 1.0, 1.0]).unwrap();
    let ss: Dd = bard.residuals.iter().map(|r| r.square()).sum();
    assert!((8.214_87e-3..8.214_88e-3).contains(&ss.to_f64()), "{ss:?}");
    assert!(bard.relative_offset <= 1e-18);
}

/// Problem 2 of the same collection: from (0.5, −2) the way leads to 48.9842…, where two residuals and two
/// parameters leave a singular Jacobian: a place without uncertainties.
#[test]
fn a_minimum_with_a_singular_jacobian_is_an_error_that_tells_the_place() {
    let error = minimise(&FreudensteinRoth, &[0.5, -2.0]).unwrap_err();
    let tried = error.tried().unwrap();
    let ss = tried.residual_length * tried.residual_length;
    assert!((ss - 48.9842).abs() < 1e-3, "{error:?}");
    assert!((tried.parameters[0] - 11.41).abs() < 0.1 && (tried.parameters[1] + 0.8968).abs() < 1e-2, "{error:?}");
}

/// r = (b, 1 − b²) at b = 0: flat, the Jacobian is regular, and both ways lead down.
struct Ridge;
impl Residuals for Ridge {
    const N: usize = 2;
    const P: usize = 1;
    fn at<T: Real>(&self, b: &[T]) -> Vec<T> {
        vec![b[0], T::one() - b[0].square()]
    }
}

#[test]
fn a_start_on_a_saddle_is_not_called_a_minimum() {
    let error = minimise(&Ridge, &[0.0]).unwrap_err();
    // Half the sum of squares is ½ − ½b² + …: curvature 1 − 2·1 against JᵀJ = 1.
    let NotConverged::Saddle { curvature, .. } = &error else { panic!("{error:?}") };
    assert!((curvature + 1.0).abs() < 1e-12);
    let beside = minimise(&Ridge, &[1e-3]).unwrap();
    assert!((beside.parameters[0].square() - Dd::from(0.5)).to_f64().abs() < 1e-30);
}

/// Straight line with errors in both axes, the true abscissae as parameters: 2m rows, m + 2 parameters.
struct BothAxes {
    x: Vec<f64>,
    y: Vec<f64>,
    u_x: f64,
    u_y: f64,
}

impl Problem for BothAxes {
    fn parameters(&self) -> usize {
        self.x.len() + 2
    }
    fn observations(&self) -> usize {
        2 * self.x.len()
    }
    fn size(&self) -> f64 {
        let sum = |v: &[f64], u: f64| -> f64 { v.iter().map(|v| v / u * v / u).sum() };
        libm::sqrt(sum(&self.x, self.u_x) + sum(&self.y, self.u_y))
    }
    fn residuals<T: Real>(&self, b: &[T]) -> Vec<T> {
        let along = self.x.iter().zip(&b[2..]).map(|(x, t)| (T::of(*x) - *t) / T::of(self.u_x));
        let across = self.y.iter().zip(&b[2..]).map(|(y, t)| (T::of(*y) - b[0] - b[1] * *t) / T::of(self.u_y));
        along.chain(across).collect()
    }
    fn jacobian<T: Real>(&self, b: &[T]) -> Vec<Vec<T>> {
        let m = self.x.len();
        let mut out = vec![vec![T::zero(); 2 * m]; m + 2];
        for i in 0..m {
            out[0][m + i] = -T::one() / T::of(self.u_y);
            out[1][m + i] = -b[2 + i] / T::of(self.u_y);
            out[2 + i][i] = -T::one() / T::of(self.u_x);
            out[2 + i][m + i] = -b[1] / T::of(self.u_y);
        }
        out
    }
}

/// The latent abscissae eliminated by hand: S = Σ (y − a − bx)²/(u_y² + b²u_x²).
#[test]
fn errors_in_both_axes_with_fifty_parameters_agree_with_the_profile() {
    let x: Vec<f64> = (0..48).map(|i| f64::from(i) + 0.2 * libm::sin(f64::from(7 * i))).collect();
    let y: Vec<f64> = (0..48).map(|i| 3.0 - 0.5 * f64::from(i) + 0.1 * libm::cos(f64::from(11 * i))).collect();
    let problem = BothAxes { u_x: 0.15, u_y: 0.08, x, y };
    let mut start = vec![0.0, 1.0];
    start.extend(&problem.x);
    let found = minimise(&problem, &start).unwrap();
    let profile = |a: Dual<Dual<Dd>>, b: Dual<Dual<Dd>>| {
        let c = Dual::<Dual<Dd>>::of;
        let variance = c(problem.u_y).square() + b.square() * c(problem.u_x).square();
        let rows = problem.x.iter().zip(&problem.y);
        rows.fold(c(0.0), |s, (x, y)| s + (c(*y) - a - b * c(*x)).square() / variance)
    };
    let (a, b) = (found.parameters[0], found.parameters[1]);
    let fixed = |v: Dd| Dual::constant(Dual::constant(v));
    let along = |v: Dd| Dual { value: Dual::variable(v), slope: Dual::constant(Dd::ONE) };
    let (by_a, by_b) = (profile(along(a), fixed(b)), profile(fixed(a), along(b)));
    let ss: Dd = found.residuals.iter().map(|r| r.square()).sum();
    assert!(((ss - by_a.value.value) / ss).to_f64().abs() < 1e-28);
    // The Newton steps of the profile that are left.
    assert!((by_a.value.slope / by_a.slope.slope).to_f64().abs() < 1e-20);
    assert!((by_b.value.slope / by_b.slope.slope).to_f64().abs() < 1e-20);
    assert!(found.evaluations < 300, "{}", found.evaluations);
}

/// y = b·x with everything tiny or huge.
struct Proportional {
    x: f64,
    y: f64,
}
impl Residuals for Proportional {
    const N: usize = 2;
    const P: usize = 1;
    fn at<T: Real>(&self, b: &[T]) -> Vec<T> {
        vec![T::of(self.y) - b[0] * T::of(self.x), T::of(1.5 * self.y) - b[0] * T::of(self.x)]
    }
    fn magnitude(&self) -> f64 {
        1.8 * self.y
    }
}

#[test]
fn parameters_of_any_magnitude_are_reached() {
    for (x, y, start) in [
        (1e290, 1.0, 1e-290),
        (1e-290, 1.0, 1e290),
        (1.0, 1e-280, 1.0),
        (1.0, 1e290, 1.0),
        (1e-150, 1e140, 1.0),
        (1e200, 1e-90, 0.0),
    ] {
        let found = minimise(&Proportional { x, y }, &[start]).unwrap_or_else(|e| panic!("{x} {y}: {e:?}"));
        let ratio = found.parameters[0].to_f64() / (1.25 * (y / x));
        assert!((ratio - 1.0).abs() < 4e-16, "{x} {y}: {ratio}");
    }
}

#[test]
fn beyond_the_range_of_double_double_it_says_so() {
    let found = minimise(&Proportional { x: 1.0, y: 1e305 }, &[1e305]);
    assert_eq!(found, Err(NotConverged::OutOfRange));
}

/// 1 + e^(−b): lower and lower, for ever.
struct Downhill;
impl Residuals for Downhill {
    const N: usize = 2;
    const P: usize = 1;
    fn at<T: Real>(&self, b: &[T]) -> Vec<T> {
        vec![T::one() + (-b[0]).exp(), T::of(2.0)]
    }
}

/// A finite value at the start and nowhere else.
struct Needle;
impl Residuals for Needle {
    const N: usize = 2;
    const P: usize = 1;
    fn at<T: Real>(&self, b: &[T]) -> Vec<T> {
        let gap = if b[0].to_f64() == 1.0 { T::one() } else { T::of(f64::NAN) };
        vec![b[0] * gap, b[0] * gap + T::one()]
    }
}

#[test]
fn without_a_minimum_the_search_ends_and_says_what_it_tried() {
    for error in [minimise(&Downhill, &[0.0]).unwrap_err(), minimise(&Needle, &[1.0]).unwrap_err()] {
        let tried = error.tried().unwrap_or_else(|| panic!("{error:?}"));
        assert!(tried.evaluations > 2 && tried.evaluations <= EVALUATION_LIMIT, "{error:?}");
        assert!(tried.parameters.len() == 1 && tried.residual_length > 0.9, "{error:?}");
        assert!(!error.to_string().contains("NaN"), "{error}");
    }
}

#[test]
fn starts_that_do_not_fit_are_refused() {
    let expected = NotConverged::Start { found: 1, expected: 2 };
    assert_eq!(minimise(&Rosenbrock, &[1.0]), Err(expected.clone()));
    assert_eq!(minimise(&Rosenbrock, &[1.0, f64::NAN]), Err(expected));
    assert_eq!(minimise(&Needle, &[2.0]), Err(NotConverged::NotFiniteAtStart { observation: 0 }));
    let few = BothAxes { x: vec![1.0], y: vec![1.0], u_x: 1.0, u_y: 1.0 };
    assert_eq!(minimise(&few, &[0.0; 3]), Err(NotConverged::TooFew { observations: 2, parameters: 3 }));
}
