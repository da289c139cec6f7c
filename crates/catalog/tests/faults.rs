//! One test for each thing that can be wrong with a file: where it is found, and what is said.

mod common;

use catalog::read::MOST_NOTICES;
use catalog::{Kind, ReadOptions};
use common::{Outcome, read_file, read_with, sound, spoiled};
use notice::{Notice, Severity};

/// Spoils one cell and expects one error about it: code, column of the line, text found.
#[track_caller]
fn one_fault(kind: Kind, column: &str, cell: &str, code: &str, found: &str) -> Notice {
    let text = spoiled(kind, column, cell);
    let outcome = read_file(kind, &text);
    let notice = outcome.only().clone();
    assert_eq!(notice.code, code, "{notice}");
    assert_eq!(notice.severity, Severity::Error);
    assert_eq!(notice.place.file, kind.file_name());
    assert_eq!(notice.place.line, 2);
    assert_eq!(notice.found.as_deref(), Some(found));
    // The mark in the excerpt, and the column, are at the text found.
    let excerpt = notice.excerpt.as_ref().unwrap();
    assert_eq!(&excerpt.text[excerpt.start..excerpt.end], found);
    let row: Vec<char> = text.lines().nth(1).unwrap().chars().collect();
    let from = notice.place.column as usize - 1;
    let there: String = row[from..].iter().take(found.chars().count()).collect();
    assert_eq!(there, found, "column {}", notice.place.column);
    assert!(outcome.shop.is_none(), "an error stops the run");
    notice
}

fn expected(notice: &Notice) -> &str {
    notice.expected.as_deref().unwrap_or("")
}

fn mend(notice: &Notice) -> &str {
    notice.mend.as_deref().unwrap_or("")
}

#[test]
fn a_word_in_place_of_a_number() {
    let n = one_fault(Kind::Zeners, "vz_v", "plenty", "cell-notation", "plenty");
    assert_eq!(expected(&n), "a voltage in V, > 0");
}

#[test]
fn another_unit() {
    let n = one_fault(Kind::Zeners, "izt_a", "5 mV", "cell-unit", "5 mV");
    assert!(n.message.contains("a voltage in V where a current in A belongs"), "{n}");
}

#[test]
fn a_decimal_comma_in_a_file_with_semicolons() {
    let text = sound(Kind::Pots).replace(',', ";").replace("2.40", "2,40");
    let outcome = read_file(Kind::Pots, &text);
    assert_eq!(outcome.only().found.as_deref(), Some("2,40"));
    assert_eq!(mend(outcome.only()), "try `2.40`");
}

#[test]
fn a_date_that_a_spreadsheet_made() {
    let n = one_fault(Kind::Zeners, "vz_v", "06-Feb", "cell-notation", "06-Feb");
    assert!(n.message.contains("date"), "{n}");
}

#[test]
fn ranges_are_those_of_the_declarations() {
    for (kind, column, cell, expects) in [
        (Kind::Zeners, "tol_pct", "100", "a percentage in %, 0 … < 100"),
        (Kind::Zeners, "tol_pct", "-1", "a percentage in %, 0 … < 100"),
        (Kind::Zeners, "vz_v", "0", "a voltage in V, > 0"),
        (Kind::Zeners, "zzt_ohm", "-1", "a resistance in Ω, ≥ 0"),
        (Kind::Zeners, "tj_max_c", "25", "a temperature in °C, > 25"),
        (Kind::Opamps, "vos_max_v", "-1m", "a voltage in V, ≥ 0"),
        (Kind::Heatsinks, "cth_j_per_c", "0", "a heat capacity in J/°C, > 0"),
        (Kind::Transistors, "junctions", "3", "1 or 2"),
        (Kind::Transistors, "junctions", "1.5", "1 or 2"),
    ] {
        let n = one_fault(kind, column, cell, "cell-out-of-range", cell);
        assert_eq!(expected(&n), expects);
    }
}

#[test]
fn figures_too_large_or_too_small_to_hold() {
    one_fault(Kind::Zeners, "vz_v", "1e999", "cell-notation", "1e999");
    one_fault(Kind::Zeners, "vz_v", "1e-999", "cell-notation", "1e-999");
}

#[test]
fn a_word_that_is_none_of_the_choice() {
    let n = one_fault(Kind::Zeners, "status", "obsolet", "cell-word", "obsolet");
    assert_eq!(mend(&n), "try `obsolete`");
    one_fault(Kind::Zeners, "vz_at", "hot", "cell-word", "hot");
    one_fault(Kind::Resistors, "series", "E25", "cell-word", "E25");
}

