//! The parabola y = x^2 and its offsets: where they fold, how deep an untrimmed offset path gouges, and
//! the sextic on which every point of a swept edge lies.

use crate::build::*;
use crate::curves::{Dual, Given, arcs_of};
use crate::sheet::Sheet;
use sweptedge::compare::FoldKind;
use sweptedge::geometry::{Point, QuadBez, Segment, Vec2, quad_to_arcs};
use sweptedge::part::{Keep, Part};

const ERROR: f64 = 1e-9;

/// The parabola from -x to x as arcs within [`ERROR`].
fn parabola(x: f64) -> (Vec<Segment>, f64) {
    taken(quad_to_arcs(&QuadBez::new(p(-x, x * x), p(0.0, -x * x), p(x, x * x)), ERROR).unwrap(), ERROR)
}

/// Material below the parabola.
fn below() -> Part {
    let (arcs, bound) = parabola(5.0);
    curved_part(open(arcs), bound, Keep::Right)
}

/// The offset of the parabola by `d` to its concave side, untrimmed, from parameter -3 to 3.
fn offset(d: f64) -> (Vec<Segment>, f64) {
    let q = |t: f64| (1.0 + 4.0 * t * t).sqrt();
    let cusp = 0.25 * ((2.0 * d).powf(2.0 / 3.0) - 1.0);
    let curve = Given {
        domain: (-3.0, 3.0),
        point: move |t: f64| p(t - 2.0 * d * t / q(t), t * t + d / q(t)),
        // The curvature 2 / q^3 takes that share of every step: none is left at a cusp.
        derivative: move |t: f64| Vec2::new(1.0, 2.0 * t) * (1.0 - 2.0 * d / q(t).powi(3)),
        // With s = 2 t the normal is i sqrt((1 + i s) / (1 - i s)); its fourth derivative by s has
        // length^2 (81 + 648 s^2 - 432 s^4 + 576 s^6) / (1 + s^2)^8, at most 81.
        fourth: move |_: f64, _: f64| 16.0 * 9.0 * d,
        breaks: if cusp > 0.0 { vec![-cusp.sqrt(), cusp.sqrt()] } else { Vec::new() },
    };
    arcs_of(&curve, ERROR)
}

const FOLD: Sheet = Sheet::new(
    "Untrimmed offset of the parabola y = x^2, driven with a cutter of radius d",
    "R. T. Farouki, C. A. Neff, Analytic properties of plane offset curves, Computer Aided Geometric Design 7 (1990) \
     83-99 (cusps where the curvature is 1/d); T. Maekawa, Self-intersections of offsets of quadratic surfaces, \
     Engineering with Computers 14 (1998); formulas of node and gouge derived from them.",
);

/// Radius, parameter of the cusp, cusp, height of the node, gouge at the axis, greatest gouge.
type Row = (f64, f64, (f64, f64), f64, f64, f64);

const TABLE: [Row; 3] = [
    (
        0.6,
        0.179_752_075_549,
        (0.023_231_739_680_4, 0.596_932_425_993),
        0.61,
        0.008_392_021_690_04,
        0.023_968_477_969,
    ),
    (
        1.0,
        0.383_210_468_27,
        (0.225_098_232_187, 0.940_550_788_976),
        1.25,
        0.133_974_596_216,
        0.353_668_036_534,
    ),
    (2.0, 0.616_409_380_97, (0.936_844_927_903, 1.639_881_574_84), 4.25, 0.677_124_344_468, 1.680_609_978_23),
];

#[test]
fn untrimmed_offset_gouges_deepest_at_its_cusps_and_crosses_itself_at_the_node() {
    let part = below();
    for (d, t, cusp, node, axis, greatest) in TABLE {
        let (path, bound) = offset(d);
        let found = judged_curves(&part, &path, d, (1e-4, bound));
        FOLD.figure(format!("d = {d}: greatest gouge"), greatest, found.worst_gouge.unwrap(), 1e-6);
        let gouge = &found.gouges[0];
        FOLD.figure(format!("d = {d}: greatest gouge, as found"), greatest, gouge.depth, 1e-6);
        let off = (p(gouge.center.x.abs(), gouge.center.y) - p(cusp.0, cusp.1)).hypot();
        FOLD.within(format!("d = {d}: its place from the cusp"), off, 1e-6);
        let nearest = p(2.0 * t, 4.0 * t * t);
        let off = (p(gouge.at.x.abs(), gouge.at.y) - nearest).hypot();
        // The foot of a normal feels the arcs' directions, and those are off by the error over the length
        // of a piece: by about its power 2/3.
        FOLD.within(format!("d = {d}: contour point from (2 t_c, 4 t_c^2)"), off, 1e-5);
        let loops: Vec<_> = found.folds.iter().filter(|f| f.kind == FoldKind::Loop).collect();
        FOLD.says(format!("d = {d}: loops found"), "1", &loops.len().to_string());
        let off = (loops[0].at - p(0.0, node)).hypot();
        FOLD.within(format!("d = {d}: crossing from the node (0, {node})"), off, 1e-8);
        let dwell = judged(&part, &[Segment::line(p(0.0, d), p(0.0, d))], d, 1e-4);
        FOLD.figure(format!("d = {d}: gouge at the axis"), axis, dwell.worst_gouge.unwrap(), 1e-6);
    }
}

