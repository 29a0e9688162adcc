//! Keeps labels from running into each other.

/// Moves the middles of labels apart along one axis so that none overlap and all lie within `least..=most`, keeping their
/// order. `sizes` are their extents. Where they cannot all fit, they are packed from `least` on.
pub fn spread(middles: &[f32], sizes: &[f32], least: f32, most: f32) -> Vec<f32> {
    let mut order: Vec<usize> = (0..middles.len()).collect();
    order.sort_by(|one, other| middles[*one].total_cmp(&middles[*other]));
    let mut placed = middles.to_vec();
    let mut floor = least;
    for index in &order {
        placed[*index] = placed[*index].max(floor + sizes[*index] / 2.0);
        floor = placed[*index] + sizes[*index] / 2.0;
    }
    let mut ceiling = most;
    for index in order.iter().rev() {
        placed[*index] = placed[*index].min(ceiling - sizes[*index] / 2.0);
        ceiling = placed[*index] - sizes[*index] / 2.0;
    }
    let first = order.first().map_or(least, |index| placed[*index] - sizes[*index] / 2.0);
    if first < least - 1e-3 {
        let mut floor = least;
        for index in order {
            placed[index] = floor + sizes[index] / 2.0;
            floor += sizes[index];
        }
    }
    placed
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn labels_do_not_overlap_and_stay_within() {
        let middles = [5.0, 5.5, 6.0, 40.0, 99.0, 99.5];
        let sizes = [4.0; 6];
        let placed = spread(&middles, &sizes, 0.0, 100.0);
        let mut sorted = placed.clone();
        sorted.sort_by(f32::total_cmp);
        assert_eq!(placed, sorted);
        assert!(sorted.windows(2).all(|pair| pair[1] - pair[0] >= 4.0 - 1e-3));
        assert!(sorted[0] >= 2.0 && sorted[5] <= 98.0);
        assert_eq!(placed[3], 40.0);
    }
}
