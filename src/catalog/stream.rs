//! Files as streams of documents, cut so that a broken document costs only itself.
//!
//! A line that starts with `---` (followed by a blank or the line's end) can stand in no scalar,
//! and `...` likewise (YAML 1.2.2, 9.1.2 and production 206, `c-forbidden`), so cutting at these
//! lines is exact without reading what lies between.

use super::places::Places;
use super::yaml::YamlFault;

/// One document's text.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Piece<'a> {
    /// The text, from its directives or `---` line on.
    pub text: &'a str,
    /// The line of the file on which it starts, from 1.
    pub first_line: usize,
}

/// The text of a file: UTF-8, with or without a byte order mark (which is dropped).
///
/// # Errors
/// Names the place of the first byte that is not UTF-8.
pub fn decode(bytes: &[u8]) -> Result<&str, YamlFault> {
    let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
    std::str::from_utf8(bytes).map_err(|error| {
        let good = bytes.get(..error.valid_up_to()).unwrap_or_default();
        let good = std::str::from_utf8(good).unwrap_or_default();
        let byte = bytes.get(error.valid_up_to()).copied().unwrap_or_default();
        YamlFault {
            at: Places::new(good, 1).spot(good.len()),
            message: format!("the byte 0x{byte:02X}, which is not UTF-8"),
            hint: Some("save the file as UTF-8".to_owned()),
        }
    })
}

/// Cuts a stream into its documents, in order. Comments and directives stay with the document
/// that follows them.
#[must_use]
pub fn cut(text: &str) -> Vec<Piece<'_>> {
    let mut pieces = Vec::new();
    let mut piece = Open { start: 0, first_line: 1, has_content: false };
    let mut line_number = 1;
    let mut at = 0;
    for line in lines(text) {
        let end = at + line.len();
        if is_marker(line, "---") {
            if piece.has_content {
                pieces.extend(piece.close(text, at));
                piece = Open { start: at, first_line: line_number, has_content: true };
            }
            piece.has_content = true;
        } else if is_marker(line, "...") {
            // An end mark behind nothing ends nothing.
            let before = text.get(piece.start..at).unwrap_or_default();
            if piece.has_content || lines(before).any(|line| line.starts_with('%')) {
                pieces.extend(piece.close(text, end));
            }
            piece = Open { start: end, first_line: line_number + breaks(line), has_content: false };
        } else if !line.starts_with('%') || piece.has_content {
            let content = line.trim_start_matches([' ', '\t']);
            piece.has_content |= !content.trim_end().is_empty() && !content.starts_with('#');
        }
        line_number += breaks(line);
        at = end;
    }
    pieces.extend(piece.close(text, text.len()));
    pieces
}

/// A document that is being collected.
struct Open {
    start: usize,
    first_line: usize,
    /// Whether more than blank lines, comments and directives has been seen.
    has_content: bool,
}

impl Open {
    fn close<'a>(&self, text: &'a str, end: usize) -> Option<Piece<'a>> {
        let text = text.get(self.start..end).filter(|text| !text.trim().is_empty())?;
        Some(Piece { text, first_line: self.first_line })
    }
}

/// Whether a line is a document marker: at the left edge, followed by a blank or nothing.
fn is_marker(line: &str, marker: &str) -> bool {
    let ends =
        |rest: &str| rest.is_empty() || rest.starts_with([' ', '\t']) || rest.starts_with(BREAKS);
    line.strip_prefix(marker).is_some_and(ends)
}

/// Besides LF and CR, the characters that older YAML counts as line ends, as the YAML library does.
const BREAKS: [char; 5] = ['\n', '\r', '\u{85}', '\u{2028}', '\u{2029}'];

/// Lines with their endings.
fn lines(text: &str) -> impl Iterator<Item = &str> {
    let mut rest = text;
    std::iter::from_fn(move || {
        let first = rest.find(BREAKS);
        let (line, after) = match first {
            Some(at) => {
                let width = match rest.get(at..) {
                    Some(ending) if ending.starts_with("\r\n") => 2,
                    Some(ending) => ending.chars().next().map_or(1, char::len_utf8),
                    None => 1,
                };
                rest.split_at_checked(at + width)?
            }
            None => (rest, ""),
        };
        rest = after;
        (!line.is_empty()).then_some(line)
    })
}

