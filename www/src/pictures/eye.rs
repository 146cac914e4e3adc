//! How near the picture is looked at and which part of it: plain arithmetic in pixels.
//!
//! A place of the picture is where it lies when the whole sign is fitted in; a place on the screen is
//! where it lies as it is looked at now. Both are counted from the picture's left upper corner.

use kurbo::{Affine, Point, Rect, Size, Vec2};

use super::scale::{AROUND_PX, Framed};

/// The nearest look: one pixel is this much of the sign.
const NEAREST_MM: f64 = 0.2;
/// However small the sign, it can be looked at so many times nearer, and never more than so many.
const TIMES: (f64, f64) = (4.0, 64.0);

/// The part of the picture that is looked at.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Eye {
    /// How many times larger than fitted in; 1 is the whole sign.
    times: f64,
    /// How far the middle of the sign lies from where it lies in the whole.
    aside: Vec2,
}

/// What the eye moves in.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Room {
    middle: Point,
    sign: Size,
    most: f64,
}

impl Room {
    /// The room of a sign with this box, fitted in so.
    pub(super) fn of(frame: &Framed, bounds: Rect) -> Self {
        let px = frame.mm_per_px;
        let middle = (bounds.center() - frame.view.origin()) / px;
        Self {
            middle: middle.to_point(),
            sign: (bounds.size() / px) + Size::new(2.0 * AROUND_PX, 2.0 * AROUND_PX),
            most: (px / NEAREST_MM).clamp(TIMES.0, TIMES.1),
        }
    }
}

impl Eye {
    /// On the whole sign.
    pub(super) const WHOLE: Self = Self {
        times: 1.0,
        aside: Vec2::ZERO,
    };

    /// How many times larger than fitted in everything is seen.
    pub(super) const fn times(self) -> f64 {
        self.times
    }

    /// Whether it can be looked at from nearer.
    pub(super) fn can_near(self, room: &Room) -> bool {
        self.times < room.most
    }

    /// Whether anything but the whole is looked at.
    pub(super) fn is_near(self) -> bool {
        self.times > 1.0
    }

    /// Nearer by a factor, further off below 1. What lies under `at` on the screen stays there, as
    /// long as that is the sign and the sign is not lost.
    pub(super) fn nearer(self, by: f64, at: Point, room: &Room) -> Self {
        let times = (self.times * by).clamp(1.0, room.most);
        let by = times / self.times;
        Self {
            times,
            aside: self.aside * by + (by - 1.0) * (room.middle - at),
        }
        .within(room)
    }

    /// With everything moved over the screen.
    pub(super) fn moved(self, by: Vec2, room: &Room) -> Self {
        Self {
            aside: self.aside + by,
            ..self
        }
        .within(room)
    }

    /// The nearest to it that has not lost the sign: from twice the size on, what lies in the middle
    /// of the whole may be any part of the sign, and nothing beside it; nearer to the whole the sign
    /// lies nearer to its place, until it is there.
    pub(super) fn within(self, room: &Room) -> Self {
        let times = if self.times.is_finite() {
            self.times.clamp(1.0, room.most)
        } else {
            1.0
        };
        let free = (times - 1.0).min(1.0) * times / 2.0;
        let inside = |aside: f64, sign: f64| {
            let most = free * sign;
            if aside.is_finite() {
                aside.clamp(-most, most)
            } else {
                0.0
            }
        };
        Self {
            times,
            aside: Vec2::new(
                inside(self.aside.x, room.sign.width),
                inside(self.aside.y, room.sign.height),
            ),
        }
    }

    /// The same part of the sign, when the sign is turned to its other side.
    pub(super) fn turned_over(self) -> Self {
        Self {
            aside: Vec2::new(-self.aside.x, self.aside.y),
            ..self
        }
    }

    /// Whether any of a part of the picture is on a screen of this size.
    pub(super) fn sees(self, part: Rect, screen: Size, room: &Room) -> bool {
        let seen = Affine::translate(self.corner(room).to_vec2()) * Affine::scale(self.times);
        seen.transform_rect_bbox(part).overlaps(screen.to_rect())
    }

    /// Where the picture's left upper corner lies on the screen.
    pub(super) fn corner(self, room: &Room) -> Point {
        room.middle + self.aside - self.times * room.middle.to_vec2()
    }
}

#[cfg(test)]
mod tests {
    use super::super::scale::framed;
    use super::*;

    /// Where a place of the picture lies on the screen.
    fn seen(eye: Eye, room: &Room, place: Point) -> Point {
        eye.corner(room) + eye.times() * place.to_vec2()
    }

    /// The place of the picture that lies there on the screen.
    fn under(eye: Eye, room: &Room, at: Point) -> Point {
        ((at - eye.corner(room)) / eye.times()).to_point()
    }

    fn close(a: Point, b: Point) -> bool {
        (a - b).hypot() < 1e-6
    }

    /// Rooms of signs small and large, wide, high and of no height, with their boxes in the picture.
    fn rooms() -> Vec<(Room, Rect)> {
        [
            (1000.0, 150.0),
            (300.0, 2000.0),
            (60_000.0, 500.0),
            (900.0, 0.0),
        ]
        .into_iter()
        .map(|(width, height)| {
            let bounds = Rect::new(-200.0, 30.0, width - 200.0, 30.0 + height);
            let frame = framed(bounds, 790.0, 440.0);
            let px = |at: Point| ((at - frame.view.origin()) / frame.mm_per_px).to_point();
            let sign = Rect::from_points(px(bounds.origin()), px(Point::new(bounds.x1, bounds.y1)));
            (Room::of(&frame, bounds), sign)
        })
        .collect()
    }

