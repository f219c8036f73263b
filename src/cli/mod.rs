//! Arguments, exit codes, one file per command.
