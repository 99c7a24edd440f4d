use std::f64::consts::{PI, TAU};

use super::*;
use crate::geometry::{Arc, Contour, Turn, Vec2};
use crate::part::{Keep, Origin};
use crate::program::MoveIndex;
use crate::view::DiscMove;

pub(super) fn p(x: f64, y: f64) -> Point {
    Point::new(x, y)
}

pub(super) fn polyline(points: &[Point], closed: bool) -> Path {
    let mut segments: Vec<Segment> = points.windows(2).map(|w| Segment::line(w[0], w[1])).collect();
    if closed {
        segments.push(Segment::line(points[points.len() - 1], points[0]));
    }
    Path::new(segments, closed).unwrap()
}

pub(super) fn circle(center: Point, radius: f64, turn: Turn) -> Path {
    let arc = Arc::full_circle(center, center + Vec2::new(radius, 0.0), turn).unwrap();
    Path::new(vec![Segment::Arc(arc)], true).unwrap()
}

pub(super) fn part(paths: Vec<Path>, keep: Keep) -> Part {
    let origins = vec![Origin::default(); paths.len()];
    Part::new(Contour::new(paths, 0.0).unwrap(), keep, 0.0, origins).unwrap()
}

pub(super) fn family(paths: &[Path], radius: f64) -> DiscFamily {
    let segments = paths.iter().flat_map(|p| p.segments().iter().copied());
    let moves = (0u32..).zip(segments).map(|(i, segment)| DiscMove::constant(segment, radius, MoveIndex(i)));
    DiscFamily { moves: moves.collect() }
}

pub(super) fn request(limit: f64) -> Request {
    Request {
        gouge: limit,
        excess: limit,
        cusp: limit,
        clear: Clear::Wall,
        only_visited: false,
        program_bound: 0.0,
        tolerances: Tolerances::for_extent(100.0),
    }
}

fn judged(part: &Part, cutting: &DiscFamily, limit: f64) -> Comparison {
    compare(part, cutting, &DiscFamily::default(), &request(limit))
}

fn close(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-8
}

/// Wedge-shaped pocket of opening angle `angle` with its apex at the origin, and the path of a cutter of
/// radius 1 that touches both walls.
fn corner(angle: f64, fillet: f64) -> (Part, DiscFamily) {
    let half = 0.5 * angle;
    let (u, v) = (Vec2::from_angle(half), Vec2::from_angle(-half));
    let far = 40.0;
    let contour = if fillet > 0.0 {
        let set = fillet / half.tan();
        let (a, b) = ((u * set).to_point(), (v * set).to_point());
        let center = p(fillet / half.sin(), 0.0);
        let arc = Arc::from_center(center, a, b, Turn::Left, 1e-9).unwrap();
        let lines = [
            Segment::line((u * far).to_point(), a),
            Segment::Arc(arc),
            Segment::line(b, (v * far).to_point()),
        ];
        Path::new(lines.to_vec(), false).unwrap()
    } else {
        polyline(&[(u * far).to_point(), p(0.0, 0.0), (v * far).to_point()], false)
    };
    let tip = p(1.0 / half.sin(), 0.0);
    let path = polyline(&[tip + u * far, tip, tip + v * far], false);
    (part(vec![contour], Keep::Right), family(&[path], 1.0))
}

#[test]
fn sharp_inside_corner_leaves_r_over_sine_less_one_on_the_bisector() {
    // Elementary: the apex is r / sin(th/2) from the centre nearest to it.
    let table = [
        (30.0f64, 2.863_703_305_16, 3.732_050_807_57),
        (60.0, 1.0, 1.732_050_807_57),
        (90.0, 0.414_213_562_373, 1.0),
        (120.0, 0.154_700_538_379, 0.577_350_269_19),
        (135.0, 0.082_392_200_292_4, 0.414_213_562_373),
        (150.0, 0.035_276_180_410_1, 0.267_949_192_431),
    ];
    for (angle, height, setback) in table {
        let (part, path) = corner(angle.to_radians(), 0.0);
        let found = judged(&part, &path, 1e-4);
        assert_eq!(found.excesses.len(), 1, "{angle}: {found:#?}");
        let excess = &found.excesses[0];
        assert!(close(excess.height.size, height), "{angle}: {}", excess.height.size);
        assert!(excess.height.bound < 1e-8);
        assert!(excess.at.to_vec2().hypot() < 1e-8, "{angle}: {}", excess.at);
        assert!(excess.crest.is_none(), "a corner is no cusp");
        // The stretch begins a little inside of the setback: at excess 1e-4 - bound.
        let stretch = excess.stretch.unwrap();
        let wide = 0.5 * (stretch.to - stretch.from);
        assert!(wide < setback && wide > setback - 0.015, "{angle}: {wide}");
        assert!(close(found.worst_gouge.unwrap().size, 0.0));
    }
}

