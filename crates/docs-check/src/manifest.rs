//! The crates of the workspace and what they depend on.

use std::collections::BTreeSet;
use std::io;
use std::path::Path;
use toml::de::{DeTable, DeValue};

/// A crate of the workspace.
#[derive(Debug, Clone)]
pub struct Manifest {
    /// Its folder under `crates`.
    pub folder: String,
    /// Its package name.
    pub name: String,
    /// The packages that its library or program needs.
    pub needs: BTreeSet<String>,
    /// The packages that only its tests need.
    pub tests_need: BTreeSet<String>,
}

/// The manifests of all crates, in order of folder.
///
/// # Errors
/// Where a manifest can't be read, or names no package.
pub fn all(root: &Path) -> io::Result<Vec<Manifest>> {
    let mut manifests = Vec::new();
    for entry in std::fs::read_dir(root.join("crates"))? {
        let entry = entry?;
        let path = entry.path().join("Cargo.toml");
        if path.is_file() {
            let folder = entry.file_name().to_string_lossy().into_owned();
            manifests.push(read(&folder, &std::fs::read_to_string(&path)?)?);
        }
    }
    manifests.sort_by(|a, b| a.folder.cmp(&b.folder));
    Ok(manifests)
}

fn read(folder: &str, text: &str) -> io::Result<Manifest> {
    let fault = |what: String| io::Error::new(io::ErrorKind::InvalidData, what);
    let document = DeTable::parse(text).map_err(|error| fault(format!("{folder}: {error}")))?;
    let document = document.get_ref();
    let name = table(document, "package")
        .and_then(|package| package.get("name"))
        .and_then(|name| name.get_ref().as_str())
        .ok_or_else(|| fault(format!("{folder}: no package name")))?;
    let names = |section: &str| -> BTreeSet<String> {
        table(document, section)
            .into_iter()
            .flat_map(|entries| entries.keys().map(|key| key.get_ref().to_string()))
            .collect()
    };
    let mut needs = names("dependencies");
    needs.append(&mut names("build-dependencies"));
    Ok(Manifest {
        folder: folder.to_owned(),
        name: name.to_owned(),
        needs,
        tests_need: names("dev-dependencies"),
    })
}

fn table<'t, 'i>(document: &'t DeTable<'i>, section: &str) -> Option<&'t DeTable<'i>> {
    match document.get(section)?.get_ref() {
        DeValue::Table(table) => Some(table),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_manifest_is_read() {
        let text = "[package]\nname = \"a\"\n[dependencies]\nb.workspace = true\n\
                    c = { path = \"../c\" }\n[dev-dependencies]\nd = \"1\"\n";
        let manifest = read("a", text).expect("a sound manifest");
        assert_eq!(manifest.name, "a");
        assert_eq!(manifest.needs.into_iter().collect::<Vec<_>>(), ["b", "c"]);
        assert_eq!(manifest.tests_need.into_iter().collect::<Vec<_>>(), ["d"]);
        assert!(read("a", "[dependencies]\n").is_err());
    }
}
