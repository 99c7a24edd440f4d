use std::f64::consts::PI;

use super::*;
use crate::geometry::{Affine, Arc, Turn};
use crate::input::Severity;

fn p(x: f64, y: f64) -> Point {
    Point::new(x, y)
}

fn polygon(points: &[(f64, f64)]) -> Path {
    let at = |i: usize| Point::from(points[i % points.len()]);
    Path::new((0..points.len()).map(|i| Segment::line(at(i), at(i + 1))).collect(), true).unwrap()
}

fn square(x: f64, y: f64, side: f64) -> Path {
    polygon(&[(x, y), (x + side, y), (x + side, y + side), (x, y + side)])
}

fn circle(x: f64, y: f64, r: f64, from: f64) -> Path {
    let arc = Arc::full_circle(p(x, y), p(x, y) + Vec2::from_angle(from) * r, Turn::Left).unwrap();
    Path::new(vec![arc.into()], true).unwrap()
}

fn contour(paths: Vec<Path>) -> Contour {
    Contour::new(paths, 0.0).unwrap()
}

fn crossing(paths: Vec<Path>) -> Option<(Point, usize, usize)> {
    first_crossing(&contour(paths))
}

#[test]
fn loops_beside_inside_and_touching_one_another_do_not_cross() {
    for paths in [
        vec![square(0.0, 0.0, 10.0), square(20.0, 0.0, 10.0), square(2.0, 2.0, 4.0)],
        // Corner on corner, corner on edge, from inside and outside.
        vec![square(0.0, 0.0, 10.0), square(10.0, 10.0, 5.0)],
        vec![square(0.0, 0.0, 10.0), polygon(&[(10.0, 5.0), (15.0, 3.0), (15.0, 7.0)])],
        vec![square(0.0, 0.0, 10.0), polygon(&[(10.0, 5.0), (5.0, 3.0), (5.0, 7.0)])],
        vec![square(0.0, 0.0, 10.0), polygon(&[(0.0, 0.0), (5.0, 3.0), (3.0, 5.0)])],
        // Tangent circles, inside and outside, and a circle tangent to edges.
        vec![circle(0.0, 0.0, 5.0, 0.3), circle(8.0, 0.0, 3.0, 1.0)],
        vec![circle(0.0, 0.0, 5.0, 0.3), circle(2.0, 0.0, 3.0, 1.0)],
        vec![circle(0.0, 0.0, 5.0, 0.0), circle(2.0, 0.0, 3.0, 0.0)],
        vec![square(-5.0, -5.0, 10.0), circle(0.0, 0.0, 5.0, 0.7)],
        vec![square(-5.0, -5.0, 10.0), circle(0.0, 0.0, 5.0, 0.0)],
        // A figure eight whose halves only touch at their shared corner.
        vec![polygon(&[(0.0, 0.0), (5.0, -3.0), (5.0, 3.0), (0.0, 0.0), (-5.0, 3.0), (-5.0, -3.0)])],
    ] {
        for angle in [0.0, 0.3, 1.9] {
            let map = Affine::translate((700.0, -300.0)) * Affine::rotate(angle);
            let paths: Vec<Path> = paths.iter().map(|q| q.mapped(map).unwrap()).collect();
            assert_eq!(crossing(paths.clone()), None, "{paths:?}");
        }
    }
}

#[test]
fn crossings_of_lines_and_arcs_are_found_at_their_place() {
    let bow = polygon(&[(0.0, 0.0), (10.0, 10.0), (10.0, 0.0), (0.0, 10.0)]);
    assert_eq!(crossing(vec![bow]), Some((p(5.0, 5.0), 0, 0)));
    let two = crossing(vec![square(0.0, 0.0, 10.0), circle(10.0, 5.0, 3.0, 1.0)]).unwrap();
    assert_eq!((two.1, two.2), (0, 1));
    assert!((two.0.x - 10.0).abs() < 1e-9 && ((two.0.y - 5.0).abs() - 3.0).abs() < 1e-9);
    let arcs = crossing(vec![circle(0.0, 0.0, 5.0, 0.1), circle(6.0, 0.0, 5.0, 0.1)]).unwrap().0;
    assert!((arcs.x - 3.0).abs() < 1e-9 && (arcs.y.abs() - 4.0).abs() < 1e-9);
}

