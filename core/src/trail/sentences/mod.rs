//! The trail in plain sentences: who, what, old and new where known, when, why.

mod about;
mod data;
mod plan;
#[cfg(test)]
mod tests;
pub mod words;

use super::Document;
use crate::{
    project::{
        Project,
        command::{Act, ColumnsCommand, Command, RecordCommand},
    },
    quantity::{Moment, Text},
};

/// One entry of the trail, told.
#[derive(Debug, Clone, PartialEq)]
pub struct Told {
    /// Number of the entry, from 1.
    pub number: u32,
    /// When.
    pub at: Moment,
    /// Who.
    pub by: Text,
    /// What was done, as the rest of a sentence: `corrected reading 4 from 0.402 to 0.420: typed wrong`.
    pub did: String,
    /// Why, where a reason was given.
    pub because: Option<Text>,
}

impl Told {
    /// The whole sentence.
    #[must_use]
    pub fn sentence(&self) -> String {
        sentence_of(self.at, &self.by, &self.did, self.because.as_deref())
    }

    /// Whether the sentence holds a text, whatever the case of its letters.
    #[must_use]
    pub fn mentions(&self, text: &str) -> bool {
        self.sentence().to_lowercase().contains(&text.trim().to_lowercase())
    }
}

/// One act as a sentence, without knowledge of what stood before.
#[must_use]
pub fn sentence(act: &Act) -> String {
    let did = did(&act.command, None);
    sentence_of(act.at, &act.by, &did, act.because.as_deref())
}

/// One command as the rest of a sentence after the name; `before` is the project it was applied to, where known.
#[must_use]
pub fn did(command: &Command, before: Option<&Project>) -> String {
    let before = Before { project: before };
    match command {
        Command::About(c) => about::tell(c, &before),
        Command::Plan(c) => plan::tell(c, &before),
        Command::Standards(c) => data::standards(c, &before),
        Command::Readings(c) => data::readings(c, &before),
        Command::Columns(c) => columns(c, &before),
        Command::Record(c) => record(c),
        Command::TakeBack => "took back the latest change".to_owned(),
        Command::PutBack => "put back what was taken back last".to_owned(),
    }
}

/// The whole trail, told with old and new values. Acts that no project would accept are told without them.
#[must_use]
pub fn tell_all(acts: &[Act]) -> Vec<Told> {
    let mut teller = Teller::default();
    teller.follow(acts);
    teller.told
}

/// Tells a growing trail entry by entry, so that a long one is not told anew after each entry.
#[derive(Debug, Clone, Default)]
pub struct Teller {
    document: Document,
    told: Vec<Told>,
}

impl Teller {
    /// Tells what was added since the last call; starts anew when the trail is another one.
    pub fn follow(&mut self, acts: &[Act]) {
        let same = self.document.acts().len() <= acts.len()
            && self.document.acts().last() == acts[..self.document.acts().len()].last();
        if !same {
            *self = Self::default();
        }
        for act in &acts[self.told.len()..] {
            let did = self.one(act);
            self.told.push(Told {
                number: u32::try_from(self.told.len()).unwrap_or(u32::MAX - 1) + 1,
                at: act.at,
                by: act.by.clone(),
                did,
                because: act.because.clone(),
            });
            // A refused act cannot stand in a document; it is told and changes nothing.
            let _refused = self.document.enter(act.clone());
        }
    }

    /// What was told so far, oldest first.
    #[must_use]
    pub fn told(&self) -> &[Told] {
        &self.told
    }

    fn one(&self, act: &Act) -> String {
        let other = match act.command {
            Command::TakeBack => self.document.can_take_back().map(|a| ("took back: ", a)),
            Command::PutBack => self.document.can_put_back().map(|a| ("put back: ", a)),
            _ => None,
        };
        match other {
            Some((verb, back)) => format!("{verb}{}", did(&back.command, None)),
            None => did(&act.command, Some(self.document.project())),
        }
    }
}

fn sentence_of(at: Moment, by: &str, did: &str, because: Option<&str>) -> String {
    let why = because.map_or(String::new(), |w| format!(" Reason: {}.", one_line(w).trim_end_matches('.')));
    format!("{}, {} {did}.{why}", at.readable(), one_line(by))
}

/// What stood before an act, as far as it is known.
struct Before<'a> {
    project: Option<&'a Project>,
}

impl Before<'_> {
    fn input_unit(&self) -> &str {
        self.project.map_or("", |p| p.plan.input.unit.as_str())
    }

    fn output_unit(&self) -> &str {
        self.project.map_or("", |p| p.plan.output.unit.as_str())
    }

    /// `changed WHAT from OLD to NEW`, `set WHAT to NEW`, `cleared WHAT (it was OLD)`.
    fn change<F: Fn(&Project) -> Option<String>>(&self, what: &str, old: F, new: &str) -> String {
        let new = one_line(new);
        let old = self.project.and_then(old).map(|o| one_line(&o)).filter(|o| !o.is_empty());
        match (old, new.is_empty()) {
            (Some(old), true) => format!("cleared {what} (it was {old})"),
            (None, true) => format!("cleared {what}"),
            (Some(old), false) => format!("changed {what} from {old} to {new}"),
            (None, false) => format!("set {what} to {new}"),
        }
    }
}

fn columns(command: &ColumnsCommand, before: &Before<'_>) -> String {
    match command {
        ColumnsCommand::Show(columns) => {
            let heads: Vec<String> = columns.iter().map(|c| c.head()).collect();
            format!("compared {}", heads.join(", "))
        }
        ColumnsCommand::Stage(stage) => format!("looked at the readings {}", words::stage_looked_at(*stage)),
        ColumnsCommand::Declare(declared) => before.change(
            "the declared function",
            |p| p.declared.as_ref().map(|d| d.formula.to_string()),
            &format!("{} ({})", declared.formula, declared.origin),
        ),
        ColumnsCommand::Choose(column) => match before.project.and_then(|p| p.choice.as_ref()) {
            Some(old) => format!("chose {} instead of {}", column.head(), old.column.head()),
            None => format!("chose {}", column.head()),
        },
        ColumnsCommand::Withdraw => match before.project.and_then(|p| p.choice.as_ref()) {
            Some(old) => format!("withdrew the choice of {}", old.column.head()),
            None => "withdrew the choice".to_owned(),
        },
    }
}

fn record(command: &RecordCommand) -> String {
    match command {
        RecordCommand::NotApplicable(row) => {
            format!("marked “{}” of the report as not applicable", one_line(row))
        }
        RecordCommand::MarkRead(code) => {
            format!("marked the finding “{}” as read", code.replace('_', " "))
        }
        RecordCommand::Signed(signed) => format!(
            "signed the record as {}, {} (key {})",
            one_line(&signed.name),
            one_line(&signed.meaning),
            signed.fingerprint
        ),
    }
}

/// A text on one line, without space around it.
fn one_line(text: &str) -> String {
    text.split_whitespace().collect::<Vec<_>>().join(" ")
}
