use std::f64::consts::PI;

use super::*;
use crate::geometry::{Turn, Vec2};
use crate::input::Severity;

fn strand(segment: Segment, line: usize) -> Strand {
    let place = Place { file: "part.dxf".into(), line: Some(line), ..Place::default() };
    Strand { segments: vec![segment], closed: false, layer: None, place }
}

fn strands(segments: &[Segment]) -> Vec<Strand> {
    segments.iter().enumerate().map(|(i, s)| strand(*s, i + 1)).collect()
}

fn p(x: f64, y: f64) -> Point {
    Point::new(x, y)
}

fn joined(segments: &[Segment]) -> Joined {
    join(strands(segments), Gaps::new(0.0, 1.0), "part.dxf").unwrap()
}

fn refused(segments: &[Segment]) -> Refusal {
    join(strands(segments), Gaps::new(0.0, 1.0), "part.dxf").unwrap_err()
}

/// Slot 40 x 20 with round ends and a square window in it; loose.
fn slot() -> Vec<Segment> {
    let arc = |c, s, e| Arc::from_center(c, s, e, Turn::Left, 1e-9).unwrap().into();
    vec![
        Segment::line(p(0.0, -10.0), p(40.0, -10.0)),
        arc(p(40.0, 0.0), p(40.0, -10.0), p(40.0, 10.0)),
        Segment::line(p(40.0, 10.0), p(0.0, 10.0)),
        arc(p(0.0, 0.0), p(0.0, 10.0), p(0.0, -10.0)),
        Segment::line(p(18.0, -2.0), p(22.0, -2.0)),
        Segment::line(p(22.0, -2.0), p(22.0, 2.0)),
        Segment::line(p(22.0, 2.0), p(18.0, 2.0)),
        Segment::line(p(18.0, 2.0), p(18.0, -2.0)),
    ]
}

fn areas(joined: &Joined) -> Vec<f64> {
    let mut areas: Vec<f64> = joined.paths.iter().map(|p| p.signed_area().abs()).collect();
    areas.sort_by(f64::total_cmp);
    areas
}

#[test]
fn any_order_and_direction_gives_the_same_loops() {
    let mut rng = fastrand::Rng::with_seed(21);
    for _ in 0..200 {
        let mut segments = slot();
        rng.shuffle(&mut segments);
        for s in &mut segments {
            if rng.bool() {
                *s = s.reversed();
            }
        }
        let joined = joined(&segments);
        let areas = areas(&joined);
        assert_eq!(joined.paths.len(), 2);
        assert!(joined.paths.iter().all(Path::is_closed));
        assert!((areas[0] - 16.0).abs() < 1e-9 && (areas[1] - 800.0 - 100.0 * PI).abs() < 1e-9);
        assert_eq!(joined.problems, []);
        assert!(joined.moved.abs() < 1e-300);
        // The first strand of the file leads, in its own direction.
        assert_eq!(joined.paths[0].segments()[0], segments[0]);
        assert_eq!(joined.origins[0].line, Some(1));
    }
}

#[test]
fn gaps_within_the_limit_are_closed_and_the_greatest_is_told() {
    for (gap, told) in [(1e-12, false), (1e-9, false), (1e-7, true), (1e-3, true), (9.9e-3, true)] {
        let mut segments = slot();
        segments[0] = Segment::line(p(0.0, -10.0), p(40.0 - gap, -10.0));
        let joined = joined(&segments);
        assert!((areas(&joined)[1] - 800.0 - 100.0 * PI).abs() < 20.0 * gap + 1e-9, "{gap}");
        assert!(joined.moved <= gap * 1.001 + 1e-14 && joined.moved > 0.5 * gap, "{gap}: {}", joined.moved);
        assert_eq!(joined.problems.len(), usize::from(told), "{gap}: {:?}", joined.problems);
        if told {
            assert!(joined.problems[0].found.starts_with("a gap was closed"), "{}", joined.problems[0].found);
            assert!(joined.problems[0].found.contains("(40.000000, -10.000000)"));
        }
        // The line came to the arc: the arc is the drawing's to the last digit.
        let arcs = joined.paths[0].segments().iter().filter(|s| matches!(s, Segment::Arc(_)));
        assert!(arcs.zip([slot()[1], slot()[3]]).all(|(a, b)| *a == b));
    }
}

#[test]
fn arcs_with_a_gap_meet_in_the_middle_and_keep_their_centers() {
    let half = |y: f64, turn: f64| Segment::Arc(Arc::from_angles(p(0.0, y), 5.0, turn, PI).unwrap());
    let joined = joined(&[half(0.0, 0.0), half(-0.004, PI)]);
    assert!(joined.paths[0].is_closed());
    assert!((joined.moved - 0.002).abs() < 1e-9);
    let centers: Vec<f64> = joined.paths[0]
        .segments()
        .iter()
        .map(|s| if let Segment::Arc(a) = s { a.center().y } else { panic!() })
        .collect();
    assert_eq!(centers, [0.0, -0.004]);
    assert!(joined.paths[0].segments().iter().all(|s| matches!(s, Segment::Arc(a) if a.residual() < 0.002)));
}

