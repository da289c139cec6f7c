//! Hashes by which a result names the files it was made from.

use serde::{Serialize, Serializer};
use sha2::{Digest, Sha256};
use std::fmt::Write;

/// A file of which a result shows the SHA-256; it is computed only when an output shows it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HashOf<'a>(pub &'a [u8]);

impl HashOf<'_> {
    /// The SHA-256 in lower-case hexadecimal.
    ///
    /// ```
    /// use report::hash::HashOf;
    /// // Source: FIPS 180-2, appendix B.1.
    /// let abc = "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad";
    /// assert_eq!(HashOf(b"abc").hex(), abc);
    /// ```
    pub fn hex(self) -> String {
        let digest = Sha256::digest(self.0);
        digest.iter().fold(String::with_capacity(64), |mut text, byte| {
            // Writing to a String cannot fail.
            let _ = write!(text, "{byte:02x}");
            text
        })
    }
}

impl Serialize for HashOf<'_> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.serialize_str(&self.hex())
    }
}
