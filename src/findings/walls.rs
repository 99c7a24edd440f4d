//! The contour as a cutter meets it: which wall is at a place, what comes before and after it, and how
//! large a disc can touch it there.
//!
//! Material lies on the left of every segment (see [`crate::part::Part`]), so the cutter works on the
//! right: a turn to the right is an inside corner, an arc that turns right an inside fillet.

use std::sync::OnceLock;

use crate::compare::ContourStretch;
use crate::geometry::{BoxIndex, Contour, Point, Rect, Segment, Vec2};

/// A wall's reach is halved this often: to a billionth of the cutter's radius.
const HALVINGS: usize = 40;

/// The contour's segments, indexed.
#[derive(Debug)]
pub(super) struct Walls<'a> {
    contour: &'a Contour,
    segments: Vec<(usize, &'a Segment)>,
    /// Position of each path's first segment; one more entry than paths.
    firsts: Vec<usize>,
    lengths: Vec<f64>,
    /// Made when it is first asked: a part without findings never is.
    index: OnceLock<BoxIndex>,
    extent: f64,
}

/// The largest disc that touches a wall at a place from the cutter's side.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Reach {
    /// Its radius, a length.
    pub radius: f64,
    /// Unit direction from its centre to what stops it growing.
    pub stopped_towards: Vec2,
}

impl<'a> Walls<'a> {
    pub(super) fn new(contour: &'a Contour) -> Self {
        let segments: Vec<(usize, &Segment)> = contour.segments().collect();
        let mut firsts = vec![0];
        for path in contour.paths() {
            firsts.push(firsts.last().copied().unwrap_or(0) + path.segments().len());
        }
        let lengths = contour.paths().iter().map(|p| p.length()).collect();
        let b = contour.bounds();
        let extent = [b.x0, b.x1, b.y0, b.y1].iter().fold(0.0f64, |a, v| a.max(v.abs()));
        Self { contour, segments, firsts, lengths, index: OnceLock::new(), extent }
    }

    fn index(&self) -> &BoxIndex {
        self.index.get_or_init(|| {
            let boxes: Vec<Rect> = self.segments.iter().map(|s| s.1.bounds()).collect();
            BoxIndex::new(&boxes)
        })
    }

    pub(super) const fn contour(&self) -> &'a Contour {
        self.contour
    }

    pub(super) fn segment(&self, i: usize) -> Option<&'a Segment> {
        self.segments.get(i).map(|s| s.1)
    }

    /// Length of a path, zero for one that is not there.
    pub(super) fn path_length(&self, path: usize) -> f64 {
        self.lengths.get(path).copied().unwrap_or(0.0)
    }

    pub(super) fn is_closed(&self, path: usize) -> bool {
        self.contour.paths().get(path).is_some_and(|p| p.is_closed())
    }

    /// The segment nearest to `p`, of one path when `path` is given.
    pub(super) fn locate(&self, p: Point, path: Option<usize>) -> Option<usize> {
        let distance = |i: usize| match self.segments.get(i) {
            Some((of, s)) if path.is_none_or(|wanted| wanted == *of) => s.distance(p),
            _ => f64::INFINITY,
        };
        self.index().nearest(p, f64::INFINITY, distance).map(|n| n.0)
    }

    /// The segment after (`forward`) or before this one on its path.
    pub(super) fn neighbour(&self, i: usize, forward: bool) -> Option<usize> {
        let path = self.segments.get(i)?.0;
        let (first, end) = (*self.firsts.get(path)?, *self.firsts.get(path.checked_add(1)?)?);
        let closed = self.is_closed(path);
        if forward {
            if i + 1 < end { Some(i + 1) } else { closed.then_some(first) }
        } else if i > first {
            Some(i - 1)
        } else {
            closed.then_some(end.checked_sub(1)?)
        }
    }

    /// The largest disc, up to radius `most`, that touches segment `i` at parameter `t` from the
    /// cutter's side and holds no other point of the contour. Discs that touch there lie one in the
    /// other, so halving finds it. `None`: a disc of radius `most` fits.
    pub(super) fn reach(&self, i: usize, t: f64, most: f64) -> Option<Reach> {
        let segment = self.segment(i)?;
        let (q, right) = (segment.point_at(t), -segment.left_normal_at(t));
        let slack = 1e-6 * most + 4e-13 * self.extent;
        let blocked = |radius: f64| {
            let center = q + right * radius;
            self.index()
                .nearest(center, radius, |k| self.segment(k).map_or(f64::INFINITY, |s| s.distance(center)))
                .filter(|n| n.1 < radius - slack)
        };
        blocked(most)?;
        let (mut fits, mut fails) = (0.0, most);
        for _ in 0..HALVINGS {
            let middle = 0.5 * (fits + fails);
            if blocked(middle).is_some() { fails = middle } else { fits = middle }
        }
        let center = q + right * fails;
        let stopper = blocked(fails).and_then(|n| self.segment(n.0))?;
        let v = stopper.nearest(center).at - center;
        let size = v.hypot();
        let stopped_towards = if size > 0.0 { v / size } else { right };
        Some(Reach { radius: fits, stopped_towards })
    }

    /// Length of a stretch, never below zero.
    pub(super) fn stretch_length(stretch: &ContourStretch) -> f64 {
        (stretch.to - stretch.from).max(0.0)
    }

    /// Gap along the contour between two stretches of one path: zero where they meet, the shorter way
    /// round on a loop. `None` on different paths.
    pub(super) fn gap(&self, a: &ContourStretch, b: &ContourStretch) -> Option<f64> {
        if a.path != b.path {
            return None;
        }
        let straight = (b.from - a.to).max(a.from - b.to).max(0.0);
        if !self.is_closed(a.path) {
            return Some(straight);
        }
        let length = self.path_length(a.path);
        let (first, last) = if a.from <= b.from { (a, b) } else { (b, a) };
        let round = (first.from + length - last.to).max(0.0);
        Some(straight.min(round))
    }
}
