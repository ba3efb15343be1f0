//! The net curve on one side of zero, and the scatter along it.

use super::asked::{Absent, Basis, Side, Zeros};
use crate::convert::root_near;
use crate::distributions::chi2_quantile;
use crate::fit::Fit;
use crate::numerics::roots::bracketed_root;

/// One place of the table along the curve.
#[derive(Debug, Clone, Copy)]
struct Place {
    /// Distance from zero, input unit.
    distance: f64,
    /// Net signal there, output unit.
    signal: f64,
    /// c there, output unit squared.
    variance: f64,
}

/// The net curve: signal against distance from zero, both positive outwards.
#[derive(Debug, Clone)]
pub(super) struct Net<'a> {
    fit: &'a Fit,
    /// +1 above zero, −1 below.
    pub direction: f64,
    /// +1 when the output rises away from zero on this side, −1 when it falls.
    pub sense: f64,
    /// μ̂₀, output unit.
    pub zero: f64,
    /// f̂(0), output unit.
    curve_zero: f64,
    /// σ²_new(0)/k, output unit squared.
    new: f64,
    /// V₀, output unit squared.
    zero_variance: f64,
    /// v(0).
    ratio_at_zero: f64,
    /// Degrees of freedom of the SD in use.
    pub nu: f64,
    /// Distance of the outermost standard on this side, input unit.
    pub far: f64,
    /// Table from 0 to `far`, denser near zero.
    table: Vec<Place>,
}

impl<'a> Net<'a> {
    pub(super) fn new(fit: &'a Fit, zeros: Zeros<'_>, basis: Basis, k: usize, side: Side) -> Result<Self, Absent> {
        let direction = if side == Side::Above { 1.0 } else { -1.0 };
        let far = fit.points.iter().map(|p| direction * p.x).fold(0.0, f64::max);
        let curve_zero = fit.curve.value(0.0);
        let slope = direction * fit.curve.derivative(0.0);
        if !curve_zero.is_finite() || !slope.is_finite() {
            return Err(Absent::NoValueAtZero);
        }
        let end = fit.curve.value(direction * far) - curve_zero;
        if far <= 0.0 || slope == 0.0 || end == 0.0 || (slope < 0.0) != (end < 0.0) || !end.is_finite() {
            return Err(Absent::TurnsBack);
        }
        let (zero, new, zero_variance, nu) = scatter(fit, zeros, basis)?;
        let mut net = Self {
            fit,
            direction,
            sense: slope.signum(),
            zero,
            curve_zero,
            new: new / k.max(1) as f64,
            zero_variance,
            ratio_at_zero: fit.variance_at(0.0),
            nu,
            far,
            table: Vec::new(),
        };
        net.table = net.tabulate();
        Ok(net)
    }

    /// Distances growing as squares, so that the part near zero is dense.
    fn tabulate(&self) -> Vec<Place> {
        const STEPS: u32 = 64;
        let at = |step: u32| {
            let distance = self.far * libm::pow(f64::from(step) / f64::from(STEPS), 2.0);
            Place { distance, signal: self.signal(distance), variance: self.variance(distance) }
        };
        (0..=STEPS).map(at).collect()
    }

    /// Net signal at a distance from zero, output unit.
    pub(super) fn signal(&self, distance: f64) -> f64 {
        self.sense * (self.fit.curve.value(self.direction * distance) - self.curve_zero)
    }

    /// c at a distance from zero, output unit squared.
    pub(super) fn variance(&self, distance: f64) -> f64 {
        let ratio = self.fit.variance_at(self.direction * distance) / self.ratio_at_zero;
        self.new * ratio + self.zero_variance
    }

    /// √c₀, output unit.
    pub(super) fn root_c0(&self) -> f64 {
        libm::sqrt(self.new + self.zero_variance)
    }

    /// SD of the mean of the new readings at zero, for one reading: output unit.
    pub(super) fn one_reading_sd(&self, k: usize) -> f64 {
        libm::sqrt(self.new * k.max(1) as f64)
    }

