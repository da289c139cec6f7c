//! What is wrong with an input, where, and how to mend it.
//!
//! Readers of files push [`Notice`]s into a list that their caller owns and print nothing, so that
//! all faults of a run are seen at once and can be told on a terminal, in JSON or in a test.

use std::fmt;

/// How serious a notice is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Severity {
    /// The run can go on; something is worth a look.
    Warning,
    /// The input can't be used as it stands.
    Error,
}

/// A place in a text file.
#[derive(Debug, Clone, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Place {
    /// The file as the user would name it.
    pub file: String,
    /// Line, from 1; 0 for the file as a whole.
    pub line: u32,
    /// Column in characters, from 1; 0 for the line as a whole.
    pub column: u32,
}

impl Place {
    /// The file as a whole.
    pub fn file(file: impl Into<String>) -> Self {
        Self { file: file.into(), line: 0, column: 0 }
    }

    /// A line of a file.
    pub fn line(file: impl Into<String>, line: u32) -> Self {
        Self { file: file.into(), line, column: 0 }
    }
}

impl fmt::Display for Place {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}", self.file)?;
        if self.line > 0 {
            write!(f, ":{}", self.line)?;
            if self.column > 0 {
                write!(f, ":{}", self.column)?;
            }
        }
        Ok(())
    }
}

/// The line of text that a notice speaks of, with the part to underline.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Excerpt {
    /// The line, without its end; long lines are cut round the marked part.
    pub text: String,
    /// First marked byte of `text`.
    pub start: usize,
    /// First byte behind the marked part.
    pub end: usize,
}

impl Excerpt {
    /// Characters that are shown before, and from, where the marked part begins.
    const REACH: usize = 80;

    /// The part of a line round the bytes from `start` to `end`, cut where the line is long. A control
    /// character shows as `?`: it would act on a terminal.
    ///
    /// ```
    /// let line = format!("{}= 5", "x".repeat(1000));
    /// let excerpt = notice::Excerpt::of_line(&line, 1002, 1003);
    /// assert!(excerpt.text.len() < 200);
    /// assert_eq!(&excerpt.text[excerpt.start..excerpt.end], "5");
    /// ```
    pub fn of_line(line: &str, start: usize, end: usize) -> Self {
        let before = line.get(..start).unwrap_or_default();
        let from = before.char_indices().rev().nth(Self::REACH - 1).map_or(0, |(at, _)| at);
        let behind = line.get(start..).unwrap_or_default();
        let to = behind.char_indices().nth(Self::REACH).map_or(line.len(), |(at, _)| start + at);
        // One byte stands for one byte, so that the marked part stays where it is.
        let shown = |c: char| if c.is_ascii_control() && c != '\t' { '?' } else { c };
        Self {
            text: line.get(from..to).unwrap_or_default().chars().map(shown).collect(),
            start: start - from,
            end: end.min(to).max(start) - from,
        }
    }
}

/// One fault or doubt about an input.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Notice {
    /// How serious it is.
    pub severity: Severity,
    /// A short lasting name for scripts, in lower case with hyphens: `cell-out-of-range`.
    pub code: &'static str,
    /// Where.
    pub place: Place,
    /// What is wrong, in one clause.
    pub message: String,
    /// The text found there.
    pub found: Option<String>,
    /// What is expected there.
    pub expected: Option<String>,
    /// How to mend it.
    pub mend: Option<String>,
    /// The line of text.
    pub excerpt: Option<Excerpt>,
}

impl Notice {
    /// An error.
    pub fn error(code: &'static str, place: Place, message: impl Into<String>) -> Self {
        Self::new(Severity::Error, code, place, message)
    }

    /// A warning.
    pub fn warning(code: &'static str, place: Place, message: impl Into<String>) -> Self {
        Self::new(Severity::Warning, code, place, message)
    }

    fn new(
        severity: Severity,
        code: &'static str,
        place: Place,
        message: impl Into<String>,
    ) -> Self {
        Self {
            severity,
            code,
            place,
            message: message.into(),
            found: None,
            expected: None,
            mend: None,
            excerpt: None,
        }
    }

    /// Adds the text found.
    #[must_use]
    pub fn found(mut self, text: impl Into<String>) -> Self {
        self.found = Some(text.into());
        self
    }

    /// Adds what is expected.
    #[must_use]
    pub fn expected(mut self, text: impl Into<String>) -> Self {
        self.expected = Some(text.into());
        self
    }

    /// Adds how to mend it.
    #[must_use]
    pub fn mend(mut self, text: impl Into<String>) -> Self {
        self.mend = Some(text.into());
        self
    }

    /// Adds the line of text.
    #[must_use]
    pub fn excerpt(mut self, excerpt: Excerpt) -> Self {
        self.excerpt = Some(excerpt);
        self
    }
}

impl fmt::Display for Notice {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}: {}", self.place, self.message)?;
        if let Some(found) = &self.found {
            write!(f, "; found `{found}`")?;
        }
        if let Some(expected) = &self.expected {
            write!(f, "; expected {expected}")?;
        }
        if let Some(mend) = &self.mend {
            write!(f, "; {mend}")?;
        }
        Ok(())
    }
}

/// True where any notice is an error.
pub fn has_errors(notices: &[Notice]) -> bool {
    notices.iter().any(|n| n.severity == Severity::Error)
}
