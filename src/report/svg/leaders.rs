//! Where do the numbered balloons stand, so that they do not overlap and their leaders do not cross?
//!
//! Balloons stand on the border of a frame round the drawing. A leader runs straight from its finding
//! to a dock before its balloon and from there square to the border, so it passes no other balloon.
//! Positions along the border: the nearest one wanted by each finding, moved apart by the least total
//! square distance (isotonic regression, pool adjacent violators: Barlow, Bartholomew, Bremner and
//! Brunk, "Statistical Inference under Order Restrictions", 1972, section 1.2). Which finding
//! takes which: two are exchanged while that shortens the leaders. Where two leaders cross, exchanging
//! shortens them (triangle inequality), so none cross in the end.

use super::page::{BALLOONS, DOCKS};
use crate::geometry::Point;

/// Radius of a balloon, mm on the sheet.
pub const RADIUS: f64 = 3.1;

/// Least distance of two balloons along the border.
const SPACING: f64 = 7.4;

/// No balloon nearer to a corner than this, so that balloons of two sides keep clear of each other.
const CORNER: f64 = 8.0;

/// Most balloons placed: half of what the border holds, so that leaders stay short.
pub const MOST: usize = 40;

/// A leader, on the sheet.
#[derive(Clone, Copy, Debug)]
pub struct Leader {
    /// The place of the finding.
    pub anchor: Point,
    /// Where it turns off.
    pub dock: Point,
    /// Centre of the balloon.
    pub balloon: Point,
}

/// A leader for each of the first [`MOST`] anchors, in their order.
pub fn place(anchors: &[Point]) -> Vec<Leader> {
    let anchors = anchors.get(..MOST.min(anchors.len())).unwrap_or_default();
    // Sorted anchors to slots as a first guess, then exchange.
    let mut order: Vec<(usize, Point, f64)> =
        anchors.iter().enumerate().map(|(i, &p)| (i, p, nearest(p))).collect();
    order.sort_by(|a, b| a.2.total_cmp(&b.2).then(a.1.x.total_cmp(&b.1.x)).then(a.1.y.total_cmp(&b.1.y)));
    let slots = spread(&order.iter().map(|o| o.2).collect::<Vec<_>>());
    let mut leaders: Vec<(usize, Leader)> = order
        .into_iter()
        .zip(slots)
        .map(|((i, anchor, _), s)| {
            let (balloon, dock) = on_border(s);
            (i, Leader { anchor, dock, balloon })
        })
        .collect();
    exchange(&mut leaders);
    leaders.sort_by_key(|l| l.0);
    leaders.into_iter().map(|l| l.1).collect()
}

/// Lengths of the usable part of a horizontal and a vertical side.
fn sides() -> (f64, f64) {
    (BALLOONS.width() - 2.0 * CORNER, BALLOONS.height() - 2.0 * CORNER)
}

/// Balloon and dock at `s` along the border: top, right, bottom, left, clockwise on the sheet.
fn on_border(s: f64) -> (Point, Point) {
    let (w, h) = sides();
    let s = s.rem_euclid(2.0 * (w + h));
    let (left, top) = (BALLOONS.x0 + CORNER, BALLOONS.y0 + CORNER);
    if s < w {
        (Point::new(left + s, BALLOONS.y0), Point::new(left + s, DOCKS.y0))
    } else if s < w + h {
        (Point::new(BALLOONS.x1, top + s - w), Point::new(DOCKS.x1, top + s - w))
    } else if s < 2.0 * w + h {
        let x = left + 2.0 * w + h - s;
        (Point::new(x, BALLOONS.y1), Point::new(x, DOCKS.y1))
    } else {
        let y = top + 2.0 * (w + h) - s;
        (Point::new(BALLOONS.x0, y), Point::new(DOCKS.x0, y))
    }
}

/// The position along the border nearest to `p`.
fn nearest(p: Point) -> f64 {
    if !p.is_finite() {
        return 0.0;
    }
    let (w, h) = sides();
    let x = (p.x - BALLOONS.x0 - CORNER).clamp(0.0, w);
    let y = (p.y - BALLOONS.y0 - CORNER).clamp(0.0, h);
    let candidates = [
        (p.y - BALLOONS.y0, x),
        (BALLOONS.x1 - p.x, w + y),
        (BALLOONS.y1 - p.y, w + h + (w - x)),
        (p.x - BALLOONS.x0, 2.0 * w + h + (h - y)),
    ];
    candidates.into_iter().min_by(|a, b| a.0.total_cmp(&b.0)).map_or(0.0, |c| c.1)
}

