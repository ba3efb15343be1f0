//! Decision threshold, critical value and detection limit, in the net form.

use super::asked::{Absent, Asked, Basis, Side, Zeros};
use super::misses::Misses;
use super::net::Net;
use crate::distributions::{t_lower, t_quantile};
use crate::fit::Fit;
use crate::numerics::roots::bracketed_root;

/// The limits of one fit on one side of zero. Values of x are signed: below zero they are negative.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Limits {
    /// Decision threshold y_c: a signal beyond it says "not zero", output unit.
    pub decision_threshold: f64,
    /// Critical value x_c: where the net curve reaches the threshold, input unit.
    pub critical_value: Option<f64>,
    /// Detection limit x_d: the smallest true value missed with probability β, input unit; the SD
    /// that is known put for the true one.
    pub detection_limit: Option<f64>,
    /// The end of the range of x_d nearer to zero, from the uncertainty of the SD, input unit.
    pub low: Option<f64>,
    /// The other end, input unit; `None` beyond the standards.
    pub high: Option<f64>,
    /// Assured detection limit: with this SD and these zeros its long-run miss rate is β.
    pub assured: Option<f64>,
    /// The same net signal read off the curve in absolute terms, input unit; has no rate.
    pub traced: Option<f64>,
    /// Edge of the two-sided zero band traced through the curve, input unit; only with zeros.
    pub simple: Option<f64>,
    /// t₀.₉₉·s₀ as a net signal, input unit; only with zeros.
    pub regulator: Option<f64>,
}

/// A fit on one side of zero, prepared for thresholds on trial.
#[derive(Debug, Clone)]
pub struct Detection<'a> {
    pub(super) net: Net<'a>,
    misses: Misses,
    /// What was asked.
    pub asked: Asked,
    /// The side of zero.
    pub side: Side,
    /// The limits.
    pub limits: Limits,
    /// Why `limits.detection_limit` is absent, when it is.
    pub absent: Option<Absent>,
}

/// The sides on which the standards lie: above zero, below it, or both.
#[must_use]
pub fn sides(fit: &Fit) -> Vec<Side> {
    let above = fit.points.iter().any(|p| p.x > 0.0);
    let below = fit.points.iter().any(|p| p.x < 0.0);
    let both = [(above, Side::Above), (below, Side::Below)];
    both.into_iter().filter(|(there, _)| *there).map(|(_, side)| side).collect()
}

impl<'a> Detection<'a> {
    /// Computes the limits of a fit on one side of zero.
    ///
    /// # Formula
    /// c₀ = σ²_new(0)/k + V₀; y_c = μ̂₀ ± t_{1−α,ν}√c₀ on the side to which the curve leaves zero;
    /// x_c: f̂(x) − f̂(0) = y_c − μ̂₀. With c(x) = σ²_new(x)/k + V₀, ρ = √(c(x)/c₀),
    /// λ = [f̂(x) − f̂(0)]/√c(x): P_miss(x) = F_nct(t_{1−α,ν}/ρ; ν, λ), x_d the smallest x with
    /// P_miss = β. Assured: f̂(x) − f̂(0) = t_{1−α}√c₀ + t_{1−β}√c(x). The range of x_d multiplies its
    /// net signal by √(ν/χ²). σ²_new(x) = σ²_new(0)·v(x)/v(0) with the variance model of the weights.
    ///
    /// # Shapes and units
    /// As named at the fields of [`Limits`].
    ///
    /// # Errors
    /// The reason when no threshold exists at all; a threshold without a limit is no error.
    ///
    /// # Source
    /// L. A. Currie (1968), Anal. Chem. 40, 586–593; ISO 11843-1 and -2; C. A. Clayton, J. W. Hines &
    /// P. D. Elkins (1987), Anal. Chem. 59, 2506–2514 (noncentral t); 40 CFR 136 Appendix B
    /// (t₀.₉₉·s). All from memory.
    pub fn new(fit: &'a Fit, zeros: Zeros<'a>, asked: Asked, side: Side) -> Result<Self, Absent> {
        let net = Net::new(fit, zeros, asked.basis, asked.k, side)?;
        let t_alpha = t_quantile(1.0 - asked.alpha, net.nu);
        let mut detection = Self {
            limits: Limits {
                decision_threshold: net.zero + net.sense * t_alpha * net.root_c0(),
                critical_value: None,
                detection_limit: None,
                low: None,
                high: None,
                assured: None,
                traced: None,
                simple: None,
                regulator: None,
            },
            misses: Misses::new(net.nu),
            net,
            asked,
            side,
            absent: None,
        };
        detection.fill(t_alpha, zeros);
        Ok(detection)
    }

