//! `railwright shortage`

use super::substitute::at_least_one;
use super::{Answer, Fault};
use crate::arguments::{Catalogs, Showing};
use crate::desk::{Desk, OnDesk};
use crate::files::{Format, Target, check, write_whole};
use crate::folder::{Folder, faults};
use crate::progress::watched;
use crate::screen::Screen;
use clap::Args;
use design::parts::Parts;
use eligible::eligible;
use notice::{Notice, Place, has_errors};
use reasons::names::{Unknown, look_up};
use reasons::nothing::why_nothing;
use reasons::probe::ShopMarket;
use report::look::Look;
use report::notices::Warnings;
use report::shortage::exposure::{self, Exposure, PartInUse};
use report::shortage::{self, AffectedDesign, Broken, CoverFound, Shortage, tables, terminal};
use report::substitute::{Subject, json};
use report::table::{Document, Table};
use report::{markdown, table, workbook};
use sheet::{NamedPart, Sheet};
use std::collections::BTreeMap;
use std::path::PathBuf;
use substitute::desk::{Desk as SheetDesk, Names};
use substitute::shortage::{Affected, Entry, affected, cover_all, exposed};

/// Replacements told of each design where nothing else is asked for.
const USUAL_ROWS: usize = 3;

/// Columns of text in which reasons are written to files.
const WIDTH_OF_REASONS: usize = 100;

/// Tell which designs a shortage hits, what can go in instead, and the fewest new parts for all
///
/// Looks through all designs below a folder, each with the rail sheet that it names. Of those that use
/// the parts: the best replacements, and which of them together are the fewest different new parts for
/// all designs, and among those the cheapest over all boards. Where a sheet asks for parts from stock,
/// two designs do not both get the same pieces. Designs that nothing can save come first, with the
/// reason. With --exposed and no parts: every part in use, and how many replacements each design has for it.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// The parts that are gone: a part of every maker, or maker/part
    #[arg(value_name = "PART", required_unless_present = "exposed", conflicts_with = "exposed")]
    parts: Vec<String>,
    /// Folder of designs; those in folders below it are read too
    #[arg(long, value_name = "DIR")]
    designs: PathBuf,
    /// Tell of every part in use how many replacements there are
    #[arg(long)]
    exposed: bool,
    /// Replacements told of each design
    #[arg(long, value_name = "N", default_value_t = USUAL_ROWS, value_parser = at_least_one)]
    top: usize,
    #[command(flatten)]
    catalogs: Catalogs,
    /// Set a value of every sheet for this run, for example ambient.max_c=40
    #[arg(long, value_name = "KEY=VALUE")]
    set: Vec<String>,
    /// Write a file as well: .csv, .xlsx, .json or .md
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
  railwright shortage FNK314 --designs catalogs-sample/designs --catalogs catalogs-sample
  railwright shortage --exposed --designs catalogs-sample/designs --catalogs catalogs-sample

Exit status: 0 where every design can be mended, 1 where one can't, 2 where a design, a sheet, a
catalog or the command line is at fault; other designs are looked at all the same.";

/// The formats that are written.
const FORMATS: [Format; 4] = [Format::Json, Format::Csv, Format::Xlsx, Format::Md];

fn target(text: &str) -> Result<Target, String> {
    Target::read(text, &FORMATS)
}

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    check(arguments.out.iter().map(|target| target.path.as_path()), arguments.overwrite)?;
    let mut notices = Vec::new();
    let read =
        Desk::new(&arguments.catalogs, None, &arguments.set, &mut notices).and_then(|mut desk| {
            let folder = Folder::read(&arguments.designs, &mut desk, &mut notices)?;
            Some((desk, folder))
        });
    let Some((designs, folder)) = read else {
        screen.tell(&notices, Warnings::FewOfAKind);
        return Err(Fault::Told);
    };
    let sheets = Sheets::of(&folder.designs, &designs);
    let mut broken = folder.broken;
    let desks = sheets.desks(&designs, arguments.catalogs.skip_broken_rows, &mut notices);
    let bench = Bench::set(&designs, &folder.designs, &sheets, &desks, &mut broken, &mut notices);
    broken.sort_by(|a, b| a.file.cmp(&b.file));
    screen.tell(&notices, Warnings::FewOfAKind);
    let desks: Vec<SheetDesk<'_>> = desks.into_iter().map(|(desk, _)| desk).collect();
    let run = Run { arguments, designs: &designs, bench: &bench, desks: &desks, broken, screen };
    if arguments.exposed { run.exposed() } else { run.shortage() }
}

