//! Reading guides: when to use a function, and what goes wrong with it.

/// Two or three plain sentences each, for the person who chooses.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Guide {
    /// When to use this function.
    pub when: &'static str,
    /// What goes wrong with it.
    pub wrong: &'static str,
}

/// Guide of the straight line with its constant term.
pub const LINE: Guide = Guide {
    when: "The first thing to try: load cells, pressure and current transmitters, most photometers in the lower part \
           of their range. Two numbers, easy to enter in any device, and the easiest to check by hand.",
    wrong: "A bend of a per cent or two hides behind an R² of 0.9999: look at the residuals, not at R². \
            It says nothing about what lies beyond the highest standard.",
};

/// Guide of polynomials from degree 2.
pub const POLYNOMIAL: Guide = Guide {
    when: "A smooth, slight bend that has no law of its own, as in load cells at high accuracy. \
           Take the lowest degree whose residuals no longer show a pattern, and have at least two levels more than \
           coefficients.",
    wrong: "Each further term follows more of the noise and swings between and beyond the standards. \
            A bent curve may turn round inside the range, and then one reading means two values. \
            Powers of a large x need many printed digits.",
};

/// Guide of the logarithm.
pub const LOG: Guide = Guide {
    when: "The reading changes by the same step each time the standard is multiplied: ion-selective electrodes, \
           some light and gas sensors, over their middle range.",
    wrong: "The logarithm of zero does not exist, so a zero standard cannot be used and there is no detection limit. \
            Real sensors level off at the low end; one low standard then tilts the whole curve.",
};

/// Guide of the factor from the highest standard alone.
pub const ONE_POINT: Guide = Guide {
    when: "What many devices do when they are adjusted: one factor, taken from the highest standard alone, through \
           zero. Use it to show what such a device will read, or for a quick check between calibrations.",
    wrong: "It passes through its one standard because it has to, and so cannot show its own error. \
            Any offset or bend appears in full at the other end. All other readings are left unused.",
};

/// Guide of a function that is given, not fitted.
pub const DECLARED: Guide = Guide {
    when: "The function that is in the device now, on the data sheet, or from last year: the readings are compared \
           with it and nothing is fitted. This is the one that as-found errors refer to.",
    wrong: "Its residuals are errors of the instrument, not scatter of a fit; do not read a spread or an interval \
            of the coefficients out of them. A misplaced digit or another unit looks like a broken instrument.",
};

/// Guide of a typed formula.
pub const FORMULA: Guide = Guide {
    when: "The physics of the instrument gives a law that is not in this list. Name the coefficients, and start \
           them near sensible values: their size and sign matter more than their digits.",
    wrong: "From a poor start the fit ends in the wrong place or nowhere. Coefficients that can stand in for each \
            other (a·b·x) have no single answer. The range where the formula has no value is not known beforehand.",
};

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::{
        beta, callendar_van_dusen, exponential, hyperbola, line_zero, logistic4, logistic5, power, rational,
        steinhart_hart,
    };

    #[test]
    fn every_guide_is_a_few_whole_sentences_of_its_own() {
        let all = [
            LINE,
            POLYNOMIAL,
            LOG,
            ONE_POINT,
            DECLARED,
            FORMULA,
            line_zero::GUIDE,
            power::GUIDE,
            exponential::GUIDE,
            hyperbola::GUIDE,
            rational::GUIDE,
            logistic4::GUIDE,
            logistic5::GUIDE,
            steinhart_hart::GUIDE,
            beta::GUIDE,
            callendar_van_dusen::GUIDE,
        ];
        for (i, guide) in all.iter().enumerate() {
            for text in [guide.when, guide.wrong] {
                assert!((60..420).contains(&text.chars().count()), "{text}");
                assert!(text.ends_with('.') && !text.contains("  "), "{text}");
            }
            assert!(all[..i].iter().all(|other| other.when != guide.when && other.wrong != guide.wrong));
        }
    }
}
