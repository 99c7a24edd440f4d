//! One check, from files to a report: what is read, in which unit it is held together, which side is
//! material, and what is said when the inputs cannot be judged.

use super::args::{ClearName, KeepName};
use super::draft::Named;
use super::files;
use super::judge;
use super::lay::{Laid, lay};
use super::request::{Check, LimitsRequest, PartRequest, ProgramRequest};
use crate::compare::{WorkingSide, working_side};
use crate::findings::{self, Facts, Inputs, Limits, Report, SweptSummary, Tool};
use crate::geometry::{Contour, Point, Segment};
use crate::input::drawing::{Drawing, DrawingOptions};
use crate::input::program::ProgramOptions;
use crate::input::{Place, Problem, Reading, Refusal};
use crate::part::{Keep, Part};
use crate::program::{BlockId, Motion, MoveKind, Program, Unit};
use crate::tolerance;
use crate::view::{DiscFamily, PlanError, PlanView, plan};

/// Judges what `check` asks for.
///
/// # Errors
/// When an input cannot be read or judged; then nothing was written.
pub fn check(check: &Check) -> Result<Report, Refusal> {
    let drawing = read_drawing(&check.part, check.program.units)?;
    let program = read_program(&check.program, drawing.value.unit)?;
    let mut warnings = [drawing.problems, program.problems].concat();
    let program = program.value;
    let layers = taken(&drawing.value, &check.part.layers);
    let Laid { contour, origins, placement, warnings: more } = lay(drawing.value, program.unit, &check.part)?;
    warnings.extend(more);
    let view = view(&program, &check.program)?;
    let keep = match fixed(check.part.keep) {
        Some(keep) => keep,
        None => found_side(&contour, &view.cutting, &program, &check.part.file)?,
    };
    let part = Part::new(contour, keep, check.part.allowance, origins)
        .map_err(|e| vec![refused_part(&check.part.file, &e.to_string())])?;
    warnings.extend(too_wide(&part, &view.cutting, &check.part.file, program.unit));
    let (limits, more) = limits(check.limits, program.unit, &check.program.file);
    warnings.extend(more);
    let swept = judge::sweep(&view.cutting, &program)?;
    let asked = (check.clear, check.only_visited);
    let comparison = judge::compare(&part, (&view, &swept), &program, &limits, asked);
    let judgement = findings::judge(&Facts {
        part: &part,
        program: &program,
        cutting: &view.cutting,
        rapids: &view.rapids,
        comparison: &comparison,
        limits,
        unit: program.unit,
        top: check.program.top,
    });
    warnings.extend(judgement.warnings);
    let inputs = inputs(check, &part, &program, &view, layers, placement);
    Ok(Report {
        unit: program.unit,
        verdict: judgement.verdict,
        limits,
        worst: judgement.worst,
        findings: judgement.findings,
        swept: SweptSummary { area: swept.area(), perimeter: swept.perimeter(), loops: swept.loops.len() },
        inputs,
        warnings,
        drawing: findings::Drawing {
            contour: part.contour.clone(),
            keep,
            swept,
            path: view.cutting.moves.iter().map(|m| m.segment).collect(),
            rapids: rapids(&program),
        },
    })
}

/// Reads the drawing of a check. Lengths of the request are in `units`; when the drawing turns out to
/// be in another unit it is read again with these lengths in its own.
fn read_drawing(part: &PartRequest, units: Option<Unit>) -> Result<Reading<Drawing>, Refusal> {
    let bytes = files::read(&part.file)?;
    let options = |scale: f64| DrawingOptions {
        layers: part.layers.clone(),
        curve_error: part.curve_error.unwrap_or(0.0) * scale,
        join_gap: part.join_gap.unwrap_or(0.0) * scale,
        unit: units,
    };
    let first = judge::read_drawing(&bytes, &part.file, &options(1.0));
    match &first {
        Ok(Reading { value: Drawing { unit: Some(own), .. }, .. })
            if units.is_some_and(|u| u != *own)
                && (part.curve_error.is_some() || part.join_gap.is_some()) =>
        {
            let scale = units.map_or(1.0, |u| u.in_mm() / own.in_mm());
            judge::read_drawing(&bytes, &part.file, &options(scale))
        }
        _ => first,
    }
}

