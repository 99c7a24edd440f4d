//! On which side of a contour does a point lie? For closed loops the even-odd rule (J. D. Foley et
//! al., Computer Graphics, 2nd ed., 1990, section 2.1.3): a ray to the right is counted against lines
//! and against the parts of arcs between their highest and lowest points.
//!
//! ```text
//!        __                Every piece counts its lower end and not its upper one, so a ray through a
//!      .'  '.   piece 2    vertex or a highest point is counted right without any tolerance: parity
//!  ----|----|------->      can be wrong only for a point within rounding of the contour.
//!  piece 1 end
//! ```

use crate::geometry::{Arc, BoxIndex, Contour, Line, Point, Rect, Segment, Side, Vec2, orientation};

/// A contour's segments, indexed.
#[derive(Clone, Debug)]
pub(super) struct Sides {
    segments: Vec<Segment>,
    /// Path of each segment, and the positions of the segments before and after it on that path.
    places: Vec<Placed>,
    index: BoxIndex,
    /// A length beyond every segment's right end.
    right: f64,
}

#[derive(Clone, Copy, Debug)]
struct Placed {
    path: usize,
    before: Option<usize>,
    after: Option<usize>,
}

impl Sides {
    pub(super) fn new(contour: &Contour) -> Self {
        let segments: Vec<Segment> = contour.segments().map(|(_, s)| *s).collect();
        let boxes: Vec<Rect> = segments.iter().map(Segment::bounds).collect();
        let mut places = Vec::with_capacity(segments.len());
        for (path, p) in contour.paths().iter().enumerate() {
            let (first, count) = (places.len(), p.segments().len());
            let last = first + count - 1;
            places.extend((first..=last).map(|i| Placed {
                path,
                before: if i > first { Some(i - 1) } else { p.is_closed().then_some(last) },
                after: if i < last { Some(i + 1) } else { p.is_closed().then_some(first) },
            }));
        }
        let right = boxes.iter().fold(f64::NEG_INFINITY, |a, b| a.max(b.x1));
        Self { segments, places, index: BoxIndex::new(&boxes), right }
    }

    /// Is `p` inside an odd number of loops?
    pub(super) fn loops_round(&self, p: Point) -> bool {
        let mut odd = false;
        self.each_right_of(p, |_, crossings| odd ^= !crossings.is_multiple_of(2));
        odd
    }

    /// Paths that are loops round `p`, in ascending order; `except` is left out.
    pub(super) fn round(&self, p: Point, except: usize) -> Vec<usize> {
        let mut met = Vec::new();
        self.each_right_of(p, |i, crossings| {
            let path = self.places[i].path;
            if !crossings.is_multiple_of(2) && path != except {
                met.push(path);
            }
        });
        met.sort_unstable();
        met.chunk_by(|a, b| a == b).filter(|c| c.len() % 2 == 1).filter_map(|c| c.first().copied()).collect()
    }

    /// Distance of `p` from the nearest segment of another path than `path`.
    pub(super) fn clearance_from_others(&self, p: Point, path: usize) -> f64 {
        let distance =
            |i: usize| if self.places[i].path == path { f64::INFINITY } else { self.segments[i].distance(p) };
        self.index.nearest(p, f64::MAX, distance).map_or(f64::INFINITY, |n| n.1)
    }

    /// Calls `visit` with each segment near the ray and how often it crosses the ray.
    fn each_right_of(&self, p: Point, mut visit: impl FnMut(usize, usize)) {
        if p.x > self.right {
            return;
        }
        let ray = Rect::new(p.x, p.y, self.right, p.y);
        self.index.search(ray, |i| visit(i, crossings(&self.segments[i], p)));
    }

    /// Is `p` on the left of the segment nearest to it? At a joint both segments decide together, at
    /// the end of a chain its tangent goes on.
    pub(super) fn is_left_of_nearest(&self, p: Point) -> bool {
        let Some((i, _)) = self.index.nearest(p, f64::INFINITY, |i| self.segments[i].distance(p)) else {
            return false;
        };
        let (segment, place) = (&self.segments[i], self.places[i]);
        let near = segment.nearest(p);
        let joint = if near.t <= 0.0 {
            place.before.map(|b| (self.segments[b].tangent_at(1.0), segment.tangent_at(0.0)))
        } else if near.t >= 1.0 {
            place.after.map(|a| (segment.tangent_at(1.0), self.segments[a].tangent_at(0.0)))
        } else {
            None
        };
        match joint {
            Some((arriving, leaving)) => is_left_of_joint(arriving, leaving, p - near.at),
            None => is_left_of(segment, near.t, p),
        }
    }
}

