//! The pieces of a row: as it usually makes them, then as a person joined, parted, cut and ordered
//! them, then none longer than the shop bends.

use std::collections::{BTreeMap, HashMap};

use kurbo::BezPath;

use super::drawn::{Drawn, LEAST_PART_MM, Strand, length};
use super::finding;
use super::near::Near;
use super::route::{MOST_ROUTED, Route, as_drawn, ends, route};
use super::split::{self, Place};
use crate::job::{Each, Pieces};
use crate::rules::Finding;

/// Strokes nearer than this touch: less than glass can be bent to.
const TOUCH_MM: f64 = 0.5;

/// What the shop bends.
#[derive(Debug, Clone, Copy)]
pub(super) struct Bent {
    /// The longest piece; None: not limited.
    pub(super) longest_mm: Option<f64>,
    /// Added to each jump.
    pub(super) crossover_mm: f64,
}

/// Makes the pieces of row `at` out of those it usually makes.
pub(super) fn assemble(
    at: usize,
    mut made: Vec<Drawn>,
    choices: &Pieces,
    bent: Bent,
    findings: &mut Vec<Finding>,
) -> Vec<Drawn> {
    name(&mut made);
    match choices.each {
        Each::Usual => {}
        Each::Touching => made = made.into_iter().flat_map(touching_only).collect(),
        Each::Whole => made = whole(made),
    }
    let mut lost = 0;
    if !choices.joined.is_empty() {
        made = joined(at, made, &choices.joined, &mut lost, findings);
    }
    // Parts of one piece are numbered at the end, whatever cut them.
    let mut parts: Vec<(usize, Drawn)> = made.into_iter().enumerate().collect();
    if !choices.parted.is_empty() {
        parts = parted(parts, &choices.parted, &mut lost);
    }
    for cut in &choices.cuts {
        if !cut_one(&mut parts, &cut.stroke, cut.share) {
            lost += 1;
        }
    }
    if lost > 0 {
        findings.push(finding::choices_lost(at, lost));
    }
    if let Some(longest) = bent.longest_mm.filter(|_| !choices.keep_long) {
        let mut cut = Vec::new();
        parts = parts
            .into_iter()
            .flat_map(|(of, drawn)| {
                let parts = split::too_long(&drawn, longest, bent.crossover_mm);
                if parts.len() > 1 {
                    let column = drawn.column(bent.crossover_mm);
                    cut.push((drawn.label, column, parts.len()));
                }
                parts.into_iter().map(move |part| (of, part))
            })
            .collect();
        findings.extend(finding::cut_up(at, &cut, longest));
    }
    ordered(number(parts), &choices.order)
}

/// Names the strokes that have no name yet.
fn name(made: &mut [Drawn]) {
    let unnamed = made
        .iter_mut()
        .flat_map(|drawn| &mut drawn.run)
        .filter(|strand| strand.name.is_empty());
    for (number, strand) in unnamed.enumerate() {
        strand.name = (number + 1).to_string();
    }
}

/// Numbers the parts of each piece.
fn number(parts: Vec<(usize, Drawn)>) -> Vec<Drawn> {
    let mut many: HashMap<usize, usize> = HashMap::new();
    for (of, _) in &parts {
        *many.entry(*of).or_default() += 1;
    }
    let mut seen: HashMap<usize, usize> = HashMap::new();
    parts
        .into_iter()
        .map(|(of, mut drawn)| {
            drawn.whole = of;
            if many[&of] > 1 {
                let number = seen.entry(of).or_default();
                *number += 1;
                drawn.label = format!("{}, part {number}", drawn.label);
            }
            drawn
        })
        .collect()
}

/// In the wanted order; a piece that is not named follows the one it follows in reading order.
fn ordered(made: Vec<Drawn>, order: &[String]) -> Vec<Drawn> {
    if order.is_empty() {
        return made;
    }
    let wanted: HashMap<&str, usize> = order
        .iter()
        .enumerate()
        .map(|(at, name)| (name.as_str(), at))
        .collect();
    let mut before = 0;
    let mut placed: Vec<((usize, usize), Drawn)> = made
        .into_iter()
        .enumerate()
        .map(|(reading, drawn)| {
            let place = match wanted.get(drawn.name().as_str()) {
                Some(&place) => {
                    before = place + 1;
                    (place + 1, 0)
                }
                None => (before, reading + 1),
            };
            (place, drawn)
        })
        .collect();
    placed.sort_by_key(|&(place, _)| place);
    placed.into_iter().map(|(_, drawn)| drawn).collect()
}

