//! Writes out the pairs that say an entity's shape, each checked, for the `dxf` crate to read. It is
//! lenient where a drawing must not be: a number that is none ends its list of entities in silence, and
//! infinity is a number to it.

use std::fmt::Write as _;

use super::scan::{Entity, Pair};
use crate::input::{Place, Problem, Refusal};
use crate::tolerance::GREATEST_COORDINATE;

/// Codes whose values are numbers, by kind. Other pairs say nothing about the shape.
fn is_number(kind: &str, code: i32) -> bool {
    match code {
        10 | 20 | 210 | 220 | 230 => true,
        30 => kind != "LWPOLYLINE",
        11 | 21 | 31 => kind == "LINE",
        40 => matches!(kind, "ARC" | "CIRCLE"),
        50 | 51 => kind == "ARC",
        38 => kind == "LWPOLYLINE",
        42 => matches!(kind, "LWPOLYLINE" | "POLYLINE"),
        _ => false,
    }
}

/// The codes without which an entity of this kind has no shape.
fn needed(kind: &str) -> &'static [i32] {
    match kind {
        "LINE" => &[10, 20, 11, 21],
        "ARC" => &[10, 20, 40, 50, 51],
        "CIRCLE" => &[10, 20, 40],
        _ => &[],
    }
}

/// Appends the entity's sound pairs to `text`.
///
/// # Errors
/// A number that is none, is missing or too great, or a count of vertices that is wrong.
pub(super) fn write(entity: &Entity<'_>, file: &str, text: &mut String) -> Result<(), Refusal> {
    let checker = Checker { entity, file };
    checker.complete()?;
    // Writing to a string cannot fail.
    let _ = writeln!(text, "0\n{}", entity.kind);
    let mut seen_x = false;
    for pair in entity.pairs {
        let code = pair.code;
        if code == 0 {
            let _ = writeln!(text, "0\nVERTEX");
        } else if is_number(&entity.kind, code) {
            let value = checker.number(pair)?;
            seen_x |= code == 10;
            if matches!(code, 20 | 42) && !seen_x && entity.kind == "LWPOLYLINE" {
                return Err(checker.refuse(pair, "y or bulge before the first x", "group code 10 first"));
            }
            let _ = writeln!(text, "{code}\n{value:?}");
        } else if code == 70 && entity.kind.ends_with("POLYLINE") {
            let flags = pair.integer().and_then(|v| i16::try_from(v).ok());
            let flags = flags.ok_or_else(|| checker.refuse(pair, "no flags", "a whole number"))?;
            let _ = writeln!(text, "70\n{flags}");
        }
    }
    if entity.kind == "POLYLINE" {
        text.push_str("0\nSEQEND\n");
    }
    Ok(())
}

struct Checker<'a> {
    entity: &'a Entity<'a>,
    file: &'a str,
}

impl Checker<'_> {
    fn refuse(&self, pair: &Pair<'_>, found: &str, expected: &str) -> Refusal {
        let shown = pair.text();
        let length = shown.chars().count();
        vec![Problem::error(
            Place::line(self.file, pair.line, shown).at(1, length),
            format!("{found} in {}", self.entity.title()),
            expected,
            "correct the entity in the drawing or export it again",
        )]
    }

    /// The value as a finite number within the greatest coordinate.
    fn number(&self, pair: &Pair<'_>) -> Result<f64, Refusal> {
        match pair.text().parse::<f64>() {
            Ok(v) if v.abs() <= GREATEST_COORDINATE => Ok(v),
            Ok(v) if v.is_finite() => {
                Err(self.refuse(pair, "a number too great for a drawing", "at most 1e9"))
            }
            _ => Err(self.refuse(pair, "no finite number", "a number such as 12.5")),
        }
    }

    /// Are all codes there without which the entity has no shape, and as many vertices as it says?
    fn complete(&self) -> Result<(), Refusal> {
        let entity = self.entity;
        let has = |code: i32| entity.pairs.iter().any(|p| p.code == code);
        if let Some(code) = needed(&entity.kind).iter().find(|c| !has(**c)) {
            return Err(vec![Problem::error(
                entity.place(self.file),
                format!("group code {code} is missing in {}", entity.title()),
                format!("all of the group codes {:?}", needed(&entity.kind)),
                "correct the entity in the drawing or export it again",
            )]);
        }
        let count = entity.pairs.iter().filter(|p| p.code == 10).count();
        let said = entity.pairs.iter().find(|p| p.code == 90 && entity.kind == "LWPOLYLINE");
        match said {
            Some(pair) if pair.integer() != i64::try_from(count).ok() => {
                Err(self.refuse(pair, "a wrong number of vertices", &format!("the {count} that follow")))
            }
            _ => Ok(()),
        }
    }
}
