//! The shape of the house: which crate may use which, what stands at the top, and what calc must not touch.

use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::path::{Path, PathBuf};

/// Every crate by name, its folder, and the crates of ours that it may use. This is the only list of the arrows.
const ARROWS: [(&str, &str, &[&str]); 7] = [
    ("calc", "src/calc", &[]),
    ("plant", "src/plant", &["calc"]),
    ("figure", "src/figure", &["calc"]),
    ("record", "src/record", &["calc", "figure"]),
    ("painter", "src/painter", &[]),
    ("desktop", "src/desktop", &["calc", "plant", "figure", "record", "painter"]),
    ("tests", "tests", &["calc", "plant", "figure", "record"]),
];

/// What may stand at the top, beside hidden names. Not all of it need be there.
const TOP: [&str; 10] = [
    "Cargo.toml",
    "Cargo.lock",
    "README.md",
    "DEVELOPERS.md",
    "SAFETY.md",
    "src",
    "assets",
    "tests",
    "sample-presses",
    "target",
];

/// Modules of the standard library, and calls, that calc's sources must not name: the same input gives the same result in ten
/// years on any machine.
const STD_MODULES: [&str; 7] = ["fs", "time", "thread", "env", "process", "net", "io"];
const WORDS: [&str; 6] = ["HashMap", "HashSet", "SystemTime", "Instant", "::now(", "println!"];

fn top() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR")).parent().expect("the folder of the tests lies in the repository")
}

fn read(path: &Path) -> String {
    fs::read_to_string(path).unwrap_or_else(|why| panic!("{}: {why}", path.display()))
}

/// A Cargo.toml as sections of lines, without comments; arrays over several lines are joined.
fn sections(text: &str) -> BTreeMap<String, Vec<String>> {
    let mut sections: BTreeMap<String, Vec<String>> = BTreeMap::new();
    let mut name = String::new();
    let mut open = String::new();
    for line in text.lines().map(|line| line.split('#').next().unwrap_or("").trim()).filter(|line| !line.is_empty()) {
        if open.is_empty() && line.starts_with('[') && line.ends_with(']') {
            name = line.trim_matches(['[', ']']).to_owned();
            sections.entry(name.clone()).or_default();
            continue;
        }
        open.push_str(line);
        if open.matches('[').count() == open.matches(']').count() {
            sections.entry(name.clone()).or_default().push(std::mem::take(&mut open));
        }
    }
    sections
}

fn manifest(folder: &str) -> BTreeMap<String, Vec<String>> {
    sections(&read(&top().join(folder).join("Cargo.toml")))
}

/// The names before the equals sign, in `[dependencies]`, `[dev-dependencies]`, `[target.'…'.dependencies]` and
/// `[dependencies.name]` alike.
fn dependencies(manifest: &BTreeMap<String, Vec<String>>, kinds: &[&str]) -> BTreeSet<String> {
    let mut names = BTreeSet::new();
    for (section, lines) in manifest {
        for kind in kinds {
            if section == kind || section.ends_with(&format!(".{kind}")) {
                let name =
                    |line: &String| line.split(['=', '.']).next().unwrap_or("").trim().trim_matches('"').to_owned();
                names.extend(lines.iter().map(name));
            }
            if let Some(name) = section.split_once(&format!("{kind}.")).map(|(_, name)| name) {
                names.insert(name.to_owned());
            }
        }
    }
    names
}

const ALL_KINDS: [&str; 3] = ["dependencies", "dev-dependencies", "build-dependencies"];

fn has(manifest: &BTreeMap<String, Vec<String>>, section: &str, line: &str) -> bool {
    let squeezed = |text: &str| text.replace(' ', "");
    manifest.get(section).is_some_and(|lines| lines.iter().any(|found| squeezed(found) == squeezed(line)))
}

#[test]
fn crates_depend_only_downwards() {
    let ours: BTreeSet<&str> = ARROWS.iter().map(|(name, ..)| *name).collect();
    for (name, folder, allowed) in ARROWS {
        let manifest = manifest(folder);
        assert!(has(&manifest, "package", &format!("name = \"{name}\"")), "{folder} is not the crate {name}");
        for dependency in dependencies(&manifest, &ALL_KINDS) {
            let is_allowed = !ours.contains(dependency.as_str()) || allowed.contains(&dependency.as_str());
            assert!(is_allowed, "{name} must not use {dependency}");
            assert!(!manifest.values().flatten().any(|line| line.contains("package =")), "{name} renames a dependency");
        }
    }
}

#[test]
fn the_painter_knows_egui_alone() {
    let found = dependencies(&manifest("src/painter"), &["dependencies", "build-dependencies"]);
    assert_eq!(found, BTreeSet::from(["egui".to_owned()]));
}

