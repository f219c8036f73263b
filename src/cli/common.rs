//! Options that every command takes, and reading the catalogue by them.

use std::num::NonZeroUsize;
use std::path::PathBuf;
use std::time::Duration;

use clap::{Args, ValueEnum};

use super::world::World;
use crate::catalog::{self, Fault, Loaded};
use crate::quantity::{Parse, Seconds, Sign};
use crate::report::Format;

/// Options that every command takes.
#[derive(Debug, Args)]
pub(super) struct Common {
    /// Folder of part records
    #[arg(long, global = true, value_name = "DIR", default_value = "catalog/parts")]
    pub(super) catalog: PathBuf,

    /// Format of the result
    #[arg(long, global = true, value_enum, default_value_t = FormatName::Text)]
    format: FormatName,

    /// Threads to use; all processors when left out. The answer doesn't depend on it
    #[arg(long, global = true, value_name = "N")]
    threads: Option<NonZeroUsize>,

    /// Stop the search after this long and give the best set so far with its gap, e.g. 30s
    #[arg(long, global = true, value_name = "TIME", value_parser = duration)]
    time_limit: Option<Duration>,

    /// Leave out records that have errors instead of stopping
    #[arg(long, global = true)]
    skip_bad_records: bool,

    /// No progress and no remarks on standard error; errors are still reported
    #[arg(long, short, global = true)]
    pub(super) quiet: bool,
}

/// The formats by the names of the command line.
#[derive(Clone, Copy, Debug, ValueEnum)]
enum FormatName {
    Text,
    Json,
    Csv,
}

/// The longest time limit: longer ones mean none.
const LONGEST: f64 = 3.15e9;

fn duration(text: &str) -> Result<Duration, String> {
    let time = Seconds::parse(text, Sign::Positive)
        .map_err(|fault| format!("{}; {}", fault.message, fault.hint))?;
    Ok(Duration::from_secs_f64(time.value().min(LONGEST)))
}

impl Common {
    /// The format asked for.
    pub(super) const fn format(&self) -> Format {
        match self.format {
            FormatName::Text => Format::Text,
            FormatName::Json => Format::Json,
            FormatName::Csv => Format::Csv,
        }
    }

    /// How many threads to use.
    pub(super) fn threads(&self) -> Option<usize> {
        self.threads.map(NonZeroUsize::get)
    }

    /// How long the search may take.
    pub(super) const fn time_limit(&self) -> Option<Duration> {
        self.time_limit
    }

    /// Reads the catalogue.
    pub(super) fn load_catalog(&self) -> Loaded {
        catalog::load(&self.catalog)
    }

    /// The faults of a catalogue that stop the run: its errors, or none where bad records are to
    /// be left out. Without a folder there is nothing to go on with.
    pub(super) fn stopping(&self, loaded: &Loaded) -> Vec<Fault> {
        if self.skip_bad_records && self.catalog.is_dir() {
            Vec::new()
        } else {
            loaded.errors().cloned().collect()
        }
    }

    /// A remark on standard error, unless the user wants quiet.
    pub(super) fn remark(&self, world: &mut World<'_>, text: &str) {
        if !self.quiet {
            world.message(&format!("{text}\n"));
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn time_limits_need_a_unit_and_a_sense() {
        assert_eq!(duration("30s"), Ok(Duration::from_secs(30)));
        assert_eq!(duration("1.5 min"), Ok(Duration::from_secs(90)));
        // More than a clock can count is no limit, and no panic.
        assert_eq!(duration("9e9 yr"), Ok(Duration::from_secs_f64(LONGEST)));
        for bad in ["30", "-1 s", "0 s", "5 V", "soon", ""] {
            assert!(duration(bad).is_err(), "{bad}");
        }
    }
}
