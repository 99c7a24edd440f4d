//! What was understood of a drawing or a program, in words, before anything is judged by it.

use std::fmt::Write;
use std::path::Path;

use super::args::{InspectArgs, ProgramFormatName, UnitName};
use super::draft::{Named, Rule, command_line};
use super::exit::Exit;
use super::judge;
use super::{files, output};
use crate::envelope::SweptRegion;
use crate::geometry::{Path as Chain, Rect, Segment};
use crate::input::drawing::{Drawing, DrawingOptions};
use crate::input::program::ProgramOptions;
use crate::input::{Reading, Refusal};
use crate::part::nesting;
use crate::program::{Motion, MoveKind, Program, Unit};

/// Inspects each file; one that cannot be read does not stop the others.
pub fn run(args: &InspectArgs) -> Exit {
    let asked = [
        ("the join gap", args.join_gap, Rule::NotNegative),
        ("the curve error", args.curve_error, Rule::Positive),
        ("the arc tolerance", args.arc_tolerance, Rule::NotNegative),
    ];
    let wrong: Vec<_> = asked.into_iter().filter_map(|(n, v, r)| r.broken(n, v?, &command_line())).collect();
    if !wrong.is_empty() {
        output::complain(&wrong);
        return Exit::NotJudged;
    }
    let one = |file: &std::path::PathBuf| {
        let told = inspect(args, &Named::within(Path::new(""), file));
        match told.and_then(|text| output::to_standard_output(text.as_bytes())) {
            Ok(()) => Exit::Pass,
            Err(problems) => {
                output::complain(&problems);
                Exit::NotJudged
            }
        }
    };
    args.files.iter().map(one).max().unwrap_or(Exit::NotJudged)
}

fn inspect(args: &InspectArgs, file: &Named) -> Result<String, Refusal> {
    let unit = args.units.map(|u| match u {
        UnitName::Mm => Unit::Millimetre,
        UnitName::In => Unit::Inch,
    });
    let bytes = files::read(file)?;
    if is_drawing(&file.path) {
        let options = DrawingOptions {
            layers: args.layer.clone(),
            curve_error: args.curve_error.unwrap_or(0.0),
            join_gap: args.join_gap.unwrap_or(0.0),
            unit,
        };
        judge::read_drawing(&bytes, file, &options).map(|r| drawing(&file.name, &r))
    } else {
        let options =
            ProgramOptions { unit, target: None, arc_tolerance: args.arc_tolerance, block_delete: false };
        judge::read_program(&bytes, file, ProgramFormatName::default(), &options).map(|r| program(&r))
    }
}

/// By its name: DXF, SVG or table.
fn is_drawing(path: &Path) -> bool {
    let ending = path.extension().map(|e| e.to_string_lossy().to_lowercase());
    ending.is_some_and(|e| ["dxf", "svg", "csv"].contains(&e.as_str()))
}

/// A length, area or coordinate without trailing zeros.
fn n(value: f64) -> String {
    let text = format!("{value:.4}");
    let short = text.trim_end_matches('0').trim_end_matches('.');
    if short == "-0" { "0".into() } else { short.into() }
}

fn count(number: usize, one: &str) -> String {
    if number == 1 { format!("1 {one}") } else { format!("{number} {one}s") }
}

fn entities(number: usize) -> String {
    if number == 1 { "1 entity".into() } else { format!("{number} entities") }
}

fn lines_and_arcs<'a>(segments: impl Iterator<Item = &'a Segment>) -> String {
    let (mut lines, mut arcs) = (0, 0);
    for segment in segments {
        match segment {
            Segment::Line(_) => lines += 1,
            Segment::Arc(_) => arcs += 1,
        }
    }
    [(lines, "line"), (arcs, "arc")]
        .into_iter()
        .filter(|(number, _)| *number > 0)
        .map(|(number, one)| count(number, one))
        .collect::<Vec<_>>()
        .join(", ")
}

fn extent(b: Rect) -> String {
    let (w, h) = (n(b.width()), n(b.height()));
    format!("X {} to {}, Y {} to {} ({w} x {h})", n(b.x0), n(b.x1), n(b.y0), n(b.y1))
}

