//! How many digits does a figure deserve?
//!
//! Never more than its bound supports (the last digit shown is not worth less than the bound), and
//! never more than the trade reads: four decimals of a millimetre, five of an inch. One exception: a
//! figure that would read the same as its limit gets the digits that tell the two apart, as long as
//! its bound supports them.

use crate::findings::{finest, readable, supported};
use crate::program::Unit;

pub use crate::findings::{figure_text as figure, stated_text as stated};

/// A bound, rounded up to one digit and never quoted finer than a millionth. Without unit.
pub fn bound(bound: f64, unit: Unit) -> String {
    let finest = finest(unit);
    let decimals = supported(bound, finest);
    let scale = 10f64.powi(i32::try_from(decimals).unwrap_or(0));
    let up = (bound * scale * (1.0 - 1e-9)).ceil().max(if decimals == finest { 1.0 } else { 0.0 }) / scale;
    // Rounding up may carry (0.095 to 0.10): then one digit less says the same.
    let text = format!("{up:.decimals$}");
    if decimals > 0 && text.ends_with('0') { format!("{up:.0$}", decimals - 1) } else { text }
}

/// A coordinate or a length along something: one decimal less than a figure. Without unit.
pub fn place(length: f64, unit: Unit) -> String {
    format!("{:.1$}", length + 0.0, readable(unit) - 1)
}

/// An area with about four digits that count. Without unit.
pub fn area(area: f64) -> String {
    let decimals = if area.abs() >= 1000.0 {
        1
    } else if area.abs() >= 1.0 {
        2
    } else {
        5
    };
    format!("{:.decimals$}", area + 0.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::compare::Figure;
    use crate::program::Unit::{Inch, Millimetre};

    fn fig(size: f64, bound: f64) -> Figure {
        Figure { size, bound }
    }

    #[test]
    fn a_sharp_figure_gets_what_the_trade_reads() {
        assert_eq!(figure(fig(0.31, 1e-9), None, Millimetre), "0.3100");
        assert_eq!(figure(fig(0.0122047, 1e-10), None, Inch), "0.01220");
    }

    #[test]
    fn no_digit_is_worth_less_than_the_bound() {
        assert_eq!(figure(fig(0.314_159, 0.003), None, Millimetre), "0.314");
        assert_eq!(figure(fig(0.314_159, 0.01), None, Millimetre), "0.31");
        assert_eq!(figure(fig(0.314_159, 0.2), None, Millimetre), "0.3");
        assert_eq!(figure(fig(31.4159, 20.0), None, Millimetre), "31");
        assert_eq!(figure(fig(0.3, f64::NAN), None, Millimetre), "0.3000");
    }

    #[test]
    fn a_figure_just_over_its_limit_does_not_read_like_it() {
        assert_eq!(figure(fig(0.020_003, 1e-9), Some(0.02), Millimetre), "0.020003");
        assert_eq!(figure(fig(0.020_003, 1e-4), Some(0.02), Millimetre), "0.0200");
        assert_eq!(figure(fig(0.02, 1e-9), Some(0.02), Millimetre), "0.0200");
    }

    #[test]
    fn a_bound_is_rounded_up_and_never_finer_than_a_millionth() {
        assert_eq!(bound(1e-9, Millimetre), "0.000001");
        assert_eq!(bound(0.0, Millimetre), "0.000001");
        assert_eq!(bound(1e-9, Inch), "0.0000001");
        assert_eq!(bound(0.003, Millimetre), "0.003");
        assert_eq!(bound(0.0031, Millimetre), "0.004");
        assert_eq!(bound(0.0951, Millimetre), "0.1");
        assert_eq!(bound(0.95, Millimetre), "1");
        assert_eq!(bound(2.5, Millimetre), "3");
    }

    #[test]
    fn stated_lengths_read_as_stated_and_nothing_is_minus_zero() {
        assert_eq!(stated(0.02), "0.02");
        assert_eq!(stated(10.0), "10");
        assert_eq!(stated(-0.0), "0");
        assert_eq!(place(-0.0, Millimetre), "0.000");
        assert_eq!(place(12.5, Inch), "12.5000");
    }
}
