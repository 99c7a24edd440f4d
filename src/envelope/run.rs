//! The sweep of a monotone run of straight moves, without asking about any other move.
//!
//! A run is a chain of lines that all advance along one direction u. Seen along u its swept region has
//! one upper and one lower boundary and no hole, and each of them is the upper (lower) envelope of the
//! tops of the discs. Tops of equal discs cross at most once, the disc that is farther along u being
//! the higher one from there on; so the pieces of the envelope come in the order of the path, and one
//! pass with a pile yields them, however fine and noisy the moves are:
//!
//! ```text
//!           new move
//!      ____ . - ' -----    Pieces at the end of the envelope whose start lies under the new move are
//!   .-'   X                taken off the pile; on the one that stays, the new move takes over at X.
//! ```
//!
//! Each move is put on the pile once and taken off at most once: linear time, no index.

use crate::geometry::{Arc, Line, Point, Segment, Vec2};

/// Sine of the angle below which two lines do not say by themselves where they cross.
const NEARLY_PARALLEL: f64 = 1e-4;

/// What makes a piece of one flank.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Maker {
    /// Parallel of the line of this position.
    Line(u32),
    /// Circle about the joint of this position (joint k is the start of line k).
    Joint(u32),
}

/// A piece on the pile; it ends where the next one starts.
#[derive(Clone, Copy, Debug)]
struct Piled {
    start: Point,
    maker: Maker,
}

/// A finished piece of a flank: where it runs, and the position in the run of the line that makes it.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Piece {
    pub segment: Segment,
    pub line: u32,
}

/// A monotone run: each of `lines` starts where the one before ends and advances along `ahead`.
pub(crate) struct Run<'a> {
    pub lines: &'a [Line],
    /// Unit vector along which every line advances.
    pub ahead: Vec2,
    pub radius: f64,
}

