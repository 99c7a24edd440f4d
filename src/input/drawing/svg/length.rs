//! How long is a length of an SVG file, in user units or in a shop's unit?
//!
//! 1in = 96px = 2.54cm = 72pt = 6pc, 1Q = 1/40cm (CSS Values and Units, absolute lengths); a number
//! without a unit counts user units, and a user unit is a px where nothing scales it.

use std::str::FromStr;

use svgtypes::LengthUnit;

use crate::program::Unit;

/// A length as written.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Length {
    pub(super) number: f64,
    pub(super) unit: Measure,
}

/// What a length is counted in.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Measure {
    User,
    In,
    Cm,
    Mm,
    Q,
    Pt,
    Pc,
    Percent,
}

/// Why a text is no length.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum LengthError {
    NotANumber,
    FontRelative,
}

impl FromStr for Length {
    type Err = LengthError;

    fn from_str(text: &str) -> Result<Self, LengthError> {
        let lower = text.trim().to_ascii_lowercase();
        let (number, is_q) = match lower.strip_suffix('q') {
            Some(rest) => (rest, true),
            None => (lower.as_str(), false),
        };
        let length = svgtypes::Length::from_str(number).map_err(|_| LengthError::NotANumber)?;
        let unit = match length.unit {
            LengthUnit::None if is_q => Measure::Q,
            _ if is_q => return Err(LengthError::NotANumber),
            LengthUnit::None | LengthUnit::Px => Measure::User,
            LengthUnit::In => Measure::In,
            LengthUnit::Cm => Measure::Cm,
            LengthUnit::Mm => Measure::Mm,
            LengthUnit::Pt => Measure::Pt,
            LengthUnit::Pc => Measure::Pc,
            LengthUnit::Percent => Measure::Percent,
            LengthUnit::Em | LengthUnit::Ex => return Err(LengthError::FontRelative),
        };
        Ok(Self { number: length.number, unit })
    }
}

impl Length {
    /// The shop's unit in which it speaks: `None` for user units, px and shares.
    pub(super) const fn physical(&self) -> Option<Unit> {
        match self.unit {
            Measure::Mm | Measure::Cm | Measure::Q => Some(Unit::Millimetre),
            Measure::In | Measure::Pt | Measure::Pc => Some(Unit::Inch),
            Measure::User | Measure::Percent => None,
        }
    }

    /// In millimetres or inches, a px being 1/96 in; `None` for a share.
    pub(super) fn in_unit(&self, unit: Unit) -> Option<f64> {
        let (own, factor) = match self.unit {
            Measure::Mm => (Unit::Millimetre, 1.0),
            Measure::Cm => (Unit::Millimetre, 10.0),
            Measure::Q => (Unit::Millimetre, 0.25),
            Measure::In => (Unit::Inch, 1.0),
            Measure::Pt => (Unit::Inch, 1.0 / 72.0),
            Measure::Pc => (Unit::Inch, 1.0 / 6.0),
            Measure::User => (Unit::Inch, 1.0 / PX_PER_INCH),
            Measure::Percent => return None,
        };
        let length = self.number * factor;
        Some(if own == unit { length } else { length * own.in_mm() / unit.in_mm() })
    }

    /// In user units; a share is one of `whole`, `None` where that is not known.
    pub(super) fn in_user_units(&self, whole: Option<f64>) -> Option<f64> {
        match self.unit {
            Measure::User => Some(self.number),
            Measure::Percent => whole.map(|w| w * self.number / 100.0),
            _ => self.in_unit(Unit::Inch).map(|inches| inches * PX_PER_INCH),
        }
    }
}

/// Pixels in an inch (CSS Values and Units).
pub(super) const PX_PER_INCH: f64 = 96.0;

#[cfg(test)]
mod tests {
    use super::*;

    /// CSS Values and Units, absolute lengths: 1px = 0.264583333333 mm, 1pt = 0.352777777778 mm.
    #[test]
    fn every_absolute_unit_has_its_length_in_mm() {
        for (text, mm) in [
            ("1in", 25.4),
            ("2.54cm", 25.4),
            ("96px", 25.4),
            ("96", 25.4),
            ("72pt", 25.4),
            ("6pc", 25.4),
            ("40Q", 10.0),
            ("1px", 0.264_583_333_333),
            ("1pt", 0.352_777_777_778),
            ("1e1mm", 10.0),
            (" 12.5MM ", 12.5),
        ] {
            let found = text.parse::<Length>().unwrap().in_unit(Unit::Millimetre).unwrap();
            assert!((found - mm).abs() < 1e-11, "{text}: {found}");
        }
        let one = "1mm".parse::<Length>().unwrap().in_user_units(None).unwrap();
        assert!((one - 3.779_527_559_06).abs() < 1e-10, "{one}");
    }

    #[test]
    fn text_that_is_no_length_is_refused() {
        for text in ["", "mm", "1 2", "12parsec", "1e999", "NaN", "inf", "1e", "q", "1mmq", "--3"] {
            assert_eq!(text.parse::<Length>(), Err(LengthError::NotANumber), "{text}");
        }
        assert_eq!("2em".parse::<Length>(), Err(LengthError::FontRelative));
    }
}
