//! What was asked for, before it is known to make sense: every answer may be missing. The command line
//! and the job file both give one; the command line's goes before.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

use super::args::{
    CheckArgs, ClearName, EnvelopeArgs, KeepName, LimitArgs, MirrorName, PartArgs, ProgramArgs,
    ProgramFormatName, UnitName,
};
use crate::input::{Place, Problem};
use crate::tolerance::GREATEST_COORDINATE;

/// A file: how the user named it, and where it is.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Named {
    /// As the user wrote it; `-` for standard input or output.
    pub name: String,
    /// Where to find it.
    pub path: PathBuf,
}

impl Named {
    /// `path` as written in a file that lies in `folder` (on the command line: the empty path).
    pub fn within(folder: &Path, path: &Path) -> Self {
        let name = path.display().to_string();
        let path = if name == "-" { path.to_path_buf() } else { folder.join(path) };
        Self { name, path }
    }

    /// The name of an input as a person reads it.
    pub fn shown(&self) -> &str {
        if self.is_standard() { "standard input" } else { &self.name }
    }

    /// Standard input or output?
    pub fn is_standard(&self) -> bool {
        self.path.as_os_str() == "-"
    }
}

/// One placing of the drawing: turned, then shifted.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Lay {
    /// Degrees, counter-clockwise, about the drawing's origin.
    pub turn: f64,
    /// Then shifted by this.
    pub shift: [f64; 2],
}

/// Which cutters are in the holder.
#[derive(Clone, Debug, PartialEq)]
pub enum Cutters {
    /// One diameter for every tool.
    Every(f64),
    /// Diameter by tool number.
    Table(BTreeMap<u32, f64>),
}

/// What may be asked for.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Draft {
    pub units: Option<UnitName>,
    pub part: Option<Named>,
    pub layers: Option<Vec<String>>,
    pub keep: Option<KeepName>,
    pub allowance: Option<f64>,
    pub mirror: Option<MirrorName>,
    pub turn: Option<f64>,
    pub shift: Option<[f64; 2]>,
    pub copies: Option<Vec<Lay>>,
    pub join_gap: Option<f64>,
    pub curve_error: Option<f64>,
    pub gouge: Option<f64>,
    pub excess: Option<f64>,
    pub cusp: Option<f64>,
    pub cutters: Option<Cutters>,
    pub program: Option<Named>,
    pub format: Option<ProgramFormatName>,
    pub arc_tolerance: Option<f64>,
    pub top: Option<f64>,
    pub level: Option<f64>,
    pub clear: Option<ClearName>,
    pub only_visited: Option<bool>,
    pub json: Option<Named>,
    pub svg: Option<Named>,
    pub dxf: Option<Named>,
}

impl Draft {
    /// These answers, and `other`'s where there is none.
    pub fn or(self, other: Self) -> Self {
        Self {
            units: self.units.or(other.units),
            part: self.part.or(other.part),
            layers: self.layers.or(other.layers),
            keep: self.keep.or(other.keep),
            allowance: self.allowance.or(other.allowance),
            mirror: self.mirror.or(other.mirror),
            turn: self.turn.or(other.turn),
            shift: self.shift.or(other.shift),
            copies: self.copies.or(other.copies),
            join_gap: self.join_gap.or(other.join_gap),
            curve_error: self.curve_error.or(other.curve_error),
            gouge: self.gouge.or(other.gouge),
            excess: self.excess.or(other.excess),
            cusp: self.cusp.or(other.cusp),
            cutters: self.cutters.or(other.cutters),
            program: self.program.or(other.program),
            format: self.format.or(other.format),
            arc_tolerance: self.arc_tolerance.or(other.arc_tolerance),
            top: self.top.or(other.top),
            level: self.level.or(other.level),
            clear: self.clear.or(other.clear),
            only_visited: self.only_visited.or(other.only_visited),
            json: self.json.or(other.json),
            svg: self.svg.or(other.svg),
            dxf: self.dxf.or(other.dxf),
        }
    }
}

/// Which numbers make sense.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Rule {
    /// A diameter: greater than zero.
    Positive,
    /// A tolerance or an allowance: zero or more.
    NotNegative,
    /// A height, an angle, a shift: any.
    Any,
}

impl Rule {
    /// What is wrong with `value`, which stands at `place` under `name`; `None` when nothing is.
    pub fn broken(self, name: &str, value: f64, place: &Place) -> Option<Problem> {
        let (fine, expected) = match self {
            _ if value.is_finite() && value.abs() > GREATEST_COORDINATE => {
                (false, "a number up to 1e9 either way")
            }
            Self::Positive => (value > 0.0, "a length greater than zero"),
            Self::NotNegative => (value >= 0.0, "a length of zero or more"),
            Self::Any => (true, "a finite number"),
        };
        if fine && value.is_finite() {
            return None;
        }
        let help = if self == Self::Positive {
            format!("measure the cutter and give {name} as a positive number")
        } else {
            format!("give {name} as {expected}")
        };
        // Hundreds of digits help nobody to find the slip.
        let shown = if value.abs() > GREATEST_COORDINATE { format!("{value:e}") } else { value.to_string() };
        Some(Problem::error(place.clone(), format!("{name} is {shown}"), expected, help))
    }
}

/// Where a wrong flag stands.
pub fn command_line() -> Place {
    Place::file("the command line")
}

impl From<&CheckArgs> for Draft {
    fn from(args: &CheckArgs) -> Self {
        let here = |p: &PathBuf| Named::within(Path::new(""), p);
        let outputs = Self {
            json: args.json.as_ref().map(here),
            svg: args.svg.as_ref().map(here),
            dxf: args.dxf.as_ref().map(here),
            ..Self::default()
        };
        outputs.or(Self::from(&args.part)).or(Self::from(&args.program)).or(Self::from(&args.limits))
    }
}

impl From<&EnvelopeArgs> for Draft {
    fn from(args: &EnvelopeArgs) -> Self {
        Self::from(&args.program)
    }
}

impl From<&PartArgs> for Draft {
    fn from(args: &PartArgs) -> Self {
        Self {
            part: args.part.as_ref().map(|p| Named::within(Path::new(""), p)),
            layers: (!args.layer.is_empty()).then(|| args.layer.clone()),
            keep: args.keep,
            allowance: args.allowance,
            mirror: args.mirror,
            turn: args.turn,
            shift: args.shift,
            join_gap: args.join_gap,
            curve_error: args.curve_error,
            ..Self::default()
        }
    }
}

impl From<&ProgramArgs> for Draft {
    fn from(args: &ProgramArgs) -> Self {
        Self {
            units: args.units,
            cutters: args.diameter.map(Cutters::Every),
            program: args.program.as_ref().map(|p| Named::within(Path::new(""), p)),
            format: args.program_format,
            arc_tolerance: args.arc_tolerance,
            top: args.top,
            level: args.level,
            ..Self::default()
        }
    }
}

impl From<&LimitArgs> for Draft {
    fn from(args: &LimitArgs) -> Self {
        Self {
            gouge: args.gouge_tolerance.or(args.tolerance),
            excess: args.excess_tolerance.or(args.tolerance),
            cusp: args.cusp_tolerance.or(args.tolerance),
            clear: args.clear,
            only_visited: args.only_visited.then_some(true),
            ..Self::default()
        }
    }
}
