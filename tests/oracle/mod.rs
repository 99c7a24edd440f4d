//! Independent judge of swept regions: distances from points to moves, and angles.
//!
//! Nothing here calls the code under test but `Segment::distance` and `point_at`, which have tests of
//! their own against closed forms.

#![allow(dead_code, reason = "each test file uses its own part of the judge")]

use std::f64::consts::{PI, TAU};

use sweptedge::envelope::SweptRegion;
use sweptedge::geometry::{Arc, Point, Segment, Turn, Vec2};
use sweptedge::program::MoveIndex;
use sweptedge::view::{DiscFamily, DiscMove};

/// A family from segments.
pub fn family(segments: &[Segment], radius: f64) -> DiscFamily {
    let moves = (0..).zip(segments).map(|(i, &segment)| DiscMove::constant(segment, radius, MoveIndex(i)));
    DiscFamily { moves: moves.collect() }
}

/// Lines through points.
pub fn polyline(points: &[(f64, f64)]) -> Vec<Segment> {
    points.windows(2).map(|w| Segment::line(Point::new(w[0].0, w[0].1), Point::new(w[1].0, w[1].1))).collect()
}

/// Clearance by brute force.
pub fn clearance(family: &DiscFamily, p: Point) -> f64 {
    family.moves.iter().map(|m| m.clearance(p)).fold(f64::INFINITY, f64::min)
}

/// How often the loops of a region wind round a point: the angles its pieces are seen under, summed.
pub fn winding(region: &SweptRegion, p: Point) -> i64 {
    let total: f64 = region.segments().map(|s| angle_seen(s, p)).sum();
    (total / TAU).round() as i64
}

fn angle_seen(s: &Segment, p: Point) -> f64 {
    let (a, b) = (s.start() - p, s.end() - p);
    let chord = a.cross(b).atan2(a.dot(b));
    let Segment::Arc(arc) = s else { return chord };
    if arc.sweep().abs() >= TAU - 1e-12 && s.start() == s.end() {
        let inside = (p - arc.center()).hypot() < arc.radius();
        return if inside { arc.sweep() } else { 0.0 };
    }
    // In quarters no cap is larger than a half disc: then the angle is that of the chord unless the
    // point lies between chord and arc.
    let pieces = (arc.sweep().abs() / (0.5 * PI)).ceil().max(1.0) as usize;
    (0..pieces)
        .map(|k| {
            let part = arc.part(k as f64 / pieces as f64, (k + 1) as f64 / pieces as f64);
            let (a, b) = (part.start() - p, part.end() - p);
            let chord = a.cross(b).atan2(a.dot(b));
            let right_of_chord =
                (part.end() - part.start()).cross(p - part.start()) * part.sweep().signum() < 0.0;
            let in_cap = right_of_chord && (p - part.center()).hypot() < part.radius();
            if in_cap && chord * part.sweep() < 0.0 { chord + part.sweep().signum() * TAU } else { chord }
        })
        .sum()
}

/// Random numbers with a fixed start.
pub type Rng = fastrand::Rng;

/// A random path. `lattice` puts every number on a coarse grid, so that tangencies, retraced and
/// concentric moves and slots of exactly twice the radius are common.
pub fn random_path(rng: &mut Rng, lattice: bool) -> (Vec<Segment>, f64) {
    noisy_path(rng, lattice, 0.0)
}

