//! Writes many designs for a large shop into a folder: sheets with other loads, and the designs that a
//! search finds for each. What `railwright shortage` is measured with.

use bench::large::{Order, Sizes, rail_sheets, write_shop};
use bench::workload::{WorkloadError, read_shop, take_sheet};
use circuit::slot::Slot;
use clap::Parser;
use design::keys::Resistor;
use design::{Kept, KeptPart, write};
use eligible::eligible;
use select::candidate::Candidate;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist};
use std::error::Error;
use std::path::{Path, PathBuf};
use std::process::ExitCode;

/// Writes a large shop of invented parts into DIR, as large-shop does, with sheets below `sheets` and
/// designs below `designs`. The same numbers give the same files.
#[derive(Parser)]
#[command(name = "large-designs")]
struct Arguments {
    /// Folder to write into; files of the same names are replaced
    dir: PathBuf,
    /// Rows of zeners.csv, opamps.csv and transistors.csv; a tenth as many heatsinks
    #[arg(long, default_value_t = 10_000)]
    rows: usize,
    /// Designs
    #[arg(long, default_value_t = 1000)]
    designs: usize,
}

/// Loads as shares of each sheet's own.
const LOADS: [f64; 10] = [1.0, 0.95, 0.9, 0.85, 0.8, 0.75, 0.7, 0.65, 0.6, 0.55];

fn main() -> ExitCode {
    let Arguments { dir, rows, designs } = Arguments::parse();
    match write_all(&dir, rows, designs) {
        Ok(written) => {
            println!("{written} designs");
            ExitCode::SUCCESS
        }
        Err(error) => {
            eprintln!("large-designs: {error}");
            ExitCode::from(2)
        }
    }
}

fn write_all(dir: &Path, rows: usize, designs: usize) -> Result<usize, Box<dyn Error>> {
    let order = Order { sizes: Sizes::alike(rows), seed: 1, hard: None };
    write_shop(dir, &order)?;
    std::fs::create_dir_all(dir.join("sheets"))?;
    std::fs::create_dir_all(dir.join("designs"))?;
    let shop = read_shop(dir)?;
    // One sheet is made so that nothing qualifies.
    let admits = |(name, _): &(&str, String)| *name != "impossible.toml";
    let sheets: Vec<_> = rail_sheets(&order).into_iter().filter(admits).collect();
    let each = designs.div_ceil(sheets.len() * LOADS.len());
    let mut written = 0;
    for (name, text) in &sheets {
        for (number, share) in LOADS.into_iter().enumerate() {
            let stem = format!("{}-{number}", name.trim_end_matches(".toml"));
            let text = with_load(text, share);
            let sheet = take_sheet(&stem, &text)?;
            std::fs::write(dir.join("sheets").join(format!("{stem}.toml")), &text)?;
            let mut notices = Vec::new();
            let chosen = eligible(&sheet, &shop, false, &mut notices);
            if notice::has_errors(&notices) {
                return Err(WorkloadError::Faulty(notices).into());
            }
            let problem = chosen.problem();
            let mut spread = NO_SPREAD;
            for slot in [Slot::Zener, Slot::Amplifier, Slot::Pass] {
                spread[slot as usize] = Some(2);
            }
            for (rank, candidate) in shortlist(&problem, each, &spread)?.iter().enumerate() {
                if written == designs {
                    return Ok(written);
                }
                let path = format!("../sheets/{stem}.toml");
                let text = write(&kept(candidate, &problem, &path, sheet.boards));
                let file = dir.join("designs").join(format!("{stem}-{rank:02}.toml"));
                std::fs::write(file, text)?;
                written += 1;
            }
        }
    }
    Ok(written)
}

/// A sheet with a share of its load.
fn with_load(text: &str, share: f64) -> String {
    let line = |line: &str| match line.strip_prefix("max_a = ").and_then(|a| a.parse::<f64>().ok())
    {
        Some(load_a) => format!("max_a = {}", load_a * share),
        None => line.to_owned(),
    };
    text.lines().map(line).collect::<Vec<_>>().join("\n") + "\n"
}

fn kept<'a>(candidate: &Candidate, problem: &Problem<'a>, sheet: &'a str, boards: u64) -> Kept<'a> {
    let named = |slot: Slot| {
        let place = candidate.place(slot)?;
        let (maker, part) = match slot {
            Slot::Zener => problem.zeners.get(place).map(|p| (p.maker, p.part)),
            Slot::BiasLine => problem.bias_lines.get(place).map(|p| (p.maker, p.part)),
            Slot::Amplifier => problem.amplifiers.get(place).map(|p| (p.maker, p.part)),
            Slot::DividerLine => problem.divider_lines.get(place).map(|p| (p.maker, p.part)),
            Slot::Pot => problem.pots.get(place).map(|p| (p.maker, p.part)),
            Slot::Pass => problem.transistors.get(place).map(|t| (t.part.maker, t.part.part)),
            Slot::Heatsink => problem.heatsinks.get(place).map(|s| (s.part.maker, s.part.part)),
        }?;
        Some(KeptPart { slot, maker, part, cells: Vec::new() })
    };
    let upper = if problem.rail.is_adjustable() { Resistor::Rx } else { Resistor::Rf };
    Kept {
        name: "made for measuring",
        sheet,
        sheet_sha256: "0".repeat(64),
        boards,
        slots: Slot::ALL.into_iter().filter_map(named).collect(),
        values: vec![
            (Resistor::Rz.key(), candidate.rz.ohm),
            (upper.key(), candidate.divider.upper.ohm),
            (Resistor::Ri.key(), candidate.divider.ri.ohm),
        ],
    }
}
