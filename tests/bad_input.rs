//! Bad input as a shop meets it, each kind with a test of its own: exit status 2, nothing on standard
//! output, a sentence with the place and the cure on standard error, no output written or changed.

#![allow(clippy::unwrap_used, reason = "a test may stop at the first surprise")]

use std::fs;
use std::process::{Command, Stdio};

use tempfile::TempDir;

/// A square of side 20, and a 4 mm cutter's way round it.
const SQUARE: &str = "x,y,bulge\n0,0,0\n20,0,0\n20,20,0\n0,20,0\n0,0,0\n";
const ROUND: &str = "G21 G90\nG0 Z5\nG0 X-2 Y-10\nG1 Z-1 F100\nG1 Y20\nG2 X0 Y22 I2 J0\nG1 X20\nG2 X22 Y20 I0 J-2\n\
                     G1 Y0\nG2 X20 Y-2 I-2 J0\nG1 X0\nG2 X-2 Y0 I0 J2\nG1 Y10\nG0 Z5\nM30\n";

/// What an output holds before the check.
const OLD: &str = "the report of yesterday";

/// A folder with a good drawing and a good program, and one more file.
struct Shop {
    folder: TempDir,
}

impl Shop {
    fn with(name: &str, content: impl AsRef<[u8]>) -> Self {
        let folder = tempfile::tempdir().unwrap();
        for (name, content) in [("square.csv", SQUARE.as_bytes()), ("round.nc", ROUND.as_bytes())] {
            fs::write(folder.path().join(name), content).unwrap();
        }
        fs::write(folder.path().join("report.json"), OLD).unwrap();
        fs::write(folder.path().join(name), content).unwrap();
        Self { folder }
    }

    fn run(&self, args: &[&str]) -> (Option<i32>, String, String) {
        let ran = Command::new(env!("CARGO_BIN_EXE_sweptedge"))
            .current_dir(self.folder.path())
            .args(args)
            .stdin(Stdio::null())
            .output()
            .unwrap();
        let text = |b: Vec<u8>| String::from_utf8(b).unwrap();
        (ran.status.code(), text(ran.stdout), text(ran.stderr))
    }

    fn names(&self) -> Vec<String> {
        let entries = fs::read_dir(self.folder.path()).unwrap();
        let mut names: Vec<String> =
            entries.map(|e| e.unwrap().file_name().to_string_lossy().into_owned()).collect();
        names.sort();
        names
    }

    /// The check is refused with all of `said`, and no output is written or changed.
    fn refuses(&self, args: &[&str], said: &[&str]) {
        let before = self.names();
        let outputs = ["check", "--json", "report.json", "--svg", "new.svg", "--dxf", "new.dxf"];
        let all: Vec<&str> = outputs.iter().chain(args).copied().collect();
        let (status, out, err) = self.run(&all);
        assert_eq!(status, Some(2), "{out}{err}");
        assert_eq!(out, "", "nothing but the refusal");
        for part in said.iter().chain(&["error: ", "\n  at ", "\n  to do: "]) {
            assert!(err.contains(part), "no {part:?} in\n{err}");
        }
        assert_eq!(fs::read_to_string(self.folder.path().join("report.json")).unwrap(), OLD);
        assert_eq!(self.names(), before, "no new file, not even a passing one");
    }

    fn refuses_drawing(&self, name: &str, said: &[&str]) {
        self.refuses(&["--part", name, "--program", "round.nc", "-d", "4", "--units", "mm"], said);
        let (status, out, err) = self.run(&["inspect", name, "--units", "mm"]);
        assert_eq!((status, out.as_str()), (Some(2), ""), "inspect refuses it too: {err}");
    }

    fn refuses_program(&self, name: &str, said: &[&str]) {
        self.refuses(&["--part", "square.csv", "--program", name, "-d", "4", "--units", "mm"], said);
        let (status, out, _) =
            self.run(&["envelope", "--program", name, "-d", "4", "--units", "mm", "--csv", "-"]);
        assert_eq!((status, out.as_str()), (Some(2), ""), "envelope refuses it too");
    }
}

