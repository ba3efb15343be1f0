//! Findings, cautions, what was set aside, taken back and tried, how to check, signatures, end.

use super::{Source, number};
use crate::{
    exchange::report::kit::{Align, Block, Cell, Column, ParagraphStyle, Row, SignatureBox, Table},
    project::cautions,
};

pub(super) fn blocks(source: &Source<'_>) -> Vec<Block> {
    let mut all = vec![findings(source)];
    all.extend(counts(source));
    all.extend(cautions_block(source));
    all.extend(check(source));
    all.extend(signature(source));
    all.push(Block::EndMark(format!("End of record {}", number(source.project()))));
    all
}

fn findings(source: &Source<'_>) -> Block {
    let rows =
        source.evaluation.findings.iter().filter(|f| f.code != "not-chosen" || source.evaluation.provisional).map(
            |f| Row {
                cells: vec![Cell::new(f.severity.to_string()), Cell::new(f.place.to_string()), Cell::new(&f.message)],
                shade: false,
            },
        );
    let column = |head: &str, weight| Column { head: vec![head.to_owned()], align: Align::Left, weight };
    let rows: Vec<Row> = rows.collect();
    let note = rows.is_empty().then(|| "There are no findings.".to_owned());
    Block::Table(Table {
        caption: Some("Findings".to_owned()),
        columns: vec![column("", 0.5), column("concerns", 1.2), column("what was found", 5.0)],
        rows,
        note,
    })
}

fn counts(source: &Source<'_>) -> Vec<Block> {
    let tally = source.document.tally();
    let data = &source.evaluation.data;
    let text = format!(
        "Readings set aside: {}. Readings taken back: {}. Corrections: {}. Columns tried: {}. Changes of the plan after \
         the first reading: {}. Entries in the trail: {}.",
        data.set_aside,
        tally.readings_taken_back,
        tally.corrected,
        source.evaluation.columns.len().max(tally.columns_tried.len()),
        tally.plan_changes_after_fixing,
        tally.entries
    );
    vec![
        Block::Heading { level: 1, text: "Trail".to_owned() },
        Block::Paragraph { text, style: ParagraphStyle::Body },
        Block::Paragraph {
            text: format!("Digest of the trail: {}", source.document.digest().hex()),
            style: ParagraphStyle::Small,
        },
    ]
}

fn cautions_block(source: &Source<'_>) -> Vec<Block> {
    let mut all = vec![Block::Heading { level: 1, text: "Cautions".to_owned() }];
    let texts = cautions::texts(&source.project().plan.hazards);
    all.extend(texts.into_iter().map(|text| Block::Paragraph { text: text.to_owned(), style: ParagraphStyle::Small }));
    let only = "These results relate only to the item named above.";
    all.push(Block::Paragraph { text: only.to_owned(), style: ParagraphStyle::Small });
    all
}

fn check(source: &Source<'_>) -> Vec<Block> {
    let text = "This file carries the project with its whole trail, the raw readings and the evaluation. \
        `assize verify FILE.pdf` checks the signature and the trail, evaluates the attached project afresh and compares \
        every printed figure. A signature shown as valid by a reader of PDF files says that the file is unaltered; whose \
        key it is, only the fingerprint tells.";
    vec![
        Block::Heading { level: 1, text: "How to check this document".to_owned() },
        Block::Paragraph { text: text.replace('`', ""), style: ParagraphStyle::Body },
        Block::Paragraph {
            text: format!("Composed by program version {}, renderer {}.", source.issue.program, source.issue.renderer),
            style: ParagraphStyle::Small,
        },
    ]
}

fn signature(source: &Source<'_>) -> Option<Block> {
    let signer = source.issue.signer.as_ref()?;
    let lines = vec![
        source.issue.at.readable(),
        format!("key {}", signer.fingerprint),
        "electronic signature over the whole file; no second person has checked it".to_owned(),
    ];
    Some(Block::SignatureBoxes(vec![SignatureBox {
        id: "signature".to_owned(),
        heading: format!("{}, {}", signer.name, signer.meaning),
        lines,
    }]))
}
