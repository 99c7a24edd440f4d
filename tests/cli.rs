//! The program as a shop's script sees it: exit status, what is printed where, which files appear.

#![allow(clippy::unwrap_used, reason = "a test may stop at the first surprise")]

use std::fs;
use std::io::Write;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};

use tempfile::TempDir;

fn program() -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_sweptedge"));
    command.env_remove("NO_COLOR").stdin(Stdio::null());
    command
}

fn example(name: &str) -> String {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("examples").join(name).display().to_string()
}

struct Ran {
    status: i32,
    out: String,
    err: String,
}

fn ran(output: &Output) -> Ran {
    let text = |b: &[u8]| String::from_utf8(b.to_vec()).unwrap();
    Ran { status: output.status.code().unwrap(), out: text(&output.stdout), err: text(&output.stderr) }
}

fn run(args: &[&str]) -> Ran {
    ran(&program().args(args).output().unwrap())
}

/// A folder with files in it.
fn folder(files: &[(&str, &str)]) -> TempDir {
    let folder = tempfile::tempdir().unwrap();
    for (name, text) in files {
        fs::write(folder.path().join(name), text).unwrap();
    }
    folder
}

fn within(folder: &TempDir, name: &str) -> String {
    folder.path().join(name).display().to_string()
}

/// Refused with status 2, nothing on standard output, and advice on standard error.
fn assert_refused(ran: &Ran, found: &str) {
    assert_eq!(ran.status, 2, "{}{}", ran.out, ran.err);
    assert_eq!(ran.out, "");
    assert!(ran.err.contains(found), "{}", ran.err);
    assert!(ran.err.contains("to do: "), "{}", ran.err);
}

/// A square of 20 from the origin, and a 4 mm cutter's way round it, 100 to the right.
const SQUARE: &str = "x,y,bulge\n0,0,0\n20,0,0\n20,20,0\n0,20,0\n0,0,0\n";
const ROUND: &str = "G21 G90\nG0 Z5\nG0 X98 Y-10\nG1 Z-1 F100\nG1 Y20\nG2 X100 Y22 I2 J0\nG1 X120\nG2 X122 Y20 I0 J-2\n\
                     G1 Y0\nG2 X120 Y-2 I-2 J0\nG1 X100\nG2 X98 Y0 I0 J2\nG1 Y10\nG0 Z5\nM30\n";

fn square() -> TempDir {
    folder(&[("square.csv", SQUARE), ("round.nc", ROUND)])
}

fn json(text: &str) -> serde_json::Value {
    serde_json::from_str(text).unwrap()
}

#[test]
fn each_example_ends_as_its_comment_says() {
    let cases = [
        ("good.toml", 0, "pass", None),
        ("pocket.toml", 0, "pass", None),
        ("untrimmed.toml", 1, "fail", Some("fold-left-in-path")),
        ("wrong_cutter.toml", 1, "fail", Some("wrong-diameter")),
        ("missed_wall.toml", 1, "fail", Some("missed-pass")),
    ];
    let schema = json(&run(&["schema", "report"]).out);
    for (job, status, verdict, cause) in cases {
        let checked = run(&["check", &example(job), "--json", "-"]);
        assert_eq!(checked.status, status, "{job}: {}", checked.err);
        let report = json(&checked.out);
        assert!(jsonschema::is_valid(&schema, &report), "{job}");
        assert_eq!(report["verdict"], verdict, "{job}");
        assert_eq!(report["findings"][0]["cause"].as_str(), cause, "{job}");
    }
}

