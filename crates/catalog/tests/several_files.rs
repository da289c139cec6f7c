//! A kind of catalog in several files: `transistors.csv`, `transistors/*.csv`, or both.

mod common;

use catalog::plausible::plausibility;
use catalog::{Kind, ReadOptions};
use common::{Outcome, read_at, sound};
use notice::Severity;
use std::path::Path;

/// A folder with sound files of every kind but pots, and these besides.
fn folder(files: &[(&str, &str)]) -> tempfile::TempDir {
    let folder = tempfile::tempdir().unwrap();
    for kind in Kind::ALL.into_iter().filter(|kind| *kind != Kind::Pots) {
        std::fs::write(folder.path().join(kind.file_name()), sound(kind)).unwrap();
    }
    for (name, text) in files {
        let path = folder.path().join(name);
        std::fs::create_dir_all(path.parent().unwrap()).unwrap();
        std::fs::write(path, text).unwrap();
    }
    folder
}

fn read(folder: &Path) -> Outcome {
    read_at(folder, &ReadOptions::default())
}

/// A file of pots whose one row is this.
fn pot(row: &str) -> String {
    format!("{}\n{row}\n", sound(Kind::Pots).lines().next().unwrap())
}

const A: &str = "PA,Lodenby,2.40,10k,10,20,100,0.5";
const B: &str = "PB,Lodenby,2.50,22k,10,20,100,0.5";
const C: &str = "PC,Lodenby,2.60,47k,10,20,100,0.5";

#[test]
fn files_are_read_in_the_order_of_their_names() {
    let there = folder(&[
        ("pots/b.csv", &pot(B)),
        ("pots/a.CSV", &pot(C)),
        ("pots.csv", &pot(A)),
        ("pots/.~lock.a.csv#", "x"),
    ]);
    let shop = read(there.path()).clean();
    let rows: Vec<_> = shop.pots.rows.iter().map(|r| (r.part.as_str(), r.file, r.line)).collect();
    assert_eq!(rows, [("PA", 0, 2), ("PC", 1, 2), ("PB", 2, 2)]);
    let names: Vec<_> = shop.pots.files.iter().map(|f| f.name.as_str()).collect();
    assert_eq!(names, ["pots.csv", "pots/a.CSV", "pots/b.csv"]);
    assert_eq!(shop.pots.cell(2, 2, "value_ohm").as_deref(), Some("22k"));
    assert_eq!(shop.pots.files[1].bytes, pot(C).as_bytes(), "for the hash of each");
}

#[test]
fn a_folder_alone_is_enough_and_an_empty_one_is_not() {
    let there = folder(&[("zeners/brindlow.csv", sound(Kind::Zeners))]);
    std::fs::remove_file(there.path().join("zeners.csv")).unwrap();
    assert_eq!(read(there.path()).clean().zeners.rows.len(), 1);
    std::fs::remove_file(there.path().join("zeners/brindlow.csv")).unwrap();
    let outcome = read(there.path());
    let notice = outcome.only();
    assert_eq!((notice.code, notice.place.to_string().as_str()), ("file-missing", "zeners.csv"));
    assert!(notice.expected.as_ref().unwrap().contains("`zeners/*.csv`"), "{notice}");
}

#[test]
fn a_part_may_stand_in_one_file_only() {
    let there = folder(&[("pots.csv", &pot(A)), ("pots/b.csv", &format!("{}{A}\n", pot(B)))]);
    let outcome = read(there.path());
    let notice = outcome.only();
    assert_eq!(
        (notice.code, notice.place.to_string().as_str(), notice.found.as_deref()),
        ("row-duplicate", "pots/b.csv:3:1", Some("PA"))
    );
    assert!(notice.message.contains("line 2 of pots.csv"), "{notice}");
    let options = ReadOptions { skip_broken_rows: true, ..ReadOptions::default() };
    let shop = read_at(there.path(), &options).shop.unwrap();
    let broken: Vec<usize> = shop.pots.files.iter().map(|f| f.broken).collect();
    assert_eq!((shop.pots.rows.len(), shop.pots.broken, broken), (2, 1, vec![0, 1]));
}

#[test]
fn faults_and_doubts_name_the_file_and_its_own_lines() {
    let there = folder(&[
        ("pots/a.csv", &pot("PX,Lodenby,2.40,10k,x,20,100,0.5")),
        ("pots/b.csv", &format!("{}PY,Lodenby,y,10k,10,20,100,0.5\n", pot(B))),
    ]);
    let outcome = read(there.path());
    let places: Vec<_> = outcome.notices.iter().map(|n| n.place.to_string()).collect();
    assert_eq!(places, ["pots/a.csv:2:21", "pots/b.csv:3:12"]);

    let there = folder(&[("pots/a.csv", &pot(A)), ("pots/b.csv", &pot(&B.replace("22k", "22G")))]);
    let shop = read(there.path()).clean();
    let mut doubts = Vec::new();
    plausibility(&shop, &mut doubts);
    let about: Vec<_> = doubts.iter().filter(|n| n.code == "value-implausible").collect();
    assert_eq!(about.len(), 1, "{doubts:#?}");
    assert_eq!(about[0].place.to_string(), "pots/b.csv:2:17");
}

#[test]
fn what_is_no_catalog_is_told() {
    let there = folder(&[("pots/a.csv", &pot(A)), ("pots/b.xlsx", "PK")]);
    let outcome = read(there.path());
    let notice = outcome.only();
    assert_eq!(
        (notice.code, notice.severity, notice.place.to_string().as_str()),
        ("file-not-read", Severity::Warning, "pots/b.xlsx")
    );
    assert_eq!(outcome.shop.unwrap().pots.rows.len(), 1);
}

#[test]
fn each_file_has_its_own_columns_and_separator() {
    let other = "maker;part;power_w;value_ohm;tol_pct;end_ohm;tempco_ppm;cost\n\
                 Lodenby;PB;0.5;22k;10;20;100;2.50\n";
    let there = folder(&[("pots.csv", &pot(A)), ("pots/b.csv", other)]);
    let shop = read(there.path()).clean();
    let values: Vec<f64> = shop.pots.rows.iter().map(|r| r.figures.value_ohm).collect();
    assert_eq!(values, [10e3, 22e3]);
}