/// Width of a row, that of the classic terminal, and where its text begins.
const WIDTH: usize = 80;
/// See [`WIDTH`].
const INDENT: usize = 12;

/// Below this, in the unit of the file, a difference is rounding and not worth a word.
const ROUNDING: f64 = 1e-6;

/// One row of the description, wrapped.
fn row(out: &mut String, name: &str, text: &str) {
    let mut line = format!("  {name:<9}");
    let mut used = line.chars().count();
    for word in text.split(' ') {
        let more = word.chars().count() + 1;
        if used + more > WIDTH && used > INDENT {
            let _ = writeln!(out, "{line}");
            line = " ".repeat(INDENT - 1);
            used = INDENT - 1;
        }
        line.push(' ');
        line.push_str(word);
        used += more;
    }
    let _ = writeln!(out, "{line}");
}

/// A bound, rounded up to the millionth.
fn within(bound: f64) -> String {
    let up = (bound * 1e6).ceil().max(1.0) / 1e6;
    format!("{up:.6}").trim_end_matches('0').trim_end_matches('.').to_owned()
}

fn drawing(name: &str, reading: &Reading<Drawing>) -> String {
    let d = &reading.value;
    let unit = d.unit.map_or("no unit stated", Unit::sign);
    let mut out = format!("{name}: drawing, {unit}\n");
    row(&mut out, "box", &extent(d.contour.bounds()));
    let curves = if d.contour.bound() > ROUNDING {
        format!("arcs that lie within {} of the drawing's curves", within(d.contour.bound()))
    } else {
        "lines and arcs as drawn".into()
    };
    row(&mut out, "curves", &curves);
    for layer in &d.layers {
        let taken = if layer.taken { "taken" } else { "left out" };
        row(&mut out, "layer", &format!("{}: {}, {taken}", layer.name, entities(layer.entities)));
    }
    for (i, (path, nest)) in d.contour.paths().iter().zip(nesting(&d.contour)).enumerate() {
        let kind = if path.is_closed() { "loop" } else { "chain" };
        let place = match nest.parent {
            Some(parent) => format!("inside loop {parent}, depth {}", nest.depth),
            None => "outermost".into(),
        };
        let origin = d.origins.get(i);
        let layer = origin.and_then(|o| o.layer.as_ref()).map(|l| format!(", on {l}")).unwrap_or_default();
        let line = origin.and_then(|o| o.line).map(|l| format!(", from line {l}")).unwrap_or_default();
        row(&mut out, &format!("{kind} {i}"), &format!("{}; {place}{layer}{line}", shape(path)));
    }
    warnings(&mut out, reading);
    out
}

fn shape(path: &Chain) -> String {
    let b = path.bounds();
    let round = match path.segments() {
        [Segment::Arc(a)] if path.is_closed() => Some(*a),
        [Segment::Arc(a), Segment::Arc(c)]
            if path.is_closed() && (a.center() - c.center()).hypot() <= 1e-9 * a.radius() =>
        {
            Some(*a)
        }
        _ => None,
    };
    if let Some(a) = round {
        let c = a.center();
        return format!("circle of diameter {} at X{} Y{}", n(2.0 * a.radius()), n(c.x), n(c.y));
    }
    let mut text =
        format!("{} x {}, {}", n(b.width()), n(b.height()), lines_and_arcs(path.segments().iter()));
    if path.is_closed() {
        let _ = write!(text, ", area {}, length {}", n(path.signed_area().abs()), n(path.length()));
    } else {
        let ends = (path.segments().first().map(Segment::start), path.segments().last().map(Segment::end));
        if let (Some(a), Some(e)) = ends {
            let _ = write!(text, ", open from X{} Y{} to X{} Y{}", n(a.x), n(a.y), n(e.x), n(e.y));
        }
        let _ = write!(text, ", length {}", n(path.length()));
    }
    if let Some(radius) = smallest_radius(path.segments().iter()) {
        let _ = write!(text, ", smallest radius {}", n(radius));
    }
    text
}

