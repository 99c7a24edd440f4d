//! Where two segments meet: not at all, in points, or along a common stretch.
//!
//! The closed forms of line and circle are the easy part. What decides whether loops close later is
//! what happens near an end and near a tangency, where noise of one unit in the last place turns one
//! meeting into two or none. So ends are asked first ("does this end lie on the other segment, within
//! a length?"), and a crossing is looked for only away from ends that already meet. A tangency is one
//! point: the middle of the stretch on which both curves agree within that length.

use kurbo::{Point, Vec2};

use super::{Arc, Line, Segment};

/// How two segments meet in a point.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum MeetingKind {
    /// They pass through one another.
    Proper,
    /// An end lies on the other segment, or they are tangent.
    Touch,
}

/// A point common to both segments.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Meeting {
    /// Where.
    pub at: Point,
    /// Parameter on the first and on the second segment; exactly 0 or 1 at an end.
    pub t: [f64; 2],
    /// How.
    pub kind: MeetingKind,
}

/// A stretch common to both segments, given by its ends in the direction of the first segment.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Overlap {
    /// Its beginning.
    pub from: Meeting,
    /// Its end.
    pub to: Meeting,
}

/// At most `N` things without an allocation.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Few<T, const N: usize> {
    items: [Option<T>; N],
    len: usize,
}

impl<T: Copy, const N: usize> Few<T, N> {
    const fn new() -> Self {
        Self { items: [None; N], len: 0 }
    }

    /// Adds one; beyond the capacity, which the geometry rules out, nothing happens.
    fn push(&mut self, item: T) {
        if let Some(slot) = self.items.get_mut(self.len) {
            *slot = Some(item);
            self.len += 1;
        }
    }

    /// The things, in order.
    pub fn iter(&self) -> impl Iterator<Item = T> + '_ {
        self.items.iter().take(self.len).filter_map(|x| *x)
    }

    /// How many.
    #[must_use]
    pub const fn len(&self) -> usize {
        self.len
    }

    /// None at all?
    #[must_use]
    pub const fn is_empty(&self) -> bool {
        self.len == 0
    }
}

/// How two segments meet.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Crossing {
    /// Nowhere.
    None,
    /// In single points, ordered along the first segment.
    Points(Few<Meeting, 8>),
    /// Along common stretches, ordered along the first segment. One of length zero is a touch.
    Overlap(Few<Overlap, 8>),
}

/// How `a` and `b` meet; points nearer than `within` (a length) count as one.
///
/// Two curves that stay within `within` of one another between two common points overlap there.
#[must_use]
pub fn crossing(a: &Segment, b: &Segment, within: f64) -> Crossing {
    let mut found = Few::new();
    end_meetings(a, b, within, &mut found);
    let mut stretches = Few::new();
    if found.len() >= 2 {
        overlaps(a, b, within, &mut found, &mut stretches);
    }
    match (a, b) {
        (Segment::Line(a), Segment::Line(b)) => line_line(a, b, &mut found),
        (Segment::Line(l), Segment::Arc(c)) => line_arc(l, c, within, false, &mut found),
        (Segment::Arc(c), Segment::Line(l)) => line_arc(l, c, within, true, &mut found),
        (Segment::Arc(a), Segment::Arc(b)) => arc_arc(a, b, within, &mut found),
    }
    if stretches.is_empty() {
        return if found.is_empty() { Crossing::None } else { Crossing::Points(found) };
    }
    // Meetings that end no stretch are points: stretches of length zero.
    for m in found.iter() {
        if !stretches.iter().any(|s: Overlap| s.from == m || s.to == m) {
            stretches.push(Overlap { from: m, to: m });
        }
    }
    Crossing::Overlap(stretches)
}

/// Ends of one segment that lie on the other.
fn end_meetings(a: &Segment, b: &Segment, within: f64, found: &mut Few<Meeting, 8>) {
    for (first, second, swapped) in [(a, b, false), (b, a, true)] {
        for (t, end) in [(0.0, first.start()), (1.0, first.end())] {
            let near = second.nearest(end);
            if near.distance > within {
                continue;
            }
            let snap = if (near.at - second.start()).hypot() <= within {
                0.0
            } else if (near.at - second.end()).hypot() <= within {
                1.0
            } else {
                near.t
            };
            let t = if swapped { [snap, t] } else { [t, snap] };
            let known = found.iter().any(|m: Meeting| {
                (m.at - end).hypot() <= 2.0 * within && same_parameters(m.t, t, a, b, within)
            });
            if !known {
                found.push(Meeting { at: end, t, kind: MeetingKind::Touch });
            }
        }
    }
}

/// Do two pairs of parameters name the same place? (On a full circle start and end are one point but
/// two parameters, and both are wanted.)
fn same_parameters(s: [f64; 2], t: [f64; 2], a: &Segment, b: &Segment, within: f64) -> bool {
    (s[0] - t[0]).abs() * a.length() <= 4.0 * within && (s[1] - t[1]).abs() * b.length() <= 4.0 * within
}

/// Stretches between neighbouring end meetings on which the curves agree: the two differ most in the
/// middle between two common points, so the middle decides.
fn overlaps(
    a: &Segment,
    b: &Segment,
    within: f64,
    found: &mut Few<Meeting, 8>,
    stretches: &mut Few<Overlap, 8>,
) {
    sort_by_first(found);
    for (from, to) in found.iter().zip(found.iter().skip(1)) {
        let long = (to.t[0] - from.t[0]) * a.length() > 4.0 * within;
        if long && b.distance(a.point_at(0.5 * (from.t[0] + to.t[0]))) <= within {
            stretches.push(Overlap { from, to });
        }
    }
}

