//! Small files that must be refused, with what the refusal says.

use super::{
    corpus::{read, table, zeros},
    *,
};

/// Line, column and both readings of a text that can be read in two ways.
fn two_ways(bytes: &[u8], options: TableOptions) -> (usize, usize, [String; 2]) {
    match read(bytes, options) {
        Err(TableError::Ambiguous { line, column, readings, hint, .. }) if !hint.is_empty() => (line, column, readings),
        other => panic!("{other:?}"),
    }
}

#[test]
fn a_comma_between_cells_or_in_numbers_is_not_chosen() {
    let pair = |text: &str| {
        let (whole, fraction) = text.split_once(',').expect("the text of the case");
        [
            format!("{whole} and {fraction} (2 columns, delimiter comma)"),
            format!("{whole}.{fraction} (one column, decimal comma)"),
        ]
    };
    let standards = TableOptions::default;
    assert_eq!(two_ways(b"1,234\n2,468\n", standards()), (1, 1, pair("1,234")));
    assert_eq!(two_ways(b"Signal\n1,5\n2,5\n", standards()), (2, 1, pair("1,5")));
    assert_eq!(two_ways(b"1,5\n2,5\n", zeros()), (1, 1, pair("1,5")));
    let both = ["0.1 and 234", "0 and 1.234"].map(str::to_owned);
    assert_eq!(two_ways(b"standard,reading\n0,1,234\n", standards()), (2, 1, both));
}

#[test]
fn a_comma_before_every_third_figure_is_not_chosen() {
    let readings = ["1.234 (decimal comma)", "1234 (thousands mark, not accepted)"].map(str::to_owned);
    let standards = TableOptions::default;
    let tab = two_ways(b"standard\treading\n1,234\t2,345\n", standards());
    assert_eq!(tab, (2, 1, readings.clone()));
    let quoted = two_ways(b"standard,reading\n5,\"1,234\"\n", standards());
    assert_eq!(quoted, (2, 2, readings.clone()));
    assert_eq!(two_ways(b"reading\n1,234\n", zeros()), (2, 1, readings));
}

#[test]
fn a_file_that_is_no_table_says_why() {
    for (bytes, wanted) in [
        (&b""[..], "the file is empty"),
        (b" \r\n\n", "the file is empty"),
        (b"PK\x03\x04", "line 1: the control character U+0003 does not belong in UTF-8 text"),
        (b"# only a comment\n# and another\n", "no row of numbers was found, to the last line 2"),
        (b"standard,reading\n", "no row of numbers was found, to the last line 1"),
        (b"standard,reading\n1,2\n3\n4,5,6\n", "line 3 has 1 cell where the table has 2 (likewise line 4)"),
        (b"standard,reading\n1,\"2\n", "line 2: a quotation mark is opened"),
        (b"standard,reading\n1,5,2,5\n", "line 2, column 1: \"1,5,2,5\" has a comma as decimal mark"),
        (b"standard,reading\n1,\"2,5\"\n", "line 2, column 2: \"2,5\" has a comma as decimal mark"),
        (b"a,b,c\n1,2,3\n", "no column standard among \"a\", \"b\", \"c\""),
        (b"reading\n1\n", "no column standard among \"reading\""),
        (b"1 2\n3 4\n", "no row of numbers"),
        (b"standard,reading,Reading\n1,2,3\n", "columns 2 and 3 are both reading"),
    ] {
        let error = read(bytes, TableOptions::default()).unwrap_err().to_string();
        assert!(error.starts_with(wanted), "{error}");
        assert!(error.contains("accepted: "), "{error}");
    }
    let both = TableOptions {
        delimiter: Some(Delimiter::Comma),
        decimal: Some(DecimalMark::Comma),
        ..TableOptions::default()
    };
    assert_eq!(read(b"1,2", both).unwrap_err(), TableError::CommaAskedForBoth);
}

#[test]
fn every_bad_cell_is_listed_with_its_place() {
    let text = "standard;reading;u_reading;direction;run;kind\n\
                1;2,5;0,1;up;1;standard\n;abc;-1;sideways;1,5;standard\n2;1.000,92;0,1;▽;2,0;std\n;7;;;;for-limit\n";
    let errors = table(text.as_bytes()).records().unwrap_err();
    let shown: Vec<String> = errors.iter().map(CellError::to_string).collect();
    for (error, wanted) in shown.iter().zip([
        "line 3, column 1 (standard): the cell is empty",
        "line 3, column 2 (reading): \"abc\" is not a number; accepted: a number such as −12,5",
        "line 3, column 3 (u_reading): \"-1\" is negative",
        "line 3, column 5 (run): \"1,5\" is not a whole number",
        "line 3, column 4 (direction): \"sideways\" is not known; accepted: rising (up, ▲)",
        "line 4, column 2 (reading): \"1.000,92\" has a thousands mark '.' at character 2",
    ]) {
        assert!(error.starts_with(wanted), "{error}");
    }
    assert_eq!(shown.len(), 6, "{shown:#?}");
    let errors = table(b"standard;reading\n1.000,5;2\n").records().unwrap_err();
    assert!(errors[0].to_string().contains("with a decimal comma"), "{}", errors[0]);
    let errors = table(b"standard,reading\n1,2.5\n2,\"n/a, late\"\n").records().unwrap_err();
    assert!(errors[0].to_string().starts_with("line 3, column 2 (reading): \"n/a, late\""));
    let many = "standard,reading\n".to_owned() + &"1,x\n".repeat(50);
    let errors = table(many.as_bytes()).records().unwrap_err();
    assert_eq!((errors.len(), errors.last()), (21, Some(&CellError::Further { count: 30 })));
}
