//! The sections of a record, in the order in which they stand.

use calc::basis::Source;
use calc::in_force::tests_in_force;
use calc::monthly::{self, standing};
use calc::press::{Clutch, ClutchMedium, Conformity, DriveKind, Frame, Press};
use calc::round::{Towards, length_text, time_text};
use calc::safeguard::{Gap, Opening, OpeningShape, SafeguardKind, WayOver};
use calc::sentence;
use calc::statistics::upper_tolerance_bound;
use calc::steps::WorkedSteps;
use calc::stop_test::StopPath;
use calc::units::{Length, LengthUnit};
use calc::value_taken::summary_ms;
use calc::verdict::{Answer, Assessment, PartState};
use figure::{DotRow, Level, Role, StripInput, dot_plot, reach_strip};

use crate::flow::{Flow, number, words};
use crate::press_record::RecordInput;

pub fn identification(flow: &mut Flow, input: &RecordInput, assessments: &[Assessment]) {
    let press = input.press;
    flow.title(&format!("Safety record of press {}", press.tag));
    flow.space(1.0);
    flow.pairs(&[
        ("plant", input.plant.name.clone()),
        ("date of record", input.date.to_string()),
        ("press", press.description.clone()),
        ("serial number", stated(&press.serial)),
        ("place", stated(&press.location)),
        (
            "press force",
            press.force_n.map_or("not stated".into(), |force| format!("{} kN", calc::round::thousandths_text(force))),
        ),
        ("frame", frame_words(press.frame).into()),
        ("clutch and brake", clutch_words(press.clutch)),
        ("drive", if press.drive == DriveKind::Crank { "crank".into() } else { "link drive".into() }),
        ("stroke", press.stroke.map_or("not stated".into(), |stroke| length(stroke, input.unit))),
        ("fastest speed", press.fastest_speed.map_or("not stated".into(), |speed| speed.to_string())),
        ("heaviest upper die", press.heaviest_die.map_or("not stated".into(), |die| die.to_string())),
        (
            "CE mark",
            press.conformity.map_or("not stated".into(), |mark| {
                if mark == Conformity::CeMarked { "yes".into() } else { "no".into() }
            }),
        ),
        (
            "brake monitor",
            press.monitor.as_ref().map_or("none".into(), |monitor| format!("set to {}", monitor.setting)),
        ),
        ("control response", press.control_response.map_or("not stated".into(), |time| time.to_string())),
        ("rule set", input.rules.title().into()),
        ("edition", input.rules.edition().into()),
        ("more caution", input.plant.wish.map_or("none wished".into(), |wish| wish.words().into())),
    ]);
    flow.heading("Answers");
    if assessments.is_empty() {
        flow.paragraph("No safeguard is entered. Nothing can be said about this press.");
    }
    for (safeguard, assessment) in press.safeguards.iter().zip(assessments) {
        flow.answer(
            assessment.answer.into(),
            &format!("{}   {}", assessment.answer.word(), sentence::headline(safeguard, assessment, input.unit)),
        );
    }
}

