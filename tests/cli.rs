//! The program as a user meets it: exit codes, what goes where, and every fault in one run.

use std::fs;
use std::io::{BufRead, BufReader, Read};
use std::path::Path;
use std::process::{Command, Output, Stdio};

use ampthrift::report::json::{CheckJson, ChoiceJson};
use tempfile::TempDir;
use unicode_width::UnicodeWidthStr;

/// A small catalogue of invented parts from which 1 mA can be made.
const PARTS: &str = "\
kind: reference
part: MV25
price: 2.00
output: 2.5 V
accuracy: 0.05 %
tempco: 10 ppm/K
dropout: 0.5 V
supply_max: 20 V
source_max: 10 mA
quiescent: 0.5 mA
load_regulation: 10 ppm/mA
line_regulation: 5 ppm/V
line_tested_at: 10 V
---
kind: amplifier
part: QA7
price: 0.50
offset: 50 uV
bias: 1 nA
swing_low: 0.1 V
swing_high: 1 V
input_low: -0.1 V
input_high: 1 V
supply: [4 V, 30 V]
sink_max: 5 mA
cmrr: 100 dB
psrr: 100 dB
open_loop_gain: 120 dB
---
kind: resistor
part: TF10
price: 0.10
order_code: TF10-{value}
tolerance: 0.05 %
tempco: 10 ppm/K
power: 0.25 W
voltage_max: 75 V
voltage_coefficient: 0.1 ppm/V
values: {list: [2.49 kohm, 2.5 kohm, 10 ohm]}
";

const REQUEST: &str = "\
kind: request
title: One milliampere
currency: EUR
conditions:
  supply: [14 V, 16 V]
  negative_rail: -5 V
  ambient: [15 degC, 35 degC]
outputs:
  - {name: bench, current: 1 mA, accuracy: 0.2 %, load: [0 V, 1 V], quantity: 10}
";

/// A folder with a catalogue and a request.
struct Bench {
    folder: TempDir,
}

impl Bench {
    fn new() -> Self {
        let bench = Self { folder: TempDir::new().unwrap() };
        fs::create_dir(bench.path().join("parts")).unwrap();
        bench.file("parts/all.yaml", PARTS);
        bench.file("request.yaml", REQUEST);
        bench
    }

    fn path(&self) -> &Path {
        self.folder.path()
    }

    fn file(&self, name: &str, text: &str) {
        fs::write(self.path().join(name), text).unwrap();
    }

    fn command(&self, arguments: &[&str]) -> Command {
        let mut command = Command::new(assert_cmd::cargo::cargo_bin!("ampthrift"));
        command.current_dir(self.path()).args(arguments).args(["--catalog", "parts"]);
        for variable in ["COLUMNS", "NO_COLOR", "TERM"] {
            command.env_remove(variable);
        }
        command
    }

    fn run(&self, arguments: &[&str]) -> Run {
        Run::of(&mut self.command(arguments))
    }
}

/// What a run came to.
struct Run {
    code: Option<i32>,
    out: String,
    err: String,
    shown: String,
}

impl Run {
    fn of(command: &mut Command) -> Self {
        let Output { status, stdout, stderr } = command.output().unwrap();
        let (out, err) = (String::from_utf8(stdout).unwrap(), String::from_utf8(stderr).unwrap());
        let shown = format!("{command:?}\n{status}\n--- out\n{out}\n--- err\n{err}");
        Self { code: status.code(), out, err, shown }
    }

    #[track_caller]
    fn exits(self, code: i32) -> Self {
        assert_eq!(self.code, Some(code), "{}", self.shown);
        self
    }

    /// Bad input: code 2, nothing on standard output, no panic.
    #[track_caller]
    fn refused(self) -> Self {
        let run = self.exits(2);
        assert_eq!(run.out, "", "{}", run.shown);
        assert!(!run.err.contains("panicked"), "{}", run.shown);
        run
    }

