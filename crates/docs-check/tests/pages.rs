//! The pages hold together: what is made from the code is current, and what they name exists.

use circuit::check::Check;
use docs_check::page::{self, Page};
use docs_check::{code, generated, manifest, root};
use std::path::{Component, Path, PathBuf};

fn pages() -> Vec<Page> {
    page::all(&root()).expect("every page can be read")
}

#[test]
fn what_is_made_from_the_code_is_current() {
    for (page, text) in generated::renewed(&root()).expect("every part can be made") {
        assert!(
            page.text == text,
            "{} has fallen behind the code; run `cargo run -p docs-check -- renew`",
            page.name
        );
    }
}

#[test]
fn the_model_page_has_every_check_with_the_function_that_makes_it() {
    let root = root();
    let model = Page::read(&root, "docs/model.md").expect("the model page");
    let sources = code::sources(&root, "circuit", "circuit").expect("the sources of circuit");
    let rows: Vec<&str> = model.text.lines().filter(|line| line.starts_with("| `")).collect();
    for check in Check::ALL {
        let function = generated::function(check, &sources).expect("a function for each check");
        let name = format!("| `{}` |", check.name());
        assert!(
            rows.iter().any(|row| row.starts_with(&name) && row.contains(&format!("`{function}`"))),
            "docs/model.md has no row for `{}` with `{function}`",
            check.name()
        );
    }
}

#[test]
fn every_path_of_code_that_a_page_names_exists() {
    let root = root();
    let crates = manifest::all(&root).expect("the manifests");
    let sources: Vec<code::Source> = crates
        .iter()
        .flat_map(|c| code::sources(&root, &c.folder, &c.name).expect("the sources of a crate"))
        .collect();
    let is_ours = |path: &str| {
        crates.iter().any(|c| path.split("::").next() == Some(&c.name.replace('-', "_")))
    };
    let mut named = 0;
    for page in pages() {
        for span in page.code_spans() {
            let is_path = span.contains("::")
                && span.chars().all(|c| c.is_alphanumeric() || matches!(c, '_' | ':'));
            if is_path && is_ours(&span) {
                named += 1;
                assert!(code::resolves(&span, &sources), "{}: `{span}` is nowhere", page.name);
            }
        }
    }
    assert!(named > Check::ALL.len(), "the pages name hardly any code: is the test looking?");
}

#[test]
fn relative_links_lead_somewhere() {
    let pages = pages();
    let broken: Vec<String> = pages
        .iter()
        .flat_map(|page| page.links().into_iter().map(move |link| (page, link)))
        .filter(|(page, link)| !leads_somewhere(page, link, &pages))
        .map(|(page, link)| format!("{}: {link}", page.name))
        .collect();
    assert!(broken.is_empty(), "links that lead nowhere: {broken:#?}");
}

/// A link to another site, or to a file that is there, with a heading that is there.
fn leads_somewhere(page: &Page, link: &str, pages: &[Page]) -> bool {
    if link.contains("://") {
        return true;
    }
    let (target, anchor) = link.split_once('#').unwrap_or((link, ""));
    let path = match target {
        "" => PathBuf::from(&page.name),
        target => normal(&page.folder().join(target)),
    };
    let has_heading = || {
        let other = pages.iter().find(|p| Path::new(&p.name) == path);
        other.is_some_and(|p| p.anchors().iter().any(|a| a == anchor))
    };
    root().join(&path).exists() && (anchor.is_empty() || has_heading())
}

/// The path without `.` and `..`.
fn normal(path: &Path) -> PathBuf {
    let mut parts = PathBuf::new();
    for part in path.components() {
        match part {
            Component::ParentDir => {
                parts.pop();
            }
            Component::CurDir => {}
            part => parts.push(part),
        }
    }
    parts
}

#[test]
fn the_summary_lists_every_page_of_the_docs() {
    let summary = Page::read(&root(), "docs/SUMMARY.md").expect("the summary");
    let links = summary.links();
    for page in pages() {
        if let Some(name) = page.name.strip_prefix("docs/") {
            let listed = name == "SUMMARY.md" || links.iter().any(|link| link == name);
            assert!(listed, "docs/SUMMARY.md does not list {name}");
        }
    }
}

#[test]
fn the_book_is_made_of_the_summary() {
    let book = std::fs::read_to_string(root().join("book.toml")).expect("book.toml");
    let book = toml::de::DeTable::parse(&book).expect("TOML").into_inner();
    let of_book = |key: &str| book.get("book")?.get_ref().get(key)?.get_ref().as_str();
    assert_eq!(of_book("src"), Some("docs"), "where the pages are");
    assert!(of_book("title").is_some_and(|title| !title.is_empty()));

    let summary = Page::read(&root(), "docs/SUMMARY.md").expect("the summary");
    let chapters = summary.links();
    let mut once = chapters.clone();
    once.sort();
    once.dedup();
    assert_eq!(once.len(), chapters.len(), "a page stands twice: {chapters:?}");
    // The book program takes lists of links and headings, and stops at anything else.
    for line in summary.text.lines().filter(|line| !line.trim().is_empty()) {
        let line = line.trim_start();
        assert!(line.starts_with("# ") || line.starts_with("- ["), "docs/SUMMARY.md: {line}");
    }
    for chapter in chapters {
        let page = Page::read(&root(), &format!("docs/{chapter}")).expect("a page of the book");
        assert!(page.text.starts_with("# "), "{chapter} begins with its title");
    }
}
