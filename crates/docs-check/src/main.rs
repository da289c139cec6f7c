//! For writers of the pages:
//!
//! * `cargo run -p docs-check -- renew` writes anew what the pages take from the code;
//! * `cargo run -p docs-check -- shown FILE` holds the README's example of output against what the
//!   program printed into FILE.

use docs_check::page::Page;
use docs_check::{generated, root, shown};
use std::path::Path;
use std::process::ExitCode;

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    let outcome = match arguments.iter().map(String::as_str).collect::<Vec<_>>()[..] {
        ["renew"] => renew(),
        ["shown", file] => is_shown(Path::new(file)),
        _ => {
            eprintln!("usage: docs-check renew | shown FILE");
            return ExitCode::from(2);
        }
    };
    match outcome {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("docs-check: {error}");
            ExitCode::FAILURE
        }
    }
}

fn renew() -> std::io::Result<()> {
    let root = root();
    for (page, text) in generated::renewed(&root)? {
        if text != page.text {
            std::fs::write(root.join(&page.name), text)?;
            println!("renewed {}", page.name);
        }
    }
    Ok(())
}

fn is_shown(file: &Path) -> std::io::Result<()> {
    let output = std::fs::read_to_string(file)?;
    let readme = Page::read(&root(), "README.md")?;
    let excerpts = readme.code_blocks("text");
    if excerpts.is_empty() {
        return Err(std::io::Error::other("README.md shows no output"));
    }
    for excerpt in &excerpts {
        if let Some(line) = shown::first_missing(excerpt, &output) {
            let what =
                format!("README.md shows output that has changed, from this line on: {line}");
            return Err(std::io::Error::other(what));
        }
    }
    Ok(())
}
