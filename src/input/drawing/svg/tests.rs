//! Whole drawings: where their shapes lie, what is left out, what is refused and where.

use super::*;
use crate::geometry::{Path, Point, Segment};
use crate::input::Severity;
use crate::program::Unit;

const OPEN: &str =
    "<svg xmlns='http://www.w3.org/2000/svg' width='100mm' height='50mm' viewBox='0 0 100 50'>";

fn read_with(text: &str, options: &DrawingOptions) -> Result<Reading<Drawing>, Refusal> {
    read_svg(text.as_bytes(), "part.svg", options)
}

fn read(text: &str) -> Reading<Drawing> {
    read_with(text, &DrawingOptions::default()).unwrap_or_else(|p| panic!("{text}: {p:?}"))
}

/// The contour of some elements on a page of 100 x 50 mm whose user unit is 1 mm.
fn on_page(elements: &str) -> Reading<Drawing> {
    read(&format!("{OPEN}{elements}</svg>"))
}

fn paths(reading: &Reading<Drawing>) -> &[Path] {
    reading.value.contour.paths()
}

fn refused(text: &str) -> Problem {
    let problems = read_with(text, &DrawingOptions::default()).expect_err(text);
    assert!(problems.iter().all(|p| !p.help.is_empty()), "{problems:?}");
    problems.into_iter().find(|p| p.severity == Severity::Error).unwrap()
}

fn near(p: Point, x: f64, y: f64) {
    assert!((p - Point::new(x, y)).hypot() < 1e-9, "{p:?} is not ({x}, {y})");
}

#[test]
fn rectangle_stands_on_the_page_with_y_up() {
    let r = on_page("<rect x='10' y='5' width='30' height='20'/>");
    assert_eq!(r.value.unit, Some(Unit::Millimetre));
    assert_eq!(r.problems, vec![]);
    assert!(r.value.contour.bound() <= 0.0);
    let path = &paths(&r)[0];
    assert!(path.is_closed());
    assert_eq!(path.segments().len(), 4);
    near(path.segments()[0].start(), 10.0, 45.0);
    near(path.segments()[0].end(), 40.0, 45.0);
    assert!((path.signed_area() + 600.0).abs() < 1e-12, "clockwise on the page");
    assert_eq!(r.value.origins[0].line, Some(1));
}

#[test]
fn rounded_rectangle_keeps_its_corners_as_arcs() {
    let r = on_page("<rect width='30' height='20' rx='4'/>");
    let path = &paths(&r)[0];
    assert_eq!(path.segments().iter().filter(|s| matches!(s, Segment::Arc(_))).count(), 4);
    let area = 600.0 - (4.0 - std::f64::consts::PI) * 16.0;
    assert!((path.signed_area().abs() - area).abs() < 1e-10);
    // A radius beyond half the side is cut to it: a stadium, its flat ends without length.
    let r = on_page("<rect width='30' height='20' rx='99'/>");
    assert!(r.value.contour.length() > 70.0 && paths(&r)[0].is_closed());
    let r = on_page("<rect width='30' height='20' rx='10'/>");
    assert_eq!(paths(&r)[0].segments().len(), 6, "no flat left at the ends");
}

#[test]
fn circle_stays_one_arc_under_shift_turn_mirror_and_equal_scale() {
    for transform in
        ["", "translate(3 4)", "rotate(33 1 2)", "scale(2)", "scale(0.1,-0.1)", "matrix(3 4 4 -3 1 1)"]
    {
        let r = on_page(&format!("<g transform='{transform}'><circle cx='20' cy='30' r='5'/></g>"));
        let [Segment::Arc(arc)] = paths(&r)[0].segments() else { panic!("{transform}: {r:?}") };
        assert_eq!(arc.start(), arc.end());
        assert!(paths(&r)[0].is_closed() && r.value.contour.bound() < 1e-12, "{transform}");
    }
}

#[test]
fn circle_under_unequal_scale_is_an_ellipse_within_the_bound() {
    let r = on_page("<circle r='20' transform='translate(50 25) scale(2 1)'/>");
    let contour = &r.value.contour;
    assert!(paths(&r)[0].segments().len() > 8 && paths(&r)[0].is_closed());
    assert!(contour.bound() > 0.0 && contour.bound() <= 1e-4 + 1e-9, "{}", contour.bound());
    // pi a b and the perimeter of the ellipse 40 / 20, recomputed.
    let off = (paths(&r)[0].signed_area().abs() - 2_513.274_122_871_834_6).abs();
    assert!(off <= contour.bound() * 193.768_964_411 * 1.01, "{off}");
}

