//! What wear and heat do to a brake: less friction, less spring force, more delay.

use super::limits;
use super::refusal::MotionRefusal;

/// The state of a brake, measured or supposed; every figure is an input, none is guessed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BrakeCondition {
    /// Share of the friction lost by heat or oil: 0 for a cold, clean lining.
    pub fade: f64,
    /// Spring force with a new lining, F_0.
    pub spring_force_n: f64,
    /// Force lost per worn depth, c.
    pub spring_rate_n_m: f64,
    /// Worn depth of the lining, x.
    pub worn_depth_m: f64,
    /// Extra dead time by the larger fluid volume of a worn lining.
    pub extra_delay_s: f64,
}

impl BrakeCondition {
    /// Share of the new, cold brake's torque that is left.
    ///
    /// ```text
    /// T_full / T_new = (1 - fade) F(x)/F_0,   F(x) = F_0 - c x
    /// ```
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`] for a figure out of range; [`MotionRefusal::SpringForceGone`] if no spring force is left.
    pub fn torque_factor(&self) -> Result<f64, MotionRefusal> {
        let fade = limits::FADE.check(self.fade)?;
        let new_n = limits::SPRING_FORCE.check(self.spring_force_n)?;
        let rate = limits::SPRING_RATE.check(self.spring_rate_n_m)?;
        let lost_n = rate * limits::WORN_DEPTH.check(self.worn_depth_m)?;
        limits::EXTRA_DELAY.check(self.extra_delay_s)?;
        if new_n <= lost_n {
            return Err(MotionRefusal::SpringForceGone { new_n, lost_n });
        }
        Ok((1.0 - fade) * (new_n - lost_n) / new_n)
    }
}
