//! Running through the strokes of a piece: their order and direction with the shortest jumps.

use kurbo::{BezPath, PathEl, Point, Rect};

/// Up to here every order is weighed; beyond, a good one is improved until nothing gains.
const EXACT_STROKES: usize = 10;
/// Of a piece of more strokes than this no shorter way is looked for.
pub(super) const MOST_ROUTED: usize = 120;
/// Ways that differ by less than this share of the strokes' spread are equally long. Far above float
/// noise, far below what can be bent.
const TIE: f64 = 1e-9;
/// How many strokes apart an improvement may reach. A word is run through from left to right, so what
/// gains lies near; without an end to it a line of hundreds of strokes would take seconds.
const REACH: usize = 60;
/// Longest run of strokes that is lifted out and put in elsewhere.
const LIFTED: usize = 3;

/// The way through some strokes.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Route {
    /// Strokes in order, each with the end it is entered by: 0 its drawn beginning, 1 its end.
    pub(super) order: Vec<Step>,
    /// Jumps up to here are none, in the unit of the strokes.
    pub(super) tie: f64,
}

/// First and last point of a path; a closed one ends where it begins.
pub(super) fn ends(path: &BezPath) -> [Point; 2] {
    let point = |element: &PathEl| element.end_point();
    let first = path
        .elements()
        .first()
        .and_then(point)
        .unwrap_or(Point::ZERO);
    let last = match path.elements().last() {
        Some(PathEl::ClosePath) => None,
        last => last.and_then(point),
    };
    [first, last.unwrap_or(first)]
}

/// A stroke and the end it is entered by.
pub(super) type Step = (usize, usize);

/// The shortest way through all strokes, each once, in either direction.
///
/// Exact up to ten strokes (dynamic programme over subsets); a good way for more. Where ways are
/// equally long, the one nearer to the drawn order is taken, so the same letters give the same way at
/// any size.
pub(super) fn route(strokes: &[BezPath]) -> Route {
    let ends: Vec<[Point; 2]> = strokes.iter().map(ends).collect();
    let spread = ends
        .iter()
        .flatten()
        .fold(None, |all: Option<Rect>, &point| {
            let here = Rect::from_points(point, point);
            Some(all.map_or(here, |all| all.union(here)))
        })
        .map_or(0.0, |all| all.width().max(all.height()));
    let tie = spread * TIE;
    let order = if strokes.len() <= EXACT_STROKES {
        exact(&ends, tie)
    } else {
        good(&ends, tie)
    };
    Route { order, tie }
}

/// The way through the strokes in the order and direction they are drawn in.
pub(super) fn as_drawn(strokes: &[BezPath]) -> Route {
    Route {
        order: (0..strokes.len()).map(|stroke| (stroke, 0)).collect(),
        tie: 0.0,
    }
}

fn enters(ends: &[[Point; 2]], (stroke, end): Step) -> Point {
    ends[stroke][end]
}

fn leaves(ends: &[[Point; 2]], (stroke, end): Step) -> Point {
    ends[stroke][1 - end]
}

fn turned((stroke, end): Step) -> Step {
    (stroke, 1 - end)
}

/// The shortest order.
fn exact(ends: &[[Point; 2]], tie: f64) -> Vec<Step> {
    let count = ends.len();
    if count == 0 {
        return Vec::new();
    }
    let states = 2 * count;
    // best[set][state]: shortest jumps through the set, ending with state = 2 * stroke + entry.
    let mut best = vec![vec![(f64::INFINITY, usize::MAX); states]; 1 << count];
    for state in 0..states {
        best[1 << (state / 2)][state].0 = 0.0;
    }
    for set in 1..1_usize << count {
        for state in 0..states {
            let (so_far, _) = best[set][state];
            if !so_far.is_finite() {
                continue;
            }
            let from = ends[state / 2][1 - state % 2];
            for next in 0..states {
                if set & (1 << (next / 2)) != 0 {
                    continue;
                }
                let length = so_far + from.distance(ends[next / 2][next % 2]);
                let slot = &mut best[set | (1 << (next / 2))][next];
                // A hair of advantage keeps ties where they were: the order stays the drawn one.
                if length < slot.0 - tie {
                    *slot = (length, state);
                }
            }
        }
    }
    let mut set = (1 << count) - 1;
    // Of equally short ways the one that ends with the last drawn stroke, as drawn.
    let mut state = states - 2;
    for other in (0..count)
        .rev()
        .flat_map(|stroke| [2 * stroke, 2 * stroke + 1])
    {
        if best[set][other].0 < best[set][state].0 - tie {
            state = other;
        }
    }
    let mut order = Vec::with_capacity(count);
    loop {
        order.push((state / 2, state % 2));
        let before = best[set][state].1;
        set &= !(1 << (state / 2));
        if set == 0 {
            break;
        }
        state = before;
    }
    order.reverse();
    order
}

