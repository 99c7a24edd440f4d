//! Which biarc fits between two points of a curve?
//!
//! ```text
//!          Tm
//!      .--joint--.        start, end and both tangents are the curve's. The one freedom left is
//!   .-'           `-.     spent by making both arcs' tangent legs equally long (d each way).
//!  start            end
//! ```

use kurbo::{CubicBez, Point, Vec2};

use super::proof::{Proof, rounding, stretch_within};
use super::{Approximation, Curve};
use crate::geometry::{Arc, Segment};

/// What became of a piece.
pub(super) enum Fit {
    /// Proved within the target: `proved` without arithmetic, the piece's bound with it.
    Within { proved: f64, piece: Approximation },
    /// The proof holds but its bound is too large.
    TooFar { proved: f64 },
    /// The proof's conditions do not hold: the piece turns too much.
    Unproved,
}

/// A line between two points of the curve, whatever lies between: both lie in the hull of the piece's
/// control points, none of which is farther from the start than the bound.
pub(super) fn line_between<C: Curve>(curve: &C, from: f64, to: f64) -> Approximation {
    let enclosure = curve.cubic(from, to);
    let CubicBez { p0, p1, p2, p3 } = enclosure.cubic;
    let reach = [p1, p2, p3].iter().fold(0.0_f64, |m, p| m.max((*p - p0).hypot()));
    let line = Segment::line(p0, p3);
    let bound = reach + enclosure.off + rounding(&line);
    Approximation { segments: if p0 == p3 { Vec::new() } else { vec![line] }, bound }
}

/// The biarc between two parameters, with its proof.
pub(super) fn fit<C: Curve>(curve: &C, from: f64, to: f64, target: f64) -> Fit {
    let dot = line_between(curve, from, to);
    if dot.bound <= target {
        return Fit::Within { proved: dot.bound, piece: dot };
    }
    let cubic = curve.cubic(from, to).cubic;
    let Some((t0, t1)) = end_tangents(&cubic) else {
        return Fit::Unproved;
    };
    let Some(biarc) = Biarc::between(cubic.p0, t0, cubic.p3, t1, target) else {
        return Fit::Unproved;
    };
    let proofs = match biarc {
        Biarc::One(line) => stretch_within(curve, from, to, &line, target).map(|p| (vec![line], p)),
        Biarc::Two { first, second, joint_tangent } => {
            let middle = passage(curve, from, to, first.end(), joint_tangent, target);
            let one = stretch_within(curve, from, middle, &first, target);
            let two = stretch_within(curve, middle, to, &second, target);
            one.zip(two).map(|(a, b)| (vec![first, second], a.and(b)))
        }
    };
    match proofs {
        Some((segments, Proof { proved, arithmetic })) if proved <= target => {
            Fit::Within { proved, piece: Approximation { segments, bound: proved + arithmetic } }
        }
        Some((_, Proof { proved, .. })) if proved.is_finite() => Fit::TooFar { proved },
        _ => Fit::Unproved,
    }
}

/// Directions in which a cubic leaves its start and reaches its end; where the derivative vanishes
/// the next control point gives the limit. `None` when the cubic is a point.
fn end_tangents(c: &CubicBez) -> Option<(Vec2, Vec2)> {
    let size = [c.p1, c.p2, c.p3].iter().fold(0.0_f64, |m, p| m.max((*p - c.p0).hypot()));
    let first = |legs: [Vec2; 3]| {
        let leg = legs.into_iter().find(|v| v.hypot() > 1e-9 * size)?;
        Some(leg / leg.hypot())
    };
    Some((first([c.p1 - c.p0, c.p2 - c.p0, c.p3 - c.p0])?, first([c.p3 - c.p2, c.p3 - c.p1, c.p3 - c.p0])?))
}

/// One line, or two segments that share a tangent.
enum Biarc {
    One(Segment),
    Two { first: Segment, second: Segment, joint_tangent: Vec2 },
}

impl Biarc {
    /// Legs of equal length d satisfy 2 (1 - T0.T1) d^2 + 2 v.(T0 + T1) d - v.v = 0; the form of the
    /// root below does not cancel where the tangents are parallel.
    fn between(p0: Point, t0: Vec2, p1: Point, t1: Vec2, target: f64) -> Option<Self> {
        let v = p1 - p0;
        let b = v.dot(t0 + t1);
        if v.dot(t0) <= 0.0 || v.dot(t1) <= 0.0 {
            return None;
        }
        let d = v.hypot2() / (b + (b * b + 2.0 * (1.0 - t0.dot(t1)) * v.hypot2()).sqrt());
        let joint = p0.midpoint(p1) + (t0 - t1) * (0.5 * d);
        let first = arc_from_start(p0, t0, joint, target)?;
        let second = arc_from_start(p1, -t1, joint, target)?.reversed();
        if let (Segment::Line(_), Segment::Line(_)) = (first, second) {
            return Some(Self::One(Segment::line(p0, p1)));
        }
        let w = (joint - p0) / (joint - p0).hypot();
        Some(Self::Two { first, second, joint_tangent: w * (2.0 * t0.dot(w)) - t0 })
    }
}

/// Arc from `p` in direction `t` to `q`; a line where it is so flat that an arc would only add
/// rounding: by a thousandth of the target, or a ten-millionth of its length. `None` when it turns
/// more than a quarter.
fn arc_from_start(p: Point, t: Vec2, q: Point, target: f64) -> Option<Segment> {
    let w = q - p;
    let (across, along) = (t.cross(w), t.dot(w));
    let length = w.hypot();
    // Half the sweep is the angle between tangent and chord.
    let half = across.atan2(along);
    if !(half.abs() <= std::f64::consts::FRAC_PI_4 && length > 0.0) {
        return None;
    }
    let sagitta = 0.5 * length * (0.5 * half).tan().abs();
    if sagitta <= 1e-3 * target || sagitta <= 1e-7 * length {
        return Some(Segment::line(p, q));
    }
    let radius = 0.5 * length * length / across;
    let center = p + Vec2::new(-t.y, t.x) * radius;
    Some(Segment::Arc(Arc::from_parts(center, radius.abs(), p, q, 2.0 * half)))
}

/// Parameter at which the curve passes the normal through the joint: bisection with secant steps.
/// It need not be exact; the proof measures what is missing.
fn passage<C: Curve>(curve: &C, from: f64, to: f64, joint: Point, tangent: Vec2, target: f64) -> f64 {
    let ahead = |t: f64| (curve.point(t) - joint).dot(tangent);
    let (mut a, mut b) = (from, to);
    let (mut fa, mut fb) = (ahead(a), ahead(b));
    let mut middle = 0.5 * (a + b);
    for k in 0..60 {
        let f = ahead(middle);
        if f.abs() <= 1e-5 * target {
            break;
        }
        if f < 0.0 {
            (a, fa) = (middle, f);
        } else {
            (b, fb) = (middle, f);
        }
        let secant = a - fa * (b - a) / (fb - fa);
        // Every third step halves, so that a bad secant cannot stall it.
        middle = if k % 3 != 2 && a < secant && secant < b { secant } else { 0.5 * (a + b) };
    }
    middle
}
