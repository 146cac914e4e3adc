//! Sizes the browser knows: of the window, and of a part of the page.

use leptos::prelude::*;
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;

/// Height of the window in pixels.
pub(super) fn window_height() -> RwSignal<f64> {
    fn now() -> f64 {
        let height = window().inner_height().ok();
        height.and_then(|height| height.as_f64()).unwrap_or(1180.0)
    }
    let height = RwSignal::new(now());
    let handle = window_event_listener(leptos::ev::resize, move |_| height.set(now()));
    on_cleanup(move || handle.remove());
    height
}

/// Width in pixels that an element has for what is in it, once it is on the page.
pub(super) fn width_of(element: NodeRef<leptos::html::Div>) -> RwSignal<f64> {
    let width = RwSignal::new(likely_width());
    let watching = StoredValue::new_local(None);
    Effect::new(move |_| {
        let Some(element) = element.get() else { return };
        let watched = element.clone();
        let measure = move || {
            let now = f64::from(watched.client_width());
            // An element that is not drawn has no width worth drawing for.
            if now > 0.0
                && width
                    .try_get_untracked()
                    .is_some_and(|before| before != now)
            {
                width.try_set(now);
            }
        };
        measure();
        // In the next frame: what changes size while sizes are being told, browsers call an error.
        let told = Closure::<dyn FnMut()>::new(move || request_animation_frame(measure.clone()));
        if let Ok(observer) = web_sys::ResizeObserver::new(told.as_ref().unchecked_ref()) {
            observer.observe(&element);
            watching.set_value(Some((observer, told)));
        }
    });
    on_cleanup(move || {
        watching.try_update_value(|watching| {
            if let Some((observer, _told)) = watching.take() {
                observer.disconnect();
            }
        });
    });
    width
}

/// What a picture on the page is likely to have, as in style.css, so that it need not be drawn twice.
fn likely_width() -> f64 {
    let page = document()
        .document_element()
        .map_or(820.0, |page| f64::from(page.client_width()));
    let beside = match page {
        ..=560.0 => 20.0,
        ..1000.0 => 28.0,
        _ => 28.0 + 84.0,
    };
    (page - beside).max(200.0)
}
