//! In which unit and from which zero are the lengths of a block measured? The unit that a block states
//! acts on its own lengths; a program may change it, and all is kept in one unit. The zero is the one work
//! offset that the program names.

use super::codes;
use super::faults::Fault;
use super::interpret::Interpreter;
use super::words::{Code, Words};
use crate::program::Unit;
use crate::tolerance::MM_PER_INCH;

/// How the unit of the block was settled.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Units {
    /// Not said and not yet needed.
    Open,
    /// Not said, and lengths were read in this one.
    Assumed(Unit),
    /// Said by G20 or G21.
    Stated(Unit),
}

impl Interpreter<'_> {
    /// Unit of the program given back, and whether the program said its own.
    pub fn unit(&self) -> (Unit, bool) {
        (self.out.or(self.options.target).unwrap_or(Unit::Millimetre), self.unit_stated)
    }

    /// G20, G21.
    ///
    /// # Errors
    /// When lengths have been read in the other unit before.
    pub(super) fn state_unit(&mut self, unit: Unit, code: Code) -> Result<(), Fault> {
        if let Units::Assumed(assumed) = self.units
            && assumed != unit
        {
            return Err(Fault::new(
                code.span,
                format!(
                    "{} comes after lengths that were read in {}",
                    codes::name('G', code.tenths),
                    assumed.sign()
                ),
                "the unit before the first length",
                "write G20 (inch) or G21 (mm) at the start of the program, or state the unit with --units",
            ));
        }
        self.units = Units::Stated(unit);
        self.unit_stated = true;
        self.out = self.out.or(self.options.target).or(Some(unit));
        Ok(())
    }

    /// Unit of the lengths of this block.
    pub(super) fn block_unit(&mut self) -> Unit {
        let unit = match self.units {
            Units::Stated(unit) | Units::Assumed(unit) => unit,
            Units::Open => {
                let unit = self.options.unit.unwrap_or(Unit::Millimetre);
                self.units = Units::Assumed(unit);
                unit
            }
        };
        self.out = self.out.or(self.options.target).or(Some(unit));
        unit
    }

    /// A length of this block in the unit of what is kept; exact where both are one.
    pub(super) fn length(&mut self, value: f64) -> f64 {
        match (self.block_unit(), self.unit().0) {
            (Unit::Inch, Unit::Millimetre) => value * MM_PER_INCH,
            (Unit::Millimetre, Unit::Inch) => value / MM_PER_INCH,
            _ => value,
        }
    }

    /// G54 and its like: one in the whole program, for the distance of two is not in it.
    ///
    /// # Errors
    /// At the second.
    pub(super) fn work_offset(&mut self, code: Code, words: &Words) -> Result<(), Fault> {
        #[allow(clippy::cast_possible_truncation, reason = "saturates, and is only compared")]
        let number = if code.tenths == 541 { words.get(b'P').unwrap_or(0.0) as i64 } else { 0 };
        let chosen = (code.tenths, number);
        let before = self.offset.or(self.placed.then_some((540, 0)));
        if before.is_some_and(|b| b != chosen) {
            let first = before.map_or(540, |b| b.0);
            return Err(Fault::new(
                code.span,
                format!(
                    "{} after coordinates in {}: how far apart the two zeros lie is set on the machine",
                    codes::name('G', code.tenths),
                    codes::name('G', first)
                ),
                "one work offset in the whole program",
                "check each set-up in a file of its own",
            ));
        }
        self.offset = Some(chosen);
        Ok(())
    }
}
