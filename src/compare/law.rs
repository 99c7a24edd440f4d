//! How far is a running point from a line, a point or a circle, as a function of the way it has run?
//!
//! A *course* is a line or an arc with a point running along it at unit speed; `s` is the way run. Along
//! a course every distance that this room needs is one of four closed forms:
//!
//! ```text
//! course   to a straight line      to a point                          to a circle
//! line     |a + b s|               hypot(s - s0, h)                    |hypot(s - s0, h) - R|
//! arc      |a + A cos(psi)|        sqrt((R-e)^2 + 4 R e sin^2(psi/2))  |the same - R'|
//! ```
//!
//! with psi running evenly. Their extremes, the extremes of their slopes and the places where they take
//! a value are closed forms too (elementary; law of cosines), so nothing here is sampled.

use std::f64::consts::{FRAC_PI_2, PI, TAU};

use crate::geometry::{Point, Segment, Vec2};

/// A segment run along at unit speed.
#[derive(Clone, Copy, Debug)]
pub(super) enum Course {
    /// Along a line, from `start` in direction `u`; a line that is a point has a zero direction.
    Line { start: Point, u: Vec2, length: f64 },
    /// Along an arc that starts at polar angle `from` and turns by `rate` per unit of length.
    Arc { center: Point, radius: f64, from: f64, rate: f64, length: f64 },
}

impl Course {
    pub(super) fn new(segment: &Segment) -> Self {
        match segment {
            Segment::Line(l) => Self::Line { start: l.start, u: l.tangent(), length: l.length() },
            Segment::Arc(a) => Self::Arc {
                center: a.center(),
                radius: a.radius(),
                from: (a.start() - a.center()).atan2(),
                rate: a.sweep().signum() / a.radius(),
                length: a.length(),
            },
        }
    }

    pub(super) const fn length(&self) -> f64 {
        match *self {
            Self::Line { length, .. } | Self::Arc { length, .. } => length,
        }
    }

    /// The point after the way `s`.
    pub(super) fn point(&self, s: f64) -> Point {
        match *self {
            Self::Line { start, u, .. } => start + u * s,
            Self::Arc { center, radius, from, rate, .. } => {
                center + Vec2::from_angle(from + rate * s) * radius
            }
        }
    }

    /// The component along the unit vector `w` of the way from `origin` to the running point.
    pub(super) fn component(&self, w: Vec2, origin: Point) -> Wave {
        match *self {
            Self::Line { start, u, .. } => Wave::Linear { a: w.dot(start - origin), b: w.dot(u) },
            Self::Arc { center, radius, from, rate, .. } => {
                Wave::Cosine { a: w.dot(center - origin), amplitude: radius, psi: from - w.atan2(), rate }
            }
        }
    }

    /// Distance of the running point from `q`.
    pub(super) fn distance_to(&self, q: Point) -> Wave {
        match *self {
            Self::Line { start, u, .. } => {
                let v = q - start;
                if u == Vec2::ZERO {
                    Wave::Linear { a: v.hypot(), b: 0.0 }
                } else {
                    Wave::Hypot { foot: v.dot(u), height: u.cross(v).abs() }
                }
            }
            Self::Arc { center, radius, from, rate, .. } => {
                let v = q - center;
                Wave::Polar { radius, off: v.hypot(), psi: from - v.atan2(), rate }
            }
        }
    }
}

/// One of the four closed forms of the table above, before a radius is taken off.
#[derive(Clone, Copy, Debug)]
pub(super) enum Wave {
    /// a + b s.
    Linear { a: f64, b: f64 },
    /// hypot(s - foot, height).
    Hypot { foot: f64, height: f64 },
    /// a + amplitude cos(psi + rate s).
    Cosine { a: f64, amplitude: f64, psi: f64, rate: f64 },
    /// Distance between a point on a circle and a point `off` its centre, psi + rate s apart in angle.
    Polar { radius: f64, off: f64, psi: f64, rate: f64 },
}

