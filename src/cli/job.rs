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
            "correct this line; names and words stand in double quotes, numbers without",
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
