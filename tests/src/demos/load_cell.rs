//! A real calibration: the load cell of NIST's reference data set *Pontius*.

use super::{
    build::{Row, Spec},
    data::temperature,
};
use assize_core::{
    project::{
        command::{ItemField, PlanField},
        plan::{Hazard, Quantity, ZeroState},
    },
    quantity::Text,
    readings::Direction,
    standards::StandardPapers,
};
use serde::Deserialize;

#[derive(Deserialize)]
struct Published {
    x: Vec<serde_json::Number>,
    y: Vec<serde_json::Number>,
}

/// Data as published; the seed plays no part.
pub(super) fn spec(_seed: u64) -> Spec {
    let text = include_str!("../../published/strd/Pontius.json");
    let published: Published = serde_json::from_str(text).expect("the published file is JSON");
    let rows = published.x.iter().zip(&published.y).map(|(x, y)| Row {
        standard: x.to_string(),
        reading: y.to_string(),
        direction: Direction::None,
    });
    Spec {
        file: "load-cell-nist",
        number: "NIST-STRD-PONTIUS",
        item: vec![(ItemField::Description, "Load cell"), (ItemField::Identity, "NIST data set Pontius")],
        plan: vec![
            PlanField::Input(Quantity::new("load", "lb")),
            PlanField::Output(Quantity::new("deflection", "in")),
            PlanField::Interval(Some((150_000.0, 3_000_000.0))),
            PlanField::ZeroState(ZeroState::NotAsked),
            PlanField::Hazards(vec![Hazard::Loads]),
            PlanField::Method(Text::from("as published")),
        ],
        papers: StandardPapers::default(),
        conditions: [temperature("not published"), temperature("not published")],
        rows: rows.collect(),
        heads: ("\"load, lb\"", "\"deflection, in\""),
        story: "Forty readings of a load cell, two runs over twenty loads.\n\
            The line has R² = 0.99999 and is still wrong: it bows, and the repeats say so (F = 214.7 with 18 and 20).\n\
            The quadratic leaves only scatter (F = 0.81 with 17 and 20).\n\
            Its coefficients are certified by NIST to 15 digits; compare them with what is shown here.",
        origin: "Real data: P. Pontius, NIST, Load Cell Calibration; NIST/ITL Statistical Reference Datasets, linear \
            regression, data set Pontius. Units as in the NIST/SEMATECH e-Handbook of Statistical Methods, 4.6.1.",
        ..Spec::default()
    }
}
