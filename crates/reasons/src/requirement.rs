//! Requirements: which key of the sheet each check is asked for.
//!
//! Every check is asked for one requirement of a sheet, the one whose demand it proves or at whose
//! corner it is made. Dropping a requirement means that its checks are not asked; every other figure
//! and every chosen value stays. So the requirements of a sheet share out its checks, and a set of
//! requirements says exactly which checks are asked.

use crate::check_set::CheckSet;
use circuit::check::Check;
use circuit::rail::Rail;
use quantity::digits::below;

/// Declares the requirements once: variant, keys, the output form or section that they need, and
/// their demand in words.
macro_rules! requirements {
    ($($(#[$doc:meta])* $variant:ident, $keys:expr, $demand:literal;)*) => {
        /// A demand of the sheet, in the order of its keys.
        #[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub enum Requirement { $($(#[$doc])* $variant,)* }

        impl Requirement {
            /// Every requirement.
            pub const ALL: [Requirement; [$(Requirement::$variant),*].len()] =
                [$(Requirement::$variant),*];

            /// The names of its keys.
            pub const fn keys(self) -> &'static [&'static str] {
                match self { $(Requirement::$variant => &$keys,)* }
            }

            /// What it demands, in a clause.
            pub const fn demand(self) -> &'static str {
                match self { $(Requirement::$variant => $demand,)* }
            }
        }
    };
}

requirements! {
    /// `feed.min_v`.
    FeedMin, ["feed.min_v"], "headroom for every part at the lowest feed";
    /// `feed.max_v`.
    FeedMax, ["feed.max_v"], "ratings that stand the highest feed";
    /// `output.voltage_v`.
    OutputVoltage, ["output.voltage_v"], "an output that the amplifier reaches down to";
    /// `output.tolerance_pct`.
    OutputTolerance, ["output.tolerance_pct"], "an output within its tolerance";
    /// `output.adjust_from_v`.
    AdjustFrom, ["output.adjust_from_v"], "a knob that reaches the bottom of the range";
    /// `output.adjust_to_v`.
    AdjustTo, ["output.adjust_to_v"], "a knob that reaches the top of the range";
    /// `output.low_stop_v`.
    LowStop, ["output.low_stop_v"], "a knob that stops above the low stop";
    /// `output.ceiling_v`.
    Ceiling, ["output.ceiling_v"], "a knob that stops below the ceiling";
    /// `load.max_a`.
    LoadMax, ["load.max_a"], "a transistor that carries the load, and its base current";
    /// `load.min_a`.
    LoadMin, ["load.min_a"], "a way for leakage when the load draws its least";
    /// `ambient.max_c`.
    AmbientMax, ["ambient.max_c"], "junctions cool enough in the hottest air";
    /// `fault.limit_a`.
    FaultLimit, ["fault.limit_a"], "a transistor that stands the current into a short";
    /// `fault.lasts_s`.
    FaultLasts, ["fault.lasts_s"], "junctions that stand a short of this length";
    /// `divider.min_a` and `divider.max_a`.
    DividerCurrent, ["divider.min_a", "divider.max_a"],
        "a divider whose current stays in its window and overloads none of its parts";
}

/// The requirement of a check: one, or one of two.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Home {
    Always(Requirement),
    /// That of a fixed output, that of an adjustable one.
    ByOutput(Requirement, Requirement),
    /// That of a short that carries more than the load, else the other.
    ByLargerCurrent(Requirement, Requirement),
}

const fn home(check: Check) -> Home {
    use Home::{Always, ByLargerCurrent, ByOutput};
    use Requirement as R;
    match check {
        Check::ZenerBias
        | Check::AmpSupplyLow
        | Check::AmpInputLow
        | Check::AmpInputHigh
        | Check::Dropout
        | Check::SwingHigh => Always(R::FeedMin),
        Check::ZenerPower
        | Check::RzPower
        | Check::RzVoltage
        | Check::AmpSupplyHigh
        | Check::CollectorVoltage => Always(R::FeedMax),
        Check::SwingLow => ByOutput(R::OutputVoltage, R::LowStop),
        Check::OutputError => Always(R::OutputTolerance),
        Check::ReachLow => Always(R::AdjustFrom),
        Check::ReachHigh => Always(R::AdjustTo),
        Check::LowStop => Always(R::LowStop),
        Check::Ceiling => Always(R::Ceiling),
        Check::CollectorCurrent => ByLargerCurrent(R::FaultLimit, R::LoadMax),
        Check::PassPower | Check::SoaLoad | Check::BaseDrive => Always(R::LoadMax),
        Check::LeakageSink | Check::NoLoad => Always(R::LoadMin),
        Check::ZenerJunction | Check::PassJunction | Check::AmpJunction => Always(R::AmbientMax),
        Check::SoaFault => Always(R::FaultLimit),
        Check::FaultJunction | Check::AmpFault => Always(R::FaultLasts),
        Check::DividerWindow
        | Check::RfPower
        | Check::RiPower
        | Check::RfVoltage
        | Check::RxPower
        | Check::RxVoltage
        | Check::PotPower
        | Check::PotVoltage => Always(R::DividerCurrent),
    }
}

