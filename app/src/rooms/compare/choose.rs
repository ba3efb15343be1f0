//! The question before a choice: which function, and why.

use super::{
    state::{Choosing, State},
    words::Scene,
};
use crate::{
    rooms::{View, Wish},
    widgets::{Question, QuestionState, Reply},
};
use assize_core::{
    project::{
        columns::ColumnSpec,
        command::{ColumnsCommand, Command},
        evaluate::ColumnEvaluation,
    },
    quantity::Text,
};
use eframe::egui::Ui;

/// A choice to be made: the advised column with its reasons, any other with none.
pub(super) fn about(view: &View<'_>, column: &ColumnSpec) -> Choosing {
    let advice = &view.evaluation.advice;
    let advised = advice.column.as_ref() == Some(column);
    let because = if advised { advice.because.join("; ") } else { String::new() };
    Choosing { column: column.clone(), question: QuestionState::with_reason(because) }
}

/// Whether a column can be chosen at all, and is not already.
pub(super) fn possible(view: &View<'_>, index: usize) -> bool {
    let column = &view.evaluation.columns[index];
    column.allowed && column.outcome.is_ok() && view.evaluation.chosen != Some(index)
}

/// Shows the question while there is one; a reason in words is needed.
pub(super) fn show(ui: &Ui, scene: Scene<'_>, state: &mut State, wishes: &mut Vec<Wish>) {
    let Some(choosing) = &mut state.choosing else {
        return;
    };
    let evaluation = scene.view.evaluation;
    let Some(column) = evaluation.columns.iter().find(|c| c.spec == choosing.column) else {
        state.choosing = None;
        return;
    };
    let advised = evaluation.advice.column.as_ref() == Some(&column.spec);
    let (title, confirm) = (format!("Choose {}?", column.head), format!("Choose {}", column.head));
    let body = body(column, advised);
    let question = Question {
        title: &title,
        body: &body,
        reasons: &[],
        reason_label: Some("Reason"),
        confirm: &confirm,
        cancel: "Not now",
    };
    match question.show(ui.ctx(), &mut choosing.question) {
        None => return,
        Some(Reply::Cancelled) => {}
        Some(Reply::Confirmed { reason }) => {
            let command = Command::Columns(ColumnsCommand::Choose(choosing.column.clone()));
            wishes.push(Wish::Enter { command, because: Some(Text::from(reason)) });
        }
    }
    state.choosing = None;
}

fn body(column: &ColumnEvaluation, advised: bool) -> String {
    let which = if advised { "It is the one advised." } else { "It is not the one advised: say why." };
    format!("{}\n{which} The choice and its reason are kept in the trail and printed.", column.formula)
}
