//! What holds for every file: no bytes panic, what was written is read back, and neither threads nor
//! the order of columns change what is read. Cells are made from the declarations themselves.

mod common;

use catalog::column::{Cell, Column, End, Need, Range};
use catalog::{Catalog, Kind, ReadOptions, Row};
use common::{Outcome, read_at, read_with, sound};
use proptest::prelude::*;
use std::fmt::Debug;

/// A figure inside a range, near its ends as well as far from them.
fn inside(range: Range) -> BoxedStrategy<f64> {
    let size = prop_oneof![0.001f64..1.0, 1.0f64..1e3];
    match (range.low, range.high) {
        (End::None, End::None) => size.prop_map(|v| v - 1.0).boxed(),
        (End::Closed(low) | End::Open(low), End::None) => size.prop_map(move |v| low + v).boxed(),
        (End::Closed(low) | End::Open(low), End::Closed(high) | End::Open(high)) => {
            (0.001f64..0.999).prop_map(move |t| low + t * (high - low)).boxed()
        }
        (End::None, End::Closed(high) | End::Open(high)) => {
            size.prop_map(move |v| high - v).boxed()
        }
    }
}

/// Points with strictly rising x.
fn points() -> BoxedStrategy<String> {
    proptest::collection::vec((0.01f64..5.0, 0.01f64..900.0), 1..5)
        .prop_map(|steps| {
            let mut x = 0.0;
            let items = steps.into_iter().map(|(step, y)| {
                x += step;
                format!("{x}:{y}")
            });
            items.collect::<Vec<_>>().join(";")
        })
        .boxed()
}

/// A sound text for a cell, blank where that proves nothing wrong.
fn cell(column: &'static Column) -> BoxedStrategy<String> {
    let text = match column.cell {
        Cell::Text if column.name == "polarity" => Just("npn".to_owned()).boxed(),
        Cell::Text => "[A-Z][a-z0-9 .-]{0,6}[a-z0-9]".boxed(),
        Cell::Word(words) => proptest::sample::select(words).prop_map(str::to_owned).boxed(),
        Cell::Number(figure) => inside(figure.range).prop_map(|v| v.to_string()).boxed(),
        Cell::Count(low, high) => (low..=high).prop_map(|n| n.to_string()).boxed(),
        Cell::Points(_) => points(),
        Cell::NumberOrPoints(_) => {
            prop_oneof![points(), (0.1f64..9.0).prop_map(|v| v.to_string())].boxed()
        }
        Cell::Price => prop_oneof![
            (0.0f64..99.0).prop_map(|v| v.to_string()),
            (1u64..50, 1u64..500, 0.0f64..9.0).prop_map(|(a, b, p)| format!(
                "{a}:{p};{}:{}",
                a + b,
                p / 2.0
            )),
        ]
        .boxed(),
        Cell::Numbers(_) => Just("1k;2k2;4k7".to_owned()).boxed(),
        Cell::Texts => Just("TO-220;TO-247".to_owned()).boxed(),
    };
    match column.need {
        // Cells whose columns hang together are left to their defaults.
        Need::Default(_) => Just(String::new()).boxed(),
        Need::Optional(_) => prop_oneof![3 => text, 1 => Just(String::new())].boxed(),
        _ => text,
    }
}

/// Rows of cells in the order of declaration, with names that differ.
fn rows(kind: Kind) -> impl Strategy<Value = Vec<Vec<String>>> {
    let one: Vec<_> = kind.columns().iter().map(cell).collect();
    proptest::collection::vec(one, 1..12).prop_map(move |mut rows| {
        let place = |name: &str| kind.columns().iter().position(|c| c.name == name).unwrap();
        for (n, row) in rows.iter_mut().enumerate() {
            row[place("part")] = format!("P{n}");
            if kind == Kind::Resistors {
                row[place("min_ohm")] = "1k".to_owned();
                row[place("max_ohm")] = "1M".to_owned();
            }
        }
        rows
    })
}

/// The file with its columns in this order.
fn written(kind: Kind, rows: &[Vec<String>], order: &[usize]) -> String {
    let names: Vec<String> = kind.columns().iter().map(|c| c.name.to_owned()).collect();
    let line =
        |cells: &Vec<String>| order.iter().map(|n| cells[*n].clone()).collect::<Vec<_>>().join(",");
    std::iter::once(&names).chain(rows).map(line).collect::<Vec<_>>().join("\n")
}

