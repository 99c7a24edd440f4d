//! A static index over bounding boxes: which boxes meet a box, and which item is nearest to a point.
//!
//! Boxes are sorted along a Hilbert curve of their middles and packed eight to a node, level upon
//! level (I. Kamel, C. Faloutsos, "On packing R-trees", 1993). Building costs one sort; a question
//! costs the logarithm of the number of boxes where they do not overlap much.

use kurbo::{Point, Rect};

/// Children of one node. Eight boxes of four numbers are four cache lines.
const FANOUT: usize = 8;

/// Deepest pile of nodes waiting to be looked at: FANOUT - 1 siblings on each of at most 11 levels
/// (eight to the eleventh is more than a u32 counts).
const PILE: usize = FANOUT * 12;

/// Index over boxes; items are named by their position in the slice it was built from.
#[derive(Clone, Debug, Default)]
pub struct BoxIndex {
    /// Boxes of all levels, leaves first.
    boxes: Vec<Rect>,
    /// Position of each leaf's item.
    items: Vec<u32>,
    /// First box of each level; the last entry is the end of the root's level.
    levels: Vec<usize>,
}

impl BoxIndex {
    /// Index over `boxes`, at most `u32::MAX` of them.
    #[must_use]
    pub fn new(boxes: &[Rect]) -> Self {
        let Some(first) = boxes.first() else {
            return Self::default();
        };
        let all = boxes.iter().skip(1).fold(*first, |a, b| a.union(*b));
        let scale = |low: f64, size: f64, v: f64| {
            if size > 0.0 { ((v - low) / size * 65535.0) as u32 } else { 0 }
        };
        let mut keyed: Vec<(u32, u32)> = (0u32..)
            .zip(boxes)
            .map(|(i, b)| {
                let m = b.center();
                (hilbert(scale(all.x0, all.width(), m.x), scale(all.y0, all.height(), m.y)), i)
            })
            .collect();
        keyed.sort_unstable();
        let items: Vec<u32> = keyed.iter().map(|k| k.1).collect();
        let mut packed: Vec<Rect> = items.iter().filter_map(|&i| boxes.get(i as usize).copied()).collect();
        let mut levels = vec![0];
        let mut from = 0;
        while packed.len() - from > 1 {
            let to = packed.len();
            levels.push(to);
            for node in (from..to).step_by(FANOUT) {
                let children = packed.get(node..(node + FANOUT).min(to)).unwrap_or_default();
                let union = children.iter().copied().reduce(|a, b| a.union(b)).unwrap_or(Rect::ZERO);
                packed.push(union);
            }
            from = to;
        }
        levels.push(packed.len());
        Self { boxes: packed, items, levels }
    }

    /// Number of items.
    #[must_use]
    pub fn len(&self) -> usize {
        self.items.len()
    }

