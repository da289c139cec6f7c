//! Thresholds of blank cells on the sample catalogs: blanked, then filled in again in the files.

use catalog::{ReadOptions, Shop, read_folder};
use circuit::slot::Slot;
use eligible::eligible;
use reasons::gaps::{Span, Wanted, gaps};
use select::ranking::{NO_SPREAD, shortlist};
use sheet::{Sheet, ShopFile};
use std::path::{Path, PathBuf};

const TOP: usize = 10;

fn sample(path: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../../catalogs-sample").join(path)
}

fn sheet(name: &str) -> Sheet {
    let text = |path: &str| std::fs::read_to_string(sample(path)).expect("a sample file");
    let mut notices = Vec::new();
    let shop =
        ShopFile::read("shop.toml", &text("shop.toml"), &mut notices).expect("the shop file");
    let path = format!("sheets/{name}.toml");
    sheet::read(&path, &text(&path), &shop, &[], &mut notices)
        .unwrap_or_else(|| panic!("{notices:?}"))
}

/// The sample catalogs with other texts in some cells of a part: file, part, then column and text.
fn shop_with(file: &str, part: &str, cells: &[(&str, &str)]) -> Shop {
    let folder = tempfile::tempdir().expect("a folder");
    for entry in std::fs::read_dir(sample("")).expect("the samples") {
        let path = entry.expect("an entry").path();
        if path.extension().is_some_and(|e| e == "csv") {
            let name = path.file_name().expect("a name");
            std::fs::copy(&path, folder.path().join(name)).expect("a copy");
        }
    }
    let target = folder.path().join(file);
    let mut reader = csv::Reader::from_path(&target).expect("a catalog");
    let header = reader.headers().expect("a header").clone();
    let at = |column: &str| header.iter().position(|h| h == column);
    let records: Vec<csv::StringRecord> = reader.records().map(|r| r.expect("a row")).collect();
    let mut writer = csv::Writer::from_path(&target).expect("a catalog");
    writer.write_record(&header).expect("the header");
    let mut found = 0;
    for record in records {
        let is_it = at("part").and_then(|n| record.get(n)) == Some(part);
        found += usize::from(is_it);
        let texts = header.iter().zip(&record).map(|(column, text)| {
            let new = cells.iter().find(|(c, _)| is_it && *c == column);
            new.map_or(text, |(_, text)| *text)
        });
        writer.write_record(texts).expect("a row");
    }
    assert_eq!(found, 1, "{file} holds {part} once");
    writer.flush().expect("written");
    let mut notices = Vec::new();
    let options = ReadOptions { needs_pots: true, ..ReadOptions::default() };
    read_folder(folder.path(), &options, &mut notices).unwrap_or_else(|| panic!("{notices:?}"))
}

/// The part is among the first of the list.
fn is_listed(shop: &Shop, sheet: &Sheet, part: &str) -> bool {
    let rows = eligible(sheet, shop, true, &mut Vec::new());
    let problem = rows.problem();
    let list = shortlist(&problem, TOP, &NO_SPREAD).expect("a small search");
    list.iter().any(|candidate| {
        let name = |slot| {
            reasons::probe::name_at(&problem, slot, candidate.place(slot)?).map(|name| name.part)
        };
        Slot::ALL.into_iter().any(|slot| name(slot).as_deref() == Some(part))
    })
}

fn holds(span: &Span, value: f64) -> bool {
    span.low.is_none_or(|end| end.holds <= value) && span.high.is_none_or(|end| value <= end.holds)
}

/// Blanks one cell of a part that is on the list, and tries both sides of each threshold in the files.
fn check_one_blank(name: &str, file: &str, part: &str, column: &str, value: f64) -> usize {
    let sheet = sheet(name);
    let told = format!("{name}: {column} of {part}");
    let as_it_is = shop_with(file, part, &[]);
    assert!(is_listed(&as_it_is, &sheet, part), "{told} is on the list as it is");
    let blanked = shop_with(file, part, &[(column, "")]);
    assert!(!is_listed(&blanked, &sheet, part), "{told} is not with a blank");
    let rows = eligible(&sheet, &blanked, true, &mut Vec::new());
    let found = gaps(&rows, TOP).expect("a small search");
    let gap = found.gaps.iter().find(|gap| gap.part == part).unwrap_or_else(|| panic!("{told}"));
    assert!(gap.rank >= 1 && gap.rank <= TOP, "{told}");
    let [cell] = gap.cells.as_slice() else { panic!("{told}: one blank") };
    assert_eq!(cell.column, column);
    let Wanted::Spans(spans) = &cell.wanted else { panic!("{told}: figures") };
    assert!(spans.iter().any(|span| holds(span, value)), "{told}: {value} is in {spans:?}");
    let listed_with = |figure: f64| {
        let text = format!("{figure:?}");
        is_listed(&shop_with(file, part, &[(column, &text)]), &sheet, part)
    };
    let mut ends = 0;
    for end in spans.iter().flat_map(|span| [span.low, span.high]).flatten() {
        ends += 1;
        assert!(listed_with(end.value), "{told}: on the list at {end:?}");
        assert!(listed_with(end.holds), "{told}: on the list at {end:?}");
        assert!(!listed_with(end.fails), "{told}: off the list at {end:?}");
        let apart = (end.holds - end.fails).abs() / end.holds.abs().max(end.fails.abs());
        assert!(apart <= 1e-9, "{told}: {end:?}");
    }
    ends
}

