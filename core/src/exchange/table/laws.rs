//! What holds for every file.

use super::*;
use proptest::prelude::*;

/// Cells as they occur, sound and unsound.
fn cell() -> impl Strategy<Value = String> {
    prop_oneof![
        4 => "[0-9]{1,3}([.,][0-9]{1,4})?",
        1 => "[-+0-9.,eE' \"#a-z]{0,8}",
        1 => proptest::sample::select(vec!["standard", "reading", "kind", "zero", "kN", "[V]", "▲", "", "1.000,9"])
            .prop_map(str::to_owned),
    ]
}

fn file() -> impl Strategy<Value = String> {
    let mark = proptest::sample::select(vec![",", ";", "\t"]);
    let end = proptest::sample::select(vec!["\n", "\r\n", "\r"]);
    (proptest::collection::vec(proptest::collection::vec(cell(), 1..5), 0..8), mark, end)
        .prop_map(|(rows, mark, end)| rows.iter().map(|row| row.join(mark)).collect::<Vec<_>>().join(end))
}

fn options() -> impl Strategy<Value = TableOptions> {
    use proptest::sample::select;
    let encodings = [Encoding::Utf8, Encoding::Utf16Le, Encoding::Utf16Be, Encoding::Latin1];
    (
        select(vec![Purpose::Standards, Purpose::Zeros, Purpose::Readings]),
        proptest::option::of(select(encodings.to_vec())),
        proptest::option::of(select(Delimiter::ALL.to_vec())),
        proptest::option::of(select(vec![DecimalMark::Point, DecimalMark::Comma])),
        proptest::option::of(0..4usize),
        select(vec!["", "reading=2", "standard=a,reading=b"]),
    )
        .prop_map(|(purpose, encoding, delimiter, decimal, header_rows, columns)| TableOptions {
            purpose,
            encoding,
            delimiter,
            decimal,
            header_rows,
            columns: parse_columns(columns).unwrap_or_default(),
        })
}

/// A table is as wide as its heads in every row, and its lines rise.
fn check(found: Result<Table, TableError>) -> Result<(), TestCaseError> {
    let table = match found {
        Ok(table) => table,
        Err(error) => {
            let ambiguous = matches!(&error, TableError::Ambiguous { hint, .. } if !hint.is_empty());
            prop_assert!(ambiguous || error.to_string().contains("accepted: "));
            return Ok(());
        }
    };
    prop_assert!(!table.rows.is_empty());
    prop_assert_eq!(table.headers.len(), table.units.len());
    prop_assert!(table.rows.iter().all(|row| row.cells.len() == table.headers.len()));
    prop_assert!(table.rows.windows(2).all(|pair| pair[0].line < pair[1].line));
    prop_assert!(table.roles.contains_key(&Role::Reading));
    match table.records() {
        Ok(records) => prop_assert_eq!(records.len(), table.rows.len()),
        Err(errors) => prop_assert!(!errors.is_empty() && errors.len() <= 21),
    }
    Ok(())
}

fn encoded(text: &str, encoding: usize) -> Vec<u8> {
    let utf16 = |unit: fn(u16) -> [u8; 2]| format!("\u{feff}{text}").encode_utf16().flat_map(unit).collect();
    match encoding {
        0 => text.as_bytes().to_vec(),
        1 => format!("\u{feff}{text}").into_bytes(),
        2 => utf16(u16::to_le_bytes),
        3 => utf16(u16::to_be_bytes),
        // Every character used is below U+0100.
        _ => text.chars().map(|c| c as u8).collect(),
    }
}

proptest! {
    #[test]
    fn no_bytes_panic(bytes in proptest::collection::vec(any::<u8>(), 0..200), options in options()) {
        check(read_table(&bytes, &options))?;
    }

    #[test]
    fn no_file_panics(text in file(), options in options()) {
        check(read_table(text.as_bytes(), &options))?;
    }

    /// One table, however written, gives the same values in the same lines.
    #[test]
    fn the_way_of_writing_does_not_matter(
        pairs in proptest::collection::vec((-99_999i32..99_999, 0usize..6, any::<i32>(), 0usize..6), 1..30),
        (delimiter, comma, encoding, end) in (0usize..3, any::<bool>(), 0usize..5, 0usize..3),
    ) {
        let delimiter = [Delimiter::Comma, Delimiter::Semicolon, Delimiter::Tab][delimiter];
        let comma = comma && delimiter != Delimiter::Comma;
        let number = |n: i32, places: usize| format!("{:.places$}", f64::from(n) / 10f64.powi(places as i32));
        // The first row shows the mark beyond doubt.
        let mut wanted = vec![("0.5".to_owned(), "0".to_owned())];
        wanted.extend(pairs.iter().map(|(x, p, y, q)| (number(*x, *p), number(*y, *q))));
        let mut text = format!("standard [µm]{0}reading [°C]\n", delimiter.as_char());
        for (x, y) in &wanted {
            let row = format!("{x}|{y}\n");
            let row = if comma { row.replace('.', ",") } else { row };
            text.push_str(&row.replace('|', &delimiter.as_char().to_string()));
        }
        let text = text.replace('\n', ["\n", "\r\n", "\r"][end]);
        let table = read_table(&encoded(&text, encoding), &TableOptions::default())
            .map_err(|error| TestCaseError::fail(error.to_string()))?;
        prop_assert_eq!((table.delimiter, table.decimal == DecimalMark::Comma), (Some(delimiter), comma));
        let records = table.records().map_err(|errors| TestCaseError::fail(errors[0].to_string()))?;
        prop_assert_eq!(records.len(), wanted.len());
        for (i, (record, (x, y))) in records.iter().zip(&wanted).enumerate() {
            prop_assert_eq!(record.line, i + 2);
            prop_assert_eq!(record.standard.as_ref().map(|n| n.value), x.parse().ok());
            prop_assert_eq!(Some(record.reading.value), y.parse().ok());
        }
    }

    /// What was recognised, given as options, gives the same table.
    #[test]
    fn decisions_can_be_repeated(
        above in proptest::collection::vec("[a-z]{1,6};[a-z]{1,6}\n", 0..3),
        units in any::<bool>(),
        rows in proptest::collection::vec(("[0-9]{1,3}", "[1-9][,.][0-9]{1,2}"), 1..6),
    ) {
        let rows: String = rows.iter().map(|(x, y)| format!("{x};{}\n", y.replace('.', ","))).collect();
        let units = if units { "kN;V\n" } else { "" };
        let text = format!("Skerrow\n{}standard;reading\n{units}{rows}", above.concat());
        let read = |options| read_table(text.as_bytes(), &options).map_err(|e| TestCaseError::fail(e.to_string()));
        let table = read(TableOptions::default())?;
        prop_assert_eq!(table.preamble.len(), 1 + above.len());
        let again = read(TableOptions {
            encoding: Some(table.encoding),
            delimiter: table.delimiter,
            decimal: Some(table.decimal),
            header_rows: Some(table.header_rows),
            ..TableOptions::default()
        })?;
        prop_assert_eq!(again, table);
    }
}
