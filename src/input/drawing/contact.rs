//! Where do two segments of a drawing meet? Closed forms for two lines, a line and an arc, two arcs.
//! Meant for judging a drawing, with a length below which a crossing counts as a touch; the swept edge
//! uses geometry's own crossings.

use crate::geometry::{Arc, Line, Point, Segment, Vec2};

/// A meeting of two segments.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Contact {
    /// They cross, away from all ends.
    Crosses(Point),
    /// They share a length.
    Overlaps(Point),
    /// An end of one lies on the other.
    AtEnd(Point),
}

/// A crossing this many times `touch` from an end that lies on the other segment is that end's: a flat
/// angle moves the computed point by so much.
const END_REACH: f64 = 1e3;

/// Meetings of `a` and `b`; those shallower than `touch` away from all ends are left out.
pub(super) fn contacts(a: &Segment, b: &Segment, touch: f64) -> Vec<Contact> {
    if let Some(p) = overlap(a, b, touch) {
        return vec![Contact::Overlaps(p)];
    }
    let mut ends: Vec<Point> = Vec::new();
    for (s, other) in [(a, b), (b, a)] {
        ends.extend([s.start(), s.end()].into_iter().filter(|p| other.distance(*p) <= touch));
    }
    let proper = carriers_meet(a, b, touch)
        .into_iter()
        .flatten()
        .filter(|p| a.distance(*p) <= touch && b.distance(*p) <= touch)
        .filter(|p| !ends.iter().any(|e| (*e - *p).hypot() <= END_REACH * touch));
    let mut found: Vec<Contact> = proper.map(Contact::Crosses).collect();
    found.extend(ends.into_iter().map(Contact::AtEnd));
    found
}

/// Where the whole lines and circles cross by more than `touch`.
fn carriers_meet(a: &Segment, b: &Segment, touch: f64) -> [Option<Point>; 2] {
    match (a, b) {
        (Segment::Line(a), Segment::Line(b)) => [lines_meet(a, b, touch), None],
        (Segment::Line(l), Segment::Arc(c)) | (Segment::Arc(c), Segment::Line(l)) => {
            line_meets_circle(l, c, touch)
        }
        (Segment::Arc(a), Segment::Arc(b)) => circles_meet(a, b, touch),
    }
}

fn lines_meet(a: &Line, b: &Line, touch: f64) -> Option<Point> {
    // Each line must have the other's ends on both its sides.
    let sides = |l: &Line, m: &Line| {
        let off = |p: Point| l.tangent().cross(p - l.start);
        (off(m.start), off(m.end))
    };
    let deep = |(s, e): (f64, f64)| s.abs() > touch && e.abs() > touch && (s < 0.0) != (e < 0.0);
    let (start, end) = sides(a, b);
    (deep((start, end)) && deep(sides(b, a))).then(|| b.start + b.vector() * (start / (start - end)))
}

fn line_meets_circle(l: &Line, c: &Arc, touch: f64) -> [Option<Point>; 2] {
    let direction = l.tangent();
    let to_center = c.center() - l.start;
    let depth = c.radius() - direction.cross(to_center).abs();
    if depth <= touch {
        return [None, None];
    }
    let half = (depth * (2.0 * c.radius() - depth)).max(0.0).sqrt();
    let foot = l.start + direction * direction.dot(to_center);
    [Some(foot - direction * half), Some(foot + direction * half)]
}

fn circles_meet(a: &Arc, b: &Arc, touch: f64) -> [Option<Point>; 2] {
    let between = b.center() - a.center();
    let d = between.hypot();
    let (ra, rb) = (a.radius(), b.radius());
    if ra + rb - d <= touch || d - (ra - rb).abs() <= touch {
        return [None, None];
    }
    let u = between / d;
    let along = 0.5 * (d + (ra - rb) * (ra + rb) / d);
    let half = ((ra - along) * (ra + along)).max(0.0).sqrt();
    let foot = a.center() + u * along;
    let side = Vec2::new(-u.y, u.x) * half;
    [Some(foot + side), Some(foot - side)]
}

/// A point of the length which two segments share, where that is longer than `touch` allows: found
/// from the ends that lie on the other segment and the middle between them.
fn overlap(a: &Segment, b: &Segment, touch: f64) -> Option<Point> {
    let same_carrier = match (a, b) {
        (Segment::Line(_), Segment::Line(_)) => true,
        (Segment::Arc(a), Segment::Arc(b)) => {
            (a.center() - b.center()).hypot() + (a.radius() - b.radius()).abs() <= touch
        }
        _ => false,
    };
    if !same_carrier {
        return None;
    }
    // Parameters on `a` of everything that bounds a shared stretch.
    let mut cuts = vec![0.0, 1.0];
    cuts.extend([b.start(), b.end()].into_iter().filter(|p| a.distance(*p) <= touch).map(|p| a.nearest(p).t));
    cuts.sort_unstable_by(f64::total_cmp);
    let least = 8.0 * touch / a.length().max(f64::MIN_POSITIVE);
    cuts.windows(2).find_map(|w| match w {
        [from, to] if to - from > least => {
            let middle = a.point_at(0.5 * (from + to));
            let quarter = a.point_at(0.75 * from + 0.25 * to);
            (b.distance(middle) <= touch && b.distance(quarter) <= touch).then_some(middle)
        }
        _ => None,
    })
}
