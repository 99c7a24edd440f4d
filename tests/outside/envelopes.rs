//! Areas and lengths of swept regions against the laws for parallel bodies and tubes.

use std::f64::consts::PI;

use crate::build::*;
use crate::sheet::Sheet;
use sweptedge::geometry::{Turn, Vec2, ellipse_to_arcs};

const STEINER: Sheet = Sheet::new(
    "Parallel bodies of convex shapes (Steiner)",
    "L. A. Santalo, Integral Geometry and Geometric Probability, 1976, I.1.4 (from memory): a convex body of \
     area A and perimeter P grown by r has area A + P r + pi r^2 and perimeter P + 2 pi r.",
);

/// Drives the boundary of a convex body and holds the outer loop against Steiner's formulas.
fn steiner(name: &str, outline: &[sweptedge::geometry::Segment], r: f64, (a, p): (f64, f64), bound: f64) {
    let region = swept(outline, r);
    let outer = loops(&region)[0];
    STEINER.holds(format!("{name}, grown by {r}: area"), a + p * r + PI * r * r, outer.0, bound);
    STEINER.holds(format!("{name}, grown by {r}: perimeter"), p + 2.0 * PI * r, outer.1, bound);
}

#[test]
fn square_of_10_grown_by_3() {
    let square = rectangle(10.0, 10.0, 0.0);
    steiner("square of side 10", &square, 3.0, (100.0, 40.0), 1e-9);
    let hole = loops(&swept(&square, 3.0))[1];
    STEINER.holds("square of side 10, shrunk by 3: area", 16.0, -hole.0, 1e-9);
    STEINER.holds("square of side 10, shrunk by 3: perimeter", 16.0, hole.1, 1e-9);
}

#[test]
fn equilateral_triangle_of_10_grown_by_3_has_no_hole() {
    let triangle = ring(&[p(0.0, 0.0), p(10.0, 0.0), p(5.0, 75f64.sqrt())]);
    steiner("equilateral triangle of side 10", &triangle, 3.0, (25.0 * 3f64.sqrt(), 30.0), 1e-9);
    // The inscribed circle has radius 10 / (2 sqrt 3) = 2.887.
    STEINER.says("equilateral triangle, r = 3: loops", "1", &swept(&triangle, 3.0).loops.len().to_string());
}

#[test]
fn reuleaux_triangle_of_width_20_grown_by_3() {
    let (a, b, c) = (p(0.0, 0.0), p(20.0, 0.0), p(10.0, 300f64.sqrt()));
    let outline = [arc(c, a, b, Turn::Left), arc(a, b, c, Turn::Left), arc(b, c, a, Turn::Left)];
    let measures = (0.5 * (PI - 3f64.sqrt()) * 400.0, 20.0 * PI);
    steiner("Reuleaux triangle of width 20", &outline, 3.0, measures, 1e-9);
}

#[test]
fn ellipse_of_40_and_20_grown_and_shrunk_by_5() {
    let error = 1e-9;
    let made = ellipse_to_arcs(p(0.0, 0.0), Vec2::new(40.0, 0.0), Vec2::new(0.0, 20.0), 0.0, 2.0 * PI, error);
    let (outline, _) = taken(made.unwrap(), error);
    // Perimeter by the complete elliptic integral of the second kind.
    let perimeter = ellipse_perimeter(40.0, 20.0);
    STEINER.holds("ellipse 40, 20: the test's own perimeter", 193.768_964_411, perimeter, 1e-9);
    let area = PI * 800.0;
    steiner("ellipse 40, 20", &outline, 5.0, (area, perimeter), 1e-7);
    let hole = loops(&swept(&outline, 5.0))[1];
    let inner = area - 5.0 * perimeter + 25.0 * PI;
    STEINER.holds("ellipse 40, 20, shrunk by 5: area", inner, -hole.0, 1e-6);
    STEINER.holds("ellipse 40, 20, shrunk by 5: perimeter", perimeter - 10.0 * PI, hole.1, 1e-7);
    STEINER.holds(
        "ellipse 40, 20, shrunk by 5: area, by 40-digit arithmetic",
        1_622.969_117_16,
        -hole.0,
        1e-6,
    );
}

/// By the arithmetic-geometric mean (Gauss): 2 pi (a^2 - sum 2^(n-1) c_n^2) / agm.
fn ellipse_perimeter(a: f64, b: f64) -> f64 {
    let (mut x, mut y, mut weight) = (a, b, 0.5);
    let mut rest = a * a - weight * (a * a - b * b);
    for _ in 0..8 {
        let c = 0.5 * (x - y);
        (x, y) = (0.5 * (x + y), (x * y).sqrt());
        weight *= 2.0;
        rest -= weight * c * c;
    }
    2.0 * PI * rest / x
}

const TUBE: Sheet = Sheet::new(
    "Area swept along a path (tube formula)",
    "H. Hotelling 1939, H. Weyl, On the volume of tubes, 1939; Pappus and Guldin in the plane (from memory): \
     2 r L + pi r^2. The corner term r^2 (tan(th/2) - th/2) is derived.",
);

#[test]
fn segment_of_20_swept_by_3() {
    let region = swept(&lines(&[p(1.0, 2.0), p(17.0, 14.0)]), 3.0);
    TUBE.holds("segment, L = 20, r = 3: area", 120.0 + 9.0 * PI, region.area(), 1e-9);
    TUBE.holds("segment, L = 20, r = 3: perimeter", 40.0 + 6.0 * PI, region.perimeter(), 1e-9);
}

#[test]
fn semicircle_of_radius_20_swept_by_3() {
    let half = arc(p(0.0, 0.0), p(20.0, 0.0), p(-20.0, 0.0), Turn::Left);
    let region = swept(&[half], 3.0);
    TUBE.holds("semicircle, R = 20, r = 3: area", 120.0 * PI + 9.0 * PI, region.area(), 1e-9);
    TUBE.holds("semicircle, R = 20, r = 3, by 40-digit arithmetic", 405.265_452_313, region.area(), 1e-9);
}

#[test]
fn corners_of_60_90_and_120_degrees_swept_by_3() {
    let listed = [(60.0f64, 267.790_570_44), (90.0, 266.342_917_353), (120.0, 262.110_654_575)];
    for (degrees, value) in listed {
        let turn = degrees.to_radians();
        let end = p(20.0, 0.0) + Vec2::from_angle(turn) * 20.0;
        let region = swept(&lines(&[p(0.0, 0.0), p(20.0, 0.0), end]), 3.0);
        let lost = 9.0 * ((0.5 * turn).tan() - 0.5 * turn);
        TUBE.holds(
            format!("corner of {degrees} degrees, legs 20, r = 3: area"),
            240.0 + 9.0 * PI - lost,
            region.area(),
            1e-9,
        );
        TUBE.holds(
            format!("corner of {degrees} degrees, by 40-digit arithmetic"),
            value,
            region.area(),
            1e-9,
        );
    }
}

#[test]
fn closed_path_swept_by_3_covers_twice_r_times_its_length() {
    let region = swept(&[circle(p(5.0, -2.0), 20.0)], 3.0);
    TUBE.holds("circle, R = 20, r = 3: area", 2.0 * 3.0 * 40.0 * PI, region.area(), 1e-9);
    TUBE.holds("circle, R = 20, r = 3: perimeter", 80.0 * PI, region.perimeter(), 1e-9);
}
