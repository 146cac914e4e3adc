//! The parts of the picture as SVG. Their paths are made once for each work-up; how wide lines are
//! follows how near they are looked at.

use leptos::prelude::*;

use super::scene::{Badge, Layer};

/// The thinnest a tube is drawn, so that a large sign is still seen.
const LEAST_PX: f64 = 2.4;
/// How wide a plain line is.
const PLAIN_PX: f64 = 1.8;
/// How wide the band around glass is that takes a tap.
pub(super) const TAP_PX: f64 = 26.0;
/// How wide the band is that marks it.
pub(super) const MARK_PX: f64 = 15.0;

/// What widths hang on.
#[derive(Debug, Clone, Copy)]
pub(super) struct Pen {
    /// Millimetres of the sign in a pixel, as it is looked at.
    pub(super) px: Memo<f64>,
    /// Whether tubes are plain lines.
    pub(super) plain: RwSignal<bool>,
}

impl Pen {
    /// A width on the screen as one on the sign.
    pub(super) fn px(self, width: f64) -> String {
        (width * self.px.get()).to_string()
    }

    /// Dashes and gaps on the screen.
    pub(super) fn dashes(self, dash: f64, gap: f64) -> String {
        let px = self.px.get();
        format!("{} {}", dash * px, gap * px)
    }
}

/// All tubes of one colour, glowing or plain.
pub(super) fn tube(layer: &Layer, pen: Pen) -> impl IntoView + use<> {
    let width_mm = layer.width_mm;
    let width = move || {
        let px = pen.px.get();
        if pen.plain.get() {
            PLAIN_PX * px
        } else {
            width_mm.max(LEAST_PX * px)
        }
    };
    // A small picture glows less, or neighbouring letters would drown each other.
    let glow = move || {
        let px = pen.px.get();
        (1.1 * width_mm).clamp(2.0 * px, 14.0 * px)
    };
    let path = layer.path.clone();
    let dim = layer.dim;
    // Three strokes glow like a blur and cost a tablet far less.
    view! {
        <g class="picture-tube" class:dim=dim stroke=layer.colour.clone()>
            <path class="glow wide" d=path.clone() stroke-width=move || (width() + glow()).to_string()></path>
            <path class="glow" d=path.clone() stroke-width=move || (width() + 0.4 * glow()).to_string()></path>
            <path class="glass" d=path.clone() stroke-width=move || width().to_string()></path>
            <path class="core" d=path stroke-width=move || (width() * 0.34).to_string()></path>
        </g>
    }
}

/// Electrodes, larger than they are, but never so large that letters drown in them.
pub(super) fn electrodes(points: String, width_mm: f64, pen: Pen) -> impl IntoView {
    let width = move || {
        let px = pen.px.get();
        (1.2 * width_mm).clamp(4.0 * px, 9.0 * px)
    };
    view! {
        <path class="picture-electrode-ring" d=points.clone() stroke-width=move || width().to_string()></path>
        <path class="picture-electrode" d=points stroke-width=move || (0.6 * width()).to_string()></path>
    }
}

/// The number of a circuit, upright though the sign is seen from the back.
pub(super) fn number<A>(badge: &Badge, across: A, pen: Pen) -> impl IntoView + use<A>
where
    A: Fn(f64) -> f64 + Send + Sync + 'static,
{
    let (at, number, dim) = (badge.at, badge.number, badge.dim);
    let place = move || {
        let px = pen.px.get();
        format!(
            "translate({} {}) scale({px})",
            across(at.x - 4.0 * px),
            at.y - 4.0 * px
        )
    };
    view! {
        <g class="picture-number" class:dim=dim transform=place>
            <circle r="11"></circle>
            <text y="4.6" font-size="13">{number}</text>
        </g>
    }
}
