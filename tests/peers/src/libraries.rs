//! One function a library: from points to its own result, and from that to what is printed.

use std::f64::consts::PI;

use crate::workloads::{Path, RADIUS};
use crate::Found;

/// Chord error allowed on the cutter's arcs, mm.
const CHORD: f64 = 1e-3;

/// What is run, ours first.
pub const NAMES: [&str; 7] =
    ["sweptedge", "geos-buffer", "geos-chunks", "i_overlay", "kurbo+i_overlay", "geo", "cavalier_contours"];

/// Turns a library's result into figures, outside the clock.
pub type Finish = Box<dyn FnOnce() -> Found>;

/// Runs `library` on `path`; `None` for an unknown name or a failure.
pub fn run(library: &str, path: &Path) -> Option<Finish> {
    match library {
        "sweptedge" => ours(path),
        "geos-buffer" => geos_buffer(path),
        "geos-chunks" => geos_chunks(path),
        "i_overlay" => i_overlay_stroke(path),
        "kurbo+i_overlay" => kurbo_stroke(path),
        "geo" => geo_buffer(path),
        "cavalier_contours" => cavalier(path),
        _ => None,
    }
}

/// Angle of an arc step whose chord errs by no more than `CHORD`.
fn step() -> f64 {
    2.0 * (1.0 - CHORD / RADIUS).acos()
}

/// The points, the first repeated at the end of a closed path.
fn closed_points(path: &Path) -> Vec<[f64; 2]> {
    let mut points = path.points.clone();
    if path.closed {
        points.extend(path.points.first());
    }
    points
}

fn ours(path: &Path) -> Option<Finish> {
    use sweptedge::geometry::{Point, Segment};
    use sweptedge::program::MoveIndex;
    use sweptedge::view::{DiscFamily, DiscMove};
    let points = closed_points(path);
    let moves = (0u32..).zip(points.windows(2)).map(|(i, w)| {
        let line = Segment::line(Point::new(w[0][0], w[0][1]), Point::new(w[1][0], w[1][1]));
        DiscMove::constant(line, RADIUS, MoveIndex(i))
    });
    let region = sweptedge::envelope::sweep(&DiscFamily { moves: moves.collect() }).ok()?;
    Some(Box::new(move || Found { loops: region.loops.len(), pieces: region.pieces().count(), area: region.area() }))
}

/// Figures of rings given as points; holes run the other way.
fn rings(rings: impl Iterator<Item = Vec<[f64; 2]>>) -> Found {
    let mut found = Found { loops: 0, pieces: 0, area: 0.0 };
    for ring in rings {
        let next = ring.iter().cycle().skip(1);
        found.area += 0.5 * ring.iter().zip(next).map(|(a, b)| a[0] * b[1] - a[1] * b[0]).sum::<f64>();
        found.loops += 1;
        found.pieces += ring.len();
    }
    found
}

/// Steps in a quarter circle. GEOS rounds the number of steps of a join to the nearest.
fn quarter() -> i32 {
    (1.5 * 0.5 * PI / step()).ceil() as i32
}

fn geos_line(points: &[[f64; 2]]) -> Option<geos::Geometry> {
    let sequence = geos::CoordSeq::new_from_buffer(points.as_flattened(), points.len(), geos::CoordType::XY).ok()?;
    geos::Geometry::create_line_string(sequence).ok()
}

fn geos_found(g: geos::Geometry) -> Finish {
    use geos::Geom;
    Box::new(move || {
        let (mut loops, mut pieces) = (0, 0);
        for i in 0..g.get_num_geometries().unwrap_or(0) {
            let Ok(p) = g.get_geometry_n(i) else { continue };
            let holes = p.get_num_interior_rings().unwrap_or(0);
            loops += 1 + holes;
            pieces += p.get_num_coordinates().unwrap_or(0) - 1 - holes;
        }
        Found { loops, pieces, area: g.area().unwrap_or(f64::NAN) }
    })
}

fn geos_buffer(path: &Path) -> Option<Finish> {
    use geos::Geom;
    Some(geos_found(geos_line(&closed_points(path))?.buffer(RADIUS, quarter()).ok()?))
}

