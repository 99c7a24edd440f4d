//! A second opinion on areas from GEOS, through Python.
//!
//! Needs a Python that can import shapely: the one that `SWEPTEDGE_PYTHON` names, else `python3`. Without
//! it the check says that it was skipped and why; where `CI` is `true` that is a failure. It has its own
//! `main`, because the usual one hides what a test that passes has printed.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::panic, reason = "a test may stop at once")]
#![allow(clippy::print_stdout, clippy::print_stderr, reason = "it reports in place of the usual main")]

#[path = "../oracle/mod.rs"]
mod oracle;
#[path = "../sheet/mod.rs"]
mod sheet;

use std::f64::consts::PI;
use std::io::Write;
use std::path::Path;
use std::process::{Command, ExitCode, Stdio};

use oracle::{Rng, as_source, family, random_path};
use serde_json::{Value, json};
use sheet::Sheet;
use sweptedge::envelope::sweep;
use sweptedge::geometry::Segment;

const NAME: &str = "areas_of_random_paths_agree_with_geos";

const GEOS: Sheet = Sheet::new(
    "Second opinion: unions of GEOS",
    "GEOS through shapely, quad_segs = 2000: circles are inscribed polygons of 8000 chords, so its area is the smaller \
     by at most the perimeter times (R + r)(1 - cos(pi/8000)) (derived), R the greatest radius of the path's arcs.",
);

/// Number of paths; every second one lies on a lattice, where tangent, retraced and concentric moves
/// and slots of exactly 2 r are common.
const CASES: u64 = 60;

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    if arguments.iter().any(|a| a == "--list") {
        println!("{NAME}: test");
        return ExitCode::SUCCESS;
    }
    let wanted = arguments.iter().filter(|a| !a.starts_with('-'));
    if wanted.clone().count() > 0 && !wanted.clone().any(|w| NAME.contains(w.as_str())) {
        return ExitCode::SUCCESS;
    }
    let python = std::env::var("SWEPTEDGE_PYTHON").unwrap_or_else(|_| "python3".into());
    match version(&python) {
        Ok(version) => {
            compare(&python);
            println!("test {NAME} ... ok ({version})");
            ExitCode::SUCCESS
        }
        Err(reason) => {
            println!("test {NAME} ... skipped: {reason}");
            let required = std::env::var("CI").is_ok_and(|v| v == "true");
            if required {
                eprintln!(
                    "CI is true, so this check must run: name a Python with shapely in SWEPTEDGE_PYTHON"
                );
            }
            if required { ExitCode::FAILURE } else { ExitCode::SUCCESS }
        }
    }
}

/// Versions of shapely and GEOS, or why there are none.
fn version(python: &str) -> Result<String, String> {
    let ask = "import shapely; print('shapely', shapely.__version__, 'GEOS', shapely.geos_version_string)";
    let output = Command::new(python).args(["-c", ask]).stdin(Stdio::null()).output();
    let output = output.map_err(|e| format!("{python} does not start: {e}"))?;
    let text = |bytes: &[u8]| String::from_utf8_lossy(bytes).trim().to_owned();
    if output.status.success() {
        Ok(text(&output.stdout))
    } else {
        let last = text(&output.stderr).lines().last().unwrap_or_default().to_owned();
        Err(format!("{python} cannot import shapely ({last})"))
    }
}

fn path(number: u64) -> (Vec<Segment>, f64) {
    random_path(&mut Rng::with_seed(52_000 + number), number % 2 == 1)
}

fn as_json((path, radius): &(Vec<Segment>, f64)) -> Value {
    let (mut lines, mut arcs) = (Vec::new(), Vec::new());
    for s in path {
        match s {
            Segment::Line(l) => lines.push([l.start.x, l.start.y, l.end.x, l.end.y]),
            Segment::Arc(a) => {
                let from = a.start() - a.center();
                arcs.push([a.center().x, a.center().y, a.radius(), from.y.atan2(from.x), a.sweep()]);
            }
        }
    }
    json!({ "radius": radius, "lines": lines, "arcs": arcs })
}

fn areas(python: &str, cases: &[(Vec<Segment>, f64)]) -> Vec<f64> {
    let script = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/second_opinion/geos.py");
    let input = Value::Array(cases.iter().map(as_json).collect()).to_string();
    let mut child = Command::new(python)
        .arg(script)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .spawn()
        .expect("Python that has just answered");
    child.stdin.take().expect("its input").write_all(input.as_bytes()).expect("it reads");
    let output = child.wait_with_output().expect("it ends");
    assert!(output.status.success(), "the script failed");
    serde_json::from_slice(&output.stdout).expect("a list of areas")
}

fn compare(python: &str) {
    let cases: Vec<_> = (0..CASES).map(path).collect();
    let areas = areas(python, &cases);
    assert_eq!(areas.len(), cases.len());
    let share = 1.0 - (PI / 8000.0).cos();
    let mut worst = (0.0f64, 0.0f64);
    for (number, ((path, radius), theirs)) in cases.iter().zip(&areas).enumerate() {
        let family = family(path, *radius);
        let region = sweep(&family).unwrap();
        region.check_invariants(&family).unwrap();
        let greatest = path.iter().fold(0.0f64, |m, s| match s {
            Segment::Arc(a) => m.max(a.radius()),
            Segment::Line(_) => m,
        });
        let (off, allowed) = (region.area() - theirs, region.perimeter() * (greatest + radius) * share);
        // Where moves coincide GEOS rounds crossings: nothing that shows in an area beyond 1e-9.
        assert!(
            off > -1e-9 * (1.0 + theirs) && off < allowed + 1e-9 * (1.0 + theirs),
            "case {number}: area {} against {theirs}, off by {off:e}, allowed {allowed:e}\n{}",
            region.area(),
            as_source(path, *radius)
        );
        worst = (worst.0.max(off / theirs), worst.1.max(allowed / theirs));
    }
    GEOS.within(format!("{CASES} paths: greatest relative difference of area"), worst.0, worst.1 + 1e-9);
}
