//! From the words of a G2 or G3 block to an arc (NISTIR 6556, 3.5.3), or to the reason why there is
//! none. Nothing is repaired: an end that lies off the circle by more than the limit is an error.
//!
//! ```text
//!   center format                     radius format
//!        end  .--.                        .-- R < 0: more than half a turn
//!           .'    '.   I, J: from        (    )
//!          :   +    :  the start    start '--' end
//!           '.  \ .'   to the              --  R > 0: at most half a turn
//!             '--' start center
//! ```

use super::faults::{Fault, Span, figure};
use crate::geometry::{Arc, ArcError, Point, Turn};

/// Ends nearer than this, in mm, are one point: a thousandth of the finest resolution of a control,
/// above what adding up increments loses. It turns no arc that a control can resolve into a circle.
pub(super) const ONE_POINT_MM: f64 = 1e-9;

/// An end off the circle by up to this many times the report's limit (0.05 mm) may come from rounding or
/// from a control's own habit; more is a wrong word, and no limit to be widened.
const ROUNDING: f64 = 25.0;

/// How the block gives the circle.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Circle {
    /// By its center.
    Center(Point),
    /// By its radius, negative for more than half a turn.
    Radius(f64),
}

/// An arc as a block commands it, in the two axes of its plane.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Commanded {
    /// Where the cutter is.
    pub start: Point,
    /// Where it is to end.
    pub end: Point,
    /// G2 or G3.
    pub turn: Turn,
    /// The circle.
    pub circle: Circle,
}

/// By how much the two radii may differ, and in which words to say so.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Limits {
    /// Greatest difference accepted.
    pub accepted: f64,
    /// The report's own limit, for the warning when `accepted` is wider.
    pub standard: f64,
    /// Ends nearer than this are one point.
    pub one_point: f64,
    /// Lengths of this module times this are lengths of the block.
    pub to_block: f64,
    /// Unit of the block, for messages.
    pub sign: &'static str,
}

/// An arc, and how far it lies from what was commanded.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Made {
    /// The arc.
    pub arc: Arc,
    /// Greatest distance from the commanded curve.
    pub bound: f64,
    /// Difference of the two radii.
    pub off: f64,
}

impl Commanded {
    /// The arc.
    ///
    /// # Errors
    /// When there is none; the caller knows what to mark.
    pub fn make(&self, limits: &Limits) -> Result<Made, Fault> {
        let closed = (self.end - self.start).hypot() <= limits.one_point;
        match self.circle {
            Circle::Center(center) => {
                let end = if closed { self.start } else { self.end };
                let made = Arc::from_center(center, self.start, end, self.turn, limits.accepted);
                let arc = made.map_err(|error| self.no_arc(error, center, limits))?;
                let off = ((self.start - center).hypot() - (end - center).hypot()).abs();
                Ok(Made { arc, bound: 0.5 * off, off })
            }
            Circle::Radius(_) if closed => Err(Fault::new(
                Span::default(),
                "an arc by radius that ends where it starts",
                "an end apart from the start: every circle of that radius through the point would do",
                "give a full circle by its center (I, J, K), or correct the end",
            )),
            Circle::Radius(radius) => self.by_radius(radius, limits),
        }
    }

    fn by_radius(&self, radius: f64, limits: &Limits) -> Result<Made, Fault> {
        let (size, large) = (radius.abs(), radius < 0.0);
        let arc = Arc::from_radius(self.start, self.end, size, self.turn, large, limits.accepted);
        let arc = arc.map_err(|error| self.no_arc(error, self.start, limits))?;
        let off = ((self.end - self.start).hypot() - 2.0 * size).max(0.0);
        Ok(Made { arc, bound: arc.residual().max(0.5 * off), off })
    }

    /// Why there is no arc, in a machinist's words.
    #[cold]
    fn no_arc(&self, error: ArcError, center: Point, limits: &Limits) -> Fault {
        let span = Span::default();
        let shown = |length: f64| format!("{} {}", figure(length * limits.to_block), limits.sign);
        let accepted = shown(limits.accepted);
        match error {
            ArcError::OffCircle { off } => {
                let (from, to) = ((self.start - center).hypot(), (self.end - center).hypot());
                Fault::new(
                    span,
                    format!(
                        "the arc ends {} off its circle: radius {} at its start, {} at its end",
                        shown(off.abs()),
                        shown(from),
                        shown(to)
                    ),
                    format!("radii that differ by at most {accepted} (NISTIR 6556, 3.5.3.2)"),
                    self.cure(center, off.abs(), limits),
                )
            }
            ArcError::ChordTooLong { chord } => Fault::new(
                span,
                format!(
                    "the ends of the arc are {} apart, more than twice its radius ({})",
                    shown(chord),
                    match self.circle {
                        Circle::Radius(radius) => shown(2.0 * radius.abs()),
                        Circle::Center(_) => String::new(),
                    }
                ),
                "a radius of at least half the distance of the ends (NISTIR 6556, 3.5.3.1)",
                format!(
                    "correct R or the end; half the distance is {}: is R a diameter, or is a decimal missing?",
                    shown(0.5 * chord)
                ),
            ),
            ArcError::NoRadius => Fault::new(
                span,
                "an arc without a radius: its center or R leaves none",
                "a center apart from the start and the end, or R other than 0",
                "correct I, J, K or R",
            ),
            ArcError::NotFinite => Fault::new(
                span,
                "an arc too large to compute with",
                "lengths of ordinary size",
                "correct the words of this block",
            ),
        }
    }

    /// The likely cure of an end off the circle: another reading of the center that fits, if one does.
    fn cure(&self, center: Point, off: f64, limits: &Limits) -> String {
        let fits = |c: Point| {
            let (a, b) = ((self.start - c).hypot(), (self.end - c).hypot());
            a > 0.0 && (a - b).abs() <= limits.accepted
        };
        let word = center - self.start;
        if fits(word.to_point()) {
            return "taken as a point of the program's own frame the center fits: write G90.1 before this \
                    block, or post the centers as increments from the start"
                .to_owned();
        }
        if fits(self.start + center.to_vec2()) {
            return "taken as increments from the start the center fits: write G91.1 before this block"
                .to_owned();
        }
        if off > ROUNDING * limits.standard {
            return "correct the end, the center, or the end of the move before it, where the arc starts"
                .to_owned();
        }
        let wide = (off * limits.to_block * 1e5).ceil() / 1e5;
        format!(
            "correct the end or the center; post with more decimals if the difference comes from rounding; \
             if the control accepts the arc as it is, widen the limit with --arc-tolerance {} ({})",
            figure(wide),
            limits.sign
        )
    }
}
