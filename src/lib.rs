//! Which edge will the cutter really leave?
//!
//! A moving cutter is a family of circles. `sweptedge` computes the envelope of that family, the edge
//! that is really machined, as exact lines and arcs, and compares it with the intended part.

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
