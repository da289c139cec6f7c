//! The search for rows that name the same part of the same maker.

use crate::cells::{ABSENT, trimmed};
use crate::fault::{Fault, RowPlace, What};
use crate::header::Header;
use crate::read::{MOST_NOTICES, for_each_record};
use crate::shop::Catalog;
use crate::tables::common::at;
use csv::ByteRecord;
use notice::Notice;
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

/// Finds rows of the same part and maker, from the hashes of all names: the later ones are faulty, and
/// leave the catalog. `more` counts notices beyond those that are kept.
pub(crate) fn refuse_duplicates<T>(
    mut names: Vec<u64>,
    bytes: &[u8],
    header: &Header,
    catalog: &mut Catalog<T>,
    notices: &mut Vec<Notice>,
    more: &mut usize,
) {
    names.sort_unstable();
    let twice: HashSet<u64> = names
        .windows(2)
        .filter_map(|pair| match pair {
            [a, b] if a == b => Some(*a),
            _ => None,
        })
        .collect();
    if twice.is_empty() {
        return;
    }
    let duplicates = duplicates(&twice, bytes, header);
    for duplicate in &duplicates {
        if notices.len() >= 2 * MOST_NOTICES {
            *more += 1;
            continue;
        }
        let place = RowPlace {
            file: catalog.kind.file_name(),
            bytes,
            start: duplicate.start,
            line: duplicate.line,
            separator: header.separator,
            columns: catalog.kind.columns(),
            fields: &header.fields,
        };
        let what = What::Duplicate { line: duplicate.first_line };
        notices.push(place.notice(&Fault { column: Some(at::part), within: None, what }));
    }
    // Stable: what else is wrong with a row keeps its order.
    notices.sort_by_key(|n| n.place.line);
    *more += notices.len().saturating_sub(MOST_NOTICES);
    notices.truncate(MOST_NOTICES);
    let lines: Vec<u32> = duplicates.iter().map(|d| d.line).collect();
    let is_sound = |line: u32| lines.binary_search(&line).is_err();
    let count = |c: &Catalog<T>| c.rows.len() + c.unproven.len() + c.left_out.len();
    let before = count(catalog);
    catalog.rows.retain(|r| is_sound(r.line));
    catalog.unproven.retain(|r| is_sound(r.line));
    catalog.left_out.retain(|r| is_sound(r.line));
    // Rows with other faults have been counted already.
    catalog.broken += before - count(catalog);
}

/// A row whose part and maker stand on an earlier line already.
struct Duplicate {
    line: u32,
    /// Where the record begins.
    start: usize,
    first_line: u32,
}

/// Reads the file again for rows whose hash occurs twice, and compares the names themselves: equal
/// hashes are near certainly equal names, but only near.
fn duplicates(twice: &HashSet<u64>, bytes: &[u8], header: &Header) -> Vec<Duplicate> {
    let text = |record: &ByteRecord, at: usize| {
        let field = header.fields.get(at).copied().unwrap_or(ABSENT);
        let cell = record.get(field as usize).unwrap_or_default();
        String::from_utf8_lossy(trimmed(cell)).into_owned()
    };
    let mut first_lines: HashMap<(String, String), u32> = HashMap::new();
    let mut duplicates = Vec::new();
    for_each_record(bytes, header, |line, start, record| {
        if record.len() != header.names.len() {
            return;
        }
        let name = (text(record, at::part), text(record, at::maker));
        if name.0.is_empty() || !twice.contains(&name_hash(&name.0, &name.1)) {
            return;
        }
        match first_lines.entry(name) {
            Entry::Occupied(first) => {
                duplicates.push(Duplicate { line, start, first_line: *first.get() });
            }
            Entry::Vacant(first) => {
                first.insert(line);
            }
        }
    });
    duplicates
}
