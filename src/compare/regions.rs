//! What is cut out of the part and what is left standing, as regions with outlines of lines and arcs.
//!
//! With P the part and S the swept region, the gouged regions are the pieces of S within P, and the
//! remaining regions are the bounded pieces of what neither covers: the holes of their union. Both are
//! bounded by parts of the swept edge and parts of the contour, cut where the two meet.
//!
//! A perfect program's swept edge runs along the contour. Where both agree within a length they are
//! taken as one, so that no finding is ever made of a sliver: depths and heights are distances, and a
//! region is only looked up at a place where a distance has already found a fault.

use crate::envelope::{Arrangement, Choice, Clearance, Fragment, Strand, SweptRegion, between, loops};
use crate::geometry::{Contour, Path, Point, Segment, Vec2};
use crate::part::{Keep, Origin, Part, nesting};

mod near;

pub use near::attach_regions;

use super::{Comparison, Excess, Gouge, Region};
use near::Windows;

/// Pieces of the plane, each with a test for points.
#[derive(Debug, Default)]
pub struct Regions {
    gouged: Vec<Region>,
    remaining: Vec<Region>,
}

/// On which of the two boundaries a strand lies.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Of {
    Edge,
    Contour,
}

/// Which combination of part and swept region is outlined.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Combination {
    /// What both cover.
    Common,
    /// What either covers.
    Either,
}

impl Regions {
    /// The regions of one comparison. `within` is the length below which swept edge and contour count
    /// as one line.
    #[must_use]
    pub fn new(part: &Part, swept: &SweptRegion, clearance: &Clearance, within: f64) -> Self {
        Self::of(part, swept, clearance, within, None)
    }

    /// Those whose outlines lie within windows, see [`near`].
    fn within(
        part: &Part,
        swept: &SweptRegion,
        clearance: &Clearance,
        within: f64,
        windows: &Windows,
    ) -> Self {
        Self::of(part, swept, clearance, within, Some(windows))
    }

    fn of(
        part: &Part,
        swept: &SweptRegion,
        clearance: &Clearance,
        within: f64,
        windows: Option<&Windows>,
    ) -> Self {
        let mut strands = Vec::new();
        let mut of = Vec::new();
        let mut places: Vec<Point> = Vec::new();
        let taken = |s: &Segment| windows.is_none_or(|w| w.meets(s.bounds().inflate(within, within)));
        for edge in &swept.loops {
            add_path(edge.pieces.iter().map(|p| p.segment), (true, &taken), &mut strands, &mut places);
        }
        of.resize(strands.len(), Of::Edge);
        for path in part.contour.paths() {
            let segments = path.segments().iter().copied();
            add_path(segments, (path.is_closed(), &taken), &mut strands, &mut places);
        }
        of.resize(strands.len(), Of::Contour);
        let kind = |i: usize| of.get(i).copied();
        let arrangement = Arrangement::between(&strands, places, within, |i, j| kind(i) != kind(j));
        let sight =
            Sight { part, clearance, strands: &strands, of: &of, arrangement: &arrangement, within, windows };
        let alike = sight.alike();
        Self {
            gouged: sight.outline(Combination::Common, &alike),
            remaining: sight.outline(Combination::Either, &alike),
        }
    }

    /// Gives each gouge and each excess of `comparison` the region it belongs to, where there is one.
    pub fn attach(&self, comparison: &mut Comparison) {
        for g in &mut comparison.gouges {
            g.region = find_gouged(self, g, true).cloned();
        }
        for e in &mut comparison.excesses {
            e.region = find_remaining(self, e).cloned();
        }
    }
}

/// The region of a gouge; `all` says that no region is missing.
fn find_gouged<'a>(regions: &'a Regions, g: &Gouge, all: bool) -> Option<&'a Region> {
    // Half the depth past the contour both the cutter and the part are there, unless the part is thinner
    // than that.
    let past = if g.center_inside { Vec2::ZERO } else { past_contour(g.center, g.at, g.depth.size) };
    let probe = if g.center_inside { g.center } else { g.at + past * 0.5 };
    // Where some regions are not known a neighbour of the one wanted could be taken for it.
    find(&regions.gouged, probe).or_else(|| if all { nearest(&regions.gouged, g.at) } else { None })
}

