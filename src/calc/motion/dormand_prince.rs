//! One step of the Runge-Kutta pair of Dormand and Prince, order 5 with an error estimate of order 4, and its interpolant.
//!
//! Coefficients: J. R. Dormand, P. J. Prince, "A family of embedded Runge-Kutta formulae", J. Comp. Appl. Math. 6 (1980) 19-26; interpolant
//! of order 4: E. Hairer, S. P. Norsett, G. Wanner, Solving Ordinary Differential Equations I, 2nd ed., Springer 1993, section II.6.

/// What the equation of motion advances. The brake's work is carried along so that the energy can be checked.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct State {
    pub(super) angle_rad: f64,
    pub(super) speed_rad_s: f64,
    pub(super) brake_work_j: f64,
}

/// The equation of motion on one smooth stretch of the brake torque.
pub(super) trait Motion {
    /// Angular acceleration and brake power.
    fn rates(&self, since_s: f64, angle_rad: f64, speed_rad_s: f64) -> Rates;
}

/// Right-hand side of the equation of motion.
#[derive(Clone, Copy, Debug)]
pub(super) struct Rates {
    pub(super) speed: f64,
    pub(super) acceleration: f64,
    pub(super) power: f64,
}

/// A step taken on trial: the state before and after, the stage rates, and the estimated local error.
#[derive(Clone, Copy, Debug)]
pub(super) struct Step {
    pub(super) length_s: f64,
    pub(super) before: State,
    pub(super) after: State,
    pub(super) error_angle_rad: f64,
    pub(super) error_speed_rad_s: f64,
    rates: [Rates; 7],
}

const A21: f64 = 1.0 / 5.0;
const A31: f64 = 3.0 / 40.0;
const A32: f64 = 9.0 / 40.0;
const A41: f64 = 44.0 / 45.0;
const A42: f64 = -56.0 / 15.0;
const A43: f64 = 32.0 / 9.0;
const A51: f64 = 19372.0 / 6561.0;
const A52: f64 = -25360.0 / 2187.0;
const A53: f64 = 64448.0 / 6561.0;
const A54: f64 = -212.0 / 729.0;
const A61: f64 = 9017.0 / 3168.0;
const A62: f64 = -355.0 / 33.0;
const A63: f64 = 46732.0 / 5247.0;
const A64: f64 = 49.0 / 176.0;
const A65: f64 = -5103.0 / 18656.0;
const C2: f64 = 1.0 / 5.0;
const C3: f64 = 3.0 / 10.0;
const C4: f64 = 4.0 / 5.0;
const C5: f64 = 8.0 / 9.0;
const B1: f64 = 35.0 / 384.0;
const B3: f64 = 500.0 / 1113.0;
const B4: f64 = 125.0 / 192.0;
const B5: f64 = -2187.0 / 6784.0;
const B6: f64 = 11.0 / 84.0;
const E1: f64 = 71.0 / 57600.0;
const E3: f64 = -71.0 / 16695.0;
const E4: f64 = 71.0 / 1920.0;
const E5: f64 = -17253.0 / 339_200.0;
const E6: f64 = 22.0 / 525.0;
const E7: f64 = -1.0 / 40.0;
const D1: f64 = -12_715_105_075.0 / 11_282_082_432.0;
const D3: f64 = 87_487_479_700.0 / 32_700_410_799.0;
const D4: f64 = -10_690_763_975.0 / 1_880_347_072.0;
const D5: f64 = 701_980_252_875.0 / 199_316_789_632.0;
const D6: f64 = -1_453_857_185.0 / 822_651_844.0;
const D7: f64 = 69_997_945.0 / 29_380_423.0;

impl Step {
    /// A step of the given length. `first` are the rates at its start: those at the end of the step before, if the torque has no corner.
    #[inline]
    pub(super) fn take(
        motion: &impl Motion,
        since_s: f64,
        before: State,
        first: Rates,
        length_s: f64,
    ) -> Self {
        let h = length_s;
        let (angle, speed) = (before.angle_rad, before.speed_rad_s);
        let stage = |share: f64, angle_sum: f64, speed_sum: f64| {
            motion.rates(
                since_s + share * h,
                angle + h * angle_sum,
                speed + h * speed_sum,
            )
        };
        let k1 = first;
        let k2 = stage(C2, A21 * k1.speed, A21 * k1.acceleration);
        let k3 = stage(
            C3,
            A31 * k1.speed + A32 * k2.speed,
            A31 * k1.acceleration + A32 * k2.acceleration,
        );
        let k4 = stage(
            C4,
            A41 * k1.speed + A42 * k2.speed + A43 * k3.speed,
            A41 * k1.acceleration + A42 * k2.acceleration + A43 * k3.acceleration,
        );
        let k5 = stage(
            C5,
            A51 * k1.speed + A52 * k2.speed + A53 * k3.speed + A54 * k4.speed,
            A51 * k1.acceleration
                + A52 * k2.acceleration
                + A53 * k3.acceleration
                + A54 * k4.acceleration,
        );
        let k6 = stage(
            1.0,
            A61 * k1.speed + A62 * k2.speed + A63 * k3.speed + A64 * k4.speed + A65 * k5.speed,
            A61 * k1.acceleration
                + A62 * k2.acceleration
                + A63 * k3.acceleration
                + A64 * k4.acceleration
                + A65 * k5.acceleration,
        );
        let weigh = |part: fn(&Rates) -> f64| {
            B1 * part(&k1) + B3 * part(&k3) + B4 * part(&k4) + B5 * part(&k5) + B6 * part(&k6)
        };
        let after = State {
            angle_rad: angle + h * weigh(|k| k.speed),
            speed_rad_s: speed + h * weigh(|k| k.acceleration),
            brake_work_j: before.brake_work_j + h * weigh(|k| k.power),
        };
        let k7 = motion.rates(since_s + h, after.angle_rad, after.speed_rad_s);
        let error = |part: fn(&Rates) -> f64| {
            h * (E1 * part(&k1)
                + E3 * part(&k3)
                + E4 * part(&k4)
                + E5 * part(&k5)
                + E6 * part(&k6)
                + E7 * part(&k7))
        };
        Self {
            length_s,
            before,
            after,
            error_angle_rad: error(|k| k.speed),
            error_speed_rad_s: error(|k| k.acceleration),
            rates: [k1, k2, k3, k4, k5, k6, k7],
        }
    }

