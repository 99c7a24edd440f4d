//! Does the cutter reach past the contour, where, and how deep?
//!
//! With sd the signed distance from the contour (positive outside the part), a disc of radius r whose
//! centre is at c reaches g = r - sd(c) past the contour. g is exact, 1-Lipschitz in c, and needs no
//! swept edge. Depth is measured past the contour of the finished part itself: reaching into an
//! allowance is no gouge, the finished wall is still whole (less stock is then left for finishing).
//!
//! Along a move |sd| is followed piece by piece in closed form ([`super::along`]); where it reaches zero
//! a piece is divided, so that every part has one side. A gouge is a maximal stretch of moves, each
//! joined to the next, with g above the limit; where g is within its bound of the limit it counts.

use crate::geometry::{Point, Segment};
use crate::tolerance::Tolerances;
use crate::view::DiscFamily;

use super::along::{Piece, Tracer};
use super::law::Course;
use super::side::{Walls, Where};
use super::targets::Feature;
use super::{ContourStretch, Figure, Gouge, RapidHit};

/// A maximal stretch over the limit, being gathered.
#[derive(Clone, Debug)]
pub(super) struct Reach {
    pub(super) depth: f64,
    pub(super) center: Point,
    pub(super) at: Point,
    pub(super) worst_move: usize,
    pub(super) moves: (usize, usize),
    pub(super) center_inside: bool,
    /// Path of the contour nearest at the worst place.
    path: usize,
    /// Parts of the contour nearest to the stretch: path, from, to.
    covered: Vec<(usize, f64, f64)>,
    /// Does it still touch the end of the last move seen?
    open: bool,
}

/// Follows moves against the contour.
pub(super) struct Follower<'a> {
    walls: &'a Walls<'a>,
    tracer: Tracer<'a>,
    pieces: Vec<Piece>,
    /// Depth from which on a stretch is gathered.
    threshold: f64,
    /// Does the last move seen end in the open, where the next one may start?
    ends_open: Option<Point>,
    allowance: f64,
    /// Greatest depth seen, never below zero.
    pub(super) greatest: f64,
    pub(super) found: Vec<Reach>,
}

/// A part of a piece with one side and a depth above the threshold.
struct Part {
    from: f64,
    to: f64,
    side: Where,
}

impl<'a> Follower<'a> {
    pub(super) fn new(walls: &'a Walls<'a>, tolerances: &Tolerances, threshold: f64, allowance: f64) -> Self {
        Self {
            walls,
            tracer: Tracer::new(&walls.targets, tolerances),
            pieces: Vec::new(),
            threshold,
            ends_open: None,
            allowance,
            greatest: 0.0,
            found: Vec::new(),
        }
    }

    /// Follows all moves of `family`. A stretch goes on from one move to the next where they share a
    /// point.
    pub(super) fn follow(&mut self, family: &DiscFamily) {
        let mut end: Option<Point> = None;
        for (position, m) in family.moves.iter().enumerate() {
            if end != Some(m.segment.start()) {
                self.close();
            }
            end = Some(m.segment.end());
            self.follow_move(position, &m.segment, m.radius);
        }
        self.close();
    }

    fn close(&mut self) {
        if let Some(last) = self.found.last_mut() {
            last.open = false;
        }
    }

    /// Settles a straight move that stays in the open and reaches no deeper than the threshold.
    ///
    /// Its depth is the radius less the least distance from the contour, which needs no pieces. A move
    /// that starts in the open and is nowhere nearer to the contour than half its length ends there
    /// too: it crosses nothing ([`super::targets::Targets::least_from`]).
    fn stays_clear(&mut self, segment: &Segment, radius: f64) -> bool {
        let Segment::Line(line) = segment else {
            return false;
        };
        // No deeper than this a move tells nothing new.
        let within = radius - self.threshold.min(self.greatest);
        let half = 0.5 * line.length();
        if within <= half {
            return false;
        }
        let least = self.walls.targets.least_from(line, within);
        // Not computed from `within`: the rounding of two differences could lift it over the threshold.
        let depth = least.map(|d| radius - d);
        if least.is_some_and(|d| d <= half) || depth.is_some_and(|g| g > self.threshold) {
            return false;
        }
        if self.ends_open != Some(line.start) && !self.is_open(line.start) {
            return false;
        }
        self.greatest = depth.map_or(self.greatest, |g| self.greatest.max(g));
        self.ends_open = Some(line.end);
        true
    }

