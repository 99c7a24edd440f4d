//! Reads a DXF drawing: which entities are contour, in which unit, on which layers, joined into loops.
//! Rests on the published DXF Reference. Only flat lines, arcs, circles and polylines with arcs are
//! contour; what could be contour but is not read is refused by name, what never is one is left out
//! and told.

mod entities;
mod layers;
mod scan;
mod sound;

use std::collections::BTreeMap;

pub(super) use entities::bulged;
use scan::{Entity, Scan, refusal};

use super::finish::{Strands, finish};
use super::join::Gaps;
use super::{Drawing, DrawingOptions};
use crate::input::{Place, Problem, Reading, Refusal};
use crate::program::Unit;

/// Entities that are never contour: text, measures, marks, construction lines, fills, pictures.
const NEVER_CONTOUR: [&str; 20] = [
    "TEXT",
    "MTEXT",
    "ATTDEF",
    "ATTRIB",
    "DIMENSION",
    "ARC_DIMENSION",
    "LEADER",
    "MLEADER",
    "MULTILEADER",
    "TOLERANCE",
    "POINT",
    "HATCH",
    "MPOLYGON",
    "VIEWPORT",
    "IMAGE",
    "WIPEOUT",
    "XLINE",
    "RAY",
    "LIGHT",
    "OLE2FRAME",
];

/// Reads `bytes` as a DXF drawing in text form; `file` is the name told in problems.
///
/// Loops and chains come in the order and direction of their first entity in the file. Coordinates are
/// the file's where its unit is millimetre, inch or not said; other units are converted to millimetres.
///
/// # Errors
/// What is not a whole, sound DXF text; numbers that are none; entities on a taken layer that could be
/// contour and are not read; layers that do not exist; ends that fork or almost meet; loops that cross.
pub fn read_dxf(bytes: &[u8], file: &str, options: &DrawingOptions) -> Result<Reading<Drawing>, Refusal> {
    let pairs = scan::pairs(bytes, file)?;
    let scan = scan::scan(&pairs, file)?;
    let mut problems = Vec::new();
    let (unit, scale) = unit_of(&scan, file, options, &mut problems)?;
    let layers = layers::choose(&scan, file, options, &mut problems)?;
    let taken: Vec<&Entity<'_>> =
        scan.entities.iter().filter(|e| layers::is_taken(&layers, &e.layer)).collect();
    let contour = contour_entities(taken, file, &mut problems)?;
    if contour.is_empty() {
        return Err(layers::nothing_read(&layers, file));
    }
    let shapes = entities::shapes(&contour, scale, file)?;
    let (low, high) = shapes.heights;
    if high - low > 1e-6 {
        problems.push(Problem::warning(
            Place::file(file),
            format!("the entities lie at heights from z {low} to z {high}"),
            "a flat drawing",
            "nothing if the contour is meant as seen from above; else take the layer of one height (--layer)",
        ));
    }
    let in_mm = unit.unwrap_or(Unit::Millimetre).in_mm();
    let strands = Strands {
        strands: shapes.strands,
        gaps: Gaps::new(options.join_gap * scale, in_mm),
        bound: shapes.bound,
        unit,
        layers,
    };
    finish(strands, file, problems)
}

/// Millimetres in the units of `$INSUNITS` that a part can be drawn in (DXF Reference, HEADER section;
/// the US survey foot is 1200/3937 m).
fn insunits_in_mm(code: i64) -> Option<f64> {
    Some(match code {
        1 => 25.4,
        2 => 304.8,
        3 => 1_609_344.0,
        4 => 1.0,
        5 => 10.0,
        6 => 1e3,
        7 => 1e6,
        8 => 25.4e-6,
        9 => 25.4e-3,
        10 => 914.4,
        11 => 1e-7,
        12 => 1e-6,
        13 => 1e-3,
        14 => 100.0,
        15 => 1e4,
        16 => 1e5,
        21 => 1_200_000.0 / 3937.0,
        _ => return None,
    })
}

