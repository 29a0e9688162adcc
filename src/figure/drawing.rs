//! The drawing itself: marks on a sheet measured in millimetres from its top left corner.

use crate::palette::Role;

/// A place in millimetres: to the right and down.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Point {
    /// To the right, mm.
    pub x: f32,
    /// Down, mm.
    pub y: f32,
}

/// A place in millimetres.
pub const fn at(x: f32, y: f32) -> Point {
    Point { x, y }
}

/// Marks on a sheet.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct Drawing {
    /// Width, mm.
    pub width: f32,
    /// Height, mm.
    pub height: f32,
    /// The marks, those below first.
    pub marks: Vec<Mark>,
}

/// One mark.
#[derive(Clone, PartialEq, Debug)]
pub enum Mark {
    /// A line through points.
    Line {
        /// The points.
        points: Vec<Point>,
        /// Its colour.
        role: Role,
        /// Its width, mm.
        width: f32,
        /// Whether it is dashed.
        is_dashed: bool,
    },
    /// A convex area.
    Area {
        /// Its corners.
        points: Vec<Point>,
        /// Its colour.
        role: Role,
    },
    /// A line of text.
    Text(Text),
}

/// A line of text.
#[derive(Clone, PartialEq, Debug)]
pub struct Text {
    /// Where its anchor lies, on the base line.
    pub at: Point,
    /// The text.
    pub text: String,
    /// Size of the font, mm.
    pub size: f32,
    /// Weight of the font.
    pub weight: Weight,
    /// Which end lies at `at`.
    pub anchor: Anchor,
    /// Its colour.
    pub role: Role,
}

/// Weight of the font.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Weight {
    /// IBM Plex Sans Regular.
    Regular,
    /// IBM Plex Sans SemiBold.
    SemiBold,
}

/// Which end of a text lies at its place.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Anchor {
    /// Its left end.
    Start,
    /// Its middle.
    Middle,
    /// Its right end.
    End,
}

/// How an area is filled.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Fill {
    /// Its ground.
    pub role: Role,
    /// The lines over it.
    pub hatch: Hatch,
}

/// Lines over an area, by which areas are told apart without colour.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum Hatch {
    /// None.
    Plain,
    /// Rising to the right, so many millimetres apart.
    Rising(f32),
    /// Falling to the right.
    Falling(f32),
    /// Upright.
    Upright(f32),
    /// Rising and falling.
    Crossed(f32),
}

/// A hair line.
pub(crate) const THIN: f32 = 0.15;

impl Drawing {
    /// An empty sheet.
    pub fn new(width: f32, height: f32) -> Self {
        Self { width, height, marks: Vec::new() }
    }

    /// Adds a line through points.
    pub fn line(&mut self, points: &[Point], role: Role, width: f32) {
        self.marks.push(Mark::Line { points: points.into(), role, width, is_dashed: false });
    }

    /// Adds a dashed line through points.
    pub fn dashed(&mut self, points: &[Point], role: Role, width: f32) {
        self.marks.push(Mark::Line { points: points.into(), role, width, is_dashed: true });
    }

    /// Adds a convex area.
    pub fn area(&mut self, points: &[Point], role: Role) {
        self.marks.push(Mark::Area { points: points.into(), role });
    }

    /// Adds a rectangle from its top left corner, filled and hatched.
    pub fn rectangle(&mut self, corner: Point, width: f32, height: f32, fill: Fill) {
        let (right, bottom) = (corner.x + width, corner.y + height);
        self.area(&[corner, at(right, corner.y), at(right, bottom), at(corner.x, bottom)], fill.role);
        for line in hatching(corner, width, height, fill.hatch) {
            self.line(&line, Role::Hatching, THIN);
        }
    }

    /// Adds the outline of a rectangle.
    pub fn outline(&mut self, corner: Point, width: f32, height: f32, role: Role, line: f32) {
        let (right, bottom) = (corner.x + width, corner.y + height);
        self.line(&[corner, at(right, corner.y), at(right, bottom), at(corner.x, bottom), corner], role, line);
    }

    /// Adds a text in the regular weight.
    pub fn text(&mut self, place: Point, text: impl Into<String>, size: f32, anchor: Anchor, role: Role) {
        self.marks.push(Mark::Text(Text { at: place, text: text.into(), size, weight: Weight::Regular, anchor, role }));
    }