#[test]
fn inside_corner_with_fillet_leaves_the_difference_of_radii() {
    for (angle, fillet) in [(90.0f64, 0.4), (60.0, 0.25), (120.0, 0.9)] {
        let (part, path) = corner(angle.to_radians(), fillet);
        let found = judged(&part, &path, 1e-3);
        let expected = (1.0 - fillet) * (1.0 / (0.5 * angle.to_radians()).sin() - 1.0);
        assert_eq!(found.excesses.len(), 1);
        assert!(close(found.excesses[0].height.size, expected), "{angle}");
        assert!(found.excesses[0].crest.is_none(), "tighter than the cutter is no cusp");
    }
}

#[test]
fn untrimmed_path_in_a_fillet_enters_the_opposite_wall_by_the_difference_of_radii() {
    // Local against global offset: 90 degrees, fillet 3, cutter 5: 2 (NISTIR 6556 B.1 for the rule).
    let contour = Path::new(
        vec![
            Segment::line(p(0.0, 60.0), p(0.0, 3.0)),
            Segment::Arc(Arc::from_center(p(3.0, 3.0), p(0.0, 3.0), p(3.0, 0.0), Turn::Left, 1e-9).unwrap()),
            Segment::line(p(3.0, 0.0), p(60.0, 0.0)),
        ],
        false,
    )
    .unwrap();
    // Material right of this path; the offset 5 to its left collapses: the arc of radius -2 runs back.
    let path = Path::new(
        vec![
            Segment::line(p(5.0, 60.0), p(5.0, 3.0)),
            Segment::Arc(Arc::from_center(p(3.0, 3.0), p(5.0, 3.0), p(3.0, 5.0), Turn::Left, 1e-9).unwrap()),
            Segment::line(p(3.0, 5.0), p(60.0, 5.0)),
        ],
        false,
    )
    .unwrap();
    let part = part(vec![contour], Keep::Right);
    let found = judged(&part, &family(&[path], 5.0), 1e-3);
    assert!(close(found.worst_gouge.unwrap().size, 2.0), "{:?}", found.worst_gouge);
    assert_eq!(found.gouges.len(), 1, "{:#?}", found.gouges);
    let gouge = &found.gouges[0];
    assert!(close(gouge.depth.size, 2.0));
    assert_eq!(gouge.moves, (0, 2));
    assert!(!gouge.center_inside);
    assert!(gouge.stretch.from < 57.0 && gouge.stretch.to > 57.0 + 1.5 * PI);
}

#[test]
fn slot_narrower_than_the_cutter_is_gouged_in_both_flanks() {
    // Half width 3, cutter 5: 2 into each flank.
    let slot = polyline(&[p(0.0, -3.0), p(60.0, -3.0), p(60.0, 3.0), p(0.0, 3.0)], true);
    let path = polyline(&[p(10.0, 0.0), p(50.0, 0.0)], false);
    let found = judged(&part(vec![slot], Keep::Outside), &family(&[path], 5.0), 1e-3);
    assert!(close(found.worst_gouge.unwrap().size, 2.0));
    assert_eq!(found.gouges.len(), 1);
    assert_eq!(found.gouges[0].moves, (0, 0));
}

