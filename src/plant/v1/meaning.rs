//! From the stored shape to the checked types of `calc` and back, by hand.

use std::collections::BTreeSet;

use calc::plant_settings::PlantSettings;
use calc::press::{self, Press};
use calc::reading;
use calc::safeguard::{self, OpeningShape, SafeguardKind, WayOver};
use calc::schedule;
use calc::stop_test;
use calc::units::{Angle, Length, Mass, Pressure, Rate, Time};

use super::fields::*;
use super::prediction::{file_of_prediction, prediction_of};
use super::shape::*;

/// The version that is written.
pub const VERSION: u32 = 1;

pub(super) fn settings_of(file: PlantFile) -> PlantSettings {
    PlantSettings {
        name: file.name,
        rules: file.rules.0,
        wish: file.wish.map(|wish| wish.0),
        test_interval_months: file.test_interval_months.0,
        reading_interval: file.reading_interval.map(|interval| match interval {
            Interval::Weeks(every) => schedule::Interval::Weeks(every.0),
            Interval::Months(every) => schedule::Interval::Months(every.0),
        }),
        warning_share_percent: file.warning_share_percent.0,
    }
}

pub(super) fn file_of_settings(settings: &PlantSettings) -> PlantFile {
    PlantFile {
        version: VERSION,
        name: settings.name.clone(),
        rules: Named(settings.rules),
        wish: settings.wish.map(Named),
        test_interval_months: Every(settings.test_interval_months),
        reading_interval: settings.reading_interval.map(|interval| match interval {
            schedule::Interval::Weeks(every) => Interval::Weeks(Every(every)),
            schedule::Interval::Months(every) => Interval::Months(Every(every)),
        }),
        warning_share_percent: Share(settings.warning_share_percent),
    }
}

/// A field, and what is wrong with it in words.
pub(super) type Fault = (String, String);

