//! Inside corners: what stays on the bisector, how much, how far along the walls; local and global
//! interference; two ways round an outside corner.

use std::f64::consts::{FRAC_PI_2, PI, SQRT_2};

use crate::build::*;
use crate::sheet::Sheet;
use sweptedge::compare::FoldKind;
use sweptedge::geometry::{Path, Segment, Turn, Vec2};
use sweptedge::part::{Keep, Part};

const CORNER: Sheet = Sheet::new(
    "Inside corners of a sharp or filleted wall, r = 1",
    "Derived, elementary: on the bisector (r - rc)(1/sin(th/2) - 1), area (r^2 - rc^2)(cot(th/2) - (pi - th)/2), \
     along each wall r cot(th/2); 90 degrees: r (sqrt 2 - 1).",
);

/// A wedge-shaped opening of `angle` at the origin with walls 40 long, its corner rounded by `fillet`;
/// and the path of a cutter of radius 1 that touches both walls.
fn wedge(angle: f64, fillet: f64) -> (Part, Vec<Segment>) {
    let half = 0.5 * angle;
    let (u, v) = (Vec2::from_angle(half), Vec2::from_angle(-half));
    let at = |d: Vec2, l: f64| (d * l).to_point();
    let contour: Path = if fillet > 0.0 {
        let set = fillet / half.tan();
        let rounding = arc(p(fillet / half.sin(), 0.0), at(u, set), at(v, set), Turn::Left);
        open(vec![Segment::line(at(u, 40.0), at(u, set)), rounding, Segment::line(at(v, set), at(v, 40.0))])
    } else {
        open(lines(&[at(u, 40.0), p(0.0, 0.0), at(v, 40.0)]))
    };
    let tip = p(1.0 / half.sin(), 0.0);
    (part(contour, Keep::Right), lines(&[tip + u * 45.0, tip, tip + v * 45.0]))
}

#[test]
fn sharp_corners_of_30_to_150_degrees() {
    let listed = [
        (30.0f64, 2.863_703_305_16, 2.423_053_868_57, 3.732_050_807_57),
        (60.0, 1.0, 0.684_853_256_372, 1.732_050_807_57),
        (90.0, 0.414_213_562_373, 0.214_601_836_603, 1.0),
        (120.0, 0.154_700_538_379, 0.053_751_493_591_3, 0.577_350_269_19),
        (135.0, 0.082_392_200_292_4, 0.021_514_480_674_4, 0.414_213_562_373),
        (150.0, 0.035_276_180_410_1, 0.006_149_804_631_97, 0.267_949_192_431),
    ];
    for (degrees, distance, area, setback) in listed {
        let (part, path) = wedge(degrees.to_radians(), 0.0);
        let found = judged(&part, &path, 1.0, 1e-3);
        assert_eq!(found.excesses.len(), 1, "{degrees}: {found:#?}");
        let excess = &found.excesses[0];
        CORNER.figure(format!("{degrees} degrees: on the bisector"), distance, excess.height, 1e-8);
        CORNER.within(format!("{degrees} degrees: place"), excess.at.to_vec2().hypot(), 1e-9);
        let region = excess.region.as_ref().unwrap();
        CORNER.holds(format!("{degrees} degrees: area"), area, region.area, 1e-9);
        let nodes = region.outline.iter().flat_map(|path| path.segments().iter().map(Segment::start));
        let farthest = nodes.map(|n| n.to_vec2().hypot()).fold(0.0, f64::max);
        CORNER.holds(format!("{degrees} degrees: along the wall"), setback, farthest, 1e-9);
        CORNER.figure(format!("{degrees} degrees: gouge"), 0.0, found.worst_gouge.unwrap(), 1e-8);
    }
}

#[test]
fn corners_with_a_fillet_smaller_than_the_cutter() {
    for (degrees, fillet) in
        [(30.0f64, 0.5), (60.0, 0.25), (90.0, 0.4), (120.0, 0.9), (135.0, 0.2), (150.0, 0.1)]
    {
        let angle = degrees.to_radians();
        let (part, path) = wedge(angle, fillet);
        let found = judged(&part, &path, 1.0, 1e-3);
        assert_eq!(found.excesses.len(), 1, "{degrees}: {found:#?}");
        let excess = &found.excesses[0];
        let distance = (1.0 - fillet) * (1.0 / (0.5 * angle).sin() - 1.0);
        let area = (1.0 - fillet * fillet) * (1.0 / (0.5 * angle).tan() - 0.5 * (PI - angle));
        let name = format!("{degrees} degrees, fillet {fillet}");
        CORNER.figure(format!("{name}: on the bisector"), distance, excess.height, 1e-8);
        CORNER.holds(format!("{name}: area"), area, excess.region.as_ref().unwrap().area, 1e-9);
    }
}

const INTERFERENCE: Sheet = Sheet::new(
    "Local and global interference",
    "T. R. Kramer, F. M. Proctor, E. Messina, NISTIR 6556, National Institute of Standards and Technology, 2000, appendix B.1 and \
     figure 2 (rounded path keeps contact, extended path leaves it); the depths are derived.",
);

