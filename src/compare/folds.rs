//! Where does the path turn more tightly than the cutter's radius, so that its offset runs back over
//! itself?
//!
//! ```text
//!   tight turn                         loop
//!        ____                           \   /
//!      .'    '.   an arc, or a run       \ /     the path crosses back over its own last
//!     |   r'   |  of short moves, of      X      stretch: what trimming of a folded offset
//!     |        |  radius r' < r          / \     should have cut out
//!                                        '-'
//! ```
//!
//! A tight turn is a run of moves to one side whose radius is below the cutter's and whose turn is
//! more than [`LEAST_TURN`] in all: an arc by its radius; a short line between two turns to one side by
//! the radius of the circle through its ends, l / (2 sin((a + b) / 4)) for turns a and b. A single sharp
//! corner is none. A run that goes a whole turn round is a bore or a spiral, no fold. A loop is no longer
//! than the cutter's own circumference.
//!
//! A turn matters on its inner side only: folds are kept where the part lies there within the
//! cutter's reach. Round an inside fillet a little wider than the cutter the path turns as tightly as
//! one likes, with the wall on the outer side, and nothing folds that leaves an edge.

use std::f64::consts::{FRAC_PI_2, PI, TAU};

use crate::geometry::{
    Crossing, Meeting, MeetingKind, Point, Rect, Segment, Turn, Vec2, advancing, crossing,
};
use crate::tolerance::Tolerances;
use crate::view::DiscFamily;

use super::law::{Course, Law};
use super::passes::Passes;
use super::side::{Walls, Where};
use super::{Fold, FoldKind};

/// Turns of less than this in all are none: rounding turns short moves by more than a few degrees.
/// Common practice, no single source.
const LEAST_TURN: f64 = PI / 6.0;

/// A radius must be smaller than the cutter's by this part of it: rolling round an outside corner the
/// path turns with the cutter's radius exactly, as written digits give it.
const TIGHTER_ARC: f64 = 1e-3;

/// The same for short lines, whose turns feel the last written digit more: half a thousandth at each
/// end of a chord that turns a tenth of a radian changes its radius by about this much.
const TIGHTER_LINE: f64 = 0.02;

/// The folds of the path of `family` that matter to the part, in its order. `reach` is how far
/// beyond the cutter's radius the part still counts as touched.
pub(super) fn folds(
    family: &DiscFamily,
    passes: &Passes,
    walls: &Walls,
    reach: f64,
    tolerances: &Tolerances,
) -> Vec<Fold> {
    let mut out: Vec<Fold> = loops(family, passes, tolerances)
        .into_iter()
        .filter(|f| loop_touches(family, walls, f, reach))
        .collect();
    let inside_loop = |m: (usize, usize), loops: &[Fold]| {
        let next = loops.partition_point(|l| l.moves.0 <= m.0);
        loops[..next].last().is_some_and(|l| m.1 <= l.moves.1)
    };
    let turns: Vec<Fold> = tight_turns(family, passes)
        .into_iter()
        .filter(|run| run.touches(family, walls, reach))
        .map(|run| run.fold(family))
        .filter(|f| !inside_loop(f.moves, &out))
        .collect();
    out.extend(turns);
    out.sort_by_key(|f| f.moves);
    out
}

/// A run of moves that turn to one side more tightly than the cutter.
#[derive(Clone, Debug)]
struct Run {
    /// The moves of the run, without those that have no length.
    members: Vec<usize>,
    /// To which side it turns.
    side: Turn,
    /// Turn in all, radians, never negative.
    turn: f64,
    /// Radius of the tightest turn.
    radius: f64,
}

/// Turn at the joint from `a` to `b`, radians, positive to the left.
fn turn_between(a: &Segment, b: &Segment) -> f64 {
    let (t, u) = (a.tangent_at(1.0), b.tangent_at(0.0));
    t.cross(u).atan2(t.dot(u))
}

/// Turns at both ends of the line `m` between its neighbours, when both are to one side.
fn turns_round(before: &Segment, m: &Segment, after: &Segment) -> Option<(f64, f64)> {
    let (a, b) = (turn_between(before, m), turn_between(m, after));
    // A corner of more than a right angle is a corner or a way back, no part of a curve.
    let gentle = |x: f64| x.abs() <= FRAC_PI_2 + 1e-9 && x != 0.0;
    (gentle(a) && gentle(b) && (a > 0.0) == (b > 0.0)).then_some((a, b))
}

