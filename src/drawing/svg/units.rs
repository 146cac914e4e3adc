//! Lengths with their units, and the viewBox.

use kurbo::{Affine, Size, Vec2};
use svgtypes::{Align, AspectRatio, Number, ViewBox};

/// px to the inch, by CSS.
const PX_PER_INCH: f64 = 96.0;
/// Millimetres in a px.
pub(super) const MM_PER_PX: f64 = 25.4 / PX_PER_INCH;

/// What a length in percent is a part of.
#[derive(Clone, Copy)]
pub(super) enum Along {
    Width,
    Height,
    /// Neither: the diagonal over the root of two, by the book.
    Both,
}

/// A length as it is written.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Length {
    /// A bare number.
    Bare(f64),
    /// In px, from a unit that has a size.
    Px(f64),
    Percent(f64),
}

/// Why a length cannot be used, as the rest of a sentence.
pub(super) type Why = &'static str;

impl Length {
    pub(super) fn read(text: &str) -> Result<Self, Why> {
        let text = text.trim();
        // No number ends with a letter, so what letters are at the end are the unit.
        let number = text.trim_end_matches(|c: char| c.is_ascii_alphabetic() || c == '%');
        let unit = &text[number.len()..];
        let number = number
            .parse()
            .ok()
            .map(|Number(number)| number)
            .filter(|number| number.is_finite())
            .ok_or("is not a length")?;
        let px = |in_inch: f64| Ok(Self::Px(number * PX_PER_INCH / in_inch));
        match unit.to_ascii_lowercase().as_str() {
            "" => Ok(Self::Bare(number)),
            "px" => Ok(Self::Px(number)),
            "%" => Ok(Self::Percent(number)),
            "in" => px(1.0),
            "cm" => px(2.54),
            "mm" => px(25.4),
            "q" => px(101.6),
            "pt" => px(72.0),
            "pc" => px(6.0),
            "em" | "ex" | "ch" | "rem" => Err("is measured by a font"),
            _ => Err("is not a length"),
        }
    }

    /// In units of the drawing.
    pub(super) fn units(self, along: Along, page: Option<Size>) -> Result<f64, Why> {
        match self {
            Self::Bare(units) | Self::Px(units) => Ok(units),
            Self::Percent(percent) => {
                let page = page.ok_or("is a part of a page whose size is not given")?;
                let whole = match along {
                    Along::Width => page.width,
                    Along::Height => page.height,
                    Along::Both => page.width.hypot(page.height) / std::f64::consts::SQRT_2,
                };
                Ok(percent / 100.0 * whole)
            }
        }
    }
}

/// The viewBox of an element; none when it cannot be read or has no area.
pub(super) fn view_box(text: &str) -> Option<ViewBox> {
    let found: ViewBox = text.parse().ok()?;
    let whole = [found.x, found.y, found.w, found.h]
        .iter()
        .all(|number| number.is_finite());
    (whole && found.w > 0.0 && found.h > 0.0).then_some(found)
}

/// How a viewBox is laid into a page.
pub(super) fn aspect(text: Option<&str>) -> Option<AspectRatio> {
    text.map_or(Some(AspectRatio::default()), |text| text.parse().ok())
}

/// Sizes of one unit of the viewBox on the page.
pub(super) fn scales(view: ViewBox, page: Size, aspect: AspectRatio) -> Vec2 {
    let (x, y) = (page.width / view.w, page.height / view.h);
    match (aspect.align, aspect.slice) {
        (Align::None, _) => Vec2::new(x, y),
        (_, true) => Vec2::new(x.max(y), x.max(y)),
        (_, false) => Vec2::new(x.min(y), x.min(y)),
    }
}

/// From the viewBox to the page.
pub(super) fn fit(view: ViewBox, page: Size, aspect: AspectRatio) -> Affine {
    let scale = scales(view, page, aspect);
    let left = page.width - view.w * scale.x;
    let below = page.height - view.h * scale.y;
    let x = match aspect.align {
        Align::None | Align::XMinYMin | Align::XMinYMid | Align::XMinYMax => 0.0,
        Align::XMidYMin | Align::XMidYMid | Align::XMidYMax => left / 2.0,
        Align::XMaxYMin | Align::XMaxYMid | Align::XMaxYMax => left,
    };
    let y = match aspect.align {
        Align::None | Align::XMinYMin | Align::XMidYMin | Align::XMaxYMin => 0.0,
        Align::XMinYMid | Align::XMidYMid | Align::XMaxYMid => below / 2.0,
        Align::XMinYMax | Align::XMidYMax | Align::XMaxYMax => below,
    };
    Affine::translate((x - view.x * scale.x, y - view.y * scale.y))
        * Affine::scale_non_uniform(scale.x, scale.y)
}