#[test]
fn gon_of_36_sides_round_a_circle_deviates_by_the_sagitta() {
    // Centre path of circumradius 20, cutter 5: the inner cut comes as near as 20 cos 5 deg - 5 =
    // 14.92389 to the centre, in the middle of the chords (sagitta of a chord, elementary).
    let corners: Vec<Point> =
        (0..36).map(|i| (Vec2::from_angle(f64::from(i) * TAU / 36.0) * 20.0).to_point()).collect();
    let path = family(&[polyline(&corners, true)], 5.0);
    let disc = part(vec![circle(p(0.0, 0.0), 15.0, Turn::Left)], Keep::Inside);
    let found = judged(&disc, &path, 1e-3);
    assert!(close(found.worst_gouge.unwrap().size, 15.0 - 14.923_893_961_8), "{:?}", found.worst_gouge);
    assert_eq!(found.gouges.len(), 36);
    assert!(found.excesses.is_empty(), "everything of the disc's edge is cut");
    // A smaller disc is left standing at the corners of the cut, up to where the inner edges meet.
    let smaller = part(vec![circle(p(0.0, 0.0), 14.9, Turn::Left)], Keep::Inside);
    let found = judged(&smaller, &path, 1e-3);
    // On the ray to a corner both chords are (20 - 14.9) cos 5 deg away.
    let expected = (20.0 - 14.9) * (PI / 36.0).cos() - 5.0;
    assert!(close(found.worst_excess.unwrap().size, expected));
    assert_eq!(found.excesses.len(), 1, "the whole loop is one stretch");
    assert!(found.excesses[0].whole_path);
}

#[test]
fn perfect_program_of_arcs_and_lines_leaves_and_cuts_nothing() {
    let (part, path) = stadium(10.0);
    let found = judged(&part, &path, 1e-6);
    assert!(found.gouges.is_empty() && found.excesses.is_empty() && found.never_visited.is_empty());
    assert!(found.worst_gouge.unwrap().size < 1e-9);
    assert!(found.worst_excess.unwrap().size < 1e-9);
    assert!(found.worst_cusp.is_none());
}

/// A stadium of half width `half` and the path of a cutter of radius 3 round it.
fn stadium(half: f64) -> (Part, DiscFamily) {
    let round = |h: f64| {
        let arc =
            |c: Point, s: Point, e: Point| Segment::Arc(Arc::from_center(c, s, e, Turn::Left, 1e-9).unwrap());
        Path::new(
            vec![
                Segment::line(p(0.0, -h), p(50.0, -h)),
                arc(p(50.0, 0.0), p(50.0, -h), p(50.0, h)),
                Segment::line(p(50.0, h), p(0.0, h)),
                arc(p(0.0, 0.0), p(0.0, h), p(0.0, -h)),
            ],
            true,
        )
        .unwrap()
    };
    (part(vec![round(half)], Keep::Inside), family(&[round(half + 3.0)], 3.0))
}

#[test]
fn cutter_that_is_too_small_leaves_the_difference_all_round() {
    let (part, mut path) = stadium(10.0);
    for m in &mut path.moves {
        (m.radius, m.end_radius) = (2.9, 2.9);
    }
    let found = judged(&part, &path, 0.05);
    assert_eq!(found.excesses.len(), 1);
    assert!(found.excesses[0].whole_path);
    assert!(close(found.excesses[0].height.size, 0.1));
}

#[test]
fn extra_vertices_change_no_figure() {
    let square = |n: u32| {
        let corners = [p(0.0, 0.0), p(10.0, 0.0), p(10.0, 10.0), p(0.0, 10.0)];
        let points: Vec<Point> = (0..4)
            .flat_map(|i| {
                (0..n).map(move |k| corners[i].lerp(corners[(i + 1) % 4], f64::from(k) / f64::from(n)))
            })
            .collect();
        polyline(&points, true)
    };
    let path = family(&[polyline(&[p(-2.0, -2.0), p(12.0, -2.0), p(12.0, 11.0), p(-2.0, 12.0)], true)], 2.0);
    let plain = judged(&part(vec![square(1)], Keep::Inside), &path, 0.05);
    let dense = judged(&part(vec![square(1000)], Keep::Inside), &path, 0.05);
    assert_eq!(plain.gouges.len(), dense.gouges.len());
    assert_eq!(plain.excesses.len(), dense.excesses.len());
    assert!(close(plain.worst_gouge.unwrap().size, dense.worst_gouge.unwrap().size));
    assert!(close(plain.worst_excess.unwrap().size, dense.worst_excess.unwrap().size));
    for (a, b) in plain.excesses.iter().zip(&dense.excesses) {
        let (a, b) = (a.stretch.unwrap(), b.stretch.unwrap());
        assert!(close(a.from, b.from) && close(a.to, b.to), "{a:?} {b:?}");
    }
}

