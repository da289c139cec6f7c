//! `opamps.csv`.

use super::cells::{Cells, figure};
use super::dice::Dice;
use super::offer::{self, Offer, spread_price};
use super::{Order, hard};
use circuit::parts::Amplifier;

const STREAM: u64 = 2;
const STREAM_OF_FAMILIES: u64 = 102;

/// Rows of a family: grades and packages of one design.
const FAMILY: usize = 12;

/// Outlines with their usual thermal resistance, °C/W.
const PACKAGES: [(&str, f64); 5] =
    [("DIP-8", 105.0), ("SO-8", 145.0), ("SOT-23-5", 215.0), ("MSOP-8", 180.0), ("TO-220-5", 55.0)];

/// What the amplifiers of a family have in common.
struct Family {
    vs_min_v: f64,
    vs_max_v: f64,
    vcm_low_v: f64,
    vcm_high_v: f64,
    swing_low_v: f64,
    swing_high_v: f64,
    iout_a: f64,
    vos_max_v: f64,
    ib_max_a: f64,
    iq_max_a: f64,
    gain_db: f64,
    gbw_hz: f64,
    vs_test_v: f64,
    is_power: bool,
    price: f64,
}

impl Family {
    fn draw(dice: &mut Dice) -> Self {
        let vs_max_v = dice.pick([5.5, 16.0, 26.0, 30.0, 32.0, 36.0, 36.0, 40.0, 44.0, 60.0]);
        let is_power = vs_max_v > 16.0 && dice.chance(0.08);
        let is_rail_to_rail = dice.chance(0.35);
        let (vcm_low_v, vcm_high_v, swing_low_v, swing_high_v) = if is_rail_to_rail {
            (
                -0.1,
                figure(dice.pick([-0.1, 0.0, 1.5])),
                figure(dice.log_between(0.02, 0.3)),
                figure(dice.log_between(0.1, 1.2)),
            )
        } else if dice.chance(0.6) {
            // Single-supply input stage, emitter-follower output.
            (
                0.0,
                figure(dice.between(1.5, 2.2)),
                figure(dice.log_between(0.02, 0.8)),
                figure(dice.between(1.4, 2.4)),
            )
        } else {
            (
                figure(dice.between(1.5, 4.0)),
                figure(dice.between(1.0, 3.0)),
                figure(dice.between(1.0, 3.0)),
                figure(dice.between(1.0, 2.8)),
            )
        };
        let iout_a =
            if is_power { dice.log_between(0.1, 1.0) } else { dice.log_between(0.004, 0.06) };
        let gbw_hz = dice.log_between(1e5, 2e7);
        let iq_max_a = 0.9e-3 * libm::pow(gbw_hz / 1e6, 0.6) * dice.log_between(0.4, 2.5);
        let vos_max_v = dice.log_between(5e-5, 1e-2);
        let price = 0.22 + 2e-4 / vos_max_v.max(1e-4) + 8.0 * iout_a + 0.004 * vs_max_v;
        Self {
            vs_min_v: dice.pick([1.8, 2.7, 3.0, 4.5, 5.0, 8.0_f64]).min(0.5 * vs_max_v),
            vs_max_v,
            vcm_low_v,
            vcm_high_v,
            swing_low_v,
            swing_high_v,
            iout_a,
            vos_max_v,
            ib_max_a: figure(dice.log_between(1e-12, 6e-7)),
            iq_max_a,
            gain_db: dice.between(82.0, 124.0).round(),
            gbw_hz: figure(gbw_hz),
            vs_test_v: dice.pick([5.0, 5.0, 15.0, 30.0_f64]).min(vs_max_v),
            is_power,
            price: spread_price(price, dice),
        }
    }

