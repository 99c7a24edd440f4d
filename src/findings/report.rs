//! What every output format renders: one plain model, complete, with nothing left to compute.

use crate::compare::{ContourStretch, Figure, Region};
use crate::envelope::SweptRegion;
use crate::geometry::{Contour, Point, Segment};
use crate::input::Problem;
use crate::program::Unit;

/// What kind of fault or remark a finding is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Kind {
    /// The cutter reaches past the contour into the part.
    Gouge,
    /// A rapid move meets the part.
    Rapid,
    /// Material left standing.
    Excess,
    /// A crest left between two passes.
    Cusp,
    /// The path turns more tightly than the cutter's radius.
    Fold,
}

impl Kind {
    /// Name in every report.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Gouge => "gouge",
            Self::Rapid => "rapid",
            Self::Excess => "excess",
            Self::Cusp => "cusp",
            Self::Fold => "fold",
        }
    }
}

/// Does a finding decide the verdict?
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// Over its limit, or a rapid into the part.
    Fault,
    /// Worth knowing, decides nothing.
    Note,
}

impl Severity {
    /// Name in every report.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Fault => "fault",
            Self::Note => "note",
        }
    }
}

/// Why a finding came about, as far as geometry tells.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Cause {
    /// An inside corner of the contour is tighter than the cutter.
    InsideCorner,
    /// The path still holds the loop of a folded offset.
    FoldLeftInPath,
    /// The cutter is larger or smaller than the program assumes.
    WrongDiameter,
    /// Curves were cut into chords that are too long.
    ChordsTooLong,
    /// A pass is missing or stands too far from the next one.
    MissedPass,
    /// The program never comes near this loop.
    NeverVisited,
    /// The move that leads onto or off the contour.
    EntryOrExit,
    /// A rapid move runs through the part.
    RapidThroughPart,
    /// The path turns more tightly than the cutter's radius.
    TightTurn,
    /// The path does not keep the cutter's radius from the contour.
    PathOffContour,
    /// An arc turns the wrong way: G2 in place of G3, or the reverse.
    ArcWrongWay,
    /// None that geometry could name.
    Unknown,
}

impl Cause {
    /// Name in every report.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::InsideCorner => "inside-corner",
            Self::FoldLeftInPath => "fold-left-in-path",
            Self::WrongDiameter => "wrong-diameter",
            Self::ChordsTooLong => "chords-too-long",
            Self::MissedPass => "missed-pass",
            Self::NeverVisited => "never-visited",
            Self::EntryOrExit => "entry-or-exit",
            Self::RapidThroughPart => "rapid-through-part",
            Self::TightTurn => "tight-turn",
            Self::PathOffContour => "path-off-contour",
            Self::ArcWrongWay => "arc-wrong-way",
            Self::Unknown => "unknown",
        }
    }
}

/// A block of the program that a finding points to.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct BlockRef {
    /// File as the user named it.
    pub file: String,
    /// Line, from 1.
    pub line: usize,
    /// Text of the line.
    pub text: String,
}

/// One fault or note.
#[derive(Clone, Debug, PartialEq)]
pub struct Finding {
    /// What it is.
    pub kind: Kind,
    /// Fault or note.
    pub severity: Severity,
    /// Its greatest size and the bound on that.
    pub figure: Figure,
    /// The limit it is held against; `None` for notes without one.
    pub limit: Option<f64>,
    /// False when the figure's interval contains the limit.
    pub decided: bool,
    /// Where on the part.
    pub at: Point,
    /// Centre of the cutter at that place, where one is meant.
    pub center: Option<Point>,
    /// What is cut away or left; `None` where it has no bounded outline.
    pub region: Option<Region>,
    /// Where along the contour.
    pub contour: Option<ContourStretch>,
    /// Blocks that cause it, the worst first.
    pub blocks: Vec<BlockRef>,
    /// Why.
    pub cause: Cause,
    /// What is wrong, one or two sentences with figures and unit.
    pub message: String,
    /// What to change, in numbers.
    pub remedy: String,
}

