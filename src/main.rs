//! The command line program.

use std::io::{IsTerminal, Write};
use std::process::ExitCode;
use std::sync::atomic::{AtomicBool, Ordering};

use ampthrift::cli::{self, World};

/// Set by an interrupt: a search then ends with the best set so far.
static STOP: AtomicBool = AtomicBool::new(false);

fn main() -> ExitCode {
    std::panic::set_hook(Box::new(cli::keep));
    // Without a handler an interrupt ends the program at once, which is no harm; so does a second
    // one, with the code that shells give to an interrupt.
    let _ = ctrlc::set_handler(|| {
        if STOP.swap(true, Ordering::Relaxed) {
            std::process::exit(130);
        }
    });
    let (exit, message) = cli::guarded(|| {
        let (out_screen, err_screen) = cli::screens();
        let mut world = World {
            out: &mut std::io::stdout(),
            err: &mut std::io::stderr(),
            out_screen,
            err_screen,
            progress: std::io::stderr().is_terminal(),
            stop: Some(&STOP),
        };
        cli::run(std::env::args_os(), &mut world)
    });
    if let Some(message) = message {
        // Nobody is left to tell when even this fails.
        let _ = std::io::stderr().write_all(message.as_bytes());
    }
    exit.into()
}
