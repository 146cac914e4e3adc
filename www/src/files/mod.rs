//! Files: reading what a person opens, saving what is on the desk, and the demo.
//!
//! Reading is plain Rust over bytes: a whole document, entries of a list, or a sentence. The old
//! document stays on the desk until the new one is read, and undo brings it back after.

pub mod demo;
mod open;
mod read;
mod save;

pub use open::{choose, dropped, put};
pub use read::{Opened, merge, read};
pub use save::{Saved, save};
