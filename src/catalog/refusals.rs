//! What is refused before the YAML library sees a document, because the library is slow, wrong or
//! silent about the place there.

use std::collections::BTreeSet;

use super::places::Places;
use super::yaml::YamlFault;

/// Looks for all of it.
pub(super) fn refuse(text: &str, places: &Places<'_>) -> Result<(), YamlFault> {
    refuse_control_characters(text, places)?;
    refuse_deep_brackets(text, places)?;
    refuse_repeated_anchors(text, places)
}

/// The library reports these without a place.
fn refuse_control_characters(text: &str, places: &Places<'_>) -> Result<(), YamlFault> {
    let refused = |c: char| {
        (c.is_control() && !matches!(c, '\t' | '\n' | '\r' | '\u{85}'))
            || matches!(c, '\u{fffe}' | '\u{ffff}')
    };
    let Some((at, found)) = text.char_indices().find(|&(_, c)| refused(c)) else { return Ok(()) };
    Err(YamlFault {
        at: places.spot(at),
        message: format!("the control character U+{:04X}", u32::from(found)),
        hint: Some("remove it, or write it as an escape in a double-quoted text".to_owned()),
    })
}

/// The library's time grows with the square of the depth of brackets, and it finds out only at
/// the end. Brackets within texts count too, which no sane document notices.
fn refuse_deep_brackets(text: &str, places: &Places<'_>) -> Result<(), YamlFault> {
    let mut depth = 0usize;
    for (at, byte) in text.bytes().enumerate() {
        match byte {
            b'[' | b'{' => depth += 1,
            b']' | b'}' => depth = depth.saturating_sub(1),
            _ => {}
        }
        if depth > DEEPEST {
            let (message, hint) = TOO_DEEP;
            return Err(YamlFault {
                at: places.spot(at),
                message: message.to_owned(),
                hint: Some(hint.to_owned()),
            });
        }
    }
    Ok(())
}

/// More brackets than any document nests.
const DEEPEST: usize = 256;

pub(super) const TOO_DEEP: (&str, &str) =
    ("nested too deeply", "a record needs no more than a few levels");

/// The library resolves aliases wrongly once an anchor name is defined again, so a document that
/// has aliases may define each anchor once.
fn refuse_repeated_anchors(text: &str, places: &Places<'_>) -> Result<(), YamlFault> {
    let token = |mark: char| {
        text.match_indices(mark).filter_map(move |(at, _)| {
            let before = text.get(..at)?.chars().next_back();
            let opens = |c: char| c.is_whitespace() || matches!(c, '[' | '{' | ',' | '-' | ':');
            let ends = |c: char| c.is_whitespace() || matches!(c, ']' | '}' | ',');
            let name = text.get(at + 1..)?.split(ends).next().filter(|name| !name.is_empty())?;
            before.is_none_or(opens).then_some((at, name))
        })
    };
    if token('*').next().is_none() {
        return Ok(());
    }
    let mut seen = BTreeSet::new();
    for (at, name) in token('&') {
        if !seen.insert(name) {
            return Err(YamlFault {
                at: places.spot(at),
                message: format!("the anchor &{name} is defined twice"),
                hint: Some("give each anchor of a document its own name".to_owned()),
            });
        }
    }
    Ok(())
}