    /// Adds a text in the heavier weight.
    pub fn strong(&mut self, place: Point, text: impl Into<String>, size: f32, anchor: Anchor, role: Role) {
        self.marks.push(Mark::Text(Text {
            at: place,
            text: text.into(),
            size,
            weight: Weight::SemiBold,
            anchor,
            role,
        }));
    }

    /// Adds a filled disc.
    pub fn disc(&mut self, centre: Point, radius: f32, role: Role) {
        self.area(&circle(centre, radius), role);
    }

    /// Adds another drawing with its top left corner at `corner`.
    pub fn place(&mut self, corner: Point, other: &Self) {
        let moved = |point: &Point| at(point.x + corner.x, point.y + corner.y);
        self.marks.extend(other.marks.iter().map(|mark| match mark {
            Mark::Line { points, role, width, is_dashed } => Mark::Line {
                points: points.iter().map(moved).collect(),
                role: *role,
                width: *width,
                is_dashed: *is_dashed,
            },
            Mark::Area { points, role } => Mark::Area { points: points.iter().map(moved).collect(), role: *role },
            Mark::Text(text) => Mark::Text(Text { at: moved(&text.at), ..text.clone() }),
        }));
    }

    /// Every text of the drawing.
    pub fn texts(&self) -> impl Iterator<Item = &Text> {
        self.marks.iter().filter_map(|mark| if let Mark::Text(text) = mark { Some(text) } else { None })
    }
}

/// A circle as a closed line of 48 straight parts.
pub fn circle(centre: Point, radius: f32) -> Vec<Point> {
    (0..48)
        .map(|part| {
            let turn = part as f32 / 48.0 * std::f32::consts::TAU;
            at(centre.x + radius * turn.cos(), centre.y + radius * turn.sin())
        })
        .collect()
}

/// The hatching lines of a rectangle, cut to it.
fn hatching(corner: Point, width: f32, height: f32, hatch: Hatch) -> Vec<[Point; 2]> {
    let mut lines = Vec::new();
    let mut slanted = |spacing: f32, sign: f32| {
        // Lines x + sign * y = c, cut to the rectangle.
        let step = spacing * std::f32::consts::SQRT_2;
        let (least, most) = if sign > 0.0 { (0.0, width + height) } else { (-height, width) };
        let mut c = (least / step).floor() * step + step;
        while c < most {
            let top = if sign > 0.0 { (c - width).max(0.0) } else { (-c).max(0.0) };
            let bottom = if sign > 0.0 { c.min(height) } else { (width - c).min(height) };
            if top < bottom {
                let x = |y: f32| c - sign * y;
                lines.push([at(corner.x + x(top), corner.y + top), at(corner.x + x(bottom), corner.y + bottom)]);
            }
            c += step;
        }
    };
    match hatch {
        Hatch::Plain => {}
        Hatch::Rising(spacing) => slanted(spacing, 1.0),
        Hatch::Falling(spacing) => slanted(spacing, -1.0),
        Hatch::Crossed(spacing) => {
            slanted(spacing, 1.0);
            slanted(spacing, -1.0);
        }
        Hatch::Upright(spacing) => {
            let mut x = spacing;
            while x < width {
                lines.push([at(corner.x + x, corner.y), at(corner.x + x, corner.y + height)]);
                x += spacing;
            }
        }
    }
    lines
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn hatching_stays_within_its_rectangle() {
        let corner = at(3.0, 5.0);
        for hatch in [Hatch::Rising(1.1), Hatch::Falling(0.7), Hatch::Upright(2.0), Hatch::Crossed(0.9)] {
            for (width, height) in [(20.0, 8.0), (2.0, 8.0), (0.1, 8.0), (9.0, 0.3)] {
                for line in hatching(corner, width, height, hatch) {
                    for point in line {
                        assert!(
                            corner.x - 1e-4 <= point.x && point.x <= corner.x + width + 1e-4,
                            "{hatch:?} {point:?}"
                        );
                        assert!(
                            corner.y - 1e-4 <= point.y && point.y <= corner.y + height + 1e-4,
                            "{hatch:?} {point:?}"
                        );
                    }
                }
            }
        }
    }
}
