//! For writers of the pages: `cargo run -p docs-check -- renew` writes anew what the pages take from the
//! code, and the output that they show.

use docs_check::drawn::{self, DRAWINGS};
use docs_check::shell::Shell;
use docs_check::{generated, page, root, shown};
use std::io;
use std::path::{Path, PathBuf};
use std::process::{Command, ExitCode};

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    if arguments != ["renew"] {
        eprintln!("usage: docs-check renew");
        return ExitCode::from(2);
    }
    match renew(&root()) {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("docs-check: {error}");
            ExitCode::FAILURE
        }
    }
}

fn renew(root: &Path) -> io::Result<()> {
    for (page, text) in generated::renewed(root)? {
        write_if_new(root, &page, &text)?;
    }
    let program = built_program()?;
    for page in page::all(root)? {
        let shell = Shell::new(root, &program)?;
        write_if_new(root, &page, &shown::renewed(&page, &shell)?)?;
    }
    let shell = Shell::new(root, &program)?;
    for drawing in DRAWINGS {
        let path = root.join(drawn::FOLDER).join(drawing.file);
        let now = drawing.now(&shell)?;
        if std::fs::read(&path).ok().as_ref() != Some(&now) {
            std::fs::write(&path, now)?;
            println!("renewed {}/{}", drawn::FOLDER, drawing.file);
        }
    }
    Ok(())
}

fn write_if_new(root: &Path, page: &page::Page, text: &str) -> io::Result<()> {
    if text != page.text {
        std::fs::write(root.join(&page.name), text)?;
        println!("renewed {}", page.name);
    }
    Ok(())
}

/// The program, built anew beside this one.
fn built_program() -> io::Result<PathBuf> {
    let mut build = Command::new(std::env::var_os("CARGO").unwrap_or_else(|| "cargo".into()));
    build.args(["build", "--quiet", "-p", "railwright"]);
    if !cfg!(debug_assertions) {
        build.arg("--release");
    }
    if !build.status()?.success() {
        return Err(io::Error::other("the program can't be built"));
    }
    let name = format!("railwright{}", std::env::consts::EXE_SUFFIX);
    Ok(std::env::current_exe()?.with_file_name(name))
}
