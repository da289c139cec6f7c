//! Broken input by the million: every reader of the tool is fed with altered copies of a kept corpus.
//!
//! | module | what it holds |
//! |---|---|
//! | [`target`] | what is fed, and what must hold for every input |
//! | [`bundle`] | a sheet with its catalogs in one text, for the targets that need several files |
//! | [`corpus`] | the kept inputs |
//! | [`mutate`] | how an input is altered |
//! | [`campaign`] | the loop: alter, feed, keep what behaves in a new way |
//!
//! Everything runs on a stable toolchain. Coverage of code is not measured; in its place an input is kept
//! for further altering when what it leads to (the codes of its notices, whether it is accepted) was
//! never seen together before. A run with the same seed and number of inputs feeds the same inputs.
//!
//! Serves tests alone and is no part of the tool.

pub mod bundle;
pub mod campaign;
pub mod corpus;
pub mod mutate;
pub mod target;
