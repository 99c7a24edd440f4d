//! Regions near the findings only: for a program of a million blocks and three faults the rest of the
//! contour need not be cut against the rest of the swept edge.
//!
//! A *window* is a box round a finding. Every piece of either boundary that meets a window is taken
//! in whole; a fragment of it that lies within one window has then been cut by everything that
//! meets it, and what decides whether it bounds a region ([`super::Sight::bounds`]) is asked of the whole
//! part and the whole sweep. A ring of such fragments is therefore a ring of the whole arrangement. A
//! region is taken when the box round its outer ring lies within one window: then all its holes do. A
//! finding whose region is not found so gets a larger window, and at last the whole plane.

use super::{Regions, find_gouged, find_remaining};
use crate::compare::{Comparison, ContourStretch, Region};
use crate::envelope::{Clearance, SweptRegion};
use crate::geometry::{BoxIndex, Contour, Point, Rect, Segment};
use crate::part::Part;

/// Fewer pieces than this are cut altogether at once: it takes some milliseconds.
const FEW: usize = 20_000;

/// How often windows are made larger before everything is taken in.
const ROUNDS: usize = 3;

/// By how much, each time.
const LARGER: f64 = 4.0;

/// Boxes, indexed.
pub(super) struct Windows {
    boxes: Vec<Rect>,
    index: BoxIndex,
}

impl Windows {
    fn new(boxes: Vec<Rect>) -> Self {
        Self { index: BoxIndex::new(&boxes), boxes }
    }

    /// Does any window meet `r`?
    pub(super) fn meets(&self, r: Rect) -> bool {
        let mut any = false;
        self.index.search(r, |_| any = true);
        any
    }

    /// Does one window hold the whole of `r`?
    pub(super) fn holds(&self, r: Rect) -> bool {
        let mut any = false;
        self.index.search(r, |i| any |= self.boxes.get(i).is_some_and(|w| holds(*w, r)));
        any
    }
}

fn holds(window: Rect, r: Rect) -> bool {
    window.x0 < r.x0 && window.y0 < r.y0 && r.x1 < window.x1 && r.y1 < window.y1
}

/// Gives each gouge and each excess of `comparison` the region it belongs to, where there is one.
/// `lengths` are that below which swept edge and contour count as one line, and the largest cutter's
/// radius.
pub fn attach_regions(
    part: &Part,
    (swept, clearance): (&SweptRegion, &Clearance),
    lengths: (f64, f64),
    comparison: &mut Comparison,
) {
    attach_from(FEW, part, (swept, clearance), lengths, comparison);
}

/// [`attach_regions`], near the findings when there are more pieces than `few`.
fn attach_from(
    few: usize,
    part: &Part,
    (swept, clearance): (&SweptRegion, &Clearance),
    (within, radius): (f64, f64),
    comparison: &mut Comparison,
) {
    let count = swept.pieces().count() + part.contour.segments().count();
    let places = Places::new(&part.contour);
    let whole = swept.pieces().map(|p| p.segment.bounds()).fold(part.contour.bounds(), |a, b| a.union(b));
    let mut open: Vec<(usize, Rect)> =
        if count > few { boxes(comparison, &places).into_iter().enumerate().collect() } else { Vec::new() };
    let mut pad = LARGER * radius;
    for _ in 0..ROUNDS {
        let padded: Vec<Rect> = open.iter().map(|(_, b)| b.inflate(pad, pad)).collect();
        let taken: f64 = padded.iter().map(|b| b.width() * b.height()).sum();
        if open.is_empty() || taken > 0.25 * whole.width() * whole.height() {
            break;
        }
        let regions = Regions::within(part, swept, clearance, within, &Windows::new(padded.clone()));
        let mut left = Vec::new();
        for (&(number, own), window) in open.iter().zip(&padded) {
            if !settle(number, &regions, Some(*window), comparison) {
                left.push((number, own));
            }
        }
        if left.is_empty() {
            return;
        }
        open = left;
        pad *= LARGER;
    }
    let regions = Regions::new(part, swept, clearance, within);
    let all = comparison.gouges.len() + comparison.excesses.len();
    let rest: Vec<usize> = if count > few { open.iter().map(|o| o.0).collect() } else { (0..all).collect() };
    for number in rest {
        settle(number, &regions, None, comparison);
    }
}

