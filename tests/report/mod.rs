//! The report at length: many readings, some set aside, some taken back; figures that agree everywhere.

use assize::{
    rooms::{View, compare},
    theme,
};
use assize_core::{
    exchange::{
        fit_json,
        report::{
            self,
            content::{self, Source},
            issue::{Issue, RENDERER, Signer},
            kit::{self, Attachment, Block, MarkShape, Plot, Relationship},
        },
        verify::{Answer, NotChecked, verify},
    },
    model::Family,
    numerics::streams::Stream,
    project::{
        columns::ColumnSpec,
        command::{
            AboutCommand, Act, ColumnsCommand, Command, ItemField, NewReading, PlanCommand, PlanField, ReadingsCommand,
            What,
        },
        evaluate::{Evaluation, evaluate},
        plan::Quantity,
    },
    quantity::{Moment, Text},
    readings::{Applied, ReadingId},
    record::{SignatureRequest, SigningKey, inspect_pdf, sign_pdf},
    trail::Document,
};
use egui_kittest::{Harness, kittest::Queryable};

fn moment() -> Moment {
    "2026-11-03T09:12:00+00:00".parse().expect("a moment")
}

fn enter(document: &mut Document, because: Option<&str>, command: Command) {
    let act = Act { by: Text::from("A. Person"), at: moment(), because: because.map(Text::from), command };
    document.enter(act).expect("an accepted entry");
}

fn add(document: &mut Document, rows: Vec<NewReading>) {
    enter(document, None, Command::Readings(ReadingsCommand::Add(rows)));
}

/// Awkward numbers: tiny outputs, large inputs, a negative intercept.
fn long() -> Document {
    let mut noise = Stream::new(11, 1);
    let mut document = Document::default();
    let set = |field| Command::Plan(PlanCommand::Set(field));
    enter(&mut document, None, set(PlanField::Input(Quantity::new("load", "N"))));
    enter(&mut document, None, set(PlanField::Output(Quantity::new("deflection", "mm"))));
    enter(&mut document, None, Command::About(AboutCommand::Number(Text::from("LONG-1"))));
    enter(&mut document, None, Command::About(AboutCommand::Item(ItemField::Identity, Text::from("LC-1"))));
    let row = |x: f64, noise: &mut Stream| {
        let y = -3.2e-4 + 1.07e-7 * x - 2.1e-14 * x * x + 4e-7 * noise.normal();
        NewReading::new(What::Standard(Text::from(x.to_string()), x), &format!("{y:.9}"), y)
    };
    let rows: Vec<NewReading> = (0..240).map(|i| row(12_500.0 * f64::from(1 + i % 24), &mut noise)).collect();
    add(&mut document, rows);
    for wrong in 0..2 {
        add(&mut document, vec![row(777_000.0 + f64::from(wrong), &mut noise)]);
    }
    enter(&mut document, None, Command::TakeBack);
    enter(&mut document, None, Command::TakeBack);
    for (id, why) in [(7, "cable touched"), (99, "frame knocked"), (211, "not settled")] {
        enter(&mut document, Some(why), Command::Readings(ReadingsCommand::SetAside(ReadingId(id))));
    }
    let zeros = (0..9)
        .map(|_| -3.2e-4 + 4e-7 * noise.normal())
        .map(|y| NewReading::new(What::Nothing(None), &format!("{y:.9}"), y));
    add(&mut document, zeros.collect());
    let spec = ColumnSpec::plain(Family::Polynomial(2));
    enter(&mut document, Some("only scatter is left"), Command::Columns(ColumnsCommand::Choose(spec)));
    document
}

fn issue() -> Issue {
    Issue { renderer: RENDERER, program: "test".to_owned(), at: moment(), signer: None }
}

fn text_of(pdf: &[u8]) -> Vec<String> {
    inspect_pdf(pdf).pages_text
}

/// Text with every run of space as one.
fn squeezed(text: &str) -> String {
    text.split_whitespace().collect::<Vec<_>>().join(" ")
}

