//! The program under construction: blocks, moves, the tool of each, and what is settled only when the
//! last block has been read, because it hangs on what the whole program says: whether M6 is used at
//! all, and whether Z is ever named.

use super::faults::Line;
use super::lines::decode;
use crate::program::{BlockId, Blocks, Motion, Move, MoveKind, Program, Unit};

/// Moves as they are read.
#[derive(Debug, Default)]
pub(super) struct Moves {
    blocks: Blocks,
    /// Line of the last block.
    last_line: usize,
    moves: Vec<Move>,
    /// Greatest distance between a commanded curve and the arc kept for it.
    pub bound: f64,
    /// A Z word was seen that names a height of the program.
    pub says_z: bool,
    /// Rapids at a height the program has not said, as positions in `moves`.
    blind: Vec<usize>,
    /// Greatest height at which a feed move ends that does not go straight up.
    highest_feed: Option<f64>,
    /// Tool in the spindle by M6.
    spindle: u32,
    /// The last T word.
    pub selected: Option<u32>,
    changes_tools: bool,
    /// T words and the number of moves before them, for programs without M6.
    turret: Vec<(usize, u32)>,
}

/// More moves than their numbers can count.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct TooMany;

impl Moves {
    /// Adds a move of the block at `line`.
    ///
    /// # Errors
    /// When there are 2^32 already.
    pub fn push(&mut self, line: Line<'_>, motion: Motion, kind: MoveKind) -> Result<(), TooMany> {
        let count = u32::try_from(self.moves.len()).map_err(|_| TooMany)?;
        if count == u32::MAX {
            return Err(TooMany);
        }
        if self.last_line != line.number {
            self.last_line = line.number;
            self.blocks.push(line.number, &decode(line.text));
        }
        let (start, end) = (motion.start(), motion.end());
        let rises = start.plan() == end.plan() && end.z > start.z;
        if kind == MoveKind::Feed && !rises {
            self.highest_feed = Some(self.highest_feed.map_or(end.z, |z| z.max(end.z)));
        }
        let block = u32::try_from(self.blocks.len().saturating_sub(1)).map_err(|_| TooMany)?;
        self.moves.push(Move { motion, kind, tool: self.spindle, block: BlockId(block) });
        Ok(())
    }

    /// Do all feed moves so far end below `z`, but for those that go straight up?
    pub fn all_end_below(&self, z: f64) -> bool {
        self.highest_feed.is_none_or(|highest| highest < z)
    }

    /// Marks the last move as a rapid whose height the program has not said.
    pub fn last_is_blind(&mut self) {
        self.blind.push(self.moves.len().saturating_sub(1));
    }

    /// T: `tool` is chosen. Without any M6 in the program it is in use from here on.
    pub fn select(&mut self, tool: u32) {
        self.selected = Some(tool);
        if !self.changes_tools && self.turret.last().is_none_or(|&(_, last)| last != tool) {
            self.turret.push((self.moves.len(), tool));
        }
    }

    /// M6: the chosen tool goes into the spindle.
    pub fn change(&mut self) {
        self.changes_tools = true;
        self.turret.clear();
        self.spindle = self.selected.unwrap_or(self.spindle);
    }

    /// The program, and how many rapids were left out because their height is not known.
    pub fn finish(mut self, file: &str, unit: Unit, unit_stated: bool) -> (Program, usize) {
        self.turret_tools();
        self.blocks.shrink();
        self.moves.shrink_to_fit();
        let left_out = if self.says_z { self.leave_out_blind() } else { 0 };
        let Self { blocks, moves, bound, says_z, .. } = self;
        (Program { file: file.to_owned(), unit, unit_stated, says_z, blocks, moves, bound }, left_out)
    }

    /// Where M6 never comes, each T word is a change of tool (turrets, routers changed by hand).
    fn turret_tools(&mut self) {
        for (at, &(from, tool)) in self.turret.iter().enumerate() {
            let to = self.turret.get(at + 1).map_or(self.moves.len(), |next| next.0);
            for m in self.moves.get_mut(from..to).unwrap_or_default() {
                m.tool = tool;
            }
        }
    }

    fn leave_out_blind(&mut self) -> usize {
        let (mut at, mut blind) = (0, self.blind.iter().peekable());
        self.moves.retain(|_| {
            let out = blind.next_if_eq(&&at).is_some();
            at += 1;
            !out
        });
        self.blind.len()
    }
}
