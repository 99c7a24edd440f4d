//! Faults of the path itself: wrong way round, one chord, too near, a gap at the end of the cut.

use super::fixture::*;
use crate::compare::{Crest, Excess};
use crate::findings::{Cause, Kind};
use crate::geometry::{Arc, Path, Point, Segment, Turn};
use crate::part::Keep;
use crate::program::{Block, Blocks, MoveKind};

/// Walls that meet in an arc of radius 8 about (52, 32), material below and left of them.
fn rounded_corner() -> Path {
    let round = arc(p(52.0, 32.0), p(60.0, 32.0), p(52.0, 40.0), Turn::Left);
    let segments =
        vec![Segment::line(p(60.0, 0.0), p(60.0, 32.0)), round, Segment::line(p(52.0, 40.0), p(0.0, 40.0))];
    Path::new(segments, false).unwrap()
}

/// A cutter of radius 6 along the top wall, then `corner`, then down the right wall.
fn round_it(corner: &[Segment]) -> Case {
    let mut cuts = vec![Segment::line(p(0.0, 46.0), p(52.0, 46.0))];
    cuts.extend_from_slice(corner);
    cuts.push(Segment::line(p(66.0, 32.0), p(66.0, 0.0)));
    Case::new(part(vec![rounded_corner()], Keep::Left, 0.0), &cuts, 6.0)
}

#[test]
fn an_arc_about_the_right_center_the_wrong_way_round_is_told_to_turn_the_other_way() {
    let mut case = round_it(&[arc(p(52.0, 32.0), p(52.0, 46.0), p(66.0, 32.0), Turn::Left)]);
    case.comparison.gouges = vec![gouge(20.0, p(42.0, 22.0), p(60.0, 22.0), 1, stretch(0, 10.0, 50.0))];
    let f = case.only();
    assert_eq!((f.kind, f.cause, f.blocks[0].line), (Kind::Gouge, Cause::ArcWrongWay, 11));
    assert_eq!(f.remedy, "Write G2 in place of G3 in line 11.");
}

#[test]
fn an_arc_by_radius_the_wrong_way_round_bulges_over_its_chord_and_is_told_so() {
    // With R the other word puts the center on the other side: (66, 46).
    let mut case = round_it(&[arc(p(66.0, 46.0), p(52.0, 46.0), p(66.0, 32.0), Turn::Left)]);
    case.comparison.gouges = vec![gouge(9.0, p(56.1, 36.1), p(57.657, 37.657), 1, stretch(0, 30.0, 50.0))];
    assert_ne!(case.only().cause, Cause::ArcWrongWay, "its block does not say R");
    let reads = |case: &mut Case, second: &str| {
        let blocks = (0..).map_while(|i| case.program.blocks.get(i)).enumerate();
        let said = blocks.map(|(i, b)| Block { text: if i == 1 { second } else { b.text }, ..b });
        let said: Blocks = said.collect();
        case.program.blocks = said;
    };
    reads(&mut case, "N20 G3 X66 Y32 R14");
    assert_eq!(case.only().remedy, "Write G2 in place of G3 in line 11.");
    reads(&mut case, "N20 G3 X66 Y32 I14 (R14)");
    assert_ne!(case.only().cause, Cause::ArcWrongWay);
}

#[test]
fn an_arc_that_gouges_either_way_or_all_round_is_not_told_to_turn() {
    let small = arc(p(52.0, 42.0), p(52.0, 46.0), p(52.0, 38.0), Turn::Right);
    let full = Segment::Arc(Arc::full_circle(p(52.0, 32.0), p(52.0, 46.0), Turn::Left).unwrap());
    for turn in [small, full] {
        let mut case = round_it(&[turn]);
        case.comparison.gouges = vec![gouge(3.0, p(52.0, 38.0), p(52.0, 40.0), 1, stretch(0, 40.0, 50.0))];
        assert_ne!(case.only().cause, Cause::ArcWrongWay);
    }
}

