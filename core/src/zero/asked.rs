//! Which detection limit is asked for, and why there may be none.

use super::band::ZeroBand;

/// Where the scatter at zero is taken from.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Basis {
    /// The zero readings: μ̂₀ = ȳ₀, σ²_new(0) = s₀², V₀ = s₀²/n, ν = n − 1.
    Zeros,
    /// The calibration itself: μ̂₀ = f̂(0), σ²_new(0) = s²·v(0), V₀ = Var f̂(0), ν = N − p.
    Calibration,
}

/// The detection limit that the plan asks for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Asked {
    /// Chance of a false alarm when nothing is there, e.g. 0.05.
    pub alpha: f64,
    /// Chance of a miss at the detection limit, e.g. 0.05.
    pub beta: f64,
    /// How many readings of the unknown are averaged.
    pub k: usize,
    /// Where the scatter is taken from.
    pub basis: Basis,
}

/// The zero readings as far as they exist.
#[derive(Debug, Clone, Copy)]
pub struct Zeros<'a> {
    /// How many zero applications there are.
    pub count: usize,
    /// Their band, from three on.
    pub band: Option<&'a ZeroBand>,
}

/// Why there is no detection limit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Absent {
    /// The plan does not ask for one.
    NotAsked,
    /// The quantity has no state of nothing (°C, pH).
    NoTrueZero,
    /// No zero reading was taken.
    NoZeros,
    /// Fewer than three zero applications.
    TooFewZeros {
        /// How many there are.
        n: usize,
    },
    /// All zero readings are the same number: the display hides the scatter.
    IdenticalZeros,
    /// The curve has no value at zero.
    NoValueAtZero,
    /// The fit leaves no scatter to judge by (no degrees of freedom, or residuals of 0).
    NoScatter,
    /// The curve is flat at zero or turns back before the standards.
    TurnsBack,
    /// The limit is not reached within the standards.
    NotReached {
        /// The outermost standard on that side, input unit.
        up_to: f64,
    },
}

/// The side of zero, seen along the input.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Side {
    /// Values above zero.
    Above,
    /// Values below zero.
    Below,
}
