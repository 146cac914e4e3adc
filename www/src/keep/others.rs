//! Whether the page is open elsewhere in this browser: two of them would write over each other.

use wasm_bindgen::JsCast;
use wasm_bindgen::prelude::Closure;

const CHANNEL: &str = "tubewright-pages";
/// Said by a page that opens; pages that are open already answer it.
const OPENS: &str = "one more opens";
const HERE: &str = "one is here";

/// Calls `found` when another page of this program is open, now or later.
pub fn watch_for_others(found: impl Fn() + 'static) {
    // A browser without channels cannot tell; the page works as before.
    let Ok(channel) = web_sys::BroadcastChannel::new(CHANNEL) else {
        return;
    };
    let answers = channel.clone();
    let hear =
        Closure::<dyn Fn(web_sys::MessageEvent)>::new(move |event: web_sys::MessageEvent| {
            if event.data().as_string().as_deref() == Some(OPENS) {
                let _ = answers.post_message(&HERE.into());
            }
            found();
        });
    channel.set_onmessage(Some(hear.as_ref().unchecked_ref()));
    // The page listens as long as it lives.
    hear.forget();
    let _ = channel.post_message(&OPENS.into());
}
