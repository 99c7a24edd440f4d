//! Program x cutter -> disc family on a plane: which discs the cutter shows where we look.

mod disc;
mod law;
mod plan;

pub use disc::{Closest, DiscMove};
pub use law::{DiscLaw, LawError, Lean, departure_by_second_derivatives, linear_moves};
pub use plan::{PlanError, PlanView, plan};

use crate::geometry::Rect;

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
        self.moves.iter().map(DiscMove::bounds).reduce(|a, b| a.union(b))
    }
}
