//! The column beside the drawing: verdict, figures, inputs, the list of findings, legend, care.

use svg::node::element::{Group, Line, Rectangle};

use super::hatch::{INK, RULE, ink};
use super::legend::{Entry, ROW, legend};
use super::lettering::{Align, SIZE, fit, fit_name, fit_number, lines, listed, text};
use super::page::{COLUMN, mm};
use crate::compare::Figure;
use crate::findings::{Finding, Kind, Report, Verdict};
use crate::report::{care, headline, number};

/// From one base line to the next, running text and small print.
const STEP: f64 = 4.2;
const SMALL_STEP: f64 = 3.1;
/// Width of the words before values.
const NAMES: f64 = 17.0;
/// Size of the small print.
const SMALL: f64 = 2.3;

/// The column being written from its top.
pub struct Column {
    group: Group,
    /// Where the next thing goes.
    y: f64,
}

impl Column {
    fn new() -> Self {
        Self { group: Group::new().set("id", "se-column"), y: COLUMN.y0 }
    }

    fn line(&mut self, content: &str) {
        self.y += STEP;
        self.put(text(&fit(content, SIZE, COLUMN.width()), COLUMN.x0, self.y, SIZE, Align::Start));
    }

    fn put<T: Into<Box<dyn svg::Node>>>(&mut self, node: T) {
        let group = std::mem::replace(&mut self.group, Group::new());
        self.group = group.add(node);
    }

    fn rule(&mut self) {
        self.y += 2.4;
        self.put(rule(self.y));
        self.y += 0.6;
    }

    /// A word before a value of one line.
    fn fact(&mut self, name: &str, value: &str) {
        self.facts(name, &[fit(value, SIZE, COLUMN.width() - NAMES)]);
    }

    /// A word before as many whole items as `most` lines hold.
    fn list(&mut self, name: &str, items: &[String], most: usize) {
        self.facts(name, &listed(items, SIZE, COLUMN.width() - NAMES, most));
    }

    fn facts(&mut self, name: &str, values: &[String]) {
        self.put(text(name, COLUMN.x0, self.y + STEP, SIZE, Align::Start).set("fill", RULE));
        for line in values {
            self.y += STEP;
            self.put(text(line, COLUMN.x0 + NAMES, self.y, SIZE, Align::Start));
        }
    }

    /// A word before the name of a file.
    fn file(&mut self, word: &str, name: &str) {
        self.facts(word, &[fit_name(name, SIZE, COLUMN.width() - NAMES)]);
    }
}

fn rule(y: f64) -> Line {
    let line =
        Line::new().set("x1", mm(COLUMN.x0)).set("x2", mm(COLUMN.x1)).set("y1", mm(y)).set("y2", mm(y));
    line.set("stroke", RULE).set("stroke-width", 0.2)
}

/// The column of a report.
pub fn of_report(report: &Report, entries: &[Entry]) -> Group {
    let mut column = Column::new();
    verdict(&mut column, report);
    figures(&mut column, report);
    column.rule();
    facts(&mut column, report);
    let foot = foot(&mut column, entries);
    if !report.findings.is_empty() {
        column.rule();
        list(&mut column, report, foot);
    }
    column.group
}

/// The column of a swept edge: its figures and the legend.
pub fn of_swept(edge: &crate::report::SweptEdge<'_>, entries: &[Entry]) -> Group {
    let mut column = Column::new();
    let (unit, region) = (edge.program.unit, edge.region);
    let sign = unit.sign();
    column.y += 6.0;
    column.put(text("Swept edge", COLUMN.x0, column.y, 5.0, Align::Start).set("font-weight", "bold"));
    column.rule();
    column.file("program", &edge.program.file);
    column.fact("area", &format!("{} square {sign}", number::area(region.area())));
    column.fact("length", &format!("{} {sign}", number::place(region.perimeter(), unit)));
    column.fact("loops", &region.loops.len().to_string());
    column.fact("certain to", &format!("{} {sign}", number::bound(region.bound, unit)));
    foot(&mut column, entries);
    column.group
}

/// The verdict in a box: white on ink for a fail, ruled for a pass, dashed where undecided.
fn verdict(column: &mut Column, report: &Report) {
    const HIGH: f64 = 11.0;
    let (fill, letter, dashes) = match report.verdict {
        Verdict::Fail => (INK, "#ffffff", "none"),
        Verdict::Pass => ("#ffffff", INK, "none"),
        Verdict::Undecided => ("#ffffff", INK, "2 1.2"),
    };
    let frame = Rectangle::new()
        .set("x", mm(COLUMN.x0))
        .set("y", mm(column.y))
        .set("width", mm(COLUMN.width()))
        .set("height", HIGH)
        .set("fill", fill)
        .set("stroke", INK)
        .set("stroke-width", 0.6)
        .set("stroke-dasharray", dashes);
    column.put(frame);
    let word = report.verdict.name().to_uppercase();
    let middle = COLUMN.center().x;
    let word = text(&word, middle, column.y + 7.9, 6.5, Align::Middle).set("fill", letter);
    column.put(word.set("font-weight", "bold"));
    column.y += HIGH + 0.8;
    let words = headline(report);
    let mut letters = words.chars();
    let words: String = letters.next().into_iter().flat_map(char::to_uppercase).chain(letters).collect();
    for line in lines(&words, SIZE, COLUMN.width(), 5) {
        column.line(&line);
    }
}

