//! From clutch release to standstill: the equation of motion, stepped with error control, and the exact moment of standstill.
//!
//! ```text
//! J dw/dt + 1/2 J' w^2 = (m g - F_cb) s' - T_f - T_b(t),   J = J_rot + m s'^2
//! ```
//!
//! Every corner of the brake torque ends a step. Standstill is found by taking the last step again with other lengths until its speed is
//! zero: the root of the Runge-Kutta step itself, not of the interpolant, so its error is that of the step.

use super::drive::{Drive, Kinematics};
use super::link_drive::{LinkDrive, StretchInTurn};
use super::refusal::MotionRefusal;
use super::runge_kutta::{Motion, Rates, State, Step};
use super::slider_crank::SliderCrank;
use super::torque_law::{Shape, TorqueLaw};

/// Longest stop that is calculated, counted from the stop command.
pub(super) const STOP_TIME_S_MAX: f64 = 10.0;

/// Longest way that is calculated, counted from the stop command: two turns.
pub(super) const STOP_ANGLE_RAD_MAX: f64 = 2.0 * core::f64::consts::TAU;

/// Steps on trial, accepted or not. A usual stop takes five to twelve.
const STEPS_MAX: usize = 20_000;

/// Angle of the first step on trial at a tolerance of 1; it shrinks with the eighth root of the tolerance.
const FIRST_STEP: f64 = 2.0;

/// How far the stated error exceeds the sum of the local error estimates, for errors that grow on the way.
const ERROR_GROWTH: f64 = 4.0;

/// The estimate is taken this many times: measured against finer solutions, the true error of a step is up to about ten times Hairer's
/// estimate, which is meant for steering rather than for stating.
const ESTIMATE_CAUTION: f64 = 10.0;

/// Energy that may be unaccounted for, as a multiple of the relative tolerance and share of the energy turned over.
const ENERGY_SHARE_PER_TOLERANCE: f64 = 100.0;

/// Rounding alone leaves a few parts in 10^14 of the energy turned over.
const ENERGY_SHARE_ROUNDING: f64 = 1e-13;

/// The crank at clutch release and at standstill.
#[derive(Clone, Copy, Debug)]
pub(super) struct Standstill {
    pub(super) time_s: f64,
    pub(super) angle_rad: f64,
    pub(super) brake_torque_nm: f64,
    /// After clutch release.
    pub(super) brake_work_j: f64,
    pub(super) kinetic_energy_j: f64,
    pub(super) gravity_work_j: f64,
    pub(super) friction_work_j: f64,
    pub(super) time_error_s: f64,
}

/// Travel and its slopes, known at compile time so that the inner loop has no branch on the kind of drive.
trait Travel {
    /// The travel as far as it is smooth.
    type Smooth<'a>: Smooth
    where
        Self: 'a;
    fn travel_m(&self, angle_rad: f64) -> f64;
    fn slopes(&self, angle_rad: f64) -> (f64, f64);
    fn smooth_from(&self, angle_rad: f64) -> Self::Smooth<'_>;
}

/// A travel without corners. Where it ends, the step must end; it may be looked at a little beyond.
trait Smooth: Copy {
    fn slopes(&self, angle_rad: f64) -> (f64, f64);
    fn end_rad(&self) -> f64;
    fn next(&self) -> Self;
}

impl Travel for SliderCrank {
    type Smooth<'a> = &'a SliderCrank;
    fn travel_m(&self, angle_rad: f64) -> f64 {
        self.travel_m(angle_rad)
    }
    fn slopes(&self, angle_rad: f64) -> (f64, f64) {
        self.slopes(angle_rad)
    }
    fn smooth_from(&self, _: f64) -> &Self {
        self
    }
}

impl Smooth for &SliderCrank {
    #[inline]
    fn slopes(&self, angle_rad: f64) -> (f64, f64) {
        SliderCrank::slopes(self, angle_rad)
    }
    /// A crank has no corners.
    fn end_rad(&self) -> f64 {
        f64::INFINITY
    }
    fn next(&self) -> Self {
        self
    }
}

