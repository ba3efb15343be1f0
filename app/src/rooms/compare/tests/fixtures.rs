//! Invented instruments, and a window of any size in which the room stands.

use crate::{
    rooms::{View, Wish, compare},
    theme,
};
use assize_core::{
    model::Family,
    numerics::streams::Stream,
    project::{
        columns::ColumnSpec,
        command::{Act, ColumnsCommand, Command, NewReading, PlanCommand, PlanField, ReadingsCommand, What},
        evaluate::{Evaluation, evaluate},
        plan::{Quantity, ZeroState},
    },
    quantity::Text,
    readings::Direction,
    trail::Document,
};
use eframe::egui::{self, Vec2};
use egui_kittest::Harness;

/// What a test holds: a project, its evaluation, the room's state and what it wished for.
pub(super) struct Bench {
    pub(super) document: Document,
    pub(super) evaluation: Evaluation,
    pub(super) revision: u64,
    pub(super) state: compare::State,
    pub(super) wishes: Vec<Wish>,
}

impl Bench {
    pub(super) fn new(document: Document) -> Self {
        let evaluation = evaluate(document.project());
        Self { document, evaluation, revision: 1, state: compare::State::default(), wishes: Vec::new() }
    }
}

/// The room in a window of this size, settled.
pub(super) fn window<'a>(document: Document, size: impl Into<Vec2>) -> Harness<'a, Bench> {
    let size = size.into();
    // A step is short, so that two clicks can be a double click.
    let mut harness =
        Harness::builder().with_step_dt(0.02).with_size(size).with_context_setup(theme::install).build_ui_state(
            |ui, bench: &mut Bench| {
                let room = ui.ctx().content_rect().shrink(12.0);
                let mut inside = ui.new_child(egui::UiBuilder::new().max_rect(room));
                let view = View {
                    project: bench.document.project(),
                    document: &bench.document,
                    evaluation: &bench.evaluation,
                    revision: bench.revision,
                    file: None,
                };
                compare::show(&mut inside, &view, &mut bench.state, &mut bench.wishes);
            },
            Bench::new(document),
        );
    harness.run();
    harness
}

/// A project in the making.
pub(super) struct Making(Document);

impl Making {
    pub(super) fn new(input: (&str, &str), output: (&str, &str), zero: ZeroState) -> Self {
        Self(Document::default())
            .plan(PlanField::Input(Quantity::new(input.0, input.1)))
            .plan(PlanField::Output(Quantity::new(output.0, output.1)))
            .plan(PlanField::ZeroState(zero))
    }

    pub(super) fn enter(mut self, command: Command) -> Self {
        let at = "2026-11-03T09:12:00.000+00:00".parse().expect("a moment");
        let because = Some(Text::from("a test"));
        self.0.enter(Act { by: Text::from("M. Orrin"), at, because, command }).expect("accepted");
        self
    }

    pub(super) fn plan(self, field: PlanField) -> Self {
        self.enter(Command::Plan(PlanCommand::Set(field)))
    }

    pub(super) fn columns(self, families: &[Family]) -> Self {
        let specs = families.iter().cloned().map(ColumnSpec::plain).collect();
        self.enter(Command::Columns(ColumnsCommand::Show(specs)))
    }

    /// Rising, then falling readings; falling ones lie `lag` higher.
    pub(super) fn readings(self, levels: &[f64], f: impl Fn(f64) -> f64, (sd, lag): (f64, f64)) -> Self {
        let mut noise = Stream::new(41, 1);
        let there = levels.iter().map(|x| (*x, Direction::Rising, 0.0));
        let back = levels.iter().rev().map(|x| (*x, Direction::Falling, lag));
        let mut order = 0;
        let mut next = |(x, direction, shift): (f64, Direction, f64)| {
            order += 1;
            let y = f(x) + shift + sd * noise.normal();
            let what = What::Standard(Text::from(format!("{x}")), x);
            NewReading { direction, order: Some(order), ..NewReading::new(what, &format!("{y:.5}"), y) }
        };
        let all = there.chain(back).map(&mut next).collect();
        self.enter(Command::Readings(ReadingsCommand::Add(all)))
    }

    pub(super) fn zeros(self, count: usize, mean: f64, sd: f64) -> Self {
        let mut noise = Stream::new(42, 1);
        let all = (0..count).map(|_| {
            let y = mean + sd * noise.normal();
            NewReading::new(What::Nothing(None), &format!("{y:.5}"), y)
        });
        let all = all.collect();
        self.enter(Command::Readings(ReadingsCommand::Add(all)))
    }