/// Unit of the coordinates to come and the factor that brings the file's to it.
fn unit_of(
    scan: &Scan<'_>,
    file: &str,
    options: &DrawingOptions,
    problems: &mut Vec<Problem>,
) -> Result<(Option<Unit>, f64), Refusal> {
    let (code, line) = match scan.units {
        None | Some((0, _)) => return Ok((options.unit, 1.0)),
        Some(found) => found,
    };
    let place = Place::line(file, line, code.to_string());
    let Some(in_mm) = insunits_in_mm(code) else {
        return Err(refusal(
            place,
            &format!("the drawing's unit, $INSUNITS {code}, is no unit for a part"),
            "4 (millimetres) or 1 (inches)",
            "set the drawing's unit and export it again",
        ));
    };
    let (unit, scale) = match code {
        1 => (Unit::Inch, 1.0),
        _ => (Unit::Millimetre, in_mm),
    };
    if code != 1 && code != 4 {
        problems.push(Problem::warning(
            place,
            format!("the drawing's unit is {in_mm} mm; coordinates were converted to mm"),
            "",
            "nothing if the size is right; else set the drawing's unit and export it again",
        ));
    } else if let Some(asked) = options.unit.filter(|u| *u != unit) {
        problems.push(Problem::warning(
            place,
            format!("the drawing says it is in {}, not in {}", unit.name(), asked.name()),
            "one unit",
            "nothing if the drawing is right: its own unit was taken; else correct its unit",
        ));
    }
    Ok((Some(unit), scale))
}

/// The entities that are contour, with what is left out told once and what cannot be read refused.
fn contour_entities<'a>(
    taken: Vec<&'a Entity<'a>>,
    file: &str,
    problems: &mut Vec<Problem>,
) -> Result<Vec<&'a Entity<'a>>, Refusal> {
    let mut left_out: BTreeMap<&str, (usize, &Entity<'_>)> = BTreeMap::new();
    let mut contour = Vec::new();
    let mut refused: Vec<&Entity<'_>> = Vec::new();
    for entity in taken {
        let kind = entity.kind.as_str();
        let why = if entity.on_paper {
            "entities on paper sheets"
        } else if entity.hidden {
            "invisible entities"
        } else if NEVER_CONTOUR.contains(&kind) {
            kind
        } else if entities::READ.contains(&kind) {
            contour.push(entity);
            continue;
        } else {
            refused.push(entity);
            continue;
        };
        left_out.entry(why).or_insert((0, entity)).0 += 1;
    }
    if !refused.is_empty() {
        return Err(refuse_kinds(&refused, file));
    }
    if let Some((_, first)) = left_out.values().min_by_key(|v| v.1.line) {
        let counts: Vec<String> = left_out.iter().map(|(kind, (n, _))| format!("{kind} ({n})")).collect();
        problems.push(Problem::warning(
            first.place(file),
            format!("left out, as they are no contour: {}", counts.join(", ")),
            "",
            "nothing, unless one of them was meant as contour: then draw it with lines and arcs",
        ));
    }
    Ok(contour)
}

/// How many refused entities are named one by one.
const NAMED: usize = 8;

fn refuse_kinds(refused: &[&Entity<'_>], file: &str) -> Refusal {
    let more = refused.len().saturating_sub(NAMED);
    let name = |entity: &&Entity<'_>| {
        let kind = entity.kind.as_str();
        let mut help = match kind {
            "SPLINE" | "ELLIPSE" | "HELIX" => "convert it to a polyline with arcs",
            "INSERT" => "explode the block",
            "3DFACE" | "3DSOLID" | "REGION" | "BODY" | "SURFACE" | "MESH" | "SOLID" | "TRACE" | "MLINE" => {
                "draw its outline with lines and arcs"
            }
            _ => "explode it or convert it to a polyline with arcs",
        }
        .to_owned();
        help.push_str(", or take only the layers without it (--layer)");
        if more > 0 {
            help.push_str(&format!("; {more} more such entities are not listed"));
        }
        Problem::error(
            entity.place(file),
            format!("{} could be contour but is neither line, arc nor polyline", entity.title()),
            entities::READ.join(", "),
            help,
        )
    };
    refused.iter().take(NAMED).map(name).collect()
}

#[cfg(test)]
mod tests;
