//! Long work may be interrupted: nothing is written then, not even a part of a file.

#![cfg(unix)]

mod common;

use bench::large::{Order, Sizes, write_shop};
use common::program;
use std::os::unix::process::ExitStatusExt;
use std::process::{Command, Stdio};
use std::time::Duration;

/// The signal that Ctrl-C sends.
const SIGINT: i32 = 2;

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
    let signal = Command::new("kill").arg("-INT").arg(counting.id().to_string()).status();
    assert!(signal.expect("kill runs").success());
    let status = counting.wait().expect("a status");
    assert_eq!(status.signal(), Some(SIGINT), "{status}");
    let written: Vec<_> = std::fs::read_dir(folder.path()).expect("the folder").collect();
    assert!(written.is_empty(), "{written:?}");
}
