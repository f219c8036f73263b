//! Reading a whole catalogue: every fault of every file in one run.

use std::path::Path;
use std::sync::Arc;

use rayon::prelude::*;

use super::build::Offer;
use super::clash::drop_clashes;
use super::fault::{Fault, Severity};
use super::folder::{File, read_folder};
use super::model::{Catalog, Place};
use super::record::{ReadRecord, read_record};
use super::stream::{Piece, cut, decode};
use super::yaml::{YamlFault, read_document};

/// A catalogue as read: what can be used, and all that is wrong or doubtful.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Loaded {
    /// The sound records. A record with an error is not here, nor are offers whose order code is
    /// given twice.
    pub catalog: Catalog,
    /// Errors and doubts, by file and place.
    pub faults: Vec<Fault>,
    /// Files read.
    pub files: usize,
    /// Documents that hold something, broken ones included.
    pub records: usize,
    /// The records left out for their errors: what messages call them, and where they start.
    pub left_out: Vec<(String, Place)>,
}

impl Loaded {
    /// The faults that stop a run, unless bad records are to be left out.
    pub fn errors(&self) -> impl Iterator<Item = &Fault> {
        self.faults.iter().filter(|fault| fault.severity == Severity::Error)
    }

    /// The faults that somebody should look at.
    pub fn doubts(&self) -> impl Iterator<Item = &Fault> {
        self.faults.iter().filter(|fault| fault.severity == Severity::Doubt)
    }
}

/// Reads every record under a folder. Never fails as a whole: what cannot be read is a fault.
#[must_use]
pub fn load(folder: &Path) -> Loaded {
    let (files, mut faults) = read_folder(folder);
    let mut documents: Vec<(&File, usize, Piece<'_>)> = Vec::new();
    for file in &files {
        match decode(&file.bytes) {
            Ok(text) => {
                let pieces = cut(text).into_iter().enumerate();
                documents.extend(pieces.map(|(index, piece)| (file, index + 1, piece)));
            }
            Err(fault) => faults.push(of_file(file, None, fault)),
        }
    }
    let read: Vec<ReadRecord> = documents
        .into_par_iter()
        .filter_map(|(file, number, piece)| read_piece(file, number, piece))
        .collect();

    let mut loaded = Loaded { files: files.len(), records: read.len(), ..Loaded::default() };
    let mut offers = Vec::new();
    for record in read {
        let sound = !record.faults.iter().any(|fault| fault.severity == Severity::Error);
        if !sound {
            loaded.left_out.push((record.name, record.place));
        }
        faults.extend(record.faults);
        offers.extend(record.offers);
    }
    if loaded.records == 0 && faults.is_empty() {
        faults.push(Fault {
            place: Place { file: Arc::new(folder.to_owned()), line: 1, column: 1 },
            severity: Severity::Doubt,
            record: None,
            field: None,
            message: "no part records".to_owned(),
            hint: Some("put them into files named *.yaml or *.yml under this folder".to_owned()),
        });
    }
    for offer in drop_clashes(offers, &mut faults) {
        match offer {
            Offer::Reference(part) => loaded.catalog.references.push(part),
            Offer::Amplifier(part) => loaded.catalog.amplifiers.push(part),
            Offer::Resistor(part) => loaded.catalog.resistors.push(part),
            Offer::Lift(part) => loaded.catalog.lifts.push(part),
            Offer::Adjustment(part) => loaded.catalog.adjustments.push(part),
        }
    }
    faults.sort();
    loaded.faults = faults;
    loaded
}

/// Reads one document; `None` when it is empty.
fn read_piece(file: &File, number: usize, piece: Piece<'_>) -> Option<ReadRecord> {
    match read_document(piece.text, piece.first_line) {
        Ok(node) => node.map(|node| read_record(&file.path, number, &node)),
        Err(fault) => {
            let name = format!("document {number}");
            let fault = of_file(file, Some(name.clone()), fault);
            let place = Place { line: piece.first_line, column: 1, ..fault.place.clone() };
            Some(ReadRecord { name, place, offers: Vec::new(), faults: vec![fault] })
        }
    }
}

fn of_file(file: &File, record: Option<String>, fault: YamlFault) -> Fault {
    Fault {
        place: Place { file: Arc::clone(&file.path), line: fault.at.line, column: fault.at.column },
        severity: Severity::Error,
        record,
        field: None,
        message: fault.message,
        hint: fault.hint,
    }
}
