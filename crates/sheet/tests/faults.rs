//! One small case a fault: its code, its place, what it marks and what it suggests.

mod common;

use circuit::rail::{Derating, Output};
use circuit::slot::Slot;
use common::{ADJUSTABLE, FIXED, marked, read, read_with, shop, sound, told, with, without};
use notice::{Notice, Severity, has_errors};
use sheet::{ShopFile, code};

/// The one notice of a sheet that is refused for it.
fn only(text: &str) -> Notice {
    only_with(text, &ShopFile::empty(), &[])
}

fn only_with(text: &str, shop: &ShopFile, set: &[&str]) -> Notice {
    let (sheet, mut notices) = read_with(text, shop, set);
    assert_eq!(notices.len(), 1, "{:?}\nof\n{text}", told(&notices));
    assert!(sheet.is_none());
    notices.remove(0)
}

fn only_of_shop(text: &str) -> Notice {
    let mut notices = Vec::new();
    let shop = ShopFile::read("shop.toml", text, &mut notices);
    assert_eq!(notices.len(), 1, "{:?}\nof\n{text}", told(&notices));
    assert!(shop.is_none());
    notices.remove(0)
}

/// Code, place, and what is marked.
#[track_caller]
fn assert_told(notice: &Notice, code: &str, place: &str, mark: &str) {
    assert_eq!((notice.code, notice.place.to_string().as_str()), (code, place), "{notice}");
    assert_eq!(marked(notice), mark);
}

fn mend(notice: &Notice) -> &str {
    notice.mend.as_deref().unwrap_or("")
}

#[test]
fn misspelt_key() {
    let text = FIXED.replace("feed.min_v", "feed.minv");
    // The key that was meant is not called missing as well.
    let notice = only(&text);
    assert_told(&notice, code::UNKNOWN_KEY, "rail.toml:2:6", "minv");
    assert_eq!(mend(&notice), "did you mean `feed.min_v`?");
}

#[test]
fn misspelt_section() {
    let notice = only(&FIXED.replace("ambient.", "ambeint."));
    assert_told(&notice, code::UNKNOWN_KEY, "rail.toml:8:1", "ambeint");
    assert_eq!(mend(&notice), "did you mean `ambient`?");
}

#[test]
fn misspelt_output_section_is_not_called_missing() {
    let notice = only(&FIXED.replace("output.", "outptu."));
    assert_eq!(mend(&notice), "did you mean `output`?");
}

#[test]
fn key_outside_its_section() {
    let notice = only(&FIXED.replace("feed.min_v", "min_v"));
    assert_told(&notice, code::UNKNOWN_KEY, "rail.toml:2:1", "min_v");
    assert_eq!(mend(&notice), "did you mean `feed.min_v`?");
}

#[test]
fn dotted_name_in_quotes_is_another_key() {
    let notice = only(&FIXED.replace("feed.min_v", "\"feed.min_v\""));
    assert_eq!(notice.code, code::UNKNOWN_KEY);
    assert_eq!(mend(&notice), "did you mean `feed.min_v`?");
}

#[test]
fn unknown_key_like_no_other_lists_its_neighbours() {
    let notice = only(&with(FIXED, "rank.beauty", "3"));
    assert_eq!(mend(&notice), "");
    assert_eq!(notice.expected.as_deref(), Some("one of rank.cost, rank.loss, rank.stress"));
}

#[test]
fn misspelt_policy_field() {
    let notice = only(&with(FIXED, "derating", "{ soa = 0.8, zener_pwer = 0.5 }"));
    assert_told(&notice, code::UNKNOWN_KEY, "rail.toml:10:25", "zener_pwer");
    assert_eq!(mend(&notice), "did you mean `zener_power`?");
}

#[test]
fn shop_key_in_a_sheet() {
    let notice = only(&with(FIXED, "currency", "\"EUR\""));
    assert_told(&notice, code::SHOP_KEY_IN_SHEET, "rail.toml:10:1", "currency");
}

