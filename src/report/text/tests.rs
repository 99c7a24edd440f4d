use super::*;
use crate::report::sample;

fn text(report: &Report) -> String {
    render(report, DEFAULT_WIDTH, Style::Plain)
}

#[test]
fn the_verdict_and_worst_figure_stand_in_the_first_line() {
    let first = text(&sample::failing()).lines().next().map(str::to_owned);
    assert_eq!(
        first.as_deref(),
        Some("FAIL: the cutter goes 0.3100 mm too deep, 0.02 mm is allowed (finding 1)")
    );
    assert!(text(&sample::passing()).starts_with("PASS: gouge 0.0000 mm (0.02 allowed)"));
    assert!(text(&sample::undecided()).starts_with("UNDECIDED: "));
}

#[test]
fn no_line_is_wider_than_asked() {
    for report in [sample::failing(), sample::passing(), sample::undecided(), sample::crowded(57)] {
        for width in [40, 60, 80, 100, 160] {
            for line in render(&report, width, Style::Plain).lines() {
                assert!(line.chars().count() <= width, "{width}: {line}");
            }
        }
    }
}

#[test]
fn every_finding_says_place_block_cause_and_remedy() {
    let text = text(&sample::failing()).split_whitespace().collect::<Vec<_>>().join(" ");
    for piece in [
        "1 gouge 0.3100 0.02 X42.000 Y0.000 41 fault",
        "bracket.nc, line 41: N190 G1 X42. Y-4.69",
        "cause: the path still holds the loop of a folded offset (fold-left-in-path)",
        "to do: Take the loop between blocks N180 and N200",
        "4 faults, 1 note",
        "area 1.65 square mm",
    ] {
        assert!(text.contains(piece), "{piece}\n{text}");
    }
}

#[test]
fn a_remedy_said_before_is_named_and_not_repeated() {
    let mut report = sample::failing();
    let first = report.findings[0].remedy.clone();
    report.findings[1].remedy.clone_from(&first);
    let text = text(&report);
    assert_eq!(text.matches("to do: Take the loop between").count(), 1);
    assert_eq!(text.matches("to do: as for finding 1\n").count(), 1);
}

#[test]
fn what_is_undecided_is_not_counted_as_a_fault() {
    assert!(text(&sample::undecided()).contains("\n1 undecided\n"));
}

#[test]
fn assumed_limits_are_said_and_stated_ones_are_not() {
    assert!(text(&sample::passing()).contains("These limits were assumed"));
    assert!(!text(&sample::failing()).contains("assumed: none"));
}

#[test]
fn after_twenty_findings_the_rest_is_counted() {
    let text = text(&sample::crowded(57));
    assert!(text.contains("... and 37 more, all in the JSON report."));
    assert_eq!(text.matches("\n     to do: ").count(), 20);
}

#[test]
fn colour_only_when_asked_and_only_as_decoration() {
    let report = sample::failing();
    let plain = text(&report);
    assert!(!plain.contains('\u{1b}'));
    let coloured = render(&report, DEFAULT_WIDTH, Style::Colour);
    assert!(coloured.contains("\u{1b}[38;5;134m") && coloured.contains("\u{1b}[38;5;166m"));
    let mut stripped = String::new();
    let mut escape = false;
    for c in coloured.chars() {
        match c {
            '\u{1b}' => escape = true,
            'm' if escape => escape = false,
            _ if !escape => stripped.push(c),
            _ => {}
        }
    }
    assert_eq!(stripped, plain);
}

#[test]
fn control_characters_of_a_program_never_reach_the_terminal() {
    let mut report = sample::failing();
    if let Some(block) = report.findings.first_mut().and_then(|f| f.blocks.first_mut()) {
        block.text = "G1 X1 \u{1b}[2J\u{7} (wipe)".into();
    }
    assert!(!text(&report).contains(['\u{1b}', '\u{7}']));
}

#[test]
fn the_care_lines_close_the_report() {
    assert!(text(&sample::passing()).trim_end().ends_with("by people qualified to do so."));
}

#[test]
fn inputs_placement_and_warnings_are_told() {
    let text = text(&sample::failing());
    for piece in
        ["turned by 90 degrees", "a spline was read as arcs", "bracket.dxf, line 88", "T1, diameter 10 mm"]
    {
        assert!(text.contains(piece), "{piece}\n{text}");
    }
    assert!(text.contains("found from the program"));
}
