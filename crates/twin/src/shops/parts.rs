//! Random parts for a rail.

use super::Row;
use super::dice::{Dice, figure};
use circuit::parts::{
    Amplifier, Heatsink, MeasuredAt, OverCurrent, Pot, PulseCurves, ResistorLine, ResistorRating,
    Transistor, Zener,
};
use circuit::pass::Duty;
use circuit::rail::{Output, Rail};
use circuit::slot::Slot;
use quantity::points::Points;
use quantity::preferred::Series;

/// Outlines of transistors.
const PACKAGES: [&str; 3] = ["TO-126", "TO-220", "TO-3"];

/// Streams of seeds beside those of the slots.
const STREAM_OF_NAMES: u64 = 200;
const STREAM_OF_PACKAGES: u64 = 300;
const STREAM_OF_FITS: u64 = 301;

/// What a rail asks of its parts, and how a shop meets it.
pub struct Bill<'a> {
    rail: &'a Rail,
    seed: u64,
    duty: Duty,
    /// Share of a part's ratings that fall short.
    strictness: f64,
    /// Share of parts that are copies of the first of their slot, under a name of their own.
    copies: f64,
    /// Prices are whole multiples of this.
    price_step: f64,
}

impl<'a> Bill<'a> {
    /// Draws the traits of the shop.
    pub fn new(rail: &'a Rail, seed: u64, dice: &mut Dice) -> Self {
        Self {
            rail,
            seed,
            duty: Duty::new(rail),
            strictness: dice.pick([0.01, 0.03, 0.06, 0.15, 0.3]),
            copies: dice.pick([0.0, 0.1, 0.4]),
            price_step: dice.pick([0.01, 0.1, 1.0]),
        }
    }

    /// The first `count` parts of a slot.
    pub fn rows<F: Clone>(
        &self,
        slot: Slot,
        count: usize,
        draw: impl Fn(&Self, &mut Dice) -> F,
    ) -> Vec<Row<F>> {
        let mut rows: Vec<Row<F>> = Vec::new();
        for i in 0..count {
            let mut dice = Dice::new(self.seed, slot as u64, i as u64);
            let (maker, part) = self.name(slot, i);
            let copied = rows.first().filter(|_| dice.chance(self.copies));
            let (figures, price) = match copied {
                // The same price, the same at ten digits, or another.
                Some(first) => {
                    let price = first.price * dice.pick([1.0, 1.0, 1.0 + 1e-13, 1.1]);
                    (first.figures.clone(), price)
                }
                None => (draw(self, &mut dice), self.price(&mut dice)),
            };
            rows.push(Row { maker, part, price, figures });
        }
        rows
    }

    /// Names that differ in maker, case, length and beyond ASCII, in no order.
    fn name(&self, slot: Slot, place: usize) -> (String, String) {
        let mut dice = Dice::new(self.seed, STREAM_OF_NAMES + slot as u64, place as u64);
        let maker = dice.pick(["", "Ash", "Birch", "birch", "Cedar"]);
        // The last two sort one way by code points and the other way by UTF-16 units.
        let head = dice.pick(["A", "B", "a", "Z1", "Z", "é", "\u{ff21}", "\u{1d400}"]);
        // The number makes it unique. The first twelve count down, and by name 10 stands before 9.
        let number = if place < 12 { 11 - place } else { place };
        (maker.to_owned(), format!("{head}-{number}"))
    }

    fn price(&self, dice: &mut Dice) -> f64 {
        let steps = dice.whole(1, 12) as f64;
        if dice.chance(0.02) { 0.0 } else { steps * self.price_step }
    }

    /// How many times a rating is what is asked of it: mostly more, sometimes just about, sometimes
    /// too little.
    fn room(&self, dice: &mut Dice) -> f64 {
        if dice.chance(self.strictness) {
            dice.log_between(0.3, 1.0)
        } else if dice.chance(0.1) {
            dice.between(1.0, 1.3)
        } else {
            dice.log_between(1.3, 4.0)
        }
    }

