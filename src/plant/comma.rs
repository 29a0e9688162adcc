//! Numbers written with a comma. `[182,5, 183]` would read as three stops, the second of 5 ms; nobody meant that.

use std::iter::Peekable;
use std::str::CharIndices;

/// The place, line and column from 1, of the first comma that stands straight between two digits, outside texts and comments.
pub fn comma_between_digits(text: &str) -> Option<(usize, usize)> {
    let mut rest = text.char_indices().peekable();
    let mut before = ' ';
    while let Some((at, c)) = rest.next() {
        match c {
            '"' => skip_text(&mut rest),
            '\'' => skip_letter(&mut rest),
            'r' if !is_of_a_word(before) && matches!(rest.peek(), Some((_, '"' | '#'))) => skip_raw_text(&mut rest),
            '/' if rest.next_if(|(_, next)| *next == '/').is_some() => {
                rest.by_ref().find(|(_, c)| *c == '\n');
            }
            '/' if rest.next_if(|(_, next)| *next == '*').is_some() => skip_block_comment(&mut rest),
            ',' if before.is_ascii_digit() && rest.peek().is_some_and(|(_, next)| next.is_ascii_digit()) => {
                return Some(place(text, at));
            }
            _ => {}
        }
        before = c;
    }
    None
}

type Rest<'a> = Peekable<CharIndices<'a>>;

fn is_of_a_word(c: char) -> bool {
    c.is_alphanumeric() || c == '_'
}

fn skip_text(rest: &mut Rest<'_>) {
    while let Some((_, c)) = rest.next() {
        match c {
            '"' => return,
            '\\' => {
                rest.next();
            }
            _ => {}
        }
    }
}

/// A letter in single quotes, which may be a quotation mark.
fn skip_letter(rest: &mut Rest<'_>) {
    if rest.next().is_some_and(|(_, c)| c == '\\') {
        rest.next();
    }
}

/// `r#"…"#`, with any number of hashes; `r#name` is a name and not skipped.
fn skip_raw_text(rest: &mut Rest<'_>) {
    let mut hashes = 0;
    while rest.next_if(|(_, c)| *c == '#').is_some() {
        hashes += 1;
    }
    if rest.next_if(|(_, c)| *c == '"').is_none() {
        return;
    }
    while rest.by_ref().any(|(_, c)| c == '"') {
        let mut closing = 0;
        while closing < hashes && rest.next_if(|(_, c)| *c == '#').is_some() {
            closing += 1;
        }
        if closing == hashes {
            return;
        }
    }
}

/// Block comments may stand within each other.
fn skip_block_comment(rest: &mut Rest<'_>) {
    let mut depth = 1;
    while depth > 0
        && let Some((_, c)) = rest.next()
    {
        if c == '*' && rest.next_if(|(_, next)| *next == '/').is_some() {
            depth -= 1;
        } else if c == '/' && rest.next_if(|(_, next)| *next == '*').is_some() {
            depth += 1;
        }
    }
}

fn place(text: &str, at: usize) -> (usize, usize) {
    let before = &text[..at];
    let line_start = before.rfind('\n').map_or(0, |end| end + 1);
    (before.matches('\n').count() + 1, before[line_start..].chars().count() + 1)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_comma_between_digits_is_found_where_it_stands() {
        assert_eq!(comma_between_digits("(\n  stops_ms: [182,5, 183],\n)"), Some((2, 17)));
        assert_eq!(comma_between_digits("a: 1,5"), Some((1, 5)));
        assert_eq!(comma_between_digits("a: \"ä\", b: 1,5"), Some((1, 13)));
    }

    #[test]
    fn lists_texts_and_comments_are_let_pass() {
        for text in [
            "[182, 5]",
            "[182.5,\n183]",
            "[1 ,2]",
            "\"1,5\"",
            "\"\\\"1,5\"",
            "r\"1,5\\\"",
            "r#\"\"1,5\"#",
            "r##\"a\"#1,5\"##",
            "// 1,5",
            "/* 1,5 /* */ 1,5 */",
            "'\"' // 1,5\n",
            "'\\'', \"1,5\"",
            "\"1,5",
            "/* 1,5",
            "r#\"1,5",
        ] {
            assert_eq!(comma_between_digits(text), None, "{text}");
        }
        for text in ["/* a */ 1,5", "// a\n1,5", "r\"\\\" 1,5", "'\"' 1,5", "r#\"a\"# 1,5"] {
            assert!(comma_between_digits(text).is_some(), "{text}");
        }
    }
}