#[test]
fn number_in_quotes_with_its_unit() {
    let notice = only(&with(FIXED, "feed.min_v", "\"18 V\""));
    assert_told(&notice, code::WRONG_TYPE, "rail.toml:2:14", "\"18 V\"");
    assert_eq!(mend(&notice), "write `18`: the unit of this key is V");
    let notice = only(&with(FIXED, "load.max_a", "\"800mA\""));
    assert_eq!(mend(&notice), "write `0.8`: the unit of this key is A");
    let notice = only(&with(FIXED, "load.max_a", "\"0,8\""));
    assert_eq!(mend(&notice), "write `0.8`: the unit of this key is A");
    let notice = only(&with(FIXED, "load.max_a", "\"a lot\""));
    assert_eq!(mend(&notice), "write the bare figure, without quotes or unit");
}

#[test]
fn values_of_the_wrong_kind() {
    for (key, value) in [
        ("rail.name", "12"),
        ("load.max_a", "true"),
        ("parts.need_stock", "1"),
        ("parts.ban", "7"),
        ("derating", "0.8"),
        ("feed", "18"),
    ] {
        let base = if key == "feed" {
            ["feed.min_v", "feed.nominal_v", "feed.max_v"]
                .iter()
                .fold(FIXED.to_owned(), |text, key| without(&text, key))
        } else {
            FIXED.to_owned()
        };
        let notice = only(&with(&base, key, value));
        assert_eq!((notice.code, marked(&notice)), (code::WRONG_TYPE, value), "{key}");
    }
}

#[test]
fn section_where_a_number_belongs() {
    let notice = only(&format!("{}[load.max_a]\nx = 1\n", without(FIXED, "load.max_a")));
    assert_told(&notice, code::WRONG_TYPE, "rail.toml:9:1", "[load.max_a]");
}

#[test]
fn section_given_as_a_list() {
    let notice = only(&format!("{FIXED}[[rank]]\ncost = 2\n"));
    assert_told(&notice, code::WRONG_TYPE, "rail.toml:10:1", "[[rank]]");
}

#[test]
fn number_out_of_range() {
    let notice = only(&with(FIXED, "load.max_a", "0"));
    assert_told(&notice, code::OUT_OF_RANGE, "rail.toml:7:14", "0");
    assert_eq!(notice.expected.as_deref(), Some("a number above 0, in A"));
    let notice = only(&with(FIXED, "derating", "{ soa = 1.1 }"));
    assert_told(&notice, code::OUT_OF_RANGE, "rail.toml:10:20", "1.1");
    assert!(notice.message.contains("`derating.soa`"));
}

#[test]
fn numbers_that_are_not_finite() {
    for value in ["nan", "inf", "-inf", "1e999"] {
        let notice = only(&with(FIXED, "ambient.max_c", value));
        assert_told(&notice, code::OUT_OF_RANGE, "rail.toml:9:17", value);
    }
    let lasting = with(&with(FIXED, "fault.limit_a", "1"), "fault.lasts_s", "inf");
    assert_eq!(mend(&only(&lasting)), "write \"forever\" for a short without end");
}

#[test]
fn boards_are_whole() {
    assert_eq!(sound(&with(FIXED, "rail.boards", "20.0")).boards, 20);
    let notice = only(&with(FIXED, "rail.boards", "2.5"));
    assert_told(&notice, code::NOT_WHOLE, "rail.toml:10:15", "2.5");
    for value in ["0", "-3", "99999999999999999999"] {
        let notice = only(&with(FIXED, "rail.boards", value));
        assert_eq!((notice.code, marked(&notice)), (code::OUT_OF_RANGE, value));
    }
}

#[test]
fn blank_texts() {
    let notice = only(&with(FIXED, "rail.name", "\"  \""));
    assert_told(&notice, code::BLANK_TEXT, "rail.toml:1:13", "\"  \"");
    let notice = only(&with(FIXED, "parts.ban", "[\"AX1\", \"\"]"));
    assert_told(&notice, code::BLANK_TEXT, "rail.toml:10:21", "\"\"");
}

