//! Columns of the comparison, the declared function, the choice.

use super::{Act, Refused, reason};
use crate::{
    model::formula::Formula,
    project::{
        Project,
        columns::{Choice, ColumnSpec, Declared},
    },
    readings::Stage,
};
use serde::{Deserialize, Serialize};

/// Changes of columns and choice.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum ColumnsCommand {
    /// Shows these columns, one to six.
    Show(Vec<ColumnSpec>),
    /// Looks at this stage; `None`: as left once there is such a reading, else as found.
    Stage(Option<Stage>),
    /// Declares a function.
    Declare(Declared),
    /// Chooses a column; needs a reason.
    Choose(ColumnSpec),
    /// Withdraws the choice; needs a reason.
    Withdraw,
}

pub(super) fn apply(project: &mut Project, command: &ColumnsCommand, act: &Act) -> Result<(), Refused> {
    match command {
        ColumnsCommand::Show(columns) => show(project, columns),
        ColumnsCommand::Stage(stage) => {
            project.stage = *stage;
            Ok(())
        }
        ColumnsCommand::Declare(declared) => {
            declared.formula.parse::<Formula>().map_err(|e| Refused::NotUsable {
                what: "declared function",
                found: format!("{}: {e}", declared.formula),
                accepted: "ordinary algebra in x is accepted, e.g. 0.1 + 0.4*x − 0.003*x^2",
            })?;
            project.declared = Some(declared.clone());
            Ok(())
        }
        ColumnsCommand::Choose(column) => {
            if !project.plan.allows(&column.family) {
                return Err(Refused::NotUsable {
                    what: "choice",
                    found: column.head(),
                    accepted: "only functions that the plan allows can be chosen; change the plan with a reason first",
                });
            }
            let because = reason(act, "the choice")?;
            project.choice = Some(Choice { column: column.clone(), because, by: act.by.clone(), at: act.at });
            Ok(())
        }
        ColumnsCommand::Withdraw => {
            reason(act, "withdrawing the choice")?;
            project.choice.take().map(|_| ()).ok_or(Refused::NothingTo("nothing is chosen"))
        }
    }
}

fn show(project: &mut Project, columns: &[ColumnSpec]) -> Result<(), Refused> {
    let mut distinct = columns.to_vec();
    distinct.sort();
    distinct.dedup();
    if columns.is_empty() || columns.len() > 6 || distinct.len() != columns.len() {
        return Err(Refused::NotUsable {
            what: "columns",
            found: columns.iter().map(ColumnSpec::head).collect::<Vec<_>>().join(", "),
            accepted: "one to six different columns are accepted",
        });
    }
    project.columns = columns.to_vec();
    Ok(())
}
