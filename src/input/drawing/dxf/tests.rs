use std::f64::consts::PI;

use super::*;
use crate::geometry::{Path, Segment, Turn};
use crate::input::Severity;

const ROCKER: &str = include_str!("../../../../fixtures/drawings/rocker.dxf");
const KEYHOLE: &str = include_str!("../../../../fixtures/drawings/keyhole-plate.dxf");
const SLOT: &str = include_str!("../../../../fixtures/drawings/slot-old-polyline.dxf");
const BELOW: &str = include_str!("../../../../fixtures/drawings/bracket-from-below.dxf");
const SPLINE: &str = include_str!("../../../../fixtures/drawings/spline-cover.dxf");

fn on(layers: &[&str]) -> DrawingOptions {
    DrawingOptions { layers: layers.iter().map(|l| (*l).into()).collect(), ..DrawingOptions::default() }
}

fn read(text: &str) -> Reading<Drawing> {
    read_dxf(text.as_bytes(), "part.dxf", &DrawingOptions::default()).unwrap()
}

/// The refusal of a text, each problem checked for a help that says something.
fn refused(text: &str) -> Vec<Problem> {
    let problems = read_dxf(text.as_bytes(), "part.dxf", &DrawingOptions::default()).unwrap_err();
    assert!(problems.iter().any(|p| p.severity == Severity::Error));
    assert!(problems.iter().all(|p| p.help.len() > 5), "{problems:?}");
    problems
}

/// A drawing of the given entities, written as `KIND code value code value ...` in millimetres.
fn drawing(entities: &[&str]) -> String {
    drawing_in(Some(4), entities)
}

fn drawing_in(unit: Option<i32>, entities: &[&str]) -> String {
    let mut text = String::new();
    if let Some(unit) = unit {
        text += &format!("0\nSECTION\n2\nHEADER\n9\n$INSUNITS\n70\n{unit}\n0\nENDSEC\n");
    }
    text += "0\nSECTION\n2\nENTITIES\n";
    for entity in entities {
        text += &format!("0\n{}\n", entity.replace(' ', "\n"));
    }
    text + "0\nENDSEC\n0\nEOF\n"
}

fn area(path: &Path) -> f64 {
    path.signed_area()
}

#[test]
fn loose_lines_and_arcs_in_any_order_make_the_rocker() {
    let reading = read_dxf(ROCKER.as_bytes(), "rocker.dxf", &on(&["FINISHED", "ream"])).unwrap();
    let drawing = &reading.value;
    let areas: Vec<f64> = drawing.contour.paths().iter().map(|p| area(p).abs()).collect();
    let expected = [1200.0 + 100.0 * PI, 16.0 * PI, 25.0 * PI];
    assert_eq!(areas.len(), 3);
    for (a, e) in areas.iter().zip(expected) {
        assert!((a - e).abs() < 1e-9, "{a} {e}");
    }
    assert!(drawing.contour.paths().iter().all(Path::is_closed));
    assert!(drawing.contour.bound() < 1e-12);
    assert_eq!(drawing.unit, Some(Unit::Millimetre));
    assert_eq!(reading.problems, []);
    let lines: Vec<_> = drawing.origins.iter().map(|o| (o.layer.as_deref(), o.line)).collect();
    let line_of = |nth: usize| {
        let mut starts = ROCKER.lines().enumerate().filter(|(_, l)| matches!(*l, "LINE" | "ARC" | "CIRCLE"));
        starts.nth(nth).map(|(i, _)| i + 1)
    };
    assert_eq!(
        lines,
        [(Some("FINISHED"), line_of(0)), (Some("FINISHED"), line_of(4)), (Some("REAM"), line_of(5))]
    );
    let layers: Vec<_> = drawing.layers.iter().map(|l| (l.name.as_str(), l.entities, l.taken)).collect();
    assert_eq!(
        layers,
        [
            ("0", 0, false),
            ("FINISHED", 5, true),
            ("REAM", 1, true),
            ("NOTES", 2, false),
            ("CENTER", 1, false)
        ]
    );
}

