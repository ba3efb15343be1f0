//! The cursor: one movement reaches every column in the same frame, by mouse, key and number.

use super::{Window, fixtures, on_cursor, press, value};
use crate::rooms::compare::{TraceEnds, state::NearPlot};
use assize_core::project::evaluate::{FitEvaluation, near_zero::near};
use eframe::egui::{Key, Modifiers, Pos2, Shape, pos2};
use egui_kittest::kittest::Queryable;

fn fit<'a>(h: &'a Window<'_>, column: usize) -> Option<&'a FitEvaluation> {
    h.state().evaluation.columns[column].outcome.as_ref().ok().map(|e| &**e)
}

/// The value at which a curve takes a signal, by bisection between two values.
fn bisect(f: impl Fn(f64) -> f64, (mut low, mut high): (f64, f64)) -> f64 {
    for _ in 0..200 {
        let middle = 0.5 * (low + high);
        if (f(low) < 0.0) == (f(middle) < 0.0) { low = middle } else { high = middle }
    }
    0.5 * (low + high)
}

/// All read-outs and painted ends belong to the cursor where it is now; answers how many were checked.
fn check(h: &Window<'_>) -> usize {
    let bench = h.state();
    let mut checked = 0;
    for plot in &bench.state.near_plots {
        let column = plot.column;
        let head = &bench.evaluation.columns[column].head;
        let readout = &bench.state.readouts[column];
        assert_eq!(value(h, &format!("{head} traces to")), readout.traced_text);
        assert_eq!(value(h, &format!("{head} misses at most")), readout.missed_text);
        let e = fit(h, column).expect("fitted");
        if bench.evaluation.zeros.detections(&e.fit).is_err() {
            let ends = ends(h, column);
            assert_eq!((readout.traced, readout.missed, ends.circle, ends.square), (None, None, None, None));
            continue;
        }
        check_traced(h, (column, e));
        check_missed(h, (column, e));
        check_painted(h, plot, e);
        checked += 1;
    }
    checked
}

/// Traced: where the curve itself takes the signal of the cursor, found here by bisection.
fn check_traced(h: &Window<'_>, (column, e): (usize, &FitEvaluation)) {
    let (y, readout) = (h.state().state.cursor, &h.state().state.readouts[column]);
    let about = (y - e.fit.curve.value(0.0)) / e.fit.curve.derivative(0.0);
    let reach = about.abs() * 0.5 + 1e-6;
    let x = bisect(|x| e.fit.curve.value(x) - y, (about - reach, about + reach));
    let traced = readout.traced.expect("traced");
    assert!((traced - x).abs() < 1e-9 * x.abs().max(1e-3), "{column}: {traced} {x}");
    assert_eq!(readout.traced_text, near(h.state().document.project(), traced, 2));
}

/// Missed: the smallest value whose miss probability is β, found here by bisection of P_miss.
fn check_missed(h: &Window<'_>, (column, e): (usize, &FitEvaluation)) {
    let bench = h.state();
    let detections = bench.evaluation.zeros.detections(&e.fit).expect("a value at zero");
    let excess = |x: f64| detections[0].miss_probability(x, bench.state.cursor) - bench.evaluation.zeros.asked.beta;
    let missed = bench.state.readouts[column].missed.expect("missed");
    if excess(0.0) <= 0.0 {
        assert_eq!(missed, 0.0);
        return;
    }
    let far = e.fit.points.iter().map(|p| p.x).fold(0.0, f64::max);
    let x = bisect(excess, (0.0, far));
    assert!((missed - x).abs() < 1e-6 * x, "{column}: {missed} {x}");
}

/// Painted: at the plot's own transform of the values.
fn check_painted(h: &Window<'_>, plot: &NearPlot, e: &FitEvaluation) {
    let (y, readout) = (h.state().state.cursor, &h.state().state.readouts[plot.column]);
    let at = |x: f64, y: f64| -> Pos2 {
        pos2(plot.transform.position_from_point_x(x), plot.transform.position_from_point_y(y))
    };
    let near_to = |a: Option<Pos2>, b: Pos2| a.is_some_and(|a| a.distance(b) < 0.05);
    let ends = ends(h, plot.column);
    let (traced, missed) = (readout.traced.expect("traced"), readout.missed.expect("missed"));
    assert!(near_to(ends.circle, at(traced, y)), "{ends:?}");
    assert!(near_to(ends.foot, pos2(at(traced, y).x, plot.transform.frame().bottom())), "{ends:?}");
    assert!(near_to(ends.square, at(missed, e.fit.curve.value(missed))), "{ends:?}");
}

