//! Times each stage of one run inside the process: read, eligible, shortlist, front, count.

use bench::workload::{WorkloadError, milliseconds, read_sheet, read_shop, timed};
use clap::Parser;
use eligible::eligible;
use select::candidate::Candidate;
use select::count::LostTo;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist};
use std::fmt::Display;
use std::path::PathBuf;
use std::process::ExitCode;
use std::time::Duration;

/// Times each stage of one run on a folder of catalogs and a rail sheet.
#[derive(Parser)]
#[command(name = "stages")]
struct Arguments {
    /// Folder with the catalogs
    catalogs: PathBuf,
    /// Rail sheet
    sheet: PathBuf,
    /// Rows of the shortlist
    #[arg(long, default_value_t = 10)]
    top: usize,
    /// Also the front
    #[arg(long)]
    front: bool,
    /// Also exact counts
    #[arg(long)]
    count: bool,
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
    show("read", time, String::new());
    let sheet = read_sheet(&arguments.sheet)?;
    let mut notices = Vec::new();
    let (rows, time) = timed(|| eligible(&sheet, &shop, false, &mut notices));
    let problem = rows.problem();
    show("eligible", time, format!("{} combinations covered", problem.covered()));
    let (list, time) = timed(|| shortlist(&problem, arguments.top, &NO_SPREAD));
    show_list("shortlist", time, &list, &problem);
    if arguments.front {
        let (list, time) = timed(|| select::front::front(&problem));
        show_list("front", time, &list, &problem);
    }
    if arguments.count {
        let (counts, time) = timed(|| select::count::count(&problem, &|_| ()));
        show("count", time, format!("{} feasible", counts.feasible));
        for (lost_to, combinations) in &counts.lost {
            let name = match lost_to {
                LostTo::HeatsinkFit => "heatsink-fit",
                LostTo::Check(check) => check.name(),
            };
            println!("  {name:<20} {combinations}");
        }
    }
    Ok(())
}

fn show(stage: &str, time: Duration, result: String) {
    println!("{stage:<12} {:>10.1} ms  {result}", milliseconds(time));
}

fn show_list(
    stage: &str,
    time: Duration,
    list: &Result<Vec<Candidate>, impl Display>,
    problem: &Problem<'_>,
) {
    match list {
        Ok(list) => {
            let best = list.first().map_or("nothing holds".to_owned(), |c| first(c, problem));
            show(stage, time, format!("{} candidates; {best}", list.len()));
        }
        Err(error) => show(stage, time, error.to_string()),
    }
}

fn first(candidate: &Candidate, problem: &Problem<'_>) -> String {
    use circuit::slot::Slot;
    let zener = candidate.place(Slot::Zener).and_then(|p| problem.zeners.get(p)).map(|p| p.part);
    let pass =
        candidate.place(Slot::Pass).and_then(|p| problem.transistors.get(p)).map(|t| t.part.part);
    let Candidate { score, cost, loss, stress, .. } = candidate;
    format!(
        "first: {} … {}, cost {cost:.2}, loss {loss:.3}, stress {stress:.3}, score {score:.4}",
        zener.unwrap_or("?"),
        pass.unwrap_or("?"),
    )
}
