//! How far are a stretch of a curve and the line or arc that stands for it apart, at most?
//!
//! Let the stretch be enclosed by cubics B, each within `off` of the curve at the same parameter, and
//! let the segment have unit tangents d0, d1 at its start p and end q and sweep at most a quarter turn.
//! Its *gates* are the half planes (x - p).d0 >= 0 and (x - q).d1 <= 0: for an arc they cut out its
//! angular sector about the centre c, for a line the strip across its length.
//!
//! 1. **Deviation.** f = |B - c|^2 - R^2 is a polynomial of degree 6. In Bernstein form it lies
//!    between its least and greatest coefficient (convex hull property), and ||B - c| - R| is
//!    monotone in |f|; for a line the offset is itself a cubic and is treated alike. This bounds the
//!    deviation of every point of B from the *whole* circle or line: `core`.
//! 2. **Curve to segment.** The control points miss the gates by at most V, hence so does B. A point
//!    of B that misses no gate has its foot on the segment, so `core` is its distance. One that misses a
//!    gate by at most V is turned about c (moved along the line) by at most V / cos 22.5 degrees to reach
//!    it, without changing its deviation: distance <= core + 1.1 V. For that it must be near the ray of
//!    the gate and not opposite to it, which holds for V <= chord / 10 and |B - c| >= R / 2.
//! 3. **Segment to curve.** B is continuous, its angle about c (its place along the line) too, as B
//!    does not reach c. At the ends it misses the gates' rays by at most V either way. By the intermediate
//!    value theorem B faces every point of the segment but two ends of length at most 2.2 V: distance
//!    <= core + 2.2 V.
//!
//! So the Hausdorff distance of curve and segment is at most core + 3 V + off. No monotonicity is
//! needed. Rounding is bounded apart ([`rounding`]): some tens of units in the last place of the
//! coordinates and the radius.

use kurbo::{CubicBez, Point, Vec2};

use super::Curve;
use crate::geometry::{Arc, Segment};

/// A proved bound, and the arithmetic that made it.
#[derive(Clone, Copy, Debug)]
pub(super) struct Proof {
    /// core + 3 V + off.
    pub(super) proved: f64,
    /// Bound on rounding.
    pub(super) arithmetic: f64,
}

impl Proof {
    /// Both stretches together.
    pub(super) const fn and(self, other: Self) -> Self {
        Self { proved: self.proved.max(other.proved), arithmetic: self.arithmetic.max(other.arithmetic) }
    }
}

/// Bound on what rounding adds: coordinates, centre and radius each carry a few units in the last
/// place through some twenty operations.
pub(super) fn rounding(segment: &Segment) -> f64 {
    let size = |p: Point| p.x.abs().max(p.y.abs());
    let ends = size(segment.start()).max(size(segment.end()));
    let round = match segment {
        Segment::Line(_) => 0.0,
        Segment::Arc(a) => a.radius() + size(a.center()),
    };
    16.0 * f64::EPSILON * (ends + round)
}

/// Stretches into which a piece is cut at least: the hull of a polynomial of degree 6 is loose, of
/// its third much less.
const CUTS: f64 = 3.0;

/// The bound for the curve between two parameters and `segment`. `None` when the proof's conditions
/// do not hold.
pub(super) fn stretch_within<C: Curve>(
    curve: &C,
    from: f64,
    to: f64,
    segment: &Segment,
    target: f64,
) -> Option<Proof> {
    if to <= from {
        return None;
    }
    // An enclosure's error falls with the fourth power of its length; a fiftieth of the target is
    // little enough to add.
    let cuts = (curve.cubic(from, to).off / (0.02 * target)).powf(0.25).clamp(CUTS, 64.0).ceil();
    let gates = Gates::of(segment);
    let at = |k: f64| if k >= cuts { to } else { from + (to - from) * (k / cuts) };
    let (mut core, mut off) = (0.0_f64, 0.0_f64);
    let mut missed = gates.start_miss(curve.point(from)).max(gates.end_miss(curve.point(to)));
    let mut k = 0.0;
    while k < cuts {
        let enclosure = curve.cubic(at(k), at(k + 1.0));
        core = core.max(deviation(&enclosure.cubic, segment)?);
        off = off.max(enclosure.off);
        let c = &enclosure.cubic;
        missed = [c.p0, c.p1, c.p2, c.p3].iter().fold(missed, |m, p| m.max(gates.outside(*p)));
        k += 1.0;
    }
    let chord = (segment.end() - segment.start()).hypot();
    let proved = core + 3.0 * missed + off;
    (missed <= 0.1 * chord && proved.is_finite()).then(|| Proof { proved, arithmetic: rounding(segment) })
}

/// The half planes at a segment's ends.
struct Gates {
    start: Point,
    ahead: Vec2,
    end: Point,
    behind: Vec2,
}

impl Gates {
    fn of(segment: &Segment) -> Self {
        Self {
            start: segment.start(),
            ahead: segment.tangent_at(0.0),
            end: segment.end(),
            behind: segment.tangent_at(1.0),
        }
    }

    fn outside(&self, p: Point) -> f64 {
        let before = -(p - self.start).dot(self.ahead);
        let after = (p - self.end).dot(self.behind);
        before.max(after).max(0.0)
    }

    fn start_miss(&self, p: Point) -> f64 {
        (p - self.start).dot(self.ahead).abs()
    }

    fn end_miss(&self, p: Point) -> f64 {
        (p - self.end).dot(self.behind).abs()
    }
}

/// Bound on the deviation of a cubic from the whole circle or line of a segment.
fn deviation(c: &CubicBez, segment: &Segment) -> Option<f64> {
    match segment {
        Segment::Line(l) => {
            let d = l.tangent();
            let offset = |p: &Point| d.cross(*p - l.start).abs();
            Some([c.p0, c.p1, c.p2, c.p3].iter().map(offset).fold(0.0, f64::max))
        }
        Segment::Arc(a) => deviation_from_circle(c, a),
    }
}

/// Step 1 of the proof. Coordinates are taken from the arc's start, so that a large radius does not
/// eat the digits: |B - c|^2 - R^2 = |q|^2 + 2 q.m + |m|^2 - R^2 with q = B - p, m = p - c.
fn deviation_from_circle(c: &CubicBez, a: &Arc) -> Option<f64> {
    const BINOMIAL_3: [f64; 4] = [1.0, 3.0, 3.0, 1.0];
    const BINOMIAL_6: [f64; 7] = [1.0, 6.0, 15.0, 20.0, 15.0, 6.0, 1.0];
    let m = a.start() - a.center();
    let radius = a.radius();
    let rest = (m.hypot() - radius) * (m.hypot() + radius);
    let q = [c.p0, c.p1, c.p2, c.p3].map(|p| p - a.start());
    let mut sums = [0.0; 7];
    for (i, (qi, wi)) in q.iter().zip(BINOMIAL_3).enumerate() {
        for ((qj, wj), sum) in q.iter().zip(BINOMIAL_3).zip(sums.iter_mut().skip(i)) {
            *sum += wi * wj * (qi.dot(*qj) + (*qi + *qj).dot(m) + rest);
        }
    }
    let coefficients = sums.iter().zip(BINOMIAL_6).map(|(s, w)| s / w);
    let (low, high) = coefficients.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), f| (l.min(f), h.max(f)));
    if !(low > -0.75 * radius * radius && high.is_finite()) {
        return None;
    }
    let off = |f: f64| f.abs() / (radius + (radius * radius + f).max(0.0).sqrt());
    Some(off(low).max(off(high)))
}
