//! The near-zero row in all its cases, and the ■ dragged along a curve.

use super::{Window, figures, fixtures, press, value};
use eframe::egui::Key;
use egui_kittest::kittest::Queryable;

#[test]
fn a_square_dragged_along_its_curve_says_how_often_that_value_is_missed() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let plot = h.state().state.near_plots[1];
    let square = plot.square.expect("a detection limit in sight");
    h.hover_at(square);
    h.step();
    h.drag_at(square);
    h.step();
    let to = square - eframe::egui::vec2(25.0, -6.0);
    h.hover_at(to);
    h.step();
    let x = h.state().state.probe.expect("on trial").x;
    assert!((x - plot.transform.value_from_position(to).x).abs() < 1e-9);
    let bench = h.state();
    let e = bench.evaluation.columns[1].outcome.as_ref().unwrap();
    let detection = &bench.evaluation.zeros.detections(&e.fit).unwrap()[0];
    let p = detection.miss_probability(x, bench.state.cursor);
    assert!(p > 0.05 && p < 1.0, "nearer to zero it is missed more often: {p}");
    assert!(h.query_by_label_contains("a true value of").is_some());
    assert!(h.query_by_label_contains("would be missed").is_some());
    // The ■ follows along the curve, not the pointer's height.
    let painted = h.state().state.painted[1].square.unwrap();
    assert!((painted.x - to.x).abs() < 0.05);
    assert!((painted.y - plot.transform.position_from_point_y(e.fit.curve.value(x))).abs() < 0.05);
    h.drop_at(to);
    h.run();
    press(&mut h, Key::Escape);
    assert!(h.query_by_label_contains("would be missed").is_none());
}

#[test]
fn zero_inside_the_interval_has_two_limits() {
    let mut h = fixtures::window(fixtures::both(), [1440.0, 900.0]);
    let readout = h.state().state.readouts[0].clone();
    let (missed, other) = (readout.missed.unwrap(), readout.missed_other.unwrap());
    assert!(missed > 0.0 && other < 0.0, "{missed} {other}");
    assert!((missed + other).abs() < 0.05 * missed, "a line is the same on both sides");
    assert!(h.state().state.painted[0].square_other.is_some());
    // Under the zero mean the cursor speaks for the other direction.
    for _ in 0..60 {
        press(&mut h, Key::ArrowDown);
    }
    assert!(h.state().state.cursor < h.state().state.near().unwrap().band.mean);
    assert!(h.state().state.readouts[0].missed.unwrap() < 0.0);
}

#[test]
fn without_a_state_of_nothing_the_smallest_change_is_asked() {
    let mut h = fixtures::window(fixtures::thermometer(), [1440.0, 900.0]);
    let facts = h.state().state.near().unwrap().clone();
    assert_eq!((facts.around, facts.means.len()), (Some(5.0), 6));
    assert!(figures(&h).iter().any(|f| f.starts_with("smallest change by the line")));
    let e = h.state().evaluation.columns[0].outcome.as_ref().unwrap();
    let slope = e.fit.curve.derivative(5.0);
    let traced = h.state().state.readouts[0].traced.unwrap();
    assert!((traced - (h.state().state.cursor - facts.band.mean) / slope).abs() < 1e-12);
    let circle = h.state().state.painted[0].circle.unwrap();
    let at = h.state().state.near_plots[0].transform.position_from_point_x(5.0 + traced);
    assert!((circle.x - at).abs() < 0.05);
    press(&mut h, Key::ArrowUp);
    assert!(h.query_all_by_label_contains("a change: traces to").next().is_some());
}

#[test]
fn a_live_zero_is_folded_until_asked() {
    let mut h = fixtures::window(fixtures::transmitter(), [1440.0, 900.0]);
    assert!(h.state().state.near_plots.is_empty());
    assert!(h.query_by_label("Open Near zero").is_some());
    h.event(eframe::egui::Event::Text("3".into()));
    h.run();
    assert_eq!(h.state().state.near_plots.len(), 2);
    assert!(!value(&h, "Line traces to").is_empty());
    // In a low window the same key opens the row at once.
    let mut low = fixtures::window(fixtures::transmitter(), [807.0, 512.0]);
    low.event(eframe::egui::Event::Text("3".into()));
    low.run();
    assert_eq!(low.state().state.near_plots.len(), 2);
}

#[test]
fn a_question_that_is_not_asked_takes_one_line() {
    let h = fixtures::window(fixtures::not_asked(), [1440.0, 900.0]);
    assert!(h.state().state.near_plots.is_empty());
    assert!(h.query_by_label("how small is more than nothing is not asked in this plan").is_some());
    assert!(h.query_by_label("cursor").is_none());
    let asked = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    assert!(height(&h) > 1.4 * height(&asked), "its height goes to the residuals");
}

fn height(h: &Window<'_>) -> f32 {
    h.get_by_label_contains("residuals of the line").rect().height()
}

#[test]
fn too_few_zeros_are_said_so() {
    let h = fixtures::window(fixtures::two_zeros(), [1440.0, 900.0]);
    assert!(h.query_by_label("2 zero readings: a band needs 3, a dependable one 10").is_some());
    assert!(h.state().state.near_plots.is_empty());
}

#[test]
fn a_zero_reading_under_the_pointer_is_shown_where_it_is_fitted() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let strip = h.get_by_label("8 zero readings").rect();
    let facts = h.state().state.near().unwrap().clone();
    let transform = h.state().state.near_plots[0].transform;
    // The third reading stands in the middle of the strip.
    let at = eframe::egui::pos2(strip.center().x, transform.position_from_point_y(facts.means[2]));
    h.hover_at(at);
    h.run();
    let seat = h.state().state.hover.expect("a reading is under the pointer");
    let o = &h.state().evaluation.observations[seat];
    assert!(o.is_zero() && facts.means.contains(&o.y));
}
