//! From the arguments of `distance` to a case for a rule set; every refusal at once.

use calc::basis::Source;
use calc::expr;
use calc::limits::{self, Limit};
use calc::press::{Clutch, ClutchMedium, Conformity};
use calc::refusal::Refusal;
use calc::rules::{Case, RuleSetId, Times};
use calc::safeguard::*;
use calc::steps::WorkedSteps;
use calc::units::{Angle, Length, Rate, Time};
use calc::value_taken::summary_ms;

use super::super::args::{DistanceArgs, ShapeArg};
use super::super::figures::figures;
use super::unsaid;

/// What is asked.
pub struct Asked {
    pub rules: RuleSetId,
    pub case: Case,
    pub installed: Option<Length>,
    /// How the stopping time came about.
    pub steps: WorkedSteps,
    /// What the reader must know of the figures.
    pub remarks: Vec<String>,
    stops: Option<usize>,
}

impl Asked {
    /// How many stops were given, where those are fewer than the rule set wants.
    pub fn too_few_stops(&self) -> Option<usize> {
        let (least, _) = self.rules.rules().least_stops();
        self.stops.filter(|given| *given < least)
    }
}

/// Gathers every refusal of a call.
#[derive(Default)]
pub(super) struct Reader {
    refusals: Vec<String>,
}

impl Reader {
    fn refuse(&mut self, refusal: &Refusal) {
        self.refusals.push(refusal.to_string());
    }

    pub(super) fn number(&mut self, text: Option<&String>, limit: Limit, name: &'static str) -> Option<i64> {
        let text = text?;
        limit.named(name).take_text(text).map_err(|refusal| self.refuse(&refusal)).ok()
    }

    fn time(&mut self, text: Option<&String>, limit: Limit, name: &'static str) -> Option<Time> {
        self.number(text, limit, name).map(Time::from_base)
    }

    fn length(&mut self, text: Option<&String>, limit: Limit, name: &'static str) -> Option<Length> {
        self.number(text, limit, name).map(Length::from_base)
    }

    /// A figure without which the safeguard means nothing.
    fn needed(&mut self, text: Option<&String>, limit: Limit, name: &'static str, option: &str) -> Length {
        if text.is_none() {
            self.refusals
                .push(format!("{name} is not given. It is needed here. Add {option} with a figure {}.", limit.range()));
        }
        self.length(text, limit, name).unwrap_or(Length::ZERO)
    }

    /// Figures in a row; `None` where one of them cannot be taken.
    pub(super) fn list(&mut self, text: &str, limit: Limit) -> Option<Vec<i64>> {
        figures(text, &limit).map_err(|refusals| refusals.iter().for_each(|refusal| self.refuse(refusal))).ok()
    }
}

/// Reads the arguments.
pub fn read(args: &DistanceArgs) -> Result<Asked, Vec<String>> {
    let mut reader = Reader::default();
    let rules = rules(args, &mut reader);
    let kind = kind(args, rules, &mut reader);
    let mut steps = WorkedSteps::new();
    let mut remarks = Vec::new();
    let (stopping, stops) = stopping(args, rules, kind.as_ref(), &mut reader, &mut steps, &mut remarks);
    let response = limits::RESPONSE_TIME;
    let device = reader.time(args.device_ms.as_ref(), response, "Response of the device");
    let interface = reader.time(args.interface_ms.as_ref(), response, "Response of the interface");
    let control = reader.time(args.control_ms.as_ref(), response, "Response of the press control");
    let wear = reader.time(args.wear_ms.as_ref(), limits::WEAR_ALLOWANCE, "Wear allowance");
    if kind.as_ref().is_some_and(SafeguardKind::needs_stop) {
        let absent: Vec<&str> =
            [("device", device), ("interface", interface), ("control", control), ("wear allowance", wear)]
                .into_iter()
                .filter(|part| part.1.is_none())
                .map(|part| part.0)
                .collect();
        if !absent.is_empty() {
            remarks.push(format!("Not given, and so taken as inside the stopping time: {}.", absent.join(", ")));
        }
    }
    let clutch = clutch(args, kind.as_ref(), &mut reader);
    let trip_speed =
        reader.number(args.strokes_per_minute.as_ref(), limits::SPEED, "Strokes per minute").map(Rate::from_base);
    if matches!(kind, Some(SafeguardKind::TwoHandTrip)) && args.strokes_per_minute.is_none() {
        reader
            .refusals
            .push("Strokes per minute are not given. A two-hand trip needs them. Add --strokes-per-minute.".into());
    }
    let supplement = reader.length(args.supplement_mm.as_ref(), limits::SUPPLEMENT, "Supplemental distance");
    remarks.extend(unsaid::granted(args, rules, kind.as_ref()));
    remarks.extend(unsaid::not_used(args, &mut reader));
    let installed = reader.length(args.installed_mm.as_ref(), limits::INSTALLED, "Installed distance");
    let zero = Time::ZERO;
    match (rules, kind, reader.refusals.is_empty()) {
        (Some(rules), Some(kind), true) => Ok(Asked {
            rules,
            case: Case {
                kind,
                clutch,
                conformity: Some(if args.before_ce { Conformity::WithoutCe } else { Conformity::CeMarked }),
                trip_speed,
                times: Times {
                    stopping,
                    device: device.unwrap_or(zero),
                    interface: interface.unwrap_or(zero),
                    control: control.unwrap_or(zero),
                    allowance: wear.unwrap_or(zero),
                },
                supplement: supplement.unwrap_or(Length::ZERO),
            },
            installed,
            steps,
            remarks,
            stops,
        }),
        _ => Err(reader.refusals),
    }
}

