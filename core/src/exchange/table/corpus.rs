//! Small files with the table they must give.

use super::*;

/// The table in one line: how it was read, its heads by role, and its rows by line.
fn summary(table: &Table) -> String {
    let delimiter = table.delimiter.map_or("no delimiter".to_owned(), |d| d.to_string());
    let heads: Vec<String> = table
        .roles
        .iter()
        .map(|(role, at)| {
            let unit = table.units[*at].as_ref().map_or(String::new(), |unit| format!(" [{unit}]"));
            format!("{role}={}{unit}", table.headers[*at])
        })
        .collect();
    let records = table.records().expect("every cell of this file can be taken");
    let value = |number: &Number| number.value.to_string();
    let rows: Vec<String> = records
        .iter()
        .map(|r| format!("{}: {} {}", r.line, r.standard.as_ref().map_or("none".into(), value), value(&r.reading)))
        .collect();
    format!(
        "{}, {delimiter}, {}, {} head rows | {} | {}",
        table.encoding,
        table.decimal,
        table.header_rows,
        heads.join(", "),
        rows.join(", ")
    )
}

pub(super) fn read(bytes: &[u8], options: TableOptions) -> Result<Table, TableError> {
    read_table(bytes, &options)
}

pub(super) fn table(bytes: &[u8]) -> Table {
    read(bytes, TableOptions::default()).unwrap_or_else(|error| panic!("{error}"))
}

pub(super) fn zeros() -> TableOptions {
    TableOptions { purpose: Purpose::Zeros, ..TableOptions::default() }
}

fn utf16le(text: &str) -> Vec<u8> {
    text.encode_utf16().flat_map(u16::to_le_bytes).collect()
}

#[test]
fn plain_files_are_recognised() {
    for (bytes, wanted) in [
        (
            &b"standard,reading\n0,0.1\n1,2.1\n"[..],
            "UTF-8, comma, decimal point, 1 head rows | standard=standard, reading=reading | 2: 0 0.1, 3: 1 2.1",
        ),
        (
            b"\xef\xbb\xbfstandard;reading\r\n0;0,1\r\n1;2,1\r\n",
            "UTF-8, semicolon, decimal comma, 1 head rows | standard=standard, reading=reading | 2: 0 0.1, 3: 1 2.1",
        ),
        (
            b"standard\treading\n0,5\t0,1\n1\t2,1",
            "UTF-8, tab, decimal comma, 1 head rows | standard=standard, reading=reading | 2: 0.5 0.1, 3: 1 2.1",
        ),
        (
            b"Standard;Reading\n1;2.5\n",
            "UTF-8, semicolon, decimal point, 1 head rows | standard=Standard, reading=Reading | 2: 1 2.5",
        ),
        (
            &utf16le("\u{feff}load (kN)\tsignal (mV/V)\n0,5\t−0,1\n"),
            "UTF-16 (low byte first), tab, decimal comma, 1 head rows | standard=load [kN], reading=signal [mV/V] \
             | 2: 0.5 -0.1",
        ),
        (
            b"Temperatur [\xb0C];Anzeige [\xb5V]\n10,5;1\n",
            "Latin-1, semicolon, decimal comma, 1 head rows | standard=Temperatur [°C], reading=Anzeige [µV] | 2: 10.5 1",
        ),
        (
            b"0 ; 1,5\n1;2,5\n",
            "UTF-8, semicolon, decimal comma, 0 head rows | standard=column 1, reading=column 2 | 1: 0 1.5, 2: 1 2.5",
        ),
        (
            b"1,10\n2,20\n3,31\n",
            "UTF-8, comma, decimal point, 0 head rows | standard=column 1, reading=column 2 | 1: 1 10, 2: 2 20, 3: 3 31",
        ),
        (
            b"\"load, kN\",\"signal, mV/V\"\n\"1\",\"2.5\"\n",
            "UTF-8, comma, decimal point, 1 head rows | standard=load [kN], reading=signal [mV/V] | 2: 1 2.5",
        ),
        (
            b"standard,reading\n1.234,2.345\n2.345,3.456\n",
            "UTF-8, comma, decimal point, 1 head rows | standard=standard, reading=reading \
             | 2: 1.234 2.345, 3: 2.345 3.456",
        ),
    ] {
        assert_eq!(summary(&table(bytes)), wanted);
    }
}

#[test]
fn what_stands_around_the_numbers_is_told_from_them() {
    for (bytes, wanted) in [
        (
            &b"# Skerrow Tideworks\nGauge 4\n\nstandard;reading;note\nm;V;\n1;2,5;ok\n# pause\n;;\n2;3,5;ok, late\n"[..],
            "UTF-8, semicolon, decimal comma, 2 head rows | standard=standard [m], reading=reading [V] \
             | 6: 1 2.5, 9: 2 3.5",
        ),
        (
            b"# standard,reading\n1,2.5\n",
            "UTF-8, comma, decimal point, 0 head rows | standard=standard, reading=reading | 2: 1 2.5",
        ),
        (
            b"sep=;\nApplied;Shown\nlevel;signal\nm;V\n1,0;2\n",
            "UTF-8, semicolon, decimal comma, 3 head rows | standard=Applied level [m], reading=Shown signal [V] \
             | 5: 1 2",
        ),
        (
            b"Serial,12345,\nGauge 4,,\nnr,reading,standard\n1,2.5,10\n",
            "UTF-8, comma, decimal point, 1 head rows | standard=standard, reading=reading | 4: 10 2.5",
        ),
        (
            b"standard,reading,\n1,2.5,\n2,3.5,\n",
            "UTF-8, comma, decimal point, 1 head rows | standard=standard, reading=reading | 2: 1 2.5, 3: 2 3.5",
        ),
        (
            b"standard,note,reading\n1,\"two\nlines\",2.5\n2,x,3.5\n",
            "UTF-8, comma, decimal point, 1 head rows | standard=standard, reading=reading | 2: 1 2.5, 4: 2 3.5",
        ),
    ] {
        assert_eq!(summary(&table(bytes)), wanted);
    }
    let table = table(b"# Skerrow Tideworks\nGauge 4\nstandard;reading;note\n1;2,5;x\n#late\n;;\n");
    assert_eq!(table.unit(Role::Standard), None);
    assert_eq!(table.preamble, ["Skerrow Tideworks", "Gauge 4"]);
    let notes = table.notes.join("\n");
    for wanted in ["begin with #: 5.", "only delimiters: 6.", "Columns not used: note."] {
        assert!(notes.contains(wanted), "{notes}");
    }
}

