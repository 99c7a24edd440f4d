//! From words to moves: the state a control keeps from block to block, and the order in which it
//! carries out what one block says (NISTIR 6556, 3.8, table 8). Units, plane, offset and distance mode
//! therefore act before the motion of their own block.
//!
//! ```text
//!   T, M6 -> G20/G21 -> G17.. -> G54.. -> G90/G91 -> G28, G53, G92 -> motion -> M2, M30
//! ```
//!
//! After a block with an error the position counts as unknown and no more moves are kept: reading goes
//! on only to find further errors, and none that the first one causes.

use super::codes::{self, Act, Distance, Function, Mode};
use super::faults::{Fault, Faults, Line, Note, Span};
use super::frame::Units;
use super::moves::Moves;
use super::orders::Orders;
use super::position::{LETTERS, Position};
use super::retract::from_fixed_point;
use super::words::{Code, Words, bits};
use super::{AXES, ProgramOptions};
use crate::program::{Motion, MoveKind, Plane, Unit};
use crate::tolerance::GREATEST_COORDINATE;

/// Where a coordinate is commanded, per axis, in the unit of the program given back.
pub(super) type Target = [Option<f64>; 3];

/// A control that reads a program.
#[derive(Debug)]
pub(super) struct Interpreter<'a> {
    pub(super) options: &'a ProgramOptions,
    pub(super) faults: Faults<'a>,
    pub(super) moves: Moves,
    pub(super) position: Position,
    pub(super) plane: Plane,
    pub(super) centers: Distance,
    pub(super) units: Units,
    pub(super) unit_stated: bool,
    /// Unit of everything kept.
    pub(super) out: Option<Unit>,
    mode: Option<Mode>,
    pub(super) distance: Distance,
    /// The work offset in force: G code and P word.
    pub(super) offset: Option<(u16, i64)>,
    pub(super) placed: bool,
    ended: bool,
}

impl<'a> Interpreter<'a> {
    /// A control as it is when switched on, reading `file`.
    pub fn new(file: &'a str, options: &'a ProgramOptions) -> Self {
        Self {
            options,
            faults: Faults::new(file),
            moves: Moves::default(),
            position: Position::default(),
            plane: Plane::Xy,
            centers: Distance::Incremental,
            units: Units::Open,
            unit_stated: false,
            out: None,
            mode: None,
            distance: Distance::Absolute,
            offset: None,
            placed: false,
            ended: false,
        }
    }

    /// Has M2, M30 or M99 been carried out?
    pub const fn ended(&self) -> bool {
        self.ended
    }

    /// Has the program placed anything yet: a coordinate, a move?
    pub const fn placed(&self) -> bool {
        self.placed
    }

    /// Takes an error of a block; what follows starts from an unknown position.
    pub fn refuse(&mut self, line: Line<'_>, fault: Fault) {
        self.faults.error(line, fault);
        self.position.forget();
    }

    /// Carries out one block.
    ///
    /// # Errors
    /// The first thing in it that cannot be carried out.
    pub fn block(&mut self, line: Line<'_>, words: &Words) -> Result<(), Fault> {
        let orders = Orders::of(words)?;
        self.tools(line, words, &orders)?;
        self.modes(words, &orders)?;
        self.other_axes(line, words)?;
        let arc = self.act(line, words, &orders)?;
        self.leftovers(line, words, &orders, arc)?;
        self.unknown_functions(line, words);
        if let Some((function, code)) = orders.end {
            self.end(line, function, code);
        }
        Ok(())
    }

    fn tools(&mut self, line: Line<'_>, words: &Words, orders: &Orders) -> Result<(), Fault> {
        if let Some(value) = words.get(b'T') {
            let tool = whole(value, 99_999_999.0).and_then(|t| u32::try_from(t).ok());
            let tool = tool.ok_or_else(|| {
                Fault::new(words.span(b'T'), "this is no tool number", "a whole number", "correct the T word")
            })?;
            self.moves.select(tool);
        }
        if let Some(code) = orders.tool_change {
            if self.moves.selected.is_none() {
                self.faults.note(Note::NoTool, line, code.span, || {
                    let found = "M6 changes the tool, but no T word says to which".to_owned();
                    (
                        found,
                        "write the T word before M6 (was another letter meant?), or give one cutter for all",
                    )
                });
            }
            self.moves.change();
        }
        Ok(())
    }

