//! The plan view: looking down the tool axis at one height.
//!
//! The cutter is present at the height `level` while its tip is below it; there it shows a disc about
//! its axis. A move that crosses the level counts only with its part below. What the discs leave is
//! the same at every height for a cutter that does not change its radius.

use crate::cutter::Cutter;
use crate::geometry::{Arc, Point, Segment, Vec2};
use crate::program::{BlockId, Motion, Move, MoveIndex, MoveKind, Plane, Point3, Program};

use super::{DiscFamily, DiscMove};

/// What the cutter shows at one height.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct PlanView {
    /// Moves at feed rate: they cut.
    pub cutting: DiscFamily,
    /// Rapid moves below the level: they must not meet the part. Empty where the program never says Z.
    pub rapids: DiscFamily,
}

/// Why a program has no plan view.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PlanError {
    /// A move below the level is made by a tool of which nothing is known.
    UnknownTool {
        /// Number of the tool.
        tool: u32,
        /// The block of its first move.
        block: BlockId,
    },
    /// A helix about X or Y projects on no line and no arc.
    TiltedHelix {
        /// Its block.
        block: BlockId,
    },
}

/// The plan view of `program` at height `level`, each move with the cutter that `cutter_of` knows for
/// its tool. Where the program never says Z, every feed move counts.
///
/// # Errors
/// When a counted move has no cutter, or is a helix about X or Y.
pub fn plan(
    program: &Program,
    level: f64,
    cutter_of: impl Fn(u32) -> Option<Cutter>,
) -> Result<PlanView, PlanError> {
    let level = if program.says_z { level } else { f64::INFINITY };
    let mut view = PlanView::default();
    view.cutting.moves.reserve(program.moves.len());
    let mut pieces = Vec::new();
    for (source, m) in (0u32..).zip(&program.moves) {
        if m.kind == MoveKind::Rapid && !program.says_z {
            continue;
        }
        pieces.clear();
        below(m, level, &mut pieces)?;
        if pieces.is_empty() {
            continue;
        }
        let cutter = cutter_of(m.tool).ok_or(PlanError::UnknownTool { tool: m.tool, block: m.block })?;
        let family = if m.kind == MoveKind::Feed { &mut view.cutting } else { &mut view.rapids };
        let tip = lowest(&m.motion);
        let radius = cutter.radius_at((level - tip).max(0.0));
        family.moves.extend(pieces.iter().map(|&segment| DiscMove {
            segment,
            radius,
            source: MoveIndex(source),
        }));
    }
    view.cutting.moves.shrink_to_fit();
    Ok(view)
}

/// Lowest height of the tip at the ends of a motion.
fn lowest(motion: &Motion) -> f64 {
    motion.start().z.min(motion.end().z)
}

/// The parts of the centre's path while the tip is below `level`.
fn below(m: &Move, level: f64, out: &mut Vec<Segment>) -> Result<(), PlanError> {
    match m.motion {
        Motion::Straight { start, end } => {
            if let Some((from, to)) = interval_below(start.z, end.z, level) {
                let line = Segment::line(start.plan(), end.plan());
                out.push(if from <= 0.0 && to >= 1.0 { line } else { line.part(from, to) });
            }
        }
        Motion::Circular { plane: Plane::Xy, arc, along } => {
            if let Some((from, to)) = interval_below(along.0, along.1, level) {
                out.push(Segment::Arc(if from <= 0.0 && to >= 1.0 { arc } else { arc.part(from, to) }));
            }
        }
        Motion::Circular { plane, arc, along } => {
            if (along.0 - along.1).abs() > 0.0 {
                return Err(PlanError::TiltedHelix { block: m.block });
            }
            upright(plane, &arc, along.0, level, out);
        }
    }
    Ok(())
}

/// Parameters between which a height that runs linearly from `a` to `b` is below `level`.
fn interval_below(a: f64, b: f64, level: f64) -> Option<(f64, f64)> {
    let cross = || (level - a) / (b - a);
    match (a < level, b < level) {
        (true, true) => Some((0.0, 1.0)),
        (false, false) => None,
        (true, false) => Some((0.0, cross())),
        (false, true) => Some((cross(), 1.0)),
    }
}

/// An arc in an upright plane projects on a straight line: split where it crosses the level and where
/// its projection turns back, and keep what is below.
fn upright(plane: Plane, arc: &Arc, along: f64, level: f64, out: &mut Vec<Segment>) {
    let (up, flat) = match plane {
        Plane::Zx => (Vec2::new(1.0, 0.0), Vec2::new(0.0, 1.0)),
        Plane::Xy | Plane::Yz => (Vec2::new(0.0, 1.0), Vec2::new(1.0, 0.0)),
    };
    let mut cuts = vec![0.0, 1.0];
    let mut cut = |v: Vec2| {
        if arc.faces(v) {
            cuts.push(arc.parameter_of(v).clamp(0.0, 1.0));
        }
    };
    cut(flat);
    cut(-flat);
    let rise = level - arc.center().to_vec2().dot(up);
    let half = arc.radius() * arc.radius() - rise * rise;
    if half > 0.0 && rise.is_finite() {
        cut(up * rise + flat * half.sqrt());
        cut(up * rise - flat * half.sqrt());
    }
    cuts.sort_by(f64::total_cmp);
    let plan_point = |t: f64| -> Point { plane.point(arc.point_at(t), along).plan() };
    let height = |p: Point3| p.z;
    for (&from, &to) in cuts.iter().zip(cuts.iter().skip(1)) {
        let middle = plane.point(arc.point_at(0.5 * (from + to)), along);
        if to > from && height(middle) < level {
            out.push(Segment::line(plan_point(from), plan_point(to)));
        }
    }
}