fn drawing(name: &str, content: impl AsRef<[u8]>, said: &[&str]) {
    let said: Vec<&str> = said.iter().chain(&[name]).copied().collect();
    Shop::with(name, content).refuses_drawing(name, &said);
}

fn program(content: impl AsRef<[u8]>, said: &[&str]) {
    let said: Vec<&str> = said.iter().chain(&["bad.nc"]).copied().collect();
    Shop::with("bad.nc", content).refuses_program("bad.nc", &said);
}

/// The good program with one line in place of another.
fn changed(from: &str, to: &str) -> String {
    assert!(ROUND.contains(from));
    ROUND.replace(from, to)
}

fn svg(body: &str) -> String {
    format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"50mm\" height=\"50mm\" viewBox=\"0 0 50 50\">\n{body}\n</svg>\n"
    )
}

/// A DXF drawing of the entities in `body`.
fn dxf(body: &str) -> String {
    format!("0\nSECTION\n2\nENTITIES\n{body}0\nENDSEC\n0\nEOF\n")
}

#[test]
fn the_good_drawing_and_program_pass_or_these_tests_prove_nothing() {
    let shop = Shop::with("spare.txt", "");
    let (status, out, err) = shop.run(&[
        "check",
        "--part",
        "square.csv",
        "--program",
        "round.nc",
        "-d",
        "4",
        "--json",
        "report.json",
    ]);
    assert_eq!(status, Some(0), "{out}{err}");
    let report = fs::read_to_string(shop.folder.path().join("report.json")).unwrap();
    assert!(report.starts_with('{') && report.contains("\"pass\""));
}

#[test]
fn an_empty_file_is_called_empty_in_every_format() {
    drawing("bad.dxf", "", &["the file is empty", "export the drawing again"]);
    drawing("bad.svg", " \n", &["the file is empty"]);
    drawing("bad.csv", "", &["holds no point", "one point on each line"]);
    program("", &["the file is empty"]);
}

#[test]
fn a_binary_file_is_told_from_text() {
    let bytes: Vec<u8> = (0..=255).cycle().take(3000).collect();
    drawing("bad.dxf", &bytes, &["binary, not text", "ASCII"]);
    drawing("bad.csv", &bytes, &["binary, not text"]);
    drawing("bad.svg", &bytes, &["not UTF-8"]);
    program(&bytes, &["no text"]);
}

#[test]
fn a_truncated_dxf_is_refused_wherever_it_was_cut() {
    let whole = fs::read_to_string(format!("{}/examples/follower.dxf", env!("CARGO_MANIFEST_DIR"))).unwrap();
    let lines: Vec<&str> = whole.lines().collect();
    for cut in [3, 40, 201, 202, lines.len() - 2] {
        drawing("bad.dxf", lines[..cut].join("\n"), &["the file ends", "line ", "cut short"]);
    }
}

#[test]
fn an_svg_that_is_not_well_formed_is_placed() {
    drawing("bad.svg", svg("<path d=\"M0 0 L9 0 L9 9 Z\">"), &["not well-formed", "line 3, column 1"]);
    drawing("bad.svg", svg("<path d=\"M0 0 L9 zz\"/>"), &["line 2, column 18", "path command", "^"]);
}

#[test]
fn numbers_beyond_all_workpieces_are_placed() {
    drawing("bad.csv", "0,0\n2e15,0\n9,9\n0,0\n", &["line 2, column 1", "too great"]);
    let circle = dxf("0\nCIRCLE\n8\nA\n10\n0\n20\n1e300\n40\n5\n");
    drawing("bad.dxf", circle, &["line 12", "too great", "layer A"]);
    drawing("bad.svg", svg("<circle r=\"1e15\"/>"), &["line 2"]);
    program(
        changed("G1 X20\n", "G1 X99999999999\n"),
        &["line 7, column 4", "too large", "decimal point missing"],
    );
}

