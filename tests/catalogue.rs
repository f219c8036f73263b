//! A catalogue's folder read as a whole: what is taken, and every fault with its exact place.

use std::fs;
use std::path::Path;

use ampthrift::catalog::{Catalog, Fault, Loaded, Severity, Values, load};
use ampthrift::quantity::{Decimal, Money, to_letter_code};
use proptest::prelude::*;
use tempfile::TempDir;

/// A folder with these files.
fn folder(files: &[(&str, &[u8])]) -> TempDir {
    let folder = TempDir::new().expect("a folder for the test");
    for (name, bytes) in files {
        let path = folder.path().join(name);
        fs::create_dir_all(path.parent().expect("a parent")).expect("a folder");
        fs::write(path, bytes).expect("a file");
    }
    folder
}

fn loaded(text: &str) -> Loaded {
    load(folder(&[("a.yaml", text.as_bytes())]).path())
}

/// `file:line:column|record|field|message`, the file by its name.
fn told(fault: &Fault) -> String {
    format!(
        "{}:{}:{}|{}|{}|{}",
        fault.place.file.file_name().unwrap_or_default().display(),
        fault.place.line,
        fault.place.column,
        fault.record.as_deref().unwrap_or_default(),
        fault.field.as_deref().unwrap_or_default(),
        fault.message
    )
}

fn errors(loaded: &Loaded) -> Vec<String> {
    loaded.errors().map(told).collect()
}

fn doubts(text: &str) -> Vec<String> {
    let loaded = loaded(text);
    assert_eq!(errors(&loaded), [""; 0], "{text}");
    loaded.doubts().filter(|doubt| !doubt.message.starts_with("not stated")).map(told).collect()
}

const REFERENCE: &str = "\
kind: reference
part: REF1
source: test
price: 1
output: 2.5 V
accuracy: 0.1 %
tempco: 10 ppm/K
dropout: 0.3 V
supply_max: 18 V
source_max: 10 mA
quiescent: 1 mA
";

const AMPLIFIER: &str = "\
kind: amplifier
part: AMP1
source: test
price: 1
offset: 1 mV
bias: 1 nA
bias_over_range: 2 nA
swing_low: 0.1 V
swing_high: 1 V
input_low: -0.1 V
input_high: 1 V
supply: [3 V, 32 V]
sink_max: 5 mA
";

const RESISTOR: &str = "\
kind: resistor
part: RES1
source: test
price: 0.1
tolerance: 1 %
tempco: 50 ppm/K
power: 0.25 W
values: {list: [1 kohm, 2 kohm]}
";

const LIFT: &str = "\
kind: lift
part: LIFT1
source: test
price: 0.1
drop: [[1 uA, 0.25 V], [1 mA, 0.48 V]]
current_max: 10 mA
";

const ADJUSTMENT: &str = "\
kind: adjustment
part: ADJ1
source: test
price: 2
residual: 50 ppm
range: 1 %
";

/// A record with one line put in the place of the line of that field, or added at its end.
fn with(record: &str, line: &str) -> String {
    let name = line.split(':').next().unwrap_or_default();
    let mut lines: Vec<&str> = record.lines().collect();
    match lines.iter().position(|old| old.split(':').next() == Some(name)) {
        Some(at) => lines[at] = line,
        None => lines.push(line),
    }
    lines.join("\n") + "\n"
}

fn without(record: &str, name: &str) -> String {
    record
        .lines()
        .filter(|line| line.split(':').next() != Some(name))
        .fold(String::new(), |text, line| text + line + "\n")
}

#[test]
fn the_demo_catalogue_is_sound() {
    let loaded = load(Path::new("catalog/parts"));
    assert_eq!(errors(&loaded), [""; 0]);
    assert!(loaded.catalog.resistors.len() > 3);
    assert!(loaded.left_out.is_empty());
}

#[test]
fn minimal_records_are_read_without_doubts() {
    for record in [REFERENCE, AMPLIFIER, RESISTOR, LIFT, ADJUSTMENT] {
        assert_eq!(doubts(record), [""; 0]);
        assert_eq!(loaded(record).records, 1);
    }
}

