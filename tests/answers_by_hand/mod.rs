//! Answers written by hand: the parts and figures are invented, the sums are right.

use ampthrift::answers::{
    Cause, Choice, ChosenDesign, ChosenElement, JointReason, OutputAnswer, Reasons, Relaxation,
    Removed, Status, Verdict,
};
use ampthrift::catalog::{Fault, Kind, Place, Severity};
use ampthrift::circuit::{
    Compliance, Connection, Evaluation, LimitId, LimitLine, NotStated, TermId, TermLine,
};
use ampthrift::purchase::{Bill, BillLine};
use ampthrift::quantity::{Amperes, Money, Ohms, Ppm, Volts};
use ampthrift::report::{CatalogCheck, KindCount};

fn cents(cents: i128) -> Money {
    Money::from_micros(cents * 10_000)
}

fn element(code: &str, ohms: f64) -> ChosenElement {
    ChosenElement { order_code: code.to_owned(), ohms: Ohms::new(ohms) }
}

fn design(connection: Connection, ohms: f64, elements: Vec<ChosenElement>) -> ChosenDesign {
    ChosenDesign {
        reference: "MV25-B".to_owned(),
        amplifier: "QA7-STD".to_owned(),
        connection,
        ohms: Ohms::new(ohms),
        elements,
        lift: None,
        adjustment: None,
    }
}

fn evaluation(terms: &[(TermId, f64)], limits: &[(LimitId, f64, f64, f64)]) -> Evaluation {
    let total = terms.iter().map(|(_, ppm)| ppm).sum();
    Evaluation {
        total: Ppm::new(total),
        terms: terms
            .iter()
            .map(|&(term, ppm)| TermLine { term, ppm: Ppm::new(ppm), note: None })
            .collect(),
        not_stated: Vec::new(),
        limits: limits
            .iter()
            .map(|&(limit, value, bound, margin)| LimitLine { limit, value, bound, margin })
            .collect(),
        compliance: Compliance {
            load_min: Volts::new(-0.05),
            load_max: Volts::new(10.25),
            output: Some(Ohms::new(1.25e9)),
        },
        window_holds: true,
        accuracy_holds: true,
    }
}

fn output(name: &str, current: f64, target: f64, quantity: u64, verdict: Verdict) -> OutputAnswer {
    OutputAnswer {
        name: name.to_owned(),
        current: Amperes::new(current),
        target: Ppm::new(target),
        quantity,
        method: "worst-case",
        verdict,
    }
}

fn line(code: &str, needed: u64, bought: u64, each: i128, cost: i128) -> BillLine {
    BillLine {
        order_code: code.to_owned(),
        needed,
        bought,
        each: Money::from_micros(each),
        cost: cents(cost),
    }
}

fn pt100() -> OutputAnswer {
    let mut design = design(
        Connection::Series,
        2500.0,
        vec![element("TF10-0805-10R", 10.0), element("TF10-0805-2K49", 2490.0)],
    );
    design.lift = Some(("SD1".to_owned(), 2));
    let mut evaluation = evaluation(
        &[
            (TermId::ReferenceAccuracy, 100.0),
            (TermId::ReferenceTempco, 105.0),
            (TermId::ReferenceLineRegulation, 4.5),
            (TermId::ReferenceDrift, 30.0),
            (TermId::ReferenceHysteresis, 0.0),
            (TermId::AmplifierOffset, 40.0),
            (TermId::AmplifierBias, 0.002),
            (TermId::ResistorMismatch, 0.0),
            (TermId::ResistorTolerance, 20.0),
            (TermId::ResistorTempco, 12.9),
        ],
        &[
            (LimitId::SwingLow, 0.81, 0.36, 0.45),
            (LimitId::ReferenceHeadroom, 13.2, 2.8, 10.4),
            (LimitId::AmplifierSupplyMin, 4.5, 14.5, 10.0),
            (LimitId::ReferenceSource, 0.001, 0.01, 0.009),
            (LimitId::Temperature, -20.0, -40.0, 20.0),
        ],
    );
    if let Some(tempco) = evaluation.terms.get_mut(1) {
        tempco.note = Some("box method, read as a slope".to_owned());
    }
    evaluation.not_stated = vec![
        NotStated { order_code: "MV25-B".to_owned(), field: "load_regulation" },
        NotStated { order_code: "QA7-STD".to_owned(), field: "open_loop_gain" },
    ];
    output("pt100", 1e-3, 400.0, 250, Verdict::Chosen(Box::new(design), Box::new(evaluation)))
}