#[test]
fn text_and_points_are_left_out_and_told_once() {
    let reading = read_dxf(ROCKER.as_bytes(), "rocker.dxf", &on(&["FINISHED", "NOTES"])).unwrap();
    let [told] = reading.problems.as_slice() else { panic!("{:?}", reading.problems) };
    assert_eq!(told.severity, Severity::Warning);
    assert_eq!(told.found, "left out, as they are no contour: POINT (1), TEXT (1)");
    assert_eq!(told.place.excerpt.as_deref(), Some("TEXT"));
}

#[test]
fn a_layer_that_does_not_exist_names_the_nearest_and_all() {
    let problems = read_dxf(ROCKER.as_bytes(), "rocker.dxf", &on(&["FINISHD"])).unwrap_err();
    assert!(problems[0].found.contains("FINISHD"));
    assert!(problems[0].help.contains("did you mean \"FINISHED\"?"), "{}", problems[0].help);
    assert!(problems[0].help.contains("REAM, NOTES, CENTER"));
    let empty = read_dxf(ROCKER.as_bytes(), "rocker.dxf", &on(&["NOTES"])).unwrap_err();
    assert!(empty[0].help.contains("FINISHED (5 entities)"), "{}", empty[0].help);
}

/// Bulges against included angle, radius and sagitta (DXF Reference, LWPOLYLINE: bulge is the tangent
/// of a quarter of the included angle; values computed from tan(angle/4), 1/(2 sin(angle/2)) and
/// (1 - cos(angle/2)) / (2 sin(angle/2))).
#[test]
fn bulges_of_any_size_and_sign_give_angle_radius_and_sagitta() {
    let diagonal = std::f64::consts::FRAC_1_SQRT_2;
    let table = [
        (30.0, 0.131652497587, 1.93185165258, 0.0658262487937),
        (45.0, 0.19891236738, 1.30656296488, 0.0994561836898),
        (90.0, 0.414213562373, diagonal, 0.207106781187),
        (180.0, 1.0, 0.5, 0.5),
        (270.0, 2.41421356237, diagonal, 1.20710678119),
    ];
    for (angle, bulge, radius, sagitta) in table {
        for sign in [1.0, -1.0] {
            let text = drawing(&[&format!("LWPOLYLINE 90 2 70 0 10 0 20 0 42 {} 10 8 20 6", sign * bulge)]);
            let reading = read(&text);
            let [Segment::Arc(arc)] = reading.value.contour.paths()[0].segments() else { panic!() };
            assert!((arc.sweep().to_degrees() - sign * angle).abs() < 1e-9);
            assert!((arc.radius() - 10.0 * radius).abs() < 1e-9);
            // The middle of an arc lies to the right of its chord when it runs counter-clockwise.
            let chord = crate::geometry::Vec2::new(0.8, 0.6);
            let off = chord.cross(arc.point_at(0.5) - arc.start());
            assert!((off + sign * 10.0 * sagitta).abs() < 1e-9, "{angle} {sign}: {off}");
        }
    }
}

#[test]
fn keyhole_of_three_quarters_of_a_turn_adds_its_round_head() {
    let reading = read(KEYHOLE);
    // Chord 10 travelled in -x with the arc to its right, above the plate.
    let r: f64 = 10.0 / 2.0_f64.sqrt();
    let head = 0.5 * r * r * (1.5 * PI + 1.0);
    assert!((area(&reading.value.contour.paths()[0]) - (1500.0 + head)).abs() < 1e-9);
    assert!(reading.value.contour.bound() <= 0.0);
}

#[test]
fn an_old_polyline_in_inches_makes_the_slot() {
    let reading = read(SLOT);
    assert_eq!(reading.value.unit, Some(Unit::Inch));
    assert!((area(&reading.value.contour.paths()[0]) - (480.0 + 36.0 * PI)).abs() < 1e-9);
}

