//! The path of the cutter as a machinist reads it: uninterrupted cuts, their first and last moves,
//! chords that stand for a curve, and the blocks behind them.

use std::f64::consts::PI;

use super::BlockRef;
use crate::geometry::{Point, Segment, Vec2};
use crate::program::Program;
use crate::view::{DiscFamily, DiscMove};

/// Most blocks named in one finding: enough to find the place, few enough to read.
const MOST_BLOCKS: usize = 5;

/// Moves looked at on either side for the length and turning of chords.
const CHORDS_ASIDE: usize = 4;

/// Chords turn by less than this from one to the next, radians (40 degrees); more is a corner.
const MOST_DEFLECTION: f64 = 40.0 * PI / 180.0;

/// A family of discs with its uninterrupted cuts.
#[derive(Debug)]
pub(super) struct Cuts<'a> {
    pub moves: &'a [DiscMove],
    /// First move of each uninterrupted cut, ascending.
    starts: Vec<usize>,
    program: &'a Program,
}

/// An uninterrupted cut, by its first and last move that is no point.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Run {
    pub first: usize,
    pub last: usize,
}

/// Straight moves that stand for an arc of the cutter's centre.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Chords {
    /// Length of a chord.
    pub length: f64,
    /// Angle from one chord to the next, radians.
    pub deflection: f64,
    /// Radius of the arc through their ends.
    pub radius: f64,
}

impl Chords {
    /// Greatest distance between the arc and its chord: R (1 - cos(phi / 2)).
    pub(super) fn sagitta(&self) -> f64 {
        let s = (0.25 * self.deflection).sin();
        2.0 * self.radius * s * s
    }
}

/// The chord of an arc of radius `radius` that lies within `deviation` of it: 2 sqrt(e (2R - e)), and
/// the angle it spans, 2 acos(1 - e / R), radians. Lengths in one unit; a deviation of a radius or
/// more allows half a turn.
#[must_use]
pub fn chord_within(deviation: f64, radius: f64) -> (f64, f64) {
    let e = deviation.clamp(0.0, radius.max(0.0));
    let chord = 2.0 * (e * (2.0 * radius - e)).max(0.0).sqrt();
    // asin keeps the digits that acos loses near a full turn of nothing.
    let angle = if radius > 0.0 { 2.0 * (0.5 * chord / radius).min(1.0).asin() } else { PI };
    (chord, angle)
}

/// The distance between two passes of radius `radius` side by side whose crest is `height` above the
/// wall: 2 sqrt(h (2r - h)), never more than the diameter. Exact for the crest itself; the clearance
/// measured straight below it is smaller, so the distance is on the safe side.
#[must_use]
pub fn step_over_within(height: f64, radius: f64) -> f64 {
    chord_within(height, radius).0
}

impl<'a> Cuts<'a> {
    pub(super) fn new(family: &'a DiscFamily, program: &'a Program) -> Self {
        let moves = family.moves.as_slice();
        let broken = moves.iter().zip(moves.iter().skip(1)).enumerate().filter(|(_, (a, b))| {
            a.segment.end() != b.segment.start() || b.source.0.wrapping_sub(a.source.0) > 1
        });
        let starts = std::iter::once(0).chain(broken.map(|(i, _)| i + 1)).collect();
        Self { moves, starts, program }
    }

    pub(super) fn radius(&self, i: usize) -> f64 {
        self.moves.get(i).map_or(0.0, |m| m.radius)
    }

