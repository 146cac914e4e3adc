//! A circuit's joints and its unseen stretch on the sign: where they lie, and the marks of them.

use kurbo::Point;
use leptos::prelude::*;
use tubewright::Workup;
use tubewright::circuit::Unseen;
use tubewright::workup::CircuitWork;

use super::paint::Pen;
use super::scene::drawn;
use crate::desk::{Desk, desk};

/// Radius of the ring around an electrode end.
const RING_PX: f64 = 11.0;
/// How far from an electrode end a tap still marks its joint.
pub(super) const TOUCH_PX: f64 = 18.0;
/// How far the hatching of the stretch stands out beside the glass, both sides together.
const BESIDE_PX: f64 = 16.0;

/// The two electrode ends of a circuit's piece by its place on the string, that nearer lead A first.
pub(super) fn ends(workup: &Workup, circuit: &CircuitWork, place: usize) -> Option<[Point; 2]> {
    let piece = workup.takeoff.pieces.get(*circuit.pieces.get(place)?)?;
    let [first, second] = piece.electrodes;
    Some(if circuit.leads.is_turned(place) {
        [second, first]
    } else {
        [first, second]
    })
}

/// The electrode ends that meet in a joint: two, or one at a lead. None where there is no such joint.
fn meeting(workup: &Workup, circuit: &CircuitWork, joint: usize) -> Option<Vec<Point>> {
    let before = joint
        .checked_sub(1)
        .and_then(|place| ends(workup, circuit, place));
    let after = ends(workup, circuit, joint);
    let found: Vec<Point> = before
        .map(|[_, far]| far)
        .into_iter()
        .chain(after.map(|[near, _]| near))
        .collect();
    (!found.is_empty() && joint < circuit.profile.joints.len()).then_some(found)
}

/// The joint of a circuit whose electrode end is nearest to a place of the sign, at most `within`
/// millimetres off.
fn nearest(workup: &Workup, circuit: &CircuitWork, at: Point, within: f64) -> Option<usize> {
    (0..circuit.pieces.len())
        .filter_map(|place| ends(workup, circuit, place).map(|ends| (place, ends)))
        .flat_map(|(place, [near, far])| [(place, near), (place + 1, far)])
        .map(|(joint, end)| (joint, end.distance(at)))
        .filter(|&(_, off)| off <= within)
        .min_by(|a, b| a.1.total_cmp(&b.1))
        .map(|(joint, _)| joint)
}

/// The glass of a stretch as SVG path data.
fn stretch(workup: &Workup, circuit: &CircuitWork, unseen: &Unseen) -> String {
    let (from, to) = (unseen.from_spot, unseen.to_spot);
    (from.piece..=to.piece)
        .filter_map(|place| {
            let piece = workup.takeoff.pieces.get(*circuit.pieces.get(place)?)?;
            let begins = if place == from.piece { from.along } else { 0.0 };
            let ends = if place == to.piece { to.along } else { 1.0 };
            let (begins, ends) = if circuit.leads.is_turned(place) {
                (1.0 - ends, 1.0 - begins)
            } else {
                (begins, ends)
            };
            Some(drawn(&piece.stretch(begins, ends)))
        })
        .collect()
}

/// The joint of the open circuit at a place of the sign that was tapped.
pub(super) fn joint_at(desk: Desk, at: Point, within: f64) -> Option<(usize, usize)> {
    untrack(|| {
        let open = desk.open_circuit()?;
        desk.results.with(|results| {
            let circuit = results.circuits.get(open)?;
            Some((open, nearest(results, circuit, at, within)?))
        })
    })
}

/// Hatching beside the glass of the open circuit where a fault is not sensed.
#[component]
pub(super) fn StretchMark(
    /// Width of the glass, millimetres.
    width_mm: f64,
    pen: Pen,
) -> impl IntoView {
    let desk = desk();
    let path = Memo::new(move |_| {
        let open = desk.open_circuit()?;
        desk.results.with(|results| {
            let circuit = results.circuits.get(open)?;
            let unseen = circuit.protection.map.as_ref()?.unseen?;
            Some(stretch(results, circuit, &unseen))
        })
    });
    view! {
        <path class="picture-unseen" d=move || path.get()
            stroke-width=move || (width_mm + BESIDE_PX * pen.px.get()).to_string()
            stroke-dasharray=move || pen.dashes(2.0, 4.0)></path>
    }
}

