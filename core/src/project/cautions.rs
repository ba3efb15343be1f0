//! Usual cautions beside what a plan works with, as the plan shows and the report prints them.
//!
//! They remind; they replace neither local rules nor the judgement of a licensed or trained person.

use super::plan::Hazard;

/// A hazard's heading with the sentences printed under it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Caution {
    /// What it concerns, e.g. `Loads and tension`.
    pub heading: &'static str,
    /// Two or three sentences.
    pub text: &'static str,
}

/// All hazards in the order in which they are shown.
pub const ALL: [Hazard; 6] =
    [Hazard::Loads, Hazard::Pressure, Hazard::Baths, Hazard::Mains, Hazard::Gases, Hazard::Chemicals];

/// Printed below every record, whatever it works with.
pub const GENERAL: &str = "This record describes a measurement. Whether the instrument may be used for trade, \
in medicine, or where somebody's safety depends on it is decided by the authority or the person responsible \
for that use, not here.";

/// The usual caution for a hazard.
///
/// # Source
/// Common practice in calibration rooms; every text defers to local rules and to trained or licensed persons.
#[must_use]
pub fn caution(hazard: Hazard) -> Caution {
    let (heading, text) = match hazard {
        Hazard::Loads => (
            "Loads and tension",
            "Keep everybody out from under a load and out of line with anything under tension. \
             Use only lifting gear inside its inspection date and rated load, and raise loads in steps. \
             Local lifting rules and the person licensed for lifting decide; this record approves no lift.",
        ),
        Hazard::Pressure => (
            "Pressure",
            "Stored pressure moves parts and people: use fittings and hoses rated above the highest point, \
             wear eye protection, and vent before loosening anything. Prefer liquid to gas at high pressure. \
             Local rules for pressure equipment and the person responsible for it decide.",
        ),
        Hazard::Baths => (
            "Hot and cold baths",
            "Baths burn at both ends of the scale: wear gloves and eye protection, and keep water away from hot oil or salt. \
             Cold gases from dry ice or liquid nitrogen displace air, so ventilate the room. \
             Local rules for the bath and its fluid decide.",
        ),
        Hazard::Mains => (
            "Mains voltage",
            "Switch off, lock out and prove dead before touching conductors; use leads and probes of the right measurement category. \
             Work on live parts belongs to a licensed electrician under local rules.",
        ),
        Hazard::Gases => (
            "Gases",
            "Secure cylinders, use the regulator made for the gas, and check for leaks before starting. \
             Ventilate, and carry a detector where the gas is poisonous, flammable or displaces air. \
             Local gas rules and the supplier's safety data sheet decide.",
        ),
        Hazard::Chemicals => (
            "Chemicals",
            "Read the safety data sheet first, wear the gloves and eye protection it names, and work under extraction where it says so. \
             Label every flask and collect waste as local rules say; the person responsible for the laboratory decides.",
        ),
    };
    Caution { heading, text }
}

/// The cautions of a plan, each hazard once, in the order of [`ALL`].
#[must_use]
pub fn cautions(hazards: &[Hazard]) -> Vec<Caution> {
    ALL.into_iter().filter(|h| hazards.contains(h)).map(caution).collect()
}

/// All texts as they are printed: those of the hazards, then the one below every record.
#[must_use]
pub fn texts(hazards: &[Hazard]) -> Vec<&'static str> {
    let of_hazards = cautions(hazards).into_iter().map(|c| c.text);
    of_hazards.chain([GENERAL]).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_caution_is_two_or_three_sentences_and_defers_to_local_rules() {
        for hazard in ALL {
            let c = caution(hazard);
            let sentences = c.text.matches(". ").count() + 1;
            assert!((2..=3).contains(&sentences), "{}: {sentences} sentences", c.heading);
            assert!(c.text.to_lowercase().contains("local"), "{}", c.heading);
            assert!(c.text.ends_with('.'), "{}", c.heading);
        }
    }

    #[test]
    fn a_hazard_named_twice_is_printed_once_and_in_fixed_order() {
        let shown = cautions(&[Hazard::Mains, Hazard::Loads, Hazard::Mains]);
        let headings: Vec<_> = shown.iter().map(|c| c.heading).collect();
        assert_eq!(headings, ["Loads and tension", "Mains voltage"]);
        assert!(cautions(&[]).is_empty());
        assert_eq!(texts(&[]), [GENERAL]);
    }
}
