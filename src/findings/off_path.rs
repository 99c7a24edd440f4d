//! Faults of the path itself, seen from the contour: an arc that turns the wrong way, one straight
//! move across a curve, a pass or an end that does not keep the cutter's radius from the wall. Each is a
//! judgement by elementary geometry at a few places; it changes neither size nor verdict.

use std::f64::consts::TAU;

use super::diagnose::{ALONGSIDE, Scene};
use super::draft::{Diagnosis, Draft};
use super::moves::Chords;
use super::number::{length_text, point_text};
use super::wording::Words;
use crate::compare::Gouge;
use crate::geometry::{Arc, Point, Segment, Vec2};

/// Places of an arc that are tried when it is turned the other way.
const TRIED: u32 = 16;

/// Turned the other way an arc must join its neighbours more smoothly by this angle, radians.
const LEAST_GAIN: f64 = 0.1;

/// An end stands at its distance from the wall when it is off by less than this share of the fault.
const AT_DISTANCE: f64 = 0.1;

impl Scene<'_> {
    /// The gouge is cut by an arc that would clear the part if it turned the other way.
    pub(super) fn turned_wrong_way(&self, gouge: &Gouge) -> Option<Diagnosis> {
        let Segment::Arc(arc) = self.cuts.segment(gouge.worst_move)? else { return None };
        let other = other_way(arc, self.cuts.text(gouge.worst_move).is_some_and(|t| says_radius(&t)))?;
        let away = self.cuts.radius(gouge.worst_move) + self.facts.part.allowance;
        let slack = self.facts.limits.gouge.max(1e-3 * gouge.depth.size);
        let clears = (0..=TRIED)
            .all(|k| self.off_wall(other.point_at(f64::from(k) / f64::from(TRIED))) >= away - slack);
        let smoother = self.bend(gouge.worst_move, &other) + LEAST_GAIN < self.bend(gouge.worst_move, arc);
        (clears && smoother).then_some(Diagnosis::WrongWay { left: arc.sweep() > 0.0 })
    }

    /// How much the path turns, in radians, where `arc` in place of move `i` meets its neighbours.
    fn bend(&self, i: usize, arc: &Arc) -> f64 {
        let turn = |a: Vec2, b: Vec2| a.cross(b).atan2(a.dot(b)).abs();
        let before = i.checked_sub(1).and_then(|k| self.cuts.segment(k)).filter(|s| s.length() > 0.0);
        let after = i.checked_add(1).and_then(|k| self.cuts.segment(k)).filter(|s| s.length() > 0.0);
        before.map_or(0.0, |s| turn(s.tangent_at(1.0), arc.tangent_at(0.0)))
            + after.map_or(0.0, |s| turn(arc.tangent_at(1.0), s.tangent_at(0.0)))
    }

    /// One straight move whose ends keep their distance from a wall that curves between them.
    pub(super) fn one_chord(&self, draft: &Draft) -> Option<Diagnosis> {
        let Segment::Line(line) = self.cuts.segment(draft.worst_move())? else { return None };
        let wall = self.walls.locate(draft.at, draft.contour.map(|c| c.path))?;
        let Segment::Arc(curve) = self.walls.segment(wall)? else { return None };
        let away = draft.radius + self.facts.part.allowance;
        // Material lies on the left: the cutter runs outside of an arc that turns left.
        let radius = if curve.sweep() > 0.0 { curve.radius() + away } else { curve.radius() - away };
        let seated = |p: Point| (self.off_wall(p) - away).abs() <= AT_DISTANCE * draft.figure.size;
        let half = 0.5 * line.length() / radius;
        if !(half > 0.0 && half < 1.0 && seated(line.start) && seated(line.end)) {
            return None;
        }
        let chord = Chords { length: line.length(), deflection: 2.0 * half.asin(), radius };
        let ratio = chord.sagitta() / draft.figure.size;
        (0.7..=1.5).contains(&ratio).then_some(Diagnosis::Chords(chord))
    }

    /// A gouge less deep than the cutter's radius by a move that runs along the wall, or that ends (or
    /// begins) too near to it. Gives the move to blame, too: where several meet, the one alongside.
    pub(super) fn too_near(&self, draft: &Draft, moves: (usize, usize)) -> Option<(Diagnosis, usize)> {
        let center = draft.center?;
        if draft.figure.size >= draft.radius {
            return None;
        }
        let wall = self.walls.segment(self.walls.locate(draft.at, draft.contour.map(|c| c.path))?)?;
        let direction = wall.tangent_at(wall.nearest(draft.at).t);
        let worst = draft.worst_move();
        let reach = 1e-6 * draft.radius;
        let beside = [Some(worst), worst.checked_add(1), worst.checked_sub(1)].into_iter().flatten();
        let along = beside.filter(|i| (moves.0..=moves.1).contains(i)).find(|&i| {
            self.cuts.segment(i).is_some_and(|s| {
                let near = s.nearest(center);
                s.length() > 0.0
                    && near.distance <= reach
                    && s.tangent_at(near.t).dot(direction).abs() >= ALONGSIDE
            })
        });
        let ends = || {
            let s = self.cuts.segment(worst)?;
            ((s.start() - center).hypot().min((s.end() - center).hypot()) <= reach).then_some(worst)
        };
        let fillet = match wall {
            Segment::Arc(a) if a.sweep() < 0.0 => a.radius() - draft.radius - self.facts.part.allowance,
            _ => 0.0,
        };
        let i = along.or_else(ends)?;
        let turns = fillet > 1e-3 * draft.radius && self.turns_sharply(center);
        Some((if turns { Diagnosis::SharpTurn { radius: fillet } } else { Diagnosis::OffPath }, i))
    }

    /// Do two moves that follow one another make a corner at this point?
    fn turns_sharply(&self, corner: Point) -> bool {
        let pairs = self.cuts.moves.iter().zip(self.cuts.moves.iter().skip(1));
        pairs.map(|(a, b)| (a.segment, b.segment)).any(|(a, b)| {
            a.end() == corner && b.start() == corner && a.tangent_at(1.0).dot(b.tangent_at(0.0)) < ALONGSIDE
        })
    }

    /// Does move `i` run along the wall at its parameter `t`?
    pub(super) fn runs_along(&self, i: usize, t: f64, draft: &Draft) -> bool {
        let wall = self.walls.locate(draft.at, draft.contour.map(|c| c.path));
        wall.and_then(|w| self.walls.segment(w)).zip(self.cuts.segment(i)).is_some_and(|(wall, pass)| {
            wall.tangent_at(wall.nearest(draft.at).t).dot(pass.tangent_at(t)).abs() >= ALONGSIDE
        })
    }

    /// Signed distance from the contour: positive outside the part.
    fn off_wall(&self, p: Point) -> f64 {
        let wall = self.walls.locate(p, None).and_then(|i| self.walls.segment(i));
        let distance = wall.map_or(f64::INFINITY, |s| s.distance(p));
        if self.facts.part.contains(p) { -distance } else { distance }
    }

    /// Does the center of every cutting move run inside the material?
    pub(super) fn runs_in_material(&self) -> bool {
        let places = |s: &Segment| [s.start(), s.point_at(0.5), s.end()];
        let mut all = self.cuts.moves.iter().flat_map(|m| places(&m.segment));
        !self.cuts.moves.is_empty() && all.all(|p| self.facts.part.contains(p))
    }
}

