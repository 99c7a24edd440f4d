//! The part: the finished shape as the drawing gives it, turned so that material lies on the left of
//! every segment, with the answer to "is this point material?" and where each path came from.

mod nesting;
mod sides;

pub use nesting::{Nest, nesting, oriented};

use std::sync::OnceLock;

use crate::geometry::{Contour, Point};
use sides::Sides;

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

impl Keep {
    /// Does it speak of closed loops (inside, outside) rather than of open chains (left, right)?
    #[must_use]
    pub const fn is_for_loops(self) -> bool {
        matches!(self, Self::Inside | Self::Outside)
    }
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

/// Why a contour makes no part.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum PartError {
    /// Inside or outside was asked of a contour with an open chain.
    OpenChain {
        /// Position of the path in the contour, from 0.
        path: usize,
        /// Where it starts.
        start: Point,
        /// Where it ends.
        end: Point,
    },
    /// Left or right was asked of a contour with a closed loop.
    ClosedLoop {
        /// Position of the path in the contour, from 0.
        path: usize,
    },
    /// The allowance is negative or not a number.
    BadAllowance {
        /// What was given.
        allowance: f64,
    },
    /// The number of origins differs from the number of paths.
    Origins {
        /// Paths of the contour.
        paths: usize,
        /// Origins given.
        origins: usize,
    },
}

impl std::fmt::Display for PartError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::OpenChain { path, start, end } => write!(
                f,
                "path {path} of the contour is open: it runs from ({:.4}, {:.4}) to ({:.4}, {:.4}); an open \
                 chain has no inside, so say --keep left or --keep right, close it in the drawing, or take \
                 the layers that hold closed loops only (--layer)",
                start.x, start.y, end.x, end.y
            ),
            Self::ClosedLoop { path } => write!(
                f,
                "path {path} of the contour is a closed loop; left and right are for open chains, so say \
                 --keep inside or --keep outside, or take the layers that hold open chains only (--layer)"
            ),
            Self::BadAllowance { allowance } => {
                write!(f, "the allowance {allowance} is no length; give zero or more")
            }
            Self::Origins { paths, origins } => {
                write!(f, "{paths} paths of the contour came with {origins} origins")
            }
        }
    }
}

impl std::error::Error for PartError {}

/// A finished shape. Made by [`Part::new`], which turns every path so that material lies on its left.
#[derive(Clone, Debug)]
pub struct Part {
    /// Its boundary, material on the left of every segment.
    pub contour: Contour,
    /// Which side of the drawing's contour is material, as the user said it.
    pub keep: Keep,
    /// Stock left on purpose on every wall, a length, zero or more.
    pub allowance: f64,
    /// Provenance of each path of the contour, in its order.
    pub origins: Vec<Origin>,
    /// Made when it is first asked: most parts never are.
    sides: OnceLock<Sides>,
}

impl PartialEq for Part {
    /// The index follows from the contour and is no part of the value.
    fn eq(&self, other: &Self) -> bool {
        self.contour == other.contour
            && self.keep == other.keep
            && self.allowance.total_cmp(&other.allowance).is_eq()
            && self.origins == other.origins
    }
}

impl Part {
    /// The part whose material is the `keep` side of `contour`. Paths keep their order; those that run
    /// with material on their right are reversed. The loops must not cross one another:
    /// the readers of drawings see to that.
    ///
    /// # Errors
    /// When open chains meet inside or outside, closed loops left or right, when the allowance is no
    /// length, or origins and paths differ in number.
    pub fn new(
        contour: Contour,
        keep: Keep,
        allowance: f64,
        origins: Vec<Origin>,
    ) -> Result<Self, PartError> {
        if !allowance.is_finite() || allowance < 0.0 {
            return Err(PartError::BadAllowance { allowance });
        }
        if contour.paths().len() != origins.len() {
            return Err(PartError::Origins { paths: contour.paths().len(), origins: origins.len() });
        }
        for (path, p) in contour.paths().iter().enumerate() {
            if p.is_closed() != keep.is_for_loops() {
                return Err(match p.segments() {
                    [first, .., last] if keep.is_for_loops() => {
                        PartError::OpenChain { path, start: first.start(), end: last.end() }
                    }
                    [only] if keep.is_for_loops() => {
                        PartError::OpenChain { path, start: only.start(), end: only.end() }
                    }
                    _ => PartError::ClosedLoop { path },
                });
            }
        }
        let contour = nesting::turned(contour, keep);
        Ok(Self { contour, keep, allowance, origins, sides: OnceLock::new() })
    }

    /// Is `p` in the material? For loops by the parity of the contour's crossings with a ray, decided
    /// by exact predicates at its vertices; for open chains by the side of the nearest segment. A
    /// point on the contour itself, to within rounding and the residual of its arcs, may count to
    /// either side. Costs about the logarithm of the number of segments, and one step more for each
    /// segment which the ray meets.
    #[must_use]
    pub fn contains(&self, p: Point) -> bool {
        let sides = self.sides.get_or_init(|| Sides::new(&self.contour));
        match self.keep {
            Keep::Inside => sides.loops_round(p),
            Keep::Outside => !sides.loops_round(p),
            // Right-hand chains were reversed: material is on the left of either.
            Keep::Left | Keep::Right => sides.is_left_of_nearest(p),
        }
    }
}

#[cfg(test)]
mod tests;