    /// A rating round what is asked of it.
    fn rating(&self, dice: &mut Dice, asked: f64) -> f64 {
        figure(asked * self.room(dice))
    }

    /// Mostly what is usual; where the shop falls short, what is not.
    fn usually<T>(
        &self,
        dice: &mut Dice,
        usual: impl FnOnce(&mut Dice) -> T,
        short: impl FnOnce(&mut Dice) -> T,
    ) -> T {
        // Half as often as ratings do: a part has many figures of this kind, and one is its end.
        if dice.chance(self.strictness / 2.0) { short(dice) } else { usual(dice) }
    }

    /// A zener from well below the output to just about it.
    pub fn zener(&self, dice: &mut Dice) -> Zener {
        let vz_v = match self.rail.output {
            Output::Fixed { voltage_v, .. } => {
                voltage_v * self.usually(dice, |d| d.between(0.25, 0.9), |d| d.between(0.9, 1.2))
            }
            Output::Adjustable { from_v, .. } => {
                from_v * self.usually(dice, |d| d.between(0.25, 0.85), |d| d.between(0.85, 1.2))
            }
        };
        let vz_v = figure(vz_v);
        let feed = &self.rail.feed;
        let izt_a = dice.pick([0.001, 0.002, 0.005, 0.01]);
        let zzt_ohm = figure(dice.log_between(0.5, 0.2 * vz_v / izt_a));
        let zzt_ohm = if dice.chance(0.06) { 0.0 } else { zzt_ohm };
        let knee = dice.whole(0, 9);
        // Zeners drift down below about 5 V and up above.
        let tc_v_per_c = 0.0008 * (vz_v - 5.0);
        let tc_spread = dice.pick([0.0, 0.0002, 0.001]);
        let watts = vz_v * (feed.max_v - vz_v).max(1.0) / feed.nominal_v * izt_a * 2.0;
        let pd_w = self.usually(
            dice,
            |d| d.pick([0.25, 0.4, 0.5, 1.0, 1.3]),
            |d| figure(watts * d.log_between(0.3, 3.0)),
        );
        Zener {
            vz_v,
            tol: dice.pick([0.0, 0.005, 0.01, 0.02, 0.02, 0.05]),
            izt_a,
            zzt_ohm,
            iz_min_a: izt_a
                * self.usually(
                    dice,
                    |d| d.pick([0.02, 0.1, 0.2, 0.4]),
                    |d| d.pick([1.0, 3.0, 10.0]),
                ),
            pd_w,
            tj_max_c: dice.pick([125.0, 150.0, 175.0, 200.0]),
            tc_min_v_per_c: tc_v_per_c - tc_spread,
            tc_max_v_per_c: tc_v_per_c + tc_spread,
            zzk_ohm: (knee < 6).then(|| figure(zzt_ohm * dice.log_between(0.9, 40.0))),
            izk_a: (knee < 5 || knee == 8).then(|| izt_a * dice.pick([0.05, 0.2, 0.5, 1.0])),
            vz_at: dice.pick([MeasuredAt::Pulse, MeasuredAt::Pulse, MeasuredAt::Warm]),
        }
    }

    /// A line for RZ.
    pub fn bias_line(&self, dice: &mut Dice) -> ResistorLine {
        let is_weak = dice.chance(0.02 + 0.2 * self.strictness);
        self.line(dice, is_weak)
    }

    /// A line for RF, RI and RX.
    pub fn divider_line(&self, dice: &mut Dice) -> ResistorLine {
        let is_weak = dice.chance(0.2);
        self.line(dice, is_weak)
    }

