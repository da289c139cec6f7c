//! The files of one kind, read one after another as if they were one.

use super::ReadOptions;
use super::encoding;
use super::files::{self, FileThere};
use super::rows::{Rows, read_rows};
use super::told::Told;
use crate::decimal;
use crate::duplicates::duplicates;
use crate::header::{self, NoHeader};
use crate::kind::Kind;
use crate::shop::{Catalog, FileRead};
use crate::source::Source;
use crate::tables::Figures;
use notice::{Notice, Place, Severity};
use std::borrow::Cow;
use std::io::ErrorKind;
use std::path::Path;

/// Reads the files of a kind.
pub(super) fn read_catalog<T: Figures>(
    folder: &Path,
    options: &ReadOptions,
) -> (Catalog<T>, Vec<Notice>) {
    let kind = T::KIND;
    let mut notices = Vec::new();
    let found = files::of_kind(folder, kind, &mut notices);
    let may_be_missing = match kind {
        Kind::Pots => !options.needs_pots,
        Kind::Heatsinks => !options.needs_heatsinks,
        _ => false,
    };
    if found.is_empty() && !may_be_missing && notices.iter().all(|n| n.code != "file-unreadable") {
        notices.push(files::missing(kind, folder));
    }
    let mut reading = Reading::new(options);
    for FileThere { name, path } in found {
        match read_regular(&path) {
            Ok(bytes) => reading.add(&name, bytes),
            Err(error) if error.kind() == ErrorKind::NotFound => {
                notices.push(files::missing(kind, folder));
            }
            Err(error) => notices.push(files::unreadable(&name, folder, &error)),
        }
    }
    (reading.finish(&mut notices), notices)
}

/// The bytes of a regular file. A pipe would be waited for without end, and a device may have none.
fn read_regular(path: &Path) -> std::io::Result<Vec<u8>> {
    if path.metadata()?.is_file() {
        std::fs::read(path)
    } else {
        Err(std::io::Error::other("it is no regular file"))
    }
}

/// The catalog of one file that is in memory.
pub(super) fn read_bytes<T: Figures>(
    bytes: Vec<u8>,
    options: &ReadOptions,
    notices: &mut Vec<Notice>,
) -> Catalog<T> {
    let mut reading = Reading::new(options);
    reading.add(T::KIND.file_name(), bytes);
    reading.finish(notices)
}

/// What has been read of a kind so far.
struct Reading<'o, T> {
    options: &'o ReadOptions,
    rows: Rows<T>,
    files: Vec<FileRead>,
    told: Vec<FileTold>,
}

/// What is to be said about a file.
struct FileTold {
    name: String,
    /// The file in [`Reading::files`]; None where it has no header row.
    number: Option<usize>,
    whole: Vec<Notice>,
    doubts: Told,
    faults: Told,
}

impl<'o, T: Figures> Reading<'o, T> {
    fn new(options: &'o ReadOptions) -> Self {
        Self { options, rows: Rows::new(), files: Vec::new(), told: Vec::new() }
    }

    /// Reads one more file.
    fn add(&mut self, name: &str, bytes: Vec<u8>) {
        let mut told = FileTold {
            name: name.to_owned(),
            number: None,
            whole: Vec::new(),
            doubts: Told::default(),
            faults: Told::default(),
        };
        let Ok(number) = u16::try_from(self.files.len()) else {
            let message = format!("there are more than {} files of this kind", u16::MAX);
            told.whole.push(Notice::error("file-unreadable", Place::file(name), message));
            return self.told.push(told);
        };
        if let Some((mut file, mut rows)) = self.read(name, bytes, number, &mut told.whole) {
            told.number = Some(usize::from(number));
            told.faults = std::mem::take(&mut rows.faults);
            told.doubts = std::mem::take(&mut rows.doubts);
            file.broken = std::mem::take(&mut rows.broken);
            self.files.push(file);
            // The rows of the first file, often the only one, stay where they are.
            if number == 0 {
                self.rows = rows;
            } else {
                self.rows.append(&mut rows);
            }
        }
        self.told.push(told);
    }

