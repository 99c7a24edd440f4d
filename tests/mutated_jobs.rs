//! No job file may make its reader panic, and no refusal may be without an error and a cure: 100,000
//! mutations of eight small jobs, from a fixed start, so that a failure repeats.

mod mutation;

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::time::{Duration, Instant};

use sweptedge::cli::job_problems;
use sweptedge::input::{Problem, Severity};

use mutation::mutated;

const CASES: usize = 100_000;

/// Four jobs that are whole, then four full of what is refused.
const CORPUS: [&str; 8] = [
    "# A plate.\nunits = \"mm\"\n\n[part]\nfile = \"plate.dxf\"\nlayer = [\"A\", \"B\"]\nkeep = \"inside\"\nallowance = 0.1\n\
     shift = [0.5, -3]\nturn = 90\ncopies = [{ shift = [50.0, 0.0], turn = 90.0 }, {}]\n\n[tolerance]\ngouge = 0.02\n\
     excess = 5e-2\ncusp = 0.01\n\n[cutter.1]\ndiameter = 10.0\ncorner_radius = 0.0\n\n[program]\nfile = \"plate.nc\"\n",
    "part.file = 'a.svg'\npart.mirror = \"x\"\nprogram.file = \"\"\"a.nc\"\"\"\nprogram.format = \"iso\"\ncutter.3.diameter = 8\n",
    "\u{feff}units=\"in\"\r\npart={file=\"a.csv\",join_gap=0.01,curve_error=0.001}\r\ncutter={1={diameter=0.5},2={diameter=0.25}}\r\n\
     program={file=\"a.nc\",arc_tolerance=0.001}\r\n",
    "[part]\nfile = \"a.dxf\"\n[program]\nfile = \"a.nc\"\n[cutter.1]\ndiameter = 1_0.5\n[check]\ntop = +1\nlevel = -2.5\n\
     clear = \"area\"\nonly_visited = true\n[output]\njson = \"a.json\"\nsvg = \"a.svg\"\ndxf = \"a.dxf2\"\n",
    "[part]\nfile = 3\nlayr = \"A\"\n[[part.copies]]\nturn = \"ninety\"\nshift = [1]\n[cutter.T1]\ndiameter = -1\n",
    "[cutter.1]\ndiameter = nan\n[cutter.1]\ndiameter = inf\n[cutter.99999999999]\ndiameter = 1e999\n[tolerance]\ngouge = -0.0\n",
    "units = 1979-05-27T07:32:00Z\n[part]\nfile = '''\n\n'''\nkeep = \"\\u00e4\\x00\"\n[check]\nonly_visited = 0x1F\nclear = []\n",
    "[part\nfile \"a\"\n= 3\n[[cutter]]\ndiameter = 10\n[output]\njson = \"-\"\nsvg = \"-\"\n[program]\nfile = \"-\"\n",
];

/// Bytes that jobs are made of, and some that they are not.
const BYTES: &[u8] = b"abcdeilnoprstuwx_.-+0123456789=[]{}\"'#,\\ \t\r\n\0\x80\xC3\xA4\xFF\x1A:TZ";

fn assert_sound(problems: &[Problem], text: &[u8]) {
    for p in problems {
        let said = String::from_utf8_lossy(text);
        assert_eq!(p.severity, Severity::Error, "{p}\n{said}");
        assert!(!p.help.is_empty() && !p.found.is_empty() && p.place.file == "job.toml", "{p}\n{said}");
        let lines = said.lines().count().max(1);
        assert!(p.place.line.is_none_or(|l| l >= 1 && l <= lines), "{p}\n{said}");
        assert!(!p.to_string().is_empty());
    }
}

#[test]
fn no_mutated_job_panics_or_is_refused_without_a_cure() {
    let mut rng = fastrand::Rng::with_seed(0x5eed_0a0b);
    let (mut whole, mut refused) = (0, 0);
    let mut slowest = Duration::ZERO;
    for case in 0..CASES {
        let text = mutated(&mut rng, &CORPUS, BYTES, 2);
        let begun = Instant::now();
        let judged = catch_unwind(AssertUnwindSafe(|| job_problems(&text, "job.toml")));
        slowest = slowest.max(begun.elapsed());
        let Ok(problems) = judged else { panic!("case {case}: {:?}", String::from_utf8_lossy(&text)) };
        assert_sound(&problems, &text);
        if problems.is_empty() { whole += 1 } else { refused += 1 }
    }
    assert!(
        whole > CASES / 50 && refused > CASES / 2,
        "{whole} whole, {refused} refused: mutations too mild or too wild"
    );
    assert!(slowest < Duration::from_secs(2), "the slowest took {slowest:?}");
}

#[test]
fn the_corpus_is_read_and_refused_as_it_says() {
    for (i, text) in CORPUS.iter().enumerate() {
        assert_eq!(job_problems(text.as_bytes(), "job.toml").is_empty(), i < 4, "{text}");
    }
}

#[test]
fn nests_and_lists_deep_or_long_beyond_all_sense_are_refused_and_not_followed_to_the_stacks_end() {
    for (open, close, count) in
        [("[", "]", 100_000), ("{a=", "}", 100_000), ("[", "", 300_000), ("{a.b.", "", 50_000)]
    {
        let text = format!("part = {}1{}\n", open.repeat(count), close.repeat(count));
        let problems = job_problems(text.as_bytes(), "job.toml");
        assert!(!problems.is_empty());
        assert!(problems.iter().all(|p| p.to_string().len() < 2000), "an excerpt of bearable length");
    }
    let key = format!("{}x = 1\n", "part.".repeat(50_000));
    assert!(!job_problems(key.as_bytes(), "job.toml").is_empty());
}
