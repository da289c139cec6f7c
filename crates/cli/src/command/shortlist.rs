//! `railwright shortlist`

use super::{Answer, Fault};
use crate::arguments::{Catalogs, Showing, SpreadLimit};
use crate::files::{Format, Target, check, folder_of, write_whole};
use crate::load::sheet_and_parts;
use crate::order_lines::of_candidate;
use crate::page::{self, Listed};
use crate::progress::watched;
use crate::screen::Screen;
use clap::{Args, ValueEnum};
use eligible::Eligible;
use report::certificate::Asked;
use report::dossier::shortlist::{Ordered, document};
use report::shortlist::{Shortlist, lost};
use report::{design, json, markdown, ranking_csv, terminal, workbook};
use select::candidate::Candidate;
use select::certificate;
use select::count::{Counts, count};
use select::front::front;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist, spread_out};
use sheet::{Assumed, Sheet, Weights};
use std::path::{Path, PathBuf};

/// Rank the sets of parts that hold for a rail
///
/// Covers every combination of zener, bias resistor, amplifier, divider, pass transistor and heatsink
/// that the catalogs hold, chooses the resistor values, makes every check at the worst corner of
/// tolerance, temperature and fault, and ranks what holds by cost, loss and stress.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// The rail sheet: what is wanted (TOML)
    sheet: PathBuf,
    #[command(flatten)]
    catalogs: Catalogs,
    /// Rows to show [default: 10, or the whole front]
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(u32).range(1..))]
    top: Option<u32>,
    /// Show the front instead: what nothing beats on cost, loss and stress at once
    #[arg(long)]
    front: bool,
    /// Rank by one criterion alone
    #[arg(long, value_name = "CRITERION")]
    by: Option<Criterion>,
    /// Show at most N rows with the same part in a slot; may be given for several slots
    #[arg(long, value_name = "SLOT=N")]
    spread: Vec<SpreadLimit>,
    /// Set a value of the sheet for this run, for example load.max_a=1.5
    #[arg(long, value_name = "KEY=VALUE")]
    set: Vec<String>,
    /// Count exactly how many combinations hold, and what the others are lost to
    #[arg(long)]
    count: bool,
    /// Save a candidate, named by its rank or id, as a design file
    #[arg(long, value_name = "RANK|ID", requires = "as_file")]
    keep: Option<String>,
    /// The design file to save it as
    #[arg(long = "as", id = "as_file", value_name = "FILE", requires = "keep")]
    as_file: Option<PathBuf>,
    /// Write the list to a file as well: .html with pictures and proofs, .xlsx and .md with order lines and
    /// every check, .csv with the ranking, or .json; may be given several times
    #[arg(long, value_name = "FILE", value_parser = target)]
    out: Vec<Target>,
    /// The candidate that order lines are for, by its rank or id [default: the first]
    #[arg(long, value_name = "RANK|ID", requires = "out")]
    pick: Option<String>,
    /// Write a certificate beside the list: claims that show that it left nothing better out, for the
    /// checker `certificate-check`
    #[arg(long, value_name = "FILE", conflicts_with_all = ["front", "spread"])]
    certificate: Option<PathBuf>,
    /// Replace files that are there already
    #[arg(long)]
    overwrite: bool,
    #[command(flatten)]
    pub(super) showing: Showing,
}

const EXAMPLES: &str = "\
Examples, on the sample catalogs:
  railwright shortlist catalogs-sample/sheets/tide-gauge-12v.toml \\
      --catalogs catalogs-sample
  railwright shortlist catalogs-sample/sheets/bench-5-15v.toml \\
      --catalogs catalogs-sample --by cost --spread pass=1 --count

Exit status: 0 where a set of parts holds, 1 where none does or --keep or --pick names no row, 2 where the input
or the command line is at fault.";

/// The formats that are written.
const FORMATS: [Format; 5] = [Format::Json, Format::Csv, Format::Xlsx, Format::Md, Format::Html];

fn target(text: &str) -> Result<Target, String> {
    Target::read(text, &FORMATS)
}

/// One criterion of the score.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
enum Criterion {
    /// What one board costs
    Cost,
    /// Power lost for each watt delivered
    Loss,
    /// The greatest use that is made of a limit whose crossing damages a part
    Stress,
}

