use super::*;
use crate::compare::tests::{circle, family, p, part, polyline, request};
use crate::compare::{Clear, Comparison, Request, compare};
use crate::geometry::{Path, Turn, Vec2};
use crate::view::DiscFamily;

fn judged(part: &Part, cutting: &DiscFamily, limit: f64) -> Comparison {
    let request = Request { clear: Clear::Area, ..request(limit) };
    compare(part, cutting, &DiscFamily::default(), &request)
}

fn rectangle(w: f64, h: f64) -> Path {
    polyline(&[p(0.0, 0.0), p(w, 0.0), p(w, h), p(0.0, h)], true)
}

/// Heights of uncut spots off the contour.
fn spots(found: &Comparison) -> Vec<f64> {
    found.excesses.iter().filter(|e| e.stretch.is_none()).map(|e| e.height.size).collect()
}

/// Every point of a grid over the part's box that is open and stands above `limit` lies in a spot's box.
fn check_grid(part: &Part, cutting: &DiscFamily, limit: f64) {
    let walls = Walls::new(&part.contour);
    let moves = Targets::of(cutting.moves.iter().map(|m| (m.segment, m.radius)));
    let floor = Floor::new(part, (&walls, &moves), &[], &Tolerances::for_extent(100.0)).unwrap();
    let (spots, boxes) = floor.spots(limit);
    let b = part.contour.bounds();
    for i in 0..=200 {
        for j in 0..=200 {
            let q = p(b.x0 + b.width() * f64::from(i) / 200.0, b.y0 + b.height() * f64::from(j) / 200.0);
            let d = floor.clearance(q);
            if part.contains(q) || d <= limit {
                continue;
            }
            let owner = boxes.iter().find(|(r, _)| r.inflate(1e-9, 1e-9).contains(q));
            let owner = owner.unwrap_or_else(|| panic!("{q} stands {d} and lies in no spot")).1;
            assert!(d <= spots[owner].size + spots[owner].gap + 1e-9, "{q}: {d} above its spot");
        }
    }
}

#[test]
fn ribs_between_parallel_passes_stand_half_a_step_less_the_radius() {
    // A flat cutter leaves nothing up to a step of 2 r, an uncut rib beyond (elementary).
    let pocket = part(vec![rectangle(60.0, 40.0)], Keep::Outside);
    let round = polyline(&[p(3.0, 3.0), p(57.0, 3.0), p(57.0, 37.0), p(3.0, 37.0)], true);
    let passes = |step: f64| {
        let mut paths = vec![round.clone()];
        let mut y = 3.0 + step;
        while y < 37.0 - 1.0 {
            paths.push(polyline(&[p(3.0, y), p(57.0, y)], false));
            y += step;
        }
        family(&paths, 3.0)
    };
    let found = judged(&pocket, &passes(6.8), 0.05);
    let ribs = spots(&found);
    assert_eq!(ribs.len(), 5, "{ribs:?}");
    assert!(ribs.iter().all(|h| (h - 0.4).abs() < 1e-8), "{ribs:?}");
    assert!(found.excesses.iter().all(|e| e.height.bound < 1e-7), "{:#?}", found.excesses);
    check_grid(&pocket, &passes(6.8), 0.05);
    // The four corners are the contour's findings and are not told twice.
    assert_eq!(found.excesses.len(), 9);
    assert!((found.worst_excess.unwrap().size - 3.0 * (2.0_f64.sqrt() - 1.0)).abs() < 1e-8);
    let found = judged(&pocket, &passes(5.0), 0.05);
    assert!(spots(&found).is_empty(), "{:?}", spots(&found));
}

