//! Paths on which general geometry libraries fell. Each test names the public issue that reports it
//! (owner/repo#number) and is judged by clearance, by a closed form, or by both.

#![allow(clippy::unwrap_used, reason = "a test may stop at the first surprise")]

mod oracle;

use std::f64::consts::{PI, TAU};

use approx::assert_abs_diff_eq;
use oracle::{Rng, clearance, family, polyline, winding};
use sweptedge::envelope::{SweptRegion, sweep};
use sweptedge::geometry::{Arc, Point, Segment, Turn, Vec2};
use sweptedge::view::DiscFamily;

/// The region of a family, held against clearance at 400 random points and along its whole edge.
fn judged(f: &DiscFamily) -> SweptRegion {
    let region = sweep(f).unwrap();
    region.check_invariants(f).unwrap();
    let b = f.bounds().unwrap();
    let b = b.inflate(0.05 * b.width() + 1e-6, 0.05 * b.height() + 1e-6);
    let mut rng = Rng::with_seed(1);
    for _ in 0..400 {
        let p = Point::new(b.x0 + rng.f64() * b.width(), b.y0 + rng.f64() * b.height());
        let d = clearance(f, p);
        if d.abs() > 1e-7 * b.width().max(b.height()) + 4.0 * region.bound {
            assert_eq!(winding(&region, p), i64::from(d < 0.0), "at {p:?}, clearance {d}");
        }
    }
    region
}

fn of_lines(points: &[(f64, f64)], radius: f64) -> SweptRegion {
    judged(&family(&polyline(points), radius))
}

/// Lines and arcs through vertices with bulges; `closed` adds the way back to the first.
fn bulged(vertices: &[(f64, f64, f64)], closed: bool) -> Vec<Segment> {
    let count = if closed { vertices.len() } else { vertices.len() - 1 };
    (0..count)
        .map(|i| {
            let (a, b) = (vertices[i], vertices[(i + 1) % vertices.len()]);
            let (p, q) = (Point::new(a.0, a.1), Point::new(b.0, b.1));
            Arc::from_bulge(p, q, a.2).map_or(Segment::line(p, q), Segment::Arc)
        })
        .collect()
}

fn circle(x: f64, y: f64, r: f64) -> Segment {
    Segment::Arc(Arc::full_circle(Point::new(x, y), Point::new(x + r, y), Turn::Left).unwrap())
}

fn holes(region: &SweptRegion) -> usize {
    region.loops.iter().filter(|l| l.signed_area() < 0.0).count()
}

#[test]
fn tiny_offset_of_an_open_path_with_two_bulges() {
    // jbuckmccready/cavalier_contours#82: +0.005 right, -0.005 empty.
    let path = bulged(
        &[
            (28.7793, 24.1251, 0.0),
            (26.6719, 18.6144, 0.0),
            (27.4604, 13.6769, 0.157_308),
            (28.4408, 11.7648, 0.0),
            (42.1788, -1.97424, 0.198_723),
            (44.6542, -3.0, 0.0),
            (49.6542, -3.0, 0.0),
            (54.7638, -0.049_999_8, 0.0),
        ],
        false,
    );
    let region = judged(&family(&path, 0.005));
    let length: f64 = path.iter().map(Segment::length).sum();
    // Tube formula (check-values 1.10), less what the corners' turns overlap: below r^2.
    assert_abs_diff_eq!(region.area(), 2.0 * 0.005 * length + PI * 2.5e-5, epsilon = 2.5e-5);
    assert_eq!(region.loops.len(), 1);
}

#[test]
fn zero_length_first_segment_with_a_bulge_of_a_closed_path() {
    // cavalier_contours#32: result not closed.
    let path = bulged(
        &[(0.0, 0.0, -0.0017), (0.0, 0.0, 0.0), (10.0, 0.0, 0.0), (10.0, 10.0, 0.0), (0.0, 10.0, 0.0)],
        true,
    );
    let region = judged(&family(&path, 1.0));
    assert_eq!((region.loops.len(), holes(&region)), (2, 1));
    assert_abs_diff_eq!(region.area(), 10.0 * 10.0 + 40.0 + PI - 64.0, epsilon = 1e-9);
}

