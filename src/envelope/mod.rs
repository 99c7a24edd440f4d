//! Disc family -> swept region of lines and arcs, each piece knowing the move that made it.
//!
//! The set first: the swept region is the union of the discs, a point belongs to it exactly when its
//! clearance D is at most zero. Its edge consists of parallels of the moves and of arcs round joints and
//! ends. No polygon, no grid and no sample stands in for it anywhere.

mod arrangement;
mod clearance;
mod cover;
mod fate;
mod invariants;
mod link;
mod raw;
mod region;
mod run;
mod seat;
mod strands;
mod sweep;

pub(crate) use arrangement::{Arrangement, Fragment, Strand};
pub use clearance::{Clear, Clearance};
pub use invariants::Broken;
pub(crate) use link::{Choice, loops};
pub use region::{EdgeLoop, EdgePiece, SweptRegion};
pub(crate) use sweep::between;
pub use sweep::{SweepError, sweep};
