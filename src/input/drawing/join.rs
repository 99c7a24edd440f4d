//! Loose strands of a drawing, in any order and direction, joined into loops and chains.
//!
//! Ends that agree to what a file of six decimals can say are one node. An end left alone is then
//! joined with the nearest other lone end within the gap the user allows, the nearest pairs first;
//! every gap closed so is counted and told. Three ends at one node, or lone ends that almost meet,
//! are refused with their places: which way the wall runs there is for the drawing to say.
//!
//! ```text
//!   a ----.  .---- b      lone ends nearer than the gap: joined, the line's end moves to the arc's
//!   c --------+---- d     a third end at a node: refused
//! ```

use std::collections::HashMap;

use super::nodes::{End, Nodes, WhichEnd};
use crate::geometry::{Arc, Path, Point, Segment};
use crate::input::{Place, Problem, Refusal};
use crate::part::Origin;

/// One entity of a drawing: segments that already hang together.
#[derive(Clone, Debug, PartialEq)]
pub struct Strand {
    /// Its segments in order, joints exact.
    pub segments: Vec<Segment>,
    /// Does the entity itself say that it is closed?
    pub closed: bool,
    /// Layer, group or id.
    pub layer: Option<String>,
    /// Where it stands in the file.
    pub place: Place,
}

/// Lengths that decide what is joined, in the drawing's unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Gaps {
    /// Greatest gap that is closed.
    pub join: f64,
    /// Ends nearer than this are the same point written twice: a file of six decimals scatters them by
    /// 1.4e-6 at most. Never more than `join`.
    pub same: f64,
    /// Lone ends nearer than this are taken for a mistake and refused.
    pub almost: f64,
}

impl Gaps {
    /// Lengths for a drawing whose unit has `in_mm` millimetres; `join` 0 takes the default.
    #[must_use]
    pub fn new(join: f64, in_mm: f64) -> Self {
        let join = if join > 0.0 && join.is_finite() { join } else { crate::tolerance::JOIN_GAP_MM / in_mm };
        Self { join, same: join.min(2e-6), almost: (1.0 / in_mm).max(2.0 * join) }
    }
}

/// What joining gives.
#[derive(Clone, Debug, PartialEq)]
pub struct Joined {
    /// Loops and chains, in the order of their first strand in the file and in its direction.
    pub paths: Vec<Path>,
    /// Provenance of each.
    pub origins: Vec<Origin>,
    /// Greatest distance by which an end was moved to make joints agree.
    pub moved: f64,
    /// Warnings: gaps closed, strands dropped.
    pub problems: Vec<Problem>,
}

/// Loops and chains of `strands`. Near-linear in their number.
///
/// # Errors
/// Three or more ends at one place, and ends that almost meet, each with place and advice.
pub fn join(strands: Vec<Strand>, gaps: Gaps, file: &str) -> Result<Joined, Refusal> {
    let mut problems = Vec::new();
    let strands = without_points(strands, gaps, &mut problems);
    let nodes = Nodes::same_ends(&strands, gaps.same);
    let strands = without_copies(strands, &nodes, gaps, &mut problems);
    let mut nodes = Nodes::same_ends(&strands, gaps.same);
    nodes.join_lone_ends(&strands, gaps, file)?;
    // Chains can be walked only where no node has a third end.
    refuse_forks(&strands, &nodes.forks())?;
    refuse_forks(&strands, &nodes.docked(&strands, gaps))?;
    refuse_near_misses(&strands, &nodes, gaps, file)?;
    if let Some(told) = nodes.closed_gaps(&strands, file) {
        problems.push(told);
    }
    assemble(strands, &nodes, gaps, problems)
}

/// Drops segments without length, and strands that have none left.
fn without_points(strands: Vec<Strand>, gaps: Gaps, problems: &mut Vec<Problem>) -> Vec<Strand> {
    let mut dropped = Vec::new();
    let kept = strands
        .into_iter()
        .filter_map(|mut s| {
            let count = s.segments.len();
            s.segments.retain(|s| s.start() != s.end() || s.length() > 0.0);
            let nothing = s.segments.iter().map(Segment::length).sum::<f64>() <= 2.0 * gaps.same;
            if nothing || s.segments.len() < count {
                dropped.push(s.place.clone());
            }
            (!nothing).then_some(s)
        })
        .collect();
    tell_dropped(dropped, "(or a piece of one) without length", "nothing: they bound no wall", problems);
    kept
}

