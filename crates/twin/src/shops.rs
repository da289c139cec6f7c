//! Small random shops: a rail and the few parts that could be bought for it.
//!
//! A shop is drawn from a seed. Parts are drawn around what the rail asks of them: mostly with room to
//! spare, sometimes just at the limit or beyond, so that every check binds somewhere. How often a
//! part falls short is a trait of the shop, so some shops are rich in candidates and some have none.
//!
//! Every part comes from a seed of its own, made from the shop's, its slot and its place. A shop with
//! fewer parts therefore holds the first parts of the larger one, which is how a failing case
//! shrinks.

mod dice;
mod parts;
mod rails;

pub use dice::Dice;

use circuit::parts::{Amplifier, Heatsink, Pot, ResistorLine, Transistor, Zener};
use circuit::rail::Rail;
use circuit::slot::Slot;
use parts::Bill;
use proptest::prelude::*;
use select::problem::{Part, PassPart, Problem, SinkPart, Weights};

/// A part that a shop owns.
#[derive(Debug, Clone, PartialEq)]
pub struct Row<F> {
    /// Who makes it; may be empty.
    pub maker: String,
    /// Its name; together with the maker unique in its slot.
    pub part: String,
    /// Price of one piece.
    pub price: f64,
    /// Its figures.
    pub figures: F,
}

/// How many parts a shop holds for each slot.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Sizes {
    /// 1 to 6 in random shops.
    pub zeners: usize,
    /// 1 to 3 in random shops.
    pub bias_lines: usize,
    /// 1 to 6 in random shops.
    pub amplifiers: usize,
    /// 1 to 2 in random shops.
    pub divider_lines: usize,
    /// 1 to 4 in random shops; a fixed output gets no pots.
    pub pots: usize,
    /// 1 to 6 in random shops.
    pub transistors: usize,
    /// 0 to 5 in random shops.
    pub heatsinks: usize,
}

/// A rail with the parts that may be chosen for it.
#[derive(Debug, Clone, PartialEq)]
pub struct RandomShop {
    /// The seed that it was drawn from.
    pub seed: u64,
    /// The requirement.
    pub rail: Rail,
    /// The weights of the score.
    pub weights: Weights,
    /// Transistors whose row gives rth_ja may go without a heatsink.
    pub may_go_unmounted: bool,
    /// References.
    pub zeners: Vec<Row<Zener>>,
    /// Lines for RZ.
    pub bias_lines: Vec<Row<ResistorLine>>,
    /// Amplifiers.
    pub amplifiers: Vec<Row<Amplifier>>,
    /// Lines for RF, RI and RX.
    pub divider_lines: Vec<Row<ResistorLine>>,
    /// Pots; none for a fixed output.
    pub pots: Vec<Row<Pot>>,
    /// Transistors.
    pub transistors: Vec<Row<Transistor>>,
    /// The package of each transistor; None where the row does not tell.
    pub packages: Vec<Option<String>>,
    /// Heatsinks.
    pub heatsinks: Vec<Row<Heatsink>>,
    /// The packages that each heatsink fits.
    pub fits: Vec<Vec<String>>,
}

/// Seeds apart for what belongs to the shop as a whole; parts use the places of their slots.
const STREAM_OF_SIZES: u64 = 100;
const STREAM_OF_RAIL: u64 = 101;

impl RandomShop {
    /// The shop of a seed, of a random size.
    pub fn from_seed(seed: u64) -> Self {
        let mut dice = Dice::new(seed, STREAM_OF_SIZES, 0);
        let sizes = Sizes {
            zeners: dice.whole(1, 6),
            bias_lines: dice.whole(1, 3),
            amplifiers: dice.whole(1, 6),
            divider_lines: dice.whole(1, 2),
            pots: dice.whole(1, 4),
            transistors: dice.whole(1, 6),
            heatsinks: dice.whole(0, 5),
        };
        Self::new(seed, sizes)
    }

    /// The shop of a seed with so many parts: the first ones of any larger shop of this seed.
    pub fn new(seed: u64, sizes: Sizes) -> Self {
        let mut dice = Dice::new(seed, STREAM_OF_RAIL, 0);
        let rail = rails::rail(&mut dice);
        let weights = rails::weights(&mut dice);
        let may_go_unmounted = dice.chance(0.75);
        let bill = Bill::new(&rail, seed, &mut dice);

        let pots = if rail.is_adjustable() { sizes.pots } else { 0 };
        let transistors = bill.rows(Slot::Pass, sizes.transistors, Bill::transistor);
        let packages = transistors
            .iter()
            .enumerate()
            .map(|(i, t)| bill.package(i, t.figures.rth_ja_c_per_w.is_some()))
            .collect();
        Self {
            seed,
            weights,
            may_go_unmounted,
            zeners: bill.rows(Slot::Zener, sizes.zeners, Bill::zener),
            bias_lines: bill.rows(Slot::BiasLine, sizes.bias_lines, Bill::bias_line),
            amplifiers: bill.rows(Slot::Amplifier, sizes.amplifiers, Bill::amplifier),
            divider_lines: bill.rows(Slot::DividerLine, sizes.divider_lines, Bill::divider_line),
            pots: bill.rows(Slot::Pot, pots, Bill::pot),
            transistors,
            packages,
            heatsinks: bill.rows(Slot::Heatsink, sizes.heatsinks, Bill::heatsink),
            fits: (0..sizes.heatsinks).map(|i| bill.fits(i)).collect(),
            rail,
        }
    }

