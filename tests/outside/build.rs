//! Parts, paths and comparisons made from points.

use sweptedge::compare::{Clear, Comparison, Regions, Request, compare, figure_bound};
use sweptedge::envelope::{Clearance, SweptRegion, sweep};
use sweptedge::geometry::{Approximation, Arc, Contour, Path, Point, Segment, Turn, Vec2};
use sweptedge::part::{Keep, Origin, Part};
use sweptedge::program::MoveIndex;
use sweptedge::tolerance::Tolerances;
use sweptedge::view::{DiscFamily, DiscMove};

pub fn p(x: f64, y: f64) -> Point {
    Point::new(x, y)
}

/// The point at `radius` from the origin in the direction of `degrees`.
pub fn polar(radius: f64, degrees: f64) -> Point {
    (Vec2::from_angle(degrees.to_radians()) * radius).to_point()
}

pub fn lines(points: &[Point]) -> Vec<Segment> {
    points.windows(2).map(|w| Segment::line(w[0], w[1])).collect()
}

/// The closed polygon through `points`.
pub fn ring(points: &[Point]) -> Vec<Segment> {
    let mut round = points.to_vec();
    round.push(points[0]);
    lines(&round)
}

/// The rectangle of `w` by `h` from the origin, larger by `out` on every side.
pub fn rectangle(w: f64, h: f64, out: f64) -> Vec<Segment> {
    ring(&[p(-out, -out), p(w + out, -out), p(w + out, h + out), p(-out, h + out)])
}

pub fn arc(center: Point, start: Point, end: Point, turn: Turn) -> Segment {
    Segment::Arc(Arc::from_center(center, start, end, turn, 1e-9).unwrap())
}

pub fn circle(center: Point, radius: f64) -> Segment {
    Segment::Arc(Arc::full_circle(center, p(center.x + radius, center.y), Turn::Left).unwrap())
}

pub fn closed(segments: Vec<Segment>) -> Path {
    Path::new(segments, true).unwrap()
}

pub fn open(segments: Vec<Segment>) -> Path {
    Path::new(segments, false).unwrap()
}

/// A part of one path of lines and arcs.
pub fn part(path: Path, keep: Keep) -> Part {
    curved_part(path, 0.0, keep)
}

/// A part of one path that lies within `bound` of the curve it stands for.
pub fn curved_part(path: Path, bound: f64, keep: Keep) -> Part {
    Part::new(Contour::new(vec![path], bound).unwrap(), keep, 0.0, vec![Origin::default()]).unwrap()
}

pub fn family(segments: &[Segment], radius: f64) -> DiscFamily {
    let moves =
        (0u32..).zip(segments).map(|(i, &segment)| DiscMove { segment, radius, source: MoveIndex(i) });
    DiscFamily { moves: moves.collect() }
}

/// The swept region of a disc of `radius` along `segments`, its invariants checked.
pub fn swept(segments: &[Segment], radius: f64) -> SweptRegion {
    let family = family(segments, radius);
    let region = sweep(&family).unwrap();
    region.check_invariants(&family).unwrap();
    region
}

/// Area and length of each loop of a region, largest area first; holes are negative.
pub fn loops(region: &SweptRegion) -> Vec<(f64, f64)> {
    let mut loops: Vec<_> = region.loops.iter().map(|l| (l.signed_area(), l.length())).collect();
    loops.sort_by(|a, b| b.0.total_cmp(&a.0));
    loops
}

/// Points along the swept edge: the ends of every piece, and eight between them.
pub fn edge_points(region: &SweptRegion) -> Vec<Point> {
    region.segments().flat_map(|s| (0..=9).map(|k| s.point_at(f64::from(k) / 9.0))).collect()
}

/// Distance of `q` from the swept edge.
pub fn distance_to_edge(region: &SweptRegion, q: Point) -> f64 {
    region.segments().map(|s| s.distance(q)).fold(f64::INFINITY, f64::min)
}

/// Compares part and path as the `check` command does, with all three limits at `limit`.
pub fn judged(part: &Part, path: &[Segment], radius: f64, limit: f64) -> Comparison {
    judged_curves(part, path, radius, (limit, 0.0))
}

/// The same for a path that lies within a bound of the curve it stands for: limit and bound.
pub fn judged_curves(
    part: &Part,
    path: &[Segment],
    radius: f64,
    (limit, program_bound): (f64, f64),
) -> Comparison {
    let cutting = family(path, radius);
    let request = Request {
        gouge: limit,
        excess: limit,
        cusp: limit,
        clear: Clear::Wall,
        only_visited: false,
        program_bound,
        tolerances: Tolerances::for_extent(100.0),
    };
    let mut found = compare(part, &cutting, &DiscFamily::default(), &request);
    let region = sweep(&cutting).unwrap();
    region.check_invariants(&cutting).unwrap();
    let within = figure_bound(part, &cutting, &request).max(region.bound);
    Regions::new(part, &region, &Clearance::new(&cutting), within).attach(&mut found);
    found
}

/// The areas of all regions left standing, summed.
pub fn left_standing(found: &Comparison) -> f64 {
    found.excesses.iter().map(|e| e.region.as_ref().expect("a region that remains").area).sum()
}

/// The arcs that stand for a curve, and their bound, which must be what was asked for: arithmetic at
/// these coordinates may add a hundredth of it.
pub fn taken(approximation: Approximation, error: f64) -> (Vec<Segment>, f64) {
    assert!(approximation.bound <= 1.01 * error, "asked for {error:e}, got {:e}", approximation.bound);
    (approximation.segments, approximation.bound)
}
