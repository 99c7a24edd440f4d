//! The report's serialisable counterpart, field by field, in the order in which it is written.

use serde::Serialize;

use super::Number;
use super::segment::{Segment, Xy, outline, xy};
use crate::compare;
use crate::findings;
use crate::input;

#[derive(Serialize)]
pub struct Report<'a> {
    format: &'static str,
    version: u32,
    generator: Generator,
    units: &'static str,
    verdict: &'static str,
    limits: Limits,
    worst: Worst,
    findings: Vec<Finding<'a>>,
    swept: Swept,
    inputs: Inputs<'a>,
    warnings: Vec<Warning<'a>>,
}

#[derive(Serialize)]
struct Generator {
    name: &'static str,
    version: &'static str,
}

#[derive(Serialize)]
struct Limits {
    gouge: Number,
    excess: Number,
    cusp: Number,
    assumed: bool,
}

#[derive(Serialize)]
struct Worst {
    gouge: Option<Figure>,
    excess: Option<Figure>,
    cusp: Option<Figure>,
}

#[derive(Serialize)]
struct Figure {
    size: Number,
    bound: Number,
}

#[derive(Serialize)]
struct Finding<'a> {
    kind: &'static str,
    severity: &'static str,
    size: Number,
    bound: Number,
    limit: Option<Number>,
    decided: bool,
    at: Xy,
    center: Option<Xy>,
    area: Option<Number>,
    contour: Option<Stretch>,
    blocks: Vec<Block<'a>>,
    cause: &'static str,
    message: &'a str,
    remedy: &'a str,
    #[serde(skip_serializing_if = "Option::is_none")]
    outline: Option<Vec<Vec<Segment>>>,
}

#[derive(Serialize)]
struct Stretch {
    #[serde(rename = "loop")]
    path: usize,
    from: Number,
    to: Number,
}

#[derive(Serialize)]
struct Block<'a> {
    file: &'a str,
    line: usize,
    text: &'a str,
}

#[derive(Serialize)]
struct Swept {
    area: Number,
    perimeter: Number,
    loops: usize,
}

#[derive(Serialize)]
struct Inputs<'a> {
    part: Part<'a>,
    program: Program<'a>,
    tools: Vec<Tool>,
    view: View,
}

#[derive(Serialize)]
struct Part<'a> {
    file: &'a str,
    layers: &'a [String],
    loops: usize,
    chains: usize,
    keep: &'static str,
    keep_assumed: bool,
    curve_bound: Number,
    allowance: Number,
    placement: &'a [String],
}

#[derive(Serialize)]
struct Program<'a> {
    file: &'a str,
    moves: usize,
    cutting_moves: usize,
    arc_tolerance: Number,
}

#[derive(Serialize)]
struct Tool {
    number: u32,
    diameter: Number,
}

#[derive(Serialize)]
struct View {
    kind: &'static str,
    top: Number,
    level: Option<Number>,
    clear: &'static str,
}

#[derive(Serialize)]
struct Warning<'a> {
    found: &'a str,
    expected: &'a str,
    help: &'a str,
    place: Place<'a>,
}

#[derive(Serialize)]
struct Place<'a> {
    file: &'a str,
    line: Option<usize>,
    column: Option<usize>,
    length: usize,
    excerpt: Option<&'a str>,
}

impl<'a> Report<'a> {
    pub fn of(report: &'a findings::Report) -> Self {
        let (limits, worst, swept) = (&report.limits, &report.worst, &report.swept);
        let figure =
            |f: Option<compare::Figure>| f.map(|f| Figure { size: Number(f.size), bound: Number(f.bound) });
        Self {
            format: "sweptedge-report",
            version: 1,
            generator: Generator { name: env!("CARGO_PKG_NAME"), version: env!("CARGO_PKG_VERSION") },
            units: report.unit.sign(),
            verdict: report.verdict.name(),
            limits: Limits {
                gouge: Number(limits.gouge),
                excess: Number(limits.excess),
                cusp: Number(limits.cusp),
                assumed: limits.assumed,
            },
            worst: Worst {
                gouge: figure(worst.gouge),
                excess: figure(worst.excess),
                cusp: figure(worst.cusp),
            },
            findings: report.findings.iter().map(Finding::of).collect(),
            swept: Swept { area: Number(swept.area), perimeter: Number(swept.perimeter), loops: swept.loops },
            inputs: Inputs::of(&report.inputs),
            warnings: report.warnings.iter().map(Warning::of).collect(),
        }
    }
}

impl<'a> Finding<'a> {
    fn of(finding: &'a findings::Finding) -> Self {
        let block = |b: &'a findings::BlockRef| Block { file: &b.file, line: b.line, text: &b.text };
        let stretch =
            |s: compare::ContourStretch| Stretch { path: s.path, from: Number(s.from), to: Number(s.to) };
        Self {
            kind: finding.kind.name(),
            severity: finding.severity.name(),
            size: Number(finding.figure.size),
            bound: Number(finding.figure.bound),
            limit: finding.limit.map(Number),
            decided: finding.decided,
            at: xy(finding.at),
            center: finding.center.map(xy),
            area: finding.region.as_ref().map(|r| Number(r.area)),
            contour: finding.contour.map(stretch),
            blocks: finding.blocks.iter().map(block).collect(),
            cause: finding.cause.name(),
            message: &finding.message,
            remedy: &finding.remedy,
            outline: finding.region.as_ref().map(|r| outline(&r.outline)),
        }
    }
}

impl<'a> Inputs<'a> {
    fn of(inputs: &'a findings::Inputs) -> Self {
        let tool = |t: &findings::Tool| Tool { number: t.number, diameter: Number(t.diameter) };
        Self {
            part: Part {
                file: &inputs.part,
                layers: &inputs.layers,
                loops: inputs.loops,
                chains: inputs.chains,
                keep: inputs.keep,
                keep_assumed: inputs.keep_assumed,
                curve_bound: Number(inputs.curve_bound),
                allowance: Number(inputs.allowance),
                placement: &inputs.placement,
            },
            program: Program {
                file: &inputs.program,
                moves: inputs.moves,
                cutting_moves: inputs.cutting_moves,
                arc_tolerance: Number(inputs.arc_tolerance),
            },
            tools: inputs.tools.iter().map(tool).collect(),
            view: View {
                kind: "plan",
                top: Number(inputs.top),
                level: inputs.level.map(Number),
                clear: inputs.clear,
            },
        }
    }
}

impl<'a> Warning<'a> {
    fn of(problem: &'a input::Problem) -> Self {
        let place = &problem.place;
        Self {
            found: &problem.found,
            expected: &problem.expected,
            help: &problem.help,
            place: Place {
                file: &place.file,
                line: place.line,
                column: place.column,
                length: place.length,
                excerpt: place.excerpt.as_deref(),
            },
        }
    }
}