    /// A line of resistors: a series between two values, or a list of a few. A weak one takes about
    /// as much as a divider asks of it, and far less than most bias resistors do.
    fn line(&self, dice: &mut Dice, is_weak: bool) -> ResistorLine {
        let series = match dice.whole(0, 99) {
            0..20 => None,
            20..24 => Some(Series::E3),
            24..34 => Some(Series::E6),
            34..60 => Some(Series::E12),
            60..96 => Some(Series::E24),
            // Finer lines cost the plain way much, and show nothing that one now and then would not.
            _ => Some(Series::E96),
        };
        let rules = &self.rail.divider;
        let divider_v = self.rail.lowest_output_v();
        let divider_a = (rules.min_a * rules.max_a).sqrt();
        let values_ohm = match series {
            None => few_values(dice),
            Some(Series::E96) => Series::E96.between(680.0, dice.pick([3300.0, 10e3, 22e3])),
            Some(series) => {
                series.between(dice.pick([100.0, 330.0, 680.0]), dice.pick([10e3, 33e3, 100e3]))
            }
        };
        let (full_power_to_c, zero_power_at_c) =
            self.usually(dice, |d| d.pick([(70.0, 155.0), (70.0, 125.0)]), |_| (25.0, 60.0));
        ResistorLine {
            values_ohm,
            tol: dice.pick([0.001, 0.01, 0.01, 0.01, 0.02, 0.05, 0.2]),
            tempco_per_c: dice.pick([0.0, 15e-6, 50e-6, 100e-6, 300e-6]),
            rating: ResistorRating {
                power_w: if is_weak {
                    figure(divider_v * divider_a * dice.log_between(0.2, 10.0))
                } else {
                    dice.pick([0.125, 0.25, 0.5, 1.0])
                },
                full_power_to_c,
                zero_power_at_c,
            },
            vmax_v: if is_weak {
                figure(divider_v * dice.log_between(0.3, 5.0))
            } else {
                dice.pick([50.0, 200.0, 350.0])
            },
        }
    }

    /// A pot that spans the range with about a divider current in its window.
    pub fn pot(&self, dice: &mut Dice) -> Pot {
        let (from_v, to_v) = match self.rail.output {
            Output::Fixed { voltage_v, .. } => (0.5 * voltage_v, voltage_v),
            Output::Adjustable { from_v, to_v, .. } => (from_v, to_v),
        };
        let rules = &self.rail.divider;
        let current_a = dice.log_between(rules.min_a, 0.7 * rules.max_a);
        let value_ohm = figure((to_v - 0.8 * from_v) / current_a * dice.log_between(0.9, 1.8));
        Pot {
            value_ohm,
            tol: dice.pick([0.05, 0.1, 0.2]),
            end_ohm: figure(value_ohm * dice.pick([0.0, 0.002, 0.01, 0.05])),
            tempco_per_c: dice.pick([50e-6, 100e-6, 300e-6]),
            rating: ResistorRating {
                power_w: self.usually(
                    dice,
                    |d| d.pick([0.1, 0.25, 0.5, 1.0]),
                    |d| figure(d.log_between(0.003, 0.1)),
                ),
                full_power_to_c: dice.pick([40.0, 70.0]),
                zero_power_at_c: dice.pick([100.0, 125.0]),
            },
            vmax_v: dice.maybe(0.5, |d| {
                self.usually(d, |d| d.pick([50.0, 200.0]), |d| figure(to_v * d.between(0.2, 1.5)))
            }),
        }
    }

