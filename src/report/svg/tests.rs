//! The drawings are rendered as a viewer would and measured; the pictures land in `target/drawings`
//! for whoever wants to look.

use resvg::{tiny_skia, usvg};

use super::*;
use crate::findings::Kind;
use crate::geometry::{Contour, Path, Segment};
use crate::part::Keep;
use crate::program::Unit;
use crate::report::sample;

/// The document as a viewer lays it out, with the system's fonts.
fn laid_out(document: &str) -> usvg::Tree {
    let mut options = usvg::Options::default();
    options.fontdb_mut().load_system_fonts();
    let face = options.fontdb.faces().find(|f| f.families.iter().any(|(n, _)| n.contains("Sans")));
    let family = face.and_then(|f| f.families.first()).map(|(name, _)| name.clone());
    let family = family.expect("these tests measure text and need a sans-serif font on the system");
    options.fontdb_mut().set_sans_serif_family(family);
    usvg::Tree::from_str(document, &options).expect("a document that viewers accept")
}

fn picture(name: &str, document: &str) -> usvg::Tree {
    let tree = laid_out(document);
    let scale = 1600.0 / tree.size().width();
    let mut pixels = tiny_skia::Pixmap::new(1600, 1131).expect("a picture");
    resvg::render(&tree, tiny_skia::Transform::from_scale(scale, scale), &mut pixels.as_mut());
    let folder = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("target/drawings");
    std::fs::create_dir_all(&folder).expect("a folder");
    pixels.save_png(folder.join(format!("{name}.png"))).expect("a file");
    std::fs::write(folder.join(format!("{name}.svg")), document).expect("a file");
    tree
}

/// Boxes of all texts, in millimetres on the sheet.
fn texts(tree: &usvg::Tree) -> Vec<(String, usvg::Rect)> {
    fn collect(group: &usvg::Group, out: &mut Vec<(String, usvg::Rect)>) {
        for node in group.children() {
            match node {
                usvg::Node::Group(g) => collect(g, out),
                usvg::Node::Text(t) => {
                    let content = t.chunks().iter().map(usvg::TextChunk::text).collect();
                    out.push((content, t.abs_bounding_box()));
                }
                usvg::Node::Path(_) | usvg::Node::Image(_) => {}
            }
        }
    }
    let mut out = Vec::new();
    collect(tree.root(), &mut out);
    let to_mm = SHEET.width() as f32 / tree.size().width();
    let scaled = |b: usvg::Rect| {
        usvg::Rect::from_xywh(b.x() * to_mm, b.y() * to_mm, b.width() * to_mm, b.height() * to_mm)
    };
    out.into_iter().map(|(t, b)| (t, scaled(b).expect("a box"))).collect()
}

/// No text over another, none over the divider, none off the frame.
fn check_texts(tree: &usvg::Tree) {
    let texts = texts(tree);
    assert!(texts.len() > 10);
    for (i, (text, b)) in texts.iter().enumerate() {
        let (l, t, r, u) =
            (f64::from(b.left()), f64::from(b.top()), f64::from(b.right()), f64::from(b.bottom()));
        assert!(l > FRAME.x0 && t > FRAME.y0 && r < FRAME.x1 && u < FRAME.y1, "{text} {b:?}");
        assert!(r < DIVIDER || l > DIVIDER, "{text} {b:?}");
        for (other, c) in texts.iter().skip(i + 1) {
            let apart = b.right() <= c.left()
                || c.right() <= b.left()
                || b.bottom() <= c.top()
                || c.bottom() <= b.top();
            assert!(apart, "{text} {b:?} over {other} {c:?}");
        }
    }
}

/// A pocket whose material is outside, its island never visited.
fn pocket() -> Report {
    let mut report = sample::failing();
    report.drawing.keep = Keep::Outside;
    let island = sample::finding(Kind::Excess, 4.0, Point::new(34.0, 25.0));
    let contour = Some(crate::compare::ContourStretch { path: 1, from: 0.0, to: 56.5486 });
    report.findings = vec![crate::findings::Finding { contour, ..island }];
    report
}

/// An open chain with its material on the right.
fn open_chain() -> Report {
    let mut report = sample::passing();
    let rounded = sample::rounded(0.0);
    let chain = Path::new(rounded.into_iter().take(5).collect(), false).expect("a chain");
    report.drawing.contour = Contour::new(vec![chain], 0.0).expect("a contour");
    report.drawing.keep = Keep::Left;
    report.inputs.part = "an-unusually-long-name-of-a-drawing-file-that-does-not-fit-anywhere.dxf".into();
    report
}

/// As much to say in the column as it can ever get.
fn wordy() -> Report {
    let mut report = sample::crowded(12);
    report.limits.assumed = true;
    report.inputs.allowance = 0.123_456;
    let tool = |number| crate::findings::Tool { number, diameter: 12.345_678 };
    report.inputs.tools = (101..125).map(tool).collect();
    let far = "shifted by X-12345.678901 Y-98765.432101".to_owned();
    report.inputs.placement = vec!["mirrored about the drawing's y axis".into(), far.clone(), far];
    report.inputs.program = "programs/".to_owned() + &"W".repeat(90) + ".nc";
    for f in &mut report.findings {
        f.figure.size *= 123_456.0;
        f.blocks.iter_mut().for_each(|b| b.line = 12_345_678);
        f.decided = false;
    }
    report.findings.push(sample::finding(Kind::Fold, 0.5, Point::new(3.0, 4.0)));
    report.verdict = crate::findings::Verdict::Undecided;
    report
}

