//! The oracle: a point is swept exactly when its clearance is at most zero.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test may stop at the first surprise")]

mod oracle;

use oracle::{Rng, as_source, clearance, family, noisy_path, random_path, reduced, winding};
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

/// How many random cases: more on request, for a long run.
fn cases() -> u64 {
    std::env::var("SWEPTEDGE_CASES").ok().and_then(|v| v.parse().ok()).unwrap_or(6000)
}

/// Judges the path that `make` gives for each case, and shows the first that fails as Rust source.
fn judge_all(make: impl Fn(u64, &mut Rng) -> (Vec<Segment>, f64)) {
    let mut failures = Vec::new();
    let first = std::env::var("SWEPTEDGE_FIRST").ok().and_then(|v| v.parse().ok()).unwrap_or(0);
    for case in first..cases() {
        let mut rng = Rng::with_seed(case);
        let (path, radius) = make(case, &mut rng);
        if let Err(why) = judge(&family(&path, radius), &mut rng, 60) {
            failures.push((case, why));
        }
    }
    if let Some((case, why)) = failures.first() {
        let (path, radius) = make(*case, &mut Rng::with_seed(*case));
        let path = reduced(&path, |p| judge(&family(p, radius), &mut Rng::with_seed(*case), 200).is_err());
        let list: Vec<_> = failures.iter().take(40).map(|f| format!("{}: {}", f.0, f.1)).collect();
        let count = failures.len();
        panic!("{count} failed\n{}\ncase {case}: {why}\n{}", list.join("\n"), as_source(&path, radius));
    }
}

#[test]
fn random_paths_agree_with_clearance() {
    judge_all(|_, rng| random_path(rng, false));
}

#[test]
fn lattice_paths_with_retraced_tangent_concentric_and_2r_moves_agree_with_clearance() {
    judge_all(|_, rng| random_path(rng, true));
}

#[test]
fn lattice_paths_that_miss_by_a_little_agree_with_clearance() {
    judge_all(|case, rng| noisy_path(rng, true, 10f64.powi(-6 - (case % 11) as i32)));
}

/// Area and perimeter of a path's sweep.
fn measures(path: &[Segment], radius: f64) -> (f64, f64, usize) {
    let region = sweep(&family(path, radius)).unwrap();
    (region.area(), region.perimeter(), region.loops.len())
}

#[test]
fn nothing_changes_when_a_path_is_reversed_shifted_turned_mirrored_or_scaled() {
    use sweptedge::geometry::Affine;
    for case in 0..400 {
        let mut rng = Rng::with_seed(90_000 + case);
        let (path, radius) = random_path(&mut rng, case % 2 == 0);
        let (area, perimeter, loops) = measures(&path, radius);
        let reversed: Vec<Segment> = path.iter().rev().map(Segment::reversed).collect();
        let maps = [
            ("reversed", Affine::IDENTITY, 1.0, true),
            ("shifted by 1e6", Affine::translate((1e6, -1e6)), 1.0, false),
            ("turned", Affine::rotate(0.7), 1.0, false),
            ("mirrored", Affine::FLIP_Y, 1.0, false),
            ("scaled by 3", Affine::scale(3.0), 3.0, false),
            ("scaled by 1/1024", Affine::scale(1.0 / 1024.0), 1.0 / 1024.0, false),
        ];
        for (name, map, scale, backwards) in maps {
            let from = if backwards { &reversed } else { &path };
            let moved: Vec<Segment> = from.iter().map(|s| s.mapped(map).unwrap()).collect();
            let (a, p, _) = measures(&moved, radius * scale);
            // A shift by 1e6 leaves 1e-10 of each coordinate, so a seam of exactly 2 r may open.
            let slack = if name.starts_with("shifted") { 1e-6 } else { 1e-8 };
            assert!(
                (a / (scale * scale) - area).abs() < slack * (1.0 + area),
                "case {case} {name}: area {a} from {area} ({loops} loops)\n{}",
                as_source(&path, radius)
            );
            let seams = (p / scale - perimeter).abs() > 1e-6 * (1.0 + perimeter);
            assert!(!(seams && case % 2 == 1), "case {case} {name}: perimeter {p} from {perimeter}");
        }
    }
}