    /// An amplifier that runs from the feed.
    pub fn amplifier(&self, dice: &mut Dice) -> Amplifier {
        let Rail { feed, fault, .. } = self.rail;
        let lowest_v = self.rail.lowest_output_v();
        let headroom_v = feed.min_v - self.rail.highest_output_v();
        let lasting = fault.is_some_and(|f| f.heats_junctions());
        // A rise of 100 °C at the full feed would take this.
        let rth_ja_c_per_w = dice.pick([60.0, 100.0, 150.0, 220.0]);
        let full_current_a = 100.0 / rth_ja_c_per_w / feed.max_v;
        Amplifier {
            vs_min_v: self.usually(
                dice,
                |d| d.pick([2.7, 3.0, 4.5]),
                |d| figure(feed.min_v * d.between(0.7, 1.4)),
            ),
            vs_max_v: self.rating(dice, 1.2 * feed.max_v),
            vcm_low_v: self.usually(
                dice,
                |d| d.pick([-0.1, 0.0, 0.3, 1.0]),
                |d| figure(lowest_v * d.between(0.3, 1.2)),
            ),
            vcm_high_v: self.usually(
                dice,
                |d| d.pick([-0.1, 0.0, 1.2, 1.5]),
                |d| figure(feed.min_v * d.between(0.2, 0.9)),
            ),
            swing_low_v: self.usually(
                dice,
                |d| d.pick([-0.1, 0.005, 0.05, 0.3]),
                |d| figure(lowest_v * d.between(0.7, 1.4)),
            ),
            swing_high_v: self.usually(
                dice,
                |d| d.pick([0.05_f64, 0.2, 0.8, 1.5]).min(0.4 * headroom_v),
                |d| figure(headroom_v * d.between(0.3, 1.2)),
            ),
            iout_a: self.usually(
                dice,
                |d| d.pick([0.02, 0.04, 0.1, 0.25]),
                |d| figure(d.log_between(5e-4, 0.02)),
            ),
            vos_max_v: self.usually(
                dice,
                |d| d.pick([0.0001, 0.001, 0.005, 0.01]),
                |d| figure(d.log_between(0.03, 0.5)),
            ),
            ib_max_a: self.usually(
                dice,
                |d| d.pick([0.0, 1e-9, 1e-7, 5e-7]),
                |d| figure(d.log_between(1e-5, 2e-3)),
            ),
            iq_max_a: self.usually(
                dice,
                |d| figure(d.log_between(1e-4, 0.3 * full_current_a.max(0.001))),
                |d| figure(full_current_a * d.between(0.5, 1.5)),
            ),
            tj_max_c: dice.pick([125.0, 150.0, 150.0]),
            rth_ja_c_per_w,
            // Needed where a short heats the amplifier.
            isc_max_a: (lasting || dice.chance(0.5)).then(|| {
                self.usually(
                    dice,
                    |d| figure(full_current_a * d.between(0.1, 0.6)),
                    |d| figure(full_current_a * d.between(0.6, 3.0)),
                )
            }),
            isink_a: dice.maybe(0.6, |d| {
                self.usually(d, |d| d.pick([0.002, 0.01]), |d| figure(d.log_between(1e-6, 1e-3)))
            }),
            gain_min_db: dice.maybe(0.6, |d| d.pick([60.0, 88.0, 100.0])),
            psrr_min_db: dice.maybe(0.6, |d| d.pick([55.0, 65.0, 90.0])),
            cmrr_min_db: dice.maybe(0.6, |d| d.pick([55.0, 65.0, 80.0])),
            vs_test_v: dice.maybe(0.5, |d| d.pick([5.0, 15.0, 30.0])),
        }
    }

