//! Polynomial least squares by orthogonal polynomials, in double-double from end to end.

use super::dd::Dd;
use super::least_squares::{Basis, LeastSquares, Raw, ScaledWeights, SolveError, settle_residuals};
use super::scale::{Scaled, as_f64, largest_exponent, round_scaled};

/// Part of a polynomial's magnitude that must be left after cancellation: half of the 106 bits.
const WHAT_MUST_REMAIN: f64 = 1.0 / 9_007_199_254_740_992.0;

/// Abscissae centred at their weighted mean and scaled into [−1, 1].
struct Centred {
    t: Vec<Dd>,
    /// x = (t + centre)·2^exponent.
    centre: f64,
    exponent: i32,
}

/// The polynomials orthogonal on the abscissae, with everything the fit leaves behind.
struct Recurrence {
    alpha: Vec<Dd>,
    beta: Vec<Dd>,
    gamma: Vec<Dd>,
    /// Coefficient of each polynomial in the expansion of y.
    theta: Vec<Dd>,
    /// Values of each polynomial at the abscissae.
    values: Vec<Vec<Dd>>,
    residuals: Vec<Dd>,
}

/// Weighted least squares for a polynomial of the given degree with its constant term.
///
/// # Formula
///
/// π₀ = 1, π_{k+1} = (t − α_k) π_k − β_k π_{k−1} with α_k = ⟨tπ_k, π_k⟩/γ_k, β_k = γ_k/γ_{k−1},
/// γ_k = ⟨π_k, π_k⟩ and t the centred and scaled x; ŷ = Σ θ_k π_k, θ_k = ⟨y, π_k⟩/γ_k.
/// The power basis of x follows by expanding the recurrence and shifting the centre back, and
/// (XᵀWX)⁻¹ = T diag(1/γ) Tᵀ with T the expansion; all of it in double-double.
///
/// # Shapes and units
///
/// `x`, `y` and `weights` of one length n ≥ degree + 1 with at least degree + 1 distinct x, all finite,
/// weights positive. Results are in the units of `x` and `y`, coefficients ascending.
///
/// # Errors
///
/// [`SolveError::Singular`] when the x cannot be told apart well enough for this degree,
/// [`SolveError::OutOfRange`] when a result does not fit into a double.
///
/// # Source
///
/// Forsythe, J. Soc. Indust. Appl. Math. 5 (1957) 74; Gautschi, Orthogonal Polynomials (2004), 2.2
/// (Stieltjes procedure). From memory.
pub fn fit_polynomial(
    x: &[f64],
    y: &[f64],
    weights: &ScaledWeights,
    degree: usize,
) -> Result<LeastSquares, SolveError> {
    fit_centred(x, y, weights, degree).map(|(solved, _)| solved)
}

/// The same polynomial in t = (x − centre)/scale: where powers of x cancel, these do not.
#[derive(Debug, Clone, PartialEq)]
pub struct CentredPolynomial {
    /// Centre, input unit, exactly this double.
    pub centre: f64,
    /// Scale, input unit, a power of two.
    pub scale: f64,
    /// Coefficients of 1, t, t² …, output unit.
    pub coefficients: Vec<f64>,
}

/// [`fit_polynomial`] with the centred form beside it.
///
/// # Errors
///
/// As [`fit_polynomial`].
pub fn fit_centred(
    x: &[f64],
    y: &[f64],
    weights: &ScaledWeights,
    degree: usize,
) -> Result<(LeastSquares, CentredPolynomial), SolveError> {
    let p = degree + 1;
    if x.len() < p || x.len() != y.len() || x.len() != weights.values.len() {
        return Err(SolveError::Singular);
    }
    let w = &weights.values;
    let y_scaled = Scaled::new(y);
    let centred = centre(x, w);
    let mut found = stieltjes(&centred.t, &y_scaled.values, w, degree)?;
    let y: Vec<Dd> = y_scaled.values.iter().map(|v| Dd::from(*v)).collect();
    let residual_ss = settle_residuals(&mut found.residuals, &y, w);
    let powers = power_basis(&found, centred.centre);
    let about_centre = centred_form(&found, &centred, y_scaled.exponent)?;
    let coefficients = (0..p).map(|j| (j..p).map(|k| found.theta[k] * powers[k][j]).sum()).collect();
    let inverse = inverse_of_normal(&found, &powers);
    let condition = condition(&centred, w, &inverse);
    let exponents = 0..i32::try_from(p).unwrap_or(i32::MAX);
    let solved = Raw {
        coefficients,
        inverse,
        residual_ss,
        column_exponents: exponents.map(|j| j * centred.exponent).collect(),
        y_exponent: y_scaled.exponent,
        weight_exponent: weights.exponent,
        orthonormal: orthonormal(&found, w),
        condition,
        basis: basis(&found, &centred, weights.exponent),
        residuals: found.residuals,
    }
    .round()?;
    Ok((solved, about_centre))
}

