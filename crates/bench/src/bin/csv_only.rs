//! The yardstick for reading: the catalogs of a folder read with the `csv` crate alone, record by
//! record, on one core. No cell is looked at.

use bench::workload::{milliseconds, timed};
use catalog::Kind;
use clap::Parser;
use csv::{ByteRecord, ReaderBuilder};
use std::path::{Path, PathBuf};
use std::process::ExitCode;

/// Reads the catalogs of DIR with the csv crate alone, on one core, and tells the time it took.
#[derive(Parser)]
#[command(name = "csv-only")]
struct Arguments {
    /// Folder with the catalogs; those that are missing are passed over
    dir: PathBuf,
    /// How often; the median counts
    #[arg(long, default_value_t = 1)]
    rounds: usize,
}

fn main() -> ExitCode {
    let Arguments { dir, rounds } = Arguments::parse();
    let mut times = Vec::new();
    let mut records = 0;
    for _ in 0..rounds.max(1) {
        let (read, time) = timed(|| read_all(&dir));
        match read {
            Ok(count) => records = count,
            Err(error) => {
                eprintln!("csv-only: {error}");
                return ExitCode::from(2);
            }
        }
        times.push(milliseconds(time));
    }
    times.sort_by(f64::total_cmp);
    let median = times.get(times.len() / 2).copied().unwrap_or_default();
    println!("{records} records, {median:.1} ms (median of {})", times.len());
    ExitCode::SUCCESS
}

/// How many records the catalogs hold.
fn read_all(folder: &Path) -> Result<usize, csv::Error> {
    let mut count = 0;
    let mut record = ByteRecord::new();
    for kind in Kind::ALL {
        let path = folder.join(kind.file_name());
        if !path.exists() {
            continue;
        }
        let mut reader = ReaderBuilder::new().flexible(true).from_path(path)?;
        while reader.read_byte_record(&mut record)? {
            count += 1;
        }
    }
    Ok(count)
}
