//! Disc families given by functions, as moves with a linear radius law, within a stated bound.
//!
//! A law gives centre c(t) and radius r(t) for t in [0, 1]. Over a stretch of it the straight move between
//! the two end discs has at each t a disc of its own; where centres and radii differ by
//! |c - c_lin| + |r - r_lin| <= e, each disc lies within e of the other, and so the two swept regions lie
//! within e of one another (Hausdorff distance; of the regions, for |D - D_lin| <= e everywhere). The
//! stretch is as long as that allows.
//!
//! With bounds on second derivatives the difference is at most h^2/8 (max |c''| + max |r''|) over a stretch
//! of length h (error of linear interpolation; any text on numerical analysis).

use crate::geometry::{Point, Segment};
use crate::program::MoveIndex;

use super::DiscMove;

/// Centre and radius of a disc as functions of t in [0, 1], both continuous.
pub trait DiscLaw {
    /// Centre and radius (zero or more) at `t`.
    fn at(&self, t: f64) -> (Point, f64);

    /// An upper bound, over `from` <= t <= `to`, of the distance between the centre and the one on the
    /// straight move between the end discs, plus the same for the radius: a length. It must go to zero
    /// with `to - from`.
    fn departure(&self, from: f64, to: f64) -> f64;
}

/// Departure of a law whose second derivatives are at most `center` and `radius` over a stretch of
/// parameter length `h`.
#[must_use]
pub fn departure_by_second_derivatives(center: f64, radius: f64, h: f64) -> f64 {
    0.125 * h * h * (center + radius)
}

/// On which side of the true sweep the approximate one may lie.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Lean {
    /// On either.
    Either,
    /// It holds the true sweep: nothing that is cut is left out. (Twice the bound.)
    Outside,
    /// The true sweep holds it: nothing that stands is shown as cut. (Twice the bound.)
    Inside,
}

/// Why a law could not be put into moves.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LawError {
    /// The parameter at which it stopped.
    pub at: f64,
}

impl std::fmt::Display for LawError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "the disc's law cannot be followed within the bound at t = {}", self.at)
    }
}

impl std::error::Error for LawError {}

/// Shortest stretch, as a share of the law.
const SHORTEST: f64 = 1e-9;

/// Most moves for one law.
const MOST: usize = 4_000_000;

/// Appends the moves that stand for `law`: no disc of theirs differs from the law's by more than `within`
/// (a length), on the side that `lean` asks for by no more than twice that. All get `source`.
///
/// # Errors
/// Where a number is not finite, or a stretch of a billionth of the law still departs by more, or more
/// than four million moves would be needed.
pub fn linear_moves(
    law: &dyn DiscLaw,
    within: f64,
    lean: Lean,
    source: MoveIndex,
    out: &mut Vec<DiscMove>,
) -> Result<(), LawError> {
    let grown = |r: f64| match lean {
        Lean::Either => r,
        Lean::Outside => r + within,
        Lean::Inside => (r - within).max(0.0),
    };
    let first = out.len();
    let (mut t, mut h) = (0.0, 1.0f64);
    let mut here = law.at(t);
    while t < 1.0 {
        let mut to;
        loop {
            // No sliver at the end: the last two stretches share what is left.
            to = if t + h >= 1.0 {
                1.0
            } else if t + 1.5 * h > 1.0 {
                0.5 * (t + 1.0)
            } else {
                t + h
            };
            let departure = law.departure(t, to);
            if departure <= within {
                // Grow for the next stretch by what the bound still allows.
                let more = if departure > 0.0 { 0.95 * (within / departure).sqrt() } else { 2.0 };
                h = (to - t) * more.clamp(1.0, 2.0);
                break;
            }
            let less = 0.95 * (within / departure).sqrt();
            h = (to - t) * if less.is_finite() { less.clamp(0.1, 0.95) } else { 0.5 };
            if h.is_nan() || h < SHORTEST {
                return Err(LawError { at: t });
            }
        }
        let next = law.at(to);
        if !(next.0.is_finite() && next.1.is_finite() && here.0.is_finite() && here.1.is_finite())
            || out.len() - first >= MOST
        {
            return Err(LawError { at: t });
        }
        let segment = Segment::line(here.0, next.0);
        out.push(DiscMove { segment, radius: grown(here.1), end_radius: grown(next.1), source });
        (t, here) = (to, next);
    }
    Ok(())
}

/// A move on an arc whose radius changes linearly, as a law: its centre departs from a chord by the sagitta.
struct OnArc<'a>(&'a DiscMove);

