use std::f64::consts::{PI, TAU};

use super::*;
use crate::geometry::{Affine, Arc, Path, Segment, Turn, Vec2};

fn polygon(points: &[(f64, f64)]) -> Path {
    let at = |i: usize| Point::from(points[i % points.len()]);
    Path::new((0..points.len()).map(|i| Segment::line(at(i), at(i + 1))).collect(), true).unwrap()
}

fn square(half: f64) -> Path {
    polygon(&[(-half, -half), (half, -half), (half, half), (-half, half)])
}

fn circle(center: (f64, f64), radius: f64, from: f64, turn: Turn) -> Path {
    let center = Point::from(center);
    let start = center + Vec2::from_angle(from) * radius;
    Path::new(vec![Arc::full_circle(center, start, turn).unwrap().into()], true).unwrap()
}

fn part(paths: Vec<Path>, keep: Keep) -> Part {
    let origins = vec![Origin::default(); paths.len()];
    Part::new(Contour::new(paths, 0.0).unwrap(), keep, 0.0, origins).unwrap()
}

#[test]
fn square_with_round_opening_and_island_alternates_material() {
    let paths = vec![
        circle((0.0, 0.0), 5.0, 0.3, Turn::Left),
        square(10.0).reversed(),
        circle((0.0, 1.0), 2.0, 4.0, Turn::Right),
    ];
    let contour = Contour::new(paths.clone(), 0.0).unwrap();
    let depths: Vec<_> = nesting(&contour).iter().map(|n| (n.depth, n.parent)).collect();
    assert_eq!(depths, [(1, Some(1)), (0, None), (2, Some(0))]);
    for (keep, flip) in [(Keep::Inside, false), (Keep::Outside, true)] {
        let part = part(paths.clone(), keep);
        for (p, inside) in [
            ((0.0, 1.0), true),
            ((0.0, -4.0), false),
            ((8.0, 8.0), true),
            ((0.0, 10.5), false),
            ((30.0, 0.0), false),
        ] {
            assert_eq!(part.contains(p.into()), inside != flip, "{p:?} {keep:?}");
        }
        let area: f64 = part.contour.paths().iter().map(Path::signed_area).sum();
        let expected = 400.0 - PI * 25.0 + PI * 4.0;
        assert!((area - if flip { -expected } else { expected }).abs() < 1e-9);
    }
}

#[test]
fn material_lies_on_the_left_of_every_segment_of_random_slots() {
    let mut rng = fastrand::Rng::with_seed(11);
    for _ in 0..300 {
        let map = Affine::rotate(rng.f64() * TAU).then_translate(Vec2::new(rng.f64() * 1e3, rng.f64() * 1e3));
        let (r, l) = (0.2 + rng.f64(), rng.f64() * 3.0);
        let p = |x: f64, y: f64| Point::new(x, y);
        let slot = Path::new(
            vec![
                Segment::line(p(0.0, -r), p(l, -r)),
                Arc::from_center(p(l, 0.0), p(l, -r), p(l, r), Turn::Left, 1e-9).unwrap().into(),
                Segment::line(p(l, r), p(0.0, r)),
                Arc::from_center(p(0.0, 0.0), p(0.0, r), p(0.0, -r), Turn::Left, 1e-9).unwrap().into(),
            ],
            true,
        )
        .unwrap();
        let slot = if rng.bool() { slot.reversed() } else { slot };
        let frame = square(6.0).mapped(Affine::rotate(rng.f64())).unwrap();
        let paths = vec![slot.mapped(map).unwrap(), frame.mapped(map).unwrap()];
        let part = part(paths, if rng.bool() { Keep::Inside } else { Keep::Outside });
        for (_, s) in part.contour.segments() {
            let t = 0.05 + 0.9 * rng.f64();
            let step = s.left_normal_at(t) * 1e-6;
            assert!(part.contains(s.point_at(t) + step), "left of {s:?} at {t}");
            assert!(!part.contains(s.point_at(t) - step), "right of {s:?} at {t}");
        }
    }
}

#[test]
fn rays_through_vertices_and_tops_of_arcs_count_once() {
    // A diamond and a circle whose special points all lie on the rays asked for.
    let diamond = polygon(&[(4.0, 0.0), (0.0, 4.0), (-4.0, 0.0), (0.0, -4.0)]);
    let part = part(vec![diamond, circle((20.0, 0.0), 4.0, PI / 2.0, Turn::Right)], Keep::Inside);
    for (x, y, inside) in [
        (-10.0, 0.0, false),
        (0.0, 0.0, true),
        (-10.0, 4.0, false),
        (-10.0, -4.0, false),
        (10.0, 0.0, false),
        (10.0, 4.0, false),
        (10.0, -4.0, false),
        (20.0, 0.0, true),
        (20.0, 3.999_999, true),
    ] {
        assert_eq!(part.contains(Point::new(x, y)), inside, "({x}, {y})");
    }
}

