//! The main flow in a window without a screen, by the names a screen reader says.

use super::{App, Surroundings};
use crate::{headless::Start, rooms::Room, theme};
use assize_core::{quantity::Moment, trail::Document};
use eframe::egui::{Event, Key, Modifiers, accesskit::Role};
use egui_kittest::{
    Harness,
    kittest::{NodeT, Queryable},
};
use tempfile::TempDir;

fn noon() -> Moment {
    "2026-11-03T12:00:00.000+01:00".parse().unwrap()
}

/// A window over an empty folder.
struct Window {
    harness: Harness<'static, App>,
    folder: TempDir,
}

impl Window {
    /// A new project of one's own; the demonstration of the first start is left aside.
    fn new() -> Self {
        let mut window = Self::first_start([1440.0, 900.0]);
        window.harness.key_press(Key::N);
        window.settle();
        window
    }

    fn first_start(size: [f32; 2]) -> Self {
        let folder = tempfile::tempdir().unwrap();
        let around = Surroundings {
            config: folder.path().join("config"),
            data: folder.path().join("data"),
            clock: noon,
            account: Some("M. Orrin".to_owned()),
            diary: false,
        };
        let harness = Harness::builder()
            .with_size(size)
            .with_context_setup(theme::install)
            .build_eframe(move |creation| App::new(&creation.egui_ctx, around.clone(), &Start::Last));
        Self { harness, folder }
    }

    fn app(&self) -> &App {
        self.harness.state()
    }

    /// Lets the window come to rest; pages being drawn in the background may ask for more frames.
    fn settle(&mut self) {
        self.harness.run_ok();
    }

    fn key(&mut self, key: Key) {
        self.harness.key_press(key);
        self.settle();
    }

    fn keys(&mut self, modifiers: Modifiers, key: Key) {
        self.harness.key_press_modifiers(modifiers, key);
        self.settle();
    }

    fn type_text(&mut self, text: &str) {
        for character in text.chars() {
            self.harness.event(Event::Text(character.to_string()));
            self.settle();
        }
    }

    fn paste(&mut self, text: &str) {
        self.harness.event(Event::Paste(text.to_owned()));
        self.settle();
    }

    fn click(&mut self, name: &str) {
        self.harness.get_by_label(name).click();
        self.settle();
    }

    /// Gives the keyboard to the table of readings, its cursor in the entry row.
    fn enter_the_table(&mut self) {
        let rows = self.app().session().project().readings.iter().filter(|r| !r.is_zero()).count();
        let name = format!("R{} Standard", rows + 1);
        let cell = self.harness.query_all_by_label(&name).next().expect("the entry row");
        cell.click();
        self.settle();
    }

    /// Whether anything in the window says so.
    fn says(&self, text: &str) -> bool {
        self.harness.query_all_by_label_contains(text).count() > 0
    }

    fn on_disk(&self) -> Document {
        let bytes = std::fs::read(self.app().session().shelf().path()).unwrap();
        Document::from_bytes(&bytes).unwrap().0
    }
}

const SIX: &str = "0.5\t0.2021\n1\t0.4002\n2\t0.7921\n3\t1.1785\n4\t1.5589\n5\t1.9352\n";

#[test]
fn from_a_paste_to_three_fits_in_a_handful_of_keys() {
    let mut window = Window::new();
    assert!(window.says("Paste two columns"), "an empty project says what to do");
    window.paste(SIX);
    assert!(window.says("Who is at the bench?"), "only a name is asked for");
    window.key(Key::Enter);
    assert_eq!(window.app().room(), Room::Compare);
    let evaluation = window.app().session().evaluation();
    let fits = evaluation.columns.iter().filter(|c| c.outcome.is_ok()).count();
    assert_eq!(fits, 3);
    assert!(window.says("Compare, 3 fits"));
    assert_eq!(window.on_disk().project(), window.app().session().document().project());
}

