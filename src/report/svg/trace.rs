//! Segments as path data: lines as lines, arcs as arcs.
//!
//! An arc is written in pieces of at most a third of a turn: near half a turn the radius and both ends,
//! rounded, no longer say where the centre is, and a whole turn has no ends to tell apart.

use std::f64::consts::TAU;

use super::page::{Map, mm};
use crate::geometry::{Arc, Path, Point, Segment, Turn};

/// Widest piece of an arc, radians.
const WIDEST: f64 = TAU / 3.0;

/// Segments in one `<path>`: more make some viewers slow.
const CHUNK: usize = 20_000;

/// Steps of a path's straight moves shorter than this on the sheet are joined: a tenth of the line's
/// own width, nobody sees it. Only for the path of the cutter, never for an edge.
const SEEN: f64 = 0.02;

/// Path data being written: remembers where the pen is.
struct Pen<'a> {
    map: &'a Map,
    data: String,
    at: Option<Point>,
}

impl Pen<'_> {
    fn go(&mut self, letter: char, p: Point) {
        let p = self.map.point(p);
        self.data.push(letter);
        self.data.push_str(&format!("{} {}", mm(p.x), mm(p.y)));
    }

    fn move_to(&mut self, p: Point) {
        if self.at != Some(p) {
            self.go('M', p);
            self.at = Some(p);
        }
    }

    fn line_to(&mut self, p: Point) {
        self.go('L', p);
        self.at = Some(p);
    }

    fn arc(&mut self, arc: &Arc) {
        let pieces = (arc.sweep().abs() / WIDEST).ceil().clamp(1.0, 4.0);
        let radius = mm(arc.radius() * self.map.scale);
        // Counter-clockwise stays so to the eye, which SVG, its y downwards, calls negative.
        let sense = if arc.turn() == Turn::Left { 0 } else { 1 };
        let mut k = 1.0;
        while k <= pieces {
            let end = arc.point_at(k / pieces);
            let p = self.map.point(end);
            self.data.push_str(&format!("A{radius} {radius} 0 0 {sense} {} {}", mm(p.x), mm(p.y)));
            k += 1.0;
        }
        self.at = Some(arc.end());
    }

    fn segment(&mut self, segment: &Segment) {
        self.move_to(segment.start());
        match segment {
            Segment::Line(l) => self.line_to(l.end),
            Segment::Arc(a) => self.arc(a),
        }
    }
}

/// One closed loop.
pub fn closed<'a>(segments: impl IntoIterator<Item = &'a Segment>, map: &Map) -> String {
    let mut data = open(segments, map);
    if !data.is_empty() {
        data.push('Z');
    }
    data
}

/// A chain, or several one after the other.
pub fn open<'a>(segments: impl IntoIterator<Item = &'a Segment>, map: &Map) -> String {
    let mut pen = Pen { map, data: String::new(), at: None };
    segments.into_iter().for_each(|s| pen.segment(s));
    pen.data
}

/// Paths, each closed or open as it is.
pub fn paths(paths: &[Path], map: &Map) -> String {
    let one = |p: &Path| if p.is_closed() { closed(p.segments(), map) } else { open(p.segments(), map) };
    paths.iter().map(one).collect()
}

/// The cutter's path in as few pieces as viewers bear, steps too short to be seen joined.
pub fn long<'a>(segments: impl IntoIterator<Item = &'a Segment>, map: &Map) -> Vec<String> {
    let mut out = Vec::new();
    let mut pen = Pen { map, data: String::new(), at: None };
    // Where the path really is, while the pen waits for a step worth drawing.
    let mut pending: Option<Point> = None;
    let mut count = 0usize;
    for segment in segments {
        let breaks = pending.is_some_and(|p| p != segment.start()) || matches!(segment, Segment::Arc(_));
        if let Some(p) = pending.take_if(|_| breaks) {
            pen.line_to(p);
        }
        if pending.is_none() && count >= CHUNK {
            out.push(std::mem::take(&mut pen.data));
            (pen.at, count) = (None, 0);
        }
        match segment {
            Segment::Line(l) => {
                if pending.is_none() {
                    pen.move_to(l.start);
                }
                let step = pen.at.map_or(f64::INFINITY, |at| (l.end - at).hypot() * map.scale);
                if step < SEEN {
                    pending = Some(l.end);
                    continue;
                }
                pen.line_to(l.end);
                pending = None;
            }
            Segment::Arc(_) => pen.segment(segment),
        }
        count += 1;
    }
    if let Some(p) = pending {
        pen.line_to(p);
    }
    if !pen.data.is_empty() {
        out.push(pen.data);
    }
    out
}

/// The part of a path between two lengths along it; on a loop `to` may run on over the start.
pub fn stretch(path: &Path, from: f64, to: f64) -> Vec<Segment> {
    let whole = path.length();
    let mut out = Vec::new();
    let turns = if path.is_closed() { [0.0, whole] } else { [0.0, f64::INFINITY] };
    for shift in turns {
        let mut at = shift;
        for segment in path.segments() {
            let length = segment.length();
            let (a, b) = ((from - at) / length, (to - at) / length);
            at += length;
            let (a, b) = (a.max(0.0), b.min(1.0));
            if a < b {
                out.push(segment.part(a, b));
            }
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::geometry::Rect;
    use crate::report::sample;

    fn map() -> Map {
        Map::fitting(Rect::new(0.0, 0.0, 187.0, 154.0))
    }

    #[test]
    fn a_full_circle_is_three_arcs_and_no_line() {
        let data = closed([&sample::circle(Point::new(50.0, 50.0), 10.0, Turn::Left)], &map());
        assert_eq!(data.matches('A').count(), 3);
        assert!(!data.contains('L'));
        assert!(data.ends_with('Z'));
    }

    #[test]
    fn counter_clockwise_is_sense_zero_on_a_sheet_whose_y_points_down() {
        for (turn, sense) in [(Turn::Left, " 0 0 0 "), (Turn::Right, " 0 0 1 ")] {
            let data = open([&sample::circle(Point::new(50.0, 50.0), 10.0, turn)], &map());
            assert!(data.contains(sense), "{data}");
        }
    }

    #[test]
    fn neighbours_share_one_move_of_the_pen() {
        let data = closed(&sample::rounded(0.0), &map());
        assert_eq!(data.matches('M').count(), 1);
        assert_eq!((data.matches('L').count(), data.matches('A').count()), (4, 4));
    }

    #[test]
    fn a_million_moves_make_few_paths_and_end_where_the_program_ends() {
        let point = |i: u32| Point::new(f64::from(i) * 1e-4, (f64::from(i) * 0.01).sin());
        let moves: Vec<Segment> = (0..1_000_000).map(|i| Segment::line(point(i), point(i + 1))).collect();
        let data = long(&moves, &map());
        assert!(data.len() <= 51, "{}", data.len());
        let end = map().point(point(1_000_000));
        assert!(data.last().is_some_and(|d| d.ends_with(&format!("L{} {}", mm(end.x), mm(end.y)))));
    }

    #[test]
    fn a_stretch_over_the_start_of_a_loop_has_the_asked_length() {
        let path = Path::new(sample::rounded(0.0), true).expect("a loop");
        let whole = path.length();
        for (from, to) in [(0.0, 10.0), (60.0, 100.0), (whole - 5.0, whole + 7.0), (0.0, whole)] {
            let length: f64 = stretch(&path, from, to).iter().map(Segment::length).sum();
            assert!((length - (to - from)).abs() < 1e-9, "{from} {to} {length}");
        }
    }
}
