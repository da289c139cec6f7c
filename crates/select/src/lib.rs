//! Exact ranked search over every combination of parts.
//!
//! A candidate is a *reference side* (zener, bias line, divider line, pot), an *amplifier*, and a
//! *power side* (transistor, heatsink). The two sides never meet but through the amplifier and the
//! score, and the values of resistors are chosen within the reference side. So the search keeps three
//! collections of boxes of parts, each box with figures at least as good as any part in it, and
//! takes triples of boxes apart in the order of the best that they could hold. What comes out
//! complete comes out in rank order: nothing that is left could be before it.
//!
//! | module | what it holds |
//! |---|---|
//! | [`problem`] | what may be chosen, at which price |
//! | [`ranking`] | the list of the best candidates |
//! | [`score`] | what they are ranked by |
//! | [`front`] | candidates that nothing beats on cost, loss and stress at once |
//! | [`count`] | exact counts of what is feasible and what is lost to which check |
//! | [`candidate`] | a candidate with its values, and its proof |
//! | [`certificate`] | claims that show that a list left nothing out |
//!
//! This crate knows no files and prints nothing.

mod beside;
mod boxes;
pub mod candidate;
pub mod certificate;
mod company;
pub mod count;
pub mod front;
mod grove;
mod limit;
pub mod problem;
pub mod ranking;
mod rest;
pub mod score;
mod search;
mod sides;
mod spread;
mod suited;
mod unbeaten;

pub use limit::SearchError;
