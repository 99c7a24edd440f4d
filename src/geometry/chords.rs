//! Where do the chords of an arc end, when a picture needs straight lines?
//!
//! This is the only place that turns an arc into chords, and nothing that is judged passes through
//! it: every chord lies inside its arc, by up to the sagitta e = R (1 - cos(dphi / 2)).

use std::f64::consts::FRAC_PI_2;

use kurbo::Point;

use super::Segment;

/// Most chords for one arc: a full circle then shows no corner at any size a screen has.
const MOST: f64 = 4096.0;

/// Appends the ends of the chords of `segment`, in order: its start is left out (the segment before
/// has put it there), its end is the last.
///
/// No chord is farther than `sagitta` (a length) from its arc, unless that wants more than 4096
/// chords; a sagitta that is zero, negative or no number asks for the finest. Never fewer than four
/// chords to a turn, however large the sagitta.
///
/// Not suitable for judged geometry: chords are shorter than the arc and lie on one side of it.
pub fn chords(segment: &Segment, sagitta: f64, out: &mut Vec<Point>) {
    let count = match segment {
        Segment::Line(_) => 1.0,
        Segment::Arc(a) => count(a.radius(), a.sweep(), sagitta),
    };
    let mut k = 1.0;
    while k < count {
        out.push(segment.point_at(k / count));
        k += 1.0;
    }
    out.push(segment.end());
}

/// Number of equal chords of an arc: 1 - cos(dphi/2) = 2 sin^2(dphi/4) keeps its digits where the
/// sagitta is far smaller than the radius.
fn count(radius: f64, sweep: f64, sagitta: f64) -> f64 {
    let ratio = sagitta / (2.0 * radius);
    // NaN fails the comparison, as zero does: the finest.
    let step = if ratio > 0.0 { 4.0 * ratio.sqrt().min(1.0).asin() } else { 0.0 };
    let wanted = (sweep.abs() / step.min(FRAC_PI_2)).ceil();
    if wanted <= MOST { wanted.max(1.0) } else { MOST }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::{Arc, Turn};

    fn circle(radius: f64) -> Segment {
        let start = Point::new(radius, 0.0);
        Segment::Arc(Arc::full_circle(Point::ORIGIN, start, Turn::Left).unwrap())
    }

    /// Derived: e = R (1 - cos(pi / n)), R = 10.
    #[test]
    fn circle_of_radius_ten_takes_71_chords_for_a_hundredth_and_223_for_a_thousandth() {
        for (sagitta, chord_count) in [(0.01, 71), (0.001, 223)] {
            let mut out = Vec::new();
            chords(&circle(10.0), sagitta, &mut out);
            assert_eq!(out.len(), chord_count);
            let middle = Point::new(10.0, 0.0).midpoint(out[0]);
            assert!(10.0 - middle.to_vec2().hypot() <= sagitta);
        }
        let mut out = Vec::new();
        chords(&circle(10.0), 0.01, &mut out);
        let reached = 10.0 - Point::new(10.0, 0.0).midpoint(out[0]).to_vec2().hypot();
        assert!((reached - 0.009_787_734_800_26).abs() < 1e-12, "{reached}");
    }

    #[test]
    fn sagitta_above_the_radius_still_gives_four_chords_to_a_turn() {
        for sagitta in [10.0, 20.0, 1e9, f64::INFINITY] {
            let mut out = Vec::new();
            chords(&circle(10.0), sagitta, &mut out);
            assert_eq!(out.len(), 4, "sagitta {sagitta}");
        }
    }

    #[test]
    fn sagitta_zero_negative_or_nan_ends_with_the_most_chords() {
        for sagitta in [0.0, -1.0, f64::NAN, 1e-300] {
            let mut out = Vec::new();
            chords(&circle(10.0), sagitta, &mut out);
            assert_eq!(out.len(), 4096, "sagitta {sagitta}");
        }
    }

    #[test]
    fn line_is_its_own_chord() {
        let mut out = Vec::new();
        chords(&Segment::line(Point::new(1.0, 2.0), Point::new(3.0, 4.0)), 0.1, &mut out);
        assert_eq!(out, vec![Point::new(3.0, 4.0)]);
    }
}