/// One wrong line in a sound record: place, field, message.
#[test]
fn each_fault_is_told_with_its_place() {
    let cases: &[(&str, &str, &str)] = &[
        // Names and words.
        (REFERENCE, "tempko: 10 ppm/K", "12:1|REF1|tempko|unknown field `tempko`"),
        (REFERENCE, "grade: A", "12:1|REF1|grade|unknown field `grade`"),
        (REFERENCE, "kind: refrence", "1:7|REF1|kind|`refrence` is no kind of record"),
        (REFERENCE, "kind: request", "1:7|REF1|kind|`request` is no kind of record"),
        (REFERENCE, "kind: [reference]", "1:7|REF1|kind|a list where a word is wanted"),
        (
            REFERENCE,
            "lifecycle: last buy",
            "12:12|REF1|lifecycle|`last buy` is not one of `active`, `preview`, `last-buy`, `obsolete`",
        ),
        (
            REFERENCE,
            "tempco_method: Box",
            "12:16|REF1|tempco_method|`Box` is not one of `slope`, `box`, `butterfly`",
        ),
        // Empty values and wrong shapes.
        (REFERENCE, "dropout:", "8:1|REF1|dropout|an empty value"),
        (REFERENCE, "dropout: ~", "8:10|REF1|dropout|an empty value"),
        (REFERENCE, "maker: ''", "12:1|REF1|maker|an empty text"),
        (REFERENCE, "part: null", "2:7|document 1|part|an empty value"),
        (REFERENCE, "dropout: [0.3 V]", "8:10|REF1|dropout|a list where a voltage is wanted"),
        (REFERENCE, "dropout: {v: 1}", "8:10|REF1|dropout|a mapping where a voltage is wanted"),
        (REFERENCE, "maker: [a]", "12:8|REF1|maker|a list where a text is wanted"),
        // Figures.
        (REFERENCE, "dropout: 0.3", "8:10|REF1|dropout|`0.3` has no unit"),
        (
            REFERENCE,
            "dropout: 0.3 A",
            "8:10|REF1|dropout|`0.3 A` is a current, and a voltage is wanted",
        ),
        (
            REFERENCE,
            "accuracy: 1 V",
            "6:11|REF1|accuracy|`1 V` is a voltage, and a ratio is wanted",
        ),
        // Ranges.
        (
            REFERENCE,
            "temperature: 25 degC",
            "12:14|REF1|temperature|one figure `25 degC` where a range is wanted",
        ),
        (
            REFERENCE,
            "temperature: [1 degC, 2 degC, 3 degC]",
            "12:14|REF1|temperature|a list of 3 where a range is wanted",
        ),
        (
            REFERENCE,
            "temperature: [85 degC, -40 degC]",
            "12:14|REF1|temperature|the low end is above the high end",
        ),
        (
            REFERENCE,
            "temperature: [-300 degC, 85 degC]",
            "12:15|REF1|temperature[0]|`-300 degC` is below absolute zero",
        ),
        (AMPLIFIER, "supply: [32 V, 3 V]", "12:9|AMP1|supply|the low end is above the high end"),
        (AMPLIFIER, "supply: []", "12:1|AMP1|supply|an empty list"),
        // Counts and dates.
        (REFERENCE, "stock: -1", "12:8|REF1|stock|`-1` is not a whole number"),
        (REFERENCE, "stock: 1.5", "12:8|REF1|stock|`1.5` is not a whole number"),
        (REFERENCE, "order_minimum: 0", "12:16|REF1|order_minimum|`0` is out of range"),
        (REFERENCE, "order_multiple: 0", "12:17|REF1|order_multiple|`0` is out of range"),
        (REFERENCE, "updated: 4.3.2025", "12:10|REF1|updated|`4.3.2025` is not a date"),
        (REFERENCE, "updated: 2025-02-30", "12:10|REF1|updated|`2025-02-30` is not a date"),
        (
            REFERENCE,
            "updated: 2025-02-03T10:00:00",
            "12:10|REF1|updated|`2025-02-03T10:00:00` is not a date",
        ),
        // Prices.
        (REFERENCE, "price: -1", "4:8|REF1|price|`-1` is below zero"),
        (REFERENCE, "price: []", "4:1|REF1|price|an empty list"),
        (REFERENCE, "price: [1]", "4:9|REF1|price[0]|`1` where a price break is wanted"),
        (
            REFERENCE,
            "price: [{from: 10, each: 1}]",
            "4:16|REF1|price[0].from|the first `from` is not 1",
        ),
        (
            REFERENCE,
            "price: [{from: 1, each: 2}, {from: 1, each: 1}]",
            "4:36|REF1|price[1].from|`from` does not rise",
        ),
        (REFERENCE, "price: [{from: 1}]", "4:9|REF1|price[0].each|`each` is missing"),
        (
            REFERENCE,
            "price: [{from: 1, each: 2, per: 3}]",
            "4:28|REF1|price[0].per|unknown field `per`",
        ),
        (
            REFERENCE,
            "price: [{from: 1, from: 1, each: 2}]",
            "4:19|REF1|price[0].from|`from` stands twice",
        ),
        // Relations.
        (
            AMPLIFIER,
            "bias_over_range: 0.5 nA",
            "7:18|AMP1|bias_over_range|`bias_over_range` is below `bias`",
        ),
        // Resistor values.
        (RESISTOR, "values: 1 kohm", "8:9|RES1|values|`1 kohm` where a mapping is wanted"),
        (RESISTOR, "values: {list: []}", "8:10|RES1|values.list|an empty list"),
        (RESISTOR, "values: {lst: [1 kohm]}", "8:10|RES1|values.lst|unknown field `lst`"),
        (
            RESISTOR,
            "values: {list: [1 kohm, 1000 ohm]}",
            "8:25|RES1|values.list[1]|`1000 ohm` stands twice",
        ),
        (
            RESISTOR,
            "values: {list: [1 kohm], any: [1 ohm, 2 ohm]}",
            "8:9|RES1|values|more than one of `series`, `list`, `any`",
        ),
        (
            RESISTOR,
            "values: {series: E95, from: 1 ohm, to: 10 ohm}",
            "8:18|RES1|values.series|`E95` is not a series of IEC 60063",
        ),
        (
            RESISTOR,
            "values: {series: E24, from: 10 ohm, to: 1 ohm}",
            "8:29|RES1|values|the low end is above the high end",
        ),
        (
            RESISTOR,
            "values: {series: E3, from: 1.1 ohm, to: 2 ohm}",
            "8:28|RES1|values|no value of E3 lies between the ends",
        ),
        (RESISTOR, "values: {series: E24, from: 1 ohm}", "8:9|RES1|values.to|`to` is missing"),
        (RESISTOR, "values: {any: [1 ohm, 2 ohm]}", "8:9|RES1|values.digits|`digits` is missing"),
        (
            RESISTOR,
            "values: {any: [1 ohm, 2 ohm], digits: 10}",
            "8:39|RES1|values.digits|`10` is out of range",
        ),
        (
            RESISTOR,
            "values: {any: [2 ohm, 1 ohm], digits: 4}",
            "8:15|RES1|values.any|the low end is above the high end",
        ),
        (
            RESISTOR,
            "order_code: RES1",
            "9:13|RES1|order_code|no `{value}` in the order code of several values",
        ),
        (
            RESISTOR,
            "order_code: 'RES1-{grade}-{value}'",
            "9:13|RES1|order_code|`{grade}` in a record without grades",
        ),
        (
            REFERENCE,
            "order_code: 'R{value}'",
            "12:13|REF1|order_code|`{value}` in a record that has no values",
        ),
        (
            RESISTOR,
            "order_code: 'R{val}{value}'",
            "9:13|RES1|order_code|unknown braces in an order code",
        ),
        // Lift.
        (LIFT, "drop: 0.6 V", "5:7|LIFT1|drop|`0.6 V` where a list is wanted"),
        (
            LIFT,
            "drop: [[1 uA]]",
            "5:8|LIFT1|drop[0]|a list where a pair of current and drop is wanted",
        ),
        (
            LIFT,
            "drop: [[1 mA, 0.5 V], [1 mA, 0.6 V]]",
            "5:24|LIFT1|drop[1][0]|the current `1 mA` does not rise",
        ),
        (
            LIFT,
            "drop: [[1 uA, 0.5 V], [1 mA, 0.5 V]]",
            "5:30|LIFT1|drop[1][1]|the drop `0.5 V` does not rise",
        ),
        (LIFT, "in_series_max: 0", "7:16|LIFT1|in_series_max|`0` is out of range"),
        // Adjustment.
        (
            ADJUSTMENT,
            "price: [{from: 1, each: 2}]",
            "4:8|ADJ1|price|a list where one price is wanted",
        ),
        (ADJUSTMENT, "stock: 5", "7:1|ADJ1|stock|unknown field `stock`"),
        (ADJUSTMENT, "maker: me", "7:1|ADJ1|maker|unknown field `maker`"),
        // Grades.
        (REFERENCE, "grades: A", "12:9|REF1|grades|`A` where a list is wanted"),
        (REFERENCE, "grades: []", "12:1|REF1|grades|an empty list"),
        (REFERENCE, "grades: [A]", "12:10|REF1|grades[0]|`A` where a grade is wanted"),
        (REFERENCE, "grades: [{price: 1}]", "12:10|REF1|grades[0].grade|`grade` is missing"),
        (
            REFERENCE,
            "grades: [{grade: A}, {grade: A}]",
            "12:22|REF1|grades[1].grade|the grade `A` stands twice",
        ),
        (
            REFERENCE,
            "grades: [{grade: A, part: X}]",
            "12:21|REF1 grade A|grades[0].part|`part` in a grade",
        ),
        (
            REFERENCE,
            "grades: [{grade: A, grades: []}]",
            "12:21|REF1 grade A|grades[0].grades|`grades` in a grade",
        ),
        (
            REFERENCE,
            "grades: [{grade: A, tempco: 5 ppm}]",
            "12:29|REF1 grade A|grades[0].tempco|`5 ppm` is a ratio, and a ratio per kelvin is wanted",
        ),
        (
            REFERENCE,
            "grades: [{grade: A, tempcos: 5 ppm}]",
            "12:21|REF1 grade A|grades[0].tempcos|unknown field `tempcos`",
        ),
        (
            AMPLIFIER,
            "grades: [{grade: A, bias: 1 pA}, {grade: B, bias: 3 nA}]",
            "14:51|AMP1 grade B|grades[1].bias|`bias_over_range` is below `bias`",
        ),
        // YAML.
        (REFERENCE, "maker: !x y", "12:8|document 1||a tag (!x)"),
        (REFERENCE, "<<: {a: b}", "12:1|document 1||a merge key"),
    ];
    let mut wrong = Vec::new();
    for (record, line, expected) in cases {
        let loaded = loaded(&with(record, line));
        let told = errors(&loaded);
        if told != [format!("a.yaml:{expected}")] {
            wrong.push(format!("{line}: {told:?}, not {expected}\n"));
        }
        assert!(loaded.errors().all(|fault| fault.hint.is_some()), "{line}");
        assert_eq!(loaded.catalog, Catalog::default(), "{line}");
        assert_eq!(loaded.left_out.len(), 1, "{line}");
    }
    assert!(wrong.is_empty(), "{}", wrong.concat());
}

