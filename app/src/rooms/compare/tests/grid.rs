//! The grid: how many columns and rows stand, what folds, what the keys turn.

use super::{Window, figures, fixtures, press};
use crate::rooms::compare::{Against, Measure, Row};
use eframe::egui::{Event, Key};
use egui_kittest::kittest::Queryable;

fn letter(h: &mut Window<'_>, text: &str) {
    h.event(Event::Text(text.into()));
    h.run();
}

fn count(h: &Window<'_>, start: &str) -> usize {
    figures(h).iter().filter(|f| f.starts_with(start)).count()
}

#[test]
fn three_columns_show_curve_residuals_near_zero_and_numbers() {
    let h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    for start in ["curve of", "residuals of", "near zero of"] {
        assert_eq!(count(&h, start), 3, "{start}: {:?}", figures(&h));
    }
    let bows = figures(&h).into_iter().find(|f| f.starts_with("residuals of the line")).unwrap();
    assert!(bows.contains("bows: reads up to"), "{bows}");
    let column = &h.state().evaluation.columns[0];
    for key in ["worst_read_back", "residual_sd", "detection_limit", "coefficient.b1"] {
        let figure = column.figures.iter().find(|f| f.key == key).unwrap();
        let label = format!("Line {}: {}", figure.label, figure.shown());
        assert!(h.query_by_label(&label).is_some(), "{label}");
    }
}

#[test]
fn residuals_are_largest() {
    let h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let height = |start| h.get_all_by_label_contains(start).next().unwrap().rect().height();
    let (curve, residuals, near) = (height("curve of"), height("residuals of"), height("near zero of"));
    assert!(residuals > 1.5 * near && near > curve, "{curve} {residuals} {near}");
}

#[test]
fn a_small_window_has_two_columns_and_one_row() {
    let mut h = fixtures::window(fixtures::link(), [807.0, 512.0]);
    assert_eq!((count(&h, "residuals of"), count(&h, "curve of"), count(&h, "near zero of")), (2, 0, 0));
    assert!(h.query_by_label_contains("Show Logarithm: ").is_some(), "the third is a line at the right");
    for (key, start) in [("1", "curve of"), ("3", "near zero of"), ("2", "residuals of")] {
        letter(&mut h, key);
        assert_eq!((count(&h, start), figures(&h).len()), (2, 2), "{key}");
    }
    letter(&mut h, "4");
    assert_eq!(h.state().state.open, Some(Row::Numbers));
    assert!(figures(&h).is_empty());
    assert!(h.query_by_label_contains("Line R²").is_some(), "alone, the numbers show the details");
    h.get_by_label("Open Residuals").click();
    h.run();
    assert_eq!(count(&h, "residuals of"), 2);
}

#[test]
fn a_column_aside_is_brought_in_by_a_click_and_the_advised_one_stays() {
    let mut h = fixtures::window(fixtures::six(), [1366.0, 768.0]);
    let shown = |h: &Window<'_>| count(h, "residuals of");
    let before = shown(&h);
    assert!((3..6).contains(&before));
    assert_eq!(count(&h, "residuals of the quintic"), 0);
    h.get_by_label_contains("Show Quintic").click();
    h.run();
    assert_eq!(shown(&h), before);
    assert_eq!(count(&h, "residuals of the quintic"), 1);
    assert_eq!(count(&h, "residuals of the quadratic"), 1, "advised");
}

#[test]
fn letters_turn_measure_abscissa_and_scale() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    assert_eq!(count(&h, "residuals of"), 3);
    for (measure, words) in
        [(Measure::Input, "input units"), (Measure::Standardised, "their own SD"), (Measure::Output, "output units")]
    {
        letter(&mut h, "u");
        assert_eq!(h.state().state.measure, measure);
        assert!(figures(&h).iter().filter(|f| f.contains(words)).count() == 3, "{words}");
    }
    letter(&mut h, "o");
    assert_eq!(h.state().state.against, Against::Order);
    letter(&mut h, "s");
    assert!(h.state().state.one_scale);
}

