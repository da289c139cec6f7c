//! `railwright substitute`

use super::{Answer, Fault};
use crate::arguments::{Catalogs, Showing};
use crate::desk::Desk;
use crate::files::{Format, Target, check, write_whole};
use crate::progress::watched;
use crate::screen::Screen;
use circuit::slot::Slot;
use clap::Args;
use design::parts::Parts;
use eligible::{eligible, kind_of};
use notice::has_errors;
use reasons::names::{Entry, Unknown, look_up};
use reasons::part::why_not;
use report::notices::Warnings;
use report::substitute::{Run, Subject, Substitution, json, note, tables, terminal};
use report::{table, workbook};
use sheet::Sheet;
use std::path::PathBuf;
use substitute::desk::{Desk as SheetDesk, Names};
use substitute::replace::{Until, replacements};

/// Rows of a list where nothing else is asked for.
const USUAL_ROWS: usize = 10;

/// Find what can go into a design in place of a part that is gone
///
/// Takes the design as built. With --with: does it hold with that part and nothing else changed; if not,
/// with other values from the same lines of resistors; if not, with the fewest further parts. Without:
/// every part that can go in, the smallest change first. Nothing smaller is overlooked: every change of
/// the same size is looked at, and the answer says how far. A part of the same number from another maker
/// is told with every cell in which the two differ.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// The design (TOML)
    design: PathBuf,
    /// The part that is gone: a part of every maker, or maker/part
    #[arg(long = "for", value_name = "PART")]
    gone: String,
    /// The part that is to go in
    #[arg(long, value_name = "PART")]
    with: Option<String>,
    /// Rows of the list
    #[arg(long, value_name = "N", default_value_t = USUAL_ROWS, value_parser = at_least_one)]
    top: usize,
    /// The row of the list that the change note is for
    #[arg(long, value_name = "RANK", default_value_t = 1, value_parser = at_least_one)]
    pick: usize,
    /// Check against this rail sheet, whatever the design says
    #[arg(long, value_name = "SHEET")]
    sheet: Option<PathBuf>,
    #[command(flatten)]
    catalogs: Catalogs,
    /// Set a value of the sheet for this run, for example load.max_a=1.5
    #[arg(long, value_name = "KEY=VALUE")]
    set: Vec<String>,
    /// Write a file as well: the list as .csv, .xlsx or .json, a change note as .md
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
  railwright substitute catalogs-sample/designs/tide-gauge-kept.toml --for FNK314 \\
      --catalogs catalogs-sample
  railwright substitute catalogs-sample/designs/tide-gauge-kept.toml --for QK9V1-2 \\
      --with QK6V2-2 --catalogs catalogs-sample

Exit status: 0 where something can go in, 1 where nothing can, 2 where the design, its sheet, a
catalog or the command line is at fault.";

/// The formats that are written.
const FORMATS: [Format; 4] = [Format::Json, Format::Csv, Format::Xlsx, Format::Md];

fn target(text: &str) -> Result<Target, String> {
    Target::read(text, &FORMATS)
}

/// A whole number from 1 on.
pub(super) fn at_least_one(text: &str) -> Result<usize, String> {
    match text.parse() {
        Ok(number) if number > 0 => Ok(number),
        _ => Err("write a whole number from 1 on".to_owned()),
    }
}

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    check(arguments.out.iter().map(|target| target.path.as_path()), arguments.overwrite)?;
    let mut notices = Vec::new();
    let Arguments { catalogs, sheet, set, .. } = arguments;
    let read = Desk::new(catalogs, sheet.as_deref(), set, &mut notices).and_then(|mut desk| {
        let read = desk.read(&arguments.design, &mut notices).ok()?;
        Some((desk, read))
    });
    let found = read.as_ref().and_then(|(desk, read)| Some((desk, read, desk.evidence(read)?)));
    let Some((designs, read, evidence)) = found else {
        screen.tell(&notices, Warnings::FewOfAKind);
        return Err(Fault::Told);
    };
    let boards = read.design.boards.unwrap_or(evidence.sheet.boards);
    let sheet = Sheet { boards, ..evidence.sheet.clone() };
    let rows = eligible(&sheet, &designs.shop, catalogs.skip_broken_rows, &mut notices);
    let parts = Parts::find(&read.design, &designs.shop, &sheet.rail, &mut notices);
    screen.tell(&notices, Warnings::FewOfAKind);
    let Some(parts) = parts.filter(|_| !has_errors(&notices)) else { return Err(Fault::Told) };

    let gone = Names(vec![arguments.gone.clone()]);
    let with = named(arguments, designs, &parts, &gone).map_err(|told| {
        screen.say(&format!("error: {told}"));
        Fault::Told
    })?;
    let desk = SheetDesk::new(rows);
    let with_names = with.as_ref().map(|entry| Names(vec![full_name(entry)]));
    let case = desk.case(&parts, &gone, with_names.as_ref());
    if let Some(entry) = &with
        && Slot::ALL.into_iter().any(|slot| case.is_gone(slot) && case.places(slot).is_empty())
    {
        return barred(entry, &desk, designs, screen);
    }
    let found = watched("looking for replacements", screen.shows_progress(), |_| {
        replacements(&case, Until::Found(if with.is_some() { 1 } else { arguments.top }))
    });
    let alone = with.as_ref().and_then(|_| desk.exchanged(&parts, &case));
    let subject = Subject {
        file: &read.design.file,
        name: &read.design.name,
        sheet_file: evidence.sheet_file.0,
        parts: &parts,
        desk: &desk,
    };
    let run = Run { set: set.clone(), catalogs_sha256: designs.hashes() };
    let told = Substitution::new(
        &subject,
        (&gone, with_names.as_ref()),
        alone.as_ref(),
        (&found, arguments.top),
        &run,
    );
    let all_written = write(arguments, &told, screen)?;
    let text = terminal::substitution(&told, &screen.data);
    screen.show(&text).map_err(|e| Fault::Defect(format!("standard output: {e}")))?;
    Ok(if found.list.is_empty() || !all_written { Answer::No } else { Answer::Done })
}

