//! The sentences of this room.

use super::Piece;
use super::drawn::Drawn;
use crate::drawing::outline::Inset;
use crate::drawing::{ArtGroup, Face, NoArc, Unread, faces};
use crate::measure::{
    INSET_MM, Length, Limit, PIECE_LENGTH_MM, ReadError, Units, large_first, length_exact,
    length_shown, quoted,
};
use crate::rules::{Finding, Grade, Place, Source};

fn row(grade: Grade, row: usize, says: String) -> Finding {
    Finding::new(
        grade,
        Place::Row(row),
        says,
        Source::entry("as typed in the row"),
    )
}

pub(super) fn unreadable(at: usize, field: &str, error: &ReadError) -> Finding {
    row(Grade::Stop, at, format!("{field}: {error}."))
}

/// `field` names the place in the row where the row has several of the kind.
pub(super) fn outside(at: usize, field: Option<&str>, limit: &Limit, value: f64) -> Finding {
    let unit = if limit.unit.is_empty() {
        String::new()
    } else {
        format!(" {}", limit.unit)
    };
    row(
        Grade::Stop,
        at,
        large_first(&format!(
            "{}{limit}, but is {}{unit}.",
            field.map_or_else(String::new, |field| format!("{field}: ")),
            figure(value)
        )),
    )
    .with(
        value,
        if value < limit.least {
            limit.least
        } else {
            limit.most
        },
        limit.unit,
    )
}

/// A typed figure, no longer than anyone types it: 1/3 in is 8.467 mm.
fn figure(value: f64) -> String {
    // Hundreds of digits say no more.
    if value.abs() >= 1e12 {
        return format!("{value:.0e}");
    }
    let text = format!("{value:.3}");
    text.trim_end_matches('0').trim_end_matches('.').to_owned()
}

pub(super) fn no_text(at: usize) -> Finding {
    row(
        Grade::Look,
        at,
        "Nothing to make: the row has no letters.".to_owned(),
    )
}

pub(super) fn no_strokes(at: usize) -> Finding {
    row(
        Grade::Look,
        at,
        "Nothing to make: the row has no stroke lengths.".to_owned(),
    )
}

pub(super) fn no_face(at: usize, name: &str) -> Finding {
    let known: Vec<&str> = faces().iter().map(|face| face.name).collect();
    row(
        Grade::Stop,
        at,
        format!(
            "There is no letter face {}; there are: {}.",
            quoted(name),
            known.join(", ")
        ),
    )
}

/// How many characters of a kind are named one by one.
const MOST_NAMED: usize = 5;

pub(super) fn no_shape(at: usize, face: &Face, text: &str, missing: &[(usize, char)]) -> Finding {
    let wanted: String = missing.iter().map(|&(_, character)| character).collect();
    let instead = faces()
        .iter()
        .find(|other| other.shape(&wanted, other.cap_units).missing.is_empty())
        .map_or_else(
            || "Give it as strokes.".to_owned(),
            |other| format!("The face {} has it; or give it as strokes.", other.name),
        );
    row(
        Grade::Stop,
        at,
        format!(
            "The face {} has no shape for {}: glass and price are without it. {instead}",
            face.name,
            placed_in(text, missing)
        ),
    )
}

/// Characters with their places in the text.
fn placed_in(text: &str, missing: &[(usize, char)]) -> String {
    let mut named: Vec<String> = missing
        .iter()
        .take(MOST_NAMED)
        .map(|&(place, character)| {
            format!(
                "{} ({})",
                quoted(&character.to_string()),
                place_in(text, place)
            )
        })
        .collect();
    if missing.len() > MOST_NAMED {
        named.push(format!("{} more", missing.len() - MOST_NAMED));
    }
    named.join(", ")
}

/// Where a character of a text stands, as a person counts: in its line where there are several.
fn place_in(text: &str, place: usize) -> String {
    let before: Vec<char> = text.chars().take(place).collect();
    let lines = before.iter().filter(|c| **c == '\n').count();
    let in_line = before.iter().rev().take_while(|c| **c != '\n').count();
    if text.contains('\n') {
        format!("line {}, character {}", lines + 1, in_line + 1)
    } else {
        format!("character {}", in_line + 1)
    }
}

/// A figure of the layout that is not taken; `instead` says what is drawn.
pub(super) fn not_laid_out(at: usize, limit: &Limit, value: f64, instead: &str) -> Finding {
    let mut finding = outside(at, None, limit, value);
    finding.says = format!("{}: {instead}.", finding.says.trim_end_matches('.'));
    finding
}

