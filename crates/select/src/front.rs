//! The front: candidates that no other equals or beats on cost, loss and stress at once.
//!
//! Beside one amplifier the reference sides that suit it and the power sides that it drives are
//! independent of each other, and cost, loss and stress are each monotone in what either adds. So only
//! those reference sides matter that no other beats in cost, current and stress, and only those power
//! sides that no other beats in cost and stress: few of each, whose pairs are all looked at.
//!
//! The same two lists beside the best figures of a box of amplifiers bound every amplifier of the box.
//! Boxes are taken in the order of the best that they could do, and one is left out when something on
//! the front already beats every pair that it could have. The lists of a box are made from those of
//! the box that it is a part of, see `unbeaten`.

use crate::beside::{AmplifierNode, Powers, References};
use crate::candidate::Candidate;
use crate::company::{ROOT, Sides};
use crate::grove::{Names, Share};
use crate::limit::{self, SearchError};
use crate::problem::{Ground, Problem};
use crate::rest::Rest;
use crate::sides::amplifier::AmplifierMark;
use crate::sides::{meet_power, meet_reference};
use crate::unbeaten::{Choice, Clearly, Unbeaten, by_name};
use circuit::merit;
use quantity::digits::{compare, rounded};
use std::cmp::{Ordering, Reverse};
use std::collections::BinaryHeap;
use std::rc::Rc;

/// The front in rank order. Of several candidates with equal figures the first by name stays.
///
/// # Errors
/// [`SearchError::TooLarge`] where the search would take more memory than it may.
pub fn front(problem: &Problem<'_>) -> Result<Vec<Candidate>, SearchError> {
    let ground = Ground::new(problem);
    let mut survey = Survey {
        ground: &ground,
        sides: Sides::new(&ground),
        clearly: Clearly::of(problem),
        found: Vec::new(),
    };
    survey.run()?;
    let mut front: Vec<Candidate> = survey.found.into_iter().map(|f| f.candidate).collect();
    front.sort_by(|a, b| {
        compare(a.score, b.score)
            .then_with(|| compare(a.cost, b.cost))
            .then_with(|| compare(a.stress, b.stress))
            .then_with(|| compare(a.loss, b.loss))
    });
    Ok(front)
}

/// Cost, loss and stress at ten digits, with the places by name in the order of the ranking.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Figures {
    cost: f64,
    loss: f64,
    stress: f64,
    names: Names,
}

impl Figures {
    /// No candidate with figures and names no better than the other's belongs on the front.
    fn beats(&self, other: &Figures) -> bool {
        self.cost <= other.cost
            && self.loss <= other.loss
            && self.stress <= other.stress
            && (self.cost < other.cost
                || self.loss < other.loss
                || self.stress < other.stress
                || self.names < other.names)
    }
}

/// The reference and power sides that matter beside an amplifier node.
struct Company {
    references: Unbeaten,
    powers: Unbeaten,
    /// What a reference and a power side add together, of the pairs that are not beaten.
    pairs: Rest,
}

/// An amplifier node with the company of the node that it is a part of, and the least score, at even
/// weights, that it could have part in.
struct Promising {
    least: f64,
    node: u32,
    company: Rc<Company>,
}

impl Ord for Promising {
    fn cmp(&self, other: &Self) -> Ordering {
        self.least.total_cmp(&other.least).then_with(|| self.node.cmp(&other.node))
    }
}

impl PartialOrd for Promising {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl PartialEq for Promising {
    fn eq(&self, other: &Self) -> bool {
        self.cmp(other) == Ordering::Equal
    }
}

impl Eq for Promising {}

struct Found {
    figures: Figures,
    candidate: Candidate,
}

struct Survey<'g, 'p> {
    ground: &'g Ground<'p>,
    sides: Sides<'g, 'p>,
    clearly: Clearly,
    found: Vec<Found>,
}

impl Survey<'_, '_> {
    fn run(&mut self) -> Result<(), SearchError> {
        if self.sides.roots().is_none() {
            return Ok(());
        }
        let all = Rc::new(self.company(ROOT, None)?);
        let mut waiting = BinaryHeap::new();
        waiting.extend(self.promise(ROOT, &all).map(Reverse));
        while let Some(Reverse(Promising { least, node, company })) = waiting.pop() {
            // More may be found since.
            let Some(now) = self.promise(node, &company) else { continue };
            if now.least > least {
                waiting.push(Reverse(now));
                continue;
            }
            let company = Rc::new(self.company(node, Some(&company))?);
            if let AmplifierMark::One(_) = self.sides.amplifiers.get(node).mark {
                self.pair_off(node, &company);
            } else {
                for part in self.sides.amplifier_parts(node) {
                    waiting.extend(self.promise(part, &company).map(Reverse));
                }
            }
            limit::check(self.sides.memory(), waiting.len())?;
        }
        Ok(())
    }

