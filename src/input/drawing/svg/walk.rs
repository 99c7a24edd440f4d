//! Which elements of an SVG drawing are contour, and where does each lie?
//!
//! One walk over the tree, outer elements first, carrying the transform, the viewport and what is
//! taken. Depth is bounded, so that no file can exhaust the stack.

use kurbo::{Affine, Vec2};
use roxmltree::{Attribute, Node};

use super::outline::{Outline, OutlineError, chain};
use super::page::Page;
use super::source::{Source, position_of, wording};
use super::transform::parse_transform;
use crate::geometry::{Contour, Path};
use crate::input::drawing::{Drawing, DrawingOptions, Layer};
use crate::input::{Place, Problem, Reading, Refusal};
use crate::part::Origin;
use crate::program::Unit;
use crate::tolerance::{CURVE_ERROR_MM, GREATEST_COORDINATE};

mod copies;
mod elements;
mod style;

/// Deepest nesting of elements. Drawings nest some ten deep.
const DEEPEST: usize = 200;

/// Most errors reported one by one.
const MOST_ERRORS: usize = 20;

/// A problem was noted already; what it concerns has no value.
#[derive(Clone, Copy, Debug)]
pub(super) struct Noted;

/// What holds for an element because of those round it.
#[derive(Clone, Copy, Debug)]
struct Context {
    map: Affine,
    viewport: Option<Vec2>,
    taken: bool,
    /// Not under `display: none`.
    shown: bool,
    visible: bool,
    /// Shown by a `use`: its ids are those of what it copies and open no layer.
    copied: bool,
    depth: usize,
}

/// Things of one kind that were left out.
struct LeftOut {
    what: String,
    first: Place,
    count: usize,
    help: &'static str,
}

/// The walk and what it has found.
pub(super) struct Walk<'a> {
    source: &'a Source<'a>,
    options: &'a DrawingOptions,
    error: f64,
    errors: Vec<Problem>,
    more_errors: usize,
    warnings: Vec<Problem>,
    left_out: Vec<LeftOut>,
    layers: Vec<Layer>,
    /// Layers round the element at hand, outermost first.
    open: Vec<usize>,
    matched: Vec<bool>,
    paths: Vec<Path>,
    origins: Vec<Origin>,
    bound: f64,
    copies: copies::Copies,
}

impl<'a> Walk<'a> {
    pub(super) fn new(source: &'a Source<'a>, options: &'a DrawingOptions) -> Self {
        Self {
            source,
            options,
            error: options.curve_error,
            errors: Vec::new(),
            more_errors: 0,
            warnings: Vec::new(),
            left_out: Vec::new(),
            layers: Vec::new(),
            open: Vec::new(),
            matched: vec![false; options.layers.len()],
            paths: Vec::new(),
            origins: Vec::new(),
            bound: 0.0,
            copies: copies::Copies::default(),
        }
    }

    /// Reads the drawing under its root element.
    pub(super) fn read(mut self, root: Node<'_, '_>) -> Result<Reading<Drawing>, Refusal> {
        if root.tag_name().name() != "svg" {
            let found = format!("the file's outermost element is <{}>", root.tag_name().name());
            let help = "give a drawing in SVG, or name the format it has";
            self.fault(self.source.element(root), found, "<svg>", help);
            return Err(self.errors);
        }
        let Ok(page) = self.page(root) else {
            return Err(self.errors);
        };
        let unit = page.unit.or(self.options.unit);
        if self.error == 0.0 {
            self.error = CURVE_ERROR_MM / unit.map_or(1.0, Unit::in_mm);
        }
        self.say_size(root, &page);
        let context = Context {
            map: page.map,
            viewport: page.viewport,
            taken: self.options.layers.is_empty(),
            shown: true,
            visible: true,
            copied: false,
            depth: 0,
        };
        if let Ok((inner, _)) = self.enter(root, context) {
            self.children(root, inner);
        }
        self.finish(unit)
    }

