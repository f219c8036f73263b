//! Byte offsets of a text as lines and columns.

use super::yaml::Spot;

/// At most this many bytes are walked to count a column, so that a huge one-line file stays fast.
const STRIDE: usize = 256;

/// Turns byte offsets of one text into lines and columns.
pub(super) struct Places<'a> {
    text: &'a str,
    /// Known places, offsets rising; the first is offset 0.
    marks: Vec<(usize, Spot)>,
}

impl<'a> Places<'a> {
    /// Prepares a text that starts on `first_line` of its file. Lines end at LF, CRLF or CR.
    pub(super) fn new(text: &'a str, first_line: usize) -> Self {
        let mut spot = Spot { line: first_line, column: 1 };
        let mut marks = vec![(0, spot)];
        let mut marked = 0;
        let mut characters = text.char_indices().peekable();
        while let Some((at, character)) = characters.next() {
            let before_lf = characters.peek().is_some_and(|&(_, next)| next == '\n');
            let ends_line = character == '\n' || (character == '\r' && !before_lf);
            spot = if ends_line {
                Spot { line: spot.line + 1, column: 1 }
            } else {
                Spot { column: spot.column + 1, ..spot }
            };
            let next = at + character.len_utf8();
            if ends_line || next - marked >= STRIDE {
                marks.push((next, spot));
                marked = next;
            }
        }
        Self { text, marks }
    }

    /// The line and column of a byte offset; an offset past the end counts as the end.
    pub(super) fn spot(&self, offset: usize) -> Spot {
        let after = self.marks.partition_point(|&(at, _)| at <= offset);
        let Some(&(from, spot)) = after.checked_sub(1).and_then(|index| self.marks.get(index))
        else {
            return Spot { line: 1, column: 1 };
        };
        let rest = self.text.get(from..).unwrap_or_default();
        let walked = rest.char_indices().take_while(|&(at, _)| from + at < offset).count();
        Spot { column: spot.column + walked, ..spot }
    }

    /// The byte offset of a slice borrowed from the text; `None` for any other string.
    pub(super) fn offset_of(&self, part: &str) -> Option<usize> {
        let offset = (part.as_ptr() as usize).checked_sub(self.text.as_ptr() as usize)?;
        let end = offset.checked_add(part.len())?;
        (end <= self.text.len()).then_some(offset)
    }

    /// The text before an offset, empty when the offset is not in the text.
    pub(super) fn before(&self, offset: usize) -> &'a str {
        self.text.get(..offset).unwrap_or_default()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn counts_lines_of_every_ending_and_columns_in_characters() {
        let text = "ab\r\nµΩc\rd\ne";
        let places = Places::new(text, 7);
        let found = |part: &str| {
            let spot = places.spot(text.find(part).unwrap());
            (spot.line, spot.column)
        };
        assert_eq!(found("b"), (7, 2));
        assert_eq!(found("c"), (8, 3));
        assert_eq!(found("d"), (9, 1));
        assert_eq!(found("e"), (10, 1));
        assert_eq!(places.spot(1000), Spot { line: 10, column: 2 });
    }

    #[test]
    fn a_long_line_has_right_columns_beyond_the_stride() {
        let text = "µ".repeat(3 * STRIDE) + "x";
        let places = Places::new(&text, 1);
        assert_eq!(places.spot(6 * STRIDE).column, 3 * STRIDE + 1);
        assert_eq!(places.spot(2 * STRIDE + 2).column, STRIDE + 2);
    }

    #[test]
    fn only_slices_of_the_text_have_an_offset() {
        let text = String::from("abc def");
        let other = String::from("def");
        let places = Places::new(&text, 1);
        assert_eq!(places.offset_of(&text[4..]), Some(4));
        assert_eq!(places.offset_of(&other), None);
    }
}
