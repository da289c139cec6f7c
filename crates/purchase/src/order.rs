//! Order lines of one rail, or of several that are bought for together.
//!
//! A line is an article, and of a line of resistors one of its values: that is what is ordered. The price
//! follows from the pieces of the article over all its values and all rails, for that is the quantity
//! that a shop sees.

use crate::article::{Article, Nominal};
use crate::money::Money;
use crate::piece::Piece;
use catalog::Price;
use circuit::slot::Slot;
use design::keys::Resistor;
use std::collections::BTreeMap;

/// What is to be bought for one rail.
#[derive(Debug, Clone, PartialEq)]
pub struct Need<'a> {
    /// Boards to build.
    pub boards: u64,
    /// The pieces of one board.
    pub pieces: Vec<Piece<'a>>,
}

/// What is to be bought for several rails.
#[derive(Debug, Clone, PartialEq)]
pub struct Order<'a> {
    /// The lines, sorted by kind, maker, part and value.
    pub lines: Vec<Line<'a>>,
    /// What each rail costs, in the order of the rails.
    pub rails: Vec<RailCost>,
    /// The sum of the line totals that are known.
    pub total: Money,
}

/// An order line.
#[derive(Debug, Clone, PartialEq)]
pub struct Line<'a> {
    /// What is ordered.
    pub article: Article<'a>,
    /// The figure by which it is ordered.
    pub nominal: Option<Nominal>,
    /// Which rail needs how many of it; rails that need none are not listed.
    pub uses: Vec<Use>,
    /// Pieces of this line in all.
    pub pieces: u64,
    /// Pieces of the article in all, whatever their value: what sets the price.
    pub article_pieces: u64,
    /// What one piece costs at that quantity; None: nobody says.
    pub unit_price: Option<Money>,
    /// What the line costs; None likewise.
    pub total: Option<Money>,
    /// The quantity of the article from which on its price changes next, and the price there.
    pub next_break: Option<(u64, Money)>,
    /// How the stock of the article compares with its pieces.
    pub supply: Supply,
}

/// What a rail needs of a line.
#[derive(Debug, Clone, PartialEq)]
pub struct Use {
    /// The rail, by its place.
    pub rail: usize,
    /// Where the pieces go on one board, a place a piece.
    pub places: Vec<(Slot, Option<Resistor>)>,
    /// Pieces for all boards.
    pub pieces: u64,
}

impl Use {
    /// Pieces of one board.
    pub fn per_board(&self) -> u64 {
        self.places.len() as u64
    }
}

/// How a stock compares with what is asked of it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Supply {
    /// There are enough pieces.
    Enough,
    /// So many are lacking.
    ShortBy(f64),
    /// Nobody says how many there are.
    Unknown,
}

/// What a rail costs.
#[derive(Debug, Clone, PartialEq)]
pub struct RailCost {
    /// Its pieces at the prices that all rails reach together.
    pub together: Money,
    /// Its pieces at the prices that it reaches by itself.
    pub alone: Money,
    /// Pieces of one board of which nobody says what they cost.
    pub unpriced: usize,
}

/// What tells lines apart: the article and the bits of the value, for a value is ordered as it is.
type LineKey<'a> = ((catalog::Kind, &'a str, &'a str, Option<usize>), Option<(u64, &'static str)>);

