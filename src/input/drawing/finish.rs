//! The last steps which all drawings of loose strands share: join them, check the loops, hand over.

use super::join::{Gaps, Strand, join};
use super::{Drawing, Layer, loops};
use crate::geometry::Contour;
use crate::input::{Place, Problem, Reading, Refusal};
use crate::program::Unit;

/// Strands as a reader found them.
pub(super) struct Strands {
    pub(super) strands: Vec<Strand>,
    pub(super) gaps: Gaps,
    /// Greatest distance of a strand from what the file says.
    pub(super) bound: f64,
    pub(super) unit: Option<Unit>,
    pub(super) layers: Vec<Layer>,
}

pub(super) fn finish(
    from: Strands,
    file: &str,
    mut problems: Vec<Problem>,
) -> Result<Reading<Drawing>, Refusal> {
    let mut joined = join(from.strands, from.gaps, file)?;
    problems.append(&mut joined.problems);
    let contour = Contour::new(joined.paths, from.bound + joined.moved).map_err(|_| {
        vec![Problem::error(
            Place::file(file),
            "nothing in the drawing has a length",
            "a contour of lines and arcs",
            "check that the right drawing and the right layer were taken",
        )]
    })?;
    let (contour, origins) = loops::checked(contour, joined.origins, from.gaps, &mut problems)?;
    problems.sort_by_key(|p| p.place.line);
    Ok(Reading { value: Drawing { contour, origins, unit: from.unit, layers: from.layers }, problems })
}
