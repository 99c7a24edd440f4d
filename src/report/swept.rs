//! What the `envelope` command hands to its renderers: the swept edge and where each piece comes from.

use crate::envelope::{EdgePiece, SweptRegion};
use crate::program::{Block, MoveIndex, Program};
use crate::view::DiscFamily;

/// A swept edge with its provenance.
#[derive(Clone, Copy, Debug)]
pub struct SweptEdge<'a> {
    /// The edge; its pieces point into `family`.
    pub region: &'a SweptRegion,
    /// The discs that made it; their moves point into `program`.
    pub family: &'a DiscFamily,
    /// The program, whose unit every length has.
    pub program: &'a Program,
}

impl<'a> SweptEdge<'a> {
    /// The move of the program that made `piece`.
    #[must_use]
    pub fn source(&self, piece: &EdgePiece) -> Option<MoveIndex> {
        self.family.moves.get(piece.source).map(|m| m.source)
    }

    /// The block that commands the move `index`.
    #[must_use]
    pub fn block(&self, index: MoveIndex) -> Option<Block<'a>> {
        let at = usize::try_from(index.0).ok()?;
        let block = self.program.moves.get(at)?.block;
        self.program.blocks.get(usize::try_from(block.0).ok()?)
    }
}