/// Drops strands that lie on an earlier one from end to end, in either direction.
fn without_copies(
    strands: Vec<Strand>,
    nodes: &Nodes,
    gaps: Gaps,
    problems: &mut Vec<Problem>,
) -> Vec<Strand> {
    let mut seen: HashMap<(usize, usize), Vec<usize>> = HashMap::new();
    let mut keep = vec![true; strands.len()];
    let mut dropped = Vec::new();
    for (i, s) in strands.iter().enumerate() {
        let (a, b) = (nodes.of(i, WhichEnd::Start), nodes.of(i, WhichEnd::End));
        let alike = seen.entry((a.min(b), a.max(b))).or_default();
        // Only as many as a drawing can mean are compared; a pile of them is refused as a fork later.
        if alike.iter().take(16).any(|&j| strands.get(j).is_some_and(|o| lie_on_one_another(o, s, gaps.same)))
        {
            if let Some(k) = keep.get_mut(i) {
                *k = false;
            }
            dropped.push(s.place.clone());
        } else {
            alike.push(i);
        }
    }
    tell_dropped(dropped, "drawn twice", "nothing: one copy was kept; delete the others", problems);
    strands.into_iter().zip(keep).filter_map(|(s, k)| k.then_some(s)).collect()
}

/// Do two strands agree segment by segment, forwards or backwards, within `same`?
fn lie_on_one_another(a: &Strand, b: &Strand, same: f64) -> bool {
    let agree = |x: &Segment, y: &Segment| {
        [0.0, 0.5, 1.0].iter().all(|&t| (x.point_at(t) - y.point_at(t)).hypot() <= 2.0 * same)
    };
    let forwards = || a.segments.iter().zip(&b.segments).all(|(x, y)| agree(x, y));
    let backwards = || a.segments.iter().zip(b.segments.iter().rev()).all(|(x, y)| agree(x, &y.reversed()));
    a.segments.len() == b.segments.len() && (forwards() || backwards())
}

fn tell_dropped(dropped: Vec<Place>, what: &str, help: &str, problems: &mut Vec<Problem>) {
    let count = dropped.len();
    if let Some(first) = dropped.into_iter().next() {
        let found = match count {
            1 => format!("an entity {what} was left out"),
            _ => format!("{count} entities {what} were left out, the first one here"),
        };
        problems.push(Problem::warning(first, found, "", help));
    }
}

/// How many places of one kind of mistake are listed before the rest is only counted.
const LISTED: usize = 8;

fn refuse_forks(strands: &[Strand], forks: &[Vec<End>]) -> Result<(), Refusal> {
    let mut refusal: Refusal = forks
        .iter()
        .take(LISTED)
        .filter_map(|ends| {
            let (i, end) = *ends.first()?;
            let strand = strands.get(i)?;
            let at = end.of(strand)?;
            let lines: Vec<String> = ends
                .iter()
                .filter_map(|e| strands.get(e.0)?.place.line)
                .take(LISTED)
                .map(|l| l.to_string())
                .collect();
            let lines =
                if lines.is_empty() { String::new() } else { format!(" (lines {})", lines.join(", ")) };
            Some(Problem::error(
                strand.place.clone(),
                format!("{} ends meet at ({:.6}, {:.6}){lines}", ends.len(), at.x, at.y),
                "two ends at every corner of a contour",
                "delete the construction line or centre line that ends there, or take only the layer of the \
                 finished contour (--layer)",
            ))
        })
        .collect();
    count_the_rest(&mut refusal, forks.len(), "places where three or more ends meet");
    if refusal.is_empty() { Ok(()) } else { Err(refusal) }
}

fn refuse_near_misses(strands: &[Strand], nodes: &Nodes, gaps: Gaps, file: &str) -> Result<(), Refusal> {
    let misses = nodes.near_misses(strands, gaps);
    let mut refusal: Refusal = misses
        .iter()
        .take(LISTED)
        .map(|miss| {
            let place = strands.get(miss.strand).map_or_else(|| Place::file(file), |s| s.place.clone());
            let (a, b) = (miss.ends.0, miss.ends.1);
            Problem::error(
                place,
                format!(
                    "the contour does not close: its ends at ({:.6}, {:.6}) and ({:.6}, {:.6}) are {:.6} apart",
                    a.x,
                    a.y,
                    b.x,
                    b.y,
                    (a - b).hypot()
                ),
                format!("ends that meet, or lie within {} of one another", gaps.join),
                "close the gap in the drawing (extend or trim both entities to their common point), or take only \
                 the layer of the finished contour (--layer)",
            )
        })
        .collect();
    count_the_rest(&mut refusal, misses.len(), "gaps");
    if refusal.is_empty() { Ok(()) } else { Err(refusal) }
}

