//! Which function to advise, and the numbers that say why.

mod climb;
#[cfg(test)]
mod tests;

pub use climb::advise;

use super::ftest::FTest;
use super::shape::{SHAPE_LEVEL, Shape, TooFew};
use crate::fit::FitError;
use crate::model::{Family, Units};

/// The highest polynomial degree that is ever advised.
pub const HIGHEST_DEGREE: usize = 5;

/// The functions that the plan lets be advised, and what fitting them needs to know.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Rules {
    /// Families that may be advised.
    pub allowed: Vec<Family>,
    /// Families that the plan names because the instrument's principle suggests them: they compete
    /// even when a line is good enough.
    pub suggested: Vec<Family>,
    /// Units of input and output, for thermometers.
    pub units: Units,
    /// Standard uncertainty of every observation, for the weights `typed`.
    pub reading_uncertainty: Option<Vec<f64>>,
}

/// The advice with everything that led to it.
#[derive(Debug, Clone, PartialEq)]
pub struct Advice {
    /// What is advised, if anything.
    pub outcome: Outcome,
    /// The reasons, in the order in which they were met.
    pub because: Vec<Because>,
    /// Every family that was fitted for it.
    pub tried: Vec<Tried>,
}

/// What the advice comes to.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Outcome {
    /// This family describes the data with the fewest coefficients.
    Advised(Family),
    /// None of the allowed families is good enough.
    NoneGoodEnough,
    /// Nothing speaks against this family, but there are too few points to tell.
    TooFewToTell(Family, TooFew),
    /// The data cannot carry any of the allowed families.
    NothingToJudge,
}

/// One family that was tried.
#[derive(Debug, Clone, PartialEq)]
pub struct Tried {
    /// The family.
    pub family: Family,
    /// Whether the plan allows it.
    pub allowed: bool,
    /// Number of coefficients.
    pub coefficients: usize,
    /// What its shape test says.
    pub shape: Shape,
    /// Its AICc; `None` with too few observations for it.
    pub aicc: Option<f64>,
}

/// One reason, with its numbers.
#[derive(Debug, Clone, PartialEq)]
pub enum Because {
    /// The shape of this family is rejected.
    ShapeRejected {
        /// The family.
        family: Family,
        /// p_S.
        p: f64,
        /// The test with the smallest p among those combined.
        test: ShapeTest,
        /// Its numbers.
        numbers: FTest,
    },
    /// The shape of this family is not rejected.
    ShapeAccepted {
        /// The family.
        family: Family,
        /// p_S.
        p: f64,
    },
    /// Two families are good enough; this one has the lower AICc with no more coefficients.
    LowerAicc {
        /// The one preferred.
        family: Family,
        /// Its AICc.
        aicc: f64,
        /// The other one.
        over: Family,
        /// The other one's AICc.
        other: f64,
    },
    /// The plan names this family, it is good enough, and its errors are of another quantity than the ladder's,
    /// so that no criterion compares the two.
    Named {
        /// The family.
        family: Family,
    },
    /// The family cannot be fitted to these data.
    NotFitted {
        /// The family.
        family: Family,
        /// Why.
        error: FitError,
    },
    /// Too few points to tell the shape of this family.
    TooFew {
        /// The family.
        family: Family,
        /// How many there are and how many are needed.
        numbers: TooFew,
    },
    /// A family that the plan does not allow would be good enough.
    WouldDo {
        /// The family.
        family: Family,
        /// p_S.
        p: f64,
    },
}

/// Which of the combined tests.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum ShapeTest {
    /// The next term.
    NextTerm,
    /// The next-but-one term.
    NextButOne,
    /// Lack of fit against the repeats.
    LackOfFit,
}

impl Tried {
    /// Good enough: enough points to tell, and p_S > 0.05.
    #[must_use]
    pub fn good_enough(&self) -> bool {
        self.shape.too_few.is_none() && self.shape.p.is_some_and(|p| p > SHAPE_LEVEL)
    }

    /// Not rejected, but with too few points to tell.
    fn untold(&self) -> Option<TooFew> {
        self.shape.too_few.filter(|_| !self.shape.rejected())
    }
}
