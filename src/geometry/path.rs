//! A chain of segments, each beginning where the last one ended: open, or closed into a loop.

use kurbo::{Affine, Point, Rect};

use super::{ArcError, Segment};

/// A connected chain of lines and arcs. Joints agree exactly: each segment starts at the very point
/// at which the one before ends.
#[derive(Clone, Debug, PartialEq)]
pub struct Path {
    segments: Vec<Segment>,
    closed: bool,
}

/// Why segments make no path.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum PathError {
    /// There is no segment.
    Empty,
    /// A number is not finite in the segment of this position.
    NotFinite {
        /// Position of the segment, from 0.
        at: usize,
    },
    /// Between this segment and the next the chain is broken.
    Gap {
        /// Position of the segment before the gap, from 0.
        at: usize,
        /// Where that segment ends.
        end: Point,
        /// Where the next one starts.
        start: Point,
    },
}

impl std::fmt::Display for PathError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::Empty => write!(f, "a chain without a segment"),
            Self::NotFinite { at } => write!(f, "segment {at} holds a number that is not finite"),
            Self::Gap { at, end, start } => write!(
                f,
                "segment {at} ends at ({:.6}, {:.6}) but the next one starts at ({:.6}, {:.6})",
                end.x, end.y, start.x, start.y
            ),
        }
    }
}

impl std::error::Error for PathError {}

impl Path {
    /// A chain of `segments`; `closed` says that the last one ends where the first one starts.
    ///
    /// # Errors
    /// When there is none, a number is not finite, or two neighbours do not share their point exactly.
    pub fn new(segments: Vec<Segment>, closed: bool) -> Result<Self, PathError> {
        if segments.is_empty() {
            return Err(PathError::Empty);
        }
        if let Some(at) = segments.iter().position(|s| !s.is_finite()) {
            return Err(PathError::NotFinite { at });
        }
        let joints = segments.iter().zip(segments.iter().cycle().skip(1));
        let count = if closed { segments.len() } else { segments.len() - 1 };
        for (at, (a, b)) in joints.take(count).enumerate() {
            if a.end() != b.start() {
                return Err(PathError::Gap { at, end: a.end(), start: b.start() });
            }
        }
        Ok(Self { segments, closed })
    }

    /// The segments in order.
    #[must_use]
    pub fn segments(&self) -> &[Segment] {
        &self.segments
    }

    /// The segments, taken out of the chain.
    #[must_use]
    pub fn into_segments(self) -> Vec<Segment> {
        self.segments
    }

    /// Does it end where it began, as a loop?
    #[must_use]
    pub const fn is_closed(&self) -> bool {
        self.closed
    }

    /// Length along the chain.
    #[must_use]
    pub fn length(&self) -> f64 {
        self.segments.iter().map(Segment::length).sum()
    }

    /// Enclosed area of a closed chain, positive when counter-clockwise; of an open one, the area
    /// which its closing chord would enclose.
    #[must_use]
    pub fn signed_area(&self) -> f64 {
        let Some(first) = self.segments.first() else {
            return 0.0;
        };
        let origin = first.start();
        0.5 * self.segments.iter().map(|s| s.twice_area_about(origin)).sum::<f64>()
    }

    /// Smallest box round it.
    #[must_use]
    pub fn bounds(&self) -> Rect {
        let mut boxes = self.segments.iter().map(Segment::bounds);
        let first = boxes.next().unwrap_or(Rect::ZERO);
        boxes.fold(first, |a, b| a.union(b))
    }

    /// The same chain travelled the other way.
    #[must_use]
    pub fn reversed(&self) -> Self {
        let mut turned = self.clone();
        turned.reverse();
        turned
    }

    /// Travels the chain the other way.
    pub fn reverse(&mut self) {
        self.segments.reverse();
        self.segments.iter_mut().for_each(|s| *s = s.reversed());
    }

    /// The chain under a map that keeps shapes.
    ///
    /// # Errors
    /// When an arc would become an ellipse.
    pub fn mapped(&self, map: Affine) -> Result<Self, ArcError> {
        let segments = self.segments.iter().map(|s| s.mapped(map)).collect::<Result<_, _>>()?;
        Ok(Self { segments, closed: self.closed })
    }
}
