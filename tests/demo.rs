//! What the demo in `catalog/` has to show, asked of the program itself: each point is tested by
//! asking again with one thing changed, not by fixed amounts.

use std::path::{Path, PathBuf};
use std::process::{Command, Output};

use ampthrift::catalog::{Catalog, Kind, Lifecycle, Supply, Values, load};
use ampthrift::quantity::{Ohms, Volts};
use serde_json::Value;

const PARTS: &str = "catalog/parts";
const BENCH: &str = "bench-1ma.yaml";
const FAMILY: &str = "battery-family.yaml";
const IMPOSSIBLE: &str = "impossible.yaml";

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

fn program(arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_ampthrift"))
        .current_dir(root())
        .args(arguments)
        .output()
        .expect("the program starts")
}

/// The JSON answer to a request over a catalogue, and the exit code.
fn answer_from(request: &Path, parts: &Path) -> (Value, i32) {
    let [request, parts] = [request, parts].map(Path::to_string_lossy);
    let output = program(&["choose", &request, "--catalog", &parts, "--format", "json"]);
    let text = String::from_utf8(output.stdout).expect("UTF-8");
    let json = serde_json::from_str(&text).unwrap_or_else(|error| {
        panic!("{error}\nstdout: {text}\nstderr: {}", String::from_utf8_lossy(&output.stderr))
    });
    (json, output.status.code().expect("an exit code"))
}

/// The same over the demo's catalogue.
fn answer(request: &Path) -> (Value, i32) {
    answer_from(request, &root().join(PARTS))
}

fn demo(request: &str) -> PathBuf {
    root().join("catalog/requests").join(request)
}

fn as_shipped(request: &str) -> (Value, i32) {
    answer(&demo(request))
}

/// The answer to a demo request with one text of it replaced; the text has to be there.
fn changed(request: &str, from: &str, to: &str) -> (Value, i32) {
    let text = std::fs::read_to_string(demo(request)).expect("the request is there");
    assert!(text.contains(from), "{request} has no {from:?}");
    let folder = tempfile::tempdir().expect("a temporary folder");
    let path = folder.path().join(request);
    std::fs::write(&path, text.replacen(from, to, 1)).expect("written");
    answer(&path)
}

/// An amount in millionths.
fn amount(value: &Value) -> i128 {
    let text = value.as_str().expect("an amount");
    let (whole, part) = text.split_once('.').expect("decimals");
    format!("{whole}{part:0<6}").parse().expect("a number")
}

fn total(answer: &Value) -> i128 {
    amount(&answer["total_cost"])
}

fn outputs(answer: &Value) -> &Vec<Value> {
    answer["outputs"].as_array().expect("outputs")
}

fn output<'a>(answer: &'a Value, name: &str) -> &'a Value {
    outputs(answer)
        .iter()
        .find(|output| output["name"] == name)
        .unwrap_or_else(|| panic!("no output {name} in {answer:#}"))
}

fn design<'a>(answer: &'a Value, name: &str) -> &'a Value {
    &output(answer, name)["design"]
}

fn part<'a>(answer: &'a Value, name: &str, kind: &str) -> &'a str {
    design(answer, name)[kind].as_str().unwrap_or_default()
}

fn diodes(answer: &Value, name: &str) -> u64 {
    design(answer, name)["lift"]["count"].as_u64().unwrap_or(0)
}

fn assert_proved(answer: &Value, code: i32) {
    assert_eq!(code, 0);
    assert_eq!(answer["status"], "optimal");
    assert_eq!(answer["total_cost"], answer["lower_bound"]);
    for output in outputs(answer) {
        assert!(output["total_ppm"].as_f64() <= output["target_ppm"].as_f64(), "{output:#}");
    }
}

fn catalog() -> Catalog {
    let loaded = load(&root().join(PARTS));
    assert_eq!(loaded.faults, [], "an error or a doubt");
    loaded.catalog
}

