//! What every part has beside its figures: name, maker, price, stock, status, source.

use super::cells::Cells;
use super::dice::Dice;

/// The columns that [`Offer::write`] fills, in its order.
pub const COLUMNS: &str = "part,maker,cost,stock,lead_weeks,status,package,pinout,source";

/// Share of rows that miss a needed figure.
const SHARE_OF_GAPS: f64 = 0.005;

/// One of the first figures is missed; heatsinks, which have fewer, so miss one less often.
const FIGURES_MISSED: usize = 8;

/// Invented makers with the letters that their part numbers begin with.
const MAKERS: [(&str, &str); 16] = [
    ("Arvenholt", "AV"),
    ("Brackmere", "BK"),
    ("Cindervale", "CV"),
    ("Dorrowby", "DW"),
    ("Eskerlund", "EK"),
    ("Fallowick", "FK"),
    ("Garrowen", "GN"),
    ("Hexmoorland", "HX"),
    ("Ildercombe", "IC"),
    ("Jorvane", "JV"),
    ("Kestrandel", "KD"),
    ("Lumbrookin", "LB"),
    ("Marrowickel", "MW"),
    ("Nethercliffe", "NC"),
    ("Ottersand", "OS"),
    ("Pellowmark", "PW"),
];

/// A part as it is offered.
pub struct Offer {
    maker: usize,
    family: usize,
    part: String,
    /// Price of one piece.
    price: f64,
    /// Prices fall with the quantity.
    has_breaks: bool,
    /// The price is printed with more digits than shops do, so that no two are alike.
    is_exact: bool,
    stock: Option<f64>,
    lead_weeks: Option<f64>,
    status: &'static str,
    package: &'static str,
    pinout: &'static str,
    /// The needed figure that is blank.
    gap: Option<usize>,
}

impl Offer {
    /// A part of a family: the maker belongs to the family, `letter` to the kind of part.
    pub fn new(family: usize, place: usize, letter: char, price: f64, dice: &mut Dice) -> Self {
        let maker = Dice::new(family as u64, u64::from(u32::from(letter)), 0).below(MAKERS.len());
        let prefix = MAKERS[maker].1;
        Self {
            maker,
            family,
            part: format!("{prefix}{letter}{family:04}-{place:02}"),
            price: shop_price(price),
            has_breaks: dice.chance(0.35),
            is_exact: false,
            stock: dice.maybe(0.85, |d| (d.log_between(1.0, 5000.0) - 1.0).floor()),
            lead_weeks: dice.maybe(0.8, |d| d.pick([1.0, 2.0, 2.0, 4.0, 6.0, 12.0, 26.0])),
            status: match dice.below(100) {
                0..90 => "active",
                90..94 => "not-recommended",
                94..96 => "last-buy",
                96..98 => "obsolete",
                _ => "",
            },
            package: "",
            pinout: "",
            gap: dice.chance(SHARE_OF_GAPS).then(|| dice.below(FIGURES_MISSED)),
        }
    }

    /// A part that may always be chosen, at just this price; nothing about it is left to chance.
    pub fn plain(family: usize, place: usize, letter: char, price: f64) -> Self {
        let mut dice = Dice::new(0, 0, 0);
        Self {
            price,
            has_breaks: false,
            is_exact: true,
            stock: Some(1000.0),
            lead_weeks: Some(2.0),
            status: "active",
            gap: None,
            ..Self::new(family, place, letter, price, &mut dice)
        }
    }

    /// In this package.
    pub fn packaged(self, package: &'static str, pinout: &'static str) -> Self {
        Self { package, pinout, ..self }
    }

    /// Begins a row with the columns of [`COLUMNS`].
    pub fn write(&self, cells: &mut Cells) {
        let (maker, _) = MAKERS[self.maker];
        cells.begin(self.gap);
        cells.text(&self.part);
        cells.text(maker);
        cells.text(&self.price_text());
        cells.optional(self.stock);
        cells.optional(self.lead_weeks);
        cells.text(self.status);
        cells.text(self.package);
        cells.text(self.pinout);
        let (book, page) = (1 + self.family % 37, 2 + self.family % 211);
        cells.text(&format!("{maker} book {book} rev {} p.{page}", 1 + self.family % 9));
    }

    fn price_text(&self) -> String {
        let price = self.price;
        if self.is_exact {
            return format!("{price:.6}");
        }
        if self.has_breaks {
            let (some, many) = (shop_price(0.88 * price), shop_price(0.76 * price));
            format!("1:{price};25:{some};100:{many}")
        } else {
            format!("{price}")
        }
    }
}

/// Whole cents, from 10 on whole tenths, so that prices tie as they do in shops.
fn shop_price(price: f64) -> f64 {
    let steps = if price < 10.0 { 100.0 } else { 10.0 };
    (price * steps).round().max(1.0) / steps
}

/// Round a typical price: most within a factor of two, a few further out.
pub fn spread_price(typical: f64, dice: &mut Dice) -> f64 {
    typical * dice.log_between(0.7, 1.4) * dice.log_between(0.6, 1.7)
}