/// The fitted polynomial in powers of t, each coefficient rounded once.
fn centred_form(found: &Recurrence, centred: &Centred, y_exponent: i32) -> Result<CentredPolynomial, SolveError> {
    let powers = power_basis(found, 0.0);
    let p = powers.len();
    let coefficient = |j: usize| {
        let sum: Dd = (j..p).map(|k| found.theta[k] * powers[k][j]).sum();
        round_scaled(sum, y_exponent).ok_or(SolveError::OutOfRange)
    };
    Ok(CentredPolynomial {
        centre: libm::scalbn(centred.centre, centred.exponent),
        scale: libm::scalbn(1.0, centred.exponent),
        coefficients: (0..p).map(coefficient).collect::<Result<_, _>>()?,
    })
}

/// Centre and scale. The centre is a double, so that x − centre is exact in double-double.
fn centre(x: &[f64], w: &[Dd]) -> Centred {
    let first = Scaled::new(x);
    let total: Dd = w.iter().copied().sum();
    let weighted: Dd = first.values.iter().zip(w).map(|(v, w)| *w * *v).sum();
    let mean = (weighted / total).to_f64();
    let offsets: Vec<Dd> = first.values.iter().map(|v| Dd::from_sum(*v, -mean)).collect();
    let rounded: Vec<f64> = offsets.iter().map(|d| d.to_f64()).collect();
    let second = largest_exponent(&rounded);
    Centred {
        t: offsets.iter().map(|d| d.times_power_of_two(-second)).collect(),
        centre: libm::scalbn(mean, -second),
        exponent: first.exponent + second,
    }
}

/// The Stieltjes procedure, taking each polynomial out of y as it goes.
fn stieltjes(t: &[Dd], y: &[f64], w: &[Dd], degree: usize) -> Result<Recurrence, SolveError> {
    let n = t.len();
    let mut r = Recurrence {
        alpha: Vec::with_capacity(degree),
        beta: vec![Dd::ZERO],
        gamma: Vec::with_capacity(degree + 1),
        theta: Vec::with_capacity(degree + 1),
        values: vec![vec![Dd::ONE; n]],
        residuals: y.iter().map(|v| Dd::from(*v)).collect(),
    };
    // Size each value would have had without cancellation, to see how much cancelled.
    let (mut size_before, mut size) = (vec![0.0; n], vec![1.0; n]);
    for k in 0..=degree {
        project(&mut r, t, w, &size)?;
        if k == degree {
            break;
        }
        let (alpha, beta) = (r.alpha[k], r.beta[k]);
        let mut next = Vec::with_capacity(n);
        for (i, t_i) in t.iter().enumerate() {
            let grown = (*t_i - alpha) * r.values[k][i];
            let (value, extent) =
                if k == 0 { (grown, 0.0) } else { (grown - beta * r.values[k - 1][i], beta.to_f64() * size_before[i]) };
            next.push(value);
            size_before[i] = size[i];
            size[i] = (t_i.to_f64().abs() + alpha.to_f64().abs()) * size[i] + extent;
        }
        r.values.push(next);
    }
    Ok(r)
}

/// Norm, centre and coefficient of the newest polynomial.
fn project(r: &mut Recurrence, t: &[Dd], w: &[Dd], size: &[f64]) -> Result<(), SolveError> {
    let Some(values) = r.values.last() else {
        return Err(SolveError::Singular);
    };
    let (mut gamma, mut moment, mut product) = (Dd::ZERO, Dd::ZERO, Dd::ZERO);
    let mut whole = 0.0;
    for (i, value) in values.iter().enumerate() {
        let weighted = w[i] * *value;
        let square = weighted * *value;
        gamma += square;
        moment += square * t[i];
        product += weighted * r.residuals[i];
        whole += w[i].to_f64() * size[i] * size[i];
    }
    let remains = gamma.to_f64() > whole * (WHAT_MUST_REMAIN * WHAT_MUST_REMAIN);
    if !remains || !gamma.is_finite() {
        return Err(SolveError::Singular);
    }
    let theta = product / gamma;
    for (residual, value) in r.residuals.iter_mut().zip(values) {
        *residual -= theta * *value;
    }
    if let Some(before) = r.gamma.last() {
        r.beta.push(gamma / *before);
    }
    r.alpha.push(moment / gamma);
    r.gamma.push(gamma);
    r.theta.push(theta);
    Ok(())
}