/// Limits for acceptance, lengths in the report's unit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Limits {
    /// Greatest gouge allowed.
    pub gouge: f64,
    /// Greatest excess allowed.
    pub excess: f64,
    /// Greatest cusp allowed.
    pub cusp: f64,
    /// True when the user stated none and the default stands.
    pub assumed: bool,
}

/// Greatest size of each kind, within its limit or not; `None`: not looked for.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Worst {
    /// Greatest gouge.
    pub gouge: Option<Figure>,
    /// Greatest excess.
    pub excess: Option<Figure>,
    /// Greatest cusp.
    pub cusp: Option<Figure>,
}

/// The answer.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Verdict {
    /// Every figure is certainly within its limit.
    Pass,
    /// A figure is certainly over its limit.
    Fail,
    /// A figure's interval contains its limit.
    Undecided,
}

impl Verdict {
    /// Name in every report.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Pass => "pass",
            Self::Fail => "fail",
            Self::Undecided => "undecided",
        }
    }
}

/// Figures of the swept region.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SweptSummary {
    /// Area covered.
    pub area: f64,
    /// Length of the swept edge.
    pub perimeter: f64,
    /// Number of its loops.
    pub loops: usize,
}

/// One tool and its cutter.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Tool {
    /// T number, 0 where the program names none.
    pub number: u32,
    /// Diameter of the cutter.
    pub diameter: f64,
}

/// What was judged, and what was assumed.
#[derive(Clone, Debug, PartialEq)]
pub struct Inputs {
    /// Drawing file as the user named it.
    pub part: String,
    /// Layers or groups taken from it; empty: all.
    pub layers: Vec<String>,
    /// Number of closed loops and open chains.
    pub loops: usize,
    /// See `loops`.
    pub chains: usize,
    /// Which side is material: inside, outside, left or right.
    pub keep: &'static str,
    /// Was that side found from the program rather than stated?
    pub keep_assumed: bool,
    /// Greatest distance between the drawing's curves and the arcs judged.
    pub curve_bound: f64,
    /// Stock left on purpose.
    pub allowance: f64,
    /// What was done to lay the drawing where the program cuts, in order; empty: nothing.
    pub placement: Vec<String>,
    /// Program file as the user named it.
    pub program: String,
    /// Moves in all, and those that cut.
    pub moves: usize,
    /// Moves that cut in this view.
    pub cutting_moves: usize,
    /// Tools and their cutters.
    pub tools: Vec<Tool>,
    /// Height of the part's top face.
    pub top: f64,
    /// Height of the plan view; `None`: just below the top.
    pub level: Option<f64>,
    /// Must the whole open area be cleared, or the contour only: `wall` or `area`.
    pub clear: &'static str,
    /// Greatest difference of an arc's two radii that was accepted.
    pub arc_tolerance: f64,
}

/// What the picture shows.
#[derive(Clone, Debug, PartialEq)]
pub struct Drawing {
    /// The part's contour where the program cuts.
    pub contour: Contour,
    /// Which side is material: inside, outside, left or right.
    pub keep: crate::part::Keep,
    /// The swept edge.
    pub swept: SweptRegion,
    /// Path of the cutter's centre while it cuts.
    pub path: Vec<Segment>,
    /// Rapids, in plan.
    pub rapids: Vec<Segment>,
}

/// Everything a report holds.
#[derive(Clone, Debug, PartialEq)]
pub struct Report {
    /// Unit of every length.
    pub unit: Unit,
    /// The answer.
    pub verdict: Verdict,
    /// Limits for acceptance.
    pub limits: Limits,
    /// Greatest sizes.
    pub worst: Worst,
    /// Findings, faults before notes, the worst first.
    pub findings: Vec<Finding>,
    /// Figures of the swept region.
    pub swept: SweptSummary,
    /// What was judged and assumed.
    pub inputs: Inputs,
    /// What the readers wanted to say.
    pub warnings: Vec<Problem>,
    /// What the picture shows.
    pub drawing: Drawing,
}