/// The region of an excess.
fn find_remaining<'a>(regions: &'a Regions, e: &Excess) -> Option<&'a Region> {
    nearest(&regions.remaining, e.at)
}

/// Vector of length `depth` from the contour point `at`, away from the cutter's centre.
fn past_contour(center: Point, at: Point, depth: f64) -> Vec2 {
    let v = at - center;
    let l = v.hypot();
    if l > 0.0 { v * (depth / l) } else { Vec2::ZERO }
}

/// The region that holds `p`.
fn find(regions: &[Region], p: Point) -> Option<&Region> {
    regions.iter().find(|r| {
        let Ok(contour) = Contour::new(r.outline.clone(), 0.0) else { return false };
        let origins = vec![Origin::default(); r.outline.len()];
        contour.bounds().contains(p)
            && Part::new(contour, Keep::Inside, 0.0, origins).is_ok_and(|part| part.contains(p))
    })
}

/// The region whose outline passes through `p`, to within a millionth of its size.
fn nearest(regions: &[Region], p: Point) -> Option<&Region> {
    let mut best: Option<(f64, &Region)> = None;
    for r in regions {
        let size = r.outline.iter().map(Path::length).sum::<f64>();
        let reach = 1e-6 * size.max(1e-3);
        for path in &r.outline {
            if !path.bounds().inflate(reach, reach).contains(p) {
                continue;
            }
            let d = path.segments().iter().map(|s| s.distance(p)).fold(f64::INFINITY, f64::min);
            let better = best.is_none_or(|(b, other)| d < b || (d <= b && r.area > other.area));
            if d <= reach && better {
                best = Some((d, r));
            }
        }
    }
    best.map(|b| b.1)
}

/// Adds those segments of a path that are taken as strands; neighbours share nodes.
fn add_path(
    segments: impl ExactSizeIterator<Item = Segment>,
    (closed, taken): (bool, &dyn Fn(&Segment) -> bool),
    strands: &mut Vec<Strand>,
    places: &mut Vec<Point>,
) {
    let count = segments.len();
    // Node at the start of the path, when its first segment is taken, and at the end of the last one.
    let (mut first, mut last): (Option<u32>, Option<u32>) = (None, None);
    let node = |at: Point, places: &mut Vec<Point>| {
        places.push(at);
        (places.len() - 1) as u32
    };
    for (k, segment) in segments.enumerate() {
        if !taken(&segment) {
            last = None;
            continue;
        }
        let start = last.unwrap_or_else(|| node(segment.start(), places));
        if k == 0 {
            first = Some(start);
        }
        let back = first.filter(|_| closed && k + 1 == count);
        let end = back.unwrap_or_else(|| node(segment.end(), places));
        strands.push(Strand { segment, nodes: [start, end] });
        last = Some(end);
    }
}

/// A fragment of contour and one of swept edge that run over the same ground.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Alike {
    /// No other fragment runs here.
    No,
    /// The same way: material of part and swept region on the same side.
    SameWay,
    /// Against one another: the cutter ran along the contour as it should.
    Against,
}

/// What is needed to decide on a fragment.
struct Sight<'a> {
    part: &'a Part,
    clearance: &'a Clearance,
    strands: &'a [Strand],
    of: &'a [Of],
    arrangement: &'a Arrangement,
    within: f64,
    windows: Option<&'a Windows>,
}

