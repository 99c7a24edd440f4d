//! How high can the clearance from the sweep be within a convex polygon?
//!
//! D is the least of v_k = |q - move k| - r_k, so for any weights w_k >= 0 that sum to one
//! D <= sum w_k v_k. Each v_k lies below a convex function that agrees with it at the middle of the cell:
//! itself for a line, a point, and the outside of a circle; its tangent plane for the inside of a circle
//! (where it is concave); the distance from its nearest point near the ends of an arc. A convex function
//! is greatest at a corner of the polygon, so the corners give a certain bound for all of it.
//!
//! With weights that cancel the slopes at the middle the bound is second order in the size of the cell:
//! exact on the flat ridge between two parallel passes, and close at a point between three.

use std::f64::consts::{PI, TAU};

use crate::geometry::{Arc, Point, Segment, Vec2};

use super::cell::Cell;
use super::targets::Targets;

/// Directions apart by which the moves that are looked at are chosen.
const SECTORS: usize = 12;

/// An upper bound of the distance from one move.
enum Cap<'a> {
    /// From a line, which is convex itself.
    Line(&'a Segment),
    /// From a circle that does not pass the cell: `sign` (|q - center| - radius), +1 outside of it.
    Circle { center: Point, radius: f64, sign: f64 },
    /// From a point of the move: a circle without radius.
    Point(Point),
}

/// A weighted sum of caps, made convex. Circles about one centre are taken together first: between two
/// passes round one centre their curvatures cancel.
struct Sum<'a> {
    lines: Vec<(f64, &'a Segment)>,
    /// Factors of the distances from centres and points.
    centers: Vec<(Point, f64)>,
    constant: f64,
    /// Where concave terms are replaced by their tangent plane.
    middle: Point,
}

