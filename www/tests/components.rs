//! Parts of the page alone, in a real browser: each is mounted, used and read.
#![cfg(target_arch = "wasm32")]

use leptos::mount::mount_to;
use leptos::prelude::*;
use leptos::task::tick;
use tubewright::job::{Align, Curve, Row, Shape};
use tubewright::measure::Units;
use tubewright_www::desk::{Desk, Where};
use tubewright_www::document::Write;
use tubewright_www::files::{self, demo};
use tubewright_www::keep::{Keeper, Standing};
use tubewright_www::places::{Circuits, FindingsList, Glass, Price, Rows, ShopBook, Sign};
use wasm_bindgen::JsCast;
use wasm_bindgen_test::{wasm_bindgen_test, wasm_bindgen_test_configure};
use web_sys::{
    Element, Event, HtmlElement, HtmlInputElement, HtmlSelectElement, PointerEvent,
    PointerEventInit,
};

wasm_bindgen_test_configure!(run_in_browser);

/// Waits until what follows from an edit is drawn: an edit may ripple through several effects.
async fn settled() {
    for _ in 0..4 {
        tick().await;
    }
}

/// A part of the page with a desk of its own.
struct Mounted {
    root: HtmlElement,
    desk: Desk,
    // Dropping it takes the part off the page.
    _handle: Box<dyn core::any::Any>,
}

fn mount<N>(part: fn() -> N) -> Mounted
where
    N: IntoView + 'static,
{
    let root: HtmlElement = document()
        .create_element("div")
        .expect("an element")
        .unchecked_into();
    document()
        .body()
        .expect("a body")
        .append_child(&root)
        .expect("room in the body");
    let slot = std::rc::Rc::new(std::cell::Cell::new(None));
    let given = slot.clone();
    let handle = mount_to(root.clone(), move || {
        let desk = Desk::new(demo::document());
        provide_context(desk);
        given.set(Some(desk));
        part().into_any()
    });
    Mounted {
        root,
        desk: slot.get().expect("the desk was made"),
        _handle: Box::new(handle),
    }
}

impl Mounted {
    fn text(&self) -> String {
        self.root
            .text_content()
            .unwrap_or_default()
            .replace('\u{202f}', " ")
    }

    fn all(&self, selector: &str) -> Vec<Element> {
        let found = self.root.query_selector_all(selector).expect("a selector");
        (0..found.length())
            .filter_map(|at| found.item(at)?.dyn_into().ok())
            .collect()
    }

    /// The control under a caption, in the nth place it stands.
    fn field(&self, caption: &str, nth: usize) -> HtmlInputElement {
        self.under(caption, nth, "input, textarea")
    }

    /// What stands under the nth such caption and is such a control.
    fn under<T: JsCast>(&self, caption: &str, nth: usize, control: &str) -> T {
        self.all("label.field")
            .into_iter()
            .filter(|label| {
                label
                    .query_selector(".caption")
                    .ok()
                    .flatten()
                    .is_some_and(|found| found.text_content().as_deref() == Some(caption))
            })
            .nth(nth)
            .and_then(|label| label.query_selector(control).ok().flatten())
            .unwrap_or_else(|| panic!("wanted: the field {caption}\n   got: {}", self.text()))
            .unchecked_into()
    }

    /// The choice under a caption, in the nth place it stands.
    fn choice(&self, caption: &str, nth: usize) -> HtmlSelectElement {
        self.under::<HtmlSelectElement>(caption, nth, "select")
    }

    async fn choose(&self, choice: &HtmlSelectElement, value: &str) {
        choice.set_value(value);
        let event = Event::new("change").expect("an event");
        choice.dispatch_event(&event).expect("it is heard");
        settled().await;
    }

    async fn click(&self, words: &str) {
        let named = |button: &Element| {
            let label = button.get_attribute("aria-label");
            label.or_else(|| button.text_content()).as_deref() == Some(words)
        };
        let button = self
            .all("button")
            .into_iter()
            .find(named)
            .unwrap_or_else(|| panic!("wanted: the button {words}\n   got: {}", self.text()));
        button.unchecked_into::<HtmlElement>().click();
        settled().await;
    }

