//! What a question is asked about: a catalogue and a request, read together so that the faults of
//! both are reported in one run.

use std::path::Path;

use super::common::Common;
use super::exit::Failure;
use super::flags::RequestFlags;
use super::world::World;
use crate::catalog::{Catalog, Fault, Loaded};
use crate::request::{self, Request};
use crate::search::price_faults;

/// A sound catalogue and request.
#[derive(Debug)]
pub(super) struct Inputs {
    pub(super) catalog: Catalog,
    pub(super) request: Request,
    /// How many doubts the catalogue raises.
    doubts: usize,
    /// How many errors were passed over, and the records that were left out for them.
    skipped: Option<(usize, Vec<String>)>,
}

/// Reads the catalogue and the request, from its file or from flags.
///
/// # Errors
/// Neither file nor flags; all errors of both.
pub(super) fn read(
    file: Option<&Path>,
    flags: &RequestFlags,
    common: &Common,
) -> Result<Inputs, Failure> {
    let request = match file {
        Some(file) => request::load(file),
        None if flags.is_empty() => return Err(nothing_asked()),
        None => request::from_flags(flags.pairs()),
    };
    let loaded = common.load_catalog();
    let mut faults: Vec<Fault> = common.stopping(&loaded);
    if let Ok(request) = &request {
        faults.extend(price_faults(&loaded.catalog, request));
    }
    match request {
        Ok(request) if faults.is_empty() => Ok(Inputs {
            request,
            doubts: loaded.doubts().count(),
            skipped: skipped(&loaded),
            catalog: loaded.catalog,
        }),
        Ok(_) => Err(Failure::Faults(faults)),
        Err(more) => {
            faults.extend(more);
            Err(Failure::Faults(faults))
        }
    }
}

fn nothing_asked() -> Failure {
    Failure::Usage {
        message: "nothing is asked: neither a request file nor flags".to_owned(),
        hint: "Write `ampthrift choose REQUEST.yaml`, or describe one output, such as\n  \
               ampthrift choose --current 1mA --accuracy 0.05% --supply 14V..16V --load 0V..1V \
               --quantity 100 --currency EUR"
            .to_owned(),
    }
}

fn skipped(loaded: &Loaded) -> Option<(usize, Vec<String>)> {
    let errors = loaded.errors().count();
    let names = loaded
        .left_out
        .iter()
        .map(|(name, place)| format!("{name} ({}:{})", place.file.display(), place.line));
    (errors > 0).then(|| (errors, names.collect()))
}

impl Inputs {
    /// Remarks on what was read.
    pub(super) fn remark(&self, common: &Common, world: &mut World<'_>) {
        if let Some(note) = self.note() {
            common.remark(world, &note);
        }
        if self.doubts > 0 {
            let doubts = if self.doubts == 1 { "doubt" } else { "doubts" };
            common.remark(
                world,
                &format!("{} {doubts} about the catalogue: see `ampthrift check`", self.doubts),
            );
        }
    }

    /// What was left out, for the answer: the cheapest part may be among it.
    pub(super) fn note(&self) -> Option<String> {
        let (errors, names) = self.skipped.as_ref()?;
        let records = match names.len() {
            1 => "1 record left out".to_owned(),
            number => format!("{number} records left out"),
        };
        let errors = if *errors == 1 { "1 error".to_owned() } else { format!("{errors} errors") };
        let names =
            if names.is_empty() { String::new() } else { format!(" ({})", names.join(", ")) };
        Some(format!("{records} for {errors} in the catalogue{names}"))
    }
}
