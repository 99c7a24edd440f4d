//! What does each element of SVG mean for a contour, and what do its attributes say?

use std::str::FromStr;

use kurbo::{Affine, Point, Rect, Vec2};
use roxmltree::Node;
use svgtypes::{AspectRatio, NumberListParser};

use super::super::length::{Length, LengthError};
use super::super::outline::Outline;
use super::super::page::{Page, Sheet};
use super::super::path::parse_path;
use super::super::shapes;
use super::super::source::{position_of, wording};
use super::super::transform::{parse_view_box, view_box_map};
use super::{Context, Noted, Walk};

/// Elements that neither show a shape of their own nor hold one that is shown.
const SILENT: [&str; 22] = [
    "title",
    "desc",
    "metadata",
    "linearGradient",
    "radialGradient",
    "meshgradient",
    "pattern",
    "filter",
    "script",
    "view",
    "cursor",
    "font",
    "font-face",
    "color-profile",
    "animate",
    "animateMotion",
    "animateTransform",
    "set",
    "solidcolor",
    "hatch",
    "marker",
    "stop",
];

/// Basic shapes.
const SHAPES: [&str; 7] = ["path", "rect", "circle", "ellipse", "line", "polyline", "polygon"];

/// Along which side of the viewport a percentage counts.
#[derive(Clone, Copy)]
pub(super) enum Side {
    Width,
    Height,
    /// The mean of both: root of half the sum of squares (SVG 1.1, 7.10).
    Other,
}

