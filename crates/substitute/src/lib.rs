//! What can go into a design in place of a part that is gone, and what else changes with it.
//!
//! | module | what it holds |
//! |---|---|
//! | [`change`] | how much changes: the order of changes, and what a change does to the board |
//! | [`ground`] | the parts that may be chosen, at the conditions of a rail: made once for a sheet |
//! | [`built`] | the design as built, and which of its parts are gone |
//! | [`values`] | resistor values beside given parts, the fewest changed first |
//! | [`mod@reference`], [`power`] | what can stand on either side of the amplifier |
//! | [`replace`] | every replacement with the least that changes with it |
//! | [`cover`] | the fewest new parts for many designs, then the cheapest |
//! | [`exposed`] | how many replacements a part has |
//! | [`desk`] | cases made of catalogs and design files |
//! | [`shortage`] | many designs at once |
//!
//! Every check is one of `circuit`; this crate holds no formula, opens no file and prints nothing.

pub mod built;
pub mod change;
pub mod cover;
pub mod desk;
pub mod exposed;
pub mod ground;
pub mod power;
pub mod reference;
pub mod replace;
pub mod shortage;
pub mod values;
