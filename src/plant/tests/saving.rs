//! Saving is whole or not at all, and never over somebody else's change.

use std::collections::BTreeMap;
use std::fs;
use std::path::Path;

use calc::press::Press;
use plant::{Plant, PlantRefusal, copy_samples, create, open, save_press, save_press_over, save_settings};
use tempfile::TempDir;

fn sample_plant() -> (TempDir, Plant) {
    let folder = tempfile::tempdir().unwrap();
    copy_samples(folder.path()).unwrap();
    let plant = open(folder.path()).unwrap();
    (folder, plant)
}

fn press(plant: &Plant, tag: &str) -> Press {
    let presses = plant.presses.iter().map(|stored| stored.content.as_ref().unwrap());
    presses.into_iter().find(|press| press.tag == tag).unwrap().clone()
}

/// Every file below a folder with its bytes, and every folder.
fn everything(folder: &Path) -> BTreeMap<String, Option<Vec<u8>>> {
    let mut found = BTreeMap::new();
    let mut folders = vec![folder.to_owned()];
    while let Some(next) = folders.pop() {
        for entry in fs::read_dir(next).unwrap() {
            let path = entry.unwrap().path();
            let name = path.strip_prefix(folder).unwrap().to_string_lossy().into_owned();
            found.insert(name, path.is_file().then(|| fs::read(&path).unwrap()));
            if path.is_dir() {
                folders.push(path);
            }
        }
    }
    found
}

/// Asserts that `save` is refused in words that hold `words`, and that nothing in the folder changes.
fn refused_unchanged(folder: &Path, words: &str, save: impl FnOnce() -> Result<(), PlantRefusal>) {
    let before = everything(folder);
    let refusal = save().unwrap_err().to_string();
    assert!(refusal.contains(words), "{refusal}");
    assert!(everything(folder) == before, "after: {refusal}");
}

#[test]
fn a_changed_press_is_saved_and_nothing_else_is_touched() {
    let (folder, mut plant) = sample_plant();
    let before = everything(folder.path());
    let mut changed = press(&plant, "E-108");
    changed.location = "Hall 3".into();
    save_press(folder.path(), &changed, Some("E-108"), &mut plant.known).unwrap();
    let again = open(folder.path()).unwrap();
    assert_eq!(press(&again, "E-108"), changed);
    assert_eq!(again.known, plant.known);
    let mut after = everything(folder.path());
    after.insert("presses/E-108.ron".into(), before["presses/E-108.ron"].clone());
    assert!(after == before);
    // A second save follows on the first.
    changed.location = "Hall 4".into();
    save_press(folder.path(), &changed, Some("E-108"), &mut plant.known).unwrap();
    assert_eq!(press(&open(folder.path()).unwrap(), "E-108").location, "Hall 4");
}

#[test]
fn settings_are_saved() {
    let (folder, mut plant) = sample_plant();
    plant.settings.warning_share_percent = 60;
    plant.settings.reading_interval = None;
    save_settings(folder.path(), &plant.settings, &mut plant.known).unwrap();
    let again = open(folder.path()).unwrap();
    assert_eq!(again.settings, plant.settings);
    assert_eq!(again.known, plant.known);
}

#[test]
fn a_change_by_somebody_else_is_never_written_over() {
    let (folder, mut plant) = sample_plant();
    let changed = press(&plant, "E-108");
    let path = folder.path().join("presses/E-108.ron");
    let theirs = fs::read_to_string(&path).unwrap().replace("Hall 1", "Hall 9");
    fs::write(&path, theirs).unwrap();
    refused_unchanged(folder.path(), "has been changed by somebody else", || {
        save_press(folder.path(), &changed, Some("E-108"), &mut plant.known)
    });
    fs::write(&path, b"\xff").unwrap();
    refused_unchanged(folder.path(), "no UTF-8 text", || {
        save_press(folder.path(), &changed, Some("E-108"), &mut plant.known)
    });
    fs::remove_file(&path).unwrap();
    refused_unchanged(folder.path(), "has been removed by somebody else", || {
        save_press(folder.path(), &changed, Some("E-108"), &mut plant.known)
    });
    let settings = folder.path().join("plant.ron");
    fs::write(&settings, fs::read_to_string(&settings).unwrap().replace("Nordhang", "Sudhang")).unwrap();
    refused_unchanged(folder.path(), "has been changed by somebody else", || {
        save_settings(folder.path(), &plant.settings, &mut plant.known)
    });
}

