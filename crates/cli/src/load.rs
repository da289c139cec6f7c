//! Sheet, shop file and catalogs, read from their files.

use crate::arguments::Catalogs;
use crate::command::Fault;
use crate::screen::Screen;
use catalog::kind::{is_known_column, nearest_column};
use catalog::{ReadOptions, Shop, read_folder};
use eligible::{Eligible, eligible};
use notice::{Notice, Place, has_errors};
use report::notices::Warnings;
use report::shortlist::Files;
use sheet::{Sheet, ShopFile};
use std::fs::File;
use std::io::{ErrorKind, Read};
use std::path::{Path, PathBuf};

/// The name of the shop file in the folder of catalogs.
pub(crate) const SHOP_FILE: &str = "shop.toml";

/// A sheet with the shop that serves it.
pub(crate) struct Loaded {
    pub(crate) sheet: Sheet,
    pub(crate) sheet_path: PathBuf,
    sheet_bytes: Vec<u8>,
    shop: Shop,
    shop_bytes: Option<Vec<u8>>,
    skip_broken_rows: bool,
}

impl Loaded {
    /// Keeps everything until the process ends. Giving some hundred thousand rows back one by one,
    /// just before the system takes them all, would cost a tenth of a large run.
    pub(crate) fn for_good(self) -> &'static Self {
        Box::leak(Box::new(self))
    }

    /// Reads everything. All faults of all files go to `notices`; None where one of them is an error.
    pub(crate) fn read(
        sheet_path: &Path,
        catalogs: &Catalogs,
        set: &[String],
        notices: &mut Vec<Notice>,
    ) -> Option<Self> {
        let shop_file = ShopText::read(catalogs, notices);
        let sheet_bytes = read_file(sheet_path, notices);
        // What a faulty shop file would have given, the sheet would be said to miss.
        let shop_file = shop_file?;
        let sheet_bytes = sheet_bytes?;
        let sheet_name = sheet_path.display().to_string();
        let sheet = text(&sheet_name, &sheet_bytes, notices)
            .and_then(|text| sheet::read(&sheet_name, text, &shop_file.content, set, notices));
        let needs_pots = sheet.as_ref().is_some_and(|s| s.rail.is_adjustable());
        let shop = read_catalogs(catalogs, &shop_file.content, needs_pots, notices);
        Some(Self {
            sheet: sheet?,
            sheet_path: sheet_path.to_owned(),
            sheet_bytes,
            shop: shop?,
            shop_bytes: shop_file.bytes,
            skip_broken_rows: catalogs.skip_broken_rows,
        })
    }

    /// Brings the parts into the order of their names, so that which of several is shown as an example
    /// does not depend on the order of rows.
    pub(crate) fn sort_parts_by_name(&mut self) {
        self.shop.sort_by_name();
    }

    /// The rows that may be chosen; None where names in the sheet are at fault.
    pub(crate) fn eligible(&self, notices: &mut Vec<Notice>) -> Option<Eligible<'_>> {
        let mut found = Vec::new();
        let eligible = eligible(&self.sheet, &self.shop, self.skip_broken_rows, &mut found);
        let sound = !has_errors(&found);
        notices.append(&mut found);
        sound.then_some(eligible)
    }

    /// The texts of the sheet and of the shop file; both were read as text, so that nothing is lost.
    pub(crate) fn texts(&self) -> (&str, Option<&str>) {
        let text = |bytes| std::str::from_utf8(bytes).unwrap_or_default();
        (text(&self.sheet_bytes), self.shop_bytes.as_deref().map(text))
    }

    /// The files as read.
    pub(crate) fn files(&self) -> Files<'_> {
        Files {
            sheet: &self.sheet_bytes,
            shop: self.shop_bytes.as_deref().map(|bytes| (SHOP_FILE, bytes)),
        }
    }
}

/// Reads a sheet with the shop that serves it, and tells what there is to tell. What comes back is kept
/// until the process ends; as a fault, that an input is not as it should be.
pub(crate) fn sheet_and_parts(
    sheet: &Path,
    catalogs: &Catalogs,
    set: &[String],
    screen: &Screen,
    change: impl FnOnce(&mut Loaded),
) -> Result<(&'static Loaded, Eligible<'static>), Fault> {
    let mut notices = Vec::new();
    let loaded = Loaded::read(sheet, catalogs, set, &mut notices).map(|mut loaded| {
        change(&mut loaded);
        loaded.for_good()
    });
    let eligible = loaded.and_then(|loaded| loaded.eligible(&mut notices));
    screen.tell(&notices, Warnings::FewOfAKind);
    loaded.zip(eligible).ok_or(Fault::Told)
}

/// The shop file with what it says.
pub(crate) struct ShopText {
    pub(crate) content: ShopFile,
    bytes: Option<Vec<u8>>,
}

