//! Every formula of the crate against the model page written down once more, for random rails and
//! parts: asked and allowed of every check, and the figures that a designer asks for.

use crate::page::{self, R};
use crate::parts::{Case, Dice};
use approx::relative_eq;
use circuit::amplifier::AmplifierAtRail;
use circuit::assembly::{Aim, Assembly, Network, OutputFigures, amplifier_checks};
use circuit::check::{Check, Finding, Kind, WhileHolding, Worst};
use circuit::divider::Divider;
use circuit::merit;
use circuit::pass::{CaseTemperatures, Duty, Mounted, PassFigures, Unmounted};
use circuit::rail::Output;
use circuit::reference::ZenerAtRail;
use circuit::resistor::{LineAtRail, PotAtRail, Resistance};
use std::collections::BTreeMap;

const CASES: u64 = 4_000;

fn same(a: f64, b: f64) -> bool {
    // Differences of large figures, such as a rise over ambient, lose digits; hence the absolute end.
    a == b || relative_eq!(a, b, max_relative = 1e-9, epsilon = 1e-12)
}

/// A case with its parts under the rail, and values of its lines.
struct Built {
    case: Case,
    zener: ZenerAtRail,
    bias_line: LineAtRail,
    divider_line: LineAtRail,
    pot: PotAtRail,
    amplifier: AmplifierAtRail,
    duty: Duty,
    pass: PassFigures,
    mounted: Option<Mounted>,
    rz: Resistance,
    upper: Resistance,
    ri: Resistance,
}

impl Built {
    fn new(seed: u64) -> Self {
        let case = Case::new(seed);
        let rail = &case.rail;
        let mut dice = Dice::new(!seed);
        let duty = Duty::new(rail);
        let pass = PassFigures::new(&case.transistor, &duty, rail);
        let mounted = match CaseTemperatures::on_own_sink(&duty, rail) {
            Some(at) => Some(Mounted::on(at, &pass, &duty)),
            None if case.unmounted => {
                Unmounted::new(&case.transistor, &duty, rail).map(Mounted::from)
            }
            None => {
                let at = CaseTemperatures::on_heatsink(&case.heatsink, &duty, rail);
                Some(Mounted::on(at, &pass, &duty))
            }
        };
        let bias_line = LineAtRail::new(&case.bias_line, rail);
        let divider_line = LineAtRail::new(&case.divider_line, rail);
        let mut pick =
            |line: &LineAtRail| line.values[(dice.share() * line.values.len() as f64) as usize];
        let (rz, ri, upper) = (pick(&bias_line), pick(&divider_line), pick(&divider_line));
        Self {
            zener: ZenerAtRail::new(&case.zener, rail),
            pot: PotAtRail::new(&case.pot, rail),
            amplifier: AmplifierAtRail::new(&case.amplifier, rail),
            upper: if dice.chance(0.2) { Resistance::LINK } else { upper },
            bias_line,
            divider_line,
            duty,
            pass,
            mounted,
            rz,
            ri,
            case,
        }
    }

    fn assembly(&self) -> Option<Assembly<'_>> {
        let rail = &self.case.rail;
        let divider = Divider { upper: self.upper, ri: self.ri };
        let pot = rail.is_adjustable().then_some(&self.pot);
        Some(Assembly {
            rail,
            zener: &self.zener,
            bias_line: &self.bias_line,
            bias: self.zener.bias(self.rz, rail),
            amplifier: &self.amplifier,
            network: Network { line: &self.divider_line, divider, pot },
            pass: &self.pass,
            mounted: self.mounted?,
            duty: &self.duty,
        })
    }

    fn page_values(&self) -> [R; 3] {
        let value = |resistance: &Resistance, line: &circuit::parts::ResistorLine| {
            page::r(&self.case, resistance.ohm, line.tol, line.tempco_per_c)
        };
        [
            value(&self.rz, &self.case.bias_line),
            value(&self.upper, &self.case.divider_line),
            value(&self.ri, &self.case.divider_line),
        ]
    }
}

fn findings(assembly: &Assembly<'_>) -> Vec<Finding> {
    let mut findings = Vec::new();
    let _ = assembly.checks(&mut findings);
    findings
}

