//! The figures of the pass transistor: its duty, its temperatures, and its curves where the rail works.
//! Model page, sections 3 and 4.5.

use super::book::spelled;
use super::teller::Teller;
use circuit::parts::{OverCurrent, Transistor};
use circuit::pass::{derated, hottest_load_w};
use circuit::rail::{Fault, Output};
use circuit::slot::Slot;
use design::proof::Cooling;
use quantity::digits::{below, compare};
use quantity::points::{Place, Points};
use std::cmp::Ordering;

const Q: Slot = Slot::Pass;
const H: Slot = Slot::Heatsink;

/// Digits of the numbers of a curve, as its cell gives them.
const CELL_DIGITS: usize = 15;

impl Teller<'_> {
    pub(super) fn duty(&mut self) {
        let duty = *self.assembly.duty;
        let rail = self.rail;
        self.book.worked(None, "IE", "A", "IL + divider.max_a", duty.ie_a);
        let (lowest, highest) = match rail.output {
            Output::Fixed { .. } => ("V·(1 − τ)", "V·(1 + τ)"),
            Output::Adjustable { .. } => ("low_stop", "adjust_to"),
        };
        self.book.worked(None, "VLmin", "V", lowest, rail.lowest_output_v());
        self.book.worked(None, "VLmax", "V", highest, rail.highest_output_v());
        self.book.worked(None, "A", "V", "VUmax − VLmin", duty.open_v);
        self.book.worked(None, "S", "V", "VUmax − VUL", duty.sag_v);
        let at_full_load = (duty.open_v - duty.sag_v) * duty.ie_a;
        let is_full = compare(hottest_load_w(duty.open_v, duty.sag_v, duty.ie_a), at_full_load)
            == Ordering::Equal;
        let hottest = if is_full { "(A − S)·IE" } else { "A²·IE/(4·S)" };
        self.book.worked(None, "P", "W", hottest, duty.power_w);
        if !is_full {
            self.book.note("the feed sags so far that less than full load heats more");
        }
        if rail.fault.is_some() {
            self.book.worked(None, "PF", "W", "VUmax·IF", duty.fault_power_w);
        }
    }

    pub(super) fn pass(&mut self) {
        let q = self.fitted.pass;
        self.cell(Q, "vceo", "vceo_v", q.vceo_v, "V");
        self.cell(Q, "ic_max", "ic_max_a", q.ic_max_a, "A");
        self.cell(Q, "pd", "pd_w", q.pd_w, "W");
        self.cell(Q, "tj_max", "tj_max_c", q.tj_max_c, "°C");
        self.cell(Q, "θJC", "rth_jc_c_per_w", q.rth_jc_c_per_w, "°C/W");
        self.cell(Q, "junctions", "junctions", f64::from(q.junctions), "");
        if let Some(ileak_a) = q.ileak_max_a {
            self.cell(Q, "ileak", "ileak_max_a", ileak_a, "A");
        }
        self.junction_limit(Q, "Tj(q)", q.tj_max_c);
        self.temperatures(q);
        self.hardest_load(q);
        self.fault_area(q);
        self.drive(q);
    }

    fn temperatures(&mut self, q: &Transistor) {
        let mounted = self.assembly.mounted;
        let (tc, tj) = (mounted.case.service_c, mounted.junction_c);
        match self.fitted.cooling {
            Cooling::Unmounted(theta) => {
                self.cell(Q, "θJA", "rth_ja_c_per_w", theta, "°C/W");
                self.book.worked(Some(Q), "TJ", "°C", "Tmax + P·θJA", tj);
                self.book.note("unmounted");
                self.book.worked(Some(Q), "TC", "°C", "TJ − P·θJC", tc);
            }
            Cooling::Heatsink(sink) => {
                self.cell(H, "θSA", "rth_sa_c_per_w", sink.rth_sa_c_per_w, "°C/W");
                self.book.worked(Some(Q), "TC", "°C", "Tmax + P·(θCS + θSA)", tc);
                self.book.worked(Some(Q), "TJ", "°C", "TC + P·θJC", tj);
            }
            Cooling::OwnSink(sink_c_per_w) => {
                self.key("θSA", "thermal.sink_c_per_w", sink_c_per_w, "°C/W");
                self.book.worked(Some(Q), "TC", "°C", "Tmax + P·(θCS + θSA)", tc);
                self.book.worked(Some(Q), "TJ", "°C", "TC + P·θJC", tj);
            }
        }
        let left = "clamp((tj_max − TC)/(tj_max − 25), 0, 1)";
        self.book.worked(Some(Q), "d(TC)", "", left, derated(q.tj_max_c, tc));
        if let Some(fault) = self.rail.fault {
            self.fault_temperature(q, fault);
        }
    }

    /// The case at the end of a short: the page's table, row by row.
    fn fault_temperature(&mut self, q: &Transistor, fault: Fault) {
        let duty = self.assembly.duty;
        let case = self.assembly.mounted.case;
        let hotter = duty.power_w.max(duty.fault_power_w);
        self.book.worked(None, "Pm", "W", "max(P, PF)", hotter);
        let (formula, note): (&str, &str) = match self.fitted.cooling {
            Cooling::Unmounted(_) => match q.cth_j_per_c {
                _ if fault.is_lasting() => ("Tmax + Pm·(θJA − θJC)", FOR_EVER),
                Some(cth) => {
                    self.cell(Q, "cth", "cth_j_per_c", cth, "J/°C");
                    ("min(TC + PF·tF/cth, Tmax + Pm·(θJA − θJC))", WARMING)
                }
                // Equal where the circuit found the short too brief, or where both come to the same.
                None if compare(case.fault_c, case.service_c).is_eq() => ("TC", TOO_BRIEF),
                None => ("Tmax + Pm·(θJA − θJC)", NO_CASE_CAPACITY),
            },
            _ if fault.is_lasting() => ("Tmax + Pm·(θCS + θSA)", FOR_EVER),
            Cooling::Heatsink(sink) if sink.cth_j_per_c.is_some() => {
                let cth = sink.cth_j_per_c.unwrap_or(f64::NAN);
                self.cell(H, "cth", "cth_j_per_c", cth, "J/°C");
                ("Tmax + Pm·θCS + min(P·θSA + PF·tF/cth, Pm·θSA)", WARMING)
            }
            _ => ("Tmax + Pm·θCS + min(P·θSA + PF·θSA·tF/50, Pm·θSA)", NO_SINK_CAPACITY),
        };
        let tf = case.fault_c;
        self.book.worked(Some(Q), "TF", "°C", formula, tf);
        self.book.note(note);
        let left = "clamp((tj_max − TF)/(tj_max − 25), 0, 1)";
        self.book.worked(Some(Q), "d(TF)", "", left, derated(q.tj_max_c, tf));
        self.fault_junction_limit(Q, "TjF(q)", q.tj_max_c);
    }

    /// i, v(i) and what the DC curve allows there.
    fn hardest_load(&mut self, q: &Transistor) {
        let duty = self.assembly.duty;
        let load = self.assembly.pass.hardest_load;
        if below(q.soa_dc.last().0, duty.open_v) {
            self.book.worked(Some(Q), "i", "A", "IE", load.asked_a);
            self.book.worked(Some(Q), "soa_dc(v(i))", "A", "0", load.curve_a);
            self.book.note("A lies above the last point of `soa_dc`: nothing is promised there");
            return;
        }
        let at_v = duty.collector_v(load.asked_a);
        if compare(load.asked_a, duty.ie_a) == Ordering::Equal {
            self.book.worked(Some(Q), "i", "A", "IE", load.asked_a);
        } else {
            let at_point = q.soa_dc.as_slice().iter().any(|(v, _)| compare(*v, at_v).is_eq());
            let (formula, note) = match (at_point, q.soa_dc.place(at_v)) {
                (false, Place::Between((v0, i0), (v1, i1))) => {
                    let n = format!(
                        "ln({}/{})/ln({}/{})",
                        number(i0),
                        number(i1),
                        number(v1),
                        number(v0)
                    );
                    self.book.from_formula(Some(Q), "n", "", &n);
                    self.book.note("slope of the piece of `soa_dc` on which the load is hardest");
                    ("(A − A·n/(1 + n))·IE/S".to_owned(), "where the derivative vanishes")
                }
                _ => (format!("(A − {})·IE/S", number(at_v)), "at a corner of `soa_dc`"),
            };
            self.book.worked(Some(Q), "i", "A", &formula, load.asked_a);
            self.book.note(format!("the hardest load of any up to IE: {note}"));
        }
        self.book.worked(Some(Q), "v(i)", "V", "A − S·i/IE", at_v);
        self.curve("soa_dc(v(i))", "soa_dc", &q.soa_dc, ("v(i)", at_v), load.curve_a);
    }

    /// soa_t(VUmax): the best of the curves that cover the short.
    fn fault_area(&mut self, q: &Transistor) {
        let Some(fault) = self.rail.fault else { return };
        let feed_v = self.rail.feed.max_v;
        let mut names = Vec::new();
        let mut add = |teller: &mut Self, column: &'static str, points: &Points| {
            let name = format!("{column}(VUmax)");
            let value = circuit::curve::safe_current_a(points, feed_v);
            teller.curve(&name, column, points, ("VUmax", feed_v), value);
            names.push(name);
        };
        add(self, "soa_dc", &q.soa_dc);
        for (time_s, points) in q.soa_pulse.given() {
            if fault.is_covered_by(time_s) {
                add(self, pulse_column(time_s), points);
            }
        }
        let formula = match names.as_slice() {
            [only] => only.clone(),
            several => format!("max({})", several.join(", ")),
        };
        let value = self.assembly.pass.fault_curve_a;
        self.book.worked(Some(Q), "soa_t(VUmax)", "A", &formula, value);
    }

    fn drive(&mut self, q: &Transistor) {
        let duty = self.assembly.duty;
        let figures = self.assembly.pass;
        let stand_in = self.rail.stand_ins.hfe_tempco_per_c(q.junctions);
        let tempco = (Q, "αβ", "hfe_tempco_pct_per_c");
        let key = ("assume.hfe_tempco_pct_per_c", stand_in);
        self.cell_or(tempco, q.hfe_tempco_per_c, key, "/°C");
        let share = "max(0.2, 1 + αβ·(min(Tmin, 25) − 25))";
        self.book.from_formula(Some(Q), "c", "", share);
        self.book.note("the share of its gain that the transistor keeps in the cold");

        let (first_a, first_gain) = q.hfe_min.first();
        let at_first = format!("{}/({}·c + 1)", number(first_a), number(first_gain));
        self.curve_worked("IB0", "hfe_min", &at_first, "A", figures.base.first_point_a);
        self.book.note("its first point");
        if below(duty.ie_a, first_a) {
            self.book.worked(Some(Q), "IB", "A", "IB0", figures.base.most_a);
            self.book.note("IE lies below the first point of `hfe_min`");
        } else {
            let gain = circuit::curve::gain(&q.hfe_min, duty.ie_a);
            let mut currents = Vec::new();
            match gain {
                Some(gain) => {
                    self.curve("hfe_min(IE)", "hfe_min", &q.hfe_min, ("IE", duty.ie_a), gain);
                    currents.push("IE/(hfe_min(IE)·c + 1)".to_owned());
                }
                None => currents.push("inf".to_owned()),
            }
            let below_full = q.hfe_min.as_slice().iter().filter(|(i, _)| below(*i, duty.ie_a));
            currents.extend(
                below_full.map(|(i, hfe)| format!("{}/({}·c + 1)", number(*i), number(*hfe))),
            );
            let formula = match currents.as_slice() {
                [only] => only.clone(),
                several => format!("max({})", several.join(", ")),
            };
            self.book.worked(Some(Q), "IB", "A", &formula, figures.base.most_a);
            self.book.note(match gain {
                Some(_) => "the greatest at IE and at the points of `hfe_min` below it",
                None => "IE lies above the last point of `hfe_min`: no gain is promised",
            });
        }
        let good_to_a = q.hfe_min.last().0;
        self.voltage("vbe_max", "vbe_max_v", &q.vbe_max_v, good_to_a);
        let base = "vbe_max(IE) + junctions·0.0025·max(0, 25 − Tmin)";
        self.book.worked(Some(Q), "VBEhi", "V", base, figures.vbe_hi_v);
        self.voltage("vce_sat", "vce_sat_v", &q.vce_sat_v, good_to_a);
    }

    /// A voltage over the collector current, read at IE.
    fn voltage(
        &mut self,
        symbol: &str,
        column: &'static str,
        figure: &OverCurrent,
        good_to_a: f64,
    ) {
        let ie_a = self.assembly.duty.ie_a;
        let value = circuit::curve::voltage_v(figure, ie_a, good_to_a);
        let name = format!("{symbol}(IE)");
        match figure {
            OverCurrent::Number(_) if value.is_finite() => {
                self.cell(Q, &name, column, value, "V");
            }
            OverCurrent::Number(_) => {
                self.curve_worked(&name, column, "inf", "V", value);
                self.book.note("IE lies above the last point of `hfe_min`: no value is promised");
            }
            OverCurrent::Points(points) => match points.place(ie_a) {
                Place::UpToFirst(y) => {
                    self.curve_worked(&name, column, &number(y), "V", value);
                    self.book.note("up to the first point its value holds");
                }
                Place::Between((x0, y0), (x1, y1)) => {
                    let [x0, y0, x1, y1] = [x0, y0, x1, y1].map(number);
                    let formula = format!("{y0} + ({y1} − {y0})·ln(IE/{x0})/ln({x1}/{x0})");
                    self.curve_worked(&name, column, &formula, "V", value);
                    self.book.note("a straight line in (ln I, V) between two points");
                }
                Place::Beyond => {
                    self.curve_worked(&name, column, "inf", "V", value);
                    self.book.note("IE lies above the last point: no value is promised");
                }
            },
        }
    }

    /// A figure read from a curve on logarithmic axes at `x`, a figure told before with its value.
    fn curve(
        &mut self,
        symbol: &str,
        column: &'static str,
        points: &Points,
        (x, x_value): (&str, f64),
        value: f64,
    ) {
        let unit = if column == "hfe_min" { "" } else { "A" };
        let (formula, note) = match points.place(x_value) {
            Place::UpToFirst(y) => (number(y), "up to the first point its value holds"),
            Place::Between((x0, y0), (x1, y1)) => {
                let [x0, y0, x1, y1] = [x0, y0, x1, y1].map(number);
                let formula = format!("{y0}·({x}/{x0})^(ln({y1}/{y0})/ln({x1}/{x0}))");
                (formula, "a straight line on logarithmic axes between two points")
            }
            Place::Beyond => ("0".to_owned(), "above the last point nothing is promised"),
        };
        self.curve_worked(symbol, column, &formula, unit, value);
        self.book.note(note);
    }

    fn curve_worked(
        &mut self,
        symbol: &str,
        column: &'static str,
        formula: &str,
        unit: &'static str,
        value: f64,
    ) {
        let origin = self.cell_origin(Q, column);
        self.book.read_off(Q, symbol, value, unit, origin, formula);
    }
}

const FOR_EVER: &str = "the short lasts for ever";
const WARMING: &str = "the short ends before everything is warm";
const TOO_BRIEF: &str = "cth is blank; a short of 0.1 s or less leaves the case as it was";
const NO_CASE_CAPACITY: &str = "cth is blank: the short counts as lasting for ever";
const NO_SINK_CAPACITY: &str = "no cth is given: a sink is taken to warm up in 50 s";

/// A number of a curve as its cell gives it.
fn number(x: f64) -> String {
    spelled(x, CELL_DIGITS)
}

/// The column of the curve for pulses of this time.
fn pulse_column(time_s: f64) -> &'static str {
    match time_s {
        t if t >= 1.0 => "soa_1s",
        t if t >= 0.1 => "soa_100ms",
        t if t >= 0.01 => "soa_10ms",
        _ => "soa_1ms",
    }
}
