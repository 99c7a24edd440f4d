//! The report and the swept edge as JSON, the form on which scripts rely.
//!
//! The names are fixed and described by the schemas in [`super::report_schema`] and
//! [`super::envelope_schema`]. Coordinates and figures keep every digit; the model's own types derive
//! no serialisation, so a field can only get here on purpose. The same report gives the same bytes.

mod model;
mod segment;

use serde::Serialize;

use crate::findings::Report;

use super::SweptEdge;

/// A figure is not a finite number, so JSON cannot say it: the report must not be trusted.
#[derive(Debug)]
pub struct NotFinite(serde_json::Error);

impl std::fmt::Display for NotFinite {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "a number of the report is not finite ({})", self.0)
    }
}

impl std::error::Error for NotFinite {}

/// The whole report; lengths in its unit, areas in its square. Ends with a line end.
///
/// # Errors
/// When a number is infinite or no number.
pub fn render(report: &Report) -> Result<String, NotFinite> {
    pretty(&model::Report::of(report))
}

/// The swept edge, loop by loop, each piece with the move and the block that made it; lengths in the
/// program's unit. Ends with a line end.
///
/// # Errors
/// When a number is infinite or no number.
pub fn render_swept(edge: &SweptEdge<'_>) -> Result<String, NotFinite> {
    pretty(&segment::Envelope::of(edge))
}

fn pretty(value: &impl Serialize) -> Result<String, NotFinite> {
    let mut text = serde_json::to_string_pretty(value).map_err(NotFinite)?;
    text.push('\n');
    Ok(text)
}

/// A number that must be finite, and never minus zero.
#[derive(Clone, Copy)]
struct Number(f64);

impl Serialize for Number {
    fn serialize<S: serde::Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        if self.0.is_finite() {
            serializer.serialize_f64(self.0 + 0.0)
        } else {
            Err(serde::ser::Error::custom("not a finite number"))
        }
    }
}

#[cfg(test)]
mod tests;
