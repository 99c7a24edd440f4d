//! Drawings: from a file's bytes to a contour of lines and arcs, with the unit and the layers it
//! names. Every reader of a drawing gives the same [`Drawing`]; nothing is moved, turned or chosen
//! here beyond the layers which the user asked for.

pub mod csv;
pub mod dxf;
mod finish;
pub mod join;
pub mod loops;
mod nodes;
pub mod svg;

pub use csv::read_csv;
pub use dxf::read_dxf;
pub use svg::read_svg;

use crate::geometry::Contour;
use crate::part::Origin;
use crate::program::Unit;

/// What a drawing holds, before anything is moved or chosen.
#[derive(Clone, Debug, PartialEq)]
pub struct Drawing {
    /// Loops and chains, in the drawing's unit where that is millimetre or inch, else converted to
    /// millimetres.
    pub contour: Contour,
    /// Provenance of each path of the contour, in its order.
    pub origins: Vec<Origin>,
    /// Unit of the coordinates; `None` when neither the file nor the options say it.
    pub unit: Option<Unit>,
    /// Layers, groups or ids found, and which were taken.
    pub layers: Vec<Layer>,
}

/// A layer (DXF), group or id (SVG) and what it holds.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Layer {
    /// Its name as written.
    pub name: String,
    /// Number of entities on it, of any kind.
    pub entities: usize,
    /// Was it read into the contour?
    pub taken: bool,
}

/// How a drawing is to be read.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct DrawingOptions {
    /// Layers to take; empty: all.
    pub layers: Vec<String>,
    /// Greatest distance of an arc from the curve it stands for, in the drawing's unit; 0: the
    /// default of [`crate::tolerance::CURVE_ERROR_MM`], scaled to the unit.
    pub curve_error: f64,
    /// Greatest gap between ends that is closed, in the drawing's unit; 0: the default of
    /// [`crate::tolerance::JOIN_GAP_MM`], scaled to the unit.
    pub join_gap: f64,
    /// Unit of a file that declares none.
    pub unit: Option<Unit>,
}
