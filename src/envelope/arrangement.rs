//! Strands cut at every place where they meet: fragments between numbered nodes.
//!
//! A node is a number before it is a place. Strands that follow one another share a node from the
//! start; a crossing is found once, for both strands, and gets one number. Nodes nearer to one another
//! than the coincidence length are one node: that is decided here, once, and from then on only numbers
//! count. So loops cannot fail to close for a missing digit.

use crate::geometry::{BoxIndex, Crossing, Point, Rect, Segment, crossing};

/// A curve between two nodes.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Strand {
    pub segment: Segment,
    pub nodes: [u32; 2],
}

/// A part of a strand between neighbouring nodes on it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Fragment {
    /// The strand, by position.
    pub strand: u32,
    /// Parameters on the strand.
    pub t: [f64; 2],
    /// Nodes at its start and end.
    pub nodes: [u32; 2],
}

/// All fragments, strand after strand and in order along each.
#[derive(Debug, Default)]
pub(crate) struct Arrangement {
    pub fragments: Vec<Fragment>,
    /// Place of each node.
    pub places: Vec<Point>,
    /// For each number of a node the number under which it goes.
    one: Vec<u32>,
}

/// A node on a strand.
#[derive(Clone, Copy)]
struct Mark {
    strand: u32,
    t: f64,
    node: u32,
}

impl Arrangement {
    /// The number under which node `n` goes: the lowest of those that are one with it.
    pub fn one(&self, n: u32) -> u32 {
        self.one.get(n as usize).copied().unwrap_or(n)
    }

    /// Cuts `strands` at every meeting. `places` are the nodes that they share already.
    pub fn new(strands: &[Strand], places: Vec<Point>, coincidence: f64) -> Self {
        Self::between(strands, places, coincidence, |_, _| true)
    }

    /// The same, but only pairs for which `asked` holds are looked at.
    pub fn between(
        strands: &[Strand],
        places: Vec<Point>,
        coincidence: f64,
        asked: impl Fn(usize, usize) -> bool,
    ) -> Self {
        let mut places = places;
        let mut marks = Vec::with_capacity(strands.len() * 3);
        for (i, s) in (0u32..).zip(strands) {
            marks.push(Mark { strand: i, t: 0.0, node: s.nodes[0] });
            marks.push(Mark { strand: i, t: 1.0, node: s.nodes[1] });
        }
        meet(strands, coincidence, asked, &mut places, &mut marks);
        let one = coincident_nodes(&places, 4.0 * coincidence);
        for m in &mut marks {
            m.node = one.get(m.node as usize).copied().unwrap_or(m.node);
        }
        marks.sort_by(|a, b| a.strand.cmp(&b.strand).then(a.t.total_cmp(&b.t)));
        let mut fragments = Vec::with_capacity(marks.len());
        for (a, b) in marks.iter().zip(marks.iter().skip(1)) {
            let Some(s) = strands.get(a.strand as usize) else { continue };
            if a.strand != b.strand {
                continue;
            }
            let length = (b.t - a.t) * s.segment.length();
            // A fragment that ends where it starts is noise, unless it goes right round.
            if length <= 0.0 || (a.node == b.node && length <= 64.0 * coincidence) {
                continue;
            }
            fragments.push(Fragment { strand: a.strand, t: [a.t, b.t], nodes: [a.node, b.node] });
        }
        Self { fragments, places, one }
    }
}

