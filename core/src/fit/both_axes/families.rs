//! The families as functions that can be fitted in both axes.

use super::Function;
use crate::model::{FreeFormula, Shape};
use crate::numerics::Real;

/// A family in its units, with as many coefficients as it holds.
impl Function for Shape {
    fn coefficient_count(&self) -> usize {
        self.coefficients().len()
    }

    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        self.indication(b, x)
    }
}

impl Function for FreeFormula {
    fn coefficient_count(&self) -> usize {
        self.coefficient_names().len()
    }

    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        Self::value(self, b, x)
    }
}

/// A family in kelvin and ohm, for tests that need no more than its name.
#[cfg(test)]
impl Function for crate::model::Family {
    fn coefficient_count(&self) -> usize {
        Self::coefficient_count(self)
    }

    fn value<T: Real>(&self, b: &[T], x: T) -> T {
        Shape::new(self.clone(), crate::model::Units::default(), Vec::new()).indication(b, x)
    }
}
