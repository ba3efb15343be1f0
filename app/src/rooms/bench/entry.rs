//! From what is typed in the entry row to a new reading; knows no window.

use assize_core::{
    project::{
        Project,
        command::{Command, NewReading, ReadingsCommand, What},
    },
    quantity::number::parse_number,
    readings::{Direction, Stage},
};

/// What the entry row carries besides standard and reading.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Beside {
    /// Direction of approach.
    pub direction: Direction,
    /// Stage.
    pub stage: Stage,
    /// Another look at the application of the row above, instead of a new application.
    pub again: bool,
}

/// The command for a typed standard and reading.
///
/// # Errors
/// What is wrong, and in which column (0 standard, 1 reading).
pub fn reading(standard: &str, typed: &str, beside: Beside, project: &Project) -> Result<Command, (usize, String)> {
    let x = number(standard, "the standard").map_err(|why| (0, why))?;
    let y = number(typed, "the reading").map_err(|why| (1, why))?;
    let what = What::Standard(standard.trim().into(), x);
    let mut row = NewReading::new(what, typed.trim(), y);
    row.direction = beside.direction;
    row.stage = beside.stage;
    if beside.again {
        row.application = Some(
            above(project, x)
                .ok_or_else(|| (0, format!("there is no application of {} to look at again", standard.trim())))?,
        );
    }
    Ok(Command::Readings(ReadingsCommand::Add(vec![row])))
}

/// The command for a typed zero reading; `between` is what was applied since the zero before.
///
/// # Errors
/// What is wrong.
pub fn zero(typed: &str, between: &str, stage: Stage) -> Result<Command, String> {
    let y = number(typed, "the zero reading")?;
    let between = Some(between.trim()).filter(|text| !text.is_empty());
    let mut row = NewReading::new(What::Nothing(between.map(Into::into)), typed.trim(), y);
    row.stage = stage;
    Ok(Command::Readings(ReadingsCommand::Add(vec![row])))
}

fn number(typed: &str, what: &str) -> Result<f64, String> {
    parse_number(typed, None).map_err(|why| format!("{what}: {why}"))
}

/// The latest application of the standard with this value.
fn above(project: &Project, x: f64) -> Option<u32> {
    let id = project.standards.iter().find(|s| s.value.total_cmp(&x).is_eq())?.id;
    let of_it = |applied: &assize_core::readings::Applied| matches!(applied, assize_core::readings::Applied::Standard(other) if *other == id);
    let readings: Vec<_> = project.readings.iter().filter(|r| of_it(&r.applied)).collect();
    readings.last().map(|r| r.application)
}

/// What to put into the entry row for the next standard: the same again until the plan's repeats are there, then
/// the plan's next level; without planned levels the same again.
#[must_use]
pub fn next_standard(typed: &str, project: &Project) -> String {
    let same = typed.trim().to_owned();
    let levels = &project.plan.levels;
    let Ok(x) = parse_number(typed, None) else { return same };
    let here = levels.iter().position(|l| l.total_cmp(&x).is_eq());
    let Some(here) = here else { return same };
    let repeats = project.plan.repeats.unwrap_or(1) as usize;
    let done = project
        .standards
        .iter()
        .filter(|s| s.value.total_cmp(&x).is_eq())
        .map(|s| readings_of(project, s.id))
        .sum::<usize>();
    if done % repeats.max(1) != 0 {
        return same;
    }
    levels.get(here + 1).map_or(same, |next| assize_core::trail::sentences::words::number(*next))
}

fn readings_of(project: &Project, id: assize_core::standards::StandardId) -> usize {
    let of_it = |r: &&assize_core::readings::Reading| matches!(r.applied, assize_core::readings::Applied::Standard(other) if other == id);
    project.readings.iter().filter(of_it).count()
}

#[cfg(test)]
pub(super) mod tests {
    use super::*;
    use assize_core::project::command::{Act, apply};

    pub(crate) fn act(command: Command) -> Act {
        Act {
            by: "M. Orrin".into(),
            at: "2026-11-03T09:12:05.000+01:00".parse().unwrap(),
            because: Some("because".into()),
            command,
        }
    }

    pub(crate) fn after(project: &Project, act: Act) -> Project {
        apply(project, &act).unwrap()
    }

    pub(crate) fn begun(readings: &[(&str, &str)], zeros: &[&str]) -> Project {
        let mut project = Project::default();
        for (x, y) in readings {
            let command = reading(x, y, Beside::default(), &project).unwrap();
            project = after(&project, act(command));
        }
        for y in zeros {
            project = after(&project, act(zero(y, "", Stage::AsFound).unwrap()));
        }
        project
    }

    pub(crate) fn again(x: &str, y: &str, application: u32) -> Command {
        let what = What::Standard(x.into(), x.parse().unwrap());
        let mut row = NewReading::new(what, y, y.parse().unwrap());
        row.application = Some(application);
        Command::Readings(ReadingsCommand::Add(vec![row]))
    }

    #[test]
    fn a_typed_row_keeps_its_text_and_takes_either_mark() {
        let beside = Beside { direction: Direction::Falling, stage: Stage::AsLeft, again: false };
        let command = reading("0,25", " 0,1035 ", beside, &Project::default()).unwrap();
        let project = after(&Project::default(), act(command));
        let r = project.readings.get(0).unwrap();
        assert_eq!((&*r.raw, r.value), ("0,1035", 0.1035));
        assert_eq!((r.direction, r.stage), (Direction::Falling, Stage::AsLeft));
        assert_eq!(&*project.standards[0].raw, "0,25");
        assert_eq!(project.standards[0].value, 0.25);
    }

    #[test]
    fn what_cannot_be_read_names_its_column() {
        let project = Project::default();
        let wrong = |x, y| reading(x, y, Beside::default(), &project).unwrap_err().0;
        assert_eq!(wrong("", "1"), 0);
        assert_eq!(wrong("1", "x"), 1);
        assert_eq!(wrong("1.000,5", "1"), 0);
        assert!(zero("inf", "", Stage::AsFound).is_err());
    }

    #[test]
    fn another_look_shares_the_latest_application_of_its_standard() {
        let project = begun(&[("1", "0.4"), ("2", "0.8"), ("1", "0.41")], &[]);
        let beside = Beside { again: true, ..Beside::default() };
        let project = after(&project, act(reading("1.0", "0.42", beside, &project).unwrap()));
        let last = project.readings.get(3).unwrap();
        assert_eq!((last.application, last.look), (3, 2));
        let none = reading("5", "2", beside, &project).unwrap_err();
        assert!(none.1.contains("no application of 5"), "{}", none.1);
    }

    #[test]
    fn the_standard_repeats_or_follows_the_plan() {
        let mut project = begun(&[("1", "0.4")], &[]);
        assert_eq!(next_standard("1", &project), "1", "no levels are planned");
        project.plan.levels = vec![1.0, 2.5];
        assert_eq!(next_standard("1", &project), "2.5");
        project.plan.repeats = Some(2);
        assert_eq!(next_standard("1", &project), "1", "one of two");
        project = after(&project, act(again("1", "0.41", 2)));
        assert_eq!(next_standard("1", &project), "2.5");
        assert_eq!(next_standard("2.5", &project), "2.5", "nothing of it yet counts as a full round of none");
        assert_eq!(next_standard("7", &project), "7", "not planned");
    }
}
