//! Fragments that bound a region, linked into closed loops by the numbers of their nodes.
//!
//! A boundary enters every node as often as it leaves it. Which fragments belong to it was decided one
//! by one, each within rounding; where that rounding decided two neighbours differently a node is out
//! of balance. It is then brought back by the cheapest change among fragments that were hard to
//! decide: a fragment buried by no more than rounding is taken in, or one that stands out by no more
//! than rounding is left out. Anything more costly is refused: no loop is closed by force.

use std::cmp::Reverse;
use std::collections::BinaryHeap;

use crate::geometry::{Point, Vec2};

use super::arrangement::Fragment;

/// A fragment with the decision on it.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Choice {
    pub fragment: Fragment,
    /// Does it bound the region?
    pub kept: bool,
    /// What it would cost to decide otherwise, a length: how far it lies from where the decision turns.
    pub doubt: f64,
}

/// A node at which loops could not be closed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Unbalanced {
    pub at: Point,
}

/// Brings every node into balance, changing only choices of doubt up to `limit` in sum a path.
///
/// # Errors
/// With the place of a node that cannot be balanced so.
pub(crate) fn balance(choices: &mut [Choice], places: &[Point], limit: f64) -> Result<(), Unbalanced> {
    let mut surplus = vec![0i32; places.len()];
    for c in choices.iter().filter(|c| c.kept) {
        bump(&mut surplus, c.fragment.nodes[1], 1);
        bump(&mut surplus, c.fragment.nodes[0], -1);
    }
    if surplus.iter().all(|&s| s == 0) {
        return Ok(());
    }
    let edges = Incidence::new(choices, places.len());
    for start in 0..places.len() as u32 {
        while surplus.get(start as usize).is_some_and(|&s| s > 0) {
            let Some((end, path)) = cheapest(choices, &edges, &surplus, start, limit) else {
                let at = places.get(start as usize).copied().unwrap_or(Point::ZERO);
                return Err(Unbalanced { at });
            };
            for i in path {
                if let Some(c) = choices.get_mut(i as usize) {
                    c.kept = !c.kept;
                }
            }
            bump(&mut surplus, start, -1);
            bump(&mut surplus, end, 1);
        }
    }
    Ok(())
}

fn bump(counts: &mut [i32], node: u32, by: i32) {
    if let Some(n) = counts.get_mut(node as usize) {
        *n += by;
    }
}

/// Fragments at each node, as one list with an offset per node.
struct Incidence {
    from: Vec<u32>,
    fragments: Vec<u32>,
}

impl Incidence {
    fn new(choices: &[Choice], nodes: usize) -> Self {
        let mut pairs: Vec<(u32, u32)> = Vec::with_capacity(choices.len() * 2);
        for (i, c) in (0u32..).zip(choices) {
            pairs.push((c.fragment.nodes[0], i));
            pairs.push((c.fragment.nodes[1], i));
        }
        pairs.sort_unstable();
        let mut from = vec![0u32; nodes + 1];
        for p in &pairs {
            if let Some(f) = from.get_mut(p.0 as usize + 1) {
                *f += 1;
            }
        }
        let mut sum = 0;
        for f in &mut from {
            sum += *f;
            *f = sum;
        }
        Self { from, fragments: pairs.into_iter().map(|p| p.1).collect() }
    }

    fn at(&self, node: u32) -> &[u32] {
        let n = node as usize;
        match (self.from.get(n), self.from.get(n + 1)) {
            (Some(&a), Some(&b)) => self.fragments.get(a as usize..b as usize).unwrap_or_default(),
            _ => &[],
        }
    }
}