/// Runs of tight moves, in order.
fn tight_turns(family: &DiscFamily, passes: &Passes) -> Vec<Run> {
    let long: Vec<usize> =
        (0..family.moves.len()).filter(|&i| family.moves[i].segment.length() > 0.0).collect();
    let mut runs: Vec<Run> = Vec::new();
    let mut last: Option<(usize, Turn)> = None;
    for (position, &i) in long.iter().enumerate() {
        let m = &family.moves[i];
        let neighbour =
            |j: Option<&usize>| j.filter(|&&j| passes.same_cut(i, j)).map(|&j| &family.moves[j].segment);
        let before = position.checked_sub(1).and_then(|q| neighbour(long.get(q)));
        let after = neighbour(long.get(position + 1));
        let (radius, side, joint) = match (&m.segment, before, after) {
            (Segment::Arc(a), ..) => (a.radius(), a.turn(), 0.0),
            (s @ Segment::Line(_), Some(before), Some(after)) => match turns_round(before, s, after) {
                Some((a, b)) => (
                    s.length() / (2.0 * (0.25 * (a + b).abs()).sin()),
                    if a > 0.0 { Turn::Left } else { Turn::Right },
                    b.abs(),
                ),
                None => continue,
            },
            _ => continue,
        };
        let tighter = if matches!(m.segment, Segment::Arc(_)) { TIGHTER_ARC } else { TIGHTER_LINE };
        if radius >= m.radius * (1.0 - tighter) {
            continue;
        }
        let entry = before.map_or(0.0, |b| turn_between(b, &m.segment) * side.sign()).max(0.0);
        let own = match &m.segment {
            Segment::Arc(a) => a.sweep().abs(),
            Segment::Line(_) => joint,
        };
        let goes_on =
            position > 0 && last.is_some_and(|(l, s)| l + 1 == position && s == side) && before.is_some();
        match runs.last_mut() {
            Some(run) if goes_on => {
                // A line counted its own end; after an arc the joint is still to be counted.
                let after_arc = matches!(before, Some(Segment::Arc(_)));
                run.turn += own + if after_arc { entry } else { 0.0 };
                run.radius = run.radius.min(radius);
                run.members.push(i);
            }
            _ => {
                let turn = own + if matches!(m.segment, Segment::Line(_)) { entry } else { 0.0 };
                runs.push(Run { members: vec![i], side, turn, radius });
            }
        }
        last = Some((position, side));
    }
    runs.retain(|r| r.turn >= LEAST_TURN && r.turn < TAU - 1e-6);
    runs
}

impl Run {
    /// Does the part lie on the inner side of the turn, within the reach of the cutter?
    fn touches(&self, family: &DiscFamily, walls: &Walls, reach: f64) -> bool {
        self.members.iter().any(|&i| {
            let m = &family.moves[i];
            [0.0, 0.5, 1.0].into_iter().any(|t| {
                let center = m.segment.point_at(t);
                let inner = m.segment.left_normal_at(t) * self.side.sign();
                touch(walls, center, m.radius + reach)
                    .is_some_and(|(w, toward)| w == Where::Material || toward.dot(inner) > 0.0)
            })
        })
    }

    fn fold(&self, family: &DiscFamily) -> Fold {
        let (first, last) = (self.members[0], self.members[self.members.len() - 1]);
        let middle = self.members[self.members.len() / 2];
        Fold {
            kind: FoldKind::TightTurn,
            moves: (first, last),
            at: family.moves[middle].segment.point_at(0.5),
            radius: self.radius,
        }
    }
}

/// Side of `center` and the way to the nearest point of the contour, when that is within `reach` or
/// the centre is in the part.
fn touch(walls: &Walls, center: Point, reach: f64) -> Option<(Where, Vec2)> {
    let (k, distance) = walls.targets.nearest(center, None)?;
    let side = walls.of(center, k, walls.targets.feature_at(k, center));
    let toward = walls.targets.segment(k).nearest(center).at - center;
    (distance <= reach || side == Where::Material).then_some((side, toward))
}

fn loop_touches(family: &DiscFamily, walls: &Walls, fold: &Fold, reach: f64) -> bool {
    family.moves[fold.moves.0..=fold.moves.1].iter().any(|m| {
        let half = 0.5 * m.segment.length().min(TAU * m.radius);
        touch(walls, m.segment.point_at(0.5), m.radius + reach + half).is_some()
    })
}

/// Places where the path crosses back over its last stretch, no longer ago than the cutter's
/// circumference; loops do not overlap.
fn loops(family: &DiscFamily, passes: &Passes, tolerances: &Tolerances) -> Vec<Fold> {
    let within = tolerances.coincidence;
    let chunks = Chunks::new(family, within);
    let mut out: Vec<Fold> = Vec::new();
    let mut near = Vec::new();
    for number in 0..chunks.list.len() {
        chunks.later(number, family, passes, &mut near);
        if near.is_empty() {
            continue;
        }
        for i in chunks.moves(number) {
            if out.last().is_some_and(|l| i < l.moves.1) {
                continue;
            }
            let longest = TAU * family.moves[i].radius;
            let window = family.moves[i].segment.bounds().inflate(within, within);
            let back = near.iter().flat_map(|&n| chunks.moves(n)).find_map(|j| {
                let meets = shares(window, family.moves[j].segment.bounds());
                let close = || passes.same_cut(i, j) && passes.way_between(i, j) <= longest;
                let found = (meets && close()).then(|| crossing_back(family, passes, (i, j), within));
                found.flatten().filter(|(_, way)| *way <= longest).map(|(at, _)| (j, at))
            });
            if let Some((j, at)) = back {
                let radius = 0.5 * width(family, i, j, at);
                out.push(Fold { kind: FoldKind::Loop, moves: (i, j), at, radius });
            }
        }
    }
    out
}

