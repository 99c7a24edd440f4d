//! One cause after the other, with the numbers of its message and remedy.

use std::f64::consts::PI;

use approx::assert_abs_diff_eq;

use super::fixture::*;
use crate::compare::{Crest, DeviationSummary, FoldKind, RapidHit, deviation_summary};
use crate::findings::{
    Cause, Kind, Severity, chord_within, largest_radius_in_corner, left_in_corner, step_over_within,
};
use crate::geometry::{Path, Point, Segment, Turn, Vec2};
use crate::part::Keep;
use crate::program::{MoveKind, Unit};

/// Elementary geometry: a disc of radius 1 in a corner that opens by the angle (degrees) stays this
/// far from it.
const CORNERS: [(f64, f64); 6] = [
    (30.0, 2.863_703_305_16),
    (60.0, 1.0),
    (90.0, 0.414_213_562_373),
    (120.0, 0.154_700_538_379),
    (135.0, 0.082_392_200_292_4),
    (150.0, 0.035_276_180_410_1),
];

/// A corner at the origin that opens by `angle` to the cutter, walls 100 long.
fn corner_case(angle: f64) -> Case {
    let walls = lines(&[p(100.0, 0.0), p(0.0, 0.0), Point::ORIGIN + 100.0 * Vec2::from_angle(angle)]);
    let part = part(vec![Path::new(walls, false).unwrap()], Keep::Left, 0.0);
    let center = Point::ORIGIN + Vec2::from_angle(0.5 * angle) / (0.5 * angle).sin();
    let out = center + 90.0 * Vec2::from_angle(angle);
    Case::new(part, &lines(&[p(90.0, 1.0), center, out]), 1.0)
}

#[test]
fn sharp_inside_corners_name_the_largest_radius_within_the_limit() {
    for (degrees, left) in CORNERS {
        let angle: f64 = degrees * PI / 180.0;
        assert_abs_diff_eq!(left_in_corner(1.0, angle), left, epsilon = 1e-11);
        let largest = largest_radius_in_corner(0.02, angle);
        assert_abs_diff_eq!(left_in_corner(largest, angle), 0.02, epsilon = 1e-15);
        let mut case = corner_case(angle);
        case.limits.excess = 0.02;
        case.comparison.excesses = vec![excess(left, p(0.0, 0.0), 0, stretch(0, 99.0, 101.0))];
        let f = case.only();
        assert_eq!((f.kind, f.cause, f.severity), (Kind::Excess, Cause::InsideCorner, Severity::Fault));
        holds(&f.message, &[&format!("inside corner of {degrees} degrees"), "limit 0.02 mm"]);
        let shown = crate::findings::length_text_down(2.0 * 0.02 / left, Unit::Millimetre);
        holds(&f.remedy, &[&format!("{shown} diameter")]);
    }
}

#[test]
fn a_right_angle_with_limit_five_hundredths_asks_for_241_micrometres_or_a_fillet() {
    let mut case = corner_case(0.5 * PI);
    case.comparison.excesses = vec![excess(0.414_213_562_373, p(0.0, 0.0), 0, stretch(0, 99.0, 101.0))];
    let f = case.only();
    // 2 * 0.05 / (sqrt 2 - 1) = 0.24142, rounded down; 1 - 0.12071 = 0.87929, rounded up.
    holds(&f.remedy, &["0.241 mm diameter", "fillet of 0.880 mm radius"]);
}

#[test]
fn a_corner_where_more_is_left_than_its_angle_explains_is_no_inside_corner() {
    let mut case = corner_case(0.5 * PI);
    case.comparison.excesses = vec![excess(0.8, p(0.0, 0.0), 0, stretch(0, 99.0, 101.0))];
    assert_ne!(case.only().cause, Cause::InsideCorner);
}

