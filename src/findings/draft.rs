//! A finding in the making: what was measured, why it came about, and with which others it is one.

use super::corner::Tight;
use super::moves::{Chords, Run};
use super::walls::Walls;
use super::{Cause, Kind};
use crate::compare::{ContourStretch, Figure, FoldKind, Region};
use crate::geometry::Point;

/// Two steps or radii are the same when they differ by less than this fraction.
const SAME_SIZE: f64 = 0.05;

/// Moves remembered for one finding: more than are ever named, since several share a block.
const MOST_CULPRITS: usize = 16;

/// Why a finding came about, with what its remedy needs.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Diagnosis {
    /// The place is tighter than the cutter.
    Tight(Tight),
    /// The fold at this position of the comparison's folds bites.
    Fold { fold: usize, kind: FoldKind, radius: f64, at: Point, moves: (usize, usize) },
    /// The deviation is the same along most of the contour.
    Constant { median: f64, share: f64 },
    /// Chords too long for the limit.
    Chords(Chords),
    /// A crest between two passes that stand `step` apart.
    Crest { step: f64 },
    /// A stretch of wall that no pass runs along; `distance` of the nearest move's centre.
    NoPass { distance: f64 },
    /// An uncut spot of an open area.
    Spot,
    /// No move comes near the whole path.
    NeverVisited,
    /// First (`entry`) or last move of a cut reaches too far.
    EntryTooDeep { entry: bool, run: Run },
    /// A cut begins too late (`entry`) or ends too early.
    CutTooShort { entry: bool, run: Run },
    /// A rapid into the part.
    Rapid,
    /// A fold told as a note.
    FoldNote { kind: FoldKind, radius: f64 },
    /// An arc turns left (`left`) where it should turn right, or the reverse.
    WrongWay { left: bool },
    /// A pass, or an end of one, too near to the wall or too far from it.
    OffPath,
    /// The path turns in a sharp corner where an arc of this radius would follow the fillet of the wall.
    SharpTurn { radius: f64 },
    /// A cut begins and ends without meeting its own beginning.
    Gap { first: usize, last: usize },
    /// Geometry names no cause.
    Unknown,
}

impl Diagnosis {
    pub(super) const fn cause(&self) -> Cause {
        match self {
            Self::Tight(_) => Cause::InsideCorner,
            Self::Fold { kind: FoldKind::Loop, .. } | Self::FoldNote { kind: FoldKind::Loop, .. } => {
                Cause::FoldLeftInPath
            }
            Self::Fold { .. } | Self::FoldNote { .. } => Cause::TightTurn,
            Self::Constant { .. } => Cause::WrongDiameter,
            Self::Chords(_) => Cause::ChordsTooLong,
            Self::Crest { .. } | Self::NoPass { .. } | Self::Spot => Cause::MissedPass,
            Self::NeverVisited => Cause::NeverVisited,
            Self::EntryTooDeep { .. } | Self::CutTooShort { .. } | Self::Gap { .. } => Cause::EntryOrExit,
            Self::Rapid => Cause::RapidThroughPart,
            Self::WrongWay { .. } => Cause::ArcWrongWay,
            Self::OffPath | Self::SharpTurn { .. } => Cause::PathOffContour,
            Self::Unknown => Cause::Unknown,
        }
    }

    /// Findings with different numbers are never one.
    fn group(&self) -> f64 {
        match *self {
            Self::Fold { fold, .. } => fold as f64,
            Self::FoldNote { radius, .. } => radius,
            Self::EntryTooDeep { entry, run } | Self::CutTooShort { entry, run } => {
                if entry {
                    run.first as f64
                } else {
                    run.last as f64
                }
            }
            _ => 0.0,
        }
    }
}

