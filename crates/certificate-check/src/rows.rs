//! The rows that are listed, proved one by one from their parts.

use crate::certificate::Row;
use crate::rank::{Bound, Key};
use crate::sides::{Parts, Reference, Shop, Side, together};
use crate::{Refused, refused};
use circuit::check::WhileHolding;
use circuit::drive;
use circuit::reference::choose_rz;
use circuit::slot::Slot;
use quantity::digits::rounded;

/// The rows of a list, as the claims about all others need them.
pub(crate) struct Listed<'s> {
    pub rows: Vec<Parts>,
    pub bound: Bound<'s>,
}

/// Proves every row: its parts may be chosen, its values are those that the model chooses, all its
/// checks hold, its figures are right, and it ranks after the row before it.
pub(crate) fn prove<'s>(shop: &'s Shop, rows: &[Row], top: usize) -> Result<Listed<'s>, Refused> {
    let bound = Bound { rail: shop.rail, weights: &shop.rows.sheet.weights, last: None };
    let mut listed = Listed { rows: Vec::new(), bound };
    for (rank, row) in (1..).zip(rows) {
        let refuse = |because: String| refused(format!("row {rank}"), because);
        let (parts, key) = one(shop, &listed.bound, row).map_err(refuse)?;
        if rank > top || listed.bound.last.is_some_and(|before| before >= key) {
            return Err(refuse(format!("it is not the next of the first {top}")));
        }
        listed.bound.last = Some(key);
        listed.rows.push(parts);
    }
    listed.bound.last = listed.bound.last.filter(|_| rows.len() == top);
    Ok(listed)
}

/// Proves a row by itself.
fn one(shop: &Shop, bound: &Bound, row: &Row) -> Result<(Parts, Key), String> {
    let mut parts = [None; Slot::COUNT];
    for ((part, names), named) in parts.iter_mut().zip(&shop.names).zip(&row.parts) {
        let Some(named) = named else { continue };
        let place = names.iter().position(|name| name == named);
        *part = Some(place.ok_or(format!("{} may not be chosen", named.join("/")))?);
    }
    let part = |slot: Slot| parts[slot as usize].ok_or(format!("it has no {}", slot.name()));
    let (zener, bias_line) = (part(Slot::Zener)?, part(Slot::BiasLine)?);
    let chosen = choose_rz(&shop.zeners[zener], &shop.bias_lines[bias_line], shop.rail);
    let chosen = chosen.ok_or("no RZ of its line holds")?;
    let pot = shop.pots().into_iter().find(|(pot, _)| *pot == parts[Slot::Pot as usize]);
    let sides = [zener, bias_line, part(Slot::DividerLine)?];
    let reference = pot.and_then(|pot| shop.reference(sides, pot, &chosen));
    let reference = reference.ok_or("there is no divider of its line and pot")?;
    let values = [reference.bias.rz, reference.divider.upper, reference.divider.ri].map(|r| r.ohm);
    if row.values_ohm != values {
        return Err(format!("its values should be {values:?}"));
    }
    let amp = shop.amplifier(part(Slot::Amplifier)?).ok_or("its amplifier fails by itself")?;
    let power = shop.power(part(Slot::Pass)?, parts[Slot::Heatsink as usize]);
    let power = power.ok_or("its transistor can't be mounted so, or fails by itself")?;
    let key = key(shop, bound, &reference, &amp, &power);
    let key = key.ok_or("its amplifier fails beside its reference or transistor")?;
    let [_, cost, stress, loss] = key.0;
    if [row.cost, row.stress, row.loss].map(rounded) != [cost, stress, loss] {
        return Err(format!("cost, stress and loss are {cost}, {stress}, {loss}"));
    }
    Ok((parts, key))
}

/// The key of a combination of sides that hold by themselves; None where a check fails in which the
/// amplifier meets one of the others.
pub(crate) fn key(shop: &Shop, bound: &Bound, r: &Reference, a: &Side, p: &Side) -> Option<Key> {
    let amp = &shop.amplifiers[a.main];
    let meeting = WhileHolding::over(|t| {
        drive::checks(amp, &shop.transistors[p.main], shop.rail, t)?;
        shop.input_checks(r, amp, t)
    });
    let [cost, current_a, stress] = p.share;
    let with_meeting = [cost, current_a, stress.max(meeting.ok()?)];
    let figures = bound.figures(&r.side.share, &a.share, &with_meeting).map(rounded);
    let parts = together(&together(&r.side.parts, &a.parts), &p.parts);
    Some((figures, shop.by_name(&parts)))
}
