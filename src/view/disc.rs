//! How far is a point from one moving disc, whose radius may change on the way?
//!
//! A move carries its disc along a segment while the radius runs linearly from `radius` to
//! `end_radius`. Its clearance at x is the least of |x - c(t)| - r(t) over the move (the project's
//! definition of D, for one move). With k = dr/ds it has closed forms:
//!
//! ```text
//!            x           On a line: at height h over the path and w along it the least value is taken
//!         .' |           at s = w + k h / sqrt(1 - k^2), and it is h sqrt(1 - k^2) - r0 - k w; beyond
//!       .'   | h         an end it is taken at that end (the function is convex in s).
//!   ---o-----'--->       On an arc of radius R about O, with q = |x - O|: where q sin(psi) = k |x - c|,
//!      s     w           that is cos(psi) = (k^2 R +- sqrt((1 - k^2)(q^2 - k^2 R^2))) / q; or at an end.
//! ```
//!
//! Where |k| >= 1 each disc swallows the smaller ones before it (or after it): the largest disc alone
//! counts. The line's form follows by setting the derivative to zero; the arc's likewise, squared.

use crate::geometry::{Arc, Line, Point, Rect, Segment, Vec2};
use crate::program::MoveIndex;

/// One move of a disc: its centre runs along `segment` (a line that is a point stands for a plunge or
/// a dwell), its radius changes linearly with the length run.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DiscMove {
    /// Path of the centre.
    pub segment: Segment,
    /// Radius of the disc at the start, a length, zero or more.
    pub radius: f64,
    /// Radius of the disc at the end, a length, zero or more.
    pub end_radius: f64,
    /// The move of the program that makes it.
    pub source: MoveIndex,
}

/// Where a move comes closest to a point.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Closest {
    /// Fraction of the move's length.
    pub t: f64,
    /// Distance of the point from the centre there, less the radius there: a length.
    pub clearance: f64,
}

impl DiscMove {
    /// A move of a disc whose radius stays the same.
    #[must_use]
    pub const fn constant(segment: Segment, radius: f64, source: MoveIndex) -> Self {
        Self { segment, radius, end_radius: radius, source }
    }

    /// Does the radius stay the same, to the last digit?
    #[must_use]
    pub const fn is_constant(&self) -> bool {
        self.radius.to_bits() == self.end_radius.to_bits()
    }

    /// Radius at fraction `t` of the length; the kept radii themselves at 0 and 1.
    #[must_use]
    pub fn radius_at(&self, t: f64) -> f64 {
        if t >= 1.0 { self.end_radius } else { self.radius + (self.end_radius - self.radius) * t.max(0.0) }
    }

    /// The greater of the two end radii: no disc of the move is larger.
    #[must_use]
    pub const fn greatest_radius(&self) -> f64 {
        self.radius.max(self.end_radius)
    }

    /// The same sweep travelled the other way.
    #[must_use]
    pub const fn reversed(&self) -> Self {
        Self {
            segment: self.segment.reversed(),
            radius: self.end_radius,
            end_radius: self.radius,
            source: self.source,
        }
    }

    /// Is every disc of the move inside its largest? So it is where the radius changes by no less than
    /// the way run; then the move sweeps that disc and nothing else (on a line; on an arc too, for a
    /// chord is shorter than its arc).
    #[must_use]
    pub fn is_swallowed(&self) -> bool {
        !self.is_constant() && (self.end_radius - self.radius).abs() >= self.segment.length()
    }

    /// Box that holds the discs of the whole move.
    #[must_use]
    pub fn bounds(&self) -> Rect {
        let disc = |p: Point, r: f64| Rect::new(p.x - r, p.y - r, p.x + r, p.y + r);
        match &self.segment {
            Segment::Line(l) => disc(l.start, self.radius).union(disc(l.end, self.end_radius)),
            Segment::Arc(_) => {
                let r = self.greatest_radius();
                self.segment.bounds().inflate(r, r)
            }
        }
    }

    /// Clearance of `p` from the discs of this move: negative inside.
    #[must_use]
    pub fn clearance(&self, p: Point) -> f64 {
        if self.is_constant() { self.segment.distance(p) - self.radius } else { self.closest(p).clearance }
    }

    /// Where the move comes closest to `p`, by distance less radius.
    #[must_use]
    pub fn closest(&self, p: Point) -> Closest {
        if self.is_constant() {
            let n = self.segment.nearest(p);
            return Closest { t: n.t, clearance: n.distance - self.radius };
        }
        if self.is_swallowed() {
            let t = if self.end_radius > self.radius { 1.0 } else { 0.0 };
            return self.at(p, t);
        }
        match &self.segment {
            Segment::Line(l) => self.closest_on_line(l, p),
            Segment::Arc(a) => self.closest_on_arc(a, p),
        }
    }

    /// The value at one place of the move.
    fn at(&self, p: Point, t: f64) -> Closest {
        Closest { t, clearance: (p - self.segment.point_at(t)).hypot() - self.radius_at(t) }
    }

