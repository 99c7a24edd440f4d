//! Is a place of the contour tighter than the cutter, and which cutter would do?
//!
//! ```text
//!   wall |        In a corner that opens by th between two walls, a disc of radius r stays
//!        | .--.       r (1 / sin(th/2) - 1)
//!        |(  . )  away from the corner, along its bisector (elementary: the centre stands r / sin(th/2)
//!        | '--'   from the corner). With a fillet of radius rc it stays (r - rc) (1 / sin(th/2) - 1)
//!        +-----   away; with r <= rc it touches everywhere.
//! ```
//!
//! With an allowance the cutter's edge keeps that much farther from the walls, as if its radius were
//! greater by the allowance.

use std::f64::consts::PI;

use super::walls::Walls;
use crate::geometry::{Point, Segment};

/// Turns below this are no corners but joints that the drawing meant to be smooth, radians (1 degree).
const LEAST_TURN: f64 = PI / 180.0;

/// A place this near to a corner, as a fraction of the cutter's radius, is the corner.
const AT_CORNER: f64 = 1e-3;

/// What may be left in a corner over what its geometry leaves there, before something else must be to
/// blame: a tenth, and the limit for acceptance on top, by which either wall may be off.
const MORE_THAN_CORNER: f64 = 0.1;

/// A place which the cutter cannot touch.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Tight {
    /// A sharp inside corner.
    Sharp {
        /// The corner.
        at: Point,
        /// Angle between its walls on the cutter's side, radians.
        opening: f64,
    },
    /// An inside fillet, or any inside arc.
    Fillet {
        /// Its radius.
        radius: f64,
        /// Angle between the walls beside it, radians; `None` for an arc of half a turn or more.
        opening: Option<f64>,
    },
    /// Opposite walls stand nearer than the cutter's diameter.
    Narrow {
        /// Distance between them.
        width: f64,
    },
    /// Any other place, such as a curve made of short pieces: no larger disc touches it.
    Curve {
        /// Radius of that disc.
        radius: f64,
    },
}

/// What a cutter of radius `radius` leaves in a sharp corner that opens by `opening` (radians),
/// measured along the bisector: radius (1 / sin(opening / 2) - 1). Any length unit.
#[must_use]
pub fn left_in_corner(radius: f64, opening: f64) -> f64 {
    radius * corner_factor(opening)
}

/// 1 / sin(th/2) - 1, never below zero.
fn corner_factor(opening: f64) -> f64 {
    let s = (0.5 * opening).sin();
    if s > 0.0 { (1.0 / s - 1.0).max(0.0) } else { f64::INFINITY }
}

/// The largest cutter radius that leaves no more than `limit` in a sharp corner that opens by
/// `opening` (radians): limit / (1 / sin(opening / 2) - 1). Infinite for a straight wall.
#[must_use]
pub fn largest_radius_in_corner(limit: f64, opening: f64) -> f64 {
    let factor = corner_factor(opening);
    if factor > 0.0 { limit / factor } else { f64::INFINITY }
}

impl Tight {
    /// The largest cutter radius that touches the place everywhere, `None` for a sharp corner.
    pub(super) fn fitting_radius(&self, allowance: f64) -> Option<f64> {
        match *self {
            Self::Sharp { .. } => None,
            Self::Fillet { radius, .. } | Self::Curve { radius } => Some(radius - allowance),
            Self::Narrow { width } => Some(0.5 * width - allowance),
        }
    }

    /// The largest cutter radius that leaves no more than `limit`; `None` where only a fit will do.
    pub(super) fn radius_within(&self, limit: f64, allowance: f64) -> Option<f64> {
        match *self {
            Self::Sharp { opening, .. } => Some(largest_radius_in_corner(limit, opening) - allowance),
            Self::Fillet { radius, opening: Some(opening) } => {
                Some(radius + largest_radius_in_corner(limit, opening) - allowance)
            }
            _ => None,
        }
    }

    /// What the disc of radius `radius` (allowance included) leaves there at least; `None`: not known.
    fn leaves(&self, radius: f64) -> Option<f64> {
        match *self {
            Self::Sharp { opening, .. } => Some(left_in_corner(radius, opening)),
            Self::Fillet { radius: fillet, opening: Some(opening) } => {
                Some(left_in_corner(radius - fillet, opening))
            }
            _ => None,
        }
    }

