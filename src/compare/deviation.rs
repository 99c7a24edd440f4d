//! Does the cutter run beside the contour at one and the same distance? That, and not any figure, is
//! what this summary is for: a deviation that is the same nearly everywhere speaks of a cutter or an
//! offset that is not the one the program was made for.
//!
//! The deviation at a contour point q is D(q), the clearance from the sweep, less the allowance:
//! positive where material remains, negative where the cutter reaches past q. Negative it is a lower
//! bound of the depth where passes overlap, and exact where one pass runs along the wall.

use crate::part::Part;
use crate::view::DiscFamily;

use super::targets::Targets;

/// Number of places at which a contour is looked at, at least; every segment has one or more unless
/// there are very many. A deviation that stays the same over most of the contour shows in far fewer.
const PLACES: f64 = 2048.0;

/// Of more segments than this several share one place: a contour of so many holds a curve in chords.
const MANY: f64 = 16.0 * PLACES;

/// Two deviations are alike when they differ by less than this fraction of their size.
const LIKE: f64 = 0.1;

/// How even the deviation along the contour is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DeviationSummary {
    /// Length of the contour beside which a cutter runs: nearer than its own diameter.
    pub length_visited: f64,
    /// Median of the deviation over that length: positive where material remains.
    pub median: f64,
    /// Half the width of the band round the median that counts as the same deviation, a length.
    pub band: f64,
    /// Share of `length_visited`, 0 to 1, whose deviation lies in that band.
    pub share: f64,
}

/// The summary for `part` and what cuts; `None` where no cutter comes near. It picks a cause and must
/// not be reported as a figure: each piece of the contour (a two-thousandth of it, or a segment) is
/// judged by its middle.
#[must_use]
pub fn deviation_summary(part: &Part, cutting: &DiscFamily) -> Option<DeviationSummary> {
    summary_of(part, &Targets::new(cutting.moves.iter().map(|m| (&m.segment, m.radius))))
}

/// [`deviation_summary`] where the moves are indexed already.
pub(super) fn summary_of(part: &Part, moves: &Targets) -> Option<DeviationSummary> {
    let step = part.contour.length() / PLACES;
    let many = part.contour.segments().count() as f64 > MANY;
    let mut seen: Vec<(f64, f64)> = Vec::new();
    // Length gone by since the last place, where segments are so many that several share one.
    let mut gone = 0.0;
    for (_, segment) in part.contour.segments() {
        let length = segment.length();
        gone += length;
        if many && gone < step {
            continue;
        }
        let pieces = (length / step).ceil().clamp(1.0, PLACES);
        for k in 0..pieces as u32 {
            let q = segment.point_at((f64::from(k) + 0.5) / pieces);
            let Some((i, clearance)) = moves.nearest(q, None) else { continue };
            if clearance <= moves.radius(i) {
                seen.push((clearance - part.allowance, gone / pieces));
            }
        }
        gone = 0.0;
    }
    summary(seen)
}

/// Median and share of deviations, each with its length.
fn summary(mut seen: Vec<(f64, f64)>) -> Option<DeviationSummary> {
    seen.sort_by(|a, b| a.0.total_cmp(&b.0));
    let length_visited: f64 = seen.iter().map(|s| s.1).sum();
    let mut so_far = 0.0;
    let median = seen.iter().find(|s| {
        so_far += s.1;
        so_far >= 0.5 * length_visited
    })?;
    let median = median.0;
    let band = LIKE * median.abs();
    let near: f64 = seen.iter().filter(|s| (s.0 - median).abs() <= band).map(|s| s.1).sum();
    let share = if length_visited > 0.0 { near / length_visited } else { 0.0 };
    Some(DeviationSummary { length_visited, median, band, share })
}
