//! One place on the way to a minimum: residuals, Jacobian and its triangle there.

use super::householder_factor::{Factor, dot};
use super::levenberg::Problem;
use super::real::Real;
use super::scale::{as_f64, exponent_of};

/// Residuals and Jacobian at `b`, all divided by 2^`data_exponent`, each column of the Jacobian also by
/// a power of two of its own.
///
/// The sign is that of the model: X = −∂r/∂b, so that the Gauss–Newton step solves R s = `projected`.
pub(super) struct Place<T> {
    /// The parameters, in their own units.
    pub b: Vec<T>,
    /// Scaled residuals.
    pub residuals: Vec<T>,
    /// Their sum of squares.
    pub ss: T,
    /// The scaled X.
    pub columns: Vec<Vec<T>>,
    /// QR of the scaled X.
    pub factor: Factor<T>,
    /// X = scaled · 2^(data_exponent + exponents[j]).
    pub exponents: Vec<i32>,
    /// Length of each scaled column.
    pub lengths: Vec<f64>,
    /// The first p entries of Qᵀr.
    pub projected: Vec<T>,
    /// Power of two of residuals.
    pub data_exponent: i32,
}

/// Residuals divided by 2^`data_exponent`; `None` when one is not finite.
pub(super) fn scaled_residuals<P: Problem, T: Real>(problem: &P, b: &[T], data_exponent: i32) -> Option<Vec<T>> {
    let residuals = problem.residuals(b);
    let scaled: Vec<T> = residuals.into_iter().map(|r| r.times_power_of_two(-data_exponent)).collect();
    let whole = scaled.len() == problem.observations() && scaled.iter().all(|r| r.is_finite());
    whole.then_some(scaled)
}

impl<T: Real> Place<T> {
    /// The place `b`, with its residuals as [`scaled_residuals`] gave them; `None` when the Jacobian is not
    /// finite there.
    pub(super) fn new<P: Problem>(problem: &P, b: Vec<T>, residuals: Vec<T>, data_exponent: i32) -> Option<Self> {
        let jacobian = problem.jacobian(&b);
        let (n, p) = (problem.observations(), problem.parameters());
        if jacobian.len() != p || jacobian.iter().any(|c| c.len() != n || c.iter().any(|v| !v.is_finite())) {
            return None;
        }
        let largest = |c: &Vec<T>| c.iter().fold(0.0, |top: f64, v| top.max(v.to_f64().abs()));
        let of_columns: Vec<i32> = jacobian.iter().map(|c| exponent_of(largest(c))).collect();
        let columns: Vec<Vec<T>> = jacobian
            .into_iter()
            .zip(&of_columns)
            .map(|(c, e)| c.into_iter().map(|v| -v.times_power_of_two(-e)).collect())
            .collect();
        let lengths = columns.iter().map(|c| libm::sqrt(dot(c, c, 0).to_f64())).collect();
        let factor = Factor::new(columns.clone());
        let mut projected = factor.transform(residuals.clone());
        projected.truncate(p);
        Some(Self {
            b,
            ss: dot(&residuals, &residuals, 0),
            residuals,
            columns,
            factor,
            exponents: of_columns.iter().map(|e| e - data_exponent).collect(),
            lengths,
            projected,
            data_exponent,
        })
    }

    /// ‖r‖, scaled.
    pub(super) fn length(&self) -> f64 {
        libm::sqrt(self.ss.to_f64())
    }

    /// ‖Q₁ᵀr‖, scaled: how much of the residuals a change of parameters could still take away.
    pub(super) fn projected_length(&self) -> f64 {
        libm::sqrt(dot(&self.projected, &self.projected, 0).to_f64())
    }

    /// Bates and Watts' relative offset, the tangent of the angle between the residuals and the part of
    /// them that no parameter reaches, per degree of freedom on either side; the cosine when n = p.
    pub(super) fn relative_offset(&self) -> f64 {
        let (n, p) = (self.residuals.len(), self.b.len());
        let (along, whole) = (self.projected_length(), self.length());
        let across = libm::sqrt((whole * whole - along * along).max(0.0));
        if along == 0.0 {
            0.0
        } else if n == p || across == 0.0 {
            along / whole
        } else {
            along / libm::sqrt(as_f64(p)) / (across / libm::sqrt(as_f64(n - p)))
        }
    }

    /// Magnitude that the terms of the residuals have at most: Σ ‖Xⱼ‖·|bⱼ|, scaled.
    pub(super) fn extent(&self) -> f64 {
        let terms = self.lengths.iter().zip(&self.b).zip(&self.exponents);
        terms.map(|((length, b), e)| length * libm::scalbn(b.to_f64().abs(), *e)).sum()
    }

    /// The parameters after a step in scaled units.
    pub(super) fn moved(&self, step: &[T]) -> Vec<T> {
        let steps = step.iter().zip(&self.exponents);
        self.b.iter().zip(steps).map(|(b, (s, e))| *b + s.times_power_of_two(-e)).collect()
    }
}