#[test]
fn closed_zigzag_swept_twice_is_swept_once_with_both_radii() {
    // cavalier_contours#77: a stray half circle. The sweep of a sweep is the sweep with the sum.
    let points = [
        (2.0, 10.0),
        (-1.0, 7.0),
        (-1.0, 15.0),
        (2.0, 12.0),
        (-0.0627, 12.3385),
        (1.0, 10.9937),
        (0.1442, 9.4608),
        (2.0, 10.0),
    ];
    let (r1, r2) = (0.3, 0.2);
    let whole = of_lines(&points, r1 + r2);
    let first = of_lines(&points, r1);
    // Sweeping the edge of the first sweep covers its inside only near the edge: compare the outside.
    let edge: Vec<Segment> = first.segments().copied().collect();
    let second = judged(&family(&edge, r2));
    let mut rng = Rng::with_seed(2);
    for _ in 0..2000 {
        let p = Point::new(-2.0 + 5.0 * rng.f64(), 6.0 + 10.0 * rng.f64());
        let swept_twice = winding(&first, p) + winding(&second, p) > 0;
        if clearance(&family(&polyline(&points), r1 + r2), p).abs() > 1e-6 {
            assert_eq!(swept_twice, winding(&whole, p) > 0, "at {p:?}");
        }
    }
}

#[test]
fn rectangle_narrower_than_the_cutter_leaves_nothing_inside() {
    // cavalier_contours (the older CavalierContours#7): 120 x 40 inset by 30 gave a rectangle of 76 x 4.
    let region = of_lines(&[(0.0, 0.0), (120.0, 0.0), (120.0, 40.0), (0.0, 40.0), (0.0, 0.0)], 30.0);
    assert_eq!(holes(&region), 0);
    // Steiner (L. Santalo, Integral Geometry and Geometric Probability, I.1.4; check-values 1.9).
    assert_abs_diff_eq!(region.area(), 120.0 * 40.0 + 320.0 * 30.0 + PI * 900.0, epsilon = 1e-8);
}

#[test]
fn line_at_a_slight_angle_into_a_quarter_arc() {
    // CavalierContours#59: radius .1875, bulge .414309, offset 2e-5: part missing.
    let path =
        bulged(&[(0.0, 0.001, 0.0), (1.0, 0.0, 0.414_309), (1.1875, 0.1875, 0.0), (1.1875, 1.0, 0.0)], false);
    for radius in [2e-5, 0.05, 0.1875, 0.2] {
        judged(&family(&path, radius));
    }
}

#[test]
fn two_arcs_of_one_circle_in_opposite_directions_touching_at_their_ends() {
    // cavalier_contours, pull request 71 (issue 42): crossing missed.
    let up = Arc::from_angles(Point::ZERO, 5.0, 0.0, PI).unwrap();
    let down = Arc::from_angles(Point::ZERO, 5.0, TAU, -PI).unwrap();
    let region = judged(&family(&[Segment::Arc(up), Segment::Arc(down)], 1.0));
    assert_abs_diff_eq!(region.area(), PI * (36.0 - 16.0), epsilon = 1e-9);
    assert_eq!(holes(&region), 1);
}

#[test]
fn slot_of_exactly_twice_the_radius_is_closed_and_a_wider_one_is_open() {
    // cavalier_contours#35, #44: the seam was kept in one way of working and dropped in another.
    let c_shape = |gap: f64| {
        [(0.0, 0.0), (10.0, 0.0), (10.0, gap), (-1.0, gap), (-1.0, 20.0), (-3.0, 20.0), (-3.0, 0.0)]
    };
    let area = |gap: f64| of_lines(&c_shape(gap), 1.0).area();
    let seam = area(2.0);
    for wider in [1e-9, 1e-3] {
        let open = area(2.0 + wider);
        assert_abs_diff_eq!(open, seam, epsilon = 30.0 * wider);
    }
    for narrower in [1e-9, 1e-3] {
        assert_abs_diff_eq!(area(2.0 - narrower), seam, epsilon = 30.0 * narrower);
    }
    // A slot wide enough to be told from none is a real gap between the loops.
    let wide = of_lines(&c_shape(2.001), 1.0);
    assert!(wide.perimeter() > of_lines(&c_shape(2.0), 1.0).perimeter() + 15.0);
}

#[test]
fn turning_back_on_the_own_path_leaves_no_hole() {
    // AngusJohnson/Clipper2#366.
    let region = of_lines(&[(90.0, 0.0), (94.0, 0.0), (88.0, 0.0)], 10.0);
    assert_eq!(holes(&region), 0);
    assert_abs_diff_eq!(region.area(), 6.0 * 20.0 + PI * 100.0, epsilon = 1e-9);
}

