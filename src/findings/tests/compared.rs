//! Causes from real comparisons: a contour, a path, a cutter, and what must be said.

use super::fixture::*;
use crate::compare::{Clear, Request, compare, deviation_summary};
use crate::findings::{Cause, Finding, Kind, Verdict};
use crate::geometry::{Path, Point, Segment, Turn, Vec2};
use crate::part::Keep;
use crate::tolerance::Tolerances;

/// Verdict and findings of a case, compared as `check` does.
fn judged(mut case: Case) -> (Verdict, Vec<Finding>) {
    let request = Request {
        gouge: case.limits.gouge,
        excess: case.limits.excess,
        cusp: case.limits.cusp,
        clear: Clear::Wall,
        only_visited: false,
        program_bound: 0.0,
        tolerances: Tolerances::for_extent(200.0),
    };
    case.comparison = compare(&case.part, &case.cutting, &case.rapids, &request);
    case.comparison.deviation = deviation_summary(&case.part, &case.cutting);
    let judgement = case.judge();
    (judgement.verdict, judgement.findings)
}

/// A rectangle of 100 by 60, cut round along the rectangle larger by `out` on every side.
fn rectangle_case(keep: Keep, out: f64, radius: f64) -> Case {
    let ring = rectangle(-out, -out, 100.0 + out, 60.0 + out);
    Case::new(part(vec![rectangle(0.0, 0.0, 100.0, 60.0)], keep, 0.0), ring.segments(), radius)
}

fn causes(findings: &[Finding]) -> Vec<(Kind, Cause)> {
    findings.iter().map(|f| (f.kind, f.cause)).collect()
}

#[test]
fn a_block_cut_rightly_passes() {
    let (verdict, findings) = judged(rectangle_case(Keep::Inside, 5.0, 5.0));
    assert_eq!((verdict, findings.len()), (Verdict::Pass, 0));
}

#[test]
fn a_sharp_pocket_has_four_corners_that_the_cutter_cannot_reach() {
    let (verdict, findings) = judged(rectangle_case(Keep::Outside, -5.0, 5.0));
    assert_eq!(verdict, Verdict::Fail);
    assert_eq!(causes(&findings), [(Kind::Excess, Cause::InsideCorner); 4]);
    for f in &findings {
        assert!((f.figure.size - 5.0 * (2f64.sqrt() - 1.0)).abs() < 1e-6);
        holds(&f.remedy, &["0.241 mm diameter", "fillet of 4.880 mm radius"]);
    }
}

#[test]
fn a_cutter_of_10_2_or_9_8_for_10_is_one_finding_that_says_10() {
    for (radius, kind) in [(5.1, Kind::Gouge), (4.9, Kind::Excess)] {
        let (_, findings) = judged(rectangle_case(Keep::Inside, 5.0, radius));
        assert_eq!(causes(&findings), [(kind, Cause::WrongDiameter)]);
        holds(&findings[0].remedy, &["cutter of 10.000 mm diameter", "0.200 mm on the diameter"]);
    }
}

#[test]
fn a_wall_that_was_left_out_is_a_missed_pass() {
    let mut case = rectangle_case(Keep::Inside, 5.0, 5.0);
    case.cutting.moves.truncate(3);
    let (_, findings) = judged(case);
    assert_eq!(causes(&findings), [(Kind::Excess, Cause::MissedPass)]);
}

#[test]
fn chords_of_ten_degrees_outside_and_inside_of_a_circle_say_which_chords_would_do() {
    for (centers, keep, chord) in [(20.0, Keep::Inside, "1.264 mm"), (10.0, Keep::Outside, "0.894 mm")] {
        let corner =
            |k: u32| Point::ORIGIN + centers * Vec2::from_angle(f64::from(k % 36) * 10f64.to_radians());
        let path: Vec<Point> = (0..=36).map(corner).collect();
        let mut case = Case::new(part(vec![circle(Point::ORIGIN, 15.0)], keep, 0.0), &lines(&path), 5.0);
        (case.limits.gouge, case.limits.excess) = (0.01, 0.01);
        let (_, findings) = judged(case);
        assert_eq!(findings.len(), 1, "{findings:#?}");
        assert_eq!(findings[0].cause, Cause::ChordsTooLong);
        // Sagitta of the path's radius: 0.0761 and 0.0381.
        assert!((findings[0].figure.size - centers * (1.0 - 5f64.to_radians().cos())).abs() < 1e-9);
        holds(&findings[0].remedy, &[chord]);
    }
}

/// A pocket of 60 by 40 with fillets of radius 3, material outside.
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
fn an_untrimmed_fillet_names_the_block_to_cut_out_and_the_other_corners_their_cutter() {
    // Raw offset of one corner: the lines run past one another, the fillet's offset of radius 5 - 3
    // turns back between them (NISTIR 6556, B.1). The cutter enters the opposite wall by 2.
    let cuts = [
        Segment::line(p(30.0, 5.0), p(57.0, 5.0)),
        arc(p(57.0, 3.0), p(57.0, 5.0), p(55.0, 3.0), Turn::Left),
        Segment::line(p(55.0, 3.0), p(55.0, 35.0)),
        Segment::line(p(55.0, 35.0), p(5.0, 35.0)),
        Segment::line(p(5.0, 35.0), p(5.0, 5.0)),
        Segment::line(p(5.0, 5.0), p(30.0, 5.0)),
    ];
    let (_, findings) = judged(Case::new(part(vec![filleted_pocket()], Keep::Outside, 0.0), &cuts, 5.0));
    let gouges: Vec<&Finding> = findings.iter().filter(|f| f.kind == Kind::Gouge).collect();
    assert_eq!(gouges.len(), 1);
    assert_eq!(gouges[0].cause, Cause::FoldLeftInPath);
    assert!((gouges[0].figure.size - 2.0).abs() < 1e-6);
    holds(&gouges[0].remedy, &["Cut out line 11", "end line 10 at X55.000 Y5.000", "line 12"]);
    let corners: Vec<&Finding> = findings.iter().filter(|f| f.kind == Kind::Excess).collect();
    assert_eq!(corners.len(), 3);
    for f in corners {
        assert_eq!(f.cause, Cause::InsideCorner);
        assert!((f.figure.size - 2.0 * (2f64.sqrt() - 1.0)).abs() < 1e-6);
        holds(&f.remedy, &["6.000 mm diameter, which fits"]);
    }
}

#[test]
fn a_comb_of_passes_four_apart_is_one_cusp_finding() {
    let mut comb = Vec::new();
    for k in 0..10 {
        let x = 4.0 * f64::from(k);
        comb.extend([p(x, 5.0), p(x, 30.0), p(x + 4.0, 30.0)]);
    }
    comb.push(p(40.0, 5.0));
    let wall = Path::new(lines(&[p(0.0, 0.0), p(36.0, 0.0)]), false).unwrap();
    let (_, findings) = judged(Case::new(part(vec![wall], Keep::Right, 0.0), &lines(&comb), 5.0));
    assert_eq!(causes(&findings), [(Kind::Cusp, Cause::MissedPass)]);
    assert!((findings[0].figure.size - (29f64.sqrt() - 5.0)).abs() < 1e-9);
    holds(&findings[0].message, &["worst of 9 places", "4.000 mm apart"]);
}