/// The press, or everything that the file asks for and that cannot be.
pub(super) fn press_of(file: PressFile) -> Result<Press, Vec<Fault>> {
    let mut faults = Vec::new();
    let mut names = BTreeSet::new();
    for (index, safeguard) in file.safeguards.iter().enumerate() {
        if !names.insert(safeguard.name.as_str()) {
            let why = format!("Two safeguards are called {:?}. Give each its own name.", safeguard.name);
            faults.push((format!("safeguards[{index}].name"), why));
        }
    }
    let reference = file.reference.map(setup_of);
    let mut readings = Vec::new();
    for (index, stored) in file.readings.into_iter().enumerate() {
        let Some(setup) = stored.setup.map(setup_of).or_else(|| reference.clone()) else {
            let why = "The reading has no setup and the press no reference. Give one of the two.";
            faults.push((format!("readings[{index}]"), why.into()));
            continue;
        };
        readings.push(reading::Reading {
            at: stored.at.0,
            by: stored.by,
            setup,
            instrument: instrument_of(stored.instrument),
            stops: times(&stored.stops_ms),
        });
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    Ok(Press {
        tag: file.tag.0,
        description: file.description,
        serial: file.serial,
        location: file.location,
        force_n: file.force_kn.map(|force| force.0),
        frame: match file.frame {
            Frame::CFrame => press::Frame::CFrame,
            Frame::StraightSide => press::Frame::StraightSide,
        },
        clutch: match file.clutch {
            Clutch::PartRevolution(Medium::Air) => press::Clutch::PartRevolution(press::ClutchMedium::Air),
            Clutch::PartRevolution(Medium::Hydraulic) => press::Clutch::PartRevolution(press::ClutchMedium::Hydraulic),
            Clutch::FullRevolution { engaging_points } => {
                press::Clutch::FullRevolution { engaging_points: engaging_points.0 }
            }
        },
        drive: match file.drive {
            Drive::Crank => press::DriveKind::Crank,
            Drive::Link => press::DriveKind::Link,
        },
        stroke: file.stroke_mm.map(|stroke| Length::from_base(stroke.0)),
        rod: file.rod_mm.map(|rod| Length::from_base(rod.0)),
        fastest_speed: file.fastest_speed_per_min.map(|speed| Rate::from_base(speed.0)),
        slowest_speed: file.slowest_speed_per_min.map(|speed| Rate::from_base(speed.0)),
        heaviest_die: file.heaviest_die_kg.map(|mass| Mass::from_base(mass.0)),
        conformity: file
            .ce_marked
            .map(|marked| if marked { press::Conformity::CeMarked } else { press::Conformity::WithoutCe }),
        control_response: file.control_response_ms.map(|time| Time::from_base(time.0)),
        monitor: file.monitor_setting_ms.map(|setting| press::BrakeMonitor { setting: Time::from_base(setting.0) }),
        safeguards: file.safeguards.into_iter().map(safeguard_of).collect(),
        stop_tests: file.stop_tests.into_iter().map(stop_test_of).collect(),
        reference,
        readings,
        prediction: file.prediction.map(prediction_of),
        events: file
            .events
            .into_iter()
            .map(|event| press::Event {
                at: event.at.0,
                kind: event.kind.0,
                safeguard: event.safeguard,
                note: event.note,
            })
            .collect(),
    })
}

pub(super) fn file_of_press(press: &Press) -> PressFile {
    PressFile {
        version: VERSION,
        tag: Tag(press.tag.clone()),
        description: press.description.clone(),
        serial: press.serial.clone(),
        location: press.location.clone(),
        force_kn: press.force_n.map(ForceKn),
        frame: match press.frame {
            press::Frame::CFrame => Frame::CFrame,
            press::Frame::StraightSide => Frame::StraightSide,
        },
        clutch: match press.clutch {
            press::Clutch::PartRevolution(press::ClutchMedium::Air) => Clutch::PartRevolution(Medium::Air),
            press::Clutch::PartRevolution(press::ClutchMedium::Hydraulic) => Clutch::PartRevolution(Medium::Hydraulic),
            press::Clutch::FullRevolution { engaging_points } => {
                Clutch::FullRevolution { engaging_points: EngagingPoints(engaging_points) }
            }
        },
        drive: match press.drive {
            press::DriveKind::Crank => Drive::Crank,
            press::DriveKind::Link => Drive::Link,
        },
        stroke_mm: press.stroke.map(|stroke| StrokeMm(stroke.base())),
        rod_mm: press.rod.map(|rod| RodMm(rod.base())),
        fastest_speed_per_min: press.fastest_speed.map(|speed| SpeedPerMin(speed.base())),
        slowest_speed_per_min: press.slowest_speed.map(|speed| SpeedPerMin(speed.base())),
        heaviest_die_kg: press.heaviest_die.map(|mass| DieKg(mass.base())),
        ce_marked: press.conformity.map(|conformity| conformity == press::Conformity::CeMarked),
        control_response_ms: press.control_response.map(|time| ResponseMs(time.base())),
        monitor_setting_ms: press.monitor.as_ref().map(|monitor| MonitorMs(monitor.setting.base())),
        safeguards: press.safeguards.iter().map(file_of_safeguard).collect(),
        stop_tests: press.stop_tests.iter().map(file_of_stop_test).collect(),
        reference: press.reference.as_ref().map(file_of_setup),
        readings: press
            .readings
            .iter()
            .map(|reading| Reading {
                at: At(reading.at),
                by: reading.by.clone(),
                setup: (Some(&reading.setup) != press.reference.as_ref()).then(|| file_of_setup(&reading.setup)),
                instrument: file_of_instrument(&reading.instrument),
                stops_ms: reading.stops.iter().map(|stop| StopMs(stop.base())).collect(),
            })
            .collect(),
        prediction: press.prediction.as_ref().map(file_of_prediction),
        events: press
            .events
            .iter()
            .map(|event| Event {
                at: At(event.at),
                kind: Named(event.kind),
                safeguard: event.safeguard.clone(),
                note: event.note.clone(),
            })
            .collect(),
    }
}

fn safeguard_of(file: Safeguard) -> safeguard::Safeguard {
    safeguard::Safeguard {
        name: file.name,
        kind: kind_of(file.kind),
        stop_path: file.stop_path.0,
        device_response: file.device_response_ms.map(|time| Time::from_base(time.0)),
        interface_response: file.interface_response_ms.map(|time| Time::from_base(time.0)),
        wear_allowance: file.wear_allowance_ms.map(|time| Time::from_base(time.0)),
        supplement: file.supplement_mm.map(|length| Length::from_base(length.0)),
        installed: file.installed.map(|installed| safeguard::Installed {
            distance: Length::from_base(installed.distance_mm.0),
            uncertainty: Length::from_base(installed.uncertainty_mm.0),
            by: installed.by,
            at: installed.at.0,
        }),
    }
}

fn file_of_safeguard(safeguard: &safeguard::Safeguard) -> Safeguard {
    Safeguard {
        name: safeguard.name.clone(),
        kind: file_of_kind(&safeguard.kind),
        stop_path: Named(safeguard.stop_path),
        device_response_ms: safeguard.device_response.map(|time| ResponseMs(time.base())),
        interface_response_ms: safeguard.interface_response.map(|time| ResponseMs(time.base())),
        wear_allowance_ms: safeguard.wear_allowance.map(|time| WearMs(time.base())),
        supplement_mm: safeguard.supplement.map(|length| SupplementMm(length.base())),
        installed: safeguard.installed.as_ref().map(|installed| Installed {
            distance_mm: InstalledMm(installed.distance.base()),
            uncertainty_mm: TapeMm(installed.uncertainty.base()),
            by: installed.by.clone(),
            at: At(installed.at),
        }),
    }
}

fn kind_of(file: Kind) -> SafeguardKind {
    let length = |height: HeightMm| Length::from_base(height.0);
    match file {
        Kind::LightCurtain { detection_mm, lower_edge_mm, over, starts_stroke } => {
            SafeguardKind::LightCurtain(safeguard::LightCurtain {
                detection: Length::from_base(detection_mm.0),
                lower_edge: lower_edge_mm.map(length),
                over: match over {
                    Over::NotStated => WayOver::NotStated,
                    Over::Closed => WayOver::Closed,
                    Over::Open { hazard_mm, upper_edge_mm } => {
                        WayOver::Open { hazard: length(hazard_mm), upper_edge: length(upper_edge_mm) }
                    }
                },
                starts_stroke,
            })
        }
        Kind::TwoHandControl { shrouded } => SafeguardKind::TwoHandControl { shrouded },
        Kind::TwoHandTrip => SafeguardKind::TwoHandTrip,
        Kind::InterlockedGuard { gap, opening_time_ms } => SafeguardKind::InterlockedGuard {
            gap: match gap {
                Gap::NotStated => safeguard::Gap::NotStated,
                Gap::Closed => safeguard::Gap::None,
                Gap::Open(opening) => safeguard::Gap::Open(opening_of(opening)),
            },
            opening_time: opening_time_ms.map(|time| Time::from_base(time.0)),
        },
        Kind::SeparateBeams { heights_mm } => {
            SafeguardKind::SeparateBeams { heights: heights_mm.into_iter().map(length).collect() }
        }
        Kind::HorizontalField { detection_mm, height_mm, lowest_mm, tilt_deg } => {
            SafeguardKind::HorizontalField(safeguard::HorizontalField {
                detection: Length::from_base(detection_mm.0),
                height: length(height_mm),
                lowest: length(lowest_mm),
                tilt: Angle::from_base(tilt_deg.0),
            })
        }
        Kind::Mat { height_mm } => SafeguardKind::Mat { height: length(height_mm) },
        Kind::GuardOpening(opening) => SafeguardKind::GuardOpening(opening_of(opening)),
    }
}

fn file_of_kind(kind: &SafeguardKind) -> Kind {
    let height = |length: Length| HeightMm(length.base());
    match kind {
        SafeguardKind::LightCurtain(curtain) => Kind::LightCurtain {
            detection_mm: DetectionMm(curtain.detection.base()),
            lower_edge_mm: curtain.lower_edge.map(height),
            over: match curtain.over {
                WayOver::NotStated => Over::NotStated,
                WayOver::Closed => Over::Closed,
                WayOver::Open { hazard, upper_edge } => {
                    Over::Open { hazard_mm: height(hazard), upper_edge_mm: height(upper_edge) }
                }
            },
            starts_stroke: curtain.starts_stroke,
        },
        SafeguardKind::TwoHandControl { shrouded } => Kind::TwoHandControl { shrouded: *shrouded },
        SafeguardKind::TwoHandTrip => Kind::TwoHandTrip,
        SafeguardKind::InterlockedGuard { gap, opening_time } => Kind::InterlockedGuard {
            gap: match gap {
                safeguard::Gap::NotStated => Gap::NotStated,
                safeguard::Gap::None => Gap::Closed,
                safeguard::Gap::Open(opening) => Gap::Open(file_of_opening(opening)),
            },
            opening_time_ms: opening_time.map(|time| OpeningMs(time.base())),
        },
        SafeguardKind::SeparateBeams { heights } => {
            Kind::SeparateBeams { heights_mm: heights.iter().copied().map(height).collect() }
        }
        SafeguardKind::HorizontalField(field) => Kind::HorizontalField {
            detection_mm: DetectionMm(field.detection.base()),
            height_mm: height(field.height),
            lowest_mm: height(field.lowest),
            tilt_deg: TiltDeg(field.tilt.base()),
        },
        SafeguardKind::Mat { height: mat } => Kind::Mat { height_mm: height(*mat) },
        SafeguardKind::GuardOpening(opening) => Kind::GuardOpening(file_of_opening(opening)),
    }
}

fn opening_of(file: Opening) -> safeguard::Opening {
    let shape = match file.shape {
        Shape::Slot { length_mm } => OpeningShape::Slot { length: length_mm.map(|length| Length::from_base(length.0)) },
        Shape::Square => OpeningShape::Square,
        Shape::Round => OpeningShape::Round,
    };
    safeguard::Opening { size: Length::from_base(file.size_mm.0), shape }
}

fn file_of_opening(opening: &safeguard::Opening) -> Opening {
    let shape = match opening.shape {
        OpeningShape::Slot { length } => Shape::Slot { length_mm: length.map(|length| SlotMm(length.base())) },
        OpeningShape::Square => Shape::Square,
        OpeningShape::Round => Shape::Round,
    };
    Opening { size_mm: OpeningMm(opening.size.base()), shape }
}

fn stop_test_of(file: StopTest) -> stop_test::StopTest {
    stop_test::StopTest {
        at: file.at.0,
        by: file.by,
        condition: condition_of(file.condition),
        clock_start: file.clock_start.0,
        instrument: instrument_of(file.instrument),
        stops: times(&file.stops_ms),
    }
}

fn file_of_stop_test(test: &stop_test::StopTest) -> StopTest {
    StopTest {
        at: At(test.at),
        by: test.by.clone(),
        condition: file_of_condition(&test.condition),
        clock_start: Named(test.clock_start),
        instrument: file_of_instrument(&test.instrument),
        stops_ms: test.stops.iter().map(|stop| StopMs(stop.base())).collect(),
    }
}

fn times(stops: &[StopMs]) -> Vec<Time> {
    stops.iter().map(|stop| Time::from_base(stop.0)).collect()
}

fn condition_of(file: Condition) -> stop_test::Condition {
    stop_test::Condition {
        angle: Angle::from_base(file.angle_deg.0),
        speed: Rate::from_base(file.speed_per_min.0),
        upper_die: Mass::from_base(file.upper_die_kg.0),
        counterbalance: file.counterbalance_bar.map(|pressure| Pressure::from_base(pressure.0)),
        operating_pressure: file.operating_pressure_bar.map(|pressure| Pressure::from_base(pressure.0)),
        brake: file.brake.0,
        path: file.path.0,
        valves: file.valves.0,
    }
}

fn file_of_condition(condition: &stop_test::Condition) -> Condition {
    Condition {
        angle_deg: AngleDeg(condition.angle.base()),
        speed_per_min: SpeedPerMin(condition.speed.base()),
        upper_die_kg: DieKg(condition.upper_die.base()),
        counterbalance_bar: condition.counterbalance.map(|pressure| CounterbalanceBar(pressure.base())),
        operating_pressure_bar: condition.operating_pressure.map(|pressure| OperatingBar(pressure.base())),
        brake: Named(condition.brake),
        path: Named(condition.path),
        valves: Named(condition.valves),
    }
}

fn instrument_of(file: Instrument) -> stop_test::Instrument {
    stop_test::Instrument {
        name: file.name,
        serial: file.serial,
        calibrated: file.calibrated.map(|day| day.0),
        calibration_due: file.calibration_due.map(|day| day.0),
    }
}

fn file_of_instrument(instrument: &stop_test::Instrument) -> Instrument {
    Instrument {
        name: instrument.name.clone(),
        serial: instrument.serial.clone(),
        calibrated: instrument.calibrated.map(Day),
        calibration_due: instrument.calibration_due.map(Day),
    }
}

fn setup_of(file: ReadingSetup) -> reading::ReadingSetup {
    reading::ReadingSetup {
        condition: condition_of(file.condition),
        clock_start: file.clock_start.0,
        place: file.place.0,
    }
}

fn file_of_setup(setup: &reading::ReadingSetup) -> ReadingSetup {
    ReadingSetup {
        condition: file_of_condition(&setup.condition),
        clock_start: Named(setup.clock_start),
        place: Named(setup.place),
    }
}
