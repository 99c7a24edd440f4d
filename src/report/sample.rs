//! Hand-made reports for the renderers' tests. Every figure in them is invented; only the shapes have
//! to fit together.

use crate::compare::{ContourStretch, Figure, Region};
use crate::envelope::{EdgeLoop, EdgePiece, SweptRegion};
use crate::findings::{
    BlockRef, Cause, Drawing, Finding, Inputs, Kind, Limits, Report, Severity, SweptSummary, Tool, Verdict,
    Worst,
};
use crate::geometry::{Arc, Contour, Path, Point, Segment, Turn};
use crate::input::{Place, Problem};
use crate::part::Keep;
use crate::program::{Block, BlockId, Motion, Move, MoveIndex, MoveKind, Point3, Program, Unit};
use crate::view::{DiscFamily, DiscMove};

fn p(x: f64, y: f64) -> Point {
    Point::new(x, y)
}

fn arc(center: Point, start: Point, end: Point, turn: Turn) -> Segment {
    Segment::Arc(Arc::from_center(center, start, end, turn, 1e-9).expect("a sample arc"))
}

/// A rectangle with rounded corners, counter-clockwise, grown by `by` about the 80 x 50 part.
pub fn rounded(by: f64) -> Vec<Segment> {
    let r = 8.0 + by;
    let (x0, y0, x1, y1) = (-by, -by, 80.0 + by, 50.0 + by);
    vec![
        Segment::line(p(x0 + r, y0), p(x1 - r, y0)),
        arc(p(x1 - r, y0 + r), p(x1 - r, y0), p(x1, y0 + r), Turn::Left),
        Segment::line(p(x1, y0 + r), p(x1, y1 - r)),
        arc(p(x1 - r, y1 - r), p(x1, y1 - r), p(x1 - r, y1), Turn::Left),
        Segment::line(p(x1 - r, y1), p(x0 + r, y1)),
        arc(p(x0 + r, y1 - r), p(x0 + r, y1), p(x0, y1 - r), Turn::Left),
        Segment::line(p(x0, y1 - r), p(x0, y0 + r)),
        arc(p(x0 + r, y0 + r), p(x0, y0 + r), p(x0 + r, y0), Turn::Left),
    ]
}

/// A whole circle.
pub fn circle(center: Point, radius: f64, turn: Turn) -> Segment {
    let start = p(center.x + radius, center.y);
    Segment::Arc(Arc::full_circle(center, start, turn).expect("a sample circle"))
}

fn edge_loop(segments: Vec<Segment>) -> EdgeLoop {
    EdgeLoop { pieces: segments.into_iter().map(|segment| EdgePiece { segment, source: 0 }).collect() }
}

fn closed(segments: Vec<Segment>) -> Path {
    Path::new(segments, true).expect("a sample loop")
}

/// The lens between the part's lower edge and an arc that dips 0.31 into it.
fn bite() -> Region {
    let (a, b) = (p(38.0, 0.0), p(46.0, 0.0));
    let dip = Arc::from_bulge(b, a, 0.0775).expect("a sample arc");
    Region { area: 1.65, outline: vec![closed(vec![Segment::line(a, b), Segment::Arc(dip)])] }
}

fn remainder() -> Region {
    let (a, b, c) = (p(80.0, 42.0), p(80.0, 50.0), p(72.0, 50.0));
    let outline =
        closed(vec![Segment::line(a, b), Segment::line(b, c), arc(p(72.0, 42.0), c, a, Turn::Right)]);
    Region { area: 13.7, outline: vec![outline] }
}

fn block(line: usize, text: &str) -> BlockRef {
    BlockRef { file: "bracket.nc".into(), line, text: text.into() }
}

