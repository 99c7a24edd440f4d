//! The oracle for discs that follow laws given by functions: cusped, nested, of radius zero on the way.
//!
//! A law's clearance is scanned here over its own discs, so that following it by straight moves is judged
//! together with their sweep: no point may be decided otherwise than the law says, beyond the bound.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test may stop at the first surprise")]

mod oracle;

use oracle::{Rng, winding};
use sweptedge::envelope::{SweptRegion, sweep, sweep_laws};
use sweptedge::geometry::{Affine, Arc, Point, Segment, Vec2};
use sweptedge::program::MoveIndex;
use sweptedge::tolerance::CURVE_ERROR_MM;
use sweptedge::view::{DiscFamily, DiscLaw, DiscMove, Lean, departure_by_second_derivatives};

/// Centre and radius as sums of a few waves, mapped.
#[derive(Clone)]
struct Waves {
    /// Amplitude, frequency, phase of x, y and radius.
    terms: [Vec<[f64; 3]>; 3],
    straight: Vec2,
    map: Affine,
    scale: f64,
    backwards: bool,
}

impl Waves {
    fn random(rng: &mut Rng) -> Self {
        let mut wave = |most: f64, count: usize| -> Vec<[f64; 3]> {
            (0..count).map(|_| [most * rng.f64(), (1 + rng.u8(..4)) as f64 * 1.7, rng.f64() * 6.3]).collect()
        };
        let terms = [wave(4.0, 2), wave(4.0, 2), wave(1.2, 2)];
        let straight = Vec2::new(rng.f64() * 12.0 - 6.0, rng.f64() * 12.0 - 6.0);
        Self { terms, straight, map: Affine::IDENTITY, scale: 1.0, backwards: false }
    }

    fn sum(terms: &[[f64; 3]], t: f64, lifted: f64) -> f64 {
        terms.iter().map(|[a, w, phase]| a * (lifted + (w * t + phase).cos())).sum()
    }

    fn bend(terms: &[[f64; 3]]) -> f64 {
        terms.iter().map(|[a, w, _]| a * w * w).sum()
    }
}

impl DiscLaw for Waves {
    fn at(&self, t: f64) -> (Point, f64) {
        let t = if self.backwards { 1.0 - t } else { t };
        let [x, y] = [0, 1].map(|i| Self::sum(&self.terms[i], t, 0.0));
        // Each wave of the radius is lifted to touch zero.
        let r = Self::sum(&self.terms[2], t, 1.0);
        (self.map * (Point::new(x, y) + self.straight * t), self.scale * r)
    }

    fn departure(&self, from: f64, to: f64) -> f64 {
        let [x, y, r] = [0, 1, 2].map(|i| Self::bend(&self.terms[i]));
        departure_by_second_derivatives(self.scale * x.hypot(y), self.scale * r, to - from)
    }
}

/// Clearance by a scan, its three lowest places refined.
fn scanned(law: &dyn DiscLaw, q: Point) -> f64 {
    const STEPS: usize = 300;
    let value = |t: f64| {
        let (c, r) = law.at(t);
        (q - c).hypot() - r
    };
    let values: Vec<f64> = (0..=STEPS).map(|i| value(i as f64 / STEPS as f64)).collect();
    let mut order: Vec<usize> = (0..=STEPS)
        .filter(|&i| (i == 0 || values[i] <= values[i - 1]) && (i == STEPS || values[i] <= values[i + 1]))
        .collect();
    order.sort_by(|a, b| values[*a].total_cmp(&values[*b]));
    let refine = |i: usize| {
        let step = 1.0 / STEPS as f64;
        let at = i as f64 * step;
        let (mut low, mut high) = ((at - step).max(0.0), (at + step).min(1.0));
        for _ in 0..40 {
            let (a, b) = (low + 0.382 * (high - low), low + 0.618 * (high - low));
            if value(a) < value(b) { high = b } else { low = a }
        }
        value(0.5 * (low + high)).min(values[i])
    };
    order.iter().take(3).map(|&i| refine(i)).fold(f64::INFINITY, f64::min)
}

fn judge(law: &dyn DiscLaw, region: &SweptRegion, rng: &mut Rng) -> Result<(), String> {
    for (i, s) in region.segments().enumerate() {
        if i % 7 == 0 {
            let d = scanned(law, s.point_at(0.4));
            if d.abs() > region.bound + 1e-7 {
                return Err(format!(
                    "edge at {:?}: clearance {d:e}, bound {:e}",
                    s.point_at(0.4),
                    region.bound
                ));
            }
        }
    }
    for _ in 0..30 {
        let (c, r) = law.at(rng.f64());
        let q = c + Vec2::from_angle(rng.f64() * 6.3) * (r * 1.6 * rng.f64() + 0.1);
        let d = scanned(law, q);
        if d.abs() <= region.bound + 1e-7 {
            continue;
        }
        let w = winding(region, q);
        if w != i64::from(d < 0.0) {
            return Err(format!("at {q:?} clearance {d:e} but winding {w}"));
        }
    }
    Ok(())
}

