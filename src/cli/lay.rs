//! Lays the drawing where the program cuts: same unit, then mirrored, turned and shifted as the user
//! says, in that order. Every step is told in words, for the report must say what was judged.

use super::args::MirrorName;
use super::draft::Lay;
use super::request::PartRequest;
use crate::geometry::{Affine, Contour, Path};
use crate::input::drawing::Drawing;
use crate::input::{Place, Problem, Refusal};
use crate::part::Origin;
use crate::program::Unit;

/// A drawing where the program cuts.
#[derive(Clone, Debug)]
pub struct Laid {
    /// Its contour, in the program's unit and place.
    pub contour: Contour,
    /// Provenance of each path.
    pub origins: Vec<Origin>,
    /// What was done, in order.
    pub placement: Vec<String>,
    /// What was assumed.
    pub warnings: Vec<Problem>,
}

/// `drawing` in `unit`, laid as `request` says.
///
/// # Errors
/// When the numbers leave the range of coordinates.
pub fn lay(drawing: Drawing, unit: Unit, request: &PartRequest) -> Result<Laid, Refusal> {
    let place = Place::file(&request.file.name);
    let mut placement = Vec::new();
    let mut warnings = Vec::new();
    let mut base = Affine::IDENTITY;
    match drawing.unit {
        Some(own) if own != unit => {
            // Through millimetres, so that both factors are exact.
            base = Affine::scale(own.in_mm() / unit.in_mm());
            let change = format!("converted from {} to {}", own.sign(), unit.sign());
            warnings.push(Problem::warning(
                place.clone(),
                format!("the drawing is in {}, the program in {}", own.name(), unit.name()),
                "",
                format!("nothing, if both are right: the drawing was {change} (1 in = 25.4 mm)"),
            ));
            placement.push(change);
        }
        Some(_) => {}
        None => warnings.push(Problem::warning(
            place.clone(),
            format!("the drawing declares no unit: taken as {}", unit.sign()),
            "",
            "say --units mm or --units in if that is wrong",
        )),
    }
    match request.mirror {
        Some(MirrorName::X) => {
            base = Affine::scale_non_uniform(-1.0, 1.0) * base;
            placement.push("mirrored, x to -x".into());
        }
        Some(MirrorName::Y) => {
            base = Affine::scale_non_uniform(1.0, -1.0) * base;
            placement.push("mirrored, y to -y".into());
        }
        None => {}
    }
    let mut paths: Vec<Path> = Vec::new();
    let mut origins = Vec::new();
    let bound = drawing.contour.bound() * base.determinant().abs().sqrt();
    if request.copies.is_empty() && motion(&request.lay) * base == Affine::IDENTITY {
        return Ok(Laid { contour: drawing.contour, origins: drawing.origins, placement, warnings });
    }
    for (copy, lay) in std::iter::once(&request.lay).chain(&request.copies).enumerate() {
        placement.extend(in_words(lay, copy, unit));
        let laid = drawing.contour.mapped(motion(lay) * base).ok();
        let fits = laid.filter(|c| {
            let b = c.bounds();
            [b.x0, b.y0, b.x1, b.y1].iter().all(|v| v.abs() <= crate::tolerance::GREATEST_COORDINATE)
        });
        let Some(contour) = fits else {
            return Err(vec![Problem::error(
                place,
                "the drawing, laid as asked, leaves the range of coordinates",
                format!("coordinates up to {:e}", crate::tolerance::GREATEST_COORDINATE),
                "check the shift and the units",
            )]);
        };
        paths.append(&mut contour.into_paths());
        origins.extend_from_slice(&drawing.origins);
    }
    let contour = Contour::new(paths, bound).map_err(|e| {
        vec![Problem::error(place, e.to_string(), "", "check the drawing in a drawing program")]
    })?;
    Ok(Laid { contour, origins, placement, warnings })
}

/// A turn about the origin, then a shift. Quarter turns are exact.
fn motion(lay: &Lay) -> Affine {
    let whole = lay.turn.rem_euclid(360.0);
    let quarter = [(0.0, (0.0, 1.0)), (90.0, (1.0, 0.0)), (180.0, (0.0, -1.0)), (270.0, (-1.0, 0.0))];
    let exact = quarter.iter().find(|(angle, _)| whole.total_cmp(angle).is_eq());
    let (s, c) = exact.map_or_else(|| whole.to_radians().sin_cos(), |&(_, sine_cosine)| sine_cosine);
    Affine::new([c, s, -s, c, lay.shift[0], lay.shift[1]])
}