/// A finding of `kind` at a place.
pub fn finding(kind: Kind, size: f64, at: Point) -> Finding {
    let note = kind == Kind::Fold;
    Finding {
        kind,
        severity: if note { Severity::Note } else { Severity::Fault },
        figure: Figure { size, bound: 1e-9 },
        limit: (!note).then_some(0.02),
        decided: true,
        at,
        center: Some(p(at.x, at.y - 5.0)),
        region: None,
        contour: None,
        blocks: vec![block(41, "N190 G1 X42. Y-4.69")],
        cause: Cause::Unknown,
        message: format!("The {} here is {size:.4} mm.", kind.name()),
        remedy: "Look at the block named and at the offset it was made with.".into(),
    }
}

fn first_finding() -> Finding {
    Finding {
        region: Some(bite()),
        contour: Some(ContourStretch { path: 0, from: 30.2, to: 34.9 }),
        cause: Cause::FoldLeftInPath,
        message: "The offset path folds over itself in the inside corner and its loop was left in, so the \
                  cutter bites 0.3100 mm into the lower edge."
            .into(),
        remedy:
            "Take the loop between blocks N180 and N200 out of the path, or use a cutter of 6 mm or less."
                .into(),
        ..finding(Kind::Gouge, 0.31, p(42.0, 0.0))
    }
}

fn inputs() -> Inputs {
    Inputs {
        part: "bracket.dxf".into(),
        layers: vec!["FINISHED".into()],
        loops: 2,
        chains: 0,
        keep: "inside",
        keep_assumed: true,
        curve_bound: 0.0,
        allowance: 0.0,
        placement: vec!["turned by 90 degrees about the drawing's origin".into(), "shifted by X50 Y0".into()],
        program: "bracket.nc".into(),
        moves: 210,
        cutting_moves: 180,
        tools: vec![Tool { number: 1, diameter: 10.0 }],
        top: 0.0,
        level: None,
        clear: "wall",
        arc_tolerance: 0.002,
    }
}

fn drawing() -> Drawing {
    let hole = circle(p(25.0, 25.0), 9.0, Turn::Right);
    let path = rounded(5.0);
    let swept = SweptRegion {
        loops: vec![
            edge_loop(rounded(10.0)),
            edge_loop(rounded(0.01).iter().rev().map(Segment::reversed).collect()),
            edge_loop(vec![circle(p(25.0, 25.0), 8.98, Turn::Left)]),
        ],
        bound: 1e-9,
    };
    Drawing {
        contour: Contour::new(vec![closed(rounded(0.0)), closed(vec![hole])], 0.0).expect("a sample contour"),
        keep: Keep::Inside,
        swept,
        path: path.into_iter().chain([circle(p(25.0, 25.0), 3.98, Turn::Left)]).collect(),
        rapids: vec![
            Segment::line(p(-15.0, 70.0), p(8.0, -5.0)),
            Segment::line(p(8.0, -5.0), p(28.98, 25.0)),
        ],
    }
}

/// One fault of each kind and a note.
pub fn failing() -> Report {
    let excess = Finding {
        region: Some(remainder()),
        limit: Some(0.05),
        cause: Cause::InsideCorner,
        ..finding(Kind::Excess, 3.3, p(80.0, 50.0))
    };
    let cusp =
        Finding { limit: Some(0.01), cause: Cause::MissedPass, ..finding(Kind::Cusp, 0.014, p(0.0, 30.0)) };
    let rapid = Finding { cause: Cause::RapidThroughPart, ..finding(Kind::Rapid, 2.5, p(14.0, 5.0)) };
    let fold = Finding { cause: Cause::TightTurn, ..finding(Kind::Fold, 0.7, p(60.0, -5.0)) };
    let shade = Place::line("bracket.dxf", 88, "SPLINE").at(1, 6);
    Report {
        unit: Unit::Millimetre,
        verdict: Verdict::Fail,
        limits: Limits { gouge: 0.02, excess: 0.05, cusp: 0.01, assumed: false },
        worst: Worst {
            gouge: Some(Figure { size: 0.31, bound: 1e-9 }),
            excess: Some(Figure { size: 3.3, bound: 1e-9 }),
            cusp: Some(Figure { size: 0.014, bound: 1e-9 }),
        },
        findings: vec![first_finding(), rapid, excess, cusp, fold],
        swept: SweptSummary { area: 2600.5, perimeter: 611.25, loops: 3 },
        inputs: inputs(),
        warnings: vec![Problem::warning(
            shade,
            "a spline was read as arcs",
            "",
            "nothing, unless 0.0001 mm matters here",
        )],
        drawing: drawing(),
    }
}

