//! The formulas once more, in exact fractions of millimetres and seconds, written from the laws and standards and not from
//! the code: no rounding, no units, no shared constant. Tables are the ones that were typed for the rows.

use calc::press::{Clutch, Conformity};
use calc::rules::{Case, RuleSetId, Times};
use calc::safeguard::{Gap, HorizontalField, LightCurtain, Opening, OpeningShape, SafeguardKind, WayOver};
use calc::units::{Length, Time};
use num_bigint::BigInt;
use num_rational::BigRational;

use crate::{iso_13857, reaching_over, row::Decimal, table_o10};

pub type Fraction = BigRational;

pub fn over(numerator: i64, denominator: i64) -> Fraction {
    Fraction::new(BigInt::from(numerator), BigInt::from(denominator))
}

pub fn whole(number: i64) -> Fraction {
    Fraction::from_integer(BigInt::from(number))
}

pub fn mm(length: Length) -> Fraction {
    over(length.base(), 1_000)
}

fn s(time: Time) -> Fraction {
    over(time.base(), 1_000_000)
}

fn inches(printed: &str) -> Fraction {
    over(Decimal::of(printed).times(25_400_000).whole(), 1_000_000)
}

fn at_least(value: Fraction, floor: Fraction) -> Fraction {
    if value < floor { floor } else { value }
}

/// A distance in mm, and whether it must be exceeded.
pub type Exact = (Fraction, bool);

/// The distance that the rule set asks for; `None` where it asks for none.
pub fn distance(id: RuleSetId, case: &Case) -> Option<Exact> {
    let (distance, strict) = without_supplement(id, case)?;
    // ISO 13855:2024 has a term for it, and its formula below holds it; every other rule set gets it added.
    let supplement = if id == RuleSetId::Iso138552024 { whole(0) } else { mm(case.supplement) };
    Some((distance + supplement, strict))
}

fn without_supplement(id: RuleSetId, case: &Case) -> Option<Exact> {
    let is_part_revolution = !matches!(case.clutch, Some(Clutch::FullRevolution { .. }));
    let stops = !matches!(case.kind, SafeguardKind::TwoHandTrip | SafeguardKind::GuardOpening(_));
    if stops && !is_part_revolution {
        return None;
    }
    match id {
        RuleSetId::Us1910217 => us(case),
        RuleSetId::Us1910217H => psdi(case),
        RuleSetId::AnsiB1119 => b11(case),
        RuleSetId::Iso138552010 => iso_2010(case),
        RuleSetId::Iso138552024 => iso_2024(case),
        RuleSetId::EuPress => press(case),
        RuleSetId::EastAsia => asia(case),
    }
}

fn t(times: &Times) -> Fraction {
    s(times.device) + s(times.interface) + s(times.control) + s(times.stopping) + s(times.allowance)
}

/// (1/2 + 1/N) × 60 / spm, in seconds.
fn closing(case: &Case) -> Option<Fraction> {
    let Some(Clutch::FullRevolution { engaging_points }) = case.clutch else { return None };
    let per_min = over(case.trip_speed?.base(), 1_000);
    Some((over(1, 2) + over(1, i64::from(engaging_points))) * whole(60) / per_min)
}

fn us(case: &Case) -> Option<Exact> {
    let speed = inches("63");
    match &case.kind {
        SafeguardKind::LightCurtain(curtain) if curtain.starts_stroke => None,
        SafeguardKind::LightCurtain(_)
        | SafeguardKind::SeparateBeams { .. }
        | SafeguardKind::HorizontalField(_)
        | SafeguardKind::TwoHandControl { .. } => Some((speed * t(&case.times), true)),
        SafeguardKind::TwoHandTrip => Some((speed * closing(case)?, true)),
        SafeguardKind::GuardOpening(opening) => {
            let size = mm(opening.size);
            if size < inches("0.25") {
                return None;
            }
            let index = table_o10::TABLE.iter().position(|(_, _, width)| size <= inches(width))?;
            Some((inches(table_o10::TABLE[index].0), index > 0))
        }
        SafeguardKind::InterlockedGuard { .. } | SafeguardKind::Mat { .. } => None,
    }
}

fn psdi(case: &Case) -> Option<Exact> {
    let SafeguardKind::LightCurtain(curtain) = &case.kind else { return None };
    let sensitivity = mm(curtain.detection);
    if sensitivity > inches("1.25") {
        return None;
    }
    let dp = over(34, 10) * at_least(sensitivity - inches("0.275"), whole(0));
    Some((inches("63") * (t(&case.times) + s(case.times.allowance)) + dp, false))
}