/// Left of a joint, for `v` in the cone of directions nearer to the joint than to either segment: that
/// cone lies round the normal of both directions' mean.
fn is_left_of_joint(arriving: Vec2, leaving: Vec2, v: Vec2) -> bool {
    let mean = arriving + leaving;
    if mean.hypot2() > 1e-18 {
        mean.cross(v) > 0.0
    } else {
        // The chain turns back on itself: all round its tip lies outside of the turn.
        arriving.cross(leaving) < 0.0
    }
}

/// Left of one segment, whose point nearest to `p` is at parameter `t`.
fn is_left_of(segment: &Segment, t: f64, p: Point) -> bool {
    match segment {
        Segment::Line(l) => orientation(l.start, l.end, p) == Side::Left,
        Segment::Arc(a) if t > 0.0 && t < 1.0 => {
            let inside = (p - a.center()).hypot() < a.radius();
            inside == (a.sweep() > 0.0)
        }
        Segment::Arc(a) => a.tangent_at(t).cross(p - a.point_at(t)) > 0.0,
    }
}

/// How often a segment crosses the ray from `p` to the right.
fn crossings(segment: &Segment, p: Point) -> usize {
    match segment {
        Segment::Line(l) => usize::from(crosses(l.start.y, l.end.y, p.y) && is_right_of(l, p)),
        Segment::Arc(a) => arc_crossings(a, p),
    }
}

/// Does a piece between two heights cross the height `y`? The lower end counts, the upper one not.
fn crosses(from: f64, to: f64, y: f64) -> bool {
    (from <= y) != (to <= y)
}

/// Does the line cross the ray right of `p`, given that it crosses its height?
fn is_right_of(l: &Line, p: Point) -> bool {
    let (low, high) = if l.start.y < l.end.y { (l.start, l.end) } else { (l.end, l.start) };
    orientation(low, high, p) == Side::Left
}

/// The same for an arc, cut at its highest and lowest points into pieces of one half each.
fn arc_crossings(a: &Arc, p: Point) -> usize {
    let (center, radius) = (a.center(), a.radius());
    let left = a.sweep() > 0.0;
    let starts_right = half_is_right(a.start() - center, left);
    let cuts = cuts(a, starts_right);
    let mut from = a.start().y;
    let mut right = starts_right;
    let mut count = 0;
    for k in 0..=cuts {
        let to = if k == cuts {
            a.end().y
        } else if right == left {
            center.y + radius
        } else {
            center.y - radius
        };
        if crosses(from, to, p.y) {
            let dy = p.y - center.y;
            let half = ((radius - dy) * (radius + dy)).max(0.0).sqrt();
            let x = if right { center.x + half } else { center.x - half };
            count += usize::from(x > p.x);
        }
        from = to;
        right = !right;
    }
    count
}

/// Is the piece that leaves direction `v` on the right half of the circle? At the highest and lowest
/// point the sense of travel decides.
fn half_is_right(v: Vec2, left: bool) -> bool {
    v.x > 0.0 || (v.x >= 0.0 && ((v.y < 0.0) == left))
}

/// Number of highest and lowest points strictly inside the arc.
fn cuts(a: &Arc, starts_right: bool) -> usize {
    let v = a.start() - a.center();
    let left = a.sweep() > 0.0;
    let target = Vec2::new(0.0, if starts_right == left { 1.0 } else { -1.0 });
    // Angle travelled until the first of them, in (0, pi].
    let first = v.cross(target).atan2(v.dot(target)).abs();
    let halves = (a.sweep().abs() - first) / std::f64::consts::PI;
    let count = halves.ceil().max(0.0);
    // On which half the arc ends is known from its coordinates: that settles whether the count is even
    // where the rounding of angles cannot.
    let ends_right = half_is_right(a.end() - a.center(), !left);
    let even = (count as usize).is_multiple_of(2);
    if even == (ends_right == starts_right) {
        count as usize
    } else if count > 0.0 && halves - (count - 1.0) < 0.5 {
        count as usize - 1
    } else {
        count as usize + 1
    }
}