/// Reads a program. Where neither it nor the user says a unit, the drawing's is taken, and said.
///
/// # Errors
/// When it cannot be read, or nobody says a unit.
pub fn read_program(
    request: &ProgramRequest,
    drawing_unit: Option<Unit>,
) -> Result<Reading<Program>, Refusal> {
    let bytes = files::read(&request.file)?;
    let options = ProgramOptions {
        unit: request.units.or(drawing_unit),
        target: request.units,
        arc_tolerance: request.arc_tolerance,
        block_delete: false,
    };
    let mut reading = judge::read_program(&bytes, &request.file, request.format, &options)?;
    if !reading.value.unit_stated && request.units.is_none() {
        let place = Place::file(request.file.shown());
        let Some(unit) = drawing_unit else {
            return Err(vec![Problem::error(
                place,
                "the program states no unit, and nothing else does",
                "G21 (mm) or G20 (inch) in the program",
                "say --units mm or --units in",
            )]);
        };
        reading.problems.push(Problem::warning(
            place,
            format!("the program states no unit: taken as the drawing's, {}", unit.sign()),
            "G21 (mm) or G20 (inch)",
            "say --units mm or --units in if that is wrong",
        ));
    }
    Ok(reading)
}

/// What cuts at the level, and the rapids below the top.
///
/// # Errors
/// When a tool is unknown, a move cannot be seen in plan, or nothing cuts.
pub fn view(program: &Program, request: &ProgramRequest) -> Result<PlanView, Refusal> {
    let level = request.level.unwrap_or(request.top);
    let seen = |level| plan(program, level, |tool| request.cutters.of(tool));
    let fault = |e| vec![plan_problem(program, e)];
    let cutting = seen(level).map_err(fault)?.cutting;
    if cutting.moves.is_empty() {
        return Err(vec![nothing_cuts(program, level)]);
    }
    // A rapid between the level and the top meets the part above the level.
    let rapids = seen(request.top).map_err(fault)?.rapids;
    Ok(PlanView { cutting, rapids })
}

fn block_place(program: &Program, block: BlockId) -> Place {
    match program.blocks.get(block.0 as usize) {
        Some(b) => Place::line(&program.file, b.line, &b.text),
        None => Place::file(&program.file),
    }
}

fn plan_problem(program: &Program, error: PlanError) -> Problem {
    match error {
        PlanError::UnknownTool { tool: 0, block } => Problem::error(
            block_place(program, block),
            "a move cuts before the program has named a tool",
            "one cutter, or a T word before the first cut",
            "give one cutter only, with --diameter or a single [cutter.N] in the job file",
        ),
        PlanError::UnknownTool { tool, block } => Problem::error(
            block_place(program, block),
            format!("nothing is known of tool T{tool}, which cuts here"),
            "the diameter of every cutter the program uses",
            format!("add [cutter.{tool}] with its diameter to the job file"),
        ),
        PlanError::TiltedHelix { block } => Problem::error(
            block_place(program, block),
            "a helix about X or Y is neither a line nor an arc seen from above",
            "arcs in G17, or plain arcs in G18 and G19",
            "have the post-processor write this move as lines or plain arcs",
        ),
    }
}

fn nothing_cuts(program: &Program, level: f64) -> Problem {
    let feeds = || program.moves.iter().filter(|m| m.kind == MoveKind::Feed);
    let lowest = feeds().map(|m| m.motion.start().z.min(m.motion.end().z)).reduce(f64::min);
    let place = Place::file(&program.file);
    match lowest {
        None => Problem::error(
            place,
            "the program holds no cutting move",
            "moves with G1, G2 or G3",
            "check that this is the right file and that it is complete",
        ),
        Some(z) => Problem::error(
            place,
            format!("no cutting move goes below Z{level}: the lowest feed move ends at Z{z:.3}"),
            "a tip below the part's top",
            "say where the top of the part is with --top Z (and the height to look at with --level Z)",
        ),
    }
}