    pub(super) fn document(self) -> Document {
        self.0
    }
}

pub(super) const LINE: Family = Family::Polynomial(1);
pub(super) const QUADRATIC: Family = Family::Polynomial(2);

const PULLS: [f64; 11] = [0.25, 0.5, 1.0, 1.5, 2.0, 2.5, 3.0, 3.5, 4.0, 4.5, 5.0];

/// A tension link: slightly bent, rising from zero. The logarithm has no value at zero.
pub(super) fn link() -> Document {
    Making::new(("tension", "kN"), ("bridge output", "mV/V"), ZeroState::Zero)
        .plan(PlanField::Interval(Some((0.25, 5.0))))
        .zeros(8, 0.0026, 0.0008)
        .readings(&PULLS, |x| 0.0026 + 0.4005 * x - 0.0028 * x * x, (0.0008, 0.002))
        .document()
}

/// The same in six columns.
pub(super) fn six() -> Document {
    Making(link())
        .columns(&[LINE, QUADRATIC, Family::Log, Family::Polynomial(3), Family::Polynomial(4), Family::Polynomial(5)])
        .document()
}

/// A turbidity sensor: its output falls from zero.
pub(super) fn falling() -> Document {
    Making::new(("turbidity", "NTU"), ("voltage", "V"), ZeroState::Zero)
        .plan(PlanField::Interval(Some((5.0, 100.0))))
        .zeros(10, 4.1, 0.004)
        .readings(&[5.0, 10.0, 20.0, 40.0, 60.0, 80.0, 100.0], |x| 4.1 - 0.02 * x + 4e-5 * x * x, (0.004, 0.0))
        .document()
}

/// A load cell that pulls and pushes: zero inside the interval.
pub(super) fn both() -> Document {
    Making::new(("force", "kN"), ("bridge output", "mV/V"), ZeroState::Zero)
        .plan(PlanField::Interval(Some((-5.0, 5.0))))
        .zeros(9, 0.001, 0.001)
        .readings(&[-5.0, -3.0, -1.0, 1.0, 3.0, 5.0], |x| 0.001 + 0.4 * x, (0.001, 0.0))
        .columns(&[LINE, QUADRATIC, Family::Polynomial(3)])
        .document()
}

/// A thermometer: no state of nothing, five visits to the lowest standard.
pub(super) fn thermometer() -> Document {
    let f = |x: f64| 100.0 + 0.39 * x;
    Making::new(("temperature", "°C"), ("resistance", "Ω"), ZeroState::None)
        .readings(&[5.0, 5.0, 5.0, 20.0, 40.0, 60.0, 80.0], f, (0.003, 0.0))
        .columns(&[LINE, QUADRATIC])
        .document()
}

/// A level transmitter with a live zero.
pub(super) fn transmitter() -> Document {
    Making::new(("level", "m"), ("current", "mA"), ZeroState::LiveZero)
        .zeros(6, 4.0, 0.002)
        .readings(&[1.0, 2.0, 4.0, 6.0, 8.0, 10.0], |x| 4.0 + 1.6 * x, (0.003, 0.0))
        .columns(&[LINE, QUADRATIC])
        .document()
}

/// A photometer whose plan does not ask how small is more than nothing.
pub(super) fn not_asked() -> Document {
    Making::new(("concentration", "mg/L"), ("absorbance", "AU"), ZeroState::NotAsked)
        .readings(&[0.0, 1.0, 2.0, 4.0, 8.0], |x| 0.01 + 0.11 * x, (0.001, 0.0))
        .document()
}

/// One more zero reading.
pub(super) fn with_zero(document: Document, y: f64) -> Document {
    let reading = NewReading::new(What::Nothing(None), &format!("{y:.5}"), y);
    Making(document).enter(Command::Readings(ReadingsCommand::Add(vec![reading]))).document()
}

/// Two zeros only.
pub(super) fn two_zeros() -> Document {
    Making::new(("tension", "kN"), ("bridge output", "mV/V"), ZeroState::Zero)
        .zeros(2, 0.0026, 0.0008)
        .readings(&PULLS, |x| 0.0026 + 0.4 * x, (0.0008, 0.0))
        .document()
}

/// The link with the line chosen against the advice.
pub(super) fn chosen_line() -> Document {
    Making(link()).enter(Command::Columns(ColumnsCommand::Choose(ColumnSpec::plain(LINE)))).document()
}