fn sort_by_first(found: &mut Few<Meeting, 8>) {
    let len = found.len;
    if let Some(items) = found.items.get_mut(..len) {
        items.sort_by(|x, y| match (x, y) {
            (Some(x), Some(y)) => x.t[0].total_cmp(&y.t[0]),
            _ => std::cmp::Ordering::Equal,
        });
    }
}

/// Adds a meeting unless one is known within `reach` of it.
fn add(found: &mut Few<Meeting, 8>, meeting: Meeting, reach: f64) {
    if !found.iter().any(|m| (m.at - meeting.at).hypot() <= reach) {
        found.push(meeting);
        sort_by_first(found);
    }
}

/// Two straight lines cross at most once, and not at all where an end already meets.
fn line_line(a: &Line, b: &Line, found: &mut Few<Meeting, 8>) {
    if !found.is_empty() {
        return;
    }
    let (da, db) = (a.vector(), b.vector());
    // Sides of the ends, as distances times a length: no end is near the other line, so plain
    // arithmetic gives the sign unless both are nearly parallel, where either answer is within bounds.
    let (a0, a1) = (db.cross(a.start - b.start), db.cross(a.end - b.start));
    let (b0, b1) = (da.cross(b.start - a.start), da.cross(b.end - a.start));
    let apart = |x: f64, y: f64| (x < 0.0) == (y < 0.0);
    if apart(a0, a1) || apart(b0, b1) {
        return;
    }
    let (s, t) = (a0 / (a0 - a1), b0 / (b0 - b1));
    // Cross product formula twice, once from each line: take the one that is better conditioned.
    let at = if da.hypot2() <= db.hypot2() { a.point_at(s) } else { b.point_at(t) };
    found.push(Meeting { at, t: [s, t], kind: MeetingKind::Proper });
}

fn line_arc(line: &Line, arc: &Arc, within: f64, swapped: bool, found: &mut Few<Meeting, 8>) {
    let d = line.vector();
    let length = d.hypot();
    if length <= 0.0 {
        return;
    }
    let u = d / length;
    let c = arc.center() - line.start;
    let (along, height) = (c.dot(u), u.cross(c));
    let r = arc.radius();
    let mut offer = |s: f64, radial: Vec2, kind, reach: f64| {
        let t = s / length;
        if (0.0..=1.0).contains(&t) && arc.faces(radial) {
            let ta = arc.parameter_of(radial).clamp(0.0, 1.0);
            let t = if swapped { [ta, t] } else { [t, ta] };
            let at = arc.center() + radial * (r / radial.hypot());
            add(found, Meeting { at, t, kind }, reach);
        }
    };
    let normal = Vec2::new(u.y, -u.x);
    let gap = r - height.abs();
    if gap < -within {
        return;
    }
    if gap <= within {
        // Tangent: both agree within `within` on a stretch of about sqrt(2 r within) to each side.
        offer(along, normal * height, MeetingKind::Touch, 4.0 * (r * within).sqrt() + 2.0 * within);
        return;
    }
    let half = (gap * (r + height.abs())).sqrt();
    let reach = 4.0 * within * (r / half).max(1.0);
    for side in [-half, half] {
        offer(along + side, normal * height + u * side, MeetingKind::Proper, reach);
    }
}

fn arc_arc(a: &Arc, b: &Arc, within: f64, found: &mut Few<Meeting, 8>) {
    let (ra, rb) = (a.radius(), b.radius());
    let v = b.center() - a.center();
    let d = v.hypot();
    let outer = ra + rb - d;
    let inner = d - (ra - rb).abs();
    if outer < -within || inner < -within || d <= within {
        return; // apart, nested, or concentric: equal circles meet by their ends alone
    }
    let u = v / d;
    let mut offer = |radial: Vec2, kind, reach: f64| {
        // Circles that nearly coincide leave few digits in `radial`: lead it back to the first circle.
        let at = a.center() + radial * (ra / radial.hypot());
        let from_b = at - b.center();
        if a.faces(radial) && b.faces(from_b) {
            let t = [a.parameter_of(radial).clamp(0.0, 1.0), b.parameter_of(from_b).clamp(0.0, 1.0)];
            add(found, Meeting { at, t, kind }, reach);
        }
    };
    if outer <= within || inner <= within {
        let bend = if outer <= inner { 1.0 / ra + 1.0 / rb } else { (1.0 / ra - 1.0 / rb).abs() };
        let towards = if outer > inner && ra < rb { -1.0 } else { 1.0 };
        let reach = 4.0 * (within / bend.max(1e-300)).sqrt() + 2.0 * within;
        offer(u * (towards * ra), MeetingKind::Touch, reach.min(ra));
        return;
    }
    let along = 0.5 * ((ra - rb) * (ra + rb) / d + d);
    // Heron's form: no cancellation where the circles nearly touch.
    let half = 0.5 * ((ra + rb + d) * outer * (d + ra - rb) * (d - ra + rb)).max(0.0).sqrt() / d;
    let reach = 4.0 * within * (ra.min(rb) / half).max(1.0);
    for side in [-half, half] {
        offer(u * along + Vec2::new(-u.y, u.x) * side, MeetingKind::Proper, reach);
    }
}
