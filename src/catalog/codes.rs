//! Order codes: how they are formed, and that each is given once.

use super::model::Kind;
use super::value::{Sink, ValueSet};
use super::view::View;

/// The order code of a type, `{value}` still in it for resistors. `None` after an error.
pub(super) fn code_pattern(view: View<'_>, sink: &mut Sink) -> Option<String> {
    let part = view.text("part")?;
    let grade = view.grade.map(|grade| grade.name.as_str());
    let Some(stated) = view.text("order_code") else {
        // A faulty code has been reported; a default in its place would hide that.
        if view.entry("order_code").is_some() {
            return None;
        }
        let own = grade.map_or_else(|| part.clone(), |grade| format!("{part}-{grade}"));
        let behind = if view.kind == Kind::Resistor { "-{value}" } else { "" };
        return Some(own + behind);
    };
    let entry = view.entry("order_code")?;
    let mut refuse = |message: &str, hint: &str| {
        sink.error(entry.at, &entry.path, message, hint);
    };
    let mut sound = true;
    for placeholder in placeholders(&stated) {
        let problem = match placeholder {
            "grade" if grade.is_none() => {
                Some(("`{grade}` in a record without grades", "leave it out, or give `grades`"))
            }
            "value" if view.kind != Kind::Resistor => {
                Some(("`{value}` in a record that has no values", "leave it out"))
            }
            "grade" | "value" => None,
            _ => Some(("unknown braces in an order code", "only {grade} and {value} are replaced")),
        };
        if let Some((message, hint)) = problem {
            refuse(message, hint);
            sound = false;
        }
    }
    let several = match view.values() {
        Some(ValueSet::Listed { values, .. }) => values.len() > 1,
        Some(ValueSet::Any { .. }) => true,
        None => false,
    };
    if several && !stated.contains("{value}") {
        refuse(
            "no `{value}` in the order code of several values",
            "all values would have the same code; put {value} where the value goes",
        );
        sound = false;
    }
    sound.then(|| stated.replace("{grade}", grade.unwrap_or_default()))
}

/// What stands between braces in a code.
fn placeholders(code: &str) -> impl Iterator<Item = &str> {
    code.split('{').skip(1).map(|rest| rest.split('}').next().unwrap_or(rest))
}
