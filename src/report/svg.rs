//! The picture: part, swept edge and faults on one A4 sheet, in the manner of a shop drawing.
//!
//! Faults are numbered as in the other reports. Purple and one hatching say cut too deep, orange and
//! the other say left standing. Lines are lines and arcs are arcs; nothing is drawn as chords.

mod column;
mod drawing;
mod hatch;
mod leaders;
mod legend;
mod lettering;
mod page;
mod scale;
mod trace;

use svg::Document;
use svg::node::element::{ClipPath, Definitions, Description, Group, Line, Rectangle, Title};

use crate::findings::Report;
use crate::geometry::{Point, Rect};

use super::{SweptEdge, headline, plain};
use hatch::{INK, RULE};
use legend::Entry;
use page::{DIVIDER, FRAME, Map, SHEET, mm};

/// The drawing of a report, a whole SVG document.
#[must_use]
pub fn render(report: &Report) -> String {
    let map = Map::fitting(bounds(report));
    let drawn = &report.drawing;
    let mut inside = clipped()
        // Material covers the tint: what is left of it in sight was free to be cut.
        .add(drawing::swept_region(&drawn.swept, &map))
        .add(drawing::material(drawn, &map))
        .add(drawing::cutter_path(&drawn.path, &drawn.rapids, &map))
        // Where the edge follows the contour, as it should, it shows as a bright core in the dark line.
        .add(drawing::contour(drawn, &map))
        .add(drawing::swept_edge(&drawn.swept, &map));
    if let Some(datum) = drawing::datum(&map) {
        inside = inside.add(datum);
    }
    // The worst stand first in the list and are drawn last, on top.
    for (finding, number) in report.findings.iter().zip(1..).collect::<Vec<_>>().into_iter().rev() {
        inside = inside.add(drawing::finding(finding, number, report, &map));
    }
    let anchors: Vec<Point> = report.findings.iter().map(|f| map.point(f.at)).collect();
    let mut balloons = Group::new().set("id", "se-balloons");
    for ((finding, leader), number) in report.findings.iter().zip(leaders::place(&anchors)).zip(1..) {
        balloons = balloons.add(drawing::balloon(finding, number, &leader, &map));
    }
    let title = format!("{}: {}", report.verdict.name(), headline(report));
    let document = sheet(&title, &format!("{} cut by {}", report.inputs.part, report.inputs.program))
        .add(inside)
        .add(balloons)
        .add(scale::axes())
        .add(scale::bar(&map, report.unit))
        .add(column::of_report(report, &legend::entries(report, &map)));
    finish(&document)
}

/// The drawing of a swept edge alone, a whole SVG document.
#[must_use]
pub fn render_swept(edge: &SweptEdge<'_>) -> String {
    let boxes = edge.region.loops.iter().map(crate::envelope::EdgeLoop::bounds);
    let map = Map::fitting(boxes.reduce(|a, b| a.union(b)).unwrap_or(Rect::ZERO));
    let path: Vec<_> = edge.family.moves.iter().map(|m| m.segment).collect();
    let mut inside = clipped()
        .add(drawing::swept_region(edge.region, &map))
        .add(drawing::cutter_path(&path, &[], &map))
        .add(drawing::swept_edge(edge.region, &map));
    let mut entries = vec![Entry::Swept, Entry::Path];
    if let Some(datum) = drawing::datum(&map) {
        inside = inside.add(datum);
        entries.push(Entry::Zero);
    }
    let document = sheet("Swept edge", &format!("left by {}", edge.program.file))
        .add(inside)
        .add(scale::axes())
        .add(scale::bar(&map, edge.program.unit))
        .add(column::of_swept(edge, &entries));
    finish(&document)
}

/// Everything that must be in sight. Rapids may come from far away and are cut off at the border.
fn bounds(report: &Report) -> Rect {
    let drawing = &report.drawing;
    let edge = drawing.swept.loops.iter().map(crate::envelope::EdgeLoop::bounds);
    let path = drawing.path.iter().map(crate::geometry::Segment::bounds);
    let found = report.findings.iter().map(|f| Rect::from_points(f.at, f.at));
    edge.chain(path).chain(found).fold(drawing.contour.bounds(), |a, b| a.union(b))
}

/// The empty sheet with its frame.
fn sheet(title: &str, description: &str) -> Document {
    let clip = ClipPath::new().set("id", "se-inside").add(drawing::clip());
    let definitions: Definitions = hatch::definitions().add(clip);
    let paper = Rectangle::new().set("width", mm(SHEET.width())).set("height", mm(SHEET.height()));
    let frame = Rectangle::new()
        .set("x", mm(FRAME.x0))
        .set("y", mm(FRAME.y0))
        .set("width", mm(FRAME.width()))
        .set("height", mm(FRAME.height()))
        .set("fill", "none")
        .set("stroke", INK)
        .set("stroke-width", 0.5);
    let divider = Line::new()
        .set("x1", mm(DIVIDER))
        .set("x2", mm(DIVIDER))
        .set("y1", mm(FRAME.y0))
        .set("y2", mm(FRAME.y1))
        .set("stroke", RULE)
        .set("stroke-width", 0.25);
    Document::new()
        .set("viewBox", format!("0 0 {} {}", mm(SHEET.width()), mm(SHEET.height())))
        .set("width", format!("{}mm", mm(SHEET.width())))
        .set("height", format!("{}mm", mm(SHEET.height())))
        .set("font-family", lettering::FAMILY)
        .set("role", "img")
        .add(Title::new(plain(title)))
        .add(Description::new().add(svg::node::Text::new(plain(description))))
        .add(definitions)
        .add(paper.set("fill", "#ffffff"))
        .add(frame)
        .add(divider)
}

fn clipped() -> Group {
    Group::new().set("clip-path", "url(#se-inside)")
}

fn finish(document: &Document) -> String {
    let mut text = document.to_string();
    text.push('\n');
    text
}

#[cfg(test)]
mod tests;
