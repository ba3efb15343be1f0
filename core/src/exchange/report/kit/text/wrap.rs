//! Where a line may end.

use super::faces::joins;
use super::shape::Cluster;

/// A stretch of clusters that makes one line.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Span {
    /// First cluster.
    pub from: usize,
    /// One past the last cluster; blanks at the end are left out.
    pub to: usize,
    /// Whether the line ends inside a word.
    pub broken: bool,
}

/// Rounding slack as a part of the size of the letters: a text fits into its own width.
const SLACK: f32 = 1e-3;

/// Cuts clusters into lines no wider than `width`, a part of the size of the letters.
///
/// Edge cases: no clusters give one empty line; a cluster wider than the line stands alone on it.
pub(super) fn spans(clusters: &[Cluster], width: f32) -> Vec<Span> {
    let mut spans = Vec::new();
    let mut from = 0;
    loop {
        let end = line_end(clusters, from, width);
        let mut to = end;
        while to > from && blank(clusters[to - 1].first) {
            to -= 1;
        }
        let broken = end < clusters.len() && to == end;
        spans.push(Span { from, to, broken });
        if end >= clusters.len() {
            return spans;
        }
        from = end;
    }
}

/// One past the last cluster of the line that starts at `from`, blanks at its end included.
fn line_end(clusters: &[Cluster], from: usize, width: f32) -> usize {
    let mut used = 0.0;
    let mut good = None;
    for (i, cluster) in clusters.iter().enumerate().skip(from) {
        let over = used + cluster.width > width + SLACK;
        if over && !blank(cluster.first) && i > from {
            return good.unwrap_or_else(|| inside_word(clusters, from, i));
        }
        used += cluster.width;
        if may_end_after(clusters, i) {
            good = Some(i + 1);
        }
    }
    clusters.len()
}

/// Where to break a word that spans `from..over`: after a sign that suggests it, else anywhere
/// but before an accent or inside a number's decimals.
fn inside_word(clusters: &[Cluster], from: usize, over: usize) -> usize {
    let digit = |i: usize| clusters.get(i).is_some_and(|c| c.first.is_ascii_digit());
    let suggests = |i: &usize| {
        let sign = clusters[*i].first;
        "-–—/_.,:;=+·|\\@&".contains(sign) && !(matches!(sign, '.' | ',') && digit(i - 1) && digit(i + 1))
    };
    let anywhere = |i: &usize| !joins(clusters[*i].first);
    (from + 1..over)
        .rev()
        .find(suggests)
        .map(|i| i + 1)
        .or_else(|| (from + 1..=over).rev().find(anywhere))
        .unwrap_or(over)
}

/// Whether a line may end after cluster `i` without breaking a word: at the last of several
/// blanks, and after a hyphen between letters.
fn may_end_after(clusters: &[Cluster], i: usize) -> bool {
    let Some(next) = clusters.get(i + 1) else {
        return true;
    };
    let here = clusters[i].first;
    if blank(here) {
        return !blank(next.first);
    }
    let before = i.checked_sub(1).map(|p| clusters[p].first);
    matches!(here, '-' | '–') && next.first.is_alphabetic() && before.is_some_and(char::is_alphabetic)
}

/// Whether a character is a blank at which a line may end. Thin, figure and no-break blanks hold
/// a number and its unit together.
fn blank(c: char) -> bool {
    matches!(c, ' ' | '\u{2002}'..='\u{2006}' | '\u{2008}' | '\u{200A}' | '\u{200B}' | '\u{3000}')
}

/// Widths of the whole and of its longest word, as parts of the size of the letters.
pub(super) fn needs(clusters: &[Cluster]) -> (f32, f32) {
    let (mut whole, mut trailing, mut word, mut longest) = (0.0_f32, 0.0_f32, 0.0_f32, 0.0_f32);
    for (i, cluster) in clusters.iter().enumerate() {
        if blank(cluster.first) {
            trailing += cluster.width;
        } else {
            whole += trailing + cluster.width;
            trailing = 0.0;
            word += cluster.width;
        }
        if may_end_after(clusters, i) {
            longest = longest.max(word);
            word = 0.0;
        }
    }
    (whole, longest)
}
