//! Envelopes of circles of varying radius that classical geometry names, as swept edges.
//!
//! Sources beside each test. The closed forms here share no code with the sweep: envelope points come from
//! the named curve, exposure from a plain scan over the circles.

#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test may stop at the first surprise"
)]

mod named;
#[path = "../sheet/mod.rs"]
mod sheet;

use std::f64::consts::{PI, TAU};

use named::{By, E, Named, Through, off_edge};
use sheet::Sheet;
use sweptedge::envelope::{SweptRegion, sweep, sweep_laws};
use sweptedge::geometry::{Point, Segment, Vec2};
use sweptedge::program::MoveIndex;
use sweptedge::view::{DiscFamily, DiscLaw, DiscMove, Lean, departure_by_second_derivatives};

const BELT: Sheet = Sheet::new(
    "Radius linear along a line",
    "Common outer tangents of two circles (belt formula); envelope of circles as in the encyclopedic entry \
     Channel surface, section Canal surface.",
);
const CONICS: Sheet = Sheet::new(
    "Bitangent circles of a conic",
    "H. Blum 1967; any text on the medial axis and the evolute (from memory, verified by the envelope condition).",
);
const NEPHROID: Sheet = Sheet::new(
    "Circles on a circle that touch a diameter of it",
    "S. Dutch, Nephroid; encyclopedic entry Nephroid, envelope of a pencil of circles and metric properties.",
);
const LIMACONS: Sheet = Sheet::new(
    "Circles on a circle through a point",
    "D. Joseph, Limacons as Envelopes of Circles, 2011; D. Darling, Cardioid.",
);
const PARABOLA: Sheet = Sheet::new(
    "Circles on a parabola through a point of its axis",
    "E. W. Weisstein, CRC Concise Encyclopedia of Mathematics, Parabola Pedal Curve.",
);
const FOCUS: Sheet = Sheet::new(
    "Circles on a conic through a focus",
    "Reflection property of the conics (from memory; any text on conics).",
);
const LEMNISCATE: Sheet = Sheet::new(
    "Circles on a rectangular hyperbola through its center",
    "J. D. Cook, Lemniscate, 2023; union of the two end circles by inversion.",
);
const INVOLUTE: Sheet = Sheet::new(
    "Parallel of an involute",
    "C. Huygens, Horologium Oscillatorium, 1673 (from memory; any gear text).",
);

fn p(x: f64, y: f64) -> Point {
    Point::new(x, y)
}

fn taper(from: Point, radius: f64, to: Point, end_radius: f64) -> SweptRegion {
    let segment = Segment::line(from, to);
    let family = DiscFamily { moves: vec![DiscMove { segment, radius, end_radius, source: MoveIndex(0) }] };
    let region = sweep(&family).unwrap();
    region.check_invariants(&family).unwrap();
    region
}

fn has_joint(region: &SweptRegion, q: Point, within: f64) -> bool {
    region.segments().any(|s| (s.start() - q).hypot() <= within)
}

fn assert_area(sheet: Sheet, name: &str, region: &SweptRegion, expected: f64) {
    sheet.holds(format!("{name}: area"), expected, region.area(), region.bound * region.perimeter());
}

/// Hull of two discs (belt formula).
#[test]
fn tapered_cut_has_the_tangents_area_and_perimeter_of_the_belt_formula() {
    let region = taper(p(0.0, 0.0), 1.0, p(10.0, 0.0), 3.0);
    BELT.holds("discs of 1 and 3, 10 apart: area", 56.510_662_518_8, region.area(), 1e-9);
    BELT.holds("discs of 1 and 3, 10 apart: perimeter", 32.967_720_239_8, region.perimeter(), 1e-9);
    for (x, y) in [(-0.2, 0.979_795_897_113), (9.4, 2.939_387_691_34)] {
        assert!(has_joint(&region, p(x, y), 1e-11) && has_joint(&region, p(x, -y), 1e-11));
    }
    let lines = region.segments().filter(|s| matches!(s, Segment::Line(_)));
    for s in lines {
        let d = s.tangent_at(0.5);
        let angle = (d.y / d.x).atan().abs().to_degrees();
        BELT.holds("discs of 1 and 3, 10 apart: half angle, degrees", 11.536_959_032_8, angle, 1e-9);
    }
}