#[test]
fn the_nearest_known_name_is_told() {
    let hint = |text: &str| {
        loaded(text).errors().next().and_then(|fault| fault.hint.clone()).expect("a hint")
    };
    assert!(hint(&with(RESISTOR, "tolerence: 1 %")).contains("`tolerance`"));
    assert!(hint(&with(REFERENCE, "kind: amplifer")).contains("`amplifier`"));
    assert!(hint(&with(REFERENCE, "lifecycle: actve")).contains("`active`"));
    assert!(hint(&with(ADJUSTMENT, "stock: 5")).contains("not an ordered part"));
    assert!(hint(&with(RESISTOR, "order_code: X")).contains("same code"));
}

#[test]
fn signs_that_make_no_sense_are_errors_and_both_sided_figures_take_the_sign() {
    for (record, line) in [
        (REFERENCE, "accuracy: -0.1 %"),
        (REFERENCE, "output: -2.5 V"),
        (REFERENCE, "output: 0 V"),
        (REFERENCE, "quiescent: -1 mA"),
        (REFERENCE, "output: ±2.5 V"),
        (REFERENCE, "drift_hours: 0 h"),
        (AMPLIFIER, "cmrr: -100 dB"),
        (AMPLIFIER, "bias_doubling: 0 K"),
        (AMPLIFIER, "swing_low: -0.1 V"),
        (RESISTOR, "tempco: -5 ppm/K"),
        (RESISTOR, "values: {list: [0 ohm]}"),
        (LIFT, "drop: [[-1 mA, 0.6 V]]"),
        (ADJUSTMENT, "residual: -1 ppm"),
    ] {
        assert_eq!(loaded(&with(record, line)).errors().count(), 1, "{line}");
    }
    for (record, line) in [
        (REFERENCE, "accuracy: ±0.1 %"),
        (REFERENCE, "tempco: ±5 ppm/K"),
        (REFERENCE, "hysteresis: ± 20 ppm"),
        (AMPLIFIER, "offset: ±1 mV"),
        (AMPLIFIER, "bias: ±1 nA"),
        (AMPLIFIER, "input_high: -0.2 V"),
        (AMPLIFIER, "input_low: 0 V"),
        (RESISTOR, "tempco: ±5 ppm/K"),
        (LIFT, "drop_tempco: -1.8 mV/K"),
        (LIFT, "drop_tempco: \u{2212}1.8 mV/K"),
        (LIFT, "drop_spread: ±20 mV"),
    ] {
        assert_eq!(errors(&loaded(&with(record, line))), [""; 0], "{line}");
    }
}

