//! Curves given by formulas, numbers that carry their gradient, and the involute of a circle.

use std::ops::{Add, Mul, Sub};

use crate::build::*;
use crate::sheet::Sheet;
use sweptedge::geometry::{Curve, Point, Segment, Vec2, curve_to_arcs};

/// A curve given by functions of its parameter.
pub struct Given<P, D, F> {
    pub domain: (f64, f64),
    pub point: P,
    pub derivative: D,
    /// Bound on the length of the fourth derivative between two parameters.
    pub fourth: F,
    pub breaks: Vec<f64>,
}

impl<P, D, F> Curve for Given<P, D, F>
where
    P: Fn(f64) -> Point,
    D: Fn(f64) -> Vec2,
    F: Fn(f64, f64) -> f64,
{
    fn domain(&self) -> (f64, f64) {
        self.domain
    }

    fn point(&self, t: f64) -> Point {
        (self.point)(t)
    }

    fn derivative(&self, t: f64) -> Vec2 {
        (self.derivative)(t)
    }

    fn fourth_derivative_bound(&self, from: f64, to: f64) -> f64 {
        (self.fourth)(from, to)
    }

    fn breaks(&self) -> Vec<f64> {
        self.breaks.clone()
    }
}

/// Arcs within `error` of a curve.
pub fn arcs_of<C: Curve>(curve: &C, error: f64) -> (Vec<Segment>, f64) {
    taken(curve_to_arcs(curve, error).unwrap(), error)
}

/// A function of x and y at a point: its value and its gradient.
#[derive(Clone, Copy)]
pub struct Dual {
    pub value: f64,
    pub gradient: Vec2,
}

impl Dual {
    pub const fn x(value: f64) -> Self {
        Self { value, gradient: Vec2::new(1.0, 0.0) }
    }

    pub const fn y(value: f64) -> Self {
        Self { value, gradient: Vec2::new(0.0, 1.0) }
    }

    pub fn powi(self, n: u32) -> Self {
        (1..n).fold(self, |product, _| product * self)
    }

    /// Distance from the curve where the function is zero, to first order.
    pub fn distance(self) -> f64 {
        self.value.abs() / self.gradient.hypot()
    }
}

impl From<f64> for Dual {
    fn from(value: f64) -> Self {
        Self { value, gradient: Vec2::ZERO }
    }
}

impl Add for Dual {
    type Output = Self;

    fn add(self, o: Self) -> Self {
        Self { value: self.value + o.value, gradient: self.gradient + o.gradient }
    }
}

impl Sub for Dual {
    type Output = Self;

    fn sub(self, o: Self) -> Self {
        Self { value: self.value - o.value, gradient: self.gradient - o.gradient }
    }
}

impl Mul for Dual {
    type Output = Self;

    fn mul(self, o: Self) -> Self {
        let gradient = o.gradient * self.value + self.gradient * o.value;
        Self { value: self.value * o.value, gradient }
    }
}

impl Mul<Dual> for f64 {
    type Output = Dual;

    fn mul(self, o: Dual) -> Dual {
        Dual::from(self) * o
    }
}

const INVOLUTE: Sheet = Sheet::new(
    "Offset of the involute of a circle: the same involute, turned",
    "C. Huygens, Horologium Oscillatorium, 1673, part III; any text on gears (from memory): the offset by d of the \
     involute of a circle of radius A is that involute turned by d/A.",
);

#[test]
fn both_edges_of_a_cut_along_an_involute_are_the_involute_turned_by_d_over_a() {
    let (a, d, error) = (10.0, 0.15, 1e-9);
    let involute = |t: f64| p(a * (t.cos() + t * t.sin()), a * (t.sin() - t * t.cos()));
    let curve = Given {
        domain: (0.3, 1.3),
        point: involute,
        derivative: |t: f64| Vec2::new(t.cos(), t.sin()) * (a * t),
        // q = A e^(it) (1 - i t), so |q''''| = A |3 + i t|.
        fourth: |_: f64, to: f64| a * (9.0 + to * to).sqrt(),
        breaks: Vec::new(),
    };
    let (path, bound) = arcs_of(&curve, error);
    let length: f64 = path.iter().map(Segment::length).sum();
    INVOLUTE.holds("length A t^2 / 2 from 0.3 to 1.3", 0.5 * a * (1.69 - 0.09), length, 1e-8);
    let region = swept(&path, d);
    let longer = p(13.943_953_554_5, 2.930_641_443_52);
    INVOLUTE.within("offset point of t = 1 on the swept edge", distance_to_edge(&region, longer), 1e-9);
    // The turn of an involute through q, times A, is its distance along every string.
    let turned = |q: Point| {
        let t = (q.to_vec2().hypot2() / (a * a) - 1.0).sqrt();
        (q.y.atan2(q.x) - (t - t.atan())) * a
    };
    let ends = [involute(0.3), involute(1.3)];
    let (mut least, mut most, mut worst) = (f64::INFINITY, -f64::INFINITY, 0.0f64);
    for q in edge_points(&region) {
        if ends.iter().all(|e| (*e - q).hypot() > d + 1e-6) {
            let along = turned(q);
            (least, most) = (least.min(along), most.max(along));
            worst = worst.max((along.abs() - d).abs());
        }
    }
    INVOLUTE.holds("turn of one edge, times A", -d, least, bound + region.bound);
    INVOLUTE.holds("turn of the other edge, times A", d, most, bound + region.bound);
    INVOLUTE.within("every point of both edges: off by", worst, bound + region.bound);
    INVOLUTE.holds("turn of the edge, degrees", 0.859_436_692_696, (most / a).to_degrees(), 1e-8);
}