/// Places along a course: few, on the stack of the caller.
pub(super) type Places = Vec<f64>;

/// Adds every s in (lo, hi) at which psi + rate s equals `angle` up to whole turns of `period`.
fn angles_between(psi: f64, rate: f64, angle: f64, period: f64, lo: f64, hi: f64, out: &mut Places) {
    let (a, b) = (psi + rate * lo, psi + rate * hi);
    let (low, high) = if a < b { (a, b) } else { (b, a) };
    let mut at = angle + ((low - angle) / period).floor() * period;
    // A course is at most a turn long: at most three places of a half-turn period.
    for _ in 0..5 {
        if at > high {
            break;
        }
        let s = (at - psi) / rate;
        if lo < s && s < hi {
            out.push(s);
        }
        at += period;
    }
}

impl Wave {
    pub(super) fn value(&self, s: f64) -> f64 {
        match *self {
            Self::Linear { a, b } => a + b * s,
            Self::Hypot { foot, height } => (s - foot).hypot(height),
            Self::Cosine { a, amplitude, psi, rate } => a + amplitude * (psi + rate * s).cos(),
            Self::Polar { radius, off, psi, rate } => {
                let half = (0.5 * (psi + rate * s)).sin();
                // Not the plain law of cosines: that one loses half the digits at small distances.
                ((radius - off) * (radius - off) + 4.0 * radius * off * half * half).sqrt()
            }
        }
    }

    pub(super) fn slope(&self, s: f64) -> f64 {
        match *self {
            Self::Linear { b, .. } => b,
            Self::Hypot { foot, height } => {
                let d = (s - foot).hypot(height);
                if d > 0.0 { (s - foot) / d } else { 0.0 }
            }
            Self::Cosine { amplitude, psi, rate, .. } => -amplitude * rate * (psi + rate * s).sin(),
            Self::Polar { radius, off, psi, rate } => {
                let d = self.value(s);
                if d > 0.0 { radius * rate * off * (psi + rate * s).sin() / d } else { 0.0 }
            }
        }
    }

    /// Places strictly inside (lo, hi) where the slope is zero, or jumps from -1 to 1.
    fn turns(&self, lo: f64, hi: f64, out: &mut Places) {
        match *self {
            Self::Linear { .. } => {}
            Self::Hypot { foot, .. } => {
                if lo < foot && foot < hi {
                    out.push(foot);
                }
            }
            Self::Cosine { psi, rate, .. } | Self::Polar { psi, rate, .. } => {
                angles_between(psi, rate, 0.0, PI, lo, hi, out);
            }
        }
    }

    /// Places strictly inside (lo, hi) where the slope is greatest or least.
    pub(super) fn inflections(&self, lo: f64, hi: f64, out: &mut Places) {
        match *self {
            Self::Linear { .. } | Self::Hypot { .. } => {}
            Self::Cosine { psi, rate, .. } => angles_between(psi, rate, FRAC_PI_2, PI, lo, hi, out),
            Self::Polar { radius, off, psi, rate } => {
                // The slope is the cosine between the tangent and the ray from the point: it is
                // extreme where the ray touches the inner of the two concentric circles.
                let (low, high) = if radius < off { (radius, off) } else { (off, radius) };
                if high > 0.0 {
                    let angle = (low / high).acos();
                    angles_between(psi, rate, angle, TAU, lo, hi, out);
                    angles_between(psi, rate, -angle, TAU, lo, hi, out);
                }
            }
        }
    }

    /// Least and greatest value over [lo, hi].
    pub(super) fn range(&self, lo: f64, hi: f64) -> (f64, f64) {
        let (a, b) = (self.value(lo), self.value(hi));
        let ends = if a < b { (a, b) } else { (b, a) };
        match *self {
            Self::Linear { .. } => ends,
            Self::Hypot { foot, height } if lo < foot && foot < hi => (height, ends.1),
            Self::Hypot { .. } => ends,
            Self::Cosine { a, amplitude, psi, rate } => {
                let (top, bottom) = passes_turn(psi + rate * lo, psi + rate * hi);
                (if bottom { a - amplitude } else { ends.0 }, if top { a + amplitude } else { ends.1 })
            }
            Self::Polar { radius, off, psi, rate } => {
                let (near, far) = passes_turn(psi + rate * lo, psi + rate * hi);
                (if near { (radius - off).abs() } else { ends.0 }, if far { radius + off } else { ends.1 })
            }
        }
    }

