//! One step of the Runge-Kutta method DOP853 of Dormand and Prince: order 8, error estimates of orders 5 and 3.
//!
//! At the tolerances wanted here (1e-9, inside the fit 1e-12) it needs about half as many evaluations as the pair of orders 5 and 4. It has
//! no interpolant here: whoever wants a state inside a step takes a shorter step, which is as exact as the step itself.
//!
//! Coefficients: E. Hairer, S. P. Norsett, G. Wanner, Solving Ordinary Differential Equations I, 2nd ed., Springer 1993, section II.5 and the
//! appendix (code DOP853), rounded to working accuracy.

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
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Rates {
    pub(super) speed: f64,
    pub(super) acceleration: f64,
    pub(super) power: f64,
}

/// A step taken on trial: the state before and after, and the estimated local error.
#[derive(Clone, Copy, Debug)]
pub(super) struct Step {
    pub(super) length_s: f64,
    pub(super) before: State,
    pub(super) after: State,
    /// Rates at the start.
    pub(super) first: Rates,
    /// Acceleration at the end, from the last stage: good for searching, not for going on.
    pub(super) end_acceleration: f64,
    /// Estimates of order 5 and 3, for angle, speed and work.
    errors: [(f64, f64); 3],
}

const A2: [(usize, f64); 1] = [(0, 0.052_600_151_958_767_73)];
const C2: f64 = 0.052_600_151_958_767_73;
const A3: [(usize, f64); 2] = [(0, 0.019_725_056_984_537_9), (1, 0.059_175_170_953_613_7)];
const C3: f64 = 0.078_900_227_938_151_6;
const A4: [(usize, f64); 2] = [(0, 0.029_587_585_476_806_85), (2, 0.088_762_756_430_420_54)];
const C4: f64 = 0.118_350_341_907_227_4;
const A5: [(usize, f64); 3] = [(0, 0.241_365_134_159_266_7), (2, -0.884_549_479_328_286_1), (3, 0.924_834_003_261_792)];
const C5: f64 = 0.281_649_658_092_772_6;
const A6: [(usize, f64); 3] =
    [(0, 0.037_037_037_037_037_035), (3, 0.170_828_608_729_473_86), (4, 0.125_467_687_566_822_42)];
const C6: f64 = 0.333_333_333_333_333_3;
const A7: [(usize, f64); 4] =
    [(0, 0.037_109_375), (3, 0.170_252_211_019_544_05), (4, 0.060_216_538_980_455_96), (5, -0.017_578_125)];
