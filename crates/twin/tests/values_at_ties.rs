//! Ties that random figures never hit, worked out by hand; the plain way and the quick one take the
//! value that the page names.

use circuit::assembly::{Aim, choose_divider};
use circuit::divider::Choice;
use circuit::parts::{MeasuredAt, ResistorLine, ResistorRating, Zener};
use circuit::rail::{Ambient, Derating, DividerRules, Feed, Load, Output, Rail, StandIns, Thermal};
use circuit::reference::{ZenerAtRail, choose_rz};
use circuit::resistor::LineAtRail;
use twin::plain::{State, plain_divider, plain_rz};

/// 15 V without ripple or tolerance, 5 V out, 25 °C.
fn rail() -> Rail {
    Rail {
        feed: Feed { min_v: 15.0, nominal_v: 15.0, max_v: 15.0, max_loaded_v: 15.0 },
        output: Output::Fixed { voltage_v: 5.0, tolerance: 0.05 },
        load: Load { max_a: 0.1, min_a: 0.0 },
        ambient: Ambient { min_c: 25.0, max_c: 25.0 },
        fault: None,
        bias_a: None,
        divider: DividerRules { min_a: 1e-4, max_a: 0.1, allow_error_v: 0.0, allow_bias_a: 0.0 },
        thermal: Thermal { interface_c_per_w: 1.0, sink_c_per_w: None },
        derating: Derating::NONE,
        stand_ins: StandIns::default(),
    }
}

/// A zener without impedance, tolerance or drift.
fn zener(vz_v: f64) -> Zener {
    Zener {
        vz_v,
        tol: 0.0,
        izt_a: 0.005,
        zzt_ohm: 0.0,
        iz_min_a: 1e-4,
        pd_w: 1.0,
        tj_max_c: 175.0,
        tc_min_v_per_c: 0.0,
        tc_max_v_per_c: 0.0,
        zzk_ohm: None,
        izk_a: None,
        vz_at: MeasuredAt::Pulse,
    }
}

/// A line without tolerance or drift.
fn line(values_ohm: &[f64]) -> ResistorLine {
    ResistorLine {
        values_ohm: values_ohm.to_vec(),
        tol: 0.0,
        tempco_per_c: 0.0,
        rating: ResistorRating { power_w: 1.0, full_power_to_c: 70.0, zero_power_at_c: 155.0 },
        vmax_v: 200.0,
    }
}

/// RZ with which all checks hold, by the plain way and the quick one; NaN for none.
fn rz(zener: &Zener, line: &ResistorLine, rail: &Rail) -> (f64, f64) {
    let zener = ZenerAtRail::new(zener, rail);
    let line = LineAtRail::new(line, rail);
    let plain = plain_rz(&zener, &line, rail).filter(|rz| rz.holds);
    let quick = choose_rz(&zener, &line, rail).map(|(bias, _)| bias);
    (plain.map_or(f64::NAN, |rz| rz.bias.rz.ohm), quick.map_or(f64::NAN, |bias| bias.rz.ohm))
}

#[test]
fn a_current_as_far_above_the_target_as_below_takes_the_larger_rz() {
    // 10 V on RZ: 10 mA and 2.5 mA, both a factor of 2 from 5 mA.
    assert_eq!(rz(&zener(5.0), &line(&[1000.0, 4000.0]), &rail()), (4000.0, 4000.0));
}

#[test]
fn where_no_nominal_current_flows_the_largest_rz_that_holds_is_taken() {
    // In the heat the zener falls to 9.8 V, so that it conducts at 9.95 V; at 25 °C it would not.
    let mut rail = rail();
    rail.feed = Feed { min_v: 9.95, nominal_v: 9.95, max_v: 9.95, max_loaded_v: 9.95 };
    rail.ambient = Ambient { min_c: 65.0, max_c: 65.0 };
    let zener = Zener { tc_min_v_per_c: -0.005, tc_max_v_per_c: -0.005, ..zener(10.0) };
    // 0.15 V leave 0.1 mA up to 1500 Ω.
    assert_eq!(rz(&zener, &line(&[470.0, 1000.0, 2200.0]), &rail), (1000.0, 1000.0));
}

#[test]
fn an_output_as_far_above_as_below_takes_the_larger_rf() {
    // So hot that no resistor may take any power: every pair is strained beyond all bounds, and
    // |VLn − V| decides. Only 1000 Ω lies in the window as RI; RF of 1000 Ω gives 5 V and of 2000 Ω
    // 7.5 V, both 1.25 V off.
    let mut rail = rail();
    rail.output = Output::Fixed { voltage_v: 6.25, tolerance: 0.05 };
    rail.divider.min_a = 0.0022;
    rail.divider.max_a = 0.0028;
    let zener = ZenerAtRail::new(&zener(2.5), &rail);
    let bias_line = LineAtRail::new(&line(&[2200.0]), &rail);
    let bias = plain_rz(&zener, &bias_line, &rail).expect("a line of one value").bias;
    let mut hot = line(&[1000.0, 2000.0]);
    hot.rating.full_power_to_c = 0.0;
    hot.rating.zero_power_at_c = 25.0;
    let hot = LineAtRail::new(&hot, &rail);
    let aim = Aim::of(&rail);

    let plain = plain_divider(&aim, &bias, &hot, None, &rail).expect("1000 Ω lies in the window");
    assert_eq!((plain.divider.upper.ohm, plain.divider.ri.ohm), (2000.0, 1000.0));
    assert_eq!(plain.state, State::Strained);
    let quick = choose_divider(&aim, &bias, &hot, None, &rail);
    assert_eq!(quick, Choice::Strained(plain.divider));
}