#[test]
fn empty_lists() {
    let notice = only(&with(FIXED, "parts.use.zener", "[]"));
    assert_told(&notice, code::EMPTY_LIST, "rail.toml:10:19", "[]");
    assert!(sound(&with(FIXED, "parts.ban", "[]")).parts.bans.is_empty());
}

#[test]
fn missing_keys_point_to_their_section() {
    let text = "[rail]\nname = \"Trial\"\n[feed]\nmin_v = 18\n[output]\nvoltage_v = 12\n\
                tolerance_pct = 8\n[load]\nmax_a = 1\n";
    let (sheet, notices) = read(text);
    assert!(sheet.is_none());
    assert_eq!(
        told(&notices),
        [
            "missing-key rail.toml",     // ambient.min_c
            "missing-key rail.toml",     // ambient.max_c
            "missing-key rail.toml:3:2", // feed.nominal_v
            "missing-key rail.toml:3:2", // feed.max_v
        ]
    );
    assert_eq!(marked(&notices[2]), "feed");
    assert!(notices[2].message.contains("`feed.nominal_v`"));
}

#[test]
fn neither_form_of_output() {
    let text = without(&without(FIXED, "output.voltage_v"), "output.tolerance_pct");
    let notice = only(&text);
    assert_eq!((notice.code, notice.place.to_string().as_str()), (code::NO_OUTPUT, "rail.toml"));
    let notice = only(&format!("{text}[output]\n"));
    assert_told(&notice, code::NO_OUTPUT, "rail.toml:8:2", "output");
}

#[test]
fn both_forms_of_output() {
    let notice = only(&with(FIXED, "output.adjust_to_v", "15"));
    assert_told(&notice, code::TWO_OUTPUTS, "rail.toml:10:8", "adjust_to_v");
    assert!(notice.message.contains("`output.voltage_v`"));
}

#[test]
fn half_a_form_misses_the_other_half() {
    let notice = only(&without(FIXED, "output.tolerance_pct"));
    assert_eq!(notice.code, code::MISSING_KEY);
    assert!(notice.message.contains("`output.tolerance_pct`"));
}

#[test]
fn keys_without_meaning() {
    for (base, key, value, why) in [
        (FIXED, "output.low_stop_v", "3", "with a fixed output"),
        (FIXED, "output.ceiling_v", "30", "with a fixed output"),
        (FIXED, "fault.lasts_s", "5", "without `fault.limit_a`"),
        (FIXED, "parts.use.pot", "\"P1\"", "with a fixed output"),
    ] {
        let notice = only(&with(base, key, value));
        let (_, last) = key.rsplit_once('.').expect("a dotted key");
        assert_eq!((notice.code, marked(&notice)), (code::WITHOUT_MEANING, last), "{notice}");
        assert!(notice.message.ends_with(why), "{notice}");
        // From the shop it is ignored.
        let shop = shop(&format!("{key} = {value}\n"));
        let (sheet, notices) = read_with(base, &shop, &[]);
        assert_eq!(notices, []);
        let sheet = sheet.expect("a sound sheet");
        assert_eq!(sheet.rail, sound(base).rail);
        assert!(sheet.parts.pins.iter().all(Option::is_none));
    }
}

#[test]
fn heatsink_pin_beside_a_sink() {
    let base = with(FIXED, "thermal.sink_c_per_w", "2");
    let notice = only(&with(&base, "parts.use.heatsink", "\"F1\""));
    assert_told(&notice, code::WITHOUT_MEANING, "rail.toml:11:11", "heatsink");
    let shop = shop("parts.use.heatsink = \"F1\"\n");
    let (sheet, _) = read_with(&base, &shop, &[]);
    assert_eq!(sheet.map(|s| s.parts.pins[Slot::Heatsink as usize].is_none()), Some(true));
    let (sheet, _) = read_with(FIXED, &shop, &[]);
    let pin = sheet.and_then(|s| s.parts.pins[Slot::Heatsink as usize].clone()).expect("a pin");
    assert_eq!((pin[0].text.as_str(), pin[0].from_shop), ("F1", true));
}