    /// Header and rows of a file. Should it turn out not to be UTF-8 it is decoded and read again;
    /// looking first would cost every other file a look.
    fn read(
        &self,
        name: &str,
        bytes: Vec<u8>,
        number: u16,
        notices: &mut Vec<Notice>,
    ) -> Option<(FileRead, Rows<T>)> {
        let mut text: Cow<'_, [u8]> = match encoding::utf_16(name, &bytes, notices) {
            Some(text) => Cow::Owned(text),
            None => Cow::Borrowed(bytes.as_slice()),
        };
        if notice::has_errors(notices) {
            return None;
        }
        if let Some(with_line_ends) = encoding::line_ends(&text) {
            text = Cow::Owned(with_line_ends);
        }
        let mut may_be_decoded = true;
        loop {
            let mut found = Vec::new();
            let renamed = &self.options.renamed;
            let read = header::read(T::KIND, name, &text, renamed, &mut found).map(|mut header| {
                header.decimal =
                    decimal::of_file(&Source { kind: T::KIND, name, text: &text, header: &header });
                let source = Source { kind: T::KIND, name, text: &text, header: &header };
                let rows = read_rows::<T>(&source, number);
                (header, rows)
            });
            let is_foreign = match &read {
                Ok((_, rows)) => rows.has_foreign_bytes,
                Err(NoHeader { has_foreign_bytes }) => *has_foreign_bytes,
            };
            if is_foreign
                && std::mem::take(&mut may_be_decoded)
                && let Some(decoded) = encoding::windows_1252(name, &text, notices)
            {
                text = Cow::Owned(decoded);
                continue;
            }
            notices.append(&mut found);
            let (header, rows) = read.ok()?;
            let decoded = match text {
                Cow::Owned(text) => Some(text),
                Cow::Borrowed(_) => None,
            };
            let name = name.to_owned();
            return Some((FileRead { name, bytes, decoded, header, broken: 0 }, rows));
        }
    }

    /// The catalog, without the rows that occur twice.
    fn finish(mut self, notices: &mut Vec<Notice>) -> Catalog<T> {
        let mut catalog = Catalog::empty(T::KIND);
        catalog.rows = self.rows.rows;
        catalog.unproven = self.rows.unproven;
        catalog.left_out = self.rows.left_out;
        catalog.files = self.files;
        let mut twice = duplicates(self.rows.names, &mut catalog);
        catalog.broken = catalog.files.iter().map(|file| file.broken).sum();
        for told in &mut self.told {
            let of_file = told.number.and_then(|number| twice.get_mut(number));
            told.faults.insert(of_file.map(std::mem::take).unwrap_or_default());
            let broken = told.number.and_then(|n| catalog.files.get(n)).map_or(0, |f| f.broken);
            told.say(broken, self.options.skip_broken_rows, notices);
        }
        catalog
    }
}

impl FileTold {
    /// Adds all that is to be said; where broken rows are skipped, what is wrong with them is a
    /// warning.
    fn say(&mut self, broken: usize, skips: bool, notices: &mut Vec<Notice>) {
        notices.append(&mut self.whole);
        let severity = if skips { Severity::Warning } else { Severity::Error };
        let mut of_rows: Vec<Notice> = Vec::new();
        of_rows.extend(self.faults.kept.drain(..).map(|n| Notice { severity, ..n }));
        of_rows.append(&mut self.doubts.kept);
        of_rows.sort_by_key(|notice| notice.place.line);
        notices.append(&mut of_rows);
        let place = || Place::file(self.name.clone());
        for (more, severity) in
            [(self.faults.more, severity), (self.doubts.more, Severity::Warning)]
        {
            if more > 0 {
                let message = format!("and {more} more of the kind in this file");
                let notice = Notice::warning("notices-cut", place(), message);
                notices.push(Notice { severity, ..notice });
            }
        }
        if skips && broken > 0 {
            let message = match broken {
                1 => "1 row is left out because something in it is wrong".to_owned(),
                n => format!("{n} rows are left out because something in them is wrong"),
            };
            notices.push(Notice::warning("rows-skipped", place(), message));
        }
    }
}
