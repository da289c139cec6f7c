//! No text brings the reader down: every one is a sheet or a list of faults.

mod common;

use common::{FIXED, read, read_with, shop};
use notice::has_errors;
use proptest::prelude::*;
use sheet::{ShopFile, code, keys};

fn assert_sound_or_told(text: &str) {
    let (sheet, notices) = read(text);
    assert_eq!(sheet.is_none(), has_errors(&notices), "{text:?}");
    for notice in &notices {
        if let Some(excerpt) = &notice.excerpt {
            assert!(excerpt.text.get(excerpt.start..excerpt.end).is_some(), "{notice:?}");
        }
    }
    let mut notices = Vec::new();
    let shop = ShopFile::read("shop.toml", text, &mut notices);
    assert_eq!(shop.is_none(), has_errors(&notices), "{text:?}");
}

/// Pieces that sheets are made of, in any order.
fn piece() -> impl Strategy<Value = String> {
    let key = prop::sample::select(keys::ALL.iter().map(|key| key.name).collect::<Vec<_>>());
    let value = prop::sample::select(vec![
        "1",
        "-1",
        "0",
        "1e400",
        "nan",
        "0x7f",
        "\"forever\"",
        "\"18 V\"",
        "\"\"",
        "[]",
        "[[]]",
        "{}",
        "{ soa = 2 }",
        "true",
        "[\"a\", 1]",
        "1979-05-27",
        "'''x\ny'''",
    ]);
    let line = (key.clone(), value).prop_map(|(key, value)| format!("{key} = {value}\n"));
    let header = key.prop_map(|key| format!("[{key}]\n"));
    let noise = prop::sample::select(vec![
        "\n",
        " ",
        "=",
        ".",
        "[",
        "]",
        "{",
        "}",
        "\"",
        "'",
        "#",
        "\0",
        "\u{feff}",
        "\r\n",
        "µ",
        "[policy.x]\n",
        "[columns]\n",
        "currency = \"EUR\"\n",
        "[[feed]]\n",
        "[rail]\n",
    ]);
    prop_oneof![4 => line, 1 => header, 2 => noise.prop_map(str::to_owned)]
}

proptest! {
    #[test]
    fn any_text(text in any::<String>()) {
        assert_sound_or_told(&text);
    }

    #[test]
    fn any_pieces_of_a_sheet(pieces in prop::collection::vec(piece(), 0..20)) {
        assert_sound_or_told(&pieces.concat());
    }

    #[test]
    fn a_sound_sheet_with_a_piece_cut_out(from in 0..FIXED.len(), length in 0..40_usize) {
        let to = (from + length).min(FIXED.len());
        assert_sound_or_told(&format!("{}{}", &FIXED[..from], &FIXED[to..]));
    }

    #[test]
    fn any_argument_of_set(
        key in prop::sample::select(keys::ALL.iter().map(|key| key.name).collect::<Vec<_>>()),
        value in any::<String>(),
        rest in any::<String>(),
    ) {
        let set = [format!("{key}={value}"), rest];
        let set: Vec<&str> = set.iter().map(String::as_str).collect();
        let (sheet, notices) = read_with(FIXED, &shop(""), &set);
        prop_assert_eq!(sheet.is_none(), has_errors(&notices));
    }
}

#[test]
fn deep_nesting_is_refused_by_the_parser() {
    const DEEP: usize = 10_000;
    for text in [
        format!("x = {}", "[".repeat(DEEP)),
        format!("x = {}{}", "[".repeat(DEEP), "]".repeat(DEEP)),
        format!("x = {}1{}", "{a = ".repeat(DEEP), "}".repeat(DEEP)),
        format!("{}a = 1", "a.".repeat(DEEP)),
        format!("[{}a]", "a.".repeat(DEEP)),
    ] {
        let (sheet, notices) = read(&text);
        assert!(sheet.is_none());
        assert_eq!(notices[0].code, code::SYNTAX);
        let argument = format!("parts.ban={text}");
        let (sheet, notices) = read_with(FIXED, &ShopFile::empty(), &[&argument]);
        assert_eq!(sheet.is_none(), has_errors(&notices));
    }
}

#[test]
fn many_faults_stay_quick() {
    let lines: String = (0..20_000).map(|i| format!("feed.unheard_of_{i} = 1\n")).collect();
    let (sheet, notices) = read(&format!("{FIXED}{lines}"));
    assert!(sheet.is_none());
    assert_eq!(notices.len(), 20_000);
}
