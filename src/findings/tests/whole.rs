//! Warnings about the whole: a drawing elsewhere, another unit, a cutter that fits nowhere.

use super::fixture::*;
use crate::findings::Verdict;
use crate::input::Severity;
use crate::part::Keep;

fn block_cut_at(dx: f64, scale: f64) -> Case {
    let block = part(vec![rectangle(0.0, 0.0, 100.0, 60.0)], Keep::Inside, 0.0);
    let (w, h) = (100.0 * scale, 60.0 * scale);
    let mut case = Case::new(block, rectangle(dx - 5.0, -5.0, dx + w + 5.0, h + 5.0).segments(), 5.0);
    let mut all = excess(500.0, p(0.0, 0.0), 0, stretch(0, 0.0, 320.0));
    all.whole_path = true;
    case.comparison.excesses = vec![all];
    case.comparison.never_visited = vec![0];
    case
}

#[test]
fn a_drawing_that_lies_elsewhere_is_told_with_both_boxes_and_the_shift() {
    let judged = block_cut_at(1000.0, 1.0).judge();
    assert_eq!(judged.verdict, Verdict::Fail);
    let [warning] = judged.warnings.as_slice() else { panic!("{:#?}", judged.warnings) };
    assert_eq!((warning.severity, warning.place.file.as_str()), (Severity::Warning, "plate.dxf"));
    holds(&warning.found, &["X0.000 Y0.000 to X100.000 Y60.000", "X995.000 Y-5.000 to X1105.000 Y65.000"]);
    holds(&warning.help, &["--mirror", "--turn", "--shift (moved by X1000.000 Y0.000"]);
}

#[test]
fn a_path_25_times_as_large_is_suspected_of_another_unit() {
    for scale in [25.4, 1.0 / 27.0] {
        let mut case = block_cut_at(0.0, scale);
        if scale < 1.0 {
            case.cutting.moves.iter_mut().for_each(|m| m.radius = 0.1);
            let ring = rectangle(0.0, 0.0, 100.0 * scale, 60.0 * scale);
            for (m, s) in case.cutting.moves.iter_mut().zip(ring.segments()) {
                m.segment = *s;
            }
        }
        let judged = case.judge();
        let [warning] = judged.warnings.as_slice() else { panic!("{:#?}", judged.warnings) };
        holds(&warning.found, &["25.4"]);
        holds(&warning.help, &["--units", "G20 or G21"]);
    }
}

#[test]
fn a_pocket_narrower_than_the_cutter_says_so() {
    let slot = part(vec![rectangle(0.0, 0.0, 100.0, 8.0)], Keep::Outside, 0.0);
    let mut case = Case::new(slot, &lines(&[p(5.0, 4.0), p(95.0, 4.0)]), 5.0);
    case.comparison.gouges = vec![gouge(1.0, p(50.0, 4.0), p(50.0, 0.0), 0, stretch(0, 5.0, 95.0))];
    let judged = case.judge();
    let [warning] = judged.warnings.as_slice() else { panic!("{:#?}", judged.warnings) };
    holds(&warning.found, &["10.000 mm is wider than every opening", "8.000 mm"]);
}

#[test]
fn loops_left_out_on_request_are_counted() {
    let paths = vec![rectangle(0.0, 0.0, 100.0, 60.0), circle(p(50.0, 30.0), 3.0)];
    let mut case =
        Case::new(part(paths, Keep::Inside, 0.0), rectangle(-5.0, -5.0, 105.0, 65.0).segments(), 5.0);
    case.comparison.never_visited = vec![1];
    let judged = case.judge();
    assert_eq!(judged.verdict, Verdict::Pass);
    let [warning] = judged.warnings.as_slice() else { panic!("{:#?}", judged.warnings) };
    holds(&warning.found, &["1 of the drawing's 2 contours is not judged"]);
}

#[test]
fn no_cutting_move_at_all_makes_neither_a_pass_nor_a_panic() {
    let block = part(vec![rectangle(0.0, 0.0, 100.0, 60.0)], Keep::Inside, 0.0);
    let mut case = Case::new(block, &[], 5.0);
    case.comparison.never_visited = vec![0];
    case.comparison.worst_excess = None;
    assert_ne!(case.judge().verdict, Verdict::Pass);
}
