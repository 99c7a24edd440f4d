//! What path does a program command? Reads G-code, the words of ISO 6983 as T. R. Kramer,
//! F. M. Proctor and E. Messina define them in NISTIR 6556 (National Institute of Standards and
//! Technology, 2000), with the spellings and additions that shop programs use in practice.
//!
//! ```text
//!   bytes -> lines -> words -> orders -> interpret -> moves
//!                                          |- circular (arcs)
//!                                          '- retract (G28, G53)
//! ```
//!
//! What could change the path and is not followed here (compensation, cycles, subprograms, variables,
//! shifted or turned frames) is refused at its place. What cannot change it is left out, with a warning
//! where a reader might wonder. Nothing is repaired.
//!
//! Three readings go beyond the report, since shop programs need them: a G0 or G1 without axis words
//! only sets the motion; blocks need no end mark (a warning says that the file may be cut off); text after
//! M2 or M30 is not executed, and a second program there is refused.
//!
//! **Unknown starts.** Where the cutter stands before the first move no program says. A rapid from there
//! is kept as its end point only. While X or Y is not known a rapid is not kept; while Z is not known it
//! is kept only if the program never says Z at all. A feed move from there, or an increment, starts at 0,
//! with a warning.

mod arcs;
mod circular;
mod codes;
mod faults;
mod frame;
mod interpret;
mod lines;
mod moves;
mod number;
mod orders;
mod position;
mod retract;
#[cfg(test)]
mod tests;
mod unread;
mod words;

use faults::{Fault, Line, Note};
use interpret::Interpreter;
use lines::NoText;
use words::{Content, Words, bits};

use super::{Place, Problem, Reading, Refusal};
use crate::program::{Program, Unit};

/// The letters of the axes that are followed.
const AXES: u32 = bits(b"XYZ");

/// What the user says about a program beside its text.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct ProgramOptions {
    /// Unit of a program that states none by G20 or G21.
    pub unit: Option<Unit>,
    /// Unit in which the program is to be given back; the program's own where none is named.
    pub target: Option<Unit>,
    /// Greatest difference of an arc's two radii, a length in the unit of the program given back.
    /// [`crate::tolerance::ARC_RADII_MM`] or [`crate::tolerance::ARC_RADII_INCH`] where none is named.
    pub arc_tolerance: Option<f64>,
    /// Leave out the blocks marked `/`, as with the control's block delete switch on.
    pub block_delete: bool,
}

/// Reads the program in `text`. `file` names it in messages.
///
/// Coordinates are in the unit of [`Program::unit`].
///
/// # Errors
/// Up to 20 placed errors, then warnings, when anything in the text cannot be followed, or when
/// it commands no move, or when the arc tolerance is no length.
pub fn read_iso(text: &[u8], file: &str, options: &ProgramOptions) -> Result<Reading<Program>, Refusal> {
    if let Some(tolerance) = options.arc_tolerance.filter(|t| !(0.0..f64::INFINITY).contains(t)) {
        return Err(vec![no_tolerance(file, tolerance)]);
    }
    let text = lines::screen(text).map_err(|no_text| vec![no_program(file, no_text)])?;
    let mut reader = Reader {
        control: Interpreter::new(file, options),
        begun: false,
        numbered: false,
        ended: false,
        followed: false,
    };
    let mut words = Words::default();
    for line in lines::lines(text) {
        if reader.control.faults.full() || reader.followed {
            break;
        }
        if let Err(fault) = reader.line(line, &mut words) {
            reader.control.refuse(line, fault);
        }
    }
    reader.finish(file)
}

/// Where reading stands.
struct Reader<'a> {
    control: Interpreter<'a>,
    /// A word has been read.
    begun: bool,
    /// An O word has been read.
    numbered: bool,
    /// M2, M30, M99 or the closing tape mark has been read.
    ended: bool,
    /// A second program has been found.
    followed: bool,
}

