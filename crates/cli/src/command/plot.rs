//! `railwright plot`

use super::{Answer, Fault};
use crate::arguments::{Catalogs, Showing};
use crate::desk::{Desk, read_text};
use crate::files::{check, write_whole};
use crate::load::Loaded;
use crate::page::front_of_sheet;
use crate::progress::watched;
use crate::screen::Screen;
use clap::Args;
use clap::builder::{PossibleValuesParser, TypedValueParser};
use design::parts::Parts;
use design::{chosen, is_design};
use notice::Notice;
use picture::{Kind, Subject, draw, draw_front, standalone};
use report::drawn::{front_of, front_with, points};
use report::notices::Warnings;
use report::shortlist::Shortlist;
use select::candidate::Candidate;
use select::front::front;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist};
use std::path::PathBuf;

/// Draw one picture of a candidate or a design, as SVG or PNG
///
/// Of a rail sheet the first candidate is drawn, or the one that --pick names; of a design its own parts
/// and values. The operating area shows every curve of the pass transistor, as given and derated, with
/// the load line and the fault; the front shows every set of parts that nothing beats on cost, loss and
/// stress at once, with the one drawn marked.
#[derive(Debug, Args)]
#[command(after_long_help = EXAMPLES)]
pub(crate) struct Arguments {
    /// A rail sheet or a design (TOML)
    #[arg(value_name = "SHEET|DESIGN")]
    subject: PathBuf,
    /// Which picture
    #[arg(long, value_name = "PICTURE", default_value = Kind::OperatingArea.name(),
        value_parser = PossibleValuesParser::new(Kind::ALL.map(Kind::name))
            .map(|name| Kind::named(&name).unwrap_or(Kind::OperatingArea)))]
    picture: Kind,
    /// The file to draw into: .svg or .png
    #[arg(long, value_name = "FILE")]
    out: Target,
    /// Of a sheet: the candidate, by its rank, or by the id of one of the first ten or of the front
    #[arg(long, value_name = "RANK|ID")]
    pick: Option<String>,
    /// Of a design: check it against this rail sheet, whatever it says
    #[arg(long, value_name = "SHEET")]
    sheet: Option<PathBuf>,
    #[command(flatten)]
    catalogs: Catalogs,
    /// Set a value of the sheet for this run, for example load.max_a=1.5
    #[arg(long, value_name = "KEY=VALUE")]
    set: Vec<String>,
    /// Replace a file that is there already
    #[arg(long)]
    overwrite: bool,
    #[command(flatten)]
    pub(super) showing: Showing,
}

const EXAMPLES: &str = "\
Examples, on the sample catalogs:
  railwright plot catalogs-sample/sheets/tide-gauge-12v.toml \\
      --catalogs catalogs-sample --out operating-area.svg
  railwright plot catalogs-sample/designs/jetty-kept.toml \\
      --catalogs catalogs-sample --picture headroom --out headroom.png

Exit status: 0 where the picture is drawn, 1 where nothing qualifies, --pick names no candidate or
figures of the design are missing, 2 where the input or the command line is at fault.";

/// Candidates among which an id is looked for.
const USUAL_ROWS: usize = 10;

/// A picture to be written, its format told by the ending of its file.
#[derive(Debug, Clone)]
struct Target {
    path: PathBuf,
    format: Format,
}

#[derive(Debug, Clone, Copy)]
enum Format {
    Svg,
    Png,
}

impl std::str::FromStr for Target {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        let path = PathBuf::from(text);
        let ending = path.extension().unwrap_or_default().to_string_lossy().to_ascii_lowercase();
        let format = match ending.as_str() {
            "svg" => Format::Svg,
            "png" => Format::Png,
            _ => {
                let how =
                    "the file's ending tells the format: write a name that ends in .svg or .png";
                return Err(how.to_owned());
            }
        };
        Ok(Self { path, format })
    }
}

/// Does what the arguments ask for.
pub(crate) fn run(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    check(std::iter::once(arguments.out.path.as_path()), arguments.overwrite)?;
    let mut notices = Vec::new();
    let Some(text) = read_text(&arguments.subject, &mut notices) else {
        screen.tell(&notices, Warnings::FewOfAKind);
        return Err(Fault::Told);
    };
    if is_design(&text) {
        of_design(arguments, screen)
    } else {
        of_sheet(arguments, notices, screen)
    }
}