    fn closest_on_line(&self, line: &Line, p: Point) -> Closest {
        let d = line.vector();
        let length = d.hypot();
        let change = self.end_radius - self.radius;
        // The leg of the right triangle with hypotenuse `length` and other leg `change`.
        let leg = ((length - change) * (length + change)).sqrt();
        let v = p - line.start;
        let (along, height) = (v.dot(d) / length, (d.cross(v) / length).abs());
        let t = (along + height * (change / leg)) / length;
        // `leg` may be so small that the quotient is not a number; then an end decides.
        if t > 0.0 && t < 1.0 {
            return Closest { t, clearance: (height * leg - change * along) / length - self.radius };
        }
        let (a, b) = (self.at(p, 0.0), self.at(p, 1.0));
        if b.clearance < a.clearance { b } else { a }
    }

    fn closest_on_arc(&self, arc: &Arc, p: Point) -> Closest {
        let (a, b) = (self.at(p, 0.0), self.at(p, 1.0));
        let mut best = if b.clearance < a.clearance { b } else { a };
        let v = p - arc.center();
        let (q, radius) = (v.hypot(), arc.radius());
        let k = (self.end_radius - self.radius) / arc.length();
        let under = (1.0 - k * k) * (q - k * radius) * (q + k * radius);
        if under.is_nan() || under < 0.0 || q <= 0.0 {
            return best;
        }
        for root in [under.sqrt(), -under.sqrt()] {
            let cos = (k * k * radius + root) / q;
            if cos.is_nan() || cos.abs() > 1.0 {
                continue;
            }
            let sin = ((1.0 - cos) * (1.0 + cos)).sqrt() * k.signum() * arc.sweep().signum();
            let toward = Vec2::new(cos * v.x - sin * v.y, sin * v.x + cos * v.y);
            if arc.faces(toward) {
                let here = self.at(p, arc.parameter_of(toward).clamp(0.0, 1.0));
                if here.clearance < best.clearance {
                    best = here;
                }
            }
        }
        best
    }
}

#[cfg(test)]
mod tests {
    use std::f64::consts::PI;

    use super::*;

    fn random(rng: &mut fastrand::Rng) -> DiscMove {
        let number = |rng: &mut fastrand::Rng, range: f64| (rng.f64() * 2.0 - 1.0) * range;
        let at = Point::new(number(rng, 5.0), number(rng, 5.0));
        let segment = if rng.bool() {
            Segment::line(at, Point::new(number(rng, 5.0), number(rng, 5.0)))
        } else {
            let sweep = number(rng, 2.0 * PI);
            Segment::Arc(Arc::from_angles(at, 0.1 + 4.0 * rng.f64(), 6.0 * rng.f64(), sweep).unwrap())
        };
        let radius = 3.0 * rng.f64();
        let steep = [0.3, 0.9, 1.0, 1.3][rng.usize(0..4)];
        let end_radius = (radius + number(rng, 1.0) * steep * segment.length()).max(0.0);
        DiscMove { segment, radius, end_radius, source: MoveIndex(0) }
    }

    #[test]
    fn clearance_of_random_moves_is_the_least_of_many_samples() {
        let mut rng = fastrand::Rng::with_seed(11);
        for case in 0..4000 {
            let m = random(&mut rng);
            let p = Point::new(rng.f64() * 16.0 - 8.0, rng.f64() * 16.0 - 8.0);
            let d = m.clearance(p);
            let samples = 400;
            let value = |t: f64| (p - m.segment.point_at(t)).hypot() - m.radius_at(t);
            let least =
                (0..=samples).map(|i| value(f64::from(i) / f64::from(samples))).fold(f64::INFINITY, f64::min);
            // Between samples the value falls by no more than half a step's way and change of radius.
            let slack = (m.segment.length() + (m.end_radius - m.radius).abs()) / f64::from(2 * samples);
            assert!(d <= least + 1e-12, "case {case}: {d} over {least} for {m:?} at {p:?}");
            assert!(d >= least - slack, "case {case}: {d} far under {least} for {m:?} at {p:?}");
            let c = m.closest(p);
            assert!((value(c.t) - d).abs() < 1e-9, "case {case}: {c:?}");
        }
    }

    #[test]
    fn tapered_cut_has_its_contact_points_at_clearance_zero() {
        // The two common tangents of two circles (belt formula): centres 10 apart, radii 1 and 3.
        let line = Segment::line(Point::ZERO, Point::new(10.0, 0.0));
        let m = DiscMove { segment: line, radius: 1.0, end_radius: 3.0, source: MoveIndex(0) };
        for (x, y) in [(-0.2, 0.979_795_897_113), (9.4, 2.939_387_691_34), (4.6, 1.959_591_794_226_5)] {
            assert!(m.clearance(Point::new(x, y)).abs() < 1e-11);
            assert!(m.clearance(Point::new(x, -y)).abs() < 1e-11);
        }
    }

    #[test]
    fn a_radius_that_grows_faster_than_the_way_leaves_the_larger_disc_alone() {
        let line = Segment::line(Point::ZERO, Point::new(1.0, 0.0));
        for end_radius in [2.0, 2.5] {
            let m = DiscMove { segment: line, radius: 1.0, end_radius, source: MoveIndex(0) };
            assert!(m.is_swallowed());
            let p = Point::new(-4.0, 1.0);
            assert!((m.clearance(p) - (26f64.sqrt() - end_radius)).abs() < 1e-12);
            assert!((m.reversed().clearance(p) - m.clearance(p)).abs() < 1e-15);
        }
    }
}