    fn fill(&mut self, t_alpha: f64, zeros: Zeros<'_>) {
        let net = &self.net;
        let root_c0 = net.root_c0();
        let limit = self.missed_at(t_alpha);
        let mut limits = self.limits;
        limits.critical_value = net.signed(net.reach(t_alpha * root_c0));
        limits.detection_limit = net.signed(limit);
        if let Some(limit) = limit {
            let signal = net.signal(limit);
            let (low, high) = net.sd_factors(zeros);
            limits.low = net.signed(net.reach(signal * low));
            limits.high = net.signed(net.reach(signal * high));
            limits.traced = net.trace(net.zero + net.sense * signal);
        }
        let t_beta = t_quantile(1.0 - self.asked.beta, net.nu);
        limits.assured = net.signed(net.assured(t_alpha * root_c0, t_beta));
        if let Some(band) = zeros.band {
            let edges = band.mean_of(self.asked.k);
            limits.simple = net.trace(if net.sense > 0.0 { edges.high } else { edges.low });
            let factor = t_quantile(0.99, band.degrees_of_freedom);
            limits.regulator = net.signed(net.reach(factor * band.sd));
        }
        self.absent = limits.detection_limit.is_none().then_some(Absent::NotReached { up_to: net.direction * net.far });
        self.limits = limits;
    }

    /// Where the scatter was taken from.
    #[must_use]
    pub fn basis(&self) -> Basis {
        self.asked.basis
    }

    /// Whether a signal lies beyond the decision threshold.
    #[must_use]
    pub fn above_threshold(&self, signal: f64) -> bool {
        self.net.sense * (signal - self.limits.decision_threshold) > 0.0
    }

    /// The probability of missing a true value x when `threshold` (a signal) decides.
    ///
    /// # Formula
    /// F_nct(τ/ρ; ν, λ), τ = ±(threshold − μ̂₀)/√c₀; a value on the other side of zero counts as zero.
    ///
    /// # Shapes and units
    /// `x` input unit, `threshold` output unit.
    ///
    /// # Source
    /// As [`Detection::new`].
    #[must_use]
    pub fn miss_probability(&self, x: f64, threshold: f64) -> f64 {
        let distance = (self.net.direction * x).max(0.0);
        self.miss(distance, self.net.standardised(threshold))
    }

    /// P_miss at a distance from zero for a standardised threshold.
    pub(super) fn miss(&self, distance: f64, tau: f64) -> f64 {
        let net = &self.net;
        let root_c = libm::sqrt(net.variance(distance));
        self.misses.lower(tau * net.root_c0() / root_c, net.signal(distance) / root_c)
    }

    /// The smallest distance from zero missed with probability at most β, for a standardised
    /// threshold; `None` beyond the standards.
    pub(super) fn missed_at(&self, tau: f64) -> Option<f64> {
        let (net, beta) = (&self.net, self.asked.beta);
        // At zero the noncentral t is the central one.
        if t_lower(tau, net.nu) <= beta {
            return Some(0.0);
        }
        // A net signal that does not reach the threshold itself is missed about every second time.
        if beta < 0.4 && net.reach(tau * net.root_c0()).is_none() {
            return None;
        }
        let even = net.reach(self.misses.noncentrality(tau, beta) * net.root_c0());
        if let Some(distance) = even.filter(|d| net.even_up_to(*d)) {
            return Some(distance);
        }
        // The scatter changes on the way: walk outwards to the first place missed rarely enough.
        let excess = |distance: f64| self.miss(distance, tau) - beta;
        let mut inner = 0.0;
        for outer in net.places() {
            if excess(outer) <= 0.0 {
                return bracketed_root(excess, inner, outer).ok();
            }
            inner = outer;
        }
        None
    }
}
