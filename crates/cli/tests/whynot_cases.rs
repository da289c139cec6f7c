//! The cases of `whynot` and `catalog gaps`: what they say, word by word.

mod common;

use common::{repository, run};

/// Set to write what is found in place of what is expected.
const UPDATE: &str = "UPDATE_EXPECTED";

#[test]
fn every_case_says_what_is_expected() {
    let mut folders: Vec<_> = std::fs::read_dir(repository("tests/whynot"))
        .expect("the cases")
        .filter_map(|entry| Some(entry.ok()?.path()).filter(|path| path.is_dir()))
        .collect();
    folders.sort();
    assert!(folders.len() >= 10, "the cases are there");
    let mut differ = Vec::new();
    for folder in folders {
        let arguments = std::fs::read_to_string(folder.join("arguments")).expect("arguments");
        let arguments: Vec<&str> = arguments.split_whitespace().collect();
        let told = run(&folder, &arguments);
        let found = format!(
            "status {}\n--- standard output\n{}--- standard error\n{}",
            told.status, told.out, told.err
        );
        let again = run(&folder, &arguments);
        assert_eq!((again.out, again.err), (told.out, told.err), "{}", folder.display());
        let path = folder.join("expected");
        if std::env::var_os(UPDATE).is_some() {
            std::fs::write(&path, &found).expect("written");
        }
        let expected = std::fs::read_to_string(&path).unwrap_or_default();
        if expected != found {
            differ.push(format!("{}:\n{found}", folder.display()));
        }
    }
    assert!(differ.is_empty(), "{}", differ.join("\n"));
}
