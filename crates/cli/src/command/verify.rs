//! `railwright verify`

use super::{Answer, Fault};
use crate::arguments::{Catalogs, Showing};
use crate::desk::{Desk, OnDesk};
use crate::files::{Format, Target, check, write_whole};
use crate::order_lines::of_design;
use crate::page;
use crate::screen::Screen;
use clap::Args;
use report::notices::Warnings;
use report::proof::{self, Verification};
use report::purchase::lines::RailLines;
use report::table::Document;
use report::{dossier, markdown, workbook};
use std::path::PathBuf;

/// Check designs as they are: every check with its formula, numbers and sources
///
/// Reads each design with the rail sheet that it names, finds its parts in the catalogs (or takes the
/// figures that the design itself gives for a part that no catalog holds), and makes every check with the
/// resistors as fitted: nothing is chosen again. One design is shown with its whole proof, each formula
/// with the numbers put in and each number with its source. Of several there is a line each, then what
/// fails. Catalog cells that have changed since a design was kept are told.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// The designs to check (TOML)
    #[arg(required = true, value_name = "DESIGN")]
    designs: Vec<PathBuf>,
    /// Check against this rail sheet, whatever the designs say
    #[arg(long, value_name = "SHEET")]
    sheet: Option<PathBuf>,
    #[command(flatten)]
    catalogs: Catalogs,
    /// Set a value of the sheet for this run, for example load.max_a=1.5
    #[arg(long, value_name = "KEY=VALUE")]
    set: Vec<String>,
    /// Write the proofs to a file as well: .html with pictures, .xlsx and .md with order lines, or .json;
    /// may be given several times
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
  railwright verify catalogs-sample/designs/tide-gauge-kept.toml \\
      --catalogs catalogs-sample
  railwright verify catalogs-sample/designs/*.toml \\
      --catalogs catalogs-sample --set ambient.max_c=40

Exit status: 0 where every design holds, 1 where a check or condition of one fails, 2 where a
design, its sheet, a catalog or the command line is at fault; other designs are checked all the
same.";

/// The formats that are written.
const FORMATS: [Format; 4] = [Format::Json, Format::Xlsx, Format::Md, Format::Html];

fn target(text: &str) -> Result<Target, String> {
    Target::read(text, &FORMATS)
}

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    check(arguments.out.iter().map(|target| target.path.as_path()), arguments.overwrite)?;
    let mut notices = Vec::new();
    let Arguments { catalogs, sheet, set, .. } = arguments;
    let desk = Desk::new(catalogs, sheet.as_deref(), set, &mut notices);
    let Some(mut desk) = desk else {
        screen.tell(&notices, Warnings::FewOfAKind);
        return Err(Fault::Told);
    };
    let mut designs = Vec::new();
    let mut on_desk = Vec::new();
    for path in &arguments.designs {
        let mut found = Vec::new();
        let read = desk.read(path, &mut found);
        designs.push(desk.proof(path, &read, &mut found));
        on_desk.push(read);
        notices.append(&mut found);
    }
    screen.tell(&notices, Warnings::FewOfAKind);
    let verification = Verification {
        format: proof::FORMAT,
        currency: desk.shop_file.currency.clone(),
        set: set.clone(),
        catalogs_sha256: desk.hashes(),
        designs,
    };

    for target in &arguments.out {
        let in_tables = || in_tables(&verification, &desk, &on_desk);
        let bytes = match target.format {
            Format::Json => proof::json(&verification).map_err(|e| Fault::Defect(e.to_string()))?,
            Format::Html => page::of_designs(&verification, &desk, &on_desk, screen)?,
            Format::Xlsx => {
                workbook::document(&in_tables()).map_err(|e| Fault::Defect(e.to_string()))?
            }
            Format::Md => markdown::document(&in_tables()).into_bytes(),
            Format::Csv => return Err(Fault::Defect("no CSV of proofs".to_owned())),
        };
        write_whole(&target.path, &bytes, arguments.overwrite)?;
        screen.mention(&format!("wrote {}", target.path.display()));
    }
    let text = proof::terminal::verification(&verification, &screen.data);
    screen.show(&text).map_err(|e| Fault::Defect(format!("standard output: {e}")))?;
    let any = |answer| verification.designs.iter().any(|d| d.answer == answer);
    if any(proof::Answer::Broken) {
        Err(Fault::Told)
    } else if any(proof::Answer::Fails) || any(proof::Answer::Unproven) {
        Ok(Answer::No)
    } else {
        Ok(Answer::Done)
    }
}

/// The proofs with their order lines, as tables for one file.
fn in_tables(
    verification: &Verification,
    desk: &Desk<'_>,
    on_desk: &[Result<OnDesk, Option<String>>],
) -> Document {
    let readable = on_desk.iter().filter_map(|read| read.as_ref().ok());
    let lines: Vec<RailLines> = readable.filter_map(|design| of_design(design, desk)).collect();
    dossier::designs::document(verification, &lines)
}
