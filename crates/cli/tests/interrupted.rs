//! Long work may be interrupted: nothing is written then, not even a part of a file.

#![cfg(unix)]

mod common;

use bench::large::{Order, Sizes, write_shop};
use common::program;
use std::os::unix::process::ExitStatusExt;
use std::process::{Command, Stdio};
use std::time::Duration;

/// Ends a process as SIGINT does, which Ctrl-C sends; but a shell that runs the tests in the background may
/// have its children ignore that one.
const SIGTERM: i32 = 15;

#[test]
fn an_interrupted_count_writes_nothing() {
    let shop = tempfile::tempdir().expect("a folder");
    // Some hundred million dividers to choose: minutes of counting.
    let sizes = Sizes { zeners: 3_000, pots: 1_000, ..Sizes::alike(200) };
    write_shop(shop.path(), &Order { sizes, seed: 1, hard: None }).expect("a shop");
    let folder = tempfile::tempdir().expect("a folder");
    let mut counting = program(folder.path())
        .arg("shortlist")
        .arg(shop.path().join("adjustable-5-15v.toml"))
        .arg("--catalogs")
        .arg(shop.path())
        .args(["--count", "--out", "x.json", "--out", "x.csv"])
        .stdout(Stdio::null())
        .stderr(Stdio::null())
        .spawn()
        .expect("the program runs");
    std::thread::sleep(Duration::from_secs(2));
    assert_eq!(counting.try_wait().expect("a status"), None, "the count has ended by itself");
    let signal = Command::new("kill").arg("-TERM").arg(counting.id().to_string()).status();
    assert!(signal.expect("kill runs").success());
    let status = counting.wait().expect("a status");
    assert_eq!(status.signal(), Some(SIGTERM), "{status}");
    let written: Vec<_> = std::fs::read_dir(folder.path()).expect("the folder").collect();
    assert!(written.is_empty(), "{written:?}");
}
