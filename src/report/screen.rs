//! What the place of output can show, decided from plain facts.

use std::borrow::Cow;

/// Facts about where standard output goes, gathered by the command line.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Terminal {
    /// Whether it is a terminal.
    pub is_terminal: bool,
    /// Its width in columns, where it tells.
    pub columns: Option<usize>,
    /// A width that the user asks for through the `COLUMNS` variable.
    pub columns_variable: Option<usize>,
    /// Whether `NO_COLOR` is set and not empty.
    pub no_color: bool,
    /// Whether `TERM` is `dumb`.
    pub is_dumb: bool,
}

/// How text is laid out.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Screen {
    /// Columns that lines should keep to.
    pub width: usize,
    /// Whether escape sequences for colour may be written.
    pub colour: bool,
}

/// The few emphases that the text output knows.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Ink {
    /// Headings.
    Bold,
    /// It passes.
    Good,
    /// It fails.
    Bad,
}

impl Screen {
    /// Narrower than this, lines are allowed to run over instead.
    const NARROWEST: usize = 40;
    /// Wider than this, the eye loses the line.
    const WIDEST: usize = 132;
    /// For a file or a pipe.
    const NO_TERMINAL: usize = 100;
    /// For a terminal that does not tell.
    const SILENT_TERMINAL: usize = 80;

    /// Decides width and colour.
    ///
    /// | `COLUMNS` | terminal | tells its width | width |
    /// | --- | --- | --- | --- |
    /// | a number | any | any | that number |
    /// | no | yes | yes | what it tells |
    /// | no | yes | no | 80 |
    /// | no | no | | 100 |
    ///
    /// and the width is then kept between 40 and 132. Colour needs a terminal that is not dumb,
    /// and `NO_COLOR` unset or empty.
    #[must_use]
    pub fn of(terminal: Terminal) -> Self {
        let width = match (terminal.columns_variable, terminal.is_terminal, terminal.columns) {
            (Some(asked), _, _) => asked,
            (None, true, Some(told)) => told,
            (None, true, None) => Self::SILENT_TERMINAL,
            (None, false, _) => Self::NO_TERMINAL,
        };
        Self {
            width: width.clamp(Self::NARROWEST, Self::WIDEST),
            colour: terminal.is_terminal && !terminal.no_color && !terminal.is_dumb,
        }
    }

    /// Decides how messages are laid out: as results on a terminal; elsewhere lines are not broken,
    /// so that a log has one line a message and can be searched.
    #[must_use]
    pub fn of_messages(terminal: Terminal) -> Self {
        if terminal.is_terminal {
            Self::of(terminal)
        } else {
            Self { width: usize::MAX, colour: false }
        }
    }

    /// The text with an emphasis, where colour may be used.
    #[must_use]
    pub fn paint<'a>(self, ink: Ink, text: &'a str) -> Cow<'a, str> {
        if !self.colour {
            return Cow::Borrowed(text);
        }
        let code = match ink {
            Ink::Bold => "1",
            Ink::Good => "1;32",
            Ink::Bad => "1;31",
        };
        Cow::Owned(format!("\u{1b}[{code}m{text}\u{1b}[0m"))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const PIPE: Terminal = Terminal {
        is_terminal: false,
        columns: None,
        columns_variable: None,
        no_color: false,
        is_dumb: false,
    };
    const WINDOW: Terminal = Terminal { is_terminal: true, columns: Some(93), ..PIPE };

    #[test]
    fn width_follows_the_table() {
        let cases = [
            (PIPE, 100),
            (Terminal { columns: Some(70), ..PIPE }, 100),
            (WINDOW, 93),
            (Terminal { columns: None, ..WINDOW }, 80),
            (Terminal { columns_variable: Some(60), ..WINDOW }, 60),
            (Terminal { columns_variable: Some(60), ..PIPE }, 60),
            (Terminal { columns: Some(7), ..WINDOW }, 40),
            (Terminal { columns: Some(400), ..WINDOW }, 132),
        ];
        for (terminal, width) in cases {
            assert_eq!(Screen::of(terminal).width, width, "{terminal:?}");
        }
    }

    #[test]
    fn colour_needs_a_willing_terminal() {
        assert!(Screen::of(WINDOW).colour);
        assert!(!Screen::of(PIPE).colour);
        assert!(!Screen::of(Terminal { no_color: true, ..WINDOW }).colour);
        assert!(!Screen::of(Terminal { is_dumb: true, ..WINDOW }).colour);
    }

    #[test]
    fn paint_leaves_plain_text_alone() {
        let plain = Screen { width: 80, colour: false };
        assert_eq!(plain.paint(Ink::Bad, "no design"), "no design");
        let coloured = Screen { width: 80, colour: true };
        assert_eq!(coloured.paint(Ink::Good, "optimal"), "\u{1b}[1;32moptimal\u{1b}[0m");
    }
}
