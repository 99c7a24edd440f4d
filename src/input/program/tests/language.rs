//! Modes, order of execution, units, tools, starts: NISTIR 6556, 3.3 to 3.8, and shop practice.

use super::*;
use crate::input::Severity;

#[test]
fn the_reports_own_line_is_read_with_blanks_inside_its_words() {
    // NISTIR 6556, 3.3.
    let program = read("G21 G0 Z1 X0 Y0\ng0x +0. 12 34y 7\nM2").value;
    let end = program.moves[1].motion.end();
    assert!(near(end.x, 0.1234) && near(end.y, 7.0));
    assert!(warned(&read("G21\ng0x +0. 12 34y 7\nM2"), "blank between two digits"));
}

#[test]
fn order_of_words_on_a_line_is_irrelevant() {
    // NISTIR 6556, 3.3.6 and 3.8.
    assert_eq!(ends("G21 G0 X1 Y2\nX5 G91 Y3 G1\nM2"), ends("G21 G0 X1 Y2\nG1 G91 X5 Y3\nM2"));
    assert_eq!(ends("G21 G0 X1 Y2\nG1 G91 X5 Y3\nM2")[1], (6.0, 5.0, 0.0));
}

#[test]
fn units_on_a_motion_line_act_before_its_move() {
    // NISTIR 6556, 3.8, table 8.
    let program = read("G21 G0 X0 Y0\nG1 X1 G20\nG1 X25.4 G21\nM2").value;
    assert_eq!(program.unit, Unit::Millimetre);
    assert!(program.unit_stated);
    assert!(near(program.moves[1].motion.end().x, 25.4) && near(program.moves[2].motion.end().x, 25.4));
    let inch = ProgramOptions { target: Some(Unit::Inch), ..ProgramOptions::default() };
    let program = read_with("G21 G0 X0 Y0\nG1 X50.8\nM2", &inch).value;
    assert_eq!(program.unit, Unit::Inch);
    assert!(near(program.moves[1].motion.end().x, 2.0));
}

#[test]
fn a_program_without_unit_is_read_as_the_user_says_or_in_millimetres_with_a_warning() {
    let reading = read("G0 X0 Y0\nG1 X1\nM2");
    assert!(!reading.value.unit_stated && reading.value.unit == Unit::Millimetre);
    assert!(warned(&reading, "does not say its unit"));
    let inch = ProgramOptions { unit: Some(Unit::Inch), ..ProgramOptions::default() };
    let reading = read_with("G0 X0 Y0\nG1 X1\nM2", &inch);
    assert!(reading.value.unit == Unit::Inch && !warned(&reading, "unit"));
    assert!(read_with("G21 G0 X0 Y0\nM2", &inch).value.unit == Unit::Millimetre);
}

#[test]
fn a_unit_after_the_first_lengths_must_agree_with_them() {
    assert!(read("G0 X0 Y0\nG21\nG1 X1\nM2").value.unit_stated);
    assert!(shown(&refused(b"G0 X0 Y0\nG20\nG1 X1\nM2")).contains("comes after lengths"));
}

#[test]
fn motion_is_modal_and_axis_words_alone_move() {
    let program = read("G21 G90 G0 X0 Y0 Z5\nG1 Z-1 F100\nX10\nY10\nG0 Z5\nM30").value;
    let kinds: Vec<_> = program.moves.iter().map(|m| m.kind).collect();
    use MoveKind::{Feed, Rapid};
    assert_eq!(kinds, [Rapid, Feed, Feed, Feed, Rapid]);
}

#[test]
fn every_move_knows_line_and_text_of_its_block() {
    let program =
        read("%\r\nO100 (TEST)\r\nN10 G21 G0 X0 Y0\r\n(nothing)\r\nN20 G1 X5 (cut)  \r\nM30\r\n%").value;
    let blocks: Vec<_> =
        program.moves.iter().map(|m| program.blocks.get(m.block.0 as usize).unwrap()).collect();
    assert_eq!((blocks[1].line, blocks[1].text), (5, "N20 G1 X5 (cut)  "));
    assert_eq!(program.file, "test.nc");
}

#[test]
fn line_ends_marks_and_old_code_pages_change_nothing() {
    let lf = ends("G21 G0 X0 Y0\nG1 X5\nM2");
    assert_eq!(ends("G21 G0 X0 Y0\rG1 X5\rM2"), lf);
    assert_eq!(ends("\u{feff}G21 G0 X0 Y0\r\nG1 X5\r\nM2\r\n\u{1a}"), lf);
    let latin = read_iso(b"G21 G0 X0 Y0\nG1 X5 (Fr\xE4sen)\nM2", "a", &ProgramOptions::default()).unwrap();
    assert_eq!(latin.value.blocks.get(1).unwrap().text, "G1 X5 (Fräsen)");
}

