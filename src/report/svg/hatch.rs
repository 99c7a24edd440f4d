//! Colours and hatchings: purple for what is cut too deep, orange for what is left standing, hatched in
//! opposite directions, so that neither a colour-blind reader nor a grey printer loses the difference.

use svg::node::element::{Definitions, Line, Pattern, Rectangle};

use crate::findings::Kind;

/// Outlines and text.
pub const INK: &str = "#1d2129";
/// Thin rules and leaders.
pub const RULE: &str = "#5f656e";
/// Material of the part.
pub const MATERIAL: &str = "#e9e7e2";
/// The swept edge.
pub const EDGE: &str = "#3398c0";
/// The swept region.
pub const SWEPT: &str = "#dcebf1";
/// Path and rapids of the cutter.
pub const PATH: &str = "#868c95";

/// How one family of findings is drawn.
#[derive(Clone, Copy, Debug)]
pub struct Ink {
    /// Full colour: outlines, balloons, rings.
    pub full: &'static str,
    /// Fill of areas: the hatching.
    pub fill: &'static str,
}

/// The colours of a kind of finding.
pub const fn ink(kind: Kind) -> Ink {
    match kind {
        Kind::Gouge | Kind::Rapid => Ink { full: "#5a2a8c", fill: "url(#se-too-deep)" },
        Kind::Excess | Kind::Cusp => Ink { full: "#b65200", fill: "url(#se-left-standing)" },
        Kind::Fold => Ink { full: RULE, fill: "none" },
    }
}

/// The hatchings that [`ink`] names.
pub fn definitions() -> Definitions {
    Definitions::new().add(hatch("se-too-deep", "#cdbde4", ink(Kind::Gouge).full, 45)).add(hatch(
        "se-left-standing",
        "#f8d3a6",
        ink(Kind::Excess).full,
        -45,
    ))
}

fn hatch(id: &str, light: &str, full: &str, turn: i32) -> Pattern {
    let size = 1.3;
    let ground = Rectangle::new().set("width", size).set("height", size).set("fill", light);
    let stroke = Line::new()
        .set("x1", 0)
        .set("y1", 0.65)
        .set("x2", size)
        .set("y2", 0.65)
        .set("stroke", full)
        .set("stroke-width", 0.3);
    Pattern::new()
        .set("id", id)
        .set("width", size)
        .set("height", size)
        .set("patternUnits", "userSpaceOnUse")
        .set("patternTransform", format!("rotate({turn})"))
        .add(ground)
        .add(stroke)
}
