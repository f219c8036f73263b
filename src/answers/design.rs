//! From the search's indices to designs that can be shown and checked.

use crate::circuit::{Design, Element, LiftStack, Network};
use crate::search::{OutputSpace, Pick};

use super::choice::{ChosenDesign, ChosenElement};

/// The design that a pick stands for.
#[must_use]
pub(super) fn design_of<'a>(space: &OutputSpace<'a>, pick: &Pick) -> Design<'a> {
    let market = space.market;
    let frame = &space.frames[pick.frame as usize];
    let mut elements: Vec<Element<'a>> = pick
        .network
        .offers()
        .iter()
        .map(|&offer| {
            let (value, of) = market.resistor(offer);
            Element {
                of: market.types[of as usize],
                ohms: market.values[value as usize],
                order_code: market.order_code(offer),
            }
        })
        .collect();
    elements.sort_by(|a, b| a.order_code.cmp(&b.order_code));
    Design {
        reference: market.references[pick.reference as usize],
        amplifier: market.amplifiers[pick.amplifier as usize],
        network: Network { connection: pick.network.connection, elements },
        lift: frame.lift.map(|(lift, count)| LiftStack { of: market.lifts[lift as usize], count }),
        adjustment: frame.adjustment.map(|a| market.adjustments[a as usize].0),
    }
}

/// A design by its order codes.
#[must_use]
pub(super) fn chosen(design: &Design<'_>) -> ChosenDesign {
    ChosenDesign {
        reference: design.reference.order_code.clone(),
        amplifier: design.amplifier.order_code.clone(),
        connection: design.network.connection,
        ohms: design.network.ohms(),
        elements: design
            .network
            .elements
            .iter()
            .map(|element| ChosenElement {
                order_code: element.order_code.clone(),
                ohms: element.ohms.value(),
            })
            .collect(),
        lift: design.lift.map(|stack| (stack.of.order_code.clone(), stack.count)),
        adjustment: design.adjustment.map(|a| a.order_code.clone()),
    }
}
