//! The output that pages show is what the program prints.

use docs_check::page;
use docs_check::root;
use docs_check::session::Session;
use docs_check::shown::stale;
use std::path::Path;

#[test]
fn the_output_that_pages_show_is_current() {
    let program = Path::new(env!("CARGO_BIN_EXE_railwright"));
    let mut shown = 0;
    for page in page::all(&root()).expect("every page can be read") {
        shown += page.code_blocks("console").len();
        let session = Session::new(&root(), program).expect("a session");
        let faults = stale(&page, &session).expect("a shell");
        assert!(
            faults.is_empty(),
            "{} shows other output than the program prints; look at it and run \
             `cargo run -p docs-check -- renew`: {faults:#?}",
            page.name
        );
    }
    assert!(shown > 0, "no page shows output: is the test looking?");
}