#[test]
fn a_long_record_prints_every_reading() {
    let document = long();
    let evaluation = evaluate(document.project());
    let rendered = report::pages(&document, &evaluation, &issue()).expect("pages");
    let pages = text_of(&rendered.pdf);
    assert!(rendered.pages >= 5 && pages.len() == rendered.pages, "{} pages", rendered.pages);
    let whole = squeezed(&pages.join(" "));
    for reading in document.project().readings.iter() {
        assert!(
            whole.contains(&reading.raw.replace('-', "−")) || whole.contains(&*reading.raw),
            "reading {}",
            reading.id.0
        );
    }
    for words in ["cable touched", "frame knocked", "not settled", "Readings set aside: 3.", "Readings taken back: 2."]
    {
        assert!(whole.contains(words), "{words}");
    }
    let heads = pages.iter().filter(|p| squeezed(p).contains("read-back error")).count();
    assert!(heads >= 4, "the head of the table stands on {heads} pages");
    for (n, page) in (1..).zip(&pages) {
        let numbered = format!("page {n} of {}", rendered.pages);
        assert!(squeezed(page).contains(&numbered), "{numbered}");
        assert!(page.contains("LONG-1"), "the number stands on page {n}");
    }
    assert!(squeezed(pages.last().expect("a page")).contains("End of record LONG-1"));
}

#[test]
fn a_signed_long_record_recomputes() {
    let document = long();
    let evaluation = evaluate(document.project());
    let key = SigningKey::create("A. Person", moment().timestamp(), &[9; 48]).expect("a key");
    let pdf = report::signed(&document, &evaluation, &issue(), &key, "performed").expect("a signed report");
    let found = verify(&pdf, &[key.fingerprint().hex()]).expect("a report");
    assert_eq!((found.answer, found.figures_differing.len()), (Answer::UnalteredKnown, 0), "{:?}", found.problems);
    assert!(found.figures_checked > 900, "{}", found.figures_checked);
}

/// A figure repainted and signed again by somebody else is named; it is no matter of the signature.
#[test]
fn a_repainted_figure_is_named() {
    let document = long();
    let evaluation = evaluate(document.project());
    let other = {
        let mut other = document.clone();
        let raw = Text::from("0.000999999");
        let slip = assize_core::readings::Slip::TypedWrong;
        enter(
            &mut other,
            None,
            Command::Readings(ReadingsCommand::Correct { id: ReadingId(5), raw, value: 0.000_999_999, slip }),
        );
        other
    };
    // Pages of one record, carrying another one.
    let key = SigningKey::create("Somebody Else", moment().timestamp(), &[5; 48]).expect("a key");
    let mixed = pages_carrying(&document, &evaluation, &other, &key);
    let found = verify(&mixed, &[]).expect("a report");
    assert_eq!(found.answer, Answer::DoesNotRecompute, "{:?}", found.problems);
    assert!(!found.figures_differing.is_empty());
}

/// What the plots are given to draw is the data; that drawn points land where they are given is the typesetter's own test.
#[test]
fn plots_hold_every_reading_where_it_is() {
    let document = long();
    let (project, evaluation, issue) = (document.project(), evaluate(document.project()), issue());
    let source = Source { document: &document, evaluation: &evaluation, issue: &issue };
    let blocks = content::compose(&source, Vec::new()).blocks;
    let plots: Vec<Plot> = blocks
        .into_iter()
        .filter_map(|b| if let Block::Plots(plots) = b { Some(plots) } else { None })
        .flatten()
        .collect();
    let fit = &evaluation.speaking_column().and_then(|c| c.outcome.as_ref().ok()).expect("chosen").fit;
    assert_eq!(plots.len(), 3, "curve, residuals, near zero");
    assert_eq!(plots[0].marks.len(), project.readings.len());
    for (n, reading) in project.readings.iter().enumerate() {
        let x = match reading.applied {
            Applied::Standard(id) => project.standard(id).expect("its standard").value,
            Applied::Nothing { .. } => 0.0,
        };
        let residual = reading.value - fit.curve.value(x);
        let (curve, residuals) = (&plots[0].marks[n], &plots[1].marks[n]);
        assert_eq!([curve.x, curve.y, residuals.x, residuals.y], [x, reading.value, x, residual], "reading {}", n + 1);
        assert_eq!(curve.shape == MarkShape::CrossedOut, reading.set_aside.is_some());
    }
    let line = &plots[0].lines[0].points;
    assert!(line.len() > 100 && line.iter().all(|p| p[1].total_cmp(&fit.curve.value(p[0])).is_eq()));
}

