//! A light look at the group-code pairs of a text DXF: sections, entities with their line, layer and
//! handle, the unit, the layer table. Rests on the published DXF Reference (group codes in numerical
//! order; ENTITIES, TABLES and HEADER sections).
//!
//! The `dxf` crate reads what the pairs of an entity mean, but it knows no lines, and on a pair that it
//! cannot read it ends the list of entities without a word. So well-formedness is settled here, where
//! the place can be told, and the crate is given only pairs that were found sound.

use crate::input::{Place, Problem, Refusal};

/// A group code with its value.
#[derive(Clone, Copy, Debug)]
pub(super) struct Pair<'a> {
    pub(super) code: i32,
    /// Value without surrounding blanks.
    pub(super) value: &'a [u8],
    /// Line of the value, from 1.
    pub(super) line: usize,
}

impl Pair<'_> {
    pub(super) fn text(&self) -> String {
        decode(self.value)
    }

    pub(super) fn integer(&self) -> Option<i64> {
        std::str::from_utf8(self.value).ok()?.parse().ok()
    }
}

/// One entity of the ENTITIES section; a POLYLINE with its vertices.
#[derive(Clone, Debug)]
pub(super) struct Entity<'a> {
    pub(super) kind: String,
    /// Its pairs after the one that names it.
    pub(super) pairs: &'a [Pair<'a>],
    /// Line of its name, from 1.
    pub(super) line: usize,
    pub(super) layer: String,
    /// Handle as written, without which the user cannot find it in a drawing of thousands.
    pub(super) handle: Option<String>,
    /// On a paper sheet rather than in the model?
    pub(super) on_paper: bool,
    /// Marked invisible?
    pub(super) hidden: bool,
}

impl Entity<'_> {
    /// `SPLINE (handle 2F, layer CUT)`.
    pub(super) fn title(&self) -> String {
        match &self.handle {
            Some(h) => format!("{} (handle {h}, layer {})", self.kind, self.layer),
            None => format!("{} (layer {})", self.kind, self.layer),
        }
    }

    pub(super) fn place(&self, file: &str) -> Place {
        Place::line(file, self.line, &self.kind)
    }
}

/// A row of the layer table.
#[derive(Clone, Debug)]
pub(super) struct TableLayer {
    pub(super) name: String,
    /// Switched off or frozen?
    pub(super) off: bool,
}

/// What the scan of a file gives.
#[derive(Clone, Debug)]
pub(super) struct Scan<'a> {
    pub(super) entities: Vec<Entity<'a>>,
    /// Value of $INSUNITS and its line.
    pub(super) units: Option<(i64, usize)>,
    pub(super) layers: Vec<TableLayer>,
}

/// Most pairs in a file: a drawing of a million entities has some ten million.
const MOST_PAIRS: usize = 100_000_000;

/// The pairs of a file.
///
/// # Errors
/// An empty or binary file, a code that is no number, a value that is missing, no end of file.
pub(super) fn pairs<'a>(bytes: &'a [u8], file: &str) -> Result<Vec<Pair<'a>>, Refusal> {
    let bytes = bytes.strip_prefix(b"\xEF\xBB\xBF").unwrap_or(bytes);
    if bytes.iter().all(u8::is_ascii_whitespace) {
        return Err(refusal(
            Place::file(file),
            "the file is empty",
            "a DXF drawing",
            "export the drawing again",
        ));
    }
    if bytes.contains(&0) {
        return Err(refusal(
            Place::file(file),
            "the file is binary, not text",
            "a DXF drawing in text form",
            "save the drawing as DXF in text (ASCII) form",
        ));
    }
    let mut lines = (1..).zip(bytes.split(|b| *b == b'\n').map(<[u8]>::trim_ascii));
    let mut pairs = Vec::new();
    while let Some((line, code_text)) = lines.next() {
        let code = std::str::from_utf8(code_text).ok().and_then(|t| t.parse::<i32>().ok());
        let Some(code) = code else {
            if code_text.is_empty() && lines.all(|l| l.1.is_empty()) {
                break;
            }
            return Err(refusal(
                Place::line(file, line, decode(code_text)).at(1, code_text.len().max(1)),
                "this line is no group code",
                "a whole number: DXF is pairs of lines, a group code and its value",
                if pairs.is_empty() {
                    "check that the file is a DXF drawing; export it again as DXF in text form"
                } else {
                    "a line is missing or was added before this place; export the drawing again"
                },
            ));
        };
        let Some((line, value)) = lines.next() else {
            return Err(cut_short(file, line, "the file ends within a pair"));
        };
        let pair = Pair { code, value, line };
        if code == 0 && value == b"EOF" {
            return Ok(pairs);
        }
        if code != 999 {
            pairs.push(pair);
        }
        if pairs.len() > MOST_PAIRS {
            return Err(cut_short(file, line, "the file has more pairs than any drawing"));
        }
    }
    let last = pairs.last().map_or(1, |p| p.line);
    Err(cut_short(file, last, "the file ends without its end mark (0, EOF)"))
}

fn cut_short(file: &str, line: usize, found: &str) -> Refusal {
    refusal(
        Place { file: file.into(), line: Some(line), ..Place::default() },
        found,
        "a whole DXF drawing",
        "the file was cut short in saving or copying; export or copy it again",
    )
}

pub(super) fn refusal(place: Place, found: &str, expected: &str, help: &str) -> Refusal {
    vec![Problem::error(place, found, expected, help)]
}

