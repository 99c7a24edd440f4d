//! Raw edge of straight moves whose radius changes linearly.
//!
//! The discs of one such move fill the convex hull of its first and last disc: its edge is the two
//! common outer tangents and an arc of either disc. With sin(b) = dr/ds the tangents touch every disc
//! in the directions which the normals of the path take when they lean back by b (the envelope of
//! |x - c|^2 = r^2: (x - c).c' + r r' = 0):
//!
//! ```text
//!            __..-- '\           Left contact direction: the tangent turned by 90 degrees + b.
//!     __..--          \          Right contact direction: the tangent turned back by 90 degrees + b.
//!   (  r0 ->        r1 )         Cap at the end: 180 degrees + 2 b; at the start: 180 degrees - 2 b.
//!     ''--..          /
//!            ''--.._./           Where |dr| >= ds the larger disc holds the other: no tangents.
//! ```
//!
//! At a joint the arc about it from one contact direction to the next keeps the curve closed, as it does
//! for a constant radius: where it turns left it holds all that may be edge there; where it turns right
//! it lies under its neighbours. (A direction in which the joint's disc shows lies in the end cap of the
//! move before and in the start cap of the move after; the two caps meet within those arcs.)

use std::f64::consts::PI;

use crate::geometry::{Arc, Point, Segment, Vec2};
use crate::view::{DiscFamily, DiscMove};

use super::raw::{Outward, Pen, RawEdge};
use super::sweep::between;

/// A straight move with the contact directions of its two flanks.
struct Hull {
    source: u32,
    ends: [Point; 2],
    radii: [f64; 2],
    tangent: Vec2,
    /// The angle b by which the normals lean back.
    lean: f64,
    left: Vec2,
    right: Vec2,
}

impl Hull {
    fn new(source: u32, m: &DiscMove) -> Self {
        let d = m.segment.end() - m.segment.start();
        let length = d.hypot();
        let change = m.end_radius - m.radius;
        let leg = ((length - change) * (length + change)).max(0.0).sqrt();
        let (u, n) = (d / length, Vec2::new(-d.y, d.x) / length);
        let (back, out) = (u * (-change / length), n * (leg / length));
        Self {
            source,
            ends: [m.segment.start(), m.segment.end()],
            radii: [m.radius, m.end_radius],
            tangent: u,
            lean: change.atan2(leg),
            left: back + out,
            right: back - out,
        }
    }

    /// Where the disc at an end (0 start, 1 end) touches the tangent with contact direction `toward`.
    fn contact(&self, end: usize, toward: Vec2) -> Point {
        self.ends[end] + toward * self.radii[end]
    }

    /// The arc about the disc at an end, between two contact directions.
    fn arc(&self, end: usize, from: Vec2, to: Vec2, sweep: f64) -> (Segment, Outward) {
        let (at, radius) = (self.ends[end], self.radii[end]);
        let arc = Arc::from_parts(at, radius, at + from * radius, at + to * radius, sweep);
        (Segment::Arc(arc), if sweep < 0.0 { Outward::Left } else { Outward::Right })
    }

    /// Turn from this move's direction to that of `next`, in (-180, 180] degrees.
    fn turn(&self, next: &Self) -> f64 {
        let turn = self.tangent.cross(next.tangent).atan2(self.tangent.dot(next.tangent));
        if turn <= -PI { PI } else { turn }
    }
}

/// Does the larger disc of the move hold the other? It does as good as where the other stands out by no
/// more than an eighth of the coincidence length: a quarter of the depth that decides on edge. (The common
/// tangents would then be as short as the root of that, and touch both circles all along.)
fn swallowed(m: &DiscMove, coincidence: f64) -> bool {
    let length = m.segment.length();
    length <= coincidence || length - (m.end_radius - m.radius).abs() <= 0.125 * coincidence
}

/// Is `m` the move `before` travelled back, to the last digit?
fn retraces(m: &DiscMove, before: &DiscMove) -> bool {
    let back = before.reversed();
    m.segment == back.segment
        && m.radius.to_bits() == back.radius.to_bits()
        && m.end_radius.to_bits() == back.end_radius.to_bits()
}

