//! What is to be judged, complete and sane: every answer present, every length in range, nothing left
//! to ask. Made from a [`Draft`]; what is missing is said with the flag and the key that give it.

use super::args::{ClearName, KeepName, MirrorName, ProgramFormatName, UnitName};
use super::draft::{Cutters, Draft, Lay, Named, Rule};
use crate::cutter::Cutter;
use crate::input::{Place, Problem, Refusal};
use crate::program::Unit;

/// One check.
#[derive(Clone, Debug)]
pub struct Check {
    /// How it is named where several are judged: the job file, or nothing.
    pub name: String,
    /// The drawing.
    pub part: PartRequest,
    /// The program.
    pub program: ProgramRequest,
    /// Limits as far as they were said.
    pub limits: LimitsRequest,
    /// Must the whole open area be cleared?
    pub clear: ClearName,
    /// Leave out loops the program never comes near?
    pub only_visited: bool,
    /// What to write.
    pub outputs: Outputs,
}

/// The drawing, and where it lies.
#[derive(Clone, Debug)]
pub struct PartRequest {
    pub file: Named,
    pub layers: Vec<String>,
    pub keep: KeepName,
    pub allowance: f64,
    pub mirror: Option<MirrorName>,
    pub lay: Lay,
    pub copies: Vec<Lay>,
    pub join_gap: Option<f64>,
    pub curve_error: Option<f64>,
}

/// The program, its cutters and the height at which we look.
#[derive(Clone, Debug)]
pub struct ProgramRequest {
    pub file: Named,
    pub format: ProgramFormatName,
    /// Unit of every length in the request and of files that declare none; `None`: the program's.
    pub units: Option<Unit>,
    pub cutters: Cutters,
    pub top: f64,
    pub level: Option<f64>,
    pub arc_tolerance: Option<f64>,
}

/// Limits as far as they were said.
#[derive(Clone, Copy, Debug, Default)]
pub struct LimitsRequest {
    pub gouge: Option<f64>,
    pub excess: Option<f64>,
    pub cusp: Option<f64>,
}

/// Files to write.
#[derive(Clone, Debug, Default)]
pub struct Outputs {
    pub json: Option<Named>,
    pub svg: Option<Named>,
    pub dxf: Option<Named>,
    pub csv: Option<Named>,
}

impl Outputs {
    /// Every output that was asked for.
    pub fn all(&self) -> impl Iterator<Item = &Named> {
        [&self.json, &self.svg, &self.dxf, &self.csv].into_iter().flatten()
    }

    /// Does one of them take standard output?
    pub fn take_standard_output(&self) -> bool {
        self.all().any(Named::is_standard)
    }

    /// Refuses two outputs to one place, and an output over one of the `inputs`.
    fn verify(&self, inputs: &[&Named], place: &Place) -> Vec<Problem> {
        let all: Vec<&Named> = self.all().collect();
        let mut problems = Vec::new();
        for (i, output) in all.iter().enumerate() {
            if all.iter().take(i).any(|other| other.path == output.path) {
                problems.push(Problem::error(
                    place.clone(),
                    format!("two outputs go to {}", shown(output)),
                    "a file of its own for each",
                    "give one of them another name",
                ));
            }
            if !output.is_standard() && inputs.iter().any(|input| same_file(input, output)) {
                problems.push(Problem::error(
                    place.clone(),
                    format!("the output {} is an input of the check", output.name),
                    "a file that is not read",
                    "give the output another name; the input would be lost",
                ));
            }
        }
        problems
    }
}

fn shown(named: &Named) -> &str {
    if named.is_standard() { "standard output" } else { &named.name }
}

fn same_file(a: &Named, b: &Named) -> bool {
    a.path == b.path || matches!((a.path.canonicalize(), b.path.canonicalize()), (Ok(a), Ok(b)) if a == b)
}