/// By how much a line of [`lines`] moves the line number that an editor shows.
fn breaks(line: &str) -> usize {
    usize::from(line.ends_with(['\n', '\r']))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use serde::Deserialize;

    fn cuts(text: &str) -> Vec<(&str, usize)> {
        cut(text).into_iter().map(|piece| (piece.text, piece.first_line)).collect()
    }

    #[test]
    fn cuts_at_markers_only() {
        assert_eq!(cuts("a: 1\n---\nb: 2\n"), [("a: 1\n", 1), ("---\nb: 2\n", 2)]);
        assert_eq!(cuts("a: 1\r\n--- # c\r\nb: 2"), [("a: 1\r\n", 1), ("--- # c\r\nb: 2", 2)]);
        assert_eq!(cuts("--- {a: 1}\n--- {b: 2}\n"), [("--- {a: 1}\n", 1), ("--- {b: 2}\n", 2)]);
        assert_eq!(cuts("a: |\n  ---\n----\n ---\n"), [("a: |\n  ---\n----\n ---\n", 1)]);
        assert_eq!(cuts("a: 1\n...\nb: 2\n"), [("a: 1\n...\n", 1), ("b: 2\n", 3)]);
        assert_eq!(cuts("\n# head\n---\na: 1\n"), [("\n# head\n---\na: 1\n", 1)]);
        assert_eq!(cuts("%YAML 1.2\n---\na: 1\n"), [("%YAML 1.2\n---\na: 1\n", 1)]);
        assert_eq!(
            cuts("a: 1\n...\n%YAML 1.2\n--- \nb: 2\n"),
            [("a: 1\n...\n", 1), ("%YAML 1.2\n--- \nb: 2\n", 3)]
        );
        assert_eq!(cuts("\n \n"), []);
        assert_eq!(cuts("a: 1\n...\n...\n# c\n...\n"), [("a: 1\n...\n", 1)]);
    }

    #[test]
    fn decoding_drops_the_mark_and_names_the_first_bad_byte() {
        assert_eq!(decode(b"\xef\xbb\xbfa: 1"), Ok("a: 1"));
        let fault = decode(b"a: 1\nb: \xc2\xb5\xff").unwrap_err();
        assert_eq!((fault.at.line, fault.at.column), (2, 5));
        assert_eq!(fault.message, "the byte 0xFF, which is not UTF-8");
    }

    fn values(text: &str) -> Option<Vec<serde_yaml::Value>> {
        serde_yaml::Deserializer::from_str(text)
            .map(|document| serde_yaml::Value::deserialize(document).ok())
            .collect()
    }

    /// Whether a directive stands within a document. The standard wants a `...` before directives
    /// (YAML 1.2.2, 9.2); behind some documents the library lets it pass, cut documents don't.
    fn has_stray_directive(text: &str) -> bool {
        let mut open = false;
        lines(text).any(|line| {
            let stray = open && line.starts_with('%');
            let content = !line.trim().is_empty() && !line.trim_start().starts_with(['#', '%']);
            open = (open || content) && !is_marker(line, "...");
            stray
        })
    }

    proptest! {
        /// Texts from the pieces that matter; where the library reads the stream as a whole, the
        /// cut documents read one by one give the same values (empty ones aside).
        #[test]
        fn cut_documents_are_the_documents_of_the_stream(
            parts in proptest::collection::vec(
                prop::sample::select(vec![
                    "---", "...", "--- ", "---\t", "----", " ---", "a: 1", "b: |", "  x", "  ---",
                    "- 1", "\n", "\r\n", "\n", "\n", "# c", "\"q", "\"", "'", "{", "}", "[a,", "]",
                    "%YAML 1.1", "\u{2028}", ">", "plain", "&x", "*x", ": ",
                ]),
                0..24,
            )
        ) {
            let text = parts.concat();
            if let (false, Some(whole)) = (has_stray_directive(&text), values(&text)) {
                let single: Option<Vec<_>> = cut(&text)
                    .into_iter()
                    .map(|piece| values(piece.text).map(|mut found| {
                        prop_assert!(found.len() <= 1);
                        Ok(found.pop())
                    }).transpose())
                    .collect::<Result<Option<Vec<_>>, _>>()?;
                let keep = |found: &serde_yaml::Value| !found.is_null();
                let single: Option<Vec<_>> =
                    single.map(|found| found.into_iter().flatten().filter(keep).collect());
                prop_assert_eq!(single, Some(whole.into_iter().filter(keep).collect()));
            }
        }

        #[test]
        fn any_text_is_cut_into_slices_with_right_lines(text in "(?s).{0,200}") {
            for piece in cut(&text) {
                let offset = piece.text.as_ptr() as usize - text.as_ptr() as usize;
                prop_assert_eq!(Places::new(&text, 1).spot(offset).line, piece.first_line);
                let _ = super::super::yaml::read_document(piece.text, piece.first_line);
            }
        }
    }
}