/// A pocket of 60 by 40 with fillets of radius 3 at all corners, material outside.
fn filleted_pocket() -> Path {
    let (w, h, r) = (60.0, 40.0, 3.0);
    let s = vec![
        Segment::line(p(r, 0.0), p(w - r, 0.0)),
        arc(p(w - r, r), p(w - r, 0.0), p(w, r), Turn::Left),
        Segment::line(p(w, r), p(w, h - r)),
        arc(p(w - r, h - r), p(w, h - r), p(w - r, h), Turn::Left),
        Segment::line(p(w - r, h), p(r, h)),
        arc(p(r, h - r), p(r, h), p(0.0, h - r), Turn::Left),
        Segment::line(p(0.0, h - r), p(0.0, r)),
        arc(p(r, r), p(0.0, r), p(r, 0.0), Turn::Left),
    ];
    Path::new(s, true).unwrap()
}

#[test]
fn a_fillet_of_radius_3_under_a_cutter_of_radius_5_asks_for_6_diameter() {
    let ring = rectangle(5.0, 5.0, 55.0, 35.0);
    let mut case = Case::new(part(vec![filleted_pocket()], Keep::Outside, 0.0), ring.segments(), 5.0);
    // NISTIR 6556 B.1 geometry: (r - R)(sqrt 2 - 1) on the bisector, at the middle of the fillet.
    let height = 2.0 * (2f64.sqrt() - 1.0);
    let middle = p(57.0 + 3.0 / 2f64.sqrt(), 3.0 - 3.0 / 2f64.sqrt());
    case.comparison.excesses = vec![excess(height, middle, 0, stretch(0, 30.0, 35.0))];
    let f = case.only();
    assert_eq!(f.cause, Cause::InsideCorner);
    holds(&f.message, &["0.8284 mm", "fillet of radius 3.000 mm", "cutter of 10.000 mm"]);
    // 3 + 0.05 / (sqrt 2 - 1) = 3.12071 within the limit.
    holds(&f.remedy, &["6.000 mm diameter, which fits", "6.241 mm diameter leaves no more than 0.05 mm"]);
}

#[test]
fn with_an_allowance_the_fitting_cutter_is_smaller_by_it() {
    let ring = rectangle(5.5, 5.5, 54.5, 34.5);
    let mut case = Case::new(part(vec![filleted_pocket()], Keep::Outside, 0.5), ring.segments(), 5.0);
    let height = 2.5 * (2f64.sqrt() - 1.0);
    let middle = p(57.0 + 3.0 / 2f64.sqrt(), 3.0 - 3.0 / 2f64.sqrt());
    case.comparison.excesses = vec![excess(height, middle, 0, stretch(0, 30.0, 35.0))];
    holds(&case.only().remedy, &["5.000 mm diameter, which fits"]);
}

#[test]
fn a_slot_of_8_under_a_cutter_of_10_names_both() {
    let slot = rectangle(0.0, 0.0, 100.0, 8.0);
    let cut = lines(&[p(10.0, 4.0), p(50.0, 4.0), p(60.0, 4.0), p(90.0, 4.0)]);
    let mut case = Case::new(part(vec![slot], Keep::Outside, 0.0), &cut, 5.0);
    let mut bite = gouge(1.0, p(50.0, 4.0), p(50.0, 0.0), 1, stretch(0, 10.0, 60.0));
    bite.moves = (0, 2);
    case.comparison.gouges = vec![bite];
    let f = case.only();
    assert_eq!((f.kind, f.cause), (Kind::Gouge, Cause::InsideCorner));
    holds(&f.message, &["walls that stand 8.000 mm apart", "cutter of 10.000 mm"]);
    holds(&f.remedy, &["8.000 mm diameter"]);
}

/// Path with a loop: right to X32, down, back to X30, up through its own first move at (30, 0).
fn looped_case() -> Case {
    let cuts = lines(&[p(0.0, 0.0), p(32.0, 0.0), p(32.0, -2.0), p(30.0, -2.0), p(30.0, 20.0)]);
    let walls = lines(&[p(0.0, -5.0), p(35.0, -5.0), p(35.0, 20.0)]);
    let part = part(vec![Path::new(walls, false).unwrap()], Keep::Right, 0.0);
    Case::new(part, &cuts, 5.0)
}

