//! Where the command line meets the rooms: one function for each thing it asks of them.

use super::draft::Named;
use crate::compare::Comparison;
use crate::envelope::{self, SweptRegion};
use crate::findings::{Finding, Limits, Report, Verdict, Worst};
use crate::input::drawing::{Drawing, DrawingOptions};
use crate::input::{Place, Problem, Reading, Refusal};
use crate::part::Part;
use crate::program::{Program, Unit};
use crate::report::{SweptEdge, csv, dxf, json, text};
use crate::view::{DiscFamily, PlanView};

/// How a program is to be read; stands in for `input::program::ProgramOptions`.
#[derive(Clone, Debug, Default)]
pub struct ProgramOptions {
    pub unit: Option<Unit>,
    pub target: Option<Unit>,
    pub arc_tolerance: Option<f64>,
    pub block_delete: bool,
}

fn not_yet(what: &str) -> Problem {
    Problem::error(Place::file(what), "this room is not wired yet", "", "wire it in src/cli/judge.rs")
}

pub fn read_drawing(_: &[u8], file: &Named, _: &DrawingOptions) -> Result<Reading<Drawing>, Refusal> {
    Err(vec![not_yet(&file.name)])
}

pub fn read_program(_: &[u8], file: &Named, _: &ProgramOptions) -> Result<Reading<Program>, Refusal> {
    Err(vec![not_yet(&file.name)])
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

/// What the judgement says.
pub struct Judgement {
    pub verdict: Verdict,
    pub worst: Worst,
    pub findings: Vec<Finding>,
}

pub fn compare(_: &Part, _: &PlanView, _: &SweptRegion, _: &Limits) -> Result<Comparison, Refusal> {
    Err(vec![not_yet("compare")])
}

pub fn judge(_: &Comparison, _: &Program, _: &Limits) -> Judgement {
    Judgement { verdict: Verdict::Undecided, worst: Worst::default(), findings: Vec::new() }
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

pub fn svg(_: &Report) -> Result<Vec<u8>, Refusal> {
    Err(vec![not_yet("svg")])
}

pub fn dxf(swept: &SweptRegion, unit: Unit) -> Result<Vec<u8>, Refusal> {
    dxf::render(swept, unit).map_err(|e| unrendered("the DXF drawing", &e))
}

pub fn csv(swept: &SweptRegion) -> Vec<u8> {
    csv::render(swept).into_bytes()
}

pub fn edge_json(edge: &SweptEdge<'_>) -> Result<Vec<u8>, Refusal> {
    json::render_swept(edge).map(String::into_bytes).map_err(|e| unrendered("the JSON of the edge", &e))
}

pub fn edge_svg(_: &SweptEdge<'_>) -> Result<Vec<u8>, Refusal> {
    Err(vec![not_yet("svg")])
}
