//! On which side of the contour does the cutter work? The side on which its centres do not run is
//! material, when the user does not say it.
//!
//! The answer holds for the whole path and not for samples of it: the distance from the contour is
//! 1-Lipschitz, so a piece of the path whose middle lies farther from the contour than half its length
//! lies on one side altogether. What stays nearer than a thousandth of the cutter's radius runs on the
//! contour as far as this question goes, and tells nothing.

use crate::geometry::{BoxIndex, Contour, Point, Rect, Segment};
use crate::part::{Keep, Origin, Part};
use crate::view::DiscFamily;

/// A path this close to the contour, in radii of the cutter, runs on it.
const ON: f64 = 1e-3;

/// Where the centres of the cutting moves run.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum WorkingSide {
    /// On one side only: the other one is material.
    One {
        /// What is material.
        keep: Keep,
    },
    /// On both sides.
    Both {
        /// What is material if the first place is where the cutter may be.
        keep: Keep,
        /// Centre of a move there, and its position in the family.
        first: (Point, usize),
        /// The other side, and the move that runs there.
        second: (Point, usize),
    },
    /// On the contour, or beyond the ends of its chains: on no side.
    Neither,
    /// Some paths of the contour are loops, which have an inside, and some are open chains, which
    /// have a left and a right: no one answer fits both.
    LoopsAndChains,
}

/// The side of `contour` on which the centres of `cutting` run, to within a thousandth of the radius.
/// Loops count by the even-odd rule; of an open chain the places nearest to its free ends count for
/// nothing, since they lie beside no wall.
#[must_use]
pub fn working_side(contour: &Contour, cutting: &DiscFamily) -> WorkingSide {
    let loops = contour.paths().iter().filter(|p| p.is_closed()).count();
    if loops != 0 && loops != contour.paths().len() {
        return WorkingSide::LoopsAndChains;
    }
    let (material_here, material_there) =
        if loops == 0 { (Keep::Left, Keep::Right) } else { (Keep::Inside, Keep::Outside) };
    let origins = vec![Origin::default(); contour.paths().len()];
    let Ok(part) = Part::new(contour.clone(), material_here, 0.0, origins) else {
        return WorkingSide::LoopsAndChains;
    };
    let contour = Beside::new(&part.contour);
    // The last place, how far it lies from the contour, and whether it lies in the material.
    let mut last: Option<(Point, f64, bool)> = None;
    // Places found in what would be material under `material_here`, and beside it.
    let (mut inside, mut beside) = (None, None);
    for (position, m) in cutting.moves.iter().enumerate() {
        // Within a disc that the contour does not enter all is on one side, as the last place was: of
        // loops there is nothing new to learn there.
        let free = |p: Point| last.filter(|(q, d, _)| loops > 0 && (p - *q).hypot() < 0.999 * d);
        if free(m.segment.start()).is_some()
            && free(m.segment.end()).is_some()
            && matches!(m.segment, Segment::Line(_))
        {
            continue;
        }
        contour.places(&m.segment, ON * m.radius, |p, d| {
            // Two discs free of the contour that overlap lie on one side.
            let near = last.filter(|(q, e, _)| loops > 0 && (p - *q).hypot() < 0.999 * (d + e));
            let material = near.map_or_else(|| part.contains(p), |n| n.2);
            last = Some((p, d, material));
            let slot = if material { &mut inside } else { &mut beside };
            slot.get_or_insert((p, position));
        });
        if let (Some(second), Some(first)) = (inside, beside) {
            return WorkingSide::Both { keep: material_here, first, second };
        }
    }
    match (inside, beside) {
        (None, Some(_)) => WorkingSide::One { keep: material_here },
        (Some(_), None) => WorkingSide::One { keep: material_there },
        _ => WorkingSide::Neither,
    }
}

/// A contour to which distances are asked.
struct Beside {
    segments: Vec<Segment>,
    index: BoxIndex,
    /// Ends of open chains.
    free_ends: Vec<Point>,
}

impl Beside {
    fn new(contour: &Contour) -> Self {
        let segments: Vec<Segment> = contour.segments().map(|(_, s)| *s).collect();
        let boxes: Vec<Rect> = segments.iter().map(Segment::bounds).collect();
        let open = contour.paths().iter().filter(|p| !p.is_closed());
        let free_ends = open
            .flat_map(|p| [p.segments().first().map(Segment::start), p.segments().last().map(Segment::end)])
            .flatten()
            .collect();
        Self { segments, index: BoxIndex::new(&boxes), free_ends }
    }

