//! A side of the circuit as a tree of choices that grows where the search looks.

use crate::limit::make_room;
use crate::rest::keep_few;
use circuit::slot::Slot;
use std::ops::Range;

/// What a part of a candidate adds to the figures that rank it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Share {
    /// Cost.
    pub cost: f64,
    /// Current drawn beside the load, A.
    pub current_a: f64,
    /// Greatest utilisation of damage checks.
    pub stress: f64,
}

impl Share {
    /// Nothing at all.
    pub const NOTHING: Share = Share { cost: 0.0, current_a: 0.0, stress: 0.0 };

    /// The share of a node that falls into no part: no candidate has it.
    const MORE_THAN_ANY: Share =
        Share { cost: f64::INFINITY, current_a: f64::INFINITY, stress: f64::INFINITY };

    /// What two sides add together.
    pub fn beside(&self, other: &Share) -> Share {
        Share {
            cost: self.cost + other.cost,
            current_a: self.current_a + other.current_a,
            stress: self.stress.max(other.stress),
        }
    }

    /// Each figure the greater of the two.
    fn raised_to(&self, other: &Share) -> Share {
        Share {
            cost: self.cost.max(other.cost),
            current_a: self.current_a.max(other.current_a),
            stress: self.stress.max(other.stress),
        }
    }

    /// No choice at all.
    pub fn is_impossible(&self) -> bool {
        self.cost == f64::INFINITY
    }

    /// Each figure the lesser of the two.
    pub fn least(&mut self, other: &Share) {
        self.cost = self.cost.min(other.cost);
        self.current_a = self.current_a.min(other.current_a);
        self.stress = self.stress.min(other.stress);
    }
}

/// How many shares a node keeps apart.
const FEW: usize = 6;

/// A few shares such that every choice of a node adds at least one of them in each figure.
///
/// The least cost and the least current of a node seldom belong to one choice. A few shares bound what
/// follows from them much closer than the one share that has the least of each figure.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Shares {
    few: [Share; FEW],
    count: usize,
}

impl Shares {
    pub fn as_slice(&self) -> &[Share] {
        &self.few[..self.count]
    }

    /// From the shares of all parts of a node, which are used up.
    fn of(parts: &mut Vec<Share>) -> Self {
        parts.retain(|share| !share.is_impossible());
        keep_few(parts, FEW);
        let mut few = [Share::MORE_THAN_ANY; FEW];
        few.iter_mut().zip(parts.iter()).for_each(|(place, share)| *place = *share);
        Self { few, count: parts.len() }
    }
}

/// Places by name for the slots of a side: the least of a set of parts, 0 for other slots.
pub(crate) type Names = [u32; Slot::COUNT];

/// Each place the lesser of the two.
pub(crate) fn least_names(names: &mut Names, other: &Names) {
    for (a, b) in names.iter_mut().zip(other) {
        *a = (*a).min(*b);
    }
}

/// A set of slots.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub(crate) struct Slots(u8);

impl Slots {
    pub const fn with(self, slot: Slot) -> Self {
        Self(self.0 | 1 << slot as u8)
    }

    pub fn has(self, slot: Slot) -> bool {
        self.0 & 1 << slot as u8 != 0
    }

    pub fn iter(self) -> impl Iterator<Item = Slot> {
        Slot::ALL.into_iter().filter(move |slot| self.has(*slot))
    }
}

/// A set of choices of one side, no worse than this in anything that ranks or rejects it.
#[derive(Clone, Copy)]
pub(crate) struct Node<F, M> {
    /// At most what any of the choices adds.
    pub share: Share,
    /// What the amplifier or the other sides need to know of it.
    pub figures: F,
    /// At most the places by name of any of the choices.
    pub names: Names,
    /// Slots in which all the choices agree.
    pub decided: Slots,
    /// About how many choices; 1 is a choice made.
    pub size: u32,
    /// What the side itself knows it by.
    pub mark: M,
}

/// How a side falls into choices.
pub(crate) trait Growth {
    /// What other sides need to know of a node.
    type Figures: Copy;
    /// What the side knows a node by.
    type Mark: Copy;

    /// All choices of the side; None where there is none.
    fn root(&mut self) -> Option<Node<Self::Figures, Self::Mark>>;

    /// The parts into which a node falls that is no choice made; those left out hold no feasible
    /// choice.
    fn children(
        &mut self,
        node: &Node<Self::Figures, Self::Mark>,
        children: &mut Vec<Node<Self::Figures, Self::Mark>>,
    );

    /// A few shares that bound a node closer than its own share does, where the side knows them
    /// before the node is taken apart; none where it does not.
    fn closer(&self, _node: &Node<Self::Figures, Self::Mark>) -> Vec<Share> {
        Vec::new()
    }

    /// Memory in use, bytes.
    fn memory(&self) -> usize;
}

