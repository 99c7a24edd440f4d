//! What a script may rely on: JSON Schemas (draft 2020-12) of the two JSON outputs.
//!
//! They stay open to further fields, so that a later version may add some without breaking a reader;
//! what they name is fixed for the version they name.

/// The schema of what [`super::json::render`] writes.
#[must_use]
pub const fn report_schema() -> &'static str {
    include_str!("schema/report.json")
}

/// The schema of what [`super::json::render_swept`] writes.
#[must_use]
pub const fn envelope_schema() -> &'static str {
    include_str!("schema/envelope.json")
}
