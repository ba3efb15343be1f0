//! Plain words for the closed choices of a project, used by trail, window and report alike.

use crate::{
    project::{
        about::{Condition, Kind},
        command::ItemField,
        plan::{DetectionBasis, Limits, ZeroState, ZerosPart},
    },
    quantity::{Text, format},
    readings::{Direction, Slip, Source, Stage},
    standards::{StandardPapers, StatedUncertainty},
};

/// `typed wrong`, `read wrong`, …
#[must_use]
pub fn slip(slip: Slip) -> &'static str {
    match slip {
        Slip::TypedWrong => "typed wrong",
        Slip::ReadWrong => "read wrong",
        Slip::WrongRow => "wrong row",
        Slip::NotSettled => "not settled",
        Slip::Other => "another reason",
    }
}

/// `rising`, `falling`, `turning point`; empty without a direction.
#[must_use]
pub fn direction(direction: Direction) -> &'static str {
    match direction {
        Direction::Rising => "rising",
        Direction::Falling => "falling",
        Direction::TurningPoint => "turning point",
        Direction::None => "",
    }
}

/// `as found`, `as left`, `check`.
#[must_use]
pub fn stage(stage: Stage) -> &'static str {
    match stage {
        Stage::AsFound => "as found",
        Stage::AsLeft => "as left",
        Stage::Check => "check",
    }
}

/// The verb for how readings came in.
#[must_use]
pub fn came(source: &Source) -> &'static str {
    match source {
        Source::Typed => "added",
        Source::Pasted => "pasted",
        Source::File { .. } => "imported",
        Source::Port { .. } => "took from the port",
    }
}

/// `a practice project`, `a record`.
#[must_use]
pub fn kind(kind: Kind) -> &'static str {
    match kind {
        Kind::Practice => "a practice project",
        Kind::Record => "a record",
    }
}

/// Name of a field of the item.
#[must_use]
pub fn item_field(field: ItemField) -> &'static str {
    match field {
        ItemField::Description => "the description of the item",
        ItemField::Identity => "the identity of the item",
        ItemField::Maker => "the maker",
        ItemField::Model => "the model",
        ItemField::Serial => "the serial number",
        ItemField::Channel => "the channel",
        ItemField::Condition => "the condition on receipt",
        ItemField::Received => "the date received",
    }
}

/// What the plan says about nothing applied.
#[must_use]
pub fn zero_state(state: ZeroState) -> &'static str {
    match state {
        ZeroState::Zero => "nothing applied is the value 0",
        ZeroState::LiveZero => "nothing applied gives a live signal",
        ZeroState::None => "there is no state of nothing",
        ZeroState::NotAsked => "not asked",
    }
}

/// What the zero readings do.
#[must_use]
pub fn zeros_part(part: ZerosPart) -> &'static str {
    match part {
        ZerosPart::Fitted => "fitted as a standard of value 0",
        ZerosPart::CheckOnly => "only check the curve",
    }
}

/// What a detection limit rests on.
#[must_use]
pub fn stage_looked_at(stage: Option<Stage>) -> &'static str {
    match stage {
        None => "of the latest stage",
        Some(Stage::AsFound) => "as found",
        Some(Stage::AsLeft) => "as left",
        Some(Stage::Check) => "taken as a check",
    }
}

/// What the detection limit rests on.
#[must_use]
pub fn basis(basis: DetectionBasis) -> &'static str {
    match basis {
        DetectionBasis::Zeros => "the zero readings",
        DetectionBasis::Calibration => "the scatter about the curve",
    }
}

/// A number as short as it can be read back, with a proper minus; powers of ten for very long ones.
#[must_use]
pub fn number(value: f64) -> String {
    let size = value.abs();
    if size != 0.0 && !(1e-6..1e9).contains(&size) {
        return format::significant(value, 6);
    }
    value.to_string().replace('-', "−")
}

/// Limits in words; `unit` is the input unit.
#[must_use]
pub fn limits(limits: Option<&Limits>, unit: &str) -> String {
    match limits {
        None => "not said".to_owned(),
        Some(Limits::NoVerdictWanted) => "no verdict wanted".to_owned(),
        Some(Limits::Absolute(a)) => format!("±{}", format::with_unit(&number(*a), unit)),
        Some(Limits::PercentOfReading(p)) => format!("±{} % of the value", number(*p)),
        Some(Limits::PercentOfSpan(p)) => format!("±{} % of the span", number(*p)),
    }
}

/// What a certificate states, in words; `unit` is the input unit.
#[must_use]
pub fn uncertainty(stated: StatedUncertainty, unit: &str) -> String {
    match stated {
        StatedUncertainty::Standard(u) => format!("u {}", format::with_unit(&number(u), unit)),
        StatedUncertainty::Expanded { expanded, factor } => {
            let shown = format::with_unit(&number(expanded), unit);
            format!("U {shown} (k = {})", number(factor))
        }
        StatedUncertainty::Limits(a) => format!("limits ±{}", format::with_unit(&number(a), unit)),
    }
}

/// What stands on the papers of a standard, in one line; `no papers` when nothing does.
#[must_use]
pub fn papers(papers: &StandardPapers, unit: &str) -> String {
    let named = |what: &str, text: &Option<Text>| text.as_ref().map(|t| format!("{what}{t}"));
    let parts: Vec<String> = [
        named("", &papers.identity),
        named("certificate ", &papers.certificate),
        named("issued by ", &papers.issuer),
        named("dated ", &papers.dated),
        named("due ", &papers.due),
        named("group ", &papers.group),
        papers.uncertainty.map(|u| uncertainty(u, unit)),
    ]
    .into_iter()
    .flatten()
    .collect();
    if parts.is_empty() { "no papers".to_owned() } else { parts.join(", ") }
}

/// A share as per cent, without the rounding that a product with 100 brings: `5 %`, `99.9 %`.
#[must_use]
pub fn percent(share: f64) -> String {
    let shown = format!("{:.6}", share * 100.0);
    format!("{} %", shown.trim_end_matches('0').trim_end_matches('.'))
}

/// Conditions as one text: `temperature 20.3 °C; humidity 45 %`.
#[must_use]
pub fn conditions(list: &[Condition]) -> String {
    let parts: Vec<String> = list.iter().map(|c| format!("{} {}", c.name, c.value)).collect();
    parts.join("; ")
}

/// Numbers with a comma and a space between them.
#[must_use]
pub fn numbers(numbers: &[f64]) -> String {
    let texts: Vec<String> = numbers.iter().map(|&n| number(n)).collect();
    texts.join(", ")
}
