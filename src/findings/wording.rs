//! What a finding says: what is wrong in a sentence or two with its figures, and what to change in
//! numbers that can be typed in. Numbers to keep to are rounded to the safe side.

use super::corner::Tight;
use super::diagnose::Scene;
use super::draft::{Diagnosis, Draft};
use super::moves::{Chords, Cuts, chord_within, step_over_within};
use super::number::{
    angle_text, angle_text_down, figure_text, length_text, length_text_down, length_text_up, point_text,
    stated_text,
};
use super::walls::Walls;
use super::{BlockRef, Kind};
use crate::compare::FoldKind;
use crate::geometry::{Point, Vec2};
use crate::program::Unit;

/// Below this a cutter is no answer, as a fraction of the one in use.
const SENSIBLE: f64 = 0.2;

/// Puts findings into words.
pub(super) struct Words<'a> {
    scene: &'a Scene<'a>,
    unit: Unit,
    allowance: f64,
}

impl<'a> Words<'a> {
    pub(super) const fn new(scene: &'a Scene<'a>) -> Self {
        Self { scene, unit: scene.facts.unit, allowance: scene.facts.part.allowance }
    }

    /// The blocks of a draft, the worst first.
    pub(super) fn blocks(&self, d: &Draft) -> Vec<BlockRef> {
        let worst: Vec<usize> = d.culprits.iter().map(|c| c.1).collect();
        let gouge_or_fold = matches!(d.kind, Kind::Gouge | Kind::Fold);
        let range = match d.diagnosis {
            Diagnosis::Fold { moves, .. } => Some(moves),
            _ => gouge_or_fold.then_some(d.moves),
        };
        self.cuts(d).blocks(&worst, range)
    }

