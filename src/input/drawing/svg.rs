//! Which lines and arcs does an SVG drawing hold?
//!
//! SVG 1.1 (W3C, second edition 2011): paths, basic shapes, groups, transforms, the page's size. Circles
//! and arcs stay arcs wherever their transform keeps shapes; every other curve becomes arcs within the
//! allowed error, measured after the transform, with a proved bound. The drawing is seen with y up: its
//! origin is the lower left corner of the page (the upper left one where the page has no height).
//!
//! What could be contour but is not read (text, images, clipping) is named with its place. Paint is not
//! looked at: a stroke's width or a filling makes no difference to a contour.

mod length;
mod outline;
mod page;
mod path;
mod shapes;
mod source;
mod transform;
mod walk;

#[cfg(test)]
mod tests;

use roxmltree::{Document, ParsingOptions};

use self::source::Source;
use self::walk::Walk;
use super::finish::{Strands, finish};
use super::join::{Gaps, Strand};
use super::{Drawing, DrawingOptions};
use crate::input::{Place, Problem, Reading, Refusal};
use crate::program::Unit;

/// Most XML nodes of a drawing: some hundred megabytes of memory.
const MOST_NODES: u32 = 2_000_000;

/// Most characters which the file's own entities may grow to.
const MOST_ENTITY_TEXT: usize = 64_000_000;

/// Reads an SVG drawing.
///
/// Curves lie within `options.curve_error` (or the default, scaled to the unit) of the lines and arcs
/// given; the contour's bound says how far at most. `options.layers` names groups by id or label, or
/// elements by id; all of them must exist. Subpaths whose ends meet are joined as in every drawing.
///
/// # Errors
/// Those of [`read_subpaths`], and of joining: ends that almost meet or meet three at a time, paths that
/// cross.
pub fn read_svg(bytes: &[u8], file: &str, options: &DrawingOptions) -> Result<Reading<Drawing>, Refusal> {
    let Reading { value: loose, problems } = read_subpaths(bytes, file, options)?;
    let strand = |(path, origin): (&crate::geometry::Path, crate::part::Origin)| Strand {
        segments: path.segments().to_vec(),
        closed: path.is_closed(),
        layer: origin.layer,
        place: Place { file: file.to_owned(), line: origin.line, ..Place::default() },
    };
    let strands = Strands {
        strands: loose.contour.paths().iter().zip(loose.origins).map(strand).collect(),
        gaps: Gaps::new(options.join_gap, loose.unit.map_or(1.0, Unit::in_mm)),
        bound: loose.contour.bound(),
        unit: loose.unit,
        layers: loose.layers,
    };
    finish(strands, file, problems)
}

/// The subpaths of an SVG drawing as they are drawn: closed ones as loops, open ones as chains, nothing
/// joined and nothing checked against another.
///
/// Not suitable as a part: shapes may cross or lie on one another.
///
/// # Errors
/// Placed problems, at least one of them an error: text that is no well-formed SVG, values that are no
/// finite numbers, a named layer that does not exist, a drawing without contour.
pub fn read_subpaths(
    bytes: &[u8],
    file: &str,
    options: &DrawingOptions,
) -> Result<Reading<Drawing>, Refusal> {
    let source = Source::new(bytes, file)?;
    let help = "mend the file, or save the drawing again from where it was made";
    if entity_text(source.text) > MOST_ENTITY_TEXT {
        let found = "the drawing's own entities would grow to an enormous text";
        return Err(vec![Problem::error(source.whole(), found, "a drawing without entities", help)]);
    }
    // Old drawings begin with a DOCTYPE; what its entities can grow to has just been bounded, and
    // nothing outside the file is ever opened.
    let parsing = ParsingOptions { allow_dtd: true, nodes_limit: MOST_NODES, entity_resolver: None };
    let document = Document::parse_with_options(source.text, parsing).map_err(|error| {
        let pos = error.pos();
        let found = format!("the drawing is not well-formed XML: {error}");
        vec![Problem::error(source.place_of_position(pos.row, pos.col), found, "well-formed SVG", help)]
    })?;
    Walk::new(&source, options).read(document.root_element())
}

/// Upper bound on the text that general entities declared in the file can make: each reference grows to
/// at most 255 nested ones (the parser's limit), none longer than the declarations together.
fn entity_text(text: &str) -> usize {
    if !text.contains("<!ENTITY") {
        return 0;
    }
    let declared = declarations_end(text).unwrap_or(text.len());
    let predefined = ["&amp;", "&lt;", "&gt;", "&quot;", "&apos;", "&#"];
    let references = text
        .match_indices('&')
        .filter(|(i, _)| {
            let rest = text.get(*i..).unwrap_or_default();
            !predefined.iter().any(|p| rest.starts_with(p))
        })
        .count();
    references.saturating_mul(declared).saturating_mul(255)
}

/// Where the value of the last entity declaration ends.
fn declarations_end(text: &str) -> Option<usize> {
    let last = text.rfind("<!ENTITY")?;
    let open = last + text.get(last..)?.find(['"', '\''])?;
    let quote = text.get(open..)?.chars().next()?;
    let inside = open + 1;
    Some(inside + text.get(inside..)?.find(quote)?)
}