#[test]
fn crossings_through_corners_are_found() {
    // The second loop enters the first through its corner and through the middle of an edge.
    let through_corner = polygon(&[(-2.0, -2.0), (0.0, 0.0), (3.0, 4.0), (-4.0, 3.0)]);
    assert!(crossing(vec![square(0.0, 0.0, 10.0), through_corner]).is_some());
    let corner_on_edge = polygon(&[(5.0, 0.0), (8.0, 4.0), (5.0, 5.0), (2.0, -3.0)]);
    let found = crossing(vec![square(0.0, 0.0, 10.0), corner_on_edge]).unwrap();
    assert_eq!((found.1, found.2), (0, 1));
    // A figure eight that crosses at a shared corner.
    let eight = polygon(&[(0.0, 0.0), (5.0, -3.0), (5.0, 3.0), (0.0, 0.0), (-5.0, -3.0), (-5.0, 3.0)]);
    assert_eq!(crossing(vec![eight]), Some((p(0.0, 0.0), 0, 0)));
}

#[test]
fn curvature_decides_where_directions_agree() {
    // Both loops leave the origin along x; the second lies wholly inside the first.
    let outer = circle(0.0, 5.0, 5.0, -PI / 2.0);
    let inner = circle(0.0, 3.0, 3.0, -PI / 2.0);
    assert_eq!(crossing(vec![outer.clone(), inner]), None);
    // An S through the origin that changes from inside to outside along the tangent.
    let s = Path::new(
        vec![
            Arc::from_center(p(0.0, 3.0), p(0.0, 6.0), p(0.0, 0.0), Turn::Left, 1e-9).unwrap().into(),
            Arc::from_center(p(0.0, -2.0), p(0.0, 0.0), p(0.0, -4.0), Turn::Right, 1e-9).unwrap().into(),
            Segment::line(p(0.0, -4.0), p(-20.0, -4.0)),
            Segment::line(p(-20.0, -4.0), p(-20.0, 6.0)),
            Segment::line(p(-20.0, 6.0), p(0.0, 6.0)),
        ],
        true,
    )
    .unwrap();
    assert!(crossing(vec![outer, s]).is_some());
}

#[test]
fn shared_stretches_are_found() {
    assert!(crossing(vec![square(0.0, 0.0, 10.0), square(10.0, 2.0, 5.0)]).is_some());
    let spike = polygon(&[(0.0, 0.0), (10.0, 0.0), (14.0, 0.0), (10.0, 0.0), (10.0, 5.0)]);
    assert!(crossing(vec![spike]).is_some());
    let there_and_back = polygon(&[(0.0, 0.0), (10.0, 0.0)]);
    assert!(crossing(vec![there_and_back]).is_some());
    let half = |from, to, turn| Arc::from_center(p(0.0, 0.0), from, to, turn, 1e-9).unwrap().into();
    let (e, n) = (p(5.0, 0.0), p(0.0, 5.0));
    let pie = Path::new(vec![half(e, n, Turn::Left), Segment::line(n, e)], true).unwrap();
    assert!(crossing(vec![circle(0.0, 0.0, 5.0, 2.0), pie]).is_some());
}

#[test]
fn a_loop_drawn_twice_is_kept_once_whatever_its_start_sense_and_cuts() {
    let cut = polygon(&[(10.0, 10.0), (10.0, 0.0), (4.0, 0.0), (0.0, 0.0), (0.0, 10.0)]);
    let paths = vec![
        square(0.0, 0.0, 10.0),
        circle(5.0, 5.0, 2.0, 0.0),
        cut,
        circle(5.0, 5.0, 2.0, 2.0),
        circle(5.0, 5.0, 1.0, 0.0),
    ];
    assert_eq!(duplicates(&contour(paths.clone()), 1e-6), [2, 3]);
    let mut problems = Vec::new();
    let origins = vec![Origin::default(); 5];
    let (kept, origins) = checked(contour(paths), origins, Gaps::new(0.0, 1.0), &mut problems).unwrap();
    assert_eq!((kept.paths().len(), origins.len()), (3, 3));
    assert_eq!(problems[0].severity, Severity::Warning);
    assert!(problems[0].found.starts_with("2 of the loops drawn twice"));
}

#[test]
fn a_crossing_is_refused_with_place_and_lines() {
    let origin = |line| Origin { file: "part.dxf".into(), layer: None, line: Some(line) };
    let paths = vec![square(0.0, 0.0, 10.0), square(5.0, 5.0, 10.0)];
    let origins = vec![origin(12), origin(40)];
    let refusal = checked(contour(paths), origins, Gaps::new(0.0, 1.0), &mut Vec::new()).unwrap_err();
    assert_eq!(refusal[0].place.line, Some(40));
    assert!(
        refusal[0].found.starts_with("the chain of line 12 crosses or runs along the chain of line 40 at (")
    );
    assert!(refusal[0].found.contains("(10.000000, 5.000000)"), "{}", refusal[0].found);
}
