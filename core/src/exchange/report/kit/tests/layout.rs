//! Nothing overlaps, nothing runs off the page.

use super::super::blocks;
use super::super::draw::Draw;
use super::super::flow::{Galley, Slice};
use super::super::style::{LEFT, RIGHT};
use super::super::text::Typesetter;
use super::super::{Align, Block, FactColumn, Key, KeySign, MarkShape, Plot, SignatureBox};
use super::{column, document, heading, paragraph, plot, rendered, row, table};

const ENDLESS: &str = "DonaudampfschifffahrtselektrizitätenhauptbetriebswerkbauunterbeamtengesellschaftDonaudampfschifffahrtselektrizitätenhauptbetriebswerk/and/https://example.invalid/a/very/long/path";

fn slices(block: &Block) -> Vec<Slice> {
    let setter = Typesetter::new().expect("the bundled fonts are sound");
    let mut galley = Galley::new();
    blocks::set(&setter, std::slice::from_ref(block), &mut galley).expect("it can be set");
    galley.finish().0
}

/// Left, right, baseline and text of every text of a slice.
fn placed(slice: &Slice) -> Vec<(f32, f32, f32, String)> {
    let mut found = Vec::new();
    for one in &slice.drawings {
        if let Draw::Text { x, y, line, .. } = &one.draw {
            let text: String = line.runs.iter().map(|run| run.text.as_str()).collect();
            found.push((*x, x + line.width, *y, text));
        }
    }
    found
}

fn assert_apart(block: &Block) {
    let mut texts = 0;
    for slice in slices(block) {
        let placed = placed(&slice);
        texts += placed.len();
        for (i, (left, right, y, text)) in placed.iter().enumerate() {
            assert!(*left > LEFT - 0.1 && *right < RIGHT + 0.1, "{text} runs off");
            assert!(*y > 0.0 && *y < slice.height + 0.1, "{text} leaves its slice");
            for (other_left, other_right, other_y, other) in &placed[i + 1..] {
                let level = (y - other_y).abs() < 4.0;
                let apart = *right < other_left + 0.1 || *other_right < left + 0.1;
                let blank = text.trim().is_empty() || other.trim().is_empty();
                assert!(!level || apart || blank, "{text} meets {other}");
            }
        }
    }
    assert!(texts > 0, "nothing was set");
}

#[test]
fn endless_words_in_cells_stay_in_their_columns() {
    for align in [Align::Left, Align::Right, Align::DecimalPoint] {
        let columns = (0..4).map(|_| column(ENDLESS, align)).collect();
        let rows = vec![row(&[ENDLESS, "1.5", "−12.25", ENDLESS]), row(&["x", ENDLESS, "1.0e-300", "not determined"])];
        assert_apart(&Block::Table(table(columns, rows)));
    }
}

#[test]
fn forty_columns_stay_apart() {
    let columns = (0..40).map(|_| column("quantity", Align::DecimalPoint)).collect();
    let cells: Vec<String> = (0..40).map(|i| format!("{i}.25")).collect();
    let cells: Vec<&str> = cells.iter().map(String::as_str).collect();
    assert_apart(&Block::Table(table(columns, vec![row(&cells)])));
}

#[test]
fn decimal_points_stand_one_beneath_the_other() {
    let numbers = ["0.4005(12)", "−12.5", "1000", "+0.00028", "±15.25 N"];
    let rows = numbers.iter().map(|&number| row(&[number])).collect();
    let block = Block::Table(table(vec![column("b", Align::DecimalPoint)], rows));
    let setter = Typesetter::new().expect("the bundled fonts are sound");
    let mut points = Vec::new();
    for slice in slices(&block) {
        for (left, _, _, text) in placed(&slice) {
            let number = text.trim_end();
            if !numbers.contains(&number) {
                continue;
            }
            let whole = number.split('.').next().unwrap_or(number);
            let needs = setter.needs(whole, super::super::style::CELL).expect("printable");
            points.push(left + needs.natural);
        }
    }
    assert_eq!(points.len(), numbers.len());
    assert!(points.iter().all(|point| (point - points[0]).abs() < 0.01), "{points:?}");
}

