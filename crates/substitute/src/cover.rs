//! The fewest new parts with which every design can be mended, and among those the cheapest over all
//! boards, with joint stock where it counts.
//!
//! An exact search of its own in place of an integer programming library: the aim has three levels
//! (designs left out, parts, cost) that weights in one linear sum would blur at the tenth digit, the
//! options of one design run into thousands of which nearly all are dominated, and an answer needs
//! only a handful of parts. The search takes the design with the fewest options that no part in hand
//! serves, and tries each of them; so every solution is met on some path. A path is left where even its
//! bound is no better than the best known: parts in hand, and one more for each design of a set in
//! which no two could share a new part; cost so far, and for the rest the cheapest option of each.

use quantity::digits::compare;
use std::cmp::Ordering;
use std::collections::BTreeMap;

/// A way to mend one design.
#[derive(Debug, Clone, PartialEq)]
pub struct CoverOption {
    /// The new parts it takes, rising, each once.
    pub parts: Vec<u32>,
    /// Pieces that it takes from a stock that counts: part and pieces for all boards of the design.
    pub pieces: Vec<(u32, u64)>,
    /// What all boards of the design cost with it.
    pub cost: f64,
}

/// What was found.
#[derive(Debug, Clone, PartialEq)]
pub struct Cover {
    /// For each design the option taken, by its place; None: left out, for joint stock does not reach.
    pub picks: Vec<Option<usize>>,
    /// The new parts, rising.
    pub parts: Vec<u32>,
    /// What the boards of all designs that are mended cost.
    pub cost: f64,
    /// Nothing better was left out. False where the search gave up; then a better one may exist.
    pub exact: bool,
}

/// Steps after which the search gives up.
const MOST_STEPS: u64 = 200_000;

/// Finds the options that leave out the fewest designs, take the fewest new parts, and cost least, in
/// this order. `stock` tells the pieces of each part, by its number, for options that count them.
pub fn cover(designs: &[Vec<CoverOption>], stock: &BTreeMap<u32, f64>) -> Cover {
    let reduced = reduced(designs);
    let mut search = Search {
        least_cost: reduced
            .iter()
            .map(|options| options.iter().map(|o| o.option.cost).fold(f64::INFINITY, f64::min))
            .collect(),
        serves: serves(&reduced),
        designs: reduced,
        stock: stock.clone(),
        best: None,
        steps: 0,
    };
    let mut state = State::new(designs.len());
    for (design, options) in search.designs.iter().enumerate() {
        if options.is_empty() {
            state.left_out += 1;
            state.decided[design] = Some(None);
        }
    }
    search.go(&mut state);
    let exact = search.steps <= MOST_STEPS;
    match search.best {
        Some(best) => {
            let parts = best.parts;
            Cover { picks: best.picks, parts, cost: best.cost, exact }
        }
        None => Cover { picks: vec![None; designs.len()], parts: Vec::new(), cost: 0.0, exact },
    }
}

/// An option with its place among those of its design.
#[derive(Clone)]
struct Placed<'o> {
    place: usize,
    option: &'o CoverOption,
}

/// What an option takes: its parts, and the pieces of those whose stock is counted.
type Taken<'o> = (&'o [u32], &'o [(u32, u64)]);

/// The options without those that another one of any use makes needless: of equal parts the cheaper;
/// and a part that stands alone and uncounted wherever it stands, where another serves all its designs
/// at no more cost.
fn reduced(designs: &[Vec<CoverOption>]) -> Vec<Vec<Placed<'_>>> {
    let mut kept: Vec<Vec<Placed<'_>>> = Vec::new();
    for options in designs {
        let mut by_parts: BTreeMap<Taken<'_>, Placed<'_>> = BTreeMap::new();
        for (place, option) in options.iter().enumerate() {
            let key = (option.parts.as_slice(), option.pieces.as_slice());
            let cheaper = by_parts
                .get(&key)
                .is_none_or(|held| compare(option.cost, held.option.cost) == Ordering::Less);
            if cheaper {
                by_parts.insert(key, Placed { place, option });
            }
        }
        kept.push(by_parts.into_values().collect());
    }
    let needless = dominated(&kept);
    for options in &mut kept {
        options.retain(|o| !matches!(o.option.parts.as_slice(), [only] if needless.contains(only)));
    }
    kept
}