pub fn stop_tests(flow: &mut Flow, input: &RecordInput, assessments: &[Assessment]) {
    let press = input.press;
    flow.heading("Stop tests");
    if press.stop_tests.is_empty() {
        flow.paragraph("None.");
        return;
    }
    let in_force: Vec<usize> = StopPath::ALL.iter().flat_map(|path| tests_in_force(press, *path)).collect();
    let governs =
        |index: usize| assessments.iter().any(|one| one.governing.is_some_and(|governing| governing.test == index));
    for (index, test) in press.stop_tests.iter().enumerate() {
        let state = match (governs(index), in_force.contains(&index)) {
            (true, _) => "; governs",
            (false, true) => "",
            (false, false) => "; superseded or overtaken",
        };
        flow.subheading(&format!("Test {}: {}{state}", index + 1, test.condition.words()));
        flow.small(&format!(
            "Timed on {} by {} with {} {}, calibrated {}{}. Clock started when: {}.{}{}",
            test.at,
            stated(&test.by),
            stated(&test.instrument.name),
            test.instrument.serial,
            test.instrument.calibrated.map_or("not stated".into(), |day| day.to_string()),
            test.instrument.calibration_due.map_or(String::new(), |day| format!(", due {day}")),
            test.clock_start.words(),
            test.condition
                .operating_pressure
                .map_or(String::new(), |pressure| format!(" Operating pressure {pressure}.")),
            test.condition.counterbalance.map_or(String::new(), |pressure| format!(" Counterbalance {pressure}.")),
        ));
        let stops: Vec<String> = test.stops.iter().map(|stop| stop.digits()).collect();
        flow.paragraph(&format!("Stops in ms: {}", if stops.is_empty() { "none".into() } else { stops.join(" · ") }));
    }
    flow.space(1.5);
    flow.table(
        &[
            number("test", 6.0),
            number("n", 6.0),
            number("mean ms", 11.0),
            number("s ms", 10.0),
            number("longest ms", 11.0),
            number("mean + 3 s ms", 13.0),
            number("bound 95/95 ms", 13.0),
            number("bound 99/95 ms", 13.0),
        ],
        &press
            .stop_tests
            .iter()
            .enumerate()
            .map(|(index, test)| statistics_row(index, &test.stops))
            .collect::<Vec<_>>(),
    );
    let rows: Vec<DotRow> = press
        .stop_tests
        .iter()
        .enumerate()
        .filter(|(index, test)| in_force.contains(index) && !test.stops.is_empty())
        .map(|(index, test)| DotRow {
            label: format!("test {}", index + 1),
            stops_ms: test.stops.iter().map(|stop| stop.to_f64()).collect(),
            is_governing: governs(index),
        })
        .collect();
    let mut levels: Vec<Level> = Vec::new();
    let tightest = assessments
        .iter()
        .filter_map(|one| Some((one.governing?.value, one.allowed.as_ref()?.stopping?)))
        .min_by_key(|(value, allowed)| *allowed - *value);
    if let Some((value, allowed)) = tightest {
        levels.push(Level {
            label: format!("taken forward {}", time_text(value, Towards::Greater)),
            ms: value.to_f64(),
            role: Role::Accent,
        });
        levels.push(Level {
            label: format!("allowed {}", time_text(allowed, Towards::Smaller)),
            ms: allowed.to_f64(),
            role: Role::Short,
        });
    }
    flow.drawing(&dot_plot(&rows, &levels, flow.width(), flow.fonts));
}

fn statistics_row(index: usize, stops: &[calc::units::Time]) -> Vec<String> {
    let mut row = vec![(index + 1).to_string(), stops.len().to_string()];
    let Some(summary) = summary_ms(stops) else {
        row.extend(std::iter::repeat_n("none".to_owned(), 6));
        return row;
    };
    let up = |ms: Option<f64>| ms.and_then(calc::units::Time::from_ms_up).map_or("none".into(), |time| time.digits());
    row.push(format!("{:.3}", summary.mean()));
    row.push(summary.standard_deviation().map_or("none".into(), |s| format!("{s:.4}")));
    row.push(up(Some(summary.greatest())));
    row.push(up(summary.mean_plus_3_s()));
    for coverage in [0.95, 0.99] {
        row.push(up(upper_tolerance_bound(&summary, coverage, 0.95).ok()));
    }
    row
}

pub fn safeguard(flow: &mut Flow, input: &RecordInput, index: usize, assessment: &Assessment) {
    let safeguard = &input.press.safeguards[index];
    let unit = input.unit;
    flow.heading(&format!("{} ({})", calc::assess::capitalised(&safeguard.name), safeguard.kind.words()));
    flow.answer(
        assessment.answer.into(),
        &format!("{}   {}", assessment.answer.word(), sentence::headline(safeguard, assessment, unit)),
    );
    if let Some(strip) = StripInput::of(assessment, unit) {
        flow.drawing(&reach_strip(&strip, flow.width(), flow.fonts));
    }
    for reason in assessment.reasons.iter().skip(usize::from(assessment.answer != Answer::Short)) {
        flow.small(&format!("{}: {}", reason.answer.word(), reason.words));
    }
    if let Some(remedies) = sentence::remedies(assessment, unit) {
        flow.paragraph(&remedies);
    }
    let mut pairs: Vec<(&str, String)> = kind_pairs(&safeguard.kind, unit);
    if safeguard.kind.needs_stop() {
        pairs.push(("calls for", safeguard.stop_path.words().into()));
    }
    match &safeguard.installed {
        None => pairs.push(("installed", "not measured".into())),
        Some(installed) => pairs.push((
            "installed",
            format!(
                "{} by the tape, ± {}, relied on {}; measured by {} on {}",
                length(installed.distance, unit),
                length(installed.uncertainty, unit),
                length_text(installed.relied_on(), unit, Towards::Smaller),
                stated(&installed.by),
                installed.at
            ),
        )),
    }
    flow.pairs(&pairs);
    if !assessment.parts.is_empty() {
        flow.subheading("Time parts");
        let rows: Vec<Vec<String>> = assessment
            .parts
            .iter()
            .map(|part| {
                let state = match part.state {
                    PartState::SeenByClock => "seen by the clock, not added again".into(),
                    PartState::Added(time) => time.to_string(),
                    PartState::Missing => "neither seen nor given".into(),
                };
                vec![part.kind.words().into(), state]
            })
            .collect();
        flow.table(&[words("part", 30.0), words("counted", 70.0)], &rows);
    }
    if !assessment.steps.is_empty() {
        flow.subheading("Worked steps");
        steps(flow, &assessment.steps, unit);
    }
    if let Some(allowed) = &assessment.allowed {
        flow.subheading("What the installed distance allows");
        let time =
            |time: Option<calc::units::Time>| time.map_or("none".into(), |time| time_text(time, Towards::Smaller));
        flow.pairs(&[("stopping time", time(allowed.stopping)), ("monitor setting", time(allowed.monitor))]);
        if !allowed.steps.is_empty() {
            steps(flow, &allowed.steps, unit);
        }
        flow.small("A monitor setting holds for a monitor that times the same stop on the same clock. One that watches the stop at the top of the stroke must be set by a test at the top.");
    }
}