fn count_the_rest(refusal: &mut Refusal, count: usize, what: &str) {
    if count > LISTED
        && let Some(last) = refusal.last_mut()
    {
        last.help = format!("{}; {} more {what} are not listed", last.help, count - LISTED);
    }
}

/// Walks from strand to strand over the nodes.
fn assemble(
    mut strands: Vec<Strand>,
    nodes: &Nodes,
    gaps: Gaps,
    problems: Vec<Problem>,
) -> Result<Joined, Refusal> {
    let mut used = vec![false; strands.len()];
    let mut joined = Joined { paths: Vec::new(), origins: Vec::new(), moved: 0.0, problems };
    for first in 0..strands.len() {
        if used.get(first).copied().unwrap_or(true) {
            continue;
        }
        let (chain, closed) = nodes.chain_from(first);
        for &(i, _) in &chain {
            if let Some(u) = used.get_mut(i) {
                *u = true;
            }
        }
        let mut segments: Vec<Segment> = Vec::new();
        for &(i, entered) in &chain {
            // Every strand belongs to one chain only.
            let Some(own) = strands.get_mut(i).map(|s| std::mem::take(&mut s.segments)) else { continue };
            match entered {
                WhichEnd::Start if segments.is_empty() => segments = own,
                WhichEnd::Start => segments.extend_from_slice(&own),
                WhichEnd::End => segments.extend(own.iter().rev().map(Segment::reversed)),
            }
        }
        let Some(strand) = strands.get(first) else { continue };
        let closed = closed || strand.closed;
        let moved = agree_joints(&mut segments, closed, gaps.join);
        let path = moved.and_then(|moved| {
            joined.moved = joined.moved.max(moved);
            segments.retain(|s| s.start() != s.end() || matches!(s, Segment::Arc(_)));
            Path::new(segments, closed).ok()
        });
        let Some(path) = path else {
            return Err(vec![Problem::error(
                strand.place.clone(),
                "the ends of an arc here cannot be made to meet their neighbours",
                "arcs longer than the gaps beside them",
                "redraw the short arc, or trim its neighbours to it",
            )]);
        };
        joined.paths.push(path);
        let place = &strand.place;
        joined.origins.push(Origin {
            file: place.file.clone(),
            layer: strand.layer.clone(),
            line: place.line,
        });
    }
    Ok(joined)
}

/// Moves ends so that every joint agrees exactly; gives the greatest distance moved, or nothing when
/// an arc cannot follow. A line's end goes to the arc's; two lines, or two arcs, meet in the middle.
fn agree_joints(segments: &mut [Segment], closed: bool, gap: f64) -> Option<f64> {
    let count = segments.len();
    let joints = if closed { count } else { count.saturating_sub(1) };
    let agree =
        |a: usize| segments.get(a).map(Segment::end) == segments.get((a + 1) % count).map(Segment::start);
    if (0..joints).all(agree) {
        return Some(0.0);
    }
    let mut wanted: Vec<(Point, Point)> = segments.iter().map(|s| (s.start(), s.end())).collect();
    let mut moved: f64 = 0.0;
    for a in 0..joints {
        let b = (a + 1) % count;
        let (sa, sb) = (segments.get(a)?, segments.get(b)?);
        let (from, to) = (sa.end(), sb.start());
        if from == to {
            continue;
        }
        let point = match (sa, sb) {
            (Segment::Line(_), Segment::Arc(_)) => to,
            (Segment::Arc(_), Segment::Line(_)) => from,
            _ => from.midpoint(to),
        };
        moved = moved.max((point - from).hypot()).max((point - to).hypot());
        wanted.get_mut(a)?.1 = point;
        wanted.get_mut(b)?.0 = point;
    }
    for (s, (start, end)) in segments.iter_mut().zip(wanted) {
        if s.start() != start || s.end() != end {
            *s = with_ends(s, start, end, gap)?;
        }
    }
    Some(moved)
}

/// The segment with other ends, an arc about the same centre the same way round.
fn with_ends(segment: &Segment, start: Point, end: Point, gap: f64) -> Option<Segment> {
    match segment {
        Segment::Line(_) => Some(Segment::line(start, end)),
        Segment::Arc(a) => {
            let allowed = 2.0 * gap + a.residual();
            let arc = Arc::from_center(a.center(), start, end, a.turn(), allowed).ok()?;
            // Ends that slid past one another would turn a short arc into nearly a full turn, or back.
            let kept = (arc.sweep() - a.sweep()).abs() <= std::f64::consts::PI;
            kept.then_some(Segment::Arc(arc))
        }
    }
}

#[cfg(test)]
mod tests;