#[test]
fn every_required_field_is_missed_at_the_start_of_the_record() {
    for (record, part) in [
        (REFERENCE, "REF1"),
        (AMPLIFIER, "AMP1"),
        (RESISTOR, "RES1"),
        (LIFT, "LIFT1"),
        (ADJUSTMENT, "ADJ1"),
    ] {
        for line in record.lines() {
            let name = line.split(':').next().expect("a name");
            if name == "source" || name == "bias_over_range" {
                continue;
            }
            let text = format!("---\n{}", without(record, name));
            let part = if name == "part" { "document 1" } else { part };
            let expected = format!("a.yaml:2:1|{part}|{name}|`{name}` is missing");
            assert_eq!(errors(&loaded(&text)), [expected]);
        }
    }
}

#[test]
fn a_duplicate_field_is_told_at_its_second_place() {
    let text = format!("{REFERENCE}output: 5 V\n");
    assert_eq!(errors(&loaded(&text)), ["a.yaml:12:1|REF1|output|`output` stands twice"]);
    let text = with(REFERENCE, "grades: [{grade: A, grade: B}]");
    let expected = "a.yaml:12:21|REF1 grade A|grades[0].grade|`grade` stands twice";
    assert_eq!(errors(&loaded(&text)), [expected]);
}

#[test]
fn all_faults_of_all_files_are_told_in_one_run_in_order() {
    let many =
        "kind: reference\npart: X\noutput: 5\naccuracy: 1 V\ntempco: ~\nfoo: 1\nprice: free\n";
    let broken = format!("{REFERENCE}---\nkind: [\n---\n{}", with(LIFT, "current_max: 1 V"));
    let folder = folder(&[
        ("b/deep/two.yml", broken.as_bytes()),
        ("a.yaml", many.as_bytes()),
        ("c.yaml", b"kind: lift\n\xff\n"),
        ("notes.txt", b"not: [read"),
        (".hidden.yaml", b"not: [read"),
        (".hidden/a.yaml", b"not: [read"),
        ("empty.yaml", b"# nothing\n---\n---\n"),
    ]);
    let loaded = load(folder.path());
    let told = errors(&loaded);
    let starts: Vec<String> =
        told.iter().map(|line| line.splitn(4, '|').take(3).collect::<Vec<_>>().join("|")).collect();
    assert_eq!(
        starts,
        [
            "a.yaml:1:1|X|dropout",
            "a.yaml:1:1|X|quiescent",
            "a.yaml:1:1|X|source_max",
            "a.yaml:1:1|X|supply_max",
            "a.yaml:3:9|X|output",
            "a.yaml:4:11|X|accuracy",
            "a.yaml:5:9|X|tempco",
            "a.yaml:6:1|X|foo",
            "a.yaml:7:8|X|price",
            "two.yml:14:1|document 2|",
            "two.yml:20:14|LIFT1|current_max",
            "c.yaml:2:1||",
        ]
    );
    assert_eq!((loaded.files, loaded.records), (4, 4));
    assert_eq!(loaded.catalog.references.len(), 1, "a broken document costs only itself");
    assert!(loaded.catalog.lifts.is_empty());
    let lines: Vec<(&str, usize)> =
        loaded.left_out.iter().map(|(name, place)| (name.as_str(), place.line)).collect();
    assert_eq!(lines, [("X", 1), ("document 2", 12), ("LIFT1", 15)]);
}

#[test]
fn byte_order_marks_and_every_line_ending_are_read() {
    for text in [
        format!("\u{feff}{REFERENCE}"),
        REFERENCE.replace('\n', "\r\n"),
        format!("%YAML 1.2\n---\n{REFERENCE}...\n"),
        format!("--- # first\n{REFERENCE}"),
    ] {
        let loaded = loaded(&text);
        assert_eq!(errors(&loaded), [""; 0], "{text}");
        assert_eq!(loaded.catalog.references.len(), 1);
    }
    let marked = format!("\u{feff}{}", with(REFERENCE, "kind: x").replace('\n', "\r\n"));
    assert_eq!(errors(&loaded(&marked)), ["a.yaml:1:7|REF1|kind|`x` is no kind of record"]);
}

