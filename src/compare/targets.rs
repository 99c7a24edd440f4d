//! What the distance is measured to: an indexed set of segments, each with the radius of the disc that
//! runs along it (zero for a contour).
//!
//! The distance from a segment is the distance from its inside where the point projects onto it, and
//! from one of its ends elsewhere. Over an interval of a course the *feature* (inside, start, end) is
//! often one and the same; then the distance follows one closed form.

use crate::geometry::{Arc, BoxIndex, Line, Point, Rect, Segment, Vec2};

use super::law::{Course, Law, Places, Wave};

/// The part of a segment that is nearest.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Feature {
    /// Its inside.
    Inside,
    /// Its start point.
    Start,
    /// Its end point.
    End,
}

/// Segments with radii, and an index over them.
pub(super) struct Targets<'a> {
    segments: Vec<&'a Segment>,
    radii: Vec<f64>,
    index: BoxIndex,
    greatest_radius: f64,
    residual: f64,
}

/// What is known of the distance from one target over an interval.
pub(super) struct Bounds {
    /// Least and greatest distance less radius.
    pub(super) low: f64,
    /// See `low`.
    pub(super) high: f64,
    /// The closed form where the feature is the same over the whole interval.
    pub(super) law: Option<(Feature, Law)>,
}

impl<'a> Targets<'a> {
    /// Targets `segments`, each swept by a disc of the radius given.
    pub(super) fn new(items: impl Iterator<Item = (&'a Segment, f64)>) -> Self {
        let (segments, radii): (Vec<&Segment>, Vec<f64>) = items.unzip();
        let boxes: Vec<Rect> = segments
            .iter()
            .map(|s| {
                // The ends of an arc may lie off its circle by the residual.
                s.bounds().union_pt(s.start()).union_pt(s.end())
            })
            .collect();
        let residual = segments.iter().map(|s| residual(s)).fold(0.0, f64::max);
        let greatest_radius = radii.iter().copied().fold(0.0, f64::max);
        Self { segments, radii, index: BoxIndex::new(&boxes), greatest_radius, residual }
    }

    /// Targets of a test, which keeps them to its end.
    #[cfg(test)]
    pub(super) fn of(items: impl Iterator<Item = (Segment, f64)>) -> Targets<'static> {
        let kept: &'static [(Segment, f64)] = Box::leak(items.collect::<Vec<_>>().into_boxed_slice());
        Targets::new(kept.iter().map(|(s, r)| (s, *r)))
    }

    pub(super) fn is_empty(&self) -> bool {
        self.segments.is_empty()
    }

    pub(super) fn len(&self) -> usize {
        self.segments.len()
    }

    pub(super) const fn greatest_radius(&self) -> f64 {
        self.greatest_radius
    }

    /// Greatest distance of an arc's end from its circle: how far a distance may jump where the
    /// nearest feature changes from an arc's inside to its end.
    pub(super) const fn residual(&self) -> f64 {
        self.residual
    }

