//! Proves from a certificate that a shortlist left nothing out, without searching.
//!
//! Formulas, checks and the choice of values are those of `circuit`; which rows may be chosen is said
//! by `eligible`. The format, and why its claims are a proof, is on the page `docs/certificate.md`.

mod certificate;
mod cover;
pub mod files;
mod rank;
mod rows;
mod sides;

use certificate::Certificate;
use eligible::Eligible;
use std::fmt;

/// Why a certificate is refused.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Refused {
    /// What is wrong: `format`, `files`, `row`, a claim, or `covers` where there is none.
    pub claim: String,
    /// In what way.
    pub because: String,
}

pub(crate) fn refused(claim: impl ToString, because: impl ToString) -> Refused {
    Refused { claim: claim.to_string(), because: because.to_string() }
}

impl fmt::Display for Refused {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}: {}", self.claim, self.because)
    }
}

impl std::error::Error for Refused {}

/// Proves that the rows of a certificate are the first of the ranking over all combinations of the
/// parts that may be chosen, or all that hold where they are fewer than asked for. Gives the rows in
/// words. Hashes are not looked at.
///
/// # Errors
/// The first claim that is not true, or the first choice that no claim covers.
pub fn prove(text: &[u8], eligible: &Eligible<'_>) -> Result<Vec<String>, Refused> {
    let read: Certificate = serde_json::from_slice(text).map_err(|e| refused("format", e))?;
    if read.certificate != 1 {
        return Err(refused("format", "not format 1"));
    }
    let shop = sides::Shop::new(eligible);
    let listed = rows::prove(&shop, &read.rows, read.top)?;
    cover::prove(&shop, &listed, &read.claims)?;
    Ok(listed.rows.iter().map(|parts| shop.spell(parts)).collect())
}
