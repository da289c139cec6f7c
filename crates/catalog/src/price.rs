//! What a part costs, by the quantity bought.

/// The price of one piece, which may fall with the quantity.
#[derive(Debug, Clone, PartialEq)]
pub struct Price(Breaks);

/// Most parts have one price; it is held without an allocation of its own.
#[derive(Debug, Clone, PartialEq)]
enum Breaks {
    Single(f64),
    /// From this quantity on, one piece costs this; quantities rise, at least one break.
    Many(Box<[(u64, f64)]>),
}

impl Price {
    /// One price at every quantity.
    pub const fn single(price: f64) -> Self {
        Self(Breaks::Single(price))
    }

    /// Price breaks: from each quantity on, one piece costs so much. None where there is no break or
    /// the quantities do not rise strictly.
    ///
    /// ```
    /// use catalog::Price;
    /// let price = Price::breaks(&[(10, 0.42), (100, 0.31)]).unwrap();
    /// assert_eq!(price.at(1), 0.42); // below the first break its price
    /// assert_eq!(price.at(99), 0.42);
    /// assert_eq!(price.at(100), 0.31);
    /// assert!(Price::breaks(&[(10, 0.42), (10, 0.31)]).is_none());
    /// ```
    pub fn breaks(breaks: &[(u64, f64)]) -> Option<Self> {
        let rises = breaks.windows(2).all(|w| w[0].0 < w[1].0);
        match breaks {
            [] => None,
            [(_, price)] => Some(Self::single(*price)),
            _ => rises.then(|| Self(Breaks::Many(breaks.into()))),
        }
    }

    /// What one piece costs when `quantity` pieces are bought.
    pub fn at(&self, quantity: u64) -> f64 {
        match &self.0 {
            Breaks::Single(price) => *price,
            Breaks::Many(breaks) => breaks
                .iter()
                .rfind(|(from, _)| *from <= quantity)
                .or(breaks.first())
                .map_or(f64::INFINITY, |(_, price)| *price),
        }
    }

    /// The quantities at which the price changes, rising; empty where it never does.
    pub fn steps(&self) -> impl Iterator<Item = u64> {
        match &self.0 {
            Breaks::Single(_) => &[][..],
            Breaks::Many(breaks) => breaks.get(1..).unwrap_or_default(),
        }
        .iter()
        .map(|(from, _)| *from)
    }
}
