//! Permitted cases at random, leaning towards the figures at which a rule changes.

use calc::press::{Clutch, ClutchMedium, Conformity};
use calc::rules::{Case, RuleSetId, Times};
use calc::safeguard::{Gap, HorizontalField, LightCurtain, Opening, OpeningShape, SafeguardKind, WayOver};
use calc::units::{Angle, Length, Rate, Time};
use proptest::option;
use proptest::prelude::*;
use proptest::sample::select;

/// Around each of these the last micrometre decides.
const DETECTIONS: [i64; 16] = [
    6_985, 7_010, 14_000, 20_000, 30_000, 31_750, 35_000, 40_000, 45_000, 50_000, 63_500, 70_000, 76_200, 100_000,
    599_440, 600_000,
];
const HEIGHTS: [i64; 20] = [
    0, 200_000, 300_000, 304_800, 400_000, 600_000, 750_000, 875_000, 900_000, 914_400, 1_000_000, 1_100_000,
    1_200_000, 1_219_200, 1_400_000, 1_600_000, 1_800_000, 2_200_000, 2_500_000, 2_600_000,
];
const OPENINGS: [i64; 20] = [
    4_000, 6_000, 6_350, 8_000, 9_525, 10_000, 12_000, 12_700, 15_875, 19_050, 20_000, 22_225, 30_000, 31_750, 38_100,
    40_000, 47_625, 53_975, 120_000, 180_000,
];
const TIMES: [i64; 8] = [0, 1, 50_000, 62_500, 250_000, 280_000, 312_500, 1_000_000];

/// One of the figures, or a micrometre beside it, or anything in the range.
fn length(figures: &'static [i64], least: i64, greatest: i64) -> impl Strategy<Value = Length> {
    let near = (select(figures), -1_i64..=1).prop_map(|(figure, beside)| figure + beside);
    prop_oneof![near, least..=greatest].prop_map(move |um| Length::from_base(um.clamp(least, greatest)))
}

pub fn detection() -> impl Strategy<Value = Length> {
    length(&DETECTIONS, 1_000, 600_000)
}

fn height() -> impl Strategy<Value = Length> {
    length(&HEIGHTS, 0, 5_000_000)
}

fn time(greatest: i64) -> impl Strategy<Value = Time> {
    let near = (select(&TIMES[..]), -1_i64..=1).prop_map(|(figure, beside)| figure + beside);
    prop_oneof![near, 0..=400_000_i64, 0..=greatest].prop_map(move |us| Time::from_base(us.clamp(0, greatest)))
}

fn times() -> impl Strategy<Value = Times> {
    let small = || prop_oneof![Just(Time::ZERO), time(5_000_000)];
    (time(10_000_000), small(), small(), small(), prop_oneof![Just(Time::ZERO), time(1_000_000)]).prop_map(
        |(stopping, device, interface, control, allowance)| Times { stopping, device, interface, control, allowance },
    )
}

fn way_over() -> impl Strategy<Value = WayOver> {
    prop_oneof![
        Just(WayOver::Closed),
        Just(WayOver::NotStated),
        (height(), height()).prop_map(|(hazard, upper_edge)| WayOver::Open { hazard, upper_edge }),
    ]
}

fn opening() -> impl Strategy<Value = Opening> {
    let shape = prop_oneof![
        option::of(length(&[65_000], 100, 5_000_000)).prop_map(|length| OpeningShape::Slot { length }),
        Just(OpeningShape::Square),
        Just(OpeningShape::Round),
    ];
    (length(&OPENINGS, 100, 500_000), shape).prop_map(|(size, shape)| Opening { size, shape })
}

fn beams() -> impl Strategy<Value = Vec<Length>> {
    let known: [&[i64]; 5] = [&[750], &[400, 900], &[900, 400], &[300, 700, 1100], &[300, 600, 900, 1200]];
    let known = select(Vec::from(known)).prop_map(|beams| beams.iter().map(|mm| Length::mm(*mm)).collect());
    prop_oneof![known, prop::collection::vec(height(), 0..5)]
}

fn kind() -> impl Strategy<Value = SafeguardKind> {
    let curtain = (detection(), option::of(height()), way_over(), prop::bool::weighted(0.15)).prop_map(
        |(detection, lower_edge, over, starts_stroke)| {
            SafeguardKind::LightCurtain(LightCurtain { detection, lower_edge, over, starts_stroke })
        },
    );
    let tilt = prop_oneof![
        Just(0),
        select(vec![1_i64, 24_999, 25_000, 29_999, 30_000, 30_001, 35_000, 35_001]),
        0..=90_000_i64
    ];
    let is_level = any::<bool>();
    let field = (length(&DETECTIONS, 1_000, 120_000), length(&HEIGHTS, 0, 1_100_000), height(), is_level, tilt)
        .prop_map(|(detection, height, lowest, is_level, tilt)| {
            let lowest = if is_level { height } else { lowest };
            SafeguardKind::HorizontalField(HorizontalField { detection, height, lowest, tilt: Angle::from_base(tilt) })
        });
    let gap = prop_oneof![Just(Gap::NotStated), Just(Gap::None), opening().prop_map(Gap::Open)];
    let guard = (gap, option::of(time(5_000_000)))
        .prop_map(|(gap, opening_time)| SafeguardKind::InterlockedGuard { gap, opening_time });
    prop_oneof![
        4 => curtain,
        2 => any::<bool>().prop_map(|shrouded| SafeguardKind::TwoHandControl { shrouded }),
        1 => Just(SafeguardKind::TwoHandTrip),
        2 => guard,
        1 => beams().prop_map(|heights| SafeguardKind::SeparateBeams { heights }),
        3 => field,
        1 => height().prop_map(|height| SafeguardKind::Mat { height }),
        2 => opening().prop_map(SafeguardKind::GuardOpening),
    ]
}

fn clutch(kind: &SafeguardKind) -> BoxedStrategy<Option<Clutch>> {
    let positive = || (1_u32..=100).prop_map(|engaging_points| Some(Clutch::FullRevolution { engaging_points }));
    let friction = || Just(Some(Clutch::PartRevolution(ClutchMedium::Air)));
    match kind {
        SafeguardKind::TwoHandTrip => prop_oneof![6 => positive(), 1 => friction(), 1 => Just(None)].boxed(),
        _ => prop_oneof![1 => positive(), 12 => friction(), 1 => Just(None)].boxed(),
    }
}

/// Any permitted case.
pub fn case() -> impl Strategy<Value = Case> {
    let conformity = select(vec![None, Some(Conformity::CeMarked), Some(Conformity::WithoutCe)]);
    let rate = option::weighted(0.9, (1_000_i64..=2_000_000).prop_map(Rate::from_base));
    let supplement = prop_oneof![Just(0), 0..=5_000_000_i64];
    kind()
        .prop_flat_map(|kind| (clutch(&kind), Just(kind)))
        .prop_flat_map(move |(clutch, kind)| {
            (Just(clutch), Just(kind), conformity.clone(), rate.clone(), times(), supplement.clone())
        })
        .prop_map(|(clutch, kind, conformity, trip_speed, times, supplement)| Case {
            kind,
            clutch,
            conformity,
            trip_speed,
            times,
            supplement: Length::from_base(supplement),
        })
}

pub fn rule_set() -> impl Strategy<Value = RuleSetId> {
    select(RuleSetId::ALL)
}
