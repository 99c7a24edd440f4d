//! Whatever bytes a drawing holds, reading it ends with a value or with placed problems, never with a
//! panic, and what it gives is finite and connected.

use sweptedge::input::Severity;
use sweptedge::input::drawing::DrawingOptions;
use sweptedge::input::drawing::svg::{read_subpaths, read_svg};

const DRAWINGS: [&str; 6] = [
    "<svg xmlns='http://www.w3.org/2000/svg' width='20mm' height='10mm' viewBox='0 0 20 10'><g id='a' \
     transform='translate(1,2) rotate(30 4 5)'><path d='M1 1l2 0 0-2.5.5.5z m3 3a4 4 0 01-2 .5S1 2 3 4T5 6'/></g></svg>",
    "<svg width='1in' height='50%'><circle cx='5' cy='5' r='3'/><rect x='1' y='2' width='3' height='4' rx='1'/></svg>",
    "<svg><ellipse cx='1' cy='2' rx='3' ry='4' transform='skewX(20) scale(2 .5)'/><polygon points='0 0 1 0 1 1'/></svg>",
    "<!DOCTYPE svg [<!ENTITY n 'M0 0C1 2 3 4 5 6'>]><svg viewBox='0 0 9 9'><path d='&n;Q7 8 9 9H3V2Z'/></svg>",
    "<svg><style>g{display:none}</style><switch><g style='display:inline'><line x1='1' x2='2'/></g></switch>\
     <svg x='1' width='5' height='5' viewBox='0 0 1 1' preserveAspectRatio='xMaxYMin slice'><circle r='1'/></svg></svg>",
    "<svg height='3cm' viewBox='-1 -1 5 5'><text>\u{e4}\u{20ac}</text><path d='M0,0A1e2 5 30 1 0 3 4zL1 1' id='p'/><use href='#p' x='4'/></svg>",
];

const SNIPPETS: [&str; 28] = [
    "0",
    "-",
    ".",
    "e",
    "9",
    "1e999",
    "1e308",
    "-1e-320",
    "NaN",
    " ",
    ",",
    "M",
    "z",
    "A",
    "c",
    "T",
    "'",
    "<",
    ">",
    "/>",
    "<g>",
    "</g>",
    "&",
    "mm",
    "%",
    "\u{20ac}",
    "matrix(1 0 0 0 0 0)",
    "]]>",
];

fn mutated(rng: &mut fastrand::Rng, drawing: &str) -> Vec<u8> {
    let mut bytes = drawing.as_bytes().to_vec();
    // Half of them keep the XML whole and change digits only, so that the geometry is reached.
    if rng.bool() {
        for _ in 0..rng.usize(1..6) {
            let at = rng.usize(0..bytes.len());
            if bytes[at].is_ascii_digit() {
                bytes[at] = b"0123456789.-e "[rng.usize(0..14)];
            }
        }
        return bytes;
    }
    for _ in 0..rng.usize(1..4) {
        let at = rng.usize(0..bytes.len().max(1)).min(bytes.len());
        match rng.u8(0..6) {
            0 if at < bytes.len() => bytes[at] = rng.u8(..),
            1 => bytes.truncate(at),
            2 => {
                let end = (at + rng.usize(0..8)).min(bytes.len());
                bytes.drain(at..end);
            }
            3 => {
                let end = (at + rng.usize(0..30)).min(bytes.len());
                let copy = bytes[at..end].to_vec();
                let to = rng.usize(0..=bytes.len());
                bytes.splice(to..to, copy);
            }
            _ => {
                let snippet = SNIPPETS[rng.usize(0..SNIPPETS.len())];
                let end = (at + rng.usize(0..3)).min(bytes.len());
                bytes.splice(at..end, snippet.bytes());
            }
        }
    }
    bytes
}

#[test]
fn drawings_before_mutation_are_all_read() {
    for drawing in DRAWINGS {
        let read = read_subpaths(drawing.as_bytes(), "whole.svg", &DrawingOptions::default());
        assert!(read.is_ok(), "{drawing}: {read:?}");
    }
}

#[test]
fn hundred_thousand_mutated_drawings_never_panic() {
    let mut rng = fastrand::Rng::with_seed(2);
    let options = DrawingOptions { curve_error: 0.01, ..DrawingOptions::default() };
    let mut taken = 0;
    for _ in 0..100_000 {
        let drawing = DRAWINGS[rng.usize(0..DRAWINGS.len())];
        let bytes = mutated(&mut rng, drawing);
        match read_subpaths(&bytes, "mutated.svg", &options) {
            Ok(reading) => {
                taken += 1;
                if let Err(problems) = read_svg(&bytes, "mutated.svg", &options) {
                    assert!(problems.iter().any(|p| p.severity == Severity::Error));
                }
                let contour = &reading.value.contour;
                assert_eq!(contour.paths().len(), reading.value.origins.len());
                let b = contour.bounds();
                let extent = [b.x0, b.x1, b.y0, b.y1].iter().fold(0.0_f64, |m, x| m.max(x.abs()));
                // Flat arcs of huge radius carry rounding; the bound says so.
                assert!(contour.bound() <= 0.011 + 1e-8 * extent, "{:?}", String::from_utf8(bytes));
                assert!(reading.problems.iter().all(|p| p.severity == Severity::Warning));
            }
            Err(problems) => {
                assert!(problems.iter().any(|p| p.severity == Severity::Error));
                for p in &problems {
                    assert!(!p.help.is_empty() && !p.to_string().is_empty());
                }
            }
        }
    }
    // A test that refuses everything would prove nothing.
    assert!(taken > 20_000 && taken < 90_000, "{taken} of 100000 were read");
}
