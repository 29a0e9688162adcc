//! Drive and brake of a press, from the stored shape and back.

use calc::prediction::{self, BrakeData, PredictionData, PressureData, RampData, TravelEntry};
use calc::units::{Angle, Area, Force, Inertia, Length, Mass, Pressure, Time, Torque};

use super::fields::*;
use super::shape::*;

pub(super) fn prediction_of(file: Prediction) -> PredictionData {
    PredictionData {
        slide_mass: file.slide_kg.map(|mass| Mass::from_base(mass.0)),
        inertia: file.inertia_kgm2.map(|inertia| Inertia::from_base(inertia.0)),
        counterbalance: match file.counterbalance {
            None => prediction::Lift::NotStated,
            Some(Lift::None) => prediction::Lift::None,
            Some(Lift::Force { force_n }) => prediction::Lift::Force(force_n.map(|force| Force::from_base(force.0))),
            Some(Lift::Cylinders { pressure_bar, area_cm2 }) => prediction::Lift::Cylinders {
                pressure: pressure_bar.map(|pressure| Pressure::from_base(pressure.0)),
                area: area_cm2.map(|area| Area::from_base(area.0)),
            },
        },
        friction: file.friction_nm.map(|torque| Torque::from_base(torque.0)),
        travel: file
            .travel
            .iter()
            .map(|row| TravelEntry {
                angle: Angle::from_base(row.angle_deg.0),
                travel: Length::from_base(row.travel_mm.0),
            })
            .collect(),
        brake: file.brake.map_or(BrakeData::NotStated, brake_of),
        clock_start: file.clock_start.0,
    }
}

fn brake_of(file: Brake) -> BrakeData {
    let bar = |pressure: BrakeBar| Pressure::from_base(pressure.0);
    let constant = |time: ConstantMs| Time::from_base(time.0);
    match file {
        Brake::Ramp { dead_ms, rise_ms, torque_nm } => BrakeData::Ramp(RampData {
            dead_time: dead_ms.map(|time| Time::from_base(time.0)),
            rise_time: rise_ms.map(|time| Time::from_base(time.0)),
            torque: torque_nm.map(|torque| Torque::from_base(torque.0)),
        }),
        Brake::Pressure {
            dead_ms,
            torque_nm,
            engaged_bar,
            clutch_release_bar,
            touch_bar,
            fast_ms,
            metered,
            dump_ms,
            pressures_typical,
        } => BrakeData::Pressure(PressureData {
            dead_time: dead_ms.map(|time| Time::from_base(time.0)),
            torque: torque_nm.map(|torque| Torque::from_base(torque.0)),
            engaged: engaged_bar.map(bar),
            clutch_release: clutch_release_bar.map(bar),
            touch: touch_bar.map(bar),
            fast: fast_ms.map(constant),
            metered: metered.map(|metered| prediction::Metered {
                from: metered.from_bar.map(bar),
                to: metered.to_bar.map(|pressure| Pressure::from_base(pressure.0)),
                slow: metered.slow_ms.map(constant),
            }),
            dump: dump_ms.map(constant),
            is_typical: pressures_typical,
        }),
    }
}

pub(super) fn file_of_prediction(data: &PredictionData) -> Prediction {
    Prediction {
        clock_start: Named(data.clock_start),
        slide_kg: data.slide_mass.map(|mass| SlideKg(mass.base())),
        inertia_kgm2: data.inertia.map(|inertia| InertiaKgm2(inertia.base())),
        counterbalance: match data.counterbalance {
            prediction::Lift::NotStated => None,
            prediction::Lift::None => Some(Lift::None),
            prediction::Lift::Force(force) => Some(Lift::Force { force_n: force.map(|force| LiftN(force.base())) }),
            prediction::Lift::Cylinders { pressure, area } => Some(Lift::Cylinders {
                pressure_bar: pressure.map(|pressure| CounterbalanceBar(pressure.base())),
                area_cm2: area.map(|area| PistonCm2(area.base())),
            }),
        },
        friction_nm: data.friction.map(|torque| FrictionNm(torque.base())),
        brake: file_of_brake(&data.brake),
        travel: data
            .travel
            .iter()
            .map(|row| Travel { angle_deg: AngleDeg(row.angle.base()), travel_mm: TravelMm(row.travel.base()) })
            .collect(),
    }
}

fn file_of_brake(brake: &BrakeData) -> Option<Brake> {
    let bar = |pressure: Pressure| BrakeBar(pressure.base());
    let constant = |time: Time| ConstantMs(time.base());
    let dead = |time: Option<Time>| time.map(|time| DeadMs(time.base()));
    let full = |torque: Option<Torque>| torque.map(|torque| BrakeNm(torque.base()));
    match brake {
        BrakeData::NotStated => None,
        BrakeData::Ramp(ramp) => Some(Brake::Ramp {
            dead_ms: dead(ramp.dead_time),
            rise_ms: ramp.rise_time.map(|time| RiseMs(time.base())),
            torque_nm: full(ramp.torque),
        }),
        BrakeData::Pressure(pressure) => Some(Brake::Pressure {
            dead_ms: dead(pressure.dead_time),
            torque_nm: full(pressure.torque),
            engaged_bar: pressure.engaged.map(bar),
            clutch_release_bar: pressure.clutch_release.map(bar),
            touch_bar: pressure.touch.map(bar),
            fast_ms: pressure.fast.map(constant),
            metered: pressure.metered.map(|metered| Metered {
                from_bar: metered.from.map(bar),
                to_bar: metered.to.map(|pressure| MeteredToBar(pressure.base())),
                slow_ms: metered.slow.map(constant),
            }),
            dump_ms: pressure.dump.map(constant),
            pressures_typical: pressure.is_typical,
        }),
    }
}
