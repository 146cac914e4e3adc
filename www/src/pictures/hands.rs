//! Hands on the picture: fingers, mouse, wheel and keys turned into a look at the sign.
//!
//! Only the look changes, never what is drawn: the picture moves as one, however many letters it has.

use core::time::Duration;

use kurbo::{Point, Rect, Size, Vec2};
use leptos::html::Div;
use leptos::leptos_dom::helpers::TimeoutHandle;
use leptos::prelude::*;
use wasm_bindgen::JsCast;
use web_sys::{Element, KeyboardEvent, MouseEvent, PointerEvent, WheelEvent};

use super::eye::{Eye, Room};
use super::fingers::Fingers;

/// One press of a button or key.
const STEP: f64 = 1.5;
/// An arrow key moves by this share of the picture.
const ARROW: f64 = 0.15;
/// How much nearer for each pixel the wheel turns; a pinch on a touchpad counts in smaller pixels.
const WHEEL: f64 = 0.0015;
const PINCH: f64 = 0.01;
/// Pixels a wheel turns that counts in lines.
const LINE_PX: f64 = 16.0;
/// So long after the last turn of the wheel the picture rests.
const REST: Duration = Duration::from_millis(180);

/// The look at a sign and what changes it.
#[derive(Debug, Clone, Copy)]
pub(super) struct Hands {
    /// The element all of this happens on.
    pub(super) on: NodeRef<Div>,
    room: Memo<Room>,
    eye: RwSignal<Eye>,
    /// The look, which never loses the sign though that may change.
    pub(super) seen: Memo<Eye>,
    /// How many times larger everything was at the last rest: lines that keep their width on the
    /// screen are drawn anew for that, and not at every step of a pinch.
    pub(super) rest: RwSignal<f64>,
    /// Whether the size is changing right now.
    pub(super) sizing: RwSignal<bool>,
    /// Whether the sign is being dragged right now.
    pub(super) dragging: RwSignal<bool>,
    fingers: StoredValue<Fingers>,
    resting: StoredValue<Option<TimeoutHandle>>,
}

impl Hands {
    /// Hands on an element that shows a sign in this room, looking at the whole of it.
    pub(super) fn new(on: NodeRef<Div>, room: Memo<Room>) -> Self {
        let eye = RwSignal::new(Eye::WHOLE);
        let seen = Memo::new(move |_| eye.get().within(&room.get()));
        let hands = Self {
            on,
            room,
            eye,
            seen,
            rest: RwSignal::new(1.0),
            sizing: RwSignal::new(false),
            dragging: RwSignal::new(false),
            fingers: StoredValue::new(Fingers::default()),
            resting: StoredValue::new(None),
        };
        // A sign that shrinks can change how near the look is.
        Effect::new(move |_| {
            room.track();
            if !hands.sizing.get_untracked() {
                hands.settle();
            }
        });
        hands
    }

    /// Where the picture's corner lies and how many times larger it is.
    pub(super) fn placed(&self) -> (Point, f64) {
        let eye = self.seen.get();
        (eye.corner(&self.room.get()), eye.times())
    }

    /// Whether it can be looked at from nearer.
    pub(super) fn can_near(&self) -> bool {
        self.seen.get().can_near(&self.room.get())
    }

    /// A step nearer, about the middle of the picture.
    pub(super) fn nearer(&self) {
        self.step(STEP);
    }

    /// A step further off.
    pub(super) fn further(&self) {
        self.step(1.0 / STEP);
    }

    /// The whole sign again.
    pub(super) fn whole(&self) {
        self.look(|_, _| Eye::WHOLE);
        self.settle();
    }

    /// The whole sign again, if nothing of this part of the picture is in sight.
    pub(super) fn bring(&self, part: Rect) {
        let (width, height) = self.size();
        let room = self.room.get_untracked();
        let eye = self.seen.get_untracked();
        if !eye.sees(part, Size::new(width, height), &room) {
            self.whole();
        }
    }

    /// Looks at the same letters from the other side.
    pub(super) fn turn_over(&self) {
        self.look(|eye, _| eye.turned_over());
    }

    /// A finger or the mouse comes down.
    pub(super) fn down(&self, event: &PointerEvent) {
        if event.pointer_type() == "mouse" && event.button() != 0 {
            return;
        }
        let at = self.place(event);
        self.fingers
            .update_value(|fingers| fingers.down(event.pointer_id(), at));
    }

    /// It moves.
    pub(super) fn moved(&self, event: &PointerEvent) {
        let at = self.place(event);
        let drag = self
            .fingers
            .try_update_value(|fingers| fingers.moved(event.pointer_id(), at))
            .flatten();
        let Some(drag) = drag else { return };
        if !self.dragging.get_untracked() {
            self.dragging.set(true);
        }
        if let Some(element) = self.on.get_untracked() {
            // Caught now and not when it came down, or a tap would not reach the piece it is on. A
            // finger that has gone meanwhile cannot be caught and need not be.
            let _ = element.set_pointer_capture(event.pointer_id());
        }
        if drag.nearer != 1.0 && !self.sizing.get_untracked() {
            self.sizing.set(true);
        }
        self.look(|eye, room| {
            eye.nearer(drag.nearer, drag.about, room)
                .moved(drag.by, room)
        });
    }

