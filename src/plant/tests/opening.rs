//! Opening a plant folder: what is no plant is refused, and one bad file keeps nobody from the others.

use std::fs::{self, File};
use std::path::{Path, PathBuf};

use plant::{FileRefusal, Plant, PlantRefusal, StoredPress, copy_samples, open, open_press_file};
use tempfile::TempDir;

/// A copy of the sample plant.
fn plant_folder() -> TempDir {
    let folder = tempfile::tempdir().unwrap();
    copy_samples(folder.path()).unwrap();
    folder
}

fn press_file(folder: &TempDir, tag: &str) -> PathBuf {
    folder.path().join(format!("presses/{tag}.ron"))
}

/// How many presses the sample plant has.
fn sample_count() -> usize {
    plant::SAMPLES.iter().filter(|(name, _)| name.starts_with("presses/")).count()
}

fn stored<'a>(plant: &'a Plant, name: &str) -> &'a StoredPress {
    plant.presses.iter().find(|stored| stored.path.file_name().is_some_and(|file| file == name)).expect(name)
}

/// Puts `bytes` in place of one press file and asserts that this file alone is refused and stays as it is.
fn refused_alone(bytes: &[u8]) -> FileRefusal {
    let folder = plant_folder();
    let path = press_file(&folder, "E-109");
    fs::write(&path, bytes).unwrap();
    let plant = open(folder.path()).unwrap();
    assert_eq!(plant.presses.len(), sample_count());
    assert_eq!(plant.presses.iter().filter(|stored| stored.content.is_ok()).count(), sample_count() - 1);
    assert_eq!(fs::read(&path).unwrap(), bytes, "the file is left byte for byte as it was");
    let refusal = stored(&plant, "E-109.ron").content.clone().unwrap_err();
    assert_eq!(refusal.path, path);
    refusal
}

fn text_of(tag: &str) -> String {
    fs::read_to_string(press_file(&plant_folder(), tag)).unwrap()
}

#[test]
fn the_presses_come_by_name() {
    let folder = plant_folder();
    let plant = open(folder.path()).unwrap();
    let tags: Vec<String> = plant.presses.iter().map(|stored| stored.content.clone().unwrap().tag).collect();
    assert_eq!(tags, (101..101 + sample_count()).map(|number| format!("E-{number}")).collect::<Vec<_>>());
    assert_eq!(plant.folder, folder.path());
}

#[test]
fn a_byte_order_mark_and_windows_line_ends_change_nothing() {
    let folder = plant_folder();
    let as_it_was = open(folder.path()).unwrap();
    for path in [folder.path().join("plant.ron"), press_file(&folder, "E-109")] {
        let text = fs::read_to_string(&path).unwrap().replace('\n', "\r\n");
        fs::write(&path, format!("\u{feff}{text}")).unwrap();
    }
    let plant = open(folder.path()).unwrap();
    assert_eq!(plant.settings, as_it_was.settings);
    assert_eq!(stored(&plant, "E-109.ron").content, stored(&as_it_was, "E-109.ron").content);
}

#[test]
fn unreadable_text_is_listed_and_left_untouched() {
    for (bytes, words) in [
        (&b""[..], "An opening bracket ( is needed here"),
        (b"\xff\xfe(\0", "no UTF-8 text"),
        (b"(version: 1, tag: \"E-109\xe4\")", "no UTF-8 text"),
        (b"\x00\x01\x02", ""),
        (b"\xef\xbb\xbf", "An opening bracket ( is needed here"),
        (b"(version: 9)", "The file has version 9"),
    ] {
        let refusal = refused_alone(bytes);
        assert!(refusal.why.contains(words), "{refusal}");
    }
}

#[test]
fn a_file_cut_within_a_letter_is_no_utf_8() {
    let text = text_of("E-109").replace("clip line", "clip line, Süd");
    let cut = text.find('ü').unwrap() + 1;
    assert!(refused_alone(&text.as_bytes()[..cut]).why.contains("no UTF-8 text"));
}