    async fn enter(&self, field: &HtmlInputElement, text: &str, event: &str) {
        field.set_value(text);
        let event = Event::new(event).expect("an event");
        field.dispatch_event(&event).expect("it is heard");
        settled().await;
    }

    fn first_text(&self) -> String {
        self.desk
            .job
            .with_untracked(|job| job.rows[0].label().to_owned())
    }
}

#[wasm_bindgen_test]
async fn a_row_is_edited_in_place() {
    let rows = mount(|| view! { <Rows/> });
    assert_eq!(rows.all(".row").len(), 2, "a card for each row");
    let field = rows.field("What it says", 0);
    rows.enter(&field, "WREN", "input").await;
    assert_eq!(rows.first_text(), "WREN", "each key is taken");
    assert!(rows.text().contains("4 pieces"), "got: {}", rows.text());
    rows.desk.undo();
    settled().await;
    assert_eq!(field.value(), "QUILLMOOR", "undo is shown in the field");
}

#[wasm_bindgen_test]
async fn a_bare_height_takes_the_unit_the_page_is_set_to() {
    let rows = mount(|| view! { <Rows/> });
    let field = rows.field("Letter height", 0);
    rows.enter(&field, "250", "change").await;
    assert_eq!(field.value(), "250 mm", "millimetres at first");
    rows.desk.set_units(Units::FeetInches);
    rows.enter(&field, "9 1/2", "change").await;
    assert_eq!(field.value(), "9 1/2 in", "then inches");
}

#[wasm_bindgen_test]
async fn a_count_that_is_none_stays_in_sight_with_a_sentence() {
    let rows = mount(|| view! { <Rows/> });
    let field = rows.field("Times", 0);
    rows.enter(&field, "twice", "change").await;
    assert_eq!(field.value(), "twice", "what was typed is not wiped out");
    assert!(
        rows.text().contains("found “twice”"),
        "got: {}",
        rows.text()
    );
    assert_eq!(
        rows.desk.job.with_untracked(|job| job.rows[0].count()),
        1,
        "the job has the old"
    );
    rows.enter(&field, "2", "change").await;
    assert!(!rows.text().contains("found “twice”"), "the sentence goes");
    assert_eq!(
        rows.desk.job.with_untracked(|job| job.rows[0].count()),
        2,
        "the job has the new"
    );
}