/// The arc cannot be read: the text is drawn straight.
pub(super) fn unreadable_arc(at: usize, field: &str, error: &ReadError) -> Finding {
    row(
        Grade::Stop,
        at,
        format!("{field}: {error}: drawn straight."),
    )
}

/// The letters cannot stand on the arc: they are drawn straight. `limit` is in millimetres.
pub(super) fn no_arc(at: usize, typed_mm: f64, why: NoArc, by: f64) -> Finding {
    // Rounded to the safe side, so that what the sentence asks for will do.
    let (limit, says) = match why {
        NoArc::Radius { least } => {
            let least = (least * by * 10.0).ceil() / 10.0;
            (
                least,
                format!(
                    "The arc's radius must be at least {} mm (a line goes round once at most, and no \
                     letter reaches beyond the centre), but is {} mm: drawn straight.",
                    figure(least),
                    figure(typed_mm)
                ),
            )
        }
        NoArc::Rise { most } => {
            let most = (most * by * 10.0).floor() / 10.0;
            (
                most,
                format!(
                    "The arc's rise must be at most {} mm (a line as short as the first one rises no \
                     higher), but is {} mm: drawn straight.",
                    figure(most),
                    figure(typed_mm)
                ),
            )
        }
    };
    row(Grade::Stop, at, says).with(typed_mm, limit, "mm")
}

/// Down to a thousandth of a millimetre, so that what the sentence asks for will do.
fn no_more(value: f64) -> String {
    figure((value * 1_000.0 + 1e-6).floor() / 1_000.0)
}

/// The radius of a rectangle's corners is more than half its shorter side.
pub(super) fn corner(at: usize, mm: f64, most: f64) -> Finding {
    row(
        Grade::Stop,
        at,
        format!(
            "Corner radius must be at most {} mm (half the shorter side; there the corners meet), but \
             is {} mm.",
            no_more(most),
            figure(mm)
        ),
    )
    .with(mm, most, "mm")
}

/// A size is not less than another; `why` says what that is.
pub(super) fn not_less(at: usize, (field, mm): (&str, f64), than: f64, why: &str) -> Finding {
    row(
        Grade::Stop,
        at,
        format!(
            "{field} must be less than {} mm ({why}), but is {} mm.",
            no_more(than),
            figure(mm)
        ),
    )
    .with(mm, than, "mm")
}

/// Letters of a joined face that are set apart or turned do not meet as drawn.
pub(super) fn joints(at: usize, face: &Face) -> Finding {
    row(
        Grade::Look,
        at,
        format!(
            "The letters of {} run into each other, but are set one by one here, so that their ends do \
             not meet: what lies between them is counted as painted out. Have the joints drawn.",
            face.name
        ),
    )
}

pub(super) fn too_many(limit: &Limit, value: usize) -> Finding {
    Finding::new(
        Grade::Stop,
        Place::Job,
        large_first(&format!(
            "{limit}, but there are {value}: the rest is left out."
        )),
        Source::entry("the rows of the job"),
    )
}

/// Said once for all copies of a piece: `piece` is the first, `label` what all are called.
pub(super) fn too_long(
    piece_at: usize,
    piece: &Piece,
    (label, copies): (&str, usize),
    longest: Length,
) -> Finding {
    let made = if copies > 1 {
        format!(", made {copies} times,")
    } else {
        String::new()
    };
    let shown = |length| length_shown(length, Units::Metric);
    // Finer where whole millimetres would show a piece as long as what it is longer than.
    let column = if shown(piece.column()) == shown(longest) {
        length_exact(piece.column(), Units::Metric)
    } else {
        shown(piece.column())
    };
    Finding::new(
        Grade::Look,
        Place::Piece(piece_at),
        format!(
            "The piece {}{made} is {column} of glass between its electrodes, longer than the shop \
             bends in one ({}): it stays in one piece.",
            quoted(label),
            shown(longest)
        ),
        Source::shop(),
    )
    .with(piece.column().mm(), longest.mm(), "mm")
}

