//! Is what the documents show what the program does? Every `console` block is run and compared, every
//! picture drawn again, every link followed, every JSON field looked up.
//!
//! A block holds commands (`$ ...`) with their output; they run in the root of the repository. Output
//! that ends in `[...]` is shown up to there only. `UPDATE_DOCS=1 cargo test --test guide` writes what
//! the program says now into blocks and pictures; read the difference before you commit it.

#![cfg(unix)]
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test may stop at the first surprise")]

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

/// Documents whose blocks are run.
const RUN: [&str; 2] = ["README.md", "docs/guide.md"];

/// Documents whose links are followed.
const LINKED: [&str; 6] =
    ["README.md", "DEVELOPERS.md", "docs/guide.md", "docs/method.md", "docs/report.md", "docs/changes.md"];

/// Jobs whose pictures are kept.
const PICTURES: [&str; 6] = ["good", "untrimmed", "wrong_cutter", "missed_wall", "pocket", "two_tools"];

/// Closes output that is shown in part.
const CUT: &str = "[...]";

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

fn read(name: &str) -> String {
    fs::read_to_string(root().join(name)).unwrap_or_else(|e| panic!("{name}: {e}"))
}

fn updating() -> bool {
    std::env::var_os("UPDATE_DOCS").is_some_and(|v| v == "1")
}

/// What a shell in the root of the repository answers, both streams, with the program in its path; and
/// its status.
fn ran(command: &str) -> (String, i32) {
    let program = Path::new(env!("CARGO_BIN_EXE_sweptedge"));
    let mut path = vec![program.parent().unwrap().to_path_buf()];
    path.extend(std::env::split_paths(&std::env::var_os("PATH").unwrap_or_default()));
    // The program as built for this test stands for the one a reader builds.
    let command = command.replace("cargo run --release -- ", "sweptedge ");
    let output = Command::new("sh")
        .args(["-c", &format!("exec 2>&1; {command}")])
        .current_dir(root())
        .env("PATH", std::env::join_paths(path).unwrap())
        .env_remove("COLUMNS")
        .env("NO_COLOR", "1")
        .stdin(Stdio::null())
        .output()
        .unwrap();
    (String::from_utf8(output.stdout).unwrap(), output.status.code().unwrap())
}

fn said(command: &str) -> String {
    ran(command).0
}

/// The answer, cut where the shown one is.
fn shown_as(answer: &str, shown: &str) -> String {
    if !shown.ends_with(&format!("{CUT}\n")) {
        return answer.to_owned();
    }
    let kept = shown.lines().count() - 1;
    let mut text: String = answer.lines().take(kept).map(|l| format!("{l}\n")).collect();
    if answer.lines().count() > kept {
        text.push_str(&format!("{CUT}\n"));
    }
    text
}

/// The block with what its commands answer now. A command goes on over lines that start with `> `, as
/// a shell shows it; `echo $?` tells the status of the one before.
fn run_block(block: &str) -> String {
    let (mut out, mut status) = (String::new(), 0);
    let mut lines = block.lines().peekable();
    while let Some(first) = lines.next() {
        let command = first.strip_prefix("$ ").unwrap_or_else(|| panic!("no command: {first}"));
        let mut whole = command.to_owned();
        out.push_str(&format!("{first}\n"));
        while let Some(line) = lines.next_if(|l| l.starts_with("> ")) {
            whole = format!("{whole}\n{}", &line[2..]);
            out.push_str(&format!("{line}\n"));
        }
        let mut shown = String::new();
        while let Some(line) = lines.next_if(|l| !l.starts_with("$ ")) {
            shown.push_str(&format!("{line}\n"));
        }
        if whole == "echo $?" {
            out.push_str(&format!("{status}\n"));
            continue;
        }
        let answer;
        (answer, status) = ran(&whole);
        out.push_str(&shown_as(&answer, &shown));
    }
    out
}

/// The document with every `console` block run again, and how many there were.
fn run_document(text: &str) -> (String, usize) {
    let (mut out, mut count) = (String::new(), 0);
    let mut rest = text;
    while let Some((before, after)) = rest.split_once("```console\n") {
        let (block, behind) = after.split_once("```\n").unwrap();
        out.push_str(&format!("{before}```console\n{}```\n", run_block(block)));
        rest = behind;
        count += 1;
    }
    out.push_str(rest);
    (out, count)
}

/// The first line that differs, both ways.
fn first_difference(old: &str, new: &str) -> String {
    let at = old.lines().zip(new.lines()).take_while(|(a, b)| a == b).count();
    let line = |t: &str| t.lines().nth(at).unwrap_or("(end)").to_owned();
    format!("line {}\n  shown: {}\n  now:   {}", at + 1, line(old), line(new))
}