    /// Some points of a box, its corners among them.
    fn points(sign: Rect) -> impl Iterator<Item = Point> {
        [0.0, 0.1, 0.5, 0.77, 1.0].into_iter().flat_map(move |x| {
            [0.0, 0.3, 1.0].map(|y| sign.origin() + Vec2::new(x * sign.width(), y * sign.height()))
        })
    }

    #[test]
    fn what_is_under_the_finger_stays_there() {
        for (room, sign) in rooms() {
            for first in points(sign) {
                // From the whole, then again from there on any part of the sign.
                let eye = Eye::WHOLE.nearer(1.7, first, &room);
                assert!(
                    close(seen(eye, &room, first), first),
                    "{first:?} in {room:?}"
                );
                for place in points(sign) {
                    let at = seen(eye, &room, place);
                    for by in [1.001, 1.5, 2.3] {
                        let now = eye.nearer(by, at, &room);
                        assert!(now.times() > eye.times(), "nearer");
                        let stayed = under(now, &room, at);
                        assert!(close(stayed, place), "{place:?} {stayed:?} in {room:?}");
                    }
                }
            }
        }
    }

    #[test]
    fn it_is_never_smaller_than_the_whole_nor_nearer_than_the_glass_shows_anything() {
        for (room, sign) in rooms() {
            let far = Eye::WHOLE.nearer(0.01, sign.origin(), &room);
            assert_eq!(far, Eye::WHOLE, "the whole is the furthest: {room:?}");
            let near = Eye::WHOLE.nearer(1e9, sign.center(), &room);
            assert_eq!(near.times(), room.most, "{room:?}");
            assert!(!near.can_near(&room) && far.can_near(&room), "{room:?}");
            assert!((4.0..=64.0).contains(&room.most), "{room:?}");
            // And back, from wherever it was.
            let back = near.moved(Vec2::new(333.0, -77.0), &room).nearer(
                1e-9,
                Point::new(1.0, 2.0),
                &room,
            );
            assert_eq!(back, Eye::WHOLE, "{room:?}");
        }
    }

    #[test]
    fn no_push_loses_the_sign() {
        for (room, sign) in rooms() {
            for times in [1.0, 1.2, 2.0, 9.0, 64.0] {
                for push in [
                    Vec2::new(1e7, 0.0),
                    Vec2::new(-1e7, 1e7),
                    Vec2::new(3.0, -1e7),
                    Vec2::new(f64::NAN, f64::INFINITY),
                ] {
                    let eye = Eye::WHOLE.nearer(times, sign.center(), &room);
                    let eye = eye.moved(push, &room);
                    // The middle of the whole still shows a part of the sign, or the edge around it.
                    let shown = under(eye, &room, room.middle);
                    let around = sign.inflate(AROUND_PX + 1e-6, AROUND_PX + 1e-6);
                    assert!(
                        around.contains(shown),
                        "{shown:?} of {sign:?}, {times} times"
                    );
                    if times == 1.0 {
                        assert_eq!(eye, Eye::WHOLE, "the whole lies where it lies");
                    }
                }
            }
        }
    }

    #[test]
    fn a_push_within_the_sign_is_followed_to_the_pixel() {
        let (room, sign) = rooms().remove(0);
        let eye = Eye::WHOLE.nearer(4.0, sign.center(), &room);
        let place = Point::new(sign.x0 + 5.0, sign.y0 + 5.0);
        let before = seen(eye, &room, place);
        let push = Vec2::new(-37.0, 12.5);
        let after = seen(eye.moved(push, &room), &room, place);
        assert!(close(after, before + push), "{before:?} {after:?}");
    }

    #[test]
    fn what_was_pushed_off_the_screen_is_not_seen() {
        let (room, sign) = rooms().remove(0);
        let screen = Size::new(790.0, 220.0);
        let first = Rect::from_origin_size(sign.origin(), (60.0, 60.0));
        assert!(Eye::WHOLE.sees(first, screen, &room), "the whole");
        let eye = Eye::WHOLE.nearer(6.0, sign.center(), &room);
        assert!(!eye.sees(first, screen, &room), "the middle alone");
        let pushed = eye.moved(Vec2::new(1e5, 1e5), &room);
        assert!(pushed.sees(first, screen, &room), "the left upper end");
    }

    #[test]
    fn turned_over_the_same_letters_are_in_sight() {
        let (room, sign) = rooms().remove(0);
        let eye = Eye::WHOLE
            .nearer(5.0, sign.center(), &room)
            .moved(Vec2::new(300.0, 20.0), &room);
        // A place of the sign lies, from the back, as far on the other side of its middle.
        let mirrored = |at: Point| Point::new(2.0 * room.middle.x - at.x, at.y);
        for place in points(sign) {
            let front = seen(eye, &room, place);
            let back = seen(eye.turned_over(), &room, mirrored(place));
            assert!(
                close(back, mirrored(front)),
                "{place:?}: {front:?} {back:?}"
            );
        }
        assert_eq!(eye.turned_over().turned_over(), eye, "and back");
    }
}
