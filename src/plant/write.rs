//! Writing a file whole or not at all.

use std::fs::{self, File};
use std::io::{ErrorKind, Write};
use std::path::Path;

use tempfile::{NamedTempFile, PersistError};

use crate::read::PlantRefusal;

/// Writes `bytes` to `path` by way of a temporary file in the same folder: flushed, read back, then moved into place. On any
/// failure the old file is as it was and the temporary file is gone.
pub fn write_whole(path: &Path, bytes: &[u8]) -> Result<(), PlantRefusal> {
    write(path, bytes, |file| file.persist(path))
}

/// The same for a file that is not there yet: one that somebody else has made meanwhile is not written over.
pub fn write_new(path: &Path, bytes: &[u8]) -> Result<(), PlantRefusal> {
    write(path, bytes, |file| {
        file.persist_noclobber(path).or_else(|error| match error.error.kind() {
            ErrorKind::AlreadyExists => Err(error),
            // Some shares cannot move a file only where none is. There the caller's own look at the place has to do.
            _ => error.file.persist(path),
        })
    })
}

fn write(
    path: &Path,
    bytes: &[u8],
    put_in_place: impl FnOnce(NamedTempFile) -> Result<File, PersistError>,
) -> Result<(), PlantRefusal> {
    let refuse = |what: &str, error: std::io::Error| {
        PlantRefusal::Folder(format!("{what}: {error}. Nothing was changed ({}).", path.display()))
    };
    let folder = path.parent().filter(|folder| !folder.as_os_str().is_empty()).unwrap_or(Path::new("."));
    let mut file = tempfile::Builder::new()
        .prefix(".slidehalt-")
        .tempfile_in(folder)
        .map_err(|error| refuse("The file cannot be written into its folder", error))?;
    file.write_all(bytes)
        .and_then(|()| file.as_file().sync_all())
        .map_err(|error| refuse("The file cannot be written", error))?;
    let back = fs::read(file.path()).map_err(|error| refuse("What was written cannot be read back", error))?;
    if back != bytes {
        return Err(PlantRefusal::Folder(format!(
            "What was written does not read back the same. Nothing was changed ({}).",
            path.display()
        )));
    }
    #[cfg(unix)]
    {
        use std::os::unix::fs::PermissionsExt;
        // Temporary files are made for their owner alone; a plant folder is shared.
        let mode = fs::metadata(path).map_or(0o644, |old| old.permissions().mode());
        file.as_file()
            .set_permissions(fs::Permissions::from_mode(mode))
            .map_err(|error| refuse("The file cannot be given its rights", error))?;
    }
    put_in_place(file).map_err(|error| refuse("The file cannot be moved into place", error.error))?;
    // The move itself must survive a power cut; a folder that cannot be opened for that is no reason to fail the save.
    if let Ok(folder) = File::open(folder) {
        let _ = folder.sync_all();
    }
    Ok(())
}
