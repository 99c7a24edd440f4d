//! The command line: what was asked, which files are read and written, and how it ends. The only room
//! that touches files or prints.
//!
//! Arguments and job file become a draft in which answers may be missing; the draft becomes a request
//! in which none is; the request is judged; what comes out is written whole or not at all.

mod args;
mod check;
mod draft;
mod exit;
mod files;
mod inspect;
mod job;
mod judge;
mod lay;
mod output;
mod pending;
mod request;
mod run;
mod stages;
mod table;

use std::process::ExitCode;

use clap::Parser;

/// Runs the program: reads its arguments, does what they say, and gives its exit status (0 pass,
/// 1 fail or undecided, 2 could not judge).
#[must_use]
pub fn main() -> ExitCode {
    match args::Cli::try_parse() {
        Ok(cli) => run::run(&cli).into(),
        Err(error) => {
            // Help and version go to standard output and are no error; a closed pipe is none either.
            let status = if error.use_stderr() { exit::Exit::NotJudged } else { exit::Exit::Pass };
            let _ = error.print();
            status.into()
        }
    }
}