/// The sheets that designs name, each for every number of boards that a design builds.
struct Sheets {
    sheets: Vec<Sheet>,
    /// Of each design the place of its sheet, and its name.
    of_design: Vec<(usize, String)>,
}

impl Sheets {
    fn of(designs: &[OnDesk], desk: &Desk<'_>) -> Self {
        let mut sheets = Vec::new();
        let mut places: BTreeMap<(&str, u64), usize> = BTreeMap::new();
        let mut of_design = Vec::new();
        for read in designs {
            let Some(evidence) = desk.evidence(read) else { continue };
            let (name, sheet) = (evidence.sheet_file.0, evidence.sheet);
            let boards = read.design.boards.unwrap_or(sheet.boards);
            let place = *places.entry((name, boards)).or_insert_with(|| {
                sheets.push(Sheet { boards, ..sheet.clone() });
                sheets.len() - 1
            });
            of_design.push((place, name.to_owned()));
        }
        Self { sheets, of_design }
    }

    /// What may be chosen for each sheet, with the faults that were found in doing so.
    fn desks<'a>(
        &'a self,
        designs: &'a Desk<'_>,
        skip_broken_rows: bool,
        notices: &mut Vec<Notice>,
    ) -> Vec<(SheetDesk<'a>, Vec<String>)> {
        let desk = |sheet: &'a Sheet| {
            let mut found = Vec::new();
            let rows = eligible(sheet, &designs.shop, skip_broken_rows, &mut found);
            let at_fault = faults(&found);
            for notice in found {
                if !notices.contains(&notice) {
                    notices.push(notice);
                }
            }
            (SheetDesk::new(rows), at_fault)
        };
        self.sheets.iter().map(desk).collect()
    }
}

/// The designs whose parts were found.
struct Bench<'a> {
    designs: Vec<(&'a OnDesk, &'a str)>,
    entries: Vec<Entry<'a>>,
}

impl<'a> Bench<'a> {
    fn set(
        designs: &'a Desk<'_>,
        read: &'a [OnDesk],
        sheets: &'a Sheets,
        desks: &[(SheetDesk<'a>, Vec<String>)],
        broken: &mut Vec<Broken>,
        notices: &mut Vec<Notice>,
    ) -> Self {
        let mut bench = Self { designs: Vec::new(), entries: Vec::new() };
        for (read, (desk, sheet_name)) in read.iter().zip(&sheets.of_design) {
            let mut found = Vec::new();
            let at_fault = desks.get(*desk).map(|(_, faults)| faults.clone()).unwrap_or_default();
            let Some(sheet) = sheets.sheets.get(*desk) else { continue };
            let parts = Parts::find(&read.design, &designs.shop, &sheet.rail, &mut found);
            match parts.filter(|_| at_fault.is_empty() && !has_errors(&found)) {
                Some(parts) => {
                    bench.designs.push((read, sheet_name));
                    bench.entries.push(Entry { desk: *desk, parts });
                }
                None => {
                    let faults = faults(&found).into_iter().chain(at_fault).collect();
                    broken.push(Broken { file: read.design.file.clone(), faults });
                }
            }
            notices.append(&mut found);
        }
        bench
    }

    fn subject<'s>(&'s self, at: usize, desks: &'s [SheetDesk<'a>]) -> Option<Subject<'s, 'a>> {
        let ((read, sheet_file), entry) = (self.designs.get(at)?, self.entries.get(at)?);
        Some(Subject {
            file: &read.design.file,
            name: &read.design.name,
            sheet_file,
            parts: &entry.parts,
            desk: desks.get(entry.desk)?,
        })
    }
}

