//! Rule sets: one file per law or standard and edition, all reached through [`RuleSet`].
//!
//! A rule set answers one question: how far from the hazard must this safeguard stand, given what the stop takes. It
//! works on a [`Case`], writes every line of its derivation into [`WorkedSteps`] and gives a [`Demand`], or says in words
//! why there is none. Constants live in the file of the rule set under their own symbols, each with clause and basis.

mod ansi_b11_19;
mod east_asia;
mod eu_press;
mod iso_13855_2010;
mod iso_13855_2024;
pub mod iso_13857;
mod reaching_over;
mod us_1910_217;
pub mod us_1910_217_h;
pub mod us_table_o10;

use crate::basis::Source;
use crate::expr;
use crate::press::{Clutch, Conformity};
use crate::round::{divide_down, divide_up};
use crate::safeguard::{HorizontalField, LightCurtain, SafeguardKind, WayOver};
use crate::steps::{Expression, WorkedSteps};
use crate::stop_test::StopTest;
use crate::units::{Angle, Length, Rate, Speed, Time};
use crate::value_taken::ValueTaken;

/// What a rule set is asked about: one safeguard with every figure that its distance depends on.
#[derive(Clone, PartialEq, Debug)]
pub struct Case {
    /// Kind of safeguard, with its own figures.
    pub kind: SafeguardKind,
    /// Clutch of the press; `None` where a distance is worked out without a press.
    pub clutch: Option<Clutch>,
    /// CE mark of the press.
    pub conformity: Option<Conformity>,
    /// The slowest speed at which a two-hand trip starts the stroke, which takes longest to close.
    pub trip_speed: Option<Rate>,
    /// The addends of the response time.
    pub times: Times,
    /// Distance added for what the formula does not cover.
    pub supplement: Length,
}

/// The addends of the response time T; a part that the clock already saw is zero here.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Times {
    /// Stopping time taken forward.
    pub stopping: Time,
    /// Response of the sensing device or actuator.
    pub device: Time,
    /// Response of the interface.
    pub interface: Time,
    /// Response of the press control.
    pub control: Time,
    /// Wear allowance, or stop-time increase that the brake monitor allows.
    pub allowance: Time,
}

impl Times {
    /// All addends once.
    pub fn total(&self) -> Time {
        self.stopping + self.device + self.interface + self.control + self.allowance
    }
}

/// The distance that a rule set asks for.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Demand {
    /// The distance.
    pub required: Length,
    /// Whether the installed distance must be greater, or may be equal.
    pub strict: bool,
    /// How the distance is made up; `None` where no movement of a hand is counted, as for openings.
    pub make_up: Option<MakeUp>,
}

/// How a distance S = K × T + C is made up, where the drawing needs it.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct MakeUp {
    /// Hand speed of the branch that decided.
    pub speed: Speed,
    /// Response time that was counted.
    pub time: Time,
    /// Distance added to the way of the hand.
    pub addition: Length,
    /// How often the allowance was counted.
    pub allowance_times: i64,
}

impl Demand {
    /// Whether a distance that can be relied on satisfies the rule.
    pub fn is_met_by(&self, relied_on: Length) -> bool {
        if self.strict { relied_on > self.required } else { relied_on >= self.required }
    }

    /// The least whole-micrometre distance that satisfies the rule.
    pub fn least_distance(&self) -> Length {
        self.required + Length::from_base(i64::from(self.strict))
    }
}

/// Why a rule set gives no distance.
#[derive(Clone, PartialEq, Eq, Debug)]
pub enum NoDemand {
    /// The rule set forbids this safeguard here, at any distance.
    Forbidden {
        /// In words.
        why: String,
        /// Where it says so.
        source: Source,
    },
    /// The rule set, as far as it is known here, says nothing about this case.
    NotCovered {
        /// What is not covered.
        what: String,
    },
    /// A figure is needed that nobody has given.
    Missing {
        /// Which.
        what: String,
    },
}

impl NoDemand {
    fn forbidden(why: impl Into<String>, source: Source) -> Self {
        Self::Forbidden { why: why.into(), source }
    }