impl Run<'_> {
    /// Joint `k`: the start of line `k`, or the end of the last line.
    fn joint(&self, k: u32) -> Point {
        match self.lines.get(k as usize) {
            Some(l) => l.start,
            None => self.lines.last().map_or(Point::ZERO, |l| l.end),
        }
    }

    /// The closed boundary of the run's sweep, material on its left. `short` is the length below which
    /// a piece is left out.
    pub fn boundary(&self, short: f64, out: &mut Vec<Piece>) {
        let mut pile = Vec::with_capacity(self.lines.len() * 2 + 2);
        self.flank(-1.0, &mut pile);
        let far = self.joint(self.lines.len() as u32) + self.ahead * self.radius;
        let near = self.joint(0) - self.ahead * self.radius;
        self.lay(&pile, -1.0, far, short, out);
        pile.clear();
        self.flank(1.0, &mut pile);
        let first = out.len();
        self.lay(&pile, 1.0, far, short, out);
        // The left flank is travelled backwards.
        let flank = out.get_mut(first..).unwrap_or_default();
        flank.reverse();
        for p in flank {
            p.segment = p.segment.reversed();
        }
        debug_assert!(out.is_empty() || (out.last().map(|p| p.segment.end()) == Some(near)));
    }

    /// Piles up the envelope on one flank, from the near to the far end; `side` is +1 for the left.
    fn flank(&self, side: f64, pile: &mut Vec<Piled>) {
        let near = self.joint(0) - self.ahead * self.radius;
        pile.push(Piled { start: near, maker: Maker::Joint(0) });
        for (k, line) in (0u32..).zip(self.lines) {
            let new = New::of(line, side, self.radius);
            let taken_over = self.take_over(k, &new, pile);
            let along = (taken_over - new.from).dot(new.tangent);
            if along <= new.length {
                pile.push(Piled { start: taken_over, maker: Maker::Line(k) });
                pile.push(Piled { start: new.to, maker: Maker::Joint(k + 1) });
            } else {
                pile.push(Piled { start: taken_over, maker: Maker::Joint(k + 1) });
            }
        }
    }

    /// Takes what the new move covers off the pile, and finds where it takes over.
    fn take_over(&self, k: u32, new: &New, pile: &mut Vec<Piled>) -> Point {
        let mut end = self.joint(k) + self.ahead * self.radius;
        while let Some(&last) = pile.last() {
            if last.maker == Maker::Joint(k) {
                let on_circle = last.start - self.joint(k);
                if new.side * on_circle.cross(new.normal) < 0.0 || pile.len() == 1 {
                    return new.from; // an outer corner: the circle goes on to the new parallel
                }
            } else if pile.len() == 1 || new.segment.distance(last.start) >= self.radius {
                return self.crossing(k, last, end, new);
            }
            end = last.start;
            pile.pop();
        }
        new.from
    }

    /// Where the piece `last`, which starts clear of the new move and ends at `end` under it, dips.
    fn crossing(&self, k: u32, last: Piled, end: Point, new: &New) -> Point {
        let after = self.joint(k + 1);
        match last.maker {
            Maker::Line(j) => {
                let d = self.lines.get(j as usize).map_or(self.ahead, Line::tangent);
                let room = (end - last.start).hypot();
                let turn = d.cross(new.tangent);
                let along = (new.from - last.start).cross(new.tangent) / turn;
                // Nearly parallel lines leave the crossing open; the new parallel does not begin
                // before its own start.
                let along = if turn.abs() > NEARLY_PARALLEL {
                    along
                } else {
                    along.max((new.from - last.start).dot(d))
                };
                let along = along.clamp(0.0, room);
                let at = last.start + d * along;
                if (at - new.from).dot(new.tangent) <= new.length {
                    return at;
                }
                let m = last.start - after;
                let b = m.dot(d);
                let reach = (b * b - m.hypot2() + self.radius * self.radius).max(0.0);
                last.start + d * (-b - reach.sqrt()).clamp(0.0, room)
            }
            Maker::Joint(j) => {
                let center = self.joint(j);
                // The circle stands above the new parallel by `over`: it dips at cos = 1 - over / r.
                let over = ((center - new.line_start).dot(new.normal) / self.radius).clamp(0.0, 2.0);
                let (cos, sin) = (1.0 - over, (over * (2.0 - over)).sqrt());
                let at = center + (new.normal * cos + new.tangent * sin) * self.radius;
                let along = (at - new.from).dot(new.tangent);
                if along < 0.0 {
                    return new.from;
                }
                if along <= new.length {
                    return at;
                }
                let v = after - center;
                let half = 0.5 * v.hypot();
                let up = ((self.radius - half) * (self.radius + half)).max(0.0).sqrt();
                let left = Vec2::new(-v.y, v.x) * (new.side * 0.5 / half);
                center + v * 0.5 + left * up
            }
        }
    }

    /// Turns a pile into pieces, from the near to the far end.
    fn lay(&self, pile: &[Piled], side: f64, far: Point, short: f64, out: &mut Vec<Piece>) {
        let Some(first) = pile.first() else { return };
        let mut at = first.start;
        let lines = self.lines.len() as u32;
        for (i, p) in pile.iter().enumerate() {
            let last = i + 1 == pile.len();
            let end = pile.get(i + 1).map_or(far, |n| n.start);
            if (end - at).hypot() <= short && !last {
                continue;
            }
            let (segment, line) = match p.maker {
                Maker::Line(k) => (Segment::line(at, end), k),
                Maker::Joint(k) => {
                    let c = self.joint(k);
                    let (a, b) = (at - c, end - c);
                    let sweep = a.cross(b).atan2(a.dot(b));
                    // On the left flank the circles are passed clockwise. Rounding can turn a piece round
                    // that is hardly longer than it can tell: straight on is as near.
                    let piece = if sweep * side > 0.0 && (end - at).hypot() < 1e-6 * self.radius {
                        Segment::line(at, end)
                    } else {
                        Segment::Arc(Arc::from_parts(c, self.radius, at, end, sweep))
                    };
                    (piece, k.min(lines - 1))
                }
            };
            out.push(Piece { segment, line });
            at = end;
        }
    }
}

/// What one move adds to a flank.
struct New {
    side: f64,
    segment: Segment,
    line_start: Point,
    tangent: Vec2,
    length: f64,
    /// Unit normal towards the flank.
    normal: Vec2,
    /// Ends of its parallel.
    from: Point,
    to: Point,
}

impl New {
    fn of(line: &Line, side: f64, radius: f64) -> Self {
        let v = line.vector();
        let length = v.hypot();
        let tangent = v / length;
        let normal = Vec2::new(-tangent.y, tangent.x) * side;
        Self {
            side,
            segment: Segment::Line(*line),
            line_start: line.start,
            tangent,
            length,
            normal,
            from: line.start + normal * radius,
            to: line.end + normal * radius,
        }
    }
}
