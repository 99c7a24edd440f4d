//! The union of all discs of a family, by its boundary.
//!
//! The swept region is the union of the discs; its edge consists of parts of the raw edge, the
//! parallels of the moves and the arcs round joints and ends, on which no other disc reaches: D = 0
//! there. So: raw edge, less what one clearance question shows to be covered, cut where it meets
//! itself, kept where D = 0 just outside, linked by node numbers.

use crate::geometry::{Arc, Point, Rect, Segment};
use crate::tolerance::Tolerances;
use crate::view::{DiscFamily, DiscMove};

use super::arrangement::{Arrangement, Fragment, Strand};
use super::clearance::Clearance;
use super::cover::{Open, open_parts};
use super::link::{Choice, balance, loops};
use super::raw::{Raw, RawEdge};
use super::region::{EdgeLoop, EdgePiece, SweptRegion};

/// Why a swept region could not be built. Never a matter of the user's input being wrong: a place where
/// rounding left the edge ambiguous beyond its bound.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SweepError {
    /// Where the edge could not be closed.
    pub at: Point,
}

impl std::fmt::Display for SweepError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "the swept edge could not be closed near ({:.6}, {:.6})", self.at.x, self.at.y)
    }
}

impl std::error::Error for SweepError {}

/// A covered stretch is removed early only when it lies deeper than this many coincidence lengths: the
/// early way and the careful way then never disagree.
const COVER_MARGIN: f64 = 128.0;

/// Loops no wider than this many coincidence lengths are slivers between two decisions within rounding.
const SLIVER: f64 = 8.0;

/// Decisions worth no more than this many coincidence lengths in sum may be changed to close a loop.
const CHANGEABLE: f64 = 512.0;

/// The region which the discs of `family` cover, its edge as exact lines and arcs.
///
/// Slots narrower than [`Tolerances::depth`] count as closed, and so do holes thinner than that: the
/// region is a closed set, two discs that touch leave no gap. An empty family sweeps nothing.
///
/// # Errors
/// When loops cannot be closed within rounding; the place is named. No force is used to hide it.
pub fn sweep(family: &DiscFamily) -> Result<SweptRegion, SweepError> {
    let Some(bounds) = family.bounds() else { return Ok(SweptRegion::default()) };
    let origin = local_origin(bounds);
    let shift = -origin.to_vec2();
    let far = bounds.x0.abs().max(bounds.x1.abs()).max(bounds.y0.abs()).max(bounds.y1.abs());
    let extent = 0.5 * bounds.width().max(bounds.height());
    // Far from the origin the coordinates themselves were rounded before they came here.
    let mut extent = extent.max(far * ROUNDING_SHARE);
    let (local, sources, residual) = seat(family, shift, Tolerances::for_extent(extent).coincidence);
    let mut tries = 0;
    let (mut region, tolerances) = loop {
        let tolerances = Tolerances::for_extent(extent);
        match sweep_local(&local, &tolerances) {
            Ok(region) => break (region, tolerances),
            Err(e) if tries == COARSER_TRIES => return Err(SweepError { at: e.at - shift }),
            Err(_) => {
                tries += 1;
                extent *= COARSER;
            }
        }
    };
    for piece in region.loops.iter_mut().flat_map(|l| &mut l.pieces) {
        piece.segment = shifted(&piece.segment, -shift);
        piece.source = sources.get(piece.source).map_or(0, |&s| s as usize);
    }
    region.bound = 8.0 * tolerances.coincidence + 4.0 * f64::EPSILON * far + 2.0 * residual;
    Ok(region)
}

/// Moves that miss one another by about the coincidence length can leave the edge ambiguous. Then a
/// coarser length settles which of them are one; the region's bound says what that cost.
const COARSER: f64 = 16.0;

/// How often it may be made coarser: the coincidence length stays below 2e-8 of the extent.
const COARSER_TRIES: u32 = 4;

/// Coordinates of size `far` are rounded by `far` times 1.1e-16; [`Tolerances::for_extent`] allows 4e-13
/// of the extent. This share of `far` as extent allows eighteen roundings.
const ROUNDING_SHARE: f64 = 1.0 / 200.0;

