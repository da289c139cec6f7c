//! Which end each part is at.

/// An end of a tolerance, or the middle.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum End {
    Low,
    Nominal,
    High,
}

impl End {
    /// −1, 0 or +1.
    pub fn sign(self) -> f64 {
        match self {
            End::Low => -1.0,
            End::Nominal => 0.0,
            End::High => 1.0,
        }
    }
}

/// One state of the circuit and its surroundings.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Corner {
    pub feed: End,
    /// `Low`: what the load draws at the least; else full load.
    pub load: End,
    /// `Nominal`: 25 °C throughout, no self-heating.
    pub ambient: End,
    pub zener: End,
    pub rz: End,
    /// RF, or RX and the pot's track.
    pub upper: End,
    pub ri: End,
    /// The sign of the amplifier's errors and of its input current.
    pub amplifier: End,
    /// Of an adjustable output; `Nominal` sets the highest output that is asked for.
    pub knob: End,
}

const ENDS: [End; 2] = [End::Low, End::High];

impl Corner {
    /// Every part as it is printed, at the nominal feed and full load.
    pub const NOMINAL: Corner = Corner {
        feed: End::Nominal,
        load: End::High,
        ambient: End::Nominal,
        zener: End::Nominal,
        rz: End::Nominal,
        upper: End::Nominal,
        ri: End::Nominal,
        amplifier: End::Nominal,
        knob: End::Nominal,
    };

    /// Every combination of ends: 256, or twice as many with a knob.
    pub fn all(has_knob: bool) -> Vec<Corner> {
        let mut corners = vec![Self::NOMINAL];
        let mut spread = |set: fn(&mut Corner, End)| {
            corners = ENDS
                .into_iter()
                .flat_map(|end| {
                    corners.iter().map(move |corner| {
                        let mut corner = *corner;
                        set(&mut corner, end);
                        corner
                    })
                })
                .collect();
        };
        spread(|c, end| c.feed = end);
        spread(|c, end| c.load = end);
        spread(|c, end| c.ambient = end);
        spread(|c, end| c.zener = end);
        spread(|c, end| c.rz = end);
        spread(|c, end| c.upper = end);
        spread(|c, end| c.ri = end);
        spread(|c, end| c.amplifier = end);
        if has_knob {
            spread(|c, end| c.knob = end);
        }
        corners
    }
}
