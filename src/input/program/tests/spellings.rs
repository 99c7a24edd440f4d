//! One path, many spellings: random paths of lines and arcs are written in every way the language
//! allows and must be read as the path they were made from.

use std::f64::consts::TAU;
use std::fmt::Write;

use super::*;
use crate::geometry::{Point, Turn, Vec2};

/// What the writer meant.
#[derive(Clone, Copy, Debug)]
enum Meant {
    Line(Point),
    Arc { center: Point, end: Point, sweep: f64 },
}

/// To a control's resolution.
fn rounded(p: Point) -> Point {
    Point::new((p.x * 1e6).round() / 1e6, (p.y * 1e6).round() / 1e6)
}

fn random_path(rng: &mut fastrand::Rng) -> (Point, Vec<Meant>) {
    let coordinate = |rng: &mut fastrand::Rng| rng.f64() * 200.0 - 100.0;
    let start = rounded(Point::new(coordinate(rng), coordinate(rng)));
    let mut at = start;
    let moves = (0..rng.usize(1..20)).map(|_| {
        let meant = if rng.bool() {
            Meant::Line(rounded(Point::new(coordinate(rng), coordinate(rng))))
        } else {
            let center = rounded(at + Vec2::from_angle(rng.f64() * TAU) * (1.0 + rng.f64() * 50.0));
            let sweep = (0.1 + rng.f64() * 6.0) * if rng.bool() { 1.0 } else { -1.0 };
            let (sin, cos) = sweep.sin_cos();
            let v = at - center;
            let end = rounded(center + Vec2::new(cos * v.x - sin * v.y, sin * v.x + cos * v.y));
            Meant::Arc { center, end, sweep }
        };
        at = match meant {
            Meant::Line(end) | Meant::Arc { end, .. } => end,
        };
        meant
    });
    (start, moves.collect())
}

/// A word in one of its spellings.
fn word(rng: &mut fastrand::Rng, letter: char, value: f64) -> String {
    let mut number = format!("{value:.6}");
    if rng.bool() {
        number = number.trim_end_matches('0').to_owned();
    }
    if rng.bool() && value.abs() < 1.0 {
        number = number.replacen("0.", ".", 1);
    }
    if number == "." || number == "-." {
        number = "0".to_owned();
    }
    let number = if rng.bool() && value > 0.0 { format!("+{number}") } else { number };
    let letter = if rng.bool() { letter } else { letter.to_ascii_lowercase() };
    format!("{letter}{}{number}", ["", " ", "\t"][rng.usize(..3)])
}

/// The words of one block in any order, with what may stand round them.
fn block(rng: &mut fastrand::Rng, line: usize, mut words: Vec<String>) -> String {
    rng.shuffle(&mut words);
    let mut text = if rng.bool() { format!("N{line}") } else { String::new() };
    for word in words {
        text += ["", " ", "(x9 y9)"][rng.usize(..3)];
        text += &word;
    }
    text + ["", " ", "; x5", "(g2)"][rng.usize(..4)] + ["\n", "\r\n", "\r", "\n\n"][rng.usize(..4)]
}

fn written(rng: &mut fastrand::Rng, start: Point, path: &[Meant]) -> String {
    let mut text = String::from("%\nG21 G17\n");
    let _ = writeln!(text, "G0 X{:.6} Y{:.6}", start.x, start.y);
    let (mut at, mut mode) = (start, 0);
    for (line, meant) in path.iter().enumerate() {
        let mut words = Vec::new();
        let absolute = rng.bool();
        words.push(if absolute { "G90" } else { "g91" }.to_owned());
        let (code, end) = match *meant {
            Meant::Line(end) => (1, end),
            Meant::Arc { end, sweep, .. } => (if sweep < 0.0 { 2 } else { 3 }, end),
        };
        if code != mode || rng.bool() {
            words.push(format!("G{}{code}", if rng.bool() { "0" } else { "" }));
        }
        mode = code;
        let to = if absolute { end.to_vec2() } else { end - at };
        words.push(word(rng, 'X', to.x));
        words.push(word(rng, 'Y', to.y));
        if let Meant::Arc { center, sweep, .. } = *meant {
            // Near half and full turns the radius leaves the center open (NISTIR 6556, 3.5.3.1).
            let steep = sweep.abs() < 2.8 || (3.5..5.9).contains(&sweep.abs());
            let radius = (at - center).hypot();
            if steep && rng.bool() {
                words.push(word(rng, 'R', if sweep.abs() > 3.0 { -radius } else { radius }));
            } else {
                let fixed = rng.bool();
                words.push(if fixed { "G90.1" } else { "G91.1" }.to_owned());
                let c = if fixed { center.to_vec2() } else { center - at };
                words.push(word(rng, 'I', c.x));
                words.push(word(rng, 'J', c.y));
            }
        }
        text += &block(rng, line, words);
        at = end;
    }
    text + "M30\n%\n"
}

#[test]
fn a_path_is_the_same_in_every_spelling() {
    let mut rng = fastrand::Rng::with_seed(3);
    for _ in 0..500 {
        let (start, path) = random_path(&mut rng);
        let text = written(&mut rng, start, &path);
        let program = read(&text).value;
        assert_eq!(program.moves.len(), path.len() + 1, "{text}");
        let sizes = 1e-4;
        for (got, meant) in program.moves.iter().skip(1).zip(&path) {
            match (*meant, got.motion) {
                (Meant::Line(end), Motion::Straight { end: got, .. }) => {
                    assert!((got.plan() - end).hypot() < 1e-7, "{text}");
                }
                (Meant::Arc { center, end, sweep }, Motion::Circular { arc, .. }) => {
                    assert!((arc.end() - end).hypot() < 1e-7, "{text}");
                    assert!((arc.center() - center).hypot() < sizes, "{text}\n{arc:?}\n{meant:?}");
                    assert!((arc.sweep() - sweep).abs() < sizes, "{text}\n{arc:?}\n{meant:?}");
                    assert_eq!(arc.turn() == Turn::Left, sweep > 0.0);
                }
                (meant, got) => panic!("{text}\n{meant:?} read as {got:?}"),
            }
        }
    }
}
