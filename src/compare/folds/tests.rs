use super::*;
use crate::compare::tests::{circle, family, p, part, polyline};
use crate::geometry::{Arc, Path};
use crate::part::{Keep, Part};

fn found(part: &Part, family: &DiscFamily) -> Vec<Fold> {
    folds(family, &Passes::new(family), &Walls::new(&part.contour), 1e-3, &Tolerances::for_extent(100.0))
}

/// A pocket's corner with a fillet of radius `fillet`, material right of the path drawn here.
fn fillet(fillet: f64) -> Part {
    let arc = Arc::from_center(p(fillet, fillet), p(0.0, fillet), p(fillet, 0.0), Turn::Left, 1e-9).unwrap();
    let segments = vec![
        Segment::line(p(0.0, 60.0), p(0.0, fillet)),
        Segment::Arc(arc),
        Segment::line(p(fillet, 0.0), p(60.0, 0.0)),
    ];
    part(vec![Path::new(segments, false).unwrap()], Keep::Right)
}

#[test]
fn untrimmed_offset_of_a_fillet_smaller_than_the_cutter_is_a_loop() {
    // Offset 5 of fillet 3 drawn through: the two walls' offsets cross at (5, 5).
    let path = polyline(&[p(5.0, 60.0), p(5.0, 3.0), p(3.0, 5.0), p(60.0, 5.0)], false);
    let folds = found(&fillet(3.0), &family(&[path], 5.0));
    assert_eq!(folds.len(), 1, "{folds:#?}");
    assert_eq!((folds[0].kind, folds[0].moves), (FoldKind::Loop, (0, 2)));
    assert!((folds[0].at - p(5.0, 5.0)).hypot() < 1e-12);
    // Both corners of the loop are 2 from its crossing.
    assert!((folds[0].radius - 1.0).abs() < 1e-12);
}

#[test]
fn path_round_a_fillet_wider_than_the_cutter_is_no_fold() {
    // The path's arc of radius 1 is tighter than the cutter, with the wall on its outer side.
    let arc = Arc::from_center(p(6.0, 6.0), p(5.0, 6.0), p(6.0, 5.0), Turn::Left, 1e-9).unwrap();
    let segments = vec![
        Segment::line(p(5.0, 60.0), p(5.0, 6.0)),
        Segment::Arc(arc),
        Segment::line(p(6.0, 5.0), p(60.0, 5.0)),
    ];
    let path = Path::new(segments, false).unwrap();
    assert!(found(&fillet(6.0), &family(&[path], 5.0)).is_empty());
}

#[test]
fn arc_tighter_than_the_cutter_round_a_boss_is_a_tight_turn() {
    // A boss of radius 1 with a path of radius 4 round three quarters of it: cutter 5.
    let boss = part(vec![circle(p(0.0, 0.0), 1.0, Turn::Left)], Keep::Inside);
    let arc = Arc::from_angles(p(0.0, 0.0), 4.0, 0.0, 1.5 * PI).unwrap();
    let start = arc.start();
    let segments = vec![Segment::line(start - Vec2::new(0.0, 30.0), start), Segment::Arc(arc)];
    let folds = found(&boss, &family(&[Path::new(segments, false).unwrap()], 5.0));
    assert_eq!(folds.len(), 1);
    assert_eq!((folds[0].kind, folds[0].moves), (FoldKind::TightTurn, (1, 1)));
    assert!((folds[0].radius - 4.0).abs() < 1e-12);
}

