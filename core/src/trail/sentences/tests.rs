use super::{sentence, tell_all};
use crate::{
    model::Family,
    project::{
        about::{Adjustment, Condition, EarlierRecord, Import, Kind, Signed, UnitConversion},
        columns::{ColumnSpec, Declared},
        command::{
            AboutCommand as A, Act, ColumnsCommand as C, Command, ItemField, NewReading, PlanCommand, PlanField as P,
            ReadingsCommand as R, RecordCommand, StandardsCommand as S, What,
        },
        plan::{DetectionQuestion, Hazard, Limits, Quantity, ZeroState, ZerosPart},
    },
    quantity::{Moment, Text},
    readings::{Direction, ReadingId, Slip, Source},
    standards::{StandardId, StandardPapers, StatedUncertainty},
};
use std::sync::Arc;

fn at(minute: u32) -> Moment {
    format!("2026-11-03T09:{:02}:00.000+01:00", minute % 60).parse().unwrap()
}

fn act(minute: u32, because: Option<&str>, command: Command) -> Act {
    Act { by: Text::from("M. Orrin"), at: at(minute), because: because.map(Text::from), command }
}

fn t(text: &str) -> Text {
    Text::from(text)
}

fn reading(x: &str, y: &str) -> NewReading {
    NewReading::new(What::Standard(t(x), x.parse().unwrap()), y, y.parse().unwrap())
}

fn papers() -> StandardPapers {
    StandardPapers {
        identity: Some(t("PR-2")),
        certificate: Some(t("5561-26")),
        uncertainty: Some(StatedUncertainty::Expanded { expanded: 0.002, factor: 2.0 }),
        ..StandardPapers::default()
    }
}

fn about() -> Vec<Command> {
    let condition = |v: &str| vec![Condition { name: t("temperature"), value: t(v) }];
    vec![
        A::Number(t("ST-2026-0142")),
        A::Story(t("Invented.")),
        A::Item(ItemField::Serial, t("11482")),
        A::Item(ItemField::Serial, t("")),
        A::AtBench { name: t("M. Orrin"), role: Some(t("performed")) },
        A::ConditionsAtStart(condition("20.3 °C")),
        A::ConditionsAtEnd(condition("20.6 °C")),
        A::Adjusted(Adjustment { what: t("zero"), who: t("M. Orrin"), why: t("zero error") }),
        A::Earlier(EarlierRecord { number: t("ST-2025-0101"), digest: t("00") }),
        A::Conversion(UnitConversion { id: t("lbf to N"), factor: 4.448_221_615_260_5 }),
        A::Kind(Kind::Practice),
    ]
    .into_iter()
    .map(Command::About)
    .collect()
}

fn plan() -> Vec<Command> {
    vec![
        P::Input(Quantity::new("tension", "kN")),
        P::Output(Quantity::new("bridge output", "mV/V")),
        P::Interval(Some((0.25, 5.0))),
        P::Interval(None),
        P::ZeroState(ZeroState::LiveZero),
        P::ZerosPart(ZerosPart::CheckOnly),
        P::Families(vec![t("line"), t("quadratic")]),
        P::Families(Vec::new()),
        P::Detection(DetectionQuestion::default()),
        P::Level(0.99),
        P::Limits(Some(Limits::PercentOfSpan(0.3))),
        P::Limits(Some(Limits::NoVerdictWanted)),
        P::DecisionRule(t("guard band w = U")),
        P::Levels(vec![0.25, 1.0, 5.0]),
        P::Repeats(Some(3)),
        P::FullScale(Some(2.5)),
        P::Order(t("up, then down")),
        P::Method(t("SW-12 rev 4")),
        P::Place(t("Quay 3")),
        P::Customer(t("Outer Harbour")),
        P::Laboratory(t("Skerrow Tideworks")),
        P::Hazards(vec![Hazard::Loads, Hazard::Mains]),
    ]
    .into_iter()
    .map(|f| Command::Plan(PlanCommand::Set(f)))
    .collect()
}

fn data() -> Vec<Command> {
    let import = Import { name: t("run 1.csv"), digest: t("ab12cd34ef56"), base64: Arc::from(""), mapping: Vec::new() };
    let readings = vec![
        R::Add(vec![reading("1", "0.402")]),
        R::Add(vec![NewReading { direction: Direction::Rising, source: Source::Pasted, ..reading("2", "0.801") }]),
        R::Add(vec![NewReading::new(What::Nothing(Some(t("5 kN"))), "0.001", 0.001)]),
        R::Import(Arc::new(import), vec![reading("3", "1.2"), reading("4", "1.6")]),
        R::Correct { id: ReadingId(1), raw: t("0.420"), value: 0.42, slip: Slip::TypedWrong },
        R::Reapply { id: ReadingId(1), what: What::Standard(t("1.05"), 1.05) },
        R::SetAside(ReadingId(2)),
        R::CountAgain(ReadingId(2)),
        R::LetStand(ReadingId(3)),
    ];
    let standards = vec![
        S::Add { raw: t("5"), value: 5.0, papers: papers() },
        S::Papers { id: StandardId(1), papers: papers() },
        S::PapersForAll(papers()),
        S::PapersOf { raw: t("1"), value: 1.0, papers: papers() },
        S::Value { id: StandardId(1), raw: t("1.001"), value: 1.001 },
    ];
    readings.into_iter().map(Command::Readings).chain(standards.into_iter().map(Command::Standards)).collect()
}

