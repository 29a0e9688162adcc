//! The brake torque over time after the stop command, cut where it has a corner.
//!
//! A solver that steps across a corner loses its order, so every piece here is smooth: an even rise or a decaying exponential.

use super::brake::{Exhaust, PressureBrakeData, RampBrake, StopPath};

/// A pressure brake never reaches its full torque; it counts as built up when no more than this share is missing.
pub(super) const BUILT_UP_MISSING_SHARE: f64 = 0.05;

/// A smooth stretch of the torque. `since` counts from its start.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Shape {
    /// Torque = at start + slope x since.
    Even { start_nm: f64, slope_nm_s: f64 },
    /// Torque = full - missing at start x e^(-rate x since).
    Relaxing { full_nm: f64, missing_nm: f64, rate_per_s: f64 },
}

impl Shape {
    #[inline]
    pub(super) fn torque_nm(&self, since_s: f64) -> f64 {
        match *self {
            Self::Even { start_nm, slope_nm_s } => start_nm + slope_nm_s * since_s,
            Self::Relaxing { full_nm, missing_nm, rate_per_s } => {
                full_nm - missing_nm * libm::exp(-rate_per_s * since_s)
            }
        }
    }

    /// Integral of the torque from the start of the piece.
    fn impulse_nm_s(&self, since_s: f64) -> f64 {
        match *self {
            Self::Even { start_nm, slope_nm_s } => since_s * (start_nm + 0.5 * slope_nm_s * since_s),
            Self::Relaxing { full_nm, missing_nm, rate_per_s } => {
                full_nm * since_s + missing_nm / rate_per_s * libm::expm1(-rate_per_s * since_s)
            }
        }
    }
}

/// One smooth stretch and when it holds. The last one never ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Piece {
    pub(super) start_s: f64,
    pub(super) end_s: f64,
    pub(super) shape: Shape,
}

/// One exponential stretch of the pressure.
#[derive(Clone, Copy, Debug, PartialEq)]
struct PressurePiece {
    start_s: f64,
    start_pa: f64,
    time_constant_s: f64,
}

/// Brake torque and, where known, pressure over time after the stop command.
#[derive(Clone, Debug, PartialEq)]
pub struct TorqueLaw {
    full_torque_nm: f64,
    dead_time_s: f64,
    clutch_release_s: f64,
    built_up_s: f64,
    pieces: Vec<Piece>,
    /// Empty for a brake whose pressure is not known.
    pressure: Vec<PressurePiece>,
}

impl TorqueLaw {
    pub(super) fn of_ramp(brake: &RampBrake) -> Self {
        let (dead_time_s, rise_time_s) = (brake.dead_time_s(), brake.rise_time_s());
        let full_torque_nm = brake.full_torque_nm();
        let built_up_s = dead_time_s + rise_time_s;
        let even = |start_nm, slope_nm_s| Shape::Even { start_nm, slope_nm_s };
        let pieces = [
            (0.0, dead_time_s, even(0.0, 0.0)),
            (dead_time_s, built_up_s, even(0.0, full_torque_nm / rise_time_s)),
            (built_up_s, f64::INFINITY, even(full_torque_nm, 0.0)),
        ]
        .into_iter()
        // Without dead time or rise time the piece has no length; its slope is then never used.
        .filter(|(start_s, end_s, _)| start_s < end_s)
        .map(|(start_s, end_s, shape)| Piece { start_s, end_s, shape })
        .collect();
        Self { full_torque_nm, dead_time_s, clutch_release_s: dead_time_s, built_up_s, pieces, pressure: Vec::new() }
            .in_order()
    }

    pub(super) fn of_pressure(data: &PressureBrakeData, path: StopPath) -> Self {
        let pressure = pressure_pieces(data, path);
        let clutch_release_s = time_at_pressure(&pressure, data.clutch_release_pressure_pa);
        let touch_s = time_at_pressure(&pressure, data.touch_pressure_pa);
        let built_up_s = time_at_pressure(&pressure, BUILT_UP_MISSING_SHARE * data.touch_pressure_pa);
        let mut corners: Vec<f64> = pressure.iter().map(|piece| piece.start_s).collect();
        corners.extend([0.0, clutch_release_s, touch_s]);
        corners.sort_by(f64::total_cmp);
        corners.dedup();
        let pieces = corners
            .iter()
            .enumerate()
            .map(|(index, &start_s)| Piece {
                start_s,
                end_s: corners.get(index + 1).copied().unwrap_or(f64::INFINITY),
                shape: if start_s < touch_s {
                    Shape::Even { start_nm: 0.0, slope_nm_s: 0.0 }
                } else {
                    let (pressure_pa, time_constant_s) = pressure_at(&pressure, start_s);
                    Shape::Relaxing {
                        full_nm: data.full_torque_nm,
                        missing_nm: data.full_torque_nm * pressure_pa / data.touch_pressure_pa,
                        rate_per_s: 1.0 / time_constant_s,
                    }
                },
            })
            .collect();
        Self {
            full_torque_nm: data.full_torque_nm,
            dead_time_s: data.dead_time_s,
            clutch_release_s,
            built_up_s,
            pieces,
            pressure,
        }
        .in_order()
    }