#[test]
fn one_straight_move_across_a_round_corner_is_a_chord_of_14_off_by_4_1() {
    // Radius 14, a quarter turn: chord 14 sqrt 2, off by 14 (1 - cos 45 degrees) = 4.10051.
    let mut case = round_it(&[Segment::line(p(52.0, 46.0), p(66.0, 32.0))]);
    case.comparison.gouges =
        vec![gouge(4.100_505, p(59.0, 39.0), p(57.657, 37.657), 1, stretch(0, 32.0, 44.0))];
    let f = case.only();
    assert_eq!(f.cause, Cause::ChordsTooLong);
    holds(
        &f.message,
        &["in line 11 a straight move of 19.799 mm cuts across a curve, up to 4.101 mm off it"],
    );
    holds(&f.remedy, &["arcs (G2, G3)", "radius of 14.000 mm"]);
}

#[test]
fn a_pass_and_an_end_too_near_to_the_wall_are_told_where_the_center_belongs() {
    let wall = || Path::new(lines(&[p(0.0, 0.0), p(100.0, 0.0), p(100.0, 60.0)]), false).unwrap();
    // Material right of the walls: below and beyond. The first move comes down to the pass.
    let cuts = lines(&[p(20.0, 30.0), p(20.0, 4.6), p(80.0, 4.6), p(96.5, 30.0), p(50.0, 30.0)]);
    let mut case = Case::new(part(vec![wall()], Keep::Right, 0.0), &cuts, 5.0);
    let mut along = gouge(0.4, p(20.0, 4.6), p(20.0, 0.0), 0, stretch(0, 20.0, 80.0));
    along.moves = (0, 1);
    case.comparison.gouges = vec![along];
    let f = case.only();
    assert_eq!((f.cause, f.blocks[0].line), (Cause::PathOffContour, 11), "the move alongside is to blame");
    holds(&f.remedy, &["line 11 0.400 mm away", "at X20.000 Y5.000"]);
    let mut end = gouge(1.5, p(96.5, 30.0), p(100.0, 30.0), 2, stretch(0, 130.0, 130.0));
    end.moves = (2, 3);
    case.comparison.gouges = vec![end];
    let f = case.only();
    assert_eq!(f.cause, Cause::PathOffContour);
    holds(&f.remedy, &["1.500 mm away", "at X95.000 Y30.000"]);
}

#[test]
fn a_gouge_deeper_than_the_radius_has_no_named_cause() {
    let wall = Path::new(lines(&[p(0.0, 0.0), p(100.0, 0.0)]), false).unwrap();
    let mut case =
        Case::new(part(vec![wall], Keep::Right, 0.0), &lines(&[p(20.0, -3.0), p(80.0, -3.0)]), 5.0);
    case.comparison.gouges = vec![gouge(8.0, p(50.0, -3.0), p(50.0, 0.0), 0, stretch(0, 20.0, 50.0))];
    assert_eq!(case.only().cause, Cause::Unknown);
    let side = case.judge().warnings;
    assert!(side.iter().any(|w| w.found.contains("inside the material all the way")), "{side:?}");
}

#[test]
fn a_crest_between_the_first_and_the_last_moves_of_a_cut_asks_for_an_overlap() {
    let ring = rectangle(0.0, 0.0, 60.0, 40.0);
    let points: Vec<Point> =
        [(30.0, -20.0), (30.0, -6.0), (-6.0, -6.0), (-6.0, 46.0), (66.0, 46.0), (66.0, -6.0), (39.0, -6.0)]
            .map(|(x, y)| p(x, y))
            .to_vec();
    let mut case = Case::new(part(vec![ring], Keep::Inside, 0.0), &lines(&points), 6.0);
    let crest = Crest { moves: (1, 5) };
    case.comparison.excesses =
        vec![Excess { crest: Some(crest), ..excess(1.5, p(34.5, 0.0), 1, stretch(0, 32.0, 37.0)) }];
    let f = case.only();
    assert_eq!((f.kind, f.cause), (Kind::Cusp, Cause::EntryOrExit));
    holds(&f.message, &["the cut that begins in line 11 ends in line 15 before it meets its beginning"]);
    holds(&f.remedy, &["overlap", "5.000 mm or more along the contour"]);
}