#[test]
fn the_documents_show_what_the_program_says() {
    for name in RUN {
        let old = read(name);
        let (new, blocks) = run_document(&old);
        assert!(blocks > 0, "{name} shows nothing");
        if updating() {
            fs::write(root().join(name), &new).unwrap();
        } else {
            assert!(
                old == new,
                "{name}, {}\nUPDATE_DOCS=1 brings it up to date",
                first_difference(&old, &new)
            );
        }
    }
}

#[test]
fn the_pictures_are_those_the_program_draws() {
    let folder = tempfile::tempdir().unwrap();
    for name in PICTURES {
        let drawn = folder.path().join(format!("{name}.svg"));
        let job = format!("examples/{name}.toml");
        let answer = said(&format!("sweptedge check {job} -q --svg {}", drawn.display()));
        assert_eq!(answer, "", "{job}");
        let new = fs::read(&drawn).unwrap();
        let kept = root().join("docs/pictures").join(format!("{name}.svg"));
        if updating() {
            fs::write(&kept, &new).unwrap();
        } else {
            let old = fs::read(&kept).unwrap_or_default();
            assert!(old == new, "{} is out of date: UPDATE_DOCS=1 draws it again", kept.display());
        }
    }
    let kept = fs::read_dir(root().join("docs/pictures")).unwrap().count();
    assert_eq!(kept, PICTURES.len(), "a picture that no job draws");
}

#[test]
fn every_example_is_told_of_in_the_guide() {
    let guide = read("docs/guide.md");
    for entry in fs::read_dir(root().join("examples")).unwrap() {
        let name = entry.unwrap().file_name().into_string().unwrap();
        assert!(guide.contains(&name), "the guide is silent on {name}");
    }
}

/// Targets of `[text](target)` and of images, without what is on the web.
fn links(text: &str) -> Vec<String> {
    let targets = text.split("](").skip(1).filter_map(|t| t.split_once(')')).map(|(t, _)| t.to_owned());
    targets.filter(|t| !t.starts_with("http")).collect()
}

/// The name by which a heading is linked to: lower case, words joined by dashes.
fn anchors(text: &str) -> BTreeSet<String> {
    let headings = text.lines().filter(|l| l.starts_with('#')).map(|l| l.trim_start_matches('#').trim());
    let name = |h: &str| {
        let kept: String =
            h.to_lowercase().chars().filter(|c| c.is_alphanumeric() || " -_".contains(*c)).collect();
        str::replace(&kept, ' ', "-")
    };
    headings.map(name).collect()
}

#[test]
fn every_link_between_the_documents_leads_somewhere() {
    let mut count = 0;
    for name in LINKED {
        let text = read(name);
        let folder = root().join(name).parent().unwrap().to_path_buf();
        for link in links(&text) {
            count += 1;
            let (file, anchor) = link.split_once('#').unwrap_or((&link, ""));
            let target: PathBuf = if file.is_empty() { root().join(name) } else { folder.join(file) };
            assert!(target.exists(), "{name} links to {link}, which is not there");
            if !anchor.is_empty() {
                let known = anchors(&fs::read_to_string(&target).unwrap());
                assert!(known.contains(anchor), "{name} links to {link}; headings there: {known:?}");
            }
        }
    }
    assert!(count > 10, "only {count} links seen");
}

/// Names of all properties, at any depth.
fn properties(schema: &serde_json::Value, out: &mut BTreeSet<String>) {
    match schema {
        serde_json::Value::Object(map) => {
            for (key, value) in map {
                if let ("properties", Some(named)) = (key.as_str(), value.as_object()) {
                    out.extend(named.keys().cloned());
                }
                properties(value, out);
            }
        }
        serde_json::Value::Array(list) => list.iter().for_each(|v| properties(v, out)),
        _ => {}
    }
}

#[test]
fn every_field_of_the_json_is_described() {
    let text = read("docs/report.md");
    for which in ["report", "envelope"] {
        let mut names = BTreeSet::new();
        let schema = serde_json::from_str(&said(&format!("sweptedge schema {which}"))).unwrap();
        properties(&schema, &mut names);
        assert!(names.len() > 5);
        for name in names {
            assert!(text.contains(&format!("`{name}`")), "docs/report.md is silent on `{name}` ({which})");
        }
    }
}

#[test]
fn every_key_of_a_job_file_is_described_in_the_guide() {
    let mut names = BTreeSet::new();
    properties(&serde_json::from_str(&said("sweptedge schema job")).unwrap(), &mut names);
    let text = read("docs/guide.md");
    for name in names {
        assert!(text.contains(&format!("`{name}`")), "docs/guide.md is silent on `{name}`");
    }
}

#[test]
fn a_shortened_answer_keeps_as_many_lines_as_are_shown() {
    assert_eq!(shown_as("a\nb\nc\n", "x\n[...]\n"), "a\n[...]\n");
    assert_eq!(shown_as("a\n", "x\n[...]\n"), "a\n");
    assert_eq!(shown_as("a\nb\n", "x\n"), "a\nb\n");
}
