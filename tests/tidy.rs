//! Is the house in order? Imports run one way, files stay short, only the command line touches files,
//! and nothing lies about that does not belong.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test may stop at the first surprise")]

use std::fs;
use std::path::{Path, PathBuf};

/// The rooms of `src`, in the order in which they may build on one another: each uses only those
/// before it.
const ROOMS: [&str; 12] = [
    "tolerance",
    "geometry",
    "program",
    "cutter",
    "part",
    "input",
    "view",
    "envelope",
    "compare",
    "findings",
    "report",
    "cli",
];

/// Longest source file, lines.
const LONGEST: usize = 500;

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

/// Every file below `folder`, without what is built or belongs to version control.
fn files(folder: &Path) -> Vec<PathBuf> {
    let mut found = Vec::new();
    let mut open = vec![folder.to_path_buf()];
    while let Some(folder) = open.pop() {
        for entry in fs::read_dir(&folder).unwrap().map(Result::unwrap) {
            let path = entry.path();
            let name = entry.file_name();
            if name == ".git" || path == root().join("target") {
                continue;
            }
            if path.is_dir() {
                open.push(path);
            } else {
                found.push(path);
            }
        }
    }
    found.sort();
    assert!(!found.is_empty());
    found
}

fn sources(folder: &str) -> Vec<(PathBuf, String)> {
    let rust = files(&root().join(folder)).into_iter().filter(|p| p.extension().is_some_and(|e| e == "rs"));
    rust.map(|p| (p.strip_prefix(root()).unwrap().to_path_buf(), fs::read_to_string(&p).unwrap())).collect()
}

/// The code that is shipped: without comments, and without what follows the tests' heading.
fn shipped(path: &Path, text: &str) -> String {
    let is_test =
        path.components().any(|c| c.as_os_str().to_string_lossy().trim_end_matches(".rs") == "tests");
    let lines = text.lines().take_while(|l| !is_test && l.trim() != "#[cfg(test)]");
    lines.map(|l| l.split("//").next().unwrap_or("")).collect::<Vec<_>>().join("\n")
}

/// The room a source file belongs to; `None` for `lib.rs` and `main.rs`.
fn room(path: &Path) -> Option<usize> {
    let first = path.strip_prefix("src").ok()?.components().next()?;
    let name = first.as_os_str().to_string_lossy().trim_end_matches(".rs").to_owned();
    if name == "lib" || name == "main" {
        return None;
    }
    let position = ROOMS.iter().position(|r| *r == name);
    Some(position.unwrap_or_else(|| panic!("src/{name} is no room of the house: name it in this test")))
}