#[test]
fn several_jobs_are_all_judged_and_the_worst_status_counts() {
    let both = run(&["check", &example("good.toml"), &example("wrong_cutter.toml")]);
    assert_eq!(both.status, 1);
    assert!(both.out.contains("good.toml ==") && both.out.contains("wrong_cutter.toml =="));
    let missing = run(&["check", &example("god.toml"), &example("good.toml")]);
    assert_eq!(missing.status, 2);
    assert!(missing.out.contains("PASS"), "the good job is judged all the same");
    assert!(missing.err.contains("good.toml?"), "{}", missing.err);
    let one_file = run(&["check", &example("good.toml"), &example("pocket.toml"), "--json", "-"]);
    assert_refused(&one_file, "several jobs would all write to -");
}

#[test]
fn quiet_says_nothing_and_the_status_tells() {
    let checked = run(&["check", "--quiet", &example("untrimmed.toml")]);
    assert_eq!((checked.status, checked.out.as_str(), checked.err.as_str()), (1, "", ""));
}

#[test]
fn help_is_no_error_and_wrong_usage_is_one() {
    for args in
        [&["--help"][..], &["check", "--help"], &["envelope", "-h"], &["inspect", "-h"], &["--version"]]
    {
        let helped = run(args);
        assert_eq!((helped.status, helped.err.as_str()), (0, ""));
        assert!(helped.out.contains("sweptedge"));
    }
    for args in [&[][..], &["chek"], &["check", "--diameter", "wide"], &["schema", "drawing"]] {
        let refused = run(args);
        assert_eq!((refused.status, refused.out.as_str()), (2, ""), "{args:?}");
        assert!(!refused.err.is_empty());
    }
    assert_refused(&run(&["check"]), "the cutter's diameter is missing");
}

#[test]
fn a_diameter_that_cuts_nothing_is_refused() {
    for diameter in ["0", "-10"] {
        let args =
            ["check", "--part", &example("follower.dxf"), "--program", &example("good.nc"), "-d", diameter];
        assert_refused(&run(&args), &format!("the diameter is {diameter}"));
    }
}

#[test]
fn a_missing_file_names_the_nearest_one_there() {
    let args = ["check", "--part", &example("folower.dxf"), "--program", &example("good.nc"), "-d", "10"];
    let refused = run(&args);
    assert_refused(&refused, "there is no such file");
    assert!(refused.err.contains("follower.dxf?"), "{}", refused.err);
}

#[test]
fn a_drawing_or_program_that_is_none_is_refused_with_advice() {
    let whole = fs::read_to_string(example("follower.dxf")).unwrap();
    let files = [
        ("empty.dxf", String::new()),
        ("cut.dxf", whole[..whole.len() / 2].to_owned()),
        ("torn.svg", "<svg><path d=\"M0 0".into()),
        ("empty.svg", String::new()),
        ("empty.csv", String::new()),
        ("words.csv", "left,right\nup,down\n".into()),
    ];
    for (name, text) in &files {
        let folder = folder(&[(name, text), ("round.nc", ROUND)]);
        let (part, nc) = (within(&folder, name), within(&folder, "round.nc"));
        assert_refused(&run(&["check", "--part", &part, "--program", &nc, "-d", "4"]), name);
        assert_refused(&run(&["inspect", &part]), name);
    }
    let bad = folder(&[("empty.nc", ""), ("square.csv", SQUARE)]);
    fs::write(bad.path().join("binary.nc"), [0u8, 159, 146, 150, 0, 1, 2]).unwrap();
    for name in ["empty.nc", "binary.nc"] {
        let (part, nc) = (within(&bad, "square.csv"), within(&bad, name));
        assert_refused(&run(&["check", "--part", &part, "--program", &nc, "-d", "4"]), name);
    }
}

#[test]
fn a_unit_that_nobody_states_is_asked_for_and_not_guessed() {
    let unitless = ROUND.replace("G21 ", "");
    let folder = folder(&[("square.csv", SQUARE), ("round.nc", &unitless)]);
    let (part, nc) = (within(&folder, "square.csv"), within(&folder, "round.nc"));
    let args = ["check", "--part", &part, "--program", &nc, "-d", "4", "--shift", "100,0"];
    let refused = run(&args);
    assert_refused(&refused, "unit");
    assert!(refused.err.contains("--units"), "{}", refused.err);
    let said = run(&[&args[..], &["--units", "in"]].concat());
    assert_eq!(said.status, 0, "{}{}", said.out, said.err);
    assert!(said.out.contains("0.002 in"), "the default tolerance of inches: {}", said.out);
}