#[wasm_bindgen_test]
async fn a_shape_is_added_and_another_kind_keeps_its_name_tube_and_count() {
    let rows = mount(|| view! { <Rows/> });
    let shape = |rows: &Mounted| {
        rows.desk.job.with_untracked(|job| match job.rows.last() {
            Some(Row::Shape(row)) => row.clone(),
            other => panic!("wanted: a shape\n   got: {other:?}"),
        })
    };
    rows.click("+ Shape").await;
    assert_eq!(rows.all(".row").len(), 3, "a card more");
    assert_eq!(shape(&rows).shape.kind(), "rectangle");
    let kind = rows.choice("Shape", 0);
    assert_eq!(kind.value(), "rectangle");
    rows.enter(&rows.field("Corner radius", 0), "50", "change")
        .await;
    let Shape::Rectangle { corner, .. } = shape(&rows).shape else {
        panic!("still a rectangle");
    };
    assert_eq!(corner, "50 mm", "a bare size takes the unit of the page");
    rows.enter(&rows.field("What it is", 0), "Border", "input")
        .await;
    rows.enter(&rows.field("Times", 2), "2", "change").await;
    let tube = rows.choice("Tube", 2);
    let other = demo::book().tubes[1].name.clone();
    rows.choose(&tube, &other).await;

    rows.choose(&kind, "star").await;
    let row = shape(&rows);
    assert_eq!(row.shape.kind(), "star");
    assert_eq!(
        (row.label.as_str(), row.tube, row.count),
        ("Border", other, 2),
        "what is not of the shape stays"
    );
    assert!(
        !rows.text().contains("Corner radius"),
        "no field of the other kind: {}",
        rows.text()
    );
    let field = rows.field("Points", 0);
    assert_eq!(field.value(), "5");
    rows.enter(&field, "some", "change").await;
    assert!(
        rows.text().contains("found “some”; 5 still counts"),
        "got: {}",
        rows.text()
    );
    rows.enter(&field, "7", "change").await;
    assert!(
        matches!(shape(&rows).shape, Shape::Star { points: 7, .. }),
        "{:?}",
        shape(&rows)
    );
    // The inner diameter is 200 mm at first: a sentence of the core stands under the row.
    rows.enter(&rows.field("Outer diameter", 0), "200 mm", "change")
        .await;
    assert!(
        rows.text().contains("Inner diameter must be less than"),
        "got: {}",
        rows.text()
    );

    rows.choose(&kind, "polyline").await;
    let points = "Points, each across, up from the lower left; part them by ;";
    let field = rows.field(points, 0);
    rows.enter(&field, "0, 0; 40, 30; 0, 0", "change").await;
    assert_eq!(
        field.value(),
        "0 mm, 0 mm; 40 mm, 30 mm; 0 mm, 0 mm",
        "units are written out"
    );
    rows.choose(&kind, "arc").await;
    rows.enter(&rows.field("Sweep, °", 0), "90°", "change")
        .await;
    rows.enter(&rows.field("Turned, °", 0), "-45", "change")
        .await;
    let row = shape(&rows);
    assert!(
        matches!(row.shape, Shape::Arc { sweep_degrees, .. } if sweep_degrees == 90.0)
            && row.rotation_degrees == -45.0,
        "{row:?}"
    );
    rows.desk.undo();
    rows.desk.undo();
    rows.desk.undo();
    settled().await;
    assert_eq!(kind.value(), "polyline", "undo is shown in the choice");
}

#[wasm_bindgen_test]
async fn a_place_shows_what_the_work_up_says() {
    let circuits = mount(|| view! { <Circuits/> });
    let worked = circuits.desk.results.get_untracked();
    assert_eq!(
        circuits.all(".card").len(),
        worked.circuits.len(),
        "a card for each circuit"
    );
    for circuit in &worked.circuits {
        assert!(
            circuits.text().contains(&circuit.supply.name),
            "{}",
            circuit.supply.name
        );
    }
    assert!(
        circuits.text().contains("High voltage kills."),
        "the caution stands there"
    );

    let glass = mount(|| view! { <Glass/> });
    assert_eq!(
        glass.all(".pieces tbody tr").len(),
        worked.takeoff.pieces.len(),
        "a line for each piece"
    );
    let price = mount(|| view! { <Price/> });
    assert!(
        price
            .text()
            .replace(' ', "")
            .contains(&worked.quote.total.round_dp(2).to_string()),
        "the total: {}",
        price.text()
    );
    let findings = mount(|| view! { <FindingsList/> });
    assert_eq!(
        findings.all(".finding").len(),
        worked.findings.len(),
        "every finding"
    );
    let book = mount(|| view! { <ShopBook/> });
    assert_eq!(
        book.all(".entries li").len(),
        demo::book().supplies.len(),
        "every supply of the book"
    );
}

#[wasm_bindgen_test]
async fn a_piece_tapped_on_the_picture_is_marked_and_told() {
    let sign = mount(|| view! { <Sign/> });
    let pieces = sign.all(".picture-piece");
    assert_eq!(pieces.len(), 28, "every piece can be tapped");
    tap(&pieces[4]).await;
    assert_eq!(
        sign.desk.piece.get_untracked(),
        Some(4),
        "the fifth is marked"
    );
    assert!(
        sign.text().contains("piece 5, row 1"),
        "got: {}",
        sign.text()
    );
    let [row, marked] = &sign.all(".picture-marks path")[..] else {
        panic!("marks for a row and for a piece");
    };
    assert_eq!(
        marked.get_attribute("d"),
        pieces[4].get_attribute("d"),
        "its strokes are marked"
    );
    tap(&pieces[4]).await;
    assert_eq!(sign.desk.piece.get_untracked(), None, "unmarked again");
    assert_eq!(marked.get_attribute("d"), None, "nothing is marked");
    assert_eq!(row.get_attribute("d"), None, "nor was a row");
}

