//! A benchmark for each stage of a run, on shops made from a seed.
//!
//! `cargo bench -p bench` runs all; a word after `--` picks those whose name holds it.

use bench::large::{LargeError, Order, Sizes, write_shop};
use bench::workload::{WorkloadError, read_sheet, read_shop};
use catalog::Shop;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Aim, choose_divider};
use circuit::pass::{Duty, PassFigures};
use circuit::reference::{Bias, ZenerAtRail, choose_rz};
use circuit::resistor::{LineAtRail, PotAtRail};
use criterion::{BenchmarkId, Criterion, Throughput};
use eligible::eligible;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist};
use sheet::Sheet;
use std::fmt;
use std::hint::black_box;
use std::process::ExitCode;
use std::time::Duration;
use tempfile::TempDir;

/// Rows of a shortlist.
const TOP: usize = 10;

/// Why a benchmark could not be set up.
#[derive(Debug)]
enum SetupError {
    Shop(LargeError),
    Folder(std::io::Error),
    Workload(WorkloadError),
}

impl fmt::Display for SetupError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Shop(error) => error.fmt(f),
            Self::Folder(error) => error.fmt(f),
            Self::Workload(error) => error.fmt(f),
        }
    }
}

impl From<LargeError> for SetupError {
    fn from(error: LargeError) -> Self {
        Self::Shop(error)
    }
}

impl From<std::io::Error> for SetupError {
    fn from(error: std::io::Error) -> Self {
        Self::Folder(error)
    }
}

impl From<WorkloadError> for SetupError {
    fn from(error: WorkloadError) -> Self {
        Self::Workload(error)
    }
}

/// A shop on disk and in memory.
struct Made {
    folder: TempDir,
    shop: Shop,
}

impl Made {
    /// A shop of so many zeners, amplifiers and transistors.
    fn of(rows: usize) -> Result<Self, SetupError> {
        let folder = tempfile::tempdir()?;
        write_shop(folder.path(), &Order { sizes: Sizes::alike(rows), seed: 1, hard: None })?;
        let shop = read_shop(folder.path())?;
        Ok(Self { folder, shop })
    }

    fn sheet(&self, name: &str) -> Result<Sheet, SetupError> {
        Ok(read_sheet(&self.folder.path().join(name))?)
    }

    fn bytes(&self) -> u64 {
        self.shop.files().map(|file| file.bytes.len() as u64).sum()
    }
}

/// Reading a folder of catalogs, every cell checked.
fn read(criterion: &mut Criterion) -> Result<(), SetupError> {
    let mut group = criterion.benchmark_group("read");
    group.sample_size(10);
    for rows in [1_000, 10_000] {
        let made = Made::of(rows)?;
        group.throughput(Throughput::Bytes(made.bytes()));
        group.bench_function(BenchmarkId::from_parameter(rows), |b| {
            b.iter(|| read_shop(black_box(made.folder.path())));
        });
    }
    group.finish();
    Ok(())
}

/// What comes before a search: rows that may be chosen, and parts under the rail's conditions.
fn prepare(criterion: &mut Criterion) -> Result<(), SetupError> {
    let made = Made::of(10_000)?;
    let sheet = made.sheet("fixed-12v.toml")?;
    let rail = &sheet.rail;
    let duty = Duty::new(rail);
    let mut group = criterion.benchmark_group("prepare");
    group.bench_function("eligible", |b| {
        b.iter(|| eligible(&sheet, &made.shop, false, &mut Vec::new()).problem().covered());
    });
    let rows = eligible(&sheet, &made.shop, false, &mut Vec::new());
    group.throughput(Throughput::Elements(rows.amplifiers.len() as u64));
    group.bench_function("amplifiers", |b| {
        b.iter(|| {
            let at_rail = rows.amplifiers.iter().map(|a| AmplifierAtRail::new(&a.figures, rail));
            at_rail.filter(|a| a.amp_supply_high(rail).holds()).count()
        });
    });
    group.throughput(Throughput::Elements(rows.transistors.len() as u64));
    group.bench_function("transistors", |b| {
        b.iter(|| {
            let at_rail =
                rows.transistors.iter().map(|t| PassFigures::new(&t.figures, &duty, rail));
            at_rail.filter(|t| t.dropout(rail).holds()).count()
        });
    });
    group.finish();
    Ok(())
}

