//! The claims about all combinations that are not listed.

use crate::certificate::Claims;
use crate::rank::Share;
use crate::rows::{Listed, key};
use crate::sides::{Parts, Reference, Shop, Side, biased, together};
use crate::{Refused, refused};
use circuit::check::{Check, Finding, WhileHolding};
use circuit::drive;
use circuit::reference::choose_rz;
use circuit::slot::Slot;
use std::collections::HashSet;

/// Proves that every combination is listed, fails a check, or ranks after the last row.
pub(crate) fn prove(shop: &Shop, listed: &Listed, claims: &Claims) -> Result<(), Refused> {
    let mut open = Open::new(shop, listed);
    least(shop, "least_amplifier", &claims.least_amplifier, open.alive())?;
    least(shop, "least_power", &claims.least_power, open.powers.iter())?;
    let references = open.references(claims);
    open.strike_out_late_powers(&references, claims);
    let mut covered = open.groups(&references, claims)?;
    for &[number, place] in &claims.pairs {
        let pair = references.get(number).zip(open.amplifiers.get(place).and_then(Option::as_ref));
        let Some((reference, amp)) = pair else { continue };
        open.try_pair(reference, amp)?;
        covered[number].insert(place);
    }
    for (reference, covered) in references.iter().zip(&covered) {
        if let Some(amp) = open.alive().find(|amp| !covered.contains(&amp.main)) {
            let parts = together(&reference.side.parts, &amp.parts);
            return Err(refused("covers", format!("no claim covers {}", shop.spell(&parts))));
        }
    }
    Ok(())
}

/// Every choice of a side adds at least one of a few shares.
fn least<'s>(
    shop: &Shop,
    claim: &str,
    least: &[Share],
    mut choices: impl Iterator<Item = &'s Side>,
) -> Result<(), Refused> {
    let is_at_least = |side: &Side, share: &Share| (0..3).all(|i| side.share[i] >= share[i]);
    let less = choices.find(|side| !least.iter().any(|share| is_at_least(side, share)));
    less.map_or(Ok(()), |side| {
        Err(refused(claim, format!("{} adds {:?}", shop.spell(&side.parts), side.share)))
    })
}

/// What has not been struck out.
struct Open<'c, 'a> {
    shop: &'c Shop<'a>,
    listed: &'c Listed<'c>,
    /// By place; None for an amplifier that is out.
    amplifiers: Vec<Option<Side>>,
    powers: Vec<Side>,
}

impl<'c, 'a> Open<'c, 'a> {
    /// The amplifiers and power sides that hold by themselves, but for transistors that no amplifier
    /// drives and amplifiers that drive none of the others.
    fn new(shop: &'c Shop<'a>, listed: &'c Listed<'c>) -> Self {
        let sinks = || std::iter::once(None).chain((0..shop.rows.heatsinks.len()).map(Some));
        let mounted = |pass| sinks().filter_map(move |sink| shop.power(pass, sink));
        let mut powers: Vec<Side> = (0..shop.transistors.len()).flat_map(mounted).collect();
        let mut amplifiers: Vec<Option<Side>> =
            (0..shop.amplifiers.len()).map(|place| shop.amplifier(place)).collect();
        let drives = |amp: &Side, pass: usize| {
            let (amp, pass) = (&shop.amplifiers[amp.main], &shop.transistors[pass]);
            WhileHolding::over(|t| drive::checks(amp, pass, shop.rail, t)).is_ok()
        };
        let mut passes: HashSet<usize> = powers.iter().map(|power| power.main).collect();
        passes.retain(|pass| amplifiers.iter().flatten().any(|amp| drives(amp, *pass)));
        powers.retain(|power| passes.contains(&power.main));
        for amp in &mut amplifiers {
            amp.take_if(|amp| !passes.iter().any(|pass| drives(amp, *pass)));
        }
        Self { shop, listed, amplifiers, powers }
    }

    fn alive(&self) -> impl Iterator<Item = &Side> {
        self.amplifiers.iter().flatten()
    }

    fn after(&self, r: &[Share], a: &[Share], p: &[Share], parts: &Parts) -> bool {
        self.listed.bound.is_after(r, a, p, self.shop.by_name(parts))
    }