/// Bitangent circles of a wedge (H. Blum 1967; any text on the medial axis).
#[test]
fn circles_in_a_wedge_give_its_straight_sides_from_a_point_on() {
    let b = 20f64.to_radians();
    let region = taper(p(0.0, 0.0), 0.0, p(30.0, 0.0), 30.0 * b.sin());
    assert!(has_joint(&region, p(26.490_666_646_8, 9.641_814_145_3), 1e-9));
    assert!(has_joint(&region, p(0.0, 0.0), 1e-9));
    assert_eq!(region.pieces().count(), 3, "two sides and one arc");
}

/// Bitangent circles of the parabola y = x^2: c = (0, y), r = sqrt(y - 1/4), contact (sqrt(y - 1/2), y - 1/2).
#[test]
fn bitangent_circles_of_a_parabola_give_it_back() {
    let (low, high) = (0.5, 5.0);
    let y = |t: f64| low + (high - low) * t;
    let law = By(
        |t| (p(0.0, y(t)), (y(t) - 0.25).sqrt()),
        |a, b| {
            let second = 0.25 * (y(a) - 0.25).powf(-1.5) * (high - low) * (high - low);
            departure_by_second_derivatives(0.0, second, b - a)
        },
    );
    let contact = |y: f64| p((y - 0.5).sqrt(), y - 0.5);
    assert!((contact(1.0) - p(0.5f64.sqrt(), 0.5)).hypot() < 1e-11);
    let envelope = (0..=200).map(|i| contact(y(f64::from(i) / 200.0)));
    let envelope = envelope.flat_map(|q| [q, p(-q.x, q.y)]).collect();
    let equation = |q: Point| q.y - q.x * q.x;
    Named {
        sheet: CONICS,
        name: "parabola",
        laws: vec![&law],
        envelope,
        equation: &equation,
        apart: vec![],
        open: true,
    }
    .check();
}

/// Bitangent circles of an ellipse between its osculating circles: their union is the ellipse.
#[test]
fn bitangent_circles_of_an_ellipse_give_it_back() {
    let (a, b) = (40.0f64, 20.0f64);
    let f2 = a * a - b * b;
    let reach = f2 / a;
    let x = |t: f64| reach * (2.0 * t - 1.0);
    let law = By(
        |t| (p(x(t), 0.0), b * (1.0 - x(t) * x(t) / f2).sqrt()),
        |from, to| {
            let far = x(from).abs().max(x(to).abs());
            let second = b / f2 * (1.0 - far * far / f2).powf(-1.5) * 4.0 * reach * reach;
            departure_by_second_derivatives(0.0, second, to - from)
        },
    );
    let contact = |x: f64, sign: f64| {
        let x = x * a * a / f2;
        p(x, sign * b * (1.0 - x * x / (a * a)).max(0.0).sqrt())
    };
    assert!((contact(10.0, 1.0) - p(13.333_333_333_3, 18.856_180_831_6)).hypot() < 1e-9);
    let envelope = (0..=200).flat_map(|i| [1.0, -1.0].map(|s| contact(x(f64::from(i) / 200.0), s))).collect();
    let equation = |q: Point| q.x * q.x / (a * a) + q.y * q.y / (b * b) - 1.0;
    let region = Named {
        sheet: CONICS,
        name: "ellipse 40, 20",
        laws: vec![&law],
        envelope,
        equation: &equation,
        apart: vec![],
        open: true,
    }
    .check();
    assert_area(CONICS, "ellipse 40, 20", &region, PI * a * b);
}