    fn not_covered(what: impl Into<String>) -> Self {
        Self::NotCovered { what: what.into() }
    }

    fn missing(what: impl Into<String>) -> Self {
        Self::Missing { what: what.into() }
    }

    /// The reason as a sentence.
    pub fn words(&self) -> String {
        match self {
            Self::Forbidden { why, source } => format!("Not permitted: {why} ({}).", source.place()),
            Self::NotCovered { what } => format!("Not covered: {what}."),
            Self::Missing { what } => format!("Missing: {what}."),
        }
    }
}

/// A law or standard that says how far a safeguard must stand from the hazard.
pub trait RuleSet: Sync {
    /// Which it is.
    fn id(&self) -> RuleSetId;

    /// The distance it asks for in this case, with every line of its derivation.
    ///
    /// # Errors
    /// [`NoDemand`] where it forbids the safeguard, does not cover the case, or lacks a figure.
    fn distance(&self, case: &Case, steps: &mut WorkedSteps) -> Result<Demand, NoDemand>;

    /// The distance it asks for, with the supplemental distance that the user has entered: a rule set without a term for it
    /// gets it added, for nothing that makes a distance longer is dropped in silence.
    ///
    /// # Errors
    /// As [`RuleSet::distance`].
    fn demand(&self, case: &Case, steps: &mut WorkedSteps) -> Result<Demand, NoDemand> {
        let demand = self.distance(case, steps)?;
        if self.needs_supplement() || case.supplement == Length::ZERO {
            return Ok(demand);
        }
        let required = steps.put(
            "S + Z",
            "with the supplemental distance that was entered",
            expr![demand.required, "+", case.supplement],
            demand.required + case.supplement,
            Source::GIVEN,
        );
        let make_up = demand.make_up.map(|make_up| MakeUp { addition: make_up.addition + case.supplement, ..make_up });
        Ok(Demand { required, make_up, ..demand })
    }

    /// The value of several stops that it takes forward, and where it says so.
    fn value_taken(&self) -> (ValueTaken, Source);

    /// The least number of stops per condition, and where it says so.
    fn least_stops(&self) -> (usize, Source) {
        (10, Source::PRACTICE)
    }

    /// What it asks of the stop tests as a whole, beyond their number: each complaint in words.
    fn judge_tests(&self, _tests: &[&StopTest]) -> Vec<TestFinding> {
        Vec::new()
    }

    /// The angles about which stops must have been begun before it can be judged.
    fn needed_angles(&self) -> &'static [NeededAngle] {
        &[]
    }

    /// The angles whose stops decide; none where the worst of all stops decides.
    fn governing_angles(&self) -> &'static [NeededAngle] {
        &[]
    }

    /// The greatest stop-time increase that the brake monitor may allow, where it limits that.
    fn monitor_limit(&self, _tests: &[&StopTest]) -> Option<MonitorLimit> {
        None
    }

    /// Whether the way over the upper edge of a curtain enters its distance.
    fn looks_at_way_over(&self) -> bool {
        false
    }

    /// Whether it asks for a supplemental distance to be stated.
    fn needs_supplement(&self) -> bool {
        false
    }
}

/// An angle at which a rule set wants stops to have begun.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct NeededAngle {
    /// The angle.
    pub angle: Angle,
    /// How far from it still counts as "about".
    pub within: Angle,
    /// Where it says so.
    pub source: Source,
}

impl NeededAngle {
    /// Whether a stop begun at `angle` counts.
    pub fn is_met_by(&self, angle: Angle) -> bool {
        let turn = 360_000;
        let apart = (angle.base() - self.angle.base()).rem_euclid(turn);
        apart.min(turn - apart) <= self.within.base()
    }
}

/// What a rule set lets the brake monitor allow at the top of the stroke.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct MonitorLimit {
    /// The longest stop measured at the top.
    pub longest_top: Time,
    /// The greatest increase over it.
    pub most_increase: Time,
    /// Where it says so.
    pub source: Source,
}

/// What a rule set finds in the stop tests as a whole.
#[derive(Clone, PartialEq, Eq, Debug)]
pub enum TestFinding {
    /// The press fails the rule whatever the distance.
    Fails(String),
    /// Something is missing before the rule can be judged.
    Missing(String),
}

