//! The last line of defence: a panic becomes a plain message and the exit code for an internal
//! error, never a trace of the program's inside.

use std::panic::{AssertUnwindSafe, PanicHookInfo, catch_unwind};
use std::sync::Mutex;

use super::exit::Exit;

/// What the first panic said. Panics of worker threads end up in the thread that waits for them,
/// but only the hook still knows the place.
static FIRST: Mutex<Option<String>> = Mutex::new(None);

/// Keeps what a panic says instead of printing it; to be set as the process's panic hook.
pub fn keep(panic: &PanicHookInfo<'_>) {
    let payload = panic.payload();
    let said = payload
        .downcast_ref::<&str>()
        .map(|text| (*text).to_owned())
        .or_else(|| payload.downcast_ref::<String>().cloned())
        .unwrap_or_else(|| "no reason given".to_owned());
    let place = panic.location().map_or(String::new(), |place| format!(" ({place})"));
    if let Ok(mut first) = FIRST.lock() {
        first.get_or_insert(format!("{said}{place}"));
    }
}

/// Runs to an exit; on a panic, to [`Exit::Internal`] and a message for the user.
pub fn guarded(run: impl FnOnce() -> Exit) -> (Exit, Option<String>) {
    catch_unwind(AssertUnwindSafe(run)).map_or_else(
        |_| {
            let said = FIRST.lock().ok().and_then(|mut first| first.take());
            (Exit::Internal, Some(internal(&said.unwrap_or_else(|| "a panic".to_owned()))))
        },
        |exit| (exit, None),
    )
}

/// The message for an internal error.
pub(super) fn internal(what: &str) -> String {
    format!(
        "internal error: {what}\nThis is a mistake in ampthrift, not in your files. No result was \
         given.\n"
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_panic_becomes_an_internal_error() {
        let (exit, message) = guarded(|| panic!("a test of the guard"));
        assert_eq!(exit, Exit::Internal);
        assert!(message.is_some_and(|text| text.starts_with("internal error: ")));
        assert_eq!(guarded(|| Exit::NoDesign), (Exit::NoDesign, None));
    }
}
