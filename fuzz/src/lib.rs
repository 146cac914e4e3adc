//! What must hold of anything that is read, and a small mutator that damages files.
//!
//! The tests of the core read both files of this crate too (`tests/rooms/damaged.rs`), so that what
//! runs for seconds there, for minutes by `long` and for as long as one likes by libFuzzer is the same.

pub mod mutate;
pub mod targets;
