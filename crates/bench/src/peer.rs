//! Tables for a peer that combines and ranks with database joins.
//!
//! What one catalog row, or the parts of one side of the circuit, come to at a rail is worked out
//! here and written as plain numbers; the peer makes every check in which the amplifier meets the
//! reference side or the power side, and ranks. Fixed outputs alone.

use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Aim, choose_divider};
use circuit::check::WhileHolding;
use circuit::parts::Transistor;
use circuit::pass::{CaseTemperatures, Duty, Mounted, PassFigures, Unmounted};
use circuit::rail::{Output, Rail};
use circuit::reference::{ZenerAtRail, choose_rz};
use circuit::resistor::LineAtRail;
use circuit::slot::Slot;
use csv::Writer;
use select::candidate::Candidate;
use select::problem::{Part, PassPart, Problem};
use std::path::Path;

/// Writes `references.csv`, `amplifiers.csv`, `powers.csv` and `rail.csv` into a folder.
///
/// # Errors
/// Where a file cannot be written, or the output is adjustable.
pub fn write_tables(problem: &Problem<'_>, folder: &Path) -> Result<(), csv::Error> {
    write_rail(problem.rail, folder)?;
    write_references(problem, folder)?;
    write_amplifiers(problem, folder)?;
    write_powers(problem, folder)
}

/// Writes what the search found, so that the peer's ranking can be compared with it.
///
/// # Errors
/// Where the file cannot be written.
pub fn write_shortlist(
    problem: &Problem<'_>,
    list: &[Candidate],
    file: &Path,
) -> Result<(), csv::Error> {
    let mut table = Writer::from_path(file)?;
    table.write_record([
        "zener",
        "bias_line",
        "amplifier",
        "divider_line",
        "pass",
        "heatsink",
        "cost",
        "loss",
        "stress",
        "score",
    ])?;
    for candidate in list {
        let at = |slot| candidate.place(slot);
        let pass = at(Slot::Pass).and_then(|p| problem.transistors.get(p)).map(|t| t.part);
        let sink = at(Slot::Heatsink).and_then(|p| problem.heatsinks.get(p)).map(|s| s.part);
        table.write_record([
            named(at(Slot::Zener).and_then(|p| problem.zeners.get(p))),
            named(at(Slot::BiasLine).and_then(|p| problem.bias_lines.get(p))),
            named(at(Slot::Amplifier).and_then(|p| problem.amplifiers.get(p))),
            named(at(Slot::DividerLine).and_then(|p| problem.divider_lines.get(p))),
            named(pass.as_ref()),
            named(sink.as_ref()),
            candidate.cost.to_string(),
            candidate.loss.to_string(),
            candidate.stress.to_string(),
            candidate.score.to_string(),
        ])?;
    }
    table.flush().map_err(csv::Error::from)
}

/// `maker/part`; empty for no part.
fn named<F>(part: Option<&Part<'_, F>>) -> String {
    part.map_or_else(String::new, |p| format!("{}/{}", p.maker, p.part))
}

fn optional(figure: Option<f64>) -> String {
    figure.map_or_else(String::new, |f| f.to_string())
}

fn write_rail(rail: &Rail, folder: &Path) -> Result<(), csv::Error> {
    let Output::Fixed { voltage_v, tolerance } = rail.output else {
        let cause = "the peer knows fixed outputs alone";
        return Err(std::io::Error::new(std::io::ErrorKind::InvalidInput, cause).into());
    };
    let figures = [
        ("feed_min_v", rail.feed.min_v),
        ("feed_nominal_v", rail.feed.nominal_v),
        ("feed_max_v", rail.feed.max_v),
        ("voltage_v", voltage_v),
        ("tolerance", tolerance),
        ("load_max_a", rail.load.max_a),
        ("load_min_a", rail.load.min_a),
        ("divider_min_a", rail.divider.min_a),
        ("divider_max_a", rail.divider.max_a),
        ("amp_supply", rail.derating.amp_supply),
        ("amp_current", rail.derating.amp_current),
    ];
    let mut table = Writer::from_path(folder.join("rail.csv"))?;
    table.write_record(figures.map(|(name, _)| name))?;
    table.write_record(figures.map(|(_, value)| value.to_string()))?;
    table.flush().map_err(csv::Error::from)
}

