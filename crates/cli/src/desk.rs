//! Designs with all that they are checked with. Catalogs are read once, and each sheet too.

use crate::arguments::Catalogs;
use crate::files::folder_of;
use crate::load::{SHOP_FILE, ShopText, read_catalogs, read_file, text};
use catalog::Shop;
use design::Design;
use notice::{Notice, Place, has_errors};
use report::figure::Pairs;
use report::hash::HashOf;
use report::proof::{DesignProof, Evidence};
use sheet::{Sheet, ShopFile};
use std::collections::HashMap;
use std::path::{Path, PathBuf};

/// Catalogs, shop file, and the sheets of the designs so far.
pub(crate) struct Desk<'a> {
    /// The sheet that the user names for all designs.
    sheet: Option<&'a Path>,
    set: &'a [String],
    pub(crate) shop_file: ShopFile,
    shop_text: Option<String>,
    pub(crate) shop: Shop,
    /// By path; None where a sheet is at fault.
    sheets: HashMap<PathBuf, Option<SheetRead>>,
}

/// A rail sheet with its text.
struct SheetRead {
    name: String,
    text: String,
    sheet: Sheet,
}

/// A design that has been read, with the path of its sheet, which has been read as well.
pub(crate) struct OnDesk {
    pub(crate) design: Design,
    sheet_path: PathBuf,
}

impl<'a> Desk<'a> {
    /// None with notices where shop file or catalogs are at fault.
    pub(crate) fn new(
        catalogs: &Catalogs,
        sheet: Option<&'a Path>,
        set: &'a [String],
        notices: &mut Vec<Notice>,
    ) -> Option<Self> {
        let shop_file = ShopText::read(catalogs, notices)?;
        // A design with a pot says itself where no catalog holds it.
        let shop = read_catalogs(catalogs, &shop_file.content, false, notices)?;
        let shop_text = std::fs::read_to_string(catalogs.catalogs.join(SHOP_FILE)).ok();
        let shop_file = shop_file.content;
        Some(Self { sheet, set, shop_file, shop_text, shop, sheets: HashMap::new() })
    }

    /// Reads the design in a file, and its sheet.
    ///
    /// # Errors
    /// Where one of them is at fault the design's name, if that much is known; the faults are in
    /// `notices`.
    pub(crate) fn read(
        &mut self,
        path: &Path,
        notices: &mut Vec<Notice>,
    ) -> Result<OnDesk, Option<String>> {
        let name = path.display().to_string();
        let text = read_text(path, notices).ok_or(None)?;
        let design = design::read(&name, &text, notices).ok_or(None)?;
        let sheet_path = match (self.sheet, &design.sheet) {
            (Some(path), _) => path.to_owned(),
            (None, Some(given)) => in_order(&folder_of(path).join(&given.value)),
            (None, None) => {
                let message = "the design names no rail sheet";
                let notice = Notice::error("missing-key", Place::file(&name), message);
                notices.push(notice.mend("write `sheet = \"PATH\"`, or give --sheet SHEET"));
                return Err(Some(design.name));
            }
        };
        self.read_sheet(&sheet_path, notices);
        if let Some(Some(_)) = self.sheets.get(&sheet_path) {
            return Ok(OnDesk { design, sheet_path });
        }
        if !has_errors(notices) {
            let message = "its rail sheet is at fault, as told above";
            let place = design.sheet.as_ref().map(|s| s.mark.place.clone());
            let place = place.unwrap_or_else(|| Place::file(&name));
            notices.push(Notice::error("sheet-at-fault", place, message));
        }
        Err(Some(design.name))
    }

    /// Reads a sheet the first time that a design names it.
    fn read_sheet(&mut self, path: &Path, notices: &mut Vec<Notice>) {
        if self.sheets.contains_key(path) {
            return;
        }
        let name = path.display().to_string();
        let read = read_text(path, notices).and_then(|text| {
            let sheet = sheet::read(&name, &text, &self.shop_file, self.set, notices)?;
            eligible::doubt_names(&sheet, &self.shop, notices);
            Some(SheetRead { name, text, sheet })
        });
        self.sheets.insert(path.to_owned(), read);
    }

    /// What a design that lies here is checked with.
    pub(crate) fn evidence(&self, design: &OnDesk) -> Option<Evidence<'_>> {
        let read = self.sheets.get(&design.sheet_path)?.as_ref()?;
        Some(Evidence {
            shop: &self.shop,
            sheet: &read.sheet,
            sheet_file: (&read.name, &read.text),
            shop_file: self.shop_text.as_deref().map(|text| (SHOP_FILE, text)),
        })
    }

    /// Checks a design; one that could not be read is broken.
    pub(crate) fn proof(
        &self,
        path: &Path,
        read: &Result<OnDesk, Option<String>>,
        notices: &mut Vec<Notice>,
    ) -> DesignProof {
        let file = path.display().to_string();
        let checked = match read {
            Ok(design) => self
                .evidence(design)
                .map(|evidence| DesignProof::new(&design.design, &evidence, notices)),
            Err(_) => None,
        };
        let name = || read.as_ref().err().cloned().flatten();
        checked.unwrap_or_else(|| DesignProof::broken(&file, name().as_deref(), notices))
    }

    /// Hashes of the catalogs, and of the shop file where there is one.
    pub(crate) fn hashes(&self) -> Pairs<String, String> {
        let hash = |bytes: &[u8]| HashOf(bytes).hex();
        let files = self.shop.files().map(|f| (f.name.clone(), hash(&f.bytes)));
        let shop = self.shop_text.as_ref().map(|t| (SHOP_FILE.to_owned(), hash(t.as_bytes())));
        Pairs(files.chain(shop).collect())
    }
}

/// A path without the steps that lead back: `designs/../sheets/x` becomes `sheets/x`.
///
/// By text alone, so that a sheet is named as a person would name it; where the path holds a link to
/// another folder the steps are kept, for they then mean something else.
fn in_order(path: &Path) -> PathBuf {
    use std::path::Component;
    let mut short = PathBuf::new();
    for step in path.components() {
        let leads_back = matches!(step, Component::ParentDir)
            && matches!(short.components().next_back(), Some(Component::Normal(_)));
        if leads_back && !short.is_symlink() {
            short.pop();
        } else if !matches!(step, Component::CurDir) {
            short.push(step);
        }
    }
    short
}

/// The text of a file; None with a notice where it can't be read.
pub(crate) fn read_text(path: &Path, notices: &mut Vec<Notice>) -> Option<String> {
    let bytes = read_file(path, notices)?;
    text(&path.display().to_string(), &bytes, notices).map(str::to_owned)
}