fn ends(h: &Window<'_>, column: usize) -> TraceEnds {
    *h.state().state.painted.iter().find(|e| e.column == column).expect("painted")
}

/// Whether an open circle was really painted at a place.
fn circle_painted(h: &Window<'_>, at: Pos2) -> bool {
    h.output().shapes.iter().any(|clipped| match &clipped.shape {
        Shape::Circle(circle) => circle.center.distance(at) < 0.05 && circle.stroke.width > 1.0,
        _ => false,
    })
}

/// Presses on the cursor in one column, moves through `steps` points, checks after every single frame.
fn drag(h: &mut Window<'_>, column: usize, steps: &[f32]) {
    let start = on_cursor(h, column);
    let transform = h.state().state.near_plots.iter().find(|p| p.column == column).unwrap().transform;
    h.hover_at(start);
    h.step();
    h.drag_at(start);
    h.step();
    check(h);
    for step in steps {
        let at = start + eframe::egui::vec2(3.0, *step);
        h.hover_at(at);
        h.step();
        let wanted = transform.value_from_position(at).y;
        let moved = h.state().state.cursor;
        assert!((moved - wanted).abs() < 1e-9 + 1e-6 * wanted.abs(), "{step}: {moved} {wanted}");
        check(h);
        let painted: Vec<Pos2> = h.state().state.painted.iter().filter_map(|e| e.circle).collect();
        let frame = *transform.frame();
        for at in painted.into_iter().filter(|p| frame.y_range().contains(p.y) && in_a_plot(h, *p)) {
            assert!(circle_painted(h, at), "{at:?}");
        }
    }
    let end = start + eframe::egui::vec2(3.0, steps.last().copied().unwrap_or(0.0));
    h.drop_at(end);
    h.step();
    let kept = h.state().state.cursor;
    h.hover_at(end + eframe::egui::vec2(0.0, 20.0));
    h.run();
    assert_eq!(h.state().state.cursor, kept, "let go");
}

fn in_a_plot(h: &Window<'_>, at: Pos2) -> bool {
    h.state().state.near_plots.iter().any(|p| p.transform.frame().contains(at))
}

#[test]
fn dragging_moves_every_column_in_the_same_frame() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    assert_eq!(check(&h), 2, "line and quadratic trace, the logarithm cannot");
    let no_root = value(&h, "Logarithm traces to");
    assert!(no_root.starts_with("no value"), "{no_root}");
    drag(&mut h, 1, &[-4.0, -9.0, -1.0, 6.0, 12.0]);
    // Also from the plot of the fit that has no root, and from the first one.
    drag(&mut h, 2, &[-7.0, 3.0]);
    drag(&mut h, 0, &[5.0, -5.0]);
    assert_eq!(value(&h, "Logarithm traces to"), no_root);
}

#[test]
fn an_output_that_falls_from_zero_uses_the_lower_side() {
    let mut h = fixtures::window(fixtures::falling(), [1440.0, 900.0]);
    let facts = h.state().state.near().unwrap().clone();
    assert!(h.state().state.cursor < facts.band.mean, "the threshold lies under the zero mean");
    assert_eq!(check(&h), 2);
    drag(&mut h, 0, &[3.0, 8.0, -2.0, -6.0]);
    drag(&mut h, 1, &[4.0]);
    assert!(h.state().state.readouts[1].missed.unwrap() > 0.0);
}

#[test]
fn keys_move_by_tenths_and_hundredths_and_to_the_marks() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let facts = h.state().state.near().unwrap().clone();
    let home = h.state().state.cursor;
    let sd = facts.band.sd;
    let at = |h: &Window<'_>| h.state().state.cursor;
    press(&mut h, Key::ArrowUp);
    assert!((at(&h) - home - 0.1 * sd).abs() < 1e-12);
    check(&h);
    h.key_press_modifiers(Modifiers::SHIFT, Key::ArrowDown);
    h.run();
    assert!((at(&h) - home - 0.09 * sd).abs() < 1e-12);
    press(&mut h, Key::ArrowDown);
    assert!((at(&h) - home + 0.01 * sd).abs() < 1e-12);
    check(&h);
    press(&mut h, Key::Home);
    assert_eq!(at(&h), home);
    press(&mut h, Key::PageUp);
    assert_eq!(at(&h), facts.edges.1);
    press(&mut h, Key::PageDown);
    assert_eq!(at(&h), home);
    press(&mut h, Key::PageDown);
    assert_eq!(at(&h), facts.band.mean);
    press(&mut h, Key::PageDown);
    assert_eq!(at(&h), facts.edges.0);
    press(&mut h, Key::PageDown);
    assert_eq!(at(&h), facts.edges.0, "nothing below the last mark");
    check(&h);
}