/// The same, each number of a lattice path moved by up to `noise`: what was built to coincide then
/// misses by a little.
pub fn noisy_path(rng: &mut Rng, lattice: bool, noise: f64) -> (Vec<Segment>, f64) {
    let most = if rng.u8(..) < 40 { 24 } else { 7 };
    let count = rng.usize(1..=most);
    let step = if lattice { 1.0 } else { 0.0 };
    let number = |rng: &mut Rng, range: f64| {
        let v = (rng.f64() * 2.0 - 1.0) * range;
        if step > 0.0 { v.round() + noise * (rng.f64() - 0.5) } else { v }
    };
    let radius =
        if lattice { [0.5, 1.0, 1.0, 1.5, 2.0, 3.0][rng.usize(0..6)] } else { 0.2 + 3.0 * rng.f64() };
    let mut at = Point::new(number(rng, 6.0), number(rng, 6.0));
    let first = at;
    let mut path: Vec<Segment> = Vec::new();
    while path.len() < count {
        let roll = rng.u8(..100);
        let next = match roll {
            0..45 => Segment::line(at, Point::new(number(rng, 6.0), number(rng, 6.0))),
            45..70 => {
                let center = at + Vec2::new(number(rng, 4.0), number(rng, 4.0));
                if center == at {
                    continue;
                }
                let quarters = f64::from(rng.i32(1..=4)) * if rng.bool() { 1.0 } else { -1.0 };
                let sweep = if lattice { quarters * 0.5 * PI } else { quarters * rng.f64() * 0.5 * PI };
                let from = at - center;
                // Quarter turns of lattice vectors stay on the lattice.
                let end = if lattice {
                    let mut v = from;
                    for _ in 0..(quarters.abs() as i32) {
                        v = if quarters > 0.0 { Vec2::new(-v.y, v.x) } else { Vec2::new(v.y, -v.x) };
                    }
                    center + v
                } else {
                    let (s, c) = sweep.sin_cos();
                    center + Vec2::new(c * from.x - s * from.y, s * from.x + c * from.y)
                };
                let turn = if quarters > 0.0 { Turn::Left } else { Turn::Right };
                match Arc::from_center(center, at, end, turn, 1e-9) {
                    Ok(a) => Segment::Arc(a),
                    Err(_) => continue,
                }
            }
            70..78 => match path.last() {
                Some(last) => last.reversed(),
                None => continue,
            },
            78..84 => Segment::line(at, at),
            84..90 => Segment::line(at, first),
            90..95 => {
                // A jump: the next move starts elsewhere.
                at = Point::new(number(rng, 6.0), number(rng, 6.0));
                continue;
            }
            _ => {
                // Tangent: straight on from the last move.
                let Some(last) = path.last() else { continue };
                let d = last.tangent_at(1.0);
                if d == Vec2::ZERO {
                    continue;
                }
                Segment::line(at, at + d * (1.0 + rng.f64() * 3.0).round())
            }
        };
        at = next.end();
        path.push(next);
    }
    (path, radius)
}

/// The fewest moves of a path that still fail, found by leaving out ever smaller runs of them.
pub fn reduced<T: Clone>(path: &[T], fails: impl Fn(&[T]) -> bool) -> Vec<T> {
    let mut best = path.to_vec();
    let mut run = best.len() / 2;
    while run > 0 {
        let mut at = 0;
        while at < best.len() {
            let mut without = best.clone();
            without.drain(at..(at + run).min(best.len()));
            if !without.is_empty() && fails(&without) {
                best = without;
            } else {
                at += run;
            }
        }
        run /= 2;
    }
    best
}

/// A path as Rust source, every digit kept.
pub fn as_source(path: &[Segment], radius: f64) -> String {
    let mut text = format!("let radius = {radius:?};\nlet path = [\n");
    for s in path {
        let point = |p: Point| format!("Point::new({:?}, {:?})", p.x, p.y);
        text += &match s {
            Segment::Line(l) => format!("    Segment::line({}, {}),\n", point(l.start), point(l.end)),
            Segment::Arc(a) => format!(
                "    Segment::Arc(Arc::from_center({}, {}, {}, Turn::{:?}, 1.0).unwrap()),\n",
                point(a.center()),
                point(a.start()),
                point(a.end()),
                a.turn()
            ),
        };
    }
    text + "];"
}

