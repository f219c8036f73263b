//! One case for each rule of a request, and all faults in one run.

mod flags;
mod outputs;

use std::path::Path;

use super::*;
use crate::catalog::{Fault, Lifecycle};
use crate::quantity::{Celsius, Decimal, Money, Ohms, Ppm, Range, Seconds, Volts};

/// Every field once.
const FULL: &str = "\
kind: request
title: Borehole string, excitation board
currency: EUR
exchange: {USD: 0.92, GBP: 1.17}
budget: {method: gum, coverage: 3}
conditions:
  supply: [14.5 V, 16 V]
  negative_rail: [-5.5 V, -4.5 V]
  ambient: [-20 degC, 50 degC]
  calibrated_at: 23 degC
  calibrated_supply: 15 V
  calibrated_load: 0.1 V
  service: 8760 h
  insulation: 100 Gohm
  guarded: true
  thermal_emf: ±2 uV
  wiring: 20 mohm
  margin: 100 mV
  power_derating: 0.6
  box_reading: guaranteed
  quiescent_max: 5 mA
rules:
  lifecycle: [preview, active]
  lead_time_max: 16 wk
  in_stock: true
  makers: [Erle, 0815]
  packages: [SO-8]
  forbid: [X*]
  require: ['*Y']
  unstated: reject
network_elements: 3
adjustments: false
purchase:
  line_cost: 15.00
  placement_cost: 0.04
  lines_max: 12
outputs:
  - {name: pt100, current: 1 mA, accuracy: 400 ppm, load: [0 ohm, 400 ohm], quantity: 250}
  - name: thermistor
    currents: {mantissas: [5, 1, 2], from: 1 uA, to: 100 uA}
    accuracy: ±0.1 %
    load: [0 V, 0.5 V]
    quantity: 100
";

/// The shortest request.
const SHORT: &str = "\
kind: request
currency: EUR
conditions:
  supply: 15 V
outputs:
  - name: a
    current: 1 mA
    accuracy: 0.1 %
    load: 0.5 V
    quantity: 1
";

fn read_text(text: &str) -> Result<Request, Vec<Fault>> {
    read(Path::new("request.yaml"), text.as_bytes())
}

#[track_caller]
fn good(text: &str) -> Request {
    read_text(text).unwrap_or_else(|faults| panic!("{faults:#?}"))
}

fn names(request: &Request) -> Vec<&str> {
    request.outputs.iter().map(|output| output.name.as_str()).collect()
}

/// `text` with one line (given by its start, behind the indentation) replaced.
#[track_caller]
fn with(text: &str, start: &str, line: &str) -> String {
    assert!(text.lines().any(|old| old.trim_start().starts_with(start)), "no line {start}");
    let mut out = String::new();
    for old in text.lines() {
        let body = old.trim_start();
        if body.starts_with(start) {
            out.push_str(&old[..old.len() - body.len()]);
            out.push_str(line);
        } else {
            out.push_str(old);
        }
        out.push('\n');
    }
    out
}

/// The text has exactly one fault; it stands on the line, in the field, and says this.
#[track_caller]
fn one_fault(text: &str, line: usize, field: &str, message: &str, hint: &str) {
    let faults = read_text(text).expect_err(text);
    let [fault] = faults.as_slice() else { panic!("{text}\n{faults:#?}") };
    assert_eq!(fault.place.line, line, "{fault:#?}");
    assert_eq!(fault.field.as_deref(), Some(field).filter(|f| !f.is_empty()), "{fault:#?}");
    assert_eq!(fault.record.as_deref(), Some("request"));
    assert!(fault.message.contains(message), "{fault:#?}");
    assert!(fault.hint.as_deref().is_some_and(|text| text.contains(hint)), "{fault:#?}");
}

/// The same, for one changed line of the full request.
#[track_caller]
fn bad_line(start: &str, line: &str, field: &str, message: &str, hint: &str) {
    let text = with(FULL, start, line);
    let number = FULL.lines().position(|old| old.trim_start().starts_with(start)).unwrap() + 1;
    one_fault(&text, number, field, message, hint);
}

