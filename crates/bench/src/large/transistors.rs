//! `transistors.csv`.

use super::cells::{Cells, figure};
use super::dice::Dice;
use super::offer::{self, Offer, spread_price};
use super::{Order, hard};
use circuit::parts::{OverCurrent, PulseCurves, Transistor};
use quantity::points::{Points, PointsError};

const STREAM: u64 = 3;
const STREAM_OF_FAMILIES: u64 = 103;

/// Rows of a family: voltage grades and gain groups of one die.
const FAMILY: usize = 16;

/// Share of rows that are PNP and of no use to the circuit.
const SHARE_OF_PNP: f64 = 0.08;

/// Outlines with what fits into them.
struct Outline {
    package: &'static str,
    pinout: &'static str,
    /// Least and greatest power at 25 °C case, W.
    power_w: (f64, f64),
    /// Least and greatest current rating, A.
    current_a: (f64, f64),
    /// Junction to ambient without a heatsink, °C/W.
    rth_ja_c_per_w: f64,
    /// Heat capacity of the case, J/°C.
    cth_j_per_c: f64,
    tj_max_c: f64,
}

const OUTLINES: [Outline; 8] = [
    Outline {
        package: "TO-92",
        pinout: "E-B-C",
        power_w: (0.8, 1.6),
        current_a: (0.2, 1.0),
        rth_ja_c_per_w: 180.0,
        cth_j_per_c: 0.12,
        tj_max_c: 150.0,
    },
    Outline {
        package: "SOT-223",
        pinout: "B-C-E",
        power_w: (1.5, 10.0),
        current_a: (0.5, 5.0),
        rth_ja_c_per_w: 75.0,
        cth_j_per_c: 0.25,
        tj_max_c: 150.0,
    },
    Outline {
        package: "DPAK",
        pinout: "B-C-E",
        power_w: (12.0, 30.0),
        current_a: (1.0, 8.0),
        rth_ja_c_per_w: 65.0,
        cth_j_per_c: 0.6,
        tj_max_c: 150.0,
    },
    Outline {
        package: "TO-126",
        pinout: "E-C-B",
        power_w: (10.0, 40.0),
        current_a: (1.0, 5.0),
        rth_ja_c_per_w: 95.0,
        cth_j_per_c: 0.9,
        tj_max_c: 150.0,
    },
    Outline {
        package: "TO-220",
        pinout: "B-C-E",
        power_w: (30.0, 100.0),
        current_a: (2.0, 15.0),
        rth_ja_c_per_w: 62.5,
        cth_j_per_c: 2.0,
        tj_max_c: 150.0,
    },
    Outline {
        package: "TO-220",
        pinout: "B-C-E",
        power_w: (40.0, 110.0),
        current_a: (3.0, 15.0),
        rth_ja_c_per_w: 62.5,
        cth_j_per_c: 2.0,
        tj_max_c: 175.0,
    },
    Outline {
        package: "TO-247",
        pinout: "B-C-E",
        power_w: (80.0, 230.0),
        current_a: (6.0, 30.0),
        rth_ja_c_per_w: 40.0,
        cth_j_per_c: 5.0,
        tj_max_c: 150.0,
    },
    Outline {
        package: "TO-3",
        pinout: "B-E-case",
        power_w: (80.0, 250.0),
        current_a: (8.0, 30.0),
        rth_ja_c_per_w: 32.0,
        cth_j_per_c: 8.0,
        tj_max_c: 200.0,
    },
];

/// What the transistors of a family have in common.
struct Family {
    outline: &'static Outline,
    junctions: u8,
    pd_w: f64,
    ic_max_a: f64,
    /// Gain at its best current.
    gain: f64,
    /// Second breakdown begins at this collector voltage, V.
    breakdown_v: f64,
    ileak_a: Option<f64>,
    price: f64,
}

impl Family {
    fn draw(dice: &mut Dice) -> Self {
        let outline = &OUTLINES[dice.below(OUTLINES.len())];
        let junctions = if dice.chance(0.35) { 2 } else { 1 };
        let pd_w = figure(dice.log_between(outline.power_w.0, outline.power_w.1));
        let ic_max_a = dice.log_between(outline.current_a.0, outline.current_a.1);
        let ic_max_a = if ic_max_a < 1.0 { figure(ic_max_a) } else { ic_max_a.round() };
        let gain = match junctions {
            1 => dice.log_between(30.0, 160.0),
            _ => dice.log_between(600.0, 4000.0),
        };
        Self {
            outline,
            junctions,
            pd_w,
            ic_max_a,
            gain,
            breakdown_v: dice.log_between(14.0, 60.0),
            ileak_a: dice.maybe(0.65, |d| figure(d.log_between(2e-6, 4e-4) * libm::sqrt(ic_max_a))),
            price: spread_price(0.09 * libm::pow(pd_w, 0.62) + 0.02 * ic_max_a + 0.05, dice),
        }
    }

