//! The pages (HTML) of lists and designs, as a browser shows them.

mod common;

use common::browser::{Browser, list, number};
use common::{copy_of_the_sample, repository, run};
use serde_json::Value;
use std::path::{Path, PathBuf};

const PICTURES: [&str; 6] = ["circuit", "operating-area", "headroom", "output", "stress", "front"];

/// Writes the page of a sheet, and its list as JSON.
fn list_page(shop: &Path, sheet: &str, more: &[&str], to: &Path) -> (PathBuf, Value) {
    let (page, json) = (to.join("list.html"), to.join("list.json"));
    let sheet = shop.join("sheets").join(sheet);
    let mut arguments = vec!["shortlist", sheet.to_str().expect("a path"), "--catalogs"];
    let [shop, page_name, json_name] = [shop, &page, &json].map(|p| p.to_str().expect("a path"));
    arguments.extend([shop, "--top", "2", "--out", page_name, "--out", json_name]);
    arguments.extend(more);
    let told = run(to, &arguments);
    assert_eq!(told.status, 0, "{}", told.err);
    let list = std::fs::read(&json).expect("the list");
    (page, serde_json::from_slice(&list).expect("JSON"))
}

fn sample_list(sheet: &str, to: &Path) -> (PathBuf, Value) {
    list_page(&repository("catalogs-sample"), sheet, &[], to)
}

/// The page of designs.
fn design_page(designs: &[&str], to: &Path) -> PathBuf {
    let page = to.join("designs.html");
    let shop = repository("catalogs-sample");
    let mut arguments = vec!["verify".to_owned()];
    arguments.extend(designs.iter().map(|d| shop.join("designs").join(d).display().to_string()));
    arguments.extend(["--catalogs".to_owned(), shop.display().to_string()]);
    arguments.extend(["--out".to_owned(), page.display().to_string()]);
    let arguments: Vec<&str> = arguments.iter().map(String::as_str).collect();
    let told = run(to, &arguments);
    assert!(told.status < 2, "{}", told.err);
    page
}

/// What is expected of every page: no error, nothing loaded, nothing that keeps people out, no label cut,
/// no sideways scrolling, and pages on paper.
fn sound(seen: &Value) {
    let page = seen["first"].as_str().expect("the page's address");
    for request in list(seen, "/requests") {
        assert_eq!(request.as_str(), Some(page), "the page loads something");
    }
    assert!(list(seen, "/console").is_empty(), "errors: {}", seen["console"]);
    for what in ["repeatedIds", "lostLinks", "outward"] {
        let found = list(seen, &format!("/document/{what}"));
        assert!(found.is_empty(), "{what}: {found:?}");
    }
    assert_eq!(seen["document"]["scripts"], 0);
    for view in ["light", "dark", "phone"] {
        let told = &seen["views"][view];
        assert!(list(told, "/violations").is_empty(), "{view}: {}", told["violations"]);
        assert!(number(told, "passes") > 20.0, "{view}: hardly any rule was applied");
        assert!(number(told, "sideways") <= 0.0, "{view}: the page scrolls sideways");
    }
    assert_ne!(seen["views"]["light"]["ground"], seen["views"]["dark"]["ground"]);
    for paper in ["A4", "Letter"] {
        assert!(number(&seen["pdf"], paper) >= 2.0, "{paper}: {}", seen["pdf"]);
    }
    for picture in list(seen, "/pictures") {
        let name = &picture["name"];
        assert_eq!(picture["role"], "img", "{name}");
        assert_eq!(picture["labelled"], true, "{name}: title and description are not found");
        assert!(picture["told"].as_str().is_some_and(|t| t.len() > 40), "{name} tells nothing");
        let cut = list(picture, "/outside");
        assert!(cut.is_empty(), "{name}: labels leave the picture: {cut:?}");
    }
}

