//! The pages; links, headings, code and tables of one.

use pulldown_cmark::{CodeBlockKind, Event, Options, Parser, Tag, TagEnd};
use std::collections::HashMap;
use std::io;
use std::path::{Path, PathBuf};

/// A written page.
#[derive(Debug, Clone)]
pub struct Page {
    /// Its path from the root of the repository, with forward slashes.
    pub name: String,
    /// Its text.
    pub text: String,
}

/// Every page: the README, the developers' page, the folder `docs`, and the sample shop's README.
///
/// # Errors
/// Where a page can't be read.
pub fn all(root: &Path) -> io::Result<Vec<Page>> {
    let mut names: Vec<String> =
        ["README.md", "DEVELOPERS.md", "catalogs-sample/README.md"].map(str::to_owned).to_vec();
    for entry in std::fs::read_dir(root.join("docs"))? {
        let file = entry?.file_name();
        let file = file.to_string_lossy();
        if file.ends_with(".md") {
            names.push(format!("docs/{file}"));
        }
    }
    names.sort();
    names.into_iter().map(|name| Page::read(root, &name)).collect()
}

impl Page {
    /// Reads one page.
    ///
    /// # Errors
    /// Where it can't be read; the message names it.
    pub fn read(root: &Path, name: &str) -> io::Result<Self> {
        let text = std::fs::read_to_string(root.join(name))
            .map_err(|error| io::Error::new(error.kind(), format!("{name}: {error}")))?;
        Ok(Self { name: name.to_owned(), text })
    }

    fn events(&self) -> Parser<'_> {
        Parser::new_ext(&self.text, Options::ENABLE_TABLES)
    }

    /// The folder that the page's relative links start from.
    pub fn folder(&self) -> PathBuf {
        Path::new(&self.name).parent().unwrap_or(Path::new("")).to_owned()
    }

    /// The targets of all links, as they are written.
    pub fn links(&self) -> Vec<String> {
        self.events()
            .filter_map(|event| match event {
                Event::Start(Tag::Link { dest_url, .. } | Tag::Image { dest_url, .. }) => {
                    Some(dest_url.into_string())
                }
                _ => None,
            })
            .collect()
    }

    /// The anchors that its headings give, as usual viewers of Markdown make them.
    pub fn anchors(&self) -> Vec<String> {
        let mut seen: HashMap<String, u32> = HashMap::new();
        self.headings()
            .map(|heading| {
                let anchor = anchor_of(&heading);
                let times = seen.entry(anchor.clone()).or_default();
                *times += 1;
                if *times == 1 { anchor } else { format!("{anchor}-{}", *times - 1) }
            })
            .collect()
    }

    fn headings(&self) -> impl Iterator<Item = String> {
        let mut open: Option<String> = None;
        self.events().filter_map(move |event| match event {
            Event::Start(Tag::Heading { .. }) => {
                open = Some(String::new());
                None
            }
            Event::Text(text) | Event::Code(text) => {
                if let Some(heading) = &mut open {
                    heading.push_str(&text);
                }
                None
            }
            Event::End(TagEnd::Heading(_)) => open.take(),
            _ => None,
        })
    }

    /// The texts between backquotes within a line.
    pub fn code_spans(&self) -> Vec<String> {
        self.events()
            .filter_map(|event| match event {
                Event::Code(text) => Some(text.into_string()),
                _ => None,
            })
            .collect()
    }

    /// The fenced blocks of a language, one text each.
    pub fn code_blocks(&self, language: &str) -> Vec<String> {
        let mut blocks = Vec::new();
        let mut open: Option<String> = None;
        for event in self.events() {
            match event {
                Event::Start(Tag::CodeBlock(CodeBlockKind::Fenced(info))) if &*info == language => {
                    open = Some(String::new());
                }
                Event::Text(text) => {
                    if let Some(block) = &mut open {
                        block.push_str(&text);
                    }
                }
                Event::End(TagEnd::CodeBlock) => blocks.extend(open.take()),
                _ => {}
            }
        }
        blocks
    }

    /// The rows of the first table whose first heading cell is this, as plain texts.
    pub fn table(&self, first_heading: &str) -> Vec<Vec<String>> {
        let mut rows = Vec::new();
        let mut row: Vec<String> = Vec::new();
        let mut found = false;
        for event in self.events() {
            match event {
                Event::Start(Tag::TableHead | Tag::TableRow) => row = Vec::new(),
                Event::Start(Tag::TableCell) => row.push(String::new()),
                Event::Text(text) | Event::Code(text) => {
                    if let Some(cell) = row.last_mut() {
                        cell.push_str(&text);
                    }
                }
                Event::End(TagEnd::TableHead) => {
                    found = row.first().is_some_and(|cell| cell == first_heading);
                }
                Event::End(TagEnd::TableRow) if found => rows.push(std::mem::take(&mut row)),
                Event::End(TagEnd::Table) if found => return rows,
                _ => {}
            }
        }
        rows
    }
}

/// The anchor of a heading: lower case, white space as hyphens, punctuation left out.
fn anchor_of(heading: &str) -> String {
    heading
        .trim()
        .to_lowercase()
        .chars()
        .filter_map(|c| match c {
            ' ' => Some('-'),
            '-' | '_' => Some(c),
            c if c.is_alphanumeric() => Some(c),
            _ => None,
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn page(text: &str) -> Page {
        Page { name: "docs/x.md".to_owned(), text: text.to_owned() }
    }

    #[test]
    fn anchors_are_those_of_a_viewer() {
        let page = page("# 4.1 Reference: zener\n\n## `soa-load` of it\n\n## `soa-load` of it\n");
        assert_eq!(page.anchors(), ["41-reference-zener", "soa-load-of-it", "soa-load-of-it-1"]);
    }

    #[test]
    fn blocks_tables_and_links_are_found() {
        let page = page(
            "[a](b.md#c)\n\n```sh\ncargo x\n```\n\n```text\nno\n```\n\n\
             | other |\n|---|\n| 1 |\n\n| `crate` | knows |\n|---|---|\n| `a` | `b`, `c` |\n",
        );
        assert_eq!(page.links(), ["b.md#c"]);
        assert_eq!(page.code_blocks("sh"), ["cargo x\n"]);
        assert_eq!(page.table("crate"), [["a", "b, c"]]);
    }
}