/// The family about the local origin, every arc with both ends on its circle; the family's position
/// of each move; and the greatest residual that was mended.
fn seat(family: &DiscFamily, shift: crate::geometry::Vec2, coincidence: f64) -> (DiscFamily, Vec<u32>, f64) {
    let mut local = DiscFamily { moves: Vec::with_capacity(family.moves.len()) };
    let mut sources = Vec::with_capacity(family.moves.len());
    let mut greatest = 0.0f64;
    for (i, m) in (0u32..).zip(&family.moves) {
        let segment = shifted(&m.segment, shift);
        let mut push = |segment: Segment| {
            local.moves.push(DiscMove { segment, ..*m });
            sources.push(i);
        };
        match segment {
            Segment::Arc(a) if a.residual() > 0.125 * coincidence => {
                greatest = greatest.max(a.residual());
                let (first, second) = a.seated();
                push(Segment::Arc(first));
                second.into_iter().for_each(|a| push(Segment::Arc(a)));
            }
            s => push(s),
        }
    }
    (local, sources, greatest)
}

/// A point near the middle of `bounds` whose coordinates have few digits, so that subtracting it from
/// any coordinate is exact: far from the origin no digit is lost before the work begins.
pub(crate) fn local_origin(bounds: Rect) -> Point {
    let size = bounds.width().max(bounds.height()).max(f64::MIN_POSITIVE);
    let grid = size.log2().ceil().exp2();
    let near = |v: f64| if v.abs() < 4.0 * grid { 0.0 } else { (v / grid).round() * grid };
    let c = bounds.center();
    Point::new(near(c.x), near(c.y))
}

/// The segment moved by `by`.
pub(crate) fn shifted(segment: &Segment, by: crate::geometry::Vec2) -> Segment {
    match segment {
        Segment::Line(l) => Segment::line(l.start + by, l.end + by),
        Segment::Arc(a) => Segment::Arc(Arc::from_parts(
            a.center() + by,
            a.radius(),
            a.start() + by,
            a.end() + by,
            a.sweep(),
        )),
    }
}

/// A strand's raw piece and the stretch of it, by parameters.
#[derive(Clone, Copy)]
struct Share {
    raw: u32,
    from: f64,
    to: f64,
    cut: [bool; 2],
}

fn sweep_local(family: &DiscFamily, tolerances: &Tolerances) -> Result<SweptRegion, SweepError> {
    let clearance = Clearance::new(family);
    let raw = RawEdge::new(family, tolerances.coincidence);
    let (strands, shares, places) = strands(&raw, family, &clearance, tolerances);
    let arrangement = Arrangement::new(&strands, places, tolerances.coincidence);
    let piece_of = |f: &Fragment| part_of(&strands, f);
    let mut choices: Vec<Choice> = arrangement
        .fragments
        .iter()
        .map(|f| decide(f, &strands, &shares, &raw, &clearance, tolerances))
        .collect();
    drop_twins(&mut choices, &piece_of, tolerances);
    balance(&mut choices, &arrangement.places, CHANGEABLE * tolerances.coincidence)
        .map_err(|e| SweepError { at: e.at })?;
    let rings = loops(&choices, piece_of);
    let mut region = SweptRegion::default();
    for ring in rings {
        let edge = EdgeLoop { pieces: pieces(&ring, &choices, &strands, &shares, &raw, &arrangement) };
        // Between two decisions within rounding a sliver may close upon itself: no wider than that.
        if edge.signed_area().abs() > edge.length() * SLIVER * tolerances.coincidence {
            region.loops.push(edge);
        }
    }
    Ok(region)
}

