//! Which ends of strands are one point? Ends are hashed into a grid whose cells are as wide as the
//! length asked about, so that only the nine cells round an end are looked at.

use std::collections::{HashMap, HashSet};

use super::join::{Gaps, Strand};
use crate::geometry::{BoxIndex, Point, Rect, Segment};
use crate::input::{Place, Problem, Refusal};

/// One of the two ends of a strand.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum WhichEnd {
    Start,
    End,
}

impl WhichEnd {
    const fn other(self) -> Self {
        match self {
            Self::Start => Self::End,
            Self::End => Self::Start,
        }
    }

    /// The point itself.
    pub(super) fn of(self, strand: &Strand) -> Option<Point> {
        match self {
            Self::Start => strand.segments.first().map(Segment::start),
            Self::End => strand.segments.last().map(Segment::end),
        }
    }
}

/// A strand and one of its ends.
pub(super) type End = (usize, WhichEnd);

/// Two lone ends that almost meet.
pub(super) struct NearMiss {
    /// Strand of the first end.
    pub(super) strand: usize,
    /// Both ends.
    pub(super) ends: (Point, Point),
}

/// More lone ends than this in one cell of the gap's width are no gaps of a contour.
const CROWD: usize = 64;

/// Gaps below this are rounding and not worth telling.
const TELL: f64 = 1e-9;

/// Nodes and the ends at each. Strands closed in themselves have none.
pub(super) struct Nodes {
    /// Node of each end: `2 i` for the start of strand `i`, `2 i + 1` for its end.
    node: Vec<usize>,
    /// Ends at each node.
    ends: Vec<Vec<End>>,
    closed: Vec<bool>,
}

impl Nodes {
    /// Ends nearer than `same` are one node.
    pub(super) fn same_ends(strands: &[Strand], same: f64) -> Self {
        let points: Vec<Point> = strands.iter().flat_map(both_ends).collect();
        let mut parent: Vec<usize> = (0..points.len()).collect();
        let mut grid = Grid::new(same.max(f64::MIN_POSITIVE));
        for (i, p) in points.iter().enumerate() {
            for j in grid.near(*p) {
                if points.get(j).is_some_and(|q| (*q - *p).hypot() <= same) {
                    unite(&mut parent, i, j);
                }
            }
            // Ends that agree exactly are already one: only the first of them need be found again.
            let alone = find(&mut parent, i) == i;
            if alone || !grid.holds(*p, &points) {
                grid.insert(*p, i);
            }
        }
        let node = (0..points.len()).map(|i| find(&mut parent, i)).collect();
        let closed = strands.iter().map(|s| s.closed).collect();
        let mut nodes = Self { node, ends: Vec::new(), closed };
        nodes.collect_ends();
        nodes
    }

    fn collect_ends(&mut self) {
        let mut ends = vec![Vec::new(); self.node.len()];
        for (k, &n) in self.node.iter().enumerate() {
            let strand = k / 2;
            if self.closed.get(strand) == Some(&false)
                && let Some(list) = ends.get_mut(n)
            {
                list.push((strand, if k % 2 == 0 { WhichEnd::Start } else { WhichEnd::End }));
            }
        }
        self.ends = ends;
    }

    /// Node of an end.
    pub(super) fn of(&self, strand: usize, end: WhichEnd) -> usize {
        self.node.get(2 * strand + usize::from(end == WhichEnd::End)).copied().unwrap_or(usize::MAX)
    }

    /// Nodes with three or more ends, in the order of their first strand.
    pub(super) fn forks(&self) -> Vec<Vec<End>> {
        let mut forks: Vec<Vec<End>> = self.ends.iter().filter(|e| e.len() > 2).cloned().collect();
        forks.sort_unstable_by_key(|e| e.first().map(|f| f.0));
        forks
    }

