//! The union of all discs of a family, by its boundary.
//!
//! The swept region is the union of the discs; its edge consists of parts of the raw edge, the
//! parallels of the moves and the arcs round joints and ends, on which no other disc reaches: D = 0
//! there. So: raw edge, less what one clearance question shows to be covered, cut where it meets
//! itself, kept where D = 0 just outside, linked by node numbers.

use crate::geometry::{Arc, Point, Segment};
use crate::tolerance::Tolerances;
use crate::view::DiscFamily;

use super::arrangement::Arrangement;
use super::clearance::Clearance;
use super::link::{Choice, balance, loops};
use super::raw::{Raw, RawEdge};
use super::region::{EdgeLoop, EdgePiece, SweptRegion};
use super::seat::{Seated, local_origin};
use super::strands::Strands;

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
    let seated = Seated::new(family, shift, Tolerances::for_extent(extent).coincidence);
    let mut tries = 0;
    let (mut region, tolerances) = loop {
        let tolerances = Tolerances::for_extent(extent);
        match sweep_local(&seated.local, &tolerances) {
            Ok(region) => break (region, tolerances),
            Err(e) if tries == COARSER_TRIES => return Err(SweepError { at: e.at - shift }),
            Err(_) => {
                tries += 1;
                extent *= COARSER;
            }
        }
    };
    region.loops = region.loops.into_iter().map(|l| seated.restore(l, family, shift)).collect();
    region.bound = 8.0 * tolerances.coincidence + 4.0 * f64::EPSILON * far + 2.0 * seated.residual;
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

fn sweep_local(family: &DiscFamily, tolerances: &Tolerances) -> Result<SweptRegion, SweepError> {
    let clearance = Clearance::new(family);
    let raw = RawEdge::new(family, tolerances.coincidence);
    let mut strands = Strands::new(&raw, family, &clearance, tolerances);
    let places = std::mem::take(&mut strands.places);
    let arrangement = Arrangement::new(&strands.strands, places, tolerances.coincidence);
    let mut choices = strands.decide(&arrangement.fragments, |n| arrangement.one(n), &clearance, tolerances);
    balance(&mut choices, &arrangement.places, CHANGEABLE * tolerances.coincidence)
        .map_err(|e| SweepError { at: e.at })?;
    let rings = loops(&choices, |f, t| strands.tangent(f, t));
    let mut region = SweptRegion::default();
    for ring in rings {
        let edge = EdgeLoop { pieces: pieces(&ring, &choices, &strands, &arrangement) };
        // Between two decisions within rounding a sliver may close upon itself: no wider than that.
        if edge.signed_area().abs() > edge.length() * SLIVER * tolerances.coincidence {
            region.loops.push(edge);
        }
    }
    Ok(region)
}

/// A stretch of one raw piece between two nodes, or several pieces that nothing reaches.
enum Laid<'a> {
    Part { raw: u32, piece: &'a Raw, t: [f64; 2], nodes: [u32; 2] },
    Whole { pieces: &'a [Raw], nodes: [u32; 2] },
}

/// Pieces of one loop: fragments of one raw piece that follow one another are one piece again, and
/// every piece begins and ends at the place of its node.
fn pieces(ring: &[u32], choices: &[Choice], strands: &Strands, arrangement: &Arrangement) -> Vec<EdgePiece> {
    let mut laid: Vec<Laid> = Vec::with_capacity(ring.len());
    for &i in ring {
        let Some(f) = choices.get(i as usize).map(|c| c.fragment) else { continue };
        if let Some(stretch) = strands.stretch_of(&f) {
            let pieces = strands.raw.pieces.get(stretch.pieces.clone()).unwrap_or_default();
            laid.push(Laid::Whole { pieces, nodes: f.nodes });
            continue;
        }
        let Some(share) = strands.shares.get(f.strand as usize) else { continue };
        let Some(piece) = strands.raw.pieces.get(share.raw as usize) else { continue };
        let on_raw = |t: f64| share.from + t * (share.to - share.from);
        let new = f.t.map(on_raw);
        match laid.last_mut() {
            Some(Laid::Part { raw, t, nodes, .. })
                if *raw == share.raw && nodes[1] == f.nodes[0] && t[1] <= new[0] =>
            {
                t[1] = new[1];
                nodes[1] = f.nodes[1];
            }
            _ => laid.push(Laid::Part { raw: share.raw, piece, t: new, nodes: f.nodes }),
        }
    }
    join_ends(&mut laid);
    lay(&laid, arrangement)
}

/// The loop may begin within a raw piece: its last stretch then runs on into its first.
fn join_ends(laid: &mut Vec<Laid>) {
    let start = match (laid.first(), laid.last()) {
        (Some(Laid::Part { raw: a, t: ta, .. }), Some(Laid::Part { raw: b, t: tb, nodes, .. }))
            if laid.len() > 1 && a == b && tb[1] <= ta[0] =>
        {
            (tb[0], nodes[0])
        }
        _ => return,
    };
    laid.pop();
    if let Some(Laid::Part { t, nodes, .. }) = laid.first_mut() {
        t[0] = start.0;
        nodes[0] = start.1;
    }
}

fn lay(laid: &[Laid], arrangement: &Arrangement) -> Vec<EdgePiece> {
    let place = |n: u32| arrangement.places.get(n as usize).copied().unwrap_or(Point::ZERO);
    let count = laid.iter().map(|l| if let Laid::Whole { pieces, .. } = l { pieces.len() } else { 1 }).sum();
    let mut out = Vec::with_capacity(count);
    for l in laid {
        match l {
            Laid::Part { piece, t, nodes, .. } => out.push(EdgePiece {
                segment: between(&piece.segment, *t, place(nodes[0]), place(nodes[1])),
                source: piece.source as usize,
            }),
            Laid::Whole { pieces, nodes } => {
                let first = out.len();
                out.extend(
                    pieces.iter().map(|p| EdgePiece { segment: p.segment, source: p.source as usize }),
                );
                if let Some(p) = out.get_mut(first) {
                    p.segment = between(&p.segment, [0.0, 1.0], place(nodes[0]), p.segment.end());
                }
                if let Some(p) = out.last_mut() {
                    p.segment = between(&p.segment, [0.0, 1.0], p.segment.start(), place(nodes[1]));
                }
            }
        }
    }
    out
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