#[test]
fn retraced_line_retraced_ring_lollipop_and_figure_eight_have_0_1_1_2_holes() {
    let square = [(0.0, 0.0), (8.0, 0.0), (8.0, 8.0), (0.0, 8.0), (0.0, 0.0)];
    let retraced: Vec<_> = square.iter().copied().chain(square.iter().rev().copied()).collect();
    assert_eq!(holes(&of_lines(&[(0.0, 0.0), (9.0, 0.0), (0.0, 0.0), (9.0, 0.0)], 1.0)), 0);
    assert_eq!(holes(&of_lines(&retraced, 1.0)), 1);
    let lollipop: Vec<_> = std::iter::once((-9.0, 0.0)).chain(square).chain([(-9.0, 0.0)]).collect();
    assert_eq!(holes(&of_lines(&lollipop, 1.0)), 1);
    let eight = [(0.0, 0.0), (8.0, 8.0), (16.0, 0.0), (16.0, 8.0), (8.0, 0.0), (0.0, 8.0), (0.0, 0.0)];
    assert!(holes(&of_lines(&eight, 1.0)) >= 2);
}

#[test]
fn closed_line_repeated_by_its_first_points_keeps_its_hole() {
    // boostorg/geometry#1433.
    let region = of_lines(&[(0.0, 0.0), (8.0, 0.0), (8.0, 8.0), (0.0, 8.0), (0.0, 0.0), (8.0, 0.0)], 1.0);
    assert_eq!(holes(&region), 1);
}

#[test]
fn circular_path_has_a_hole_only_for_a_smaller_cutter() {
    // shapely/shapely#2270: wrong interiors for a cutter larger than the circle.
    for (radius, hole) in [(0.999, 1), (1.0, 0), (1.0001, 0), (1.5, 0)] {
        let region = judged(&family(&[circle(3.0, 4.0, 1.0)], radius));
        assert_eq!(holes(&region), hole, "radius {radius}");
        let inner = (1.0 - f64::min(radius, 1.0)).powi(2);
        assert_abs_diff_eq!(region.area(), PI * ((1.0 + radius).powi(2) - inner), epsilon = 1e-9);
    }
}

#[test]
fn narrow_ring_gets_no_hole() {
    // libgeos/geos#1223, radii 4 and 10: the ring is narrower than 2 r.
    let ring = [
        (25.0, 44.0),
        (31.0, 44.0),
        (32.0, 38.0),
        (29.0, 37.0),
        (25.0, 37.0),
        (25.0, 38.0),
        (24.0, 40.0),
        (24.0, 44.0),
        (25.0, 44.0),
    ];
    for radius in [4.0, 10.0] {
        assert_eq!(holes(&of_lines(&ring, radius)), 0);
    }
}

#[test]
fn triangle_far_from_the_origin_stays_a_ring() {
    // qgis/QGIS#34998.
    let (x, y) = (278_598.0, 4_295_290.0);
    let region = of_lines(&[(x, y), (x + 30.0, y + 2.0), (x + 12.0, y + 25.0), (x, y)], 1.0);
    assert_eq!(holes(&region), 1);
}

#[test]
fn collinear_extra_vertices_change_nothing() {
    // libgeos/geos#665, locationtech/jts#178.
    let plain = [(50.0, 50.0), (150.0, 150.0), (150.0, 0.0)];
    let extra = [(50.0, 50.0), (75.0, 75.0), (150.0, 150.0), (150.0, 100.0), (150.0, 60.0), (150.0, 0.0)];
    for radius in [1.0, 21.0] {
        let (a, b) = (of_lines(&plain, radius), of_lines(&extra, radius));
        assert_abs_diff_eq!(a.area(), b.area(), epsilon = 1e-8);
        assert_abs_diff_eq!(a.perimeter(), b.perimeter(), epsilon = 1e-8);
    }
}

#[test]
fn nearly_straight_chain_of_tiny_steps_with_a_large_cutter() {
    // locationtech/jts#1028, libgeos/geos: inner pieces exposed; shapely/shapely#2055: a second polygon.
    let points: Vec<(f64, f64)> =
        (0..400).map(|i| (0.01 * f64::from(i), 1e-5 * (0.7 * f64::from(i)).sin())).collect();
    let region = of_lines(&points, 2.0);
    assert_eq!(region.loops.len(), 1);
}

#[test]
fn cutter_equal_to_the_inner_radius_of_an_arc_and_slightly_beyond() {
    // MobilityDB/MobilityDB, pull request 2183, issue 2073.
    let arc = Segment::Arc(Arc::from_angles(Point::new(1.0, 2.0), 3.0, 0.3, 2.0).unwrap());
    let (start, end) = (arc.start(), arc.end());
    let lead = |p: Point, d: Vec2| Segment::line(p, p + d * 5.0);
    let path = [lead(start, -arc.tangent_at(0.0)).reversed(), arc, lead(end, arc.tangent_at(1.0))];
    for radius in [3.0, 3.0 + 1e-9, 3.0 - 1e-9, 3.0 + 1e-3, 2.9, 4.0] {
        judged(&family(&path, radius));
        judged(&family(&[arc], radius));
    }
}

