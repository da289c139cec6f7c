//! What several tests share: a sound sheet as lines that a test can change, and short calls.

#![allow(dead_code)] // each test file uses its own share

use notice::Notice;
use sheet::{Sheet, ShopFile};

/// A sound sheet with a fixed output, a line a key, so that a fault's line is easily found.
pub const FIXED: &str = "\
rail.name = \"Trial\"
feed.min_v = 18
feed.nominal_v = 21
feed.max_v = 25
output.voltage_v = 12
output.tolerance_pct = 8
load.max_a = 0.8
ambient.min_c = 0
ambient.max_c = 45
";

/// A sound sheet with an adjustable output.
pub const ADJUSTABLE: &str = "\
rail.name = \"Trial\"
feed.min_v = 20
feed.nominal_v = 24
feed.max_v = 28
output.adjust_from_v = 5
output.adjust_to_v = 15
load.max_a = 0.5
ambient.min_c = 5
ambient.max_c = 40
";

/// The sheet with the line of `key` replaced, or the line added at the end.
pub fn with(sheet: &str, key: &str, value: &str) -> String {
    let line = format!("{key} = {value}");
    let is_key = |old: &str| old.split('=').next().map(str::trim) == Some(key);
    if sheet.lines().any(is_key) {
        let lines = sheet.lines().map(|old| if is_key(old) { line.as_str() } else { old });
        lines.collect::<Vec<_>>().join("\n") + "\n"
    } else {
        format!("{sheet}{line}\n")
    }
}

/// The sheet without the line of `key`.
pub fn without(sheet: &str, key: &str) -> String {
    let kept = |line: &&str| line.split('=').next().map(str::trim) != Some(key);
    sheet.lines().filter(kept).collect::<Vec<_>>().join("\n") + "\n"
}

pub fn read_with(text: &str, shop: &ShopFile, set: &[&str]) -> (Option<Sheet>, Vec<Notice>) {
    let set: Vec<String> = set.iter().map(|s| (*s).to_owned()).collect();
    let mut notices = Vec::new();
    let sheet = sheet::read("rail.toml", text, shop, &set, &mut notices);
    (sheet, notices)
}

pub fn read(text: &str) -> (Option<Sheet>, Vec<Notice>) {
    read_with(text, &ShopFile::empty(), &[])
}

/// A sheet that has to be sound, without even a warning.
pub fn sound(text: &str) -> Sheet {
    let (sheet, notices) = read(text);
    assert_eq!(notices, [], "of\n{text}");
    sheet.expect("a sheet without notices")
}

/// A shop file that has to be sound.
pub fn shop(text: &str) -> ShopFile {
    let mut notices = Vec::new();
    let shop = ShopFile::read("shop.toml", text, &mut notices);
    assert_eq!(notices, [], "of\n{text}");
    shop.expect("a shop file without notices")
}

/// `code place` of each notice.
pub fn told(notices: &[Notice]) -> Vec<String> {
    notices.iter().map(|n| format!("{} {}", n.code, n.place)).collect()
}

/// The part of the line that a notice marks.
pub fn marked(notice: &Notice) -> &str {
    let excerpt = notice.excerpt.as_ref().expect("a notice with an excerpt");
    &excerpt.text[excerpt.start..excerpt.end]
}
