//! The command line of `sweptedge`.

fn main() {}
