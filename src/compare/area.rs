//! Where in an opening that must be cleared over its whole area does material stand?
//!
//! The openings are the bounded pieces of what is not part: pockets and holes, less their islands. With
//! an allowance only points at least that far from the wall count; nearer ones are the wall's.
//! The size of an uncut spot is the greatest D over it, D being the clearance from the sweep.
//!
//! Squares are divided until D is certainly below the limit over the whole square, certainly above it, or
//! the square is a small part of the limit. No square is dropped by a sample: only by a bound over all
//! of it ([`super::ceiling`]). So every point with D above the limit lies in a square that was kept, and
//! squares that touch make one spot. The greatest D of a spot is then found by dividing the square
//! with the highest bound first, until no bound is more than the tie length above the best point found.

use std::collections::BinaryHeap;

use crate::geometry::{BoxIndex, Point, Rect};
use crate::part::{Keep, Part, nesting};
use crate::tolerance::Tolerances;

use super::ceiling::ceiling;
use super::cell::Cell;
use super::side::{Walls, Where};
use super::targets::Targets;

/// Squares looked at in one search, at most. What is not settled by then is kept, so that a
/// figure may be less sharp (its bound says how much) but nothing is lost.
const MOST_CELLS: usize = 1_000_000;

/// Squares looked at to sharpen the greatest clearances of all spots together.
const MOST_STEPS: usize = 400_000;

/// After this many squares a spot that is certainly over the limit need be known to a hundredth only:
/// a ridge between curved passes would take thousands of squares for each further digit.
const ENOUGH_STEPS: usize = 2000;

/// Most spots sharpened and reported, the greatest first.
const MOST_SPOTS: usize = 1000;

/// An uncut spot.
#[derive(Clone, Copy, Debug)]
pub(super) struct Spot {
    /// Where the clearance is greatest.
    pub(super) at: Point,
    /// The clearance there.
    pub(super) size: f64,
    /// How much greater it may be elsewhere in the spot.
    pub(super) gap: f64,
    /// The move nearest to it.
    pub(super) nearest: usize,
}

/// The openings of a part, and the sweep that has to clear them.
pub(super) struct Floor<'a> {
    walls: &'a Walls<'a>,
    moves: &'a Targets<'a>,
    /// For each path of the contour: is what lies open beside it an opening?
    opening: Vec<bool>,
    allowance: f64,
    box_of_openings: Rect,
    tie: f64,
}

/// A square with a bound of the clearance over its open part.
#[derive(Clone, Debug)]
struct Bounded {
    cell: Cell,
    high: f64,
    /// The clearance is no less anywhere in the square; minus infinity where not all of it is open.
    low: f64,
    /// A corner of its open part, or its middle, with the greatest clearance tried.
    best: Option<(Point, f64)>,
}

impl PartialEq for Bounded {
    fn eq(&self, other: &Self) -> bool {
        self.high.total_cmp(&other.high).is_eq()
    }
}

impl Eq for Bounded {}

impl PartialOrd for Bounded {
    fn partial_cmp(&self, other: &Self) -> Option<std::cmp::Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Bounded {
    fn cmp(&self, other: &Self) -> std::cmp::Ordering {
        self.high.total_cmp(&other.high)
    }
}

impl<'a> Floor<'a> {
    /// The openings of `part`, less those whose outer loop is in `left_out`; `None` when it has none.
    pub(super) fn new(
        part: &Part,
        (walls, moves): (&'a Walls<'a>, &'a Targets<'a>),
        left_out: &[usize],
        tolerances: &Tolerances,
    ) -> Option<Self> {
        let outer = usize::from(part.keep == Keep::Inside);
        let nests = nesting(&part.contour);
        let mut opening: Vec<bool> = match part.keep {
            Keep::Inside => nests.iter().map(|n| n.depth > 0).collect(),
            Keep::Outside => vec![true; nests.len()],
            Keep::Left | Keep::Right => return None,
        };
        for &path in left_out {
            // An island is no opening's outer loop: what lies open round it counts.
            if let (Some(open), Some(nest)) = (opening.get_mut(path), nests.get(path)) {
                *open &= nest.depth % 2 != outer;
            }
        }
        let paths = part.contour.paths().iter().zip(&opening).filter(|(_, open)| **open);
        let box_of_openings = paths.map(|(p, _)| p.bounds()).reduce(|a, b| a.union(b))?;
        let tie = tolerances.figure;
        Some(Self { walls, moves, opening, allowance: part.allowance, box_of_openings, tie })
    }

