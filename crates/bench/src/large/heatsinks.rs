//! `heatsinks.csv`.

use super::cells::{Cells, figure};
use super::dice::Dice;
use super::offer::{self, Offer, spread_price};
use super::{Order, hard};
use circuit::parts::Heatsink;

const STREAM: u64 = 6;

/// Rows of a family: lengths of one profile.
const FAMILY: usize = 10;

/// The whole file.
pub fn file(order: &Order) -> Vec<u8> {
    let mut cells = Cells::new(&format!("{},rth_sa_c_per_w,fits,cth_j_per_c", offer::COLUMNS));
    for row in 0..order.sizes.heatsinks {
        let (family, place) = (row / FAMILY, row % FAMILY);
        let (offer, sink, fits) = match order.hard {
            Some(kind) => {
                let part = hard::heatsink(kind, &hard::Place::of(order.seed, STREAM, row));
                (Offer::plain(family, place, 'H', part.price), part.figures, "TO-220;TO-247")
            }
            None => {
                let mut dice = Dice::new(order.seed, STREAM, row as u64);
                let sink = draw(&mut dice);
                let typical = 0.15 + 6.0 * libm::pow(sink.rth_sa_c_per_w, -0.85);
                let price = spread_price(typical, &mut dice);
                let fits = fits(sink.rth_sa_c_per_w, &mut dice);
                (Offer::new(family, place, 'H', price, &mut dice), sink, fits)
            }
        };
        offer.write(&mut cells);
        cells.needed(sink.rth_sa_c_per_w);
        cells.text(fits);
        cells.optional(sink.cth_j_per_c);
        cells.end();
    }
    cells.into_bytes()
}

/// From a clip to a profile for a whole chassis; the heat capacity grows as the size does.
fn draw(dice: &mut Dice) -> Heatsink {
    let rth_sa_c_per_w = dice.log_between(0.4, 40.0);
    let cth_j_per_c = 150.0 * libm::pow(rth_sa_c_per_w, -1.1) * dice.log_between(0.6, 1.6);
    Heatsink {
        rth_sa_c_per_w: figure(rth_sa_c_per_w),
        cth_j_per_c: dice.maybe(0.7, |_| figure(cth_j_per_c)),
    }
}

/// Small sinks take small packages, large ones are drilled for large ones.
fn fits(rth_sa_c_per_w: f64, dice: &mut Dice) -> &'static str {
    if rth_sa_c_per_w > 12.0 {
        dice.pick(["TO-220", "TO-126", "TO-126;TO-220", "TO-126;TO-220"])
    } else if rth_sa_c_per_w > 4.0 {
        dice.pick(["TO-220", "TO-220;TO-247", "TO-126;TO-220", "TO-3", "TO-126;TO-220;TO-247"])
    } else {
        dice.pick(["TO-247", "TO-220;TO-247", "TO-220;TO-247", "TO-3", "TO-220;TO-247;TO-3"])
    }
}
