//! What the reader of RON finds wrong, in the words of somebody who edits a press file.

use ron::Error;

/// What is wrong and what to write instead.
pub fn words(error: &Error) -> String {
    let known = |names: &[&str]| names.join(", ");
    match error {
        Error::Eof | Error::ExpectedStringEnd | Error::UnclosedBlockComment => {
            "The file ends here before it is complete. It is cut off; take it from a copy.".into()
        }
        Error::TrailingCharacters => {
            "Something stands behind the end. A file holds one press or one plant; take away what follows.".into()
        }
        Error::ExpectedFloat => "A number is needed here, such as 182.5.".into(),
        Error::ExpectedInteger => "A whole number is needed here, such as 12.".into(),
        Error::IntegerOutOfBounds => {
            "This number is too large, or it is negative. Write a whole number from 0 on.".into()
        }
        Error::ExpectedBoolean => "Write true or false here.".into(),
        Error::ExpectedString => "A text in quotation marks is needed here.".into(),
        Error::ExpectedArray => "A list in square brackets is needed here.".into(),
        Error::ExpectedComma => {
            "A comma is needed here, between two fields or two members of a list; a whole number has no point.".into()
        }
        Error::ExpectedStructLike
        | Error::ExpectedNamedStructLike(_)
        | Error::ExpectedStructName(_)
        | Error::ExpectedDifferentStructName { .. } => {
            "An opening bracket ( is needed here, then the fields, then ).".into()
        }
        Error::ExpectedStructLikeEnd => "A closing bracket ) is needed here.".into(),
        Error::ExpectedArrayEnd => "A closing bracket ] is needed here.".into(),
        Error::MissingStructField { field, .. } => {
            format!("The field {field} is missing in what ends here. Add it.")
        }
        Error::NoSuchStructField { expected: [], found, .. } => {
            format!("There is no field {found} here; there is none at all. Take it away.")
        }
        Error::NoSuchStructField { expected, found, .. } => {
            format!("There is no field {found} here. The fields are {}.", known(expected))
        }
        Error::DuplicateStructField { field, .. } => format!("The field {field} stands here twice. Keep one of them."),
        Error::NoSuchEnumVariant { expected, found, .. } => {
            format!("{found} is not known here; it must be one of {}.", known(expected))
        }
        Error::ExceededRecursionLimit => "Brackets stand within each other too deeply. This is no press file.".into(),
        other => {
            let words = other.to_string();
            if words.ends_with('.') { words } else { format!("{words}.") }
        }
    }
}
