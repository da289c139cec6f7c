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

/// Solves circuits one after another in one process.
///
/// # Panics
/// Where the simulator finds no operating point of one: the test can't go on.
pub fn operating_points(simulator: &str, circuits: &[String]) -> Vec<Operating> {
    let folder = tempfile::tempdir().expect("a folder");
    let mut commands = "commands\n.control\nset filetype=ascii\n".to_owned();
    for (n, circuit) in circuits.iter().enumerate() {
        let file = folder.path().join(format!("{n}.cir"));
        std::fs::write(file, format!("{circuit}\n.end\n")).expect("a netlist");
        commands += &format!("source {n}.cir\nop\nwrite {n}.raw\ndestroy all\nremcirc\n");
    }
    commands += "quit\n.endc\n.end\n";
    std::fs::write(folder.path().join("commands"), commands).expect("a file of commands");
    let ran = Command::new(simulator)
        .args(["-n", "-b", "commands"])
        .current_dir(folder.path())
        .stdin(Stdio::null())
        .output()
        .expect("the simulator runs");
    let told = String::from_utf8_lossy(&ran.stderr);
    let solved = circuits.iter().enumerate().map(|(n, circuit)| {
        let raw = std::fs::read_to_string(folder.path().join(format!("{n}.raw")));
        operating(&raw.unwrap_or_else(|_| panic!("no operating point:\n{circuit}\n{told:.4000}")))
    });
    solved.collect()
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
