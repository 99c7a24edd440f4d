//! What general polygon libraries take for the region a disc sweeps, beside ours: one process a run,
//! so that the greatest memory is its own, and the same points for all.
//!
//! `cargo run --release --manifest-path tests/peers/Cargo.toml -- [profile,raster,...] [greatest size]`
//! Pin it to a core to compare one thread: `taskset -c 1 cargo run ...`.
//!
//! Round joins and ends; chords within 1 um of a 3 mm arc where a library has no arcs. The clock runs
//! from the slice of points to the library's own result. Medians of three.

#[path = "../../bench/workloads.rs"]
mod workloads;

mod libraries;

use std::process::Command;
use std::time::Instant;

/// What one run found.
pub struct Found {
    /// Closed outlines, holes included.
    pub loops: usize,
    /// Points or pieces on them.
    pub pieces: usize,
    /// Area, mm2.
    pub area: f64,
}

const SIZES: [usize; 4] = [1_000, 10_000, 100_000, 1_000_000];

/// Longest a library is waited for before larger sizes are left out, ms.
const PATIENCE: f64 = 20_000.0;

fn main() {
    let args: Vec<String> = std::env::args().skip(1).collect();
    if let [one, library, work, moves] = args.as_slice()
        && one == "one"
    {
        return run_one(library, work, moves.parse().unwrap_or(0));
    }
    let works = args.first().cloned().unwrap_or_else(|| workloads::NAMES.join(","));
    let greatest: f64 = args.get(1).and_then(|v| v.parse().ok()).unwrap_or(1e6);
    println!("| work | moves | library | ms | us/move | MiB | loops | pieces | area mm2 |");
    println!("| --- | ---: | --- | ---: | ---: | ---: | ---: | ---: | ---: |");
    for work in works.split(',') {
        let mut slow: Vec<&str> = Vec::new();
        // Dense overlap at a million moves says nothing that a hundred thousand do not.
        let most = if matches!(work, "profile" | "raster") { 1e6 } else { 1e5 };
        for moves in SIZES.into_iter().filter(|&n| n as f64 <= greatest.min(most)) {
            for library in libraries::NAMES.into_iter().filter(|l| !slow.contains(l)).collect::<Vec<_>>() {
                let mut runs: Vec<(f64, String)> = (0..3).filter_map(|_| spawn(library, work, moves)).collect();
                runs.sort_by(|a, b| a.0.total_cmp(&b.0));
                let Some((ms, row)) = runs.get(runs.len() / 2) else {
                    println!("| {work} | {moves} | {library} | failed | | | | | |");
                    slow.push(library);
                    continue;
                };
                println!("| {work} | {moves} | {library} | {ms:.1} | {:.3} | {row} |", ms * 1e3 / moves as f64);
                if *ms > PATIENCE / 10.0 {
                    slow.push(library);
                }
            }
        }
    }
}

/// Runs one case in a process of its own.
fn spawn(library: &str, work: &str, moves: usize) -> Option<(f64, String)> {
    let program = std::env::current_exe().ok()?;
    let out = Command::new(program).args(["one", library, work, &moves.to_string()]).output().ok()?;
    let text = String::from_utf8(out.stdout).ok()?;
    let (ms, row) = text.trim().split_once(' ')?;
    Some((ms.parse().ok()?, row.to_string()))
}

fn run_one(library: &str, work: &str, moves: usize) {
    let Some(path) = workloads::make(work, moves) else { return };
    let before = greatest_memory();
    let clock = Instant::now();
    let Some(finish) = libraries::run(library, &path) else { return };
    let ms = clock.elapsed().as_secs_f64() * 1e3;
    let memory = greatest_memory() - before;
    let found = finish();
    println!("{ms} {memory:.0} | {} | {} | {:.3}", found.loops, found.pieces, found.area);
}

/// Greatest resident size so far, MiB (Linux; elsewhere 0).
fn greatest_memory() -> f64 {
    let status = std::fs::read_to_string("/proc/self/status").unwrap_or_default();
    let line = status.lines().find(|l| l.starts_with("VmHWM")).unwrap_or_default();
    line.split_whitespace().nth(1).and_then(|v| v.parse::<f64>().ok()).unwrap_or(0.0) / 1024.0
}
