//! The table of findings: as many columns as the width bears, the least needed given up first.

use crate::findings::{Finding, Severity};
use crate::program::Unit;
use crate::report::{number, plain};

/// One column: its heading, its cells, and which side they keep to.
struct Column {
    heading: String,
    cells: Vec<String>,
    right: bool,
}

impl Column {
    fn width(&self) -> usize {
        self.cells.iter().chain([&self.heading]).map(|c| c.chars().count()).max().unwrap_or(0)
    }
}

/// Blank characters between columns.
const GAP: usize = 2;

/// Columns from the most to the least needed, and the order in which they stand.
fn columns(findings: &[Finding], unit: Unit) -> Vec<Column> {
    let sign = unit.sign();
    let column = |heading: String, right: bool, cell: &dyn Fn(&Finding) -> String| Column {
        heading,
        right,
        cells: findings.iter().map(cell).collect(),
    };
    let mut numbered = column("no".into(), true, &|_| String::new());
    numbered.cells = (1..=findings.len()).map(|n| n.to_string()).collect();
    vec![
        numbered,
        column("kind".into(), false, &|f| f.kind.name().into()),
        column(format!("size {sign}"), true, &|f| number::figure(f.figure, f.limit, unit)),
        column(format!("limit {sign}"), true, &|f| f.limit.map_or_else(|| "-".into(), number::stated)),
        column("at".into(), false, &|f| {
            format!("X{} Y{}", number::place(f.at.x, unit), number::place(f.at.y, unit))
        }),
        column("line".into(), true, &|f| f.blocks.first().map_or_else(|| "-".into(), |b| b.line.to_string())),
        column("".into(), false, &|f| verdict_word(f).into()),
        column("cause".into(), false, &|f| f.cause.name().into()),
        column("+/-".into(), false, &|f| number::bound(f.figure.bound, unit)),
    ]
}

/// What a finding means for the verdict.
pub const fn verdict_word(finding: &Finding) -> &'static str {
    match (finding.severity, finding.decided) {
        (Severity::Note, _) => "note",
        (Severity::Fault, true) => "fault",
        (Severity::Fault, false) => "undecided",
    }
}

/// Heading and rows, each at most `width` characters long where the first columns alone allow it.
pub fn rows(findings: &[Finding], unit: Unit, width: usize) -> Vec<String> {
    let mut columns = columns(findings, unit);
    let total = |c: &[Column]| c.iter().map(|c| c.width() + GAP).sum::<usize>();
    while columns.len() > 3 && total(&columns) > width {
        columns.pop();
    }
    let heading = columns.iter().map(|c| (c, Some(&c.heading)));
    let mut out = vec![row(heading)];
    for at in 0..findings.len() {
        out.push(row(columns.iter().map(|c| (c, c.cells.get(at)))));
    }
    out
}

fn row<'a>(cells: impl Iterator<Item = (&'a Column, Option<&'a String>)>) -> String {
    let mut line = String::new();
    for (column, cell) in cells {
        let (cell, width) = (cell.map(String::as_str).unwrap_or_default(), column.width());
        line.push_str(&" ".repeat(GAP));
        line.push_str(&if column.right { format!("{cell:>width$}") } else { format!("{cell:<width$}") });
    }
    plain(&line)
}
