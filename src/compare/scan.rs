//! One path of the contour, run along once: where does the clearance from the sweep exceed a limit, and
//! where are its peaks?
//!
//! The clearance D(q) along the path is given piece by piece in closed form ([`super::along`]); so are
//! the places where it crosses a limit, and its local maxima: inside a piece, or at a joint of pieces
//! where it rises before and falls after.

use crate::geometry::{Path, Point};

use super::along::{Piece, Tracer};
use super::law::Course;
use super::passes::Passes;
use super::side::Walls;
use super::targets::{Feature, Targets};

/// Slopes between plus and minus this count as level. A slope is a cosine of an angle; rounding of
/// laws leaves it good to far better than this.
const LEVEL: f64 = 1e-9;

/// Joints that turn by less than this are smooth: tangent arcs as drawings give them, and the chords
/// of a curve, but no corner. Common practice, no single source.
const SMOOTH: f64 = 0.2;

/// A local maximum of the clearance along a path.
#[derive(Clone, Copy, Debug)]
pub(super) struct Peak {
    /// Way along the path.
    pub(super) position: f64,
    /// The clearance.
    pub(super) size: f64,
    pub(super) at: Point,
    /// Position of the nearest move.
    pub(super) nearest: usize,
    /// The two moves that meet there, when it is a crest between two passes.
    pub(super) crest: Option<(usize, usize)>,
}

/// A maximal stretch over a limit, with its greatest clearance.
#[derive(Clone, Copy, Debug)]
pub(super) struct Over {
    pub(super) from: f64,
    pub(super) to: f64,
    pub(super) greatest: Peak,
}

/// What one run along a path found.
#[derive(Debug, Default)]
pub(super) struct Scan {
    /// Length of the path.
    pub(super) length: f64,
    /// Least clearance anywhere on it.
    pub(super) least: f64,
    /// Greatest clearance anywhere on it.
    pub(super) greatest: Option<Peak>,
    /// Greatest peak that is no crest, and greatest crest.
    pub(super) greatest_plain: Option<Peak>,
    /// See `greatest_plain`.
    pub(super) greatest_crest: Option<Peak>,
    /// Peaks above the lowest limit, in order.
    pub(super) peaks: Vec<Peak>,
    /// Stretches over each limit, in order.
    pub(super) over: [Vec<Over>; 2],
}

/// The questions put to every path.
pub(super) struct Scanner<'a> {
    pub(super) walls: &'a Walls<'a>,
    pub(super) moves: &'a Targets<'a>,
    pub(super) passes: &'a Passes,
    pub(super) tracer: Tracer<'a>,
    pub(super) limits: [f64; 2],
    /// Clearance above which something stands at all.
    pub(super) crest_from: f64,
    /// Stock left on purpose: clearance up to which there is no excess.
    pub(super) allowance: f64,
}

/// A piece with the course it lies on, for looking back from the next one.
#[derive(Clone, Copy)]
struct Link {
    piece: Piece,
    course: Course,
    /// Way along the path at the start of the course.
    start: f64,
    /// Position of the segment among the walls.
    segment: usize,
}

impl Link {
    fn peak(&self, s: f64) -> Peak {
        Peak {
            position: self.start + s,
            size: self.piece.law.value(s),
            at: self.course.point(s),
            nearest: self.piece.target,
            crest: None,
        }
    }
}

impl Scan {
    fn note(&mut self, peak: Peak, lowest_limit: f64) {
        let slot = if peak.crest.is_some() { &mut self.greatest_crest } else { &mut self.greatest_plain };
        keep_greater(slot, peak);
        if peak.size > lowest_limit {
            self.peaks.push(peak);
        }
    }

    /// Greatest peak in `over` that is a crest, or is none.
    pub(super) fn peak_in(&self, over: &Over, crest: bool) -> Option<Peak> {
        let until = |to: f64| self.peaks.partition_point(|p| p.position <= to);
        let from = self.peaks.partition_point(|p| p.position < over.from);
        let direct = self.peaks.get(from..until(over.to)).unwrap_or_default();
        let round = self.peaks.get(..until(over.to - self.length)).unwrap_or_default();
        let kind = direct.iter().chain(round).filter(|p| p.crest.is_some() == crest).copied();
        kind.reduce(|a, b| if b.size > a.size { b } else { a })
    }
}