    /// How far `p` lies inside an opening, negative outside of it.
    fn inside_by(&self, p: Point) -> f64 {
        let Some((k, distance)) = self.walls.targets.nearest(p, None) else {
            return f64::NEG_INFINITY;
        };
        let open = self.walls.of(p, k, self.walls.targets.feature_at(k, p)) == Where::Open
            && self.opening.get(self.walls.path_of(k)).copied().unwrap_or(false);
        if open { distance } else { -distance }
    }

    fn clearance(&self, p: Point) -> f64 {
        self.moves.nearest(p, None).map_or(f64::INFINITY, |n| n.1)
    }

    fn root(&self) -> Cell {
        let b = self.box_of_openings;
        Cell { middle: b.center(), half: 0.5 * b.width().max(b.height()) * 1.001 + self.tie }
    }

    /// Bounds the clearance over the open part of `cell`; `None` when it has no open part or the
    /// clearance does not exceed `floor` there.
    fn bounded(&self, cell: Cell, floor: f64) -> Option<Bounded> {
        let inside = self.inside_by(cell.middle);
        let reach = cell.reach();
        if inside < self.allowance - reach {
            return None;
        }
        let value = self.clearance(cell.middle);
        let in_reach = inside < self.allowance + reach;
        let best = (inside >= self.allowance).then_some((cell.middle, value));
        if value + reach <= floor {
            return None;
        }
        let low = if in_reach { f64::NEG_INFINITY } else { value - reach };
        // A sharper bound costs a look at every move in reach: not for squares that are kept anyway or
        // are still large.
        let big = low > floor || reach > self.moves.greatest_radius();
        if big {
            return Some(Bounded { cell, high: value + reach, low, best });
        }
        let polygon =
            if in_reach { cell.open_part(self.walls, self.allowance) } else { cell.corners().to_vec() };
        if polygon.is_empty() {
            return None;
        }
        let (high, guess) = ceiling(self.moves, &cell, &polygon, value);
        if high <= floor {
            return None;
        }
        // Beyond the square's neighbours a guess would belong to another spot.
        let near = (guess - cell.middle).hypot() <= 2.0 * reach;
        let guesses = near.then_some(guess).into_iter().chain(polygon);
        Some(Bounded { cell, high, low, best: self.best_of(best, guesses) })
    }

    /// The greatest clearance among `best` and those `guesses` that lie in an opening.
    fn best_of(
        &self,
        best: Option<(Point, f64)>,
        guesses: impl Iterator<Item = Point>,
    ) -> Option<(Point, f64)> {
        let open = guesses.filter(|&q| self.inside_by(q) >= self.allowance - self.tie);
        let tried = open.map(|q| (q, self.clearance(q)));
        best.into_iter().chain(tried).reduce(|a, b| if b.1 > a.1 { b } else { a })
    }

    /// Every spot with a clearance above `limit`, the greatest first, and each leaf's box with the
    /// number of its spot.
    pub(super) fn spots(&self, limit: f64) -> (Vec<Spot>, Vec<(Rect, usize)>) {
        let leaves = self.leaves(limit);
        let boxes: Vec<Rect> = leaves.iter().map(|l| rect(&l.cell)).collect();
        let groups = joined(&boxes);
        let steps = MOST_STEPS / groups.len().max(1);
        let mut spots: Vec<(usize, Spot)> = groups
            .iter()
            .enumerate()
            .filter_map(|(number, members)| {
                let members = members.iter().filter_map(|&i| leaves.get(i).cloned());
                self.sharpen(members.collect(), limit, self.tie, steps).map(|s| (number, s))
            })
            .filter(|(_, s)| s.size + s.gap > limit)
            .collect();
        spots.sort_by(|a, b| b.1.size.total_cmp(&a.1.size));
        spots.truncate(MOST_SPOTS);
        let mut owned = Vec::new();
        for (position, (number, _)) in spots.iter().enumerate() {
            let members = groups.get(*number).into_iter().flatten();
            owned.extend(members.filter_map(|&i| boxes.get(i).map(|b| (*b, position))));
        }
        (spots.into_iter().map(|s| s.1).collect(), owned)
    }

