//! What must be true of every swept region, checked without the code that built it.
//!
//! Everything here rests on clearance alone, that is on distances from points to moves.

use crate::geometry::{Point, Vec2};
use crate::view::DiscFamily;

use super::clearance::Clearance;
use super::region::SweptRegion;

/// An invariant that does not hold, with the place.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Broken {
    /// A loop without a piece.
    EmptyLoop,
    /// A piece does not start where the one before ends.
    Gap {
        /// Where the piece before ends.
        at: Point,
    },
    /// A number of a piece is not finite, or the piece has no length.
    Degenerate {
        /// Where it starts.
        at: Point,
    },
    /// The ends of an arc do not lie on its circle.
    OffCircle {
        /// Start of the arc.
        at: Point,
        /// How far off, a length.
        by: f64,
    },
    /// A point of the edge has a clearance other than zero.
    OffEdge {
        /// The point.
        at: Point,
        /// Its clearance, a length.
        clearance: f64,
    },
    /// Outside of the edge the ground is covered.
    CoveredOutside {
        /// The point of the edge.
        at: Point,
    },
    /// A piece names a move that does not exist, or one that did not make it.
    WrongSource {
        /// A point of the piece.
        at: Point,
        /// Distance of that point from the edge of the named move's sweep.
        off: f64,
    },
}

impl std::fmt::Display for Broken {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "{self:?}")
    }
}

impl std::error::Error for Broken {}

/// Parameters at which each piece is looked at: off the halves and quarters where the builder looked.
const LOOKED_AT: [f64; 3] = [0.118, 0.5, 0.871];

impl SweptRegion {
    /// Checks that loops are closed, pieces sound, the whole edge at clearance zero within
    /// [`SweptRegion::bound`], with open ground on its right, and each piece made by the move it names.
    ///
    /// # Errors
    /// The first invariant that does not hold.
    pub fn check_invariants(&self, family: &DiscFamily) -> Result<(), Broken> {
        let clearance = Clearance::new(family);
        for edge in &self.loops {
            let Some(last) = edge.pieces.last() else { return Err(Broken::EmptyLoop) };
            let mut end = last.segment.end();
            for piece in &edge.pieces {
                let s = &piece.segment;
                if s.start() != end {
                    return Err(Broken::Gap { at: end });
                }
                end = s.end();
                if !s.is_finite() || s.length() <= 0.0 {
                    return Err(Broken::Degenerate { at: s.start() });
                }
                if let crate::geometry::Segment::Arc(a) = s
                    && a.residual() > self.bound
                {
                    return Err(Broken::OffCircle { at: a.start(), by: a.residual() });
                }
                self.check_piece(piece, family, &clearance)?;
            }
        }
        Ok(())
    }

    fn check_piece(
        &self,
        piece: &super::EdgePiece,
        family: &DiscFamily,
        clearance: &Clearance,
    ) -> Result<(), Broken> {
        let s = &piece.segment;
        for t in LOOKED_AT {
            let at = s.point_at(t);
            let d = clearance.at(at).map_or(f64::INFINITY, |c| c.clearance);
            if d.abs() > self.bound {
                return Err(Broken::OffEdge { at, clearance: d });
            }
            let off = family.moves.get(piece.source).map_or(f64::INFINITY, |m| m.clearance(at).abs());
            if off > self.bound {
                return Err(Broken::WrongSource { at, off });
            }
        }
        // A little outside: less than half of what the piece is long, for beyond it others may come.
        // Another disc may touch the edge in one point, so two places of three decide; and it may leave
        // a gap narrower than the step, so only a depth of the whole step counts.
        let step = (4.0 * self.bound).min(0.25 * s.length());
        let covered = LOOKED_AT.iter().filter(|&&t| {
            let out: Vec2 = -s.left_normal_at(t);
            clearance.at(s.point_at(t) + out * step).is_some_and(|c| c.clearance + step <= self.bound / 32.0)
        });
        if step > 2.0 * self.bound && covered.count() > 1 {
            return Err(Broken::CoveredOutside { at: s.point_at(0.5) });
        }
        Ok(())
    }
}
