//! Profile of a line: the zone is the envelope of circles on the true form, half its width to each side.

use std::f64::consts::SQRT_2;

use crate::build::*;
use crate::sheet::Sheet;
use sweptedge::part::Keep;

const PROFILE: Sheet = Sheet::new(
    "Profile of a line",
    "ISO 1101 and ISO 1660 as explained by G. Henzold, Geometrical Dimensioning and Tolerancing for Design, \
     Manufacturing and Inspection, 2nd ed. 2006, ch. 4: the zone is bounded by the envelopes of circles of diameter \
     t with centres on the true form, so each deviation is at most t/2.",
);

#[test]
fn path_off_by_e_deviates_by_e_and_passes_when_e_is_at_most_half_the_zone() {
    let part = part(closed(rectangle(30.0, 20.0, 0.0)), Keep::Inside);
    let half_zone = 0.05;
    for e in [0.049, -0.049, 0.051, -0.051] {
        let found = judged(&part, &rectangle(30.0, 20.0, 4.0 + e), 4.0, half_zone);
        let (gouge, excess) = (found.worst_gouge.unwrap(), found.worst_excess.unwrap());
        PROFILE.figure(format!("path off by {e}: gouge"), (-e).max(0.0), gouge, 1e-8);
        PROFILE.figure(format!("path off by {e}: excess"), e.max(0.0), excess, 1e-8);
        let passes = found.gouges.is_empty() && found.excesses.is_empty();
        let expected = if e.abs() <= half_zone { "within" } else { "outside" };
        let got = if passes { "within" } else { "outside" };
        PROFILE.says(format!("path off by {e}, zone of 0.1 wide"), expected, got);
    }
}

#[test]
fn zone_of_0_2_is_round_outside_of_a_corner_and_sharp_inside() {
    let zone = swept(&rectangle(30.0, 20.0, 0.0), 0.1);
    let along = |degrees: f64| {
        let way = polar(1.0, degrees).to_vec2();
        // The zone's boundary on the ray from the corner (0, 0), by halving.
        let (mut near, mut far) = (0.0f64, 1.0);
        for _ in 0..60 {
            let middle = 0.5 * (near + far);
            let q = p(0.0, 0.0) + way * middle;
            let covered = rectangle(30.0, 20.0, 0.0).iter().any(|s| s.distance(q) <= 0.1);
            if covered { near = middle } else { far = middle }
        }
        p(0.0, 0.0) + way * near
    };
    let (outer, inner) = (along(225.0), along(45.0));
    PROFILE.holds("outer boundary from the corner, ISO: t/2", 0.1, outer.to_vec2().hypot(), 1e-9);
    PROFILE.within("outer boundary lies on the swept edge", distance_to_edge(&zone, outer), 1e-9);
    PROFILE.holds("inner boundary from the corner: t/2 sqrt 2", 0.1 * SQRT_2, inner.to_vec2().hypot(), 1e-9);
    PROFILE.within("inner boundary lies on the swept edge", distance_to_edge(&zone, inner), 1e-9);
    // A mitred boundary would stand at 0.1 sqrt 2 outside: there the zone must not reach.
    let mitre = p(-0.1, -0.1);
    PROFILE.holds("a mitre would stand off by", 0.1 * (SQRT_2 - 1.0), distance_to_edge(&zone, mitre), 1e-9);
}

#[test]
fn corner_of_a_path_that_is_too_far_out_deviates_by_as_much_as_the_walls() {
    // At the corner too the deviation is measured to the nearest circle of the cutter.
    let part = part(closed(rectangle(30.0, 20.0, 0.0)), Keep::Inside);
    let found = judged(&part, &rectangle(30.0, 20.0, 4.03), 4.0, 0.01);
    let one = found.excesses.len() == 1 && found.excesses[0].whole_path;
    PROFILE.says(
        "path 0.03 too far out",
        "one stretch, whole loop",
        if one { "one stretch, whole loop" } else { "other" },
    );
    PROFILE.figure("path 0.03 too far out: greatest", 0.03, found.excesses[0].height, 1e-8);
}
