//! The error budget: every term once, with id, doc line, nature and formula.

/// The terms of the error budget.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum TermId {
    /// Initial accuracy of the reference.
    ReferenceAccuracy,
}

/// One entry of the term table.
#[derive(Debug)]
pub struct TermDef {
    /// Which.
    pub id: TermId,
    /// Its name in JSON.
    pub name: &'static str,
    /// What it is, in one line.
    pub doc: &'static str,
    /// The formula, as text.
    pub formula: &'static str,
    /// Whether an adjustment removes it.
    pub is_static: bool,
    /// Whether rss and gum add it linearly.
    pub systematic: bool,
    /// Whether it is peak-to-peak noise (for gum).
    pub noise: bool,
}

/// The term table, in order of report.
pub const TERMS: &[TermDef] = &[];