#[test]
fn nan_and_infinity_in_text_are_no_numbers() {
    drawing("bad.csv", "0,0\n9,nan\n9,9\n0,0\n", &["line 2, column 3", "\"nan\" is no number"]);
    drawing("bad.csv", "0,0\n-inf,0\n9,9\n0,0\n", &["line 2, column 1", "no number"]);
    drawing("bad.svg", svg("<rect width=\"NaN\" height=\"5\"/>"), &["line 2, column 7", "finite number"]);
    drawing("bad.svg", svg("<path d=\"M0 0 L1e999 0 L5 5 Z\"/>"), &["line 2, column 16", "finite number"]);
    drawing("bad.dxf", dxf("0\nCIRCLE\n8\nA\n10\n0\n20\nNaN\n40\n5\n"), &["line 12"]);
    program(changed("G1 X20\n", "G1 Xnan\n"), &["line 7, column 4", "no word"]);
    program(changed("G1 X20\n", "G1 X1e999\n"), &["line 7", "exponent"]);
}

#[test]
fn a_diameter_of_zero_below_it_or_beyond_all_sense_is_refused() {
    let shop = Shop::with("spare.txt", "");
    for (diameter, said) in
        [("0", "the diameter is 0"), ("-4", "the diameter is -4"), ("1e200", "the diameter is 1e200")]
    {
        let args = ["--part", "square.csv", "--program", "round.nc", "-d", diameter];
        shop.refuses(&args, &[said, "the command line", "measure the cutter"]);
    }
    let job = "[part]\nfile = \"square.csv\"\n[program]\nfile = \"round.nc\"\n[cutter.1]\ndiameter = 0.0\n";
    Shop::with("job.toml", job).refuses(&["job.toml"], &["diameter is 0", "line 6, column 12"]);
    for word in ["nan", "inf", "wide", "4mm", "1e999"] {
        let (status, out, err) =
            shop.run(&["check", "--part", "square.csv", "--program", "round.nc", "-d", word]);
        assert_eq!((status, out.as_str()), (Some(2), ""), "{err}");
        assert!(err.contains("--diameter") && err.contains("number"), "{err}");
    }
}

#[test]
fn a_cutter_wider_than_any_opening_is_judged_and_named() {
    let shop = Shop::with("spare.txt", "");
    let args = ["check", "--part", "square.csv", "--program", "round.nc", "-d", "25", "--keep", "outside"];
    let (status, out, err) = shop.run(&args);
    assert_eq!((status, err.as_str()), (Some(1), ""));
    assert_eq!(out.matches("wider than every opening").count(), 1, "{out}");
}

#[test]
fn a_contour_that_does_not_close_names_both_ends_and_the_gap() {
    drawing(
        "bad.dxf",
        dxf("0\nLINE\n8\nA\n10\n0\n20\n0\n11\n9\n21\n0\n0\nLINE\n8\nA\n10\n9.5\n20\n0\n11\n9\n21\n9\n"),
        &[
            "does not close",
            "(9.000000, 0.000000) and (9.500000, 0.000000)",
            "0.500000 apart",
            "close the gap",
        ],
    );
    drawing("bad.csv", "0,0\n9,0\n9,9\n0,0.02\n", &["does not close", "0.020000 apart"]);
}

#[test]
fn loops_that_cross_name_the_point() {
    drawing("bad.csv", "0,0\n9,9\n9,0\n0,9\n0,0\n", &["crosses itself", "(4.500000, 4.500000)", "line 1"]);
    let two = "0,0\n9,0\n9,9\n0,9\n0,0\n\n5,5\n15,5\n15,15\n5,15\n5,5\n";
    drawing("bad.csv", two, &["crosses or runs along", "line 7", "trim the entities"]);
}

#[test]
fn a_loop_drawn_twice_is_read_once_and_said() {
    let twice = format!("{SQUARE}\n{}", SQUARE.split_once('\n').unwrap().1);
    let shop = Shop::with("twice.csv", twice);
    let (status, out, err) = shop.run(&["check", "--part", "twice.csv", "--program", "round.nc", "-d", "4"]);
    assert_eq!(status, Some(0), "{out}{err}");
    assert!(out.contains("drawn twice") && out.contains("twice.csv, line 8"), "{out}");
    // The same loop in other pieces.
    let pieces = Shop::with("pieces.csv", format!("{SQUARE}\n0,0\n4,0\n20,0\n20,20\n0,20\n0,0\n"));
    let (status, out, _) = pieces.run(&["check", "--part", "pieces.csv", "--program", "round.nc", "-d", "4"]);
    assert_eq!(status, Some(0));
    assert!(out.contains("drawn twice"), "{out}");
}

