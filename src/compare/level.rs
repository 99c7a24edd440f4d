//! What does a radius that changes on the way cost a comparison that measures with a constant one?
//!
//! Over a move whose radius runs from r0 to r1 every disc differs from the one of mean radius about the
//! same centre by |r1 - r0| / 2 at most. Reach past the contour and clearance change by no more than
//! that (g = r - sd(c), D = min |x - c| - r), so a figure found with mean radii holds the true one within
//! its bound once half the greatest change is added to it. Whoever wants a sharper figure gives shorter
//! moves: the cost falls with their length.

use std::borrow::Cow;

use crate::view::{DiscFamily, DiscMove};

/// Half the greatest change of radius over a move, a length; zero for a family of constant radii.
pub(super) fn cost(family: &DiscFamily) -> f64 {
    family.moves.iter().map(|m| 0.5 * (m.end_radius - m.radius).abs()).fold(0.0, f64::max)
}

/// The family with each move's mean radius all along it; the family itself where nothing changes.
pub(super) fn levelled(family: &DiscFamily) -> Cow<'_, DiscFamily> {
    if family.moves.iter().all(DiscMove::is_constant) {
        return Cow::Borrowed(family);
    }
    let mean = |m: &DiscMove| DiscMove::constant(m.segment, 0.5 * (m.radius + m.end_radius), m.source);
    Cow::Owned(DiscFamily { moves: family.moves.iter().map(mean).collect() })
}

#[cfg(test)]
mod tests {
    use super::super::tests::{p, part, polyline, request};
    use super::super::{Comparison, compare};
    use crate::geometry::{Segment, Vec2};
    use crate::part::Keep;
    use crate::program::MoveIndex;
    use crate::view::{DiscFamily, DiscMove};

    /// A cone that touches both walls of a wedge all along, `over` too large, in `count` moves.
    fn cone(over: f64, count: u32) -> (Comparison, f64) {
        let half = 0.35f64;
        let (u, v) = (Vec2::from_angle(half), Vec2::from_angle(-half));
        let walls = polyline(&[(u * 22.0).to_point(), (u * 8.0).to_point()], false);
        let below = polyline(&[(v * 8.0).to_point(), (v * 22.0).to_point()], false);
        let part = part(vec![walls, below], Keep::Right);
        let place = |k: u32| 5.0 + 25.0 * f64::from(k) / f64::from(count);
        let radius = |k: u32| place(k) * half.sin() + over;
        let moves = (0..count).map(|k| DiscMove {
            segment: Segment::line(p(place(k), 0.0), p(place(k + 1), 0.0)),
            radius: radius(k),
            end_radius: radius(k + 1),
            source: MoveIndex(k),
        });
        let cutting = DiscFamily { moves: moves.collect() };
        (
            compare(&part, &cutting, &DiscFamily::default(), &request(0.05)),
            12.5 * half.sin() / f64::from(count),
        )
    }

    #[test]
    fn figures_of_a_tapered_pass_hold_the_true_ones_within_half_the_change_of_radius() {
        for (over, gouge, excess) in [(0.0, 0.0, 0.0), (0.3, 0.3, 0.0), (-0.2, 0.0, 0.2)] {
            for count in [10, 400] {
                let (c, change) = cone(over, count);
                let (g, e) = (c.worst_gouge.unwrap(), c.worst_excess.unwrap());
                assert!((g.size - gouge).abs() <= g.bound, "{over} {count}: gouge {g:?}");
                assert!((e.size - excess).abs() <= e.bound, "{over} {count}: excess {e:?}");
                assert!(g.bound < 1.01 * change + 1e-6 && e.bound < 1.01 * change + 1e-6);
            }
        }
    }
}