fn keep_greater(slot: &mut Option<Peak>, peak: Peak) {
    if slot.is_none_or(|old| peak.size > old.size) {
        *slot = Some(peak);
    }
}

impl Scanner<'_> {
    /// Runs along `path`, whose segments are `walls` from position `first` on.
    pub(super) fn scan(&mut self, path: &Path, first: usize) -> Scan {
        let mut scan = Scan { least: f64::INFINITY, ..Scan::default() };
        let mut pieces = Vec::new();
        let (mut opening, mut last): (Option<Link>, Option<Link>) = (None, None);
        let mut begun = false;
        let drawn = path.segments().iter().filter(|s| s.length() > 0.0);
        for (segment, s) in (first..).zip(drawn) {
            let course = Course::new(s);
            if self.tells_nothing(&course, &mut scan) {
                scan.length += course.length();
                begun = true;
                last = None;
                continue;
            }
            self.tracer.trace(&course, &mut pieces);
            let start = scan.length;
            for &piece in &pieces {
                let link = Link { piece, course, start, segment };
                self.take(&link, &mut scan);
                if !piece.decided {
                    continue;
                }
                self.inner_peaks(&link, &mut scan);
                match &last {
                    Some(before) => self.joint(before, &link, &mut scan),
                    None if !begun => opening = Some(link),
                    None => {}
                }
                begun = true;
                last = Some(link);
            }
            scan.length += course.length();
        }
        self.ends(path.is_closed(), opening.as_ref(), last.as_ref(), &mut scan);
        // Only the peak over the start of a loop comes out of turn.
        scan.peaks.sort_by(|a, b| a.position.total_cmp(&b.position));
        if path.is_closed() {
            let length = scan.length;
            scan.over.iter_mut().for_each(|o| join_round(o, length));
        }
        scan
    }

    /// Is the clearance along the whole of `course` so small that it changes no answer?
    ///
    /// It does when it exceeds no limit, nor what counts as a crest, and no peak found before (or the
    /// allowance, up to which there is no excess). Every peak on the course, its joints with its
    /// neighbours included, is then below one that is known.
    fn tells_nothing(&mut self, course: &Course, scan: &mut Scan) -> bool {
        let known = scan.greatest_plain.map_or(self.allowance, |p| p.size.max(self.allowance));
        let enough = known.min(self.lowest_limit()).min(self.crest_from);
        let Some((k, _)) = self.tracer.at_most(course, enough) else {
            return false;
        };
        let half = 0.5 * course.length();
        let at = course.point(half);
        let size = self.moves.clearance_of(k, at);
        let place = Peak { position: scan.length + half, size, at, nearest: k, crest: None };
        scan.least = scan.least.min(size);
        keep_greater(&mut scan.greatest, place);
        true
    }

    /// Enters the extremes of one piece and its parts over the limits.
    fn take(&self, link: &Link, scan: &mut Scan) {
        let (from, to, law) = (link.piece.from, link.piece.to, &link.piece.law);
        scan.least = scan.least.min(law.least(from, to).1);
        let greatest = law.greatest(from, to);
        keep_greater(&mut scan.greatest, link.peak(greatest.0));
        for (limit, over) in self.limits.iter().zip(&mut scan.over) {
            if greatest.1 <= *limit {
                continue;
            }
            let mut low = from;
            for high in law.level(*limit, from, to).into_iter().chain([to]) {
                if law.value(0.5 * (low + high)) > *limit {
                    let (s, _) = law.greatest(low, high);
                    let new = Over { from: link.start + low, to: link.start + high, greatest: link.peak(s) };
                    append(over, new);
                }
                low = high;
            }
        }
    }

    /// Peaks strictly inside a piece.
    fn inner_peaks(&self, link: &Link, scan: &mut Scan) {
        let (from, to, law) = (link.piece.from, link.piece.to, &link.piece.law);
        let mut places = law.extremes(from, to);
        if places.is_empty() {
            return;
        }
        places.sort_by(f64::total_cmp);
        let values: Vec<f64> =
            [from].into_iter().chain(places.iter().copied()).chain([to]).map(|s| law.value(s)).collect();
        for (s, v) in places.iter().zip(values.windows(3)) {
            if v[1] >= v[0] && v[1] >= v[2] {
                scan.note(link.peak(*s), self.lowest_limit());
            }
        }
    }

    fn lowest_limit(&self) -> f64 {
        self.limits[0].min(self.limits[1])
    }

    /// Is the joint of two pieces a peak, and is it a crest?
    fn joint(&self, before: &Link, after: &Link, scan: &mut Scan) {
        let (end, start) = (before.piece.to, after.piece.from);
        let rise = before.piece.law.slope(end);
        let fall = after.piece.law.slope(start);
        if rise < -LEVEL || fall > LEVEL {
            return;
        }
        let mut peak = after.peak(start);
        let sharp = rise > LEVEL && fall < -LEVEL;
        // Where both passes reach the contour nothing stands.
        if sharp && peak.size > self.crest_from && self.is_smooth(before, after) {
            peak.crest = self.crest(before, after, peak.at);
        }
        scan.note(peak, self.lowest_limit());
    }

    /// Is the contour smooth where `before` meets `after`, and open enough for the cutter?
    fn is_smooth(&self, before: &Link, after: &Link) -> bool {
        let radius = self.moves.radius(after.piece.target);
        let tight = |l: &Link| self.walls.targets.segment(l.segment).curvature() * radius < -1.0;
        let turns = before.segment != after.segment
            && self.walls.turn_at(after.segment, Feature::Start).abs() > SMOOTH;
        !turns && !tight(before) && !tight(after)
    }

    /// The two moves, when they do not follow one another and their cuts meet: between two passes that
    /// stand farther apart than both cutters reach no crest is left but a wall.
    fn crest(&self, before: &Link, after: &Link, at: Point) -> Option<(usize, usize)> {
        let (a, b) = (before.piece.target, after.piece.target);
        let place = |k: usize| {
            let near = self.moves.segment(k).nearest(at);
            ((k, near.t * self.moves.segment(k).length()), near)
        };
        let ((a_place, a_near), (b_place, b_near)) = (place(a), place(b));
        let meet = (a_near.at - b_near.at).hypot() <= self.moves.radius(a) + self.moves.radius(b);
        let apart = a != b && !self.passes.follow(a_place, b_place, a_near.distance);
        (meet && apart).then_some((a.min(b), a.max(b)))
    }

    /// The joint over the start of a loop, or the two ends of a chain.
    fn ends(&self, closed: bool, opening: Option<&Link>, last: Option<&Link>, scan: &mut Scan) {
        if closed {
            if let (Some(opening), Some(last)) = (opening, last) {
                self.joint(last, opening, scan);
            }
            return;
        }
        if let Some(opening) = opening.filter(|o| o.piece.law.slope(o.piece.from) <= LEVEL) {
            scan.note(opening.peak(opening.piece.from), self.lowest_limit());
        }
        if let Some(last) = last.filter(|l| l.piece.law.slope(l.piece.to) >= -LEVEL) {
            scan.note(last.peak(last.piece.to), self.lowest_limit());
        }
    }
}

/// Adds a stretch, joined to the last one where they touch.
fn append(list: &mut Vec<Over>, new: Over) {
    match list.last_mut() {
        Some(last) if new.from <= last.to => {
            last.to = new.to;
            if new.greatest.size > last.greatest.size {
                last.greatest = new.greatest;
            }
        }
        _ => list.push(new),
    }
}

/// Joins the last stretch of a loop to the first where both reach the loop's start.
fn join_round(list: &mut Vec<Over>, length: f64) {
    if list.len() < 2 || list[0].from > 0.0 || list[list.len() - 1].to < length {
        return;
    }
    let first = list.remove(0);
    if let Some(last) = list.last_mut() {
        last.to = length + first.to;
        if first.greatest.size > last.greatest.size {
            last.greatest = first.greatest;
        }
    }
}
