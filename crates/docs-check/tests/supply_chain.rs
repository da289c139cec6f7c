//! What comes from outside: the toolchain that dependencies ask for, and how many there are.

use serde_json::Value;
use std::collections::BTreeSet;
use std::process::Command;

/// What Cargo knows about the workspace and its dependencies.
fn metadata() -> Value {
    let cargo = std::env::var("CARGO").unwrap_or_else(|_| "cargo".to_owned());
    let told = Command::new(cargo)
        .args(["metadata", "--format-version", "1", "--offline", "--locked"])
        .current_dir(docs_check::root())
        .output()
        .expect("Cargo runs");
    assert!(told.status.success(), "{}", String::from_utf8_lossy(&told.stderr));
    serde_json::from_slice(&told.stdout).expect("JSON")
}

/// `1.88` or `1.88.0` as numbers that can be compared.
fn version(text: &str) -> Vec<u32> {
    let mut numbers: Vec<u32> = text.split('.').map(|n| n.parse().expect("a number")).collect();
    numbers.resize(3, 0);
    numbers
}

#[test]
fn the_stated_toolchain_is_not_below_what_dependencies_state() {
    let metadata = metadata();
    let packages = metadata["packages"].as_array().expect("packages");
    let is_ours = |package: &&Value| package["source"].is_null();
    let stated = |package: &Value| package["rust_version"].as_str().map(str::to_owned);
    let ours: BTreeSet<String> = packages.iter().filter(is_ours).filter_map(stated).collect();
    assert_eq!(ours.len(), 1, "one toolchain for all crates: {ours:?}");
    let ours = version(ours.first().expect("one"));
    let mut states_one = 0;
    for package in packages.iter().filter(|p| !is_ours(p)) {
        let Some(theirs) = stated(package) else { continue };
        states_one += 1;
        assert!(version(&theirs) <= ours, "{} asks for {theirs}", package["name"]);
    }
    assert!(states_one > 20, "only {states_one} dependencies state a toolchain");
}