fn rules(args: &DistanceArgs, reader: &mut Reader) -> Option<RuleSetId> {
    let found = RuleSetId::from_key(&args.rules);
    if found.is_none() {
        let keys: Vec<&str> = RuleSetId::ALL.iter().map(|id| id.key()).collect();
        let allowed = format!("one of {}", keys.join(", "));
        reader.refuse(&Refusal::new("Rule set", args.rules.as_str(), allowed, "Choose one of these."));
    }
    found
}

/// The stopping time to count, and of how many stops it is where several are given.
fn stopping(
    args: &DistanceArgs,
    rules: Option<RuleSetId>,
    kind: Option<&SafeguardKind>,
    reader: &mut Reader,
    steps: &mut WorkedSteps,
    remarks: &mut Vec<String>,
) -> (Time, Option<usize>) {
    if !kind.is_some_and(SafeguardKind::needs_stop) {
        return (Time::ZERO, None);
    }
    if let Some(text) = &args.stops_ms {
        let (Some(stops), Some(rules)) = (reader.list(text, limits::STOPPING_TIME), rules) else {
            return (Time::ZERO, None);
        };
        let stops: Vec<Time> = stops.into_iter().map(Time::from_base).collect();
        let (taken, source) = rules.rules().value_taken();
        let Some(value) = taken.of(&stops) else {
            let allowed = "two or more, for a standard deviation";
            reader.refuse(&Refusal::new("Number of stops", stops.len().to_string(), allowed, "Time more stops."));
            return (Time::ZERO, None);
        };
        if let Some(summary) = summary_ms(&stops) {
            let words =
                |value: Option<f64>| value.map_or("needs two stops".to_owned(), |value| format!("{value:.6} ms"));
            steps.note("n", "timed stops", stops.len().to_string(), Source::GIVEN);
            steps.note("mean", "arithmetic mean", words(Some(summary.mean())), Source::ARITHMETIC);
            steps.note("s", "standard deviation", words(summary.standard_deviation()), Source::ARITHMETIC);
            steps.note("longest", "longest stop", words(Some(summary.greatest())), Source::GIVEN);
            steps.note(
                "mean + 3 s",
                "three standard deviations above the mean",
                words(summary.mean_plus_3_s()),
                Source::ARITHMETIC,
            );
        }
        steps.put(
            "t",
            format!("stopping time taken forward: {}", taken.words()),
            expr![format!("of {} stops", stops.len())],
            value,
            source,
        );
        let (least, _) = rules.rules().least_stops();
        if stops.len() < least {
            remarks.push(format!("Only {} of at least {least} stops.", stops.len()));
        }
        return (value, Some(stops.len()));
    }
    let time = reader.time(args.stopping_ms.as_ref(), limits::STOPPING_TIME, "Stopping time");
    if args.stopping_ms.is_none() {
        reader
            .refusals
            .push("No stopping time is given. Add --stopping-ms, or --stops-ms with several timed stops.".into());
    }
    remarks.push("For the figure given: nothing here tells that it was measured, when, or on which press.".into());
    (time.unwrap_or(Time::ZERO), None)
}

