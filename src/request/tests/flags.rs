//! Requests from the command line.

use super::*;

fn flags(pairs: &[(&str, &str)]) -> Result<Request, Vec<Fault>> {
    let owned: Vec<_> = pairs.iter().map(|(a, b)| ((*a).to_owned(), (*b).to_owned())).collect();
    from_flags(&owned)
}

const FEWEST: [(&str, &str); 5] = [
    ("current", "1mA"),
    ("accuracy", "0.05%"),
    ("supply", "14V..16V"),
    ("load", "0V..1V"),
    ("currency", "EUR"),
];

#[test]
fn flags_ask_for_one_output_as_a_file_does() {
    let file = "kind: request\ncurrency: EUR\nconditions: {supply: [14 V, 16 V]}\noutputs:\n  \
                - {name: output, current: 1 mA, accuracy: 500 ppm, load: [0 V, 1 V], quantity: 1}\n";
    assert_eq!(flags(&FEWEST), Ok(good(file)));
    let mut more = FEWEST.to_vec();
    more.extend([
        ("quantity", "100"),
        ("name", "x"),
        ("negative-rail", "-5V"),
        ("guarded", "true"),
    ]);
    let request = flags(&more).unwrap();
    assert_eq!((request.outputs[0].quantity, names(&request)), (100, vec!["x"]));
    assert_eq!(request.conditions.negative_rail, Range::point(Volts::new(-5.0)));
    assert!(request.conditions.guarded);
}

/// What the help text says of a default is what leaving the flag out gives.
#[test]
fn defaults_of_flags_are_true() {
    let least = flags(&FEWEST);
    for flag in request_flags() {
        let Some(default) = flag.default_text().filter(|_| flag.name != "coverage") else {
            continue;
        };
        let mut pairs = FEWEST.to_vec();
        pairs.push((flag.name, default));
        assert_eq!(flags(&pairs), least, "{}", flag.name);
    }
}

/// Every example in the help text is a good value of its flag.
#[test]
fn every_flag_is_read() {
    let all = request_flags();
    let conditions = fields::fields_of("conditions").count();
    let flagged = all.iter().filter(|flag| flag.field.group() == "conditions").count();
    assert_eq!(flagged, conditions, "a flag for each condition");
    for flag in &all {
        let mut pairs: Vec<(&str, &str)> =
            FEWEST.iter().copied().filter(|(name, _)| *name != flag.name).collect();
        pairs.push((flag.name, flag.example));
        if flag.name == "coverage" {
            pairs.push(("method", "gum"));
        }
        assert!(flags(&pairs).is_ok(), "{}: {:#?}", flag.name, flags(&pairs));
        assert_eq!(flag.is_switch(), flag.name == "guarded");
    }
}

#[test]
fn faults_of_flags_name_the_flag() {
    let faults = flags(&[
        ("current", "1V"),
        ("supply", "16V..14V"),
        ("load", "0V..5"),
        ("currency", "EUR"),
        ("colour", "red"),
        ("margin", "1..2mV"),
    ])
    .unwrap_err();
    let mut found: Vec<(&str, &str)> = faults
        .iter()
        .map(|fault| (fault.field.as_deref().unwrap_or(""), fault.hint.as_deref().unwrap_or("")))
        .collect();
    found.sort_unstable();
    let names: Vec<&str> = found.iter().map(|(field, _)| *field).collect();
    assert_eq!(names, ["", "--accuracy", "--current", "--load", "--margin", "--supply"]);
    assert!(found.contains(&("--accuracy", "give `--accuracy 400ppm`")));
    assert!(found.iter().any(|(_, hint)| hint.contains("`--supply 14V..16V`")), "{found:#?}");
    assert!(faults.iter().all(|fault| fault.place.line == 0));
}

proptest::proptest! {
    #[test]
    fn no_flag_panics(index in 0usize..26, value in "(?s).{0,30}") {
        let all = request_flags();
        if let Some(flag) = all.get(index) {
            let _ = flags(&[(flag.name, value.as_str())]);
        }
    }
}