    /// Sets what holds from this block on.
    fn modes(&mut self, words: &Words, orders: &Orders) -> Result<(), Fault> {
        if let Some((unit, code)) = orders.units {
            self.state_unit(unit, code)?;
        }
        self.plane = orders.plane.unwrap_or(self.plane);
        if let Some(code) = orders.offset {
            self.work_offset(code, words)?;
        }
        self.distance = orders.distance.unwrap_or(self.distance);
        self.centers = orders.centers.unwrap_or(self.centers);
        if orders.cancel {
            self.mode = None;
        }
        self.mode = orders.motion.or(self.mode);
        Ok(())
    }

    /// Axes that are not followed: rotary ones must stay at zero, secondary ones away.
    fn other_axes(&mut self, line: Line<'_>, words: &Words) -> Result<(), Fault> {
        if let Some(letter) =
            words.first(bits(b"UVW")).filter(|_| words.g.all().iter().all(|c| c.tenths != 40))
        {
            return Err(Fault::new(
                words.span(letter),
                format!("a {} word: an axis that is not followed", char::from(letter)),
                "X, Y and Z",
                "post the program with X, Y, Z alone: increments and secondary axes are not followed yet",
            ));
        }
        for letter in *b"ABC" {
            let Some(value) = words.get(letter) else { continue };
            let span = words.span(letter);
            let shown = char::from(letter);
            if value.abs() > 0.0 {
                return Err(Fault::new(
                    span,
                    format!("the rotary axis {shown} turns"),
                    format!("{shown}0, or no {shown} word"),
                    "check each position of the rotary axis in a file of its own, without the rotary word",
                ));
            }
            self.faults.note(Note::Rotary(letter), line, span, || {
                (format!("the rotary axis {shown} is taken as standing at 0"), "make sure that it does")
            });
        }
        Ok(())
    }

    /// The block's own order for its axis words, or motion. True when it was an arc.
    fn act(&mut self, line: Line<'_>, words: &Words, orders: &Orders) -> Result<bool, Fault> {
        match orders.local {
            Some((Act::Home, code)) => self.home(line, words, code).map(|()| false),
            Some((Act::MachineFrame, code)) => self.machine_frame(line, words, code).map(|()| false),
            Some((Act::SetPosition, code)) => self.set_position(words, code, orders).map(|()| false),
            Some((Act::LocalShift, code)) => {
                let zero =
                    words.any(AXES) && LETTERS.iter().all(|&l| words.get(l).is_none_or(|v| v.abs() <= 0.0));
                if zero && orders.motion.is_none() { Ok(false) } else { Err(shift(code, "shifts the zero")) }
            }
            Some((_, code)) if words.any(AXES) => dwell(words, code, orders).map(|()| false),
            Some(_) => Ok(false),
            None => self.motion(line, words),
        }
    }

    fn motion(&mut self, line: Line<'_>, words: &Words) -> Result<bool, Fault> {
        let arc_words = words.any(bits(b"IJKR"));
        match self.mode {
            Some(Mode::Arc(turn)) if words.any(AXES) || arc_words => {
                self.circular(line, words, turn)?;
                Ok(true)
            }
            _ if !words.any(AXES) => Ok(false),
            Some(Mode::Line) => self.straight(line, words, MoveKind::Feed).map(|()| false),
            Some(_) => self.straight(line, words, MoveKind::Rapid).map(|()| false),
            None if self.faults.refused() => Ok(false),
            None => Err(Fault::new(
                words.extent(),
                "axis words, but no code says how to move there",
                "G0, G1, G2 or G3 in this block or before it (G80 ends them)",
                "write the G code into this block",
            )),
        }
    }

