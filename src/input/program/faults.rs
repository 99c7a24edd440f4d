//! What is wrong in a block and where: faults as the lexer and the interpreter find them, gathered
//! into placed problems. Several errors are gathered before the program is refused, so that one run
//! shows more than the first; a warning is given once for each kind, with the number of blocks.

use std::collections::BTreeMap;

use super::lines::decode;
use crate::input::{Place, Problem};

/// Errors shown before reading stops: about a screenful.
const MOST_ERRORS: usize = 20;

/// Bytes of a line, from `at` to before `end`.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub(super) struct Span {
    /// First byte.
    pub at: u32,
    /// The byte after the last.
    pub end: u32,
}

impl Span {
    /// From byte `at` to before byte `end` of a line; a line longer than 4 GB is marked at its limit.
    pub fn new(at: usize, end: usize) -> Self {
        let short = |n: usize| u32::try_from(n).unwrap_or(u32::MAX);
        Self { at: short(at), end: short(end) }
    }
}

/// An error in one block.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Fault {
    /// What is marked.
    pub span: Span,
    /// What was found.
    pub found: String,
    /// What was expected; empty where `found` says it.
    pub expected: String,
    /// What to do.
    pub help: String,
}

impl Fault {
    /// A fault at `span`.
    pub fn new(
        span: Span,
        found: impl Into<String>,
        expected: impl Into<String>,
        help: impl Into<String>,
    ) -> Self {
        Self { span, found: found.into(), expected: expected.into(), help: help.into() }
    }

    /// The same fault, marked at `span`.
    pub fn at(self, span: Span) -> Self {
        Self { span, ..self }
    }
}

/// A line of the program: its number and its bytes.
#[derive(Clone, Copy, Debug)]
pub(super) struct Line<'a> {
    /// From 1.
    pub number: usize,
    /// Without its end.
    pub text: &'a [u8],
}

/// Kinds of warnings; each is given once.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Note {
    /// A block marked `/`.
    BlockDelete,
    /// A blank between two digits of a number.
    BlankInNumber,
    /// An M code of which nothing is known.
    UnknownM(u16),
    /// A word no code of its block uses.
    Unused(u8),
    /// A rotary axis at zero.
    Rotary(u8),
    /// M6 without a T word before it.
    NoTool,
    /// G28, G30 or G53 taken as a retract.
    Home(u16),
    /// G28 or G30 of all axes together.
    HomeTogether(u16),
    /// M99 taken as the end.
    Return,
    /// A feed move or an increment starts where the program never said: X or Y.
    StartAssumed,
    /// The same for Z.
    HeightAssumed,
    /// A wider arc tolerance let an arc pass.
    WideArc,
}

/// A warning and the number of blocks it holds for.
#[derive(Debug)]
struct Counted {
    problem: Problem,
    count: usize,
}

/// The problems of one program.
#[derive(Debug)]
pub(super) struct Faults<'a> {
    file: &'a str,
    errors: Vec<Problem>,
    notes: BTreeMap<Note, Counted>,
}

impl<'a> Faults<'a> {
    /// No problems yet in `file`.
    pub const fn new(file: &'a str) -> Self {
        Self { file, errors: Vec::new(), notes: BTreeMap::new() }
    }

    /// Has an error been found? Then no result is wanted any more, only further errors.
    pub const fn refused(&self) -> bool {
        !self.errors.is_empty()
    }

    /// Are there so many errors that reading on helps nobody?
    pub const fn full(&self) -> bool {
        self.errors.len() >= MOST_ERRORS
    }

    /// Takes an error of a block.
    pub fn error(&mut self, line: Line<'_>, fault: Fault) {
        let place = place(self.file, line, fault.span);
        self.errors.push(Problem::error(place, fault.found, fault.expected, fault.help));
    }

    /// Takes an error of the whole file.
    pub fn error_of_file(&mut self, found: &str, expected: &str, help: &str) {
        self.errors.push(Problem::error(Place::file(self.file), found, expected, help));
    }

    /// Counts a warning; its words are made only the first time.
    pub fn note(
        &mut self,
        note: Note,
        line: Line<'_>,
        span: Span,
        words: impl FnOnce() -> (String, &'static str),
    ) {
        let file = self.file;
        let counted = self.notes.entry(note).or_insert_with(|| {
            let (found, help) = words();
            Counted { problem: Problem::warning(place(file, line, span), found, "", help), count: 0 }
        });
        counted.count += 1;
    }

    /// Takes a kind of warning back.
    pub fn withdraw(&mut self, note: Note) {
        self.notes.remove(&note);
    }

    /// The warnings in order of their place; those about the whole file, given here, first.
    pub fn warnings(&mut self, of_file: Vec<Problem>) -> Vec<Problem> {
        let mut placed: Vec<Problem> = std::mem::take(&mut self.notes)
            .into_values()
            .map(|Counted { mut problem, count }| {
                if count > 1 {
                    problem.found = format!("{} ({count} times, first here)", problem.found);
                }
                problem
            })
            .collect();
        placed.sort_by_key(|p| (p.place.line, p.place.column));
        let mut all = of_file;
        all.append(&mut placed);
        all
    }

    /// Everything, for a program that is refused.
    pub fn into_refusal(mut self) -> Vec<Problem> {
        if self.full() {
            self.error_of_file(
                "reading stopped here: too many errors",
                "",
                "correct the errors above, then run the check again",
            );
        }
        let mut all = std::mem::take(&mut self.errors);
        all.append(&mut self.warnings(Vec::new()));
        all
    }
}

/// The place of `span` in a line, its column counted in characters as [`decode`] reads them.
fn place(file: &str, line: Line<'_>, span: Span) -> Place {
    let (at, end) = (span.at as usize, (span.end as usize).min(line.text.len()));
    let characters = |from: usize, to: usize| {
        let bytes = line.text.get(from..to).unwrap_or_default();
        match std::str::from_utf8(line.text) {
            Ok(text) => text.get(from..to).map_or(bytes.len(), |part| part.chars().count()),
            Err(_) => bytes.len(),
        }
    };
    let whole = Place::line(file, line.number, decode(line.text));
    whole.at(characters(0, at.min(line.text.len())) + 1, characters(at, end.max(at)).max(1))
}

/// A figure for a message: at most six decimals, no trailing zeros.
pub(super) fn figure(value: f64) -> String {
    let long = format!("{value:.6}");
    let short = long.trim_end_matches('0').trim_end_matches('.');
    if short == "-0" { "0".to_owned() } else { short.to_owned() }
}