    #[track_caller]
    fn says(self, parts: &[&str]) -> Self {
        for part in parts {
            assert!(self.err.contains(part), "`{part}` is not in\n{}", self.shown);
        }
        self
    }
}

#[test]
fn a_design_is_found_and_shown() {
    let run = Bench::new().run(&["choose", "request.yaml"]).exits(0);
    assert!(run.out.starts_with("optimal: EUR 26.00 for 1 output, 3 order lines\n"), "{}", run.out);
    assert!(run.out.contains("TF10-2K5"), "{}", run.out);
    assert!(!run.out.contains('\u{1b}') && !run.err.contains('\u{1b}'), "{}", run.shown);
}

#[test]
fn json_reads_back() {
    let run = Bench::new().run(&["choose", "request.yaml", "--format", "json"]).exits(0);
    let choice: ChoiceJson = serde_json::from_str(&run.out).unwrap();
    assert_eq!(choice.status, "optimal");
    assert_eq!(choice.total_cost.as_deref(), Some("26.00"));
    let output = &choice.outputs[0];
    let design = output.design.as_ref().unwrap();
    assert_eq!(design.network.elements[0].order_code, "TF10-2K5");
    let total: f64 = output.terms.iter().map(|term| term.ppm.value()).sum();
    assert!((total - output.total_ppm.unwrap().value()).abs() < 1e-9, "{}", run.out);
}

#[test]
fn csv_is_read_by_a_csv_reader() {
    let run = Bench::new().run(&["choose", "request.yaml", "--format", "csv"]).exits(0);
    let mut reader = csv::Reader::from_reader(run.out.as_bytes());
    let rows: Vec<csv::StringRecord> = reader.records().map(Result::unwrap).collect();
    let bought: Vec<&str> =
        rows.iter().filter(|row| &row[0] == "purchase").map(|row| &row[3]).collect();
    assert_eq!(bought, ["MV25", "QA7", "TF10-2K5"]);
}

#[test]
fn flags_ask_the_same_as_a_file() {
    let bench = Bench::new();
    let flags = [
        "choose",
        "--current",
        "1mA",
        "--accuracy",
        "0.2%",
        "--supply",
        "14V..16V",
        "--negative-rail",
        "-5V",
        "--ambient",
        "15degC..35degC",
        "--load",
        "0V..1V",
        "--quantity",
        "10",
        "--currency",
        "EUR",
        "--name",
        "bench",
        "--format",
        "csv",
    ];
    let by_flags = bench.run(&flags).exits(0);
    let by_file = bench.run(&["choose", "request.yaml", "--format", "csv"]).exits(0);
    assert_eq!(by_flags.out, by_file.out);
}

#[test]
fn an_output_without_a_design_is_a_result() {
    let bench = Bench::new();
    bench.file("strict.yaml", &REQUEST.replace("0.2 %", "10 ppm"));
    let run = bench.run(&["choose", "strict.yaml"]).exits(1);
    assert!(run.out.starts_with("infeasible: no design passes\n"), "{}", run.out);
    assert!(run.out.contains("would help"), "{}", run.out);
    let run = bench.run(&["choose", "strict.yaml", "--format", "json"]).exits(1);
    let choice: ChoiceJson = serde_json::from_str(&run.out).unwrap();
    assert!(!choice.outputs[0].feasible);
    assert!(choice.outputs[0].reasons.as_ref().unwrap().best_ppm.is_some());
}

#[test]
fn no_common_set_is_a_result() {
    let bench = Bench::new();
    bench.file("few.yaml", &format!("{REQUEST}purchase: {{lines_max: 2}}\n"));
    let run = bench.run(&["choose", "few.yaml", "--format", "json"]).exits(1);
    let choice: ChoiceJson = serde_json::from_str(&run.out).unwrap();
    assert_eq!(choice.status, "infeasible");
    assert!(choice.outputs[0].feasible && choice.outputs[0].design.is_none());
    assert!(choice.total_cost.is_none() && choice.purchase.is_none());
    assert_eq!((choice.reasons[0].allowed, choice.reasons[0].needed), (2, 3));
}

