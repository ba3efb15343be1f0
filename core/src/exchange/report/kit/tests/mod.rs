//! Whole documents, rendered and read back with another library.

mod layout;
mod pages;
mod plots;
mod structure;

use lopdf::content::{Content, Operation};

use super::{
    Align, Axis, Block, Cell, Column, Document, Mark, MarkShape, Meta, ParagraphStyle, Plot, Rendered, ReportError,
    Row, Table, render,
};

fn at(time: &str) -> jiff::Timestamp {
    time.parse().expect("a valid time")
}

fn document(blocks: Vec<Block>) -> Document {
    Document {
        meta: Meta {
            title: "Weighing of pebbles".to_owned(),
            number: "PB-17".to_owned(),
            footer: "kept for ten years".to_owned(),
            watermark: None,
            issued: at("2026-11-04T08:15:30Z"),
            language: "en".to_owned(),
            document_id: "urn:uuid:0b5d3e91-77ac-4e91-9000-000000000017".to_owned(),
            author: "Pebble House".to_owned(),
            creator: "Test 1".to_owned(),
        },
        blocks,
        attachments: Vec::new(),
    }
}

fn rendered(blocks: Vec<Block>) -> Rendered {
    render(&document(blocks)).expect("it can be rendered")
}

fn paragraph(text: &str) -> Block {
    Block::Paragraph { text: text.to_owned(), style: ParagraphStyle::Body }
}

fn heading(level: u8, text: &str) -> Block {
    Block::Heading { level, text: text.to_owned() }
}

fn column(head: &str, align: Align) -> Column {
    Column { head: vec![head.to_owned()], align, weight: 1.0 }
}

fn row(cells: &[&str]) -> Row {
    Row { cells: cells.iter().map(|&cell| Cell::new(cell)).collect(), shade: false }
}

fn table(columns: Vec<Column>, rows: Vec<Row>) -> Table {
    Table { caption: Some("Pebbles".to_owned()), columns, rows, note: None }
}

/// A square kilometre of values: x from 0 to 10, y from −1 to 1, 100 points high.
fn plot(marks: Vec<Mark>) -> Plot {
    let axis = |label: &str, range| Axis { label: label.to_owned(), ticks: Vec::new(), range };
    Plot {
        title: "Pebbles".to_owned(),
        alt: "Pebbles against time".to_owned(),
        x: axis("time, h", (0.0, 10.0)),
        y: axis("mass, g", (-1.0, 1.0)),
        height_pt: 100.0,
        marks,
        lines: Vec::new(),
        bands: Vec::new(),
        hlines: Vec::new(),
        vlines: Vec::new(),
        key: Vec::new(),
    }
}

fn dot(x: f64, y: f64) -> Mark {
    Mark { x, y, shape: MarkShape::Dot }
}

fn opened(rendered: &Rendered) -> lopdf::Document {
    lopdf::Document::load_mem(&rendered.pdf).expect("it can be read")
}

/// The text of each page as another library takes it out of the file, one blank between words.
fn texts(rendered: &Rendered) -> Vec<String> {
    let pdf = opened(rendered);
    (1..=rendered.pages as u32)
        .map(|page| pdf.extract_text(&[page]).expect("it has text"))
        .map(|text| text.split(['\n', ' ']).filter(|word| !word.is_empty()).collect::<Vec<_>>().join(" "))
        .collect()
}

/// The drawing operations of a page, counted from 1.
fn operations(rendered: &Rendered, page: u32) -> Vec<Operation> {
    let pdf = opened(rendered);
    let id = pdf.get_pages()[&page];
    let content = pdf.get_page_content(id);
    Content::decode(&content).expect("it can be read").operations
}

/// An outline as it was painted: its points from the top left corner, and the painting operator.
#[derive(Debug)]
struct Painted {
    points: Vec<[f32; 2]>,
    moves: usize,
    how: String,
}

/// The outlines of a page, counted from 1; end points only, handles left out.
fn outlines(rendered: &Rendered, page: u32) -> Vec<Painted> {
    let mut found = Vec::new();
    let (mut points, mut moves) = (Vec::new(), 0);
    for operation in operations(rendered, page) {
        let numbers: Vec<f32> = operation.operands.iter().filter_map(|operand| operand.as_float().ok()).collect();
        match operation.operator.as_str() {
            "m" | "l" | "c" => {
                moves += usize::from(operation.operator == "m");
                points.push([numbers[numbers.len() - 2], numbers[numbers.len() - 1]]);
            }
            "f" | "S" | "B" | "n" => found.push(Painted {
                points: std::mem::take(&mut points),
                moves: std::mem::take(&mut moves),
                how: operation.operator,
            }),
            _ => {}
        }
    }
    found
}

fn close(a: f32, b: f32) -> bool {
    (a - b).abs() < 0.02
}

#[test]
fn the_same_document_gives_the_same_bytes() {
    let blocks = || {
        vec![
            Block::Title { text: "Weighing".to_owned(), right: Some("PB-17".to_owned()) },
            paragraph("Ten pebbles, σ̂ = 0.1 g ♯"),
            Block::Plots(vec![plot(vec![dot(1.0, 0.5)])]),
        ]
    };
    let first = rendered(blocks());
    assert_eq!(first, rendered(blocks()));
    let mut other = document(blocks());
    other.meta.number = "PB-18".to_owned();
    assert_ne!(first.pdf, render(&other).expect("it can be rendered").pdf);
}

#[test]
fn a_character_no_font_has_is_reported_wherever_it_stands() {
    let bad = "stone 石";
    let blocks: Vec<Block> = vec![
        paragraph(bad),
        heading(1, bad),
        Block::EndMark(bad.to_owned()),
        Block::Table(table(vec![column("a", Align::DecimalPoint)], vec![row(&[bad])])),
        Block::Table(table(vec![column(bad, Align::Left)], vec![])),
        Block::Plots(vec![Plot { title: bad.to_owned(), ..plot(vec![]) }]),
    ];
    for block in blocks {
        let found = render(&document(vec![block.clone()]));
        assert!(matches!(&found, Err(ReportError::NoGlyph { text, character: '石' }) if text == bad), "{block:?}");
    }
}

#[test]
fn the_minus_sign_and_small_figures_come_back_as_they_were() {
    let text = "−0.0028 mV/V per kN², b₀ ± 2.6×10⁻⁵, 20.3 °C";
    let found = texts(&rendered(vec![paragraph(text)]));
    assert!(found[0].contains(text), "{}", found[0]);
}
