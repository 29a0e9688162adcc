//! Kept records: numbered by day, never written over, and known to be intact, altered or incomplete.

use std::fs;
use std::path::{Path, PathBuf};

use calc::press::Press;
use jiff::civil::{Date, date};
use plant::{SAMPLES, SealState, keep_record, kept_records, v1};

const DAY: Date = date(2026, 12, 1);

fn press() -> Press {
    let (name, text) = SAMPLES.iter().find(|(name, _)| name.ends_with("E-110.ron")).unwrap();
    v1::press_from_text(Path::new(name), text).unwrap()
}

fn names(folder: &Path) -> Vec<String> {
    kept_records(folder, "E-110").into_iter().map(|record| record.name).collect()
}

fn only_state(folder: &Path) -> SealState {
    let records = kept_records(folder, "E-110");
    assert_eq!(records.len(), 1);
    records[0].state
}

fn files(folder: &Path) -> Vec<PathBuf> {
    let mut files: Vec<PathBuf> = fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path()).collect();
    files.sort();
    files
}

#[test]
fn records_are_numbered_by_day_and_listed_newest_first() {
    let folder = tempfile::tempdir().unwrap();
    for (on, pdf) in [(DAY, "one"), (DAY, "two"), (date(2026, 11, 30), "three"), (date(2027, 1, 2), "four")] {
        let path = keep_record(folder.path(), &press(), on, pdf.as_bytes()).unwrap();
        assert_eq!(fs::read(path).unwrap(), pdf.as_bytes());
    }
    assert_eq!(names(folder.path()), ["2027-01-02-01", "2026-12-01-02", "2026-12-01-01", "2026-11-30-01"]);
    assert!(kept_records(folder.path(), "E-110").iter().all(|record| record.state == SealState::Intact));
    assert!(kept_records(folder.path(), "E-111").is_empty());
}

#[test]
fn a_record_is_never_written_over() {
    let folder = tempfile::tempdir().unwrap();
    let first = keep_record(folder.path(), &press(), DAY, b"first").unwrap();
    let records = first.parent().unwrap();
    // A print without seal and a seal without print take their numbers too.
    fs::write(records.join("2026-12-01-02.pdf"), "a print by hand").unwrap();
    fs::write(records.join("2026-12-01-03.ron"), "a seal alone").unwrap();
    let next = keep_record(folder.path(), &press(), DAY, b"next").unwrap();
    assert_eq!(next.file_name().unwrap(), "2026-12-01-04.pdf");
    assert_eq!(fs::read(&first).unwrap(), b"first");
    assert_eq!(fs::read(records.join("2026-12-01-02.pdf")).unwrap(), b"a print by hand");
    assert_eq!(fs::read(records.join("2026-12-01-03.ron")).unwrap(), b"a seal alone");
}

#[test]
fn records_kept_at_once_all_get_a_number_of_their_own() {
    let folder = tempfile::tempdir().unwrap();
    std::thread::scope(|scope| {
        for writer in 0..8 {
            let folder = folder.path();
            scope.spawn(move || keep_record(folder, &press(), DAY, format!("by {writer}").as_bytes()).unwrap());
        }
    });
    let records = kept_records(folder.path(), "E-110");
    assert_eq!(records.len(), 8);
    assert!(records.iter().all(|record| record.state == SealState::Intact));
    let mut prints: Vec<Vec<u8>> = records.iter().map(|record| fs::read(&record.pdf).unwrap()).collect();
    prints.sort();
    assert_eq!(prints, (0..8).map(|writer| format!("by {writer}").into_bytes()).collect::<Vec<_>>());
}

#[test]
fn the_hundredth_record_of_a_day_is_the_newest() {
    let folder = tempfile::tempdir().unwrap();
    for number in 0..101_u32 {
        keep_record(folder.path(), &press(), DAY, &number.to_le_bytes()).unwrap();
    }
    assert_eq!(names(folder.path())[..3], ["2026-12-01-101", "2026-12-01-100", "2026-12-01-99"]);
}

#[test]
fn a_changed_print_is_altered() {
    let folder = tempfile::tempdir().unwrap();
    let pdf = keep_record(folder.path(), &press(), DAY, b"%PDF as printed").unwrap();
    assert_eq!(only_state(folder.path()), SealState::Intact);
    fs::write(&pdf, b"%PDF as Printed").unwrap();
    assert_eq!(only_state(folder.path()), SealState::Altered);
    fs::write(&pdf, b"%PDF as printed").unwrap();
    assert_eq!(only_state(folder.path()), SealState::Intact);
}

#[test]
fn a_changed_copy_of_the_press_is_altered() {
    let folder = tempfile::tempdir().unwrap();
    let seal = keep_record(folder.path(), &press(), DAY, b"%PDF").unwrap().with_extension("ron");
    let text = fs::read_to_string(&seal).unwrap();
    assert!(text.contains("force_kn: 2000"), "the copy of the press is legible");
    fs::write(&seal, text.replace("force_kn: 2000", "force_kn: 2500")).unwrap();
    assert_eq!(only_state(folder.path()), SealState::Altered);
}

#[test]
fn a_missing_or_unreadable_part_is_incomplete() {
    for spoil in [
        (|pdf: &Path| fs::remove_file(pdf).unwrap()) as fn(&Path),
        |pdf| fs::remove_file(pdf.with_extension("ron")).unwrap(),
        |pdf| fs::write(pdf.with_extension("ron"), "(version: 1").unwrap(),
        |pdf| fs::write(pdf.with_extension("ron"), b"\xff").unwrap(),
        |pdf| {
            let seal = pdf.with_extension("ron");
            let text = fs::read_to_string(&seal).unwrap().replacen("version: 1", "version: 2", 1);
            fs::write(seal, text).unwrap();
        },
    ] {
        let folder = tempfile::tempdir().unwrap();
        spoil(&keep_record(folder.path(), &press(), DAY, b"%PDF").unwrap());
        assert_eq!(only_state(folder.path()), SealState::Incomplete);
    }
}

#[test]
fn a_press_text_with_any_letters_is_sealed_intact() {
    let folder = tempfile::tempdir().unwrap();
    let mut press = press();
    press.description = "\"# \"## \\ 1,5 \r\n // Ä \u{feff}".into();
    keep_record(folder.path(), &press, DAY, b"%PDF").unwrap();
    assert_eq!(only_state(folder.path()), SealState::Intact);
}

#[test]
fn what_cannot_be_kept_leaves_nothing_behind() {
    let folder = tempfile::tempdir().unwrap();
    // A file stands where the folder of the records would be.
    fs::create_dir(folder.path().join("records")).unwrap();
    fs::write(folder.path().join("records/E-110"), "in the way").unwrap();
    assert!(keep_record(folder.path(), &press(), DAY, b"%PDF").is_err());
    assert_eq!(files(&folder.path().join("records")), [folder.path().join("records/E-110")]);
    assert_eq!(fs::read(folder.path().join("records/E-110")).unwrap(), b"in the way");
    let astray = Press { tag: "../E-110".into(), ..press() };
    assert!(keep_record(folder.path(), &astray, DAY, b"%PDF").is_err());
    assert_eq!(files(folder.path()), [folder.path().join("records")]);
}
