use std::f64::consts::PI;

use super::*;

const LINK: &str = include_str!("../../../../fixtures/drawings/link.csv");

fn read(text: &str) -> Drawing {
    let reading = read_csv(text.as_bytes(), "link.csv", &DrawingOptions::default()).unwrap();
    assert_eq!(reading.problems, []);
    reading.value
}

fn refused(text: &str) -> Problem {
    let problem = read_csv(text.as_bytes(), "link.csv", &DrawingOptions::default()).unwrap_err().remove(0);
    assert!(problem.help.len() > 5);
    problem
}

#[test]
fn link_of_two_loops_has_its_areas_and_lines() {
    let drawing = read(LINK);
    let areas: Vec<f64> = drawing.contour.paths().iter().map(Path::signed_area).collect();
    assert!((areas[0] - (360.0 + 36.0 * PI)).abs() < 1e-9 && (areas[1] - 9.0 * PI).abs() < 1e-9);
    assert!(drawing.contour.paths().iter().all(Path::is_closed));
    assert_eq!(drawing.origins.iter().map(|o| o.line).collect::<Vec<_>>(), [Some(3), Some(9)]);
    assert_eq!((drawing.contour.bound(), drawing.unit), (0.0, None));
}

#[test]
fn separators_headings_and_decimal_commas_give_the_same_contour() {
    let plain = read("0,0\n4.5,0\n4.5,3,-0.1\n0,0\n");
    for text in [
        "x;y;bulge\n0;0\n4,5;0;\n4,5;3;-0,1\n0;0\n",
        "0 0\n4.5\t0\n  4.5 3 -0.1\n0 0",
        "\u{feff}X, Y\r\n0,0,0\r\n# note\r\n4.5,0 # corner\r\n4.5,3,-.1\r\n0,0\r\n\r\n",
    ] {
        assert_eq!(read(text).contour, plain.contour, "{text:?}");
    }
}

#[test]
fn an_open_chain_stays_open_and_chains_alone_are_not_joined() {
    let drawing = read("0 0\n10 0\n\n20 0\n30 5\n");
    assert_eq!(drawing.contour.paths().len(), 2);
    assert!(!drawing.contour.paths()[0].is_closed());
    let chains = read_csv_chains(b"0 0\n10 0\n\n10 0\n10 5\n", "path.csv").unwrap();
    assert_eq!(chains.paths.iter().map(|p| p.1).collect::<Vec<_>>(), [1, 4]);
    // As a drawing the same two chains are one.
    assert_eq!(read("0 0\n10 0\n\n10 0\n10 5\n").contour.paths().len(), 1);
}

#[test]
fn what_is_no_table_is_refused_with_line_and_column() {
    assert!(refused("").found.contains("no point"));
    assert!(refused("x,y\n").found.contains("no point"));
    assert!(refused("# only words\n\n").found.contains("no point"));
    assert!(refused("0,0\n\0").found.contains("binary"));
    assert!(refused("1,2\n").found.contains("single point"));
    assert!(refused("1,2\n1,2\n").found.contains("single point"));
    assert!(refused("0,0\n1,2,3,4\n").found.contains("4 values"));
    assert!(refused("0,0\n7\n").found.contains("1 values"));
    for (bad, column) in [("NaN", 3), ("inf", 3), ("1e999", 3), ("12mm", 3), ("", 1)] {
        let problem = refused(&format!("0,0\n1,{bad}\n"));
        assert_eq!(problem.place.line, Some(2), "{bad}");
        assert!(problem.place.column == Some(column) || bad.is_empty(), "{bad}: {problem}");
        assert!(problem.found.contains("no number"), "{}", problem.found);
    }
    assert!(refused("0,0\n1e10,0\n").found.contains("too great"));
    assert!(refused("0,0,1e9\n1e9,0\n").found.contains("no usable arc"));
}
