//! `railwright shortlist --certificate`. What the claims say is tested in the crate `certificate-check`.

mod common;

use common::{repository, run};

const SHEET: &str = "catalogs-sample/sheets/tide-gauge-12v.toml";

#[test]
fn a_certificate_is_written_beside_the_list_and_over_nothing() {
    let folder = tempfile::tempdir().expect("a folder");
    let path = folder.path().join("x.json");
    let file = path.to_str().expect("UTF-8");
    let arguments = [
        "shortlist",
        SHEET,
        "--catalogs",
        "catalogs-sample",
        "--by",
        "cost",
        "--certificate",
        file,
    ];
    let first = run(&repository(""), &arguments);
    assert_eq!(first.status, 0, "{}", first.err);
    assert!(first.err.contains("wrote"), "{}", first.err);
    let text = std::fs::read_to_string(&path).expect("the certificate");
    let read: serde_json::Value = serde_json::from_str(&text).expect("JSON");
    assert_eq!((&read["certificate"], &read["by"]), (&1.into(), &"cost".into()));
    assert_eq!(read["rows"].as_array().map(Vec::len), Some(10));
    let again = run(&repository(""), &arguments);
    assert_eq!(again.status, 2);
    assert!(again.err.contains("is there already"), "{}", again.err);
}

#[test]
fn fronts_and_spread_lists_have_none() {
    for other in [["--front", "--count"], ["--spread", "pass=1"]] {
        let arguments = ["shortlist", SHEET, "--certificate", "x.json", other[0], other[1]];
        let said = run(&repository(""), &arguments);
        assert_eq!(said.status, 2, "{}", said.err);
        assert!(said.err.contains("--certificate") && said.err.contains(other[0]), "{}", said.err);
        assert!(!repository("x.json").exists());
    }
}