fn small(name: &str, current: f64, code: &str, ohms: f64, target: f64) -> OutputAnswer {
    let mut design = design(Connection::Single, ohms, vec![element(code, ohms)]);
    design.adjustment = Some("TRIM-1".to_owned());
    let mut evaluation = evaluation(
        &[
            (TermId::ReferenceAccuracy, 0.0),
            (TermId::ReferenceTempco, 105.0),
            (TermId::AmplifierOffset, 0.0),
            (TermId::AmplifierBiasDrift, 0.03 / current / 1e6),
            (TermId::ResistorTempco, 75.0),
            (TermId::AdjustmentResidual, 50.0),
        ],
        &[
            (LimitId::SwingLow, 0.0, -0.45, 0.45),
            (LimitId::ResistorPower, 2.5e-6, 0.05, 0.049_997_5),
            (LimitId::AdjustmentRange, 640.0, 2000.0, 1360.0),
        ],
    );
    evaluation.compliance.output = None;
    if let Some(accuracy) = evaluation.terms.first_mut() {
        accuracy.note = Some("100 ppm removed by the adjustment".to_owned());
    }
    output(name, current, target, 100, Verdict::Chosen(Box::new(design), Box::new(evaluation)))
}

fn no_design(target: f64) -> OutputAnswer {
    let best = design(Connection::Single, 2_490_000.0, vec![element("TF10-0805-2M49", 2.49e6)]);
    let removed = |kind, cause, offers| Removed { kind, cause, offers };
    let reasons = Reasons {
        removed: vec![
            removed(Kind::Reference, Cause::Limit(LimitId::ReferenceHeadroom), 3),
            removed(Kind::Reference, Cause::Rule("lifecycle"), 1),
            removed(Kind::Amplifier, Cause::Limit(LimitId::SwingLow), 1),
        ],
        best: Some((Ppm::new(4_135.25), best)),
        relaxations: vec![
            Relaxation { figure: "outputs[1].accuracy".to_owned(), from: target, to: 4135.25 },
            Relaxation { figure: "conditions.ambient[1]".to_owned(), from: 50.0, to: 31.5 },
        ],
    };
    output("thermistor@1uA", 1e-6, target, 100, Verdict::Infeasible(reasons))
}

fn choice(status: Status, outputs: Vec<OutputAnswer>, bill: Option<Bill>) -> Choice {
    let total = bill.as_ref().map(Bill::total);
    Choice {
        title: Some("Borehole string, excitation board".to_owned()),
        status,
        currency: "EUR".to_owned(),
        totals: total.map(|total| (total, total)),
        outputs,
        purchase: bill,
        joint_reasons: Vec::new(),
        notes: Vec::new(),
    }
}

fn bill(lines: Vec<BillLine>, lines_cost: i128, placement: i128, adjustment: i128) -> Bill {
    Bill {
        parts_cost: lines.iter().map(|line| line.cost).sum(),
        lines,
        lines_cost: cents(lines_cost),
        placement_cost: cents(placement),
        adjustment_cost: cents(adjustment),
    }
}

/// One output, proved.
pub fn one() -> Choice {
    let lines = vec![
        line("MV25-B", 250, 250, 3_100_000, 77_500),
        line("QA7-STD", 250, 250, 640_000, 16_000),
        line("TF10-0805-10R", 250, 250, 84_500, 2_113),
        line("TF10-0805-2K49", 250, 250, 84_500, 2_113),
        line("SD1", 500, 1000, 9_000, 900),
    ];
    let mut choice = choice(Status::Optimal, vec![pt100()], Some(bill(lines, 7_500, 6_000, 0)));
    choice.notes = vec!["forbid: OLD-* matches no order code".to_owned()];
    choice
}