impl Travel for LinkDrive {
    type Smooth<'a> = StretchInTurn<'a>;
    fn travel_m(&self, angle_rad: f64) -> f64 {
        self.travel_m(angle_rad)
    }
    fn slopes(&self, angle_rad: f64) -> (f64, f64) {
        self.slopes(angle_rad)
    }
    fn smooth_from(&self, angle_rad: f64) -> StretchInTurn<'_> {
        self.stretch_in_turn(angle_rad)
    }
}

impl Smooth for StretchInTurn<'_> {
    #[inline]
    fn slopes(&self, angle_rad: f64) -> (f64, f64) {
        self.slopes(angle_rad)
    }
    fn end_rad(&self) -> f64 {
        self.end_rad()
    }
    fn next(&self) -> Self {
        self.next()
    }
}

/// The figures of the equation of motion that do not change during a stop.
struct Crank<'a, T> {
    travel: &'a T,
    reduced_inertia_kg_m2: f64,
    mass_kg: f64,
    net_weight_n: f64,
    friction_torque_nm: f64,
}

impl<T: Travel> Crank<'_, T> {
    fn kinetic_energy_j(&self, angle_rad: f64, speed_rad_s: f64) -> f64 {
        let (first, _) = self.travel.slopes(angle_rad);
        0.5 * (self.reduced_inertia_kg_m2 + self.mass_kg * first * first) * speed_rad_s * speed_rad_s
    }
}

/// The equation of motion on one smooth stretch of travel and brake torque.
struct Stretch<'a, T, S> {
    crank: &'a Crank<'a, T>,
    travel: S,
    shape: Shape,
}

impl<T, S: Smooth> Motion for Stretch<'_, T, S> {
    #[inline]
    fn rates(&self, since_s: f64, angle_rad: f64, speed_rad_s: f64) -> Rates {
        let crank = self.crank;
        let (first, second) = self.travel.slopes(angle_rad);
        let torque_nm = self.shape.torque_nm(since_s);
        let moved = crank.mass_kg * first;
        let inertia = crank.reduced_inertia_kg_m2 + moved * first;
        let drive_on = crank.net_weight_n * first
            - crank.friction_torque_nm
            - torque_nm
            - moved * second * speed_rad_s * speed_rad_s;
        Rates { speed: speed_rad_s, acceleration: drive_on / inertia, power: torque_nm * speed_rad_s }
    }
}

/// Runs one stop. `watch` sees every accepted step: when it begins, how long it is, and what gives the state any time after its beginning.
pub(super) fn run_to_standstill(
    drive: &Drive,
    law: &TorqueLaw,
    start_angle_rad: f64,
    speed_rad_s: f64,
    tolerance: f64,
    watch: impl FnMut(f64, f64, &dyn Fn(f64) -> State),
) -> Result<Standstill, MotionRefusal> {
    let run = Run { law, start_angle_rad, speed_rad_s, tolerance };
    match drive.kinematics() {
        Kinematics::SliderCrank(travel) => run.solve(&crank_of(drive, travel), watch),
        Kinematics::LinkDrive(travel) => run.solve(&crank_of(drive, travel), watch),
    }
}

fn crank_of<'a, T>(drive: &Drive, travel: &'a T) -> Crank<'a, T> {
    Crank {
        travel,
        reduced_inertia_kg_m2: drive.data().reduced_inertia_kg_m2,
        mass_kg: drive.moved_mass_kg(),
        net_weight_n: drive.net_weight_n(),
        friction_torque_nm: drive.data().friction_torque_nm,
    }
}

/// One stop command under one torque law.
struct Run<'a> {
    law: &'a TorqueLaw,
    start_angle_rad: f64,
    speed_rad_s: f64,
    tolerance: f64,
}

