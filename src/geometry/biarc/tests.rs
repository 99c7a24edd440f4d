//! Every bound is set against dense sampling, made without the code that proves it.

use super::*;
use kurbo::{CubicBez, ParamCurve, Point, QuadBez, Vec2};

/// Greatest distance found by samples, both ways: curve samples against the segments exactly, and
/// segment samples against the polyline of curve samples (whose own sag is far below the errors).
fn sampled(points: &[Point], a: &Approximation) -> f64 {
    if a.segments.is_empty() {
        return points.iter().map(|p| (*p - points[0]).hypot()).fold(0.0, f64::max);
    }
    let mut worst = 0.0_f64;
    for p in points {
        let d = a.segments.iter().map(|s| s.distance(*p)).fold(f64::INFINITY, f64::min);
        worst = worst.max(d);
    }
    let chords: Vec<Segment> = points.windows(2).map(|w| Segment::line(w[0], w[1])).collect();
    for s in &a.segments {
        for k in 0..=16 {
            let q = s.point_at(f64::from(k) / 16.0);
            let d = chords.iter().map(|c| c.distance(q)).fold(f64::INFINITY, f64::min);
            worst = worst.max(d);
        }
    }
    worst
}

fn samples(c: &CubicBez, n: u32) -> Vec<Point> {
    (0..=n).map(|k| c.eval(f64::from(k) / f64::from(n))).collect()
}

fn connected(a: &Approximation, start: Point, end: Point) {
    assert!(a.bound.is_finite() && a.bound >= 0.0, "bound {}", a.bound);
    if a.segments.is_empty() {
        assert_eq!(start, end);
        return;
    }
    assert_eq!(a.segments[0].start(), start);
    assert_eq!(a.segments[a.segments.len() - 1].end(), end);
    for w in a.segments.windows(2) {
        assert_eq!(w[0].end(), w[1].start());
    }
    assert!(a.segments.iter().all(Segment::is_finite));
}

fn check_cubic(c: &CubicBez, error: f64) -> (f64, f64, usize) {
    let a = cubic_to_arcs(c, error).unwrap();
    connected(&a, c.p0, c.p3);
    assert!(a.bound <= error * (1.0 + 1e-6) + 1e-9, "bound {} for {c:?}", a.bound);
    let real = sampled(&samples(c, 2000), &a);
    // The polyline of samples sags by at most |B''| / (8 n^2) from the curve.
    let bend = 6.0 * (c.p2 - c.p1 - (c.p1 - c.p0)).hypot().max((c.p3 - c.p2 - (c.p2 - c.p1)).hypot());
    let sag = bend / (8.0 * 2000.0 * 2000.0);
    assert!(real <= a.bound + sag, "{real} above {} for {c:?}", a.bound);
    (real, a.bound, a.segments.len())
}

#[test]
fn random_cubics_never_exceed_their_bound_and_it_is_within_three_times_the_error() {
    let mut rng = fastrand::Rng::with_seed(7);
    let (mut worst, mut total) = (0.0_f64, 0);
    for _ in 0..60 {
        let mut p = || Point::new(rng.f64() * 100.0, rng.f64() * 100.0);
        let c = CubicBez::new(p(), p(), p(), p());
        let (real, bound, count) = check_cubic(&c, 0.01);
        worst = worst.max(bound / real);
        total += count;
    }
    println!("worst bound / true error {worst:.3}, {:.1} arcs a curve", f64::from(total as u32) / 60.0);
    assert!(worst < 3.0, "bound {worst} times the true error");
}

#[test]
fn degenerate_cubics_give_finite_connected_segments_within_the_bound() {
    let p = |x: f64, y: f64| Point::new(x, y);
    let o = p(0.0, 0.0);
    for c in [
        CubicBez::new(o, o, o, p(10.0, 0.0)),
        CubicBez::new(o, o, p(10.0, 0.0), p(10.0, 0.0)),
        CubicBez::new(o, o, p(5.0, 5.0), p(10.0, 0.0)),
        CubicBez::new(o, p(5.0, 5.0), p(10.0, 0.0), p(10.0, 0.0)),
        CubicBez::new(o, p(10.0, 0.0), o, p(10.0, 0.0)),
        CubicBez::new(o, p(20.0, 0.0), p(-10.0, 0.0), p(10.0, 0.0)),
        CubicBez::new(o, p(20.0, 0.0), p(-10.0, 0.0), o),
        CubicBez::new(o, p(10.0, 10.0), p(0.0, 10.0), p(10.0, 0.0)),
        CubicBez::new(o, p(10.0, 10.0), p(1e-9, 10.0), p(10.0, 0.0)),
        CubicBez::new(o, p(10.0, 10.0), p(-5.0, 10.0), p(5.0, 0.0)),
        CubicBez::new(o, p(30.0, 10.0), p(-30.0, 10.0), o),
        CubicBez::new(o, p(1.0, 0.0), p(9.0, 1e-12), p(10.0, 0.0)),
        CubicBez::new(o, p(-1.0, 0.0), p(11.0, 0.0), p(10.0, 0.0)),
        CubicBez::new(o, p(5.0, 0.0), p(5.0, 0.0), p(10.0, 0.0)),
        CubicBez::new(o, p(10.0, 0.0), p(10.0, 0.0), p(10.0, 10.0)),
        CubicBez::new(o, p(10.0, 0.0), p(10.0, 0.0), o),
        // Cases on which offsets of Beziers failed elsewhere (kurbo #313, #344).
        CubicBez::new(p(0.0, 0.0), p(0.0, 0.0), p(0.0, 100.0), p(100.0, 100.0)),
        CubicBez::new(p(667.0, 534.0), p(667.0, 547.0), p(656.0, 557.0), p(643.0, 557.0)),
    ] {
        let (real, bound, _) = check_cubic(&c, 1e-3);
        assert!(bound <= 3.0 * real + 1e-12, "{bound} for {real}: {c:?}");
        check_cubic(&c, 1e-6);
        check_cubic(&CubicBez::new(c.p3, c.p2, c.p1, c.p0), 1e-3);
        check_cubic(&CubicBez::new(c.p0, c.p1, c.p2, c.p3), 5.0);
    }
}