#[test]
fn stray_cut_wholly_inside_the_part_is_a_gouge_by_its_depth_from_the_wall() {
    let plate =
        part(vec![polyline(&[p(0.0, 0.0), p(80.0, 0.0), p(80.0, 40.0), p(0.0, 40.0)], true)], Keep::Inside);
    let round = polyline(&[p(-2.0, -2.0), p(82.0, -2.0), p(82.0, 42.0), p(-2.0, 42.0)], true);
    let stray = polyline(&[p(30.0, 12.0), p(40.0, 15.0)], false);
    let found = judged(&plate, &family(&[round, stray], 2.0), 0.05);
    assert_eq!(found.gouges.len(), 1);
    assert!(close(found.gouges[0].depth.size, 17.0));
    assert!(found.gouges[0].center_inside);
    assert_eq!(found.gouges[0].moves, (4, 4));
    assert!(found.excesses.is_empty());
}

#[test]
fn retraced_path_gives_the_figures_of_the_plain_one() {
    let (part, plain) = stadium(10.0);
    let mut twice = plain.clone();
    for m in &mut twice.moves {
        (m.radius, m.end_radius) = (2.9, 2.9);
    }
    let back: Vec<DiscMove> = twice.moves.iter().rev().map(|m| m.reversed()).collect();
    for _ in 0..12 {
        let again = twice.moves[..4].to_vec();
        twice.moves.extend(again);
        twice.moves.extend_from_slice(&back);
    }
    let found = judged(&part, &twice, 0.05);
    assert_eq!(found.excesses.len(), 1);
    assert!(close(found.excesses[0].height.size, 0.1));
    assert!(found.excesses[0].nearest_move < 4, "the first of equal moves");
    assert!(found.worst_cusp.is_none());
}

#[test]
fn missed_wall_is_one_excess_and_missed_loop_is_never_visited() {
    let outer = polyline(&[p(0.0, 0.0), p(80.0, 0.0), p(80.0, 40.0), p(0.0, 40.0)], true);
    let hole = circle(p(40.0, 20.0), 4.0, Turn::Left);
    let plate = part(vec![outer, hole], Keep::Inside);
    let path = family(&[polyline(&[p(-2.0, -2.0), p(82.0, -2.0), p(82.0, 42.0), p(-2.0, 42.0)], false)], 2.0);
    let found = judged(&plate, &path, 0.05);
    assert_eq!(found.never_visited, [1]);
    assert_eq!(found.excesses.len(), 2);
    assert!(found.excesses.iter().any(|e| e.whole_path && e.stretch.unwrap().path == 1));
    let wall = found.excesses.iter().find(|e| e.stretch.unwrap().path == 0).unwrap();
    // The middle of the missed wall is 20 + 2 from the passes along its neighbours.
    assert!(close(wall.height.size, 20.0), "{}", wall.height.size);
    let only = Request { only_visited: true, ..request(0.05) };
    let found = compare(&plate, &path, &DiscFamily::default(), &only);
    assert_eq!((found.never_visited.len(), found.excesses.len()), (1, 1));
}

#[test]
fn passes_end_on_to_a_wall_leave_cusps_of_the_scallop_height() {
    // Plunges s apart at distance r - 0.1 from the wall cut past it, crest on the wall: at distance e
    // from the wall and half a step along it the clearance is hypot(e, s/2) - r.
    let wall = part(vec![polyline(&[p(-100.0, 0.0), p(100.0, 0.0)], false)], Keep::Right);
    let step = 2.0;
    let plunges = (-50..=50).map(|i| Segment::line(p(f64::from(i) * step, 3.0), p(f64::from(i) * step, 3.0)));
    let moves = plunges.map(|segment| DiscMove::constant(segment, 3.0, MoveIndex(0)));
    let found = judged(&wall, &DiscFamily { moves: moves.collect() }, 0.05);
    let height = 3.0_f64.hypot(1.0) - 3.0;
    assert!(close(found.worst_cusp.unwrap().size, height));
    assert_eq!(found.excesses.len(), 100);
    assert!(found.excesses.iter().all(|e| e.crest.is_some() && close(e.height.size, height)));
    assert!(found.worst_excess.unwrap().size < 1e-9);
}

