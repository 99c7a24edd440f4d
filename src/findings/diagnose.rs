//! Why did it come about? Geometrical tests, in the order in which they are asked; the first that
//! holds names the cause. A cause is a judgement and no figure: it changes neither size nor verdict.
//!
//! | cause | test |
//! | --- | --- |
//! | wrong-diameter | the signed deviation is the same (within a tenth) along at least six tenths of the visited contour, has the finding's sign, and reaches the limit; the finding has that size or covers a quarter of its path |
//! | never-visited | the comparison lists the whole path as unvisited |
//! | missed-pass (cusp) | the comparison found a crest between two passes no farther apart than the cutter is wide |
//! | fold-left-in-path, tight-turn | a gouge by moves of a fold, no farther from it than the loop is wide, and on the inner side of a tight turn |
//! | arc-wrong-way | the worst move of a gouge is an arc that would clear the part, and join its neighbours more smoothly, if it turned the other way |
//! | inside-corner | the contour's largest touching disc there is smaller than the cutter, and what a cutter must leave there explains the height |
//! | chords-too-long | the worst move is one of at least three like chords, the contour there is curved, and their sagitta is 0.7 to 2.2 times the size; or one straight move whose ends keep their distance from a wall that is an arc |
//! | entry-or-exit | a gouge by the first or last move of a cut; an excess no longer than two diameters whose nearest point of the path is the end of a cut; a crest between the first moves of a cut and its last ones |
//! | missed-pass | no move runs alongside within a radius |
//! | path-off-contour | a pass runs alongside the wall, or ends before it, less than a radius off its place |
//! | unknown | none of these |

use std::collections::HashSet;

use super::Kind;
use super::corner::{Tight, tight_place};
use super::draft::{Diagnosis, Draft};
use super::judge::Facts;
use super::moves::{Cuts, Run};
use super::walls::Walls;
use crate::compare::{Excess, Fold, FoldKind, Gouge};
use crate::geometry::Segment;

/// The same deviation over this share of the visited contour is constant.
const MOST_OF_IT: f64 = 0.6;

/// Two sizes are the same within this fraction.
const SAME: f64 = 0.15;

/// A stretch over this share of its path belongs to a constant deviation whatever its greatest size.
const LONG_STRETCH: f64 = 0.25;

/// A pass runs alongside when it is parallel to the wall within about 20 degrees.
pub(super) const ALONGSIDE: f64 = 0.94;

/// What is judged, with what makes questions about it cheap.
pub(super) struct Scene<'a> {
    pub facts: &'a Facts<'a>,
    pub walls: Walls<'a>,
    pub cuts: Cuts<'a>,
    pub rapids: Cuts<'a>,
    constant: Option<Constant>,
    unvisited: HashSet<usize>,
    /// Folds by their first move, with their positions, and the most moves that one of them spans.
    folds: Vec<(usize, Fold)>,
    longest_fold: usize,
}

/// A deviation that is the same nearly everywhere.
#[derive(Clone, Copy, Debug)]
struct Constant {
    /// Positive where material remains.
    median: f64,
    share: f64,
}

impl<'a> Scene<'a> {
    pub(super) fn new(facts: &'a Facts<'a>) -> Self {
        let walls = Walls::new(&facts.part.contour);
        let cuts = Cuts::new(facts.cutting, facts.program);
        let rapids = Cuts::new(facts.rapids, facts.program);
        let unvisited = facts.comparison.never_visited.iter().copied().collect();
        let mut folds: Vec<(usize, Fold)> = facts.comparison.folds.iter().copied().enumerate().collect();
        folds.sort_by_key(|(_, f)| f.moves.0);
        let longest_fold = folds.iter().map(|(_, f)| f.moves.1.saturating_sub(f.moves.0)).max().unwrap_or(0);
        let mut scene = Self { facts, walls, cuts, rapids, constant: None, unvisited, folds, longest_fold };
        scene.constant = match &facts.comparison.deviation {
            Some(d) => Some(Constant { median: d.median, share: d.share }),
            None => scene.constant_of_stretches(),
        }
        .filter(|c| c.share >= MOST_OF_IT);
        scene
    }

