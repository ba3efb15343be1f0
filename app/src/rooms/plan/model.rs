//! Which text fields the plan has, what stands in them, and which command a typed text becomes.

use assize_core::{
    model::formula::Formula,
    project::{
        Project,
        columns::Declared,
        command::{AboutCommand, ColumnsCommand, Command, ItemField, PlanCommand, PlanField},
        plan::{Limits, Quantity},
    },
    quantity::{Text, number::parse_number},
    trail::sentences::words,
};

use super::lists;

/// A field into which text is typed.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Field {
    Number,
    Description,
    Identity,
    Maker,
    Model,
    Serial,
    Channel,
    Condition,
    Received,
    Laboratory,
    Customer,
    Place,
    Method,
    InputName,
    InputUnit,
    OutputName,
    OutputUnit,
    FullScale,
    Interval,
    Levels,
    Repeats,
    Order,
    Alpha,
    Beta,
    Together,
    Target,
    Level,
    LimitSize,
    DecisionRule,
    Declared,
    DeclaredFrom,
    AtStart,
    AtEnd,
}

impl Field {
    /// Its label.
    #[must_use]
    pub fn label(self) -> &'static str {
        match self {
            Self::Number => "Number of the record",
            Self::Description => "Item",
            Self::Identity => "Identity",
            Self::Maker => "Maker",
            Self::Model => "Model",
            Self::Serial => "Serial number",
            Self::Channel => "Channel",
            Self::Condition => "Condition on receipt",
            Self::Received => "Received",
            Self::Laboratory => "Laboratory",
            Self::Customer => "Customer",
            Self::Place => "Place of work",
            Self::Method => "Method, revision",
            Self::InputName => "Input",
            Self::InputUnit => "Input unit",
            Self::OutputName => "Output",
            Self::OutputUnit => "Output unit",
            Self::FullScale => "Full scale",
            Self::Interval => "Measuring interval",
            Self::Levels => "Levels",
            Self::Repeats => "Repeats of each",
            Self::Order => "Order",
            Self::Alpha => "False alarms α",
            Self::Beta => "Missed β",
            Self::Together => "Mean of k",
            Self::Target => "Quantified at",
            Self::Level => "Level of bands",
            Self::LimitSize => "Limit ±",
            Self::DecisionRule => "Decision rule",
            Self::Declared => "Declared function of x",
            Self::DeclaredFrom => "Declared by",
            Self::AtStart => "At the start",
            Self::AtEnd => "At the end",
        }
    }

    /// What stands in soft ink while the field is empty.
    #[must_use]
    pub fn hint(self) -> &'static str {
        match self {
            Self::Number => "unique, e.g. ST-2026-0142",
            Self::Description => "what it is, e.g. tension link",
            Self::Identity => "its mark, e.g. TL-07",
            Self::Condition => "as received",
            Self::Received => "e.g. 2026-10-28",
            Self::Laboratory => "name and address",
            Self::InputName => "what is applied, e.g. tension",
            Self::OutputName => "what is shown, e.g. bridge output",
            Self::InputUnit => "e.g. kN",
            Self::OutputUnit => "e.g. mV/V",
            Self::FullScale => "largest reading",
            Self::Interval => "e.g. 0.25 … 5",
            Self::Levels => "e.g. 0.25 0.5 1 2 5",
            Self::Order => "e.g. up, then down",
            Self::DecisionRule => "as agreed, e.g. guard band w = U",
            Self::AtStart | Self::AtEnd => "e.g. temperature 20.3 °C; humidity 45 %",
            Self::Method => "e.g. SW-12 rev 4",
            Self::Declared => "e.g. 0.4*x",
            Self::DeclaredFrom => "e.g. nominal, last record, device",
            _ => "",
        }
    }

    fn item(self) -> Option<ItemField> {
        Some(match self {
            Self::Description => ItemField::Description,
            Self::Identity => ItemField::Identity,
            Self::Maker => ItemField::Maker,
            Self::Model => ItemField::Model,
            Self::Serial => ItemField::Serial,
            Self::Channel => ItemField::Channel,
            Self::Condition => ItemField::Condition,
            Self::Received => ItemField::Received,
            _ => return None,
        })
    }
}