impl DiscLaw for OnArc<'_> {
    fn at(&self, t: f64) -> (Point, f64) {
        (self.0.segment.point_at(t), self.0.radius_at(t))
    }

    fn departure(&self, from: f64, to: f64) -> f64 {
        match &self.0.segment {
            Segment::Line(_) => 0.0,
            Segment::Arc(a) => {
                let center = a.radius() * a.sweep() * a.sweep();
                let ends = if from <= 0.0 || to >= 1.0 { a.residual() } else { 0.0 };
                departure_by_second_derivatives(center, 0.0, to - from) + ends
            }
        }
    }
}

impl DiscMove {
    /// Appends straight moves that stand for this one within `within`: itself, where it is straight or of
    /// constant radius.
    ///
    /// # Errors
    /// As [`linear_moves`].
    pub fn straightened(&self, within: f64, out: &mut Vec<Self>) -> Result<(), LawError> {
        if self.is_constant() || matches!(self.segment, Segment::Line(_)) {
            out.push(*self);
            return Ok(());
        }
        linear_moves(&OnArc(self), within, Lean::Either, self.source, out)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::{Arc, Vec2};

    struct Wave;

    impl DiscLaw for Wave {
        fn at(&self, t: f64) -> (Point, f64) {
            (Point::new(20.0 * t, 3.0 * (6.0 * t).sin()), 2.0 + (9.0 * t).cos())
        }

        fn departure(&self, from: f64, to: f64) -> f64 {
            departure_by_second_derivatives(108.0, 81.0, to - from)
        }
    }

    fn clearance(moves: &[DiscMove], p: Point) -> f64 {
        moves.iter().map(|m| m.clearance(p)).fold(f64::INFINITY, f64::min)
    }

    #[test]
    fn every_disc_of_a_law_is_met_within_the_bound_and_on_the_side_asked_for() {
        let within = 1e-3;
        for lean in [Lean::Either, Lean::Outside, Lean::Inside] {
            let mut moves = Vec::new();
            linear_moves(&Wave, within, lean, MoveIndex(0), &mut moves).unwrap();
            assert!((100..400).contains(&moves.len()), "{} moves", moves.len());
            let mut rng = fastrand::Rng::with_seed(3);
            for _ in 0..300 {
                let p = Point::new(rng.f64() * 24.0 - 2.0, rng.f64() * 12.0 - 6.0);
                let discs = (0..=20_000).map(|i| Wave.at(f64::from(i) / 20_000.0));
                let true_value = discs.map(|(c, r)| (p - c).hypot() - r).fold(f64::INFINITY, f64::min);
                let off = clearance(&moves, p) - true_value;
                let (low, high) = match lean {
                    Lean::Either => (-within, within),
                    Lean::Outside => (-2.0 * within, 0.0),
                    Lean::Inside => (0.0, 2.0 * within),
                };
                // The scan's own step costs up to 1e-5.
                assert!(off >= low - 2e-3 * within.max(0.01) && off <= high + 1e-5, "{lean:?}: {off}");
            }
        }
    }

    #[test]
    fn a_curved_tapered_move_is_straightened_within_the_bound() {
        let arc = Arc::from_angles(Point::new(1.0, 2.0), 8.0, 0.3, 4.0).unwrap();
        let segment = Segment::Arc(arc);
        let m = DiscMove { segment, radius: 1.0, end_radius: 3.5, source: MoveIndex(7) };
        let mut moves = Vec::new();
        m.straightened(1e-4, &mut moves).unwrap();
        assert!(moves.windows(2).all(|w| w[0].segment.end() == w[1].segment.start()));
        for k in 0..400 {
            let p = Point::new(1.0, 2.0) + Vec2::from_angle(f64::from(k)) * (f64::from(k) * 0.04);
            assert!((clearance(&moves, p) - m.clearance(p)).abs() <= 1e-4 + 1e-12);
        }
    }

    #[test]
    fn a_law_that_jumps_is_refused_where_it_jumps() {
        struct Jump;
        impl DiscLaw for Jump {
            fn at(&self, t: f64) -> (Point, f64) {
                (Point::new(if t < 0.3 { 0.0 } else { 9.0 }, 0.0), 1.0)
            }
            fn departure(&self, from: f64, to: f64) -> f64 {
                if from < 0.3 && to >= 0.3 { 9.0 } else { 0.0 }
            }
        }
        let refused = linear_moves(&Jump, 1e-4, Lean::Either, MoveIndex(0), &mut Vec::new()).unwrap_err();
        assert!((refused.at - 0.3).abs() < 1e-6);
    }
}
