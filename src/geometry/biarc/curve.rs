//! What must a curve know about itself to be read as arcs with a proved error?
//!
//! A point for each parameter, its derivative, and a bound on its fourth derivative: between two
//! parameters the cubic that shares both points and derivatives then differs from it by at most
//! `h^4 / 384` of that bound at the same parameter (error of cubic Hermite interpolation, e.g. P. J.
//! Davis, Interpolation and Approximation, 1963, theorem 3.5.1 with f'''' applied along every
//! direction). A Bezier curve of degree three or less *is* such a cubic, its error is zero.

use kurbo::{CubicBez, ParamCurve, Point, Vec2, common::solve_cubic};

/// A cubic over a stretch of parameters and how far the curve may be from it at the same parameter.
#[derive(Clone, Copy, Debug)]
pub struct Enclosure {
    /// The cubic; it starts and ends at the curve's own points.
    pub cubic: CubicBez,
    /// Bound on the distance, a length.
    pub off: f64,
}

/// A curve given by a parameter.
pub trait Curve {
    /// First and last parameter, first < last.
    fn domain(&self) -> (f64, f64);

    /// The point at `t`. The same `t` must always give the same point, to the last bit: pieces are
    /// joined at it.
    fn point(&self, t: f64) -> Point;

    /// Derivative by the parameter.
    fn derivative(&self, t: f64) -> Vec2;

    /// Upper bound on the length of the fourth derivative between two parameters.
    fn fourth_derivative_bound(&self, from: f64, to: f64) -> f64;

    /// Parameters, ascending, at which pieces must end: cusps, kinks, knots of low smoothness, and
    /// where it pays, points of extreme curvature.
    fn breaks(&self) -> Vec<f64> {
        Vec::new()
    }

    /// A cubic that encloses the stretch between two parameters.
    fn cubic(&self, from: f64, to: f64) -> Enclosure {
        let h = to - from;
        let (start, end) = (self.point(from), self.point(to));
        let cubic = CubicBez::new(
            start,
            start + self.derivative(from) * (h / 3.0),
            end - self.derivative(to) * (h / 3.0),
            end,
        );
        Enclosure { cubic, off: h.powi(4) / 384.0 * self.fourth_derivative_bound(from, to) }
    }
}

/// A cubic Bezier curve over the parameters 0 to 1.
pub(super) struct CubicCurve {
    cubic: CubicBez,
}

impl CubicCurve {
    pub(super) const fn new(cubic: CubicBez) -> Self {
        Self { cubic }
    }
}

impl Curve for CubicCurve {
    fn domain(&self) -> (f64, f64) {
        (0.0, 1.0)
    }

    fn point(&self, t: f64) -> Point {
        if t <= 0.0 {
            self.cubic.p0
        } else if t >= 1.0 {
            self.cubic.p3
        } else {
            self.cubic.eval(t)
        }
    }

    fn derivative(&self, t: f64) -> Vec2 {
        let CubicBez { p0, p1, p2, p3 } = self.cubic;
        let s = 1.0 - t;
        ((p1 - p0) * (s * s) + (p2 - p1) * (2.0 * s * t) + (p3 - p2) * (t * t)) * 3.0
    }

    fn fourth_derivative_bound(&self, _from: f64, _to: f64) -> f64 {
        0.0
    }

    fn cubic(&self, from: f64, to: f64) -> Enclosure {
        if from <= 0.0 && to >= 1.0 {
            return Enclosure { cubic: self.cubic, off: 0.0 };
        }
        let h = (to - from) / 3.0;
        let (start, end) = (self.point(from), self.point(to));
        let cubic =
            CubicBez::new(start, start + self.derivative(from) * h, end - self.derivative(to) * h, end);
        Enclosure { cubic, off: 0.0 }
    }