    pub(super) fn segment(&self, i: usize) -> Option<&'a Segment> {
        self.moves.get(i).map(|m| &m.segment)
    }

    /// The uninterrupted cut that holds move `i`; points at its ends (plunges) are left out.
    pub(super) fn run(&self, i: usize) -> Option<Run> {
        let k = self.starts.partition_point(|&s| s <= i);
        let from = *self.starts.get(k.checked_sub(1)?)?;
        let end = self.starts.get(k).copied().unwrap_or(self.moves.len());
        let is_move = |i: &usize| self.segment(*i).is_some_and(|s| s.length() > 0.0);
        let first = (from..end).find(is_move)?;
        let last = (from..end).rev().find(is_move)?;
        Some(Run { first, last })
    }

    /// The chords that move `i` belongs to: at least three straight moves in a row of similar length
    /// (within a factor of two) that turn the same way by less than 40 degrees each.
    pub(super) fn chords(&self, i: usize) -> Option<Chords> {
        let length = self.chord_length(i)?;
        let alike = |k: usize| self.chord_length(k).is_some_and(|l| l > 0.5 * length && l < 2.0 * length);
        let (mut from, mut to) = (i, i);
        while i - from < CHORDS_ASIDE && from > 0 && alike(from - 1) && self.deflection(from - 1).is_some() {
            from -= 1;
        }
        while to - i < CHORDS_ASIDE && alike(to + 1) && self.deflection(to).is_some() {
            to += 1;
        }
        let turns: Vec<f64> = (from..to).filter_map(|k| self.deflection(k)).collect();
        // The turns at this chord's own ends count; one of them is enough at the end of a curve.
        let own: Vec<f64> = [i.checked_sub(1).filter(|&k| k >= from), Some(i).filter(|&k| k < to)]
            .into_iter()
            .flatten()
            .filter_map(|k| self.deflection(k))
            .collect();
        let one_way = own.first().is_some_and(|o| turns.iter().all(|t| t * o > 0.0));
        if turns.len() < 2 || !one_way {
            return None;
        }
        let deflection = own.iter().fold(0.0f64, |a, t| a.max(t.abs()));
        let radius = 0.5 * length / (0.5 * deflection).sin();
        (deflection > 0.0 && radius.is_finite()).then_some(Chords { length, deflection, radius })
    }

    fn chord_length(&self, i: usize) -> Option<f64> {
        match self.segment(i)? {
            Segment::Line(l) => Some(l.length()).filter(|&l| l > 0.0),
            Segment::Arc(_) => None,
        }
    }

    /// Signed turn from move `i` to the next one, when they join and it is no corner.
    fn deflection(&self, i: usize) -> Option<f64> {
        let (a, b) = (self.segment(i)?, self.segment(i.checked_add(1)?)?);
        let (u, v) = (a.tangent_at(1.0), b.tangent_at(0.0));
        let turn = u.cross(v).atan2(u.dot(v));
        (a.end() == b.start() && turn.abs() < MOST_DEFLECTION).then_some(turn)
    }

    /// Unit direction to the inner side of the turn which moves `from..=to` make, at move `i`.
    pub(super) fn inner_side(&self, i: usize, from: usize, to: usize, p: Point) -> Option<Vec2> {
        let segment = self.segment(i)?;
        if let Segment::Arc(a) = segment {
            let v = a.center() - p;
            let size = v.hypot();
            return (size > 0.0).then(|| v / size);
        }
        let (u, v) = (self.segment(from)?.tangent_at(0.0), self.segment(to)?.tangent_at(1.0));
        let turn = u.cross(v);
        Some(segment.left_normal_at(segment.nearest(p).t) * turn.signum()).filter(|_| turn != 0.0)
    }

    /// Line of the program behind move `i`.
    pub(super) fn line(&self, i: usize) -> Option<usize> {
        self.block(i).map(|b| b.line)
    }

    /// Text of the block behind move `i`.
    pub(super) fn text(&self, i: usize) -> Option<String> {
        self.block(i).map(|b| b.text)
    }

    fn block(&self, i: usize) -> Option<BlockRef> {
        let source = self.moves.get(i)?.source;
        let commanded = self.program.moves.get(usize::try_from(source.0).ok()?)?;
        let block = self.program.blocks.get(usize::try_from(commanded.block.0).ok()?)?;
        let text = block.text.to_owned();
        Some(BlockRef { file: self.program.file.clone(), line: block.line, text })
    }

    /// The blocks of `worst`, in that order, then those of the moves `range` from its first on; each
    /// once, at most five.
    pub(super) fn blocks(&self, worst: &[usize], range: Option<(usize, usize)>) -> Vec<BlockRef> {
        let rest = range.map_or(0..0, |(from, to)| from..to.saturating_add(1).min(self.moves.len()));
        let mut blocks: Vec<BlockRef> = Vec::new();
        for i in worst.iter().copied().chain(rest) {
            if blocks.len() >= MOST_BLOCKS {
                break;
            }
            if let Some(block) = self.block(i).filter(|b| !blocks.contains(b)) {
                blocks.push(block);
            }
        }
        blocks
    }

    /// "line 41" or "lines 41 to 47"; empty where the program knows no block.
    pub(super) fn lines_text(&self, from: usize, to: usize) -> String {
        match (self.line(from), self.line(to)) {
            (Some(a), Some(b)) if a != b => format!("lines {} to {}", a.min(b), a.max(b)),
            (Some(a), _) | (None, Some(a)) => format!("line {a}"),
            (None, None) => "an unknown line".to_owned(),
        }
    }
}
