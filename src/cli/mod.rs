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

use std::ffi::OsString;
use std::path::Path;
use std::process::ExitCode;

use clap::FromArgMatches;

use crate::input::{Place, Problem};

/// Everything that is wrong with a job file, the content of `file`: TOML, keys, values, and what is
/// missing. Empty when a check could begin; nothing is read or written.
#[must_use]
pub fn job_problems(bytes: &[u8], file: &str) -> Vec<Problem> {
    let place = Place::file(file);
    let request = job::read(bytes, file, Path::new(""))
        .and_then(|draft| request::check(draft, file.to_owned(), &place));
    request.err().unwrap_or_default()
}

/// Runs the program: reads its arguments, does what they say, and gives its exit status (0 pass,
/// 1 fail or undecided, 2 could not judge).
#[must_use]
pub fn main() -> ExitCode {
    let said: Vec<OsString> = std::env::args_os().collect();
    let short_help = said.iter().any(|word| word == "-h");
    let parsed = args::Cli::definition(short_help).try_get_matches_from(said);
    match parsed.and_then(|matches| args::Cli::from_arg_matches(&matches)) {
        Ok(cli) => run::run(&cli).into(),
        Err(error) => {
            // Help and version go to standard output and are no error; a closed pipe is none either.
            let status = if error.use_stderr() { exit::Exit::NotJudged } else { exit::Exit::Pass };
            let _ = error.print();
            status.into()
        }
    }
}
