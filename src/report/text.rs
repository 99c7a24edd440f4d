//! The report for a terminal: verdict and worst figure first, then what is wrong and what to do.
//!
//! Plain characters only, wrapped to the width asked for. Colour never carries meaning alone: purple
//! goes with what is cut too deep, orange with what is left standing, and the words say both.

mod table;
mod wrap;

use anstyle::{Ansi256Color, Effects};

use crate::compare::Figure;
use crate::findings::{Cause, Finding, Kind, Report, Verdict};

use super::{care, headline, number, plain};
use table::verdict_word;
use wrap::{cut, wrap};

/// With or without colour.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Style {
    /// No escape sequence at all.
    Plain,
    /// ANSI colours.
    Colour,
}

/// Width where none is known: the classic terminal.
pub const DEFAULT_WIDTH: usize = 80;

/// Narrowest width honoured; below it lines grow longer than asked.
const NARROWEST: usize = 40;

/// Least error of the curves' arcs that is spoken of, a length: a micrometre's thousandth.
const WORTH_A_WORD: f64 = 1e-6;

/// Findings described in full; the rest is counted.
const IN_FULL: usize = 20;

/// The report as text with line ends, at most `width` characters wide (never narrower than 40).
#[must_use]
pub fn render(report: &Report, width: usize, style: Style) -> String {
    let mut page = Page { out: String::new(), width: width.max(NARROWEST), style };
    verdict(&mut page, report);
    figures(&mut page, report);
    if !report.findings.is_empty() {
        findings(&mut page, report);
    }
    warnings(&mut page, report);
    inputs(&mut page, report);
    page.heading("Before you cut");
    care::LINES.iter().for_each(|line| page.paragraph("  ", line));
    page.out
}

/// The sheet being written.
struct Page {
    out: String,
    width: usize,
    style: Style,
}

impl Page {
    fn line(&mut self, text: &str) {
        self.out.push_str(text.trim_end());
        self.out.push('\n');
    }

    fn heading(&mut self, text: &str) {
        self.out.push('\n');
        let painted = self.paint(anstyle::Style::new().effects(Effects::BOLD), text);
        self.line(&painted);
    }

    /// Wrapped text; `lead` opens its first line and is as wide as the indent of the others.
    fn paragraph(&mut self, lead: &str, text: &str) {
        let indent = lead.chars().count();
        for (at, line) in wrap(&plain(text), self.width.saturating_sub(indent)).iter().enumerate() {
            let margin = if at == 0 { lead.to_owned() } else { " ".repeat(indent) };
            self.line(&format!("{margin}{line}"));
        }
    }

    fn paint(&self, style: anstyle::Style, text: &str) -> String {
        match self.style {
            Style::Plain => text.to_owned(),
            Style::Colour => format!("{style}{text}{style:#}"),
        }
    }
}

/// Purple for what is cut too deep, orange for what is left standing, nothing for remarks.
const fn ink(kind: Kind) -> anstyle::Style {
    let colour = match kind {
        Kind::Gouge | Kind::Rapid => Ansi256Color(134),
        Kind::Excess | Kind::Cusp => Ansi256Color(166),
        Kind::Fold => return anstyle::Style::new(),
    };
    anstyle::Style::new().fg_color(Some(anstyle::Color::Ansi256(colour)))
}

fn verdict(page: &mut Page, report: &Report) {
    let word = report.verdict.name().to_uppercase();
    let indent = word.chars().count() + 2;
    let bold = anstyle::Style::new().effects(Effects::BOLD);
    let bold =
        if report.verdict == Verdict::Pass { bold } else { bold.effects(Effects::BOLD | Effects::INVERT) };
    let mut lines = wrap(&headline(report), page.width.saturating_sub(indent)).into_iter();
    let painted = page.paint(bold, &word);
    page.line(&format!("{painted}: {}", lines.next().unwrap_or_default()));
    lines.for_each(|l| page.line(&format!("{}{l}", " ".repeat(indent))));
}

