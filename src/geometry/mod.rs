//! The pure mathematics of straight lines and circular arcs in one plane.
//!
//! Everything the program judges is a line or an arc, kept exactly: a circle stays a circle from the
//! drawing to the report. This room knows no cutter, no part and no file.
//!
//! Points, vectors, boxes and affine maps are [`kurbo`]'s; where the side of a line decides topology
//! the exact predicate of [`geo`] decides it ([`orientation`]).

mod advance;
mod arc;
mod biarc;
mod chords;
mod contour;
mod crossing;
pub mod exchange;
mod index;
mod line;
mod nearest;
mod path;
mod segment;

pub(crate) use advance::advancing;
pub use arc::{Arc, ArcError, Turn};
pub use biarc::{
    Approximation, Curve, CurveError, Enclosure, cubic_to_arcs, curve_to_arcs, ellipse_to_arcs, quad_to_arcs,
};
pub use chords::chords;
pub use contour::{Contour, ContourError};
pub use crossing::{Crossing, Few, Meeting, MeetingKind, Overlap, crossing};
pub use index::BoxIndex;
pub use kurbo::{Affine, CubicBez, Point, QuadBez, Rect, Vec2};
pub use line::{Line, Side, orientation};
pub use nearest::Nearest;
pub use path::{Path, PathError};
pub use segment::{Offset, Segment};
