//! The swept edge as a table: one vertex a line, a blank line between loops.
//!
//! Columns are x, y and bulge, the tangent of a quarter of the angle the edge turns through to the
//! next vertex: 0 for a line, positive counter-clockwise (DXF reference, LWPOLYLINE). Each loop repeats
//! its first vertex at its end, as the reader of such tables wants a closed loop. Arcs stay arcs.

use std::fmt::Write;

use crate::envelope::{EdgeLoop, SweptRegion};
use crate::geometry::{Arc, Point, Segment};

/// A vertex and the bulge of the edge that leaves it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Vertex {
    pub at: Point,
    pub bulge: f64,
}

/// The edge as a table with a heading; lengths in the unit of the region, with every digit.
#[must_use]
pub fn render(region: &SweptRegion) -> String {
    let mut out = String::from("x,y,bulge\n");
    for (at, edge) in region.loops.iter().enumerate() {
        if at > 0 {
            out.push('\n');
        }
        let vertices = vertices(edge);
        let closing = vertices.first().map(|v| Vertex { at: v.at, bulge: 0.0 });
        for v in vertices.into_iter().chain(closing) {
            // Writing to a string cannot fail.
            let _ = writeln!(out, "{},{},{}", v.at.x + 0.0, v.at.y + 0.0, v.bulge + 0.0);
        }
    }
    out
}

/// Greatest angle one bulge is trusted with: at a full turn it is infinite, and close to it the
/// radius hangs on the last digits of a short chord.
const WIDEST: f64 = 1.5 * std::f64::consts::PI;

/// The vertices of a closed loop. An arc of more than three quarters of a turn is split in two.
pub(super) fn vertices(edge: &EdgeLoop) -> Vec<Vertex> {
    let mut out = Vec::with_capacity(edge.pieces.len());
    let bulge = |a: &Arc| (0.25 * a.sweep()).tan();
    for piece in &edge.pieces {
        match &piece.segment {
            Segment::Line(l) => out.push(Vertex { at: l.start, bulge: 0.0 }),
            Segment::Arc(a) if a.sweep().abs() <= WIDEST => {
                out.push(Vertex { at: a.start(), bulge: bulge(a) })
            }
            Segment::Arc(a) => {
                let (first, second) = (a.part(0.0, 0.5), a.part(0.5, 1.0));
                out.push(Vertex { at: first.start(), bulge: bulge(&first) });
                out.push(Vertex { at: second.start(), bulge: bulge(&second) });
            }
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::sample;

    #[test]
    fn loops_stand_apart_by_a_blank_line_and_read_back_to_the_same_area() {
        let region = sample::swept().region;
        let text = render(&region);
        let body = text.strip_prefix("x,y,bulge\n").expect("a heading");
        let blocks: Vec<&str> = body.split("\n\n").collect();
        assert_eq!(blocks.len(), region.loops.len());
        for (block, edge) in blocks.iter().zip(&region.loops) {
            let rows: Vec<Vec<f64>> =
                block.lines().map(|l| l.split(',').map(|n| n.parse().expect("a number")).collect()).collect();
            let mut area = 0.0;
            for (a, b) in rows.iter().zip(rows.iter().cycle().skip(1)) {
                let (p, q) = (Point::new(a[0], a[1]), Point::new(b[0], b[1]));
                let segment = match Arc::from_bulge(p, q, a[2]) {
                    Ok(arc) => Segment::Arc(arc),
                    Err(_) => Segment::line(p, q),
                };
                area += 0.5 * segment.twice_area_about(Point::ORIGIN);
            }
            assert!((area - edge.signed_area()).abs() < 1e-9, "{area} {}", edge.signed_area());
        }
    }

    #[test]
    fn a_full_circle_is_two_half_turns_with_bulge_one() {
        let circle = sample::swept().region.loops.pop().expect("the circle");
        let vertices = vertices(&circle);
        assert_eq!(vertices.len(), 2);
        assert!(vertices.iter().all(|v| (v.bulge - 1.0).abs() < 1e-12));
    }

    #[test]
    fn an_empty_region_is_a_heading_only() {
        assert_eq!(render(&SweptRegion::default()), "x,y,bulge\n");
    }
}