#[test]
fn figures_in_the_wrong_order() {
    for (base, key, value, place) in [
        (FIXED, "feed.min_v", "22", "rail.toml:3:18"),
        (FIXED, "feed.nominal_v", "26", "rail.toml:4:14"),
        (FIXED, "feed.max_loaded_v", "20", "rail.toml:10:21"),
        (FIXED, "feed.max_loaded_v", "26", "rail.toml:4:14"),
        (FIXED, "ambient.min_c", "46", "rail.toml:9:17"),
        (FIXED, "divider.min_a", "0.002", "rail.toml:10:17"),
        (FIXED, "divider.max_a", "0.0005", "rail.toml:10:17"),
        (ADJUSTABLE, "output.adjust_from_v", "15", "rail.toml:6:22"),
        (ADJUSTABLE, "output.low_stop_v", "5.1", "rail.toml:5:24"),
        (ADJUSTABLE, "output.ceiling_v", "14.9", "rail.toml:10:20"),
    ] {
        let (sheet, notices) = read(&with(base, key, value));
        assert!(sheet.is_none());
        let wrong: Vec<_> = notices.iter().filter(|n| n.code == code::WRONG_ORDER).collect();
        assert!(
            wrong.iter().any(|n| n.place.to_string() == place),
            "{key} = {value}: {:?}",
            told(&notices)
        );
    }
}

#[test]
fn equal_figures_are_in_order_where_that_is_allowed() {
    for (base, key, value) in [
        (FIXED, "feed.min_v", "21"),
        (FIXED, "feed.max_loaded_v", "25"),
        (FIXED, "feed.max_loaded_v", "21"),
        (FIXED, "ambient.min_c", "45"),
        (ADJUSTABLE, "output.low_stop_v", "5"),
        (ADJUSTABLE, "output.ceiling_v", "15"),
    ] {
        sound(&with(base, key, value));
    }
}

#[test]
fn order_against_a_default_or_the_shop_blames_the_sheet() {
    let notice = only(&with(FIXED, "divider.min_a", "0.003"));
    assert_told(&notice, code::WRONG_ORDER, "rail.toml:10:17", "0.003");
    assert_eq!(notice.found.as_deref(), Some("0.003 A and 0.002 A (by default)"));
    let shop = shop("divider.max_a = 0.001\n");
    let notice = only_with(&with(FIXED, "divider.min_a", "0.003"), &shop, &[]);
    assert_told(&notice, code::WRONG_ORDER, "rail.toml:10:17", "0.003");
    assert_eq!(notice.found.as_deref(), Some("0.003 A and 0.001 A (of the shop)"));
}

#[test]
fn order_inside_the_shop_blames_the_shop() {
    let shop = shop("divider.min_a = 0.003\n");
    let notice = only_with(FIXED, &shop, &[]);
    assert_told(&notice, code::WRONG_ORDER, "shop.toml:1:17", "0.003");
}

#[test]
fn fault_below_load_is_a_warning() {
    let (sheet, notices) = read(&with(FIXED, "fault.limit_a", "0.5"));
    assert!(sheet.is_some());
    assert_eq!(told(&notices), ["fault-below-load rail.toml:10:17"]);
    assert_eq!(notices[0].severity, Severity::Warning);
    sound(&with(FIXED, "fault.limit_a", "0.8"));
}

#[test]
fn a_long_short_keeps_its_figure() {
    let text = with(&with(FIXED, "fault.limit_a", "1"), "fault.lasts_s", "60");
    let fault = sound(&text).rail.fault.expect("a fault");
    assert_eq!(fault.lasts_s, 60.0);
    assert!(fault.is_lasting());
    let text = with(&text, "fault.lasts_s", "\"Forever\"");
    assert_eq!(sound(&text).rail.fault.map(|f| f.lasts_s), Some(f64::INFINITY));
    let notice = only(&with(&text, "fault.lasts_s", "\"for ever\""));
    assert_eq!((notice.code, mend(&notice)), (code::WRONG_TYPE, "write \"forever\""));
}

