//! The full brake torque from the brake's parts: T = n mu F R_m.

use super::limits;
use super::refusal::MotionRefusal;
use core::f64::consts::TAU;

/// How the pressure is spread over the lining, which decides the mean radius.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum MeanRadius {
    /// A run-in lining, worn evenly: R_m = (r_o + r_i)/2. The smaller of the two, so the cautious one.
    UniformWear,
    /// A new lining, pressed evenly: R_m = (2/3)(r_o^3 - r_i^3)/(r_o^2 - r_i^2).
    UniformPressure,
}

/// A disc brake's parts, not yet checked.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BrakeParts {
    /// Number of friction faces n: two for each disc clamped from both sides.
    pub friction_faces: u32,
    /// Coefficient of friction mu.
    pub friction_coefficient: f64,
    /// Axial force F with the brake fully set.
    pub axial_force_n: f64,
    /// Outer radius of the lining.
    pub outer_radius_m: f64,
    /// Inner radius of the lining.
    pub inner_radius_m: f64,
    /// How the pressure is spread.
    pub mean_radius: MeanRadius,
}

impl BrakeParts {
    /// Full torque of the brake at its own shaft: T = n mu F R_m.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`] for a figure out of range, [`MotionRefusal::RadiusOrder`] for an inner radius not below the outer.
    ///
    /// # Source
    /// Handbook friction disc. The source states no range.
    pub fn full_torque_nm(&self) -> Result<f64, MotionRefusal> {
        let faces = limits::FRICTION_FACES.check(f64::from(self.friction_faces))?;
        let coefficient = limits::FRICTION_COEFFICIENT.check(self.friction_coefficient)?;
        let force_n = limits::SPRING_FORCE.check(self.axial_force_n)?;
        let radius_m = mean_radius_m(self.outer_radius_m, self.inner_radius_m, self.mean_radius)?;
        limits::BRAKE_TORQUE.check(faces * coefficient * force_n * radius_m)
    }
}

/// Mean radius of a ring-shaped lining.
///
/// # Refuses
/// [`MotionRefusal::OutOfRange`] for a radius out of range, [`MotionRefusal::RadiusOrder`] for an inner radius not below the outer.
pub fn mean_radius_m(outer_radius_m: f64, inner_radius_m: f64, spread: MeanRadius) -> Result<f64, MotionRefusal> {
    let (outer, inner) = check_radii(outer_radius_m, inner_radius_m)?;
    Ok(match spread {
        MeanRadius::UniformWear => 0.5 * (outer + inner),
        // The common factor (r_o - r_i) is divided out, so that a narrow ring loses no digits.
        MeanRadius::UniformPressure => 2.0 / 3.0 * (outer * outer + outer * inner + inner * inner) / (outer + inner),
    })
}

/// Axial force of a run-in (uniform wear) ring whose greatest pressure, at the inner radius, is given: F = 2 pi p_i r_i (r_o - r_i).
///
/// # Refuses
/// [`MotionRefusal::OutOfRange`] for a figure out of range, [`MotionRefusal::RadiusOrder`] for an inner radius not below the outer.
pub fn spring_force_n(
    pressure_at_inner_radius_pa: f64,
    outer_radius_m: f64,
    inner_radius_m: f64,
) -> Result<f64, MotionRefusal> {
    let pressure = limits::LINING_PRESSURE.check(pressure_at_inner_radius_pa)?;
    let (outer, inner) = check_radii(outer_radius_m, inner_radius_m)?;
    Ok(TAU * pressure * inner * (outer - inner))
}

fn check_radii(outer_m: f64, inner_m: f64) -> Result<(f64, f64), MotionRefusal> {
    limits::OUTER_RADIUS.check(outer_m)?;
    limits::INNER_RADIUS.check(inner_m)?;
    if outer_m <= inner_m {
        return Err(MotionRefusal::RadiusOrder { inner_m, outer_m });
    }
    Ok((outer_m, inner_m))
}
