//! Monthly readings as CSV: one row a stop.
//!
//! | column | holds | must be there |
//! | --- | --- | --- |
//! | `reading` | number of the reading; rows of one number make one reading | no: then rows that differ in nothing but the stop do |
//! | `date` | 2026-11-03, or with a time of day 2026-11-03 14:30 | yes |
//! | `stop_ms` | one stopping time, ms | yes |
//! | `by` | who took it | no |
//! | `angle_deg`, `speed_per_min`, `upper_die_kg`, `counterbalance_bar`, `operating_pressure_bar` | the condition | no: the press's reference |
//! | `brake`, `path`, `valves`, `clock_start`, `place` | by their names in press files | no: the press's reference |
//! | `instrument`, `serial`, `calibrated`, `calibration_due` | what it was timed with | no |
//!
//! Columns may stand in any order. Commas part the columns and the point is the decimal mark; where semicolons part them, the
//! comma is a decimal mark as well. All rows are taken or none.

use std::collections::BTreeMap;
use std::fmt;

use calc::calendar::{Moment, parse_date};
use calc::limits::{self, Limit};
use calc::press::Press;
use calc::reading::{Reading, ReadingPlace, ReadingSetup};
use calc::refusal::Refusal;
use calc::stop_test::{BrakeState, ClockStart, Condition, Instrument, StopPath, Valves};
use calc::units::{Angle, Mass, Pressure, Rate, Time};

/// A row that cannot be taken.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct RowRefusal {
    /// Its line in the file, from 1.
    pub line: u64,
    /// Why, in words.
    pub why: String,
}

impl fmt::Display for RowRefusal {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "Line {}: {}", self.line, self.why)
    }
}

const COLUMNS: [&str; 18] = [
    "reading",
    "date",
    "by",
    "stop_ms",
    "angle_deg",
    "speed_per_min",
    "upper_die_kg",
    "counterbalance_bar",
    "operating_pressure_bar",
    "brake",
    "path",
    "valves",
    "clock_start",
    "place",
    "instrument",
    "serial",
    "calibrated",
    "calibration_due",
];

/// Writes the readings of a press, every column.
pub fn export_readings(press: &Press) -> String {
    let mut writer = csv::Writer::from_writer(Vec::new());
    let mut rows = vec![COLUMNS.map(str::to_owned).to_vec()];
    for (index, reading) in press.readings.iter().enumerate() {
        for stop in &reading.stops {
            rows.push(row(index + 1, reading, *stop));
        }
    }
    for row in rows {
        // Writing to memory does not fail.
        let _ = writer.write_record(row);
    }
    String::from_utf8(writer.into_inner().unwrap_or_default()).unwrap_or_default()
}

fn row(number: usize, reading: &Reading, stop: Time) -> Vec<String> {
    let condition = &reading.setup.condition;
    let instrument = &reading.instrument;
    // Files hold the plain minus sign; no figure here is negative.
    vec![
        number.to_string(),
        reading.at.to_string(),
        reading.by.clone(),
        stop.digits(),
        condition.angle.digits(),
        condition.speed.digits(),
        condition.upper_die.digits(),
        condition.counterbalance.map_or(String::new(), |pressure| pressure.digits()),
        condition.operating_pressure.map_or(String::new(), |pressure| pressure.digits()),
        condition.brake.key().into(),
        condition.path.key().into(),
        condition.valves.key().into(),
        reading.setup.clock_start.key().into(),
        reading.setup.place.key().into(),
        instrument.name.clone(),
        instrument.serial.clone(),
        instrument.calibrated.map_or(String::new(), |day| day.to_string()),
        instrument.calibration_due.map_or(String::new(), |day| day.to_string()),
    ]
}

