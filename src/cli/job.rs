//! The job file: everything one check needs, in TOML, so that a shop can keep it beside the program.
//!
//! The document is read with the place of every key and value, so that each mistake is named with its
//! line: an unknown key with the nearest known one, a value of the wrong type, a number out of range.
//! All mistakes are named at once.

use std::path::Path;

use clap::ValueEnum;

use super::draft::{Cutters, Draft, Lay, Named, Rule};
use super::table::Table;
use crate::input::{Place, Problem, Refusal};

/// JSON Schema of a job file in its JSON form.
pub const SCHEMA: &str = include_str!("job.schema.json");

/// Keys of the document.
pub const TOP: &[&str] = &["units", "part", "tolerance", "cutter", "program", "check", "output"];
/// Keys of `[part]`.
pub const PART: &[&str] =
    &["file", "layer", "keep", "allowance", "mirror", "turn", "shift", "copies", "join_gap", "curve_error"];
/// Keys of an entry of `part.copies`.
pub const COPY: &[&str] = &["shift", "turn"];
/// Keys of `[tolerance]`.
pub const TOLERANCE: &[&str] = &["gouge", "excess", "cusp"];
/// Keys of `[cutter.N]`.
pub const CUTTER: &[&str] = &["diameter", "corner_radius"];
/// Keys of `[program]`.
pub const PROGRAM: &[&str] = &["file", "format", "arc_tolerance"];
/// Keys of `[check]`.
pub const CHECK: &[&str] = &["top", "level", "clear", "only_visited"];
/// Keys of `[output]`.
pub const OUTPUT: &[&str] = &["json", "svg", "dxf"];

/// The job in `bytes`, the content of `file`; its paths are relative to `folder`.
///
/// # Errors
/// Every mistake found, placed.
pub fn read(bytes: &[u8], file: &str, folder: &Path) -> Result<Draft, Refusal> {
    let Ok(text) = std::str::from_utf8(bytes) else {
        return Err(vec![Problem::error(
            Place::file(file),
            "this is no text file",
            "a job file: TOML in UTF-8",
            "give the job file here; a program goes with --program, a drawing with --part",
        )]);
    };
    let text = text.trim_start_matches('\u{feff}');
    let document = toml::de::DeTable::parse(text).map_err(|e| {
        let span = e.span().unwrap_or(0..0);
        vec![Problem::error(
            super::table::place(file, text, span),
            format!("this is no TOML: {}", e.message()),
            "lines of the form key = value under [section] headings",
            if Path::new(file).extension().is_some_and(|e| e.eq_ignore_ascii_case("toml")) {
                "correct this line; names and words stand in double quotes, numbers without"
            } else {
                "give a job file here; a program goes with --program, a drawing with --part"
            },
        )]
    })?;
    let top = Table::new(document.get_ref(), "", file, text);
    top.known(TOP);
    let mut draft = Draft { units: top.choice("units"), ..Draft::default() };
    read_part(&top, folder, &mut draft);
    read_rest(&top, folder, &mut draft);
    draft.cutters = read_cutters(&top);
    let problems = top.into_problems();
    if problems.is_empty() { Ok(draft) } else { Err(problems) }
}

fn named(table: &Table, key: &str, folder: &Path) -> Option<Named> {
    table.string(key).map(|s| Named::within(folder, Path::new(&s)))
}

fn read_part(top: &Table, folder: &Path, draft: &mut Draft) {
    let Some(part) = top.table("part") else { return };
    part.known(PART);
    draft.part = named(&part, "file", folder);
    draft.layers = part.strings("layer");
    draft.keep = part.choice("keep");
    draft.allowance = part.number("allowance", Rule::NotNegative);
    draft.mirror = part.choice("mirror");
    draft.turn = part.number("turn", Rule::Any);
    draft.shift = part.pair("shift");
    draft.join_gap = part.number("join_gap", Rule::NotNegative);
    draft.curve_error = part.number("curve_error", Rule::Positive);
    draft.copies = part.tables("copies").map(|copies| {
        let lay = |copy: Table| {
            copy.known(COPY);
            Lay {
                turn: copy.number("turn", Rule::Any).unwrap_or(0.0),
                shift: copy.pair("shift").unwrap_or([0.0, 0.0]),
            }
        };
        copies.into_iter().map(lay).collect()
    });
}

