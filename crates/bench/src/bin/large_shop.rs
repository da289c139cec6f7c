//! Writes a large shop made from a seed into a folder: six catalogs and five rail sheets.

use bench::large::{Hard, Order, Sizes, write_shop};
use clap::Parser;
use clap::builder::{PossibleValuesParser, TypedValueParser};
use std::path::PathBuf;
use std::process::ExitCode;

/// Writes a large shop of invented parts into DIR: six catalogs and five rail sheets. The same seed
/// and sizes give the same bytes on every machine.
#[derive(Parser)]
#[command(name = "large-shop")]
struct Arguments {
    /// Folder to write into; files of the same names are replaced
    dir: PathBuf,
    /// Rows of zeners.csv
    #[arg(long, default_value_t = 100_000)]
    zeners: usize,
    /// Rows of opamps.csv
    #[arg(long, default_value_t = 100_000)]
    opamps: usize,
    /// Rows of transistors.csv
    #[arg(long, default_value_t = 100_000)]
    transistors: usize,
    /// Rows of heatsinks.csv
    #[arg(long, default_value_t = 10_000)]
    heatsinks: usize,
    /// Rows of resistors.csv
    #[arg(long, default_value_t = 8)]
    lines: usize,
    /// Rows of pots.csv
    #[arg(long, default_value_t = 1000)]
    pots: usize,
    /// Another seed, another shop
    #[arg(long, default_value_t = 1)]
    seed: u64,
    /// Figures that are meant to be hard for a search
    #[arg(long, value_name = "KIND", value_parser = hard_kinds())]
    hard: Option<Hard>,
}

fn hard_kinds() -> impl TypedValueParser<Value = Hard> {
    PossibleValuesParser::new(Hard::ALL.map(|(name, _)| name)).try_map(|given| {
        Hard::ALL
            .into_iter()
            .find(|(name, _)| *name == given)
            .map(|(_, kind)| kind)
            .ok_or("no such kind")
    })
}

fn main() -> ExitCode {
    let Arguments { dir, zeners, opamps, transistors, heatsinks, lines, pots, seed, hard } =
        Arguments::parse();
    let sizes = Sizes { zeners, opamps, transistors, heatsinks, lines, pots };
    match write_shop(&dir, &Order { sizes, seed, hard }) {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("large-shop: {error}");
            ExitCode::from(2)
        }
    }
}
