//! Words for a loop or chain that the program never comes near: what it looks like on the drawing, so
//! that it is found there, and whether this cutter could make it at all.

use super::draft::Draft;
use super::number::{length_text, point_text};
use super::wording::Words;
use crate::geometry::{Path, Point, Segment};

impl Words<'_> {
    fn path_of(&self, d: &Draft) -> Option<&Path> {
        d.contour.and_then(|c| self.scene.walls.contour().paths().get(c.path))
    }

    /// An opening that the cutter cannot enter, by its box: never said of one that it could.
    fn too_wide(&self, d: &Draft) -> bool {
        let opening = self.path_of(d).filter(|p| p.is_closed() && p.signed_area() < 0.0);
        opening.is_some_and(|p| p.bounds().width().min(p.bounds().height()) < 2.0 * d.radius)
    }

    pub(super) fn why_unvisited(&self, d: &Draft, cutter: &str) -> String {
        let number = d.contour.map_or(0, |c| c.path);
        let Some(path) = self.path_of(d) else {
            return ": the program never comes near it.".to_owned();
        };
        let (what, b) = (if path.is_closed() { "loop" } else { "chain" }, path.bounds());
        let shape = match circle(path) {
            Some((center, radius)) => format!(
                "a circle of {} diameter at {}",
                length_text(2.0 * radius, self.unit),
                point_text(center, self.unit)
            ),
            None => {
                format!("{} by {}", length_text(b.width(), self.unit), length_text(b.height(), self.unit))
            }
        };
        let wide = if self.too_wide(d) { format!("; {cutter} is too wide for it") } else { String::new() };
        format!(": the program never comes near {what} {number} of the drawing, {shape}{wide}.")
    }

    pub(super) fn remedy_unvisited(&self, d: &Draft) -> String {
        if self.too_wide(d) {
            return "Leave it out with --only-visited if another tool or program makes it; this cutter cannot."
                .to_owned();
        }
        "If another tool or program makes it, leave it out with --only-visited; else add the moves that cut it."
            .to_owned()
    }
}

/// Center and radius of a loop that is one circle.
fn circle(path: &Path) -> Option<(Point, f64)> {
    let mut arcs = path.segments().iter().map(|s| match s {
        Segment::Arc(a) => Some((a.center(), a.radius())),
        Segment::Line(_) => None,
    });
    let (center, radius) = arcs.next()??;
    let same = |other: Option<(Point, f64)>| {
        other.is_some_and(|(c, r)| (c - center).hypot() + (r - radius).abs() <= 1e-6 * radius)
    };
    (path.is_closed() && arcs.all(same)).then_some((center, radius))
}