#[test]
fn an_inch_drawing_is_converted_to_the_metric_programs_unit_and_said() {
    let svg = "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"2in\" height=\"2in\" viewBox=\"0 0 50.8 50.8\">\
               <rect x=\"0\" y=\"30.8\" width=\"20\" height=\"20\"/></svg>";
    let folder = folder(&[("square.svg", svg), ("round.nc", ROUND)]);
    let (part, nc) = (within(&folder, "square.svg"), within(&folder, "round.nc"));
    let checked = run(&["check", "--part", &part, "--program", &nc, "-d", "4", "--shift", "100,0"]);
    assert_eq!(checked.status, 0, "{}{}", checked.out, checked.err);
}

#[test]
fn the_drawing_is_laid_where_the_program_cuts() {
    let files = square();
    let (part, nc) = (within(&files, "square.csv"), within(&files, "round.nc"));
    let lay = |more: &[&str]| {
        let args = ["check", "--part", &part, "--program", &nc, "-d", "4", "--keep", "inside"];
        run(&[&args[..], more].concat())
    };
    assert_eq!(lay(&[]).status, 1, "where it was drawn, nothing is cut");
    for more in [
        &["--shift", "100,0"][..],
        &["--turn", "90", "--shift", "120,0"],
        &["--mirror", "x", "--shift", "120,0"],
        &["--mirror", "y", "--turn", "-90", "--shift", "120,20"],
    ] {
        let laid = lay(more);
        assert_eq!(laid.status, 0, "{more:?} {}{}", laid.out, laid.err);
        assert!(laid.out.contains("placed ") && laid.out.contains("X1"), "{}", laid.out);
    }
}

#[test]
fn the_side_that_is_material_is_found_said_and_refused_when_both_are_cut() {
    let files = square();
    let (part, nc) = (within(&files, "square.csv"), within(&files, "round.nc"));
    let args = ["check", "--part", &part, "--program", &nc, "-d", "4", "--shift"];
    let found = json(&run(&[&args[..], &["100,0", "--json", "-"]].concat()).out);
    assert_eq!((&found["inputs"]["part"]["keep"], &found["verdict"]), (&"inside".into(), &"pass".into()));
    let both = run(&[&args[..], &["110,0"]].concat());
    assert_refused(&both, "both sides of the contour");
    assert!(both.err.contains("--keep inside") && both.err.contains("in line "), "{}", both.err);
}

#[test]
fn a_program_that_never_goes_below_the_top_is_refused_with_its_lowest_height() {
    let checked = run(&["check", &example("good.toml"), "--top", "-10"]);
    assert_refused(&checked, "the lowest tip of a feed move is at Z-6.000");
    let folder = folder(&[("square.csv", SQUARE), ("air.nc", "G21 G90\nG0 X1 Y1\nG0 X5\nM30\n")]);
    let (part, nc) = (within(&folder, "square.csv"), within(&folder, "air.nc"));
    assert_refused(&run(&["check", "--part", &part, "--program", &nc, "-d", "4"]), "no cutting move");
}

#[test]
fn a_cutter_wider_than_any_opening_is_warned_of() {
    let checked = run(&["check", &example("pocket.toml"), "--diameter", "41"]);
    assert_eq!(checked.status, 1);
    assert!(checked.out.contains("wider than every opening"), "{}", checked.out);
}

