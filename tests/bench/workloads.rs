//! Paths to measure with: the five shapes of work that real programs are made of, of any length, the
//! same on every machine. Lengths in mm; the cutter's radius is 3 mm.

use std::f64::consts::TAU;

/// Radius of the cutter, mm.
pub const RADIUS: f64 = 3.0;

/// Names of the workloads.
pub const NAMES: [&str; 5] = ["profile", "raster", "spiral", "trochoid", "fine"];

/// Points of a centre line; the last joins the first where `closed`.
pub struct Path {
    /// The points.
    pub points: Vec<[f64; 2]>,
    /// Is it a loop?
    pub closed: bool,
}

/// The workload `name` with about `moves` moves; `None` for an unknown name.
pub fn make(name: &str, moves: usize) -> Option<Path> {
    Some(match name {
        "profile" => profile(moves),
        "raster" => raster(moves),
        "spiral" => spiral(moves),
        "trochoid" => trochoid(moves),
        "fine" => fine(moves),
        _ => return None,
    })
}

/// Radius of the wavy contour at angle `t`, relative to its mean.
fn wave(t: f64) -> f64 {
    1.0 + 0.2 * (7.0 * t).sin() + 0.05 * (31.0 * t).sin()
}

fn wavy(moves: usize, mean: f64, mut noise: impl FnMut() -> f64) -> Path {
    let points = (0..moves)
        .map(|i| {
            let t = TAU * i as f64 / moves as f64;
            let r = mean * wave(t) + noise();
            [r * t.cos(), r * t.sin()]
        })
        .collect();
    Path { points, closed: true }
}

/// A wavy contour that grows with the number of moves: 0.25 mm a move.
fn profile(moves: usize) -> Path {
    let at = |i: i32| {
        let t = TAU * f64::from(i) / 1e5;
        [wave(t) * t.cos(), wave(t) * t.sin()]
    };
    let length: f64 = (0..100_000)
        .map(|i| {
            let (a, b) = (at(i), at(i + 1));
            (b[0] - a[0]).hypot(b[1] - a[1])
        })
        .sum();
    wavy(moves, 0.25 * moves as f64 / length, || 0.0)
}

/// The same contour at 50 mm, ever more finely chopped, each point off by up to 2 um, as a path
/// computed to a tolerance is.
fn fine(moves: usize) -> Path {
    let mut rng = fastrand::Rng::with_seed(1);
    wavy(moves, 50.0, || 4e-3 * (rng.f64() - 0.5))
}

/// Zigzag passes 2.4 mm apart, chopped into moves of 0.5 mm.
fn raster(moves: usize) -> Path {
    let passes = ((moves as f64 * 0.5 / 2.4).sqrt().round() as usize).max(2);
    let each = (moves + 1) / passes - 1;
    let mut points = Vec::with_capacity(moves + 1);
    for pass in 0..passes {
        for k in 0..=each {
            let k = if pass % 2 == 0 { k } else { each - k };
            points.push([k as f64 * 0.5, pass as f64 * 2.4]);
        }
    }
    Path { points, closed: false }
}

/// Archimedean spiral of 0.2 mm pitch in moves of 0.2 mm: thirty turns lie under the cutter.
fn spiral(moves: usize) -> Path {
    let growth = 0.2 / TAU;
    let mut angle: f64 = TAU;
    let points = (0..=moves)
        .map(|_| {
            let r = growth * angle;
            let p = [r * angle.cos(), r * angle.sin()];
            angle += 0.2 / r.hypot(growth);
            p
        })
        .collect();
    Path { points, closed: false }
}

/// Trochoidal slot: loops of 1.5 mm radius, 0.3 mm apart, forty moves each.
fn trochoid(moves: usize) -> Path {
    let points = (0..=moves)
        .map(|i| {
            let t = TAU * i as f64 / 40.0;
            [0.3 * t / TAU + 1.5 * t.cos(), 1.5 * t.sin()]
        })
        .collect();
    Path { points, closed: false }
}