#[test]
fn curve_error_holds_after_the_transform() {
    let text = |scale: f64| format!("{OPEN}<path transform='scale({scale})' d='M0 0C1 3 2-3 3 0'/></svg>");
    let options = DrawingOptions { curve_error: 0.01, ..DrawingOptions::default() };
    for scale in [1.0, 100.0] {
        let r = read_with(&text(scale), &options).unwrap();
        let bound = r.value.contour.bound();
        assert!(bound <= 0.01 && bound > 1e-3, "scale {scale}: bound {bound}");
    }
}

#[test]
fn nested_transforms_act_outermost_first() {
    let r = on_page(
        "<g transform='translate(10 10)'><g transform='scale(2)'><line x1='1' y1='1' x2='2' y2='1'/></g></g>",
    );
    near(paths(&r)[0].segments()[0].start(), 12.0, 50.0 - 12.0);
    near(paths(&r)[0].segments()[0].end(), 14.0, 50.0 - 12.0);
    assert!(!paths(&r)[0].is_closed());
}

#[test]
fn page_size_and_view_box_give_the_unit_and_scale() {
    let line = "<line x1='10' y1='20' x2='20' y2='20'/>";
    for (page, unit, x, y) in [
        ("width='100mm' height='50mm' viewBox='0 0 200 100'", Some(Unit::Millimetre), 5.0, 40.0),
        ("width='10cm' height='5cm' viewBox='10 20 100 50'", Some(Unit::Millimetre), 0.0, 50.0),
        ("width='4in' height='2in' viewBox='0 0 40 20'", Some(Unit::Inch), 1.0, 0.0),
        ("width='72pt' height='144pt' viewBox='0 0 10 20'", Some(Unit::Inch), 1.0, 0.0),
        ("width='100mm' viewBox='0 0 200 100'", Some(Unit::Millimetre), 5.0, 40.0),
        (
            "width='254mm' height='254mm'",
            Some(Unit::Millimetre),
            10.0 * 25.4 / 96.0,
            254.0 - 20.0 * 25.4 / 96.0,
        ),
        ("width='100mm' height='100mm' viewBox='0 0 100 50'", Some(Unit::Millimetre), 10.0, 55.0),
        (
            "width='100mm' height='100mm' viewBox='0 0 100 50' preserveAspectRatio='none'",
            Some(Unit::Millimetre),
            10.0,
            60.0,
        ),
        ("width='200' height='100' viewBox='0 0 100 50'", None, 10.0, 30.0),
        ("width='200' height='100'", None, 10.0, 80.0),
        ("width='100%' height='100%' viewBox='0 0 100 50'", None, 10.0, 30.0),
        ("", None, 10.0, -20.0),
        ("width='200' height='200' viewBox='0 0 100 50' preserveAspectRatio='none'", None, 20.0, 120.0),
    ] {
        let r = read(&format!("<svg {page}>{line}</svg>"));
        assert_eq!(r.value.unit, unit, "{page}");
        let p = paths(&r)[0].segments()[0].start();
        assert!((p - Point::new(x, y)).hypot() < 1e-9, "{page}: {p:?}");
        assert_eq!(r.problems.len(), usize::from(unit.is_none()), "{page}: what was assumed is said");
    }
}

#[test]
fn asked_unit_counts_only_where_the_file_declares_none() {
    let options = DrawingOptions { unit: Some(Unit::Inch), ..DrawingOptions::default() };
    let r = read_with("<svg><circle r='1'/></svg>", &options).unwrap();
    assert_eq!(r.value.unit, Some(Unit::Inch));
    assert!(r.problems[0].help.contains("1 in"), "{:?}", r.problems);
    let r = read_with(&format!("{OPEN}<circle r='1'/></svg>"), &options).unwrap();
    assert_eq!(r.value.unit, Some(Unit::Millimetre));
}

#[test]
fn lengths_of_shapes_take_units_and_shares() {
    let r = read("<svg viewBox='0 0 200 100'><rect x='50%' y='10%' width='1in' height='25.4mm'/></svg>");
    let b = r.value.contour.bounds();
    assert!((b.x0 - 100.0).abs() < 1e-9 && (b.width() - 96.0).abs() < 1e-9, "{b:?}");
    assert!((b.y1 - 90.0).abs() < 1e-9 && (b.height() - 96.0).abs() < 1e-9, "{b:?}");
    let problem = refused("<svg><circle r='50%'/></svg>");
    assert!(problem.found.contains("share"), "{problem}");
}

