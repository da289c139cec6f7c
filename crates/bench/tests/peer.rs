//! An embedded SQL database ranks the same candidates first as the search does.
//!
//! `peer/duckdb_join.py` says what the database works out by itself and what it is given.

#[path = "../../cli/tests/common/tool.rs"]
#[allow(dead_code)] // it uses some of it
mod tool;

use bench::large::{Hard, Order, Sizes, rail_sheets, write_shop};
use bench::peer::{write_shortlist, write_tables};
use bench::workload::{read_shop, take_sheet};
use eligible::eligible;
use select::ranking::{NO_SPREAD, shortlist};
use std::path::Path;
use std::process::Command;

/// Rows of the list that are compared.
const TOP: usize = 25;

#[test]
fn a_database_finds_the_same_candidates() {
    let name = "a_database_finds_the_same_candidates";
    let Some(python) = tool::python_with(name, &["duckdb"]) else { return };
    let script = Path::new(env!("CARGO_MANIFEST_DIR")).join("peer/duckdb_join.py");
    let sizes = Sizes { lines: 4, ..Sizes::alike(100) };
    let mut compared = 0;
    for (seed, hard) in
        [(1, None), (2, None), (3, Some(Hard::Undominated)), (4, Some(Hard::OneCheck))]
    {
        let order = Order { sizes, seed, hard };
        let folder = tempfile::tempdir().expect("a folder");
        write_shop(folder.path(), &order).expect("a shop");
        let shop = read_shop(folder.path()).expect("sound catalogs");
        for (sheet_name, text) in rail_sheets(&order) {
            let sheet = take_sheet(sheet_name, &text).expect("a sound sheet");
            if sheet.rail.is_adjustable() {
                continue; // the database knows fixed outputs alone
            }
            let rows = eligible(&sheet, &shop, false, &mut Vec::new());
            let problem = rows.problem();
            let list = shortlist(&problem, TOP, &NO_SPREAD).expect("a search of this size");
            let tables = folder.path().join(sheet_name).with_extension("tables");
            std::fs::create_dir(&tables).expect("a folder");
            write_tables(&problem, &tables).expect("tables");
            write_shortlist(&problem, &list, &tables.join("shortlist.csv")).expect("a list");
            let peer =
                Command::new(&python).arg(&script).arg(&tables).output().expect("Python runs");
            let told = String::from_utf8_lossy(&peer.stdout);
            let faults = String::from_utf8_lossy(&peer.stderr);
            assert!(peer.status.success(), "seed {seed}, {sheet_name}:\n{told}{faults}");
            compared += list.len();
        }
    }
    println!("{compared} rows agree");
    assert!(compared > 100, "{compared}: the shops have too few candidates to compare");
}
