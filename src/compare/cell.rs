//! A square cell of the plane, cut down to the part of it that can lie in an opening.
//!
//! ```text
//!    +--------+        The wall cuts the cell; beyond it nothing has to be cleared. What is kept is a
//!    |  open  |        convex polygon that holds every open point of the cell, by a straight cut for
//!    |________|__ wall a straight wall, by a cut shifted outwards as far as it can bend for a curved
//!    +--------+        one. Where the walls in reach are no plain chain the whole square is kept.
//! ```

use crate::geometry::{Point, Segment, Vec2};

use super::side::Walls;

/// Most wall segments by which one cell is cut.
const MOST_CUTS: usize = 200;

/// A chain of walls that turns by less than this in all runs like a graph over its tangent.
const GENTLE: f64 = 0.5;

/// A square by its middle and half its side.
#[derive(Clone, Copy, Debug)]
pub(super) struct Cell {
    pub(super) middle: Point,
    pub(super) half: f64,
}

impl Cell {
    /// Distance from the middle to a corner.
    pub(super) fn reach(&self) -> f64 {
        self.half * std::f64::consts::SQRT_2
    }

    pub(super) fn quarters(&self) -> [Self; 4] {
        let half = 0.5 * self.half;
        [(-1.0, -1.0), (1.0, -1.0), (-1.0, 1.0), (1.0, 1.0)]
            .map(|(x, y)| Self { middle: self.middle + Vec2::new(x, y) * half, half })
    }

    pub(super) fn corners(&self) -> [Point; 4] {
        [(-1.0, -1.0), (1.0, -1.0), (1.0, 1.0), (-1.0, 1.0)]
            .map(|(x, y)| self.middle + Vec2::new(x, y) * self.half)
    }

    /// A convex polygon that holds every point of the cell at least `allowance` outside of the part;
    /// empty when there is none.
    pub(super) fn open_part(&self, walls: &Walls, allowance: f64) -> Vec<Point> {
        let mut polygon = self.corners().to_vec();
        let mut near = Vec::new();
        let reach = self.reach() + allowance;
        walls.targets.within(self.middle, reach, |k| near.push(k));
        if near.is_empty() || near.len() > MOST_CUTS {
            return polygon;
        }
        near.sort_unstable();
        let Some(chain) = Chain::of(&near, walls) else {
            return polygon;
        };
        if let Some(cuts) = self.cuts_of_hollow(&chain, walls) {
            for (foot, normal) in cuts {
                cut(&mut polygon, foot, normal, allowance);
            }
        } else if let Some((foot, normal, dip)) = self.cut_of_gentle(&chain, walls, reach) {
            cut(&mut polygon, foot, normal, allowance - dip);
        }
        polygon
    }

    /// The foot of the cell's middle on segment `k`, and the normal to the open side there.
    fn foot(&self, walls: &Walls, k: usize) -> (Point, Vec2) {
        let segment = walls.targets.segment(k);
        let near = segment.nearest(self.middle);
        (near.at, -segment.left_normal_at(near.t))
    }

    /// One cut for each segment of a chain round which the open side is convex: each segment bends
    /// and joins to the right only.
    fn cuts_of_hollow(&self, chain: &Chain, walls: &Walls) -> Option<Vec<(Point, Vec2)>> {
        let bends_right = |&k: &usize| walls.targets.segment(k).curvature() <= 0.0;
        let hollow = chain.segments.iter().all(bends_right) && chain.turns(walls).all(|t| t <= 0.0);
        hollow.then(|| chain.segments.iter().map(|&k| self.foot(walls, k)).collect())
    }

    /// One cut for a chain that bends little, and how far the chain may dip below its tangent at the
    /// foot: the way it can run in the cell times the tangent of its whole turn.
    fn cut_of_gentle(&self, chain: &Chain, walls: &Walls, reach: f64) -> Option<(Point, Vec2, f64)> {
        let bend = |&k: &usize| match walls.targets.segment(k) {
            Segment::Line(_) => 0.0,
            Segment::Arc(a) => a.sweep().abs().min(4.0 * reach / a.radius()),
        };
        let turn: f64 = chain.segments.iter().map(bend).chain(chain.turns(walls).map(f64::abs)).sum();
        if turn > GENTLE {
            return None;
        }
        let distance = |&k: &usize| walls.targets.clearance_of(k, self.middle);
        let nearest = chain.segments.iter().copied().min_by(|a, b| distance(a).total_cmp(&distance(b)))?;
        let (foot, normal) = self.foot(walls, nearest);
        Some((foot, normal, 2.0 * reach * turn.tan()))
    }
}

/// Segments that follow one another on their path, and whether the last leads to the first again.
struct Chain {
    segments: Vec<usize>,
    closed: bool,
}

impl Chain {
    /// The segments `near` (in rising order) as one unbroken chain. `None` where they are several, or
    /// where an open chain of the contour ends among them and leaves a way round its end.
    fn of(near: &[usize], walls: &Walls) -> Option<Self> {
        let among = |k: Option<usize>| k.filter(|k| near.binary_search(k).is_ok());
        let mut firsts = near.iter().copied().filter(|&k| among(walls.before(k)).is_none());
        let first = firsts.next();
        if firsts.next().is_some() {
            return None;
        }
        let closed = first.is_none();
        let first = first.or_else(|| near.first().copied())?;
        let mut segments = vec![first];
        let mut last = first;
        while let Some(next) = among(walls.after(last)).filter(|&n| n != first) {
            segments.push(next);
            last = next;
        }
        let ends = walls.before(first).is_none() || walls.after(last).is_none();
        (!ends && segments.len() == near.len()).then_some(Self { segments, closed })
    }

    /// Turns at its joints, radians, positive to the left.
    fn turns(&self, walls: &Walls) -> impl Iterator<Item = f64> {
        let joints = if self.closed { self.segments.len() } else { self.segments.len() - 1 };
        self.segments.iter().take(joints).map(|&k| walls.turn_after(k))
    }
}

/// Keeps of `polygon` what lies at least `least` along `normal` from `foot`.
fn cut(polygon: &mut Vec<Point>, foot: Point, normal: Vec2, least: f64) {
    let height = |p: Point| normal.dot(p - foot) - least;
    let mut kept = Vec::with_capacity(polygon.len() + 1);
    for (i, &a) in polygon.iter().enumerate() {
        let b = polygon[(i + 1) % polygon.len()];
        let (ha, hb) = (height(a), height(b));
        if ha >= 0.0 {
            kept.push(a);
        }
        if (ha < 0.0) != (hb < 0.0) {
            kept.push(a.lerp(b, ha / (ha - hb)));
        }
    }
    *polygon = kept;
}

#[cfg(test)]
mod tests;