impl Run<'_> {
    fn solve<T: Travel>(
        &self,
        crank: &Crank<'_, T>,
        mut watch: impl FnMut(f64, f64, &dyn Fn(f64) -> State),
    ) -> Result<Standstill, MotionRefusal> {
        let release_s = self.law.clutch_release_s();
        let release_angle_rad = self.start_angle_rad + self.speed_rad_s * release_s;
        self.check_limits(release_s, release_angle_rad)?;
        let mut state = State { angle_rad: release_angle_rad, speed_rad_s: self.speed_rad_s, brake_work_j: 0.0 };
        let energy_j = crank.kinetic_energy_j(release_angle_rad, self.speed_rad_s);
        // Sum of the estimated local errors, in units of the tolerance.
        let mut errors = 0.0;
        let mut steps = 0;
        // First guess: an angle over which the method is known to keep the tolerance; the error control corrects it.
        let mut length_s = FIRST_STEP * eighth_root(self.tolerance) / self.speed_rad_s;
        let mut travel = crank.travel.smooth_from(release_angle_rad);
        for piece in self.law.pieces_after_release() {
            let mut stretch = Stretch { crank, travel, shape: piece.shape };
            let piece_s = piece.end_s - piece.start_s;
            let mut since_s = 0.0;
            let mut rates = stretch.rates(0.0, state.angle_rad, state.speed_rad_s);
            while since_s < piece_s {
                steps += 1;
                if STEPS_MAX < steps {
                    return Err(MotionRefusal::StepLimit { steps: STEPS_MAX });
                }
                let left_s = piece_s - since_s;
                let wanted_s = until_just_after_standstill(&state, &rates, length_s);
                let reaches_corner = left_s <= 1.000_001 * wanted_s;
                let trial_s = if reaches_corner { left_s } else { wanted_s };
                let step = Step::take(&stretch, since_s, state, rates, trial_s);
                let share = self.error_share(&step, energy_j);
                let growth = growth_for(share);
                // A step gone astray is taken again, shorter.
                if share.is_nan() || 1.0 < share {
                    length_s = trial_s * growth.min(0.9);
                    continue;
                }
                // A step cut short by a corner or by standstill says nothing against the longer one wanted before.
                length_s = (trial_s * growth).max(if trial_s < length_s { length_s } else { 0.0 });
                let bracket_s = standstill_bracket(&stretch, since_s, &step);
                let last = bracket_s.map(|s| locate_standstill(&stretch, since_s, &step, s));
                let reached = last.as_ref().unwrap_or(&step);
                errors += self.error_share(reached, energy_j);
                let corner_rad = stretch.travel.end_rad();
                let cut = (corner_rad < reached.after.angle_rad)
                    .then(|| cut_at_angle(&stretch, since_s, reached, corner_rad));
                let taken = cut.as_ref().unwrap_or(reached);
                watch(piece.start_s + since_s, taken.length_s, &|length_s| {
                    Step::take(&stretch, since_s, state, rates, length_s).after
                });
                if cut.is_none() && last.is_some() {
                    let since_s = since_s + taken.length_s;
                    return self.finish(
                        crank,
                        release_angle_rad,
                        taken,
                        piece.start_s + since_s,
                        piece.shape.torque_nm(since_s),
                        errors,
                    );
                }
                since_s = if reaches_corner && cut.is_none() { piece_s } else { since_s + taken.length_s };
                state = taken.after;
                if cut.is_some() {
                    travel = travel.next();
                    stretch.travel = travel;
                }
                rates = stretch.rates(since_s, state.angle_rad, state.speed_rad_s);
                self.check_limits(piece.start_s + since_s, state.angle_rad)?;
            }
        }
        // The last piece of a torque law never ends, so the loop above always returns; a law that did end has no standstill.
        Err(MotionRefusal::NoStandstillInTime { limit_s: STOP_TIME_S_MAX })
    }

    /// Estimated local error as a share of what the tolerance allows. The brake's work is held to the tolerance too.
    fn error_share(&self, step: &Step, energy_j: f64) -> f64 {
        let speed = self.tolerance * self.speed_rad_s;
        ESTIMATE_CAUTION * step.error_share([speed * step.length_s, speed, self.tolerance * energy_j])
    }

    fn check_limits(&self, time_s: f64, angle_rad: f64) -> Result<(), MotionRefusal> {
        if STOP_TIME_S_MAX < time_s {
            return Err(MotionRefusal::NoStandstillInTime { limit_s: STOP_TIME_S_MAX });
        }
        if STOP_ANGLE_RAD_MAX < angle_rad - self.start_angle_rad {
            return Err(MotionRefusal::NoStandstillInAngle { limit_rad: STOP_ANGLE_RAD_MAX });
        }
        Ok(())
    }

    fn finish<T: Travel>(
        &self,
        crank: &Crank<'_, T>,
        release_angle_rad: f64,
        last: &Step,
        time_s: f64,
        brake_torque_nm: f64,
        errors: f64,
    ) -> Result<Standstill, MotionRefusal> {
        let angle_rad = last.after.angle_rad;
        self.check_limits(time_s, angle_rad)?;
        let way_m = crank.travel.travel_m(angle_rad) - crank.travel.travel_m(release_angle_rad);
        let found = Standstill {
            time_s,
            angle_rad,
            brake_torque_nm,
            brake_work_j: last.after.brake_work_j,
            kinetic_energy_j: crank.kinetic_energy_j(release_angle_rad, self.speed_rad_s),
            gravity_work_j: crank.net_weight_n * way_m,
            friction_work_j: crank.friction_torque_nm * (angle_rad - release_angle_rad),
            time_error_s: ERROR_GROWTH * errors * self.tolerance * self.speed_rad_s / last.end_acceleration.abs()
                + 16.0 * f64::EPSILON * time_s,
        };
        let turned_over = found.kinetic_energy_j + found.gravity_work_j.abs() + found.friction_work_j;
        let missing = found.kinetic_energy_j + found.gravity_work_j - found.friction_work_j - found.brake_work_j;
        let share = missing.abs() / turned_over;
        let share_max = ENERGY_SHARE_PER_TOLERANCE * self.tolerance + ENERGY_SHARE_ROUNDING;
        if share <= share_max { Ok(found) } else { Err(MotionRefusal::EnergyNotBalanced { share, share_max }) }
    }
}