#[test]
fn core_left_by_a_ring_stands_its_radius_less_the_cutters() {
    let pocket = part(vec![circle(p(7.0, 5.0), 20.0, Turn::Left)], Keep::Outside);
    let ring = family(&[circle(p(7.0, 5.0), 15.0, Turn::Left)], 5.0);
    let found = judged(&pocket, &ring, 0.05);
    assert_eq!(spots(&found).len(), 1);
    assert!((spots(&found)[0] - 10.0).abs() < 1e-8);
    assert!((found.excesses[0].at - p(7.0, 5.0)).hypot() < 1e-4);
    check_grid(&pocket, &ring, 0.05);
}

#[test]
fn ridge_between_two_rings_stands_half_their_distance_less_the_radius() {
    let pocket = part(vec![circle(p(0.0, 0.0), 25.0, Turn::Left)], Keep::Outside);
    let rings = [20.0, 9.6, 3.0].map(|r| circle(p(0.0, 0.0), r, Turn::Left));
    let found = judged(&pocket, &family(&rings, 5.0), 0.05);
    let ridge = spots(&found);
    assert_eq!(ridge.len(), 1, "{ridge:?}");
    assert!((ridge[0] - 0.2).abs() < 1e-6, "{ridge:?}");
    assert!(found.excesses[0].height.bound < 2e-6, "{:?}", found.excesses[0].height);
}

#[test]
fn spot_between_three_plunges_stands_their_circumradius_less_the_radius() {
    let pocket = part(vec![circle(p(0.0, 0.0), 20.0, Turn::Left)], Keep::Outside);
    let mut paths = vec![circle(p(0.0, 0.0), 13.8, Turn::Left)];
    paths.extend((0..3).map(|i| {
        let at = (Vec2::from_angle(f64::from(i) * 2.1 + 0.3) * 6.5).to_point();
        polyline(&[at, at], false)
    }));
    let cutting = family(&paths, 6.2);
    let found = judged(&pocket, &cutting, 0.05);
    // The three are on a circle of radius 6.5 about the middle; three more spots towards the ring.
    assert_eq!(spots(&found).len(), 4, "{:?}", spots(&found));
    let middle = found.excesses.iter().find(|e| e.at.to_vec2().hypot() < 1.0).unwrap();
    assert!((middle.height.size - 0.3).abs() < 1e-8, "{:?}", middle.height);
    check_grid(&pocket, &cutting, 0.05);
}

#[test]
fn islands_are_not_cleared_and_what_stands_round_them_is_found() {
    let island = circle(p(30.0, 20.0), 6.0, Turn::Left);
    let plate = polyline(&[p(-20.0, -20.0), p(80.0, -20.0), p(80.0, 60.0), p(-20.0, 60.0)], true);
    let pocket = part(vec![plate.clone(), rectangle(60.0, 40.0), island], Keep::Inside);
    let round = polyline(&[p(4.0, 4.0), p(56.0, 4.0), p(56.0, 36.0), p(4.0, 36.0)], true);
    let outside = polyline(&[p(-24.0, -24.0), p(84.0, -24.0), p(84.0, 64.0), p(-24.0, 64.0)], true);
    let cutting = family(&[round, outside, circle(p(30.0, 20.0), 10.0, Turn::Left)], 4.0);
    let found = judged(&pocket, &cutting, 0.05);
    // Two patches left and right of the ring round the island.
    assert_eq!(spots(&found).len(), 2, "{:#?}", found.excesses);
    assert!(found.excesses.iter().all(|e| !pocket.contains(e.at) || e.stretch.is_some()));
    check_grid(&pocket, &cutting, 0.05);
}

#[test]
fn cleared_pocket_of_curved_walls_has_no_spot_and_a_worst_figure_near_zero() {
    let pocket = part(vec![circle(p(0.0, 0.0), 25.0, Turn::Left)], Keep::Outside);
    let rings = [20.0, 11.0, 3.0].map(|r| circle(p(0.0, 0.0), r, Turn::Left));
    let found = judged(&pocket, &family(&rings, 5.0), 0.05);
    assert!(found.excesses.is_empty());
    let worst = found.worst_excess.unwrap();
    assert!(worst.size + worst.bound < 0.001, "{worst:?}");
}