impl Walk<'_> {
    pub(super) fn element(&mut self, node: Node<'_, '_>, outer: Context) {
        // Elements of other namespaces carry an editor's notes.
        let namespace = node.tag_name().namespace();
        if namespace.is_some_and(|n| n != "http://www.w3.org/2000/svg") {
            return;
        }
        let name = node.tag_name().name();
        if name == "style" {
            return self.style_sheet(node);
        }
        if SILENT.contains(&name) {
            return;
        }
        let holds = matches!(name, "g" | "a" | "svg" | "switch" | "use");
        let is_shape = SHAPES.contains(&name);
        if !holds && !is_shape {
            if outer.taken && outer.shown && outer.visible {
                self.strange(node);
            }
            return;
        }
        if outer.copied && !self.afford(node) {
            return;
        }
        let Ok((inner, opened)) = self.enter(node, outer) else {
            return;
        };
        if is_shape {
            self.count_entity();
            if inner.taken && inner.shown && inner.visible {
                self.shape(node, &inner);
            }
        } else {
            self.group(node, inner);
        }
        self.leave(opened);
    }

    /// An element that shows others.
    fn group(&mut self, node: Node<'_, '_>, inner: Context) {
        match node.tag_name().name() {
            "svg" => {
                if let Ok(inner) = self.nested(node, inner) {
                    self.children(node, inner);
                }
            }
            "switch" => self.switch(node, inner),
            // A copy that fails has been noted.
            "use" => self.copy(node, inner).unwrap_or(()),
            _ => self.children(node, inner),
        }
    }

    /// An element that may show something a contour could be meant by.
    fn strange(&mut self, node: Node<'_, '_>) {
        match node.tag_name().name() {
            "text" | "tref" => {
                self.skip(node, "is no contour", "turn the text into paths if it is to be cut")
            }
            "image" => self.skip(node, "is no contour", "trace the picture into paths if it is to be cut"),
            "defs" | "symbol" | "clipPath" | "mask" => {
                let shape = |n: Node<'_, '_>| SHAPES.contains(&n.tag_name().name());
                if node.descendants().any(shape) {
                    let help = "nothing is lost: templates are read where a <use> shows them";
                    self.skip(node, "with shapes that are only templates", help);
                }
            }
            _ => self.skip(node, "is not understood", "draw what it shows as paths or basic shapes"),
        }
    }

    /// Of the alternatives the first that is drawn by SVG itself (SVG 1.1, 5.8.2).
    fn switch(&mut self, node: Node<'_, '_>, inner: Context) {
        let mut drawn = node.children().filter(|c| c.is_element() && c.tag_name().name() != "foreignObject");
        if let Some(first) = drawn.next() {
            self.element(first, inner);
        }
        if drawn.next().is_some() && inner.taken && inner.shown {
            self.skip(node, "alternatives but the first", "keep the one that is meant and delete the others");
        }
    }

    fn shape(&mut self, node: Node<'_, '_>, context: &Context) {
        let outlines = match node.tag_name().name() {
            "path" => self.path(node),
            "polyline" => self.points(node, false),
            "polygon" => self.points(node, true),
            _ => self.basic(node, context),
        };
        match outlines {
            Ok(outlines) if outlines.is_empty() => {
                self.skip(node, "without length", "nothing is lost: a point is no contour");
            }
            Ok(outlines) => self.take(node, &outlines, context),
            Err(Noted) => {}
        }
    }

    fn path(&mut self, node: Node<'_, '_>) -> Result<Vec<Outline>, Noted> {
        let Some(attribute) = node.attribute_node("d") else {
            return Ok(Vec::new());
        };
        match parse_path(attribute.value()) {
            Ok(data) => {
                if data.enlarged > 0 {
                    let found =
                        "an arc whose radii are too small for its ends was enlarged until it reaches them";
                    let help = "check the arc's radii if it is not meant to be half a turn";
                    let place = self.source.attribute(&attribute, None);
                    self.warnings.push(crate::input::Problem::warning(place, found, "", help));
                }
                Ok(data.outlines)
            }
            Err(error) => {
                let found = wording(&error, "the path data");
                let expected = "a path command (M L H V C S Q T A Z) with all its finite numbers";
                self.fault_at(&attribute, position_of(&error), found, expected);
                Err(Noted)
            }
        }
    }

    fn points(&mut self, node: Node<'_, '_>, closed: bool) -> Result<Vec<Outline>, Noted> {
        let Some(attribute) = node.attribute_node("points") else {
            return Ok(Vec::new());
        };
        let mut numbers = Vec::new();
        for number in NumberListParser::from(attribute.value()) {
            match number {
                Ok(number) => numbers.push(number),
                Err(error) => {
                    let found = wording(&error, "the list of points");
                    self.fault_at(&attribute, position_of(&error), found, "pairs of finite numbers");
                    return Err(Noted);
                }
            }
        }
        let (pairs, odd) = numbers.as_chunks::<2>();
        if !odd.is_empty() {
            let found = format!("the list of points holds {} numbers", numbers.len());
            self.fault_at(&attribute, None, found, "an even number of them: x and y of each point");
            return Err(Noted);
        }
        let points: Vec<Point> = pairs.iter().map(|[x, y]| Point::new(*x, *y)).collect();
        Ok(shapes::polygon(&points, closed).into_iter().collect())
    }

    fn basic(&mut self, node: Node<'_, '_>, context: &Context) -> Result<Vec<Outline>, Noted> {
        let mut get = |name: &str, side: Side| self.length(node, name, side, context);
        let outline = match node.tag_name().name() {
            "line" => {
                let (x1, y1) = (get("x1", Side::Width)?, get("y1", Side::Height)?);
                let (x2, y2) = (get("x2", Side::Width)?, get("y2", Side::Height)?);
                let point = |x: Option<f64>, y: Option<f64>| Point::new(x.unwrap_or(0.0), y.unwrap_or(0.0));
                shapes::polygon(&[point(x1, y1), point(x2, y2)], false)
            }
            "rect" => {
                let (x, y) = (get("x", Side::Width)?, get("y", Side::Height)?);
                let (w, h) = (get("width", Side::Width)?, get("height", Side::Height)?);
                let (rx, ry) = (get("rx", Side::Width)?, get("ry", Side::Height)?);
                let origin = Point::new(x.unwrap_or(0.0), y.unwrap_or(0.0));
                let size = kurbo::Size::new(w.unwrap_or(0.0), h.unwrap_or(0.0));
                // A radius that is not given equals the other one (SVG 1.1, 9.2).
                let (rx, ry) = (rx.or(ry).unwrap_or(0.0), ry.or(rx).unwrap_or(0.0));
                shapes::rect(Rect::from_origin_size(origin, size), rx, ry)
            }
            name => {
                let center = Point::new(
                    get("cx", Side::Width)?.unwrap_or(0.0),
                    get("cy", Side::Height)?.unwrap_or(0.0),
                );
                let (rx, ry) = if name == "circle" {
                    let r = get("r", Side::Other)?;
                    (r, r)
                } else {
                    let (rx, ry) = (get("rx", Side::Width)?, get("ry", Side::Height)?);
                    (rx.or(ry), ry.or(rx))
                };
                shapes::ellipse(center, rx.unwrap_or(0.0), ry.unwrap_or(0.0))
            }
        };
        Ok(outline.into_iter().collect())
    }

    /// A length in user units; `None` where the attribute is missing or `auto`.
    pub(super) fn length(
        &mut self,
        node: Node<'_, '_>,
        name: &str,
        side: Side,
        context: &Context,
    ) -> Result<Option<f64>, Noted> {
        let Some(length) = self.raw_length(node, name)? else {
            return Ok(None);
        };
        let whole = context.viewport.map(|v| match side {
            Side::Width => v.x,
            Side::Height => v.y,
            Side::Other => v.hypot() / std::f64::consts::SQRT_2,
        });
        let found = length.in_user_units(whole);
        let negative = found.is_some_and(|l| l < 0.0);
        let fault = match found {
            None => Some(("a share of a page whose size is not given", "a length")),
            Some(_) if negative && ["width", "height", "r", "rx", "ry"].contains(&name) => {
                Some(("a size below zero", "a length of zero or more"))
            }
            Some(_) => None,
        };
        if let (Some((found, expected)), Some(attribute)) = (fault, node.attribute_node(name)) {
            self.fault_at(&attribute, None, found, expected);
            return Err(Noted);
        }
        Ok(found)
    }

    fn raw_length(&mut self, node: Node<'_, '_>, name: &str) -> Result<Option<Length>, Noted> {
        let Some(attribute) = node.attribute_node(name) else {
            return Ok(None);
        };
        if attribute.value().trim() == "auto" {
            return Ok(None);
        }
        let expected = "a finite number, with mm, cm, in, px, pt, pc or Q if anything";
        match Length::from_str(attribute.value()) {
            Ok(length) => Ok(Some(length)),
            Err(LengthError::NotANumber) => {
                self.fault_at(&attribute, None, format!("'{name}' is no length"), expected);
                Err(Noted)
            }
            Err(LengthError::FontRelative) => {
                let found = format!("'{name}' is counted in letter sizes, which a contour does not have");
                self.fault_at(&attribute, None, found, expected);
                Err(Noted)
            }
        }
    }

    /// The page of the outermost element.
    pub(super) fn page(&mut self, root: Node<'_, '_>) -> Result<Page, Noted> {
        let mut side = |name: &str| -> Result<Option<Length>, Noted> {
            let length = self.raw_length(root, name)?;
            let share = length.is_some_and(|l| l.in_user_units(None).is_none());
            if let (Some(attribute), Some(l)) = (root.attribute_node(name), length)
                && l.number <= 0.0
            {
                self.fault_at(&attribute, None, format!("the page's {name} is not above zero"), "a length");
                return Err(Noted);
            }
            Ok(length.filter(|_| !share))
        };
        let (width, height) = (side("width")?, side("height")?);
        let view_box = self.view_box(root)?;
        Ok(Sheet { width, height, view_box, aspect: self.aspect(root)? }.page())
    }

    fn view_box(&mut self, node: Node<'_, '_>) -> Result<Option<Rect>, Noted> {
        let Some(attribute) = node.attribute_node("viewBox") else {
            return Ok(None);
        };
        let found = parse_view_box(attribute.value());
        if found.is_none() {
            let expected = "x, y, width and height, the last two above zero";
            self.fault_at(&attribute, None, "the viewBox is no box", expected);
            return Err(Noted);
        }
        Ok(found)
    }

    fn aspect(&mut self, node: Node<'_, '_>) -> Result<AspectRatio, Noted> {
        let Some(attribute) = node.attribute_node("preserveAspectRatio") else {
            return Ok(AspectRatio::default());
        };
        AspectRatio::from_str(attribute.value()).map_err(|error| {
            let found = wording(&error, "preserveAspectRatio");
            let expected = "none, or one of xMinYMin to xMaxYMax with meet or slice";
            self.fault_at(&attribute, position_of(&error), found, expected);
            Noted
        })
    }

    /// An inner `svg` is a viewport of its own (SVG 1.1, 7.9); what sticks out of it is kept.
    fn nested(&mut self, node: Node<'_, '_>, outer: Context) -> Result<Context, Noted> {
        let mut get = |name: &str, side: Side| self.length(node, name, side, &outer);
        let corner = (get("x", Side::Width)?.unwrap_or(0.0), get("y", Side::Height)?.unwrap_or(0.0));
        let width = get("width", Side::Width)?.or(outer.viewport.map(|v| v.x));
        let height = get("height", Side::Height)?.or(outer.viewport.map(|v| v.y));
        let moved = Context { map: outer.map * Affine::translate(corner), ..outer };
        self.viewed(node, width.zip(height).map(Vec2::from), moved)
    }

    /// The contents of a viewport of this size, as its viewBox lays them.
    pub(super) fn viewed(
        &mut self,
        node: Node<'_, '_>,
        size: Option<Vec2>,
        outer: Context,
    ) -> Result<Context, Noted> {
        let Some(view_box) = self.view_box(node)? else {
            return Ok(Context { viewport: size, ..outer });
        };
        let aspect = self.aspect(node)?;
        let Some(size) = size else {
            let found = "an inner page with a viewBox but without a size";
            let help = "give it a width and a height";
            self.fault(self.source.element(node), found, "width and height", help);
            return Err(Noted);
        };
        let map = outer.map * view_box_map(view_box, size.x, size.y, aspect);
        Ok(Context { map, viewport: Some(view_box.size().to_vec2()), ..outer })
    }
}
