//! Which lines and arcs stand for a curve that is neither, and how far from it can they lie?
//!
//! A curve is cut into pieces; each piece becomes a biarc: two circular arcs that share a tangent,
//! start and end at the very points of the curve and leave them in its directions (K. M. Bolton 1975,
//! Biarc curves, Computer-Aided Design 7(2)). The distance of a biarc from a smooth curve shrinks with
//! the third power of the piece's length, so few arcs do. Straight pieces become lines.
//!
//! The error is *proved* for each piece, both ways (Hausdorff distance), never sampled: see
//! `proof`. A piece whose proof fails or whose bound is too large is made shorter.
//!
//! This room does not know why a curve is read as arcs, nor in which unit.

mod curve;
mod fit;
mod proof;
#[cfg(test)]
mod tests;

pub use curve::{Curve, Enclosure};

use kurbo::{CubicBez, ParamCurve, Point, QuadBez, Vec2};

use self::curve::{CubicCurve, EllipseCurve};
use self::fit::{Fit, fit, line_between};
use super::{Arc, Segment};
use crate::tolerance::GREATEST_COORDINATE;

/// Lines and arcs that stand for a curve.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Approximation {
    /// Connected: each starts at the very point where the one before ends, the first at the curve's
    /// start, the last at its end. Empty when the curve is a single point.
    pub segments: Vec<Segment>,
    /// Proved upper bound on the distance of any point of the curve from the segments and of any
    /// point of the segments from the curve, arithmetic included. At most the wanted error, unless
    /// rounding at these coordinates does not allow it.
    pub bound: f64,
}

/// Why a curve cannot be read as arcs.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CurveError {
    /// A number of the curve is not finite, or beyond [`GREATEST_COORDINATE`].
    OutOfRange,
    /// The wanted error is not a finite length above zero.
    BadError,
}

impl std::fmt::Display for CurveError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::OutOfRange => write!(f, "a number of the curve is not finite or too large"),
            Self::BadError => write!(f, "the error allowed for a curve must be a length above zero"),
        }
    }
}

impl std::error::Error for CurveError {}

/// Arcs within `error` (a length) of a cubic Bezier curve.
///
/// # Errors
/// See [`CurveError`].
pub fn cubic_to_arcs(c: &CubicBez, error: f64) -> Result<Approximation, CurveError> {
    check(&[c.p0, c.p1, c.p2, c.p3], error)?;
    curve_to_arcs(&CubicCurve::new(*c), error)
}

/// Arcs within `error` (a length) of a quadratic Bezier curve.
///
/// # Errors
/// See [`CurveError`].
pub fn quad_to_arcs(q: &QuadBez, error: f64) -> Result<Approximation, CurveError> {
    check(&[q.p0, q.p1, q.p2], error)?;
    let mut raised = q.raise();
    (raised.p0, raised.p3) = (q.start(), q.end());
    curve_to_arcs(&CubicCurve::new(raised), error)
}

/// Arcs within `error` (a length) of the curve `center + u cos t + v sin t`, `t` from `start_param`
/// over `sweep` radians, at most a turn either way: an elliptical arc as the affine image of a circle.
/// Where it is a circle the answer is one arc.
///
/// # Errors
/// See [`CurveError`].
pub fn ellipse_to_arcs(
    center: Point,
    u: Vec2,
    v: Vec2,
    start_param: f64,
    sweep: f64,
    error: f64,
) -> Result<Approximation, CurveError> {
    check(&[center, center + u, center + v], error)?;
    if !(start_param.abs() <= GREATEST_COORDINATE && sweep.abs() <= GREATEST_COORDINATE) {
        return Err(CurveError::OutOfRange);
    }
    let ellipse = EllipseCurve::new(center, u, v, start_param, sweep);
    if let Some(circle) = circle_of(&ellipse, error) {
        return Ok(circle);
    }
    curve_to_arcs(&ellipse, error)
}

fn check(points: &[Point], error: f64) -> Result<(), CurveError> {
    if !(error.is_finite() && error > 0.0) {
        return Err(CurveError::BadError);
    }
    // A NaN fails the comparison as well.
    let fits = |p: &Point| p.x.abs() <= GREATEST_COORDINATE && p.y.abs() <= GREATEST_COORDINATE;
    if points.iter().all(fits) { Ok(()) } else { Err(CurveError::OutOfRange) }
}

/// The single arc of an ellipse whose semi-axes differ by rounding only, or by a thousandth of what
/// is allowed. Ellipse and circle of the mean radius lie within half that difference of one another.
fn circle_of(ellipse: &EllipseCurve, error: f64) -> Option<Approximation> {
    let (long, short) = ellipse.semi_axes();
    let off = long - short;
    if short <= 0.0 || ellipse.sweep() == 0.0 || off > (1e-3 * error).max(1e-12 * long) {
        return None;
    }
    let center = ellipse.center();
    let (from, to) = ellipse.domain();
    let (start, end) = (ellipse.point(from), ellipse.point(to));
    let arc = Arc::from_parts(center, 0.5 * (long + short), start, end, ellipse.angle_swept());
    let size = long + center.x.abs().max(center.y.abs());
    // The polar angle of an end differs from its parameter by at most off / radius: once more `off`.
    let bound = 1.5 * off + 8.0 * f64::EPSILON * size;
    Some(Approximation { segments: vec![Segment::Arc(arc)], bound })
}