    /// Without a summary of the deviation: do the stretches of one kind cover most of the visited
    /// contour with sizes that are alike?
    fn constant_of_stretches(&self) -> Option<Constant> {
        let comparison = self.facts.comparison;
        let paths = 0..self.walls.contour().paths().len();
        let visited: f64 =
            paths.filter(|p| !self.unvisited.contains(p)).map(|p| self.walls.path_length(p)).sum();
        let gouges = comparison.gouges.iter().map(|g| (g.depth.size, Walls::stretch_length(&g.stretch)));
        let visited_excess =
            comparison.excesses.iter().filter(|e| e.crest.is_none() && !self.is_unvisited(e));
        let excesses =
            visited_excess.filter_map(|e| Some((e.height.size, Walls::stretch_length(e.stretch.as_ref()?))));
        let found = [(-1.0, gouges.collect::<Vec<_>>()), (1.0, excesses.collect())];
        found.into_iter().find_map(|(sign, mut sizes)| {
            sizes.sort_by(|a, b| a.0.total_cmp(&b.0));
            let half = 0.5 * sizes.iter().map(|s| s.1).sum::<f64>();
            let mut so_far = 0.0;
            let median = sizes.iter().find(|s| {
                so_far += s.1;
                so_far >= half
            })?;
            let near = sizes.iter().filter(|s| (s.0 - median.0).abs() <= SAME * median.0);
            let share = if visited > 0.0 { near.map(|s| s.1).sum::<f64>() / visited } else { 0.0 };
            // What compares with a summary is the deviation past contour and allowance.
            let reserve = if sign < 0.0 { self.facts.part.allowance } else { 0.0 };
            let median = sign * median.0 - reserve;
            (share >= MOST_OF_IT).then_some(Constant { median, share: share.min(1.0) })
        })
    }

    fn is_unvisited(&self, excess: &Excess) -> bool {
        let path = excess.stretch.map(|s| s.path);
        excess.whole_path && path.is_some_and(|p| self.unvisited.contains(&p))
    }

    /// Does no move come near any path of the contour?
    pub(super) fn all_unvisited(&self) -> bool {
        let paths = self.walls.contour().paths().len();
        (0..paths).all(|p| self.unvisited.contains(&p))
    }

    /// Is there no path of the contour that was held against the program?
    pub(super) fn nothing_judged(&self) -> bool {
        self.all_unvisited() && self.facts.comparison.excesses.is_empty()
    }

    /// One draft for each thing the comparison found.
    pub(super) fn drafts(&self) -> Vec<Draft> {
        let c = self.facts.comparison;
        let gouges = c.gouges.iter().map(|g| self.gouge(g));
        let excesses = c.excesses.iter().map(|e| self.excess(e));
        let rapids = c.rapids.iter().map(|r| Draft {
            kind: Kind::Rapid,
            figure: r.depth,
            limit: Some(0.0),
            at: r.at,
            center: Some(r.center),
            center_inside: false,
            region: None,
            contour: None,
            culprits: vec![(r.depth.size, r.rapid)],
            moves: (r.rapid, r.rapid),
            radius: self.rapids.radius(r.rapid),
            diagnosis: Diagnosis::Rapid,
            count: 1,
        });
        gouges.chain(excesses).chain(rapids).chain(c.folds.iter().map(|f| self.fold_note(f))).collect()
    }

    fn fold_note(&self, fold: &Fold) -> Draft {
        let figure = crate::compare::Figure { size: fold.radius, bound: 0.0 };
        Draft {
            kind: Kind::Fold,
            figure,
            limit: None,
            at: fold.at,
            center: None,
            center_inside: false,
            region: None,
            contour: None,
            culprits: vec![(fold.radius, fold.moves.0)],
            moves: fold.moves,
            radius: self.cuts.radius(fold.moves.0),
            diagnosis: Diagnosis::FoldNote { kind: fold.kind, radius: fold.radius },
            count: 1,
        }
    }

    fn gouge(&self, gouge: &Gouge) -> Draft {
        let mut draft = Draft {
            kind: Kind::Gouge,
            figure: gouge.depth,
            limit: Some(self.facts.limits.gouge),
            at: gouge.at,
            center: Some(gouge.center),
            center_inside: self.facts.part.contains(gouge.center),
            region: gouge.region.clone(),
            contour: Some(gouge.stretch),
            culprits: vec![(gouge.depth.size, gouge.worst_move)],
            moves: gouge.moves,
            radius: self.cuts.radius(gouge.worst_move),
            diagnosis: Diagnosis::Unknown,
            count: 1,
        };
        draft.diagnosis = self
            .constant(&draft)
            .or_else(|| self.turned_wrong_way(gouge))
            .or_else(|| self.fold_behind(gouge))
            .or_else(|| self.chords_behind(&draft))
            .or_else(|| self.entry_too_deep(gouge))
            .or_else(|| self.too_narrow(&draft))
            .unwrap_or(Diagnosis::Unknown);
        if let (Diagnosis::Unknown, Some((near, by))) = (draft.diagnosis, self.too_near(&draft, gouge.moves))
        {
            draft.diagnosis = near;
            draft.culprits = vec![(gouge.depth.size, by)];
        }
        draft
    }

