//! A circular arc with any sweep up to a full turn.
//!
//! ```text
//!            end
//!          .-'  \        centre, radius AND both ends are kept, because a drawing or a program
//!        .'      | sweep gives them all and they rarely agree to the last digit. How far they
//!       start    |       disagree is checked once, on construction, and remembered (`residual`).
//!         \   centre
//! ```
//!
//! An arc of three points or of a bulge loses its radius at large coordinates; this one does not.

use std::f64::consts::{PI, TAU};

use kurbo::{Point, Rect, Vec2};

use super::Nearest;

/// Sense of travel round a centre, seen with x to the right and y up.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Turn {
    /// Counter-clockwise (G3).
    Left,
    /// Clockwise (G2).
    Right,
}

impl Turn {
    /// The opposite sense.
    #[must_use]
    pub const fn reversed(self) -> Self {
        match self {
            Self::Left => Self::Right,
            Self::Right => Self::Left,
        }
    }

    /// +1 for counter-clockwise, -1 for clockwise.
    #[must_use]
    pub const fn sign(self) -> f64 {
        match self {
            Self::Left => 1.0,
            Self::Right => -1.0,
        }
    }
}

/// Why three points and a sense of travel make no arc.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ArcError {
    /// A coordinate, radius or sweep is not a finite number.
    NotFinite,
    /// The radius is zero: the start or the end is the centre.
    NoRadius,
    /// Start and end differ in their distance from the centre by `off`, more than was allowed.
    OffCircle {
        /// Distance of the start from the centre minus distance of the end from the centre.
        off: f64,
    },
    /// The chord is longer than twice the radius: no circle of that radius joins the ends.
    ChordTooLong {
        /// Length of the chord.
        chord: f64,
    },
}

impl std::fmt::Display for ArcError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::NotFinite => write!(f, "a number of the arc is not finite"),
            Self::NoRadius => write!(f, "the arc has no radius"),
            Self::OffCircle { off } => {
                write!(f, "the arc's ends differ by {:.6} in their distance from the center", off.abs())
            }
            Self::ChordTooLong { chord } => {
                write!(f, "the ends are {chord:.6} apart, more than twice the radius")
            }
        }
    }
}

impl std::error::Error for ArcError {}

/// A circular arc. Lengths in the unit of the drawing, angles in radians.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Arc {
    center: Point,
    radius: f64,
    start: Point,
    end: Point,
    sweep: f64,
}

/// Signed angle from `a` to `b` in the sense of `turn`, in (0, 2 pi] for left, [-2 pi, 0) for right.
fn angle_between(a: Vec2, b: Vec2, turn: Turn) -> f64 {
    let raw = a.cross(b).atan2(a.dot(b));
    match turn {
        Turn::Left if raw <= 0.0 => raw + TAU,
        Turn::Right if raw >= 0.0 => raw - TAU,
        _ => raw,
    }
}

impl Arc {
    /// Arc about `center` from `start` to `end`. Ends that are equal make a full turn.
    ///
    /// The radius is the mean of both ends' distances from the centre.
    ///
    /// # Errors
    /// [`ArcError::OffCircle`] when those distances differ by more than `allowed` (a length).
    pub fn from_center(
        center: Point,
        start: Point,
        end: Point,
        turn: Turn,
        allowed: f64,
    ) -> Result<Self, ArcError> {
        let (a, b) = (start - center, end - center);
        let (ra, rb) = (a.hypot(), b.hypot());
        if !(ra.is_finite() && rb.is_finite() && center.is_finite()) {
            return Err(ArcError::NotFinite);
        }
        if ra <= 0.0 || rb <= 0.0 {
            return Err(ArcError::NoRadius);
        }
        if (ra - rb).abs() > allowed {
            return Err(ArcError::OffCircle { off: ra - rb });
        }
        let sweep = if start == end { turn.sign() * TAU } else { angle_between(a, b, turn) };
        Ok(Self { center, radius: 0.5 * (ra + rb), start, end, sweep })
    }

    /// Arc about `center` that starts at polar angle `from` and sweeps `sweep` radians (positive:
    /// counter-clockwise; cut to one turn by the caller).
    ///
    /// # Errors
    /// When a number is not finite, the radius is not positive or the sweep is zero or over a turn.
    pub fn from_angles(center: Point, radius: f64, from: f64, sweep: f64) -> Result<Self, ArcError> {
        if !(center.is_finite() && radius.is_finite() && from.is_finite() && sweep.is_finite())
            || sweep.abs() > TAU + 1e-9
        {
            return Err(ArcError::NotFinite);
        }
        if radius <= 0.0 || sweep == 0.0 {
            return Err(ArcError::NoRadius);
        }
        let sweep = sweep.clamp(-TAU, TAU);
        let start = center + Vec2::from_angle(from) * radius;
        let end = if sweep.abs() >= TAU { start } else { center + Vec2::from_angle(from + sweep) * radius };
        Ok(Self { center, radius, start, end, sweep })
    }

