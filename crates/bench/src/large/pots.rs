//! `pots.csv`.

use super::cells::{Cells, figure};
use super::dice::Dice;
use super::offer::{self, Offer, spread_price};
use super::{Order, hard};
use circuit::parts::{Pot, ResistorRating};

const STREAM: u64 = 5;

/// Tracks as they are sold, Ω.
const VALUES_OHM: [f64; 12] =
    [100.0, 200.0, 500.0, 1e3, 2e3, 2.5e3, 5e3, 1e4, 2e4, 2.5e4, 5e4, 1e5];

/// The whole file.
pub fn file(order: &Order) -> Vec<u8> {
    let mut cells = Cells::new(&format!(
        "{},value_ohm,tol_pct,end_ohm,tempco_ppm,power_w,vmax_v,full_power_to_c,zero_power_at_c",
        offer::COLUMNS
    ));
    for row in 0..order.sizes.pots {
        let (family, place) = (row / VALUES_OHM.len(), row % VALUES_OHM.len());
        let (offer, pot) = match order.hard {
            Some(kind) => {
                let part = hard::pot(kind, &hard::Place::of(order.seed, STREAM, row));
                (Offer::plain(family, place, 'P', part.price), part.figures)
            }
            None => {
                let mut dice = Dice::new(order.seed, STREAM, row as u64);
                let pot = draw(VALUES_OHM[place], &mut dice);
                let price = spread_price(0.6 + 1.2 * pot.rating.power_w, &mut dice);
                (Offer::new(family, place, 'P', price, &mut dice), pot)
            }
        };
        offer.packaged("panel 16 mm", "1-W-3").write(&mut cells);
        write(&mut cells, &pot);
        cells.end();
    }
    cells.into_bytes()
}

fn draw(value_ohm: f64, dice: &mut Dice) -> Pot {
    Pot {
        value_ohm,
        tol: dice.pick([0.03, 0.05, 0.1, 0.1, 0.2]),
        end_ohm: figure(2.0 + value_ohm * dice.pick([0.001, 0.002, 0.005, 0.01])),
        tempco_per_c: dice.pick([50e-6, 100e-6, 100e-6, 250e-6]),
        rating: ResistorRating {
            power_w: dice.pick([0.1, 0.25, 0.5, 0.5, 1.0, 2.0]),
            full_power_to_c: dice.pick([40.0, 70.0, 70.0, 85.0]),
            zero_power_at_c: dice.pick([105.0, 125.0, 125.0, 150.0]),
        },
        vmax_v: dice.maybe(0.7, |d| d.pick([100.0, 200.0, 300.0])),
    }
}

fn write(cells: &mut Cells, pot: &Pot) {
    cells.needed(pot.value_ohm);
    cells.needed(100.0 * pot.tol);
    cells.needed(pot.end_ohm);
    cells.needed(1e6 * pot.tempco_per_c);
    cells.needed(pot.rating.power_w);
    cells.optional(pot.vmax_v);
    cells.optional(Some(pot.rating.full_power_to_c));
    cells.optional(Some(pot.rating.zero_power_at_c));
}