/// The field in which a finding about something missing is answered.
#[must_use]
pub fn field_of(code: &str) -> Option<Field> {
    match code {
        "number-missing" => Some(Field::Number),
        "item-missing" => Some(Field::Identity),
        "input-missing" => Some(Field::InputName),
        _ => None,
    }
}

/// What stands in the field at present.
#[must_use]
pub fn text(field: Field, project: &Project) -> String {
    let (plan, item) = (&project.plan, &project.item);
    let of = |text: &Option<Text>| text.as_deref().unwrap_or_default().to_owned();
    match field {
        Field::Number => of(&project.number),
        Field::Description => of(&item.description),
        Field::Identity => of(&item.identity),
        Field::Maker => of(&item.maker),
        Field::Model => of(&item.model),
        Field::Serial => of(&item.serial),
        Field::Channel => of(&item.channel),
        Field::Condition => of(&item.condition),
        Field::Received => of(&item.received),
        Field::Laboratory => of(&plan.laboratory),
        Field::Customer => of(&plan.customer),
        Field::Place => of(&plan.place),
        Field::Method => of(&plan.method),
        Field::InputName => plan.input.name.to_string(),
        Field::InputUnit => plan.input.unit.to_string(),
        Field::OutputName => plan.output.name.to_string(),
        Field::OutputUnit => plan.output.unit.to_string(),
        Field::FullScale => plan.full_scale.map_or(String::new(), words::number),
        Field::Interval => plan
            .interval
            .map_or(String::new(), |(low, high)| format!("{} … {}", words::number(low), words::number(high))),
        Field::Levels => words::numbers(&plan.levels),
        Field::Repeats => plan.repeats.map_or(String::new(), |n| n.to_string()),
        Field::Order => of(&plan.order),
        Field::Alpha => words::percent(plan.detection.alpha),
        Field::Beta => words::percent(plan.detection.beta),
        Field::Together => plan.detection.k.to_string(),
        Field::Target => words::percent(plan.detection.target),
        Field::Level => words::percent(plan.level),
        Field::LimitSize => match plan.limits {
            None | Some(Limits::NoVerdictWanted) => String::new(),
            Some(Limits::Absolute(n) | Limits::PercentOfReading(n) | Limits::PercentOfSpan(n)) => words::number(n),
        },
        Field::DecisionRule => of(&plan.decision_rule),
        Field::Declared => project.declared.as_ref().map_or(String::new(), |d| d.formula.to_string()),
        Field::DeclaredFrom => project.declared.as_ref().map_or(String::new(), |d| d.origin.to_string()),
        Field::AtStart => words::conditions(&project.conditions.start),
        Field::AtEnd => words::conditions(&project.conditions.end),
    }
}

/// The command a typed text becomes; `None` when nothing changes.
///
/// # Errors
/// What is wrong with the text, as a sentence for the line under the field.
pub fn command(field: Field, typed: &str, project: &Project) -> Result<Option<Command>, String> {
    let typed = typed.trim();
    if typed == text(field, project) {
        return Ok(None);
    }
    if let Some(item) = field.item() {
        return Ok(Some(Command::About(AboutCommand::Item(item, typed.into()))));
    }
    if matches!(field, Field::Declared | Field::DeclaredFrom) {
        return declared(field, typed, project).map(Some);
    }
    let about = match field {
        Field::Number => Some(AboutCommand::Number(typed.into())),
        Field::AtStart => Some(AboutCommand::ConditionsAtStart(lists::conditions(typed)?)),
        Field::AtEnd => Some(AboutCommand::ConditionsAtEnd(lists::conditions(typed)?)),
        _ => None,
    };
    if let Some(about) = about {
        return Ok(Some(Command::About(about)));
    }
    let set = plan_field(field, typed, project)?;
    Ok(Some(Command::Plan(PlanCommand::Set(set))))
}