/// Buffers of 64 moves each, united by the cascaded union.
fn geos_chunks(path: &Path) -> Option<Finish> {
    use geos::Geom;
    let points = closed_points(path);
    let mut parts = Vec::new();
    let mut from = 0;
    while from + 1 < points.len() {
        let to = (from + 64).min(points.len() - 1);
        parts.push(geos_line(points.get(from..=to)?)?.buffer(RADIUS, quarter()).ok()?);
        from = to;
    }
    Some(geos_found(geos::Geometry::create_geometry_collection(parts).ok()?.unary_union().ok()?))
}

fn i_overlay_stroke(path: &Path) -> Option<Finish> {
    use i_overlay::mesh::float::stroke::offset::StrokeOffset;
    use i_overlay::mesh::float::style::{LineCap, LineJoin, StrokeStyle};
    let style = StrokeStyle::new(2.0 * RADIUS)
        .line_join(LineJoin::Round(step()))
        .start_cap(LineCap::Round(step()))
        .end_cap(LineCap::Round(step()));
    let shapes = path.points.stroke(style, path.closed);
    Some(Box::new(move || rings(shapes.into_iter().flatten())))
}

fn kurbo_stroke(path: &Path) -> Option<Finish> {
    use i_overlay::core::fill_rule::FillRule;
    use i_overlay::float::simplify::SimplifyShape;
    use kurbo::{BezPath, Cap, Join, PathEl, Point, Stroke, StrokeOpts};
    let mut line = BezPath::new();
    for (i, p) in path.points.iter().enumerate() {
        let p = Point::new(p[0], p[1]);
        if i == 0 { line.move_to(p) } else { line.line_to(p) }
    }
    if path.closed {
        line.close_path();
    }
    let style = Stroke::new(2.0 * RADIUS).with_join(Join::Round).with_caps(Cap::Round);
    let outline = kurbo::stroke(line, &style, &StrokeOpts::default(), 0.5 * CHORD);
    let mut contours: Vec<Vec<[f64; 2]>> = Vec::new();
    kurbo::flatten(outline, 0.5 * CHORD, |e| match e {
        PathEl::MoveTo(p) => contours.push(vec![[p.x, p.y]]),
        PathEl::LineTo(p) => {
            if let Some(c) = contours.last_mut() {
                c.push([p.x, p.y]);
            }
        }
        _ => {}
    });
    let shapes = contours.simplify_shape(FillRule::NonZero);
    Some(Box::new(move || rings(shapes.into_iter().flatten())))
}

fn geo_buffer(path: &Path) -> Option<Finish> {
    use geo::buffer::{BufferStyle, LineCap, LineJoin};
    use geo::{Area, Buffer, Coord, CoordsIter, LineString};
    let line = LineString::new(closed_points(path).iter().map(|p| Coord { x: p[0], y: p[1] }).collect());
    let style =
        BufferStyle::new(RADIUS).line_join(LineJoin::Round(step() / 1.5)).line_cap(LineCap::Round(step() / 1.5));
    let region = line.buffer_with_style(style);
    Some(Box::new(move || Found {
        loops: region.iter().map(|p| 1 + p.interiors().len()).sum(),
        pieces: region.coords_count(),
        area: region.unsigned_area(),
    }))
}

/// Parallels to both sides with true arcs. Open paths get no caps: their area is left out.
fn cavalier(path: &Path) -> Option<Finish> {
    use cavalier_contours::polyline::{PlineOffsetOptions, PlineSource, PlineSourceMut, Polyline};
    let mut line = Polyline::new();
    line.set_is_closed(path.closed);
    for p in &path.points {
        line.add(p[0], p[1], 0.0);
    }
    let options = PlineOffsetOptions { handle_self_intersects: !path.closed, ..Default::default() };
    let sides = [RADIUS, -RADIUS].map(|d| line.parallel_offset_opt(d, &options));
    let closed = path.closed;
    Some(Box::new(move || {
        let areas: Vec<f64> = sides.iter().flatten().map(PlineSource::area).map(f64::abs).collect();
        let area = areas.iter().fold(0.0, |a: f64, b| (a - b).abs());
        Found {
            loops: areas.len(),
            pieces: sides.iter().flatten().map(|p| p.vertex_count()).sum(),
            area: if closed { area } else { f64::NAN },
        }
    }))
}
