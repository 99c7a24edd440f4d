//! Cut on the line with a beam or wire of constant width: sizes, sharp and rounded corners.

use std::f64::consts::{PI, SQRT_2};

use crate::build::*;
use crate::sheet::Sheet;
use sweptedge::geometry::{Segment, Turn};
use sweptedge::part::Keep;

const KERF: Sheet = Sheet::new(
    "Kerf: sizes and corners",
    "Common practice, no single source: cut on the line with kerf k a hole grows and an outer size shrinks by k; \
     an outer corner stays sharp, an inner one gets radius k/2 (derived).",
);

#[test]
fn rectangle_of_30_by_20_cut_on_the_line_with_a_kerf_of_0_3() {
    let k = 0.3;
    let region = swept(&rectangle(30.0, 20.0, 0.0), 0.5 * k);
    let mut edges: Vec<_> = region.loops.iter().collect();
    edges.sort_by(|a, b| b.signed_area().total_cmp(&a.signed_area()));
    let (hole, slug) = (edges[0], edges[1]);
    KERF.holds("opening in the sheet: width", 30.0 + k, hole.bounds().width(), 1e-9);
    KERF.holds("opening in the sheet: height", 20.0 + k, hole.bounds().height(), 1e-9);
    let area = (30.0 + k) * (20.0 + k) - (4.0 - PI) * 0.25 * k * k;
    KERF.holds("opening in the sheet: area with corners of k/2", area, hole.signed_area(), 1e-9);
    let arcs = |e: &sweptedge::envelope::EdgeLoop| {
        let arcs = e.pieces.iter().filter_map(|p| match p.segment {
            Segment::Arc(a) => Some(a.radius()),
            Segment::Line(_) => None,
        });
        arcs.collect::<Vec<_>>()
    };
    KERF.says("opening in the sheet: rounded corners", "4", &arcs(hole).len().to_string());
    for radius in arcs(hole) {
        KERF.holds("opening in the sheet: corner radius", 0.5 * k, radius, 1e-9);
    }
    KERF.holds("piece that drops out: width", 30.0 - k, slug.bounds().width(), 1e-9);
    KERF.holds(
        "piece that drops out: area, corners sharp",
        (30.0 - k) * (20.0 - k),
        -slug.signed_area(),
        1e-9,
    );
    KERF.says("piece that drops out: rounded corners", "0", &arcs(slug).len().to_string());
}

#[test]
fn compensated_by_half_the_kerf_an_outer_contour_is_met_and_an_inner_one_keeps_corners() {
    let k = 0.3;
    let outer = part(closed(rectangle(30.0, 20.0, 0.0)), Keep::Inside);
    let found = judged(&outer, &rectangle(30.0, 20.0, 0.5 * k), 0.5 * k, 1e-3);
    KERF.figure("outer contour, compensated: gouge", 0.0, found.worst_gouge.unwrap(), 1e-8);
    KERF.figure("outer contour, compensated: excess", 0.0, found.worst_excess.unwrap(), 1e-8);
    let inner = part(closed(rectangle(30.0, 20.0, 0.0)), Keep::Outside);
    let found = judged(&inner, &rectangle(30.0, 20.0, -0.5 * k), 0.5 * k, 1e-3);
    KERF.says("inner contour, compensated: corners left", "4", &found.excesses.len().to_string());
    for e in &found.excesses {
        KERF.figure("inner contour, compensated: corner", 0.5 * k * (SQRT_2 - 1.0), e.height, 1e-8);
    }
    KERF.holds("inner contour: area left", (4.0 - PI) * 0.25 * k * k, left_standing(&found), 1e-9);
    // Rolled round the outer corners instead of mitred: the same edge.
    let rolled = rolled_round(30.0, 20.0, 0.5 * k);
    let found = judged(&outer, &rolled, 0.5 * k, 1e-3);
    KERF.figure("outer contour, rolled round: excess", 0.0, found.worst_excess.unwrap(), 1e-8);
    KERF.figure("outer contour, rolled round: gouge", 0.0, found.worst_gouge.unwrap(), 1e-8);
}

/// The parallel of a rectangle at distance `d` outside, with arcs round its corners.
fn rolled_round(w: f64, h: f64, d: f64) -> Vec<Segment> {
    vec![
        Segment::line(p(0.0, -d), p(w, -d)),
        arc(p(w, 0.0), p(w, -d), p(w + d, 0.0), Turn::Left),
        Segment::line(p(w + d, 0.0), p(w + d, h)),
        arc(p(w, h), p(w + d, h), p(w, h + d), Turn::Left),
        Segment::line(p(w, h + d), p(0.0, h + d)),
        arc(p(0.0, h), p(0.0, h + d), p(-d, h), Turn::Left),
        Segment::line(p(-d, h), p(-d, 0.0)),
        arc(p(0.0, 0.0), p(-d, 0.0), p(0.0, -d), Turn::Left),
    ]
}
