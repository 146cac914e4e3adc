//! How large the picture is, and its scale bar.

use kurbo::Rect;
use tubewright::measure::{Length, Units, length_shown};

/// Room kept free around the sign, in pixels; below it stands the scale bar.
pub(super) const AROUND_PX: f64 = 22.0;
const BELOW_PX: f64 = 58.0;

/// The picture's size and the part of the sign's plane it shows.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Framed {
    pub(super) height_px: f64,
    pub(super) mm_per_px: f64,
    pub(super) view: Rect,
}

/// Fits a sign into a picture `width_px` wide and at most `most_px` high.
pub(super) fn framed(bounds: Rect, width_px: f64, most_px: f64) -> Framed {
    let inner_px = (width_px - 2.0 * AROUND_PX).max(50.0);
    let inner_most_px = (most_px - AROUND_PX - BELOW_PX).max(50.0);
    let (width, height) = (bounds.width().max(10.0), bounds.height().max(10.0));
    let mm_per_px = (width / inner_px).max(height / inner_most_px);
    let height_px = (height / mm_per_px + AROUND_PX + BELOW_PX).max(180.0_f64.min(most_px));
    let free_px = height_px - AROUND_PX - BELOW_PX - height / mm_per_px;
    let x0 = bounds.center().x - width_px / 2.0 * mm_per_px;
    let y0 = bounds.center().y - height / 2.0 - (AROUND_PX + free_px / 2.0) * mm_per_px;
    let view = Rect::new(
        x0,
        y0,
        x0 + width_px * mm_per_px,
        y0 + height_px * mm_per_px,
    );
    Framed {
        height_px,
        mm_per_px,
        view,
    }
}

/// A scale bar of a round length, at most `most_mm` long, with its caption.
pub(super) fn bar(most_mm: f64, units: Units) -> (Length, String) {
    const METRIC_MM: [f64; 14] = [
        1.0, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0, 200.0, 500.0, 1e3, 2e3, 5e3, 1e4, 2e4,
    ];
    const INCHES: [f64; 12] = [
        0.25, 0.5, 1.0, 2.0, 3.0, 6.0, 12.0, 24.0, 60.0, 120.0, 240.0, 600.0,
    ];
    let longest = |sizes: &mut dyn Iterator<Item = f64>| {
        sizes
            .take_while(|&size| size <= most_mm)
            .last()
            .unwrap_or(1.0)
    };
    let mm = match units {
        Units::Metric => longest(&mut METRIC_MM.into_iter()),
        Units::FeetInches => longest(&mut INCHES.into_iter().map(|inches| inches * 25.4)),
    };
    let length = Length::from_mm(mm);
    (length, length_shown(length, units))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_whole_sign_is_inside_with_room_around() {
        for (width, height) in [
            (1000.0, 150.0),
            (300.0, 2000.0),
            (60_000.0, 500.0),
            (0.0, 0.0),
        ] {
            let sign = Rect::new(-width / 2.0, 40.0, width / 2.0, 40.0 + height);
            let found = framed(sign, 1060.0, 440.0);
            assert!(
                found.height_px <= 440.0 + 1e-9,
                "{width} x {height}: {found:?}"
            );
            let px = |mm: f64| mm / found.mm_per_px;
            assert!(
                px(sign.x0 - found.view.x0) >= AROUND_PX - 1e-6,
                "left of {width} x {height}"
            );
            assert!(
                px(found.view.x1 - sign.x1) >= AROUND_PX - 1e-6,
                "right of {width} x {height}"
            );
            assert!(
                px(sign.y0 - found.view.y0) >= AROUND_PX - 1e-6,
                "above {width} x {height}"
            );
            assert!(
                px(found.view.y1 - sign.y1) >= BELOW_PX - 1e-6,
                "below {width} x {height}"
            );
            let aspect = found.view.width() / found.view.height();
            assert!(
                (aspect - 1060.0 / found.height_px).abs() < 1e-9,
                "drawn without distortion"
            );
        }
    }

    #[test]
    fn the_scale_bar_is_round_and_fits() {
        assert_eq!(bar(720.0, Units::Metric).1, "500 mm");
        assert_eq!(bar(720.0, Units::FeetInches).1, "2 ft 0 in");
        assert_eq!(bar(80.0, Units::FeetInches).0.mm(), 3.0 * 25.4);
        assert_eq!(bar(0.2, Units::Metric).0.mm(), 1.0, "never nothing");
    }
}