/// What purchasing knows of each type, by kind.
fn supplies(catalog: &Catalog) -> Vec<(Kind, &Supply)> {
    let mut all: Vec<(Kind, &Supply)> = Vec::new();
    all.extend(catalog.references.iter().map(|part| (Kind::Reference, &part.supply)));
    all.extend(catalog.amplifiers.iter().map(|part| (Kind::Amplifier, &part.supply)));
    all.extend(catalog.resistors.iter().map(|part| (Kind::Resistor, &part.supply)));
    all.extend(catalog.lifts.iter().map(|part| (Kind::Lift, &part.supply)));
    all.extend(catalog.adjustments.iter().map(|part| (Kind::Adjustment, &part.supply)));
    all
}

#[test]
fn every_record_loads_without_error_or_doubt() {
    let catalog = catalog();
    let records = |kind: Kind| {
        let mut parts: Vec<&str> = supplies(&catalog)
            .into_iter()
            .filter(|(of, _)| *of == kind)
            .map(|(_, supply)| supply.part.as_str())
            .collect();
        parts.dedup();
        parts.len()
    };
    assert_eq!(Kind::ALL.map(records), [9, 14, 8, 3, 3]);
    assert_eq!(catalog.references.len(), 20);
    assert_eq!(catalog.resistors.len(), 13);

    let check = program(&["check", "--catalog", PARTS]);
    assert_eq!(check.status.code(), Some(0));
}

#[test]
fn the_catalogue_spans_what_currents_from_1_ua_to_5_ma_need() {
    let catalog = catalog();
    let mut voltages: Vec<Volts> =
        catalog.references.iter().map(|part| part.output.value()).collect();
    voltages.sort_by(|a, b| a.value().total_cmp(&b.value()));
    voltages.dedup();
    assert_eq!(voltages, [2.5, 4.096, 5.0, 10.0].map(Volts::new));

    // 2.5 V at 5 mA is 500 Ω, 10 V at 1 µA is 10 MΩ.
    let ends = |values: &Values| match values {
        Values::Listed(list) => {
            let ohms = |at: Option<&ampthrift::catalog::ListedValue>| at.map(|it| it.ohms.value());
            (ohms(list.first()), ohms(list.last()))
        }
        Values::MadeToOrder { .. } => (None, None),
    };
    let spans: Vec<_> = catalog.resistors.iter().map(|of| ends(&of.values)).collect();
    assert!(spans.iter().any(|(low, _)| low.is_some_and(|r| r <= Ohms::new(500.0))));
    assert!(spans.iter().any(|(_, high)| *high == Some(Ohms::new(10e6))));
    assert!(spans.iter().any(|(_, high)| *high == Some(Ohms::new(1e6))));

    // Every sale state and some price breaks, or half of the rules could not be tried.
    let supplies = supplies(&catalog);
    for state in Lifecycle::ALL {
        assert!(supplies.iter().any(|(_, supply)| supply.lifecycle == state), "{state:?}");
    }
    assert!(supplies.iter().any(|(_, supply)| supply.price.breaks().len() == 3));
    assert!(supplies.iter().any(|(_, supply)| supply.order_multiple > 1));
}

/// Volts a decade of the lift diodes stay between one and two times kT/q·ln 10 at 25 °C, from 59
/// to 118 mV (k and q: SI, exact).
#[test]
fn the_lifts_follow_the_diode_law() {
    let decade = 1.380649e-23 * 298.15 / 1.602176634e-19 * std::f64::consts::LN_10;
    for lift in &catalog().lifts {
        for pair in lift.drop.windows(2) {
            let decades = (pair[1].current.value() / pair[0].current.value()).log10();
            let slope = (pair[1].drop.value() - pair[0].drop.value()) / decades;
            assert!((decade..=2.0 * decade).contains(&slope), "{}: {slope} V", lift.order_code);
        }
    }
}

