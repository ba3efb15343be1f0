//! How small a signal is more than nothing: band, threshold, limits, by name.

use super::Source;
use crate::{
    exchange::report::kit::{Align, Block, Cell, Column, ParagraphStyle, Row, Table},
    project::{
        evaluate::{NearZero, near_zero::odds},
        figures::{Figure, find},
    },
    quantity::format::with_unit,
};

pub(super) fn blocks(source: &Source<'_>) -> Vec<Block> {
    let evaluation = source.evaluation;
    let mut all = vec![Block::Heading { level: 1, text: "Near zero".to_owned() }];
    match &evaluation.near_zero {
        NearZero::OneLine(text) => all.push(body(format!("{}.", capital(text)))),
        NearZero::SmallestChange { .. } => {
            all.push(body(
                "This quantity has no state of nothing: the smallest change at the lowest standard is given."
                    .to_owned(),
            ));
            all.push(table(source, &["smallest_change"]));
        }
        NearZero::Band { gap, .. } => {
            all.push(body(band(source)));
            if let Some((low, high)) = gap {
                let unit = source.project().plan.input.unit.as_str();
                let high = with_unit(&crate::project::evaluate::words::plain(*high), unit);
                let low = crate::project::evaluate::words::plain(*low);
                all.push(body(format!("Between {low} and {high}, the lowest standard, nothing was measured.")));
            }
            all.push(table(
                source,
                &["detection_limit", "decision_threshold", "critical_value", "assured", "traced", "simple"],
            ));
        }
    }
    all
}

fn body(text: String) -> Block {
    Block::Paragraph { text, style: ParagraphStyle::Body }
}

fn capital(text: &str) -> String {
    let mut chars = text.chars();
    chars.next().map(|c| c.to_uppercase().chain(chars).collect()).unwrap_or_default()
}

fn band(source: &Source<'_>) -> String {
    let q = source.project().plan.detection;
    let shown = |key: &str| find(&source.evaluation.figures, key).map(Figure::shown).unwrap_or_default();
    format!(
        "{} zero applications, mean {}, SD {}. Band in which the next single zero reading lies in {} of 100 cases: {}. \
         False alarms {}, a detection limit missed {}, a later result is the mean of {}.",
        source.evaluation.zeros.means.len(),
        shown("zero.mean"),
        shown("zero.sd"),
        100.0 * source.project().plan.level,
        shown("zero.next_reading"),
        odds(q.alpha),
        odds(q.beta),
        q.k
    )
}

/// One row a figure, one column a function.
fn table(source: &Source<'_>, keys: &[&str]) -> Block {
    let fitted: Vec<_> = source.evaluation.columns.iter().filter(|c| c.outcome.is_ok()).collect();
    let mut columns = vec![Column { head: vec![String::new()], align: Align::Left, weight: 1.4 }];
    columns.extend(fitted.iter().map(|c| Column { head: vec![c.head.clone()], align: Align::Right, weight: 1.4 }));
    let mut rows = Vec::new();
    for key in keys {
        for suffix in ["", ".above", ".below"] {
            let key = format!("{key}{suffix}");
            let Some(label) = fitted.iter().find_map(|c| find(&c.figures, &key)).map(|f| f.label.clone()) else {
                continue;
            };
            let mut cells = vec![Cell::new(&label)];
            let shown = |c: &&crate::project::evaluate::ColumnEvaluation| {
                find(&c.figures, &key).map_or_else(|| "–".to_owned(), Figure::shown)
            };
            cells.extend(fitted.iter().map(|c| Cell::new(shown(c))));
            rows.push(Row { cells, shade: false });
        }
    }
    Block::Table(Table {
        caption: Some("Limits by function".to_owned()),
        columns,
        rows,
        note: Some(
            "Detection limit: net form after ISO 11843 with the noncentral t, its range from the doubt of the zeros' SD. \
             Traced: the same signal read through the curve, without a stated miss rate. Simple: upper edge of the band traced."
                .to_owned(),
        ),
    })
}
