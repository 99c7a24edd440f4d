//! How a length reads: in the unit of the report, with as many digits as the shop can use.
//!
//! Micrometres and ten-thousandths of an inch are what a shop reads off its instruments; a figure too
//! small for that shows its first two digits. A number that the user is to type into a machine is
//! rounded to the safe side: a greatest allowed length down, a least needed one up.

use crate::compare::Figure;
use crate::geometry::Point;
use crate::program::Unit;

/// Most digits after the point: below a billionth of a unit arithmetic itself has nothing to say.
const MOST_DECIMALS: usize = 9;

/// Decimals of an ordinary length: micrometres, or ten-thousandths of an inch.
const fn decimals(unit: Unit) -> usize {
    match unit {
        Unit::Millimetre => 3,
        Unit::Inch => 4,
    }
}

/// Decimals that leave at least two significant digits of `value`.
fn decimals_for(value: f64, unit: Unit) -> usize {
    let usual = decimals(unit);
    let size = value.abs();
    if size > 0.0 && size.is_finite() {
        let leading = (-size.log10().floor()).clamp(0.0, 300.0) as usize;
        usual.max(leading.saturating_add(1))
    } else {
        usual
    }
}

/// A length without its unit: three decimals in millimetres, four in inches, more where fewer than
/// two significant digits would be left.
#[must_use]
pub fn number_text(value: f64, unit: Unit) -> String {
    if value.is_nan() {
        return "unknown".to_owned();
    }
    if value.is_infinite() {
        return if value > 0.0 { "infinite" } else { "-infinite" }.to_owned();
    }
    let digits = decimals_for(value, unit);
    if digits > MOST_DECIMALS { format!("{value:.1e}") } else { format!("{value:.digits$}") }
}

/// A length with its unit, such as `0.310 mm` or `0.0122 in`.
#[must_use]
pub fn length_text(value: f64, unit: Unit) -> String {
    format!("{} {}", number_text(value, unit), unit.sign())
}

/// The same for a greatest allowed length: what is shown is not above `value`.
#[must_use]
pub fn length_text_down(value: f64, unit: Unit) -> String {
    length_text(rounded(value, unit, f64::floor), unit)
}

/// The same for a least needed length: what is shown is not below `value`.
#[must_use]
pub fn length_text_up(value: f64, unit: Unit) -> String {
    length_text(rounded(value, unit, f64::ceil), unit)
}

/// `value` rounded by `way` to the digits that will be shown. A billionth of the last digit counts as
/// rounding of the arithmetic, else a length of exactly 2 could read 1.999.
fn rounded(value: f64, unit: Unit, way: fn(f64) -> f64) -> f64 {
    let digits = decimals_for(value, unit).min(MOST_DECIMALS);
    let scale = 10f64.powi(i32::try_from(digits).unwrap_or(0));
    let steps = value * scale;
    let nearest = steps.round();
    let steps = if (steps - nearest).abs() < 1e-6 { nearest } else { way(steps) };
    let result = steps / scale;
    if result.is_finite() { result } else { value }
}

/// Decimals the trade reads in a measured figure: a tenth of a micrometre, and about a quarter of one
/// in inches.
pub(crate) const fn readable(unit: Unit) -> usize {
    match unit {
        Unit::Millimetre => 4,
        Unit::Inch => 5,
    }
}

/// Most decimals of a figure. A bound is never quoted finer than 10^-6 mm: nobody measures that.
pub(crate) const fn finest(unit: Unit) -> usize {
    readable(unit) + 2
}

/// Decimals that `bound` supports, at most `most`.
pub(crate) fn supported(bound: f64, most: usize) -> usize {
    let mut step = 1.0;
    for decimals in 0..most {
        // The factor forgives the rounding of 0.1, 0.01, ... themselves.
        if step <= bound * (1.0 + 1e-9) {
            return decimals;
        }
        step /= 10.0;
    }
    most
}