/// A report whose signature was cut off is altered, not a draft.
#[test]
fn a_report_without_its_signature_is_altered() {
    let document = long();
    let evaluation = evaluate(document.project());
    let key = SigningKey::create("A. Person", moment().timestamp(), &[9; 48]).expect("a key");
    let signer =
        Signer { name: key.name(), meaning: "performed".to_owned(), fingerprint: key.fingerprint().to_string() };
    let bare = report::pages(&document, &evaluation, &Issue { signer: Some(signer), ..issue() }).expect("pages").pdf;
    assert_eq!(verify(&bare, &[]).expect("an answer").answer, Answer::Altered);
    let draft = report::pages(&document, &evaluation, &issue()).expect("pages").pdf;
    assert_eq!(verify(&draft, &[]), Err(NotChecked::Unsigned));
}

/// The pages of one record with the attachments of another, properly signed.
fn pages_carrying(shown: &Document, evaluation: &Evaluation, carried: &Document, key: &SigningKey) -> Vec<u8> {
    let signer =
        Signer { name: key.name(), meaning: "performed".to_owned(), fingerprint: key.fingerprint().to_string() };
    let issue = Issue { signer: Some(signer), ..issue() };
    let other = report::pages(carried, &evaluate(carried.project()), &issue).expect("pages").pdf;
    let attachments = inspect_pdf(&other).attachments.into_iter().map(|a| Attachment {
        name: a.name,
        mime: "text/plain".to_owned(),
        description: "carried".to_owned(),
        relationship: Relationship::Data,
        modified: moment().timestamp(),
        data: a.bytes,
    });
    let source = Source { document: shown, evaluation, issue: &issue };
    let rendered = kit::render(&content::compose(&source, attachments.collect())).expect("pages");
    let place = &rendered.boxes[0];
    let request = SignatureRequest {
        name: key.name(),
        meaning: "performed".to_owned(),
        signed_at: moment().timestamp(),
        page_index: place.page_index,
        rect: place.rect,
        field_name: "signature1".to_owned(),
    };
    sign_pdf(&rendered.pdf, key, &request).expect("a signature")
}

/// Window, command line and report show the same texts of the same figures.
#[test]
fn three_presentations_show_one_figure() {
    let document = long();
    let evaluation = evaluate(document.project());
    let json = fit_json::document(document.project(), &evaluation);
    let pdf = report::pages(&document, &evaluation, &issue()).expect("pages").pdf;
    let printed = squeezed(&text_of(&pdf).join(" "));
    let chosen = evaluation.chosen.expect("a choice");
    for (index, column) in evaluation.columns.iter().enumerate() {
        for figure in &column.figures {
            assert_eq!(json["fits"][index]["figures"][&figure.key], figure.shown(), "{}", figure.key);
            let in_report =
                ["residual_sd", "worst_read_back", "left_out", "lack_of_fit", "detection_limit", "degrees_of_freedom"];
            if index == chosen && in_report.contains(&figure.key.as_str()) {
                assert!(
                    printed.contains(&squeezed(&figure.shown())),
                    "{}: {} is not printed",
                    figure.key,
                    figure.shown()
                );
            }
        }
    }
    window_shows(&document, &evaluation);
}

fn window_shows(document: &Document, evaluation: &Evaluation) {
    let mut state = compare::State::default();
    let mut harness = Harness::builder().with_size([1440.0, 900.0]).build_ui(|ui| {
        theme::install(ui.ctx());
        let view = View { project: document.project(), document, evaluation, revision: 1, file: None };
        compare::show(ui, &view, &mut state, &mut Vec::new());
    });
    harness.run();
    for column in evaluation.columns.iter().filter(|c| c.outcome.is_ok()) {
        for key in ["residual_sd", "worst_read_back", "detection_limit"] {
            let figure = column.figures.iter().find(|f| f.key == key).expect("this figure");
            let shown = figure.shown();
            let said = harness.query_all_by_label_contains(&shown).count();
            assert!(said > 0, "{} {key}: nothing in the window says {shown:?}", column.head);
        }
    }
}