#[test]
fn a_cut_that_stops_short_of_the_end_wall_is_told_to_go_nearer_by_what_is_left() {
    let slot = vec![
        Segment::line(p(40.0, -6.0), p(0.0, -6.0)),
        arc(p(0.0, 0.0), p(0.0, -6.0), p(0.0, 6.0), Turn::Right),
        Segment::line(p(0.0, 6.0), p(40.0, 6.0)),
        arc(p(40.0, 0.0), p(40.0, 6.0), p(40.0, -6.0), Turn::Right),
    ];
    let part = part(vec![Path::new(slot, true).unwrap()], Keep::Outside, 0.0);
    let mut case = Case::new(part, &[Segment::line(p(0.0, 0.0), p(38.5, 0.0))], 6.0);
    case.comparison.excesses = vec![excess(1.5, p(46.0, 0.0), 0, stretch(0, 100.0, 116.0))];
    let f = case.only();
    assert_eq!(f.cause, Cause::EntryOrExit);
    holds(&f.remedy, &["End the cut of line 10 at least 1.500 mm later, nearer to the wall"]);
}

#[test]
fn a_cutter_25_times_too_large_is_taken_for_millimetres_in_an_inch_program() {
    let wall = Path::new(lines(&[p(0.0, 0.0), p(4.0, 0.0)]), false).unwrap();
    let mut case = Case::new(part(vec![wall], Keep::Right, 0.0), &lines(&[p(0.0, 0.25), p(4.0, 0.25)]), 6.35);
    case.unit = crate::program::Unit::Inch;
    case.comparison.gouges = vec![gouge(6.1, p(2.0, 0.25), p(2.0, 0.0), 0, stretch(0, 0.0, 4.0))];
    let f = case.only();
    assert_eq!(f.cause, Cause::WrongDiameter);
    holds(&f.remedy, &["looks like millimetres", "--diameter 0.5000, or --units mm"]);
}

#[test]
fn a_rapid_move_alone_is_not_turned_into_a_cut() {
    let wall = Path::new(lines(&[p(0.0, 0.0), p(100.0, 0.0)]), false).unwrap();
    let mut case = Case::new(part(vec![wall], Keep::Right, 0.0), &lines(&[p(0.0, 5.0), p(9.0, 5.0)]), 5.0);
    case.command(Segment::line(p(9.0, 5.0), p(20.0, 5.0)), 5.0, MoveKind::Rapid);
    assert!(case.judge().findings.is_empty());
}

#[test]
fn a_sharp_corner_of_the_path_in_a_fillet_of_6_asks_a_cutter_of_radius_5_for_an_arc_of_1() {
    // Material right of the walls: the fillet turns left seen so, right once material lies on the left.
    let wall = vec![
        Segment::line(p(0.0, 0.0), p(94.0, 0.0)),
        arc(p(94.0, 6.0), p(94.0, 0.0), p(100.0, 6.0), Turn::Left),
        Segment::line(p(100.0, 6.0), p(100.0, 60.0)),
    ];
    let cuts = lines(&[p(10.0, 5.0), p(95.0, 5.0), p(95.0, 50.0), p(50.0, 50.0)]);
    let mut case = Case::new(part(vec![Path::new(wall, false).unwrap()], Keep::Right, 0.0), &cuts, 5.0);
    // The corner (95, 5) lies sqrt 2 from the fillet's center, that is 6 - sqrt 2 from the fillet.
    let depth = 5.0 - (6.0 - 2.0f64.sqrt());
    let mut bite = gouge(depth, p(95.0, 5.0), p(98.243, 1.757), 0, stretch(0, 95.0, 103.0));
    bite.moves = (0, 1);
    case.comparison.gouges = vec![bite];
    let f = case.only();
    assert_eq!(f.cause, Cause::PathOffContour);
    holds(&f.message, &["sharp corner", "fillet of radius 6.000 mm"]);
    holds(&f.remedy, &["at X95.000 Y5.000 with an arc of 1.000 mm radius"]);
}