    /// The order of events, on which the solver relies: checked brakes give no other, so anything else is a fault of this file.
    fn in_order(self) -> Self {
        assert!(0.0 <= self.dead_time_s && self.dead_time_s <= self.clutch_release_s);
        assert!(self.pieces.first().is_some_and(|piece| piece.start_s <= 0.0));
        assert!(self.pieces.last().is_some_and(|piece| piece.end_s == f64::INFINITY));
        assert!(self.pieces.iter().all(|piece| piece.start_s < piece.end_s));
        assert!(self.pieces.windows(2).all(|pair| pair[0].end_s <= pair[1].start_s));
        self
    }

    /// Torque of the fully set brake, at the crank.
    #[must_use]
    pub fn full_torque_nm(&self) -> f64 {
        self.full_torque_nm
    }

    /// Time from the stop command until anything happens at the brake.
    #[must_use]
    pub fn dead_time_s(&self) -> f64 {
        self.dead_time_s
    }

    /// Time from the stop command until the clutch lets go; the crank runs at drive speed until then.
    #[must_use]
    pub fn clutch_release_s(&self) -> f64 {
        self.clutch_release_s
    }

    /// Time from the stop command until the brake has built up: full torque of a ramp brake, 95 % of the torque of a pressure brake.
    #[must_use]
    pub fn built_up_s(&self) -> f64 {
        self.built_up_s
    }

    /// Brake torque at a time after the stop command.
    #[must_use]
    pub fn torque_nm(&self, time_s: f64) -> f64 {
        let piece = &self.pieces[self.piece_index(time_s)];
        piece.shape.torque_nm(time_s - piece.start_s)
    }

    /// Pressure at a time after the stop command; none for a brake known by its times only.
    #[must_use]
    pub fn pressure_pa(&self, time_s: f64) -> Option<f64> {
        let first = self.pressure.first()?;
        Some(if time_s < first.start_s {
            first.start_pa
        } else {
            let after = self.pressure.partition_point(|p| p.start_s <= time_s);
            let piece = &self.pressure[after.max(1) - 1];
            piece.start_pa * libm::exp(-(time_s - piece.start_s) / piece.time_constant_s)
        })
    }

    /// Smooth pieces from the clutch release on; the first one starts there.
    #[inline]
    pub(super) fn pieces_after_release(&self) -> &[Piece] {
        &self.pieces[self.piece_index(self.clutch_release_s)..]
    }

    /// Integral of the torque from the stop command to the clutch release: what the brake drags against a clutch still engaged.
    pub(super) fn impulse_before_release_nm_s(&self) -> f64 {
        self.pieces[..self.piece_index(self.clutch_release_s)]
            .iter()
            .map(|piece| piece.shape.impulse_nm_s(piece.end_s - piece.start_s))
            .sum()
    }

    #[inline]
    fn piece_index(&self, time_s: f64) -> usize {
        let after = self.pieces.partition_point(|piece| piece.start_s <= time_s);
        after.max(1) - 1
    }
}

fn pressure_pieces(data: &PressureBrakeData, path: StopPath) -> Vec<PressurePiece> {
    let mut pieces = Vec::with_capacity(3);
    let mut start_s = data.dead_time_s;
    let mut fall = |from_pa: f64, to_pa: f64, time_constant_s: f64| {
        if start_s.is_finite() {
            pieces.push(PressurePiece { start_s, start_pa: from_pa, time_constant_s });
        }
        // A fall to zero takes for ever: the logarithm is then infinite and no piece follows.
        start_s += time_constant_s * libm::log(from_pa / to_pa);
    };
    let operating = data.operating_pressure_pa;
    match (path, data.exhaust) {
        (StopPath::Emergency, _) => fall(operating, 0.0, data.emergency_time_constant_s),
        (StopPath::Normal, Exhaust::SingleStage { time_constant_s }) => {
            fall(operating, 0.0, time_constant_s);
        }
        (
            StopPath::Normal,
            Exhaust::TwoStage { fast_time_constant_s, metered_time_constant_s, metered_from_pa, metered_to_pa },
        ) => {
            fall(operating, metered_from_pa, fast_time_constant_s);
            fall(metered_from_pa, metered_to_pa, metered_time_constant_s);
            fall(metered_to_pa, 0.0, fast_time_constant_s);
        }
    }
    pieces
}

/// When the falling pressure reaches a value below the operating pressure.
fn time_at_pressure(pieces: &[PressurePiece], pressure_pa: f64) -> f64 {
    let after = pieces.partition_point(|piece| pressure_pa <= piece.start_pa);
    let piece = &pieces[after.max(1) - 1];
    piece.start_s + piece.time_constant_s * libm::log(piece.start_pa / pressure_pa)
}

/// Pressure at a corner, and the time constant with which it falls from there.
fn pressure_at(pieces: &[PressurePiece], time_s: f64) -> (f64, f64) {
    let after = pieces.partition_point(|piece| piece.start_s <= time_s);
    let piece = &pieces[after.max(1) - 1];
    let fallen = libm::exp(-(time_s - piece.start_s) / piece.time_constant_s);
    (piece.start_pa * fallen, piece.time_constant_s)
}