/// Asks every rule that a number of the draft has to keep. Those of a job file were asked where they
/// stand; asking again costs nothing.
fn numbers(draft: &Draft, place: &Place) -> Vec<Problem> {
    let diameters: Vec<f64> = match &draft.cutters {
        Some(Cutters::Every(d)) => vec![*d],
        Some(Cutters::Table(t)) => t.values().copied().collect(),
        None => Vec::new(),
    };
    let [dx, dy] = draft.shift.unwrap_or_default();
    let asked = [
        ("the allowance", draft.allowance, Rule::NotNegative),
        ("the gouge tolerance", draft.gouge, Rule::NotNegative),
        ("the excess tolerance", draft.excess, Rule::NotNegative),
        ("the cusp tolerance", draft.cusp, Rule::NotNegative),
        ("the arc tolerance", draft.arc_tolerance, Rule::NotNegative),
        ("the join gap", draft.join_gap, Rule::NotNegative),
        ("the curve error", draft.curve_error, Rule::Positive),
        ("the top", draft.top, Rule::Any),
        ("the level", draft.level, Rule::Any),
        ("the turn", draft.turn, Rule::Any),
        ("the shift", Some(dx + dy), Rule::Any),
    ];
    let limits = [draft.gouge, draft.excess, draft.cusp];
    if limits.iter().all(|l| l.is_some() && *l == draft.gouge)
        && let Some(one) = draft.gouge
        && let Some(problem) = Rule::NotNegative.broken("the tolerance", one, place)
    {
        // One word set all three: one problem.
        return vec![problem];
    }
    let asked = asked.into_iter().filter_map(|(n, v, r)| r.broken(n, v?, place));
    asked.chain(diameters.iter().filter_map(|d| Rule::Positive.broken("the diameter", *d, place))).collect()
}

fn missing(place: &Place, what: &str, flag: &str, key: &str) -> Problem {
    let help = format!("say {flag}, or put {key} into a job file and run: sweptedge check JOB.toml");
    Problem::error(place.clone(), format!("{what} is missing"), "", help)
}

/// The part of a request that `check` and `envelope` share.
///
/// # Errors
/// When program or cutter are missing, or a number makes no sense.
pub fn program(draft: &Draft, place: &Place) -> Result<ProgramRequest, Refusal> {
    let mut problems = numbers(draft, place);
    if let (Some(level), top) = (draft.level, draft.top.unwrap_or(0.0))
        && level > top
    {
        problems.push(Problem::error(
            place.clone(),
            format!("the level {level} lies above the part's top {top}"),
            "a height at which there is part",
            "give a level below the top, or say where the top is with --top",
        ));
    }
    if draft.program.is_none() {
        problems.push(missing(place, "the program", "--program FILE", "[program] file = \"...\""));
    }
    let none = matches!(&draft.cutters, Some(Cutters::Table(t)) if t.is_empty());
    if none || draft.cutters.is_none() {
        problems.push(missing(place, "the cutter's diameter", "--diameter D", "[cutter.1] diameter = ..."));
    }
    match (&draft.program, &draft.cutters) {
        (Some(file), Some(cutters)) if problems.is_empty() => Ok(ProgramRequest {
            file: file.clone(),
            format: draft.format.unwrap_or_default(),
            units: draft.units.map(|u| match u {
                UnitName::Mm => Unit::Millimetre,
                UnitName::In => Unit::Inch,
            }),
            cutters: cutters.clone(),
            top: draft.top.unwrap_or(0.0),
            level: draft.level,
            arc_tolerance: draft.arc_tolerance,
        }),
        _ => Err(problems),
    }
}

/// The whole of a check from what was said at `place`.
///
/// # Errors
/// Everything that is missing or makes no sense, at once.
pub fn check(draft: Draft, name: String, place: &Place) -> Result<Check, Refusal> {
    let program = program(&draft, place);
    let outputs = Outputs { json: draft.json, svg: draft.svg, dxf: draft.dxf, csv: None };
    let mut problems = program.as_ref().err().cloned().unwrap_or_default();
    let inputs: Vec<&Named> = [&draft.part, &draft.program].into_iter().flatten().collect();
    problems.extend(outputs.verify(&inputs, place));
    if inputs.len() == 2 && inputs.iter().all(|i| i.is_standard()) {
        problems.push(Problem::error(
            place.clone(),
            "drawing and program both come from standard input",
            "one of them from a file",
            "give the file name of the drawing with --part",
        ));
    }
    if draft.part.is_none() {
        problems.push(missing(place, "the drawing", "--part FILE", "[part] file = \"...\""));
    }
    match (draft.part, program) {
        (Some(file), Ok(program)) if problems.is_empty() => Ok(Check {
            name,
            part: PartRequest {
                file,
                layers: draft.layers.unwrap_or_default(),
                keep: draft.keep.unwrap_or_default(),
                allowance: draft.allowance.unwrap_or(0.0),
                mirror: draft.mirror,
                lay: Lay { turn: draft.turn.unwrap_or(0.0), shift: draft.shift.unwrap_or_default() },
                copies: draft.copies.unwrap_or_default(),
                join_gap: draft.join_gap,
                curve_error: draft.curve_error,
            },
            program,
            limits: LimitsRequest { gouge: draft.gouge, excess: draft.excess, cusp: draft.cusp },
            clear: draft.clear.unwrap_or_default(),
            only_visited: draft.only_visited.unwrap_or(false),
            outputs,
        }),
        _ => Err(problems),
    }
}

