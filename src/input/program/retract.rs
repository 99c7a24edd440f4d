//! Moves to fixed points of the machine: G28, G30, and G53. Where these points lie the program does
//! not say, so a move there can be judged only when it goes straight up: `G91 G28 Z0` sweeps nothing
//! new, and Z is unknown afterwards. X and Y may follow once Z is up. A bare G28 and `G91 G28 X0 Y0 Z0`
//! send all axes together on a course of which only its start is known: taken, with a warning, where the
//! tool stands above the end of every feed move, as at the end of a program. No cut may begin at
//! the fixed point. Anything else is refused. That the machine's Z zero is the top of its travel is common
//! practice, no single source; a warning says so.

use super::codes::{self, Distance};
use super::faults::{Fault, Line, Note};
use super::interpret::Interpreter;
use super::position::LETTERS;
use super::words::{Code, Words, bits};
use crate::program::MoveKind;

impl Interpreter<'_> {
    /// G28, G30.
    ///
    /// # Errors
    /// When it moves X or Y before Z is up, or all axes from where the tool may still be in the part.
    pub(super) fn home(&mut self, line: Line<'_>, words: &Words, code: Code) -> Result<(), Fault> {
        let plan = words.any(bits(b"XY"));
        let height = words.any(bits(b"Z"));
        let stays = self.stays(words);
        if !(plan || height) || plan && height && stays {
            return self.home_together(line, words, code);
        }
        if plan && (!self.position.retracted || height) {
            return Err(unclear(words, code));
        }
        let says_z = self.moves.says_z;
        let through = if stays { [None; 3] } else { self.target(line, words)? };
        // The Z of a return is no height at which the program works.
        self.moves.says_z = says_z;
        if through.iter().any(Option::is_some) {
            self.travel(line, words, through, MoveKind::Rapid)?;
        }
        self.at_fixed_point(line, words, code);
        Ok(())
    }

    /// A return of all axes at once.
    fn home_together(&mut self, line: Line<'_>, words: &Words, code: Code) -> Result<(), Fault> {
        let position = self.position;
        let clear = position.retracted
            || position.knows_height() && self.moves.all_end_below(position.point().z)
            || !self.moves.says_z;
        if !clear {
            return Err(Fault::new(
                words.extent(),
                format!(
                    "{} leaves for a point of the machine from cutting depth",
                    codes::name('G', code.tenths)
                ),
                "a retract of Z before it",
                "retract first, with G0 Z above the part or G91 G28 Z0 in a block of its own",
            ));
        }
        self.position.retract();
        self.position.forget_plan();
        self.faults.note(Note::HomeTogether(code.tenths), line, code.span, || {
            let name = codes::name('G', code.tenths);
            (
                format!("{name} sends all axes to a fixed point of the machine: its course is not judged"),
                "make sure that nothing stands in the way, or retract first: G91 G28 Z0, then G28 X0 Y0",
            )
        });
        Ok(())
    }

    /// Does the intermediate point of a return coincide with the current one?
    fn stays(&self, words: &Words) -> bool {
        let zero = LETTERS.iter().all(|&l| words.get(l).is_none_or(|v| v.abs() <= 0.0));
        self.distance == Distance::Incremental && zero
    }

    /// G53.
    ///
    /// # Errors
    /// When it does anything but send Z to the machine's zero, or X and Y after that.
    pub(super) fn machine_frame(&mut self, line: Line<'_>, words: &Words, code: Code) -> Result<(), Fault> {
        let plan = words.any(bits(b"XY"));
        let top = words.get(b'Z').is_some_and(|z| z.abs() <= 0.0);
        let away = words.get(b'Z').is_some() && !top;
        if away || plan && !self.position.retracted || !plan && !top {
            return Err(unclear(words, code));
        }
        self.at_fixed_point(line, words, code);
        Ok(())
    }

    fn at_fixed_point(&mut self, line: Line<'_>, words: &Words, code: Code) {
        if words.any(bits(b"Z")) {
            self.position.retract();
        }
        if words.any(bits(b"XY")) {
            self.position.forget_plan();
            self.position.retracted = true;
        }
        self.faults.note(Note::Home(code.tenths), line, code.span, || {
            let name = codes::name('G', code.tenths);
            let found =
                format!("{name} is taken as a retract to the top of the machine's travel: not judged");
            (found, "make sure that this point of the machine lies above part and clamps")
        });
    }
}

fn unclear(words: &Words, code: Code) -> Fault {
    let name = codes::name('G', code.tenths);
    let expected = match code.tenths {
        530 => "G53 G0 Z0 first, then X and Y",
        _ => "G91 G28 Z0 first, then X and Y",
    };
    Fault::new(
        words.extent(),
        format!("{name} moves to a point of the machine that the program does not say"),
        expected,
        "retract Z alone in a block of its own; for any other move write the point in the program's own frame",
    )
}

/// A cut from a point that only the machine knows.
#[cold]
pub(super) fn from_fixed_point(words: &Words) -> Fault {
    Fault::new(
        words.extent(),
        "this move starts at a fixed point of the machine, of which the program does not say where it is",
        "G90 G0 with X and Y before it",
        "write a rapid to the start of the cut into the program",
    )
}
