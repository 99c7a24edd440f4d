//! From sound pairs to strands of lines and arcs. The `dxf` crate says what the pairs of LINE, ARC,
//! CIRCLE, LWPOLYLINE and POLYLINE mean; here they become exact segments.
//!
//! ```text
//!   bulge b = tan(angle / 4), negative for clockwise, of any size; extrusion (0,0,-1) looks at the
//!   entity from below: x becomes -x and every arc changes its sense. LINE is in world coordinates and
//!   is not mirrored (DXF Reference, "Object Coordinate System").
//! ```

use dxf::entities::EntityType;

use super::scan::{Entity, refusal};
use super::sound;
use crate::geometry::{Arc, Point, Segment};
use crate::input::drawing::join::Strand;
use crate::input::{Place, Refusal};
use crate::tolerance::GREATEST_COORDINATE;

/// Kinds that are read.
pub(super) const READ: [&str; 5] = ["LINE", "ARC", "CIRCLE", "LWPOLYLINE", "POLYLINE"];

/// Strands and heights of the entities, in order.
#[derive(Debug)]
pub(super) struct Shapes {
    pub(super) strands: Vec<Strand>,
    /// Lowest and highest z met.
    pub(super) heights: (f64, f64),
    /// Greatest sagitta of a bulge so flat that a line stands for it.
    pub(super) bound: f64,
}