    /// The reference and power sides that nothing beats beside the best figures of an amplifier node,
    /// made from the company of a node that it is a part of. Whatever suits one amplifier suits those
    /// figures, with no more stress.
    fn company(&mut self, node: u32, above: Option<&Company>) -> Result<Company, SearchError> {
        /// So many pairs are kept apart: an amplifier costs much more to look into than to bound.
        const MOST: usize = 512;
        let amp = *self.sides.amplifiers.get(node);
        let Self { ground, sides, clearly, found } = self;
        let is_beaten = |reference: &Choice, power: &Choice| {
            let figures = least_figures(ground, &amp, reference, power);
            found.iter().any(|f| f.figures.beats(&figures))
        };
        let powers = Unbeaten::beside(
            sides,
            &Powers { ground, amp },
            above.map(|above| &above.powers),
            clearly,
            |power| {
                above.is_some_and(|above| above.references.choices().all(|r| is_beaten(r, power)))
            },
        )?;
        let least_stress =
            powers.choices().map(|power| power.share.stress).fold(f64::INFINITY, f64::min);
        let references = Unbeaten::beside(
            sides,
            &References { ground, amp, least_stress },
            above.map(|above| &above.references),
            clearly,
            |reference| powers.choices().all(|power| is_beaten(reference, power)),
        )?;
        let pairs = references
            .choices()
            .flat_map(|r| powers.choices().map(move |p| (r, p)))
            .filter(|(r, p)| !is_beaten(r, p))
            .map(|(r, p)| r.share.beside(&p.share));
        let pairs = Rest::of_at_most(pairs, MOST);
        Ok(Company { references, powers, pairs })
    }

    /// What an amplifier node could do at best; None where all of it is beaten.
    fn promise(&self, node: u32, company: &Rc<Company>) -> Option<Promising> {
        let amplifier = self.sides.amplifiers.get(node);
        let root = self.sides.references.get(ROOT);
        let power = self.sides.powers.get(ROOT);
        let names: Names = std::array::from_fn(|slot| {
            amplifier.names[slot] + root.names[slot] + power.names[slot]
        });
        meet_power(self.ground, &amplifier.figures, &power.figures)?;
        meet_reference(self.ground, &root.figures, &amplifier.figures)?;
        let mut least: Option<f64> = None;
        for share in company.pairs.shares() {
            let figures = figures(self.ground, &share.beside(&amplifier.share), names);
            let score = figures.cost * figures.loss * figures.stress;
            if least.is_none_or(|least| score < least) && !self.is_beaten(&figures) {
                least = Some(score);
            }
        }
        least.map(|least| Promising { least, node, company: Rc::clone(company) })
    }

    fn is_beaten(&self, figures: &Figures) -> bool {
        self.found.iter().any(|f| f.figures.beats(figures))
    }

    /// All pairs of the reference and power sides that matter beside an amplifier.
    fn pair_off(&mut self, amplifier: u32, company: &Company) {
        let amp = *self.sides.amplifiers.get(amplifier);
        for p in company.powers.choices() {
            for r in company.references.choices() {
                let nodes = [r.node, amplifier, p.node];
                let meeting = r.share.stress.max(p.share.stress);
                let Some(candidate) = self.sides.candidate(nodes, meeting) else { continue };
                let names: Names =
                    std::array::from_fn(|slot| r.names[slot] + amp.names[slot] + p.names[slot]);
                let figures = Figures {
                    cost: rounded(candidate.cost),
                    loss: rounded(candidate.loss),
                    stress: rounded(candidate.stress),
                    names: by_name(&names),
                };
                if !self.is_beaten(&figures) {
                    self.found.retain(|f| !figures.beats(&f.figures));
                    self.found.push(Found { figures, candidate });
                }
            }
        }
    }
}

/// At most the figures of any candidate of an amplifier node beside these choices.
fn least_figures(
    ground: &Ground<'_>,
    amp: &AmplifierNode,
    reference: &Choice,
    power: &Choice,
) -> Figures {
    let names =
        std::array::from_fn(|slot| reference.names[slot] + amp.names[slot] + power.names[slot]);
    figures(ground, &reference.share.beside(&power.share).beside(&amp.share), names)
}

/// At most the figures of any candidate that adds these shares, with these names or later ones.
fn figures(ground: &Ground<'_>, share: &Share, names: Names) -> Figures {
    // Sums made in another order than a candidate's may differ in the last bits.
    const LAST_BITS: f64 = 1.0 - 1e-14;
    Figures {
        cost: rounded(share.cost * LAST_BITS),
        loss: rounded(merit::loss(ground.rail(), share.current_a) * LAST_BITS),
        stress: rounded(share.stress),
        names: by_name(&names),
    }
}