/// S. Dutch, "Nephroid"; the same statement in the encyclopedic entry: circles centred on a circle of radius
/// 2a that touch a diameter of it.
#[test]
fn circles_that_touch_a_diameter_give_the_nephroid() {
    let a = 1.0f64;
    let half = |from: f64| {
        By(
            move |t: f64| {
                let u = from + PI * t;
                (p(2.0 * a * u.cos(), 2.0 * a * u.sin()), 2.0 * a * (PI * t).sin())
            },
            move |x, y| departure_by_second_derivatives(2.0 * a * PI * PI, 2.0 * a * PI * PI, y - x),
        )
    };
    let (upper, lower) = (half(0.0), half(PI));
    let point = |u: f64| p(a * (3.0 * u.cos() - (3.0 * u).cos()), a * (3.0 * u.sin() - (3.0 * u).sin()));
    for (u, x, y) in [(30.0f64, 2.598_076_211_35, 0.5), (60.0, 2.5, 2.598_076_211_35), (90.0, 0.0, 4.0)] {
        assert!((point(u.to_radians()) - p(x, y)).hypot() < 1e-10);
    }
    let envelope = (0..360).map(|i| point(f64::from(i).to_radians())).collect();
    let equation = |q: Point| (q.x * q.x + q.y * q.y - 4.0 * a * a).powi(3) - 108.0 * a.powi(4) * q.y * q.y;
    let apart = vec![p(2.0 * a, 0.0), p(-2.0 * a, 0.0)];
    let laws: Vec<&dyn DiscLaw> = vec![&upper, &lower];
    let region =
        Named { sheet: NEPHROID, name: "nephroid", laws, envelope, equation: &equation, apart, open: false }
            .check();
    assert_area(NEPHROID, "nephroid", &region, 37.699_111_843_1);
    NEPHROID.holds("nephroid: length", 24.0 * a, region.perimeter(), 0.01);
}

/// A curve of centres with bounds of its derivatives, swept by circles through `o`.
fn orthotomic<C: Fn(f64) -> Point>(
    (sheet, name): (Sheet, &str),
    law: &Through<C>,
    equation: &dyn Fn(Point) -> f64,
    open: bool,
) -> SweptRegion {
    let envelope: Vec<Point> = (1..400).map(|i| law.mirrored(f64::from(i) / 400.0)).collect();
    for q in &envelope {
        let scale = 1.0 + q.to_vec2().hypot().powi(4);
        assert!(equation(*q).abs() < 1e-6 * scale, "{q:?}: equation {:e}", equation(*q));
    }
    Named { sheet, name, laws: vec![law], envelope, equation, apart: vec![law.o], open }.check()
}

/// D. Joseph, "Limacons as Envelopes of Circles" (2011); D. Darling, "Cardioid".
#[test]
fn circles_on_a_circle_through_a_point_give_cardioid_and_limacon() {
    for (a, b, area) in [(1.0f64, 1.0f64, 18.849_555_921_5), (10.0, 4.0, 1_357.168_026_35)] {
        let law = Through {
            center: |t: f64| p(b, 0.0) + Vec2::from_angle(TAU * t) * a,
            o: Point::ZERO,
            speed: TAU * a,
            bend: TAU * TAU * a,
        };
        let spot = law.mirrored(1.0 / 6.0);
        let expected = if b < a { p(12.0, 20.784_609_690_8) } else { p(1.5, 2.598_076_211_35) };
        assert!((spot - expected).hypot() < 1e-8);
        let equation = |q: Point| {
            let r2 = q.x * q.x + q.y * q.y;
            (r2 - 2.0 * b * q.x).powi(2) - 4.0 * a * a * r2
        };
        let name = if b < a { "limacon 10, 4" } else { "cardioid" };
        let region = orthotomic((LIMACONS, name), &law, &equation, false);
        assert_area(LIMACONS, name, &region, area);
        let length = if b < a { 130.742_666_992 } else { 16.0 * a };
        LIMACONS.holds(format!("{name}: length"), length, region.perimeter(), 0.01);
        assert_eq!(region.loops.len(), 1);
    }
}

