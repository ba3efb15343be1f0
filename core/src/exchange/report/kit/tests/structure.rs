//! Tags, attachments and metadata, read back from the file.

use std::collections::BTreeMap;

use lopdf::{Dictionary, Object};

use super::super::{
    Align, Attachment, Block, Cell, FactColumn, Relationship, ReportError, Row, Table, TableProblem, render,
};
use super::{at, column, document, dot, heading, opened, paragraph, plot, rendered, row, table, texts};

fn attachment(name: &str, relationship: Relationship) -> Attachment {
    Attachment {
        name: name.to_owned(),
        mime: "text/csv".to_owned(),
        description: "pebbles".to_owned(),
        relationship,
        modified: at("2026-11-03T11:40:00Z"),
        data: b"x,y\n1,2\n".to_vec(),
    }
}

/// All dictionaries of a file of the given type.
fn dictionaries(pdf: &lopdf::Document, kind: &[u8]) -> Vec<Dictionary> {
    pdf.objects
        .values()
        .filter_map(|object| object.as_dict().ok())
        .filter(|dictionary| dictionary.get(b"Type").and_then(Object::as_name).ok() == Some(kind))
        .cloned()
        .collect()
}

/// How often each role occurs in the structure.
fn roles(pdf: &lopdf::Document) -> BTreeMap<String, usize> {
    let mut found = BTreeMap::new();
    for element in dictionaries(pdf, b"StructElem") {
        let role = element.get(b"S").and_then(Object::as_name).expect("it has a role");
        *found.entry(String::from_utf8_lossy(role).into_owned()).or_insert(0) += 1;
    }
    found
}

#[test]
fn the_structure_says_what_is_what() {
    let columns = vec![column("a", Align::Left), column("b", Align::Right)];
    let rows = vec![row(&["1", "2"]), row(&["3", ""])];
    let found = rendered(vec![
        Block::Title { text: "Weighing".to_owned(), right: None },
        heading(1, "First"),
        heading(2, "Second"),
        paragraph("text"),
        Block::Table(table(columns, rows)),
        Block::Plots(vec![plot(vec![dot(1.0, 0.0)])]),
    ]);
    let pdf = opened(&found);
    let roles = roles(&pdf);
    for (role, count) in [
        ("Title", 1),
        ("H1", 1),
        ("H2", 1),
        ("Table", 1),
        ("Caption", 1),
        ("THead", 1),
        ("TBody", 1),
        ("TR", 3),
        ("TH", 2),
        ("TD", 4),
        ("Figure", 1),
    ] {
        assert_eq!(roles.get(role), Some(&count), "{role} in {roles:?}");
    }
    let figure = dictionaries(&pdf, b"StructElem")
        .into_iter()
        .find(|element| element.get(b"Alt").is_ok())
        .expect("the figure has a description");
    let text = format!("{figure:?}");
    assert!(text.contains("BBox"), "{text}");
}

#[test]
fn text_comes_out_in_reading_order() {
    let facts = |name: &str| FactColumn {
        heading: format!("{name}0"),
        rows: (1..4).map(|i| (format!("{name}{i}label"), format!("{name}{i}value"))).collect(),
    };
    let found =
        rendered(vec![paragraph("before"), Block::Facts { columns: vec![facts("a"), facts("b")] }, paragraph("after")]);
    let expected = "before a0 a1label a1value a2label a2value a3label a3value \
                    b0 b1label b1value b2label b2value b3label b3value after";
    assert!(texts(&found)[0].contains(expected), "{}", texts(&found)[0]);
}

#[test]
fn a_head_repeated_on_a_second_page_is_not_a_second_head() {
    let rows = (0..100).map(|_| row(&["x"])).collect();
    let found = rendered(vec![Block::Table(table(vec![column("a", Align::Left)], rows))]);
    assert!(found.pages > 1);
    let roles = roles(&opened(&found));
    assert_eq!((roles["THead"], roles["TH"], roles["TD"]), (1, 1, 100));
}

#[test]
fn struck_cells_are_struck_in_the_structure_too() {
    let struck = Row { cells: vec![Cell { strike: true, ..Cell::new("0.25") }], shade: false };
    let found = rendered(vec![Block::Table(table(vec![column("a", Align::Right)], vec![struck]))]);
    assert!(texts(&found)[0].contains("0.25"));
    let marked = dictionaries(&opened(&found), b"StructElem")
        .iter()
        .any(|element| format!("{element:?}").contains("LineThrough"));
    assert!(marked);
}

