//! The program against a plain exhaustive search over random small cases.

mod brute;

use ampthrift::circuit;
use brute::ask;
use brute::compare::{as_design, differences};
use brute::designs::{Pick, Shelf};
use brute::dice::Dice;
use brute::physics;

/// How many random cases are tried.
fn cases() -> u64 {
    std::env::var("AMPTHRIFT_CASES").ok().and_then(|text| text.parse().ok()).unwrap_or(300)
}

/// A design with any parts, whether it passes or not.
fn any_pick(dice: &mut Dice, shelf: &Shelf<'_>) -> Option<Pick> {
    let counts = [&shelf.references.len(), &shelf.amplifiers.len(), &shelf.networks.len()];
    if counts.contains(&&0) {
        return None;
    }
    Some(Pick {
        reference: dice.below(shelf.references.len()),
        amplifier: dice.below(shelf.amplifiers.len()),
        network: dice.below(shelf.networks.len()),
        lift: (!shelf.lifts.is_empty() && dice.chance(50)).then(|| {
            let lift = dice.below(shelf.lifts.len());
            (lift, 1 + dice.below(shelf.lifts[lift].in_series_max as usize) as u32)
        }),
        adjustment: (!shelf.adjustments.is_empty() && dice.chance(50))
            .then(|| dice.below(shelf.adjustments.len())),
    })
}

#[test]
fn figures_of_any_design_agree() {
    for seed in 0..cases() {
        let (catalog, request) = ask::case(seed);
        let shelf = Shelf::new(&catalog, &request);
        let mut dice = Dice::new(seed);
        for output in &request.outputs {
            for _ in 0..50 {
                let Some(pick) = any_pick(&mut dice, &shelf) else { break };
                let built = shelf.built(pick);
                let plain = physics::evaluate(&request, output, &built);
                let program = circuit::evaluate(&request, output, &as_design(&shelf, pick));
                let (program, plain) = match (program, plain) {
                    (Ok(program), Some(plain)) => (program, plain),
                    (Err(_), None) => continue,
                    (program, plain) => panic!("seed {seed}: {program:#?} against {plain:#?}"),
                };
                let found = differences(&program, &plain);
                assert!(
                    found.is_empty(),
                    "seed {seed}, {}: {}\n{built:#?}\n{request:#?}\n{program:#?}\n{plain:#?}",
                    output.name,
                    found.join("\n")
                );
            }
        }
    }
}