/// Said once for a row of which many pieces are too long: how many of one copy, and the longest.
pub(super) fn many_too_long(
    at: usize,
    many: usize,
    (label, column): (&str, Length),
    longest: Length,
) -> Finding {
    Finding::new(
        Grade::Look,
        Place::Row(at),
        format!(
            "{many} pieces of this row are longer than the shop bends in one ({}), the longest {} \
             with {} of glass between its electrodes: it stays in one piece.",
            length_shown(longest, Units::Metric),
            quoted(label),
            length_shown(column, Units::Metric),
        ),
        Source::shop(),
    )
    .with(column.mm(), longest.mm(), "mm")
}

/// Pieces that were cut because they are too long: what each is called, the glass between its
/// electrodes, and in how many it is made.
pub(super) fn cut_up(at: usize, cut: &[(String, f64, usize)], longest_mm: f64) -> Option<Finding> {
    // Of some as long the first is named.
    let most = cut.iter().rev().max_by(|a, b| a.1.total_cmp(&b.1));
    let (label, column_mm, parts) = most?;
    let shown = |mm| length_shown(Length::from_mm(mm), Units::Metric);
    // Finer where whole millimetres would show a piece as long as what it is longer than.
    let column = if shown(*column_mm) == shown(longest_mm) {
        length_exact(Length::from_mm(*column_mm), Units::Metric)
    } else {
        shown(*column_mm)
    };
    let most = shown(longest_mm);
    let says = match cut.len() {
        1 => format!(
            "{} would be {column} of glass between its electrodes, longer than the shop bends in one \
             ({most}): made in {parts}, cut where it shows least. Cut it elsewhere on the picture, or \
             keep it in one.",
            quoted(label)
        ),
        many => format!(
            "{many} pieces of this row would be longer than the shop bends in one ({most}), the longest \
             {} with {column} of glass between its electrodes: made in parts, that one in {parts}, cut \
             where it shows least. Cut them elsewhere on the picture, or keep them in one.",
            quoted(label)
        ),
    };
    Some(
        Finding::new(Grade::Note, Place::Row(at), says, Source::shop())
            .with(*column_mm, longest_mm, "mm"),
    )
}

/// Choices of pieces that name strokes the row does not have.
pub(super) fn choices_lost(at: usize, many: usize) -> Finding {
    let (choices, have) = if many == 1 {
        ("One choice", "has")
    } else {
        ("Choices", "have")
    };
    let many = if many == 1 {
        String::new()
    } else {
        format!(" ({many})")
    };
    row(
        Grade::Look,
        at,
        format!(
            "{choices} of how strokes become pieces{many} {have} no effect: the strokes joined, parted \
             or cut are not in this row any more, or not beside each other. Look at the pieces and \
             choose again."
        ),
    )
}

/// Pieces of two tubes cannot be one.
pub(super) fn not_joined(at: usize, one: &Drawn, other: &Drawn) -> Finding {
    row(
        Grade::Look,
        at,
        format!(
            "{} and {} are of different tubes and stay two pieces.",
            quoted(&one.label),
            quoted(&other.label)
        ),
    )
}

/// A limit of so many diameters of a tube, in words; `own` where the shop set it.
fn limit_of((factor, outer_mm): (f64, f64)) -> String {
    format!(
        "{} mm, {} diameters of {} mm tube",
        figure(factor * outer_mm),
        figure(factor),
        figure(outer_mm)
    )
}

/// A limit of bending that cannot be meant.
pub(super) fn no_limit(limit: &Limit, value: f64) -> Finding {
    let mut finding = outside(0, None, limit, value).at(Place::Job);
    finding.grade = Grade::Look;
    finding.source = Source::shop();
    finding.says = format!("{}: not checked.", finding.says.trim_end_matches('.'));
    finding
}

/// Where a limit of bending comes from: set by the shop, or as the book begins with it.
fn bending(own: bool) -> Source {
    if own {
        Source::shop()
    } else {
        Source::practice()
    }
}

/// Bends that have no room for the shop's tightest radius.
pub(super) fn tight(
    piece: usize,
    label: &str,
    many: usize,
    room_mm: f64,
    limit: (f64, f64),
    own: bool,
) -> Finding {
    let least = limit.0 * limit.1;
    // Told from the limit it misses.
    let room = format!("{:.1}", (room_mm * 10.0).floor() / 10.0);
    let room = room.trim_end_matches(".0");
    let says = if many == 1 {
        format!(
            "A bend of {} has room for a radius of {room} mm only; the shop's tightest is {}. Make it \
             larger, in thinner tube, or of more pieces.",
            quoted(label),
            limit_of(limit)
        )
    } else {
        format!(
            "{many} pieces of this row have bends tighter than the shop's tightest ({}); the \
             tightest, of {}, has room for a radius of {room} mm. Make them larger, in thinner tube, or \
             of more pieces.",
            limit_of(limit),
            quoted(label)
        )
    };
    Finding::new(Grade::Look, Place::Piece(piece), says, bending(own)).with(room_mm, least, "mm")
}

