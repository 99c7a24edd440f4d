//! What a general polygon library says of swept regions handed to it as polygons: area, what lies
//! inside, and how far a point is from the region, each within the bound that the exchange states.

#![allow(clippy::unwrap_used, reason = "a test may stop at the first surprise")]

mod oracle;

use geo::{Area, Contains, Distance, Euclidean};
use geo_types::Coord;
use oracle::{Rng, clearance, family, random_path};
use sweptedge::envelope::sweep;
use sweptedge::geometry::Point;
use sweptedge::geometry::exchange::{from_polygon, to_polygons};

#[test]
fn area_inside_and_distance_agree_with_the_library_on_random_paths() {
    let mut rng = Rng::with_seed(77);
    for case in 0..300 {
        let (path, radius) = random_path(&mut rng, case % 2 == 0);
        let f = family(&path, radius);
        let region = sweep(&f).unwrap();
        let sagitta = 1e-4 * radius;
        let seen = region.to_polygons(sagitta);
        assert!(seen.bound <= sagitta + region.bound, "case {case}");
        let area = seen.polygons.unsigned_area();
        let most = seen.bound * region.perimeter() + 1e-9 * region.area();
        assert!((area - region.area()).abs() <= most, "case {case}: {area} and {}", region.area());
        let b = f.bounds().unwrap().inflate(radius, radius);
        for _ in 0..40 {
            let p = Point::new(b.x0 + rng.f64() * b.width(), b.y0 + rng.f64() * b.height());
            let d = clearance(&f, p);
            if d.abs() <= 2.0 * seen.bound {
                continue;
            }
            assert_eq!(seen.polygons.contains(&Coord { x: p.x, y: p.y }), d < 0.0, "case {case}, {p:?}");
            if d > 0.0 {
                let far = Euclidean.distance(&geo_types::Point::new(p.x, p.y), &seen.polygons);
                assert!((far - d).abs() <= 2.0 * seen.bound, "case {case}, {p:?}: {far} and {d}");
            }
        }
    }
}

#[test]
fn polygons_come_back_as_contours_of_the_same_area() {
    let mut rng = Rng::with_seed(78);
    for _ in 0..100 {
        let (path, radius) = random_path(&mut rng, false);
        let seen = sweep(&family(&path, radius)).unwrap().to_polygons(1e-2 * radius);
        for polygon in &seen.polygons {
            let back = from_polygon(polygon).unwrap();
            let area: f64 = back.iter().map(sweptedge::geometry::Path::signed_area).sum();
            assert!((area - polygon.unsigned_area()).abs() <= 1e-9 * area);
            assert_eq!(to_polygons(back.iter().map(|p| p.segments()), 1.0).bound.to_bits(), 0);
        }
    }
}