#[test]
fn other_blocks_stay_apart_with_endless_words_too() {
    let facts = |heading: &str| FactColumn {
        heading: heading.to_owned(),
        rows: vec![(ENDLESS.to_owned(), ENDLESS.to_owned()), ("short".to_owned(), "short".to_owned())],
    };
    let signature = |id: &str| SignatureBox {
        id: id.to_owned(),
        heading: ENDLESS.to_owned(),
        lines: vec![ENDLESS.to_owned(), "2026".to_owned()],
    };
    let mut crowded = Plot { title: ENDLESS.to_owned(), ..plot(vec![]) };
    crowded.x.label = ENDLESS.to_owned();
    crowded.y.label = ENDLESS.to_owned();
    crowded.x.ticks = (0..=40).map(|i| (f64::from(i) / 4.0, format!("{i}.123456"))).collect();
    crowded.y.ticks = (0..=40).map(|i| (f64::from(i) / 20.0 - 1.0, ENDLESS.to_owned())).collect();
    crowded.key = (0..5).map(|_| Key { sign: KeySign::Mark(MarkShape::Falling), text: ENDLESS.to_owned() }).collect();
    for block in [
        Block::Title { text: ENDLESS.to_owned(), right: Some(ENDLESS.to_owned()) },
        Block::Byline { left: ENDLESS.to_owned(), notice: Some(ENDLESS.to_owned()) },
        heading(1, ENDLESS),
        paragraph(ENDLESS),
        Block::EndMark(ENDLESS.to_owned()),
        Block::Facts { columns: vec![facts("One"), facts(ENDLESS), facts("")] },
        Block::SignatureBoxes(vec![signature("a"), signature("b"), signature("c")]),
    ] {
        assert_apart(&block);
    }
    for count in 1..=3 {
        assert_apart(&Block::Plots(vec![crowded.clone(); count]));
    }
}

#[test]
fn the_place_of_a_box_is_the_place_of_its_frame() {
    let boxes = ["a", "b"].map(|id| SignatureBox {
        id: id.to_owned(),
        heading: "performed".to_owned(),
        lines: vec!["2026-11-03".to_owned()],
    });
    let found = rendered(vec![paragraph("before"), Block::SignatureBoxes(boxes.to_vec())]);
    assert_eq!(found.boxes.len(), 2);
    for place in &found.boxes {
        let [left, bottom, right, top] = place.rect;
        assert_eq!(place.page_index, 0);
        assert!(left < right && bottom < top && top < 841.89);
        let framed = super::outlines(&found, 1).iter().any(|outline| {
            let xs = outline.points.iter().map(|p| p[0]);
            let ys = outline.points.iter().map(|p| 841.89 - p[1]);
            super::close(xs.clone().fold(f32::MAX, f32::min), left)
                && super::close(xs.fold(f32::MIN, f32::max), right)
                && super::close(ys.clone().fold(f32::MAX, f32::min), bottom)
                && super::close(ys.fold(f32::MIN, f32::max), top)
        });
        assert!(framed, "{place:?}");
    }
    assert_eq!(found.boxes[0].id, "a");
    assert!(found.boxes[0].rect[2] < found.boxes[1].rect[0]);
}

#[test]
fn the_longest_furniture_leaves_the_content_alone() {
    let mut document = document(vec![paragraph("content")]);
    document.meta.title = ENDLESS.repeat(2);
    document.meta.number = ENDLESS.to_owned();
    document.meta.footer = ENDLESS.repeat(3);
    let found = super::super::render(&document).expect("it can be rendered");
    let text = super::texts(&found).concat();
    assert!(text.contains("content") && text.contains("page 1 of 1"));
}