    /// Least and greatest slope over [lo, hi].
    fn slopes(&self, lo: f64, hi: f64) -> (f64, f64) {
        let (a, b) = (self.slope(lo), self.slope(hi));
        let (mut low, mut high) = if a < b { (a, b) } else { (b, a) };
        match *self {
            // Where the point lies on the course the slope jumps: no end tells it.
            Self::Hypot { foot, height } if height <= 0.0 && lo <= foot && foot <= hi => (-1.0, 1.0),
            Self::Linear { .. } | Self::Hypot { .. } => (low, high),
            Self::Cosine { amplitude, psi, rate, .. } => {
                let (top, bottom) = passes_turn(psi + rate * lo - FRAC_PI_2, psi + rate * hi - FRAC_PI_2);
                let steepest = (amplitude * rate).abs();
                let (down, up) = if rate > 0.0 { (top, bottom) } else { (bottom, top) };
                (if down { -steepest } else { low }, if up { steepest } else { high })
            }
            Self::Polar { radius, off, .. } => {
                let mut places = Places::new();
                self.inflections(lo, hi, &mut places);
                for s in places {
                    let v = self.slope(s);
                    low = low.min(v);
                    high = high.max(v);
                }
                // Through the very point the slope jumps.
                let jumps = (radius - off).abs() <= 1e-12 * radius;
                if jumps { (-1.0, 1.0) } else { (low, high) }
            }
        }
    }

    /// Adds the places strictly inside (lo, hi) where the value is `v`.
    pub(super) fn solve(&self, v: f64, lo: f64, hi: f64, out: &mut Places) {
        let mut push = |s: f64| {
            if lo < s && s < hi {
                out.push(s);
            }
        };
        match *self {
            Self::Linear { a, b } => {
                if b != 0.0 {
                    push((v - a) / b);
                }
            }
            Self::Hypot { foot, height } => {
                if v >= height {
                    let x = ((v - height) * (v + height)).sqrt();
                    push(foot - x);
                    push(foot + x);
                }
            }
            Self::Cosine { a, amplitude, psi, rate } => {
                let c = (v - a) / amplitude;
                if c.abs() <= 1.0 {
                    angles_between(psi, rate, c.acos(), TAU, lo, hi, out);
                    angles_between(psi, rate, -c.acos(), TAU, lo, hi, out);
                }
            }
            Self::Polar { radius, off, psi, rate } => {
                let near = (radius - off).abs();
                let square = (v - near) * (v + near) / (4.0 * radius * off);
                if v >= near && square <= 1.0 {
                    let angle = 2.0 * square.sqrt().asin();
                    angles_between(psi, rate, angle, TAU, lo, hi, out);
                    angles_between(psi, rate, -angle, TAU, lo, hi, out);
                }
            }
        }
    }
}

/// Size of an angle up to whole turns.
fn turned(a: f64) -> f64 {
    (a - (a / TAU).round() * TAU).abs()
}

/// Does the angle running from `a` to `b` pass a whole turn (cosine 1), and a half (cosine -1)?
fn passes_turn(a: f64, b: f64) -> (bool, bool) {
    let (low, high) = if a < b { (a, b) } else { (b, a) };
    let whole = |shift: f64| ((high - shift) / TAU).floor() > ((low - shift) / TAU).floor();
    (whole(0.0) || at_turn(low, 0.0), whole(PI) || at_turn(low, PI))
}