const fn fixed(keep: KeepName) -> Option<Keep> {
    match keep {
        KeepName::Inside => Some(Keep::Inside),
        KeepName::Outside => Some(Keep::Outside),
        KeepName::Left => Some(Keep::Left),
        KeepName::Right => Some(Keep::Right),
        KeepName::Auto => None,
    }
}

const fn keep_name(keep: Keep) -> &'static str {
    match keep {
        Keep::Inside => "inside",
        Keep::Outside => "outside",
        Keep::Left => "left",
        Keep::Right => "right",
    }
}

/// The side that is material, from where the cutter works.
fn found_side(
    contour: &Contour,
    cutting: &DiscFamily,
    program: &Program,
    drawing: &Named,
) -> Result<Keep, Refusal> {
    let block = |position: usize| {
        let index = cutting.moves.get(position).map(|m| m.source.0 as usize);
        index.and_then(|i| program.moves.get(i)).and_then(|m| program.blocks.get(m.block.0 as usize))
    };
    let spot = |(p, position): (Point, usize)| {
        let line = block(position).map(|b| format!(" in line {}", b.line)).unwrap_or_default();
        format!("X{:.3} Y{:.3}{line}", p.x, p.y)
    };
    let refuse = |found: String, expected: &str, help: &str| {
        Err(vec![Problem::error(Place::file(&drawing.name), found, expected, help)])
    };
    match working_side(contour, cutting) {
        WorkingSide::One { keep } => Ok(keep),
        WorkingSide::Both { keep, first, second } => {
            let (one, other) = if keep.is_for_loops() { ("outside", "inside") } else { ("right", "left") };
            let choice = if keep.is_for_loops() {
                "--keep inside or --keep outside"
            } else {
                "--keep left or --keep right"
            };
            refuse(
                format!(
                    "the cutter works on both sides of the contour: {one} of it at {}, {other} at {}",
                    spot(first),
                    spot(second)
                ),
                "cutting moves on one side, or a word on which side is material",
                &format!(
                    "say {choice}; if the cutter belongs on one side only, check where the drawing lies \
                     (--shift, --turn, --mirror)"
                ),
            )
        }
        WorkingSide::Neither => refuse(
            "the cutter's center runs on the contour itself or beyond its ends, so it shows no side".into(),
            "a path beside the contour",
            "say --keep inside, outside, left or right; a program written for the control's radius \
             compensation has to be judged with the compensated path",
        ),
        WorkingSide::LoopsAndChains => refuse(
            "the drawing holds closed loops as well as open chains".into(),
            "loops only, or chains only",
            "take the layer of the finished contour with --layer NAME; sweptedge inspect lists layers and loops",
        ),
    }
}

fn refused_part(drawing: &Named, what: &str) -> Problem {
    Problem::error(
        Place::file(&drawing.name),
        what,
        "",
        "run sweptedge inspect on the drawing to see its loops and layers, then choose with --layer or --keep",
    )
}

/// A warning when the cutter cannot stand in any opening of a pocket. By the openings' boxes, so it
/// never warns without reason; a narrow slanted slot shows in the findings.
fn too_wide(part: &Part, cutting: &DiscFamily, drawing: &Named, unit: Unit) -> Option<Problem> {
    if part.keep != Keep::Outside {
        return None;
    }
    let openings = part.contour.paths().iter().filter(|p| p.signed_area() < 0.0);
    let widest = openings.map(|p| p.bounds().width().min(p.bounds().height())).reduce(f64::max)?;
    let smallest = cutting.moves.iter().map(|m| 2.0 * m.radius).reduce(f64::min)?;
    (smallest > widest).then(|| {
        Problem::warning(
            Place::file(&drawing.name),
            format!(
                "the cutter ({smallest} {u}) is wider than any opening of the part ({widest:.3} {u})",
                u = unit.sign()
            ),
            "",
            "take a smaller cutter, or check units and --keep",
        )
    })
}

