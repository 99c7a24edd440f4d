//! Arcs of programs, and a published pair of contour and compensated path, read as G-code.

use std::f64::consts::PI;
use std::fmt::Write as _;

use crate::build::*;
use crate::sheet::Sheet;
use sweptedge::cutter::Cutter;
use sweptedge::geometry::{Arc, Segment};
use sweptedge::input::drawing::{DrawingOptions, read_csv};
use sweptedge::input::program::{ProgramOptions, read_iso};
use sweptedge::part::{Keep, Origin, Part};
use sweptedge::program::{Motion, Program, Unit};
use sweptedge::view::plan;

const NIST: &str = "T. R. Kramer, F. M. Proctor, E. Messina, NISTIR 6556, 17 August 2000";

const ARCS: Sheet = Sheet::new(
    "Arcs of programs",
    "T. R. Kramer, F. M. Proctor, E. Messina, NISTIR 6556, National Institute of Standards and Technology, 2000, 3.5.3.1 (radius \
     format), 3.5.3.2 (centre format, 0.002 mm or 0.0002 inch); distance of the centre from the chord derived.",
);

fn read(text: &str) -> Option<Program> {
    read_iso(text.as_bytes(), "test.nc", &ProgramOptions::default()).ok().map(|r| r.value)
}

/// The last move's arc of a program that ends with one.
fn last_arc(text: &str) -> Arc {
    match read(text).unwrap().moves.last().unwrap().motion {
        Motion::Circular { arc, .. } => arc,
        Motion::Straight { .. } => panic!("a straight move"),
    }
}

fn verdict(text: &str) -> &'static str {
    if read(text).is_some() { "read" } else { "refused" }
}

#[test]
fn center_format_arc_may_end_off_its_circle_by_0_002_mm_or_0_0002_inch() {
    let cases = [
        ("G21", "20.0019", "read"),
        ("G21", "20.0021", "refused"),
        ("G21", "19.9981", "read"),
        ("G21", "19.9979", "refused"),
        ("G20", "20.00019", "read"),
        ("G20", "20.00021", "refused"),
    ];
    for (unit, end, expected) in cases {
        let text = format!("{unit} G90 G17\nG0 X0 Y0 Z0\nG2 X{end} Y0 I10 J0 F100\nM2\n");
        ARCS.says(format!("{unit}, (0, 0) about (10, 0) to ({end}, 0)"), expected, verdict(&text));
    }
}

#[test]
fn center_format_example_has_its_center_at_10_11_and_radius_5() {
    let text = "G21 G90\nG0 X7 Y7 Z5\nG17 G2 x10 y16 i3 j4 z9 F100\nM2\n";
    let arc = last_arc(text);
    ARCS.within(
        "(7, 7) G2 x10 y16 i3 j4: centre from (10, 11)",
        (arc.center() - p(10.0, 11.0)).hypot(),
        1e-12,
    );
    ARCS.holds("(7, 7) G2 x10 y16 i3 j4: radius", 5.0, arc.radius(), 1e-12);
    let z = read(text).unwrap().moves.last().unwrap().motion.end().z;
    ARCS.holds("(7, 7) G2 x10 y16 i3 j4 z9: height at the end", 9.0, z, 1e-12);
    let full = last_arc("G21 G90 G17\nG0 X7 Y7 Z5\nG3 X7 Y7 I3 J4 F100\nM2\n");
    ARCS.holds("end = start: a full circle, degrees", 360.0, full.sweep().to_degrees(), 1e-9);
    // The report asks for a word of the plane; programs in use leave it out for a full circle (common
    // practice, no single source), and so does the reader.
    let bare = last_arc("G21 G90 G17\nG0 X7 Y7 Z5\nG3 I3 J4 F100\nM2\n");
    ARCS.holds("no end at all: a full circle, degrees", 360.0, bare.sweep().to_degrees(), 1e-9);
}

#[test]
fn radius_format_takes_the_short_way_for_plus_and_the_long_way_for_minus() {
    let away = 75f64.sqrt();
    for (word, radius, center_y, sweep) in [
        ("G2", "10", -away, -60.0),
        ("G3", "10", away, 60.0),
        ("G2", "-10", away, -300.0),
        ("G3", "-10", -away, 300.0),
    ] {
        let arc = last_arc(&format!("G21 G90 G17\nG0 X0 Y0 Z0\n{word} X10 Y0 R{radius} F100\nM2\n"));
        let name = format!("{word} X10 Y0 R{radius} from (0, 0)");
        ARCS.within(format!("{name}: centre"), (arc.center() - p(5.0, center_y)).hypot(), 1e-9);
        ARCS.holds(format!("{name}: sweep, degrees"), sweep, arc.sweep().to_degrees(), 1e-9);
    }
    let program = |block: &str| format!("G21 G90 G17\nG0 X0 Y0 Z0\n{block} F100\nM2\n");
    ARCS.says("R with end = start", "refused", verdict(&program("G2 X0 Y0 R5")));
    ARCS.says("R without a word in the plane", "refused", verdict(&program("G2 Z3 R5")));
    ARCS.says("R of 4 over a chord of 10", "refused", verdict(&program("G2 X10 Y0 R4")));
    let example = last_arc(&program("G17 G2 x10 y15 r20 z5"));
    ARCS.holds("G17 G2 x10 y15 r20 z5: radius", 20.0, example.radius(), 1e-9);
}