#[test]
fn a_loop_in_the_path_names_the_blocks_to_cut_out_and_where_to_join() {
    let mut case = looped_case();
    case.comparison.folds = vec![fold(FoldKind::Loop, (0, 3), p(30.0, 0.0), 1.0)];
    let mut first = gouge(2.0, p(32.0, -2.0), p(32.0, -5.0), 1, stretch(0, 30.0, 34.0));
    first.moves = (1, 2);
    let second = gouge(1.5, p(32.0, -1.0), p(35.0, -1.0), 1, stretch(0, 37.0, 39.0));
    case.comparison.gouges = vec![first, second];
    let judged = case.judge();
    assert_eq!(judged.findings.len(), 2, "one gouge and one note");
    let f = &judged.findings[0];
    assert_eq!((f.kind, f.cause), (Kind::Gouge, Cause::FoldLeftInPath));
    assert_eq!(f.blocks[0].line, 11, "the deepest move first");
    holds(&f.message, &["2.0000 mm", "small loop, in lines 10 to 13"]);
    holds(
        &f.remedy,
        &["Cut out lines 11 to 12", "end line 10 at X30.000 Y0.000 and go on from there with line 13"],
    );
    assert_eq!((judged.findings[1].kind, judged.findings[1].severity), (Kind::Fold, Severity::Note));
}

#[test]
fn a_gouge_far_from_the_loop_on_the_same_move_is_not_blamed_on_it() {
    let mut case = looped_case();
    case.comparison.folds = vec![fold(FoldKind::Loop, (0, 3), p(30.0, 0.0), 1.0)];
    case.comparison.gouges = vec![gouge(0.3, p(2.0, 0.0), p(2.0, -5.0), 0, stretch(0, 1.0, 3.0))];
    assert_ne!(case.judge().findings[0].cause, Cause::FoldLeftInPath);
}

#[test]
fn a_tight_turn_is_blamed_only_for_what_lies_on_its_inner_side() {
    let turn = arc(p(0.0, 0.0), p(2.0, 0.0), p(-2.0, 0.0), Turn::Left);
    let cuts = [Segment::line(p(2.0, -30.0), p(2.0, 0.0)), turn, Segment::line(p(-2.0, 0.0), p(-2.0, -30.0))];
    for (at, cause) in [(p(0.0, -2.0), Cause::TightTurn), (p(0.0, 6.5), Cause::PathOffContour)] {
        let wall = lines(&[p(-50.0, at.y), p(50.0, at.y)]);
        let keep = if at.y > 0.0 { Keep::Left } else { Keep::Right };
        let part = part(vec![Path::new(wall, false).unwrap()], keep, 0.0);
        let mut case = Case::new(part, &cuts, 5.0);
        case.comparison.folds = vec![fold(FoldKind::TightTurn, (1, 1), p(0.0, 2.0), 2.0)];
        case.comparison.gouges = vec![gouge(0.5, p(0.0, 2.0), at, 1, stretch(0, 49.0, 51.0))];
        let f = &case.judge().findings[0];
        assert_eq!(f.cause, cause);
        if cause == Cause::TightTurn {
            holds(&f.remedy, &["line 11", "5.000 mm radius or more", "4.000 mm diameter"]);
        }
    }
}

/// A block of 100 by 60, cut round with a path made for a cutter of radius `made_for`.
fn block_case(made_for: f64, radius: f64) -> Case {
    let block = part(vec![rectangle(0.0, 0.0, 100.0, 60.0)], Keep::Inside, 0.0);
    let ring = rectangle(-made_for, -made_for, 100.0 + made_for, 60.0 + made_for);
    Case::new(block, ring.reversed().segments(), radius)
}

fn four_sides(size: f64) -> Vec<crate::compare::Gouge> {
    [(p(50.0, 0.0), 0.0, 100.0), (p(100.0, 30.0), 100.0, 160.0), (p(50.0, 60.0), 160.0, 260.0)]
        .into_iter()
        .enumerate()
        .map(|(i, (at, from, to))| gouge(size, at, at, i, stretch(0, from, to)))
        .collect()
}