/// Limits for acceptance; what was not said is assumed, and said.
fn limits(said: LimitsRequest, unit: Unit, program: &Named) -> (Limits, Option<Problem>) {
    let default = match unit {
        Unit::Millimetre => tolerance::ACCEPTANCE_MM,
        Unit::Inch => tolerance::ACCEPTANCE_INCH,
    };
    let all = [("gouge", said.gouge), ("excess", said.excess), ("cusp", said.cusp)];
    let open: Vec<&str> = all.iter().filter(|(_, v)| v.is_none()).map(|(n, _)| *n).collect();
    let assumed = open.len() == all.len();
    let partly = (!assumed && !open.is_empty()).then(|| {
        Problem::warning(
            Place::file(&program.name),
            format!("no tolerance was said for {}: {default} {} is taken", open.join(" and "), unit.sign()),
            "",
            "say all three, or --tolerance for all of them",
        )
    });
    let limits = Limits {
        gouge: said.gouge.unwrap_or(default),
        excess: said.excess.unwrap_or(default),
        cusp: said.cusp.unwrap_or(default),
        assumed,
    };
    (limits, partly)
}

fn taken(drawing: &Drawing, asked: &[String]) -> Vec<String> {
    if asked.is_empty() {
        return Vec::new();
    }
    drawing.layers.iter().filter(|l| l.taken).map(|l| l.name.clone()).collect()
}

fn inputs(
    check: &Check,
    part: &Part,
    program: &Program,
    view: &PlanView,
    layers: Vec<String>,
    placement: Vec<String>,
) -> Inputs {
    let loops = part.contour.paths().iter().filter(|p| p.is_closed()).count();
    Inputs {
        part: check.part.file.name.clone(),
        layers,
        loops,
        chains: part.contour.paths().len() - loops,
        keep: keep_name(part.keep),
        keep_assumed: check.part.keep == KeepName::Auto,
        curve_bound: part.contour.bound(),
        allowance: part.allowance,
        placement,
        program: program.file.clone(),
        moves: program.moves.len(),
        cutting_moves: view.cutting.moves.len(),
        tools: tools(program, &view.cutting),
        top: check.program.top,
        level: check.program.level,
        clear: match check.clear {
            ClearName::Wall => "wall",
            ClearName::Area => "area",
        },
        arc_tolerance: check.program.arc_tolerance.unwrap_or(match program.unit {
            Unit::Millimetre => tolerance::ARC_RADII_MM,
            Unit::Inch => tolerance::ARC_RADII_INCH,
        }),
    }
}

/// Tools that cut in this view, by number.
fn tools(program: &Program, cutting: &DiscFamily) -> Vec<Tool> {
    let mut tools: Vec<Tool> = Vec::new();
    for m in &cutting.moves {
        let number = program.moves.get(m.source.0 as usize).map_or(0, |m| m.tool);
        if !tools.iter().any(|t| t.number == number) {
            tools.push(Tool { number, diameter: 2.0 * m.radius });
        }
    }
    tools.sort_by_key(|t| t.number);
    tools
}

/// Every rapid in plan, at whatever height: the picture shows how the tool travels.
fn rapids(program: &Program) -> Vec<Segment> {
    let rapids = program.moves.iter().filter(|m| m.kind == MoveKind::Rapid);
    let plan = rapids.filter_map(|m| match m.motion {
        Motion::Straight { start, end } if start.plan() != end.plan() => {
            Some(Segment::line(start.plan(), end.plan()))
        }
        _ => None,
    });
    plan.collect()
}