const TABLES: Sheet = Sheet::new(
    "A contour and its path for a cutter of diameter 1 (tables 12 and 13)",
    "T. R. Kramer, F. M. Proctor, E. Messina, NISTIR 6556, National Institute of Standards and Technology, 2000, appendix B, tables 12 and \
     13 and sections B.5, B.6; lengths and areas derived: a 3-4-5 triangle grown by 1, 1.5 and 1.485.",
);

/// The contour of table 12 as a table of points and bulges. Read by the reader of such tables.
fn contour_of_table_12() -> Part {
    let bulge = |degrees: f64| -(0.25 * degrees.to_radians()).tan();
    // From (-2, -2) about (-2, -1) to (-2.6, -0.2): from straight down to the normal of the long side.
    let (quarter, left) = (bulge(90.0), bulge(90.0 + 0.6f64.acos().to_degrees()));
    let top = bulge(0.6f64.asin().to_degrees());
    let rows = [
        (2.0, 3.0, quarter),
        (3.0, 2.0, 0.0),
        (3.0, -1.0, quarter),
        (2.0, -2.0, 0.0),
        (-2.0, -2.0, left),
        (-2.6, -0.2, 0.0),
        (1.4, 2.8, top),
        (2.0, 3.0, 0.0),
    ];
    let mut text = String::from("x,y,bulge\n");
    for (x, y, b) in rows {
        let _ = writeln!(text, "{x:?},{y:?},{b:?}");
    }
    let options = DrawingOptions { unit: Some(Unit::Millimetre), ..DrawingOptions::default() };
    let drawing = read_csv(text.as_bytes(), "table12.csv", &options).unwrap().value;
    Part::new(drawing.contour, Keep::Inside, 0.0, vec![Origin::default()]).unwrap()
}

/// The path of table 13 for a triangle grown by `out`: 1.5 in the table.
fn path_of_table_13(out: f64, entry: &str) -> Vec<Segment> {
    let n = |v: f64| format!("{v:.6}");
    let (east, south, top) = (n(2.0 + out), n(-1.0 - out), n(2.0 + out));
    let (lx, ly) = (n(-2.0 - 0.6 * out), n(-1.0 + 0.8 * out));
    let (rx, ry) = (n(2.0 - 0.6 * out), n(2.0 + 0.8 * out));
    let o = n(out);
    let start = if entry.is_empty() { format!("G0 X2 Y{top}\n") } else { entry.to_owned() };
    let (ri, rj) = (n(0.6 * out), n(-0.8 * out));
    let text = format!(
        "G21 G90 G17 G40\n{start}G2 X{east} Y2 I0 J-{o} F100\nG1 Y-1\nG2 X2 Y{south} I-{o} J0\nG1 X-2\n\
         G2 X{lx} Y{ly} I0 J{o}\nG1 X{rx} Y{ry}\nG2 X2 Y{top} I{ri} J{rj}\nM2\n"
    );
    let reading = read_iso(text.as_bytes(), "table13.nc", &ProgramOptions::default());
    let program = reading.unwrap_or_else(|e| panic!("{NIST}: {e:#?}")).value;
    let view = plan(&program, 0.0, |_| Cutter::flat(1.0).ok()).unwrap();
    view.cutting.moves.iter().map(|m| m.segment).collect()
}

fn measured(path: &[Segment]) -> (f64, f64) {
    let path = closed(path.to_vec());
    (path.length(), path.signed_area().abs())
}

#[test]
fn contour_of_table_12_has_the_length_and_area_of_the_grown_triangle() {
    let part = contour_of_table_12();
    TABLES.holds("contour of table 12: length 12 + 2 pi", 12.0 + 2.0 * PI, part.contour.length(), 1e-9);
    let area = part.contour.paths()[0].signed_area();
    TABLES.holds("contour of table 12: area 18 + pi", 18.0 + PI, area, 1e-9);
}

