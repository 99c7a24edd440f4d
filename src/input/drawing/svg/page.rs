//! How large is the page, in which unit, and where does it put the drawing?
//!
//! A width or height in mm, cm or Q makes millimetres, one in in, pt or pc inches, and the page's
//! lower left corner the origin. Without either, px say nothing of a size in the shop: one user unit
//! (of the viewBox where there is one) is taken as one unit of the drawing, and that is said.

use kurbo::{Affine, Rect, Vec2};
use svgtypes::AspectRatio;

use super::length::{Length, PX_PER_INCH};
use super::transform::{turned_over, view_box_map};
use crate::program::Unit;

/// What the outermost `svg` element says of its size.
#[derive(Clone, Copy, Debug)]
pub(super) struct Sheet {
    pub(super) width: Option<Length>,
    pub(super) height: Option<Length>,
    pub(super) view_box: Option<Rect>,
    pub(super) aspect: AspectRatio,
}

/// The page made of it.
#[derive(Clone, Copy, Debug)]
pub(super) struct Page {
    /// From user units to the drawing, y up.
    pub(super) map: Affine,
    /// Width and height in user units, where known: what percentages are of.
    pub(super) viewport: Option<Vec2>,
    /// Unit the page declares.
    pub(super) unit: Option<Unit>,
    /// Its px size and its viewBox stretch the drawing unequally, so its px are the units.
    pub(super) stretched: bool,
}

impl Sheet {
    pub(super) fn page(&self) -> Page {
        match self.unit() {
            Some(unit) => self.measured(unit),
            None => self.unmeasured(),
        }
    }

    /// Millimetres where either side is metric: they are the finer statement.
    fn unit(&self) -> Option<Unit> {
        let units = [self.width, self.height].map(|l| l.and_then(|l| l.physical()));
        if units.contains(&Some(Unit::Millimetre)) {
            return Some(Unit::Millimetre);
        }
        units.contains(&Some(Unit::Inch)).then_some(Unit::Inch)
    }

    fn measured(&self, unit: Unit) -> Page {
        let length = |l: Option<Length>| l.and_then(|l| l.in_unit(unit));
        let (width, height) = (length(self.width), length(self.height));
        if let Some(b) = self.view_box {
            let ratio = b.width() / b.height();
            let (w, h) = match (width, height) {
                (Some(w), Some(h)) => (w, h),
                (Some(w), None) => (w, w / ratio),
                (None, Some(h)) => (h * ratio, h),
                (None, None) => (b.width(), b.height()),
            };
            let map = turned_over(h) * view_box_map(b, w, h, self.aspect);
            return Page { map, viewport: Some(b.size().to_vec2()), unit: Some(unit), stretched: false };
        }
        let px = Unit::Inch.in_mm() / unit.in_mm() / PX_PER_INCH;
        let map = turned_over(height.unwrap_or(0.0)) * Affine::scale(px);
        let viewport = width.zip(height).map(|(w, h)| Vec2::new(w, h) / px);
        Page { map, viewport, unit: Some(unit), stretched: false }
    }

    fn unmeasured(&self) -> Page {
        let px = |l: Option<Length>| l.and_then(|l| l.in_user_units(None));
        let size = px(self.width).zip(px(self.height));
        let Some(b) = self.view_box else {
            let map = turned_over(px(self.height).unwrap_or(0.0));
            return Page { map, viewport: size.map(Vec2::from), unit: None, stretched: false };
        };
        let viewport = Some(b.size().to_vec2());
        let laid = size.map(|(w, h)| (h, view_box_map(b, w, h, self.aspect)));
        if let Some((height, map)) = laid {
            let [sx, _, _, sy, ..] = map.as_coeffs();
            if (sx - sy).abs() > 1e-9 * sx.max(sy) {
                return Page { map: turned_over(height) * map, viewport, unit: None, stretched: true };
            }
        }
        let map = turned_over(b.height()) * Affine::translate((-b.x0, -b.y0));
        Page { map, viewport, unit: None, stretched: false }
    }
}
