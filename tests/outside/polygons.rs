//! What a round cutter leaves in the corners of a convex pocket, and on the two sides of a polygon.

use std::f64::consts::PI;

use crate::build::*;
use crate::sheet::Sheet;
use sweptedge::geometry::{Point, Segment};
use sweptedge::part::Keep;

const POCKET: Sheet = Sheet::new(
    "What is left in a convex pocket (opening by a disc)",
    "Derived: r^2 (sum of tan(e/2) over the exterior angles e, less pi), each corner by elementary \
     geometry (two tangents and their arc).",
);

/// A convex pocket, cleared along its wall by a cutter of radius 1 on `path`.
fn pocket(name: &str, corners: &[Point], path: Vec<Segment>, expected: f64) {
    let part = part(closed(ring(corners)), Keep::Outside);
    let found = judged(&part, &path, 1.0, 1e-3);
    POCKET.says(format!("{name}: findings"), &corners.len().to_string(), &found.excesses.len().to_string());
    POCKET.holds(format!("{name}: area left, r = 1"), expected, left_standing(&found), 1e-9);
    POCKET.figure(format!("{name}: gouge"), 0.0, found.worst_gouge.unwrap(), 1e-8);
}

#[test]
fn regular_pockets_of_3_5_and_6_sides() {
    let cases = [
        ("equilateral triangle", 3u32, 3.0 * 3f64.sqrt() - PI),
        ("regular pentagon", 5, 0.491_119_986_437),
        ("regular hexagon", 6, 0.322_508_961_548),
    ];
    for (name, sides, expected) in cases {
        let corner = |radius: f64, k: u32| polar(radius, 90.0 + 360.0 * f64::from(k) / f64::from(sides));
        let outline = |radius: f64| (0..sides).map(|k| corner(radius, k)).collect::<Vec<_>>();
        // The centres run on the polygon whose sides lie 1 further in.
        let inner = 10.0 - 1.0 / (PI / f64::from(sides)).cos();
        pocket(name, &outline(10.0), ring(&outline(inner)), expected);
    }
}

#[test]
fn rectangular_pocket() {
    let corners = [p(0.0, 0.0), p(12.0, 0.0), p(12.0, 8.0), p(0.0, 8.0)];
    pocket("rectangle", &corners, rectangle(12.0, 8.0, -1.0), 4.0 - PI);
}
