//! The open job and book with their history: plain Rust, no browser.
//!
//! Every edit is a step that can be undone. What is to be kept on the device comes out as writes
//! of named records; [`crate::keep`] stores them and knows nothing of their meaning.

mod history;
mod records;

pub use history::Document;
pub use records::{Kept, Write};
