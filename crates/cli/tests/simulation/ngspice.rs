//! Running the simulator, and what it found.

use std::collections::HashMap;
use std::process::{Command, Stdio};

/// The operating point of a circuit.
#[derive(Debug, Clone, Copy)]
pub struct Operating {
    pub feed_v: f64,
    /// All that the circuit draws, A.
    pub feed_a: f64,
    pub zener_v: f64,
    pub zener_a: f64,
    pub output_v: f64,
    /// The transistor's emitter current, A.
    pub emitter_a: f64,
    pub base_a: f64,
    /// The amplifier's output, V.
    pub drive_v: f64,
    /// The divider node, V.
    pub divider_v: f64,
    /// Current through RF, A.
    pub divider_a: f64,
    /// The transistor's dissipation, W.
    pub pass_w: f64,
    pub junction_c: f64,
}

/// Where the solver begins, one after another until it gets there. A point that it has found is one,
/// wherever it began.
const STARTS: [&str; 5] = [
    "",
    ".nodeset v(z)=5 v(d)=5 v(o)=10 v(a)=11 v(b)=11 v(e)=10 v(tj)=60",
    ".nodeset v(f)=20 v(fs)=20 v(z)=8 v(d)=8 v(o)=8 v(a)=9",
    ".options gminsteps=200",
    ".options reltol=1e-6 vntol=1e-7 abstol=1e-10 gmin=1e-10",
];

/// Solves circuits.
///
/// # Panics
/// Where the simulator finds no operating point of one: the test can't go on.
pub fn operating_points(simulator: &str, circuits: &[String]) -> Vec<Operating> {
    let mut found: Vec<Option<Operating>> = vec![None; circuits.len()];
    for start in STARTS {
        solve(simulator, circuits, start, &mut found);
    }
    let solved = found.into_iter().zip(circuits);
    solved
        .map(|(point, circuit)| point.unwrap_or_else(|| panic!("no solution:\n{circuit}")))
        .collect()
}

/// Solves those circuits that are still open, one after another in one process.
fn solve(simulator: &str, circuits: &[String], start: &str, found: &mut [Option<Operating>]) {
    let open: Vec<usize> = (0..circuits.len()).filter(|n| found[*n].is_none()).collect();
    if open.is_empty() {
        return;
    }
    let folder = tempfile::tempdir().expect("a folder");
    let mut commands = "commands\n.control\nset filetype=ascii\n".to_owned();
    for n in &open {
        let file = folder.path().join(format!("{n}.cir"));
        std::fs::write(file, format!("{}\n{start}\n.end\n", circuits[*n])).expect("a netlist");
        commands += &format!("source {n}.cir\nop\nwrite {n}.raw\ndestroy all\nremcirc\n");
    }
    commands += "quit\n.endc\n.end\n";
    std::fs::write(folder.path().join("commands"), commands).expect("a file of commands");
    let quiet = Command::new(simulator)
        .args(["-n", "-b", "commands"])
        .current_dir(folder.path())
        .stdin(Stdio::null())
        .stdout(Stdio::null())
        .stderr(Stdio::null())
        .status();
    quiet.expect("the simulator runs");
    for n in open {
        let raw = std::fs::read_to_string(folder.path().join(format!("{n}.raw")));
        found[n] = raw.ok().map(|raw| operating(&raw));
    }
}

fn operating(raw: &str) -> Operating {
    let found = values(raw);
    let at = |name: String| *found.get(&name).unwrap_or_else(|| panic!("{name} in\n{raw}"));
    let volts = |node: &str| at(format!("v({node})"));
    let amps = |source: &str| at(format!("i({source})"));
    let (feed_v, output_v) = (volts("f"), volts("o"));
    Operating {
        feed_v,
        feed_a: amps("vfeed"),
        zener_v: volts("z"),
        zener_a: amps("vz"),
        output_v,
        emitter_a: amps("ve"),
        base_a: amps("vb"),
        drive_v: volts("a"),
        divider_v: volts("d"),
        divider_a: amps("vf"),
        pass_w: (feed_v - output_v) * amps("vc") + (volts("b") - output_v) * amps("vb"),
        junction_c: volts("tj"),
    }
}

/// The first point of a raw file in ASCII, by name of the vector.
fn values(raw: &str) -> HashMap<String, f64> {
    let (head, data) = raw.split_once("Values:").expect("values in the raw file");
    let (_, list) = head.split_once("\nVariables:").expect("variables in the raw file");
    let names = list.lines().filter_map(|line| line.split_whitespace().nth(1));
    // The number of the point stands before the first value.
    let numbers = data.split_whitespace().skip(1).filter_map(|text| text.parse().ok());
    names.map(str::to_owned).zip(numbers).collect()
}
