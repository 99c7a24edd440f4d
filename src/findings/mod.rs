//! Grouping, causes and verdict: from what the comparison measured to what the user must know.
//!
//! ```text
//! comparison -> diagnose (a draft with its cause) -> draft (neighbours made one)
//!            -> wording (message and remedy) -> judge (order, verdict)
//! ```
//!
//! Sizes and bounds come from [`crate::compare`] and are never changed here. Causes are judgements on
//! geometry, tested as the table in `diagnose` says.

mod corner;
mod diagnose;
mod draft;
mod judge;
mod moves;
mod number;
mod off_path;
mod report;
mod unvisited;
mod walls;
mod warnings;
mod wording;

pub use corner::{largest_radius_in_corner, left_in_corner};
pub use judge::{Facts, Judgement, judge};
pub use moves::{chord_within, step_over_within};
pub use number::{
    figure_text, length_text, length_text_down, length_text_up, number_text, point_text, stated_text,
};
pub(crate) use number::{finest, readable, supported};
pub use report::{
    BlockRef, Cause, Drawing, Finding, Inputs, Kind, Limits, Report, Severity, SweptSummary, Tool, Verdict,
    Worst,
};

#[cfg(test)]
mod tests;
