use super::model::{Field, command, text};
use assize_core::project::command::{Act, apply};
use assize_core::project::{Project, command::Command, plan::Limits};

const ALL: [Field; 31] = [
    Field::Number,
    Field::Description,
    Field::Identity,
    Field::Maker,
    Field::Model,
    Field::Serial,
    Field::Channel,
    Field::Condition,
    Field::Received,
    Field::Laboratory,
    Field::Customer,
    Field::Place,
    Field::Method,
    Field::InputName,
    Field::InputUnit,
    Field::OutputName,
    Field::OutputUnit,
    Field::Interval,
    Field::Levels,
    Field::Repeats,
    Field::Order,
    Field::Alpha,
    Field::Beta,
    Field::Together,
    Field::Level,
    Field::LimitSize,
    Field::DecisionRule,
    Field::Declared,
    Field::DeclaredFrom,
    Field::AtStart,
    Field::AtEnd,
];

fn after(project: &Project, command: Command) -> Project {
    let act = Act {
        by: "M. Orrin".into(),
        at: "2026-11-03T09:12:05.000+01:00".parse().unwrap(),
        because: Some("test".into()),
        command,
    };
    apply(project, &act).unwrap()
}

/// A text that every field of its kind accepts and that differs from the default.
fn sample(field: Field) -> &'static str {
    match field {
        Field::Interval => "0.25 … 5",
        Field::Levels => "0.25, 1, 5",
        Field::Repeats | Field::Together => "3",
        Field::Alpha | Field::Beta => "1 %",
        Field::Level => "99 %",
        Field::LimitSize => "0.015",
        Field::AtStart | Field::AtEnd => "temperature 20.3 °C; humidity 45 %",
        Field::Declared => "0.4*x",
        _ => "some words",
    }
}

#[test]
fn what_is_typed_into_any_field_stands_there_afterwards() {
    for field in ALL {
        let mut project = Project::default();
        if field == Field::DeclaredFrom {
            assert!(command(field, "nominal", &project).is_err(), "a source without a function");
            let formula = command(Field::Declared, "0.4*x", &project).unwrap().unwrap();
            project = after(&project, formula);
        }
        let typed = sample(field);
        let made = command(field, typed, &project).unwrap().expect("a change");
        let changed = after(&project, made);
        assert_eq!(text(field, &changed), typed, "{field:?}");
        assert_eq!(command(field, typed, &changed), Ok(None), "{field:?}: no change");
    }
}

#[test]
fn nothing_typed_over_the_start_is_no_change() {
    let project = Project::default();
    for field in ALL {
        let now = text(field, &project);
        assert_eq!(command(field, &now, &project), Ok(None), "{field:?}");
    }
}

#[test]
fn a_comma_is_a_decimal_mark_and_nonsense_is_told() {
    let project = Project::default();
    let limit = command(Field::LimitSize, "0,015", &project).unwrap().unwrap();
    assert_eq!(after(&project, limit).plan.limits, Some(Limits::Absolute(0.015)));
    for (field, typed) in [
        (Field::LimitSize, "-1"),
        (Field::Interval, "5"),
        (Field::Alpha, "0"),
        (Field::Repeats, "2.5"),
        (Field::Levels, "1 2 x"),
        (Field::AtStart, "warm"),
        (Field::Declared, "0.4*"),
    ] {
        assert!(command(field, typed, &project).is_err(), "{field:?} {typed:?}");
    }
}

#[test]
fn the_kind_of_limit_survives_a_new_size() {
    let mut project = Project::default();
    project.plan.limits = Some(Limits::PercentOfSpan(0.3));
    let made = command(Field::LimitSize, "0.5", &project).unwrap().unwrap();
    assert_eq!(after(&project, made).plan.limits, Some(Limits::PercentOfSpan(0.5)));
}