#[test]
fn block_delete_is_executed_unless_the_switch_is_on() {
    let text = "G21 G0 X0 Y0\n/G1 X5\n/ G1 X6\nG1 X9\nM2";
    let reading = read(text);
    assert_eq!(reading.value.moves.len(), 4);
    assert!(warned(&reading, "executed, as with the switch off (2 times, first here)"));
    let on = ProgramOptions { block_delete: true, ..ProgramOptions::default() };
    assert_eq!(read_with(text, &on).value.moves.len(), 2);
}

#[test]
fn codes_that_do_not_move_the_path_are_silent() {
    let text = "%\nO0001 (part)\nN1 G21 G17 G40 G49 G54 G80 G90 G94 G64 G91.1\nN2 T1 M6\nN3 S8000 M3\n\
                N4 G0 G43 H1 X0 Y0 Z5 M8\nN5 G1 Z-1 F200\nN6 G4 P0.5\nN7 G4 X1.5\nN8 G1 X10 D1\nN9 G0 Z5 M9\nN10 M5\n\
                N11 G61.1\nN12 G93 G1 X11 F2\nN13 G95\nM30\n%";
    let reading = read(text);
    assert!(reading.problems.is_empty(), "{}", shown(&reading.problems));
    assert_eq!(reading.value.moves.len(), 5);
    assert!(reading.value.moves.iter().all(|m| m.tool == 1));
    assert!(reading.value.says_z && reading.value.unit_stated && reading.value.bound < 1e-15);
}

#[test]
fn unknown_functions_are_warned_about_once_with_their_count() {
    let reading = read("G21 G0 X0 Y0\nM123\nG1 X5 M123\nQ3\nM2");
    assert!(warned(&reading, "M123 is a function of the machine's maker: left out (2 times, first here)"));
    assert!(warned(&reading, "no code known here uses the Q word"));
    assert!(reading.problems.iter().all(|p| p.severity == Severity::Warning && !p.help.is_empty()));
}

#[test]
fn tools_change_by_m6_or_where_there_is_none_by_t() {
    let tools = |text: &str| read(text).value.moves.iter().map(|m| m.tool).collect::<Vec<_>>();
    assert_eq!(tools("G21 T1 M6\nG0 X0 Y0\nT2\nG1 X1\nM6\nG1 X2\nM2"), [1, 1, 2]);
    assert_eq!(tools("G21 T1\nG0 X0 Y0\nT2\nG1 X1\nG1 X2\nM2"), [1, 2, 2]);
    assert_eq!(tools("G21 G0 X0 Y0\nG1 X1\nM2"), [0, 0]);
    assert!(warned(&read("G21 M06 S3885\nG0 X0 Y0\nM2"), "no T word says to which"));
}

#[test]
fn a_rapid_from_nowhere_is_kept_as_its_end() {
    let program = read("G21 G0 X10 Y20 Z5\nG1 Z-1\nM2").value;
    let first = program.moves[0].motion;
    assert_eq!((first.start(), first.end()), (Point3 { x: 10.0, y: 20.0, z: 5.0 }, first.start()));
    // X then Y then Z: only from where all three are known is a rapid one that can be judged.
    let reading = read("G21 G0 X10\nY20\nZ5\nX0\nM2");
    assert_eq!(reading.value.moves.len(), 2);
    assert!(warned(&reading, "rapid moves at a height the program does not say are not judged: 1"));
    assert!(near(reading.value.moves[1].motion.start().x, 10.0));
}

#[test]
fn a_feed_from_nowhere_starts_at_zero_with_a_warning() {
    let reading = read("G21 G1 X10 Y20\nM2");
    assert_eq!(reading.value.moves[0].motion.start(), Point3::default());
    assert!(warned(&reading, "taken as X 0, Y 0"));
    assert!(!warned(&reading, "Z 0"), "Z is never named");
    assert!(warned(&read("G21 G0 X0 Y0\nG1 X5\nG1 Z-1\nM2"), "taken as Z 0"));
    assert!(warned(&read("G21 G91 G0 X5 Y5\nM2"), "taken as X 0, Y 0"));
}

#[test]
fn a_program_without_z_keeps_its_rapids() {
    let reading = read("G21 G0 X10 Y20\nG1 X20\nG0 X0 Y0\nM2");
    assert_eq!(reading.value.moves.len(), 3);
    assert!(!reading.value.says_z);
}