/// Strokes that turn back on themselves: `folds` places in `many` pieces of a row, told of the first.
pub(super) fn folds(piece: usize, label: &str, many: usize, folds: usize) -> Finding {
    let places = if folds == 1 { "place" } else { "places" };
    let which = if many == 1 {
        quoted(label)
    } else {
        format!("{many} pieces of this row, the first {},", quoted(label))
    };
    let turn = if many == 1 { "turns" } else { "turn" };
    Finding::new(
        Grade::Note,
        Place::Piece(piece),
        format!(
            "{which} {turn} back sharply at {folds} {places}: too far to be bent in the plane of the \
             sign, so the glass is folded there and runs back behind itself."
        ),
        Source::practice(),
    )
}

/// Letters too small for their tube.
pub(super) fn small_letters(at: usize, height_mm: f64, limit: (f64, f64), own: bool) -> Finding {
    let says = format!(
        "Letters {} mm high are small for their tube: the shop's least is {}.",
        figure(height_mm),
        limit_of(limit)
    );
    let least = limit.0 * limit.1;
    Finding::new(Grade::Look, Place::Row(at), says, bending(own)).with(height_mm, least, "mm")
}

/// Tubes nearer to each other than the shop sets them; `many` pairs, told of the nearest.
pub(super) fn too_near(
    piece: usize,
    labels: [&str; 2],
    many: usize,
    distance_mm: f64,
    (factor, least_mm): (f64, f64),
    own: bool,
) -> Finding {
    let [one, other] = labels.map(quoted);
    let come = if distance_mm < 0.05 {
        "touch or cross".to_owned()
    } else {
        let distance = format!("{:.1}", (distance_mm * 10.0).floor() / 10.0);
        let distance = distance.trim_end_matches(".0");
        format!("come within {distance} mm of each other, centre to centre")
    };
    let more = match many {
        1 => String::new(),
        many => format!(", and {} more pairs come too near", many - 1),
    };
    let says = format!(
        "{one} and {other} {come}{more}; the shop's least is {} mm, {} diameters.",
        figure(least_mm),
        figure(factor)
    );
    Finding::new(Grade::Look, Place::Piece(piece), says, bending(own)).with(
        distance_mm,
        least_mm,
        "mm",
    )
}

/// Glass whose own sides are nearer to each other than the shop sets tubes; `many` strokes, told of
/// the nearest.
pub(super) fn beside_itself(
    piece: usize,
    label: &str,
    many: usize,
    distance_mm: f64,
    (factor, least_mm): (f64, f64),
    own: bool,
) -> Finding {
    let distance = format!("{:.1}", (distance_mm * 10.0).floor() / 10.0);
    let more = match many {
        1 => String::new(),
        2 => ", and 1 more stroke does".to_owned(),
        many => format!(", and {} more strokes do", many - 1),
    };
    let says = format!(
        "{} runs back {} mm beside itself, centre to centre{more}; the shop's least is {} mm, {} \
         diameters.",
        quoted(label),
        distance.trim_end_matches(".0"),
        figure(least_mm),
        figure(factor)
    );
    Finding::new(Grade::Look, Place::Piece(piece), says, bending(own)).with(
        distance_mm,
        least_mm,
        "mm",
    )
}

/// Electrodes nearer to each other than the shop sets them.
pub(super) fn electrodes_near(
    piece: usize,
    labels: [&str; 2],
    many: usize,
    distance_mm: f64,
    least_mm: f64,
) -> Finding {
    let [one, other] = labels.map(quoted);
    let distance = format!("{:.1}", (distance_mm * 10.0).floor() / 10.0);
    let more = match many {
        1 => String::new(),
        many => format!(", and {} more pairs are too near", many - 1),
    };
    let says = format!(
        "Electrodes of {one} and {other} are {} mm apart{more}; the shop's least is {} mm.",
        distance.trim_end_matches(".0"),
        figure(least_mm)
    );
    Finding::new(Grade::Look, Place::Piece(piece), says, Source::shop()).with(
        distance_mm,
        least_mm,
        "mm",
    )
}

