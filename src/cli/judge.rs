//! Where the command line meets the rooms: which reader a file goes to, in which order the rooms judge,
//! and what is said when one of them cannot go on.

use super::args::{ClearName, ProgramFormatName};
use super::draft::Named;
use crate::compare::{self, Clear, Comparison, Regions, Request};
use crate::envelope::{self, Clearance, SweptRegion};
use crate::findings::{Limits, Report};
use crate::geometry::Rect;
use crate::input::drawing::{Drawing, DrawingOptions, read_csv, read_dxf, read_svg};
use crate::input::program::{ProgramOptions, read_iso};
use crate::input::{Place, Problem, Reading, Refusal};
use crate::part::Part;
use crate::program::Program;
use crate::report::{SweptEdge, json, text};
use crate::tolerance::Tolerances;
use crate::view::{DiscFamily, PlanView};

/// How a drawing is written.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum DrawingFormat {
    Dxf,
    Svg,
    Csv,
}

/// By the file's ending, else by how it begins.
fn drawing_format(bytes: &[u8], file: &Named) -> Option<DrawingFormat> {
    let ending = file.path.extension().map(|e| e.to_string_lossy().to_lowercase());
    match ending.as_deref() {
        Some("dxf") => return Some(DrawingFormat::Dxf),
        Some("svg") => return Some(DrawingFormat::Svg),
        Some("csv") => return Some(DrawingFormat::Csv),
        _ => {}
    }
    let start = String::from_utf8_lossy(bytes.get(..4096).unwrap_or(bytes)).into_owned();
    let start = start.trim_start_matches('\u{feff}').trim_start();
    let mut lines = start.lines().map(str::trim);
    match (lines.next(), lines.next()) {
        (Some(first), _) if first.starts_with('<') => Some(DrawingFormat::Svg),
        (Some("999"), _) | (Some("0"), Some("SECTION")) => Some(DrawingFormat::Dxf),
        _ => None,
    }
}

/// Reads a drawing with the reader that its name or its beginning asks for.
pub fn read_drawing(
    bytes: &[u8],
    file: &Named,
    options: &DrawingOptions,
) -> Result<Reading<Drawing>, Refusal> {
    match drawing_format(bytes, file) {
        Some(DrawingFormat::Dxf) => read_dxf(bytes, &file.name, options),
        Some(DrawingFormat::Svg) => read_svg(bytes, &file.name, options),
        Some(DrawingFormat::Csv) => read_csv(bytes, &file.name, options),
        None => Err(vec![Problem::error(
            Place::file(&file.name),
            "neither its name nor its content says what kind of drawing this is",
            "a file that ends in .dxf, .svg or .csv",
            "export the drawing as DXF or SVG, and give it that ending",
        )]),
    }
}

/// Reads a program written in `format`.
pub fn read_program(
    bytes: &[u8],
    file: &Named,
    format: ProgramFormatName,
    options: &ProgramOptions,
) -> Result<Reading<Program>, Refusal> {
    match format {
        ProgramFormatName::Iso => read_iso(bytes, file.shown(), options),
    }
}

/// The swept edge of `family`, moves of `program`.
pub fn sweep(family: &DiscFamily, program: &Program) -> Result<SweptRegion, Refusal> {
    envelope::sweep(family).map_err(|e| {
        vec![Problem::error(
            Place::file(&program.file),
            e.to_string(),
            "moves whose edge arithmetic can tell apart",
            "this is a limit of the computation, not of the program: round its coordinates to the control's \
             resolution, or cut the program into parts and judge each; please send the program in",
        )]
    })
}

/// The comparison of part and moves, with the regions cut out and left standing.
pub fn compare(
    part: &Part,
    (view, swept): (&PlanView, &SweptRegion),
    program: &Program,
    limits: &Limits,
    (clear, only_visited): (ClearName, bool),
) -> Comparison {
    let part_box = part.contour.bounds();
    let all = view.cutting.bounds().map_or(part_box, |b| b.union(part_box));
    let tolerances = Tolerances::for_extent(extent(all));
    let request = Request {
        gouge: limits.gouge,
        excess: limits.excess,
        cusp: limits.cusp,
        clear: match clear {
            ClearName::Wall => Clear::Wall,
            ClearName::Area => Clear::Area,
        },
        only_visited,
        program_bound: program.bound,
        tolerances,
    };
    let mut comparison = compare::compare(part, &view.cutting, &view.rapids, &request);
    comparison.deviation = compare::deviation_summary(part, &view.cutting);
    if !(comparison.gouges.is_empty() && comparison.excesses.is_empty()) {
        // Swept edge and contour that agree within what both are known to are one line.
        let within = compare::figure_bound(part, &view.cutting, &request).max(swept.bound);
        Regions::new(part, swept, &Clearance::new(&view.cutting), within).attach(&mut comparison);
    }
    comparison
}

/// Greatest coordinate of a box, as its distance from zero: rounding goes with it.
fn extent(b: Rect) -> f64 {
    [b.x0, b.y0, b.x1, b.y1].into_iter().fold(0.0, |a, v| a.max(v.abs()))
}

pub fn text(report: &Report, colored: bool) -> String {
    let style = if colored { text::Style::Colour } else { text::Style::Plain };
    text::render(report, text::DEFAULT_WIDTH, style)
}

/// What a renderer could not write down.
fn unrendered(what: &str, error: &dyn std::fmt::Display) -> Refusal {
    let help =
        "this is a fault of the program: please send in the drawing and the program with which it shows";
    vec![Problem::error(Place::file(what), error.to_string(), "", help)]
}

pub fn json(report: &Report) -> Result<Vec<u8>, Refusal> {
    json::render(report).map(String::into_bytes).map_err(|e| unrendered("the JSON report", &e))
}

pub fn edge_json(edge: &SweptEdge<'_>) -> Result<Vec<u8>, Refusal> {
    json::render_swept(edge).map(String::into_bytes).map_err(|e| unrendered("the JSON of the edge", &e))
}
