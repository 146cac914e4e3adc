//! Cutting a piece: where a person says, or where it shows least when it is longer than the shop
//! bends in one.

use super::bends::corners;
use super::drawn::{Drawn, Strand};

/// Pieces shorter than this are avoided where others will do, in millimetres: an electrode at either
/// end is hardly held. Our own choice, no source.
const SHORT_MM: f64 = 150.0;
/// Places weighed at most; of a drawing with more corners only some are.
const MOST_PLACES: usize = 1_200;
/// Good places from which the farthest reach is tried.
const MOST_REACHED: usize = 60;
/// Lengths that differ by less are one, in millimetres.
pub(super) const SAME_MM: f64 = 1e-6;

/// A place to cut a run at: after a strand, or on it so far along as the glass runs.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Place {
    After(usize),
    On(usize, f64),
}

impl Place {
    fn key(self) -> (usize, f64) {
        match self {
            Self::After(strand) => (strand, f64::INFINITY),
            Self::On(strand, along) => (strand, along),
        }
    }
}

/// The parts of a piece cut at some places, in order. A jump that is cut is not made.
pub(super) fn cut(drawn: &Drawn, places: &[Place]) -> Vec<Drawn> {
    let mut places = places.to_vec();
    places.sort_by(|a, b| {
        let (a, b) = (a.key(), b.key());
        a.0.cmp(&b.0).then(a.1.total_cmp(&b.1))
    });
    let mut parts = Vec::new();
    let mut run: Vec<Strand> = Vec::new();
    let mut places = places.into_iter().peekable();
    for (at, strand) in drawn.run.iter().enumerate() {
        let mut rest = strand.clone();
        let mut done = 0.0;
        while let Some(place) = places.next_if(|place| place.key().0 == at) {
            match place {
                Place::After(_) => {
                    run.push(rest.clone());
                    parts.push(std::mem::take(&mut run));
                    rest.length = -1.0;
                }
                Place::On(_, along) => {
                    let from_here = along - done;
                    let [first, second] = if rest.turned {
                        let [second, first] = rest.cut(rest.length - from_here);
                        [first, second]
                    } else {
                        rest.cut(from_here)
                    };
                    run.push(first);
                    parts.push(std::mem::take(&mut run));
                    rest = second;
                    done = along;
                }
            }
        }
        if rest.length >= 0.0 {
            run.push(rest);
        }
    }
    parts.push(run);
    parts.retain(|run| !run.is_empty());
    let part = |run| Drawn {
        run,
        ..drawn.clone()
    };
    parts.into_iter().map(part).collect()
}

/// How well a place is suited, best first; also what using it costs.
const HIDDEN: u32 = 0;
const CORNER: u32 = 1;
const SHORT: u32 = 2;
const SMOOTH: u32 = 4;

#[derive(Debug, Clone, Copy)]
struct Candidate {
    place: Option<Place>,
    /// Where the part before ends and the part after begins, along the column.
    ends: f64,
    begins: f64,
    bad: u32,
}

/// Cuts a piece longer than `longest` into as few as can be; of those at the best places (painted-out
/// parts, then stroke ends and corners, then anywhere), no part very short; of those most even.
/// `crossover` is added to each jump.
pub(super) fn too_long(drawn: &Drawn, longest: f64, crossover: f64) -> Vec<Drawn> {
    if drawn.column(crossover) <= longest + SAME_MM {
        return vec![drawn.clone()];
    }
    cut(drawn, &best(drawn, longest, crossover))
}

fn best(drawn: &Drawn, longest: f64, crossover: f64) -> Vec<Place> {
    let candidates = candidates(drawn, longest, crossover);
    let short = SHORT_MM.min(longest / 8.0);
    // For each candidate the best way to end a part there: parts, how bad, sum of squares, from where.
    // All are sums, so the best way to a place is part of the best way on from it.
    let mut reached: Vec<Option<(u32, u32, f64, usize)>> = vec![None; candidates.len()];
    reached[0] = Some((0, 0, 0.0, 0));
    for to in 1..candidates.len() {
        let mut found: Option<(u32, u32, f64, usize)> = None;
        for from in (0..to).rev() {
            let length = candidates[to].ends - candidates[from].begins;
            // Parts only grow from here on.
            if length > longest + SAME_MM {
                break;
            }
            if length <= SAME_MM {
                continue;
            }
            let Some((parts, bad, squares, _)) = reached[from] else {
                continue;
            };
            let bad = bad + candidates[to].bad + if length < short { SHORT } else { 0 };
            let cost = (parts + 1, bad, squares + length * length);
            let better = found.is_none_or(|(parts, bad, squares, _)| {
                (cost.0, cost.1) < (parts, bad)
                    || (cost.0, cost.1) == (parts, bad) && cost.2 < squares * (1.0 - 1e-12)
            });
            if better {
                found = Some((cost.0, cost.1, cost.2, from));
            }
        }
        reached[to] = found;
    }
    let mut places = Vec::new();
    let mut at = candidates.len() - 1;
    while let Some((.., from)) = reached[at].filter(|_| at > 0) {
        places.extend(candidates[from].place);
        at = from;
    }
    places
}

