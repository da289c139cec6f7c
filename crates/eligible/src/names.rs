//! Parts that a sheet or a shop names: pins and bans.

use catalog::{Catalog, Kind, Shop};
use circuit::slot::Slot;
use notice::{Notice, Place};
use sheet::{NamedPart, Sheet};
use std::collections::HashSet;

/// What the names of a sheet mean: exact pairs of maker and part.
#[derive(Debug, Default)]
pub(crate) struct Named {
    banned: HashSet<(String, String)>,
    pinned: [Option<HashSet<(String, String)>>; Slot::COUNT],
}

impl Named {
    /// Looks every name up, and says which mean nothing.
    pub fn new(sheet: &Sheet, shop: &Shop, notices: &mut Vec<Notice>) -> Self {
        let mut named = Self::default();
        if sheet.parts.bans.is_empty() && sheet.parts.pins.iter().all(Option::is_none) {
            return named;
        }
        let catalogs = [
            Kind::Zeners,
            Kind::Opamps,
            Kind::Transistors,
            Kind::Resistors,
            Kind::Pots,
            Kind::Heatsinks,
        ]
        .map(|kind| Index::new(kind, shop));
        for ban in &sheet.parts.bans {
            let found: Vec<_> = catalogs.iter().flat_map(|c| c.look_up(&ban.text)).collect();
            if found.is_empty() {
                notices.push(unknown_ban(ban, &catalogs));
            }
            named.banned.extend(found);
        }
        for slot in Slot::ALL {
            let Some(pins) = &sheet.parts.pins[slot as usize] else { continue };
            let kind = kind_of(slot);
            let Some(index) = catalogs.iter().find(|c| c.kind == kind) else { continue };
            let mut let_in = HashSet::new();
            for pin in pins {
                let found = index.look_up(&pin.text);
                if found.is_empty() {
                    notices.push(unknown_pin(pin, slot, index));
                }
                let_in.extend(found);
            }
            named.pinned[slot as usize] = Some(let_in);
        }
        named
    }

    pub fn is_banned(&self, maker: &str, part: &str) -> bool {
        !self.banned.is_empty() && self.banned.contains(&(maker.to_owned(), part.to_owned()))
    }

    pub fn is_let_in(&self, slot: Slot, maker: &str, part: &str) -> bool {
        self.pinned[slot as usize]
            .as_ref()
            .is_none_or(|pins| pins.contains(&(maker.to_owned(), part.to_owned())))
    }
}

/// The catalog that fills a slot.
pub fn kind_of(slot: Slot) -> Kind {
    match slot {
        Slot::Zener => Kind::Zeners,
        Slot::BiasLine | Slot::DividerLine => Kind::Resistors,
        Slot::Amplifier => Kind::Opamps,
        Slot::Pot => Kind::Pots,
        Slot::Pass => Kind::Transistors,
        Slot::Heatsink => Kind::Heatsinks,
    }
}

/// Every name that a catalog holds, also those of rows that can't be chosen.
struct Index<'a> {
    kind: Kind,
    names: Vec<(&'a str, &'a str)>,
}

impl<'a> Index<'a> {
    fn new(kind: Kind, shop: &'a Shop) -> Self {
        let names = match kind {
            Kind::Zeners => names_of(&shop.zeners),
            Kind::Opamps => names_of(&shop.opamps),
            Kind::Transistors => names_of(&shop.transistors),
            Kind::Resistors => names_of(&shop.resistors),
            Kind::Pots => names_of(&shop.pots),
            Kind::Heatsinks => names_of(&shop.heatsinks),
        };
        Self { kind, names }
    }

    /// A name is looked up as a part of every maker, else as `maker/part`.
    fn look_up(&self, text: &str) -> Vec<(String, String)> {
        let as_part = self.matching(|_, part| part == text);
        if !as_part.is_empty() {
            return as_part;
        }
        // A maker's or a part's name may hold a stroke of its own, so whole names are compared.
        self.matching(|maker, part| {
            text.strip_prefix(maker).and_then(|rest| rest.strip_prefix('/')) == Some(part)
        })
    }

    fn matching(&self, matches: impl Fn(&str, &str) -> bool) -> Vec<(String, String)> {
        self.names
            .iter()
            .filter(|(maker, part)| matches(maker, part))
            .map(|&(maker, part)| (maker.to_owned(), part.to_owned()))
            .collect()
    }

    /// The name most like the text.
    fn nearest(&self, text: &str) -> Option<(f64, String)> {
        self.names
            .iter()
            .map(|&(maker, part)| {
                let full = format!("{maker}/{part}");
                let likeness =
                    strsim::jaro_winkler(text, part).max(strsim::jaro_winkler(text, &full));
                (likeness, if text.contains('/') { full } else { part.to_owned() })
            })
            .max_by(|a, b| a.0.total_cmp(&b.0))
    }
}

fn names_of<T>(catalog: &Catalog<T>) -> Vec<(&str, &str)> {
    let rows = catalog.rows.iter().map(|row| (row.maker.as_str(), row.part.as_str()));
    let unproven = catalog.unproven.iter().map(|u| (u.maker.as_str(), u.part.as_str()));
    let left_out = catalog.left_out.iter().map(|l| (l.maker.as_str(), l.part.as_str()));
    rows.chain(unproven).chain(left_out).collect()
}

/// A pin that its slot's catalog does not hold.
fn unknown_pin(pin: &NamedPart, slot: Slot, index: &Index<'_>) -> Notice {
    let notice = Notice::error(
        "pinned-part-unknown",
        pin.place.clone(),
        format!(
            "`parts.use.{}` names a part that {} does not hold",
            slot.name(),
            index.kind.file_name()
        ),
    )
    .found(&pin.text)
    .expected(format!("a part of {}, or `maker/part`", index.kind.file_name()));
    finish(notice, pin, index.nearest(&pin.text))
}

/// A ban that no catalog holds.
fn unknown_ban(ban: &NamedPart, catalogs: &[Index<'_>]) -> Notice {
    let nearest =
        catalogs.iter().filter_map(|c| c.nearest(&ban.text)).max_by(|a, b| a.0.total_cmp(&b.0));
    let notice = Notice::warning(
        "banned-part-unknown",
        ban.place.clone(),
        "`parts.ban` names a part that no catalog holds, so it has no effect",
    )
    .found(&ban.text);
    finish(notice, ban, nearest)
}

fn finish(mut notice: Notice, named: &NamedPart, nearest: Option<(f64, String)>) -> Notice {
    notice.excerpt.clone_from(&named.excerpt);
    match nearest {
        Some((_, name)) => notice.mend(format!("the nearest name is `{name}`")),
        None => notice,
    }
}

/// A line or pot that the rail's temperatures leave no resistance.
pub(crate) fn no_resistance(
    kind: Kind,
    line: u32,
    file: Option<&str>,
    part: &str,
    span_c: f64,
    skipped: bool,
) -> Notice {
    let place = Place::line(file.unwrap_or(kind.file_name()), line);
    let message = format!(
        "`{part}` may measure nothing at all {span_c} °C away from 25 °C: tolerance or tempco leave \
         no resistance"
    );
    let notice = if skipped {
        Notice::warning("no-resistance-left", place, message).mend("the row is left out")
    } else {
        Notice::error("no-resistance-left", place, message).mend(
            "check `tol_pct` and `tempco_ppm`, or leave such rows out with --skip-broken-rows",
        )
    };
    notice.expected("1 − tol > 0 and 1 − tempco·ΔT > 0")
}
