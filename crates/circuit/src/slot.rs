//! The places of the circuit that a part is chosen for.

/// A place of the circuit that one row of a catalog fills.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Slot {
    /// The reference diode.
    Zener,
    /// The resistor line that RZ is taken from.
    BiasLine,
    /// The error amplifier.
    Amplifier,
    /// The resistor line that RF, RI and RX are taken from.
    DividerLine,
    /// The potentiometer of an adjustable output.
    Pot,
    /// The series pass transistor.
    Pass,
    /// The heatsink of the pass transistor.
    Heatsink,
}

impl Slot {
    /// How many slots there are.
    pub const COUNT: usize = 7;

    /// Every slot in the order in which results list them.
    pub const ALL: [Slot; Slot::COUNT] = [
        Slot::Zener,
        Slot::BiasLine,
        Slot::Amplifier,
        Slot::DividerLine,
        Slot::Pot,
        Slot::Pass,
        Slot::Heatsink,
    ];

    /// The order in which part names break a tie of the ranking.
    pub const BY_NAME: [Slot; Slot::COUNT] = [
        Slot::Zener,
        Slot::Amplifier,
        Slot::Pass,
        Slot::Heatsink,
        Slot::BiasLine,
        Slot::DividerLine,
        Slot::Pot,
    ];

    /// The slot's name in sheets, designs and results.
    pub const fn name(self) -> &'static str {
        match self {
            Slot::Zener => "zener",
            Slot::BiasLine => "bias_line",
            Slot::Amplifier => "amplifier",
            Slot::DividerLine => "divider_line",
            Slot::Pot => "pot",
            Slot::Pass => "pass",
            Slot::Heatsink => "heatsink",
        }
    }

    /// The slot of this name.
    pub fn named(name: &str) -> Option<Slot> {
        Slot::ALL.into_iter().find(|s| s.name() == name)
    }
}