/// Nothing over its limit.
pub fn passing() -> Report {
    let worst = Worst {
        gouge: Some(Figure { size: 0.0, bound: 1e-9 }),
        excess: Some(Figure { size: 0.03, bound: 1e-9 }),
        cusp: None,
    };
    let limits = Limits { assumed: true, ..failing().limits };
    Report { verdict: Verdict::Pass, findings: Vec::new(), warnings: Vec::new(), worst, limits, ..failing() }
}

/// A gouge whose interval holds its limit.
pub fn undecided() -> Report {
    let figure = Figure { size: 0.0199, bound: 0.003 };
    let gouge = Finding { figure, decided: false, ..finding(Kind::Gouge, 0.0199, p(42.0, 0.0)) };
    let worst = Worst { gouge: Some(figure), ..passing().worst };
    Report { verdict: Verdict::Undecided, findings: vec![gouge], worst, ..passing() }
}

/// Many faults along the part's edge, and a cluster of them at one place.
pub fn crowded(count: usize) -> Report {
    let around = |i: usize| {
        let turn = 2.399_963 * i as f64;
        if i.is_multiple_of(3) {
            p(78.0 + 0.02 * i as f64, 48.0 + turn.sin())
        } else {
            p(40.0 + 38.0 * turn.cos(), 25.0 + 23.0 * turn.sin())
        }
    };
    let kinds = [Kind::Gouge, Kind::Excess, Kind::Cusp, Kind::Rapid];
    let kind = |i: usize| *kinds.get(i % 4).expect("one of four");
    let findings = (0..count).map(|i| finding(kind(i), 1.0 / (i + 1) as f64, around(i))).collect();
    Report { findings, ..failing() }
}

/// A swept stadium with a round hole beside a full circle, and the program and family it points to.
pub struct SweptSample {
    pub region: SweptRegion,
    pub family: DiscFamily,
    pub program: Program,
}

pub fn swept() -> SweptSample {
    let stadium = vec![
        Segment::line(p(0.0, -5.0), p(30.0, -5.0)),
        arc(p(30.0, 0.0), p(30.0, -5.0), p(30.0, 5.0), Turn::Left),
        Segment::line(p(30.0, 5.0), p(0.0, 5.0)),
        arc(p(0.0, 0.0), p(0.0, 5.0), p(0.0, -5.0), Turn::Left),
    ];
    // More than half a turn, so that its bulge exceeds one: a circle less its right-hand cap.
    let (a, b) = (p(13.0, 24.0), p(13.0, 16.0));
    let most = vec![arc(p(10.0, 20.0), a, b, Turn::Left), Segment::line(b, a)];
    let region = SweptRegion {
        loops: vec![
            edge_loop(stadium),
            edge_loop(vec![circle(p(10.0, 0.0), 2.0, Turn::Right)]),
            edge_loop(most),
            edge_loop(vec![circle(p(50.0, 0.0), 5.0, Turn::Left)]),
        ],
        bound: 1e-9,
    };
    let (start, end) = (Point3::default(), Point3 { x: 30.0, y: 0.0, z: 0.0 });
    let made =
        Move { motion: Motion::Straight { start, end }, kind: MoveKind::Feed, tool: 1, block: BlockId(0) };
    let disc = DiscMove::constant(Segment::line(p(0.0, 0.0), p(30.0, 0.0)), 5.0, MoveIndex(0));
    SweptSample {
        region,
        family: DiscFamily { moves: vec![disc] },
        program: Program {
            file: "slot.nc".into(),
            unit: Unit::Millimetre,
            unit_stated: true,
            says_z: false,
            blocks: std::iter::once(Block { line: 7, text: "N10 G1 X30 Y0" }).collect(),
            moves: vec![made],
            bound: 0.0,
        },
    }
}
