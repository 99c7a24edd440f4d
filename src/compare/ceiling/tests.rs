use super::*;
use crate::compare::along::tests::segment;

#[test]
fn no_point_of_a_cell_is_above_its_ceiling() {
    let mut rng = fastrand::Rng::with_seed(23);
    for case in 0..3000 {
        let lattice = case % 2 == 0;
        let count = 1 + rng.usize(..8);
        let moves = Targets::of((0..count).map(|_| (segment(&mut rng, lattice), 0.5 * rng.f64())));
        let middle = Point::new(rng.f64() * 8.0, rng.f64() * 8.0);
        let cell = Cell { middle, half: 10.0f64.powf(-2.5 * rng.f64()) };
        let value = moves.nearest(middle, None).unwrap().1;
        let (high, _) = ceiling(&moves, &cell, &cell.corners(), value);
        for _ in 0..60 {
            let q = middle + Vec2::new(rng.f64() * 2.0 - 1.0, rng.f64() * 2.0 - 1.0) * cell.half;
            let d = moves.nearest(q, None).unwrap().1;
            assert!(d <= high + 1e-12, "case {case}: {d} above {high} at {q} in {cell:?}");
        }
    }
}

#[test]
fn ceiling_over_the_ridge_between_two_passes_is_the_ridge_itself() {
    let line = |y: f64| Segment::line(Point::new(-50.0, y), Point::new(50.0, y));
    let ring = |r: f64| Segment::Arc(Arc::from_angles(Point::ZERO, r, 0.0, TAU).unwrap());
    let cases = [
        (line(0.0), line(7.0), Cell { middle: Point::new(1.0, 3.4), half: 0.5 }),
        (ring(20.0), ring(27.0), Cell { middle: Point::new(16.0, 17.0), half: 0.5 }),
    ];
    for (a, b, cell) in cases {
        let moves = Targets::of([(a, 3.0), (b, 3.0)].into_iter());
        let value = moves.nearest(cell.middle, None).unwrap().1;
        let (high, _) = ceiling(&moves, &cell, &cell.corners(), value);
        assert!((high - 0.5).abs() < 1e-12, "{high}");
    }
}
