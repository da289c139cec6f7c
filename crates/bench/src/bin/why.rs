//! Times what `whynot` and `catalog gaps` do, stage by stage, inside the process.

use bench::workload::{WorkloadError, milliseconds, read_sheet_set, read_shop, timed};
use clap::Parser;
use eligible::{Eligible, eligible};
use reasons::change::changes;
use reasons::conflict::Conflict;
use reasons::gaps::gaps;
use reasons::lever::{Follows, Lever, on_rail};
use reasons::losses::losses;
use reasons::nothing::why_nothing;
use reasons::probe::ShopMarket;
use reasons::survey::Survey;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist};
use std::path::PathBuf;
use std::process::ExitCode;
use std::time::Duration;

/// Times the reasons why nothing qualifies, or with --gaps the blank cells worth filling.
#[derive(Parser)]
#[command(name = "why")]
struct Arguments {
    /// Folder with the catalogs
    catalogs: PathBuf,
    /// Rail sheet
    sheet: PathBuf,
    /// Set a value of the sheet, for example load.max_a=1.5
    #[arg(long, value_name = "KEY=VALUE")]
    set: Vec<String>,
    /// Blank cells in place of the reasons
    #[arg(long)]
    gaps: bool,
    /// Each key by itself as well
    #[arg(long)]
    keys: bool,
}

fn main() -> ExitCode {
    match run(&Arguments::parse()) {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprint!("{error}");
            ExitCode::from(2)
        }
    }
}

fn run(arguments: &Arguments) -> Result<(), WorkloadError> {
    let (shop, time) = timed(|| read_shop(&arguments.catalogs));
    let shop = shop?;
    show("read", time, "");
    let sheet = read_sheet_set(&arguments.sheet, &arguments.set)?;
    let (rows, time) = timed(|| eligible(&sheet, &shop, false, &mut Vec::new()));
    show("eligible", time, "");
    let problem = rows.problem();
    let (list, time) = timed(|| shortlist(&problem, 10, &NO_SPREAD));
    let listed = list.as_ref().map(Vec::len).unwrap_or_default();
    show("shortlist", time, &format!("{listed} candidates"));
    if arguments.gaps {
        show_gaps(&rows);
    } else if listed == 0 {
        show_reasons(&rows, &problem, arguments.keys);
    }
    Ok(())
}

fn show_gaps(rows: &Eligible<'_>) {
    let (found, time) = timed(|| gaps(rows, 10));
    match found {
        Ok(found) => {
            let (reach, of) = (found.gaps.len(), found.looked_at);
            show("gaps", time, &format!("{reach} of {of} unproven parts could reach the list"));
        }
        Err(error) => show("gaps", time, &error.to_string()),
    }
}

fn show_reasons(rows: &Eligible<'_>, problem: &Problem<'_>, each_key: bool) {
    let market = ShopMarket { sheet: rows.sheet, shop: rows.shop, only: None };
    let (_, time) = timed(|| losses(problem));
    show("losses", time, "");
    let survey = Survey::new(problem);
    let (conflict, time) = timed(|| Conflict::smallest(&survey, problem.rail));
    let keys = |conflict: Conflict| {
        let keys = conflict.requirements().into_iter().map(|r| r.keys().join(", "));
        keys.collect::<Vec<_>>().join("; ")
    };
    show("conflict", time, &conflict.map(keys).unwrap_or_default());
    let (nearest, time) = timed(|| survey.nearest(3));
    let fewest = nearest.first().map_or(0, |miss| miss.failing.len());
    show("nearest", time, &format!("{} that fail in {fewest} checks", nearest.len()));
    let follows = Follows::of(rows.sheet);
    let levers: Vec<&Lever> = on_rail(problem.rail, false).collect();
    let each: Vec<&[&Lever]> = if each_key { levers.chunks(1).collect() } else { Vec::new() };
    for levers in each {
        let (changed, time) = timed(|| changes(&market, follows, levers, &survey));
        let told = changed.map(|keys| {
            let ends = keys.iter().flat_map(|key| &key.changes).map(|c| c.value.to_string());
            ends.collect::<Vec<_>>().join(", ")
        });
        let name = levers.iter().map(|lever| lever.name()).collect::<String>();
        show(&name, time, &told.unwrap_or_else(|error| error.to_string()));
    }
    let (why, time) = timed(|| why_nothing(&market, problem));
    let changed = why.map(|why| why.keys.iter().map(|key| key.changes.len()).sum::<usize>());
    show("all reasons", time, &format!("{} changes", changed.unwrap_or_default()));
}

fn show(stage: &str, time: Duration, result: &str) {
    let used = match processor_time() {
        Some(seconds) => format!("{seconds:>8.2} s"),
        None => String::new(),
    };
    println!("{stage:<28} {:>10.1} ms {used}  {result}", milliseconds(time));
}

/// Processor time of all threads so far, s; None where the system does not tell in this way.
fn processor_time() -> Option<f64> {
    // Linux counts in hundredths of a second.
    let text = std::fs::read_to_string("/proc/self/stat").ok()?;
    let (_, fields) = text.rsplit_once(')')?;
    let ticks: u64 =
        fields.split_whitespace().skip(11).take(2).filter_map(|n| n.parse::<u64>().ok()).sum();
    Some(ticks as f64 / 100.0)
}