    fn amplifier(&self, rth_ja_c_per_w: f64, dice: &mut Dice) -> Amplifier {
        let grade = dice.log_between(0.6, 1.7);
        let iout_a = figure(self.iout_a * dice.between(0.9, 1.1));
        Amplifier {
            vs_min_v: self.vs_min_v,
            vs_max_v: self.vs_max_v,
            vcm_low_v: self.vcm_low_v,
            vcm_high_v: self.vcm_high_v,
            swing_low_v: self.swing_low_v,
            swing_high_v: self.swing_high_v,
            iout_a,
            vos_max_v: figure(self.vos_max_v * grade),
            ib_max_a: self.ib_max_a,
            iq_max_a: figure(self.iq_max_a * dice.between(0.9, 1.2)),
            tj_max_c: dice.pick([125.0, 150.0, 150.0, 150.0, 175.0]),
            rth_ja_c_per_w: figure(rth_ja_c_per_w * dice.between(0.9, 1.15)),
            isc_max_a: dice.maybe(0.9, |d| figure(iout_a * d.between(1.6, 4.0))),
            isink_a: dice.maybe(0.85, |d| figure(iout_a * d.log_between(0.2, 1.0))),
            gain_min_db: dice.maybe(0.9, |_| self.gain_db),
            psrr_min_db: dice.maybe(0.85, |d| (self.gain_db - d.between(5.0, 25.0)).round()),
            cmrr_min_db: dice.maybe(0.85, |d| (self.gain_db - d.between(8.0, 28.0)).round()),
            vs_test_v: dice.maybe(0.8, |_| self.vs_test_v),
        }
    }
}

/// The whole file.
pub fn file(order: &Order) -> Vec<u8> {
    let mut cells = Cells::new(&format!(
        "{},vs_min_v,vs_max_v,vcm_low_v,vcm_high_v,swing_low_v,swing_high_v,iout_a,vos_max_v,\
         ib_max_a,iq_max_a,tj_max_c,rth_ja_c_per_w,isc_max_a,isink_a,gain_min_db,psrr_min_db,\
         cmrr_min_db,vs_test_v,gbw_hz",
        offer::COLUMNS
    ));
    for row in 0..order.sizes.opamps {
        let (family, place) = (row / FAMILY, row % FAMILY);
        if let Some(kind) = order.hard {
            let part = hard::amplifier(kind, &hard::Place::of(order.seed, STREAM, row));
            Offer::plain(family, place, 'A', part.price)
                .packaged("DIP-8", "single")
                .write(&mut cells);
            write(&mut cells, &part.figures, None);
            cells.end();
            continue;
        }
        let traits = Family::draw(&mut Dice::new(order.seed, STREAM_OF_FAMILIES, family as u64));
        let mut dice = Dice::new(order.seed, STREAM, row as u64);
        let (package, rth_ja) =
            if traits.is_power { PACKAGES[4] } else { PACKAGES[dice.below(PACKAGES.len() - 1)] };
        let price = spread_price(traits.price, &mut dice);
        let offer = Offer::new(family, place, 'A', price, &mut dice);
        let pinout = dice.pick(["single", "single", "dual", "quad"]);
        offer.packaged(package, pinout).write(&mut cells);
        write(&mut cells, &traits.amplifier(rth_ja, &mut dice), Some(traits.gbw_hz));
        cells.end();
    }
    cells.into_bytes()
}

fn write(cells: &mut Cells, amplifier: &Amplifier, gbw_hz: Option<f64>) {
    cells.needed(amplifier.vs_min_v);
    cells.needed(amplifier.vs_max_v);
    cells.needed(amplifier.vcm_low_v);
    cells.needed(amplifier.vcm_high_v);
    cells.needed(amplifier.swing_low_v);
    cells.needed(amplifier.swing_high_v);
    cells.needed(amplifier.iout_a);
    cells.needed(amplifier.vos_max_v);
    cells.needed(amplifier.ib_max_a);
    cells.needed(amplifier.iq_max_a);
    cells.needed(amplifier.tj_max_c);
    cells.needed(amplifier.rth_ja_c_per_w);
    cells.optional(amplifier.isc_max_a);
    cells.optional(amplifier.isink_a);
    cells.optional(amplifier.gain_min_db);
    cells.optional(amplifier.psrr_min_db);
    cells.optional(amplifier.cmrr_min_db);
    cells.optional(amplifier.vs_test_v);
    cells.optional(gbw_hz);
}