#[test]
fn a_file_that_bears_another_name_than_its_press() {
    let refusal = refused_alone(text_of("E-110").as_bytes());
    assert_eq!(refusal.field.as_deref(), Some("tag"));
    assert_eq!(refusal.why, "The file holds the press \"E-110\"; a press file bears the tag of its press.");
}

#[test]
fn an_enormous_file_is_refused_unread() {
    let folder = plant_folder();
    let path = press_file(&folder, "E-109");
    // Sparse: the length is there, the blocks are not.
    File::options().write(true).open(&path).unwrap().set_len(200_000_000).unwrap();
    let plant = open(folder.path()).unwrap();
    let refusal = stored(&plant, "E-109.ron").content.clone().unwrap_err();
    assert!(refusal.why.starts_with("The file is 200000000 bytes long; at most 8388608 are read."), "{refusal}");
    assert_eq!(fs::metadata(&path).unwrap().len(), 200_000_000);
    assert_eq!(plant.presses.iter().filter(|stored| stored.content.is_ok()).count(), sample_count() - 1);
}

#[test]
fn a_folder_in_place_of_a_press_file() {
    let folder = plant_folder();
    fs::remove_file(press_file(&folder, "E-109")).unwrap();
    fs::create_dir(press_file(&folder, "E-109")).unwrap();
    let plant = open(folder.path()).unwrap();
    let refusal = stored(&plant, "E-109.ron").content.clone().unwrap_err();
    assert!(refusal.why.starts_with("This is no file."), "{refusal}");
    assert_eq!(plant.presses.iter().filter(|stored| stored.content.is_ok()).count(), sample_count() - 1);
}

#[cfg(unix)]
#[test]
fn a_named_pipe_does_not_hold_the_program_up() {
    let folder = plant_folder();
    let path = press_file(&folder, "pipe");
    let made = std::process::Command::new("mkfifo").arg(&path).status().expect("mkfifo is part of every unix");
    assert!(made.success());
    let plant = open(folder.path()).unwrap();
    assert!(stored(&plant, "pipe.ron").content.clone().unwrap_err().why.starts_with("This is no file."));
}

#[cfg(unix)]
#[test]
fn a_link_to_nowhere_is_listed() {
    let folder = plant_folder();
    std::os::unix::fs::symlink("/nowhere/at/all", press_file(&folder, "lost")).unwrap();
    let plant = open(folder.path()).unwrap();
    assert!(stored(&plant, "lost.ron").content.clone().unwrap_err().why.starts_with("The file cannot be opened"));
}

#[test]
fn other_files_beside_the_presses_are_passed_over() {
    let folder = plant_folder();
    for name in ["notes.txt", ".slidehalt-x.ron", "E-101.ron~", "E-101.RON.bak", "ron"] {
        fs::write(folder.path().join("presses").join(name), "anything").unwrap();
    }
    assert_eq!(open(folder.path()).unwrap().presses.len(), sample_count());
}

#[test]
fn what_is_no_plant_folder() {
    let place = tempfile::tempdir().unwrap();
    let refused = |path: &Path| match open(path) {
        Err(PlantRefusal::Folder(why)) => why,
        other => panic!("{other:?}"),
    };
    assert!(refused(&place.path().join("none")).contains("cannot be opened"));
    assert!(refused(place.path()).contains("is no plant folder: it holds no plant.ron."));
    let file = place.path().join("file");
    fs::write(&file, "text").unwrap();
    assert!(refused(&file).contains("is a file. Give the plant folder, the one that holds plant.ron."));
    fs::create_dir(place.path().join("presses")).unwrap();
    assert!(refused(place.path()).contains("it holds no plant.ron."), "presses alone make no plant");
}