    /// Where the curve runs slowest, when that is much slower than elsewhere: at a cusp its speed is
    /// zero, near one its radius is tiny. Roots of the derivative of |B'|^2, a cubic.
    fn breaks(&self) -> Vec<f64> {
        let CubicBez { p0, p1, p2, p3 } = self.cubic;
        let (d0, d1, d2) = (p1 - p0, p2 - p1, p3 - p2);
        let (a, b, c) = (d0 - d1 * 2.0 + d2, (d1 - d0) * 2.0, d0);
        let fastest = d0.hypot().max(d1.hypot()).max(d2.hypot());
        let roots = solve_cubic(b.dot(c), b.hypot2() + 2.0 * a.dot(c), 3.0 * a.dot(b), 2.0 * a.hypot2());
        let slow = |t: &f64| 1e-9 < *t && *t < 1.0 - 1e-9 && self.derivative(*t).hypot() < SLOW * fastest;
        let mut found: Vec<f64> = roots.into_iter().filter(|t| t.is_finite()).filter(slow).collect();
        found.sort_by(f64::total_cmp);
        found.dedup_by(|a, b| (*a - *b).abs() < 1e-9);
        found
    }
}

/// Slower than this share of its longest control leg (a third of its greatest speed), a cubic is
/// broken at its slowest point.
const SLOW: f64 = 0.3;

/// The affine image of a circle.
pub(super) struct EllipseCurve {
    center: Point,
    u: Vec2,
    v: Vec2,
    from: f64,
    sweep: f64,
}

impl EllipseCurve {
    /// `sweep` beyond a turn is cut to one turn. A negative one is the same curve with `v` negated
    /// and parameters negated, so that parameters always ascend.
    pub(super) fn new(center: Point, u: Vec2, v: Vec2, start: f64, sweep: f64) -> Self {
        let sweep = sweep.clamp(-std::f64::consts::TAU, std::f64::consts::TAU);
        if sweep < 0.0 {
            Self { center, u, v: -v, from: -start, sweep: -sweep }
        } else {
            Self { center, u, v, from: start, sweep }
        }
    }

    pub(super) const fn center(&self) -> Point {
        self.center
    }

    pub(super) const fn sweep(&self) -> f64 {
        self.sweep
    }

    /// Angle swept about the centre where the ellipse is a circle, positive counter-clockwise.
    pub(super) fn angle_swept(&self) -> f64 {
        self.sweep * self.u.cross(self.v).signum()
    }

    /// Semi-axes, longer first: the singular values of the matrix [u v], from the sum and difference
    /// formulas, which do not cancel where both are nearly equal.
    pub(super) fn semi_axes(&self) -> (f64, f64) {
        let (u, v) = (self.u, self.v);
        let sum = (u.x + v.y).hypot(u.y - v.x);
        let difference = (u.x - v.y).hypot(u.y + v.x);
        (0.5 * (sum + difference), 0.5 * (sum - difference).abs())
    }
}

impl Curve for EllipseCurve {
    fn domain(&self) -> (f64, f64) {
        (self.from, self.from + self.sweep)
    }

    fn point(&self, t: f64) -> Point {
        let full = self.sweep >= std::f64::consts::TAU && t >= self.from + self.sweep;
        let (sin, cos) = if full { self.from } else { t }.sin_cos();
        self.center + self.u * cos + self.v * sin
    }

    fn derivative(&self, t: f64) -> Vec2 {
        let (sin, cos) = t.sin_cos();
        self.v * cos - self.u * sin
    }

    fn fourth_derivative_bound(&self, _from: f64, _to: f64) -> f64 {
        self.semi_axes().0
    }

    /// The vertices: between them the curvature only rises or only falls.
    fn breaks(&self) -> Vec<f64> {
        use std::f64::consts::FRAC_PI_2;
        let (u, v) = (self.u, self.v);
        let vertex = 0.5 * (2.0 * u.dot(v)).atan2(u.hypot2() - v.hypot2());
        let first = ((self.from - vertex) / FRAC_PI_2).ceil();
        (0..5)
            .map(|k| vertex + (first + f64::from(k)) * FRAC_PI_2)
            .filter(|t| self.from + 1e-9 < *t && *t < self.from + self.sweep - 1e-9)
            .collect()
    }
}
