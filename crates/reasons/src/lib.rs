//! Why nothing fits, why a part is not on the list, which blank cells are worth filling: as values.
//!
//! | module | what it holds |
//! |---|---|
//! | [`check_set`] | sets of checks, and what fails for a combination |
//! | [`requirement`] | which key of the sheet each check is asked for |
//! | [`limits`] | how far each check may go |
//! | [`survey`] | which combination fails in fewest checks, and by how little |
//! | [`losses`] | the parts of each slot that one check alone rules out |
//! | [`conflict`] | a smallest set of requirements that can't hold together |
//! | [`lever`] | keys of a sheet that can be moved one at a time |
//! | [`probe`] | running the search for another rail |
//! | [`change`] | the smallest single changes of a sheet that admit a candidate |
//! | [`remedy`] | what a designer could do |
//! | [`nothing`] | all of it where nothing qualifies |
//! | [`names`], [`part`] | a part by its name; why it is not on the list |
//! | [`gaps`], [`fill`] | blank cells that are worth filling; what can be tried for them |
//! | [`cell`] | cells of a row that would let a part in |
//!
//! This crate holds no formula of the circuit, opens no file and prints nothing.

pub mod cell;
pub mod change;
pub mod check_set;
mod company;
pub mod conflict;
pub mod fill;
mod filled;
mod fixed;
pub mod gaps;
pub mod lever;
pub mod limits;
pub mod losses;
pub mod names;
pub mod nothing;
pub mod part;
pub mod probe;
mod ranks;
pub mod remedy;
pub mod requirement;
mod scout;
pub mod survey;
