//! Bulges, arcs and transforms of drawings, read by the readers.

use std::f64::consts::{FRAC_1_SQRT_2, PI};

use crate::build::*;
use crate::sheet::Sheet;
use sweptedge::geometry::{Arc, Contour, Path, Point, Segment, Vec2};
use sweptedge::input::drawing::svg::read_subpaths;
use sweptedge::input::drawing::{DrawingOptions, read_csv, read_dxf};
use sweptedge::program::Unit;

const BULGE: Sheet = Sheet::new(
    "Bulges",
    "DXF Reference, ENTITIES section, LWPOLYLINE, group 42: the tangent of a quarter of the included angle, negative \
     when clockwise; radius c (1 + b^2) / (4 |b|), sagitta |b| c / 2 and length 4 atan |b| radius derived.",
);

fn options(curve_error: f64) -> DrawingOptions {
    DrawingOptions { curve_error, unit: Some(Unit::Millimetre), ..DrawingOptions::default() }
}

/// The one arc of a contour.
fn only_arc(contour: &Contour) -> Arc {
    match contour.paths()[0].segments() {
        [Segment::Arc(a)] => *a,
        other => panic!("not one arc: {other:?}"),
    }
}

/// One polyline from (0, 0) to (1, 0) as a DXF file.
fn polyline(bulge: f64) -> String {
    let pairs: [(i32, String); 16] = [
        (0, "SECTION".into()),
        (2, "HEADER".into()),
        (9, "$ACADVER".into()),
        (1, "AC1015".into()),
        (0, "ENDSEC".into()),
        (0, "SECTION".into()),
        (2, "ENTITIES".into()),
        (0, "LWPOLYLINE".into()),
        (100, "AcDbEntity".into()),
        (8, "0".into()),
        (100, "AcDbPolyline".into()),
        (90, "2".into()),
        (70, "0".into()),
        (10, format!("0.0\n20\n0.0\n42\n{bulge:?}")),
        (10, "1.0\n20\n0.0".into()),
        (0, "ENDSEC\n0\nEOF".into()),
    ];
    pairs.iter().map(|(code, value)| format!("{code}\n{value}\n")).collect()
}

#[test]
fn bulges_of_30_to_270_degrees_have_their_radius_sagitta_and_length() {
    let table = [
        (30.0f64, 0.131_652_497_587, 1.931_851_652_58, 0.065_826_248_793_7),
        (45.0, 0.198_912_367_38, 1.306_562_964_88, 0.099_456_183_689_8),
        (90.0, 0.414_213_562_373, FRAC_1_SQRT_2, 0.207_106_781_187),
        (180.0, 1.0, 0.5, 0.5),
        (270.0, 2.414_213_562_37, FRAC_1_SQRT_2, 1.207_106_781_19),
    ];
    for (degrees, bulge, radius, sagitta) in table {
        // As read from either format, to either side; a positive bulge lies to the right of its chord.
        let mut read = Vec::new();
        for sign in [1.0, -1.0] {
            let b = sign * bulge;
            let csv = format!("x,y,bulge\n0,0,{b:?}\n1,0,0\n");
            let csv = read_csv(csv.as_bytes(), "arc.csv", &options(0.0)).unwrap();
            let dxf = read_dxf(polyline(b).as_bytes(), "arc.dxf", &options(0.0)).unwrap();
            read.extend([csv, dxf].map(|r| (sign, only_arc(&r.value.contour))));
        }
        let worst = |what: &str, expected: f64, got: &dyn Fn(f64, &Arc) -> f64, bound: f64| {
            let figures = read.iter().map(|(sign, arc)| got(*sign, arc));
            let off = |v: &f64| (v - expected).abs();
            let got = figures.max_by(|a, b| off(a).total_cmp(&off(b))).unwrap();
            BULGE.holds(format!("bulge {bulge}, CSV and DXF, both signs: {what}"), expected, got, bound);
        };
        worst("angle", degrees, &|sign, a| sign * a.sweep().to_degrees(), 1e-8);
        worst("radius / chord", radius, &|_, a| a.radius(), 1e-9);
        worst("sagitta / chord", sagitta, &|sign, a| -sign * a.point_at(0.5).y, 1e-9);
        worst("length / chord", radius * degrees.to_radians(), &|_, a| a.length(), 1e-9);
    }
}

