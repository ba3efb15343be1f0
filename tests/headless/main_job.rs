//! From CSV to a signed PDF without a window, and what is said when somebody changes it.

use super::{Bench, shipped};

struct Signed {
    bench: Bench,
    pdf: Vec<u8>,
    fingerprint: String,
}

fn signed() -> Signed {
    let bench = Bench::new();
    let (data, zeros) = (shipped("demo-projects/tension-link.csv"), shipped("demo-projects/tension-link-zeros.csv"));
    let pass = bench.file("pass.txt", "correct horse\n");
    let new = [
        "new",
        &data,
        "--zeros",
        &zeros,
        "--by",
        "A. Person",
        "--number",
        "T-1",
        "--item",
        "TL-07",
        "--out",
        "link.assize",
    ];
    assert!(bench.run(&new).status.success(), "{}", super::err(&bench.run(&new)));
    let why = "only scatter is left";
    let choose = ["choose", "link.assize", "--fit", "quadratic", "--because", why, "--by", "A. Person"];
    assert!(bench.run(&choose).status.success());
    assert!(
        bench.run(&["key", "--name", "A. Person", "--out", "key.p12", "--passphrase-file", &pass]).status.success()
    );
    let report = ["report", "link.assize", "--out", "r.pdf", "--sign", "key.p12", "--passphrase-file", &pass];
    let out = bench.run(&report);
    assert!(out.status.success(), "{}", super::err(&out));
    let pdf = std::fs::read(bench.path("r.pdf")).expect("the report");
    let found = bench.json(&["verify", "r.pdf", "--json"]);
    let fingerprint = found["signatures"][0]["fingerprint"].as_str().expect("a fingerprint").to_owned();
    Signed { bench, pdf, fingerprint }
}

#[test]
fn the_report_verifies_and_names_its_signer_only_when_known() {
    let Signed { bench, fingerprint, .. } = signed();
    let found = bench.json(&["verify", "r.pdf", "--json"]);
    assert_eq!(found["answer"], "unaltered, signer unknown");
    assert!(found["ok"].is_null());
    assert!(found["figures_checked"].as_u64() > Some(100), "{}", found["figures_checked"]);
    bench.fails(1, &["verify", "r.pdf", "--require-known"]);
    let known = bench.json(&["verify", "r.pdf", "--json", "--require-known", "--fingerprint", &fingerprint]);
    assert_eq!((&known["answer"], &known["ok"]), (&"unaltered, signer known".into(), &true.into()));
    let other = "0".repeat(64);
    bench.fails(1, &["verify", "r.pdf", "--require-known", "--fingerprint", &other]);
    bench.fails(2, &["verify", "r.pdf", "--fingerprint", "12 34"]);
}

#[test]
fn any_changed_byte_is_reported() {
    let Signed { bench, pdf, .. } = signed();
    // Every byte is a matter of minutes; a stride that shares no factor with the file's structure is a sample of 60.
    let stride = pdf.len() / 60;
    for at in (7..pdf.len()).step_by(stride) {
        let mut changed = pdf.clone();
        changed[at] ^= 1;
        let said = assize_core::exchange::verify::verify(&changed, &[]).map(|v| v.answer.words());
        assert_ne!(said.ok(), Some("unaltered, signer unknown"), "byte {at}");
    }
    let mut longer = pdf;
    longer.push(b'\n');
    let path = bench.file("longer.pdf", longer);
    bench.fails(1, &["verify", &path]);
}

#[test]
fn wrong_keys_and_unready_records_are_refused() {
    let Signed { bench, .. } = signed();
    let wrong = bench.file("wrong.txt", "not it\n");
    let said =
        bench.fails(2, &["report", "link.assize", "--out", "x.pdf", "--sign", "key.p12", "--passphrase-file", &wrong]);
    assert!(said.contains("passphrase"), "{said}");
    let said =
        bench.fails(2, &["report", "link.assize", "--out", "x.pdf", "--sign", &wrong, "--passphrase-file", &wrong]);
    assert!(said.contains("wrong.txt"), "{said}");
    let pass = bench.path("pass.txt").display().to_string();
    let demo = shipped("demo-projects/tension-link.assize");
    let said = bench.fails(1, &["report", &demo, "--out", "x.pdf", "--sign", "key.p12", "--passphrase-file", &pass]);
    assert!(said.contains("practice"), "{said}");
    assert!(!bench.path("x.pdf").exists(), "nothing is written");
    let draft = bench.run(&["report", &demo, "--out", "draft.pdf"]);
    assert!(draft.status.success());
    assert!(bench.fails(2, &["verify", "draft.pdf"]).contains("no signature"));
}

#[test]
fn a_changed_byte_in_a_project_is_reported_with_its_line() {
    let Signed { bench, .. } = signed();
    let text = std::fs::read_to_string(bench.path("link.assize")).unwrap();
    let path = bench.file("changed.assize", text.replacen("A. Person", "B. Person", 1));
    let said = bench.fails(2, &["fit", &path]);
    assert!(said.contains("line 2") && said.contains("changed"), "{said}");
}

#[test]
fn signing_is_an_entry_and_the_record_still_opens() {
    let Signed { bench, .. } = signed();
    let text = std::fs::read_to_string(bench.path("link.assize")).unwrap();
    assert!(text.lines().last().unwrap().contains("Signed"));
    let document = bench.json(&["fit", "link.assize", "--json"]);
    assert_eq!(document["chosen"]["family"], "quadratic");
}
