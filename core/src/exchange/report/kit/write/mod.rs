//! Hands pages, structure, metadata and attachments to the PDF writer.

mod surface;

use krilla::configure::{Archival, ConfigurationBuilder};
use krilla::destination::XyzDestination;
use krilla::embed::{AssociationKind, EmbeddedFile, MimeType};
use krilla::geom::Point;
use krilla::metadata::{DateTime, Metadata};
use krilla::outline::{Outline, OutlineNode};
use krilla::page::PageSettings;
use krilla::tagging::{Artifact, ArtifactType, ContentTag};
use krilla::{Document as Pdf, SerializeSettings};

use super::document::{Attachment, Document, Meta, Relationship};
use super::draw::{Draw, Owner, Placed};
use super::error::ReportError;
use super::flow::Page;
use super::furniture::Furniture;
use super::style::{LEFT, PAGE_HEIGHT, PAGE_WIDTH};
use super::tags::Tags;
use super::text::Typesetter;
use surface::Easel;

/// Writes the whole file.
pub(super) fn write(
    setter: &Typesetter,
    document: &Document,
    furniture: &Furniture,
    pages: &[Page],
    mut tags: Tags,
) -> Result<Vec<u8>, ReportError> {
    let mut pdf = Pdf::new_with(settings()?);
    pdf.set_metadata(metadata(&document.meta));
    for attachment in &document.attachments {
        attach(&mut pdf, attachment)?;
    }
    for (index, page) in pages.iter().enumerate() {
        for (place, rect) in &page.figures {
            tags.frame(*place, index, *rect);
        }
        let size = PageSettings::from_wh(PAGE_WIDTH, PAGE_HEIGHT).ok_or_else(|| refused("page"))?;
        let mut started = pdf.start_page_with(size);
        let mut easel = Easel::new(setter, started.surface(), (index + 1, pages.len()));
        draw_page(&mut easel, furniture, (index, page), &mut tags)?;
    }
    pdf.set_outline(outline(pages));
    pdf.set_tag_tree(tags.into_tree(&document.meta.language));
    pdf.finish().map_err(|error| ReportError::Export {
        reason: match &error {
            krilla::error::KrillaError::Validation(found) => format!("{error}: {found:?}"),
            _ => error.to_string(),
        },
    })
}

fn refused(what: &str) -> ReportError {
    ReportError::Export { reason: format!("the writer does not take the {what}") }
}

/// PDF/A-3b, tagged. Everything else is the writer's default, which is the same on each run.
fn settings() -> Result<SerializeSettings, ReportError> {
    let configuration = ConfigurationBuilder::new()
        .with_archival_validator(Archival::A3_B)
        .finish()
        .map_err(|_| refused("configuration"))?;
    Ok(SerializeSettings { configuration, enable_tagging: true, ..SerializeSettings::default() })
}

fn metadata(meta: &Meta) -> Metadata {
    Metadata::new()
        .title(meta.title.clone())
        .description(meta.number.clone())
        .authors(Some(meta.author.clone()).filter(|a| !a.is_empty()).into_iter().collect())
        .creator(meta.creator.clone())
        .language(meta.language.clone())
        .document_id(meta.document_id.clone())
        .creation_date(date(meta.issued))
}

/// A point in time as the writer wants it, in UTC to the second.
fn date(at: jiff::Timestamp) -> DateTime {
    let utc = jiff::tz::TimeZone::UTC.to_datetime(at);
    let small = |value: i8| u8::try_from(value).unwrap_or(0);
    DateTime::new(u16::try_from(utc.year()).unwrap_or(0))
        .month(small(utc.month()))
        .day(small(utc.day()))
        .hour(small(utc.hour()))
        .minute(small(utc.minute()))
        .second(small(utc.second()))
        .utc_offset_hour(0)
        .utc_offset_minute(0)
}

