//! What to heed where the circuit could hurt someone. Plain remarks, no claim of conformity.

use crate::quantity::{Amperes, engineering};
use crate::request::Request;

/// Supplies up to this, in volts, need no protection against touch where it is dry and indoors:
/// 60 V ripple-free DC (EN 60204-1, 6.4).
const TOUCHABLE: f64 = 60.0;

/// The end of extra-low voltage, in volts: 120 V ripple-free DC (IEC 61140).
const EXTRA_LOW: f64 = 120.0;

/// About the least direct current that a body feels (IEC 60479-1, zone DC-1; from memory).
const FELT: Amperes = Amperes::new(2e-3);

/// Remarks on safety for a request; empty where its supplies are harmless to touch.
#[must_use]
pub fn cautions(request: &Request) -> Vec<String> {
    let conditions = &request.conditions;
    let across = (conditions.supply.high() - conditions.negative_rail.low()).value();
    if across <= TOUCHABLE {
        return Vec::new();
    }
    let spanned = engineering(across, "V", 4);
    let mut remarks = Vec::new();
    remarks.push(if across > EXTRA_LOW {
        format!(
            "Danger: the supply spans {spanned}. That is above extra-low voltage (120 V \
             ripple-free DC, IEC 61140). Touching it can kill. It needs basic and fault protection."
        )
    } else {
        format!(
            "Caution: the supply spans {spanned}. Above 60 V ripple-free DC (dry, indoors; EN \
             60204-1, 6.4) live parts need protection against touch. Where it is wet or outdoors \
             the limit is lower."
        )
    });
    let felt: Vec<&str> = request
        .outputs
        .iter()
        .filter(|output| output.current.value() > FELT)
        .map(|output| output.name.as_str())
        .collect();
    if !felt.is_empty() {
        remarks.push(format!(
            "Currents above about 2 mA DC are felt when touched (IEC 60479-1, zone DC-1; from \
             memory): {}.",
            felt.join(", ")
        ));
    }
    remarks.push(
        "Capacitors hold their charge after switch-off. Discharge and measure before touching."
            .to_owned(),
    );
    remarks.push(
        "Local codes come first. Leave the safety design to licensed practice. Nothing here is a \
         certification."
            .to_owned(),
    );
    remarks
}