fn plan_field(field: Field, typed: &str, project: &Project) -> Result<PlanField, String> {
    let plan = &project.plan;
    let named = |fallback: &str| {
        let name = if typed.is_empty() { fallback } else { typed };
        name.to_owned()
    };
    Ok(match field {
        Field::InputName => PlanField::Input(Quantity::new(&named("value"), plan.input.unit.as_str())),
        Field::InputUnit => PlanField::Input(Quantity::new(&plan.input.name, typed)),
        Field::OutputName => PlanField::Output(Quantity::new(&named("reading"), plan.output.unit.as_str())),
        Field::OutputUnit => PlanField::Output(Quantity::new(&plan.output.name, typed)),
        Field::Interval => PlanField::Interval(lists::interval(typed)?),
        Field::Levels => PlanField::Levels(lists::numbers(typed)?),
        Field::Repeats if typed.is_empty() => PlanField::Repeats(None),
        Field::Repeats => PlanField::Repeats(Some(lists::count(typed)?)),
        Field::Order => PlanField::Order(typed.into()),
        Field::FullScale if typed.is_empty() => PlanField::FullScale(None),
        Field::FullScale => PlanField::FullScale(Some(parse_number(typed, None).map_err(|e| e.to_string())?)),
        Field::Alpha | Field::Beta | Field::Together | Field::Target => detection(field, typed, project)?,
        Field::Level => PlanField::Level(lists::percent(typed)?),
        Field::LimitSize => PlanField::Limits(Some(limit(typed, plan.limits.as_ref())?)),
        Field::DecisionRule => PlanField::DecisionRule(typed.into()),
        Field::Method => PlanField::Method(typed.into()),
        Field::Place => PlanField::Place(typed.into()),
        Field::Customer => PlanField::Customer(typed.into()),
        Field::Laboratory => PlanField::Laboratory(typed.into()),
        other => return Err(format!("{} is no field of the plan", other.label())),
    })
}

/// The declared function with its source; a function without one counts as nominal.
fn declared(field: Field, typed: &str, project: &Project) -> Result<Command, String> {
    let now = project.declared.as_ref();
    let (formula, origin) = match (field, now) {
        (Field::Declared, Some(now)) => (Text::from(typed), now.origin.clone()),
        (Field::Declared, None) => (Text::from(typed), Text::from("nominal")),
        (_, Some(now)) => (now.formula.clone(), Text::from(typed)),
        (_, None) => return Err("type the function first".to_owned()),
    };
    formula.parse::<Formula>().map_err(|why| why.to_string())?;
    Ok(Command::Columns(ColumnsCommand::Declare(Declared { formula, origin })))
}

fn detection(field: Field, typed: &str, project: &Project) -> Result<PlanField, String> {
    let mut question = project.plan.detection;
    match field {
        Field::Alpha => question.alpha = lists::percent(typed)?,
        Field::Beta => question.beta = lists::percent(typed)?,
        Field::Target => question.target = lists::percent(typed)?,
        _ => question.k = lists::count(typed)?,
    }
    Ok(PlanField::Detection(question))
}

fn limit(typed: &str, now: Option<&Limits>) -> Result<Limits, String> {
    let size = parse_number(typed, None).map_err(|e| e.to_string())?;
    if size <= 0.0 {
        return Err("a limit is larger than 0; it stands on both sides".to_owned());
    }
    Ok(match now {
        Some(Limits::PercentOfReading(_)) => Limits::PercentOfReading(size),
        Some(Limits::PercentOfSpan(_)) => Limits::PercentOfSpan(size),
        _ => Limits::Absolute(size),
    })
}