/// Everything that a run works with.
struct Run<'r, 'a> {
    arguments: &'r Arguments,
    designs: &'r Desk<'r>,
    bench: &'r Bench<'a>,
    desks: &'r [SheetDesk<'a>],
    broken: Vec<Broken>,
    screen: &'r Screen,
}

impl Run<'_, '_> {
    fn shortage(self) -> Result<Answer, Fault> {
        let gone = Names(self.arguments.parts.clone());
        self.known(&gone)?;
        let (desks, entries) = (self.desks, &self.bench.entries);
        let progress = self.screen.shows_progress();
        let hit = watched("looking for replacements", progress, |tell| {
            affected(desks, entries, &gone, tell)
        });
        let all =
            watched("looking for the fewest parts", progress, |_| cover_all(desks, entries, &hit));
        let subjects: Vec<Subject<'_, '_>> =
            hit.iter().filter_map(|a| self.bench.subject(a.entry, desks)).collect();
        // Of each sheet once.
        let mut reasons: BTreeMap<usize, String> = BTreeMap::new();
        let told = |(hit, subject): (&Affected, &Subject<'_, '_>)| {
            let why = match (hit.found.list.is_empty(), self.bench.entries.get(hit.entry)) {
                (true, Some(entry)) => match reasons.get(&entry.desk) {
                    Some(why) => why.clone(),
                    None => {
                        let why = self.why_nothing(subject)?;
                        reasons.insert(entry.desk, why.clone());
                        why
                    }
                },
                _ => String::new(),
            };
            Ok(AffectedDesign::new(subject, &gone, hit, self.arguments.top, why))
        };
        let designs: Result<Vec<AffectedDesign>, Fault> =
            watched("looking for reasons", progress, |_| {
                hit.iter().zip(&subjects).map(told).collect()
            });
        let mut designs = designs?;
        // A stable sort: otherwise in the order of files.
        designs.sort_by_key(|design| !design.is_lost());
        let cover = CoverFound::new(&all, &hit, &subjects, &gone);
        let left_out = cover.as_ref().is_some_and(|cover| !cover.left_out.is_empty());
        let told = Shortage {
            format: shortage::FORMAT,
            folder: self.arguments.designs.display().to_string(),
            gone: gone.0,
            currency: self.designs.shop_file.currency.clone(),
            set: self.arguments.set.clone(),
            catalogs_sha256: self.designs.hashes(),
            read: self.bench.designs.len(),
            broken: self.broken,
            designs,
            cover,
        };
        let document = tables::document(&told);
        let text = terminal::shortage(&told, &self.screen.data);
        write(self.arguments, &told, &tables::designs(&told), &document, self.screen)?;
        show(self.screen, &text)?;
        let lost = left_out || told.designs.iter().any(AffectedDesign::is_lost);
        answer(lost, &told.broken)
    }

    fn exposed(self) -> Result<Answer, Fault> {
        let parts = watched("looking for replacements", self.screen.shows_progress(), |tell| {
            exposed(self.desks, &self.bench.entries, tell)
        });
        let files: Vec<&str> =
            self.bench.designs.iter().map(|(read, _)| read.design.file.as_str()).collect();
        let told = Exposure {
            format: exposure::FORMAT,
            folder: self.arguments.designs.display().to_string(),
            set: self.arguments.set.clone(),
            catalogs_sha256: self.designs.hashes(),
            read: self.bench.designs.len(),
            broken: self.broken,
            parts: parts.iter().map(|part| PartInUse::new(part, &files)).collect(),
        };
        let document = exposure::document(&told);
        let text = exposure::terminal(&told, &self.screen.data);
        write(self.arguments, &told, &exposure::table(&told), &document, self.screen)?;
        show(self.screen, &text)?;
        answer(false, &told.broken)
    }

