//! What may lie over the window: one question or sheet at a time.

mod columns;
mod palette;
mod paths;

pub use columns::Columns;
pub use palette::Palette;
pub use paths::{CopyTo, Projects};

use crate::{
    app::reasons::Ask,
    command::Does,
    rooms::Wish,
    session::Session,
    widgets::{Question, QuestionState, ReasonKey, Reply},
};
use eframe::egui::Context;
use std::path::PathBuf;

/// The question or sheet that is open.
pub enum Dialog {
    /// Who is at the bench.
    Name(QuestionState),
    /// A change that needs a reason.
    Reason {
        /// The change, still without its reason.
        wish: Box<Wish>,
        /// How to ask.
        ask: Ask,
        /// What was typed so far.
        state: QuestionState,
    },
    /// An end of the file that was cut short.
    Torn(QuestionState),
    /// The window is to close while entries are not on disk.
    Leave(QuestionState),
    /// Which project, table or PDF to open.
    Projects(Projects),
    /// Where to copy the project to.
    CopyTo(CopyTo),
    /// Which command.
    Palette(Palette),
    /// Which functions stand side by side.
    Columns(Columns),
}

/// What came of a dialog.
#[derive(Debug, PartialEq)]
pub enum Outcome {
    /// It was closed without an answer.
    Closed,
    /// A name.
    Name(String),
    /// A change with its reason.
    Reasoned(Wish),
    /// A change that needs none.
    Wished(Wish),
    /// The end that was cut short may go.
    DropTorn,
    /// The window may close, and what is not on disk is lost.
    Leave,
    /// Something to open.
    Open(PathBuf),
    /// A practice project, by its place in the list.
    Practise(usize),
    /// A new project.
    StartOwn,
    /// Where the copy goes.
    CopyTo(PathBuf),
    /// A command.
    Does(Does),
}

impl Dialog {
    /// Asks for a name, with a proposal.
    #[must_use]
    pub fn name(proposal: &str) -> Self {
        Self::Name(QuestionState::with_reason(proposal))
    }

    /// Asks for the reason of a change.
    #[must_use]
    pub fn reason(wish: Wish, ask: Ask) -> Self {
        Self::Reason { wish: Box::new(wish), ask, state: QuestionState::default() }
    }

    /// Shows the dialog; the answer comes in the frame in which it is given.
    pub fn show(&mut self, ctx: &Context, session: &Session) -> Option<Outcome> {
        match self {
            Self::Name(state) => name(ctx, state),
            Self::Reason { wish, ask, state } => reason(ctx, wish, ask, state),
            Self::Torn(state) => torn(ctx, state, session),
            Self::Leave(state) => leave(ctx, state, session),
            Self::Projects(projects) => projects.show(ctx),
            Self::CopyTo(copy) => copy.show(ctx),
            Self::Palette(palette) => palette.show(ctx),
            Self::Columns(columns) => columns.show(ctx),
        }
    }
}

fn name(ctx: &Context, state: &mut QuestionState) -> Option<Outcome> {
    let question = Question {
        title: "Who is at the bench?",
        body: "Every entry carries the name of a person. It can be changed at any time.",
        reasons: &[],
        reason_label: Some("Name"),
        confirm: "Go on",
        cancel: "Not now",
    };
    Some(match question.show(ctx, state)? {
        Reply::Cancelled => Outcome::Closed,
        Reply::Confirmed { reason } => Outcome::Name(reason),
    })
}

fn reason(ctx: &Context, wish: &Wish, ask: &Ask, state: &mut QuestionState) -> Option<Outcome> {
    let keys: Vec<ReasonKey<'_>> = ask.keys.iter().map(|(key, text)| ReasonKey { key: *key, text }).collect();
    let question = Question {
        title: &ask.title,
        body: &ask.body,
        reasons: &keys,
        reason_label: Some(if keys.is_empty() { "Reason" } else { "Another reason" }),
        confirm: ask.confirm,
        cancel: "Leave it",
    };
    match (question.show(ctx, state)?, wish) {
        (Reply::Confirmed { reason }, Wish::Enter { command, .. }) => {
            let because = Some(reason.into());
            Some(Outcome::Reasoned(Wish::Enter { command: command.clone(), because }))
        }
        _ => Some(Outcome::Closed),
    }
}

fn torn(ctx: &Context, state: &mut QuestionState, session: &Session) -> Option<Outcome> {
    let told = session.shelf().torn().map(crate::session::Torn::sentence).unwrap_or_default();
    let entries = match session.document().acts().len() {
        0 => "There is no entry before it".to_owned(),
        1 => "The one entry before it is whole".to_owned(),
        n => format!("All {n} entries before it are whole"),
    };
    let body = format!(
        "{told} {entries}. The file has not been touched yet: \
         only the end that was cut short will be taken off."
    );
    let question = Question {
        title: "The file ends in the middle of an entry",
        body: &body,
        reasons: &[],
        reason_label: None,
        confirm: "Take the torn end off",
        cancel: "Leave the file alone",
    };
    Some(match question.show(ctx, state)? {
        Reply::Cancelled => Outcome::Closed,
        Reply::Confirmed { .. } => Outcome::DropTorn,
    })
}

fn leave(ctx: &Context, state: &mut QuestionState, session: &Session) -> Option<Outcome> {
    let why = session.shelf().failure().unwrap_or_default();
    let body = format!("{why}. “Copy to…” writes the whole project elsewhere. Closing now loses what is not on disk.");
    let question = Question {
        title: "The latest entries are not on disk",
        body: &body,
        reasons: &[],
        reason_label: None,
        confirm: "Close and lose them",
        cancel: "Stay",
    };
    Some(match question.show(ctx, state)? {
        Reply::Cancelled => Outcome::Closed,
        Reply::Confirmed { .. } => Outcome::Leave,
    })
}