/// The sign is larger than what it has to stay inside.
pub(super) fn beyond_outline(called: &str, is_mm: f64, most_mm: f64) -> Finding {
    let shown = |mm: f64| length_shown(Length::from_mm(mm), Units::Metric);
    let (is, most) = if shown(is_mm) == shown(most_mm) {
        let exact = |mm: f64| length_exact(Length::from_mm(mm), Units::Metric);
        (exact(is_mm), exact(most_mm))
    } else {
        (shown(is_mm), shown(most_mm))
    };
    Finding::new(
        Grade::Look,
        Place::Job,
        format!(
            "With its tubes, rows one under the other as drawn, the sign has a {called} of {is}: more \
             than its outline has ({most})."
        ),
        Source::entry("the job's outline"),
    )
    .with(is_mm, most_mm, "mm")
}

pub(super) fn unreadable_outline(called: &str, error: &ReadError) -> Finding {
    Finding::new(
        Grade::Stop,
        Place::Job,
        format!("The outline's {called}: {error}."),
        Source::entry("the job's outline"),
    )
}

pub(super) fn crossovers() -> Finding {
    Finding::new(
        Grade::Note,
        Place::Job,
        "Painted-out glass between the strokes of a piece is estimated by the shortest straight \
         jumps; a bender's double-backs may take more.",
        Source::practice(),
    )
}

pub(super) fn drawn_straight(at: usize) -> Finding {
    row(
        Grade::Note,
        at,
        "Given by length only: drawn straight, to scale, not where it hangs.".to_owned(),
    )
}

/// A product is one piece of glass; who means as many pieces learns how to say so.
pub(super) fn one_piece(at: usize, typed: &str, count: i128, each: Length) -> Finding {
    let shown = |length| length_shown(length, Units::Metric);
    #[allow(clippy::cast_precision_loss, reason = "a small count of pieces")]
    let whole = each * count as f64;
    row(
        Grade::Note,
        at,
        format!(
            "{} is one piece of {}. For {count} pieces of {} write the length {count} times, with \
             semicolons between.",
            quoted(typed.trim()),
            shown(whole),
            shown(each)
        ),
    )
}

pub(super) fn allowance(says: String) -> Finding {
    Finding::new(Grade::Stop, Place::Job, says, Source::shop())
}

pub(super) fn no_artwork(at: usize, file: &str) -> Finding {
    row(
        Grade::Stop,
        at,
        format!(
            "The artwork file {} is not in this job: open it again.",
            quoted(file)
        ),
    )
}

/// A file of the job that cannot be read.
pub(super) fn bad_file(at: usize, file: &str, why: &str) -> Finding {
    row(Grade::Stop, at, format!("{}: {why}", quoted(file)))
}

pub(super) fn empty_artwork(at: usize) -> Finding {
    row(
        Grade::Look,
        at,
        "The artwork has no lines that can be measured.".to_owned(),
    )
}

pub(super) fn no_size(at: usize) -> Finding {
    row(
        Grade::Stop,
        at,
        "The artwork does not say how large it is: type how wide it is to be made.".to_owned(),
    )
}

pub(super) fn no_width(at: usize) -> Finding {
    row(
        Grade::Stop,
        at,
        "The artwork is one upright line and has no width to be scaled by: leave the width empty, or \
         give the line as strokes."
            .to_owned(),
    )
}

pub(super) fn too_many_lines(at: usize, lines: usize, most: usize) -> Finding {
    row(
        Grade::Stop,
        at,
        format!(
            "A row of artwork must have at most {most} lines that are tube, but this one has {lines}: \
             leave only the lines of the tubes, or join in the drawing what was cut into bits."
        ),
    )
}

/// Reasons that are each given a sentence.
const UNREAD_EACH: usize = 5;

