//! What `check` found, as plain data.

use crate::catalog::{Fault, Kind, Severity};

/// How much of one kind a catalogue holds.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct KindCount {
    /// Kind of part.
    pub kind: Kind,
    /// Types: a record without grades is one, else each grade is one.
    pub types: u64,
    /// Order codes: for resistors one a listed value.
    pub offers: u64,
    /// Types that are made to order in any value, whose order codes are not counted.
    pub made_to_order: u64,
}

/// What `check` found.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct CatalogCheck {
    /// The catalogue's folder as given.
    pub folder: String,
    /// Files read.
    pub files: usize,
    /// Records found, those with errors included.
    pub records: usize,
    /// Records with errors; they are not counted below.
    pub left_out: usize,
    /// One entry a kind, in the order of [`Kind::ALL`].
    pub counts: Vec<KindCount>,
    /// Everything wrong or doubtful, by place.
    pub faults: Vec<Fault>,
}

impl CatalogCheck {
    /// How many faults are of this severity.
    #[must_use]
    pub fn number_of(&self, severity: Severity) -> usize {
        self.faults.iter().filter(|fault| fault.severity == severity).count()
    }
}