/// Where a figure lies on an axis, by what the axis says of itself.
fn place(axis: &Value, figure: f64) -> f64 {
    let [from, to, start, end] =
        ["from", "to", "placeFrom", "placeTo"].map(|name| number(axis, name));
    let share = match axis["scale"].as_str() {
        Some("logarithmic") => (figure / from).ln() / (to / from).ln(),
        _ => (figure - from) / (to - from),
    };
    start + share * (end - start)
}

fn near(a: f64, b: f64, within: f64, what: &str) {
    assert!((a - b).abs() <= within, "{what}: {a} in place of {b}");
}

/// The same figure, written in two files and read by readers that may differ in the last bit.
fn same(a: f64, b: f64, what: &str) {
    near(a, b, 1e-12 * a.abs(), what);
}

/// The pictures of a section, by name.
fn picture<'v>(seen: &'v Value, section: &str, name: &str) -> &'v Value {
    list(seen, "/pictures")
        .iter()
        .find(|p| p["section"] == section && p["name"] == name)
        .unwrap_or_else(|| panic!("{section} has no picture {name}"))
}

fn check<'v>(candidate: &'v Value, name: &str) -> &'v Value {
    let checks = list(candidate, "/checks").iter();
    checks.clone().find(|c| c["name"] == name).unwrap_or_else(|| panic!("no check {name}"))
}

#[test]
fn a_list_is_drawn_where_its_numbers_say() {
    let Some(browser) = Browser::for_test("a_list_is_drawn_where_its_numbers_say") else { return };
    let folder = tempfile::tempdir().expect("a folder");
    let (page, told) = sample_list("tide-gauge-12v.toml", folder.path());
    let seen = browser.look(&page);
    sound(&seen);
    assert_eq!(list(&seen, "/pictures").len(), 2 * PICTURES.len());
    for candidate in list(&told, "/candidates") {
        let id = candidate["id"].as_str().expect("an id");
        for name in PICTURES {
            picture(&seen, id, name);
        }
        operating_area(picture(&seen, id, "operating-area"), candidate);
        bars(picture(&seen, id, "stress"), candidate);
        front(picture(&seen, id, "front"), candidate);
    }
}

/// The spots lie where the axes put their figures, and these are the checks' own; the derated curves lie
/// below the given ones by what the checks allow.
fn operating_area(picture: &Value, candidate: &Value) {
    for spot in list(picture, "/spots") {
        let name = spot["point"].as_str().expect("a name");
        near(number(spot, "x"), place(&picture["x"], number(spot, "v")), 0.1, name);
        near(number(spot, "y"), place(&picture["y"], number(spot, "a")), 0.1, name);
        let asked = &check(candidate, &format!("soa-{name}"))["asked"];
        same(number(spot, "a"), asked.as_f64().expect("a current"), name);
    }
    let curves = list(picture, "/curves");
    let first_a = |curve: &Value| {
        let points = curve["points"].as_str().expect("points");
        points.split([' ', ',']).nth(1).and_then(|a| a.parse::<f64>().ok()).expect("a current")
    };
    let of = |state: &str| {
        let wanted = |c: &&Value| c["state"] == state && c["curve"] == "soa_dc";
        first_a(curves.iter().find(wanted).unwrap_or_else(|| panic!("no {state} curve")))
    };
    // At the load the given curve lies on a slope, so the share that is left is compared.
    let load = check(candidate, "soa-load");
    let left = of("service") / of("given");
    assert!(left > 0.0 && left < 1.0, "{left}");
    assert!(of("fault") / of("given") < left, "the short heats the case further");
    assert!(number(load, "allowed") <= of("service"), "no more is allowed than the curve's top");
}

/// Each bar is as long as the use of its limit, and each check has one.
fn bars(picture: &Value, candidate: &Value) {
    let bars = list(picture, "/bars");
    assert_eq!(bars.len(), list(candidate, "/checks").len());
    for bar in bars {
        let name = bar["check"].as_str().expect("a name");
        let u = number(check(candidate, name), "utilisation");
        same(number(bar, "utilisation"), u, name);
        let drawn = number(bar, "x") + number(bar, "width");
        near(drawn, place(&picture["x"], u).max(number(bar, "x") + 0.5), 0.02, name);
    }
}