    fn transistor(&self, dice: &mut Dice) -> Result<Transistor, PointsError> {
        let vceo_v = dice.pick([30.0, 40.0, 45.0, 60.0, 60.0, 80.0, 80.0, 100.0, 120.0, 160.0]);
        let Self { outline, junctions, pd_w, ic_max_a, .. } = *self;
        let area = Area { pd_w, ic_max_a, vceo_v, breakdown_v: self.breakdown_v };
        let steepness = dice.between(1.5, 2.4);
        let mut pulse = |share: f64, longer: f64| -> Result<Option<Points>, PointsError> {
            dice.chance(share).then(|| area.longer(longer).curve(steepness)).transpose()
        };
        let soa_pulse = PulseCurves {
            s1: pulse(0.3, 1.2)?,
            ms100: pulse(0.4, 1.7)?,
            ms10: pulse(0.5, 2.6)?,
            ms1: pulse(0.5, 4.0)?,
        };
        let (vbe_v, sat_v) = match junctions {
            1 => (dice.between(1.0, 1.8), dice.between(0.4, 1.6)),
            _ => (dice.between(1.8, 3.0), dice.between(1.2, 2.6)),
        };
        Ok(Transistor {
            junctions,
            vceo_v,
            ic_max_a,
            pd_w,
            tj_max_c: outline.tj_max_c,
            rth_jc_c_per_w: figure((outline.tj_max_c - 25.0) / pd_w),
            hfe_min: gain_curve(self.gain * dice.log_between(0.7, 1.4), ic_max_a, dice)?,
            vbe_max_v: over_current(vbe_v, 0.7 * f64::from(junctions), ic_max_a, dice)?,
            vce_sat_v: over_current(sat_v, 0.3 * sat_v, ic_max_a, dice)?,
            soa_dc: area.curve(steepness)?,
            soa_pulse,
            rth_ja_c_per_w: dice.maybe(0.75, |_| outline.rth_ja_c_per_w),
            cth_j_per_c: dice.maybe(0.5, |_| outline.cth_j_per_c),
            hfe_tempco_per_c: dice.maybe(0.4, |d| figure(d.between(0.003, 0.008))),
            ileak_max_a: self.ileak_a,
        })
    }
}

/// The limits of a safe operating area.
#[derive(Clone, Copy)]
pub struct Area {
    /// Power at 25 °C case, W.
    pub pd_w: f64,
    /// Greatest current, A.
    pub ic_max_a: f64,
    /// Greatest voltage, V.
    pub vceo_v: f64,
    /// Second breakdown begins here, V.
    pub breakdown_v: f64,
}

impl Area {
    /// The area for pulses that allow this many times the power; breakdown then comes later.
    pub fn longer(self, times: f64) -> Self {
        let breakdown_v = self.breakdown_v * libm::pow(times, 0.3);
        Self { pd_w: self.pd_w * times, breakdown_v, ..self }
    }

    /// The corners: greatest current, power, second breakdown falling with this exponent.
    ///
    /// # Errors
    /// Where the limits are not positive.
    pub fn curve(self, steepness: f64) -> Result<Points, PointsError> {
        let Self { pd_w, ic_max_a, vceo_v, breakdown_v } = self;
        let power_v = pd_w / ic_max_a;
        let mut corners = vec![(power_v.min(vceo_v), ic_max_a.min(pd_w / power_v))];
        if breakdown_v > 1.1 * power_v && breakdown_v < 0.9 * vceo_v {
            corners.push((breakdown_v, pd_w / breakdown_v));
        }
        let &(from_v, from_a) = corners.last().unwrap_or(&(power_v, ic_max_a));
        if vceo_v > 1.1 * from_v {
            // Power falls as 1/v up to second breakdown, faster beyond.
            let power = if vceo_v > breakdown_v { steepness } else { 1.0 };
            corners.push((vceo_v, from_a * libm::pow(vceo_v / from_v, -power)));
        }
        printed(&corners)
    }
}