const C7: f64 = 0.25;
const A8: [(usize, f64); 5] = [
    (0, 0.037_092_000_118_504_79),
    (3, 0.170_383_925_712_239_98),
    (4, 0.107_262_030_446_373_28),
    (5, -0.015_319_437_748_624_402),
    (6, 0.008_273_789_163_814_023),
];
const C8: f64 = 0.307_692_307_692_307_7;
const A9: [(usize, f64); 6] = [
    (0, 0.624_110_958_716_075_7),
    (3, -3.360_892_629_446_941_4),
    (4, -0.868_219_346_841_726),
    (5, 27.592_099_699_446_71),
    (6, 20.154_067_550_477_894),
    (7, -43.489_884_181_069_96),
];
const C9: f64 = 0.651_282_051_282_051_3;
const A10: [(usize, f64); 7] = [
    (0, 0.477_662_536_438_264_34),
    (3, -2.488_114_619_971_667_7),
    (4, -0.590_290_826_836_843),
    (5, 21.230_051_448_181_193),
    (6, 15.279_233_632_882_423),
    (7, -33.288_210_968_984_86),
    (8, -0.020_331_201_708_508_627),
];
const C10: f64 = 0.6;
const A11: [(usize, f64); 8] = [
    (0, -0.937_142_430_085_987_3),
    (3, 5.186_372_428_844_064),
    (4, 1.091_437_348_996_729_5),
    (5, -8.149_787_010_746_927),
    (6, -18.520_065_659_996_96),
    (7, 22.739_487_099_350_505),
    (8, 2.493_605_552_679_652_3),
    (9, -3.046_764_471_898_219_6),
];
const C11: f64 = 0.857_142_857_142_857_1;
const A12: [(usize, f64); 9] = [
    (0, 2.273_310_147_516_538),
    (3, -10.534_495_466_737_25),
    (4, -2.000_872_058_224_862_5),
    (5, -17.958_931_863_118_8),
    (6, 27.948_884_529_419_96),
    (7, -2.858_998_277_135_023_5),
    (8, -8.872_856_933_530_63),
    (9, 12.360_567_175_794_303),
    (10, 0.643_392_746_015_763_6),
];
const B: [(usize, f64); 8] = [
    (0, 0.054_293_734_116_568_765),
    (5, 4.450_312_892_752_409),
    (6, 1.891_517_899_314_500_3),
    (7, -5.801_203_960_010_585),
    (8, 0.311_164_366_957_819_9),
    (9, -0.152_160_949_662_516_1),
    (10, 0.201_365_400_804_030_34),
    (11, 0.044_710_615_727_772_59),
];
const E5: [(usize, f64); 8] = [
    (0, 0.013_120_044_994_194_88),
    (5, -1.225_156_446_376_204_4),
    (6, -0.495_758_949_657_250_2),
    (7, 1.664_377_182_454_986_4),
    (8, -0.350_328_848_749_973_66),
    (9, 0.334_179_118_713_017_5),
    (10, 0.081_923_206_485_115_71),
    (11, -0.022_355_307_863_886_294),
];
const E3: [(usize, f64); 8] = [
    (0, -0.189_800_754_072_407_62),
    (5, 4.450_312_892_752_409),
    (6, 1.891_517_899_314_500_3),
    (7, -5.801_203_960_010_585),
    (8, -0.422_682_321_323_791_9),
    (9, -0.152_160_949_662_516_1),
    (10, 0.201_365_400_804_030_34),
    (11, 0.022_651_792_198_360_82),
];

/// Weighted sum of one part of the stage rates; the rows of the tableau leave out what is zero.
#[inline(always)]
fn weigh<const N: usize>(row: &[(usize, f64); N], rates: &[Rates; 12], part: impl Fn(&Rates) -> f64) -> f64 {
    let mut sum = 0.0;
    for &(stage, weight) in row {
        sum += weight * part(&rates[stage]);
    }
    sum
}

impl Step {
    /// A step of the given length. `first` are the rates at its start.
    #[inline]
    pub(super) fn take(motion: &impl Motion, since_s: f64, before: State, first: Rates, length_s: f64) -> Self {
        let h = length_s;
        let mut k = [Rates::default(); 12];
        k[0] = first;
        macro_rules! stage {
            ($index:literal, $share:expr, $row:ident) => {
                k[$index] = motion.rates(
                    since_s + $share * h,
                    before.angle_rad + h * weigh(&$row, &k, |k| k.speed),
                    before.speed_rad_s + h * weigh(&$row, &k, |k| k.acceleration),
                );
            };
        }
        stage!(1, C2, A2);
        stage!(2, C3, A3);
        stage!(3, C4, A4);
        stage!(4, C5, A5);
        stage!(5, C6, A6);
        stage!(6, C7, A7);
        stage!(7, C8, A8);
        stage!(8, C9, A9);
        stage!(9, C10, A10);
        stage!(10, C11, A11);
        stage!(11, 1.0, A12);
        let error = |part: fn(&Rates) -> f64| (h * weigh(&E5, &k, part), h * weigh(&E3, &k, part));
        Self {
            length_s,
            before,
            after: State {
                angle_rad: before.angle_rad + h * weigh(&B, &k, |k| k.speed),
                speed_rad_s: before.speed_rad_s + h * weigh(&B, &k, |k| k.acceleration),
                brake_work_j: before.brake_work_j + h * weigh(&B, &k, |k| k.power),
            },
            first,
            end_acceleration: k[11].acceleration,
            errors: [error(|k| k.speed), error(|k| k.acceleration), error(|k| k.power)],
        }
    }

