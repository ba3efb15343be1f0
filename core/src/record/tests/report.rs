//! A small report to sign: PDF/A-3, tagged, two pages of text, two attachments.

use krilla::{
    Document, SerializeSettings,
    configure::{Accessibility, Archival, Configuration, ConfigurationBuilder},
    embed::{AssociationKind, EmbeddedFile, MimeType},
    geom::Point,
    metadata::{DateTime, Metadata},
    outline::Outline,
    page::PageSettings,
    tagging::{ContentTag, SpanTag, Tag, TagGroup, TagTree},
    text::{Font, TextDirection},
};

/// What the report is checked against while it is written.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Standard {
    /// PDF/A-3b, tagged all the same.
    A3b,
    /// PDF/A-3b without tags.
    A3bUntagged,
    /// PDF/A-3a and PDF/UA-1.
    A3aAndUa1,
}

/// Contents of the attachment `record.json`.
pub(super) const RECORD: &[u8] = br#"{"instrument":"TL-07","slope":0.98765}"#;
/// Contents of the attachment `readings.csv`.
pub(super) const READINGS: &[u8] = b"level/m,reading/mA\n0.0,4.01\n1.0,8.02\n2.0,12.00\n";

/// Writes the report; the same bytes in every run.
pub(super) fn report(standard: Standard) -> Vec<u8> {
    let mut document = Document::new_with(SerializeSettings {
        configuration: configuration(standard),
        enable_tagging: standard != Standard::A3bUntagged,
        ..SerializeSettings::default()
    });
    add_pages(&mut document);
    document.set_outline(Outline::new());
    let date = DateTime::new(2026).month(12).day(1).hour(12).minute(0).second(0).utc_offset_hour(0);
    add_files(&mut document, date);
    document.set_metadata(
        Metadata::new()
            .title("Calibration of TL-07".to_owned())
            .language("en".to_owned())
            .creation_date(date)
            .document_id("tl-07-2026-12-01".to_owned()),
    );
    document.finish().expect("a report within the standard")
}

fn configuration(standard: Standard) -> Configuration {
    let builder = ConfigurationBuilder::new();
    let builder = match standard {
        Standard::A3b | Standard::A3bUntagged => builder.with_archival_validator(Archival::A3_B),
        Standard::A3aAndUa1 => {
            builder.with_archival_validator(Archival::A3_A).with_accessibility_validator(Accessibility::UA1)
        }
    };
    builder.finish().expect("standards that go together")
}

/// Two pages of two paragraphs, and the tags over them.
fn add_pages(document: &mut Document) {
    let font: &'static [u8] = include_bytes!("assets/letters.ttf");
    let font = Font::new(font.into(), 0).expect("a font");
    let mut tree = TagTree::new().with_lang(Some("en".to_owned()));
    let pages = [
        ["Level transmitter TL-07, Skerrow Tideworks", "zero at \u{2212}0.012 m"],
        ["Second page", "calibrated by / approved by"],
    ];
    for lines in pages {
        let settings = PageSettings::from_wh(595.0, 842.0).expect("a page");
        let mut page = document.start_page_with(settings);
        let mut surface = page.surface();
        for (line, y) in lines.iter().zip([60.0, 90.0]) {
            let mut paragraph = TagGroup::new(Tag::P);
            paragraph.push(surface.start_tagged(ContentTag::Span(SpanTag::empty())));
            let at = Point::from_xy(40.0, y);
            surface.draw_text(at, font.clone(), 12.0, line, false, TextDirection::Auto);
            surface.end_tagged();
            tree.push(paragraph);
        }
        surface.finish();
        page.finish();
    }
    document.set_tag_tree(tree);
}

fn add_files(document: &mut Document, date: DateTime) {
    for (path, mime, kind, data) in [
        ("readings.csv", "text/csv", AssociationKind::Data, READINGS),
        ("record.json", "application/json", AssociationKind::Source, RECORD),
    ] {
        let file = EmbeddedFile {
            path: path.to_owned(),
            mime_type: MimeType::new(mime),
            description: Some("part of the record".to_owned()),
            association_kind: kind,
            data: data.into(),
            modification_date: Some(date),
            compress: None,
            location: None,
        };
        document.embed_file(file).expect("a new name");
    }
}
