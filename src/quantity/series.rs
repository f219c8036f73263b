//! IEC 60063 preferred values.
/// Placeholder.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Series;
