//! The nearest known name for one that is not known.

/// Words longer than this are no misspelling, and comparing them would cost too much.
const LONGEST: usize = 80;

/// The known name nearest to `word` by edits (case, `-` and `_` aside), with the count of edits;
/// at equal distance the first known. `None` when nothing is known or the word is very long.
fn nearest<'k>(word: &str, known: impl IntoIterator<Item = &'k str>) -> Option<(usize, &'k str)> {
    if word.len() > LONGEST {
        return None;
    }
    let plain = |text: &str| text.to_lowercase().replace(['-', ' '], "_");
    let wanted = plain(word);
    known
        .into_iter()
        .map(|name| (strsim::osa_distance(&wanted, &plain(name)), name))
        .min_by_key(|(edits, _)| *edits)
}

/// The nearest known name, however far off it is; for short fixed lists such as field names.
#[must_use]
pub fn nearest_name<'k>(word: &str, known: impl IntoIterator<Item = &'k str>) -> Option<&'k str> {
    nearest(word, known).map(|(_, name)| name)
}

/// The known name that was probably meant: at most a third of the characters differ. For order
/// codes, where a far one helps nobody.
#[must_use]
pub fn find_suggestion<'k>(
    word: &str,
    known: impl IntoIterator<Item = &'k str>,
) -> Option<&'k str> {
    let allowed = (word.chars().count() / 3).max(1);
    nearest(word, known).filter(|(edits, _)| *edits <= allowed).map(|(_, name)| name)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_what_was_meant() {
        let known = ["tempco", "tolerance", "lead_time"];
        assert_eq!(nearest_name("tolerence", known), Some("tolerance"));
        assert_eq!(nearest_name("Lead-Time", known), Some("lead_time"));
        assert_eq!(nearest_name("x", known), Some("tempco"));
        assert_eq!(find_suggestion("temcpo", known), Some("tempco"));
        assert_eq!(find_suggestion("colour", known), None);
        assert_eq!(find_suggestion(&"x".repeat(1000), known), None);
        assert_eq!(nearest_name("x", []), None);
    }
}
