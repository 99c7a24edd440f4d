//! Raw edge: what each disc would leave if it were alone.
//!
//! ```text
//!        <---- left offset, travelled backwards ----
//!      .'                                            '.     one closed curve round each unbroken
//!   cap (      ------- path of the centre ------>      ) cap   chain of moves, material on its left
//!      '.                                            .'
//!        ----- right offset, travelled forwards ---->
//! ```
//!
//! At every joint the offsets of two moves are connected by an arc about the joint. On the outer side
//! of a turn that arc is edge; on the inner side it lies under both moves and is covered. It is kept
//! all the same, for then the raw edge is closed by construction: which pieces follow one another is
//! known by number, never by looking for near ends.

use std::f64::consts::PI;

use crate::geometry::{Arc, Line, Offset, Point, Segment, Vec2};
use crate::view::{DiscFamily, DiscMove};

use super::run::Run;

/// A piece of raw edge.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Raw {
    /// Where it runs.
    pub segment: Segment,
    /// The move that makes it, by position in the family.
    pub source: u32,
    /// Numbers of the joints at its start and end.
    pub joints: [u32; 2],
    /// Where it lies seen from the centre of the disc that makes it.
    pub outward: Outward,
}

/// In which direction the material ends at a piece of raw edge.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Outward {
    /// To the right of travel.
    Right,
    /// To the left: arcs that run backwards, as the offset of an arc tighter than the cutter does.
    Left,
}

impl Raw {
    /// Unit vector out of the material at parameter `t`.
    pub fn outward_at(&self, t: f64) -> Vec2 {
        let left = self.segment.left_normal_at(t);
        match self.outward {
            Outward::Right => -left,
            Outward::Left => left,
        }
    }
}

/// Raw edge of a family: closed curves, each unbroken chain of moves by itself.
#[derive(Clone, Debug, Default)]
pub(crate) struct RawEdge {
    pub pieces: Vec<Raw>,
    /// Place of each joint.
    pub joints: Vec<Point>,
    /// The closed curves, one after the other.
    pub rings: Vec<Ring>,
}

/// One closed curve of raw edge.
#[derive(Clone, Debug)]
pub(crate) struct Ring {
    /// Its pieces.
    pub pieces: std::ops::Range<usize>,
    /// The moves round which it runs, by position in the family.
    pub moves: std::ops::Range<u32>,
    /// Is it the true edge of the sweep of those moves, so that only other moves can cover it?
    pub true_edge: bool,
}

/// Fewest lines that are worth a run of their own.
const SHORTEST_RUN: usize = 1;

/// Cosine of the widest angle between two moves of a run: 150 degrees, so that each advances along the
/// run by at least a quarter of its length.
const WIDEST: f64 = -0.866;

impl RawEdge {
    /// Raw edge of `family`. Pieces shorter than `coincidence` are left out: their ends become one.
    pub fn new(family: &DiscFamily, coincidence: f64) -> Self {
        let mut edge = Self::default();
        let mut chain: Vec<(u32, Segment)> = Vec::new();
        let mut radius = 0.0;
        let mut taper: Vec<(u32, DiscMove)> = Vec::new();
        for (i, m) in (0u32..).zip(&family.moves) {
            if m.greatest_radius() <= coincidence {
                continue; // sweeps no area
            }
            if !(m.is_constant() && taper.is_empty()) {
                let follows = taper.last().is_some_and(|(_, b)| {
                    (b.segment.end() - m.segment.start()).hypot() <= coincidence
                        && b.end_radius.to_bits() == m.radius.to_bits()
                });
                if !follows || m.is_constant() {
                    edge.tapered(&taper, family, coincidence);
                    taper.clear();
                }
            }
            if !m.is_constant() {
                edge.chain(&chain, radius, coincidence);
                chain.clear();
                taper.push((i, *m));
                continue;
            }
            // Ends nearer than the coincidence length are one joint; joints go by number from here on.
            let follows =
                chain.last().is_some_and(|(_, s)| (s.end() - m.segment.start()).hypot() <= coincidence)
                    && m.radius.to_bits() == f64::to_bits(radius);
            if !follows {
                edge.chain(&chain, radius, coincidence);
                chain.clear();
                radius = m.radius;
            }
            match chain.last_mut() {
                // A stop on the way adds nothing; a longer move takes the place of a stop.
                Some(_) if is_point(&m.segment, coincidence) => {}
                Some(last) if is_point(&last.1, coincidence) => *last = (i, m.segment),
                _ => chain.push((i, m.segment)),
            }
        }
        edge.chain(&chain, radius, coincidence);
        edge.tapered(&taper, family, coincidence);
        edge
    }