/// The candidate is marked with its own figures, once in each field.
fn front(picture: &Value, candidate: &Value) {
    let spots = list(picture, "/spots");
    let marked: Vec<&Value> = spots.iter().filter(|s| s["point"] == "marked").collect();
    assert_eq!(marked.len(), 2);
    for spot in marked {
        assert_eq!(spot["id"], candidate["id"]);
        for figure in ["cost", "loss", "stress"] {
            same(number(spot, figure), number(candidate, figure), figure);
        }
        near(number(spot, "y"), place(&picture["y"], number(spot, "stress")), 0.1, "stress");
    }
    let others = spots.iter().filter(|s| s["point"] == "front").count();
    assert!(others >= 2, "the front itself is drawn");
}

#[test]
fn the_rows_of_a_page_are_those_of_the_list() {
    let Some(browser) = Browser::for_test("the_rows_of_a_page_are_those_of_the_list") else {
        return;
    };
    let folder = tempfile::tempdir().expect("a folder");
    let (page, told) = sample_list("bench-5-15v.toml", folder.path());
    let seen = browser.look(&page);
    sound(&seen);
    let cells = list(&seen, "/document/cells");
    let checks: Vec<&Value> =
        list(&told, "/candidates").iter().flat_map(|c| list(c, "/checks")).collect();
    assert_eq!(cells.len(), checks.len());
    for (cell, check) in cells.iter().zip(checks) {
        assert_eq!(cell["check"], check["name"]);
        same(number(cell, "asked"), number(check, "asked"), "asked");
        same(number(cell, "allowed"), number(check, "allowed"), "allowed");
    }
    // Not one figure of the list's head is left out.
    let text = seen["document"]["text"].as_str().expect("text");
    for words in ["5 V to 15 V", "Cautions", "assume.gain_db = 80", "resistors.csv", "SHA-256"] {
        assert!(text.contains(words), "the page does not say {words}");
    }
}

#[test]
fn designs_that_hold_and_designs_that_fail_have_a_sound_page() {
    let Some(browser) = Browser::for_test("designs_that_hold_and_designs_that_fail") else {
        return;
    };
    let folder = tempfile::tempdir().expect("a folder");
    let page = design_page(&["sensor-kept.toml", "tide-gauge-1994.toml"], folder.path());
    let seen = browser.look(&page);
    sound(&seen);
    let fails = |bar: &&Value| bar["holds"] == "false";
    let failing =
        |section| list(picture(&seen, section, "stress"), "/bars").iter().filter(fails).count();
    assert_eq!(failing("design-1"), 0);
    assert!(failing("design-2") > 0, "a check of the old design fails");
}

/// Names that would act on a page or a picture if they were taken for markup.
const HOSTILE: [(&str, &str); 4] = [
    ("FNK314", "<script>alert(1)</script>"),
    ("QK9V1-2", "\"><img src=http://rail.invalid/x onerror=alert(2)>"),
    ("DNW60-10DW", "]]></style></svg><b>&amp;&#60;"),
    ("GDL-B5", "' onload='alert(3)' x='\u{202e}\u{1b}[31m"),
];

