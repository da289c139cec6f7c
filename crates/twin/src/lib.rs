//! The slow twin of the search: obviously right, and sharing no cleverness with it.
//!
//! | module | what it holds |
//! |---|---|
//! | [`plain`] | every combination by nested loops, a full sort, the front, the spread, the counts |
//! | [`shops`] | small random shops: a rail and the parts that could be bought for it |
//! | [`alike`] | comparison of a list or of counts with what the plain way found |
//!
//! Of `circuit` this crate uses the formulas and checks, and none of the functions that choose a
//! value: these are written again here, by trying every value. Of `select` it uses only the plain
//! data of what may be chosen ([`select::problem::Problem`] and the parts in it).
//!
//! It serves tests alone and is no part of the tool.

pub mod alike;
pub mod plain;
pub mod shops;
