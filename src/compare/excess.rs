//! Where is the contour not reached, and how much stands there?
//!
//! The excess at a contour point q is D(q) less the allowance: D is the distance of q from the sweep, and
//! on a wall with stock left on purpose it is to equal the allowance. A finding is a maximal stretch
//! whose excess is, or within its bound may be, above the limit; its size is the greatest, exact to
//! within the bound that [`super::along`] proves. A peak where two passes meet that do not follow one
//! another, on a smooth stretch of contour, is a cusp and has its own limit.

use crate::geometry::Contour;

use super::scan::{Over, Peak, Scan, Scanner};
use super::{Comparison, ContourStretch, Crest, Excess, Figure};

/// What the scans are judged by.
pub(super) struct Judge {
    /// Limits of excess and of cusp, lengths.
    pub(super) excess: f64,
    /// See `excess`.
    pub(super) cusp: f64,
    /// Stock left on purpose.
    pub(super) allowance: f64,
    /// Bound of every figure.
    pub(super) bound: f64,
    /// Greatest radius of the cutting discs.
    pub(super) radius: f64,
    /// Leave out paths never visited.
    pub(super) only_visited: bool,
}

impl Judge {
    /// Clearances above which a stretch is, or may be, over the limits of excess and cusp.
    pub(super) fn clearances(&self) -> [f64; 2] {
        [self.excess, self.cusp].map(|limit| limit + self.allowance - self.bound)
    }

    /// A clearance from which on a path counts as never visited: the cutter would have had to come
    /// more than its radius nearer to touch the contour anywhere.
    fn far(&self) -> f64 {
        self.radius.max(self.excess + self.allowance + self.bound)
    }

    fn figure(&self, clearance: f64) -> Figure {
        Figure { size: (clearance - self.allowance).max(0.0), bound: self.bound }
    }

    fn raise(&self, worst: &mut Option<Figure>, clearance: f64) {
        let figure = self.figure(clearance);
        if worst.is_none_or(|old| figure.size > old.size) {
            *worst = Some(figure);
        }
    }

    /// One excess or cusp.
    fn finding(&self, path: usize, scan: &Scan, from: f64, to: f64, peak: &Peak) -> Excess {
        Excess {
            height: self.figure(peak.size),
            at: peak.at,
            stretch: Some(ContourStretch { path, from, to }),
            nearest_move: peak.nearest,
            crest: peak.crest.map(|moves| Crest { moves }),
            whole_path: from <= 0.0 && to >= scan.length,
            region: None,
        }
    }

    /// Enters what the scan of one path found.
    fn enter(&self, path: usize, scan: &Scan, out: &mut Comparison) {
        let Some(greatest) = scan.greatest else {
            return;
        };
        if scan.least > self.far() {
            out.never_visited.push(path);
            if !self.only_visited {
                let peak = Peak { crest: None, ..greatest };
                out.excesses.push(self.finding(path, scan, 0.0, scan.length, &peak));
                self.raise(&mut out.worst_excess, peak.size);
            }
            return;
        }
        // Without any peak the pieces were too short to tell one: then the greatest counts.
        let plain = scan.greatest_plain.or_else(|| scan.greatest_crest.is_none().then_some(greatest));
        // A path with crests alone has been looked at: nothing but them stands on it.
        self.raise(&mut out.worst_excess, plain.map_or(0.0, |peak| peak.size));
        if let Some(peak) = scan.greatest_crest {
            self.raise(&mut out.worst_cusp, peak.size);
        }
        let [excess, cusp] = &scan.over;
        let mut taken: Vec<Over> = Vec::new();
        for over in excess {
            let crest = scan.peak_in(over, true);
            let peak = match (scan.peak_in(over, false), crest) {
                (Some(plain), _) => plain,
                (None, Some(_)) => continue,
                (None, None) => over.greatest,
            };
            let above = peak.size > self.clearances()[0];
            if above {
                out.excesses.push(self.finding(path, scan, over.from, over.to, &peak));
                if crest.is_none_or(|c| c.size <= peak.size) {
                    taken.push(*over);
                }
            }
        }
        for over in cusp {
            let Some(peak) = scan.peak_in(over, true) else {
                continue;
            };
            // Stretches over the limit of excess do not overlap: the last that begins before the crest.
            let covered = |position: f64| {
                let next = taken.partition_point(|o| o.from <= position);
                taken[..next].last().is_some_and(|o| position <= o.to)
            };
            let covered = covered(peak.position) || covered(peak.position + scan.length);
            if peak.size > self.clearances()[1] && !covered {
                out.excesses.push(self.finding(path, scan, over.from, over.to, &peak));
            }
        }
    }
}

/// Scans every path of `contour` and enters what is over the limits into `out`.
pub(super) fn contour_not_reached(
    contour: &Contour,
    scanner: &mut Scanner,
    judge: &Judge,
    out: &mut Comparison,
) {
    let mut first = 0;
    for (position, path) in contour.paths().iter().enumerate() {
        let scan = scanner.scan(path, first);
        first += path.segments().iter().filter(|s| s.length() > 0.0).count();
        judge.enter(position, &scan, out);
    }
}