/// Has the larger disc of the swallowed move at `i` an edge already, as the cap of the move that goes on
/// from it (or came to it)?
fn shown_beside(i: u32, m: &DiscMove, family: &DiscFamily, coincidence: f64) -> bool {
    let (large, beside) = if m.end_radius >= m.radius {
        (m.reversed(), family.moves.get(i as usize + 1).copied())
    } else {
        (*m, (i as usize).checked_sub(1).and_then(|i| family.moves.get(i)).map(DiscMove::reversed))
    };
    beside.is_some_and(|n| {
        n.segment.start() == large.segment.start()
            && n.radius.to_bits() == large.radius.to_bits()
            && !swallowed(&n, coincidence)
    })
}

impl RawEdge {
    /// Adds the raw edge of a chain of straight moves of varying radius. A move that one of its discs
    /// swallows divides the chain, and the disc stands for it; one that retraces the move before adds
    /// nothing.
    pub(super) fn tapered(&mut self, chain: &[(u32, DiscMove)], family: &DiscFamily, coincidence: f64) {
        let mut from = 0;
        for (k, (i, m)) in chain.iter().enumerate() {
            let retraced = k > from && chain.get(k - 1).is_some_and(|(_, b)| retraces(m, b));
            if !retraced && !swallowed(m, coincidence) {
                continue;
            }
            self.hulls(chain.get(from..k).unwrap_or_default(), coincidence);
            from = k + 1;
            if retraced || m.greatest_radius() <= coincidence || shown_beside(*i, m, family, coincidence) {
                continue;
            }
            let center = if m.end_radius >= m.radius { m.segment.end() } else { m.segment.start() };
            let start = self.pieces.len();
            self.disc(*i, center, m.greatest_radius());
            self.ring(start, *i..*i + 1, true);
        }
        self.hulls(chain.get(from..).unwrap_or_default(), coincidence);
    }

    /// Adds the closed curve round an unbroken chain, two of them where it closes.
    fn hulls(&mut self, chain: &[(u32, DiscMove)], coincidence: f64) {
        let hulls: Vec<Hull> = chain.iter().map(|(i, m)| Hull::new(*i, m)).collect();
        let (Some(first), Some(last)) = (hulls.first(), hulls.last()) else { return };
        let moves = first.source..last.source + 1;
        let start = self.pieces.len();
        let closed = hulls.len() > 1
            && (first.ends[0] - last.ends[1]).hypot() <= coincidence
            && first.radii[0].to_bits() == last.radii[1].to_bits();
        let mut pen = Pen::new(self, 0.0, coincidence);
        for (k, h) in hulls.iter().enumerate() {
            let along = Segment::line(h.contact(0, h.right), h.contact(1, h.right));
            pen.push(along, h.source, Outward::Right);
            let (arc, outward) = match hulls.get(k + 1).or(closed.then_some(first)) {
                Some(next) => h.arc(1, h.right, next.right, h.turn(next) + h.lean - next.lean),
                None => h.arc(1, h.right, h.left, PI + 2.0 * h.lean),
            };
            pen.push(arc, h.source, outward);
        }
        if closed {
            pen.close();
            self.ring(start, moves.clone(), false);
            pen = Pen::new(self, 0.0, coincidence);
        }
        for (k, h) in hulls.iter().enumerate().rev() {
            let back = Segment::line(h.contact(1, h.left), h.contact(0, h.left));
            pen.push(back, h.source, Outward::Right);
            let before = k.checked_sub(1).and_then(|k| hulls.get(k)).or(closed.then_some(last));
            let (arc, outward) = match before {
                Some(b) => h.arc(0, h.left, b.left, b.lean - h.lean - b.turn(h)),
                None => h.arc(0, h.left, h.right, PI - 2.0 * h.lean),
            };
            pen.push(arc, h.source, outward);
        }
        let second = pen.first_piece;
        pen.close();
        self.ring(second, moves, hulls.len() == 1);
        self.lead(start);
    }

    /// Leads every piece since `start` exactly from joint to joint: where a disc of hardly any radius was
    /// left out, its neighbours end a little apart.
    fn lead(&mut self, start: usize) {
        let joint = |joints: &[Point], n: u32| joints.get(n as usize).copied();
        for p in self.pieces.get_mut(start..).unwrap_or_default() {
            let (from, to) = (joint(&self.joints, p.joints[0]), joint(&self.joints, p.joints[1]));
            if let (Some(from), Some(to)) = (from, to) {
                p.segment = between(&p.segment, [0.0, 1.0], from, to);
            }
        }
    }
}