impl Requirement {
    /// The requirement for which a check is asked on this rail.
    pub fn of(check: Check, rail: &Rail) -> Requirement {
        match home(check) {
            Home::Always(requirement) => requirement,
            Home::ByOutput(fixed, adjustable) => {
                if rail.is_adjustable() {
                    adjustable
                } else {
                    fixed
                }
            }
            Home::ByLargerCurrent(fault, load) => {
                let is_larger =
                    |f: circuit::rail::Fault| below(rail.emitter_current_a(), f.limit_a);
                if rail.fault.is_some_and(is_larger) { fault } else { load }
            }
        }
    }

    /// The checks that are asked for it on this rail.
    pub fn checks(self, rail: &Rail) -> CheckSet {
        Check::ALL.into_iter().filter(|&check| Requirement::of(check, rail) == self).collect()
    }

    /// The checks that may be asked for it, each with the condition where there is one.
    fn checks_with_conditions(self) -> Vec<(Check, Option<&'static str>)> {
        let of = |check| match home(check) {
            Home::Always(r) => (r == self).then_some((check, None)),
            Home::ByOutput(r, _) if r == self => Some((check, Some("with a fixed output"))),
            Home::ByOutput(_, r) if r == self => Some((check, Some("with an adjustable output"))),
            Home::ByLargerCurrent(r, _) if r == self => {
                Some((check, Some("where `fault.limit_a` is above `load.max_a` + `divider.max_a`")))
            }
            Home::ByLargerCurrent(_, r) if r == self => Some((
                check,
                Some("unless `fault.limit_a` is above `load.max_a` + `divider.max_a`"),
            )),
            _ => None,
        };
        Check::ALL.into_iter().filter_map(of).collect()
    }
}

/// The table of requirements in Markdown: keys, demand, checks.
pub fn table_markdown() -> String {
    let mut text = String::from("| key | what it demands | checks asked for it |\n|---|---|---|\n");
    for requirement in Requirement::ALL {
        let quoted = |name: &str| format!("`{name}`");
        let keys: Vec<String> = requirement.keys().iter().map(|key| quoted(key)).collect();
        let checks: Vec<String> = requirement
            .checks_with_conditions()
            .into_iter()
            .map(|(check, condition)| match condition {
                None => quoted(check.name()),
                Some(condition) => format!("{} ({condition})", quoted(check.name())),
            })
            .collect();
        text += &format!(
            "| {} | {} | {} |\n",
            keys.join(", "),
            requirement.demand(),
            checks.join(", ")
        );
    }
    text
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_key_of_a_requirement_is_a_key_of_the_sheet() {
        for requirement in Requirement::ALL {
            for key in requirement.keys() {
                assert!(sheet::keys::named(key).is_some(), "{key}");
            }
        }
    }

    #[test]
    fn every_requirement_has_a_check_and_every_check_one_row_or_two_conditional_ones() {
        for requirement in Requirement::ALL {
            assert!(!requirement.checks_with_conditions().is_empty(), "{requirement:?}");
        }
        for check in Check::ALL {
            let conditions: Vec<Option<&str>> = Requirement::ALL
                .into_iter()
                .flat_map(Requirement::checks_with_conditions)
                .filter(|(c, _)| *c == check)
                .map(|(_, condition)| condition)
                .collect();
            let shared = conditions.len() == 2 && conditions.iter().all(Option::is_some);
            assert!(conditions == [None] || shared, "{}", check.name());
        }
    }

    /// `docs/requirements.md` shows this declaration.
    #[test]
    fn the_page_shows_the_table() {
        let path = concat!(env!("CARGO_MANIFEST_DIR"), "/../../docs/requirements.md");
        let page = std::fs::read_to_string(path).expect("docs/requirements.md");
        assert!(
            page.contains(&table_markdown()),
            "docs/requirements.md has fallen behind; the table is\n{}",
            table_markdown()
        );
    }
}
