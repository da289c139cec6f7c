//! The workspace is built as `docs/architecture.md` says: who knows whom, and who keeps silent.

use docs_check::page::Page;
use docs_check::{code, manifest, root};
use std::collections::{BTreeMap, BTreeSet};

/// A row of the table of crates: what a crate may know, and what its tests may know besides.
struct Allowed {
    knows: BTreeSet<String>,
    in_tests: BTreeSet<String>,
}

/// The table of crates, in its order.
fn table() -> Vec<(String, Allowed)> {
    let page = Page::read(&root(), "docs/architecture.md").expect("the page on the crates");
    let names = |cell: Option<&String>| -> BTreeSet<String> {
        cell.into_iter()
            .flat_map(|cell| cell.split(','))
            .map(|name| name.trim().to_owned())
            .filter(|name| !name.is_empty() && name != "—")
            .collect()
    };
    page.table("crate")
        .into_iter()
        .map(|row| {
            let allowed = Allowed { knows: names(row.get(1)), in_tests: names(row.get(2)) };
            (row.first().cloned().unwrap_or_default(), allowed)
        })
        .collect()
}

#[test]
fn every_crate_knows_what_the_table_says_and_nothing_else() {
    let table = table();
    let manifests = manifest::all(&root()).expect("the manifests");
    let ours: BTreeSet<&str> = manifests.iter().map(|m| m.name.as_str()).collect();
    let of_workspace = |needs: &BTreeSet<String>| -> BTreeSet<String> {
        needs.iter().filter(|name| ours.contains(name.as_str())).cloned().collect()
    };
    for manifest in &manifests {
        let name = &manifest.name;
        let (_, allowed) = table
            .iter()
            .find(|(row, _)| row == name)
            .unwrap_or_else(|| panic!("docs/architecture.md has no row for {name}"));
        assert_eq!(
            of_workspace(&manifest.needs),
            allowed.knows,
            "what {name} needs (left) is not what docs/architecture.md says (right)"
        );
        let in_tests: BTreeSet<String> =
            of_workspace(&manifest.tests_need).difference(&allowed.knows).cloned().collect();
        assert_eq!(in_tests, allowed.in_tests, "what the tests of {name} need, likewise");
    }
    for (row, _) in &table {
        assert!(ours.contains(row.as_str()), "docs/architecture.md speaks of {row}: no such crate");
    }
}

#[test]
fn knowledge_goes_one_way() {
    let mut above: BTreeSet<String> = BTreeSet::new();
    for (name, allowed) in table() {
        for known in &allowed.knows {
            assert!(
                above.contains(known),
                "{name} knows {known}, which does not stand above it in the table"
            );
        }
        above.insert(name);
    }
    assert!(above.len() > 5, "the table of crates was not found");
}

/// What no source of these crates may hold, outside comments: the promise "does not print", "does
/// not open files", "does not start threads".
#[test]
fn crates_keep_the_promises_of_their_does_not_sentences() {
    const PRINTING: [&str; 5] = ["println!", "eprintln!", "print!(", "eprint!(", "dbg!"];
    const FILES: [&str; 3] = ["std::fs", "std::env", "File::open"];
    const THREADS: [&str; 2] = ["std::thread", "rayon"];
    let promises: BTreeMap<&str, Vec<&[&str]>> = BTreeMap::from([
        ("quantity", vec![&PRINTING[..], &FILES, &THREADS]),
        ("notice", vec![&PRINTING[..], &FILES, &THREADS]),
        ("circuit", vec![&PRINTING[..], &FILES, &THREADS]),
        ("catalog", vec![&PRINTING[..]]),
        ("sheet", vec![&PRINTING[..], &FILES, &THREADS]),
        ("select", vec![&PRINTING[..], &FILES]),
        ("eligible", vec![&PRINTING[..], &FILES]),
        ("design", vec![&PRINTING[..], &FILES, &THREADS]),
        ("reasons", vec![&PRINTING[..], &FILES]),
        ("substitute", vec![&PRINTING[..], &FILES]),
        ("picture", vec![&PRINTING[..], &FILES, &THREADS]),
        ("report", vec![&PRINTING[..], &THREADS]),
    ]);
    for (name, promise) in promises {
        for source in code::sources(&root(), name, name).expect("the sources") {
            let program = source.text.split("#[cfg(test)]").next().unwrap_or_default();
            for (number, line) in program.lines().enumerate() {
                let code = line.split("//").next().unwrap_or_default();
                for word in promise.iter().copied().flatten() {
                    assert!(
                        !code.contains(word),
                        "{} line {}: `{word}`, against docs/architecture.md",
                        source.module,
                        number + 1
                    );
                }
            }
        }
    }
}
