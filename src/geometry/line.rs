//! A straight segment between two points, and the exact test on which side of it a point lies.

use geo::Orientation;
use geo::kernels::{Kernel, RobustKernel};
use kurbo::{Point, Vec2};

use super::Nearest;

/// A straight segment. Both ends may coincide: such a line is a point, its tangent is zero.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Line {
    /// Where it starts.
    pub start: Point,
    /// Where it ends.
    pub end: Point,
}

/// On which side of a directed line a point lies.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Side {
    /// Left of the direction of travel.
    Left,
    /// Right of the direction of travel.
    Right,
    /// Exactly on the infinite line.
    On,
}

/// The exact side of `p` seen from `a` towards `b`: adaptive-precision arithmetic, no rounding
/// (J. R. Shewchuk 1997, through `geo`'s robust kernel).
#[must_use]
pub fn orientation(a: Point, b: Point, p: Point) -> Side {
    let c = |p: Point| geo_types::Coord { x: p.x, y: p.y };
    match RobustKernel::orient2d(c(a), c(b), c(p)) {
        Orientation::CounterClockwise => Side::Left,
        Orientation::Clockwise => Side::Right,
        Orientation::Collinear => Side::On,
    }
}

impl Line {
    /// The segment from `start` to `end`.
    #[must_use]
    pub const fn new(start: Point, end: Point) -> Self {
        Self { start, end }
    }

    /// Vector from start to end.
    #[must_use]
    pub fn vector(&self) -> Vec2 {
        self.end - self.start
    }

    /// Length, in the unit of the coordinates.
    #[must_use]
    pub fn length(&self) -> f64 {
        self.vector().hypot()
    }

    /// Point at fraction `t` of the length; the ends themselves at 0 and 1.
    #[must_use]
    pub fn point_at(&self, t: f64) -> Point {
        if t >= 1.0 {
            return self.end;
        }
        self.start + self.vector() * t
    }

    /// Unit direction of travel; zero for a line that is a point.
    #[must_use]
    pub fn tangent(&self) -> Vec2 {
        let v = self.vector();
        let l = v.hypot();
        if l > 0.0 { v / l } else { Vec2::ZERO }
    }

    /// The point of the segment nearest to `p`.
    #[must_use]
    pub fn nearest(&self, p: Point) -> Nearest {
        let d = self.vector();
        let l2 = d.hypot2();
        let t = if l2 > 0.0 { ((p - self.start).dot(d) / l2).clamp(0.0, 1.0) } else { 0.0 };
        let at = self.point_at(t);
        // Inside the segment the cross product is the more accurate distance: it does not lose the
        // digits which a rounded foot point would.
        let distance =
            if 0.0 < t && t < 1.0 { (d.cross(p - self.start) / l2.sqrt()).abs() } else { (p - at).hypot() };
        Nearest { at, t, distance }
    }
}
