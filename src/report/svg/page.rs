//! The sheet (A4 landscape, millimetres) and how the drawing lies on it.
//!
//! ```text
//!   +--------------------------------+---------+
//!   | o   balloons                 o | verdict |
//!   |   +------------------------+   | figures |
//!   | o |  drawing, fitted       |   | inputs  |
//!   |   +------------------------+ o | list    |
//!   |      o       o                 | legend  |
//!   | axes, scale bar                | care    |
//!   +--------------------------------+---------+
//! ```
//!
//! The drawing's y points up and the sheet's down: coordinates are flipped one by one, so that no text
//! stands in a mirrored frame.

use crate::geometry::{Point, Rect, Vec2};

/// The sheet.
pub const SHEET: Rect = Rect::new(0.0, 0.0, 297.0, 210.0);
/// The frame round everything.
pub const FRAME: Rect = Rect::new(5.0, 5.0, 292.0, 205.0);
/// Between drawing and column.
pub const DIVIDER: f64 = 224.0;
/// Text of the column.
pub const COLUMN: Rect = Rect::new(228.0, 9.0, 288.0, 202.0);
/// Centres of balloons stand on the border of this.
pub const BALLOONS: Rect = Rect::new(10.5, 10.5, 218.5, 185.5);
/// Leaders keep within this until they turn off to their balloon. What runs farther is cut off here.
pub const DOCKS: Rect = Rect::new(16.0, 16.0, 213.0, 180.0);
/// The drawing is fitted into this.
pub const DRAWING: Rect = Rect::new(21.0, 21.0, 208.0, 175.0);
/// Base line of axes and scale bar.
pub const FOOT: f64 = 200.0;

/// Drawing to sheet.
#[derive(Clone, Copy, Debug)]
pub struct Map {
    from: Point,
    to: Point,
    /// Millimetres on the sheet for one unit of the drawing.
    pub scale: f64,
}

impl Map {
    /// Fits `bounds` into the room for the drawing, as large as it goes.
    pub fn fitting(bounds: Rect) -> Self {
        let size = Vec2::new(bounds.width(), bounds.height());
        let scale = (DRAWING.width() / size.x).min(DRAWING.height() / size.y);
        // A point has no size to fit, and a box of infinities no scale: draw them at one to one.
        let scale = if scale.is_finite() && scale > 0.0 { scale } else { 1.0 };
        Self { from: bounds.center(), to: DRAWING.center(), scale }
    }

    /// The place on the sheet of a point of the drawing.
    pub fn point(&self, p: Point) -> Point {
        let v = (p - self.from) * self.scale;
        Point::new(self.to.x + v.x, self.to.y - v.y)
    }

    /// A direction of the drawing on the sheet, its length kept.
    pub const fn direction(v: Vec2) -> Vec2 {
        Vec2::new(v.x, -v.y)
    }
}

/// A length on the sheet as text: to the micrometre, without trailing zeros.
pub fn mm(x: f64) -> String {
    let text = format!("{:.3}", x + 0.0);
    let text = text.trim_end_matches('0').trim_end_matches('.');
    if text == "-0" { "0".to_owned() } else { text.to_owned() }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_drawing_is_fitted_upright_and_not_mirrored() {
        let map = Map::fitting(Rect::new(0.0, 0.0, 187.0, 10.0));
        let (low, high) = (map.point(Point::new(0.0, 0.0)), map.point(Point::new(187.0, 10.0)));
        assert!((low.x - DRAWING.x0).abs() < 1e-9 && (high.x - DRAWING.x1).abs() < 1e-9);
        assert!(high.y < low.y);
    }

    #[test]
    fn a_point_or_a_box_without_end_still_has_a_scale() {
        for bounds in [Rect::ZERO, Rect::new(0.0, 0.0, f64::INFINITY, 1.0)] {
            assert!((Map::fitting(bounds).scale - 1.0).abs() < 1e-12);
        }
    }

    #[test]
    fn lengths_are_short_and_never_minus_zero() {
        assert_eq!(mm(1.5), "1.5");
        assert_eq!(mm(-0.000_01), "0");
        assert_eq!(mm(100.0), "100");
    }
}
