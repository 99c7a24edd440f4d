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
    /// Rapid moves below the level: they must not meet the part. Left out are those straight up from where
    /// the tool has just been, which sweep nothing new. Empty where the program never says Z.
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
        if rises_in_place(program, source, m) {
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
        family
            .moves
            .extend(pieces.iter().map(|&segment| DiscMove::constant(segment, radius, MoveIndex(source))));
    }
    view.cutting.moves.shrink_to_fit();
    Ok(view)
}

/// A rapid straight up from where the same tool has just been: it sweeps nothing new, and what the move
/// before did there is told of that move.
fn rises_in_place(program: &Program, source: u32, m: &Move) -> bool {
    let (start, end) = (m.motion.start(), m.motion.end());
    let before =
        usize::try_from(source).ok().and_then(|i| i.checked_sub(1)).and_then(|i| program.moves.get(i));
    m.kind == MoveKind::Rapid
        && start.plan() == end.plan()
        && end.z >= start.z
        && before.is_some_and(|b| b.tool == m.tool && b.motion.end() == start)
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

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::Turn;
    use crate::program::{Block, Unit};

    fn at(x: f64, y: f64, z: f64) -> Point3 {
        Point3 { x, y, z }
    }

    /// Straight moves through the points, each with its kind and tool.
    fn straight(start: Point3, to: &[(Point3, MoveKind, u32)]) -> Program {
        let mut from = start;
        let step = |&(end, kind, tool): &(Point3, MoveKind, u32)| {
            let motion = Motion::Straight { start: from, end };
            from = end;
            Move { motion, kind, tool, block: BlockId(0) }
        };
        of(to.iter().map(step).collect())
    }

    fn of(moves: Vec<Move>) -> Program {
        Program {
            file: "a.nc".into(),
            unit: Unit::Millimetre,
            unit_stated: true,
            says_z: true,
            blocks: std::iter::once(Block { line: 1, text: "G1" }).collect(),
            moves,
            bound: 0.0,
        }
    }

    fn seen(program: &Program, level: f64) -> PlanView {
        plan(program, level, |_| Cutter::flat(10.0).ok()).unwrap()
    }

    #[test]
    fn a_rapid_straight_up_from_the_end_of_a_cut_sweeps_nothing_but_one_of_another_tool_does() {
        use MoveKind::{Feed, Rapid};
        let cut = [(at(0.0, 0.0, -5.0), Feed, 1), (at(0.0, 0.0, 5.0), Rapid, 1)];
        assert!(seen(&straight(at(0.0, 0.0, 5.0), &cut), 0.0).rapids.moves.is_empty());
        let other = [(at(0.0, 0.0, -5.0), Feed, 1), (at(0.0, 0.0, 5.0), Rapid, 2)];
        assert_eq!(seen(&straight(at(0.0, 0.0, 5.0), &other), 0.0).rapids.moves.len(), 1);
        let down = [(at(0.0, 0.0, -5.0), Rapid, 1)];
        assert_eq!(seen(&straight(at(0.0, 0.0, 5.0), &down), 0.0).rapids.moves.len(), 1);
        let slanted = [(at(0.0, 0.0, -5.0), Feed, 1), (at(9.0, 0.0, 5.0), Rapid, 1)];
        assert_eq!(seen(&straight(at(0.0, 0.0, 5.0), &slanted), 0.0).rapids.moves.len(), 1);
    }

    #[test]
    fn a_ramp_counts_only_from_where_it_dips_below_the_level() {
        let ramp = straight(at(0.0, 0.0, 1.0), &[(at(40.0, 0.0, -3.0), MoveKind::Feed, 1)]);
        let view = seen(&ramp, 0.0);
        assert_eq!(
            view.cutting.moves[0].segment,
            Segment::line(Point::new(10.0, 0.0), Point::new(40.0, 0.0))
        );
        assert!(seen(&ramp, -3.0).cutting.moves.is_empty());
    }

    #[test]
    fn half_of_a_helix_that_crosses_the_level_halfway_is_half_a_turn() {
        let arc = Arc::full_circle(Point::ORIGIN, Point::new(10.0, 0.0), Turn::Left).unwrap();
        let motion = Motion::Circular { plane: Plane::Xy, arc, along: (1.0, -1.0) };
        let view = seen(&of(vec![Move { motion, kind: MoveKind::Feed, tool: 1, block: BlockId(0) }]), 0.0);
        let [m] = view.cutting.moves.as_slice() else { panic!("{view:?}") };
        assert!((m.segment.length() - 10.0 * std::f64::consts::PI).abs() < 1e-12);
        assert!((m.segment.start() - Point::new(-10.0, 0.0)).hypot() < 1e-12);
    }
}