#[test]
fn bench_adjusts_a_middling_reference_instead_of_buying_a_premium_one() {
    let (with, code) = as_shipped(BENCH);
    assert_proved(&with, code);
    assert!(design(&with, "bench")["adjustment"].is_string());
    assert!(part(&with, "bench", "reference").starts_with("KS-H10"));

    let (without, code) = changed(BENCH, "outputs:", "adjustments: false\noutputs:");
    assert_proved(&without, code);
    assert!(part(&without, "bench", "reference").starts_with("GR-Z10"), "{without:#}");
    // Far dearer, not by a hair.
    assert!(total(&without) > 2 * total(&with));
}

#[test]
fn bench_buys_up_to_a_price_break() {
    let (answer, _) = as_shipped(BENCH);
    let reference = part(&answer, "bench", "reference");
    let lines = answer["purchase"]["lines"].as_array().expect("lines");
    let line = lines.iter().find(|line| line["order_code"] == reference).expect("its line");
    assert_eq!(line["needed"], 90);
    assert_eq!(line["bought"], 100);

    // Ten more boards cost nothing more of this part.
    let (more, _) = changed(BENCH, "quantity: 90", "quantity: 100");
    let lines = more["purchase"]["lines"].as_array().expect("lines");
    let same = lines.iter().find(|line| line["order_code"] == reference).expect("its line");
    assert_eq!(same["cost"], line["cost"]);
}

#[test]
fn family_is_proved_and_adjusts_only_where_it_pays() {
    let (answer, code) = as_shipped(FAMILY);
    assert_proved(&answer, code);
    assert_eq!(outputs(&answer).len(), 8);
    assert!(design(&answer, "pt100")["adjustment"].is_string());
    for output in outputs(&answer).iter().filter(|output| output["name"] != "pt100") {
        assert!(output["design"]["adjustment"].is_null(), "{output:#}");
        assert_eq!(output["design"]["reference"], "KS-V25-A");
    }

    // The thermistors' premium grade pays: without it the family costs more, whatever is adjusted.
    let (without, code) = changed(FAMILY, "rules:", "rules:\n  forbid: [KS-V25-A]");
    assert_eq!(code, 0);
    assert!(total(&without) > total(&answer));
    // So does the adjustment of pt100: without it a dearer grade is needed there.
    let (without, code) = changed(FAMILY, "outputs:", "adjustments: false\noutputs:");
    assert_eq!(code, 0);
    assert!(total(&without) > total(&answer));
    assert_ne!(part(&without, "pt100", "reference"), part(&answer, "pt100", "reference"));

    // Bought together, up to a price break.
    let lines = answer["purchase"]["lines"].as_array().expect("lines");
    let shared = lines.iter().find(|line| line["order_code"] == "KS-V25-A").expect("its line");
    assert_eq!(shared["needed"], 7 * 120);
    assert_eq!(shared["bought"], 1000);
}

#[test]
fn bias_current_rules_the_low_currents() {
    let (answer, _) = as_shipped(FAMILY);
    let cheap = part(&answer, "pt100", "amplifier");
    let low = part(&answer, "thermistor@1uA", "amplifier");
    assert_ne!(cheap, low);

    // The amplifier of the high currents can't serve the low ones.
    let (only, code) = changed(FAMILY, "rules:", &format!("rules:\n  require: [{cheap}]"));
    assert_eq!(code, 1);
    assert_eq!(output(&only, "thermistor@1uA")["feasible"], false);
    assert_eq!(output(&only, "pt100")["feasible"], true);
    // It is the bias current that rules it out: the best it can do is off by more than all else.
    let reasons = &output(&only, "thermistor@1uA")["reasons"];
    assert!(reasons["best_ppm"].as_f64() > Some(10_000.0), "{reasons:#}");
}

