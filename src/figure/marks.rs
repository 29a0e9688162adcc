//! The marks of the four answers, drawn, not typed: a filled disc, a filled triangle point down, a hollow square, two
//! triangles tip to tip.

use crate::drawing::{Drawing, Point, at};
use crate::palette::Role;

/// The mark of an answer.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum AnswerMark {
    /// A filled disc.
    Holds,
    /// A filled triangle, point down.
    Short,
    /// A hollow square.
    Unproven,
    /// Two triangles, tip to tip.
    Retime,
}

impl AnswerMark {
    /// Its colour.
    pub const fn role(self) -> Role {
        match self {
            Self::Holds => Role::Holds,
            Self::Short => Role::Short,
            Self::Unproven => Role::Unproven,
            Self::Retime => Role::Retime,
        }
    }
}

/// Draws a mark of the given height about its centre.
pub fn draw_mark(drawing: &mut Drawing, mark: AnswerMark, centre: Point, height: f32) {
    let half = height / 2.0;
    let place = |x: f32, y: f32| at(centre.x + x * half, centre.y + y * half);
    let role = mark.role();
    match mark {
        AnswerMark::Holds => drawing.disc(centre, half, role),
        AnswerMark::Short => drawing.area(&[place(-1.0, -0.85), place(1.0, -0.85), place(0.0, 0.95)], role),
        AnswerMark::Unproven => {
            let corners = [place(-0.8, -0.8), place(0.8, -0.8), place(0.8, 0.8), place(-0.8, 0.8), place(-0.8, -0.8)];
            drawing.line(&corners, role, height * 0.16);
        }
        AnswerMark::Retime => {
            drawing.area(&[place(-0.85, -1.0), place(0.85, -1.0), place(0.0, 0.0)], role);
            drawing.area(&[place(-0.85, 1.0), place(0.85, 1.0), place(0.0, 0.0)], role);
        }
    }
}

impl From<calc::verdict::Answer> for AnswerMark {
    fn from(answer: calc::verdict::Answer) -> Self {
        match answer {
            calc::verdict::Answer::Holds => Self::Holds,
            calc::verdict::Answer::Short => Self::Short,
            calc::verdict::Answer::Unproven => Self::Unproven,
            calc::verdict::Answer::Retime => Self::Retime,
        }
    }
}
