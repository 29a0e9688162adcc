//! Several figures in one argument.

use calc::limits::Limit;
use calc::refusal::Refusal;

/// Reads figures in a row. A comma parts them, unless a semicolon or white space does; then a comma is a decimal mark.
///
/// # Errors
/// Every figure that cannot be taken, also an empty one between two marks, and a text without any figure.
pub fn figures(text: &str, limit: &Limit) -> Result<Vec<i64>, Vec<Refusal>> {
    let text = text.trim();
    if text.is_empty() {
        return Err(vec![Refusal::new(
            limit.name,
            text,
            limit.range(),
            "Write one or more figures, parted by commas.",
        )]);
    }
    let parts: Vec<&str> = if text.contains(';') {
        text.split(';').collect()
    } else if text.contains(char::is_whitespace) {
        text.split_whitespace().collect()
    } else {
        text.split(',').collect()
    };
    let mut values = Vec::new();
    let mut refusals = Vec::new();
    for part in parts {
        match limit.take_text(part) {
            Ok(value) => values.push(value),
            Err(refusal) => refusals.push(refusal),
        }
    }
    if refusals.is_empty() { Ok(values) } else { Err(refusals) }
}

#[cfg(test)]
mod tests {
    use calc::limits::STOPPING_TIME;

    use super::figures;

    #[test]
    fn commas_semicolons_and_white_space_part_figures() {
        for (text, expected) in [
            ("182.5,185", &[182_500, 185_000][..]),
            ("182,5;185", &[182_500, 185_000]),
            (" 182,5 ; 185 ", &[182_500, 185_000]),
            ("182,5 185\t187\n184", &[182_500, 185_000, 187_000, 184_000]),
            ("182, 185, 187", &[182_000, 185_000, 187_000]),
            ("182,5", &[182_000, 5_000]),
            ("182", &[182_000]),
        ] {
            assert_eq!(figures(text, &STOPPING_TIME).as_deref(), Ok(expected), "{text:?}");
        }
    }

    #[test]
    fn every_bad_figure_is_refused_and_none_is_passed_over() {
        for (text, count) in [
            ("", 1),
            ("  ", 1),
            (",", 2),
            ("182,,185", 1),
            ("182;", 1),
            ("x,182,-5", 2),
            ("1,234.5;x", 2),
            ("0 20000", 2),
        ] {
            assert_eq!(figures(text, &STOPPING_TIME).map_err(|refusals| refusals.len()), Err(count), "{text:?}");
        }
    }
}
