//! A page looked at in a browser: `tests/browser/look.cjs` drives it and tells what it saw.

use super::{repository, tool};
use serde_json::Value;
use std::path::Path;
use std::process::Command;

/// A browser with what drives it.
pub struct Browser {
    browser: String,
    node: String,
    packages: std::path::PathBuf,
}

impl Browser {
    /// None after saying that `test` is skipped, where something of it is absent.
    pub fn for_test(test: &str) -> Option<Self> {
        let browser = tool::program(test, &["chromium", "chromium-browser"])?;
        let (node, packages) = tool::node_with(test, &["puppeteer-core", "axe-core"])?;
        Some(Self { browser: path_of(&browser), node, packages })
    }

    /// What is seen of a page.
    pub fn look(&self, page: &Path) -> Value {
        let output = Command::new(&self.node)
            .arg(repository("crates/cli/tests/browser/look.cjs"))
            .arg(&self.browser)
            .arg(page)
            .env("NODE_PATH", &self.packages)
            .output()
            .expect("node runs");
        let told = String::from_utf8_lossy(&output.stderr);
        assert!(output.status.success(), "the browser could not be driven: {told}");
        serde_json::from_slice(&output.stdout).expect("what was seen, as JSON")
    }
}

/// The whole path of a program that is found by its name.
fn path_of(program: &str) -> String {
    let folders = std::env::var_os("PATH").unwrap_or_default();
    let found = std::env::split_paths(&folders).map(|f| f.join(program)).find(|p| p.is_file());
    found.map_or(program.to_owned(), |path| path.display().to_string())
}

/// A list within what was seen.
pub fn list<'v>(value: &'v Value, at: &str) -> &'v [Value] {
    value.pointer(at).and_then(Value::as_array).map(Vec::as_slice).unwrap_or_default()
}

/// A number, written as a number or as text.
pub fn number(value: &Value, name: &str) -> f64 {
    let field = &value[name];
    let text = field.as_str().map(str::parse);
    field.as_f64().or_else(|| text?.ok()).unwrap_or_else(|| panic!("no number {name} in {value}"))
}