#[test]
fn a_cutter_too_large_by_two_tenths_is_one_finding_that_names_the_right_one() {
    let mut case = block_case(5.0, 5.1);
    let summary = deviation_summary(&case.part, &case.cutting).unwrap();
    assert_abs_diff_eq!(summary.median, -0.1, epsilon = 1e-9);
    assert!(summary.share > 0.95 && (summary.length_visited - 320.0).abs() < 1e-9);
    case.comparison.deviation = Some(summary);
    case.comparison.gouges = four_sides(0.1);
    let f = case.only();
    assert_eq!(f.cause, Cause::WrongDiameter);
    holds(&f.message, &["worst of 3 places", "cutter of 10.200 mm is larger"]);
    holds(&f.remedy, &["cutter of 10.000 mm diameter", "0.100 mm on the radius", "0.200 mm on the diameter"]);
}

#[test]
fn without_a_summary_equal_gouges_along_most_of_the_contour_mean_the_same() {
    let mut case = block_case(5.0, 5.1);
    case.comparison.gouges = four_sides(0.1);
    let f = case.only();
    assert_eq!(f.cause, Cause::WrongDiameter);
    holds(&f.remedy, &["cutter of 10.000 mm diameter"]);
}

#[test]
fn unequal_gouges_are_no_wrong_diameter() {
    let mut case = block_case(5.0, 5.1);
    case.comparison.gouges = four_sides(0.1);
    case.comparison.gouges[0].depth.size = 0.4;
    case.comparison.gouges[1].depth.size = 0.2;
    assert!(case.judge().findings.iter().all(|f| f.cause != Cause::WrongDiameter));
}

#[test]
fn a_cutter_too_small_leaves_stock_all_round_and_may_be_meant() {
    let mut case = block_case(5.0, 4.9);
    let summary = deviation_summary(&case.part, &case.cutting).unwrap();
    assert_abs_diff_eq!(summary.median, 0.1, epsilon = 1e-9);
    case.comparison.deviation = Some(summary);
    let mut all = excess(0.1, p(50.0, 0.0), 0, stretch(0, 0.0, 320.0));
    all.whole_path = true;
    case.comparison.excesses = vec![all];
    let f = case.only();
    assert_eq!(f.cause, Cause::WrongDiameter);
    holds(&f.message, &["smaller than the program assumes"]);
    holds(&f.remedy, &["cutter of 10.000 mm diameter", "closer to the part", "--allowance 0.100"]);
}

#[test]
fn a_long_excess_whose_worst_place_is_a_corner_still_tells_the_diameter() {
    let mut case = block_case(5.0, 4.9);
    case.comparison.deviation =
        Some(DeviationSummary { length_visited: 320.0, median: 0.1, band: 0.01, share: 0.9 });
    case.comparison.excesses = vec![excess(2.1, p(0.0, 0.0), 0, stretch(0, 0.0, 320.0))];
    let f = case.only();
    assert_eq!(f.cause, Cause::WrongDiameter);
    holds(&f.message, &["2.1000 mm", "about 0.100 mm along 90 %"]);
}

/// A disc of radius 15 cut round from outside with a cutter of radius 5 along a regular 36-gon whose
/// corners lie on the circle of radius 20.
fn chord_case() -> Case {
    let corner = |k: i32| Point::ORIGIN + 20.0 * Vec2::from_angle(f64::from(k) * PI / 18.0);
    let points: Vec<Point> = (0..36).chain([0]).map(corner).collect();
    let mut case =
        Case::new(part(vec![circle(Point::ORIGIN, 15.0)], Keep::Inside, 0.0), &lines(&points), 5.0);
    // Sagitta R (1 - cos(phi / 2)): 0.0761 at the middle of each chord.
    let depth = 20.0 * (1.0 - (PI / 36.0).cos());
    case.comparison.gouges = (0..36u32)
        .map(|k| {
            let angle = (f64::from(k) + 0.5) * PI / 18.0;
            let at = Point::ORIGIN + 15.0 * Vec2::from_angle(angle);
            let center = Point::ORIGIN + (20.0 - depth) * Vec2::from_angle(angle);
            let span = stretch(0, 15.0 * (angle - 0.07), 15.0 * (angle + 0.07));
            gouge(depth, center, at, k as usize, span)
        })
        .collect();
    case
}

