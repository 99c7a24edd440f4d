//! What does a `use` element show? (SVG 1.1, 5.6.)
//!
//! A copy of another element of the same file, moved by x and y; a `symbol` or `svg` is laid into the
//! width and height given. A copy inside itself is an error, and the elements shown by copies are
//! bounded, so that copies of copies cannot grow without end.

use std::collections::HashMap;

use kurbo::{Affine, Vec2};
use roxmltree::{Node, NodeId};

use super::elements::Side;
use super::{Context, Noted, Walk};

/// Most elements that copies may show together.
const MOST_COPIED: usize = 100_000;

/// What is known of copies.
#[derive(Default)]
pub(super) struct Copies {
    ids: Option<HashMap<String, NodeId>>,
    /// Elements being copied, outermost first.
    within: Vec<NodeId>,
    shown: usize,
}

impl Walk<'_> {
    /// Counts an element that a copy shows; false when there are too many.
    pub(super) fn afford(&mut self, node: Node<'_, '_>) -> bool {
        self.copies.shown += 1;
        if self.copies.shown == MOST_COPIED {
            let found = format!("copies that show more than {MOST_COPIED} elements");
            self.fault(self.source.element(node), found, "", "turn the copies that are meant into shapes");
        }
        self.copies.shown < MOST_COPIED
    }

    pub(super) fn copy(&mut self, node: Node<'_, '_>, inner: Context) -> Result<(), Noted> {
        let target = self.target(node)?;
        if self.copies.within.contains(&target.id()) {
            let found = "a copy of an element that holds the copy itself";
            self.fault(
                self.source.element(node),
                found,
                "",
                "delete this <use> or let it show another element",
            );
            return Err(Noted);
        }
        let x = self.length(node, "x", Side::Width, &inner)?.unwrap_or(0.0);
        let y = self.length(node, "y", Side::Height, &inner)?.unwrap_or(0.0);
        let moved = Context { map: inner.map * Affine::translate((x, y)), copied: true, ..inner };
        self.copies.within.push(target.id());
        let done = match target.tag_name().name() {
            "symbol" | "svg" => self.laid(node, target, moved),
            _ => {
                self.element(target, moved);
                Ok(())
            }
        };
        self.copies.within.pop();
        done
    }

    /// A symbol or inner page, in the size which the copy gives it.
    fn laid(&mut self, node: Node<'_, '_>, target: Node<'_, '_>, moved: Context) -> Result<(), Noted> {
        let mut side = |name: &str, side: Side| -> Result<Option<f64>, Noted> {
            match self.length(node, name, side, &moved)? {
                Some(length) => Ok(Some(length)),
                None => self.length(target, name, side, &moved),
            }
        };
        let width = side("width", Side::Width)?.or(moved.viewport.map(|v| v.x));
        let height = side("height", Side::Height)?.or(moved.viewport.map(|v| v.y));
        let (mut inner, opened) = self.enter(target, moved)?;
        // SVG 2 lets a symbol's own corner move it; SVG 1.1 gives it none.
        if target.tag_name().name() == "svg" {
            let x = self.length(target, "x", Side::Width, &moved)?.unwrap_or(0.0);
            let y = self.length(target, "y", Side::Height, &moved)?.unwrap_or(0.0);
            inner.map *= Affine::translate((x, y));
        }
        let placed = self.viewed(target, width.zip(height).map(Vec2::from), inner);
        if let Ok(inner) = placed {
            self.children(target, inner);
        }
        self.leave(opened);
        placed.map(|_| ())
    }

    fn target<'n, 'i>(&mut self, node: Node<'n, 'i>) -> Result<Node<'n, 'i>, Noted> {
        let href = node.attributes().find(|a| a.name() == "href");
        let name = href.and_then(|a| a.value().trim().strip_prefix('#'));
        let ids = self.copies.ids.get_or_insert_with(|| {
            let mut ids = HashMap::new();
            for n in node.document().descendants() {
                if let Some(id) = n.attribute("id") {
                    ids.entry(id.to_owned()).or_insert_with(|| n.id());
                }
            }
            ids
        });
        let found = name.and_then(|name| ids.get(name)).and_then(|id| node.document().get_node(*id));
        found.ok_or_else(|| {
            let found =
                format!("a copy of '{}', which is not in the drawing", href.map_or("", |a| a.value()));
            let help = "turn the copy into a shape of its own";
            self.fault(self.source.element(node), found, "href with # and an id of this file", help);
            Noted
        })
    }
}
