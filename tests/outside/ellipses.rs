//! An elliptic pocket, cleared with a cutter too large for its ends; and the discriminant on which the
//! points of a conic's offsets lie.

use std::f64::consts::{PI, TAU};

use crate::build::*;
use crate::curves::{Dual, Given, arcs_of};
use crate::sheet::Sheet;
use sweptedge::geometry::{Point, Segment, Vec2, ellipse_to_arcs};
use sweptedge::part::{Keep, Part};

const ERROR: f64 = 1e-9;
const A: f64 = 40.0;
const B: f64 = 20.0;

/// The ellipse of semi-axes 40 and 20 as arcs.
fn ellipse() -> (Vec<Segment>, f64) {
    let (u, v) = (Vec2::new(A, 0.0), Vec2::new(0.0, B));
    taken(ellipse_to_arcs(p(0.0, 0.0), u, v, 0.0, TAU, ERROR).unwrap(), ERROR)
}

fn pocket() -> Part {
    let (arcs, bound) = ellipse();
    curved_part(closed(arcs), bound, Keep::Outside)
}

/// The inward offset by `d` at parameter `t`.
fn offset_point(t: f64, d: f64) -> Point {
    let (s, c) = t.sin_cos();
    let q = (A * s).hypot(B * c);
    p((A - B * d / q) * c, (B - A * d / q) * s)
}

/// The inward offset by `d` between two parameters, its ends put at the two points named, as arcs.
fn offset(d: f64, (from, to): (f64, f64), ends: [Point; 2], breaks: Vec<f64>) -> (Vec<Segment>, f64) {
    let curve = Given {
        domain: (from, to),
        point: move |t: f64| {
            if t <= from {
                ends[0]
            } else if t >= to {
                ends[1]
            } else {
                offset_point(t, d)
            }
        },
        // The curvature a b / q^3 takes that share of every step.
        derivative: move |t: f64| {
            let (s, c) = t.sin_cos();
            let q = (A * s).hypot(B * c);
            Vec2::new(-A * s, B * c) * (1.0 - A * B * d / q.powi(3))
        },
        fourth: move |_: f64, _: f64| A + d * fourth_of_normal(),
        breaks,
    };
    arcs_of(&curve, ERROR)
}

/// Bound on the fourth derivative of (b cos t, a sin t) / q. With s = q^2, |s^(k)| <= (a^2 - b^2) 2^(k-1)
/// and s >= b^2, the chain rule bounds the derivatives of s^(-1/2), and Leibniz' rule the product.
fn fourth_of_normal() -> f64 {
    let w = A * A - B * B;
    let s = [w, 2.0 * w, 4.0 * w, 8.0 * w];
    let h = [0.5 / B.powi(3), 0.75 / B.powi(5), 1.875 / B.powi(7), 6.5625 / B.powi(9)];
    let g1 = h[0] * s[0];
    let g2 = h[1] * s[0].powi(2) + h[0] * s[1];
    let g3 = h[2] * s[0].powi(3) + 3.0 * h[1] * s[0] * s[1] + h[0] * s[2];
    let g4 = h[3] * s[0].powi(4)
        + 6.0 * h[2] * s[0].powi(2) * s[1]
        + h[1] * (3.0 * s[1].powi(2) + 4.0 * s[0] * s[2])
        + h[0] * s[3];
    A * (g4 + 4.0 * g3 + 6.0 * g2 + 4.0 * g1 + 1.0 / B)
}

const POCKET: Sheet = Sheet::new(
    "Elliptic pocket 40, 20 and a cutter of radius 15",
    "E. W. Weisstein, Ellipse Parallel Curves, MathWorld (parametric form, octic); trim nodes and excess derived from \
     the circles that touch an ellipse twice (H. Blum 1967, from memory).",
);