/// Rings around the electrode ends of the marked joint, and what joins them.
#[component]
pub(super) fn JointMark(pen: Pen) -> impl IntoView {
    let desk = desk();
    let found = Memo::new(move |_| {
        let open = desk.open_circuit()?;
        let joint = desk.joint_on(open)?;
        desk.results.with(|results| {
            let circuit = results.circuits.get(open)?;
            // With a mid-point return the two ends meet at the supply.
            let apart = circuit.profile.joints.get(joint)?.mid_point;
            Some((meeting(results, circuit, joint)?, apart))
        })
    });
    move || {
        found.get().map(|(ends, apart)| {
            let line = match ends[..] {
                [a, b] if !apart => Some(format!("M{:.1} {:.1}L{:.1} {:.1}", a.x, a.y, b.x, b.y)),
                _ => None,
            };
            let rings: Vec<_> = ends
                .iter()
                .map(|end| {
                    let (x, y) = (end.x.to_string(), end.y.to_string());
                    view! {
                        <circle class="under" cx=x.clone() cy=y.clone() r=move || pen.px(RING_PX)
                            stroke-width=move || pen.px(6.0)></circle>
                        <circle cx=x cy=y r=move || pen.px(RING_PX) stroke-width=move || pen.px(2.5)></circle>
                    }
                })
                .collect();
            view! {
                <g class="picture-joint">
                    {line.map(|line| view! {
                        <path d=line stroke-width=move || pen.px(2.5)
                            stroke-dasharray=move || pen.dashes(6.0, 5.0)></path>
                    })}
                    {rings}
                </g>
            }
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::files::demo;
    use tubewright::workup;

    #[test]
    fn every_joint_lies_at_its_electrodes_and_is_found_there() {
        for job in demo::jobs() {
            let worked = workup(&job, &demo::book());
            for circuit in &worked.circuits {
                let last = circuit.pieces.len();
                for joint in 0..=last {
                    let ends = meeting(&worked, circuit, joint).expect("a joint of the circuit");
                    let wanted = if joint == 0 || joint == last { 1 } else { 2 };
                    assert_eq!(ends.len(), wanted, "{}, joint {joint}", job.name);
                    for end in ends {
                        let found = nearest(&worked, circuit, end, 0.5).expect("there it is");
                        let at = meeting(&worked, circuit, found).expect("a joint");
                        // Electrodes of two joints may lie on each other.
                        assert!(at.iter().any(|at| at.distance(end) < 0.5), "{}", job.name);
                    }
                }
                assert_eq!(meeting(&worked, circuit, last + 1), None, "no more");
                let far = Point::new(-1e6, -1e6);
                assert_eq!(nearest(&worked, circuit, far, 50.0), None, "nothing near");
            }
        }
    }

    #[test]
    fn the_stretch_lies_on_the_pieces_it_names() {
        let mut some = 0;
        for job in demo::jobs() {
            let worked = workup(&job, &demo::book());
            for circuit in &worked.circuits {
                let map = circuit.protection.map.as_ref();
                let Some(unseen) = map.and_then(|map| map.unseen) else {
                    continue;
                };
                some += 1;
                let path = stretch(&worked, circuit, &unseen);
                assert!(path.starts_with('M'), "{}: {path}", job.name);
                let whole = Unseen {
                    from_spot: tubewright::circuit::Spot {
                        piece: 0,
                        along: 0.0,
                    },
                    to_spot: tubewright::circuit::Spot {
                        piece: circuit.pieces.len() - 1,
                        along: 1.0,
                    },
                    ..unseen
                };
                let whole = stretch(&worked, circuit, &whole);
                assert!(path.len() < whole.len(), "{}: a part of it", job.name);
            }
        }
        assert!(some > 0, "a circuit of the demo has an unseen stretch");
    }
}