#[test]
fn weights_that_count_nothing() {
    let base = with(&with(FIXED, "rank.cost", "0"), "rank.loss", "0");
    assert_eq!(sound(&base).weights.stress, 1.0);
    let notice = only(&with(&base, "rank.stress", "0.0"));
    assert_told(&notice, code::NO_WEIGHT, "rail.toml:12:15", "0.0");
}

#[test]
fn unknown_policy() {
    let notice = only(&with(FIXED, "derating", "\"benhc\""));
    assert_told(&notice, code::UNKNOWN_POLICY, "rail.toml:10:12", "\"benhc\"");
    assert_eq!(mend(&notice), "did you mean \"bench\"?");
    let shop = shop("[policy.house]\nsoa = 0.9\n");
    let notice = only_with(&with(FIXED, "derating", "\"hosue\""), &shop, &[]);
    assert_eq!(mend(&notice), "did you mean \"house\"?");
}

#[test]
fn policy_as_a_table() {
    let rail = sound(&with(FIXED, "derating", "{ soa = 0.8, junction_cap_c = 110 }")).rail;
    let expected = Derating { soa: 0.8, junction_cap_c: Some(110.0), ..Derating::NONE };
    assert_eq!(rail.derating, expected);
    let rail = sound(&format!("{FIXED}[derating]\nsoa = 0.8\njunction_cap_c = 110\n")).rail;
    assert_eq!(rail.derating, expected);
}

#[test]
fn life_cycle_words() {
    let sheet = sound(&with(FIXED, "parts.allow_status", "[\"Active\", \" LAST-BUY\"]"));
    assert_eq!(sheet.parts.allow_status, ["active", "last-buy"]);
    let notice = only(&with(FIXED, "parts.allow_status", "[\"active\", \"obsolet\"]"));
    assert_told(&notice, code::UNKNOWN_WORD, "rail.toml:10:33", "\"obsolet\"");
    assert_eq!(mend(&notice), "did you mean \"obsolete\"?");
}

#[test]
fn text_that_is_no_toml() {
    let notice = only("rail.name = \"Trial\nfeed.min_v = 18\n");
    assert_eq!((notice.code, notice.place.line), (code::SYNTAX, 1));
    let notice = only("[feed]\nmin_v = 18 V\n");
    assert_told(&notice, code::SYNTAX, "rail.toml:2:9", "18 V");
    assert_eq!(mend(&notice), "write numbers without their unit, and texts in quotes");
    let notice = only("[feed]\nmin_v = 18\nmin_v = 19\n");
    assert_told(&notice, code::SYNTAX, "rail.toml:3:1", "min_v");
    let notice = only("rail.name = \0\n");
    assert_eq!((notice.code, notice.place.to_string().as_str()), (code::SYNTAX, "rail.toml:1:13"));
    // A control character is not handed on to whoever shows the line.
    assert_eq!(notice.excerpt.map(|e| e.text).as_deref(), Some("rail.name = ?"));
}

#[test]
fn several_faults_are_told_in_one_pass() {
    let text = "[feed]\nmin_v = \"18 V\"\nnominal_v = -1\nmaxv = 20\n[output]\nvoltage_v = 0\n\
                low_stop_v = 3\n[rank]\ncost = -1\n";
    let (_, notices) = read(text);
    assert_eq!(
        told(&notices),
        [
            "missing-key rail.toml", // rail.name
            "missing-key rail.toml", // load.max_a
            "missing-key rail.toml", // ambient.min_c
            "missing-key rail.toml", // ambient.max_c
            "wrong-type rail.toml:2:9",
            "out-of-range rail.toml:3:13",
            "unknown-key rail.toml:4:1",
            "missing-key rail.toml:5:2", // output.tolerance_pct
            "out-of-range rail.toml:6:13",
            "key-without-meaning rail.toml:7:1",
            "out-of-range rail.toml:9:8",
        ]
    );
}

