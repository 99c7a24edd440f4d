//! Do two moves belong to one pass, or to two passes that do not follow one another?
//!
//! Neighbours in the disc family that share a point exactly are one uninterrupted cut. Seen from a point
//! left uncut at distance rho from both moves, the cutter that goes from one to the other by no longer
//! way than half a turn round that point has merely gone round it: the moves follow one another, and
//! what stands between them is an inside corner or a long chord. A longer way means that the cutter
//! went away and came back: what stands between is a crest.

use crate::view::DiscFamily;

/// The uninterrupted cuts of a family.
pub(super) struct Passes {
    /// Number of the cut of each move.
    cut: Vec<u32>,
    /// Length of its cut before each move.
    before: Vec<f64>,
    /// Length of each cut when it is a loop.
    loops: Vec<Option<f64>>,
}

impl Passes {
    pub(super) fn new(family: &DiscFamily) -> Self {
        let (mut cut, mut before, mut loops) = (Vec::new(), Vec::new(), Vec::new());
        let mut length = 0.0;
        let mut first = 0;
        for (i, m) in family.moves.iter().enumerate() {
            let goes_on = i > 0 && family.moves[i - 1].segment.end() == m.segment.start();
            if !goes_on {
                length = 0.0;
                first = i;
                loops.push(None);
            }
            cut.push(loops.len().saturating_sub(1) as u32);
            before.push(length);
            length += m.segment.length();
            if let Some(last) = loops.last_mut() {
                let closes = family.moves[first].segment.start() == m.segment.end();
                *last = closes.then_some(length);
            }
        }
        Self { cut, before, loops }
    }

    /// Do two moves belong to one uninterrupted cut?
    pub(super) fn same_cut(&self, a: usize, b: usize) -> bool {
        self.cut[a] == self.cut[b]
    }

    /// Way along the path from the end of move `a` to the start of the later move `b` of one cut.
    pub(super) fn way_between(&self, a: usize, b: usize) -> f64 {
        let end = self.before.get(a + 1).copied().filter(|_| a < b).unwrap_or(f64::INFINITY);
        (self.before[b] - end).max(0.0)
    }

    /// Does the cutter go from the place `a` (move, way run along it) to `b` by no longer way than half
    /// a turn of radius `rho`, without interruption? Neighbouring moves of one cut always do.
    pub(super) fn follow(&self, a: (usize, f64), b: (usize, f64), rho: f64) -> bool {
        if self.cut[a.0] != self.cut[b.0] {
            return false;
        }
        if a.0.abs_diff(b.0) <= 1 {
            return true;
        }
        let way = (self.before[a.0] + a.1 - self.before[b.0] - b.1).abs();
        let round = self.loops[self.cut[a.0] as usize].map_or(way, |l| way.min(l - way));
        round <= std::f64::consts::PI * rho
    }
}