    const fn cuts(&self, d: &Draft) -> &Cuts<'a> {
        match d.kind {
            Kind::Rapid => &self.scene.rapids,
            _ => &self.scene.cuts,
        }
    }

    /// What is wrong.
    pub(super) fn message(&self, d: &Draft, decided: bool) -> String {
        let mut text = format!("{}{}", self.what(d), self.why(d));
        if !decided {
            text.push_str(&format!(
                " The figure is certain to {} only, so it may lie on either side of the limit.",
                self.up(d.figure.bound)
            ));
        }
        text
    }

    fn what(&self, d: &Draft) -> String {
        let at = point_text(d.at, self.unit);
        let sign = self.unit.sign();
        let size = format!("{} {sign}", figure_text(d.figure, d.limit, self.unit));
        let limit = format!("{} {sign}", stated_text(d.limit.unwrap_or(0.0)));
        let places = if d.count > 1 { format!(", the worst of {} places", d.count) } else { String::new() };
        let on = if self.allowance > 0.0 { "over the allowance" } else { "on the contour" };
        match d.kind {
            Kind::Gouge => {
                format!("The cutter reaches {size} past the contour at {at}{places} (limit {limit})")
            }
            Kind::Rapid => format!("A rapid move runs {size} into the part at {at}{places}"),
            Kind::Cusp => {
                format!("A cusp of {size} stays between two passes at {at}{places} (limit {limit})")
            }
            Kind::Fold if d.count > 1 => format!("{} places of the path, one of them at {at},", d.count),
            Kind::Fold => format!("The path at {at}"),
            Kind::Excess if d.contour.is_none() => {
                format!("{size} of material stays beyond the nearest cut at {at}{places} (limit {limit})")
            }
            Kind::Excess => format!("{size} of material stays {on} at {at}{places} (limit {limit})"),
        }
    }

    /// The rest of the sentence: the cause.
    fn why(&self, d: &Draft) -> String {
        let cutter = format!("the cutter of {}", self.len(2.0 * d.radius));
        let lines = self.cuts(d).lines_text(d.moves.0, d.moves.1);
        match &d.diagnosis {
            Diagnosis::Tight(tight) => self.why_tight(tight, &cutter),
            Diagnosis::Fold { kind: FoldKind::Loop, moves, .. } => format!(
                ": the path still holds a small loop, in {}, that {cutter} cannot follow.",
                self.scene.cuts.lines_text(moves.0, moves.1)
            ),
            Diagnosis::Fold { radius, moves, .. } => format!(
                ": in {} the path turns on a radius of {}, tighter than {cutter}.",
                self.scene.cuts.lines_text(moves.0, moves.1),
                self.len(*radius)
            ),
            Diagnosis::Constant { median, share } => format!(
                ", and about {} along {:.0} % of the contour that is cut: {cutter} is {} than the program \
                 assumes.",
                self.len(median.abs()),
                100.0 * share.clamp(0.0, 1.0),
                if *median < 0.0 { "larger" } else { "smaller" }
            ),
            Diagnosis::Chords(c) => format!(
                ": in {} a curve is cut in straight chords of about {}, each up to {} off the curve.",
                lines,
                self.len(c.length),
                self.len(c.sagitta())
            ),
            Diagnosis::Crest { step } => {
                format!(": the passes of {} stand {} apart.", self.two_lines(d), self.len(*step))
            }
            Diagnosis::NoPass { distance } => format!(
                ": no pass of {cutter} runs along there, the nearest center stays {} away.",
                self.len(*distance)
            ),
            Diagnosis::Spot => format!(": no pass of {cutter} comes over that spot."),
            Diagnosis::NeverVisited => self.why_unvisited(d, &cutter),
            Diagnosis::EntryTooDeep { entry: true, .. } => {
                format!(": the move onto the contour, {lines}, cuts in.")
            }
            Diagnosis::EntryTooDeep { .. } => format!(": the move off the contour, {lines}, cuts in."),
            Diagnosis::CutTooShort { entry: true, .. } => format!(": the cut begins too late, in {lines}."),
            Diagnosis::CutTooShort { .. } => format!(": the cut ends too early, in {lines}."),
            Diagnosis::Rapid => format!(", in {lines}."),
            Diagnosis::FoldNote { kind: FoldKind::Loop, radius } => {
                format!(" crosses itself in a small loop {} wide, in {lines}.", self.len(2.0 * radius))
            }
            Diagnosis::FoldNote { radius, .. } if d.count > 1 => format!(
                " turn on a radius of about {}, tighter than {cutter}, in {lines}.",
                self.len(*radius)
            ),
            Diagnosis::FoldNote { radius, .. } => {
                format!(" turns on a radius of {}, tighter than {cutter}, in {lines}.", self.len(*radius))
            }
            Diagnosis::Unknown if d.kind == Kind::Gouge => format!(", in {lines}."),
            Diagnosis::Unknown => format!(": the nearest pass, {lines}, stands off the contour."),
        }
    }

    fn why_tight(&self, tight: &Tight, cutter: &str) -> String {
        match tight {
            Tight::Sharp { opening, .. } => {
                format!(": {cutter} cannot reach into the inside corner of {}.", angle_text(*opening))
            }
            Tight::Fillet { radius, .. } => {
                format!(": {cutter} is wider than the inside fillet of radius {}.", self.len(*radius))
            }
            Tight::Narrow { width } => {
                format!(": {cutter} does not fit between walls that stand {} apart.", self.len(*width))
            }
            Tight::Curve { radius } => {
                format!(
                    ": {cutter} is wider than the inside curve, which takes a radius of {} at most.",
                    self.len(*radius)
                )
            }
        }
    }

    fn why_unvisited(&self, d: &Draft, cutter: &str) -> String {
        let path = d.contour.and_then(|c| self.scene.walls.contour().paths().get(c.path));
        let what = if path.is_some_and(|p| p.is_closed()) { "loop" } else { "chain" };
        let number = d.contour.map_or(0, |c| c.path);
        let Some(b) = path.map(|p| p.bounds()) else {
            return ": the program never comes near it.".to_owned();
        };
        let wide = if what == "loop" && b.width().min(b.height()) < 2.0 * d.radius {
            format!(", and {cutter} is wider")
        } else {
            String::new()
        };
        format!(
            ": the program never comes near {what} {number} of the drawing ({} by {}{wide}).",
            self.len(b.width()),
            self.len(b.height())
        )
    }

    /// What to change.
    pub(super) fn remedy(&self, d: &Draft) -> String {
        match &d.diagnosis {
            Diagnosis::Tight(tight) => self.remedy_tight(tight, d),
            Diagnosis::Fold { kind: FoldKind::Loop, moves, at, .. } => self.cut_out(*moves, *at),
            Diagnosis::Fold { radius, moves, .. } => self.widen_turn(*moves, *radius, d.radius),
            Diagnosis::Constant { median, .. } => self.remedy_constant(*median, d),
            Diagnosis::Chords(c) => self.remedy_chords(c, d),
            Diagnosis::Crest { .. } => {
                let step = step_over_within(d.limit.unwrap_or(0.0), d.radius);
                format!(
                    "Put these passes no more than {} apart, or add a pass between them.",
                    self.down(step)
                )
            }
            Diagnosis::NoPass { .. } => self.remedy_no_pass(d),
            Diagnosis::Spot => format!(
                "Add a pass over {}: passes there may stand no more than {} apart, and now leave a gap of {}.",
                point_text(d.at, self.unit),
                self.down(2.0 * d.radius),
                self.up(2.0 * d.figure.size)
            ),
            Diagnosis::NeverVisited => {
                "If another tool or program makes it, leave it out with --only-visited; else add the moves \
                 that cut it."
                    .to_owned()
            }
            Diagnosis::EntryTooDeep { .. } | Diagnosis::Unknown if d.kind == Kind::Gouge => self.move_away(d),
            Diagnosis::CutTooShort { entry, run } => {
                let (i, word) = if *entry { (run.first, "Begin") } else { (run.last, "End") };
                let more = d.contour.map_or(d.figure.size, |c| Walls::stretch_length(&c));
                let way = if *entry { "earlier" } else { "later" };
                format!(
                    "{word} the cut of {} up to {} {way} along the contour, so that it overlaps.",
                    self.scene.cuts.lines_text(i, i),
                    self.up(more)
                )
            }
            Diagnosis::EntryTooDeep { .. } | Diagnosis::Unknown => self.move_closer(d),
            Diagnosis::Rapid => self.remedy_rapid(d),
            Diagnosis::FoldNote { kind: FoldKind::Loop, .. } if d.count == 1 => self.cut_out(d.moves, d.at),
            Diagnosis::FoldNote { kind: FoldKind::Loop, .. } => {
                "Cut the loops out: end the move before each one where it meets the move after it.".to_owned()
            }
            Diagnosis::FoldNote { radius, .. } => format!(
                "Nothing to do where the wall lies on the outer side of the turn; else {}",
                lower_first(&self.widen_turn(d.moves, *radius, d.radius))
            ),
        }
    }

    fn remedy_tight(&self, tight: &Tight, d: &Draft) -> String {
        let limit = d.limit.unwrap_or(0.0);
        let mut ways: Vec<String> = Vec::new();
        let fits = tight.fitting_radius(self.allowance).filter(|&r| r > 0.0);
        if let Some(r) = fits {
            ways.push(format!("use a cutter of no more than {} diameter, which fits", self.down(2.0 * r)));
        }
        let within = tight.radius_within(limit, self.allowance).filter(|&r| r > 0.0 && r < d.radius);
        if let Some(r) = within.filter(|_| d.kind == Kind::Excess) {
            let diameter = self.down(2.0 * r);
            let limit = format!("{} {}", stated_text(limit), self.unit.sign());
            ways.push(match tight {
                Tight::Sharp { .. } if r < SENSIBLE * d.radius => format!(
                    "no round cutter reaches into a sharp corner (only {diameter} diameter or less would leave \
                     no more than {limit}): relieve the corner or finish it another way"
                ),
                Tight::Sharp { .. } => format!(
                    "use a cutter of no more than {diameter} diameter, which leaves no more than {limit}, or \
                     relieve the corner"
                ),
                _ => format!("one of no more than {diameter} diameter leaves no more than {limit}"),
            });
        }
        if let Tight::Sharp { opening, .. } = tight {
            let fillet = d.radius + self.allowance - super::corner::largest_radius_in_corner(limit, *opening);
            if fillet > 0.0 {
                ways.push(format!(
                    "with this cutter the drawing must allow a fillet of {} radius or more",
                    self.up(fillet)
                ));
            }
        }
        if ways.is_empty() {
            ways.push("no cutter leaves the allowance there: make the allowance smaller".to_owned());
        }
        sentence(&ways.join("; "))
    }

    fn remedy_constant(&self, median: f64, d: &Draft) -> String {
        let by = self.len(median.abs());
        let met = 2.0 * (d.radius + median);
        let cutter = if met > 0.0 {
            format!("Use a cutter of {} diameter, or ", self.len(met))
        } else {
            "The path stands on the wrong side of the contour, or ".to_owned()
        };
        if median < 0.0 {
            format!(
                "{cutter}keep the path {by} farther from the part (wear offset of {by} on the radius, {} on the \
                 diameter).",
                self.len(2.0 * median.abs())
            )
        } else {
            format!(
                "{cutter}bring the path {by} closer to the part (wear offset of {by} on the radius, {} on the \
                 diameter). If the stock is left on purpose, say --allowance {}.",
                self.len(2.0 * median),
                super::number::number_text(median + self.allowance, self.unit)
            )
        }
    }

    fn remedy_chords(&self, chords: &Chords, d: &Draft) -> String {
        let limit = d.limit.unwrap_or(0.0);
        let (chord, angle) = chord_within(limit, chords.radius);
        if limit <= 0.0 {
            return "Program the curve with arcs (G2, G3): no chord meets a limit of zero.".to_owned();
        }
        format!(
            "Program the curve with arcs (G2, G3), or with chords no longer than {} ({} each on the path's \
             radius of {}), which stay within {}.",
            self.down(chord),
            angle_text_down(angle),
            self.len(chords.radius),
            format_args!("{} {}", stated_text(limit), self.unit.sign())
        )
    }

    fn remedy_no_pass(&self, d: &Draft) -> String {
        let away = self.len(d.radius + self.allowance);
        let along =
            d.contour.map_or_else(String::new, |c| format!(", {} long", self.up(Walls::stretch_length(&c))));
        format!(
            "Add a pass along this stretch of the contour{along} with the cutter's center {away} from the wall, \
             or bring the nearest one ({}) {} closer.",
            self.scene.cuts.lines_text(d.worst_move(), d.worst_move()),
            self.up(d.figure.size)
        )
    }

    /// The centre must stand off by radius and allowance; say where that is.
    fn move_away(&self, d: &Draft) -> String {
        let away = d.radius + self.allowance;
        let lines = self.scene.cuts.lines_text(d.worst_move(), d.worst_move());
        let by = self.up(d.figure.size);
        let place = d.center.and_then(|c| outward(d, c)).map(|n| d.at + n * away);
        match place {
            Some(p) if matches!(d.diagnosis, Diagnosis::EntryTooDeep { .. }) => format!(
                "Move this end of {lines} {by} away from the wall (center at {}), or lead on and off along an \
                 arc tangent to the contour.",
                point_text(p, self.unit)
            ),
            Some(p) => format!(
                "Move the path of {lines} {by} away from the wall: the center belongs {} from the contour, at {}.",
                self.len(away),
                point_text(p, self.unit)
            ),
            None => format!("Move the path of {lines} {by} away from the wall."),
        }
    }

    fn move_closer(&self, d: &Draft) -> String {
        format!(
            "Bring the path of {} {} closer: its center belongs {} from the contour.",
            self.scene.cuts.lines_text(d.worst_move(), d.worst_move()),
            self.up(d.figure.size),
            self.len(d.radius + self.allowance)
        )
    }

    fn remedy_rapid(&self, d: &Draft) -> String {
        let top = point_height(self.scene.facts.top, self.unit);
        format!(
            "Retract above the part's top ({top}) before {}, or take a way round that keeps the center at least \
             {} from the contour.",
            self.scene.rapids.lines_text(d.moves.0, d.moves.1),
            self.up(d.radius)
        )
    }

    /// Which blocks to take out so that the moves before and after the loop meet, and what becomes of
    /// the corner where they do: sharp, it fits the wall only where the wall's own radius is the cutter's.
    fn cut_out(&self, moves: (usize, usize), at: Point) -> String {
        let radius = self.len(self.scene.cuts.radius(moves.0));
        format!(
            "{} Where the wall there is a fillet wider than the cutter, round that corner of the path with an \
             arc of the fillet's radius less {radius}.",
            self.joined(moves, at)
        )
    }

    fn joined(&self, (first, last): (usize, usize), at: Point) -> String {
        let cuts = &self.scene.cuts;
        let place = point_text(at, self.unit);
        let crosses = |i: usize| {
            cuts.segment(i).is_some_and(|s| s.distance(at) <= 1e-6 * (cuts.radius(i) + s.length()))
        };
        let inner = (first.saturating_add(1), last.saturating_sub(1));
        if crosses(first) && crosses(last) && first < last {
            let joined = format!(
                "end {} at {place} and go on from there with {}",
                cuts.lines_text(first, first),
                cuts.lines_text(last, last)
            );
            return if inner.0 <= inner.1 {
                sentence(&format!(
                    "cut out {} and join the path where it crosses itself: {joined}",
                    cuts.lines_text(inner.0, inner.1)
                ))
            } else {
                sentence(&format!("join the path where it crosses itself: {joined}"))
            };
        }
        format!(
            "Cut out {} and join what comes before and after where the path crosses itself, at {place}.",
            cuts.lines_text(first, last)
        )
    }

    fn widen_turn(&self, moves: (usize, usize), turn: f64, radius: f64) -> String {
        format!(
            "Let the path of {} turn on {} radius or more, or leave the turn out and run the moves beside it on \
             until they meet; a cutter of no more than {} diameter could follow it as it is.",
            self.scene.cuts.lines_text(moves.0, moves.1),
            self.up(radius),
            self.down(2.0 * turn)
        )
    }

    fn two_lines(&self, d: &Draft) -> String {
        let line = |k: usize| d.culprits.get(k).and_then(|c| self.scene.cuts.line(c.1));
        let (a, b) = (line(0), line(1));
        match (a, b) {
            (Some(a), Some(b)) if a != b => format!("lines {} and {}", a.min(b), a.max(b)),
            (Some(a), _) | (None, Some(a)) => format!("line {a}"),
            (None, None) => "unknown lines".to_owned(),
        }
    }

    fn len(&self, v: f64) -> String {
        length_text(v, self.unit)
    }

    fn up(&self, v: f64) -> String {
        length_text_up(v, self.unit)
    }

    fn down(&self, v: f64) -> String {
        length_text_down(v, self.unit)
    }
}

fn point_height(z: f64, unit: Unit) -> String {
    format!("Z{}", super::number::number_text(z, unit))
}

/// Unit direction from the wall to where the cutter's centre belongs.
fn outward(d: &Draft, center: Point) -> Option<Vec2> {
    let v = if d.center_inside { d.at - center } else { center - d.at };
    let size = v.hypot();
    (size > 1e-9 * d.radius).then(|| v / size)
}

fn sentence(text: &str) -> String {
    let mut chars = text.chars();
    let first: String = chars.next().map(|c| c.to_uppercase().collect()).unwrap_or_default();
    format!("{first}{}.", chars.as_str())
}

fn lower_first(text: &str) -> String {
    let mut chars = text.chars();
    let first: String = chars.next().map(|c| c.to_lowercase().collect()).unwrap_or_default();
    format!("{first}{}", chars.as_str())
}
