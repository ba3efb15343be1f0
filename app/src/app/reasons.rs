//! Which changes need a reason, and how it is asked for; knows no window.

use assize_core::{
    project::{
        Project,
        command::{ColumnsCommand, Command, ReadingsCommand, RecordCommand, StandardsCommand},
    },
    readings::Slip,
    trail::sentences::did,
};

/// A reason at one key.
pub type OneKey = (char, &'static str);

/// How a reason is asked for.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Ask {
    /// The question.
    pub title: String,
    /// What follows from a yes.
    pub body: String,
    /// Usual reasons.
    pub keys: &'static [OneKey],
    /// The word on the button.
    pub confirm: &'static str,
}

const ASIDE: &[OneKey] = &[
    ('1', "not settled"),
    ('2', "disturbed while reading"),
    ('3', "wrong standard applied"),
    ('4', "instrument not ready"),
];
const MOVED: &[OneKey] = &[('1', "typed wrong"), ('2', "wrong row")];
const PAPERS: &[OneKey] = &[('1', "typed wrong"), ('2', "read wrong from the certificate")];

/// How to ask for the reason of a command; `None` when it needs none.
#[must_use]
pub fn wanted(command: &Command, project: &Project) -> Option<Ask> {
    let did = did(command, Some(project));
    let ask = |title: &str, keys, confirm| Ask {
        title: title.to_owned(),
        body: format!("The trail and the report will say: {did}."),
        keys,
        confirm,
    };
    Some(match command {
        Command::Plan(_) => {
            let since = project.plan.fixed?;
            Ask {
                title: "Change the plan after the first reading?".to_owned(),
                body: format!(
                    "The plan is fixed since {}. The trail and the report will say: {did}.",
                    since.readable()
                ),
                keys: &[],
                confirm: "Change",
            }
        }
        Command::Readings(ReadingsCommand::SetAside(id)) => {
            ask(&format!("Set reading {} aside?", id.0), ASIDE, "Set aside")
        }
        Command::Readings(ReadingsCommand::CountAgain(id)) => {
            ask(&format!("Let reading {} count again?", id.0), &[], "Count again")
        }
        Command::Readings(ReadingsCommand::Reapply { id, .. }) => {
            ask(&format!("Another standard for reading {}?", id.0), MOVED, "Change")
        }
        Command::Readings(ReadingsCommand::Correct { id, slip: Slip::Other, .. }) => {
            ask(&format!("Correct reading {}: for which reason?", id.0), &[], "Correct")
        }
        Command::Standards(StandardsCommand::Value { .. }) if !project.readings.is_empty() => {
            ask("Another value for a standard that has readings?", PAPERS, "Change")
        }
        Command::Columns(ColumnsCommand::Choose(column)) => ask(&format!("Choose {}?", column.head()), &[], "Choose"),
        Command::Columns(ColumnsCommand::Withdraw) => ask("Withdraw the choice?", &[], "Withdraw"),
        Command::Record(RecordCommand::NotApplicable(_)) => ask("Why is this not applicable?", &[], "Not applicable"),
        _ => return None,
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use assize_core::{
        model::Family,
        project::columns::ColumnSpec,
        project::command::{Act, PlanCommand, PlanField, Refused, apply},
        project::command::{NewReading, What},
        readings::ReadingId,
    };

    fn begun() -> Project {
        let row = NewReading::new(What::Standard("1".into(), 1.0), "0.4", 0.4);
        let add = Command::Readings(ReadingsCommand::Add(vec![row]));
        apply(&Project::default(), &act(add)).unwrap()
    }

    fn act(command: Command) -> Act {
        Act { by: "M. Orrin".into(), at: "2026-11-03T09:12:05.000+01:00".parse().unwrap(), because: None, command }
    }

    fn commands() -> Vec<Command> {
        let id = ReadingId(1);
        let readings = [
            ReadingsCommand::SetAside(id),
            ReadingsCommand::CountAgain(id),
            ReadingsCommand::Reapply { id, what: What::Nothing(None) },
            ReadingsCommand::Correct { id, raw: "1".into(), value: 1.0, slip: Slip::Other },
            ReadingsCommand::Correct { id, raw: "1".into(), value: 1.0, slip: Slip::ReadWrong },
            ReadingsCommand::LetStand(id),
        ];
        let mut all: Vec<Command> = readings.into_iter().map(Command::Readings).collect();
        let method = PlanField::Method("B".into());
        all.push(Command::Plan(PlanCommand::Set(method)));
        let value = StandardsCommand::Value { id: assize_core::standards::StandardId(1), raw: "2".into(), value: 2.0 };
        all.push(Command::Standards(value));
        all.push(Command::Columns(ColumnsCommand::Choose(ColumnSpec::plain(Family::Log))));
        all.push(Command::Columns(ColumnsCommand::Withdraw));
        all.push(Command::Record(RecordCommand::NotApplicable("customer".into())));
        all.push(Command::Record(RecordCommand::MarkRead("shape".into())));
        all.push(Command::TakeBack);
        all
    }

    #[test]
    fn a_reason_is_asked_for_exactly_where_the_project_refuses_without_one() {
        let project = begun();
        for command in commands() {
            let refused = match apply(&project, &act(command.clone())) {
                Err(Refused::PlanFixed { .. } | Refused::ReasonNeeded { .. }) => true,
                Ok(_) | Err(_) => false,
            };
            assert_eq!(wanted(&command, &project).is_some(), refused, "{command:?}");
        }
    }

    #[test]
    fn a_plan_that_is_not_fixed_asks_nothing() {
        let set = Command::Plan(PlanCommand::Set(PlanField::Method("B".into())));
        assert_eq!(wanted(&set, &Project::default()), None);
        let ask = wanted(&set, &begun()).unwrap();
        assert!(ask.body.contains("set the method to B"), "{}", ask.body);
    }
}
