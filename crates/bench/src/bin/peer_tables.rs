//! Writes the tables from which `peer/duckdb_join.py` combines and ranks, and the search's own
//! shortlist to compare with.

use bench::peer::{write_shortlist, write_tables};
use bench::workload::{milliseconds, read_sheet, read_shop, timed};
use clap::Parser;
use eligible::eligible;
use select::ranking::{NO_SPREAD, shortlist};
use std::error::Error;
use std::path::PathBuf;
use std::process::ExitCode;

/// Writes tables for the peer, and the shortlist to compare its ranking with.
#[derive(Parser)]
#[command(name = "peer-tables")]
struct Arguments {
    /// Folder with the catalogs
    catalogs: PathBuf,
    /// Rail sheet with a fixed output
    sheet: PathBuf,
    /// Folder to write into
    out: PathBuf,
    /// Rows of the shortlist
    #[arg(long, default_value_t = 10)]
    top: usize,
}

fn main() -> ExitCode {
    match run(&Arguments::parse()) {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("peer-tables: {error}");
            ExitCode::from(2)
        }
    }
}

fn run(arguments: &Arguments) -> Result<(), Box<dyn Error>> {
    let Arguments { catalogs, sheet, out, top } = arguments;
    std::fs::create_dir_all(out)?;
    let shop = read_shop(catalogs)?;
    let sheet = read_sheet(sheet)?;
    let mut notices = Vec::new();
    let problem = eligible(&sheet, &shop, false, &mut notices).problem();
    let (written, time) = timed(|| write_tables(&problem, out));
    written?;
    println!("tables     {:10.1} ms", milliseconds(time));
    let (list, time) = timed(|| shortlist(&problem, *top, &NO_SPREAD));
    println!("shortlist  {:10.1} ms", milliseconds(time));
    write_shortlist(&problem, &list?, &out.join("shortlist.csv"))?;
    Ok(())
}