/// Looks up the region of a finding, gouges before excesses; true when it lies within `window`.
fn settle(number: usize, regions: &Regions, window: Option<Rect>, comparison: &mut Comparison) -> bool {
    let fits = |r: &&Region| {
        let outer = r.outline.iter().map(crate::geometry::Path::bounds).reduce(|a, b| a.union(b));
        window.is_none_or(|w| outer.is_some_and(|o| holds(w, o)))
    };
    let gouges = comparison.gouges.len();
    let (slot, found) = if let Some(g) = comparison.gouges.get_mut(number) {
        let found = find_gouged(regions, g, window.is_none()).filter(fits).cloned();
        (&mut g.region, found)
    } else if let Some(e) = comparison.excesses.get_mut(number - gouges) {
        let found = find_remaining(regions, e).filter(fits).cloned();
        (&mut e.region, found)
    } else {
        return true;
    };
    let settled = found.is_some();
    *slot = found;
    settled
}

/// A box round each finding: its place, and the stretch of contour it covers.
fn boxes(comparison: &Comparison, places: &Places) -> Vec<Rect> {
    let round = |a: Point, b: Point, stretch: Option<ContourStretch>| {
        let own = Rect::from_points(a, b);
        stretch.and_then(|s| places.round(&s)).map_or(own, |b| b.union(own))
    };
    let gouges = comparison.gouges.iter().map(|g| round(g.center, g.at, Some(g.stretch)));
    gouges.chain(comparison.excesses.iter().map(|e| round(e.at, e.at, e.stretch))).collect()
}

/// Where the segments of each path begin, by the way along it.
struct Places<'a> {
    contour: &'a Contour,
    before: Vec<Vec<f64>>,
}

impl<'a> Places<'a> {
    fn new(contour: &'a Contour) -> Self {
        let along = |p: &crate::geometry::Path| {
            let mut way = 0.0;
            let step = |s: &Segment| {
                let before = way;
                way += s.length();
                before
            };
            p.segments().iter().map(step).collect()
        };
        Self { contour, before: contour.paths().iter().map(along).collect() }
    }

    /// A box round a stretch of contour.
    fn round(&self, stretch: &ContourStretch) -> Option<Rect> {
        let path = self.contour.paths().get(stretch.path)?;
        let before = self.before.get(stretch.path)?;
        let first = before.partition_point(|b| *b <= stretch.from).saturating_sub(1);
        let end = before.partition_point(|b| *b <= stretch.to);
        let over = stretch.to - path.length();
        let round = before.partition_point(|b| *b <= over);
        let direct = path.segments().get(first..end.max(first)).unwrap_or_default();
        let again = path.segments().get(..round).unwrap_or_default();
        direct.iter().chain(again).map(Segment::bounds).reduce(|a, b| a.union(b))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::compare::compare;
    use crate::compare::tests::{family, p, part, polyline, request};
    use crate::envelope::sweep;
    use crate::part::Keep;
    use crate::view::DiscFamily;

    #[test]
    fn regions_found_near_the_findings_are_those_of_the_whole_plane() {
        let points = |list: &[(f64, f64)]| -> Vec<Point> { list.iter().map(|&(x, y)| p(x, y)).collect() };
        let plate = polyline(&points(&[(0.0, 0.0), (200.0, 0.0), (200.0, 100.0), (0.0, 100.0)]), true);
        let part = part(vec![plate], Keep::Inside);
        // Bites into the lower edge, and lifts off the upper one.
        let low = [(-5.0, -5.0), (50.0, -5.0), (52.0, -3.0), (54.0, -5.0), (205.0, -5.0), (205.0, 105.0)];
        let high = [(100.0, 105.0), (98.0, 108.0), (96.0, 105.0), (-5.0, 105.0)];
        let cutting = family(&[polyline(&points(&[&low[..], &high[..]].concat()), true)], 5.0);
        let request = request(0.01);
        let mut near = compare(&part, &cutting, &DiscFamily::default(), &request);
        let mut whole = near.clone();
        let (swept, clearance) = (sweep(&cutting).unwrap(), Clearance::new(&cutting));
        attach_from(0, &part, (&swept, &clearance), (1e-9, 0.5), &mut near);
        Regions::new(&part, &swept, &clearance, 1e-9).attach(&mut whole);
        assert!(near.gouges.iter().any(|g| g.region.is_some()), "{near:#?}");
        assert!(near.excesses.iter().any(|e| e.region.is_some()), "{near:#?}");
        assert_eq!(near, whole);
    }
}