impl<'a> Sum<'a> {
    fn new(caps: impl Iterator<Item = (f64, f64, Cap<'a>)>, middle: Point) -> Self {
        let mut sum = Self { lines: Vec::new(), centers: Vec::new(), constant: 0.0, middle };
        for (weight, less, cap) in caps {
            sum.constant -= weight * less;
            match cap {
                Cap::Line(line) => sum.lines.push((weight, line)),
                Cap::Point(p) => sum.add_center(p, weight),
                Cap::Circle { center, radius, sign } => {
                    sum.constant -= weight * sign * radius;
                    sum.add_center(center, weight * sign);
                }
            }
        }
        sum
    }

    fn add_center(&mut self, center: Point, factor: f64) {
        match self.centers.iter_mut().find(|c| c.0 == center) {
            Some(known) => known.1 += factor,
            None => self.centers.push((center, factor)),
        }
    }

    fn height(&self, q: Point) -> f64 {
        let lines = self.lines.iter().map(|(w, line)| w * line.distance(q));
        let centers = self.centers.iter().map(|&(center, factor)| {
            let v = self.middle - center;
            let distance = v.hypot();
            if factor >= 0.0 {
                factor * (q - center).hypot()
            } else if distance > 0.0 {
                factor * (distance + v.dot(q - self.middle) / distance)
            } else {
                0.0
            }
        });
        self.constant + lines.sum::<f64>() + centers.sum::<f64>()
    }
}

/// One move near a cell: clearance and its slope at the middle.
#[derive(Clone, Copy)]
struct Near {
    k: usize,
    value: f64,
    slope: Vec2,
}

/// A bound of the clearance over `polygon`, which lies within `cell`, whose middle has the clearance
/// `value`; and a point where the moves it rests on are about equally far, which is a good guess of
/// where the clearance is greatest.
pub(super) fn ceiling(moves: &Targets, cell: &Cell, polygon: &[Point], value: f64) -> (f64, Point) {
    let reach = cell.reach();
    let plain = value + reach + moves.residual();
    let near = nearest_by_direction(moves, cell, value);
    let Some(weights) = weights(&near, reach) else {
        return (plain, cell.middle);
    };
    let caps = weights.iter().map(|&(n, w)| (w, moves.radius(n.k), cap(moves.segment(n.k), cell, polygon)));
    let sum = Sum::new(caps, cell.middle);
    let high = polygon.iter().map(|&q| sum.height(q)).fold(f64::NEG_INFINITY, f64::max);
    ((high + moves.residual()).min(plain), cell.middle + balance(&weights))
}

/// The way to the point where the clearances of two or three moves are equal, by their slopes.
fn balance(weights: &[(Near, f64)]) -> Vec2 {
    match *weights {
        [(a, _), (b, _)] => {
            let across = a.slope - b.slope;
            let square = across.hypot2();
            if square > 0.0 { across * ((b.value - a.value) / square) } else { Vec2::ZERO }
        }
        [(a, _), (b, _), (c, _)] => {
            let (u, v) = (b.slope - a.slope, c.slope - a.slope);
            let (e, f) = (a.value - b.value, a.value - c.value);
            let det = u.cross(v);
            if det == 0.0 {
                return Vec2::ZERO;
            }
            Vec2::new((e * v.y - f * u.y) / det, (u.x * f - v.x * e) / det)
        }
        _ => Vec2::ZERO,
    }
}

/// For each direction from which moves come, the nearest that may be nearest somewhere in the cell; the
/// nearest of all first.
fn nearest_by_direction(moves: &Targets, cell: &Cell, value: f64) -> Vec<Near> {
    let mut sectors: [Option<Near>; SECTORS] = [None; SECTORS];
    let reach = value + 2.0 * cell.reach() + 2.0 * moves.residual();
    moves.within(cell.middle, reach, |k| {
        let v = cell.middle - moves.segment(k).nearest(cell.middle).at;
        let distance = v.hypot();
        let slope = if distance > 0.0 { v / distance } else { Vec2::ZERO };
        let near = Near { k, value: distance - moves.radius(k), slope };
        let turn = (slope.atan2() + PI) / TAU * SECTORS as f64;
        let slot = &mut sectors[(turn as usize).min(SECTORS - 1)];
        if slot.is_none_or(|old| near.value < old.value || (near.value <= old.value && k < old.k)) {
            *slot = Some(near);
        }
    });
    let mut near: Vec<Near> = sectors.into_iter().flatten().collect();
    near.sort_by(|a, b| a.value.total_cmp(&b.value).then(a.k.cmp(&b.k)));
    near
}

/// The weights of one to three moves whose sum promises the lowest bound: its value at the middle and
/// its slope times `reach`.
fn weights(near: &[Near], reach: f64) -> Option<Vec<(Near, f64)>> {
    let first = *near.first()?;
    let promise = |list: &[(Near, f64)]| {
        let slope = list.iter().fold(Vec2::ZERO, |sum, (n, w)| sum + n.slope * *w);
        list.iter().map(|(n, w)| n.value * w).sum::<f64>() + slope.hypot() * reach
    };
    let mut best = vec![(first, 1.0)];
    let mut lowest = promise(&best);
    let mut offer = |list: &[(Near, f64)]| {
        let p = promise(list);
        if p < lowest {
            lowest = p;
            best = list.to_vec();
        }
    };
    for (i, &second) in near.iter().enumerate().skip(1) {
        // The point of the segment between both slopes that is nearest to zero.
        let across = second.slope - first.slope;
        let square = across.hypot2();
        if square > 0.0 {
            let w = (-first.slope.dot(across) / square).clamp(0.0, 1.0);
            offer(&[(first, 1.0 - w), (second, w)]);
        }
        for &third in near.iter().skip(i + 1) {
            let (a, b, c) = (
                second.slope.cross(third.slope),
                third.slope.cross(first.slope),
                first.slope.cross(second.slope),
            );
            let sum = a + b + c;
            // All of one sign: zero lies in the triangle of the slopes.
            if sum.abs() > 1e-12 && a * sum >= 0.0 && b * sum >= 0.0 && c * sum >= 0.0 {
                offer(&[(first, a / sum), (second, b / sum), (third, c / sum)]);
            }
        }
    }
    Some(best)
}

fn cap<'a>(segment: &'a Segment, cell: &Cell, polygon: &[Point]) -> Cap<'a> {
    let middle = cell.middle;
    let Segment::Arc(arc) = segment else {
        return Cap::Line(segment);
    };
    let v = middle - arc.center();
    let distance = v.hypot();
    if distance <= 0.0 || !faces_all(arc, middle, polygon) {
        return Cap::Point(segment.nearest(middle).at);
    }
    let sign = if distance > arc.radius() { 1.0 } else { -1.0 };
    if (distance - arc.radius()).abs() <= cell.reach() || distance <= cell.reach() {
        return Cap::Point(segment.nearest(middle).at);
    }
    Cap::Circle { center: arc.center(), radius: arc.radius(), sign }
}

/// Does one half of the arc, which spans no more than half a turn, face the middle and every corner?
fn faces_all(arc: &Arc, middle: Point, polygon: &[Point]) -> bool {
    if arc.sweep().abs() >= TAU {
        return true;
    }
    let faces = |a: &Arc| a.faces(middle - a.center()) && polygon.iter().all(|&q| a.faces(q - a.center()));
    if arc.sweep().abs() <= PI {
        return faces(arc);
    }
    faces(&arc.part(0.0, 0.5)) || faces(&arc.part(0.5, 1.0)) || faces(&arc.part(0.25, 0.75))
}

#[cfg(test)]
mod tests;
