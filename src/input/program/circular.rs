//! A G2 or G3 block: which words give the circle, in which plane, and the helix above it.

use super::arcs::{Circle, Commanded, Limits, ONE_POINT_MM};
use super::codes::Distance;
use super::faults::{Fault, Line, Note, figure};
use super::interpret::{Interpreter, within};
use super::words::{Words, bits};
use crate::geometry::{Point, Turn};
use crate::program::{Motion, MoveKind, Plane, Unit};
use crate::tolerance::{ARC_RADII_INCH, ARC_RADII_MM};

/// Center letters of a plane's first and second axis, and of its normal.
const fn center_letters(plane: Plane) -> [u8; 3] {
    match plane {
        Plane::Xy => *b"IJK",
        Plane::Zx => *b"KIJ",
        Plane::Yz => *b"JKI",
    }
}

impl Interpreter<'_> {
    /// Carries out an arc or a helix.
    ///
    /// # Errors
    /// When its words give none.
    pub(super) fn circular(&mut self, line: Line<'_>, words: &Words, turn: Turn) -> Result<(), Fault> {
        one_turn(words)?;
        let circle_words = self.circle_words(words)?;
        let target = self.target(line, words)?;
        if self.faults.refused() && !self.position.knows(self.plane) {
            // The start hangs on a block that is wrong: nothing more can be said about this one.
            self.arrive(target);
            return Ok(());
        }
        self.assume_start(line, words)?;
        let before = self.position;
        self.arrive(target);
        let after = self.position;
        let plane = self.plane;
        let (start, end) = (before.in_plane(plane), after.in_plane(plane));
        let circle = self.circle(words, circle_words, start)?;
        let limits = self.limits();
        let made =
            Commanded { start, end, turn, circle }.make(&limits).map_err(|fault| fault.at(words.extent()))?;
        self.moves.bound = self.moves.bound.max(made.bound);
        if made.off > limits.standard {
            let shown = figure(made.off * limits.to_block);
            self.faults.note(Note::WideArc, line, words.extent(), || {
                let found =
                    format!("the arc's radii differ by {shown} {}: accepted by --arc-tolerance", limits.sign);
                (found, "the control may stop here; its own limit is in the machine's parameters")
            });
        }
        let along = (before.along(plane), after.along(plane));
        self.keep(line, words, Motion::Circular { plane, arc: made.arc, along }, MoveKind::Feed)
    }

    /// Is the circle given by R (true) or by its center (false)?
    fn circle_words(&self, words: &Words) -> Result<bool, Fault> {
        let [first, second, normal] = center_letters(self.plane);
        let centered = words.any(bits(&[first, second]));
        let names = format_args!("{} and {}", char::from(first), char::from(second)).to_string();
        if words.get(normal).is_some_and(|v| v.abs() > 0.0) {
            return Err(Fault::new(
                words.span(normal),
                format!("a {} word in an arc of this plane", char::from(normal)),
                format!("{names} for the center, in the plane chosen by G17, G18 or G19"),
                "correct the plane or the word",
            ));
        }
        match (words.get(b'R').is_some(), centered) {
            (true, true) => Err(Fault::new(
                words.span(b'R'),
                format!("an arc with both R and {names}"),
                "either the radius or the center",
                "take out the one that is wrong: controls differ in which they obey",
            )),
            (false, false) => Err(Fault::new(
                words.extent(),
                "an arc with neither center nor radius",
                format!("{names}, or R"),
                "write the center or the radius into this block; write G1 if a line is meant",
            )),
            (by_radius, _) => Ok(by_radius),
        }
    }

    /// The circle in the unit of what is kept.
    fn circle(&mut self, words: &Words, by_radius: bool, start: Point) -> Result<Circle, Fault> {
        if by_radius {
            let radius = self.bounded(words.get(b'R').unwrap_or(0.0), words.span(b'R'))?;
            return Ok(Circle::Radius(radius));
        }
        let [first, second, _] = center_letters(self.plane);
        let from = match self.centers {
            Distance::Incremental => start,
            Distance::Absolute if words.get(first).is_none() || words.get(second).is_none() => {
                return Err(Fault::new(
                    words.extent(),
                    "an arc with half a center under G90.1",
                    format!("both {} and {}", char::from(first), char::from(second)),
                    "write both center words, or G91.1 if they are increments from the start",
                ));
            }
            Distance::Absolute => Point::ORIGIN,
        };
        let mut word = |letter: u8, from: f64| -> Result<f64, Fault> {
            let span = words.span(letter);
            let offset = self.bounded(words.get(letter).unwrap_or(0.0), span)?;
            within(from + offset, span)
        };
        Ok(Circle::Center(Point::new(word(first, from.x)?, word(second, from.y)?)))
    }

    fn limits(&mut self) -> Limits {
        let block = self.block_unit();
        let out = self.unit().0;
        let standard = match block {
            Unit::Millimetre => ARC_RADII_MM,
            Unit::Inch => ARC_RADII_INCH,
        };
        let standard = self.length(standard);
        Limits {
            accepted: self.options.arc_tolerance.unwrap_or(standard),
            standard,
            one_point: ONE_POINT_MM / out.in_mm(),
            to_block: if out == block { 1.0 } else { out.in_mm() / block.in_mm() },
            sign: block.sign(),
        }
    }
}

/// P on an arc asks for further turns on some controls (common practice, no single source).
fn one_turn(words: &Words) -> Result<(), Fault> {
    if words.get(b'P').is_some_and(|p| (p - 1.0).abs() > 0.0) {
        return Err(Fault::new(
            words.span(b'P'),
            "a P word in an arc: on some controls the number of its turns",
            "no P, or P1",
            "post a helix of several turns as one block for each turn",
        ));
    }
    Ok(())
}