#[test]
fn chords_that_are_too_long_are_one_finding_with_the_chord_that_would_do() {
    let mut case = chord_case();
    // Lest the share of the contour makes it a wrong diameter: the deviation varies along a chord.
    case.comparison.deviation = deviation_summary(&case.part, &case.cutting);
    assert!(case.comparison.deviation.unwrap().share < 0.6);
    case.limits.gouge = 0.01;
    let f = case.only();
    assert_eq!(f.cause, Cause::ChordsTooLong);
    holds(&f.message, &["0.0761 mm", "worst of 36 places", "chords of about 3.486 mm"]);
    // 2 sqrt(0.01 (40 - 0.01)) = 1.26475, rounded down.
    holds(&f.remedy, &["1.264 mm", "3.6 degrees", "radius of 20.000 mm", "within 0.01 mm"]);
}

#[test]
fn the_chord_of_radius_10_within_a_hundredth_is_0_894203556244_and_spans_5_125_degrees() {
    let (chord, angle) = chord_within(0.01, 10.0);
    assert_abs_diff_eq!(chord, 0.894_203_556_244, epsilon = 1e-12);
    assert_abs_diff_eq!(angle.to_degrees(), 5.125_117_466_25, epsilon = 1e-10);
    assert_eq!((2.0 * PI / angle).ceil() as u32, 71);
    assert_eq!((2.0 * PI / chord_within(0.001, 10.0).1).ceil() as u32, 223);
    assert_abs_diff_eq!(chord_within(30.0, 10.0).1, PI, epsilon = 1e-15);
    assert_eq!(chord_within(0.0, 10.0), (0.0, 0.0));
}

#[test]
fn a_cusp_names_both_passes_their_distance_and_the_step_that_would_do() {
    let wall = lines(&[p(-50.0, 0.0), p(50.0, 0.0)]);
    let part = part(vec![Path::new(wall, false).unwrap()], Keep::Right, 0.0);
    let mut case = Case::new(part, &[], 5.0);
    for x in [-2.0, 2.0] {
        case.command(Segment::line(p(x, 30.0), p(x, 5.0)), 5.0, MoveKind::Feed);
    }
    let height = (25f64 + 4.0).sqrt() - 5.0;
    let mut cusp = excess(height, p(0.0, 0.0), 0, stretch(0, 49.0, 51.0));
    cusp.crest = Some(Crest { moves: (0, 1) });
    case.comparison.excesses = vec![cusp];
    let f = case.only();
    assert_eq!((f.kind, f.cause, f.limit), (Kind::Cusp, Cause::MissedPass, Some(0.01)));
    holds(&f.message, &["0.3852 mm", "lines 10 and 11", "4.000 mm apart"]);
    // 2 sqrt(0.01 (10 - 0.01)) = 0.63214.
    assert_abs_diff_eq!(step_over_within(0.01, 5.0), 0.632_139_225_171, epsilon = 1e-12);
    holds(&f.remedy, &["0.632 mm apart"]);
}

#[test]
fn equal_cusps_side_by_side_are_one_that_names_the_passes_of_the_worst() {
    let wall = lines(&[p(0.0, 0.0), p(36.0, 0.0)]);
    let part = part(vec![Path::new(wall, false).unwrap()], Keep::Right, 0.0);
    let mut case = Case::new(part, &[], 5.0);
    for k in 0..10 {
        let x = 4.0 * f64::from(k);
        case.command(Segment::line(p(x, 30.0), p(x, 5.0)), 5.0, MoveKind::Feed);
    }
    case.comparison.excesses = (0..9)
        .map(|k| {
            let x = 4.0 * k as f64 + 2.0;
            let size = if k == 4 { 0.386 } else { 0.385 };
            let mut cusp = excess(size, p(x, 0.0), k, stretch(0, x - 1.7, x + 1.7));
            cusp.crest = Some(Crest { moves: (k, k + 1) });
            cusp
        })
        .collect();
    let f = case.only();
    assert_eq!(f.kind, Kind::Cusp);
    holds(&f.message, &["worst of 9 places", "lines 14 and 15 stand 4.000 mm apart"]);
}

