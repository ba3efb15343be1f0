//! `assize fit`: fits and compares.

use super::{Failed, load, print};
use assize_core::{
    exchange::fit_json,
    fit::Weights,
    model::{Family, TypedFormula},
    project::{
        columns::{Axes, ColumnSpec, Declared, first_columns},
        command::{ColumnsCommand, Command, PlanCommand, PlanField},
        evaluate::{Evaluation, evaluate},
        plan::DetectionQuestion,
    },
    quantity::Text,
    readings::Stage,
    trail::Document,
};
use clap::Args;
use std::path::PathBuf;

/// Options of `fit`.
#[derive(Debug, Args)]
pub struct Options {
    /// A table or a project.
    data: PathBuf,
    /// A function: line, line-zero, one-point, quadratic, cubic, polynomial:N, log, power, exponential,
    /// hyperbola, rational, logistic4, logistic5, steinhart-hart, beta, callendar-van-dusen, formula,
    /// declared. May be repeated.
    #[arg(long)]
    family: Vec<String>,
    /// A function with its weights, e.g. line@1/x2. May be repeated.
    #[arg(long)]
    fit: Vec<String>,
    /// Weights of every --family: equal, replicates, typed, 1/x, 1/x2, 1/y, 1/y2, 1/s2, fitted.
    #[arg(long, default_value = "equal")]
    weights: String,
    /// Takes the errors of the standards into the fit of every column.
    #[arg(long)]
    both_axes: bool,
    /// The formula of the family `formula`, e.g. "b1*(1-exp(-b2*x))".
    #[arg(long)]
    formula: Option<String>,
    /// Start values of its coefficients, e.g. b1=500,b2=1e-4.
    #[arg(long)]
    start: Option<String>,
    /// The stage to fit: as-found, as-left, check.
    #[arg(long)]
    stage: Option<String>,
    /// Relative standard uncertainty at the quantification limit.
    #[arg(long)]
    target: Option<f64>,
    /// A table of zero readings.
    #[arg(long)]
    zeros: Option<PathBuf>,
    /// The declared function in x, e.g. "4 + 1.6*x".
    #[arg(long)]
    declared: Option<String>,
    /// Level of bands and intervals.
    #[arg(long)]
    level: Option<f64>,
    /// False-alarm rate of the decision threshold.
    #[arg(long)]
    alpha: Option<f64>,
    /// Rate of missing the detection limit.
    #[arg(long)]
    beta: Option<f64>,
    /// A later result is the mean of so many applications.
    #[arg(long)]
    future_k: Option<u32>,
    /// Prints one JSON document instead of a summary.
    #[arg(long)]
    json: bool,
    #[command(flatten)]
    table: load::TableArgs,
}

/// Carries it out.
pub fn run(options: &Options) -> Result<(), Failed> {
    let mut document = source(options)?;
    ask(&mut document, options)?;
    let evaluation = evaluate(document.project());
    if evaluation.columns.iter().all(|c| c.outcome.is_err()) {
        let reasons: Vec<String> = evaluation
            .columns
            .iter()
            .map(|c| format!("{}: {}", c.head, c.outcome.as_ref().err().cloned().unwrap_or_default()))
            .collect();
        return Err(Failed::Wrong(format!(
            "{}: nothing can be fitted. {}",
            options.data.display(),
            reasons.join("; ")
        )));
    }
    if options.json {
        print(&format!("{:#}", fit_json::document(document.project(), &evaluation)));
    } else {
        print(&summary(&evaluation));
    }
    Ok(())
}

fn source(options: &Options) -> Result<Document, Failed> {
    if load::is_project(&crate::platform::read(&options.data)?) {
        return load::project(&options.data);
    }
    let standards = load::table(&options.data, &options.table, false)?;
    let zeros = options.zeros.as_ref().map(|path| load::table(path, &options.table, true)).transpose()?;
    load::in_memory(&standards, zeros.as_ref())
}

