//! Notices for people: place, message, and the line of text with the part at fault underlined.

use crate::look::Look;
use codespan_reporting::diagnostic::{Diagnostic, Label, Severity as Weight};
use codespan_reporting::files::{Error, Files};
use codespan_reporting::term::termcolor::Buffer;
use codespan_reporting::term::{Chars, Config, Styles, StylesWriter, emit_to_write_style};
use notice::{Excerpt, Notice, Severity};
use std::collections::HashMap;
use std::ops::Range;

/// How many warnings of one kind about one file are told in full where not all are.
pub const FEW: usize = 3;

/// At most so many errors are told in full: nobody reads on, and a damaged file may have a million.
pub const MOST_ERRORS: usize = 2000;

/// Which warnings are told in full. Errors are, up to [`MOST_ERRORS`].
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Warnings {
    /// Every one.
    Every,
    /// [`FEW`] of a kind for each file, then how many more there are.
    FewOfAKind,
    /// None.
    Hidden,
}

/// Tells notices: warnings first, so that errors stand where a terminal's reader looks, then how many
/// there were. Empty where there is nothing to tell.
pub fn render(notices: &[Notice], warnings: Warnings, look: &Look) -> String {
    let mut text = String::new();
    let of = |severity| notices.iter().filter(move |n: &&Notice| n.severity == severity);
    let mut told: HashMap<(&str, &str), usize> = HashMap::new();
    let mut cut: Vec<(&str, &str)> = Vec::new();
    for warning in of(Severity::Warning).filter(|_| warnings != Warnings::Hidden) {
        let kind = (warning.place.file.as_str(), warning.code);
        let alike = told.entry(kind).or_default();
        *alike += 1;
        if warnings == Warnings::Every || *alike <= FEW {
            text += &rendered(warning, look);
        } else if *alike == FEW + 1 {
            cut.push(kind);
        }
    }
    for kind in cut {
        let more = told.get(&kind).map_or(0, |alike| alike - FEW);
        let (file, code) = kind;
        text += &look.text(&format!("warning[{code}]: {more} more of this kind in {file}\n\n"));
    }
    let errors = of(Severity::Error).count();
    of(Severity::Error).take(MOST_ERRORS).for_each(|error| text += &rendered(error, look));
    if errors > MOST_ERRORS {
        text += &format!("error: {} more errors\n\n", errors - MOST_ERRORS);
    }
    let doubts = told.values().sum::<usize>();
    let count = |n: usize, what: &str| match n {
        0 => None,
        1 => Some(format!("1 {what}")),
        n => Some(format!("{n} {what}s")),
    };
    let tally: Vec<String> =
        [count(errors, "error"), count(doubts, "warning")].into_iter().flatten().collect();
    if !tally.is_empty() {
        text += &format!("{}\n", tally.join(", "));
    }
    text
}

/// Columns before a note: room for a line number, and the mark `=`.
const NOTE_BEGINS: usize = 8;

/// Columns before the text of a note, where it goes on on another line.
const NOTE_INDENT: usize = 10;

/// Columns before the text of a line that is shown, with its number.
const LINE_BEGINS: usize = 10;

/// One notice, ending in a blank line.
fn rendered(notice: &Notice, look: &Look) -> String {
    let line = Line::of(notice, look);
    let severity = match notice.severity {
        Severity::Error => Weight::Error,
        Severity::Warning => Weight::Warning,
    };
    let mut diagnostic = Diagnostic::new(severity).with_code(notice.code);
    let message = match line {
        // Nothing else would tell the place.
        None => format!("{}: {}", notice.place, notice.message),
        Some(_) => notice.message.clone(),
    };
    // `warning[code]: ` stands before it.
    let prefix = "warning[]: ".len() + notice.code.len();
    diagnostic.message = look.paragraph(&message, prefix, 2).trim().to_owned();
    if let Some(line) = &line {
        diagnostic.labels.push(Label::primary((), line.marked.clone()));
    }
    let notes = [("found", &notice.found), ("expected", &notice.expected), ("mend", &notice.mend)];
    for (name, note) in notes {
        if let Some(note) = note {
            let quoted = if name == "found" { format!("`{note}`") } else { note.clone() };
            let beside = Look { width: look.width.saturating_sub(NOTE_BEGINS), ..*look };
            let note = beside.paragraph(&format!("{name:<9} {quoted}"), 0, NOTE_INDENT);
            diagnostic.notes.push(note.trim_end().to_owned());
        }
    }
    let mut config = Config::default();
    if look.ascii {
        config.chars = Chars::ascii();
    }
    let mut buffer = if look.colour { Buffer::ansi() } else { Buffer::no_color() };
    let styles = Styles::default();
    let mut writer = StylesWriter::new(&mut buffer, &styles);
    let line = line.unwrap_or_default();
    match emit_to_write_style(&mut writer, &config, &line, &diagnostic) {
        Ok(()) => String::from_utf8_lossy(buffer.as_slice()).into_owned(),
        // A place outside its own line can't be drawn; the plain text says the same.
        Err(_) => look.text(&format!("{notice}\n\n")),
    }
}

/// The line of a notice, as a file that knows only this line.
#[derive(Default)]
struct Line {
    file: String,
    number: usize,
    column: usize,
    text: String,
    marked: Range<usize>,
}