/// A short order for many strokes: the drawn order and the nearest end each time, both improved until
/// nothing gains; the drawn one unless the other is shorter.
fn good(ends: &[[Point; 2]], tie: f64) -> Vec<Step> {
    let mut drawn = in_drawn_order(ends, tie);
    improve(ends, &mut drawn, tie);
    let mut nearest = nearest(ends, tie);
    improve(ends, &mut nearest, tie);
    if length(ends, &nearest) < length(ends, &drawn) - tie {
        nearest
    } else {
        drawn
    }
}

fn length(ends: &[[Point; 2]], order: &[Step]) -> f64 {
    order
        .windows(2)
        .map(|pair| leaves(ends, pair[0]).distance(enters(ends, pair[1])))
        .sum()
}

/// The strokes as drawn, each in the direction that makes the whole shortest.
fn in_drawn_order(ends: &[[Point; 2]], tie: f64) -> Vec<Step> {
    // For each stroke and entry: shortest jumps up to it, and the entry of the stroke before.
    let mut best = vec![[(0.0, 0); 2]];
    for (at, pair) in ends.windows(2).enumerate() {
        let so_far = best[at];
        best.push([0, 1].map(|entry| {
            let by =
                |before: usize| so_far[before].0 + pair[0][1 - before].distance(pair[1][entry]);
            if by(1) < by(0) - tie {
                (by(1), 1)
            } else {
                (by(0), 0)
            }
        }));
    }
    let last = best[ends.len() - 1];
    let mut entry = usize::from(last[1].0 < last[0].0 - tie);
    let mut order = Vec::with_capacity(ends.len());
    for stroke in (0..ends.len()).rev() {
        order.push((stroke, entry));
        entry = best[stroke][entry].1;
    }
    order.reverse();
    order
}

/// From the first stroke on to the nearest end each time.
fn nearest(ends: &[[Point; 2]], tie: f64) -> Vec<Step> {
    let mut left: Vec<usize> = (1..ends.len()).collect();
    let mut order = vec![(0, 0)];
    let mut at = ends[0][1];
    while !left.is_empty() {
        let (mut taken, mut shortest) = ((0, 0), f64::INFINITY);
        for (slot, &stroke) in left.iter().enumerate() {
            for entry in [0, 1] {
                let length = at.distance(ends[stroke][entry]);
                if length < shortest - tie {
                    (taken, shortest) = ((slot, entry), length);
                }
            }
        }
        let stroke = left.remove(taken.0);
        order.push((stroke, taken.1));
        at = leaves(ends, (stroke, taken.1));
    }
    order
}

/// Turns runs of strokes round and moves short runs elsewhere until neither gains.
fn improve(ends: &[[Point; 2]], order: &mut Vec<Step>, tie: f64) {
    // Every change gains more than a tie, so this ends.
    while turn_runs(ends, order, tie) | move_runs(ends, order, tie) {}
}

/// The jump between two neighbours; none before the first and after the last.
fn jump(ends: &[[Point; 2]], from: Option<Step>, to: Option<Step>) -> f64 {
    match (from, to) {
        (Some(from), Some(to)) => leaves(ends, from).distance(enters(ends, to)),
        _ => 0.0,
    }
}

fn before(order: &[Step], at: usize) -> Option<Step> {
    at.checked_sub(1).map(|at| order[at])
}

fn turn_runs(ends: &[[Point; 2]], order: &mut [Step], tie: f64) -> bool {
    let mut gained = false;
    for first in 0..order.len() {
        for last in first..order.len().min(first + REACH) {
            let (left, right) = (before(order, first), order.get(last + 1).copied());
            let (one, other) = (order[first], order[last]);
            let is = jump(ends, left, Some(one)) + jump(ends, Some(other), right);
            let would_be =
                jump(ends, left, Some(turned(other))) + jump(ends, Some(turned(one)), right);
            if would_be < is - tie {
                order[first..=last].reverse();
                for step in &mut order[first..=last] {
                    *step = turned(*step);
                }
                gained = true;
            }
        }
    }
    gained
}

fn move_runs(ends: &[[Point; 2]], order: &mut Vec<Step>, tie: f64) -> bool {
    let mut gained = false;
    for many in 1..=LIFTED {
        for first in 0..(order.len() + 1).saturating_sub(many) {
            let run: Vec<Step> = order[first..first + many].to_vec();
            let (one, other) = (run[0], run[many - 1]);
            let (left, right) = (before(order, first), order.get(first + many).copied());
            let lifted = jump(ends, left, Some(one)) + jump(ends, Some(other), right)
                - jump(ends, left, right);
            // Places between the strokes that stay.
            let stay = order.len() - many;
            let staying = |at: usize| order[if at < first { at } else { at + many }];
            let mut best = (-tie, None);
            for slot in first.saturating_sub(REACH)..=stay.min(first + REACH) {
                let left = slot.checked_sub(1).map(staying);
                let right = (slot < stay).then(|| staying(slot));
                for turn in [false, true] {
                    let (head, tail) = if turn {
                        (turned(other), turned(one))
                    } else {
                        (one, other)
                    };
                    let put = jump(ends, left, Some(head)) + jump(ends, Some(tail), right)
                        - jump(ends, left, right);
                    if put - lifted < best.0 {
                        best = (put - lifted - tie, Some((slot, turn)));
                    }
                }
            }
            if let (_, Some((slot, turn))) = best {
                order.drain(first..first + many);
                let run = run.into_iter();
                let run: Vec<Step> = if turn {
                    run.rev().map(turned).collect()
                } else {
                    run.collect()
                };
                order.splice(slot..slot, run);
                gained = true;
            }
        }
    }
    gained
}