#[test]
fn join_arc_below_the_rounding_of_its_coordinates() {
    // MobilityDB, pull request 2652: at 6e6 with a turn below 2e-4 rad, the long way round.
    for turn in [1e-9, 1e-7, 1e-5, 2e-4] {
        let (x, y) = (6e6, 6e6);
        let region = of_lines(&[(x, y), (x + 10.0, y), (x + 20.0, y + 10.0 * turn)], 1.0);
        assert_abs_diff_eq!(region.area(), 40.0 + PI, epsilon = 1e-6);
    }
}

#[test]
fn line_leaving_its_end_cap_tangentially_closes_at_every_angle() {
    // MobilityDB, pull request 2088: noise in the discriminant gave two nodes 6e-8 apart.
    for k in 0..720 {
        let (s, c) = (f64::from(k) * PI / 360.0 + 1e-3).sin_cos();
        let region = of_lines(&[(0.1, 0.2), (0.1 + 7.0 * c, 0.2 + 7.0 * s)], 3.0);
        assert_eq!(region.loops.len(), 1);
        assert_abs_diff_eq!(region.area(), 42.0 + 9.0 * PI, epsilon = 1e-9);
    }
}

#[test]
fn same_path_far_away_has_the_same_sweep() {
    // CavalierContours#53: contours equal but for a shift gave different offsets; MobilityDB, pull
    // request 2186: radius 1.0046 instead of 1 at 6e6.
    let path = bulged(&[(0.0, 0.0, 0.4), (5.0, 1.0, -1.7), (7.0, 4.0, 0.0), (1.0, 6.0, 0.2)], true);
    let near = judged(&family(&path, 0.75));
    for far in [1e6, -6e6] {
        let shift = Vec2::new(far, -far);
        let moved: Vec<Segment> =
            path.iter().map(|s| s.mapped(sweptedge::geometry::Affine::translate(shift)).unwrap()).collect();
        let region = sweep(&family(&moved, 0.75)).unwrap();
        assert_eq!(region.loops.len(), near.loops.len());
        assert_abs_diff_eq!(region.area(), near.area(), epsilon = 1e-7);
        assert_abs_diff_eq!(region.perimeter(), near.perimeter(), epsilon = 1e-7);
    }
}

#[test]
fn spike_in_a_ring_both_ways() {
    // iShape-Rust/iOverlay#74: one direction gave nothing.
    let mut ring = vec![(53.0, 42.0), (27.0, 74.0), (26.0, 75.0), (35.0, 66.0), (27.0, 74.0), (53.0, 42.0)];
    let a = of_lines(&ring, 1.0).area();
    ring.reverse();
    assert_abs_diff_eq!(of_lines(&ring, 1.0).area(), a, epsilon = 1e-9);
}

#[test]
fn all_moves_at_one_point_sweep_one_disc() {
    // AngusJohnson/Clipper2#617: a circle, not nothing, not 222,144 nodes.
    let region = of_lines(&[(3.0, 4.0); 500], 2.0);
    assert_eq!(region.loops.len(), 1);
    assert!(region.pieces().count() <= 4);
    assert_abs_diff_eq!(region.area(), 4.0 * PI, epsilon = 1e-12);
}

#[test]
fn nested_loops_swept_together_all_leave_their_holes() {
    // CavalierContours#52: inner ones missing.
    let path = [circle(0.0, 0.0, 20.0), circle(0.0, 0.0, 14.0), circle(0.0, 0.0, 8.0)];
    let region = judged(&family(&path, 1.0));
    assert_eq!((region.loops.len(), holes(&region)), (6, 3));
    assert_abs_diff_eq!(region.area(), 4.0 * PI * (20.0 + 14.0 + 8.0), epsilon = 1e-9);
}

#[test]
fn empty_family_sweeps_nothing() {
    assert!(sweep(&DiscFamily::default()).unwrap().loops.is_empty());
}

#[test]
fn long_path_with_a_tiny_cutter_keeps_its_precision() {
    // Measured in a general polygon library: 4.7e-4 r off on a path 1e4 long with r = 0.01.
    let region = of_lines(&[(0.0, 0.0), (1e4, 3.0), (5e3, 4e3)], 0.01);
    let length = 1e4_f64.hypot(3.0) + 5e3_f64.hypot(3997.0);
    let turn = PI - (3.0f64).atan2(1e4) - 3997f64.atan2(5e3);
    let corner = 1e-4 * ((0.5 * turn).tan() - 0.5 * turn);
    assert_abs_diff_eq!(region.area(), 0.02 * length + PI * 1e-4 - corner, epsilon = 1e-7);
}
