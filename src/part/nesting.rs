//! How do the closed loops of a contour lie in one another, and which way round must each run so that
//! material lies on its left? A loop inside an even number of others bounds what the user keeps, one
//! inside an odd number bounds an opening in it, and so on inwards (even-odd rule).

use super::Keep;
use super::sides::Sides;
use crate::geometry::{Contour, Path, Point};

/// Places on a loop that are tried for one that lies clear of every other loop.
const TRIES: usize = 16;

/// How a path lies among the closed loops of its contour.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub struct Nest {
    /// Number of loops round it: 0 is outermost, 1 an opening, 2 an island, ...
    pub depth: usize,
    /// Position of the innermost loop round it.
    pub parent: Option<usize>,
}

/// How each path of `contour` lies in its closed loops, in the contour's order. An open chain counts
/// as no loop but has a depth itself. Loops may touch but not cross; of two that lie on one another
/// wholly the answer is arbitrary.
#[must_use]
pub fn nesting(contour: &Contour) -> Vec<Nest> {
    let loops = contour.paths().iter().filter(|p| p.is_closed()).count();
    if loops == 0 || contour.paths().len() == 1 {
        return vec![Nest::default(); contour.paths().len()];
    }
    let sides = Sides::new(contour);
    let closed = |&i: &usize| contour.paths().get(i).is_some_and(Path::is_closed);
    let round: Vec<Vec<usize>> = contour
        .paths()
        .iter()
        .enumerate()
        .map(|(i, path)| sides.round(clear_point(&sides, i, path), i).into_iter().filter(closed).collect())
        .collect();
    let depth = |i: usize| round.get(i).map_or(0, Vec::len);
    round
        .iter()
        .map(|others| Nest {
            depth: others.len(),
            parent: others.iter().copied().max_by_key(|&i| (depth(i), std::cmp::Reverse(i))),
        })
        .collect()
}

/// A point of the path that lies clear of the other paths: the first good one, else the best tried.
fn clear_point(sides: &Sides, position: usize, path: &Path) -> Point {
    let segments = path.segments();
    let step = segments.len().div_ceil(TRIES).max(1);
    let enough = 1e-3 * path.length() / segments.len() as f64;
    let mut best = (f64::NEG_INFINITY, Point::ORIGIN);
    for segment in segments.iter().step_by(step) {
        let p = segment.point_at(0.5);
        let clearance = sides.clearance_from_others(p, position);
        if clearance > best.0 {
            best = (clearance, p);
        }
        if clearance >= enough {
            break;
        }
    }
    best.1
}

/// The contour with every path turned so that material lies on its left. Order and starting points of
/// the paths stay; only their direction changes. Under [`Keep::Inside`] outermost loops run
/// counter-clockwise, openings clockwise and so on; under [`Keep::Outside`] the other way round; open
/// chains are reversed under [`Keep::Right`]. Paths of which `keep` does not speak stay as they are.
#[must_use]
pub fn oriented(contour: &Contour, keep: Keep) -> Contour {
    turned(contour.clone(), keep)
}

/// [`oriented`], for a contour that is not needed any more as it was.
pub(super) fn turned(contour: Contour, keep: Keep) -> Contour {
    let nests = if keep.is_for_loops() { nesting(&contour) } else { Vec::new() };
    let depth = |i: usize| nests.get(i).map_or(0, |n| n.depth);
    let turns: Vec<bool> = contour
        .paths()
        .iter()
        .enumerate()
        .map(|(i, path)| match keep {
            Keep::Inside | Keep::Outside if path.is_closed() => {
                let wanted_left = (depth(i) % 2 == 0) == (keep == Keep::Inside);
                (path.signed_area() > 0.0) != wanted_left
            }
            Keep::Right => !path.is_closed(),
            _ => false,
        })
        .collect();
    contour.with_turned(&turns)
}
