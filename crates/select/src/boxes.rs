//! Boxes of parts: a set of parts with figures at least as good as any of them, halved on demand.
//!
//! A k-d tree that is built only where the search looks. Splitting a box costs as much as it holds
//! parts, and the best-first search looks into few boxes, so most of the tree never comes to be.

/// A part as the boxes see it.
pub(crate) trait Item {
    /// The best figures of a set of parts.
    type Best: Copy;

    /// The part alone.
    fn best(&self) -> Self::Best;

    /// Takes another set of parts in: each figure becomes the better of the two.
    fn widen(best: &mut Self::Best, other: &Self::Best);

    /// How many figures parts are told apart by.
    const AXES: usize;

    /// One of them, scaled so that a unit of one weighs about as much as a unit of another.
    fn axis(&self, axis: usize) -> f64;
}

/// A box of parts.
pub(crate) struct PartBox<B> {
    /// The best figures of its parts.
    pub best: B,
    from: u32,
    to: u32,
    halves: Option<u32>,
}

impl<B> PartBox<B> {
    /// How many parts it holds.
    pub fn len(&self) -> u32 {
        self.to - self.from
    }
}

/// A box that is small enough is taken apart into its parts at once.
const SMALL: u32 = 4;

/// What a box falls into.
pub(crate) enum Pieces {
    /// Two boxes.
    Halves(u32, u32),
    /// The parts at these places of [`Boxes::items`].
    Items(std::ops::Range<usize>),
}

/// The boxes of one collection of parts.
pub(crate) struct Boxes<I: Item> {
    items: Vec<I>,
    boxes: Vec<PartBox<I::Best>>,
}

impl<I: Item> Boxes<I> {
    /// One box with all parts; without parts there is no box.
    pub fn new(items: Vec<I>) -> Self {
        let mut this = Self { items, boxes: Vec::new() };
        let all = this.items.len() as u32;
        if all > 0 {
            this.add(0, all);
        }
        this
    }

    /// The box with all parts.
    pub fn root(&self) -> Option<u32> {
        (!self.boxes.is_empty()).then_some(0)
    }

    pub fn get(&self, id: u32) -> &PartBox<I::Best> {
        &self.boxes[id as usize]
    }

    pub fn items(&self) -> &[I] {
        &self.items
    }

    /// Memory in use, bytes.
    pub fn memory(&self) -> usize {
        self.items.capacity() * size_of::<I>()
            + self.boxes.capacity() * size_of::<PartBox<I::Best>>()
    }

    fn add(&mut self, from: u32, to: u32) -> u32 {
        let (first, rest) = self.items[from as usize..to as usize]
            .split_first()
            .expect("a box holds at least one part");
        let mut best = first.best();
        for item in rest {
            I::widen(&mut best, &item.best());
        }
        self.boxes.push(PartBox { best, from, to, halves: None });
        self.boxes.len() as u32 - 1
    }

    /// How many boxes there are.
    pub fn count(&self) -> usize {
        self.boxes.len()
    }

    /// Takes every box apart, for readers that share the boxes.
    pub fn grow_fully(&mut self) {
        let mut next = 0;
        while next < self.boxes.len() {
            self.split(next as u32);
            next += 1;
        }
    }

    /// What a box falls into, as far as it has been taken apart.
    pub fn pieces(&self, id: u32) -> Pieces {
        let PartBox { from, to, halves, .. } = self.boxes[id as usize];
        match halves {
            Some(first) => Pieces::Halves(first, first + 1),
            None => Pieces::Items(from as usize..to as usize),
        }
    }

    /// Takes a box apart.
    pub fn split(&mut self, id: u32) -> Pieces {
        let PartBox { from, to, halves, .. } = self.boxes[id as usize];
        if let Some(first) = halves {
            return Pieces::Halves(first, first + 1);
        }
        if to - from <= SMALL {
            return Pieces::Items(from as usize..to as usize);
        }
        let items = &mut self.items[from as usize..to as usize];
        let axis = widest_axis(items);
        let middle = items.len() / 2;
        items.select_nth_unstable_by(middle, |a, b| a.axis(axis).total_cmp(&b.axis(axis)));
        let middle = from + middle as u32;
        let first = self.add(from, middle);
        let second = self.add(middle, to);
        self.boxes[id as usize].halves = Some(first);
        Pieces::Halves(first, second)
    }
}

/// The axis on which the parts lie furthest apart.
fn widest_axis<I: Item>(items: &[I]) -> usize {
    let spread = |axis: usize| {
        let (low, high) = items
            .iter()
            .map(|i| i.axis(axis))
            .fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), v| (low.min(v), high.max(v)));
        if high > low { high - low } else { 0.0 }
    };
    (0..I::AXES).max_by(|&a, &b| spread(a).total_cmp(&spread(b))).unwrap_or(0)
}
