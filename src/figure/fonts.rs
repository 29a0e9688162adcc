//! How wide a text is, and which characters there are. Neither screen nor paper kerns, so widths are sums of advances.

use ttf_parser::Face;

use crate::drawing::Weight;

/// IBM Plex Sans Regular, under the SIL Open Font License.
pub const REGULAR: &[u8] = include_bytes!("../../assets/fonts/IBMPlexSans-Regular.ttf");
/// IBM Plex Sans SemiBold, under the SIL Open Font License.
pub const SEMI_BOLD: &[u8] = include_bytes!("../../assets/fonts/IBMPlexSans-SemiBold.ttf");

/// The two weights, read once.
pub struct Fonts {
    regular: Face<'static>,
    semi_bold: Face<'static>,
}

impl Default for Fonts {
    fn default() -> Self {
        Self::new()
    }
}

impl Fonts {
    /// Reads the two font files that the program carries.
    pub fn new() -> Self {
        let face = |bytes| Face::parse(bytes, 0).expect("the font files of the program are sound");
        Self { regular: face(REGULAR), semi_bold: face(SEMI_BOLD) }
    }

    fn face(&self, weight: Weight) -> &Face<'static> {
        match weight {
            Weight::Regular => &self.regular,
            Weight::SemiBold => &self.semi_bold,
        }
    }

    /// The width of a text of this font size, both in the same unit. A character without glyph counts as none.
    pub fn width(&self, text: &str, size: f32, weight: Weight) -> f32 {
        let face = self.face(weight);
        let advance =
            |character| face.glyph_index(character).and_then(|glyph| face.glyph_hor_advance(glyph)).unwrap_or(0);
        let units: u32 = text.chars().map(|character| u32::from(advance(character))).sum();
        units as f32 * size / f32::from(face.units_per_em())
    }

    /// The characters of a text that a weight has no glyph for, each once.
    pub fn missing(&self, text: &str, weight: Weight) -> Vec<char> {
        let face = self.face(weight);
        let mut missing = Vec::new();
        for character in text.chars() {
            if face.glyph_index(character).is_none() && !missing.contains(&character) {
                missing.push(character);
            }
        }
        missing
    }

    /// Breaks a text into lines of at most `width`, between words; a word wider than that is broken within.
    pub fn wrap(&self, text: &str, size: f32, weight: Weight, width: f32) -> Vec<String> {
        let mut lines = Vec::new();
        for paragraph in text.split('\n') {
            let mut line = String::new();
            for word in paragraph.split_whitespace() {
                let longer = if line.is_empty() { word.to_owned() } else { format!("{line} {word}") };
                if self.width(&longer, size, weight) <= width {
                    line = longer;
                    continue;
                }
                if !line.is_empty() {
                    lines.push(std::mem::take(&mut line));
                }
                line = word.to_owned();
                while self.width(&line, size, weight) > width && line.chars().count() > 1 {
                    let fits = (1..line.chars().count())
                        .rev()
                        .find(|count| self.width(&line.chars().take(*count).collect::<String>(), size, weight) <= width)
                        .unwrap_or(1);
                    let rest = line.chars().skip(fits).collect();
                    lines.push(line.chars().take(fits).collect());
                    line = rest;
                }
            }
            lines.push(line);
        }
        lines
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn digits_all_have_one_width() {
        let fonts = Fonts::new();
        for weight in [Weight::Regular, Weight::SemiBold] {
            let one = fonts.width("1", 10.0, weight);
            assert!(one > 0.0);
            assert!("0123456789".chars().all(|digit| fonts.width(&digit.to_string(), 10.0, weight) == one));
        }
    }

    #[test]
    fn lines_keep_to_the_width_and_lose_nothing() {
        let fonts = Fonts::new();
        let text = "Stop within 182.4 ms or move it to at least 425 mm; Donaudampfschifffahrtsgesellschaft";
        for width in [5.0, 12.0, 40.0, 300.0] {
            let lines = fonts.wrap(text, 3.0, Weight::Regular, width);
            assert!(
                lines.iter().all(|line| fonts.width(line, 3.0, Weight::Regular) <= width || line.chars().count() == 1)
            );
            let letters = |text: &str| text.chars().filter(|c| !c.is_whitespace()).collect::<String>();
            assert_eq!(letters(&lines.concat()), letters(text));
        }
    }

    #[test]
    fn every_sign_the_program_writes_has_a_glyph_and_a_strange_one_is_named() {
        let fonts = Fonts::new();
        for weight in [Weight::Regular, Weight::SemiBold] {
            assert!(fonts.missing("°×−–≤≥±·…µ/²→αΔ“”'äöüßéÅ", weight).is_empty());
            assert_eq!(fonts.missing("press 中 press 中", weight), ['中']);
        }
    }
}