    /// A transistor or darlington that carries the load.
    pub fn transistor(&self, dice: &mut Dice) -> Transistor {
        let Duty { ie_a, power_w, fault_power_w, .. } = self.duty;
        let feed_v = self.rail.feed.max_v;
        let fault_a = self.rail.fault.map_or(0.0, |f| f.limit_a);
        let hardest_w = power_w.max(0.7 * fault_power_w).max(0.05);
        let junctions = dice.pick([1u8, 2]);
        let tj_max_c = dice.pick([125.0, 150.0, 150.0, 175.0, 200.0]);
        let vceo_v = self.rating(dice, 1.4 * feed_v);
        let ic_max_a = self.rating(dice, 1.5 * ie_a.max(fault_a));
        let pd_w = self.rating(dice, 3.0 * hardest_w);
        let soa_dc = self.safe_area(dice, vceo_v, ic_max_a, pd_w);
        let mut pulse = |share: f64, factor: f64| {
            dice.chance(share).then(|| scaled(&soa_dc, factor * dice.between(0.8, 1.3))).flatten()
        };
        let soa_pulse = PulseCurves {
            s1: pulse(0.3, 1.2),
            ms100: pulse(0.4, 1.7),
            ms10: pulse(0.4, 2.5),
            ms1: pulse(0.5, 4.0),
        };
        let (vbe_v, sat_v) = match junctions {
            1 => (dice.between(0.8, 1.6), dice.between(0.2, 1.2)),
            _ => (dice.between(1.4, 2.8), dice.between(0.8, 2.0)),
        };
        let headroom_v = self.rail.feed.min_v - self.rail.highest_output_v();
        let sat_v = self.usually(dice, |_| sat_v, |d| headroom_v * d.between(0.7, 1.3));
        let room_c = (tj_max_c - self.rail.ambient.max_c).max(10.0);
        let rth_ja = figure(room_c / power_w.max(0.05) / dice.log_between(0.7, 6.0));
        Transistor {
            junctions,
            vceo_v,
            ic_max_a,
            pd_w,
            tj_max_c,
            rth_jc_c_per_w: figure((tj_max_c - 25.0) / pd_w * dice.pick([0.0, 0.8, 1.0])),
            hfe_min: self.gain_curve(dice, junctions, ic_max_a),
            vbe_max_v: over_current(dice, figure(vbe_v), ie_a, ic_max_a),
            vce_sat_v: over_current(dice, figure(sat_v), ie_a, ic_max_a),
            soa_dc,
            soa_pulse,
            // A large one would not stand alone.
            rth_ja_c_per_w: dice.chance(0.5).then_some(rth_ja.min(200.0)),
            cth_j_per_c: dice.maybe(0.5, |d| figure(d.log_between(0.5, 20.0))),
            hfe_tempco_per_c: dice.maybe(0.4, |d| d.pick([0.0, 0.004, 0.007, 0.03])),
            ileak_max_a: dice.maybe(0.5, |d| {
                self.usually(
                    d,
                    |d| figure(d.log_between(1e-6, 2e-4)),
                    |d| figure(d.log_between(2e-4, 0.02)),
                )
            }),
        }
    }

    /// Flat to the power hyperbola, then along it or steeper (second breakdown), up to about VCEO.
    fn safe_area(&self, dice: &mut Dice, vceo_v: f64, ic_max_a: f64, pd_w: f64) -> Points {
        let knee_v = pd_w / ic_max_a;
        let mut points = vec![(knee_v, ic_max_a)];
        let pieces = dice.whole(0, 3) as i32;
        let last_v = vceo_v * self.usually(dice, |_| 1.0, |d| d.between(0.5, 1.0));
        if last_v > 1.1 * knee_v {
            let step = (last_v / knee_v).powf(1.0 / f64::from(pieces + 1));
            for _ in 0..=pieces {
                let &(v, i) = points.last().unwrap_or(&(knee_v, ic_max_a));
                // Now and then level or even rising, as no physics but some typing has it.
                let slope = self.usually(
                    dice,
                    |d| d.pick([1.0, 1.0, 1.3, 2.0]),
                    |d| d.pick([-0.2, 0.0, 3.0]),
                );
                points.push((v * step, i * step.powf(-slope)));
            }
        }
        curve(points, (knee_v, ic_max_a))
    }

    /// One to four points, from well below full load to beyond it.
    fn gain_curve(&self, dice: &mut Dice, junctions: u8, ic_max_a: f64) -> Points {
        let ie_a = self.duty.ie_a;
        let typical = match junctions {
            1 => dice.log_between(20.0, 150.0),
            _ => dice.log_between(500.0, 3000.0),
        };
        let gain = self.usually(dice, |_| typical, |d| d.log_between(3.0, 20.0));
        let first_a =
            ie_a * self.usually(dice, |d| d.pick([0.003, 0.05, 0.3]), |d| d.between(0.8, 2.0));
        let last_a = self.usually(
            dice,
            |_| ic_max_a.max(1.1 * first_a),
            |d| (ie_a * d.between(0.7, 1.2)).max(1.1 * first_a),
        );
        let pieces = dice.whole(0, 3) as i32;
        if pieces == 0 {
            return curve(vec![(last_a, gain)], (last_a, gain));
        }
        let step = (last_a / first_a).powf(1.0 / f64::from(pieces));
        let points = (0..=pieces)
            .map(|k| (first_a * step.powi(k), gain * dice.log_between(0.3, 1.2)))
            .collect();
        curve(points, (last_a, gain))
    }