#[cfg(test)]
mod tests {
    use super::*;

    fn line(from: (f64, f64), to: (f64, f64)) -> BezPath {
        let mut path = BezPath::new();
        path.move_to(from);
        path.line_to(to);
        path
    }

    fn jumped(strokes: &[BezPath]) -> f64 {
        let ends: Vec<[Point; 2]> = strokes.iter().map(ends).collect();
        length(&ends, &route(strokes).order)
    }

    #[test]
    fn strokes_that_touch_need_no_jump() {
        // An L drawn as two strokes away from the corner.
        let strokes = [
            line((0.0, 0.0), (0.0, 10.0)),
            line((0.0, 10.0), (5.0, 10.0)),
        ];
        assert_eq!(jumped(&strokes), 0.0, "the strokes share the corner");
        assert_eq!(route(&strokes).order, [(0, 0), (1, 0)], "tip to tip");
    }

    #[test]
    fn a_closed_stroke_ends_where_it_begins() {
        let mut square = line((0.0, 0.0), (10.0, 0.0));
        square.line_to((10.0, 10.0));
        square.line_to((0.0, 10.0));
        square.close_path();
        // From the square's corner to the line, not from its last one.
        let strokes = [square, line((-3.0, 0.0), (-20.0, 0.0))];
        assert_eq!(route(&strokes).order, [(0, 0), (1, 0)]);
        assert_eq!(jumped(&strokes), 3.0);
    }

    #[test]
    fn an_h_jumps_twice_over_the_shortest_ways() {
        // H, 10 wide and 20 high, bar in the middle: from the bar's ends to a stem's end is 10 each.
        let h = [
            line((0.0, 0.0), (0.0, 20.0)),
            line((10.0, 0.0), (10.0, 20.0)),
            line((0.0, 10.0), (10.0, 10.0)),
        ];
        assert!((jumped(&h) - 20.0).abs() < 1e-9, "{:?}", route(&h));
    }

    #[test]
    fn many_strokes_are_all_run_through() {
        let strokes: Vec<BezPath> = (0..14)
            .map(|i| line((f64::from(i) * 10.0, 0.0), (f64::from(i) * 10.0, 5.0)))
            .collect();
        // Up, over, down, over: 13 jumps of 10.
        assert!(
            (jumped(&strokes) - 130.0).abs() < 1e-9,
            "{:?}",
            route(&strokes)
        );
    }

    /// Strokes strewn about; a fixed sequence, so the test is the same each time.
    fn strewn(count: usize, seed: u64) -> Vec<BezPath> {
        let mut state = seed;
        let mut next = || {
            // Knuth's multiplier of his 64-bit congruential generator.
            state = state
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1);
            f64::from(u32::try_from(state >> 33).expect("31 bits")) / f64::from(1_u32 << 31)
        };
        (0..count)
            .map(|at| {
                // Along a line, as the letters of a word are.
                let x = f64::from(u32::try_from(at).expect("few")) * 6.0;
                line(
                    (x + 20.0 * next(), 21.0 * next()),
                    (x + 20.0 * next(), 21.0 * next()),
                )
            })
            .collect()
    }

    #[test]
    fn the_good_way_is_nearly_the_shortest() {
        let mut worst: f64 = 1.0;
        for seed in 1..40 {
            let strokes = strewn(10, seed);
            let ends: Vec<[Point; 2]> = strokes.iter().map(ends).collect();
            let shortest = length(&ends, &exact(&ends, 1e-9));
            let found = length(&ends, &good(&ends, 1e-9));
            assert!(found >= shortest - 1e-6, "nothing beats the shortest");
            worst = worst.max(found / shortest);
        }
        assert!(worst < 1.1, "{worst} times the shortest");
    }

    #[test]
    fn a_good_way_runs_through_every_stroke_once() {
        for count in [11, 60, 200] {
            let strokes = strewn(count, 7);
            let ends: Vec<[Point; 2]> = strokes.iter().map(ends).collect();
            let mut seen: Vec<usize> = good(&ends, 1e-9).into_iter().map(|(at, _)| at).collect();
            seen.sort_unstable();
            assert_eq!(seen, (0..count).collect::<Vec<_>>());
        }
    }

    #[test]
    fn the_way_is_the_same_at_any_size() {
        for count in [4, 10, 40] {
            let small = strewn(count, 3);
            let at_one = jumped(&small);
            for by in [1e-6, 0.01, 7.3, 1e6] {
                let large: Vec<BezPath> = small
                    .iter()
                    .map(|path| kurbo::Affine::scale(by) * path.clone())
                    .collect();
                let here = jumped(&large);
                assert!(
                    (here / by - at_one).abs() < 1e-9 * at_one,
                    "{count} strokes, {by} times as large: {} for {at_one}",
                    here / by
                );
            }
        }
    }
}