    /// It is lifted, or the browser took it over.
    pub(super) fn lifted(&self, event: &PointerEvent) {
        self.fingers
            .update_value(|fingers| fingers.lift(event.pointer_id()));
        if self.fingers.with_value(Fingers::any) {
            return;
        }
        self.dragging.set(false);
        self.settle();
        // The browser tells of a click, if at all, before the next frame.
        let fingers = self.fingers;
        request_animation_frame(move || {
            fingers.try_update_value(Fingers::forget_drag);
        });
    }

    /// Whether a click is a tap and does not end a drag.
    pub(super) fn is_tap(&self) -> bool {
        !self.fingers.with_value(Fingers::dragged)
    }

    /// The number of what a click taps, `data-piece` or `data-part`: none where it ends a drag or lies
    /// on nothing of the kind.
    ///
    /// This is the one place where a tap on the picture is told from everything else.
    pub(super) fn tapped(&self, event: &MouseEvent, what: &str) -> Option<usize> {
        if !self.is_tap() {
            return None;
        }
        let on = event.target()?.dyn_into::<Element>().ok()?;
        on.get_attribute(what)?.parse().ok()
    }

    /// The wheel turns. On the whole sign it goes on scrolling the page where it asks for less.
    pub(super) fn turned(&self, event: &WheelEvent) {
        let lines = event.delta_mode() == WheelEvent::DOM_DELTA_LINE;
        let turned = event.delta_y() * if lines { LINE_PX } else { 1.0 };
        let by = (-turned * if event.ctrl_key() { PINCH } else { WHEEL }).exp();
        let before = self.seen.get_untracked();
        if !before.is_near() && by <= 1.0 && !event.ctrl_key() {
            return;
        }
        event.prevent_default();
        let at = self.place(event);
        if !self.sizing.get_untracked() {
            self.sizing.set(true);
        }
        self.look(|eye, room| eye.nearer(by, at, room));
        let hands = *self;
        let later = set_timeout_with_handle(move || hands.settle(), REST).ok();
        let before = self
            .resting
            .try_update_value(|now| core::mem::replace(now, later));
        if let Some(before) = before.flatten() {
            before.clear();
        }
    }

    /// A key is pressed while the picture has the keyboard.
    pub(super) fn key(&self, event: &KeyboardEvent) {
        if event.ctrl_key() || event.meta_key() || event.alt_key() {
            return;
        }
        let before = self.seen.get_untracked();
        match event.key().as_str() {
            "+" | "=" => self.nearer(),
            "-" | "\u{2212}" => self.further(),
            "0" | "Home" => self.whole(),
            "ArrowLeft" => self.arrow(1.0, 0.0),
            "ArrowRight" => self.arrow(-1.0, 0.0),
            "ArrowUp" => self.arrow(0.0, 1.0),
            "ArrowDown" => self.arrow(0.0, -1.0),
            _ => return,
        }
        // Where there is nothing further to see, arrows scroll the page as ever.
        if self.seen.get_untracked() != before {
            event.prevent_default();
        }
    }

    fn arrow(&self, right: f64, down: f64) {
        let (width, height) = self.size();
        let by = Vec2::new(ARROW * right * width, ARROW * down * height);
        self.look(|eye, room| eye.moved(by, room));
    }

    fn step(&self, by: f64) {
        let (width, height) = self.size();
        let middle = Point::new(width / 2.0, height / 2.0);
        self.look(|eye, room| eye.nearer(by, middle, room));
        self.settle();
    }

    fn look(&self, at: impl FnOnce(Eye, &Room) -> Eye) {
        let (now, room) = (self.seen.get_untracked(), self.room.get_untracked());
        self.eye.set(at(now, &room));
    }

    /// Comes to rest: lines take the width that belongs to this size.
    fn settle(&self) {
        let Some(eye) = self.seen.try_get_untracked() else {
            return;
        };
        self.sizing.try_set(false);
        if self.rest.get_untracked() != eye.times() {
            self.rest.set(eye.times());
        }
    }

    /// Where an event is, from the picture's left upper corner.
    pub(super) fn place(&self, event: &MouseEvent) -> Point {
        let corner = self.on.get_untracked().map_or(Vec2::ZERO, |element| {
            let around = element.get_bounding_client_rect();
            Vec2::new(around.left(), around.top())
        });
        Point::new(f64::from(event.client_x()), f64::from(event.client_y())) - corner
    }

    fn size(&self) -> (f64, f64) {
        self.on.get_untracked().map_or((0.0, 0.0), |element| {
            (
                f64::from(element.client_width()),
                f64::from(element.client_height()),
            )
        })
    }
}
