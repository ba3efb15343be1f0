use super::{Document, chain, chain::FileProblem};
use crate::{
    model::Family,
    project::{
        Project,
        about::{Condition, Import, Kind},
        columns::{ColumnSpec, Declared},
        command::{
            AboutCommand, Act, ColumnsCommand, Command, ItemField, NewReading, PlanCommand, PlanField, ReadingsCommand,
            RecordCommand, Refused, StandardsCommand, What,
        },
    },
    quantity::{Moment, Text},
    readings::{ReadingId, Slip, Stage},
    standards::{StandardId, StandardPapers, StatedUncertainty},
};
use proptest::prelude::*;

fn at(second: u32) -> Moment {
    format!("2026-11-03T09:{:02}:{:02}.000+01:00", second / 60 % 60, second % 60).parse().unwrap()
}

fn act(second: u32, because: Option<&str>, command: Command) -> Act {
    Act { by: Text::from("M. Orrin"), at: at(second), because: because.map(Text::from), command }
}

fn reading(x: f64, y: f64) -> Command {
    let what = What::Standard(Text::from(x.to_string().as_str()), x);
    Command::Readings(ReadingsCommand::Add(vec![NewReading::new(what, &y.to_string(), y)]))
}

/// One act of every kind that changes what was entered; readings 1 … 3 and standard 1 exist before.
fn edits() -> Vec<(Option<&'static str>, Command)> {
    let why = Some("the display was misread");
    let papers = StandardPapers {
        identity: Some(Text::from("PR-2")),
        uncertainty: Some(StatedUncertainty::Expanded { expanded: 0.04, factor: 2.0 }),
        ..StandardPapers::default()
    };
    vec![
        (None, reading(4.0, 8.1)),
        (None, Command::Readings(ReadingsCommand::Add(vec![NewReading::new(What::Nothing(None), "0.01", 0.01)]))),
        (
            None,
            Command::Readings(ReadingsCommand::Correct {
                id: ReadingId(2),
                raw: Text::from("4.1"),
                value: 4.1,
                slip: Slip::TypedWrong,
            }),
        ),
        (why, Command::Readings(ReadingsCommand::SetAside(ReadingId(1)))),
        (
            why,
            Command::Readings(ReadingsCommand::Reapply {
                id: ReadingId(3),
                what: What::Standard(Text::from("7"), 7.0),
            }),
        ),
        (None, Command::Readings(ReadingsCommand::LetStand(ReadingId(3)))),
        (None, Command::Standards(StandardsCommand::Papers { id: StandardId(1), papers: papers.clone() })),
        (None, Command::Standards(StandardsCommand::PapersForAll(papers))),
        (why, Command::Standards(StandardsCommand::Value { id: StandardId(1), raw: Text::from("1.01"), value: 1.01 })),
        (why, Command::Plan(PlanCommand::Set(PlanField::Interval(Some((0.0, 5.0)))))),
        (why, Command::Plan(PlanCommand::Set(PlanField::Method(Text::from("SW-12 rev 4"))))),
        (None, Command::About(AboutCommand::Item(ItemField::Serial, Text::from("11482")))),
        (None, Command::About(AboutCommand::Number(Text::from("ST-2026-0142")))),
        (None, Command::Columns(ColumnsCommand::Show(vec![ColumnSpec::plain(Family::Log)]))),
        (None, Command::Columns(ColumnsCommand::Stage(Some(Stage::AsFound)))),
        (why, Command::Columns(ColumnsCommand::Choose(ColumnSpec::plain(Family::Polynomial(2))))),
        (
            None,
            Command::Readings(ReadingsCommand::Import(file(), vec![NewReading::new(What::Nothing(None), "0", 0.0)])),
        ),
        (None, Command::About(AboutCommand::Kind(Kind::Practice))),
        (None, Command::About(AboutCommand::Story(Text::from("a story")))),
        (None, Command::About(AboutCommand::AtBench { name: Text::from("B. Person"), role: None })),
        (None, Command::About(AboutCommand::ConditionsAtStart(vec![condition()]))),
        (None, Command::About(AboutCommand::ConditionsAtEnd(vec![condition()]))),
        (None, Command::Columns(ColumnsCommand::Declare(declared()))),
        (why, Command::Record(RecordCommand::NotApplicable(Text::from("number-missing")))),
        (None, Command::Record(RecordCommand::MarkRead(Text::from("shape")))),
    ]
}

