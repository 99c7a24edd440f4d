//! Strands of raw edge that may be swept edge, and the decision on each fragment of them.

use crate::geometry::{Point, Segment, Vec2};
use crate::tolerance::Tolerances;
use crate::view::DiscFamily;

use super::arrangement::{Fragment, Strand};
use super::clearance::Clearance;
use super::cover::{Open, open_parts};
use super::fate::{Fate, fates};
use super::link::Choice;
use super::raw::RawEdge;

/// A covered stretch is removed early only when it lies deeper than this many coincidence lengths: the
/// early way and the careful way then never disagree.
const COVER_MARGIN: f64 = 128.0;

/// Marks a fragment that is a whole stretch of raw edge; the rest of the number is its position.
const STRETCH: u32 = 1 << 31;

/// A strand's raw piece and the stretch of it, by parameters.
#[derive(Clone, Copy)]
pub(super) struct Share {
    pub raw: u32,
    pub from: f64,
    pub to: f64,
    pub cut: [bool; 2],
}

/// Pieces of raw edge that no other move can reach: edge as they stand.
pub(super) struct Stretch {
    pub pieces: std::ops::Range<usize>,
    pub nodes: [u32; 2],
}

/// All that may be swept edge.
pub(super) struct Strands<'a> {
    pub raw: &'a RawEdge,
    pub strands: Vec<Strand>,
    pub shares: Vec<Share>,
    pub stretches: Vec<Stretch>,
    /// Places of the nodes that strands and stretches share.
    pub places: Vec<Point>,
    /// Node of each joint that is in use.
    node_of: Vec<u32>,
}

impl<'a> Strands<'a> {
    /// The parts of `raw` that are not certainly covered.
    pub fn new(
        raw: &'a RawEdge,
        family: &DiscFamily,
        clearance: &Clearance,
        tolerances: &Tolerances,
    ) -> Self {
        let margin = COVER_MARGIN * tolerances.coincidence;
        let mut new = Self {
            raw,
            strands: Vec::new(),
            shares: Vec::new(),
            stretches: Vec::new(),
            places: Vec::new(),
            node_of: vec![u32::MAX; raw.joints.len()],
        };
        let mut open = Vec::new();
        for (ring, fates) in raw.rings.iter().zip(fates(raw, family, clearance, margin)) {
            let first = new.stretches.len();
            for (fate, pieces) in fates {
                match fate {
                    Fate::Covered => {}
                    Fate::Clear => new.stretch(pieces, first),
                    Fate::Contested => {
                        for i in pieces {
                            new.contested(i, family, clearance, margin, tolerances, &mut open);
                        }
                    }
                }
            }
            debug_assert!(ring.pieces.end <= raw.pieces.len());
        }
        new.drop_copies();
        new
    }

    /// The node of a joint.
    fn node(&mut self, joint: u32) -> u32 {
        let Some(slot) = self.node_of.get_mut(joint as usize) else { return 0 };
        if *slot == u32::MAX {
            *slot = self.places.len() as u32;
            self.places.push(self.raw.joints.get(joint as usize).copied().unwrap_or(Point::ZERO));
        }
        *slot
    }

    /// Adds a clear run of pieces, or lengthens the last one of this ring.
    fn stretch(&mut self, pieces: std::ops::Range<usize>, first_of_ring: usize) {
        let joint = |i: usize, end: usize| self.raw.pieces.get(i).map_or(0, |p| p.joints[end]);
        let (from, to) = (joint(pieces.start, 0), joint(pieces.end - 1, 1));
        let to = self.node(to);
        if self.stretches.len() > first_of_ring
            && let Some(last) = self.stretches.last_mut()
            && last.pieces.end == pieces.start
        {
            last.pieces.end = pieces.end;
            last.nodes[1] = to;
            return;
        }
        let from = self.node(from);
        self.stretches.push(Stretch { pieces, nodes: [from, to] });
    }

    /// Adds the open parts of one contested piece.
    fn contested(
        &mut self,
        i: usize,
        family: &DiscFamily,
        clearance: &Clearance,
        margin: f64,
        tolerances: &Tolerances,
        open: &mut Vec<Open>,
    ) {
        let Some(piece) = self.raw.pieces.get(i) else { return };
        open.clear();
        open_parts(&piece.segment, family, clearance, margin, open);
        for o in open.iter() {
            let whole = o.from <= 0.0 && o.to >= 1.0;
            let segment = if whole { piece.segment } else { piece.segment.part(o.from, o.to) };
            if segment.length() <= tolerances.coincidence {
                continue;
            }
            let mut node = |cut: bool, joint: u32, at: Point| {
                if cut {
                    self.places.push(at);
                    self.places.len() as u32 - 1
                } else {
                    self.node(joint)
                }
            };
            let nodes = [
                node(o.cut[0], piece.joints[0], segment.start()),
                node(o.cut[1], piece.joints[1], segment.end()),
            ];
            self.strands.push(Strand { segment, nodes });
            self.shares.push(Share { raw: i as u32, from: o.from, to: o.to, cut: o.cut });
        }
    }

    /// Retraced moves make the very same strand again: one is enough, the first.
    fn drop_copies(&mut self) {
        let mut order: Vec<([u64; 7], u32)> =
            (0u32..).zip(&self.strands).map(|(i, s)| (key(&s.segment), i)).collect();
        order.sort_unstable();
        let mut copy = vec![false; self.strands.len()];
        for pair in order.windows(2) {
            if let [a, b] = pair
                && a.0 == b.0
                && let Some(c) = copy.get_mut(b.1 as usize)
            {
                *c = true;
            }
        }
        let mut flags = copy.iter();
        self.strands.retain(|_| !flags.next().copied().unwrap_or(false));
        let mut flags = copy.iter();
        self.shares.retain(|_| !flags.next().copied().unwrap_or(false));
    }

