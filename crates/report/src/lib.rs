//! What the search found, told as values, as JSON, as CSV and as a table for people.
//!
//! | module | what it holds |
//! |---|---|
//! | [`shortlist`] | the shortlist as one typed value, from which every output is made |
//! | [`json`] | it as JSON, format 1 |
//! | [`ranking_csv`] | its ranking as CSV |
//! | [`certificate`] | it with claims about all that it leaves out, as JSON |
//! | [`terminal`] | it as a table with what was covered, assumed, left unchecked |
//! | [`page`] | it, or designs, as a page (HTML) with pictures and proofs |
//! | [`design`] | one candidate as a design file |
//! | [`drawn`] | lists and designs as what pictures are drawn from |
//! | [`catalog_check`] | what a folder of catalogs holds and lacks |
//! | [`proof`] | every check of a design, with formulas, numbers and sources |
//! | [`mod@reasons`] | why nothing qualifies, why a part is not on the list, which blanks to fill |
//! | [`shortage`] | the same over a folder of designs; which parts a shortage would hit hardest |
//! | [`mod@substitute`] | what can go into a design in place of a part that is gone |
//! | [`notices`] | faults and doubts with the text at fault underlined |
//! | [`remark`] | what no result checks, and cautions |
//! | [`identity`] | a candidate's short id |
//! | [`dossier`] | a shortlist, or designs, as tables for one file |
//! | [`mod@purchase`] | order lines, and the purchase list over several rails |
//! | [`table`] | typed tables, and them as CSV and on a terminal |
//! | [`workbook`], [`markdown`] | typed tables as `.xlsx` and `.md` |
//! | [`mod@reference`] | the columns of every table, for the documentation |
//! | [`figure`], [`hash`], [`look`], [`spreadsheet`] | numbers, hashes, text for a terminal, text for a cell |
//!
//! This crate computes no check and no ranking. It does not know the argument parser, the terminal
//! it is shown on, exit statuses, or how files are written.

pub mod catalog_check;
pub mod certificate;
mod choice;
pub mod design;
pub mod dossier;
pub mod drawn;
pub mod figure;
pub mod hash;
pub mod identity;
pub mod json;
pub mod look;
pub mod markdown;
pub mod notices;
pub mod page;
pub mod proof;
pub mod purchase;
pub mod ranking_csv;
pub mod reasons;
pub mod reference;
pub mod remark;
pub mod shortage;
pub mod shortlist;
pub mod spreadsheet;
pub mod substitute;
pub mod table;
pub mod terminal;
pub mod workbook;
