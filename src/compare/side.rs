//! On which side of the contour does a point lie, told from the nearest feature of the contour?
//!
//! Material is on the left of every path of the contour. Where the nearest point of the contour is inside
//! a segment, the side of that segment decides; where it is a joint, the point lies in the joint's
//! normal cone, which is on the far side of the turn: right of a left turn, left of a right turn. An
//! open chain is taken on along its end tangents. (J. A. Baerentzen, H. Aanaes, "Signed distance
//! computation using the angle weighted pseudonormal", 2005, for the idea; in the plane the turn alone
//! decides.)

use crate::geometry::{Contour, Line, Point, Segment, Side, Vec2, orientation};

use super::targets::{Feature, Targets};

/// Sines of turns smaller than this are taken as no turn, where the path turns back on itself.
const STRAIGHT: f64 = 1e-9;

/// The contour made ready for questions: its segments as targets, each knowing its path, its place
/// on it and its neighbours. Segments without length are left out: they have no side.
pub(super) struct Walls<'a> {
    /// The segments as targets without radius.
    pub(super) targets: Targets<'a>,
    /// Position of each segment's path in the contour.
    path: Vec<u32>,
    /// Length of its path before each segment.
    along: Vec<f64>,
    /// The segment before and after each one, where its path goes on.
    neighbours: Vec<(Option<u32>, Option<u32>)>,
}

/// Material or open area.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Where {
    /// In the part.
    Material,
    /// Outside of it.
    Open,
}

impl<'a> Walls<'a> {
    pub(super) fn new(contour: &'a Contour) -> Self {
        let mut segments: Vec<&Segment> = Vec::new();
        let (mut paths, mut along, mut neighbours) = (Vec::new(), Vec::new(), Vec::new());
        for (position, path) in (0u32..).zip(contour.paths()) {
            let first = segments.len();
            let mut length = 0.0;
            for s in path.segments().iter().filter(|s| s.length() > 0.0) {
                segments.push(s);
                paths.push(position);
                along.push(length);
                length += s.length();
            }
            let closed = path.is_closed();
            for i in first..segments.len() {
                let before = if i > first { Some(i - 1) } else { closed.then_some(segments.len() - 1) };
                let after = if i + 1 < segments.len() { Some(i + 1) } else { closed.then_some(first) };
                neighbours.push((before.map(|k| k as u32), after.map(|k| k as u32)));
            }
        }
        let targets = Targets::new(segments.into_iter().map(|s| (s, 0.0)));
        Self { targets, path: paths, along, neighbours }
    }

    /// Position in the contour of the path of segment `k`.
    pub(super) fn path_of(&self, k: usize) -> usize {
        self.path[k] as usize
    }

    /// Length of the path before segment `k`.
    pub(super) fn along(&self, k: usize) -> f64 {
        self.along[k]
    }

    /// The segment before `k` on its path.
    pub(super) fn before(&self, k: usize) -> Option<usize> {
        self.neighbours[k].0.map(|n| n as usize)
    }

    /// The segment after `k` on its path.
    pub(super) fn after(&self, k: usize) -> Option<usize> {
        self.neighbours[k].1.map(|n| n as usize)
    }

    /// Turn at the joint after segment `k`, see [`Self::turn_at`].
    pub(super) fn turn_after(&self, k: usize) -> f64 {
        self.turn_at(k, Feature::End)
    }

    fn segment(&self, k: usize) -> &'a Segment {
        self.targets.segment(k)
    }

    /// The side of `p`, to which `feature` of segment `k` is the nearest of the contour.
    pub(super) fn of(&self, p: Point, k: usize, feature: Feature) -> Where {
        let left = match feature {
            Feature::Inside => left_of_inside(self.segment(k), p),
            Feature::Start => match self.neighbours[k].0 {
                Some(before) => left_of_joint(self.segment(before as usize), self.segment(k), p),
                None => left_of_ray(self.segment(k).start(), self.segment(k).tangent_at(0.0), p),
            },
            Feature::End => match self.neighbours[k].1 {
                Some(after) => left_of_joint(self.segment(k), self.segment(after as usize), p),
                None => left_of_ray(self.segment(k).end(), self.segment(k).tangent_at(1.0), p),
            },
        };
        if left { Where::Material } else { Where::Open }
    }

    /// Turn at the joint at an end of segment `k`, radians, positive to the left; zero at an end of an
    /// open chain.
    pub(super) fn turn_at(&self, k: usize, feature: Feature) -> f64 {
        let (a, b) = match (feature, self.neighbours[k]) {
            (Feature::Start, (Some(before), _)) => (before as usize, k),
            (Feature::End, (_, Some(after))) => (k, after as usize),
            _ => return 0.0,
        };
        let (t, u) = (self.segment(a).tangent_at(1.0), self.segment(b).tangent_at(0.0));
        t.cross(u).atan2(t.dot(u))
    }
}

fn left_of_inside(segment: &Segment, p: Point) -> bool {
    match segment {
        Segment::Line(Line { start, end }) => orientation(*start, *end, p) == Side::Left,
        Segment::Arc(a) => {
            let within = (p - a.center()).hypot() < a.radius();
            within == (a.sweep() > 0.0)
        }
    }
}

fn left_of_ray(from: Point, direction: Vec2, p: Point) -> bool {
    direction.cross(p - from) > 0.0
}

/// Side of a point to which the joint between `a` and `b` is nearest.
fn left_of_joint(a: &Segment, b: &Segment, p: Point) -> bool {
    let (t, u) = (a.tangent_at(1.0), b.tangent_at(0.0));
    let turn = t.cross(u);
    if t.dot(u) >= 0.0 {
        // The normal cone lies about the normal of the mean direction, however small the turn: its own
        // sign is noise beside an arc not much longer than the rounding of its ends.
        left_of_ray(b.start(), t + u, p)
    } else if turn.abs() > STRAIGHT {
        turn < 0.0
    } else {
        // The path turns back on itself: a horn of material when it is curved away to the right on the
        // way in and back, else a notch.
        a.curvature() + b.curvature() >= 0.0
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::Path;

    #[test]
    fn at_a_joint_that_turns_by_rounding_only_the_side_is_that_of_its_neighbours() {
        for lift in [-1e-7, -1e-11, 0.0, 1e-11, 1e-7] {
            let points = [(0.0, 0.0), (5.0, 0.0), (10.0, lift)].map(|(x, y)| Point::new(x, y));
            let lines = points.windows(2).map(|w| Segment::line(w[0], w[1])).collect();
            let contour = Contour::new(vec![Path::new(lines, false).unwrap()], 0.0).unwrap();
            let walls = Walls::new(&contour);
            for (k, feature) in [(0, Feature::End), (1, Feature::Start)] {
                assert_eq!(walls.of(Point::new(5.0, 3.0), k, feature), Where::Material, "{lift}");
                assert_eq!(walls.of(Point::new(5.0, -3.0), k, feature), Where::Open, "{lift}");
            }
        }
    }
}
