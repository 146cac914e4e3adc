//! What a tap on a piece does: mark it, or join or cut the piece that is marked. Beside them the marks
//! at the crossovers of the marked piece, where it can be parted.

use kurbo::{Point, Shape};
use leptos::prelude::*;
use tubewright::job::Pieces;
use tubewright::takeoff::{Piece, choose};

use super::paint::Pen;
use crate::desk::{Desk, Task, desk};

/// Radius of a mark at a crossover on the screen, and of what takes a tap on it.
const MARK_PX: f64 = 12.0;
const TOUCH_PX: f64 = 22.0;

/// A piece is tapped at a place of the sign.
pub(super) fn tap(desk: Desk, piece: usize, at: Point) {
    let marked = desk.piece.get_untracked();
    match (desk.task.get_untracked(), marked) {
        (Some(Task::Join), Some(marked)) if marked != piece => {
            choose(desk, marked, "pieces joined", |choices, pieces| {
                let other = pieces.get(piece).ok_or("That piece is gone.")?;
                choose::join(choices, &pieces[marked], other)
            });
        }
        (Some(Task::Cut), Some(marked)) => {
            // Wherever the finger lies, it is the marked piece that is cut.
            choose(desk, marked, "a piece cut", |choices, pieces| {
                choose::cut(choices, &pieces[marked], at)
            });
        }
        _ => {
            desk.task.set(None);
            desk.piece
                .set(Some(piece).filter(|_| marked != Some(piece)));
        }
    }
}

/// Parts the marked piece after one of its strokes.
pub fn part_marked(desk: Desk, after: usize) {
    let Some(piece) = desk.piece.get_untracked() else {
        return;
    };
    choose(desk, piece, "a piece parted", |choices, pieces| {
        choose::part(choices, &pieces[piece], after)
    });
}

/// Changes the choices of the row that a piece is of; refused with a sentence.
fn choose(
    desk: Desk,
    piece: usize,
    says: &str,
    change: impl FnOnce(&mut Pieces, &[Piece]) -> Result<(), String>,
) {
    let results = desk.results.get_untracked();
    let pieces = &results.takeoff.pieces;
    let Some(row) = pieces.get(piece).map(|piece| piece.row) else {
        return;
    };
    let choices = desk
        .job
        .with_untracked(|job| job.rows.get(row).map(|row| row.pieces().clone()));
    let Some(mut choices) = choices else { return };
    if let Err(why) = change(&mut choices, pieces) {
        desk.trouble(vec![why]);
        return;
    }
    desk.settle();
    desk.edit_job("pieces", &format!("Row {}: {says}", row + 1), |job| {
        if let Some(row) = job.rows.get_mut(row) {
            *row.pieces_mut() = choices;
        }
    });
    desk.settle();
    // Numbers of pieces have changed: the one that was marked is another now.
    desk.task.set(None);
    desk.piece.set(None);
}

/// Numbers at the crossovers of the marked piece; a tap on one parts it there.
#[component]
pub(super) fn PartMarks(
    /// Where something at x stands, seen from this side.
    across: Callback<f64, f64>,
    pen: Pen,
) -> impl IntoView {
    let desk = desk();
    let jumps = Memo::new(move |_| {
        let Some(at) = desk.piece.get() else {
            return Vec::new();
        };
        desk.results.with(|results| {
            let piece = results.takeoff.pieces.get(at);
            let jumps = piece.into_iter().flat_map(|piece| &piece.jumps);
            jumps
                .map(|jump| (jump.after, jump.path.bounding_box().center()))
                .collect::<Vec<_>>()
        })
    });
    move || {
        let marks = jumps.get().into_iter().enumerate();
        marks
            .map(|(number, (after, at))| {
                let x = move || across.run(at.x).to_string();
                view! {
                    <g class="picture-part">
                        <circle cx=x cy=at.y.to_string() r=move || pen.px(MARK_PX)></circle>
                        <text x=x y=at.y.to_string() font-size=move || pen.px(MARK_PX)>
                            {(number + 1).to_string()}
                        </text>
                        <circle class="touch" data-part=after.to_string()
                            cx=x cy=at.y.to_string() r=move || pen.px(TOUCH_PX)></circle>
                    </g>
                }
            })
            .collect::<Vec<_>>()
    }
}
