//! Where the slide of a link drive is: a table of travel over crank angle, joined by a periodic cubic spline.
//!
//! The spline is twice continuously differentiable all round the turn, so the inertia torque of the slide has no jumps. It is accepted only
//! if it runs one way between the dead centres.

use super::limits;
use super::refusal::MotionRefusal;
use core::f64::consts::TAU;

/// Least number of rows of a travel table.
pub const ROWS_LEAST: usize = 24;

/// Greatest number of rows of a travel table: every tenth of a degree.
pub const ROWS_MOST: usize = 3600;

/// Rows further apart than this leave the shape of the motion to chance.
const GAP_RAD_MAX: f64 = 30.5 * TAU / 360.0;

/// Turning back by no more than this share of the stroke is put down to the rounding of the table.
const TURN_BACK_SHARE: f64 = 1e-4;

/// One row of a travel table.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TravelRow {
    /// Crank angle from top dead centre, 0 to below one turn.
    pub angle_rad: f64,
    /// Slide travel below top dead centre.
    pub travel_m: f64,
}

/// One stretch of the spline: travel = c0 + x (c1 + x (c2 + x c3)), x counted from its start.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Stretch {
    start_rad: f64,
    width_rad: f64,
    coefficients: [f64; 4],
}

impl Stretch {
    fn travel(&self, x: f64) -> f64 {
        let [c0, c1, c2, c3] = self.coefficients;
        c0 + x * (c1 + x * (c2 + x * c3))
    }
}

/// One stretch of the spline in one turn of the crank, continued smoothly beyond its ends.
#[derive(Clone, Copy, Debug)]
pub(super) struct StretchInTurn<'a> {
    link: &'a LinkDrive,
    index: usize,
    coefficients: [f64; 4],
    start_rad: f64,
    end_rad: f64,
}

impl StretchInTurn<'_> {
    /// Slopes of this stretch, also beyond its ends.
    #[inline]
    pub(super) fn slopes(&self, angle_rad: f64) -> (f64, f64) {
        let [_, c1, c2, c3] = self.coefficients;
        let x = angle_rad - self.start_rad;
        (c1 + x * (2.0 * c2 + 3.0 * x * c3), 2.0 * c2 + 6.0 * x * c3)
    }

    /// Where the next stretch begins. The third derivative of the travel jumps there.
    pub(super) fn end_rad(&self) -> f64 {
        self.end_rad
    }

    /// The stretch that follows.
    pub(super) fn next(&self) -> Self {
        let index = (self.index + 1) % self.link.stretches.len();
        self.link.stretch_from(index, self.end_rad)
    }
}

/// A drive given by a table: links, knuckle joints, eccentric gears.
#[derive(Clone, Debug, PartialEq)]
pub struct LinkDrive {
    stretches: Vec<Stretch>,
    bottom_dead_centre_rad: f64,
    stroke_m: f64,
}

impl LinkDrive {
    /// A drive from its travel table over one turn. The first row is top dead centre: 0 rad, 0 m.
    ///
    /// # Refuses
    /// Fewer than [`ROWS_LEAST`] or more than [`ROWS_MOST`] rows; rows more than 30 deg apart (half a degree of rounding allowed); angles
    /// that do not grow or reach a whole turn; negative travel; a travel whose spline turns back between the dead centres by more than
    /// 1/10,000 of the stroke.
    pub fn new(rows: &[TravelRow]) -> Result<Self, MotionRefusal> {
        check_rows(rows)?;
        let stretches = periodic_spline(rows);
        let (bottom_dead_centre_rad, stroke_m) = check_one_way(&stretches)?;
        limits::STROKE.check(stroke_m)?;
        Ok(Self { stretches, bottom_dead_centre_rad, stroke_m })
    }

    /// Crank angle of the greatest travel.
    #[must_use]
    pub fn bottom_dead_centre_rad(&self) -> f64 {
        self.bottom_dead_centre_rad
    }

    /// Greatest travel less the least.
    #[must_use]
    pub fn stroke_m(&self) -> f64 {
        self.stroke_m
    }