#[test]
fn straight_cubic_gives_one_line() {
    let c = CubicBez::new((0.0, 0.0), (1.0, 2.0), (2.5, 5.0), (4.0, 8.0));
    let a = cubic_to_arcs(&c, 1e-6).unwrap();
    assert_eq!(a.segments, vec![Segment::line(Point::new(0.0, 0.0), Point::new(4.0, 8.0))]);
    assert!(a.bound < 1e-12);
}

#[test]
fn curve_that_is_a_point_gives_no_segment() {
    let p = Point::new(3.0, 4.0);
    assert!(cubic_to_arcs(&CubicBez::new(p, p, p, p), 1e-6).unwrap().segments.is_empty());
    assert!(quad_to_arcs(&QuadBez::new(p, p, p), 1e-6).unwrap().segments.is_empty());
}

#[test]
fn joints_of_a_smooth_curve_share_their_tangent() {
    let c = CubicBez::new((0.0, 0.0), (30.0, 60.0), (70.0, -60.0), (100.0, 0.0));
    let a = cubic_to_arcs(&c, 1e-4).unwrap();
    for w in a.segments.windows(2) {
        let turn = w[0].tangent_at(1.0).cross(w[1].tangent_at(0.0)).abs();
        // A flat stretch may be a line: its sagitta is a thousandth of the error.
        assert!(turn < 1e-5, "{turn} rad between {:?}", w);
    }
}

/// From memory, recomputed: the usual cubic of a quarter circle, k = 4 (sqrt 2 - 1) / 3, lies outside
/// by up to 0.0002725300074 of the radius.
#[test]
fn quarter_circle_cubic_is_a_single_arc_pair_near_its_known_error() {
    let k = 4.0 * (2.0_f64.sqrt() - 1.0) / 3.0;
    let c = CubicBez::new((1.0, 0.0), (1.0, k), (k, 1.0), (0.0, 1.0));
    let a = cubic_to_arcs(&c, 0.001).unwrap();
    assert_eq!(a.segments.len(), 2);
    assert!(a.bound >= 0.000_272_530_007_4 * 0.999 && a.bound < 0.000_4, "bound {}", a.bound);
}

#[test]
fn quadratic_is_within_its_bound() {
    let q = QuadBez::new((0.0, 0.0), (2.0, 6.0), (10.0, 0.0));
    let a = quad_to_arcs(&q, 1e-4).unwrap();
    connected(&a, q.p0, q.p2);
    let points: Vec<Point> = (0..=4000).map(|k| q.eval(f64::from(k) / 4000.0)).collect();
    let real = sampled(&points, &a);
    assert!(real <= a.bound + 1e-8 && a.bound <= 3.0 * real, "{real} {}", a.bound);
    // Curvature at t = 1/3 is 0.335410196625 (Sapidis, Frey 1992): the tightest arc is near it.
    let tightest = a.segments.iter().map(|s| s.curvature().abs()).fold(0.0, f64::max);
    assert!((tightest - 0.335_410_196_625).abs() < 2e-3, "{tightest}");
}

#[test]
fn arcs_grow_with_the_cube_root_of_the_accuracy() {
    let c = CubicBez::new((0.0, 0.0), (30.0, 60.0), (70.0, -20.0), (100.0, 40.0));
    let counts: Vec<usize> =
        [1e-2, 1e-5, 1e-8].iter().map(|e| cubic_to_arcs(&c, *e).unwrap().segments.len()).collect();
    println!("arcs for 1e-2, 1e-5, 1e-8: {counts:?}");
    for w in counts.windows(2) {
        assert!(w[1] as f64 / w[0] as f64 <= 11.0, "{counts:?}");
    }
}

