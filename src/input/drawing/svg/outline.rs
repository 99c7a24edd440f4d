//! What is one subpath of an SVG element, before its transform, and which lines and arcs does it
//! become after it?
//!
//! Curves are kept as curves until the whole transform is known: the error allowed for reading them
//! as arcs holds in the drawing's unit, and a circle under an unequal scale is an ellipse.

use kurbo::{Affine, CubicBez, Point, QuadBez, Vec2};

use crate::geometry::{
    Approximation, Arc, CurveError, Path, PathError, Segment, cubic_to_arcs, ellipse_to_arcs, quad_to_arcs,
};
use crate::tolerance::GREATEST_COORDINATE;

/// A subpath in user units.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Outline {
    pub(super) start: Point,
    pub(super) pieces: Vec<Piece>,
    /// Closed by its author (`Z`, or a shape that is closed by nature).
    pub(super) closed: bool,
}

/// One piece, from where the one before ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Piece {
    pub(super) shape: Shape,
    pub(super) end: Point,
}

/// Its form.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Shape {
    Line,
    Quad(Point),
    Cubic(Point, Point),
    Ellipse(Ellipse),
}

/// `center + u cos t + v sin t` from `start` over `sweep`, radians.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Ellipse {
    pub(super) center: Point,
    pub(super) u: Vec2,
    pub(super) v: Vec2,
    pub(super) start: f64,
    pub(super) sweep: f64,
}

impl Outline {
    pub(super) const fn new(start: Point) -> Self {
        Self { start, pieces: Vec::new(), closed: false }
    }

    pub(super) fn line_to(&mut self, end: Point) {
        self.pieces.push(Piece { shape: Shape::Line, end });
    }
}

/// Why an outline gives no chain.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum OutlineError {
    OutOfRange,
    BadError,
}

impl From<CurveError> for OutlineError {
    fn from(error: CurveError) -> Self {
        match error {
            CurveError::OutOfRange => Self::OutOfRange,
            CurveError::BadError => Self::BadError,
        }
    }
}

/// Ends nearer than this are one point, in the drawing's unit: what sums of relative coordinates lose.
const CLOSED: f64 = 1e-9;

/// The chain of an outline under `map`, its curves within `error`, and the proved bound on what that
/// cost. `None` when nothing of it has a length.
pub(super) fn chain(outline: &Outline, map: Affine, error: f64) -> Result<Option<(Path, f64)>, OutlineError> {
    let mut segments: Vec<Segment> = Vec::new();
    let mut bound = 0.0_f64;
    let mut at = outline.start;
    for piece in &outline.pieces {
        let (from, to) = (map * at, map * piece.end);
        if !(in_range(from) && in_range(to)) {
            return Err(OutlineError::OutOfRange);
        }
        let read = under(piece.shape, at, piece.end, map, error)?;
        bound = bound.max(append(&mut segments, read, from, to));
        at = piece.end;
    }
    let Some(gap) = close(&mut segments, outline.closed) else {
        return Ok(None);
    };
    let closed = gap.is_some();
    bound = bound.max(gap.unwrap_or(0.0));
    match Path::new(segments, closed) {
        Ok(path) => Ok(Some((path, bound))),
        Err(PathError::Empty) => Ok(None),
        Err(PathError::NotFinite { .. } | PathError::Gap { .. }) => Err(OutlineError::OutOfRange),
    }
}

fn in_range(p: Point) -> bool {
    p.x.abs() <= GREATEST_COORDINATE && p.y.abs() <= GREATEST_COORDINATE
}

/// A piece as lines and arcs under the map.
fn under(shape: Shape, at: Point, end: Point, map: Affine, error: f64) -> Result<Approximation, CurveError> {
    match shape {
        Shape::Line => Ok(Approximation { segments: vec![Segment::line(map * at, map * end)], bound: 0.0 }),
        Shape::Quad(p) => quad_to_arcs(&QuadBez::new(map * at, map * p, map * end), error),
        Shape::Cubic(p, q) => cubic_to_arcs(&CubicBez::new(map * at, map * p, map * q, map * end), error),
        Shape::Ellipse(e) => {
            let [a, b, c, d, ..] = map.as_coeffs();
            let turned = |v: Vec2| Vec2::new(a * v.x + c * v.y, b * v.x + d * v.y);
            ellipse_to_arcs(map * e.center, turned(e.u), turned(e.v), e.start, e.sweep, error)
        }
    }
}

/// Appends a piece and gives its bound. Its ends are put on the very points of the file: an ellipse
/// given by its centre reaches them up to rounding, which is added to the bound.
fn append(segments: &mut Vec<Segment>, read: Approximation, from: Point, to: Point) -> f64 {
    let mut read = read;
    let mut moved = 0.0_f64;
    if let Some(first) = read.segments.first_mut() {
        moved = moved.max((first.start() - from).hypot());
        *first = with_ends(first, from, first.end());
    }
    if let Some(last) = read.segments.last_mut() {
        moved = moved.max((last.end() - to).hypot());
        *last = with_ends(last, last.start(), to);
    }
    if read.segments.is_empty() && from != to {
        read.segments.push(Segment::line(from, to));
    }
    segments.extend(read.segments.into_iter().filter(|s| s.length() > 0.0));
    read.bound + moved
}

/// The same segment between other ends, which lie where the old ones do up to rounding.
const fn with_ends(segment: &Segment, start: Point, end: Point) -> Segment {
    match segment {
        Segment::Line(_) => Segment::line(start, end),
        Segment::Arc(a) => Segment::Arc(Arc::from_parts(a.center(), a.radius(), start, end, a.sweep())),
    }
}

/// Makes a loop of the segments where they are one. Outer `None`: nothing is left. Inner `None`: an
/// open chain; else the gap that was closed by moving the last end, at most [`CLOSED`].
fn close(segments: &mut Vec<Segment>, wanted: bool) -> Option<Option<f64>> {
    let (start, last) = (segments.first()?.start(), *segments.last()?);
    let gap = (last.end() - start).hypot();
    if gap <= CLOSED {
        segments.pop();
        let moved = with_ends(&last, last.start(), start);
        if moved.length() > 0.0 {
            segments.push(moved);
        } else if let Some(before) = segments.pop() {
            segments.push(with_ends(&before, before.start(), start));
        }
        return (!segments.is_empty()).then_some(Some(gap));
    }
    if wanted {
        segments.push(Segment::line(last.end(), start));
        return Some(Some(0.0));
    }
    Some(None)
}
