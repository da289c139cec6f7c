//! `zeners.csv`.

use super::cells::{Cells, figure};
use super::dice::Dice;
use super::offer::{self, Offer, spread_price};
use super::{Order, hard};
use circuit::parts::{MeasuredAt, Zener};

/// Stream of the dice.
const STREAM: u64 = 1;
const STREAM_OF_FAMILIES: u64 = 101;

/// Source: IEC 60063, E24, from 2.4 V to 47 V.
const VOLTAGES: [f64; 32] = [
    2.4, 2.7, 3.0, 3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2, 9.1, 10.0, 11.0, 12.0,
    13.0, 15.0, 16.0, 18.0, 20.0, 22.0, 24.0, 27.0, 30.0, 33.0, 36.0, 39.0, 43.0, 47.0,
];

/// What the zeners of a family have in common.
struct Family {
    pd_w: f64,
    package: &'static str,
    tol: f64,
    tj_max_c: f64,
    /// Test current of its 5 V type, A; those of larger families fall with the voltage.
    izt_a: f64,
    izt_falls: bool,
    impedance: f64,
    gives_knee: bool,
    vz_at: MeasuredAt,
    price: f64,
}

impl Family {
    fn draw(dice: &mut Dice) -> Self {
        let (pd_w, package) = dice.pick([
            (0.25, "SOT-23"),
            (0.3, "SOD-323"),
            (0.4, "DO-35"),
            (0.5, "DO-35"),
            (0.5, "SOD-123"),
            (1.0, "DO-41"),
            (1.3, "DO-41"),
            (2.0, "DO-15"),
        ]);
        let izt_falls = pd_w >= 1.0;
        let izt_a = if izt_falls {
            0.25 * pd_w / 5.1
        } else {
            dice.pick([0.001, 0.002, 0.005, 0.005, 0.02])
        };
        let tol = dice.pick([0.005, 0.01, 0.02, 0.02, 0.05, 0.05, 0.05]);
        Self {
            pd_w,
            package,
            tol,
            tj_max_c: dice.pick([125.0, 150.0, 150.0, 175.0, 175.0, 200.0]),
            izt_a: figure(izt_a),
            izt_falls,
            impedance: dice.log_between(0.6, 1.6),
            gives_knee: dice.chance(0.75),
            vz_at: dice.pick([MeasuredAt::Pulse, MeasuredAt::Pulse, MeasuredAt::Warm]),
            price: spread_price(0.035 + 0.05 * pd_w + 0.0004 / tol, dice),
        }
    }

    fn zener(&self, vz_v: f64, dice: &mut Dice) -> Zener {
        let izt_a =
            if self.izt_falls { figure(self.izt_a * 5.1 / vz_v.max(2.4)) } else { self.izt_a };
        // zzt·izt is least round 6.5 V; it grows fast below and with the voltage above.
        let at_test_v = 0.035 + 0.13 * (6.2 - vz_v).max(0.0) + 0.02 * (vz_v - 6.8).max(0.0);
        let zzt_ohm = figure(at_test_v * self.impedance * dice.between(0.85, 1.2) / izt_a);
        // Tunnelling below about 5 V drifts down, avalanche above drifts up.
        let drift_v = (0.9e-3 * (vz_v - 5.2)).clamp(-2.2e-3, 0.05);
        let spread_v = dice.between(0.3e-3, 0.9e-3) + 0.04e-3 * vz_v;
        let izk_a = figure(izt_a * dice.pick([0.05, 0.1, 0.2]));
        Zener {
            vz_v,
            tol: self.tol,
            izt_a,
            zzt_ohm,
            iz_min_a: izk_a,
            pd_w: self.pd_w,
            tj_max_c: self.tj_max_c,
            tc_min_v_per_c: figure(drift_v - spread_v),
            tc_max_v_per_c: figure(drift_v + spread_v),
            zzk_ohm: self.gives_knee.then(|| figure(zzt_ohm * dice.log_between(4.0, 12.0))),
            izk_a: self.gives_knee.then_some(izk_a),
            vz_at: self.vz_at,
        }
    }
}

/// The whole file.
pub fn file(order: &Order) -> Vec<u8> {
    let mut cells = Cells::new(&format!(
        "{},vz_v,tol_pct,izt_a,zzt_ohm,iz_min_a,pd_w,tj_max_c,tc_min_mv_per_c,tc_max_mv_per_c,\
         zzk_ohm,izk_a,vz_at",
        offer::COLUMNS
    ));
    for row in 0..order.sizes.zeners {
        let (family, place) = (row / VOLTAGES.len(), row % VOLTAGES.len());
        let (offer, zener) = match order.hard {
            Some(kind) => {
                let part = hard::zener(kind, &hard::Place::of(order.seed, STREAM, row));
                (Offer::plain(family, place, 'Z', part.price).packaged("DO-41", ""), part.figures)
            }
            None => {
                let traits =
                    Family::draw(&mut Dice::new(order.seed, STREAM_OF_FAMILIES, family as u64));
                let mut dice = Dice::new(order.seed, STREAM, row as u64);
                let price = spread_price(traits.price, &mut dice);
                let offer = Offer::new(family, place, 'Z', price, &mut dice);
                (offer.packaged(traits.package, "K-A"), traits.zener(VOLTAGES[place], &mut dice))
            }
        };
        offer.write(&mut cells);
        write(&mut cells, &zener);
        cells.end();
    }
    cells.into_bytes()
}

fn write(cells: &mut Cells, zener: &Zener) {
    cells.needed(zener.vz_v);
    cells.needed(100.0 * zener.tol);
    cells.needed(zener.izt_a);
    cells.needed(zener.zzt_ohm);
    cells.needed(zener.iz_min_a);
    cells.needed(zener.pd_w);
    cells.needed(zener.tj_max_c);
    cells.needed(1e3 * zener.tc_min_v_per_c);
    cells.needed(1e3 * zener.tc_max_v_per_c);
    cells.optional(zener.zzk_ohm);
    cells.optional(zener.izk_a);
    cells.text(match zener.vz_at {
        MeasuredAt::Pulse => "pulse",
        MeasuredAt::Warm => "warm",
    });
}