/// The parts of the raw edge that may be swept edge.
fn strands(
    raw: &RawEdge,
    family: &DiscFamily,
    clearance: &Clearance,
    tolerances: &Tolerances,
) -> (Vec<Strand>, Vec<Share>, Vec<Point>) {
    let mut places = raw.joints.clone();
    let mut strands = Vec::new();
    let mut shares = Vec::new();
    let mut open: Vec<Open> = Vec::new();
    for (i, piece) in (0u32..).zip(&raw.pieces) {
        open.clear();
        open_parts(&piece.segment, family, clearance, COVER_MARGIN * tolerances.coincidence, &mut open);
        for o in &open {
            let whole = o.from <= 0.0 && o.to >= 1.0;
            let segment = if whole { piece.segment } else { piece.segment.part(o.from, o.to) };
            if segment.length() <= tolerances.coincidence {
                continue;
            }
            let mut node = |cut: bool, joint: u32, at: Point| {
                if cut {
                    places.push(at);
                    places.len() as u32 - 1
                } else {
                    joint
                }
            };
            let nodes = [
                node(o.cut[0], piece.joints[0], segment.start()),
                node(o.cut[1], piece.joints[1], segment.end()),
            ];
            strands.push(Strand { segment, nodes });
            shares.push(Share { raw: i, from: o.from, to: o.to, cut: o.cut });
        }
    }
    drop_copies(&mut strands, &mut shares);
    (strands, shares, places)
}

/// Retraced moves make the very same strand again: one is enough, the first.
fn drop_copies(strands: &mut Vec<Strand>, shares: &mut Vec<Share>) {
    let key = |s: &Segment| {
        let p = |p: Point| [p.x.to_bits(), p.y.to_bits()];
        let round = match s {
            Segment::Line(_) => [0; 3],
            Segment::Arc(a) => [a.center().x.to_bits(), a.center().y.to_bits(), a.sweep().to_bits()],
        };
        (p(s.start()), p(s.end()), round)
    };
    let mut order: Vec<u32> = (0..strands.len() as u32).collect();
    order.sort_by_cached_key(|&i| (strands.get(i as usize).map(|s| key(&s.segment)), i));
    let mut copy = vec![false; strands.len()];
    for pair in order.windows(2) {
        if let [a, b] = pair {
            let same = match (strands.get(*a as usize), strands.get(*b as usize)) {
                (Some(x), Some(y)) => key(&x.segment) == key(&y.segment),
                _ => false,
            };
            if let (true, Some(c)) = (same, copy.get_mut(*b as usize)) {
                *c = true;
            }
        }
    }
    let mut flags = copy.iter();
    strands.retain(|_| !flags.next().copied().unwrap_or(false));
    let mut flags = copy.iter();
    shares.retain(|_| !flags.next().copied().unwrap_or(false));
}

/// The segment of a fragment, by its strand's parameters.
fn part_of(strands: &[Strand], f: &Fragment) -> Segment {
    match strands.get(f.strand as usize) {
        Some(s) if f.t[0] <= 0.0 && f.t[1] >= 1.0 => s.segment,
        Some(s) => s.segment.part(f.t[0], f.t[1]),
        None => Segment::line(Point::ZERO, Point::ZERO),
    }
}

/// Is a fragment edge? Its middle, moved out by the depth length, must be clear of every disc.
fn decide(
    f: &Fragment,
    strands: &[Strand],
    shares: &[Share],
    raw: &RawEdge,
    clearance: &Clearance,
    tolerances: &Tolerances,
) -> Choice {
    let buried = Choice { fragment: *f, kept: false, doubt: f64::INFINITY };
    let (Some(strand), Some(share)) = (strands.get(f.strand as usize), shares.get(f.strand as usize)) else {
        return buried;
    };
    let Some(piece) = raw.pieces.get(share.raw as usize) else { return buried };
    let middle = 0.5 * (f.t[0] + f.t[1]);
    let on_raw = share.from + middle * (share.to - share.from);
    let at = strand.segment.point_at(middle) + piece.outward_at(on_raw) * tolerances.depth;
    let clear = clearance.at(at).map_or(f64::INFINITY, |c| c.clearance);
    let stub = (share.cut[0] && f.t[0] <= 0.0) || (share.cut[1] && f.t[1] >= 1.0);
    let kept = clear > 0.0 && !stub;
    // A fragment in the open shows the full depth to well below what counts as coincident; leaving it
    // out would tear the edge by its length.
    let open = tolerances.depth - clear < 0.125 * tolerances.coincidence;
    let length = (f.t[1] - f.t[0]) * strand.segment.length();
    let doubt = if kept && open { clear + length } else { clear.abs() };
    Choice { fragment: *f, kept, doubt }
}

