//! Clearance: how far a point is from being cut, D(x) = min over the moves of |x - c| - r.
//!
//! D > 0 is uncut, D <= 0 cut. D is 1-Lipschitz: between two points it changes by no more than their
//! distance. Both facts need only distances from points to segments, none of the envelope's own code,
//! which makes D the oracle of everything else.

use crate::geometry::{BoxIndex, Point, Segment};
use crate::view::DiscFamily;

/// Moves of one radius, indexed.
#[derive(Clone, Debug)]
struct Group {
    radius: f64,
    index: BoxIndex,
    /// Position in the family of each indexed move.
    moves: Vec<u32>,
}

/// Answers clearance questions about one family of discs.
#[derive(Clone, Debug)]
pub struct Clearance {
    segments: Vec<Segment>,
    groups: Vec<Group>,
}

/// The answer to one question.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Clear {
    /// Signed clearance, a length.
    pub clearance: f64,
    /// Position in the family of the move that comes closest (lowest of equals).
    pub source: usize,
}

impl Clearance {
    /// Indexes the moves of `family`: one index for each radius that occurs.
    #[must_use]
    pub fn new(family: &DiscFamily) -> Self {
        let segments: Vec<Segment> = family.moves.iter().map(|m| m.segment).collect();
        let mut by_radius: Vec<(u64, u32)> =
            (0u32..).zip(&family.moves).map(|(i, m)| (m.radius.to_bits(), i)).collect();
        by_radius.sort_unstable();
        let groups = by_radius
            .chunk_by(|a, b| a.0 == b.0)
            .map(|chunk| {
                let moves: Vec<u32> = chunk.iter().map(|c| c.1).collect();
                let boxes: Vec<_> =
                    moves.iter().filter_map(|&i| segments.get(i as usize)).map(Segment::bounds).collect();
                let radius = chunk.first().map_or(0.0, |c| f64::from_bits(c.0));
                Group { radius, index: BoxIndex::new(&boxes), moves }
            })
            .collect();
        Self { segments, groups }
    }

    /// Clearance at `p`; `None` only for a family without moves.
    #[must_use]
    pub fn at(&self, p: Point) -> Option<Clear> {
        self.below(p, f64::INFINITY)
    }

    /// Clearance at `p` if it is below `limit`.
    #[must_use]
    pub fn below(&self, p: Point, limit: f64) -> Option<Clear> {
        let mut best: Option<Clear> = None;
        for group in &self.groups {
            let within = best.map_or(limit, |b| b.clearance) + group.radius;
            let near = group.index.nearest(p, within, |i| {
                let source = group.moves.get(i).map_or(0, |&m| m as usize);
                self.segments.get(source).map_or(f64::INFINITY, |s| s.distance(p))
            });
            if let Some((i, distance)) = near {
                let source = group.moves.get(i).map_or(0, |&m| m as usize);
                best = Some(Clear { clearance: distance - group.radius, source });
            }
        }
        best
    }
}