    /// True without items.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.items.is_empty()
    }

    /// Children of node `node` of `level` (> 0), as positions in `boxes`.
    fn children(&self, level: usize, node: usize) -> std::ops::Range<usize> {
        let (below, here) = (self.levels[level - 1], self.levels[level]);
        let first = below + (node - here) * FANOUT;
        first..(first + FANOUT).min(here)
    }

    /// Calls `visit` with every item whose box meets `window` (touching counts), in a fixed order.
    pub fn search(&self, window: Rect, mut visit: impl FnMut(usize)) {
        if self.is_empty() {
            return;
        }
        let top = self.levels.len() - 2;
        let mut pile = vec![(top, self.boxes.len() - 1)];
        if !meets(self.boxes[self.boxes.len() - 1], window) {
            return;
        }
        while let Some((level, node)) = pile.pop() {
            if level == 0 {
                visit(self.items[node] as usize);
                continue;
            }
            for child in self.children(level, node) {
                if !meets(self.boxes[child], window) {
                    continue;
                }
                if level == 1 {
                    visit(self.items[child] as usize);
                } else {
                    pile.push((level - 1, child));
                }
            }
        }
    }

    /// Does `wanted` hold for an item whose box meets `window`? Stops at the first.
    #[must_use]
    pub fn any(&self, window: Rect, mut wanted: impl FnMut(usize) -> bool) -> bool {
        let Some(root) = self.boxes.last() else { return false };
        if !meets(*root, window) {
            return false;
        }
        let mut pile = vec![(self.levels.len() - 2, self.boxes.len() - 1)];
        while let Some((level, node)) = pile.pop() {
            if level == 0 {
                if wanted(self.items[node] as usize) {
                    return true;
                }
                continue;
            }
            pile.extend(
                self.children(level, node).filter(|&c| meets(self.boxes[c], window)).map(|c| (level - 1, c)),
            );
        }
        false
    }

    /// Calls `visit` with every item whose box lies within `radius` of `p`, in a fixed order. Unlike
    /// [`BoxIndex::search`] it leaves out what only the corners of a window would reach.
    pub fn within(&self, p: Point, radius: f64, mut visit: impl FnMut(usize)) {
        if self.is_empty() {
            return;
        }
        let mut pile = vec![(self.levels.len() - 2, self.boxes.len() - 1)];
        while let Some((level, node)) = pile.pop() {
            if distance_to(self.boxes[node], p) > radius {
                continue;
            }
            if level == 0 {
                visit(self.items[node] as usize);
            } else {
                pile.extend(self.children(level, node).map(|child| (level - 1, child)));
            }
        }
    }

    /// The item nearest to `p` among those nearer than `within`, by `distance(item)`, which must not
    /// be less than the distance of `p` from the item's box. Equal distances: the lowest position.
    #[must_use]
    pub fn nearest(&self, p: Point, within: f64, distance: impl FnMut(usize) -> f64) -> Option<(usize, f64)> {
        self.least(within, |b| distance_to(b, p), distance)
    }

    /// The item nearest to something that lies in `window`, as [`Self::nearest`]: `distance(item)` must
    /// not be less than the distance between the window and the item's box.
    #[must_use]
    pub fn nearest_to_box(
        &self,
        window: Rect,
        within: f64,
        distance: impl FnMut(usize) -> f64,
    ) -> Option<(usize, f64)> {
        self.least(within, |b| distance_between(b, window), distance)
    }

    /// The item of least `distance` below `within`, where that of no item is less than `lower` of any
    /// box round it.
    fn least(
        &self,
        within: f64,
        lower_bound: impl Fn(Rect) -> f64,
        mut distance: impl FnMut(usize) -> f64,
    ) -> Option<(usize, f64)> {
        if self.is_empty() {
            return None;
        }
        let mut best: Option<(usize, f64)> = None;
        let mut limit = within;
        let mut pile = [(0.0f64, 0u32, 0u32); PILE];
        let mut high = 1;
        let root = self.boxes.len() - 1;
        pile[0] = (lower_bound(self.boxes[root]), self.levels.len() as u32 - 2, root as u32);
        while high > 0 {
            high -= 1;
            let (lower, level, node) = pile[high];
            if lower > limit {
                continue;
            }
            if level == 0 {
                let item = self.items[node as usize] as usize;
                let d = distance(item);
                let better = d < limit || (d <= limit && best.is_some_and(|(i, _)| item < i));
                if better {
                    limit = d;
                    best = Some((item, d));
                }
                continue;
            }
            let from = high;
            for child in self.children(level as usize, node as usize) {
                let d = lower_bound(self.boxes[child]);
                if d <= limit {
                    pile[high] = (d, level - 1, child as u32);
                    high += 1;
                }
            }
            // The nearest child last, so that it is looked at first. Few entries: insertion sort.
            pile[from..high].sort_unstable_by(|a, b| b.0.total_cmp(&a.0));
        }
        best
    }
}

/// Do two boxes share a point? (kurbo's `overlaps` leaves touching out.)
fn meets(a: Rect, b: Rect) -> bool {
    a.x0 <= b.x1 && b.x0 <= a.x1 && a.y0 <= b.y1 && b.y0 <= a.y1
}

/// Distance from a point to a box, 0 inside.
fn distance_to(b: Rect, p: Point) -> f64 {
    let dx = (b.x0 - p.x).max(p.x - b.x1).max(0.0);
    let dy = (b.y0 - p.y).max(p.y - b.y1).max(0.0);
    (dx * dx + dy * dy).sqrt()
}