/// Draws a candidate of a rail sheet.
fn of_sheet(
    arguments: &Arguments,
    mut notices: Vec<Notice>,
    screen: &Screen,
) -> Result<Answer, Fault> {
    let loaded =
        Loaded::read(&arguments.subject, &arguments.catalogs, &arguments.set, &mut notices);
    let loaded = loaded.as_ref();
    let eligible = loaded.and_then(|loaded| loaded.eligible(&mut notices));
    screen.tell(&notices, Warnings::FewOfAKind);
    let (Some(loaded), Some(eligible)) = (loaded, eligible) else { return Err(Fault::Told) };
    let problem = eligible.problem();
    let rank: Option<usize> = arguments.pick.as_deref().and_then(|pick| pick.parse().ok());
    let rows = rank.unwrap_or(USUAL_ROWS);
    let mut candidates =
        watched("searching", screen.shows_progress(), |_| shortlist(&problem, rows, &NO_SPREAD))
            .map_err(Fault::Search)?;
    let told = |candidates: &[Candidate]| {
        Shortlist::new(loaded.files(), &eligible, &problem, candidates, None)
            .map_err(|e| Fault::Defect(e.to_string()))
    };
    let mut list = told(&candidates)?;
    if list.candidates.is_empty() {
        screen.say("error: nothing is drawn: nothing qualifies; `railwright whynot` tells why");
        return Ok(Answer::No);
    }
    let pick = arguments.pick.as_deref().unwrap_or("1");
    let mut on_front = Vec::new();
    if arguments.picture == Kind::Front || list.named(pick).is_none() && rank.is_none() {
        let whole = on_the_front(&problem, screen)?;
        on_front = points(&told(&whole)?, &list);
        if list.named(pick).is_none() {
            candidates = whole;
            list = told(&candidates)?;
        }
    }
    let Some(picked) = list.named(pick) else {
        let rows = list.candidates.len();
        screen.say(&format!(
            "error: nothing is drawn: none of {rows} candidates has the rank or id `{pick}`"
        ));
        return Ok(Answer::No);
    };
    let candidate = candidates.get(picked.rank.saturating_sub(1));
    let parts = candidate.and_then(|c| chosen(&eligible, c));
    let subject = parts.and_then(|parts| Subject::new(&parts, &loaded.sheet.rail));
    let subject = subject.ok_or_else(|| Fault::Defect("a candidate without parts".to_owned()))?;
    let picture = match arguments.picture.of_one_set() {
        Some(kind) => draw(kind, &subject, &picked.id),
        None => draw_front(&front_of(&on_front, &list, picked), &picked.id),
    };
    write(arguments, &picture, screen)
}

/// Draws a design.
fn of_design(arguments: &Arguments, screen: &Screen) -> Result<Answer, Fault> {
    let Arguments { catalogs, sheet, set, .. } = arguments;
    let mut notices = Vec::new();
    let mut desk = Desk::new(catalogs, sheet.as_deref(), set, &mut notices);
    let read = desk.as_mut().and_then(|desk| desk.read(&arguments.subject, &mut notices).ok());
    let on_desk = desk.as_ref().zip(read.as_ref());
    let found = on_desk.and_then(|(desk, read)| {
        let evidence = desk.evidence(read)?;
        let rail = &evidence.sheet.rail;
        Some((evidence, Parts::find(&read.design, evidence.shop, rail, &mut notices)?))
    });
    screen.tell(&notices, Warnings::FewOfAKind);
    let (Some((evidence, parts)), Some(read)) = (found, &read) else { return Err(Fault::Told) };
    let Some(subject) = Subject::new(&parts, &evidence.sheet.rail) else {
        screen.say(
            "error: nothing is drawn: figures of the design's parts are missing; \
             `railwright verify` names them",
        );
        return Ok(Answer::No);
    };
    let picture = match arguments.picture.of_one_set() {
        Some(kind) => draw(kind, &subject, "design"),
        None => {
            let Some(points) = front_of_sheet(&evidence, screen)? else {
                screen.say("error: nothing is drawn: the design's sheet has no front");
                return Ok(Answer::No);
            };
            let boards = read.design.boards.unwrap_or(evidence.sheet.boards);
            let currency = evidence.sheet.currency.as_deref();
            draw_front(&front_with(&points, &parts, &subject, boards, currency), "design")
        }
    };
    write(arguments, &picture, screen)
}

fn on_the_front(problem: &Problem<'_>, screen: &Screen) -> Result<Vec<Candidate>, Fault> {
    watched("searching", screen.shows_progress(), |_| front(problem)).map_err(Fault::Search)
}

fn write(arguments: &Arguments, picture: &maud::Markup, screen: &Screen) -> Result<Answer, Fault> {
    let Target { path, format } = &arguments.out;
    let bytes = match format {
        Format::Svg => standalone::svg(picture).into_bytes(),
        Format::Png => standalone::png(picture).map_err(|e| Fault::Defect(e.to_string()))?,
    };
    write_whole(path, &bytes, arguments.overwrite)?;
    screen.mention(&format!("wrote {}", path.display()));
    Ok(Answer::Done)
}
