//! The design as built, and which of its parts are gone.

use crate::change::{Board, Extent};
use crate::ground::{Ground, Line};
use circuit::amplifier::AmplifierAtRail;
use circuit::parts::{Amplifier, Pot, ResistorLine, Zener};
use circuit::pass::{CaseTemperatures, PassFigures};
use circuit::reference::ZenerAtRail;
use circuit::resistor::{LineAtRail, PotAtRail, Resistance};
use circuit::slot::Slot;
use quantity::digits::compare;
use select::problem::{Part, PassPart, SinkPart};
use std::cmp::Ordering;

/// Whether two resistors are marked alike.
pub(crate) fn same_ohm(a: f64, b: f64) -> bool {
    compare(a, b) == Ordering::Equal
}

/// What stands in a slot of a changed design.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Choice {
    /// What stood there before, be it nothing.
    Kept,
    /// The part at this place of the problem's list.
    Row(u32),
    /// Nothing: the transistor goes unmounted where it had a heatsink.
    Without,
}

/// A choice for every slot, by `Slot as usize`.
pub type Choices = [Choice; Slot::COUNT];

/// Everything as it was.
pub const ALL_KEPT: Choices = [Choice::Kept; Slot::COUNT];

/// The heatsink as built.
#[derive(Debug, Clone)]
pub enum BuiltSink<'a> {
    /// None: unmounted, or on the sink that the sheet brings.
    None,
    /// This one.
    On(SinkPart<'a>),
    /// One that cannot stay.
    CannotStay,
}

/// The parts and values of a design. A part is None where it cannot stay: it is gone, or its row lacks
/// figures that checks need.
#[derive(Debug, Clone)]
pub struct Built<'a> {
    /// The zener.
    pub zener: Option<Part<'a, Zener>>,
    /// The line of RZ.
    pub bias_line: Option<Part<'a, ResistorLine>>,
    /// The amplifier.
    pub amplifier: Option<Part<'a, Amplifier>>,
    /// The line of the divider.
    pub divider_line: Option<Part<'a, ResistorLine>>,
    /// The pot; None also for a fixed output.
    pub pot: Option<Part<'a, Pot>>,
    /// The transistor.
    pub pass: Option<PassPart<'a>>,
    /// The heatsink.
    pub heatsink: BuiltSink<'a>,
    /// RZ, Ω.
    pub rz_ohm: f64,
    /// RF or RX, Ω; 0 for a link.
    pub upper_ohm: f64,
    /// RI, Ω.
    pub ri_ohm: f64,
}

/// Tells what a part at a place of a slot's list, or none, does to the board.
pub type BoardOf<'a> = dyn Fn(Slot, Option<u32>) -> Board + Sync + 'a;

/// What is asked: a design, what is gone from it, and what may be chosen in its place.
pub struct Case<'c, 'a> {
    /// What may be chosen.
    pub ground: &'c Ground<'a>,
    /// The design.
    pub built: Built<'a>,
    /// Slots whose part is gone, by `Slot as usize`.
    pub gone: [bool; Slot::COUNT],
    /// The same part is gone from both lines of resistors.
    pub line_gone_twice: bool,
    /// Places that may be chosen, by `Slot as usize`: neither what stands there nor what is gone.
    pub places: [Vec<u32>; Slot::COUNT],
    /// What a part does to the board.
    pub board: Box<BoardOf<'c>>,
}

/// The parts of a case that stay, at its rail.
pub(crate) struct Standing {
    pub zener: Option<ZenerAtRail>,
    pub bias_line: Option<Line>,
    pub rz: Option<Resistance>,
    pub amplifier: Option<AmplifierAtRail>,
    pub divider_line: Option<Line>,
    pub upper: Option<Resistance>,
    pub ri: Option<Resistance>,
    pub pot: Option<PotAtRail>,
    pub pass: Option<PassFigures>,
    pub sink: Option<CaseTemperatures>,
}

impl Standing {
    pub fn new(case: &Case<'_, '_>) -> Self {
        let rail = case.ground.rail();
        let built = &case.built;
        let span_c = rail.temperature_span_c();
        let fitted = |ohm: f64, line: &ResistorLine| {
            Resistance::new(ohm, line.tol, line.tempco_per_c, span_c)
        };
        let line = |part: &Option<Part<'_, ResistorLine>>| {
            part.as_ref().map(|p| Line::new(LineAtRail::new(p.figures, rail)))
        };
        let of_divider = |ohm| built.divider_line.as_ref().map(|p| fitted(ohm, p.figures));
        Self {
            zener: built.zener.as_ref().map(|p| ZenerAtRail::new(p.figures, rail)),
            bias_line: line(&built.bias_line),
            rz: built.bias_line.as_ref().map(|p| fitted(built.rz_ohm, p.figures)),
            amplifier: built.amplifier.as_ref().map(|p| AmplifierAtRail::new(p.figures, rail)),
            divider_line: line(&built.divider_line),
            upper: of_divider(built.upper_ohm),
            ri: of_divider(built.ri_ohm),
            pot: built.pot.as_ref().map(|p| PotAtRail::new(p.figures, rail)),
            pass: built
                .pass
                .as_ref()
                .map(|p| PassFigures::new(p.part.figures, &case.ground.duty, rail)),
            sink: match &built.heatsink {
                BuiltSink::On(sink) => {
                    Some(CaseTemperatures::on_heatsink(sink.part.figures, &case.ground.duty, rail))
                }
                BuiltSink::None | BuiltSink::CannotStay => None,
            },
        }
    }
}

impl Case<'_, '_> {
    /// The part of this slot is gone.
    pub fn is_gone(&self, slot: Slot) -> bool {
        self.gone[slot as usize]
    }

    /// How much a choice for a slot changes.
    pub(crate) fn extent(&self, slot: Slot, choice: Choice) -> Extent {
        let place = match choice {
            Choice::Kept => return Extent::default(),
            Choice::Row(place) => Some(place),
            Choice::Without => None,
        };
        Extent::of_part(!self.is_gone(slot), (self.board)(slot, place))
    }

    /// Places that may be chosen for a slot.
    pub fn places(&self, slot: Slot) -> &[u32] {
        &self.places[slot as usize]
    }

    /// The choices without those of slots whose part was not gone: which replacement it is.
    pub(crate) fn label(&self, choices: &Choices) -> Choices {
        let mut label = *choices;
        for slot in Slot::ALL {
            if !self.is_gone(slot) {
                label[slot as usize] = Choice::Kept;
            }
        }
        label
    }
}
