//! `railwright order`

use super::{Answer, Fault};
use crate::arguments::{Catalogs, Showing};
use crate::desk::{Desk, OnDesk};
use crate::files::{Format, Target, check, write_whole};
use crate::screen::Screen;
use clap::Args;
use design::parts::Parts;
use purchase::order::{Need, Order};
use purchase::piece;
use report::notices::Warnings;
use report::proof;
use report::purchase::{self as told, Frame, PurchaseList, Rail, list, screen};
use report::{markdown, table, workbook};
use std::path::PathBuf;

/// One purchase list over several rails
///
/// Adds up the pieces of all designs, part by part, and prices each part at the break that they reach
/// together. Tells stock and lead time, which rail needs what, and what each rail would cost by itself.
/// The designs are checked as `verify` checks them: a list for a design that does not hold says so. A
/// part without a price is listed and left out of the sum; a stock that does not reach is marked.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// The designs to buy for (TOML)
    #[arg(required = true, value_name = "DESIGN")]
    designs: Vec<PathBuf>,
    /// Boards to build of every design [default: what each design, or else its sheet, says]
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(u64).range(1..))]
    boards: Option<u64>,
    #[command(flatten)]
    catalogs: Catalogs,
    /// Set a value of every sheet for this run, for example load.max_a=1.5
    #[arg(long, value_name = "KEY=VALUE")]
    set: Vec<String>,
    /// Write the list to a file as well: .xlsx, .csv, .md or .json; may be given several times
    #[arg(long, value_name = "FILE", value_parser = target)]
    out: Vec<Target>,
    /// Replace files that are there already
    #[arg(long)]
    overwrite: bool,
    #[command(flatten)]
    pub(super) showing: Showing,
}

const EXAMPLES: &str = "\
Examples, on the sample catalogs:
  railwright order catalogs-sample/designs/tide-gauge-kept.toml \\
      catalogs-sample/designs/mast-kept.toml --catalogs catalogs-sample
  railwright order catalogs-sample/designs/jetty-kept.toml \\
      catalogs-sample/designs/sensor-kept.toml --boards 60 --catalogs catalogs-sample

Exit status: 0 where the list is made, 1 where it is made but a check or condition of a design fails,
2 where a design, its sheet, a catalog or the command line is at fault: then there is no list.";

/// The formats that are written.
const FORMATS: [Format; 4] = [Format::Json, Format::Csv, Format::Xlsx, Format::Md];

fn target(text: &str) -> Result<Target, String> {
    Target::read(text, &FORMATS)
}

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    check(arguments.out.iter().map(|target| target.path.as_path()), arguments.overwrite)?;
    let mut notices = Vec::new();
    let desk = Desk::new(&arguments.catalogs, None, &arguments.set, &mut notices);
    let Some(mut desk) = desk else {
        screen.tell(&notices, Warnings::FewOfAKind);
        return Err(Fault::Told);
    };
    let mut ready = Vec::new();
    for path in &arguments.designs {
        let mut found = Vec::new();
        let read = desk.read(path, &mut found);
        let answer = desk.proof(path, &read, &mut found).answer;
        ready.extend(read.ok().map(|design| (design, answer)));
        notices.append(&mut found);
    }
    screen.tell(&notices, Warnings::FewOfAKind);
    let wanted: Option<Vec<(Need<'_>, Rail)>> =
        ready.iter().enumerate().map(|(place, on)| wanted(place, on, arguments, &desk)).collect();
    // A list that lacks a rail would be bought from all the same.
    let wanted = wanted.filter(|wanted| wanted.len() == arguments.designs.len());
    let Some(wanted) = wanted else { return Err(Fault::Told) };
    let (needs, rails): (Vec<_>, Vec<_>) = wanted.into_iter().unzip();
    let frame = Frame {
        currency: desk.shop_file.currency.clone(),
        boards: arguments.boards,
        set: arguments.set.clone(),
        catalogs_sha256: desk.hashes(),
    };
    let list = PurchaseList::new(frame, &Order::new(&needs), rails);

    for target in &arguments.out {
        write_whole(&target.path, &in_format(&list, target.format)?, arguments.overwrite)?;
        screen.mention(&format!("wrote {}", target.path.display()));
    }
    let text = screen::list(&list, &screen.data);
    screen.show(&text).map_err(|e| Fault::Defect(format!("standard output: {e}")))?;
    let all_hold = list.rails.iter().all(|rail| rail.answer == proof::Answer::Holds);
    Ok(if all_hold { Answer::Done } else { Answer::No })
}

/// What a design needs; None where it is broken.
fn wanted<'a>(
    place: usize,
    (on_desk, answer): &'a (OnDesk, proof::Answer),
    arguments: &Arguments,
    desk: &'a Desk<'_>,
) -> Option<(Need<'a>, Rail)> {
    let evidence = desk.evidence(on_desk)?;
    let (design, sheet) = (&on_desk.design, evidence.sheet);
    // What is wrong with its names has been told with its proof.
    let parts = Parts::find(design, evidence.shop, &sheet.rail, &mut Vec::new())?;
    let boards = arguments.boards.or(design.boards).unwrap_or(sheet.boards);
    let pieces = piece::of_design(&parts, sheet.rail.is_adjustable(), place);
    let rail = Rail {
        name: design.name.clone(),
        file: design.file.clone(),
        sheet: evidence.sheet_file.0.to_owned(),
        answer: *answer,
        boards,
    };
    Some((Need { boards, pieces }, rail))
}

fn in_format(list: &PurchaseList, format: Format) -> Result<Vec<u8>, Fault> {
    match format {
        Format::Json => told::json(list).map_err(|e| Fault::Defect(e.to_string())),
        Format::Csv => {
            table::csv::table(&list::lines(list)).map_err(|e| Fault::Defect(e.to_string()))
        }
        Format::Xlsx => {
            workbook::document(&list::document(list)).map_err(|e| Fault::Defect(e.to_string()))
        }
        Format::Md => Ok(markdown::document(&list::document(list)).into_bytes()),
        // Not among the formats above.
        Format::Html => Err(Fault::Defect("a purchase list has no page".to_owned())),
    }
}
