//! Double-double numbers: an unevaluated sum of two doubles, about 106 bits.
//!
//! Residuals of a calibration are small differences of large numbers. With twice the digits of a
//! double the whole fit can be carried through and rounded once at the very end.

use std::ops::{Add, AddAssign, Div, DivAssign, Mul, MulAssign, Neg, Sub, SubAssign};

/// An unevaluated sum `hi + lo` with |lo| ≤ ½ ulp(hi).
///
/// # Formula
///
/// Sums by exact two-sums, products by Dekker's splitting (no fused multiply-add needed, so the bits
/// are the same on every machine), quotients in three steps.
///
/// # Shapes and units
///
/// Relative error below 2⁻¹⁰² for `+ − × ÷ √`, for magnitudes between about 1e-140 and 1e140 (the low
/// word of a product must not underflow and the splitting must not overflow). Callers bring their data
/// there with [`super::scale::Scaled`]; outside, results lose low bits or become non-finite and are reported
/// as such. Infinities keep their sign and meaning through `+ × ÷`, so that 1/(1 + ∞) is 0 as for doubles.
///
/// # Source
///
/// Dekker, Numer. Math. 18 (1971) 224; Joldes, Muller and Popescu, ACM Trans. Math. Softw. 44 (2017)
/// 15, algorithms 4, 6, 11 and the long division of Hida, Li and Bailey, ARITH-15 (2001). From memory.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd, Default)]
pub struct Dd {
    hi: f64,
    lo: f64,
}

/// 2²⁷ + 1, Dekker's splitting constant for 53-bit numbers.
const SPLITTER: f64 = 134_217_729.0;

/// Sum and its exact rounding error, for any two doubles.
#[inline]
fn two_sum(a: f64, b: f64) -> (f64, f64) {
    let sum = a + b;
    let b_part = sum - a;
    let a_part = sum - b_part;
    (sum, (a - a_part) + (b - b_part))
}

/// As [`two_sum`] when |a| ≥ |b| or a = 0.
#[inline]
fn quick_two_sum(a: f64, b: f64) -> (f64, f64) {
    let sum = a + b;
    (sum, b - (sum - a))
}

/// Upper and lower half of the mantissa.
#[inline]
fn split(a: f64) -> (f64, f64) {
    let t = SPLITTER * a;
    let high = t - (t - a);
    (high, a - high)
}

/// Product and its exact rounding error.
#[inline]
fn two_product(a: f64, b: f64) -> (f64, f64) {
    let product = a * b;
    let (a_high, a_low) = split(a);
    let (b_high, b_low) = split(b);
    let error = ((a_high * b_high - product) + a_high * b_low + a_low * b_high) + a_low * b_low;
    (product, error)
}

impl Dd {
    /// Zero.
    pub const ZERO: Self = Self { hi: 0.0, lo: 0.0 };
    /// One.
    pub const ONE: Self = Self { hi: 1.0, lo: 0.0 };
    /// ln 2 to double-double precision (computed with 60 digits).
    pub const LN_2: Self = Self { hi: std::f64::consts::LN_2, lo: 2.319_046_813_846_299_6e-17 };
    /// ln 10, likewise.
    pub const LN_10: Self = Self { hi: std::f64::consts::LN_10, lo: -2.170_756_223_382_249_4e-16 };

    /// Two words that are normalised already: |lo| ≤ ½ ulp(hi).
    pub(super) const fn new(hi: f64, lo: f64) -> Self {
        Self { hi, lo }
    }

    /// The exact sum of two doubles.
    #[must_use]
    pub fn from_sum(a: f64, b: f64) -> Self {
        let (hi, lo) = two_sum(a, b);
        Self { hi, lo }
    }

    /// The exact product of two doubles.
    #[must_use]
    pub fn from_product(a: f64, b: f64) -> Self {
        let (hi, lo) = two_product(a, b);
        Self { hi, lo }
    }

    /// The nearest double.
    #[must_use]
    pub const fn to_f64(self) -> f64 {
        self.hi
    }

    /// What the nearest double leaves over.
    #[must_use]
    pub const fn low(self) -> f64 {
        self.lo
    }

