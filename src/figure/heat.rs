//! Colours of a map: from light for the least to dark for the greatest, so that it reads from a black-and-white copy too.

use crate::palette::Rgb;

const STEPS: [Rgb; 6] = [
    [0xF7, 0xEF, 0xDA],
    [0xEB, 0xCF, 0x92],
    [0xD9, 0xA0, 0x56],
    [0xB8, 0x68, 0x43],
    [0x86, 0x39, 0x3A],
    [0x45, 0x1B, 0x30],
];

/// The colour of a share from 0 (least) to 1 (greatest); what lies beyond takes the colour of the nearer end.
pub fn heat(share: f32) -> Rgb {
    let place = if share.is_finite() { share.clamp(0.0, 1.0) } else { 1.0 } * (STEPS.len() - 1) as f32;
    let index = (place as usize).min(STEPS.len() - 2);
    let part = place - index as f32;
    let mix = |channel: usize| {
        let (from, to) = (f32::from(STEPS[index][channel]), f32::from(STEPS[index + 1][channel]));
        (from + (to - from) * part).round() as u8
    };
    [mix(0), mix(1), mix(2)]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn more_is_always_darker() {
        let light = |share: f32| heat(share).map(u32::from).iter().sum::<u32>();
        for step in 0..100 {
            assert!(light((step + 1) as f32 / 100.0) < light(step as f32 / 100.0));
        }
        assert_eq!(heat(-1.0), heat(0.0));
        assert_eq!(heat(f32::NAN), heat(1.0));
    }
}
