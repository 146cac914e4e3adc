//! # The page
//!
//! A thin shell: it edits a job and a book, calls [`tubewright::workup()`], and draws the result.
//!
//! | room | what it holds | never |
//! |---|---|---|
//! | [`document`] | the open job and book with undo; what is to be kept | touches the browser |
//! | [`keep`] | the device's store | knows what it keeps |
//! | [`files`] | opening, saving, the demo | decides what a bad file leads to beyond a sentence |
//! | [`desk`] | signals that tie the above to the places | draws |
//! | [`pictures`] | the sign, the loading bar | works out figures |
//! | [`places`] | one file for each place, and the frame around them | works out figures |

#![allow(
    unreachable_pub,
    reason = "the component macro makes what it writes pub, wherever it stands"
)]
#![allow(
    clippy::needless_pass_by_value,
    reason = "what a component is given, it is given for good"
)]

pub mod desk;
pub mod document;
pub mod files;
pub mod keep;
pub mod pictures;
pub mod places;

use leptos::prelude::*;

/// Puts the page into the document.
pub fn start() {
    std::panic::set_hook(Box::new(|info| {
        // The sentence is shown by start.js, which outlives a stopped core.
        leptos::logging::error!("{info}");
    }));
    mount_to_body(|| {
        let desk = desk::Desk::new(files::demo::document());
        provide_context(desk);
        desk.start_keeping();
        view! { <places::Frame/> }
    });
}