#[test]
fn a_reading_is_typed_corrected_set_aside_and_taken_back() {
    let mut window = Window::new();
    window.enter_the_table();
    window.type_text("1");
    window.key(Key::Tab);
    window.type_text("0,42");
    window.key(Key::Enter);
    assert!(window.says("Who is at the bench?"));
    window.key(Key::Enter);
    let raw = |w: &Window, n: usize| w.app().session().project().readings[n].raw.to_string();
    assert_eq!(raw(&window, 0), "0,42");
    assert!(window.says("all on disk 12:00:00"));

    // The table has the keyboard again and the standard repeats: only the reading is typed.
    window.type_text("0.402");
    window.key(Key::Enter);
    assert_eq!(window.app().session().project().standards.len(), 1);
    assert_eq!(window.app().session().project().readings.len(), 2);

    // Corrected with one key for the reason; the old value stays.
    window.click("R1 Reading");
    window.key(Key::F2);
    for _ in 0..4 {
        window.key(Key::Backspace);
    }
    window.type_text("0.401");
    window.key(Key::Enter);
    assert!(window.says("Correct reading 1 from 0,42 to 0.401?"));
    window.type_text("1");
    assert_eq!(raw(&window, 0), "0.401");
    assert_eq!(&*window.app().session().project().readings[0].corrections[0].raw, "0,42");

    // Set aside: the row stays, and says why.
    window.click("R2 Reading");
    window.type_text("x");
    assert!(window.says("Set reading 2 aside?"));
    window.type_text("1");
    let aside = window.app().session().project().readings[1].set_aside.clone();
    assert_eq!(aside.as_deref(), Some("not settled"));
    assert!(window.says("2 readings, 1 set aside"));

    // Taken back and put back, visibly.
    window.keys(Modifiers::COMMAND, Key::Z);
    assert_eq!(window.app().session().project().readings[1].set_aside, None);
    window.keys(Modifiers::COMMAND, Key::Y);
    assert!(window.app().session().project().readings[1].set_aside.is_some());
    assert_eq!(window.app().room(), Room::Bench);
    assert_eq!(window.on_disk().acts(), window.app().session().document().acts());
}

#[test]
fn a_plan_that_is_fixed_asks_for_a_reason_and_nothing_is_lost_on_cancel() {
    let mut window = Window::new();
    window.paste(SIX);
    window.key(Key::Enter);
    window.keys(Modifiers::COMMAND, Key::Num1);
    assert!(window.says("Fixed since 2026-11-03 12:00"));
    window.click("Method, revision");
    window.type_text("SW-12 rev 4");
    window.key(Key::Enter);
    assert!(window.says("Change the plan after the first reading?"));
    window.key(Key::Escape);
    assert_eq!(window.app().session().project().plan.method, None);
    window.click("Method, revision");
    window.type_text("SW-12 rev 4");
    window.key(Key::Enter);
    window.type_text("named too late");
    window.key(Key::Enter);
    assert_eq!(window.app().session().project().plan.method.as_deref(), Some("SW-12 rev 4"));
    let last = window.app().session().document().acts().last().unwrap().clone();
    assert_eq!(last.because.as_deref(), Some("named too late"));
}

#[test]
fn what_cannot_be_pasted_is_told_and_nothing_is_entered() {
    let mut window = Window::new();
    window.paste("1\t0.4\n2\tabc\n");
    assert!(window.says("Nothing was pasted"));
    assert!(window.app().session().document().acts().is_empty());
}

#[test]
fn a_typed_row_comes_back_when_no_name_is_given() {
    let mut window = Window::new();
    window.enter_the_table();
    window.type_text("1");
    window.key(Key::Tab);
    window.type_text("0.4");
    window.key(Key::Enter);
    window.click("Not now");
    assert!(window.app().session().project().readings.is_empty());
    let cell = window.harness.query_all_by_label("R1 Reading").next().unwrap();
    assert_eq!(cell.accesskit_node().value().as_deref(), Some("0.4"));
}

#[test]
fn the_demonstration_opens_once_and_its_ribbon_leads_out() {
    let window = Window::first_start([1440.0, 900.0]);
    assert!(window.app().session().shelf().path().starts_with(window.folder.path()));
    assert!(!window.app().session().project().readings.is_empty());
    assert!(window.says("Start my own (N)"));
    assert_eq!(window.app().room(), Room::Compare);
}

#[test]
fn every_room_stands_in_every_size_and_theme() {
    for size in [[1440.0, 900.0], [1366.0, 768.0], [911.0, 512.0]] {
        let mut window = Window::first_start(size);
        for key in [Key::Num1, Key::Num2, Key::Num3, Key::Num4] {
            window.keys(Modifiers::COMMAND, key);
            window.keys(Modifiers::COMMAND, Key::L);
            for room in Room::ALL {
                assert!(window.says(room.name()), "{} at {size:?}", room.name());
            }
        }
    }
}

