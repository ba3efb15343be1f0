//! Roots of a continuous function of one variable, always inside a bracket.

/// Why no root was found.
#[derive(Debug, Clone, Copy, PartialEq, thiserror::Error)]
pub enum RootError {
    /// Both ends have the same sign.
    #[error("no change of sign between {lo} and {hi}")]
    NoSignChange {
        /// Lower end.
        lo: f64,
        /// Upper end.
        hi: f64,
    },
    /// The function has no value somewhere.
    #[error("the function has no value at {at}")]
    NoValue {
        /// Where.
        at: f64,
    },
}

/// Steps after which the bracket is simply halved until nothing is left of it.
const PATIENCE: usize = 60;

/// The root of `f` between `lo` and `hi`, to the last bits of a double.
///
/// # Formula
///
/// Brent's method (inverse quadratic, secant, bisection), then plain bisection after 60 steps; ends when
/// the bracket is 4 ulp wide or f is exactly zero.
///
/// # Shapes and units
///
/// `f` continuous with f(lo) and f(hi) of different sign, or zero at an end. Either order of the ends.
///
/// # Errors
///
/// [`RootError::NoSignChange`] without a bracket, [`RootError::NoValue`] where `f` is not a number.
///
/// # Source
///
/// Brent, Algorithms for Minimization without Derivatives (1973), chapter 4. From memory.
pub fn bracketed_root(f: impl Fn(f64) -> f64, lo: f64, hi: f64) -> Result<f64, RootError> {
    let value = |x: f64| {
        let y = f(x);
        if y.is_nan() { Err(RootError::NoValue { at: x }) } else { Ok(y) }
    };
    let (mut a, mut b) = (lo, hi);
    let (mut f_a, mut f_b) = (value(a)?, value(b)?);
    if f_a == 0.0 {
        return Ok(a);
    }
    if f_b == 0.0 {
        return Ok(b);
    }
    if (f_a > 0.0) == (f_b > 0.0) {
        return Err(RootError::NoSignChange { lo, hi });
    }
    // b is the best point, c keeps the sign change, d and e are the last two steps.
    let (mut c, mut f_c) = (a, f_a);
    let mut d = b - a;
    let mut e = d;
    for step in 0..PATIENCE + 2200 {
        if f_b.abs() > f_c.abs() {
            (a, b, c) = (b, c, b);
            (f_a, f_b, f_c) = (f_b, f_c, f_b);
        }
        let tolerance = 2.0 * f64::EPSILON * b.abs() + f64::MIN_POSITIVE;
        // Half of each, so that ends near the largest double do not overflow.
        let half = 0.5 * c - 0.5 * b;
        if half.abs() <= tolerance || f_b == 0.0 {
            return Ok(b);
        }
        let bisect = step > PATIENCE || e.abs() < tolerance || f_a.abs() <= f_b.abs();
        match if bisect { None } else { interpolate([a, b, c], [f_a, f_b, f_c], e, tolerance) } {
            Some(next) => (e, d) = (d, next),
            None => (d, e) = (half, half),
        }
        (a, f_a) = (b, f_b);
        b += if d.abs() > tolerance { d } else { tolerance.copysign(half) };
        f_b = value(b)?;
        if (f_b > 0.0) == (f_c > 0.0) {
            (c, f_c) = (a, f_a);
            d = b - a;
            e = d;
        }
    }
    Ok(b)
}

/// The interpolated step from b, when it stays well inside the bracket and shrinks fast enough.
fn interpolate(x: [f64; 3], f: [f64; 3], step_before: f64, tolerance: f64) -> Option<f64> {
    let [a, b, c] = x;
    let half = 0.5 * c - 0.5 * b;
    let s = f[1] / f[0];
    let (mut p, mut q) = if a == c {
        (2.0 * half * s, 1.0 - s)
    } else {
        let (r, t) = (f[1] / f[2], f[0] / f[2]);
        let p = s * (2.0 * half * t * (t - r) - (b - a) * (r - 1.0));
        (p, (t - 1.0) * (r - 1.0) * (s - 1.0))
    };
    if p > 0.0 {
        q = -q;
    }
    p = p.abs();
    let limit = (3.0 * half * q - (tolerance * q).abs()).min((step_before * q).abs());
    (2.0 * p < limit).then(|| p / q)
}

/// All places where `f` changes sign on a scan of `steps` equal steps, each refined.
///
/// Two roots within one step are not seen, nor is a root that only touches zero; gaps where `f` has no
/// value and poles are skipped.
#[must_use]
pub fn sign_changes(f: impl Fn(f64) -> f64, lo: f64, hi: f64, steps: u32) -> Vec<f64> {
    let mut found: Vec<f64> = Vec::new();
    if !(lo.is_finite() && hi.is_finite() && lo < hi) || steps == 0 {
        return found;
    }
    let place = |k: u32| {
        let share = f64::from(k) / f64::from(steps);
        if k == steps { hi } else { lo * (1.0 - share) + hi * share }
    };
    let (mut x_before, mut f_before) = (lo, f(lo));
    if f_before == 0.0 {
        found.push(lo);
    }
    for k in 1..=steps {
        let x = place(k);
        let y = f(x);
        if y == 0.0 {
            found.push(x);
        } else if f_before * y.signum() < 0.0 {
            let root = bracketed_root(&f, x_before, x).ok();
            // At a pole the sign changes too, but the function grows towards it.
            let largest = f_before.abs().max(y.abs());
            found.extend(root.filter(|root| f(*root).abs() <= largest));
        }
        (x_before, f_before) = (x, y);
    }
    found
}