#[test]
fn zero_readings_need_no_standard() {
    let one = "UTF-8, no delimiter";
    for (bytes, wanted) in [
        (
            &b"signal [V]\n0.012\n0.2\n"[..],
            format!("{one}, decimal point, 1 head rows | reading=signal [V] | 2: none 0.012, 3: none 0.2"),
        ),
        (
            b"reading\n1,5\n2,5\n",
            format!("{one}, decimal comma, 1 head rows | reading=reading | 2: none 1.5, 3: none 2.5"),
        ),
        (b"-3\n4\n", format!("{one}, decimal point, 0 head rows | reading=column 1 | 1: none -3, 2: none 4")),
        (
            b"order;reading\n1;0,5\n2;0,25\n",
            "UTF-8, semicolon, decimal comma, 1 head rows | reading=reading, order=order \
             | 2: none 0.5, 3: none 0.25"
                .to_owned(),
        ),
    ] {
        assert_eq!(summary(&read(bytes, zeros()).unwrap()), wanted);
    }
    let decimal = Some(DecimalMark::Comma);
    let found = read(b"0,012\n-0,004\n", TableOptions { decimal, ..zeros() }).unwrap();
    assert!(summary(&found).ends_with("| 1: none 0.012, 2: none -0.004"));
    let table = read(b"standard,reading\n0,1\n5,2\n", zeros()).unwrap();
    assert!(table.notes.iter().any(|note| note.contains("1 of 2 zero readings")), "{:?}", table.notes);
    assert!(table.records().unwrap().iter().all(|record| record.kind == Kind::Zero));
}

#[test]
fn options_settle_what_would_be_recognised() {
    let columns = parse_columns("standard=Last,reading=Signal").unwrap();
    let options = TableOptions { columns, ..TableOptions::default() };
    let found = read(b"Signal;Nr;Last\n2,5;1;10\n", options).unwrap();
    assert!(summary(&found).ends_with("standard=Last, reading=Signal | 2: 10 2.5"));
    let by_number = parse_columns("standard=3,reading=1").unwrap();
    let options = TableOptions { columns: by_number, ..TableOptions::default() };
    assert!(summary(&read(b"2.5;1;10\n", options).unwrap()).ends_with("| 1: 10 2.5"));
    let options = TableOptions { delimiter: Some(Delimiter::Comma), ..TableOptions::default() };
    assert!(summary(&read(b"1,234\n2,468\n", options).unwrap()).ends_with("| 1: 1 234, 2: 2 468"));
    let options = TableOptions { header_rows: Some(1), ..TableOptions::default() };
    assert!(summary(&read(b"2024;2025\n1;2\n", options).unwrap()).ends_with("reading=2025 | 2: 1 2"));
    let options = TableOptions { decimal: Some(DecimalMark::Comma), ..TableOptions::default() };
    assert!(summary(&read(b"standard\treading\n1,234\t2,345\n", options).unwrap()).ends_with("| 2: 1.234 2.345"));
}

#[test]
fn records_hold_every_column() {
    let text = "standard,reading,u_standard,u_reading,kind,stage,run,cycle,direction,application,look,order,time\n\
                1.50, 2.5 ,0.1,0.2,standard,as found,1,2,▲,3,4,5,2026-05-03T10:00Z\n,0.1,,,zero,,,,,,,,\n";
    let table = table(text.as_bytes());
    assert_eq!(table.column("order"), Some(11));
    assert_eq!(table.rows[0].cells[1], " 2.5 ", "cells stay as typed");
    let number = |raw: &str, value| Number { raw: raw.to_owned(), value };
    let first = Record {
        line: 2,
        standard: Some(number("1.50", 1.5)),
        reading: number("2.5", 2.5),
        u_standard: Some(0.1),
        u_reading: Some(0.2),
        kind: Kind::Standard,
        stage: Some(Stage::AsFound),
        run: Some(1),
        cycle: Some(2),
        direction: Some(Direction::Rising),
        application: Some(3),
        look: Some(4),
        order: Some(5),
        time: Some("2026-05-03T10:00Z".to_owned()),
    };
    let second = Record {
        line: 3,
        standard: None,
        reading: number("0.1", 0.1),
        u_standard: None,
        u_reading: None,
        kind: Kind::Zero,
        stage: None,
        run: None,
        cycle: None,
        direction: None,
        application: None,
        look: None,
        order: None,
        time: None,
    };
    assert_eq!(table.records(), Ok(vec![first, second]));
}

#[test]
fn rows_with_the_standard_zero_are_pointed_out() {
    let notes = table(b"standard,reading\n0,0.1\n0.0,0.2\n1,2\n").notes;
    assert!(notes.iter().any(|note| note.starts_with("2 of 3 rows") && note.contains("--zeros")), "{notes:?}");
    let notes = table(b"standard,reading,kind\n0,0.1,zero\n1,2,\n").notes;
    assert!(notes.is_empty(), "{notes:?}");
}
