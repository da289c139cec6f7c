//! What the program writes to begin with, and for shells and manuals.

mod common;

use common::{program, run, told};

#[test]
fn a_new_sheet_holds_on_a_new_shop() {
    let folder = tempfile::tempdir().unwrap();
    let sheet = run(folder.path(), &["new", "sheet", "rail.toml"]);
    assert_eq!((sheet.status, sheet.out.as_str()), (0, ""), "{}", sheet.err);
    assert_eq!(sheet.err, "wrote rail.toml\n");
    let shop = run(folder.path(), &["new", "shop", "catalogs"]);
    assert_eq!(shop.status, 0, "{}", shop.err);
    assert_eq!(std::fs::read_dir(folder.path().join("catalogs")).unwrap().count(), 7);

    let check = run(folder.path(), &["catalog", "check"]);
    assert_eq!((check.status, check.err.as_str()), (0, ""), "nothing is wrong or doubtful");
    let list = run(folder.path(), &["shortlist", "rail.toml"]);
    assert_eq!((list.status, list.err.as_str()), (0, ""), "{}", list.out);
    assert!(list.out.contains("EX-NPN4"), "{}", list.out);
    let adjustable = ["output.adjust_from_v=3", "output.adjust_to_v=5"].join("\n");
    let text = std::fs::read_to_string(folder.path().join("rail.toml")).unwrap();
    let text = text
        .replace("\nvoltage_v = 5.0", &format!("\n{}", adjustable.replace("output.", "")))
        .replace("\ntolerance_pct = 4", "");
    std::fs::write(folder.path().join("knob.toml"), text).unwrap();
    let list = run(folder.path(), &["shortlist", "knob.toml"]);
    assert_eq!((list.status, list.err.as_str()), (0, ""), "the pot serves too: {}", list.out);
}

#[test]
fn nothing_is_ever_replaced() {
    let folder = tempfile::tempdir().unwrap();
    std::fs::create_dir(folder.path().join("parts")).unwrap();
    let there = folder.path().join("parts/pots.csv");
    std::fs::write(&there, "mine").unwrap();
    let shop = run(folder.path(), &["new", "shop", "parts"]);
    assert_eq!(shop.status, 2);
    assert!(shop.err.contains("pots.csv is there already, and stays"), "{}", shop.err);
    assert_eq!(std::fs::read_to_string(&there).unwrap(), "mine");
    assert_eq!(
        std::fs::read_dir(folder.path().join("parts")).unwrap().count(),
        1,
        "all or nothing"
    );

    assert_eq!(run(folder.path(), &["new", "sheet", "parts"]).status, 0, "a sheet beside them");
    assert!(folder.path().join("parts/rail.toml").exists());
    assert_eq!(run(folder.path(), &["new", "sheet", "parts"]).status, 2);
    assert_eq!(run(folder.path(), &["new", "sheet", "deep/er/rail.toml"]).status, 2);
}

#[test]
fn completions_know_commands_and_options() {
    let folder = tempfile::tempdir().unwrap();
    for shell in ["bash", "zsh", "fish"] {
        let script = run(folder.path(), &["completions", shell]);
        assert_eq!((script.status, script.err.as_str()), (0, ""));
        for word in ["shortlist", "skip-broken-rows", "completions"] {
            assert!(script.out.contains(word), "{shell} knows {word}");
        }
    }
    assert_eq!(run(folder.path(), &["completions", "dos"]).status, 2);
}

/// A shell takes the script, where it is installed as bash is nearly everywhere.
#[cfg(unix)]
#[test]
fn bash_completes_a_command() {
    let name = "bash_completes_a_command";
    let Some(bash) = common::tool::program(name, &["bash"]) else { return };
    let folder = tempfile::tempdir().unwrap();
    let script = run(folder.path(), &["completions", "bash"]).out;
    std::fs::write(folder.path().join("script"), script).unwrap();
    let ask = "source ./script; COMP_WORDS=(railwright shortl); COMP_CWORD=1; \
               _railwright railwright shortl railwright; echo \"${COMPREPLY[*]}\"";
    let answer = std::process::Command::new(bash)
        .args(["--norc", "-c", ask])
        .current_dir(folder.path())
        .output()
        .unwrap();
    let answer = told(answer);
    assert_eq!(answer.out.trim(), "shortlist", "{}", answer.err);
}

#[test]
fn manual_pages_are_written_for_every_command() {
    let folder = tempfile::tempdir().unwrap();
    let man = run(folder.path(), &["man", "."]);
    assert_eq!(man.status, 0, "{}", man.err);
    for name in ["railwright.1", "railwright-shortlist.1", "railwright-catalog-check.1"] {
        let page = std::fs::read_to_string(folder.path().join(name)).unwrap();
        assert!(
            page.contains(".SH SYNOPSIS") && page.contains("Exit status") || name == "railwright.1"
        );
    }
    assert_eq!(run(folder.path(), &["man", "."]).status, 2, "nothing is replaced");
    assert_eq!(run(folder.path(), &["man", ".", "--overwrite"]).status, 0);
    let nowhere = program(folder.path()).args(["man", "nowhere"]).output().unwrap();
    assert_eq!(told(nowhere).status, 2);
}