#[test]
fn every_check_asks_and_allows_what_the_page_says() {
    let mut met: BTreeMap<&str, [u32; 2]> = BTreeMap::new();
    for seed in 0..CASES {
        let built = Built::new(seed);
        let case = &built.case;
        let [rz, upper, ri] = built.page_values();
        let pass_rows = page::pass_rows(case);
        assert_eq!(pass_rows.is_some(), built.mounted.is_some(), "seed {seed}");
        let (Some(assembly), Some(pass_rows)) = (built.assembly(), pass_rows) else { continue };
        let reference = page::reference(case, &rz);
        let mut rows = page::reference_rows(case, &rz);
        rows.extend(page::input_rows(case, &reference, &upper, &ri));
        rows.extend(pass_rows);
        rows.extend(page::drive_rows(case));
        let found = findings(&assembly);
        let names: Vec<&str> = found.iter().map(|f| f.check.name()).collect();
        assert_eq!(names, rows.iter().map(|row| row.0).collect::<Vec<_>>(), "seed {seed}");
        for (finding, (name, asked, allowed)) in found.iter().zip(rows) {
            assert!(
                same(finding.asked, asked) && same(finding.allowed, allowed),
                "seed {seed}: {finding:?} where the page has {asked} of {allowed}"
            );
            let u = page::u(asked, allowed);
            assert!(same(finding.utilisation(), u), "seed {seed}: {finding:?}");
            assert_eq!(Check::named(name), Some(finding.check));
            met.entry(name).or_default()[usize::from(finding.holds())] += 1;
        }
    }
    // Every check was met, and held and failed.
    assert_eq!(met.len(), Check::ALL.len());
    for (name, [failed, held]) in met {
        assert!(failed > 0 && held > 0, "{name} failed {failed} times and held {held}");
    }
}

#[test]
fn figures_of_the_whole_are_those_of_the_page() {
    for seed in 0..CASES {
        let built = Built::new(seed);
        let (case, rail) = (&built.case, &built.case.rail);
        let Some(assembly) = built.assembly() else { continue };
        let [rz, upper, ri] = built.page_values();
        let f = page::reference(case, &rz);
        let bias = &assembly.bias;
        let pairs = [
            (bias.v0_hi_v, f.v0_hi),
            (bias.vz_lo_v, f.vz_lo),
            (bias.vz_hi_v, f.vz_hi),
            (bias.vz_nominal_v, f.vz_n),
            (bias.iz_lo_a, f.iz_lo),
            (bias.iz_hi_a, f.iz_hi),
            (bias.iz_nominal_a, f.iz_n),
            (bias.power_w, f.pe),
        ];
        for (place, (a, b)) in pairs.into_iter().enumerate() {
            assert!(same(a, b), "seed {seed}, figure {place} of the reference: {a} and {b}");
        }

        let (e, ib) = (page::error_v(case, f.vz_hi), case.amplifier.ib_max_a);
        let input = assembly.input_error();
        assert!(same(input.error_v, e) && input.bias_a == ib, "seed {seed}");
        let out = page::outputs(case, &f, &upper, &ri, e, ib);
        let figures = match assembly.output() {
            OutputFigures::Fixed(o) => {
                assert!(same(o.nominal_v, (1.0 + upper.ohm / ri.ohm) * f.vz_n), "seed {seed}");
                [0.0, 0.0, o.lo_v, o.hi_v]
            }
            OutputFigures::Adjustable(o) => [o.reach_v, o.floor_v, o.low_v, o.top_v],
        };
        assert!(figures.iter().zip(out).all(|(a, b)| same(*a, b)), "{figures:?} {out:?}");

        let side = f.vz_n / ri.ohm + f.iz_n + case.amplifier.iq_max_a;
        assert!(same(assembly.side_current_a(), side), "seed {seed}");
        let v = match rail.output {
            Output::Fixed { voltage_v, .. } => voltage_v,
            Output::Adjustable { to_v, .. } => to_v,
        };
        let il = rail.load.max_a;
        let eta = v * il / (rail.feed.nominal_v * (il + side));
        assert!(same(merit::efficiency(rail, side), eta), "seed {seed}");
        assert!(same(merit::loss(rail, side), 1.0 / eta - 1.0), "seed {seed}");

        let (p, z, a) = (page::pass(case), &case.zener, &case.amplifier);
        let lowest = [
            page::ends(case).1 + p.vbe + a.swing_high_v,
            f.vz_hi + a.vcm_high_v,
            page::ends(case).1 + p.sat,
            a.vs_min_v,
            f.v0_hi - z.zzt_ohm * z.izt_a + z.iz_min_a * (rz.hi + z.zzt_ohm),
            f.v0_hi + z.iz_min_a * rz.hi,
        ];
        let lowest = lowest.into_iter().fold(f64::NEG_INFINITY, f64::max);
        assert!(same(assembly.lowest_feed_v(), lowest), "seed {seed}");
        let gain = p.ie / (rail.derating.amp_current * a.iout_a) - 1.0;
        assert!(same(assembly.least_gain(), gain), "seed {seed}");
    }
}

