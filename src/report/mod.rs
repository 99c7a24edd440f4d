//! Findings to bytes: one renderer for each format, none of which computes geometry.
//!
//! Each renderer takes the whole [`crate::findings::Report`] (or a [`SweptEdge`], for the `envelope`
//! command) and gives text; only the command line writes it anywhere. Figures are shown by
//! the rules of `number` everywhere but in JSON, which keeps every digit.

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
    let unsafe_char = |c: char| {
        c.is_control()
            || matches!(c, '\u{fffe}' | '\u{ffff}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}')
    };
    text.chars().map(|c| if unsafe_char(c) { ' ' } else { c }).collect::<String>().trim_end().to_owned()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::compare::{ContourStretch, Figure};
    use crate::geometry::Point;

    #[test]
    fn no_number_makes_a_renderer_panic() {
        let numbers = [f64::NAN, f64::INFINITY, f64::NEG_INFINITY, -1.0, 0.0, 1e-300, 1e300];
        for x in numbers {
            for y in numbers {
                let mut report = sample::failing();
                report.limits.gouge = y;
                report.worst.gouge = Some(Figure { size: x, bound: y });
                report.inputs.top = x;
                for f in &mut report.findings {
                    f.figure = Figure { size: x, bound: y };
                    f.limit = Some(y);
                    f.at = Point::new(x, y);
                    f.contour = Some(ContourStretch { path: 0, from: x, to: y });
                    f.region = None;
                }
                assert!(text::render(&report, 80, text::Style::Plain).starts_with("FAIL: "));
                assert!(svg::render(&report).starts_with("<svg"));
                assert_eq!(json::render(&report).is_ok(), x.is_finite() && y.is_finite());
            }
        }
    }

    #[test]
    fn plain_text_has_no_control_or_direction_characters() {
        assert_eq!(plain("a\u{1b}[2J\tb\u{202e}c\u{2067}d\r\n"), "a [2J b c d");
    }
}