/// A piece of some strokes, run through the shortest way.
fn of_strands(like: &Drawn, label: String, strands: Vec<Strand>) -> Drawn {
    let paths: Vec<BezPath> = strands.iter().map(|strand| strand.path.clone()).collect();
    let way = way(&paths);
    let mut strands: Vec<Option<Strand>> = strands.into_iter().map(Some).collect();
    let run = way.order.iter().filter_map(|&(stroke, entry)| {
        let strand = strands.get_mut(stroke)?.take()?;
        Some(Strand {
            turned: entry == 1,
            ..strand
        })
    });
    Drawn {
        label,
        tube: like.tube.clone(),
        word: like.word,
        whole: 0,
        run: run.collect(),
        tie: way.tie,
    }
}

/// The way through strokes; of very many as drawn.
pub(super) fn way(strokes: &[BezPath]) -> Route {
    if strokes.len() > MOST_ROUTED {
        as_drawn(strokes)
    } else {
        route(strokes)
    }
}

/// The pieces of a word, or of a drawing in one tube, as one.
fn whole(made: Vec<Drawn>) -> Vec<Drawn> {
    let mut groups: Vec<Vec<Drawn>> = Vec::new();
    let mut known: HashMap<(usize, Option<String>), usize> = HashMap::new();
    for drawn in made {
        let group = *known
            .entry((drawn.word, drawn.tube.clone()))
            .or_insert_with(|| {
                groups.push(Vec::new());
                groups.len() - 1
            });
        groups[group].push(drawn);
    }
    groups.into_iter().filter_map(as_one).collect()
}

/// Several pieces as one; None for none.
fn as_one(mut pieces: Vec<Drawn>) -> Option<Drawn> {
    if pieces.len() < 2 {
        return pieces.pop();
    }
    let label = together(&pieces);
    let like = Drawn {
        run: Vec::new(),
        ..pieces[0].clone()
    };
    let strands = pieces.into_iter().flat_map(|drawn| drawn.run).collect();
    Some(of_strands(&like, label, strands))
}

/// What pieces that are one are called: letters as a word, others by the first and how many more.
fn together(pieces: &[Drawn]) -> String {
    if pieces.iter().all(|drawn| drawn.label.chars().count() == 1) {
        return pieces.iter().map(|drawn| drawn.label.as_str()).collect();
    }
    format!("{} and {} more", pieces[0].label, pieces.len() - 1)
}

/// The strokes of a piece that touch, each such run a piece.
fn touching_only(drawn: Drawn) -> Vec<Drawn> {
    let paths: Vec<&BezPath> = drawn.run.iter().map(|strand| &strand.path).collect();
    let runs = touching(&paths);
    if runs.len() < 2 {
        return vec![drawn];
    }
    let mut strands: Vec<Option<Strand>> = drawn.run.iter().cloned().map(Some).collect();
    runs.into_iter()
        .enumerate()
        .map(|(number, run)| {
            let run = run.into_iter().filter_map(|at| strands[at].take());
            let label = format!("{} {}", drawn.label, number + 1);
            of_strands(&drawn, label, run.collect())
        })
        .collect()
}

/// Strokes that touch, by their places: an end of one lies on the other.
pub(super) fn touching(strokes: &[&BezPath]) -> Vec<Vec<usize>> {
    let mut sets = Sets::new(strokes.len());
    // Squares as large as the strokes are long: each holds few of them, and each lies in few.
    let total = strokes.iter().map(|stroke| length(stroke)).sum::<f64>();
    #[allow(clippy::cast_precision_loss, reason = "a count of strokes")]
    let mut near = Near::new((total / strokes.len().max(1) as f64).clamp(4.0, 10_000.0));
    for (at, stroke) in strokes.iter().enumerate() {
        near.add(at, stroke);
    }
    for (at, stroke) in strokes.iter().enumerate() {
        let [begin, end] = ends(stroke);
        // Where a closed stroke happens to be begun is no end of it.
        if begin.distance(end) <= TOUCH_MM {
            continue;
        }
        for end in [begin, end] {
            for other in near.owners_at(end, TOUCH_MM) {
                sets.join(at, other);
            }
        }
    }
    sets.groups()
}