/// Each polynomial in powers of x·2^−exponent: the recurrence in t, then the centre shifted back.
fn power_basis(r: &Recurrence, centre: f64) -> Vec<Vec<Dd>> {
    let p = r.gamma.len();
    let mut out: Vec<Vec<Dd>> = vec![vec![Dd::ONE]];
    for k in 1..p {
        let mut next = vec![Dd::ZERO; k + 1];
        for (j, c) in out[k - 1].iter().enumerate() {
            next[j + 1] += *c;
            next[j] -= r.alpha[k - 1] * *c;
        }
        if k > 1 {
            for (j, c) in out[k - 2].iter().enumerate() {
                next[j] -= r.beta[k - 1] * *c;
            }
        }
        out.push(next);
    }
    for polynomial in &mut out {
        shift(polynomial, centre);
    }
    out
}

/// Coefficients in t become coefficients in t + centre (repeated synthetic division).
fn shift(coefficients: &mut [Dd], centre: f64) {
    let n = coefficients.len();
    for start in 0..n {
        for j in (start..n - 1).rev() {
            let higher = coefficients[j + 1];
            coefficients[j] -= higher * centre;
        }
    }
}

/// (XᵀWX)⁻¹ = T diag(1/γ) Tᵀ.
fn inverse_of_normal(r: &Recurrence, powers: &[Vec<Dd>]) -> Vec<Vec<Dd>> {
    let p = powers.len();
    let mut out = vec![vec![Dd::ZERO; p]; p];
    for (polynomial, gamma) in powers.iter().zip(&r.gamma) {
        for (i, a) in polynomial.iter().enumerate() {
            let scaled = *a / *gamma;
            for (j, b) in polynomial.iter().enumerate().skip(i) {
                out[i][j] += scaled * *b;
            }
        }
    }
    for i in 1..p {
        let (above, below) = out.split_at_mut(i);
        for (cell, row) in below[0].iter_mut().zip(above) {
            *cell = row[i];
        }
    }
    out
}

/// √w π_k/√γ_k, one column for each k.
fn orthonormal(r: &Recurrence, w: &[Dd]) -> Vec<Vec<f64>> {
    let roots: Vec<f64> = w.iter().map(|w| w.sqrt().to_f64()).collect();
    let column = |(values, gamma): (&Vec<Dd>, &Dd)| {
        let norm = gamma.sqrt().to_f64();
        let cells = values.iter().zip(&roots);
        cells.map(|(v, root)| v.to_f64() * root / norm).collect()
    };
    r.values.iter().zip(&r.gamma).map(column).collect()
}

/// The recurrence rounded to doubles, for evaluation anywhere.
fn basis(r: &Recurrence, centred: &Centred, weight_exponent: i32) -> Basis {
    let round = |v: &Dd| v.to_f64();
    let last = r.gamma.len() - 1;
    Basis::Orthogonal {
        centre: centred.centre,
        exponent: centred.exponent,
        alpha: r.alpha.iter().take(last).map(round).collect(),
        beta: r.beta.iter().take(last).map(round).collect(),
        inverse_norm: r
            .gamma
            .iter()
            .map(|g| libm::scalbn((Dd::ONE / g.sqrt()).to_f64(), -weight_exponent / 2))
            .collect(),
    }
}

/// ‖X‖_F·‖X⁺‖_F with the columns of √W·X brought to length one.
fn condition(centred: &Centred, w: &[Dd], inverse: &[Vec<Dd>]) -> f64 {
    let p = inverse.len();
    let mut squares = vec![0.0; p];
    for (t, w) in centred.t.iter().zip(w) {
        let x = t.to_f64() + centred.centre;
        let mut power = w.to_f64();
        for square in &mut squares {
            *square += power;
            power *= x * x;
        }
    }
    let scaled = squares.iter().enumerate();
    let sum: f64 = scaled.map(|(j, s)| s * inverse[j][j].to_f64()).sum();
    libm::sqrt(as_f64(p) * sum)
}
