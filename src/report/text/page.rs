//! A page of text under way: indented lines, wrapped paragraphs, headings.

use unicode_width::UnicodeWidthStr;

use crate::report::{Ink, Screen};

/// How far the body of a section stands in from its heading.
pub(super) const INDENT: usize = 2;

/// A space at which no line breaks; the page writes it as a plain space.
const TIE: char = '\u{a0}';

/// The text with its spaces tied, so that a wrapped line never parts `249` from `kΩ`.
pub(super) fn tied(text: &str) -> String {
    text.replace(' ', "\u{a0}")
}

/// A text from a file of the user, made harmless for a terminal: control characters (which can
/// hide escape sequences) and line ends become a visible replacement.
pub(super) fn plain(text: &str) -> String {
    let visible = |c: char| if is_unsafe(c) { char::REPLACEMENT_CHARACTER } else { c };
    text.chars().map(visible).collect()
}

/// Control characters, and those that turn the direction of writing.
fn is_unsafe(c: char) -> bool {
    c.is_control()
        || matches!(c, '\u{2028}' | '\u{2029}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}')
}

/// `1 output`, `5 outputs`.
pub(super) fn counted(number: u64, one: &str, many: &str) -> String {
    format!("{number} {}", if number == 1 { one } else { many })
}

/// Words in lines of at most `first` columns for the first and `width` for the others. A single
/// word that is longer keeps its line to itself and runs over: a broken order code could not be
/// copied.
pub(super) fn wrap(text: &str, first: usize, width: usize) -> Vec<String> {
    let mut lines: Vec<String> = Vec::new();
    let mut line = String::new();
    // Ties give way before a line runs over.
    let words = text.split(' ').flat_map(|word| {
        let loose = word.width() > first.min(width);
        word.split(move |c| loose && c == TIE)
    });
    for word in words.filter(|word| !word.is_empty()) {
        let room = if lines.is_empty() { first } else { width };
        if !line.is_empty() && line.width() + 1 + word.width() > room {
            lines.push(std::mem::take(&mut line));
        }
        if !line.is_empty() {
            line.push(' ');
        }
        line.push_str(word);
    }
    if !line.is_empty() {
        lines.push(line);
    }
    lines
}

/// A page under way.
#[derive(Debug)]
pub(super) struct Page {
    /// How it is laid out.
    pub(super) screen: Screen,
    text: String,
}

impl Page {
    pub(super) const fn new(screen: Screen) -> Self {
        Self { screen, text: String::new() }
    }

    /// One line, as it is.
    pub(super) fn line(&mut self, indent: usize, line: &str) {
        let line = line.trim_end();
        if !line.is_empty() {
            self.text.push_str(&" ".repeat(indent));
            self.text.push_str(line);
        }
        self.text.push('\n');
    }

    /// An empty line, unless the page is empty or ends with one.
    pub(super) fn gap(&mut self) {
        if !self.text.is_empty() && !self.text.ends_with("\n\n") {
            self.text.push('\n');
        }
    }

    /// A heading after an empty line, with a remark in brackets behind it where it fits.
    pub(super) fn heading(&mut self, title: &str, remark: &str) {
        self.gap();
        let painted = self.screen.paint(Ink::Bold, title).into_owned();
        if remark.is_empty() {
            self.line(0, &painted);
        } else if title.width() + 3 + remark.width() <= self.screen.width {
            self.line(0, &format!("{painted} ({remark})"));
        } else {
            self.line(0, &painted);
            self.wrapped(INDENT, INDENT, remark);
        }
    }

    /// A paragraph whose first line stands in by `indent` and all others by `hang`.
    pub(super) fn wrapped(&mut self, indent: usize, hang: usize, text: &str) {
        self.led(indent, "", hang, None, text);
    }

    /// A paragraph behind a lead word of its own emphasis; `hang` is counted from the margin.
    pub(super) fn led(
        &mut self,
        indent: usize,
        lead: &str,
        hang: usize,
        ink: Option<Ink>,
        text: &str,
    ) {
        let start = indent + lead.width();
        let room = |taken: usize| self.screen.width.saturating_sub(taken);
        let mut lines = wrap(text, room(start), room(hang)).into_iter();
        let painted = ink.map_or(lead.into(), |ink| self.screen.paint(ink, lead));
        let first = lines.next().unwrap_or_default().replace(TIE, " ");
        self.line(indent, &format!("{painted}{first}"));
        for line in lines {
            self.line(hang, &line.replace(TIE, " "));
        }
    }

    /// `label   text`, the text in a column of its own.
    pub(super) fn field(&mut self, label: &str, label_width: usize, text: &str) {
        let lead = format!("{label:<label_width$}  ");
        let hang = INDENT + label_width + 2;
        self.led(INDENT, &lead, hang, None, text);
    }

    /// The finished text.
    pub(super) fn finish(self) -> String {
        self.text
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn page(width: usize) -> Page {
        Page::new(Screen { width, colour: false })
    }

    #[test]
    fn long_words_stay_whole() {
        let code = "RESISTOR-WITH-A-VERY-LONG-ORDER-CODE-4K99";
        assert_eq!(wrap(&format!("buy {code} now"), 10, 10), ["buy", code, "now"]);
    }

    #[test]
    fn tied_figures_move_together() {
        assert_eq!(wrap(&format!("about {}", tied("249 kΩ")), 9, 9), ["about", "249\u{a0}kΩ"]);
    }

    #[test]
    fn ties_give_way_where_a_line_would_run_over() {
        assert_eq!(
            wrap(&tied("reference tempco 105 ppm"), 12, 12),
            ["reference", "tempco 105", "ppm"]
        );
    }

    #[test]
    fn paragraphs_hang() {
        let mut page = page(20);
        page.field("lift", 6, &format!("one two three {}", tied("4 kΩ")));
        assert_eq!(page.finish(), "  lift    one two\n          three 4 kΩ\n");
    }

    #[test]
    fn no_line_is_wider_than_the_page() {
        for width in 20..60 {
            let mut page = page(width);
            page.led(2, "- ", 4, None, "the quick brown fox jumps over the lazy dog, twice a day");
            page.led(0, "note: ", 2, None, "the quick brown fox jumps over the lazy dog");
            for line in page.finish().lines() {
                assert!(line.width() <= width, "{width}: {line:?}");
            }
        }
    }

    #[test]
    fn control_characters_are_shown_not_obeyed() {
        assert_eq!(plain("a\u{1b}[31mb\nc\u{202e}d"), "a\u{fffd}[31mb\u{fffd}c\u{fffd}d");
        assert_eq!(plain("Größe 10 kΩ ±1 %"), "Größe 10 kΩ ±1 %");
    }
}
