//! The stored shape of version 1: plain structs, in the order in which a person reads a file. No meaning here.

use calc::press::EventKind;
use calc::reading::ReadingPlace;
use calc::rules::RuleSetId;
use calc::stop_test::{BrakeState, ClockStart, StopPath, Valves};
use calc::value_taken::ValueTaken;
use serde::{Deserialize, Serialize};

use super::fields::*;

macro_rules! stored {
    ($($(#[$doc:meta])* struct $name:ident { $($(#[$attr:meta])* $field:ident: $kind:ty,)* })*) => {$(
        $(#[$doc])*
        #[derive(Clone, PartialEq, Debug, Serialize, Deserialize)]
        #[serde(deny_unknown_fields)]
        pub struct $name { $($(#[$attr])* pub $field: $kind,)* }
    )*};
}

stored! {
    /// `plant.ron`
    struct PlantFile {
        version: u32,
        name: String,
        rules: Named<RuleSetId>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        wish: Option<Named<ValueTaken>>,
        test_interval_months: Every,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        reading_interval: Option<Interval>,
        warning_share_percent: Share,
    }

    /// `presses/<tag>.ron`
    struct PressFile {
        version: u32,
        tag: Tag,
        description: String,
        serial: String,
        location: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        force_kn: Option<ForceKn>,
        frame: Frame,
        clutch: Clutch,
        drive: Drive,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        stroke_mm: Option<StrokeMm>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        rod_mm: Option<RodMm>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        fastest_speed_per_min: Option<SpeedPerMin>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        slowest_speed_per_min: Option<SpeedPerMin>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        heaviest_die_kg: Option<DieKg>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        ce_marked: Option<bool>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        control_response_ms: Option<ResponseMs>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        monitor_setting_ms: Option<MonitorMs>,
        safeguards: Vec<Safeguard>,
        stop_tests: Vec<StopTest>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        reference: Option<ReadingSetup>,
        #[serde(default, skip_serializing_if = "Vec::is_empty")]
        readings: Vec<Reading>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        prediction: Option<Prediction>,
        #[serde(default, skip_serializing_if = "Vec::is_empty")]
        events: Vec<Event>,
    }

    /// One safeguard.
    struct Safeguard {
        name: String,
        kind: Kind,
        stop_path: Named<StopPath>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        device_response_ms: Option<ResponseMs>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        interface_response_ms: Option<ResponseMs>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        wear_allowance_ms: Option<WearMs>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        supplement_mm: Option<SupplementMm>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        installed: Option<Installed>,
    }

    /// A distance measured with a tape.
    struct Installed {
        distance_mm: InstalledMm,
        uncertainty_mm: TapeMm,
        by: String,
        at: At,
    }

    /// An opening in a guard.
    struct Opening {
        size_mm: OpeningMm,
        shape: Shape,
    }

    /// A condition, several timed stops.
    struct StopTest {
        at: At,
        by: String,
        condition: Condition,
        clock_start: Named<ClockStart>,
        instrument: Instrument,
        stops_ms: Vec<StopMs>,
    }

    /// The condition of a stop.
    struct Condition {
        angle_deg: AngleDeg,
        speed_per_min: SpeedPerMin,
        upper_die_kg: DieKg,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        counterbalance_bar: Option<CounterbalanceBar>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        operating_pressure_bar: Option<OperatingBar>,
        brake: Named<BrakeState>,
        path: Named<StopPath>,
        valves: Named<Valves>,
    }

    /// What the stops were timed with.
    struct Instrument {
        name: String,
        serial: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        calibrated: Option<Day>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        calibration_due: Option<Day>,
    }

    /// How readings are taken.
    struct ReadingSetup {
        condition: Condition,
        clock_start: Named<ClockStart>,
        place: Named<ReadingPlace>,
    }

    /// One monthly check. Its setup is left out where it is the reference.
    struct Reading {
        at: At,
        by: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        setup: Option<ReadingSetup>,
        instrument: Instrument,
        stops_ms: Vec<StopMs>,
    }

    /// What a stop can be predicted from.
    struct Prediction {
        clock_start: Named<ClockStart>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        slide_kg: Option<SlideKg>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        inertia_kgm2: Option<InertiaKgm2>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        counterbalance: Option<Lift>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        friction_nm: Option<FrictionNm>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        brake: Option<Brake>,
        #[serde(default, skip_serializing_if = "Vec::is_empty")]
        travel: Vec<Travel>,
    }

    /// One row of a travel table.
    struct Travel {
        angle_deg: AngleDeg,
        travel_mm: TravelMm,
    }

    /// The metered stage of a two-stage unit.
    struct Metered {
        #[serde(default, skip_serializing_if = "Option::is_none")]
        from_bar: Option<BrakeBar>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        to_bar: Option<MeteredToBar>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        slow_ms: Option<ConstantMs>,
    }

    /// Something that happened.
    struct Event {
        at: At,
        kind: Named<EventKind>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        safeguard: Option<String>,
        #[serde(default, skip_serializing_if = "String::is_empty")]
        note: String,
    }
}

macro_rules! stored_choice {
    ($($(#[$doc:meta])* enum $name:ident { $($body:tt)* })*) => {$(
        $(#[$doc])*
        #[derive(Clone, PartialEq, Debug, Serialize, Deserialize)]
        #[serde(rename_all = "snake_case", deny_unknown_fields)]
        pub enum $name { $($body)* }
    )*};
}

stored_choice! {
    /// Time between two checks.
    enum Interval { Weeks(Every), Months(Every) }

    /// Build of the frame.
    enum Frame { CFrame, StraightSide }

    /// Clutch and brake.
    enum Clutch { PartRevolution(Medium), FullRevolution { engaging_points: EngagingPoints } }

    /// Medium of a friction clutch.
    enum Medium { Air, Hydraulic }

    /// Drive of the slide.
    enum Drive { Crank, Link }

    /// Kind of a safeguard.
    enum Kind {
        LightCurtain {
            detection_mm: DetectionMm,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            lower_edge_mm: Option<HeightMm>,
            over: Over,
            starts_stroke: bool,
        },
        TwoHandControl { shrouded: bool },
        TwoHandTrip,
        InterlockedGuard {
            gap: Gap,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            opening_time_ms: Option<OpeningMs>,
        },
        SeparateBeams { heights_mm: Vec<HeightMm> },
        HorizontalField { detection_mm: DetectionMm, height_mm: HeightMm, lowest_mm: HeightMm, tilt_deg: TiltDeg },
        Mat { height_mm: HeightMm },
        GuardOpening(Opening),
    }

    /// The way over a curtain.
    enum Over { NotStated, Closed, Open { hazard_mm: HeightMm, upper_edge_mm: HeightMm } }

    /// The gap of an interlocked guard.
    enum Gap { NotStated, Closed, Open(Opening) }

    /// What holds the slide up.
    enum Lift {
        None,
        Force {
            #[serde(default, skip_serializing_if = "Option::is_none")]
            force_n: Option<LiftN>,
        },
        Cylinders {
            #[serde(default, skip_serializing_if = "Option::is_none")]
            pressure_bar: Option<CounterbalanceBar>,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            area_cm2: Option<PistonCm2>,
        },
    }

    /// How the brake sets.
    enum Brake {
        Ramp {
            #[serde(default, skip_serializing_if = "Option::is_none")]
            dead_ms: Option<DeadMs>,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            rise_ms: Option<RiseMs>,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            torque_nm: Option<BrakeNm>,
        },
        Pressure {
            #[serde(default, skip_serializing_if = "Option::is_none")]
            dead_ms: Option<DeadMs>,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            torque_nm: Option<BrakeNm>,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            engaged_bar: Option<BrakeBar>,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            clutch_release_bar: Option<BrakeBar>,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            touch_bar: Option<BrakeBar>,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            fast_ms: Option<ConstantMs>,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            metered: Option<Metered>,
            #[serde(default, skip_serializing_if = "Option::is_none")]
            dump_ms: Option<ConstantMs>,
            pressures_typical: bool,
        },
    }

    /// The shape of an opening.
    enum Shape {
        Slot {
            #[serde(default, skip_serializing_if = "Option::is_none")]
            length_mm: Option<SlotMm>,
        },
        Square,
        Round,
    }
}