#[test]
fn a_tool_of_which_nothing_is_known_is_refused_at_its_block() {
    let job = "[part]\nfile = \"square.csv\"\nshift = [100.0, 0.0]\n[program]\nfile = \"round.nc\"\n\
               [cutter.1]\ndiameter = 4\n";
    let changed = ROUND.replace("G1 X120\n", "T2 M6\nG1 X120\n");
    let folder = folder(&[("job.toml", job), ("square.csv", SQUARE), ("round.nc", &changed)]);
    let refused = run(&["check", &within(&folder, "job.toml")]);
    assert_eq!(refused.status, 2, "{}", refused.out);
    assert!(refused.err.contains("T"), "{}", refused.err);
}

#[test]
fn an_unknown_key_of_a_job_is_placed() {
    let folder = folder(&[("job.toml", "[part]\nfile = \"a.dxf\"\nlayr = \"A\"\n")]);
    let refused = run(&["check", &within(&folder, "job.toml")]);
    assert_refused(&refused, "unknown key `layr`");
    assert!(
        refused.err.contains("line 3, column 1") && refused.err.contains("write layer"),
        "{}",
        refused.err
    );
}

#[test]
fn a_program_may_come_from_standard_input() {
    let files = square();
    let part = within(&files, "square.csv");
    let args = ["check", "--part", &part, "--program", "-", "-d", "4", "--shift", "100,0"];
    let mut child = program().args(args).stdin(Stdio::piped()).stdout(Stdio::null()).spawn().unwrap();
    child.stdin.take().unwrap().write_all(ROUND.as_bytes()).unwrap();
    assert_eq!(child.wait().unwrap().code(), Some(0));
}

#[test]
fn outputs_appear_whole_beside_the_job_and_leave_nothing_else_behind() {
    let job = "[part]\nfile = \"square.csv\"\nshift = [100.0, 0.0]\n[program]\nfile = \"round.nc\"\n\
               [cutter.1]\ndiameter = 4\n[output]\njson = \"report.json\"\nsvg = \"picture.svg\"\ndxf = \"edge.dxf\"\n";
    let folder =
        folder(&[("job.toml", job), ("square.csv", SQUARE), ("round.nc", ROUND), ("report.json", "old")]);
    let checked = run(&["check", &within(&folder, "job.toml")]);
    assert_eq!(checked.status, 0, "{}{}", checked.out, checked.err);
    let read = |name: &str| fs::read_to_string(folder.path().join(name)).unwrap();
    assert_eq!(json(&read("report.json"))["verdict"], "pass");
    assert!(read("picture.svg").trim_end().ends_with("</svg>"));
    assert!(read("edge.dxf").trim_end().ends_with("EOF"));
    let mut names: Vec<String> = fs::read_dir(folder.path())
        .unwrap()
        .map(|e| e.unwrap().file_name().to_string_lossy().into_owned())
        .collect();
    names.sort();
    assert_eq!(names, ["edge.dxf", "job.toml", "picture.svg", "report.json", "round.nc", "square.csv"]);
}

#[test]
fn an_unwritable_output_is_refused_and_no_other_is_written() {
    let folder = folder(&[]);
    let (json, nowhere) = (within(&folder, "report.json"), within(&folder, "no/such/picture.svg"));
    let refused = run(&["check", &example("good.toml"), "--json", &json, "--svg", &nowhere]);
    assert_refused(&refused, "its folder does not exist");
    assert!(!PathBuf::from(&json).exists());
    let taken = within(&folder, "");
    assert_refused(
        &run(&["check", &example("good.toml"), "--json", &taken]),
        "there is a folder of that name",
    );
    assert_eq!(fs::read_dir(folder.path()).unwrap().count(), 0);
}

#[test]
fn an_output_never_goes_over_an_input() {
    let files = square();
    let (part, nc) = (within(&files, "square.csv"), within(&files, "round.nc"));
    let args = ["check", "--part", &part, "--program", &nc, "-d", "4", "--shift", "100,0", "--svg", &nc];
    assert_refused(&run(&args), "is an input");
    assert_eq!(fs::read_to_string(&nc).unwrap(), ROUND);
}