/// Shapes of `entities`, all of kinds in [`READ`], coordinates times `scale`.
///
/// # Errors
/// Numbers that are none or too great, tilted entities, meshes and smoothed polylines.
pub(super) fn shapes(entities: &[&Entity<'_>], scale: f64, file: &str) -> Result<Shapes, Refusal> {
    let mut text = String::from("0\nSECTION\n2\nENTITIES\n");
    for entity in entities {
        sound::write(entity, file, &mut text)?;
    }
    text.push_str("0\nENDSEC\n0\nEOF\n");
    let drawing = dxf::Drawing::load(&mut text.as_bytes());
    let read: Vec<&dxf::entities::Entity> = match &drawing {
        Ok(d) => d.entities().collect(),
        Err(_) => Vec::new(),
    };
    if read.len() != entities.len() {
        return Err(refusal(
            Place::file(file),
            &format!(
                "{} of {} entities could not be read",
                entities.len() - read.len().min(entities.len()),
                entities.len()
            ),
            "a sound DXF drawing",
            "export the drawing again, in another version of DXF",
        ));
    }
    let mut shapes = Shapes { strands: Vec::new(), heights: (f64::INFINITY, f64::NEG_INFINITY), bound: 0.0 };
    for (entity, read) in entities.iter().zip(read) {
        Reader { entity, file, scale, shapes: &mut shapes }.read(&read.specific)?;
    }
    Ok(shapes)
}

/// Seen from above as drawn, or from below?
#[derive(Clone, Copy, PartialEq, Eq)]
enum Face {
    Up,
    Down,
}

struct Reader<'a, 's> {
    entity: &'a Entity<'a>,
    file: &'a str,
    scale: f64,
    shapes: &'s mut Shapes,
}

impl Reader<'_, '_> {
    fn read(&mut self, shape: &EntityType) -> Result<(), Refusal> {
        match shape {
            EntityType::Line(l) => self.line(l),
            EntityType::Arc(a) => {
                let face = self.face(&a.normal)?;
                self.height(a.center.z);
                let sweep = (a.end_angle - a.start_angle).rem_euclid(360.0);
                let sweep = if sweep <= 0.0 { 360.0 } else { sweep };
                self.arc(&a.center, a.radius, face, (a.start_angle, sweep))
            }
            EntityType::Circle(c) => {
                let face = self.face(&c.normal)?;
                self.height(c.center.z);
                self.arc(&c.center, c.radius, face, (0.0, 360.0))
            }
            EntityType::LwPolyline(p) => {
                let face = self.face(&p.extrusion_direction)?;
                let elevation = self.entity.pairs.iter().find(|q| q.code == 38);
                self.height(elevation.and_then(|q| q.text().parse().ok()).unwrap_or(0.0));
                let vertices = p.vertices.iter().map(|v| (v.x, v.y, v.bulge)).collect();
                self.polyline(vertices, face, p.flags & 1 == 1)
            }
            EntityType::Polyline(p) => self.old_polyline(p),
            _ => Err(self.refuse("another entity than its name says", "export the drawing again")),
        }
    }

    fn line(&mut self, l: &dxf::entities::Line) -> Result<(), Refusal> {
        if (l.p1.z - l.p2.z).abs() > 1e-6 {
            return Err(self.refuse(
                &format!("it climbs from z {} to z {}", l.p1.z, l.p2.z),
                "flatten the drawing: set the z of both ends to the same height",
            ));
        }
        self.height(l.p1.z);
        let segment =
            Segment::line(self.point(l.p1.x, l.p1.y, Face::Up), self.point(l.p2.x, l.p2.y, Face::Up));
        self.push(vec![segment], false)
    }

    fn arc(
        &mut self,
        center: &dxf::Point,
        radius: f64,
        face: Face,
        (from, sweep): (f64, f64),
    ) -> Result<(), Refusal> {
        let (from, sweep) = match face {
            Face::Up => (from, sweep),
            Face::Down => (180.0 - from, -sweep),
        };
        let (from, swept) = (from.rem_euclid(360.0).to_radians(), sweep.to_radians());
        let arc = Arc::from_angles(self.point(center.x, center.y, face), radius * self.scale, from, swept);
        match arc {
            Ok(arc) => self.push(vec![arc.into()], sweep.abs() >= 360.0),
            Err(_) => {
                Err(self
                    .refuse(&format!("its radius is {radius}"), "give it a radius above zero or delete it"))
            }
        }
    }

    fn old_polyline(&mut self, p: &dxf::entities::Polyline) -> Result<(), Refusal> {
        let flags = self.entity.pairs.iter().take_while(|q| q.code != 0).find(|q| q.code == 70);
        let flags = flags.and_then(super::scan::Pair::integer).unwrap_or(0);
        if flags & (16 | 64) != 0 {
            return Err(self.refuse("it is a mesh", "draw the contour as a polyline of lines and arcs"));
        }
        if flags & 4 != 0 {
            return Err(self.refuse(
                "it is smoothed: its chords only stand for a curve",
                "convert it to a polyline with arcs",
            ));
        }
        // A space polyline is in world coordinates and has no arcs.
        let face = if flags & 8 != 0 { Face::Up } else { self.face(&p.normal)? };
        let first_z = p.vertices().next().map_or(0.0, |v| v.location.z);
        if p.vertices().any(|v| (v.location.z - first_z).abs() > 1e-6) {
            return Err(self.refuse("its vertices lie at different heights", "flatten it to one height"));
        }
        self.height(if flags & 8 != 0 { first_z } else { p.location.z });
        let vertices = p.vertices().map(|v| (v.location.x, v.location.y, v.bulge)).collect();
        self.polyline(vertices, face, flags & 1 == 1)
    }

    fn polyline(&mut self, vertices: Vec<(f64, f64, f64)>, face: Face, closed: bool) -> Result<(), Refusal> {
        let sign = if face == Face::Down { -1.0 } else { 1.0 };
        let vertices: Vec<(Point, f64)> =
            vertices.into_iter().map(|(x, y, b)| (self.point(x, y, face), sign * b)).collect();
        let closed = closed && vertices.len() > 1;
        let nexts = vertices.iter().skip(1).chain(vertices.iter().take(usize::from(closed)));
        let mut segments = Vec::with_capacity(vertices.len());
        for ((start, bulge), (end, _)) in vertices.iter().zip(nexts) {
            match bulged(*start, *end, *bulge) {
                Some((segment, off)) => {
                    self.shapes.bound = self.shapes.bound.max(off);
                    segments.push(segment);
                }
                None => {
                    return Err(self.refuse(
                        &format!("its bulge {bulge} makes an arc of no usable radius"),
                        "redraw that arc",
                    ));
                }
            }
        }
        if segments.is_empty() {
            return Err(self.refuse("it has fewer than two vertices", "delete it"));
        }
        self.push(segments, closed)
    }

    /// Which way the entity's plane faces.
    fn face(&self, normal: &dxf::Vector) -> Result<Face, Refusal> {
        let flat = normal.x.abs().max(normal.y.abs()) <= 1e-9 * normal.z.abs();
        if !flat || normal.z == 0.0 {
            return Err(self.refuse(
                &format!("its plane is tilted: extrusion ({}, {}, {})", normal.x, normal.y, normal.z),
                "flatten the drawing into the XY plane",
            ));
        }
        Ok(if normal.z > 0.0 { Face::Up } else { Face::Down })
    }

    fn height(&mut self, z: f64) {
        let (low, high) = self.shapes.heights;
        self.shapes.heights = (low.min(z), high.max(z));
    }

    fn point(&self, x: f64, y: f64, face: Face) -> Point {
        let x = if face == Face::Down { -x } else { x };
        Point::new(x * self.scale, y * self.scale)
    }

    fn push(&mut self, segments: Vec<Segment>, closed: bool) -> Result<(), Refusal> {
        let far = segments
            .iter()
            .map(Segment::bounds)
            .any(|b| [b.x0, b.y0, b.x1, b.y1].iter().any(|v| v.is_nan() || v.abs() > GREATEST_COORDINATE));
        if far {
            return Err(self.refuse("it reaches farther than 1e9 units", "move the drawing to its origin"));
        }
        self.shapes.strands.push(Strand {
            segments,
            closed,
            layer: Some(self.entity.layer.clone()),
            place: self.entity.place(self.file),
        });
        Ok(())
    }

    fn refuse(&self, why: &str, help: &str) -> Refusal {
        refusal(
            self.entity.place(self.file),
            &format!("{} cannot be read: {why}", self.entity.title()),
            "flat lines, arcs and polylines",
            help,
        )
    }
}

/// The segment from `start` to `end` with a bulge, and how far it may lie from what the bulge says.
/// The farther away its centre, the fewer digits an arc's points keep: one that is flatter than that
/// loss is a line. Nothing for an arc whose radius no number holds.
pub(in crate::input::drawing) fn bulged(start: Point, end: Point, bulge: f64) -> Option<(Segment, f64)> {
    // Rounding of points that are computed from a centre at the distance `radius`.
    let blur = |radius: f64| 4.0 * f64::EPSILON * radius;
    let chord = (end - start).hypot();
    let sagitta = 0.5 * bulge.abs() * chord;
    let radius = 0.25 * chord * (bulge.abs() + 1.0 / bulge.abs());
    if sagitta <= blur(radius).max(1e-12) {
        return Some((Segment::line(start, end), sagitta));
    }
    let arc = Arc::from_bulge(start, end, bulge).ok()?;
    // Below a thousandth of what a drawing tolerates nobody is told.
    let off = if blur(radius) > 1e-9 { blur(radius) } else { 0.0 };
    Some((arc.into(), off))
}
