//! What is wrong with the whole rather than with a place: a drawing that does not lie where the program
//! cuts, units that differ, a cutter wider than every opening. Each is a warning: the judgement stands,
//! but it is hardly the one that was wanted.

use std::collections::HashSet;

use super::diagnose::Scene;
use super::number::{length_text, point_text};
use crate::geometry::Rect;
use crate::input::{Place, Problem};
use crate::program::Unit;
use crate::tolerance::MM_PER_INCH;

/// Sizes whose ratio is an inch to a millimetre within this factor point at two units: the cutter's
/// radius and lead-in moves make the path larger or smaller than the contour.
const UNIT_SLACK: f64 = 1.35;

/// Warnings about the whole.
pub(super) fn warnings(scene: &Scene<'_>) -> Vec<Problem> {
    let mut out = Vec::new();
    let part = scene.walls.contour().bounds();
    if let Some(path) = scene.cuts.moves.iter().map(|m| m.segment.bounds()).reduce(|a, b| a.union(b)) {
        if let Some(problem) = other_unit(scene, part, path) {
            out.push(problem);
        } else {
            out.extend(elsewhere(scene, part, path));
        }
    }
    out.extend(wider_than_openings(scene));
    out.extend(left_out(scene));
    out
}

fn drawing(scene: &Scene<'_>) -> Place {
    Place::file(scene.facts.part.origins.first().map(|o| o.file.clone()).unwrap_or_default())
}

fn box_text(b: Rect, unit: Unit) -> String {
    format!("{} to {}", point_text(b.origin(), unit), point_text((b.x1, b.y1).into(), unit))
}

/// Are the contour and the path as large as one in inches and one in millimetres would be?
fn other_unit(scene: &Scene<'_>, part: Rect, path: Rect) -> Option<Problem> {
    let (a, b) = (part.width().max(part.height()), path.width().max(path.height()));
    if !scene.all_unvisited() && scene.facts.comparison.gouges.is_empty() {
        return None;
    }
    let near = |ratio: f64| (MM_PER_INCH / UNIT_SLACK..=MM_PER_INCH * UNIT_SLACK).contains(&ratio);
    let unit = scene.facts.unit;
    let sizes = format!(
        "the drawing is {} and the path of the cutter {} at its longest side, a ratio of about 25.4",
        length_text(a, unit),
        length_text(b, unit)
    );
    let (small, sign) = if near(b / a) {
        ("drawing", "the drawing's coordinates may be inches, or the program's millimetres")
    } else if near(a / b) {
        ("program", "the program's coordinates may be inches, or the drawing's millimetres")
    } else {
        return None;
    };
    Some(Problem::warning(
        drawing(scene),
        sizes,
        format!("one unit for both; {sign}"),
        format!(
            "check the unit of the {small}: G20 or G21 in the program, the drawing's own unit, or say --units for files that state none"
        ),
    ))
}

/// No loop is visited and the boxes do not meet: the drawing lies elsewhere.
fn elsewhere(scene: &Scene<'_>, part: Rect, path: Rect) -> Option<Problem> {
    let reach = scene.cuts.moves.iter().fold(0.0f64, |a, m| a.max(m.radius));
    let swept = path.inflate(reach, reach);
    let apart = swept.x1 < part.x0 || part.x1 < swept.x0 || swept.y1 < part.y0 || part.y1 < swept.y0;
    if !(scene.all_unvisited() || apart) {
        return None;
    }
    let unit = scene.facts.unit;
    let shift = path.center() - part.center();
    Some(Problem::warning(
        drawing(scene),
        format!(
            "the drawing does not lie where the program cuts: the contour spans {}, the path of the cutter {}",
            box_text(part, unit),
            box_text(path, unit)
        ),
        "a contour beside the path of the cutter",
        format!(
            "lay the drawing where the program cuts with --mirror, --turn and --shift (moved by {} from where it \
             lies now, both middles would come together)",
            point_text(shift.to_point(), unit)
        ),
    ))
}

/// A pocket whose every opening is narrower than the smallest cutter.
fn wider_than_openings(scene: &Scene<'_>) -> Option<Problem> {
    let paths = scene.walls.contour().paths();
    // Material lies on the left: a loop that runs clockwise is an opening.
    if !paths.iter().all(|p| p.is_closed() && p.signed_area() < 0.0) {
        return None;
    }
    let widest = paths.iter().map(|p| p.bounds().width().min(p.bounds().height())).fold(0.0f64, f64::max);
    let smallest = scene.cuts.moves.iter().map(|m| 2.0 * m.radius).fold(f64::INFINITY, f64::min);
    if !(smallest.is_finite() && smallest + 2.0 * scene.facts.part.allowance > widest) {
        return None;
    }
    let unit = scene.facts.unit;
    Some(Problem::warning(
        drawing(scene),
        format!(
            "the cutter of {} is wider than every opening of the part, the widest of which spans {}",
            length_text(smallest, unit),
            length_text(widest, unit)
        ),
        "an opening that the cutter can enter",
        "check --diameter, and --keep: with the material inside, the same loops are an outside profile",
    ))
}

/// Loops that were left out of the judgement because nothing comes near them.
fn left_out(scene: &Scene<'_>) -> Option<Problem> {
    let comparison = scene.facts.comparison;
    let whole = comparison.excesses.iter().filter(|e| e.whole_path);
    let told: HashSet<usize> = whole.filter_map(|e| e.stretch.map(|s| s.path)).collect();
    let count = comparison.never_visited.iter().filter(|p| !told.contains(p)).count();
    (count > 0).then(|| {
        Problem::warning(
            drawing(scene),
            format!(
                "{count} of the drawing's {} contours {} not judged: the program never comes near {}",
                scene.walls.contour().paths().len(),
                if count == 1 { "is" } else { "are" },
                if count == 1 { "it" } else { "them" }
            ),
            "",
            "make sure another tool or program cuts what is left out; without --only-visited it is a fault",
        )
    })
}