#[test]
fn a_missing_folder_is_an_error_and_an_empty_one_a_doubt() {
    let folder = folder(&[]);
    let missing = load(&folder.path().join("nowhere"));
    assert_eq!(missing.errors().count(), 1);
    let empty = load(folder.path());
    assert_eq!((empty.errors().count(), empty.doubts().count()), (0, 1));
}

#[cfg(unix)]
#[test]
fn links_to_files_are_followed_and_to_folders_not() {
    use std::os::unix::fs::symlink;
    let elsewhere = folder(&[("real.txt", REFERENCE.as_bytes()), ("sub/b.yaml", LIFT.as_bytes())]);
    let folder = folder(&[]);
    symlink(elsewhere.path().join("real.txt"), folder.path().join("linked.yaml")).expect("a link");
    symlink(elsewhere.path().join("sub"), folder.path().join("sub")).expect("a link");
    symlink(elsewhere.path().join("sub"), folder.path().join("sub.yaml")).expect("a link");
    let found = load(folder.path());
    assert_eq!(errors(&found), [""; 0]);
    assert_eq!((found.catalog.references.len(), found.catalog.lifts.len()), (1, 0));
    symlink("nowhere", folder.path().join("gone.yaml")).expect("a link");
    symlink("loop.yaml", folder.path().join("loop.yaml")).expect("a link");
    symlink("nowhere", folder.path().join("gone.txt")).expect("a link");
    let told = errors(&load(folder.path()));
    assert_eq!(told.len(), 2, "{told:?}");
    assert!(told.iter().all(|line| line.contains("a link that leads nowhere")));
}

#[test]
fn grades_lay_their_fields_over_the_record() {
    let text = with(
        &without(&without(REFERENCE, "tempco"), "price"),
        "grades: [{grade: 1, tempco: 5 ppm/K, price: 2, package: DIP}, {grade: 02, tempco: 9 ppm/K, price: 1.5}]",
    );
    let loaded = loaded(&with(&text, "package: SO-8"));
    assert_eq!(errors(&loaded), [""; 0]);
    let found: Vec<_> = loaded
        .catalog
        .references
        .iter()
        .map(|part| {
            let price = part.supply.price.breaks()[0].each;
            let package = part.supply.package.as_deref().unwrap_or_default();
            (part.order_code.as_str(), part.tempco.value(), price.micros(), package)
        })
        .collect();
    assert_eq!(found, [("REF1-1", 5.0, 2_000_000, "DIP"), ("REF1-02", 9.0, 1_500_000, "SO-8")]);
    assert_eq!(loaded.catalog.references[1].supply.grade.as_deref(), Some("02"));
}

#[test]
fn a_shared_fault_is_told_once_and_a_missing_field_where_it_is_missing() {
    let grades = "grades: [{grade: A, price: 1}, {grade: B}]";
    let shared = with(&with(&without(REFERENCE, "price"), "dropout: 1 A"), grades);
    assert_eq!(
        errors(&loaded(&shared)),
        [
            "a.yaml:7:10|REF1|dropout|`1 A` is a current, and a voltage is wanted",
            "a.yaml:11:32|REF1 grade B|grades[1].price|`price` is missing",
        ]
    );
    let nowhere = with(&without(REFERENCE, "price"), "grades: [{grade: A}, {grade: B}]");
    assert_eq!(errors(&loaded(&nowhere)), ["a.yaml:1:1|REF1|price|`price` is missing"]);
    let relation =
        with(&with(AMPLIFIER, "bias_over_range: 0.1 nA"), "grades: [{grade: A}, {grade: B}]");
    let expected = "a.yaml:7:18|AMP1|bias_over_range|`bias_over_range` is below `bias`";
    assert_eq!(errors(&loaded(&relation)), [expected]);
}

#[test]
fn a_fault_in_one_grade_leaves_out_the_whole_record() {
    let text = with(REFERENCE, "grades: [{grade: A}, {grade: B, tempco: 5}]");
    let loaded = loaded(&text);
    assert_eq!(loaded.errors().count(), 1);
    assert!(loaded.catalog.references.is_empty());
    assert_eq!(loaded.left_out.len(), 1);
}

#[test]
fn defaults_are_those_of_the_tables() {
    let loaded = loaded(&[REFERENCE, AMPLIFIER, RESISTOR, LIFT, ADJUSTMENT].join("---\n"));
    let part = &loaded.catalog.references[0];
    assert_eq!(part.supply.temperature.low().value(), -40.0);
    assert_eq!(part.supply.temperature.high().value(), 85.0);
    assert_eq!(part.tempco_over, part.supply.temperature);
    assert_eq!(part.drift.over.value(), 3.6e6);
    assert_eq!(part.load_tested_at.value(), 0.0);
    assert_eq!((part.supply.order_minimum, part.supply.order_multiple), (1, 1));
    assert_eq!(part.supply.lifecycle.word(), "active");
    assert_eq!((part.tempco_method.word(), part.drift.law.word()), ("slope", "sqrt"));
    let lift = &loaded.catalog.lifts[0];
    assert_eq!((lift.drop_tempco.value(), lift.drop_spread.value()), (-2e-3, 0.0));
    assert_eq!(lift.in_series_max, 4);
    assert_eq!(loaded.catalog.adjustments[0].tempco.value(), 0.0);
    assert_eq!(loaded.catalog.amplifiers[0].cmrr, None);
    let narrow = load(
        folder(&[("a.yaml", with(REFERENCE, "temperature: [0 degC, 70 degC]").as_bytes())]).path(),
    );
    assert_eq!(narrow.catalog.references[0].tempco_over.high().value(), 70.0);
}