#[test]
fn larger_gaps_are_refused_with_both_ends() {
    let mut segments = slot();
    segments[0] = Segment::line(p(0.0, -10.0), p(39.5, -10.0));
    let problems = refused(&segments);
    assert_eq!(problems.len(), 1);
    let found = &problems[0].found;
    assert!(
        found.contains("(39.500000, -10.000000)") && found.contains("(40.000000, -10.000000)"),
        "{found}"
    );
    assert!(found.contains("0.500000 apart"));
    assert_eq!(problems[0].severity, Severity::Error);
    // Two such gaps break the loop into two chains and are both named.
    segments[2] = Segment::line(p(40.0, 10.0), p(0.5, 10.0));
    assert_eq!(refused(&segments).len(), 2);
    // A gap of a hundredth of the chain's length, too.
    segments[2] = Segment::line(p(4000.0, 10.0), p(0.0, 10.0));
    let long = [Segment::line(p(0.0, 0.0), p(900.0, 0.0)), Segment::line(p(900.0, 0.0), p(5.0, 5.0))];
    assert!(refused(&long)[0].found.contains("does not close"));
}

#[test]
fn open_profiles_stay_open_however_short() {
    let profile = [Segment::line(p(0.0, 0.0), p(0.5, 0.0)), Segment::line(p(0.5, 0.0), p(0.8, 0.3))];
    let joined = joined(&profile);
    assert_eq!(joined.paths.len(), 1);
    assert!(!joined.paths[0].is_closed());
    // Seen in the direction of the first strand, though the second one was drawn the other way.
    let turned = [profile[1], profile[0].reversed()];
    let path = &join(strands(&turned), Gaps::new(0.0, 1.0), "x").unwrap().paths[0];
    assert_eq!(path.segments(), [profile[0], profile[1]]);
}

#[test]
fn three_ends_at_one_place_are_refused_with_the_place_and_lines() {
    for shift in [0.0, 1e-7, 5e-3] {
        let mut segments = slot();
        segments.push(Segment::line(p(40.0 + shift, 10.0), p(60.0, 30.0)));
        let problems = refused(&segments);
        assert!(problems[0].found.starts_with("3 ends meet at (40.0"), "{shift}: {}", problems[0].found);
        if shift < 1e-3 {
            assert!(problems[0].found.ends_with("(lines 2, 3, 9)"), "{}", problems[0].found);
        }
    }
}

#[test]
fn copies_and_points_are_dropped_and_told() {
    let mut segments = slot();
    segments.push(segments[1]);
    segments.push(segments[2].reversed());
    segments.push(Segment::line(p(22.0, 2.0), p(22.0, 2.0)));
    let joined = joined(&segments);
    assert_eq!(joined.paths.len(), 2);
    let found: Vec<_> = joined.problems.iter().map(|p| p.found.as_str()).collect();
    assert_eq!(
        found,
        [
            "an entity (or a piece of one) without length was left out",
            "2 entities drawn twice were left out, the first one here"
        ]
    );
    assert_eq!(joined.problems[1].place.line, Some(9));
}

#[test]
fn an_arc_of_almost_a_turn_closes_to_a_circle() {
    let arc = Arc::from_angles(p(3.0, 4.0), 10.0, 0.2, 2.0 * PI - 5e-4).unwrap();
    let joined = joined(&[arc.into()]);
    assert!(joined.paths[0].is_closed());
    assert!((joined.paths[0].signed_area() - 100.0 * PI).abs() < 0.01);
    // An arc that short is dropped, never taken for the whole turn.
    let short = Arc::from_angles(p(3.0, 4.0), 10.0, 0.2, 1e-9).unwrap();
    let mut with_slot = slot();
    with_slot.push(short.into());
    assert_eq!(areas(&super::tests::joined(&with_slot)).len(), 2);
}

#[test]
fn gap_lengths_scale_with_the_unit() {
    let inch = Gaps::new(0.0, 25.4);
    assert!((inch.join * 25.4 - 0.01).abs() < 1e-15 && (inch.almost * 25.4 - 1.0).abs() < 1e-12);
    assert_eq!(Gaps::new(f64::NAN, 1.0), Gaps::new(0.0, 1.0));
}

#[test]
fn a_hundred_thousand_loose_entities_are_joined_in_time() {
    let mut rng = fastrand::Rng::with_seed(22);
    let mut segments = Vec::new();
    for k in 0..250u32 {
        let center = p(f64::from(k % 16) * 30.0, f64::from(k / 16) * 30.0);
        let at = |i: u32| center + Vec2::from_angle(f64::from(i % 400) * 2.0 * PI / 400.0) * 12.0;
        for i in 0..400 {
            let scatter = Vec2::new(rng.f64() - 0.5, rng.f64() - 0.5) * 1e-6;
            segments.push(Segment::line(at(i) + scatter, at(i + 1)));
        }
    }
    rng.shuffle(&mut segments);
    let start = std::time::Instant::now();
    let joined = joined(&segments);
    let took = start.elapsed();
    assert_eq!(joined.paths.len(), 250);
    assert!(joined.paths.iter().all(|p| p.is_closed() && p.segments().len() == 400));
    // Generous for a busy machine; anything quadratic would take minutes.
    assert!(took.as_secs_f64() < 5.0, "{took:?}");
}