fn file() -> std::sync::Arc<Import> {
    let text = Text::from;
    std::sync::Arc::new(Import { name: text("a.csv"), digest: text("00"), base64: text(""), mapping: Vec::new() })
}

fn condition() -> Condition {
    Condition { name: Text::from("temperature"), value: Text::from("20.3 °C") }
}

fn declared() -> Declared {
    Declared { formula: Text::from("2*x"), origin: Text::from("nominal") }
}

fn begun() -> Document {
    let mut document = Document::default();
    for (n, (x, y)) in (0..).zip([(1.0, 2.0), (2.0, 4.2), (3.0, 6.0)]) {
        document.enter(act(n, None, reading(x, y))).unwrap();
    }
    document
}

#[test]
fn every_kind_of_edit_is_taken_back_exactly() {
    for (why, command) in edits() {
        let mut document = begun();
        let before = Project::clone(document.project());
        document.enter(act(10, why, command.clone())).unwrap();
        let after = Project::clone(document.project());
        assert_ne!(before, after, "{command:?} changes something");
        document.enter(act(11, None, Command::TakeBack)).unwrap();
        assert_eq!(**document.project(), before, "{command:?}");
        document.enter(act(12, None, Command::PutBack)).unwrap();
        assert_eq!(**document.project(), after, "{command:?}");
    }
}

#[test]
fn the_plan_stays_fixed_when_the_first_reading_is_taken_back() {
    let mut document = Document::default();
    document.enter(act(0, None, reading(1.0, 2.0))).unwrap();
    document.enter(act(1, None, Command::TakeBack)).unwrap();
    assert_eq!(document.project().plan.fixed, Some(at(0)));
    assert!(document.project().readings.is_empty());
    let change = Command::Plan(PlanCommand::Set(PlanField::Method(Text::from("B"))));
    let refused = document.enter(act(2, None, change.clone())).unwrap_err();
    assert!(matches!(refused, Refused::PlanFixed { .. }), "{refused}");
    assert!(document.enter(act(3, Some("wrong method named"), change)).is_ok());
    let tally = document.tally();
    assert_eq!((tally.readings_taken_back, tally.plan_changes_after_fixing), (1, 1));
}

#[test]
fn refusals_change_nothing_and_say_why() {
    let mut document = begun();
    let before = document.clone();
    let cases: Vec<(Command, &str)> = vec![
        (Command::Readings(ReadingsCommand::SetAside(ReadingId(1))), "setting a reading aside needs a reason"),
        (Command::Readings(ReadingsCommand::LetStand(ReadingId(99))), "there is no reading number 99"),
        (Command::Readings(ReadingsCommand::LetStand(ReadingId(0))), "there is no reading number 0"),
        (reading(f64::INFINITY, 1.0), "a finite number is accepted"),
        (reading(1.0, f64::NAN), "finite"),
        (Command::Columns(ColumnsCommand::Show(Vec::new())), "one to six"),
        (Command::PutBack, "nothing to put back"),
    ];
    for (command, part) in cases {
        let refused = document.enter(act(20, None, command)).unwrap_err().to_string();
        assert!(refused.contains(part), "{refused:?} should say {part:?}");
        assert_eq!(document.acts().len(), before.acts().len());
        assert_eq!(document.project(), before.project());
    }
    let nobody = Act { by: Text::from(" "), ..act(21, None, reading(1.0, 1.0)) };
    assert_eq!(document.enter(nobody), Err(Refused::NobodyAtBench));
    document.enter(act(22, None, Command::About(AboutCommand::Kind(Kind::Practice)))).unwrap();
    let back = act(23, None, Command::About(AboutCommand::Kind(Kind::Record)));
    assert_eq!(document.enter(back), Err(Refused::PracticeStays));
}