/// E. W. Weisstein, CRC Concise Encyclopedia of Mathematics, "Parabola Pedal Curve": focus, vertex, foot
/// of the directrix, mirrored focus.
#[test]
fn circles_on_a_parabola_through_a_point_give_directrix_cissoid_strophoid_and_trisectrix() {
    let reach = 5.0;
    let on = |o: f64| Through {
        center: move |t: f64| {
            let y = reach * (2.0 * t - 1.0);
            p(0.25 * y * y, y)
        },
        o: p(o, 0.0),
        speed: 2.0 * reach * (0.5 * reach).hypot(1.0),
        bend: 0.5 * 4.0 * reach * reach,
    };
    let at = |y: f64| 0.5 * (1.0 + y / reach);
    orthotomic((PARABOLA, "focus: directrix"), &on(1.0), &|q| q.x + 1.0, true);

    let cissoid = on(0.0);
    assert!((cissoid.mirrored(at(2.0)) - p(-1.0, 1.0)).hypot() < 1e-8);
    assert!((cissoid.mirrored(at(4.0)) - p(-1.6, 3.2)).hypot() < 1e-8);
    orthotomic(
        (PARABOLA, "vertex: cissoid"),
        &cissoid,
        &|q| q.x * (q.x * q.x + q.y * q.y) + 2.0 * q.y * q.y,
        true,
    );

    let strophoid = on(-1.0);
    assert!((strophoid.mirrored(at(4.0)) - p(-2.2, 2.4)).hypot() < 1e-8);
    let equation = |q: Point| {
        let x = q.x + 1.0;
        q.y * q.y * (2.0 + x) - x * x * (2.0 - x)
    };
    orthotomic((PARABOLA, "foot of the directrix: strophoid"), &strophoid, &equation, true);

    let trisectrix = on(-3.0);
    assert!((trisectrix.mirrored(at(2.0)) - p(-1.0, -2.0)).hypot() < 1e-8);
    let equation = |q: Point| {
        let x = q.x + 3.0;
        x * (x * x + q.y * q.y) - 2.0 * (3.0 * x * x - q.y * q.y)
    };
    orthotomic((PARABOLA, "mirrored focus: trisectrix"), &trisectrix, &equation, true);
}

/// Reflection property of the conics: a focus mirrored in a tangent lies on the circle of radius 2a about
/// the other focus (from memory; any text on conics).
#[test]
fn circles_on_a_conic_through_a_focus_give_the_circle_about_the_other_focus() {
    let (a, b) = (5.0f64, 3.0f64);
    let c = (a * a - b * b).sqrt();
    let law = Through {
        center: |t: f64| p(a * (TAU * t).cos(), b * (TAU * t).sin()),
        o: p(c, 0.0),
        speed: TAU * a,
        bend: TAU * TAU * a,
    };
    let region = orthotomic((FOCUS, "ellipse 5, 3"), &law, &|q| (q - p(-c, 0.0)).hypot() - 2.0 * a, false);
    assert_area(FOCUS, "ellipse 5, 3", &region, PI * 100.0);

    let (a, b) = (1.0f64, 1.5f64);
    let c = a.hypot(b);
    let law = Through {
        center: |t: f64| p(a * (2.0 * t - 1.0).cosh(), b * (2.0 * t - 1.0).sinh()),
        o: p(c, 0.0),
        speed: 2.0 * 1f64.cosh() * a.hypot(b),
        bend: 4.0 * 1f64.cosh() * a.hypot(b),
    };
    orthotomic((FOCUS, "hyperbola 1, 1.5"), &law, &|q| (q - p(-c, 0.0)).hypot() - 2.0 * a, true);
}

