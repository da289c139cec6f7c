//! `railwright catalog gaps`

use super::{Answer, Fault};
use crate::arguments::{Catalogs, Showing};
use crate::load::sheet_and_parts;
use crate::progress::watched;
use crate::screen::Screen;
use clap::Args;
use reasons::gaps::gaps;
use std::path::PathBuf;

/// Tell which blank cells of catalogs are worth filling in for a rail
///
/// Fills the blanks of unproven parts in, searches, and tells for each blank what it would have to hold
/// for the part to be on the list, the parts that could come furthest up first. With several blanks each
/// is told with the others at their best.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// The rail sheet: what is wanted (TOML)
    sheet: PathBuf,
    #[command(flatten)]
    catalogs: Catalogs,
    /// Rows of the list that a part should reach
    #[arg(long, value_name = "N", default_value_t = 10, value_parser = clap::value_parser!(u32).range(1..))]
    top: u32,
    /// Set a value of the sheet for this run, for example load.max_a=1.5
    #[arg(long, value_name = "KEY=VALUE")]
    set: Vec<String>,
    #[command(flatten)]
    pub(super) showing: Showing,
}

const EXAMPLES: &str = "\
Examples, on the sample catalogs:
  railwright catalog gaps catalogs-sample/sheets/tide-gauge-12v.toml --catalogs catalogs-sample
  railwright catalog gaps catalogs-sample/sheets/bench-5-15v.toml --top 3 \\
      --catalogs catalogs-sample

Exit status: 0 where the question is answered, 2 where the input or the command line is at fault.";

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    let (_, eligible) =
        sheet_and_parts(&arguments.sheet, &arguments.catalogs, &arguments.set, screen, |_| {})?;
    let top = usize::try_from(arguments.top).unwrap_or(usize::MAX);
    let found = watched("searching", screen.shows_progress(), |_| gaps(&eligible, top))
        .map_err(Fault::Search)?;
    let text = report::reasons::gaps(&found, eligible.sheet, &screen.data);
    screen.show(&text).map_err(|e| Fault::Defect(format!("standard output: {e}")))?;
    Ok(Answer::Done)
}
