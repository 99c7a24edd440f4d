//! Which subpaths does the `d` attribute of an SVG path describe?
//!
//! The tokens are `svgtypes`'; the meaning is SVG 1.1, chapter 8.3 and, for elliptical arcs, appendix
//! F.6.5 (from ends to centre) and F.6.6 (radii out of range). Nothing is flattened here.

use std::f64::consts::TAU;

use kurbo::{Point, Vec2};
use svgtypes::{PathParser, PathSegment};

use super::outline::{Ellipse, Outline, Piece, Shape};

/// The subpaths of a path, and how many of its arcs had radii too small for their ends.
#[derive(Clone, Debug, Default, PartialEq)]
pub(super) struct PathData {
    pub(super) outlines: Vec<Outline>,
    pub(super) enlarged: usize,
}

/// The subpaths of path data.
///
/// # Errors
/// The first error of the data, with its position in characters from 1.
pub(super) fn parse_path(data: &str) -> Result<PathData, svgtypes::Error> {
    let mut pen = Pen::default();
    let trimmed = data.trim();
    if trimmed.is_empty() || trimmed == "none" {
        return Ok(PathData::default());
    }
    for token in PathParser::from(data) {
        pen.follow(token?);
    }
    pen.lift();
    Ok(pen.done)
}

/// The last control point, which `S` and `T` reflect.
#[derive(Clone, Copy, Default)]
enum Control {
    #[default]
    None,
    Cubic(Point),
    Quad(Point),
}

/// Where the pen stands while it draws.
#[derive(Default)]
struct Pen {
    at: Point,
    /// Start of the subpath: where `Z` returns to.
    home: Point,
    open: Option<Outline>,
    control: Control,
    done: PathData,
}

impl Pen {
    fn lift(&mut self) {
        self.done.outlines.extend(self.open.take().filter(|o| !o.pieces.is_empty()));
    }

    fn draw(&mut self, shape: Shape, end: Point) {
        let at = self.at;
        self.open.get_or_insert_with(|| Outline::new(at)).pieces.push(Piece { shape, end });
        self.at = end;
        self.control = match shape {
            Shape::Cubic(_, q) => Control::Cubic(q),
            Shape::Quad(p) => Control::Quad(p),
            Shape::Line | Shape::Ellipse(_) => Control::None,
        };
    }

    fn follow(&mut self, token: PathSegment) {
        let base = if token.is_abs() { Vec2::ZERO } else { self.at.to_vec2() };
        let point = |x: f64, y: f64| Point::new(x, y) + base;
        match token {
            PathSegment::MoveTo { x, y, .. } => {
                self.lift();
                self.at = point(x, y);
                self.home = self.at;
                self.control = Control::None;
            }
            PathSegment::LineTo { x, y, .. } => self.draw(Shape::Line, point(x, y)),
            PathSegment::HorizontalLineTo { x, .. } => {
                self.draw(Shape::Line, Point::new(x + base.x, self.at.y));
            }
            PathSegment::VerticalLineTo { y, .. } => {
                self.draw(Shape::Line, Point::new(self.at.x, y + base.y));
            }
            PathSegment::CurveTo { x1, y1, x2, y2, x, y, .. } => {
                self.draw(Shape::Cubic(point(x1, y1), point(x2, y2)), point(x, y));
            }
            PathSegment::SmoothCurveTo { x2, y2, x, y, .. } => {
                let first = if let Control::Cubic(q) = self.control { self.reflected(q) } else { self.at };
                self.draw(Shape::Cubic(first, point(x2, y2)), point(x, y));
            }
            PathSegment::Quadratic { x1, y1, x, y, .. } => {
                self.draw(Shape::Quad(point(x1, y1)), point(x, y));
            }
            PathSegment::SmoothQuadratic { x, y, .. } => {
                let middle = if let Control::Quad(p) = self.control { self.reflected(p) } else { self.at };
                self.draw(Shape::Quad(middle), point(x, y));
            }
            PathSegment::EllipticalArc { rx, ry, x_axis_rotation, large_arc, sweep, x, y, .. } => {
                let turn = x_axis_rotation.rem_euclid(360.0).to_radians();
                self.arc(Vec2::new(rx, ry), turn, ArcChoice { large: large_arc, sweep }, point(x, y));
            }
            PathSegment::ClosePath { .. } => self.close(),
        }
    }

    fn reflected(&self, control: Point) -> Point {
        self.at + (self.at - control)
    }

    fn close(&mut self) {
        if let Some(open) = &mut self.open {
            open.closed = true;
        }
        self.lift();
        self.at = self.home;
        self.control = Control::None;
    }