#[test]
fn rapid_through_the_part_is_hit_and_rapid_along_the_wall_is_not() {
    let (part, path) = stadium(10.0);
    let through = family(&[polyline(&[p(25.0, -60.0), p(25.0, 60.0), p(60.0, 60.0)], false)], 3.0);
    let found = compare(&part, &path, &through, &request(0.05));
    assert_eq!(found.rapids.len(), 1);
    assert!(close(found.rapids[0].depth.size, 13.0));
    assert_eq!(found.rapids[0].rapid, 0);
    let beside = compare(&part, &path, &path, &request(0.05));
    assert!(beside.rapids.is_empty());
}

#[test]
fn allowance_is_taken_off_the_excess_and_not_added_to_the_gouge() {
    let (mut part, path) = stadium(10.0);
    let mut wider = path.clone();
    for m in &mut wider.moves {
        (m.radius, m.end_radius) = (2.7, 2.7);
    }
    part.allowance = 0.3;
    let found = judged(&part, &wider, 1e-6);
    assert!(found.excesses.is_empty() && found.gouges.is_empty());
    let found = judged(&part, &path, 1e-6);
    assert!(found.gouges.is_empty() && found.excesses.is_empty());
}

/// A plate with a rounded corner, a notch and a hole.
fn plate() -> Part {
    let arc = Arc::from_center(p(50.0, 10.0), p(50.0, 0.0), p(60.0, 10.0), Turn::Left, 1e-9).unwrap();
    let outer = vec![
        Segment::line(p(0.0, 0.0), p(50.0, 0.0)),
        Segment::Arc(arc),
        Segment::line(p(60.0, 10.0), p(60.0, 40.0)),
        Segment::line(p(60.0, 40.0), p(35.0, 40.0)),
        Segment::line(p(35.0, 40.0), p(30.0, 25.0)),
        Segment::line(p(30.0, 25.0), p(25.0, 40.0)),
        Segment::line(p(25.0, 40.0), p(0.0, 40.0)),
        Segment::line(p(0.0, 40.0), p(0.0, 0.0)),
    ];
    part(vec![Path::new(outer, true).unwrap(), circle(p(15.0, 15.0), 8.0, Turn::Left)], Keep::Inside)
}

/// Random chains of lines and arcs over and round the plate.
fn random_cuts(rng: &mut fastrand::Rng, radius: f64) -> DiscFamily {
    let mut segments = Vec::new();
    for _ in 0..1 + rng.usize(..3) {
        let mut at = p(rng.f64() * 80.0 - 10.0, rng.f64() * 60.0 - 10.0);
        for _ in 0..1 + rng.usize(..6) {
            let to = at + Vec2::new(rng.f64() * 30.0 - 15.0, rng.f64() * 30.0 - 15.0);
            let bulge = rng.f64() * 3.0 - 1.5;
            segments.push(match rng.bool() {
                true => Segment::line(at, to),
                false => Arc::from_bulge(at, to, bulge).map_or(Segment::line(at, to), Segment::Arc),
            });
            at = to;
        }
    }
    let moves = (0u32..).zip(segments).map(|(i, segment)| DiscMove::constant(segment, radius, MoveIndex(i)));
    DiscFamily { moves: moves.collect() }
}

#[test]
fn gouges_of_random_cuts_hold_every_sample_of_the_definition() {
    let part = plate();
    let mut rng = fastrand::Rng::with_seed(77);
    let limit = 0.05;
    for case in 0..150 {
        let cuts = random_cuts(&mut rng, 2.0);
        let found = judged(&part, &cuts, limit);
        let bound = figure_bound(&part, &cuts, &request(limit));
        let mut greatest = 0.0f64;
        let mut spacing = 0.0f64;
        for (i, m) in cuts.moves.iter().enumerate() {
            for k in 0..=400 {
                let c = m.segment.point_at(f64::from(k) / 400.0);
                let distance =
                    part.contour.segments().map(|(_, s)| s.distance(c)).fold(f64::INFINITY, f64::min);
                let depth = m.radius + if part.contains(c) { distance } else { -distance };
                greatest = greatest.max(depth);
                if depth > limit + 1e-6 {
                    let told = found
                        .gouges
                        .iter()
                        .any(|g| g.moves.0 <= i && i <= g.moves.1 && depth <= g.depth.size + bound);
                    assert!(told, "case {case}: {depth} at {c} of move {i} is in no gouge");
                }
            }
            spacing = spacing.max(m.segment.length() / 400.0);
        }
        let worst = found.worst_gouge.unwrap().size;
        assert!(greatest <= worst + bound && worst <= greatest + spacing, "case {case}: {greatest} {worst}");
        for g in &found.gouges {
            let distance = (g.center - g.at).hypot();
            let reach = 2.0 + if part.contains(g.center) { distance } else { -distance };
            assert!((reach - g.depth.size).abs() <= 2.0 * bound, "case {case}: {g:?} reaches {reach}");
            assert!(g.stretch.from <= g.stretch.to);
        }
    }
}