/// Puts the options into the project in memory, as its commands would.
fn ask(document: &mut Document, options: &Options) -> Result<(), Failed> {
    let because = Some("asked on the command line");
    let mut commands = Vec::new();
    let set = |field| Command::Plan(PlanCommand::Set(field));
    commands.extend(options.level.map(|level| set(PlanField::Level(level))));
    let old = document.project().plan.detection;
    let question = DetectionQuestion {
        alpha: options.alpha.unwrap_or(old.alpha),
        beta: options.beta.unwrap_or(old.beta),
        k: options.future_k.unwrap_or(old.k),
        target: options.target.unwrap_or(old.target),
        ..old
    };
    if question != old {
        commands.push(set(PlanField::Detection(question)));
    }
    commands.extend(options.declared.as_ref().map(|formula| {
        let formula = Text::from(formula.as_str());
        Command::Columns(ColumnsCommand::Declare(Declared { formula, origin: Text::from("command line") }))
    }));
    if let Some(text) = &options.stage {
        commands.push(Command::Columns(ColumnsCommand::Stage(Some(stage(text)?))));
    }
    let mut columns = columns(options)?;
    if columns.is_empty() && document.project().columns.is_empty() && options.declared.is_some() {
        columns = first_columns();
        columns.push(ColumnSpec::plain(Family::Declared));
    }
    if !columns.is_empty() {
        commands.push(Command::Columns(ColumnsCommand::Show(columns)));
    }
    for command in commands {
        load::enter(document, command, "command line", because)?;
    }
    Ok(())
}

fn columns(options: &Options) -> Result<Vec<ColumnSpec>, Failed> {
    let weights: Weights = options.weights.parse()?;
    let mut columns: Vec<ColumnSpec> = Vec::new();
    for name in &options.family {
        columns.push(ColumnSpec { weights, ..ColumnSpec::plain(family(name, options)?) });
    }
    for text in &options.fit {
        columns.push(column(text)?);
    }
    if columns.is_empty() && options.formula.is_some() {
        columns.push(ColumnSpec { weights, ..ColumnSpec::plain(family("formula", options)?) });
    }
    if columns.is_empty() && (weights != Weights::Equal || options.both_axes) {
        columns = first_columns().into_iter().map(|c| ColumnSpec { weights, ..c }).collect();
    }
    if options.both_axes {
        for column in columns.iter_mut().filter(|c| c.family != Family::Declared) {
            column.axes = Axes::Both;
        }
    }
    Ok(columns)
}

/// A family by its name; `formula` takes its expression and start values from their own options.
fn family(name: &str, options: &Options) -> Result<Family, Failed> {
    if name != "formula" {
        return Ok(name.parse()?);
    }
    let Some(expression) = &options.formula else {
        return Err(Failed::Wrong("--family formula needs --formula, e.g. --formula \"b1*(1-exp(-b2*x))\"".to_owned()));
    };
    Ok(Family::Formula(TypedFormula::new(expression, options.start.as_deref().unwrap_or_default())?))
}

fn stage(text: &str) -> Result<Stage, Failed> {
    match text {
        "as-found" => Ok(Stage::AsFound),
        "as-left" => Ok(Stage::AsLeft),
        "check" => Ok(Stage::Check),
        _ => Err(Failed::Wrong(format!("--stage {text:?}: as-found, as-left or check would be accepted"))),
    }
}

/// `F@W`, or `F` with equal weights.
pub(super) fn column(text: &str) -> Result<ColumnSpec, Failed> {
    let (family, weights) = text.rsplit_once('@').unwrap_or((text, "equal"));
    Ok(ColumnSpec { weights: weights.parse()?, ..ColumnSpec::plain(family.parse()?) })
}

fn summary(evaluation: &Evaluation) -> String {
    let mut lines = Vec::new();
    for column in &evaluation.columns {
        lines.push(format!("{}  {}", column.head, column.formula));
        match &column.outcome {
            Err(reason) => lines.push(format!("  {reason}")),
            Ok(_) => {
                lines.push(format!("  {}", column.captions.residuals.text));
                lines.extend(column.figures.iter().map(|f| format!("  {:<24} {}", f.label, f.shown())));
            }
        }
    }
    let advised = evaluation.advice.column.as_ref().map_or_else(|| "none".to_owned(), ColumnSpec::head);
    lines.push(format!("Advised: {advised}"));
    lines.extend(evaluation.advice.because.iter().map(|b| format!("  {b}")));
    lines.extend(evaluation.findings.iter().map(|f| format!("{}: {}: {}", f.severity, f.place, f.message)));
    lines.join("\n")
}
