//! What a DXF drawing of release 2000 holds besides its entities: header, tables, the two spaces, the
//! root dictionary (DXF reference for that release). Every item has a handle and knows its owner's.

use std::fmt::{Display, Write};

use super::{HOLE_LAYER, OUTER_LAYER};
use crate::geometry::Rect;
use crate::program::Unit;

/// Handles of what others point to. Tables own their records; items that nothing points to take the
/// numbers between.
pub mod handle {
    /// Owner of what has none.
    pub const NONE: usize = 0;
    /// The root dictionary.
    pub const ROOT: usize = 0x01;
    /// Its one entry.
    pub const GROUPS: usize = 0x02;
    /// The first table's; each table takes sixteen numbers.
    pub const TABLES: usize = 0x10;
    /// The text style, first record of the fourth table.
    pub const STYLE: usize = 0x41;
    /// Record of the model space, first of the ninth table.
    pub const MODEL_SPACE: usize = 0x91;
    /// Record of the paper space.
    pub const PAPER_SPACE: usize = 0x92;
    /// The first of four numbers for begin and end of both spaces.
    pub const BLOCKS: usize = 0xA0;
    /// The first entity.
    pub const FIRST_ENTITY: usize = 0x100;
}

/// Group codes and values, each on its own line.
#[derive(Default)]
pub struct Pairs {
    pub text: String,
}

impl Pairs {
    /// A code and its value.
    pub fn put(&mut self, code: u16, value: impl Display) -> &mut Self {
        // Writing to a string cannot fail.
        let _ = writeln!(self.text, "{code:>3}\n{value}");
        self
    }

    /// A code and a real number with every digit, never without a decimal point.
    pub fn real(&mut self, code: u16, value: f64) -> &mut Self {
        let text = format!("{}", value + 0.0);
        if text.contains('.') { self.put(code, text) } else { self.put(code, format!("{text}.0")) }
    }

    /// The begin of an item with its handle and its owner's.
    pub fn begin(&mut self, kind: &str, number: usize, owner: usize) -> &mut Self {
        let code = if kind == "DIMSTYLE" { 105 } else { 5 };
        self.put(0, kind).put(code, format!("{number:X}")).put(330, format!("{owner:X}"))
    }

    fn section(&mut self, name: &str) -> &mut Self {
        self.put(0, "SECTION").put(2, name)
    }

    fn end_section(&mut self) {
        self.put(0, "ENDSEC");
    }
}

/// Everything before the entities, of which there will be `count` within `bounds`.
pub fn before(pairs: &mut Pairs, unit: Unit, bounds: Rect, count: usize) {
    header(pairs, unit, bounds, count);
    pairs.section("CLASSES").end_section();
    pairs.section("TABLES");
    tables(pairs, bounds);
    pairs.end_section();
    pairs.section("BLOCKS");
    let spaces = [("*Model_Space", handle::MODEL_SPACE), ("*Paper_Space", handle::PAPER_SPACE)];
    for ((name, record), at) in spaces.into_iter().zip((handle::BLOCKS..).step_by(2)) {
        pairs.begin("BLOCK", at, record).put(100, "AcDbEntity").put(8, 0).put(100, "AcDbBlockBegin");
        pairs.put(2, name).put(70, 0).real(10, 0.0).real(20, 0.0).real(30, 0.0).put(3, name).put(1, "");
        pairs.begin("ENDBLK", at + 1, record).put(100, "AcDbEntity").put(8, 0).put(100, "AcDbBlockEnd");
    }
    pairs.end_section();
    pairs.section("ENTITIES");
}

/// Everything after the entities.
pub fn after(pairs: &mut Pairs) {
    pairs.end_section();
    pairs.section("OBJECTS");
    pairs.begin("DICTIONARY", handle::ROOT, handle::NONE).put(100, "AcDbDictionary").put(281, 1);
    pairs.put(3, "ACAD_GROUP").put(350, format!("{:X}", handle::GROUPS));
    pairs.begin("DICTIONARY", handle::GROUPS, handle::ROOT).put(100, "AcDbDictionary").put(281, 1);
    pairs.end_section();
    pairs.put(0, "EOF");
}

fn header(pairs: &mut Pairs, unit: Unit, bounds: Rect, count: usize) {
    // $INSUNITS: 1 inch, 4 millimetre. $MEASUREMENT: 0 English, 1 metric.
    let (unit, metric) = match unit {
        Unit::Inch => (1, 0),
        Unit::Millimetre => (4, 1),
    };
    pairs.section("HEADER");
    pairs.put(9, "$ACADVER").put(1, "AC1015");
    pairs.put(9, "$DWGCODEPAGE").put(3, "ANSI_1252");
    pairs.put(9, "$HANDSEED").put(5, format!("{:X}", handle::FIRST_ENTITY.saturating_add(count)));
    pairs.put(9, "$INSUNITS").put(70, unit);
    pairs.put(9, "$MEASUREMENT").put(70, metric);
    pairs.put(9, "$EXTMIN").real(10, bounds.x0).real(20, bounds.y0).real(30, 0.0);
    pairs.put(9, "$EXTMAX").real(10, bounds.x1).real(20, bounds.y1).real(30, 0.0);
    pairs.end_section();
}

