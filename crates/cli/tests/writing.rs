//! Files are written whole or not at all, whatever happens meanwhile.

#![cfg(unix)]

mod common;

use common::{case, copy_of, program, repository, told};
use serde_json::Value;
use std::path::Path;
use std::process::{Command, Stdio};
use std::time::Duration;

/// The names in a folder, in order.
fn names(folder: &Path) -> Vec<String> {
    let entries = std::fs::read_dir(folder).expect("the folder");
    let mut names: Vec<String> =
        entries.map(|e| e.expect("an entry").file_name().to_string_lossy().into_owned()).collect();
    names.sort();
    names
}

/// The program on the sample shop, writing its list into a folder.
fn list_into(folder: &Path, file: &str) -> Command {
    let mut command = program(folder);
    command.arg("shortlist").arg(repository("catalogs-sample/sheets/tide-gauge-12v.toml"));
    command.arg("--catalogs").arg(repository("catalogs-sample"));
    command.args(["--top", "3000", "--quiet", "--out", file]);
    command.stdin(Stdio::null()).stdout(Stdio::null()).stderr(Stdio::piped());
    command
}

/// What a script that runs as root of a name space of its own says and does; None after saying that the test
/// is skipped where the system grants none.
fn in_own_name_space(test: &str, folder: &Path, script: &str) -> Option<common::Run> {
    let unshare = |script: &str| {
        let mut command = Command::new("unshare");
        command.args(["--user", "--map-root-user", "--mount", "sh", "-ec", script]);
        command.arg(env!("CARGO_BIN_EXE_railwright")).arg(case("fixed-12v"));
        command.current_dir(folder).stdin(Stdio::null());
        command.output()
    };
    let granted = unshare("mount -t tmpfs -o size=64k none .").is_ok_and(|o| o.status.success());
    if !granted {
        eprintln!("skipped: {test}: no name space for mounts is granted here");
        return None;
    }
    Some(told(unshare(script).expect("unshare runs")))
}

#[test]
fn a_run_that_is_killed_leaves_a_whole_file_or_none() {
    let folder = tempfile::tempdir().expect("a folder");
    let file = folder.path().join("list.json");
    let mut written = 0;
    // The times fall before, into and after the writing, on machines fast and slow.
    for step in 0..40u64 {
        let _ = std::fs::remove_file(&file);
        let mut child = list_into(folder.path(), "list.json").spawn().expect("the program runs");
        std::thread::sleep(Duration::from_millis(step * step));
        let _ = child.kill();
        let _ = child.wait();
        if let Ok(text) = std::fs::read(&file) {
            let list: Value = serde_json::from_slice(&text).expect("a whole list");
            assert_eq!(list["candidates"].as_array().map(Vec::len), Some(3000));
            written += 1;
        }
    }
    assert!(written < 40, "no run was killed before its end");
}

#[test]
fn a_file_that_is_replaced_is_the_old_or_the_new_one_when_the_run_is_killed() {
    let folder = tempfile::tempdir().expect("a folder");
    let file = folder.path().join("list.json");
    for step in 0..20u64 {
        std::fs::write(&file, "old").expect("a file");
        let mut command = list_into(folder.path(), "list.json");
        let mut child = command.arg("--overwrite").spawn().expect("the program runs");
        std::thread::sleep(Duration::from_millis(step * step));
        let _ = child.kill();
        let _ = child.wait();
        let text = std::fs::read(&file).expect("the file is there all the time");
        assert!(text == b"old" || serde_json::from_slice::<Value>(&text).is_ok());
    }
}

/// A file system that holds less than the list.
#[test]
fn a_full_disk_leaves_nothing() {
    let name = "a_full_disk_leaves_nothing";
    let folder = tempfile::tempdir().expect("a folder");
    let script = "mount -t tmpfs -o size=16k none . && cd . && set +e
        cd \"$PWD\"; \"$0\" shortlist \"$1/sheet.toml\" --catalogs \"$1/catalogs\" --out list.json >&2
        echo status $?; ls -A";
    let Some(run) = in_own_name_space(name, folder.path(), script) else { return };
    assert_eq!(run.out, "status 2\n", "no file is left: {}", run.err);
    assert!(run.err.contains("list.json can't be written"), "{}", run.err);
}

#[test]
fn a_folder_that_is_read_only_is_told() {
    let name = "a_folder_that_is_read_only_is_told";
    let folder = tempfile::tempdir().expect("a folder");
    let script =
        "mount -t tmpfs -o size=1m none . && cd \"$PWD\" && mount -o remount,ro . && set +e
        \"$0\" shortlist \"$1/sheet.toml\" --catalogs \"$1/catalogs\" --out list.json >&2
        echo status $?; ls -A";
    let Some(run) = in_own_name_space(name, folder.path(), script) else { return };
    assert_eq!(run.out, "status 2\n", "{}", run.err);
    assert!(run.err.contains("list.json can't be written"), "{}", run.err);
}

