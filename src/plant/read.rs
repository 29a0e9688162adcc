//! Reading a file with care: its size first, then its text, then its version, then its shape.

use std::fmt;
use std::fs::File;
use std::io::Read;
use std::path::{Path, PathBuf};

use ron::extensions::Extensions;
use serde::Deserialize;
use serde::de::DeserializeOwned;

/// Larger files are refused unread: a press with thirty years of monthly readings stays under 1 MB.
pub const LARGEST_FILE: u64 = 8 * 1024 * 1024;

/// Why a file could not be read.
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
}

impl FileRefusal {
    /// A refusal of the file as a whole.
    pub fn whole(path: &Path, why: impl Into<String>) -> Self {
        Self { path: path.into(), place: None, field: None, why: why.into() }
    }
}

impl fmt::Display for FileRefusal {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if let Some((line, column)) = self.place {
            write!(f, "Line {line}, column {column}")?;
            if let Some(field) = &self.field {
                write!(f, ", {field}")?;
            }
            write!(f, ": ")?;
        }
        write!(f, "{} ({})", self.why, self.path.display())
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
    let file = File::open(path).map_err(|error| refuse(format!("The file cannot be opened: {error}.")))?;
    let size = file.metadata().map_err(|error| refuse(format!("The file cannot be read: {error}.")))?;
    if !size.is_file() {
        return Err(refuse("This is no file.".into()));
    }
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
    Ok(text.strip_prefix('\u{feff}').map_or(text.clone(), str::to_owned))
}

#[derive(Deserialize)]
struct Version {
    version: u32,
}

/// Reads the version of a stored text, whatever else stands in it.
pub fn version_of(path: &Path, text: &str) -> Result<u32, FileRefusal> {
    options()
        .from_str::<Version>(text)
        .map(|read| read.version)
        .map_err(|error| at_place(path, error.span.start.line, error.span.start.col, None, &error.code.to_string()))
}

/// Reads one shape from a text; the refusal names line, column and field.
pub fn parse<T: DeserializeOwned>(path: &Path, text: &str) -> Result<T, FileRefusal> {
    let mut reader = ron::Deserializer::from_str_with_options(text, &options())
        .map_err(|error| at_place(path, error.span.start.line, error.span.start.col, None, &error.code.to_string()))?;
    let read = serde_path_to_error::deserialize(&mut reader);
    let value = read.map_err(|error| {
        let field = error.path().to_string();
        let spanned = reader.span_error(error.into_inner());
        at_place(path, spanned.span.start.line, spanned.span.start.col, Some(field), &spanned.code.to_string())
    })?;
    reader.end().map_err(|error| {
        let spanned = reader.span_error(error);
        at_place(path, spanned.span.start.line, spanned.span.start.col, None, &spanned.code.to_string())
    })?;
    Ok(value)
}

fn at_place(path: &Path, line: usize, column: usize, field: Option<String>, why: &str) -> FileRefusal {
    let field = field.filter(|field| !matches!(field.as_str(), "." | "?" | ""));
    let why = if why.ends_with('.') { why.to_owned() } else { format!("{why}.") };
    FileRefusal { path: path.into(), place: Some((line, column)), field, why }
}

/// Optional fields are written without `Some(...)`.
pub fn options() -> ron::Options {
    ron::Options::default().with_default_extension(Extensions::IMPLICIT_SOME)
}