    /// What may be chosen in this shop.
    pub fn problem(&self) -> Problem<'_> {
        let transistors = parts_of(&self.transistors).into_iter().zip(&self.packages);
        let heatsinks = parts_of(&self.heatsinks).into_iter().zip(&self.fits);
        Problem {
            rail: &self.rail,
            weights: self.weights,
            zeners: parts_of(&self.zeners),
            bias_lines: parts_of(&self.bias_lines),
            amplifiers: parts_of(&self.amplifiers),
            divider_lines: parts_of(&self.divider_lines),
            pots: parts_of(&self.pots),
            transistors: transistors
                .map(|(part, package)| PassPart { part, package: package.as_deref() })
                .collect(),
            heatsinks: heatsinks
                .map(|(part, fits)| SinkPart {
                    part,
                    fits: fits.iter().map(String::as_str).collect(),
                })
                .collect(),
            may_go_unmounted: self.may_go_unmounted,
        }
    }
}

fn parts_of<F>(rows: &[Row<F>]) -> Vec<Part<'_, F>> {
    rows.iter()
        .zip(0u32..)
        .map(|(row, place)| Part {
            maker: &row.maker,
            part: &row.part,
            price: row.price,
            row: place,
            figures: &row.figures,
        })
        .collect()
}

/// Random shops for property tests. A failing shop shrinks to fewer parts of the same seed.
pub fn shops() -> impl Strategy<Value = RandomShop> {
    let sizes =
        (1..=6usize, 1..=3usize, 1..=6usize, 1..=2usize, 1..=4usize, 1..=6usize, 0..=5usize);
    (any::<u64>().no_shrink(), sizes).prop_map(
        |(seed, (zeners, bias_lines, amplifiers, divider_lines, pots, transistors, heatsinks))| {
            RandomShop::new(
                seed,
                Sizes {
                    zeners,
                    bias_lines,
                    amplifiers,
                    divider_lines,
                    pots,
                    transistors,
                    heatsinks,
                },
            )
        },
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_seed_gives_the_same_shop_again() {
        assert_eq!(RandomShop::from_seed(7), RandomShop::from_seed(7));
        assert_ne!(RandomShop::from_seed(7).rail, RandomShop::from_seed(8).rail);
    }

    #[test]
    fn a_smaller_shop_holds_the_first_parts_of_a_larger() {
        let sizes = |n| Sizes {
            zeners: n,
            bias_lines: n,
            amplifiers: n,
            divider_lines: n,
            pots: n,
            transistors: n,
            heatsinks: n,
        };
        for seed in 0..50 {
            let small = RandomShop::new(seed, sizes(2));
            let large = RandomShop::new(seed, sizes(5));
            assert_eq!(small.rail, large.rail);
            assert_eq!(small.zeners, large.zeners[..2]);
            assert_eq!(small.transistors, large.transistors[..2]);
            assert_eq!(small.packages, large.packages[..2]);
            assert_eq!(small.heatsinks, large.heatsinks[..2]);
        }
    }

    #[test]
    fn names_are_unique_in_their_slot_and_lines_rise() {
        fn names_are_unique<F>(rows: &[Row<F>]) -> bool {
            let mut names: Vec<_> = rows.iter().map(|r| (&r.maker, &r.part)).collect();
            names.sort_unstable();
            names.windows(2).all(|w| w[0] != w[1])
        }
        for seed in 0..500 {
            let shop = RandomShop::from_seed(seed);
            assert!(names_are_unique(&shop.zeners), "{seed}");
            assert!(names_are_unique(&shop.amplifiers), "{seed}");
            assert!(names_are_unique(&shop.transistors), "{seed}");
            assert!(names_are_unique(&shop.heatsinks), "{seed}");
            assert!(names_are_unique(&shop.bias_lines), "{seed}");
            assert!(names_are_unique(&shop.divider_lines), "{seed}");
            assert!(names_are_unique(&shop.pots), "{seed}");
            for line in shop.bias_lines.iter().chain(&shop.divider_lines) {
                let values = &line.figures.values_ohm;
                assert!(!values.is_empty(), "{seed}");
                assert!(values.windows(2).all(|w| w[0] < w[1]), "{seed}: {values:?}");
            }
        }
    }
}
