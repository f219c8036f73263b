//! Numbers as the JSON output writes them.

use serde::{Deserialize, Serialize, Serializer};

/// A figure in its SI base unit (ratios in ppm), written with the fewest digits that read back to
/// the same binary number.
#[derive(Clone, Copy, Debug, PartialEq, Deserialize)]
#[serde(transparent)]
pub struct Number(f64);

impl Number {
    /// Wraps a figure. A negative zero loses its sign, which nobody wants to read.
    #[must_use]
    pub fn new(figure: f64) -> Self {
        Self(figure + 0.0)
    }

    /// The figure.
    #[must_use]
    pub const fn value(self) -> f64 {
        self.0
    }
}

impl Serialize for Number {
    // A `null` where a number is promised would pass an error of ours on to the reader.
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        if self.0.is_finite() {
            serializer.serialize_f64(self.0)
        } else {
            Err(serde::ser::Error::custom(format!("a figure came out as {}", self.0)))
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_read_back_to_the_same_bits() {
        for figure in [0.0, -0.0, 0.1, 1e-6, 249_000.0, 1.0 / 3.0, 5e-324, f64::MAX] {
            let text = serde_json::to_string(&Number::new(figure)).unwrap();
            let back: Number = serde_json::from_str(&text).unwrap();
            assert_eq!(back.value(), figure, "{text}");
            assert!(!text.starts_with("-0"), "{text}");
        }
    }

    #[test]
    fn a_figure_that_is_no_number_is_refused() {
        for figure in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
            assert!(serde_json::to_string(&Number::new(figure)).is_err());
        }
    }
}