#[test]
fn a_closed_pipe_is_no_error() {
    for args in [&["check", &example("good.toml")][..], &["schema", "report"], &["--help"]] {
        let (reader, writer) = std::io::pipe().unwrap();
        drop(reader);
        let output = program().args(args).stdout(writer).output().unwrap();
        assert_eq!((output.status.code(), output.stderr.as_slice()), (Some(0), &b""[..]), "{args:?}");
    }
}

#[cfg(target_os = "linux")]
#[test]
fn a_full_disk_is_told_and_no_file_appears() {
    let folder = folder(&[]);
    let svg = within(&folder, "picture.svg");
    let full = fs::OpenOptions::new().write(true).open("/dev/full").unwrap();
    let output =
        program().args(["check", &example("good.toml"), "--svg", &svg]).stdout(full).output().unwrap();
    let refused = ran(&output);
    assert_eq!(refused.status, 2);
    assert!(refused.err.contains("standard output"), "{}", refused.err);
    assert_eq!(fs::read_dir(folder.path()).unwrap().count(), 0);
}

#[test]
fn color_comes_only_when_asked_for_or_on_a_terminal() {
    let job = example("untrimmed.toml");
    assert!(!run(&["check", &job]).out.contains('\u{1b}'));
    assert!(run(&["check", &job, "--color", "always"]).out.contains('\u{1b}'));
    assert!(!run(&["check", &job, "--color", "never"]).out.contains('\u{1b}'));
}

#[test]
fn the_envelope_is_written_in_every_format_and_reads_back_with_its_area() {
    let folder = folder(&[]);
    let names = ["edge.json", "edge.svg", "edge.dxf", "edge.csv"].map(|n| within(&folder, n));
    let [to_json, to_svg, to_dxf, to_csv] = &names;
    let swept = run(&[
        "envelope",
        "--program",
        &example("good.nc"),
        "-d",
        "10",
        "--json",
        to_json,
        "--svg",
        to_svg,
        "--dxf",
        to_dxf,
        "--csv",
        to_csv,
    ]);
    assert_eq!(swept.status, 0, "{}", swept.err);
    let edge = json(&fs::read_to_string(to_json).unwrap());
    assert!(jsonschema::is_valid(&json(&run(&["schema", "envelope"]).out), &edge));
    let outer = edge["loops"][0]["area"].as_f64().unwrap();
    for file in [to_dxf, to_csv] {
        let seen = run(&["inspect", file, "--units", "mm"]);
        assert_eq!(seen.status, 0, "{}", seen.err);
        assert!(seen.out.contains(&format!("area {outer:.4}")), "{outer} {}", seen.out);
    }
}

#[test]
fn inspect_says_what_was_understood() {
    let seen = run(&["inspect", &example("follower.dxf"), &example("good.nc"), "--layer", "FINISHED"]);
    assert_eq!(seen.status, 0, "{}", seen.err);
    for words in [
        "drawing, mm",
        "120 x 70, 9 lines, 6 arcs",
        "STOCK: 1 entity, left out",
        "circle of diameter 12 at X26 Y28; inside loop 0",
        "11 lines, 11 arcs), 3 rapids",
        "T1: 22 feed moves",
        "Z -6 to 5",
    ] {
        assert!(seen.out.contains(words), "{words}\n{}", seen.out);
    }
}

#[test]
fn every_schema_is_one() {
    for name in ["report", "job", "envelope"] {
        let schema = run(&["schema", name]);
        assert_eq!(schema.status, 0);
        assert!(jsonschema::meta::is_valid(&json(&schema.out)), "{name}");
    }
}