/// Greatest sizes against their limits.
fn figures(page: &mut Page, report: &Report) {
    let unit = report.unit;
    let (worst, limits) = (&report.worst, &report.limits);
    page.heading("Greatest of each kind");
    let all = [
        (Kind::Gouge, worst.gouge, limits.gouge),
        (Kind::Excess, worst.excess, limits.excess),
        (Kind::Cusp, worst.cusp, limits.cusp),
    ];
    for (kind, figure, limit) in all {
        let name = page.paint(ink(kind), &format!("{:<6}", kind.name()));
        let said = figure.map_or_else(|| nothing_of(kind, report).to_owned(), |f| against(f, limit, report));
        let indent = " ".repeat(10);
        for (at, line) in wrap(&said, page.width.saturating_sub(10)).iter().enumerate() {
            page.line(&if at == 0 { format!("  {name}  {line}") } else { format!("{indent}{line}") });
        }
    }
    if limits.assumed {
        let text = format!(
            "These limits were assumed: none was stated, so {} {} stands.",
            number::stated(limits.gouge),
            unit.sign()
        );
        page.paragraph("  ", &text);
    }
}

/// Why there is no figure of a kind.
const fn nothing_of(kind: Kind, report: &Report) -> &'static str {
    match (kind, report.worst.excess) {
        (Kind::Cusp, Some(_)) => "none: nowhere on the contour do two separate passes meet",
        _ => "not looked for",
    }
}

fn against(figure: Figure, limit: f64, report: &Report) -> String {
    let (unit, sign) = (report.unit, report.unit.sign());
    let standing = if figure.size - figure.bound > limit {
        "over the limit of"
    } else if figure.size + figure.bound > limit {
        "too close to tell from the limit of"
    } else {
        "within the limit of"
    };
    format!(
        "{} {sign}, {standing} {} {sign} (certain to {} {sign})",
        number::figure(figure, Some(limit), unit),
        number::stated(limit),
        number::bound(figure.bound, unit)
    )
}

fn findings(page: &mut Page, report: &Report) {
    let shown = report.findings.get(..IN_FULL.min(report.findings.len())).unwrap_or_default();
    page.heading(&counted(&report.findings));
    let mut rows = table::rows(shown, report.unit, page.width).into_iter();
    page.line(&rows.next().unwrap_or_default());
    for (row, finding) in rows.zip(shown) {
        let painted = page.paint(ink(finding.kind), &row);
        page.line(&painted);
    }
    for (finding, number) in shown.iter().zip(1..) {
        described(page, finding, number, report);
    }
    let more = report.findings.len().saturating_sub(shown.len());
    if more > 0 {
        page.out.push('\n');
        page.paragraph("", &format!("... and {more} more, all in the JSON report."));
    }
}

/// How many findings of each severity, in words.
fn counted(findings: &[Finding]) -> String {
    let count = |word: &str| findings.iter().filter(|f| verdict_word(f) == word).count();
    let said = |word: &str| match count(word) {
        0 => None,
        1 => Some(format!("1 {word}")),
        n if word == "undecided" => Some(format!("{n} {word}")),
        n => Some(format!("{n} {word}s")),
    };
    let all: Vec<String> = ["fault", "undecided", "note"].into_iter().filter_map(said).collect();
    all.join(", ")
}

fn described(page: &mut Page, finding: &Finding, number: usize, report: &Report) {
    let (unit, sign) = (report.unit, report.unit.sign());
    page.out.push('\n');
    let bound = number::bound(finding.figure.bound, unit);
    let lead = format!("{number:>3}  ");
    let kind = finding.kind.name();
    page.paragraph(
        &lead,
        &format!("{kind}, {}, certain to {bound} {sign}. {}", verdict_word(finding), finding.message),
    );
    let indent = " ".repeat(lead.chars().count());
    page.paragraph(&indent, &place(finding, report));
    for block in finding.blocks.iter().take(3) {
        let said = format!("{}, line {}: {}", plain(&block.file), block.line, plain(&block.text));
        page.line(&format!("{indent}{}", cut(&said, page.width.saturating_sub(indent.len()))));
    }
    if finding.blocks.len() > 3 {
        page.paragraph(&indent, &format!("and {} blocks more", finding.blocks.len() - 3));
    }
    page.paragraph(&indent, &format!("cause: {} ({})", cause_words(finding.cause), finding.cause.name()));
    let before = report.findings.iter().zip(1..number).find(|(f, _)| f.remedy == finding.remedy);
    let remedy = before.map_or_else(|| finding.remedy.clone(), |(_, n)| format!("as for finding {n}"));
    page.paragraph(&indent, &format!("to do: {remedy}"));
}

