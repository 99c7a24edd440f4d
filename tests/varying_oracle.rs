//! The oracle for discs whose radius changes on the way: a point is swept exactly when its clearance is
//! at most zero, whatever the radius does.
//!
//! The judge's clearance here is the least over many discs of each move, refined about the least of them:
//! it shares no formula with the code under test.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test may stop at the first surprise")]

mod oracle;

use oracle::{Rng, moves_as_source, random_taper, reduced, sampled_clearance, winding};
use sweptedge::envelope::sweep;
use sweptedge::geometry::{Affine, Point};
use sweptedge::view::{DiscFamily, DiscMove};

/// Builds the region and holds it against clearance: along its edge, and at random points.
fn judge(moves: &[DiscMove], rng: &mut Rng, points: usize) -> Result<(f64, f64), String> {
    let f = DiscFamily { moves: moves.to_vec() };
    let region = sweep(&f).map_err(|e| e.to_string())?;
    region.check_invariants(&f).map_err(|e| e.to_string())?;
    let b = f.bounds().unwrap().inflate(0.5, 0.5);
    for _ in 0..points {
        let p = Point::new(b.x0 + rng.f64() * b.width(), b.y0 + rng.f64() * b.height());
        let d = sampled_clearance(&f, p);
        if d.abs() < 1e-7 + region.bound {
            continue;
        }
        let w = winding(&region, p);
        if (w != i64::from(d < 0.0)) || !(0..=1).contains(&w) {
            return Err(format!("at {p:?} clearance {d:e} but winding {w}"));
        }
    }
    Ok((region.area(), region.perimeter()))
}

/// How many random cases: more on request, for a long run.
fn cases() -> u64 {
    std::env::var("SWEPTEDGE_CASES").ok().and_then(|v| v.parse().ok()).unwrap_or(2000)
}

/// Judges the moves that `make` gives for each case, and shows the first that fails as Rust source.
fn judge_all(make: impl Fn(u64, &mut Rng) -> Vec<DiscMove>) {
    let mut failures = Vec::new();
    let first = std::env::var("SWEPTEDGE_FIRST").ok().and_then(|v| v.parse().ok()).unwrap_or(0);
    for case in first..cases() {
        let mut rng = Rng::with_seed(case);
        let moves = make(case, &mut rng);
        if let Err(why) = judge(&moves, &mut rng, 40) {
            failures.push((case, why));
        }
    }
    if let Some((case, why)) = failures.first() {
        let moves = make(*case, &mut Rng::with_seed(*case));
        let moves = reduced(&moves, |m| judge(m, &mut Rng::with_seed(*case), 200).is_err());
        let list: Vec<_> = failures.iter().take(40).map(|f| format!("{}: {}", f.0, f.1)).collect();
        let count = failures.len();
        panic!("{count} failed\n{}\ncase {case}: {why}\n{}", list.join("\n"), moves_as_source(&moves));
    }
}

#[test]
fn random_tapers_agree_with_clearance() {
    judge_all(|_, rng| random_taper(rng, false, 0.0));
}

#[test]
fn lattice_tapers_nested_swallowed_tangent_equal_and_of_zero_radius_agree_with_clearance() {
    judge_all(|_, rng| random_taper(rng, true, 0.0));
}

#[test]
fn lattice_tapers_that_miss_by_a_little_agree_with_clearance() {
    judge_all(|case, rng| random_taper(rng, true, 10f64.powi(-6 - (case % 11) as i32)));
}

/// The same discs in another order: each unbroken run starts at another of its moves.
fn restarted(moves: &[DiscMove], by: usize) -> Vec<DiscMove> {
    let mut out = moves.to_vec();
    let count = out.len();
    out.rotate_left(by % count);
    out
}

fn mapped(moves: &[DiscMove], map: Affine, scale: f64) -> Vec<DiscMove> {
    let moves = moves.iter().map(|m| DiscMove {
        segment: m.segment.mapped(map).unwrap(),
        radius: m.radius * scale,
        end_radius: m.end_radius * scale,
        source: m.source,
    });
    moves.collect()
}

#[test]
fn nothing_changes_when_a_taper_is_reversed_restarted_shifted_turned_mirrored_or_scaled() {
    for case in 0..cases() {
        let mut rng = Rng::with_seed(500_000 + case);
        let moves = random_taper(&mut rng, case % 2 == 0, 0.0);
        let measures = |m: &[DiscMove]| {
            let region = sweep(&DiscFamily { moves: m.to_vec() }).map_err(|e| e.to_string())?;
            Ok::<_, String>((region.area(), region.perimeter()))
        };
        let (area, perimeter) = measures(&moves).unwrap();
        let reversed: Vec<DiscMove> = moves.iter().rev().map(DiscMove::reversed).collect();
        let variants = [
            ("reversed", reversed, 1.0),
            ("restarted", restarted(&moves, 1 + case as usize % 5), 1.0),
            ("shifted by 1e6", mapped(&moves, Affine::translate((1e6, -1e6)), 1.0), 1.0),
            ("turned", mapped(&moves, Affine::rotate(0.7), 1.0), 1.0),
            ("mirrored", mapped(&moves, Affine::FLIP_Y, 1.0), 1.0),
            ("scaled by 3", mapped(&moves, Affine::scale(3.0), 3.0), 3.0),
            ("scaled by 1/1024", mapped(&moves, Affine::scale(1.0 / 1024.0), 1.0 / 1024.0), 1.0 / 1024.0),
        ];
        for (name, changed, scale) in variants {
            let (a, p) = measures(&changed)
                .unwrap_or_else(|e| panic!("case {case} {name}: {e}\n{}", moves_as_source(&moves)));
            // A shift by 1e6 leaves 1e-10 of each coordinate, so a seam of exactly touching discs may open.
            let slack = if name.starts_with("shifted") { 1e-6 } else { 1e-8 };
            assert!(
                (a / (scale * scale) - area).abs() < slack * (1.0 + area),
                "case {case} {name}: area {a} from {area}\n{}",
                moves_as_source(&moves)
            );
            let seams = (p / scale - perimeter).abs() > 1e-6 * (1.0 + perimeter);
            assert!(!(seams && case % 2 == 1), "case {case} {name}: perimeter {p} from {perimeter}");
        }
    }
}
