//! Comparisons and the reader of the stored files.

/// Asserts |got - want| <= relative |want|.
#[track_caller]
pub fn close(what: &str, got: f64, want: f64, relative: f64) {
    assert!(
        (got - want).abs() <= relative * want.abs(),
        "{what}: got {got:e}, want {want:e}, relative difference {:e}",
        (got - want) / want
    );
}

/// Asserts that `got` rounds to the printed figure: |got - printed| is at most half a unit of the last printed digit.
#[track_caller]
pub fn printed(what: &str, got: f64, printed: &str) {
    let decimals = printed.split_once('.').map_or(0, |(_, after)| after.len());
    let half = 0.5 * 10f64.powi(-(decimals as i32));
    let want: f64 = printed.parse().unwrap();
    // A hair more than half a unit, because the printed decimal is itself not exact in binary.
    assert!((got - want).abs() <= half * (1.0 + 1e-9), "{what}: got {got}, printed {printed}");
}

/// Rows of a stored file: lines that begin with `#` and the line of heads are left out.
pub fn rows(file: &'static str) -> impl Iterator<Item = Vec<&'static str>> {
    file.lines().filter(|line| !line.starts_with('#') && !line.is_empty()).skip(1).map(|line| line.split(',').collect())
}

/// A cell as a number.
#[track_caller]
pub fn number(cell: &str) -> f64 {
    cell.parse().unwrap_or_else(|_| panic!("no number: {cell}"))
}

/// Asserts |got - want| <= absolute.
#[track_caller]
pub fn near(what: &str, got: f64, want: f64, absolute: f64) {
    assert!((got - want).abs() <= absolute, "{what}: got {got:e}, want {want:e}, difference {:e}", got - want);
}