    /// The stretch for which a fragment stands, if it does.
    pub fn stretch_of(&self, f: &Fragment) -> Option<&Stretch> {
        if f.strand & STRETCH == 0 { None } else { self.stretches.get((f.strand & !STRETCH) as usize) }
    }

    /// The segment of a fragment, by its strand's parameters; of a stretch its first or last piece, as
    /// `t` is 0 or 1.
    fn part_at(&self, f: &Fragment, t: f64) -> Segment {
        if let Some(stretch) = self.stretch_of(f) {
            let i = if t > 0.5 { stretch.pieces.end - 1 } else { stretch.pieces.start };
            return self.raw.pieces.get(i).map_or(Segment::line(Point::ZERO, Point::ZERO), |p| p.segment);
        }
        match self.strands.get(f.strand as usize) {
            Some(s) if f.t[0] <= 0.0 && f.t[1] >= 1.0 => s.segment,
            Some(s) => s.segment.part(f.t[0], f.t[1]),
            None => Segment::line(Point::ZERO, Point::ZERO),
        }
    }

    /// Direction in which a fragment starts (`t` = 0) or arrives (`t` = 1).
    pub fn tangent(&self, f: &Fragment, t: f64) -> Vec2 {
        self.part_at(f, t).tangent_at(t)
    }

    /// The decision on every fragment, and on every stretch.
    pub fn decide(
        &self,
        fragments: &[Fragment],
        node: impl Fn(u32) -> u32,
        clearance: &Clearance,
        tolerances: &Tolerances,
    ) -> Vec<Choice> {
        let mut choices: Vec<Choice> =
            fragments.iter().map(|f| self.decide_one(f, clearance, tolerances)).collect();
        self.drop_twins(&mut choices, tolerances);
        choices.extend((0u32..).zip(&self.stretches).map(|(i, s)| Choice {
            fragment: Fragment { strand: i | STRETCH, t: [0.0, 1.0], nodes: s.nodes.map(&node) },
            kept: true,
            doubt: f64::INFINITY,
        }));
        choices
    }

    /// Is a fragment edge? Its middle, moved out by the depth length, must be clear of every disc.
    fn decide_one(&self, f: &Fragment, clearance: &Clearance, tolerances: &Tolerances) -> Choice {
        let buried = Choice { fragment: *f, kept: false, doubt: f64::INFINITY };
        let at = f.strand as usize;
        let (Some(strand), Some(share)) = (self.strands.get(at), self.shares.get(at)) else { return buried };
        let Some(piece) = self.raw.pieces.get(share.raw as usize) else { return buried };
        let middle = 0.5 * (f.t[0] + f.t[1]);
        let on_raw = share.from + middle * (share.to - share.from);
        let at = strand.segment.point_at(middle) + piece.outward_at(on_raw) * tolerances.depth;
        let clear = clearance.at(at).map_or(f64::INFINITY, |c| c.clearance);
        let stub = (share.cut[0] && f.t[0] <= 0.0) || (share.cut[1] && f.t[1] >= 1.0);
        let kept = clear > 0.0 && !stub;
        // A fragment in the open shows the full depth to well below what counts as coincident; leaving
        // it out would tear the edge by its length.
        let open = tolerances.depth - clear < 0.125 * tolerances.coincidence;
        let length = (f.t[1] - f.t[0]) * strand.segment.length();
        let doubt = if kept && open { clear + length } else { clear.abs() };
        Choice { fragment: *f, kept, doubt }
    }

    /// Fragments that run the same way between the same nodes over the same ground are one: the first.
    fn drop_twins(&self, choices: &mut [Choice], tolerances: &Tolerances) {
        let mut order: Vec<([u32; 2], u32)> = (0u32..)
            .zip(choices.iter())
            .filter(|(_, c)| c.kept)
            .map(|(i, c)| (c.fragment.nodes, i))
            .collect();
        order.sort_unstable();
        let mut twins = Vec::new();
        for run in order.chunk_by(|a, b| a.0 == b.0).filter(|r| r.len() > 1) {
            let mut first: Vec<Segment> = Vec::new();
            for &(_, i) in run {
                let Some(c) = choices.get(i as usize) else { continue };
                let s = self.part_at(&c.fragment, 0.0);
                let middle = s.point_at(0.5);
                if first.iter().any(|k| k.distance(middle) <= 8.0 * tolerances.coincidence) {
                    twins.push(i);
                } else {
                    first.push(s);
                }
            }
        }
        for i in twins {
            if let Some(c) = choices.get_mut(i as usize) {
                c.kept = false;
                c.doubt = 0.0;
            }
        }
    }
}

/// What makes two strands the same to the last bit.
fn key(s: &Segment) -> [u64; 7] {
    let [a, b] = [s.start(), s.end()].map(|p| [p.x.to_bits(), p.y.to_bits()]);
    let [c, d, e] = match s {
        Segment::Line(_) => [0; 3],
        Segment::Arc(a) => [a.center().x.to_bits(), a.center().y.to_bits(), a.sweep().to_bits()],
    };
    [a[0], a[1], b[0], b[1], c, d, e]
}
