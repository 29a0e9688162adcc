//! The questions, in as few words as a row has room for. Figures are printed text, so that a row reads like its source.

use calc::press::{Clutch, ClutchMedium, Conformity};
use calc::rules::{Case, Times};
use calc::safeguard::{Gap, HorizontalField, LightCurtain, Opening, OpeningShape, SafeguardKind, WayOver};
use calc::units::{Angle, Length, Rate, Time};

use crate::row::Decimal;

pub fn mm(printed: &str) -> Length {
    Length::from_base(Decimal::of(printed).times(1_000).whole())
}

pub fn inch(printed: &str) -> Length {
    Length::from_base(Decimal::of(printed).times(25_400).whole())
}

pub fn seconds(printed: &str) -> Time {
    Time::from_base(Decimal::of(printed).times(1_000_000).whole())
}

/// A safeguard on a part-revolution press that stops within `stopping` seconds.
pub fn case(kind: SafeguardKind, stopping: &str) -> Case {
    Case {
        kind,
        clutch: Some(Clutch::PartRevolution(ClutchMedium::Air)),
        conformity: None,
        trip_speed: None,
        times: Times {
            stopping: seconds(stopping),
            device: Time::ZERO,
            interface: Time::ZERO,
            control: Time::ZERO,
            allowance: Time::ZERO,
        },
        supplement: Length::ZERO,
    }
}

pub fn on_full_revolution(mut case: Case, engaging_points: u32) -> Case {
    case.clutch = Some(Clutch::FullRevolution { engaging_points });
    case
}

pub fn on_press(mut case: Case, conformity: Conformity) -> Case {
    case.conformity = Some(conformity);
    case
}

pub fn with_supplement(mut case: Case, supplement: &str) -> Case {
    case.supplement = mm(supplement);
    case
}

/// A two-hand trip on a clutch with so many engaging points, at so many strokes a minute.
pub fn trip(engaging_points: u32, per_min: i64) -> Case {
    let mut case = on_full_revolution(case(SafeguardKind::TwoHandTrip, "0"), engaging_points);
    case.trip_speed = Some(Rate::per_min(per_min));
    case
}

fn light_curtain(detection: Length, over: WayOver) -> LightCurtain {
    LightCurtain { detection, lower_edge: Some(mm("300")), over, starts_stroke: false }
}

/// A light curtain of this detection capability, over which nobody reaches.
pub fn curtain(detection: Length) -> SafeguardKind {
    SafeguardKind::LightCurtain(light_curtain(detection, WayOver::Closed))
}

/// A light curtain that starts the stroke.
pub fn starting_curtain(detection: Length) -> SafeguardKind {
    SafeguardKind::LightCurtain(LightCurtain { starts_stroke: true, ..light_curtain(detection, WayOver::Closed) })
}

/// A light curtain over whose upper edge an arm can pass.
pub fn curtain_under(detection: Length, hazard: &str, upper_edge: &str) -> SafeguardKind {
    let over = WayOver::Open { hazard: mm(hazard), upper_edge: mm(upper_edge) };
    SafeguardKind::LightCurtain(light_curtain(detection, over))
}

pub fn two_hand(shrouded: bool) -> SafeguardKind {
    SafeguardKind::TwoHandControl { shrouded }
}

pub fn beams(heights: &[&str]) -> SafeguardKind {
    SafeguardKind::SeparateBeams { heights: heights.iter().map(|height| mm(height)).collect() }
}

/// A level field along the approach.
pub fn level_field(detection: &str, height: &str) -> SafeguardKind {
    tilted_field(detection, height, height, "0")
}

pub fn tilted_field(detection: &str, height: &str, lowest: &str, tilt: &str) -> SafeguardKind {
    SafeguardKind::HorizontalField(HorizontalField {
        detection: mm(detection),
        height: mm(height),
        lowest: mm(lowest),
        tilt: Angle::from_base(mm(tilt).base()),
    })
}

pub fn mat(height: &str) -> SafeguardKind {
    SafeguardKind::Mat { height: mm(height) }
}

pub fn guard(gap: Gap, opening_time: Option<&str>) -> SafeguardKind {
    SafeguardKind::InterlockedGuard { gap, opening_time: opening_time.map(seconds) }
}

pub fn slot(size: &str, length: Option<&str>) -> Opening {
    Opening { size: mm(size), shape: OpeningShape::Slot { length: length.map(mm) } }
}

pub fn square(size: &str) -> Opening {
    Opening { size: mm(size), shape: OpeningShape::Square }
}

pub fn round(size: &str) -> Opening {
    Opening { size: mm(size), shape: OpeningShape::Round }
}

pub fn opening(opening: Opening) -> Case {
    case(SafeguardKind::GuardOpening(opening), "0")
}