const SVG_ARC: Sheet = Sheet::new(
    "SVG arcs",
    "W3C, Scalable Vector Graphics 1.1, second edition, 2011, appendix F.6 (elliptical arc implementation notes); \
     centres and angles computed from its equations F.6.5.1 to F.6.6.3.",
);

/// Height of the page of every drawing here: y is turned up about it.
const PAGE: f64 = 400.0;

fn drawn(body: &str, curve_error: f64) -> Contour {
    let text = format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"{PAGE}mm\" height=\"{PAGE}mm\" \
         viewBox=\"0 0 {PAGE} {PAGE}\">{body}</svg>"
    );
    read_subpaths(text.as_bytes(), "arc.svg", &options(curve_error)).unwrap().value.contour
}

/// A point of the page as the drawing shows it, y down, in the drawing read, y up.
fn up(x: f64, y: f64) -> Point {
    p(x, PAGE - y)
}

fn distance(path: &Path, q: Point) -> f64 {
    path.segments().iter().map(|s| s.distance(q)).fold(f64::INFINITY, f64::min)
}

#[test]
fn four_arcs_between_two_points_choose_center_and_sweep_by_their_flags() {
    let cases = [
        ("0 1", (6.717_974_202_37, 6.383_597_519_05), -154.286_327_043, 84.057_042_232_3),
        ("1 1", (5.282_025_797_63, -2.383_597_519_05), 109.770_715_19, 275.942_957_768),
        ("0 0", (5.282_025_797_63, -2.383_597_519_05), 109.770_715_19, -84.057_042_232_3),
        ("1 0", (6.717_974_202_37, 6.383_597_519_05), -154.286_327_043, -275.942_957_768),
    ];
    for (flags, (cx, cy), start, sweep) in cases {
        let contour = drawn(&format!("<path d=\"M0 0A10 5 30 {flags} 12 4\"/>"), 1e-8);
        let path = &contour.paths()[0];
        let turn = Vec2::from_angle(PI / 6.0);
        let at = |t: f64| {
            let (s, c) = t.to_radians().sin_cos();
            let (ex, ey) = (10.0 * c, 5.0 * s);
            up(cx + turn.x * ex - turn.y * ey, cy + turn.y * ex + turn.x * ey)
        };
        let first = path.segments()[0].start();
        let last = path.segments()[path.segments().len() - 1].end();
        SVG_ARC.within(format!("flags {flags}: start"), (first - up(0.0, 0.0)).hypot(), 1e-9);
        SVG_ARC.within(format!("flags {flags}: end"), (last - up(12.0, 4.0)).hypot(), 1e-9);
        let begins = (at(start) - up(0.0, 0.0)).hypot();
        SVG_ARC.within(format!("flags {flags}: start angle gives the start"), begins, 1e-9);
        let along = (0..=200).map(|k| distance(path, at(start + sweep * f64::from(k) / 200.0)));
        let off = along.fold(0.0, f64::max);
        SVG_ARC.within(format!("flags {flags}: arc from the path"), off, contour.bound() + 1e-9);
        // Simpson's rule on the ellipse's speed.
        let speed = |k: i32| {
            let (s, c) = (start + sweep * f64::from(k) / 2000.0).to_radians().sin_cos();
            (10.0 * s).hypot(5.0 * c)
        };
        let weight = |k: i32| {
            if k % 2 == 1 {
                4.0
            } else if k == 0 || k == 2000 {
                1.0
            } else {
                2.0
            }
        };
        let sum: f64 = (0..=2000).map(|k| weight(k) * speed(k)).sum();
        let length = sum * sweep.abs().to_radians() / 6000.0;
        SVG_ARC.holds(format!("flags {flags}: length"), length, path.length(), 1e-6);
    }
}

