//! The frame of a page.

use super::{sheet, shown};
use maud::{DOCTYPE, Markup, PreEscaped, html};

/// Nothing is loaded and nothing runs; style sheets stand in the page.
const POLICY: &str =
    "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; form-action 'none'";

/// A page without its body.
pub(super) struct Document<'a> {
    pub(super) title: &'a str,
    /// The line below the title.
    pub(super) lead: &'a str,
    /// What `--set` changed.
    pub(super) set: &'a [String],
    /// Places in the page with their names.
    pub(super) contents: &'a [(String, String)],
}

impl Document<'_> {
    /// The whole page.
    pub(super) fn around(&self, body: &Markup) -> String {
        let title = shown(self.title);
        html! {
            (DOCTYPE)
            html lang="en" {
                head {
                    meta charset="utf-8";
                    meta http-equiv="Content-Security-Policy" content=(POLICY);
                    meta name="viewport" content="width=device-width, initial-scale=1";
                    meta name="color-scheme" content="light dark";
                    meta name="generator" content={ "railwright " (env!("CARGO_PKG_VERSION")) };
                    title { (title) }
                    style { (PreEscaped(sheet::text())) }
                }
                body {
                    header {
                        h1 { (title) }
                        p class="lead" { (shown(self.lead)) }
                        @if !self.set.is_empty() {
                            p { "with " code { "--set " (shown(&self.set.join(", "))) } }
                        }
                    }
                    nav aria-label="Contents" {
                        ul {
                            @for (id, name) in self.contents {
                                li { a href={ "#" (id) } { (shown(name)) } }
                            }
                        }
                    }
                    main { (body) }
                }
            }
        }
        .into_string()
    }
}

/// The files that everything rests on.
pub(super) fn files(files: &[(String, String)]) -> Markup {
    html! {
        section id="files" {
            h2 { "Files" }
            p { "Everything on this page was worked out from these files as they were read." }
            (scrolling("Files with their hashes", &html! {
                table {
                    thead { tr { th scope="col" { "file" } th scope="col" { "SHA-256" } } }
                    tbody {
                        @for (name, hash) in files {
                            tr { th scope="row" { (shown(name)) } td { code { (hash) } } }
                        }
                    }
                }
            }))
        }
    }
}

/// A table that may be wider than a phone: it scrolls by itself, also from the keyboard.
pub(super) fn scrolling(name: &str, table: &Markup) -> Markup {
    html! { div class="scrolls" role="region" aria-label=(shown(name)) tabindex="0" { (table) } }
}