fn b11(case: &Case) -> Option<Exact> {
    let fine = |detection: Length| {
        let beyond = at_least(mm(detection) - inches("0.276"), whole(0));
        (mm(detection) <= inches("2.5")).then(|| over(34, 10) * beyond)
    };
    let coarse = |lowest: Length, highest: Length| {
        if mm(lowest) > inches("12") || mm(highest) < inches("36") {
            return None;
        }
        Some(if mm(highest) >= inches("48") { inches("36") } else { inches("48") })
    };
    let dpf = match &case.kind {
        SafeguardKind::LightCurtain(curtain) if curtain.starts_stroke => return None,
        SafeguardKind::LightCurtain(curtain) => match fine(curtain.detection) {
            Some(dpf) => dpf,
            None => {
                let WayOver::Open { upper_edge, .. } = curtain.over else { return None };
                if mm(curtain.detection) > inches("23.6") {
                    return None;
                }
                coarse(curtain.lower_edge?, upper_edge)?
            }
        },
        SafeguardKind::SeparateBeams { heights } => coarse(*heights.iter().min()?, *heights.iter().max()?)?,
        SafeguardKind::HorizontalField(field) if field.tilt.base() >= 30_000 => fine(field.detection)?,
        SafeguardKind::HorizontalField(field) => {
            let finest = mm(field.lowest) / whole(15) + inches("2");
            if field.lowest > field.height || mm(field.height) > whole(1000) || mm(field.detection) > finest {
                return None;
            }
            at_least(inches("48") - over(4, 10) * mm(field.height), inches("36"))
        }
        SafeguardKind::TwoHandControl { .. } => whole(0),
        _ => return None,
    };
    Some((inches("63") * t(&case.times) + dpf, false))
}

/// 2000 mm/s up to 500 mm; beyond, 1600 mm/s but not under 500 mm; never under 100 mm.
fn stepped(t: &Fraction, c: &Fraction) -> Fraction {
    let near = whole(2000) * t + c;
    if near <= whole(500) { at_least(near, whole(100)) } else { at_least(whole(1600) * t + c, whole(500)) }
}

fn walking(t: Fraction, c: Fraction) -> Fraction {
    whole(1600) * t + c
}

/// No interpolation: the lower edge of the two columns, the larger distance of the two rows.
fn over_edge(hazard: Length, edge: Length) -> Option<Fraction> {
    let column =
        reaching_over::EDGES.iter().filter(|head| mm(edge) >= whole(i64::from(**head))).count().checked_sub(1)?;
    let cells = &reaching_over::CELLS;
    let hazard = mm(hazard);
    let is_at = |height: u32| hazard == whole(i64::from(height));
    if let Some((_, line)) = cells.iter().find(|(height, _)| is_at(*height)) {
        return Some(whole(i64::from(line[column])));
    }
    let between =
        cells.windows(2).find(|pair| whole(i64::from(pair[0].0)) < hazard && hazard < whole(i64::from(pair[1].0)))?;
    Some(whole(i64::from(between[0].1[column].max(between[1].1[column]))))
}

fn with_over(curtain: &LightCurtain, t: &Fraction, through: Fraction) -> Option<Exact> {
    let WayOver::Open { hazard, upper_edge } = curtain.over else { return Some((through, false)) };
    Some((at_least(stepped(t, &over_edge(hazard, upper_edge)?), through), false))
}

fn opening(opening: &Opening) -> Option<Fraction> {
    let size = mm(opening.size);
    let printed = |text: &str| over(Decimal::of(text).times(1_000).whole(), 1_000);
    let (_, _, slot, square, round) = iso_13857::TABLE.iter().find(|(_, up_to, ..)| size <= printed(up_to))?;
    let is_thumb = whole(20) < size && size <= whole(30);
    Some(match opening.shape {
        OpeningShape::Slot { length: Some(length) } if is_thumb && mm(length) <= whole(65) => whole(200),
        OpeningShape::Slot { .. } => printed(slot),
        OpeningShape::Square => printed(square),
        OpeningShape::Round => printed(round),
    })
}

fn across(curtain: &LightCurtain, t: &Fraction) -> Option<Exact> {
    let d = mm(curtain.detection);
    if curtain.starts_stroke || d > whole(70) {
        return None;
    }
    let through = if d <= whole(40) {
        stepped(t, &(whole(8) * at_least(d - whole(14), whole(0))))
    } else if mm(curtain.lower_edge?) <= whole(300) {
        walking(t.clone(), whole(850))
    } else {
        return None;
    };
    with_over(curtain, t, through)
}

fn along(field: &HorizontalField, t: &Fraction) -> Option<Fraction> {
    let finest = mm(field.lowest) / whole(15) + whole(50);
    if field.lowest > field.height || mm(field.height) > whole(1000) || mm(field.detection) > finest {
        return None;
    }
    Some(walking(t.clone(), at_least(whole(1200) - over(4, 10) * mm(field.height), whole(850))))
}