/// What of an artwork was not read: a sentence for each reason, then how many more parts. What is
/// read no worse for it, such as lines of no length, must not hide the one text that is missing.
pub(super) fn unread(at: usize, parts: &[Unread]) -> Vec<Finding> {
    let mut reasons: Vec<(&Unread, usize)> = Vec::new();
    let mut places = std::collections::BTreeMap::new();
    for part in parts {
        let place = *places.entry(part.why.as_str()).or_insert_with(|| {
            reasons.push((part, 0));
            reasons.len() - 1
        });
        reasons[place].1 += 1;
    }
    let told = reasons.iter().take(UNREAD_EACH);
    let mut said: Vec<Finding> = told
        .map(|&(first, count)| {
            let others = match count {
                1 => String::new(),
                _ => format!(" and {} more", count - 1),
            };
            row(
                Grade::Look,
                at,
                format!(
                    "Not read as drawn: {}{others}: {}.",
                    first.element,
                    first.why.trim_end_matches('.')
                ),
            )
        })
        .collect();
    let more = reasons.iter().skip(UNREAD_EACH);
    let more: usize = more.map(|(_, count)| count).sum();
    if more > 0 {
        said.push(row(
            Grade::Look,
            at,
            format!("And {more} more parts of the artwork were not read."),
        ));
    }
    said
}

fn lines_of(group: &ArtGroup) -> String {
    let colour = group.colour.as_deref().unwrap_or("no colour");
    let layer = group
        .layer
        .as_ref()
        .map_or_else(String::new, |layer| format!(" in layer {}", quoted(layer)));
    format!("{colour}{layer}")
}

/// What the inset of a group is called in sentences.
pub(super) fn inset_of(group: &ArtGroup) -> String {
    format!("Inset of {}", lines_of(group))
}

pub(super) fn undecided(at: usize, group: &ArtGroup, mm_per_unit: f64) -> Finding {
    row(
        Grade::Look,
        at,
        format!(
            "The lines of {}, {} in all, have no tube yet: choose one, or say that they are not tube.",
            lines_of(group),
            length_shown(Length::from_mm(group.length * mm_per_unit), Units::Metric)
        ),
    )
}

/// Lines of an artwork are edges of areas: on which side of them the tube runs is a choice.
pub(super) fn filled(at: usize, group: &ArtGroup, distance_mm: f64) -> Finding {
    let how = if distance_mm > 0.0 {
        format!(
            "the tube runs {} inside the edge. Leave the inset empty to run it on the edge itself",
            exact(distance_mm)
        )
    } else {
        "the tube follows the edge itself. Type an inset to run it that far inside".to_owned()
    };
    row(
        Grade::Note,
        at,
        format!(
            "{} of the lines of {} are edges of filled areas: {how}.",
            group.filled,
            lines_of(group)
        ),
    )
}

/// An inset is typed for lines that have no inside.
pub(super) fn no_inside(at: usize, group: &ArtGroup) -> Finding {
    row(
        Grade::Look,
        at,
        format!(
            "None of the lines of {} is the closed edge of a filled area: they stay where they are, \
             without an inset.",
            lines_of(group)
        ),
    )
}

/// Edges of areas that are not closed have no inside, and stay.
pub(super) fn open_edges(at: usize, group: &ArtGroup, open: usize) -> Finding {
    row(
        Grade::Look,
        at,
        format!(
            "{open} of the lines of {} {} the edge of a filled area and not closed: not inset, but \
             left where drawn.",
            lines_of(group),
            if open == 1 { "is" } else { "are" },
        ),
    )
}

/// Of the filled areas of a group the inset leaves nothing.
pub(super) fn no_area_left(at: usize, group: &ArtGroup, distance_mm: f64) -> Finding {
    row(
        Grade::Stop,
        at,
        format!(
            "Inset by {}, nothing is left of the filled areas of {}: glass and price are without \
             them. Type a smaller inset, or make it wider.",
            exact(distance_mm),
            lines_of(group)
        ),
    )
}

/// What an inset did to filled areas beyond moving their edges.
pub(super) fn areas_changed(
    at: usize,
    group: &ArtGroup,
    distance_mm: f64,
    inset: &Inset,
) -> Option<Finding> {
    let mut what = Vec::new();
    match inset.vanished {
        0 => {}
        1 => what.push("an edge vanishes".to_owned()),
        many => what.push(format!("{many} edges vanish")),
    }
    if inset.split {
        what.push("an area falls into more parts".to_owned());
    }
    match inset.opened {
        0 => {}
        1 => what.push("a hole runs into another or into the outside".to_owned()),
        many => what.push(format!(
            "{many} holes run into each other or into the outside"
        )),
    }
    (!what.is_empty()).then(|| {
        row(
            Grade::Look,
            at,
            format!(
                "Inset by {}, of the filled areas of {} {}. Look at the picture.",
                exact(distance_mm),
                lines_of(group),
                what.join(", and ")
            ),
        )
    })
}