fn attach(pdf: &mut Pdf, attachment: &Attachment) -> Result<(), ReportError> {
    let fail = |reason| ReportError::Attachment { name: attachment.name.clone(), reason };
    if attachment.name.is_empty() {
        return Err(fail("it has no name"));
    }
    if attachment.description.is_empty() {
        return Err(fail("it has no description"));
    }
    let mime = MimeType::new(&attachment.mime).ok_or_else(|| fail("its media type is malformed"))?;
    let file = EmbeddedFile {
        path: attachment.name.clone(),
        mime_type: Some(mime),
        description: Some(attachment.description.clone()),
        association_kind: match attachment.relationship {
            Relationship::Source => AssociationKind::Source,
            Relationship::Data => AssociationKind::Data,
            Relationship::Alternative => AssociationKind::Alternative,
            Relationship::Supplement => AssociationKind::Supplement,
        },
        data: attachment.data.clone().into(),
        modification_date: Some(date(attachment.modified)),
        compress: None,
        location: None,
    };
    pdf.embed_file(file).ok_or_else(|| fail("another attachment has the same name"))
}

/// Draws one page: grounds, the word across it, running head, ornaments, then content in the
/// order of the structure, so that reading order and drawing order are one.
fn draw_page(
    easel: &mut Easel<'_, '_>,
    furniture: &Furniture,
    (index, page): (usize, &Page),
    tags: &mut Tags,
) -> Result<(), ReportError> {
    let mut ordered: Vec<&Placed> = page.drawings.iter().collect();
    ordered.sort_by_key(|placed| placed.owner);
    let grounds = ordered.iter().filter(|p| p.owner == Owner::Ground).count();
    let (grounds, rest) = ordered.split_at(grounds);
    if !grounds.is_empty() {
        easel.start(artifact(ArtifactType::Layout));
        easel.draw_all(grounds.iter().map(|p| &p.draw))?;
        easel.end();
    }
    if let Some(across) = &furniture.across {
        easel.start(artifact(ArtifactType::Watermark));
        easel.draw_across(across);
        easel.end();
    }
    run(easel, ArtifactType::Header, &furniture.head(index))?;
    for same in rest.chunk_by(|a, b| a.owner == b.owner) {
        let draws = same.iter().map(|p| &p.draw);
        match same[0].owner {
            Owner::Content(place) => {
                let leaf = easel.start(ContentTag::Other);
                easel.draw_all(draws)?;
                easel.end();
                tags.fill(place, leaf);
            }
            Owner::Repeated => {
                easel.start(artifact(ArtifactType::PaginationOther));
                easel.draw_all(draws)?;
                easel.end();
            }
            Owner::Ground | Owner::Ornament => {
                easel.start(artifact(ArtifactType::Layout));
                easel.draw_all(draws)?;
                easel.end();
            }
        }
    }
    run(easel, ArtifactType::Footer, &furniture.foot())
}

fn run(easel: &mut Easel<'_, '_>, kind: ArtifactType, draws: &[Draw]) -> Result<(), ReportError> {
    if draws.is_empty() {
        return Ok(());
    }
    easel.start(artifact(kind));
    easel.draw_all(draws)?;
    easel.end();
    Ok(())
}

fn artifact(kind: ArtifactType) -> ContentTag<'static> {
    ContentTag::Artifact(Artifact::with_kind(kind))
}

/// Headings as bookmarks; those of level 2 lie under the last of level 1.
fn outline(pages: &[Page]) -> Outline {
    let mut tops: Vec<(bool, OutlineNode)> = Vec::new();
    for (index, page) in pages.iter().enumerate() {
        for (level, text, y) in &page.headings {
            let to = XyzDestination::new(index, Point::from_xy(LEFT, *y));
            let node = OutlineNode::new(text.clone(), to);
            match tops.last_mut() {
                Some((true, top)) if *level > 1 => top.push_child(node),
                _ => tops.push((*level == 1, node)),
            }
        }
    }
    let mut outline = Outline::new();
    for (_, node) in tops {
        outline.push_child(node);
    }
    outline
}