#[test]
fn a_return_of_z_is_a_retract_to_an_unknown_height() {
    let text =
        "G21 G90 G0 X0 Y0 Z5\nG1 Z-1\nG91 G28 Z0\nG90 G0 X50 Y0\nG0 Z5\nG1 Z-1\nG53 G0 Z0\nG53 G0 X0 Y0\nM30";
    let reading = read(text);
    assert_eq!(
        reading.value.moves.iter().map(|m| m.motion.end()).map(|p| (p.x, p.y, p.z)).collect::<Vec<_>>(),
        [(0.0, 0.0, 5.0), (0.0, 0.0, -1.0), (50.0, 0.0, 5.0), (50.0, 0.0, -1.0)]
    );
    assert!(warned(&reading, "G28 is taken as a retract") && warned(&reading, "G53 is taken as a retract"));
    // G90 G28 Z2 runs through Z2 first, and that is a rapid of the program.
    let program = read("G21 G0 X0 Y0 Z5\nG28 Z2\nM30").value;
    assert!(near(program.moves[1].motion.end().z, 2.0));
    assert!(!read("G21 G0 X0 Y0\nG1 X5\nG91 G28 Z0\nM30").value.says_z);
}

#[test]
fn returns_of_x_and_y_at_working_height_are_refused() {
    for text in [
        "G21 G0 X0 Y0 Z5\nG53 G0 X0",
        "G21 G0 X0 Y0 Z5\nG53 G0 Z-10",
        "G21 G0 X0 Y0 Z5\nG91 G28 Z0\nG90 G28 X0 Z0",
    ] {
        assert!(shown(&refused(text.as_bytes())).contains("point of the machine"), "{text}");
    }
}

#[test]
fn a_return_of_all_axes_at_the_end_is_taken_with_a_warning_when_the_tool_stands_clear() {
    let cut = "G21 G90 G0 X0 Y0 Z5\nG1 Z-1 F100\nG1 X20\nG0 Z5\n";
    for end in [
        "G28",
        "G91 G28 X0 Y0 Z0",
        "G0 Z-1\nG1 Z2\nG91 G28 Z0 X0. Y0.",
        "G91 G28 Z0\nG28",
        "G91 G28 Z0\nG28 X0 Y0",
        "G28\nG90 G0 X5 Y5\nG0 Z5\nG1 Z-1\nG0 Z5\nG28",
    ] {
        let reading = read(&format!("{cut}{end}\nM30"));
        assert!(warned(&reading, "G28"), "{end}");
        // The course to the fixed point is no move.
        assert!(reading.value.moves.len() <= 9, "{end}");
    }
    assert!(warned(&read(&format!("{cut}G28\nM30")), "sends all axes to a fixed point"));
    // A laser never says Z.
    assert!(warned(&read("G21 G0 X0 Y0\nG1 X5\nG28\nM30"), "sends all axes"));
}

#[test]
fn a_return_of_all_axes_from_cutting_depth_is_refused() {
    for end in ["G28", "G91 G28 X0 Y0 Z0"] {
        for cut in ["G1 X20 Z0\nG1 Z-2", "G1 X20", "G1 Z-3\nG1 X5\nG1 Z-1\nG1 X9 Z-1"] {
            let text = format!("G21 G90 G0 X0 Y0 Z5\nG1 Z-1 F100\n{cut}\n{end}\nM30");
            assert!(shown(&refused(text.as_bytes())).contains("from cutting depth"), "{cut} {end}");
        }
    }
}

#[test]
fn a_cut_or_an_increment_from_the_machines_fixed_point_is_refused_but_a_rapid_leads_back() {
    let before = "G21 G90 G0 X0 Y0 Z5\nG1 Z-1\nG0 Z5\nG91 G28 X0 Y0 Z0\n";
    for next in ["G90 G1 X5 Y5", "G1 X5", "G90 G0 X5\nG1 Y5", "G2 X5 Y5 I5", "G0 X5 Y5"] {
        let text = format!("{before}{next}\nM30");
        assert!(shown(&refused(text.as_bytes())).contains("fixed point of the machine"), "{next}");
    }
    read(&format!("{before}G90 G0 X5 Y5\nG0 Z1\nG1 Z-1\nM30"));
}

#[test]
fn g92_before_the_first_move_names_the_start() {
    let program = read("G21 G92 X0 Y0\nG1 X5\nM2");
    assert!(!warned(&program, "taken as X 0"));
    assert!(shown(&refused(b"G21 G0 X5 Y5\nG92 X0 Y0\nG1 X1\nM2")).contains("shifts the zero"));
}

#[test]
fn what_follows_the_end_is_not_executed_and_a_second_program_is_refused() {
    assert_eq!(read("G21 G0 X0 Y0\nM30\n%\nnotes of the shift\n").value.moves.len(), 1);
    for text in
        ["G21 G0 X0 Y0\nM30\nO2\nG1 X5", "G21 G0 X0 Y0\nM30\nG0 X5", "O1\nG21 G0 X0 Y0\nO2\nG1 X5\nM30"]
    {
        assert!(shown(&refused(text.as_bytes())).contains("second program"), "{text}");
    }
}

#[test]
fn a_program_without_end_is_read_with_a_warning() {
    assert!(warned(&read("G21 G0 X0 Y0\nG1 X5"), "no end"));
    assert!(!warned(&read("%\nG21 G0 X0 Y0\nG1 X5\n%"), "no end"));
}