/// Most pieces a curve is cut into. The h^3 law needs some 7000 for 14 digits; a curve that wants
/// more is broken, and its rest becomes a line whose (large) bound says so.
const MOST_PIECES: usize = 1 << 16;

/// Finest error that is tried for, as a share of the greatest coordinate. Near an inflection an arc's
/// radius is some hundred times the curve's size and carries rounding of this order: asking for less
/// would make more pieces, not better ones.
const FINEST: f64 = 1e-11;

/// Tries at the length of one piece. The law finds it in three or four.
const MOST_TRIES: usize = 80;

/// Shortest piece, as a share of the curve's parameters.
const SHORTEST: f64 = 1e-13;

/// Arcs within `error` (a length) of any curve that can enclose its pieces by cubics.
///
/// Pieces are taken from the start, each as long as the error allows: the bound's third power law
/// predicts the length. The ends of pieces lie at [`Curve::breaks`] where there are some.
///
/// # Errors
/// See [`CurveError`].
pub fn curve_to_arcs<C: Curve>(curve: &C, error: f64) -> Result<Approximation, CurveError> {
    let (from, to) = curve.domain();
    let whole = curve.cubic(from, to).cubic;
    check(&[whole.p0, whole.p1, whole.p2, whole.p3], error)?;
    let extent =
        [whole.p0, whole.p1, whole.p2, whole.p3].iter().fold(0.0_f64, |m, p| m.max(p.x.abs()).max(p.y.abs()));
    let target = error.max(FINEST * extent).max(1e-60);
    let mut chain = Chain { curve, target, out: Approximation::default(), pieces: 0, step: to - from };
    let mut start = from;
    for stop in curve.breaks().into_iter().chain([to]) {
        if stop > start {
            chain.span(start, stop, SHORTEST * (to - from));
            start = stop;
        }
    }
    Ok(chain.out)
}

/// The pieces made so far.
struct Chain<'a, C: Curve> {
    curve: &'a C,
    target: f64,
    out: Approximation,
    pieces: usize,
    step: f64,
}

impl<C: Curve> Chain<'_, C> {
    /// Covers the parameters from `from` to `to`.
    fn span(&mut self, from: f64, to: f64, shortest: f64) {
        let mut at = from;
        while at < to {
            self.pieces += 1;
            let (end, piece) = if self.pieces > MOST_PIECES {
                (to, line_between(self.curve, at, to))
            } else {
                self.longest(at, to, shortest)
            };
            self.step = end - at;
            self.out.segments.extend(piece.segments);
            self.out.bound = self.out.bound.max(piece.bound);
            at = end;
        }
    }

    /// The longest piece from `at` whose bound is within the target, and where it ends.
    fn longest(&self, at: f64, to: f64, shortest: f64) -> (f64, Approximation) {
        let rest = to - at;
        let mut step = self.step.min(rest);
        let mut failed = f64::INFINITY;
        let mut best: Option<(f64, Approximation)> = None;
        for _ in 0..MOST_TRIES {
            let end = if step >= rest * (1.0 - 1e-9) { to } else { at + step };
            match fit(self.curve, at, end, self.target) {
                Fit::Within { proved, piece } => {
                    let grown = step * (0.9 * self.target / proved.max(1e-300)).cbrt().clamp(0.0, 16.0);
                    best = Some((end, piece));
                    if end >= to || grown < 1.1 * step || grown >= 0.97 * failed {
                        break;
                    }
                    step = grown.min(rest);
                }
                Fit::TooFar { .. } | Fit::Unproved if best.is_some() => break,
                Fit::TooFar { proved } => {
                    failed = step;
                    step *= (0.9 * self.target / proved).cbrt().clamp(0.05, 0.95);
                }
                Fit::Unproved => {
                    failed = step;
                    step *= 0.5;
                }
            }
            if best.is_none() && (step < shortest || at + step <= at) {
                break;
            }
        }
        let (end, piece) = best.unwrap_or_else(|| {
            let end = if at + shortest > at { (at + shortest).min(to) } else { to };
            (end, line_between(self.curve, at, end))
        });
        self.evened(at, end, to).unwrap_or((end, piece))
    }

    /// Where only a stub would be left after `end`, two equal pieces instead of a long and a short one:
    /// as many arcs, nearer to the curve.
    fn evened(&self, at: f64, end: f64, to: f64) -> Option<(f64, Approximation)> {
        let rest = to - end;
        if rest <= 0.0 || rest > 0.7 * (end - at) {
            return None;
        }
        let middle = 0.5 * (at + to);
        match fit(self.curve, at, middle, self.target) {
            Fit::Within { piece, .. } => Some((middle, piece)),
            Fit::TooFar { .. } | Fit::Unproved => None,
        }
    }
}
