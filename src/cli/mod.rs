//! Arguments, exit codes, one file per command. No rules of the trade.
//!
//! To add a command: its file, its line in `Command` and its arm in `Command::run`.

mod check;
mod choose;
mod common;
mod exit;
mod flags;
mod guard;
mod inputs;
mod progress;
mod world;

use std::ffi::OsString;

use clap::{Parser, Subcommand};

pub use exit::Exit;
pub use guard::{guarded, keep};
pub use world::{World, screens};

use common::Common;
use exit::Failure;

/// The whole command line.
#[derive(Debug, Parser)]
#[command(
    name = "ampthrift",
    version,
    about = "Chooses the cheapest parts for precision DC current sources that meet a target \
             accuracy, with a proof and with reasons",
    after_help = "Exit codes: 0 every output has a design; 1 some output has none, the reasons \
                  are the result; 2 bad input or usage, nothing on standard output; 3 internal \
                  error.",
    arg_required_else_help = true,
    max_term_width = 100
)]
struct Cli {
    #[command(subcommand)]
    command: Command,
    #[command(flatten)]
    common: Common,
}

/// The commands.
#[derive(Debug, Subcommand)]
enum Command {
    Choose(choose::Arguments),
    Check(check::Arguments),
}

impl Command {
    fn run(self, common: &Common, world: &mut World<'_>) -> Result<Exit, Failure> {
        match self {
            Self::Choose(arguments) => choose::run(&arguments, common, world),
            Self::Check(arguments) => check::run(&arguments, common, world),
        }
    }
}

/// Runs one command line, the program's name first, to its exit.
pub fn run(arguments: impl IntoIterator<Item = OsString>, world: &mut World<'_>) -> Exit {
    match Cli::try_parse_from(arguments) {
        Ok(cli) => {
            let outcome = cli.command.run(&cli.common, world);
            outcome.unwrap_or_else(|failure| report(&failure, world))
        }
        Err(error) => parse_exit(&error, world),
    }
}

/// Help and version are results; everything else that the parser hands back is bad usage.
fn parse_exit(error: &clap::Error, world: &mut World<'_>) -> Exit {
    let text = |colour: bool| {
        let text = error.render();
        if colour { text.ansi().to_string() } else { text.to_string() }
    };
    if error.use_stderr() {
        world.message(&text(world.err_screen.colour));
        Exit::BadInput
    } else {
        let written = world.result(&text(world.out_screen.colour));
        written.map_or_else(|failure| report(&failure, world), |()| Exit::Answered)
    }
}

/// Says why there is no result.
fn report(failure: &Failure, world: &mut World<'_>) -> Exit {
    let text = match failure {
        Failure::Usage { message, hint } => format!("error: {message}\n{hint}\n"),
        Failure::Faults(faults) => crate::report::text::faults(faults, world.err_screen),
        Failure::FaultList(text) => text.clone(),
        Failure::Write(error) if failure.exit() == Exit::Internal => {
            format!("error: the result cannot be written: {error}\n")
        }
        Failure::Write(_) => String::new(),
        Failure::Internal(what) => guard::internal(what),
    };
    world.message(&text);
    failure.exit()
}

#[cfg(test)]
mod tests {
    use super::*;
    use clap::CommandFactory;

    #[test]
    fn the_command_line_is_sound() {
        Cli::command().debug_assert();
    }
}
