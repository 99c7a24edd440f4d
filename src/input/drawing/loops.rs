//! Are the loops of a drawing sound? They may touch, at a corner or along a tangent, but neither cross
//! nor run along one another: then nobody can say what is inside. A loop drawn twice is kept once.
//!
//! ```text
//!   cross: the two ways of B leave the meeting point on different sides of A.   A_out  B_out
//!   touch: both leave on the same side. Where directions agree, curvature            \ /
//!   decides which lies to the left.                                            B_in --+-- A_in
//! ```

use super::join::Gaps;
use crate::geometry::{
    BoxIndex, Contour, Crossing, MeetingKind, Path, Point, Rect, Segment, Vec2, advancing, crossing,
};
use crate::input::{Place, Problem, Refusal};
use crate::part::Origin;

/// Crossings shallower than this length count as touching: what a file of six decimals scatters.
pub(super) const TOUCH: f64 = 1e-6;

/// The contour without copies of loops, if no path crosses another or itself.
///
/// # Errors
/// The first crossing, with its place and the lines of both entities.
pub(super) fn checked(
    contour: Contour,
    origins: Vec<Origin>,
    gaps: Gaps,
    problems: &mut Vec<Problem>,
) -> Result<(Contour, Vec<Origin>), Refusal> {
    let copies = duplicates(&contour, 2.0 * gaps.same.max(TOUCH));
    let (contour, origins) = without(contour, origins, &copies, problems);
    let Some((at, a, b)) = first_crossing(&contour) else {
        return Ok((contour, origins));
    };
    let place = |i: usize| {
        origins.get(i).map_or_else(Place::default, |o| Place {
            file: o.file.clone(),
            line: o.line,
            ..Place::default()
        })
    };
    let of = |i: usize| place(i).line.map_or_else(String::new, |l| format!(" of line {l}"));
    let found = if a == b {
        format!("the chain{} crosses itself or runs along itself at ({:.6}, {:.6})", of(a), at.x, at.y)
    } else {
        format!("the chain{} crosses or runs along the chain{} at ({:.6}, {:.6})", of(a), of(b), at.x, at.y)
    };
    Err(vec![Problem::error(
        place(a.max(b)),
        found,
        "loops that lie beside or inside one another",
        "trim the entities to their common point, or take only the layer of the finished contour (--layer)",
    )])
}

/// Leaves the paths at `copies` out, and says so.
fn without(
    contour: Contour,
    origins: Vec<Origin>,
    copies: &[usize],
    problems: &mut Vec<Problem>,
) -> (Contour, Vec<Origin>) {
    let Some(first) = copies.first() else {
        return (contour, origins);
    };
    let place = origins.get(*first).map_or_else(Place::default, |o| Place {
        file: o.file.clone(),
        line: o.line,
        ..Place::default()
    });
    problems.push(Problem::warning(
        place,
        format!("{} of the loops drawn twice left out", copies.len()),
        "every loop once",
        "nothing: one copy was kept; delete the others",
    ));
    let kept = |i: &usize| copies.binary_search(i).is_err();
    let count = contour.paths().len();
    let paths: Vec<Path> = (0..count).filter(kept).filter_map(|i| contour.paths().get(i).cloned()).collect();
    let origins = (0..count).filter(kept).filter_map(|i| origins.get(i).cloned()).collect();
    // The first of every set of copies stays, so the contour is never empty.
    (Contour::new(paths, contour.bound()).unwrap_or(contour), origins)
}

/// Positions of closed loops that lie on an earlier one within `same`, in ascending order: the same
/// loop from another start, the other way round or cut into other segments.
#[must_use]
pub fn duplicates(contour: &Contour, same: f64) -> Vec<usize> {
    let boxes: Vec<Rect> = contour.paths().iter().map(Path::bounds).collect();
    let corners: Vec<Rect> = boxes.iter().map(|b| Rect::new(b.x0, b.y0, b.x0, b.y0)).collect();
    let index = BoxIndex::new(&corners);
    let mut copies: Vec<usize> = Vec::new();
    for (i, (path, bounds)) in contour.paths().iter().zip(&boxes).enumerate() {
        if !path.is_closed() {
            continue;
        }
        let mut near = Vec::new();
        let corner = Rect::new(bounds.x0, bounds.y0, bounds.x0, bounds.y0).inflate(same, same);
        index.search(corner, |j| {
            if j < i {
                near.push(j);
            }
        });
        near.sort_unstable();
        let copy = near.into_iter().filter(|j| copies.binary_search(j).is_err()).any(|j| {
            contour.paths().get(j).is_some_and(|other| {
                other.is_closed() && lies_on(path, other, same) && lies_on(other, path, same)
            })
        });
        if copy {
            copies.push(i);
        }
    }
    copies
}