    /// Arc from `start` to `end` with a given bulge, the tangent of a quarter of the included angle,
    /// negative for clockwise (DXF reference, LWPOLYLINE).
    ///
    /// # Errors
    /// When a number is not finite, the bulge is zero or both ends coincide.
    pub fn from_bulge(start: Point, end: Point, bulge: f64) -> Result<Self, ArcError> {
        let chord = end - start;
        let length = chord.hypot();
        if !(length.is_finite() && bulge.is_finite()) {
            return Err(ArcError::NotFinite);
        }
        if length <= 0.0 || bulge == 0.0 {
            return Err(ArcError::NoRadius);
        }
        let radius = 0.25 * length * (bulge.abs() + 1.0 / bulge.abs());
        // Distance of the centre to the left of the chord: (1 - b^2) / (4 b) of its length.
        let height = 0.25 * (1.0 / bulge - bulge);
        let center = start + chord * 0.5 + Vec2::new(-chord.y, chord.x) * height;
        if !(radius.is_finite() && center.is_finite()) {
            return Err(ArcError::NotFinite);
        }
        Ok(Self { center, radius, start, end, sweep: 4.0 * bulge.atan() })
    }

    /// Arc of radius `radius` from `start` to `end`; `large` takes the way of more than half a turn.
    ///
    /// # Errors
    /// [`ArcError::ChordTooLong`] when the chord exceeds twice the radius by more than `allowed`.
    pub fn from_radius(
        start: Point,
        end: Point,
        radius: f64,
        turn: Turn,
        large: bool,
        allowed: f64,
    ) -> Result<Self, ArcError> {
        let chord = end - start;
        let length = chord.hypot();
        if !(length.is_finite() && radius.is_finite()) {
            return Err(ArcError::NotFinite);
        }
        if length <= 0.0 || radius <= 0.0 {
            return Err(ArcError::NoRadius);
        }
        let half = 0.5 * length;
        if half > radius + 0.5 * allowed {
            return Err(ArcError::ChordTooLong { chord: length });
        }
        let height = ((radius - half) * (radius + half)).max(0.0).sqrt();
        let left = Vec2::new(-chord.y, chord.x) / length;
        let side = if large { -turn.sign() } else { turn.sign() };
        let center = start + chord * 0.5 + left * (side * height);
        let mut arc = Self::from_center(center, start, end, turn, f64::INFINITY)?;
        arc.radius = radius.max(half);
        Ok(arc)
    }

    /// Whole circle about `center` that starts and ends at `start`.
    ///
    /// # Errors
    /// When the radius is not positive and finite.
    pub fn full_circle(center: Point, start: Point, turn: Turn) -> Result<Self, ArcError> {
        Self::from_center(center, start, start, turn, 0.0)
    }

    /// An arc whose parts the caller vouches for: made by this crate from another arc.
    pub(crate) const fn from_parts(center: Point, radius: f64, start: Point, end: Point, sweep: f64) -> Self {
        Self { center, radius, start, end, sweep }
    }

    /// The centre.
    #[must_use]
    pub const fn center(&self) -> Point {
        self.center
    }

    /// The radius, positive.
    #[must_use]
    pub const fn radius(&self) -> f64 {
        self.radius
    }

    /// Where it starts.
    #[must_use]
    pub const fn start(&self) -> Point {
        self.start
    }

    /// Where it ends.
    #[must_use]
    pub const fn end(&self) -> Point {
        self.end
    }

    /// Angle swept, radians, positive counter-clockwise, at most a full turn either way.
    #[must_use]
    pub const fn sweep(&self) -> f64 {
        self.sweep
    }

    /// The sense of travel.
    #[must_use]
    pub fn turn(&self) -> Turn {
        if self.sweep < 0.0 { Turn::Right } else { Turn::Left }
    }

    /// Greatest distance of an end from the circle: how much centre, radius and ends disagree.
    #[must_use]
    pub fn residual(&self) -> f64 {
        let off = |p: Point| ((p - self.center).hypot() - self.radius).abs();
        off(self.start).max(off(self.end))
    }

    /// The same arc with its centre moved so that both ends lie on its circle to the last digit. Where
    /// it sweeps more than half a turn it becomes two such arcs. None of it moves by more than about
    /// twice the residual.
    ///
    /// The new centre is the point on the chord's bisector nearest to the old one.
    #[must_use]
    pub fn seated(&self) -> (Self, Option<Self>) {
        if self.sweep.abs() <= PI {
            return (self.reseated(), None);
        }
        let (a, b) = (self.part(0.0, 0.5), self.part(0.5, 1.0));
        (a.reseated(), Some(b.reseated()))
    }

    /// One arc of at most half a turn about a centre on its chord's bisector.
    fn reseated(&self) -> Self {
        let chord = self.end - self.start;
        let length2 = chord.hypot2();
        if length2 <= 0.0 {
            return *self;
        }
        let middle = self.start.midpoint(self.end);
        let along = chord * ((self.center - middle).dot(chord) / length2);
        let center = self.center - along;
        let a = self.start - center;
        let radius = a.hypot();
        let sweep = angle_between(a, self.end - center, self.turn());
        if !(center.is_finite() && radius > 0.0) || sweep.abs() > 1.5 * PI {
            return *self;
        }
        Self { center, radius, sweep, ..*self }
    }

