//! Where a PDF may be written: never over something else, and never over a kept record.

use std::fs;
use std::io::{ErrorKind, Read};
use std::path::Path;

/// How every PDF file begins (ISO 32000-1, 7.5.2).
const HEADER: &[u8] = b"%PDF-";

/// Writes a PDF file whole or not at all. An older PDF of the same name is replaced.
///
/// # Errors
/// In words: something else stands there, or it cannot be written. Nothing is changed then.
pub fn write(path: &Path, pdf: &[u8]) -> Result<(), String> {
    check_place(path)?;
    plant::write_whole(path, pdf).map_err(|refusal| refusal.to_string())
}

/// A slip of the file name must not cost a press file.
fn check_place(path: &Path) -> Result<(), String> {
    let shown = path.display();
    let kind = match fs::metadata(path) {
        Ok(found) => found,
        Err(error) if error.kind() == ErrorKind::NotFound => return Ok(()),
        Err(error) => return Err(format!("{shown} cannot be looked at: {error}. Nothing was changed.")),
    };
    if !kind.is_file() {
        return Err(format!("{shown} is no ordinary file. Nothing was changed. Choose another name."));
    }
    if is_kept_record(path) {
        return Err(format!(
            "{shown} is a kept record: its seal lies beside it. A kept record is never written over. Choose another name."
        ));
    }
    let mut start = Vec::new();
    fs::File::open(path)
        .and_then(|file| file.take(HEADER.len() as u64).read_to_end(&mut start))
        .map_err(|error| format!("{shown} cannot be read: {error}. Nothing was changed."))?;
    if start.is_empty() || start == HEADER {
        return Ok(());
    }
    Err(format!("{shown} is there already and is no PDF file. Nothing was changed. Choose another name."))
}

/// Kept records are `records/<tag>/<date>-<nn>.pdf`, each with its seal of the same name beside it.
fn is_kept_record(path: &Path) -> bool {
    let absolute = std::path::absolute(path).unwrap_or_else(|_| path.into());
    let kept_in = absolute.parent().and_then(Path::parent).and_then(Path::file_name);
    kept_in.is_some_and(|name| name == "records") && absolute.with_extension("ron").is_file()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn only_a_pdf_that_is_no_kept_record_is_written_over() {
        let folder = tempfile::tempdir().unwrap();
        let place = |name: &str| folder.path().join(name);
        assert_eq!(write(&place("new.pdf"), b"%PDF-1"), Ok(()));
        assert_eq!(write(&place("new.pdf"), b"%PDF-2"), Ok(()));
        assert_eq!(fs::read(place("new.pdf")).unwrap(), b"%PDF-2");

        fs::write(place("P-01.ron"), "(version: 1)").unwrap();
        assert!(write(&place("P-01.ron"), b"%PDF-1").unwrap_err().contains("is no PDF file"));
        assert_eq!(fs::read(place("P-01.ron")).unwrap(), b"(version: 1)");

        for _ in 0..2 {
            assert_eq!(write(&place("P-01.pdf"), b"%PDF-1"), Ok(()), "a press file beside it makes no kept record");
        }

        let kept = place("records/P-01");
        fs::create_dir_all(&kept).unwrap();
        fs::write(kept.join("2026-12-01-01.pdf"), "%PDF-kept").unwrap();
        fs::write(kept.join("2026-12-01-01.ron"), "(seal)").unwrap();
        assert!(write(&kept.join("2026-12-01-01.pdf"), b"%PDF-1").unwrap_err().contains("is a kept record"));
        assert_eq!(fs::read(kept.join("2026-12-01-01.pdf")).unwrap(), b"%PDF-kept");

        assert!(write(folder.path(), b"%PDF-1").unwrap_err().contains("is no ordinary file"));
        assert!(write(&place("none/new.pdf"), b"%PDF-1").is_err());
    }
}