#[test]
fn an_empty_table_says_so() {
    let columns = vec![column("alpha", Align::Left), column("beta", Align::Right)];
    let found = rendered(vec![Block::Table(table(columns, vec![]))]);
    let text = &texts(&found)[0];
    assert!(text.contains("alpha beta") && text.contains("no rows"), "{text}");
}

#[test]
fn tables_that_do_not_fit_together_are_refused() {
    let refused = |table: Table| match render(&document(vec![Block::Table(table)])) {
        Err(ReportError::Table { problem, .. }) => problem,
        other => panic!("expected a refused table, found {other:?}"),
    };
    assert_eq!(refused(table(vec![], vec![])), TableProblem::NoColumns);
    let columns = vec![column("a", Align::Left), column("b", Align::Left)];
    let rows = vec![row(&["1", "2"]), row(&["3"])];
    let expected = TableProblem::RaggedRow { row: 1, cells: 1, columns: 2 };
    assert_eq!(refused(table(columns, rows)), expected);
}

#[test]
fn attachments_come_with_all_they_need() {
    let mut document = document(vec![paragraph("text")]);
    document.attachments =
        vec![attachment("record.json", Relationship::Source), attachment("readings.csv", Relationship::Data)];
    let found = render(&document).expect("it can be rendered");
    let pdf = opened(&found);
    let files = dictionaries(&pdf, b"Filespec");
    assert_eq!(files.len(), 2);
    for (name, relationship) in [("record.json", "Source"), ("readings.csv", "Data")] {
        let file = files
            .iter()
            .find(|file| file.get(b"F").and_then(Object::as_str).ok() == Some(name.as_bytes()))
            .expect("it is attached");
        let found = file.get(b"AFRelationship").and_then(Object::as_name).ok();
        assert_eq!(found, Some(relationship.as_bytes()));
        assert!(file.get(b"Desc").is_ok());
    }
    let streams: Vec<_> = pdf
        .objects
        .values()
        .filter_map(|object| object.as_stream().ok())
        .filter(|stream| stream.dict.get(b"Type").and_then(Object::as_name).ok() == Some(b"EmbeddedFile"))
        .collect();
    assert_eq!(streams.len(), 2);
    for stream in streams {
        let data = stream.decompressed_content().unwrap_or_else(|_| stream.content.clone());
        assert_eq!(data, b"x,y\n1,2\n");
        assert_eq!(stream.dict.get(b"Subtype").and_then(Object::as_name).ok(), Some("text/csv".as_bytes()));
        let parameters = stream.dict.get(b"Params").and_then(Object::as_dict).expect("present");
        let date = parameters.get(b"ModDate").and_then(Object::as_str).expect("present");
        assert!(date.starts_with(b"D:20261103114000"), "{date:?}");
    }
}

#[test]
fn attachments_that_cannot_be_attached_are_named() {
    let mut nameless = attachment("", Relationship::Data);
    let mut malformed = attachment("b.csv", Relationship::Data);
    malformed.mime = "csv".to_owned();
    let mut mute = attachment("c.csv", Relationship::Data);
    mute.description.clear();
    nameless.description = "x".to_owned();
    let twice = attachment("d.csv", Relationship::Data);
    for attachments in [vec![nameless], vec![malformed], vec![mute], vec![twice.clone(), twice]] {
        let expected = attachments[0].name.clone();
        let mut document = document(vec![]);
        document.attachments = attachments;
        let found = render(&document);
        assert!(matches!(&found, Err(ReportError::Attachment { name, .. }) if *name == expected), "{found:?}");
    }
}

#[test]
fn metadata_come_from_the_document() {
    let found = rendered(vec![paragraph("text")]);
    let pdf = opened(&found);
    let info = pdf
        .trailer
        .get(b"Info")
        .and_then(Object::as_reference)
        .and_then(|id| pdf.get_dictionary(id))
        .expect("there is an information dictionary");
    let get = |key: &[u8]| info.get(key).and_then(Object::as_str).expect("present").to_vec();
    assert_eq!(get(b"Title"), b"Weighing of pebbles");
    assert_eq!(get(b"Author"), b"Pebble House");
    assert_eq!(get(b"Creator"), b"Test 1");
    assert!(get(b"CreationDate").starts_with(b"D:20261104081530"));
    let catalog = pdf.catalog().expect("there is a catalog");
    assert_eq!(catalog.get(b"Lang").and_then(Object::as_str).ok(), Some("en".as_bytes()));
}