fn family_bill() -> Bill {
    bill(
        vec![
            line("MV25-B", 550, 550, 2_900_000, 159_500),
            line("QA7-STD", 550, 600, 610_000, 36_600),
            line("TF10-0805-10R", 250, 250, 84_500, 2_113),
            line("TF10-0805-2K49", 250, 250, 84_500, 2_113),
            line("TF10-0805-2M49", 100, 100, 90_000, 900),
            line("TF10-0805-249K", 100, 100, 90_000, 900),
            line("TF10-0805-1M24", 100, 100, 90_000, 900),
            line("SD1", 500, 1000, 9_000, 900),
        ],
        12_000,
        11_000,
        45_000,
    )
}

/// Four outputs, proved.
pub fn family() -> Choice {
    let outputs = vec![
        pt100(),
        small("thermistor@1uA", 1e-6, "TF10-0805-2M49", 2.49e6, 1000.0),
        small("thermistor@2uA", 2e-6, "TF10-0805-1M24", 1.24e6, 1000.0),
        small("thermistor@10uA", 10e-6, "TF10-0805-249K", 249e3, 1000.0),
    ];
    choice(Status::Optimal, outputs, Some(family_bill()))
}

/// The family, stopped early.
pub fn gap() -> Choice {
    let mut choice = family();
    choice.status = Status::Gap;
    choice.totals = choice.totals.map(|(total, _)| (total, total - cents(3_333)));
    choice
}

/// Two outputs, one without a design.
pub fn infeasible() -> Choice {
    let mut choice = one();
    choice.status = Status::Infeasible;
    choice.outputs.push(no_design(1000.0));
    choice
}

/// Every output has a design, but they need too many lines and too much stock.
pub fn no_common_set() -> Choice {
    let outputs = vec![
        output("pt100", 1e-3, 400.0, 250, Verdict::NoCommonSet),
        output("thermistor", 1e-5, 1000.0, 100, Verdict::NoCommonSet),
    ];
    let mut choice = choice(Status::Infeasible, outputs, None);
    choice.joint_reasons = vec![
        JointReason { rule: "purchase.lines_max", order_code: None, allowed: 3, needed: 5 },
        JointReason {
            rule: "rules.in_stock",
            order_code: Some("MV25-B".to_owned()),
            allowed: 300,
            needed: 350,
        },
    ];
    choice
}

/// A catalogue with one error and one doubt.
pub fn checked() -> CatalogCheck {
    let place = |line, column| Place {
        file: std::sync::Arc::new("parts/references.yaml".into()),
        line,
        column,
    };
    let count =
        |kind, types, offers, made_to_order| KindCount { kind, types, offers, made_to_order };
    CatalogCheck {
        folder: "parts".to_owned(),
        files: 5,
        records: 12,
        left_out: 1,
        counts: vec![
            count(Kind::Reference, 6, 6, 0),
            count(Kind::Amplifier, 4, 4, 0),
            count(Kind::Resistor, 3, 1152, 1),
            count(Kind::Lift, 1, 1, 0),
            count(Kind::Adjustment, 0, 0, 0),
        ],
        faults: vec![
            Fault {
                place: place(12, 11),
                severity: Severity::Error,
                record: Some("MV25".to_owned()),
                field: Some("grades[1].tempco".to_owned()),
                message: "`5 ppm` is a ratio".to_owned(),
                hint: Some("write a ratio per kelvin, such as `5 ppm/K`".to_owned()),
            },
            Fault {
                place: place(31, 3),
                severity: Severity::Doubt,
                record: Some("MV50".to_owned()),
                field: None,
                message: "not checked since 2019-01-01".to_owned(),
                hint: None,
            },
        ],
    }
}