/// A limit on the size of files ends the writing in its midst.
#[test]
fn a_limit_on_file_size_leaves_no_half_list() {
    let folder = tempfile::tempdir().expect("a folder");
    let shell = "trap '' XFSZ; ulimit -f 8; exec \"$@\"";
    let mut command = Command::new("sh");
    command.args(["-c", shell, "sh", env!("CARGO_BIN_EXE_railwright"), "shortlist"]);
    command.arg(case("fixed-12v").join("sheet.toml"));
    command.arg("--catalogs").arg(case("fixed-12v").join("catalogs"));
    command.args(["--quiet", "--out", "list.json"]).current_dir(folder.path());
    let run = told(command.output().expect("the shell runs"));
    assert_eq!(run.status, 2, "{}", run.err);
    assert!(run.err.contains("list.json can't be written"), "{}", run.err);
    assert_eq!(names(folder.path()), [""; 0], "nothing is left");
}

#[test]
fn runs_side_by_side_do_not_disturb_each_other() {
    let folder = tempfile::tempdir().expect("a folder");
    let start = |file: &str| list_into(folder.path(), file).spawn().expect("the program runs");
    let alone = start("alone.json").wait_with_output().expect("a run");
    assert!(alone.status.success());
    let expected = std::fs::read(folder.path().join("alone.json")).expect("a list");

    // Four files of their own, and four runs for one name, of which one has it.
    let own: Vec<_> = (0..4).map(|n| start(&format!("own-{n}.json"))).collect();
    let same: Vec<_> = (0..4).map(|_| start("same.json")).collect();
    for child in own {
        let run = told(child.wait_with_output().expect("a run"));
        assert_eq!(run.status, 0, "{}", run.err);
    }
    let runs: Vec<_> =
        same.into_iter().map(|child| told(child.wait_with_output().expect("a run"))).collect();
    let done = runs.iter().filter(|run| run.status == 0).count();
    assert_eq!(done, 1, "one of four has the name: {runs:?}");
    for refused in runs.iter().filter(|run| run.status != 0) {
        assert_eq!(refused.status, 2);
        assert!(refused.err.contains("is there already"), "{}", refused.err);
    }
    for file in ["own-0.json", "own-1.json", "own-2.json", "own-3.json", "same.json"] {
        assert!(std::fs::read(folder.path().join(file)).expect(file) == expected, "{file}");
    }
    let files = names(folder.path());
    assert_eq!(files.len(), 6, "no temporary file is left: {files:?}");
}

/// Nothing is written but where `--out` and `--as` say.
#[test]
fn nothing_is_written_elsewhere() {
    let folder = copy_of("fixed-12v");
    let before = names(folder.path());
    let run = |arguments: &[&str]| {
        let mut command = program(folder.path());
        command.args(arguments).args(["--catalogs", "catalogs"]);
        assert!(told(command.output().expect("a run")).status < 2);
    };
    run(&["shortlist", "sheet.toml"]);
    run(&["whynot", "sheet.toml"]);
    run(&["catalog", "check"]);
    assert_eq!(names(folder.path()), before);
    run(&["shortlist", "sheet.toml", "--out", "a.csv", "--keep", "1", "--as", "b.toml"]);
    let mut after = before;
    after.extend(["a.csv".to_owned(), "b.toml".to_owned()]);
    after.sort();
    assert_eq!(names(folder.path()), after);
}

/// Decimal points, order and texts do not follow the language that the machine is set to.
#[test]
fn other_locales_change_nothing() {
    let run = |locale: &str| {
        let mut command = program(&repository(""));
        for variable in ["LC_ALL", "LANG", "LC_NUMERIC", "LC_COLLATE"] {
            command.env(variable, locale);
        }
        command.args(["shortlist", "catalogs-sample/sheets/bench-5-15v.toml"]);
        command.args(["--catalogs", "catalogs-sample", "--top", "50"]);
        let output = command.output().expect("a run");
        assert!(output.status.success());
        output.stdout
    };
    let usual = run("C");
    assert!(!usual.is_empty());
    for locale in ["C.UTF-8", "de_DE.UTF-8", "tr_TR.UTF-8", "sv_SE", "ar_EG.UTF-8", "none"] {
        assert!(run(locale) == usual, "{locale}");
    }
}