/// Reads readings for a press. What the file leaves out of the condition comes from the press's reference.
///
/// # Errors
/// Every row that cannot be taken, by its line; then nothing is taken.
pub fn import_readings(press: &Press, text: &str) -> Result<Vec<Reading>, Vec<RowRefusal>> {
    let text = text.strip_prefix('\u{feff}').unwrap_or(text);
    let head = text.lines().next().unwrap_or_default();
    let delimiter = if head.contains(';') { b';' } else { b',' };
    let mut reader = csv::ReaderBuilder::new().delimiter(delimiter).trim(csv::Trim::All).from_reader(text.as_bytes());
    let columns = columns(&mut reader).map_err(|why| vec![RowRefusal { line: 1, why }])?;
    let mut refusals = Vec::new();
    let mut groups: Vec<(Option<String>, Reading)> = Vec::new();
    for record in reader.records() {
        match record {
            Err(error) => {
                let line = error.position().map_or(0, csv::Position::line);
                refusals.push(RowRefusal {
                    line,
                    why: format!("The row has another number of columns than the head, or is no text: {error}."),
                });
            }
            Ok(record) => {
                let line = record.position().map_or(0, csv::Position::line);
                let row = Row { columns: &columns, record: &record, reference: press.reference.as_ref() };
                match row.read() {
                    Ok((number, reading)) => join(&mut groups, number, reading),
                    Err(whys) => refusals.extend(whys.into_iter().map(|why| RowRefusal { line, why })),
                }
            }
        }
    }
    if refusals.is_empty() && groups.is_empty() {
        refusals.push(RowRefusal { line: 1, why: "There is no row with a stop.".into() });
    }
    if refusals.is_empty() { Ok(groups.into_iter().map(|(_, reading)| reading).collect()) } else { Err(refusals) }
}

fn columns(reader: &mut csv::Reader<&[u8]>) -> Result<BTreeMap<String, usize>, String> {
    let head = reader.headers().map_err(|error| format!("The head cannot be read: {error}."))?;
    let mut columns = BTreeMap::new();
    for (index, name) in head.iter().enumerate() {
        if !COLUMNS.contains(&name) {
            return Err(format!("The column {name:?} is not known. The columns are {}.", COLUMNS.join(", ")));
        }
        if columns.insert(name.to_owned(), index).is_some() {
            return Err(format!("The column {name:?} stands twice."));
        }
    }
    for needed in ["date", "stop_ms"] {
        if !columns.contains_key(needed) {
            return Err(format!("The column {needed:?} is missing."));
        }
    }
    Ok(columns)
}

/// Puts a stop to its reading: the one of its number, or without numbers the one before if nothing but the stop differs.
fn join(groups: &mut Vec<(Option<String>, Reading)>, number: Option<String>, reading: Reading) {
    let same = |known: &Reading| Reading { stops: reading.stops.clone(), ..known.clone() } == reading;
    if let Some((known_number, known)) = groups.last_mut()
        && *known_number == number
        && same(known)
    {
        known.stops.extend(&reading.stops);
        return;
    }
    groups.push((number, reading));
}

struct Row<'a> {
    columns: &'a BTreeMap<String, usize>,
    record: &'a csv::StringRecord,
    reference: Option<&'a ReadingSetup>,
}