/// The row that is to go in; None where none is named.
///
/// # Errors
/// A sentence on what is wrong with the names, that of the part that is gone among them.
fn named(
    arguments: &Arguments,
    designs: &Desk<'_>,
    parts: &Parts<'_>,
    gone: &Names,
) -> Result<Option<Entry>, String> {
    let places = parts.places();
    let slots: Vec<Slot> =
        places.iter().filter(|p| gone.mean(p.maker, p.part)).map(|p| p.slot).collect();
    if slots.is_empty() {
        let used: Vec<String> = places.iter().map(|place| place.full_name()).collect();
        let message = format!("the design does not use `{}`; it uses ", arguments.gone);
        return Err(message + &used.join(", "));
    }
    let Some(name) = &arguments.with else { return Ok(None) };
    let entries = look_up(name, &designs.shop).map_err(|Unknown { text, nearest }| {
        let mend = nearest.map(|name| format!("; did you mean `{name}`?")).unwrap_or_default();
        format!("no catalog holds a part `{text}`{mend}")
    })?;
    let kind_of_gone: Vec<_> = slots.iter().map(|slot| kind_of(*slot)).collect();
    let is_of_kind = |entry: &&Entry| kind_of_gone.iter().all(|kind| *kind == entry.kind);
    let mut fitting: Vec<&Entry> = entries.iter().filter(is_of_kind).collect();
    if fitting.is_empty() {
        let files: Vec<&str> = kind_of_gone.iter().map(|kind| kind.file_name()).collect();
        return Err(format!("`{name}` is no part of {}", files.join(", ")));
    }
    fitting.retain(|entry| !gone.mean(&entry.maker, &entry.part));
    match fitting.as_slice() {
        [] => Err(format!("`{name}` is the part that is gone")),
        [only] => Ok(Some((*only).clone())),
        several => {
            let names: Vec<String> =
                several.iter().map(|entry| format!("`{}`", full_name(entry))).collect();
            Err(format!("several makers have a part `{name}`: name one of {}", names.join(", ")))
        }
    }
}

fn full_name(entry: &Entry) -> String {
    match entry.maker.as_str() {
        "" => entry.part.clone(),
        maker => format!("{maker}/{}", entry.part),
    }
}

/// A part that may not be chosen: why not.
fn barred(
    entry: &Entry,
    desk: &SheetDesk<'_>,
    designs: &Desk<'_>,
    screen: &Screen,
) -> Result<Answer, Fault> {
    let sheet: &Sheet = desk.eligible.sheet;
    let reasons = why_not(entry, &desk.eligible, &desk.ground.problem).map_err(Fault::Search)?;
    let text = report::reasons::part(entry, &reasons, sheet, &designs.shop, &screen.data);
    screen.show(&text).map_err(|e| Fault::Defect(format!("standard output: {e}")))?;
    Ok(Answer::No)
}

/// Writes the files that are asked for. False where the row of a change note is not there.
fn write(arguments: &Arguments, told: &Substitution, screen: &Screen) -> Result<bool, Fault> {
    let defect = |what: &dyn std::fmt::Display| Fault::Defect(what.to_string());
    let mut all = true;
    for target in &arguments.out {
        let path = &target.path;
        let bytes = match target.format {
            Format::Json => json(told).map_err(|e| defect(&e))?,
            Format::Csv => {
                table::csv::table(&tables::replacements(told)).map_err(|e| defect(&e))?
            }
            Format::Xlsx => workbook::document(&tables::document(told)).map_err(|e| defect(&e))?,
            Format::Html => return Err(Fault::Defect("substitutes have no page".to_owned())),
            Format::Md => match told.replacements.get(arguments.pick - 1) {
                Some(mend) => note::note(told, mend).into_bytes(),
                None => {
                    let (rows, pick) = (told.replacements.len(), arguments.pick);
                    screen.say(&format!(
                        "error: {} is not written: the list has {rows} rows, and none of rank {pick}",
                        path.display()
                    ));
                    all = false;
                    continue;
                }
            },
        };
        write_whole(path, &bytes, arguments.overwrite)?;
        screen.mention(&format!("wrote {}", path.display()));
    }
    Ok(all)
}
