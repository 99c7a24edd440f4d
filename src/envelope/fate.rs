//! What becomes of the raw edge in blocks of neighbouring pieces, before any piece is looked at alone.
//!
//! Neighbouring pieces share their neighbourhood, so one question serves a whole block:
//!
//! - The true edge of a run can be covered only by other moves. Where none of those comes within its
//!   radius of the block's box, the block is edge as it stands: no disc of another move reaches it.
//! - Where the clearance in the middle of the block's box is below minus half its diagonal, every
//!   point of the block is covered: clearance is 1-Lipschitz.

use std::ops::Range;

use crate::geometry::{BoxIndex, Rect};
use crate::view::{DiscFamily, DiscMove};

use super::clearance::Clearance;
use super::raw::{RawEdge, Ring};

/// Pieces (and moves) in one block.
const BLOCK: usize = 16;

/// What a block of raw edge is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Fate {
    /// Swept edge as it stands.
    Clear,
    /// Under other discs altogether.
    Covered,
    /// To be looked at piece by piece.
    Contested,
}

/// Blocks of moves, each of one ring.
struct Blocks {
    index: BoxIndex,
    ring: Vec<u32>,
    radius: f64,
}

impl Blocks {
    fn new(raw: &RawEdge, family: &DiscFamily) -> Self {
        let (mut boxes, mut ring) = (Vec::new(), Vec::new());
        let mut moves: Option<Range<u32>> = None;
        for (i, r) in (0u32..).zip(&raw.rings) {
            // The two curves round a closed chain share its moves.
            if moves.as_ref() == Some(&r.moves) {
                continue;
            }
            let own = family.moves.get(r.moves.start as usize..r.moves.end as usize).unwrap_or_default();
            for block in own.chunks(BLOCK) {
                let b = block.iter().map(|m| m.segment.bounds()).reduce(|a, b| a.union(b));
                boxes.push(b.unwrap_or(Rect::ZERO));
                ring.push(i);
            }
            moves = Some(r.moves.clone());
        }
        let radius = family.moves.iter().map(DiscMove::greatest_radius).fold(0.0, f64::max);
        Self { index: BoxIndex::new(&boxes), ring, radius }
    }

    /// Does a move of another ring than `own` come within reach of `window`?
    fn reached(&self, window: Rect, own: usize, margin: f64) -> bool {
        let reach = self.radius + margin;
        self.index.any(window.inflate(reach, reach), |b| self.ring.get(b).is_some_and(|&r| r as usize != own))
    }
}

/// For each ring of `raw` its blocks in order, with what becomes of them.
pub(super) fn fates<'a>(
    raw: &'a RawEdge,
    family: &'a DiscFamily,
    clearance: &'a Clearance,
    margin: f64,
) -> impl Iterator<Item = Vec<(Fate, Range<usize>)>> + 'a {
    let blocks = Blocks::new(raw, family);
    raw.rings.iter().enumerate().map(move |(own, ring)| {
        ring.pieces
            .clone()
            .step_by(BLOCK)
            .map(|from| {
                let pieces = from..(from + BLOCK).min(ring.pieces.end);
                (fate(raw, ring, own, pieces.clone(), &blocks, clearance, margin), pieces)
            })
            .collect()
    })
}

fn fate(
    raw: &RawEdge,
    ring: &Ring,
    own: usize,
    pieces: Range<usize>,
    blocks: &Blocks,
    clearance: &Clearance,
    margin: f64,
) -> Fate {
    let boxes = raw.pieces.get(pieces).unwrap_or_default().iter().map(|p| p.segment.bounds());
    let Some(window) = boxes.reduce(|a, b| a.union(b)) else { return Fate::Covered };
    if ring.true_edge && !blocks.reached(window, own, margin) {
        return Fate::Clear;
    }
    let half = 0.5 * window.width().hypot(window.height());
    let deep = -half - margin;
    if -deep < blocks.radius && clearance.below(window.center(), deep).is_some_and(|c| c.clearance < deep) {
        return Fate::Covered;
    }
    Fate::Contested
}
