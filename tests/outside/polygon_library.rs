//! A second opinion from a general polygon library, on area and on where the edge lies.

use geo::algorithm::buffer::{Buffer, BufferStyle, LineCap, LineJoin};
use geo::{Area, Contains};
use geo_types::{Coord, LineString, MultiLineString, MultiPolygon};

use crate::build::*;
use crate::oracle::{Rng, as_source, random_path, winding};
use crate::sheet::Sheet;
use sweptedge::geometry::{Point, Segment};

const LIBRARY: Sheet = Sheet::new(
    "Second opinion: buffers of the geo crate",
    "geo 0.33, Buffer: its arcs are inscribed chords, so it lies inside the true region, by 5.5e-3 r as it comes and by \
     1.3e-4 r with the finest join angle it takes (0.01 pi; measured). Each figure below must keep that bound.",
);

/// Finest angle between chords that the library takes.
const FINEST: f64 = 0.01 * std::f64::consts::PI;

/// How far inside the true edge its finest and its default buffers lie, as a share of the radius.
const SHARES: [(&str, f64, f64); 2] = [("finest", FINEST, 1.3e-4), ("default", 0.2, 5.5e-3)];

/// Greatest distance between an arc of the path and the chords given to the library. With finer ones it
/// leaves stray slivers deep inside its buffers (seen at 3e-5, depth 0.25) and takes minutes.
const CHORD: f64 = 2e-4;

/// The path as chains of chords. Where it turns back on itself a new chain begins: the library leaves the
/// round at such a joint out (measured: a path of area 72.2668 by GEOS and by us comes out as 71.4130).
fn chains(path: &[Segment]) -> MultiLineString<f64> {
    let mut chains: Vec<Vec<Coord<f64>>> = Vec::new();
    let mut last: Option<&Segment> = None;
    let coord = |q: Point| Coord { x: q.x, y: q.y };
    for s in path.iter().filter(|s| s.length() > 0.0) {
        let goes_on = |l: &Segment| l.end() == s.start() && l.tangent_at(1.0).dot(s.tangent_at(0.0)) > -0.98;
        if !last.is_some_and(goes_on) {
            chains.push(vec![coord(s.start())]);
        }
        let count = match s {
            Segment::Line(_) => 1,
            Segment::Arc(a) => (a.sweep().abs() / (8.0 * CHORD / a.radius()).sqrt()).ceil().max(2.0) as u32,
        };
        let points = (1..=count).map(|k| coord(s.point_at(f64::from(k) / f64::from(count))));
        chains.last_mut().unwrap().extend(points);
        last = Some(s);
    }
    MultiLineString(chains.into_iter().map(LineString).collect())
}

fn buffer(path: &[Segment], radius: f64, angle: f64) -> MultiPolygon<f64> {
    let style = BufferStyle::new(radius).line_cap(LineCap::Round(angle)).line_join(LineJoin::Round(angle));
    chains(path).buffer_with_style(style)
}

/// A random path with at least one move that has a length.
fn case(number: u64) -> (Vec<Segment>, f64) {
    let mut rng = Rng::with_seed(31_000 + number);
    loop {
        let (mut path, radius) = random_path(&mut rng, number % 2 == 1);
        path.retain(|s| s.length() > 0.0);
        if !path.is_empty() {
            return (path, radius);
        }
    }
}

#[test]
fn areas_of_60_random_paths_exceed_the_librarys_by_no_more_than_its_chords() {
    for (name, angle, share) in SHARES {
        let (mut least, mut most) = (f64::INFINITY, 0.0f64);
        for number in 0..60 {
            let (path, radius) = case(number);
            let region = swept(&path, radius);
            // By how much our edge lies outside theirs on average, as a share of the radius.
            let library = buffer(&path, radius, angle).unsigned_area();
            let off = (region.area() - library) / region.perimeter();
            assert!(
                off > -CHORD && off < share * radius + CHORD,
                "{number}: off by {off:e} a length of edge, area {} and {library}\n{}",
                region.area(),
                as_source(&path, radius)
            );
            (least, most) = (least.min(off / radius), most.max(off / radius));
        }
        LIBRARY.within(
            format!("{name}: area over theirs per edge length and radius, least"),
            least.min(0.0),
            1e-4,
        );
        LIBRARY.within(format!("{name}: the same, greatest"), most, share + 1e-3);
    }
}

#[test]
fn edges_of_50_random_paths_lie_between_the_librarys_for_a_smaller_and_a_larger_radius() {
    let share = SHARES[0].2;
    let (mut outside, mut inside, mut theirs, mut looked_at) = (0, 0, 0, 0);
    for number in 0..50 {
        let (path, radius) = case(2 * number);
        let region = swept(&path, radius);
        // Chords take `share` of the radius at most, the path's own chords CHORD.
        let wider = buffer(&path, (radius + 2.0 * CHORD) / (1.0 - share), FINEST);
        let narrower = buffer(&path, radius - 2.0 * CHORD, FINEST);
        for q in edge_points(&region) {
            let q = geo_types::Point::new(q.x, q.y);
            looked_at += 1;
            outside += u32::from(!wider.contains(&q));
            inside += u32::from(narrower.contains(&q));
        }
        // And theirs between ours: every fifth of its points, against the larger and the smaller sweep.
        let (larger, smaller) =
            (swept(&path, radius + 2.0 * CHORD), swept(&path, (radius - 2.0 * CHORD) * (1.0 - share)));
        for polygon in &buffer(&path, radius, FINEST) {
            for ring in std::iter::once(polygon.exterior()).chain(polygon.interiors()) {
                for c in ring.coords().step_by(5) {
                    let q = p(c.x, c.y);
                    let between = winding(&larger, q) == 1 && winding(&smaller, q) == 0;
                    theirs += u32::from(!between);
                }
            }
        }
    }
    assert!(looked_at > 5000, "only {looked_at} points were looked at");
    LIBRARY.says(
        "points of our edge outside of theirs for a radius larger by its chords",
        "0",
        &outside.to_string(),
    );
    LIBRARY.says(
        "points of our edge inside theirs for a radius smaller by the path's chords",
        "0",
        &inside.to_string(),
    );
    LIBRARY.says("points of their edge not between ours for these radii", "0", &theirs.to_string());
}
