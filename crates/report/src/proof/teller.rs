//! Tells the figures that are given: keys of the sheet, cells of the parts, resistors as fitted.

use super::book::{Book, Origin};
use super::origin::{KeyOrigin, Origins};
use catalog::column::Need;
use circuit::amplifier::InputError;
use circuit::assembly::Assembly;
use circuit::rail::{Output, Rail};
use circuit::reference::Bias;
use circuit::slot::Slot;
use design::parts::PartPlace;
use design::proof::Fitted;
use eligible::kind_of;

/// A design at its rail, and the book in which its figures are told.
pub(super) struct Teller<'a> {
    pub(super) book: Book,
    pub(super) rail: &'a Rail,
    pub(super) fitted: &'a Fitted<'a>,
    pub(super) assembly: &'a Assembly<'a>,
    origins: &'a Origins<'a>,
    cells: Vec<(Slot, Vec<(String, String)>)>,
}

impl<'a> Teller<'a> {
    pub(super) fn new(
        assembly: &'a Assembly<'a>,
        fitted: &'a Fitted<'a>,
        places: &[PartPlace<'_>],
        origins: &'a Origins<'a>,
    ) -> Self {
        Self {
            book: Book::default(),
            rail: assembly.rail,
            fitted,
            assembly,
            origins,
            cells: places.iter().map(|place| (place.slot, place.cells())).collect(),
        }
    }

    pub(super) fn bias(&self) -> &'a Bias {
        &self.assembly.bias
    }

    pub(super) fn input(&self) -> InputError {
        self.assembly.input_error()
    }

    /// A key of the sheet.
    pub(super) fn key(&mut self, symbol: &str, key: &str, value: f64, unit: &'static str) {
        let origin = Origin::Key(self.origins.of(key));
        self.book.given(None, symbol, value, unit, origin);
    }

    /// A field of the derating policy.
    pub(super) fn policy(&mut self, field: &str, value: f64, unit: &'static str) {
        let origin = Origin::Key(self.origins.of_policy(field));
        self.book.given(None, field, value, unit, origin);
    }

    /// A cell of a part; where it is blank its column's default serves.
    pub(super) fn cell(
        &mut self,
        slot: Slot,
        symbol: &str,
        column: &'static str,
        value: f64,
        unit: &'static str,
    ) {
        let origin = self.cell_origin(slot, column);
        self.book.given(Some(slot), symbol, value, unit, origin);
    }