/// J. D. Cook, "Lemniscate" (2023): circles on a rectangular hyperbola through its centre envelop the
/// lemniscate. They do so from outside: every other circle of the branch holds the point in which one of
/// them touches it, so it is no swept edge. The union is that of the two end circles (seen from the centre
/// by inversion the circles are half planes, and those of the ends hold the others').
#[test]
fn circles_on_a_rectangular_hyperbola_envelop_the_lemniscate_inside_and_leave_two_circles() {
    let reach = 1.5f64;
    let law = Through {
        center: |t: f64| p((reach * (2.0 * t - 1.0)).cosh(), (reach * (2.0 * t - 1.0)).sinh()),
        o: Point::ZERO,
        speed: 2.0 * reach * (reach.cosh().hypot(reach.sinh())),
        bend: 4.0 * reach * reach * (reach.cosh().hypot(reach.sinh())),
    };
    let spot = law.mirrored(0.5 * (1.0 + 0.5 / reach));
    assert!((spot - p(1.461_525_651_69, -0.675_396_079_423)).hypot() < 1e-8);
    let region = sweep_laws(&[&law], E, Lean::Either).unwrap();
    for i in 1..50 {
        let q = law.mirrored(f64::from(i) / 50.0);
        let r2 = q.x * q.x + q.y * q.y;
        assert!((r2 * r2 - 4.0 * (q.x * q.x - q.y * q.y)).abs() < 1e-6, "{q:?} is no lemniscate");
        assert!(off_edge(&region, q) > 1e-3, "{q:?} lies on the edge");
    }
    let (r, half) = ((2.0 * reach).cosh().sqrt(), reach.sinh());
    let lens = 2.0 * r * r * (half / r).acos() - 2.0 * half * (r * r - half * half).sqrt();
    assert_area(LEMNISCATE, "two end circles", &region, TAU * r * r - lens);
}

/// C. Huygens, Horologium Oscillatorium (1673): the parallel of an involute of a circle is the same
/// involute, turned.
#[test]
fn kerf_along_an_involute_leaves_the_same_involute_turned() {
    let (a, kerf) = (10.0f64, 0.15f64);
    let involute = |t: f64| p(a * (t.cos() + t * t.sin()), a * (t.sin() - t * t.cos()));
    let (low, high) = (0.5, 1.5);
    let u = |t: f64| low + (high - low) * t;
    // q'' = a (cos t - t sin t, sin t + t cos t): length a sqrt(1 + t^2).
    let law = By(
        |t| (involute(u(t)), kerf),
        |from, to| departure_by_second_derivatives(a * u(to).hypot(1.0), 0.0, (to - from) * (high - low)),
    );
    // By d more string: parameter t + d / a, turned back by d / a.
    let turned = |t: f64, d: f64| {
        let (s, c) = (-d / a).sin_cos();
        let q = involute(t + d / a);
        p(c * q.x - s * q.y, s * q.x + c * q.y)
    };
    assert!((turned(1.0, kerf) - p(13.943_953_554_5, 2.930_641_443_52)).hypot() < 1e-9);
    let envelope: Vec<Point> =
        (0..=200).flat_map(|i| [kerf, -kerf].map(|d| turned(u(f64::from(i) / 200.0), d))).collect();
    // Length of string at a point less the arc unwound: zero on the involute itself, constant on parallels.
    let equation = |q: Point| {
        let rho = q.to_vec2().hypot();
        let string = (rho * rho - a * a).max(0.0).sqrt();
        let foot = q.y.atan2(q.x) + (string / a).atan();
        (string - a * foot).abs() - kerf
    };
    Named {
        sheet: INVOLUTE,
        name: "base circle 10, kerf 0.15",
        laws: vec![&law],
        envelope,
        equation: &equation,
        apart: vec![],
        open: true,
    }
    .check();
}
