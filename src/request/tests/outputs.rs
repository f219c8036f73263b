//! Outputs, and the expansion of `currents`.

use super::*;

#[test]
fn figures_of_an_output() {
    for (line, field, message, hint) in [
        ("current: 0 A", "current", "zero", "1 mA"),
        ("current: -1 mA", "current", "below zero", "1 mA"),
        ("current: 1 mV", "current", "a voltage, and a current", "1 mA"),
        ("accuracy: 0 %", "accuracy", "zero", "above 0"),
        ("accuracy: 0.1", "accuracy", "no unit", "`400 ppm`"),
        ("load: [1 V, 0 V]", "load", "is above", "[0 V, 1 V]"),
        ("load: [0 V, 400 ohm]", "load", "volts and ohms", "[0 ohm, 400 ohm]"),
        ("load: [-1 ohm, 400 ohm]", "load[0]", "below zero", "0 or more"),
        ("load: [0 V, 1 A]", "load[1]", "neither in volts nor in ohms", "as a voltage"),
        ("load: 400 Kohm", "load", "neither in volts nor in ohms", "`400 kohm`"),
        ("load: 5", "load", "`5` has no unit", "`2.5 V`"),
        ("quantity: 0", "quantity", "less than 1", "from 1"),
        ("quantity: 2.5", "quantity", "not a whole number", "250"),
        ("quantity: -3", "quantity", "not a whole number", "250"),
    ] {
        let start = line.split(':').next().unwrap();
        let text = with(SHORT, &format!("{start}:"), line);
        let at = text.lines().position(|l| l.trim_start() == line).unwrap() + 1;
        one_fault(&text, at, &format!("outputs[0].{field}"), message, hint);
    }
    assert_eq!(
        good(&with(SHORT, "load", "load: [-1 V, 1R]").replace("1R", "1 V")).outputs[0].load,
        Load::Voltage(Range::new(Volts::new(-1.0), Volts::new(1.0)).unwrap())
    );
    assert_eq!(
        good(&with(SHORT, "load", "load: [100R, 4k7]")).outputs[0].load,
        Load::Resistance(Range::new(Ohms::new(100.0), Ohms::new(4700.0)).unwrap())
    );
}

fn currents(text: &str) -> String {
    with(SHORT, "current:", &format!("currents: {text}"))
}

#[test]
fn currents_expand_with_their_ends_and_exact_names() {
    let expanded = |text: &str| {
        let request = good(&currents(text));
        names(&request).join(" ")
    };
    assert_eq!(
        expanded("{mantissas: [1, 5], from: 500 nA, to: 10 uA}"),
        "a@500nA a@1uA a@5uA a@10uA"
    );
    assert_eq!(expanded("{mantissas: [2.5], from: 2.5 mA, to: 2.5 mA}"), "a@2.5mA");
    assert_eq!(expanded("{mantissas: [4.99], from: 1 uA, to: 1 mA}"), "a@4.99uA a@49.9uA a@499uA");
    assert_eq!(expanded("{mantissas: [3], from: 0.3 uA, to: 299 uA}"), "a@300nA a@3uA a@30uA");
    assert_eq!(expanded("{mantissas: [1], from: 0.1 A, to: 10 A}"), "a@100mA a@1A a@10A");
    // 0.7e-6 and the like are no binary numbers; the ends hold all the same.
    assert_eq!(expanded("{mantissas: [7], from: 0.7 uA, to: 7 uA}"), "a@700nA a@7uA");
}

#[test]
fn currents_are_checked() {
    let at = "outputs[0].currents";
    for (text, field, message, hint) in [
        ("{mantissas: [1, 10], from: 1 uA, to: 1 mA}", ".mantissas[1]", "not from 1", "write `1`"),
        ("{mantissas: [0.25], from: 1 uA, to: 1 mA}", ".mantissas[0]", "not from 1", "`2.5`"),
        ("{mantissas: [1, 1.0], from: 1 uA, to: 1 mA}", ".mantissas[1]", "twice", "keep one"),
        ("{mantissas: [1 uA], from: 1 uA, to: 1 mA}", ".mantissas[0]", "plain number", "2.5"),
        ("{mantissas: [], from: 1 uA, to: 1 mA}", ".mantissas", "an empty list", "[1, 2, 5]"),
        ("{mantissas: 1, from: 1 uA, to: 1 mA}", ".mantissas", "where a list", "[1, 2, 5]"),
        ("{mantissas: [1], from: 1 mA, to: 1 uA}", ".from", "above `to`", "swap"),
        ("{mantissas: [1], from: 0 A, to: 1 uA}", ".from", "zero", "`1 uA`"),
        ("{mantissas: [1], from: 2 uA, to: 3 uA}", "", "no current lies", "widen"),
        ("{mantissas: [1], from: 2 uA}", ".to", "no `to`", "add `to: 100 uA`"),
        ("[1 uA, 2 uA]", "", "a list of 2 where fields", "mantissas"),
    ] {
        one_fault(&currents(text), 7, &format!("{at}{field}"), message, hint);
    }
    let both = SHORT.replace(
        "current: 1 mA",
        "current: 1 mA\n    currents: {mantissas: [1], from: 1 uA, to: 1 uA}",
    );
    one_fault(&both, 7, "outputs[0].current", "both", "keep `current`");
}

#[test]
fn output_names_are_unique() {
    let twice =
        format!("{SHORT}  - {{name: a, current: 1 uA, accuracy: 1 %, load: 0 V, quantity: 1}}\n");
    one_fault(&twice, 11, "outputs[1].name", "`a` is there twice", "line 6");
    let expanded = format!(
        "{}  - {{name: 'a@2uA', current: 2 uA, accuracy: 1 %, load: 0 V, quantity: 1}}\n",
        currents("{mantissas: [1, 2], from: 1 uA, to: 10 uA}")
    );
    one_fault(&expanded, 11, "outputs[1].name", "`a@2uA` is there twice", "line 6");
    let apart =
        format!("{SHORT}  - {{name: b, current: 1 uA, accuracy: 1 %, load: 0 V, quantity: 1}}\n");
    assert_eq!(names(&good(&apart)), ["a", "b"]);
}

#[test]
fn too_many_outputs_are_refused() {
    let mut text = SHORT.to_owned();
    for index in 0..10_000 {
        text.push_str(&format!(
            "  - {{name: n{index}, current: 1 uA, accuracy: 1 %, load: 0 V, quantity: 1}}\n"
        ));
    }
    one_fault(&text, 10_010, "outputs[10000]", "more than 10000 outputs", "split");
    let mantissas: Vec<String> =
        (0..2000).map(|m| format!("{}", 1.0 + f64::from(m) / 1000.0)).collect();
    let many = format!("{{mantissas: [{}], from: 1 nA, to: 1 mA}}", mantissas.join(", "));
    one_fault(&currents(&many), 7, "outputs[0].currents", "more than 10000 outputs", "fewer");
    one_fault(
        &with(SHORT, "- name", "[]")
            .split("    current")
            .next()
            .unwrap()
            .replace("outputs:\n  []", "outputs: []"),
        5,
        "outputs",
        "an empty list of outputs",
        "at least one",
    );
}
