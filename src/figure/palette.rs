//! Colours by role. Every pair of text and ground has a contrast of at least 4.5 to 1; a test holds it.

/// What a colour is for.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Hash)]
pub enum Role {
    /// The ground of the sheet.
    Ground,
    /// Text and main lines.
    Ink,
    /// Lesser text.
    Faint,
    /// Thin rules.
    Rule,
    /// Emphasis.
    Accent,
    /// Hatching lines.
    Hatching,
    /// Ground of the stopping time.
    PartStop,
    /// Ground of the other time parts.
    PartOther,
    /// Ground of the addition.
    PartAddition,
    /// Ground of the spare.
    PartSpare,
    /// Ground of a shortfall.
    PartShort,
    /// The answer Holds.
    Holds,
    /// The answer Short.
    Short,
    /// The answer Unproven.
    Unproven,
    /// The answer Retime.
    Retime,
}

/// Red, green, blue.
pub type Rgb = [u8; 3];

/// Which colours the roles have.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Palette {
    /// On screen, light.
    Light,
    /// On screen, dark.
    Dark,
    /// On paper: readable from a black-and-white copy.
    Print,
}

impl Palette {
    /// The colour of a role.
    pub const fn colour(self, role: Role) -> Rgb {
        match self {
            Self::Light => light(role),
            Self::Dark => dark(role),
            Self::Print => print(role),
        }
    }
}

const fn light(role: Role) -> Rgb {
    match role {
        Role::Ground => [0xF6, 0xF3, 0xEC],
        Role::Ink => [0x1F, 0x2A, 0x33],
        Role::Faint => [0x5D, 0x66, 0x6E],
        Role::Rule => [0xD5, 0xCF, 0xC2],
        Role::Accent => [0x2F, 0x5D, 0x8A],
        Role::Hatching => [0x8B, 0x93, 0x98],
        Role::PartStop => [0xC9, 0xD8, 0xE6],
        Role::PartOther => [0xE4, 0xE3, 0xDC],
        Role::PartAddition => [0xE9, 0xDD, 0xC4],
        Role::PartSpare => [0xD6, 0xE7, 0xE0],
        Role::PartShort => [0xF3, 0xD3, 0xCF],
        Role::Holds => [0x1E, 0x6F, 0x5C],
        Role::Short => [0xB3, 0x26, 0x1E],
        Role::Unproven => [0x7A, 0x5F, 0x10],
        Role::Retime => [0x5F, 0x44, 0x91],
    }
}

const fn dark(role: Role) -> Rgb {
    match role {
        Role::Ground => [0x1B, 0x1F, 0x23],
        Role::Ink => [0xE8, 0xE6, 0xE0],
        Role::Faint => [0xA2, 0xA9, 0xAE],
        Role::Rule => [0x3B, 0x42, 0x48],
        Role::Accent => [0x8F, 0xBB, 0xE6],
        Role::Hatching => [0x78, 0x82, 0x8A],
        Role::PartStop => [0x2F, 0x46, 0x5C],
        Role::PartOther => [0x38, 0x3E, 0x43],
        Role::PartAddition => [0x4B, 0x42, 0x2D],
        Role::PartSpare => [0x24, 0x44, 0x3C],
        Role::PartShort => [0x5B, 0x2B, 0x29],
        Role::Holds => [0x6F, 0xCB, 0xB3],
        Role::Short => [0xFF, 0x8A, 0x80],
        Role::Unproven => [0xE3, 0xC5, 0x66],
        Role::Retime => [0xC3, 0xA9, 0xF0],
    }
}

const fn print(role: Role) -> Rgb {
    match role {
        Role::Ground => [0xFF, 0xFF, 0xFF],
        Role::Ink => [0x10, 0x14, 0x18],
        Role::Faint => [0x4A, 0x50, 0x56],
        Role::Rule => [0xA8, 0xA8, 0xA8],
        Role::Hatching => [0x70, 0x70, 0x70],
        Role::PartStop => [0xDD, 0xE4, 0xEA],
        Role::PartOther => [0xF4, 0xF4, 0xF4],
        Role::PartAddition => [0xEB, 0xEB, 0xEB],
        Role::PartSpare => [0xFF, 0xFF, 0xFF],
        Role::PartShort => [0xE0, 0xE0, 0xE0],
        Role::Accent | Role::Holds | Role::Short | Role::Unproven | Role::Retime => light(role),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Relative luminance as WCAG 2 defines it.
    fn luminance(colour: Rgb) -> f64 {
        let linear = |channel: u8| {
            let value = f64::from(channel) / 255.0;
            if value <= 0.04045 { value / 12.92 } else { ((value + 0.055) / 1.055).powf(2.4) }
        };
        0.2126 * linear(colour[0]) + 0.7152 * linear(colour[1]) + 0.0722 * linear(colour[2])
    }

    fn contrast(one: Rgb, other: Rgb) -> f64 {
        let (one, other) = (luminance(one), luminance(other));
        (one.max(other) + 0.05) / (one.min(other) + 0.05)
    }

    #[test]
    fn every_text_can_be_read_on_its_ground() {
        let texts = [Role::Ink, Role::Faint, Role::Accent, Role::Holds, Role::Short, Role::Unproven, Role::Retime];
        for palette in [Palette::Light, Palette::Dark, Palette::Print] {
            for text in texts {
                let found = contrast(palette.colour(text), palette.colour(Role::Ground));
                assert!(found >= 4.5, "{palette:?} {text:?} {found:.2}");
            }
            for part in [Role::PartStop, Role::PartOther, Role::PartAddition, Role::PartSpare, Role::PartShort] {
                let found = contrast(palette.colour(Role::Ink), palette.colour(part));
                assert!(found >= 4.5, "{palette:?} {part:?} {found:.2}");
            }
        }
    }
}