/// One record of a table: its names for the format, and what it holds.
type Record<'a> = (&'static str, &'a dyn Fn(&mut Pairs));

/// The nine tables in the order of the reference.
fn tables(pairs: &mut Pairs, bounds: Rect) {
    let line_type = |name: &'static str| {
        move |p: &mut Pairs| {
            p.put(2, name).put(70, 0).put(3, "").put(72, 65).put(73, 0).real(40, 0.0);
        }
    };
    let layer = |name: &'static str, color: i32| {
        move |p: &mut Pairs| {
            p.put(2, name).put(70, 0).put(62, color).put(6, "Continuous");
        }
    };
    let space = |name: &'static str| {
        move |p: &mut Pairs| {
            p.put(2, name).put(340, 0);
        }
    };
    let named = |name: &'static str| {
        move |p: &mut Pairs| {
            p.put(2, name).put(70, 0);
        }
    };
    let style = |p: &mut Pairs| {
        p.put(2, "Standard").put(70, 0).real(40, 0.0).real(41, 1.0).real(50, 0.0).put(71, 0).real(42, 1.0);
        p.put(3, "txt").put(4, "");
    };
    let dimension = |p: &mut Pairs| {
        p.put(2, "Standard").put(70, 0).put(340, format!("{:X}", handle::STYLE));
    };
    let all: [(&str, &[Record<'_>]); 9] = [
        ("VPORT", &[("AcDbViewportTableRecord", &|p: &mut Pairs| viewport(p, bounds))]),
        (
            "LTYPE",
            &[
                ("AcDbLinetypeTableRecord", &line_type("ByBlock")),
                ("AcDbLinetypeTableRecord", &line_type("ByLayer")),
                ("AcDbLinetypeTableRecord", &line_type("Continuous")),
            ],
        ),
        (
            "LAYER",
            &[
                ("AcDbLayerTableRecord", &layer("0", 7)),
                ("AcDbLayerTableRecord", &layer(OUTER_LAYER, 5)),
                ("AcDbLayerTableRecord", &layer(HOLE_LAYER, 4)),
            ],
        ),
        ("STYLE", &[("AcDbTextStyleTableRecord", &style)]),
        ("VIEW", &[]),
        ("UCS", &[]),
        ("APPID", &[("AcDbRegAppTableRecord", &named("ACAD"))]),
        ("DIMSTYLE", &[("AcDbDimStyleTableRecord", &dimension)]),
        (
            "BLOCK_RECORD",
            &[
                ("AcDbBlockTableRecord", &space("*Model_Space")),
                ("AcDbBlockTableRecord", &space("*Paper_Space")),
            ],
        ),
    ];
    for ((name, records), at) in all.into_iter().zip((handle::TABLES..).step_by(16)) {
        table(pairs, name, at, records);
    }
}

fn table(pairs: &mut Pairs, name: &str, at: usize, records: &[Record<'_>]) {
    pairs.put(0, "TABLE").put(2, name).put(5, format!("{at:X}")).put(330, handle::NONE);
    pairs.put(100, "AcDbSymbolTable").put(70, records.len());
    if name == "DIMSTYLE" {
        pairs.put(100, "AcDbDimStyleTable").put(71, 0);
    }
    for ((class, fill), number) in records.iter().zip(at + 1..) {
        pairs.begin(name, number, at).put(100, "AcDbSymbolTableRecord").put(100, class);
        fill(pairs);
    }
    pairs.put(0, "ENDTAB");
}

/// The view a reader opens with: everything, with a margin.
fn viewport(pairs: &mut Pairs, bounds: Rect) {
    let high = (1.1 * bounds.height().max(bounds.width())).max(1.0);
    let reals = |pairs: &mut Pairs, list: &[(u16, f64)]| {
        list.iter().for_each(|&(code, value)| {
            pairs.real(code, value);
        });
    };
    pairs.put(2, "*Active").put(70, 0);
    reals(pairs, &[(10, 0.0), (20, 0.0), (11, 1.0), (21, 1.0)]);
    reals(pairs, &[(12, bounds.center().x), (22, bounds.center().y)]);
    reals(pairs, &[(13, 0.0), (23, 0.0), (14, 1.0), (24, 1.0), (15, 1.0), (25, 1.0)]);
    reals(pairs, &[(16, 0.0), (26, 0.0), (36, 1.0), (17, 0.0), (27, 0.0), (37, 0.0)]);
    reals(pairs, &[(40, high), (41, 1.5), (42, 50.0), (43, 0.0), (44, 0.0), (50, 0.0), (51, 0.0)]);
    for (code, value) in [(71, 0), (72, 1000), (73, 1), (74, 3), (75, 0), (76, 0), (77, 0), (78, 0)] {
        pairs.put(code, value);
    }
}