#[test]
fn hostile_names_stay_text() {
    let Some(browser) = Browser::for_test("hostile_names_stay_text") else { return };
    let shop = copy_of_the_sample();
    for file in ["opamps.csv", "zeners.csv", "transistors.csv", "heatsinks.csv"] {
        let path = shop.path().join(file);
        let text = std::fs::read_to_string(&path).expect("a catalog");
        let changed = HOSTILE.iter().fold(text, |text, (name, hostile)| {
            text.replace(&format!("{name},"), &format!("\"{}\",", hostile.replace('"', "\"\"")))
        });
        std::fs::write(&path, changed).expect("a catalog");
    }
    let use_all: Vec<String> = ["amplifier", "zener", "pass", "heatsink"]
        .iter()
        .zip(HOSTILE)
        .map(|(slot, (_, hostile))| format!("parts.use.{slot}={}", toml_text(hostile)))
        .collect();
    let set: Vec<&str> = use_all.iter().flat_map(|s| ["--set", s.as_str()]).collect();
    let folder = tempfile::tempdir().expect("a folder");
    let (page, _) = list_page(shop.path(), "tide-gauge-12v.toml", &set, folder.path());
    let seen = browser.look(&page);
    sound(&seen);
    let text = seen["document"]["text"].as_str().expect("text");
    for (_, hostile) in &HOSTILE[..3] {
        assert!(text.contains(hostile), "the page does not show {hostile}");
    }
    assert!(!text.contains('\u{202e}') && !text.contains('\u{1b}'));
}

fn toml_text(text: &str) -> String {
    let text: String = text
        .chars()
        .map(|c| match c {
            '"' | '\\' => format!("\\{c}"),
            c if c.is_control() || c == '\u{202e}' => format!("\\u{:04x}", u32::from(c)),
            c => c.to_string(),
        })
        .collect();
    format!("\"{text}\"")
}

/// What the others rely on: the browser's eye sees what a bad page does.
#[test]
fn a_bad_page_is_seen_to_be_bad() {
    let Some(browser) = Browser::for_test("a_bad_page_is_seen_to_be_bad") else { return };
    let folder = tempfile::tempdir().expect("a folder");
    let page = folder.path().join("bad.html");
    let bad = "<!DOCTYPE html><html><body style=\"width:3000px\"><img src=\"http://rail.invalid/x\">\
               <script>console.log('ran')</script><a href=\"#nowhere\">x</a></body></html>";
    std::fs::write(&page, bad).expect("a page");
    let seen = browser.look(&page);
    let loads = |r: &Value| r.as_str().is_some_and(|r| r.contains("rail.invalid"));
    assert!(list(&seen, "/requests").iter().any(loads), "{}", seen["requests"]);
    assert!(list(&seen, "/console").iter().any(|line| line == "ran"), "{}", seen["console"]);
    assert!(!list(&seen, "/views/light/violations").is_empty());
    assert!(number(&seen["views"]["phone"], "sideways") > 0.0);
    assert!(!list(&seen, "/document/outward").is_empty());
    assert!(!list(&seen, "/document/lostLinks").is_empty());
}

#[test]
fn a_page_that_is_there_stays_unless_overwritten() {
    let folder = tempfile::tempdir().expect("a folder");
    let (page, _) = sample_list("sensor-5v.toml", folder.path());
    let before = std::fs::read(&page).expect("the page");
    let shop = repository("catalogs-sample");
    let sheet = shop.join("sheets/tide-gauge-12v.toml");
    let again = |more: &[&str]| {
        let [sheet, shop, page] = [&sheet, &shop, &page].map(|p| p.to_str().expect("a path"));
        let mut arguments = vec!["shortlist", sheet, "--catalogs", shop, "--out", page];
        arguments.extend(more);
        run(folder.path(), &arguments).status
    };
    assert_eq!(again(&[]), 2);
    assert_eq!(std::fs::read(&page).expect("the page"), before);
    assert_eq!(again(&["--overwrite"]), 0);
    assert_ne!(std::fs::read(&page).expect("the page"), before);
}

#[test]
fn where_nothing_qualifies_the_page_says_so() {
    let folder = tempfile::tempdir().expect("a folder");
    let shop = repository("catalogs-sample");
    let sheet = shop.join("sheets/impossible-10v.toml");
    let [sheet, shop] = [&sheet, &shop].map(|p| p.to_str().expect("a path"));
    let told = run(folder.path(), &["shortlist", sheet, "--catalogs", shop, "--out", "none.html"]);
    assert_eq!(told.status, 1, "{}", told.err);
    let page = std::fs::read_to_string(folder.path().join("none.html")).expect("the page");
    assert!(page.contains("Nothing qualifies") && page.contains("Cautions"));
}