#[test]
fn path_of_table_13_with_a_cutter_of_1_leaves_the_contour_of_table_12() {
    let part = contour_of_table_12();
    let path = path_of_table_13(1.5, "");
    let (length, area) = measured(&path);
    TABLES.holds("path of table 13: length 12 + 3 pi", 12.0 + 3.0 * PI, length, 1e-9);
    TABLES.holds("path of table 13: area 24 + 2.25 pi", 24.0 + 2.25 * PI, area, 1e-9);
    let found = judged(&part, &path, 0.5, 1e-6);
    TABLES.figure("path of table 13, cutter 1.0: gouge", 0.0, found.worst_gouge.unwrap(), 1e-8);
    TABLES.figure("path of table 13, cutter 1.0: excess", 0.0, found.worst_excess.unwrap(), 1e-8);
    let count = found.gouges.len() + found.excesses.len() + found.folds.len();
    TABLES.says("path of table 13, cutter 1.0: findings", "0", &count.to_string());
    finished_edge("path of table 13, cutter 1.0", &path, 0.5, 1.0);
}

/// The inner edge of what was swept is the finished edge: the triangle grown by `out`.
fn finished_edge(name: &str, path: &[Segment], radius: f64, out: f64) {
    let region = swept(path, radius);
    TABLES.says(format!("{name}: loops"), "2", &region.loops.len().to_string());
    let (area, length) = loops(&region)[1];
    TABLES.holds(format!("{name}: finished edge"), 12.0 + 2.0 * PI * out, length, 1e-9);
    TABLES.holds(format!("{name}: finished area"), 6.0 + 12.0 * out + PI * out * out, -area, 1e-9);
}

#[test]
fn path_of_table_13_with_another_cutter_misses_by_half_the_difference() {
    let part = contour_of_table_12();
    let path = path_of_table_13(1.5, "");
    let found = judged(&part, &path, 0.485, 1e-6);
    TABLES.figure("path of table 13, cutter 0.97: excess", 0.015, found.worst_excess.unwrap(), 1e-8);
    TABLES.figure("path of table 13, cutter 0.97: gouge", 0.0, found.worst_gouge.unwrap(), 1e-8);
    let whole = found.excesses.len() == 1 && found.excesses[0].whole_path;
    TABLES.says("path of table 13, cutter 0.97: on the whole loop", "yes", if whole { "yes" } else { "no" });
    let found = judged(&part, &path, 0.515, 1e-6);
    TABLES.figure("path of table 13, cutter 1.03: gouge", 0.015, found.worst_gouge.unwrap(), 1e-8);
    TABLES.figure("path of table 13, cutter 1.03: excess", 0.0, found.worst_excess.unwrap(), 1e-8);
}

#[test]
fn path_shifted_for_a_cutter_of_0_97_leaves_the_contour_again() {
    // G41 with a diameter of -0.03 in the table: the path runs 0.015 nearer to the contour.
    let part = contour_of_table_12();
    let path = path_of_table_13(1.485, "");
    let (length, area) = measured(&path);
    TABLES.holds("path for 0.97: length 12 + 2.97 pi", 12.0 + 2.97 * PI, length, 1e-9);
    TABLES.holds("path for 0.97: area by 40-digit arithmetic", 30.747_918_659_5, area, 1e-9);
    let found = judged(&part, &path, 0.485, 1e-6);
    TABLES.figure("path for 0.97, cutter 0.97: gouge", 0.0, found.worst_gouge.unwrap(), 1e-8);
    TABLES.figure("path for 0.97, cutter 0.97: excess", 0.0, found.worst_excess.unwrap(), 1e-8);
    finished_edge("path for 0.97, cutter 0.97", &path, 0.485, 1.0);
}

#[test]
fn entry_of_table_12_neither_gouges_nor_changes_the_edge() {
    let part = contour_of_table_12();
    // (1, 5) straight to B, round the corner at (1, 4), round (2, 4) on to the contour. B is written with
    // nine digits: the arc about (1, 4) starts that far off its circle.
    let entry = "G0 X1 Y5\nG1 X1.433012702 Y4.25 F100\nG2 X1.5 Y4 I-0.433012702 J-0.25\nG3 X2 Y3.5 I0.5 J0\n";
    let path = path_of_table_13(1.5, entry);
    let found = judged(&part, &path, 0.5, 1e-6);
    TABLES.figure("with the entry: gouge", 0.0, found.worst_gouge.unwrap(), 1e-7);
    TABLES.figure("with the entry: excess", 0.0, found.worst_excess.unwrap(), 1e-7);
    TABLES.says("with the entry: folds", "0", &found.folds.len().to_string());
    let (b, start) = (path[0].end(), p(1.0, 5.0));
    TABLES.holds("entry: right angle at B", 0.0, (start - b).dot(p(1.0, 4.0) - b), 1e-9);
    TABLES.holds("entry: length of its first move, sqrt(1 - 1/4)", 0.75f64.sqrt(), path[0].length(), 1e-9);
}