#[test]
fn every_optional_field_reaches_its_place() {
    let text = [
        REFERENCE,
        "load_regulation: 8 ppm/mA\nload_tested_at: 1 mA\nline_regulation: 3 ppm/V\n\
         line_tested_at: 5 V\ndrift: 20 ppm\ndrift_hours: 2 h\ndrift_law: linear\n\
         hysteresis: 30 ppm\nassembly_shift: 40 ppm\nthermal: 200 K/W\nnoise: 5 uV\n\
         bypass: 100 nF\ntempco_method: box\ntempco_over: [0 degC, 70 degC]\nmaker: M\n\
         updated: 2025-03-04\npackage: P\nlead_time: 2 wk\nstock: 7\ncurrency: USD\n\
         lifecycle: preview\norder_minimum: 5\norder_multiple: 3\norder_code: 0012\n\
         temperature: [-55 degC, 125 degC]\n---\n",
        AMPLIFIER,
        "offset_drift: 1 uV/K\nbias_doubling: 10 K\nbias_drift: 2 pA/K\ncmrr: 90 dB\npsrr: 91 dB\n\
         open_loop_gain: 110 dB\ntested_supply: 10 V\ntested_common_mode: 5 V\nnoise: 1 uV\n\
         current_noise: 3 pA\nquiescent: 0.4 mA\ncapacitive_load: 100 pF\n---\n",
        RESISTOR,
        "thermal: 250 K/W\nstability: 0.1 %\nstability_hours: 2000 h\nstability_law: linear\n\
         voltage_coefficient: 1 ppm/V\nvoltage_max: 75 V\nassembly_shift: 0.05 %\n",
    ]
    .concat();
    let Loaded { catalog, faults, .. } = loaded(&text);
    assert!(faults.iter().all(|fault| fault.severity == Severity::Doubt), "{faults:?}");
    let r = &catalog.references[0];
    assert_eq!(r.load_regulation.map(|x| x.value()), Some(8000.0));
    assert_eq!(r.load_tested_at.value(), 1e-3);
    assert_eq!(r.line_regulation.map(|x| x.value()), Some(3.0));
    assert_eq!(r.line_tested_at.map(|x| x.value()), Some(5.0));
    assert_eq!((r.drift.error.map(|x| x.value()), r.drift.over.value()), (Some(20.0), 7200.0));
    assert_eq!((r.drift.law.word(), r.tempco_method.word()), ("linear", "box"));
    assert_eq!(r.hysteresis.map(|x| x.value()), Some(30.0));
    assert_eq!(r.assembly_shift.map(|x| x.value()), Some(40.0));
    assert_eq!(r.thermal.map(|x| x.value()), Some(200.0));
    assert_eq!(r.noise.map(|x| x.value()), Some(5e-6));
    assert_eq!(r.bypass.map(|x| x.value()), Some(1e-7));
    assert_eq!(r.tempco_over.high().value(), 70.0);
    let s = &r.supply;
    assert_eq!((s.maker.as_deref(), s.package.as_deref()), (Some("M"), Some("P")));
    assert_eq!(s.updated.map(|date| date.to_string()).as_deref(), Some("2025-03-04"));
    assert_eq!((s.lead_time.map(|x| x.value()), s.stock), (Some(1_209_600.0), Some(7)));
    assert_eq!((s.currency.as_deref(), s.lifecycle.word()), (Some("USD"), "preview"));
    assert_eq!((s.order_minimum, s.order_multiple), (5, 3));
    assert_eq!(r.order_code, "0012");
    assert_eq!(s.temperature.low().value(), -55.0);
    let a = &catalog.amplifiers[0];
    assert_eq!(a.offset_drift.map(|x| x.value()), Some(1e-6));
    assert_eq!(a.bias_doubling.map(|x| x.value()), Some(10.0));
    assert_eq!(a.bias_drift.map(|x| x.value()), Some(2e-12));
    assert_eq!(a.bias_over_range.map(|x| x.value()), Some(2e-9));
    assert_eq!(a.cmrr.map(|x| x.value()), Some(90.0));
    assert_eq!(a.psrr.map(|x| x.value()), Some(91.0));
    assert_eq!(a.open_loop_gain.map(|x| x.value()), Some(110.0));
    assert_eq!(a.tested_supply.map(|x| x.value()), Some(10.0));
    assert_eq!(a.tested_common_mode.map(|x| x.value()), Some(5.0));
    assert_eq!(a.noise.map(|x| x.value()), Some(1e-6));
    assert_eq!(a.current_noise.map(|x| x.value()), Some(3e-12));
    assert_eq!(a.quiescent.map(|x| x.value()), Some(0.4e-3));
    assert_eq!(a.capacitive_load.map(|x| x.value()), Some(1e-10));
    assert_eq!((a.total_supply.low().value(), a.total_supply.high().value()), (3.0, 32.0));
    assert_eq!((a.swing_low.value(), a.swing_high.value()), (0.1, 1.0));
    assert_eq!((a.input_low.value(), a.input_high.value()), (-0.1, 1.0));
    let t = &catalog.resistors[0];
    assert_eq!(t.thermal.map(|x| x.value()), Some(250.0));
    assert_eq!(t.stability.error.map(|x| x.value()), Some(1000.0));
    assert_eq!((t.stability.over.value(), t.stability.law.word()), (7.2e6, "linear"));
    assert_eq!(t.voltage_coefficient.map(|x| x.value()), Some(1.0));
    assert_eq!(t.voltage_max.map(|x| x.value()), Some(75.0));
    assert_eq!(t.assembly_shift.map(|x| x.value()), Some(500.0));
}

