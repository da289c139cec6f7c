//! The output and the pictures that pages show are what the program prints and draws.

use docs_check::drawn::{DRAWINGS, FOLDER};
use docs_check::page;
use docs_check::root;
use docs_check::shell::Shell;
use docs_check::shown::stale;
use std::path::Path;

#[test]
fn the_output_that_pages_show_is_current() {
    let program = Path::new(env!("CARGO_BIN_EXE_railwright"));
    let mut shown = 0;
    for page in page::all(&root()).expect("every page can be read") {
        shown += page.code_blocks("console").len();
        let shell = Shell::new(&root(), program).expect("a shell");
        let faults = stale(&page, &shell).expect("a shell");
        assert!(
            faults.is_empty(),
            "{} shows other output than the program prints; look at it and run \
             `cargo run -p docs-check -- renew`: {faults:#?}",
            page.name
        );
    }
    assert!(shown > 0, "no page shows output: is the test looking?");
}

#[test]
fn the_pictures_that_pages_show_are_current() {
    let shell = Shell::new(&root(), Path::new(env!("CARGO_BIN_EXE_railwright")));
    let shell = shell.expect("a shell");
    for drawing in DRAWINGS {
        let path = root().join(FOLDER).join(drawing.file);
        let now = drawing.now(&shell).expect("the picture");
        assert!(
            std::fs::read(&path).is_ok_and(|shown| shown == now),
            "{} shows another picture than the program draws; look at it and run \
             `cargo run -p docs-check -- renew`",
            path.display()
        );
    }
}

#[test]
fn every_picture_that_is_kept_is_shown_on_a_page() {
    let pages = page::all(&root()).expect("every page can be read");
    let links: Vec<String> = pages.iter().flat_map(page::Page::links).collect();
    for entry in std::fs::read_dir(root().join(FOLDER)).expect("the folder of pictures") {
        let file = entry.expect("an entry").file_name().to_string_lossy().into_owned();
        assert!(links.iter().any(|link| link.ends_with(&format!("pictures/{file}"))), "{file}");
        assert!(DRAWINGS.iter().any(|d| d.file == file), "nothing draws {file}");
    }
}