#[test]
fn offset_folds_when_d_is_over_a_half_and_not_below() {
    let part = below();
    for (d, expected) in [(0.3, "none"), (0.49, "none"), (0.51, "folds"), (0.6, "folds"), (1.0, "folds")] {
        let (path, bound) = offset(d);
        let found = judged_curves(&part, &path, d, (1e-4, bound));
        let got = if found.folds.is_empty() { "none" } else { "folds" };
        FOLD.says(format!("d = {d}: fold if and only if d > 1/2"), expected, got);
        if d < 0.5 {
            FOLD.figure(format!("d = {d}: gouge"), 0.0, found.worst_gouge.unwrap(), 1e-7);
        }
    }
}

#[test]
fn offset_trimmed_at_the_node_leaves_what_the_cutter_cannot_reach() {
    let part = below();
    for (d, _, _, node, ..) in TABLE {
        // From the node outwards: parameters beyond sqrt(d^2 - 1/4) on both sides.
        let q = |t: f64| (1.0 + 4.0 * t * t).sqrt();
        let at = move |t: f64| p(t - 2.0 * d * t / q(t), t * t + d / q(t));
        let from = (d * d - 0.25).sqrt();
        let right = Given {
            domain: (from, 3.0),
            point: move |t: f64| if t <= from { p(0.0, node) } else { at(t) },
            derivative: move |t: f64| Vec2::new(1.0, 2.0 * t) * (1.0 - 2.0 * d / q(t).powi(3)),
            fourth: move |_: f64, _: f64| 16.0 * 9.0 * d,
            breaks: Vec::new(),
        };
        let (arcs, bound) = arcs_of(&right, ERROR);
        let mirror = sweptedge::geometry::Affine::FLIP_X;
        let left = arcs.iter().rev().map(|s| s.mapped(mirror).unwrap().reversed());
        let path: Vec<Segment> = left.chain(arcs.iter().copied()).collect();
        let found = judged_curves(&part, &path, d, (1e-4, bound));
        FOLD.figure(format!("d = {d}, trimmed: gouge"), 0.0, found.worst_gouge.unwrap(), 1e-7);
        FOLD.says(format!("d = {d}, trimmed: folds"), "0", &found.folds.len().to_string());
        // At the vertex (0, 0) the last circle, about the node, ends at height node - d.
        let vertex = found.excesses.iter().find(|e| e.at.to_vec2().hypot() < 1e-6);
        FOLD.figure(format!("d = {d}, trimmed: left at the vertex"), node - d, vertex.unwrap().height, 1e-6);
    }
}

const SEXTIC: Sheet = Sheet::new(
    "Sextic of the parabola's offset: every point of a swept edge lies on it",
    "R. Ablamowicz, J. Liu, On the Parallel Lines for Nondegenerate Conics, arXiv math/0602248, 2006, section 2 \
     (degree and method); the polynomial is the resultant of |p - (t, t^2)|^2 = d^2 and its derivative by t.",
);

/// The sextic at a point, with its gradient.
fn sextic(at: Point, d: f64) -> Dual {
    let (x, y) = (Dual::x(at.x), Dual::y(at.y));
    let (d2, d4, d6) = (d.powi(2), d.powi(4), d.powi(6));
    let (x2, x4, y2, y3, y4) = (x.powi(2), x.powi(4), y.powi(2), y.powi(3), y.powi(4));
    16.0 * x.powi(6) + 16.0 * (x4 * y2) - 40.0 * (x4 * y) - 32.0 * (x2 * y3)
        + (1.0 - 48.0 * d2) * x4
        + (32.0 - 32.0 * d2) * (x2 * y2)
        + 16.0 * y4
        + (8.0 * d2 - 2.0) * (x2 * y)
        - (8.0 + 32.0 * d2) * y3
        + (48.0 * d4 - 20.0 * d2) * x2
        + (1.0 - 8.0 * d2 + 16.0 * d4) * y2
        + (8.0 * d2 + 32.0 * d4) * y
        - Dual::from(16.0 * d6 + 8.0 * d4 + d2)
}

#[test]
fn every_point_of_an_edge_swept_along_the_parabola_lies_on_the_sextic() {
    for d in [0.3, 0.45, 1.0, 2.0] {
        let (path, bound) = parabola(2.5);
        let region = swept(&path, d);
        let (ends, node) = ([p(-2.5, 6.25), p(2.5, 6.25)], p(0.0, d * d + 0.25));
        let (mut worst, mut looked_at) = (0.0f64, 0);
        for q in edge_points(&region) {
            // Points of the two end circles are no part of the offset; at the node the curve crosses
            // itself, so the gradient is zero there.
            if ends.iter().any(|e| (*e - q).hypot() < d + 1e-6) || (q - node).hypot() < 1e-3 {
                continue;
            }
            worst = worst.max(sextic(q, d).distance());
            looked_at += 1;
        }
        assert!(looked_at > 1000, "only {looked_at} points of the edge were looked at");
        SEXTIC.within(
            format!("d = {d}: greatest distance of {looked_at} points"),
            worst,
            bound + region.bound,
        );
        let off = sextic(p(0.3, -0.5 * d), d).distance();
        assert!(off > 1e-3, "a point that is not on the offset must not pass: {off}");
    }
}
