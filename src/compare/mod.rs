//! The comparison, both ways: the cutter past the contour, and the contour not reached.
//!
//! Depths and heights are distances, never leftovers of region subtraction: two ways to the same edge
//! differ by slivers of rounding, and a distance does not see them.

mod along;
mod area;
mod ceiling;
mod cell;
mod deviation;
mod excess;
mod folds;
mod gouge;
mod law;
mod level;
mod passes;
mod regions;
mod scan;
mod side;
mod targets;
mod working_side;

pub use deviation::{DeviationSummary, deviation_summary};
pub use regions::{Regions, attach_regions};
pub use working_side::{WorkingSide, working_side};

use crate::geometry::{Path, Point, Segment};
use crate::part::Part;
use crate::tolerance::Tolerances;
use crate::view::DiscFamily;

use along::Tracer;
use area::Floor;
use excess::Judge;
use gouge::Follower;
use passes::Passes;
use scan::Scanner;
use side::Walls;
use targets::Targets;

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

/// What must be cut.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Clear {
    /// The contour.
    Wall,
    /// The contour, and every opening of the part over its whole area.
    Area,
}

/// What a comparison is asked.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Request {
    /// Greatest gouge allowed, a length.
    pub gouge: f64,
    /// Greatest excess allowed, a length.
    pub excess: f64,
    /// Greatest cusp allowed, a length.
    pub cusp: f64,
    /// What must be cut.
    pub clear: Clear,
    /// Leave out paths of the contour that the program never comes near.
    pub only_visited: bool,
    /// Greatest distance between a commanded curve and the arc kept for it, a length.
    pub program_bound: f64,
    /// Lengths for coincidence and for the search of figures.
    pub tolerances: Tolerances,
}

