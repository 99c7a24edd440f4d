//! The lengths below which two things count as one, each with its reason.
//!
//! Three kinds of "small" must never be mixed: what arithmetic cannot tell apart (coincidence), what
//! reading curves as arcs may cost (chord and arc errors), and what the drawing allows (acceptance,
//! which lives in [`crate::findings::Limits`]). All are lengths, in the unit of the coordinates.

/// Default greatest distance between a curve of the drawing (Bezier, ellipse, spline) and the arcs
/// that stand for it, mm: a tenth of a micrometre, well below what any shop measures.
pub const CURVE_ERROR_MM: f64 = 1e-4;

/// Default greatest gap between the ends of drawing entities that is closed (and reported), mm.
/// Drawings leave gaps of a few micrometres; a hundredth is still well below what a cutter notices.
pub const JOIN_GAP_MM: f64 = 0.01;

/// Greatest difference of an arc's two radii that is accepted, mm (NISTIR 6556, 3.5.3.2).
pub const ARC_RADII_MM: f64 = 0.002;

/// The same for a program in inches, inch (NISTIR 6556, 3.5.3.2).
pub const ARC_RADII_INCH: f64 = 0.0002;

/// Tolerance applied when the user states none, mm and inch.
pub const ACCEPTANCE_MM: f64 = 0.05;
/// See [`ACCEPTANCE_MM`].
pub const ACCEPTANCE_INCH: f64 = 0.002;

/// Millimetres in an inch, exactly (international yard and pound agreement, 1959).
pub const MM_PER_INCH: f64 = 25.4;

/// Greatest absolute coordinate accepted, in the unit of the file: a double then still resolves
/// 1e-7 of a unit, a thousandth of what a drawing tolerates.
pub const GREATEST_COORDINATE: f64 = 1e9;

/// Lengths for coincidence, built once for a job and passed down.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Tolerances {
    /// Two points nearer than this are one node. About 2000 units in the last place of the greatest
    /// coordinate: above what a crossing at a moderate angle loses, far below any feature.
    pub coincidence: f64,
    /// A piece counts as covered only when it lies deeper than this below the swept edge.
    pub depth: f64,
    /// Figures (gouge, excess, area maxima) are searched until their interval is this narrow.
    pub figure: f64,
}

impl Tolerances {
    /// Lengths fit for coordinates up to `extent` (the half size of everything, cutter included).
    #[must_use]
    pub fn for_extent(extent: f64) -> Self {
        let coincidence = (extent.abs() * 4e-13).max(1e-12);
        Self { coincidence, depth: 0.5 * coincidence, figure: (16.0 * coincidence).max(1e-9) }
    }
}
