//! Reading figures with units. (Placeholder signatures until the reader is written.)

use super::Decimal;

/// A figure as written and as computed with.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Exact<Q> {
    decimal: Decimal,
    value: Q,
}

impl<Q: Copy> Exact<Q> {
    /// The exact decimal in the SI unit.
    #[must_use]
    pub const fn decimal(self) -> Decimal {
        self.decimal
    }

    /// The quantity, rounded to binary once.
    #[must_use]
    pub const fn value(self) -> Q {
        self.value
    }
}

/// Which signs a figure may have.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Sign {
    /// Any.
    Any,
    /// Not below zero.
    NotNegative,
    /// Above zero.
    Positive,
}

/// Why a text is not the figure wanted: what was found, and what to write instead.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct FigureError {
    /// What was found.
    pub message: String,
    /// What to write instead.
    pub hint: String,
}

/// Quantities that can be read from text.
pub trait Parse: Sized {
    /// Reads a figure with its unit.
    ///
    /// # Errors
    /// Says what was found and what to write instead.
    fn parse(text: &str, sign: Sign) -> Result<Self, FigureError>;
}