#[test]
fn passes_farther_apart_than_the_cutter_is_wide_leave_a_wall_and_no_cusp() {
    let mut case = block_case(5.0, 5.0);
    case.cutting.moves.truncate(3);
    let mut wall = excess(30.0, p(0.0, 30.0), 0, stretch(0, 260.0, 320.0));
    wall.crest = Some(Crest { moves: (0, 2) });
    case.comparison.excesses = vec![wall];
    let f = case.only();
    assert_eq!((f.kind, f.cause, f.limit), (Kind::Excess, Cause::MissedPass, Some(0.05)));
    holds(&f.message, &["no pass of the cutter of 10.000 mm runs along there"]);
}

#[test]
fn a_wall_without_a_pass_is_a_missed_pass_and_one_beside_which_it_stands_off_is_not() {
    let mut case = block_case(5.0, 5.0);
    case.cutting.moves.truncate(3);
    case.comparison.excesses = vec![excess(20.0, p(50.0, 0.0), 2, stretch(0, 5.0, 95.0))];
    let f = case.only();
    assert_eq!(f.cause, Cause::MissedPass);
    holds(&f.remedy, &["Add a pass", "90.000 mm long", "5.000 mm from the wall"]);
    let mut case = block_case(5.3, 5.0);
    case.comparison.excesses = vec![excess(0.3, p(50.0, 0.0), 3, stretch(0, 20.0, 80.0))];
    let f = case.only();
    assert_eq!(f.cause, Cause::PathOffContour);
    holds(&f.remedy, &["0.300 mm closer", "5.000 mm from the contour"]);
}

#[test]
fn an_uncut_spot_of_an_area_tells_how_wide_the_gap_is() {
    let mut case = block_case(5.0, 5.0);
    let mut spot = excess(0.4, p(20.0, 20.0), 0, stretch(0, 0.0, 0.0));
    spot.stretch = None;
    case.comparison.excesses = vec![spot];
    let f = case.only();
    assert_eq!(f.cause, Cause::MissedPass);
    holds(&f.remedy, &["X20.000 Y20.000", "10.000 mm apart", "gap of 0.800 mm"]);
}

#[test]
fn a_loop_that_nothing_visits_points_to_only_visited() {
    let paths = vec![rectangle(0.0, 0.0, 100.0, 60.0), circle(p(50.0, 30.0), 3.0)];
    let mut case =
        Case::new(part(paths, Keep::Inside, 0.0), rectangle(-5.0, -5.0, 105.0, 65.0).segments(), 5.0);
    let mut hole = excess(27.0, p(50.0, 33.0), 0, stretch(1, 0.0, 6.0 * PI));
    hole.whole_path = true;
    case.comparison.excesses = vec![hole];
    case.comparison.never_visited = vec![1];
    let f = case.judge().findings.remove(0);
    assert_eq!(f.cause, Cause::NeverVisited);
    assert!(f.blocks.is_empty(), "what is missing stands in no block");
    holds(
        &f.message,
        &["loop 1 of the drawing, a circle of 6.000 mm diameter at X50.000 Y30.000", "10.000 mm is too wide"],
    );
    holds(&f.remedy, &["--only-visited", "this cutter cannot"]);
}

