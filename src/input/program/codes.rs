//! What each G and M code does to the cutter's path, and with which others it may not share a block.
//! Codes and groups are those of NISTIR 6556, 3.4, table 4; codes from outside it are marked as common
//! practice. A code that could change the path in a way not followed here is refused, never skipped.

use crate::geometry::Turn;
use crate::program::{Plane, Unit};

/// How the cutter moves.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Mode {
    /// G0.
    Rapid,
    /// G1.
    Line,
    /// G2, G3.
    Arc(Turn),
}

/// What coordinates are measured from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Distance {
    /// The program's zero.
    Absolute,
    /// Where the move starts.
    Incremental,
}

/// What a G code does.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Act {
    /// Sets the motion.
    Motion(Mode),
    /// G80: no motion until the next.
    Cancel,
    /// Sets the plane of arcs.
    Plane(Plane),
    /// Sets the unit.
    Units(Unit),
    /// Sets what X, Y, Z are measured from.
    Distance(Distance),
    /// Sets what I, J, K are measured from.
    Centers(Distance),
    /// Chooses a work offset.
    WorkOffset,
    /// G28, G30: through a point to a fixed point of the machine.
    Home,
    /// G53: coordinates of the machine.
    MachineFrame,
    /// G4.
    Dwell,
    /// G92: names the current point.
    SetPosition,
    /// G52: shifts the zero.
    LocalShift,
    /// Nothing that moves the path.
    Nothing,
    /// Refused: what it is, and what to do.
    Refuse(&'static str, &'static str),
    /// Not known.
    Unknown,
}

const COMPENSATION: Act = Act::Refuse(
    "cutter radius compensation",
    "post the program with the path of the cutter's center: compensation is not followed yet",
);
const CYCLE: Act =
    Act::Refuse("a canned cycle", "post the cycle as single moves (G0, G1): cycles are not followed yet");
const FRAME: Act = Act::Refuse(
    "a turned, scaled, mirrored or polar frame",
    "post the program without it, in plain X and Y: such frames are not followed yet",
);
const OFFSETS: Act = Act::Refuse(
    "a change of zero by the program",
    "post the program in one work offset, with nothing shifted in it: shifts are not followed yet",
);
const CALL: Act = Act::Refuse(
    "a macro call",
    "post the program with the macro's moves written out: subprograms and macros are not followed yet",
);
const CURVE: Act = Act::Refuse("a curve that is no line and no arc", "post the curve as lines and arcs");
const SKIP: Act = Act::Refuse(
    "a probing or measuring move",
    "take it out or post it as a plain move: where it stops is known only on the machine",
);
const THREAD: Act = Act::Refuse("thread cutting", "check the threads apart: they are not followed yet");
const OTHER_UNIT: Act = Act::Refuse(
    "a code for inch or millimetre on some controls and a turning cycle on others",
    "write G20 for inch or G21 for millimetre; turning cycles are not followed yet",
);

/// Modal group and effect of a G code, given as ten times its number. Group 0 holds the codes that
/// act in their block only.
pub(super) const fn preparatory(tenths: u16) -> (u8, Act) {
    match tenths {
        0 => (1, Act::Motion(Mode::Rapid)),
        10 => (1, Act::Motion(Mode::Line)),
        20 => (1, Act::Motion(Mode::Arc(Turn::Right))),
        30 => (1, Act::Motion(Mode::Arc(Turn::Left))),
        40 => (0, Act::Dwell),
        50 | 51 | 52 | 61 | 62 => (1, CURVE),
        // G9 exact stop in its block; G8, G5.x, G7 differ between controls and stay unknown.
        90 => (20, Act::Nothing),
        100 => (0, OFFSETS),
        // G15, G69, G50, G40.1, G67 end what was refused where it began (common practice).
        150 => (17, Act::Nothing),
        160 => (17, FRAME),
        170 => (2, Act::Plane(Plane::Xy)),
        180 => (2, Act::Plane(Plane::Zx)),
        190 => (2, Act::Plane(Plane::Yz)),
        200 => (6, Act::Units(Unit::Inch)),
        210 => (6, Act::Units(Unit::Millimetre)),
        280 | 300 => (0, Act::Home),
        310 | 382..=385 => (1, SKIP),
        320 | 330 | 760 => (1, THREAD),
        400 => (7, Act::Nothing),
        410 | 411 | 420 | 421 => (7, COMPENSATION),
        430 | 440 | 490 => (8, Act::Nothing),
        500 | 501 => (11, Act::Nothing),
        510 | 511 | 680 | 681 => (11, FRAME),
        520 => (0, Act::LocalShift),
        530 => (0, Act::MachineFrame),
        540..=599 => (12, Act::WorkOffset),
        610 | 611 | 640 => (13, Act::Nothing),
        650 | 660 => (0, CALL),
        670 => (18, Act::Nothing),
        690 => (16, Act::Nothing),
        700 | 710 => (6, OTHER_UNIT),
        720..=759 | 810..=899 => (1, CYCLE),
        // In group 1 of the report; here it shares a block with G0, as in most safe-start lines (common
        // practice), since there is no cycle that it could end.
        800 => (22, Act::Cancel),
        900 => (3, Act::Distance(Distance::Absolute)),
        910 => (3, Act::Distance(Distance::Incremental)),
        901 => (4, Act::Centers(Distance::Absolute)),
        911 => (4, Act::Centers(Distance::Incremental)),
        920 => (0, Act::SetPosition),
        921..=923 => (0, OFFSETS),
        930 | 940 | 950 => (5, Act::Nothing),
        960 | 970 => (19, Act::Nothing),
        980 | 990 => (10, Act::Nothing),
        _ => (21, Act::Unknown),
    }
}

/// What an M code does.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Function {
    /// M2, M30: the program ends.
    End,
    /// M99: back to the caller or to the start.
    Return,
    /// M6.
    ToolChange,
    /// Nothing that moves the path: stop, spindle, coolant, overrides, clamps.
    Nothing,
    /// M97, M98: a subprogram.
    Call,
    /// Not known: the machine maker's.
    Unknown,
}

/// Modal group and effect of an M code. Groups as NISTIR 6556, table 4, but that M7 and M8 may share
/// a block, since both coolants may run at once.
pub(super) const fn miscellaneous(code: u16) -> (u8, Function) {
    match code {
        2 | 30 => (4, Function::End),
        0 | 1 | 60 => (4, Function::Nothing),
        99 => (4, Function::Return),
        6 => (6, Function::ToolChange),
        3..=5 | 13 | 14 | 19 => (7, Function::Nothing),
        7 | 9 => (8, Function::Nothing),
        8 => (10, Function::Nothing),
        48 | 49 => (9, Function::Nothing),
        10 | 11 | 29 | 88 | 89 => (11, Function::Nothing),
        97 | 98 => (12, Function::Call),
        _ => (13, Function::Unknown),
    }
}

/// A code as a machinist writes it: `G54.1`.
pub(super) fn name(letter: char, tenths: u16) -> String {
    let (whole, tenth) = (tenths / 10, tenths % 10);
    if tenth == 0 { format!("{letter}{whole}") } else { format!("{letter}{whole}.{tenth}") }
}