#[test]
fn inner_page_is_laid_where_it_says() {
    let r = on_page(
        "<svg x='10' y='5' width='20' height='20' viewBox='0 0 10 10'><circle cx='5' cy='5' r='5'/></svg>",
    );
    let b = r.value.contour.bounds();
    near(b.origin(), 10.0, 25.0);
    near(Point::new(b.x1, b.y1), 30.0, 45.0);
}

#[test]
fn closing_line_is_added_only_where_it_is_missing() {
    let closed = on_page("<path d='M0 0 H10 V10 H0 Z'/>");
    assert_eq!(paths(&closed)[0].segments().len(), 4);
    for data in ["M0 0 H10 V10 H0 V0 Z", "M0 0 H10 V10 H0 V1e-10 Z", "M0 0 H10 V10 H0 V0"] {
        let r = on_page(&format!("<path d='{data}'/>"));
        assert_eq!(paths(&r)[0].segments().len(), 4, "{data}");
        assert!(paths(&r)[0].is_closed(), "{data}");
        assert!(r.value.contour.bound() <= 1e-9);
    }
    let gap = on_page("<path d='M0 0 H10 V10 H0 V0.001 Z'/>");
    assert_eq!(paths(&gap)[0].segments().len(), 5);
    let open = on_page("<path d='M0 0 H10 V10 H0 V2'/>");
    assert!(!paths(&open)[0].is_closed());
}

#[test]
fn loose_lines_and_arcs_are_joined_into_a_loop() {
    let text = format!(
        "{OPEN}<line x1='0' y1='0' x2='10' y2='0'/><polyline points='0 10 0 0'/><path d='M0 10H10'/>\
         <path d='M10 0A5 5 0 0 1 10.001 10'/></svg>"
    );
    let r = read_with(&text, &DrawingOptions::default()).unwrap();
    assert_eq!(paths(&r).len(), 1);
    assert!(paths(&r)[0].is_closed());
    assert!(r.value.contour.bound() >= 5e-4, "the closed gap is in the bound");
    let loose = read_subpaths(text.as_bytes(), "part.svg", &DrawingOptions::default()).unwrap();
    assert_eq!(loose.value.contour.paths().len(), 4);
}

#[test]
fn two_half_arcs_make_an_exact_circle() {
    let r = on_page("<path d='M10 25a5 5 0 1 0 10 0a5 5 0 1 0-10 0z'/>");
    let path = &paths(&r)[0];
    assert!(path.is_closed());
    assert_eq!(path.segments().len(), 2);
    assert!((path.signed_area().abs() - 25.0 * std::f64::consts::PI).abs() < 1e-9);
    assert!(r.value.contour.bound() < 1e-12);
}

#[test]
fn pieces_without_length_are_dropped() {
    let r = on_page("<path d='M0 0 L0 0 L10 0 L10 0 L10 10 Z'/><path d='M1 1 Z'/><polyline points='3 3'/>");
    assert_eq!(paths(&r).len(), 1);
    assert_eq!(paths(&r)[0].segments().len(), 3);
}

#[test]
fn polygon_is_closed_and_polyline_is_open() {
    let r = on_page("<polygon points='0,0 10,0 10,10'/><polyline points='20 30,30-5.5.5 30'/>");
    assert!(paths(&r)[0].is_closed() && !paths(&r)[1].is_closed());
    assert_eq!(paths(&r)[1].segments().len(), 2);
    assert!(refused(&format!("{OPEN}<polygon points='0 0 10 0 10'/></svg>")).found.contains("5 numbers"));
    let bad = refused(&format!("{OPEN}<polyline points='0 0 10 x'/></svg>"));
    assert_eq!(bad.place.column, Some(OPEN.len() + 26), "{bad}");
}