/// Steps reach a little past the standstill foreseen: a standstill inside the step is found, one just beyond it would cost another step.
fn until_just_after_standstill(state: &State, rates: &Rates, length_s: f64) -> f64 {
    let foreseen_s = -1.2 * state.speed_rad_s / rates.acceleration;
    if 0.0 < foreseen_s && foreseen_s < length_s { foreseen_s } else { length_s }
}

/// Length of a step, at most this one's, whose end has no speed left; none if the crank turns all the way.
fn standstill_bracket(motion: &impl Motion, since_s: f64, step: &Step) -> Option<f64> {
    if step.after.speed_rad_s <= 0.0 {
        return Some(step.length_s);
    }
    let dips = step.first.acceleration < 0.0 && 0.0 < step.end_acceleration;
    if !dips {
        return None;
    }
    // Slower, then faster again: the least speed in between may be below zero. Halving on the sign of the acceleration finds it.
    let (mut low, mut high) = (0.0, step.length_s);
    let mut least = None;
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        let part = Step::take(motion, since_s, step.before, step.first, middle);
        if part.after.speed_rad_s <= 0.0 {
            least = Some(middle);
            break;
        }
        // Far from zero: the interpolant is good enough to say that nothing can happen.
        if part.end_acceleration < 0.0 {
            low = middle;
        } else {
            high = middle;
        }
        let reach = (high - low) * (part.end_acceleration.abs() + step.end_acceleration.abs());
        if reach < 1e-3 * part.after.speed_rad_s {
            break;
        }
    }
    least
}

