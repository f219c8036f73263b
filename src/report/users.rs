//! Who uses an order code, and as what: gathered from the designs, for the purchase list.

use std::collections::BTreeMap;

use crate::answers::{Choice, ChosenDesign, Verdict};
use crate::catalog::Kind;

/// The users of one order code.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct User<'a> {
    /// Kind of part.
    pub(super) kind: Kind,
    /// Outputs in the order of the request, each once.
    pub(super) outputs: Vec<&'a str>,
}

/// The users of every order code of a choice.
pub(super) fn users(choice: &Choice) -> BTreeMap<&str, User<'_>> {
    let mut users: BTreeMap<&str, User<'_>> = BTreeMap::new();
    for output in &choice.outputs {
        let Verdict::Chosen(design, _) = &output.verdict else { continue };
        for (kind, code) in codes(design) {
            let user = users.entry(code).or_insert(User { kind, outputs: Vec::new() });
            if user.outputs.last() != Some(&output.name.as_str()) {
                user.outputs.push(&output.name);
            }
        }
    }
    users
}

/// The order codes of a design's parts; an adjustment is a step, not a part.
fn codes(design: &ChosenDesign) -> Vec<(Kind, &str)> {
    let mut codes = vec![
        (Kind::Reference, design.reference.as_str()),
        (Kind::Amplifier, design.amplifier.as_str()),
    ];
    codes.extend(design.elements.iter().map(|e| (Kind::Resistor, e.order_code.as_str())));
    codes.extend(design.lift.iter().map(|(code, _)| (Kind::Lift, code.as_str())));
    codes
}
