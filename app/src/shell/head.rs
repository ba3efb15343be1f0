//! What the masthead says; knows no window.

use crate::session::Session;
use assize_core::{
    exchange::report::not_ready,
    project::{Project, about::Kind, command::Act, evaluate::Evaluation},
    quantity::Moment,
    trail::sentences::{did, words},
};

/// The texts of the masthead.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Head {
    /// The item.
    pub title: String,
    /// `tension, kN → bridge output, mV/V · 0.25 … 5 kN`.
    pub quantities: String,
    /// `at the bench: M. Orrin`.
    pub bench: String,
    /// `2 to do`; `nothing to do` when the record is complete.
    pub to_do: String,
    /// Whether every entry is on disk, and since when.
    pub disk: Disk,
    /// What *take back* would take back; `None` when there is nothing.
    pub take_back: Option<String>,
    /// What *put back* would put back; `None` when there is nothing.
    pub put_back: Option<String>,
    /// Whether this is a practice project.
    pub practice: bool,
}

/// Where the entries are.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Disk {
    /// Nothing was entered yet.
    Nothing,
    /// All on disk.
    All(Option<Moment>),
    /// Not on disk, and why.
    Not(String),
}

impl Disk {
    /// The words of the masthead.
    #[must_use]
    pub fn shown(&self) -> String {
        match self {
            Self::Nothing => "nothing entered yet".to_owned(),
            Self::All(Some(at)) => format!("all on disk {}", at.clock_seconds()),
            Self::All(None) => "all on disk".to_owned(),
            Self::Not(_) => "not on disk".to_owned(),
        }
    }
}

/// The masthead of a session.
#[must_use]
pub fn head(session: &Session) -> Head {
    let document = session.document();
    let project = session.project();
    let bench = match session.by().or(project.at_bench.as_ref()) {
        Some(name) => format!("at the bench: {name}"),
        None => "at the bench: nobody yet".to_owned(),
    };
    // Told without old values: what the project held before that entry is not known here.
    let told = |act: &Act| did(&act.command, None);
    Head {
        title: project.item.title(),
        quantities: quantities(project),
        bench,
        to_do: to_do_words(to_do(project, session.evaluation())),
        disk: disk(session),
        take_back: document.can_take_back().map(told),
        put_back: document.can_put_back().map(told),
        practice: project.kind == Kind::Practice,
    }
}

fn disk(session: &Session) -> Disk {
    match session.shelf().failure() {
        Some(why) => Disk::Not(why.to_owned()),
        None if session.document().acts().is_empty() => Disk::Nothing,
        None => Disk::All(session.shelf().synced()),
    }
}

fn quantities(project: &Project) -> String {
    let plan = &project.plan;
    let mut text = format!("{} → {}", plan.input.heading(), plan.output.heading());
    if let Some((low, high)) = plan.interval {
        let unit = plan.input.unit.as_str();
        let ends = format!(" · {} … {} {unit}", words::number(low), words::number(high));
        text.push_str(ends.trim_end());
    }
    text
}

/// How many things stand between the project and its signature; being for practice is none of them.
#[must_use]
pub fn to_do(project: &Project, evaluation: &Evaluation) -> usize {
    not_ready(project, evaluation).len() - usize::from(project.kind == Kind::Practice)
}

fn to_do_words(n: usize) -> String {
    match n {
        0 => "nothing to do".to_owned(),
        n => format!("{n} to do"),
    }
}