/// A cause in a machinist's words.
const fn cause_words(cause: Cause) -> &'static str {
    match cause {
        Cause::InsideCorner => "an inside corner of the contour is tighter than the cutter",
        Cause::FoldLeftInPath => "the path still holds the loop of a folded offset",
        Cause::WrongDiameter => "the cutter is not of the diameter the program was made for",
        Cause::ChordsTooLong => "curves were cut into chords that are too long",
        Cause::MissedPass => "a pass is missing or stands too far from the next one",
        Cause::NeverVisited => "the program never comes near this part of the contour",
        Cause::EntryOrExit => "the move that leads onto or off the contour",
        Cause::RapidThroughPart => "a rapid move runs through the part",
        Cause::TightTurn => "the path turns more tightly than the cutter's radius",
        Cause::Unknown => "none that the geometry could name",
    }
}

/// Where a finding is, in the drawing's coordinates, and how much is cut away or left.
fn place(finding: &Finding, report: &Report) -> String {
    let (unit, sign) = (report.unit, report.unit.sign());
    let xy =
        |p: crate::geometry::Point| format!("X{} Y{}", number::place(p.x, unit), number::place(p.y, unit));
    let mut text = format!("at {}", xy(finding.at));
    if let Some(center) = finding.center {
        text.push_str(&format!(", cutter center {}", xy(center)));
    }
    if let Some(s) = finding.contour {
        let (from, to) = (number::place(s.from, unit), number::place(s.to, unit));
        text.push_str(&format!(", loop {} of the contour from {from} to {to} {sign} along it", s.path));
    }
    if let Some(region) = &finding.region {
        text.push_str(&format!(", area {} square {sign}", number::area(region.area)));
    }
    text
}

fn warnings(page: &mut Page, report: &Report) {
    if report.warnings.is_empty() {
        return;
    }
    page.heading("While reading");
    for problem in &report.warnings {
        for (at, line) in problem.to_string().lines().enumerate() {
            let line = plain(line);
            if line.trim_start().starts_with('|') {
                let room = page.width.saturating_sub(2);
                page.line(&format!("  {}", cut(&line, room)));
            } else {
                page.paragraph(if at == 0 { "  " } else { "    " }, &line);
            }
        }
    }
}

/// What was judged and what was assumed.
fn inputs(page: &mut Page, report: &Report) {
    let (inputs, sign) = (&report.inputs, report.unit.sign());
    page.heading("Judged");
    let assumed = if inputs.keep_assumed { " (found from the program, not stated)" } else { "" };
    let layers = if inputs.layers.is_empty() {
        String::new()
    } else {
        format!(", layer {}", inputs.layers.join(", "))
    };
    let mut part = format!(
        "{}{layers}: closed loops {}, open chains {}; material {}{assumed}",
        inputs.part, inputs.loops, inputs.chains, inputs.keep
    );
    if inputs.allowance > 0.0 {
        part.push_str(&format!("; {} {sign} left on purpose", number::stated(inputs.allowance)));
    }
    // What reading exact lines and arcs costs is rounding, and not worth a word.
    if inputs.curve_bound >= WORTH_A_WORD {
        part.push_str(&format!(
            "; curves read as arcs to {} {sign}",
            number::bound(inputs.curve_bound, report.unit)
        ));
    }
    page.paragraph("  part     ", &part);
    if !inputs.placement.is_empty() {
        page.paragraph("  placed   ", &format!("drawing {}", inputs.placement.join(", then ")));
    }
    let program = format!("{}: {} moves, {} of them cut", inputs.program, inputs.moves, inputs.cutting_moves);
    page.paragraph("  program  ", &program);
    for tool in &inputs.tools {
        let name = if tool.number == 0 { String::new() } else { format!("T{}, ", tool.number) };
        page.paragraph("  cutter   ", &format!("{name}diameter {} {sign}", number::stated(tool.diameter)));
    }
    let top = number::stated(inputs.top);
    let level =
        inputs.level.map_or_else(|| "just below it".to_owned(), |z| format!("at Z{}", number::stated(z)));
    let cleared = if inputs.clear == "area" { "the whole open area" } else { "the contour only" };
    page.paragraph("  view     ", &format!("plan, part's top at Z{top}, seen {level}; to be cut: {cleared}"));
    let swept = &report.swept;
    let (area, edge) = (number::area(swept.area), number::place(swept.perimeter, report.unit));
    let loops = swept.loops;
    page.paragraph("  swept    ", &format!("area {area} square {sign}, edge {edge} {sign}, loops {loops}"));
}

#[cfg(test)]
mod tests;