fn rest() -> Vec<Command> {
    let line = ColumnSpec::plain(Family::Polynomial(1));
    let signed = Signed {
        name: t("M. Orrin"),
        meaning: t("performed"),
        at: at(50),
        fingerprint: t("7F3A 91C0"),
        trail: t("00"),
    };
    vec![
        Command::Columns(C::Show(vec![line.clone(), ColumnSpec::plain(Family::Log)])),
        Command::Columns(C::Declare(Declared { formula: t("0.4*x"), origin: t("nominal") })),
        Command::Columns(C::Choose(line)),
        Command::Columns(C::Withdraw),
        Command::Record(RecordCommand::NotApplicable(t("customer"))),
        Command::Record(RecordCommand::MarkRead(t("few_zeros"))),
        Command::Record(RecordCommand::Signed(signed)),
        Command::TakeBack,
        Command::PutBack,
    ]
}

fn every_kind() -> Vec<Command> {
    let mut all = plan();
    all.extend(data());
    all.extend(rest());
    all.extend(about());
    all
}

#[test]
fn every_kind_of_entry_is_a_sentence_without_traces_of_program_text() {
    let acts: Vec<Act> = (0..).zip(every_kind()).map(|(n, c)| act(n, Some("as agreed"), c)).collect();
    let alone = acts.iter().map(sentence);
    let told = tell_all(&acts);
    assert_eq!(told.len(), acts.len());
    for text in alone.chain(told.iter().map(super::Told::sentence)) {
        for trace in ["{", "}", "Some(", "None", "::", "\"", "Text", "  "] {
            assert!(!text.contains(trace), "{trace:?} in {text:?}");
        }
        assert!(text.starts_with("2026-11-03 09:"), "{text}");
        assert!(text.contains("M. Orrin "), "{text}");
        assert!(text.ends_with(" Reason: as agreed."), "{text}");
    }
}

#[test]
fn old_and_new_stand_side_by_side() {
    let why = Some("misread");
    let set = |f| Command::Plan(PlanCommand::Set(f));
    let acts = vec![
        act(0, None, set(P::Input(Quantity::new("tension", "kN")))),
        act(1, None, set(P::Output(Quantity::new("bridge output", "mV/V")))),
        act(2, None, set(P::Method(t("SW-12 rev 3")))),
        act(3, None, set(P::Method(t("SW-12 rev 4")))),
        act(4, None, Command::Readings(R::Add(vec![reading("1", "0.402"), reading("2", "0.81")]))),
        act(5, None, data().remove(4)),
        act(6, why, Command::Readings(R::SetAside(ReadingId(2)))),
        act(7, None, Command::TakeBack),
        act(8, None, Command::PutBack),
        act(9, why, set(P::Interval(Some((0.25, 5.0))))),
        act(10, None, Command::Readings(R::Add(vec![NewReading::new(What::Nothing(None), "0.002", 0.002)]))),
    ];
    let told: Vec<String> = tell_all(&acts).into_iter().map(|t| t.did).collect();
    assert_eq!(
        told,
        [
            "changed the input from value to tension, kN",
            "changed the output from reading to bridge output, mV/V",
            "set the method to SW-12 rev 3",
            "changed the method from SW-12 rev 3 to SW-12 rev 4",
            "added 2 readings (1 to 2): 0.402 mV/V at 1 kN … 0.81 mV/V at 2 kN",
            "corrected reading 1 from 0.402 to 0.420 mV/V: typed wrong",
            "set reading 2 aside (0.81 mV/V at 2 kN)",
            "took back: set reading 2 aside",
            "put back: set reading 2 aside",
            "set the measuring interval to 0.25 … 5 kN, after the first reading",
            "added zero reading 3: 0.002 mV/V",
        ]
    );
    let whole = sentence(&acts[6]);
    assert_eq!(whole, "2026-11-03 09:06 (+01:00), M. Orrin set reading 2 aside. Reason: misread.");
}

#[test]
fn a_growing_trail_is_told_on_and_another_one_anew() {
    let acts: Vec<Act> = (0..)
        .zip([("1", "0.4"), ("2", "0.8"), ("3", "1.2")])
        .map(|(n, (x, y))| act(n, None, Command::Readings(R::Add(vec![reading(x, y)]))))
        .collect();
    let mut teller = super::Teller::default();
    teller.follow(&acts[..1]);
    teller.follow(&acts);
    assert_eq!(teller.told(), tell_all(&acts));
    teller.follow(&acts[1..]);
    assert_eq!(teller.told(), tell_all(&acts[1..]));
    teller.follow(&[]);
    assert!(teller.told().is_empty());
}

#[test]
fn a_text_of_many_lines_stays_one_sentence() {
    let text = sentence(&act(0, Some("first\nsecond."), Command::About(A::Number(t(" A\n1 ")))));
    assert_eq!(text, "2026-11-03 09:00 (+01:00), M. Orrin set the number of the record to A 1. Reason: first second.");
}