/// Fragments that run the same way between the same nodes over the same ground are one: the first.
fn drop_twins(choices: &mut [Choice], piece_of: &impl Fn(&Fragment) -> Segment, tolerances: &Tolerances) {
    let mut order: Vec<u32> = (0u32..).zip(choices.iter()).filter(|(_, c)| c.kept).map(|(i, _)| i).collect();
    order.sort_by_key(|&i| choices.get(i as usize).map(|c| (c.fragment.nodes, i)));
    let mut twins = Vec::new();
    let nodes = |i: u32| choices.get(i as usize).map(|c| c.fragment.nodes);
    for run in order.chunk_by(|&a, &b| nodes(a) == nodes(b)) {
        let mut first: Vec<Segment> = Vec::new();
        for &i in run {
            let Some(c) = choices.get(i as usize) else { continue };
            if run.len() == 1 {
                break;
            }
            let s = piece_of(&c.fragment);
            let middle = s.point_at(0.5);
            if first.iter().any(|k| k.distance(middle) <= 8.0 * tolerances.coincidence) {
                twins.push(i);
            } else {
                first.push(s);
            }
        }
    }
    for i in twins {
        if let Some(c) = choices.get_mut(i as usize) {
            c.kept = false;
            c.doubt = 0.0;
        }
    }
}

/// Pieces of one loop: fragments of one raw piece that follow one another are one piece again, and
/// every piece begins and ends at the place of its node.
fn pieces(
    ring: &[u32],
    choices: &[Choice],
    strands: &[Strand],
    shares: &[Share],
    raw: &RawEdge,
    arrangement: &Arrangement,
) -> Vec<EdgePiece> {
    /// A stretch of one raw piece between two nodes.
    struct Run<'a> {
        raw: u32,
        piece: &'a Raw,
        t: [f64; 2],
        nodes: [u32; 2],
    }
    let mut runs: Vec<Run> = Vec::with_capacity(ring.len());
    for &i in ring {
        let Some(c) = choices.get(i as usize) else { continue };
        let f = c.fragment;
        let Some((share, piece)) =
            shares.get(f.strand as usize).and_then(|s| Some((s, raw.pieces.get(s.raw as usize)?)))
        else {
            continue;
        };
        if strands.get(f.strand as usize).is_none() {
            continue;
        }
        let on_raw = |t: f64| share.from + t * (share.to - share.from);
        let t = [on_raw(f.t[0]), on_raw(f.t[1])];
        match runs.last_mut() {
            Some(last) if last.raw == share.raw && last.nodes[1] == f.nodes[0] && last.t[1] <= t[0] => {
                last.t[1] = t[1];
                last.nodes[1] = f.nodes[1];
            }
            _ => runs.push(Run { raw: share.raw, piece, t, nodes: f.nodes }),
        }
    }
    // The loop may begin within a raw piece: its last stretch then runs on into its first.
    let wraps = match (runs.first(), runs.last()) {
        (Some(a), Some(b)) => runs.len() > 1 && a.raw == b.raw && b.t[1] <= a.t[0],
        _ => false,
    };
    if wraps
        && let Some(last) = runs.pop()
        && let Some(first) = runs.first_mut()
    {
        first.t[0] = last.t[0];
        first.nodes[0] = last.nodes[0];
    }
    let place = |n: u32| arrangement.places.get(n as usize).copied().unwrap_or(Point::ZERO);
    runs.iter()
        .map(|r| EdgePiece {
            segment: between(&r.piece.segment, r.t, place(r.nodes[0]), place(r.nodes[1])),
            source: r.piece.source as usize,
        })
        .collect()
}

/// The part of `segment` between two parameters, led exactly from `start` to `end`.
pub(crate) fn between(segment: &Segment, t: [f64; 2], start: Point, end: Point) -> Segment {
    match segment {
        Segment::Line(_) => Segment::line(start, end),
        Segment::Arc(a) => {
            Segment::Arc(Arc::from_parts(a.center(), a.radius(), start, end, a.sweep() * (t[1] - t[0])))
        }
    }
}