fn steps(flow: &mut Flow, steps: &WorkedSteps, unit: LengthUnit) {
    let rows: Vec<Vec<String>> = steps
        .iter()
        .map(|step| {
            let place = [step.source.place(), format!("({})", step.source.basis.words())];
            vec![
                step.symbol.to_owned(),
                step.meaning.clone(),
                step.expression.text(unit),
                step.value.text(unit),
                place.into_iter().filter(|part| !part.is_empty()).collect::<Vec<_>>().join(" "),
            ]
        })
        .collect();
    flow.table(
        &[
            words("symbol", 10.0),
            words("what", 28.0),
            words("worked", 28.0),
            number("value", 14.0),
            words("clause and basis", 26.0),
        ],
        &rows,
    );
}

pub fn readings(flow: &mut Flow, input: &RecordInput) {
    let Some(standing) = standing(input.press, input.plant, input.date) else { return };
    flow.heading("Monthly readings");
    flow.paragraph(&monthly::sentence(&standing));
    if let Some(suspect) = &standing.suspect {
        flow.paragraph(&monthly::suspect_sentence(suspect));
    }
    flow.small(&format!(
        "Reference condition: {}; clock started when: {}; {}.",
        standing.series.setup.condition.words(),
        standing.series.setup.clock_start.words(),
        standing.series.setup.place.words()
    ));
    let chart = figure::readings_chart(input.press, &standing, input.date);
    flow.drawing(&figure::chart(&chart, flow.width(), 62.0, flow.fonts));
    let rows: Vec<Vec<String>> = standing
        .lines
        .iter()
        .map(|line| {
            let steps: Vec<String> = line
                .steps
                .iter()
                .map(|step| format!("{}: {}", step.meaning, step.expression.text(input.unit)))
                .collect();
            vec![
                line.name.into(),
                time_text(line.value, Towards::Smaller),
                line.consequence.words().into(),
                steps.join("; "),
            ]
        })
        .collect();
    if !rows.is_empty() {
        flow.table(
            &[
                words("limit", 22.0),
                number("mean of a reading", 14.0),
                words("when crossed", 24.0),
                words("worked", 50.0),
            ],
            &rows,
        );
    }
    let rows: Vec<Vec<String>> = standing
        .series
        .points
        .iter()
        .map(|point| {
            let reading = &input.press.readings[point.reading];
            let stops: Vec<String> = reading.stops.iter().map(|stop| stop.digits()).collect();
            vec![reading.at.to_string(), reading.by.clone(), stops.join(" · "), format!("{:.2}", point.mean_ms)]
        })
        .collect();
    flow.table(&[words("date", 18.0), words("by", 14.0), words("stops ms", 50.0), number("mean ms", 12.0)], &rows);
}

pub fn events(flow: &mut Flow, press: &Press) {
    if press.events.is_empty() {
        return;
    }
    flow.heading("Events");
    let rows: Vec<Vec<String>> = press
        .events
        .iter()
        .map(|event| {
            vec![
                event.at.to_string(),
                event.kind.words().into(),
                event.safeguard.clone().unwrap_or_default(),
                event.note.clone(),
            ]
        })
        .collect();
    flow.table(&[words("when", 16.0), words("what", 22.0), words("safeguard", 18.0), words("note", 44.0)], &rows);
}