    /// Adds the raw edge of one chain: monotone runs of lines by their true edge, the rest piece by piece.
    fn chain(&mut self, chain: &[(u32, Segment)], radius: f64, coincidence: f64) {
        let mut rest = chain;
        let mut plain = 0;
        while plain < rest.len() {
            let ahead = rest.get(plain..).unwrap_or_default();
            let (length, direction) = run_length(ahead);
            if length < SHORTEST_RUN {
                plain += 1;
                continue;
            }
            let (before, from) = rest.split_at(plain);
            let (run, after) = from.split_at(length);
            self.plain(before, radius, coincidence);
            self.run(run, direction, radius, coincidence);
            (rest, plain) = (after, 0);
        }
        self.plain(rest, radius, coincidence);
    }

    /// Adds the true edge of a monotone run.
    fn run(&mut self, chain: &[(u32, Segment)], ahead: Vec2, radius: f64, coincidence: f64) {
        let lines: Vec<Line> = chain.iter().map(|(_, s)| Line::new(s.start(), s.end())).collect();
        let mut boundary = Vec::new();
        Run { lines: &lines, ahead, radius }.boundary(coincidence, &mut boundary);
        let first = self.joints.len() as u32;
        let count = boundary.len() as u32;
        let start = self.pieces.len();
        for (k, p) in (0u32..).zip(&boundary) {
            self.joints.push(p.segment.start());
            let end = if k + 1 == count { first } else { first + k + 1 };
            let source = chain.get(p.line as usize).map_or(0, |c| c.0);
            self.pieces.push(Raw {
                segment: p.segment,
                source,
                joints: [first + k, end],
                outward: Outward::Right,
            });
        }
        if let (Some(first), Some(last)) = (chain.first(), chain.last()) {
            self.ring(start, first.0..last.0 + 1, true);
        }
    }

    /// Notes that the pieces since `start` are one closed curve round `moves`.
    pub(super) fn ring(&mut self, start: usize, moves: std::ops::Range<u32>, true_edge: bool) {
        let pieces = start..self.pieces.len();
        if !pieces.is_empty() {
            self.rings.push(Ring { pieces, moves, true_edge });
        }
    }

    /// Adds the closed curve round one chain (two of them round a closed chain), piece by piece.
    fn plain(&mut self, chain: &[(u32, Segment)], radius: f64, coincidence: f64) {
        let (Some(&(first, s)), Some(&(last, e))) = (chain.first(), chain.last()) else { return };
        let start = self.pieces.len();
        if chain.len() == 1 && is_point(&s, coincidence) {
            self.disc(first, s.start(), radius);
            self.ring(start, first..last + 1, true);
            return;
        }
        let closed = (s.start() - e.end()).hypot() <= coincidence;
        let mut pen = Pen::new(self, radius, coincidence);
        for (k, &(i, m)) in chain.iter().enumerate() {
            pen.offset(i, &m, -radius);
            match chain.get(k + 1) {
                Some((_, next)) => {
                    pen.corner(i, m.end(), m.tangent_at(1.0), next.tangent_at(0.0), Flank::Right)
                }
                None if closed => pen.corner(i, m.end(), m.tangent_at(1.0), s.tangent_at(0.0), Flank::Right),
                None => pen.cap(last, e.end(), e.tangent_at(1.0)),
            }
        }
        if closed {
            pen.close();
            self.ring(start, first..last + 1, false);
            pen = Pen::new(self, radius, coincidence);
        }
        for (k, &(i, m)) in chain.iter().enumerate().rev() {
            pen.offset(i, &m, radius);
            let before = if k > 0 { chain.get(k - 1) } else { None };
            match before {
                Some((_, b)) => pen.corner(i, m.start(), b.tangent_at(1.0), m.tangent_at(0.0), Flank::Left),
                None if closed => pen.corner(i, m.start(), e.tangent_at(1.0), m.tangent_at(0.0), Flank::Left),
                None => pen.cap(first, s.start(), -s.tangent_at(0.0)),
            }
        }
        let start = pen.first_piece;
        pen.close();
        self.ring(start, first..last + 1, false);
    }

    /// A disc that stands still.
    pub(super) fn disc(&mut self, source: u32, center: Point, radius: f64) {
        let (a, b) = (center + Vec2::new(radius, 0.0), center - Vec2::new(radius, 0.0));
        let first = self.joints.len() as u32;
        self.joints.extend([a, b]);
        for (from, to, joints) in [(a, b, [first, first + 1]), (b, a, [first + 1, first])] {
            let segment = Segment::Arc(Arc::from_parts(center, radius, from, to, PI));
            self.pieces.push(Raw { segment, source, joints, outward: Outward::Right });
        }
    }
}

