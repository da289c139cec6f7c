//! `cargo run -p fuzz`: a campaign against every target, or some.

use clap::Parser;
use fuzz::campaign::{End, Outcome, Watch, run};
use fuzz::corpus;
use fuzz::target::Target;
use peak_alloc::PeakAlloc;
use std::io;
use std::path::{Path, PathBuf};
use std::process::ExitCode;
use std::time::Duration;

#[global_allocator]
static MEMORY: PeakAlloc = PeakAlloc;

/// Feeds altered copies of the corpus to the readers of the tool, and keeps what breaks one.
#[derive(Parser)]
#[command(name = "fuzz")]
struct Arguments {
    /// Targets: catalogs, cells, sheets, designs, shops, answers; all where none is named
    #[arg(value_parser = target)]
    targets: Vec<Target>,
    /// Inputs for each target; the same inputs for the same seed
    #[arg(long, default_value_t = 2000, conflicts_with = "minutes")]
    inputs: u64,
    /// Minutes for each target, in place of a number of inputs
    #[arg(long)]
    minutes: Option<f64>,
    /// Where the random numbers begin
    #[arg(long, default_value_t = 1)]
    seed: u64,
    /// Folder for inputs that break something; it must be there
    #[arg(long, default_value = ".")]
    findings: PathBuf,
}

fn target(name: &str) -> Result<Target, String> {
    Target::named(name)
        .ok_or_else(|| format!("no target; there are {}", Target::ALL.map(Target::name).join(", ")))
}

fn main() -> ExitCode {
    match campaign(&Arguments::parse()) {
        Ok(true) => ExitCode::SUCCESS,
        Ok(false) => ExitCode::FAILURE,
        Err(error) => {
            eprintln!("fuzz: {error}");
            ExitCode::from(2)
        }
    }
}

/// True where nothing was found.
fn campaign(arguments: &Arguments) -> io::Result<bool> {
    // Panics are told with the input that led to them, once.
    std::panic::set_hook(Box::new(|_| {}));
    let watch = Watch::over(&arguments.findings);
    let targets = match arguments.targets.as_slice() {
        [] => &Target::ALL,
        some => some,
    };
    let end = match arguments.minutes {
        Some(minutes) => End::Time(Duration::from_secs_f64(60.0 * minutes.clamp(0.0, 1e4))),
        None => End::Inputs(arguments.inputs),
    };
    let mut sound = true;
    println!("target      inputs       bytes  behaviours   words   most memory");
    for target in targets {
        let inputs =
            corpus::read(&corpus::folder(), *target)?.into_iter().map(|(_, i)| i).collect();
        let outcome = run(*target, inputs, arguments.seed, end, &MEMORY, &watch)?;
        show(*target, &outcome);
        keep(*target, &outcome, &arguments.findings)?;
        sound &= outcome.findings.is_empty();
    }
    Ok(sound)
}

fn show(target: Target, outcome: &Outcome) {
    println!(
        "{:8} {:9} {:11} {:11} {:7} {:10.1} MB",
        target.name(),
        outcome.inputs,
        outcome.bytes,
        outcome.kept,
        outcome.words,
        outcome.most_memory as f64 / 1e6
    );
}

fn keep(target: Target, outcome: &Outcome, findings: &Path) -> io::Result<()> {
    for (number, finding) in outcome.findings.iter().enumerate() {
        let file = findings.join(format!("{}-{number}", target.name()));
        std::fs::write(&file, &finding.input)?;
        println!("  found: {}: {}", file.display(), finding.what);
    }
    Ok(())
}