/// Parts that another serves at least as well.
fn dominated(designs: &[Vec<Placed<'_>>]) -> std::collections::BTreeSet<u32> {
    // Of each part: the designs that it serves by itself, with the cost; None where it stands beside
    // others or is counted.
    let mut served: BTreeMap<u32, Option<Vec<(usize, f64)>>> = BTreeMap::new();
    for (design, options) in designs.iter().enumerate() {
        for Placed { option, .. } in options {
            match option.parts.as_slice() {
                [only] if option.pieces.is_empty() => {
                    if let Some(list) = served.entry(*only).or_insert_with(|| Some(Vec::new())) {
                        list.push((design, option.cost));
                    }
                }
                several => {
                    for part in several {
                        served.insert(*part, None);
                    }
                }
            }
        }
    }
    let mut alone: Vec<(u32, Vec<(usize, f64)>)> =
        served.into_iter().filter_map(|(part, list)| Some((part, list?))).collect();
    // A part can only be dominated by one that serves as many or more; of equals the first stays.
    alone.sort_by(|(a, of_a), (b, of_b)| {
        let total = |list: &[(usize, f64)]| list.iter().map(|(_, cost)| cost).sum::<f64>();
        of_b.len()
            .cmp(&of_a.len())
            .then_with(|| total(of_a).total_cmp(&total(of_b)))
            .then_with(|| a.cmp(b))
    });
    let mut front: Vec<Vec<(usize, f64)>> = Vec::new();
    let mut needless = std::collections::BTreeSet::new();
    for (part, list) in alone {
        if front.iter().any(|better| serves_as_well(better, &list)) {
            needless.insert(part);
        } else {
            front.push(list);
        }
    }
    needless
}

/// Serves every design of the other list at no more cost. Both lists rise by design.
fn serves_as_well(better: &[(usize, f64)], other: &[(usize, f64)]) -> bool {
    let mut rest = better.iter();
    other.iter().all(|(design, cost)| {
        rest.find(|(d, _)| d == design)
            .is_some_and(|(_, c)| compare(*c, *cost) != Ordering::Greater)
    })
}

/// How many designs have an option with a part: those first that serve many.
fn serves(designs: &[Vec<Placed<'_>>]) -> BTreeMap<u32, usize> {
    let mut serves: BTreeMap<u32, usize> = BTreeMap::new();
    for options in designs {
        let mut parts: Vec<u32> = options.iter().flat_map(|o| o.option.parts.clone()).collect();
        parts.sort_unstable();
        parts.dedup();
        for part in parts {
            *serves.entry(part).or_insert(0) += 1;
        }
    }
    serves
}

/// A solution.
struct Found {
    left_out: usize,
    parts: Vec<u32>,
    cost: f64,
    picks: Vec<Option<usize>>,
}

/// Where the search stands.
struct State {
    /// Parts in hand.
    parts: Vec<u32>,
    /// Pieces taken.
    taken: BTreeMap<u32, f64>,
    /// Of each design what was decided: Some(None) left out, Some(option). None: not yet; any option
    /// of parts in hand will do.
    decided: Vec<Option<Option<usize>>>,
    left_out: usize,
}

impl State {
    fn new(designs: usize) -> Self {
        Self {
            parts: Vec::new(),
            taken: BTreeMap::new(),
            decided: vec![None; designs],
            left_out: 0,
        }
    }

    fn has_all(&self, option: &CoverOption) -> bool {
        option.parts.iter().all(|part| self.parts.contains(part))
    }
}

struct Search<'o> {
    designs: Vec<Vec<Placed<'o>>>,
    least_cost: Vec<f64>,
    serves: BTreeMap<u32, usize>,
    stock: BTreeMap<u32, f64>,
    best: Option<Found>,
    steps: u64,
}

impl Search<'_> {
    fn go(&mut self, state: &mut State) {
        self.steps += 1;
        if self.steps > MOST_STEPS || self.is_no_better(state) {
            return;
        }
        let Some(design) = self.next(state) else {
            self.arrive(state);
            return;
        };
        let mut options: Vec<Placed<'_>> = self.designs[design].clone();
        let counts = is_counted(&options);
        options.sort_by_cached_key(|o| {
            let new = o.option.parts.iter().filter(|p| !state.parts.contains(p)).count();
            let serves: usize =
                o.option.parts.iter().filter_map(|p| self.serves.get(p)).copied().sum();
            (new, std::cmp::Reverse(serves), Cost(o.option.cost), o.place)
        });
        for option in options {
            let Placed { place, option } = option;
            if !self.reaches(state, option) {
                continue;
            }
            let held = state.parts.len();
            let new = option.parts.iter().filter(|p| !state.parts.contains(p)).copied();
            let new: Vec<u32> = new.collect();
            state.parts.extend(new);
            for (part, pieces) in &option.pieces {
                *state.taken.entry(*part).or_insert(0.0) += *pieces as f64;
            }
            if counts {
                state.decided[design] = Some(Some(place));
            }
            self.go(state);
            state.decided[design] = None;
            for (part, pieces) in &option.pieces {
                *state.taken.entry(*part).or_insert(0.0) -= *pieces as f64;
            }
            state.parts.truncate(held);
        }
        if counts {
            state.decided[design] = Some(None);
            state.left_out += 1;
            self.go(state);
            state.left_out -= 1;
            state.decided[design] = None;
        }
    }

    /// There is enough in stock beside what was taken already.
    fn reaches(&self, state: &State, option: &CoverOption) -> bool {
        option.pieces.iter().all(|(part, pieces)| {
            let taken = state.taken.get(part).copied().unwrap_or(0.0);
            let stock = self.stock.get(part).copied().unwrap_or(0.0);
            taken + *pieces as f64 <= stock
        })
    }

    /// A design that still has to be decided: one that takes counted pieces, or that no parts in hand
    /// serve; the one with the fewest options.
    fn next(&self, state: &State) -> Option<usize> {
        let waits = |design: &usize| {
            let options = &self.designs[*design];
            state.decided[*design].is_none()
                && (is_counted(options) || !options.iter().any(|o| state.has_all(o.option)))
        };
        (0..self.designs.len()).filter(waits).min_by_key(|design| self.designs[*design].len())
    }

    /// Nothing that can still come of this is better than the best known.
    fn is_no_better(&self, state: &State) -> bool {
        let Some(best) = &self.best else { return false };
        if state.left_out != best.left_out {
            return state.left_out > best.left_out;
        }
        let parts = state.parts.len() + self.parts_still_needed(state);
        if parts != best.parts.len() {
            return parts > best.parts.len();
        }
        compare(self.least_total(state), best.cost) != Ordering::Less
    }

    /// One for each of a set of designs in which no two could share a new part.
    fn parts_still_needed(&self, state: &State) -> usize {
        let mut spoken_for: std::collections::BTreeSet<u32> = std::collections::BTreeSet::new();
        let mut needed = 0;
        for (design, options) in self.designs.iter().enumerate() {
            // One that takes counted pieces may be left out, so it needs nothing for certain.
            let needs = state.decided[design].is_none()
                && !is_counted(options)
                && !options.iter().any(|o| state.has_all(o.option));
            if !needs {
                continue;
            }
            let new = || options.iter().flat_map(|o| &o.option.parts);
            let new = || new().filter(|p| !state.parts.contains(p));
            if new().all(|part| !spoken_for.contains(part)) {
                needed += 1;
                spoken_for.extend(new());
            }
        }
        needed
    }

    fn least_total(&self, state: &State) -> f64 {
        let of = |(design, decided): (usize, &Option<Option<usize>>)| match decided {
            Some(None) => 0.0,
            Some(Some(place)) => self.cost(design, *place),
            // One that takes counted pieces may still be left out and cost nothing, but then another
            // count decides and not the cost.
            None => self.least_cost[design],
        };
        state.decided.iter().enumerate().map(of).sum()
    }

    fn cost(&self, design: usize, place: usize) -> f64 {
        let options = &self.designs[design];
        options.iter().find(|o| o.place == place).map_or(f64::INFINITY, |o| o.option.cost)
    }

    /// Every design is decided or served: the cheapest option of the parts in hand for each.
    fn arrive(&mut self, state: &State) {
        let pick = |(design, decided): (usize, &Option<Option<usize>>)| match decided {
            Some(decided) => *decided,
            None => {
                let served = self.designs[design].iter().filter(|o| state.has_all(o.option));
                let cheapest = served.min_by(|a, b| {
                    compare(a.option.cost, b.option.cost).then(a.place.cmp(&b.place))
                });
                cheapest.map(|o| o.place)
            }
        };
        let picks: Vec<Option<usize>> = state.decided.iter().enumerate().map(pick).collect();
        let cost = picks
            .iter()
            .enumerate()
            .filter_map(|(design, pick)| pick.map(|place| self.cost(design, place)))
            .sum();
        let mut parts = state.parts.clone();
        parts.sort_unstable();
        let found = Found { left_out: state.left_out, parts, cost, picks };
        let better = self.best.as_ref().is_none_or(|best| {
            found
                .left_out
                .cmp(&best.left_out)
                .then(found.parts.len().cmp(&best.parts.len()))
                .then(compare(found.cost, best.cost))
                == Ordering::Less
        });
        if better {
            self.best = Some(found);
        }
    }
}

/// Some option takes pieces from a stock that counts.
fn is_counted(options: &[Placed<'_>]) -> bool {
    options.iter().any(|o| !o.option.pieces.is_empty())
}

/// A cost that orders at ten digits.
#[derive(PartialEq)]
struct Cost(f64);

impl Eq for Cost {}

impl PartialOrd for Cost {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Cost {
    fn cmp(&self, other: &Self) -> Ordering {
        compare(self.0, other.0)
    }
}
