//! Pages as plain text: texts on one height make a line, from left to right.

use figure::{Drawing, Text};

/// Texts whose base lines lie this close stand on one line, mm.
const SAME_LINE: f32 = 0.6;

pub(crate) fn to_text(pages: &[Drawing]) -> String {
    let mut out = String::new();
    for page in pages {
        let mut texts: Vec<&Text> = page.texts().filter(|text| !text.text.is_empty()).collect();
        texts.sort_by(|one, other| one.at.y.total_cmp(&other.at.y).then(one.at.x.total_cmp(&other.at.x)));
        let mut rest = texts.as_slice();
        while let Some(first) = rest.first() {
            let count = rest.iter().take_while(|text| text.at.y - first.at.y <= SAME_LINE).count();
            let mut line: Vec<&Text> = rest[..count].to_vec();
            line.sort_by(|one, other| one.at.x.total_cmp(&other.at.x));
            out.push_str(&line.iter().map(|text| text.text.as_str()).collect::<Vec<_>>().join("  "));
            out.push('\n');
            rest = &rest[count..];
        }
        out.push('\u{c}');
    }
    out
}
