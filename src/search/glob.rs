//! Order code patterns: `*` stands for any text, everything else for itself.

/// Whether a pattern matches a whole order code.
pub(super) fn matches(pattern: &str, code: &str) -> bool {
    meet(pattern.as_bytes(), code.as_bytes(), false)
}

/// Whether a pattern can match some code of a made-to-order type, whose value is open: the
/// type's code pattern with `{value}` read as any text.
pub(super) fn may_match_type(pattern: &str, code_pattern: &str) -> bool {
    let open = code_pattern.replace("{value}", "*");
    meet(pattern.as_bytes(), open.as_bytes(), true)
}

/// Whether two texts with wildcards have a common instance; `*` is a wildcard on the right only
/// when `right_open`. Plain dynamic programming: patterns are user input and may be long.
fn meet(left: &[u8], right: &[u8], right_open: bool) -> bool {
    let wild = |byte: u8, open: bool| open && byte == b'*';
    // row[j]: whether the left text so far and right[..j] have a common instance.
    let mut row = vec![false; right.len() + 1];
    row[0] = true;
    for (j, &byte) in right.iter().enumerate() {
        row[j + 1] = row[j] && wild(byte, right_open);
    }
    for &from_left in left {
        let star = from_left == b'*';
        let mut next = vec![false; right.len() + 1];
        next[0] = row[0] && star;
        for (j, &from_right) in right.iter().enumerate() {
            let right_star = wild(from_right, right_open);
            next[j + 1] = if star || right_star {
                row[j + 1] || next[j] || row[j]
            } else {
                row[j] && from_left == from_right
            };
        }
        row = next;
    }
    row[right.len()]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_star_stands_for_any_text() {
        assert!(matches("KS-*", "KS-V25-A"));
        assert!(matches("*", ""));
        assert!(matches("a*b*c", "a--b--c"));
        assert!(matches("KS-V25", "KS-V25"));
        assert!(!matches("KS-V25", "KS-V25-A"));
        assert!(!matches("a*b*c", "a--c--b"));
        // A star in an order code itself is plain text.
        assert!(!matches("ab", "a*"));
    }

    #[test]
    fn an_open_value_meets_patterns() {
        assert!(may_match_type("FO-4K99", "FO-{value}"));
        assert!(may_match_type("*-9K*", "FO-{value}"));
        assert!(!may_match_type("FP-4K99", "FO-{value}"));
        assert!(may_match_type("FO-*-T", "FO-{value}-T"));
    }
}