    /// Every name means a part of some catalog or design.
    fn known(&self, gone: &Names) -> Result<(), Fault> {
        let mut unknown = false;
        for name in &gone.0 {
            let one = Names(vec![name.clone()]);
            let is_used = || {
                let places = self.bench.entries.iter().flat_map(|entry| entry.parts.places());
                places.into_iter().any(|place| one.mean(place.maker, place.part))
            };
            if let Err(Unknown { text, nearest }) = look_up(name, &self.designs.shop)
                && !is_used()
            {
                unknown = true;
                let mend =
                    nearest.map(|name| format!("; did you mean `{name}`?")).unwrap_or_default();
                self.screen
                    .say(&format!("error: no catalog or design holds a part `{text}`{mend}"));
            }
        }
        if unknown { Err(Fault::Told) } else { Ok(()) }
    }

    /// Why nothing qualifies for the sheet of a design without the parts that are gone.
    fn why_nothing(&self, subject: &Subject<'_, '_>) -> Result<String, Fault> {
        let look = Look { width: WIDTH_OF_REASONS.min(self.screen.data.width), ..self.screen.data };
        let look = Look { width: look.width.saturating_sub(2), colour: false, ..look };
        let sheet = without(subject.desk.eligible.sheet, &self.arguments.parts);
        let rows = eligible(&sheet, &self.designs.shop, true, &mut Vec::new());
        let problem = rows.problem();
        let first = select::ranking::shortlist(&problem, 1, &select::ranking::NO_SPREAD);
        if !first.map_err(Fault::Search)?.is_empty() {
            return Ok(
                "A new design from its sheet would do: see `railwright shortlist`.".to_owned()
            );
        }
        let market = ShopMarket { sheet: &sheet, shop: &self.designs.shop, only: None };
        let reasons = why_nothing(&market, &problem).map_err(Fault::Search)?;
        Ok(report::reasons::nothing(&reasons, &sheet, &problem, &look))
    }
}

/// A sheet that bans parts as well.
fn without(sheet: &Sheet, parts: &[String]) -> Sheet {
    let mut sheet = sheet.clone();
    sheet.parts.bans.extend(parts.iter().map(|part| NamedPart {
        text: part.clone(),
        place: Place::file("the command line"),
        excerpt: None,
        from_shop: false,
    }));
    sheet
}

fn show(screen: &Screen, text: &str) -> Result<(), Fault> {
    screen.show(text).map_err(|e| Fault::Defect(format!("standard output: {e}")))
}

fn answer(lost: bool, broken: &[Broken]) -> Result<Answer, Fault> {
    if !broken.is_empty() {
        Err(Fault::Told)
    } else if lost {
        Ok(Answer::No)
    } else {
        Ok(Answer::Done)
    }
}

/// Writes the files that are asked for.
fn write<T: serde::Serialize>(
    arguments: &Arguments,
    told: &T,
    first: &Table,
    document: &Document,
    screen: &Screen,
) -> Result<(), Fault> {
    let defect = |what: &dyn std::fmt::Display| Fault::Defect(what.to_string());
    for target in &arguments.out {
        let path = &target.path;
        let bytes = match target.format {
            Format::Json => json(told).map_err(|e| defect(&e))?,
            Format::Csv => table::csv::table(first).map_err(|e| defect(&e))?,
            Format::Xlsx => workbook::document(document).map_err(|e| defect(&e))?,
            _ => markdown::document(document).into_bytes(),
        };
        write_whole(path, &bytes, arguments.overwrite)?;
        screen.mention(&format!("wrote {}", path.display()));
    }
    Ok(())
}