/// The step that ends at standstill. At `bracket_s` the speed is zero or below, at the start above.
fn locate_standstill(motion: &impl Motion, since_s: f64, step: &Step, bracket_s: f64) -> Step {
    let (mut low, mut high) = (0.0, bracket_s);
    let mut length_s = first_guess(step, bracket_s);
    let mut trial = *step;
    for _ in 0..80 {
        trial = Step::take(motion, since_s, step.before, step.first, length_s);
        let speed = trial.after.speed_rad_s;
        if speed <= 0.0 {
            high = length_s;
        } else {
            low = length_s;
        }
        // Newton's method: the speed changes with the length of the step as the acceleration at its end, up to the error of the step.
        let correction_s = -speed / trial.end_acceleration;
        if correction_s.abs() <= 1e-7 * length_s {
            // What is left is second order: below 1e-14 of the step.
            trial.length_s += correction_s;
            trial.after.angle_rad += 0.5 * speed * correction_s;
            trial.after.speed_rad_s = 0.0;
            return trial;
        }
        let newton = length_s + correction_s;
        length_s = if low < newton && newton < high { newton } else { 0.5 * (low + high) };
        if high - low <= f64::EPSILON * high {
            break;
        }
    }
    trial.after.speed_rad_s = 0.0;
    trial
}

/// The step that ends at a corner of the travel, which the given step passes.
fn cut_at_angle(motion: &impl Motion, since_s: f64, step: &Step, corner_rad: f64) -> Step {
    let (mut low, mut high) = (0.0, step.length_s);
    let share = (corner_rad - step.before.angle_rad) / (step.after.angle_rad - step.before.angle_rad);
    let mut length_s = share * step.length_s;
    let mut trial = *step;
    for _ in 0..80 {
        trial = Step::take(motion, since_s, step.before, step.first, length_s);
        let beyond_rad = trial.after.angle_rad - corner_rad;
        if 0.0 < beyond_rad {
            high = length_s;
        } else {
            low = length_s;
        }
        let correction_s = -beyond_rad / trial.after.speed_rad_s;
        if correction_s.abs() <= 1e-8 * length_s {
            // What is left is second order: below 1e-16 of the step.
            let end_s = since_s + trial.length_s;
            let rates = motion.rates(end_s, trial.after.angle_rad, trial.after.speed_rad_s);
            trial.length_s += correction_s;
            trial.after.brake_work_j += rates.power * correction_s;
            trial.after.speed_rad_s += rates.acceleration * correction_s;
            break;
        }
        let newton = length_s + correction_s;
        length_s = if low < newton && newton < high { newton } else { 0.5 * (low + high) };
        if high - low <= f64::EPSILON * high {
            break;
        }
    }
    trial.after.angle_rad = corner_rad;
    trial
}

/// Where the cubic through the speeds and accelerations at both ends of the step is zero; a few secant steps are enough for a first guess.
fn first_guess(step: &Step, bracket_s: f64) -> f64 {
    let h = step.length_s;
    let (from, to) = (step.before.speed_rad_s, step.after.speed_rad_s);
    let rise = to - from;
    let bend = h * step.first.acceleration - rise;
    let twist = rise - h * step.end_acceleration - bend;
    let speed_at = |x: f64| from + x * (rise + (1.0 - x) * (bend + x * twist));
    let (mut low, mut high) = (0.0, bracket_s / h);
    let mut low_speed = from;
    let mut high_speed = speed_at(high);
    for _ in 0..12 {
        if 0.0 <= high_speed {
            break;
        }
        let secant = low + (high - low) * low_speed / (low_speed - high_speed);
        let speed = speed_at(secant);
        if speed.abs() <= 1e-9 * from {
            return secant * h;
        }
        if speed < 0.0 {
            high = secant;
            high_speed = speed;
            // Illinois rule: the end that stays counts half, so that both ends move.
            low_speed *= 0.5;
        } else {
            low = secant;
            low_speed = speed;
            high_speed *= 0.5;
        }
    }
    0.5 * (low + high) * h
}

/// How much longer or shorter than this step the next may be, from its error: the error of a step grows with the eighth power of its length.
fn growth_for(share: f64) -> f64 {
    if share.is_finite() { (0.85 / eighth_root(share.max(1e-10))).clamp(0.2, 6.0) } else { 0.2 }
}

fn eighth_root(x: f64) -> f64 {
    x.sqrt().sqrt().sqrt()
}
