//! The comparison, both ways: the cutter past the contour, and the contour not reached.
//!
//! Depths and heights are distances, never leftovers of region subtraction: two ways to the same edge
//! differ by slivers of rounding, and a distance does not see them.

mod deviation;
mod regions;
mod working_side;

pub use deviation::{DeviationSummary, deviation_summary};
pub use regions::Regions;
pub use working_side::{WorkingSide, working_side};

use crate::geometry::{Path, Point};

/// A figure and how far the truth may lie from it, both lengths: the interval is
/// `size - bound ..= size + bound`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Figure {
    /// The figure.
    pub size: f64,
    /// Bound on its error, never negative.
    pub bound: f64,
}

/// A stretch of one path of the contour, by length along it from its start. On a closed loop `to` may
/// exceed the loop's length: the stretch then runs over the start.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ContourStretch {
    /// Position of the path in the contour.
    pub path: usize,
    /// Where it begins, a length.
    pub from: f64,
    /// Where it ends, a length.
    pub to: f64,
}

/// A region by its outline: closed paths, material of the region on their left.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Region {
    /// Area without holes, a length squared.
    pub area: f64,
    /// Its boundary.
    pub outline: Vec<Path>,
}

/// The cutter reaches past the contour: a maximal stretch of cutting moves with a positive depth over
/// the limit.
#[derive(Clone, Debug, PartialEq)]
pub struct Gouge {
    /// Greatest depth over the stretch.
    pub depth: Figure,
    /// Cutter centre at the greatest depth.
    pub center: Point,
    /// Point of the contour nearest to that centre.
    pub at: Point,
    /// Position in the disc family of the move with the greatest depth.
    pub worst_move: usize,
    /// First and last position in the disc family of the stretch (neighbours in the family).
    pub moves: (usize, usize),
    /// Does the cutter's centre itself lie inside the part (or closer than the allowance) at the worst place?
    pub center_inside: bool,
    /// The contour past which it reaches: from the smallest to the greatest length along the nearest
    /// path that the stretch's nearest points cover.
    pub stretch: ContourStretch,
    /// What is cut out of the part; `None` where it was not worked out.
    pub region: Option<Region>,
}

/// What is nearest to a stretch of contour at its greatest excess.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Crest {
    /// The two moves, as positions in the disc family, whose passes meet at the crest.
    pub moves: (usize, usize),
}

/// Material left on the contour: a maximal stretch with excess over the limit.
#[derive(Clone, Debug, PartialEq)]
pub struct Excess {
    /// Greatest excess over the stretch.
    pub height: Figure,
    /// Point of the contour (or of the area) with the greatest excess.
    pub at: Point,
    /// Where on the contour; `None` for an uncut spot of an area.
    pub stretch: Option<ContourStretch>,
    /// Position in the disc family of the move nearest to `at`.
    pub nearest_move: usize,
    /// Set when the greatest excess is a crest between two passes that do not follow one another, on
    /// a smooth stretch of contour: then it is a cusp.
    pub crest: Option<Crest>,
    /// Is the stretch the whole of its closed loop, or of its open chain?
    pub whole_path: bool,
    /// What remains; `None` where no swept edge bounds it.
    pub region: Option<Region>,
}

/// A rapid move that runs into the part.
#[derive(Clone, Debug, PartialEq)]
pub struct RapidHit {
    /// How far the cutter reaches into the part.
    pub depth: Figure,
    /// Cutter centre at the greatest depth.
    pub center: Point,
    /// Point of the contour nearest to it.
    pub at: Point,
    /// Position in the family of rapids.
    pub rapid: usize,
}

/// Why a stretch of the path folds.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum FoldKind {
    /// Arcs or short moves turn more tightly than the cutter's radius.
    TightTurn,
    /// The path crosses back over its own last stretch in a small loop.
    Loop,
}

/// The path turns more tightly than the cutter's radius.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Fold {
    /// What it is.
    pub kind: FoldKind,
    /// First and last position in the disc family.
    pub moves: (usize, usize),
    /// Where: the crossing of the loop, or the middle of the tight turn.
    pub at: Point,
    /// Radius of the tightest turn, a length; for a loop, half its greatest width.
    pub radius: f64,
}

/// All that the comparison found.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Comparison {
    /// Gouges over the limit, deepest first.
    pub gouges: Vec<Gouge>,
    /// Excesses (and cusps) over their limits, greatest first.
    pub excesses: Vec<Excess>,
    /// Rapids into the part, deepest first.
    pub rapids: Vec<RapidHit>,
    /// Folds of the path, in its order.
    pub folds: Vec<Fold>,
    /// Greatest reach past the contour over all cutting moves, never below zero.
    pub worst_gouge: Option<Figure>,
    /// Greatest excess over the contour or area, cusps left out, never below zero.
    pub worst_excess: Option<Figure>,
    /// Greatest cusp; `None` when there is no crest at all.
    pub worst_cusp: Option<Figure>,
    /// Paths of the contour the program never comes near (left out of the figures when the user
    /// asked for visited ones only).
    pub never_visited: Vec<usize>,
    /// How even the deviation along the contour is: what tells a wrong cutter from a wrong move.
    /// `None` when it was not looked for, or no cutter comes near.
    pub deviation: Option<DeviationSummary>,
}
