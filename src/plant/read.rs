//! Reading a file with care: its size first, then its text, then its version, then its shape.

use std::cell::Cell;
use std::fmt;
use std::fs::{self, File};
use std::io::Read;
use std::path::{Path, PathBuf};

use ron::extensions::Extensions;
use serde::Deserialize;
use serde::de::DeserializeOwned;

use crate::comma::comma_between_digits;
use crate::wording::words;

/// Larger files are refused unread: a press with thirty years of monthly readings stays under 1 MB.
pub const LARGEST_FILE: u64 = 8 * 1024 * 1024;

/// At most so many refusals of one file are told; whoever has that many looks at the file as a whole.
const MOST_TOLD: usize = 20;

/// Why a file could not be read: the first fault in it, and those behind it.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct FileRefusal {
    /// The file.
    pub path: PathBuf,
    /// Line and column, both from 1, where the place is known.
    pub place: Option<(usize, usize)>,
    /// The field, as `stop_tests[2].stops_ms[4]`, where it is known.
    pub field: Option<String>,
    /// What is wrong, in words.
    pub why: String,
    /// What else is wrong in the same file, in its order. Behind a fault of the form nothing more can be found.
    pub further: Vec<FileRefusal>,
}

impl FileRefusal {
    /// A refusal of the file as a whole.
    pub fn whole(path: &Path, why: impl Into<String>) -> Self {
        Self { path: path.into(), place: None, field: None, why: why.into(), further: Vec::new() }
    }

    /// A refusal of one field, whose place is not known.
    pub fn of_field(path: &Path, field: impl Into<String>, why: impl Into<String>) -> Self {
        Self { field: Some(field.into()), ..Self::whole(path, why) }
    }
}

impl fmt::Display for FileRefusal {
    /// One line for each fault.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match (self.place, &self.field) {
            (Some((line, column)), Some(field)) => write!(f, "Line {line}, column {column}, {field}: ")?,
            (Some((line, column)), None) => write!(f, "Line {line}, column {column}: ")?,
            (None, Some(field)) => write!(f, "{field}: ")?,
            (None, None) => {}
        }
        write!(f, "{} ({})", self.why, self.path.display())?;
        self.further.iter().try_for_each(|fault| write!(f, "\n{fault}"))
    }
}

impl std::error::Error for FileRefusal {}

/// Why a plant could not be opened or saved.
#[derive(Clone, PartialEq, Eq, Debug)]
pub enum PlantRefusal {
    /// A file in it could not be read.
    File(FileRefusal),
    /// Something else, in words.
    Folder(String),
}

impl fmt::Display for PlantRefusal {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::File(refusal) => refusal.fmt(f),
            Self::Folder(why) => f.write_str(why),
        }
    }
}

impl std::error::Error for PlantRefusal {}

impl From<FileRefusal> for PlantRefusal {
    fn from(refusal: FileRefusal) -> Self {
        Self::File(refusal)
    }
}

/// Reads a text file of permitted size. A byte-order mark is taken off.
pub fn read_text(path: &Path) -> Result<String, FileRefusal> {
    let refuse = |why: String| FileRefusal::whole(path, why);
    let open_error = |error| refuse(format!("The file cannot be opened: {error}."));
    // Looked at before it is opened: opening a named pipe would wait for a writer for ever.
    if !fs::metadata(path).map_err(open_error)?.is_file() {
        return Err(refuse("This is no file. Take it out of the folder, or give the file that is meant.".into()));
    }
    let file = File::open(path).map_err(open_error)?;
    let size = file.metadata().map_err(|error| refuse(format!("The file cannot be read: {error}.")))?;
    if size.len() > LARGEST_FILE {
        return Err(refuse(format!(
            "The file is {} bytes long; at most {LARGEST_FILE} are read. It is no press or plant file.",
            size.len()
        )));
    }
    let mut bytes = Vec::new();
    // The file may grow between the look at its size and the reading.
    file.take(LARGEST_FILE + 1)
        .read_to_end(&mut bytes)
        .map_err(|error| refuse(format!("The file cannot be read: {error}.")))?;
    if bytes.len() as u64 > LARGEST_FILE {
        return Err(refuse(format!("The file is longer than {LARGEST_FILE} bytes.")));
    }
    let text = String::from_utf8(bytes).map_err(|_| refuse("The file is no UTF-8 text.".into()))?;
    Ok(match text.strip_prefix('\u{feff}') {
        Some(behind_mark) => behind_mark.to_owned(),
        None => text,
    })
}