    /// Slide travel below top dead centre.
    #[must_use]
    pub fn travel_m(&self, angle_rad: f64) -> f64 {
        let (stretch, x) = self.at(angle_rad);
        stretch.travel(x)
    }

    /// First and second derivative of the travel with respect to the crank angle, m/rad and m/rad^2.
    #[must_use]
    #[inline]
    pub fn slopes(&self, angle_rad: f64) -> (f64, f64) {
        let (stretch, x) = self.at(angle_rad);
        let [_, c1, c2, c3] = stretch.coefficients;
        (c1 + x * (2.0 * c2 + 3.0 * x * c3), 2.0 * c2 + 6.0 * x * c3)
    }

    /// The stretch at an angle.
    pub(super) fn stretch_in_turn(&self, angle_rad: f64) -> StretchInTurn<'_> {
        let turns = TAU * (angle_rad * (1.0 / TAU)).floor();
        let after = self.stretches.partition_point(|stretch| stretch.start_rad <= angle_rad - turns);
        let index = after.max(1) - 1;
        self.stretch_from(index, turns + self.stretches[index].start_rad)
    }

    fn stretch_from(&self, index: usize, start_rad: f64) -> StretchInTurn<'_> {
        let Stretch { width_rad, coefficients, .. } = self.stretches[index];
        StretchInTurn { link: self, index, coefficients, start_rad, end_rad: start_rad + width_rad }
    }

    #[inline]
    fn at(&self, angle_rad: f64) -> (&Stretch, f64) {
        let within = angle_rad - TAU * (angle_rad * (1.0 / TAU)).floor();
        let after = self.stretches.partition_point(|stretch| stretch.start_rad <= within);
        let stretch = &self.stretches[after.max(1) - 1];
        (stretch, within - stretch.start_rad)
    }
}

fn check_rows(rows: &[TravelRow]) -> Result<(), MotionRefusal> {
    if rows.len() < ROWS_LEAST || ROWS_MOST < rows.len() {
        return Err(MotionRefusal::TableRows { given: rows.len(), least: ROWS_LEAST, greatest: ROWS_MOST });
    }
    for row in rows {
        limits::TABLE_ANGLE.check(row.angle_rad)?;
        limits::TABLE_TRAVEL.check(row.travel_m)?;
    }
    let first = rows[0];
    if first.angle_rad != 0.0 || first.travel_m != 0.0 {
        return Err(MotionRefusal::TableStart { angle_rad: first.angle_rad, travel_m: first.travel_m });
    }
    for (index, pair) in rows.windows(2).enumerate() {
        if pair[1].angle_rad <= pair[0].angle_rad {
            return Err(MotionRefusal::TableOrder { row: index + 2, angle_rad: pair[1].angle_rad });
        }
    }
    let last = rows[rows.len() - 1];
    if TAU <= last.angle_rad {
        return Err(MotionRefusal::TableOrder { row: rows.len(), angle_rad: last.angle_rad });
    }
    for (index, row) in rows.iter().enumerate() {
        let width_rad = width_after(rows, index);
        if GAP_RAD_MAX < width_rad {
            return Err(MotionRefusal::TableGap { angle_rad: row.angle_rad, width_rad, width_rad_max: GAP_RAD_MAX });
        }
    }
    Ok(())
}

fn width_after(rows: &[TravelRow], index: usize) -> f64 {
    let next = rows.get(index + 1).map_or(TAU, |row| row.angle_rad);
    next - rows[index].angle_rad
}