impl Line {
    fn of(notice: &Notice, look: &Look) -> Option<Self> {
        let Excerpt { text, start, end } = notice.excerpt.as_ref()?;
        // Shown characters may have another length, so the mark is measured on what is shown.
        let before = look.text(text.get(..*start)?);
        let marked = look.text(text.get(*start..*end)?);
        let after = look.text(text.get(*end..)?);
        let room = look.width.saturating_sub(LINE_BEGINS + marked.chars().count());
        let (before, after) = cut(&before, &after, room, look.text("…").as_str());
        Some(Self {
            file: look.text(&notice.place.file),
            number: notice.place.line as usize,
            column: (notice.place.column as usize).max(1),
            marked: before.len()..before.len() + marked.len(),
            text: [before, marked, after].concat().replace('\n', " "),
        })
    }
}

/// What stands before and behind a mark, cut to so many columns where both are longer: half of it for
/// each, and what one leaves for the other.
fn cut(before: &str, after: &str, room: usize, mark: &str) -> (String, String) {
    let (left, right) = (before.chars().count(), after.chars().count());
    let of_left = left.min(room.saturating_sub(right.min(room / 2)));
    let of_right = right.min(room.saturating_sub(of_left));
    let shorter = |columns: usize| columns.saturating_sub(mark.chars().count());
    let before = match of_left < left {
        true => {
            let kept: String = before.chars().skip(left - shorter(of_left)).collect();
            format!("{mark}{kept}")
        }
        false => before.to_owned(),
    };
    let after = match of_right < right {
        true => after.chars().take(shorter(of_right)).collect::<String>() + mark,
        false => after.to_owned(),
    };
    (before, after)
}

impl<'a> Files<'a> for Line {
    type FileId = ();
    type Name = &'a str;
    type Source = &'a str;

    fn name(&'a self, (): ()) -> Result<&'a str, Error> {
        Ok(&self.file)
    }

    fn source(&'a self, (): ()) -> Result<&'a str, Error> {
        Ok(&self.text)
    }

    fn line_index(&'a self, (): (), _: usize) -> Result<usize, Error> {
        Ok(0)
    }

    fn line_number(&'a self, (): (), _: usize) -> Result<usize, Error> {
        Ok(self.number)
    }

    /// As the notice says: a long line is cut, so its own beginning does not tell.
    fn column_number(&'a self, (): (), _: usize, _: usize) -> Result<usize, Error> {
        Ok(self.column)
    }

    fn line_range(&'a self, (): (), _: usize) -> Result<Range<usize>, Error> {
        Ok(0..self.text.len())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use notice::Place;

    const ASCII: Look = Look { width: 80, colour: false, ascii: true };

    fn cell() -> Notice {
        let place = Place { file: "zeners.csv".to_owned(), line: 17, column: 61 };
        Notice::error("cell-notation", place, "`vz_v` has a comma")
            .found("5,1")
            .expected("a voltage in V, > 0")
            .mend("try `5.1`")
            .excerpt(Excerpt { text: "…ΩZQ5V1;\"5,1\";2".to_owned(), start: 12, end: 15 })
    }

    #[test]
    fn place_mark_and_advice_are_told() {
        let text = render(&[cell()], Warnings::Every, &ASCII);
        assert!(text.is_ascii(), "{text}");
        assert!(text.contains("zeners.csv:17:61"), "{text}");
        assert!(text.contains("found     `5,1`") && text.contains("mend      try `5.1`"), "{text}");
        let lines: Vec<&str> = text.lines().collect();
        let shown = lines.iter().position(|l| l.contains("ZQ5V1")).unwrap();
        let column = lines[shown].find("5,1").unwrap();
        assert_eq!(lines[shown + 1].find("^^^"), Some(column), "{text}");
    }

    #[test]
    fn a_narrow_terminal_gets_shorter_lines() {
        let mut notice = cell();
        notice.message = "a long message ".repeat(8);
        notice.expected = Some("one of many words ".repeat(6));
        let line = format!("{}MARK{}", "before ".repeat(20), "after ".repeat(20));
        notice.excerpt = Some(Excerpt { text: line, start: 140, end: 144 });
        for (width, ascii) in [(40, false), (60, true), (80, false)] {
            let text =
                render(&[notice.clone()], Warnings::Every, &Look { width, colour: false, ascii });
            let lines: Vec<&str> = text.lines().collect();
            let widest = lines.iter().map(|l| l.chars().count()).max().unwrap();
            assert!(widest <= width, "{widest} of {width}: {text}");
            let shown = lines.iter().position(|l| l.contains("MARK")).unwrap();
            let column =
                |n: usize, what: &str| lines[n].split(what).next().map(|s| s.chars().count());
            assert_eq!(column(shown, "MARK"), column(shown + 1, "^^^^"), "{text}");
        }
    }

    #[test]
    fn many_warnings_of_a_kind_are_cut_and_counted_but_errors_never() {
        let warning = Notice::warning("column-gaps", Place::file("pots.csv"), "blank");
        let mut notices = vec![warning; 10];
        notices.extend(vec![cell(); 5]);
        let text = render(&notices, Warnings::FewOfAKind, &ASCII);
        assert_eq!(text.matches("pots.csv: blank").count(), FEW);
        assert!(text.contains("7 more of this kind in pots.csv"), "{text}");
        assert_eq!(text.matches("zeners.csv:17:61").count(), 5);
        assert!(text.ends_with("5 errors, 10 warnings\n"), "{text}");
    }
}
