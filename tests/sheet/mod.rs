//! A table of checks against the outside: what was expected, what was got, what the difference may be.
//!
//! Every check is entered before it is asserted, so the table shows a failure too. Each test program
//! writes its part under `outside-checks` in the build folder and puts all parts together in
//! `outside-checks.md` beside it. Run with a filter, a part holds only what ran.

#![allow(dead_code, reason = "each test program uses its own part of the sheet")]

use std::collections::BTreeMap;
use std::fmt::Write as _;
use std::fs;
use std::path::Path;
use std::sync::{Mutex, PoisonError};

use sweptedge::compare::Figure;

/// Rows of one topic, and the source its expectations come from.
#[derive(Default)]
struct Topic {
    source: &'static str,
    rows: Vec<String>,
}

static TOPICS: Mutex<BTreeMap<&'static str, Topic>> = Mutex::new(BTreeMap::new());

/// Checks of one topic that share a source.
#[derive(Clone, Copy)]
pub struct Sheet {
    topic: &'static str,
    source: &'static str,
}

impl Sheet {
    /// A topic and the published source of its expectations.
    pub const fn new(topic: &'static str, source: &'static str) -> Self {
        Self { topic, source }
    }

    /// `got` may differ from `expected` by `bound` at most.
    pub fn holds(&self, what: impl Into<String>, expected: f64, got: f64, bound: f64) {
        let (what, off) = (what.into(), (got - expected).abs());
        let holds = off <= bound;
        let mark = if holds { "" } else { " FAILS" };
        self.enter(format!("| {what} | {expected:.12} | {got:.12} | {off:.1e} | {bound:.1e}{mark} |"));
        assert!(holds, "{}: {what}: expected {expected}, got {got}, off by {off:e}", self.topic);
    }

    /// The figure's own bound must cover the difference, and be no wider than `allowed`.
    pub fn figure(&self, what: impl Into<String>, expected: f64, got: Figure, allowed: f64) {
        let what = what.into();
        self.holds(what.clone(), expected, got.size, got.bound);
        assert!(got.bound <= allowed, "{}: {what}: bound {:e} is over {allowed:e}", self.topic, got.bound);
    }

    /// The greatest of many distances, all of which should be zero.
    pub fn within(&self, what: impl Into<String>, greatest: f64, bound: f64) {
        let (what, holds) = (what.into(), greatest <= bound);
        let mark = if holds { "" } else { " FAILS" };
        self.enter(format!("| {what} | 0 | {greatest:.1e} | {greatest:.1e} | {bound:.1e}{mark} |"));
        assert!(holds, "{}: {what}: {greatest:e} is over {bound:e}", self.topic);
    }

    /// `got` must be `expected`, to the letter.
    pub fn says(&self, what: impl Into<String>, expected: &str, got: &str) {
        let what = what.into();
        let mark = if expected == got { "" } else { " FAILS" };
        self.enter(format!("| {what} | {expected} | {got} | | exact{mark} |"));
        assert_eq!(expected, got, "{}: {what}", self.topic);
    }

    fn enter(&self, row: String) {
        let mut topics = TOPICS.lock().unwrap_or_else(PoisonError::into_inner);
        let topic = topics.entry(self.topic).or_default();
        topic.source = self.source;
        topic.rows.push(row);
        write(&topics);
    }
}

/// Writes this program's part, then all parts together.
fn write(topics: &BTreeMap<&'static str, Topic>) {
    let mut text = String::new();
    for (name, topic) in topics {
        let _ = write!(text, "\n### {name}\n\n{}\n\n", topic.source);
        text += "| check | expected | got | off by | bound |\n| --- | --- | --- | --- | --- |\n";
        for row in &topic.rows {
            text += row;
            text.push('\n');
        }
    }
    let target = Path::new(env!("CARGO_TARGET_TMPDIR")).parent().expect("the build folder");
    let parts = target.join("outside-checks");
    fs::create_dir_all(&parts).expect("a folder for the table");
    fs::write(parts.join(concat!(env!("CARGO_CRATE_NAME"), ".md")), text).expect("this program's part");
    let mut files: Vec<_> =
        fs::read_dir(&parts).expect("the parts").map(|e| e.expect("a part").path()).collect();
    files.sort();
    let mut whole = String::from("# Checked against the outside\n");
    for file in files {
        whole += &fs::read_to_string(file).expect("a part");
    }
    fs::write(target.join("outside-checks.md"), whole).expect("the table");
}
