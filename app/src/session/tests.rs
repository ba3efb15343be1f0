use super::{OpenError, Session, Shelf, open, practice_copy, shelf::name_for};
use crate::platform::{self, PlatformError};
use assize_core::{
    project::{
        about::Kind,
        command::{AboutCommand, Command, NewReading, PlanCommand, PlanField, ReadingsCommand, What},
    },
    quantity::Moment,
    trail::{Document, FileProblem},
};
use std::{fs, path::Path};

fn noon() -> Moment {
    "2026-11-03T12:00:00.000+01:00".parse().unwrap()
}

fn reading(x: f64, y: f64) -> Command {
    let what = What::Standard(x.to_string().as_str().into(), x);
    let row = NewReading::new(what, &y.to_string(), y);
    Command::Readings(ReadingsCommand::Add(vec![row]))
}

fn begun(path: &Path) -> Session {
    let mut session = Session::begin(Shelf::planned(path.to_owned()), noon);
    session.sit_down("M. Orrin").unwrap();
    session
}

fn on_disk(path: &Path) -> Document {
    let (document, torn) = Document::from_bytes(&fs::read(path).unwrap()).unwrap();
    assert_eq!(torn, None);
    document
}

#[test]
fn a_new_project_has_its_file_from_the_first_entry_on() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("projects").join(name_for(noon()));
    assert!(path.ends_with("2026-11-03 12-00-00.assize"));
    let mut session = Session::begin(Shelf::planned(path.clone()), noon);
    assert!(!platform::exists(&path), "nothing was entered yet");
    session.sit_down(" M. Orrin ").unwrap();
    session.enter(reading(1.0, 0.4), None).unwrap();
    assert_eq!(on_disk(&path).project(), session.document().project());
    assert_eq!(session.newly_on_disk(), 1..=2);
    assert!(session.newly_on_disk().is_empty(), "each entry is told once");
    assert_eq!(session.shelf().synced(), Some(noon()));
    assert_eq!(session.revision(), 2);
}

#[test]
fn nothing_is_entered_without_a_name() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("a.assize");
    let mut session = Session::begin(Shelf::planned(path.clone()), noon);
    assert!(session.enter(reading(1.0, 0.4), None).is_err());
    assert!(session.sit_down("  ").is_err());
    assert!(!platform::exists(&path));
}

#[test]
fn an_entry_that_cannot_be_written_stays_and_goes_first_the_next_time() {
    let folder = tempfile::tempdir().unwrap();
    let blocked = folder.path().join("blocked");
    fs::write(&blocked, b"a file where a folder should be").unwrap();
    let path = blocked.join("a.assize");
    let mut session = begun(&path);
    session.enter(reading(1.0, 0.4), None).unwrap();
    assert_eq!(session.project().readings.len(), 1, "the entry counts");
    let failure = session.shelf().failure().unwrap().to_owned();
    assert!(failure.contains("blocked"), "{failure}");
    assert!(session.newly_on_disk().is_empty());

    fs::remove_file(&blocked).unwrap();
    session.enter(reading(2.0, 0.8), None).unwrap();
    assert_eq!(session.shelf().failure(), None);
    assert_eq!(session.newly_on_disk(), 1..=3);
    assert_eq!(on_disk(&path).acts(), session.document().acts());
}

#[test]
fn a_second_window_is_refused_and_says_so() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("a.assize");
    let session = begun(&path);
    let second = open(&path, folder.path(), noon).err().unwrap();
    assert!(matches!(second, OpenError::Platform(PlatformError::InUse { .. })), "{second}");
    assert!(!second.hint().is_empty());
    drop(session);
    assert!(open(&path, folder.path(), noon).is_ok());
}

#[test]
fn an_end_cut_short_is_told_before_the_file_is_touched() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("a.assize");
    let mut session = begun(&path);
    session.enter(reading(1.0, 0.4), None).unwrap();
    drop(session);
    let whole = fs::read(&path).unwrap();
    let cut = whole.len() - 30;
    fs::write(&path, &whole[..cut]).unwrap();

    let mut again = open(&path, folder.path(), noon).unwrap().session;
    let torn = again.shelf().torn().unwrap().clone();
    assert!(torn.sentence().contains("had not been acknowledged"));
    assert_eq!(fs::read(&path).unwrap(), &whole[..cut], "told first");
    again.sit_down("M. Orrin").unwrap();
    again.enter(reading(1.0, 0.4), None).unwrap();
    assert!(again.shelf().failure().is_some(), "nothing goes behind a torn end");
    again.drop_torn().unwrap();
    assert_eq!(again.shelf().failure(), None, "what waited was written");
    assert_eq!(on_disk(&path).acts(), again.document().acts());
}

#[test]
fn a_changed_file_is_not_opened_and_not_touched() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("a.assize");
    drop(begun(&path));
    let changed = fs::read_to_string(&path).unwrap().replace("M. Orrin", "N. Orrin");
    fs::write(&path, &changed).unwrap();
    let error = open(&path, folder.path(), noon).err().unwrap();
    let content = matches!(&error, OpenError::Content { problem: FileProblem::Changed { line: 2 }, .. });
    assert!(content, "{error}");
    assert!(error.to_string().contains("line 2"), "{error}");
    assert_eq!(fs::read_to_string(&path).unwrap(), changed);
}

#[test]
fn a_copy_is_the_whole_project_and_never_the_file_itself() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("a.assize");
    let session = begun(&path);
    let copy = folder.path().join("elsewhere/b.assize");
    session.copy_to(&copy).unwrap();
    assert_eq!(fs::read(&copy).unwrap(), fs::read(&path).unwrap());
    assert!(session.copy_to(&path).is_err());
}

#[test]
fn a_shipped_project_is_copied_and_never_edited() {
    let folder = tempfile::tempdir().unwrap();
    let shipped = folder.path().join("demo-projects/link.assize");
    let mut maker = begun(&shipped);
    maker.enter(Command::About(AboutCommand::Kind(Kind::Practice)), None).unwrap();
    drop(maker);
    let before = fs::read(&shipped).unwrap();

    let practice = folder.path().join("practice");
    let opened = open(&shipped, &practice, noon).unwrap();
    let mut session = opened.session;
    assert!(opened.note.unwrap().contains("copy"));
    session.sit_down("A. Reader").unwrap();
    session.enter(Command::Plan(PlanCommand::Set(PlanField::Method("B".into()))), None).unwrap();
    assert_eq!(fs::read(&shipped).unwrap(), before);
    assert!(session.shelf().path().starts_with(&practice));
    assert_eq!(session.project().kind, Kind::Practice);

    let second = practice_copy(&before, "link.assize", &practice, noon).unwrap();
    assert_ne!(second.session.shelf().path(), session.shelf().path());
}