    /// Is `height` what this place alone explains?
    pub(super) fn explains(&self, height: f64, radius: f64, limit: f64) -> bool {
        self.leaves(radius).is_none_or(|left| height <= left * (1.0 + MORE_THAN_CORNER) + limit)
    }
}

/// What at `at`, a point of the contour, keeps a disc of radius `radius` (cutter and allowance) from
/// touching it; `None` when it can. The test, in this order:
///
/// * `at` is a corner that turns to the right: sharp;
/// * `at` lies on an arc that turns right with a smaller radius: fillet. Arcs that go on about the
///   same centre count as one;
/// * the largest disc that touches the wall there is smaller: a narrow place where the opposite wall
///   stops it, else a tight curve.
pub(super) fn tight_place(
    walls: &Walls<'_>,
    path: Option<usize>,
    at: Point,
    radius: f64,
    explained: impl Fn(&Tight) -> bool,
) -> Option<Tight> {
    let i = walls.locate(at, path)?;
    let segment = walls.segment(i)?;
    let t = segment.nearest(at).t;
    if let Some(sharp) = sharp_corner(walls, i, at, radius).filter(&explained) {
        return Some(sharp);
    }
    if let Some(fillet) = fillet(walls, i, radius).filter(&explained) {
        return Some(fillet);
    }
    // At a joint the wall has two directions; a little way into both pieces tells more.
    let joint = if t <= 0.0 { walls.neighbour(i, false) } else { walls.neighbour(i, true) };
    let places = if t > 0.0 && t < 1.0 {
        vec![(i, t)]
    } else {
        vec![(Some(i), 0.5), (joint, 0.5)].into_iter().filter_map(|(i, t)| Some((i?, t))).collect()
    };
    let reaches = places.iter().filter_map(|&(i, t)| Some((i, t, walls.reach(i, t, radius)?)));
    let (i, t, reach) = reaches.min_by(|a, b| a.2.radius.total_cmp(&b.2.radius))?;
    let right = -walls.segment(i)?.left_normal_at(t);
    let tight = if reach.stopped_towards.dot(right) > 0.7 {
        Tight::Narrow { width: 2.0 * reach.radius }
    } else {
        Tight::Curve { radius: reach.radius }
    };
    Some(tight).filter(explained)
}

/// The corner at either end of segment `i` when `at` is it and it turns right.
fn sharp_corner(walls: &Walls<'_>, i: usize, at: Point, radius: f64) -> Option<Tight> {
    let segment = walls.segment(i)?;
    let ends = [(false, segment.start()), (true, segment.end())];
    let near = ends.iter().filter(|e| (e.1 - at).hypot() <= AT_CORNER * radius);
    near.filter_map(|&(forward, corner)| {
        let other = walls.segment(walls.neighbour(i, forward)?)?;
        let (arriving, leaving) = if forward { (segment, other) } else { (other, segment) };
        let (a, b) = (arriving.tangent_at(1.0), leaving.tangent_at(0.0));
        let turn = a.cross(b).atan2(a.dot(b));
        (turn < -LEAST_TURN).then_some(Tight::Sharp { at: corner, opening: PI + turn })
    })
    .min_by(|a, b| opening_of(a).total_cmp(&opening_of(b)))
}

const fn opening_of(tight: &Tight) -> f64 {
    match *tight {
        Tight::Sharp { opening, .. } => opening,
        _ => f64::INFINITY,
    }
}

/// The inside arc that segment `i` belongs to, when it is tighter than `radius`.
fn fillet(walls: &Walls<'_>, i: usize, radius: f64) -> Option<Tight> {
    let Segment::Arc(arc) = walls.segment(i)? else { return None };
    if arc.sweep() >= 0.0 || arc.radius() >= radius {
        return None;
    }
    let same = |k: usize| match walls.segment(k) {
        Some(Segment::Arc(a)) => {
            let off = (a.center() - arc.center()).hypot() + (a.radius() - arc.radius()).abs();
            (off <= 1e-6 * arc.radius()).then(|| a.sweep())
        }
        _ => None,
    };
    let mut sweep = arc.sweep();
    for forward in [false, true] {
        let mut k = i;
        while let Some(next) = walls.neighbour(k, forward).filter(|&n| n != i) {
            let Some(more) = same(next).filter(|_| sweep > -PI) else { break };
            sweep += more;
            k = next;
        }
    }
    let opening = PI + sweep;
    Some(Tight::Fillet { radius: arc.radius(), opening: (opening > LEAST_TURN).then_some(opening) })
}