fn cases(usual: u64) -> u64 {
    std::env::var("SWEPTEDGE_CASES").ok().and_then(|v| v.parse().ok()).unwrap_or(usual)
}

#[test]
fn random_laws_agree_with_a_scan_of_their_discs_within_the_bound() {
    let mut failures = Vec::new();
    for case in 0..cases(2000) {
        let mut rng = Rng::with_seed(case);
        let law = Waves::random(&mut rng);
        let within = [1e-2, 1e-3][case as usize % 2];
        let lean = [Lean::Either, Lean::Outside, Lean::Inside][case as usize % 3];
        let judged = sweep_laws(&[&law], within, lean)
            .map_err(|e| e.to_string())
            .and_then(|region| judge(&law, &region, &mut rng));
        if let Err(why) = judged {
            failures.push(format!("case {case} {lean:?} {within}: {why}"));
        }
    }
    assert!(failures.is_empty(), "{} failed\n{}", failures.len(), failures.join("\n"));
}

#[test]
fn the_area_of_a_law_stays_within_the_bound_when_it_is_reversed_shifted_turned_mirrored_or_scaled() {
    let within = 1e-3;
    for case in 0..cases(100) {
        let law = Waves::random(&mut Rng::with_seed(70_000 + case));
        let region = sweep_laws(&[&law], within, Lean::Either).unwrap();
        for (name, map, scale, backwards) in [
            ("reversed", Affine::IDENTITY, 1.0, true),
            ("shifted by 1e6", Affine::translate((1e6, -1e6)), 1.0, false),
            ("turned", Affine::rotate(0.7), 1.0, false),
            ("mirrored", Affine::FLIP_Y, 1.0, false),
            ("scaled by 3", Affine::scale(3.0), 3.0, false),
        ] {
            let changed = Waves { map, scale, backwards, ..law.clone() };
            let other = sweep_laws(&[&changed], within * scale, Lean::Either)
                .unwrap_or_else(|e| panic!("case {case} {name}: {e}"));
            let slack = 2.0 * within * region.perimeter() + 1e-6;
            let area = other.area() / (scale * scale);
            assert!(
                (area - region.area()).abs() < slack,
                "case {case} {name}: {area} from {}",
                region.area()
            );
        }
    }
}

/// A tapered move on an arc as a law of its own, for the scan.
struct Curved(DiscMove);

impl DiscLaw for Curved {
    fn at(&self, t: f64) -> (Point, f64) {
        let Segment::Arc(a) = self.0.segment else { panic!("no arc") };
        let r = self.0.radius + (self.0.end_radius - self.0.radius) * t;
        (a.center() + a.radial(t) * a.radius(), r)
    }
    fn departure(&self, _: f64, _: f64) -> f64 {
        0.0
    }
}

#[test]
fn tapered_moves_on_arcs_agree_with_a_scan_and_keep_their_source() {
    for case in 0..cases(60) {
        let mut rng = Rng::with_seed(9_000 + case);
        let sweep_angle = (rng.f64() * 2.0 - 1.0) * 6.2;
        let arc =
            Arc::from_angles(Point::new(1.0, -2.0), 0.3 + 5.0 * rng.f64(), 6.0 * rng.f64(), sweep_angle);
        let (radius, end_radius) = (3.0 * rng.f64(), if rng.bool() { 0.0 } else { 3.0 * rng.f64() });
        let segment = Segment::Arc(arc.unwrap());
        let m = DiscMove { segment, radius, end_radius, source: MoveIndex(4) };
        // The same move twice, then backwards: the pieces go to moves that exist.
        let family = DiscFamily { moves: vec![m, m.reversed()] };
        let region = sweep(&family).unwrap_or_else(|e| panic!("case {case}: {e}"));
        assert!(region.bound >= CURVE_ERROR_MM && region.bound < 1.01 * CURVE_ERROR_MM);
        region.check_invariants(&family).unwrap_or_else(|e| panic!("case {case}: {e} {m:?}"));
        judge(&Curved(m), &region, &mut rng).unwrap_or_else(|e| panic!("case {case}: {e} {m:?}"));
    }
}
