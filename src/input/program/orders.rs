//! What the codes of one block order together, and whether they may stand together: no two of one
//! modal group (NISTIR 6556, 3.3.5 and 3.4), and at most one that takes the axis words for itself.

use super::codes::{self, Act, Distance, Function, Mode};
use super::faults::Fault;
use super::words::{Code, Words};
use crate::program::{Plane, Unit};

/// The orders of one block, to be carried out in the order of NISTIR 6556, 3.8, table 8, whatever
/// their order of writing.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Orders {
    /// G0 to G3.
    pub motion: Option<Mode>,
    /// G80.
    pub cancel: bool,
    /// G17, G18, G19.
    pub plane: Option<Plane>,
    /// G20, G21.
    pub units: Option<(Unit, Code)>,
    /// G90, G91.
    pub distance: Option<Distance>,
    /// G90.1, G91.1.
    pub centers: Option<Distance>,
    /// G54 and its like.
    pub offset: Option<Code>,
    /// G4, G28, G30, G52, G53, G92.
    pub local: Option<(Act, Code)>,
    /// A code whose block may have a P word of its own.
    pub takes_p: bool,
    /// M6.
    pub tool_change: Option<Code>,
    /// M2, M30, M99.
    pub end: Option<(Function, Code)>,
}

impl Orders {
    /// What the codes of `words` order.
    ///
    /// # Errors
    /// Two codes of one group, or a code that is refused or not known.
    pub fn of(words: &Words) -> Result<Self, Fault> {
        let mut orders = Self::default();
        let mut groups = 0;
        for &code in words.g.all() {
            let (group, act) = codes::preparatory(code.tenths);
            one_of_group(words, 'G', &mut groups, group, code)?;
            orders.take(act, code, words)?;
        }
        let mut groups = 0;
        for &code in words.m.all() {
            let (group, function) = codes::miscellaneous(code.tenths / 10);
            if function != Function::Unknown {
                one_of_group(words, 'M', &mut groups, group, code)?;
            }
            orders.function(function, code)?;
        }
        Ok(orders)
    }

    fn take(&mut self, act: Act, code: Code, words: &Words) -> Result<(), Fault> {
        match act {
            Act::Motion(mode) => self.motion = Some(mode),
            Act::Cancel => self.cancel = true,
            Act::Plane(plane) => self.plane = Some(plane),
            Act::Units(unit) => self.units = Some((unit, code)),
            Act::Distance(distance) => self.distance = Some(distance),
            Act::Centers(centers) => self.centers = Some(centers),
            Act::WorkOffset => {
                self.takes_p |= code.tenths == 541;
                self.offset = Some(code);
            }
            Act::Home | Act::MachineFrame | Act::Dwell | Act::SetPosition | Act::LocalShift => {
                self.takes_p |= act == Act::Dwell;
                self.local = Some((act, code));
            }
            Act::Nothing if matches!(code.tenths, 150 | 500 | 501 | 690) && words.any(super::AXES) => {
                return Err(refusal(
                    code,
                    "with axis words",
                    "write the code in a block of its own, without axis words",
                ));
            }
            Act::Nothing => self.takes_p |= matches!(code.tenths, 610 | 611 | 640),
            Act::Refuse(what, help) => return Err(refusal(code, &format!("is {what}"), help)),
            Act::Unknown => {
                return Err(refusal(
                    code,
                    "is not known here",
                    "if it neither moves an axis nor changes the path, put it in parentheses; \
                     else post the program without it",
                ));
            }
        }
        Ok(())
    }

    fn function(&mut self, function: Function, code: Code) -> Result<(), Fault> {
        match function {
            Function::End | Function::Return => self.end = Some((function, code)),
            Function::ToolChange => self.tool_change = Some(code),
            Function::Nothing | Function::Unknown => {}
            Function::Call => {
                return Err(Fault::new(
                    code.span,
                    format!("{} calls a subprogram", codes::name('M', code.tenths)),
                    "",
                    "post the program with the subprogram's moves written out: calls are not followed yet",
                ));
            }
        }
        Ok(())
    }
}

fn refusal(code: Code, what: &str, help: &str) -> Fault {
    Fault::new(code.span, format!("{} {what}", codes::name('G', code.tenths)), "", help)
}

/// Notes the group of `code`, which must not be among those of the codes before it.
fn one_of_group(words: &Words, letter: char, groups: &mut u32, group: u8, code: Code) -> Result<(), Fault> {
    let bit = 1_u32.wrapping_shl(u32::from(group));
    let taken = *groups & bit != 0;
    *groups |= bit;
    if taken { Err(conflict(words, letter, group, code)) } else { Ok(()) }
}

#[cold]
fn conflict(words: &Words, letter: char, group: u8, code: Code) -> Fault {
    let (all, group_of): (_, fn(u16) -> u8) = if letter == 'G' {
        (words.g.all(), |tenths| codes::preparatory(tenths).0)
    } else {
        (words.m.all(), |tenths| codes::miscellaneous(tenths / 10).0)
    };
    let first = all.iter().find(|c| group_of(c.tenths) == group).unwrap_or(&code);
    let (first, second) = (codes::name(letter, first.tenths), codes::name(letter, code.tenths));
    Fault::new(
        code.span,
        format!("{first} and {second} in one block"),
        "at most one code of a modal group (NISTIR 6556, 3.4)",
        "take out the wrong one, or write two blocks",
    )
}
