//! Bad input: a clear message with its place, status 2, nothing written.

use super::{Bench, shipped};

/// File content, further arguments, and what the message must hold.
#[test]
fn tables_that_cannot_be_read_say_where_and_why() {
    let cases: [(&str, &str, &[&str]); 8] = [
        ("empty", "", &["empty"]),
        ("heads only", "standard,reading\n", &["no row"]),
        ("text in a number column", "standard,reading\n1,2.1\n2,abc\n", &["line 3", "reading", "abc"]),
        ("decimal comma with comma delimiter", "standard,reading\n1,0,2,1\n2,0,4,2\n", &["line"]),
        ("unequal columns", "standard,reading\n1,2\n2\n", &["line 3"]),
        ("no reading", "standard,colour,note\n1,2,x\n", &["reading"]),
        ("thousands", "standard;reading\n1.000,5;2\n", &["line 2"]),
        ("not finite", "standard,reading\n1,1e999\n", &["line 2"]),
    ];
    for (name, content, parts) in cases {
        let bench = Bench::new();
        let path = bench.file("data.csv", content);
        let said = bench.fails(2, &["fit", &path, "--json"]);
        for part in parts {
            assert!(said.to_lowercase().contains(&part.to_lowercase()), "{name}: {said:?} should say {part:?}");
        }
        let out = bench.path("new.assize");
        bench.fails(2, &["new", &path, "--by", "A", "--out", &out.display().to_string()]);
        assert!(!out.exists(), "{name}: nothing is written");
    }
}

#[test]
fn one_point_fits_nothing_and_says_what_is_needed() {
    let bench = Bench::new();
    let path = bench.file("one.csv", "standard,reading\n1,2\n");
    let said = bench.fails(2, &["fit", &path, "--json"]);
    assert!(said.contains("2 different standards are needed"), "{said}");
}

#[test]
fn duplicate_standards_are_repeats() {
    let bench = Bench::new();
    let path = bench.file("twice.csv", "standard,reading\n1,2.0\n1,2.1\n2,4.0\n3,6.1\n3,6.0\n");
    let document = bench.json(&["fit", &path, "--family", "line", "--json"]);
    assert_eq!((document["data"]["n"].as_u64(), document["data"]["distinct_standards"].as_u64()), (Some(5), Some(3)));
    assert!(document["fits"][0]["lack_of_fit"]["f"].is_number());
}

#[test]
fn zero_and_negative_standards_stop_only_the_logarithm() {
    for bad in ["0", "-1"] {
        let bench = Bench::new();
        let path = bench.file("log.csv", format!("standard,reading\n{bad},0.1\n1,2.0\n2,4.1\n3,6.0\n4,8.1\n"));
        let document = bench.json(&["fit", &path, "--json"]);
        let log = document["fits"].as_array().unwrap().iter().find(|f| f["family"] == "log").unwrap();
        assert_eq!(log["converged"], false);
        let message = log["message"].as_str().unwrap();
        assert!(message.contains("reading 1") && message.contains("logarithm of"), "{message}");
        assert_eq!(document["fits"][0]["converged"], true);
    }
}

#[test]
fn too_few_zeros_are_said_and_block_nothing() {
    for (zeros, word) in [("0.01\n", "1 zero reading, 3 are needed"), ("0.01\n0.02\n", "2 zero readings, 3 are needed")]
    {
        let bench = Bench::new();
        let data = bench.file("data.csv", "standard,reading\n1,2.0\n2,4.1\n3,6.0\n4,8.1\n");
        let zeros = bench.file("zeros.csv", format!("reading\n{zeros}"));
        let document = bench.json(&["fit", &data, "--zeros", &zeros, "--family", "line", "--json"]);
        assert_eq!(document["fits"][0]["detection"]["reason"], word);
        assert!(document["zero"].is_null());
    }
    let bench = Bench::new();
    let data = bench.file("data.csv", "standard,reading\n1,2.0\n2,4.1\n3,6.0\n4,8.1\n");
    let document = bench.json(&["fit", &data, "--family", "line", "--json"]);
    assert_eq!(document["fits"][0]["detection"]["reason"], "no zero readings");
}

#[test]
fn files_and_names_that_do_not_exist() {
    let bench = Bench::new();
    assert!(bench.fails(2, &["fit", "nowhere.csv"]).contains("nowhere.csv"));
    let said = bench.fails(2, &["fit", &shipped("demo-projects/tension-link.csv"), "--family", "sine"]);
    assert!(said.contains("sine") && said.contains("quadratic"), "{said}");
    assert!(bench.fails(2, &["verify", &shipped("README.md")]).contains("PDF"));
    let said = bench.fails(2, &["fit", &shipped("demo-projects/tension-link.csv"), "--weights", "1/z"]);
    assert!(said.contains("1/z") && said.contains("1/x2"), "{said}");
}

#[test]
fn without_a_display_the_window_says_so_in_one_line() {
    let said = Bench::new().fails(2, &[]);
    assert_eq!(said.trim().lines().count(), 1, "{said}");
    assert!(said.contains("fit") && said.contains("report") && said.contains("verify"), "{said}");
}