#[test]
fn a_program_without_a_cut_is_refused() {
    program("G21 G90\nG0 X1 Y1 Z5\nG0 X5\nM30\n", &["no cutting move", "G1, G2 or G3"]);
    program(changed("Z-1", "Z1"), &["below the part's top", "Z1.000", "--top"]);
    let shop = Shop::with("spare.txt", "");
    let args = ["--part", "square.csv", "--program", "round.nc", "-d", "4", "--level", "-3"];
    shop.refuses(&args, &["below the level Z-3", "look higher up, above Z-1.000"]);
}

#[test]
fn moves_without_a_unit_are_not_guessed() {
    let shop = Shop::with("bad.nc", changed("G21 ", ""));
    let args = ["--part", "square.csv", "--program", "bad.nc", "-d", "4"];
    shop.refuses(&args, &["states no unit", "bad.nc", "G21 (mm) or G20 (inch)", "--units mm"]);
}

#[test]
fn units_that_differ_are_converted_said_and_suspected_where_the_sizes_say_so() {
    let inch = SQUARE.replace("20", "0.7874015748031497");
    let shop = Shop::with("inch.csv", inch);
    fs::write(shop.folder.path().join("near.nc"), changed("Y-10", "Y-3")).unwrap();
    let args = ["check", "--part", "inch.csv", "--program", "near.nc", "-d", "4", "--keep", "inside"];
    let (status, out, _) = shop.run(&args);
    assert_eq!(status, Some(1));
    assert!(out.contains("a ratio of about 25.4") && out.contains("G20 or G21"), "{out}");
    let svg =
        svg("<rect y=\"49.2125984251968504\" width=\"0.7874015748031496\" height=\"0.7874015748031496\"/>");
    let shop = Shop::with("inch.svg", svg.replace("\"50mm\"", "\"50in\""));
    let args = ["check", "--part", "inch.svg", "--program", "round.nc", "-d", "4", "--keep", "inside"];
    let (status, out, err) = shop.run(&args);
    assert_eq!(status, Some(0), "{out}{err}");
    assert!(out.contains("the drawing is in inches, the program in millimetres"), "{out}");
}

#[test]
fn moves_of_no_length_do_no_harm_and_arcs_of_none_are_placed() {
    let shop = Shop::with("zero.nc", changed("G1 Y0\n", "G1 Y0\nG1 Y0\nG1 X22 Y0 Z-1\nG0 X22\n"));
    let (status, out, err) = shop.run(&["check", "--part", "square.csv", "--program", "zero.nc", "-d", "4"]);
    assert_eq!(status, Some(0), "{out}{err}");
    program(
        changed("G1 Y0\n", "G1 Y0\nG2 X22 Y0 I0 J0\n"),
        &["without a radius", "line 10, column 1", "I, J, K or R"],
    );
    program(changed("G1 Y0\n", "G1 Y0\nG2 X22 Y0 R5\n"), &["ends where it starts", "line 10"]);
}

#[test]
fn an_arc_off_its_circle_is_one_error_with_a_cure_that_makes_sense() {
    let shop = Shop::with("bad.nc", changed("I2 J0", "I3 J0"));
    let args = ["check", "--part", "square.csv", "--program", "bad.nc", "-d", "4"];
    let (status, out, err) = shop.run(&args);
    assert_eq!((status, out.as_str()), (Some(2), ""));
    assert_eq!(err.matches("error:").count(), 1, "sound blocks behind it are no errors: {err}");
    assert!(err.contains("line 6") && !err.contains("--arc-tolerance"), "{err}");
    program(changed("I2 J0", "I2.004 J0"), &["line 6", "--arc-tolerance 0.00"]);
}

#[test]
fn a_missing_file_names_the_nearest_one() {
    let shop = Shop::with("spare.txt", "");
    let missing = ["--part", "squares.csv", "--program", "round.nc", "-d", "4"];
    shop.refuses(&missing, &["no such file", "squares.csv", "did you mean square.csv?"]);
    let missing = ["--part", "square.csv", "--program", "nc/round.nc", "-d", "4"];
    shop.refuses(&missing, &["there is no folder nc", "check the path"]);
    shop.refuses(&["jobb.toml"], &["no such file"]);
    shop.refuses(&["--part", ".", "--program", "round.nc", "-d", "4"], &["this is a folder"]);
    shop.refuses(&["round.nc"], &["no TOML", "a program goes with --program"]);
}