#[test]
fn short_moves_round_a_boss_are_one_tight_turn_of_the_radius_of_their_circle() {
    let boss = part(vec![circle(p(0.0, 0.0), 1.0, Turn::Left)], Keep::Inside);
    let round = (0..=40).map(|i| (Vec2::from_angle(f64::from(i) * 0.05) * 4.0).to_point());
    let mut points: Vec<_> = round.collect();
    points.insert(0, points[0] - Vec2::new(0.0, 30.0));
    let end = points[points.len() - 1] + Vec2::from_angle(2.0 + 0.5 * PI) * 30.0;
    points.push(end);
    let folds = found(&boss, &family(&[polyline(&points, false)], 5.0));
    assert_eq!(folds.len(), 1, "{folds:#?}");
    assert_eq!(folds[0].kind, FoldKind::TightTurn);
    assert!(folds[0].moves.0 <= 2 && folds[0].moves.1 >= 39, "{:?}", folds[0].moves);
    assert!((folds[0].radius - 4.0).abs() < 0.02, "{}", folds[0].radius);
    // A cutter that fits round it folds nowhere.
    assert!(found(&boss, &family(&[polyline(&points, false)], 3.0)).is_empty());
}

#[test]
fn mitred_and_rolled_outside_corners_and_bores_are_no_folds() {
    let block =
        part(vec![polyline(&[p(0.0, 0.0), p(40.0, 0.0), p(40.0, 40.0), p(0.0, 40.0)], true)], Keep::Inside);
    let mitred = polyline(&[p(-5.0, -5.0), p(45.0, -5.0), p(45.0, 45.0), p(-5.0, 45.0)], true);
    assert!(found(&block, &family(&[mitred], 5.0)).is_empty());
    let roll = Arc::from_center(p(40.0, 0.0), p(40.0, -5.0), p(45.0, 0.0), Turn::Left, 1e-9).unwrap();
    let segments = vec![
        Segment::line(p(0.0, -5.0), p(40.0, -5.0)),
        Segment::Arc(roll),
        Segment::line(p(45.0, 0.0), p(45.0, 40.0)),
    ];
    assert!(found(&block, &family(&[Path::new(segments, false).unwrap()], 5.0)).is_empty());
    // Rolled in short moves on the circle of radius 5, as written to three decimals.
    let round = |v: f64| (v * 1000.0).round() / 1000.0;
    for steps in 5u32..120 {
        let rolled: Vec<Point> = (0..=steps)
            .map(|i| Vec2::from_angle(-0.5 * PI + f64::from(i) / f64::from(steps) * 0.5 * PI) * 5.0)
            .map(|v| p(round(40.0 + v.x), round(v.y)))
            .collect();
        let folds = found(&block, &family(&[polyline(&rolled, false)], 5.0));
        assert!(folds.is_empty(), "{steps} {folds:#?}");
    }
    let hole = part(vec![circle(p(0.0, 0.0), 8.0, Turn::Left)], Keep::Outside);
    assert!(found(&hole, &family(&[circle(p(0.0, 0.0), 3.0, Turn::Left)], 5.0)).is_empty());
    let whole = circle(p(0.0, 0.0), 3.0, Turn::Left).segments()[0];
    let halves = [whole.part(0.0, 0.5), whole.part(0.5, 1.0)];
    let halves = Path::new(halves.to_vec(), true).unwrap();
    assert!(found(&hole, &family(&[halves], 5.0)).is_empty());
}

#[test]
fn loop_that_crosses_at_a_joint_is_found_and_a_closed_path_that_overlaps_itself_is_not() {
    let wall = part(vec![polyline(&[p(-20.0, 0.0), p(40.0, 0.0)], false)], Keep::Right);
    // Over the first move at (3, 2), where two later moves are joined.
    let over =
        polyline(&[p(0.0, 2.0), p(6.0, 2.0), p(6.0, 4.0), p(3.0, 4.0), p(3.0, 2.0), p(3.0, 1.0)], false);
    let folds = found(&wall, &family(&[over], 3.0));
    assert_eq!(folds.len(), 1, "{folds:#?}");
    assert_eq!((folds[0].kind, folds[0].moves), (FoldKind::Loop, (0, 3)));
    let again =
        polyline(&[p(0.0, 3.0), p(4.0, 3.0), p(4.0, 6.0), p(0.0, 6.0), p(0.0, 3.0), p(2.0, 3.0)], false);
    assert!(found(&wall, &family(&[again], 3.0)).iter().all(|f| f.kind != FoldKind::Loop));
}
