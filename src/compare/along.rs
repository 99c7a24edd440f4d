//! Which feature of a set of targets is the nearest along a course, piece by piece?
//!
//! For a course q(s) and targets k with radii r_k this computes the lower envelope of the functions
//! f_k(s) = |q(s) - target k| - r_k: an ordered list of pieces that fill the course, on each of which
//! one feature is the nearest and f = min f_k follows one closed form ([`super::law`]).
//!
//! **Certainty.** Each f_k is 1-Lipschitz in s. An interval is judged by bounds of every f_k over the
//! *whole* interval, never by samples: a target is dropped only when its lower bound is above another's
//! upper bound, or when the difference of the two is bounded from below by -`tie`. An interval that
//! cannot be decided is divided; once shorter than `tie` it is kept with the law of the target nearest at
//! its middle, and two 1-Lipschitz functions that agree there differ by at most its length. So on every
//! piece f lies within `tie` of its law, from above: law - tie <= f <= law + tie, and no minimum or
//! maximum between pieces can be missed.
//!
//! **Cost.** Lists of candidates halve with the interval, so one long course beside n short moves costs
//! O(n log n). Functions that agree over an interval (moves in one line, retraced moves, concentric
//! arcs) end it at once: their difference is bounded to second order, not divided down to `tie`.

use crate::tolerance::Tolerances;

use super::law::{Course, Law};
use super::targets::{Bounds, Feature, Targets};

/// Up to this many candidates are compared pair by pair; longer lists are divided first.
const FEW: usize = 12;

/// Divisions after which an interval is halved without looking for a better place, so that every
/// further step is certain to shorten it.
const CLEVER_DEPTH: u32 = 48;

/// Divisions after which an interval is kept undecided. Halving alone needs fewer than this from
/// 1e9 to 1e-9 units.
const DEEPEST: u32 = 120;

/// A stretch of a course on which one feature is the nearest.
#[derive(Clone, Copy, Debug)]
pub(super) struct Piece {
    /// Way run where it begins.
    pub(super) from: f64,
    /// Way run where it ends.
    pub(super) to: f64,
    /// The nearest target.
    pub(super) target: usize,
    /// Its nearest feature.
    pub(super) feature: Feature,
    /// The distance less radius along it.
    pub(super) law: Law,
    /// False for an interval shorter than the tie length that was not decided.
    pub(super) decided: bool,
}

/// Lower envelopes along courses, one after the other: keeps its buffers and its last answer.
pub(super) struct Tracer<'a> {
    targets: &'a Targets<'a>,
    tie: f64,
    slip: f64,
    pile: Vec<u32>,
    last: Option<usize>,
}

/// An interval of a course with the depth of its division.
#[derive(Clone, Copy)]
struct Interval {
    lo: f64,
    hi: f64,
    depth: u32,
}

impl Interval {
    const fn middle(&self) -> f64 {
        0.5 * (self.lo + self.hi)
    }
}

impl<'a> Tracer<'a> {
    pub(super) const fn new(targets: &'a Targets<'a>, tolerances: &Tolerances) -> Self {
        let (tie, slip) = (tolerances.figure, tolerances.coincidence);
        Self { targets, tie, slip, pile: Vec::new(), last: None }
    }

    /// Distance less radius at the middle of `course`, and its target.
    pub(super) fn at_middle(&mut self, course: &Course) -> Option<(usize, f64)> {
        let found = self.targets.nearest(course.point(0.5 * course.length()), self.last);
        self.last = found.map(|f| f.0);
        found
    }

    /// A clearance which that along the whole `course` does not exceed, when one of the targets about
    /// the last answer shows it to be at most `enough`; and that target.
    ///
    /// The clearance is the least over all targets, so the greatest of any one target is above it.
    pub(super) fn at_most(&mut self, course: &Course, enough: f64) -> Option<(usize, f64)> {
        let length = course.length();
        let (targets, slip, last) = (self.targets, self.slip, self.last?);
        let bound = |k: usize| {
            let high = targets.bounds(k, course, 0.0, length, slip).high;
            (high <= enough).then_some((k, high))
        };
        // Contour and path run on side by side, one way or the other.
        let known = bound(last)
            .or_else(|| (last + 1 < targets.len()).then(|| bound(last + 1)).flatten())
            .or_else(|| last.checked_sub(1).and_then(bound));
        let found = known.or_else(|| {
            let (k, value) = targets.nearest(course.point(0.5 * length), Some(last))?;
            if value > enough { None } else { bound(k) }
        });
        self.last = found.map(|f| f.0).or(self.last);
        found
    }

