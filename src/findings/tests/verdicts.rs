//! Limits met, exceeded and straddled; order; neighbours made one.

use super::fixture::*;
use crate::compare::{Figure, FoldKind, RapidHit, Region};
use crate::findings::{Cause, Kind, Verdict};
use crate::geometry::{Point, Segment};
use crate::part::Keep;
use crate::program::MoveKind;

/// A block of 200 by 60, cut round rightly with a cutter of radius 5; its lower side by eight moves.
fn case() -> Case {
    let block = part(vec![rectangle(0.0, 0.0, 200.0, 60.0)], Keep::Inside, 0.0);
    let mut points: Vec<Point> = vec![p(-5.0, 65.0)];
    points.extend((0..8).map(|k| p(-5.0 + 30.0 * f64::from(k), -5.0)));
    points.extend([p(205.0, 65.0), p(-5.0, 65.0)]);
    Case::new(block, &lines(&points), 5.0)
}

/// A gouge of `depth` into the lower side at `x`, by the move that runs there.
fn bite(depth: f64, x: f64) -> crate::compare::Gouge {
    let i = 1 + ((x + 5.0) / 30.0) as usize;
    gouge(depth, p(x, 5.0 - depth), p(x, 0.0), i, stretch(0, x - 1.0, x + 1.0))
}

#[test]
fn nothing_found_passes() {
    let judged = case().judge();
    assert_eq!((judged.verdict, judged.findings.len()), (Verdict::Pass, 0));
    assert!(judged.warnings.is_empty(), "{:?}", judged.warnings);
}

#[test]
fn a_gouge_certainly_over_its_limit_fails() {
    let mut case = case();
    case.comparison.gouges = vec![bite(0.021, 50.0)];
    case.comparison.worst_gouge = Some(figure(0.021));
    let judged = case.judge();
    assert_eq!(judged.verdict, Verdict::Fail);
    assert!(judged.findings[0].decided);
    assert_eq!(judged.worst.gouge, Some(figure(0.021)));
}

#[test]
fn a_figure_whose_interval_holds_the_limit_is_undecided_on_either_side() {
    for size in [0.019, 0.02, 0.021] {
        let mut case = case();
        let mut g = bite(size, 50.0);
        g.depth.bound = 0.0015;
        case.comparison.gouges = vec![g];
        let judged = case.judge();
        assert_eq!(judged.verdict, Verdict::Undecided, "size {size}");
        assert!(!judged.findings[0].decided);
        holds(&judged.findings[0].message, &["certain to 0.0015 mm only"]);
    }
}

#[test]
fn a_certain_fault_beside_an_undecided_one_fails() {
    let mut case = case();
    let mut g = bite(0.0205, 50.0);
    g.depth.bound = 0.001;
    case.comparison.gouges = vec![g, bite(0.5, 120.0)];
    assert_eq!(case.judge().verdict, Verdict::Fail);
}

#[test]
fn a_figure_certainly_within_its_limit_is_no_finding() {
    let mut case = case();
    case.comparison.gouges = vec![bite(0.0199, 50.0)];
    let judged = case.judge();
    assert_eq!((judged.verdict, judged.findings.len()), (Verdict::Pass, 0));
}

#[test]
fn a_worst_figure_over_the_limit_fails_even_without_a_finding() {
    let mut case = case();
    case.comparison.worst_cusp = Some(figure(0.011));
    assert_eq!(case.judge().verdict, Verdict::Fail);
    case.comparison.worst_cusp = Some(Figure { size: 0.0095, bound: 0.001 });
    assert_eq!(case.judge().verdict, Verdict::Undecided);
}

#[test]
fn figures_that_are_no_numbers_do_not_pass() {
    let mut case = case();
    case.comparison.worst_excess = Some(figure(f64::NAN));
    assert_eq!(case.judge().verdict, Verdict::Undecided);
    let mut case = self::case();
    case.comparison.gouges = vec![bite(f64::NAN, 50.0)];
    assert_eq!(case.judge().verdict, Verdict::Undecided);
}

#[test]
fn notes_decide_nothing() {
    let mut case = case();
    case.comparison.folds = vec![fold(FoldKind::TightTurn, (1, 2), p(0.0, 0.0), 2.0)];
    assert_eq!(case.judge().verdict, Verdict::Pass);
}

#[test]
fn a_rapid_into_the_part_fails_whatever_the_tolerance() {
    let mut case = case();
    case.limits.gouge = 100.0;
    case.command(Segment::line(p(-9.0, 9.0), p(20.0, 9.0)), 5.0, MoveKind::Rapid);
    case.comparison.rapids =
        vec![RapidHit { depth: figure(0.3), center: p(20.0, 9.0), at: p(20.0, 0.0), rapid: 0 }];
    assert_eq!(case.judge().verdict, Verdict::Fail);
}