impl Reader<'_> {
    fn line(&mut self, line: Line<'_>, words: &mut Words) -> Result<(), Fault> {
        if self.ended {
            return self.after_end(line, words);
        }
        if words.read(line.text)? == Content::TapeMark {
            self.ended = self.begun;
            return Ok(());
        }
        self.remarks(line, words);
        if words.is_empty() || words.deleted.is_some() && self.control.options.block_delete {
            return Ok(());
        }
        if words.any(bits(b"O")) && (self.numbered || self.control.placed()) {
            self.followed = true;
            return Err(second_program(words));
        }
        self.begun = true;
        self.numbered |= words.any(bits(b"O"));
        let done = self.control.block(line, words);
        self.ended = self.control.ended();
        done
    }

    /// Nothing after the end is executed; a second program there must not go unnoticed.
    fn after_end(&mut self, line: Line<'_>, words: &mut Words) -> Result<(), Fault> {
        if words.read(line.text).is_ok() && words.any(AXES | bits(b"O")) {
            self.followed = true;
            return Err(second_program(words));
        }
        Ok(())
    }

    fn remarks(&mut self, line: Line<'_>, words: &Words) {
        let skipped = self.control.options.block_delete;
        let faults = &mut self.control.faults;
        if let Some(span) = words.deleted {
            faults.note(Note::BlockDelete, line, span, || {
                let what = if skipped { "left out" } else { "executed, as with the switch off" };
                (format!("a block marked / for block delete is {what}"), "check the program both ways")
            });
        }
        if let Some(span) = words.parted {
            faults.note(Note::BlankInNumber, line, span, || {
                let found = "a blank between two digits: read as one number".to_owned();
                (found, "make sure that no letter is missing there")
            });
        }
    }

    fn finish(self, file: &str) -> Result<Reading<Program>, Refusal> {
        let (unit, unit_stated) = self.control.unit();
        let options = self.control.options;
        let Interpreter { mut faults, moves, .. } = self.control;
        if !moves.says_z {
            faults.withdraw(Note::HeightAssumed);
        }
        if faults.refused() {
            return Err(faults.into_refusal());
        }
        let (program, left_out) = moves.finish(file, unit, unit_stated);
        if program.moves.is_empty() {
            faults.error_of_file(
                "no move in this program that can be judged",
                "G0, G1, G2 or G3 to a point whose X and Y are both named, and Z where the program names it at all",
                "check that this is the right file and that its moves are not all in comments",
            );
            return Err(faults.into_refusal());
        }
        let mut of_file = Vec::new();
        if !unit_stated && options.unit.is_none() {
            of_file.push(unit_assumed(file));
        }
        if !self.ended {
            of_file.push(no_end(file));
        }
        if left_out > 0 {
            of_file.push(heights_unknown(file, left_out));
        }
        Ok(Reading { value: program, problems: faults.warnings(of_file) })
    }
}

fn no_tolerance(file: &str, tolerance: f64) -> Problem {
    Problem::error(
        Place::file(file),
        format!("{tolerance} is no arc tolerance"),
        "a length of 0 or more",
        "give --arc-tolerance as a length, such as 0.005",
    )
}

fn unit_assumed(file: &str) -> Problem {
    Problem::warning(
        Place::file(file),
        "the program does not say its unit: read as millimetres",
        "G20 (inch) or G21 (mm) before the first move",
        "write G20 or G21 into the program, or state the unit with --units",
    )
}

fn no_end(file: &str) -> Problem {
    Problem::warning(
        Place::file(file),
        "the program has no end: neither M2, M30 nor a closing %",
        "M2 or M30 in its last block (NISTIR 6556, 3.1)",
        "make sure that the file is not cut off",
    )
}

fn heights_unknown(file: &str, count: usize) -> Problem {
    Problem::warning(
        Place::file(file),
        format!("rapid moves at a height the program does not say are not judged: {count}"),
        "a Z before the first G0 in X and Y, and after each G28 or G53",
        "make sure that Z stands above part and clamps there, or write the Z into the program",
    )
}

fn second_program(words: &Words) -> Fault {
    Fault::new(
        words.extent(),
        "a second program in this file",
        "one program, ending with M2 or M30",
        "save each program in a file of its own and check them one by one",
    )
}

fn no_program(file: &str, no_text: NoText) -> Problem {
    let (found, help) = match no_text {
        NoText::Empty => ("the file is empty", "post the program again, or name another file"),
        NoText::Wide => ("the file holds 16-bit characters", "save it as plain text (ASCII or UTF-8)"),
        NoText::Binary => (
            "the file is no text: it may be packed, or another kind of file named as a program",
            "name the program as posted, in plain text",
        ),
    };
    Problem::error(Place::file(file), found, "a program in plain text", help)
}
