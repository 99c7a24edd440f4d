//! Where the command line meets the rooms: one function for each thing it asks of them.

use super::draft::Named;
use crate::compare::Comparison;
use crate::envelope::SweptRegion;
use crate::findings::{Finding, Limits, Report, Verdict, Worst};
use crate::input::drawing::{Drawing, DrawingOptions};
use crate::input::{Place, Problem, Reading, Refusal};
use crate::part::Part;
use crate::program::{Program, Unit};
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

pub fn sweep(_: &DiscFamily) -> Result<SweptRegion, Refusal> {
    Err(vec![not_yet("envelope")])
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

pub fn text(_: &Report, _colored: bool) -> String {
    String::new()
}

pub fn json(_: &Report) -> Result<Vec<u8>, Refusal> {
    Err(vec![not_yet("json")])
}

pub fn svg(_: &Report) -> Result<Vec<u8>, Refusal> {
    Err(vec![not_yet("svg")])
}

pub fn dxf(_: &SweptRegion, _: Unit) -> Result<Vec<u8>, Refusal> {
    Err(vec![not_yet("dxf")])
}

pub fn csv(_: &SweptRegion) -> Vec<u8> {
    Vec::new()
}

pub fn edge_json(_: &SweptRegion, _: &DiscFamily, _: &Program) -> Result<Vec<u8>, Refusal> {
    Err(vec![not_yet("json")])
}

pub fn edge_svg(_: &SweptRegion, _: &DiscFamily, _: &Program) -> Result<Vec<u8>, Refusal> {
    Err(vec![not_yet("svg")])
}

pub fn report_schema() -> &'static str {
    ""
}

pub fn envelope_schema() -> &'static str {
    ""
}