/// Is told which stage of a comparison begins and ends, from whichever thread does it.
pub trait Watch: Sync {
    /// The stage `name` begins.
    fn begins(&self, name: &'static str);
    /// The stage `name` has ended.
    fn ends(&self, name: &'static str);
}

/// Nobody watches.
struct Unwatched;

impl Watch for Unwatched {
    fn begins(&self, _name: &'static str) {}
    fn ends(&self, _name: &'static str) {}
}

/// Does `work` as the stage `name`.
fn stage<T>(watch: &dyn Watch, name: &'static str, work: impl FnOnce() -> T) -> T {
    watch.begins(name);
    let done = work();
    watch.ends(name);
    done
}

/// Bound of every figure of a comparison, a length: what reading the drawing and the program cost,
/// arcs whose ends lie off their circle, half of what a radius changes over one move, and arithmetic.
#[must_use]
pub fn figure_bound(part: &Part, cutting: &DiscFamily, request: &Request) -> f64 {
    let off = |s: &Segment| targets::residual(s);
    let drawn = part.contour.segments().map(|(_, s)| off(s)).fold(0.0, f64::max);
    let moved = cutting.moves.iter().map(|m| off(&m.segment)).fold(0.0, f64::max);
    // Ties are settled to `figure`; formulas and side slips each cost less than `coincidence`.
    let arithmetic = request.tolerances.figure + 4.0 * request.tolerances.coincidence;
    part.contour.bound() + request.program_bound + drawn + moved + arithmetic + level::cost(cutting)
}

/// Compares what the moves of `cutting` leave with `part`, both ways. Material is on the left of every
/// path of the part's contour. Regions of gouges and excesses are left out.
///
/// Without cutting moves nothing is reached: every path of the contour is then listed as never
/// visited, and there are no figures of excess, because no distance from nothing exists.
#[must_use]
pub fn compare(part: &Part, cutting: &DiscFamily, rapids: &DiscFamily, request: &Request) -> Comparison {
    compare_watched(part, (cutting, rapids), request, &Unwatched)
}

/// [`compare`], the cutting moves and the rapids given together, telling `watch` of its stages.
#[must_use]
pub fn compare_watched(
    part: &Part,
    (cutting, rapids): (&DiscFamily, &DiscFamily),
    request: &Request,
    watch: &dyn Watch,
) -> Comparison {
    let changes = level::cost(cutting).max(level::cost(rapids));
    let request = &Request { program_bound: request.program_bound + changes, ..*request };
    let (cutting, rapids) = (&*level::levelled(cutting), &*level::levelled(rapids));
    let walls = stage(watch, "index contour", || Walls::new(&part.contour));
    let bound = figure_bound(part, cutting, request);
    // Neither direction waits for the other; each is told apart and joined in one order.
    let (mut out, (folds, reached)) = rayon::join(
        || {
            stage(watch, "gouges and rapids", || {
                cutter_past_contour(part, &walls, (cutting, rapids), request)
            })
        },
        || {
            let passes = Passes::new(cutting);
            let reach = request.gouge + bound;
            let folds =
                stage(watch, "folds", || folds::folds(cutting, &passes, &walls, reach, &request.tolerances));
            (folds, not_reached(part, (&walls, &passes), cutting, request, watch))
        },
    );
    let Some(reached) = reached else {
        out.never_visited = (0..part.contour.paths().len()).collect();
        return out;
    };
    Comparison { gouges: out.gouges, rapids: out.rapids, worst_gouge: out.worst_gouge, folds, ..reached }
}

/// Where the contour, and the area if asked for, are not reached; `None` when nothing cuts.
fn not_reached(
    part: &Part,
    (walls, passes): (&Walls, &Passes),
    cutting: &DiscFamily,
    request: &Request,
    watch: &dyn Watch,
) -> Option<Comparison> {
    let mut out = Comparison::default();
    let bound = figure_bound(part, cutting, request);
    let moves =
        stage(watch, "index moves", || Targets::new(cutting.moves.iter().map(|m| (&m.segment, m.radius))));
    if moves.is_empty() {
        return None;
    }
    let judge = Judge {
        excess: request.excess,
        cusp: request.cusp,
        allowance: part.allowance,
        bound,
        radius: moves.greatest_radius(),
        only_visited: request.only_visited,
    };
    let mut scanner = Scanner {
        walls,
        moves: &moves,
        passes,
        tracer: Tracer::new(&moves, &request.tolerances),
        limits: judge.clearances(),
        crest_from: part.allowance + bound,
        allowance: part.allowance,
    };
    stage(watch, "excesses and cusps", || {
        excess::contour_not_reached(&part.contour, &mut scanner, &judge, &mut out);
    });
    if request.clear == Clear::Area {
        stage(watch, "uncut area", || area_not_reached(part, (walls, &moves), request, bound, &mut out));
    }
    out.excesses.sort_by(|a, b| b.height.size.total_cmp(&a.height.size));
    out.deviation = stage(watch, "deviation", || deviation::summary_of(part, &moves));
    Some(out)
}

/// Uncut spots of the openings. A spot that holds the greatest excess of a stretch of contour, and is
/// no higher, is that excess and is not entered again.
fn area_not_reached(
    part: &Part,
    (walls, moves): (&Walls, &Targets),
    request: &Request,
    bound: f64,
    out: &mut Comparison,
) {
    let Some(floor) = Floor::new(part, (walls, moves), &out.never_visited, &request.tolerances) else {
        return;
    };
    let limit = request.excess - bound;
    let (spots, boxes) = floor.spots(limit);
    let known: Vec<(Point, Figure, bool)> =
        out.excesses.iter().map(|e| (e.at, e.height, e.crest.is_some())).collect();
    let mut worst = out.worst_excess.unwrap_or(Figure { size: 0.0, bound });
    for (position, spot) in spots.iter().enumerate() {
        let height = Figure { size: spot.size.max(0.0), bound: bound + spot.gap };
        let own =
            |at: Point| boxes.iter().any(|(b, p)| *p == position && b.inflate(bound, bound).contains(at));
        let same = known.iter().find(|(at, h, _)| h.size + h.bound >= spot.size && own(*at));
        if height.size > worst.size && same.is_none_or(|k| !k.2) {
            worst = height;
        }
        if same.is_none() {
            out.excesses.push(Excess {
                height,
                at: spot.at,
                stretch: None,
                nearest_move: spot.nearest,
                crest: None,
                whole_path: false,
                region: None,
            });
        }
    }
    if spots.is_empty() {
        // Nothing is over the limit: a hundredth of it is sharp enough to say how much is left.
        let within = (0.01 * request.excess).max(request.tolerances.figure);
        match floor.greatest(worst.size, within) {
            Some(spot) if spot.size > worst.size => {
                worst = Figure { size: spot.size, bound: bound + spot.gap };
            }
            Some(spot) => worst.bound += (spot.size + spot.gap - worst.size).max(0.0),
            None => {}
        }
    }
    out.worst_excess = Some(worst);
}

/// Gouges and rapids.
fn cutter_past_contour(
    part: &Part,
    walls: &Walls,
    (cutting, rapids): (&DiscFamily, &DiscFamily),
    request: &Request,
) -> Comparison {
    let mut out = Comparison::default();
    let lengths: Vec<(f64, bool)> =
        part.contour.paths().iter().map(|p| (p.length(), p.is_closed())).collect();
    let bound = figure_bound(part, cutting, request);
    let follow = |family: &DiscFamily, threshold: f64| {
        let mut follower = Follower::new(walls, &request.tolerances, threshold, part.allowance);
        follower.follow(family);
        follower
    };
    let cut = follow(cutting, request.gouge - bound);
    if !cutting.moves.is_empty() {
        out.worst_gouge = Some(Figure { size: cut.greatest, bound });
    }
    out.gouges = cut.found.iter().map(|r| r.gouge(bound, &lengths)).collect();
    out.gouges.sort_by(|a, b| b.depth.size.total_cmp(&a.depth.size));
    let bound = figure_bound(part, rapids, request);
    // A rapid that follows the finished wall within the limit only touches it.
    let hit = follow(rapids, request.gouge.max(bound));
    out.rapids = hit.found.iter().map(|r| r.rapid(bound)).collect();
    out.rapids.sort_by(|a, b| b.depth.size.total_cmp(&a.depth.size));
    out
}

#[cfg(test)]
mod tests;
