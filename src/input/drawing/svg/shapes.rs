//! Which outline does a basic shape of SVG have? (SVG 1.1, chapter 9.)
//!
//! Starts and senses are the standard's own: a rectangle begins at the end of its upper left corner
//! and runs, as a circle does, in the positive angle direction (clockwise on the screen).

use std::f64::consts::{FRAC_PI_2, PI, TAU};

use kurbo::{Point, Rect, Vec2};

use super::outline::{Ellipse, Outline, Piece, Shape};

/// Whole ellipse about a centre; `None` without a size.
pub(super) fn ellipse(center: Point, rx: f64, ry: f64) -> Option<Outline> {
    if rx <= 0.0 || ry <= 0.0 {
        return None;
    }
    let start = center + Vec2::new(rx, 0.0);
    let ellipse = Ellipse { center, u: Vec2::new(rx, 0.0), v: Vec2::new(0.0, ry), start: 0.0, sweep: TAU };
    let pieces = vec![Piece { shape: Shape::Ellipse(ellipse), end: start }];
    Some(Outline { start, pieces, closed: true })
}

/// Rectangle with elliptical corners of these radii, cut to half its sides; `None` without a size.
pub(super) fn rect(r: Rect, rx: f64, ry: f64) -> Option<Outline> {
    if r.width() <= 0.0 || r.height() <= 0.0 {
        return None;
    }
    let (rx, ry) = (rx.min(0.5 * r.width()), ry.min(0.5 * r.height()));
    if rx <= 0.0 || ry <= 0.0 {
        let corners = [(r.x0, r.y0), (r.x1, r.y0), (r.x1, r.y1), (r.x0, r.y1)];
        return polygon(&corners.map(Point::from), true);
    }
    let mut outline = Outline::new(Point::new(r.x0 + rx, r.y0));
    let mut corner = |line_end: Point, center: Point, start: f64, end: Point| {
        outline.line_to(line_end);
        let (u, v) = (Vec2::new(rx, 0.0), Vec2::new(0.0, ry));
        let shape = Shape::Ellipse(Ellipse { center, u, v, start, sweep: FRAC_PI_2 });
        outline.pieces.push(Piece { shape, end });
    };
    let (x0, x1, y0, y1) = (r.x0 + rx, r.x1 - rx, r.y0 + ry, r.y1 - ry);
    corner(Point::new(x1, r.y0), Point::new(x1, y0), -FRAC_PI_2, Point::new(r.x1, y0));
    corner(Point::new(r.x1, y1), Point::new(x1, y1), 0.0, Point::new(x1, r.y1));
    corner(Point::new(x0, r.y1), Point::new(x0, y1), FRAC_PI_2, Point::new(r.x0, y1));
    corner(Point::new(r.x0, y0), Point::new(x0, y0), PI, Point::new(x0, r.y0));
    outline.closed = true;
    Some(outline)
}

/// Chain of lines through points; `None` with less than two.
pub(super) fn polygon(points: &[Point], closed: bool) -> Option<Outline> {
    let (first, rest) = points.split_first()?;
    let mut outline = Outline::new(*first);
    for p in rest {
        outline.line_to(*p);
    }
    outline.closed = closed;
    (!rest.is_empty()).then_some(outline)
}