fn iso_2010(case: &Case) -> Option<Exact> {
    let t = t(&case.times);
    match &case.kind {
        SafeguardKind::LightCurtain(curtain) => across(curtain, &t),
        SafeguardKind::SeparateBeams { heights } => {
            let mut mm: Vec<i64> = heights.iter().map(|height| height.base()).collect();
            mm.sort_unstable();
            let c = match mm.as_slice() {
                [750_000] => 1200,
                [400_000, 900_000] | [300_000, 700_000, 1_100_000] | [300_000, 600_000, 900_000, 1_200_000] => 850,
                _ => return None,
            };
            Some((walking(t, whole(c)), false))
        }
        SafeguardKind::HorizontalField(field) => {
            let as_curtain = LightCurtain {
                detection: field.detection,
                lower_edge: Some(field.lowest),
                over: WayOver::Closed,
                starts_stroke: false,
            };
            let tilt = field.tilt.base();
            if tilt > 35_000 {
                return across(&as_curtain, &t);
            }
            let along = along(field, &t)?;
            if tilt < 25_000 {
                return Some((along, false));
            }
            Some((at_least(across(&as_curtain, &t)?.0, along), false))
        }
        SafeguardKind::Mat { height } if mm(*height) > whole(1000) => None,
        SafeguardKind::Mat { height } => {
            Some((walking(t, at_least(whole(1200) - over(4, 10) * mm(*height), whole(850))), false))
        }
        SafeguardKind::TwoHandControl { shrouded } => {
            Some((at_least(walking(t, whole(if *shrouded { 0 } else { 250 })), whole(100)), false))
        }
        SafeguardKind::InterlockedGuard { gap, opening_time } => {
            let t = at_least(t - opening_time.map_or(whole(0), s), whole(0));
            let c = match gap {
                Gap::NotStated => return None,
                Gap::None => whole(0),
                Gap::Open(gap) => opening(gap)?,
            };
            Some((walking(t, c), false))
        }
        SafeguardKind::GuardOpening(guard) => Some((opening(guard)?, false)),
        SafeguardKind::TwoHandTrip => None,
    }
}

fn iso_2024(case: &Case) -> Option<Exact> {
    let t = t(&case.times);
    let z = mm(case.supplement);
    match &case.kind {
        SafeguardKind::LightCurtain(curtain) => {
            let d = mm(curtain.detection);
            let is_open = matches!(curtain.over, WayOver::Open { .. });
            if curtain.starts_stroke || is_open || d > whole(40) {
                return None;
            }
            Some((stepped(&t, &(whole(8) * at_least(d - whole(14), whole(0)))) + z, false))
        }
        SafeguardKind::HorizontalField(field) => {
            let is_low_enough = field.lowest <= field.height && mm(field.height) <= whole(1000);
            let is_fine_enough = mm(field.lowest) >= whole(15) * (mm(field.detection) - whole(50));
            let is_level = field.tilt.base() == 0;
            (is_low_enough && is_fine_enough && is_level).then(|| (walking(t, whole(1200)) + z, false))
        }
        SafeguardKind::TwoHandControl { shrouded: false } => Some((walking(t, whole(550)) + z, false)),
        SafeguardKind::GuardOpening(guard) => Some((opening(guard)?, false)),
        _ => None,
    }
}

fn press(case: &Case) -> Option<Exact> {
    let t = t(&case.times);
    match &case.kind {
        SafeguardKind::LightCurtain(curtain) => {
            let d = mm(curtain.detection);
            if curtain.starts_stroke && d > whole(30) {
                return None;
            }
            let steps = [(14, 0), (20, 80), (30, 130), (40, 240), (70, 850)];
            let (_, c) = steps.into_iter().find(|(up_to, _)| d <= whole(*up_to))?;
            let through = match case.conformity? {
                Conformity::CeMarked => stepped(&t, &whole(c)),
                Conformity::WithoutCe => at_least(walking(t.clone(), whole(c)), whole(100)),
            };
            with_over(curtain, &t, through)
        }
        SafeguardKind::TwoHandControl { shrouded } => {
            Some((at_least(walking(t, whole(if *shrouded { 0 } else { 250 })), whole(100)), false))
        }
        SafeguardKind::GuardOpening(guard) => Some((opening(guard)?, false)),
        _ => None,
    }
}

fn asia(case: &Case) -> Option<Exact> {
    let t = t(&case.times);
    match &case.kind {
        SafeguardKind::LightCurtain(curtain) if curtain.starts_stroke => None,
        SafeguardKind::LightCurtain(curtain) => {
            let steps = [(30, 0), (35, 200), (45, 300), (50, 400)];
            let (_, extra) = steps.into_iter().find(|(up_to, _)| mm(curtain.detection) <= whole(*up_to))?;
            Some((walking(t, whole(extra)), false))
        }
        SafeguardKind::TwoHandControl { .. } => Some((walking(t, whole(0)), false)),
        SafeguardKind::TwoHandTrip => Some((whole(1600) * closing(case)?, false)),
        _ => None,
    }
}