#[test]
fn layers_are_groups_by_label_or_id_and_elements_by_id() {
    let text = format!(
        "{OPEN}<g id='layer1' e:label='Outline' xmlns:e='urn:editor'><circle r='1'/><g id='inner'><circle r='2'/></g></g>\
         <circle id='hole' r='3'/><circle r='4'/></svg>"
    );
    let radii = |layers: &[&str]| -> Vec<f64> {
        let layers = layers.iter().map(|s| (*s).to_owned()).collect();
        let r = read_with(&text, &DrawingOptions { layers, ..DrawingOptions::default() }).unwrap();
        let mut radii = Vec::new();
        for (_, s) in r.value.contour.segments() {
            let Segment::Arc(a) = s else { panic!("{s:?}") };
            radii.push(a.radius());
        }
        radii
    };
    assert_eq!(radii(&[]), [1.0, 2.0, 3.0, 4.0]);
    assert_eq!(radii(&["Outline"]), [1.0, 2.0]);
    assert_eq!(radii(&["layer1"]), [1.0, 2.0]);
    assert_eq!(radii(&["inner", "hole"]), [2.0, 3.0]);
    let r = read(&text);
    let listed: Vec<(&str, usize)> = r.value.layers.iter().map(|l| (l.name.as_str(), l.entities)).collect();
    assert_eq!(listed, [("Outline", 2), ("inner", 1), ("hole", 1)]);
    assert_eq!(r.value.origins[1].layer.as_deref(), Some("inner"));
    assert_eq!(r.value.origins[3].layer, None);
    let options = DrawingOptions { layers: vec!["outline".into()], ..DrawingOptions::default() };
    let problems = read_with(&text, &options).unwrap_err();
    assert!(problems[0].help.contains("Outline"), "{problems:?}");
}

#[test]
fn what_is_left_out_is_said_with_its_place() {
    let r = on_page(
        "<circle r='1'/>\n<text>A</text><text>B</text>\n <image/>\
         <defs><path d='M0 0L1 1'/></defs><g style='display:none'><rect width='1' height='1'/></g>\
         <blob/><title>x</title><style>g{transform:none}</style>",
    );
    assert_eq!(paths(&r).len(), 1);
    let found: Vec<&str> = r.problems.iter().map(|p| p.found.as_str()).collect();
    assert_eq!(found.len(), 6, "{found:#?}");
    assert!(found[0].contains("2 times <text>"), "{found:?}");
    assert_eq!((r.problems[0].place.line, r.problems[0].place.column), (Some(2), Some(1)));
    assert!(r.problems.iter().all(|p| p.severity == Severity::Warning && !p.help.is_empty()));
    assert_eq!((r.problems[1].place.line, r.problems[1].place.column), (Some(3), Some(2)));
}

#[test]
fn hidden_elements_are_left_out_but_a_visible_child_is_not() {
    let r = on_page(
        "<g visibility='hidden'><circle r='1'/><circle r='2' visibility='visible'/></g><circle r='3' display='none'/>",
    );
    assert_eq!(paths(&r).len(), 1);
    let [Segment::Arc(a)] = paths(&r)[0].segments() else { panic!() };
    assert!((a.radius() - 2.0).abs() < 1e-15);
}

#[test]
fn errors_point_at_the_character() {
    let bad = refused("<svg>\n  <path d='M0 0 L1e999 0'/>\n</svg>");
    assert_eq!((bad.place.line, bad.place.column), (Some(2), Some(18)), "{bad}");
    let bad = refused("<svg>\n<circle r='5' transform='turn(3)'/></svg>");
    assert_eq!(bad.place.line, Some(2));
    let bad = refused("<svg>\n\n<g><circle r='5'></svg>");
    assert_eq!(bad.place.line, Some(3), "{bad}");
    for text in [
        "",
        "<dxf/>",
        "<svg/>",
        "<svg width='0'><circle r='1'/></svg>",
        "<svg width='3em'><circle r='1'/></svg>",
        "<svg viewBox='0 0 0 1'><circle r='1'/></svg>",
        "<svg viewBox='0 0 1 1' preserveAspectRatio='middle'><circle r='1'/></svg>",
        "<svg><circle r='-1'/></svg>",
        "<svg><circle r='inf'/></svg>",
        "<svg><circle r='1e10'/></svg>",
        "<svg><path d='M0 0 l1e308 0 l1e308 0 l1e308 0'/></svg>",
        "<svg><g transform='scale(1e200)'><g transform='scale(1e200)'><circle r='1'/></g></g></svg>",
        "<svg><circle r='1' style='transform:scale(2)'/></svg>",
        "<svg><circle r='1' transform='scale(2)' transform-origin='1 1'/></svg>",
        "<svg><text>only text</text></svg>",
    ] {
        refused(text);
    }
    assert!(read_svg(b"\x1f\x8b\x08", "a.svgz", &DrawingOptions::default()).is_err());
    assert!(read_svg(b"<svg>\n\xff</svg>", "a.svg", &DrawingOptions::default()).is_err());
}