#[test]
fn every_field_is_read() {
    let request = good(FULL);
    assert_eq!(request.title.as_deref(), Some("Borehole string, excitation board"));
    assert_eq!(request.currency, "EUR");
    assert_eq!(request.exchange["GBP"].0, Decimal::new(117, -2));
    assert_eq!(request.budget, Budget::Gum { coverage: 3.0 });
    let conditions = &request.conditions;
    assert_eq!(Some(conditions.supply), Range::new(Volts::new(14.5), Volts::new(16.0)));
    assert_eq!(Some(conditions.negative_rail), Range::new(Volts::new(-5.5), Volts::new(-4.5)));
    assert_eq!(Some(conditions.ambient), Range::new(Celsius::new(-20.0), Celsius::new(50.0)));
    assert_eq!(conditions.calibrated_at, Celsius::new(23.0));
    assert_eq!(conditions.calibrated_supply, Some(Volts::new(15.0)));
    assert_eq!(conditions.calibrated_load, Some(Load::Voltage(Range::point(Volts::new(0.1)))));
    assert_eq!(conditions.service, Seconds::new(8760.0 * 3600.0));
    assert_eq!(conditions.insulation, Some(Ohms::new(100e9)));
    assert!(conditions.guarded);
    assert_eq!(conditions.thermal_emf, Volts::new(2e-6));
    assert_eq!(conditions.wiring, Ohms::new(0.02));
    assert_eq!(conditions.margin, Volts::new(0.1));
    assert_eq!(conditions.power_derating, 0.6);
    assert_eq!(conditions.box_reading, BoxReading::Guaranteed);
    assert_eq!(conditions.quiescent_max.map(|a| a.value()), Some(5e-3));
    let rules = &request.rules;
    assert_eq!(rules.lifecycle, [Lifecycle::Active, Lifecycle::Preview]);
    assert_eq!(rules.lead_time_max, Some(Seconds::new(16.0 * 604_800.0)));
    assert!(rules.in_stock);
    assert_eq!(rules.makers.as_deref(), Some(&["Erle".to_owned(), "0815".to_owned()][..]));
    assert_eq!(rules.packages.as_deref(), Some(&["SO-8".to_owned()][..]));
    assert_eq!(
        (rules.forbid.as_slice(), rules.require.as_slice()),
        (&["X*".to_owned()][..], &["*Y".to_owned()][..],)
    );
    assert_eq!(rules.unstated, Unstated::Reject);
    assert_eq!(request.network_elements, 3);
    assert!(!request.adjustments);
    assert_eq!(request.purchase.line_cost, Money::from_micros(15_000_000));
    assert_eq!(request.purchase.placement_cost, Money::from_micros(40_000));
    assert_eq!(request.purchase.lines_max, Some(12));
    assert_eq!(
        names(&request),
        [
            "pt100",
            "thermistor@1uA",
            "thermistor@2uA",
            "thermistor@5uA",
            "thermistor@10uA",
            "thermistor@20uA",
            "thermistor@50uA",
            "thermistor@100uA",
        ]
    );
    let last = &request.outputs[7];
    assert_eq!(last.current.decimal(), Decimal::new(1, -4));
    assert_eq!(last.accuracy, Ppm::new(1000.0));
    assert_eq!(last.quantity, 100);
    let pt100 = request.outputs[0].load.voltage(request.outputs[0].current.value());
    assert_eq!(pt100.high(), Volts::new(0.4));
}

/// The full request above names every field of the table, so the reader knows them all.
#[test]
fn the_full_request_has_every_field_of_the_table() {
    for field in fields::FIELDS {
        assert!(FULL.contains(&format!("{}:", field.name())), "{}", field.path);
    }
}

/// What a default says is what leaving the field out gives.
#[test]
fn defaults_are_those_of_the_table() {
    let short = good(SHORT);
    for field in fields::FIELDS {
        let Some(default) = field.default else { continue };
        if field.path == "budget.coverage" {
            let gum = |budget: &str| good(&format!("budget: {{method: gum{budget}}}\n{SHORT}"));
            assert_eq!(gum("").budget, gum(&format!(", coverage: {default}")).budget);
            continue;
        }
        let line = format!("{}: {default}", field.name());
        let text = match field.group() {
            "" => format!("{line}\n{SHORT}"),
            "conditions" => SHORT.replace("conditions:\n", &format!("conditions:\n  {line}\n")),
            group => format!("{group}: {{{line}}}\n{SHORT}"),
        };
        assert_eq!(good(&text), short, "{}", field.path);
    }
    assert_eq!(short.conditions.supply, Range::point(Volts::new(15.0)));
    assert_eq!(short.conditions.margin, Volts::new(0.05));
    assert_eq!(short.conditions.ambient, Range::point(Celsius::new(25.0)));
    assert_eq!(short.rules.lifecycle, [Lifecycle::Active, Lifecycle::LastBuy]);
    assert_eq!(short.outputs[0].load, Load::Voltage(Range::point(Volts::new(0.5))));
}

