//! The boundary of a part: closed loops and open chains of lines and arcs, with the bound on what
//! reading them cost.

use kurbo::{Affine, Rect};

use super::{ArcError, Path, Segment};

/// Loops and chains, and how far they may lie from the curves of the drawing.
#[derive(Clone, Debug, PartialEq)]
pub struct Contour {
    paths: Vec<Path>,
    bound: f64,
}

/// Why paths make no contour.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ContourError {
    /// There is no path.
    Empty,
    /// The bound is negative or not a number.
    BadBound,
}

impl std::fmt::Display for ContourError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::Empty => write!(f, "a contour without a loop or chain"),
            Self::BadBound => write!(f, "the bound of a contour must be a length, zero or more"),
        }
    }
}

impl std::error::Error for ContourError {}

impl Contour {
    /// A contour of `paths`, none of which lies farther than `bound` from the curve it stands for.
    ///
    /// # Errors
    /// When there is no path or the bound is no length.
    pub fn new(paths: Vec<Path>, bound: f64) -> Result<Self, ContourError> {
        if paths.is_empty() {
            return Err(ContourError::Empty);
        }
        if !bound.is_finite() || bound < 0.0 {
            return Err(ContourError::BadBound);
        }
        Ok(Self { paths, bound })
    }

    /// Loops and chains, in the order of the drawing.
    #[must_use]
    pub fn paths(&self) -> &[Path] {
        &self.paths
    }

    /// The loops and chains, taken out of the contour.
    #[must_use]
    pub fn into_paths(self) -> Vec<Path> {
        self.paths
    }

    /// The contour with those paths reversed for which `turns` says so, by position.
    #[must_use]
    pub fn with_turned(mut self, turns: &[bool]) -> Self {
        for (path, _) in self.paths.iter_mut().zip(turns).filter(|(_, turn)| **turn) {
            path.reverse();
        }
        self
    }

    /// Greatest distance between this contour and the curves it was read from: zero where the drawing
    /// holds lines and arcs.
    #[must_use]
    pub const fn bound(&self) -> f64 {
        self.bound
    }

    /// All segments, each with the position of its path.
    pub fn segments(&self) -> impl Iterator<Item = (usize, &Segment)> {
        self.paths.iter().enumerate().flat_map(|(i, p)| p.segments().iter().map(move |s| (i, s)))
    }

    /// Smallest box round it.
    #[must_use]
    pub fn bounds(&self) -> Rect {
        let mut boxes = self.paths.iter().map(Path::bounds);
        let first = boxes.next().unwrap_or(Rect::ZERO);
        boxes.fold(first, |a, b| a.union(b))
    }

    /// Length of all paths together.
    #[must_use]
    pub fn length(&self) -> f64 {
        self.paths.iter().map(Path::length).sum()
    }

    /// The contour under a map that keeps shapes; the bound scales with it.
    ///
    /// # Errors
    /// When an arc would become an ellipse.
    pub fn mapped(&self, map: Affine) -> Result<Self, ArcError> {
        let paths = self.paths.iter().map(|p| p.mapped(map)).collect::<Result<_, _>>()?;
        Ok(Self { paths, bound: self.bound * map.determinant().abs().sqrt() })
    }
}
