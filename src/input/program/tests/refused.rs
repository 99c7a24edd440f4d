//! What is refused, and in which words.

use super::*;

/// The block stands in line 2; its refusal holds `part`, is placed there and has a cure.
fn bad(block: &str, part: &str) {
    let text = format!("G21 G90 G0 X0 Y0 Z5\n{block}\nM30\n");
    let problems = refused(text.as_bytes());
    let first = problems.first().unwrap();
    assert_eq!((first.place.line, first.place.file.as_str()), (Some(2), "test.nc"), "{block}");
    assert!(first.to_string().contains(part), "{block}: {first}");
    assert_eq!(first.place.excerpt.as_deref(), Some(block));
    assert!(first.place.column.is_some_and(|c| c >= 1 && c <= block.chars().count()), "{block}: {first}");
}

#[test]
fn codes_that_could_change_the_cut_are_refused() {
    for (block, part) in [
        ("G41 D1 G1 X5", "G41 is cutter radius compensation"),
        ("G1 X5 G42", "compensation"),
        ("G81 X1 Y1 Z-3 R2", "canned cycle"),
        ("G73 Z-3 Q1", "canned cycle"),
        ("G68 X0 Y0 R45", "turned"),
        ("G51 X0 Y0 P2", "scaled"),
        ("G16", "polar"),
        ("G52 X5", "shifts the zero"),
        ("G92 X0", "shifts the zero"),
        ("G10 L2 P1 X5", "change of zero"),
        ("G50 X5", "with axis words"),
        ("G65 P9000", "macro call"),
        ("M98 P1000", "subprogram"),
        ("M97 P5 L3", "subprogram"),
        ("G5.1 Q1", "no line and no arc"),
        ("G31 Z-5", "probing"),
        ("G33 Z-5", "thread"),
        ("G70", "G20 for inch"),
        ("G187 P3", "G187 is not known"),
        ("G1 A90", "rotary axis A turns"),
        ("G1 U5", "U word"),
        ("G1 X5 R2", "no arc"),
        ("G1 X5 ,C2", "comma"),
        ("G4 P1 X5", "dwell and axis words"),
        ("T1.5 M6", "tool number"),
        ("T-1", "tool number"),
    ] {
        bad(block, part);
    }
}

#[test]
fn two_codes_of_one_modal_group_are_refused() {
    for block in ["G0 G1 X5", "G90 G91", "G17 G18", "G20 G21", "G54 G55", "M3 M5", "M0 M30", "G28 G92 Z0"] {
        bad(block, "in one block");
    }
}

#[test]
fn damaged_text_is_refused_where_it_breaks() {
    for (block, part) in [
        ("G1 Z-.-2", "second sign or point"),
        ("G1 Z,15", "decimal point"),
        ("G1 XO", "letter O"),
        ("G1 X1e999", "exponent"),
        ("G1 X9999999999", "too large"),
        ("G91 G1 X1000000000 Y1000000001", "too large"),
        ("BRACKET LEFT", "put it in parentheses"),
        ("G1 X5 X6", "second X"),
        ("(open", "never closed"),
        ("#101 = 5", "variable"),
        ("G1 X[5+1]", "expression"),
        ("IF [#1 EQ 0] GOTO 10", "program logic"),
        ("G1 X5 ä", "character"),
    ] {
        bad(block, part);
    }
    let huge = format!("G1 X{}", "9".repeat(400));
    bad(&huge, "too large");
}

#[test]
fn a_second_work_offset_is_refused() {
    let text = |a: &str, b: &str| format!("G21 {a}\nG0 X0 Y0 Z5\n{b}\nG1 X5\nM30");
    assert_eq!(read(&text("G54", "G54")).value.moves.len(), 2);
    assert_eq!(read(&text("G55", "G55")).value.moves.len(), 2);
    for (a, b) in [("G54", "G55"), ("", "G55"), ("G54.1 P1", "G54.1 P2")] {
        assert!(shown(&refused(text(a, b).as_bytes())).contains("two zeros lie"), "{a} {b}");
    }
}

#[test]
fn axis_words_without_a_motion_code_are_refused() {
    assert!(shown(&refused(b"G21\nX5 Y5\nM2")).contains("no code says how to move"));
    assert!(shown(&refused(b"G21 G0 X5 Y5\nG80\nX6\nM2")).contains("no code says how to move"));
    assert_eq!(ends("G21 G80 G0 X5 Y5\nM2").len(), 1);
}

#[test]
fn files_that_are_no_program_are_refused_in_one_sentence() {
    for (text, part) in [
        (&b""[..], "empty"),
        (b"\r\n \r\n", "empty"),
        (b"\x7fELF\0\0\0", "no text"),
        (b"\xFF\xFEG\x000\x00", "16-bit"),
        (b"(only a comment)\nM30", "no move"),
        (b"%", "no move"),
        (b"G21 G0 Z5\nM30", "no move"),
    ] {
        let problems = refused(text);
        assert!(problems[0].found.contains(part), "{part}: {}", shown(&problems));
        assert!(problems[0].place.line.is_none());
    }
}

#[test]
fn several_errors_are_shown_and_reading_stops_at_twenty() {
    let text = format!("G21 G0 X0 Y0\n{}M30", "G1 X,5\nG1 X5\n".repeat(30));
    let problems = refused(text.as_bytes());
    assert_eq!(problems.len(), 21);
    assert!(problems[20].found.contains("too many errors"));
    assert_eq!(problems[19].place.line, Some(40));
}

#[test]
fn a_program_whose_only_moves_are_at_unknown_heights_is_refused() {
    let problems = refused(b"G21 G0 Z5\nG91 G28 Z0\nG90 G0 X5 Y5\nM30");
    assert!(problems[0].found.contains("no move"), "{}", shown(&problems));
}
