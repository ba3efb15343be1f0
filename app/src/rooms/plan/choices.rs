//! The closed choices of the plan: their words, explanations, and the command of a change; knows no window.

use assize_core::{
    model::Family,
    project::{
        Project,
        command::{Command, PlanCommand, PlanField},
        plan::{DetectionBasis, Hazard, Limits, ZeroState, ZerosPart},
    },
    quantity::Text,
};

/// States of nothing applied, with the words of the choice.
pub const ZERO_STATES: [(ZeroState, &str); 4] = [
    (ZeroState::Zero, "is the value 0"),
    (ZeroState::LiveZero, "gives a live signal"),
    (ZeroState::None, "does not exist"),
    (ZeroState::NotAsked, "not asked"),
];

/// Parts of the zero readings, with the words of the choice.
pub const ZEROS_PARTS: [(ZerosPart, &str); 2] =
    [(ZerosPart::Fitted, "fitted as value 0"), (ZerosPart::CheckOnly, "only check the curve")];

/// What a detection limit can rest on, with the words of the choice.
pub const BASES: [(DetectionBasis, &str); 2] =
    [(DetectionBasis::Zeros, "the zero readings"), (DetectionBasis::Calibration, "scatter about the curve")];

/// Functions that a plan can name: all but the declared one, which is always allowed, and typed formulas.
#[must_use]
pub fn families() -> Vec<Family> {
    Family::all().into_iter().filter(|f| *f != Family::Declared).collect()
}

/// What a state of nothing means, in a sentence.
#[must_use]
pub fn explained(state: ZeroState) -> &'static str {
    match state {
        ZeroState::Zero => {
            "With nothing applied the true value is 0: an unloaded link, a blank sample. Zero readings answer how \
             small a value is more than nothing."
        }
        ZeroState::LiveZero => {
            "With nothing applied the output already carries a signal, such as 4 mA. The question of the smallest \
             value stays folded until it is asked."
        }
        ZeroState::None => {
            "The quantity has no state of nothing, such as a temperature in °C or a pH. Instead of a detection limit \
             the smallest change near the lower end is shown."
        }
        ZeroState::NotAsked => "Nobody asks how small a value is more than nothing; the row takes one line.",
    }
}

/// Kinds of limits.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum LimitKind {
    /// Nothing was said.
    NotSaid,
    /// No verdict is wanted.
    NoVerdict,
    /// The same amount everywhere.
    Absolute,
    /// Per cent of the value.
    OfReading,
    /// Per cent of the span.
    OfSpan,
}

/// Kinds of limits with the words of the choice.
pub const LIMIT_KINDS: [(LimitKind, &str); 5] = [
    (LimitKind::NotSaid, "not said"),
    (LimitKind::NoVerdict, "no verdict wanted"),
    (LimitKind::Absolute, "same everywhere"),
    (LimitKind::OfReading, "% of value"),
    (LimitKind::OfSpan, "% of span"),
];

/// The kind of the plan's limits.
#[must_use]
pub fn limit_kind(limits: Option<&Limits>) -> LimitKind {
    match limits {
        None => LimitKind::NotSaid,
        Some(Limits::NoVerdictWanted) => LimitKind::NoVerdict,
        Some(Limits::Absolute(_)) => LimitKind::Absolute,
        Some(Limits::PercentOfReading(_)) => LimitKind::OfReading,
        Some(Limits::PercentOfSpan(_)) => LimitKind::OfSpan,
    }
}

/// Limits of another kind: the size stays, a new one starts at 1.
#[must_use]
pub fn with_kind(kind: LimitKind, now: Option<&Limits>) -> Option<Limits> {
    let size = match now {
        Some(Limits::Absolute(n) | Limits::PercentOfReading(n) | Limits::PercentOfSpan(n)) => *n,
        None | Some(Limits::NoVerdictWanted) => 1.0,
    };
    match kind {
        LimitKind::NotSaid => None,
        LimitKind::NoVerdict => Some(Limits::NoVerdictWanted),
        LimitKind::Absolute => Some(Limits::Absolute(size)),
        LimitKind::OfReading => Some(Limits::PercentOfReading(size)),
        LimitKind::OfSpan => Some(Limits::PercentOfSpan(size)),
    }
}

/// The families after one was switched on or off; none named means all, and the last one stays.
#[must_use]
pub fn switched(family: &Family, project: &Project) -> Vec<Text> {
    let allowed = |f: &Family| project.plan.allows(f);
    let all = families();
    let now: Vec<&Family> = all.iter().filter(|f| allowed(f) != (*f == family)).collect();
    if now.is_empty() || now.len() == all.len() {
        return Vec::new();
    }
    now.into_iter().map(|f| Text::from(f.to_string())).collect()
}

/// The hazards after one was switched on or off.
#[must_use]
pub fn with_hazard(hazard: Hazard, project: &Project) -> Vec<Hazard> {
    let mut now = project.plan.hazards.clone();
    match now.iter().position(|h| *h == hazard) {
        Some(at) => drop(now.remove(at)),
        None => now.push(hazard),
    }
    now
}

/// The command for a field of the plan.
#[must_use]
pub fn set(field: PlanField) -> Command {
    Command::Plan(PlanCommand::Set(field))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn switching_families_starts_from_all_and_never_ends_at_none() {
        let mut project = Project::default();
        let line = Family::Polynomial(1);
        let without = switched(&line, &project);
        assert_eq!(without.len(), families().len() - 1);
        assert!(!without.contains(&"line".into()));
        project.plan.families = without.iter().map(|n| n.parse().unwrap()).collect();
        assert!(switched(&line, &project).is_empty(), "all of them again");
        project.plan.families = vec![line.clone()];
        assert!(switched(&line, &project).is_empty(), "the last one cannot be switched off");
        let both = switched(&Family::Log, &project);
        assert_eq!(both, ["line".into(), "log".into()] as [Text; 2]);
    }

    #[test]
    fn another_kind_of_limit_keeps_the_size() {
        let now = Limits::Absolute(0.015);
        assert_eq!(with_kind(LimitKind::OfSpan, Some(&now)), Some(Limits::PercentOfSpan(0.015)));
        assert_eq!(with_kind(LimitKind::Absolute, None), Some(Limits::Absolute(1.0)));
        for (kind, _) in LIMIT_KINDS {
            assert_eq!(limit_kind(with_kind(kind, Some(&now)).as_ref()), kind);
        }
    }

    #[test]
    fn a_hazard_goes_on_and_off() {
        let mut project = Project::default();
        project.plan.hazards = with_hazard(Hazard::Loads, &project);
        assert_eq!(project.plan.hazards, [Hazard::Loads]);
        assert!(with_hazard(Hazard::Loads, &project).is_empty());
    }
}
