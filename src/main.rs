//! The command line program.

use std::io::{IsTerminal, Write};
use std::process::ExitCode;

use ampthrift::cli::{self, World};

fn main() -> ExitCode {
    std::panic::set_hook(Box::new(cli::keep));
    let (exit, message) = cli::guarded(|| {
        let (out_screen, err_screen) = cli::screens();
        let mut world = World {
            out: &mut std::io::stdout(),
            err: &mut std::io::stderr(),
            out_screen,
            err_screen,
            progress: std::io::stderr().is_terminal(),
            stop: None,
        };
        cli::run(std::env::args_os(), &mut world)
    });
    if let Some(message) = message {
        // Nobody is left to tell when even this fails.
        let _ = std::io::stderr().write_all(message.as_bytes());
    }
    exit.into()
}