/// A finger, or the mouse, at a place of the window.
fn pointer(on: &Element, what: &str, (x, y): (i32, i32)) {
    let init = PointerEventInit::new();
    init.set_bubbles(true);
    init.set_pointer_id(7);
    init.set_client_x(x);
    init.set_client_y(y);
    let event = PointerEvent::new_with_event_init_dict(what, &init).expect("an event");
    on.dispatch_event(&event).expect("it is heard");
}

/// A finger comes down and is lifted where it was, as the browser tells it.
async fn tap(on: &Element) {
    pointer(on, "pointerdown", (50, 50));
    pointer(on, "pointerup", (50, 50));
    click(on).await;
}

/// A click as the browser tells of it: with the place of the finger.
async fn click(on: &Element) {
    pointer(on, "click", (50, 50));
    settled().await;
}

#[wasm_bindgen_test]
async fn a_drag_moves_the_picture_draws_nothing_anew_and_is_no_tap() {
    let sign = mount(|| view! { <Sign/> });
    let picture = &sign.all(".picture-sign")[0];
    let placed = || picture.get_attribute("style").unwrap_or_default();
    let whole = placed();
    sign.click("Larger").await;
    let near = placed();
    assert_ne!(near, whole, "larger");
    let piece = &sign.all(".picture-piece")[4];
    pointer(piece, "pointerdown", (50, 50));
    pointer(piece, "pointermove", (54, 50));
    settled().await;
    assert_eq!(placed(), near, "a finger that trembles moves nothing");
    pointer(piece, "pointermove", (20, 50));
    settled().await;
    assert_ne!(placed(), near, "it is dragged");
    pointer(piece, "pointerup", (20, 50));
    click(piece).await;
    assert_eq!(sign.desk.piece.get_untracked(), None, "no tap");
    assert!(
        sign.all(".picture-piece")[4].is_same_node(Some(piece)),
        "the same strokes as before"
    );
    tap(piece).await;
    assert_eq!(sign.desk.piece.get_untracked(), Some(4), "the next is one");
    sign.click("Whole sign").await;
    assert_eq!(placed(), whole, "as it was");
}

#[wasm_bindgen_test]
async fn a_row_is_marked_on_the_picture_and_unmarked() {
    let sign = mount(|| view! { <Sign/> });
    sign.click("Mark row 2 on the picture").await;
    let strokes: String = sign.all(".picture-piece")[9..]
        .iter()
        .filter_map(|piece| piece.get_attribute("d"))
        .collect();
    let marked = || sign.all(".picture-marks path")[0].get_attribute("d");
    assert_eq!(marked(), Some(strokes), "all of its pieces and no other");
    assert_eq!(sign.desk.row.get_untracked(), Some(1));
    sign.click("Mark row 2 on the picture").await;
    assert_eq!(marked(), None, "unmarked");
    sign.click("Mark row 1 on the picture").await;
    sign.click("Remove row 1").await;
    assert_eq!(
        sign.desk.row.get_untracked(),
        None,
        "a row that is gone marks no other"
    );
}

