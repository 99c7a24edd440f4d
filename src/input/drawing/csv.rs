//! Reads a plain table of a contour: `x, y, bulge` on each line, the bulge being that of the segment
//! which starts there (tangent of a quarter of its angle, negative for clockwise; may be left out). A
//! blank line begins a new chain; a chain whose last point repeats its first is a loop.
//!
//! ```text
//! x; y; bulge          # a heading may stand first
//! 0; 0
//! 40; 0; 1             # half a circle from here to the next point
//! 40; 20
//! 0; 0
//! ```

use super::dxf::bulged;
use super::finish::{Strands, finish};
use super::join::{Gaps, Strand};
use super::{Drawing, DrawingOptions};
use crate::geometry::{Path, Point, Segment};
use crate::input::{Place, Problem, Reading, Refusal};
use crate::program::Unit;
use crate::tolerance::GREATEST_COORDINATE;

/// One line of the table.
#[derive(Clone, Copy, Debug)]
struct Row {
    at: Point,
    bulge: f64,
    line: usize,
}

/// The chains of a table, as written: nothing is joined or checked against one another.
#[derive(Clone, Debug, PartialEq)]
pub struct Chains {
    /// Chains in the order of the file, each with the line of its first point.
    pub paths: Vec<(Path, usize)>,
    /// Greatest distance of a segment from what its bulge says.
    pub bound: f64,
}

/// Reads `text` as a table of a contour; `file` is the name told in problems. Chains whose ends meet
/// are joined as the entities of a drawing are.
///
/// # Errors
/// What is no table of numbers, a chain of one point, and what [`super::join`] refuses.
pub fn read_csv(text: &[u8], file: &str, options: &DrawingOptions) -> Result<Reading<Drawing>, Refusal> {
    let chains = read_csv_chains(text, file)?;
    let strands = chains
        .paths
        .into_iter()
        .map(|(path, line)| Strand {
            closed: path.is_closed(),
            segments: path.into_segments(),
            layer: None,
            place: Place { file: file.into(), line: Some(line), ..Place::default() },
        })
        .collect();
    let in_mm = options.unit.unwrap_or(Unit::Millimetre).in_mm();
    let strands = Strands {
        strands,
        gaps: Gaps::new(options.join_gap, in_mm),
        bound: chains.bound,
        unit: options.unit,
        layers: Vec::new(),
    };
    finish(strands, file, Vec::new())
}

/// The chains of a table, for a contour or for the centre line of a path.
///
/// # Errors
/// An empty or binary file, a line that is not two or three numbers, a number too great, a chain of
/// one point.
pub fn read_csv_chains(text: &[u8], file: &str) -> Result<Chains, Refusal> {
    let refuse = |place, found: &str, expected: &str, help: &str| {
        Err(vec![Problem::error(place, found, expected, help)])
    };
    if text.contains(&0) {
        let help = "save the table as plain text (CSV)";
        return refuse(Place::file(file), "the file is binary, not text", "lines of x, y, bulge", help);
    }
    let text = String::from_utf8_lossy(text);
    let text = text.strip_prefix('\u{feff}').unwrap_or(&text);
    let mut chains: Vec<Vec<Row>> = vec![Vec::new()];
    let mut heading_allowed = true;
    for (line, raw) in (1..).zip(text.lines()) {
        let content = raw.split('#').next().unwrap_or_default().trim();
        if content.is_empty() {
            // A line of comment alone divides nothing.
            if raw.trim().is_empty() {
                chains.push(Vec::new());
            }
            continue;
        }
        if heading_allowed && is_heading(content) {
            heading_allowed = false;
            continue;
        }
        heading_allowed = false;
        let row = row(content, line, || Place::line(file, line, raw))?;
        if let Some(chain) = chains.last_mut() {
            chain.push(row);
        }
    }
    let mut found = Chains { paths: Vec::new(), bound: 0.0 };
    for rows in chains.iter().filter(|c| !c.is_empty()) {
        found.paths.push(chain(rows, file, &mut found.bound)?);
    }
    if found.paths.is_empty() {
        let help = "write one point on each line: x, y and, for an arc, its bulge";
        return refuse(Place::file(file), "the table holds no point", "lines of x, y, bulge", help);
    }
    Ok(found)
}

