//! Text, JSON and CSV from finished results; computes nothing.
