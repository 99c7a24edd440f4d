//! Which stretches of a chain advance steadily one way? On such a stretch no two segments meet but
//! neighbours at their joint, so that whoever looks for crossings need not look there.
//!
//! **Why.** Along a stretch there is one of eight directions u with u.T > cos 80 degrees all along
//! every segment (T its tangent; of an arc of less than half a turn both end tangents tell, for the
//! tangents between lie between them), and every segment advances along u by more than a given length e.
//! Of two segments with others between them the later one lies wholly more than e farther along u:
//! they are more than e apart. Two neighbours lie on either side of the line through their joint square
//! to u, and away from the joint they part at an angle of 20 degrees or more.

use kurbo::Vec2;

use super::Segment;

/// Directions tried: a chain that strays up to 57 degrees from its course still advances along one.
const DIRECTIONS: usize = 8;

/// Least cosine between a tangent and the direction of its stretch: that of 80 degrees.
const LEAST: f64 = 0.173_648_177_666_930_33;

/// The starts of the stretches of `segments` that advance by more than `least` with every segment and
/// follow one another without a gap, ascending; every segment belongs to one stretch, alone where
/// it fits no other. The first start is 0 where there are segments at all.
pub fn advancing<'a>(segments: impl Iterator<Item = &'a Segment>, least: f64) -> Vec<usize> {
    let eighth = std::f64::consts::FRAC_PI_4;
    let directions: [Vec2; DIRECTIONS] = std::array::from_fn(|i| Vec2::from_angle(eighth * i as f64));
    let mut starts = Vec::new();
    let mut alive = 0;
    let mut end = None;
    for (i, segment) in segments.enumerate() {
        let fits = advances(segment, &directions, least);
        if alive & fits == 0 || end != Some(segment.start()) {
            starts.push(i);
            alive = fits;
        } else {
            alive &= fits;
        }
        end = Some(segment.end());
    }
    starts
}

/// The directions along which a segment advances, as bits.
fn advances(segment: &Segment, directions: &[Vec2; DIRECTIONS], least: f64) -> u8 {
    let way = segment.end() - segment.start();
    let tangents = match segment {
        Segment::Line(_) => {
            let length = way.hypot();
            [if length > 0.0 { way / length } else { Vec2::ZERO }; 2]
        }
        Segment::Arc(a) if a.sweep().abs() < std::f64::consts::PI => [a.tangent_at(0.0), a.tangent_at(1.0)],
        Segment::Arc(_) => [Vec2::ZERO; 2],
    };
    let mut bits = 0;
    for (i, u) in directions.iter().enumerate() {
        if way.dot(*u) > least && tangents.iter().all(|t| t.dot(*u) > LEAST) {
            bits |= 1 << i;
        }
    }
    bits
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::{Arc, Point, Turn};

    fn chain(points: &[(f64, f64)]) -> Vec<Segment> {
        points
            .windows(2)
            .map(|w| Segment::line(Point::new(w[0].0, w[0].1), Point::new(w[1].0, w[1].1)))
            .collect()
    }

    #[test]
    fn a_zigzag_along_one_direction_is_one_stretch_and_a_turn_back_begins_another() {
        let along = chain(&[(0.0, 0.0), (1.0, 1.0), (2.0, -1.0), (3.0, 0.0), (3.5, 0.0)]);
        assert_eq!(advancing(along.iter(), 1e-6), [0]);
        let back = chain(&[(0.0, 0.0), (2.0, 0.0), (1.0, 0.1), (0.0, 0.0)]);
        assert_eq!(advancing(back.iter(), 1e-6), [0, 1]);
    }

    #[test]
    fn gaps_and_segments_shorter_than_the_step_stand_alone() {
        let mut gap = chain(&[(0.0, 0.0), (1.0, 0.0)]);
        gap.extend(chain(&[(2.0, 0.0), (3.0, 0.0)]));
        assert_eq!(advancing(gap.iter(), 1e-6), [0, 1]);
        let tiny = chain(&[(0.0, 0.0), (1.0, 0.0), (1.0 + 1e-7, 0.0), (2.0, 0.0)]);
        assert_eq!(advancing(tiny.iter(), 1e-6), [0, 1, 2]);
        assert!(advancing([].iter(), 1e-6).is_empty());
    }

    #[test]
    fn a_circle_in_arcs_of_a_quarter_takes_several_stretches() {
        let at = |k: i32| Point::ORIGIN + Vec2::from_angle(f64::from(k) * std::f64::consts::FRAC_PI_2) * 5.0;
        let arcs: Vec<Segment> = (0..4)
            .map(|k| Arc::from_center(Point::ORIGIN, at(k), at(k + 1), Turn::Left, 1e-9).unwrap().into())
            .collect();
        let starts = advancing(arcs.iter(), 1e-6);
        assert!(starts.len() >= 3, "{starts:?}");
    }

    #[test]
    fn no_two_segments_of_a_stretch_come_near_but_neighbours() {
        let mut rng = fastrand::Rng::with_seed(11);
        let mut p = Point::ORIGIN;
        let segments: Vec<Segment> = (0..400)
            .map(|_| {
                let q = p + Vec2::new(rng.f64() - 0.3, rng.f64() - 0.5);
                let s = Segment::line(p, q);
                p = q;
                s
            })
            .collect();
        let step = 1e-3;
        let starts = advancing(segments.iter(), step);
        assert!(starts.len() > 10 && starts.len() < 300, "{}", starts.len());
        for (k, &from) in starts.iter().enumerate() {
            let to = starts.get(k + 1).copied().unwrap_or(segments.len());
            for i in from..to {
                for j in i + 2..to {
                    let apart = (0..=50)
                        .map(|t| segments[i].distance(segments[j].point_at(f64::from(t) / 50.0)))
                        .fold(f64::INFINITY, f64::min);
                    assert!(apart > step, "{i} {j}");
                }
            }
        }
    }
}