#[test]
fn all_faults_of_catalogue_and_request_come_in_one_run() {
    let bench = Bench::new();
    let faulty = PARTS
        .replace("tempco: 10 ppm/K\ndropout", "tempco: 10 ppm\ndropout")
        .replace("bias: 1 nA", "biass: 1 nA");
    bench.file("parts/all.yaml", &faulty);
    bench.file("parts/broken.yml", "kind: [\n");
    bench.file("faulty.yaml", &REQUEST.replace("current: 1 mA", "current: 1 mV"));
    bench
        .run(&["choose", "faulty.yaml"])
        .refused()
        .says(&["all.yaml:6:9: error: MV25, tempco: ", "all.yaml:19:1: error: QA7", "`biass`"])
        .says(&["broken.yml:", "faulty.yaml:9:28: error: ", "current", "hint: ", "5 errors"]);
}

#[test]
fn bad_records_can_be_left_out_and_the_answer_says_so() {
    let bench = Bench::new();
    let cheaper = "kind: reference\npart: MV26\nprice: 1.00\n";
    bench.file("parts/more.yaml", cheaper);
    bench.run(&["choose", "request.yaml"]).refused().says(&["more.yaml:", "MV26"]);
    let run = bench.run(&["choose", "request.yaml", "--skip-bad-records"]).exits(0);
    let run = run.says(&["1 record left out", "MV26"]);
    assert!(run.out.contains("1 record left out"), "{}", run.out);
    let quiet = bench.run(&["choose", "request.yaml", "--skip-bad-records", "--quiet"]).exits(0);
    assert_eq!(quiet.err, "", "{}", quiet.shown);
    bench.run(&["check"]).refused().says(&["more.yaml:", "1 record has errors"]);
    bench.run(&["check", "--skip-bad-records"]).exits(0);
}

#[test]
fn a_missing_rate_refused() {
    let bench = Bench::new();
    bench.file("parts/all.yaml", &PARTS.replace("price: 0.50", "price: 0.50\ncurrency: USD"));
    bench.run(&["choose", "request.yaml"]).refused().says(&["all.yaml:", "QA7", "USD"]);
}

#[test]
fn check_counts_and_doubts_are_no_failure() {
    let bench = Bench::new();
    let run = bench.run(&["check"]).exits(0);
    assert!(run.out.contains("3 records"), "{}", run.out);
    let run = bench.run(&["check", "--format", "json"]).exits(0);
    let check: CheckJson = serde_json::from_str(&run.out).unwrap();
    let resistors = check.kinds.iter().find(|kind| kind.kind == "resistor").unwrap();
    assert_eq!((check.errors, resistors.types, resistors.offers), (0, 1, 3));
    let run = bench.run(&["check", "--format", "csv"]).exits(0);
    let mut reader = csv::Reader::from_reader(run.out.as_bytes());
    assert!(reader.records().map(Result::unwrap).filter(|row| &row[0] == "kind").count() == 5);
}

#[test]
fn check_with_errors_lists_them_in_the_format_asked_for() {
    let bench = Bench::new();
    bench.file("parts/all.yaml", &PARTS.replace("0.05 %", "0,05 %"));
    let run = bench.run(&["check", "--format", "json"]).refused();
    let check: CheckJson = serde_json::from_str(&run.err).unwrap();
    assert_eq!((check.errors, check.left_out), (2, 2));
    let fault = &check.faults[0];
    assert_eq!((fault.line, fault.column, fault.field.as_deref()), (5, 11, Some("accuracy")));
}