/// Distance between two boxes, 0 where they meet.
fn distance_between(a: Rect, b: Rect) -> f64 {
    let dx = (a.x0 - b.x1).max(b.x0 - a.x1).max(0.0);
    let dy = (a.y0 - b.y1).max(b.y0 - a.y1).max(0.0);
    (dx * dx + dy * dy).sqrt()
}

/// Position along the Hilbert curve of order 16 (H. Warren, Hacker's Delight, 2nd ed., section 16).
fn hilbert(x: u32, y: u32) -> u32 {
    let (mut x, mut y, mut d) = (x & 0xffff, y & 0xffff, 0u32);
    let mut s = 1u32 << 15;
    while s > 0 {
        let (rx, ry) = (u32::from(x & s > 0), u32::from(y & s > 0));
        d = d.wrapping_add(s.wrapping_mul(s).wrapping_mul((3 * rx) ^ ry));
        if ry == 0 {
            if rx == 1 {
                x = 0xffff - x;
                y = 0xffff - y;
            }
            std::mem::swap(&mut x, &mut y);
        }
        s >>= 1;
    }
    d
}

#[cfg(test)]
mod tests {
    use super::*;

    fn boxes(n: usize) -> Vec<Rect> {
        let mut rng = fastrand::Rng::with_seed(7);
        (0..n)
            .map(|_| {
                let p = Point::new(rng.f64() * 100.0, rng.f64() * 100.0);
                Rect::from_points(p, p + kurbo::Vec2::new(rng.f64() * 3.0, rng.f64() * 3.0))
            })
            .collect()
    }

    #[test]
    fn search_finds_exactly_the_boxes_that_a_scan_finds() {
        for n in [0, 1, 2, 8, 9, 64, 65, 1000] {
            let all = boxes(n);
            let index = BoxIndex::new(&all);
            let window = Rect::new(20.0, 30.0, 40.0, 45.0);
            let mut found = Vec::new();
            index.search(window, |i| found.push(i));
            found.sort_unstable();
            let scan: Vec<usize> = (0..n).filter(|&i| meets(all[i], window)).collect();
            assert_eq!(found, scan, "{n} boxes");
            for i in 0..n {
                assert_eq!(index.any(window, |k| k == i), scan.contains(&i), "{i} of {n} boxes");
            }
        }
    }

    #[test]
    fn within_finds_exactly_the_boxes_that_a_scan_finds() {
        for n in [0, 1, 9, 65, 1000] {
            let all = boxes(n);
            let index = BoxIndex::new(&all);
            let p = Point::new(40.0, 52.0);
            let mut found = Vec::new();
            index.within(p, 17.0, |i| found.push(i));
            found.sort_unstable();
            let scan: Vec<usize> = (0..n).filter(|&i| distance_to(all[i], p) <= 17.0).collect();
            assert_eq!(found, scan, "{n} boxes");
        }
    }

    #[test]
    fn nearest_is_the_nearest_of_a_scan() {
        for n in [1, 2, 8, 9, 64, 65, 1000] {
            let all = boxes(n);
            let index = BoxIndex::new(&all);
            for k in 0..50 {
                let p = Point::new(f64::from(k) * 2.3, 110.0 - f64::from(k) * 2.1);
                let scan = all.iter().map(|b| distance_to(*b, p)).fold(f64::INFINITY, f64::min);
                let found = index.nearest(p, f64::INFINITY, |i| distance_to(all[i], p));
                assert_eq!(found.map(|f| f.1), Some(scan));
            }
        }
    }

    #[test]
    fn nearest_to_a_box_is_the_nearest_of_a_scan() {
        for n in [1, 9, 65, 1000] {
            let all = boxes(n);
            let index = BoxIndex::new(&all);
            for k in 0..50 {
                let p = Point::new(f64::from(k) * 2.3, 110.0 - f64::from(k) * 2.1);
                let window = Rect::from_points(p, p + kurbo::Vec2::new(1.5, -0.5 * f64::from(k)));
                let scan = all.iter().map(|b| distance_between(*b, window)).fold(f64::INFINITY, f64::min);
                let found = index.nearest_to_box(window, f64::INFINITY, |i| distance_between(all[i], window));
                assert_eq!(found.map(|f| f.1), Some(scan));
                let nearer = index.nearest_to_box(window, scan * 0.9, |i| distance_between(all[i], window));
                assert_eq!(nearer, None);
            }
        }
    }
}