#[test]
fn a_press_that_could_not_be_read_is_never_written_over() {
    let (folder, _) = sample_plant();
    let path = folder.path().join("presses/E-108.ron");
    let whole = open(folder.path()).unwrap();
    fs::write(&path, "(version: 1, tag: \"E-108\"").unwrap();
    let mut plant = open(folder.path()).unwrap();
    refused_unchanged(folder.path(), "already exists and was not read by this program", || {
        save_press(folder.path(), &press(&whole, "E-108"), None, &mut plant.known)
    });
}

#[test]
fn a_new_press_gets_a_file_unless_one_is_there() {
    let (folder, mut plant) = sample_plant();
    let new = Press { tag: "E-200".into(), ..press(&plant, "E-108") };
    save_press(folder.path(), &new, None, &mut plant.known).unwrap();
    assert_eq!(press(&open(folder.path()).unwrap(), "E-200"), new);
    let another = Press { tag: "E-201".into(), ..new };
    fs::write(folder.path().join("presses/E-201.ron"), "written meanwhile").unwrap();
    refused_unchanged(folder.path(), "already exists and was not read by this program", || {
        save_press(folder.path(), &another, None, &mut plant.known)
    });
}

#[test]
fn a_new_tag_moves_the_file() {
    let (folder, mut plant) = sample_plant();
    let before = everything(folder.path());
    let renamed = Press { tag: "F-1.2_b".into(), ..press(&plant, "E-108") };
    save_press(folder.path(), &renamed, Some("E-108"), &mut plant.known).unwrap();
    let again = open(folder.path()).unwrap();
    assert_eq!(press(&again, "F-1.2_b"), renamed);
    assert_eq!(again.known, plant.known);
    let after = everything(folder.path());
    assert!(!after.contains_key("presses/E-108.ron"));
    assert_eq!(after.len(), before.len());
    // And back again.
    let back = Press { tag: "E-108".into(), ..renamed };
    save_press(folder.path(), &back, Some("F-1.2_b"), &mut plant.known).unwrap();
    assert_eq!(press(&open(folder.path()).unwrap(), "E-108"), back);
    assert_eq!(everything(folder.path()).keys().collect::<Vec<_>>(), before.keys().collect::<Vec<_>>());
}

#[test]
fn a_new_tag_takes_no_other_press_away() {
    let (folder, mut plant) = sample_plant();
    // Both presses were read, so both files are known; the one is still not the other.
    let onto_another = Press { tag: "E-109".into(), ..press(&plant, "E-108") };
    refused_unchanged(folder.path(), "is the file of another press", || {
        save_press(folder.path(), &onto_another, Some("E-108"), &mut plant.known)
    });
    let renamed = Press { tag: "E-300".into(), ..press(&plant, "E-108") };
    let path = folder.path().join("presses/E-108.ron");
    fs::write(&path, fs::read_to_string(&path).unwrap() + "// seen\n").unwrap();
    refused_unchanged(folder.path(), "has been changed by somebody else", || {
        save_press(folder.path(), &renamed, Some("E-108"), &mut plant.known)
    });
}

#[test]
fn two_presses_move_up_by_one_tag_without_loss() {
    // In the order of the list the first finds the tag still taken; saved again, it finds it free.
    let (folder, mut plant) = sample_plant();
    let first = Press { tag: "E-114".into(), ..press(&plant, "E-113") };
    let second = Press { tag: "E-301".into(), ..press(&plant, "E-114") };
    assert!(save_press(folder.path(), &first, Some("E-113"), &mut plant.known).is_err());
    save_press(folder.path(), &second, Some("E-114"), &mut plant.known).unwrap();
    save_press(folder.path(), &first, Some("E-113"), &mut plant.known).unwrap();
    // Saving a press once more that has moved is an ordinary save.
    save_press(folder.path(), &first, Some("E-113"), &mut plant.known).unwrap();
    let again = open(folder.path()).unwrap();
    assert_eq!((press(&again, "E-114"), press(&again, "E-301")), (first, second));
    assert_eq!((again.presses.len(), &again.known), (plant.presses.len(), &plant.known));
}

#[test]
fn what_cannot_be_put_in_place_leaves_everything_as_it_was() {
    let (folder, mut plant) = sample_plant();
    let new = Press { tag: "E-200".into(), ..press(&plant, "E-108") };
    fs::create_dir(folder.path().join("presses/E-200.ron")).unwrap();
    let renamed_from = Some("E-108");
    for previous in [None, renamed_from] {
        refused_unchanged(folder.path(), "E-200.ron", || save_press(folder.path(), &new, previous, &mut plant.known));
    }
    // The writer itself: a folder that holds something cannot be replaced by a file.
    let target = folder.path().join("presses/E-200.ron");
    fs::write(target.join("something"), "in it").unwrap();
    refused_unchanged(folder.path(), "Nothing was changed", || plant::write_whole(&target, b"text"));
    refused_unchanged(folder.path(), "Nothing was changed", || {
        plant::write_whole(&folder.path().join("none/at/all.ron"), b"text")
    });
}

