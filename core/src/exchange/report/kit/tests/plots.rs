//! Points land where their values say, read back from the drawing operations of the file.

use super::super::{Band, Block, Dash, Line, Mark, Plot, PlotProblem, ReportError, render};
use super::{Painted, close, document, dot, operations, outlines, plot, rendered};

/// The frame of the only plot: left, top, right, bottom. It is the stroked rectangle 100 pt high.
fn frame(outlines: &[Painted]) -> [f32; 4] {
    let found = outlines
        .iter()
        .filter(|outline| outline.how == "S" && outline.points.len() == 4)
        .map(extent)
        .find(|[_, top, _, bottom]| close(bottom - top, 100.0));
    found.expect("the plot has a frame")
}

fn extent(outline: &Painted) -> [f32; 4] {
    let xs = || outline.points.iter().map(|p| p[0]);
    let ys = || outline.points.iter().map(|p| p[1]);
    [
        xs().fold(f32::MAX, f32::min),
        ys().fold(f32::MAX, f32::min),
        xs().fold(f32::MIN, f32::max),
        ys().fold(f32::MIN, f32::max),
    ]
}

#[test]
fn marks_lie_where_their_values_say() {
    let values = [(0.0, -1.0), (2.5, 0.5), (10.0, 1.0)];
    let marks = values.iter().map(|&(x, y)| dot(x, y)).collect();
    let found = rendered(vec![Block::Plots(vec![plot(marks)])]);
    let outlines = outlines(&found, 1);
    let [left, top, right, bottom] = frame(&outlines);
    let dots: Vec<[f32; 2]> = outlines
        .iter()
        .map(extent)
        .filter(|[l, t, r, b]| close(r - l, 4.2) && close(b - t, 4.2))
        .map(|[l, t, r, b]| [(l + r) / 2.0, (t + b) / 2.0])
        .collect();
    assert_eq!(dots.len(), values.len());
    for ((x, y), dot) in values.into_iter().zip(dots) {
        let expected_x = left + (right - left) * x as f32 / 10.0;
        let expected_y = bottom - (bottom - top) * (y as f32 + 1.0) / 2.0;
        assert!(close(dot[0], expected_x) && close(dot[1], expected_y), "({x}, {y}) at {dot:?}");
    }
}

#[test]
fn curves_are_paths_through_their_points_and_clipped_to_the_frame() {
    let mut curved = plot(vec![]);
    curved.lines.push(Line {
        points: vec![[1.0, -0.5], [2.0, 0.0], [4.0, 1000.0], [f64::NAN, 0.0], [5.0, 0.0], [6.0, 0.5]],
        dash: Dash::Dashed,
        width: 0.9,
        grey: 0.0,
    });
    let found = rendered(vec![Block::Plots(vec![curved])]);
    let outlines = outlines(&found, 1);
    let [left, top, right, bottom] = frame(&outlines);
    let at = |x: f32, y: f32| [left + (right - left) * x / 10.0, bottom - (bottom - top) * (y + 1.0) / 2.0];
    let curve =
        outlines.iter().find(|outline| outline.how == "S" && outline.points.len() == 5).expect("the curve is stroked");
    assert_eq!(curve.moves, 2, "a value that is no number leaves a gap");
    let near = |found: [f32; 2], [x, y]: [f32; 2]| close(found[0], x) && close(found[1], y);
    assert!(near(curve.points[0], at(1.0, -0.5)) && near(curve.points[1], at(2.0, 0.0)));
    assert!(near(curve.points[3], at(5.0, 0.0)) && near(curve.points[4], at(6.0, 0.5)));
    let cut = curve.points[2];
    assert!(cut[1] < top && cut[1] > top - 30.0, "cut near the frame, not at 1000: {cut:?}");
    let clips = outlines.iter().filter(|outline| outline.how == "n").map(extent);
    let clip = clips.into_iter().find(|[l, ..]| close(*l, left)).expect("there is a clip");
    // Clips are written in PDF coordinates, bottom up.
    assert!(close(clip[2], right) && close(841.89 - clip[3], top) && close(841.89 - clip[1], bottom));
    assert!(operations(&found, 1).iter().any(|operation| operation.operator == "W"));
}

fn problem(plot: Plot) -> PlotProblem {
    match render(&document(vec![Block::Plots(vec![plot])])) {
        Err(ReportError::Plot { title, problem }) => {
            assert_eq!(title, "Pebbles");
            problem
        }
        other => panic!("expected a refused plot, found {other:?}"),
    }
}

#[test]
fn a_mark_outside_is_refused_and_not_lost() {
    let outside = |mark: Mark| problem(plot(vec![mark]));
    assert_eq!(outside(dot(10.1, 0.0)), PlotProblem::MarkOutside { x: 10.1, y: 0.0 });
    assert_eq!(outside(dot(0.0, -1.1)), PlotProblem::MarkOutside { x: 0.0, y: -1.1 });
    assert_eq!(outside(dot(f64::NAN, 0.0)), PlotProblem::NotFinite);
    assert_eq!(outside(dot(1.0, f64::INFINITY)), PlotProblem::NotFinite);
}

#[test]
fn impossible_axes_and_bands_are_refused() {
    let mut flat = plot(vec![]);
    flat.y.range = (2.0, 2.0);
    assert_eq!(problem(flat), PlotProblem::EmptyRange { from: 2.0, to: 2.0 });
    let mut endless = plot(vec![]);
    endless.x.range = (0.0, f64::INFINITY);
    assert_eq!(problem(endless), PlotProblem::NotFinite);
    let mut ragged = plot(vec![]);
    ragged.bands.push(Band { xs: vec![0.0, 1.0], lo: vec![0.0], hi: vec![0.0, 1.0], grey: 0.8 });
    assert_eq!(problem(ragged), PlotProblem::RaggedBand { xs: 2, lo: 1, hi: 2 });
    let four = vec![plot(vec![]); 4];
    let found = render(&document(vec![Block::Plots(four)]));
    let expected = PlotProblem::Count { count: 4 };
    assert!(matches!(found, Err(ReportError::Plot { problem, .. }) if problem == expected));
}

#[test]
fn the_widest_ranges_still_map() {
    let mut wide = plot(vec![dot(0.0, 1e308), dot(0.0, -1e308)]);
    wide.y.range = (-1.7e308, 1.7e308);
    assert_eq!(rendered(vec![Block::Plots(vec![wide])]).pages, 1);
    let mut tiny = plot(vec![dot(5e-301, 0.0)]);
    tiny.x.range = (0.0, 1e-300);
    assert_eq!(rendered(vec![Block::Plots(vec![tiny])]).pages, 1);
}