#[test]
fn bad_usage_says_what_to_write() {
    let bench = Bench::new();
    bench.run(&["choose"]).refused().says(&["ampthrift choose REQUEST", "--current 1mA"]);
    bench.run(&["choose", "--current", "1mA"]).refused().says(&["--supply", "--currency"]);
    bench.run(&["choose", "nowhere.yaml"]).refused().says(&["nowhere.yaml"]);
    bench.run(&["choose", "request.yaml", "--current", "1mA"]).refused();
    bench.run(&["choose", "request.yaml", "--threads", "0"]).refused().says(&["--threads"]);
    bench
        .run(&["choose", "request.yaml", "--time-limit", "30"])
        .refused()
        .says(&["--time-limit", "unit"]);
    bench.run(&["chose"]).refused().says(&["choose"]);
    bench.run(&["choose", "request.yaml", "--format", "xml"]).refused().says(&["json"]);
}

#[test]
fn a_missing_catalogue_is_reported_with_the_faults_of_the_request() {
    let bench = Bench::new();
    bench.file("faulty.yaml", &REQUEST.replace("EUR", "[]"));
    fs::remove_dir_all(bench.path().join("parts")).unwrap();
    for skip in [&["choose", "faulty.yaml"][..], &["choose", "faulty.yaml", "--skip-bad-records"]] {
        bench.run(skip).refused().says(&["parts", "faulty.yaml", "currency"]);
    }
}

#[test]
fn help_and_version_are_results() {
    let bench = Bench::new();
    let help = bench.run(&["choose", "--help"]).exits(0);
    for option in ["--catalog", "--format", "--threads", "--time-limit", "--negative-rail"] {
        assert!(help.out.contains(option), "{option}: {}", help.out);
    }
    assert!(bench.run(&["--version"]).exits(0).out.starts_with("ampthrift "));
}

#[test]
fn the_width_follows_the_columns_variable() {
    let bench = Bench::new();
    for width in [50, 80] {
        let mut command = bench.command(&["choose", "request.yaml"]);
        let run = Run::of(command.env("COLUMNS", width.to_string())).exits(0);
        let widest = run.out.lines().map(UnicodeWidthStr::width).max().unwrap();
        assert!(widest <= width, "{width}: {}", run.out);
    }
}

#[test]
fn no_color_leaves_no_escape() {
    let bench = Bench::new();
    let mut command = bench.command(&["choose", "--help"]);
    let run = Run::of(command.env("NO_COLOR", "1").env("TERM", "xterm-256color")).exits(0);
    assert!(!run.out.contains('\u{1b}'));
}

#[test]
fn a_reader_that_goes_away_is_no_failure() {
    let bench = Bench::new();
    // Far more than a pipe holds, so that the writer notices.
    let notes: String = (0..4000).map(|n| format!("    - NOBODY-MAKES-THIS-{n}\n")).collect();
    bench.file("long.yaml", &format!("{REQUEST}rules:\n  forbid:\n{notes}"));
    let mut child = bench
        .command(&["choose", "long.yaml", "--quiet"])
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    let mut first = String::new();
    BufReader::with_capacity(16, child.stdout.take().unwrap()).read_line(&mut first).unwrap();
    assert!(first.starts_with("optimal: "), "{first}");
    let mut err = String::new();
    child.stderr.take().unwrap().read_to_string(&mut err).unwrap();
    assert_eq!(child.wait().unwrap().code(), Some(0), "{err}");
    assert_eq!(err, "");
}

#[test]
#[cfg(target_os = "linux")]
fn a_full_disk_is_an_error() {
    let bench = Bench::new();
    let full = fs::OpenOptions::new().write(true).open("/dev/full").unwrap();
    let run = Run::of(bench.command(&["choose", "request.yaml", "--quiet"]).stdout(full)).exits(3);
    run.says(&["the result cannot be written"]);
}

#[test]
fn the_answer_does_not_depend_on_threads() {
    let bench = Bench::new();
    let of = |threads| {
        let arguments = ["choose", "request.yaml", "--format", "json", "--threads", threads];
        bench.run(&arguments).exits(0).out
    };
    assert_eq!(of("1"), of("4"));
}
