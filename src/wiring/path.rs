//! How long leads and jumpers are on the drawing: which electrode of each piece is entered first so that
//! all of them together are shortest.

use kurbo::Point;

/// Straight distances on the drawing, millimetres. None: a place is not known.
#[derive(Debug, Clone, PartialEq, Default)]
pub(super) struct Straight {
    /// From the supply to the first electrode.
    pub(super) a: Option<f64>,
    /// From each piece to the next.
    pub(super) jumpers: Vec<Option<f64>>,
    /// From the last electrode back to the supply.
    pub(super) b: Option<f64>,
    /// From the joint between both strings back to the supply.
    pub(super) back: Option<f64>,
    /// Of each piece, whether it is entered at the end it is drawn to.
    pub(super) turned: Vec<bool>,
}

/// What of a way is measured on the drawing and so has a say in which way is shortest.
#[derive(Debug, Clone, Copy)]
pub(super) struct Counts {
    /// Lead A.
    pub(super) a: bool,
    /// Lead B.
    pub(super) b: bool,
    /// Jumpers.
    pub(super) jumpers: bool,
}

/// The shortest way through the electrodes of pieces in their order, from the supply and back. With a
/// return, `second_from` is the first piece of the second string. Exact: each piece is entered at one
/// electrode or the other, and what comes after depends on no more of what was before. Of ways alike
/// the one that enters pieces as drawn is taken.
pub(super) fn shortest(
    pieces: &[Option<[Point; 2]>],
    supply: Option<Point>,
    second_from: Option<usize>,
    counts: Counts,
) -> Straight {
    let electrode = |piece: usize, which: usize| pieces[piece].map(|ends| ends[which]);
    let far = |one: Option<Point>, other: Option<Point>| Some(one?.distance(other?));
    let cost = |counts: bool, leg: Option<f64>| if counts { leg.unwrap_or(0.0) } else { 0.0 };
    // From the piece left at `1 - entered` to the next, entered at `next`.
    let joint = |piece: usize, entered: usize, next: usize| {
        let (left, reached) = (electrode(piece, 1 - entered), electrode(piece + 1, next));
        let jumper = far(left, reached);
        let back = (second_from == Some(piece + 1))
            .then(|| nearer(far(supply, left), far(supply, reached)))
            .flatten();
        (jumper, back)
    };
    let Some(last) = pieces.len().checked_sub(1) else {
        return Straight::default();
    };
    let mut totals = [0, 1].map(|enter| cost(counts.a, far(supply, electrode(0, enter))));
    let mut came: Vec<[usize; 2]> = Vec::with_capacity(last);
    for piece in 0..last {
        let best = [0, 1].map(|next| {
            let through = [0, 1].map(|entered| {
                let (jumper, back) = joint(piece, entered, next);
                totals[entered] + cost(counts.jumpers, jumper) + cost(true, back)
            });
            let from = usize::from(through[1] < through[0]);
            (through[from], from)
        });
        totals = best.map(|(total, _)| total);
        came.push(best.map(|(_, from)| from));
    }
    let ends = [0, 1]
        .map(|entered| totals[entered] + cost(counts.b, far(supply, electrode(last, 1 - entered))));
    let mut entered = vec![usize::from(ends[1] < ends[0]); pieces.len()];
    for piece in (0..last).rev() {
        entered[piece] = came[piece][entered[piece + 1]];
    }
    let mut way = Straight {
        a: far(supply, electrode(0, entered[0])),
        b: far(supply, electrode(last, 1 - entered[last])),
        turned: entered.iter().map(|&enter| enter == 1).collect(),
        ..Straight::default()
    };
    for piece in 0..last {
        let (jumper, back) = joint(piece, entered[piece], entered[piece + 1]);
        way.jumpers.push(jumper);
        way.back = way.back.or(back);
    }
    way
}

/// The nearer of two; the one that is known where only one is.
fn nearer(one: Option<f64>, other: Option<f64>) -> Option<f64> {
    match (one, other) {
        (Some(one), Some(other)) => Some(one.min(other)),
        (one, other) => one.or(other),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    const ALL: Counts = Counts {
        a: true,
        b: true,
        jumpers: true,
    };

    fn total(way: &Straight) -> f64 {
        way.jumpers
            .iter()
            .chain([&way.a, &way.b, &way.back])
            .flatten()
            .sum()
    }

    /// Every way there is, by trying each.
    fn tried(pieces: &[[Point; 2]], supply: Point, second_from: Option<usize>) -> f64 {
        (0..1_usize << pieces.len())
            .map(|ways| {
                let ends = |at: usize| {
                    let enter = ways >> at & 1;
                    (pieces[at][enter], pieces[at][1 - enter])
                };
                let mut long = supply.distance(ends(0).0);
                for at in 1..pieces.len() {
                    let (left, reached) = (ends(at - 1).1, ends(at).0);
                    long += left.distance(reached);
                    if second_from == Some(at) {
                        long += supply.distance(left).min(supply.distance(reached));
                    }
                }
                long + ends(pieces.len() - 1).1.distance(supply)
            })
            .fold(f64::INFINITY, f64::min)
    }

    proptest! {
        #[test]
        fn no_other_way_is_shorter(
            ends in prop::collection::vec(prop::array::uniform4(-2_000.0..2_000.0_f64), 1..9),
            supply in prop::array::uniform2(-3_000.0..3_000.0_f64),
            second in prop::option::of(1..8_usize),
        ) {
            let pieces: Vec<[Point; 2]> = ends
                .iter()
                .map(|&[x, y, u, v]| [Point::new(x, y), Point::new(u, v)])
                .collect();
            let supply = Point::new(supply[0], supply[1]);
            let second = second.filter(|&second| second < pieces.len());
            let known: Vec<_> = pieces.iter().copied().map(Some).collect();
            let way = shortest(&known, Some(supply), second, ALL);
            let best = tried(&pieces, supply, second);
            prop_assert!((total(&way) - best).abs() <= 1e-9 * best, "{way:?}, not {best}");
            prop_assert_eq!(way.jumpers.len(), pieces.len() - 1);
            prop_assert_eq!(way.back.is_some(), second.is_some());
        }
    }

    #[test]
    fn what_is_typed_has_no_say_and_what_is_not_known_stays_so() {
        // Two bars in line, the second drawn from right to left: entered at its near end when only the
        // jumper counts, 100 mm on.
        let pieces = [
            Some([Point::new(0.0, 0.0), Point::new(1_000.0, 0.0)]),
            Some([Point::new(2_100.0, 0.0), Point::new(1_100.0, 0.0)]),
        ];
        let only = Counts {
            a: false,
            b: false,
            jumpers: true,
        };
        let way = shortest(&pieces, None, None, only);
        assert_eq!((way.a, way.jumpers, way.b), (None, vec![Some(100.0)], None));
        assert_eq!(way.turned, [false, true]);
        let way = shortest(&[pieces[0], None], Some(Point::ZERO), Some(1), ALL);
        assert_eq!(way.jumpers, [None]);
        assert_eq!((way.a, way.b), (Some(0.0), None));
        assert_eq!(way.back, Some(1_000.0), "the end that is known");
        assert_eq!(shortest(&[], None, None, ALL), Straight::default());
    }
}
