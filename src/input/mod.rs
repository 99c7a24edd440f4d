//! From text to the three things the user holds. Every reader takes bytes and a name and gives a
//! value plus placed problems, or refuses with at least one error among them. No reader touches a
//! file: that is the command line's.

pub mod drawing;
pub mod problem;
pub mod program;

pub use problem::{Place, Problem, Severity};

/// What a reader gives: the value, and what the user should know about how it was read.
#[derive(Clone, Debug, PartialEq)]
pub struct Reading<T> {
    /// What was understood.
    pub value: T,
    /// Warnings, in order of their place.
    pub problems: Vec<Problem>,
}

/// A refusal: problems of which at least one is an error.
pub type Refusal = Vec<Problem>;
