//! A side of the circuit as a tree of choices that grows where the search looks.

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
    /// Each figure the lesser of the two.
    pub fn least(&mut self, other: &Share) {
        self.cost = self.cost.min(other.cost);
        self.current_a = self.current_a.min(other.current_a);
        self.stress = self.stress.min(other.stress);
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

    pub fn iter(self) -> impl Iterator<Item = Slot> {
        Slot::ALL.into_iter().filter(move |s| self.0 & 1 << *s as u8 != 0)
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

    /// Memory in use, bytes.
    fn memory(&self) -> usize;
}

/// The nodes of a side that have come to be.
pub(crate) struct Grove<G: Growth> {
    pub growth: G,
    nodes: Vec<Node<G::Figures, G::Mark>>,
    children: Vec<Option<(u32, u32)>>,
    scratch: Vec<Node<G::Figures, G::Mark>>,
}

impl<G: Growth> Grove<G> {
    pub fn new(growth: G) -> Self {
        Self { growth, nodes: Vec::new(), children: Vec::new(), scratch: Vec::new() }
    }

    pub fn root(&mut self) -> Option<u32> {
        if self.nodes.is_empty() {
            let root = self.growth.root()?;
            self.nodes.push(root);
            self.children.push(None);
        }
        Some(0)
    }

    pub fn get(&self, id: u32) -> &Node<G::Figures, G::Mark> {
        &self.nodes[id as usize]
    }

    /// The parts of a node, made on the first call.
    pub fn children(&mut self, id: u32) -> Range<u32> {
        if let Some((from, to)) = self.children[id as usize] {
            return from..to;
        }
        self.scratch.clear();
        let node = self.nodes[id as usize];
        self.growth.children(&node, &mut self.scratch);
        let from = self.nodes.len() as u32;
        self.nodes.append(&mut self.scratch);
        self.children.resize(self.nodes.len(), None);
        let to = self.nodes.len() as u32;
        self.children[id as usize] = Some((from, to));
        from..to
    }

    /// Memory in use, bytes.
    pub fn memory(&self) -> usize {
        self.nodes.capacity() * size_of::<Node<G::Figures, G::Mark>>()
            + self.children.capacity() * size_of::<Option<(u32, u32)>>()
            + self.growth.memory()
    }
}
