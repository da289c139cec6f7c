//! `resistors.csv`: lines, few as in any shop, and the same in hard shops.

use super::Order;
use super::cells::Cells;
use super::dice::Dice;
use super::offer::{self, Offer, spread_price};

const STREAM: u64 = 4;

/// Series, tolerance %, tempco ppm/°C, power W, greatest voltage V, usual price.
type Line = (&'static str, f64, f64, f64, f64, f64);

/// Common lines; more than these come with another maker and price.
const LINES: [Line; 8] = [
    ("E24", 1.0, 50.0, 0.25, 250.0, 0.02),
    ("E96", 1.0, 50.0, 0.25, 250.0, 0.03),
    ("E24", 5.0, 200.0, 0.25, 300.0, 0.01),
    ("E12", 5.0, 300.0, 1.0, 350.0, 0.05),
    ("E24", 1.0, 50.0, 0.6, 350.0, 0.04),
    ("E96", 0.1, 15.0, 0.125, 200.0, 0.24),
    ("E192", 0.5, 25.0, 0.25, 250.0, 0.11),
    ("E24", 2.0, 100.0, 2.0, 500.0, 0.12),
];

/// The whole file.
pub fn file(order: &Order) -> Vec<u8> {
    let mut cells = Cells::new(&format!(
        "{},series,tol_pct,tempco_ppm,power_w,vmax_v,min_ohm,max_ohm",
        offer::COLUMNS
    ));
    for row in 0..order.sizes.lines {
        let (family, place) = (row / LINES.len(), row % LINES.len());
        let (series, tol_pct, tempco_ppm, power_w, vmax_v, typical) = LINES[place];
        let mut dice = Dice::new(order.seed, STREAM, row as u64);
        let price = if family == 0 { typical } else { spread_price(typical, &mut dice) };
        // Lines are few: a blank in one would change the shop too much.
        Offer::plain(family, place, 'R', (100.0 * price).round().max(1.0) / 100.0)
            .packaged("axial", "")
            .write(&mut cells);
        cells.text(series);
        for figure in [tol_pct, tempco_ppm, power_w, vmax_v, 10.0, 1e6] {
            cells.needed(figure);
        }
        cells.end();
    }
    cells.into_bytes()
}
