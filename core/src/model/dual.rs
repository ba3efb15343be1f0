//! First-order dual numbers: a value carried together with its derivative by x.

/// A value and its derivative; every operation applies the chain rule exactly.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Dual {
    /// The value.
    pub value: f64,
    /// d/dx.
    pub slope: f64,
}

impl Dual {
    /// A constant.
    pub(super) const fn constant(value: f64) -> Self {
        Self { value, slope: 0.0 }
    }

    /// The variable itself.
    pub(super) const fn variable(x: f64) -> Self {
        Self { value: x, slope: 1.0 }
    }

    pub(super) fn add(self, other: Self) -> Self {
        Self { value: self.value + other.value, slope: self.slope + other.slope }
    }

    pub(super) fn negated(self) -> Self {
        Self { value: -self.value, slope: -self.slope }
    }

    pub(super) fn multiply(self, other: Self) -> Self {
        Self { value: self.value * other.value, slope: self.slope * other.value + self.value * other.slope }
    }

    pub(super) fn divide(self, other: Self) -> Self {
        let value = self.value / other.value;
        Self { value, slope: (self.slope - value * other.slope) / other.value }
    }

    /// uᵛ. The terms v uᵛ⁻¹ u′ and uᵛ ln u · v′ are left out where u′ or v′ is zero, so that x² has its
    /// slope at negative x, where ln x does not exist.
    pub(super) fn power(self, exponent: Self) -> Self {
        let (u, v) = (self.value, exponent.value);
        let value = libm::pow(u, v);
        let mut slope = 0.0;
        if self.slope != 0.0 && v != 0.0 {
            slope += v * libm::pow(u, v - 1.0) * self.slope;
        }
        if exponent.slope != 0.0 && !(u == 0.0 && v > 0.0) {
            slope += value * libm::log(u) * exponent.slope;
        }
        Self { value, slope }
    }

    /// g(u) with its derivative g′(u) given.
    pub(super) fn chain(self, value: f64, derivative: f64) -> Self {
        // A constant stays one, also where g′ is infinite.
        let slope = if self.slope == 0.0 { 0.0 } else { derivative * self.slope };
        Self { value, slope }
    }
}
