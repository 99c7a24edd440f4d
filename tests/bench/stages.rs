//! How long the stages take: `cargo bench`. Ratios count, not times: the machine is never quiet.

#[path = "workloads.rs"]
mod workloads;

use divan::{Bencher, black_box};
use sweptedge::envelope::{Clearance, sweep};
use sweptedge::geometry::{Point, Segment};
use sweptedge::input::program::{ProgramOptions, read_iso};
use sweptedge::program::MoveIndex;
use sweptedge::view::{DiscFamily, DiscMove};

fn main() {
    divan::main();
}

fn family(name: &str, moves: usize) -> DiscFamily {
    let path =
        workloads::make(name, moves).unwrap_or_else(|| workloads::Path { points: vec![], closed: false });
    let count = if path.closed { path.points.len() } else { path.points.len().saturating_sub(1) };
    let at =
        |i: usize| path.points.get(i % path.points.len()).map_or(Point::ZERO, |p| Point::new(p[0], p[1]));
    let moves = (0..count)
        .map(|i| DiscMove::constant(Segment::line(at(i), at(i + 1)), workloads::RADIUS, MoveIndex(i as u32)));
    DiscFamily { moves: moves.collect() }
}

#[divan::bench(args = workloads::NAMES, consts = [1_000, 10_000, 100_000])]
fn swept_edge<const N: usize>(bencher: Bencher, name: &str) {
    let f = family(name, N);
    bencher.counter(divan::counter::ItemsCount::new(N)).bench(|| sweep(black_box(&f)));
}

#[divan::bench(args = workloads::NAMES)]
fn clearance_index_of_100_000_moves(bencher: Bencher, name: &str) {
    let f = family(name, 100_000);
    bencher.bench(|| Clearance::new(black_box(&f)));
}

#[divan::bench(args = workloads::NAMES)]
fn clearance_at_10_000_points(bencher: Bencher, name: &str) {
    let f = family(name, 100_000);
    let clearance = Clearance::new(&f);
    let mut rng = fastrand::Rng::with_seed(2);
    let mut near = || {
        let p = f.moves.get(rng.usize(..f.moves.len())).map_or(Point::ZERO, |m| m.segment.start());
        Point::new(p.x + 12.0 * rng.f64() - 6.0, p.y + 12.0 * rng.f64() - 6.0)
    };
    let points: Vec<Point> = (0..10_000).map(|_| near()).collect();
    bencher.bench(|| points.iter().filter_map(|&p| clearance.at(p)).map(|c| c.clearance).sum::<f64>());
}

#[divan::bench]
fn program_of_100_000_blocks(bencher: Bencher) {
    let mut text = String::from("G21 G90 G17\nG0 X0 Y0\nG1 F500\n");
    for p in workloads::make("profile", 100_000).map_or(vec![], |p| p.points) {
        text += &format!("X{:.4} Y{:.4}\n", p[0], p[1]);
    }
    text += "M30\n";
    bencher
        .counter(divan::counter::BytesCount::new(text.len()))
        .bench(|| read_iso(black_box(text.as_bytes()), "bench.nc", &ProgramOptions::default()).is_ok());
}
