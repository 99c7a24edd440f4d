//! Which edge will the cutter really leave?
//!
//! A moving cutter is a family of discs: center c(t), radius r(t). `sweptedge` computes the envelope of
//! that family, the edge that is really machined, as exact lines and arcs, and compares it with the
//! contour of the intended part, both ways.
//!
//! ```text
//!         ________________________________________
//!       .'        swept edge (the far side)       '.
//!      /    ____________________________________    \
//!     |    (          path of the center         )   |      D(x) = min |x - c(t)| - r(t)
//!      \    ------------------------------------    /
//!       '.________________________   ____________.'        D > 0  uncut
//!     ////////// contour /////////\_/////////////          D <= 0 cut
//!     //////////  part  //////////  ^ gouge //////         a gouge: the cutter past the contour
//!     ////////////////////////////////////////////         an excess: D > 0 on the contour
//! ```
//!
//! It answers, for a drawing, a cutter and a program: where does the cutter bite into the part and how
//! deep, where does it leave material and how much, how high stand the crests between passes, where does
//! the path fold over itself, which blocks are to blame, and what is to be changed. Every figure carries
//! a bound on its own error; one that cannot be told from its limit is undecided and does not pass.
//!
//! Data flows one way through the rooms of this crate: text by [`input`] to [`part`] and [`program`];
//! with a [`cutter`] by [`view`] to a disc family; by [`envelope`] to the swept region; by [`compare`]
//! to figures; by [`findings`] to faults with causes and a verdict; by [`report`] to bytes. Only [`cli`]
//! touches files.
//!
//! # Example
//!
//! A disc of radius 3 along two legs of 20 that meet at a right angle. The area it covers is
//! 2 r L + pi r^2 - r^2 (tan(v/2) - v/2) for a corner of turn v: the tube formula (H. Hotelling, 1939), less
//! what both legs cover on the inner side of the corner.
//!
//! ```
//! use std::f64::consts::{FRAC_PI_2, PI};
//! use sweptedge::envelope::sweep;
//! use sweptedge::geometry::{Point, Segment};
//! use sweptedge::program::MoveIndex;
//! use sweptedge::view::{DiscFamily, DiscMove};
//!
//! let radius = 3.0;
//! let legs = [
//!     Segment::line(Point::new(0.0, 0.0), Point::new(20.0, 0.0)),
//!     Segment::line(Point::new(20.0, 0.0), Point::new(20.0, 20.0)),
//! ];
//! let moves = (0..).zip(legs).map(|(i, segment)| DiscMove { segment, radius, source: MoveIndex(i) });
//! let family = DiscFamily { moves: moves.collect() };
//!
//! let region = sweep(&family)?;
//! let expected = 2.0 * radius * 40.0 + PI * radius * radius
//!     - radius * radius * ((FRAC_PI_2 / 2.0).tan() - FRAC_PI_2 / 2.0);
//! assert!((region.area() - expected).abs() < 1e-9);
//!
//! // One loop: two outer sides, the arc round the corner, two inner sides shorter by the radius, two caps.
//! assert_eq!(region.loops.len(), 1);
//! let round = 40.0 + radius * FRAC_PI_2 + 2.0 * (20.0 - radius) + 2.0 * PI * radius;
//! assert!((region.perimeter() - round).abs() < 1e-9);
//! region.check_invariants(&family)?;
//! # Ok::<(), Box<dyn std::error::Error>>(())
//! ```

pub mod cli;
pub mod compare;
pub mod cutter;
pub mod envelope;
pub mod findings;
pub mod geometry;
pub mod input;
pub mod part;
pub mod program;
pub mod report;
pub mod tolerance;
pub mod view;