#[test]
fn bad_curve_errors_are_refused() {
    for curve_error in [-1.0, f64::NAN, f64::INFINITY] {
        let options = DrawingOptions { curve_error, ..DrawingOptions::default() };
        assert!(read_with("<svg><path d='M0 0Q1 1 2 0'/></svg>", &options).is_err());
    }
}

#[test]
fn nesting_and_entities_are_bounded() {
    let deep = format!("<svg>{}<circle r='1'/>{}</svg>", "<g>".repeat(100_000), "</g>".repeat(100_000));
    assert!(refused(&deep).found.contains("deep"));
    let fair = format!("<svg>{}<circle r='1'/>{}</svg>", "<g>".repeat(150), "</g>".repeat(150));
    assert_eq!(paths(&read(&fair)).len(), 1);
    let ns =
        "<!DOCTYPE svg [<!ENTITY n 'http://www.w3.org/2000/svg'>]><svg xmlns='&n;'><circle r='1'/></svg>";
    assert_eq!(paths(&read(ns)).len(), 1);
    let big = "x".repeat(100_000);
    let bomb = format!("<!DOCTYPE svg [<!ENTITY a '{big}'>]><svg><desc>{}</desc></svg>", "&a;".repeat(100));
    assert!(refused(&bomb).found.contains("entities"));
    let public =
        "<!DOCTYPE svg PUBLIC '-//W3C//DTD SVG 1.1//EN' 'http://www.w3.org/Graphics/SVG/1.1/DTD/svg11.dtd'>";
    assert_eq!(paths(&read(&format!("{public}<svg><circle r='1'/></svg>"))).len(), 1);
}

#[test]
fn many_errors_are_counted_not_listed() {
    let text = format!("<svg>{}</svg>", "<circle r='x'/>".repeat(500));
    let problems = read_with(&text, &DrawingOptions::default()).unwrap_err();
    assert!(problems.len() < 25, "{}", problems.len());
    assert!(problems.iter().any(|p| p.found.contains("480 more")), "{problems:?}");
}

#[test]
fn copies_are_shown_where_they_are_put() {
    let r = on_page(
        "<defs><g id='pair'><circle id='c' r='1'/><circle cx='4' r='1'/></g></defs>\
         <g id='nest'><use href='#pair' x='10' y='10' transform='translate(5 0)'/></g>\
         <use xlink:href='#c' xmlns:xlink='http://www.w3.org/1999/xlink' y='30'/>",
    );
    let mut centers = Vec::new();
    for (_, s) in r.value.contour.segments() {
        let Segment::Arc(a) = s else { panic!("{s:?}") };
        centers.push((a.center().x, a.center().y));
    }
    assert_eq!(centers, [(15.0, 40.0), (19.0, 40.0), (0.0, 20.0)]);
    assert_eq!(r.value.layers.len(), 1);
    assert_eq!((r.value.layers[0].name.as_str(), r.value.layers[0].entities), ("nest", 2));
    let symbol = on_page(
        "<symbol id='s' viewBox='0 0 2 2'><circle cx='1' cy='1' r='1'/></symbol>\
         <use href='#s' x='10' y='10' width='20' height='20'/>",
    );
    let b = symbol.value.contour.bounds();
    near(b.origin(), 10.0, 20.0);
    near(Point::new(b.x1, b.y1), 30.0, 40.0);
}

#[test]
fn copies_without_end_or_target_are_refused() {
    assert!(refused("<svg><use href='#none'/></svg>").found.contains("not in the drawing"));
    assert!(refused("<svg><use/></svg>").found.contains("not in the drawing"));
    assert!(refused("<svg><g id='a'><use href='#a'/></g></svg>").found.contains("itself"));
    assert!(refused("<svg><use id='b' href='#b'/></svg>").found.contains("itself"));
    let mut text = "<svg><defs><circle id='l0' r='1'/>".to_owned();
    for k in 1..20 {
        let copies = format!("<use href='#l{}'/>", k - 1).repeat(10);
        text.push_str(&format!("<g id='l{k}'>{copies}</g>"));
    }
    text.push_str("</defs><use href='#l19'/></svg>");
    assert!(refused(&text).found.contains("more than"));
}