#[wasm_bindgen_test]
async fn a_layout_is_typed_said_and_refused() {
    let rows = mount(|| view! { <Rows/> });
    let layout = |rows: &Mounted| {
        rows.desk.job.with_untracked(|job| match &job.rows[0] {
            Row::Text(row) => row.clone(),
            other => panic!("wanted: a text row\n   got: {other:?}"),
        })
    };
    let part: HtmlElement = rows.all(".layout")[0].clone().unchecked_into();
    assert!(!part.has_attribute("open"), "closed while all is as usual");
    let summary: HtmlElement = rows.all(".layout summary")[0].clone().unchecked_into();
    summary.click();
    // The browser opens it at once, and tells of it when it likes.
    for _ in 0..200 {
        if rows.all(".layout .field").is_empty() {
            sleep(10).await;
        }
    }
    let width = rows.field("Letter width, %", 0);
    rows.enter(&width, "120", "change").await;
    assert_eq!(layout(&rows).width_percent, 120.0);
    let turned = rows.field("Turned, degrees", 0);
    rows.enter(&turned, "askew", "change").await;
    assert!(
        rows.text().contains("found “askew”"),
        "got: {}",
        rows.text()
    );
    assert_eq!(layout(&rows).rotation_degrees, 0.0, "the job has the old");
    rows.enter(&turned, "\u{2212}15°", "change").await;
    assert_eq!(layout(&rows).rotation_degrees, -15.0);
    rows.choose(&rows.choice("Arc", 0), "radius").await;
    let radius = rows.field("Radius of the arc", 0);
    assert_ne!(radius.value(), "", "a length to begin with");
    rows.enter(&radius, "- 900", "change").await;
    assert_eq!(
        layout(&rows).arc,
        Some(Curve::Radius("-900 mm".to_owned())),
        "with its unit, and its minus"
    );
    let says = rows.all(".layout summary")[0].text_content();
    assert_eq!(
        says.as_deref(),
        Some("Layoutwidth 120 %, on an arc that hangs, turned -15°")
    );
    let text = rows.field("What it says", 0);
    rows.enter(&text, "TWO\nLINES", "input").await;
    assert_eq!(rows.first_text(), "TWO\nLINES", "a field of several lines");
    rows.choose(&rows.choice("Lines", 0), "left").await;
    assert_eq!(layout(&rows).align, Align::Left);
    rows.enter(&width, "", "change").await;
    assert_eq!(
        layout(&rows).width_percent,
        100.0,
        "left empty it is as usual"
    );
    assert_eq!(width.value(), "100", "and says so");
    for _ in 0..7 {
        rows.desk.undo();
    }
    settled().await;
    assert_eq!(rows.first_text(), "QUILLMOOR", "each was a step");
    assert_eq!(layout(&rows).arc, None);
}

/// Waits so many milliseconds.
async fn sleep(milliseconds: u64) {
    let (told, heard) = futures_channel::oneshot::channel();
    set_timeout(
        move || {
            // Nobody waiting any more is no trouble.
            let _ = told.send(());
        },
        core::time::Duration::from_millis(milliseconds),
    );
    heard.await.expect("time passes");
}

#[wasm_bindgen_test]
async fn a_job_opened_from_a_file_takes_the_desk_and_undo_gives_it_back() {
    let rows = mount(|| view! { <Rows/> });
    let opened = files::read(
        "word.json",
        tubewright::job::write(&demo::jobs()[0]).as_bytes(),
    );
    files::put(rows.desk, opened.expect("the demo job is read"));
    settled().await;
    assert_eq!(rows.first_text(), "Late", "the opened job");
    assert_eq!(rows.desk.place.get_untracked(), Where::Sign, "in sight");
    rows.desk.undo();
    settled().await;
    assert_eq!(rows.first_text(), "QUILLMOOR", "the one before");
}

/// Waits until all writes are told to be kept.
async fn stored(keeper: &Keeper, writes: Vec<Write>) {
    let (told, heard) = futures_channel::oneshot::channel();
    let told = std::cell::RefCell::new(Some(told));
    keeper.store(writes, move |standing| {
        if standing != Standing::Keeping
            && let Some(told) = told.borrow_mut().take()
        {
            // Nobody listening any more is no trouble.
            let _ = told.send(standing);
        }
    });
    assert_eq!(heard.await, Ok(Standing::Kept), "the store takes it");
}