    /// What was assumed where the page has no size a shop can measure.
    fn say_size(&mut self, root: Node<'_, '_>, page: &Page) {
        if page.unit.is_some() {
            return;
        }
        let counted = if page.stretched { "one px of the stretched page" } else { "one user unit" };
        let help = match self.options.unit {
            Some(unit) => {
                format!("{counted} is taken as 1 {}; give the page width and height in mm or in", unit.sign())
            }
            None => format!("{counted} is taken as one unit; say which with the units option"),
        };
        let found = "the drawing does not say how large it is in mm or inches";
        self.warnings.push(Problem::warning(self.source.element(root), found, "", help));
    }

    fn finish(mut self, unit: Option<Unit>) -> Result<Reading<Drawing>, Refusal> {
        self.say_missing_layers();
        let left_out = std::mem::take(&mut self.left_out);
        self.warnings.extend(left_out.into_iter().map(LeftOut::problem));
        if self.more_errors > 0 {
            let found = format!("{} more errors like these", self.more_errors);
            let help = "mend the ones above first";
            self.errors.push(Problem::error(self.source.whole(), found, "", help));
        }
        if self.errors.is_empty() {
            match Contour::new(std::mem::take(&mut self.paths), self.bound) {
                Ok(contour) => {
                    self.warnings.sort_by_key(|p| (p.place.line, p.place.column));
                    let value = Drawing { contour, origins: self.origins, unit, layers: self.layers };
                    return Ok(Reading { value, problems: self.warnings });
                }
                Err(_) => self.say_empty(),
            }
        }
        let mut problems = self.errors;
        problems.extend(self.warnings);
        Err(problems)
    }

    fn say_missing_layers(&mut self) {
        let missing: Vec<&String> =
            self.options.layers.iter().zip(&self.matched).filter(|(_, m)| !**m).map(|(n, _)| n).collect();
        for name in missing {
            let nearest = self
                .layers
                .iter()
                .map(|l| (strsim::jaro_winkler(&l.name, name), l.name.as_str()))
                .filter(|(likeness, _)| *likeness > 0.7)
                .max_by(|a, b| a.0.total_cmp(&b.0));
            let help = match nearest {
                Some((_, near)) => format!("did you mean '{near}'?"),
                None if self.layers.is_empty() => "leave the layer out: the drawing names none".to_owned(),
                None => {
                    let names: Vec<&str> = self.layers.iter().take(8).map(|l| l.name.as_str()).collect();
                    format!("name one that there is: {}", names.join(", "))
                }
            };
            let found = format!("no group or element is called '{name}'");
            self.errors.push(Problem::error(self.source.whole(), found, "", help));
        }
    }

    fn say_empty(&mut self) {
        let shapes: usize = self.layers.iter().map(|l| l.entities).sum();
        let help = if self.warnings.is_empty() && shapes == 0 {
            "give a drawing that holds paths, lines, circles or other shapes"
        } else {
            "see what was left out and why, and draw the contour as plain paths or shapes"
        };
        let found = "the drawing holds no contour that could be read";
        self.errors.push(Problem::error(self.source.whole(), found, "at least one line or curve", help));
    }

    fn children(&mut self, node: Node<'_, '_>, context: Context) {
        for child in node.children().filter(Node::is_element) {
            self.element(child, context);
        }
    }

    /// Transform, visibility and layers of an element; the number of layers it opens.
    fn enter(&mut self, node: Node<'_, '_>, outer: Context) -> Result<(Context, usize), Noted> {
        let mut inner = Context { depth: outer.depth + 1, ..outer };
        if inner.depth > DEEPEST {
            let found = format!("elements nested more than {DEEPEST} deep");
            let help = "ungroup the drawing and save it again";
            self.fault(self.source.element(node), found, "", help);
            return Err(Noted);
        }
        let opened = if outer.depth == 0 || outer.copied { 0 } else { self.open_layers(node, &mut inner) };
        let read = self.styled(node, &mut inner).and_then(|()| self.moved(node, &mut inner));
        match read {
            Ok(()) => Ok((inner, opened)),
            Err(noted) => {
                self.leave(opened);
                Err(noted)
            }
        }
    }

    fn leave(&mut self, opened: usize) {
        self.open.truncate(self.open.len().saturating_sub(opened));
    }

