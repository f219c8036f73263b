//! The JSON of `check`.

use serde::{Deserialize, Serialize};

use crate::catalog::{Fault, Severity};
use crate::report::{CatalogCheck, KindCount};

/// What `check` found.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct CheckJson {
    /// Format number.
    pub format: u32,
    /// The catalogue's folder as given.
    pub catalog: String,
    /// Files read.
    pub files: usize,
    /// Records found, those with errors included.
    pub records: usize,
    /// Records with errors.
    pub left_out: usize,
    /// How many errors.
    pub errors: usize,
    /// How many doubts.
    pub doubts: usize,
    /// What the catalogue holds, without what has errors.
    pub kinds: Vec<KindJson>,
    /// Everything wrong or doubtful, by place.
    pub faults: Vec<FaultJson>,
}

/// How much of one kind there is.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct KindJson {
    /// Kind of part.
    pub kind: String,
    /// Types.
    pub types: u64,
    /// Order codes.
    pub offers: u64,
    /// Types that are made to order.
    pub made_to_order: u64,
}

/// One fault.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FaultJson {
    /// `error` or `doubt`.
    pub severity: String,
    /// The file.
    pub file: String,
    /// Line from 1; 0 where the whole file is meant.
    pub line: usize,
    /// Column in characters from 1; 0 where the whole file is meant.
    pub column: usize,
    /// The record, where it is known.
    pub record: Option<String>,
    /// The field, where it is known.
    pub field: Option<String>,
    /// What was found.
    pub message: String,
    /// What to write instead.
    pub hint: Option<String>,
}

impl From<&CatalogCheck> for CheckJson {
    fn from(check: &CatalogCheck) -> Self {
        Self {
            format: super::FORMAT,
            catalog: check.folder.clone(),
            files: check.files,
            records: check.records,
            left_out: check.left_out,
            errors: check.number_of(Severity::Error),
            doubts: check.number_of(Severity::Doubt),
            kinds: check.counts.iter().map(Into::into).collect(),
            faults: check.faults.iter().map(Into::into).collect(),
        }
    }
}

impl From<&KindCount> for KindJson {
    fn from(count: &KindCount) -> Self {
        Self {
            kind: count.kind.word().to_owned(),
            types: count.types,
            offers: count.offers,
            made_to_order: count.made_to_order,
        }
    }
}

impl From<&Fault> for FaultJson {
    fn from(fault: &Fault) -> Self {
        Self {
            severity: severity(fault.severity).to_owned(),
            file: fault.place.file.display().to_string(),
            line: fault.place.line,
            column: fault.place.column,
            record: fault.record.clone(),
            field: fault.field.clone(),
            message: fault.message.clone(),
            hint: fault.hint.clone(),
        }
    }
}

/// The word for a severity.
pub(in crate::report) const fn severity(severity: Severity) -> &'static str {
    match severity {
        Severity::Error => "error",
        Severity::Doubt => "doubt",
    }
}
