//! From values to places along an axis, with ticks at round values.

/// A straight scale.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Scale {
    from: (f64, f32),
    to: (f64, f32),
}

impl Scale {
    /// The scale on which value `from.0` lies at `from.1` and `to.0` at `to.1`.
    pub fn new(from: (f64, f32), to: (f64, f32)) -> Self {
        Self { from, to }
    }

    /// Where a value lies.
    pub fn place(&self, value: f64) -> f32 {
        let span = self.to.0 - self.from.0;
        if span == 0.0 {
            return self.from.1;
        }
        self.from.1 + ((value - self.from.0) / span) as f32 * (self.to.1 - self.from.1)
    }
}

/// Values at steps of 1, 2 or 5 times a power of ten within `least..=most`, about `about` of them.
pub fn ticks(least: f64, most: f64, about: usize) -> Vec<f64> {
    let span = most - least;
    if !span.is_finite() || span <= 0.0 || about == 0 {
        return Vec::new();
    }
    let raw = span / about as f64;
    let power = 10f64.powf(raw.log10().floor());
    let step =
        [1.0, 2.0, 5.0, 10.0].into_iter().map(|part| part * power).find(|step| *step >= raw * 0.999).unwrap_or(raw);
    let first = (least / step).ceil() as i64;
    let last = (most / step).floor() as i64;
    (first..=last).map(|count| count as f64 * step).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ticks_are_round_and_within() {
        assert_eq!(ticks(0.0, 430.0, 5), [0.0, 100.0, 200.0, 300.0, 400.0]);
        assert_eq!(ticks(181.2, 187.9, 4), [182.0, 184.0, 186.0]);
        assert!(ticks(1.0, 1.0, 5).is_empty() && ticks(0.0, f64::NAN, 5).is_empty());
    }
}
