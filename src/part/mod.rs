//! The part: the finished shape as the drawing gives it. Plain data, with where it came from.

use crate::geometry::Contour;

/// Which side of the contour is material.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Keep {
    /// Inside of the outermost loops (an outside profile, islands and holes alternate by nesting).
    Inside,
    /// Outside of the outermost loops (a pocket or an opening).
    Outside,
    /// Left of an open chain, seen in its own direction.
    Left,
    /// Right of an open chain, seen in its own direction.
    Right,
}

/// Where a loop or chain of the contour stands in its file.
#[derive(Clone, Debug, PartialEq, Eq, Default)]
pub struct Origin {
    /// File as the user named it.
    pub file: String,
    /// Layer, group or id, where the format knows one.
    pub layer: Option<String>,
    /// First line of the first entity, where the format has lines; from 1.
    pub line: Option<usize>,
}

/// A finished shape.
#[derive(Clone, Debug, PartialEq)]
pub struct Part {
    /// Its boundary.
    pub contour: Contour,
    /// Which side of it is material.
    pub keep: Keep,
    /// Stock left on purpose on every wall, a length, zero or more.
    pub allowance: f64,
    /// Provenance of each path of the contour, in its order.
    pub origins: Vec<Origin>,
}
