//! `railwright man`

use super::{Answer, Cli, Fault};
use crate::arguments::Showing;
use crate::files::{FileFault, check, write_whole};
use crate::screen::Screen;
use clap::{Args, Command, CommandFactory};
use clap_mangen::Man;
use std::path::PathBuf;

/// Write manual pages, one for each command
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// The folder to write into; it must be there
    #[arg(value_name = "DIR")]
    folder: PathBuf,
    /// Replace pages that are there already
    #[arg(long)]
    overwrite: bool,
    #[command(flatten)]
    pub(super) showing: Showing,
}

const EXAMPLES: &str = "\
Examples:
  railwright man .
  railwright man . --overwrite --quiet

Read a page with `man ./railwright-shortlist.1`, or write them to a folder such as
~/.local/share/man/man1, where `man railwright-shortlist` finds them.

Exit status: 0 where the pages are written, 2 where they can't be.";

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    let mut command = Cli::command().disable_help_subcommand(true);
    command.build();
    let mut pages = Vec::new();
    add_pages(&command, &mut pages).map_err(|e| Fault::Defect(e.to_string()))?;
    let pages: Vec<(PathBuf, Vec<u8>)> =
        pages.into_iter().map(|(name, text)| (arguments.folder.join(name), text)).collect();
    if !arguments.folder.is_dir() {
        return Err(FileFault::NoFolder(arguments.folder.join("*.1")).into());
    }
    check(pages.iter().map(|(path, _)| path.as_path()), arguments.overwrite)?;
    for (path, text) in &pages {
        write_whole(path, text, arguments.overwrite)?;
    }
    let folder = arguments.folder.display();
    screen.mention(&format!("wrote {} manual pages into {folder}", pages.len()));
    Ok(Answer::Done)
}

/// The page of a command and those of the commands below it, each with its file's name.
fn add_pages(command: &Command, pages: &mut Vec<(String, Vec<u8>)>) -> std::io::Result<()> {
    for below in command.get_subcommands().filter(|below| !below.is_hide_set()) {
        add_pages(below, pages)?;
    }
    let page = Man::new(command.clone());
    let name = page.get_filename();
    let mut text = Vec::new();
    page.render(&mut text)?;
    pages.push((name, text));
    Ok(())
}
