//! IEC 60062 letter codes.
use super::Decimal;
/// Placeholder.
#[must_use]
pub fn from_letter_code(_text: &str) -> Option<Decimal> {
    None
}
/// Placeholder.
#[must_use]
pub fn to_letter_code(_ohms: Decimal) -> String {
    String::new()
}