/// `figure`'s size with the digits the trade reads and its bound supports; when a `limit` is given,
/// enough of them to tell it apart from that, as long as the bound supports them. Without unit.
#[must_use]
pub fn figure_text(figure: Figure, limit: Option<f64>, unit: Unit) -> String {
    let most = supported(figure.bound, finest(unit));
    let mut decimals = readable(unit).min(most);
    let show = |x: f64, decimals: usize| format!("{:.decimals$}", x + 0.0);
    if let Some(limit) = limit {
        while decimals < most && show(figure.size, decimals) == show(limit, decimals) && figure.size > limit {
            decimals += 1;
        }
    }
    show(figure.size, decimals)
}

/// A length the user stated: as short as it can be said, at most six decimals. Without unit.
#[must_use]
pub fn stated_text(length: f64) -> String {
    let text = format!("{:.6}", length + 0.0);
    text.trim_end_matches('0').trim_end_matches('.').to_owned()
}

/// A place as a program would say it: `X12.500 Y3.000`.
#[must_use]
pub fn point_text(p: Point, unit: Unit) -> String {
    let digits = decimals(unit);
    // Minus zero would read -0.000.
    let scale = 10f64.powi(i32::try_from(digits).unwrap_or(0));
    let clean = |v: f64| if (v * scale).round().abs() < 0.5 { 0.0 } else { v };
    format!("X{:.digits$} Y{:.digits$}", clean(p.x), clean(p.y))
}

/// An angle in degrees, from radians, without needless digits.
pub(super) fn angle_text(radians: f64) -> String {
    let degrees = radians.to_degrees();
    let nearest = degrees.round();
    if (degrees - nearest).abs() < 5e-4 {
        format!("{nearest:.0} degrees")
    } else if degrees.abs() < 1.0 {
        format!("{degrees:.3} degrees")
    } else {
        format!("{degrees:.1} degrees")
    }
}

/// The same rounded down, for a greatest allowed angle.
pub(super) fn angle_text_down(radians: f64) -> String {
    let degrees = radians.to_degrees();
    let scale = if degrees.abs() < 1.0 { 1000.0 } else { 10.0 };
    angle_text(((degrees * scale + 1e-6).floor() / scale).to_radians())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lengths_show_micrometres_and_ten_thousandths_of_an_inch() {
        assert_eq!(length_text(0.31, Unit::Millimetre), "0.310 mm");
        assert_eq!(length_text(0.31, Unit::Inch), "0.3100 in");
        assert_eq!(length_text(0.0, Unit::Millimetre), "0.000 mm");
        assert_eq!(length_text(12345.6789, Unit::Millimetre), "12345.679 mm");
    }

    #[test]
    fn a_small_length_keeps_two_digits_and_a_tiny_one_turns_to_powers_of_ten() {
        assert_eq!(length_text(0.000_23, Unit::Millimetre), "0.00023 mm");
        assert_eq!(length_text(0.0075, Unit::Millimetre), "0.0075 mm");
        assert_eq!(length_text(1.5e-10, Unit::Millimetre), "1.5e-10 mm");
    }

    #[test]
    fn numbers_that_are_none_say_so() {
        assert_eq!(number_text(f64::NAN, Unit::Millimetre), "unknown");
        assert_eq!(number_text(f64::INFINITY, Unit::Millimetre), "infinite");
        assert_eq!(number_text(1e300, Unit::Millimetre).len(), 305);
    }

    #[test]
    fn rounding_goes_to_the_safe_side_but_keeps_whole_numbers() {
        assert_eq!(length_text_down(0.241_499, Unit::Millimetre), "0.241 mm");
        assert_eq!(length_text_up(0.241_101, Unit::Millimetre), "0.242 mm");
        assert_eq!(length_text_down(2.0 - 1e-13, Unit::Millimetre), "2.000 mm");
        assert_eq!(length_text_up(2.0 + 1e-13, Unit::Millimetre), "2.000 mm");
    }

    #[test]
    fn a_place_has_no_minus_zero() {
        assert_eq!(point_text(Point::new(-1e-9, 12.5), Unit::Millimetre), "X0.000 Y12.500");
    }
}