#[test]
fn every_room_builds_only_on_those_before_it() {
    let mut wrong = Vec::new();
    let mut looked_at = 0;
    for (path, text) in sources("src") {
        let Some(own) = room(&path) else { continue };
        for used in shipped(&path, &text).split("crate::").skip(1) {
            let name: String = used.chars().take_while(|c| c.is_alphanumeric() || *c == '_').collect();
            looked_at += 1;
            match ROOMS.iter().position(|r| *r == name) {
                Some(other) if other <= own => {}
                Some(_) => wrong.push(format!("{} uses {name}, which comes later", path.display())),
                None => wrong.push(format!("{} uses crate::{name}: name the room", path.display())),
            }
        }
    }
    assert!(looked_at > 50, "only {looked_at} imports seen: is the test looking at the right place?");
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn only_the_command_line_touches_files_or_prints() {
    let signs =
        ["std::fs", "File::open", "println!", "eprintln!", "print!(", "io::stdout", "io::stdin", "std::env"];
    for (path, text) in sources("src") {
        if room(&path).is_some_and(|r| ROOMS[r] == "cli") {
            continue;
        }
        let code = shipped(&path, &text);
        for sign in signs {
            assert!(!code.contains(sign), "{} uses {sign}", path.display());
        }
    }
}

#[test]
fn every_file_is_short_and_opens_with_what_it_answers() {
    for (path, text) in sources("src").into_iter().chain(sources("tests")) {
        let lines = text.lines().count();
        assert!(lines < LONGEST, "{} has {lines} lines", path.display());
        let is_test = path.ends_with("tests.rs") || path.components().any(|c| c.as_os_str() == "tests");
        assert!(is_test || text.starts_with("//! "), "{} does not say what it answers", path.display());
    }
    let main = fs::read_to_string(root().join("src/main.rs")).unwrap();
    assert!(main.lines().count() < 30);
}

#[test]
fn no_module_is_named_for_what_nobody_could_place() {
    let vague = ["utils", "util", "helpers", "helper", "misc", "common", "stuff"];
    for (path, _) in sources("src") {
        for part in path.components() {
            let name = part.as_os_str().to_string_lossy();
            assert!(!vague.contains(&name.trim_end_matches(".rs")), "{}", path.display());
        }
    }
}

#[test]
fn the_top_level_holds_only_what_belongs_there() {
    let known = [
        "Cargo.toml",
        "Cargo.lock",
        "README.md",
        "DEVELOPERS.md",
        "LICENSE-MIT",
        "LICENSE-APACHE",
        "src",
        "tests",
        "fixtures",
        "docs",
        "examples",
        "target",
    ];
    for entry in fs::read_dir(root()).unwrap().map(Result::unwrap) {
        let name = entry.file_name().to_string_lossy().into_owned();
        assert!(name.starts_with('.') || known.contains(&name.as_str()), "{name} has no place at the top");
    }
}

/// Words that say how the house came about rather than what it is. In halves, so that this list does
/// not find itself.
const STRAY: [(&str, &str); 14] = [
    ("lec", "ture"),
    ("lec", "tures"),
    ("trans", "cript"),
    ("trans", "cripts"),
    ("vid", "eo"),
    ("vid", "eos"),
    ("semi", "nar"),
    ("see", "d"),
    ("ses", "sion"),
    ("ses", "sions"),
    ("age", "nt"),
    ("age", "nts"),
    ("chat", "bot"),
    ("language", " model"),
];

/// Places that exist on one machine only, and hosts that a reader does not need.
const PLACES: [(&str, &str); 7] = [
    ("/wo", "rk/"),
    ("/tm", "p/"),
    ("/ro", "ot/"),
    ("/ho", "me/"),
    ("crates", ".io"),
    ("py", "pi.org"),
    ("proxy.go", "lang"),
];

fn has_word(text: &str, word: &str) -> bool {
    let part_of_a_word = |c: Option<char>| c.is_some_and(|c| c.is_alphanumeric() || c == '_');
    text.match_indices(word).any(|(at, _)| {
        let before = text[..at].chars().next_back();
        let after = text[at + word.len()..].chars().next();
        !part_of_a_word(before) && !part_of_a_word(after)
    })
}

#[test]
fn no_text_speaks_of_how_or_where_it_was_written() {
    let mut wrong = Vec::new();
    for path in files(root()) {
        let name = path.strip_prefix(root()).unwrap().display().to_string();
        // Lock files name their registry, the licences are not ours.
        if name.ends_with("Cargo.lock") || name.starts_with("LICENSE") {
            continue;
        }
        let Ok(text) = fs::read_to_string(&path) else { continue };
        let text = format!("{name}\n{text}").to_lowercase();
        for word in STRAY.map(|(a, b)| format!("{a}{b}")) {
            if has_word(&text, &word) {
                wrong.push(format!("{name}: {word}"));
            }
        }
        for place in PLACES.map(|(a, b)| format!("{a}{b}")) {
            if text.contains(&place) {
                wrong.push(format!("{name}: {place}"));
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn the_word_test_finds_whole_words_only() {
    assert!(has_word("one two.", "two"));
    assert!(!has_word("with_two twofold", "two"));
}
