//! `plot`: single pictures as files.

mod common;

use common::{Run, repository, run};
use std::path::Path;

const PICTURES: [&str; 6] = ["circuit", "operating-area", "headroom", "output", "stress", "front"];

/// Draws something of the sample shop into a folder.
fn plot(folder: &Path, subject: &str, more: &[&str]) -> Run {
    let shop = repository("catalogs-sample");
    let subject = shop.join(subject);
    let [subject, shop] = [&subject, &shop].map(|p| p.to_str().expect("a path"));
    let mut arguments = vec!["plot", subject, "--catalogs", shop];
    arguments.extend(more);
    run(folder, &arguments)
}

fn drawn(folder: &Path, subject: &str, picture: &str, file: &str) -> Vec<u8> {
    let told = plot(folder, subject, &["--picture", picture, "--out", file, "--overwrite"]);
    assert_eq!(told.status, 0, "{picture} of {subject}: {}", told.err);
    std::fs::read(folder.join(file)).expect("the picture")
}

/// The picture as XML, read by a strict reader.
fn xml(bytes: &[u8], read: impl Fn(&roxmltree::Document<'_>)) {
    let text = std::str::from_utf8(bytes).expect("UTF-8");
    read(&roxmltree::Document::parse(text).expect("sound XML"));
}

#[test]
fn every_picture_of_every_kind_of_rail_is_sound_xml_with_words() {
    let folder = tempfile::tempdir().expect("a folder");
    for subject in [
        "sheets/tide-gauge-12v.toml",
        "sheets/bench-5-15v.toml",
        "designs/sensor-kept.toml",
        "designs/jetty-first-build.toml",
        "designs/tide-gauge-1994.toml",
    ] {
        for picture in PICTURES {
            xml(&drawn(folder.path(), subject, picture, "x.svg"), |document| {
                let svg = document.root_element();
                assert_eq!(svg.attribute("role"), Some("img"));
                assert_eq!(svg.attribute("data-picture"), Some(picture));
                let child = |name| svg.children().find(|n| n.has_tag_name((SVG, name)));
                for (name, suffix) in [("title", "title"), ("desc", "told")] {
                    let child = child(name).unwrap_or_else(|| panic!("{picture} has no {name}"));
                    assert!(child.text().is_some_and(|t| t.len() > 10));
                    let id = child.attribute("id").expect("an id");
                    assert!(id.ends_with(suffix));
                    let labelled = svg.attribute("aria-labelledby").unwrap_or_default();
                    assert!(labelled.split(' ').any(|label| label == id));
                }
                let style = child("style").and_then(|s| s.text()).unwrap_or_default();
                assert!(style.contains("prefers-color-scheme:dark"));
                let numbers = svg.descendants().flat_map(|n| n.attributes().collect::<Vec<_>>());
                for number in
                    numbers.filter(|a| ["d", "x", "y", "cx", "cy", "width"].contains(&a.name()))
                {
                    let text = number.value();
                    assert!(!text.contains("NaN") && !text.contains("inf"), "{picture}: {text}");
                }
            });
        }
    }
}

const SVG: &str = "http://www.w3.org/2000/svg";

/// Width and height from the head of a PNG file. Source: W3C, Portable Network Graphics, section 11.2.2.
fn size(png: &[u8]) -> (u32, u32) {
    assert_eq!(png.get(..8), Some(&b"\x89PNG\r\n\x1a\n"[..]));
    let word = |at: usize| u32::from_be_bytes(png[at..at + 4].try_into().expect("four bytes"));
    (word(16), word(20))
}

#[test]
fn a_png_has_three_pixels_for_each_unit_of_the_svg() {
    let folder = tempfile::tempdir().expect("a folder");
    for picture in ["circuit", "operating-area"] {
        let subject = "designs/tide-gauge-kept.toml";
        let (width, height) = size(&drawn(folder.path(), subject, picture, "x.png"));
        xml(&drawn(folder.path(), subject, picture, "x.svg"), |document| {
            let units = |name| {
                let text = document.root_element().attribute(name).expect("a size");
                text.parse::<f64>().expect("a number")
            };
            assert_eq!(f64::from(width), (3.0 * units("width")).ceil());
            assert_eq!(f64::from(height), (3.0 * units("height")).ceil());
        });
    }
}

#[test]
fn the_same_run_draws_the_same_bytes() {
    let folder = tempfile::tempdir().expect("a folder");
    for file in ["x.svg", "x.png"] {
        let draw = || drawn(folder.path(), "sheets/tide-gauge-12v.toml", "stress", file);
        assert_eq!(draw(), draw(), "{file}");
    }
}

/// The id of the set of parts that a front has marked.
fn marked(bytes: &[u8]) -> String {
    let mut id = String::new();
    let text = std::str::from_utf8(bytes).expect("UTF-8");
    let document = roxmltree::Document::parse(text).expect("sound XML");
    for point in document.descendants().filter(|n| n.attribute("data-point") == Some("marked")) {
        id = point.attribute("data-id").expect("an id").to_owned();
    }
    id
}

#[test]
fn a_candidate_is_picked_by_rank_or_id() {
    let folder = tempfile::tempdir().expect("a folder");
    let sheet = "sheets/tide-gauge-12v.toml";
    let pick = |pick: &str| {
        let more = ["--picture", "front", "--pick", pick, "--out", "x.svg", "--overwrite"];
        let told = plot(folder.path(), sheet, &more);
        assert_eq!(told.status, 0, "{}", told.err);
        marked(&std::fs::read(folder.path().join("x.svg")).expect("the picture"))
    };
    let third = pick("3");
    assert_eq!(pick(&third), third);
    assert_ne!(pick("1"), third);
}

#[test]
fn what_names_no_candidate_is_told_and_nothing_is_written() {
    let folder = tempfile::tempdir().expect("a folder");
    let more = ["--pick", "k0000000", "--out", "x.svg"];
    let told = plot(folder.path(), "sheets/tide-gauge-12v.toml", &more);
    assert_eq!(told.status, 1);
    assert!(told.err.contains("k0000000"), "{}", told.err);
    let told = plot(folder.path(), "sheets/impossible-10v.toml", &["--out", "x.svg"]);
    assert_eq!(told.status, 1);
    assert!(told.err.contains("nothing qualifies"), "{}", told.err);
    assert_eq!(std::fs::read_dir(folder.path()).expect("the folder").count(), 0);
}

#[test]
fn faults_of_the_command_line_are_told_before_any_work() {
    let folder = tempfile::tempdir().expect("a folder");
    for (more, words) in [
        (&["--out", "x.gif"][..], ".svg or .png"),
        (&["--out", "nowhere/x.svg"], "no folder"),
        (&["--picture", "portrait", "--out", "x.svg"], "operating-area"),
    ] {
        let told = plot(folder.path(), "sheets/tide-gauge-12v.toml", more);
        assert_eq!(told.status, 2);
        assert!(told.err.contains(words), "{}", told.err);
    }
    std::fs::write(folder.path().join("x.svg"), "mine").expect("a file");
    let told = plot(folder.path(), "sheets/tide-gauge-12v.toml", &["--out", "x.svg"]);
    assert_eq!(told.status, 2);
    assert_eq!(std::fs::read(folder.path().join("x.svg")).expect("the file"), b"mine");
}