#[test]
fn entry_and_exit_moves_are_named_and_told_where_to_go() {
    let wall = lines(&[p(-50.0, 0.0), p(150.0, 0.0)]);
    let part = part(vec![Path::new(wall, false).unwrap()], Keep::Right, 0.0);
    let cuts = lines(&[p(0.0, 4.0), p(10.0, 5.0), p(50.0, 5.0), p(90.0, 5.0), p(100.0, 4.5)]);
    let mut case = Case::new(part, &cuts, 5.0);
    case.comparison.gouges = vec![
        gouge(1.0, p(0.0, 4.0), p(0.0, 0.0), 0, stretch(0, 50.0, 59.0)),
        gouge(0.5, p(100.0, 4.5), p(100.0, 0.0), 3, stretch(0, 142.0, 150.0)),
    ];
    let findings = case.judge().findings;
    assert_eq!(findings.len(), 2);
    assert!(findings.iter().all(|f| f.cause == Cause::EntryOrExit));
    holds(&findings[0].message, &["move onto the contour, line 10"]);
    holds(&findings[0].remedy, &["center at X0.000 Y5.000", "1.000 mm away"]);
    holds(&findings[1].message, &["move off the contour, line 13"]);
}

#[test]
fn a_cut_that_ends_too_early_says_by_how_much() {
    let wall = lines(&[p(0.0, 0.0), p(100.0, 0.0)]);
    let part = part(vec![Path::new(wall, false).unwrap()], Keep::Right, 0.0);
    let mut case = Case::new(part, &lines(&[p(0.0, 5.0), p(40.0, 5.0), p(92.0, 5.0)]), 5.0);
    let height = 89f64.sqrt() - 5.0;
    case.comparison.excesses = vec![excess(height, p(100.0, 0.0), 1, stretch(0, 92.7, 100.0))];
    let f = case.only();
    assert_eq!(f.cause, Cause::EntryOrExit);
    holds(&f.message, &["ends too early, in line 11"]);
    holds(&f.remedy, &["up to 7.300 mm later"]);
}

#[test]
fn rapids_one_after_the_other_through_the_part_are_one_fault_without_a_tolerance() {
    let mut case = block_case(5.0, 5.0);
    for (from, to) in [(p(-9.0, 9.0), p(20.0, 9.0)), (p(20.0, 9.0), p(90.0, 9.0))] {
        case.command(Segment::line(from, to), 5.0, MoveKind::Rapid);
    }
    let hit = |depth, rapid| RapidHit { depth: figure(depth), center: p(20.0, 9.0), at: p(20.0, 0.0), rapid };
    case.comparison.rapids = vec![hit(14.0, 1), hit(10.0, 0)];
    let f = case.only();
    assert_eq!((f.kind, f.cause, f.severity), (Kind::Rapid, Cause::RapidThroughPart, Severity::Fault));
    assert_eq!(f.blocks.iter().map(|b| b.line).collect::<Vec<_>>(), [15, 14]);
    holds(&f.message, &["14.0000 mm into the part", "lines 14 to 15"]);
    holds(&f.remedy, &["Z0.000", "5.000 mm from the contour"]);
}

#[test]
fn many_equal_tight_turns_are_one_note_and_a_different_one_another() {
    let mut case = block_case(5.0, 5.0);
    let turn = |i: usize, r: f64| fold(FoldKind::TightTurn, (i, i), p(i as f64, 0.0), r);
    case.comparison.folds = vec![turn(0, 2.0), turn(1, 3.0), turn(2, 2.0), turn(3, 2.0)];
    let findings = case.judge().findings;
    assert_eq!(findings.len(), 2);
    assert!(findings.iter().all(|f| f.severity == Severity::Note && f.limit.is_none() && f.decided));
    let many = findings.iter().find(|f| f.message.starts_with("3 places")).unwrap();
    holds(&many.message, &["radius of about 2.000 mm", "cutter of 10.000 mm"]);
}

#[test]
fn inches_are_said_with_four_decimals() {
    let mut case = corner_case(0.5 * PI);
    case.unit = Unit::Inch;
    case.comparison.excesses = vec![excess(0.414_213_562_373, p(0.0, 0.0), 0, stretch(0, 99.0, 101.0))];
    let f = case.only();
    holds(&f.message, &["0.41421 in", "2.0000 in"]);
    holds(&f.remedy, &["0.2414 in diameter"]);
}
