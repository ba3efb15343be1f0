//! What a report says, in the order in which it says it. Every figure comes from the evaluation.

mod head;
mod near_zero;
mod plots;
mod readings;
mod record;
mod result;

use super::{
    issue::Issue,
    kit::{Block, Document as Pages, Meta},
};
use crate::{
    exchange::fit_json,
    project::{Project, about::Kind, evaluate::Evaluation},
    trail::Document,
};

/// What a report is composed from.
#[derive(Debug, Clone, Copy)]
pub struct Source<'a> {
    /// The project with its trail.
    pub document: &'a Document,
    /// Its evaluation.
    pub evaluation: &'a Evaluation,
    /// The issue.
    pub issue: &'a Issue,
}

impl<'a> Source<'a> {
    fn project(&self) -> &'a Project {
        self.document.project()
    }
}

/// Composes the pages.
#[must_use]
pub fn compose(source: &Source<'_>, attachments: Vec<super::kit::Attachment>) -> Pages {
    let mut blocks: Vec<Block> = head::blocks(source);
    blocks.extend(result::blocks(source));
    blocks.extend(plots::blocks(source));
    blocks.extend(result::others(source));
    blocks.extend(near_zero::blocks(source));
    blocks.extend(readings::blocks(source));
    blocks.extend(record::blocks(source));
    Pages { meta: meta(source), blocks, attachments }
}

/// The number printed on every page.
#[must_use]
pub fn number(project: &Project) -> String {
    project.number.as_deref().unwrap_or("without number").to_owned()
}

fn meta(source: &Source<'_>) -> Meta {
    let project = source.project();
    let digest = source.document.digest();
    let watermark = match (project.kind, &source.issue.signer) {
        (Kind::Practice, _) => Some("Practice".to_owned()),
        (Kind::Record, None) => Some("Draft".to_owned()),
        (Kind::Record, Some(_)) => None,
    };
    Meta {
        title: format!("Calibration record {}", number(project)),
        number: number(project),
        footer: format!("trail {} · project, readings and evaluation are attached to this file", digest.short()),
        watermark,
        issued: source.issue.at.timestamp(),
        language: "en".to_owned(),
        document_id: digest.hex(),
        creator: format!("Assize {}", source.issue.program),
        author: source.issue.signer.as_ref().map(|s| s.name.clone()).unwrap_or_default(),
    }
}

/// The evaluation as attached.
#[must_use]
pub fn evaluation_json(source: &Source<'_>) -> String {
    let value = fit_json::document(source.project(), source.evaluation);
    format!("{value:#}\n")
}
