//! Which parts of the raw edge can be swept edge at all?
//!
//! Most of a raw edge lies deep under other moves. One clearance question removes a stretch of it,
//! by one of two inequalities:
//!
//! - D is 1-Lipschitz, so a point at depth h under the edge has no edge nearer than h: the stretch of
//!   length h to each side of it is covered.
//! - A straight piece meets the disc sweep of one straight move in a single interval, because that
//!   sweep is convex; the whole interval is covered. (The discs of a linear radius too: |x - c(t)| - r(t)
//!   is convex in x and t together, and so its least over t is convex in x.)
//!
//! Only stretches covered by more than `margin` are removed, so nothing within rounding of the edge is.

use crate::geometry::{Line, Segment, Vec2};
use crate::view::{DiscFamily, DiscMove};

use super::clearance::Clearance;

/// Longest bisection of a piece that shows no cover in its middle.
const HALVINGS: u32 = 5;

/// Halvings that find where a line leaves a disc's sweep: to 4e-6 of the part.
const NARROWINGS: u32 = 18;

/// Share of a part that one clearance question must remove to be worth the next one.
const WORTHWHILE: f64 = 0.2;

/// A part of a piece that may be edge, by parameters; `cut` says which ends were made here, deep under
/// another move.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Open {
    pub from: f64,
    pub to: f64,
    pub cut: [bool; 2],
}

/// Appends to `open` the parts of `piece` that are not covered by more than `margin`, in order.
pub(crate) fn open_parts(
    piece: &Segment,
    family: &DiscFamily,
    clearance: &Clearance,
    margin: f64,
    open: &mut Vec<Open>,
) {
    let length = piece.length();
    let mut pile = vec![(Open { from: 0.0, to: 1.0, cut: [false, false] }, 0u32)];
    let first = open.len();
    while let Some((part, halved)) = pile.pop() {
        if part.to <= part.from {
            continue;
        }
        let middle = 0.5 * (part.from + part.to);
        let at = piece.point_at(middle);
        let deep = clearance.below(at, -margin).filter(|c| c.clearance < -margin);
        let Some(deep) = deep else {
            let radius = family.moves.first().map_or(0.0, DiscMove::greatest_radius);
            if halved < HALVINGS && (part.to - part.from) * length > 2.0 * radius {
                let [a, b] = part.cut;
                pile.push((Open { from: middle, to: part.to, cut: [false, b] }, halved + 1));
                pile.push((Open { from: part.from, to: middle, cut: [a, false] }, halved + 1));
            } else {
                append(open, first, part);
            }
            continue;
        };
        let step = (-deep.clearance - margin) / length;
        let (mut low, mut high) = (middle - step, middle + step);
        if let (Segment::Line(line), Some(m)) = (piece, family.moves.get(deep.source))
            && let Segment::Line(under) = &m.segment
        {
            if !m.is_constant() {
                low = low.min(covered_until(line, m, margin, middle, part.from));
                high = high.max(covered_until(line, m, margin, middle, part.to));
            } else if let Some((from, to)) = covered_interval(line, under, m.radius - margin) {
                low = low.min(from);
                high = high.max(to);
            }
        }
        // A shallow cover that hides only a little of a long part is left to the crossings: questions
        // would nibble at it without end. Discs of varying radius often pass through one point, with
        // all their inner flanks; there a few more questions spare a crossing of each with each.
        let mut halved = halved;
        if high.min(part.to) - low.max(part.from) < WORTHWHILE * (part.to - part.from) {
            if family.moves.get(deep.source).is_none_or(DiscMove::is_constant) || halved >= HALVINGS {
                append(open, first, part);
                continue;
            }
            halved += 1;
        }
        let [a, b] = part.cut;
        if high < part.to {
            pile.push((Open { from: high.max(part.from), to: part.to, cut: [true, b] }, halved));
        }
        if low > part.from {
            pile.push((Open { from: part.from, to: low.min(part.to), cut: [a, true] }, halved));
        }
    }
}

/// Appends a part, joined to the one before where that was only halved.
fn append(open: &mut Vec<Open>, first: usize, part: Open) {
    let joins = open.len() > first;
    match open.last_mut() {
        Some(last) if joins && !last.cut[1] && !part.cut[0] => {
            last.to = part.to;
            last.cut[1] = part.cut[1];
        }
        _ => open.push(part),
    }
}

/// How far from `inside` towards `end` the line stays deeper than `margin` under the straight move `m`:
/// at least as far as the parameter returned. Halving, for the depth is convex along the line.
fn covered_until(line: &Line, m: &DiscMove, margin: f64, inside: f64, end: f64) -> f64 {
    let deep = |t: f64| m.clearance(line.point_at(t)) < -margin;
    if deep(end) {
        return end;
    }
    let (mut covered, mut open) = (inside, end);
    for _ in 0..NARROWINGS {
        let middle = 0.5 * (covered + open);
        if deep(middle) { covered = middle } else { open = middle }
    }
    covered
}

/// Interval of parameters in which `line` lies within `radius` of `under`: the sweep of a disc along a
/// line is convex, so there is at most one.
fn covered_interval(line: &Line, under: &Line, radius: f64) -> Option<(f64, f64)> {
    let d = line.vector();
    let length = d.hypot();
    let u = d / length;
    let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
    let mut include = |from: f64, to: f64| {
        low = low.min(from);
        high = high.max(to);
    };
    for end in [under.start, under.end] {
        let v = end - line.start;
        let (along, height) = (v.dot(u), u.cross(v));
        let half = (radius - height) * (radius + height);
        if half > 0.0 {
            include(along - half.sqrt(), along + half.sqrt());
        }
    }
    if let Some((from, to)) = in_strip(line, u, under, radius) {
        include(from, to);
    }
    (low < high).then_some((low / length, high / length))
}

/// Interval of lengths along `line` (direction `u`) inside the rectangle of half width `radius` round
/// `under`.
fn in_strip(line: &Line, u: Vec2, under: &Line, radius: f64) -> Option<(f64, f64)> {
    let span = under.length();
    let t = under.tangent();
    let v = line.start - under.start;
    let (mut from, mut to) = (f64::NEG_INFINITY, f64::INFINITY);
    for (at, rate, low, high) in [(v.dot(t), u.dot(t), 0.0, span), (t.cross(v), t.cross(u), -radius, radius)]
    {
        if rate.abs() < 1e-300 {
            if at < low || at > high {
                return None;
            }
            continue;
        }
        let (a, b) = ((low - at) / rate, (high - at) / rate);
        from = from.max(a.min(b));
        to = to.min(a.max(b));
    }
    (from < to && from.is_finite() && to.is_finite()).then_some((from, to))
}