    /// Where the axis words of the block lead.
    pub(super) fn target(&mut self, line: Line<'_>, words: &Words) -> Result<Target, Fault> {
        let mut target = [None; 3];
        for (axis, (slot, letter)) in target.iter_mut().zip(LETTERS).enumerate() {
            let Some(value) = words.get(letter) else { continue };
            let span = words.span(letter);
            let mut to = self.bounded(value, span)?;
            if self.distance == Distance::Incremental {
                if self.position.away && axis < 2 {
                    return Err(from_fixed_point(words));
                }
                self.assume(line, span, axis);
                if !self.position.known.get(axis).copied().unwrap_or(false) {
                    continue;
                }
                to += self.position.at.get(axis).copied().unwrap_or(0.0);
            }
            *slot = Some(within(to, span)?);
        }
        self.placed = true;
        self.moves.says_z |= words.get(b'Z').is_some();
        Ok(target)
    }

    /// A length of the block, if it is one that can be computed with.
    pub(super) fn bounded(&mut self, value: f64, span: Span) -> Result<f64, Fault> {
        within(value, span)?;
        Ok(self.length(value))
    }

    /// Takes every axis whose position the program has not said as standing at 0, and says so.
    ///
    /// # Errors
    /// When X or Y are at a fixed point of the machine: 0 would be a wrong guess.
    pub(super) fn assume_start(&mut self, line: Line<'_>, words: &Words) -> Result<(), Fault> {
        if self.position.away {
            return Err(from_fixed_point(words));
        }
        if self.position.known.contains(&false) {
            (0..3).for_each(|axis| self.assume(line, words.extent(), axis));
        }
        Ok(())
    }

    /// Takes an axis as standing at 0 where the program has not said its position, and says so.
    fn assume(&mut self, line: Line<'_>, span: Span, axis: usize) {
        let Some(known) = self.position.known.get_mut(axis) else { return };
        if *known {
            return;
        }
        // After an error nothing is assumed: a wrong guess would only make errors of sound blocks.
        if self.faults.refused() {
            return;
        }
        *known = true;
        if axis == 2 {
            self.faults.note(Note::HeightAssumed, line, span, || {
                let found = "a move starts at a height the program has not said: taken as Z 0".to_owned();
                (found, "write the Z of the start into the program before this block")
            });
        } else {
            self.faults.note(Note::StartAssumed, line, span, || {
                let found = "a move starts where the program has not said: taken as X 0, Y 0".to_owned();
                (found, "write a G0 with X and Y before this block")
            });
        }
    }

    fn straight(&mut self, line: Line<'_>, words: &Words, kind: MoveKind) -> Result<(), Fault> {
        let target = self.target(line, words)?;
        self.travel(line, words, target, kind)
    }

    /// A straight move to `target`. A rapid from a point that is not known sweeps nothing but its end.
    pub(super) fn travel(
        &mut self,
        line: Line<'_>,
        words: &Words,
        target: Target,
        kind: MoveKind,
    ) -> Result<(), Fault> {
        if kind == MoveKind::Feed {
            self.assume_start(line, words)?;
        }
        let before = self.position;
        self.arrive(target);
        let after = self.position;
        if !after.knows_plan() {
            return Ok(());
        }
        let known = before.knows_plan() && (before.knows_height() || !after.knows_height());
        let start = if known { before.point() } else { after.point() };
        self.keep(line, words, Motion::Straight { start, end: after.point() }, kind)?;
        if !after.knows_height() && !self.faults.refused() {
            self.moves.last_is_blind();
        }
        Ok(())
    }

    /// The position after a move to `target`.
    pub(super) fn arrive(&mut self, target: Target) {
        let axes = self.position.at.iter_mut().zip(&mut self.position.known).zip(target);
        for ((at, known), to) in axes {
            if let Some(to) = to {
                *at = to;
                *known = true;
            }
        }
        if target[2].is_some() {
            self.position.retracted = false;
        }
        if self.position.knows_plan() {
            self.position.away = false;
        }
    }

    /// Adds a move, unless the program is refused already.
    pub(super) fn keep(
        &mut self,
        line: Line<'_>,
        words: &Words,
        motion: Motion,
        kind: MoveKind,
    ) -> Result<(), Fault> {
        if self.faults.refused() {
            return Ok(());
        }
        self.moves.push(line, motion, kind).map_err(|_| {
            Fault::new(
                words.extent(),
                "more than 4,294,967,295 moves",
                "",
                "check the program in parts, a file each",
            )
        })
    }

