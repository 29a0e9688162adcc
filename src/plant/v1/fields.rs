//! Numbers, dates and names as files hold them: each is checked while it is read, so that a refusal knows its line and column.

use std::fmt::Display;

use calc::calendar::{Moment, parse_date};
use calc::limits::{self, Limit};
use calc::press::check_tag;
use jiff::civil::{Date, date};
use serde::de::Error;
use serde::{Deserialize, Deserializer, Serialize, Serializer};

use crate::read::is_let_pass;

/// Refuses a value that can be read but not taken. While further refusals of the same file are looked for, `stand_in` takes its
/// place; what is read then is thrown away.
fn refuse<T, E: Error>(why: impl Display, stand_in: T) -> Result<T, E> {
    if is_let_pass() { Ok(stand_in) } else { Err(E::custom(why)) }
}

/// Writes a whole number without a point, so that `182` stays `182`.
fn write_thousandths<S: Serializer>(count: i64, serializer: S) -> Result<S::Ok, S::Error> {
    if count % 1000 == 0 {
        serializer.serialize_i64(count / 1000)
    } else {
        serializer.serialize_f64(count as f64 / 1000.0)
    }
}

macro_rules! numbers {
    ($($(#[$doc:meta])* $name:ident: $limit:expr;)*) => {$(
        $(#[$doc])*
        #[derive(Clone, Copy, PartialEq, Eq, Debug)]
        pub struct $name(pub i64);

        impl $name {
            const LIMIT: Limit = $limit;
        }

        impl Serialize for $name {
            fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
                write_thousandths(self.0, serializer)
            }
        }

        impl<'de> Deserialize<'de> for $name {
            fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
                let value = f64::deserialize(deserializer)?;
                Self::LIMIT.take_f64(value).map(Self).or_else(|why| refuse(why, Self(Self::LIMIT.least)))
            }
        }
    )*};
}

numbers! {
    /// A stopping time, ms.
    StopMs: limits::STOPPING_TIME;
    /// A response time, ms.
    ResponseMs: limits::RESPONSE_TIME;
    /// A wear allowance, ms.
    WearMs: limits::WEAR_ALLOWANCE;
    /// An opening time, ms.
    OpeningMs: limits::OPENING_TIME;
    /// A monitor setting, ms.
    MonitorMs: limits::MONITOR_SETTING;
    /// An installed distance, mm.
    InstalledMm: limits::INSTALLED;
    /// A tape uncertainty, mm.
    TapeMm: limits::TAPE_UNCERTAINTY;
    /// A detection capability, mm.
    DetectionMm: limits::DETECTION;
    /// A height, mm.
    HeightMm: limits::HEIGHT;
    /// An opening, mm.
    OpeningMm: limits::OPENING;
    /// A slot length, mm.
    SlotMm: limits::SLOT_LENGTH;
    /// A supplemental distance, mm.
    SupplementMm: limits::SUPPLEMENT;
    /// A crank angle, degrees.
    AngleDeg: limits::ANGLE;
    /// An angle of a field to the approach, degrees.
    TiltDeg: limits::FIELD_ANGLE;
    /// A speed, strokes a minute.
    SpeedPerMin: limits::SPEED;
    /// A die mass, kg.
    DieKg: limits::DIE_MASS;
    /// A counterbalance pressure, bar.
    CounterbalanceBar: limits::COUNTERBALANCE;
    /// An operating pressure, bar.
    OperatingBar: limits::OPERATING_PRESSURE;
    /// A stroke, mm.
    StrokeMm: limits::STROKE;
    /// A connecting rod, mm.
    RodMm: limits::ROD;
    /// A press force, kN.
    ForceKn: limits::FORCE;
    /// A slide mass, kg.
    SlideKg: limits::SLIDE_MASS;
    /// An inertia at the crank, kg m².
    InertiaKgm2: limits::INERTIA;
    /// A force of a counterbalance, N.
    LiftN: limits::COUNTERBALANCE_FORCE;
    /// A piston area, cm².
    PistonCm2: limits::PISTON_AREA;
    /// A running friction, N m.
    FrictionNm: limits::FRICTION_TORQUE;
    /// A brake torque, N m.
    BrakeNm: limits::BRAKE_TORQUE;
    /// A dead time, ms.
    DeadMs: limits::DEAD_TIME;
    /// A rise time, ms.
    RiseMs: limits::RISE_TIME;
    /// A time constant, ms.
    ConstantMs: limits::TIME_CONSTANT;
    /// A pressure of the clutch-brake, bar.
    BrakeBar: limits::BRAKE_PRESSURE;
    /// The pressure at which metering ends, bar.
    MeteredToBar: limits::METERED_TO;
    /// A travel of the slide, mm.
    TravelMm: limits::TRAVEL;
}

