//! How does a general polygon library see a shape of lines and arcs? As polygons of straight lines, by
//! chords: for second opinions and for pictures, never for a figure. Each result says how far it may lie
//! from the shape it stands for. Polygons that come back are exact, for a straight line is one here too.

use geo::Contains;
use geo_types::{Coord, LineString, MultiPolygon, Polygon};
use kurbo::Point;

use super::{Path, PathError, Segment, chords};

/// Polygons in place of a shape of lines and arcs.
#[derive(Clone, Debug, PartialEq)]
pub struct Chorded {
    /// Outer rings counter-clockwise, holes clockwise.
    pub polygons: MultiPolygon<f64>,
    /// No point of the polygons' boundary lies farther than this from the shape's, and none of the
    /// shape's from theirs: the greatest distance between an arc and its chord. A length.
    pub bound: f64,
}

/// The polygons which closed chains bound whose inside is on their left: counter-clockwise chains
/// are outer rings, clockwise ones holes of the smallest outer ring that holds them. Chords lie within
/// `sagitta` (a length) of their arcs, as [`chords`] has it; chains that enclose nothing are left out.
pub fn to_polygons<'a>(chains: impl IntoIterator<Item = &'a [Segment]>, sagitta: f64) -> Chorded {
    let mut bound = 0.0;
    let (mut outer, mut holes) = (Vec::new(), Vec::new());
    for chain in chains {
        let ring = ring(chain, sagitta, &mut bound);
        let area = twice_area(&ring);
        if area > 0.0 {
            outer.push((area, Polygon::new(ring, Vec::new())));
        } else if area < 0.0 {
            holes.push(ring);
        }
    }
    outer.sort_by(|a, b| a.0.total_cmp(&b.0));
    for hole in holes {
        // A hole may touch its ring in a point, so most of its corners decide.
        let inside = |ring: &Polygon<f64>| {
            let held = hole.0.iter().filter(|c| ring.contains(*c)).count();
            2 * held > hole.0.len()
        };
        if let Some((_, ring)) = outer.iter_mut().find(|(_, ring)| inside(ring)) {
            ring.interiors_push(hole);
        }
    }
    Chorded { polygons: MultiPolygon(outer.into_iter().map(|o| o.1).collect()), bound }
}

/// The closed chains of a polygon, exactly: its outer ring counter-clockwise, then its holes clockwise.
///
/// # Errors
/// When a coordinate is not finite, or a ring has no length.
pub fn from_polygon(polygon: &Polygon<f64>) -> Result<Vec<Path>, PathError> {
    let rings =
        std::iter::once((polygon.exterior(), true)).chain(polygon.interiors().iter().map(|r| (r, false)));
    rings
        .map(|(ring, left)| {
            let points: Vec<Point> = ring.0.iter().map(|c| Point::new(c.x, c.y)).collect();
            let steps = points.iter().zip(points.iter().skip(1)).filter(|(a, b)| a != b);
            let path = Path::new(steps.map(|(a, b)| Segment::line(*a, *b)).collect(), true)?;
            Ok(if (path.signed_area() > 0.0) == left { path } else { path.reversed() })
        })
        .collect()
}

/// The ring of a closed chain's chords; `bound` grows to the greatest distance from an arc.
fn ring(chain: &[Segment], sagitta: f64, bound: &mut f64) -> LineString<f64> {
    let mut points: Vec<Point> = chain.first().map(Segment::start).into_iter().collect();
    for segment in chain {
        let before = points.len();
        chords(segment, sagitta, &mut points);
        if let Segment::Arc(arc) = segment {
            // R (1 - cos(phi / 2)) of one of n equal chords, written so that it keeps its digits.
            let count = points.len().saturating_sub(before).max(1) as f64;
            let sine = (0.25 * arc.sweep() / count).sin();
            *bound = bound.max(2.0 * arc.radius() * sine * sine);
        }
    }
    let mut ring = LineString(points.into_iter().map(|p| Coord { x: p.x, y: p.y }).collect());
    ring.close();
    ring
}