#[test]
fn the_document_has_to_be_one_request() {
    one_fault("", 1, "", "holds no request", "kind: request");
    one_fault("# nothing\n---\n", 1, "", "holds no request", "kind: request");
    one_fault("just words\n", 1, "", "where fields are wanted", "kind: request");
    one_fault(&format!("{SHORT}---\nkind: request\n"), 12, "", "a second document", "one request");
    good(&format!("---\n{SHORT}---\n# nothing more\n"));
    let kind = |line: &str| with(SHORT, "kind", line);
    one_fault(&kind("kind: resistor"), 1, "kind", "kind of part record", "`kind: request`");
    one_fault(&kind("kind: Request"), 1, "kind", "unknown word `Request`", "`request`");
    one_fault(&kind("# kind"), 2, "kind", "no `kind`", "add `kind: request`");
    one_fault("kind: [request\n", 2, "", "not YAML", "syntax");
}

#[test]
fn unknown_repeated_and_empty_fields_are_faults() {
    bad_line("title", "titel: x", "titel", "unknown field `titel`", "`title`");
    bad_line("service", "servce: 1 h", "conditions.servce", "unknown field", "`service`");
    bad_line("title", "supply: 15 V", "supply", "unknown field", "under `conditions`");
    bad_line("wiring", "currency: EUR", "conditions.currency", "unknown field", "at the top");
    let twice = SHORT.replace("currency: EUR\n", "currency: EUR\ncurrency: USD\n");
    one_fault(&twice, 3, "currency", "`currency` is there twice", "line 2; keep one");
    bad_line("title", "title:", "title", "`title` has no value", "leave it out");
    bad_line("wiring", "wiring: ~", "conditions.wiring", "has no value", "`wiring: 20 mohm`");
    bad_line("title", "title: ''", "title", "an empty text", "`title: ");
    bad_line("title", "title: [a]", "title", "a list of 1 where one value", "such as");
    bad_line("currency", "currency: ' '", "currency", "an empty text", "EUR");
}

#[test]
fn missing_fields_are_faults() {
    one_fault(&with(SHORT, "currency", "#"), 1, "currency", "no `currency`", "`currency: EUR`");
    one_fault(&with(SHORT, "supply", "margin: 1 V"), 4, "conditions.supply", "no `supply`", "14.5");
    one_fault(
        "kind: request\ncurrency: EUR\nconditions: {supply: 5 V}\n",
        1,
        "outputs",
        "no `outputs`",
        "name: pt100",
    );
    one_fault(
        "kind: request\ncurrency: EUR\noutputs: [{name: a, current: 1 mA, accuracy: 1 %, load: 0 V, quantity: 1}]\n",
        1,
        "conditions",
        "no `conditions`",
        "supply",
    );
    for (start, field) in [
        ("current:", "outputs[0].current"),
        ("accuracy", "outputs[0].accuracy"),
        ("load", "outputs[0].load"),
        ("quantity", "outputs[0].quantity"),
    ] {
        one_fault(&with(SHORT, start, "#"), 6, field, "no `", "add `");
    }
}

#[test]
fn currencies_and_rates() {
    bad_line("exchange", "exchange: {EUR: 1.1}", "exchange.EUR", "own currency", "leave");
    bad_line("exchange", "exchange: {USD: 0}", "exchange.USD", "zero", "0.92");
    bad_line("exchange", "exchange: {USD: -1}", "exchange.USD", "below zero", "0.92");
    bad_line("exchange", "exchange: {USD: '0,92'}", "exchange.USD", "decimal comma", "0.92");
    bad_line("exchange", "exchange: {USD: }", "exchange.USD", "no value", "`USD: 0.92`");
    bad_line("exchange", "exchange: {USD: 1, USD: 2}", "exchange.USD", "twice", "line 4");
    bad_line("exchange", "exchange: 0.92", "exchange", "where rates are wanted", "{USD: 0.92}");
}

#[test]
fn budget_methods() {
    bad_line("budget", "budget: gum", "budget", "where fields are wanted", "{method: gum}");
    bad_line("budget", "budget: {method: RSS}", "budget.method", "unknown word", "`rss`");
    for method in ["{method: rss, coverage: 2}", "{coverage: 2}"] {
        bad_line("budget", &format!("budget: {method}"), "budget.coverage", "coverage", "gum");
    }
    bad_line("budget", "budget: {method: gum, coverage: 0}", "budget.coverage", "zero", "2");
    assert_eq!(good(&with(FULL, "budget", "budget: {method: rss}")).budget, Budget::Rss);
}