    /// A cell that may be blank: a stand-in of the sheet then serves.
    pub(super) fn cell_or(
        &mut self,
        (slot, symbol, column): (Slot, &str, &'static str),
        value: Option<f64>,
        (key, stand_in): (&str, f64),
        unit: &'static str,
    ) {
        match value {
            Some(value) => self.cell(slot, symbol, column, value, unit),
            None => {
                let origin = Origin::StandIn { column, key: self.key_origin(key) };
                self.book.given(Some(slot), symbol, stand_in, unit, origin);
            }
        }
    }

    /// A resistor as fitted.
    pub(super) fn resistor(&mut self, slot: Slot, symbol: &str, key: &'static str, ohm: f64) {
        self.book.given(Some(slot), symbol, ohm, "Ω", Origin::Fitted { key });
    }

    pub(super) fn key_origin(&self, key: &str) -> KeyOrigin {
        self.origins.of(key)
    }

    pub(super) fn cell_origin(&self, slot: Slot, column: &'static str) -> Origin {
        let cells = self.cells.iter().find(|(of, _)| *of == slot).map(|(_, cells)| cells);
        let cell = cells.and_then(|cells| cells.iter().find(|(name, _)| name == column));
        let text = cell.map(|(_, text)| text.clone()).unwrap_or_default();
        let has_default =
            || matches!(kind_of(slot).column(column).map(|c| c.need), Some(Need::Default(_)));
        if text.is_empty() && has_default() {
            Origin::ColumnDefault { column }
        } else {
            Origin::Cell { column, text }
        }
    }

    /// What the sheet and its policy say. What no formula needs is left out in the end.
    pub(super) fn requirement(&mut self) {
        let rail = self.rail;
        let feed = &rail.feed;
        self.key("VUmin", "feed.min_v", feed.min_v, "V");
        self.key("VUnom", "feed.nominal_v", feed.nominal_v, "V");
        self.key("VUmax", "feed.max_v", feed.max_v, "V");
        self.key("VUL", "feed.max_loaded_v", feed.max_loaded_v, "V");
        match rail.output {
            Output::Fixed { voltage_v, tolerance } => {
                self.key("V", "output.voltage_v", voltage_v, "V");
                self.key("τ", "output.tolerance_pct", tolerance, "");
            }
            Output::Adjustable { from_v, to_v, low_stop_v, ceiling_v } => {
                self.key("adjust_from", "output.adjust_from_v", from_v, "V");
                self.key("adjust_to", "output.adjust_to_v", to_v, "V");
                self.key("low_stop", "output.low_stop_v", low_stop_v, "V");
                if let Some(ceiling_v) = ceiling_v {
                    self.key("ceiling", "output.ceiling_v", ceiling_v, "V");
                }
            }
        }
        self.key("IL", "load.max_a", rail.load.max_a, "A");
        self.key("load.min_a", "load.min_a", rail.load.min_a, "A");
        self.key("Tmin", "ambient.min_c", rail.ambient.min_c, "°C");
        self.key("Tmax", "ambient.max_c", rail.ambient.max_c, "°C");
        if let Some(fault) = rail.fault {
            self.key("IF", "fault.limit_a", fault.limit_a, "A");
            self.key("tF", "fault.lasts_s", fault.lasts_s, "s");
        }
        self.key("divider.min_a", "divider.min_a", rail.divider.min_a, "A");
        self.key("divider.max_a", "divider.max_a", rail.divider.max_a, "A");
        self.key("θCS", "thermal.interface_c_per_w", rail.thermal.interface_c_per_w, "°C/W");
        let derating = &rail.derating;
        for (field, fraction) in [
            ("collector_voltage", derating.collector_voltage),
            ("collector_current", derating.collector_current),
            ("pass_power", derating.pass_power),
            ("soa", derating.soa),
            ("soa_fault", derating.soa_fault),
            ("amp_supply", derating.amp_supply),
            ("amp_current", derating.amp_current),
            ("zener_power", derating.zener_power),
            ("resistor_power", derating.resistor_power),
            ("resistor_voltage", derating.resistor_voltage),
        ] {
            self.policy(field, fraction, "");
        }
        self.policy("junction_below_max_c", derating.junction_below_max_c, "°C");
        self.policy("fault_junction_below_max_c", derating.fault_junction_below_max_c, "°C");
        if let Some(cap_c) = derating.junction_cap_c {
            self.policy("junction_cap_c", cap_c, "°C");
        }
        let span = "max(abs(Tmin − 25), abs(Tmax − 25))";
        self.book.worked(None, "ΔT", "°C", span, rail.temperature_span_c());
    }

    /// The junction temperature that a part is allowed in service.
    pub(super) fn junction_limit(&mut self, slot: Slot, symbol: &str, tj_max_c: f64) {
        let formula = match self.rail.derating.junction_cap_c {
            Some(_) => "min(tj_max − junction_below_max_c, junction_cap_c)",
            None => "tj_max − junction_below_max_c",
        };
        let value = self.rail.derating.junction_c(tj_max_c);
        self.book.worked(Some(slot), symbol, "°C", formula, value);
    }

    /// The same during a fault.
    pub(super) fn fault_junction_limit(&mut self, slot: Slot, symbol: &str, tj_max_c: f64) {
        let value = self.rail.derating.fault_junction_c(tj_max_c);
        self.book.worked(Some(slot), symbol, "°C", "tj_max − fault_junction_below_max_c", value);
    }
}
