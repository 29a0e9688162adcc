//! Brake figures from measured stops: delay and torque, on request also running friction, with their intervals; and what they predict.

use super::brake::{Brake, PressureBrake, PressureBrakeData, RampBrake, StopPath};
use super::drive::Drive;
use super::fit_inference::{Estimate, Inference};
use super::least_squares::{Minimum, Model, Unknown, minimise};
use super::limits;
use super::refusal::MotionRefusal;
use super::stop::{Stop, StopCommand, Tolerance, stop};

const DELAY: usize = 0;
const TORQUE: usize = 1;
const FRICTION: usize = 2;

/// Speeds closer together than this share count as one speed.
const ONE_SPEED_SHARE: f64 = 0.01;

/// Unknowns correlated more strongly than this cannot be told apart by any affordable number of stops.
const CORRELATION_MAX: f64 = 0.9999;

/// The mean of several stops timed in one condition.
#[derive(Clone, Debug, PartialEq)]
pub struct FitCondition {
    /// The drive with the upper die and the counterbalance of this condition.
    pub drive: Drive,
    /// Angle and speed at the stop command.
    pub command: StopCommand,
    /// Mean of the stop times, from the stop command to standstill.
    pub mean_stop_time_s: f64,
    /// Their standard deviation.
    pub standard_deviation_s: f64,
    /// How many stops.
    pub stops: u32,
}

/// Which figures are looked for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Unknowns {
    /// Dead time and full torque. The running friction is that of each condition's drive.
    DelayAndTorque,
    /// Dead time, full torque and running friction; the friction of the drives is not used.
    DelayTorqueAndFriction,
}

/// How the brake torque builds up: everything about the brake but its dead time and full torque.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum BuildUp {
    /// A ramp.
    Ramp {
        /// Rise time of the brake torque.
        rise_time_s: f64,
    },
    /// The falling pressure of a fluid-released brake.
    Pressure {
        /// The brake; its dead time and full torque are not used.
        data: PressureBrakeData,
        /// Which way it was asked to stop, in every condition.
        path: StopPath,
    },
}

impl BuildUp {
    fn brake(&self, dead_time_s: f64, full_torque_nm: f64) -> Result<Brake, MotionRefusal> {
        Ok(match *self {
            Self::Ramp { rise_time_s } => Brake::Ramp(RampBrake::new(dead_time_s, rise_time_s, full_torque_nm)?),
            Self::Pressure { data, .. } => {
                Brake::Pressure(PressureBrake::new(PressureBrakeData { dead_time_s, full_torque_nm, ..data })?)
            }
        })
    }

    fn path(&self) -> StopPath {
        match self {
            Self::Ramp { .. } => StopPath::Normal,
            Self::Pressure { path, .. } => *path,
        }
    }

    /// Time from the dead time until the brake has built up.
    fn rise_time_s(&self) -> Result<f64, MotionRefusal> {
        match *self {
            Self::Ramp { rise_time_s } => limits::RISE_TIME.check(rise_time_s),
            // A pressure law builds up alike whatever its torque.
            Self::Pressure { path, .. } => Ok(self.brake(0.0, 1.0)?.torque_law(path).built_up_s()),
        }
    }
}

/// What is to be fitted.
#[derive(Clone, Debug, PartialEq)]
pub struct FitRequest {
    /// The measured stops.
    pub conditions: Vec<FitCondition>,
    /// How the brake torque builds up, which is not fitted.
    pub build_up: BuildUp,
    /// Which figures are looked for.
    pub unknowns: Unknowns,
}

/// One condition beside what the fit makes of it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FittedCondition {
    /// Stop time of the fitted model.
    pub fitted_stop_time_s: f64,
    /// Measured mean less fitted.
    pub residual_s: f64,
    /// The residual in standard deviations of the measured mean.
    pub residual_in_deviations: f64,
}

/// The brake that explains the measured stops best.
#[derive(Clone, Debug, PartialEq)]
pub struct FittedBrake {
    /// Dead time, s, with its 95 % interval.
    pub dead_time_s: Estimate,
    /// Full torque, N m, with its 95 % interval.
    pub full_torque_nm: Estimate,
    /// Running friction, N m, if it was looked for.
    pub friction_torque_nm: Option<Estimate>,
    /// Every condition in the order given.
    pub conditions: Vec<FittedCondition>,
    /// Weighted sum of squared residuals; about the number of conditions less that of unknowns if the model fits.
    pub chi_squared: f64,
    /// The residuals are too great for the scatter of the stops (1 % level): the model misses something. The intervals are then widened.
    pub lack_of_fit: bool,
    build_up: BuildUp,
    brake: Brake,
    unknowns: Unknowns,
    inference: Inference,
    /// Variance of a single stop, pooled over the conditions, and its degrees of freedom.
    scatter: (f64, f64),
}

