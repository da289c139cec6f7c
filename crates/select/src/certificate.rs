//! Claims that show that a shortlist left nothing out, for a checker that does not search.
//!
//! What a claim says, and why all together are a proof, is on the page `docs/certificate.md`; the
//! checker is the crate `certificate-check`. Here the claims are found, by going through the sides
//! once more when the search has ended. Nothing of the search is used but its list: what the search
//! would have overlooked turns up here as [`CertificateError::Overlooked`].
//!
//! | module | what it finds |
//! |---|---|
//! | `mark` | what ranks after the last row |
//! | `sides` | the choices of each side that hold by themselves, and what they add |
//! | `pairs` | groups of amplifiers that are out beside a reference |

mod mark;
mod pairs;
mod sides;

use crate::candidate::Candidate;
use crate::grove::Share;
use crate::problem::{Ground, Problem};
use crate::rest::keep_few;
use crate::sides::{meet_power, meet_reference};
use circuit::check::Check;
use circuit::slot::Slot;
use mark::Mark;
use pairs::{AmplifierTree, Groups};
use rayon::prelude::*;
use sides::{Amplifier, Amplifiers, Pass, Powers, Reference};
use std::collections::HashSet;
use std::fmt;
use std::ops::Range;

/// A figure of each kind that ranks: no choice of a side adds less than one of a few steps.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Step {
    /// Cost.
    pub cost: f64,
    /// Current drawn beside the load, A.
    pub current_a: f64,
    /// Greatest utilisation of damage checks.
    pub stress: f64,
}

/// Why no pair of one of some references and one of a group of amplifiers is in the list.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Because {
    /// The check fails between them.
    Fails(Check),
    /// Whatever they are part of ranks after the last row.
    RanksAfter,
}

/// A group of amplifiers, the references that it is claimed for, and why.
#[derive(Debug, Clone, PartialEq)]
pub struct Group {
    /// Why.
    pub because: Because,
    /// Places in `amplifier_order`.
    pub amplifiers: Range<u32>,
    /// Open references, counted from 0.
    pub references: Vec<Range<u32>>,
}

/// What is claimed of the combinations that a shortlist leaves out.
///
/// *Open* are the amplifiers and power sides that hold by themselves, but for transistors that no
/// amplifier drives and amplifiers that drive none of the others; and the references that hold by
/// themselves and beside the best figures of all open amplifiers, and that do not rank after the last
/// row with the least that the other sides add. They are counted by zener, bias line, divider line,
/// pot.
#[derive(Debug, Clone, PartialEq)]
pub struct Claims {
    /// Every open amplifier adds at least one of these.
    pub least_amplifier: Vec<Step>,
    /// Every open power side adds at least one of these.
    pub least_power: Vec<Step>,
    /// Places of all amplifiers in an order in which groups of them are ranges.
    pub amplifier_order: Vec<u32>,
    /// Pairs of reference and amplifier that are out.
    pub groups: Vec<Group>,
    /// The other pairs, each to be tried with every power side: reference and place of the amplifier.
    pub pairs: Vec<(u32, u32)>,
}

/// Why a list can't be certified.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum CertificateError {
    /// So many reference sides hold and could be in the list that their claims would fill memory.
    TooLarge,
    /// A combination ranks before the last row and is not in the list.
    Overlooked,
}

impl fmt::Display for CertificateError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::TooLarge => write!(
                f,
                "no certificate is made: more than {MOST_REFERENCES} reference sides would have to \
                 be spoken of; ask for fewer rows with --top, or tighten the sheet"
            ),
            Self::Overlooked => {
                write!(f, "a combination that is not in the list would rank among its rows")
            }
        }
    }
}

impl std::error::Error for CertificateError {}

/// Reference sides that are spoken of one by one at most.
const MOST_REFERENCES: usize = 1_000_000;

/// Steps of the power side, and of the amplifier.
const POWER_STEPS: usize = 48;
const AMPLIFIER_STEPS: usize = 12;