impl Criterion {
    const fn name(self) -> &'static str {
        match self {
            Criterion::Cost => "cost",
            Criterion::Loss => "loss",
            Criterion::Stress => "stress",
        }
    }
}

impl Arguments {
    /// How many rows are asked for.
    fn rows(&self) -> usize {
        self.top.and_then(|rows| usize::try_from(rows).ok()).unwrap_or(USUAL_ROWS)
    }
}

/// Rows that are shown where nothing else is asked for.
const USUAL_ROWS: usize = 10;

/// Up to so many digits of combinations are counted without being asked, where nothing qualifies:
/// the count then takes a moment at most.
const QUICKLY_COUNTED: usize = 9;

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    let outputs = arguments.out.iter().map(|target| target.path.as_path());
    let others = [arguments.as_file.as_deref(), arguments.certificate.as_deref()];
    check(outputs.chain(others.into_iter().flatten()), arguments.overwrite)?;

    let (loaded, eligible) =
        sheet_and_parts(&arguments.sheet, &arguments.catalogs, &arguments.set, screen, |loaded| {
            if let Some(criterion) = arguments.by {
                rank_by(criterion, &mut loaded.sheet);
            }
        })?;

    let problem = eligible.problem();
    let candidates = found(arguments, &problem, screen)?;
    let counts = counted(arguments, &problem, candidates.is_empty(), screen);
    let asked_for = counts.as_ref().filter(|_| arguments.count);
    let list = Shortlist::new(loaded.files(), &eligible, &problem, &candidates, asked_for)
        .map_err(|e| Fault::Defect(e.to_string()))?;

    let listed = Listed { list: &list, candidates: &candidates, eligible: &eligible };
    let in_page = || page::of_list(&listed, loaded, &problem, screen);
    let written = write(arguments, &listed, &in_page, screen)?;
    if let Some(path) = &arguments.certificate {
        certify(arguments, &problem, &candidates, &list, path)?;
        screen.mention(&format!("wrote {}", path.display()));
    }
    let kept = keep(arguments, &list, &eligible, &loaded.sheet_path, screen)?;
    let text = terminal::shortlist(&list, counts.as_ref().map(lost).as_ref(), &screen.data);
    screen.show(&text).map_err(|e| Fault::Defect(format!("standard output: {e}")))?;
    let is_no = list.candidates.is_empty() || written == Answer::No;
    Ok(if is_no { Answer::No } else { kept })
}

/// Sets one weight to 1 and the others to 0, and says so among what is assumed.
fn rank_by(criterion: Criterion, sheet: &mut Sheet) {
    let weight = |of: Criterion| if of == criterion { 1.0 } else { 0.0 };
    sheet.weights = Weights {
        cost: weight(Criterion::Cost),
        loss: weight(Criterion::Loss),
        stress: weight(Criterion::Stress),
    };
    let keys = [
        (&sheet::keys::RANK_COST, sheet.weights.cost),
        (&sheet::keys::RANK_LOSS, sheet.weights.loss),
        (&sheet::keys::RANK_STRESS, sheet.weights.stress),
    ];
    sheet.assumed.retain(|assumed| !keys.iter().any(|(key, _)| key.name == assumed.key));
    sheet.assumed.extend(keys.map(|(key, weight)| Assumed {
        key: key.name.to_owned(),
        value: format!("{weight} (by --by)"),
    }));
}

/// The candidates that are to be shown, in the order of their ranks.
fn found(
    arguments: &Arguments,
    problem: &Problem<'_>,
    screen: &Screen,
) -> Result<Vec<Candidate>, Fault> {
    let mut spread = NO_SPREAD;
    for limit in &arguments.spread {
        spread[limit.slot as usize] = Some(limit.rows);
    }
    let top = arguments.top.and_then(|rows| usize::try_from(rows).ok());
    watched("searching", screen.shows_progress(), |_| {
        if arguments.front {
            let whole = front(problem)?;
            let mut rows = spread_out(&whole, &spread);
            rows.truncate(top.unwrap_or(usize::MAX));
            Ok(rows)
        } else {
            shortlist(problem, arguments.rows(), &spread)
        }
    })
    .map_err(Fault::Search)
}

/// The counts where they are asked for, or where they say why nothing qualifies and cost little.
fn counted(
    arguments: &Arguments,
    problem: &Problem<'_>,
    is_empty: bool,
    screen: &Screen,
) -> Option<Counts> {
    let quick = || problem.covered().to_string().len() <= QUICKLY_COUNTED;
    let wanted = arguments.count || (is_empty && quick());
    wanted.then(|| watched("counting", screen.shows_progress(), |tell| count(problem, tell)))
}

