//! Figures for people.
/// Placeholder: a figure with engineering prefix and so many significant digits, `249 kΩ`.
#[must_use]
pub fn engineering(value: f64, unit: &str, digits: usize) -> String {
    format!("{value:.digits$} {unit}")
}
/// Placeholder: a ratio in ppm with no more digits than mean something.
#[must_use]
pub fn ppm_text(ppm: f64) -> String {
    format!("{ppm} ppm")
}