fn listed(catalog: &Catalog) -> Vec<(String, f64)> {
    let of = |values: &Values| match values {
        Values::Listed(values) => values.clone(),
        Values::MadeToOrder { .. } => Vec::new(),
    };
    catalog
        .resistors
        .iter()
        .flat_map(|part| of(&part.values))
        .map(|value| (value.order_code, value.ohms.value().value()))
        .collect()
}

#[test]
fn resistor_values_are_expanded_with_their_codes() {
    let series = loaded(&with(RESISTOR, "values: {series: E3, from: 1 kohm, to: 1e4 ohm}"));
    let codes: Vec<(String, f64)> = [("1K0", 1e3), ("2K2", 2.2e3), ("4K7", 4.7e3), ("10K", 1e4)]
        .map(|(code, ohms)| (format!("RES1-{code}"), ohms))
        .to_vec();
    assert_eq!(listed(&series.catalog), codes);
    let graded = with(RESISTOR, "grades: [{grade: F, values: {list: [R10, 4k99, 10R]}}]");
    let codes: Vec<String> =
        listed(&loaded(&graded).catalog).into_iter().map(|(code, _)| code).collect();
    assert_eq!(codes, ["RES1-F-R10", "RES1-F-10R", "RES1-F-4K99"]);
    let stated = with(&graded, "order_code: 'x/{value}/{grade}'");
    assert_eq!(listed(&loaded(&stated).catalog)[0].0, "x/R10/F");
    let single = with(&with(RESISTOR, "values: {list: [1 kohm]}"), "order_code: plain");
    assert_eq!(listed(&loaded(&single).catalog), [("plain".to_owned(), 1e3)]);
    let any = loaded(&with(RESISTOR, "values: {any: [10 ohm, 100 kohm], digits: 6}"));
    let part = &any.catalog.resistors[0];
    let Values::MadeToOrder { range, digits } = part.values else { panic!("{part:?}") };
    assert_eq!((range.high(), digits), (Decimal::new(1, 5), 6));
    assert_eq!(part.order_code(Decimal::new(1234, -1)), "RES1-123R4");
    assert_eq!(to_letter_code(range.low()), "10R");
}

#[test]
fn of_offers_with_one_order_code_all_are_left_out() {
    let text = [
        REFERENCE.to_owned(),
        with(LIFT, "order_code: REF1"),
        with(REFERENCE, "part: other"),
        with(&with(REFERENCE, "part: G"), "order_code: GG") + "grades: [{grade: A}, {grade: B}]\n",
    ]
    .join("---\n");
    let loaded = loaded(&text);
    assert_eq!(
        errors(&loaded),
        [
            "a.yaml:1:1|REF1|order_code|the order code `REF1` is also that of line 13",
            "a.yaml:13:1|LIFT1|order_code|the order code `REF1` is also that of line 1",
            "a.yaml:45:10|G grade A|order_code|the order code `GG` is also that of line 45",
            "a.yaml:45:22|G grade B|order_code|the order code `GG` is also that of line 45",
        ]
    );
    let codes: Vec<&str> =
        loaded.catalog.references.iter().map(|part| part.order_code.as_str()).collect();
    assert_eq!(codes, ["other"]);
}

#[test]
fn clashing_resistor_values_go_alone_unless_made_to_order() {
    let one = with(RESISTOR, "values: {list: [1 kohm, 2 kohm]}");
    let other = with(RESISTOR, "values: {list: [2 kohm, 3 kohm]}");
    let found = loaded(&[one.clone(), other].join("---\n"));
    assert_eq!(found.errors().count(), 2);
    let codes: Vec<String> = listed(&found.catalog).into_iter().map(|(code, _)| code).collect();
    assert_eq!(codes, ["RES1-1K0", "RES1-3K0"]);

    let any = with(RESISTOR, "values: {any: [1.5 kohm, 100 kohm], digits: 4}");
    let found = loaded(&[one.clone(), any.clone()].join("---\n"));
    assert_eq!(found.errors().count(), 2);
    assert_eq!(listed(&found.catalog), [("RES1-1K0".to_owned(), 1e3)]);
    assert_eq!(found.catalog.resistors.len(), 1);

    let apart = with(RESISTOR, "values: {any: [2.5 kohm, 100 kohm], digits: 4}");
    assert_eq!(errors(&loaded(&[one, apart.clone()].join("---\n"))), [""; 0]);
    let both = loaded(&[any, apart].join("---\n"));
    assert_eq!((both.errors().count(), both.catalog.resistors.len()), (2, 0));
}

