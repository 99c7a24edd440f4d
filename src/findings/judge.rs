//! From the comparison's figures to findings, worst figures and the verdict.
//!
//! A figure is an interval, size - bound to size + bound. It is over its limit for certain when the
//! whole interval lies above, within it for certain when the whole interval lies at or below; a figure
//! whose interval contains the limit is undecided, and undecided does not pass.

use std::cmp::Ordering;

use super::diagnose::Scene;
use super::draft::{Draft, merged};
use super::warnings::warnings;
use super::wording::Words;
use super::{Cause, Finding, Kind, Limits, Severity, Verdict, Worst};
use crate::compare::{Comparison, Figure};
use crate::input::Problem;
use crate::part::Part;
use crate::program::{Program, Unit};
use crate::view::DiscFamily;

/// All that is known when it comes to judging. Lengths in `unit`.
#[derive(Clone, Copy, Debug)]
pub struct Facts<'a> {
    /// The part where the program cuts, material on the left of its contour.
    pub part: &'a Part,
    /// The program.
    pub program: &'a Program,
    /// What cuts.
    pub cutting: &'a DiscFamily,
    /// What travels below the part's top.
    pub rapids: &'a DiscFamily,
    /// What the comparison found.
    pub comparison: &'a Comparison,
    /// Limits for acceptance.
    pub limits: Limits,
    /// Unit of every length.
    pub unit: Unit,
    /// Height of the part's top face.
    pub top: f64,
}

/// The answer with its reasons.
#[derive(Clone, Debug, PartialEq)]
pub struct Judgement {
    /// Faults before notes, the worst first.
    pub findings: Vec<Finding>,
    /// Greatest size of each kind.
    pub worst: Worst,
    /// Pass, fail or undecided.
    pub verdict: Verdict,
    /// What the user should know about the whole: a drawing that lies elsewhere, units that differ.
    pub warnings: Vec<Problem>,
}

/// How a figure stands to its limit.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Standing {
    Within,
    Over,
    Straddles,
}

/// Figures that are no numbers straddle every limit: they must not pass.
fn standing(figure: &Figure, limit: f64) -> Standing {
    if figure.size - figure.bound > limit {
        Standing::Over
    } else if figure.size + figure.bound <= limit {
        Standing::Within
    } else {
        Standing::Straddles
    }
}

/// Findings, worst figures and verdict. Neighbouring exceedances of one cause are one finding at their
/// worst place; figures that are certainly within their limit are none.
#[must_use]
pub fn judge(facts: &Facts<'_>) -> Judgement {
    let scene = Scene::new(facts);
    let mut drafts = scene.drafts();
    drafts.retain(|d| d.limit.is_none_or(|limit| standing(&d.figure, limit) != Standing::Within));
    let words = Words::new(&scene);
    let mut findings: Vec<Finding> =
        merged(drafts, &scene.walls).into_iter().map(|d| finding(d, &words)).collect();
    findings.sort_by(worst_first);
    let comparison = facts.comparison;
    let worst =
        Worst { gouge: comparison.worst_gouge, excess: comparison.worst_excess, cusp: comparison.worst_cusp };
    let verdict = match verdict(&findings, &worst, &facts.limits) {
        // Nothing was judged: that must not pass.
        Verdict::Pass if scene.nothing_judged() => Verdict::Undecided,
        verdict => verdict,
    };
    Judgement { findings, worst, verdict, warnings: warnings(&scene) }
}

fn finding(draft: Draft, words: &Words<'_>) -> Finding {
    let severity = if draft.kind == Kind::Fold { Severity::Note } else { Severity::Fault };
    let decided = draft.limit.is_none_or(|limit| standing(&draft.figure, limit) != Standing::Straddles);
    Finding {
        kind: draft.kind,
        severity,
        decided,
        message: words.message(&draft, decided),
        remedy: words.remedy(&draft),
        blocks: words.blocks(&draft),
        cause: draft.diagnosis.cause(),
        figure: draft.figure,
        limit: draft.limit,
        at: draft.at,
        center: draft.center,
        region: draft.region,
        contour: draft.contour,
    }
}

/// Faults before notes; loops that nothing visits after the other faults, since most are left to
/// another tool; then by how far over the limit.
fn worst_first(a: &Finding, b: &Finding) -> Ordering {
    let over = |f: &Finding| f.figure.size - f.limit.unwrap_or(0.0);
    let unvisited = |f: &Finding| f.cause == Cause::NeverVisited;
    a.severity
        .cmp(&b.severity)
        .then(unvisited(a).cmp(&unvisited(b)))
        .then(over(b).total_cmp(&over(a)))
        .then(a.kind.cmp(&b.kind))
        .then(a.at.x.total_cmp(&b.at.x))
        .then(a.at.y.total_cmp(&b.at.y))
}

/// Fail if any figure is certainly over its limit; else undecided if any interval contains it; else
/// pass. Notes decide nothing. The worst figures decide too, should no finding stand for them.
fn verdict(findings: &[Finding], worst: &Worst, limits: &Limits) -> Verdict {
    let faults = findings.iter().filter(|f| f.severity == Severity::Fault);
    let of_findings = faults.filter_map(|f| Some((f.figure, f.limit?)));
    let of_worst = [(worst.gouge, limits.gouge), (worst.excess, limits.excess), (worst.cusp, limits.cusp)];
    let of_worst = of_worst.into_iter().filter_map(|(figure, limit)| Some((figure?, limit)));
    let mut verdict = Verdict::Pass;
    for (figure, limit) in of_findings.chain(of_worst) {
        match standing(&figure, limit) {
            Standing::Over => return Verdict::Fail,
            Standing::Straddles => verdict = Verdict::Undecided,
            Standing::Within => {}
        }
    }
    verdict
}
