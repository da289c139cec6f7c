//! The figures of the divider and of the output that it makes. Model page, sections 4.2 to 4.4.

use super::reference::POWER_LEFT;
use super::teller::Teller;
use circuit::assembly::OutputFigures;
use circuit::divider::DividerCurrent;
use circuit::resistor::power_left;
use circuit::slot::Slot;

const L: Slot = Slot::DividerLine;

impl Teller<'_> {
    pub(super) fn divider(&mut self) {
        let divider = self.assembly.network.divider;
        let (upper, key) = match self.rail.is_adjustable() {
            true => ("RX", "rx_ohm"),
            false => ("RF", "rf_ohm"),
        };
        self.resistor(L, upper, key, divider.upper.ohm);
        self.resistor(L, "RI", "ri_ohm", divider.ri.ohm);
        self.line_cells(L, self.fitted.divider_line);
        self.corners(L, upper, divider.upper);
        self.corners(L, "RI", divider.ri);
        self.pot();
        let current = DividerCurrent::new(self.bias(), &divider.ri, self.input());
        self.book.worked(Some(L), "IDlo", "A", "(VZlo − εa)/RIhi − ib", current.lo_a);
        self.book.worked(Some(L), "IDhi", "A", "(VZhi + εa)/RIlo + ib", current.hi_a);
        self.output();
    }

    fn pot(&mut self) {
        const P: Slot = Slot::Pot;
        let (Some(pot), Some(at_rail)) = (self.fitted.pot, self.assembly.network.pot) else {
            return;
        };
        self.cell(P, "p", "value_ohm", pot.value_ohm, "Ω");
        self.cell(P, "tol", "tol_pct", pot.tol, "");
        self.cell(P, "tempco", "tempco_ppm", pot.tempco_per_c, "/°C");
        self.cell(P, "end_ohm", "end_ohm", pot.end_ohm, "Ω");
        self.cell(P, "power_w", "power_w", pot.rating.power_w, "W");
        if let Some(vmax_v) = pot.vmax_v {
            self.cell(P, "vmax_v", "vmax_v", vmax_v, "V");
        }
        self.cell(P, "full_power_to", "full_power_to_c", pot.rating.full_power_to_c, "°C");
        self.cell(P, "zero_power_at", "zero_power_at_c", pot.rating.zero_power_at_c, "°C");
        let left = power_left(&pot.rating, self.rail.ambient.max_c);
        self.book.worked(Some(P), "D", "", POWER_LEFT, left);
        self.corners(P, "p", at_rail.track);
    }

    fn output(&mut self) {
        match self.assembly.output() {
            OutputFigures::Fixed(output) => {
                let high = "(1 + RFhi/RIlo)·(VZhi + εa) + ib·RFhi";
                let low = "(1 + RFlo/RIhi)·(VZlo − εa) − ib·RFhi";
                self.book.worked(Some(L), "VLhi", "V", high, output.hi_v);
                self.book.worked(Some(L), "VLlo", "V", low, output.lo_v);
                self.book.worked(Some(L), "VLn", "V", "(1 + RF/RI)·VZn", output.nominal_v);
            }
            OutputFigures::Adjustable(output) => {
                let reach = "(1 + (RXlo + plo)/RIhi)·(VZlo − εa) − ib·(RXlo + plo)";
                let floor = "(1 + (RXhi + end_ohm)/RIlo)·(VZhi + εa) + ib·(RXhi + end_ohm)";
                let low = "(1 + RXlo/RIhi)·(VZlo − εa) − ib·RXlo";
                let top = "(1 + (RXhi + phi)/RIlo)·(VZhi + εa) + ib·(RXhi + phi)";
                self.book.worked(Some(L), "Vreach", "V", reach, output.reach_v);
                self.book.worked(Some(L), "Vfloor", "V", floor, output.floor_v);
                self.book.worked(Some(L), "Vlow", "V", low, output.low_v);
                self.book.worked(Some(L), "Vtop", "V", top, output.top_v);
            }
        }
    }
}
