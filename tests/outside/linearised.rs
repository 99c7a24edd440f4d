//! Circles driven in chords: how far in and out the cut edge goes, and which number of chords will do.

use std::f64::consts::PI;

use crate::build::*;
use crate::sheet::Sheet;
use sweptedge::geometry::{Point, Segment};
use sweptedge::part::Keep;

const CHORDS: Sheet = Sheet::new(
    "Linearised arcs",
    "Sagitta R (1 - cos(dphi/2)), elementary; common practice, no single source. The inner cut's corners lie at \
     r / cos(pi/N) from the path's, derived.",
);

/// The regular polygon of `count` corners on a circle of `radius`.
fn chords(count: u32, radius: f64) -> Vec<Segment> {
    let corners: Vec<Point> =
        (0..count).map(|k| polar(radius, 360.0 * f64::from(k) / f64::from(count))).collect();
    ring(&corners)
}

/// Smallest and greatest distance from the origin along a loop.
fn extent(edge: &sweptedge::envelope::EdgeLoop) -> (f64, f64) {
    // Nearest by the segments' own distance; farthest at an end or, on an arc, straight out.
    let origin = p(0.0, 0.0);
    let near = edge.pieces.iter().map(|e| e.segment.distance(origin)).fold(f64::INFINITY, f64::min);
    let far = edge.pieces.iter().flat_map(|e| {
        (0..=64).map(|k| e.segment.point_at(f64::from(k) / 64.0).to_vec2().hypot()).collect::<Vec<_>>()
    });
    (near, far.fold(0.0, f64::max))
}

#[test]
fn polygon_of_36_corners_on_radius_20_cut_by_5() {
    let path = chords(36, 20.0);
    let region = swept(&path, 5.0);
    let mut edges: Vec<_> = region.loops.iter().collect();
    edges.sort_by(|a, b| b.signed_area().total_cmp(&a.signed_area()));
    let ((outer_near, outer_far), (inner_near, inner_far)) = (extent(edges[0]), extent(edges[1]));
    CHORDS.holds("36-gon, outer cut, nearest", 24.923_893_961_8, outer_near, 1e-9);
    CHORDS.holds("36-gon, outer cut, farthest", 25.0, outer_far, 1e-9);
    CHORDS.holds("36-gon, inner cut, nearest", 14.923_893_961_8, inner_near, 1e-9);
    CHORDS.holds("36-gon, inner cut, farthest", 14.980_900_812_3, inner_far, 1e-9);
    let sagitta = 20.0 * (1.0 - 5f64.to_radians().cos());
    let boss = part(closed(vec![circle(p(0.0, 0.0), 15.0)]), Keep::Inside);
    let found = judged(&boss, &path, 5.0, 1e-3);
    CHORDS.figure("36-gon round a boss of radius 15: gouge", sagitta, found.worst_gouge.unwrap(), 1e-8);
    let bore = part(closed(vec![circle(p(0.0, 0.0), 25.0)]), Keep::Outside);
    let found = judged(&bore, &path, 5.0, 1e-3);
    CHORDS.figure("36-gon in a bore of radius 25: excess", sagitta, found.worst_excess.unwrap(), 1e-8);
    CHORDS.figure("36-gon in a bore of radius 25: gouge", 0.0, found.worst_gouge.unwrap(), 1e-8);
}

#[test]
fn circle_of_radius_10_needs_71_chords_for_a_hundredth_and_223_for_a_thousandth() {
    let boss = part(closed(vec![circle(p(0.0, 0.0), 8.0)]), Keep::Inside);
    for (limit, enough) in [(0.01, 71u32), (0.001, 223)] {
        for count in [enough, enough - 1] {
            let found = judged(&boss, &chords(count, 10.0), 2.0, limit);
            let sagitta = 10.0 * (1.0 - (PI / f64::from(count)).cos());
            let worst = found.worst_gouge.unwrap();
            CHORDS.figure(format!("{count} chords on radius 10: gouge"), sagitta, worst, 1e-8);
            let (expected, got) = (count < enough, !found.gouges.is_empty());
            CHORDS.says(format!("{count} chords, limit {limit}: over it"), said(expected), said(got));
        }
    }
    let found = judged(&boss, &chords(71, 10.0), 2.0, 0.01);
    CHORDS.figure(
        "71 chords, by 40-digit arithmetic",
        0.009_787_734_800_26,
        found.worst_gouge.unwrap(),
        1e-8,
    );
}

const fn said(yes: bool) -> &'static str {
    if yes { "yes" } else { "no" }
}