/// Finds the claims for the `top` first candidates of a problem as [`crate::ranking::shortlist`] gives
/// them, without a spread.
///
/// # Errors
/// [`CertificateError::Overlooked`] where the list is not that of the problem.
pub fn certify(
    problem: &Problem<'_>,
    candidates: &[Candidate],
    top: usize,
) -> Result<Claims, CertificateError> {
    let ground = Ground::new(problem);
    let mark = Mark::new(&ground, candidates, top);
    let mut amplifiers = Amplifiers::new(&ground);
    let mut powers = Powers::new(&ground);

    strike_out_undriven(&ground, &mut amplifiers, &mut powers);
    let tree = AmplifierTree::new(&amplifiers);
    let least_amplifier = least(amplifiers.alive().map(|a| a.share), AMPLIFIER_STEPS);
    let least_power = least(powers.shares(), POWER_STEPS);

    let others = (least_amplifier.as_slice(), least_power.as_slice());
    let references = sides::references(&ground, &mark, others, tree.best());
    if references.len() > MOST_REFERENCES {
        return Err(CertificateError::TooLarge);
    }
    // As the checker does: power sides that are late beside the least of all references.
    let corner = references.iter().map(|r| r.share).reduce(|mut least, share| {
        least.least(&share);
        least
    });
    let corner: Vec<Share> = corner.into_iter().collect();
    powers.retain(|mount| !mark.is_after(&corner, &least_amplifier, &[mount.share], mount.names));
    let mut groups = Groups::default();
    let mut pairs = Vec::new();
    for (number, reference) in (0u32..).zip(&references) {
        let failing = |amp: &_| sides::failing_input(&ground, reference, amp);
        let ranks_after = |share: Share, names| {
            let names = mark::together(reference.names, names);
            mark.is_after(&[reference.share], &[share], &least_power, names)
        };
        let left = tree.sort_out(failing, ranks_after, |because, group| {
            groups.add(because, group, number);
        });
        pairs.extend(left.into_iter().map(|amplifier| (number, amplifier)));
    }
    let listed: HashSet<_> = candidates.iter().map(|c| c.places).collect();
    let shown = Shown { ground: &ground, mark: &mark, amplifiers: &amplifiers, powers: &powers };
    let is_shown = |&(number, amplifier): &(u32, u32)| {
        let reference = references.get(number as usize);
        reference.is_some_and(|reference| shown.pair(reference, amplifier, &listed))
    };
    if !pairs.par_iter().all(is_shown) {
        return Err(CertificateError::Overlooked);
    }
    Ok(Claims {
        least_amplifier: steps(&least_amplifier),
        least_power: steps(&least_power),
        amplifier_order: amplifiers.order,
        groups: groups.into_claims(),
        pairs,
    })
}

/// Strikes out transistors that no amplifier drives, and amplifiers that drive none of the rest.
fn strike_out_undriven(ground: &Ground<'_>, amplifiers: &mut Amplifiers, powers: &mut Powers) {
    let drives =
        |amp: &Amplifier, pass: &Pass| meet_power(ground, &amp.at_rail, &pass.figures).is_some();
    powers.passes.retain(|pass| amplifiers.alive().any(|amp| drives(amp, pass)));
    for amp in &mut amplifiers.by_place {
        amp.take_if(|amp| !powers.passes.iter().any(|pass| drives(amp, pass)));
    }
}

/// A pair of reference and amplifier with all power sides that are left.
struct Shown<'c, 'p> {
    ground: &'c Ground<'p>,
    mark: &'c Mark,
    amplifiers: &'c Amplifiers,
    powers: &'c Powers,
}

impl Shown<'_, '_> {
    /// Every combination of the pair fails, ranks after the last row, or is in the list.
    fn pair(
        &self,
        reference: &Reference,
        amplifier: u32,
        listed: &HashSet<[Option<u32>; Slot::COUNT]>,
    ) -> bool {
        let Some(amp) = &self.amplifiers.by_place[amplifier as usize] else { return true };
        let figures = crate::sides::reference::ReferenceFigures::Complete(reference.complete);
        let Some(at_input) = meet_reference(self.ground, &figures, &amp.at_rail) else {
            return true;
        };
        let names = mark::together(reference.names, amp.names);
        let share = Share { stress: amp.share.stress.max(at_input), ..amp.share };
        self.powers.passes.iter().all(|pass| {
            let Some(at_output) = meet_power(self.ground, &amp.at_rail, &pass.figures) else {
                return true;
            };
            let amp = Share { stress: share.stress.max(at_output), ..share };
            pass.mounts.iter().all(|mount| {
                let names = mark::together(names, mount.names);
                self.mark.is_after(&[reference.share], &[amp], &[mount.share], names)
                    || listed.contains(&reference.places(amplifier, pass.place, mount.sink))
            })
        })
    }
}

/// A few steps for the shares of a side.
fn least(shares: impl Iterator<Item = Share>, most: usize) -> Vec<Share> {
    let mut shares: Vec<Share> = shares.collect();
    keep_few(&mut shares, most);
    shares
}

fn steps(shares: &[Share]) -> Vec<Step> {
    let step = |s: &Share| Step { cost: s.cost, current_a: s.current_a, stress: s.stress };
    shares.iter().map(step).collect()
}