#[test]
fn members_are_listed_by_name_and_none_is_left_out() {
    let root = manifest(".");
    let members = root["workspace"].iter().find(|line| line.starts_with("members")).expect("a list of members");
    assert!(!members.contains('*'), "members are listed by name, because a glob breaks on a stray folder: {members}");
    let listed: BTreeSet<&str> = members.split('"').skip(1).step_by(2).collect();
    assert_eq!(listed, ARROWS.iter().map(|(_, folder, _)| *folder).collect());
    for entry in fs::read_dir(top().join("src")).unwrap() {
        let name = entry.unwrap().file_name().into_string().unwrap();
        let folder = format!("src/{name}");
        assert!(listed.contains(folder.as_str()), "{folder} is no member");
    }
}

#[test]
fn the_top_level_holds_only_what_it_should() {
    for entry in fs::read_dir(top()).unwrap() {
        let name = entry.unwrap().file_name().into_string().unwrap();
        assert!(name.starts_with('.') || TOP.contains(&name.as_str()), "{name} does not belong at the top");
    }
}

#[test]
fn every_crate_forbids_unsafe_code() {
    assert!(has(&manifest("."), "workspace.lints.rust", "unsafe_code = \"forbid\""));
    for (name, folder, _) in ARROWS {
        let manifest = manifest(folder);
        assert!(has(&manifest, "lints", "workspace = true"), "{name} does not take the lints of the workspace");
    }
}

fn sources(folder: &Path, found: &mut Vec<PathBuf>) {
    for entry in fs::read_dir(folder).unwrap_or_else(|why| panic!("{}: {why}", folder.display())) {
        let path = entry.unwrap().path();
        if path.is_dir() {
            sources(&path, found);
        } else if path.extension().is_some_and(|extension| extension == "rs") {
            found.push(path);
        }
    }
}

/// Whether code names a module of the standard library, by itself or within braces.
fn names_module(code: &str, module: &str) -> bool {
    let is_end = |rest: &str| !rest.starts_with(|next: char| next.is_alphanumeric() || next == '_');
    let by_path = ["std::", "core::"].iter().any(|root| {
        let path = format!("{root}{module}");
        code.match_indices(&path).any(|(at, _)| is_end(&code[at + path.len()..]))
    });
    let in_braces = code.match_indices("std::{").any(|(at, _)| {
        let group = code[at..].split(';').next().unwrap_or("");
        group.split(|next: char| !next.is_alphanumeric() && next != '_').any(|word| word == module)
    });
    by_path || in_braces
}

#[test]
fn calc_touches_no_file_clock_thread_or_environment() {
    let calc = top().join("src/calc");
    let mut files = Vec::new();
    sources(&calc, &mut files);
    files.retain(|file| !file.starts_with(calc.join("tests")) && !file.starts_with(calc.join("benches")));
    assert!(files.len() > 20, "only {} sources found", files.len());
    for file in files {
        let text = read(&file);
        let code: String =
            text.lines().map(|line| line.split("//").next().unwrap_or("")).collect::<Vec<_>>().join("\n");
        for module in STD_MODULES {
            assert!(!names_module(&code, module), "{} names std::{module}", file.display());
        }
        for word in WORDS {
            assert!(!code.contains(word), "{} names {word}", file.display());
        }
    }
}

#[test]
fn a_module_is_found_by_path_and_in_braces_and_a_longer_name_is_not() {
    assert!(names_module("use std::fs;", "fs") && names_module("std::time::Instant", "time"));
    assert!(names_module("use std::{fmt, fs::File};", "fs") && names_module("core::time::Duration", "time"));
    assert!(!names_module("use std::fmt; let fs = 1;", "fs") && !names_module("std::iter::once", "io"));
    assert!(!names_module("std::environment", "env"));
}

/// Paths named in DEVELOPERS.md: words that begin with a folder of the top level, up to the first placeholder.
fn paths_in(text: &str) -> Vec<&str> {
    text.split(|end: char| end.is_whitespace() || "`()[],;|\"".contains(end))
        .filter(|word| ["src/", "tests/", "assets/", "sample-presses/"].iter().any(|root| word.starts_with(root)))
        .map(|word| word.split("::").next().unwrap_or(word))
        .map(|word| match word.find(['*', '<', '{', '…']) {
            Some(at) => word[..at].rsplit_once('/').map_or("", |(folder, _)| folder),
            None => word.trim_end_matches(['.', ':', '\'', '/']),
        })
        .collect()
}

#[test]
fn every_path_named_for_developers_exists() {
    let path = top().join("DEVELOPERS.md");
    // Before the file is written there is nothing that could be out of date.
    let Ok(text) = fs::read_to_string(&path) else {
        assert!(!path.exists(), "DEVELOPERS.md cannot be read");
        return;
    };
    let named = paths_in(&text);
    assert!(!named.is_empty(), "DEVELOPERS.md names no path");
    for named in named {
        assert!(top().join(named).exists(), "DEVELOPERS.md names {named}, which does not exist");
    }
}

#[test]
fn paths_are_found_in_running_text() {
    let text =
        "See `src/calc/units.rs`, `tests/a.rs::name`, src/plant/. Files: src/calc/rules/*.rs | presses/<tag>.ron";
    assert_eq!(paths_in(text), ["src/calc/units.rs", "tests/a.rs", "src/plant", "src/calc/rules"]);
}
