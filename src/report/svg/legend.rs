//! What the lines, colours and hatchings mean: only those that the drawing holds.

use svg::node::element::{Circle, Group, Line, Path, Rectangle};

use super::drawing::{datum, needs_ring, zero_mark};
use super::hatch::{EDGE, INK, MATERIAL, PATH, RULE, SWEPT, ink};
use super::lettering::{Align, SIZE, text};
use super::page::{COLUMN, Map, mm};
use crate::findings::{Kind, Severity};
use crate::geometry::Point;
use crate::part::Keep;

/// One entry.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Entry {
    /// Outline and material of the part.
    Part,
    /// Outline of an open chain with strokes on its material's side.
    Chain,
    /// Program zero.
    Zero,
    /// The swept region with its edge.
    Swept,
    /// Path of the cutter's centre.
    Path,
    /// Rapids.
    Rapids,
    /// Areas cut too deep.
    TooDeep,
    /// Areas left standing.
    LeftStanding,
    /// Rings round what is too small to see.
    Ring,
    /// Balloons of remarks and of what is undecided.
    Open,
}

/// Height of one entry.
pub const ROW: f64 = 4.6;

impl Entry {
    const fn words(self) -> &'static str {
        match self {
            Self::Part => "part: outline and material",
            Self::Chain => "part: outline, material side",
            Self::Zero => "X0 Y0",
            Self::Swept => "cut away, and the edge left",
            Self::Path => "path of the cutter's center",
            Self::Rapids => "rapid",
            Self::TooDeep => "cut too deep",
            Self::LeftStanding => "left standing",
            Self::Ring => "too small to be seen here",
            Self::Open => "open balloon: note or undecided",
        }
    }
}

/// The entries a report's drawing needs.
pub fn entries(report: &crate::findings::Report, map: &Map) -> Vec<Entry> {
    let any = |test: &dyn Fn(&crate::findings::Finding) -> bool| report.findings.iter().any(test);
    let drawing = &report.drawing;
    let chain = matches!(drawing.keep, Keep::Left | Keep::Right);
    [
        (Entry::Part, !chain),
        (Entry::Chain, chain),
        (Entry::Swept, !drawing.swept.loops.is_empty()),
        (Entry::Path, !drawing.path.is_empty()),
        (Entry::Rapids, !drawing.rapids.is_empty()),
        (Entry::TooDeep, any(&|f| matches!(f.kind, Kind::Gouge | Kind::Rapid))),
        (Entry::LeftStanding, any(&|f| matches!(f.kind, Kind::Excess | Kind::Cusp))),
        (Entry::Ring, any(&|f| needs_ring(f, map))),
        (Entry::Open, any(&|f| f.severity == Severity::Note || !f.decided)),
        (Entry::Zero, datum(map).is_some()),
    ]
    .into_iter()
    .filter_map(|(entry, shown)| shown.then_some(entry))
    .collect()
}

/// The legend with its top at `y`.
pub fn legend(entries: &[Entry], y: f64) -> Group {
    let mut group = Group::new().set("id", "se-legend");
    let mut at = y;
    for &entry in entries {
        group = group.add(sample(entry, at + 0.5 * ROW));
        group = group.add(text(entry.words(), COLUMN.x0 + 12.0, at + 0.5 * ROW + 0.95, SIZE, Align::Start));
        at += ROW;
    }
    group
}

/// The sample of an entry, centred on the height `y`.
fn sample(entry: Entry, y: f64) -> Group {
    let (x0, x1) = (COLUMN.x0, COLUMN.x0 + 9.0);
    let line = |colour: &str, width: f64| {
        let line = Line::new().set("x1", mm(x0)).set("x2", mm(x1)).set("y1", mm(y)).set("y2", mm(y));
        line.set("stroke", colour).set("stroke-width", width)
    };
    let area = |fill: &str, edge: &str, width: f64| {
        let area = Rectangle::new().set("x", mm(x0)).set("y", mm(y - 1.5)).set("width", 9).set("height", 3);
        area.set("fill", fill).set("stroke", edge).set("stroke-width", width)
    };
    let ring = |r: f64, edge: &str| {
        let ring = Circle::new().set("cx", mm(x0 + 4.5)).set("cy", mm(y)).set("r", r);
        ring.set("fill", "none").set("stroke", edge).set("stroke-width", 0.4)
    };
    let group = Group::new();
    match entry {
        Entry::Part => group.add(area(MATERIAL, INK, 0.5)),
        Entry::Chain => {
            let strokes: String =
                (1..5).map(|k| format!("M{} {}l-1.2 1.2", mm(x0 + 2.0 * f64::from(k)), mm(y))).collect();
            let strokes = Path::new().set("d", strokes).set("stroke", RULE).set("stroke-width", 0.25);
            group.add(strokes).add(line(INK, 0.5))
        }
        Entry::Zero => group.add(zero_mark(Point::new(x0 + 4.5, y))),
        Entry::Swept => group.add(area(SWEPT, EDGE, 0.3)),
        Entry::Path => group.add(line(PATH, 0.25)),
        Entry::Rapids => group.add(line(PATH, 0.25).set("stroke-dasharray", "1.6 1")),
        Entry::TooDeep => group.add(area(ink(Kind::Gouge).fill, ink(Kind::Gouge).full, 0.25)),
        Entry::LeftStanding => group.add(area(ink(Kind::Excess).fill, ink(Kind::Excess).full, 0.25)),
        Entry::Ring => group.add(ring(1.5, INK)),
        Entry::Open => group.add(ring(1.7, ink(Kind::Fold).full)),
    }
}