/// Is `angle` exactly at `shift` up to whole turns?
fn at_turn(angle: f64, shift: f64) -> bool {
    let turns = (angle - shift) / TAU;
    (turns - turns.round()).abs() <= 0.0
}

/// A distance along a course, less a radius: `|wave - circle| - less`.
#[derive(Clone, Copy, Debug)]
pub(super) struct Law {
    pub(super) wave: Wave,
    /// Radius of the circle whose distance it is; zero for a line or a point.
    pub(super) circle: f64,
    /// What is taken off: the radius of the disc that runs along the target.
    pub(super) less: f64,
}

impl Law {
    pub(super) fn value(&self, s: f64) -> f64 {
        (self.wave.value(s) - self.circle).abs() - self.less
    }

    pub(super) fn slope(&self, s: f64) -> f64 {
        let sign = if self.wave.value(s) < self.circle { -1.0 } else { 1.0 };
        sign * self.wave.slope(s)
    }

    /// Least and greatest value over [lo, hi]: exact.
    pub(super) fn range(&self, lo: f64, hi: f64) -> (f64, f64) {
        let (a, b) = self.wave.range(lo, hi);
        let (a, b) = (a - self.circle, b - self.circle);
        let (low, high) = if a >= 0.0 {
            (a, b)
        } else if b <= 0.0 {
            (-b, -a)
        } else {
            (0.0, b.max(-a))
        };
        (low - self.less, high - self.less)
    }

    /// Bounds of the slope over [lo, hi].
    fn slopes(&self, lo: f64, hi: f64) -> (f64, f64) {
        let (a, b) = self.wave.range(lo, hi);
        let (low, high) = self.wave.slopes(lo, hi);
        if a >= self.circle {
            (low, high)
        } else if b <= self.circle {
            (-high, -low)
        } else {
            (low.min(-high), high.max(-low))
        }
    }

    /// Places strictly inside (lo, hi) at which the value may be extreme.
    pub(super) fn extremes(&self, lo: f64, hi: f64) -> Places {
        let mut places = Places::new();
        self.wave.turns(lo, hi, &mut places);
        self.wave.solve(self.circle, lo, hi, &mut places);
        places
    }

    /// Place and value of the greatest value over [lo, hi].
    pub(super) fn greatest(&self, lo: f64, hi: f64) -> (f64, f64) {
        let mut best = (lo, self.value(lo));
        for s in self.extremes(lo, hi).into_iter().chain([hi]) {
            let v = self.value(s);
            if v > best.1 {
                best = (s, v);
            }
        }
        best
    }

    /// Place and value of the least value over [lo, hi].
    pub(super) fn least(&self, lo: f64, hi: f64) -> (f64, f64) {
        let mut best = (lo, self.value(lo));
        for s in self.extremes(lo, hi).into_iter().chain([hi]) {
            let v = self.value(s);
            if v < best.1 {
                best = (s, v);
            }
        }
        best
    }

    /// Places strictly inside (lo, hi) where the value is `v`, in order.
    pub(super) fn level(&self, v: f64, lo: f64, hi: f64) -> Places {
        let mut places = Places::new();
        let reach = v + self.less;
        if reach >= 0.0 {
            self.wave.solve(self.circle + reach, lo, hi, &mut places);
            if reach > 0.0 {
                self.wave.solve(self.circle - reach, lo, hi, &mut places);
            }
        }
        places.sort_by(f64::total_cmp);
        places
    }