#[test]
fn the_pointer_on_a_reading_marks_it_in_every_row() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let bench = h.state();
    let seat = bench.evaluation.observations.iter().position(|o| !o.is_zero() && (o.x - 3.0).abs() < 1e-9).unwrap();
    let rings = |h: &Window<'_>| {
        let circles = h.output().shapes.iter().filter(|s| match &s.shape {
            eframe::egui::Shape::Circle(c) => {
                c.stroke.width == 1.5 && c.fill == eframe::egui::Color32::TRANSPARENT && c.radius > 7.0
            }
            _ => false,
        });
        circles.count()
    };
    assert_eq!(rings(&h), 0);
    let id = h.get_by_label_contains("curve of the line").rect();
    let (low, high) = (id.left_bottom(), id.right_top());
    let x = super::super::curve::values(&bench.state.cache.dots);
    let ys = bench.state.cache.dots.iter().map(|d| d.y);
    let y = super::super::curve::padded(super::super::dots::extent(ys).unwrap(), 0.1);
    let o = &bench.evaluation.observations[seat];
    let at = eframe::egui::pos2(
        low.x + ((o.x - x.0) / (x.1 - x.0)) as f32 * (high.x - low.x),
        low.y + ((o.y - y.0) / (y.1 - y.0)) as f32 * (high.y - low.y),
    );
    h.hover_at(at);
    h.run();
    let hover = h.state().state.hover.expect("a reading is under the pointer");
    assert!((h.state().evaluation.observations[hover].x - 3.0).abs() < 1e-9);
    assert_eq!(rings(&h), 6, "curve and residuals of three columns");
    assert!(h.query_by_label_contains("at 3 kN").is_some(), "what it is stands beside the pointer");
    h.hover_at(eframe::egui::pos2(5.0, 5.0));
    h.run();
    assert_eq!((h.state().state.hover, rings(&h)), (None, 0));
}

#[test]
fn panning_one_plot_moves_its_row_and_a_double_click_gives_it_back() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let rect = h.get_by_label_contains("residuals of the quadratic").rect();
    let at = rect.center() + eframe::egui::vec2(0.0, 0.4 * rect.height());
    h.hover_at(at);
    h.run();
    h.drag_at(at);
    h.run();
    h.hover_at(at + eframe::egui::vec2(-40.0, 0.0));
    h.run();
    h.drop_at(at + eframe::egui::vec2(-40.0, 0.0));
    h.run();
    let moved = h.state().state.windows.value.expect("the values moved");
    assert!(moved.0 > 0.2, "{moved:?}");
    for _ in 0..2 {
        h.drag_at(at);
        h.drop_at(at);
    }
    h.run();
    assert_eq!(h.state().state.windows.value, None);
}

#[test]
fn what_cannot_be_fitted_says_why_where_its_plots_would_be() {
    let h = fixtures::window(fixtures::not_asked(), [1440.0, 900.0]);
    assert!(h.query_by_label("Not fitted").is_some());
    assert!(h.query_by_label_contains("the logarithm of 0 does not exist").is_some());
    assert_eq!(count(&h, "residuals of"), 2);
}

#[test]
fn an_empty_project_says_what_to_do_next() {
    let mut h = fixtures::window(assize_core::trail::Document::default(), [1440.0, 900.0]);
    assert!(h.query_by_label("Nothing to compare yet").is_some());
    h.get_by_label("To the bench").click();
    h.run();
    assert_eq!(h.state().wishes.len(), 1);
}

#[test]
fn tab_reaches_heads_and_rows_in_words() {
    let mut h = fixtures::window(fixtures::link(), [1440.0, 900.0]);
    let mut seen = Vec::new();
    for _ in 0..12 {
        press(&mut h, Key::Tab);
        let focused = h.query_all(egui_kittest::kittest::by().predicate(|n| n.is_focused())).last();
        seen.extend(focused.and_then(|n| egui_kittest::kittest::NodeT::accesskit_node(&n).label()));
    }
    for label in ["Choose Line", "Choose Quadratic", "Open Curve alone", "threshold on trial: arrow keys move it"] {
        assert!(seen.iter().any(|s| s == label), "{label}: {seen:?}");
    }
}
