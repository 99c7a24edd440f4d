//! The swept edge as a DXF drawing (AutoCAD release 2000 format): closed light-weight polylines whose
//! bulges keep arcs as arcs, in the unit that $INSUNITS states.
//!
//! Swept material's outer loops and its holes stand on two layers. The dates and identifiers that the
//! format wants are fixed, so that the same edge gives the same bytes.

use dxf::entities::{Entity, EntityType, LwPolyline};
use dxf::enums::{AcadVersion, Units};
use dxf::tables::Layer;
use dxf::{Color, Drawing, DxfError, LwPolylineVertex};

use super::csv::vertices;
use crate::envelope::{EdgeLoop, SweptRegion};
use crate::program::Unit;

/// Layer of the loops round swept material.
pub const OUTER_LAYER: &str = "SWEPT_EDGE";
/// Layer of the holes in it.
pub const HOLE_LAYER: &str = "SWEPT_EDGE_HOLES";

/// Bit of an LWPOLYLINE's flags: closed.
const CLOSED: i32 = 1;

/// The drawing; lengths in `unit`, with twelve decimals.
///
/// # Errors
/// When the DXF writer refuses, which no region of finite numbers makes it do.
pub fn render(region: &SweptRegion, unit: Unit) -> Result<Vec<u8>, DxfError> {
    let mut drawing = Drawing::new();
    let header = &mut drawing.header;
    header.version = AcadVersion::R2000;
    header.default_drawing_units = match unit {
        Unit::Millimetre => Units::Millimeters,
        Unit::Inch => Units::Inches,
    };
    header.creation_date = Default::default();
    header.creation_date_universal = Default::default();
    header.update_date = Default::default();
    header.update_date_universal = Default::default();
    header.fingerprint_guid = Default::default();
    header.version_guid = Default::default();
    for (name, color) in [(OUTER_LAYER, 5), (HOLE_LAYER, 4)] {
        drawing.add_layer(Layer {
            name: name.to_owned(),
            color: Color::from_index(color),
            ..Default::default()
        });
    }
    for edge in region.loops.iter().filter(|l| !l.pieces.is_empty()) {
        drawing.add_entity(polyline(edge));
    }
    let mut bytes = Vec::new();
    drawing.save(&mut bytes)?;
    Ok(bytes)
}

fn polyline(edge: &EdgeLoop) -> Entity {
    let vertex = |v: super::csv::Vertex| LwPolylineVertex {
        x: v.at.x,
        y: v.at.y,
        bulge: v.bulge,
        ..Default::default()
    };
    let vertices = vertices(edge).into_iter().map(vertex).collect();
    let mut entity =
        Entity::new(EntityType::LwPolyline(LwPolyline { flags: CLOSED, vertices, ..Default::default() }));
    let layer = if edge.signed_area() < 0.0 { HOLE_LAYER } else { OUTER_LAYER };
    entity.common.layer = layer.to_owned();
    entity
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::{Arc, Point, Segment};
    use crate::report::sample;

    fn read_back(bytes: &[u8]) -> Drawing {
        Drawing::load(&mut std::io::Cursor::new(bytes)).expect("our own drawing")
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
        let drawing = read_back(&render(&region, Unit::Millimetre).expect("a drawing"));
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
        let (a, b) = (render(&region, Unit::Inch).expect("one"), render(&region, Unit::Inch).expect("two"));
        assert_eq!(a, b);
        assert_eq!(read_back(&a).header.default_drawing_units, Units::Inches);
    }

    #[test]
    fn an_empty_region_is_a_drawing_without_entities() {
        let bytes = render(&SweptRegion::default(), Unit::Millimetre).expect("a drawing");
        assert_eq!(read_back(&bytes).entities().count(), 0);
    }
}