#[test]
fn marks_are_reached_while_something_else_has_the_keyboard() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let edge = h.state().state.near().unwrap().edges.1;
    press(&mut h, Key::Tab);
    let home = h.state().state.cursor;
    press(&mut h, Key::ArrowUp);
    assert_eq!(h.state().state.cursor, home, "arrows belong to what has the keyboard");
    press(&mut h, Key::PageUp);
    assert_eq!(h.state().state.cursor, edge);
}

#[test]
fn a_number_can_be_typed_with_either_decimal_mark() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    for (typed, signal) in [("4,5", 0.0045), ("3.25", 0.00325), ("−1", -0.001)] {
        h.get_by_label("cursor").focus();
        h.run();
        h.key_press_modifiers(Modifiers::COMMAND, Key::A);
        h.run();
        h.get_by_label("cursor").type_text(typed);
        h.run();
        press(&mut h, Key::Enter);
        assert!((h.state().state.cursor - signal).abs() < 1e-12, "{typed}");
        check(&h);
    }
    let before = h.state().state.cursor;
    h.get_by_label("cursor").focus();
    h.run();
    h.get_by_label("cursor").type_text("about");
    h.run();
    press(&mut h, Key::Enter);
    assert_eq!(h.state().state.cursor, before, "no number, no movement");
}

#[test]
fn captions_are_the_evaluations_on_the_threshold_and_live_off_it() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let caption = h.state().evaluation.columns[1].captions.near_zero.text.clone();
    assert!(h.query_by_label(&caption).is_some(), "{caption}");
    press(&mut h, Key::ArrowUp);
    assert!(h.query_by_label(&caption).is_none());
    let readout = h.state().state.readouts[1].clone();
    let live = format!("traces to {}; 1 in 20 missed at {}", readout.traced_text, readout.missed_text);
    assert!(h.query_by_label(&live).is_some(), "{live}");
    press(&mut h, Key::Home);
    assert!(h.query_by_label(&caption).is_some());
}

#[test]
fn a_press_alone_moves_nothing_and_idle_frames_compute_nothing() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let (home, computed) = (h.state().state.cursor, h.state().state.computed);
    let at = on_cursor(&h, 0) + eframe::egui::vec2(0.0, 4.0);
    h.hover_at(at);
    h.step();
    h.drag_at(at);
    h.step();
    h.drop_at(at);
    h.run();
    assert_eq!(h.state().state.cursor, home);
    h.run_steps(5);
    assert_eq!(h.state().state.computed, computed);
}

#[test]
fn the_band_beside_the_axis_takes_the_cursor_anywhere() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let transform = h.state().state.near_plots[0].transform;
    let at = pos2(transform.frame().left() - 10.0, transform.frame().center().y + 20.0);
    h.drag_at(at);
    h.step();
    let wanted = transform.value_from_position(at).y;
    assert!((h.state().state.cursor - wanted).abs() < 1e-9);
    check(&h);
    h.drop_at(at);
    h.run();
}

#[test]
fn a_moved_cursor_stays_and_an_unmoved_one_follows_when_readings_change() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let home = h.state().state.cursor;
    let more = |h: &mut Window<'_>| {
        let document = h.state().document.clone();
        let bench = h.state_mut();
        bench.document = fixtures::with_zero(document, 0.0051);
        bench.evaluation = assize_core::project::evaluate::evaluate(bench.document.project());
        bench.revision += 1;
        h.run();
    };
    more(&mut h);
    let followed = h.state().state.cursor;
    assert!(followed > home, "{followed} {home}");
    press(&mut h, Key::ArrowUp);
    let moved = h.state().state.cursor;
    more(&mut h);
    assert_eq!(h.state().state.cursor, moved);
    check(&h);
}