#[test]
fn path_trimmed_at_the_nodes_leaves_both_ends_of_the_pocket() {
    let d = 15.0;
    let node = ((A * A - B * B) * (1.0 - d * d / (B * B))).sqrt();
    POCKET.holds("node on the long axis, closed form", 22.912_878_474_8, node, 1e-9);
    let contact = p(node * A * A / (A * A - B * B), 12.909_944_487_4);
    POCKET.holds("contact of the last circle, closed form", 30.550_504_633, contact.x, 1e-8);
    let t = (contact.x / A).acos();
    let (right, left) = (p(node, 0.0), p(-node, 0.0));
    let (upper, bound) = offset(d, (t, PI - t), [right, left], Vec::new());
    let (lower, _) = offset(d, (PI + t, TAU - t), [left, right], Vec::new());
    let path = [upper, lower].concat();
    let found = judged_curves(&pocket(), &path, d, (1e-3, bound));
    POCKET.figure("trimmed: gouge", 0.0, found.worst_gouge.unwrap(), 1e-7);
    POCKET.says("trimmed: findings of excess", "2", &found.excesses.len().to_string());
    for e in &found.excesses {
        POCKET.figure("trimmed: excess at the vertex", 2.087_121_525_22, e.height, 1e-6);
        POCKET.within("trimmed: place from the vertex", (p(e.at.x.abs(), e.at.y) - p(A, 0.0)).hypot(), 1e-6);
    }
    POCKET.holds("trimmed: area left, both ends", 64.613_992_748_1, left_standing(&found), 1e-6);
    // Circle and ellipse part quadratically at the contact: a bound b moves the node by sqrt(2 b / k)
    // with k = 1/15 - 1/33.75, the difference of curvatures.
    let nodes = found.excesses.iter().flat_map(|e| &e.region.as_ref().unwrap().outline);
    let nodes = nodes.flat_map(|path| path.segments().iter().map(Segment::start));
    let off = nodes.map(|n| (p(n.x.abs(), n.y.abs()) - contact).hypot()).fold(f64::INFINITY, f64::min);
    POCKET.within("trimmed: outline of what is left ends at the contact", off, 1e-3);
}

#[test]
fn untrimmed_path_gouges_deepest_at_its_cusps() {
    let d = 15.0;
    let cusp = (((A * B * d).powf(2.0 / 3.0) - B * B) / (A * A - B * B)).sqrt().asin();
    POCKET.holds("parameter of the cusp, degrees, closed form", 18.762_567_753_4, cusp.to_degrees(), 1e-9);
    // From the top, so that the path does not start within a fold.
    let (from, top) = (0.5 * PI, p(0.0, B - d));
    let breaks = vec![PI - cusp, PI + cusp, TAU - cusp, TAU + cusp];
    let (path, bound) = offset(d, (from, from + TAU), [top; 2], breaks);
    let found = judged_curves(&pocket(), &path, d, (1e-3, bound));
    POCKET.figure("untrimmed: greatest gouge", 3.053_173_742_2, found.worst_gouge.unwrap(), 1e-6);
    let center = found.gouges[0].center;
    let off = (p(center.x.abs(), center.y.abs()) - p(25.467_013_242_6, 1.996_597_099_18)).hypot();
    POCKET.within("untrimmed: its place from the cusp", off, 1e-6);
    let kinds: Vec<String> = found.folds.iter().map(|f| format!("{:?}", f.kind)).collect();
    POCKET.says("untrimmed: folds, one at each end", "Loop Loop", &kinds.join(" "));
    for fold in &found.folds {
        let off = (p(fold.at.x.abs(), fold.at.y) - p(22.912_878_474_8, 0.0)).hypot();
        POCKET.within("untrimmed: crossing from the node", off, 1e-8);
    }
    let center = p(A - d, 0.0);
    let dwell = judged(&pocket(), &[Segment::line(center, center)], d, 1e-3);
    POCKET.figure("untrimmed: gouge at (25, 0)", 1.155_626_895_14, dwell.worst_gouge.unwrap(), 1e-6);
}

