//! The pure mathematics of straight lines and circular arcs in one plane.
//!
//! Everything the program judges is a line or an arc, kept exactly: a circle stays a circle from the
//! drawing to the report. This room knows no cutter, no part and no file.
//!
//! Points, vectors, boxes and affine maps are [`kurbo`]'s; where the side of a line decides topology
//! the exact predicate of [`geo`] decides it ([`orientation`]).

mod arc;
mod contour;
mod crossing;
mod index;
mod line;
mod nearest;
mod path;
mod segment;

pub use arc::{Arc, ArcError, Turn};
pub use contour::{Contour, ContourError};
pub use crossing::{Crossing, Few, Meeting, MeetingKind, Overlap, crossing};
pub use index::BoxIndex;
pub use kurbo::{Affine, Point, Rect, Vec2};
pub use line::{Line, Side, orientation};
pub use nearest::Nearest;
pub use path::{Path, PathError};
pub use segment::{Offset, Segment};