    /// Estimated local error in units of the errors allowed for angle, speed and work: Hairer's mixture of both orders, high where the step is
    /// good, cautious where it is not. The three are added before they are mixed, since one of them alone may vanish by chance.
    #[inline]
    pub(super) fn error_share(&self, allowed: [f64; 3]) -> f64 {
        let (mut fifth, mut third) = (0.0, 0.0);
        for ((error_5, error_3), allowed) in self.errors.iter().zip(allowed) {
            fifth += (error_5 / allowed) * (error_5 / allowed);
            third += (error_3 / allowed) * (error_3 / allowed);
        }
        let mixed = (fifth + 0.01 * third).sqrt();
        if mixed > 0.0 { fifth / mixed } else { mixed }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A pendulum with a force that changes over time: nonlinear, every term of the step in use.
    struct Pendulum;

    impl Motion for Pendulum {
        fn rates(&self, since_s: f64, angle_rad: f64, speed_rad_s: f64) -> Rates {
            Rates {
                speed: speed_rad_s,
                acceleration: -libm::sin(angle_rad) - 0.3 * speed_rad_s * speed_rad_s + libm::exp(-since_s),
                power: speed_rad_s * libm::cos(since_s),
            }
        }
    }

    fn run(steps: u32) -> (State, f64) {
        let h = 4.0 / f64::from(steps);
        let mut state = State { angle_rad: 0.4, speed_rad_s: 1.1, brake_work_j: 0.0 };
        let mut estimate = 0.0;
        for i in 0..steps {
            let since_s = h * f64::from(i);
            let first = Pendulum.rates(since_s, state.angle_rad, state.speed_rad_s);
            let step = Step::take(&Pendulum, since_s, state, first, h);
            estimate += step.error_share([1.0; 3]);
            state = step.after;
        }
        (state, estimate)
    }

    /// Halving the step divides the error after a fixed time by at least 2^8, and the sum of the estimates, of order 7, by about 2^7.
    #[test]
    fn order_of_the_method() {
        let (truth, _) = run(400);
        let order = |coarse: f64, fine: f64| libm::log2(coarse / fine);
        for steps in [10, 12, 14] {
            let (one, estimate_one) = run(steps);
            let (two, estimate_two) = run(2 * steps);
            for part in [|s: &State| s.angle_rad, |s: &State| s.speed_rad_s, |s: &State| s.brake_work_j] {
                let found = order((part(&one) - part(&truth)).abs(), (part(&two) - part(&truth)).abs());
                assert!((7.5..9.5).contains(&found), "{steps}: order {found}");
            }
            let found = order(estimate_one, estimate_two);
            assert!((6.0..8.0).contains(&found), "{steps}: estimate {found}");
        }
    }

    /// Conditions of order 1 to 3 and the row sums, which a mistyped coefficient would break.
    #[test]
    fn the_tableau_is_consistent() {
        let nodes = [0.0, C2, C3, C4, C5, C6, C7, C8, C9, C10, C11, 1.0];
        let near = |sum: f64, wanted: f64| assert!((sum - wanted).abs() < 2e-14, "{sum} {wanted}");
        let sum = |row: &[(usize, f64)], power: i32| {
            row.iter().map(|&(i, weight)| weight * nodes[i].powi(power)).sum::<f64>()
        };
        let rows: [&[(usize, f64)]; 11] = [&A2, &A3, &A4, &A5, &A6, &A7, &A8, &A9, &A10, &A11, &A12];
        for (row, node) in rows.iter().zip(&nodes[1..]) {
            near(sum(row, 0), *node);
        }
        for power in 0..8 {
            near(sum(&B, power), 1.0 / f64::from(power + 1));
        }
        for power in 0..5 {
            near(sum(&E5, power), 0.0);
        }
        for power in 0..3 {
            near(sum(&E3, power), 0.0);
        }
    }
}