#[test]
fn diodes_are_more_where_the_current_is_less() {
    let (answer, _) = as_shipped(FAMILY);
    assert_eq!(diodes(&answer, "pt100"), 1);
    assert_eq!(diodes(&answer, "thermistor@10uA"), 2);
    assert_eq!(diodes(&answer, "thermistor@1uA"), 3);
    // The amplifier's low end is what they are for.
    for limit in output(&answer, "thermistor@1uA")["limits"].as_array().expect("limits") {
        if limit["limit"] == "swing_low" {
            let margin = limit["margin"].as_f64().expect("a margin");
            let each = limit["value"].as_f64().expect("a value") / 3.0;
            assert!((0.0..each).contains(&margin), "two would do: {limit:#}");
        }
    }

    let (none, code) = changed(FAMILY, "rules:", "rules:\n  forbid: [HF-*]");
    assert_eq!(code, 1);
    assert_eq!(none["status"], "infeasible");
    assert_eq!(output(&none, "pt100")["feasible"], false);
}

#[test]
fn impossible_says_why() {
    let (answer, code) = as_shipped(IMPOSSIBLE);
    assert_eq!(code, 1);
    assert_eq!(answer["status"], "infeasible");

    // Nothing fits the window, whatever the accuracy.
    let needle = output(&answer, "needle");
    assert_eq!(needle["feasible"], false);
    assert!(needle["reasons"]["best_ppm"].is_null());
    let removed = needle["reasons"]["removed"].as_array().expect("removed");
    assert!(removed.iter().any(|entry| entry["limit"] == "reference_headroom"), "{needle:#}");
    // The headroom is what it lacks: with a volt more it has a design.
    let (more, _) = changed(IMPOSSIBLE, "supply: [5.4 V, 7.3 V]", "supply: [6.4 V, 8.3 V]");
    assert_eq!(output(&more, "needle")["feasible"], true);

    // This one fits the window; the accuracy it names as reachable is reachable.
    let standard = output(&answer, "standard");
    assert_eq!(standard["feasible"], false);
    let best = standard["reasons"]["best_ppm"].as_f64().expect("a best");
    assert!(best > 20.0);
    let relaxations = standard["reasons"]["relaxations"].as_array().expect("relaxations");
    let accuracy = relaxations
        .iter()
        .find(|entry| entry["figure"].as_str().is_some_and(|path| path.ends_with("accuracy")));
    assert_eq!(accuracy.expect("one on accuracy")["to"], standard["reasons"]["best_ppm"]);
    let reachable = format!("accuracy: {} ppm", best + 0.01);
    let (relaxed, _) = changed(IMPOSSIBLE, "accuracy: 20 ppm", &reachable);
    assert_eq!(output(&relaxed, "standard")["feasible"], true);

    assert_eq!(output(&answer, "pt100")["feasible"], true);
    assert!(design(&answer, "pt100")["reference"].is_string());
}

/// The YAML blocks of the README: a small catalogue of every kind, and a request.
#[test]
fn the_readme_s_records_and_request_work() {
    let readme = std::fs::read_to_string(root().join("README.md")).expect("README.md");
    let blocks: Vec<&str> =
        readme.split("```yaml\n").skip(1).filter_map(|rest| rest.split("```").next()).collect();
    let [records, request] = blocks[..] else { panic!("{} YAML blocks", blocks.len()) };
    let folder = tempfile::tempdir().expect("a temporary folder");
    let parts = folder.path().join("parts");
    std::fs::create_dir(&parts).expect("created");
    std::fs::write(parts.join("records.yaml"), records).expect("written");
    let path = folder.path().join("request.yaml");
    std::fs::write(&path, request).expect("written");
    let (answer, code) = answer_from(&path, &parts);
    assert_proved(&answer, code);
}

#[test]
fn no_request_of_the_demo_is_left_out() {
    let mut names: Vec<String> = std::fs::read_dir(root().join("catalog/requests"))
        .expect("the folder")
        .map(|entry| entry.expect("an entry").file_name().to_string_lossy().into_owned())
        .collect();
    names.sort();
    assert_eq!(names, [FAMILY, BENCH, IMPOSSIBLE]);
}