/// The interpolating cubic spline whose travel, slope and curvature agree at 0 and one turn.
///
/// The curvatures M solve the cyclic tridiagonal system
///
/// ```text
/// h[i-1] M[i-1] + 2 (h[i-1] + h[i]) M[i] + h[i] M[i+1] = 6 ((y[i+1] - y[i])/h[i] - (y[i] - y[i-1])/h[i-1])
/// ```
///
/// which is diagonally dominant. The corner elements are taken out by the Sherman-Morrison formula.
fn periodic_spline(rows: &[TravelRow]) -> Vec<Stretch> {
    let n = rows.len();
    let width: Vec<f64> = (0..n).map(|i| width_after(rows, i)).collect();
    let travel = |i: usize| rows[i % n].travel_m;
    let chord: Vec<f64> = (0..n).map(|i| (travel(i + 1) - travel(i)) / width[i]).collect();
    let before = |i: usize| (i + n - 1) % n;
    let right: Vec<f64> = (0..n).map(|i| 6.0 * (chord[i] - chord[before(i)])).collect();

    let corner = width[n - 1];
    let gamma = -2.0 * (width[n - 1] + width[0]);
    let mut diagonal: Vec<f64> = (0..n).map(|i| 2.0 * (width[before(i)] + width[i])).collect();
    diagonal[0] -= gamma;
    diagonal[n - 1] -= corner * corner / gamma;
    let mut bend = vec![0.0; n];
    bend[0] = gamma;
    bend[n - 1] = corner;
    let plain = solve_tridiagonal(&width[..n - 1], &diagonal, right);
    let bend = solve_tridiagonal(&width[..n - 1], &diagonal, bend);
    let share = |x: &[f64]| x[0] + corner / gamma * x[n - 1];
    let factor = share(&plain) / (1.0 + share(&bend));
    let curvature: Vec<f64> = (0..n).map(|i| plain[i] - factor * bend[i]).collect();

    (0..n)
        .map(|i| {
            let (here, next, h) = (curvature[i], curvature[(i + 1) % n], width[i]);
            Stretch {
                start_rad: rows[i].angle_rad,
                width_rad: h,
                coefficients: [
                    travel(i),
                    chord[i] - h * (2.0 * here + next) / 6.0,
                    0.5 * here,
                    (next - here) / (6.0 * h),
                ],
            }
        })
        .collect()
}

/// Elimination without pivoting for a symmetric, diagonally dominant system. `beside[i]` stands between rows i and i + 1.
fn solve_tridiagonal(beside: &[f64], diagonal: &[f64], mut right: Vec<f64>) -> Vec<f64> {
    let n = diagonal.len();
    let mut pivot = diagonal.to_vec();
    for i in 1..n {
        let factor = beside[i - 1] / pivot[i - 1];
        pivot[i] -= factor * beside[i - 1];
        right[i] -= factor * right[i - 1];
    }
    right[n - 1] /= pivot[n - 1];
    for i in (0..n - 1).rev() {
        right[i] = (right[i] - beside[i] * right[i + 1]) / pivot[i];
    }
    right
}

/// Checks that the slide goes down once and up once a turn; gives the angle of bottom dead centre and the stroke.
fn check_one_way(stretches: &[Stretch]) -> Result<(f64, f64), MotionRefusal> {
    let mut places: Vec<(f64, f64)> = Vec::new();
    for stretch in stretches {
        places.push((stretch.start_rad, stretch.travel(0.0)));
        for x in turning_points(stretch) {
            places.push((stretch.start_rad + x, stretch.travel(x)));
        }
    }
    let by_travel = |a: &&(f64, f64), b: &&(f64, f64)| a.1.total_cmp(&b.1);
    // Neither can fail: a table has at least 24 rows.
    let (Some(&top), Some(&bottom)) = (places.iter().min_by(by_travel), places.iter().max_by(by_travel)) else {
        return Err(MotionRefusal::TableRows { given: stretches.len(), least: ROWS_LEAST, greatest: ROWS_MOST });
    };
    let stroke_m = bottom.1 - top.1;
    let allowed_m = TURN_BACK_SHARE * stroke_m;
    let start = places.iter().position(|place| *place == top).unwrap_or(0);
    let mut down = true;
    let mut furthest = top.1;
    for step in 1..=places.len() {
        let (angle_rad, travel_m) = places[(start + step) % places.len()];
        // On the way up the sign is turned, so that one comparison serves both halves.
        let progress = if down { travel_m } else { -travel_m };
        if furthest < progress {
            furthest = progress;
        }
        let back_m = furthest - progress;
        if allowed_m < back_m {
            return Err(MotionRefusal::TableTurnsBack { angle_rad, back_m, allowed_m });
        }
        if down && (angle_rad, travel_m) == bottom {
            down = false;
            furthest = -travel_m;
        }
    }
    Ok((bottom.0, stroke_m))
}