impl<'a> Order<'a> {
    /// Puts together what several rails need.
    pub fn new(needs: &[Need<'a>]) -> Self {
        let mut lines: BTreeMap<LineKey<'a>, Line<'a>> = BTreeMap::new();
        for (rail, need) in needs.iter().enumerate() {
            for piece in &need.pieces {
                // The bits of positive numbers sort as the numbers do.
                let value = piece.nominal.map(|n| (n.value.to_bits(), n.unit));
                let line = lines
                    .entry((piece.article.key(), value))
                    .or_insert_with(|| Line::new(piece.article, piece.nominal));
                line.take(rail, need.boards, piece);
            }
        }
        let mut lines: Vec<Line<'a>> = lines.into_values().collect();
        let by_article = pieces_by_article(&lines);
        for line in &mut lines {
            line.article_pieces = by_article.get(&line.article.key()).copied().unwrap_or_default();
            line.find_prices();
        }
        let total = lines.iter().filter_map(|line| line.total.clone()).sum();
        let rails = (0..needs.len()).map(|rail| RailCost::new(rail, &lines)).collect();
        Self { lines, rails, total }
    }

    /// Lines of which nobody says what they cost.
    pub fn unpriced(&self) -> usize {
        self.lines.iter().filter(|line| line.total.is_none()).count()
    }
}

fn pieces_by_article<'a>(
    lines: &[Line<'a>],
) -> BTreeMap<(catalog::Kind, &'a str, &'a str, Option<usize>), u64> {
    let mut pieces = BTreeMap::new();
    for line in lines {
        let sum: &mut u64 = pieces.entry(line.article.key()).or_default();
        *sum = sum.saturating_add(line.pieces);
    }
    pieces
}

impl<'a> Line<'a> {
    fn new(article: Article<'a>, nominal: Option<Nominal>) -> Self {
        Self {
            article,
            nominal,
            uses: Vec::new(),
            pieces: 0,
            article_pieces: 0,
            unit_price: None,
            total: None,
            next_break: None,
            supply: Supply::Unknown,
        }
    }

    fn take(&mut self, rail: usize, boards: u64, piece: &Piece<'a>) {
        let place = (piece.slot, piece.resistor);
        match self.uses.last_mut().filter(|of| of.rail == rail) {
            Some(of) => {
                of.places.push(place);
                of.pieces = of.pieces.saturating_add(boards);
            }
            None => self.uses.push(Use { rail, places: vec![place], pieces: boards }),
        }
        self.pieces = self.pieces.saturating_add(boards);
        // A part that no catalog holds may be described by several designs: whoever knows, tells.
        let known = &mut self.article;
        known.price = known.price.or(piece.article.price);
        known.stock = known.stock.or(piece.article.stock);
        known.lead_weeks = known.lead_weeks.or(piece.article.lead_weeks);
        known.package = known.package.or(piece.article.package);
    }

    fn find_prices(&mut self) {
        let price = self.article.price;
        let at = |quantity| price.and_then(|price: &Price| Money::new(price.at(quantity)));
        self.unit_price = at(self.article_pieces);
        self.total = self.unit_price.as_ref().map(|price| price.times(self.pieces));
        let steps = price.map(Price::steps).into_iter().flatten();
        let next = steps.into_iter().find(|step| *step > self.article_pieces);
        self.next_break = next.and_then(|step| Some((step, at(step)?)));
        let asked = self.article_pieces as f64;
        self.supply = match self.article.stock {
            None => Supply::Unknown,
            Some(stock) if stock >= asked => Supply::Enough,
            Some(stock) => Supply::ShortBy(asked - stock),
        };
    }

    /// What one piece costs where so many boards alone set the price, as the ranking counts it.
    pub fn ranked_price(&self, boards: u64) -> Option<Money> {
        self.article.price.and_then(|price| Money::new(price.at(boards)))
    }

    /// What a rail needs of it.
    pub fn of_rail(&self, rail: usize) -> Option<&Use> {
        self.uses.iter().find(|of| of.rail == rail)
    }
}

impl RailCost {
    fn new(rail: usize, lines: &[Line<'_>]) -> Self {
        let own: Vec<(&Line<'_>, &Use)> =
            lines.iter().filter_map(|line| Some((line, line.of_rail(rail)?))).collect();
        let of_article = |line: &Line<'_>| {
            let same = own.iter().filter(|(other, _)| other.article.key() == line.article.key());
            same.fold(0u64, |sum, (_, of)| sum.saturating_add(of.pieces))
        };
        let together = |(line, of): &(&Line<'_>, &Use)| {
            line.unit_price.as_ref().map(|price| price.times(of.pieces))
        };
        let alone = |(line, of): &(&Line<'_>, &Use)| {
            let price = line.ranked_price(of_article(line))?;
            Some(price.times(of.pieces))
        };
        Self {
            together: own.iter().filter_map(together).sum(),
            alone: own.iter().filter_map(alone).sum(),
            unpriced: own.iter().filter(|(line, _)| line.unit_price.is_none()).count(),
        }
    }
}
