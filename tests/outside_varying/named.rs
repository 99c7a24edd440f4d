//! Laws of circles whose envelope has a name, and the judge that holds a sweep against that name.

use sweptedge::envelope::{SweptRegion, sweep_laws};
use sweptedge::geometry::{Point, Vec2};
use sweptedge::tolerance::CURVE_ERROR_MM;
use sweptedge::view::{DiscLaw, Lean, departure_by_second_derivatives};

use crate::sheet::Sheet;

/// The bound within which laws are followed.
pub const E: f64 = CURVE_ERROR_MM;

pub fn off_edge(region: &SweptRegion, q: Point) -> f64 {
    region.segments().map(|s| s.distance(q)).fold(f64::INFINITY, f64::min)
}

/// A law by functions, with its bound.
pub struct By<A: Fn(f64) -> (Point, f64), B: Fn(f64, f64) -> f64>(pub A, pub B);

impl<A: Fn(f64) -> (Point, f64), B: Fn(f64, f64) -> f64> DiscLaw for By<A, B> {
    fn at(&self, t: f64) -> (Point, f64) {
        self.0(t)
    }
    fn departure(&self, from: f64, to: f64) -> f64 {
        self.1(from, to)
    }
}

/// Circles about the points of a curve, all through one point `o`. `speed` and `bend` bound the curve's
/// first and second derivative over t in [0, 1].
pub struct Through<C: Fn(f64) -> Point> {
    pub center: C,
    pub o: Point,
    pub speed: f64,
    pub bend: f64,
}

impl<C: Fn(f64) -> Point> DiscLaw for Through<C> {
    fn at(&self, t: f64) -> (Point, f64) {
        let c = (self.center)(t);
        (c, (c - self.o).hypot())
    }

    /// r = |c - o|: r'' is the part of c'' along c - o plus the square of the part of c' across it over r.
    /// Near o, where that has no bound, r and its chord differ by no more than the way run.
    fn departure(&self, from: f64, to: f64) -> f64 {
        let h = to - from;
        let least = (self.at(0.5 * (from + to)).1 - 0.5 * h * self.speed).max(0.0);
        let second = departure_by_second_derivatives(0.0, self.bend + self.speed * self.speed / least, h);
        departure_by_second_derivatives(self.bend, 0.0, h) + second.min(self.speed * h)
    }
}

impl<C: Fn(f64) -> Point> Through<C> {
    /// The envelope's other point: `o` mirrored in the tangent at t (orthotomic; the tangent by a central
    /// difference).
    pub fn mirrored(&self, t: f64) -> Point {
        let c = (self.center)(t);
        let d = ((self.center)(t + 1e-6) - (self.center)(t - 1e-6)).normalize();
        let v = self.o - c;
        c + d * (2.0 * v.dot(d)) - v
    }
}

/// Holds a sweep against the curve it must have for an edge: every exposed point of the curve lies on the
/// edge, and every point of the edge lies on the curve (first-order distance by its equation), on one of
/// the `discs` at the ends, or at one of the `apart` points.
pub struct Named<'a> {
    pub sheet: Sheet,
    pub name: &'a str,
    pub laws: Vec<&'a dyn DiscLaw>,
    pub envelope: Vec<Point>,
    pub equation: &'a dyn Fn(Point) -> f64,
    pub apart: Vec<Point>,
    pub open: bool,
}

impl Named<'_> {
    fn exposed(&self, q: Point) -> bool {
        let discs = self.laws.iter().flat_map(|l| (0..=3000).map(|i| l.at(f64::from(i) / 3000.0)));
        discs.map(|(c, r)| (q - c).hypot() - r).fold(f64::INFINITY, f64::min) > -1e-9
    }

    pub fn check(&self) -> SweptRegion {
        // Where all circles pass through one point the smaller ones leave a hole there of the bound's
        // size, edged by every one of them: a coarser bound keeps that case short.
        let coarse = if self.apart.is_empty() { E } else { 10.0 * E };
        let [inside, outside, either] =
            [(Lean::Inside, coarse), (Lean::Outside, E), (Lean::Either, E)].map(|(lean, within)| {
                sweep_laws(&self.laws, within, lean).unwrap_or_else(|e| panic!("{lean:?}: {e}"))
            });
        let (mut seen, mut farthest) = (0, 0.0f64);
        for &q in &self.envelope {
            if self.exposed(q) {
                seen += 1;
                // Outside of the smaller sweep the distance is the clearance: at most the bound.
                let off = off_edge(&inside, q);
                assert!(off <= inside.bound + 1e-8, "{q:?} is {off:e} off the inner edge");
                let apart = self.apart.iter().any(|o| (q - *o).hypot() <= 0.05);
                let off = off_edge(&either, q);
                farthest = farthest.max(if apart { 0.0 } else { off });
            }
        }
        assert!(2 * seen >= self.envelope.len().min(40), "{seen} exposed");
        // On the straight moves' side of the bound or the other; at a corner the two add up.
        let name = self.name;
        self.sheet.within(format!("{name}: curve off the edge"), farthest, 1.5 * either.bound);
        for (lean, region) in [("outer ", &outside), ("", &either)] {
            let (mut on_curve, mut farthest) = (0, 0.0f64);
            for s in region.segments() {
                for k in 0..3 {
                    let q = s.point_at(0.2 + 0.3 * f64::from(k));
                    let value = (self.equation)(q);
                    let step = 1e-5;
                    let slope = |d: Vec2| ((self.equation)(q + d) - (self.equation)(q - d)) / (2.0 * step);
                    let gradient = slope(Vec2::new(step, 0.0)).hypot(slope(Vec2::new(0.0, step)));
                    if value.abs() <= 1.05 * region.bound * gradient {
                        on_curve += 1;
                        farthest = farthest.max(value.abs() / gradient);
                        continue;
                    }
                    let ends = self.laws.iter().flat_map(|l| [l.at(0.0), l.at(1.0)]);
                    let at_end = self.open
                        && ends.into_iter().any(|(c, r)| ((q - c).hypot() - r).abs() <= region.bound);
                    let apart = self.apart.iter().any(|o| (q - *o).hypot() <= 0.05);
                    assert!(
                        at_end || apart,
                        "{q:?} of the edge: equation {value:e}, gradient {gradient:e}, distance {:e}",
                        value.abs() / gradient
                    );
                }
            }
            assert!(on_curve > 40, "{on_curve} points of the edge on the curve");
            let what = format!("{name}: {lean}edge off the curve, {on_curve} places");
            self.sheet.within(what, farthest, 1.05 * region.bound);
        }
        either
    }
}