/// Do two boxes share a point?
fn shares(a: Rect, b: Rect) -> bool {
    a.x0 <= b.x1 && b.x0 <= a.x1 && a.y0 <= b.y1 && b.y0 <= a.y1
}

/// Moves in one chunk, at most.
const CHUNK: usize = 32;

/// Some moves in a row that advance one way.
struct Chunk {
    first: usize,
    /// Box round them, with room for touching.
    around: Rect,
    /// Number of the stretch it belongs to: moves of one stretch do not cross one another
    /// ([`advancing`]).
    stretch: usize,
}

/// The moves of a family in chunks, in order.
struct Chunks {
    list: Vec<Chunk>,
    count: usize,
}

impl Chunks {
    fn new(family: &DiscFamily, within: f64) -> Self {
        let moves = &family.moves;
        let starts = advancing(moves.iter().map(|m| &m.segment), 4.0 * within);
        let mut list = Vec::new();
        for (stretch, &from) in starts.iter().enumerate() {
            let to = starts.get(stretch + 1).copied().unwrap_or(moves.len());
            for first in (from..to).step_by(CHUNK) {
                let boxes = moves[first..(first + CHUNK).min(to)].iter().map(|m| m.segment.bounds());
                let around = boxes.reduce(|a, b| a.union(b)).unwrap_or(Rect::ZERO).inflate(within, within);
                list.push(Chunk { first, around, stretch });
            }
        }
        Self { list, count: moves.len() }
    }

    fn moves(&self, number: usize) -> std::ops::Range<usize> {
        let first = self.list.get(number).map_or(self.count, |c| c.first);
        first..self.list.get(number + 1).map_or(self.count, |c| c.first)
    }

    /// Later chunks of the same cut that may cross chunk `number` no farther on than the cutter's
    /// circumference.
    fn later(&self, number: usize, family: &DiscFamily, passes: &Passes, out: &mut Vec<usize>) {
        out.clear();
        let own = &self.list[number];
        let range = self.moves(number);
        let radius = family.moves[range.clone()].iter().map(|m| m.radius).fold(0.0, f64::max);
        let last = range.end - 1;
        for (n, other) in self.list.iter().enumerate().skip(number + 1) {
            if !passes.same_cut(last, other.first) || passes.way_between(last, other.first) > TAU * radius {
                break;
            }
            if other.stretch != own.stretch && shares(own.around, other.around) {
                out.push(n);
            }
        }
    }
}

/// Where move `j` crosses the earlier move `i`, and the way along the path from there to there.
///
/// A touch crosses only where an end lies within the other move and the path goes on to its other
/// side; where the path merely comes back to a joint of its own (a closed contour) it has closed.
fn crossing_back(
    family: &DiscFamily,
    passes: &Passes,
    (i, j): (usize, usize),
    within: f64,
) -> Option<(Point, f64)> {
    let (first, second) = (&family.moves[i].segment, &family.moves[j].segment);
    let Crossing::Points(points) = crossing(first, second, within) else {
        return None;
    };
    let crosses = |m: &Meeting| match m.kind {
        MeetingKind::Proper => true,
        MeetingKind::Touch if 0.0 < m.t[0] && m.t[0] < 1.0 && m.t[1] >= 1.0 => {
            let along = first.tangent_at(m.t[0]);
            let next = family.moves.get(j + 1).filter(|_| passes.same_cut(j, j + 1));
            next.is_some_and(|n| {
                along.cross(second.tangent_at(1.0)) * along.cross(n.segment.tangent_at(0.0)) > 0.0
            })
        }
        MeetingKind::Touch => false,
    };
    let meeting = points.iter().filter(crosses).min_by(|a, b| a.t[1].total_cmp(&b.t[1]))?;
    let rest = first.length() * (1.0 - meeting.t[0]) + second.length() * meeting.t[1];
    Some((meeting.at, passes.way_between(i, j) + rest))
}

/// Greatest distance of the loop's path from its crossing.
fn width(family: &DiscFamily, i: usize, j: usize, at: Point) -> f64 {
    let inner = family.moves.get(i + 1..j).unwrap_or_default();
    let far = |s: &Segment| {
        let course = Course::new(s);
        Law { wave: course.distance_to(at), circle: 0.0, less: 0.0 }.greatest(0.0, course.length()).1
    };
    let ends = [family.moves[i].segment.end(), family.moves[j].segment.start()];
    let reach = ends.into_iter().map(|p| (p - at).hypot()).fold(0.0, f64::max);
    inner.iter().map(|m| far(&m.segment)).fold(reach, f64::max)
}

#[cfg(test)]
mod tests;
