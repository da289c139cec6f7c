//! Cells that would let a part in, on small random shops, held against the plain way: the nearest figure
//! that does, whatever stands beside the part.

use catalog::{Kind, ReadOptions, Shop, read_folder};
use circuit::slot::Slot;
use eligible::eligible;
use reasons::cell::CellCure;
use reasons::names::{Entry, look_up};
use reasons::part::{Reason, why_not};
use reasons::probe::keep_only;
use sheet::{Sheet, ShopFile};
use std::path::{Path, PathBuf};
use twin::plain::Plain;

/// Shops by seed from 0.
const SEEDS: u64 = 18;

/// Rows of each catalog of a shop, in the order of [`Kind::ALL`].
const ROWS: [usize; 6] = [2, 3, 3, 2, 1, 3];

/// Figures that are tried between a row's own and the one that is said to be the nearest.
const TRIED: u32 = 4;

fn sample(path: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../../catalogs-sample").join(path)
}

fn text(path: &str) -> String {
    std::fs::read_to_string(sample(path)).expect("a sample file")
}

/// A linear congruential generator modulo 2^64; multiplier of Knuth's MMIX.
struct Dice(u64);

impl Dice {
    fn below(&mut self, end: usize) -> usize {
        self.0 =
            self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 33) as usize % end
    }
}

/// A few rows of each of the sample's catalogs.
struct RandomRows {
    /// By `Kind as usize`: header and rows.
    catalogs: Vec<(Kind, csv::StringRecord, Vec<csv::StringRecord>)>,
}

impl RandomRows {
    fn from_seed(seed: u64) -> Self {
        let mut dice = Dice(seed);
        let few = |(kind, rows): (Kind, usize)| {
            let mut reader = csv::Reader::from_path(sample(kind.file_name())).expect("a catalog");
            let header = reader.headers().expect("a header").clone();
            let mut all: Vec<csv::StringRecord> =
                reader.records().map(|r| r.expect("a row")).collect();
            let few = (0..rows).map(|_| all.swap_remove(dice.below(all.len()))).collect();
            (kind, header, few)
        };
        Self { catalogs: Kind::ALL.into_iter().zip(ROWS).map(few).collect() }
    }

    /// The shop, with another text in a cell of a part.
    fn shop(&self, change: Option<(&Entry, &str, &str)>) -> Shop {
        let folder = tempfile::tempdir().expect("a folder");
        for (kind, header, rows) in &self.catalogs {
            let path = folder.path().join(kind.file_name());
            let mut writer = csv::Writer::from_path(path).expect("a catalog");
            writer.write_record(header).expect("the header");
            let at = |name: &str| header.iter().position(|h| h == name);
            let of = |row: &csv::StringRecord, name| at(name).map(|n| row[n].to_owned());
            for row in rows {
                let is_it = |entry: &Entry| {
                    entry.kind == *kind
                        && of(row, "part").as_deref() == Some(&entry.part)
                        && of(row, "maker").as_deref() == Some(&entry.maker)
                };
                let texts = header.iter().zip(row).map(|(column, text)| match change {
                    Some((entry, changed, new)) if column == changed && is_it(entry) => new,
                    _ => text,
                });
                writer.write_record(texts).expect("a row");
            }
            writer.flush().expect("written");
        }
        let mut notices = Vec::new();
        let options = ReadOptions { needs_pots: true, ..ReadOptions::default() };
        read_folder(folder.path(), &options, &mut notices).unwrap_or_else(|| panic!("{notices:?}"))
    }

    fn names_of(&self, kind: Kind) -> Vec<String> {
        let of = |header: &csv::StringRecord, row: &csv::StringRecord| {
            let at = |name: &str| header.iter().position(|h| h == name).expect("a column");
            format!("{}/{}", &row[at("maker")], &row[at("part")])
        };
        let catalogs = self.catalogs.iter().filter(|(k, ..)| *k == kind);
        catalogs.flat_map(|(_, header, rows)| rows.iter().map(move |row| of(header, row))).collect()
    }
}

fn sheet(name: &str) -> Sheet {
    let mut notices = Vec::new();
    let shop =
        ShopFile::read("shop.toml", &text("shop.toml"), &mut notices).expect("the shop file");
    let path = format!("sheets/{name}.toml");
    sheet::read(&path, &text(&path), &shop, &[], &mut notices)
        .unwrap_or_else(|| panic!("{notices:?}"))
}

/// The plain way finds a candidate with the part.
fn admits(shop: &Shop, sheet: &Sheet, slot: Slot, entry: &Entry) -> bool {
    let rows = eligible(sheet, shop, true, &mut Vec::new());
    let mut problem = rows.problem();
    keep_only(&mut problem, slot, &entry.maker, &entry.part);
    !Plain::new(&problem).ranked.is_empty()
}

/// The cells that would let the one row of a name in.
fn cures(name: &str, shop: &Shop, sheet: &Sheet) -> Option<(Entry, Slot, Vec<CellCure>)> {
    let rows = eligible(sheet, shop, true, &mut Vec::new());
    let [entry] = &look_up(name, shop).ok()?[..] else { return None };
    let reasons = why_not(entry, &rows, &rows.problem()).expect("a small search");
    let (slot, Reason::Infeasible(infeasible)) = reasons.into_iter().next()? else { return None };
    Some((entry.clone(), slot, infeasible.cells))
}

#[test]
fn a_cell_of_an_amplifier_a_transistor_or_a_heatsink_is_changed_by_the_least_that_does() {
    let mut seen = [0usize; Slot::COUNT];
    for seed in 0..SEEDS {
        let sheet =
            sheet(["tide-gauge-12v", "survives-short-9v", "impossible-10v"][seed as usize % 3]);
        let rows = RandomRows::from_seed(seed);
        let shop = rows.shop(None);
        for kind in [Kind::Opamps, Kind::Transistors, Kind::Heatsinks] {
            for name in rows.names_of(kind) {
                let Some((entry, slot, cells)) = cures(&name, &shop, &sheet) else { continue };
                for cure in cells {
                    let with = |figure: f64| {
                        let text = format!("{figure:?}");
                        let shop = rows.shop(Some((&entry, cure.column, &text)));
                        admits(&shop, &sheet, slot, &entry)
                    };
                    let told = format!("seed {seed}, {name}: {cure:?}");
                    assert!(cure.is_nearest, "{told}");
                    assert!(with(cure.value), "{told}");
                    assert!(!with(cure.from), "{told}");
                    // The figure is rounded by a thousandth at most.
                    let step = (cure.value - cure.from) / f64::from(TRIED);
                    let nearer = (1..TRIED).map(|n| cure.from + f64::from(n) * step);
                    let just_short = cure.value - 0.0011 * cure.value.abs() * step.signum();
                    let short_of_it = nearer.chain([just_short]).filter(|x| {
                        (cure.value - x) * step.signum() >= 0.001 * cure.value.abs()
                            && (x - cure.from) * step.signum() >= 0.0
                    });
                    for nearer in short_of_it {
                        assert!(!with(nearer), "{told}: {nearer} does already");
                    }
                    seen[slot as usize] += 1;
                }
            }
        }
    }
    for slot in [Slot::Amplifier, Slot::Pass, Slot::Heatsink] {
        assert!(seen[slot as usize] > 1, "{} cells of {}", seen[slot as usize], slot.name());
    }
}