/// Greatest of each kind against its limit.
fn figures(column: &mut Column, report: &Report) {
    let (unit, worst, limits) = (report.unit, &report.worst, &report.limits);
    column.rule();
    let (size_at, limit_at) = (COLUMN.x0 + 38.0, COLUMN.x1);
    column.y += STEP;
    let y = column.y;
    column.put(text("greatest", COLUMN.x0, y, SIZE, Align::Start).set("fill", RULE));
    column.put(text(unit.sign(), size_at, y, SIZE, Align::End).set("fill", RULE));
    column.put(text("limit", limit_at, y, SIZE, Align::End).set("fill", RULE));
    let mut row = |kind: Kind, figure: Option<Figure>, limit: f64| {
        column.y += STEP;
        let y = column.y;
        column.put(text(kind.name(), COLUMN.x0, y, SIZE, Align::Start).set("fill", ink(kind).full));
        let size = figure.map_or_else(|| "\u{2013}".to_owned(), |f| number::figure(f, Some(limit), unit));
        column.put(text(&fit_number(&size, SIZE, 24.0), size_at, y, SIZE, Align::End));
        column.put(text(&fit_number(&number::stated(limit), SIZE, 20.0), limit_at, y, SIZE, Align::End));
    };
    row(Kind::Gouge, worst.gouge, limits.gouge);
    row(Kind::Excess, worst.excess, limits.excess);
    row(Kind::Cusp, worst.cusp, limits.cusp);
    if limits.assumed {
        column.line("limits assumed: none was stated");
    }
}

/// What was judged.
fn facts(column: &mut Column, report: &Report) {
    let (inputs, sign) = (&report.inputs, report.unit.sign());
    column.file("part", &inputs.part);
    column.file("program", &inputs.program);
    let named = |t: &crate::findings::Tool| {
        let diameter = number::stated(t.diameter);
        if t.number == 0 { format!("{diameter} {sign}") } else { format!("T{} {diameter} {sign}", t.number) }
    };
    let tools: Vec<String> = inputs.tools.iter().map(named).collect();
    column.list("cutter \u{2300}", &tools, 3);
    column.fact("material", &format!("{}{}", inputs.keep, if inputs.keep_assumed { " (found)" } else { "" }));
    if inputs.allowance > 0.0 {
        column.fact("allowance", &format!("{} {sign}", number::stated(inputs.allowance)));
    }
    let as_drawn = ["as drawn".to_owned()];
    let placement = if inputs.placement.is_empty() { &as_drawn } else { inputs.placement.as_slice() };
    column.list("placed", placement, 4);
}

/// Legend and care, from the foot up; where they begin.
fn foot(column: &mut Column, entries: &[Entry]) -> f64 {
    let care = lines(care::SHORT, SMALL, COLUMN.width(), 5);
    let mut y = COLUMN.y1 - 0.8 - SMALL_STEP * (care.len().saturating_sub(1)) as f64;
    let care_top = y - SMALL_STEP;
    for line in &care {
        column.put(text(line, COLUMN.x0, y, SMALL, Align::Start));
        y += SMALL_STEP;
    }
    column.put(rule(care_top - 0.4));
    let top = care_top - 1.8 - ROW * entries.len() as f64;
    column.put(legend(entries, top));
    column.put(rule(top - 1.2));
    top - 1.2
}

/// As many findings as there is room for above `foot`, one a line.
fn list(column: &mut Column, report: &Report, foot: f64) {
    let room = ((foot - 1.0 - column.y) / STEP).floor().max(0.0);
    // At most the column's height in lines: the cast loses nothing.
    let room = room as usize;
    let count = report.findings.len();
    let shown = if count <= room { count } else { room.saturating_sub(1) };
    for (finding, number) in report.findings.iter().take(shown).zip(1..) {
        entry(column, finding, number, report);
    }
    if shown < count && room > 0 {
        column.line(&format!("and {} more, all in the JSON report", count - shown));
    }
}

fn entry(column: &mut Column, finding: &Finding, number: usize, report: &Report) {
    column.y += STEP;
    let y = column.y;
    let place = finding.blocks.first().map_or_else(String::new, |b| match b.line {
        // The word makes way for the longest numbers.
        line if line < 100_000_000 => format!("line {line}"),
        line => line.to_string(),
    });
    column.put(text(&number.to_string(), COLUMN.x0 + 6.0, y, SIZE, Align::End).set("font-weight", "bold"));
    let kind = text(finding.kind.name(), COLUMN.x0 + 8.0, y, SIZE, Align::Start);
    column.put(kind.set("fill", ink(finding.kind).full));
    let size = number::figure(finding.figure, finding.limit, report.unit);
    column.put(text(&fit_number(&size, SIZE, 18.0), COLUMN.x0 + 38.0, y, SIZE, Align::End));
    column.put(text(&place, COLUMN.x1, y, SIZE, Align::End));
}
