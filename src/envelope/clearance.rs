//! Clearance: how far a point is from being cut, D(x) = min over the moves of |x - c| - r.
//!
//! D > 0 is uncut, D <= 0 cut. D is 1-Lipschitz: between two points it changes by no more than their
//! distance. Both facts need only distances from points to segments, none of the envelope's own code,
//! which makes D the oracle of everything else.

use crate::geometry::{BoxIndex, Point, Segment};
use crate::program::MoveIndex;
use crate::view::{DiscFamily, DiscMove};

/// Moves of like radius, indexed by the boxes of their centres.
///
/// No disc of the group is larger than `radius`, so |x - c| - r + `radius` is at least |x - c|, and that
/// is at least the distance of x from any box that holds c: the boxes bound what is under them from
/// below, and a move once looked at is measured exactly.
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
    /// Radii at the start and the end of each move; empty where every group has one radius.
    laws: Vec<[f64; 2]>,
    groups: Vec<Group>,
}

/// Families of more radii than this are grouped by powers of two instead of one by one.
const MOST_RADII: usize = 8;

/// Bits of a double below its binary exponent.
const EXPONENT: u32 = 52;

/// The answer to one question.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Clear {
    /// Signed clearance, a length.
    pub clearance: f64,
    /// Position in the family of the move that comes closest (lowest of equals).
    pub source: usize,
}

impl Clearance {
    /// Indexes the moves of `family`: one index for each radius that occurs, or for each power of two
    /// where there are many or where they change on the way.
    #[must_use]
    pub fn new(family: &DiscFamily) -> Self {
        let mut keyed: Vec<(u64, u32)> =
            (0u32..).zip(&family.moves).map(|(i, m)| (m.greatest_radius().to_bits(), i)).collect();
        keyed.sort_unstable();
        let radii = keyed.chunk_by(|a, b| a.0 == b.0).count();
        if radii > MOST_RADII {
            // The order by radius stays; neighbours of one binary exponent become one group.
            for k in &mut keyed {
                k.0 >>= EXPONENT;
            }
        }
        let groups = keyed
            .chunk_by(|a, b| a.0 == b.0)
            .map(|chunk| {
                let moves: Vec<u32> = chunk.iter().map(|c| c.1).collect();
                let members = || moves.iter().filter_map(|&i| family.moves.get(i as usize));
                let boxes: Vec<_> = members().map(|m| m.segment.bounds()).collect();
                let radius = members().map(DiscMove::greatest_radius).fold(0.0, f64::max);
                Group { radius, index: BoxIndex::new(&boxes), moves }
            })
            .collect();
        let one_each = radii <= MOST_RADII && family.moves.iter().all(DiscMove::is_constant);
        let laws = family.moves.iter().filter(|_| !one_each).map(|m| [m.radius, m.end_radius]);
        Self { segments: family.moves.iter().map(|m| m.segment).collect(), laws: laws.collect(), groups }
    }

    /// Clearance of `p` from the move at position `source`, plus the radius of its group.
    fn lifted(&self, source: usize, p: Point, group: f64) -> f64 {
        let Some(segment) = self.segments.get(source) else { return f64::INFINITY };
        match self.laws.get(source) {
            Some(&[radius, end_radius]) => {
                let m = DiscMove { segment: *segment, radius, end_radius, source: MoveIndex(0) };
                m.clearance(p) + group
            }
            None => segment.distance(p),
        }
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
                self.lifted(source, p, group.radius)
            });
            if let Some((i, distance)) = near {
                let source = group.moves.get(i).map_or(0, |&m| m as usize);
                best = Some(Clear { clearance: distance - group.radius, source });
            }
        }
        best
    }
}
