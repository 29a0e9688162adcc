//! Where the slide of a plain crank press is: exact slider-crank kinematics.

use super::limits;
use super::refusal::MotionRefusal;

/// A crank, a connecting rod and a slide whose line of travel passes through the crank's centre.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SliderCrank {
    crank_radius_m: f64,
    rod_m: f64,
    /// Crank radius over rod length, below 1.
    lambda: f64,
}

impl SliderCrank {
    /// A crank drive from its stroke (twice the crank radius) and the length of its connecting rod.
    ///
    /// # Refuses
    /// [`MotionRefusal::OutOfRange`] for a stroke outside 1 mm to 3 m or a rod outside 1 mm to 30 m;
    /// [`MotionRefusal::RodTooShort`] for a rod that is not longer than the crank radius.
    pub fn new(stroke_m: f64, rod_m: f64) -> Result<Self, MotionRefusal> {
        let crank_radius_m = 0.5 * limits::STROKE.check(stroke_m)?;
        limits::ROD.check(rod_m)?;
        if rod_m <= crank_radius_m {
            return Err(MotionRefusal::RodTooShort { rod_m, crank_radius_m });
        }
        Ok(Self { crank_radius_m, rod_m, lambda: crank_radius_m / rod_m })
    }

    /// Stroke: twice the crank radius.
    #[must_use]
    pub fn stroke_m(&self) -> f64 {
        2.0 * self.crank_radius_m
    }

    /// Length of the connecting rod.
    #[must_use]
    pub fn rod_m(&self) -> f64 {
        self.rod_m
    }

    /// Slide travel below top dead centre.
    ///
    /// ```text
    /// s = r (1 - cos theta) + L (1 - sqrt(1 - lambda^2 sin^2 theta)),   lambda = r/L
    /// ```
    ///
    /// Written with sin^2(theta/2), so that no digits are lost near top dead centre.
    ///
    /// # Source
    /// Handbook slider-crank kinematics, exact form.
    #[must_use]
    pub fn travel_m(&self, angle_rad: f64) -> f64 {
        let (half_sin, half_cos) = libm::sincos(0.5 * angle_rad);
        let sin = 2.0 * half_sin * half_cos;
        let lambda_sin_squared = self.lambda * self.lambda * sin * sin;
        // A square root is correctly rounded on every machine, so the built-in one serves.
        let root = (1.0 - lambda_sin_squared).sqrt();
        2.0 * self.crank_radius_m * half_sin * half_sin + self.rod_m * lambda_sin_squared / (1.0 + root)
    }

    /// First and second derivative of the travel with respect to the crank angle, m/rad and m/rad^2.
    ///
    /// ```text
    /// s'  = r sin (1 + lambda cos / q),                                         q = sqrt(1 - lambda^2 sin^2)
    /// s'' = r cos + r lambda ((cos^2 - sin^2)/q + lambda^2 sin^2 cos^2 / q^3)
    /// ```
    #[must_use]
    #[inline]
    pub fn slopes(&self, angle_rad: f64) -> (f64, f64) {
        let (sin, cos) = libm::sincos(angle_rad);
        let lambda = self.lambda;
        let lambda_sin = lambda * sin;
        let q_squared = 1.0 - lambda_sin * lambda_sin;
        // One division for 1/q and 1/q^2 alike.
        let q_inverse = q_squared.sqrt() / q_squared;
        let lambda_cos_q = lambda * cos * q_inverse;
        let first = self.crank_radius_m * sin * (1.0 + lambda_cos_q);
        let lambda_sin_q = lambda_sin * q_inverse;
        let second = self.crank_radius_m
            * (cos * (1.0 + lambda_cos_q + lambda_cos_q * lambda_sin_q * lambda_sin_q) - sin * lambda_sin_q);
        (first, second)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Derivatives against central differences of the travel, all round the circle.
    #[test]
    fn slopes_are_the_derivatives_of_the_travel() {
        for (stroke_m, rod_m) in [(0.15, 0.6), (0.1, 0.4), (0.6, 0.301), (0.02, 10.0)] {
            let crank = SliderCrank::new(stroke_m, rod_m).unwrap();
            for degrees in 0..720 {
                let angle = f64::from(degrees).to_radians();
                let h = 1e-4;
                let (before, after) = (crank.travel_m(angle - h), crank.travel_m(angle + h));
                let (first, second) = crank.slopes(angle);
                let scale = stroke_m / (1.0 - crank.lambda * crank.lambda).powi(3);
                assert!((first - (after - before) / (2.0 * h)).abs() < 1e-7 * scale);
                let (before, after) = (crank.slopes(angle - h).0, crank.slopes(angle + h).0);
                assert!((second - (after - before) / (2.0 * h)).abs() < 1e-6 * scale);
            }
        }
    }

    #[test]
    fn no_rod_shorter_than_the_crank() {
        assert!(matches!(SliderCrank::new(0.15, 0.075), Err(MotionRefusal::RodTooShort { .. })));
        for bad in [0.0, -0.1, f64::NAN, f64::INFINITY] {
            assert!(SliderCrank::new(bad, 0.6).is_err());
            assert!(SliderCrank::new(0.15, bad).is_err());
        }
    }
}
