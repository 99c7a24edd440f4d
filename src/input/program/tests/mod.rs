//! Whole programs against the figures of NISTIR 6556 and against the damage real files show.

mod arcs;
mod language;
mod refused;
mod spellings;

use super::*;
use crate::program::{Motion, Move, MoveKind, Point3};

/// Reads with default options; panics with the problems if refused.
fn read(text: &str) -> Reading<Program> {
    read_with(text, &ProgramOptions::default())
}

fn read_with(text: &str, options: &ProgramOptions) -> Reading<Program> {
    match read_iso(text.as_bytes(), "test.nc", options) {
        Ok(reading) => reading,
        Err(problems) => panic!("{text}\nrefused: {}", shown(&problems)),
    }
}

fn refused(text: &[u8]) -> Refusal {
    let problems = read_iso(text, "test.nc", &ProgramOptions::default()).unwrap_err();
    assert!(problems.iter().all(|p| !p.help.is_empty() && !p.found.is_empty()));
    problems
}

fn shown(problems: &[Problem]) -> String {
    problems.iter().map(|p| format!("{p}\n")).collect()
}

fn warned(reading: &Reading<Program>, part: &str) -> bool {
    reading.problems.iter().any(|p| p.found.contains(part))
}

/// Where the moves end.
fn ends(text: &str) -> Vec<(f64, f64, f64)> {
    let end = |m: &Move| m.motion.end();
    read(text).value.moves.iter().map(end).map(|Point3 { x, y, z }| (x, y, z)).collect()
}

fn near(a: f64, b: f64) -> bool {
    (a - b).abs() < 1e-9
}

fn length(motion: &Motion) -> f64 {
    match motion {
        Motion::Straight { start, end } => (end.plan() - start.plan()).hypot(),
        Motion::Circular { arc, .. } => arc.length(),
    }
}

/// Area inside a closed run of moves in the XY plane, by Green's theorem; positive counter-clockwise.
fn area(moves: &[Move]) -> f64 {
    let twice = |m: &Move| {
        let (a, b) = (m.motion.start(), m.motion.end());
        let cap = if let Motion::Circular { arc, .. } = m.motion { arc.twice_cap_area() } else { 0.0 };
        a.x * b.y - b.x * a.y + cap
    };
    0.5 * moves.iter().map(twice).sum::<f64>()
}

fn feeds(program: &Program) -> Vec<Move> {
    program.moves.iter().filter(|m| m.kind == MoveKind::Feed).copied().collect()
}