/// Every place worth weighing, in order, with the beginning and the end of the run.
fn candidates(drawn: &Drawn, longest: f64, crossover: f64) -> Vec<Candidate> {
    let at_end = |place, at, bad| Candidate {
        place,
        ends: at,
        begins: at,
        bad,
    };
    let mut good = Vec::new();
    // Where each strand begins along the column.
    let mut starts = Vec::with_capacity(drawn.run.len());
    let jumps: Vec<_> = drawn.jumps().collect();
    let mut jumps = jumps.into_iter().peekable();
    let mut along = 0.0;
    for (at, strand) in drawn.run.iter().enumerate() {
        starts.push(along);
        for corner in corners(&strand.path) {
            let corner = if strand.turned {
                strand.length - corner
            } else {
                corner
            };
            let place = Place::On(at, corner);
            good.push(at_end(Some(place), along + corner, CORNER));
        }
        along += strand.length;
        let ends = along;
        let jump = jumps.next_if(|&(after, ..)| after == at);
        if let Some((_, from, to)) = jump {
            along += from.distance(to) + crossover;
        }
        if at + 1 < drawn.run.len() {
            good.push(Candidate {
                place: Some(Place::After(at)),
                ends,
                begins: along,
                bad: if jump.is_some() { HIDDEN } else { CORNER },
            });
        }
    }
    let total = along;
    good.sort_by(|a, b| a.ends.total_cmp(&b.ends));
    let thin = good.len().div_ceil(MOST_PLACES).max(1);
    let mut all: Vec<Candidate> = good.into_iter().step_by(thin).collect();
    // Anywhere: evenly, and as far as a part reaches from a good place.
    let mut wanted = Vec::new();
    let least = (total / longest).ceil().max(1.0);
    for parts in [least, least + 1.0] {
        let mut done = 1.0;
        while done < parts && wanted.len() < MOST_PLACES {
            wanted.push(total * done / parts);
            done += 1.0;
        }
    }
    let from = all.iter().step_by(all.len().div_ceil(MOST_REACHED).max(1));
    let mut reach: Vec<(f64, f64)> = from.map(|place| (place.begins, place.ends)).collect();
    reach.push((0.0, total));
    for (begins, ends) in reach {
        let mut times = 1.0;
        while times < least + 1.0 && wanted.len() < 4 * MOST_PLACES {
            wanted.extend([begins + times * longest, ends - times * longest]);
            times += 1.0;
        }
    }
    for at in wanted {
        let strand = starts.partition_point(|&start| start < at).checked_sub(1);
        let Some(strand) = strand else { continue };
        let on = at - starts[strand];
        if on > SAME_MM && on < drawn.run[strand].length - SAME_MM {
            all.push(at_end(Some(Place::On(strand, on)), at, SMOOTH));
        }
    }
    all.sort_by(|a, b| a.ends.total_cmp(&b.ends).then(a.bad.cmp(&b.bad)));
    all.dedup_by(|b, a| b.ends - a.ends < SAME_MM);
    all.insert(0, at_end(None, 0.0, 0));
    all.push(at_end(None, total, 0));
    all
}

#[cfg(test)]
mod tests {
    use super::super::route::as_drawn;
    use super::*;
    use kurbo::{BezPath, Circle, Shape};

    fn drawn(strokes: &[&[(f64, f64)]]) -> Drawn {
        let strokes: Vec<BezPath> = strokes
            .iter()
            .map(|points| {
                let mut path = BezPath::new();
                path.move_to(points[0]);
                for &point in &points[1..] {
                    path.line_to(point);
                }
                path
            })
            .collect();
        let way = as_drawn(&strokes);
        Drawn::new("x".to_owned(), strokes, &way)
    }

    fn columns(parts: &[Drawn]) -> Vec<f64> {
        parts
            .iter()
            .map(|part| (part.column(0.0) * 1e6).round() / 1e6)
            .collect()
    }

    #[test]
    fn a_straight_piece_is_cut_evenly_into_as_few_as_can_be() {
        let bar = drawn(&[&[(0.0, 0.0), (5000.0, 0.0)]]);
        let parts = too_long(&bar, 2400.0, 0.0);
        assert_eq!(columns(&parts), [1_666.666_667; 3]);
        // Exactly twice as long as can be bent: two.
        assert_eq!(columns(&too_long(&bar, 2500.0, 0.0)), [2500.0; 2]);
        assert_eq!(too_long(&bar, 5000.0, 0.0).len(), 1, "just short enough");
    }

