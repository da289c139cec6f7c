//! Buying the parts of rails that are proven: what is ordered, how many, at which price, and what else
//! could take a part's place.
//!
//! | module | what it holds |
//! |---|---|
//! | [`money`] | exact decimal sums of money |
//! | [`article`] | what a shop sells: a row of a catalog, seen by a buyer |
//! | [`piece`] | the pieces of one board: of a candidate, of a design |
//! | [`order`] | order lines of one rail or of several together, at the prices they reach |
//! | [`second_source`] | how many other parts could take a slot with nothing else changed |
//!
//! This crate holds no formula of the circuit, ranks nothing and prints nothing.

pub mod article;
pub mod money;
pub mod order;
pub mod piece;
pub mod second_source;