#[test]
fn words_are_read_in_any_case() {
    for (kind, column, cell) in [
        (Kind::Zeners, "status", "Not-Recommended"),
        (Kind::Zeners, "vz_at", " PULSE "),
        (Kind::Resistors, "series", "e96"),
        (Kind::Transistors, "polarity", "NPN"),
    ] {
        let shop = read_file(kind, &spoiled(kind, column, cell)).clean();
        assert_eq!(shop.unproven().count(), 0);
        assert!(shop.transistors.left_out.is_empty());
    }
}

#[test]
fn points_that_do_not_rise() {
    let n = one_fault(Kind::Transistors, "hfe_min", "0.1:500;1:90;1:80", "cell-points", "1:80");
    assert!(expected(&n).contains("x = collector current in A, rising"), "{n}");
}

#[test]
fn points_with_exchanged_units() {
    let outcome = read_file(Kind::Transistors, &spoiled(Kind::Transistors, "soa_dc", "15A:10V"));
    let found: Vec<_> = outcome.notices.iter().map(|n| (n.code, n.found.as_deref())).collect();
    assert_eq!(found, [("cell-unit", Some("15A")), ("cell-unit", Some("10V"))]);
}

#[test]
fn points_may_bear_units_and_prefixes() {
    let text = spoiled(Kind::Transistors, "soa_dc", "10 V : 10 A; 0.08kV:500mA");
    let shop = read_file(Kind::Transistors, &text).clean();
    assert_eq!(shop.transistors.rows[0].figures.soa_dc.as_slice(), [(10.0, 10.0), (80.0, 0.5)]);
}

#[test]
fn items_that_are_no_points() {
    one_fault(Kind::Transistors, "hfe_min", "40", "cell-points", "40");
    one_fault(Kind::Transistors, "hfe_min", "1:40;", "cell-list", "");
    one_fault(Kind::Transistors, "soa_dc", "0:10;20:5", "cell-out-of-range", "0");
    one_fault(Kind::Transistors, "vbe_max_v", "-1", "cell-out-of-range", "-1");
}

#[test]
fn prices() {
    one_fault(Kind::Zeners, "cost", "-0.1", "cell-out-of-range", "-0.1");
    one_fault(Kind::Zeners, "cost", "10:0.5;10:0.4", "cell-price", "10");
    one_fault(Kind::Zeners, "cost", "0:0.5", "cell-price", "0");
    one_fault(Kind::Zeners, "cost", "1.5:0.5", "cell-price", "1.5");
    one_fault(Kind::Zeners, "cost", "1:0.5;0.4", "cell-price", "0.4");
    let n = one_fault(Kind::Zeners, "cost", "€0.42", "cell-notation", "€0.42");
    assert_eq!(mend(&n), "try `0.42`");
}

#[test]
fn lines_of_resistors() {
    one_fault(Kind::Resistors, "values", "1k;x;2k2", "cell-notation", "x");
    let n = one_fault(Kind::Resistors, "max_ohm", "99", "row-without-value", "99");
    assert_eq!(n.severity, Severity::Error);
    one_fault(Kind::Resistors, "values", "10;1M", "row-without-value", "100k");
    one_fault(Kind::Resistors, "zero_power_at_c", "70", "row-power-rating", "70");
    one_fault(Kind::Resistors, "max_ohm", "1e300", "row-too-wide", "1e300");
}

#[test]
fn values_win_over_the_series_and_are_cut_sorted_and_told_once() {
    let text = spoiled(Kind::Resistors, "values", "100k;4k7;100;4.7k;1M;99.9;220R");
    let shop = read_file(Kind::Resistors, &text).clean();
    assert_eq!(shop.resistors.rows[0].figures.values_ohm, [100.0, 220.0, 4700.0, 100e3]);
}

#[test]
fn a_line_with_neither_series_nor_values_lacks_its_series() {
    let shop = read_file(Kind::Resistors, &spoiled(Kind::Resistors, "series", "")).clean();
    assert_eq!(shop.resistors.unproven[0].lacks, ["series"]);
}

#[test]
fn a_row_without_part() {
    let outcome = read_file(Kind::Zeners, &spoiled(Kind::Zeners, "part", " "));
    assert_eq!(outcome.only().code, "row-without-part");
    assert_eq!(outcome.only().place.to_string(), "zeners.csv:2:1");
}

#[test]
fn a_part_that_stands_twice_names_both_lines() {
    let row = sound(Kind::Pots).lines().nth(1).unwrap();
    let text = format!(
        "{}OTHER,Lodenby,2.40,10k,10,20,100,0.5\n{}\n",
        sound(Kind::Pots),
        row.replace("PA,", " PA ,")
    );
    let outcome = read_file(Kind::Pots, &text);
    let notice = outcome.only();
    assert_eq!((notice.code, notice.place.line), ("row-duplicate", 4));
    assert!(notice.message.contains("line 2"), "{notice}");
    let kept = skipping(Kind::Pots, &text).shop.unwrap();
    assert_eq!((kept.pots.rows.len(), kept.pots.broken), (2, 1));
}

