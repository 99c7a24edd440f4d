//! Program x cutter -> disc family on a plane: which discs the cutter shows where we look.

mod plan;

pub use plan::{PlanError, PlanView, plan};

use crate::geometry::{Rect, Segment};
use crate::program::MoveIndex;

/// One move of a disc: its centre runs along `segment` (a line that is a point stands for a plunge or
/// a dwell), its radius stays the same.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DiscMove {
    /// Path of the centre.
    pub segment: Segment,
    /// Radius of the disc, a length, positive.
    pub radius: f64,
    /// The move of the program that makes it.
    pub source: MoveIndex,
}

/// A moving disc: its moves in order of execution. Neighbours that share a point exactly are one
/// uninterrupted cut.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct DiscFamily {
    /// The moves.
    pub moves: Vec<DiscMove>,
}

impl DiscFamily {
    /// Smallest box round the swept region; `None` without moves.
    #[must_use]
    pub fn bounds(&self) -> Option<Rect> {
        self.moves.iter().map(|m| m.segment.bounds().inflate(m.radius, m.radius)).reduce(|a, b| a.union(b))
    }
}
