//! Second sources against the plain way: each other part in the candidate's place, and its proof made as
//! `select` makes it.

use catalog::{ReadOptions, read_folder};
use circuit::check::Finding;
use circuit::resistor::Resistance;
use circuit::slot::Slot;
use design::proof::Ohms;
use eligible::{Eligible, eligible};
use purchase::second_source::{Rows, second_sources};
use select::candidate::Candidate;
use select::problem::Problem;
use select::ranking::{NO_SPREAD, shortlist};
use std::path::{Path, PathBuf};

fn sample(path: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../../catalogs-sample").join(path)
}

/// A part of the list in place of the candidate's own, with every value kept.
fn with(candidate: &Candidate, slot: Slot, place: usize, eligible: &Eligible<'_>) -> Candidate {
    let mut other = *candidate;
    other.places[slot as usize] = Some(place as u32);
    let span_c = eligible.sheet.rail.temperature_span_c();
    let of = |old: Resistance, lines: &[&catalog::Row<circuit::parts::ResistorLine>]| {
        let line = &lines[place].figures;
        Resistance::new(old.ohm, line.tol, line.tempco_per_c, span_c)
    };
    match slot {
        Slot::BiasLine => other.rz = of(candidate.rz, &eligible.bias_lines),
        Slot::DividerLine => {
            other.divider.upper = of(candidate.divider.upper, &eligible.divider_lines);
            other.divider.ri = of(candidate.divider.ri, &eligible.divider_lines);
        }
        _ => {}
    }
    other
}

/// What no check asks for: values that the line has, a heatsink that fits.
fn suits(candidate: &Candidate, slot: Slot, place: usize, eligible: &Eligible<'_>) -> bool {
    let package = |at: usize| eligible.transistors[at].package.clone();
    let fits = |sink: usize, pass: usize| {
        package(pass).is_some_and(|p| eligible.heatsinks[sink].figures.fits.contains(&p))
    };
    let sink = candidate.place(Slot::Heatsink);
    let pass = candidate.place(Slot::Pass).unwrap();
    let has = |line: &circuit::parts::ResistorLine, ohm: f64| {
        ohm == 0.0 || line.values_ohm.iter().any(|v| (v / ohm - 1.0).abs() < 1e-11)
    };
    match slot {
        Slot::BiasLine => has(&eligible.bias_lines[place].figures, candidate.rz.ohm),
        Slot::DividerLine => {
            let line = &eligible.divider_lines[place].figures;
            has(line, candidate.divider.upper.ohm) && has(line, candidate.divider.ri.ohm)
        }
        Slot::Pass => sink.is_none_or(|sink| fits(sink, place)),
        Slot::Heatsink => fits(place, pass),
        _ => true,
    }
}

fn plainly(
    candidate: &Candidate,
    slot: Slot,
    problem: &Problem<'_>,
    eligible: &Eligible<'_>,
) -> usize {
    let own = candidate.place(slot).unwrap();
    let rows = match slot {
        Slot::Zener => eligible.zeners.len(),
        Slot::BiasLine => eligible.bias_lines.len(),
        Slot::Amplifier => eligible.amplifiers.len(),
        Slot::DividerLine => eligible.divider_lines.len(),
        Slot::Pot => eligible.pots.len(),
        Slot::Pass => eligible.transistors.len(),
        Slot::Heatsink => eligible.heatsinks.len(),
    };
    let holds = |place: &usize| {
        let proof = with(candidate, slot, *place, eligible).prove(problem);
        proof.is_some_and(|proof| proof.findings.iter().all(Finding::holds))
    };
    (0..rows)
        .filter(|place| *place != own && suits(candidate, slot, *place, eligible))
        .filter(holds)
        .count()
}

#[test]
fn each_slot_has_as_many_as_the_plain_way_finds() {
    let mut notices = Vec::new();
    let shop_text = std::fs::read_to_string(sample("shop.toml")).unwrap();
    let shop_file = sheet::ShopFile::read("shop.toml", &shop_text, &mut notices).unwrap();
    let options = ReadOptions { needs_pots: true, ..ReadOptions::default() };
    let shop = read_folder(&sample(""), &options, &mut notices).unwrap();
    let mut found = [0; Slot::COUNT];
    for name in ["tide-gauge-12v", "bench-5-15v", "sensor-5v", "mast-12v"] {
        let text = std::fs::read_to_string(sample(&format!("sheets/{name}.toml"))).unwrap();
        let sheet = sheet::read(name, &text, &shop_file, &[], &mut notices).unwrap();
        let eligible = eligible(&sheet, &shop, false, &mut notices);
        let problem = eligible.problem();
        for candidate in shortlist(&problem, 3, &NO_SPREAD).unwrap() {
            let ohms = Ohms {
                rz: candidate.rz.ohm,
                upper: candidate.divider.upper.ohm,
                ri: candidate.divider.ri.ohm,
            };
            let rows = Rows::of_candidate(&eligible, |slot| candidate.place(slot), ohms).unwrap();
            let counts = second_sources(&rows, &eligible).unwrap();
            for slot in Slot::ALL {
                let count = counts[slot as usize];
                assert_eq!(
                    count.is_some(),
                    candidate.place(slot).is_some(),
                    "{name} {}",
                    slot.name()
                );
                let Some(count) = count else { continue };
                let plain = plainly(&candidate, slot, &problem, &eligible);
                assert_eq!(count.proven, plain, "{name} {}", slot.name());
                assert!(count.same_package <= count.proven);
                found[slot as usize] += count.proven;
            }
        }
    }
    for slot in Slot::ALL {
        assert!(found[slot as usize] > 0, "the sample has no second source for {}", slot.name());
    }
}
