//! `ampthrift check`.

use clap::Args;

use super::common::Common;
use super::exit::{Exit, Failure};
use super::world::World;
use crate::catalog::{Kind, Loaded, ResistorType, Values};
use crate::report::{CatalogCheck, Format, KindCount, Screen, csv, json, text};

/// Read the catalogue and say all that is wrong or doubtful in it
///
/// Exit code 0 with doubts only. With errors the exit code is 2, and the list goes to standard
/// error in the format asked for.
#[derive(Debug, Args)]
pub(super) struct Arguments {}

/// Checks the catalogue.
pub(super) fn run(
    _arguments: &Arguments,
    common: &Common,
    world: &mut World<'_>,
) -> Result<Exit, Failure> {
    let loaded = common.load_catalog();
    let check = CatalogCheck {
        folder: common.catalog.display().to_string(),
        files: loaded.files,
        records: loaded.records,
        left_out: loaded.left_out.len(),
        counts: Kind::ALL.iter().map(|kind| count(*kind, &loaded)).collect(),
        faults: loaded.faults.clone(),
    };
    if common.stopping(&loaded).is_empty() {
        let screen = world.out_screen;
        world.result(&shown(&check, common.format(), screen)?)?;
        Ok(Exit::Answered)
    } else {
        Err(Failure::FaultList(shown(&check, common.format(), world.err_screen)?))
    }
}

fn shown(check: &CatalogCheck, format: Format, screen: Screen) -> Result<String, Failure> {
    Ok(match format {
        Format::Text => text::check(check, screen),
        Format::Json => json::text(&json::CheckJson::from(check))?,
        Format::Csv => csv::check(check)?,
    })
}

fn count(kind: Kind, loaded: &Loaded) -> KindCount {
    let catalog = &loaded.catalog;
    let plain = |types: usize| (types, types, 0);
    let (types, offers, made_to_order) = match kind {
        Kind::Reference => plain(catalog.references.len()),
        Kind::Amplifier => plain(catalog.amplifiers.len()),
        Kind::Lift => plain(catalog.lifts.len()),
        Kind::Adjustment => plain(catalog.adjustments.len()),
        Kind::Resistor => {
            let listed = |of: &ResistorType| match &of.values {
                Values::Listed(values) => Some(values.len()),
                Values::MadeToOrder { .. } => None,
            };
            let offers: Vec<Option<usize>> = catalog.resistors.iter().map(listed).collect();
            let made = offers.iter().filter(|offers| offers.is_none()).count();
            (offers.len(), offers.iter().flatten().sum(), made)
        }
    };
    KindCount {
        kind,
        types: types as u64,
        offers: offers as u64,
        made_to_order: made_to_order as u64,
    }
}
