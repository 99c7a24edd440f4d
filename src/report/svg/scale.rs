//! Axes and scale bar at the foot of the drawing.

use svg::node::element::{Group, Line, Path};

use super::hatch::INK;
use super::lettering::{Align, SIZE, text};
use super::page::{FOOT, Map, mm};
use crate::program::Unit;

/// Longest scale bar, mm on the sheet.
const LONGEST: f64 = 60.0;

/// A round length (1, 2 or 5 times a power of ten) whose bar fits, and its decimals.
fn round_length(scale: f64) -> (f64, usize) {
    let most = LONGEST / scale;
    let power = most.log10().floor().clamp(-12.0, 12.0);
    let unit = 10f64.powf(power);
    let factor = [5.0, 2.0].into_iter().find(|f| f * unit <= most).unwrap_or(1.0);
    // Clamped to 0..=12 before the cast.
    (factor * unit, (-power).clamp(0.0, 12.0) as usize)
}

/// Scale bar with its length, in the unit of the drawing.
pub fn bar(map: &Map, unit: Unit) -> Group {
    let (length, decimals) = round_length(map.scale);
    let (x0, x1) = (44.0, 44.0 + (length * map.scale).min(LONGEST));
    let label = format!("{length:.decimals$} {}", unit.sign());
    let ticks = format!(
        "M{0} {3}V{2}M{0} {4}H{1}M{1} {3}V{2}",
        mm(x0),
        mm(x1),
        mm(FOOT + 1.2),
        mm(FOOT - 1.2),
        mm(FOOT)
    );
    Group::new()
        .set("id", "se-scale")
        .add(Path::new().set("d", ticks).set("fill", "none").set("stroke", INK).set("stroke-width", 0.35))
        .add(text(&label, x1 + 2.5, FOOT + 0.9, SIZE, Align::Start))
}

/// The directions of X and Y.
pub fn axes() -> Group {
    let (x, y) = (13.0, FOOT);
    let arrow = |dx: f64, dy: f64| {
        let tip = (x + dx, y + dy);
        let line = Line::new()
            .set("x1", mm(x))
            .set("y1", mm(y))
            .set("x2", mm(tip.0))
            .set("y2", mm(tip.1))
            .set("stroke", INK)
            .set("stroke-width", 0.35);
        // The head: 2 mm long, 1.2 mm wide.
        let (ux, uy) =
            (dx.signum() * f64::from(u8::from(dx.abs() > 0.0)), -f64::from(u8::from(dy.abs() > 0.0)));
        let back = (tip.0 - 1.0 * ux, tip.1 - 1.0 * uy);
        let head = format!(
            "M{} {}L{} {}L{} {}Z",
            mm(tip.0 + ux),
            mm(tip.1 + uy),
            mm(back.0 - 0.6 * uy),
            mm(back.1 + 0.6 * ux),
            mm(back.0 + 0.6 * uy),
            mm(back.1 - 0.6 * ux)
        );
        (line, Path::new().set("d", head).set("fill", INK))
    };
    let ((x_line, x_head), (y_line, y_head)) = (arrow(11.0, 0.0), arrow(0.0, -6.5));
    Group::new()
        .set("id", "se-axes")
        .add(x_line)
        .add(x_head)
        .add(y_line)
        .add(y_head)
        .add(text("X", x + 14.0, y + 0.9, SIZE, Align::Start))
        .add(text("Y", x - 2.2, y - 5.0, SIZE, Align::End))
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    #[test]
    fn the_bar_is_a_round_length_that_fits() {
        for (scale, length) in [(1.0, 50.0), (2.0, 20.0), (60.0, 1.0), (0.001, 50_000.0), (1e5, 0.0005)] {
            assert_relative_eq!(round_length(scale).0, length, max_relative = 1e-9);
        }
        assert_eq!(round_length(1e5).1, 4);
        assert_eq!(round_length(600.0), (0.1, 1));
    }
}