    /// Length along the arc.
    #[must_use]
    pub fn length(&self) -> f64 {
        self.radius * self.sweep.abs()
    }

    /// Unit vector from the centre at parameter `t`.
    #[must_use]
    pub fn radial(&self, t: f64) -> Vec2 {
        let v = (self.start - self.center).normalize();
        let (s, c) = (t * self.sweep).sin_cos();
        Vec2::new(c * v.x - s * v.y, s * v.x + c * v.y)
    }

    /// Point at fraction `t` of the length; the kept ends themselves at 0 and 1.
    #[must_use]
    pub fn point_at(&self, t: f64) -> Point {
        if t <= 0.0 {
            self.start
        } else if t >= 1.0 {
            self.end
        } else {
            self.center + self.radial(t) * self.radius
        }
    }

    /// Unit direction of travel at parameter `t`.
    #[must_use]
    pub fn tangent_at(&self, t: f64) -> Vec2 {
        let r = if t >= 1.0 { (self.end - self.center).normalize() } else { self.radial(t.max(0.0)) };
        Vec2::new(-r.y, r.x) * self.sweep.signum()
    }

    /// The same arc travelled the other way.
    #[must_use]
    pub const fn reversed(&self) -> Self {
        Self { start: self.end, end: self.start, sweep: -self.sweep, ..*self }
    }

    /// Does the ray from the centre along `v` meet the arc? Ends count. Two cross products, no angle.
    #[must_use]
    pub fn faces(&self, v: Vec2) -> bool {
        let (a, b) = (self.start - self.center, self.end - self.center);
        let (a, b) = if self.sweep < 0.0 { (b, a) } else { (a, b) };
        let sweep = self.sweep.abs();
        if sweep >= TAU {
            true
        } else if sweep <= PI {
            // At exactly half a turn the two ends leave one half-plane test to decide.
            a.cross(v) >= 0.0 && v.cross(b) >= 0.0 && (a.dot(v) >= 0.0 || b.dot(v) >= 0.0 || sweep > 0.5 * PI)
        } else {
            a.cross(v) >= 0.0 || v.cross(b) >= 0.0
        }
    }

    /// Parameter of the direction `v` from the centre: in [0, 1] when the arc faces it, else beyond
    /// the nearer end by the shorter way round.
    #[must_use]
    pub fn parameter_of(&self, v: Vec2) -> f64 {
        let a = self.start - self.center;
        let mut angle = self.sweep.signum() * a.cross(v).atan2(a.dot(v));
        let sweep = self.sweep.abs();
        // The middle of the part that is not swept divides "after the end" from "before the start".
        let divide = 0.5 * (sweep + TAU);
        if angle < divide - TAU {
            angle += TAU;
        }
        if angle > divide {
            angle -= TAU;
        }
        angle / sweep
    }

    /// The point of the arc nearest to `p`. For the centre itself, the start.
    #[must_use]
    pub fn nearest(&self, p: Point) -> Nearest {
        let v = p - self.center;
        let d = v.hypot();
        if d > 0.0 && self.faces(v) {
            let at = self.center + v * (self.radius / d);
            return Nearest {
                at,
                t: self.parameter_of(v).clamp(0.0, 1.0),
                distance: (d - self.radius).abs(),
            };
        }
        let (ds, de) = ((p - self.start).hypot(), (p - self.end).hypot());
        if ds <= de {
            Nearest { at: self.start, t: 0.0, distance: ds }
        } else {
            Nearest { at: self.end, t: 1.0, distance: de }
        }
    }

    /// Smallest box round the arc.
    #[must_use]
    pub fn bounds(&self) -> Rect {
        let mut b = Rect::from_points(self.start, self.end);
        for axis in [Vec2::new(1.0, 0.0), Vec2::new(0.0, 1.0), Vec2::new(-1.0, 0.0), Vec2::new(0.0, -1.0)] {
            if self.faces(axis) {
                b = b.union_pt(self.center + axis * self.radius);
            }
        }
        b
    }

    /// The part between parameters `from` and `to`, `from` < `to`.
    #[must_use]
    pub fn part(&self, from: f64, to: f64) -> Self {
        Self { start: self.point_at(from), end: self.point_at(to), sweep: self.sweep * (to - from), ..*self }
    }

    /// Twice the area between the chord and the arc, positive to the right of a left turn.
    #[must_use]
    pub fn twice_cap_area(&self) -> f64 {
        self.radius * self.radius * sweep_minus_sine(self.sweep)
    }
}

/// x - sin x without cancellation: the series below 0.5 rad, where the difference loses digits.
fn sweep_minus_sine(x: f64) -> f64 {
    if x.abs() > 0.5 {
        return x - x.sin();
    }
    let x2 = x * x;
    let mut term = x * x2 / 6.0;
    let mut sum = term;
    for k in [4.0, 6.0, 8.0, 10.0, 12.0, 14.0] {
        term *= -x2 / (k * (k + 1.0));
        sum += term;
    }
    sum
}