    pub(super) fn segment(&self, k: usize) -> &'a Segment {
        self.segments[k]
    }

    pub(super) fn radius(&self, k: usize) -> f64 {
        self.radii[k]
    }

    /// Distance of `p` from target `k`, less its radius.
    pub(super) fn clearance_of(&self, k: usize, p: Point) -> f64 {
        self.segments[k].distance(p) - self.radii[k]
    }

    /// The target nearest to `p` by distance less radius; `hint` is a guess that saves work.
    pub(super) fn nearest(&self, p: Point, hint: Option<usize>) -> Option<(usize, f64)> {
        let shift = self.greatest_radius;
        let lifted = |k: usize| self.clearance_of(k, p) + shift;
        let guess = hint.filter(|&k| k < self.segments.len()).map(|k| (k, lifted(k)));
        let within = guess.map_or(f64::INFINITY, |g| g.1);
        let found = self.index.nearest(p, within, lifted).or(guess);
        found.map(|(k, d)| (k, d - shift))
    }

    /// Least distance of the straight `line` from any target, not counting radii, when it is below
    /// `within`.
    ///
    /// Two segments that do not cross are nearest to one another at an end of one of them, or, line
    /// beside arc, at the foot of the arc's centre. A target that crosses the line is at most half the
    /// line's length away from one of its ends: a greater answer is therefore the least distance, and
    /// tells that nothing crosses.
    pub(super) fn least_from(&self, line: &Line, within: f64) -> Option<f64> {
        let own = Segment::Line(*line);
        let apart = |k: usize| {
            let other = self.segments[k];
            let of_line = other.distance(line.start).min(other.distance(line.end));
            let mut least = of_line.min(own.distance(other.start()));
            // Where the next target starts there it is asked about that point itself: the point lies in
            // its box.
            let end = other.end();
            if self.segments.get(k + 1).is_none_or(|next| next.start() != end) {
                least = least.min(own.distance(end));
            }
            match other {
                Segment::Line(_) => least,
                Segment::Arc(a) => least.min(other.distance(own.nearest(a.center()).at)),
            }
        };
        self.index.nearest_to_box(own.bounds(), within, apart).map(|found| found.1)
    }

    /// Calls `visit` with every target whose distance from `p`, less its radius, may be at most `reach`.
    pub(super) fn within(&self, p: Point, reach: f64, mut visit: impl FnMut(usize)) {
        self.index.within(p, reach + self.greatest_radius, |k| {
            if self.clearance_of(k, p) <= reach {
                visit(k);
            }
        });
    }

    /// The nearest feature of target `k` seen from `p`.
    pub(super) fn feature_at(&self, k: usize, p: Point) -> Feature {
        let n = self.segments[k].nearest(p);
        if n.t <= 0.0 {
            Feature::Start
        } else if n.t >= 1.0 {
            Feature::End
        } else {
            Feature::Inside
        }
    }

    /// The closed form of the distance from one feature of target `k` along `course`. The inside is
    /// taken without its ends: the whole line, the whole circle.
    pub(super) fn law(&self, k: usize, feature: Feature, course: &Course) -> Law {
        let less = self.radii[k];
        match (feature, self.segments[k]) {
            (Feature::Start, s) => Law { wave: course.distance_to(s.start()), circle: 0.0, less },
            (Feature::End, s) => Law { wave: course.distance_to(s.end()), circle: 0.0, less },
            (Feature::Inside, Segment::Line(l)) => {
                let d = l.tangent();
                let wave = course.component(Vec2::new(-d.y, d.x), l.start);
                Law { wave, circle: 0.0, less }
            }
            (Feature::Inside, Segment::Arc(a)) => {
                Law { wave: course.distance_to(a.center()), circle: a.radius(), less }
            }
        }
    }

    /// Which feature of target `k` is the nearest over the whole of [lo, hi]; `None` when it changes.
    /// A feature may be overrun by `slip`.
    fn feature_over(&self, k: usize, course: &Course, lo: f64, hi: f64, slip: f64) -> Option<Feature> {
        match self.segments[k] {
            Segment::Line(l) => {
                let length = l.length();
                if length <= 0.0 {
                    return Some(Feature::Start);
                }
                let (a, b) = course.component(l.tangent(), l.start).range(lo, hi);
                if b <= slip {
                    Some(Feature::Start)
                } else if a >= length - slip {
                    Some(Feature::End)
                } else if a >= -slip && b <= length + slip {
                    Some(Feature::Inside)
                } else {
                    None
                }
            }
            Segment::Arc(arc) => {
                let Some((first, second)) = sector(arc, course) else {
                    return Some(Feature::Inside);
                };
                let (a, b) = (first.range(lo, hi), second.range(lo, hi));
                let wide = arc.sweep().abs() > std::f64::consts::PI;
                let (inside, outside) = if wide {
                    (a.0 >= -slip || b.0 >= -slip, a.1 <= slip && b.1 <= slip)
                } else {
                    (a.0 >= -slip && b.0 >= -slip, a.1 <= slip || b.1 <= slip)
                };
                if inside {
                    return Some(Feature::Inside);
                }
                if !outside {
                    return None;
                }
                let (a, b) = between_ends(arc, course).range(lo, hi);
                if b <= slip {
                    Some(Feature::Start)
                } else if a >= -slip {
                    Some(Feature::End)
                } else {
                    None
                }
            }
        }
    }

    /// Places strictly inside (lo, hi) where the nearest feature of target `k` may change.
    pub(super) fn changes(&self, k: usize, course: &Course, lo: f64, hi: f64) -> Places {
        let mut out = Places::new();
        match self.segments[k] {
            Segment::Line(l) => {
                let wave = course.component(l.tangent(), l.start);
                wave.solve(0.0, lo, hi, &mut out);
                wave.solve(l.length(), lo, hi, &mut out);
            }
            Segment::Arc(arc) => {
                if let Some((first, second)) = sector(arc, course) {
                    first.solve(0.0, lo, hi, &mut out);
                    second.solve(0.0, lo, hi, &mut out);
                    between_ends(arc, course).solve(0.0, lo, hi, &mut out);
                }
            }
        }
        out
    }

    /// Bounds of the distance from target `k` over [lo, hi]: exact where one feature is the nearest
    /// throughout; else by the distance at both ends, which cannot change faster than the way run,
    /// and by the whole line or circle, which cannot be farther than a part of it.
    pub(super) fn bounds(&self, k: usize, course: &Course, lo: f64, hi: f64, slip: f64) -> Bounds {
        if let Some(feature) = self.feature_over(k, course, lo, hi, slip) {
            let law = self.law(k, feature, course);
            let (low, high) = law.range(lo, hi);
            return Bounds { low, high, law: Some((feature, law)) };
        }
        let (a, b) = (self.clearance_of(k, course.point(lo)), self.clearance_of(k, course.point(hi)));
        let way = hi - lo;
        let whole = self.law(k, Feature::Inside, course).range(lo, hi).0;
        let low = whole.max(0.5 * (a + b - way));
        let straight = matches!((course, self.segments[k]), (Course::Line { .. }, Segment::Line(_)));
        // The distance from a convex set is convex along a line.
        let high = if straight { a.max(b) } else { 0.5 * (a + b + way) };
        Bounds { low, high, law: None }
    }
}

/// How far an arc's ends lie off its circle; zero for a line.
pub(super) fn residual(segment: &Segment) -> f64 {
    match segment {
        Segment::Line(_) => 0.0,
        Segment::Arc(a) => a.residual(),
    }
}

/// Two functions along the course whose signs tell whether an arc faces the running point: both zero
/// or more for a sweep up to half a turn, either one for a wider sweep. `None` for a full circle.
fn sector(arc: &Arc, course: &Course) -> Option<(Wave, Wave)> {
    if arc.sweep().abs() >= std::f64::consts::TAU {
        return None;
    }
    let radial = |p: Point| (p - arc.center()).normalize();
    let (a, b) = (radial(arc.start()), radial(arc.end()));
    let (a, b) = if arc.sweep() < 0.0 { (b, a) } else { (a, b) };
    let c = arc.center();
    Some((course.component(Vec2::new(-a.y, a.x), c), course.component(Vec2::new(b.y, -b.x), c)))
}

/// A function along the course that is negative nearer to the arc's start, positive nearer to its end.
fn between_ends(arc: &Arc, course: &Course) -> Wave {
    let chord = Line::new(arc.start(), arc.end());
    course.component(chord.tangent(), chord.point_at(0.5))
}