/// Which of some things belong together; the first of a group names it.
struct Sets(Vec<usize>);

impl Sets {
    fn new(many: usize) -> Self {
        Self((0..many).collect())
    }

    fn root(&mut self, mut at: usize) -> usize {
        while self.0[at] != at {
            self.0[at] = self.0[self.0[at]];
            at = self.0[at];
        }
        at
    }

    fn join(&mut self, a: usize, b: usize) {
        let (a, b) = (self.root(a), self.root(b));
        self.0[a.max(b)] = a.min(b);
    }

    fn groups(mut self) -> Vec<Vec<usize>> {
        let mut groups: BTreeMap<usize, Vec<usize>> = BTreeMap::new();
        for at in 0..self.0.len() {
            groups.entry(self.root(at)).or_default().push(at);
        }
        groups.into_values().collect()
    }
}

fn joined(
    at: usize,
    made: Vec<Drawn>,
    pairs: &[[String; 2]],
    lost: &mut usize,
    findings: &mut Vec<Finding>,
) -> Vec<Drawn> {
    let mut of: HashMap<&str, usize> = HashMap::new();
    for (piece, drawn) in made.iter().enumerate() {
        of.extend(drawn.run.iter().map(|strand| (strand.name.as_str(), piece)));
    }
    let mut sets = Sets::new(made.len());
    for [one, other] in pairs {
        match (of.get(one.as_str()), of.get(other.as_str())) {
            (Some(&one), Some(&other)) if made[one].tube == made[other].tube => {
                sets.join(one, other);
            }
            (Some(&one), Some(&other)) => {
                findings.push(finding::not_joined(at, &made[one], &made[other]));
            }
            _ => *lost += 1,
        }
    }
    let groups = sets.groups();
    let mut made: Vec<Option<Drawn>> = made.into_iter().map(Some).collect();
    groups
        .into_iter()
        .filter_map(|group| as_one(group.into_iter().filter_map(|at| made[at].take()).collect()))
        .collect()
}

fn parted(
    parts: Vec<(usize, Drawn)>,
    pairs: &[[String; 2]],
    lost: &mut usize,
) -> Vec<(usize, Drawn)> {
    let pair = |one: &'_ str, other: &'_ str| {
        let (one, other) = (one.to_owned(), other.to_owned());
        if one <= other {
            [one, other]
        } else {
            [other, one]
        }
    };
    // Whether each that is wanted was found.
    let mut wanted: HashMap<[String; 2], bool> = pairs
        .iter()
        .map(|[one, other]| (pair(one, other), false))
        .collect();
    let parts = parts
        .into_iter()
        .flat_map(|(of, drawn)| {
            let mut places = Vec::new();
            for (at, next) in drawn.run.windows(2).enumerate() {
                if let Some(found) = wanted.get_mut(&pair(&next[0].name, &next[1].name)) {
                    places.push(Place::After(at));
                    *found = true;
                }
            }
            let parts = split::cut(&drawn, &places);
            parts
                .into_iter()
                .map(move |part| (of, part))
                .collect::<Vec<_>>()
        })
        .collect();
    *lost += wanted.values().filter(|found| !**found).count();
    parts
}

/// Cuts the piece that has this place of a stroke; whether there is one.
fn cut_one(parts: &mut Vec<(usize, Drawn)>, stroke: &str, share: f64) -> bool {
    for at in 0..parts.len() {
        let (of, drawn) = &parts[at];
        for (number, strand) in drawn.run.iter().enumerate() {
            let [from, to] = strand.part;
            if strand.name != stroke || to <= from || !(from <= share && share <= to) {
                continue;
            }
            let along = strand.length * (share - from) / (to - from);
            let along = if strand.turned {
                strand.length - along
            } else {
                along
            };
            if along < LEAST_PART_MM || strand.length - along < LEAST_PART_MM {
                continue;
            }
            let of = *of;
            let cut = split::cut(drawn, &[Place::On(number, along)]);
            parts.splice(at..=at, cut.into_iter().map(|part| (of, part)));
            return true;
        }
    }
    false
}