    /// The pieces along `course`, in order. Empty when there is no target.
    pub(super) fn trace(&mut self, course: &Course, out: &mut Vec<Piece>) {
        out.clear();
        let Some((_, value)) = self.at_middle(course) else {
            return;
        };
        let half = 0.5 * course.length();
        self.pile.clear();
        let pile = &mut self.pile;
        // A target nearest anywhere on the course is at its middle within `half` of the least there.
        let reach = value + 2.0 * half + 2.0 * self.targets.residual() + self.slip;
        self.targets.within(course.point(half), reach, |k| pile.push(k as u32));
        pile.sort_unstable();
        let all = 0..pile.len();
        self.divide(course, Interval { lo: 0.0, hi: course.length(), depth: 0 }, all, out);
    }

    /// Settles `interval` with the candidates `list` of the pile, or divides it.
    fn divide(
        &mut self,
        course: &Course,
        interval: Interval,
        list: std::ops::Range<usize>,
        out: &mut Vec<Piece>,
    ) {
        let mark = self.pile.len();
        let mut kept = self.keep_near(course, interval, list);
        if kept.len() > FEW {
            self.drop_repeated(course, interval, mark, &mut kept);
        }
        let split = if interval.hi - interval.lo <= self.tie || interval.depth >= DEEPEST {
            self.settle_undecided(course, interval, mark, out);
            None
        } else {
            // A long list may still agree throughout; else halving it comes before looking closer.
            let few = kept.len() <= FEW;
            let place = self.settle(course, interval, mark, &kept, out);
            place.map(|at| if few { at } else { interval.middle() })
        };
        drop(kept);
        if let Some(at) = split {
            let at = self.proper_split(interval, at);
            let depth = interval.depth + 1;
            let list = mark..self.pile.len();
            self.divide(course, Interval { hi: at, depth, ..interval }, list.clone(), out);
            self.divide(course, Interval { lo: at, depth, ..interval }, list, out);
        }
        self.pile.truncate(mark);
    }

    /// `at`, or the middle where that would cut off next to nothing.
    fn proper_split(&self, interval: Interval, at: f64) -> f64 {
        let margin = 0.25 * self.tie;
        let fits = interval.lo + margin < at && at < interval.hi - margin;
        if fits && interval.depth < CLEVER_DEPTH { at } else { interval.middle() }
    }

    /// Pushes those candidates of `list` onto the pile that may be nearest somewhere in `interval`, and
    /// returns their bounds when they are few.
    fn keep_near(
        &mut self,
        course: &Course,
        interval: Interval,
        list: std::ops::Range<usize>,
    ) -> Vec<Bounds> {
        let Interval { lo, hi, .. } = interval;
        let middle = course.point(interval.middle());
        let half = 0.5 * (hi - lo);
        let jump = 2.0 * self.targets.residual();
        let mut lowest_high = f64::INFINITY;
        let mark = self.pile.len();
        let mut bounds: Vec<Bounds> = Vec::new();
        for position in list {
            let k = self.pile[position];
            // The cheap test first: most candidates of a long list fail it.
            let value = self.targets.clearance_of(k as usize, middle);
            if value - half > lowest_high + jump {
                continue;
            }
            let b = self.targets.bounds(k as usize, course, lo, hi, self.slip);
            if b.low <= lowest_high + jump {
                lowest_high = lowest_high.min(b.high.min(value + half));
                self.pile.push(k);
                bounds.push(b);
            }
        }
        self.retain(mark, &mut bounds, |_, b| b.low <= lowest_high + jump);
        bounds
    }

    /// Drops from a long list what is nowhere nearer than the candidate nearest at the middle: copies of
    /// it (passes over one contour at several depths), and its neighbours in line. Here the difference
    /// may be rounding only, because what is dropped is not there to compare with further down.
    fn drop_repeated(&mut self, course: &Course, interval: Interval, mark: usize, bounds: &mut Vec<Bounds>) {
        let (best, target) = self.best_at_middle(course, interval, mark);
        let Some((_, law)) = bounds[best].law else {
            return;
        };
        let rounding = self.slip / 32.0;
        self.retain(mark, bounds, |k, b| {
            let Some((_, theirs)) = b.law else {
                return true;
            };
            k as usize == target || theirs.lead_over(&law, interval.lo, interval.hi) < -rounding
        });
    }