/// Seen from below (extrusion 0, 0, -1) x is mirrored and arcs change their sense (DXF Reference,
/// "Object Coordinate System", arbitrary axis algorithm); LINE is in world coordinates.
#[test]
fn entities_seen_from_below_are_mirrored_with_their_arcs() {
    let reading = read(BELOW);
    let paths = reading.value.contour.paths();
    assert_eq!(paths.len(), 2);
    // The bulge 1 at (30, 0) swells outwards, away from x = -30.
    assert!((area(&paths[0]) + 600.0 + 50.0 * PI).abs() < 1e-9, "{}", area(&paths[0]));
    assert!((paths[0].bounds().x0 + 40.0).abs() < 1e-9 && paths[0].bounds().x1 == 0.0);
    let Segment::Arc(arc) = paths[1].segments()[0] else { panic!() };
    assert_eq!((arc.center().x, arc.center().y, arc.turn()), (-60.0, 10.0, Turn::Right));
    assert!((arc.start().x + 65.0).abs() < 1e-9 && (arc.point_at(0.5).y - 15.0).abs() < 1e-9);
    assert!(paths[1].is_closed());
}

#[test]
fn units_other_than_mm_and_inch_are_converted_and_told() {
    for (code, mm) in [(5, 10.0), (6, 1000.0), (2, 304.8), (10, 914.4), (13, 1e-3), (9, 0.0254), (14, 100.0)]
    {
        let reading = read(&drawing_in(Some(code), &["CIRCLE 10 3 20 4 40 2"]));
        assert_eq!(reading.value.unit, Some(Unit::Millimetre));
        let b = reading.value.contour.bounds();
        assert!((b.x1 - 5.0 * mm).abs() < 1e-9 * mm && (b.y0 - 2.0 * mm).abs() < 1e-9 * mm, "{code}");
        assert!(reading.problems[0].found.contains("converted to mm"));
    }
    for code in [0, 4, 1] {
        let reading = read(&drawing_in(Some(code), &["CIRCLE 10 3 20 4 40 2"]));
        assert_eq!(reading.problems, []);
        assert_eq!(
            reading.value.unit.map(Unit::sign),
            [None, Some("in"), Some("mm")][[0, 1, 4].iter().position(|c| *c == code).unwrap()]
        );
    }
    let silent = drawing_in(None, &["CIRCLE 10 3 20 4 40 2"]);
    assert_eq!(read(&silent).value.unit, None);
    let options = DrawingOptions { unit: Some(Unit::Inch), ..DrawingOptions::default() };
    assert_eq!(read_dxf(silent.as_bytes(), "x", &options).unwrap().value.unit, Some(Unit::Inch));
    let declared = drawing(&["CIRCLE 10 3 20 4 40 2"]);
    let reading = read_dxf(declared.as_bytes(), "x", &options).unwrap();
    assert_eq!(reading.value.unit, Some(Unit::Millimetre));
    assert!(reading.problems[0].found.contains("in millimetres, not in inches"));
    assert!(refused(&drawing_in(Some(19), &["CIRCLE 10 3 20 4 40 2"]))[0].found.contains("$INSUNITS 19"));
}

#[test]
fn entities_that_could_be_contour_are_refused_by_name() {
    let problems = refused(SPLINE);
    assert!(problems[0].found.starts_with("SPLINE (handle "), "{}", problems[0].found);
    assert!(problems[0].help.contains("polyline with arcs"));
    assert!(problems[0].place.line.is_some());
    let insert = refused(&drawing(&["INSERT 5 A7 8 CUT 2 HOLE 10 0 20 0"]));
    assert_eq!(
        insert[0].found,
        "INSERT (handle A7, layer CUT) could be contour but is neither line, arc nor polyline"
    );
    assert!(insert[0].help.contains("explode the block"));
    let smoothed = "POLYLINE 66 1 70 4 0 VERTEX 10 0 20 0 0 VERTEX 10 1 20 0 0 SEQEND";
    assert!(refused(&drawing(&[smoothed]))[0].found.contains("smoothed"));
    let mesh = "POLYLINE 66 1 70 64 0 VERTEX 10 0 20 0 0 VERTEX 10 1 20 0 0 SEQEND";
    assert!(refused(&drawing(&[mesh]))[0].found.contains("mesh"));
}