#[test]
fn a_command_is_found_by_a_word() {
    let mut window = Window::new();
    window.keys(Modifiers::COMMAND, Key::K);
    window.type_text("plan");
    window.key(Key::Enter);
    assert_eq!(window.app().room(), Room::Plan);
    assert_eq!(window.harness.query_all_by_role(Role::Dialog).count(), 0);
}

impl Window {
    /// Waits for work off the window's thread, at most a minute.
    fn wait_for(&mut self, what: &str) {
        for _ in 0..1200 {
            self.settle();
            if self.says(what) {
                return;
            }
            std::thread::sleep(std::time::Duration::from_millis(50));
        }
        panic!("{what:?} was not said within a minute");
    }

    fn fill(&mut self, field: &str, text: &str) {
        self.click(field);
        self.harness.key_press_modifiers(Modifiers::COMMAND, Key::A);
        self.harness.event(Event::Text(text.to_owned()));
        self.settle();
        self.key(Key::Tab);
    }
}

#[test]
fn a_record_is_completed_signed_and_checked() {
    let mut window = Window::new();
    window.keys(Modifiers::COMMAND, Key::Num1);
    window.fill("Number of the record", "ST-1");
    window.key(Key::Enter);
    for (field, text) in [("Identity", "TL-07"), ("Input", "tension"), ("Input unit", "kN")] {
        window.fill(field, text);
    }
    window.keys(Modifiers::COMMAND, Key::Num3);
    window.paste(SIX);
    let line = assize_core::project::columns::ColumnSpec::plain(assize_core::model::Family::Polynomial(2));
    let choose = assize_core::project::command::ColumnsCommand::Choose(line);
    let command = assize_core::project::command::Command::Columns(choose);
    let because = Some("the simplest that leaves only scatter".into());
    window.harness.state_mut().waiting.push_back(crate::rooms::Wish::Enter { command, because });
    window.keys(Modifiers::COMMAND, Key::Num4);
    assert!(!window.says("Before it can be signed"), "nothing is missing");

    let key = window.folder.path().join("key.p12").display().to_string();
    window.click("Make a new key…");
    for (field, text) in
        [("Printed name", "M. Orrin"), ("Passphrase", "a long one"), ("Passphrase again", "a long one")]
    {
        window.fill(field, text);
    }
    window.fill("File of the new key", &key);
    window.click("Make the key");
    window.wait_for("Key of M. Orrin made");
    window.fill("Passphrase of the key", "a wrong one");
    window.click("Sign as performed and save");
    window.wait_for("Not done");
    assert!(window.app().session().project().signatures.is_empty());

    window.fill("Passphrase of the key", "a long one");
    window.click("Sign as performed and save");
    window.wait_for("Signed:");
    assert_eq!(window.app().session().project().signatures.len(), 1);
    let pdf = window.app().session().shelf().path().with_extension("pdf");
    assert!(pdf.is_file());
    window.fill("A signed report", &pdf.display().to_string());
    window.click("Check it");
    window.wait_for("Unaltered since it was signed, by a key that is known here");

    let mut bytes = std::fs::read(&pdf).unwrap();
    let middle = bytes.len() / 2;
    bytes[middle] ^= 1;
    let altered = window.folder.path().join("altered.pdf");
    std::fs::write(&altered, bytes).unwrap();
    window.fill("A signed report", &altered.display().to_string());
    window.click("Check it");
    window.wait_for("Altered: this file is not as it was signed");
}

#[test]
fn columns_are_picked_by_keys_and_say_when_a_function_is_of_use() {
    let mut window = Window::new();
    window.paste(SIX);
    window.key(Key::Enter);
    window.keys(Modifiers::COMMAND, Key::M);
    assert!(window.says("Columns to compare") && window.says("Function of column 3: Logarithm"));
    window.click("Add a column");
    assert!(window.says("Function of column 4: Cubic") && window.says("Weights of column 4: equal weights"));
    let guide = assize_core::model::Family::Polynomial(3).guide();
    assert!(window.says(&guide.when[..30]) && window.says(&guide.wrong[..30]));
    window.click("Remove column 3");
    window.click("Show these");
    let columns = &window.app().session().evaluation().columns;
    let heads: Vec<&str> = columns.iter().map(|c| c.head.as_str()).collect();
    assert_eq!(heads, ["Line", "Quadratic", "Cubic"]);
    assert_eq!(window.on_disk().project(), window.app().session().document().project());
}
