//! The figures of the reference: zener and bias resistor. Model page, section 4.1.

use super::book::Origin;
use super::teller::Teller;
use circuit::parts::{MeasuredAt, ResistorLine};
use circuit::resistor::{Resistance, power_left};
use circuit::slot::Slot;
use quantity::digits::{at_most, rounded};

const Z: Slot = Slot::Zener;

/// The rounds in which the zener's own heat is put back; the model page fixes them.
const ROUNDS: usize = 3;

impl Teller<'_> {
    pub(super) fn reference(&mut self) {
        self.bias_resistor();
        self.zener_cells();
        for round in 1..=ROUNDS {
            self.heat_round(round);
        }
        self.reference_ends();
    }

    fn bias_resistor(&mut self) {
        self.resistor(Slot::BiasLine, "RZ", "rz_ohm", self.bias().rz.ohm);
        self.line_cells(Slot::BiasLine, self.fitted.bias_line);
        self.corners(Slot::BiasLine, "RZ", self.bias().rz);
    }

    /// The cells of a line of resistors, and the share of its power that is left.
    pub(super) fn line_cells(&mut self, slot: Slot, line: &ResistorLine) {
        self.cell(slot, "tol", "tol_pct", line.tol, "");
        self.cell(slot, "tempco", "tempco_ppm", line.tempco_per_c, "/°C");
        self.cell(slot, "power_w", "power_w", line.rating.power_w, "W");
        self.cell(slot, "vmax_v", "vmax_v", line.vmax_v, "V");
        self.cell(slot, "full_power_to", "full_power_to_c", line.rating.full_power_to_c, "°C");
        self.cell(slot, "zero_power_at", "zero_power_at_c", line.rating.zero_power_at_c, "°C");
        let left = power_left(&line.rating, self.rail.ambient.max_c);
        self.book.worked(Some(slot), "D", "", POWER_LEFT, left);
    }

    /// The least and the most that a resistor may measure.
    pub(super) fn corners(&mut self, slot: Slot, symbol: &str, resistance: Resistance) {
        let formula = |sign: &str| format!("{symbol}·(1 {sign} tol)·(1 {sign} tempco·ΔT)");
        let Resistance { lo_ohm, hi_ohm, .. } = resistance;
        self.book.worked(Some(slot), &format!("{symbol}lo"), "Ω", &formula("−"), lo_ohm);
        self.book.worked(Some(slot), &format!("{symbol}hi"), "Ω", &formula("+"), hi_ohm);
    }

    fn zener_cells(&mut self) {
        let z = self.fitted.zener;
        self.cell(Z, "vz", "vz_v", z.vz_v, "V");
        self.cell(Z, "tol", "tol_pct", z.tol, "");
        self.cell(Z, "izt", "izt_a", z.izt_a, "A");
        self.cell(Z, "zzt", "zzt_ohm", z.zzt_ohm, "Ω");
        self.cell(Z, "iz_min", "iz_min_a", z.iz_min_a, "A");
        self.cell(Z, "pd", "pd_w", z.pd_w, "W");
        self.cell(Z, "tj_max", "tj_max_c", z.tj_max_c, "°C");
        self.cell(Z, "tc_min", "tc_min_mv_per_c", z.tc_min_v_per_c, "V/°C");
        self.cell(Z, "tc_max", "tc_max_mv_per_c", z.tc_max_v_per_c, "V/°C");
        let knee = z.knee_exponent(self.rail.stand_ins.zener_knee);
        match (z.zzk_ohm, z.izk_a) {
            (Some(zzk_ohm), Some(izk_a)) if !z.leans_on_knee() => {
                self.cell(Z, "zzk", "zzk_ohm", zzk_ohm, "Ω");
                self.cell(Z, "izk", "izk_a", izk_a, "A");
                let formula = "max(1, ln(zzk/zzt)/ln(izt/izk))";
                self.book.worked(Some(Z), "m", "", formula, knee);
            }
            _ => {
                let key = self.key_origin("assume.zener_knee");
                let column = if z.zzk_ohm.is_none() { "zzk_ohm" } else { "izk_a" };
                self.book.given(Some(Z), "m", knee, "", Origin::StandIn { column, key });
            }
        }
        let theta = self.assembly.zener.theta_ja_c_per_w;
        self.book.worked(Some(Z), "θJA", "°C/W", "(tj_max − 25)/pd", theta);
        match z.vz_at {
            MeasuredAt::Warm => {
                self.book.from_formula(Some(Z), "Tw", "°C", "vz·izt·θJA");
                self.book.note("vz_at is `warm`: vz is stated after warming up at izt");
                self.book.from_formula(Some(Z), "δcold", "°C", "Tmin − 25 − Tw·(1 + tol)");
            }
            MeasuredAt::Pulse => {
                self.book.from_formula(Some(Z), "δcold", "°C", "Tmin − 25");
            }
        }
        self.junction_limit(Z, "Tj(z)", z.tj_max_c);
    }

    /// One round: the zener's heat of the round before changes its voltage, and that its heat.
    fn heat_round(&mut self, round: usize) {
        // The last round's figures bear the plain names.
        let name = |symbol: &str, of: usize| match of {
            ROUNDS => symbol.to_owned(),
            _ => format!("{symbol}({of})"),
        };
        let own = |symbol: &str| name(symbol, round);
        let z = self.fitted.zener;
        let bias = *self.bias();
        let is_last = round == ROUNDS;
        let hot = match (round, z.vz_at) {
            (1, _) => "Tmax − 25".to_owned(),
            (_, MeasuredAt::Pulse) => format!("Tmax − 25 + max(0, {}·θJA)", name("Pe", round - 1)),
            (_, MeasuredAt::Warm) => {
                format!("Tmax − 25 + max(0, {}·θJA − Tw·(1 − tol))", name("Pe", round - 1))
            }
        };
        self.book.from_formula(Some(Z), &own("δhot"), "°C", &hot);
        let drifts = ["tc_min·δcold", "tc_min·δhot", "tc_max·δcold", "tc_max·δhot"]
            .map(|drift| drift.replace("δhot", &own("δhot")))
            .join(", ");
        let v0_lo = format!("vz·(1 − tol) + min({drifts})");
        self.book.from_formula(Some(Z), &own("V0lo"), "V", &v0_lo);
        let v0_hi = format!("vz·(1 + tol) + max({drifts})");
        self.told(&own("V0hi"), "V", &v0_hi, is_last.then_some(bias.v0_hi_v));
        let own_v0_hi = own("V0hi");
        let vz_hi =
            format!("{own_v0_hi} + zzt·max(0, (VUmax − {own_v0_hi} + zzt·izt)/(RZlo + zzt) − izt)");
        self.told(&own("VZhi"), "V", &vz_hi, is_last.then_some(bias.vz_hi_v));
        self.droop(["VUmax", &own("V0lo"), "RZlo"], &own("Jhi"), &own("Whi"));
        self.told(&own("Vm"), "V", &format!("{} − {}", own("V0lo"), own("Whi")), None);
        let vp = format!("clamp(VUmax/2, {}, {})", own("Vm"), own("VZhi"));
        self.told(&own("Vp"), "V", &vp, None);
        let pe = format!("{vp}·(VUmax − {vp})/RZlo", vp = own("Vp"));
        self.told(&own("Pe"), "W", &pe, is_last.then_some(bias.power_w));
    }

    /// A figure of the zener: the circuit's own, or worked out where the circuit keeps it to itself.
    fn told(&mut self, symbol: &str, unit: &'static str, formula: &str, value: Option<f64>) {
        match value {
            Some(value) => self.book.worked(Some(Z), symbol, unit, formula, value),
            None => {
                self.book.from_formula(Some(Z), symbol, unit, formula);
            }
        }
    }

    /// The current of a zener without impedance, and how far its voltage droops at that current.
    fn droop(&mut self, [feed, v0, rz]: [&str; 3], j: &str, w: &str) {
        let current = self.book.from_formula(Some(Z), j, "A", &format!("({feed} − {v0})/{rz}"));
        let z = self.fitted.zener;
        let knee = z.knee_exponent(self.rail.stand_ins.zener_knee);
        let value = z.droop_v(current, knee);
        let (formula, note) = if at_most(z.izt_a, current) {
            ("0".to_owned(), format!("{j} is at least izt, so there is no droop"))
        } else if current <= 0.0 {
            ("inf".to_owned(), format!("{j} is not above 0: nothing feeds the zener"))
        } else if rounded(knee) == 1.0 {
            (format!("zzt·izt·ln(izt/{j})"), format!("{j} lies below izt, and m is 1"))
        } else {
            let formula = format!("zzt·izt·((izt/{j})^(m − 1) − 1)/(m − 1)");
            (formula, format!("{j} lies below izt"))
        };
        self.book.worked(Some(Z), w, "V", &formula, value);
        self.book.note(note);
    }

    fn reference_ends(&mut self) {
        let bias = *self.bias();
        self.book.worked(Some(Z), "IZhi", "A", "(VUmax − Vm)/RZlo", bias.iz_hi_a);
        self.droop(["VUmin", "V0lo", "RZhi"], "Jlo", "Wlo");
        self.book.worked(Some(Z), "VZlo", "V", "V0lo − Wlo", bias.vz_lo_v);
        let least = "min((VUmin − V0hi + zzt·izt)/(RZhi + zzt), (VUmin − V0hi)/RZhi)";
        self.book.worked(Some(Z), "IZlo", "A", least, bias.iz_lo_a);
        let nominal = "(VUnom − vz + zzt·izt)/(RZ + zzt)";
        self.book.worked(Some(Z), "IZn", "A", nominal, bias.iz_nominal_a);
        self.book.worked(Some(Z), "VZn", "V", "vz + zzt·(IZn − izt)", bias.vz_nominal_v);
    }
}

/// D: the share of its power rating that a resistor or pot has left.
pub(super) const POWER_LEFT: &str =
    "clamp((zero_power_at − Tmax)/(zero_power_at − full_power_to), 0, 1)";