/// Choosing resistors: RZ for every zener and line, then a divider for every reference and line.
fn choose(criterion: &mut Criterion) -> Result<(), SetupError> {
    let made = Made::of(1_000)?;
    let mut group = criterion.benchmark_group("choose");
    group.sample_size(20);
    for name in ["fixed-12v.toml", "adjustable-5-15v.toml"] {
        let sheet = made.sheet(name)?;
        let rows = eligible(&sheet, &made.shop, false, &mut Vec::new());
        let rail = &sheet.rail;
        let zeners: Vec<ZenerAtRail> =
            rows.zeners.iter().take(200).map(|z| ZenerAtRail::new(&z.figures, rail)).collect();
        let lines: Vec<LineAtRail> =
            rows.bias_lines.iter().map(|l| LineAtRail::new(&l.figures, rail)).collect();
        let chosen = || -> Vec<Bias> {
            let pairs = zeners.iter().flat_map(|z| lines.iter().map(move |line| (z, line)));
            pairs.filter_map(|(z, line)| choose_rz(z, line, rail)).map(|(bias, _)| bias).collect()
        };
        if !rail.is_adjustable() {
            group.throughput(Throughput::Elements((zeners.len() * lines.len()) as u64));
            group.bench_function("rz", |b| b.iter(|| black_box(chosen()).len()));
        }
        let aim = Aim::of(rail);
        let pots: Vec<PotAtRail> =
            rows.pots.iter().map(|p| PotAtRail::new(&p.figures, rail)).collect();
        let pots: Vec<Option<&PotAtRail>> =
            if pots.is_empty() { vec![None] } else { pots.iter().map(Some).collect() };
        let references: Vec<Bias> = chosen().into_iter().take(100).collect();
        group
            .throughput(Throughput::Elements((references.len() * lines.len() * pots.len()) as u64));
        let form = if rail.is_adjustable() { "divider-adjustable" } else { "divider-fixed" };
        group.bench_function(form, |b| {
            b.iter(|| {
                let mut found = 0;
                for bias in &references {
                    for line in &lines {
                        for pot in &pots {
                            let choice = choose_divider(&aim, bias, line, *pot, rail);
                            found += usize::from(choice.divider().is_some());
                        }
                    }
                }
                found
            });
        });
    }
    group.finish();
    Ok(())
}

/// Ranking: the ten best of all combinations.
fn ranking(criterion: &mut Criterion) -> Result<(), SetupError> {
    let mut group = criterion.benchmark_group("shortlist");
    group.sample_size(10).measurement_time(Duration::from_secs(3));
    for rows in [100, 1_000, 10_000] {
        let made = Made::of(rows)?;
        for name in ["fixed-12v.toml", "adjustable-5-15v.toml", "impossible.toml"] {
            let sheet = made.sheet(name)?;
            let eligible = eligible(&sheet, &made.shop, false, &mut Vec::new());
            let problem = eligible.problem();
            let id = BenchmarkId::new(name.trim_end_matches(".toml"), rows);
            group.bench_function(id, |b| b.iter(|| shortlist(&problem, TOP, &NO_SPREAD).is_ok()));
        }
    }
    group.finish();
    Ok(())
}

/// The whole front, and exact counts.
fn whole(criterion: &mut Criterion) -> Result<(), SetupError> {
    let mut group = criterion.benchmark_group("whole");
    group.sample_size(10).measurement_time(Duration::from_secs(3));
    for rows in [100, 1_000] {
        let made = Made::of(rows)?;
        for name in ["fixed-12v.toml", "adjustable-5-15v.toml"] {
            let sheet = made.sheet(name)?;
            let eligible = eligible(&sheet, &made.shop, false, &mut Vec::new());
            let problem: Problem<'_> = eligible.problem();
            let name = name.trim_end_matches(".toml");
            group.bench_function(BenchmarkId::new(format!("front/{name}"), rows), |b| {
                b.iter(|| select::front::front(&problem).map_or(0, |front| front.len()));
            });
            if rows == 100 && !sheet.rail.is_adjustable() {
                group.bench_function(BenchmarkId::new(format!("count/{name}"), rows), |b| {
                    b.iter(|| select::count::count(&problem, &|_| ()).feasible);
                });
            }
        }
    }
    group.finish();
    Ok(())
}

fn main() -> ExitCode {
    let mut criterion = Criterion::default().configure_from_args();
    for group in [read, prepare, choose, ranking, whole] {
        if let Err(error) = group(&mut criterion) {
            eprintln!("cannot be measured: {error}");
            return ExitCode::from(2);
        }
    }
    criterion.final_summary();
    ExitCode::SUCCESS
}