/// Sorted wishes round the border moved apart to [`SPACING`], by the least sum of squares.
fn spread(wanted: &[f64]) -> Vec<f64> {
    let (w, h) = sides();
    let around = 2.0 * (w + h);
    let count = wanted.len();
    // Cut the ring open in its widest gap.
    let next = |i: usize| match wanted.get(i + 1) {
        Some(&s) => s,
        None => wanted.first().map_or(around, |&s| s + around),
    };
    let gaps = wanted.iter().enumerate().map(|(i, &s)| (i, next(i) - s));
    let Some((last, gap)) = gaps.max_by(|a, b| a.1.total_cmp(&b.1)) else { return Vec::new() };
    let first = (last + 1) % count;
    let start = wanted.get(last).map_or(0.0, |&s| s + 0.5 * gap);
    let unrolled = (0..count).filter_map(|k| {
        let s = *wanted.get((first + k) % count)?;
        Some(start + (s - start).rem_euclid(around) - SPACING * k as f64)
    });
    // Without the spacing the positions must only not decrease: pool where they do.
    let mut pools: Vec<(f64, f64)> = Vec::new();
    for y in unrolled {
        let mut pool = (y, 1.0);
        while let Some(&(mean, n)) = pools.last() {
            if mean <= pool.0 {
                break;
            }
            pool = ((mean * n + pool.0 * pool.1) / (n + pool.1), n + pool.1);
            pools.pop();
        }
        pools.push(pool);
    }
    let end = start + (around - SPACING * count as f64).max(0.0);
    let flat = pools.iter().flat_map(|&(mean, n)| std::iter::repeat_n(mean, n as usize));
    let placed: Vec<f64> = flat.enumerate().map(|(k, y)| y.clamp(start, end) + SPACING * k as f64).collect();
    // Back into the order of the wishes.
    (0..count).filter_map(|i| placed.get((i + count - first) % count).copied()).collect()
}

/// Exchanges balloons of two findings while that shortens their leaders.
fn exchange(leaders: &mut [(usize, Leader)]) {
    /// Rounds after which it is left as it is; a handful is the rule.
    const ROUNDS: usize = 200;
    let length = |l: &Leader, to: Point| (to - l.anchor).hypot();
    for _ in 0..ROUNDS {
        let mut better = false;
        for i in 1..leaders.len() {
            let (head, tail) = leaders.split_at_mut(i);
            let Some((_, b)) = tail.first_mut() else { continue };
            for (_, a) in head {
                let now = length(a, a.dock) + length(b, b.dock);
                if length(a, b.dock) + length(b, a.dock) < now - 1e-9 {
                    std::mem::swap(&mut a.dock, &mut b.dock);
                    std::mem::swap(&mut a.balloon, &mut b.balloon);
                    better = true;
                }
            }
        }
        if !better {
            return;
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::{Side, orientation};
    use crate::report::svg::page::{DIVIDER, DRAWING, FRAME};

    fn cross(a: (Point, Point), b: (Point, Point)) -> bool {
        let apart = |p: (Point, Point), q: (Point, Point)| {
            let (s, t) = (orientation(p.0, p.1, q.0), orientation(p.0, p.1, q.1));
            s != t && s != Side::On && t != Side::On
        };
        apart(a, b) && apart(b, a)
    }

    fn check(anchors: &[Point]) {
        let leaders = place(anchors);
        assert_eq!(leaders.len(), anchors.len().min(MOST));
        for (i, a) in leaders.iter().enumerate() {
            assert_eq!(Some(&a.anchor), anchors.get(i));
            assert!(a.balloon.x - RADIUS > FRAME.x0 && a.balloon.x + RADIUS < DIVIDER);
            for b in leaders.iter().skip(i + 1) {
                assert!((a.balloon - b.balloon).hypot() > 2.0 * RADIUS + 0.5, "balloons {a:?} {b:?}");
                for p in [(a.anchor, a.dock), (a.dock, a.balloon)] {
                    for q in [(b.anchor, b.dock), (b.dock, b.balloon)] {
                        assert!(!cross(p, q), "leaders {a:?} {b:?}");
                    }
                }
            }
            for b in leaders.iter().filter(|b| b.balloon != a.balloon) {
                let to = crate::geometry::Line::new(a.anchor, a.dock).nearest(b.balloon).distance;
                assert!(to > RADIUS, "leader {a:?} under balloon {b:?}");
            }
        }
    }

    #[test]
    fn scattered_findings_have_balloons_apart_and_leaders_that_do_not_cross() {
        for start in 0..60 {
            let mut random = fastrand::Rng::with_seed(start);
            let count = random.usize(1..60);
            let point = |r: &mut fastrand::Rng| {
                let (w, h) = (DRAWING.width(), DRAWING.height());
                Point::new(DRAWING.x0 + w * r.f64(), DRAWING.y0 + h * r.f64())
            };
            check(&(0..count).map(|_| point(&mut random)).collect::<Vec<_>>());
        }
    }

    #[test]
    fn a_cluster_of_findings_in_one_corner_is_fanned_out() {
        for corner in [(DRAWING.x0, DRAWING.y0), (DRAWING.x1, DRAWING.y1), (114.0, 98.0)] {
            let mut random = fastrand::Rng::with_seed(7);
            let near = |r: &mut fastrand::Rng| Point::new(corner.0 + r.f64(), corner.1 - r.f64());
            check(&(0..40).map(|_| near(&mut random)).collect::<Vec<_>>());
        }
    }

    #[test]
    fn findings_at_one_point_or_none_at_all_are_no_trouble() {
        check(&[Point::new(100.0, 90.0); 12]);
        assert!(place(&[]).is_empty());
        assert_eq!(place(&[Point::new(f64::NAN, 0.0), Point::new(0.0, f64::INFINITY)]).len(), 2);
    }
}