impl Sight<'_> {
    fn segment(&self, f: &Fragment) -> Segment {
        let place = |n: u32| self.arrangement.places.get(n as usize).copied().unwrap_or(Point::ZERO);
        match self.strands.get(f.strand as usize) {
            Some(s) => between(&s.segment, f.t, place(f.nodes[0]), place(f.nodes[1])),
            None => Segment::line(Point::ZERO, Point::ZERO),
        }
    }

    fn of(&self, f: &Fragment) -> Of {
        self.of.get(f.strand as usize).copied().unwrap_or(Of::Edge)
    }

    /// For every fragment whether one of the other boundary runs between the same nodes over the same
    /// ground.
    fn alike(&self) -> Vec<Alike> {
        let fragments = &self.arrangement.fragments;
        let mut alike = vec![Alike::No; fragments.len()];
        let key = |f: &Fragment| [f.nodes[0].min(f.nodes[1]), f.nodes[0].max(f.nodes[1])];
        let mut order: Vec<u32> = (0..fragments.len() as u32).collect();
        order.sort_by_key(|&i| (fragments.get(i as usize).map(key), i));
        let at = |i: u32| fragments.get(i as usize);
        for run in order.chunk_by(|&a, &b| at(a).map(key) == at(b).map(key)) {
            for (k, &i) in run.iter().enumerate() {
                for &j in run.iter().skip(k + 1) {
                    let (Some(a), Some(b)) = (at(i), at(j)) else { continue };
                    let near = || {
                        let (sa, sb) = (self.segment(a), self.segment(b));
                        sb.distance(sa.point_at(0.5)) <= 8.0 * self.within
                    };
                    if self.of(a) == self.of(b) || !near() {
                        continue;
                    }
                    let how = if a.nodes == b.nodes { Alike::SameWay } else { Alike::Against };
                    for n in [i, j] {
                        if let Some(slot) = alike.get_mut(n as usize) {
                            *slot = how;
                        }
                    }
                }
            }
        }
        alike
    }

    /// Has the fragment been cut by everything that meets it?
    fn is_known(&self, f: &Fragment) -> bool {
        self.windows.is_none_or(|w| w.holds(self.segment(f).bounds().inflate(self.within, self.within)))
    }

    /// Does the fragment bound the combination?
    fn bounds(&self, f: &Fragment, alike: Alike, combination: Combination) -> bool {
        match alike {
            Alike::Against => return false,
            Alike::SameWay => return self.of(f) == Of::Contour,
            Alike::No => {}
        }
        let middle = self.segment(f).point_at(0.5);
        let under = match self.of(f) {
            Of::Edge => self.part.contains(middle),
            Of::Contour => self.clearance.at(middle).is_some_and(|c| c.clearance < 0.0),
        };
        under == (combination == Combination::Common)
    }

    /// Outlined pieces: of what both cover, or the holes of what either covers.
    fn outline(&self, combination: Combination, alike: &[Alike]) -> Vec<Region> {
        let choices: Vec<Choice> = self
            .arrangement
            .fragments
            .iter()
            .zip(alike)
            .map(|(f, &a)| Choice {
                fragment: *f,
                kept: self.is_known(f) && self.bounds(f, a, combination),
                doubt: 0.0,
            })
            .collect();
        let mut rings: Vec<Path> = Vec::new();
        for ring in loops(&choices, |f, t| self.segment(f).tangent_at(t)) {
            let pieces: Vec<Segment> = ring
                .iter()
                .filter_map(|&i| choices.get(i as usize))
                .map(|c| self.segment(&c.fragment))
                .collect();
            // What a hole of the union leaves open is on the right of its boundary.
            if let Ok(path) = Path::new(pieces, true) {
                rings.push(if combination == Combination::Either { path.reversed() } else { path });
            }
        }
        group(rings, self.within)
    }
}

/// Loops grouped into regions: each counter-clockwise loop with the clockwise ones directly in it.
fn group(rings: Vec<Path>, within: f64) -> Vec<Region> {
    let rings: Vec<Path> =
        rings.into_iter().filter(|p| p.signed_area().abs() > within * p.length()).collect();
    let Ok(contour) = Contour::new(rings, 0.0) else { return Vec::new() };
    let nests = nesting(&contour);
    let mut region_of: Vec<Option<usize>> = vec![None; nests.len()];
    let mut regions: Vec<Region> = Vec::new();
    for (i, path) in contour.paths().iter().enumerate() {
        if path.signed_area() > 0.0 {
            if let Some(slot) = region_of.get_mut(i) {
                *slot = Some(regions.len());
            }
            regions.push(Region { area: path.signed_area(), outline: vec![path.clone()] });
        }
    }
    for (path, nest) in contour.paths().iter().zip(&nests) {
        if path.signed_area() > 0.0 {
            continue;
        }
        // A clockwise loop in no region is the far side of something that has no outer boundary.
        let home = nest.parent.and_then(|p| region_of.get(p).copied().flatten());
        if let Some(region) = home.and_then(|h| regions.get_mut(h)) {
            region.area += path.signed_area();
            region.outline.push(path.clone());
        }
    }
    regions
}