#[test]
fn circles_with_any_start_and_sense_contain_what_their_radius_says() {
    let mut rng = fastrand::Rng::with_seed(12);
    for k in 0..200 {
        // Starts on the axes as well, where an extreme point is also an end.
        let from = if k % 2 == 0 { f64::from(k % 8) * PI / 4.0 } else { rng.f64() * TAU };
        let turn = if rng.bool() { Turn::Left } else { Turn::Right };
        let part = part(vec![circle((3.0, -2.0), 1.5, from, turn)], Keep::Inside);
        for _ in 0..50 {
            let p = Point::new(rng.f64() * 6.0, rng.f64() * 6.0 - 5.0);
            let d = (p - Point::new(3.0, -2.0)).hypot();
            if (d - 1.5).abs() > 1e-9 {
                assert_eq!(part.contains(p), d < 1.5, "{p:?} from {from}");
            }
        }
    }
}

#[test]
fn random_pies_agree_with_angle_and_radius() {
    let mut rng = fastrand::Rng::with_seed(13);
    for k in 0..400 {
        let center = Point::new(rng.f64() * 10.0, rng.f64() * 10.0);
        let from = if k % 3 == 0 { f64::from(k % 4) * PI / 2.0 } else { rng.f64() * TAU };
        let sweep = if k % 5 == 0 { PI } else { 0.01 + rng.f64() * 6.2 };
        let arc = Arc::from_angles(center, 2.0, from, sweep).unwrap();
        let pie = Path::new(
            vec![Segment::line(center, arc.start()), arc.into(), Segment::line(arc.end(), center)],
            true,
        )
        .unwrap();
        let part = part(vec![if rng.bool() { pie.reversed() } else { pie }], Keep::Inside);
        for _ in 0..40 {
            let p = center + Vec2::new(rng.f64() - 0.5, rng.f64() - 0.5) * 6.0;
            let near = part.contour.segments().map(|(_, s)| s.distance(p)).fold(f64::MAX, f64::min);
            if near > 1e-9 {
                let v = p - center;
                let inside = v.hypot() < 2.0 && (v.atan2() - from).rem_euclid(TAU) < sweep;
                assert_eq!(part.contains(p), inside, "{p:?} from {from} sweep {sweep}");
            }
        }
    }
}

#[test]
fn left_and_right_of_an_open_chain_go_on_past_its_ends_and_round_its_corners() {
    let p = |x: f64, y: f64| Point::new(x, y);
    let chain = Path::new(
        vec![Segment::line(p(0.0, 0.0), p(10.0, 0.0)), Segment::line(p(10.0, 0.0), p(10.0, 10.0))],
        false,
    )
    .unwrap();
    let asked = [
        (p(5.0, 1.0), true),
        (p(5.0, -1.0), false),
        (p(11.0, -1.0), false),
        (p(9.0, 12.0), true),
        (p(11.0, 12.0), false),
        (p(-3.0, 0.1), true),
        (p(-3.0, -0.1), false),
    ];
    for (keep, flip) in [(Keep::Left, false), (Keep::Right, true)] {
        let part = part(vec![chain.clone()], keep);
        for (q, left) in asked {
            assert_eq!(part.contains(q), left != flip, "{q:?} {keep:?}");
        }
    }
}

#[test]
fn touching_loops_nest_by_their_clear_points() {
    // The inner square shares a corner with the outer one and its first edge midpoint is not clear of it.
    let outer = polygon(&[(0.0, 0.0), (10.0, 0.0), (10.0, 10.0), (0.0, 10.0)]);
    let inner = polygon(&[(0.0, 0.0), (4.0, 1.0), (1.0, 4.0)]);
    let beside = polygon(&[(10.0, 10.0), (14.0, 11.0), (11.0, 14.0)]);
    let contour = Contour::new(vec![inner, outer, beside], 0.0).unwrap();
    let depths: Vec<_> = nesting(&contour).iter().map(|n| n.depth).collect();
    assert_eq!(depths, [1, 0, 0]);
}

#[test]
fn open_chains_under_inside_and_loops_under_left_are_refused_with_advice() {
    let open = Path::new(vec![Segment::line(Point::new(0.0, 0.0), Point::new(1.0, 0.0))], false).unwrap();
    let both = Contour::new(vec![square(3.0), open], 0.0).unwrap();
    let origins = vec![Origin::default(); 2];
    let inside = Part::new(both.clone(), Keep::Inside, 0.0, origins.clone()).unwrap_err();
    assert!(matches!(inside, PartError::OpenChain { path: 1, .. }));
    assert!(inside.to_string().contains("--keep left"));
    let left = Part::new(both.clone(), Keep::Left, 0.0, origins.clone()).unwrap_err();
    assert!(matches!(left, PartError::ClosedLoop { path: 0 }));
    assert!(left.to_string().contains("--keep inside"));
    for allowance in [-0.1, f64::NAN, f64::INFINITY] {
        assert!(matches!(
            Part::new(both.clone(), Keep::Inside, allowance, origins.clone()),
            Err(PartError::BadAllowance { .. })
        ));
    }
    assert!(matches!(Part::new(both, Keep::Inside, 0.0, Vec::new()), Err(PartError::Origins { .. })));
}