#[test]
fn what_holds_and_what_binds_follow_from_the_findings() {
    for seed in 0..CASES {
        let built = Built::new(seed);
        let Some(assembly) = built.assembly() else { continue };
        let found = findings(&assembly);
        let first_failing = found.iter().find(|f| !f.holds()).map(|f| f.check);
        let verdict = WhileHolding::over(|t| assembly.checks(t));
        assert_eq!(verdict.err(), first_failing, "seed {seed}");
        let greatest = |kind: Kind| {
            let of_kind = found.iter().filter(move |f| f.check.kind() == kind);
            of_kind.filter(|f| f.check != Check::DividerWindow).map(Finding::utilisation)
        };
        let stress = greatest(Kind::Damage).fold(0.0, f64::max);
        let tightness = greatest(Kind::Function).fold(0.0, f64::max);
        if let Ok(found) = verdict {
            assert_eq!(found, stress, "seed {seed}");
        }
        let worst = Worst::of(|t| assembly.checks(t));
        assert_eq!(worst, found.iter().map(Finding::utilisation).fold(0.0, f64::max));
        for (kind, figure) in [(Kind::Damage, stress), (Kind::Function, tightness)] {
            let binding = merit::binding(&found, kind);
            assert_eq!(binding.utilisation, figure, "seed {seed}");
            let first = found.iter().find(|f| Some(f.check) == binding.check).expect("it is made");
            assert!(same(first.utilisation(), figure), "seed {seed}");
            assert_eq!(first.check.kind(), kind, "seed {seed}");
        }
        // The checks of the amplifier alone are those of all that none of the others can change.
        let mut alone = Vec::new();
        let _ = amplifier_checks(&built.amplifier, assembly.rail, &mut alone);
        for finding in &alone {
            assert!(found.contains(finding), "seed {seed}: {finding:?}");
        }
        let heats = assembly.rail.fault.is_some_and(|f| f.lasts_s > 1.0);
        assert_eq!(alone.len(), if heats { 4 } else { 3 }, "seed {seed}");
        let aims_at_a_pot = matches!(Aim::of(assembly.rail), Aim::Adjustable(_));
        assert_eq!(aims_at_a_pot, assembly.rail.is_adjustable(), "seed {seed}");
    }
}

#[test]
fn an_amplifier_names_the_stand_ins_for_its_blanks() {
    for seed in 0..100 {
        let Case { amplifier: a, rail, .. } = Case::new(seed);
        let blanks = [
            (a.gain_min_db, "assume.gain_db"),
            (a.psrr_min_db, "assume.psrr_db"),
            (a.cmrr_min_db, "assume.cmrr_db"),
            (a.vs_test_v, "assume.vs_test_v"),
        ];
        let right = blanks.iter().filter(|(cell, _)| cell.is_none()).map(|(_, key)| *key);
        let named = AmplifierAtRail::new(&a, &rail).stand_ins_used();
        assert_eq!(named.collect::<Vec<_>>(), right.collect::<Vec<_>>(), "seed {seed}");
    }
}