/// A finding in the making.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Draft {
    pub kind: Kind,
    pub figure: Figure,
    pub limit: Option<f64>,
    pub at: Point,
    pub center: Option<Point>,
    pub center_inside: bool,
    pub region: Option<Region>,
    pub contour: Option<ContourStretch>,
    /// Moves to blame with their sizes: positions in the rapids for [`Kind::Rapid`], else in what cuts.
    pub culprits: Vec<(f64, usize)>,
    /// First and last move concerned.
    pub moves: (usize, usize),
    /// Radius of the cutter there.
    pub radius: f64,
    pub diagnosis: Diagnosis,
    /// How many measured places it stands for.
    pub count: usize,
}

impl Draft {
    /// The move to blame first.
    pub(super) fn worst_move(&self) -> usize {
        self.culprits.first().map_or(self.moves.0, |c| c.1)
    }

    /// Drafts that can be one lie next to one another in this order.
    fn order(&self, other: &Self) -> std::cmp::Ordering {
        let path = |d: &Self| d.contour.map_or(usize::MAX, |c| c.path);
        let along = |d: &Self| d.contour.map_or(d.moves.0 as f64, |c| c.from);
        (self.kind, self.diagnosis.cause())
            .cmp(&(other.kind, other.diagnosis.cause()))
            .then(self.diagnosis.group().total_cmp(&other.diagnosis.group()))
            .then(path(self).cmp(&path(other)))
            .then(along(self).total_cmp(&along(other)))
    }

    /// Is `other`, which comes later in that order, the same fault at a neighbouring place?
    fn is_one_with(&self, other: &Self, walls: &Walls<'_>) -> bool {
        if (self.kind, self.diagnosis.cause()) != (other.kind, other.diagnosis.cause()) {
            return false;
        }
        match (&self.diagnosis, &other.diagnosis) {
            (Diagnosis::Constant { .. }, Diagnosis::Constant { .. }) => true,
            (Diagnosis::Fold { fold: a, .. }, Diagnosis::Fold { fold: b, .. }) => a == b,
            (Diagnosis::FoldNote { kind: a, radius: ra }, Diagnosis::FoldNote { kind: b, radius: rb }) => {
                a == b && alike(*ra, *rb)
            }
            (Diagnosis::Tight(a), Diagnosis::Tight(b)) => {
                same_place(a, b, self, other) && self.is_near(other, 0.1 * self.radius, walls)
            }
            (Diagnosis::Chords(a), Diagnosis::Chords(b)) => {
                self.is_near(other, self.radius.max(1.5 * a.length.max(b.length)), walls)
            }
            (Diagnosis::Crest { step: a }, Diagnosis::Crest { step: b }) => {
                alike(*a, *b) && self.is_near(other, self.radius.max(2.0 * a.max(*b)), walls)
            }
            (Diagnosis::EntryTooDeep { run: a, entry: x }, Diagnosis::EntryTooDeep { run: b, entry: y })
            | (Diagnosis::CutTooShort { run: a, entry: x }, Diagnosis::CutTooShort { run: b, entry: y }) => {
                (a, x) == (b, y)
            }
            (Diagnosis::NeverVisited, _) | (_, Diagnosis::NeverVisited) => false,
            (Diagnosis::Rapid, Diagnosis::Rapid) => other.moves.0 <= self.moves.1.saturating_add(1),
            (a, b) => {
                std::mem::discriminant(a) == std::mem::discriminant(b)
                    && self.is_near(other, self.radius, walls)
            }
        }
    }

    /// Nearer than `within` along the contour, or in the plane where one lies on no contour.
    fn is_near(&self, other: &Self, within: f64, walls: &Walls<'_>) -> bool {
        match (&self.contour, &other.contour) {
            (Some(a), Some(b)) => walls.gap(a, b).is_some_and(|gap| gap < within),
            _ => (self.at - other.at).hypot() < within,
        }
    }

