//! No program text may make the reader panic, and no refusal may be without a placed error and a cure:
//! 100,000 mutations of ten small programs, from a fixed start, so that a failure repeats.

mod mutation;

use std::panic::{AssertUnwindSafe, catch_unwind};

use sweptedge::input::Severity;
use sweptedge::input::program::{ProgramOptions, read_iso};
use sweptedge::program::Unit;

use mutation::mutated;

const CASES: usize = 100_000;

/// Eight programs that are read, then two full of what is refused.
const CORPUS: [&str; 10] = [
    "%\nO0001 (PLATE)\nN10 G21 G17 G90 G54\nN20 T1 M6\nN30 G0 X0 Y0 Z5 S8000 M3\nN40 G1 Z-2 F200\nN50 X40\n\
     N60 G2 X45 Y5 I0 J5\nN70 G3 X40 Y10 R5\nN80 G0 Z5 M9\nM30\n%\n",
    "g20\rg0x +0. 12 34y 7\rg1 z-.05 f10\rg2 i1.5 z-.1\rm2\r",
    "\u{feff}G21 G91 G0 X5 Y5\r\nG1 X1.\r\nY-.5\r\n/G1 X3\r\nG90 G90.1 G3 X-9 Y-4.5 I0 J0\r\nM30\r\n",
    "G21 G18 G0 X0 Y0 Z5\nG3 X5 Z0 K-5 I0\nG19 G2 Y5 Z5 J5 K0\nG17 G1 X1.3\nM2",
    "G0 X0 Y0\nG28 G91 Z0\nG53 G0 Z0\nG53 X0 Y0\nG52 X0 Y0 Z0\nG90 G0 X1 Y1 Z2\nM99",
    "G21 G92 X5 Y5\nG2 X15 R-20\nG2 X25 R5.0005 (short)\n; note\nG4 X1.5\nG1 X0\nM30",
    "T0101\nG97 S200 M4\nG0 X1 Y1\nT0202\nG64 P0.01\nG4 P1\nM123\nG1 X10 Y20 F100\nX20 A0 B0 Q9\nM30",
    "G55 G21\nG0 X1 Y1\nG20\nX5\nG21 G80\nG1 X5 Z-3\nM30\n(end)\n",
    "G21 G0 X0 Y0\nG1 XO.5\nG1 Z-.-2\nG1 Z,15\nTEXT WITHOUT PARENTHESES\nG1 X999999999999999999999999\nM6\nG2 X1\n",
    "G41 D1 X30\nG81 Z-3 R1\nM98 P10\n#1=5\nG1 X[1+#1]\n(a (b) c)\nG71 U1 R.5\nG1 U-2 W3 ,R1\nG1 C90\nO2\nG0 X0\n",
];

/// Bytes that programs are made of, and some that they are not.
const BYTES: &[u8] = b"GXYZIJKRFSTMNOPQLABCDEHUVW0123456789.+-,/%()[];#=* \t\r\n\0\x80\xC3\xA4\xFF\x1Ae";

fn options(rng: &mut fastrand::Rng) -> ProgramOptions {
    let unit = |n: u8| [None, Some(Unit::Inch), Some(Unit::Millimetre)][usize::from(n % 3)];
    ProgramOptions {
        unit: unit(rng.u8(..)),
        target: unit(rng.u8(..)),
        arc_tolerance: rng.bool().then_some(0.05),
        block_delete: rng.bool(),
    }
}

/// Reads and checks what every answer promises.
fn judge(text: &[u8], options: &ProgramOptions) -> bool {
    match read_iso(text, "case.nc", options) {
        Ok(reading) => {
            let program = reading.value;
            assert!(!program.moves.is_empty() && program.bound.is_finite());
            assert!(options.target.is_none_or(|t| t == program.unit));
            for m in &program.moves {
                let block = program.blocks.get(m.block.0 as usize);
                assert!(block.is_some_and(|b| b.line >= 1 && !b.text.contains(['\n', '\r'])));
                let (a, b) = (m.motion.start(), m.motion.end());
                assert!([a.x, a.y, a.z, b.x, b.y, b.z].iter().all(|v| v.is_finite()));
            }
            assert!(reading.problems.iter().all(|p| p.severity == Severity::Warning && !p.help.is_empty()));
            true
        }
        Err(problems) => {
            assert!(problems.iter().any(|p| p.severity == Severity::Error));
            for p in &problems {
                assert!(!p.help.is_empty() && !p.found.is_empty() && !p.to_string().is_empty());
                let width = p.place.excerpt.as_ref().map(|e| e.chars().count());
                assert!(p.place.column.is_none_or(|c| c >= 1 && width.is_some_and(|w| c <= w + 1)));
            }
            false
        }
    }
}

#[test]
fn the_programs_are_read_or_refused_before_they_are_mutated() {
    let read: Vec<bool> = CORPUS.iter().map(|t| judge(t.as_bytes(), &ProgramOptions::default())).collect();
    assert_eq!(read, [true, true, true, true, true, true, true, true, false, false]);
}

#[test]
fn a_hundred_thousand_mutated_programs_never_panic() {
    let mut rng = fastrand::Rng::with_seed(6556);
    let mut read = 0;
    for case in 0..CASES {
        let (text, options) = (mutated(&mut rng, &CORPUS, BYTES, 3), options(&mut rng));
        match catch_unwind(AssertUnwindSafe(|| judge(&text, &options))) {
            Ok(was_read) => read += usize::from(was_read),
            Err(_) => panic!("case {case}: {options:?}\nlet text = b\"{}\";", text.escape_ascii()),
        }
    }
    // Both answers must be exercised, or the test tests nothing.
    assert!(read > CASES / 10 && read < CASES - CASES / 10, "{read} of {CASES} were read");
}
