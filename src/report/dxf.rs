//! The swept edge as a DXF drawing of release 2000 (AC1015): closed light-weight polylines whose bulges
//! keep arcs as arcs, in the unit that $INSUNITS states.
//!
//! Written by hand after the published DXF reference, because the format's frame must
//! be whole for strict readers, because the same edge must give the same bytes (no date, no random
//! identifier), and because coordinates keep every digit. Swept material's outer loops and its holes
//! stand on two layers.

mod frame;

use super::csv::vertices;
use crate::envelope::{EdgeLoop, SweptRegion};
use crate::geometry::Rect;
use crate::program::Unit;
use frame::{Pairs, handle};

/// Layer of the loops round swept material.
pub const OUTER_LAYER: &str = "SWEPT_EDGE";
/// Layer of the holes in it.
pub const HOLE_LAYER: &str = "SWEPT_EDGE_HOLES";

/// Bit of an LWPOLYLINE's flags: closed.
const CLOSED: i32 = 1;

/// The drawing, in ASCII; lengths in `unit`.
#[must_use]
pub fn render(region: &SweptRegion, unit: Unit) -> String {
    let loops: Vec<&EdgeLoop> = region.loops.iter().filter(|l| !l.pieces.is_empty()).collect();
    let bounds = loops.iter().map(|l| l.bounds()).reduce(|a, b| a.union(b)).unwrap_or(Rect::ZERO);
    let mut pairs = Pairs::default();
    frame::before(&mut pairs, unit, bounds, loops.len());
    for (edge, number) in loops.into_iter().zip(handle::FIRST_ENTITY..) {
        polyline(&mut pairs, edge, number);
    }
    frame::after(&mut pairs);
    pairs.text
}

fn polyline(pairs: &mut Pairs, edge: &EdgeLoop, number: usize) {
    let vertices = vertices(edge);
    let layer = if edge.signed_area() < 0.0 { HOLE_LAYER } else { OUTER_LAYER };
    pairs.begin("LWPOLYLINE", number, handle::MODEL_SPACE);
    pairs.put(100, "AcDbEntity").put(8, layer).put(100, "AcDbPolyline");
    pairs.put(90, vertices.len()).put(70, CLOSED).real(43, 0.0);
    for v in vertices {
        pairs.real(10, v.at.x).real(20, v.at.y).real(42, v.bulge);
    }
}

#[cfg(test)]
mod tests {
    use ::dxf::Drawing;
    use ::dxf::entities::{EntityType, LwPolyline};
    use ::dxf::enums::Units;

    use super::*;
    use crate::geometry::{Arc, Point, Segment};
    use crate::report::sample;

    fn read_back(text: &str) -> Drawing {
        Drawing::load(&mut std::io::Cursor::new(text.as_bytes())).expect("our own drawing")
    }

    /// Area enclosed by a polyline read back, arcs rebuilt from its bulges.
    fn area(polyline: &LwPolyline) -> f64 {
        let v = &polyline.vertices;
        let mut twice = 0.0;
        for (a, b) in v.iter().zip(v.iter().cycle().skip(1)) {
            let (p, q) = (Point::new(a.x, a.y), Point::new(b.x, b.y));
            let segment = match Arc::from_bulge(p, q, a.bulge) {
                Ok(arc) => Segment::Arc(arc),
                Err(_) => Segment::line(p, q),
            };
            twice += segment.twice_area_about(Point::ORIGIN);
        }
        0.5 * twice
    }

    #[test]
    fn the_drawing_reads_back_with_the_area_of_every_loop() {
        let region = sample::swept().region;
        let drawing = read_back(&render(&region, Unit::Millimetre));
        assert_eq!(drawing.header.default_drawing_units, Units::Millimeters);
        let polylines: Vec<(String, LwPolyline)> = drawing
            .entities()
            .filter_map(|e| match &e.specific {
                EntityType::LwPolyline(p) => Some((e.common.layer.clone(), p.clone())),
                _ => None,
            })
            .collect();
        assert_eq!(polylines.len(), region.loops.len());
        for ((layer, polyline), edge) in polylines.iter().zip(&region.loops) {
            assert_eq!(polyline.flags & CLOSED, CLOSED);
            assert!((area(polyline) - edge.signed_area()).abs() < 1e-9);
            assert_eq!(layer, if edge.signed_area() < 0.0 { HOLE_LAYER } else { OUTER_LAYER });
        }
        let steepest = polylines.iter().flat_map(|(_, p)| &p.vertices).map(|v| v.bulge).fold(0.0, f64::max);
        assert!(steepest > 1.0, "the arc of more than half a turn stays one arc");
    }

    #[test]
    fn inches_are_stated_and_the_same_edge_gives_the_same_bytes() {
        let region = sample::swept().region;
        let (a, b) = (render(&region, Unit::Inch), render(&region, Unit::Inch));
        assert_eq!(a, b);
        assert_eq!(read_back(&a).header.default_drawing_units, Units::Inches);
    }

    #[test]
    fn an_empty_region_is_a_drawing_without_entities() {
        let text = render(&SweptRegion::default(), Unit::Millimetre);
        assert_eq!(read_back(&text).entities().count(), 0);
    }

    #[test]
    fn a_computed_edge_reads_back_with_its_area() {
        let disc = |segment| crate::view::DiscMove::constant(segment, 5.0, crate::program::MoveIndex(0));
        let path = sample::rounded(0.0)
            .into_iter()
            .chain([Segment::line(Point::new(8.0, 0.0), Point::new(60.0, 37.0))]);
        let family = crate::view::DiscFamily { moves: path.map(disc).collect() };
        let region = crate::envelope::sweep(&family).expect("a swept edge");
        assert!(region.loops.len() > 1);
        let drawing = read_back(&render(&region, Unit::Millimetre));
        let areas = drawing.entities().map(|e| match &e.specific {
            EntityType::LwPolyline(p) => area(p),
            _ => f64::NAN,
        });
        let sum: f64 = areas.sum();
        assert!((sum - region.area()).abs() < 1e-8, "{sum} {}", region.area());
    }

    #[test]
    fn no_handle_is_given_twice_and_every_owner_exists() {
        let text = render(&sample::swept().region, Unit::Millimetre);
        let lines: Vec<&str> = text.lines().map(str::trim).collect();
        let pairs: Vec<(&str, &str)> = lines.chunks(2).map(|p| (p[0], p[1])).collect();
        let (_, body) = pairs.split_at(pairs.iter().position(|p| p.1 == "TABLES").expect("tables"));
        let given: Vec<&str> = body.iter().filter(|p| p.0 == "5" || p.0 == "105").map(|p| p.1).collect();
        let unique: std::collections::HashSet<&str> = given.iter().copied().collect();
        assert_eq!(unique.len(), given.len());
        for (code, owner) in body.iter().filter(|p| ["330", "340", "350"].contains(&p.0)) {
            assert!(*owner == "0" || unique.contains(owner), "{code} {owner}");
        }
        let next = pairs
            .iter()
            .position(|p| p.1 == "$HANDSEED")
            .and_then(|at| pairs.get(at + 1))
            .expect("the next free handle");
        let number = |h: &str| usize::from_str_radix(h, 16).expect("a handle");
        assert!(given.iter().all(|h| number(h) < number(next.1)));
    }
}
