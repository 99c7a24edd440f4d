//! Where does a point of an SVG element lie on the page?
//!
//! A list of transforms acts as if each were given on a nested group in that order, the left one
//! outermost (SVG 1.1, 7.5 and 7.6); a viewBox is laid into its viewport as `preserveAspectRatio`
//! says (SVG 1.1, 7.8). SVG's y axis points down; the drawing's points up, so the page is turned over
//! once, at the very end.

use std::str::FromStr;

use kurbo::{Affine, Rect, Vec2};
use svgtypes::{Align, AspectRatio, Transform, ViewBox};

/// The map a transform attribute stands for.
pub(super) fn parse_transform(text: &str) -> Result<Affine, svgtypes::Error> {
    let t = Transform::from_str(text)?;
    Ok(Affine::new([t.a, t.b, t.c, t.d, t.e, t.f]))
}

/// The four numbers of a viewBox: `None` when they are no box with a size.
pub(super) fn parse_view_box(text: &str) -> Option<Rect> {
    let b = ViewBox::from_str(text).ok()?;
    (b.w > 0.0 && b.h > 0.0).then(|| Rect::new(b.x, b.y, b.x + b.w, b.y + b.h))
}

/// How a viewBox is laid into a viewport of this width and height with its corner at 0, 0.
pub(super) fn view_box_map(view_box: Rect, width: f64, height: f64, aspect: AspectRatio) -> Affine {
    let (sx, sy) = (width / view_box.width(), height / view_box.height());
    let scale = match (aspect.align, aspect.slice) {
        (Align::None, _) => Vec2::new(sx, sy),
        (_, false) => Vec2::new(sx.min(sy), sx.min(sy)),
        (_, true) => Vec2::new(sx.max(sy), sx.max(sy)),
    };
    let share = match aspect.align {
        Align::None | Align::XMinYMin => Vec2::new(0.0, 0.0),
        Align::XMidYMin => Vec2::new(0.5, 0.0),
        Align::XMaxYMin => Vec2::new(1.0, 0.0),
        Align::XMinYMid => Vec2::new(0.0, 0.5),
        Align::XMidYMid => Vec2::new(0.5, 0.5),
        Align::XMaxYMid => Vec2::new(1.0, 0.5),
        Align::XMinYMax => Vec2::new(0.0, 1.0),
        Align::XMidYMax => Vec2::new(0.5, 1.0),
        Align::XMaxYMax => Vec2::new(1.0, 1.0),
    };
    let left = share.x * (width - scale.x * view_box.width());
    let top = share.y * (height - scale.y * view_box.height());
    Affine::new([scale.x, 0.0, 0.0, scale.y, left - scale.x * view_box.x0, top - scale.y * view_box.y0])
}

/// Turns the page over: y up from the lower edge of a page of this height, from the upper one where
/// the height is not known (0).
pub(super) const fn turned_over(height: f64) -> Affine {
    Affine::new([1.0, 0.0, 0.0, -1.0, 0.0, height])
}

#[cfg(test)]
mod tests {
    use super::*;
    use kurbo::Point;

    /// SVG 1.1, 7.5 (its figures 255.03 and 111.21 are rounded; recomputed here).
    #[test]
    fn list_of_transforms_acts_left_outermost() {
        let m = parse_transform("translate(50,90) rotate(-45) translate(130,160)").unwrap().as_coeffs();
        let h = std::f64::consts::FRAC_1_SQRT_2;
        let expected = [h, -h, h, h, 255.060_966_544, 111.213_203_436];
        for (found, wanted) in m.iter().zip(expected) {
            assert!((found - wanted).abs() < 1e-9, "{m:?}");
        }
    }

    #[test]
    fn every_kind_of_transform_moves_a_point_as_the_standard_says() {
        for (text, x, y) in [
            ("translate(3)", 5.0, 1.0),
            ("scale(3)", 6.0, 3.0),
            ("scale(0.1,-0.1)", 0.2, -0.1),
            ("rotate(90)", -1.0, 2.0),
            ("rotate(90 1 1)", 1.0, 2.0),
            ("skewX(45)", 3.0, 1.0),
            ("skewY(45)", 2.0, 3.0),
            ("matrix(1 2 3 4 5 6)", 10.0, 14.0),
            ("", 2.0, 1.0),
        ] {
            let p = parse_transform(text).unwrap() * Point::new(2.0, 1.0);
            assert!((p - Point::new(x, y)).hypot() < 1e-12, "{text}: {p:?}");
        }
        assert!(parse_transform("turn(4)").is_err());
        assert!(parse_transform("scale(1e999)").is_err());
    }

    #[test]
    fn view_box_is_laid_into_its_viewport_as_asked() {
        let square = parse_view_box("10 20 50 50").unwrap();
        for (aspect, x, y) in [
            ("none", 200.0, 100.0),
            ("xMidYMid", 150.0, 100.0),
            ("xMinYMin meet", 100.0, 100.0),
            ("xMaxYMax slice", 200.0, 100.0),
            ("xMinYMin slice", 200.0, 200.0),
        ] {
            let map = view_box_map(square, 200.0, 100.0, AspectRatio::from_str(aspect).unwrap());
            let p = map * Point::new(60.0, 70.0);
            assert!((p - Point::new(x, y)).hypot() < 1e-12, "{aspect}: {p:?}");
        }
        for text in ["0 0 0 10", "0 0 10 -1", "0 0 10", "", "0 0 NaN 1"] {
            assert!(parse_view_box(text).is_none(), "{text}");
        }
    }
}
