//! Every demo teaches what its story says, with the shipped seed and with twenty others.

use assize_core::{
    model::Family,
    project::{
        columns::ColumnSpec,
        evaluate::{Evaluation, NearZero, NearZeroOutcome, Severity, evaluate},
    },
};
use assize_tests::demos::{ALL, Demo, SHIPPED_SEED, named};
use std::{fs, path::Path};

/// The shipped seed and twenty others.
fn seeds() -> impl Iterator<Item = u64> {
    std::iter::once(SHIPPED_SEED).chain(1..=20)
}

/// How many of the seeds show something; chance alone may hide a lesson now and then.
fn share(file: &str, shows: impl Fn(&Evaluation) -> bool) -> usize {
    seeds()
        .filter(|&seed| {
            let demo = named(file, seed).expect("a demo of that name");
            shows(&evaluate(demo.document.project()))
        })
        .count()
}

fn advised(evaluation: &Evaluation) -> Option<Family> {
    evaluation.advice.column.as_ref().map(|c| c.family.clone())
}

fn finds(evaluation: &Evaluation, code: &str, severity: Severity) -> bool {
    evaluation.findings.iter().any(|f| f.code == code && f.severity == severity)
}

fn caption<'a>(evaluation: &'a Evaluation, family: &Family) -> &'a str {
    let column = evaluation.columns.iter().find(|c| c.spec == ColumnSpec::plain(family.clone()));
    column.map_or("", |c| c.captions.residuals.text.as_str())
}

const LINE: Family = Family::Polynomial(1);
const QUADRATIC: Family = Family::Polynomial(2);

#[test]
fn the_tension_link_bends_and_lags() {
    let bows = share("tension-link", |e| caption(e, &LINE).starts_with("bows: reads up to"));
    let quadratic = share("tension-link", |e| advised(e) == Some(QUADRATIC));
    let lags = share("tension-link", |e| finds(e, "hysteresis", Severity::Look));
    let meets = share("tension-link", |e| {
        let column = e.columns.iter().find(|c| c.spec == ColumnSpec::plain(QUADRATIC));
        column.is_some_and(|c| c.captions.near_zero.text.contains("1 in 20 missed at"))
    });
    assert_eq!((bows, quadratic >= 19, lags, meets >= 19), (21, true, 21, true), "{bows} {quadratic} {lags} {meets}");
}

#[test]
fn only_steinhart_hart_is_good_enough_for_the_thermistor() {
    let refused = |e: &Evaluation, family: &Family| {
        let column = e.columns.iter().find(|c| c.spec.family == *family);
        column.and_then(|c| c.outcome.as_ref().ok()).is_some_and(|f| f.shape.rejected())
    };
    let three = share("water-thermistor", |e| [LINE, QUADRATIC, Family::Log].iter().all(|family| refused(e, family)));
    let bead = share("water-thermistor", |e| advised(e) == Some(Family::SteinhartHart));
    assert_eq!((three, bead >= 18), (21, true), "advised in {bead} of 21");
    let change = share("water-thermistor", |e| {
        matches!(e.near_zero, NearZero::SmallestChange { .. })
            && e.columns
                .iter()
                .any(|c| matches!(&c.outcome, Ok(f) if matches!(f.near_zero, NearZeroOutcome::Change(_))))
    });
    assert_eq!(change, 21);
}

#[test]
fn the_logarithm_suits_the_light_sensor_and_has_no_zero() {
    let log = share("light-sensor", |e| advised(e) == Some(Family::Log));
    let no_zero = share("light-sensor", |e| {
        let column = e.columns.iter().find(|c| c.spec == ColumnSpec::plain(Family::Log));
        column.is_some_and(|c| c.captions.near_zero.text.contains("no zero"))
    });
    let wrong = share("light-sensor", |e| caption(e, &LINE).starts_with("wrong shape"));
    assert_eq!((log >= 18, no_zero, wrong), (true, 21, 21), "advised in {log} of 21");
}