    /// The greatest clearance over all openings when it is above `floor`, to within `within`.
    pub(super) fn greatest(&self, floor: f64, within: f64) -> Option<Spot> {
        let root = self.bounded(self.root(), floor)?;
        self.sharpen(vec![root], floor, within, MOST_STEPS)
    }

    /// Squares that may hold a point above `limit`: above it throughout, or too small to divide.
    fn leaves(&self, limit: f64) -> Vec<Bounded> {
        let radius = self.moves.greatest_radius();
        let smallest = (0.25 * limit).max(1e-4 * radius);
        // A square on the edge of a spot need not be small: it belongs to it either way. Spots nearer to
        // one another than this may become one.
        let edge = smallest.max(radius / 32.0);
        let mut leaves = Vec::new();
        let mut pile: std::collections::VecDeque<Bounded> =
            self.bounded(self.root(), limit).into_iter().collect();
        let mut seen = 0;
        // Breadth first, so that running out of squares leaves squares of one size.
        while let Some(b) = pile.pop_front() {
            let on_edge = b.cell.half <= edge && b.best.is_some_and(|(_, d)| d > limit);
            if b.low > limit || on_edge || b.cell.half <= smallest || seen >= MOST_CELLS {
                leaves.push(b);
                continue;
            }
            for quarter in b.cell.quarters() {
                seen += 1;
                pile.extend(self.bounded(quarter, limit));
            }
        }
        leaves
    }

    /// The greatest clearance over the open parts of `cells`, to within `within` where steps allow, when it
    /// is above `floor`: below it only the bound counts.
    fn sharpen(&self, cells: Vec<Bounded>, floor: f64, within: f64, most: usize) -> Option<Spot> {
        let tried = |b: &Bounded| b.best;
        let greater = |a: (Point, f64), b: (Point, f64)| if b.1 > a.1 { b } else { a };
        let mut best = cells.iter().filter_map(tried).reduce(greater);
        let mut heap: BinaryHeap<Bounded> = cells.into();
        let mut steps = 0;
        // No point is higher than the highest bound left, nor than what was dropped.
        let mut ceiling = floor;
        while let Some(top) = heap.pop() {
            let size = best.map_or(floor, |b| b.1.max(floor));
            let above = top.high - size;
            let certain = steps >= ENOUGH_STEPS && above <= 0.01 * size && size - 2.0 * above > floor;
            if above <= within || certain || steps >= most || top.cell.half <= 0.125 * self.tie {
                ceiling = top.high;
                // A square of which no point is known to be open still stands for its spot.
                best = best.or_else(|| Some((top.cell.middle, self.clearance(top.cell.middle))));
                break;
            }
            for quarter in top.cell.quarters() {
                steps += 1;
                if let Some(b) = self.bounded(quarter, size) {
                    best = best.into_iter().chain(b.best).reduce(greater);
                    heap.push(b);
                }
            }
        }
        let (at, size) = best?;
        let (nearest, _) = self.moves.nearest(at, None)?;
        Some(Spot { at, size, gap: (ceiling - size).max(0.0), nearest })
    }
}

fn rect(cell: &Cell) -> Rect {
    Rect::from_center_size(cell.middle, (2.0 * cell.half, 2.0 * cell.half))
}

/// Groups of boxes that touch one another, in the order of their first members.
fn joined(boxes: &[Rect]) -> Vec<Vec<usize>> {
    let index = BoxIndex::new(boxes);
    let mut seen = vec![false; boxes.len()];
    let mut groups = Vec::new();
    for start in 0..boxes.len() {
        if std::mem::replace(&mut seen[start], true) {
            continue;
        }
        let mut group = vec![start];
        let mut next = 0;
        while let Some(&i) = group.get(next) {
            // Sides of neighbouring squares may differ by rounding.
            let slack = 1e-6 * boxes[i].width();
            index.search(boxes[i].inflate(slack, slack), |j| {
                if !std::mem::replace(&mut seen[j], true) {
                    group.push(j);
                }
            });
            next += 1;
        }
        groups.push(group);
    }
    groups
}

#[cfg(test)]
mod tests;
