//! The swept region of disc families that no line with a linear radius gives exactly: laws by functions,
//! and tapered moves on arcs.
//!
//! The laws become chains of straight moves with linear radius, each disc within a stated length of the
//! true one (see [`crate::view::linear_moves`]); what those sweep is exact. So the region's
//! [`SweptRegion::bound`] is that length (twice it where one side is asked for) plus the arithmetic's.

use crate::program::MoveIndex;
use crate::tolerance::CURVE_ERROR_MM;
use crate::view::{DiscFamily, DiscLaw, Lean, linear_moves};

use super::region::SweptRegion;
use super::sweep::{SweepError, sweep};

/// The region swept by discs that follow `laws`, one after the other; each piece's `source` is the
/// position in `laws` of the one that made it. `within` is the greatest length by which a disc may differ
/// from the law's; the customary one is [`CURVE_ERROR_MM`].
///
/// # Errors
/// When a law cannot be followed within the bound, or the edge cannot be closed; the place is named.
pub fn sweep_laws(laws: &[&dyn DiscLaw], within: f64, lean: Lean) -> Result<SweptRegion, SweepError> {
    let mut family = DiscFamily::default();
    let mut makers = Vec::new();
    for (i, law) in laws.iter().enumerate() {
        linear_moves(*law, within, lean, MoveIndex(i as u32), &mut family.moves)
            .map_err(|e| SweepError { at: law.at(e.at).0 })?;
        makers.resize(family.moves.len(), i);
    }
    let cost = if lean == Lean::Either { within } else { 2.0 * within };
    Ok(owned(sweep(&family)?, &makers, cost))
}

/// Are there moves whose envelope is made of neither lines nor arcs?
pub(super) fn has_curved_tapers(family: &DiscFamily) -> bool {
    family.moves.iter().any(|m| !m.is_constant() && matches!(m.segment, crate::geometry::Segment::Arc(_)))
}

/// The region swept by `family` with its tapered moves on arcs followed within [`CURVE_ERROR_MM`].
pub(super) fn sweep_straightened(family: &DiscFamily) -> Result<SweptRegion, SweepError> {
    let mut straight = DiscFamily::default();
    let mut makers = Vec::with_capacity(family.moves.len());
    for (i, m) in family.moves.iter().enumerate() {
        m.straightened(CURVE_ERROR_MM, &mut straight.moves)
            .map_err(|e| SweepError { at: m.segment.point_at(e.at) })?;
        makers.resize(straight.moves.len(), i);
    }
    Ok(owned(sweep(&straight)?, &makers, CURVE_ERROR_MM))
}

/// Gives the pieces back to what made their moves, and adds what following the laws cost.
fn owned(mut region: SweptRegion, makers: &[usize], cost: f64) -> SweptRegion {
    for piece in region.loops.iter_mut().flat_map(|l| &mut l.pieces) {
        piece.source = makers.get(piece.source).copied().unwrap_or(0);
    }
    region.bound += cost;
    region
}
