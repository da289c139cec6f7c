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
//! | `pairs` | groups of amplifiers beside which a check fails |

mod mark;
mod pairs;
mod sides;

use crate::candidate::Candidate;
use crate::grove::Share;
use crate::problem::{Ground, Problem};
use crate::rest::keep_few;
use crate::sides::{meet_power, meet_reference};
use circuit::check::{Check, WhileHolding};
use circuit::drive;
use circuit::slot::Slot;
use mark::Mark;
use pairs::{AmplifierTree, FailsByGroup};
use sides::{Amplifiers, Pass, Powers, Reference};
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

/// A check that fails between each of some rows and each of a group of amplifiers.
#[derive(Debug, Clone, PartialEq)]
pub struct Fails {
    /// The check.
    pub check: Check,
    /// Places in `amplifier_order`.
    pub amplifiers: Range<u32>,
    /// Transistors by place, or references by number among those that are left.
    pub rows: Vec<Range<u64>>,
}

/// What is claimed of the combinations that a shortlist leaves out.
#[derive(Debug, Clone, PartialEq)]
pub struct Claims {
    /// Places of all amplifiers in an order in which groups of them are ranges.
    pub amplifier_order: Vec<u32>,
    /// Transistors that amplifiers can't drive.
    pub output: Vec<Fails>,
    /// Every amplifier that is left adds at least one of these.
    pub least_amplifier: Vec<Step>,
    /// Every power side that is left adds at least one of these.
    pub least_power: Vec<Step>,
    /// Numbers of reference sides: all others are out.
    pub references: Vec<Range<u64>>,
    /// Every reference side that is left adds at least one of these.
    pub least_reference: Vec<Step>,
    /// Numbers of power sides: all others are out.
    pub powers: Vec<Range<u64>>,
    /// References that amplifiers don't suit.
    pub input: Vec<Fails>,
    /// Reference (number among those that are left) and amplifier (place) to be tried with every
    /// power side that is left.
    pub pairs: Vec<(u64, u32)>,
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
const MOST_REFERENCES: usize = 4_000_000;

/// Steps of the power side, and of the other two.
const POWER_STEPS: usize = 48;
const OTHER_STEPS: usize = 12;

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

    let output = undriven(&ground, &mut amplifiers, &mut powers);
    let tree = AmplifierTree::new(&amplifiers);
    let least_amplifier = least(amplifiers.alive().map(|a| a.share), OTHER_STEPS);
    let least_power = least(powers.shares(), POWER_STEPS);

    let others = (least_amplifier.as_slice(), least_power.as_slice());
    let references = sides::references(&ground, &mark, others, tree.best());
    if references.len() > MOST_REFERENCES {
        return Err(CertificateError::TooLarge);
    }
    let least_reference = least(references.iter().map(|r| r.share), OTHER_STEPS);
    powers.retain(|_, mount, share| {
        !mark.is_after(&least_reference, &least_amplifier, &[share], mount.names)
    });

    let mut input = FailsByGroup::default();
    let mut pairs = Vec::new();
    for (number, reference) in (0u64..).zip(&references) {
        let test = |amp: &_| sides::failing_input(&ground, reference, amp);
        let is_near = |share: Share, names| {
            !mark.is_after(
                &[reference.share],
                &[share],
                &least_power,
                mark::together(reference.names, names),
            )
        };
        let open = tree.sort_out(test, is_near, |check, group| input.add(check, group, number));
        pairs.extend(open.into_iter().map(|amplifier| (number, amplifier)));
    }
    let claims = Claims {
        amplifier_order: amplifiers.order.clone(),
        output,
        least_amplifier: steps(&least_amplifier),
        least_power: steps(&least_power),
        references: ranges(references.iter().map(|r| r.number)),
        least_reference: steps(&least_reference),
        powers: ranges(powers.numbers()),
        input: input.into_claims(),
        pairs,
    };
    let listed: HashSet<_> = candidates.iter().map(|c| c.places).collect();
    let shown = Shown { ground: &ground, mark: &mark, amplifiers: &amplifiers, powers: &powers };
    let all_hold = claims.pairs.iter().all(|&(number, amplifier)| {
        references
            .get(number as usize)
            .is_some_and(|reference| shown.pair(reference, amplifier, &listed))
    });
    if all_hold { Ok(claims) } else { Err(CertificateError::Overlooked) }
}

/// Strikes out transistors that no amplifier drives and amplifiers that drive none of the rest, and
/// tells the checks that fail.
fn undriven(
    ground: &Ground<'_>,
    amplifiers: &mut Amplifiers,
    powers: &mut Powers,
) -> Vec<Fails> {
    let rail = ground.rail();
    let failing = |pass: &Pass, amp: &_| {
        WhileHolding::over(|t| drive::checks(amp, &pass.figures, rail, t)).err()
    };
    let mut claims = FailsByGroup::default();
    let tree = AmplifierTree::new(amplifiers);
    powers.passes.retain(|pass| {
        let mut found = Vec::new();
        let is_driven = tree.some_holds(|amp| failing(pass, amp), &mut found);
        if !is_driven {
            found.into_iter().for_each(|(check, group)| claims.add(check, group, pass.place));
        }
        is_driven
    });
    for (place, amplifier) in (0u32..).zip(&amplifiers.order) {
        let Some(amp) = &amplifiers.by_place[*amplifier as usize] else { continue };
        let checks: Option<Vec<Check>> =
            powers.passes.iter().map(|pass| failing(pass, &amp.at_rail)).collect();
        if let Some(checks) = checks {
            for (pass, check) in powers.passes.iter().zip(checks) {
                claims.add(check, place..place + 1, pass.place);
            }
            amplifiers.by_place[*amplifier as usize] = None;
        }
    }
    claims.into_claims()
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

/// Rising numbers as ranges.
fn ranges(numbers: impl Iterator<Item = u64>) -> Vec<Range<u64>> {
    let mut ranges: Vec<Range<u64>> = Vec::new();
    numbers.for_each(|number| append(&mut ranges, number));
    ranges
}

/// Adds a number that is greater than all before it.
fn append(ranges: &mut Vec<Range<u64>>, number: u64) {
    match ranges.last_mut() {
        Some(last) if last.end == number => last.end = number + 1,
        _ => ranges.push(number..number + 1),
    }
}