    fn is_open(&self, p: Point) -> bool {
        self.walls
            .targets
            .nearest(p, None)
            .is_some_and(|(k, _)| self.walls.of(p, k, self.walls.targets.feature_at(k, p)) == Where::Open)
    }

    fn follow_move(&mut self, position: usize, segment: &Segment, radius: f64) {
        if self.stays_clear(segment, radius) {
            self.close();
            return;
        }
        self.ends_open = None;
        let course = Course::new(segment);
        let half = 0.5 * course.length();
        let Some((k, distance)) = self.tracer.at_middle(&course) else {
            return;
        };
        let middle = course.point(half);
        let feature = self.walls.targets.feature_at(k, middle);
        if distance - half > 0.0 && self.walls.of(middle, k, feature) == Where::Open {
            // Wholly outside: no deeper than this anywhere on the move.
            let deepest = radius - (distance - half);
            if deepest <= self.threshold.min(self.greatest) {
                self.close();
                return;
            }
        }
        let mut pieces = std::mem::take(&mut self.pieces);
        self.tracer.trace(&course, &mut pieces);
        for piece in &pieces {
            self.take(position, &course, radius, piece);
        }
        self.pieces = pieces;
    }

    /// Divides one piece where it crosses the contour and at the threshold, and enters its parts.
    fn take(&mut self, position: usize, course: &Course, radius: f64, piece: &Piece) {
        let law = &piece.law;
        let mut low = piece.from;
        for high in law.level(0.0, piece.from, piece.to).into_iter().chain([piece.to]) {
            let middle = course.point(0.5 * (low + high));
            let side = self.walls.of(middle, piece.target, piece.feature);
            self.take_part(position, course, radius, piece, &Part { from: low, to: high, side });
            low = high;
        }
    }

    fn take_part(&mut self, position: usize, course: &Course, radius: f64, piece: &Piece, part: &Part) {
        let law = &piece.law;
        // g = r - d outside, r + d inside.
        let (worst, level) = match part.side {
            Where::Open => (law.least(part.from, part.to), radius - self.threshold),
            Where::Material => (law.greatest(part.from, part.to), self.threshold - radius),
        };
        let depth = |d: f64| if part.side == Where::Open { radius - d } else { radius + d };
        self.greatest = self.greatest.max(depth(worst.1));
        if depth(worst.1) <= self.threshold {
            self.close();
            return;
        }
        let mut low = part.from;
        for high in law.level(level, part.from, part.to).into_iter().chain([part.to]) {
            if depth(law.value(0.5 * (low + high))) > self.threshold {
                self.gather(position, course, piece, &Part { from: low, to: high, side: part.side }, &depth);
            } else {
                self.close();
            }
            low = high;
        }
    }

    fn gather(
        &mut self,
        position: usize,
        course: &Course,
        piece: &Piece,
        part: &Part,
        depth: &dyn Fn(f64) -> f64,
    ) {
        let (s, d) = match part.side {
            Where::Open => piece.law.least(part.from, part.to),
            Where::Material => piece.law.greatest(part.from, part.to),
        };
        let center = course.point(s);
        let k = piece.target;
        let path = self.walls.path_of(k);
        let covered = self.covered(course, piece, part);
        let new = Reach {
            depth: depth(d),
            center,
            at: self.foot(k, piece.feature, center),
            worst_move: position,
            moves: (position, position),
            center_inside: part.side == Where::Material || d < self.allowance,
            path,
            covered: vec![(path, covered.0, covered.1)],
            open: true,
        };
        match self.found.last_mut() {
            Some(last) if last.open => last.join(new),
            _ => self.found.push(new),
        }
    }