/// How many moves from the start of `chain` make a monotone run of lines, and along which direction.
fn run_length(chain: &[(u32, Segment)]) -> (usize, Vec2) {
    let mut span: Option<(Vec2, Vec2)> = None;
    let mut count = 0;
    for (_, s) in chain {
        let Segment::Line(l) = s else { break };
        let d = l.tangent();
        // The outermost directions so far, clockwise and counter-clockwise. A direction beyond both
        // points backwards.
        let (mut low, mut high) = span.unwrap_or((d, d));
        let (beyond_low, beyond_high) = (low.cross(d) < 0.0, high.cross(d) > 0.0);
        if d == Vec2::ZERO || (beyond_low && beyond_high) || (low + high).dot(d) <= 0.0 {
            break;
        }
        if beyond_low {
            low = d;
        }
        if beyond_high {
            high = d;
        }
        if low.dot(high) < WIDEST {
            break;
        }
        span = Some((low, high));
        count += 1;
    }
    let ahead = span.map_or(Vec2::ZERO, |(a, b)| (a + b).normalize());
    (count, ahead)
}

/// Does the whole segment count as one point?
fn is_point(segment: &Segment, coincidence: f64) -> bool {
    let b = segment.bounds();
    b.width().max(b.height()) <= coincidence
}

/// Which offset a corner connects.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Flank {
    Right,
    Left,
}

/// Draws one closed curve, piece after piece, handing out the numbers of its joints.
pub(super) struct Pen<'a> {
    edge: &'a mut RawEdge,
    radius: f64,
    coincidence: f64,
    pub(super) first_piece: usize,
    first_joint: u32,
}

impl<'a> Pen<'a> {
    pub(super) fn new(edge: &'a mut RawEdge, radius: f64, coincidence: f64) -> Self {
        let (first_piece, first_joint) = (edge.pieces.len(), edge.joints.len() as u32);
        Self { edge, radius, coincidence, first_piece, first_joint }
    }

    /// Appends a piece; too short a one is dropped, the next one then starts at the same joint.
    pub(super) fn push(&mut self, segment: Segment, source: u32, outward: Outward) {
        if segment.length() <= self.coincidence {
            return;
        }
        if self.edge.pieces.len() == self.first_piece {
            self.edge.joints.push(segment.start());
        }
        let from = self.edge.joints.len() as u32 - 1;
        self.edge.joints.push(segment.end());
        self.edge.pieces.push(Raw { segment, source, joints: [from, from + 1], outward });
    }

    /// The parallel of a move at `left` to its left, travelled forwards on the right side and
    /// backwards on the left, so that material is on the left of the edge.
    fn offset(&mut self, source: u32, m: &Segment, left: f64) {
        let turned = |s: Segment| if left > 0.0 { s.reversed() } else { s };
        match (m.offset(left), m) {
            (Offset::Segment(s), _) => self.push(turned(s), source, Outward::Right),
            (Offset::Collapsed { center }, Segment::Arc(a)) => {
                // The parallel beyond the centre: covered but where it is shallow, and it keeps the
                // curve closed.
                let beyond = self.radius - a.radius();
                if beyond <= self.coincidence {
                    return;
                }
                let at = |p: Point| {
                    let v = center - p;
                    center + v * (beyond / v.hypot())
                };
                let back = Arc::from_parts(center, beyond, at(a.start()), at(a.end()), a.sweep());
                self.push(turned(Segment::Arc(back)), source, Outward::Left);
            }
            (Offset::Collapsed { .. }, Segment::Line(_)) => {}
        }
    }

    /// The arc about joint `at` between the parallels of two moves with tangents `before`, `after`.
    fn corner(&mut self, source: u32, at: Point, before: Vec2, after: Vec2, flank: Flank) {
        let mut turn = before.cross(after).atan2(before.dot(after));
        // A path that turns straight back goes round its end on the right flank.
        if turn <= -PI {
            turn = PI;
        }
        let right = |d: Vec2| Vec2::new(d.y, -d.x) * self.radius;
        let (from, to, sweep) = match flank {
            Flank::Right => (at + right(before), at + right(after), turn),
            Flank::Left => (at - right(after), at - right(before), -turn),
        };
        let outward = if sweep < 0.0 { Outward::Left } else { Outward::Right };
        let arc = Arc::from_parts(at, self.radius, from, to, sweep);
        self.push(Segment::Arc(arc), source, outward);
    }

    /// The half circle round the end of a chain that points along `ahead`.
    fn cap(&mut self, source: u32, at: Point, ahead: Vec2) {
        let right = Vec2::new(ahead.y, -ahead.x) * self.radius;
        let arc = Arc::from_parts(at, self.radius, at + right, at - right, PI);
        self.push(Segment::Arc(arc), source, Outward::Right);
    }

    /// Lets the last piece end at the joint where the first one starts.
    pub(super) fn close(self) {
        if self.edge.pieces.len() > self.first_piece {
            self.edge.joints.pop();
            if let Some(last) = self.edge.pieces.last_mut() {
                last.joints[1] = self.first_joint;
            }
        }
    }
}