    /// False as soon as either word is infinite or not a number.
    #[must_use]
    pub fn is_finite(self) -> bool {
        self.hi.is_finite() && self.lo.is_finite()
    }

    /// The magnitude.
    #[must_use]
    pub fn abs(self) -> Self {
        if self.hi < 0.0 { -self } else { self }
    }

    /// Times 2^`exponent`, exact unless a word leaves the range of a double.
    #[must_use]
    pub fn times_power_of_two(self, exponent: i32) -> Self {
        Self { hi: libm::scalbn(self.hi, exponent), lo: libm::scalbn(self.lo, exponent) }
    }

    /// The square.
    #[must_use]
    pub fn square(self) -> Self {
        self * self
    }

    /// The square root; not a number below zero.
    ///
    /// # Formula
    ///
    /// One Newton step s + (a − s²)/(2s) on the rounded root.
    #[must_use]
    pub fn sqrt(self) -> Self {
        let root = libm::sqrt(self.hi);
        if root == 0.0 || !root.is_finite() {
            return Self::from(root);
        }
        let rest = self - Self::from_product(root, root);
        let (hi, lo) = quick_two_sum(root, rest.hi / (2.0 * root));
        Self { hi, lo }
    }
}

impl From<f64> for Dd {
    fn from(value: f64) -> Self {
        Self { hi: value, lo: 0.0 }
    }
}

impl Neg for Dd {
    type Output = Self;
    fn neg(self) -> Self {
        Self { hi: -self.hi, lo: -self.lo }
    }
}

impl Add for Dd {
    type Output = Self;
    #[inline]
    fn add(self, other: Self) -> Self {
        let (sum, error) = two_sum(self.hi, other.hi);
        if !sum.is_finite() {
            return Self::from(sum);
        }
        let (low_sum, low_error) = two_sum(self.lo, other.lo);
        let (sum, error) = quick_two_sum(sum, error + low_sum);
        let (hi, lo) = quick_two_sum(sum, error + low_error);
        Self { hi, lo }
    }
}

impl Sub for Dd {
    type Output = Self;
    #[inline]
    fn sub(self, other: Self) -> Self {
        self + (-other)
    }
}

impl Mul for Dd {
    type Output = Self;
    #[inline]
    fn mul(self, other: Self) -> Self {
        let (product, error) = two_product(self.hi, other.hi);
        if !product.is_finite() {
            return Self::from(product);
        }
        let cross = self.hi * other.lo + self.lo * other.hi;
        let (hi, lo) = quick_two_sum(product, error + cross);
        Self { hi, lo }
    }
}

impl Mul<f64> for Dd {
    type Output = Self;
    #[inline]
    fn mul(self, other: f64) -> Self {
        let (product, error) = two_product(self.hi, other);
        if !product.is_finite() {
            return Self::from(product);
        }
        let (hi, lo) = quick_two_sum(product, error + self.lo * other);
        Self { hi, lo }
    }
}

impl Div for Dd {
    type Output = Self;
    fn div(self, other: Self) -> Self {
        let first = self.hi / other.hi;
        if first == 0.0 || !first.is_finite() {
            return Self::from(first);
        }
        let rest = self - other * first;
        let second = rest.hi / other.hi;
        let rest = rest - other * second;
        let third = rest.hi / other.hi;
        let (hi, lo) = quick_two_sum(first, second);
        Self { hi, lo } + Self::from(third)
    }
}

impl AddAssign for Dd {
    fn add_assign(&mut self, other: Self) {
        *self = *self + other;
    }
}

impl SubAssign for Dd {
    fn sub_assign(&mut self, other: Self) {
        *self = *self - other;
    }
}

impl MulAssign for Dd {
    fn mul_assign(&mut self, other: Self) {
        *self = *self * other;
    }
}

impl DivAssign for Dd {
    fn div_assign(&mut self, other: Self) {
        *self = *self / other;
    }
}

impl std::iter::Sum for Dd {
    fn sum<I: Iterator<Item = Self>>(terms: I) -> Self {
        terms.fold(Self::ZERO, |total, term| total + term)
    }
}