fn read_rest(top: &Table, folder: &Path, draft: &mut Draft) {
    if let Some(limits) = top.table("tolerance") {
        limits.known(TOLERANCE);
        draft.gouge = limits.number("gouge", Rule::NotNegative);
        draft.excess = limits.number("excess", Rule::NotNegative);
        draft.cusp = limits.number("cusp", Rule::NotNegative);
    }
    if let Some(program) = top.table("program") {
        program.known(PROGRAM);
        draft.program = named(&program, "file", folder);
        draft.format = program.choice("format");
        draft.arc_tolerance = program.number("arc_tolerance", Rule::NotNegative);
    }
    if let Some(check) = top.table("check") {
        check.known(CHECK);
        draft.top = check.number("top", Rule::Any);
        draft.level = check.number("level", Rule::Any);
        draft.clear = check.choice("clear");
        draft.only_visited = check.flag("only_visited");
    }
    if let Some(output) = top.table("output") {
        output.known(OUTPUT);
        draft.json = named(&output, "json", folder);
        draft.svg = named(&output, "svg", folder);
        draft.dxf = named(&output, "dxf", folder);
    }
}

/// `[cutter.1]`, `[cutter.2]`: one table for each tool number.
fn read_cutters(top: &Table) -> Option<Cutters> {
    let cutters = top.table("cutter")?;
    let mut table = std::collections::BTreeMap::new();
    for key in cutters.keys() {
        let Ok(number) = key.parse::<u32>() else {
            cutters.problem(
                &key,
                format!("`{key}` is no tool number"),
                "a heading such as [cutter.1], with the number of the T word",
                "name each cutter by its tool number: [cutter.1] for T1; then diameter = ... under it",
            );
            continue;
        };
        let Some(cutter) = cutters.table(&key) else { continue };
        cutter.known(CUTTER);
        if cutter.number("corner_radius", Rule::NotNegative).is_some_and(|r| r > 0.0) {
            cutter.problem(
                "corner_radius",
                "a cutter with a corner radius is not judged yet".into(),
                "corner_radius = 0.0, a flat cutter",
                "on an upright wall above the corner radius it cuts as a flat cutter of this diameter does: \
                 set corner_radius = 0.0 and look there with level",
            );
        }
        match cutter.number("diameter", Rule::Positive) {
            Some(diameter) => {
                table.insert(number, diameter);
            }
            None if !cutter.has("diameter") => cutters.problem(
                &key,
                format!("the cutter of tool {number} has no diameter"),
                "diameter = 10.0",
                "measure the cutter and add its diameter",
            ),
            None => {}
        }
    }
    Some(Cutters::Table(table))
}

/// The names that a value of `T` may have.
pub fn names<T: ValueEnum>() -> Vec<String> {
    T::value_variants()
        .iter()
        .filter_map(|v| v.to_possible_value().map(|p| p.get_name().to_owned()))
        .collect()
}

#[cfg(test)]
mod tests {
    use super::super::args::{KeepName, UnitName};
    use super::*;

    const WHOLE: &str = r#"
units = "mm"

[part]
file = "follower.dxf"
layer = "FINISHED"
keep = "inside"
allowance = 0.0
shift = [0.0, 0.0]
turn = 0
copies = [{ shift = [50.0, 0.0], turn = 90.0 }]

[tolerance]
gouge = 0.02
excess = 0.05
cusp = 0.01

[cutter.1]
diameter = 10.0
corner_radius = 0.0

[program]
file = "follower.nc"

[check]
top = 0.0
clear = "area"
only_visited = true

[output]
json = "out/report.json"
"#;

    fn problems(text: &str) -> Vec<Problem> {
        read(text.as_bytes(), "job.toml", Path::new("jobs")).unwrap_err()
    }

    #[test]
    fn a_whole_job_is_read_with_its_paths_beside_it() {
        let job = read(WHOLE.as_bytes(), "job.toml", Path::new("jobs")).unwrap();
        assert_eq!(job.units, Some(UnitName::Mm));
        assert_eq!(job.keep, Some(KeepName::Inside));
        assert_eq!(job.layers, Some(vec!["FINISHED".to_owned()]));
        let part = job.part.unwrap();
        assert_eq!((part.name.as_str(), part.path), ("follower.dxf", Path::new("jobs").join("follower.dxf")));
        assert_eq!((job.gouge, job.excess, job.cusp), (Some(0.02), Some(0.05), Some(0.01)));
        assert_eq!(job.cutters, Some(Cutters::Table([(1, 10.0)].into())));
        assert_eq!(job.copies, Some(vec![Lay { turn: 90.0, shift: [50.0, 0.0] }]));
        assert_eq!(job.only_visited, Some(true));
    }