    /// F.6.2: ends that coincide leave the segment out, a radius of zero makes a line.
    fn arc(&mut self, radii: Vec2, turn: f64, choice: ArcChoice, end: Point) {
        if end == self.at {
            self.control = Control::None;
            return;
        }
        match ellipse_through(self.at, end, radii, turn, choice) {
            Some((ellipse, enlarged)) => {
                self.done.enlarged += usize::from(enlarged);
                self.draw(Shape::Ellipse(ellipse), end);
            }
            None => self.draw(Shape::Line, end),
        }
    }
}

/// Which of the four arcs between two points.
#[derive(Clone, Copy, Debug)]
struct ArcChoice {
    large: bool,
    sweep: bool,
}

/// The elliptical arc between two points (F.6.5, F.6.6), and whether its radii had to be enlarged by
/// more than rounding. `None` when it is a line.
fn ellipse_through(
    from: Point,
    to: Point,
    radii: Vec2,
    turn: f64,
    choice: ArcChoice,
) -> Option<(Ellipse, bool)> {
    let (mut rx, mut ry) = (radii.x.abs(), radii.y.abs());
    if rx <= 0.0 || ry <= 0.0 {
        return None;
    }
    let (sin, cos) = turn.sin_cos();
    let half = (from - to) * 0.5;
    // F.6.5.1: the start seen from the middle, along the ellipse's axes.
    let p = Vec2::new(cos * half.x + sin * half.y, cos * half.y - sin * half.x);
    // F.6.6.2: radii that cannot reach are scaled up until they just do.
    let reach = (p.x / rx).hypot(p.y / ry);
    if reach > 1.0 {
        (rx, ry) = (rx * reach, ry * reach);
    }
    // F.6.5.2, with the radicand (1 - reach^2) / reach^2 in a form that neither overflows nor cancels.
    let over = ((1.0 - reach) * (1.0 + reach)).max(0.0).sqrt() / reach;
    let side = if choice.large == choice.sweep { -1.0 } else { 1.0 };
    let c = Vec2::new(rx * (p.y / ry), -ry * (p.x / rx)) * (side * over);
    let center = from.midpoint(to) + Vec2::new(cos * c.x - sin * c.y, sin * c.x + cos * c.y);
    // F.6.5.5 and F.6.5.6: both ends on the unit circle.
    let a = Vec2::new((p.x - c.x) / rx, (p.y - c.y) / ry);
    let b = Vec2::new((-p.x - c.x) / rx, (-p.y - c.y) / ry);
    let mut swept = a.cross(b).atan2(a.dot(b));
    if choice.sweep && swept <= 0.0 {
        swept += TAU;
    } else if !choice.sweep && swept >= 0.0 {
        swept -= TAU;
    }
    let ellipse = Ellipse {
        center,
        u: Vec2::new(cos, sin) * rx,
        v: Vec2::new(-sin, cos) * ry,
        start: a.atan2(),
        sweep: swept,
    };
    Some((ellipse, reach > 1.0 + 1e-6))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn only(data: &str) -> Outline {
        let mut outlines = parse_path(data).unwrap().outlines;
        assert_eq!(outlines.len(), 1, "{data}");
        outlines.remove(0)
    }

    fn ends(outline: &Outline) -> Vec<(f64, f64)> {
        std::iter::once(outline.start)
            .chain(outline.pieces.iter().map(|p| p.end))
            .map(|p| (p.x, p.y))
            .collect()
    }

    fn ellipse(data: &str) -> Ellipse {
        match only(data).pieces[0].shape {
            Shape::Ellipse(e) => e,
            other => panic!("{data}: {other:?}"),
        }
    }

    /// SVG 1.1, F.6.5, equations 1 to 6, worked by hand: the four arcs between two points.
    #[test]
    fn four_arcs_between_two_points_have_their_centres_and_angles() {
        let (one, two) = ((6.717_974_202_37, 6.383_597_519_05), (5.282_025_797_63, -2.383_597_519_05));
        for (flags, center, start, sweep) in [
            ("0 1", one, Some(-154.286_327_043), 84.057_042_232_3),
            ("1 1", two, Some(109.770_715_19), 275.942_957_768),
            ("0 0", two, None, -84.057_042_232_3),
            ("1 0", one, None, -275.942_957_768),
        ] {
            let e = ellipse(&format!("M0 0 A 10 5 30 {flags} 12 4"));
            assert!((e.center - Point::new(center.0, center.1)).hypot() < 1e-9, "{flags}: {e:?}");
            assert!((e.sweep.to_degrees() - sweep).abs() < 1e-8, "{flags}: {}", e.sweep.to_degrees());
            if let Some(start) = start {
                assert!((e.start.to_degrees() - start).abs() < 1e-8, "{flags}: {}", e.start.to_degrees());
            }
            let at = |t: f64| e.center + e.u * t.cos() + e.v * t.sin();
            assert!((at(e.start) - Point::ORIGIN).hypot() < 1e-12);
            assert!((at(e.start + e.sweep) - Point::new(12.0, 4.0)).hypot() < 1e-12);
        }
    }

    #[test]
    fn radii_too_small_are_scaled_up_and_counted() {
        let data = parse_path("M0 0 A 1 1 0 0 1 10 0").unwrap();
        assert_eq!(data.enlarged, 1);
        let e = ellipse("M0 0 A 1 1 0 0 1 10 0");
        assert!((e.center - Point::new(5.0, 0.0)).hypot() < 1e-12 && (e.u.hypot() - 5.0).abs() < 1e-12);
        assert_eq!(parse_path("M0 0 A 5 5 0 0 1 10 0").unwrap().enlarged, 0);
    }

    #[test]
    fn quarter_arc_runs_from_minus_ninety_degrees_to_zero() {
        let e = ellipse("M0 0 A 5 5 0 0 1 5 5");
        assert!((e.center - Point::new(0.0, 5.0)).hypot() < 1e-12, "{e:?}");
        assert!((e.start.to_degrees() + 90.0).abs() < 1e-12 && (e.sweep.to_degrees() - 90.0).abs() < 1e-12);
        let negative = ellipse("M0 0 A -5 -5 0 0 1 5 5");
        assert!((negative.center - e.center).hypot() < 1e-12);
    }

    #[test]
    fn arc_without_radius_is_a_line_and_without_length_is_left_out() {
        assert_eq!(only("M0 0 A 0 5 0 0 1 5 5").pieces[0].shape, Shape::Line);
        assert_eq!(parse_path("M1 1 A 5 5 0 1 1 1 1").unwrap().outlines, vec![]);
    }

    #[test]
    fn packed_flags_and_numbers_run_together_are_told_apart() {
        let o = only("m0 0a4 4 0 01-2 .5l.5.5-3-1");
        assert_eq!(ends(&o), vec![(0.0, 0.0), (-2.0, 0.5), (-1.5, 1.0), (-4.5, 0.0)]);
    }

    #[test]
    fn every_command_has_its_relative_form() {
        let a = only("M1 1 L2 2 H5 V7 C6 8 7 9 8 8 S9 6 10 8 Q11 9 12 8 T14 8 A2 2 0 0 0 16 8 Z");
        let r = only("m1 1 l1 1 h3 v5 c1 1 2 2 3 1 s1 -2 2 0 q1 1 2 0 t2 0 a2 2 0 0 0 2 0 z");
        assert_eq!(a, r);
        assert!(a.closed);
        assert_eq!(a.pieces[4].shape, Shape::Cubic(Point::new(9.0, 7.0), Point::new(9.0, 6.0)));
        assert_eq!(a.pieces[6].shape, Shape::Quad(Point::new(13.0, 7.0)));
    }

    #[test]
    fn smooth_command_after_another_kind_reflects_nothing() {
        let o = only("M0 0 L5 5 S6 6 7 5");
        assert_eq!(o.pieces[1].shape, Shape::Cubic(Point::new(5.0, 5.0), Point::new(6.0, 6.0)));
        let o = only("M0 0 C1 1 2 2 5 5 T7 5");
        assert_eq!(o.pieces[1].shape, Shape::Quad(Point::new(5.0, 5.0)));
    }

    #[test]
    fn drawing_on_after_a_closing_starts_where_the_subpath_began() {
        let data = parse_path("m5 5 h5 v5 z l-1 -1").unwrap();
        assert_eq!(data.outlines.len(), 2);
        assert_eq!(ends(&data.outlines[1]), vec![(5.0, 5.0), (4.0, 4.0)]);
        assert!(data.outlines[0].closed && !data.outlines[1].closed);
    }

    #[test]
    fn broken_data_is_an_error_with_its_position() {
        assert_eq!(parse_path("M0 0 L1e999 0"), Err(svgtypes::Error::InvalidNumber(7)));
        for data in ["L1 1", "M0 0 X", "M0 0 L1", "M0 0 A1 1 0 2 1 3 3", "M NaN 0", "M0 0 L inf 0"] {
            assert!(parse_path(data).is_err(), "{data}");
        }
        assert_eq!(parse_path("  ").unwrap(), PathData::default());
        assert_eq!(parse_path("none").unwrap(), PathData::default());
    }
}
