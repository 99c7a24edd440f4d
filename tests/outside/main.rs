//! Checks against the outside: closed forms, published examples and standards, each with its source.
//!
//! The tests use closed forms; the program uses its general algorithms. Nothing is shared but the
//! plain data types. The table of all checks is written to `outside-checks.md` in the build folder.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic, reason = "a test may stop at once")]

mod build;
mod corners;
mod curves;
mod ellipses;
mod envelopes;
mod formats;
mod kerf;
mod linearised;
mod parabolas;
mod polygon_library;
mod polygons;
mod programs;
mod tolerances;

#[path = "../oracle/mod.rs"]
mod oracle;
#[path = "../sheet/mod.rs"]
mod sheet;