/// Do the ends and middles of `a`'s segments lie on `b`, and is it as long?
fn lies_on(a: &Path, b: &Path, same: f64) -> bool {
    if (a.length() - b.length()).abs() > same * (a.segments().len() + b.segments().len()) as f64 {
        return false;
    }
    let boxes: Vec<Rect> = b.segments().iter().map(Segment::bounds).collect();
    let index = BoxIndex::new(&boxes);
    let distance = |p: Point| {
        index.nearest(p, f64::INFINITY, |i| b.segments().get(i).map_or(f64::INFINITY, |s| s.distance(p)))
    };
    a.segments()
        .iter()
        .flat_map(|s| [s.start(), s.point_at(0.5)])
        .all(|p| distance(p).is_some_and(|(_, d)| d <= same))
}

/// Where paths first cross or run along one another: the point and the positions of both paths, equal
/// where a path crosses itself. Touching is no crossing: at a shared point both ways of the one lie on
/// the same side of the other. Crossings shallower than a micrometre (1e-6 of a millimetre) count as
/// touching.
#[must_use]
pub fn first_crossing(contour: &Contour) -> Option<(Point, usize, usize)> {
    let items = Items::new(contour);
    let chunks = items.chunks();
    let boxes: Vec<Rect> = chunks.iter().map(|c| c.around).collect();
    let index = BoxIndex::new(&boxes);
    let mut near = Vec::new();
    for (number, chunk) in chunks.iter().enumerate() {
        near.clear();
        index.search(chunk.around, |n| {
            // Segments of one stretch do not cross one another.
            if n > number && chunks[n].stretch != chunk.stretch {
                near.push(n);
            }
        });
        near.sort_unstable();
        for i in chunk.range.clone() {
            for j in near.iter().flat_map(|&n| chunks[n].range.clone()) {
                let at = items.meet(i, j).then(|| items.crossing(i, j)).flatten();
                if let Some(at) = at {
                    return Some((at, items.path(i), items.path(j)));
                }
            }
        }
    }
    None
}

/// Segments in one chunk, at most.
const CHUNK: usize = 16;

/// Some segments of one path in a row that advance one way.
struct Chunk {
    range: std::ops::Range<usize>,
    /// Box round them, with room for touching.
    around: Rect,
    /// Number of the stretch it belongs to.
    stretch: usize,
}

/// Segments of a contour with their neighbours.
struct Items<'a> {
    segments: Vec<&'a Segment>,
    /// Position of the path of each.
    paths: Vec<u32>,
    /// First segment of each path, and whether it is a loop; the number of segments last.
    firsts: Vec<(usize, bool)>,
}

/// A way that leaves a point: direction and how it bends to the left.
#[derive(Clone, Copy)]
struct Way {
    direction: Vec2,
    curvature: f64,
}

impl<'a> Items<'a> {
    fn new(contour: &'a Contour) -> Self {
        let segments: Vec<&Segment> = contour.segments().map(|(_, s)| s).collect();
        let paths = contour.segments().map(|(path, _)| u32::try_from(path).unwrap_or(u32::MAX)).collect();
        let mut firsts = vec![(0, false)];
        for path in contour.paths() {
            if let Some(last) = firsts.last_mut() {
                last.1 = path.is_closed();
                let next = last.0 + path.segments().len();
                firsts.push((next, false));
            }
        }
        Self { segments, paths, firsts }
    }

    /// First segment of the path of segment `i`, the last one, and whether the path is a loop.
    fn range(&self, i: usize) -> Option<(usize, usize, bool)> {
        let path = self.path(i);
        let &(first, closed) = self.firsts.get(path)?;
        let last = self.firsts.get(path + 1)?.0.checked_sub(1)?;
        Some((first, last, closed))
    }

    /// The segment before `i` on its path.
    fn before(&self, i: usize) -> Option<usize> {
        let (first, last, closed) = self.range(i)?;
        if i > first { Some(i - 1) } else { closed.then_some(last) }
    }

    /// The segment after `i` on its path.
    fn after(&self, i: usize) -> Option<usize> {
        let (first, last, closed) = self.range(i)?;
        if i < last { Some(i + 1) } else { closed.then_some(first) }
    }

