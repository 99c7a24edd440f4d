//! The first sentence of a report: the worst figure against its limit, in a machinist's words.

use crate::compare::Figure;
use crate::findings::{Finding, Kind, Report, Severity, Verdict};
use crate::program::Unit;

use super::number;

/// The worst thing found, against its limit; for a pass, every figure that was looked for.
#[must_use]
pub fn headline(report: &Report) -> String {
    let faults = || report.findings.iter().zip(1..).filter(|(f, _)| f.severity == Severity::Fault);
    let named = match report.verdict {
        Verdict::Fail => faults().find(|(f, _)| f.decided).or_else(|| faults().next()),
        Verdict::Undecided => report.findings.iter().zip(1..).find(|(f, _)| !f.decided),
        Verdict::Pass => None,
    };
    match named {
        Some((finding, number)) => format!("{} (finding {number})", sentence(finding, report.unit)),
        None if report.verdict == Verdict::Undecided && report.worst.excess.is_none() => {
            "nothing of the contour was judged, for the program comes near none of it".to_owned()
        }
        None => figures(report),
    }
}

/// One finding against its limit.
fn sentence(finding: &Finding, unit: Unit) -> String {
    let sign = unit.sign();
    let size = number::figure(finding.figure, finding.limit, unit);
    let what = match finding.kind {
        Kind::Gouge => format!("the cutter goes {size} {sign} too deep"),
        Kind::Rapid => format!("a rapid runs {size} {sign} into the part"),
        Kind::Excess => format!("{size} {sign} of material is left standing"),
        Kind::Cusp => format!("a cusp of {size} {sign} is left between passes"),
        Kind::Fold => format!("the path turns more tightly than the cutter ({size} {sign})"),
    };
    let Some(limit) = finding.limit else { return what };
    let limit = number::stated(limit);
    if finding.decided {
        format!("{what}, {limit} {sign} is allowed")
    } else {
        let bound = number::bound(finding.figure.bound, unit);
        format!("{what}, give or take {bound} {sign}, and {limit} {sign} is allowed: too close to tell")
    }
}

/// Every figure that was looked for, within or over its limit.
fn figures(report: &Report) -> String {
    let unit = report.unit;
    let one = |name: &str, figure: Option<Figure>, limit: f64| {
        figure.map(|f| {
            let size = number::figure(f, Some(limit), unit);
            format!("{name} {size} {} ({} allowed)", unit.sign(), number::stated(limit))
        })
    };
    let (worst, limits) = (&report.worst, &report.limits);
    let all: Vec<String> = [
        one("gouge", worst.gouge, limits.gouge),
        one("excess", worst.excess, limits.excess),
        one("cusp", worst.cusp, limits.cusp),
    ]
    .into_iter()
    .flatten()
    .collect();
    if all.is_empty() { "no figure was looked for".to_owned() } else { all.join(", ") }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::sample;

    #[test]
    fn a_fail_names_its_worst_fault_and_its_number() {
        assert_eq!(
            headline(&sample::failing()),
            "the cutter goes 0.3100 mm too deep, 0.02 mm is allowed (finding 1)"
        );
    }

    #[test]
    fn a_pass_names_every_figure_looked_for() {
        assert_eq!(
            headline(&sample::passing()),
            "gouge 0.0000 mm (0.02 allowed), excess 0.0300 mm (0.05 allowed)"
        );
    }

    #[test]
    fn an_undecided_figure_says_how_close_it_is() {
        let text = headline(&sample::undecided());
        assert!(text.contains("0.020 mm too deep, give or take 0.003 mm"), "{text}");
    }
}
