//! The terminal, or the pipe in place of it.

use crate::arguments::Showing;
use notice::Notice;
use report::look::Look;
use report::notices::{Warnings, render};
use std::io::{self, IsTerminal, Write};

/// Columns of text where nothing tells how many there are.
const USUAL_WIDTH: usize = 80;

/// Lines of any length.
const NO_END: usize = 100_000;

/// Fewer columns than this can't hold a table; lines are then broken by the terminal.
const LEAST_WIDTH: usize = 40;

/// Where a command shows things: data on standard output, all else on standard error.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Screen {
    /// For standard output.
    pub(crate) data: Look,
    /// For standard error.
    notes: Look,
    quiet: bool,
}

impl Screen {
    /// The screen as the user wants it.
    pub(crate) fn new(showing: Showing) -> Self {
        let look = |is_terminal: bool, usual_width: usize| Look {
            width: width(is_terminal, usual_width),
            colour: is_terminal && colours_are_welcome(),
            ascii: showing.ascii,
        };
        Self {
            data: look(io::stdout().is_terminal(), USUAL_WIDTH),
            // In a file or pipe a note is one line, as scripts that look for it want it.
            notes: look(io::stderr().is_terminal(), NO_END),
            quiet: showing.quiet,
        }
    }

    /// Shows data. A reader that has seen enough and closed the pipe is no fault.
    pub(crate) fn show(&self, text: &str) -> io::Result<()> {
        let mut out = io::stdout().lock();
        match out.write_all(text.as_bytes()).and_then(|()| out.flush()) {
            Err(error) if error.kind() == io::ErrorKind::BrokenPipe => Ok(()),
            result => result,
        }
    }

    /// Says something that is no data, whatever the user wants.
    pub(crate) fn say(&self, text: &str) {
        // Nobody is left to be told that standard error can't be written.
        let _ = io::stderr().lock().write_all(self.notes.paragraph(text, 0, 2).as_bytes());
    }

    /// Says something that a user who wants quiet does not want to hear.
    pub(crate) fn mention(&self, text: &str) {
        if !self.quiet {
            self.say(text);
        }
    }

    /// Tells notices.
    pub(crate) fn tell(&self, notices: &[Notice], warnings: Warnings) {
        let warnings = if self.quiet { Warnings::Hidden } else { warnings };
        let text = render(notices, warnings, &self.notes);
        let _ = io::stderr().lock().write_all(text.as_bytes());
    }

    /// Progress may be shown.
    pub(crate) fn shows_progress(&self) -> bool {
        !self.quiet && io::stderr().is_terminal()
    }
}

/// A terminal tells its width; for a pipe `COLUMNS` may.
fn width(is_terminal: bool, usual: usize) -> usize {
    let of_terminal = || terminal_size::terminal_size().map(|(width, _)| usize::from(width.0));
    let of_variable = || std::env::var("COLUMNS").ok()?.trim().parse().ok();
    let width = if is_terminal { of_terminal() } else { of_variable() };
    width.unwrap_or(usual).max(LEAST_WIDTH)
}

/// `NO_COLOR` with any value but an empty one says no. Source: no-color.org.
fn colours_are_welcome() -> bool {
    let refused = std::env::var_os("NO_COLOR").is_some_and(|value| !value.is_empty());
    let is_dumb = std::env::var_os("TERM").is_some_and(|term| term == "dumb");
    !refused && !is_dumb
}