#[test]
fn one_blank_lets_the_part_on_the_list_exactly_up_to_its_threshold() {
    let tide = "tide-gauge-12v";
    let ends = [
        check_one_blank(
            tide,
            "opamps.csv",
            "FNK314",
            "vos_max_v",
            cell_of("opamps.csv", "FNK314", "vos_max_v"),
        ),
        check_one_blank(
            tide,
            "opamps.csv",
            "FNK314",
            "iq_max_a",
            cell_of("opamps.csv", "FNK314", "iq_max_a"),
        ),
        check_one_blank(
            tide,
            "zeners.csv",
            "QK9V1-2",
            "tol_pct",
            cell_of("zeners.csv", "QK9V1-2", "tol_pct"),
        ),
        check_one_blank(
            tide,
            "transistors.csv",
            "DNW60-10DW",
            "rth_jc_c_per_w",
            cell_of("transistors.csv", "DNW60-10DW", "rth_jc_c_per_w"),
        ),
        check_one_blank(
            tide,
            "heatsinks.csv",
            "GDL-B5",
            "rth_sa_c_per_w",
            cell_of("heatsinks.csv", "GDL-B5", "rth_sa_c_per_w"),
        ),
    ];
    assert!(ends.iter().sum::<usize>() >= 4, "{ends:?}");
}

#[test]
fn with_several_blanks_each_is_told_beside_the_others_and_flips() {
    let (name, file, part) = ("tide-gauge-12v", "opamps.csv", "FNK314");
    let sheet = sheet(name);
    let blanked = shop_with(file, part, &[("vos_max_v", ""), ("iq_max_a", "")]);
    let rows = eligible(&sheet, &blanked, true, &mut Vec::new());
    let found = gaps(&rows, TOP).expect("a small search");
    let gap = found.gaps.iter().find(|gap| gap.part == part).expect("within reach");
    assert_eq!(gap.cells.len(), 2);
    for cell in &gap.cells {
        let [(other, text)] = cell.beside.as_slice() else { panic!("{cell:?}: one other blank") };
        let Wanted::Spans(spans) = &cell.wanted else { panic!("{cell:?}: figures") };
        for end in spans.iter().flat_map(|span| [span.low, span.high]).flatten() {
            let listed_with = |figure: f64| {
                let figure = format!("{figure:?}");
                let shop = shop_with(file, part, &[(cell.column, &figure), (other, text)]);
                is_listed(&shop, &sheet, part)
            };
            assert!(listed_with(end.value) && listed_with(end.holds), "{cell:?}");
            assert!(!listed_with(end.fails), "{cell:?}");
        }
    }
}

/// A figure of the sample catalogs.
fn cell_of(file: &str, part: &str, column: &str) -> f64 {
    let mut reader = csv::Reader::from_path(sample(file)).expect("a catalog");
    let header = reader.headers().expect("a header").clone();
    let at = |name: &str| header.iter().position(|h| h == name).expect("a column");
    let (name, column) = (at("part"), at(column));
    let row = reader.records().map(|r| r.expect("a row")).find(|r| &r[name] == part);
    let text = row.expect("a row of that name")[column].to_owned();
    let kind = catalog::Kind::ALL.into_iter().find(|k| k.file_name() == file).expect("a catalog");
    let name = &header[column];
    let Some(catalog::column::Cell::Number(figure)) = kind.column(name).map(|c| c.cell) else {
        panic!("{name} holds a figure")
    };
    quantity::notation::parse(&text, figure.unit).expect("a figure")
}