#[test]
fn no_text_overlaps_or_is_cut_off() {
    let mut inch = sample::undecided();
    inch.unit = Unit::Inch;
    for (name, report) in [
        ("failing", sample::failing()),
        ("passing", sample::passing()),
        ("undecided", inch),
        ("crowded", sample::crowded(40)),
        ("overcrowded", sample::crowded(300)),
        ("pocket", pocket()),
        ("open-chain", open_chain()),
        ("wordy", wordy()),
    ] {
        check_texts(&picture(name, &render(&report)));
    }
}

#[test]
fn the_swept_edge_has_its_own_sheet() {
    let sample = sample::swept();
    let edge = SweptEdge { region: &sample.region, family: &sample.family, program: &sample.program };
    check_texts(&picture("swept-edge", &render_swept(&edge)));
}

#[test]
fn every_shown_finding_has_its_balloon_and_number() {
    let document = render(&sample::failing());
    for number in 1..=5 {
        assert!(document.contains(&format!("id=\"se-balloon-{number}\"")));
        assert!(document.contains(&format!("id=\"se-finding-{number}\"")));
    }
    let many = render(&sample::crowded(300));
    assert_eq!(many.matches("id=\"se-balloon-").count(), leaders::MOST);
    assert_eq!(many.matches("id=\"se-finding-").count(), 300);
    assert!(many.contains("more, all in the JSON report"));
}

#[test]
fn arcs_are_drawn_as_arcs_and_faults_hatched_both_ways() {
    let document = render(&sample::failing());
    let contour = document.lines().find(|l| l.contains("se-contour")).expect("the contour");
    assert_eq!((contour.matches('A').count(), contour.matches('L').count()), (4 + 3, 4));
    assert!(document.contains("rotate(45)") && document.contains("rotate(-45)"));
    assert!(document.contains("url(#se-too-deep)") && document.contains("url(#se-left-standing)"));
    assert!(document.contains("stroke-dasharray=\"1.6 1\""));
}

/// The pixel at a point of the drawing.
fn pixel(report: &Report, p: Point) -> (u8, u8, u8) {
    let tree = laid_out(&render(report));
    let scale = 4.0;
    let to_mm = SHEET.width() / f64::from(tree.size().width());
    let mut pixels = tiny_skia::Pixmap::new(1188, 840).expect("a picture");
    let zoom = (scale * to_mm) as f32;
    resvg::render(&tree, tiny_skia::Transform::from_scale(zoom, zoom), &mut pixels.as_mut());
    let at = Map::fitting(bounds(report)).point(p);
    let c = pixels.pixel((at.x * scale) as u32, (at.y * scale) as u32).expect("on the sheet");
    (c.red(), c.green(), c.blue())
}

#[test]
fn material_is_filled_on_its_own_side_only() {
    let material = (0xe9, 0xe7, 0xe2);
    // What the sample's cutter covers is tinted, and material covers the tint.
    let cut = (0xdc, 0xeb, 0xf1);
    let (inside, hole) = (Point::new(55.0, 35.0), Point::new(25.0, 27.0));
    assert_eq!(pixel(&sample::passing(), inside), material);
    assert_eq!(pixel(&sample::passing(), hole), cut);
    // Neither material nor cut.
    assert_eq!(pixel(&pocket(), inside), (255, 255, 255));
    assert_eq!(pixel(&pocket(), Point::new(-8.0, 58.0)), material);
}

#[test]
fn what_is_too_small_to_see_gets_a_ring_and_what_is_large_does_not() {
    let report = sample::failing();
    let map = Map::fitting(bounds(&report));
    let rings: Vec<bool> = report.findings.iter().map(|f| drawing::needs_ring(f, &map)).collect();
    assert_eq!(rings, [true, true, false, true, true]);
}

#[test]
fn names_from_files_cannot_break_the_document() {
    let mut report = sample::failing();
    report.inputs.part = "a<b>&\"c'\u{0}\u{1b}\u{202e}.dxf".into();
    if let Some(f) = report.findings.first_mut() {
        f.message = "]]><script>alert(1)</script>\u{ffff}".into();
    }
    let document = render(&report);
    assert!(!document.contains("<script"));
    assert!(roxmltree::Document::parse(&document).is_ok());
}

#[test]
fn far_rapids_are_cut_off_and_do_not_shrink_the_part() {
    let mut report = sample::passing();
    let near = Map::fitting(bounds(&report)).scale;
    report.drawing.rapids.push(Segment::line(Point::new(0.0, 0.0), Point::new(5000.0, 9000.0)));
    assert!((Map::fitting(bounds(&report)).scale - near).abs() < 1e-12);
    assert!(render(&report).contains("clip-path=\"url(#se-inside)\""));
}

#[test]
fn the_same_report_gives_the_same_drawing() {
    assert_eq!(render(&sample::crowded(50)), render(&sample::crowded(50)));
}