#[test]
fn the_photometer_is_straight_with_a_funnel() {
    let line = share("nitrate-photometer", |e| advised(e) == Some(LINE));
    let funnel = share("nitrate-photometer", |e| finds(e, "spread", Severity::Look));
    assert!(line >= 16 && funnel >= 19, "line in {line}, funnel in {funnel} of 21");
}

#[test]
fn the_transmitter_is_straight_but_not_nominal() {
    let line = share("level-transmitter", |e| advised(e) == Some(LINE));
    let errors = share("level-transmitter", |e| caption(e, &Family::Declared).starts_with("errors: reads up to 0.00"));
    let folded = share("level-transmitter", |e| matches!(e.near_zero, NearZero::Band { folded: true, .. }));
    assert!(line >= 18, "line in {line} of 21");
    assert_eq!((errors, folded), (21, 21));
}

#[test]
fn the_turbidity_probe_stops_listening() {
    let deaf = share("turbidity-probe", |e| finds(e, "saturation", Severity::Look));
    let none = share("turbidity-probe", |e| advised(e).is_none());
    assert_eq!((deaf, none), (21, 21));
}

#[test]
fn the_published_load_cell_gives_the_published_verdicts() {
    // NIST/SEMATECH e-Handbook of Statistical Methods, 4.6.1.5 and 4.6.1.9: F = 214.747 (18, 20) and 0.8107 (17, 20).
    let demo = named("load-cell-nist", 0).expect("the load cell");
    let evaluation = evaluate(demo.document.project());
    let test = |family: &Family| {
        let column = evaluation.columns.iter().find(|c| c.spec.family == *family).expect("its column");
        column.outcome.as_ref().expect("fitted").lack_of_fit.expect("there are repeats")
    };
    let (line, quadratic) = (test(&LINE), test(&QUADRATIC));
    assert_eq!((line.df1, line.df2, quadratic.df1, quadratic.df2), (18, 20, 17, 20));
    assert!((line.f - 214.747).abs() < 0.0006 && (quadratic.f - 0.8107).abs() < 0.000_06, "{} {}", line.f, quadratic.f);
    assert_eq!(advised(&evaluation), Some(QUADRATIC));
    let looks: Vec<_> = evaluation.findings.iter().filter(|f| f.severity == Severity::Look).collect();
    assert!(looks.is_empty(), "the quadratic raises no warning: {looks:?}");
}

/// A strip full of findings is read by nobody.
#[test]
fn findings_stay_few() {
    for make in ALL {
        let Demo { spec, document, .. } = make(SHIPPED_SEED).build();
        let mut found = evaluate(document.project()).findings;
        found.retain(|f| f.code != "not-chosen");
        let said: Vec<_> = found.iter().map(|f| format!("{} {}: {}", f.severity, f.code, f.message)).collect();
        assert!(found.len() <= 5, "{}: {said:#?}", spec.file);
        assert!(found.iter().all(|f| f.severity != Severity::Stop), "{}: {said:#?}", spec.file);
    }
}

/// The files that are shipped are those that the makers make.
#[test]
fn shipped_files_are_current() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../demo-projects");
    let read = |name: String| fs::read_to_string(folder.join(&name)).unwrap_or_else(|e| panic!("{name}: {e}"));
    for make in ALL {
        let Demo { spec, document, csv, zeros_csv } = make(SHIPPED_SEED).build();
        let made = String::from_utf8(document.to_bytes().expect("writable")).expect("text");
        let same = read(format!("{}.assize", spec.file)) == made;
        assert!(same, "{}: run cargo demos", spec.file);
        assert!(read(format!("{}.csv", spec.file)) == csv, "{}: run cargo demos", spec.file);
        if let Some(zeros) = zeros_csv {
            assert!(read(format!("{}-zeros.csv", spec.file)) == zeros, "{}: run cargo demos", spec.file);
        }
        let lines = spec.story.lines().count();
        assert!((4..=12).contains(&lines), "{}: a story of {lines} lines", spec.file);
    }
}