pub fn to_check(flow: &mut Flow, assessments: &[Assessment]) {
    let mut sources: Vec<Source> = Vec::new();
    for source in assessments.iter().flat_map(|one| one.steps.to_check()) {
        if !sources.contains(&source) {
            sources.push(source);
        }
    }
    flow.heading("Compare with your own copy");
    if sources.is_empty() {
        flow.paragraph("Every rule used was read in a public text.");
        return;
    }
    flow.paragraph("These figures were used and are known from one text only, from memory, or from practice:");
    let rows: Vec<Vec<String>> = sources
        .iter()
        .map(|source| {
            let place = source.place();
            vec![if place.is_empty() { "habit of the trade".into() } else { place }, source.basis.words().into()]
        })
        .collect();
    flow.table(&[words("clause", 70.0), words("basis", 30.0)], &rows);
}

pub fn sign_off(flow: &mut Flow, input: &RecordInput) {
    flow.keep(62.0);
    flow.heading("Sign-off");
    let rows: Vec<[String; 4]> = ["Prepared", "Checked", "Accepted"]
        .iter()
        .zip(&input.sign_off)
        .map(|(what, signed)| [(*what).to_owned(), signed.name.clone(), signed.role.clone(), signed.date.clone()])
        .collect();
    flow.sign_off(&rows);
}

fn stated(text: &str) -> String {
    if text.trim().is_empty() { "not stated".into() } else { text.to_owned() }
}

fn length(value: Length, unit: LengthUnit) -> String {
    format!("{} {}", calc::round::length_digits_full(value, unit, Towards::Nearest), unit.sign())
}

fn frame_words(frame: Frame) -> &'static str {
    match frame {
        Frame::CFrame => "C-frame",
        Frame::StraightSide => "straight-side",
    }
}

fn clutch_words(clutch: Clutch) -> String {
    match clutch {
        Clutch::PartRevolution(ClutchMedium::Air) => "part-revolution, air".into(),
        Clutch::PartRevolution(ClutchMedium::Hydraulic) => "part-revolution, hydraulic".into(),
        Clutch::FullRevolution { engaging_points } => format!("full-revolution, {engaging_points} engaging points"),
    }
}

fn kind_pairs(kind: &SafeguardKind, unit: LengthUnit) -> Vec<(&'static str, String)> {
    match kind {
        SafeguardKind::LightCurtain(curtain) => vec![
            ("detection capability", length(curtain.detection, unit)),
            (
                "way over",
                match curtain.over {
                    WayOver::NotStated => "not stated".into(),
                    WayOver::Closed => "closed".into(),
                    WayOver::Open { hazard, upper_edge } => {
                        format!("open: hazard at {}, upper edge at {}", length(hazard, unit), length(upper_edge, unit))
                    }
                },
            ),
            ("lowest beam", curtain.lower_edge.map_or("not stated".into(), |height| length(height, unit))),
            ("starts the stroke", if curtain.starts_stroke { "yes".into() } else { "no".into() }),
        ],
        SafeguardKind::TwoHandControl { shrouded } => {
            vec![("actuators shrouded", if *shrouded { "yes".into() } else { "no".into() })]
        }
        SafeguardKind::TwoHandTrip => Vec::new(),
        SafeguardKind::InterlockedGuard { gap, opening_time } => vec![
            (
                "gap before the signal",
                match gap {
                    Gap::NotStated => "not stated".into(),
                    Gap::None => "none that a part of the body passes".into(),
                    Gap::Open(opening) => opening_words(opening, unit),
                },
            ),
            ("opening time", opening_time.map_or("not counted".into(), |time| time.to_string())),
        ],
        SafeguardKind::SeparateBeams { heights } => {
            vec![(
                "heights of the beams",
                heights.iter().map(|height| length(*height, unit)).collect::<Vec<_>>().join(", "),
            )]
        }
        SafeguardKind::HorizontalField(field) => vec![
            ("detection capability", length(field.detection, unit)),
            ("height", format!("{}, lowest {}", length(field.height, unit), length(field.lowest, unit))),
            ("angle to the approach", format!("{}°", field.tilt.digits())),
        ],
        SafeguardKind::Mat { height } => vec![("height", length(*height, unit))],
        SafeguardKind::GuardOpening(opening) => vec![("opening", opening_words(opening, unit))],
    }
}

fn opening_words(opening: &Opening, unit: LengthUnit) -> String {
    let shape = match opening.shape {
        OpeningShape::Slot { length: Some(long) } => format!("slot, {} long", length(long, unit)),
        OpeningShape::Slot { length: None } => "slot".into(),
        OpeningShape::Square => "square".into(),
        OpeningShape::Round => "round".into(),
    };
    format!("{}, {shape}", length(opening.size, unit))
}