fn in_words(lay: &Lay, copy: usize, unit: Unit) -> Vec<String> {
    let mut words = Vec::new();
    let [x, y] = lay.shift;
    let which = if copy == 0 { String::new() } else { format!("copy {}: ", copy + 1) };
    if lay.turn.abs() > 0.0 {
        words.push(format!("{which}turned by {} degrees", lay.turn));
    }
    if x.abs() > 0.0 || y.abs() > 0.0 {
        words.push(format!("{which}shifted by X{x} Y{y} {}", unit.sign()));
    }
    words
}

#[cfg(test)]
mod tests {
    use std::path::Path as FilePath;

    use super::super::args::KeepName;
    use super::super::draft::Named;
    use super::*;
    use crate::geometry::{Point, Segment};

    fn drawing(unit: Option<Unit>) -> Drawing {
        let line = Segment::line(Point::new(1.0, 0.0), Point::new(2.0, 1.0));
        Drawing {
            contour: Contour::new(vec![Path::new(vec![line], false).unwrap()], 1e-4).unwrap(),
            origins: vec![Origin::default()],
            unit,
            layers: Vec::new(),
        }
    }

    fn request(mirror: Option<MirrorName>, turn: f64, shift: [f64; 2]) -> PartRequest {
        PartRequest {
            file: Named::within(FilePath::new(""), FilePath::new("a.dxf")),
            layers: Vec::new(),
            keep: KeepName::Auto,
            allowance: 0.0,
            mirror,
            lay: Lay { turn, shift },
            copies: Vec::new(),
            join_gap: None,
            curve_error: None,
        }
    }

    fn start(laid: &Laid, path: usize) -> Point {
        laid.contour.paths()[path].segments()[0].start()
    }

    #[test]
    fn mirror_turn_and_shift_are_done_in_that_order_and_a_quarter_turn_is_exact() {
        let asked = request(Some(MirrorName::X), 90.0, [10.0, 0.5]);
        let laid = lay(drawing(Some(Unit::Millimetre)), Unit::Millimetre, &asked).unwrap();
        // (1, 0) -> (-1, 0) -> (0, -1) -> (10, -0.5)
        assert_eq!(start(&laid, 0), Point::new(10.0, -0.5));
        assert_eq!(laid.placement, ["mirrored, x to -x", "turned by 90 degrees", "shifted by X10 Y0.5 mm"]);
        assert!(laid.warnings.is_empty());
    }

    #[test]
    fn an_inch_drawing_for_a_metric_program_is_converted_and_said() {
        let asked = request(None, 0.0, [0.0, 0.0]);
        let laid = lay(drawing(Some(Unit::Inch)), Unit::Millimetre, &asked).unwrap();
        assert_eq!(start(&laid, 0), Point::new(25.4, 0.0));
        assert!((laid.contour.bound() - 25.4e-4).abs() < 1e-15);
        assert_eq!(laid.placement, ["converted from in to mm"]);
        assert_eq!(laid.warnings.len(), 1);
    }

    #[test]
    fn a_drawing_without_unit_takes_the_programs_and_says_so() {
        let asked = request(None, 0.0, [0.0, 0.0]);
        let laid = lay(drawing(None), Unit::Inch, &asked).unwrap();
        assert_eq!(start(&laid, 0), Point::new(1.0, 0.0));
        assert!(laid.warnings[0].found.contains("declares no unit"));
    }

    #[test]
    fn copies_are_laid_each_on_its_own_and_share_the_mirroring() {
        let mut asked = request(Some(MirrorName::Y), 0.0, [0.0, 0.0]);
        asked.copies = vec![Lay { turn: 180.0, shift: [0.0, 5.0] }];
        let laid = lay(drawing(Some(Unit::Inch)), Unit::Inch, &asked).unwrap();
        assert_eq!(start(&laid, 1), Point::new(-1.0, 5.0));
        assert_eq!(laid.origins.len(), 2);
    }

    #[test]
    fn a_shift_out_of_all_bounds_is_refused() {
        let asked = request(None, 0.0, [1e300, 0.0]);
        assert!(lay(drawing(None), Unit::Inch, &asked).is_err());
    }
}