#[test]
fn entities_that_are_not_flat_are_refused_or_told() {
    let tilted = refused(&drawing(&["CIRCLE 10 0 20 0 40 2 210 0.6 220 0 230 0.8"]));
    assert!(tilted[0].found.contains("tilted"), "{}", tilted[0].found);
    let slanted = refused(&drawing(&["LINE 10 0 20 0 30 0 11 1 21 0 31 5"]));
    assert!(slanted[0].found.contains("climbs"));
    let stepped = read(&drawing(&["CIRCLE 10 0 20 0 30 0 40 2", "CIRCLE 10 0 20 0 30 -3 40 1"]));
    assert!(stepped.problems[0].found.contains("z -3 to z 0"));
    let zero = refused(&drawing(&["CIRCLE 10 0 20 0 40 2 210 0 220 0 230 0"]));
    assert!(zero[0].found.contains("tilted"));
}

#[test]
fn paper_sheets_and_invisible_entities_are_left_out() {
    let reading = read(&drawing(&["CIRCLE 10 0 20 0 40 2", "LINE 67 1 10 0 20 0 11 9 21 0", "SPLINE 60 1"]));
    assert_eq!(reading.value.contour.paths().len(), 1);
    assert_eq!(
        reading.problems[0].found,
        "left out, as they are no contour: entities on paper sheets (1), invisible entities (1)"
    );
}

#[test]
fn what_is_no_drawing_is_refused_with_its_line() {
    assert!(refused("")[0].found.contains("empty"));
    assert!(refused(" \r\n\n")[0].found.contains("empty"));
    assert!(refused("0\nSECTION\0")[0].found.contains("binary"));
    let prose = refused("Dear shop,\nplease mill this\n");
    assert_eq!(prose[0].place.line, Some(1));
    assert!(prose[0].found.contains("no group code"));
    assert!(refused("0\nSECTION\n2\nHEADER\n0\nENDSEC\n0\nEOF\n")[0].found.contains("ENTITIES"));
    assert!(refused(&drawing(&[]))[0].help.contains("empty"));
    for bad in ["NaN", "inf", "-infinity", "1e999", "1e10", "ten", "", "0x10"] {
        let problems = refused(&drawing(&[&format!("LINE 10 0 20 0 11 {bad} 21 0")]));
        assert_eq!(problems[0].place.line, Some(22), "{bad:?}: {problems:?}");
        assert!(problems[0].found.ends_with("in LINE (layer 0)"));
    }
    assert!(refused(&drawing(&["LINE 10 0 20 0 11 1"]))[0].found.contains("group code 21 is missing"));
    assert!(refused(&drawing(&["CIRCLE 10 0 20 0 40 0"]))[0].found.contains("radius is 0"));
    assert!(refused(&drawing(&["CIRCLE 10 0 20 0 40 -2"]))[0].found.contains("radius is -2"));
    let count = refused(&drawing(&["LWPOLYLINE 90 3 70 0 10 0 20 0 10 8 20 6"]));
    assert!(count[0].found.contains("wrong number of vertices"));
    for (bad, found) in [
        ("LWPOLYLINE 70 0 20 0 10 0 20 0", "a y without its x"),
        ("LWPOLYLINE 70 0 10 0 10 1 20 0 20 0", "group code 20 is missing"),
        ("LWPOLYLINE 70 0 10 0 20 1 10 4", "group code 20 is missing"),
        ("LWPOLYLINE 70 0 42 1 10 0 20 1 10 4 20 5", "a bulge before the first vertex"),
        ("LWPOLYLINE 70 0 10 4 20 5", "fewer than two vertices"),
        ("LWPOLYLINE 70 0 10 0 20 0 42 1e9 10 1e5 20 0", "reaches farther"),
        ("POLYLINE 66 1 70 0 0 VERTEX 10 1 0 VERTEX 10 5 20 5 0 SEQEND", "group code 20 is missing"),
        ("LINE 10 0 10 4 20 5 11 9 21 9", "group code 10 twice"),
    ] {
        let problems = refused(&drawing(&[bad]));
        assert!(problems[0].found.contains(found), "{bad}: {}", problems[0].found);
    }
}