impl Row<'_> {
    fn cell(&self, name: &str) -> Option<&str> {
        self.record.get(*self.columns.get(name)?).filter(|cell| !cell.is_empty())
    }

    fn read(&self) -> Result<(Option<String>, Reading), Vec<String>> {
        let mut whys: Vec<String> = Vec::new();
        let at = Moment::parse("date", self.cell("date").unwrap_or_default())
            .map_err(|refusal| whys.push(refusal.to_string()))
            .ok();
        let stop = Time::parse(self.cell("stop_ms").unwrap_or_default(), &limits::STOPPING_TIME.named("stop_ms"))
            .map_err(|refusal| whys.push(refusal.to_string()))
            .ok();
        let setup = self.setup(&mut whys);
        let mut day = |name: &str| {
            let read = self.cell(name).map(|cell| parse_date(name, cell));
            read.transpose().map_err(|refusal: Refusal| whys.push(refusal.to_string())).ok().flatten()
        };
        let (calibrated, calibration_due) = (day("calibrated"), day("calibration_due"));
        match (at, stop, setup) {
            (Some(at), Some(stop), Some(setup)) if whys.is_empty() => {
                let words = |name: &str| self.cell(name).unwrap_or_default().to_owned();
                let instrument =
                    Instrument { name: words("instrument"), serial: words("serial"), calibrated, calibration_due };
                Ok((
                    self.cell("reading").map(str::to_owned),
                    Reading { at, by: words("by"), setup, instrument, stops: vec![stop] },
                ))
            }
            _ => Err(whys),
        }
    }

    fn setup(&self, whys: &mut Vec<String>) -> Option<ReadingSetup> {
        let reference = self.reference.map(|setup| &setup.condition);
        let angle = self.figure("angle_deg", limits::ANGLE, reference.map(|condition| condition.angle.base()), whys);
        let speed =
            self.figure("speed_per_min", limits::SPEED, reference.map(|condition| condition.speed.base()), whys);
        let die =
            self.figure("upper_die_kg", limits::DIE_MASS, reference.map(|condition| condition.upper_die.base()), whys);
        let counterbalance = self.optional(
            "counterbalance_bar",
            limits::COUNTERBALANCE,
            reference.and_then(|condition| condition.counterbalance),
            whys,
        );
        let operating_pressure = self.optional(
            "operating_pressure_bar",
            limits::OPERATING_PRESSURE,
            reference.and_then(|condition| condition.operating_pressure),
            whys,
        );
        let brake =
            self.choice("brake", BrakeState::ALL, BrakeState::key, reference.map(|condition| condition.brake), whys);
        let path = self.choice("path", StopPath::ALL, StopPath::key, reference.map(|condition| condition.path), whys);
        let valves = self.choice("valves", Valves::ALL, Valves::key, reference.map(|condition| condition.valves), whys);
        let clock_start = self.choice(
            "clock_start",
            ClockStart::ALL,
            ClockStart::key,
            self.reference.map(|setup| setup.clock_start),
            whys,
        );
        let place =
            self.choice("place", ReadingPlace::ALL, ReadingPlace::key, self.reference.map(|setup| setup.place), whys);
        Some(ReadingSetup {
            condition: Condition {
                angle: Angle::from_base(angle?),
                speed: Rate::from_base(speed?),
                upper_die: Mass::from_base(die?),
                counterbalance,
                operating_pressure,
                brake: brake?,
                path: path?,
                valves: valves?,
            },
            clock_start: clock_start?,
            place: place?,
        })
    }

    fn figure(&self, name: &'static str, limit: Limit, reference: Option<i64>, whys: &mut Vec<String>) -> Option<i64> {
        let Some(cell) = self.cell(name) else {
            if reference.is_none() {
                whys.push(format!("{name} is empty, and the press has no reference to take it from."));
            }
            return reference;
        };
        limit.named(name).take_text(cell).map_err(|refusal| whys.push(refusal.to_string())).ok()
    }

    /// A pressure that a press may be without: a column that is there and empty means none, a missing column the reference.
    fn optional(
        &self,
        name: &'static str,
        limit: Limit,
        reference: Option<Pressure>,
        whys: &mut Vec<String>,
    ) -> Option<Pressure> {
        if !self.columns.contains_key(name) {
            return reference;
        }
        let cell = self.cell(name)?;
        limit
            .named(name)
            .take_text(cell)
            .map_err(|refusal| whys.push(refusal.to_string()))
            .ok()
            .map(Pressure::from_base)
    }

    fn choice<T: Copy>(
        &self,
        name: &str,
        every: &[T],
        key: fn(T) -> &'static str,
        reference: Option<T>,
        whys: &mut Vec<String>,
    ) -> Option<T> {
        let Some(cell) = self.cell(name) else {
            if reference.is_none() {
                whys.push(format!("{name} is empty, and the press has no reference to take it from."));
            }
            return reference;
        };
        let found = every.iter().copied().find(|choice| key(*choice) == cell);
        if found.is_none() {
            let names: Vec<&str> = every.iter().map(|choice| key(*choice)).collect();
            whys.push(format!("{name} is {cell:?}. It must be one of {}.", names.join(", ")));
        }
        found
    }
}