#[derive(Deserialize)]
struct Version {
    version: u32,
}

/// Reads the version of a stored text, whatever else stands in it.
pub fn version_of(path: &Path, text: &str) -> Result<u32, FileRefusal> {
    options().from_str::<Version>(text).map(|read| read.version).map_err(|error| {
        // A decimal comma also spoils the reading of the version, and its own refusal says more.
        refuse_decimal_comma(path, text).err().unwrap_or_else(|| at_place(path, &error, None))
    })
}

fn refuse_decimal_comma(path: &Path, text: &str) -> Result<(), FileRefusal> {
    let Some(place) = comma_between_digits(text) else { return Ok(()) };
    let why = "A comma stands between two digits. Write a point for decimals, and a blank behind the comma in a list.";
    Err(FileRefusal { place: Some(place), ..FileRefusal::whole(path, why) })
}

thread_local! {
    /// How many values that cannot be taken are still let pass, so that the next one behind them is found. Only ever above zero
    /// while [`gather`] reads a file that is refused already.
    static LET_PASS: Cell<usize> = const { Cell::new(0) };
}

/// Whether a value that cannot be taken is let pass this once.
pub fn is_let_pass() -> bool {
    let left = LET_PASS.get();
    LET_PASS.set(left.saturating_sub(1));
    left > 0
}

/// Reads one shape from a text; the refusal names line, column and field, of every fault that can be found.
pub fn parse<T: DeserializeOwned>(path: &Path, text: &str) -> Result<T, FileRefusal> {
    refuse_decimal_comma(path, text)?;
    // Whatever went before: what is handed out has let nothing pass.
    LET_PASS.set(0);
    parse_once(path, text).map_err(|first| gather::<T>(path, text, first))
}

/// The faults behind the first one: the text is read again, each time with one more refused value let pass.
fn gather<T: DeserializeOwned>(path: &Path, text: &str, mut first: FileRefusal) -> FileRefusal {
    for let_pass in 1..=MOST_TOLD {
        LET_PASS.set(let_pass);
        let read = parse_once::<T>(path, text);
        let are_all_found = LET_PASS.replace(0) > 0;
        match read {
            Err(next) if !are_all_found && let_pass < MOST_TOLD => first.further.push(next),
            Err(_) if !are_all_found => {
                first.further.push(FileRefusal::whole(path, "There is more; correct these first."));
            }
            _ => break,
        }
    }
    first
}

fn parse_once<T: DeserializeOwned>(path: &Path, text: &str) -> Result<T, FileRefusal> {
    let mut reader =
        ron::Deserializer::from_str_with_options(text, &options()).map_err(|error| at_place(path, &error, None))?;
    let read = serde_path_to_error::deserialize(&mut reader);
    let value = read.map_err(|error| {
        let field = error.path().to_string();
        at_place(path, &reader.span_error(error.into_inner()), Some(field))
    })?;
    reader.end().map_err(|error| at_place(path, &reader.span_error(error), None))?;
    Ok(value)
}

fn at_place(path: &Path, error: &ron::error::SpannedError, field: Option<String>) -> FileRefusal {
    let field = field.filter(|field| !matches!(field.as_str(), "." | "?" | ""));
    let start = error.span.start;
    FileRefusal { place: Some((start.line, start.col)), field, ..FileRefusal::whole(path, words(&error.code)) }
}

/// Optional fields are written without `Some(...)`.
pub fn options() -> ron::Options {
    ron::Options::default().with_default_extension(Extensions::IMPLICIT_SOME)
}