    /// A lower bound of `self - other` over [lo, hi], second order in the length of the interval.
    ///
    /// With f the difference and [p, q] bounds of its slope, f(s) is at least f(lo) + p (s - lo) and at
    /// least f(hi) - q (hi - s); the bound is where those two lines meet.
    pub(super) fn lead_over(&self, other: &Self, lo: f64, hi: f64) -> f64 {
        let (a, b) = (self.value(lo) - other.value(lo), self.value(hi) - other.value(hi));
        let (mine, theirs) = (self.slopes(lo, hi), other.slopes(lo, hi));
        let (mut p, mut q) = (mine.0 - theirs.1, mine.1 - theirs.0);
        if let Some(bend) = self.bend_unlike(other, lo, hi) {
            // Laws that nearly agree bend alike: their slopes differ as they do in the middle.
            let middle = self.slope(0.5 * (lo + hi)) - other.slope(0.5 * (lo + hi));
            let play = 0.5 * bend * (hi - lo);
            (p, q) = (p.max(middle - play), q.min(middle + play));
        }
        if p >= 0.0 || q <= 0.0 {
            return a.min(b);
        }
        let meet = (q * a - p * b + p * q * (hi - lo)) / (q - p);
        meet.min(a).min(b).max(-self.unlike(other))
    }

    /// +1 where the running point stays outside of the circle over [lo, hi], -1 inside.
    fn branch(&self, lo: f64, hi: f64) -> Option<f64> {
        let (a, b) = self.wave.range(lo, hi);
        if a >= self.circle {
            Some(1.0)
        } else if b <= self.circle {
            Some(-1.0)
        } else {
            None
        }
    }

    /// A bound over [lo, hi] of how much the second derivatives of two laws of one form differ.
    ///
    /// The distance g from a point has the second derivative (1 - (u.T)^2) / g + k u.N, with u the
    /// direction from the point and k the curvature of the course; shifting the point by d changes
    /// that by no more than d (3 / g^2 + k / g) for the least g on the way.
    fn bend_unlike(&self, other: &Self, lo: f64, hi: f64) -> Option<f64> {
        let (mine, theirs) = (self.branch(lo, hi)?, other.branch(lo, hi)?);
        let same = (mine < 0.0) == (theirs < 0.0);
        let of_points = |shift: f64, curvature: f64| {
            let g = self.wave.range(lo, hi).0.min(other.wave.range(lo, hi).0) - shift;
            (same && g > 0.0).then(|| shift * (3.0 / (g * g) + curvature / g))
        };
        match (self.wave, other.wave) {
            (Wave::Linear { .. }, Wave::Linear { .. }) => Some(0.0),
            (Wave::Hypot { foot, height }, Wave::Hypot { foot: f, height: h }) => {
                of_points((foot - f).abs() + (height - h).abs(), 0.0)
            }
            (Wave::Polar { off, psi, rate, .. }, Wave::Polar { off: o, psi: p, .. }) => {
                of_points((off - o).abs() + off.min(o) * turned(psi - p), rate.abs())
            }
            (Wave::Cosine { psi, rate, .. }, Wave::Cosine { psi: p, .. }) => {
                let flip = if same { 0.0 } else { PI };
                Some(rate.abs() * turned(psi - p - flip))
            }
            _ => None,
        }
    }

    /// A bound of |self - other| for laws of one form, by the difference of their terms: the same point
    /// (the joint of two moves), a retraced line, a concentric arc. Infinite for different forms.
    fn unlike(&self, other: &Self) -> f64 {
        let rest = (self.circle - other.circle).abs() + (self.less - other.less).abs();
        rest + match (self.wave, other.wave) {
            (Wave::Linear { a, b }, Wave::Linear { a: c, b: d }) if b == 0.0 && d == 0.0 => (a - c).abs(),
            (Wave::Hypot { foot, height }, Wave::Hypot { foot: f, height: h }) => {
                (foot - f).abs() + (height - h).abs()
            }
            (Wave::Polar { off, psi, .. }, Wave::Polar { off: o, psi: p, .. }) => {
                (off - o).abs() + off.min(o) * turned(psi - p)
            }
            (Wave::Cosine { a, amplitude, psi, .. }, Wave::Cosine { a: c, psi: p, .. }) => {
                // The same line run the other way has its sign reversed.
                let same = (a - c).abs() + amplitude * turned(psi - p);
                let reversed = (a + c).abs() + amplitude * turned(psi - p - PI);
                same.min(reversed)
            }
            _ => f64::INFINITY,
        }
    }
}
