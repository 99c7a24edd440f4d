//! The oracle: a point is swept exactly when its clearance is at most zero.

#![allow(clippy::unwrap_used, reason = "a test may stop at the first surprise")]

mod oracle;

use oracle::{Rng, clearance, family, random_path, winding};
use sweptedge::envelope::sweep;
use sweptedge::geometry::{Point, Segment};
use sweptedge::view::DiscFamily;

/// Builds the region and holds it against clearance: along its edge, and at random points.
fn judge(f: &DiscFamily, rng: &mut Rng, points: usize) -> Result<f64, String> {
    let region = sweep(f).map_err(|e| e.to_string())?;
    region.check_invariants(f).map_err(|e| e.to_string())?;
    let b = f.bounds().unwrap().inflate(0.5, 0.5);
    for _ in 0..points {
        let p = Point::new(b.x0 + rng.f64() * b.width(), b.y0 + rng.f64() * b.height());
        let d = clearance(f, p);
        if d.abs() < 1e-7 {
            continue;
        }
        let w = winding(&region, p);
        if (w != i64::from(d < 0.0)) || !(0..=1).contains(&w) {
            return Err(format!("at {p:?} clearance {d:e} but winding {w}"));
        }
    }
    Ok(region.area())
}

fn source(path: &[Segment], radius: f64) -> String {
    format!("radius {radius:?}\n{path:#?}")
}

#[test]
fn random_and_lattice_paths_agree_with_clearance() {
    let mut failures = Vec::new();
    let cases: u64 = std::env::var("SWEPTEDGE_CASES").ok().and_then(|v| v.parse().ok()).unwrap_or(2400);
    for case in 0..cases {
        let mut rng = Rng::with_seed(case);
        let (path, radius) = random_path(&mut rng, case % 2 == 0);
        if let Err(why) = judge(&family(&path, radius), &mut rng, 60) {
            failures.push((case, why));
        }
    }
    if let Some((case, why)) = failures.first() {
        let mut rng = Rng::with_seed(*case);
        let (path, radius) = random_path(&mut rng, case % 2 == 0);
        let list: Vec<_> = failures.iter().take(40).map(|f| format!("{}: {}", f.0, f.1)).collect();
        panic!(
            "{} of {cases} failed\n{}\ncase {case}: {why}\n{}",
            failures.len(),
            list.join("\n"),
            source(&path, radius)
        );
    }
}