    fn excess(&self, excess: &Excess) -> Draft {
        let limits = &self.facts.limits;
        let crest = self.crest_step(excess).and(excess.crest);
        let size = excess.height.size;
        let culprits = match crest {
            Some(c) => vec![(size, c.moves.0), (size, c.moves.1)],
            None => vec![(size, excess.nearest_move)],
        };
        let moves = crest.map_or((excess.nearest_move, excess.nearest_move), |c| {
            (c.moves.0.min(c.moves.1), c.moves.0.max(c.moves.1))
        });
        let mut draft = Draft {
            kind: if crest.is_some() { Kind::Cusp } else { Kind::Excess },
            figure: excess.height,
            limit: Some(if crest.is_some() { limits.cusp } else { limits.excess }),
            at: excess.at,
            center: None,
            center_inside: false,
            region: excess.region.clone(),
            contour: excess.stretch,
            culprits,
            moves,
            radius: self.cuts.radius(excess.nearest_move),
            diagnosis: Diagnosis::Unknown,
            count: 1,
        };
        draft.diagnosis = self
            .unvisited_or_crest(excess)
            .or_else(|| self.constant(&draft))
            .or_else(|| self.too_tight(&draft))
            .or_else(|| self.chords_behind(&draft))
            .or_else(|| excess.stretch.is_none().then_some(Diagnosis::Spot))
            .or_else(|| self.cut_too_short(&draft))
            .unwrap_or_else(|| self.no_pass(&draft));
        draft
    }

    fn unvisited_or_crest(&self, excess: &Excess) -> Option<Diagnosis> {
        if self.is_unvisited(excess) {
            return Some(Diagnosis::NeverVisited);
        }
        let step = self.crest_step(excess)?;
        let gap = excess.crest.and_then(|c| self.gap(c.moves));
        Some(gap.unwrap_or(Diagnosis::Crest { step }))
    }

    /// Distance of the two passes beside a crest. `None` where there is no crest, or where the passes
    /// stand farther apart than their cutters are wide: nothing was cut between them, and what stays
    /// is a wall without a pass.
    fn crest_step(&self, excess: &Excess) -> Option<f64> {
        let (a, b) = excess.crest?.moves;
        let near = |i: usize| self.cuts.segment(i).map(|s| s.nearest(excess.at).at);
        let step = (near(a)? - near(b)?).hypot();
        (step <= self.cuts.radius(a) + self.cuts.radius(b)).then_some(step)
    }

    fn constant(&self, draft: &Draft) -> Option<Diagnosis> {
        let Constant { median, share } = self.constant?;
        let limit = draft.limit?;
        let same_sign = (median < 0.0) == (draft.kind == Kind::Gouge);
        // A gouge is measured past the contour itself, the deviation past contour and allowance.
        let usual = if draft.kind == Kind::Gouge { -(median + self.facts.part.allowance) } else { median };
        let size = draft.figure.size;
        let covers = draft
            .contour
            .is_some_and(|c| Walls::stretch_length(&c) >= LONG_STRETCH * self.walls.path_length(c.path));
        let belongs = (size - usual).abs() <= SAME * usual || (covers && size >= usual);
        let explains = usual > 0.0 && usual * (1.0 + SAME) >= limit;
        (same_sign && belongs && explains).then_some(Diagnosis::Constant { median, share })
    }