    /// Both as one: the worse figure and place stand, stretches and regions grow.
    fn joined(self, other: Self, walls: &Walls<'_>) -> Self {
        let (mut worse, mut lesser) = if other.figure.size.total_cmp(&self.figure.size).is_gt() {
            (other, self)
        } else {
            (self, other)
        };
        worse.contour = match (worse.contour, lesser.contour) {
            (Some(a), Some(b)) if a.path == b.path => Some(hull(&a, &b, walls)),
            (a, b) => a.or(b),
        };
        worse.moves = (worse.moves.0.min(lesser.moves.0), worse.moves.1.max(lesser.moves.1));
        worse.count = worse.count.saturating_add(lesser.count);
        worse.culprits.append(&mut lesser.culprits);
        worse.culprits.sort_by(|a, b| b.0.total_cmp(&a.0));
        worse.culprits.truncate(MOST_CULPRITS);
        worse.region = match (worse.region, lesser.region) {
            (Some(mut a), Some(b)) => {
                a.area += b.area;
                a.outline.extend(b.outline);
                Some(a)
            }
            (a, b) => a.or(b),
        };
        worse
    }
}

fn alike(a: f64, b: f64) -> bool {
    (a - b).abs() <= SAME_SIZE * a.abs().max(b.abs())
}

/// Two tight places are one when it is the same corner, or the same wall.
fn same_place(a: &Tight, b: &Tight, first: &Draft, second: &Draft) -> bool {
    match (a, b) {
        (Tight::Sharp { at: p, .. }, Tight::Sharp { at: q, .. }) => {
            (*p - *q).hypot() <= 1e-3 * first.radius.min(second.radius)
        }
        (a, b) => std::mem::discriminant(a) == std::mem::discriminant(b),
    }
}

/// The stretch that covers both, the shorter way round on a loop.
fn hull(a: &ContourStretch, b: &ContourStretch, walls: &Walls<'_>) -> ContourStretch {
    let (first, last) = if a.from <= b.from { (a, b) } else { (b, a) };
    let straight = ContourStretch { path: a.path, from: first.from, to: first.to.max(last.to) };
    if !walls.is_closed(a.path) {
        return straight;
    }
    let length = walls.path_length(a.path);
    let over_start = ContourStretch { path: a.path, from: last.from, to: last.to.max(first.to + length) };
    let mut shorter = straight;
    if over_start.to - over_start.from < straight.to - straight.from {
        shorter = over_start;
    }
    shorter.to = shorter.to.min(shorter.from + length);
    shorter
}

/// Neighbouring drafts of one cause made one, at their worst place.
pub(super) fn merged(mut drafts: Vec<Draft>, walls: &Walls<'_>) -> Vec<Draft> {
    drafts.sort_by(Draft::order);
    let mut out: Vec<Draft> = Vec::with_capacity(drafts.len());
    for draft in drafts {
        let draft = match out.pop() {
            Some(last) if last.is_one_with(&draft, walls) => last.joined(draft, walls),
            Some(last) => {
                out.push(last);
                draft
            }
            None => draft,
        };
        out.push(draft);
    }
    join_over_starts(out, walls)
}

/// On a loop the last finding may go on in the first one, over the loop's start.
fn join_over_starts(drafts: Vec<Draft>, walls: &Walls<'_>) -> Vec<Draft> {
    let mut out: Vec<Draft> = Vec::with_capacity(drafts.len());
    let mut first_of_path = 0;
    for draft in drafts {
        let same_path = out.get(first_of_path).is_some_and(|f| {
            (f.kind, f.diagnosis.cause(), f.contour.map(|c| c.path))
                == (draft.kind, draft.diagnosis.cause(), draft.contour.map(|c| c.path))
        });
        if !same_path {
            first_of_path = out.len();
        }
        let closed = draft.contour.is_some_and(|c| walls.is_closed(c.path));
        let goes_on = closed && out.get(first_of_path).is_some_and(|f| f.is_one_with(&draft, walls));
        if goes_on {
            // Few findings follow the first one of a path, so taking it out and in again is cheap.
            let first = out.remove(first_of_path);
            out.insert(first_of_path, first.joined(draft, walls));
        } else {
            out.push(draft);
        }
    }
    out
}