#[test]
fn an_output_that_cannot_be_written_leaves_the_others_as_they_were() {
    let shop = Shop::with("spare.txt", "");
    let before = shop.names();
    for (svg, said) in
        [("no/picture.svg", "its folder does not exist"), ("spare.txt/a.svg", "its folder is a file")]
    {
        let args =
            ["check", "--part", "square.csv", "--program", "round.nc", "-d", "4", "--json", "report.json"];
        let (status, out, err) = shop.run(&[&args[..], &["--svg", svg]].concat());
        assert_eq!((status, out.as_str()), (Some(2), ""), "{err}");
        assert!(err.contains(said) && err.contains("to do: "), "{err}");
        assert_eq!(fs::read_to_string(shop.folder.path().join("report.json")).unwrap(), OLD);
        assert_eq!(shop.names(), before);
    }
    let over = ["--part", "square.csv", "--program", "round.nc", "-d", "4"];
    let args = [&["check", "--svg", "./round.nc"], &over[..]].concat();
    let (status, _, err) = shop.run(&args);
    assert_eq!(status, Some(2));
    assert!(err.contains("is an input"), "{err}");
    assert_eq!(fs::read_to_string(shop.folder.path().join("round.nc")).unwrap(), ROUND);
}

#[test]
fn a_pipe_closed_by_its_reader_is_no_error_and_every_file_is_still_whole() {
    let shop = Shop::with("spare.txt", "");
    let (reader, writer) = std::io::pipe().unwrap();
    drop(reader);
    let ran = Command::new(env!("CARGO_BIN_EXE_sweptedge"))
        .current_dir(shop.folder.path())
        .args(["check", "--part", "square.csv", "--program", "round.nc", "-d", "4", "--json", "report.json"])
        .stdout(writer)
        .output()
        .unwrap();
    assert_eq!((ran.status.code(), ran.stderr.as_slice()), (Some(0), &b""[..]));
    let report = fs::read_to_string(shop.folder.path().join("report.json")).unwrap();
    assert!(serde_json::from_str::<serde_json::Value>(&report).is_ok());
}

#[test]
fn a_drawing_that_lies_elsewhere_is_not_judged_when_unvisited_loops_are_left_out() {
    let shop = Shop::with("spare.txt", "");
    let args =
        ["--part", "square.csv", "--program", "round.nc", "-d", "4", "--units", "mm", "--keep", "inside"];
    let away = [&args[..], &["--shift", "500,0", "--only-visited"]].concat();
    shop.refuses(&away, &["does not lie where the program cuts", "X-500.000 Y-4.000"]);
    let (status, ..) = shop.run(&[&["check"], &args[..], &["--shift", "500,0"]].concat());
    assert_eq!(status, Some(1), "asked for in full, the loop is missing");
}

#[test]
fn an_unknown_layer_names_the_nearest_one() {
    let grouped = svg("<g id=\"PART\"><rect width=\"20\" height=\"20\"/></g>");
    let args = ["--part", "bad.svg", "--layer", "PRAT", "--program", "round.nc", "-d", "4"];
    Shop::with("bad.svg", grouped).refuses(&args, &["'PRAT'", "did you mean 'PART'?"]);
}

#[test]
fn what_is_not_followed_yet_is_refused_at_its_block() {
    for (line, said, at) in [
        ("G41 D1 G1 Y0\n", "compensation", "line 9, column 1"),
        ("G81 X5 Y5 Z-3 R1\n", "canned cycle", "line 9, column 1"),
        ("M98 P100\n", "subprogram", "line 9, column 1"),
        ("#1=5\n", "variable", "line 9, column 1"),
        ("G1 Y0,5\n", "comma", "line 9, column 4"),
        ("G1 YO\n", "letter O", "line 9, column 4"),
        ("G28\n", "from cutting depth", "line 9, column 1"),
    ] {
        program(changed("G1 Y0\n", line), &[said, at]);
    }
}