#[test]
fn fillet_of_3_under_a_cutter_of_5_untrimmed_and_trimmed() {
    // Walls along x = 57 + 3 and y = 0 with a fillet of 3 about (57, 3), open chain, material outside.
    let contour = open(vec![
        Segment::line(p(0.0, 0.0), p(57.0, 0.0)),
        arc(p(57.0, 3.0), p(57.0, 0.0), p(60.0, 3.0), Turn::Left),
        Segment::line(p(60.0, 3.0), p(60.0, 60.0)),
    ]);
    let part = part(contour, Keep::Right);
    // Raw offset: each wall's parallel, and the fillet's reversed arc of radius 5 - 3 between them.
    let untrimmed = [
        Segment::line(p(-5.0, 5.0), p(57.0, 5.0)),
        arc(p(57.0, 3.0), p(57.0, 5.0), p(55.0, 3.0), Turn::Left),
        Segment::line(p(55.0, 3.0), p(55.0, 65.0)),
    ];
    let found = judged(&part, &untrimmed, 5.0, 1e-3);
    INTERFERENCE.figure("fillet 3, cutter 5, untrimmed: gouge", 2.0, found.worst_gouge.unwrap(), 1e-8);
    let kinds: Vec<String> = found.folds.iter().map(|f| format!("{:?}", f.kind)).collect();
    INTERFERENCE.says("fillet 3, cutter 5, untrimmed: folds", "Loop", &kinds.join(" "));
    let off = (found.folds[0].at - p(55.0, 5.0)).hypot();
    INTERFERENCE.within("fillet 3, cutter 5, untrimmed: place of the crossing", off, 1e-9);
    let trimmed = lines(&[p(-5.0, 5.0), p(55.0, 5.0), p(55.0, 65.0)]);
    let found = judged(&part, &trimmed, 5.0, 1e-3);
    INTERFERENCE.figure("fillet 3, cutter 5, trimmed: gouge", 0.0, found.worst_gouge.unwrap(), 1e-8);
    let excess = found.excesses[0].height;
    INTERFERENCE.figure("fillet 3, cutter 5, trimmed: excess", 2.0 * (SQRT_2 - 1.0), excess, 1e-8);
    INTERFERENCE.says("fillet 3, cutter 5, trimmed: folds", "0", &found.folds.len().to_string());
}

#[test]
fn slot_narrower_than_the_cutter_is_cut_into_on_both_sides() {
    // Width 6, driven on its centre line by a cutter of 6.4: 0.2 into each side.
    let part = part(closed(rectangle(40.0, 6.0, 0.0)), Keep::Outside);
    let found = judged(&part, &lines(&[p(10.0, 3.0), p(30.0, 3.0)]), 3.2, 0.01);
    INTERFERENCE.figure("slot of 6, cutter of 6.4: gouge", 0.2, found.worst_gouge.unwrap(), 1e-8);
    let region = swept(&lines(&[p(10.0, 3.0), p(30.0, 3.0)]), 3.2);
    INTERFERENCE.holds("slot of 6, cutter of 6.4: width cut", 6.4, edge_height(&region), 1e-9);
}

/// Height of the box round a region.
fn edge_height(region: &sweptedge::envelope::SweptRegion) -> f64 {
    let boxes = region.loops.iter().map(sweptedge::envelope::EdgeLoop::bounds);
    boxes.reduce(|a, b| a.union(b)).unwrap().height()
}

#[test]
fn two_ways_round_an_outside_corner_leave_the_same_edge() {
    let part = part(open(lines(&[p(-20.0, 0.0), p(0.0, 0.0), p(0.0, -20.0)])), Keep::Right);
    let (a, b) = (p(0.0, 3.0), p(3.0, 0.0));
    let (lead, leave) = (Segment::line(p(-25.0, 3.0), a), Segment::line(b, p(3.0, -25.0)));
    let rolled = vec![lead, arc(p(0.0, 0.0), a, b, Turn::Right), leave];
    let tip = p(3.0, 3.0);
    let mitred = vec![lead, Segment::line(a, tip), Segment::line(tip, b), leave];
    let between = |path: &[Segment]| path[1..path.len() - 1].iter().map(Segment::length).sum::<f64>();
    INTERFERENCE.holds("way round by an arc, r = 3", 3.0 * FRAC_PI_2, between(&rolled), 1e-9);
    INTERFERENCE.holds("way round by a mitre, r = 3", 6.0, between(&mitred), 1e-9);
    INTERFERENCE.holds("mitre's tip from the corner", 3.0 * SQRT_2, tip.to_vec2().hypot(), 1e-9);
    for (name, path) in [("arc", &rolled), ("mitre", &mitred)] {
        let found = judged(&part, path, 3.0, 1e-3);
        INTERFERENCE.figure(format!("by {name}: gouge"), 0.0, found.worst_gouge.unwrap(), 1e-8);
        INTERFERENCE.figure(format!("by {name}: excess"), 0.0, found.worst_excess.unwrap(), 1e-8);
        let folds = found.folds.iter().filter(|f| f.kind == FoldKind::TightTurn).count();
        INTERFERENCE.says(format!("by {name}: tight turns"), "0", &folds.to_string());
    }
}