#[test]
fn doubts_are_told_and_stop_nothing() {
    for (record, line, expected) in [
        (
            REFERENCE,
            "price: [{from: 1, each: 1}, {from: 10, each: 2}]",
            "4:8|REF1|price|the price rises at quantity 10",
        ),
        (REFERENCE, "accuracy: 6 %", "6:11|REF1|accuracy|`accuracy` is worse than 5 %"),
        (REFERENCE, "tempco: 0 ppm/K", "7:9|REF1|tempco|`tempco` is zero"),
        (
            REFERENCE,
            "supply_max: 2.6 V",
            "9:13|REF1|supply_max|`supply_max` is below `output` plus `dropout`",
        ),
        (
            REFERENCE,
            "load_tested_at: 1 A",
            "12:17|REF1|load_tested_at|`load_tested_at` is above `source_max`",
        ),
        (
            REFERENCE,
            "tempco_over: [0 degC, 70 degC]",
            "12:14|REF1|tempco_over|`tempco_over` is narrower than `temperature`",
        ),
        (REFERENCE, "drift_hours: 1000 h", "12:14|REF1|drift_hours|`drift_hours` without `drift`"),
        (AMPLIFIER, "cmrr: 20 dB", "14:7|AMP1|cmrr|`cmrr` is outside 40 dB to 200 dB"),
        (
            AMPLIFIER,
            "tested_supply: 36 V",
            "14:16|AMP1|tested_supply|`tested_supply` is outside `supply`",
        ),
        (
            RESISTOR,
            "values: {list: [2 kohm, 1 kohm]}",
            "8:9|RES1|values|the list of values does not rise",
        ),
        (
            LIFT,
            "drop: [[1 uA, 0.5 V], [1 mA, 0.6 V]]",
            "5:7|LIFT1|drop|the drop changes by 33 mV a decade, a junction's by 59 to 118",
        ),
        (
            LIFT,
            "drop_tempco: 2 mV/K",
            "7:14|LIFT1|drop_tempco|`drop_tempco` is outside -5 mV/K to 0",
        ),
        (
            REFERENCE,
            "grades: [{grade: A, price: 1}, {grade: B, tempco: 11 ppm/K, price: 2}]",
            "12:68|REF1 grade B|grades[1].price|dearer than grade A and better in nothing",
        ),
    ] {
        assert_eq!(doubts(&with(record, line)), [format!("a.yaml:{expected}")], "{line}");
    }
    assert_eq!(
        doubts(&without(REFERENCE, "source")),
        ["a.yaml:1:1|REF1|source|`source` is missing"]
    );
    let lawless = "a.yaml:6:7|AMP1|bias|no law for the bias current over temperature";
    assert_eq!(doubts(&without(AMPLIFIER, "bias_over_range")), [lawless]);
    let ranked =
        "grades: [{grade: A, price: 1}, {grade: B, tempco: 9 ppm/K, accuracy: 1 %, price: 2}]";
    assert_eq!(doubts(&with(REFERENCE, ranked)), [""; 0]);
    let unstated: Vec<String> = loaded(RESISTOR).doubts().map(told).collect();
    let list = "thermal, stability, voltage_coefficient, voltage_max, assembly_shift";
    assert_eq!(unstated, [format!("a.yaml:1:1|RES1||not stated: {list}")]);
}

#[test]
fn a_fault_is_one_line_of_text() {
    let loaded = loaded(&with(REFERENCE, "tempko: 1"));
    let text = loaded.faults[0].to_string();
    assert!(
        text.ends_with(
            "a.yaml:12:1: error: REF1, tempko: unknown field `tempko`; the nearest known is `tempco`"
        ),
        "{text}"
    );
}

#[test]
fn prices_are_exact() {
    let loaded =
        loaded(&with(REFERENCE, "price: [{from: 1, each: 4.10}, {from: 10, each: 0.000001}]"));
    let breaks = loaded.catalog.references[0].supply.price.breaks();
    assert_eq!(breaks[0].each, Money::from_micros(4_100_000));
    assert_eq!(breaks[1].each, Money::from_micros(1));
    let many = with(REFERENCE, "price: 0.0000001");
    assert_eq!(load(folder(&[("a.yaml", many.as_bytes())]).path()).errors().count(), 1);
}

#[test]
fn hostile_files_end_in_faults() {
    let deep = "a: ".to_owned() + &"[".repeat(100_000);
    let long = format!("part: {}\n", "x".repeat(1_000_000)) + "kind: reference\n";
    for text in [deep, long, "\u{0}".to_owned(), "kind: reference\n".repeat(20_000)] {
        assert!(loaded(&text).errors().count() > 0);
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(200))]

    /// Any file is read without a panic, and what is said stands within the file.
    #[test]
    fn any_file_is_read_without_a_panic(
        bytes in proptest::collection::vec(any::<u8>(), 0..200)
    ) {
        let folder = folder(&[("a.yaml", &bytes)]);
        let loaded = load(folder.path());
        let lines = bytes.iter().filter(|byte| matches!(**byte, b'\n' | b'\r')).count() + 1;
        prop_assert!(loaded.faults.iter().all(|fault| fault.place.line <= lines));
    }

    /// A sound record with one piece of text put somewhere into it.
    #[test]
    fn a_damaged_record_is_read_without_a_panic(
        record in prop::sample::select(vec![REFERENCE, AMPLIFIER, RESISTOR, LIFT, ADJUSTMENT]),
        at in any::<prop::sample::Index>(),
        piece in "[-\\[\\]{}:,#&*!|>'\"% \n\ta-z0-9Ωµ.~]{1,6}",
    ) {
        let mut text = record.to_owned();
        text.insert_str(at.index(record.len()), &piece);
        let loaded = loaded(&text);
        let sound = loaded.errors().count() == 0;
        let lines = text.matches('\n').count() + 1;
        prop_assert!(loaded.faults.iter().all(|fault| fault.place.line <= lines));
        prop_assert!(sound || !loaded.left_out.is_empty());
    }
}
