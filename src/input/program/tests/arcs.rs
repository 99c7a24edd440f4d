//! Arcs and helices: NISTIR 6556, 3.5.3, and the path of its table 13.

use std::f64::consts::{PI, TAU};

use super::*;
use crate::geometry::{Arc, Turn};
use crate::program::Plane;

fn last_arc(text: &str) -> Arc {
    match read(text).value.moves.last().unwrap().motion {
        Motion::Circular { arc, .. } => arc,
        Motion::Straight { .. } => panic!("{text}: no arc"),
    }
}

fn refusal(text: &str) -> String {
    refused(text.as_bytes()).first().unwrap().to_string()
}

#[test]
fn centers_are_increments_from_the_start_and_z_makes_a_helix() {
    // NISTIR 6556, 3.5.3.2: center (10, 11), radius 5.
    let program = read("G21 G0 X7 Y7 Z0\nG17 G2 x10 y16 i3 j4 z9\nM2").value;
    let Motion::Circular { plane, arc, along } = program.moves[1].motion else { panic!("no arc") };
    assert_eq!((plane, along, arc.turn()), (Plane::Xy, (0.0, 9.0), Turn::Right));
    assert!(near(arc.center().x, 10.0) && near(arc.center().y, 11.0) && near(arc.radius(), 5.0));
    assert!(program.bound < 1e-12);
}

#[test]
fn ends_off_the_circle_pass_below_two_micrometres_and_fail_above() {
    // NISTIR 6556, 3.5.3.2: 0.002 mm, 0.0002 in.
    let inside = read("G21 G0 X0 Y0\nG2 X20.0019 I10\nM2").value;
    assert!((inside.bound - 0.00095).abs() < 1e-9, "half the difference: {}", inside.bound);
    let text = refusal("G21 G0 X0 Y0\nG2 X20.0021 I10\nM2");
    for part in [
        "0.0021 mm off",
        "radius 10 mm",
        "10.0021 mm",
        "at most 0.002 mm",
        "--arc-tolerance 0.0021",
        "line 2",
    ] {
        assert!(text.contains(part), "{part}: {text}");
    }
    assert!(read("G20 G0 X0 Y0\nG2 X2.00019 I1\nM2").value.bound > 0.0);
    assert!(refusal("G20 G0 X0 Y0\nG2 X2.00021 I1\nM2").contains("0.00021 in off"));
}

#[test]
fn the_limit_of_an_inch_program_holds_when_it_is_given_back_in_millimetres() {
    let options = ProgramOptions { target: Some(Unit::Millimetre), ..ProgramOptions::default() };
    let program = read_with("G20 G0 X0 Y0\nG2 X2.00019 I1\nM2", &options).value;
    assert_eq!(program.unit, Unit::Millimetre);
    assert!(near(program.moves[1].motion.end().x, 2.00019 * 25.4));
    let bad = read_iso(b"G20 G0 X0 Y0\nG2 X2.00021 I1\nM2", "a", &options).unwrap_err();
    assert!(shown(&bad).contains("0.00021 in off"), "{}", shown(&bad));
}

#[test]
fn a_wider_arc_tolerance_lets_an_arc_pass_and_says_so() {
    let options = ProgramOptions { arc_tolerance: Some(0.01), ..ProgramOptions::default() };
    let reading = read_with("G21 G0 X0 Y0\nG2 X20.0021 I10\nM2", &options);
    assert!(warned(&reading, "0.0021 mm: accepted by --arc-tolerance"));
    assert!((reading.value.bound - 0.00105).abs() < 1e-9);
    let narrow = ProgramOptions { arc_tolerance: Some(0.001), ..ProgramOptions::default() };
    assert!(read_iso(b"G21 G0 X0 Y0\nG2 X20.0019 I10\nM2", "a", &narrow).is_err());
    for wrong in [f64::NAN, -1.0, f64::INFINITY] {
        let options = ProgramOptions { arc_tolerance: Some(wrong), ..ProgramOptions::default() };
        assert!(shown(&read_iso(b"G0 X0 Y0", "a", &options).unwrap_err()).contains("no arc tolerance"));
    }
}

#[test]
fn absolute_centers_are_read_under_g90_1_and_suggested_where_they_fit() {
    let arc = last_arc("G21 G90.1 G0 X7 Y7\nG2 X10 Y16 I10 J11\nM2");
    assert!(near(arc.radius(), 5.0) && near(arc.center().x, 10.0));
    assert!(refusal("G21 G0 X7 Y7\nG2 X10 Y16 I10 J11\nM2").contains("G90.1"));
    assert!(refusal("G21 G90.1 G0 X7 Y7\nG2 X10 Y16 I3 J4\nM2").contains("G91.1"));
    assert!(refusal("G21 G90.1 G0 X7 Y7\nG2 X10 Y16 I10\nM2").contains("half a center"));
}

#[test]
fn a_missing_end_word_is_unchanged_and_a_missing_center_word_is_zero() {
    let arc = last_arc("G21 G0 X46.275 Y35.575\nG03 X36.275 I-5.\nM2");
    assert!(near(arc.center().y, 35.575) && near(arc.end().y, 35.575) && near(arc.sweep(), PI));
}

#[test]
fn an_end_equal_to_the_start_is_a_full_circle() {
    let arc = last_arc("G20 G0 X1 Y2\nG02 I0 J-.500\nM2");
    assert!(near(arc.sweep(), -TAU) && near(arc.length(), PI));
    let same = last_arc("G21 G91 G0 X0.1 Y0\nG0 X0.2\nG90 G3 X0.3 I5\nM2");
    assert!(near(same.sweep(), TAU), "0.1 + 0.2 is 0.3 for a control: {}", same.sweep());
    let helix = read("G21 G0 X0 Y0 Z0\nG3 I5 Z-2\nM2").value;
    let Motion::Circular { arc, along, .. } = helix.moves[1].motion else { panic!("no helix") };
    assert!(near(arc.sweep(), TAU) && near(along.1, -2.0));
}