#[test]
fn what_would_not_read_back_is_not_written() {
    let (folder, mut plant) = sample_plant();
    let mut twice = press(&plant, "E-101");
    twice.safeguards[1].name = twice.safeguards[0].name.clone();
    refused_unchanged(folder.path(), "Two safeguards are called", || {
        save_press(folder.path(), &twice, Some("E-101"), &mut plant.known)
    });
    let mut endless = press(&plant, "E-101");
    endless.stop_tests[0].stops[0] = calc::units::Time::ms(20_000);
    refused_unchanged(folder.path(), "Stopping time is 20000 ms.", || {
        save_press(folder.path(), &endless, Some("E-101"), &mut plant.known)
    });
    let mut novel = press(&plant, "E-101");
    novel.description = "word ".repeat(2_000_000);
    refused_unchanged(folder.path(), "at most 8388608 are read again", || {
        save_press(folder.path(), &novel, Some("E-101"), &mut plant.known)
    });
    let mut months = plant.settings.clone();
    months.test_interval_months = 0;
    refused_unchanged(folder.path(), "It must be from 1 to 120 months", || {
        save_settings(folder.path(), &months, &mut plant.known)
    });
    for bad in ["", "../E-101", "a/b", ".x", "E 1"] {
        let astray = Press { tag: bad.into(), ..press(&plant, "E-101") };
        refused_unchanged(folder.path(), "Press tag is", || {
            save_press(folder.path(), &astray, Some("E-101"), &mut plant.known)
        });
    }
}

#[cfg(unix)]
#[test]
fn a_saved_file_keeps_its_rights() {
    use std::os::unix::fs::PermissionsExt;
    let (folder, mut plant) = sample_plant();
    let path = folder.path().join("presses/E-108.ron");
    fs::set_permissions(&path, fs::Permissions::from_mode(0o664)).unwrap();
    let mut changed = press(&plant, "E-108");
    changed.location = "Hall 3".into();
    save_press(folder.path(), &changed, Some("E-108"), &mut plant.known).unwrap();
    assert_eq!(fs::metadata(&path).unwrap().permissions().mode() & 0o777, 0o664);
}

#[test]
fn a_new_plant_needs_an_empty_folder() {
    let (_folder, plant) = sample_plant();
    let place = tempfile::tempdir().unwrap();
    let new = place.path().join("new/plant");
    let known = create(&new, &plant.settings).unwrap();
    let opened = open(&new).unwrap();
    assert_eq!((opened.settings, opened.known, opened.presses.len()), (plant.settings.clone(), known, 0));
    refused_unchanged(place.path(), "already holds a plant", || create(&new, &plant.settings).map(|_| ()));
    let used = place.path().join("used");
    fs::create_dir(&used).unwrap();
    create(&used, &plant.settings).expect("an empty folder that exists");
    let other = place.path().join("other");
    fs::create_dir(&other).unwrap();
    fs::write(other.join("letter.txt"), "text").unwrap();
    refused_unchanged(place.path(), "is not empty", || create(&other, &plant.settings).map(|_| ()));
    refused_unchanged(place.path(), "letter.txt", || create(&other.join("letter.txt"), &plant.settings).map(|_| ()));
}

#[test]
fn a_comment_at_the_head_of_a_file_stays() {
    let folder = tempfile::tempdir().unwrap();
    plant::copy_samples(folder.path()).unwrap();
    let path = folder.path().join("presses/E-101.ron");
    let head = std::fs::read_to_string(&path).unwrap().lines().next().unwrap().to_owned();
    assert!(head.starts_with("//"));
    let press = plant::edit_press_file(&path, |press| {
        press.location = "elsewhere".into();
        Ok(())
    })
    .unwrap();
    assert_eq!(press.location, "elsewhere");
    let text = std::fs::read_to_string(&path).unwrap();
    assert_eq!(text.lines().next(), Some(head.as_str()));
    assert!(text.contains("elsewhere"));
}