#[test]
fn excesses_of_random_cuts_hold_every_sample_of_the_definition() {
    let part = plate();
    let mut rng = fastrand::Rng::with_seed(78);
    let limit = 0.05;
    for case in 0..60 {
        let cuts = random_cuts(&mut rng, 6.0);
        let found = judged(&part, &cuts, limit);
        let bound = figure_bound(&part, &cuts, &request(limit));
        for (number, path) in part.contour.paths().iter().enumerate() {
            let length = path.length();
            let mut start = 0.0;
            for s in path.segments() {
                for k in 0..=200 {
                    let q = s.point_at(f64::from(k) / 200.0);
                    let way = start + s.length() * f64::from(k) / 200.0;
                    let nearest = cuts.moves.iter().map(|m| m.segment.distance(q) - m.radius);
                    let d = nearest.fold(f64::INFINITY, f64::min);
                    if d <= limit + 1e-6 {
                        continue;
                    }
                    let told = found.excesses.iter().any(|e| {
                        let stretch = e.stretch.unwrap();
                        let holds = |w: f64| stretch.from <= w + 1e-9 && w <= stretch.to + 1e-9;
                        stretch.path == number && (holds(way) || holds(way + length))
                    });
                    assert!(told, "case {case}: {d} at {q}, {way} along path {number}, is in no excess");
                    let worst =
                        found.worst_excess.unwrap().size.max(found.worst_cusp.map_or(0.0, |f| f.size));
                    assert!(d <= worst + bound, "case {case}");
                }
                start += s.length();
            }
        }
        for e in &found.excesses {
            let nearest = cuts.moves[e.nearest_move].segment.distance(e.at) - 6.0;
            assert!((nearest - e.height.size).abs() <= 2.0 * bound, "case {case}: {e:?} {nearest}");
        }
    }
}

#[test]
fn figures_are_the_same_for_moved_mirrored_and_reversed_inputs() {
    use crate::geometry::Affine;
    let base = plate();
    let mut rng = fastrand::Rng::with_seed(79);
    let maps = [Affine::translate((1e6, -1e6)), Affine::rotate(0.7), Affine::FLIP_Y, Affine::scale(0.01)];
    for case in 0..40 {
        let cuts = random_cuts(&mut rng, 4.0);
        let plain = judged(&base, &cuts, 0.05);
        for (number, map) in maps.iter().enumerate() {
            let scale = map.determinant().abs().sqrt();
            let contour = base.contour.mapped(*map).unwrap();
            let origins = base.origins.clone();
            let part = Part::new(contour, Keep::Inside, 0.0, origins).unwrap();
            let moves = cuts.moves.iter().rev().map(|m| DiscMove {
                segment: m.segment.mapped(*map).unwrap().reversed(),
                radius: m.radius * scale,
                end_radius: m.end_radius * scale,
                ..*m
            });
            let extent = if number == 0 { 1e6 } else { 100.0 };
            let request = Request { tolerances: Tolerances::for_extent(extent), ..request(0.05 * scale) };
            let found =
                compare(&part, &DiscFamily { moves: moves.collect() }, &DiscFamily::default(), &request);
            let (a, b) = (plain.worst_gouge.unwrap(), found.worst_gouge.unwrap());
            let allowed = scale * a.bound + b.bound + 1e-9;
            assert!((a.size * scale - b.size).abs() <= allowed, "case {case} map {number}: {a:?} {b:?}");
            assert_eq!(plain.gouges.len(), found.gouges.len(), "case {case} map {number}");
            let greatest = |c: &Comparison| {
                c.worst_excess.map_or(0.0, |f| f.size).max(c.worst_cusp.map_or(0.0, |f| f.size))
            };
            let (a, b) = (greatest(&plain) * scale, greatest(&found));
            assert!((a - b).abs() <= allowed, "case {case} map {number}: {a} {b}");
        }
    }
}