    /// The nearest point of the contour.
    fn foot(&self, k: usize, feature: Feature, p: Point) -> Point {
        let segment = self.walls.targets.segment(k);
        match feature {
            Feature::Start => segment.start(),
            Feature::End => segment.end(),
            Feature::Inside => segment.nearest(p).at,
        }
    }

    /// The way along its path between which the nearest points of a part lie.
    fn covered(&self, course: &Course, piece: &Piece, part: &Part) -> (f64, f64) {
        let k = piece.target;
        let segment = self.walls.targets.segment(k);
        let (before, length) = (self.walls.along(k), segment.length());
        let mut places = vec![part.from, part.to];
        match piece.feature {
            Feature::Start => return (before, before),
            Feature::End => return (before + length, before + length),
            Feature::Inside => match segment {
                // The foot turns back where the course is square to the line,
                Segment::Line(l) => {
                    let (a, b) = course.component(l.tangent(), l.start).range(part.from, part.to);
                    return (before + a.clamp(0.0, length), before + b.clamp(0.0, length));
                }
                // or where a ray from the arc's centre touches the course.
                Segment::Arc(_) => piece.law.wave.inflections(part.from, part.to, &mut places),
            },
        }
        let ways = places.iter().map(|&s| before + segment.nearest(course.point(s)).t * length);
        ways.fold((f64::INFINITY, f64::NEG_INFINITY), |(a, b), w| (a.min(w), b.max(w)))
    }
}

impl Reach {
    fn join(&mut self, new: Self) {
        if let (Some(last), Some(next)) = (self.covered.last_mut(), new.covered.first()) {
            let touches = last.0 == next.0 && next.1 <= last.2 && last.1 <= next.2;
            if touches {
                *last = (last.0, last.1.min(next.1), last.2.max(next.2));
            } else {
                self.covered.push(*next);
            }
        }
        let covered = std::mem::take(&mut self.covered);
        let moves = (self.moves.0, new.moves.1);
        if new.depth > self.depth {
            *self = new;
        }
        self.covered = covered;
        self.moves = moves;
    }

    /// The shortest stretch of the nearest path that holds all that is covered of it.
    fn stretch(&self, lengths: &[(f64, bool)]) -> ContourStretch {
        let mut parts: Vec<(f64, f64)> =
            self.covered.iter().filter(|c| c.0 == self.path).map(|c| (c.1, c.2)).collect();
        parts.sort_by(|a, b| a.0.total_cmp(&b.0));
        let first = parts.first().map_or(0.0, |p| p.0);
        let mut reach = first;
        // The widest gap between parts, on a loop also the one over its start.
        let mut widest: (f64, f64, f64) = (0.0, first, first);
        for &(from, to) in &parts {
            if from - reach > widest.0 {
                widest = (from - reach, reach, from);
            }
            reach = reach.max(to);
        }
        let (length, closed) = lengths.get(self.path).copied().unwrap_or((reach, false));
        let over_start = length - reach + first;
        let (from, to) =
            if closed && widest.0 > over_start { (widest.2, widest.1 + length) } else { (first, reach) };
        ContourStretch { path: self.path, from, to }
    }

    /// As a gouge, with the bound of its depth.
    pub(super) fn gouge(&self, bound: f64, lengths: &[(f64, bool)]) -> Gouge {
        Gouge {
            depth: Figure { size: self.depth.max(0.0), bound },
            center: self.center,
            at: self.at,
            worst_move: self.worst_move,
            moves: self.moves,
            center_inside: self.center_inside,
            stretch: self.stretch(lengths),
            region: None,
        }
    }

    /// As a rapid into the part.
    pub(super) const fn rapid(&self, bound: f64) -> RapidHit {
        RapidHit {
            depth: Figure { size: self.depth.max(0.0), bound },
            center: self.center,
            at: self.at,
            rapid: self.worst_move,
        }
    }
}
