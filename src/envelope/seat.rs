//! A family made ready for exact work: about a local origin, arcs with both ends on their circle, and
//! straight moves that continue one another as one. And the way back, so that each piece of the edge
//! names the move that the user wrote.

use crate::geometry::{Arc, Point, Rect, Segment, Side, Vec2, orientation};
use crate::view::{DiscFamily, DiscMove};

use super::region::{EdgeLoop, EdgePiece};

/// A family about a local origin.
pub(super) struct Seated {
    pub local: DiscFamily,
    /// For each local move the first of the family's moves that it stands for, and how many.
    spans: Vec<(u32, u32)>,
    /// Greatest distance of an arc's end from its circle that was mended.
    pub residual: f64,
}

impl Seated {
    /// The family moved by `shift`. Only moves that continue the one before exactly, in the same
    /// direction by the exact predicate, are joined to it.
    pub fn new(family: &DiscFamily, shift: Vec2, coincidence: f64) -> Self {
        let mut new = Self {
            local: DiscFamily { moves: Vec::with_capacity(family.moves.len()) },
            spans: Vec::with_capacity(family.moves.len()),
            residual: 0.0,
        };
        for (i, m) in (0u32..).zip(&family.moves) {
            let segment = shifted(&m.segment, shift);
            match segment {
                Segment::Arc(a) if a.residual() > 0.125 * coincidence => {
                    new.residual = new.residual.max(a.residual());
                    let (first, second) = a.seated();
                    new.push(DiscMove { segment: Segment::Arc(first), ..*m }, i);
                    if let Some(second) = second {
                        new.push(DiscMove { segment: Segment::Arc(second), ..*m }, i);
                    }
                }
                _ => new.push(DiscMove { segment, ..*m }, i),
            }
        }
        new
    }

    fn push(&mut self, m: DiscMove, source: u32) {
        if let (Some(last), Some(span)) = (self.local.moves.last_mut(), self.spans.last_mut())
            && span.0 + span.1 == source
            && last.radius.to_bits() == m.radius.to_bits()
            && let Some(joined) = continued(&last.segment, &m.segment)
        {
            last.segment = joined;
            span.1 += 1;
            return;
        }
        self.local.moves.push(m);
        self.spans.push((source, 1));
    }

    /// Gives the pieces of a loop back to the moves of the family, about its own origin.
    pub fn restore(&self, edge: EdgeLoop, family: &DiscFamily, shift: Vec2) -> EdgeLoop {
        let plain = |p: &EdgePiece| self.spans.get(p.source).is_none_or(|s| s.1 == 1);
        let back = |p: EdgePiece| EdgePiece {
            segment: shifted(&p.segment, -shift),
            source: self.spans.get(p.source).map_or(0, |s| s.0 as usize),
        };
        if edge.pieces.iter().all(plain) {
            let mut edge = edge;
            for p in &mut edge.pieces {
                *p = back(*p);
            }
            return edge;
        }
        let mut pieces = Vec::with_capacity(edge.pieces.len());
        for p in edge.pieces {
            if plain(&p) {
                pieces.push(back(p));
            } else {
                let span = self.spans.get(p.source).copied().unwrap_or((0, 1));
                divide(
                    &EdgePiece { segment: shifted(&p.segment, -shift), source: 0 },
                    span,
                    family,
                    &mut pieces,
                );
            }
        }
        EdgeLoop { pieces }
    }
}

/// `a` and `b` as one line, where `b` continues `a` exactly.
fn continued(a: &Segment, b: &Segment) -> Option<Segment> {
    let (Segment::Line(a), Segment::Line(b)) = (a, b) else { return None };
    let (da, db) = (a.vector(), b.vector());
    // The cheap test first: most neighbours turn.
    let may =
        a.end == b.start && da.cross(db).abs() <= 1e-12 * (da.hypot2() + db.hypot2()) && da.dot(db) > 0.0;
    (may && orientation(a.start, a.end, b.end) == Side::On).then(|| Segment::line(a.start, b.end))
}

/// Shares a piece made by several joined moves out among them.
fn divide(piece: &EdgePiece, span: (u32, u32), family: &DiscFamily, out: &mut Vec<EdgePiece>) {
    let moves =
        || (span.0..span.0 + span.1).filter_map(|i| Some((i as usize, family.moves.get(i as usize)?)));
    let Segment::Line(line) = piece.segment else {
        // An arc about one end of the joined line.
        let middle = piece.segment.point_at(0.5);
        let distance =
            |i: u32| family.moves.get(i as usize).map_or(f64::INFINITY, |m| m.segment.distance(middle));
        let (first, last) = (span.0, span.0 + span.1 - 1);
        let source = if distance(first) <= distance(last) { first } else { last };
        out.push(EdgePiece { segment: piece.segment, source: source as usize });
        return;
    };
    let u = line.tangent();
    let length = line.length();
    // The edge runs along the moves or against them.
    let along = moves().next().is_some_and(|(_, m)| m.segment.tangent_at(0.0).dot(u) > 0.0);
    let mut cuts: Vec<(f64, usize)> = moves()
        .map(|(i, m)| {
            let end = if along { m.segment.end() } else { m.segment.start() };
            ((end - line.start).dot(u), i)
        })
        .collect();
    if !along {
        cuts.reverse();
    }
    let mut at = line.start;
    let count = cuts.len();
    for (k, (cut, source)) in cuts.into_iter().enumerate() {
        if cut <= 0.0 && k + 1 < count {
            continue;
        }
        let last = cut >= length || k + 1 == count;
        let end = if last { line.end } else { line.start + u * cut };
        if end != at {
            out.push(EdgePiece { segment: Segment::line(at, end), source });
        }
        at = end;
        if last {
            break;
        }
    }
}

/// A point near the middle of `bounds` whose coordinates have few digits, so that subtracting it from
/// any coordinate is exact: far from the origin no digit is lost before the work begins.
pub(crate) fn local_origin(bounds: Rect) -> Point {
    let size = bounds.width().max(bounds.height()).max(f64::MIN_POSITIVE);
    let grid = size.log2().ceil().exp2();
    let near = |v: f64| if v.abs() < 4.0 * grid { 0.0 } else { (v / grid).round() * grid };
    let c = bounds.center();
    Point::new(near(c.x), near(c.y))
}

/// The segment moved by `by`.
pub(crate) fn shifted(segment: &Segment, by: crate::geometry::Vec2) -> Segment {
    match segment {
        Segment::Line(l) => Segment::line(l.start + by, l.end + by),
        Segment::Arc(a) => Segment::Arc(Arc::from_parts(
            a.center() + by,
            a.radius(),
            a.start() + by,
            a.end() + by,
            a.sweep(),
        )),
    }
}