    /// A group or element with an id or a label is a layer; both names are known, the label is shown.
    fn open_layers(&mut self, node: Node<'_, '_>, inner: &mut Context) -> usize {
        let label = node.attributes().find(|a| a.name() == "label").map(|a| a.value());
        let id = node.attribute("id");
        for (name, matched) in self.options.layers.iter().zip(&mut self.matched) {
            if Some(name.as_str()) == label || Some(name.as_str()) == id {
                *matched = true;
                inner.taken = true;
            }
        }
        let Some(name) = label.or(id) else {
            return 0;
        };
        self.open.push(self.layers.len());
        self.layers.push(Layer { name: name.to_owned(), entities: 0, taken: inner.taken && inner.shown });
        1
    }

    fn moved(&mut self, node: Node<'_, '_>, inner: &mut Context) -> Result<(), Noted> {
        let Some(attribute) = node.attribute_node("transform") else {
            return Ok(());
        };
        match parse_transform(attribute.value()) {
            Ok(map) => {
                inner.map *= map;
                Ok(())
            }
            Err(error) => {
                let found = wording(&error, "the transform");
                let expected = "matrix, translate, scale, rotate, skewX or skewY with finite numbers";
                self.fault_at(&attribute, position_of(&error), found, expected);
                Err(Noted)
            }
        }
    }

    /// Adds the outline of a shape; those not taken are only counted.
    fn take(&mut self, node: Node<'_, '_>, outlines: &[Outline], context: &Context) {
        for outline in outlines {
            match chain(outline, context.map, self.error) {
                Ok(Some((path, bound))) => {
                    self.bound = self.bound.max(bound);
                    self.paths.push(path);
                    self.origins.push(self.origin(node));
                }
                Ok(None) => self.skip(node, "without length", "nothing is lost: a point is no contour"),
                Err(OutlineError::OutOfRange) => {
                    let found = format!("a coordinate of this <{}> is too large", node.tag_name().name());
                    let expected = format!("numbers up to {GREATEST_COORDINATE:e} after every transform");
                    let help = "check the element's numbers and the transforms round it";
                    self.fault(self.source.element(node), found, &expected, help);
                    return;
                }
                Err(OutlineError::BadError) => {
                    let found = format!("the allowed curve error is {}", self.error);
                    let help = "give a length above zero, or leave it to the program";
                    self.fault(self.source.whole(), found, "a finite length above zero", help);
                    return;
                }
            }
        }
    }

    fn origin(&self, node: Node<'_, '_>) -> Origin {
        let layer = self.open.last().and_then(|i| self.layers.get(*i)).map(|l| l.name.clone());
        let line = Some(self.source.line(node.range().start));
        Origin { file: self.source.whole().file, layer, line }
    }

    fn count_entity(&mut self) {
        for index in &self.open {
            if let Some(layer) = self.layers.get_mut(*index) {
                layer.entities += 1;
            }
        }
    }

    /// Notes that an element is left out, together with others of its kind.
    fn skip(&mut self, node: Node<'_, '_>, why: &str, help: &'static str) {
        let what = format!("<{}> {why}", node.tag_name().name());
        if let Some(known) = self.left_out.iter_mut().find(|l| l.what == what) {
            known.count += 1;
        } else {
            self.left_out.push(LeftOut { what, first: self.source.element(node), count: 1, help });
        }
    }

    fn fault(&mut self, place: Place, found: impl Into<String>, expected: &str, help: &str) {
        if self.errors.len() < MOST_ERRORS {
            self.errors.push(Problem::error(place, found, expected, help));
        } else {
            self.more_errors += 1;
        }
    }

    /// An error in an attribute's value, at a character of it where that is known.
    fn fault_at(
        &mut self,
        attribute: &Attribute<'_, '_>,
        position: Option<usize>,
        found: impl Into<String>,
        expected: &str,
    ) {
        let help = "mend the marked value, or save the drawing again from where it was made";
        self.fault(self.source.attribute(attribute, position), found, expected, help);
    }
}

impl LeftOut {
    fn problem(self) -> Problem {
        let found = if self.count == 1 {
            format!("left out: {}", self.what)
        } else {
            format!("left out: {} times {} (the first is shown)", self.count, self.what)
        };
        Problem::warning(self.first, found, "", self.help)
    }
}
