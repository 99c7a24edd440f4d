//! Findings to bytes: one renderer for each format, none of which computes geometry.
//!
//! Each renderer takes the whole [`crate::findings::Report`] (or a [`SweptEdge`], for the `envelope`
//! command) and gives text; only the command line writes it anywhere. Figures are shown by
//! [`number`]'s rules everywhere but in JSON, which keeps every digit.

pub mod care;
pub mod csv;
pub mod dxf;
mod headline;
pub mod json;
mod number;
#[cfg(test)]
mod sample;
mod schema;
pub mod svg;
mod swept;
pub mod text;

pub use headline::headline;
pub use schema::{envelope_schema, report_schema};
pub use swept::SweptEdge;

/// `text` on one line and without control characters: what a file holds must neither steer a terminal
/// nor break an XML document.
#[must_use]
pub fn plain(text: &str) -> String {
    let unsafe_char =
        |c: char| c.is_control() || matches!(c, '\u{fffe}' | '\u{ffff}' | '\u{202a}'..='\u{202e}');
    text.chars().map(|c| if unsafe_char(c) { ' ' } else { c }).collect::<String>().trim_end().to_owned()
}