    #[test]
    fn a_frame_is_cut_at_its_corners() {
        // 2000 by 1000, from the lower left round: corners at 2000, 3000, 5000.
        let frame = drawn(&[&[
            (0.0, 0.0),
            (2000.0, 0.0),
            (2000.0, 1000.0),
            (0.0, 1000.0),
            (0.0, 0.0),
        ]]);
        assert_eq!(columns(&too_long(&frame, 3000.0, 0.0)), [3000.0, 3000.0]);
        // Parts of at most 2400: after the corner at 2000 the next one that would do is not there (3000
        // leaves a last part of 3000, 5000 a middle one of 3000), so the second cut is on the straight,
        // most evenly.
        assert_eq!(columns(&too_long(&frame, 2400.0, 0.0)), [2000.0; 3]);
    }

    #[test]
    fn a_painted_out_part_is_cut_before_a_corner() {
        // Two strokes of 1500 with 400 between: the jump is not made, nothing shows.
        let pair = drawn(&[
            &[(0.0, 0.0), (750.0, 0.0), (750.0, 750.0)],
            &[(750.0, 1150.0), (2250.0, 1150.0)],
        ]);
        let parts = too_long(&pair, 2400.0, 0.0);
        assert_eq!(columns(&parts), [1500.0, 1500.0]);
        assert_eq!(parts[0].jumps().count() + parts[1].jumps().count(), 0);
    }

    #[test]
    fn a_circle_is_cut_evenly_and_stays_as_long() {
        let circle = Circle::new((0.0, 0.0), 700.0).to_path(1e-9);
        let way = as_drawn(std::slice::from_ref(&circle));
        let ring = Drawn::new("ring".to_owned(), vec![circle], &way);
        let parts = too_long(&ring, 2400.0, 0.0);
        assert_eq!(parts.len(), 2);
        let lit: f64 = parts.iter().map(Drawn::lit).sum();
        assert!((lit - ring.lit()).abs() < 1e-9, "{lit} of {}", ring.lit());
        assert!((parts[0].lit() - parts[1].lit()).abs() < 1e-6, "most even");
        assert_eq!(
            parts[0].run[0].part,
            [0.0, 0.5],
            "the first half of the stroke"
        );
    }

    #[test]
    fn a_turned_stroke_is_cut_where_the_glass_runs() {
        let mut bar = drawn(&[&[(0.0, 0.0), (1000.0, 0.0)]]);
        bar.run[0].turned = true;
        let parts = cut(&bar, &[Place::On(0, 300.0), Place::On(0, 400.0)]);
        assert_eq!(columns(&parts), [300.0, 100.0, 600.0]);
        // It runs from the right to the left.
        let from: Vec<f64> = parts.iter().map(|part| part.run[0].enters().x).collect();
        assert_eq!(from, [1000.0, 700.0, 600.0]);
    }

    /// The fewest parts by trying, for runs of straight strokes with jumps: a part may end at any
    /// whole millimetre.
    #[test]
    fn no_fewer_parts_would_do() {
        let mut state = 5_u64;
        let mut next = |most: u64| {
            state = state
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1);
            (state >> 33) % most
        };
        for _ in 0..200 {
            let mut x = 0;
            let strokes: Vec<[(f64, f64); 2]> = (0..=next(5))
                .map(|_| {
                    let from = x + next(400);
                    x = from + 100 + next(900);
                    #[allow(clippy::cast_precision_loss, reason = "small whole numbers")]
                    [(from as f64, 0.0), (x as f64, 0.0)]
                })
                .collect();
            let strokes: Vec<&[(f64, f64)]> = strokes.iter().map(|stroke| &stroke[..]).collect();
            let run = drawn(&strokes);
            let longest = 700.0;
            let parts = too_long(&run, longest, 0.0);
            assert!(
                parts.iter().all(|part| part.column(0.0) <= longest + 1e-6),
                "{:?}",
                columns(&parts)
            );
            // Laying off as far as it goes each time is fewest on a line, where a part that would end
            // in a jump ends before it and the next begins behind it.
            let mut fewest = 0;
            let (mut at, mut stroke) = (strokes[0][0].0, 0);
            while stroke < strokes.len() {
                fewest += 1;
                let reach = at + longest;
                while stroke < strokes.len() && strokes[stroke][1].0 <= reach + 1e-9 {
                    stroke += 1;
                }
                if stroke < strokes.len() {
                    at = strokes[stroke][0].0.max(reach);
                }
            }
            assert_eq!(parts.len(), fewest, "{strokes:?}");
        }
    }
}
