//! What the tool states about a candidate, held against what the simulator found.

use crate::corner::{Corner, End};
use crate::netlist::track_ohm;
use crate::ngspice::Operating;
use crate::stage::Stage;
use circuit::rail::Output;
use serde_json::Value;
use std::fmt;

/// Room for the solver's own tolerance, as a fraction.
const SOLVER: f64 = 1e-6;

/// What a link may have, V or W: the simulator holds a resistor of 1 µΩ in its place.
const LINK: f64 = 1e-8;

/// The figures that the JSON output states.
pub struct Bounds<'a> {
    candidate: &'a Value,
    stage: &'a Stage<'a>,
}

impl<'a> Bounds<'a> {
    pub fn of(candidate: &'a Value, stage: &'a Stage<'a>) -> Self {
        Self { candidate, stage }
    }

    fn output(&self, name: &str) -> f64 {
        self.candidate["output"][name].as_f64().expect(name)
    }

    fn of_check(&self, check: &str, figure: &str) -> Option<f64> {
        let checks = self.candidate["checks"].as_array().expect("checks");
        checks.iter().find(|c| c["name"] == check).and_then(|c| c[figure].as_f64())
    }

    fn asked(&self, check: &str) -> f64 {
        self.of_check(check, "asked").unwrap_or_else(|| panic!("{check} is listed"))
    }

    /// The least and the highest output at a corner.
    fn window(&self, corner: &Corner) -> (f64, f64) {
        match (&self.stage.rail.output, corner.knob) {
            (Output::Fixed { .. }, _) => (self.output("low_v"), self.output("high_v")),
            (Output::Adjustable { .. }, End::Low) => (self.output("low_v"), self.output("floor_v")),
            // Beyond the range that is asked for the least feed may end the swing.
            (Output::Adjustable { to_v, .. }, _) => {
                let reach = self.output("reach_v");
                (
                    if corner.feed == End::Low { to_v.min(reach) } else { reach },
                    self.output("top_v"),
                )
            }
        }
    }

    /// What lies outside at a corner, in words.
    pub fn outside(&self, corner: &Corner, point: &Operating) -> Vec<String> {
        let stage = self.stage;
        let mut off = Vec::new();
        let mut at_most = |what: &str, found: f64, stated: f64| {
            if found > stated + SOLVER * stated.abs() + LINK {
                off.push(format!("{what} {found:e} beyond {stated:e} at {corner:?}"));
            }
        };
        let (low_v, high_v) = self.window(corner);
        at_most("output", point.output_v, high_v);
        at_most("least output: minus", -point.output_v, -low_v);

        let allowed_bias = self.of_check("zener-bias", "allowed").expect("zener-bias");
        at_most("least zener current: minus", -point.zener_a, -allowed_bias);
        let rz_v = point.feed_v - point.zener_v;
        at_most("volts on RZ", rz_v, self.asked("rz-voltage"));
        at_most("power of RZ", rz_v * point.zener_a, self.asked("rz-power"));
        at_most("power of the zener", point.zener_v * point.zener_a, self.asked("zener-power"));

        at_most("base current", point.base_a, self.asked("base-drive"));
        at_most("current of the transistor", point.emitter_a, self.asked("collector-current"));
        at_most("dissipation", point.pass_w, self.asked("pass-power"));
        let rise_c = point.junction_c - stage.rail.ambient.max_c;
        at_most("junction of the transistor", rise_c, self.asked("pass-junction"));
        let amplifier = stage.amplifier;
        let own_w =
            point.feed_v * amplifier.iq_max_a + (point.feed_v - point.drive_v) * point.base_a;
        at_most(
            "junction of the amplifier",
            own_w * amplifier.rth_ja_c_per_w,
            self.asked("amp-junction"),
        );

        let ri_w = point.divider_v * (point.divider_a - self.input_a(corner));
        at_most("power of RI", ri_w, self.asked("ri-power"));
        let upper_v = point.output_v - point.divider_v;
        if stage.pot.is_none() {
            at_most("volts on RF", upper_v, self.asked("rf-voltage"));
            at_most("power of RF", upper_v * point.divider_a, self.asked("rf-power"));
        } else {
            let track = track_ohm(stage, corner);
            at_most("power of the pot", point.divider_a.powi(2) * track, self.asked("pot-power"));
            let fixed_w = upper_v * point.divider_a - point.divider_a.powi(2) * track;
            at_most("power of RX", fixed_w, self.asked("rx-power") + 1e-12);
        }
        off
    }