/// Clearance by the discs themselves: the least over many of each move, the best of them refined by
/// golden section. No closed form.
pub fn sampled_clearance(family: &DiscFamily, p: Point) -> f64 {
    const DISCS: u32 = 64;
    let one = |m: &DiscMove| {
        let value = |t: f64| (p - m.segment.point_at(t)).hypot() - (m.radius + (m.end_radius - m.radius) * t);
        let step = 1.0 / f64::from(DISCS);
        let at = (0..=DISCS).map(|i| f64::from(i) * step);
        let best = at.min_by(|a, b| value(*a).total_cmp(&value(*b))).unwrap_or(0.0);
        let (mut low, mut high) = ((best - step).max(0.0), (best + step).min(1.0));
        for _ in 0..60 {
            let (a, b) = (low + 0.382 * (high - low), low + 0.618 * (high - low));
            if value(a) < value(b) { high = b } else { low = a }
        }
        value(0.5 * (low + high)).min(value(best))
    };
    family.moves.iter().map(one).fold(f64::INFINITY, f64::min)
}

/// Random straight and curved moves of varying radius. On a lattice nested discs, discs that touch from
/// inside, equal discs, radii of zero, plunges that only grow and retraced moves are common.
pub fn random_taper(rng: &mut Rng, lattice: bool, noise: f64) -> Vec<DiscMove> {
    let most = if rng.u8(..) < 40 { 16 } else { 6 };
    let count = rng.usize(1..=most);
    let number = |rng: &mut Rng, range: f64| {
        let v = (rng.f64() * 2.0 - 1.0) * range;
        if lattice { v.round() + noise * (rng.f64() - 0.5) } else { v }
    };
    let size = |rng: &mut Rng| {
        if lattice {
            ([0.0, 0.0, 0.5, 1.0, 1.0, 2.0, 3.0][rng.usize(0..7)] + noise * (rng.f64() - 0.5)).max(0.0)
        } else if rng.u8(..) < 30 {
            0.0
        } else {
            3.0 * rng.f64()
        }
    };
    let (mut at, mut radius) = (Point::new(number(rng, 6.0), number(rng, 6.0)), size(rng));
    let first = (at, radius);
    let mut moves: Vec<DiscMove> = Vec::new();
    while moves.len() < count {
        let source = MoveIndex(moves.len() as u32);
        let straight = |end: Point, end_radius: f64| DiscMove {
            segment: Segment::line(at, end),
            radius,
            end_radius,
            source,
        };
        let next = match rng.u8(..100) {
            0..50 => straight(Point::new(number(rng, 6.0), number(rng, 6.0)), size(rng)),
            // The disc stays as large: a constant move among tapered ones.
            50..62 => straight(Point::new(number(rng, 6.0), number(rng, 6.0)), radius),
            // It touches the disc before from inside, or swallows it.
            62..70 => {
                let end = at + Vec2::new(number(rng, 2.0), number(rng, 2.0));
                let grown = (end - at).hypot() + if rng.bool() { 0.0 } else { 0.5 };
                straight(end, if rng.bool() { radius + grown } else { (radius - grown).max(0.0) })
            }
            70..76 => match moves.last() {
                Some(last) => last.reversed(),
                None => continue,
            },
            76..82 => straight(at, size(rng)),
            82..89 => straight(first.0, first.1),
            89..94 => {
                // A jump: the next move starts elsewhere.
                (at, radius) = (Point::new(number(rng, 6.0), number(rng, 6.0)), size(rng));
                continue;
            }
            _ => {
                // Straight on, at the same taper: the same two tangents.
                let Some(last) = moves.last() else { continue };
                let way = last.segment.end() - last.segment.start();
                straight(at + way, (2.0 * last.end_radius - last.radius).max(0.0))
            }
        };
        if next.is_constant() && next.radius <= 1e-3 {
            continue;
        }
        (at, radius) = (next.segment.end(), next.end_radius);
        moves.push(next);
    }
    moves
}

/// Straight moves of varying radius as Rust source, every digit kept.
pub fn moves_as_source(moves: &[DiscMove]) -> String {
    let line = |m: &DiscMove| {
        let (a, b) = (m.segment.start(), m.segment.end());
        format!(
            "    taper(({:?}, {:?}), {:?}, ({:?}, {:?}), {:?}),\n",
            a.x, a.y, m.radius, b.x, b.y, m.end_radius
        )
    };
    format!("let moves = [\n{}];", moves.iter().map(line).collect::<String>())
}