    /// A heatsink that keeps the case cool enough, more often than not.
    pub fn heatsink(&self, dice: &mut Dice) -> Heatsink {
        let Duty { power_w, fault_power_w, .. } = self.duty;
        let lasting = self.rail.fault.is_some_and(|f| f.lasts_s > 1.0);
        let watts = if lasting { power_w.max(0.7 * fault_power_w) } else { power_w }.max(0.05);
        let room_c = (150.0 - self.rail.ambient.max_c).max(10.0);
        Heatsink {
            rth_sa_c_per_w: figure(room_c / watts / (2.0 * self.room(dice))),
            cth_j_per_c: dice.maybe(0.5, |d| figure(watts * d.log_between(0.5, 20.0))),
        }
    }

    /// The package of the transistor at a place. One that says nothing of its package is proven only
    /// where it may go unmounted or the sheet brings a sink.
    pub fn package(&self, place: usize, gives_rth_ja: bool) -> Option<String> {
        let mut dice = Dice::new(self.seed, STREAM_OF_PACKAGES, place as u64);
        let may_be_blank = gives_rth_ja || !self.rail.chooses_heatsink();
        let package = dice.pick(PACKAGES);
        if dice.chance(0.1) && may_be_blank { None } else { Some(package.to_owned()) }
    }

    /// The packages that the heatsink at a place fits; sometimes told twice.
    pub fn fits(&self, place: usize) -> Vec<String> {
        let mut dice = Dice::new(self.seed, STREAM_OF_FITS, place as u64);
        (0..dice.whole(1, 4)).map(|_| dice.pick(PACKAGES).to_owned()).collect()
    }
}

/// One to twelve values, some so close that hardly more than the tenth digit tells them apart.
fn few_values(dice: &mut Dice) -> Vec<f64> {
    let mut values: Vec<f64> =
        (0..dice.whole(1, 12)).map(|_| figure(dice.log_between(500.0, 20e3))).collect();
    if dice.chance(0.2) {
        let near = values[0] * (1.0 + dice.pick([2e-9, 1e-8, 1e-6]));
        values.push(near);
    }
    values.sort_by(f64::total_cmp);
    values.dedup();
    values
}

/// A voltage over the collector current: one number, or two points of which the second may lie below
/// full load.
fn over_current(dice: &mut Dice, volts: f64, ie_a: f64, ic_max_a: f64) -> OverCurrent {
    if dice.chance(0.6) {
        return OverCurrent::Number(volts);
    }
    let first_a = figure(ie_a * dice.pick([0.1, 0.5, 1.5]));
    let last_a = ic_max_a.max(1.2 * first_a);
    OverCurrent::Points(curve(vec![(first_a, 0.8 * volts), (last_a, 1.5 * volts)], (last_a, volts)))
}

fn scaled(points: &Points, factor: f64) -> Option<Points> {
    let pairs: Vec<(f64, f64)> =
        points.as_slice().iter().map(|&(x, y)| (x, figure(y * factor))).collect();
    Points::new(pairs).ok()
}

/// Points as a data sheet prints them; the one point `else_point` where they do not rise.
fn curve(points: Vec<(f64, f64)>, else_point: (f64, f64)) -> Points {
    let printed = |(x, y): (f64, f64)| (figure(x), figure(y));
    let pairs: Vec<(f64, f64)> = points.into_iter().map(printed).collect();
    Points::new(pairs)
        .or_else(|_| Points::new(vec![printed(else_point)]))
        .or_else(|_| Points::new(vec![(1.0, 1.0)]))
        .unwrap_or_else(|_| unreachable!("the last resort is a point"))
}