impl Words<'_> {
    pub(super) fn why_sharp(&self, radius: f64, d: &Draft) -> String {
        format!(
            ": there the path turns in a sharp corner, but the contour in a fillet of radius {}.",
            length_text(radius + d.radius + self.allowance, self.unit)
        )
    }

    pub(super) fn remedy_sharp(&self, radius: f64, d: &Draft) -> String {
        let at = point_text(d.center.unwrap_or(d.at), self.unit);
        format!(
            "Round the corner of the path at {at} with an arc of {} radius, tangent to the moves before and after it.",
            length_text(radius, self.unit)
        )
    }
}

/// The arc which the other of G2 and G3 makes of the same words: about the same center, or, where the
/// block says R, with the center on the other side of the chord.
fn other_way(arc: &Arc, by_radius: bool) -> Option<Arc> {
    let sweep = arc.sweep();
    if sweep.abs() >= TAU - 1e-6 {
        return None;
    }
    let (center, sweep) = if by_radius {
        let middle = arc.start().midpoint(arc.end());
        ((middle.to_vec2() * 2.0 - arc.center().to_vec2()).to_point(), -sweep)
    } else {
        (arc.center(), sweep - TAU * sweep.signum())
    };
    let from = (arc.start() - center).atan2();
    Arc::from_angles(center, arc.radius(), from, sweep).ok()
}

/// Is there an R word in this block, before any comment?
fn says_radius(block: &str) -> bool {
    let words = block.split(['(', ';']).next().unwrap_or("");
    words.contains(['R', 'r'])
}