    fn lone(&self) -> impl Iterator<Item = End> + '_ {
        self.ends.iter().filter_map(|e| if let [only] = e.as_slice() { Some(*only) } else { None })
    }

    /// Joins lone ends within the gap, the nearest pairs first. A lone end that stays alone but lies
    /// within the gap of another node becomes that node's third end.
    pub(super) fn join_lone_ends(
        &mut self,
        strands: &[Strand],
        gaps: Gaps,
        file: &str,
    ) -> Result<(), Refusal> {
        let lone: Vec<(End, Point)> =
            self.lone().filter_map(|e| Some((e, e.1.of(strands.get(e.0)?)?))).collect();
        let mut grid = Grid::new(gaps.join);
        let mut pairs = Vec::new();
        for (k, (end, p)) in lone.iter().enumerate() {
            let near = grid.near(*p);
            if near.len() > CROWD {
                return Err(vec![crowded(strands, end.0, *p, gaps, file)]);
            }
            for j in near {
                let Some((other, q)) = lone.get(j) else { continue };
                let apart = (*p - *q).hypot();
                // A strand's own two ends close it only when it goes somewhere in between.
                let own = other.0 == end.0
                    && strands.get(end.0).is_none_or(|s| length(&s.segments) < 4.0 * gaps.join);
                if apart <= gaps.join && !own {
                    pairs.push((apart, j, k));
                }
            }
            grid.insert(*p, k);
        }
        pairs.sort_unstable_by(|a, b| a.0.total_cmp(&b.0).then((a.1, a.2).cmp(&(b.1, b.2))));
        let mut taken = vec![false; lone.len()];
        for (_, j, k) in pairs {
            let (Some(&(a, _)), Some(&(b, _))) = (lone.get(j), lone.get(k)) else { continue };
            // The third of three ends goes to a node that is whole already: a fork, refused later.
            if taken.get(j) == Some(&true) && taken.get(k) == Some(&true) {
                continue;
            }
            let (from, to) = (self.of(b.0, b.1), self.of(a.0, a.1));
            let slot = 2 * b.0 + usize::from(b.1 == WhichEnd::End);
            let slot_a = 2 * a.0 + usize::from(a.1 == WhichEnd::End);
            let (slot, target) = if taken.get(k) == Some(&true) { (slot_a, from) } else { (slot, to) };
            if let Some(n) = self.node.get_mut(slot) {
                *n = target;
            }
            for t in [j, k] {
                if let Some(t) = taken.get_mut(t) {
                    *t = true;
                }
            }
        }
        self.collect_ends();
        Ok(())
    }

    /// Lone ends that lie within the gap of an end of another chain, each with the ends it meets there.
    pub(super) fn docked(&self, strands: &[Strand], gaps: Gaps) -> Vec<Vec<End>> {
        let ends: Vec<(End, Point)> =
            self.ends.iter().flatten().filter_map(|e| Some((*e, self.point(strands, *e)?))).collect();
        let boxes: Vec<Rect> = ends.iter().map(|e| Rect::from_points(e.1, e.1)).collect();
        let index = BoxIndex::new(&boxes);
        let dock = |end: End| {
            let p = self.point(strands, end)?;
            let own: HashSet<usize> = self.chain_from(end.0).0.iter().map(|c| c.0).collect();
            let distance = |j: usize| {
                ends.get(j).filter(|e| !own.contains(&e.0.0)).map_or(f64::INFINITY, |e| (e.1 - p).hypot())
            };
            let (j, _) = index.nearest(p, gaps.join, distance)?;
            let other = ends.get(j)?.0;
            let mut met = self.ends.get(self.of(other.0, other.1))?.clone();
            met.push(end);
            Some(met)
        };
        self.lone().filter_map(dock).collect()
    }

    /// One warning for all gaps that were closed.
    pub(super) fn closed_gaps(&self, strands: &[Strand], file: &str) -> Option<Problem> {
        let mut count = 0;
        let mut worst: Option<(f64, usize, Point, Point)> = None;
        for ends in &self.ends {
            if let [a, b] = ends.as_slice()
                && let (Some(p), Some(q)) = (self.point(strands, *a), self.point(strands, *b))
            {
                let gap = (p - q).hypot();
                count += usize::from(gap > TELL);
                if gap > TELL && worst.is_none_or(|w| gap > w.0) {
                    worst = Some((gap, a.0, p, q));
                }
            }
        }
        let (gap, strand, p, q) = worst?;
        let place = strands.get(strand).map_or_else(|| Place::file(file), |s| s.place.clone());
        let many = if count == 1 { "a gap was".into() } else { format!("{count} gaps were") };
        Some(Problem::warning(
            place,
            format!(
                "{many} closed, the greatest {gap:.3e} wide between ({:.6}, {:.6}) and ({:.6}, {:.6})",
                p.x, p.y, q.x, q.y
            ),
            "ends that agree",
            "nothing if the width is below what matters; else close it in the drawing",
        ))
    }

    fn point(&self, strands: &[Strand], end: End) -> Option<Point> {
        end.1.of(strands.get(end.0)?)
    }

    /// Lone ends whose nearest other lone end is nearer than a contour means, or nearer than a
    /// hundredth of the chain they both end.
    pub(super) fn near_misses(&self, strands: &[Strand], gaps: Gaps) -> Vec<NearMiss> {
        let lone: Vec<(End, Point)> =
            self.lone().filter_map(|e| Some((e, self.point(strands, e)?))).collect();
        let boxes: Vec<Rect> = lone.iter().map(|l| Rect::from_points(l.1, l.1)).collect();
        let index = BoxIndex::new(&boxes);
        let mut misses = Vec::new();
        let mut told = vec![false; lone.len()];
        for (k, (end, p)) in lone.iter().enumerate() {
            if told.get(k) == Some(&true) {
                continue;
            }
            let (chain, _) = self.chain_from(end.0);
            let long: f64 = chain.iter().filter_map(|c| strands.get(c.0)).map(|s| length(&s.segments)).sum();
            let far = |j: usize| lone.get(j).filter(|_| j != k).map_or(f64::INFINITY, |l| (l.1 - *p).hypot());
            let same_chain = |j: usize| lone.get(j).is_some_and(|l| chain.iter().any(|c| c.0 == l.0.0));
            let within = gaps.almost.max(0.01 * long);
            let Some((j, apart)) = index.nearest(*p, within, far) else { continue };
            // A short straight line has its ends near one another, too, and is none the worse for it.
            let mistake = if same_chain(j) { apart < 0.25 * long } else { apart < gaps.almost };
            if mistake && let Some((_, q)) = lone.get(j) {
                misses.push(NearMiss { strand: end.0, ends: (*p, *q) });
                if let Some(t) = told.get_mut(j) {
                    *t = true;
                }
            }
        }
        misses
    }

    /// The chain that holds strand `first`, each strand with the end at which it is entered, in the
    /// direction of `first`; and whether it closes. A closed chain starts with `first`.
    pub(super) fn chain_from(&self, first: usize) -> (Vec<End>, bool) {
        let mut chain = vec![(first, WhichEnd::Start)];
        if self.closed.get(first) == Some(&true) {
            return (chain, true);
        }
        let mut leave = (first, WhichEnd::End);
        while let Some(next) = self.beyond(leave) {
            if next.0 == first {
                return (chain, true);
            }
            chain.push(next);
            leave = (next.0, next.1.other());
        }
        let mut back = Vec::new();
        let mut leave = (first, WhichEnd::Start);
        while let Some(next) = self.beyond(leave) {
            // Entered backwards: seen along the chain it is left at this end.
            back.push((next.0, next.1.other()));
            leave = (next.0, next.1.other());
        }
        back.reverse();
        back.append(&mut chain);
        (back, false)
    }

    /// The end that meets `end` at its node, where there is just one.
    fn beyond(&self, end: End) -> Option<End> {
        match self.ends.get(self.of(end.0, end.1))?.as_slice() {
            [a, b] if *a == end => Some(*b),
            [a, b] if *b == end => Some(*a),
            _ => None,
        }
    }
}

