//! `ampthrift choose`.

use std::path::PathBuf;

use clap::Args;

use super::common::Common;
use super::exit::{Exit, Failure};
use super::flags::RequestFlags;
use super::inputs::{self, Inputs};
use super::progress::Waiting;
use super::world::World;
use crate::answers::{self, Choice, ChooseError, Options, Status};
use crate::report::{Format, csv, json, text};

/// Find the cheapest set of parts for every output of a request, with a proof
#[derive(Debug, Args)]
pub(super) struct Arguments {
    /// Request file (YAML, kind: request); or describe one output by the flags below
    #[arg(value_name = "REQUEST")]
    request: Option<PathBuf>,

    #[command(flatten)]
    flags: RequestFlags,
}

/// Chooses and shows the choice.
pub(super) fn run(
    arguments: &Arguments,
    common: &Common,
    world: &mut World<'_>,
) -> Result<Exit, Failure> {
    let inputs = inputs::read(arguments.request.as_deref(), &arguments.flags, common)?;
    inputs.remark(common, world);
    let mut choice = solve(&inputs, common, world)?;
    choice.notes.extend(inputs.note());
    let text = match common.format() {
        Format::Text => text::choice(&choice, world.out_screen),
        Format::Json => json::text(&json::ChoiceJson::from(&choice))?,
        Format::Csv => csv::choice(&choice)?,
    };
    world.result(&text)?;
    Ok(match choice.status {
        Status::Optimal | Status::Gap => Exit::Answered,
        Status::Infeasible => Exit::NoDesign,
    })
}

fn solve(inputs: &Inputs, common: &Common, world: &World<'_>) -> Result<Choice, Failure> {
    let waiting =
        (world.progress && !common.quiet).then(|| Waiting::start(inputs.request.currency.clone()));
    let told = waiting.as_ref().map(|waiting| |step: &answers::Progress| waiting.tell(step));
    let options = Options {
        threads: common.threads(),
        time_limit: common.time_limit(),
        progress: told.as_ref().map(|told| told as &(dyn Fn(&answers::Progress) + Sync)),
        stop: world.stop,
    };
    answers::choose(&inputs.catalog, &inputs.request, &options).map_err(failure)
}

/// What a failed search means for the user.
fn failure(error: ChooseError) -> Failure {
    let message = error.to_string();
    match error {
        ChooseError::TooDear => Failure::Usage {
            message,
            hint: "Look for prices or quantities that are far too large.".to_owned(),
        },
        ChooseError::Input(faults) => Failure::Faults(faults),
        ChooseError::Stopped => {
            Failure::Usage { message, hint: "Give the search more time.".to_owned() }
        }
        ChooseError::Internal(what) => Failure::Internal(what),
    }
}