macro_rules! rule_sets {
    ($($(#[$doc:meta])* $id:ident $key:literal $title:literal $edition:literal $set:expr;)*) => {
        /// The rule sets, in the order in which they are listed everywhere.
        #[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Debug, Hash)]
        pub enum RuleSetId { $($(#[$doc])* $id),* }

        impl RuleSetId {
            /// Every rule set.
            pub const ALL: &[Self] = &[$(Self::$id),*];
            /// The name on the command line and in files.
            pub const fn key(self) -> &'static str { match self { $(Self::$id => $key),* } }
            /// The name on screen and paper.
            pub const fn title(self) -> &'static str { match self { $(Self::$id => $title),* } }
            /// The edition that was read, in words.
            pub const fn edition(self) -> &'static str { match self { $(Self::$id => $edition),* } }
            /// The rule set itself.
            pub fn rules(self) -> &'static dyn RuleSet { match self { $(Self::$id => &$set),* } }
        }
    };
}

rule_sets! {
    /// United States, mechanical power presses.
    Us1910217 "us-1910-217" "29 CFR 1910.217(c)" "29 CFR 1910.217 (1974, as amended)" us_1910_217::Us1910217;
    /// United States, start of the stroke by presence sensing.
    Us1910217H "us-1910-217-h" "29 CFR 1910.217(h)" "29 CFR 1910.217 (1988 amendment)" us_1910_217_h::Us1910217H;
    /// United States, consensus standard.
    AnsiB1119 "ansi-b11-19" "ANSI B11.19" "ANSI B11.19-2010, taken over in 2019" ansi_b11_19::AnsiB1119;
    /// International, general.
    Iso138552010 "iso-13855-2010" "ISO 13855:2010" "ISO 13855:2010" iso_13855_2010::Iso138552010;
    /// International, general, new edition.
    Iso138552024 "iso-13855-2024" "ISO 13855:2024" "ISO 13855:2024, as far as known here" iso_13855_2024::Iso138552024;
    /// Europe, presses.
    EuPress "eu-press" "European press practice" "EN 692:2005+A1:2009 and ISO 16092-2:2019, after DGUV Information 209-030" eu_press::EuPress;
    /// Japan and Taiwan, presses.
    EastAsia "east-asia" "East Asian press codes" "Japan: structure codes 1977, amended 2019; Taiwan: safety standard 2022" east_asia::EastAsia;
}

impl RuleSetId {
    /// The rule set of this name.
    pub fn from_key(key: &str) -> Option<Self> {
        Self::ALL.iter().copied().find(|id| id.key() == key)
    }
}

/// A friction clutch is needed wherever a safeguard must stop the slide within a stroke.
fn require_part_revolution(case: &Case, source: Source) -> Result<(), NoDemand> {
    match case.clutch {
        Some(Clutch::FullRevolution { .. }) => Err(NoDemand::forbidden(
            format!("a {} cannot stop the slide of a full-revolution clutch within the stroke", case.kind.words()),
            source,
        )),
        _ => Ok(()),
    }
}

/// Writes the addends of T and their sum; parts that the clock saw are left out of the line.
fn response_time(
    case: &Case,
    symbol: &'static str,
    allowance_times: i64,
    source: Source,
    steps: &mut WorkedSteps,
) -> Time {
    let times = &case.times;
    let allowance = Time::from_base(times.allowance.base() * allowance_times);
    let total = times.stopping + times.device + times.interface + times.control + allowance;
    let mut expression = expr![times.stopping];
    for part in [times.device, times.interface, times.control] {
        if part != Time::ZERO {
            expression.0.extend(expr!["+", part].0);
        }
    }
    if times.allowance != Time::ZERO {
        expression.0.push("+".into());
        if allowance_times != 1 {
            expression.0.extend(expr![format!("{allowance_times} ×")].0);
        }
        expression.0.push(times.allowance.into());
    }
    steps.put(symbol, "response time: stop and every part that the clock did not see", expression, total, source)
}

/// Writes S = K × T + C and gives S; the reach is rounded up to a whole micrometre.
fn reach(
    symbol: &'static str,
    meaning: &str,
    speed: Speed,
    time: Time,
    addition: Length,
    source: Source,
    steps: &mut WorkedSteps,
) -> Length {
    steps.put(symbol, meaning, reach_expression(speed, time, addition), speed.reach_in(time) + addition, source)
}

fn reach_expression(speed: Speed, time: Time, addition: Length) -> Expression {
    let mut expression = expr![speed, "×", time];
    if addition != Length::ZERO {
        expression.0.extend(expr!["+", addition].0);
    }
    expression
}

/// The distance of a two-hand trip: what a hand reaches while the longest time from trip to die closure passes.
///
/// Tm = (1/2 + 1/N) × 60 / (strokes per minute): half a revolution to close the die after at most one pitch of the engaging
/// points, as 29 CFR 1910.217(c)(3)(viii)(c) and the Japanese code give it alike. The distance is taken from the exact
/// fraction, so that only its own last micrometre is rounded up.
fn trip_distance(
    case: &Case,
    symbol: &'static str,
    speed: Speed,
    strict: bool,
    source: Source,
    steps: &mut WorkedSteps,
) -> Result<Demand, NoDemand> {
    let (points, rate) = trip_figures(case)?;
    let fraction = format!("(1/2 + 1/{points}) × 60 s / ({rate})");
    let half_turns = i128::from(points) + 2;
    let divisor = 2 * i128::from(points) * i128::from(rate.base());
    let time = Time::from_base(divide_up(half_turns * 60_000_000_000, divisor));
    let meaning =
        format!("longest time from trip to die closure, {points} engaging point{}", if points == 1 { "" } else { "s" });
    steps.put("Tm", meaning, expr![fraction.clone()], time, source);
    let required = Length::from_base(divide_up(i128::from(speed.base()) * half_turns * 60_000, divisor));
    steps.put(symbol, "required distance", expr![speed, "×", fraction], required, source);
    let make_up = MakeUp { speed, time, addition: Length::ZERO, allowance_times: 0 };
    Ok(Demand { required, strict, make_up: Some(make_up) })
}

/// The two figures that a two-hand trip on a full-revolution clutch depends on.
fn trip_figures(case: &Case) -> Result<(u32, Rate), NoDemand> {
    let points = match case.clutch {
        Some(Clutch::FullRevolution { engaging_points }) => engaging_points,
        Some(Clutch::PartRevolution(_)) => {
            return Err(NoDemand::not_covered(
                "two-hand trip on a part-revolution clutch; enter it as two-hand control",
            ));
        }
        None => 0,
    };
    if points == 0 {
        return Err(NoDemand::missing("the number of engaging points of the clutch"));
    }
    let speed = case.trip_speed.filter(|speed| *speed > Rate::ZERO);
    Ok((points, speed.ok_or_else(|| NoDemand::missing("the speed of the press in strokes a minute"))?))
}

/// The start of the stroke by the curtain itself changes what a rule asks for; a rule set that says nothing of it must not
/// answer as if the curtain only stopped.
fn require_no_start(curtain: &LightCurtain) -> Result<(), NoDemand> {
    if curtain.starts_stroke {
        return Err(NoDemand::not_covered("a curtain that starts the stroke, whose conditions are not known here"));
    }
    Ok(())
}

/// A rule set that counts no reach over the curtain says so beside a way that is stated to be open.
fn note_way_over(curtain: &LightCurtain, source: Source, steps: &mut WorkedSteps) {
    if let WayOver::Open { .. } = curtain.over {
        steps.note(
            "",
            "an arm can pass over the curtain",
            "not in this distance: every other way to the point of operation must be guarded",
            source,
        );
    }
}

/// The lowest beam decides how coarse a field may be, so it must not be given higher than the beam farthest from the hazard.
fn require_lowest_beam_below(field: &HorizontalField) -> Result<(), NoDemand> {
    if field.lowest > field.height {
        return Err(NoDemand::not_covered(format!(
            "a lowest beam at {} above the beam farthest from the hazard at {}",
            field.lowest, field.height
        )));
    }
    Ok(())
}
