//! `railwright completions`

use super::{Answer, Cli, Fault};
use crate::arguments::Showing;
use crate::screen::Screen;
use clap::{Args, CommandFactory, ValueEnum};
use clap_complete::generate;

/// Print a script with which a shell completes commands, options and files
///
/// The script goes to standard output; where a shell looks for it differs.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// The shell
    shell: Shell,
    #[command(flatten)]
    pub(super) showing: Showing,
}

const EXAMPLES: &str = "\
Examples:
  railwright completions bash > railwright.bash
  railwright completions zsh > _railwright

For bash, source the file in ~/.bashrc; for zsh, put it into a folder of $fpath; for fish, into
~/.config/fish/completions as railwright.fish.

Exit status: 0.";

/// A shell that can be completed for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
enum Shell {
    Bash,
    Zsh,
    Fish,
}

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    let shell = match arguments.shell {
        Shell::Bash => clap_complete::Shell::Bash,
        Shell::Zsh => clap_complete::Shell::Zsh,
        Shell::Fish => clap_complete::Shell::Fish,
    };
    let mut script = Vec::new();
    generate(shell, &mut Cli::command(), "railwright", &mut script);
    let script = String::from_utf8_lossy(&script);
    screen.show(&script).map_err(|e| Fault::Defect(format!("standard output: {e}")))?;
    Ok(Answer::Done)
}