/// A stop predicted from a fit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StopPrediction {
    /// The stop with the best figures.
    pub stop: Stop,
    /// Stop time of one new stop, or the mean of several, with its 95 % prediction interval.
    pub stop_time_s: Estimate,
}

/// Finds the figures of a brake from measured stops.
///
/// Each condition weighs n/s^2. The full model is solved for every condition, so angles, speeds, dies and counterbalances may all differ.
/// The intervals come from the Jacobian and Student's t.
///
/// # Refuses
/// Figures out of range; fewer conditions than unknowns; [`MotionRefusal::OneSpeedOnly`] if no two speeds differ by more than 1 %;
/// [`MotionRefusal::CannotSeparate`] if the data leave the figures open (correlation beyond 0.9999, or an interval wider than the figure
/// it belongs to could be); [`MotionRefusal::NoFit`] if the search does not settle.
pub fn fit_stops(request: &FitRequest) -> Result<FittedBrake, MotionRefusal> {
    check(request)?;
    let conditions = &request.conditions;
    let measured: Vec<f64> = conditions.iter().map(|c| c.mean_stop_time_s).collect();
    let weights: Vec<f64> =
        conditions.iter().map(|c| f64::from(c.stops) / (c.standard_deviation_s * c.standard_deviation_s)).collect();
    let degrees: Vec<f64> = conditions.iter().map(|c| f64::from(c.stops) - 1.0).collect();
    let model = BrakeModel { conditions, build_up: request.build_up, unknowns: request.unknowns };
    let start = place_to_start(&model, first_guess(request, &weights)?)?;
    let minimum = minimise(&model, &measured, &weights, start)?;
    let Minimum { at, values, jacobian, chi_squared } = minimum;
    let separate = |one: usize, other: usize| MotionRefusal::CannotSeparate {
        one: NAMES[one],
        other: NAMES[other],
        suggested_rad_s: suggested_speed(conditions),
    };
    let n = model.unknowns();
    let inference =
        Inference::new(n, jacobian, weights.clone(), degrees.clone(), chi_squared).ok_or(separate(n - 2, n - 1))?;
    check_separate(&inference, &at, n, &measured, separate)?;
    let scatter_degrees: f64 = degrees.iter().sum();
    let scatter = conditions
        .iter()
        .zip(&degrees)
        .map(|(c, nu)| nu * c.standard_deviation_s * c.standard_deviation_s)
        .sum::<f64>()
        / scatter_degrees;
    let estimate = |unknown: usize| Estimate::around(at[unknown], inference.half_width(unknown));
    Ok(FittedBrake {
        dead_time_s: estimate(DELAY),
        full_torque_nm: estimate(TORQUE),
        friction_torque_nm: (FRICTION < n).then(|| estimate(FRICTION)),
        conditions: measured
            .iter()
            .zip(&values)
            .zip(&weights)
            .map(|((measured, fitted), weight)| FittedCondition {
                fitted_stop_time_s: *fitted,
                residual_s: measured - fitted,
                residual_in_deviations: (measured - fitted) * weight.sqrt(),
            })
            .collect(),
        chi_squared,
        lack_of_fit: inference.lack_of_fit,
        build_up: request.build_up,
        brake: request.build_up.brake(at[DELAY], at[TORQUE])?,
        unknowns: request.unknowns,
        inference,
        scatter: (scatter, scatter_degrees),
    })
}

const NAMES: [&str; 3] = ["delay", "brake torque", "running friction"];

fn check(request: &FitRequest) -> Result<(), MotionRefusal> {
    request.build_up.rise_time_s()?;
    for condition in &request.conditions {
        limits::MEASURED_TIME.check(condition.mean_stop_time_s)?;
        limits::MEASURED_SCATTER.check(condition.standard_deviation_s)?;
        limits::MEASURED_STOPS.check(f64::from(condition.stops))?;
    }
    let needed = match request.unknowns {
        Unknowns::DelayAndTorque => 2,
        Unknowns::DelayTorqueAndFriction => 3,
    };
    let (slowest, fastest) = speed_range(&request.conditions);
    if !request.conditions.is_empty() && fastest <= slowest * (1.0 + ONE_SPEED_SHARE) {
        return Err(MotionRefusal::OneSpeedOnly {
            speed_rad_s: slowest,
            suggested_rad_s: suggested_speed(&request.conditions),
        });
    }
    if request.conditions.len() < needed {
        return Err(MotionRefusal::TooFewConditions { given: request.conditions.len(), needed });
    }
    Ok(())
}