/// Cheapest way (Dijkstra) from a node with a surplus of arrivals to one with a surplus of departures:
/// along a fragment that is not kept, or back along one that is.
fn cheapest(
    choices: &[Choice],
    edges: &Incidence,
    surplus: &[i32],
    start: u32,
    limit: f64,
) -> Option<(u32, Vec<u32>)> {
    let mut reached = std::collections::BTreeMap::new();
    let mut queue = BinaryHeap::new();
    queue.push(Reverse((Cost(0.0), start, u32::MAX, u32::MAX)));
    while let Some(Reverse((cost, node, via, before))) = queue.pop() {
        if reached.contains_key(&node) {
            continue;
        }
        reached.insert(node, (via, before));
        if surplus.get(node as usize).is_some_and(|&s| s < 0) {
            let mut path = Vec::new();
            let mut n = node;
            while let Some(&(via, before)) = reached.get(&n) {
                if via == u32::MAX {
                    break;
                }
                path.push(via);
                n = before;
            }
            return Some((node, path));
        }
        for &i in edges.at(node) {
            let Some(c) = choices.get(i as usize) else { continue };
            let [a, b] = c.fragment.nodes;
            let next = if c.kept && b == node {
                a
            } else if !c.kept && a == node {
                b
            } else {
                continue;
            };
            let cost = cost.0 + c.doubt;
            if cost <= limit && !reached.contains_key(&next) {
                queue.push(Reverse((Cost(cost), next, i, node)));
            }
        }
    }
    None
}

/// A length that can be ordered.
#[derive(Clone, Copy, PartialEq)]
struct Cost(f64);

impl Eq for Cost {}

impl PartialOrd for Cost {
    fn partial_cmp(&self, other: &Self) -> Option<std::cmp::Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Cost {
    fn cmp(&self, other: &Self) -> std::cmp::Ordering {
        self.0.total_cmp(&other.0)
    }
}

/// Closed loops of the kept fragments, each passing no node twice: positions in `choices`. `tangent`
/// gives the direction of a fragment at its start (0) and end (1).
///
/// Where a boundary touches itself in a node the way that turns most to the left is taken, towards
/// the material: lobes that touch stay loops of their own.
pub(crate) fn loops(choices: &[Choice], tangent: impl Fn(&Fragment, f64) -> Vec2) -> Vec<Vec<u32>> {
    let mut out: Vec<(u32, u32)> =
        (0u32..).zip(choices).filter(|(_, c)| c.kept).map(|(i, c)| (c.fragment.nodes[0], i)).collect();
    out.sort_unstable();
    let mut used = vec![false; choices.len()];
    let mut found = Vec::new();
    let mut position: std::collections::BTreeMap<u32, usize> = std::collections::BTreeMap::new();
    for &(_, first) in &out {
        let mut trail: Vec<u32> = Vec::new();
        let mut next = Some(first);
        while let Some(i) = next {
            let Some(c) = choices.get(i as usize) else { break };
            match used.get_mut(i as usize) {
                Some(u) if !*u => *u = true,
                _ => break,
            }
            let [from, to] = c.fragment.nodes;
            position.insert(from, trail.len());
            trail.push(i);
            if let Some(&at) = position.get(&to) {
                // Back at a node of the trail: what lies between is a loop.
                let ring = trail.split_off(at);
                for &k in &ring {
                    if let Some(c) = choices.get(k as usize) {
                        position.remove(&c.fragment.nodes[0]);
                    }
                }
                found.push(ring);
            }
            next = onward(choices, &out, &used, &tangent, i, to);
            if trail.is_empty() {
                break;
            }
        }
        position.clear();
    }
    found
}

/// The unused kept fragment that leaves `node`, the most to the left of fragment `i` arriving there.
fn onward(
    choices: &[Choice],
    out: &[(u32, u32)],
    used: &[bool],
    tangent: &impl Fn(&Fragment, f64) -> Vec2,
    i: u32,
    node: u32,
) -> Option<u32> {
    let from = out.partition_point(|o| o.0 < node);
    let mut leaving = out
        .iter()
        .skip(from)
        .take_while(|o| o.0 == node)
        .map(|o| o.1)
        .filter(|&k| used.get(k as usize).is_some_and(|u| !u));
    let first = leaving.next()?;
    let Some(second) = leaving.next() else { return Some(first) };
    let ahead = choices.get(i as usize).map_or(Vec2::ZERO, |c| tangent(&c.fragment, 1.0));
    let turn = |k: u32| {
        let d = choices.get(k as usize).map_or(Vec2::ZERO, |c| tangent(&c.fragment, 0.0));
        ahead.cross(d).atan2(ahead.dot(d))
    };
    let mut best = first;
    for k in std::iter::once(second).chain(leaving) {
        if turn(k) > turn(best) {
            best = k;
        }
    }
    Some(best)
}
