//! A part, a program and a comparison made by hand. Move i of the program stands in line 10 + i.

use crate::compare::{Comparison, ContourStretch, Excess, Figure, Fold, FoldKind, Gouge};
use crate::findings::{Facts, Finding, Judgement, Limits, judge};
use crate::geometry::{Arc, Contour, Path, Point, Segment, Turn};
use crate::part::{Keep, Origin, Part};
use crate::program::{BlockId, Blocks, Motion, Move, MoveIndex, MoveKind, Plane, Point3, Program, Unit};
use crate::view::{DiscFamily, DiscMove};

pub fn p(x: f64, y: f64) -> Point {
    Point::new(x, y)
}

pub fn lines(points: &[Point]) -> Vec<Segment> {
    points.windows(2).map(|w| Segment::line(w[0], w[1])).collect()
}

pub fn polygon(points: &[Point]) -> Path {
    let mut round = points.to_vec();
    round.push(points[0]);
    Path::new(lines(&round), true).unwrap()
}

pub fn rectangle(x0: f64, y0: f64, x1: f64, y1: f64) -> Path {
    polygon(&[p(x0, y0), p(x1, y0), p(x1, y1), p(x0, y1)])
}

pub fn arc(center: Point, start: Point, end: Point, turn: Turn) -> Segment {
    Segment::Arc(Arc::from_center(center, start, end, turn, 1e-9).unwrap())
}

pub fn circle(center: Point, radius: f64) -> Path {
    let start = p(center.x + radius, center.y);
    Path::new(vec![arc(center, start, start, Turn::Left)], true).unwrap()
}

pub fn part(paths: Vec<Path>, keep: Keep, allowance: f64) -> Part {
    let origins = vec![Origin { file: "plate.dxf".into(), ..Origin::default() }; paths.len()];
    Part::new(Contour::new(paths, 0.0).unwrap(), keep, allowance, origins).unwrap()
}

/// All that a judgement needs.
pub struct Case {
    pub part: Part,
    pub program: Program,
    pub cutting: DiscFamily,
    pub rapids: DiscFamily,
    pub comparison: Comparison,
    pub limits: Limits,
    pub unit: Unit,
}

impl Case {
    /// A program that runs along `cuts` with a cutter of radius `radius`, and nothing found yet.
    pub fn new(part: Part, cuts: &[Segment], radius: f64) -> Self {
        let mut case = Self {
            part,
            program: Program {
                file: "plate.nc".into(),
                unit: Unit::Millimetre,
                unit_stated: true,
                says_z: true,
                blocks: Blocks::default(),
                moves: Vec::new(),
                bound: 0.0,
            },
            cutting: DiscFamily::default(),
            rapids: DiscFamily::default(),
            comparison: Comparison {
                worst_gouge: Some(figure(0.0)),
                worst_excess: Some(figure(0.0)),
                ..Comparison::default()
            },
            limits: Limits { gouge: 0.02, excess: 0.05, cusp: 0.01, assumed: false },
            unit: Unit::Millimetre,
        };
        for segment in cuts {
            case.command(*segment, radius, MoveKind::Feed);
        }
        case
    }

    /// One more move.
    pub fn command(&mut self, segment: Segment, radius: f64, kind: MoveKind) {
        let i = self.program.moves.len();
        let source = MoveIndex(u32::try_from(i).unwrap());
        let end = segment.end();
        let text = format!("N{i} X{} Y{}", end.x, end.y);
        self.program.blocks.push(10 + i, &text);
        let at = |p: Point| Point3 { x: p.x, y: p.y, z: -1.0 };
        let motion = match segment {
            Segment::Line(l) => Motion::Straight { start: at(l.start), end: at(l.end) },
            Segment::Arc(arc) => Motion::Circular { plane: Plane::Xy, arc, along: (-1.0, -1.0) },
        };
        self.program.moves.push(Move { motion, kind, tool: 1, block: BlockId(source.0) });
        let family = if kind == MoveKind::Feed { &mut self.cutting } else { &mut self.rapids };
        family.moves.push(DiscMove::constant(segment, radius, source));
    }

    pub fn judge(&self) -> Judgement {
        judge(&Facts {
            part: &self.part,
            program: &self.program,
            cutting: &self.cutting,
            rapids: &self.rapids,
            comparison: &self.comparison,
            limits: self.limits,
            unit: self.unit,
            top: 0.0,
        })
    }

    /// The one finding.
    pub fn only(&self) -> Finding {
        let mut findings = self.judge().findings;
        assert_eq!(findings.len(), 1, "{findings:#?}");
        let finding = findings.remove(0);
        assert!(!finding.message.is_empty() && !finding.remedy.is_empty());
        assert!(!finding.blocks.is_empty() && finding.blocks.len() <= 5);
        finding
    }
}

pub fn figure(size: f64) -> Figure {
    Figure { size, bound: 1e-9 }
}

/// A gouge by one move.
pub fn gouge(depth: f64, center: Point, at: Point, worst_move: usize, stretch: ContourStretch) -> Gouge {
    Gouge {
        depth: figure(depth),
        center,
        at,
        worst_move,
        moves: (worst_move, worst_move),
        center_inside: false,
        stretch,
        region: None,
    }
}

pub fn excess(height: f64, at: Point, nearest_move: usize, stretch: ContourStretch) -> Excess {
    Excess {
        height: figure(height),
        at,
        stretch: Some(stretch),
        nearest_move,
        crest: None,
        whole_path: false,
        region: None,
    }
}

pub fn stretch(path: usize, from: f64, to: f64) -> ContourStretch {
    ContourStretch { path, from, to }
}

pub fn fold(kind: FoldKind, moves: (usize, usize), at: Point, radius: f64) -> Fold {
    Fold { kind, moves, at, radius }
}

/// Does `text` hold every one of `parts`? Says which one it lacks.
pub fn holds(text: &str, parts: &[&str]) {
    for part in parts {
        assert!(text.contains(part), "no {part:?} in {text:?}");
    }
}