/// The figures must be told apart: neither strongly correlated, nor so uncertain that an interval covers everything possible.
fn check_separate(
    inference: &Inference,
    at: &Unknown,
    n: usize,
    measured: &[f64],
    refusal: impl Fn(usize, usize) -> MotionRefusal,
) -> Result<(), MotionRefusal> {
    for one in 0..n {
        for other in one + 1..n {
            if CORRELATION_MAX < inference.correlation(one, other).abs() {
                return Err(refusal(one, other));
            }
        }
    }
    let shortest = measured.iter().copied().fold(f64::INFINITY, f64::min);
    if shortest < inference.half_width(DELAY) || at[TORQUE] < inference.half_width(TORQUE) {
        return Err(refusal(DELAY, TORQUE));
    }
    if FRICTION < n && at[TORQUE] < inference.half_width(FRICTION) {
        return Err(refusal(TORQUE, FRICTION));
    }
    Ok(())
}

fn speed_range(conditions: &[FitCondition]) -> (f64, f64) {
    conditions
        .iter()
        .map(|c| c.command.speed_rad_s())
        .fold((f64::INFINITY, 0.0), |(least, greatest), speed| (least.min(speed), greatest.max(speed)))
}

/// Half the slowest speed tested: slow stops show the delay, and no press is asked to run faster than it has.
fn suggested_speed(conditions: &[FitCondition]) -> f64 {
    0.5 * speed_range(conditions).0
}

/// Straight line through stop time over angular momentum at the stop command, t = t_d + t_r/2 + J w0/T: the closed form of a drive of
/// constant inertia. Only a place to start from.
fn first_guess(request: &FitRequest, weights: &[f64]) -> Result<Unknown, MotionRefusal> {
    let conditions = &request.conditions;
    let momentum: Vec<f64> = conditions
        .iter()
        .map(|c| c.drive.inertia_kg_m2(c.command.start_angle_rad()) * c.command.speed_rad_s())
        .collect();
    let total: f64 = weights.iter().sum();
    let mean = |of: &dyn Fn(usize) -> f64| (0..weights.len()).map(|k| weights[k] * of(k)).sum::<f64>() / total;
    let time = |k: usize| conditions[k].mean_stop_time_s;
    let (mean_momentum, mean_time) = (mean(&|k| momentum[k]), mean(&time));
    let spread = mean(&|k| (momentum[k] - mean_momentum) * (momentum[k] - mean_momentum));
    let slope = mean(&|k| (momentum[k] - mean_momentum) * (time(k) - mean_time)) / spread;
    let shortest = conditions.iter().map(|c| c.mean_stop_time_s).fold(f64::INFINITY, f64::min);
    let half_rise_s = 0.5 * request.build_up.rise_time_s()?;
    let line_delay_s = mean_time - slope * mean_momentum - half_rise_s;
    // A line that makes no sense, because of scatter or a short stop, gives way to a share of the shortest stop.
    let delay_s = if 0.0 < line_delay_s && line_delay_s < 0.9 * shortest { line_delay_s } else { 0.3 * shortest };
    let braking_s = (mean_time - delay_s - half_rise_s).max(0.2 * mean_time);
    Ok([delay_s, mean_momentum / braking_s, 0.01 * mean_momentum / braking_s])
}

/// The first guess, with more torque if its brake would not stop or hold the drive in every condition.
fn place_to_start(model: &BrakeModel<'_>, guess: Unknown) -> Result<Unknown, MotionRefusal> {
    let mut start = guess;
    for _ in 0..8 {
        if model.values(&start).is_ok() {
            return Ok(start);
        }
        start[TORQUE] *= 2.0;
    }
    Err(MotionRefusal::NoFit {
        reason: "no brake near the measured times stops and holds this drive in every condition",
        remedy: "Check masses, inertia, counterbalance and the measured times.",
    })
}