#[test]
fn a_plant_file_that_cannot_be_read_is_refused_with_its_place() {
    let folder = plant_folder();
    let path = folder.path().join("plant.ron");
    let text = fs::read_to_string(&path).unwrap();
    for (old, new, field) in [
        ("warning_share_percent: 50", "warning_share_percent: 101", "warning_share_percent"),
        ("test_interval_months: 12", "test_interval_months: 0", "test_interval_months"),
        ("rules: \"iso-13855-2010\"", "rules: \"iso-13855-1998\"", "rules"),
        ("months(1)", "months(121)", "reading_interval.months"),
        ("name:", "title:", "title"),
    ] {
        let spoilt = text.replace(old, new);
        let line = text[..text.find(old).unwrap()].matches('\n').count() + 1;
        fs::write(&path, &spoilt).unwrap();
        let Err(PlantRefusal::File(refusal)) = open(folder.path()) else { panic!("{new}") };
        assert_eq!(
            (refusal.field.as_deref(), refusal.place.map(|place| place.0)),
            (Some(field), Some(line)),
            "{refusal}"
        );
        assert_eq!(fs::read_to_string(&path).unwrap(), spoilt);
    }
    fs::remove_file(&path).unwrap();
    fs::create_dir(&path).unwrap();
    assert!(matches!(open(folder.path()), Err(PlantRefusal::File(_))));
}

#[test]
fn a_plant_without_a_press_opens_empty() {
    let folder = plant_folder();
    fs::remove_dir_all(folder.path().join("presses")).unwrap();
    assert!(open(folder.path()).unwrap().presses.is_empty());
    fs::write(folder.path().join("presses"), "in the way").unwrap();
    assert!(matches!(open(folder.path()), Err(PlantRefusal::Folder(_))), "a file in place of the folder of presses");
}

#[test]
fn one_press_opens_with_its_plant() {
    let folder = plant_folder();
    let (settings, press) = open_press_file(&press_file(&folder, "E-109")).unwrap();
    assert_eq!((settings.name.as_str(), press.tag.as_str()), ("Nordhang Works (invented)", "E-109"));
    assert!(matches!(open_press_file(&press_file(&folder, "E-999")), Err(PlantRefusal::File(_))));
    let alone = tempfile::tempdir().unwrap();
    let path = alone.path().join("E-109.ron");
    fs::copy(press_file(&folder, "E-109"), &path).unwrap();
    let Err(PlantRefusal::Folder(why)) = open_press_file(&path) else { panic!("a press without a plant") };
    assert!(why.contains("belongs to no plant"), "{why}");
}

#[cfg(unix)]
#[test]
fn what_cannot_be_looked_at_is_not_taken_for_absent() {
    use std::os::unix::fs::symlink;
    // A share that is away: the folder of presses is a link whose other end is not there. That is no empty plant.
    let folder = plant_folder();
    let presses = folder.path().join("presses");
    fs::remove_dir_all(&presses).unwrap();
    symlink(folder.path().join("share/presses"), &presses).unwrap();
    let Err(PlantRefusal::Folder(why)) = open(folder.path()) else { panic!("a plant without its presses") };
    assert!(why.contains("presses cannot be read"), "{why}");
    // Settings that are there and cannot be opened; rights would not hold back an administrator, a link in a ring does.
    let settings = folder.path().join("plant.ron");
    fs::remove_file(&settings).unwrap();
    symlink(&settings, &settings).unwrap();
    let Err(PlantRefusal::File(refusal)) = open(folder.path()) else { panic!("settings that cannot be opened") };
    assert!(refusal.why.starts_with("The file cannot be opened"), "{refusal}");
}

/// Rights bind nobody who runs this as root; then the folder opens, and the links above have shown the refusal.
#[cfg(unix)]
#[test]
fn a_folder_without_rights_is_refused_in_words() {
    use std::os::unix::fs::PermissionsExt;
    let folder = plant_folder();
    let presses = folder.path().join("presses");
    let rights = |mode| fs::set_permissions(&presses, fs::Permissions::from_mode(mode)).unwrap();
    rights(0o000);
    let binds = fs::read_dir(&presses).is_err();
    let opened = open(folder.path());
    rights(0o755);
    match opened {
        Err(PlantRefusal::Folder(why)) if binds => assert!(why.contains("presses cannot be read"), "{why}"),
        Ok(plant) if !binds => assert_eq!(plant.presses.len(), sample_count()),
        other => panic!("{other:?}"),
    }
}
