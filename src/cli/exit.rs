//! How a run ends: exit codes, and from every failure to its code.

use std::io;
use std::process::ExitCode;

use crate::catalog::Fault;

/// The exit codes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Exit {
    /// 0: every output has a design (also when the search was stopped early), or a question was
    /// answered. Also when the reader of the output goes away.
    Answered,
    /// 1: some output has no design, or there is no common set; the reasons are the result.
    NoDesign,
    /// 2: bad input or usage; standard output is empty.
    BadInput,
    /// 3: an internal error.
    Internal,
}

impl Exit {
    /// The number that the shell sees.
    #[must_use]
    pub const fn code(self) -> u8 {
        match self {
            Self::Answered => 0,
            Self::NoDesign => 1,
            Self::BadInput => 2,
            Self::Internal => 3,
        }
    }
}

impl From<Exit> for ExitCode {
    fn from(exit: Exit) -> Self {
        Self::from(exit.code())
    }
}

/// Why a run gives no result.
#[derive(Debug)]
pub(super) enum Failure {
    /// The command line asks for something that cannot be. What is wrong, and what to write.
    Usage { message: String, hint: String },
    /// Faults in the files of the user or in the flags that stand for one.
    Faults(Vec<Fault>),
    /// The result is a list of faults, in a format for programs.
    FaultList(String),
    /// The result could not be written.
    Write(io::Error),
    /// Ours.
    Internal(String),
}

impl Failure {
    /// The exit code of each failure.
    pub(super) fn exit(&self) -> Exit {
        match self {
            Self::Usage { .. } | Self::Faults(_) | Self::FaultList(_) => Exit::BadInput,
            // Whoever read the output has seen enough.
            Self::Write(error) if error.kind() == io::ErrorKind::BrokenPipe => Exit::Answered,
            Self::Write(_) | Self::Internal(_) => Exit::Internal,
        }
    }
}

impl From<serde_json::Error> for Failure {
    fn from(error: serde_json::Error) -> Self {
        Self::Internal(error.to_string())
    }
}

impl From<crate::report::csv::CsvError> for Failure {
    fn from(error: crate::report::csv::CsvError) -> Self {
        Self::Internal(error.to_string())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_broken_pipe_is_no_failure_but_a_full_disk_is() {
        let write = |kind| Failure::Write(io::Error::from(kind)).exit().code();
        assert_eq!(write(io::ErrorKind::BrokenPipe), 0);
        assert_eq!(write(io::ErrorKind::StorageFull), 3);
    }
}
