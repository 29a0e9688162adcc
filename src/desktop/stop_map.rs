//! Works out a stop map on all cores: with progress for whoever watches, and a way to stop it.

use std::ops::Range;
use std::sync::atomic::{AtomicBool, AtomicUsize, Ordering};

use calc::motion::{GoOn, MapRow, MotionRefusal, StopMap};

/// What can be seen of a map that is being worked out, and the way to stop it.
#[derive(Default)]
pub struct MapWatch {
    done: AtomicUsize,
    is_stopped: AtomicBool,
}

impl MapWatch {
    /// How many rows are done.
    pub fn rows_done(&self) -> usize {
        self.done.load(Ordering::Relaxed)
    }

    /// Asks it to stop; it does so after the rows at hand.
    pub fn stop(&self) {
        self.is_stopped.store(true, Ordering::Relaxed);
    }
}

/// Every row of a map, shared out among the cores.
///
/// # Errors
/// [`MotionRefusal::Stopped`] if it was stopped.
pub fn all_rows(map: &StopMap, watch: &MapWatch) -> Result<Vec<MapRow>, MotionRefusal> {
    let count = map.row_count();
    let workers = std::thread::available_parallelism().map_or(1, usize::from).min(count.max(1));
    let part = |worker: usize| -> Range<usize> { worker * count / workers..(worker + 1) * count / workers };
    let work = |rows: Range<usize>| {
        map.map_rows(rows, |_| {
            watch.done.fetch_add(1, Ordering::Relaxed);
            if watch.is_stopped.load(Ordering::Relaxed) { GoOn::Stop } else { GoOn::Yes }
        })
    };
    std::thread::scope(|scope| {
        let others: Vec<_> = (1..workers).map(|worker| scope.spawn(move || work(part(worker)))).collect();
        let mut rows = work(part(0))?;
        for other in others {
            match other.join() {
                Ok(found) => rows.extend(found?),
                Err(panic) => std::panic::resume_unwind(panic),
            }
        }
        Ok(rows)
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use calc::motion::{
        Brake, Counterbalance, Drive, DriveData, Kinematics, RampBrake, SliderCrank, StopPath, Tolerance,
    };

    fn map() -> StopMap {
        let drive = Drive::new(DriveData {
            kinematics: Kinematics::SliderCrank(SliderCrank::new(0.15, 0.6).unwrap()),
            reduced_inertia_kg_m2: 22.0,
            slide_mass_kg: 900.0,
            upper_die_mass_kg: 0.0,
            counterbalance: Counterbalance::Force { force_n: 8000.0 },
            friction_torque_nm: 60.0,
        })
        .unwrap();
        let law = Brake::Ramp(RampBrake::new(0.045, 0.06, 4200.0).unwrap()).torque_law(StopPath::Normal);
        StopMap::over_one_turn(drive, law, 37, vec![4.0, 5.0], Tolerance::STANDARD).unwrap()
    }

    #[test]
    fn shared_out_or_not_the_rows_are_the_same() {
        let watch = MapWatch::default();
        let alone = map().map_rows(0..37, |_| GoOn::Yes).unwrap();
        assert_eq!(all_rows(&map(), &watch).unwrap(), alone);
        assert_eq!(watch.rows_done(), 37);
    }

    #[test]
    fn a_stopped_map_gives_nothing() {
        let watch = MapWatch::default();
        watch.stop();
        assert_eq!(all_rows(&map(), &watch), Err(MotionRefusal::Stopped));
    }
}