    /// Keeps those candidates above `mark` that pass, on the pile and in `bounds` alike.
    fn retain(&mut self, mark: usize, bounds: &mut Vec<Bounds>, pass: impl Fn(u32, &Bounds) -> bool) {
        let (mut kept, mut position) = (mark, mark);
        bounds.retain(|b| {
            let k = self.pile[position];
            position += 1;
            let stays = pass(k, b);
            if stays {
                self.pile[kept] = k;
                kept += 1;
            }
            stays
        });
        self.pile.truncate(kept);
    }

    /// The candidate nearest at the middle of `interval`, the lowest position among equals.
    fn best_at_middle(&self, course: &Course, interval: Interval, mark: usize) -> (usize, usize) {
        let p = course.point(interval.middle());
        let mut best = (0, 0, f64::INFINITY);
        for (i, &k) in self.pile[mark..].iter().enumerate() {
            let v = self.targets.clearance_of(k as usize, p);
            if v < best.2 - self.slip {
                best = (i, k as usize, v);
            }
        }
        (best.0, best.1)
    }

    fn settle_undecided(&self, course: &Course, interval: Interval, mark: usize, out: &mut Vec<Piece>) {
        if self.pile.len() == mark {
            return;
        }
        let (_, target) = self.best_at_middle(course, interval, mark);
        let feature = self.targets.feature_at(target, course.point(interval.middle()));
        let law = self.targets.law(target, feature, course);
        push(out, Piece { from: interval.lo, to: interval.hi, target, feature, law, decided: false });
    }

    /// Pushes the piece that fills `interval`, or returns where to divide it.
    fn settle(
        &self,
        course: &Course,
        interval: Interval,
        mark: usize,
        bounds: &[Bounds],
        out: &mut Vec<Piece>,
    ) -> Option<f64> {
        let Interval { lo, hi, .. } = interval;
        let middle = interval.middle();
        if bounds.is_empty() {
            return None;
        }
        let (best, target) = self.best_at_middle(course, interval, mark);
        let Some((feature, law)) = bounds[best].law else {
            return Some(nearest_to(middle, self.targets.changes(target, course, lo, hi)));
        };
        for (i, other) in bounds.iter().enumerate() {
            if i == best || other.low >= bounds[best].high - self.tie {
                continue;
            }
            let k = self.pile[mark + i] as usize;
            let theirs = other.law.map_or_else(|| self.targets.law(k, Feature::Inside, course), |l| l.1);
            if theirs.lead_over(&law, lo, hi) >= -self.tie {
                continue;
            }
            if other.law.is_none() {
                return Some(nearest_to(middle, self.targets.changes(k, course, lo, hi)));
            }
            return Some(crossing(&theirs, &law, lo, hi).unwrap_or(middle));
        }
        push(out, Piece { from: lo, to: hi, target, feature, law, decided: true });
        None
    }
}

/// Joins `piece` to the last one where both follow the same feature.
fn push(out: &mut Vec<Piece>, piece: Piece) {
    if let Some(last) = out.last_mut() {
        let same = last.target == piece.target && last.feature == piece.feature;
        if same && last.decided == piece.decided {
            last.to = piece.to;
            return;
        }
    }
    out.push(piece);
}

/// The place nearest to the middle; the middle itself where there is none.
fn nearest_to(middle: f64, places: Vec<f64>) -> f64 {
    places.into_iter().min_by(|a, b| (a - middle).abs().total_cmp(&(b - middle).abs())).unwrap_or(middle)
}

/// Where `a - b` changes sign over [lo, hi], when its ends differ in sign. Regula falsi with the
/// Illinois change (M. Dowell, P. Jarratt, 1971); its accuracy decides nothing but the cost.
fn crossing(a: &Law, b: &Law, lo: f64, hi: f64) -> Option<f64> {
    let f = |s: f64| a.value(s) - b.value(s);
    let (mut x0, mut x1) = (lo, hi);
    let (mut y0, mut y1) = (f(x0), f(x1));
    if (y0 < 0.0) == (y1 < 0.0) {
        return None;
    }
    for _ in 0..40 {
        if (x1 - x0).abs() <= 1e-15 * (lo.abs() + hi.abs()) {
            break;
        }
        let x = x1 - y1 * (x1 - x0) / (y1 - y0);
        if !x.is_finite() {
            break;
        }
        let y = f(x);
        if (y < 0.0) == (y1 < 0.0) {
            y0 *= 0.5;
        } else {
            (x0, y0) = (x1, y1);
        }
        (x1, y1) = (x, y);
        if y1.abs() <= 0.0 {
            break;
        }
    }
    Some(x1.clamp(lo, hi))
}

#[cfg(test)]
pub(super) mod tests;