    /// The current into the amplifier's − input, A.
    fn input_a(&self, corner: &Corner) -> f64 {
        corner.amplifier.sign() * self.stage.amplifier.ib_max_a
    }

    /// What differs from the nominal figures, in words.
    pub fn nominal(&self, point: &Operating) -> Vec<String> {
        let mut off = Vec::new();
        let mut near = |what: &str, found: f64, stated: f64, within: f64| {
            if (found - stated).abs() > within * stated.abs() {
                off.push(format!("{what} {found} where {stated} is stated"));
            }
        };
        let rail = self.stage.rail;
        let (asked_v, stated_v) = match rail.output {
            Output::Fixed { voltage_v, .. } => (voltage_v, self.output("nominal_v")),
            Output::Adjustable { to_v, .. } => (to_v, to_v),
        };
        // A gain of 80 dB and a drive of some volts are off by some parts in ten thousand.
        near("output", point.output_v, stated_v, 2e-3);
        let efficiency = point.output_v * rail.load.max_a / (point.feed_v * point.feed_a);
        let stated = self.candidate["efficiency"].as_f64().expect("efficiency");
        // The tool states it for the output that is asked, the simulator for the one that comes.
        near("efficiency", efficiency * asked_v / point.output_v, stated, 2e-3);
        off
    }
}

/// How near the corners come to what is stated, at most and over all candidates: 1 is the bound itself.
#[derive(Debug, Default)]
pub struct Reach {
    window: f64,
    dissipation: f64,
    base: f64,
    zener_power: f64,
    bias: f64,
}

impl Reach {
    pub fn join(&mut self, bounds: &Bounds<'_>, points: &[Operating]) {
        let most =
            |figure: fn(&Operating) -> f64| points.iter().map(figure).fold(f64::MIN, f64::max);
        let highest = most(|p| p.output_v);
        let lowest = -most(|p| -p.output_v);
        let (low_v, high_v) = match bounds.stage.rail.output {
            Output::Fixed { .. } => (bounds.output("low_v"), bounds.output("high_v")),
            Output::Adjustable { .. } => (bounds.output("low_v"), bounds.output("top_v")),
        };
        let raise = |reached: &mut f64, to: f64| *reached = reached.max(to);
        raise(&mut self.window, (highest - lowest) / (high_v - low_v));
        raise(&mut self.dissipation, most(|p| p.pass_w) / bounds.asked("pass-power"));
        raise(&mut self.base, most(|p| p.base_a) / bounds.asked("base-drive"));
        raise(&mut self.zener_power, most(|p| p.zener_v * p.zener_a) / bounds.asked("zener-power"));
        let least_bias = -most(|p| -p.zener_a);
        let allowed = bounds.of_check("zener-bias", "allowed").expect("zener-bias");
        raise(&mut self.bias, allowed / least_bias);
    }

    fn each(&self) -> [(&'static str, f64); 5] {
        [
            ("output window", self.window),
            ("dissipation", self.dissipation),
            ("base current", self.base),
            ("zener power", self.zener_power),
            ("least zener current", self.bias),
        ]
    }

    pub fn must_be_near(&self) {
        for (what, reached) in self.each() {
            assert!(reached > 0.9, "{what}: no corner comes nearer than {reached} of the bound");
        }
    }
}

impl fmt::Display for Reach {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let parts = self.each().map(|(what, reached)| format!("{what} {:.1} %", 100.0 * reached));
        write!(f, "reached of the bounds: {}", parts.join(", "))
    }
}
