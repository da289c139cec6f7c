//! The figures of the amplifier: supply, input, output, and the error it adds. Model page, sections
//! 4.2 and 4.6.

use super::teller::Teller;
use circuit::slot::Slot;

const A: Slot = Slot::Amplifier;

impl Teller<'_> {
    pub(super) fn amplifier(&mut self) {
        let a = self.fitted.amplifier;
        let stand_ins = self.rail.stand_ins;
        self.cell(A, "vs_min", "vs_min_v", a.vs_min_v, "V");
        self.cell(A, "vs_max", "vs_max_v", a.vs_max_v, "V");
        self.cell(A, "vcm_low", "vcm_low_v", a.vcm_low_v, "V");
        self.cell(A, "vcm_high", "vcm_high_v", a.vcm_high_v, "V");
        self.cell(A, "swing_low", "swing_low_v", a.swing_low_v, "V");
        self.cell(A, "swing_high", "swing_high_v", a.swing_high_v, "V");
        self.cell(A, "iout", "iout_a", a.iout_a, "A");
        self.cell(A, "vos_max", "vos_max_v", a.vos_max_v, "V");
        self.cell(A, "ib", "ib_max_a", a.ib_max_a, "A");
        self.cell(A, "iq", "iq_max_a", a.iq_max_a, "A");
        self.cell(A, "tj_max", "tj_max_c", a.tj_max_c, "°C");
        self.cell(A, "θJA", "rth_ja_c_per_w", a.rth_ja_c_per_w, "°C/W");
        self.cell(A, "isc", "isc_max_a", a.isc_max_a.unwrap_or(f64::INFINITY), "A");
        if let Some(isink_a) = a.isink_a {
            self.cell(A, "isink", "isink_a", isink_a, "A");
        }
        let gain = (A, "gain", "gain_min_db");
        self.cell_or(gain, a.gain_min_db, ("assume.gain_db", stand_ins.gain_db), "dB");
        let psrr = (A, "psrr", "psrr_min_db");
        self.cell_or(psrr, a.psrr_min_db, ("assume.psrr_db", stand_ins.psrr_db), "dB");
        let cmrr = (A, "cmrr", "cmrr_min_db");
        self.cell_or(cmrr, a.cmrr_min_db, ("assume.cmrr_db", stand_ins.cmrr_db), "dB");
        let vs_test = (A, "vs_test", "vs_test_v");
        self.cell_or(vs_test, a.vs_test_v, ("assume.vs_test_v", stand_ins.vs_test_v), "V");
        let error = "vos_max + VUmin/10^(gain/20) + \
                     max(abs(VUmax − vs_test), abs(VUmin − vs_test))/10^(psrr/20) + \
                     VZhi/10^(cmrr/20)";
        self.book.worked(Some(A), "εa", "V", error, self.input().error_v);
        self.junction_limit(A, "Tj(a)", a.tj_max_c);
        self.fault_junction_limit(A, "TjF(a)", a.tj_max_c);
    }
}