macro_rules! counts {
    ($($(#[$doc:meta])* $name:ident: $limit:expr;)*) => {$(
        $(#[$doc])*
        #[derive(Clone, Copy, PartialEq, Eq, Debug)]
        pub struct $name(pub u32);

        impl Serialize for $name {
            fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
                serializer.serialize_u32(self.0)
            }
        }

        impl<'de> Deserialize<'de> for $name {
            fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
                let count = u32::deserialize(deserializer)?;
                match $limit.take(i64::from(count) * 1000) {
                    Ok(_) => Ok(Self(count)),
                    Err(why) => refuse(why, Self(count)),
                }
            }
        }
    )*};
}

counts! {
    /// Engaging points of a clutch.
    EngagingPoints: limits::ENGAGING_POINTS;
    /// Months or weeks between two checks.
    Every: limits::INTERVAL_MONTHS;
    /// A share in per cent.
    Share: limits::WARNING_SHARE;
}

/// Stands in for a day that was refused.
const FIRST_DAY: Date = date(1950, 1, 1);

/// A day, with or without a time of day.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct At(pub Moment);

impl Serialize for At {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_str(&self.0)
    }
}

impl<'de> Deserialize<'de> for At {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        let text = String::deserialize(deserializer)?;
        Moment::parse("Date", &text).map(Self).or_else(|why| refuse(why, Self(Moment { date: FIRST_DAY, time: None })))
    }
}

/// A day.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Day(pub Date);

impl Serialize for Day {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_str(&self.0)
    }
}

impl<'de> Deserialize<'de> for Day {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        let text = String::deserialize(deserializer)?;
        parse_date("Date", &text).map(Self).or_else(|why| refuse(why, Self(FIRST_DAY)))
    }
}

/// A press tag.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Tag(pub String);

impl Serialize for Tag {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.serialize_str(&self.0)
    }
}

impl<'de> Deserialize<'de> for Tag {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        let tag = String::deserialize(deserializer)?;
        match check_tag(&tag) {
            Ok(()) => Ok(Self(tag)),
            Err(why) => refuse(why, Self(tag)),
        }
    }
}

/// A choice that a file holds by its name.
pub trait Choice: Copy + 'static {
    /// Every choice.
    const EVERY: &'static [Self];
    /// Its name in files.
    fn name(self) -> &'static str;
}

macro_rules! choices {
    ($($kind:ty),*) => {$(
        impl Choice for $kind {
            const EVERY: &'static [Self] = Self::ALL;
            fn name(self) -> &'static str { self.key() }
        }
    )*};
}
choices!(
    calc::stop_test::BrakeState,
    calc::stop_test::StopPath,
    calc::stop_test::Valves,
    calc::stop_test::ClockStart,
    calc::reading::ReadingPlace,
    calc::press::EventKind,
    calc::rules::RuleSetId,
    calc::value_taken::ValueTaken
);

/// A choice by its name.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Named<T>(pub T);

impl<T: Choice> Serialize for Named<T> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.serialize_str(self.0.name())
    }
}

impl<'de, T: Choice> Deserialize<'de> for Named<T> {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        let name = String::deserialize(deserializer)?;
        T::EVERY.iter().copied().find(|choice| choice.name() == name).map(Self).map_or_else(
            || {
                let names: Vec<&str> = T::EVERY.iter().map(|choice| choice.name()).collect();
                let why = format!("{name:?} is not known here; it must be one of {}", names.join(", "));
                refuse(why, Self(T::EVERY[0]))
            },
            Ok,
        )
    }
}