    /// A signal as a multiple of √c₀ from the zero, positive outwards.
    pub(super) fn standardised(&self, signal: f64) -> f64 {
        self.sense * (signal - self.zero) / self.root_c0()
    }

    /// The table's distances beyond zero.
    pub(super) fn places(&self) -> impl Iterator<Item = f64> + '_ {
        self.table.iter().skip(1).map(|place| place.distance)
    }

    /// Whether the scatter is the same from zero to a distance.
    pub(super) fn even_up_to(&self, distance: f64) -> bool {
        let c0 = self.new + self.zero_variance;
        let even = |c: f64| (c - c0).abs() <= 1e-14 * c0;
        let inside = self.table.iter().take_while(|place| place.distance < distance);
        inside.map(|place| place.variance).all(even) && even(self.variance(distance))
    }

    /// The smallest distance at which the net signal reaches `signal`; `None` beyond the standards.
    pub(super) fn reach(&self, signal: f64) -> Option<f64> {
        if signal <= 0.0 {
            return Some(0.0);
        }
        let outer = self.table.iter().position(|place| place.signal >= signal)?;
        let inner = self.table[outer - 1].distance;
        bracketed_root(|d| self.signal(d) - signal, inner, self.table[outer].distance).ok()
    }

    /// The smallest distance with net signal = `fixed` + `factor`·√c(distance).
    pub(super) fn assured(&self, fixed: f64, factor: f64) -> Option<f64> {
        let gap = |signal: f64, variance: f64| signal - fixed - factor * libm::sqrt(variance);
        let of = |place: &Place| (place.distance, gap(place.signal, place.variance));
        let outer = self.table.iter().position(|place| of(place).1 >= 0.0)?;
        let inner = outer.checked_sub(1)?;
        let (from, to) = (self.table[inner].distance, self.table[outer].distance);
        bracketed_root(|d| gap(self.signal(d), self.variance(d)), from, to).ok()
    }

    /// The value at which the curve itself takes a signal, signed input unit; `None` beyond the
    /// standards on this side. A signal on the other side of f̂(0) traces to the other side of zero.
    pub(super) fn trace(&self, signal: f64) -> Option<f64> {
        let net = self.sense * (signal - self.curve_zero);
        if net >= 0.0 { self.signed(self.reach(net)) } else { root_near(&self.fit.curve, signal, 0.0) }
    }

    /// A distance as a value with its sign.
    pub(super) fn signed(&self, distance: Option<f64>) -> Option<f64> {
        distance.map(|d| if d == 0.0 { 0.0 } else { self.direction * d })
    }

    /// √(ν/χ²) at the two ends of the SD's interval, at the zero band's level (else 95 %).
    pub(super) fn sd_factors(&self, zeros: Zeros<'_>) -> (f64, f64) {
        if self.nu.is_infinite() {
            return (1.0, 1.0);
        }
        let level = zeros.band.map_or(0.95, |band| band.level);
        let factor = |p: f64| libm::sqrt(self.nu / chi2_quantile(p, self.nu));
        (factor(0.5 * (1.0 + level)), factor(0.5 * (1.0 - level)))
    }
}

/// (μ̂₀, σ²_new(0) for one reading, V₀, ν) of a basis.
fn scatter(fit: &Fit, zeros: Zeros<'_>, basis: Basis) -> Result<(f64, f64, f64, f64), Absent> {
    match basis {
        Basis::Zeros => {
            let band = zeros.band.ok_or(match zeros.count {
                0 => Absent::NoZeros,
                n => Absent::TooFewZeros { n },
            })?;
            if band.identical() {
                return Err(Absent::IdenticalZeros);
            }
            let s2 = band.sd * band.sd;
            Ok((band.mean, s2, s2 / band.n as f64, band.degrees_of_freedom))
        }
        Basis::Calibration => {
            let s = fit.scatter_sd().filter(|s| *s > 0.0).ok_or(Absent::NoScatter)?;
            let new = s * s * fit.variance_at(0.0);
            let nu = fit.scatter_freedom();
            Ok((fit.curve.value(0.0), new, fit.mean_variance(0.0), nu))
        }
    }
}