#[test]
fn a_comment_at_the_head_stays_where_the_old_tag_is_told_again() {
    // A save of several files that was refused for one of them is repeated for all, with the tags they were read under.
    let (folder, mut plant) = sample_plant();
    let mut renamed = Press { tag: "E-300".into(), ..press(&plant, "E-108") };
    let head = fs::read_to_string(folder.path().join("presses/E-108.ron")).unwrap().lines().next().unwrap().to_owned();
    for location in ["Hall 3", "Hall 4"] {
        renamed.location = location.into();
        save_press(folder.path(), &renamed, Some("E-108"), &mut plant.known).unwrap();
        let text = fs::read_to_string(folder.path().join("presses/E-300.ron")).unwrap();
        assert_eq!(text.lines().next(), Some(head.as_str()), "{location}");
    }
}

#[test]
fn an_edit_does_not_write_over_a_change_made_while_it_was_made() {
    let (folder, _) = sample_plant();
    let path = folder.path().join("presses/E-108.ron");
    let theirs = fs::read_to_string(&path).unwrap().replace("Hall 1", "Hall 9");
    let refusal = plant::edit_press_file(&path, |press| {
        fs::write(&path, &theirs).unwrap();
        press.location = "Hall 3".into();
        Ok(())
    });
    assert!(refusal.unwrap_err().to_string().contains("has been changed by somebody else"));
    assert_eq!(fs::read_to_string(&path).unwrap(), theirs);
    // An edit that gives the press another tag moves its file.
    plant::edit_press_file(&path, |press| {
        press.tag = "E-300".into();
        Ok(())
    })
    .unwrap();
    assert!(!path.exists() && folder.path().join("presses/E-300.ron").exists());
}

#[test]
fn who_was_told_of_a_change_can_save_over_it_and_gets_the_text_that_went() {
    let (folder, mut plant) = sample_plant();
    let path = folder.path().join("presses/E-108.ron");
    let mut mine = press(&plant, "E-108");
    mine.location = "Hall 3".into();
    let theirs = fs::read_to_string(&path).unwrap().replace("Hall 1", "Hall 9");
    fs::write(&path, &theirs).unwrap();
    assert!(save_press(folder.path(), &mine, Some("E-108"), &mut plant.known).is_err());
    let went = save_press_over(folder.path(), &mine, Some("E-108"), &mut plant.known).unwrap();
    assert_eq!(went, Some(theirs.clone()));
    let again = open(folder.path()).unwrap();
    assert_eq!((press(&again, "E-108"), &again.known), (mine.clone(), &plant.known));
    // Under a new tag the changed file goes as well, and its text comes back.
    fs::write(&path, &theirs).unwrap();
    let renamed = Press { tag: "E-300".into(), ..mine.clone() };
    assert!(save_press(folder.path(), &renamed, Some("E-108"), &mut plant.known).is_err());
    assert_eq!(save_press_over(folder.path(), &renamed, Some("E-108"), &mut plant.known).unwrap(), Some(theirs));
    assert!(!path.exists());
    // A file that has gone is made again.
    let path = folder.path().join("presses/E-300.ron");
    fs::remove_file(&path).unwrap();
    assert!(save_press(folder.path(), &renamed, Some("E-300"), &mut plant.known).is_err());
    assert_eq!(save_press_over(folder.path(), &renamed, Some("E-300"), &mut plant.known).unwrap(), None);
    let again = open(folder.path()).unwrap();
    assert_eq!((press(&again, "E-300"), &again.known), (renamed, &plant.known));
}

#[test]
fn even_asked_nothing_is_saved_over_another_press_or_an_unreadable_file() {
    let (folder, mut plant) = sample_plant();
    let mine = press(&plant, "E-108");
    let onto_another = Press { tag: "E-109".into(), ..mine.clone() };
    refused_unchanged(folder.path(), "is the file of another press", || {
        save_press_over(folder.path(), &onto_another, Some("E-108"), &mut plant.known).map(|_| ())
    });
    let theirs = Press { tag: "E-200".into(), ..mine.clone() };
    fs::write(folder.path().join("presses/E-200.ron"), plant::v1::press_to_text(&theirs)).unwrap();
    refused_unchanged(folder.path(), "already exists and was not read by this program", || {
        save_press_over(folder.path(), &theirs, None, &mut plant.known).map(|_| ())
    });
    fs::write(folder.path().join("presses/E-108.ron"), "(version: 2, tag: \"E-108\")").unwrap();
    let known = plant.known.clone();
    refused_unchanged(folder.path(), "written by a newer program", || {
        save_press_over(folder.path(), &mine, Some("E-108"), &mut plant.known).map(|_| ())
    });
    assert_eq!(plant.known, known, "what was refused is still not known");
}
