//! The swept region: what the moving disc has covered, by its boundary.

use crate::geometry::exchange::{Chorded, to_polygons};
use crate::geometry::{Rect, Segment};

/// A piece of the swept edge.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct EdgePiece {
    /// Line or arc; swept material on its left.
    pub segment: Segment,
    /// Position in [`crate::view::DiscFamily::moves`] of the move that made it.
    pub source: usize,
}

/// A closed loop of pieces. Counter-clockwise loops bound swept material, clockwise ones its holes.
#[derive(Clone, Debug, PartialEq)]
pub struct EdgeLoop {
    /// The pieces in order; each starts where the one before ends, the first where the last ends.
    pub pieces: Vec<EdgePiece>,
}

/// The union of all discs, by its boundary, the swept edge.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct SweptRegion {
    /// Loops of the swept edge.
    pub loops: Vec<EdgeLoop>,
    /// No point of the edge lies farther than this from the true swept edge.
    pub bound: f64,
}

impl EdgeLoop {
    /// Enclosed area, positive when counter-clockwise.
    #[must_use]
    pub fn signed_area(&self) -> f64 {
        let Some(first) = self.pieces.first() else {
            return 0.0;
        };
        let origin = first.segment.start();
        0.5 * self.pieces.iter().map(|p| p.segment.twice_area_about(origin)).sum::<f64>()
    }

    /// Length of the loop.
    #[must_use]
    pub fn length(&self) -> f64 {
        self.pieces.iter().map(|p| p.segment.length()).sum()
    }

    /// Smallest box round it.
    #[must_use]
    pub fn bounds(&self) -> Rect {
        let boxes = self.pieces.iter().map(|p| p.segment.bounds());
        boxes.reduce(|a, b| a.union(b)).unwrap_or(Rect::ZERO)
    }
}

impl SweptRegion {
    /// Area covered: holes are left out.
    #[must_use]
    pub fn area(&self) -> f64 {
        self.loops.iter().map(EdgeLoop::signed_area).sum()
    }

    /// Length of all loops.
    #[must_use]
    pub fn perimeter(&self) -> f64 {
        self.loops.iter().map(EdgeLoop::length).sum()
    }

    /// The region as polygons for a general polygon library, arcs by chords within `sagitta` of them; the
    /// bound on the whole adds this region's own.
    #[must_use]
    pub fn to_polygons(&self, sagitta: f64) -> Chorded {
        let loops: Vec<Vec<Segment>> =
            self.loops.iter().map(|l| l.pieces.iter().map(|p| p.segment).collect()).collect();
        let mut chorded = to_polygons(loops.iter().map(Vec::as_slice), sagitta);
        chorded.bound += self.bound;
        chorded
    }

    /// All pieces of all loops.
    pub fn pieces(&self) -> impl Iterator<Item = &EdgePiece> {
        self.loops.iter().flat_map(|l| &l.pieces)
    }

    /// All segments of all loops.
    pub fn segments(&self) -> impl Iterator<Item = &Segment> {
        self.pieces().map(|p| &p.segment)
    }
}
