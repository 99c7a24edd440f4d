//! How the program ends. Scripts rely on these three numbers.

use std::process::ExitCode;

/// The answer as a number, the worst last.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Exit {
    /// Every figure is within its limit, or what was asked for was done.
    Pass = 0,
    /// A figure is over its limit, or cannot be told from it.
    Fail = 1,
    /// Bad input or usage: nothing was judged and nothing written.
    NotJudged = 2,
}

impl From<Exit> for ExitCode {
    fn from(exit: Exit) -> Self {
        Self::from(exit as u8)
    }
}