    /// G92 before anything is placed names the start; later it would move the zero.
    fn set_position(&mut self, words: &Words, code: Code, orders: &Orders) -> Result<(), Fault> {
        if self.placed || orders.motion.is_some() || !words.any(AXES) {
            return Err(shift(code, "shifts the zero"));
        }
        let mut target = [None; 3];
        for (slot, letter) in target.iter_mut().zip(LETTERS) {
            if let Some(value) = words.get(letter) {
                *slot = Some(self.bounded(value, words.span(letter))?);
            }
        }
        self.placed = true;
        self.arrive(target);
        Ok(())
    }

    /// Words that no code of the block has used: harmless ones are told, others refused.
    fn leftovers(&mut self, line: Line<'_>, words: &Words, orders: &Orders, arc: bool) -> Result<(), Fault> {
        if !arc && let Some(letter) = words.first(bits(b"IJKR")) {
            let shown = char::from(letter);
            return Err(Fault::new(
                words.span(letter),
                format!("a {shown} word, but the block is no arc"),
                "G2 or G3 in this block or in force",
                "write G2 or G3 if an arc is meant, else take the word out; roundings and chamfers \
                 (R, C, K on a G1) must be posted as moves",
            ));
        }
        let mut unused = bits(b"ELQ");
        if !arc && !orders.takes_p {
            unused |= bits(b"P");
        }
        for letter in *b"ELPQ" {
            if words.any(unused & bits(&[letter])) {
                self.faults.note(Note::Unused(letter), line, words.span(letter), || {
                    let found = format!("no code known here uses the {} word: left out", char::from(letter));
                    (found, "make sure that it moves no axis")
                });
            }
        }
        Ok(())
    }

    fn unknown_functions(&mut self, line: Line<'_>, words: &Words) {
        for &code in words.m.all() {
            let number = code.tenths / 10;
            if codes::miscellaneous(number).1 == Function::Unknown {
                self.faults.note(Note::UnknownM(number), line, code.span, || {
                    let found = format!("M{number} is a function of the machine's maker: left out");
                    (found, "make sure that it moves no axis and mirrors nothing")
                });
            }
        }
    }

    fn end(&mut self, line: Line<'_>, function: Function, code: Code) {
        self.ended = true;
        if function == Function::Return {
            self.faults.note(Note::Return, line, code.span, || {
                let found = "M99 is taken as the end of the program".to_owned();
                (found, "what follows it is not read")
            });
        }
    }
}

/// A value that is an integer to within 0.0001 (NISTIR 6556, 3.3.2.1), from 0 to `most`.
fn whole(value: f64, most: f64) -> Option<i64> {
    let rounded = value.round();
    let fits = (value - rounded).abs() <= 1e-4 && (0.0..=most).contains(&rounded);
    #[allow(clippy::cast_possible_truncation, reason = "checked to lie within bounds")]
    fits.then_some(rounded as i64)
}

/// `value`, if it is finite and no larger than coordinates may be.
pub(super) fn within(value: f64, span: Span) -> Result<f64, Fault> {
    if value.abs() <= GREATEST_COORDINATE {
        return Ok(value);
    }
    Err(Fault::new(
        span,
        "a coordinate too large to compute with",
        format!("at most {GREATEST_COORDINATE:.0} either way"),
        "correct the number: is a decimal point missing?",
    ))
}

fn shift(code: Code, what: &str) -> Fault {
    Fault::new(
        code.span,
        format!("{} {what}", codes::name('G', code.tenths)),
        "one zero in the whole program",
        "post the program in one work offset, with nothing shifted in it: shifts are not followed yet",
    )
}

/// X alone in a G4 block is a time on many controls (common practice); anything else is unclear.
fn dwell(words: &Words, code: Code, orders: &Orders) -> Result<(), Fault> {
    if words.any(bits(b"YZP")) || orders.motion.is_some() {
        return Err(Fault::new(
            code.span,
            "a dwell and axis words in one block",
            "G4 with P, or with X as its time, and nothing else that moves",
            "write the dwell and the move in two blocks",
        ));
    }
    Ok(())
}