/// Two to four points with the best gain at about a tenth of the rated current.
fn gain_curve(gain: f64, ic_max_a: f64, dice: &mut Dice) -> Result<Points, PointsError> {
    let tail = dice.between(0.15, 0.45);
    let all = [
        (0.005 * ic_max_a, 0.7 * gain),
        (0.1 * ic_max_a, gain),
        (0.4 * ic_max_a, gain * dice.between(0.6, 0.85)),
        (ic_max_a, tail * gain),
    ];
    match dice.below(3) {
        0 => printed(&[all[1], all[3]]),
        1 => printed(&[all[0], all[1], all[3]]),
        _ => printed(&all),
    }
}

/// One number, or points that rise from `low_v` at a tenth of the rated current.
fn over_current(
    high_v: f64,
    low_v: f64,
    ic_max_a: f64,
    dice: &mut Dice,
) -> Result<OverCurrent, PointsError> {
    if dice.chance(0.4) {
        return Ok(OverCurrent::Number(figure(high_v)));
    }
    let low_v = low_v.min(0.8 * high_v);
    let middle_v = 0.5 * (low_v + high_v);
    let all = [(0.1 * ic_max_a, low_v), (0.4 * ic_max_a, middle_v), (ic_max_a, high_v)];
    let points = if dice.chance(0.5) { printed(&all) } else { printed(&[all[0], all[2]]) };
    points.map(OverCurrent::Points)
}

/// Points with as many digits as data sheets print.
pub fn printed(points: &[(f64, f64)]) -> Result<Points, PointsError> {
    Points::new(points.iter().map(|&(x, y)| (figure(x), figure(y))).collect::<Vec<_>>())
}

/// The whole file.
pub fn file(order: &Order) -> Result<Vec<u8>, PointsError> {
    let mut cells = Cells::new(&format!(
        "{},polarity,junctions,vceo_v,ic_max_a,pd_w,tj_max_c,rth_jc_c_per_w,hfe_min,vbe_max_v,\
         vce_sat_v,soa_dc,rth_ja_c_per_w,cth_j_per_c,hfe_tempco_pct_per_c,ileak_max_a,soa_1s,\
         soa_100ms,soa_10ms,soa_1ms",
        offer::COLUMNS
    ));
    for row in 0..order.sizes.transistors {
        let (family, place) = (row / FAMILY, row % FAMILY);
        if let Some(kind) = order.hard {
            let part = hard::transistor(kind, &hard::Place::of(order.seed, STREAM, row))?;
            let offer = Offer::plain(family, place, 'T', part.price);
            offer.packaged("TO-247", "B-C-E").write(&mut cells);
            write(&mut cells, "npn", &part.figures);
            cells.end();
            continue;
        }
        let traits = Family::draw(&mut Dice::new(order.seed, STREAM_OF_FAMILIES, family as u64));
        let mut dice = Dice::new(order.seed, STREAM, row as u64);
        let price = spread_price(traits.price, &mut dice);
        let offer = Offer::new(family, place, 'T', price, &mut dice);
        offer.packaged(traits.outline.package, traits.outline.pinout).write(&mut cells);
        let polarity = if dice.chance(SHARE_OF_PNP) { "pnp" } else { "npn" };
        write(&mut cells, polarity, &traits.transistor(&mut dice)?);
        cells.end();
    }
    Ok(cells.into_bytes())
}

fn write(cells: &mut Cells, polarity: &str, transistor: &Transistor) {
    cells.text(polarity);
    cells.needed(f64::from(transistor.junctions));
    cells.needed(transistor.vceo_v);
    cells.needed(transistor.ic_max_a);
    cells.needed(transistor.pd_w);
    cells.needed(transistor.tj_max_c);
    cells.needed(transistor.rth_jc_c_per_w);
    cells.needed_points(transistor.hfe_min.as_slice());
    for voltage in [&transistor.vbe_max_v, &transistor.vce_sat_v] {
        match voltage {
            OverCurrent::Number(volts) => cells.needed(*volts),
            OverCurrent::Points(points) => cells.needed_points(points.as_slice()),
        }
    }
    cells.needed_points(transistor.soa_dc.as_slice());
    cells.optional(transistor.rth_ja_c_per_w);
    cells.optional(transistor.cth_j_per_c);
    cells.optional(transistor.hfe_tempco_per_c.map(|share| 100.0 * share));
    cells.optional(transistor.ileak_max_a);
    let PulseCurves { s1, ms100, ms10, ms1 } = &transistor.soa_pulse;
    for curve in [s1, ms100, ms10, ms1] {
        cells.optional_points(curve.as_ref().map(Points::as_slice));
    }
}
