//! Places in the text of a design file, and the nearest known name for a misspelt one.

use notice::{Excerpt, Notice, Place};
use std::ops::Range;

/// Where something stands: its place and the line of text round it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Mark {
    /// File, line and column.
    pub place: Place,
    /// The line; None for the file as a whole.
    pub excerpt: Option<Excerpt>,
}

impl Mark {
    /// An error here.
    pub fn error(&self, code: &'static str, message: impl Into<String>) -> Notice {
        self.show(Notice::error(code, self.place.clone(), message))
    }

    /// A notice that was made elsewhere, moved here.
    pub(crate) fn take(&self, mut notice: Notice) -> Notice {
        notice.place = self.place.clone();
        notice.excerpt.clone_from(&self.excerpt);
        notice
    }

    fn show(&self, notice: Notice) -> Notice {
        match &self.excerpt {
            Some(excerpt) => notice.excerpt(excerpt.clone()),
            None => notice,
        }
    }
}

/// The text of a file.
pub(crate) struct Source<'a> {
    name: &'a str,
    text: &'a str,
}

impl<'a> Source<'a> {
    /// A byte order mark is passed over.
    pub(crate) fn new(name: &'a str, text: &'a str) -> Self {
        Self { name, text: text.strip_prefix('\u{feff}').unwrap_or(text) }
    }

    pub(crate) fn text(&self) -> &'a str {
        self.text
    }

    /// The file as a whole.
    pub(crate) fn whole(&self) -> Mark {
        Mark { place: Place::file(self.name), excerpt: None }
    }

    /// The bytes `span` of the text.
    pub(crate) fn mark(&self, span: Range<usize>) -> Mark {
        let before = self.text.get(..span.start).unwrap_or(self.text);
        let begin = before.rfind('\n').map_or(0, |at| at + 1);
        let rest = self.text.get(begin..).unwrap_or_default();
        let line = rest.split('\n').next().unwrap_or_default().trim_end_matches('\r');
        let start = (before.len() - begin).min(line.len());
        let end = span.end.saturating_sub(begin).clamp(start, line.len());
        let number = |n: usize| u32::try_from(n + 1).unwrap_or(u32::MAX);
        let in_line = line.get(..start).map_or(0, |head| head.chars().count());
        let place = Place {
            file: self.name.to_owned(),
            line: number(before.matches('\n').count()),
            column: number(in_line),
        };
        let is_whole = line.is_char_boundary(start) && line.is_char_boundary(end);
        let excerpt = is_whole.then(|| Excerpt::of_line(line, start, end));
        Mark { place, excerpt }
    }

    /// The text of a span as a message quotes it.
    pub(crate) fn quoted(&self, span: Range<usize>) -> String {
        shortened(self.text.get(span).unwrap_or_default())
    }
}

/// The longest text that a message quotes, in characters.
const QUOTED: usize = 60;

/// The first line of a text, cut where it is long.
pub(crate) fn shortened(text: &str) -> String {
    let line = text.lines().next().unwrap_or_default();
    let mut short: String = line.chars().take(QUOTED).collect();
    if short.len() < text.len() {
        short.push('…');
    }
    short
}

/// The known name that was probably meant: one that goes on after what is written (`rz` for `rz_ohm`),
/// or one within a third of the letters written. Case counts for nothing, and `-` and a space are taken
/// as `_`. Of equally near ones the first.
pub(crate) fn nearest<'n>(
    written: &str,
    known: impl IntoIterator<Item = &'n str>,
) -> Option<&'n str> {
    let folded = |name: &str| name.to_lowercase().replace(['-', ' '], "_");
    if written.chars().count() > QUOTED {
        return None;
    }
    let written = folded(written);
    let allowed = (written.chars().count() / 3).max(1);
    let slips = |name: &str| match name.strip_prefix(&written) {
        Some(rest) if rest.starts_with('_') => 0,
        _ => strsim::osa_distance(&written, name),
    };
    known
        .into_iter()
        .map(|name| (slips(&folded(name)), name))
        .filter(|(wrong, _)| *wrong <= allowed)
        .min_by_key(|(wrong, _)| *wrong)
        .map(|(_, name)| name)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_mark_tells_line_column_and_text() {
        let source = Source::new("d.toml", "a = 1\r\nµ = 25 # x\n");
        let at = source.text().find("25").unwrap();
        let mark = source.mark(at..at + 2);
        assert_eq!(mark.place.to_string(), "d.toml:2:5");
        let excerpt = mark.excerpt.unwrap();
        assert_eq!(&excerpt.text[excerpt.start..excerpt.end], "25");
        assert_eq!(excerpt.text, "µ = 25 # x");
    }

    #[test]
    fn slips_are_understood() {
        assert_eq!(nearest("Bias-lin", ["bias_line", "zener"]), Some("bias_line"));
        assert_eq!(nearest("rz", ["rx_ohm", "rz_ohm"]), Some("rz_ohm"));
        assert_eq!(nearest("colour", ["bias_line", "zener"]), None);
    }
}
