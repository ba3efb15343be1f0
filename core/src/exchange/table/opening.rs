//! What stands above the first row: comment lines, and the line `sep=;` that some programs write.

use super::{
    layout::{names_reading, number_like},
    options::{Delimiter, TableOptions, parse_delimiter},
    split::{Start, split},
};

/// The top of a text.
#[derive(Debug, Clone)]
pub(super) struct Opening {
    /// Comment lines without their `#`, and a `sep=` line, top to bottom.
    pub(super) preamble: Vec<String>,
    /// Where the rows begin.
    pub(super) start: Start,
    /// The delimiter of a `sep=` line.
    pub(super) delimiter: Option<Delimiter>,
    /// Whether the first row is a comment line that names the columns.
    pub(super) heads_in_comment: bool,
    /// The text behind the `#` of the last comment line.
    last_comment: Option<Start>,
}

impl Opening {
    /// Reads the top of a text: blank lines, comment lines, a `sep=` line.
    pub(super) fn of(text: &str) -> Self {
        let mut opening = Self {
            preamble: Vec::new(),
            start: Start { byte: 0, line: 1 },
            delimiter: None,
            heads_in_comment: false,
            last_comment: None,
        };
        while opening.start.byte < text.len() && opening.take_line(text) {}
        opening
    }

    /// Takes one line if it belongs to the top.
    fn take_line(&mut self, text: &str) -> bool {
        let rest = &text[self.start.byte..];
        let end = rest.find(['\n', '\r']).unwrap_or(rest.len());
        let line = rest[..end].trim();
        // Not from the trimmed line: the mark may be a tab.
        let mark = rest[..end].strip_prefix("sep=").and_then(|mark| parse_delimiter(mark).ok());
        if let Some(mark) = mark {
            self.delimiter = Some(mark);
            self.preamble.push(rest[..end].to_owned());
        } else if let Some(comment) = comment(line) {
            let hashes = rest.find(comment).unwrap_or(end);
            self.last_comment = Some(Start { byte: self.start.byte + hashes, line: self.start.line });
            self.preamble.push(comment.to_owned());
        } else if !line.is_empty() {
            return false;
        }
        let line_end = if rest[end..].starts_with("\r\n") { 2 } else { usize::from(end < rest.len()) };
        self.start.byte += end + line_end;
        self.start.line += usize::from(line_end > 0);
        true
    }

    /// Begins at the last comment line when it names the columns of the numbers right below.
    pub(super) fn with_heads(&self, text: &str, delimiter: Option<Delimiter>, options: &TableOptions) -> Self {
        let mut opening = self.clone();
        let Some(start) = self.last_comment.filter(|_| options.header_rows.is_none()) else {
            return opening;
        };
        let line = |byte: usize| text[byte..].split(['\n', '\r']).next().unwrap_or_default();
        let cells = |byte: usize| {
            let row = split(line(byte), Start { byte: 0, line: 1 }, delimiter);
            row.ok().and_then(|split| split.rows.into_iter().next()).map_or(Vec::new(), |row| row.cells)
        };
        let (heads, first) = (cells(start.byte), cells(self.start.byte));
        let same_width = heads.len() == first.len();
        if same_width && names_reading(&heads, options) && first.iter().any(|cell| number_like(cell)) {
            opening.start = start;
            opening.heads_in_comment = true;
            opening.preamble.pop();
        }
        opening
    }
}

/// The text of a comment line; a lone `#` before a delimiter is the head of a column instead.
fn comment(line: &str) -> Option<&str> {
    let behind = line.strip_prefix('#')?;
    let is_head = behind.starts_with([',', ';', '\t']);
    (!is_head).then(|| behind.trim_start_matches('#').trim())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn comments_and_the_sep_line_come_off_the_top() {
        let text = "\r\n# Skerrow Tideworks\r\n## gauge 4\r\nsep=;\r\na;b\r\n";
        let opening = Opening::of(text);
        assert_eq!(opening.preamble, ["Skerrow Tideworks", "gauge 4", "sep=;"]);
        assert_eq!(opening.delimiter, Some(Delimiter::Semicolon));
        assert_eq!(opening.start, Start { byte: text.len() - 5, line: 5 });
    }

    #[test]
    fn a_comment_that_names_the_columns_is_the_header() {
        let read = |text: &str| Opening::of(text).with_heads(text, Some(Delimiter::Comma), &TableOptions::default());
        let opening = read("# gauge 4\n# standard,reading\n1,2\n");
        assert!(opening.heads_in_comment);
        assert_eq!(opening.preamble, ["gauge 4"]);
        assert_eq!(opening.start, Start { byte: 12, line: 2 });
        for text in ["# standard,reading\nstandard,reading\n1,2\n", "# reading by Ann\n1,2\n", "# reading\n1,2\n"] {
            assert!(!read(text).heads_in_comment, "{text}");
        }
    }

    #[test]
    fn a_column_may_be_headed_by_a_hash() {
        assert_eq!(Opening::of("#,standard,reading\n1,2,3\n").start.byte, 0);
    }
}
