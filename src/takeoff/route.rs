//! Running through the strokes of a piece: their order and direction with the shortest jumps.

use kurbo::{BezPath, PathEl, Point};

/// Up to here every order is weighed; beyond, the nearest end is taken each time.
const EXACT_STROKES: usize = 8;

/// The way through some strokes.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Route {
    /// Length of all jumps.
    pub(super) jump_mm: f64,
    /// The jumps that are longer than nothing.
    pub(super) jumps: Vec<(Point, Point)>,
    /// First and last point of the run.
    pub(super) ends: [Point; 2],
}

/// First and last point of a path.
fn ends(path: &BezPath) -> [Point; 2] {
    let point = |element: &PathEl| element.end_point();
    let first = path
        .elements()
        .first()
        .and_then(point)
        .unwrap_or(Point::ZERO);
    let last = path
        .elements()
        .iter()
        .rev()
        .find_map(point)
        .unwrap_or(first);
    [first, last]
}

/// The shortest way through all strokes, each once, in either direction.
///
/// Exact up to eight strokes (dynamic programme over subsets); a fair way for more.
pub(super) fn route(strokes: &[BezPath]) -> Route {
    let ends: Vec<[Point; 2]> = strokes.iter().map(ends).collect();
    let order = if strokes.len() <= EXACT_STROKES {
        exact(&ends)
    } else {
        nearest(&ends)
    };
    let mut jumps = Vec::new();
    let mut jump_mm = 0.0;
    for pair in order.windows(2) {
        let from = ends[pair[0].0][1 - pair[0].1];
        let to = ends[pair[1].0][pair[1].1];
        let length = from.distance(to);
        if length > 1e-9 {
            jump_mm += length;
            jumps.push((from, to));
        }
    }
    let start = order
        .first()
        .map_or(Point::ZERO, |&(stroke, end)| ends[stroke][end]);
    let finish = order
        .last()
        .map_or(Point::ZERO, |&(stroke, end)| ends[stroke][1 - end]);
    Route {
        jump_mm,
        jumps,
        ends: [start, finish],
    }
}

/// Order as (stroke, the end it is entered by).
fn exact(ends: &[[Point; 2]]) -> Vec<(usize, usize)> {
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
                if length < slot.0 - 1e-9 {
                    *slot = (length, state);
                }
            }
        }
    }
    let mut set = (1 << count) - 1;
    let mut state = (0..states)
        .min_by(|&a, &b| best[set][a].0.total_cmp(&best[set][b].0))
        .unwrap_or_default();
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

fn nearest(ends: &[[Point; 2]]) -> Vec<(usize, usize)> {
    let mut left: Vec<usize> = (1..ends.len()).collect();
    let mut order = vec![(0, 0)];
    let mut at = ends[0][1];
    while !left.is_empty() {
        let (slot, entry) = (0..left.len())
            .flat_map(|slot| [(slot, 0), (slot, 1)])
            .min_by(|&(a, a_end), &(b, b_end)| {
                at.distance(ends[left[a]][a_end])
                    .total_cmp(&at.distance(ends[left[b]][b_end]))
            })
            .unwrap_or((0, 0));
        let stroke = left.remove(slot);
        order.push((stroke, entry));
        at = ends[stroke][1 - entry];
    }
    order
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

    #[test]
    fn strokes_that_touch_need_no_jump() {
        // An L drawn as two strokes away from the corner.
        let found = route(&[
            line((0.0, 0.0), (0.0, 10.0)),
            line((0.0, 10.0), (5.0, 10.0)),
        ]);
        assert_eq!(found.jump_mm, 0.0, "the strokes share the corner");
        assert_eq!(
            found.ends,
            [Point::new(0.0, 0.0), Point::new(5.0, 10.0)],
            "tip to tip"
        );
    }

    #[test]
    fn an_h_jumps_twice_over_the_shortest_ways() {
        // H, 10 wide and 20 high, bar in the middle: from the bar's ends to a stem's end is 10 each.
        let h = [
            line((0.0, 0.0), (0.0, 20.0)),
            line((10.0, 0.0), (10.0, 20.0)),
            line((0.0, 10.0), (10.0, 10.0)),
        ];
        assert!((route(&h).jump_mm - 20.0).abs() < 1e-9, "{:?}", route(&h));
    }

    #[test]
    fn many_strokes_are_all_run_through() {
        let strokes: Vec<BezPath> = (0..14)
            .map(|i| line((f64::from(i) * 10.0, 0.0), (f64::from(i) * 10.0, 5.0)))
            .collect();
        // Up, over, down, over: 13 jumps of 10.
        assert!(
            (route(&strokes).jump_mm - 130.0).abs() < 1e-9,
            "{:?}",
            route(&strokes)
        );
    }
}
