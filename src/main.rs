//! The `sweptedge` program; everything it does is in [`sweptedge::cli`].

use std::process::ExitCode;

fn main() -> ExitCode {
    sweptedge::cli::main()
}
