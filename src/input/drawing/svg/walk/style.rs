//! Is an element shown, and does its style say anything that would change its shape?
//!
//! Only `style` attributes are read; what a style sheet says is not. A style that moves or reshapes
//! an element is refused rather than overlooked.

use roxmltree::Node;

use super::{Context, Noted, Walk};

/// Properties which give an element another place or shape (SVG 2, geometry properties; CSS Transforms).
const SHAPING: [&str; 15] = [
    "transform",
    "translate",
    "rotate",
    "scale",
    "d",
    "x",
    "y",
    "cx",
    "cy",
    "r",
    "rx",
    "ry",
    "width",
    "height",
    "offset-path",
];

impl Walk<'_> {
    /// What the element's style and display attributes say.
    pub(super) fn styled(&mut self, node: Node<'_, '_>, inner: &mut Context) -> Result<(), Noted> {
        let outer_shown = inner.shown && inner.visible;
        let value = |name: &str| property(node, name).unwrap_or_default();
        match value("visibility") {
            "hidden" | "collapse" => inner.visible = false,
            "visible" => inner.visible = true,
            _ => {}
        }
        if value("display") == "none" {
            inner.shown = false;
        }
        if inner.taken && outer_shown && !(inner.shown && inner.visible) {
            self.skip(
                node,
                "that is not displayed",
                "make it visible and save again if it belongs to the contour",
            );
        }
        if inner.taken
            && inner.shown
            && ["clip-path", "mask"].iter().any(|n| !["", "none"].contains(&value(n)))
        {
            let help = "its whole shape was read; cut it in the drawing if only a part of it is meant";
            self.warn_once(node, "whose clipping or mask is not applied", help);
        }
        self.refuse_shaping(node, inner)
    }

    fn refuse_shaping(&mut self, node: Node<'_, '_>, inner: &Context) -> Result<(), Noted> {
        if let Some(origin) = node.attribute_node("transform-origin") {
            let found = "a transform with an origin of its own";
            self.fault_at(&origin, None, found, "transforms about the coordinate origin");
            return Err(Noted);
        }
        let Some(style) = node.attribute_node("style") else {
            return Ok(());
        };
        // The page's own size in a style lays out a web page around it; it moves no contour.
        let root = inner.depth == 1;
        let shaping = declarations(style.value()).find(|(name, value)| {
            SHAPING.contains(name) && *value != "none" && !(root && *name != "transform")
        });
        if let Some((name, _)) = shaping {
            let found = format!("the style gives '{name}', which moves or reshapes the element");
            self.fault_at(&style, None, found, "places and shapes given as attributes");
            return Err(Noted);
        }
        Ok(())
    }

    fn warn_once(&mut self, node: Node<'_, '_>, why: &str, help: &str) {
        let found = format!("<{}> {why}", node.tag_name().name());
        if !self.warnings.iter().any(|w| w.found == found) {
            let place = self.source.element(node);
            self.warnings.push(crate::input::Problem::warning(place, found, "", help));
        }
    }

    /// A style sheet is not applied; where it could hide or move something that is said.
    pub(super) fn style_sheet(&mut self, node: Node<'_, '_>) {
        let text: String = node.children().filter_map(|c| c.text()).collect();
        if ["display", "visibility", "transform", "clip-path", "mask"].iter().any(|word| text.contains(word))
        {
            let help = "give display and transform as attributes of the elements themselves";
            self.warn_once(node, "that may hide or move elements is not applied", help);
        }
    }
}

/// A presentation property: the style's, else the attribute's.
fn property<'a>(node: Node<'a, '_>, name: &str) -> Option<&'a str> {
    let style = node.attribute("style").unwrap_or_default();
    declarations(style)
        .filter(|(n, _)| *n == name)
        .map(|(_, value)| value)
        .last()
        .or_else(|| node.attribute(name).map(str::trim))
}

/// Names and values of a style attribute, without `!important`.
fn declarations(style: &str) -> impl Iterator<Item = (&str, &str)> {
    style.split(';').filter_map(|d| {
        let (name, value) = d.split_once(':')?;
        Some((name.trim(), value.trim().trim_end_matches("!important").trim_end()))
    })
}