#[test]
fn columns_count_characters() {
    let first = "\u{feff}rail = { name = \"Grün µ\", bords = 3 }";
    let notice = only(&format!("{first}\n{}", without(FIXED, "rail.name")));
    assert_told(&notice, code::UNKNOWN_KEY, "rail.toml:1:27", "bords");
}

#[test]
fn set_replaces_the_sheet() {
    let (sheet, notices) = read_with(
        FIXED,
        &ShopFile::empty(),
        &[
            "load.max_a=1.5",
            "rail.name = Spare rail",
            "parts.use.pass=2955",
            "parts.ban=[AX1, M/B 2]",
        ],
    );
    assert_eq!(notices, []);
    let sheet = sheet.expect("a sound sheet");
    assert_eq!(sheet.rail.load.max_a, 1.5);
    assert_eq!(sheet.name, "Spare rail");
    let pin = sheet.parts.pins[Slot::Pass as usize].as_ref().expect("a pin");
    assert_eq!(pin[0].text, "2955");
    assert_eq!(pin[0].place.to_string(), "--set parts.use.pass=2955");
    let bans: Vec<_> = sheet.parts.bans.iter().map(|b| b.text.as_str()).collect();
    assert_eq!(bans, ["AX1", "M/B 2"]);
    assert_eq!(sheet.set[0], "load.max_a=1.5");
    assert_eq!(sheet.set.len(), 4);
}

#[test]
fn set_takes_every_kind_of_value() {
    let set = [
        "derating={soa = 0.8}",
        "parts.need_stock=true",
        "fault.limit_a=1",
        "fault.lasts_s=forever",
        "parts.use.zener=[\"Z 1\", 'M/Z,2']",
        "rail.boards=1_000",
    ];
    let (sheet, notices) = read_with(FIXED, &ShopFile::empty(), &set);
    assert_eq!(notices, []);
    let sheet = sheet.expect("a sound sheet");
    assert_eq!((sheet.rail.derating.soa, sheet.boards), (0.8, 1000));
    assert!(sheet.parts.need_stock);
    assert_eq!(sheet.rail.fault.map(|f| f.lasts_s), Some(f64::INFINITY));
    let pin = sheet.parts.pins[Slot::Zener as usize].as_ref().expect("a pin");
    assert_eq!(pin.iter().map(|p| p.text.as_str()).collect::<Vec<_>>(), ["Z 1", "M/Z,2"]);
}

#[test]
fn faults_of_set() {
    for (set, code, hint) in [
        ("load.max_a=0", code::OUT_OF_RANGE, ""),
        ("load.max_a=1.5 A", code::WRONG_TYPE, "write `1.5`: the unit of this key is A"),
        ("load.maxa=1", code::UNKNOWN_KEY, "did you mean `load.max_a`?"),
        (
            "derating.soa=1",
            code::UNKNOWN_KEY,
            "set the policy as a whole: --set 'derating={soa=0.8}'",
        ),
        ("load.max_a", code::SET_MALFORMED, ""),
        ("rail.name=\"x", code::SYNTAX, ""),
        ("parts.ban=[a, b", code::SYNTAX, ""),
        ("feed.min_v=99", code::WRONG_ORDER, ""),
        ("output.ceiling_v=30", code::WITHOUT_MEANING, "remove it"),
        ("output.adjust_to_v=30", code::TWO_OUTPUTS, "remove the keys of one form"),
        (
            "currency=EUR",
            code::SHOP_KEY_IN_SHEET,
            "move it to shop.toml in the folder of the catalogs",
        ),
    ] {
        let (sheet, notices) = read_with(FIXED, &ShopFile::empty(), &[set]);
        assert!(sheet.is_none(), "{set}");
        let notice = notices.iter().find(|n| n.code == code);
        let notice = notice.unwrap_or_else(|| panic!("{set}: {:?}", told(&notices)));
        assert_eq!(mend(notice), hint, "{set}");
        if code != code::WRONG_ORDER {
            assert_eq!(notice.place.to_string(), format!("--set {set}"));
        }
    }
    let notice = only_with(FIXED, &ShopFile::empty(), &["load.max_a=1", "load.max_a=2"]);
    assert_eq!(notice.place.to_string(), "--set load.max_a=2");
    assert_eq!(notice.code, code::SET_TWICE);
}

