//! From characters to rows of cells, each with its line in the file.
//!
//! Edge cases: cells in quotation marks may hold delimiters and line ends; a quotation mark that nothing closes
//! would swallow the rest of the file and is refused; line ends may be `\n`, `\r\n` or `\r`; lines that are blank,
//! hold only delimiters, or begin with `#` are left out.

use super::{Row, encoding::line_ends, error::TableError, options::Delimiter};

/// Where the rows begin.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Start {
    /// Byte in the text.
    pub(super) byte: usize,
    /// Line in the file, from 1.
    pub(super) line: usize,
}

/// The rows of a text.
#[derive(Debug, Default)]
pub(super) struct Split {
    /// Rows that hold anything, top to bottom.
    pub(super) rows: Vec<Row>,
    /// Lines left out because they begin with `#`.
    pub(super) comments: Vec<usize>,
    /// Lines left out because they hold only delimiters.
    pub(super) hollow: Vec<usize>,
}

/// Splits the text from `start` on; without a delimiter each line is one cell.
pub(super) fn split(text: &str, start: Start, delimiter: Option<Delimiter>) -> Result<Split, TableError> {
    let bytes = &text.as_bytes()[start.byte..];
    let mut reader = reader(bytes, delimiter);
    let mut record = csv::ByteRecord::new();
    let mut split = Split::default();
    let (mut line, mut begin) = (start.line, 0);
    loop {
        let from = past_line_ends(bytes, reader.position().byte());
        if !read(&mut reader, &mut record) {
            break;
        }
        line += line_ends(&bytes[begin..from]);
        begin = from;
        let cells: Vec<String> = record.iter().map(|cell| String::from_utf8_lossy(cell).into_owned()).collect();
        if bytes[begin..].first() == Some(&b'#') && cells.first().is_some_and(|cell| cell != "#") {
            split.comments.push(line);
        } else if cells.iter().any(|cell| !cell.trim().is_empty()) {
            split.rows.push(Row { line, cells });
        } else if cells.len() > 1 {
            split.hollow.push(line);
        }
    }
    if leaves_quote_open(&bytes[begin..], delimiter) {
        return Err(TableError::UnclosedQuote { line });
    }
    Ok(split)
}

fn reader(bytes: &[u8], delimiter: Option<Delimiter>) -> csv::Reader<&[u8]> {
    // NUL is refused when the bytes are decoded, so it separates nothing.
    let byte = match delimiter {
        Some(Delimiter::Comma) => b',',
        Some(Delimiter::Semicolon) => b';',
        Some(Delimiter::Tab) => b'\t',
        None => b'\0',
    };
    csv::ReaderBuilder::new().has_headers(false).flexible(true).delimiter(byte).from_reader(bytes)
}

fn read(reader: &mut csv::Reader<&[u8]>, record: &mut csv::ByteRecord) -> bool {
    reader.read_byte_record(record).expect("bytes in memory give no reading error and rows of any width are allowed")
}

/// The reader stands between `\r` and `\n`, or before blank lines; the row itself begins behind them.
fn past_line_ends(bytes: &[u8], position: u64) -> usize {
    let position = usize::try_from(position).map_or(bytes.len(), |p| p.min(bytes.len()));
    let blank = bytes[position..].iter().take_while(|b| matches!(b, b'\r' | b'\n')).count();
    position + blank
}

/// A line put behind the last row is a row of its own unless a quotation mark is still open.
fn leaves_quote_open(last_row: &[u8], delimiter: Option<Delimiter>) -> bool {
    if !last_row.contains(&b'"') {
        return false;
    }
    let extended = [last_row, b"\nx"].concat();
    let mut reader = reader(&extended, delimiter);
    let mut record = csv::ByteRecord::new();
    read(&mut reader, &mut record);
    !read(&mut reader, &mut record)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn rows(text: &str, delimiter: Option<Delimiter>) -> Vec<(usize, Vec<String>)> {
        let split = split(text, Start { byte: 0, line: 1 }, delimiter).unwrap();
        split.rows.into_iter().map(|row| (row.line, row.cells)).collect()
    }

    #[test]
    fn lines_are_counted_through_blank_lines_and_quoted_line_ends() {
        for end in ["\n", "\r\n", "\r"] {
            let text = ["a,b", "", "1,\"x", "y\"", "", "", "2,3", ""].join(end);
            let lines: Vec<usize> = rows(&text, Some(Delimiter::Comma)).iter().map(|row| row.0).collect();
            assert_eq!(lines, [1, 3, 7], "{end:?}");
        }
    }

    #[test]
    fn comments_and_hollow_rows_are_set_aside() {
        let text = "#,a\n# it's, \"so\"\n;;\n,,\n1,#2\n#3,4\n";
        let split = split(text, Start { byte: 0, line: 1 }, Some(Delimiter::Comma)).unwrap();
        assert_eq!(split.comments, [2, 6]);
        assert_eq!(split.hollow, [4]);
        let lines: Vec<usize> = split.rows.iter().map(|row| row.line).collect();
        assert_eq!(lines, [1, 3, 5]);
    }

    #[test]
    fn without_a_delimiter_a_line_is_a_cell() {
        let wanted = vec![(1, vec!["1,5;2\t3".to_owned()]), (2, vec!["4".to_owned()])];
        assert_eq!(rows("1,5;2\t3\n4", None), wanted);
    }

    #[test]
    fn a_quotation_mark_that_nothing_closes_is_refused() {
        let read = |text| split(text, Start { byte: 0, line: 1 }, Some(Delimiter::Comma));
        assert_eq!(read("a,b\n1,\"2\n3,4\n").unwrap_err(), TableError::UnclosedQuote { line: 2 });
        assert!(read("a,b\n1,\"2\"").is_ok());
        assert!(read("a,b\n1,2\"").is_ok(), "within a cell it is a character like others");
        assert!(read("a,b\n1,\"2\"\"\"\n").is_ok());
    }
}