#[test]
fn cutter_within_the_tightest_curvature_leaves_nothing() {
    // Radius of curvature at the vertex: b^2 / a = 10.
    let d = 9.5;
    let start = p(A - d, 0.0);
    let (path, bound) = offset(d, (0.0, TAU), [start; 2], Vec::new());
    let found = judged_curves(&pocket(), &path, d, (1e-4, bound));
    POCKET.figure("cutter of 9.5 < 10: gouge", 0.0, found.worst_gouge.unwrap(), 1e-7);
    POCKET.figure("cutter of 9.5 < 10: excess", 0.0, found.worst_excess.unwrap(), 1e-7);
    POCKET.says("cutter of 9.5 < 10: folds", "0", &found.folds.len().to_string());
}

const CONIC: Sheet = Sheet::new(
    "Discriminant of a conic's offset: every point of a swept edge is a zero of it",
    "G. Salmon, A Treatise on Conic Sections (from memory), in J. Caravantes, G. M. Diaz-Toca, M. Fioravanti, \
     L. Gonzalez-Vega, On the Implicit Equation of Conics and Quadrics Offsets, Mathematics 9(15):1784, 2021: a point is \
     on the offset by d when det(L conic + circle) has a double root in L.",
);

/// The discriminant in L of det(L E + C), for the ellipse E and the circle C of radius `d` about `at`,
/// all lengths in units of the long semi-axis.
fn discriminant(at: Point, d: f64) -> Dual {
    let (x, y, d) = (Dual::x(at.x / A), Dual::y(at.y / A), d / A);
    let (ea, eb) = (Dual::from(1.0), Dual::from((A / B).powi(2)));
    let s = x * x + y * y - Dual::from(d * d);
    let a = -1.0 * (ea * eb);
    let b = ea * eb * s - (ea + eb);
    let c = (ea + eb) * s - Dual::from(1.0) - y * y * ea - x * x * eb;
    let e = Dual::from(-d * d);
    18.0 * (a * b * c * e) - 4.0 * (b.powi(3) * e) + b * b * c * c
        - 4.0 * (a * c.powi(3))
        - 27.0 * (a * a * e * e)
}

#[test]
fn every_point_of_an_edge_swept_along_the_ellipse_is_a_zero_of_the_discriminant() {
    let (path, bound) = ellipse();
    for d in [5.0f64, 9.0, 15.0] {
        let region = swept(&path, d);
        let node = ((A * A - B * B) * (1.0 - d * d / (B * B))).max(0.0).sqrt();
        let (mut worst, mut looked_at) = (0.0f64, 0);
        for q in edge_points(&region) {
            // At a node the gradient is zero.
            if d > 10.0 && (p(q.x.abs(), q.y) - p(node, 0.0)).hypot() < 1e-2 {
                continue;
            }
            worst = worst.max(discriminant(q, d).distance() * A);
            looked_at += 1;
        }
        assert!(looked_at > 1000, "only {looked_at} points of the edge were looked at");
        // What the arithmetic of the discriminant costs shows at points of the closed form.
        let exact = (0..4000).map(|k| offset_point(TAU * f64::from(k) / 4000.0, d));
        let noise = exact
            .filter(|q| d < 10.0 || (p(q.x.abs(), q.y) - p(node, 0.0)).hypot() > 1e-2 && q.x.abs() < node)
            .map(|q| discriminant(q, d).distance() * A)
            .fold(0.0, f64::max);
        assert!(noise < 1e-8, "{noise:e}");
        let allowed = bound + region.bound + 2.0 * noise;
        CONIC.within(format!("d = {d}: greatest distance of {looked_at} points"), worst, allowed);
        let off = discriminant(p(30.0, 7.0), d).distance() * A;
        assert!(off > 1e-3, "a point that is not on the offset must not pass: {off}");
    }
}