#[test]
fn a_contour_of_which_nothing_was_judged_does_not_pass() {
    let mut case = case();
    case.comparison.never_visited = vec![0];
    case.comparison.worst_excess = None;
    let judged = case.judge();
    assert_eq!(judged.verdict, Verdict::Undecided);
    assert!(!judged.warnings.is_empty());
}

#[test]
fn faults_come_before_notes_and_the_farthest_over_its_limit_first() {
    let mut case = case();
    case.comparison.folds = vec![fold(FoldKind::TightTurn, (1, 2), p(0.0, 0.0), 9.0)];
    case.comparison.gouges = vec![bite(0.3, 50.0), bite(0.08, 150.0)];
    // 0.25 over its limit of 0.05, though larger than no gouge over its own.
    case.comparison.excesses = vec![excess(0.25, p(100.0, 60.0), 9, stretch(0, 300.0, 320.0))];
    let kinds: Vec<(Kind, f64)> = case.judge().findings.iter().map(|f| (f.kind, f.figure.size)).collect();
    assert_eq!(kinds, [(Kind::Gouge, 0.3), (Kind::Excess, 0.25), (Kind::Gouge, 0.08), (Kind::Fold, 9.0)]);
}

#[test]
fn loops_left_to_another_tool_come_after_the_faults_of_this_one() {
    let paths = vec![rectangle(0.0, 0.0, 200.0, 60.0), circle(p(50.0, 30.0), 3.0)];
    let mut case = case();
    case.part = part(paths, Keep::Inside, 0.0);
    let mut hole = excess(27.0, p(50.0, 27.0), 2, stretch(1, 0.0, 18.84));
    hole.whole_path = true;
    case.comparison.excesses = vec![hole];
    case.comparison.never_visited = vec![1];
    case.comparison.gouges = vec![bite(0.3, 50.0)];
    let causes: Vec<Cause> = case.judge().findings.iter().map(|f| f.cause).collect();
    assert_eq!(causes, [Cause::Unknown, Cause::NeverVisited]);
}

#[test]
fn neighbouring_gouges_are_one_at_the_deepest_and_keep_area_and_blocks() {
    let mut case = case();
    let (mut a, mut b) = (bite(0.1, 53.0), bite(0.4, 56.0));
    a.region = Some(Region { area: 1.0, outline: vec![rectangle(0.0, 0.0, 1.0, 1.0)] });
    b.region = Some(Region { area: 2.0, outline: vec![rectangle(2.0, 0.0, 4.0, 1.0)] });
    case.comparison.gouges = vec![b, a, bite(0.2, 150.0)];
    let findings = case.judge().findings;
    assert_eq!(findings.len(), 2, "{findings:#?}");
    let f = &findings[0];
    assert_eq!((f.figure.size, f.at), (0.4, p(56.0, 0.0)));
    assert_eq!(f.contour, Some(stretch(0, 52.0, 57.0)));
    let region = f.region.as_ref().unwrap();
    assert_eq!((region.area, region.outline.len()), (3.0, 2));
    assert_eq!(f.blocks.iter().map(|b| b.line).collect::<Vec<_>>(), [13, 12]);
}

#[test]
fn gouges_on_both_sides_of_a_loops_start_are_one() {
    let mut case = case();
    let mut end = gouge(0.1, p(-5.0, 0.5), p(0.0, 0.5), 3, stretch(0, 518.5, 520.0));
    let mut start = bite(0.3, 1.0);
    start.stretch = stretch(0, 0.0, 2.0);
    // Neither is the entry alone.
    (start.moves, end.moves) = ((0, 1), (0, 3));
    case.comparison.gouges = vec![start, end, bite(0.2, 150.0)];
    let findings = case.judge().findings;
    assert_eq!(findings.len(), 2, "{findings:#?}");
    assert_eq!((findings[0].figure.size, findings[0].contour), (0.3, Some(stretch(0, 518.5, 522.0))));
}

#[test]
fn moves_without_a_known_block_still_make_findings() {
    let mut case = case();
    case.program.blocks = crate::program::Blocks::default();
    case.comparison.gouges = vec![bite(0.3, 50.0)];
    let mut far = bite(0.2, 150.0);
    far.worst_move = 999;
    far.moves = (999, usize::MAX);
    case.comparison.gouges.push(far);
    let judged = case.judge();
    assert_eq!((judged.findings.len(), judged.verdict), (2, Verdict::Fail));
    assert!(judged.findings.iter().all(|f| f.blocks.is_empty()));
}
