//! Fingers and mouse on the picture: what they do to the look, and what is a tap.

use kurbo::{Point, Vec2};

/// Within so many pixels a finger has not moved: it taps.
const STILL_PX: f64 = 8.0;

/// What is down on the picture. Positions are pixels from the picture's left upper corner.
#[derive(Debug, Clone, Default, PartialEq)]
pub(super) struct Fingers {
    down: Vec<Finger>,
    dragging: bool,
}

#[derive(Debug, Clone, Copy, PartialEq)]
struct Finger {
    number: i32,
    began: Point,
    at: Point,
}

/// What a movement asks for: nearer by a factor about a point, then moved.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Drag {
    pub(super) nearer: f64,
    pub(super) about: Point,
    pub(super) by: Vec2,
}

impl Fingers {
    /// A finger comes down. With the first, everything begins anew.
    pub(super) fn down(&mut self, number: i32, at: Point) {
        self.lift(number);
        if self.down.is_empty() {
            self.dragging = false;
        }
        // A third finger is a hand that rests on the glass.
        if self.down.len() < 2 {
            self.down.push(Finger {
                number,
                began: at,
                at,
            });
        }
        // Two fingers never tap.
        self.dragging |= self.down.len() == 2;
    }

    /// A finger moves; None as long as that may still be a tap, or it never came down here.
    pub(super) fn moved(&mut self, number: i32, to: Point) -> Option<Drag> {
        let place = self
            .down
            .iter()
            .position(|finger| finger.number == number)?;
        let other = self.down.get(1 - place.min(1)).map(|finger| finger.at);
        let finger = self.down.get_mut(place)?;
        self.dragging |= (to - finger.began).hypot() > STILL_PX;
        if !self.dragging {
            return None;
        }
        let from = core::mem::replace(&mut finger.at, to);
        Some(match other {
            // Two fingers hold two places of the sign: they part them and carry them.
            Some(other) => Drag {
                nearer: ((to - other).hypot() / (from - other).hypot().max(1.0)).max(0.01),
                about: from.midpoint(other),
                by: to.midpoint(other) - from.midpoint(other),
            },
            None => Drag {
                nearer: 1.0,
                about: to,
                by: to - from,
            },
        })
    }

    /// A finger is lifted, or the browser took it over for scrolling.
    pub(super) fn lift(&mut self, number: i32) {
        self.down.retain(|finger| finger.number != number);
    }

    /// Whether any is down.
    pub(super) fn any(&self) -> bool {
        !self.down.is_empty()
    }

    /// Whether what is going on, or ended last, is a drag and no tap.
    pub(super) fn dragged(&self) -> bool {
        self.dragging
    }

    /// The drag is over and done with: what comes next is told anew.
    pub(super) fn forget_drag(&mut self) {
        self.dragging &= self.any();
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn at(x: f64, y: f64) -> Point {
        Point::new(x, y)
    }

    #[test]
    fn a_finger_that_trembles_taps_and_one_that_moves_drags() {
        let mut fingers = Fingers::default();
        fingers.down(1, at(100.0, 50.0));
        assert_eq!(fingers.moved(1, at(104.0, 53.0)), None, "it trembles");
        fingers.lift(1);
        assert!(!fingers.dragged(), "a tap");
        fingers.down(1, at(100.0, 50.0));
        fingers.moved(1, at(104.0, 50.0));
        let drag = fingers.moved(1, at(112.0, 50.0)).expect("it moves");
        // All the way from where it came down, so that the place stays under the finger.
        assert_eq!((drag.nearer, drag.by), (1.0, Vec2::new(12.0, 0.0)));
        let back = fingers
            .moved(1, at(101.0, 50.0))
            .expect("still the same drag");
        assert_eq!(
            back.by,
            Vec2::new(-11.0, 0.0),
            "though near to where it began"
        );
        fingers.lift(1);
        assert!(fingers.dragged(), "no tap at its end");
        fingers.forget_drag();
        assert!(!fingers.dragged(), "the next is told anew");
    }

    #[test]
    fn two_fingers_part_what_they_hold() {
        let mut fingers = Fingers::default();
        fingers.down(1, at(100.0, 100.0));
        fingers.down(2, at(200.0, 100.0));
        let drag = fingers.moved(2, at(300.0, 100.0)).expect("a pinch");
        assert_eq!(drag.nearer, 2.0, "twice as far apart");
        assert_eq!(drag.about, at(150.0, 100.0), "about their middle");
        assert_eq!(drag.by, Vec2::new(50.0, 0.0), "which is carried along");
        // The place under the finger that stayed has not moved: out from the middle, and carried.
        let still = drag.about + (at(100.0, 100.0) - drag.about) * drag.nearer + drag.by;
        assert_eq!(still, at(100.0, 100.0));
        let drag = fingers.moved(1, at(200.0, 100.0)).expect("the other one");
        assert_eq!(drag.nearer, 0.5, "nearer together");
        fingers.lift(2);
        let drag = fingers.moved(1, at(210.0, 100.0)).expect("one is left");
        assert_eq!((drag.nearer, drag.by), (1.0, Vec2::new(10.0, 0.0)));
        fingers.lift(1);
        assert!(fingers.dragged() && !fingers.any(), "a pinch is no tap");
    }

    #[test]
    fn what_never_came_down_and_a_third_finger_do_nothing() {
        let mut fingers = Fingers::default();
        assert_eq!(fingers.moved(7, at(50.0, 50.0)), None, "a mouse passing by");
        for number in 1..=3 {
            fingers.down(number, at(10.0 * f64::from(number), 0.0));
        }
        assert_eq!(fingers.moved(3, at(500.0, 0.0)), None, "a resting hand");
        let on_one_spot = fingers.moved(1, at(20.0, 0.0)).expect("a pinch");
        assert!(on_one_spot.nearer.is_finite(), "{on_one_spot:?}");
        let from_one_spot = fingers.moved(1, at(90.0, 0.0)).expect("a pinch");
        assert!(from_one_spot.nearer.is_finite(), "{from_one_spot:?}");
    }
}
