//! Where a function stands in the sources.

use std::io;
use std::path::{Path, PathBuf};

/// A source file with the path by which code names it: `circuit::divider::fixed`.
#[derive(Debug, Clone)]
pub struct Source {
    /// Crate and modules, joined by `::`.
    pub module: String,
    /// Its text.
    pub text: String,
}

impl Source {
    /// The file declares an item or a function of this name.
    pub fn declares(&self, name: &str) -> bool {
        const KEYWORDS: [&str; 9] =
            ["fn", "const", "static", "struct", "enum", "trait", "type", "mod", "macro_rules!"];
        KEYWORDS.iter().any(|keyword| {
            let wanted = format!("{keyword} {name}");
            self.text.match_indices(&wanted).any(|(at, _)| {
                let rest = &self.text[at + wanted.len()..];
                !rest.starts_with(|c: char| c.is_alphanumeric() || c == '_')
            })
        })
    }
}

/// Every source file of a crate, in order of name. `folder` is the crate's folder under `crates`.
///
/// # Errors
/// Where a file can't be read.
pub fn sources(root: &Path, folder: &str, name: &str) -> io::Result<Vec<Source>> {
    let src = root.join("crates").join(folder).join("src");
    let mut files = Vec::new();
    walk(&src, &mut files)?;
    files.sort();
    files
        .into_iter()
        .map(|file| {
            let inside = file.strip_prefix(&src).unwrap_or(&file).with_extension("");
            let mut module = name.replace('-', "_");
            for part in inside.iter().map(|part| part.to_string_lossy()) {
                if !matches!(&*part, "lib" | "main" | "mod") {
                    module.push_str("::");
                    module.push_str(&part);
                }
            }
            Ok(Source { module, text: std::fs::read_to_string(&file)? })
        })
        .collect()
}

fn walk(folder: &Path, files: &mut Vec<PathBuf>) -> io::Result<()> {
    for entry in std::fs::read_dir(folder)? {
        let path = entry?.path();
        if path.is_dir() {
            walk(&path, files)?;
        } else if path.extension().is_some_and(|end| end == "rs") {
            files.push(path);
        }
    }
    Ok(())
}

/// The path `crate::module::name` resolves: the longest part of it that is a source file declares
/// all that follows. A method may be named without its type.
pub fn resolves(path: &str, sources: &[Source]) -> bool {
    let parts: Vec<&str> = path.split("::").collect();
    (1..=parts.len()).rev().any(|length| {
        let module = parts[..length].join("::");
        sources
            .iter()
            .filter(|source| source.module == module)
            .any(|source| parts[length..].iter().all(|name| source.declares(name)))
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_path_resolves_where_its_file_declares_the_rest() {
        let text = "pub fn droop_voltage() {}\nimpl X { fn bias(&self) {} }\nstruct X;".to_owned();
        let sources = [Source { module: "circuit::reference".to_owned(), text }];
        assert!(resolves("circuit::reference::bias", &sources));
        assert!(resolves("circuit::reference::X::bias", &sources));
        assert!(!resolves("circuit::reference::droop", &sources), "only the start of a name");
        assert!(!resolves("circuit::pass::bias", &sources));
    }
}
