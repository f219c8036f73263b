//! One CSV table under way.

use std::borrow::Cow;

/// Why a CSV table could not be written; the engine's results never cause one.
#[derive(Debug, thiserror::Error)]
pub enum CsvError {
    /// The writer refused a row.
    #[error("the CSV table cannot be written: {0}")]
    Writer(#[from] csv::Error),
    /// A figure is not a number.
    #[error("a figure came out as {0}")]
    Figure(f64),
    /// The buffer is not text.
    #[error("the CSV table is not text")]
    Text,
}

/// A text made safe for a spreadsheet: one that starts like a formula, or with a blank that a
/// spreadsheet skips before it, gets an apostrophe in front.
pub(super) fn text(text: &str) -> Cow<'_, str> {
    const STARTS: [char; 9] = ['=', '+', '-', '@', '\t', '＝', '＋', '－', '＠'];
    let start = text.trim_start_matches([' ', '\r', '\n', '\u{feff}']);
    if start.starts_with(STARTS) || text.starts_with(['\r', '\n']) {
        Cow::Owned(format!("'{text}"))
    } else {
        Cow::Borrowed(text)
    }
}

/// A figure with the fewest digits that read back to the same binary number.
///
/// # Errors
/// The figure is not finite.
pub(super) fn figure(figure: f64) -> Result<String, CsvError> {
    if !figure.is_finite() {
        return Err(CsvError::Figure(figure));
    }
    // Very small and very large figures would print hundreds of zeros without an exponent.
    let size = figure.abs();
    let plain = figure == 0.0 || (1e-5..1e16).contains(&size);
    Ok(if plain { format!("{}", figure + 0.0) } else { format!("{figure:e}") })
}

/// Rows of texts as CSV.
///
/// # Errors
/// The writer refuses; with rows in memory this does not happen.
pub(super) fn finish(rows: &[Vec<String>]) -> Result<String, CsvError> {
    let mut writer = csv::Writer::from_writer(Vec::new());
    for row in rows {
        writer.write_record(row)?;
    }
    let bytes = writer.into_inner().map_err(|_| CsvError::Text)?;
    String::from_utf8(bytes).map_err(|_| CsvError::Text)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn formulas_are_disarmed() {
        for bad in ["=1+1", "+1", "-1", "@SUM(A1)", "\t=1", " =1", "\r=1", "＝1"] {
            assert_eq!(text(bad), format!("'{bad}"));
        }
        for good in ["REF-A", "10 kΩ", "0012", "a=b", ""] {
            assert_eq!(text(good), good);
        }
    }

    #[test]
    fn figures_read_back_to_the_same_bits() {
        for value in [0.0, 0.1, 1e-6, 7.5e-9, 249_000.0, -1.0 / 3.0, 1e300, 5e-324] {
            let text = figure(value).unwrap();
            assert_eq!(text.parse::<f64>().unwrap(), value, "{text}");
            assert!(text.len() < 26, "{text}");
        }
        assert_eq!(figure(-0.0).unwrap(), "0");
        assert!(figure(f64::NAN).is_err());
    }

    #[test]
    fn quotes_commas_and_line_ends_survive() {
        let rows = vec![vec!["a \"b\"".to_owned(), "c, d\ne".to_owned()]];
        let text = finish(&rows).unwrap();
        assert_eq!(text, "\"a \"\"b\"\"\",\"c, d\ne\"\n");
    }
}
