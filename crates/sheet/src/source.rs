//! Places and excerpts in a text.

use std::ops::Range;

use notice::{Excerpt, Notice, Place};

/// The longest text that a message quotes, in characters.
const QUOTED: usize = 60;

/// Where something stands: its place and the line of text round it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Mark {
    /// File, line and column.
    pub place: Place,
    /// The line; None for an argument of the command line or a file as a whole.
    pub excerpt: Option<Excerpt>,
}

impl Mark {
    /// An error here.
    pub(crate) fn error(&self, code: &'static str, message: impl Into<String>) -> Notice {
        self.show(Notice::error(code, self.place.clone(), message))
    }

    /// A warning here.
    pub(crate) fn warning(&self, code: &'static str, message: impl Into<String>) -> Notice {
        self.show(Notice::warning(code, self.place.clone(), message))
    }

    fn show(&self, notice: Notice) -> Notice {
        match &self.excerpt {
            Some(excerpt) => notice.excerpt(excerpt.clone()),
            None => notice,
        }
    }
}

/// A text with the name of where it comes from.
#[derive(Debug)]
pub(crate) struct Source<'a> {
    name: &'a str,
    text: &'a str,
    /// Byte at which each line begins; empty for an argument of the command line, which has no
    /// lines and is quoted whole by its name.
    lines: Vec<usize>,
}

impl<'a> Source<'a> {
    /// A file. A byte order mark is passed over.
    pub(crate) fn file(name: &'a str, text: &'a str) -> Self {
        let text = text.strip_prefix('\u{feff}').unwrap_or(text);
        let breaks = text.bytes().enumerate().filter(|(_, b)| *b == b'\n').map(|(at, _)| at + 1);
        Self { name, text, lines: std::iter::once(0).chain(breaks).collect() }
    }

    /// The value of an argument of the command line.
    pub(crate) fn argument(name: &'a str, text: &'a str) -> Self {
        Self { name, text, lines: Vec::new() }
    }

    pub(crate) fn text(&self) -> &'a str {
        self.text
    }

    /// True for an argument of the command line.
    pub(crate) fn is_argument(&self) -> bool {
        self.lines.is_empty()
    }

    /// The source as a whole.
    pub(crate) fn whole(&self) -> Mark {
        Mark { place: Place::file(self.name), excerpt: None }
    }

    /// The bytes `span` of the text.
    pub(crate) fn mark(&self, span: Range<usize>) -> Mark {
        if self.is_argument() {
            return self.whole();
        }
        let line = self.lines.partition_point(|begin| *begin <= span.start).max(1);
        let begin = self.lines.get(line - 1).copied().unwrap_or(0);
        let end = self.lines.get(line).map_or(self.text.len(), |next| next - 1);
        let text = self.slice(begin..end);
        let text = text.strip_suffix('\r').unwrap_or(text);
        let start = floor_boundary(text, span.start.saturating_sub(begin));
        let stop = floor_boundary(text, span.end.saturating_sub(begin)).max(start);
        let column = text.get(..start).unwrap_or_default().chars().count() + 1;
        Mark {
            place: Place {
                file: self.name.to_owned(),
                line: u32::try_from(line).unwrap_or(u32::MAX),
                column: u32::try_from(column).unwrap_or(u32::MAX),
            },
            excerpt: Some(Excerpt::of_line(text, start, stop)),
        }
    }

    /// The text of a span as a message quotes it: one line, cut where it is long.
    pub(crate) fn quoted(&self, span: Range<usize>) -> String {
        shortened(self.slice(span))
    }

    fn slice(&self, span: Range<usize>) -> &'a str {
        self.text.get(span).unwrap_or_default()
    }
}

/// The first line of `text`, cut where it is long; what is left out shows as `…`.
pub(crate) fn shortened(text: &str) -> String {
    let line = text.lines().next().unwrap_or_default();
    let mut short: String = line.chars().take(QUOTED).map(printable).collect();
    if short.len() < text.len() {
        short.push('…');
    }
    short
}

/// A control character would act on the terminal that shows it.
fn printable(c: char) -> char {
    // One byte stands for one byte, so that the marked part of an excerpt stays where it is.
    if c.is_ascii_control() && c != '\t' { '?' } else { c }
}

/// The greatest character boundary of `text` at or below `at`.
fn floor_boundary(text: &str, at: usize) -> usize {
    let mut at = at.min(text.len());
    while !text.is_char_boundary(at) {
        at -= 1;
    }
    at
}
