//! The pictures there are.

/// A picture.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Kind {
    /// The circuit with its parts and values.
    Circuit,
    /// The transistor's safe operating area.
    OperatingArea,
    /// Feed and output levels.
    Headroom,
    /// The output at its corners.
    Output,
    /// The use of every limit.
    Stress,
    /// Cost, loss and stress of the front.
    Front,
}

impl Kind {
    /// Every picture, in the order in which a page shows them.
    pub const ALL: [Kind; 6] = [
        Kind::Circuit,
        Kind::OperatingArea,
        Kind::Headroom,
        Kind::Output,
        Kind::Stress,
        Kind::Front,
    ];

    /// The name on the command line and in markup.
    pub const fn name(self) -> &'static str {
        match self {
            Kind::Circuit => "circuit",
            Kind::OperatingArea => "operating-area",
            Kind::Headroom => "headroom",
            Kind::Output => "output",
            Kind::Stress => "stress",
            Kind::Front => "front",
        }
    }

    /// The picture of this name.
    ///
    /// ```
    /// use picture::Kind;
    /// assert_eq!(Kind::named("operating-area"), Some(Kind::OperatingArea));
    /// assert_eq!(Kind::named("portrait"), None);
    /// ```
    pub fn named(name: &str) -> Option<Kind> {
        Kind::ALL.into_iter().find(|kind| kind.name() == name)
    }

    /// The picture as one of a single set of parts; None: it shows many.
    pub const fn of_one_set(self) -> Option<OfOneSet> {
        match self {
            Kind::Circuit => Some(OfOneSet::Circuit),
            Kind::OperatingArea => Some(OfOneSet::OperatingArea),
            Kind::Headroom => Some(OfOneSet::Headroom),
            Kind::Output => Some(OfOneSet::Output),
            Kind::Stress => Some(OfOneSet::Stress),
            Kind::Front => None,
        }
    }
}

/// A picture that shows one set of parts.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum OfOneSet {
    /// [`Kind::Circuit`].
    Circuit,
    /// [`Kind::OperatingArea`].
    OperatingArea,
    /// [`Kind::Headroom`].
    Headroom,
    /// [`Kind::Output`].
    Output,
    /// [`Kind::Stress`].
    Stress,
}

impl OfOneSet {
    /// The same among all pictures.
    pub const fn kind(self) -> Kind {
        match self {
            OfOneSet::Circuit => Kind::Circuit,
            OfOneSet::OperatingArea => Kind::OperatingArea,
            OfOneSet::Headroom => Kind::Headroom,
            OfOneSet::Output => Kind::Output,
            OfOneSet::Stress => Kind::Stress,
        }
    }
}