#[test]
fn ranges_are_two_figures_low_first() {
    let field = "conditions.supply";
    bad_line("supply", "supply: [16 V, 14.5 V]", field, "`16 V` is above", "[14.5 V, 16 V]");
    bad_line("supply", "supply: [15 V]", field, "a list of 1", "two figures, low first");
    bad_line("supply", "supply: [1 V, 15 V, 16 V]", field, "a list of 3", "two figures");
    bad_line("supply", "supply: [15, 16 V]", "conditions.supply[0]", "no unit", "`14.5 V`");
    bad_line("supply", "supply: [15 V, 16 A]", "conditions.supply[1]", "a current", "a voltage");
    bad_line("supply", "supply: {low: 1 V}", field, "a mapping where a range", "[14.5 V, 16 V]");
    bad_line("supply", "supply: 14.5 V..16 V", field, "not one figure", "list of two");
    good(&with(FULL, "supply", "supply: [15 V, 15 V]"));
}

#[test]
fn signs_and_limits_of_the_conditions() {
    let path = |name: &str| format!("conditions.{name}");
    for (line, field, message, hint) in [
        ("supply: [0 V, 16 V]", "supply[0]", "zero", "above 0"),
        ("negative_rail: 5 V", "negative_rail", "above 0 V", "[-5.5 V, -4.5 V]"),
        ("negative_rail: [-5 V, 1 V]", "negative_rail", "above 0 V", "0 V or less"),
        ("negative_rail: [-4 V, -5 V]", "negative_rail", "is above", "[-5 V, -4 V]"),
        ("ambient: [-300 degC, 50 degC]", "ambient", "-273.15", "25 degC"),
        ("ambient: [-20 K, 50 degC]", "ambient[0]", "difference", "degC"),
        ("calibrated_at: 60 degC", "calibrated_at", "outside `ambient`", "within"),
        ("calibrated_supply: 14 V", "calibrated_supply", "outside `supply`", "within"),
        (
            "calibrated_load: 1 V",
            "calibrated_load",
            "outside the load of output `pt100` and of 1",
            "middle",
        ),
        (
            "calibrated_load: 450 ohm",
            "calibrated_load",
            "outside the load of output `pt100`",
            "middle",
        ),
        (
            "calibrated_load: 0.45 V",
            "calibrated_load",
            "outside the load of output `pt100`",
            "middle",
        ),
        ("calibrated_load: [0 V, 1 V]", "calibrated_load", "a list of 2", "one value"),
        ("service: -1 h", "service", "below zero", "0 or more"),
        ("service: 1", "service", "no unit", "`8760 h`"),
        ("insulation: 0 ohm", "insulation", "zero", "above 0"),
        ("guarded: yes", "guarded", "neither", "write `true`"),
        ("guarded: maybe", "guarded", "neither", "`true` or `false`"),
        ("thermal_emf: -1 uV", "thermal_emf", "below zero", "0 or more"),
        ("wiring: ±1 ohm", "wiring", "one side", "`20 mohm`"),
        ("margin: -1 mV", "margin", "below zero", "0 or more"),
        ("power_derating: 0", "power_derating", "zero", "0.5"),
        ("power_derating: 1.01", "power_derating", "more than the whole", "0.5"),
        ("power_derating: 50 %", "power_derating", "not a plain number", "0.5"),
        ("box_reading: guarantee", "box_reading", "unknown word", "`guaranteed`"),
        ("quiescent_max: 0 mA", "quiescent_max", "zero", "above 0"),
    ] {
        let start = line.split(':').next().unwrap();
        bad_line(&format!("{start}:"), line, &path(field), message, hint);
    }
    good(&with(FULL, "power_derating", "power_derating: 1"));
    good(&with(FULL, "calibrated_load", "calibrated_load: 400 ohm"));
    // Without a stated ambient the calibration temperature is free.
    good(&with(FULL, "ambient", "#"));
}

#[test]
fn rules_on_parts() {
    for (line, field, message, hint) in [
        ("lifecycle: [activ]", "lifecycle[0]", "unknown word `activ`", "nearest is `active`"),
        ("lifecycle: active", "lifecycle", "where a list is wanted", "[active]"),
        ("lifecycle: []", "lifecycle", "allows nothing", "at least one"),
        ("lead_time_max: 16", "lead_time_max", "no unit", "`16 wk`"),
        ("in_stock: 1", "in_stock", "neither", "`true`"),
        ("makers: []", "makers", "allows nothing", "leave the field out"),
        ("packages: [SO-8, ~]", "packages[1]", "an empty list item", "remove"),
        ("forbid: X", "forbid", "where a list is wanted", "REF-A*"),
        ("require: ['']", "require[0]", "an empty text", "REF-A*"),
        ("unstated: refuse", "unstated", "unknown word", "`reject`"),
    ] {
        let start = line.split(':').next().unwrap();
        bad_line(&format!("{start}:"), line, &format!("rules.{field}"), message, hint);
    }
}