fn worked() -> (Document, String) {
    let mut document = begun();
    let mut file = String::from_utf8(document.to_bytes().unwrap()).unwrap();
    for (n, (why, command)) in (30..).zip(edits()) {
        file.push_str(&document.enter(act(n, why, command)).unwrap().line);
    }
    file.push_str(&document.enter(act(90, None, Command::TakeBack)).unwrap().line);
    (document, file)
}

#[test]
fn appended_lines_are_the_file_and_read_back_to_the_same_project() {
    let (document, file) = worked();
    assert_eq!(document.to_bytes().unwrap(), file.as_bytes());
    let (again, torn) = Document::from_bytes(file.as_bytes()).unwrap();
    assert_eq!(torn, None);
    assert_eq!(again.project(), document.project());
    assert_eq!(again.acts(), document.acts());
    assert_eq!(again.digest(), document.digest());
}

#[test]
fn every_changed_byte_is_reported() {
    let (document, file) = worked();
    for at in 0..file.len() {
        let mut bytes = file.clone().into_bytes();
        bytes[at] ^= 0x01;
        // Only the very last line feed cannot be told from a line cut short by a loss of power.
        match Document::from_bytes(&bytes) {
            Err(_) => {}
            Ok((read, torn)) => {
                assert!(torn.is_some(), "byte {at} changed and nothing was said");
                assert_eq!(read.acts().len() + 1, document.acts().len());
            }
        }
    }
}

#[test]
fn removed_and_moved_lines_are_reported() {
    let (_, file) = worked();
    let lines: Vec<&str> = file.lines().collect();
    let removed = [&lines[..3], &lines[4..]].concat().join("\n") + "\n";
    assert_eq!(Document::from_bytes(removed.as_bytes()).unwrap_err(), FileProblem::Changed { line: 4 });
    let mut moved = lines.clone();
    moved.swap(2, 3);
    assert_eq!(
        Document::from_bytes((moved.join("\n") + "\n").as_bytes()).unwrap_err(),
        FileProblem::Changed { line: 3 }
    );
}

#[test]
fn a_line_cut_short_is_told_from_a_changed_one() {
    let (document, file) = worked();
    let cut = file.trim_end().rfind('\n').unwrap() + 40;
    let (read, torn) = Document::from_bytes(&file.as_bytes()[..cut]).unwrap();
    assert!(torn.is_some_and(|t| t.len() == 39));
    assert_eq!(read.acts().len() + 1, document.acts().len());
}

#[test]
fn other_files_are_told_by_name() {
    assert_eq!(Document::from_bytes(b"").unwrap_err(), FileProblem::Empty);
    assert!(matches!(Document::from_bytes(b"standard,reading\n1,2\n"), Err(FileProblem::NotAProject { .. })));
    assert!(matches!(Document::from_bytes(&[0xff, 0xfe, 0]), Err(FileProblem::NotText { at: 0 })));
    let only_header = format!("{}\n", chain::HEADER);
    assert!(Document::from_bytes(only_header.as_bytes()).unwrap().0.acts().is_empty());
}

proptest! {
    /// Any sequence of edits, taken back one by one, ends at the start; the file always reads back the same.
    #[test]
    fn take_back_all_the_way(picks in proptest::collection::vec(0usize..24, 1..25)) {
        let mut document = begun();
        let start = Project::clone(document.project());
        let all = edits();
        let mut done = 0;
        for (n, pick) in (0..).zip(&picks) {
            let (why, command) = all[*pick].clone();
            done += usize::from(document.enter(act(100 + n, why, command)).is_ok());
        }
        let end = Project::clone(document.project());
        for n in 0..done { document.enter(act(200 + n as u32, None, Command::TakeBack)).unwrap(); }
        prop_assert_eq!(&**document.project(), &start);
        for n in 0..done { document.enter(act(300 + n as u32, None, Command::PutBack)).unwrap(); }
        prop_assert_eq!(&**document.project(), &end);
        let (again, _) = Document::from_bytes(&document.to_bytes().unwrap()).unwrap();
        prop_assert_eq!(again.project(), document.project());
    }
}
