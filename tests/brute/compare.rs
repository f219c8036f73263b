//! Where the program's figures of a design and the plain ones part.

use ampthrift::circuit::Evaluation;
use ampthrift::circuit::{self, Connection};
use ampthrift::quantity::Exact;

use super::designs::{Pick, Shelf};
use super::physics::{Joined, Worked};

/// Equal to 1e-9 of the larger, or to less than anything that matters in the unit.
fn equal(a: f64, b: f64, tiny: f64) -> bool {
    (a - b).abs() <= (1e-9 * a.abs().max(b.abs())).max(tiny)
}

/// ppm below this are rounding of the mismatch.
const TINY_PPM: f64 = 1e-8;

/// The program's word for a connection.
pub fn connection(joined: Joined) -> Connection {
    match joined {
        Joined::Single => Connection::Single,
        Joined::Series => Connection::Series,
        Joined::Parallel => Connection::Parallel,
    }
}

/// A pick as the program's own type of design.
pub fn as_design<'s>(shelf: &'s Shelf<'_>, pick: Pick) -> circuit::Design<'s> {
    let net = &shelf.networks[pick.network];
    let element = |&value: &usize| {
        let value = &shelf.values[value];
        circuit::Element {
            of: value.of,
            ohms: Exact::from_decimal(value.exact),
            order_code: value.code.clone(),
        }
    };
    circuit::Design {
        reference: shelf.references[pick.reference],
        amplifier: shelf.amplifiers[pick.amplifier],
        network: circuit::Network {
            connection: connection(net.joined),
            elements: net.values.iter().map(element).collect(),
        },
        lift: pick.lift.map(|(lift, count)| circuit::LiftStack { of: shelf.lifts[lift], count }),
        adjustment: pick.adjustment.map(|at| shelf.adjustments[at]),
    }
}

/// What differs, one line each; empty when all agrees.
pub fn differences(program: &Evaluation, plain: &Worked<'_>) -> Vec<String> {
    let mut all = Vec::new();
    if !equal(program.total.value(), plain.total, TINY_PPM) {
        all.push(format!("total {} against {}", program.total.value(), plain.total));
    }
    terms(program, plain, &mut all);
    limits(program, plain, &mut all);
    let stated: Vec<_> =
        program.not_stated.iter().map(|line| (line.order_code.as_str(), line.field)).collect();
    if stated != plain.missing {
        all.push(format!("not stated {stated:?} against {:?}", plain.missing));
    }
    let own = &program.compliance;
    for (name, program, plain) in [
        ("load_min", own.load_min.value(), plain.load_min),
        ("load_max", own.load_max.value(), plain.load_max),
    ] {
        if !equal(program, plain, 1e-12) {
            all.push(format!("{name} {program} against {plain}"));
        }
    }
    let ohms = own.output.map(|ohms| ohms.value());
    let same = match (ohms, plain.output_ohms) {
        (None, None) => true,
        (Some(program), Some(plain)) => equal(program, plain, 0.0),
        _ => false,
    };
    if !same {
        all.push(format!("output resistance {ohms:?} against {:?}", plain.output_ohms));
    }
    for (name, program, plain) in [
        ("window", program.window_holds, plain.window),
        ("accuracy", program.accuracy_holds, plain.accurate),
    ] {
        if program != plain {
            all.push(format!("{name} holds: {program} against {plain}"));
        }
    }
    all
}

fn terms(program: &Evaluation, plain: &Worked<'_>, all: &mut Vec<String>) {
    let listed: Vec<_> =
        program.terms.iter().map(|line| (line.term.def().name, line.ppm.value())).collect();
    for &(name, ppm) in &plain.terms {
        match listed.iter().filter(|(other, _)| *other == name).collect::<Vec<_>>()[..] {
            [&(_, own)] if equal(own, ppm, TINY_PPM) => {}
            [&(_, own)] => all.push(format!("{name} {own} against {ppm}")),
            ref many => all.push(format!("{name} listed {} times, for {ppm}", many.len())),
        }
    }
    for (name, ppm) in listed {
        if !plain.terms.iter().any(|(other, _)| *other == name) {
            all.push(format!("{name} {ppm} against no such term"));
        }
    }
}

fn limits(program: &Evaluation, plain: &Worked<'_>, all: &mut Vec<String>) {
    let tiny = |unit: &str| match unit {
        "V" | "degC" => 1e-12,
        "ppm" => TINY_PPM,
        _ => 0.0,
    };
    for line in &plain.limits {
        let own: Vec<_> =
            program.limits.iter().filter(|own| own.limit.def().name == line.name).collect();
        let [own] = own[..] else {
            all.push(format!("{} listed {} times", line.name, own.len()));
            continue;
        };
        if own.limit.def().unit != line.unit {
            all.push(format!("{} in {}", line.name, own.limit.def().unit));
        }
        // Where two ends have the same margin either may be given.
        let sides = equal(own.value, line.value, tiny(line.unit))
            && equal(own.bound, line.bound, tiny(line.unit));
        let slack = 1e-12 * own.value.abs().max(own.bound.abs());
        let same_margin = equal(own.margin, line.margin, tiny(line.unit).max(slack));
        if !same_margin || !(sides || line.tied) {
            all.push(format!("{own:?} against {line:?}"));
        }
    }
    for own in &program.limits {
        if !plain.limits.iter().any(|line| line.name == own.limit.def().name) {
            all.push(format!("{own:?} against no such limit"));
        }
    }
}