    /// The segments in chunks, in order.
    fn chunks(&self) -> Vec<Chunk> {
        let count = self.segments.len();
        // Ways that are compared at a touch lie up to four touches apart.
        let mut starts = advancing(self.segments.iter().copied(), 4.0 * TOUCH);
        // Two paths that meet end to end are two stretches all the same.
        starts.extend((1..count).filter(|&i| self.path(i) != self.path(i - 1)));
        starts.sort_unstable();
        starts.dedup();
        let mut chunks = Vec::new();
        for (stretch, &from) in starts.iter().enumerate() {
            let to = starts.get(stretch + 1).copied().unwrap_or(count);
            for first in (from..to).step_by(CHUNK) {
                let range = first..(first + CHUNK).min(to);
                let boxes = self.segments.get(range.clone()).unwrap_or_default().iter().map(|s| s.bounds());
                let around = boxes.reduce(|a, b| a.union(b)).unwrap_or(Rect::ZERO).inflate(TOUCH, TOUCH);
                chunks.push(Chunk { range, around, stretch });
            }
        }
        chunks
    }

    /// Do the boxes of two segments meet, with room for touching?
    fn meet(&self, i: usize, j: usize) -> bool {
        let (Some(a), Some(b)) = (self.segments.get(i), self.segments.get(j)) else { return false };
        let (a, b) = (a.bounds().inflate(TOUCH, TOUCH), b.bounds().inflate(TOUCH, TOUCH));
        a.x0 <= b.x1 && b.x0 <= a.x1 && a.y0 <= b.y1 && b.y0 <= a.y1
    }

    fn path(&self, i: usize) -> usize {
        self.paths.get(i).map_or(0, |p| *p as usize)
    }

    fn crossing(&self, i: usize, j: usize) -> Option<Point> {
        let at_touch = |p: Point| self.crosses_at(p, i, j).then_some(p);
        match crossing(self.segments.get(i)?, self.segments.get(j)?, TOUCH) {
            Crossing::None => None,
            Crossing::Points(meetings) => meetings.iter().find_map(|m| match m.kind {
                MeetingKind::Proper => Some(m.at),
                MeetingKind::Touch => at_touch(m.at),
            }),
            Crossing::Overlap(stretches) => stretches.iter().find_map(|o| {
                if o.from == o.to { at_touch(o.from.at) } else { Some(o.from.at.midpoint(o.to.at)) }
            }),
        }
    }

    /// Do the passes of segments `i` and `j` through `p`, an end of one of them, change sides?
    fn crosses_at(&self, p: Point, i: usize, j: usize) -> bool {
        if self.is_joint(p, i, j) {
            return false;
        }
        let (Some([in_a, out_a]), Some([in_b, out_b])) = (self.ways(p, i), self.ways(p, j)) else {
            return false;
        };
        match (is_between(in_b, out_a, in_a), is_between(out_b, out_a, in_a)) {
            (Some(x), Some(y)) => x != y,
            _ => false,
        }
    }

    /// Is `p` the joint of two neighbours?
    fn is_joint(&self, p: Point, i: usize, j: usize) -> bool {
        let Some(a) = self.segments.get(i) else { return false };
        (self.after(i) == Some(j) && near(a.end(), p)) || (self.before(i) == Some(j) && near(a.start(), p))
    }

    /// The two ways in which the path of segment `i` leaves `p`: back along it, and on along it.
    fn ways(&self, p: Point, i: usize) -> Option<[Way; 2]> {
        let segment = *self.segments.get(i)?;
        let (arriving, leaving, t_in, t_out) = if near(segment.start(), p) {
            (*self.segments.get(self.before(i)?)?, segment, 1.0, 0.0)
        } else if near(segment.end(), p) {
            (segment, *self.segments.get(self.after(i)?)?, 1.0, 0.0)
        } else {
            let t = segment.nearest(p).t;
            (segment, segment, t, t)
        };
        Some([
            Way { direction: -arriving.tangent_at(t_in), curvature: -arriving.curvature() },
            Way { direction: leaving.tangent_at(t_out), curvature: leaving.curvature() },
        ])
    }
}

fn near(a: Point, b: Point) -> bool {
    (a - b).hypot() <= 2.0 * TOUCH
}

/// Does `way` lie between `from` and `to`, counter-clockwise? Nothing where it agrees with one of them.
fn is_between(way: Way, from: Way, to: Way) -> Option<bool> {
    let angle = |w: Way| {
        let raw = from.direction.cross(w.direction).atan2(from.direction.dot(w.direction));
        if raw < 0.0 { raw + std::f64::consts::TAU } else { raw }
    };
    // Directions this close, in radians, count as one: curvature tells them apart.
    const SAME: f64 = 1e-6;
    let (a, b) = (angle(way), angle(to));
    let bends = |other: Way| {
        let more = way.curvature - other.curvature;
        (more.abs() > 1e-9).then_some(more > 0.0)
    };
    if !(SAME..=std::f64::consts::TAU - SAME).contains(&a) {
        bends(from)
    } else if (a - b).abs() < SAME {
        bends(to).map(|left| !left)
    } else {
        Some(a < b)
    }
}

#[cfg(test)]
mod tests;
