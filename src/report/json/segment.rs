//! Lines, arcs and loops as the envelope format writes them.

use serde::Serialize;

use super::Number;
use crate::geometry::{self, Path, Point, Turn};
use crate::program::Unit;
use crate::report::SweptEdge;

/// A point as `[x, y]`.
pub type Xy = [Number; 2];

/// `point` as `[x, y]`.
pub const fn xy(point: Point) -> Xy {
    [Number(point.x), Number(point.y)]
}

/// `{"line": ...}` or `{"arc": ...}`.
#[derive(Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Segment {
    Line { from: Xy, to: Xy },
    Arc { from: Xy, to: Xy, center: Xy, radius: Number, ccw: bool },
}

impl Segment {
    pub fn of(segment: &geometry::Segment) -> Self {
        let (from, to) = (xy(segment.start()), xy(segment.end()));
        match segment {
            geometry::Segment::Line(_) => Self::Line { from, to },
            geometry::Segment::Arc(a) => Self::Arc {
                from,
                to,
                center: xy(a.center()),
                radius: Number(a.radius()),
                ccw: a.turn() == Turn::Left,
            },
        }
    }
}

/// The segments of each path of an outline.
pub fn outline(paths: &[Path]) -> Vec<Vec<Segment>> {
    paths.iter().map(|p| p.segments().iter().map(Segment::of).collect()).collect()
}

/// The `envelope` command's answer.
#[derive(Serialize)]
pub struct Envelope<'a> {
    format: &'static str,
    version: u32,
    units: &'static str,
    program: &'a str,
    area: Number,
    perimeter: Number,
    bound: Number,
    loops: Vec<Loop<'a>>,
}

#[derive(Serialize)]
struct Loop<'a> {
    area: Number,
    closed: bool,
    segments: Vec<Piece<'a>>,
}

#[derive(Serialize)]
struct Piece<'a> {
    #[serde(flatten)]
    segment: Segment,
    #[serde(rename = "move")]
    source: Option<u32>,
    block: Option<Block<'a>>,
}

#[derive(Serialize)]
struct Block<'a> {
    file: &'a str,
    line: usize,
}

impl<'a> Envelope<'a> {
    pub fn of(edge: &SweptEdge<'a>) -> Self {
        let unit: Unit = edge.program.unit;
        let piece = |p: &crate::envelope::EdgePiece| {
            let source = edge.source(p);
            let block = source.and_then(|m| edge.block(m));
            Piece {
                segment: Segment::of(&p.segment),
                source: source.map(|m| m.0),
                block: block.map(|b| Block { file: &edge.program.file, line: b.line }),
            }
        };
        let loops = edge.region.loops.iter().map(|l| Loop {
            area: Number(l.signed_area()),
            closed: true,
            segments: l.pieces.iter().map(piece).collect(),
        });
        Self {
            format: "sweptedge-envelope",
            version: 1,
            units: unit.sign(),
            program: &edge.program.file,
            area: Number(edge.region.area()),
            perimeter: Number(edge.region.perimeter()),
            bound: Number(edge.region.bound),
            loops: loops.collect(),
        }
    }
}
