//! Grouping, causes and verdict: from what the comparison measured to what the user must know.

mod report;

pub use report::{
    BlockRef, Cause, Drawing, Finding, Inputs, Kind, Limits, Report, Severity, SweptSummary, Tool, Verdict,
    Worst,
};