fn length(segments: &[Segment]) -> f64 {
    segments.iter().map(Segment::length).sum()
}

fn both_ends(strand: &Strand) -> [Point; 2] {
    [WhichEnd::Start, WhichEnd::End].map(|e| e.of(strand).unwrap_or(Point::ORIGIN))
}

fn crowded(strands: &[Strand], strand: usize, p: Point, gaps: Gaps, file: &str) -> Problem {
    let place = strands.get(strand).map_or_else(|| Place::file(file), |s| s.place.clone());
    Problem::error(
        place,
        format!("more than {CROWD} loose ends lie within {} of ({:.6}, {:.6})", gaps.join, p.x, p.y),
        "a contour much larger than the gaps that are closed in it",
        "check the units of the drawing: it may be far smaller than its unit says",
    )
}

/// Points hashed by cells of a width.
struct Grid {
    width: f64,
    cells: HashMap<(i64, i64), Vec<usize>>,
}

impl Grid {
    fn new(width: f64) -> Self {
        Self { width, cells: HashMap::new() }
    }

    /// Coordinates reach 1e9 and widths down to the smallest number: `as` saturates, and saturated
    /// cells only make neighbours of points that are then told apart by their distance.
    fn cell(&self, p: Point) -> (i64, i64) {
        ((p.x / self.width).floor() as i64, (p.y / self.width).floor() as i64)
    }

    fn insert(&mut self, p: Point, item: usize) {
        let cell = self.cells.entry(self.cell(p)).or_default();
        // A crowd in one cell would cost its square; what is left out still meets those that are in.
        if cell.len() <= CROWD {
            cell.push(item);
        }
    }

    /// Is an item at exactly this point in its cell already?
    fn holds(&self, p: Point, points: &[Point]) -> bool {
        self.cells
            .get(&self.cell(p))
            .is_some_and(|c| c.iter().take(CROWD).any(|&i| points.get(i).is_some_and(|q| *q == p)))
    }

    fn near(&self, p: Point) -> Vec<usize> {
        let (x, y) = self.cell(p);
        let mut found = Vec::new();
        for dx in -1..=1 {
            for dy in -1..=1 {
                if let Some(cell) = self.cells.get(&(x.saturating_add(dx), y.saturating_add(dy))) {
                    found.extend_from_slice(cell);
                }
            }
        }
        found.sort_unstable();
        found.dedup();
        found
    }
}

fn find(parent: &mut [usize], mut i: usize) -> usize {
    while let Some(&p) = parent.get(i) {
        if p == i {
            break;
        }
        let above = parent.get(p).copied().unwrap_or(p);
        if let Some(slot) = parent.get_mut(i) {
            *slot = above;
        }
        i = above;
    }
    i
}

/// The lower position stays the root, so that nodes are named by their first end.
fn unite(parent: &mut [usize], a: usize, b: usize) {
    let (a, b) = (find(parent, a), find(parent, b));
    let (low, high) = (a.min(b), a.max(b));
    if let Some(slot) = parent.get_mut(high) {
        *slot = low;
    }
}
