//! The answer to "which point of this segment is nearest, and how far is it?".

use kurbo::Point;

/// A nearest point on a segment.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Nearest {
    /// The nearest point.
    pub at: Point,
    /// Its parameter: 0 at the segment's start, 1 at its end, proportional to length.
    pub t: f64,
    /// Its distance from the asked point, never negative.
    pub distance: f64,
}
