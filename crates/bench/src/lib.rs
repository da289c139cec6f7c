//! What the speed of Railwright is measured with.
//!
//! | module | what it holds |
//! |---|---|
//! | [`large`] | large shops made from a seed, and rail sheets for them |
//! | [`peer`] | tables for a peer that combines with database joins |
//! | [`workload`] | a folder and a sheet, read and ready for a search |
//!
//! The benchmarks of each stage are in `benches/`, the yardsticks in `src/bin/`, and how to repeat
//! the published figures in `docs/benchmarks.md`.

pub mod large;
pub mod peer;
pub mod workload;