#[test]
fn search_and_purchase_figures() {
    bad_line(
        "network_elements",
        "network_elements: 4",
        "network_elements",
        "more than 3",
        "1 to 3",
    );
    bad_line(
        "network_elements",
        "network_elements: 0",
        "network_elements",
        "less than 1",
        "1 to 3",
    );
    bad_line("network_elements", "network_elements: two", "network_elements", "not a whole", "250");
    bad_line("adjustments", "adjustments: off", "adjustments", "neither", "`false`");
    bad_line("line_cost", "line_cost: -1", "purchase.line_cost", "below zero", "4.10");
    bad_line("line_cost", "line_cost: 15 EUR", "purchase.line_cost", "plain amount", "currency");
    bad_line(
        "placement_cost",
        "placement_cost: 0.0000001",
        "purchase.placement_cost",
        "6 decimals",
        "round",
    );
    bad_line("lines_max", "lines_max: 0", "purchase.lines_max", "less than 1", "from 1");
}

#[test]
fn ten_faults_are_all_reported_with_their_lines() {
    let mut text = FULL.to_owned();
    let changes = [
        ("title", "titel: x", "titel"),
        ("exchange", "exchange: {USD: zero}", "exchange.USD"),
        ("supply", "supply: [16 V, 14 V]", "conditions.supply"),
        ("service", "service: 8760", "conditions.service"),
        ("guarded", "guarded: yes", "conditions.guarded"),
        ("power_derating", "power_derating: 2", "conditions.power_derating"),
        ("lifecycle", "lifecycle: [new]", "rules.lifecycle[0]"),
        ("network_elements", "network_elements: 7", "network_elements"),
        ("line_cost", "line_cost: '15,00'", "purchase.line_cost"),
        ("accuracy", "accuracy: 5 V", "outputs[1].accuracy"),
    ];
    let mut wanted = Vec::new();
    for (start, line, field) in changes {
        text = with(&text, start, line);
        let at = text.lines().position(|l| l.trim_start() == line).unwrap() + 1;
        wanted.push((at, field.to_owned()));
    }
    let faults = read_text(&text).unwrap_err();
    let found: Vec<(usize, String)> = faults
        .iter()
        .map(|fault| (fault.place.line, fault.field.clone().unwrap_or_default()))
        .collect();
    assert_eq!(found, wanted);
    let column = faults.iter().find(|f| f.place.line == 7).map(|f| f.place.column);
    assert_eq!(column, Some(11), "the list of `supply` starts there");
}

#[test]
fn files_that_are_no_text_are_faults() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("request.yaml");
    let message = |path: &Path| load(path).unwrap_err()[0].message.clone();
    assert!(message(&path).contains("cannot be read"));
    assert!(message(folder.path()).contains("cannot be read"));
    std::fs::write(&path, b"kind: request\ntitle: \xff\n").unwrap();
    let faults = load(&path).unwrap_err();
    assert_eq!((faults.len(), faults[0].place.line), (1, 2));
    assert!(faults[0].message.contains("not UTF-8"));
    std::fs::write(&path, vec![b'#'; (16 << 20) + 1]).unwrap();
    assert!(message(&path).contains("larger than 16 MiB"));
    std::fs::write(&path, format!("\u{feff}{SHORT}")).unwrap();
    assert_eq!(load(&path), Ok(good(SHORT)));
}

/// The requests that come with the program.
#[test]
fn the_demo_requests_read_without_a_fault() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("catalog/requests");
    let mut count = 0;
    for file in std::fs::read_dir(folder).unwrap() {
        let path = file.unwrap().path();
        if path.extension().is_some_and(|end| end == "yaml") {
            assert!(load(&path).is_ok(), "{}: {:#?}", path.display(), load(&path));
            count += 1;
        }
    }
    assert!(count > 0);
}

proptest::proptest! {
    #[test]
    fn no_request_panics(text in "(?s).{0,200}") {
        let _ = read_text(&text);
    }

    /// A good request with one line replaced by anything is read or refused.
    #[test]
    fn no_changed_line_panics(index in 0usize..50, value in "[^\\n]{0,30}") {
        let mut lines: Vec<String> = FULL.lines().map(str::to_owned).collect();
        if let Some(line) = lines.get_mut(index) {
            let key = line.split(": ").next().unwrap_or_default().to_owned();
            *line = format!("{key}: {value}");
        }
        let _ = read_text(&lines.join("\n"));
    }
}