/// The stop time of a brake at every condition, as a function of the unknowns.
struct BrakeModel<'a> {
    conditions: &'a [FitCondition],
    build_up: BuildUp,
    unknowns: Unknowns,
}

impl Model for BrakeModel<'_> {
    fn unknowns(&self) -> usize {
        match self.unknowns {
            Unknowns::DelayAndTorque => 2,
            Unknowns::DelayTorqueAndFriction => 3,
        }
    }

    fn values(&self, at: &Unknown) -> Result<Vec<f64>, MotionRefusal> {
        self.conditions.iter().map(|c| stop_time(&c.drive, c.command, self.build_up, self.unknowns, at)).collect()
    }

    fn jacobian(&self, at: &Unknown) -> Result<Vec<Unknown>, MotionRefusal> {
        self.conditions.iter().map(|c| gradient(&c.drive, c.command, self.build_up, self.unknowns, at)).collect()
    }
}

fn stop_time(
    drive: &Drive,
    command: StopCommand,
    build_up: BuildUp,
    unknowns: Unknowns,
    at: &Unknown,
) -> Result<f64, MotionRefusal> {
    solve(drive, command, build_up, unknowns, at).map(|stop| stop.stop_time_s)
}

fn solve(
    drive: &Drive,
    command: StopCommand,
    build_up: BuildUp,
    unknowns: Unknowns,
    at: &Unknown,
) -> Result<Stop, MotionRefusal> {
    let law = build_up.brake(at[DELAY], at[TORQUE])?.torque_law(build_up.path());
    match unknowns {
        Unknowns::DelayAndTorque => stop(drive, &law, command, Tolerance::FINE),
        Unknowns::DelayTorqueAndFriction => {
            let drive = drive.with_friction_torque(at[FRICTION])?;
            stop(&drive, &law, command, Tolerance::FINE)
        }
    }
}

/// Derivatives of the stop time by central differences. Steps of 1e-4 leave an error of about 1e-8 from the curvature and as much from the
/// solver. Where the step down is refused (a delay or friction of nearly 0), the step up alone is used.
fn gradient(
    drive: &Drive,
    command: StopCommand,
    build_up: BuildUp,
    unknowns: Unknowns,
    at: &Unknown,
) -> Result<Unknown, MotionRefusal> {
    let mut gradient = [0.0; 3];
    let steps = [1e-4 * at[DELAY].max(1e-3), 1e-4 * at[TORQUE], 1e-4 * at[TORQUE]];
    let time = |at: &Unknown| stop_time(drive, command, build_up, unknowns, at);
    let count = match unknowns {
        Unknowns::DelayAndTorque => 2,
        Unknowns::DelayTorqueAndFriction => 3,
    };
    for (i, slope) in gradient.iter_mut().enumerate().take(count) {
        let (mut above, mut below) = (*at, *at);
        above[i] += steps[i];
        below[i] -= steps[i];
        *slope = if 0.0 <= below[i] {
            (time(&above)? - time(&below)?) / (2.0 * steps[i])
        } else {
            (time(&above)? - time(at)?) / steps[i]
        };
    }
    Ok(gradient)
}

impl FittedBrake {
    /// The brake with the best figures.
    #[must_use]
    pub fn brake(&self) -> Brake {
        self.brake
    }

    /// Predicts the mean of `stops` new stops (1 for a single one) in a condition that need not have been timed.
    ///
    /// The interval holds the uncertainty of the fitted figures and the scatter of the stops, pooled over the conditions of the fit. It does
    /// not hold errors of the drive's figures, nor anything the model leaves out. A prediction is never a measurement.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`] for no stops; otherwise as [`super::stop()`].
    pub fn predict(&self, drive: &Drive, command: StopCommand, stops: u32) -> Result<StopPrediction, MotionRefusal> {
        let count = limits::PREDICTED_STOPS.check(f64::from(stops))?;
        let at = [
            self.dead_time_s.value,
            self.full_torque_nm.value,
            self.friction_torque_nm.map_or(0.0, |friction| friction.value),
        ];
        let build_up = self.build_up;
        let stop = solve(drive, command, build_up, self.unknowns, &at)?;
        let gradient = gradient(drive, command, build_up, self.unknowns, &at)?;
        let (scatter, degrees) = self.scatter;
        let half_width = self.inference.prediction_half_width(&gradient, (scatter / count, degrees));
        Ok(StopPrediction { stop, stop_time_s: Estimate::around(stop.stop_time_s, half_width) })
    }
}