fn read_text(kind: Kind, text: &str) -> Outcome {
    read_with(&[(kind, text.as_bytes())], &ReadOptions::default())
}

/// What a kind's catalog holds, told as text, so that all kinds compare alike.
fn told(outcome: &Outcome, kind: Kind) -> String {
    fn rows<T: Debug>(catalog: &Catalog<T>) -> String {
        format!("{:?} {:?} {:?}", catalog.rows, catalog.unproven, catalog.left_out)
    }
    let shop = outcome.shop.as_ref().expect("a sound shop");
    match kind {
        Kind::Zeners => rows(&shop.zeners),
        Kind::Opamps => rows(&shop.opamps),
        Kind::Transistors => rows(&shop.transistors),
        Kind::Resistors => rows(&shop.resistors),
        Kind::Pots => rows(&shop.pots),
        Kind::Heatsinks => rows(&shop.heatsinks),
    }
}

fn any_kind() -> impl Strategy<Value = Kind> {
    proptest::sample::select(Kind::ALL.to_vec())
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(150))]

    #[test]
    fn declared_cells_are_read_whatever_the_order_of_columns(
        (kind, rows, order) in any_kind().prop_flat_map(|kind| {
            let places: Vec<usize> = (0..kind.columns().len()).collect();
            (Just(kind), rows(kind), Just(places).prop_shuffle())
        })
    ) {
        let in_order: Vec<usize> = (0..kind.columns().len()).collect();
        let plain = read_text(kind, &written(kind, &rows, &in_order));
        prop_assert_eq!(&plain.notices, &vec![]);
        let shuffled = read_text(kind, &written(kind, &rows, &order));
        prop_assert_eq!(&shuffled.notices, &vec![]);
        prop_assert_eq!(told(&plain, kind), told(&shuffled, kind));
        prop_assert_eq!(plain.shop.unwrap().unproven().count(), 0);
    }

    #[test]
    fn figures_are_read_back_as_they_were_written(rows in rows(Kind::Zeners)) {
        let order: Vec<usize> = (0..Kind::Zeners.columns().len()).collect();
        let outcome = read_text(Kind::Zeners, &written(Kind::Zeners, &rows, &order));
        let shop = outcome.shop.unwrap();
        let place = |name: &str| Kind::Zeners.columns().iter().position(|c| c.name == name).unwrap();
        let number = |row: &Vec<String>, name| row[place(name)].parse::<f64>().ok();
        prop_assert_eq!(shop.zeners.rows.len(), rows.len());
        for (read, row) in shop.zeners.rows.iter().zip(&rows) {
            prop_assert_eq!(Some(read.figures.vz_v), number(row, "vz_v"));
            prop_assert_eq!(Some(read.figures.tol), number(row, "tol_pct").map(|v| v / 100.0));
            prop_assert_eq!(Some(read.figures.tc_max_v_per_c), number(row, "tc_max_mv_per_c").map(|v| v / 1000.0));
            prop_assert_eq!(read.figures.zzk_ohm, number(row, "zzk_ohm"));
            prop_assert_eq!(read.stock, number(row, "stock"));
        }
    }

    #[test]
    fn a_figure_outside_its_range_is_an_error_at_its_cell(
        (kind, rows, which) in any_kind().prop_flat_map(|kind| (Just(kind), rows(kind), any::<prop::sample::Index>()))
    ) {
        let bounded: Vec<(usize, f64)> = kind.columns().iter().enumerate().filter_map(|(n, c)| match c.cell {
            Cell::Number(figure) => match figure.range.low {
                End::Closed(low) => Some((n, low - 1.0)),
                End::Open(low) => Some((n, low)),
                End::None => None,
            },
            _ => None,
        }).collect();
        let (place, outside) = bounded[which.index(bounded.len())];
        let mut rows = rows;
        let last = rows.len() - 1;
        rows[last][place] = outside.to_string();
        let order: Vec<usize> = (0..kind.columns().len()).collect();
        let outcome = read_text(kind, &written(kind, &rows, &order));
        let notice = outcome.only();
        prop_assert_eq!(notice.code, "cell-out-of-range");
        prop_assert_eq!(notice.place.line as usize, last + 2);
        let expected = kind.columns()[place].cell.to_string();
        prop_assert_eq!(notice.expected.as_deref(), Some(expected.as_str()));
        prop_assert!(outcome.shop.is_none());
    }

    #[test]
    fn no_bytes_panic(kind in any_kind(), bytes in proptest::collection::vec(any::<u8>(), 0..300), skip in any::<bool>()) {
        let options = ReadOptions { skip_broken_rows: skip, ..ReadOptions::default() };
        read_with(&[(kind, &bytes)], &options);
    }

    #[test]
    fn no_bytes_behind_a_header_panic(
        kind in any_kind(),
        tail in "([\"\\r\\n,;:\\x00\\xb5a-c0-9.µ°ΩkR-]|pnp){0,200}",
        cut in 0usize..400,
        raw in any::<u8>(),
    ) {
        let mut bytes = sound(kind).as_bytes().to_vec();
        bytes.truncate(cut.max(40));
        bytes.push(raw);
        bytes.extend(tail.as_bytes());
        for skip_broken_rows in [false, true] {
            let outcome = read_with(&[(kind, &bytes)], &ReadOptions { skip_broken_rows, ..ReadOptions::default() });
            for notice in &outcome.notices {
                if let Some(excerpt) = &notice.excerpt {
                    prop_assert!(excerpt.text.get(excerpt.start..excerpt.end).is_some());
                }
            }
            if let Some(shop) = &outcome.shop {
                let mut doubts = Vec::new();
                catalog::plausible::plausibility(shop, &mut doubts);
            }
        }
    }
}

