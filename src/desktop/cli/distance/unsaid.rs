//! What a call of `distance` takes for granted, and what it was given for nothing: both are told, neither is passed over.

use calc::limits::{self, Limit};
use calc::rules::RuleSetId;
use calc::safeguard::{Gap, SafeguardKind, WayOver};

use super::super::args::{DistanceArgs, ShapeArg};
use super::read::Reader;

/// What is taken for granted because nothing else was said, in one sentence.
pub fn granted(args: &DistanceArgs, rules: Option<RuleSetId>, kind: Option<&SafeguardKind>) -> Option<String> {
    let (rules, kind) = (rules?, kind?);
    let mut granted = Vec::new();
    if kind.needs_stop() && args.engaging_points.is_none() {
        granted.push("a part-revolution clutch");
    }
    match kind {
        SafeguardKind::LightCurtain(curtain) => {
            if rules.rules().looks_at_way_over() && curtain.over == WayOver::Closed {
                granted.push("no way over the curtain");
            }
            if rules == RuleSetId::EuPress && !args.before_ce {
                granted.push("a press with the CE mark");
            }
        }
        SafeguardKind::InterlockedGuard { gap: Gap::None, .. } => {
            granted.push("no gap before the stop is signalled");
        }
        SafeguardKind::HorizontalField(_) if args.field_angle_deg.is_none() => {
            granted.push("a field along the approach");
        }
        _ => {}
    }
    if rules.rules().needs_supplement() && kind.needs_stop() && args.supplement_mm.is_none() {
        granted.push("a supplemental distance Z of 0");
    }
    (!granted.is_empty()).then(|| format!("Taken for granted, since nothing else is said: {}.", granted.join(", ")))
}

/// Options that this safeguard has no use for, in one sentence. Their figures are read all the same, so that a slip is told.
pub fn not_used(args: &DistanceArgs, reader: &mut Reader) -> Option<String> {
    let kind = args.safeguard.as_str();
    let is = |kinds: &[&str]| kinds.contains(&kind);
    let counts_stop = !is(&["two-hand-trip", "guard-opening"]);
    let has_opening = is(&["interlocked-guard", "guard-opening"]);
    let is_curtain = kind == "light-curtain";
    let has_height =
        is(&["light-curtain", "horizontal-field", "mat"]) || kind == "separate-beams" && args.beam_heights_mm.is_none();
    let is_slot = has_opening && args.opening_shape == Some(ShapeArg::Slot);
    let mut unused = Vec::new();
    let height = limits::HEIGHT;
    let figures: [(&str, &Option<String>, Limit, bool); 9] = [
        ("--stopping-ms", &args.stopping_ms, limits::STOPPING_TIME, counts_stop),
        ("--detection-mm", &args.detection_mm, limits::DETECTION, is(&["light-curtain", "horizontal-field"])),
        ("--height-mm", &args.height_mm, height, has_height),
        ("--hazard-height-mm", &args.hazard_height_mm, height.named("Height of the hazard"), is_curtain),
        ("--edge-height-mm", &args.edge_height_mm, height.named("Height of the upper edge"), is_curtain),
        ("--field-angle-deg", &args.field_angle_deg, limits::FIELD_ANGLE, kind == "horizontal-field"),
        ("--opening-mm", &args.opening_mm, limits::OPENING, has_opening),
        ("--slot-length-mm", &args.slot_length_mm, limits::SLOT_LENGTH, is_slot),
        ("--opening-time-ms", &args.opening_time_ms, limits::OPENING_TIME, kind == "interlocked-guard"),
    ];
    for (option, text, limit, is_used) in figures {
        if text.is_some() && !is_used {
            reader.number(text.as_ref(), limit, limit.name);
            unused.push(option);
        }
    }
    let lists = [
        ("--stops-ms", &args.stops_ms, limits::STOPPING_TIME, counts_stop),
        ("--beam-heights-mm", &args.beam_heights_mm, height.named("Height of a beam"), kind == "separate-beams"),
    ];
    for (option, text, limit, is_used) in lists {
        if let (Some(text), false) = (text, is_used) {
            reader.list(text, limit);
            unused.push(option);
        }
    }
    // The caller reads these figures for every kind.
    let is_eu_curtain = is_curtain && args.rules == RuleSetId::EuPress.key();
    let others = [
        ("--device-ms", args.device_ms.is_some(), counts_stop),
        ("--interface-ms", args.interface_ms.is_some(), counts_stop),
        ("--control-ms", args.control_ms.is_some(), counts_stop),
        ("--wear-ms", args.wear_ms.is_some(), counts_stop),
        ("--strokes-per-minute", args.strokes_per_minute.is_some(), kind == "two-hand-trip"),
        ("--opening-shape", args.opening_shape.is_some(), has_opening),
        ("--shrouded", args.shrouded, kind == "two-hand-control"),
        ("--starts-stroke", args.starts_stroke, is_curtain),
        ("--before-ce", args.before_ce, is_eu_curtain),
    ];
    unused.extend(others.iter().filter(|(_, is_given, is_used)| *is_given && !is_used).map(|other| other.0));
    (!unused.is_empty()).then(|| format!("Given and not used here: {}.", unused.join(", ")))
}