/// Every zener with every bias line that suits it and every divider line: values, corners, and the
/// stress of the reference's own checks.
fn write_references(problem: &Problem<'_>, folder: &Path) -> Result<(), csv::Error> {
    let rail = problem.rail;
    let aim = Aim::of(rail);
    let bias_lines: Vec<LineAtRail> =
        problem.bias_lines.iter().map(|l| LineAtRail::new(l.figures, rail)).collect();
    let divider_lines: Vec<LineAtRail> =
        problem.divider_lines.iter().map(|l| LineAtRail::new(l.figures, rail)).collect();
    let mut table = Writer::from_path(folder.join("references.csv"))?;
    table.write_record([
        "zener",
        "bias_line",
        "divider_line",
        "price",
        "stress",
        "vz_lo_v",
        "vz_hi_v",
        "vz_nominal_v",
        "iz_nominal_a",
        "rf_ohm",
        "rf_lo_ohm",
        "rf_hi_ohm",
        "ri_ohm",
        "ri_lo_ohm",
        "ri_hi_ohm",
        "resistor_w",
        "resistor_v",
    ])?;
    for zener_part in &problem.zeners {
        let zener = ZenerAtRail::new(zener_part.figures, rail);
        for (bias_part, bias_line) in problem.bias_lines.iter().zip(&bias_lines) {
            let Some((bias, stress)) = choose_rz(&zener, bias_line, rail) else { continue };
            for (line_part, line) in problem.divider_lines.iter().zip(&divider_lines) {
                let choice = choose_divider(&aim, &bias, line, None, rail);
                let Some(divider) = choice.divider() else { continue };
                let resistors = if divider.upper.is_link() { 1.0 } else { 2.0 };
                let price = zener_part.price + bias_part.price + resistors * line_part.price;
                let figures = [
                    price,
                    stress,
                    bias.vz_lo_v,
                    bias.vz_hi_v,
                    bias.vz_nominal_v,
                    bias.iz_nominal_a,
                    divider.upper.ohm,
                    divider.upper.lo_ohm,
                    divider.upper.hi_ohm,
                    divider.ri.ohm,
                    divider.ri.lo_ohm,
                    divider.ri.hi_ohm,
                    line.allowed_power_w,
                    line.allowed_voltage_v,
                ];
                let names =
                    [named(Some(zener_part)), named(Some(bias_part)), named(Some(line_part))];
                table.write_record(names.into_iter().chain(figures.map(|f| f.to_string())))?;
            }
        }
    }
    table.flush().map_err(csv::Error::from)
}

fn write_amplifiers(problem: &Problem<'_>, folder: &Path) -> Result<(), csv::Error> {
    let mut table = Writer::from_path(folder.join("amplifiers.csv"))?;
    table.write_record([
        "amplifier",
        "price",
        "vs_min_v",
        "vs_max_v",
        "vcm_low_v",
        "vcm_high_v",
        "swing_low_v",
        "swing_high_v",
        "iout_a",
        "iq_a",
        "ib_a",
        "rth_ja",
        "fixed_error_v",
        "common_mode",
        "allowed_rise_c",
        "fault_rise_c",
        "allowed_fault_rise_c",
        "isink_a",
    ])?;
    for amplifier in &problem.amplifiers {
        let at_rail = AmplifierAtRail::new(amplifier.figures, problem.rail);
        let part = &at_rail.part;
        let figures = [
            amplifier.price,
            part.vs_min_v,
            part.vs_max_v,
            part.vcm_low_v,
            part.vcm_high_v,
            part.swing_low_v,
            part.swing_high_v,
            part.iout_a,
            part.iq_max_a,
            part.ib_max_a,
            part.rth_ja_c_per_w,
            at_rail.fixed_error_v,
            at_rail.common_mode,
            at_rail.allowed_rise_c,
            at_rail.fault_rise_c,
            at_rail.allowed_fault_rise_c,
        ];
        let mut record = vec![named(Some(amplifier))];
        record.extend(figures.map(|f| f.to_string()));
        record.push(optional(part.isink_a));
        table.write_record(record)?;
    }
    table.flush().map_err(csv::Error::from)
}

/// Every transistor on every heatsink that fits, and in free air where that is allowed, as far as the
/// transistor's own checks hold.
fn write_powers(problem: &Problem<'_>, folder: &Path) -> Result<(), csv::Error> {
    let rail = problem.rail;
    let duty = Duty::new(rail);
    let mut table = Writer::from_path(folder.join("powers.csv"))?;
    table.write_record([
        "pass",
        "heatsink",
        "price",
        "stress",
        "base_a",
        "drive_w",
        "vbe_hi_v",
        "junctions",
        "ileak_a",
    ])?;
    for pass_part in &problem.transistors {
        let PassPart { part, package } = pass_part;
        let figures = PassFigures::new(part.figures, &duty, rail);
        let mut write = |sink: String, sink_price: f64, mounted: Mounted| {
            let held = WhileHolding::over(|t| figures.checks(&mounted, &duty, rail, t));
            let Ok(stress) = held else { return Ok(()) };
            table.write_record([
                named(Some(part)),
                sink,
                (part.price + sink_price).to_string(),
                stress.to_string(),
                figures.base.most_a.to_string(),
                figures.drive_power_w.to_string(),
                figures.vbe_hi_v.to_string(),
                figures.junctions.to_string(),
                optional(figures.ileak_a),
            ])
        };
        if let Some(case) = CaseTemperatures::on_own_sink(&duty, rail) {
            write(String::new(), 0.0, Mounted::on(case, &figures, &duty))?;
            continue;
        }
        for sink in &problem.heatsinks {
            if package.is_some_and(|package| sink.fits.contains(&package)) {
                let case = CaseTemperatures::on_heatsink(sink.part.figures, &duty, rail);
                let mounted = Mounted::on(case, &figures, &duty);
                write(named(Some(&sink.part)), sink.part.price, mounted)?;
            }
        }
        if let Some(unmounted) = unmounted(problem, part.figures, &duty) {
            write(String::new(), 0.0, unmounted)?;
        }
    }
    table.flush().map_err(csv::Error::from)
}

fn unmounted(problem: &Problem<'_>, transistor: &Transistor, duty: &Duty) -> Option<Mounted> {
    let allowed = problem.can_go_unmounted(transistor);
    allowed.then(|| Unmounted::new(transistor, duty, problem.rail)).flatten().map(Mounted::from)
}