#[test]
fn ellipse_keeps_its_area_within_bound_times_perimeter() {
    let (u, v) = (Vec2::new(40.0, 0.0), Vec2::new(0.0, 20.0));
    for error in [1e-2, 1e-4, 1e-6] {
        let a = ellipse_to_arcs(Point::ORIGIN, u, v, 0.3, std::f64::consts::TAU, error).unwrap();
        println!("ellipse 40/20 within {error}: {} arcs, bound {:e}", a.segments.len(), a.bound);
        let path = crate::geometry::Path::new(a.segments.clone(), true).unwrap();
        // pi a b and the perimeter 4 a E(e), recomputed.
        let off = (path.signed_area() - 2_513.274_122_871_834_6).abs();
        assert!(off <= a.bound * 193.768_964_411 * 1.01, "{off}");
        assert!(a.bound <= error + 1e-12);
        let points: Vec<Point> = (0..=6000)
            .map(|k| f64::from(k) * std::f64::consts::TAU / 6000.0)
            .map(|t| Point::new(40.0 * t.cos(), 20.0 * t.sin()))
            .collect();
        let real = sampled(&points, &a);
        assert!(real <= a.bound + 1e-5, "{real} above {}", a.bound);
        assert!(error < 1e-3 || a.bound <= 3.0 * real, "{real} {}", a.bound);
    }
}

#[test]
fn ellipses_of_every_shape_stay_within_their_bound() {
    let mut rng = fastrand::Rng::with_seed(11);
    for n in 0..40 {
        let mut r = || rng.f64() * 2.0 - 1.0;
        let u = Vec2::new(50.0 * r(), 50.0 * r());
        let v = match n % 4 {
            0 => Vec2::new(-u.y, u.x) * 1.000_1,
            1 => u * r(),
            2 => Vec2::new(-u.y, u.x) * 1e-3,
            _ => Vec2::new(50.0 * r(), 50.0 * r()),
        };
        let (start, sweep) = (7.0 * r(), 6.2 * r());
        let at = |t: f64| Point::new(5.0, -3.0) + u * t.cos() + v * t.sin();
        let a = ellipse_to_arcs(Point::new(5.0, -3.0), u, v, start, sweep, 1e-3).unwrap();
        assert!(a.bound <= 1e-3 + 1e-9, "case {n}: {}", a.bound);
        let points: Vec<Point> = (0..=4000).map(|k| at(start + sweep * f64::from(k) / 4000.0)).collect();
        assert!((a.segments[0].start() - points[0]).hypot() < 1e-12);
        let real = sampled(&points, &a);
        assert!(real <= a.bound + 2e-5, "case {n}: {real} above {}", a.bound);
    }
}

#[test]
fn circle_as_ellipse_is_one_exact_arc() {
    let (u, v) = (Vec2::new(3.0, 4.0), Vec2::new(4.0, -3.0));
    let a = ellipse_to_arcs(Point::new(1.0, 2.0), u, v, 0.0, std::f64::consts::TAU, 1e-4).unwrap();
    let [Segment::Arc(arc)] = a.segments[..] else { panic!("{:?}", a.segments) };
    assert_eq!(arc.start(), arc.end());
    assert!((arc.radius() - 5.0).abs() < 1e-14);
    assert!((arc.sweep() + std::f64::consts::TAU).abs() < 1e-15, "mirrored: clockwise");
    assert!(a.bound < 1e-13, "{}", a.bound);
}

#[test]
fn bad_errors_and_numbers_are_refused() {
    let c = CubicBez::new((0.0, 0.0), (1.0, 1.0), (2.0, 1.0), (3.0, 0.0));
    for error in [0.0, -1.0, f64::NAN, f64::INFINITY] {
        assert_eq!(cubic_to_arcs(&c, error), Err(CurveError::BadError));
    }
    for x in [f64::NAN, f64::INFINITY, 1e10] {
        let bad = CubicBez::new((0.0, 0.0), (x, 1.0), (2.0, 1.0), (3.0, 0.0));
        assert_eq!(cubic_to_arcs(&bad, 1e-3), Err(CurveError::OutOfRange));
    }
}

#[test]
fn error_far_below_rounding_ends_with_an_honest_bound() {
    let c = CubicBez::new((0.0, 0.0), (30.0, 60.0), (70.0, -20.0), (100.0, 40.0));
    let a = cubic_to_arcs(&c, 1e-300).unwrap();
    assert!(a.bound > 1e-300 && a.bound < 1e-8, "{}", a.bound);
    assert!(a.segments.len() < 20_000, "{}", a.segments.len());
}

#[test]
fn curve_far_from_the_origin_has_a_bound_that_covers_rounding() {
    let far = Vec2::new(1e6, -1e6);
    let mut rng = fastrand::Rng::with_seed(5);
    for _ in 0..20 {
        let mut p = || Point::new(rng.f64() * 50.0, rng.f64() * 50.0) + far;
        check_cubic(&CubicBez::new(p(), p(), p(), p()), 1e-3);
    }
}
