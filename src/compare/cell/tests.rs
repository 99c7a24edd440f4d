use super::*;
use crate::compare::tests::{circle, p, part, polyline};
use crate::geometry::{Arc, Path, Segment, Turn};
use crate::part::{Keep, Part};

/// A pocket with sharp, rounded and re-entrant corners and an island, and a wall of chords.
fn pocket() -> Part {
    let arc =
        |c: Point, a: Point, b: Point, turn| Segment::Arc(Arc::from_center(c, a, b, turn, 1e-9).unwrap());
    let outer = vec![
        Segment::line(p(0.0, 0.0), p(8.0, 0.0)),
        arc(p(8.0, 2.0), p(8.0, 0.0), p(10.0, 2.0), Turn::Left),
        Segment::line(p(10.0, 2.0), p(10.0, 4.0)),
        arc(p(10.0, 5.0), p(10.0, 4.0), p(10.0, 6.0), Turn::Right),
        Segment::line(p(10.0, 6.0), p(7.0, 8.0)),
        Segment::line(p(7.0, 8.0), p(5.0, 6.0)),
        Segment::line(p(5.0, 6.0), p(0.0, 8.0)),
        Segment::line(p(0.0, 8.0), p(0.0, 0.0)),
    ];
    let chords: Vec<Point> =
        (0..60).map(|i| p(3.0, 3.0) + Vec2::from_angle(f64::from(i) * 0.1047) * 1.2).collect();
    let paths = vec![
        Path::new(outer, true).unwrap(),
        polyline(&chords, true),
        circle(p(6.5, 3.0), 1.0, Turn::Left),
        polyline(&[p(2.0, 5.2), p(2.0, 6.0), p(3.0, 5.2)], true),
    ];
    part(paths, Keep::Outside)
}

#[test]
fn open_part_holds_every_open_point_of_its_cell() {
    let part = pocket();
    let walls = Walls::new(&part.contour);
    let mut rng = fastrand::Rng::with_seed(3);
    let mut cut_down = 0;
    for case in 0..6000 {
        let middle = p(rng.f64() * 11.0 - 0.5, rng.f64() * 9.0 - 0.5);
        let cell = Cell { middle, half: 10.0f64.powf(-2.5 * rng.f64()) };
        let allowance = if case % 3 == 0 { 0.1 } else { 0.0 };
        let polygon = cell.open_part(&walls, allowance);
        cut_down += usize::from(polygon.len() != 4);
        for _ in 0..30 {
            let q = middle + Vec2::new(rng.f64() * 2.0 - 1.0, rng.f64() * 2.0 - 1.0) * cell.half;
            let distance = walls.targets.nearest(q, None).unwrap().1;
            if part.contains(q) || distance < allowance + 1e-9 {
                continue;
            }
            let inside = (0..polygon.len()).all(|i| {
                let (a, b) = (polygon[i], polygon[(i + 1) % polygon.len()]);
                (b - a).cross(q - a) >= -1e-12
            });
            assert!(inside && polygon.len() > 2, "case {case}: {q} of {cell:?} is not in {polygon:?}");
        }
    }
    assert!(cut_down > 300, "only {cut_down} cells were cut");
}