#[test]
fn the_same_name_of_another_maker_is_another_part() {
    let row = sound(Kind::Pots).lines().nth(1).unwrap().replace("Lodenby", "Ivory Gate");
    let shop = read_file(Kind::Pots, &format!("{}{row}\n", sound(Kind::Pots))).clean();
    assert_eq!(shop.pots.rows.len(), 2);
}

#[test]
fn a_row_with_too_few_or_too_many_cells() {
    for row in ["PB,Lodenby,2.40", "PB,Lodenby,2,40,10k,10,20,100,0.5"] {
        let outcome = read_file(Kind::Pots, &format!("{}{row}\n", sound(Kind::Pots)));
        assert_eq!(outcome.only().code, "row-ragged");
        assert_eq!(outcome.only().place.to_string(), "pots.csv:3");
    }
}

#[test]
fn a_quotation_mark_left_open_is_suspected() {
    let text = format!("{}\"PB,Lodenby\nPC,Lodenby,2.40,10k,10,20,100,0.5\n", sound(Kind::Pots));
    assert!(mend(read_file(Kind::Pots, &text).only()).contains("quotation mark"));
}

#[test]
fn cells_that_are_not_utf8_in_a_file_that_else_is() {
    let (header, row) = sound(Kind::Zeners).split_once('\n').unwrap();
    let mut bytes = format!("{header},extra,size\n").into_bytes();
    bytes.extend(
        row.trim_end().replace("0.5m", "500@A").bytes().map(|b| if b == b'@' { 0xB5 } else { b }),
    );
    bytes.extend(b",caf\xe9,4\xc2\xb5m\n");
    let outcome = read_with(&[(Kind::Zeners, &bytes)], &ReadOptions::default());
    let places: Vec<_> = outcome.notices.iter().map(|n| (n.code, n.place.line)).collect();
    assert_eq!(places, [("cell-not-utf8", 2), ("cell-not-utf8", 2)], "each cell once");
    assert!(outcome.notices.iter().any(|n| mend(n).contains("500µA")), "{:#?}", outcome.notices);
}

#[test]
fn blank_needed_cells_prove_nothing_but_other_cells_are_still_read() {
    let shop =
        read_file(Kind::Zeners, &spoiled(Kind::Zeners, "cost", "").replace(",5.6,", ",,")).clean();
    assert_eq!(shop.zeners.unproven[0].lacks, ["cost", "vz_v"]);
    let both = spoiled(Kind::Zeners, "cost", "").replace(",5.6,", ",x,");
    assert_eq!(read_file(Kind::Zeners, &both).only().code, "cell-notation");
    let polarity =
        read_file(Kind::Transistors, &spoiled(Kind::Transistors, "polarity", "")).clean();
    assert_eq!(polarity.transistors.unproven[0].lacks, ["polarity"]);
}

#[test]
fn rows_of_other_polarity_are_left_out_before_anything_else_is_read() {
    let text = spoiled(Kind::Transistors, "polarity", "pnp").replace(",80,", ",-80,");
    let shop = read_file(Kind::Transistors, &text).clean();
    assert_eq!(shop.transistors.left_out.len(), 1);
    assert!(shop.transistors.rows.is_empty() && shop.transistors.unproven.is_empty());
}

#[test]
fn headers() {
    let near = read_file(Kind::Zeners, &sound(Kind::Zeners).replace("zzk_ohm", "zzk_ohms"));
    let notice = near.only();
    assert_eq!((notice.code, notice.severity), ("column-near-miss", Severity::Warning));
    assert_eq!(notice.expected.as_deref(), Some("`zzk_ohm`"));
    assert_eq!(notice.place.line, 1);

    let needed = read_file(Kind::Zeners, &sound(Kind::Zeners).replace("zzt_ohm", "ZZT Ohm"));
    assert_eq!(needed.only().expected.as_deref(), Some("`zzt_ohm`"));
    assert_eq!(needed.shop.unwrap().zeners.unproven[0].lacks, ["zzt_ohm"]);

    let missing = read_file(Kind::Pots, &sound(Kind::Pots).replace("power_w", "watts"));
    assert_eq!(missing.only().code, "column-missing");
    assert!(missing.only().message.contains("`power_w`"));

    let twice = read_file(Kind::Pots, &sound(Kind::Pots).replace("end_ohm", "cost"));
    assert_eq!(twice.only().code, "column-duplicate");
    assert_eq!(twice.only().place.line, 1);
    assert!(twice.shop.is_none());

    let own = read_file(Kind::Zeners, &sound(Kind::Zeners).replace("izk_a", "iz_max_a"));
    assert!(own.notices.is_empty(), "a column of the shop's own beside a similar known one");
}