    fn fold_behind(&self, gouge: &Gouge) -> Option<Diagnosis> {
        let radius = self.cuts.radius(gouge.worst_move);
        let bites = |fold: &Fold| {
            let overlap = fold.moves.0 <= gouge.moves.1 && gouge.moves.0 <= fold.moves.1;
            let near = (gouge.center - fold.at).hypot() <= 2.0 * fold.radius + radius;
            let inner = || {
                let (from, to) = fold.moves;
                self.cuts
                    .inner_side(gouge.worst_move, from, to, gouge.center)
                    .is_some_and(|side| side.dot(gouge.at - gouge.center) > 0.0)
            };
            overlap && near && (fold.kind == FoldKind::Loop || inner())
        };
        let from =
            self.folds.partition_point(|(_, f)| f.moves.0.saturating_add(self.longest_fold) < gouge.moves.0);
        let begun = self.folds.iter().skip(from).take_while(|(_, f)| f.moves.0 <= gouge.moves.1);
        let folds = begun.filter(|(_, f)| bites(f));
        // A loop says more than the tight turns that it consists of.
        let &(fold, f) = folds.min_by_key(|(_, f)| f.kind != FoldKind::Loop)?;
        Some(Diagnosis::Fold { fold, kind: f.kind, radius: f.radius, at: f.at, moves: f.moves })
    }

    fn chords_behind(&self, draft: &Draft) -> Option<Diagnosis> {
        let Some(chords) = self.cuts.chords(draft.worst_move()) else { return self.one_chord(draft) };
        let i = self.walls.locate(draft.at, draft.contour.map(|c| c.path))?;
        let curved = match self.walls.segment(i)? {
            Segment::Arc(_) => true,
            Segment::Line(l) => l.length() < 0.5 * chords.length,
        };
        let ratio = chords.sagitta() / draft.figure.size;
        (curved && (0.7..=2.2).contains(&ratio)).then_some(Diagnosis::Chords(chords))
    }

    /// A crest that stays between the beginning and the end of one cut: they should overlap.
    fn gap(&self, crest: (usize, usize)) -> Option<Diagnosis> {
        let (first, last) = (crest.0.min(crest.1), crest.0.max(crest.1));
        let run = self.cuts.run(first)?;
        let opens = first <= run.first.saturating_add(1);
        let closes = last <= run.last && last.saturating_add(1) >= run.last;
        (opens && closes && last - first > 2).then_some(Diagnosis::Gap { first, last })
    }

    fn entry_too_deep(&self, gouge: &Gouge) -> Option<Diagnosis> {
        let run = self.cuts.run(gouge.worst_move)?;
        let entry = gouge.moves.1 <= run.first;
        let leaving = gouge.moves.0 >= run.last;
        let several = run.last.saturating_sub(run.first) >= 2;
        (several && (entry || leaving)).then_some(Diagnosis::EntryTooDeep { entry, run })
    }

    fn too_narrow(&self, draft: &Draft) -> Option<Diagnosis> {
        let radius = draft.radius;
        let path = draft.contour.map(|c| c.path);
        let narrow = |t: &Tight| matches!(t, Tight::Narrow { .. });
        tight_place(&self.walls, path, draft.at, radius, narrow).map(Diagnosis::Tight)
    }

    fn too_tight(&self, draft: &Draft) -> Option<Diagnosis> {
        let path = draft.contour.map(|c| c.path)?;
        let (radius, limit) = (draft.radius + self.facts.part.allowance, draft.limit?);
        let explained = |t: &Tight| t.explains(draft.figure.size, radius, limit);
        tight_place(&self.walls, Some(path), draft.at, radius, explained).map(Diagnosis::Tight)
    }

    fn cut_too_short(&self, draft: &Draft) -> Option<Diagnosis> {
        let i = draft.worst_move();
        let (run, near): (Run, _) = (self.cuts.run(i)?, self.cuts.segment(i)?.nearest(draft.at));
        let short = draft.contour.is_some_and(|c| Walls::stretch_length(&c) <= 4.0 * draft.radius);
        let entry = i <= run.first && near.t <= 0.0;
        let leaving = i >= run.last && near.t >= 1.0;
        (short && (entry || leaving)).then_some(Diagnosis::CutTooShort { entry, run })
    }

    /// Material without a pass beside it, or a pass that stands off.
    fn no_pass(&self, draft: &Draft) -> Diagnosis {
        let i = draft.worst_move();
        let near = self.cuts.segment(i).map(|s| (s.nearest(draft.at), s));
        let wall = self.walls.locate(draft.at, draft.contour.map(|c| c.path));
        let Some(((near, pass), wall)) = near.zip(wall.and_then(|w| self.walls.segment(w))) else {
            return Diagnosis::Unknown;
        };
        let along = wall.tangent_at(wall.nearest(draft.at).t).dot(pass.tangent_at(near.t)).abs();
        if draft.figure.size < draft.radius && along >= ALONGSIDE {
            Diagnosis::OffPath
        } else {
            Diagnosis::NoPass { distance: near.distance }
        }
    }
}