#[wasm_bindgen_test]
async fn records_are_there_when_the_store_is_opened_again() {
    let write = |name: &str, value: Option<&str>| Write {
        name: name.to_owned(),
        value: value.map(str::to_owned),
    };
    let (keeper, _) = Keeper::open().await.expect("the browser has a store");
    stored(
        &keeper,
        vec![write("test-a", Some("1")), write("test-b", Some("2"))],
    )
    .await;
    stored(
        &keeper,
        vec![write("test-a", Some("ü 3")), write("test-b", None)],
    )
    .await;
    let (_, kept) = Keeper::open().await.expect("it opens again");
    assert_eq!(
        kept.get("test-a").map(String::as_str),
        Some("ü 3"),
        "the newest text"
    );
    assert_eq!(kept.get("test-b"), None, "what was removed is gone");
}

#[wasm_bindgen_test]
async fn every_joint_of_a_circuit_is_reached_by_buttons_and_keys_and_marked_on_the_sign() {
    let circuits = mount(|| view! { <Circuits/> });
    let worked = circuits.desk.results.get_untracked();
    let plot = circuits.all(".plot")[0].clone();
    let titled = plot.query_selector("svg").ok().flatten();
    let title = titled.and_then(|svg| svg.get_attribute("aria-label"));
    assert!(
        title.as_ref().is_some_and(|title| {
            title.starts_with("Along the string from lead A to lead B, 9 pieces")
        }),
        "got: {title:?}"
    );
    let said = || {
        let said = circuits.all(".joint-said")[0].text_content();
        said.unwrap_or_default().replace('\u{202f}', " ")
    };
    let rings = || circuits.all(".picture-joint circle:not(.under)").len();
    assert!(said().starts_with("No joint is marked"), "{}", said());
    assert_eq!(rings(), 0, "none on the sign");
    circuits.click("Next joint").await;
    assert!(said().starts_with("Lead A, at “Q”: "), "{}", said());
    assert_eq!(rings(), 1, "an electrode alone");
    circuits.click("Next joint").await;
    assert!(
        said().starts_with("Joint 1, between “Q” and “U”: "),
        "{}",
        said()
    );
    assert_eq!(rings(), 2, "the electrodes that meet there");
    for joint in 2..=9 {
        press_key(&plot, "ArrowRight").await;
        let marked = circuits.desk.joint.get_untracked();
        assert_eq!(marked, Some((0, joint)));
    }
    assert!(said().starts_with("Lead B, at “R”: "), "{}", said());
    press_key(&plot, "ArrowRight").await;
    let marked = circuits.desk.joint.get_untracked();
    assert_eq!(marked, Some((0, 9)), "there is no further");
    press_key(&plot, "Home").await;
    assert!(said().starts_with("Lead A"), "{}", said());

    // A tap near a dot marks its joint.
    let dot = circuits.all(".plot-joint")[4].get_bounding_client_rect();
    #[allow(clippy::cast_possible_truncation, reason = "pixels of a window")]
    let near = (dot.left() as i32 + 3, dot.top() as i32 - 20);
    pointer(&plot, "click", near);
    settled().await;
    assert_eq!(circuits.desk.joint.get_untracked(), Some((0, 4)));

    // Another circuit has joints of its own.
    circuits.desk.circuit.set(1);
    settled().await;
    assert!(said().starts_with("No joint is marked"), "{}", said());
    assert_eq!(
        circuits.all(".joints tbody tr").len(),
        worked.circuits[1].pieces.len() + 1,
        "each is in the table"
    );
}

async fn press_key(on: &Element, key: &str) {
    let init = web_sys::KeyboardEventInit::new();
    init.set_bubbles(true);
    init.set_key(key);
    let event = web_sys::KeyboardEvent::new_with_keyboard_event_init_dict("keydown", &init);
    on.dispatch_event(&event.expect("an event"))
        .expect("it is heard");
    settled().await;
}
