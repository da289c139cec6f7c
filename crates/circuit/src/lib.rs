//! The circuit model of a linear series-pass voltage regulator.
//!
//! Zener reference, error amplifier, NPN pass transistor in series with the load; the output is
//! (1 + RF/RI)·VZ. This crate holds every formula, check and choice of value, once. It knows no
//! files, no text to print, no threads, no prices and no ranking.
//!
//! Where to look: a check `soa-load` is the function `soa_load`, in the module of the part of the
//! circuit that it protects:
//!
//! | module | what it holds |
//! |---|---|
//! | [`rail`] | what is asked of a rail: feed, output, load, ambient, fault, derating |
//! | [`parts`] | the figures of parts that can be bought |
//! | [`check`] | the list of checks, what a finding is, and who takes findings |
//! | [`curve`] | straight lines between the points of a data sheet's curves |
//! | [`resistor`] | what a resistor may measure, and what it may stand, at the rail's temperatures |
//! | [`mod@reference`] | the zener with its bias resistor |
//! | [`amplifier`] | the error amplifier's supply, input range and error |
//! | [`divider`] | the divider of a [fixed](divider::fixed) or [adjustable](divider::adjustable) output |
//! | [`pass`] | the pass transistor on its heatsink |
//! | [`drive`] | the amplifier driving the transistor |
//! | [`assembly`] | all parts together: every check in page order |
//! | [`merit`] | efficiency, stress, margin, slack |
//! | [`slot`], [`status`] | the words for what parts are chosen for, and for where they stand in their life |
//!
//! Units are SI, temperatures °C, thermal resistances °C/W; field names end in their unit.

pub mod amplifier;
pub mod assembly;
pub mod check;
pub mod curve;
pub mod divider;
pub mod drive;
pub mod merit;
pub mod parts;
pub mod pass;
pub mod rail;
pub mod reference;
pub mod resistor;
pub mod slot;
pub mod status;
