//! The command line of Railwright: arguments, files, terminal and exit statuses.

mod arguments;
mod command;
mod desk;
mod files;
mod folder;
mod load;
mod order_lines;
mod page;
mod progress;
mod screen;

use clap::Parser;
use command::{Answer, Cli};
use screen::Screen;
use std::process::ExitCode;

fn main() -> ExitCode {
    let cli = Cli::parse();
    let screen = Screen::new(cli.showing());
    match command::run(cli, &screen) {
        Ok(Answer::Done) => ExitCode::SUCCESS,
        Ok(Answer::No) => ExitCode::from(1),
        Err(fault) => {
            if let Some(text) = fault.untold() {
                screen.say(&format!("error: {text}"));
            }
            ExitCode::from(2)
        }
    }
}