#[test]
fn circular_arcs_stay_true_arcs_and_radii_that_are_too_small_grow() {
    let grown = only_arc(&drawn("<path d=\"M0 0A1 1 0 0 1 10 0\"/>", 0.0));
    SVG_ARC.holds("radii 1, chord 10: radius", 5.0, grown.radius(), 1e-9);
    SVG_ARC.within("radii 1, chord 10: centre", (grown.center() - up(5.0, 0.0)).hypot(), 1e-9);
    let quarter = only_arc(&drawn("<path d=\"M0 0A5 5 0 0 1 5 5\"/>", 0.0));
    SVG_ARC.holds("quarter: radius", 5.0, quarter.radius(), 1e-9);
    SVG_ARC.within("quarter: centre", (quarter.center() - up(0.0, 5.0)).hypot(), 1e-9);
    // -90 to 0 degrees with y down is a right-hand turn, in the drawing and, y up, in the part.
    SVG_ARC.holds("quarter: sweep, degrees, y up", -90.0, quarter.sweep().to_degrees(), 1e-9);
    let negative = only_arc(&drawn("<path d=\"M0 0A-5 -5 0 0 1 5 5\"/>", 0.0));
    SVG_ARC.within("negative radii count as positive", (negative.center() - up(0.0, 5.0)).hypot(), 1e-9);
    let straight = drawn("<path d=\"M0 0A0 5 0 0 1 5 5\"/>", 0.0);
    let is_line = matches!(straight.paths()[0].segments(), [Segment::Line(_)]);
    SVG_ARC.says("a radius of zero", "straight line", if is_line { "straight line" } else { "other" });
    let omitted = drawn("<path d=\"M0 0A5 5 0 0 1 0 0L7 0\"/>", 0.0);
    let count = omitted.paths()[0].segments().len().to_string();
    SVG_ARC.says("an arc that ends where it starts: segments beside the line", "1", &count);
}

const TRANSFORM: Sheet = Sheet::new(
    "SVG transform lists",
    "W3C, Scalable Vector Graphics 1.1, second edition, 2011, section 7.5 (nested transforms; it prints e = 255.03 and \
     f = 111.21, from memory); test coords-transformattr-02-f: a list acts as nested groups, the left one outermost.",
);

#[test]
fn transform_list_is_the_product_of_its_entries_from_the_left() {
    let line = "<path d=\"M0 0H10M0 0V10\"/>";
    let list = format!("<g transform=\"translate(50,90) rotate(-45) translate(130,160)\">{line}</g>");
    let nested = format!(
        "<g transform=\"translate(50,90)\"><g transform=\"rotate(-45)\"><g transform=\"translate(130,160)\">\
         {line}</g></g></g>"
    );
    for (name, body) in [("list", list), ("nested groups", nested)] {
        let contour = drawn(&body, 0.0);
        let ends = |path: &Path| (path.segments()[0].start(), path.segments()[0].end());
        let (origin, along_x) = ends(&contour.paths()[0]);
        let (_, along_y) = ends(&contour.paths()[1]);
        let down = |q: Point| p(q.x, PAGE - q.y);
        let (origin, u, v) = (down(origin), down(along_x) - down(origin), down(along_y) - down(origin));
        let root = FRAC_1_SQRT_2;
        let rows = [
            ("a", root, 0.1 * u.x),
            ("b", -root, 0.1 * u.y),
            ("c", root, 0.1 * v.x),
            ("d", root, 0.1 * v.y),
            ("e", 255.060_966_544, origin.x),
            ("f", 111.213_203_436, origin.y),
        ];
        for (what, expected, got) in rows {
            TRANSFORM.holds(format!("{name}: {what}"), expected, got, 1e-9);
        }
    }
}