/// A file of many pieces, with faults, blanks and duplicates strewn over it.
fn large_zeners() -> String {
    let (header, row) = sound(Kind::Zeners).split_once('\n').unwrap();
    let mut text = format!("{header}\n");
    for n in 0..20_000 {
        let row = match n % 2000 {
            7 => row.replace("ZA", &format!("Z{n}")).replace(",5.6,", ",x,"),
            11 => row.replace("ZA", &format!("Z{n}")).replace(",5.6,", ",,"),
            13 => row.replace("ZA", "Z12"),
            17 => "\r\n\n".to_owned(),
            _ => row.replace("ZA", &format!("Z{n}")),
        };
        text += &row;
    }
    text
}

#[test]
fn threads_change_nothing() {
    let folder = tempfile::tempdir().unwrap();
    for kind in Kind::ALL {
        std::fs::write(folder.path().join(kind.file_name()), sound(kind)).unwrap();
    }
    std::fs::write(folder.path().join("zeners.csv"), large_zeners()).unwrap();
    let options = ReadOptions { skip_broken_rows: true, ..ReadOptions::default() };
    let read = |threads: usize| {
        let pool = rayon_pool(threads);
        let outcome = pool.install(|| read_at(folder.path(), &options));
        (told(&outcome, Kind::Zeners), outcome.notices, outcome.shop.unwrap().zeners)
    };
    let (rows, notices, zeners) = read(1);
    assert_eq!(zeners.broken, 20, "ten cells and ten duplicates");
    assert_eq!(zeners.unproven.len(), 10);
    assert_eq!(notices.len(), 21);
    assert!(zeners.rows.windows(2).all(|w: &[Row<_>]| w[0].line < w[1].line));
    for threads in [2, 3, 8] {
        let (other_rows, other_notices, _) = read(threads);
        assert_eq!(notices, other_notices);
        assert_eq!(rows, other_rows);
    }
    // The lines are those of the file.
    let text = large_zeners();
    let lines: Vec<&str> = text.split('\n').collect();
    for row in zeners.rows.iter().step_by(997) {
        assert!(lines[row.line as usize - 1].starts_with(&format!("{},", row.part)));
    }
}

fn rayon_pool(threads: usize) -> rayon::ThreadPool {
    rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap()
}

#[test]
fn huge_headers_and_cells_are_only_large() {
    let many = (0..300_000).map(|n| format!("c{n}")).collect::<Vec<_>>().join(",");
    let outcome = read_text(Kind::Pots, &format!("{many}\n1,2\n"));
    assert!(outcome.shop.is_none());
    let long = "x".repeat(5_000_000);
    let text = sound(Kind::Pots).replace("0.5\n", &format!("0.5{long}\n"));
    assert_eq!(read_text(Kind::Pots, &text).only().code, "cell-notation");
    let breaks = "\n".repeat(5_000_000);
    let shop = read_text(Kind::Pots, &format!("{}{breaks}", sound(Kind::Pots))).clean();
    assert_eq!(shop.pots.rows.len(), 1);
}