/// An inset that cannot be read: the tube is on the outline.
pub(super) fn unreadable_inset(at: usize, field: &str, error: &ReadError) -> Finding {
    row(
        Grade::Stop,
        at,
        format!("{field}: {error}: the tube follows the outline itself."),
    )
}

/// An inset that is not taken: the tube is on the outline.
pub(super) fn inset_outside(at: usize, field: &str, distance_mm: f64) -> Finding {
    let mut finding = outside(at, Some(field), &INSET_MM, distance_mm);
    let says = finding.says.trim_end_matches('.');
    finding.says = format!("{says}: the tube follows the outline itself.");
    finding
}

pub(super) fn no_font(at: usize, name: &str) -> Finding {
    let says = if name.is_empty() {
        "No font is chosen: choose one, or open a font file.".to_owned()
    } else {
        format!(
            "The font file {} is not in this job: open it again.",
            quoted(name)
        )
    };
    row(Grade::Stop, at, says)
}

/// How a font is understood: its own sentence.
pub(super) fn of_font(at: usize, grade: Grade, says: &str) -> Finding {
    row(grade, at, says.to_owned())
}

pub(super) fn no_outline(at: usize, font: &str, text: &str, missing: &[(usize, char)]) -> Finding {
    row(
        Grade::Stop,
        at,
        format!(
            "The font {} has no shape that can be used for {}: glass and price are without it. Use \
             another font, or give it as strokes.",
            quoted(font),
            placed_in(text, missing)
        ),
    )
}

/// A distance as it was typed, not rounded to what is easily read.
fn exact(mm: f64) -> String {
    length_exact(Length::from_mm(mm), Units::Metric)
}

/// Letters by name, each once.
fn named(letters: &[char]) -> String {
    let mut each: Vec<char> = Vec::new();
    for &letter in letters {
        if !each.contains(&letter) {
            each.push(letter);
        }
    }
    let mut named: Vec<String> = each
        .iter()
        .take(MOST_NAMED)
        .map(|letter| quoted(&letter.to_string()))
        .collect();
    if each.len() > MOST_NAMED {
        named.push(format!("{} more", each.len() - MOST_NAMED));
    }
    named.join(", ")
}

/// Of these letters the inset leaves nothing.
pub(super) fn nothing_left(at: usize, distance_mm: f64, letters: &[char]) -> Finding {
    row(
        Grade::Stop,
        at,
        format!(
            "Inset by {}, nothing is left of {}: glass and price are without it. Type a smaller \
             inset, or make the letters higher.",
            exact(distance_mm),
            named(letters)
        ),
    )
}

/// Of these letters a dot or another part is thinner than the inset.
pub(super) fn part_vanished(at: usize, distance_mm: f64, letters: &[char]) -> Finding {
    row(
        Grade::Look,
        at,
        format!(
            "Inset by {}, a part of {} vanishes: glass and price are without it.",
            exact(distance_mm),
            named(letters)
        ),
    )
}

/// These letters are thin somewhere, and the inset parts them there.
pub(super) fn inset_splits(at: usize, distance_mm: f64, letters: &[char]) -> Finding {
    row(
        Grade::Look,
        at,
        format!(
            "Inset by {}, thin places of {} are gone: each part that is left is a piece of glass of \
             its own.",
            exact(distance_mm),
            named(letters)
        ),
    )
}

/// In these letters the tube no longer goes round a counter.
pub(super) fn inset_opens(at: usize, distance_mm: f64, letters: &[char]) -> Finding {
    row(
        Grade::Look,
        at,
        format!(
            "Inset by {}, the wall around a counter of {} is gone: the tube goes in and out there, \
             not around the counter.",
            exact(distance_mm),
            named(letters)
        ),
    )
}

/// Outlines shorter than any glass that is bent.
pub(super) fn tiny_outlines(at: usize, _distance_mm: f64, letters: &[char]) -> Finding {
    row(
        Grade::Look,
        at,
        format!(
            "An outline of {} is shorter than {} mm all round: no glass is bent so small.",
            named(letters),
            PIECE_LENGTH_MM.least
        ),
    )
}

/// Outlines that cross each other were united.
pub(super) fn united(at: usize, _distance_mm: f64, letters: &[char]) -> Finding {
    row(
        Grade::Note,
        at,
        format!(
            "Outlines of {} cross each other in the font: the tube goes around what they cover \
             together.",
            named(letters)
        ),
    )
}
