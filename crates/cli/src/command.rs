//! The commands, one module each: its arguments, its help, and what it does.

mod catalog_check;
mod catalog_gaps;
mod completions;
mod man;
mod new;
mod order;
mod plot;
mod shortage;
mod shortlist;
mod substitute;
mod verify;
mod whynot;

use crate::arguments::Showing;
use crate::files::FileFault;
use crate::screen::Screen;
use clap::{Parser, Subcommand};
use select::certificate::CertificateError;

/// Finds proven, priced parts for a linear series-pass voltage regulator in your own catalogs.
#[derive(Debug, Parser)]
#[command(name = "railwright", version, arg_required_else_help = true)]
pub(crate) struct Cli {
    #[command(subcommand)]
    command: Command,
}

#[derive(Debug, Subcommand)]
enum Command {
    Shortlist(shortlist::Arguments),
    Verify(verify::Arguments),
    Whynot(whynot::Arguments),
    Order(order::Arguments),
    Plot(plot::Arguments),
    Substitute(substitute::Arguments),
    Shortage(shortage::Arguments),
    /// Look after catalogs
    #[command(subcommand)]
    Catalog(CatalogCommand),
    New(new::Arguments),
    Completions(completions::Arguments),
    Man(man::Arguments),
}

#[derive(Debug, Subcommand)]
enum CatalogCommand {
    Check(catalog_check::Arguments),
    Gaps(catalog_gaps::Arguments),
}

/// What a command found; the exit status follows from it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Answer {
    /// It is done: status 0.
    Done,
    /// The answer is no: status 1.
    No,
}

/// Why a command could not do its work: input or command line are at fault, status 2.
#[derive(Debug)]
pub(crate) enum Fault {
    /// Notices have told it.
    Told,
    /// A file could not be read or written.
    File(FileFault),
    /// The search gave up.
    Search(select::SearchError),
    /// No certificate can be made.
    Certificate(CertificateError),
    /// A defect of this program.
    Defect(String),
}

impl Fault {
    /// What has still to be said about it.
    pub(crate) fn untold(&self) -> Option<String> {
        match self {
            Fault::Told => None,
            Fault::File(fault) => Some(fault.to_string()),
            Fault::Search(error) => Some(error.to_string()),
            Fault::Certificate(CertificateError::TooLarge) => {
                Some(CertificateError::TooLarge.to_string())
            }
            Fault::Certificate(error) => Fault::Defect(error.to_string()).untold(),
            Fault::Defect(what) => Some(format!("this is a defect of railwright: {what}")),
        }
    }
}

impl From<FileFault> for Fault {
    fn from(fault: FileFault) -> Self {
        Fault::File(fault)
    }
}

impl Cli {
    /// What is to be shown, and how.
    pub(crate) fn showing(&self) -> Showing {
        match &self.command {
            Command::Shortlist(arguments) => arguments.showing,
            Command::Verify(arguments) => arguments.showing,
            Command::Whynot(arguments) => arguments.showing,
            Command::Order(arguments) => arguments.showing,
            Command::Plot(arguments) => arguments.showing,
            Command::Substitute(arguments) => arguments.showing,
            Command::Shortage(arguments) => arguments.showing,
            Command::Catalog(CatalogCommand::Check(arguments)) => arguments.showing,
            Command::Catalog(CatalogCommand::Gaps(arguments)) => arguments.showing,
            Command::New(arguments) => arguments.showing(),
            Command::Completions(arguments) => arguments.showing,
            Command::Man(arguments) => arguments.showing,
        }
    }
}

/// Runs the command that was asked for.
pub(crate) fn run(cli: Cli, screen: &Screen) -> Result<Answer, Fault> {
    match cli.command {
        Command::Shortlist(arguments) => shortlist::run(&arguments, screen),
        Command::Verify(arguments) => verify::run(&arguments, screen),
        Command::Whynot(arguments) => whynot::run(&arguments, screen),
        Command::Order(arguments) => order::run(&arguments, screen),
        Command::Plot(arguments) => plot::run(&arguments, screen),
        Command::Substitute(arguments) => substitute::run(&arguments, screen),
        Command::Shortage(arguments) => shortage::run(&arguments, screen),
        Command::Catalog(CatalogCommand::Check(arguments)) => {
            catalog_check::run(&arguments, screen)
        }
        Command::Catalog(CatalogCommand::Gaps(arguments)) => catalog_gaps::run(&arguments, screen),
        Command::New(arguments) => new::run(&arguments, screen),
        Command::Completions(arguments) => completions::run(&arguments, screen),
        Command::Man(arguments) => man::run(&arguments, screen),
    }
}