fn smallest_radius<'a>(segments: impl Iterator<Item = &'a Segment>) -> Option<f64> {
    let radii = segments.filter_map(|s| match s {
        Segment::Arc(a) => Some(a.radius()),
        Segment::Line(_) => None,
    });
    radii.reduce(f64::min)
}

fn program(reading: &Reading<Program>) -> String {
    let p = &reading.value;
    let stated = if p.unit_stated { "stated by the program" } else { "not stated by the program" };
    let mut out = format!("{}: program, {}, {stated}\n", p.file, p.unit.sign());
    let of = |kind| p.moves.iter().filter(move |m| m.kind == kind);
    let (feeds, rapids) = (of(MoveKind::Feed).count(), of(MoveKind::Rapid).count());
    let arcs = of(MoveKind::Feed).filter(|m| matches!(m.motion, Motion::Circular { .. })).count();
    row(&mut out, "blocks", &format!("{} with moves", p.blocks.len()));
    let cutting = format!("{feeds} at feed rate ({}, {})", count(feeds - arcs, "line"), count(arcs, "arc"));
    row(&mut out, "moves", &format!("{cutting}, {}", count(rapids, "rapid")));
    let mut tools: Vec<u32> = of(MoveKind::Feed).map(|m| m.tool).collect();
    tools.sort_unstable();
    for tool in tools.chunk_by(|a, b| a == b) {
        let name = match tool.first() {
            Some(0) | None => "no T word".to_owned(),
            Some(number) => format!("T{number}"),
        };
        row(&mut out, "tool", &format!("{name}: {}", count(tool.len(), "feed move")));
    }
    let ends = || of(MoveKind::Feed).flat_map(|m| [m.motion.start().z, m.motion.end().z]);
    match (p.says_z, ends().reduce(f64::min), ends().reduce(f64::max)) {
        (true, Some(low), Some(high)) => row(&mut out, "tip", &format!("Z {} to {}", n(low), n(high))),
        _ => row(&mut out, "tip", "the program never says Z: every feed move counts as cutting"),
    }
    let boxes = of(MoveKind::Feed).map(|m| motion_bounds(&m.motion));
    if let Some(all) = boxes.reduce(|a, b| a.union(b)) {
        row(&mut out, "box", &format!("{}, cutter's center at feed rate", extent(all)));
    }
    if p.bound > 0.0 {
        row(&mut out, "arcs", &format!("kept within {} of what is commanded", within(p.bound)));
    }
    warnings(&mut out, reading);
    out
}

/// Box of a motion seen from above. For arcs in upright planes, of their ends and highest points.
fn motion_bounds(motion: &Motion) -> Rect {
    match motion {
        Motion::Circular { plane: crate::program::Plane::Xy, arc, .. } => arc.bounds(),
        Motion::Circular { plane, arc, along } => {
            let b = arc.bounds();
            let corner = |x, y, along| plane.point(crate::geometry::Point::new(x, y), along).plan();
            Rect::from_points(corner(b.x0, b.y0, along.0), corner(b.x1, b.y1, along.1))
        }
        Motion::Straight { start, end } => Rect::from_points(start.plan(), end.plan()),
    }
}

fn warnings<T>(out: &mut String, reading: &Reading<T>) {
    for problem in &reading.problems {
        for line in problem.to_string().lines() {
            let _ = writeln!(out, "  {line}");
        }
    }
}

/// The swept edge in a few words.
pub fn swept(region: &SweptRegion, program: &Program, written_nowhere: bool) -> String {
    let unit = program.unit.sign();
    let mut out = format!("{}: swept edge\n", program.file);
    let holes = region.loops.iter().filter(|l| l.signed_area() < 0.0).count();
    row(
        &mut out,
        "area",
        &format!("{} {unit}^2 in {}", n(region.area()), count(region.loops.len() - holes, "region")),
    );
    row(&mut out, "holes", &count(holes, "hole"));
    row(
        &mut out,
        "edge",
        &format!("{} {unit}, {}", n(region.perimeter()), lines_and_arcs(region.segments())),
    );
    row(&mut out, "bound", &format!("the edge is exact to {} {unit}", within(region.bound)));
    if written_nowhere {
        row(&mut out, "written", "nothing; say --json, --svg, --dxf or --csv FILE to have it");
    }
    out
}