/// Twice the enclosed area, positive counter-clockwise, about the first point so that shapes far from
/// the origin keep their digits.
fn twice_area(ring: &LineString<f64>) -> f64 {
    let Some(first) = ring.0.first() else { return 0.0 };
    ring.lines()
        .map(|l| (l.start.x - first.x) * (l.end.y - first.y) - (l.end.x - first.x) * (l.start.y - first.y))
        .sum()
}

#[cfg(test)]
mod tests {
    use geo::Area;

    use super::*;
    use crate::geometry::{Arc, Turn};

    fn circle(x: f64, radius: f64, turn: Turn) -> Vec<Segment> {
        let start = Point::new(x + radius, 0.0);
        vec![Segment::Arc(Arc::full_circle(Point::new(x, 0.0), start, turn).unwrap())]
    }

    /// Derived: n chords of a circle of radius R enclose R^2 n sin(2 pi / n) / 2.
    #[test]
    fn a_circle_of_71_chords_encloses_what_the_regular_polygon_does() {
        let chain = circle(3.0, 10.0, Turn::Left);
        let seen = to_polygons([chain.as_slice()], 0.01);
        let expected = 50.0 * 71.0 * (std::f64::consts::TAU / 71.0).sin();
        assert!((seen.polygons.unsigned_area() - expected).abs() < 1e-10);
        assert!((seen.bound - 0.009_787_734_800_26).abs() < 1e-12 && seen.bound <= 0.01);
    }

    #[test]
    fn a_hole_goes_into_the_smallest_ring_that_holds_it() {
        let chains = [
            circle(0.0, 50.0, Turn::Left),
            circle(0.0, 10.0, Turn::Right),
            circle(100.0, 5.0, Turn::Left),
            circle(0.0, 40.0, Turn::Right),
            circle(0.0, 20.0, Turn::Left),
        ];
        let seen = to_polygons(chains.iter().map(Vec::as_slice), 1e-3);
        let sizes: Vec<(f64, usize)> =
            seen.polygons.iter().map(|p| (p.exterior().0[0].x.round(), p.interiors().len())).collect();
        assert_eq!(sizes, [(105.0, 0), (20.0, 1), (50.0, 1)]);
        let area = std::f64::consts::PI * (2500.0 - 1600.0 + 400.0 - 100.0 + 25.0);
        let edge = std::f64::consts::TAU * 125.0;
        assert!((seen.polygons.unsigned_area() - area).abs() <= seen.bound * edge);
    }

    #[test]
    fn polygons_come_back_as_the_same_lines_whatever_way_they_ran() {
        let outer = LineString::from(vec![(0.0, 0.0), (0.0, 9.0), (9.0, 9.0), (9.0, 0.0), (0.0, 0.0)]);
        let hole = LineString::from(vec![(2.0, 2.0), (4.0, 2.0), (4.0, 2.0), (4.0, 4.0), (2.0, 2.0)]);
        let paths = from_polygon(&Polygon::new(outer, vec![hole])).unwrap();
        let areas: Vec<f64> = paths.iter().map(Path::signed_area).collect();
        assert_eq!(areas, [81.0, -2.0]);
        assert_eq!(paths[1].segments().len(), 3, "the point said twice is one");
        let again = to_polygons(paths.iter().map(Path::segments), 0.1);
        assert_eq!((again.polygons.unsigned_area(), again.bound), (79.0, 0.0));
        assert!(from_polygon(&Polygon::new(LineString::from(vec![(1.0, 1.0); 4]), vec![])).is_err());
        let infinite = LineString::from(vec![(0.0, 0.0), (f64::INFINITY, 0.0), (1.0, 1.0), (0.0, 0.0)]);
        assert!(from_polygon(&Polygon::new(infinite, vec![])).is_err());
    }

    #[test]
    fn no_chain_and_chains_that_enclose_nothing_make_no_polygon() {
        assert!(to_polygons([], 0.1).polygons.0.is_empty());
        let line = Segment::line(Point::ORIGIN, Point::new(1.0, 0.0));
        let flat = [line, line.reversed()];
        assert!(to_polygons([&[][..], &flat], 0.1).polygons.0.is_empty());
    }
}