/// Sections, entities, unit and layers of the pairs.
///
/// # Errors
/// A section within a section, one that does not end, or no ENTITIES section.
pub(super) fn scan<'a>(pairs: &'a [Pair<'a>], file: &str) -> Result<Scan<'a>, Refusal> {
    let mut scan = Scan { entities: Vec::new(), units: None, layers: Vec::new() };
    let mut has_entities = false;
    let mut rest = pairs;
    while let [first, after @ ..] = rest {
        if !(first.code == 0 && first.value == b"SECTION") {
            return Err(refusal(
                Place::line(file, first.line, first.text()),
                "this lies outside of any section",
                "0, SECTION",
                "the file is damaged here or is no DXF drawing; export the drawing again",
            ));
        }
        let end = after.iter().position(|p| p.code == 0 && matches!(p.value, b"ENDSEC" | b"SECTION"));
        let section = end.and_then(|e| Some((after.get(..e)?, after.get(e)?, after.get(e + 1..)?)));
        let Some((body, mark, next)) = section else {
            return Err(cut_short(file, first.line, "this section does not end"));
        };
        if mark.value != b"ENDSEC" {
            return Err(cut_short(file, mark.line, "a section starts before the last one ended"));
        }
        match body {
            [Pair { code: 2, value: b"HEADER", .. }, body @ ..] => scan.units = header_units(body),
            [Pair { code: 2, value: b"TABLES", .. }, body @ ..] => scan.layers = table_layers(body),
            [Pair { code: 2, value: b"ENTITIES", .. }, body @ ..] => {
                has_entities = true;
                scan.entities.append(&mut entities(body));
            }
            _ => {}
        }
        rest = next;
    }
    if !has_entities {
        return Err(refusal(
            Place::file(file),
            "the file has no ENTITIES section",
            "a DXF drawing with entities",
            "export the drawing again; if it is one of blocks only, insert and explode them first",
        ));
    }
    Ok(scan)
}

fn header_units(body: &[Pair<'_>]) -> Option<(i64, usize)> {
    let at = body.iter().position(|p| p.code == 9 && p.value == b"$INSUNITS")?;
    let pair = body.get(at + 1).filter(|p| p.code == 70)?;
    // A value that is no number is no unit: said as an unknown one.
    Some((pair.integer().unwrap_or(-1), pair.line))
}

fn table_layers(body: &[Pair<'_>]) -> Vec<TableLayer> {
    records(body)
        .filter(|(name, _)| name.value == b"LAYER")
        .filter_map(|(_, pairs)| {
            let name = pairs.iter().find(|p| p.code == 2)?.text();
            let number = |code| pairs.iter().find(|p| p.code == code).and_then(Pair::integer);
            let off = number(62).is_some_and(|c| c < 0) || number(70).is_some_and(|f| f & 1 == 1);
            Some(TableLayer { name, off })
        })
        .collect()
}

/// Runs of pairs that start with code 0.
fn records<'a>(body: &'a [Pair<'a>]) -> impl Iterator<Item = (&'a Pair<'a>, &'a [Pair<'a>])> {
    let from = body.iter().position(|p| p.code == 0).unwrap_or(body.len());
    body.get(from..).unwrap_or_default().chunk_by(|_, b| b.code != 0).filter_map(|run| run.split_first())
}

/// Entities; vertices go with the POLYLINE before them.
fn entities<'a>(body: &'a [Pair<'a>]) -> Vec<Entity<'a>> {
    let mut entities: Vec<Entity<'a>> = Vec::new();
    // Start of the open POLYLINE's pairs in `body`, counted along with the records.
    let mut open: Option<usize> = None;
    let mut at = body.iter().position(|p| p.code == 0).unwrap_or(0);
    for (name, pairs) in records(body) {
        let start = at + 1;
        at = start + pairs.len();
        match (name.value, open) {
            (b"VERTEX", Some(from)) => {
                if let (Some(last), Some(all)) = (entities.last_mut(), body.get(from..at)) {
                    last.pairs = all;
                }
                continue;
            }
            (b"SEQEND", _) => {
                open = None;
                continue;
            }
            (b"POLYLINE", _) => open = Some(start),
            _ => open = None,
        }
        let find = |code| pairs.iter().find(|p| p.code == code);
        entities.push(Entity {
            kind: name.text(),
            pairs,
            line: name.line,
            layer: find(8).map_or_else(|| "0".into(), Pair::text),
            handle: find(5).map(Pair::text),
            on_paper: find(67).and_then(Pair::integer) == Some(1),
            hidden: find(60).and_then(Pair::integer) == Some(1),
        });
    }
    entities
}

/// Text of a value: UTF-8, or Latin-1 where it is none (older files), with `\U+XXXX` put in.
pub(super) fn decode(bytes: &[u8]) -> String {
    let text = std::str::from_utf8(bytes)
        .map_or_else(|_| bytes.iter().map(|b| char::from(*b)).collect(), str::to_owned);
    let mut parts = text.split("\\U+");
    let mut out = parts.next().unwrap_or_default().to_owned();
    for part in parts {
        let digits = part.get(..4).and_then(|d| u32::from_str_radix(d, 16).ok()).and_then(char::from_u32);
        match (digits, part.get(4..)) {
            (Some(c), Some(rest)) => {
                out.push(c);
                out.push_str(rest);
            }
            _ => {
                out.push_str("\\U+");
                out.push_str(part);
            }
        }
    }
    out
}