impl ShopText {
    /// Reads the shop file of a folder; a folder without one has a shop that says nothing. None with
    /// notices where it, or the folder itself, is at fault.
    pub(crate) fn read(catalogs: &Catalogs, notices: &mut Vec<Notice>) -> Option<Self> {
        let folder = &catalogs.catalogs;
        if !folder.is_dir() {
            let place = Place::file(folder.display().to_string());
            notices.push(
                Notice::error("folder-missing", place, "there is no such folder")
                    .expected(
                        "a folder with zeners.csv, opamps.csv, transistors.csv, resistors.csv",
                    )
                    .mend("name it with --catalogs DIR"),
            );
            return None;
        }
        let path = folder.join(SHOP_FILE);
        match path.symlink_metadata() {
            Err(error) if error.kind() == ErrorKind::NotFound => {
                return Some(Self { content: ShopFile::empty(), bytes: None });
            }
            // A pipe under this name would be waited for without end.
            Ok(found) if !found.is_symlink() && !found.is_file() => {
                let place = Place::file(path.display().to_string());
                notices.push(Notice::error("file-unreadable", place, "this is no regular file"));
                return None;
            }
            _ => {}
        }
        let bytes = read_file(&path, notices)?;
        let content = ShopFile::read(SHOP_FILE, text(SHOP_FILE, &bytes, notices)?, notices)?;
        Some(Self { content, bytes: Some(bytes) })
    }
}

/// Reads the catalogs of a folder; None with notices where one of them is at fault.
pub(crate) fn read_catalogs(
    catalogs: &Catalogs,
    shop_file: &ShopFile,
    needs_pots: bool,
    notices: &mut Vec<Notice>,
) -> Option<Shop> {
    let known = unknown_columns(shop_file, notices);
    let options = ReadOptions {
        renamed: shop_file.columns.clone(),
        skip_broken_rows: catalogs.skip_broken_rows,
        needs_pots,
        needs_heatsinks: false,
    };
    let shop = read_folder(&catalogs.catalogs, &options, notices)?;
    unused_columns(shop_file, &shop, notices);
    known.then_some(shop)
}

/// Tells the names in `[columns]` of the shop file that are given as those of columns and are none.
/// True where there is none such.
fn unknown_columns(shop_file: &ShopFile, notices: &mut Vec<Notice>) -> bool {
    let mut sound = true;
    for ((name, target), mark) in shop_file.columns.iter().zip(&shop_file.column_marks) {
        if is_known_column(target) {
            continue;
        }
        sound = false;
        let message =
            format!("column \"{name}\" is to be read as `{target}`, which no catalog has");
        let mut notice = Notice::error("unknown-column", mark.place.clone(), message)
            .found(target)
            .expected("the name of a column");
        notice.excerpt = mark.excerpt.clone();
        notice.mend = nearest_column(target).map(|near| format!("did you mean `{near}`?"));
        notices.push(notice);
    }
    sound
}

/// Warns of names in `[columns]` that no catalog file has.
fn unused_columns(shop_file: &ShopFile, shop: &Shop, notices: &mut Vec<Notice>) {
    for ((name, target), mark) in shop_file.columns.iter().zip(&shop_file.column_marks) {
        let is_used = shop.files().any(|file| file.renamed().contains(name));
        if !is_used && is_known_column(target) {
            let message = format!("no catalog has a column \"{name}\", so this has no effect");
            let mut notice = Notice::warning("unused-column", mark.place.clone(), message);
            notice.excerpt = mark.excerpt.clone();
            notices.push(notice.mend("write the name as it stands in the header row"));
        }
    }
}

/// The most that a sheet, a design or a shop file may hold, bytes: thousands of times what one needs, and
/// an end to what has none, such as a device.
const LARGEST: u64 = 16 * 1024 * 1024;

/// The bytes of a sheet, a design or a shop file; None with a notice where it can't be read.
pub(crate) fn read_file(path: &Path, notices: &mut Vec<Notice>) -> Option<Vec<u8>> {
    let mut bytes = Vec::new();
    let read = File::open(path).and_then(|file| file.take(LARGEST + 1).read_to_end(&mut bytes));
    let place = Place::file(path.display().to_string());
    let fault = match read {
        Ok(length) if length as u64 <= LARGEST => return Some(bytes),
        Ok(_) => {
            let message = format!("the file holds more than {} MB", LARGEST >> 20);
            notices.push(
                Notice::error("file-too-large", place, message)
                    .expected("a rail sheet, a design or a shop file, a few kilobytes of TOML"),
            );
            return None;
        }
        Err(fault) => fault,
    };
    notices.push(if fault.kind() == ErrorKind::NotFound {
        Notice::error("file-missing", place, "there is no such file")
    } else {
        Notice::error("file-unreadable", place, format!("the file can't be read: {fault}"))
    });
    None
}

/// The bytes as a text; None with a notice where they are no UTF-8.
pub(crate) fn text<'b>(name: &str, bytes: &'b [u8], notices: &mut Vec<Notice>) -> Option<&'b str> {
    match std::str::from_utf8(bytes) {
        Ok(text) => Some(text),
        Err(fault) => {
            let before = bytes.get(..fault.valid_up_to()).unwrap_or_default();
            let breaks = before.iter().filter(|b| **b == b'\n').count();
            let line = u32::try_from(breaks + 1).unwrap_or(u32::MAX);
            notices.push(
                Notice::error("file-encoding", Place::line(name, line), "the file is not in UTF-8")
                    .mend("save it as UTF-8"),
            );
            None
        }
    }
}