    /// The reference sides that hold by themselves and beside the best figures of all amplifiers, and
    /// do not rank after the last row. They are counted by zener, bias line, divider line, pot.
    fn references(&self, claims: &Claims) -> Vec<Reference> {
        let (shop, rows) = (self.shop, self.shop.rows);
        let best = self.alive().map(|amp| shop.amplifiers[amp.main]);
        let Some(best) = best.reduce(|a, b| a.better_of(&b)) else { return Vec::new() };
        let is_late = |share: Share, parts: &Parts| {
            self.after(&[share], &claims.least_amplifier, &claims.least_power, parts)
        };
        let pots = shop.pots();
        let lines: Vec<f64> = rows.divider_lines.iter().map(|row| shop.price(row)).collect();
        let cheapest_line = lines.iter().copied().fold(f64::INFINITY, f64::min);
        let cheapest_pot = pots.iter().map(|pot| pot.1).fold(f64::INFINITY, f64::min);
        let lines_of = |zener| (0..shop.bias_lines.len()).map(move |line| (zener, line));
        let mut found = Vec::new();
        for (zener, bias_line) in (0..shop.zeners.len()).flat_map(lines_of) {
            let chosen = choose_rz(&shop.zeners[zener], &shop.bias_lines[bias_line], shop.rail);
            let Some(chosen) = chosen else { continue };
            let price = shop.price(rows.zeners[zener]) + shop.price(rows.bias_lines[bias_line]);
            // Before a divider is chosen: at least one piece of its line, and no current through it.
            let surely_late = |line: f64, pot: f64| {
                let share = [price + line + pot, chosen.0.iz_nominal_a, chosen.1];
                chosen.0.vz_nominal_v >= 0.0 && is_late(share, &biased(zener, bias_line))
            };
            if surely_late(cheapest_line, cheapest_pot) {
                continue;
            }
            for (line, line_price) in lines.iter().enumerate() {
                for pot in pots.iter().filter(|pot| !surely_late(*line_price, pot.1)) {
                    let reference = shop.reference([zener, bias_line, line], *pot, &chosen);
                    found.extend(reference.filter(|r| {
                        WhileHolding::over(|t| shop.input_checks(r, &best, t)).is_ok()
                            && !is_late(r.side.share, &r.side.parts)
                    }));
                }
            }
        }
        found
    }

    /// Takes out power sides that rank after the last row beside the least of all open references.
    fn strike_out_late_powers(&mut self, references: &[Reference], claims: &Claims) {
        let shares = references.iter().map(|reference| reference.side.share);
        let least = shares.reduce(|a, b| std::array::from_fn(|i| a[i].min(b[i])));
        let least: Vec<Share> = least.into_iter().collect();
        let powers = std::mem::take(&mut self.powers).into_iter();
        let late = |p: &Side| self.after(&least, &claims.least_amplifier, &[p.share], &p.parts);
        self.powers = powers.filter(|power| !late(power)).collect();
    }

    /// Proves the claims about groups: for each reference the amplifiers of its groups.
    fn groups(&self, left: &[Reference], claims: &Claims) -> Result<Vec<HashSet<usize>>, Refused> {
        let mut covered = vec![HashSet::new(); left.len()];
        for group in &claims.groups {
            let [from, to] = group.amplifiers;
            let name = format!("{} of amplifiers {from} to {to}", group.because);
            let places = claims.amplifier_order.get(from..to).unwrap_or_default();
            let amps = places.iter().filter_map(|place| self.amplifiers.get(*place)?.as_ref());
            let sides = amps.clone().map(|amp| (self.shop.amplifiers[amp.main], amp.share));
            // The best figures of the group, and the least that one of it adds.
            let best = sides.reduce(|(a, s), (b, t)| {
                (a.better_of(&b), std::array::from_fn(|i| s[i].min(t[i])))
            });
            let Some((best, share)) = best else { continue };
            let only = if amps.clone().count() == 1 { amps.clone().next() } else { None };
            let check = Check::named(&group.because);
            for number in group.references.iter().flat_map(|[from, to]| *from..*to) {
                let no_such = || refused(&name, format!("there is no reference {number}"));
                let reference = left.get(number).ok_or_else(no_such)?;
                let is_true = if group.because == "rank" {
                    let parts = only.map_or([None; Slot::COUNT], |amp| amp.parts);
                    let parts = together(&reference.side.parts, &parts);
                    self.after(&[reference.side.share], &[share], &claims.least_power, &parts)
                } else {
                    let mut found: Vec<Finding> = Vec::new();
                    let _ = self.shop.input_checks(reference, &best, &mut found);
                    found.iter().any(|f| Some(f.check) == check && !f.holds())
                };
                if !is_true {
                    let reference = self.shop.spell(&reference.side.parts);
                    return Err(refused(&name, format!("not beside {reference}")));
                }
                covered[number].extend(amps.clone().map(|amp| amp.main));
            }
        }
        Ok(covered)
    }

    /// Tries a pair of reference and amplifier with every open power side.
    fn try_pair(&self, reference: &Reference, amp: &Side) -> Result<(), Refused> {
        for power in &self.powers {
            let parts = together(&together(&reference.side.parts, &amp.parts), &power.parts);
            if self.after(&[reference.side.share], &[amp.share], &[power.share], &parts)
                || self.listed.rows.contains(&parts)
            {
                continue;
            }
            let bound = &self.listed.bound;
            let key = key(self.shop, bound, reference, amp, power);
            if key.is_some_and(|key| bound.last.is_none_or(|last| key <= last)) {
                let parts = self.shop.spell(&parts);
                return Err(refused("rows", format!("{parts} is not listed, and not later")));
            }
        }
        Ok(())
    }
}