    /// Calls `visit` with a point of each piece of `path` that lies on one side altogether, and with
    /// its distance from the contour.
    fn places(&self, path: &Segment, on: f64, mut visit: impl FnMut(Point, f64)) {
        let length = path.length();
        let mut pile = vec![(0.0, 1.0)];
        while let Some((from, to)) = pile.pop() {
            let middle = 0.5 * (from + to);
            let half = 0.5 * length * (to - from);
            let p = path.point_at(middle);
            let distance = |i: usize| self.segments.get(i).map_or(f64::INFINITY, |s| s.distance(p));
            let Some((nearest, d)) = self.index.nearest(p, f64::INFINITY, distance) else { return };
            if d > half.max(on) {
                if !self.is_beyond_an_end(p, nearest, d) {
                    visit(p, d);
                }
            } else if half > on {
                pile.push((middle, to));
                pile.push((from, middle));
            }
        }
    }

    /// Is the free end of a chain the nearest point of the contour?
    fn is_beyond_an_end(&self, p: Point, nearest: usize, d: f64) -> bool {
        if self.free_ends.is_empty() {
            return false;
        }
        let at = self.segments.get(nearest).map(|s| s.nearest(p).at);
        at.is_some_and(|at| self.free_ends.contains(&at))
            || self.free_ends.iter().any(|e| (p - *e).hypot() <= d)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::Path;
    use crate::program::MoveIndex;
    use crate::view::DiscMove;

    fn ring(x0: f64, y0: f64, x1: f64, y1: f64) -> Path {
        let p = [(x0, y0), (x1, y0), (x1, y1), (x0, y1), (x0, y0)].map(|(x, y)| Point::new(x, y));
        Path::new(p.windows(2).map(|w| Segment::line(w[0], w[1])).collect(), true).unwrap()
    }

    fn chain(points: &[(f64, f64)]) -> Path {
        let p: Vec<Point> = points.iter().map(|&(x, y)| Point::new(x, y)).collect();
        Path::new(p.windows(2).map(|w| Segment::line(w[0], w[1])).collect(), false).unwrap()
    }

    fn family(path: &Path) -> DiscFamily {
        let moves = path.segments().iter();
        DiscFamily { moves: moves.map(|&segment| DiscMove::constant(segment, 5.0, MoveIndex(0))).collect() }
    }

    fn side(paths: Vec<Path>, path: &Path) -> WorkingSide {
        working_side(&Contour::new(paths, 0.0).unwrap(), &family(path))
    }

    #[test]
    fn round_a_plate_keeps_its_inside_and_round_a_pocket_its_outside() {
        let plate = ring(0.0, 0.0, 50.0, 30.0);
        assert_eq!(
            side(vec![plate.clone()], &ring(-5.0, -5.0, 55.0, 35.0)),
            WorkingSide::One { keep: Keep::Inside }
        );
        assert_eq!(side(vec![plate], &ring(5.0, 5.0, 45.0, 25.0)), WorkingSide::One { keep: Keep::Outside });
    }

    #[test]
    fn a_hole_counts_as_open_and_an_island_as_material() {
        let part = vec![ring(0.0, 0.0, 100.0, 100.0), ring(40.0, 40.0, 60.0, 60.0)];
        assert_eq!(
            side(part.clone(), &ring(45.0, 45.0, 55.0, 55.0)),
            WorkingSide::One { keep: Keep::Inside }
        );
        assert_eq!(side(part, &ring(20.0, 20.0, 80.0, 80.0)), WorkingSide::One { keep: Keep::Outside });
    }

    #[test]
    fn a_move_that_only_clips_a_corner_between_its_ends_is_seen_on_both_sides() {
        let across = chain(&[(-8.0, 10.0), (10.0, -8.0)]);
        let WorkingSide::Both { second, .. } = side(vec![ring(0.0, 0.0, 50.0, 30.0)], &across) else {
            panic!("ends and middle lie outside, the clipped corner does not")
        };
        assert_eq!(second.1, 0);
    }

    #[test]
    fn a_path_on_the_contour_itself_tells_nothing() {
        let plate = ring(0.0, 0.0, 50.0, 30.0);
        assert_eq!(side(vec![plate.clone()], &plate), WorkingSide::Neither);
    }

    #[test]
    fn of_an_open_chain_what_lies_beyond_its_ends_does_not_count() {
        let wall = chain(&[(0.0, 0.0), (40.0, 0.0), (40.0, 30.0)]);
        let right = chain(&[(-20.0, 3.0), (-10.0, -5.0), (45.0, -5.0), (45.0, 50.0), (30.0, 50.0)]);
        assert_eq!(side(vec![wall.clone()], &right), WorkingSide::One { keep: Keep::Left });
        let left = chain(&[(0.0, 5.0), (35.0, 5.0), (35.0, 30.0)]);
        assert_eq!(side(vec![wall], &left), WorkingSide::One { keep: Keep::Right });
    }

    #[test]
    fn loops_beside_chains_have_no_one_side() {
        let both = vec![ring(0.0, 0.0, 50.0, 30.0), chain(&[(60.0, 0.0), (60.0, 30.0)])];
        assert_eq!(side(both, &ring(-5.0, -5.0, 55.0, 35.0)), WorkingSide::LoopsAndChains);
    }
}
