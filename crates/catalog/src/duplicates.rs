//! The search for rows that name the same part of the same maker, in one file or in several.

use crate::cells::{ABSENT, trimmed};
use crate::fault::{Fault, What};
use crate::read::records::for_each_record;
use crate::read::told::Told;
use crate::shop::Catalog;
use crate::source::RowPlace;
use crate::tables::common::at;
use csv::ByteRecord;
use std::collections::hash_map::Entry;
use std::collections::{HashMap, HashSet};
use std::hash::{BuildHasher, Hash, Hasher};

/// The hash of a name, the same in every run.
pub(crate) fn name_hash(part: &str, maker: &str) -> u64 {
    let mut hasher = foldhash::fast::FixedState::default().build_hasher();
    part.hash(&mut hasher);
    maker.hash(&mut hasher);
    hasher.finish()
}

/// Finds rows of the same part and maker, from the hashes of all names. The later ones leave the
/// catalog; for each file comes back what is wrong with them.
pub(crate) fn duplicates<T>(mut names: Vec<u64>, catalog: &mut Catalog<T>) -> Vec<Told> {
    names.sort_unstable();
    let twice: HashSet<u64> = names
        .windows(2)
        .filter_map(|pair| match pair {
            [a, b] if a == b => Some(*a),
            _ => None,
        })
        .collect();
    if twice.is_empty() {
        return Vec::new();
    }
    let found = again(&twice, catalog);
    let lines: HashSet<(u16, u32)> = found.places.iter().map(|place| (place.0, place.1)).collect();
    let is_sound = |file: u16, line: u32| !lines.contains(&(file, line));
    // Rows with other faults have been counted already.
    let mut broken = vec![0; catalog.files.len()];
    let mut keep = |file: u16, line: u32| {
        let sound = is_sound(file, line);
        if let Some(count) = broken.get_mut(usize::from(file)) {
            *count += usize::from(!sound);
        }
        sound
    };
    catalog.rows.retain(|r| keep(r.file, r.line));
    catalog.unproven.retain(|r| keep(r.file, r.line));
    catalog.left_out.retain(|r| keep(r.file, r.line));
    for (file, more) in catalog.files.iter_mut().zip(broken) {
        file.broken += more;
    }
    found.told
}

/// The rows whose part and maker stand somewhere before.
struct Again {
    /// File and line of each.
    places: Vec<(u16, u32)>,
    /// What is wrong with them, file by file.
    told: Vec<Told>,
}

/// Reads the files again for rows whose hash occurs twice, and compares the names themselves: equal
/// hashes are near certainly equal names, but only near.
fn again<T>(twice: &HashSet<u64>, catalog: &Catalog<T>) -> Again {
    let mut firsts: HashMap<(String, String), (u16, u32)> = HashMap::new();
    let mut found = Again { places: Vec::new(), told: Vec::new() };
    for (number, file) in (0u16..).zip(&catalog.files) {
        let source = file.source(catalog.kind);
        let text = |record: &ByteRecord, at: usize| {
            let field = source.header.fields.get(at).copied().unwrap_or(ABSENT);
            let cell = record.get(field as usize).unwrap_or_default();
            String::from_utf8_lossy(trimmed(cell)).into_owned()
        };
        let mut told = Told::default();
        for_each_record(source.text, source.header, |line, start, record| {
            if record.len() != source.header.names.len() {
                return;
            }
            let name = (text(record, at::part), text(record, at::maker));
            if name.0.is_empty() || !twice.contains(&name_hash(&name.0, &name.1)) {
                return;
            }
            let (first_file, first_line) = match firsts.entry(name) {
                Entry::Occupied(first) => *first.get(),
                Entry::Vacant(first) => {
                    first.insert((number, line));
                    return;
                }
            };
            found.places.push((number, line));
            told.tell(|| {
                let other = (first_file != number).then(|| catalog.file(first_file)).flatten();
                let file = other.map(|f| f.name.clone());
                let what = What::Duplicate { file, line: first_line };
                let fault = Fault { column: Some(at::part), within: None, what };
                RowPlace { source, start, line }.notice(&fault)
            });
        });
        found.told.push(told);
    }
    found
}