    /// Rates at the start of the step.
    #[inline]
    pub(super) fn rates_before(&self) -> &Rates {
        &self.rates[0]
    }

    /// Rates at the end of the step.
    #[inline]
    pub(super) fn rates_after(&self) -> &Rates {
        &self.rates[6]
    }

    /// Speed inside the step; `share` runs from 0 to 1.
    pub(super) fn speed_rad_s(&self, share: f64) -> f64 {
        self.interpolate(
            share,
            (self.before.speed_rad_s, self.after.speed_rad_s),
            |k| k.acceleration,
        )
    }

    /// Angle inside the step; `share` runs from 0 to 1.
    pub(super) fn angle_rad(&self, share: f64) -> f64 {
        self.interpolate(share, (self.before.angle_rad, self.after.angle_rad), |k| {
            k.speed
        })
    }

    fn interpolate(&self, x: f64, (from, to): (f64, f64), rate: fn(&Rates) -> f64) -> f64 {
        let h = self.length_s;
        let [k1, _, k3, k4, k5, k6, k7] = &self.rates;
        let rise = to - from;
        let bend = h * rate(k1) - rise;
        let twist = rise - h * rate(k7) - bend;
        let rest = h
            * (D1 * rate(k1)
                + D3 * rate(k3)
                + D4 * rate(k4)
                + D5 * rate(k5)
                + D6 * rate(k6)
                + D7 * rate(k7));
        let back = 1.0 - x;
        from + x * (rise + back * (bend + x * (twist + back * rest)))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A pendulum with a force that changes over time: nonlinear, no closed form needed, every term of the step in use.
    struct Pendulum;

    impl Motion for Pendulum {
        fn rates(&self, since_s: f64, angle_rad: f64, speed_rad_s: f64) -> Rates {
            Rates {
                speed: speed_rad_s,
                acceleration: -libm::sin(angle_rad) - 0.3 * speed_rad_s * speed_rad_s
                    + libm::exp(-since_s),
                power: speed_rad_s * libm::cos(since_s),
            }
        }
    }

    fn run(steps: u32) -> (State, f64, f64) {
        let h = 1.5 / f64::from(steps);
        let mut state = State {
            angle_rad: 0.4,
            speed_rad_s: 1.1,
            brake_work_j: 0.0,
        };
        let (mut estimate, mut middle) = (0.0, 0.0);
        for i in 0..steps {
            let since_s = h * f64::from(i);
            let first = Pendulum.rates(since_s, state.angle_rad, state.speed_rad_s);
            let step = Step::take(&Pendulum, since_s, state, first, h);
            if i == 0 {
                estimate = step.error_speed_rad_s.abs();
                let half = Step::take(&Pendulum, since_s, state, first, 0.5 * h);
                middle = (step.speed_rad_s(0.5) - half.after.speed_rad_s).abs();
                assert!((step.angle_rad(1.0) - step.after.angle_rad).abs() < 1e-15);
                assert!((step.speed_rad_s(0.0) - state.speed_rad_s).abs() < 1e-15);
            }
            state = step.after;
        }
        (state, estimate, middle)
    }

    /// Halving the step divides the error after a fixed time by 2^5, the estimate of one step by 2^5 (its own order is 4), and the error of
    /// the interpolant within one step by 2^5.
    #[test]
    fn order_of_the_method() {
        let (truth, ..) = run(2560);
        let order = |coarse: f64, fine: f64| libm::log2(coarse / fine);
        for steps in [16, 32] {
            let (one, estimate_one, middle_one) = run(steps);
            let (two, estimate_two, middle_two) = run(2 * steps);
            for part in [
                |s: &State| s.angle_rad,
                |s: &State| s.speed_rad_s,
                |s: &State| s.brake_work_j,
            ] {
                let found = order(
                    (part(&one) - part(&truth)).abs(),
                    (part(&two) - part(&truth)).abs(),
                );
                assert!((4.7..6.3).contains(&found), "{steps}: order {found}");
            }
            let found = order(estimate_one, estimate_two);
            assert!((4.6..5.6).contains(&found), "{steps}: estimate {found}");
            let found = order(middle_one, middle_two);
            assert!((4.5..5.6).contains(&found), "{steps}: interpolant {found}");
        }
    }
}
