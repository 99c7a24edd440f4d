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
    let mut has_vertex = entity.kind != "LWPOLYLINE";
    for pair in entity.pairs {
        let code = pair.code;
        if code == 0 {
            let _ = writeln!(text, "0\nVERTEX");
        } else if is_number(&entity.kind, code) {
            let value = checker.number(pair)?;
            has_vertex |= code == 10;
            if code == 42 && !has_vertex {
                return Err(checker.refuse(pair, "a bulge before the first vertex", "group code 10 first"));
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

    /// Is every code there once without which the entity has no shape, has every vertex x and y, and
    /// are there as many vertices as the entity says?
    fn complete(&self) -> Result<(), Refusal> {
        let entity = self.entity;
        for code in needed(&entity.kind) {
            let mut with_code = entity.pairs.iter().filter(|p| p.code == *code);
            match (with_code.next(), with_code.next()) {
                (Some(_), None) => {}
                (Some(_), Some(second)) => {
                    return Err(self.refuse(second, &format!("group code {code} twice"), "each number once"));
                }
                (None, _) => return Err(self.missing(entity.line, *code)),
            }
        }
        match entity.kind.as_str() {
            "LWPOLYLINE" => self.light_vertices(),
            "POLYLINE" => self.old_vertices(),
            _ => Ok(()),
        }
    }

    fn missing(&self, line: usize, code: i32) -> Refusal {
        vec![Problem::error(
            Place::line(self.file, line, &self.entity.kind),
            format!("group code {code} is missing in {}", self.entity.title()),
            "every number of the entity",
            "correct the entity in the drawing or export it again",
        )]
    }

    fn light_vertices(&self) -> Result<(), Refusal> {
        let mut count = 0i64;
        let mut wanted = 10;
        let mut line = self.entity.line;
        for pair in self.entity.pairs.iter().filter(|p| matches!(p.code, 10 | 20)) {
            if pair.code != wanted {
                return Err(match wanted {
                    10 => self.refuse(pair, "a y without its x", "group code 10 first"),
                    _ => self.missing(line, wanted),
                });
            }
            count += i64::from(wanted == 10);
            wanted = 30 - wanted;
            line = pair.line;
        }
        if wanted == 20 {
            return Err(self.missing(line, 20));
        }
        match self.entity.pairs.iter().find(|p| p.code == 90) {
            Some(pair) if pair.integer() != Some(count) => {
                Err(self.refuse(pair, "a wrong number of vertices", &format!("the {count} that follow")))
            }
            _ => Ok(()),
        }
    }

    fn old_vertices(&self) -> Result<(), Refusal> {
        for run in self.entity.pairs.chunk_by(|_, b| b.code != 0) {
            let Some((name, pairs)) = run.split_first().filter(|r| r.0.code == 0) else { continue };
            for code in [10, 20] {
                if !pairs.iter().any(|p| p.code == code) {
                    return Err(self.missing(name.line, code));
                }
            }
        }
        Ok(())
    }
}