#[test]
fn a_shop_default_of_the_other_form_is_ignored() {
    let shop = shop("output.voltage_v = 9\noutput.tolerance_pct = 5\noutput.ceiling_v = 30\n");
    let (sheet, notices) = read_with(ADJUSTABLE, &shop, &[]);
    assert_eq!(notices, []);
    assert_eq!(
        sheet.expect("a sound sheet").rail.output,
        Output::Adjustable { from_v: 5.0, to_v: 15.0, low_stop_v: 3.75, ceiling_v: Some(30.0) }
    );
    // The sheet's own keys give the form; the shop may complete it.
    let (sheet, notices) = read_with(&without(FIXED, "output.tolerance_pct"), &shop, &[]);
    assert_eq!(notices, []);
    let output = sheet.expect("a sound sheet").rail.output;
    assert_eq!(output, Output::Fixed { voltage_v: 12.0, tolerance: 0.05 });
}

#[test]
fn the_shop_alone_gives_no_form() {
    let shop = shop("output.voltage_v = 9\noutput.tolerance_pct = 5\n");
    let text = without(&without(FIXED, "output.voltage_v"), "output.tolerance_pct");
    assert_eq!(only_with(&text, &shop, &[]).code, code::NO_OUTPUT);
}

#[test]
fn faults_of_a_shop() {
    let notice = only_of_shop("curency = \"EUR\"\n");
    assert_told(&notice, code::UNKNOWN_KEY, "shop.toml:1:1", "curency");
    assert_eq!(mend(&notice), "did you mean `currency`?");
    let notice = only_of_shop("divider.min = 3\n");
    assert_eq!(mend(&notice), "did you mean `divider.min_a`?");
    let notice = only_of_shop("[policy.bench]\nsoa = 0.5\n");
    assert_told(&notice, code::POLICY_NAME_TAKEN, "shop.toml:1:9", "bench");
    let notice = only_of_shop("[policy.house]\nsoa = 0\n");
    assert_told(&notice, code::OUT_OF_RANGE, "shop.toml:2:7", "0");
    assert!(notice.message.contains("`policy.house.soa`"));
    let notice = only_of_shop("[policy.house]\nsoo = 0.5\n");
    assert_eq!(mend(&notice), "did you mean `soa`?");
    let notice = only_of_shop("derating = \"hosue\"\n[policy.house]\nsoa = 0.5\n");
    assert_told(&notice, code::UNKNOWN_POLICY, "shop.toml:1:12", "\"hosue\"");
    for text in ["policy = 3\n", "policy.house = 3\n", "columns = 3\n", "[columns]\nx = 3\n"] {
        assert_eq!(only_of_shop(text).code, code::WRONG_TYPE, "{text}");
    }
    assert_eq!(only_of_shop("currency = \"\"\n").code, code::BLANK_TEXT);
}

#[test]
fn a_status_word_of_the_shop_is_told_at_the_shop() {
    let notice = only_of_shop("parts.allow_status = [\"activ\"]\n");
    assert_told(&notice, code::UNKNOWN_WORD, "shop.toml:1:23", "\"activ\"");
}

#[test]
fn long_lines_are_cut_round_the_fault() {
    let padding = "x".repeat(500);
    let notice = only(&with(FIXED, "parts.ban", &format!("[\"{padding}\", 7, \"{padding}\"]")));
    let excerpt = notice.excerpt.as_ref().expect("an excerpt");
    assert!(excerpt.text.len() < 200);
    assert_eq!(marked(&notice), "7");
    assert!(has_errors(&[notice]));
}

#[test]
fn codes_do_not_repeat() {
    let mut codes = code::ALL.to_vec();
    codes.sort_unstable();
    codes.dedup();
    assert_eq!(codes.len(), code::ALL.len());
}