/// Zeros of the slope inside a stretch, in ascending order.
fn turning_points(stretch: &Stretch) -> Vec<f64> {
    let [_, c, b, a] = stretch.coefficients;
    let (a, b) = (3.0 * a, 2.0 * b);
    let discriminant = b * b - 4.0 * a * c;
    if discriminant < 0.0 {
        return Vec::new();
    }
    // The form that does not subtract nearly equal figures; a or q may be 0, the quotient is then not finite and is left out.
    let q = -0.5 * (b + discriminant.sqrt().copysign(b));
    let mut found: Vec<f64> = [q / a, c / q].into_iter().filter(|x| 0.0 < *x && *x < stretch.width_rad).collect();
    found.sort_by(f64::total_cmp);
    found
}

#[cfg(test)]
mod tests {
    use super::super::SliderCrank;
    use super::*;

    fn crank_table(crank: &SliderCrank, rows: usize) -> Vec<TravelRow> {
        (0..rows)
            .map(|i| {
                let angle_rad = TAU * i as f64 / rows as f64;
                TravelRow { angle_rad, travel_m: crank.travel_m(angle_rad) }
            })
            .collect()
    }

    /// A table of a plain crank gives back the crank; the error falls with the fourth power of the step, as for every cubic spline.
    #[test]
    fn spline_of_a_crank() {
        let crank = SliderCrank::new(0.15, 0.6).unwrap();
        let error = |rows: usize| {
            let link = LinkDrive::new(&crank_table(&crank, rows)).unwrap();
            (0..3600)
                .map(|i| {
                    let angle = f64::from(i) * TAU / 3600.0;
                    (link.travel_m(angle) - crank.travel_m(angle)).abs()
                })
                .fold(0.0, f64::max)
        };
        let (coarse, fine) = (error(48), error(96));
        assert!(coarse < 1e-6, "{coarse}");
        assert!((12.0..20.0).contains(&(coarse / fine)), "{coarse} {fine}");
    }

    /// Travel, slope and curvature join at every row, also from the last row to the first.
    #[test]
    fn spline_joins_smoothly() {
        let crank = SliderCrank::new(0.2, 0.25).unwrap();
        let mut rows = crank_table(&crank, 60);
        rows.remove(7);
        rows.remove(31);
        let link = LinkDrive::new(&rows).unwrap();
        for row in &rows {
            assert!((link.travel_m(row.angle_rad) - row.travel_m).abs() < 1e-15);
            let (below, above) = (row.angle_rad - 1e-9, row.angle_rad + 1e-9);
            assert!((link.travel_m(below) - link.travel_m(above)).abs() < 1e-9);
            let (one, other) = (link.slopes(below), link.slopes(above));
            assert!((one.0 - other.0).abs() < 1e-8);
            assert!((one.1 - other.1).abs() < 1e-7);
        }
        assert!((link.bottom_dead_centre_rad() - core::f64::consts::PI).abs() < 1e-3);
    }

    #[test]
    fn bad_tables_are_refused() {
        let crank = SliderCrank::new(0.15, 0.6).unwrap();
        let good = crank_table(&crank, 36);
        assert!(LinkDrive::new(&good).is_ok());
        let refusal = |change: &dyn Fn(&mut Vec<TravelRow>)| {
            let mut rows = good.clone();
            change(&mut rows);
            LinkDrive::new(&rows).unwrap_err()
        };
        assert!(matches!(refusal(&|rows| rows.truncate(20)), MotionRefusal::TableRows { given: 20, .. }));
        assert!(matches!(refusal(&|rows| rows[0].travel_m = 0.001), MotionRefusal::TableStart { .. }));
        assert!(matches!(refusal(&|rows| rows.swap(4, 5)), MotionRefusal::TableOrder { row: 6, .. }));
        assert!(matches!(refusal(&|rows| drop(rows.drain(30..34))), MotionRefusal::TableGap { .. }));
        assert!(matches!(refusal(&|rows| rows[9].travel_m = 0.02), MotionRefusal::TableTurnsBack { .. }));
        assert!(matches!(refusal(&|rows| rows[9].travel_m = f64::NAN), MotionRefusal::OutOfRange { .. }));
    }
}