    #[test]
    fn an_unknown_key_is_placed_and_the_nearest_known_one_named() {
        let all = problems("units = \"mm\"\n[part]\n  layr = \"A\"\n");
        assert_eq!(all.len(), 1);
        assert_eq!((all[0].place.line, all[0].place.column, all[0].place.length), (Some(3), Some(3), 4));
        assert_eq!(all[0].found, "unknown key `layr` in [part]");
        assert_eq!(all[0].help, "write layer, or take the line out");
        assert!(problems("[colour]\n")[0].help.contains("use one of: units, part"));
    }

    #[test]
    fn every_mistake_is_named_at_once_with_its_line() {
        let text = "units = \"cm\"\n[part]\nfile = 3\nshift = [1.0]\nturn = \"90\"\nallowance = -1\nkeep = \"insid\"\n\
                    [cutter.T1]\ndiameter = 10\n[cutter.2]\n[cutter.3]\ndiameter = nan\ncorner_radius = 1\n\
                    [check]\nonly_visited = 1\n[program]\nfile = \"\"\n[tolerance]\ncusp = inf\n";
        let lines: Vec<usize> = problems(text).iter().filter_map(|p| p.place.line).collect();
        assert_eq!(lines, [1, 3, 4, 5, 6, 7, 8, 10, 12, 13, 15, 17, 19]);
        assert!(problems(text).iter().all(|p| !p.help.is_empty()));
        let keep = problems(text).into_iter().find(|p| p.place.line == Some(7)).unwrap();
        assert_eq!(keep.help, "write keep = \"inside\"");
    }

    #[test]
    fn what_is_no_toml_is_placed_too() {
        let all = problems("[part]\nfile = follower.dxf\n");
        assert_eq!(all[0].place.line, Some(2));
        assert!(read(&[0xff, 0xfe, 0], "job.toml", Path::new("")).is_err());
        assert!(read(b"", "job.toml", Path::new("")).is_ok());
    }

    #[test]
    fn any_cut_or_changed_job_is_read_or_refused_without_panic() {
        let mut rng = fastrand::Rng::with_seed(11);
        for _ in 0..5000 {
            let mut bytes = WHOLE.as_bytes().to_vec();
            for _ in 0..rng.usize(1..6) {
                let at = rng.usize(..bytes.len());
                bytes[at] = rng.u8(..);
            }
            bytes.truncate(rng.usize(..bytes.len()));
            if let Err(all) = read(&bytes, "job.toml", Path::new("")) {
                assert!(!all.is_empty() && all.iter().all(|p| !p.help.is_empty()));
            }
        }
    }

    #[test]
    fn the_schema_knows_the_same_keys_and_accepts_the_same_job() {
        let schema: serde_json::Value = serde_json::from_str(SCHEMA).unwrap();
        let keys = |pointer: &str| {
            let object = schema.pointer(pointer).unwrap().as_object().unwrap();
            object.keys().cloned().collect::<std::collections::BTreeSet<_>>()
        };
        let known = |k: &[&str]| k.iter().map(|s| (*s).to_owned()).collect();
        assert_eq!(keys("/properties"), known(TOP));
        assert_eq!(keys("/properties/part/properties"), known(PART));
        assert_eq!(keys("/properties/part/properties/copies/items/properties"), known(COPY));
        assert_eq!(keys("/properties/tolerance/properties"), known(TOLERANCE));
        assert_eq!(keys("/properties/cutter/additionalProperties/properties"), known(CUTTER));
        assert_eq!(keys("/properties/program/properties"), known(PROGRAM));
        assert_eq!(keys("/properties/check/properties"), known(CHECK));
        assert_eq!(keys("/properties/output/properties"), known(OUTPUT));
        let job: serde_json::Value = toml::from_str(WHOLE).unwrap();
        assert!(jsonschema::is_valid(&schema, &job));
        let wrong: serde_json::Value = toml::from_str("[part]\nlayr = \"A\"").unwrap();
        assert!(!jsonschema::is_valid(&schema, &wrong));
    }
}
