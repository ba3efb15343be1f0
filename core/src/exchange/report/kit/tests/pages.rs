//! What stands on which page.

use super::super::{Align, Block, Rendered, ReportError, render};
use super::{column, document, heading, paragraph, plot, rendered, row, table, texts};

fn page_of(rendered: &Rendered, word: &str) -> Option<usize> {
    texts(rendered).iter().position(|text| text.contains(word))
}

#[test]
fn a_long_table_runs_over_pages_with_its_head_and_loses_no_cell() {
    let cells = |r: usize| (0..4).map(move |c| format!("r{r}c{c}"));
    let rows =
        (0..300).map(|r| row(&cells(r).collect::<Vec<_>>().iter().map(String::as_str).collect::<Vec<_>>())).collect();
    let columns = ["alpha", "beta", "gamma", "delta"].map(|head| column(head, Align::Left));
    let found = rendered(vec![Block::Table(table(columns.to_vec(), rows))]);
    assert!(found.pages >= 5, "{} pages", found.pages);
    let pages = texts(&found);
    for (i, page) in pages.iter().enumerate() {
        assert_eq!(page.matches("alpha beta gamma delta").count(), 1, "page {i}");
        assert_eq!(page.contains("(continued)"), i > 0, "page {i}");
    }
    let printed: Vec<String> = pages
        .iter()
        .flat_map(|page| page.split_whitespace())
        .filter(|word| word.starts_with('r') && word.contains('c'))
        .map(str::to_owned)
        .collect();
    assert_eq!(printed, (0..300).flat_map(cells).collect::<Vec<_>>());
}

#[test]
fn every_page_says_which_document_and_which_page_it_is() {
    let found = rendered((0..120).map(|i| paragraph(&format!("line {i}"))).collect());
    assert!(found.pages > 2);
    for (i, page) in texts(&found).iter().enumerate() {
        let count = format!("page {} of {}", i + 1, found.pages);
        for word in ["PB-17", count.as_str(), "kept for ten years"] {
            assert!(page.contains(word), "page {i} lacks {word}: {page}");
        }
    }
}

#[test]
fn a_heading_never_stands_alone_at_the_foot_of_a_page() {
    let mut turned = 0;
    for lines in 38..50 {
        let mut blocks: Vec<Block> = (0..lines).map(|i| paragraph(&format!("line {i}"))).collect();
        blocks.push(heading(2, "Pebblehead"));
        let rows = (0..30).map(|_| row(&["Pebblecell"])).collect();
        blocks.push(Block::Table(table(vec![column("a", Align::Left)], rows)));
        let found = rendered(blocks);
        let page = page_of(&found, "Pebblehead");
        assert_eq!(page, page_of(&found, "Pebblecell"), "after {lines} lines");
        turned += usize::from(page == Some(1));
    }
    assert!(turned > 0 && turned < 12, "the cases must straddle the page end");
}

#[test]
fn what_is_kept_together_is_not_parted() {
    let mut turned = 0;
    for lines in 36..48 {
        let mut blocks: Vec<Block> = (0..lines).map(|i| paragraph(&format!("line {i}"))).collect();
        blocks.push(Block::KeepTogether(vec![
            heading(1, "Opening"),
            paragraph("one"),
            paragraph("two"),
            paragraph("Closing"),
        ]));
        let found = rendered(blocks);
        let page = page_of(&found, "Opening");
        assert_eq!(page, page_of(&found, "Closing"), "after {lines} lines");
        turned += usize::from(page == Some(1));
    }
    assert!(turned > 0 && turned < 12, "the cases must straddle the page end");
}

#[test]
fn what_is_kept_together_but_higher_than_a_page_is_still_printed_whole() {
    let inner = (0..200).map(|i| paragraph(&format!("w{i}w"))).collect();
    let found = rendered(vec![Block::KeepTogether(inner)]);
    assert!(found.pages > 2);
    let all = texts(&found).concat();
    assert!((0..200).all(|i| all.contains(&format!("w{i}w"))));
}

#[test]
fn the_end_mark_is_the_last_content_and_stays_with_what_stands_before_it() {
    for lines in 38..52 {
        let mut blocks: Vec<Block> = (0..lines).map(|i| paragraph(&format!("line {i} end"))).collect();
        blocks.push(Block::EndMark("Nothing follows".to_owned()));
        let found = rendered(blocks);
        let pages = texts(&found);
        let last = pages.last().expect("there is a page");
        let mark = last.find("Nothing follows").expect("it stands on the last page");
        let before = last.find(&format!("line {} end", lines - 1));
        assert!(before.is_some_and(|at| at < mark), "after {lines} lines");
    }
}

#[test]
fn an_empty_document_is_one_page() {
    let found = rendered(vec![]);
    assert_eq!(found.pages, 1);
    assert!(texts(&found)[0].contains("page 1 of 1"));
}

#[test]
fn a_row_higher_than_a_page_goes_on_on_the_next() {
    let text: String = (0..2000).map(|i| format!("w{i}w ")).collect();
    let columns = vec![column("long", Align::Left), column("short", Align::Left)];
    let found = rendered(vec![Block::Table(table(columns, vec![row(&[&text, "x"])]))]);
    assert!(found.pages > 1);
    let all = texts(&found).concat();
    assert!((0..2000).all(|i| all.contains(&format!("w{i}w"))));
}

#[test]
fn a_plot_higher_than_a_page_is_refused() {
    let mut tall = plot(vec![]);
    tall.height_pt = 900.0;
    let found = render(&document(vec![Block::Plots(vec![tall])]));
    assert!(matches!(found, Err(ReportError::TooTall { height, room }) if height > 900.0 && room < 800.0));
}

#[test]
fn the_word_across_the_page_is_on_each_and_once_in_the_text() {
    let mut document = document((0..120).map(|i| paragraph(&format!("line {i}"))).collect());
    document.meta.watermark = Some("Practice".to_owned());
    let found = render(&document).expect("it can be rendered");
    assert!(found.pages > 2);
    for (i, page) in texts(&found).iter().enumerate() {
        assert_eq!(page.matches("Practice").count(), 1, "page {i}");
        let marked = super::operations(&found, i as u32 + 1).iter().any(|operation| {
            let operands = format!("{:?}", operation.operands);
            operation.operator == "BDC" && operands.contains("Watermark")
        });
        assert!(marked, "page {i}");
    }
}
