//! Damaged drawings: 100,000 mutations each, from a fixed start, of small DXF and CSV files. None
//! may panic; every refusal must hold an error with advice, every reading a sound contour.

use std::time::{Duration, Instant};

use sweptedge::input::drawing::{Drawing, DrawingOptions, read_csv, read_dxf};
use sweptedge::input::{Reading, Refusal, Severity};
use sweptedge::part::{Keep, Part};

const DXF: [&[u8]; 5] = [
    include_bytes!("../fixtures/drawings/rocker.dxf"),
    include_bytes!("../fixtures/drawings/keyhole-plate.dxf"),
    include_bytes!("../fixtures/drawings/slot-old-polyline.dxf"),
    include_bytes!("../fixtures/drawings/bracket-from-below.dxf"),
    include_bytes!("../fixtures/drawings/spline-cover.dxf"),
];
const CSV: [&[u8]; 2] =
    [include_bytes!("../fixtures/drawings/link.csv"), b"x;y;bulge\n0;0\n4,5;0;1\n4,5;3;-0,2\n0;0\n"];

/// Words that readers stumble over.
const WORDS: [&[u8]; 40] = [
    b"0",
    b"-0",
    b"1",
    b"-1",
    b"1e9",
    b"-1e9",
    b"1e10",
    b"1e308",
    b"1e-320",
    b"1e999",
    b"NaN",
    b"inf",
    b"-inf",
    b"10",
    b"20",
    b"30",
    b"42",
    b"70",
    b"90",
    b"210",
    b"230",
    b"67",
    b"66",
    b"8",
    b"999",
    b"-5",
    b"2147483647",
    b"99999999999999999999",
    b"LINE",
    b"ARC",
    b"POLYLINE",
    b"VERTEX",
    b"SEQEND",
    b"ENDSEC",
    b"SECTION",
    b"EOF",
    b"\\U+D800",
    b"\xff\xfe",
    b"",
    b"0.5,",
];

fn mutate(rng: &mut fastrand::Rng, bytes: &[u8], other: &[u8]) -> Vec<u8> {
    let mut lines: Vec<Vec<u8>> = bytes.split(|b| *b == b'\n').map(<[u8]>::to_vec).collect();
    for _ in 0..[1, 1, 1, 2, 3][rng.usize(0..5)] {
        if lines.is_empty() {
            break;
        }
        let i = rng.usize(0..lines.len());
        let j = rng.usize(0..lines.len());
        match rng.u8(0..9) {
            0 => lines[i] = WORDS[rng.usize(0..WORDS.len())].to_vec(),
            1 => drop(lines.remove(i)),
            2 => lines.swap(i, j),
            3 => lines.truncate(i),
            4 => {
                let from = i.min(j);
                let run: Vec<Vec<u8>> = lines[from..i.max(j)].iter().take(40).cloned().collect();
                let at = rng.usize(0..=lines.len());
                lines.splice(at..at, run);
            }
            5 if !lines[i].is_empty() => {
                let at = rng.usize(0..lines[i].len());
                lines[i][at] = rng.u8(..);
            }
            6 => lines[i] = format!("{:?}", (rng.f64() - 0.5) * 10f64.powi(rng.i32(-12..12))).into_bytes(),
            7 => {
                let donor: Vec<&[u8]> = other.split(|b| *b == b'\n').collect();
                let from = rng.usize(0..donor.len());
                lines.splice(i..i, donor[from..].iter().take(30).map(|l| l.to_vec()));
            }
            _ => lines[i].extend_from_slice(WORDS[rng.usize(0..WORDS.len())]),
        }
    }
    lines.join(&b'\n')
}

/// What every answer must keep to.
fn sound(answer: &Result<Reading<Drawing>, Refusal>, bytes: &[u8]) {
    let shown = || String::from_utf8_lossy(bytes).into_owned();
    match answer {
        Err(problems) => {
            assert!(problems.iter().any(|p| p.severity == Severity::Error), "{}", shown());
            assert!(problems.iter().all(|p| !p.help.is_empty() && !p.to_string().is_empty()), "{}", shown());
        }
        Ok(reading) => {
            let drawing = &reading.value;
            assert!(reading.problems.iter().all(|p| p.severity == Severity::Warning));
            assert_eq!(drawing.contour.paths().len(), drawing.origins.len());
            assert!(drawing.contour.bound() < 0.1, "{}", shown());
            for path in drawing.contour.paths() {
                assert!(path.length().is_finite() && path.length() > 0.0, "{}", shown());
            }
            for keep in [Keep::Inside, Keep::Left] {
                if let Ok(part) = Part::new(drawing.contour.clone(), keep, 0.0, drawing.origins.clone()) {
                    let _ = part.contains(part.contour.bounds().center());
                }
            }
        }
    }
}

type Reader = fn(&[u8], &str, &DrawingOptions) -> Result<Reading<Drawing>, Refusal>;

/// 100,000 mutations of `corpus` through `read`; most of one damage, some of up to three.
fn survives(read: Reader, corpus: &[&[u8]], file: &str) {
    let mut rng = fastrand::Rng::with_seed(2026);
    let (mut refused, mut good) = (0u32, 0u32);
    let mut slowest = Duration::ZERO;
    for k in 0..100_000 {
        let donor = DXF[rng.usize(0..DXF.len())];
        let bytes = mutate(&mut rng, corpus[k % corpus.len()], donor);
        let options = DrawingOptions {
            layers: if rng.bool() && file.ends_with("dxf") { vec!["FINISHED".into()] } else { Vec::new() },
            join_gap: if rng.u8(0..8) == 0 { 5.0 } else { 0.0 },
            ..DrawingOptions::default()
        };
        let start = Instant::now();
        let answer = read(&bytes, file, &options);
        slowest = slowest.max(start.elapsed());
        match answer {
            Ok(_) => good += 1,
            Err(_) => refused += 1,
        }
        // A gap of 5 moves ends by that much: only then may the bound be so large.
        if options.join_gap < 1.0 {
            sound(&answer, &bytes);
        }
    }

    // The mutations must reach both sides of the reader to mean anything.
    assert!(good > 5_000 && refused > 5_000, "{file}: {good} read, {refused} refused");
    assert!(slowest < Duration::from_secs(5), "{slowest:?}");
}

#[test]
fn a_hundred_thousand_damaged_dxf_drawings_never_panic() {
    survives(read_dxf, &DXF, "damaged.dxf");
}

#[test]
fn a_hundred_thousand_damaged_tables_never_panic() {
    survives(read_csv, &CSV, "damaged.csv");
}