#[test]
fn unknown_columns_are_kept() {
    let text =
        sound(Kind::Pots).replace("power_w\n", "power_w,shelf\n").replace("0.5\n", "0.5, B7 \n");
    let shop = read_file(Kind::Pots, &text).clean();
    assert_eq!(shop.pots.cell(0, 2, "shelf").as_deref(), Some("B7"));
    assert_eq!(shop.pots.cell(0, 2, "bin"), None);
    assert_eq!(shop.pots.cell(0, 99, "shelf"), None);
}

#[test]
fn files_that_are_no_catalogs() {
    assert_eq!(read_file(Kind::Pots, "").only().code, "file-empty");
    let half = read_with(&[(Kind::Pots, b"\xff\xfep\0a")], &ReadOptions::default());
    assert_eq!(half.only().code, "file-encoding");
}

#[test]
fn spreadsheets_write_marks_line_ends_and_separators_of_their_own() {
    let plain = read_file(Kind::Pots, sound(Kind::Pots)).clean();
    let lines: Vec<&str> = sound(Kind::Pots).lines().collect();
    for text in [
        format!("\u{feff}{}", sound(Kind::Pots)),
        sound(Kind::Pots).replace('\n', "\r\n"),
        sound(Kind::Pots).replace(',', ";"),
        sound(Kind::Pots).replace(',', "\t"),
        sound(Kind::Pots).trim_end().to_owned(),
        format!("{}\n\"{}\"", lines[0], lines[1].replace(',', "\",\"")),
    ] {
        let shop = read_file(Kind::Pots, &text).clean();
        assert_eq!(shop.pots.rows, plain.pots.rows, "{text:?}");
    }
}

#[test]
fn lines_are_those_of_an_editor() {
    let rows =
        "\r\n\"P\r\nB\",Lodenby,2.40,10k,10,20,100,0.5\r\n\r\nPC,Lodenby,x,10k,10,20,100,0.5\r\n";
    let text = format!("{}{rows}", sound(Kind::Pots).replace('\n', "\r\n"));
    let outcome = read_file(Kind::Pots, &text);
    assert_eq!(outcome.only().place.to_string(), "pots.csv:7:12");
    let kept = skipping(Kind::Pots, &text).shop.unwrap();
    let lines: Vec<u32> = kept.pots.rows.iter().map(|r| r.line).collect();
    assert_eq!(lines, [2, 4]);
}

fn skipping(kind: Kind, text: &str) -> Outcome {
    let options = ReadOptions { skip_broken_rows: true, ..ReadOptions::default() };
    read_with(&[(kind, text.as_bytes())], &options)
}

#[test]
fn broken_rows_can_be_skipped() {
    let text = format!("{}PB,Lodenby,x,10k,y,20,100,0.5\n", sound(Kind::Pots));
    let outcome = skipping(Kind::Pots, &text);
    let codes: Vec<_> = outcome.notices.iter().map(|n| (n.code, n.severity)).collect();
    let warning = Severity::Warning;
    assert_eq!(
        codes,
        [("cell-notation", warning), ("cell-notation", warning), ("rows-skipped", warning)]
    );
    let shop = outcome.shop.unwrap();
    assert_eq!((shop.pots.rows.len(), shop.pots.broken), (1, 1));
}

#[test]
fn faults_of_all_files_are_gathered_and_cut_where_they_are_too_many() {
    let mut many = sound(Kind::Pots).to_owned();
    for n in 0..MOST_NOTICES + 50 {
        many += &format!("P{n},Lodenby,x,10k,10,20,100,0.5\n");
    }
    let zeners = spoiled(Kind::Zeners, "vz_v", "x");
    let outcome = read_with(
        &[(Kind::Pots, many.as_bytes()), (Kind::Zeners, zeners.as_bytes())],
        &ReadOptions::default(),
    );
    assert_eq!(outcome.notices[0].place.file, "zeners.csv");
    assert_eq!(outcome.notices.len(), 1 + MOST_NOTICES + 1);
    assert!(outcome.notices.last().unwrap().message.contains("50 more"));
}

#[test]
fn long_cells_are_cut_in_messages() {
    let long = "9".repeat(100_000) + "x";
    let outcome = read_file(Kind::Zeners, &spoiled(Kind::Zeners, "vz_v", &long));
    let notice = outcome.only();
    assert!(notice.to_string().len() < 500, "{}", notice.to_string().len());
    assert!(notice.excerpt.as_ref().unwrap().text.chars().count() < 250);
}