/// Outputs of `envelope`, known not to overwrite its program.
///
/// # Errors
/// When two outputs go to one place, or one goes over the program.
pub fn outputs(outputs: Outputs, program: &Named, place: &Place) -> Result<Outputs, Refusal> {
    let problems = outputs.verify(&[program], place);
    if problems.is_empty() { Ok(outputs) } else { Err(problems) }
}

impl Cutters {
    /// The cutter of a tool. Where the program names no tool, the only one in the table is meant.
    pub fn of(&self, tool: u32) -> Option<Cutter> {
        let diameter = match self {
            Self::Every(d) => Some(*d),
            Self::Table(t) => match (t.get(&tool), t.len()) {
                (None, 1) if tool == 0 => t.values().next().copied(),
                (found, _) => found.copied(),
            },
        };
        diameter.and_then(|d| Cutter::flat(d).ok())
    }
}

#[cfg(test)]
mod tests {
    use std::path::Path;

    use super::super::draft::command_line;
    use super::*;

    fn named(name: &str) -> Option<Named> {
        Some(Named::within(Path::new(""), Path::new(name)))
    }

    fn whole() -> Draft {
        Draft {
            part: named("a.dxf"),
            program: named("a.nc"),
            cutters: Some(Cutters::Every(10.0)),
            ..Draft::default()
        }
    }

    fn refused(draft: Draft) -> Vec<String> {
        let problems = check(draft, String::new(), &command_line()).unwrap_err();
        assert!(problems.iter().all(|p| !p.help.is_empty()));
        problems.into_iter().map(|p| p.found).collect()
    }

    #[test]
    fn what_is_missing_is_all_named_at_once() {
        assert_eq!(
            refused(Draft::default()),
            ["the program is missing", "the cutter's diameter is missing", "the drawing is missing"]
        );
    }

    #[test]
    fn a_diameter_that_is_no_positive_length_is_refused() {
        for diameter in [0.0, -5.0, f64::NAN, f64::INFINITY] {
            let cutters = Some(Cutters::Every(diameter));
            assert_eq!(refused(Draft { cutters, ..whole() }), [format!("the diameter is {diameter}")]);
        }
        let cutters = Some(Cutters::Table([(1, 10.0), (2, -1.0)].into()));
        assert_eq!(refused(Draft { cutters, ..whole() }), ["the diameter is -1"]);
    }

    #[test]
    fn tolerances_below_zero_and_a_level_above_the_top_are_refused() {
        assert_eq!(refused(Draft { gouge: Some(-0.01), ..whole() }), ["the gouge tolerance is -0.01"]);
        assert_eq!(
            refused(Draft { level: Some(5.0), ..whole() }),
            ["the level 5 lies above the part's top 0"]
        );
    }

    #[test]
    fn outputs_must_not_meet_each_other_nor_an_input() {
        assert_eq!(refused(Draft { json: named("x"), svg: named("x"), ..whole() }), ["two outputs go to x"]);
        assert_eq!(
            refused(Draft { json: named("-"), svg: named("-"), ..whole() }),
            ["two outputs go to standard output"]
        );
        assert_eq!(
            refused(Draft { svg: named("a.nc"), ..whole() }),
            ["the output a.nc is an input of the check"]
        );
    }

    #[test]
    fn the_command_line_goes_before_the_job_file() {
        let said = Draft { cutters: Some(Cutters::Every(9.98)), ..Draft::default() };
        let request = check(said.or(whole()), String::new(), &command_line()).unwrap();
        assert_eq!(request.program.cutters.of(7).map(|c| c.diameter()), Some(9.98));
    }

    #[test]
    fn where_the_program_names_no_tool_the_only_cutter_is_meant() {
        let one = Cutters::Table([(3, 8.0)].into());
        assert_eq!(one.of(0).map(|c| c.diameter()), Some(8.0));
        assert!(one.of(1).is_none());
        let two = Cutters::Table([(3, 8.0), (4, 6.0)].into());
        assert!(two.of(0).is_none());
    }
}