/// The nodes of a side that have come to be.
///
/// What a node can add is known better once its parts are known: it adds at least what the least of
/// its parts adds. So whenever a node is taken apart, its share is raised to that, and so are the
/// shares of the nodes above it.
pub(crate) struct Grove<G: Growth> {
    pub growth: G,
    nodes: Vec<Node<G::Figures, G::Mark>>,
    links: Vec<Links>,
    scratch: Vec<Node<G::Figures, G::Mark>>,
    /// Room for the shares of a node's parts, used again and again.
    of_parts: Vec<Share>,
}

/// How a node hangs together with others.
#[derive(Clone)]
struct Links {
    parent: Option<u32>,
    children: Option<Range<u32>>,
    /// What its choices add at least, closer than the node's own share, once its parts are known.
    shares: Option<Box<Shares>>,
}

impl<G: Growth> Grove<G> {
    pub fn new(growth: G) -> Self {
        Self {
            growth,
            nodes: Vec::new(),
            links: Vec::new(),
            scratch: Vec::new(),
            of_parts: Vec::new(),
        }
    }

    pub fn root(&mut self) -> Option<u32> {
        if self.nodes.is_empty() {
            let root = self.growth.root()?;
            self.nodes.push(root);
            self.links.push(Links { parent: None, children: None, shares: None });
        }
        Some(0)
    }

    pub fn get(&self, id: u32) -> &Node<G::Figures, G::Mark> {
        &self.nodes[id as usize]
    }

    /// The node that a node is a part of; None for all choices.
    pub fn parent(&self, id: u32) -> Option<u32> {
        self.links[id as usize].parent
    }

    /// The parts of a node. They are made on the first call, and those for which `stands` is false
    /// are left out: no feasible candidate has them.
    pub fn children(
        &mut self,
        id: u32,
        mut stands: impl FnMut(&Node<G::Figures, G::Mark>) -> bool,
    ) -> Range<u32> {
        if let Some(range) = &self.links[id as usize].children {
            return range.clone();
        }
        self.scratch.clear();
        let node = self.nodes[id as usize];
        self.growth.children(&node, &mut self.scratch);
        self.scratch.retain(|child| stands(child));
        let from = self.nodes.len() as u32;
        make_room(&mut self.nodes, self.scratch.len());
        make_room(&mut self.links, self.scratch.len());
        self.nodes.append(&mut self.scratch);
        for node in &self.nodes[from as usize..] {
            let mut closer = self.growth.closer(node);
            let shares = (!closer.is_empty()).then(|| Box::new(Shares::of(&mut closer)));
            self.links.push(Links { parent: Some(id), children: None, shares });
        }
        let range = from..self.nodes.len() as u32;
        self.links[id as usize].children = Some(range.clone());
        self.raise(id);
        range
    }

    /// How many nodes have come to be.
    pub fn count(&self) -> usize {
        self.nodes.len()
    }

    /// The shares of the nodes that are choices made or not yet taken apart: every choice lies in one
    /// of them.
    pub fn frontier(&self) -> impl Iterator<Item = Share> {
        let is_open = |links: &Links| links.children.is_none();
        self.nodes
            .iter()
            .zip(&self.links)
            .filter(move |(node, links)| is_open(links) && !node.share.is_impossible())
            .map(|(node, _)| node.share)
    }

    /// Raises the shares of a node, and of those above it, to what their parts add at least.
    fn raise(&mut self, id: u32) {
        let mut next = Some(id);
        while let Some(id) = next {
            let links = &self.links[id as usize];
            let (parent, Some(children)) = (links.parent, links.children.clone()) else { return };
            let mut least = Share::MORE_THAN_ANY;
            let mut of_parts = std::mem::take(&mut self.of_parts);
            of_parts.clear();
            for part in children {
                least.least(&self.nodes[part as usize].share);
                of_parts.extend_from_slice(self.shares(part));
            }
            let shares = Shares::of(&mut of_parts);
            self.of_parts = of_parts;
            let before = self.links[id as usize].shares.as_deref();
            let unchanged = before == Some(&shares);
            let share = &mut self.nodes[id as usize].share;
            let raised = share.raised_to(&least);
            if raised == *share && unchanged {
                return;
            }
            *share = raised;
            self.links[id as usize].shares = Some(Box::new(shares));
            next = parent;
        }
    }

    /// A few shares such that every choice of a node adds at least one of them; none where it is known
    /// to hold no choice.
    pub fn shares(&self, id: u32) -> &[Share] {
        match &self.links[id as usize].shares {
            Some(shares) => shares.as_slice(),
            None => std::slice::from_ref(&self.nodes[id as usize].share),
        }
    }

    /// Memory in use, bytes.
    pub fn memory(&self) -> usize {
        self.nodes.capacity() * size_of::<Node<G::Figures, G::Mark>>()
            + self.links.capacity() * size_of::<Links>()
            + self.growth.memory()
    }
}