/// A first line that names columns: it has letters and no field that is a number.
fn is_heading(content: &str) -> bool {
    content.starts_with(|c: char| c.is_alphabetic() || c == '"')
        && fields(content).all(|f| f.parse::<f64>().is_err())
}

/// Fields of a line: divided by semicolons, else by commas, else by blanks.
fn fields(content: &str) -> impl Iterator<Item = &str> {
    let mark = [';', ','].into_iter().find(|&m| content.contains(m));
    let divided = mark.map(|m| content.split(m).map(str::trim));
    let blanks = if mark.is_none() { content } else { "" };
    divided.into_iter().flatten().chain(blanks.split_whitespace())
}

fn row(content: &str, line: usize, place: impl Fn() -> Place) -> Result<Row, Refusal> {
    let mut count = 0;
    let mut kept = [""; 4];
    for field in fields(content) {
        if let Some(slot) = kept.get_mut(count) {
            *slot = field;
        }
        count += 1;
    }
    // A mark at the end of the line begins no field.
    let last = count.checked_sub(1).and_then(|i| kept.get(i));
    if count > 2 && last.map_or_else(|| content.ends_with([';', ',']), |f| f.is_empty()) {
        count -= 1;
    }
    let refuse = |place: Place, found: String, expected: &str, help: &str| {
        vec![Problem::error(place, found, expected, help)]
    };
    if !(2..=3).contains(&count) {
        return Err(refuse(
            place(),
            format!("{count} values on this line"),
            "x, y or x, y, bulge",
            "write two or three numbers; where a comma is the decimal mark, divide them with semicolons",
        ));
    }
    let mut numbers = [0.0; 3];
    let decimal_comma = content.contains(';');
    for (slot, field) in numbers.iter_mut().zip(kept.iter().take(count)) {
        let here = || {
            let place = place();
            let at = place.excerpt.as_deref().and_then(|raw| {
                let byte = raw.find(field)?;
                Some(raw.get(..byte)?.chars().count() + 1)
            });
            place.at(at.unwrap_or(1), field.chars().count().max(1))
        };
        let comma = decimal_comma && field.contains(',');
        let value = if comma { field.replace(',', ".").parse::<f64>() } else { field.parse() };
        match value {
            Ok(v) if v.is_finite() && v.abs() <= GREATEST_COORDINATE => *slot = v,
            Ok(v) if v.is_finite() => {
                let help = "check the number, or move the contour nearer to its origin";
                return Err(refuse(here(), format!("{field} is too great"), "at most 1e9", help));
            }
            _ => {
                let help = "write numbers such as 12.5; a comment starts with #";
                return Err(refuse(here(), format!("{field:?} is no number"), "a finite number", help));
            }
        }
    }
    let [x, y, bulge] = numbers;
    Ok(Row { at: Point::new(x, y), bulge, line })
}

fn chain(rows: &[Row], file: &str, bound: &mut f64) -> Result<(Path, usize), Refusal> {
    let line = rows.first().map_or(1, |r| r.line);
    let refuse = |line: usize, found: &str, help: &str| {
        let place = Place { file: file.into(), line: Some(line), ..Place::default() };
        vec![Problem::error(place, found, "a chain of points with lines or arcs between them", help)]
    };
    let mut segments: Vec<Segment> = Vec::with_capacity(rows.len());
    for (a, b) in rows.iter().zip(rows.iter().skip(1)) {
        if a.at == b.at {
            continue;
        }
        let usable = bulged(a.at, b.at, a.bulge).filter(|(s, _)| {
            let r = s.bounds();
            [r.x0, r.y0, r.x1, r.y1].iter().all(|v| v.abs() <= GREATEST_COORDINATE)
        });
        let Some((segment, off)) = usable else {
            let help = "check the bulge: it is the tangent of a quarter of the arc's angle";
            return Err(refuse(a.line, &format!("bulge {} makes no usable arc here", a.bulge), help));
        };
        *bound = bound.max(off);
        segments.push(segment);
    }
    let closed = match segments.as_slice() {
        [first, .., last] => first.start() == last.end(),
        _ => false,
    };
    Path::new(segments, closed).map(|p| (p, line)).map_err(|_| {
        refuse(
            line,
            "a chain of a single point",
            "give it a second point, or delete the blank line before it",
        )
    })
}

#[cfg(test)]
mod tests;
