//! One piece of a contour or a path: a straight line or a circular arc, and nothing else.

use kurbo::{Affine, Point, Rect, Vec2};

use super::{Arc, ArcError, Line, Nearest};

/// A straight line or a circular arc, with a direction of travel.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Segment {
    /// Straight.
    Line(Line),
    /// Circular.
    Arc(Arc),
}

/// A segment moved sideways by a distance.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Offset {
    /// The parallel segment.
    Segment(Segment),
    /// The arc's radius was used up: everything within reach of the inner side is covered, there is
    /// no parallel arc.
    Collapsed {
        /// Centre of the arc that collapsed.
        center: Point,
    },
}

impl From<Line> for Segment {
    fn from(line: Line) -> Self {
        Self::Line(line)
    }
}

impl From<Arc> for Segment {
    fn from(arc: Arc) -> Self {
        Self::Arc(arc)
    }
}

impl Segment {
    /// Straight segment between two points.
    #[must_use]
    pub const fn line(start: Point, end: Point) -> Self {
        Self::Line(Line { start, end })
    }

    /// Where it starts.
    #[must_use]
    pub const fn start(&self) -> Point {
        match self {
            Self::Line(l) => l.start,
            Self::Arc(a) => a.start(),
        }
    }

    /// Where it ends.
    #[must_use]
    pub const fn end(&self) -> Point {
        match self {
            Self::Line(l) => l.end,
            Self::Arc(a) => a.end(),
        }
    }

    /// Length along the segment.
    #[must_use]
    pub fn length(&self) -> f64 {
        match self {
            Self::Line(l) => l.length(),
            Self::Arc(a) => a.length(),
        }
    }

    /// Point at fraction `t` of the length.
    #[must_use]
    pub fn point_at(&self, t: f64) -> Point {
        match self {
            Self::Line(l) => l.point_at(t),
            Self::Arc(a) => a.point_at(t),
        }
    }

    /// Unit direction of travel at parameter `t`; zero where a line is a point.
    #[must_use]
    pub fn tangent_at(&self, t: f64) -> Vec2 {
        match self {
            Self::Line(l) => l.tangent(),
            Self::Arc(a) => a.tangent_at(t),
        }
    }

    /// Unit normal to the left of travel at parameter `t`.
    #[must_use]
    pub fn left_normal_at(&self, t: f64) -> Vec2 {
        let d = self.tangent_at(t);
        Vec2::new(-d.y, d.x)
    }

    /// Signed curvature, 1/length: positive turning left, zero for a line.
    #[must_use]
    pub fn curvature(&self) -> f64 {
        match self {
            Self::Line(_) => 0.0,
            Self::Arc(a) => a.sweep().signum() / a.radius(),
        }
    }

    /// The same segment travelled the other way.
    #[must_use]
    pub const fn reversed(&self) -> Self {
        match self {
            Self::Line(l) => Self::Line(Line { start: l.end, end: l.start }),
            Self::Arc(a) => Self::Arc(a.reversed()),
        }
    }

    /// Smallest box round the segment.
    #[must_use]
    pub fn bounds(&self) -> Rect {
        match self {
            Self::Line(l) => Rect::from_points(l.start, l.end),
            Self::Arc(a) => a.bounds(),
        }
    }

    /// The point of the segment nearest to `p`.
    #[must_use]
    pub fn nearest(&self, p: Point) -> Nearest {
        match self {
            Self::Line(l) => l.nearest(p),
            Self::Arc(a) => a.nearest(p),
        }
    }

    /// Distance from `p`, never negative.
    #[must_use]
    pub fn distance(&self, p: Point) -> f64 {
        match self {
            Self::Line(l) => {
                let d = l.vector();
                let w = p - l.start;
                let l2 = d.hypot2();
                let s = w.dot(d);
                if s <= 0.0 || l2 <= 0.0 {
                    w.hypot()
                } else if s >= l2 {
                    (p - l.end).hypot()
                } else {
                    (d.cross(w) / l2.sqrt()).abs()
                }
            }
            Self::Arc(a) => {
                let v = p - a.center();
                let d = v.hypot();
                if d > 0.0 && a.faces(v) {
                    (d - a.radius()).abs()
                } else {
                    (p - a.start()).hypot().min((p - a.end()).hypot())
                }
            }
        }
    }

    /// The part between parameters `from` and `to`, `from` < `to`.
    #[must_use]
    pub fn part(&self, from: f64, to: f64) -> Self {
        match self {
            Self::Line(l) => Self::line(l.point_at(from), l.point_at(to)),
            Self::Arc(a) => Self::Arc(a.part(from, to)),
        }
    }

    /// Twice this segment's share of the area round `origin`: summed over a closed loop and halved it
    /// is the enclosed area, positive when counter-clockwise. Exact for arcs.
    #[must_use]
    pub fn twice_area_about(&self, origin: Point) -> f64 {
        let chord = (self.start() - origin).cross(self.end() - origin);
        match self {
            Self::Line(_) => chord,
            Self::Arc(a) => chord + a.twice_cap_area(),
        }
    }

    /// The parallel segment at distance `left` to the left of travel (negative: to the right).
    ///
    /// Not suitable for joining: corners are the caller's.
    #[must_use]
    pub fn offset(&self, left: f64) -> Offset {
        match self {
            Self::Line(l) => {
                let d = l.tangent();
                let n = Vec2::new(-d.y, d.x) * left;
                Offset::Segment(Self::line(l.start + n, l.end + n))
            }
            Self::Arc(a) => {
                let radius = a.radius() - left * a.sweep().signum();
                if radius <= 0.0 {
                    return Offset::Collapsed { center: a.center() };
                }
                let at = |p: Point| {
                    let v = p - a.center();
                    a.center() + v * (radius / v.hypot())
                };
                let (start, end) = (at(a.start()), at(a.end()));
                Offset::Segment(Self::Arc(Arc::from_parts(a.center(), radius, start, end, a.sweep())))
            }
        }
    }

    /// The segment under a map that keeps shapes (shift, turn, mirror, equal scale).
    ///
    /// # Errors
    /// For an arc under a map that would make it an ellipse: [`ArcError::OffCircle`].
    pub fn mapped(&self, map: Affine) -> Result<Self, ArcError> {
        match self {
            Self::Line(l) => Ok(Self::line(map * l.start, map * l.end)),
            Self::Arc(a) => {
                let [xx, xy, yx, yy, ..] = map.as_coeffs();
                let (sx, sy) = (xx.hypot(xy), yx.hypot(yy));
                let skew = (xx * yx + xy * yy).abs();
                if (sx - sy).abs() > 1e-12 * sx.max(sy) || skew > 1e-12 * sx * sy {
                    return Err(ArcError::OffCircle { off: (sx - sy) * a.radius() });
                }
                let sweep = if map.determinant() < 0.0 { -a.sweep() } else { a.sweep() };
                Ok(Self::Arc(Arc::from_parts(
                    map * a.center(),
                    a.radius() * sx,
                    map * a.start(),
                    map * a.end(),
                    sweep,
                )))
            }
        }
    }

    /// True when every number of it is finite.
    #[must_use]
    pub fn is_finite(&self) -> bool {
        let ends = self.start().is_finite() && self.end().is_finite();
        match self {
            Self::Line(_) => ends,
            Self::Arc(a) => ends && a.center().is_finite() && a.radius().is_finite() && a.sweep().is_finite(),
        }
    }
}