#[test]
fn radius_format_takes_the_short_way_for_plus_and_the_long_way_for_minus() {
    // NISTIR 6556, 3.5.3.1; its example `G17 G2 x10 y15 r20 z5`.
    let short = last_arc("G21 G0 X0 Y0 Z0\nG17 G2 x10 y15 r20 z5\nM2");
    assert!(near(short.radius(), 20.0) && short.sweep() < 0.0 && short.sweep() > -PI);
    let long = last_arc("G21 G0 X0 Y0 Z0\nG17 G2 x10 y15 r-20 z5\nM2");
    assert!(near(short.sweep() + long.sweep(), -TAU));
    // Appendix C.1, the arc of its letter r: from (64, 4) to (69, 4) with R4, 2 asin(2.5 / 4) of turn; with
    // the letter's stem of 6 the length is 11.4010522635.
    let o = last_arc("G21 G0 X64 Y4\nG3 X69 R4\nM2");
    assert!(near(o.sweep().abs(), 2.0 * 0.625_f64.asin()));
    assert!((o.length() + 6.0 - 11.401_052_263_5).abs() < 1e-10);
    let center_height = (16.0_f64 - 6.25).sqrt();
    assert!(near(o.center().x, 66.5) && near((o.center().y - 4.0).abs(), center_height));
}

#[test]
fn radii_that_make_no_arc_are_refused_with_the_reason() {
    assert!(
        refusal("G21 G0 X0 Y0\nG2 X10 R4.9\nM2").contains("10 mm apart, more than twice its radius (9.8 mm)")
    );
    assert!(refusal("G21 G0 X0 Y0\nG2 X0 Y0 R4\nM2").contains("ends where it starts"));
    assert!(refusal("G21 G0 X0 Y0\nG2 X5 R0\nM2").contains("without a radius"));
    assert!(refusal("G21 G0 X0 Y0\nG2 X5 R4 I2\nM2").contains("both R and I and J"));
    assert!(refusal("G21 G0 X0 Y0\nG2 X5\nM2").contains("neither center nor radius"));
    assert!(refusal("G21 G0 X0 Y0\nG2 X5 I0 J0\nM2").contains("without a radius"));
    assert!(refusal("G21 G0 X0 Y0\nG2 X5 I2.5 P3\nM2").contains("turns"));
    assert!(refusal("G21 G0 X0 Y0\nG18 G2 X5 J2.5\nM2").contains("of this plane"));
    assert!(refusal("G21 G0 X0 Y0\nG1 X5 I2.5\nM2").contains("no arc"));
}

#[test]
fn g18_and_g19_turn_as_seen_from_the_tip_of_their_normal() {
    // NISTIR 6556, 3.5.3: seen from the positive end of Y, with Z to the right of X: G3 runs from +Z to +X.
    let program = read("G21 G0 X0 Y3 Z5\nG18 G3 X5 Z0 K-5\nM2").value;
    let Motion::Circular { plane, arc, along } = program.moves[1].motion else { panic!("no arc") };
    assert_eq!((plane, along), (Plane::Zx, (3.0, 3.0)));
    assert!(near(arc.sweep(), 0.5 * PI), "{}", arc.sweep());
    let middle = plane.point(arc.point_at(0.5), along.0);
    assert!(near(middle.x, 12.5_f64.sqrt()) && near(middle.z, 12.5_f64.sqrt()) && near(middle.y, 3.0));
    let program = read("G21 G0 X3 Y5 Z0\nG19 G3 Y0 Z5 J-5\nM2").value;
    let Motion::Circular { plane, arc, .. } = program.moves[1].motion else { panic!("no arc") };
    assert_eq!(plane, Plane::Yz);
    assert!(near(arc.sweep(), 0.5 * PI) && near(program.moves[1].motion.end().z, 5.0));
}

#[test]
fn the_path_of_table_13_has_its_length_and_area() {
    // NISTIR 6556, appendix B, table 13: a 3-4-5 triangle grown by 1.5. Length 12 + 3 pi, area 24 + 2.25 pi.
    let text = "G21 G90 G17 G0 X2 Y3.5 Z5\nG1 Z-1 F100\nG2 X3.5 Y2 J-1.5\nG1 Y-1\nG2 X2 Y-2.5 I-1.5\nG1 X-2\n\
                G2 X-2.9 Y0.2 J1.5\nG1 X1.1 Y3.2\nG2 X2 Y3.5 I0.9 J-1.2\nM2";
    let program = read(text).value;
    let contour = feeds(&program);
    let total: f64 = contour.iter().map(|m| length(&m.motion)).sum();
    assert!(near(total, 12.0 + 3.0 * PI), "{total}");
    assert!(near(area(&contour), -(24.0 + 2.25 * PI)), "{}", area(&contour));
    assert!(program.bound < 1e-12);
}

#[test]
fn an_arc_after_a_bad_block_is_not_blamed_for_it() {
    let problems = refused(b"G21 G0 X0 Y0\nG1 X1O Y0\nG2 X20 I5\nG1 X0 Y0\nG2 X20.1 I10\nM2");
    let lines: Vec<_> = problems.iter().filter(|p| p.severity == crate::input::Severity::Error).collect();
    assert_eq!(
        lines.iter().map(|p| p.place.line).collect::<Vec<_>>(),
        [Some(2), Some(5)],
        "{}",
        shown(&problems)
    );
}