#[test]
fn a_file_cut_short_anywhere_is_refused() {
    let lines: Vec<&str> = ROCKER.lines().collect();
    // Without the very last line the end mark is missing, with it the file is whole.
    for count in 1..lines.len() {
        let text = lines[..count].join("\n");
        assert!(read_dxf(text.as_bytes(), "cut.dxf", &on(&["FINISHED"])).is_err(), "{count} lines");
    }
}

#[test]
fn old_code_pages_and_escapes_name_the_same_layer() {
    let mut latin = drawing(&["CIRCLE 8 K\u{e9}y 10 0 20 0 40 2"]).replace('\u{e9}', "?").into_bytes();
    for b in &mut latin {
        if *b == b'?' {
            *b = 0xe9;
        }
    }
    let escaped = drawing(&["CIRCLE 8 K\\U+00E9y 10 0 20 0 40 2"]);
    let modern = drawing(&["CIRCLE 8 K\u{e9}y 10 0 20 0 40 2"]);
    for bytes in [latin, escaped.into_bytes(), modern.into_bytes()] {
        let reading = read_dxf(&bytes, "x", &on(&["K\u{c9}Y"])).unwrap();
        assert_eq!(reading.value.layers[0].name, "K\u{e9}y");
    }
}

#[test]
fn windows_line_ends_and_comments_change_nothing_but_lines() {
    let plain = read(KEYHOLE);
    let windows = read(&KEYHOLE.replace('\n', "\r\n"));
    assert_eq!(plain, windows);
    let noted = read(&format!("999\nkeyhole plate, issue B\n{KEYHOLE}"));
    assert_eq!(plain.value.contour, noted.value.contour);
    assert_eq!(plain.value.origins[0].line.map(|l| l + 2), noted.value.origins[0].line);
}

/// A closed polyline whose first vertex is written twice, the first time with a bulge: once a cause of
/// open results in general libraries (cavalier_contours issue 32).
#[test]
fn a_repeated_vertex_is_dropped_whatever_its_bulge() {
    let square = "LWPOLYLINE 90 5 70 1 10 0 20 0 42 -0.0017 10 0 20 0 10 9 20 0 10 9 20 9 10 0 20 9";
    let reading = read(&drawing(&[square]));
    let path = &reading.value.contour.paths()[0];
    assert!(path.is_closed() && path.segments().len() == 4);
    assert!((area(path) - 81.0).abs() < 1e-12);
    assert!(reading.problems[0].found.contains("without length"));
}

#[test]
fn bulges_flatter_than_the_digits_of_their_radius_become_lines_within_a_bound() {
    for bulge in ["1e-300", "1e-15", "-1e-9", "2e-8", "1e-7", "-1e-5"] {
        let reading = read(&drawing(&[&format!("LWPOLYLINE 90 2 70 0 10 0 20 0 42 {bulge} 10 1000 20 0")]));
        let contour = &reading.value.contour;
        let sagitta = 500.0 * bulge.parse::<f64>().unwrap().abs();
        let middle = contour.paths()[0].segments()[0].point_at(0.5);
        assert!((middle.y.abs() - sagitta).abs() <= contour.bound() + 1e-12, "{bulge}: {middle:?}");
        assert!(contour.bound() < 2e-5, "{bulge}: {}", contour.bound());
    }
}
