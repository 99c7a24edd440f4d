//! Findings from comparisons made by hand: every cause, its numbers, merging, order and verdict.

mod causes;
mod compared;
mod fixture;
mod verdicts;
mod whole;