fn kind(args: &DistanceArgs, rules: Option<RuleSetId>, reader: &mut Reader) -> Option<SafeguardKind> {
    let height = |reader: &mut Reader| reader.needed(args.height_mm.as_ref(), limits::HEIGHT, "Height", "--height-mm");
    Some(match args.safeguard.as_str() {
        "light-curtain" => {
            // 29 CFR 1910.217(c) prints no term for penetration; every other rule set needs the detection capability.
            let is_needed = rules.is_some_and(|rules| rules != RuleSetId::Us1910217);
            let detection = if !is_needed && args.detection_mm.is_none() {
                Length::from_base(limits::DETECTION.least)
            } else {
                reader.needed(args.detection_mm.as_ref(), limits::DETECTION, "Detection capability", "--detection-mm")
            };
            SafeguardKind::LightCurtain(LightCurtain {
                detection,
                lower_edge: reader.length(args.height_mm.as_ref(), limits::HEIGHT, "Height of the lowest beam"),
                over: way_over(args, reader),
                starts_stroke: args.starts_stroke,
            })
        }
        "two-hand-control" => SafeguardKind::TwoHandControl { shrouded: args.shrouded },
        "two-hand-trip" => SafeguardKind::TwoHandTrip,
        "interlocked-guard" => SafeguardKind::InterlockedGuard {
            gap: opening(args, reader).map_or(Gap::None, Gap::Open),
            opening_time: reader.time(args.opening_time_ms.as_ref(), limits::OPENING_TIME, "Opening time"),
        },
        "separate-beams" => {
            let beam = limits::HEIGHT.named("Height of a beam");
            let heights = match (&args.beam_heights_mm, &args.height_mm) {
                (Some(text), _) => reader.list(text, beam).unwrap_or_default(),
                (None, Some(text)) => reader.number(Some(text), beam, beam.name).into_iter().collect(),
                (None, None) => {
                    reader
                        .refusals
                        .push("The heights of the beams are not given. Add --beam-heights-mm, such as 400,900.".into());
                    Vec::new()
                }
            };
            let mut heights: Vec<Length> = heights.into_iter().map(Length::from_base).collect();
            heights.sort_unstable();
            SafeguardKind::SeparateBeams { heights }
        }
        "horizontal-field" => {
            let detection =
                reader.needed(args.detection_mm.as_ref(), limits::DETECTION, "Detection capability", "--detection-mm");
            let height = height(reader);
            let tilt = reader.number(args.field_angle_deg.as_ref(), limits::FIELD_ANGLE, "Angle of the field");
            SafeguardKind::HorizontalField(HorizontalField {
                detection,
                height,
                lowest: height,
                tilt: tilt.map_or(Angle::ZERO, Angle::from_base),
            })
        }
        "mat" => SafeguardKind::Mat { height: height(reader) },
        "guard-opening" => match opening(args, reader) {
            Some(opening) => SafeguardKind::GuardOpening(opening),
            None => {
                if args.opening_mm.is_none() && args.opening_shape.is_none() {
                    reader.refusals.push("No opening is given. Add --opening-mm and --opening-shape.".into());
                }
                return None;
            }
        },
        other => {
            let kinds = "light-curtain, two-hand-control, two-hand-trip, interlocked-guard, separate-beams, horizontal-field, mat, guard-opening";
            reader.refuse(&Refusal::new("Safeguard", other, format!("one of {kinds}"), "Choose one of these."));
            return None;
        }
    })
}

fn way_over(args: &DistanceArgs, reader: &mut Reader) -> WayOver {
    let hazard = reader.length(args.hazard_height_mm.as_ref(), limits::HEIGHT, "Height of the hazard");
    let upper_edge = reader.length(args.edge_height_mm.as_ref(), limits::HEIGHT, "Height of the upper edge");
    match (hazard, upper_edge) {
        (Some(hazard), Some(upper_edge)) => WayOver::Open { hazard, upper_edge },
        (None, None) => WayOver::Closed,
        _ => {
            if args.hazard_height_mm.is_none() || args.edge_height_mm.is_none() {
                let both =
                    "The way over needs both heights. Add --hazard-height-mm and --edge-height-mm, or leave out both.";
                reader.refusals.push(both.into());
            }
            WayOver::NotStated
        }
    }
}

/// `None` where no opening is given, or one that cannot be taken.
fn opening(args: &DistanceArgs, reader: &mut Reader) -> Option<Opening> {
    let size = reader.length(args.opening_mm.as_ref(), limits::OPENING, "Opening");
    let length = match args.opening_shape {
        Some(ShapeArg::Slot) => reader.length(args.slot_length_mm.as_ref(), limits::SLOT_LENGTH, "Slot length"),
        _ => None,
    };
    match (&args.opening_mm, args.opening_shape) {
        (Some(_), None) => reader
            .refusals
            .push("The shape of the opening is not given. Add --opening-shape slot, square or round.".into()),
        (None, Some(_)) => {
            reader.refusals.push("A shape is given and the size of the opening is not. Add --opening-mm.".into())
        }
        _ => {}
    }
    let shape = match args.opening_shape? {
        ShapeArg::Slot => OpeningShape::Slot { length },
        ShapeArg::Square => OpeningShape::Square,
        ShapeArg::Round => OpeningShape::Round,
    };
    Some(Opening { size: size?, shape })
}

fn clutch(args: &DistanceArgs, kind: Option<&SafeguardKind>, reader: &mut Reader) -> Option<Clutch> {
    if let Some(text) = &args.engaging_points {
        let count = reader.number(Some(text), limits::ENGAGING_POINTS, "Engaging points")?;
        if count % 1000 != 0 {
            reader.refuse(&Refusal::new("Engaging points", text.as_str(), "a whole number", "Count them."));
        }
        return Some(Clutch::FullRevolution { engaging_points: u32::try_from(count / 1000).unwrap_or(1) });
    }
    if matches!(kind, Some(SafeguardKind::TwoHandTrip)) {
        reader
            .refusals
            .push("Engaging points are not given. A two-hand trip needs them. Add --engaging-points.".into());
    }
    Some(Clutch::PartRevolution(ClutchMedium::Air))
}