#[test]
fn results_are_the_same_for_any_number_of_threads() {
    let folder = square();
    let (part, program) = (within(&folder, "square.csv"), within(&folder, "round.nc"));
    let all = |threads: &str| {
        let [json, svg] = ["report.json", "picture.svg"].map(|n| within(&folder, &format!("{threads}-{n}")));
        let own =
            ["check", "--part", &part, "--program", &program, "-d", "4.3", "--shift", "100,0", "--clear"];
        let rest = ["area", "--keep", "inside", "--json", &json, "--svg", &svg, "--threads", threads];
        let ran = run(&[&own[..], &rest[..]].concat());
        assert_eq!(ran.status, 1, "{}{}", ran.out, ran.err);
        (ran.out, fs::read(json).unwrap(), fs::read(svg).unwrap())
    };
    let one = all("1");
    assert!(one == all("2") && one == all("3") && one == all("0"));
    let job = |threads: &str| run(&["check", &example("untrimmed.toml"), "--threads", threads]).out;
    assert!(job("1") == job("2") && job("1") == job("3"));
    assert_refused_usage(&run(&["check", &example("good.toml"), "--threads", "many"]));
}

fn assert_refused_usage(ran: &Ran) {
    assert_eq!((ran.status, ran.out.as_str()), (2, ""));
    assert!(ran.err.contains("--threads"), "{}", ran.err);
}

#[test]
fn timings_name_every_stage_on_standard_error_and_change_nothing_else() {
    let quiet = run(&["check", &example("good.toml")]);
    let timed = run(&["check", &example("good.toml"), "--timings"]);
    assert_eq!((timed.status, &timed.out), (quiet.status, &quiet.out));
    assert!(!quiet.err.contains(" ms "), "{}", quiet.err);
    let stages = ["read drawing", "read program", "view", "sweep", "gouges", "excesses", "folds", "findings"];
    for stage in stages.iter().chain(&["write text", "write files", "in all"]) {
        let line = timed.err.lines().find(|l| l.contains(stage)).unwrap();
        let taken: f64 = line.split(" ms ").next().unwrap().trim().parse().unwrap();
        assert!(taken >= 0.0, "{line}");
    }
    let folder = square();
    let edge = run(&[
        "envelope",
        "--program",
        &within(&folder, "round.nc"),
        "-d",
        "4",
        "--units",
        "mm",
        "--timings",
    ]);
    assert_eq!(edge.status, 0, "{}", edge.err);
    assert!(edge.err.contains(" ms  sweep"), "{}", edge.err);
}

#[cfg(target_os = "linux")]
#[test]
fn an_interrupt_leaves_no_file_behind() {
    let folder = square();
    // A full pipe holds the program up while its files wait beside their places.
    let (_reader, mut writer) = std::io::pipe().unwrap();
    writer.write_all(&[b' '; 1 << 16]).unwrap();
    let mut child = program()
        .args(["check", "--part", &within(&folder, "square.csv"), "--program", &within(&folder, "round.nc")])
        .args(["-d", "4", "--shift", "100,0", "--json", "-", "--svg", &within(&folder, "picture.svg")])
        .args(["--dxf", &within(&folder, "edge.dxf"), "--keep", "inside"])
        .stdout(writer)
        .spawn()
        .unwrap();
    let names = || {
        let names = fs::read_dir(folder.path()).unwrap().map(|e| e.unwrap().file_name());
        let mut names: Vec<String> = names.map(|n| n.to_string_lossy().into_owned()).collect();
        names.sort();
        names
    };
    let began = std::time::Instant::now();
    while names().len() < 4 && began.elapsed().as_secs() < 30 {
        std::thread::sleep(std::time::Duration::from_millis(5));
    }
    assert_eq!(names().len(), 4, "two files wait: {:?}", names());
    std::thread::sleep(std::time::Duration::from_millis(50));
    let _ = Command::new("kill").args(["-INT", &child.id().to_string()]).status().unwrap();
    assert_eq!(child.wait().unwrap().code(), Some(130));
    assert_eq!(names(), ["round.nc", "square.csv"]);
}
