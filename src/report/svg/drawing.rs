//! The drawing proper: part, path, swept edge, and each finding where it is.

use svg::node::element::{Circle, Group, Path, Rectangle, Title};

use super::hatch::{EDGE, INK, MATERIAL, PATH, RULE, SWEPT, ink};
use super::leaders::{Leader, RADIUS};
use super::lettering::{Align, text};
use super::page::{DOCKS, Map, mm};
use super::trace;
use crate::findings::{Drawing, Finding, Report, Severity};
use crate::geometry::{self, Point, Segment};
use crate::part::Keep;
use crate::report::{number, plain};

/// What is smaller than this on the sheet cannot be seen and gets a ring, mm.
const VISIBLE: f64 = 0.6;

/// Radius of that ring.
const RING: f64 = 2.0;

fn stroke(d: String, colour: &str, width: f64) -> Path {
    Path::new().set("d", d).set("fill", "none").set("stroke", colour).set("stroke-width", mm(width))
}

/// Material of the part, up to where the drawing is cut off.
pub fn material(drawing: &Drawing, map: &Map) -> Group {
    let mut group = Group::new().set("id", "se-material");
    let loops = drawing.contour.paths().iter().filter(|p| p.is_closed());
    let data: String = loops.map(|p| trace::closed(p.segments(), map)).collect();
    let outside = match drawing.keep {
        Keep::Outside => {
            format!("M{} {}H{}V{}H{}Z", mm(DOCKS.x0), mm(DOCKS.y0), mm(DOCKS.x1), mm(DOCKS.y1), mm(DOCKS.x0))
        }
        Keep::Inside | Keep::Left | Keep::Right => String::new(),
    };
    if !(data.is_empty() && outside.is_empty()) {
        let fill = Path::new().set("d", outside + &data).set("fill", MATERIAL).set("fill-rule", "evenodd");
        group = group.add(fill);
    }
    let side = match drawing.keep {
        Keep::Left => 1.0,
        Keep::Right => -1.0,
        Keep::Inside | Keep::Outside => return group,
    };
    let chains = drawing.contour.paths().iter().filter(|p| !p.is_closed());
    let ticks: String = chains.flat_map(|p| p.segments()).map(|s| tick_marks(s, side, map)).collect();
    if ticks.is_empty() { group } else { group.add(stroke(ticks, RULE, 0.25)) }
}

/// Short strokes on the material's side of an open chain, as section lines of a drawing.
fn tick_marks(segment: &Segment, side: f64, map: &Map) -> String {
    /// Distance and length of the strokes, mm on the sheet.
    const EVERY: f64 = 3.5;
    const LONG: f64 = 1.8;
    /// Enough for a segment across the sheet; a longer one lies mostly beside it.
    const MOST: f64 = 400.0;
    let count = (segment.length() * map.scale / EVERY).ceil().clamp(1.0, MOST);
    let mut data = String::new();
    let mut k = 0.5;
    while k < count {
        let at = map.point(segment.point_at(k / count));
        let normal = Map::direction(segment.left_normal_at(k / count)) * side;
        let along = Map::direction(segment.tangent_at(k / count));
        let end = at + (normal + along) * (0.71 * LONG);
        data.push_str(&format!("M{} {}L{} {}", mm(at.x), mm(at.y), mm(end.x), mm(end.y)));
        k += 1.0;
    }
    data
}

/// Outline of the part.
pub fn contour(drawing: &Drawing, map: &Map) -> Path {
    stroke(trace::paths(drawing.contour.paths(), map), INK, 0.7)
        .set("id", "se-contour")
        .set("stroke-linejoin", "round")
}

/// Swept edge, each loop closed.
pub fn swept_edge(region: &crate::envelope::SweptRegion, map: &Map) -> Path {
    stroke(loops(region, map), EDGE, 0.25).set("id", "se-swept-edge")
}

/// The swept region, tinted.
pub fn swept_region(region: &crate::envelope::SweptRegion, map: &Map) -> Path {
    Path::new().set("d", loops(region, map)).set("fill", SWEPT).set("fill-rule", "evenodd")
}

fn loops(region: &crate::envelope::SweptRegion, map: &Map) -> String {
    let one = |l: &crate::envelope::EdgeLoop| trace::closed(l.pieces.iter().map(|p| &p.segment), map);
    region.loops.iter().map(one).collect()
}

/// The path of the cutter's centre, in few pieces; rapids dashed.
pub fn cutter_path<'a>(
    path: impl IntoIterator<Item = &'a Segment>,
    rapids: impl IntoIterator<Item = &'a Segment>,
    map: &Map,
) -> Group {
    let mut group = Group::new().set("id", "se-path");
    for data in trace::long(rapids, map) {
        group = group.add(stroke(data, PATH, 0.2).set("stroke-dasharray", "1.6 1"));
    }
    for data in trace::long(path, map) {
        group = group.add(stroke(data, PATH, 0.2));
    }
    group
}

/// Program zero, where it is in sight.
pub fn datum(map: &Map) -> Option<Group> {
    let at = map.point(Point::ORIGIN);
    DOCKS.inset(-3.0).contains(at).then(|| zero_mark(at).set("id", "se-zero"))
}

