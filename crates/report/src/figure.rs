//! Numbers in results.

use serde::{Serialize, Serializer};
use std::fmt;

/// A figure in full precision. Infinite ones, which JSON does not know, are the texts `inf` and
/// `-inf`.
///
/// ```
/// use report::figure::Figure;
/// assert_eq!(serde_json::to_string(&Figure(0.1)).unwrap(), "0.1");
/// assert_eq!(serde_json::to_string(&Figure(f64::NEG_INFINITY)).unwrap(), "\"-inf\"");
/// assert_eq!(Figure(f64::INFINITY).to_string(), "inf");
/// ```
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Figure(pub f64);

impl Serialize for Figure {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        if self.0.is_finite() {
            serializer.serialize_f64(self.0)
        } else {
            serializer.collect_str(self)
        }
    }
}

/// The shortest decimal that reads back as the same figure.
impl fmt::Display for Figure {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}", self.0)
    }
}

/// Names with values, written as one JSON object in this order.
#[derive(Debug, Clone, PartialEq)]
pub struct Pairs<K, V>(pub Vec<(K, V)>);

impl<K: Serialize, V: Serialize> Serialize for Pairs<K, V> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_map(self.0.iter().map(|(name, value)| (name, value)))
    }
}
