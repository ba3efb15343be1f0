//! The report: one PDF/A-3b file that shows the record, carries it, and can be signed.
//!
//! ```text
//! document + evaluation + issue → content (what is said) → kit (typesetting) → PDF → record (signature)
//! ```

pub mod content;
pub mod issue;
pub mod kit;

use crate::{
    exchange::intake,
    project::{Project, evaluate::Evaluation},
    readings::{Applied, Reading},
    record::{SignError, SignatureRequest, SigningKey, sign_pdf},
    trail::{Document, FileProblem},
};
use content::Source;
use issue::{Issue, Signer};
use kit::{Attachment, Relationship, Rendered};

/// Name of the attached project.
pub const PROJECT: &str = "project.assize";
/// Name of the attached issue.
pub const ISSUE: &str = "issue.json";
/// Name of the attached evaluation.
pub const EVALUATION: &str = "evaluation.json";
/// Name of the attached readings.
pub const READINGS: &str = "readings.csv";

/// Why there is no report.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum IssueError {
    /// The pages cannot be set.
    #[error("the report cannot be typeset: {0}")]
    Pages(#[from] kit::ReportError),
    /// The project cannot be written.
    #[error(transparent)]
    Project(#[from] FileProblem),
    /// The file cannot be signed.
    #[error("the report cannot be signed: {0}")]
    Sign(#[from] SignError),
    /// The record is not ready.
    #[error("not ready to be signed: {}", reasons.join("; "))]
    NotReady {
        /// What is missing, one sentence each.
        reasons: Vec<String>,
    },
    /// Something cannot be written as JSON.
    #[error("the issue cannot be written: {0}")]
    Json(String),
}

/// The pages of an issue, not signed.
///
/// # Errors
/// [`IssueError::Pages`] when a text has characters that no font here holds, named in the error.
pub fn pages(document: &Document, evaluation: &Evaluation, issue: &Issue) -> Result<Rendered, IssueError> {
    let source = Source { document, evaluation, issue };
    let attachments = attachments(&source)?;
    Ok(kit::render(&content::compose(&source, attachments))?)
}

/// What keeps a record from being signed, one sentence each; empty when it is ready.
#[must_use]
pub fn not_ready(project: &Project, evaluation: &Evaluation) -> Vec<String> {
    use crate::project::{about::Kind, evaluate::Severity};
    let mut reasons = Vec::new();
    if project.kind == Kind::Practice {
        reasons.push("a practice project is never signed as a record".to_owned());
    }
    if evaluation.data.applications == 0 {
        reasons.push("there are no readings".to_owned());
    }
    let stops = evaluation.findings.iter().filter(|f| f.severity == Severity::Stop);
    reasons.extend(stops.map(|f| f.message.clone()));
    reasons
}

/// A signed issue: the box is printed on the last page and covered by the signature.
///
/// # Errors
/// [`IssueError::NotReady`] with everything that is missing, or what went wrong while setting or signing.
pub fn signed(
    document: &Document,
    evaluation: &Evaluation,
    issue: &Issue,
    key: &SigningKey,
    meaning: &str,
) -> Result<Vec<u8>, IssueError> {
    let reasons = not_ready(document.project(), evaluation);
    if !reasons.is_empty() {
        return Err(IssueError::NotReady { reasons });
    }
    let signer = Signer { name: key.name(), meaning: meaning.to_owned(), fingerprint: key.fingerprint().to_string() };
    let issue = Issue { signer: Some(signer), ..issue.clone() };
    let rendered = pages(document, evaluation, &issue)?;
    let place =
        rendered.boxes.first().ok_or(IssueError::NotReady { reasons: vec!["there is no box to sign".to_owned()] })?;
    let request = SignatureRequest {
        name: key.name(),
        meaning: meaning.to_owned(),
        signed_at: issue.at.timestamp(),
        page_index: place.page_index,
        rect: place.rect,
        field_name: "signature1".to_owned(),
    };
    Ok(sign_pdf(&rendered.pdf, key, &request)?)
}

fn attachments(source: &Source<'_>) -> Result<Vec<Attachment>, IssueError> {
    let modified = source.issue.at.timestamp();
    let one = |name: &str, mime: &str, description: &str, relationship, data| Attachment {
        name: name.to_owned(),
        mime: mime.to_owned(),
        description: description.to_owned(),
        relationship,
        modified,
        data,
    };
    let issue = serde_json::to_string_pretty(source.issue).map_err(|e| IssueError::Json(e.to_string()))?;
    let mut all = vec![
        one(
            PROJECT,
            "text/plain",
            "the project with its whole trail",
            Relationship::Source,
            source.document.to_bytes()?,
        ),
        one(
            READINGS,
            "text/csv",
            "all readings",
            Relationship::Data,
            readings_csv(source.document.project()).into_bytes(),
        ),
        one(
            EVALUATION,
            "application/json",
            "the evaluation",
            Relationship::Data,
            content::evaluation_json(source).into_bytes(),
        ),
        one(ISSUE, "application/json", "this issue", Relationship::Supplement, issue.into_bytes()),
    ];
    for (n, import) in (1..).zip(&source.document.project().imports) {
        let Some(bytes) = intake::original(import) else { continue };
        let name = format!("original-{n}-{}", import.name);
        all.push(one(&name, "application/octet-stream", "imported file as it was", Relationship::Data, bytes));
    }
    Ok(all)
}

/// All readings as a table, in order of entry, those set aside included.
#[must_use]
pub fn readings_csv(project: &Project) -> String {
    let mut out = String::from("reading_number,kind,standard,reading,application,look,stage,direction,set_aside\n");
    for r in project.readings.iter() {
        let (kind, standard) = match r.applied {
            Applied::Standard(id) => {
                ("standard", project.standard(id).map(|s| s.value.to_string()).unwrap_or_default())
            }
            Applied::Nothing { .. } => ("zero", String::new()),
        };
        let aside = r.set_aside.as_deref().unwrap_or_default().replace('"', "\"\"");
        let row = [
            r.id.0.to_string(),
            kind.to_owned(),
            standard,
            r.value.to_string(),
            r.application.to_string(),
            r.look.to_string(),
            stage(r).to_owned(),
            direction(r).to_owned(),
            format!("\"{aside}\""),
        ];
        out.push_str(&row.join(","));
        out.push('\n');
    }
    out
}

fn stage(r: &Reading) -> &'static str {
    use crate::readings::Stage;
    match r.stage {
        Stage::AsFound => "as found",
        Stage::AsLeft => "as left",
        Stage::Check => "check",
    }
}

fn direction(r: &Reading) -> &'static str {
    use crate::readings::Direction;
    match r.direction {
        Direction::Rising => "rising",
        Direction::Falling => "falling",
        Direction::TurningPoint => "turning point",
        Direction::None => "",
    }
}