/// The mark of program zero.
pub fn zero_mark(at: Point) -> Group {
    let (x, y) = (mm(at.x), mm(at.y));
    let cross = format!("M{} {y}h5M{x} {}v5", mm(at.x - 2.5), mm(at.y - 2.5));
    let ring = Circle::new().set("cx", x).set("cy", y).set("r", 1.3).set("fill", "none");
    let ring = ring.set("stroke", INK).set("stroke-width", 0.2);
    Group::new().add(ring).add(stroke(cross, INK, 0.2))
}

/// The area of a finding, or the stretch of contour it takes; a ring where that is too small to see.
pub fn finding(finding: &Finding, number: usize, report: &Report, map: &Map) -> Group {
    let ink = ink(finding.kind);
    let mut group =
        Group::new().set("id", format!("se-finding-{number}")).add(title(finding, number, report));
    if let Some(region) = &finding.region {
        let d = trace::paths(&region.outline, map);
        let area = stroke(d, ink.full, 0.25).set("fill", ink.fill).set("fill-rule", "evenodd");
        group = group.add(area.set("stroke-linejoin", "round"));
    } else if let Some(d) = taken(finding, report, map) {
        group = group.add(stroke(d, ink.full, 0.9).set("stroke-opacity", 0.75));
    }
    let at = map.point(finding.at);
    if needs_ring(finding, map) {
        let ring = Circle::new().set("cx", mm(at.x)).set("cy", mm(at.y)).set("r", RING);
        group = group.add(ring.set("fill", "none").set("stroke", ink.full).set("stroke-width", 0.45));
    }
    group
}

/// Path data of the stretch of contour that a finding takes.
fn taken(finding: &Finding, report: &Report, map: &Map) -> Option<String> {
    let stretch = finding.contour?;
    let path = report.drawing.contour.paths().get(stretch.path)?;
    Some(trace::open(&trace::stretch(path, stretch.from, stretch.to), map)).filter(|d| !d.is_empty())
}

/// Is nothing of it seen at this scale?
pub fn needs_ring(finding: &Finding, map: &Map) -> bool {
    let Some(region) = &finding.region else {
        // Then its stretch of contour is marked, which shows where that is long enough.
        return finding.contour.is_none_or(|s| (s.to - s.from) * map.scale < 4.0 * RING);
    };
    let long = region.outline.iter().map(geometry::Path::bounds).any(|b| {
        let (w, h) = (b.width() * map.scale, b.height() * map.scale);
        w.max(h) >= 2.0 * VISIBLE && w.min(h) >= VISIBLE
    });
    !(long && finding.figure.size * map.scale >= VISIBLE)
}

/// What a viewer shows when the pointer rests on a finding.
fn title(finding: &Finding, number: usize, report: &Report) -> Title {
    let size = number::figure(finding.figure, finding.limit, report.unit);
    let kind = finding.kind.name();
    Title::new(plain(&format!("{number}: {kind} {size} {}. {}", report.unit.sign(), finding.message)))
}

/// A leader and its numbered balloon.
pub fn balloon(finding: &Finding, number: usize, leader: &Leader, map: &Map) -> Group {
    let ink = ink(finding.kind);
    let Leader { anchor, dock, balloon } = *leader;
    let ring = if needs_ring(finding, map) { RING } else { 0.0 };
    let way = dock - anchor;
    let start = if way.hypot() > ring { anchor + way * (ring / way.hypot()) } else { anchor };
    let end = balloon + (dock - balloon) * (RADIUS / (dock - balloon).hypot());
    let d =
        format!("M{} {}L{} {}L{} {}", mm(start.x), mm(start.y), mm(dock.x), mm(dock.y), mm(end.x), mm(end.y));
    let mut group = Group::new().add(stroke(d, RULE, 0.2));
    if ring <= 0.0 {
        group = group.add(
            Circle::new().set("cx", mm(anchor.x)).set("cy", mm(anchor.y)).set("r", 0.6).set("fill", INK),
        );
    }
    let certain = finding.severity == Severity::Fault && finding.decided;
    let (fill, letter) = if certain { (ink.full, "#ffffff") } else { ("#ffffff", ink.full) };
    let disc = Circle::new()
        .set("id", format!("se-balloon-{number}"))
        .set("cx", mm(balloon.x))
        .set("cy", mm(balloon.y))
        .set("r", RADIUS)
        .set("fill", fill)
        .set("stroke", ink.full)
        .set("stroke-width", 0.4);
    let size = if number < 100 { 3.2 } else { 2.4 };
    let label = text(&number.to_string(), balloon.x, balloon.y + 0.36 * size, size, Align::Middle);
    group.add(disc).add(label.set("fill", letter).set("font-weight", "bold"))
}

/// Where drawing and leaders may reach.
pub fn clip() -> Rectangle {
    Rectangle::new()
        .set("x", mm(DOCKS.x0))
        .set("y", mm(DOCKS.y0))
        .set("width", mm(DOCKS.width()))
        .set("height", mm(DOCKS.height()))
}
