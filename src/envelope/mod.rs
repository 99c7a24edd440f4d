//! Disc family -> swept region of lines and arcs, each piece knowing the move that made it.

mod region;

pub use region::{EdgeLoop, EdgePiece, SweptRegion};