/// Marks every meeting of two strands on both.
fn meet(
    strands: &[Strand],
    coincidence: f64,
    asked: impl Fn(usize, usize) -> bool,
    places: &mut Vec<Point>,
    marks: &mut Vec<Mark>,
) {
    let boxes: Vec<Rect> =
        strands.iter().map(|s| s.segment.bounds().inflate(2.0 * coincidence, 2.0 * coincidence)).collect();
    let index = BoxIndex::new(&boxes);
    for (i, (a, window)) in strands.iter().zip(&boxes).enumerate() {
        index.search(*window, |j| {
            let Some(b) = strands.get(j) else { return };
            if j <= i || !asked(i, j) {
                return;
            }
            let mut mark = |m: crate::geometry::Meeting| {
                let node = places.len() as u32;
                places.push(m.at);
                marks.push(Mark { strand: i as u32, t: m.t[0], node });
                marks.push(Mark { strand: j as u32, t: m.t[1], node });
            };
            match crossing(&a.segment, &b.segment, coincidence) {
                Crossing::None => {}
                Crossing::Points(points) => points.iter().for_each(&mut mark),
                Crossing::Overlap(stretches) => stretches.iter().for_each(|s| {
                    mark(s.from);
                    mark(s.to);
                }),
            }
        });
    }
}

/// For each place the lowest number among those that are one with it: chains of places no farther
/// apart than `within`.
fn coincident_nodes(places: &[Point], within: f64) -> Vec<u32> {
    let cell = 256.0 * within;
    let key = |x: f64, y: f64| ((x / cell).floor(), (y / cell).floor());
    // Each place stands in its own cell and, near a border, in the neighbour's too.
    let mut entries: Vec<((f64, f64), u32)> = Vec::with_capacity(places.len() + places.len() / 64);
    for (i, p) in (0u32..).zip(places) {
        let own = key(p.x, p.y);
        entries.push((own, i));
        for (dx, dy) in [(within, 0.0), (0.0, within), (within, within), (within, -within)] {
            for (x, y) in [(p.x + dx, p.y + dy), (p.x - dx, p.y - dy)] {
                let other = key(x, y);
                if other.0.total_cmp(&own.0).is_ne() || other.1.total_cmp(&own.1).is_ne() {
                    entries.push((other, i));
                }
            }
        }
    }
    entries.sort_by(|a, b| a.0.0.total_cmp(&b.0.0).then(a.0.1.total_cmp(&b.0.1)).then(a.1.cmp(&b.1)));
    let mut parent: Vec<u32> = (0..places.len() as u32).collect();
    for run in entries.chunk_by(|a, b| a.0.0.total_cmp(&b.0.0).is_eq() && a.0.1.total_cmp(&b.0.1).is_eq()) {
        if run.len() > 1 {
            join_run(run, places, within, &mut parent);
        }
    }
    (0..places.len() as u32).map(|i| root(&mut parent, i)).collect()
}

/// Joins the places of one cell, sorted by x so that a long run costs no square.
fn join_run(run: &[((f64, f64), u32)], places: &[Point], within: f64, parent: &mut [u32]) {
    let mut here: Vec<(f64, f64, u32)> =
        run.iter().filter_map(|e| places.get(e.1 as usize).map(|p| (p.x, p.y, e.1))).collect();
    here.sort_by(|a, b| a.0.total_cmp(&b.0).then(a.1.total_cmp(&b.1)).then(a.2.cmp(&b.2)));
    here.dedup_by_key(|e| e.2);
    for (k, a) in here.iter().enumerate() {
        for b in here.iter().skip(k + 1) {
            if b.0 - a.0 > within {
                break;
            }
            if (b.0 - a.0).hypot(b.1 - a.1) <= within {
                let (ra, rb) = (root(parent, a.2), root(parent, b.2));
                if let Some(slot) = parent.get_mut(ra.max(rb) as usize) {
                    *slot = ra.min(rb);
                }
                // The nearest neighbour joins the run; farther ones are joined through it, unless it
                // lies off to a side.
                if b.0 - a.0 <= 0.0 && b.1 - a.1 <= 0.0 {
                    break;
                }
            }
        }
    }
}

/// Lowest number of the set of `i`, halving the way for the next question.
fn root(parent: &mut [u32], i: u32) -> u32 {
    let mut i = i;
    loop {
        let up = parent.get(i as usize).copied().unwrap_or(i);
        if up == i {
            return i;
        }
        let over = parent.get(up as usize).copied().unwrap_or(up);
        if let Some(slot) = parent.get_mut(i as usize) {
            *slot = over;
        }
        i = over;
    }
}