/// Writes the certificate of the list.
fn certify(
    arguments: &Arguments,
    problem: &Problem<'_>,
    candidates: &[Candidate],
    list: &Shortlist<'_>,
    path: &Path,
) -> Result<(), Fault> {
    let top = arguments.rows();
    let claims = certificate::certify(problem, candidates, top).map_err(Fault::Certificate)?;
    let asked = Asked {
        by: arguments.by.map(Criterion::name),
        skip_broken_rows: arguments.catalogs.skip_broken_rows,
        top,
    };
    let text = report::certificate::certificate(list, &claims, asked)
        .map_err(|e| Fault::Defect(e.to_string()))?;
    Ok(write_whole(path, &text, arguments.overwrite)?)
}

/// Writes the files that are asked for; No, and no file with order lines, where --pick names no row.
fn write(
    arguments: &Arguments,
    listed: &Listed<'_>,
    in_page: &impl Fn() -> Result<Vec<u8>, Fault>,
    screen: &Screen,
) -> Result<Answer, Fault> {
    let Listed { list, candidates, eligible } = *listed;
    let name = arguments.pick.as_deref().unwrap_or("1");
    let picked = list.named(name);
    let mut answer = Answer::Done;
    for target in &arguments.out {
        let has_lines = matches!(target.format, Format::Xlsx | Format::Md);
        if has_lines && picked.is_none() && arguments.pick.is_some() {
            let path = target.path.display();
            screen.say(&format!("error: {path} is not written: {}", no_such_row(list, name)));
            answer = Answer::No;
            continue;
        }
        let ordered = || {
            let candidate = picked?;
            let lines = of_candidate(eligible, candidates.get(candidate.rank.checked_sub(1)?)?)?;
            Some(Ordered { candidate, lines })
        };
        let in_tables = || document(list, ordered().as_ref());
        let bytes = match target.format {
            Format::Json => json::shortlist(list).map_err(|e| Fault::Defect(e.to_string()))?,
            Format::Csv => ranking_csv::ranking(list).map_err(|e| Fault::Defect(e.to_string()))?,
            Format::Xlsx => {
                workbook::document(&in_tables()).map_err(|e| Fault::Defect(e.to_string()))?
            }
            Format::Md => markdown::document(&in_tables()).into_bytes(),
            Format::Html => in_page()?,
        };
        write_whole(&target.path, &bytes, arguments.overwrite)?;
        screen.mention(&format!("wrote {}", target.path.display()));
    }
    Ok(answer)
}

/// Saves the design that is asked for; No where the list has no such row.
fn keep(
    arguments: &Arguments,
    list: &Shortlist<'_>,
    eligible: &Eligible<'_>,
    sheet_path: &Path,
    screen: &Screen,
) -> Result<Answer, Fault> {
    let (Some(name), Some(path)) = (&arguments.keep, &arguments.as_file) else {
        return Ok(Answer::Done);
    };
    let Some(candidate) = list.named(name) else {
        screen.say(&format!("error: nothing is saved: {}", no_such_row(list, name)));
        return Ok(Answer::No);
    };
    let sheet = relative(sheet_path, folder_of(path));
    let text = design::to_toml(list, candidate, &sheet, eligible.shop);
    write_whole(path, text.as_bytes(), arguments.overwrite)?;
    screen.mention(&format!("saved {} ({}) as {}", candidate.rank, candidate.id, path.display()));
    Ok(Answer::Done)
}

/// That a name is no rank or id of the list.
fn no_such_row(list: &Shortlist<'_>, name: &str) -> String {
    let rows = list.candidates.len();
    format!("the list has {rows} rows, and none with the rank or id `{name}`; --top N shows more")
}

/// The path of a file as seen from a folder, with `/` between its parts; as it is where no way leads
/// from one to the other.
fn relative(file: &Path, folder: &Path) -> String {
    let whole = |path: &Path| path.canonicalize().ok();
    let between = whole(file).zip(whole(folder)).and_then(|(f, d)| pathdiff::diff_paths(f, d));
    let path = between.unwrap_or_else(|| file.to_owned());
    path.display().to_string().replace(std::path::MAIN_SEPARATOR, "/")
}
